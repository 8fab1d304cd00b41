"""The stability reserve: how much more of its loads every listed case takes before its equilibrium is lost.

From its own state (factor 1) each case is followed twice (`guys.path`): its wind alone raised, and all its loads, dead, wind and ice,
together; unstressed lengths and temperature stay.  A line with patches of gust is followed in each of its states, and is lost where the
first of them is.  Every factor is solved, all cases and directions at once.  A case that is lost at a
finite factor is conditionally stable.  Along with the path go the moves of the heads, the tensions, and where each cable drops.

Source: Thompson & Hunt, A General Theory of Elastic Stability (1973), for stability along one loading parameter.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import replace

import numpy as np

from guys import recovery, stability
from guys.checks.alarms import CAUTIONS
from guys.equilibrium import Index, Problem, State
from guys.loads import CaseLine, lines_of
from guys.path import Paths, Stops, crossings, follow
from guys.reserves import ALL, CONDITIONALLY, MEANING, NEUTRAL, NONE, STABLE, UNKNOWN, UNSTABLE, WIND, Path, Reserve, Reserves, Standing
from guys.rotation import Array
from guys.scenario import Scenario
from guys.setting import Setting, find
from guys.structure import build
from guys.studies import ending, peaks
from guys.studies.batch import CHUNK, Batch, Progress, recover
from guys.version import __version__

MOST = 1000.0
"""Greatest factor looked at: of no load will a structure see so much more."""
STOPS = Stops(0.25, 0.25, MOST)
"""Steps of a path: first, and greatest as a share of the factor reached."""
RAISED: dict[str, Callable[[CaseLine, float], CaseLine]] = {
    WIND: lambda line, x: replace(line, wind=x * line.wind),
    ALL: lambda line, x: replace(line, dead=x * line.dead, wind=x * line.wind, ice=x * line.ice),
}
"""A case with the loads of each kind times a factor."""
VERDICT = {stability.NEUTRAL: NEUTRAL, stability.UNSTABLE: UNSTABLE, stability.NONE: NONE, stability.FAILED: UNKNOWN}


def reserves(scenario: Scenario, progress: Progress | None = None) -> Reserves:
    """The stability reserve of every listed case and direction."""
    setting = find(build(scenario))
    lines = lines_of(scenario)
    if not setting.stands:
        every_falls = tuple(_none(setting, line) for line in lines)
        return Reserves(scenario, __version__, every_falls, (False,) * len(lines), None, MOST, CAUTIONS)
    asked, states = peaks.asked(lines)
    every: list[Standing] = []
    settled: list[bool] = []
    for first in range(0, len(states), CHUNK):
        standing, batch = _standing(setting, states[first : first + CHUNK], progress)
        every += standing
        settled += ((batch.code == stability.STABLE) | batch.spins).tolist()
    of_lines = tuple(gravest([every[row] for row in asked.rows(k)]) for k in range(len(lines)))
    all_settled = tuple(all(settled[row] for row in asked.rows(k)) for k in range(len(lines)))
    return Reserves(scenario, __version__, of_lines, all_settled, ending.outline(setting.problem, setting.state), MOST, CAUTIONS)


def gravest(states: Sequence[Standing]) -> Standing:
    """What is told of a line with patches of gust: the gravest verdict, and of either kind of loads the path that ends first."""
    order = list(MEANING)
    worst = max(states, key=lambda s: order.index(s.verdict))
    if not worst.reserves:
        return worst
    paths = [r for loads in RAISED if (r := min((r for s in states if (r := s.of(loads))), key=lambda r: r.stands_to, default=None))]
    return replace(worst, stiffness=min(s.stiffness for s in states), reserves=tuple(paths))


def _none(setting: Setting, line: CaseLine) -> Standing:
    """A case of a structure that does not stand in still air."""
    reason = recover(setting.problem, setting.judged, detail=False).reason[0] or ""
    verdict = UNKNOWN if setting.judged.code[0] == stability.FAILED else NONE
    return Standing(line.name, line.wind_from, verdict, f"the structure does not stand in still air: {reason}", math.nan, ())


def _standing(setting: Setting, lines: Sequence[CaseLine], progress: Progress | None) -> tuple[list[Standing], Batch]:
    problem = setting.under(lines)
    judged = stability.judge(problem, setting.state, setting.loads)
    batch = recover(problem, judged, detail=False)
    stand = np.flatnonzero(batch.code <= stability.NEUTRAL).tolist()
    runs = [(k, loads) for k in stand for loads in RAISED if loads == ALL or lines[k].wind]
    least = np.full(len(lines), math.nan)
    if stand:
        least[stand] = stability.least_costs(problem.take(np.array(stand)), judged.state.take(np.array(stand)))
    found: dict[int, list[Reserve]] = {k: [] for k in range(len(lines))}
    as_erected = math.nan
    if runs:
        places = np.array([k for k, _ in runs])
        raised = _Raised(setting, [(lines[k], loads) for k, loads in runs], least[places])
        as_erected = raised.as_erected
        for k, reserve in zip(places.tolist(), raised.followed(judged.state.take(places), progress), strict=True):
            found[k].append(reserve)
    out = []
    for k, line in enumerate(lines):
        verdict = _verdict(int(batch.code[k]), bool(batch.spins[k]), found[k])
        words = batch.reason[k] or batch.note[k] or ""
        out.append(Standing(line.name, line.wind_from, verdict, words, _over(float(least[k]), as_erected), tuple(found[k])))
    return out, batch


def _verdict(code: int, spins: bool, found: Sequence[Reserve]) -> str:
    """The verdict of a case; one that is free to spin about its own axis only is judged as if it were not."""
    if code in VERDICT and not spins:
        return VERDICT[code]
    if any(r.lost and not r.failed for r in found):
        return CONDITIONALLY
    return UNKNOWN if any(r.failed for r in found) else STABLE


def _over(least: float, as_erected: float) -> float:
    """A least eigenvalue over that in still air; NaN where one of them has nothing but free motions."""
    return least / as_erected if math.isfinite(least) and math.isfinite(as_erected) else math.nan


class _Raised:
    """Cases whose loads of a kind are raised together."""

    def __init__(self, setting: Setting, rows: Sequence[tuple[CaseLine, str]], least: Array) -> None:
        """least : (row,) least eigenvalue of each under its own loads."""
        self.setting, self.rows, self.least = setting, rows, least
        self.as_erected = float(stability.least_costs(setting.problem, setting.state)[0])
        self.still = _heads(setting.problem, setting.state)[0]

    def at(self, rows: Index, factor: Array) -> Problem:
        """The problem of some of the rows at their factors."""
        return self.setting.under([RAISED[self.rows[r][1]](self.rows[r][0], float(x)) for r, x in zip(rows, factor, strict=True)])

    def followed(self, start: State, progress: Progress | None) -> list[Reserve]:
        """The reserve of every row, from its state under its own loads."""
        paths = follow(self.at, start, np.ones(len(self.rows)), STOPS, self._seen, progress)
        cables = len(self.setting.length)
        drops = crossings(self.at, replace(paths, value=paths.value[:, :cables]), _loose)
        ends = ending.endings(self.at, paths, np.arange(len(self.rows)), self.least)
        return [self._reserve(k, paths, drops[k], end) for k, end in enumerate(ends)]

    def _seen(self, problem: Problem, state: State) -> Array:
        """(row, 2 cable + 3 spar) looseness and tension of every cable, and moves of the heads from still air."""
        forces = recovery.forces(problem, state, problem.evaluate(state))
        tension = np.maximum(forces.tension_anchor, forces.tension_top)
        moves = (_heads(problem, state) - self.still).reshape(problem.cases, -1)
        return np.hstack([_loose(problem, state), np.where(forces.present, tension, np.nan), moves])

    def _reserve(self, k: int, paths: Paths, drops: Array, end: ending.Ending) -> Reserve:
        lost, failed = bool(paths.lost[k]), bool(paths.failed[k])
        own = paths.of(k)
        cables = len(self.setting.length)
        loose, tension, moves = np.split(paths.value[own], [cables, 2 * cables], axis=1)
        falls = ending.FAULT if failed else ending.falls(end) if lost else ""
        return Reserve(
            self.rows[k][1], float(paths.low[k]), lost, failed, falls, ending.mode(end) if lost and not failed else None,
            _over(end.least, self.as_erected), float(paths.branches_at[k]), tuple(float(x) for x in drops),
            Path(paths.x[own], moves.reshape(len(own), -1, 3), tension, loose > 0), end.here,
        )  # fmt: skip


def _heads(problem: Problem, state: State) -> Array:
    """(case, spar, 3) [m] where the heads are, from the drawn position of their nodes."""
    return problem.reach(problem.structure.head, state)[1]


def _loose(problem: Problem, state: State) -> Array:
    """(case, cable) looseness, NaN where the cable is taken away."""
    return np.where(problem.loads.present > 0, recovery.looseness(problem, state, problem.evaluate(state)), np.nan)
