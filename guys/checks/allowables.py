"""Findings: of everything judged (`guys.checks.demands`) the case in which it is nearest to, or farthest past, its allowable.

The listed cases and all winds solved for on the full circle count, the state on either side of a branch too.  Nothing is called safe: the
words are "within" and "past" the allowable, and "not judged" where a capacity is not known.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import replace

import numpy as np

from guys.checks.demands import Demands, Item
from guys.checks.extremes import first_greatest
from guys.checks.items import gravity
from guys.loads import CaseLine
from guys.results import Finding, Verdict
from guys.rotation import Array

NO_LOAD = "no case has an equilibrium, so there is no load to judge"


def findings(demands: Demands, lines: Sequence[CaseLine]) -> tuple[Finding, ...]:
    """One finding an item over all cases, the nearest to its allowable first, what is not judged last."""
    use = demands.use
    out = [
        _finding(item, demands, use[:, k], k, lines)
        for k, item in enumerate(demands.items)
        if not (item.if_loaded and np.isnan(demands.demand[:, k]).all())
    ]
    return sorted_findings(out)


def sorted_findings(found: Iterable[Finding]) -> tuple[Finding, ...]:
    """The nearest to its allowable first, what is not judged last."""
    order = {"past": 0, "within": 1, "not judged": 2}
    return tuple(sorted(found, key=lambda f: (order[f.verdict], _reserve(f), -math.inf if math.isnan(f.margin) else f.margin)))


def unjudged(found: tuple[Finding, ...]) -> tuple[Finding, ...]:
    """The findings where no case stands: what an equilibrium that does not hold bears says nothing of an allowable."""
    return tuple(f if f.verdict == "not judged" else replace(f, factor=math.nan, verdict="not judged", why="no case stands") for f in found)


def _reserve(finding: Finding) -> float:
    """Factor over the one required, to eight digits, so that what is alike but for rounding stays in the order of the file."""
    return math.inf if math.isnan(finding.factor) else float(f"{finding.factor / finding.required:.8g}")


def _finding(item: Item, demands: Demands, use: Array, k: int, lines: Sequence[CaseLine]) -> Finding:
    """The governing case of item `k`: that of the greatest use; of the greatest demand not judged, where nothing judged is past."""
    demand, capacity, required, mode = demands.demand[:, k], demands.capacity[:, k], demands.required[:, k], demands.mode[:, k]
    score = gravity(demand, capacity, use)
    if np.isnan(score).all():
        lacking = np.isnan(capacity).all()
        return Finding(
            item.thing, item.quantity, math.nan, float(capacity[0]), item.unit, float(required[0]), math.nan,
            "not judged", "", math.nan, item.lacking if lacking else NO_LOAD, item.default, item.source,
        )  # fmt: skip
    row = first_greatest(score)
    factor, line = float(demands.factor[row, k]), lines[row]
    return Finding(
        item.thing, item.quantity, float(demand[row]), float(capacity[row]), item.unit, float(required[row]), factor,
        judge(factor, float(required[row])), line.name, line.wind_from, item.lacking if math.isnan(factor) else item.why,
        item.default, item.source, item.modes[int(mode[row])] if mode[row] >= 0 else "",
    )  # fmt: skip


def judge(factor: float, required: float) -> Verdict:
    """The word for a factor."""
    if math.isnan(factor):
        return "not judged"
    return "within" if factor >= required else "past"
