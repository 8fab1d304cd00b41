"""Round tubes in common sizes: a scenario takes diameter and wall, which are copied from here.

Area A = pi (D - w) w, second moment I = pi/64 (D^4 - (D - 2 w)^4).
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cache

from guys import tables, units


@dataclass(frozen=True)
class StockTube:
    """A tube as sold; `diameter_text` and `wall_text` are its sizes as printed, for `tube = { diameter = ..., wall = ... }`."""

    name: str
    diameter: float
    wall: float
    diameter_text: str
    wall_text: str
    known: str
    source: str

    @property
    def area(self) -> float:
        """Area of metal [m2]."""
        return area(self.diameter, self.wall)

    @property
    def second_moment(self) -> float:
        """Second moment of area [m4]."""
        return second_moment(self.diameter, self.wall)


def area(diameter: float, wall: float) -> float:
    """Area of the ring [m2]."""
    return math.pi * (diameter - wall) * wall


def second_moment(diameter: float, wall: float) -> float:
    """Second moment of the ring's area about a diameter [m4]."""
    return math.pi / 64 * (diameter**4 - (diameter - 2 * wall) ** 4)


@cache
def listed() -> tuple[StockTube, ...]:
    """Every tube of ``guys/data/tubes.csv``."""
    return tuple(_tube(row) for row in tables.rows("tubes"))


def _tube(row: dict[str, str]) -> StockTube:
    diameter, wall = units.parse(row["diameter"], "length"), units.parse(row["wall"], "length")
    return StockTube(row["name"], diameter, wall, row["diameter"], row["wall"], row["known"], row["source"])
