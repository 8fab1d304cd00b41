"""What a checking engineer asks beyond the run itself, solved for the record: how far the answer hangs on what was assumed.

    tensions     every initial tension that is given 10 % lower and 10 % higher
    mesh         twice the elements in every span
    position     every case again under loads worked out on the deformed structure of its own answer, once
    free body    the whole structure cut free in the case of the greatest use of a cable
    worked       loads of one case at one height, step by step, of the peak pressure

Variants are compared by the greatest values over the listed cases; winds between them are swept for the run itself alone.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from guys import recovery, stability
from guys.checks import extremes, free_body
from guys.checks.free_body import FreeBody
from guys.errors import ScenarioError
from guys.loads import CaseLine, LoadCases, Placed, assemble, joined
from guys.loads.worked import Worked, worked
from guys.results import Solution
from guys.rotation import Array
from guys.scenario import Scenario
from guys.setting import Setting, find
from guys.structure import build
from guys.studies import standing
from guys.studies.batch import Batch, Progress, join, recover, solve_lines
from guys.studies.matters import with_tensions

LESS, MORE = 0.9, 1.1
FINER = 2


@dataclass(frozen=True)
class Variant:
    """Greatest values over the listed cases of one way of solving; NaN: none of them has an equilibrium.

    key, words : what was changed;  lacking : why it was not solved, "" where it was;  standing : of the cases
    tension (cable,), pull (anchor,), down (spar,) [N], turning (spar,) [N m], lean (spar,) [rad]
    """

    key: str
    words: str
    lacking: str
    standing: int
    tension: Array
    pull: Array
    down: Array
    turning: Array
    lean: Array


@dataclass(frozen=True)
class Recorded:
    """solution : the run;  variants : the run itself first;  loads, reactions (case, 3) [N] sums of what is put on and what is given back
    worked None: no case has wind;  free_body None: nothing stands"""

    solution: Solution
    variants: tuple[Variant, ...]
    loads: Array
    reactions: Array
    worked: Worked | None
    free_body: FreeBody | None


def record(scenario: Scenario, progress: Progress | None = None) -> Recorded:
    """Solve a scenario and all that the record tells of it.

    A structure that falls is a result, not an exception.  Raises `ScenarioError` where no still-air state meets the initial tensions.
    """
    setting, listed, swept = standing.cases(scenario, progress=progress)
    solution = standing.solution(setting, listed, swept)
    first = _variant("as solved", "as solved", listed)
    less, more = (
        _again(scenario, key, words, with_tensions(scenario, factor), 1, progress, _tensions_lack(scenario))
        for key, words, factor in (("tension less", "initial tensions −10 %", LESS), ("tension more", "initial tensions +10 %", MORE))
    )
    finer = _again(scenario, "mesh finer", "twice the elements", scenario, FINER, progress, "")
    loads, reactions = _sums(setting, listed)
    chosen = _governing(solution, listed)
    return Recorded(
        solution, (first, less, more, finer, _updated(setting, listed, progress)), loads, reactions,
        _worked(setting, listed, solution, chosen), None if chosen is None else _cut_free(setting, listed.lines, chosen),
    )  # fmt: skip


def _tensions_lack(scenario: Scenario) -> str:
    return "" if any(c.tension is not None for c in scenario.cable) else "no cable is given by tension"


def _again(scenario: Scenario, key: str, words: str, changed: Scenario, finer: int, progress: Progress | None, lacking: str) -> Variant:
    if lacking:
        return _not_solved(scenario, key, words, lacking)
    try:
        listed = standing.listed_cases(find(build(changed, finer)), progress)
    except ScenarioError as error:
        return _not_solved(scenario, key, words, error.faults[0].message)
    return _variant(key, words, listed)


def _not_solved(scenario: Scenario, key: str, words: str, lacking: str) -> Variant:
    sizes = (len(scenario.cable), len(scenario.anchor), *[len(scenario.spar)] * 3)
    return Variant(key, words, lacking, 0, *(np.full(n, np.nan) for n in sizes))


def _variant(key: str, words: str, listed: Batch) -> Variant:
    """Both states of a branch count, as they do in the worst loads."""
    every = listed.forces if listed.mirror is None else recovery.join([listed.forces, listed.mirror])
    m = extremes.measures(every)
    settled = (listed.code == stability.STABLE) | listed.spins
    values = (m.tension, m.resultant, m.down, m.turning, m.lean)
    return Variant(key, words, "", int(settled.sum()), *(np.fmax.reduce(each, axis=0) for each in values))


def _updated(setting: Setting, listed: Batch, progress: Progress | None) -> Variant:
    """The listed cases under loads on their own deformed positions; what does not stand keeps the loads it had."""
    key, words = "loads updated", "loads on the deformed position"
    if not setting.stands:
        return _variant(key, words, listed)

    def moved(loads: LoadCases, _: NDArray[np.int64]) -> LoadCases:
        problem = replace(setting.problem, loads=loads)
        judged = stability.judge(problem, setting.state, setting.loads)
        placed = [Placed(u, psi, setting.length) for u, psi in zip(judged.state.u, judged.state.psi, strict=True)]
        there = [
            assemble(problem.structure, [line], place) if code <= stability.NEUTRAL else loads.take(np.array([k]))
            for k, (line, place, code) in enumerate(zip(loads.lines, placed, judged.code, strict=True))
        ]
        return joined(there)

    first = recover(setting.problem, setting.judged, detail=True)
    return _variant(key, words, join([first, solve_lines(setting, listed.lines[1:], True, progress, moved)]))


def _governing(solution: Solution, listed: Batch) -> int | None:
    """The case that was solved again as a check: that of the greatest use of a cable."""
    if solution.check.resolve == "not run":
        return None
    wanted = (solution.check.resolved_case, solution.check.resolved_wind_from)
    return next(k for k, line in enumerate(listed.lines) if (line.name, line.wind_from) == wanted or _still(line, wanted))


def _still(line: CaseLine, wanted: tuple[str, float]) -> bool:
    return line.name == wanted[0] and math.isnan(line.wind_from) and math.isnan(wanted[1])


def _sums(setting: Setting, listed: Batch) -> tuple[Array, Array]:
    """Sums of every case; NaN where gusts come patch by patch, whose peaks belong to no one equilibrium and do not add up."""
    patched = np.array([bool(line.patches) for line in listed.lines])[:, None]
    loads, reactions = free_body.sums(setting.under(listed.lines), listed.forces)
    return np.where(patched, np.nan, loads), np.where(patched, np.nan, reactions)


def _cut_free(setting: Setting, lines: Sequence[CaseLine], k: int) -> FreeBody:
    """Under the mean wind where gusts come patch by patch."""
    if k == 0:
        return free_body.cut_free(setting.problem, setting.problem, setting.state)
    line = lines[k].states()[0]
    problem = setting.under([line])
    state = stability.judge(problem, setting.state, setting.loads).state
    return free_body.cut_free(problem, setting.under([replace(line, wind=0.0)]), state)


def _worked(setting: Setting, listed: Batch, solution: Solution, chosen: int | None) -> Worked | None:
    """At half the length of the first spar, in the governing case or the first with wind; on the cable that pulls hardest there."""
    windy = [k for k, line in enumerate(listed.lines) if line.wind > 0 and not math.isnan(line.wind_from)]
    if not windy:
        return None
    k = chosen if chosen in windy else windy[0]
    structure = setting.problem.structure
    tension = np.fmax(solution.cables.tension_anchor[k], solution.cables.tension_top[k])
    kept = [n for n, c in enumerate(structure.scenario.cable) if c.name not in listed.lines[k].without]
    cable = max(kept, key=lambda n: np.nan_to_num(tension[n], nan=-1.0), default=None)
    if setting.stands:
        placed = Placed(setting.state.u[0], setting.state.psi[0], setting.length)
    else:
        placed = Placed(np.zeros_like(setting.state.u[0]), np.zeros_like(setting.state.psi[0]), setting.length)
    return worked(structure, placed, listed.lines[k], 0, 0.5 * float(structure.length[0]), cable)
