"""Handbook B5. Pull over torque of screws: Hoyt and Clemence 1989, as an industry manual quotes it."""

from __future__ import annotations

import math
from collections.abc import Iterator

from guys.constants import INCH
from guys.holdfasts import screw
from tests.published.compare import Mark, Row, published

FOOT = float(12 * INCH)
PRINTED: tuple[tuple[dict[str, float], str, str, Mark], ...] = (
    ({"square": 0.038}, "10", "32.8", "READ(2nd)"),
    ({"round": 3.5 * float(INCH)}, "7", "23.0", "READ(2nd)"),
    ({"round": 8.625 * float(INCH)}, "3", "9.8", "MEMORY"),
)


@published("HB B5", "READ(2nd)")
def test_torque_factors() -> Iterator[Row]:
    """Pull over torque of square shafts and slim round ones, of 3.5 in and of 8.625 in round shafts.

    Source: Hoyt and Clemence 1989, read in an industry manual of 2014, section 2.7.3, that quotes it; the last from memory.
    """
    for shaft, printed, metric, mark in PRINTED:
        factor = screw.torque_factor(shaft)[0]
        name = " ".join(shaft) + f" {math.ceil(1000 * next(iter(shaft.values())))} mm"
        yield Row(f"Kt, {name}", "1/ft", printed, factor * FOOT, mark=mark)
        yield Row(f"Kt, {name}", "1/m", metric, factor, mark=mark)
