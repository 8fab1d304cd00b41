"""EN 1993-1-1, EN 1993-1-11 and EN 1997-1: reduction of struts, limit of thin walls, effective area; from memory of their tables."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from guys.catalogue import tubes
from guys.checks import bases, stress
from guys.scenario.plate import Plate
from tests.published.compare import Row, published

CURVE_C = {
    0.2: "1.000", 0.4: "0.897", 0.6: "0.785", 0.8: "0.662", 1.0: "0.540", 1.2: "0.434", 1.4: "0.349", 1.6: "0.284", 1.8: "0.235",
    2.0: "0.196", 3.0: "0.095",
}  # fmt: skip
E = 210e9


@published("EN 1993-1-1 curve c", "MEMORY")
def test_reduction_of_struts() -> Iterator[Row]:
    """Share of the squash load that a strut bears by its slenderness, buckling curve c.

    Source: the table of reduction factors printed in guides to EN 1993-1-1:2005 (figure 6.4), from memory. The bar is a tube of 26.9 x 2.6
    mm of 235 MPa, cut to the slenderness.
    """
    area, second, f = tubes.area(0.0269, 0.0026), tubes.second_moment(0.0269, 0.0026), 235e6
    for slender, printed in CURVE_C.items():
        length = slender * math.pi * math.sqrt(E * second / (area * f))
        yield Row(f"chi at a slenderness of {slender:g}", "-", printed, stress.strut(area, second, length, E, f) / (area * f))


@published("EN 1993-1-1 class 3", "MEMORY")
def test_thin_walls() -> Iterator[Row]:
    """Greatest diameter over wall of a round tube whose wall yields before it buckles, 90 x 235 MPa / f.

    Source: EN 1993-1-1:2005, table 5.2, sheet 3, from memory: 90, 59.6 (66 % of it) for steels of 235 and 355 MPa.
    """
    for f, printed in ((235e6, "90"), (275e6, "76.9"), (355e6, "59.6"), (420e6, "50.4"), (460e6, "46.0")):
        yield Row(f"D/w at {f / 1e6:g} MPa", "-", printed, stress.thinnest(f, E))


@published("EN 1997-1 D", "MEMORY")
def test_effective_area() -> Iterator[Row]:
    """Area of a plate that bears, A' = (L - 2 e_L)(W - 2 e_W), and the greatest pressure by elastic theory in the kern beside it.

    Source: EN 1997-1:2004 annex D, from memory; N/A (1 + 6 e/L) of a rectangle in the kern, closed form: at the kern's edge the elastic
    peak is twice the mean, the even pressure on the effective area 1.5 times.
    """
    plate, push = Plate(length=3.0, width=2.0, bearing=1.0), 600e3
    for e_L, e_W, area in ((0.0, 0.0, "6.00"), (0.5, 0.0, "4.00"), (0.3, 0.2, "3.84"), (1.0, 0.5, "1.00")):
        force = np.array([[0.0, 0.0, -push]])
        pressure, _ = bases.stand(plate, 0.0, force[:, 2], np.cross([[e_W, e_L, 0.0]], force))
        yield Row(f"A' at e_L {e_L:g} m, e_W {e_W:g} m", "m2", area, push / pressure[0])
        if e_L == 0.5 and e_W == 0.0:
            yield Row("even pressure over the mean at the kern's edge", "-", "1.5", pressure[0] / (push / 6.0), mark="EXACT")
