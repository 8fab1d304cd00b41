"""How far out, and how many ways: one mast on rings of evenly spaced anchors, over radius and number of ways.

Every level of guys (a guy level, or single cables from one height) keeps the height, lug, rope and initial tension of its first guy and has
one to each anchor of the ring; the first anchor keeps the bearing it is drawn at.  The site is left out: it is a first look.

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
from guys.scenario import Scenario, drawn
from guys.scenario.model import Anchor, AnchorPoint, Cable
from guys.scenario.reader import fault_at
from guys.studies import standing
from guys.studies.batch import Progress
from guys.studies.measures import measured
from guys.version import __version__

KEYS = ("pull", "tension", "uplift", "thrust", "lean", "rope")
FEWEST, MOST = 3, 12
"""Ways of a ring."""
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
    every = [ring(scenario, float(r), n) for n in ways for r in out]
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
    faults = []
    for cable in scenario.cable:
        if cable.length is not None:
            faults.append(fault_at(scenario, cable.key, "given by length, which fits one radius; give tension or tight = true"))
    if len(scenario.spar) > 1:
        faults.append(fault_at(scenario, ("spar", 1), "a second spar: rings are of one mast"))
    elif not scenario.cable:
        faults.append(fault_at(scenario, ("guy_level",), "missing; rings need guys"))
    if faults:
        raise ScenarioError(dict.fromkeys(faults))


def ring(scenario: Scenario, radius: float, ways: int) -> Scenario:
    """The mast on one ring of anchors named 1, 2, ... clockwise."""
    east, north, level = drawn.foot({spar.name: spar for spar in scenario.spar}, scenario.spar[0].name)
    first = scenario.anchor[0]
    start = math.atan2(first.east - east, first.north - north)
    turns = [start + math.tau * k / ways for k in range(ways)]
    anchors = tuple(
        Anchor(name=str(k + 1), east=east + radius * math.sin(t), north=north + radius * math.cos(t), level=level, give=first.give)
        for k, t in enumerate(turns)
    )
    templates = {_level(cable): cable for cable in reversed(scenario.cable)}
    cables = tuple(_guy(cable, anchor.name) for cable in reversed(templates.values()) for anchor in anchors)
    whole = tuple(case.model_copy(update={"bare": ()}) for case in scenario.case if not case.without)
    changed = {"anchor": anchors, "cable": cables, "case": whole, "site": None, "layouts": (), "search": None}
    return scenario.model_copy(update=changed)


def _level(cable: Cable) -> str:
    """The name of its level: that of the file, or its height."""
    return cable.level or f"{cable.from_.at:g} m"


def _guy(cable: Cable, anchor: str) -> Cable:
    return cable.model_copy(update={"name": f"{_level(cable)} {anchor}", "to": AnchorPoint(anchor=anchor)})


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
    yield "guys of every level to each anchor, at the initial tension of its first guy; anchors at the level of the foot; no site"
    left = [case.name for case in scenario.case if case.without]
    if left:
        yield f"cases that take cables away are left out: {', '.join(left)}"
