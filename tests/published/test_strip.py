"""D9.  A strip held at one end that buckles sideways under a load at its tip: Timoshenko & Gere, Theory of Elastic Stability (1961)."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from functools import cache

import numpy as np

from tests.published import rods
from tests.published.compare import Allowance, Row, published, second_order

LENGTH, DEPTH, THICK, MODULUS, POISSON = 240.0, 30.0, 0.6, 71_240.0, 0.31
EI, EI_WEAK = MODULUS * THICK * DEPTH**3 / 12, MODULUS * DEPTH * THICK**3 / 12
GJ = MODULUS / (2 + 2 * POISSON) * DEPTH * THICK**3 / 3
UNIT = float(np.sqrt(EI_WEAK * GJ)) / LENGTH**2
MESHES = (4, 8, 16)


@cache
def _load(elements: int, stiffer: float) -> float:
    """P L^2/sqrt(EI_weak GJ), the strip's strong way `stiffer` times as stiff."""
    rod = rods.straight(LENGTH, elements, rods.Section(MODULUS * DEPTH * THICK * stiffer, stiffer * EI, EI_WEAK, GJ))
    force = rod.force.copy()
    force[-1, 1] = -1.0
    return rods.critical_load(replace(rod, force=force), 3.4 * UNIT, 4.8 * UNIT) / UNIT


@published("D9", "MEMORY")
def test_sideways_buckling_of_a_strip() -> Iterator[Row]:
    """Strip of 240 x 30 x 0.6 mm on edge, load at the middle of its tip: P = 4.013 sqrt(EI GJ)/L^2.

    Source: 4.013 from memory of Timoshenko & Gere; exactly 2 z with J-1/4(z) = 0: 4.01259934; with its own stiffness on edge 4.01498 by
    shooting. Ours is extrapolated from 4, 8 and 16 elements. Allowed: half a unit of the last digit; 3e-5 of what the mesh leaves; 1e-5
    for the bend of a strip a thousand times stiffer; 0.1 of the order.
    """
    left = Allowance(4e-5, "what two extrapolations leave of the mesh error, and the bend", share=True)
    own, stiff = (rods.refined([_load(m, stiffer) for m in MESHES]) for stiffer in (1.0, 1e3))
    yield Row("P L²/√(EI GJ)", "-", "4.013", stiff.limit)
    yield Row("the same by its formula", "-", "4.012599", stiff.limit, left, "EXACT")
    yield Row("with its own stiffness on edge, by shooting", "-", "4.01498", own.limit, left, "WORKED OUT")
    yield second_order("load", own.order)
