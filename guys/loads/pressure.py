"""Wind pressure over height.

    q(z) = rho V(z)^2 / 2,      uniform: V constant;      power: V = V_ref (z / z_ref)^p, nothing below z = 0

z is above the foot of the spar that carries the thing.  The mean over a stretch between two heights is exact (closed integral).
"""

from __future__ import annotations

import numpy as np

from guys.rotation import Array
from guys.scenario.model import Wind

LEVEL = 1e-6
"""[m] heights nearer than this count as one level, where the mean is the value itself."""


def pressure(wind: Wind, z: Array) -> Array:
    """q [Pa] at heights z [m]."""
    still = 0.5 * wind.air_density * wind.speed**2
    if wind.profile.kind == "uniform":
        return np.full_like(z, still)
    return np.asarray(still * (np.maximum(z, 0.0) / wind.height) ** (2 * wind.profile.exponent))


def mean_pressure(wind: Wind, low: Array, high: Array) -> Array:
    """Mean of q [Pa] over straight lines from height `low` to `high` [m], in either order."""
    if wind.profile.kind == "uniform":
        return pressure(wind, low)
    power = 2 * wind.profile.exponent + 1
    rise = high - low
    level = np.abs(rise) < LEVEL

    def integral(z: Array) -> Array:
        return np.asarray(wind.height / power * (np.maximum(z, 0.0) / wind.height) ** power)

    still = 0.5 * wind.air_density * wind.speed**2
    mean = still * (integral(high) - integral(low)) / np.where(level, 1.0, rise)
    return np.asarray(np.where(level, pressure(wind, 0.5 * (low + high)), mean))


def blowing_to(wind_from: Array) -> Array:
    """Unit vectors (..., 3) along the wind for bearings it comes from [rad]."""
    return np.stack([-np.sin(wind_from), -np.cos(wind_from), np.zeros_like(wind_from)], axis=-1)


def across(wind: Array, axis: Array) -> Array:
    """|n| n with n = w - (w.t) t: the pattern of the force on a slender bar of axis t (..., 3)."""
    n = wind - np.sum(wind * axis, axis=-1, keepdims=True) * axis
    return np.asarray(np.linalg.norm(n, axis=-1, keepdims=True) * n)
