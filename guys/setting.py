"""Initial tensions: the unstressed lengths that give them, and the setting position.

Tensions are given at the `to` end, in still air under dead load, at the setting temperature, with all cables in place.  Lengths
found at the drawn geometry would be 4 to 19 % off, because the spar shortens and bends; so Newton is done on the whole structure at once,
net forces and measures of what is asked for against node poses and the logarithms of the lengths.  A cable's measure m is

    tension given   |T_A| / target for a catenary;  (chord/L0 - 1) EA / target for a straight cable, slack or not
    tight           |T| at mid-length / (w L0) for a catenary;  1 + (chord/L0 - 1) / TIGHT for a straight cable

and m = 1 is wanted.  The derivatives are exact: a change of L0 changes the net forces by -F^-1 dr/dL0 and half the weight at each end; the
nodes answer by du = -K^-1 dg with the tangent already factored; and the end forces follow.

The tension at the anchor against the unstressed length turns back for very slack cables (least value about a fifth of the cable's
weight): the tauter branch is taken, and a target below the least cannot be met.

`plumb`: tensions are targets.  Those nearest (least squares of relative differences, none below `LEAST_SHARE` of its target) are found
that leave every spar where cables hold it as drawn, i.e. without a displacement square to its axis.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from guys import band, cable, solver, stability
from guys.constants import NONZERO
from guys.equilibrium import Evaluation, Problem, State
from guys.errors import Fault, ScenarioError
from guys.loads import CaseLine, LoadCases, Placed, as_drawn, assemble, setting_line
from guys.rotation import Array, cross, dot
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
TIGHT = 1e-3
"""Stretch by which the measure of a straight cable that is to be just tight is scaled."""
WILD = 0.5
"""Change of ln L0 in one round that tells Newton has lost its way."""
STEP = 0.7
"""Greatest change of ln T aimed at in one round."""
PLACED = 1e-10
"""Change of ln L0 at which a plumb setting is found: the move it makes is below a micrometre."""
LEAST_SHARE = 0.1
"""Least tension of a plumb setting, of its target."""
FIRST_GRID = np.concatenate([np.linspace(0, 1, 60) ** 4 * 1e-2, np.geomspace(1.1e-2, 1.0, 90)])
"""Where a first length is looked for between the tautest it may be (0) and twice that (1): closest where tension falls fast."""
ZOOMS = 5
"""Times a first length is looked for, each time but the first between neighbours of the last, twenty times finer."""
AS_DRAWN = 1e-5
"""Displacement, of the height, that weighs as much as a tension off its target by all of it."""
PLUMB_TURN = 0.01
"""[rad] greatest turn in one round of a plumb setting, which stays close to the drawing."""


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


@dataclass(frozen=True)
class _Asked:
    """Which cables are adjusted (index), by tension or tight, and the targets [N] (1 for tight)."""

    index: NDArray[np.int64]
    tight: NDArray[np.bool_]
    target: Array


def find(structure: Structure) -> Setting:
    """The setting of a structure.

    Raises ScenarioError where no still-air state meets a tension asked for; that is so too where the only one lies down, although with
    the lengths that would give the tensions as drawn the structure stands.
    """
    scenario = structure.scenario
    asked = _asked(scenario)
    length = np.array([c.length if c.length is not None else math.nan for c in scenario.cable])
    drawn = as_drawn(structure, np.nan_to_num(length, nan=1.0))
    loads = assemble(structure, [setting_line(scenario)], drawn)
    length[asked.index] = _first_lengths(structure, loads, asked)
    first = problem = Problem(structure, loads, length)
    state = problem.drawn()
    if len(asked.index):
        search = _plumb if scenario.setting.plumb else _meet
        problem, state = search(problem, state, asked)
    judged = stability.settle(problem, state)
    if stability.turned_over(problem, judged.state)[0] and stability.settle(first, first.drawn()).code[0] <= stability.NEUTRAL:
        raise ScenarioError([_not_met(scenario, asked)])
    return Setting(problem.length, judged, problem)


def _asked(scenario: Scenario) -> _Asked:
    index = [k for k, c in enumerate(scenario.cable) if c.length is None]
    cables = [scenario.cable[k] for k in index]
    return _Asked(
        np.array(index, dtype=np.int64),
        np.array([c.tight for c in cables], bool),
        np.array([1.0 if c.tension is None else c.tension for c in cables]),
    )


def _alone(structure: Structure, loads: LoadCases, asked: _Asked) -> tuple[Array, Array, Array]:
    """Drawn chords (asked, 3), stiffness and weight vector per length of the cables asked for."""
    problem = Problem(structure, loads, np.ones(len(structure.cables.EA)))
    _, _, chord = problem.chords(problem.drawn())
    return chord[0, asked.index], structure.cables.EA[asked.index], loads.cable_load[0, asked.index]


def _first_lengths(structure: Structure, loads: LoadCases, asked: _Asked) -> Array:
    """Lengths that would give the targets at the drawn geometry, on the tauter branch."""
    chord, EA, load = _alone(structure, loads, asked)
    c = np.sqrt(dot(chord, chord))
    if structure.scenario.analysis.cable == "straight":
        return np.asarray(c / np.where(asked.tight, 1.0, 1 + asked.target / EA))
    weight = np.sqrt(dot(load, load))
    low = c / (1 + (asked.target + weight * c) / EA)
    high, grid = 2 * low, FIRST_GRID
    for _ in range(ZOOMS):
        between = low + grid[:, None] * (high - low)
        measure = _measure_alone(chord, EA, load, between, asked)
        below = measure < 1
        _refuse_unmet(structure.scenario, asked, measure, np.asarray(below.any(axis=0)))
        first = np.argmax(below, axis=0)
        each = np.arange(len(c))
        low, high = between[np.maximum(first - 1, 0), each], between[first, each]
        grid = np.linspace(0, 1, 20)
    return np.asarray(0.5 * (low + high))


def _measure_alone(chord: Array, EA: Array, load: Array, length: Array, asked: _Asked) -> Array:
    """Measures (trial, cable) at the drawn chords for trial lengths (trial, cable)."""
    trials, n = length.shape
    flat = length.reshape(-1)
    hanging = cable.hang(np.tile(chord, (trials, 1)), flat, np.tile(EA, trials), np.tile(load, (trials, 1)) * flat[:, None])
    own = np.tile(_norm(load), trials) * flat
    target, tight = np.tile(asked.target, trials), np.tile(asked.tight, trials)
    return np.where(tight, _norm(hanging.tension) / own, _norm(hanging.at_a) / target).reshape(trials, n)


def _norm(v: Array) -> Array:
    return np.sqrt(dot(v, v))


def _refuse_unmet(scenario: Scenario, asked: _Asked, measure: Array, met: NDArray[np.bool_]) -> None:
    faults = []
    for k in np.flatnonzero(~met):
        c = scenario.cable[asked.index[k]]
        least = float(measure[:, k].min() * asked.target[k])
        how = "tight" if c.tight else "tension"
        text = (
            f'"{c.name}": {asked.target[k]:.3g} N cannot be met: the cable\'s own weight gives at least {least:.3g} N '
            "at its anchor end; give more"
        )
        faults.append(fault_at(scenario, (*c.key, how), text))
    if faults:
        raise ScenarioError(faults)


@dataclass(frozen=True)
class _Rates:
    """Newton's blocks at one state, with the nodes eliminated.

    measure (asked,) m; error: out-of-balance; by ln L0, the nodes answering: rate (asked, asked) of m, step (unknown, asked) of the
    nodes; from what is still unbalanced: drift (asked,) of m, settle (unknown,) of the nodes
    """

    measure: Array
    error: float
    rate: Array
    step: Array
    drift: Array
    settle: Array
    found: Evaluation


def _rates(problem: Problem, state: State, asked: _Asked) -> _Rates:
    """The blocks; the tangent may be indefinite on the way, so it is solved densely."""
    found = problem.evaluate(state)
    k_full = band.dense(problem.tangent(state, found)[0])
    k_full[np.diag_indices_from(k_full)] += stability.ZERO * problem.mass
    if problem.structure.unspun:
        c, a = problem.spin_of_tilts(state, found)
        k_full -= c[0] @ a[0].T
    pushed, direct = _by_length(problem, state, found, asked)
    both = -np.linalg.solve(k_full, np.column_stack([pushed, found.residual[0]]))
    step, settle = both[:, :-1], both[:, -1]
    rate = _measure_rates(problem, state, found, asked, step, direct)
    drift = _measure_rates(problem, state, found, asked, settle[:, None], None)[:, 0]
    return _Rates(_measures(problem, state, found, asked), float(found.error[0]), rate, step, drift, settle, found)


def _by_length(problem: Problem, state: State, found: Evaluation, asked: _Asked) -> tuple[Array, Array]:
    """Change of the residual (unknown, asked), and of the mid-length tension (asked, 3), by ln L0 at fixed nodes."""
    s, k = problem.structure, asked.index
    hanging, length, EA = found.hanging, problem.length[k], problem.structure.cables.EA[k]
    if _is_straight(problem):
        _, _, chord = problem.chords(state)
        taut = (_norm(hanging.tension[0, k]) > 0)[:, None]
        unit = chord[0, k] / _norm(chord[0, k])[:, None]
        tension = -np.where(taut, EA[:, None] * (_norm(chord[0, k]) / length)[:, None] * unit, 0.0)
    else:
        rate = cable.length_rate(hanging.at_a[0, k], hanging.at_b[0, k], EA)
        tension = -length[:, None] * (hanging.stiffness[0, k] @ rate[..., None])[..., 0]
    half = 0.5 * problem.cable_total[0, k]
    gradient = np.zeros((len(k), s.nodes, 6))
    rows = np.arange(len(k))
    arm_a, arm_b, _ = problem.chords(state)
    for points, arm, force in ((s.cables.a, arm_a, -(tension + half)), (s.cables.b, arm_b, tension - half)):
        gradient[rows, points.node[k], :3] += force
        gradient[rows, points.node[k], 3:] += cross(arm[0, k], force)
    arms = np.repeat(problem.arms(state), len(k), axis=0)
    return band.unknowns_of(problem.pattern, gradient, arms).T, tension


def _is_straight(problem: Problem) -> bool:
    return problem.structure.scenario.analysis.cable == "straight"


def _stretch_wanted(problem: Problem, asked: _Asked) -> Array:
    """(asked,) stretch of straight cables at their targets, and the scale of what is left for those just tight."""
    return np.where(asked.tight, TIGHT, asked.target / problem.structure.cables.EA[asked.index])


def _measures(problem: Problem, state: State, found: Evaluation, asked: _Asked) -> Array:
    hanging, k = found.hanging, asked.index
    if _is_straight(problem):
        stretch = _norm(problem.chords(state)[2][0, k]) / problem.length[k] - 1
        return np.asarray(stretch / _stretch_wanted(problem, asked) + asked.tight)
    tight = _norm(hanging.tension[0, k]) / _norm(problem.cable_total[0, k])
    return np.asarray(np.where(asked.tight, tight, _norm(hanging.at_a[0, k]) / asked.target))


def _chord_steps(problem: Problem, state: State, step: Array, k: NDArray[np.int64]) -> Array:
    """(cable in k, 3, asked) change of chords for node steps (unknown, asked)."""
    n = step.shape[1]
    many = problem.take(np.zeros(n, dtype=np.int64))
    whole = many.whole_step(many.repeat(state), step.T)
    arm_a, arm_b, _ = problem.chords(state)
    s = problem.structure

    def moved(node: NDArray[np.int64], arm: Array) -> Array:
        return np.asarray(whole[:, node[k], :3] + cross(whole[:, node[k], 3:], np.broadcast_to(arm[:, k], (n, len(k), 3))))

    return np.moveaxis(moved(s.cables.b.node, arm_b) - moved(s.cables.a.node, arm_a), 0, -1)


def _measure_rates(problem: Problem, state: State, found: Evaluation, asked: _Asked, step: Array, direct: Array | None) -> Array:
    """Change of the measures (asked, column) with node steps (unknown, column); `direct`: the columns' own lengths change too."""
    k, each = asked.index, np.arange(len(asked.index))
    moved = _chord_steps(problem, state, step, k)
    own = np.zeros((len(k), step.shape[1])) if direct is None else np.eye(len(k))
    if _is_straight(problem):
        chord = problem.chords(state)[2][0, k]
        stretch = _norm(chord) / problem.length[k] / _stretch_wanted(problem, asked)
        return np.asarray(stretch[:, None] * (_log_rate(chord, moved) - own))
    by_chord = found.hanging.stiffness[0, k] @ moved
    half = np.zeros_like(by_chord)
    if direct is not None:
        by_chord[each, :, each] += direct
        half[each, :, each] = 0.5 * problem.cable_total[0, k]
    by_end = _log_rate(found.hanging.at_a[0, k], by_chord + half)
    by_tight = _log_rate(found.hanging.tension[0, k], by_chord) - own
    return np.asarray(_measures(problem, state, found, asked)[:, None] * np.where(asked.tight[:, None], by_tight, by_end))


