"""Force coefficients of triangular and square lattices, on the solid area of one face, against its solidity phi.

ASCE 7 figure 29.4-3 (read in two public transcriptions):  square 4.0 phi^2 - 5.9 phi + 4.0, triangular 3.4 phi^2 - 4.7 phi + 3.4;
forces on round members times min(1, 0.51 phi^2 + 0.57); wind on the diagonal of a square times min(1.2, 1 + 0.75 phi).

EN 1993-3-1:2006 B.2.2 (read in three public transcriptions):  flat members 1.76 C1 (1 - C2 phi + phi^2), round ones, subcritical,
C1 (1 - C2 phi) + (C1 + 0.875) phi^2, by their shares of the area; C1, C2 = 2.25, 1.5 (square), 1.9, 1.4 (triangular).  Square at an angle
theta to the normal of a face: times 1 + K1 K2 sin^2(2 theta), K1 = 0.55 flat share + 0.8 round share, K2 = 0.2 for phi up to 0.2 and from
0.8, phi between 0.2 and 0.5, 1 - phi between 0.5 and 0.8.

Round members are taken as subcritical whatever the wind: the larger coefficient.  Wind normal to a face is the worst for a triangle, and is
taken from every side.  Between normal and diagonal the ASCE factor rises with sin^2(2 theta) too; that is ours.
"""

from __future__ import annotations

from typing import Literal

import numpy as np

from guys.rotation import Array

Rules = Literal["en", "asce7"]
_EN = {4: (2.25, 1.5), 3: (1.9, 1.4)}
_ASCE = {4: (4.0, -5.9, 4.0), 3: (3.4, -4.7, 3.4)}


def coefficient(rules: Rules, sides: int, solidity: Array, round_share: Array) -> Array:
    """c with the wind normal to a face; sides 3 or 4; round_share of the solid area, the rest is flat-sided."""
    if rules == "asce7":
        a, b, c = _ASCE[sides]
        rounded = np.minimum(1.0, 0.51 * solidity**2 + 0.57)
        return np.asarray((a * solidity**2 + b * solidity + c) * (1 - round_share + round_share * rounded))
    c1, c2 = _EN[sides]
    flat = 1.76 * c1 * (1 - c2 * solidity + solidity**2)
    rounded = c1 * (1 - c2 * solidity) + (c1 + 0.875) * solidity**2
    return np.asarray((1 - round_share) * flat + round_share * rounded)


def diagonal(rules: Rules, sides: int, solidity: Array, round_share: Array) -> Array:
    """By how much more than normal to a face the wind bears on the diagonal, as a factor."""
    if sides == 3:
        return np.ones_like(solidity)
    if rules == "asce7":
        return np.asarray(np.minimum(1.2, 1 + 0.75 * solidity))
    k1 = 0.55 * (1 - round_share) + 0.8 * round_share
    k2 = np.select([solidity <= 0.2, solidity <= 0.5, solidity <= 0.8], [0.2, solidity, 1 - solidity], 0.2)
    return np.asarray(1 + k1 * k2)
