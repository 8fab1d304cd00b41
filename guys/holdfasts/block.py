"""A block lying on the ground, pulled at its eye.

    W   weight m g                     mu  friction between base and ground
    a   angle of the pull              s   slope of the ground, falling the way the block is pulled (the worst way it can fall)
    t   a + s, angle between pull and base
    b   side of the base across which it tips;  h  height of the eye over the base's middle;  z = height / 2  of the centre of mass

    sliding   T (cos t + mu sin t) = W (mu cos s - sin s);  level ground: T = mu W / (cos a + mu sin a)
    lifting   T sin t = W cos s
    tipping   about the edge toward the pull   T (h cos t + b/2 sin t) = W (b/2 cos s - z sin s)
              about the edge away from it      T (b/2 sin t - h cos t) = W (b/2 cos s + z sin s)
    bearing   N / ((b - 2 e) l) = q with N = W cos s - T sin t, e = (T h cos t + W z sin s) / N: pressure on the effective base
              (Meyerhof), a quadratic in T

The bearing of the pull against the block is not known: tipping and bearing are looked at along the length and along the width, each with
the whole pull, which is the worst that a pull between them can be for that edge.  Sliding uphill, under a steep pull, is looked at too.

Sources: statics; sliding is the block rule of the trade (common practice).  Friction is the user's; `guys/data/friction.csv` holds
published values to choose from.
"""

from __future__ import annotations

import numpy as np

from guys.constants import NONZERO, STANDARD_GRAVITY
from guys.holdfasts.holding import Holding, at_most, governed
from guys.rotation import Array

WHAT = "a weight lying on the ground"
SOURCE = "statics of a block: sliding under uplift, lifting, tipping"


def holding(
    angle: Array,
    *,
    mass: float,
    friction: float,
    length: float | None = None,
    width: float | None = None,
    height: float | None = None,
    eye_height: float | None = None,
    slope: float = 0.0,
    bearing: float | None = None,
    low: float = 1.0,
    high: float = 1.0,
) -> Holding:
    """Holding of a block; lengths [m], mass [kg], bearing: allowable pressure on the ground [Pa]."""
    a = np.asarray(angle, dtype=float)
    weight, tilt = mass * STANDARD_GRAVITY, a + slope
    ways = {"sliding": _sliding(weight, friction, slope, tilt), "lifting": at_most(weight * np.cos(slope), np.sin(tilt))}
    notes, unjudged = [], []
    eye = height if eye_height is None else eye_height
    if eye_height is None and height is not None:
        notes.append("its eye is taken to be at its top")
    middle = 0.0 if slope == 0.0 else height
    for side, across, name in ((length, width, "length"), (width, length, "width")):
        if side is None or eye is None or middle is None:
            lacking = [n for n, v in ((name, side), ("eye_height", eye), ("height", middle)) if v is None]
            unjudged.append(f"tipping along its {name} (give {', '.join(lacking)})")
            continue
        at = (weight, slope, tilt, side, eye, middle / 2)
        ways[f"tipping along its {name}"] = _tipping(*at)
        if bearing is not None and across is not None:
            ways[f"bearing on the ground along its {name}"] = _bearing(*at, across, bearing)
    if bearing is None:
        unjudged.append("pressure on the ground (give bearing)")
    elif not any(way.startswith("bearing") for way in ways):
        unjudged.append("pressure on the ground (give length, width and eye_height)")
    if slope:
        notes.append("the ground falls the way it is pulled")
    return governed(ways, a, SOURCE, (low, high), notes=notes, unjudged=unjudged)


def _sliding(weight: float, friction: float, slope: float, tilt: Array) -> Array:
    """Down the slope, or up it where the pull is steep."""
    hold, drive = friction * np.cos(slope), np.sin(slope)
    down = at_most(weight * (hold - drive), np.cos(tilt) + friction * np.sin(tilt))
    up = at_most(weight * (hold + drive), friction * np.sin(tilt) - np.cos(tilt))
    return np.where(hold <= drive, 0.0, np.minimum(down, up))


def _tipping(weight: float, slope: float, tilt: Array, side: float, eye: float, middle: float) -> Array:
    steady, tips = weight * side / 2 * np.cos(slope), weight * middle * np.sin(slope)
    toward = at_most(steady - tips, eye * np.cos(tilt) + side / 2 * np.sin(tilt))
    away = at_most(steady + tips, side / 2 * np.sin(tilt) - eye * np.cos(tilt))
    return np.where(steady <= tips, 0.0, np.minimum(toward, away))


def _bearing(weight: float, slope: float, tilt: Array, side: float, eye: float, middle: float, across: float, q: float) -> Array:
    """Least pull at which N^2 = q across (N side - 2 M): the positive root of A T^2 + B T + C, C < 0 while the block alone is borne."""
    n, m, s, c = weight * np.cos(slope), weight * middle * np.sin(slope), np.sin(tilt), eye * np.cos(tilt)
    A, B, C = s**2, q * across * (side * s + 2 * c) - 2 * n * s, n**2 - q * across * (side * n - 2 * m)
    if C >= 0.0:
        return np.zeros_like(tilt)
    root = np.sqrt(B**2 - 4 * A * C)
    upward = B >= 0.0  # the root in the form that does not cancel
    plain = (root - B) / np.where(upward, 1.0, 2 * np.maximum(A, NONZERO))
    return np.asarray(np.where(upward, -2 * C / np.where(upward, np.maximum(B + root, NONZERO), 1.0), plain))
