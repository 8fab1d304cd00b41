"""Initial tensions: the unstressed lengths that give them, and the setting position.

Tensions are given at the `to` end, in still air under dead load, at the setting temperature, with all cables in place.  Lengths
found at the drawn geometry would be 4 to 19 % off, because the spar shortens and bends; so Newton is done on the whole structure at once,
net forces and measures of what is asked for against node poses and the logarithms of the lengths (`guys.lengths`).

`plumb`: tensions are targets.  Those nearest (least squares of relative differences, none below `LEAST_SHARE` of its target) are found
that leave every spar where cables hold it as drawn, i.e. without a displacement square to its axis.

Layouts that differ only in where anchors stand are set side by side, a case each; what one comes to does not depend on the others.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from guys import lengths, solver, stability
from guys.constants import NONZERO
from guys.equilibrium import Index, Problem, State, side_by_side
from guys.errors import Fault, ScenarioError
from guys.lengths import Asked, Rates, changed, rates
from guys.loads import CaseLine, LoadCases, Placed, as_drawn, assemble, setting_line
from guys.rotation import Array
from guys.scenario import Scenario
from guys.scenario.reader import fault_at
from guys.structure import Structure

MET = 1e-10
"""Relative difference from a target that counts as met ..."""
ROUNDED = 1e-15
"""... and what rounding of chord over length adds for a straight cable, over its stretch."""
ROUNDS = 40
FIRST_LEAD = 1 / 4
LEAST_LEAD = 1 / 200
"""First and least step, of the whole way, when measures are led to their targets."""
LEAST_MEASURE = 1e-12
"""A measure below it has no useful logarithm: the cable is slack to rounding."""
RANK = 1e-14
"""Singular values below this share of the greatest count as zero: changes of length together that change nothing asked for."""
AT_BOUND = 1e-9
"""A tension this share of its target below its bound is at the bound."""
WILD = 0.5
"""Change of ln L0 in one round that tells Newton has lost its way."""
STEP = 0.7
"""Greatest change of ln T aimed at in one round."""
PLACED = 1e-10
"""Change of ln L0 at which a plumb setting is found: the move it makes is below a micrometre."""
PATIENCE, ASTRAY = 10, 1.0
"""Rounds after which a plumb setting still out of balance by that share of the reference force is given up: no tensions hold it there, as
where the anchors stand on one side."""
LEAST_SHARE = 0.1
"""Least tension of a plumb setting, of its target."""
AS_DRAWN = 1e-5
"""Displacement, of the height, that weighs as much as a tension off its target by all of it."""
PLUMB_TURN = 0.01
"""[rad] greatest turn in one round of a plumb setting, and move of the height; it stays close to the drawing."""

Flags = NDArray[np.bool_]


@dataclass(frozen=True, eq=False)
class Setting:
    """length (cable,) [m] unstressed at the setting temperature; judged: the setting case alone; loads; problem of that one case."""

    length: Array
    judged: stability.Judged
    problem: Problem

    @property
    def state(self) -> State:
        """The setting position."""
        return self.judged.state

    @property
    def loads(self) -> LoadCases:
        """Dead load alone."""
        return self.problem.loads

    @property
    def stands(self) -> bool:
        """Whether the structure stands in still air."""
        return int(self.judged.code[0]) <= stability.NEUTRAL

    def under(self, lines: Sequence[CaseLine]) -> Problem:
        """The structure so set under the loads of case lines, worked out on its setting position."""
        placed = Placed(self.state.u[0], self.state.psi[0], self.length)
        return replace(self.problem, loads=assemble(self.problem.structure, lines, placed))


def find(structure: Structure) -> Setting:
    """The setting of a structure.

    Raises ScenarioError where no still-air state meets a tension asked for; that is so too where the only one lies down, although with
    the lengths that would give the tensions as drawn the structure stands.
    """
    (found,) = find_each([structure])
    if isinstance(found, ScenarioError):
        raise found
    return found


def find_each(structures: Sequence[Structure]) -> list[Setting | ScenarioError]:
    """The settings of structures that differ only in where anchors stand; in place of one the error that `find` raises."""
    asked = lengths.asked_of(structures[0].scenario)
    alone = [_as_given(structure) for structure in structures]
    problem = side_by_side(alone)
    first, least = lengths.first(problem, asked)
    unmet = [_unmet(s.scenario, asked, some) for s, some in zip(structures, least, strict=True)]
    rows = np.array([k for k, error in enumerate(unmet) if error is None], dtype=np.int64)
    out: list[Setting | ScenarioError] = [error or ScenarioError([]) for error in unmet]
    if len(rows) == 0:
        return out
    found, judged, met = _set(problem.take(rows), first[rows], asked)
    for k, row in enumerate(rows):
        if met[k]:
            out[row] = Setting(found[k], judged.take(np.array([k])), replace(alone[row], length=found[k]))
        else:
            out[row] = ScenarioError([_not_met(structures[row].scenario, asked)])
    return out


def _as_given(structure: Structure) -> Problem:
    """The setting case, with the lengths that are given and 1 m for those to be found."""
    scenario = structure.scenario
    length = np.array([1.0 if c.length is None else c.length for c in scenario.cable])
    return Problem(structure, assemble(structure, [setting_line(scenario)], as_drawn(structure, length)), length)


def _unmet(scenario: Scenario, asked: Asked, least: Array) -> ScenarioError | None:
    """What is said of targets of which there is no less than `least` (asked,) of them; zero: there is."""
    faults = []
    for k in np.flatnonzero(~(least < 1)):
        c = scenario.cable[asked.index[k]]
        how = "tight" if c.tight else "tension"
        text = (
            f'"{c.name}": {asked.target[k]:.3g} N cannot be met: the cable\'s own weight gives at least {least[k] * asked.target[k]:.3g} N '
            "at its anchor end; give more"
        )
        faults.append(fault_at(scenario, (*c.key, how), text))
    return ScenarioError(faults) if faults else None


def _set(problem: Problem, first: Array, asked: Asked) -> tuple[Array, stability.Judged, Flags]:
    """Lengths (case, cable) and verdicts of every case set, from lengths (case, asked) to begin with, and whether the targets are met."""
    begun = changed(problem, np.log(first), asked)
    way, met = _Way(begun.length.copy(), begun.drawn()), np.ones(problem.cases, bool)
    if len(asked.index):
        met = (_plumb if problem.structure.scenario.setting.plumb else _meet)(begun, way, asked)
    judged = stability.settle(replace(begun, length=way.length), way.state)
    over = np.flatnonzero(stability.turned_over(begun, judged.state))
    if len(over):
        other = begun.take(over)
        met[over] &= stability.settle(other, other.drawn()).code > stability.NEUTRAL
    return way.length, judged, met


@dataclass
class _Way:
    """How far the search has come: lengths (case, cable) [m] and states."""

    length: Array
    state: State

    def at(self, problem: Problem, rows: Index) -> tuple[Problem, State]:
        """Some of the cases there."""
        return replace(problem.take(rows), length=self.length[rows]), self.state.take(rows)

    def put(self, rows: Index, length: Array, state: State) -> None:
        """Go on with the cases `rows`."""
        self.length[rows] = length
        self.state.put(rows, state)


def _meet(problem: Problem, way: _Way, asked: Asked) -> Flags:
    """Bring every measure to one; whether that is so.

    Where Newton from the drawing does not get there (targets that do not balance pull a head over by metres), the measures are led
    from what the first lengths give to one, in steps that halve where they fail.
    """
    begun = _Way(way.length.copy(), way.state.take(np.arange(problem.cases)))
    met = _newton(problem, way, asked, np.zeros((problem.cases, len(asked.index))))
    for k in np.flatnonzero(~met):
        one = np.array([k])
        there = _led(*begun.at(problem, one), asked)
        if there is not None:
            way.put(one, there.length, there.state)
            met[k] = True
    return met


def _led(problem: Problem, state: State, asked: Asked) -> _Way | None:
    """The same for one case step by step; None where a step fails however short."""
    out = solver.solve(problem, state)
    if not out.converged[0]:
        return None
    here = _Way(problem.length, out.state)
    start = np.log(np.maximum(rates(problem, out.state, asked).measure, LEAST_MEASURE))
    done, step = 0.0, FIRST_LEAD
    while done < 1 and step > LEAST_LEAD:
        there = _Way(here.length.copy(), here.state.take(np.array([0])))
        if _newton(problem, there, asked, start * (1 - min(1.0, done + step)))[0]:
            here, done, step = there, min(1.0, done + step), 1.5 * step
        else:
            step /= 2
    return here if done >= 1 else None


def _newton(problem: Problem, way: _Way, asked: Asked, goal: Array) -> Flags:
    """Newton on net forces and measures together until ln m = goal (case, asked), lengths and nodes at once; whether it got there.

    ln m of a catenary and m itself of a straight cable are what lengths change evenly.
    """
    straight = lengths.is_straight(problem)
    close = MET + ROUNDED / lengths.stretch_wanted(problem, asked) if straight else MET
    met, open_ = np.zeros(problem.cases, bool), np.arange(problem.cases)
    for _ in range(ROUNDS):
        part, here = way.at(problem, open_)
        now = rates(part, here, asked)
        scale = np.ones_like(now.measure) if straight else 1 / np.maximum(now.measure, LEAST_MEASURE)
        miss = now.measure - np.exp(goal[open_]) if straight else np.clip(-np.log(scale) - goal[open_], -STEP, STEP)
        done = (np.abs(miss) < close).all(axis=1) & (now.error < solver.ENOUGH)
        met[open_[done]] = True
        change = np.array([
            np.linalg.lstsq(a, b, rcond=RANK)[0] for a, b in zip(scale[..., None] * now.rate, -miss - scale * now.drift, strict=True)
        ])  # fmt: skip
        open_ = _step(way, open_, part, here, now, change, asked, ~done, (solver.TURN_CAP, solver.MOVE_CAP, WILD))
        if len(open_) == 0:
            break
    return met


def _step(
    way: _Way, rows: Index, part: Problem, here: State, now: Rates, change: Array, asked: Asked, on: Flags, caps: tuple[float, float, float]
) -> Index:
    """Move the cases `on` of `rows` on by a change of ln L0 (case, asked); those that did.

    caps : greatest turn [rad] and move (of the height) of a node, to which a step is shortened, and change of ln L0, past which it is not
    taken
    """
    turning, moving, wild = caps
    step = now.settle + (now.step @ change[..., None])[..., 0]
    size = np.max(np.abs(step), axis=1, initial=0.0)
    limited = np.max(np.abs(part.limited(here, step, turning, moving * part.structure.height)), axis=1, initial=0.0)
    share = np.where(size == 0, 1.0, limited / np.where(size == 0, 1.0, size))
    on = on & np.isfinite(share) & (np.max(np.abs(share[:, None] * change), axis=1, initial=0.0) <= wild)
    taken = np.where(on, share, 0.0)[:, None]
    after = part.advance(here, now.found, np.where(on[:, None], taken * step, 0.0))
    length = changed(part, np.where(on[:, None], taken * change, 0.0), asked).length
    kept = np.flatnonzero(on)
    way.put(rows[kept], length[kept], after.take(kept))
    return np.asarray(rows[kept])


def _not_met(scenario: Scenario, asked: Asked) -> Fault:
    names = ", ".join(f'"{scenario.cable[k].name}"' for k in asked.index)
    text = (
        f"no still-air state was found that meets the initial tensions of {names} together: they do not balance; "
        "give tensions that balance at each level, or setting.plumb = true"
    )
    first = scenario.cable[asked.index[0]]
    return fault_at(scenario, (*first.key, "tight" if first.tight else "tension"), text)


def _held_nodes(structure: Structure) -> list[tuple[int, int]]:
    nodes = np.unique(np.concatenate([structure.cables.a.node, structure.cables.b.node]))
    out = []
    for node in nodes.tolist():
        k = int(structure.spar[node])
        if k >= 0:
            tip = int(structure.head.node[k]) if structure.scenario.spar[k].rigid else node
            out.append((tip, k))
    return out


def _plumb(problem: Problem, way: _Way, asked: Asked) -> Flags:
    """Bring the tensions to those nearest the targets that leave the spars as drawn; all are found."""
    height, open_ = problem.structure.height, np.arange(problem.cases)
    for round_ in range(ROUNDS):
        part, here = way.at(problem, open_)
        now = rates(part, here, asked)
        away, slope, settled = _away(part, here, now)
        asked_for = zip(now.measure + now.drift, now.rate, (away + settled) / height, slope / height, strict=True)
        change = np.array([_nearest(*each) for each in asked_for])
        on = (np.abs(change).max(axis=1) >= PLACED) | (now.error >= solver.ENOUGH)
        on &= (round_ < PATIENCE) | (now.error < ASTRAY)
        open_ = _step(way, open_, part, here, now, change, asked, on, (PLUMB_TURN, PLUMB_TURN, math.inf))
        if len(open_) == 0:
            break
    return np.ones(problem.cases, bool)


def _away(problem: Problem, state: State, now: Rates) -> tuple[Array, Array, Array]:
    """Displacements to undo (case, row), their derivatives (case, row, asked), what settling adds (case, row); a rigid spar's turn counts
    at its head."""
    s = problem.structure
    whole = lengths.whole_steps(problem, state, np.concatenate([now.step, now.settle[..., None]], axis=2))
    value, slope = [], []
    for node, k in _held_nodes(s):
        across = s.axes[k, :2]
        arm = s.head.arm[k] if s.scenario.spar[k].rigid else np.zeros(3)
        lever = state.psi[:, node] @ arm
        value.append((state.u[:, node] + lever) @ across.T)
        moved = whole[:, :, node, :3] + np.cross(whole[:, :, node, 3:], (arm + lever)[:, None])
        slope.append(np.swapaxes(moved @ across.T, 1, 2))
    by_step = np.concatenate(slope, axis=1)
    return np.concatenate(value, axis=1), by_step[..., :-1], by_step[..., -1]


def _nearest(now: Array, rate: Array, away: Array, slope: Array) -> Array:
    """Change of ln L0 (asked,) of one case that brings the tensions nearest their targets with the displacements undone.

    One least squares of relative differences from the targets and of displacements (of the height) over `AS_DRAWN`: displacements that
    tensions can undo come out at a thousandth of that and less, those they could undo only by multiples of themselves stay.
    """
    rows = np.concatenate([rate, slope / AS_DRAWN])
    return _bounded(rows, np.concatenate([1 - now, -away / AS_DRAWN]), rate, LEAST_SHARE - now)


def _bounded(a: Array, wanted: Array, g: Array, least: Array) -> Array:
    """Least squares |a x - wanted| with g x >= least.

    With a = U S V^T and x = x0 + V S^-1 z about the unbounded answer x0 it is the least |z| with h z >= least - g x0, which non-negative
    least squares finds (Lawson & Hanson, Solving Least Squares Problems, 1974, ch. 23, problem LDP).  x0 where no x keeps the bounds.
    """
    u, s, vt = np.linalg.svd(a, full_matrices=False)
    kept = s > RANK * s[0]
    back = vt[kept].T / s[kept]
    x0 = back @ (u[:, kept].T @ wanted)
    short = least - g @ x0
    if (short <= AT_BOUND).all():
        return np.asarray(x0)
    from scipy.optimize import nnls

    h = g @ back
    rows = np.vstack([h.T, short])
    goal = np.append(np.zeros(len(h.T)), 1.0)
    rest = rows @ nnls(rows, goal)[0] - goal
    return np.asarray(x0 if rest[-1] > -NONZERO else x0 - back @ (rest[:-1] / rest[-1]))
