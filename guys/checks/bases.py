"""Feet on the ground: friction over sideways/down.
"""

from __future__ import annotations

import math

import numpy as np

from guys.checks.items import Demands, Item, group
from guys.equilibrium import Problem
from guys.rotation import Array
from guys.scenario.model import GroundFoot


def sliding(problem: Problem, slide: Array) -> Demands:
    """Friction against slide, one item a ground foot; slide : (case, spar) sideways over down, inf where lifted."""
    scenario = problem.structure.scenario
    allowed = scenario.allowables
    feet = [k for k, spar in enumerate(scenario.spar) if isinstance(spar.foot, GroundFoot)]
    items = [
        Item(
            f"base of {scenario.spar[k].name}", "sideways/down", "", "friction over sideways/down", "no friction given for its base",
            default="sliding" in allowed.defaulted, allowable="sliding",
        )
        for k in feet
    ]  # fmt: skip
    friction = np.array([math.nan if (f := scenario.spar[k].friction) is None else f for k in feet])
    return group(items, slide[:, feet], friction, allowed.sliding)
