"""States on the way up: each stage of the file as a structure of its own, solved and judged in its wind, and the wind it may see.

A stage is the part of the structure that is there (`guys.scenario.part_built`), its cables set in still air to the tensions of the file, as
the crew sets them anew at every stage.  It runs the main line of `guys solve`, full circle of winds and self-check included, and then that
of `guys limit`.  A stage that cannot be set to its tensions does not stand: that is a result too.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from guys.checks.alarms import CAUTIONS
from guys.errors import Fault, ScenarioError
from guys.limits import Limit
from guys.results import AnchorWorst, CableWorst, Finding, Solution
from guys.scenario import Scenario, plausible
from guys.scenario.part_built import part_built
from guys.scenario.stage import Stage
from guys.studies import standing
from guys.studies.batch import Progress
from guys.studies.cells import FALLS, NOT_JUDGED, PAST, WITHIN, Cells, cells_of, worst_first
from guys.studies.limit import limits
from guys.version import __version__

HOW = (
    "Each stage is a structure of its own: spars up to their height, what is on them, the cables made fast, set in still air to the "
    "tensions of the file. Weights count once, no ice.",
    "The wind a stage may see is the lowest, from any direction, at which something judged reaches its allowable or equilibrium is lost; "
    "it has no reserve of its own.",
    "Not judged: the moment of lifting a section, the crew and its gear on the spar, gin poles and climbing lines.",
)
"""What was tested, in words."""


@dataclass(frozen=True)
class Built:
    """One stage.

    scenario : what is there;  still : it does not stand in still air already;  solution : None where it cannot be set
    least : the finding nearest its allowable, None where nothing is judged or it does not stand
    may_see : the lowest limit, None without wind, or where it cannot be set;  reason : why it does not stand
    """

    stage: Stage
    scenario: Scenario
    verdict: int
    still: bool
    solution: Solution | None
    least: Finding | None
    may_see: Limit | None
    reason: str

    @property
    def wind(self) -> float | None:
        """Speed it is judged in [m/s]; None: still air."""
        return None if self.scenario.wind is None else self.scenario.wind.speed

    @property
    def tension(self) -> CableWorst | None:
        """The cable of the greatest tension; None where it does not stand or has none."""
        known = self.solution.worst_cables if self.solution is not None and self.verdict < FALLS else ()
        return max(known, key=lambda worst: worst.tension.peak, default=None)

    @property
    def pull(self) -> AnchorWorst | None:
        """The anchor of the greatest pull; None where it does not stand or has none."""
        known = self.solution.worst_anchors if self.solution is not None and self.verdict < FALLS else ()
        return max(known, key=lambda worst: worst.resultant.peak, default=None)


@dataclass(frozen=True)
class Stages:
    """What the study found, in the order of the file; `scenario` is the whole."""

    scenario: Scenario
    version: str
    built: tuple[Built, ...]
    how: tuple[str, ...] = HOW
    cautions: tuple[str, ...] = CAUTIONS


def build_up(scenario: Scenario, progress: Progress | None = None) -> Stages:
    """Solve every stage of a scenario.

    Raises ScenarioError where the file has no stage.
    """
    if not scenario.stage:
        fault = Fault(scenario.path, None, None, "stage", 'the file has none; give [[stage]] with name, up_to = "12 m", wind = "12 m/s"')
        raise ScenarioError([fault])
    return Stages(scenario, __version__, tuple(_built(part_built(scenario, stage), stage, progress) for stage in scenario.stage))


def _built(there: Scenario, stage: Stage, progress: Progress | None) -> Built:
    there = there.model_copy(update={"warnings": tuple(plausible.warnings(there))})
    try:
        setting, listed, swept = standing.cases(there, progress=progress)
        limit = None if there.wind is None else limits(there, progress=progress).worst[0]
    except ScenarioError as error:
        reason = "; ".join(fault.message for fault in error.faults)
        return Built(stage, there, FALLS, True, None, None, None, f"cannot be set: {reason}")
    solution = standing.solution(setting, listed, swept)
    verdict, reason = _verdict(solution, [cells_of(batch) for batch in (listed, swept) if batch is not None])
    judged = [f for f in solution.findings if not math.isnan(f.factor)]
    least = min(judged, key=lambda f: f.factor / f.required, default=None) if verdict < FALLS else None
    return Built(stage, there, verdict, not setting.stands, solution, least, limit, reason)


def _verdict(solution: Solution, cells: Sequence[Cells]) -> tuple[int, str]:
    """The gravest word for a stage, winds from between the listed directions included, and why it falls."""
    code, reason = max(((int(part.verdict[k]), part.reason[k]) for part in cells for k in [worst_first(part)]), key=lambda found: found[0])
    if code >= FALLS:
        return code, reason
    judged = any(not math.isnan(f.factor) for f in solution.findings)
    return PAST if solution.past else WITHIN if judged else NOT_JUDGED, ""
