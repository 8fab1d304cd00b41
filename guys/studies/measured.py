"""Tensions as read in the field: what they are, what to let out or take in, and what the structure bears as found.

Every reading tells a tension with its error (`guys.sounding`); those of one cable are weighed together by the inverse squares of their
errors of reading, and the error of the rope's mass, which they share, comes on top.  Tensions alone do not tell the state: a pinned mast
with three guys has but one that balances, so a percent misread would lean it by a percent of its height.  So lengths L are found for which

    sum ((T(L) - T_read) / error)^2  +  sum ((u(L) - u_set) / off)^2  =  least

T and u the tensions and displacements of the whole structure in still air at the temperature of the readings, u_set those as it was to be
set, `off` the `plumb_error`: the crew plumbs first and reads then, so spars are taken to stand as set, within that.  Gauss-Newton, with
differences of solved states; the errors of lengths and tensions follow from the same matrix, (A^T A)^-1.

What to change at a turnbuckle is the planned length less the one found: with all changed, the tensions are those planned.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass, replace

import numpy as np

from guys import solver, sounding
from guys.equilibrium import Index, Problem, State
from guys.errors import ScenarioError
from guys.loads import setting_line
from guys.results import Solution
from guys.rotation import Array
from guys.scenario import Scenario
from guys.scenario.model import SparPoint
from guys.scenario.readings import Reading, Readings
from guys.setting import find
from guys.sounding import TIMED, Span, Way
from guys.structure import build
from guys.studies.batch import Progress
from guys.studies.field import Field, Still, in_still_air, share_of_error
from guys.studies.standing import solve

STEP = 1e-6
"""Change of a length, of itself, for a difference: a thousandth and less of what stretches it."""
CLOSE = 1e-9
"""Change of a length, of itself, at which it is found."""
ROUNDS = 30
SLOPES = 2
"""Rounds in which the slopes are worked out anew: by then lengths are so near that they no longer change."""
AGREE = 2.0
"""Errors by which readings of one cable, or a reading and what balances, may differ before it is told."""


@dataclass(frozen=True)
class Told:
    """One reading, the tension it tells and its error of reading [N], and the error with that of the rope's mass [N]."""

    reading: Reading
    tension: float
    read_error: float
    error: float


@dataclass(frozen=True)
class Measured:
    """All (cable,), NaN of a cable that was not read, as one planned slack.

    temperature [K];  read, error [N] : tension read and its error;  wanted [N] : planned at that temperature
    found, found_error [N] : those nearest the readings that balance;  length [m] unstressed at the setting temperature as found
    change, change_error [m] : to let out (more than 0) or take in;  turns : of the turnbuckle, NaN without a pitch
    after : solved again as found
    """

    plan: Field
    readings: Readings
    told: tuple[Told, ...]
    temperature: float
    read: Array
    error: Array
    wanted: Array
    found: Array
    found_error: Array
    length: Array
    change: Array
    change_error: Array
    after: Solution
    warnings: tuple[str, ...]

    @property
    def turns(self) -> Array:
        """(cable,) turns of the turnbuckle's body to let out or take in."""
        return np.asarray(self.change / self.plan.cut.by_turn)

    def verdict(self, k: int) -> str:
        """What is to be said of a cable's tension, in words."""
        if self.plan.scenario.cable[k].name in self.off:
            return "past what is accepted"
        return "change within its error" if abs(self.change[k]) <= self.change_error[k] else ""

    @property
    def off(self) -> tuple[str, ...]:
        """Cables whose tension read is off by more than is accepted, whatever its error."""
        sure = np.abs(self.read - self.wanted) - self.error > self.plan.scenario.field.tension * self.wanted
        return tuple(c.name for c, bad in zip(self.plan.scenario.cable, sure, strict=True) if bad)


def measured(plan: Field, readings: Readings, progress: Progress | None = None) -> Measured:
    """What readings tell of a structure planned as `plan`.

    Raises ScenarioError for readings no tension gives, cables not read, and readings that fit no state.
    """
    scenario = plan.scenario
    setting = find(build(scenario))
    still = in_still_air(setting, (readings.temperature,))
    if still.reason[0] is not None:
        raise ScenarioError([readings.fault(f"at the temperature of the readings, in still air: {still.reason[0]}")])
    told = _told(scenario, readings, still)
    read, read_error, error = _weighed(scenario, told)
    _refuse_missing(scenario, readings, read, still)
    line = replace(setting_line(scenario), temperature=readings.temperature)
    start = solver.solve(setting.under([line]), setting.state)
    fit = _fit(setting.under([line]), start.state, read, error, readings)
    lengths, after = fit.length, solve(_with_lengths(scenario, fit.length), progress=progress)
    known = np.isfinite(read)
    out = Measured(
        plan, readings, told, readings.temperature, read, error, still.tension[0], np.where(known, fit.tension, np.nan), fit.tension_error,
        lengths, np.where(known, plan.cut.unstressed - lengths, np.nan), fit.length_error, after, (),
    )  # fmt: skip
    return replace(out, warnings=(*_apart(told, read, read_error), *_doubts(out)))