def _log_rate(vector: Array, rate: Array) -> Array:
    """d ln |v| from dv: (n, 3), (n, 3, m) -> (n, m)."""
    return np.asarray(np.einsum("ni,nim->nm", vector, rate) / np.maximum(dot(vector, vector), NONZERO)[:, None])


def _with_change(problem: Problem, change: Array, asked: _Asked) -> Problem:
    """The problem with ln L0 changed."""
    length = problem.length.copy()
    length[asked.index] *= np.exp(change)
    return replace(problem, length=length)


def _meet(problem: Problem, state: State, asked: _Asked) -> tuple[Problem, State]:
    """Lengths and state at which every measure is one.

    Where Newton from the drawing does not get there (targets that do not balance pull a head over by metres), the measures are led
    from what the first lengths give to one, in steps that halve where they fail.
    """
    direct = _newton(problem, state, asked, np.zeros(len(asked.index)))
    if direct is not None:
        return direct
    out = solver.solve(problem, state)
    if not out.converged[0]:
        raise ScenarioError([_not_met(problem.structure.scenario, asked)])
    here = (problem, out.state)
    start = np.log(np.maximum(_rates(*here, asked).measure, LEAST_MEASURE))
    done, step = 0.0, FIRST_LEAD
    while done < 1 and step > LEAST_LEAD:
        there = _newton(*here, asked, start * (1 - min(1.0, done + step)))
        if there is None:
            step /= 2
        else:
            here, done, step = there, min(1.0, done + step), 1.5 * step
    if done < 1:
        raise ScenarioError([_not_met(problem.structure.scenario, asked)])
    return here


