"""Layouts side by side: each through the whole line, measured, and ranked by the measure named.

What stands within all that is judged comes first, then what is past something, then what falls; within each of these the measure
decides, and layouts alike to eight digits share a rank.  Each layout is solved as by itself, in this process or by any
`concurrent.futures.Executor`: results are the same to the last bit.  They are not solved again by the second method; `guys solve` does
that for the layout chosen.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from concurrent.futures import Executor
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Literal

from guys.results import Finding, Solution
from guys.scenario import Scenario, layouts
from guys.studies import sizing, standing
from guys.studies.batch import Progress
from guys.studies.measures import MEASURES, Value, decides, measured
from guys.studies.sizing import AnchorNeeds
from guys.version import __version__

Verdict = Literal["within", "past", "not judged", "falls"]
GRAVITY: tuple[Verdict, ...] = ("within", "not judged", "past", "falls")
"""Verdicts on a whole layout, the graver the later: "within" all that is judged; "not judged" where nothing is."""


@dataclass(frozen=True)
class Compared:
    """One layout solved.

    name : of the layout, with its file where there are several;  rank : from 1;  needs : what holdfasts must be, by anchor
    values : by the key of the measure
    """

    name: str
    rank: int
    solution: Solution
    needs: tuple[AnchorNeeds, ...]
    values: dict[str, Value]

    @property
    def verdict(self) -> Verdict:
        """On the whole layout."""
        if any(self.solution.unsettled) or self.solution.failed:
            return "falls"
        return "past" if self.solution.past else "not judged" if self.decides is None else "within"

    @property
    def not_judged(self) -> int:
        """How many things are not judged."""
        return sum(f.verdict == "not judged" for f in self.solution.findings)

    @property
    def decides(self) -> Finding | None:
        """What is nearest to its allowable, or farthest past it."""
        return decides(self.solution)


@dataclass(frozen=True)
class Comparison:
    """layouts : the best first;  by : the key of the measure they are ranked by."""

    layouts: tuple[Compared, ...]
    by: str
    version: str


def compare(
    scenarios: Sequence[Scenario], by: str = "pull", executor: Executor | None = None, progress: Progress | None = None
) -> Comparison:
    """Every layout of every scenario, ranked.

    by : a key of `MEASURES`;  executor : solves layouts side by side, None: one after another;  progress : called with layouts done and
    in all

    A layout that falls is a result, not an exception.  Raises `ScenarioError` where no still-air state of some layout meets the initial
    tensions asked for.
    """
    every = [layout for scenario in scenarios for layout in layouts.every(scenario)]
    solve = map if executor is None else executor.map
    found = []
    for layout, (solution, needs) in zip(every, solve(solved, every), strict=True):
        name = layout.layout if len(scenarios) == 1 else f"{Path(layout.path or 'text').name}: {layout.layout}"
        solution = replace(solution, scenario=layout)
        found.append(Compared(name, 0, solution, needs, measured(solution, needs)))
        if progress is not None:
            progress(len(found), len(every))
    return Comparison(ranked(found, by), by, __version__)


def solved(scenario: Scenario) -> tuple[Solution, tuple[AnchorNeeds, ...]]:
    """One layout through the whole line, and what its holdfasts must be."""
    setting, listed, swept = standing.cases(scenario)
    needs = sizing.sized(scenario, listed, swept).anchors if scenario.holdfast else ()
    return standing.solution(setting, listed, swept, again=False), needs


def ranked(found: Iterable[Compared], by: str) -> tuple[Compared, ...]:
    """The best first, those alike in one rank."""

    def order(each: Compared) -> tuple[int, float]:
        return GRAVITY.index(each.verdict), MEASURES[by].order(each.values[by])

    out: list[Compared] = []
    for place, each in enumerate(sorted(found, key=order)):
        rank = out[-1].rank if out and order(out[-1]) == order(each) else place + 1
        out.append(replace(each, rank=rank))
    return tuple(out)
