"""How far out, and how many ways: one mast on rings of evenly spaced anchors, over radius and number of ways.

How a mast is put on a ring: `guys.scenario.ring`.  The site is left out: it is a first look.

    straight guys of one level at height h, stiffness EA, angle a from the ground: against the head's sway  k = n/2 EA/h sin a cos^2 a,
    greatest at tan^2 a = 1/2 (35.3 deg, radius 1.414 h);  pull for a given horizontal H/cos a, uplift H tan a
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from concurrent.futures import Executor
from dataclasses import dataclass

import numpy as np

from guys.errors import ScenarioError
from guys.results import Solution
from guys.rotation import Array
from guys.scenario import Scenario, ring
from guys.scenario.reader import fault_at
from guys.studies import standing
from guys.studies.batch import Progress
from guys.studies.measures import measured
from guys.version import __version__

KEYS = ("pull", "tension", "uplift", "thrust", "lean", "rope")
SPAN = (0.4, 1.6)
"""Radii looked at where none are given, as shares of the height of the highest guys."""


@dataclass(frozen=True)
class Rings:
    """What the study found.

    ways : (way,);  radius : (radius,) [m];  values : by key of `KEYS` (way, radius), NaN where it falls
    stands : (way, radius);  footprint : (way, radius) [m2] ground within the anchors;  height : of the highest guys [m]
    """

    scenario: Scenario
    version: str
    ways: tuple[int, ...]
    radius: Array
    values: dict[str, Array]
    stands: Array
    footprint: Array
    height: float
    notes: tuple[str, ...]


def rings(
    scenario: Scenario,
    ways: Sequence[int] = (3, 4),
    radius: tuple[float, float] | None = None,
    steps: int = 9,
    executor: Executor | None = None,
    progress: Progress | None = None,
) -> Rings:
    """Solve every ring.

    radius : least and greatest [m], None: `SPAN` of the height of the highest guys;  steps : radii from the one to the other

    Raises ScenarioError where the file is not one mast on guys given by tension or as tight.
    """
    _fit(scenario)
    height = max(cable.from_.at for cable in scenario.cable)
    least, most = radius or (SPAN[0] * height, SPAN[1] * height)
    out = np.linspace(least, most, steps)
    bare = scenario.model_copy(update={"site": None, "search": None})
    every = [ring.ring(bare, n, float(r)) for n in ways for r in out]
    solved, found = map if executor is None else executor.map, list[tuple[float, ...]]()
    for one in solved(_values, every):
        found.append(one)
        if progress is not None:
            progress(len(found), len(every))
    table = np.array(found).reshape(len(ways), steps, len(KEYS))
    footprint = np.array([[n / 2 * r**2 * math.sin(math.tau / n) for r in out] for n in ways])
    values = {key: table[:, :, k] for k, key in enumerate(KEYS)}
    return Rings(
        scenario, __version__, tuple(ways), out, values, ~np.isnan(table).any(axis=2), footprint, height, tuple(_notes(scenario))
    )


def _fit(scenario: Scenario) -> None:
    """One mast, whose guys can be drawn to any anchor."""
    found = ring.unfit(len(scenario.spar), [(cable.key, cable.length is not None) for cable in scenario.cable])
    faults = [fault_at(scenario, each.key, each.message) for each in found]
    if faults:
        raise ScenarioError(faults)


def _values(scenario: Scenario) -> tuple[float, ...]:
    """The measures of one ring; NaN where it falls or no still-air state meets its tensions."""
    try:
        solution = standing.solution(*standing.cases(scenario), again=False)
    except ScenarioError:
        return (math.nan,) * len(KEYS)
    if _falls(solution):
        return (math.nan,) * len(KEYS)
    return tuple(value.value for value in measured(solution, (), KEYS).values())


def _falls(solution: Solution) -> bool:
    return any(solution.unsettled) or solution.failed


def _notes(scenario: Scenario) -> Iterator[str]:
    yield from ring.notes(scenario)
    yield "anchors at the level of the foot; no site"
