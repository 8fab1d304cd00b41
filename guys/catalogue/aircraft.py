"""Aircraft-type steel cable: ``aircraft-7x19-1/8in``, ``aircraft-7x19-stainless-1/8in``.

Strengths as tabled.  Stiffness by the stretch factor of the construction (`guys.catalogue.rope`), of stainless steel 0.9 of it; the larger
6x19 ropes of the table have mass and metal area by the factors of their construction (`guys.catalogue.wire_rope`).
"""

from __future__ import annotations

from functools import cache

from guys import tables, units
from guys.catalogue import sizes, wire_rope
from guys.catalogue.rope import Stiffness, StockRope, elastic

STAINLESS_STIFFNESS, STAINLESS_EXPANSION = 0.9, 16e-6
"""Modulus over that of zinc-coated rope, and expansion [1/K]: EN 1993-1-11:2006 3.2 and 3.3, from memory."""


@cache
def listed() -> tuple[StockRope, ...]:
    """Every cable of the table."""
    return tuple(_cable(row) for row in tables.rows("aircraft_cable"))


def find(name: str) -> StockRope | None:
    """The cable of that name."""
    return next((rope for rope in listed() if rope.name == name), None)


def _cable(row: dict[str, str]) -> StockRope:
    construction, stainless = row["construction"], row["steel"] == "stainless"
    diameter, strength = sizes.inches(row["size_in"]), units.to_si(float(row["strength_lbf"]), "lbf")
    mass, stiffness, expansion, source = _elastic(construction, diameter)
    tabled = tables.number(row["mass_lb_per_100ft"])
    share = STAINLESS_STIFFNESS if stainless else 1.0
    return StockRope(
        name=f"aircraft-{construction}{'-stainless' if stainless else ''}-{row['size_in']}in",
        kind=f"{row['steel']} aircraft-type cable {construction}",
        diameter=diameter,
        mass=mass if tabled is None else units.to_si(tabled / 100.0, "lb/ft"),
        stiffness=Stiffness(share * stiffness.low, share * stiffness.used, share * stiffness.high),
        strength=strength,
        strength_high=strength,
        expansion=STAINLESS_EXPANSION if stainless else expansion,
        known=row["known"],
        source=f"{row['source']}. Stiffness: {source}",
    )


def _elastic(construction: str, diameter: float) -> tuple[float, Stiffness, float, str]:
    """Mass by its factor (0 where the table gives it), stiffness, expansion and their source."""
    if construction in elastic():
        flex = elastic()[construction]
        return 0.0, flex.of(diameter, 0.0), flex.expansion, flex.source
    factors = wire_rope.constructions()[construction]
    square, flex = (diameter * 1000.0) ** 2, elastic()[factors.core]
    return factors.mass * square / 100.0, flex.of(diameter, factors.area * square * 1e-6), flex.expansion, flex.source
