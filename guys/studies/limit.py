"""How much wind a structure takes: from every direction the speed at which the first thing passes its allowable or equilibrium is lost.

Every case that has wind, its factors kept, is followed from still air up in speed (`guys.path`); what is watched is the greatest use of
everything judged (`guys.checks.demands`), less one, and the looseness of every cable.  The loads of every speed are worked out anew, none
is scaled from another: once a cable drops nothing goes with the square of the speed.

A line with patches of gust is followed in each of its states (`CaseLine.states`); it is lost where the first of them is.  Its peaks, which
belong to no one state, pass an allowable before any of the states does: the answer then comes down to where they meet it.

Each answer is solved again from the setting, as `guys solve` would: that names what governs, and takes in the other state of a branching,
which may be the worse one; the answer is then brought down to where that meets its allowable.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import replace

import numpy as np

from guys import recovery, stability
from guys.checks import demands, spars
from guys.checks.alarms import CAUTIONS
from guys.checks.demands import Item
from guys.checks.extremes import first_greatest
from guys.equilibrium import Index, Problem, State
from guys.errors import Fault, ScenarioError
from guys.limits import LOST, NOTHING, Limit, Limits
from guys.loads import CaseLine, lines_of
from guys.path import Paths, Stops, crossings, follow
from guys.rotation import Array
from guys.scenario import Scenario
from guys.scenario.model import Wind
from guys.setting import Setting, find
from guys.structure import build
from guys.studies import ending, peaks
from guys.studies.batch import CHUNK, Batch, Progress, recover, solve_lines
from guys.studies.directions import COARSE, between, near
from guys.version import __version__

BETWEEN = 5
"""Bearings solved for between the neighbours of the lowest limit: so near, the lowest of them is the lowest of all to 0.01 %."""
MOST = 150.0
"""[m/s] greatest speed looked at, or `MOST_TIMES` the scenario's if more: only tornadoes blow harder near the ground (from memory)."""
MOST_TIMES = 4
FIRST = 1 / 2
SHARE = 1 / 5
"""Steps of a path: first one, of the scenario's speed; greatest, of the speed reached."""
AGREES = 5e-4
"""Use at an answer solved again may pass one by so much; else the other state of a branching is the worse, and the answer comes down."""
ANSWER_ROUNDS = 24


def limits(scenario: Scenario, *, apart: float = COARSE, progress: Progress | None = None) -> Limits:
    """The limiting wind of every case with wind, from the listed directions and round the circle.

    apart : [rad] between the bearings solved for besides the listed ones

    Raises ScenarioError where no case has wind.
    """
    if scenario.wind is None or not any(case.wind > 0 for case in scenario.case):
        fault = Fault(scenario.path, None, None, "case", "no case has wind, so there is no limit to find; give [wind] and a case with wind")
        raise ScenarioError([fault])
    setting = find(build(scenario))
    most = most_of(scenario.wind)
    given = scenario.wind.directions
    bearings = sorted([*given, *between(given, apart)])
    templates = [line for line in lines_of(scenario, [0.0]) if line.wind > 0]
    circle = solved(setting, [replace(t, wind_from=b) for t in templates for b in bearings], most, progress)
    listed = tuple(k for k, limit in enumerate(circle) if any(limit.wind_from == b for b in given))
    worst = _worst(setting, templates, circle, most, progress)
    table = recover(setting.problem, setting.judged, detail=False).demands
    unknown = np.asarray(np.isnan(table.capacity).all(axis=0))
    not_judged = tuple(item.thing for item, lacks in zip(table.items, unknown.tolist(), strict=True) if lacks)
    return Limits(scenario, __version__, tuple(circle), listed, worst, most, not_judged, CAUTIONS)


def most_of(wind: Wind) -> float:
    """Greatest speed looked at [m/s]."""
    return max(MOST, MOST_TIMES * wind.speed)


def solved(setting: Setting, lines: Sequence[CaseLine], most: float, progress: Progress | None) -> list[Limit]:
    """The limit of every line with wind, each looked for up to the speed `most`."""
    if not setting.stands:
        reason = recover(setting.problem, setting.judged, detail=False).reason[0] or ""
        failed = bool(setting.judged.code[0] == stability.FAILED)
        return [_none_at_all(setting, line, f"in still air: {reason}", failed) for line in lines]
    out = []
    for first in range(0, len(lines), CHUNK):
        out += _Chunk(setting, lines[first : first + CHUNK], most).limits(progress)
    return out


