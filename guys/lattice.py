"""A lattice spar as a beam: mass, stiffness, and what of it the wind meets.

n legs of area A_l at the corners of a regular polygon of face width b (axis to axis); in every face diagonals of area A_d, each rising
one panel p, of length s = sqrt(b^2 + p^2).  a = b / (2 tan(pi/n)) is the distance from the axis to a face.

    EA   = n E A_l                                          diagonals bear no axial load: nothing holds them out sideways
    EI   = E (n A_l r^2 / 2 + n I_l),   r = b / (2 sin(pi/n))
    GA_f = m E A_d b^2 p / s^3                              shear stiffness of one face; m = 1 diagonal a panel, 2 crossed
    1/GA = 2 / (n GA_f) + k_V p^2 / (b^2 E A_l)
    1/GJ = 1 / (n a^2 GA_f) + k_T p^2 / (n a^2 b^2 E A_l)

The second terms are the legs' force being constant from joint to joint, where that of a beam's fibre is not.  A zigzag of three faces
meets each leg in turn from the one face and the other, that of four (and crosses) from both at once, which gives

    zigzag of 3: k_V = 0, k_T = 1      of 4: k_V = -1/3, k_T = 0      cross of 3: k_V = -1/6, of 4: -1/12, k_T = 0

Lacing is taken as pinned at the legs, legs as running through; then horizontals of a zigzag bear nothing.  Welded lacing makes a stiffer
spar: the legs, made to twist with it, alone add up to n G J_l, a few per cent of GJ.

Wind: of one face its two legs over their whole length D and the lacing of diameter d between them, w = 2 D + d (m s + h b) / p (b - D) / b
with h = 1 with horizontals, else 0; solidity w / (b + D).  All members are round.  Ice lies all round on every member, over its length
from axis to axis.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, TypeVar

import numpy as np
from numpy.typing import NDArray

from guys.catalogue import tubes

if TYPE_CHECKING:
    from guys.scenario.lattice import Bar, Lattice

Array = NDArray[np.float64]
Value = TypeVar("Value", float, Array)

DIAGONALS = {"zigzag": 1, "horizontals": 1, "cross": 2}
"""Diagonals in a face's panel."""
HORIZONTALS = {"zigzag": 0, "horizontals": 1, "cross": 0}
"""Horizontals in a face's panel."""
LEGS_IN_SHEAR = {("zigzag", 3): 0.0, ("zigzag", 4): -1 / 3, ("cross", 3): -1 / 6, ("cross", 4): -1 / 12}
"""k_V."""
LEGS_IN_TORSION = {("zigzag", 3): 1.0, ("zigzag", 4): 0.0, ("cross", 3): 0.0, ("cross", 4): 0.0}
"""k_T."""


@dataclass(frozen=True)
class Stiffness:
    """EA, GA [N], EI about any axis, GJ [N m2]."""

    EA: float
    EI: float
    GA: float
    GJ: float


@dataclass(frozen=True)
class Face:
    """What the wind meets of one face.

    solid : area per length [m];  enclosed : width from outside to outside of the legs [m];  round, flat : shares of the solid area
    leg, lacing : diameters of the members [m]
    """

    solid: float
    enclosed: float
    leg: float
    lacing: float
    round: float = 1.0
    flat: float = 0.0

    @property
    def solidity(self) -> float:
        """Solid over enclosed area."""
        return self.solid / self.enclosed


def lacing_length(lattice: Lattice) -> float:
    """Length of diagonals and horizontals in one face, per length of spar."""
    diagonal = math.hypot(lattice.face, lattice.panel)
    return (DIAGONALS[lattice.bracing] * diagonal + HORIZONTALS[lattice.bracing] * lattice.face) / lattice.panel


def along(lattice: Lattice, legs: Value, lacing: Value) -> Value:
    """Of all members, per length of spar, what each leg and each lacing bar has per its own length."""
    return lattice.sides * (legs + lacing * lacing_length(lattice))


def mass(lattice: Lattice, density: float) -> float:
    """Mass per length [kg/m]."""
    return along(lattice, density * _area(lattice.legs), density * _area(lattice.lacing))


def solid(lattice: Lattice, legs: Array, lacing: Array) -> Array:
    """Solid area of one face per length [m], for widths of its legs and lacing [m], at most all of it."""
    clear = np.maximum(0.0, 1.0 - legs / lattice.face)
    return np.minimum(2 * legs + lacing * lacing_length(lattice) * clear, lattice.face + legs)


def face(lattice: Lattice, legs: float | None = None, lacing: float | None = None) -> Face:
    """One face, for widths of its members [m] other than their diameters where there is ice on them."""
    leg = lattice.legs.diameter if legs is None else legs
    bar = lattice.lacing.diameter if lacing is None else lacing
    return Face(float(solid(lattice, np.array(leg), np.array(bar))), lattice.face + leg, leg, bar)


def stiffness(lattice: Lattice, modulus: float) -> Stiffness:
    """As a beam, for the modulus E of its material [Pa]; its shear modulus plays no part."""
    n, b, p = lattice.sides, lattice.face, lattice.panel
    pattern = ("cross" if lattice.bracing == "cross" else "zigzag", n)
    leg = modulus * _area(lattice.legs)
    second = tubes.second_moment(lattice.legs.diameter, lattice.legs.wall)
    one_face = DIAGONALS[lattice.bracing] * modulus * _area(lattice.lacing) * b**2 * p / math.hypot(b, p) ** 3
    step = p**2 / (b**2 * leg)
    apothem, radius = b / (2 * math.tan(math.pi / n)), b / (2 * math.sin(math.pi / n))
    shear = 2 / (n * one_face) + LEGS_IN_SHEAR[pattern] * step
    twist = (1 / one_face + LEGS_IN_TORSION[pattern] * step) / (n * apothem**2)
    return Stiffness(
        EA=n * leg,
        EI=n * (leg * radius**2 / 2 + modulus * second),
        GA=1 / shear,
        GJ=1 / twist,
    )


def _area(bar: Bar) -> float:
    return tubes.area(bar.diameter, bar.wall)