def _told(scenario: Scenario, readings: Readings, still: Still) -> tuple[Told, ...]:
    """Tensions and errors of all readings; refuses those no tension of the cable gives."""
    span, index = still.span(0, scenario), {c.name: k for k, c in enumerate(scenario.cable)}
    told, faults = [], []
    for r in readings.of:
        k = index[r.cable]
        own, way = Span(span.chord[[k]], span.EA[[k]], span.mass[[k]]), _way(r.by)
        strength = scenario.rope[scenario.cable[k].rope].strength
        tension = float(sounding.tension(way, own, np.array([r.value / r.cycles]))[0])
        if math.isnan(tension):
            words = "a cable without mass is told by a gauge alone" if span.mass[k] == 0 else "no tension of this cable gives that reading"
            faults.append(readings.fault(f"{words}; as set it would be {_as_set(r, own, still, k)}", r))
        elif strength is not None and tension > strength:
            faults.append(readings.fault(
                f"tells {tension / 1e3:.3g} kN, more than the rope's breaking load of {strength / 1e3:.3g} kN; as set it would be "
                f"{_as_set(r, own, still, k)}; was the count of cycles another?", r,
            ))  # fmt: skip
        else:
            work, pull = scenario.field, np.array([tension])
            bare = work.model_copy(update={"mass_error": 0.0})
            alone, whole = (float(share_of_error(each, way, own, pull, r.cycles)[0]) * tension for each in (bare, work))
            told.append(Told(r, tension, alone, whole))
    if faults:
        raise ScenarioError(faults)
    return tuple(told)


def _way(by: str) -> Way:
    return by  # type: ignore[return-value]


def _as_set(r: Reading, own: Span, still: Still, k: int) -> str:
    value = float(sounding.reading(_way(r.by), own, still.tension[0, [k]])[0]) * r.cycles
    if math.isnan(value):
        return "nothing to read"
    return f"{value:.2f} s" if r.by in TIMED else f"{value / 1e3:.3g} kN" if r.by == "gauge" else f"{1e3 * value:.0f} mm"


def _weighed(scenario: Scenario, told: tuple[Told, ...]) -> tuple[Array, Array, Array]:
    """(cable,) tension, its error of reading, and that with the error of mass."""
    n = len(scenario.cable)
    read, alone, error = np.full((3, n), np.nan)
    for k, cable in enumerate(scenario.cable):
        own = [t for t in told if t.reading.cable == cable.name]
        if own:
            weight = np.array([t.read_error**-2 for t in own])
            read[k] = float(weight @ [t.tension for t in own]) / weight.sum()
            alone[k] = weight.sum() ** -0.5
            by_mass = float(weight @ [t.tension * scenario.field.mass_error * (t.reading.by != "gauge") for t in own]) / weight.sum()
            error[k] = math.hypot(alone[k], by_mass)
    return read, alone, error


def _refuse_missing(scenario: Scenario, readings: Readings, read: Array, still: Still) -> None:
    lacking = [c.name for k, c in enumerate(scenario.cable) if math.isnan(read[k]) and not still.slack[0, k]]
    if lacking:
        raise ScenarioError([readings.fault(f"no reading of {', '.join(lacking)}; every cable that is not slack must be read")])


@dataclass(frozen=True)
class _Fit:
    """(cable,) length, tension and their errors; NaN errors of cables not read, whose lengths stay."""

    length: Array
    tension: Array
    length_error: Array
    tension_error: Array