def _newton(problem: Problem, state: State, asked: _Asked, goal: Array) -> tuple[Problem, State] | None:
    """Newton on net forces and measures together until ln m = goal, or None: lengths and nodes move at once.

    ln m of a catenary and m itself of a straight cable are what lengths change evenly.
    """
    straight = _is_straight(problem)
    close = MET + ROUNDED / _stretch_wanted(problem, asked) if straight else MET
    for _ in range(ROUNDS):
        rates = _rates(problem, state, asked)
        scale = np.ones_like(rates.measure) if straight else 1 / np.maximum(rates.measure, LEAST_MEASURE)
        miss = rates.measure - np.exp(goal) if straight else np.clip(-np.log(scale) - goal, -STEP, STEP)
        if np.all(np.abs(miss) < close) and rates.error < solver.ENOUGH:
            return problem, state
        change: Array = np.linalg.lstsq(scale[:, None] * rates.rate, -miss - scale * rates.drift, rcond=RANK)[0].astype(float)
        step = (rates.settle + rates.step @ change)[None]
        share = _share(problem.limited(state, step, solver.TURN_CAP, solver.MOVE_CAP * problem.structure.height), step)
        if not np.isfinite(share) or np.max(np.abs(share * change)) > WILD:
            return None
        state = problem.advance(state, rates.found, share * step)
        problem = _with_change(problem, share * change, asked)
    return None


