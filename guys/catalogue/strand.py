"""Zinc-coated steel strand, ASTM A475: ``strand-1x7-ehs-1/4in``.

Grades: common, sm (Siemens-Martin), hs (high strength), ehs (extra high strength), and utilities, with its strength in lbf where there are
two.
Metal area n pi/4 d^2 of the n wires.  The outside diameter is the greater of the nominal one and of the circle around the wires
(2.155 d of three, 3 d of seven, 5 d of nineteen), since wind and ice go by it.
"""

from __future__ import annotations

import math
from functools import cache

from guys import tables, units
from guys.catalogue import sizes
from guys.catalogue.rope import Stiffness, StockRope, elastic

AROUND = {3: 1.0 + 2.0 / math.sqrt(3.0), 7: 3.0, 19: 5.0}
"""Diameter of the circle around so many equal wires, over that of one."""


@cache
def listed() -> tuple[StockRope, ...]:
    """Every strand of the table."""
    return tuple(_strand(row) for row in tables.rows("strand"))


def find(name: str) -> StockRope | None:
    """The strand of that name."""
    return next((rope for rope in listed() if rope.name == name), None)


def _strand(row: dict[str, str]) -> StockRope:
    wires, wire = int(row["wires"]), float(row["wire_mm"]) / 1000.0
    area = wires * math.pi / 4 * wire**2
    diameter = max(sizes.inches(row["size_in"]), AROUND[wires] * wire)
    strength = units.to_si(float(row["strength_lbf"]), "lbf")
    return StockRope(
        name=f"strand-1x{wires}-{row['grade']}-{row['size_in']}in",
        kind="zinc-coated steel strand",
        diameter=diameter,
        mass=units.to_si(float(row["mass_lb_per_1000ft"]) / 1000.0, "lb/ft"),
        stiffness=_stiffness(wires, diameter, area),
        strength=strength,
        strength_high=strength,
        expansion=elastic()["strand"].expansion,
        known=row["known"],
        source=f"{row['source']}. Stiffness: {_stiffness_source(wires)}",
    )


def _stiffness(wires: int, diameter: float, area: float) -> Stiffness:
    """By the modulus of stranded steel; the stretch factor of new strand, where there is one, is the stiff end of the range."""
    used = elastic()["strand"].of(diameter, area)
    factor = elastic().get(f"1x{wires}")
    return used if factor is None else Stiffness(used.low, used.used, max(used.used, factor.of(diameter, area).used))


def _stiffness_source(wires: int) -> str:
    factor = elastic().get(f"1x{wires}")
    used = elastic()["strand"].source
    return used if factor is None else f"{used}; the stiff end: {factor.source}"
