"""What kind of equilibrium a state is, and what becomes of a case that has none.

Converged is not stable.  With the tangent K and the scale M of `Problem.mass`, one or two banded factorisations tell

    K - zM positive definite           stable       (every eigenvalue of K x = lam M x above z)
    only K + zM positive definite      neutral      (a motion that costs nothing, |lam| <= z)
    neither                            unstable     (some lam < -z)

with z = `ZERO`.  An unstable state is pushed along its lowest mode, both ways, and solved again: where it comes to rest in a stable
state nearby, the case branches and stands there.

No equilibrium is not "solver failed": gravity has no floor in the equations, and a mast that falls converges hanging upside down.
So a case is given up when a foot-head line has turned over `OVERTURNED` from the drawing, and any state more than `FAR` from the
setting, or not found at all, must be reached along a path: from the setting toward the case, all departures together (loads,
ice, temperature; the end forces of a cable taken away fade out), in steps that halve where the next state is not a stable one
close to the last.  A path that cannot be followed ends at the share of the load where the structure falls.

Source: Thompson & Hunt, A General Theory of Elastic Stability (1973), for the meaning of the tangent's definiteness and of branching.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, fields, replace
from typing import Any

import numpy as np
from numpy.typing import NDArray
from scipy.linalg import eig_banded

from guys import band, solver
from guys.equilibrium import Index, Problem, State
from guys.loads import LoadCases
from guys.rotation import Array, dot

ZERO = 1e-7
"""Least eigenvalue relative to weight/height that still counts as zero: rounding of the stiffest element gives a tenth of it."""
OVERTURNED = math.radians(60)
FAR = math.radians(10)
NEXT = math.radians(12)
"""Greatest turn of a foot-head line between two neighbouring states of a path."""
AWAY = math.radians(15)
"""Turn of a foot-head line past which a search for the next state of a path has left it."""
PUSHES = (0.003, 0.02, 0.08)
"""Amplitudes of a push along the lowest mode, of the height, tried in turn."""
FIRST_STEP = 0.25
LEAST_STEP = 1 / 256
"""Steps of a path, of the whole load; below the least the path has ended."""
CASE_ROUNDS = 60
"""Rounds for a case from the setting, or pushed aside: what takes longer is found quicker along its path."""
PATH_ROUNDS = 25
"""Rounds of the solver for a step of a path, which starts close to its answer."""
LAST_ROUNDS = 100
"""Rounds of its last step: a structure that snaps from a stiff state takes so many to show that it falls."""
FINER = 1 / 16
"""A path on which the solver fails while the structure is still stiff is followed this much finer before that is called a fault."""
SOFT = 0.3
"""Share of its still-air value to which the least eigenvalue has fallen where a structure falls; above it a failed step is the solver's."""
FREE = 3
"""Motions that a spar on its foot may have free: sway both ways, and spin."""
STABLE, NEUTRAL, UNSTABLE, NONE, FAILED = range(5)
"""Codes of a case; FAILED: the solver did not converge, and along the path, where one was followed, the structure was still stiff."""


@dataclass(frozen=True)
class Mode:
    """Lowest modes of one state: eigenvalues (mode,) relative to M, ascending, and shapes (mode, node, 6), the greatest move plus one."""

    value: Array
    shape: Array


@dataclass(frozen=True)
class Judged:
    """What became of every case.

    state : the equilibrium found, or the last stable one on the path of a case that has none;  code, error, rounds : (case,)
    lost_at : (case,) share of the load at which its path ended, NaN where none was lost;  branched : (case,) stands off its straight branch
    stuck : (case,) the solver ran out of rounds without a spar turning over or, along a path, swinging far
    drifts : (case,) the path ended because the load drives a motion that nothing resists
    mirror : {case: the other stable state of a branch}
    beyond : {case: the first state past the end of its path, on the way down}
    """

    state: State
    code: Index
    error: Array
    rounds: Index
    lost_at: Array
    branched: NDArray[np.bool_]
    stuck: NDArray[np.bool_]
    drifts: NDArray[np.bool_]
    mirror: dict[int, State]
    beyond: dict[int, State]

    def take(self, rows: Index) -> Judged:
        """The cases `rows`."""
        kept: dict[str, Any] = {f.name: getattr(self, f.name)[rows] for f in fields(self) if f.name not in ("state", "mirror", "beyond")}
        place = {int(row): k for k, row in enumerate(rows)}
        mirror, beyond = ({place[case]: s for case, s in states.items() if case in place} for states in (self.mirror, self.beyond))
        return Judged(self.state.take(rows), **kept, mirror=mirror, beyond=beyond)


