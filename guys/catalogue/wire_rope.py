"""Stranded steel wire rope of any diameter by the factors of EN 12385: ``steel-7x7-6mm``, ``steel-6x36-iwrc-1960-20mm``.

    mass = W d^2 / 100 [kg/m]     metal area = C d^2 [mm2]     breaking force = K d^2 Rr / 1000 [kN]        d [mm], Rr [N/mm2]

fc: fibre core; iwrc: a wire rope as core; 7x7, 7x19 and 7x37 have a strand as core.  Rope grade Rr 1770 unless the name gives 1570 or 1960.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache

from guys import tables
from guys.catalogue import sizes
from guys.catalogue.rope import StockRope, elastic

GRADE, GRADES = 1770, (1570, 1770, 1960)
"""Rope grade meant where the name has none, and those there are [N/mm2]."""

SIZES_MM = (2, 3, 4, 5, 6, 8, 10, 12, 14, 16, 18, 20, 22, 24, 26, 28, 32)
"""Diameters that are listed; others are made in the same way."""

_NAME = re.compile(r"steel-(?P<construction>\d+x\d+m?(?:-fc|-iwrc)?)(?:-(?P<grade>\d{4}))?-(?P<size>[^-].*)", re.ASCII)


@dataclass(frozen=True)
class Construction:
    """mass W, area C and strength K factors, smallest and largest diameter [mm] it is made in, its core (steel or fibre)."""

    name: str
    core: str
    mass: float
    area: float
    strength: float
    smallest: float
    largest: float
    known: str
    source: str


@cache
def constructions() -> Mapping[str, Construction]:
    """The constructions of the table by name."""
    return {row["construction"]: _construction(row) for row in tables.rows("wire_rope")}


def _construction(row: dict[str, str]) -> Construction:
    return Construction(
        name=row["construction"],
        core=row["core"],
        mass=float(row["mass_factor"]),
        area=float(row["area_factor"]),
        strength=float(row["strength_factor"]),
        smallest=float(row["smallest_mm"]),
        largest=float(row["largest_mm"]),
        known=row["known"],
        source=row["source"],
    )


@cache
def listed() -> tuple[StockRope, ...]:
    """Every construction in the usual diameters, of the usual grade."""
    return tuple(
        made(each, GRADE, size / 1000.0, f"steel-{each.name}-{size}mm")
        for each in constructions().values()
        for size in SIZES_MM
        if each.smallest <= size <= each.largest
    )


def find(name: str) -> StockRope | None:
    """The rope of that name, of any diameter its construction is made in."""
    match = _NAME.fullmatch(name)
    construction = constructions().get(match["construction"]) if match else None
    if match is None or construction is None:
        return None
    grade, diameter = int(match["grade"] or GRADE), sizes.metres(match["size"])
    if grade not in GRADES or diameter is None or not construction.smallest <= diameter * 1000.0 <= construction.largest:
        return None
    return made(construction, grade, diameter, name)


def hint(name: str) -> str | None:
    """What a name may be that has the right construction and something else wrong."""
    match = _NAME.fullmatch(name)
    each = constructions().get(match["construction"]) if match else None
    if each is None:
        return None
    made_in = f"is made from {each.smallest:g}mm to {each.largest:g}mm, of grade {', '.join(map(str, GRADES))}"
    return f"steel-{each.name} {made_in}: such as steel-{each.name}-{GRADE}-10mm"


def made(construction: Construction, grade: int, diameter: float, name: str) -> StockRope:
    """The rope of a construction, grade [N/mm2] and diameter [m]."""
    square = (diameter * 1000.0) ** 2
    strength = construction.strength * square * grade
    flex = elastic()[construction.core]
    return StockRope(
        name=name,
        kind=f"stranded steel wire rope {construction.name}, grade {grade}",
        diameter=diameter,
        mass=construction.mass * square / 100.0,
        stiffness=flex.of(diameter, construction.area * square * 1e-6),
        strength=strength,
        strength_high=strength,
        expansion=flex.expansion,
        known=construction.known,
        source=f"{construction.source}. Stiffness: {flex.source}",
    )
