"""Handbook A17. Uplift of plates in sand after Meyerhof and Adams 1968, as a book on soil reinforcement works it out."""

from __future__ import annotations

from collections.abc import Iterator

from guys.holdfasts import screw
from tests.published.compare import Allowance, Row, published

PLATES = (
    (1, "1.48", "3.70", "63"),
    (2, "1.96", "8.20", "279"),
    (3, "2.44", "14.47", "738"),
    (4, "2.92", "22.51", "1531"),
)


@published("HB A17", "READ")
def test_square_plates_in_sand() -> Iterator[Row]:
    """Square plates of 100 mm, 1 to 4 sides deep, Ku tan phi 0.92: breakout factor and pull.

    Source: appendix G of a book on soil reinforcement (ISBN 9780128095645), after Meyerhof and Adams 1968, read. The unit weight of
    17.0 kN/m3 is figured back from its pulls. Allowed: 0.7 %, the most by which the printed factors miss their own formula.
    """
    own = Allowance(0.007, "the printed rows miss their own formula by up to 0.7 %", share=True)
    for ratio, shape, factor, pull in PLATES:
        ours = float(screw.breakout_factor(ratio, 0.48, 0.92))
        yield Row(f"shape factor, L/D {ratio}", "-", shape, 1 + 0.48 * ratio)
        yield Row(f"breakout factor, L/D {ratio}", "-", factor, ours, own)
        yield Row(f"pull, L/D {ratio}", "N", pull, 17e3 * 0.1 * ratio * 0.1**2 * ours, own)
