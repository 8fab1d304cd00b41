"""Ice on a bar at a height: its mass per length, and the width of bar and ice that the wind meets.

Glaze of thickness t and density rho on a round bar of diameter D: mass pi (D + t) t rho, width D + 2 t.

Rime of a class of ISO 12494: a mass per length, whatever the bar, that grows to windward as a vane of length L and width B, given for
bars of 10 and 30 mm. Between these, and between classes, the sizes are interpolated: linearly in the bar, and ln L and ln B linearly in
ln mass (the last two classes set the slope beyond R5). Bars below 10 mm carry the vane of 10 mm. For thicker bars than 30 mm, W wide, the
vane is derived, not read: as much wider than the bar as at 30 mm, and so long that its area, pi/4 B (L + W/2) - pi/8 W^2, holds the mass
at 500 kg/m3, as the areas of the table do within 2 %. Wind along the vane meets its width B, wind square to it W + L.

With height z above the foot of the spar, both from memory and only where asked: ISO 12494, the mass of rime times exp(0.01 z/m);
ASCE 7, the thickness of glaze times (z/10 m)^0.10, no more than 1.4 times.
"""

from __future__ import annotations

import math

import numpy as np

from guys.rotation import Array
from guys.scenario import Ice
from guys.scenario.ice import classes

NARROW, WIDE = 0.010, 0.030
"""Bars [m] the vanes of the classes are given for."""
GROUND = 1e-3
"""[m] below which a height counts as this, where a power of it is taken."""
MOST_THICK = 1.4
RIME_GROWTH = 0.01
"""[1/m]"""


def coat(bar: Array, ice: Ice | None, z: Array | None = None) -> tuple[Array, Array]:
    """Mass of ice per length [kg/m] and width with it [m] of round bars [m] at heights z [m] that fit them; z None: before any effect of
    height."""
    if ice is None:
        return np.zeros_like(bar), np.asarray(bar)
    grown = np.ones_like(bar) if z is None else growth(z, ice)
    if ice.rime:
        return _rime(bar, grown, ice)
    t = (ice.thickness or 0.0) * grown
    return np.asarray(math.pi * (bar + t) * t * ice.density), np.asarray(bar + 2 * t)


def growth(z: Array, ice: Ice) -> Array:
    """Factor of height on the thickness of glaze, or on the mass of rime."""
    if ice.height_effect == "asce7":
        return np.asarray(np.minimum((np.maximum(z, GROUND) / 10.0) ** 0.10, MOST_THICK))
    return np.asarray(np.exp(RIME_GROWTH * np.maximum(z, 0.0))) if ice.height_effect == "iso12494" else np.ones_like(z)


def _rime(bar: Array, grown: Array, ice: Ice) -> tuple[Array, Array]:
    assert ice.class_ is not None
    mass = float(classes()[ice.class_]["mass"]) * grown
    length, width = vane(bar, mass, ice.density)
    return mass * np.ones_like(bar), width if ice.vane == "windward" else np.asarray(bar + length)


def vane(bar: Array, mass: Array, density: float) -> tuple[Array, Array]:
    """Length and width [m] of the vane of rime of a mass per length [kg/m] on bars [m]."""
    share = np.clip((bar - NARROW) / (WIDE - NARROW), 0.0, 1.0)
    length, width = ((1 - share) * _size(f"{of}_10", mass) + share * _size(f"{of}_30", mass) for of in ("length", "width"))
    broad = width + np.maximum(bar - WIDE, 0.0)
    derived = (mass / density + math.pi / 8 * bar**2) / (math.pi / 4 * broad) - bar / 2
    return np.where(bar > WIDE, np.maximum(derived, 0.0), length), broad


def _size(column: str, mass: Array) -> Array:
    """A size of the vane against mass, between the classes and beyond the last."""
    known = [row for row in classes().values() if row[column]]
    x, y = (np.log([float(row[name]) for row in known]) for name in ("mass", column))
    beyond = np.maximum(np.log(mass) - x[-1], 0.0) * (y[-1] - y[-2]) / (x[-1] - x[-2])
    return np.asarray(np.exp(np.interp(np.log(mass), x, y) + beyond))
