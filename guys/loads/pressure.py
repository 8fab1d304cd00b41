"""Wind pressure over height.

    power       q(z) = f rho (s V)^2 / 2  (z / z_r)^2p  Kzt(z),          uniform: p = 0;  nothing below z = 0
    logarithmic q(z) = f q_m(z) (1 + 7 I_v(z)),   q_m = rho v_m^2 / 2,   v_m = k_r ln(z / z0) c_o s V,   I_v = 1 / (c_o ln(z / z0))

z is above the foot of the spar that carries the thing, and below `low` and above `high` taken as those (ASCE 7: Kz = c (z / zg)^(2 /
alpha), that is p = 1 / alpha and z_r = zg c^(-alpha / 2); EN 1991-1-4: (4.3), (4.4), (4.7), (4.8)).  Kzt = (1 + K1 K2 exp(-gamma z /
Lh))^2 near a crest, else 1.  s and f are the factors on speed and pressure that `guys.scenario.standard_wind` chose.

The mean over a stretch is integrated by Gauss points in every part between `low` and `high`, graded toward the lower end, where a power
starts with an upright tangent: z = a + (b - a) t^4.

Mean wind: the peak is mean (1 + 7 I_v), for every profile whose I_v is known: EN 1991-1-4 by (4.7), ASCE 7 by
I = c (10 m / z)^(1/6) (26.11-7, from memory); a uniform or power profile says nothing of turbulence.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from itertools import pairwise

import numpy as np

from guys.rotation import Array
from guys.scenario.model import Profile, Wind

Share = Callable[[Array], Array]
LEVEL = 1e-6
"""[m] heights nearer than this count as one level, where the mean is the value itself."""
POINTS = 16
"""Gauss points in a part of a stretch: means of every profile are then right to 1e-8."""
GRADING = 4
_X, _W = np.polynomial.legendre.leggauss(POINTS)
_T = 0.5 * (1 + _X)
ALONG, WEIGHT = _T**GRADING, 0.5 * _W * GRADING * _T ** (GRADING - 1)
"""Of a stretch: where its Gauss points lie, and what each counts."""
PEAK = 7.0
"""Peak over mean pressure is 1 + PEAK I_v: twice the peak factor 3.5 of EN 1991-1-4 (4.8)."""


def pressure(wind: Wind, z: Array) -> Array:
    """q [Pa] at heights z [m]."""
    return np.asarray(_still(wind) * _shape(wind, z))


def turbulence_intensity(profile: Profile, z: Array) -> Array | None:
    """I_v at heights z [m]; None where the profile has none."""
    at = np.clip(z, profile.low, profile.high)
    if profile.kind == "en1991":
        return np.asarray(1.0 / (profile.orography * np.log(at / profile.roughness)))
    return None if profile.turbulence is None else np.asarray(profile.turbulence * (10.0 / at) ** (1 / 6))


def bends(profile: Profile) -> tuple[float, ...]:
    """Heights [m] at which a profile starts, or stops to change."""
    return tuple(each for each in (0.0, profile.low, profile.high) if math.isfinite(each))


def mean_pressure(wind: Wind, low: Array, high: Array, share: Share | None = None, jumps: Sequence[Array] = ()) -> Array:
    """Mean of q [Pa] over straight lines from height `low` to `high` (line,) [m], in either order; `share` gives the share of q that blows
    at heights (line, point), and jumps at heights `jumps`, each (line,)."""
    bottom, top = np.minimum(low, high), np.maximum(low, high)

    def blows(z: Array) -> Array:
        return _shape(wind, z) if share is None else _shape(wind, z) * share(z)

    inner = [np.full_like(bottom, z) for z in bends(wind.profile)] + list(jumps)
    edges = np.sort(np.stack([bottom, *(np.clip(z, bottom, top) for z in inner), top]), axis=0)
    total = np.zeros_like(bottom)
    for a, b in pairwise(edges):
        part = b - a
        if part.any():
            total += part * (blows(a[..., None] + part[..., None] * ALONG) @ WEIGHT)
    rise = top - bottom
    level = rise < LEVEL
    mean = np.where(level, blows(0.5 * (bottom + top)[..., None])[..., 0], total / np.where(level, 1.0, rise))
    return np.asarray(_still(wind) * mean)


def _still(wind: Wind) -> float:
    """f rho (s V)^2 / 2 [Pa]."""
    return 0.5 * wind.air_density * (wind.speed_factor * wind.speed) ** 2 * wind.pressure_factor


def _shape(wind: Wind, z: Array) -> Array:
    """q over that of the reference speed."""
    p = wind.profile
    at = np.clip(z, p.low, p.high)
    if p.kind == "en1991":
        slowed = p.orography * np.log(at / p.roughness)
        return np.asarray(p.terrain**2 * slowed * (slowed + PEAK))
    if p.exponent == 0.0:
        return np.ones_like(at)
    shape = (np.maximum(at, 0.0) / (p.reference or wind.height)) ** (2 * p.exponent)
    if p.crest is not None:
        faster, decay = p.crest
        shape = shape * (1.0 + faster * np.exp(-decay * np.maximum(z, 0.0))) ** 2
    return np.asarray(shape)


def blowing_to(wind_from: Array) -> Array:
    """Unit vectors (..., 3) along the wind for bearings it comes from [rad]."""
    return np.stack([-np.sin(wind_from), -np.cos(wind_from), np.zeros_like(wind_from)], axis=-1)


def across(wind: Array, axis: Array) -> Array:
    """|n| n with n = w - (w.t) t: the pattern of the force on a slender bar of axis t (..., 3)."""
    n = wind - np.sum(wind * axis, axis=-1, keepdims=True) * axis
    return np.asarray(np.linalg.norm(n, axis=-1, keepdims=True) * n)
