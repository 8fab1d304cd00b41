"""Spars: lean of the head in cases with wind.
"""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from guys.checks.items import Demands, Item, group
from guys.equilibrium import Problem
from guys.loads import CaseLine
from guys.rotation import Array


def leans(problem: Problem, lean: Array) -> Demands:
    """Allowed against found angle between the drawn axis and the line foot-head, one item a spar; lean : (case, spar) [rad]."""
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