def _fit(problem: Problem, state: State, read: Array, error: Array, readings: Readings) -> _Fit:
    """Lengths nearest the readings with the spars as set."""
    known = np.flatnonzero(np.isfinite(read))
    as_set = _places(problem, state).ravel()
    off = np.full(len(as_set), problem.structure.scenario.field.plumb_error)
    length, scale = problem.length.copy(), np.concatenate([error[known], off])
    wanted = np.concatenate([read[known], as_set])
    for round_ in range(ROUNDS):
        now, state = _answer(problem, state, length, known, readings)
        if round_ < SLOPES:
            slope = _slope(problem, state, length, known, now, readings)
            a = slope / scale[:, None]
        change = np.linalg.lstsq(a, (wanted - now) / scale, rcond=None)[0]
        length[known] += change
        if np.max(np.abs(change) / length[known]) < CLOSE:
            break
    else:
        raise ScenarioError([readings.fault("no state was found that fits these readings together; read again, one cable after another")])
    tension, _ = _answer(problem, state, length, known, readings)
    spread = np.linalg.inv(a.T @ a)
    out = np.full((3, len(length)), np.nan)
    out[0, known] = tension[: len(known)]
    out[1, known] = np.sqrt(np.diag(spread))
    by_length = slope[: len(known)]
    out[2, known] = np.sqrt(np.einsum("ij,jk,ik->i", by_length, spread, by_length))
    return _Fit(length, *out)


def _slope(problem: Problem, state: State, length: Array, known: Index, now: Array, readings: Readings) -> Array:
    """(answer, known) change of the answers by length."""
    out = np.empty((len(now), len(known)))
    for column, k in enumerate(known):
        moved = length.copy()
        moved[k] *= 1 + STEP
        out[:, column] = (_answer(problem, state, moved, known, readings)[0] - now) / (STEP * length[k])
    return out


def _places(problem: Problem, state: State) -> Array:
    """(place, 3) [m] displaced points of spars: heads, and one at every height where cables are made fast."""
    s, ends = problem.structure, problem.structure.scenario.cable
    first = {(c.from_.spar, c.from_.at): k for k, c in reversed(list(enumerate(ends)))}
    to_spar = {(c.to.spar, c.to.at): k for k, c in reversed(list(enumerate(ends))) if isinstance(c.to, SparPoint)}
    parts = [(s.head, list(range(len(s.length)))), (s.cables.b, list(first.values())), (s.cables.a, list(to_spar.values()))]
    return np.concatenate([problem.reach(points, state)[1][0, rows] for points, rows in parts])


def _answer(problem: Problem, state: State, length: Array, known: Index, readings: Readings) -> tuple[Array, State]:
    """Tensions read and displacements at lengths, and the state."""
    changed = replace(problem, length=length)
    out = solver.solve(changed, state)
    if not out.converged[0]:
        raise ScenarioError([readings.fault("the structure does not stand with the tensions these readings tell; read again")])
    tension = np.linalg.norm(changed.evaluate(out.state).hanging.at_a[0, known], axis=1)
    return np.concatenate([tension, _places(changed, out.state).ravel()]), out.state


def _with_lengths(scenario: Scenario, length: Array) -> Scenario:
    """The scenario with its cables given by unstressed length."""
    cables = tuple(
        c.model_copy(update={"length": float(value), "tension": None, "tight": False})
        for c, value in zip(scenario.cable, length, strict=True)
    )
    return scenario.model_copy(update={"cable": cables, "setting": scenario.setting.model_copy(update={"plumb": False})})


def _apart(told: tuple[Told, ...], read: Array, read_error: Array) -> Iterator[str]:
    """Readings of one cable that do not agree."""
    names = list(dict.fromkeys(t.reading.cable for t in told))
    for name in names:
        own = [t for t in told if t.reading.cable == name]
        for a, b in ((a, b) for i, a in enumerate(own) for b in own[i + 1 :]):
            if abs(a.tension - b.tension) > AGREE * math.hypot(a.error, b.error):
                both = " and ".join(f"{t.tension / 1e3:.3g} kN ({t.reading.by}, line {t.reading.line})" for t in (a, b))
                yield f'"{name}": readings tell {both}, further apart than their errors; read again'


def _doubts(found: Measured) -> Iterator[str]:
    """What a crew must not overlook."""
    plan = found.plan
    if not found.readings.signed:
        yield "the readings do not say which scenario they are for"
    for k, cable in enumerate(plan.scenario.cable):
        apart, half = abs(found.read[k] - found.found[k]), 0.5 * plan.cut.take_up[k]
        if apart > AGREE * found.error[k]:
            balances = f"with the spars as set only {found.found[k] / 1e3:.3g} kN balances the others"
            yield (
                f'"{cable.name}": reads {found.read[k] / 1e3:.3g} kN, but {balances}; read it again, and look for what is out of plumb'
            )
        if abs(found.change[k]) > half:
            yield f'"{cable.name}": {abs(1e3 * found.change[k]):.0f} mm to change is more than half the turnbuckle\'s travel'
