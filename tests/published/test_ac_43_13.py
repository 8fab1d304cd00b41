"""Handbook C4. Aircraft-type cable of FAA AC 43.13-1B table 7-3: its strengths against ropes of the same construction by factors.

The strengths are the catalogue's input. Compared is the grade they imply for 7x19, which EN 12385 factors tell from strength and diameter,
and the mass of the same by its factor.
"""

from __future__ import annotations

from collections.abc import Iterator

from guys.catalogue import ropes
from tests.published.compare import Allowance, Row, published

SIZES = ("1/8", "5/32", "3/16", "7/32", "1/4", "9/32", "5/16", "3/8")
GRADES = Allowance(0.20, "the grade implied falls from 2,440 N/mm2 of the fine wires of 1/8 in to 1,910 of 5/16 in", share=True)
AS_MADE = Allowance(0.15, "small cable is made oversize, factors hold for the nominal diameter; mass of the table from memory", share=True)


@published("HB C4", "READ")
def test_seven_by_nineteen() -> Iterator[Row]:
    """Strength of eight diameters of zinc-coated 7x19, against 7x19 of rope grade 1960 by factors; and mass.

    Source: FAA AC 43.13-1B table 7-3, p. 7-28, read (strengths).
    """
    for size in SIZES:
        tabled, made = ropes.find(f"aircraft-7x19-{size}in"), ropes.find(f"steel-7x19-1960-{size}in")
        assert tabled is not None
        assert made is not None
        yield Row(f"{size} in, strength", "kN", f"{tabled.strength / 1000:.2f}", made.strength / 1000, GRADES)
        yield Row(f"{size} in, mass", "kg/m", f"{tabled.mass:.4f}", made.mass, AS_MADE, "MEMORY")
