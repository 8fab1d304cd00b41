"""Stresses of tubes and bar forces of lattices, worked out by hand from statics and elastic theory."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from guys.checks import stress
from tests.published.compare import Allowance, Row, published

ONE = np.array(1.0)


@published("Stress of a tube", "WORKED OUT")
def test_stress_of_a_tube() -> Iterator[Row]:
    """A tube of 114.3 x 4 mm: A 1386.1 mm2, I 2.1107e6 mm4; each action alone, then axial force and bending with shear and torsion.

    Source: worked out twice, by section properties from the integrals of the annulus by hand and by summing thin rings. 20 kN axial:
    14.43 MPa; 2 kN m: 54.15 MPa at the outer fibre; 1 kN m of torsion: 13.54 MPa of shear, 23.45 by von Mises; 5 kN of shear: 2 V/A of a
    thin tube is 7.215 MPa, 4/3 V/A of the thick formula 7.206.
    """
    D, w = 0.1143, 0.004
    zero = 0.0 * ONE
    each = {
        "axial force of 20 kN": ("14.43", (20e3, 0, 0, 0)),
        "bending of 2 kN m": ("54.15", (0, 2e3, 0, 0)),
        "torsion of 1 kN m": ("23.45", (0, 0, 0, 1e3)),
    }
    for what, (printed, actions) in each.items():
        yield Row(what, "MPa", printed, float(stress.tube_stress(D, w, *(a * ONE for a in actions))) / 1e6)
    thin = Allowance(0.003, "wall over radius squared, which the rule for thin tubes leaves out", share=True)
    sheared = float(stress.tube_stress(D, w, zero, zero, 5e3 * ONE, zero))
    yield Row("shear of 5 kN", "MPa", f"{math.sqrt(3) * 7.215:.2f}", sheared / 1e6, thin)
    together = math.sqrt((14.43 + 54.15) ** 2 + 3 * (13.54 + 7.206) ** 2)
    acting = tuple(a * ONE for a in (20e3, 2e3, 5e3, 1e3))
    yield Row("all together", "MPa", f"{together:.1f}", float(stress.tube_stress(D, w, *acting)) / 1e6)


@published("Bars of a lattice", "WORKED OUT")
def test_bars_of_lattices() -> Iterator[Row]:
    """Legs and diagonals of three and four faces of 400 mm, panels of 400 mm, by cutting the frame.

    Source: worked out by hand. Three legs, 6 kN m about an axis along a face: the leg opposite is 400 sqrt(3)/2 = 346.4 mm from the other
    two, so 17.32 kN, and 12 kN of thrust adds 4. Four legs, about a diagonal: two legs 565.7 mm apart take all, 10.61 kN. Shear: of four
    faces two take 3 kN, 1.5 each, times sqrt 2 along the diagonal; of three faces, along one: the face takes 2/3, the slanting two 1/3
    each at half, 2 kN. Torsion of 0.6 kN m by Bredt: T/(2 A) times the face's length.
    """
    zero, thrust = 0.0 * ONE, -12e3 * ONE
    three, pulled = stress.leg_forces(3, 0.4, thrust, 6e3 * ONE)
    yield Row("leg of three, pressed", "kN", "21.32", float(three) / 1e3)
    yield Row("leg of three, pulled", "kN", "13.32", float(pulled) / 1e3)
    yield Row("leg of four, bent over a diagonal", "kN", "10.61", float(stress.leg_forces(4, 0.4, zero, 6e3 * ONE)[0]) / 1e3)
    yield Row("diagonal of four, shear of 3 kN", "kN", "2.121", float(stress.diagonal_force(4, 0.4, 0.4, 3e3 * ONE, zero)) / 1e3)
    yield Row("diagonal of three, shear of 3 kN", "kN", "2.828", float(stress.diagonal_force(3, 0.4, 0.4, 3e3 * ONE, zero)) / 1e3)
    for legs, area in ((3, math.sqrt(3) / 4 * 0.16), (4, 0.16)):
        bredt = 0.6 / (2 * area) * 0.4 * math.sqrt(2)
        found = float(stress.diagonal_force(legs, 0.4, 0.4, zero, 600.0 * ONE))
        yield Row(f"diagonal of {legs}, torsion", "kN", f"{bredt:.4f}", found / 1e3)
