"""Demand, capacity and the factor required of everything that is judged, in every case of a batch.

    factor = capacity / demand        use = required / factor        past its allowable: use > 1

One table for all of it, so that findings and every study judge the same things in the same way.  A group makes its columns: a function from
solved cases to `Demands`, one item a column.  Capacity may differ from case to case, as that of a block does with the pull's direction.

    cable    strength / greater end tension
    sliding  friction / (sideways / down), at every ground foot
    lean     allowed / angle between the drawn axis and the line foot-head, in cases with wind
    anchor   holding / pull; not judged without a holdfast
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from guys.checks.extremes import measures
from guys.equilibrium import Evaluation, Problem, State
from guys.loads import CaseLine
from guys.recovery import Forces
from guys.rotation import Array
from guys.scenario.model import GroundFoot


@dataclass(frozen=True)
class Item:
    """One thing judged.

    thing, quantity, unit : as findings show them;  why : how the factor is formed;  lacking : why it is not judged where it is not
    source : where the capacity comes from;  default : the factor required is not the user's;  if_loaded : no finding where no case loads it
    """

    thing: str
    quantity: str
    unit: str
    why: str
    lacking: str = ""
    source: str = ""
    default: bool = False
    if_loaded: bool = False


@dataclass(frozen=True)
class Demands:
    """demand, capacity, required : (case, item), SI.  demand NaN: no equilibrium, or not asked in that case; capacity NaN: not judged."""

    items: tuple[Item, ...]
    demand: Array
    capacity: Array
    required: Array

    @property
    def factor(self) -> Array:
        """(case, item) capacity over demand; inf without demand, NaN where not judged."""
        bare = np.where(self.demand > 0, self.demand, 1.0)
        return np.where(np.isnan(self.demand + self.capacity), np.nan, np.where(self.demand > 0, self.capacity / bare, np.inf))

    @property
    def use(self) -> Array:
        """(case, item) factor required over factor found; NaN where not judged."""
        factor = self.factor
        out = np.where(factor > 0, self.required / np.where(factor > 0, factor, 1.0), np.inf)
        return np.where(np.isnan(factor), np.nan, out)

    def take(self, rows: NDArray[np.int64]) -> Demands:
        """The cases `rows`."""
        return Demands(self.items, self.demand[rows], self.capacity[rows], self.required[rows])

    def blank(self, rows: NDArray[np.int64]) -> Demands:
        """Without demand in the cases `rows`."""
        demand = self.demand.copy()
        demand[rows] = np.nan
        return Demands(self.items, demand, self.capacity, self.required)


def join(parts: Sequence[Demands]) -> Demands:
    """Cases one after another, the same items in all."""
    return Demands(parts[0].items, *(np.concatenate([getattr(p, n) for p in parts]) for n in ("demand", "capacity", "required")))


def beside(groups: Sequence[Demands]) -> Demands:
    """Items side by side, the same cases in all."""
    items = tuple(item for group in groups for item in group.items)
    return Demands(items, *(np.concatenate([getattr(g, n) for g in groups], axis=1) for n in ("demand", "capacity", "required")))


def group(items: Sequence[Item], demand: Array, capacity: Array | float, required: Array | float) -> Demands:
    """Columns of one group; capacity and required may be anything that spreads over (case, item)."""
    shape = demand.shape
    return Demands(tuple(items), demand, np.broadcast_to(capacity, shape).copy(), np.broadcast_to(required, shape).copy())


def of(problem: Problem, state: State, found: Evaluation, forces: Forces) -> Demands:
    """Everything judged, in every case of solved equilibria."""
    m = measures(forces)
    return beside(
        [
            _cables(problem, m.tension),
            _sliding(problem, m.slide),
            _leans(problem, m.lean),
            _anchors(problem, m.resultant),
        ]
    )


def _cables(problem: Problem, tension: Array) -> Demands:
    scenario = problem.structure.scenario
    allowed = scenario.allowables
    items = [
        Item(
            f"cable {c.name}", "tension", "N", "least breaking load over tension", "its rope has no strength",
            default="cable" in allowed.defaulted,
        )
        for c in scenario.cable
    ]  # fmt: skip
    return group(items, tension, problem.structure.cables.strength, allowed.cable)


def _sliding(problem: Problem, slide: Array) -> Demands:
    scenario = problem.structure.scenario
    allowed = scenario.allowables
    feet = [k for k, spar in enumerate(scenario.spar) if isinstance(spar.foot, GroundFoot)]
    items = [
        Item(
            f"base of {scenario.spar[k].name}", "sideways/down", "", "friction over sideways/down", "no friction given for its base",
            default="sliding" in allowed.defaulted,
        )
        for k in feet
    ]  # fmt: skip
    friction = np.array([math.nan if (f := scenario.spar[k].friction) is None else f for k in feet])
    return group(items, slide[:, feet], friction, allowed.sliding)


def _leans(problem: Problem, lean: Array) -> Demands:
    scenario = problem.structure.scenario
    allowed = scenario.allowables
    items = [
        Item(
            f"spar {s.name}", "lean", "rad", "allowed over found, foot to head against the drawn axis", default="lean" in allowed.defaulted,
            if_loaded=True,
        )
        for s in scenario.spar
    ]  # fmt: skip
    return group(items, np.where(_windy(problem.loads.lines)[:, None], lean, np.nan), allowed.lean, 1.0)


def _windy(lines: Sequence[CaseLine]) -> NDArray[np.bool_]:
    return np.array([not math.isnan(line.wind_from) for line in lines])


def _anchors(problem: Problem, pull: Array) -> Demands:
    scenario = problem.structure.scenario
    allowed = scenario.allowables
    lacking = "no holdfast given: what holds it is not checked"
    items = [
        Item(f"anchor {a.name}", "pull", "N", "holding over pull", lacking, default="anchor" in allowed.defaulted) for a in scenario.anchor
    ]
    return group(items, pull, np.nan, allowed.anchor)