def _none_at_all(setting: Setting, line: CaseLine, words: str, failed: bool) -> Limit:
    drops = (math.nan,) * len(setting.problem.structure.scenario.cable)
    return Limit(line.name, line.wind, line.wind_from, 0.0, LOST, words, math.nan, 0.0, words, math.nan, drops, failed)


class _Chunk:
    """Lines followed together, each in all its states: what is of lines is (line,), what is of paths (state,)."""

    def __init__(self, setting: Setting, lines: Sequence[CaseLine], most: float) -> None:
        wind = setting.problem.structure.scenario.wind
        assert wind is not None
        self.setting, self.lines, self.wind = setting, lines, wind
        self.asked, self.states = peaks.asked(lines)
        self.stops = Stops(FIRST * wind.speed, SHARE, most)

    def at(self, rows: Index, speed: Array) -> Problem:
        """The problem of some of the states at their speeds."""
        return self.setting.under([replace(self.states[r], speed=float(v)) for r, v in zip(rows, speed, strict=True)])

    def limits(self, progress: Progress | None) -> list[Limit]:
        """The limit of every line; where no wind blows, a case is the same from every bearing."""
        names = [(line.name, line.without) for line in self.lines]
        first = np.array([names.index(name) for name in dict.fromkeys(names)])
        still = self.at(self.asked.start[first], np.zeros(len(first)))
        judged = stability.judge(still, self.setting.state, self.setting.loads)
        reasons = dict(zip(dict.fromkeys(names), recover(still, judged, detail=False).reason, strict=True))
        place = np.searchsorted(first, [names.index(name) for name in names])
        code = judged.code[place]
        out = {
            k: _none_at_all(self.setting, self.lines[k], f"before any wind: {reasons[names[k]]}", bool(code[k] == stability.FAILED))
            for k in np.flatnonzero(code > stability.NEUTRAL).tolist()
        }
        stand = np.flatnonzero(code <= stability.NEUTRAL)
        if len(stand):
            rest = _Chunk(self.setting, [self.lines[k] for k in stand.tolist()], self.stops.most)
            out |= dict(zip(stand.tolist(), rest._followed(judged.state.take(place[stand]), progress), strict=True))
        return [out[k] for k in range(len(self.lines))]

    def _followed(self, start: State, progress: Progress | None) -> Iterator[Limit]:
        paths = follow(self.at, start.take(self.asked.owner), np.zeros(len(self.states)), self.stops, _watched, progress)
        passed = np.fmin.reduceat(crossings(self.at, paths, _watched), self.asked.start, axis=0)
        ends = np.where(paths.lost, paths.low, np.inf)
        first = [min(self.asked.rows(k), key=lambda row: ends[row]) for k in range(len(self.lines))]
        lost = ends[first]
        speed = np.fmin(passed[:, 0], np.where(np.isinf(lost), np.nan, lost))
        by_allowable = passed[:, 0] <= lost
        looked = speed if self.asked.plain else np.where(np.isnan(speed), self.stops.most, speed)
        again = self._again(np.where(np.isnan(looked), 0.0, looked))
        failed = np.logical_or.reduceat(paths.failed, self.asked.start)
        over = np.flatnonzero(~failed & (looked > 0) & (_use(again) > 1 + AGREES))
        if len(over):
            part = _Chunk(self.setting, [self.lines[k] for k in over.tolist()], self.stops.most)
            speed[over] = part._brought_down(looked[over])
            by_allowable[over] = True
        if len(over) or looked is not speed:
            again = self._again(np.where(np.isnan(speed), 0.0, speed))
        for k, path in enumerate(first):
            yield self._limit(k, path, paths, passed[k, 1:], float(speed[k]), bool(by_allowable[k]), again)

    def _again(self, speed: Array) -> Batch:
        """Every line solved from the setting at its speed."""
        lines = [replace(line, speed=float(v)) for line, v in zip(self.lines, speed, strict=True)]
        return solve_lines(self.setting, lines, detail=False)

    def _brought_down(self, speed: Array) -> Array:
        """Least speed between zero and `speed` at which the worse state of a branching meets its allowable, by halving."""
        low, high = np.zeros_like(speed), speed.copy()
        for _ in range(ANSWER_ROUNDS):
            middle = 0.5 * (low + high)
            over = _use(self._again(middle)) > 1
            low, high = np.where(over, low, middle), np.where(over, middle, high)
        return low

    def _limit(self, k: int, path: int, paths: Paths, drops: Array, speed: float, by_allowable: bool, again: Batch) -> Limit:
        """The limit of line `k`, whose equilibrium is lost first on `path`, if on any."""
        line, each = self.lines[k], self.asked.rows(k)
        failed = bool(paths.failed[each].any())
        lost = float(paths.low[path]) if paths.lost[path] and not failed else math.nan
        falls = self._falls(path, paths) if paths.lost[path] else ""
        use = math.nan
        if by_allowable:
            judged, how, use = _governing(again, k)
            governs = f"{judged.thing}: {judged.quantity}"
            meets = "reaches its allowable" if speed > 0 else "is past its allowable in still air"
            why = f"{judged.quantity} of {judged.thing} {meets}{f' ({how})' if how else ''}"
        elif math.isnan(speed):
            governs, why = NOTHING, f"nothing judged passes its allowable and equilibrium is not lost up to {self.stops.most:g} m/s"
        else:
            governs, why = LOST, f"equilibrium lost: {falls}"
        return Limit(
            line.name, line.wind, line.wind_from, speed, governs, why, use, lost, falls, float(np.fmin.reduce(paths.branches_at[each])),
            tuple(float(x) for x in drops), failed,
        )  # fmt: skip

    def _falls(self, k: int, paths: Paths) -> str:
        """How equilibrium is lost at the end of a path."""
        if paths.failed[k]:
            return ending.FAULT
        one = np.array([k])
        start = stability.least_costs(self.at(one, np.zeros(1)), paths.state.take(paths.of(k)[:1]))
        return ending.falls(*ending.endings(self.at, paths, one, start))


