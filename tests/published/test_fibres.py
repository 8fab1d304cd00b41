"""Handbook A28 and C7. Fibre ropes: a rule of thumb for strength, and what the yarn has, which no rope surpasses."""

from __future__ import annotations

import math
from collections.abc import Iterator

from guys import tables, units
from guys.catalogue import ropes
from guys.constants import INCH
from tests.published.compare import Allowance, Row, published

RULE = {"polyester": 2.0, "polyamide": 2.5, "polypropylene": 1.4}
"""k of 900 C^2 k."""
HALF_INCH = {"polyamide": "5,546"}
SPREAD = Allowance(0.253, "a second copy of the rule has another k for polyester: taken within 25 %; 3.14 for pi", share=True)
YARN = {
    "polyamide": ("1.14", "4", ".84", "4.6", ".96"),
    "polyester": ("1.38", "10", ".84", "13.8", "1.16"),
    "polypropylene": (".91", "8", ".73", "7.3", ".66"),
    "aramid": ("1.44", "49", "2.03", "70.6", "2.92"),
    "hmpe": (".97", "124", "2.65", "120", "2.57"),
}
"""Specific gravity, modulus and strength [N/tex], modulus and strength [GPa]."""
ROUNDED = Allowance(0.012, "both columns are rounded to two or three figures", share=True)


def area_under(name: str) -> tuple[float, float, float, float]:
    """Strengths and stiffnesses, low and high, of a catalogue rope over its full circle [Pa]."""
    rope = ropes.find(name)
    assert rope is not None
    circle = math.pi / 4 * rope.diameter**2
    return rope.strength / circle, rope.strength_high / circle, rope.stiffness.low / circle, rope.stiffness.high / circle


@published("HB A28", "READ")
def test_rule_of_thumb() -> Iterator[Row]:
    """900 C^2 k lbf with C = 3.14 d in inches: the middle of the range kept for half-inch rope; and the range, within 25 %.

    Source: a boating marlinespike guide (an examination rule), read: nylon 5,546 lb; the others by the same k.
    """
    for fibre, k in RULE.items():
        rope = ropes.find(f"{fibre}-1/2in")
        assert rope is not None
        rule = 900.0 * (3.14 / 2.0) ** 2 * k
        printed = HALF_INCH.get(fibre, f"{rule:.0f}")
        middle = units.convert((rope.strength + rope.strength_high) / 2, "lbf")
        yield Row(f"{fibre} 1/2 in, middle", "lbf", printed, middle, Allowance(0.003, "3.14 for pi; MPa rounded", share=True))
        yield Row(f"{fibre} 1/2 in, low end", "lbf", printed, units.convert(rope.strength, "lbf"), SPREAD)


@published("HB C7", "READ")
def test_yarn() -> Iterator[Row]:
    """Modulus and strength in GPa are N/tex times specific gravity, with the densities the catalogue has.

    Source: a paper on fibre tensioning members, table 1, read (generic fibres).
    """
    gravity = {row["fibre"]: float(row["specific_gravity"]) for row in tables.rows("fibre_rope")}
    for fibre, (printed, per_tex, strength_per_tex, modulus, strength) in YARN.items():
        yield Row(f"{fibre}, specific gravity", "-", f"0{printed}" if printed[0] == "." else printed, gravity[fibre])
        yield Row(f"{fibre}, modulus", "GPa", modulus, float(per_tex) * gravity[fibre], ROUNDED)
        printed = f"0{strength}" if strength[0] == "." else strength
        yield Row(f"{fibre}, strength", "GPa", printed, float(strength_per_tex) * gravity[fibre], ROUNDED)


def test_no_rope_surpasses_its_yarn() -> None:
    """Over the full circle a rope has at most what its share of fibre has."""
    for fibre, (_, _, _, modulus, strength) in YARN.items():
        _, most, _, stiffest = area_under(f"{fibre}-12mm")
        assert most < 0.68 * float(strength) * 1e9
        assert stiffest < 0.68 * float(modulus) * 1e9


def test_an_inch_is_an_inch() -> None:
    rope = ropes.find("polyester-1/2in")
    assert rope is not None
    assert rope.diameter == float(INCH / 2)