def _share(limited: Array, step: Array) -> float:
    size = float(np.max(np.abs(step), initial=0.0))
    return 1.0 if size == 0 else float(np.max(np.abs(limited), initial=0.0)) / size


def _not_met(scenario: Scenario, asked: _Asked) -> Fault:
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


def _plumb(problem: Problem, state: State, asked: _Asked) -> tuple[Problem, State]:
    """Nearest tensions that leave the spars as drawn."""
    height = problem.structure.height
    for _ in range(ROUNDS):
        rates = _rates(problem, state, asked)
        away, slope, settled = _away(problem, state, rates)
        change = _nearest(rates, (away + settled) / height, slope / height)
        if np.max(np.abs(change)) < PLACED and rates.error < solver.ENOUGH:
            break
        step = (rates.settle + rates.step @ change)[None]
        share = _share(problem.limited(state, step, PLUMB_TURN, PLUMB_TURN * height), step)
        state = problem.advance(state, rates.found, share * step)
        problem = _with_change(problem, share * change, asked)
    return problem, state


def _away(problem: Problem, state: State, rates: _Rates) -> tuple[Array, Array, Array]:
    """Displacements to undo (row,), their derivatives (row, asked), what settling adds (row,); a rigid spar's turn counts at its head."""
    s = problem.structure
    steps = np.column_stack([rates.step, rates.settle]).T
    many = problem.take(np.zeros(len(steps), dtype=np.int64))
    whole = many.whole_step(many.repeat(state), steps)
    value, slope = [], []
    for node, k in _held_nodes(s):
        across = s.axes[k, :2]
        arm = s.head.arm[k] if s.scenario.spar[k].rigid else np.zeros(3)
        value.append(across @ (state.u[0, node] + state.psi[0, node] @ arm))
        slope.append(across @ (whole[:, node, :3] + np.cross(whole[:, node, 3:], arm + state.psi[0, node] @ arm)).T)
    by_step = np.concatenate(slope)
    return np.concatenate(value), by_step[:, :-1], by_step[:, -1]