def classify(problem: Problem, state: State) -> Index:
    """STABLE, NEUTRAL or UNSTABLE for every case, by the tangent of the present position."""
    code = np.full(problem.cases, STABLE)
    if problem.cases == 0:
        return code
    k_band = tangent(problem, state)
    rest = np.arange(problem.cases)
    for sign, worse in ((-1.0, NEUTRAL), (1.0, UNSTABLE)):
        shifted = k_band[rest]
        shifted[..., 0] += sign * ZERO * problem.mass
        rest = rest[~band.factor(shifted)[1]]
        code[rest] = worse
        if len(rest) == 0:
            break
    return code


def tangent(problem: Problem, state: State) -> Array:
    """The tangent band with the axial forces of the present position."""
    present = replace(state, axial=np.full_like(state.axial, np.nan))
    return problem.tangent(present, problem.evaluate(present))


def modes(problem: Problem, state: State, count: int | None = None) -> Mode:
    """The `count` lowest modes of a problem of one case; None: as many as show every free motion and one more."""
    count = _enough(problem) if count is None else count
    root = np.sqrt(problem.mass)
    value, vector = eig_banded(_scaled(tangent(problem, state)[0], root), lower=True, select="i", select_range=_lowest(root, count))
    shapes = np.array([problem.whole_step(state, (v / root)[None])[0] for v in vector.T])
    moves = np.concatenate([shapes[..., :3], shapes[..., 3:] * problem.structure.height], axis=-1).reshape(len(shapes), -1)
    greatest = np.take_along_axis(moves, np.argmax(np.abs(moves), axis=1)[:, None], axis=1)
    return Mode(np.asarray(value), shapes / greatest[:, :, None])


def _enough(problem: Problem) -> int:
    """Modes among which is every free motion and one more."""
    return FREE * len(problem.structure.scenario.spar) + 1


def _scaled(k_band: Array, root: Array) -> Array:
    """Lower band of M^-1/2 K M^-1/2, diagonals first, from the rows of K's."""
    n, width = k_band.shape
    scaled = np.zeros((width, n))
    for d in range(min(width, n)):
        scaled[d, : n - d] = k_band[: n - d, d] / (root[: n - d] * root[d:])
    return scaled


def _lowest(root: Array, count: int) -> tuple[int, int]:
    return 0, min(count, len(root)) - 1


def turned_over(problem: Problem, state: State, _: Index | None = None) -> NDArray[np.bool_]:
    """Cases in which some foot-head line has turned past OVERTURNED from the drawing."""
    drawn = problem.structure.axes[:, 2]
    return np.asarray((dot(problem.heading(state), drawn) < math.cos(OVERTURNED)).any(axis=1))


def turn_between(problem: Problem, a: State, b: State) -> Array:
    """(case,) greatest angle [rad] between the foot-head lines of two states."""
    p, q = problem.heading(a), problem.heading(b)
    angle = 2 * np.arcsin(np.minimum(1.0, 0.5 * np.linalg.norm(p - q, axis=-1)))
    return np.asarray(angle.max(axis=1))


def judge(problem: Problem, setting: State, loads_at_setting: LoadCases, least_step: float = LEAST_STEP) -> Judged:
    """Solve every case from the setting and say what kind of equilibrium it has.

    setting : the setting state, `loads_at_setting` its loads (one case, or one for every case);  least_step : how finely the end of a path
    is found, of the load
    """
    each = np.zeros(problem.cases, dtype=np.int64) if len(setting.u) == 1 else np.arange(problem.cases)
    first, loads_at_setting = setting.take(each), loads_at_setting.take(each)
    judged = settle(problem, first, CASE_ROUNDS)
    away = turn_between(problem, judged.state, first)
    doubtful = np.flatnonzero((judged.code >= UNSTABLE) | (away > FAR))
    if len(doubtful):
        _follow(problem, first.take(doubtful), loads_at_setting.take(doubtful), judged, doubtful, least_step)
    return judged


def settle(problem: Problem, start: State, rounds: int = solver.ROUNDS) -> Judged:
    """Solve from `start`, classify, and push what is unstable; cases that turn over are NONE, those not found otherwise FAILED."""
    return _settled(problem, solver.solve(problem, start, turned_over, rounds), np.full(problem.cases, True))


def step_on(problem: Problem, last: State, rounds: int | Index = PATH_ROUNDS, pushed: NDArray[np.bool_] | bool = True) -> Judged:
    """The same for the next states of paths, from the last ones.

    rounds : of the solver, one number or (case,);  pushed : (case,) which to push if unstable
    A search that turns a foot-head line by more than `AWAY` has left its path and is given up: NONE.
    """
    out = solver.solve(problem, last, _gone_from(last, AWAY), rounds, spin_after=0)
    return _settled(problem, out, np.broadcast_to(pushed, problem.cases))


