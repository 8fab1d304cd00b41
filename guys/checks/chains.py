"""Cables: least breaking load over the tension of the greater end.
"""

from __future__ import annotations

from guys.checks.items import Demands, Item, group
from guys.equilibrium import Problem
from guys.rotation import Array


def demands(problem: Problem, tension: Array) -> Demands:
    """Strength against tension, one item a cable; tension : (case, cable) [N] of the greater end."""
    scenario = problem.structure.scenario
    allowed = scenario.allowables
    items = [
        Item(
            f"cable {c.name}", "tension", "N", "least breaking load over tension", "its rope has no strength",
            default="cable" in allowed.defaulted, allowable="cable",
        )
        for c in scenario.cable
    ]  # fmt: skip
    return group(items, tension, problem.structure.cables.strength, allowed.cable)
