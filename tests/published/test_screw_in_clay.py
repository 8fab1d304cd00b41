"""Handbook A20. A screw in clay, worked out on an engineers' forum."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from guys.constants import INCH, POUND, STANDARD_GRAVITY
from guys.holdfasts import screw
from tests.published.compare import Allowance, Row, published

LBF = float(POUND) * STANDARD_GRAVITY
FOOT = float(12 * INCH)
PSF = LBF / FOOT**2


@published("HB A20", "READ(2nd)")
def test_screw_in_clay() -> Iterator[Row]:
    """A 14 in plate in clay of 5,000 psf: Q = 9 c A with an area of 1.05 ft2, the shaft taken off.

    Source: an engineers' forum, thread 217669, read. A 1.5 in square shaft takes 0.016 ft2 off the disc of 1.069.
    """
    rounded = Allowance(0.005, "area printed to two decimals", share=True)
    found = screw.holding(np.radians([60.0]), helix=[14 * float(INCH)], depth=10.0, soil={"cohesion": 5000 * PSF}, shaft={"square": 0.0381})
    yield Row("pull", "lbf", "47250", found.best[0] / LBF, rounded)


@published("HB A20 torque", "READ(2nd)")
def test_torque_of_that_screw() -> Iterator[Row]:
    """Its torque from the geometry, T = Q cos 11 deg x 0.3 x arm, with the helix's slope, adhesion of 0.3 and an arm of 0.58 x 0.707 ft.

    Source: as above. The sum says how far pull over torque of a plate in stiff clay, 8.3 / ft, is from the 10 / ft of slim shafts by which
    a torque is judged here: the correlation holds 21 % more than this sum, so the low value of a screw turned into clay wants low = 0.8.
    """
    found = screw.holding(np.radians([60.0]), helix=[14 * float(INCH)], depth=10.0, soil={"cohesion": 5000 * PSF}, shaft={"square": 0.0381})
    torque = found.best[0] / LBF * math.cos(math.radians(11.0)) * 0.3 * 0.58 * 0.707
    rounded = Allowance(0.005, "area printed to two decimals", share=True)
    yield Row("torque", "lbf ft", "5700", torque, Allowance(0.0062, "area to two decimals, printed to two figures", share=True))
    yield Row("pull over torque", "1/ft", "8.3", found.best[0] / LBF / torque)
    correlated = screw.holding(np.radians([60.0]), helix=[0.3556], depth=10.0, torque=torque * LBF * FOOT, shaft={"square": 0.0381})
    yield Row("pull by the correlation over that by plate bearing", "-", "1.21", correlated.best[0] / found.best[0], rounded, mark="EXACT")
