"""A rope of the catalogue, and how its stiffness follows.

    EA = E A_metal            modulus on the metal area
    EA = 100 D^2 / F [lbf]    stretch factor F: the stretch in per cent is F load / D^2, load in lbf, diameter D in inches

Both are in ``guys/data/rope_stiffness.csv``.  Where sources give a range it is kept: `stiffness` is the value used.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache

from guys import constants, tables, units


@dataclass(frozen=True)
class Stiffness:
    """EA over its known range [N]; `used` is the one calculated with."""

    low: float
    used: float
    high: float


@dataclass(frozen=True)
class StockRope:
    """A rope as sold: diameter [m], mass [kg/m], stiffness [N], expansion [1/K] or None where none is known.

    strength : the low end of its range [N], the one that is judged;  strength_high : the high end, the same where there is no range
    """

    name: str
    kind: str
    diameter: float
    mass: float
    stiffness: Stiffness
    strength: float
    strength_high: float
    expansion: float | None
    known: str
    source: str


@dataclass(frozen=True)
class Elastic:
    """A row of the table of stiffness: moduli on the metal area [Pa] or a stretch factor, expansion [1/K]."""

    moduli: tuple[float, float, float] | None
    stretch_factor: float | None
    expansion: float
    source: str

    def of(self, diameter: float, area: float) -> Stiffness:
        """EA of a rope of that diameter [m] and metal area [m2]."""
        if self.stretch_factor is not None:
            ea = units.to_si(100.0 * (diameter / float(constants.INCH)) ** 2 / self.stretch_factor, "lbf")
            return Stiffness(ea, ea, ea)
        assert self.moduli is not None
        return Stiffness(*(modulus * area for modulus in self.moduli))


@cache
def elastic() -> Mapping[str, Elastic]:
    """Stiffness by kind of rope."""
    return {row["name"]: _elastic(row) for row in tables.rows("rope_stiffness")}


def _elastic(row: dict[str, str]) -> Elastic:
    low, used, high = (tables.number(row[name]) for name in ("modulus_low", "modulus", "modulus_high"))
    moduli = None if used is None else (low or used, used, high or used)
    return Elastic(moduli, tables.number(row["stretch_factor"]), float(row["expansion"]), row["source"])
