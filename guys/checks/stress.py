"""Stress and strength of cross-sections, from plain numbers; arrays of any shape that spread over one another.

Round tube of diameter D and wall w, inner radius r, outer R, area A, second moment I:

    sigma = |N|/A + |M| R/I          at the extreme fibre
    tau   = |T| R/(2 I) + |V| 4/(3A) (R^2 + R r + r^2)/(R^2 + r^2)          VQ/(It) at the neutral axis: 2 V/A thin, 4/3 V/A solid
    von Mises  sqrt(sigma^2 + 3 tau^2)

The greatest normal and the greatest shear stress are taken at one fibre, though shear peaks a quarter of the way round from where bending
does: never less than the exact, and the same where shear or bending is small, as in a guyed mast.

Lattice of n legs on a regular polygon of face b, radius rho = b/(2 sin(pi/n)), in the worst orientation to the bending:

    leg  N/n +- 2 |M|/(n rho)          face shear  2 |V|/n + |T|/(n d),  d = b/(2 tan(pi/n))          diagonal  face shear * its length/b

Compressed bar between its ends, EN 1993-1-1:2005, 6.3.1.2 (from memory), with lam = sqrt(A f/(pi^2 E I/l^2)), f the yield stress:

    phi = (1 + alpha (lam - 0.2) + lam^2)/2,     N_b = A f min(1, 1/(phi + sqrt(phi^2 - lam^2))),     alpha = 0.49 (curve c)

Wall of a tube that yields before it buckles (class 3): D/w <= 90 (235 MPa/f) (E/210 GPa), EN 1993-1-1:2005, table 5.2 (from memory), with
the modulus put in so that other metals have theirs.

Symbols: N axial force [N], tension positive; M bending moment [N m]; V shear [N]; T torsion [N m]
"""

from __future__ import annotations

import math

import numpy as np

from guys.rotation import Array

CURVE_C = 0.49
"""Imperfection factor alpha of buckling curve c: cold-formed tubes and solid bars (EN 1993-1-1:2005, tables 6.1 and 6.2; from memory)."""
THINNEST = 90.0
"""D/w of class 3 at a yield stress of 235 MPa (EN 1993-1-1:2005, table 5.2; from memory)."""


def tube_stress(diameter: float, wall: float, axial: Array, bending: Array, shear: Array, torsion: Array) -> Array:
    """Greatest von Mises stress [Pa] of a round tube."""
    outer, inner = diameter / 2, diameter / 2 - wall
    area, second = math.pi * (outer**2 - inner**2), math.pi / 4 * (outer**4 - inner**4)
    normal = np.abs(axial) / area + np.abs(bending) * (outer / second)
    peak = 4 / 3 * (outer**2 + outer * inner + inner**2) / (outer**2 + inner**2) / area
    shearing = np.abs(torsion) * (outer / (2 * second)) + np.abs(shear) * peak
    return np.asarray(np.sqrt(normal**2 + 3 * shearing**2))


def thinnest(yield_stress: float, modulus: float) -> float:
    """Greatest diameter over wall of a tube whose wall yields before it buckles."""
    return THINNEST * (235e6 / yield_stress) * (modulus / 210e9)


def leg_forces(legs: int, face: float, axial: Array, bending: Array) -> tuple[Array, Array]:
    """Greatest compression and greatest tension [N] of a leg, neither below zero."""
    shared, turned = axial / legs, 2 * np.abs(bending) / (legs * face / (2 * math.sin(math.pi / legs)))
    return np.maximum(turned - shared, 0.0), np.maximum(turned + shared, 0.0)


def diagonal_force(legs: int, face: float, panel: float, shear: Array, torsion: Array) -> Array:
    """Greatest force [N] of a diagonal that runs across a face over one panel."""
    across = 2 * np.abs(shear) / legs + np.abs(torsion) / (legs * face / (2 * math.tan(math.pi / legs)))
    return np.asarray(across * (math.hypot(face, panel) / face))


def strut(area: float, second: float, length: float, modulus: float, yield_stress: float) -> float:
    """Compression [N] a bar hinged at both ends bears."""
    squash = area * yield_stress
    slender = math.sqrt(squash / (math.pi**2 * modulus * second / length**2))
    phi = 0.5 * (1 + CURVE_C * (slender - 0.2) + slender**2)
    return squash * min(1.0, 1 / (phi + math.sqrt(phi**2 - slender**2))) if slender > 0.2 else squash


def outright_use(axial: Array, bending: Array, shear: Array, torsion: Array, capacities: tuple[float, float, float, float]) -> Array:
    """Use of capacities given outright: the greater of |N|/N_c + |M|/M_c and |V|/V_c + |T|/T_c; an infinite capacity is not asked."""
    n, m, v, t = capacities
    return np.maximum(np.abs(axial) / n + np.abs(bending) / m, np.abs(shear) / v + np.abs(torsion) / t)
