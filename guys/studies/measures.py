"""Measures by which layouts are compared: one figure each of a solved layout, with what it is of and the case and wind that decide it.

Loads are those a crew is to see: of service cases where the file has others beside them.  Whatever comes from the refined circle of winds
is its peak; margins of the site are the least of the same winds; bending is of the listed cases and directions.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass
from typing import Any

import numpy as np

from guys.checks import plan
from guys.results import Extreme, Finding, Solution
from guys.studies.sizing import AnchorNeeds, Need


@dataclass(frozen=True)
class Value:
    """value : SI, NaN where there is nothing to tell;  of : the thing;  case, wind_from [rad] : where it is found, NaN without wind"""

    value: float = math.nan
    of: str = ""
    case: str = ""
    wind_from: float = math.nan


@dataclass(frozen=True)
class Measure:
    """key : what a user names it by;  column : its name in files, with the unit;  words : its head in tables

    dimension : of `guys.units`, empty for a plain number;  less : whether less is better;  find : from a solved layout and its needs
    """

    key: str
    column: str
    words: str
    dimension: str
    less: bool
    find: Callable[[Solution, tuple[AnchorNeeds, ...]], Value]

    def order(self, value: Value) -> float:
        """For sorting, the best first; eight digits, so that what is alike but for rounding is alike; what is not there last."""
        if math.isnan(value.value):
            return math.inf
        return float(f"{value.value:.8g}") * (1.0 if self.less else -1.0)


def _greatest(found: Iterable[tuple[str, Extreme]]) -> Value:
    some = [(of, e) for of, e in found if not math.isnan(e.peak)]
    if not some:
        return Value()
    of, e = max(some, key=lambda each: float(f"{each[1].peak:.8g}"))
    return Value(e.peak, of, e.peak_case, e.peak_wind_from)


def _cable_factor(solution: Solution) -> Value:
    judged = [c for c in solution.worst_cables if not math.isnan(c.factor)]
    if not judged:
        return Value()
    c = min(judged, key=lambda c: float(f"{c.factor:.8g}"))
    return Value(c.factor, f"cable {c.name}", c.tension.peak_case, c.tension.peak_wind_from)


def _feet(solution: Solution, name: str) -> Value:
    return _greatest((f"base of {f.spar}", getattr(f, name)) for f in solution.worst_feet if f.carried_by is None)


def _over_cases(solution: Solution, values: Iterable[tuple[str, Any]]) -> Value:
    """The greatest of some (case,) arrays."""
    crew = np.array([solution.loads_are != "service" or solution.scenario.kind_of(name) == "service" for name in solution.case])
    best = Value()
    for of, column in values:
        column = np.where(crew & ~np.isnan(column), column, -np.inf)
        k = int(np.argmax(column))
        if np.isfinite(column[k]) and not column[k] <= best.value * (1 + 1e-8):
            best = Value(float(column[k]), of, solution.case[k], float(solution.wind_from[k]))
    return best


def _bending(solution: Solution) -> Value:
    return _over_cases(solution, ((f"spar {s.name}", np.linalg.norm(s.bending, axis=-1).max(axis=1)) for s in solution.spars))


def _lean(solution: Solution) -> Value:
    return _over_cases(solution, ((f"spar {s.name}", solution.head_lean[:, k]) for k, s in enumerate(solution.spars)))


def _margin(findings: Iterable[Finding]) -> Value:
    some = [f for f in findings if not math.isnan(f.margin)]
    if not some:
        return Value()
    f = min(some, key=lambda f: f.margin)
    return Value(f.margin, f"{f.thing}, {f.quantity}", f.case, f.wind_from)


def decides(solution: Solution) -> Finding | None:
    """What is nearest to its allowable, or farthest past it."""
    return next((f for f in solution.findings if f.verdict != "not judged"), None)


def _use(solution: Solution) -> Value:
    f = decides(solution)
    if f is None:
        return Value()
    use = f.required / f.factor if f.factor > 0 else math.inf
    return Value(use, f"{f.thing}, {f.quantity}", f.case, f.wind_from)


def own_need(anchor: AnchorNeeds) -> Need | None:
    """What the holdfast of an anchor must be; of one that has none, the first of those at hand."""
    own = [need for need in anchor.needs if anchor.held_by in (None, need.holdfast)]
    return own[0] if own else None


def _block_mass(needs: tuple[AnchorNeeds, ...]) -> Value:
    """Together; not known where one block cannot be sized."""
    blocks = {a.name: need for a in needs if (need := own_need(a)) is not None and need.kind == "block"}
    if not blocks:
        return Value()
    return Value(math.fsum(need.needed for need in blocks.values()), f"blocks at {', '.join(blocks)}")


def _rope(solution: Solution) -> Value:
    return Value(float(solution.cables.unstressed_length[0].sum()), f"{len(solution.cables.name)} cables")


def _pieces(solution: Solution) -> Value:
    held = {a for a in solution.cables.to_anchor if a is not None}
    return Value(float(len(solution.cables.name) + len(held)), f"{len(solution.cables.name)} cables, {len(held)} anchors")


def _anchors(name: str) -> Callable[[Solution, Any], Value]:
    return lambda solution, _: _greatest((f"anchor {a.name}", getattr(a, name)) for a in solution.worst_anchors)


MEASURES: Mapping[str, Measure] = {
    m.key: m
    for m in (
        Measure("pull", "pull_N", "greatest pull", "force", True, _anchors("resultant")),
        Measure("uplift", "uplift_N", "greatest uplift", "force", True, _anchors("uplift")),
        Measure("cable", "cable_factor", "least cable factor", "", False, lambda s, _: _cable_factor(s)),
        Measure("tension", "tension_N", "greatest tension", "force", True,
                lambda s, _: _greatest((f"cable {c.name}", c.tension) for c in s.worst_cables)),
        Measure("thrust", "thrust_N", "thrust on base", "force", True, lambda s, _: _feet(s, "down")),
        Measure("sideways", "sideways_N", "sideways on base", "force", True, lambda s, _: _feet(s, "sideways")),
        Measure("bending", "bending_Nm", "greatest bending", "moment", True, lambda s, _: _bending(s)),
        Measure("lean", "lean_deg", "greatest lean", "angle", True, lambda s, _: _lean(s)),
        Measure("headroom", "headroom_margin_m", "headroom margin", "length", False, lambda s, _: _margin(plan.headrooms(s.findings))),
        Measure("margin", "margin_m", "least site margin", "length", False, lambda s, _: _margin(s.findings)),
        Measure("use", "use", "greatest use", "", True, lambda s, _: _use(s)),
        Measure("mass", "block_mass_kg", "blocks together", "mass", True, lambda _, needs: _block_mass(needs)),
        Measure("rope", "rope_m", "rope", "length", True, lambda s, _: _rope(s)),
        Measure("pieces", "pieces", "pieces", "", True, lambda s, _: _pieces(s)),
    )
}  # fmt: skip
"""By the name a user gives."""


def measured(solution: Solution, needs: tuple[AnchorNeeds, ...], keys: Iterable[str] = MEASURES) -> dict[str, Value]:
    """The measures of a solved layout; none of loads where nothing stands."""
    seen = solution.for_crew()
    return {key: MEASURES[key].find(seen, needs) for key in keys}