def _watched(problem: Problem, state: State) -> Array:
    """(row, 1 + cable): greatest use less one, -1 where nothing is judged; then the looseness of every cable."""
    found = problem.evaluate(state)
    forces = recovery.forces(problem, state, found)
    structure = problem.structure
    acting = recovery.sections(problem, state, found, spars.judged(structure.scenario))
    use = demands.of(structure, problem.loads.lines, forces, acting).use
    loose = np.where(forces.present, recovery.looseness(problem, state, found), np.nan)
    return np.column_stack([np.nan_to_num(use, nan=0.0, posinf=1e6).max(axis=1, initial=0.0) - 1.0, loose])


def _use(batch: Batch) -> Array:
    """(line,) greatest use of anything judged, of both states of a branching; 0 where nothing is judged."""
    return np.array([_governing(batch, k)[2] for k in range(len(batch.lines))])


def _governing(batch: Batch, k: int) -> tuple[Item, str, float]:
    """What governs a line in the worse of its states: the item, its way of failing, empty where it has but one, and its use."""
    states = [(batch.demands, k)]
    if batch.mirror_demands is not None:
        states += [(batch.mirror_demands, row) for row, line in enumerate(batch.mirror_lines) if line == batch.lines[k]]
    uses = np.nan_to_num([table.use[row] for table, row in states], nan=0.0)
    state, item = np.unravel_index(first_greatest(uses), uses.shape)
    table, row = states[state]
    mode = int(table.mode[row, item])
    return table.items[item], table.items[item].modes[mode] if mode >= 0 else "", float(uses[state, item])


def _worst(
    setting: Setting, templates: Sequence[CaseLine], circle: list[Limit], most: float, progress: Progress | None
) -> tuple[Limit, ...]:
    """The lowest limit of every case, narrowed down between the bearings of the circle."""
    known = {t.name: [limit for limit in circle if limit.case == t.name] for t in templates}
    lines = [replace(t, wind_from=b) for t in templates for b in _between_neighbours(known[t.name])]
    for limit in solved(setting, lines, most, progress):
        known[limit.case].append(limit)
    return tuple(min(known[t.name], key=lambda limit: limit.known) for t in templates)


def _between_neighbours(limits_: Sequence[Limit]) -> list[float]:
    """Bearings on both sides of the lowest limit, up to the neighbours'; none where all are the same or the lowest is no wind at all."""
    order = sorted(limits_, key=lambda limit: limit.wind_from)
    bearing, speed = np.array([limit.wind_from for limit in order]), np.array([limit.known for limit in order])
    k = int(np.argmin(speed))
    if not np.isfinite(speed[k]) or speed[k] == 0.0 or np.ptp(speed[np.isfinite(speed)]) == 0.0:
        return []
    back, on = ((bearing[(k + side) % len(bearing)] - bearing[k]) * side % (2 * math.pi) for side in (-1, 1))
    turns = np.linspace(-back, on, BETWEEN + 2)[1:-1]
    return [float((bearing[k] + turn) % (2 * math.pi)) for turn in turns if not near(float(bearing[k] + turn), bearing.tolist())]
