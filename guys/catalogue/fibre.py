"""Fibre ropes, generic, of any diameter: ``polyester-12mm``, ``hmpe-10mm``.  Everything about them is a range.

    mass = SG 1000 kg/m3 fill pi/4 d^2        strength = s pi/4 d^2        EA = c strength

SG specific gravity of the fibre; s [Pa] strength over the full circle; c the stiffness in strengths: EA is 0.3 of the strength over the
elongation at that load.  The low strength is judged.  The stiffness used is the one in the middle, by ratio, of the least
(c_low s_low) and the greatest (c_high s_high); it is a secant one of worked rope: new rope is softer, and fibres creep.
"""

from __future__ import annotations

import math
import re
from functools import cache

from guys import tables
from guys.catalogue import sizes
from guys.catalogue.rope import Stiffness, StockRope

FILL = 0.68
"""Share of the full circle that is fibre; common practice, from memory."""

SMALLEST, LARGEST = 0.004, 0.048
"""[m] diameters for which the rules are taken."""

SIZES_MM = (6, 8, 10, 12, 14, 16, 20, 24)
_NAME = re.compile(r"(?P<fibre>[a-z]+)-(?P<size>.+)", re.ASCII)


@cache
def _rows() -> dict[str, dict[str, str]]:
    return {row["fibre"]: row for row in tables.rows("fibre_rope")}


@cache
def listed() -> tuple[StockRope, ...]:
    """Every fibre in the usual diameters."""
    return tuple(_rope(row, size / 1000.0, f"{fibre}-{size}mm") for fibre, row in _rows().items() for size in SIZES_MM)


def find(name: str) -> StockRope | None:
    """The rope of that name, of any diameter between `SMALLEST` and `LARGEST`."""
    match = _NAME.fullmatch(name)
    row, diameter = (_rows().get(match["fibre"]), sizes.metres(match["size"])) if match else (None, None)
    if row is None or diameter is None or not SMALLEST <= diameter <= LARGEST:
        return None
    return _rope(row, diameter, name)


def hint(name: str) -> str | None:
    """What a name may be that has the right fibre and a size that is none or out of range."""
    match = _NAME.fullmatch(name)
    if match is None or match["fibre"] not in _rows():
        return None
    return f"{match['fibre']} is made from {SMALLEST * 1000:g}mm to {LARGEST * 1000:g}mm: such as {match['fibre']}-12mm"


def _rope(row: dict[str, str], diameter: float, name: str) -> StockRope:
    circle = math.pi / 4 * diameter**2
    strength, strength_high = float(row["strength_low"]) * circle, float(row["strength_high"]) * circle
    low, high = float(row["stretch_low"]) * strength, float(row["stretch_high"]) * strength_high
    return StockRope(
        name=name,
        kind=f"{row['fibre']} rope",
        diameter=diameter,
        mass=1000.0 * float(row["specific_gravity"]) * FILL * circle,
        stiffness=Stiffness(low, math.sqrt(low * high), high),
        strength=strength,
        strength_high=strength_high,
        expansion=None,
        known=row["known"],
        source=row["source"],
    )
