"""Handbook C2 and A27. Stranded wire rope by factors, against an American table of the same construction and a rule of thumb.

The table is 6x19 with a fibre core of "improved plow steel". Its strengths imply a grade that falls from 1,834 N/mm2 at 1/4 in to
1,667 at 2 in, so a rope of one grade is right in the middle and off at the ends; compared is the grade implied.
"""

from __future__ import annotations

from collections.abc import Iterator

from guys import units
from guys.catalogue import ropes
from tests.published.compare import Allowance, Row, published

IMPROVED_PLOW = {
    "1/4": ("5,480", "0.11"),
    "5/16": ("8,520", "0.16"),
    "3/8": ("12,200", "0.24"),
    "7/16": ("16,540", "0.32"),
    "1/2": ("21,400", "0.42"),
    "5/8": ("33,400", "0.66"),
    "3/4": ("47,600", "0.95"),
    "1": ("83,600", "1.68"),
    "1-1/2": ("184,000", "3.78"),
    "2": ("320,000", "6.72"),
}
"""Diameter [in]: strength [lbf], mass [lb/ft]."""
ONE_GRADE = Allowance(0.065, "improved plow steel is no one grade: 1,834 N/mm2 at 1/4 in falls to 1,667 at 2 in", share=True)
OVERSIZE = Allowance(0.09, "tables weigh rope as made, oversize and greased; factors hold for the nominal diameter", share=True)


@published("HB C2", "READ(2nd)")
def test_six_by_nineteen() -> Iterator[Row]:
    """6x19 with fibre core, ten diameters from 1/4 to 2 in: strength of grade 1770 and mass.

    Source: an engineering-data page's table of 6x19 improved plow steel, read. Printed error beside it: 1 5/8 in, "852 kN", should be 952.
    """
    for size, (strength, mass) in IMPROVED_PLOW.items():
        rope = ropes.find(f"steel-6x19-fc-1770-{size}in")
        assert rope is not None
        yield Row(f"{size} in, strength", "lbf", strength, units.convert(rope.strength, "lbf"), ONE_GRADE)
        yield Row(f"{size} in, mass", "lb/ft", mass, units.convert(rope.mass, "lb/ft"), OVERSIZE)


@published("HB A27", "READ")
def test_safe_working_load_rule() -> Iterator[Row]:
    """New 14 mm 6x19 rope: 8 D^2 kg is a sixth to an eighth of the strength.

    Source: Australian Emergency Manual, Disaster Rescue, 3.15, read: 1,568 kg. Of grade 1770 a seventh of the strength is 1,704 kg.
    """
    rope = ropes.find("steel-6x19-fc-14mm")
    assert rope is not None
    factor = Allowance(1 / 7, "the rule is for a factor between 6 and 8", share=True)
    yield Row("strength / 7", "kgf", "1,568", units.convert(rope.strength, "kgf") / 7, factor)
