"""Handbook C1. Zinc-coated steel strand, ASTM A475 table 1, as the catalogue holds it.

The strengths of the table are the input; what is compared is what follows from it: mass, metal area, strength in SI.
"""

from __future__ import annotations

from collections.abc import Iterator

from guys import units
from guys.catalogue import ropes
from guys.catalogue.rope import elastic
from tests.published.compare import Allowance, Row, published

SIZES = {
    "1x7-ehs-1/8in": ("0.0476", "5.95"),
    "1x7-ehs-5/32in": ("0.0759", "9.58"),
    "1x7-ehs-3/16in": ("0.1086", "13.55"),
    "1x7-utilities-3/16in": ("0.1191", "14.97"),
    "1x3-ehs-7/32in": ("0.1310", "16.42"),
    "1x7-ehs-7/32in": ("0.1458", "18.41"),
    "1x3-ehs-1/4in": ("0.1741", "21.92"),
    "1x7-ehs-1/4in": ("0.1801", "22.66"),
    "1x3-ehs-9/32in": ("0.2039", "25.66"),
    "1x7-ehs-9/32in": ("0.2441", "30.62"),
    "1x3-ehs-5/16in": ("0.2545", "31.91"),
    "1x7-ehs-5/16in": ("0.3051", "38.32"),
    "1x7-utilities-5/16in": ("0.3348", "42.18"),
    "1x3-hs-3/8in": ("0.3274", "41.37"),
}
"""Strand: mass [kg/m] and metal area [mm2]."""


def metal_area(name: str) -> float:
    """[mm2], back from the stiffness and the modulus of stranded steel."""
    rope = ropes.find(f"strand-{name}")
    moduli = elastic()["strand"].moduli
    assert rope is not None
    assert moduli is not None
    return 1e6 * rope.stiffness.low / moduli[1]


@published("HB C1", "READ(2nd)")
def test_mass_and_metal_area() -> Iterator[Row]:
    """Mass per metre and metal area of 14 strands, and the strength of 1/4 in EHS in SI.

    Source: ASTM A475 table 1, read in a producer's metric copy. Masses are converted from lb per 1000 ft, areas are those of the wires.
    """
    for name, (mass, area) in SIZES.items():
        rope = ropes.find(f"strand-{name}")
        assert rope is not None
        yield Row(f"{name}, mass", "kg/m", mass, rope.mass)
        yield Row(f"{name}, metal area", "mm2", area, metal_area(name))
    quarter = ropes.find("strand-1x7-ehs-1/4in")
    assert quarter is not None
    tens = Allowance(units.to_si(5.0, "lbf") / 1000.0, "the table's kN is held in lbf rounded to ten")
    yield Row("1x7-ehs-1/4in, strength", "kN", "29.581", quarter.strength / 1000.0, tens)
