"""Handbook A19. Design example of a screw in sand, from a helical-anchor maker's manual."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from guys.constants import INCH, POUND, STANDARD_GRAVITY
from guys.holdfasts import screw
from tests.published.compare import Allowance, Row, published

LBF = float(POUND) * STANDARD_GRAVITY
FOOT = float(12 * INCH)
PCF = LBF / FOOT**3


@published("HB A19", "READ")
def test_screw_of_three_plates_in_sand() -> Iterator[Row]:
    """Plates of 8, 10 and 12 in on a 1.75 in square shaft, 10 ft deep in sand of 130 pcf with Nq 23: areas, pull, spacing, torque.

    Source: design example 4 of a helical-anchor maker's manual (brand left out), read; the shaft is figured back from its areas. Nq is that
    of an angle of 31.9 degrees by our formula. It sums the areas as rounded, which is allowed for.
    """
    low, high = 0.4, 0.7
    for _ in range(60):
        low, high = (low, (low + high) / 2) if screw.bearing_factor((low + high) / 2) > 23 else ((low + high) / 2, high)
    sizes = np.array([12, 10, 8]) * float(INCH)
    areas = np.pi / 4 * sizes**2 - (1.75 * float(INCH)) ** 2
    for size, area, printed in zip((12, 10, 8), areas, ("0.764", "0.524", "0.328"), strict=True):
        yield Row(f"area of the {size} in plate", "ft2", printed, area / FOOT**2)
    pull = float(screw.sand(np.full((1, 3), 10 * FOOT), sizes, areas, low, 130 * PCF)["plate bearing"][0])
    rounded = Allowance(0.004, "areas summed as rounded, 1.62 ft2 for 1.616", share=True)
    yield Row("pull", "lbf", "48438", pull / LBF, rounded)
    yield Row("spacing for 3,500 lb/ft and a factor of 2", "ft", "6.9", pull / LBF / (3500 * 2), Allowance(0.03, "as above"))
    yield Row("torque", "lbf ft", "4844", pull / screw.torque_factor({"square": 0.0445})[0] / (LBF * FOOT), rounded, "WORKED OUT")