def _nearest(rates: _Rates, away: Array, slope: Array) -> Array:
    """Change of ln L0 that brings the tensions nearest their targets with the displacements undone.

    One least squares of relative differences from the targets and of displacements (of the height) over `AS_DRAWN`: displacements that
    tensions can undo come out at a thousandth of that and less, those they could undo only by multiples of themselves stay.
    """
    now = rates.measure + rates.drift
    rows = np.concatenate([rates.rate, slope / AS_DRAWN])
    return _bounded(rows, np.concatenate([1 - now, -away / AS_DRAWN]), rates.rate, LEAST_SHARE - now)


def _bounded(a: Array, wanted: Array, g: Array, least: Array) -> Array:
    """Least squares |a x - wanted| with g x >= least."""
    x = np.linalg.lstsq(a, wanted, rcond=RANK)[0]
    if (g @ x >= least - AT_BOUND).all():
        return np.asarray(x)
    from scipy.optimize import LinearConstraint, minimize

    scale = np.linalg.norm(a, axis=0)
    a, g, size = a / scale, g / scale, 1 / max(float(wanted @ wanted), NONZERO)

    def miss(y: Array) -> float:
        return float(0.5 * size * np.sum((a @ y - wanted) ** 2))

    def slope(y: Array) -> Array:
        return np.asarray(size * (a.T @ (a @ y - wanted)))

    out = minimize(
        miss, x * scale, jac=slope, method="SLSQP", constraints=LinearConstraint(g, least, np.inf), options={"ftol": 1e-15, "maxiter": 300}
    )
    return np.asarray(out.x / scale)