def _gone_from(start: State, angle: float) -> solver.Stop:
    """Tells which cases have turned over, or a foot-head line by more than an angle from `start`."""
    return lambda part, here, rows: turned_over(part, here) | (turn_between(part, here, start.take(rows)) > angle)


def _settled(problem: Problem, out: solver.Outcome, pushed: NDArray[np.bool_]) -> Judged:
    code = np.full(problem.cases, NONE)
    found = np.flatnonzero(out.converged & ~out.stopped)
    if len(found):
        code[found] = classify(problem.take(found), out.state.take(found))
    no, nowhere = np.zeros(problem.cases, bool), np.full(problem.cases, np.nan)
    stuck = ~out.converged & ~out.stopped
    code[stuck] = FAILED
    judged = Judged(out.state, code, out.error, out.rounds, nowhere, no, stuck, no.copy(), {}, {})
    _push(problem, judged, np.flatnonzero((code == UNSTABLE) & pushed))
    return judged


def _push(problem: Problem, judged: Judged, cases: Index) -> None:
    """Push unstable cases along their lowest modes both ways; write the stable states they come to, if near, and the mirrors.

    All amplitudes at once; the first that comes to rest nearby counts.
    """
    if len(cases) == 0:
        return
    each = 2 * len(PUSHES)
    rows = np.repeat(cases, each)
    many, there = problem.take(rows), judged.state.take(rows)
    shape = np.array([modes(problem.take(c), judged.state.take(c), 1).shape[0] for c in cases[:, None]])
    way = np.tile(np.outer(PUSHES, (1.0, -1.0)).ravel(), len(cases))[:, None, None] * problem.structure.height
    step = band.pick(many.pattern, way * np.repeat(shape, each, axis=0))
    out = solver.solve(many, many.advance(there, many.evaluate(there), step), _gone_from(there, 3 * FAR), CASE_ROUNDS)
    good = out.converged & ~out.stopped & (turn_between(many, out.state, there) < 2 * FAR)
    held = np.flatnonzero(good)
    if len(held):
        good[held] = classify(many.take(held), out.state.take(held)) <= NEUTRAL
    rests = np.logical_or(*good.reshape(len(cases), len(PUSHES), 2).transpose(2, 0, 1))
    for k in np.flatnonzero(rests.any(axis=1)):
        _stand_aside(judged, int(cases[k]), out, each * int(k) + 2 * int(np.argmax(rests[k])), good)


def _stand_aside(judged: Judged, case: int, out: solver.Outcome, first: int, good: NDArray[np.bool_]) -> None:
    """Write the stable state beside an unstable one: of the pair pushed from it, `first` and the next, the first that is good."""
    chosen, other = (first, first + 1) if good[first] else (first + 1, first)
    judged.state.put(np.array([case]), out.state.take(np.array([chosen])))
    judged.code[case] = STABLE
    judged.error[case], judged.branched[case] = out.error[chosen], True
    judged.rounds[case] += out.rounds[chosen]
    if good[other]:
        judged.mirror[case] = out.state.take(np.array([other]))


@dataclass
class _Path:
    """Where each followed case stands: share reached, step to try, the state there."""

    reached: Array
    step: Array
    state: State
    branched: NDArray[np.bool_]
    stuck: NDArray[np.bool_]
    drifts: NDArray[np.bool_]
    mirror: dict[int, State]
    beyond: dict[int, State]
    error: Array


def _follow(problem: Problem, setting: State, start: LoadCases, judged: Judged, rows: Index, least_step: float) -> None:
    """Follow the path of the cases `rows`, each from its own start, and write what is found at its end."""
    whole = problem.take(rows)
    n = len(rows)
    branched, ended, drifts = np.zeros((3, n), bool)
    path = _Path(np.zeros(n), np.full(n, FIRST_STEP), setting.take(np.arange(n)), branched, ended, drifts, {}, {}, np.full(n, np.nan))
    _walk(whole, start, path, np.arange(n), least_step)
    stuck = _still_stiff(whole, setting, start, path)
    if len(stuck):
        _walk(whole, start, path, stuck, least_step * FINER)
        stuck = _still_stiff(whole, setting, start, path)
    path.stuck[:] = False
    path.stuck[stuck] = True
    near = turn_between(whole, judged.state.take(rows), setting) < FAR
    for k, case in enumerate(rows):
        _arrive(whole, judged, path, k, int(case), bool(near[k]))


