"""Numbers of the record: looked up by their key in `record.json`, rounded as everywhere else, both unit systems beside one another.

Loads are rounded up to three figures, capacities and factors down.  Components, and all that a hand adds up, are told as near as a tenth
of a newton, or four figures, so that sums close as far as they are written.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from guys import units
from guys.drawing import rounding
from guys.drawing.rounding import Say, System, Units
from guys.record.blocks import Number

RAISED = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")
THIN = "\u202f"
"""Narrow space that parts thousands and does not break."""


@dataclass(frozen=True)
class Numbers:
    """told : everything of record.json;  systems : the reader's first"""

    told: dict[str, Any]
    systems: tuple[System, System]

    def at(self, key: str) -> Any:
        """What stands under a key such as "result.cases.0.state"."""
        node: Any = self.told
        for step in key.split("."):
            node = node[int(step)] if isinstance(node, list) else node[step]
        return node

    def number(self, key: str, say: Say) -> Number:
        """The number under a key, in words of both systems."""
        value = self.at(key)
        return Number("", key, rounding.ABSENT) if value is None else self._worded(float(value), say, key)

    def given(self, value: float, say: Say) -> Number:
        """A number that the scenario gives."""
        return self._worded(value, say, "")

    def _worded(self, value: float, say: Say, key: str) -> Number:
        first, other = (say(value, system) for system in self.systems)
        return Number(repr(value), key, first, "" if other == first else other)

    def bearing(self, key: str) -> Number:
        """Degrees under a key as a bearing."""
        return self.number(key, lambda degrees, _: rounding.bearing(math.radians(degrees)))

    def degrees(self, key: str) -> Number:
        """Degrees under a key as a small angle."""
        return self.number(key, lambda degrees, _: rounding.small_angle(math.radians(degrees)))


def numbers(told: dict[str, Any], wanted: Units) -> Numbers:
    """The numbers of a record; US first where US is wanted alone."""
    return Numbers(told, ("US", "SI") if wanted == "US" else ("SI", "US"))


def grouped(value: float, decimals: int) -> str:
    """A number with its thousands parted, without a signed zero."""
    words = f"{value:,.{decimals}f}".replace(",", THIN)
    return words.lstrip("-") if float(f"{value:.{decimals}f}") == 0.0 else words.replace("-", "−")


def exact(si: str, us: str, decimals: tuple[int, int]) -> Say:
    """A way of saying with fixed decimals, in a unit each."""
    names = {"SI": (si, decimals[0]), "US": (us, decimals[1])}

    def say(value: float, system: System) -> str:
        unit, places = names[system]
        return f"{grouped(units.convert(value, unit), places)} {unit}"

    return say


def figures(si: str, us: str, count: int = 4) -> Say:
    """A way of saying to so many figures, in a unit each."""
    names = {"SI": si, "US": us}

    def say(value: float, system: System) -> str:
        unit = names[system]
        shown = units.convert(value, unit)
        return f"{rounding.written(rounding.round_near(shown, count), count)} {unit.replace('2', '²').replace('3', '³')}"

    return say


newtons = exact("N", "lbf", (1, 2))
newton_metres = exact("N m", "lbf ft", (1, 1))
metres = exact("m", "ft", (3, 2))
millimetres = exact("mm", "in", (1, 2))
pascals = figures("Pa", "psf")
per_metre = figures("N/m", "lbf/ft")
mass_per_metre = figures("kg/m", "lb/ft")
stiffness = figures("kN", "kip")
pressure = figures("GPa", "ksi")
bending = figures("kN m2", "kip ft2")
inertia_mass = figures("kg", "lb")


def plain(value: float, _: System) -> str:
    """A bare number to four figures."""
    return f"{value:.4g}".replace("-", "−")


def moment(value: float, system: System) -> str:
    """A moment as near as three figures tell it."""
    return _moment(value, system, rounding.round_near)


def turning(value: float, system: System) -> str:
    """A moment rounded up to three figures."""
    return _moment(value, system, rounding.round_up)


def _moment(value: float, system: System, rounded: Callable[[float, int], float]) -> str:
    unit = "kN m" if system == "SI" else "lbf ft"
    if abs(value) < rounding.NO_MOMENT:
        return f"0 {unit}"
    return f"{rounding.written(rounded(units.convert(value, unit), 3), 3)} {unit}"


def factor(value: float, _: System) -> str:
    """A factor rounded down."""
    return rounding.factor(value)


def tiny(value: float, _: System) -> str:
    """What is nothing but rounding, as a power of ten."""
    if value == 0.0:
        return "0"
    mantissa, exponent = f"{value:.1e}".split("e")
    return f"{mantissa} × 10{str(int(exponent)).translate(RAISED)}".replace("-", "−")


def give_words(value: float, system: System) -> str:
    """How an anchor gives."""
    if system == "SI":
        return f"{value / 1e6:.4g} kN/mm"
    return f"{value * rounding.INCH / rounding.POUND_FORCE / 1e3:.4g} kip/in"
