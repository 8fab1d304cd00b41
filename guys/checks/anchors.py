"""Anchors: holding over pull; not judged without a holdfast.
"""

from __future__ import annotations

import math

from guys.checks.items import Demands, Item, group
from guys.equilibrium import Problem
from guys.rotation import Array


def demands(problem: Problem, pull: Array) -> Demands:
    """Holding against pull, one item an anchor; pull : (case, anchor) [N]."""
    scenario = problem.structure.scenario
    allowed = scenario.allowables
    lacking = "no holdfast given: what holds it is not checked"
    items = [
        Item(f"anchor {a.name}", "pull", "N", "holding over pull", lacking, default="anchor" in allowed.defaulted) for a in scenario.anchor
    ]
    return group(items, pull, math.nan, allowed.anchor)
