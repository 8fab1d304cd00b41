"""Handbook A20. A screw in clay, worked out on an engineers' forum."""

from __future__ import annotations

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
