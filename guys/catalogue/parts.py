"""Parts in a cable's load path: terminations, knots and bends by the share of the rope's strength they leave, shackles and turnbuckles by
their own strength.

Of a range the low end is the one that counts (`efficiency`); the high end is there to be seen.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache

from guys import tables, units


@dataclass(frozen=True)
class Part:
    """efficiency : share of the rope's strength it leaves, its high end `efficiency_high` where a range is known;  strength [N] of its own

    One of efficiency and strength is given.
    """

    name: str
    kind: str
    efficiency: float | None
    efficiency_high: float | None
    strength: float | None
    known: str
    source: str


@cache
def parts() -> Mapping[str, Part]:
    """Every part by name, of ``guys/data/parts.csv``."""
    return {row["name"]: _part(row) for row in tables.rows("parts")}


def _part(row: dict[str, str]) -> Part:
    strength = tables.number(row["strength_lbf"])
    return Part(
        name=row["name"],
        kind=row["kind"],
        efficiency=tables.number(row["efficiency"]),
        efficiency_high=tables.number(row["efficiency_high"]),
        strength=None if strength is None else units.to_si(strength, "lbf"),
        known=row["known"],
        source=row["source"],
    )
