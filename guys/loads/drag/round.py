"""Force coefficients of round bars.

EN 1991-1-4:2005 7.9 (read in public transcriptions): Re = b v / nu with v = sqrt(2 q / rho) and nu = 15e-6 m2/s;

    curve 1    0.11 / (Re/1e6)^1.4, between 0.4 and 1.2
    curve 2    1.2 + 0.18 log10(10 k/b) / (1 + 0.4 log10(Re/1e6)), k the roughness, k/b at least 1e-5

c is the larger, at most 1.2, and 1.2 below Re = 1.8e5, where curve 1 reaches it.

ASCE 7 figure 29.4-1 (read), h/D = 25 and more: 1.2 where D sqrt(q) is at most 5.3 m Pa^1/2 (2.5 ft psf^1/2), above it 0.7, 0.9 and 1.2 for
D'/D = 0, 0.02 and 0.08, linear between (D' the roughness).

A free end lets air round it: c is then psi(lambda) times as much, lambda the effective slenderness (EN 1991-1-4 7.13).  Masts, booms and
cables are held, or go on, at both ends: psi = 1.
"""

from __future__ import annotations

from functools import cache

import numpy as np

from guys import tables
from guys.rotation import Array

VISCOSITY = 15e-6
"""Kinematic viscosity of air [m2/s], EN 1991-1-4 7.9.1; read in a public transcription."""
SUBCRITICAL = 1.2
SMOOTHEST = 1e-5
"""Least k/b the curves are given for."""
CRISIS = 1e6 * (0.11 / SUBCRITICAL) ** (1 / 1.4)
"""Re = 1.81e5 at which curve 1 begins to fall."""
ASCE_LARGE = 5.3
"""[m Pa^1/2] of D sqrt(q) above which ASCE 7 takes a round body as supercritical."""


@cache
def curve(name: str) -> tuple[Array, Array]:
    """x and y of one curve of `guys/data/force_curves.csv`."""
    points = [(float(row["x"]), float(row["y"])) for row in tables.rows("force_curves") if row["curve"] == name]
    x, y = np.array(points).T
    return x, y


def reynolds(width: Array, q: Array, air_density: float) -> Array:
    """Re of bars of `width` [m] in a pressure q [Pa]."""
    return np.asarray(width * np.sqrt(2.0 * q / air_density) / VISCOSITY)


def en1991(re: Array, roughness: Array) -> Array:
    """c of long round bars; roughness k/b [-]."""
    r = np.maximum(re, CRISIS) / 1e6
    first = np.clip(0.11 / r**1.4, 0.4, SUBCRITICAL)
    second = SUBCRITICAL + 0.18 * np.log10(10 * np.maximum(roughness, SMOOTHEST)) / (1 + 0.4 * np.log10(r))
    return np.where(re <= CRISIS, SUBCRITICAL, np.minimum(np.maximum(first, second), SUBCRITICAL))


def asce7(width: Array, q: Array, roughness: Array) -> Array:
    """c of long round bars of `width` [m] in a pressure q [Pa]; roughness D'/D [-]."""
    large = np.interp(roughness, *curve("rough"))
    return np.asarray(np.where(width * np.sqrt(q) > ASCE_LARGE, large, SUBCRITICAL))


def slenderness(length: float, width: float, is_round: bool) -> float:
    """Effective slenderness of a body with a free end (EN 1991-1-4 table 7.16): between the rules for 15 m and 50 m linearly."""
    ratio = length / width
    short, long = (1.0, 0.7) if is_round else (2.0, 1.4)
    return min(float(np.interp(length, [15.0, 50.0], [short, long])) * ratio, 70.0)


def end_effect(slender: float) -> float:
    """psi for an effective slenderness, linear in its logarithm."""
    x, y = curve("end")
    return float(np.interp(np.log(max(slender, 1.0)), np.log(x), y))
