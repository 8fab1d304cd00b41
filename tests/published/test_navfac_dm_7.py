"""Handbook D1. Friction of mass concrete on grounds: NAVFAC DM 7.02, which the program lists and never takes by itself."""

from __future__ import annotations

import math
from collections.abc import Iterator

from guys import tables
from tests.published.compare import Allowance, Row, published

ANGLES = ((".70", "35"), (".60", "31"), (".55", "29"), (".45", "24"), (".35", "19"), (".30", "17"))
RANGES = ((0.70, 0.70), (0.55, 0.60), (0.45, 0.55), (0.35, 0.45), (0.30, 0.35), (0.40, 0.50), (0.30, 0.35))


@published("HB D1", "READ")
def test_friction_of_mass_concrete() -> Iterator[Row]:
    """Coefficients and angles of friction of mass concrete on grounds agree with each other.

    Source: NAVFAC DM 7.02 (September 1986), chapter 3, table 1, read in a public transcription.
    """
    whole = Allowance(0.01, "angles printed to whole degrees")
    for tangent, degrees in ANGLES:
        yield Row(f"tan {degrees} deg", "-", tangent, math.tan(math.radians(float(degrees))), whole)


def test_table_shipped_holds_the_published_values() -> None:
    assert tuple((float(row["least"]), float(row["most"])) for row in tables.rows("friction")) == RANGES
