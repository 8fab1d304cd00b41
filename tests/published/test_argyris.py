"""C7.  The right-angle frame of thin strip that buckles sideways: Argyris et al., Comput. Methods Appl. Mech. Eng. 20 (1979)."""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache

import numpy as np

from tests.published import rods
from tests.published.compare import Allowance, Row, published, second_order

LEG, DEPTH, THICK, MODULUS, POISSON = 240.0, 30.0, 0.6, 71_240.0, 0.31
MESHES = (4, 8, 16)
STRIP, RECTANGLE = DEPTH * THICK**3 / 3, 0.32913 * DEPTH * THICK**3
"""Torsion constant of a thin strip, and of the very rectangle."""


@cache
def _buckling(leg: int, torsion: float, sense: float, low: float, high: float) -> float:
    """Load at which the plane state loses stability, `leg` elements in each leg."""
    n = 2 * leg + 1
    place = np.zeros((n, 3))
    place[: leg + 1, 0] = place[leg:, 1] = np.linspace(0, LEG, leg + 1)
    place[leg:, 0] = LEG
    held, force = np.zeros((n, 6), bool), np.zeros((n, 3))
    held[0] = True
    force[-1, 0] = sense
    EI, EI_across = MODULUS * THICK * DEPTH**3 / 12, MODULUS * DEPTH * THICK**3 / 12
    section = rods.Section(MODULUS * DEPTH * THICK, EI, EI_across, MODULUS / (2 + 2 * POISSON) * torsion)
    return rods.critical_load(rods.Chain(place, section, np.array([-1.0, 1, 0]), held, force, 0 * force), low, high)


@published("C7", "READ(2nd)")
def test_sideways_buckling() -> Iterator[Row]:
    """Frame of two legs of 240 mm, strip 30 x 0.6 mm, clamped, force in its plane at the free end along the first leg: buckling load.

    Source: 1.088 N, quoted after Nachbagauer & Gerstmayr (2013), read in a later document; 1.09 from memory of Simo & Vu-Quoc (1986). The
    other rows by shooting. Ours is extrapolated from 4, 8 and 16 elements a leg. Allowed: half a unit of the last digit; against shooting
    2e-5 N, what the mesh leaves; 0.1 of the order.
    """
    left = Allowance(2e-5, "what two extrapolations leave of the mesh error")
    away = rods.refined([_buckling(m, STRIP, 1.0, 0.8, 1.3) for m in MESHES])
    toward = rods.refined([_buckling(m, STRIP, -1.0, 0.5, 0.8) for m in MESHES])
    exact = rods.refined([_buckling(m, RECTANGLE, 1.0, 0.8, 1.3) for m in MESHES])
    yield Row("buckling load, force away from the clamp", "N", "1.088", away.limit)
    yield Row("the same (Simo & Vu-Quoc)", "N", "1.09", away.limit, mark="MEMORY")
    yield Row("the same by shooting", "N", "1.087518", away.limit, left, "WORKED OUT")
    yield Row("force toward the clamp, by shooting", "N", "0.680427", toward.limit, left, "WORKED OUT")
    yield Row("torsion of the very rectangle, by shooting", "N", "1.084088", exact.limit, left, "WORKED OUT")
    yield second_order("buckling load", away.order)