def _walk(whole: Problem, start: LoadCases, path: _Path, rows: Index, least_step: float) -> None:
    """Step the paths `rows` on until they arrive or their steps fall below the least."""
    while len(open_ := rows[(path.reached[rows] < 1) & (path.step[rows] >= least_step)]):
        _one_step(whole, start, path, open_, path.step[open_] < 2 * least_step)


def _still_stiff(whole: Problem, setting: State, start: LoadCases, path: _Path) -> Index:
    """Paths on which the solver ran out of rounds although the structure has not softened: it has not lost its stability yet.

    Left out, and marked as drifting, are those whose last state is neutral: a load that drives a free motion has no equilibrium near.
    """
    ended = np.flatnonzero(path.stuck & (path.reached < 1))
    if len(ended) == 0:
        return ended
    part = whole.take(ended)
    there = replace(part, loads=part.loads.between(start.take(ended), path.reached[ended]))
    drifts = classify(there, path.state.take(ended)) == NEUTRAL
    path.drifts[ended[drifts]] = True
    still = replace(part, loads=start.take(ended))
    least, at_start = least_costs(there, path.state.take(ended)), least_costs(still, setting.take(ended))
    return np.asarray(ended[(least > SOFT * at_start) & ~drifts])


def least_costs(problem: Problem, state: State) -> Array:
    """(case,) least eigenvalue that is not a free motion's; infinite where there is none such among the lowest."""
    root, out = np.sqrt(problem.mass), np.full(problem.cases, np.inf)
    some = _lowest(root, _enough(problem))
    for k, k_band in enumerate(tangent(problem, state)):
        value = eig_banded(_scaled(k_band, root), lower=True, eigvals_only=True, select="i", select_range=some)
        out[k] = np.min(value[value > ZERO], initial=np.inf)
    return out


def _arrive(whole: Problem, judged: Judged, path: _Path, k: int, case: int, near: bool) -> None:
    """Write what the path of one case came to.  An unstable equilibrium close to the setting stays as found: `unstable`, not `none`."""
    judged.mirror.pop(case, None)
    judged.drifts[case] = path.drifts[k]
    arrived = path.reached[k] >= 1
    if not arrived:
        if k in path.beyond:
            judged.beyond[case] = path.beyond[k]
        judged.lost_at[case] = path.reached[k]
        judged.stuck[case] = path.stuck[k]
        if judged.code[case] == UNSTABLE and near:
            return
        judged.code[case] = FAILED if path.stuck[k] else NONE
    one = np.array([k])
    judged.state.put(np.array([case]), path.state.take(one))
    if arrived:
        judged.code[case] = classify(whole.take(one), path.state.take(one))[0]
        judged.error[case], judged.branched[case], judged.stuck[case] = path.error[k], path.branched[k], False
        if k in path.mirror:
            judged.mirror[case] = path.mirror[k]


def _one_step(whole: Problem, start: LoadCases, path: _Path, open_: Index, last: NDArray[np.bool_]) -> None:
    """Try the next share of every open path from its last state; `last`: the path ends where this step fails."""
    share = np.minimum(1.0, path.reached[open_] + path.step[open_])
    part = whole.take(open_)
    there = replace(part, loads=part.loads.between(start.take(open_), share))
    before = path.state.take(open_)
    found = step_on(there, before, np.where(last, LAST_ROUNDS, PATH_ROUNDS))
    near = turn_between(there, found.state, before) < NEXT
    good = (found.code <= NEUTRAL) & near
    path.state.put(open_[good], found.state.take(np.flatnonzero(good)))
    path.reached[open_[good]] = share[good]
    path.error[open_[good]] = found.error[good]
    path.branched[open_] |= good & found.branched
    path.stuck[open_] = found.stuck & near
    for k in np.flatnonzero(~good & ~(found.stuck & near)):
        path.beyond[int(open_[k])] = found.state.take(np.array([k]))
    for k in np.flatnonzero(good):
        path.mirror.pop(int(open_[k]), None)
        if int(k) in found.mirror:
            path.mirror[int(open_[k])] = found.mirror[int(k)]
    path.step[open_] = np.where(good, 1.5 * path.step[open_], 0.5 * path.step[open_])


def falling_part(problem: Problem, before: State, after: State) -> tuple[int, float]:
    """Which spar turns most between two states of one case, and the bearing [rad] its head goes toward."""
    change = (problem.heading(after) - problem.heading(before))[0]
    k = int(np.argmax(np.linalg.norm(change, axis=-1)))
    return k, float(np.arctan2(change[k, 0], change[k, 1])) % (2 * math.pi)
