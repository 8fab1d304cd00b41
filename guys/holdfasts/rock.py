"""A bar grouted into rock or concrete.

    bond, grout to bar     T = pi d L tau
    bond, grout to wall    T = pi hole L tau_r                        where hole and rock_bond_stress are given
    bar                    T = A fy / sqrt(cos^2 e + 3 sin^2 e)       e the angle between bar and pull; yield by von Mises, no lever arm
    cone of rock           T sin a = gamma pi/3 h^3 tan^2 k           its weight alone lifted, where unit_weight is given, or
                           T = f pi h^2 tan^2 k                       tension on the cone's base circle, where tensile_stress is given

    d, A  diameter and area of the bar;  L  bond length;  tau  bond stress at failure;  k  half the opening of the cone, from its axis
    h  height of the cone: the depth, straight down, of the middle of the bond (free_length + L/2 along the bar)

With both data for the cone the greater counts: each alone is a lower bound.  k is 30 degrees where the user gives none: General Order 95
lets earth be counted inside a frustum that opens 30 degrees from the vertical (read); sound rock opens wider.

Sources: statics; bond along an even stress, cone with its apex at the middle of the bond (common practice); General Order 95, rule 48.5.
"""

from __future__ import annotations

import math

import numpy as np

from guys.holdfasts.holding import DOWNWARD, Holding, at_most, governed
from guys.rotation import Array

WHAT = "a bar grouted into rock or concrete"
SOURCE = "statics: even bond, yield of the bar, cone from the middle of the bond (common practice)"
OPENING = math.radians(30.0)


def holding(
    angle: Array,
    *,
    bar: float,
    bond_length: float,
    bond_stress: float,
    hole: float | None = None,
    rock_bond_stress: float | None = None,
    yield_: float | None = None,
    area: float | None = None,
    free_length: float = 0.0,
    unit_weight: float | None = None,
    tensile_stress: float | None = None,
    cone: float = OPENING,
    rod: float | None = None,
    low: float = 1.0,
    high: float = 1.0,
) -> Holding:
    """Holding of a grouted bar; lengths [m], area of its thread [m2], stresses [Pa], unit_weight of the rock [N/m3], angles [rad]."""
    a = np.asarray(angle, dtype=float)
    ways = {"bond between grout and bar": np.full(a.shape, math.pi * bar * bond_length * bond_stress)}
    unjudged = []
    if hole is not None and rock_bond_stress is not None:
        ways["bond between grout and rock"] = np.full(a.shape, math.pi * hole * bond_length * rock_bond_stress)
    else:
        unjudged.append("bond between grout and rock (give hole and rock_bond_stress)")
    if yield_ is not None:
        off = np.zeros_like(a) if rod is None else a - rod
        steel = math.pi / 4 * bar**2 if area is None else area
        ways["yield of the bar"] = steel * yield_ / np.sqrt(np.cos(off) ** 2 + 3 * np.sin(off) ** 2)
    else:
        unjudged.append("yield of the bar (give yield)")
    if unit_weight is not None or tensile_stress is not None:
        h = (free_length + bond_length / 2) * np.sin(np.maximum(a if rod is None else np.full_like(a, rod), 0.0))
        by_weight = at_most((unit_weight or 0.0) * math.pi / 3 * h**3 * math.tan(cone) ** 2, np.sin(a))
        by_tension = (tensile_stress or 0.0) * math.pi * h**2 * math.tan(cone) ** 2
        ways["cone of rock"] = np.maximum(np.where(np.isfinite(by_weight), by_weight, 0.0), by_tension)
    else:
        unjudged.append("cone of rock (give unit_weight or tensile_stress)")
    return governed(ways, a, SOURCE, (low, high), ((a < 0.0, DOWNWARD),), rod, unjudged=unjudged)
