"""Least distances in space between chains of straight pieces, and where such chains pass over an area in plan.

Of two pieces p + s u and q + t v, with r = p - q, the nearest points are at the s in [0, 1] that is best for the whole second line, then
the t in [0, 1] that is best for that s, then the s that is best for that t: the distance is convex in both, so one round is enough.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from guys.rotation import Array, dot

if TYPE_CHECKING:
    from shapely.geometry.base import BaseGeometry

PARALLEL = 1e-12
"""Squared sine between pieces below which they count as parallel: any s will do."""
UPRIGHT = 1e-9
"""[m] level length of a chain below which it is a point in plan."""


def apart(a: Array, b: Array) -> Array:
    """(...) least distance [m] between chains (..., point, 3) and (..., point, 3), case by case; NaN where a point of either is."""
    u, v = np.diff(a, axis=-2)[..., :, None, :], np.diff(b, axis=-2)[..., None, :, :]
    r = a[..., :-1, None, :] - b[..., None, :-1, :]
    uu, vv, uv, ur, vr = dot(u, u), dot(v, v), dot(u, v), dot(u, r), dot(v, r)
    room = uu * vv - uv**2
    s = _within(uv * vr - vv * ur, np.where(room > PARALLEL * uu * vv, room, 0.0))
    t = _within(uv * s + vr, vv)
    s = _within(uv * t - ur, uu)
    between = r + s[..., None] * u - t[..., None] * v
    return np.asarray(np.sqrt(dot(between, between).min(axis=(-2, -1))))


def _within(above: Array, below: Array) -> Array:
    """The quotient within 0 and 1, and 0 where nothing divides."""
    return np.asarray(np.clip(np.where(below > 0, above / np.where(below > 0, below, 1.0), 0.0), 0.0, 1.0))


def over(curves: Array, shape: BaseGeometry) -> tuple[NDArray[np.int64], Array]:
    """Where curves (case, point, 3) are over a shape in plan: ends of each stretch and the points between.

    Returns the case of each place (place,), ascending, and the places (place, 3); none of a curve that passes beside it.
    """
    import shapely

    east, north = np.moveaxis(np.diff(curves[..., :2], axis=1), -1, 0)
    level = np.concatenate([np.zeros((len(curves), 1)), np.cumsum(np.hypot(east, north), axis=1)], axis=1)
    upright = level[:, -1] < UPRIGHT
    runs, points = np.flatnonzero(~upright), np.flatnonzero(upright & shapely.intersects_xy(shape, *curves[:, 0, :2].T))
    lines = np.asarray(shapely.linestrings(curves[runs, :, :2]))
    met, of = shapely.get_coordinates(shapely.intersection(lines, shape), return_index=True)
    along = shapely.line_locate_point(lines[of], shapely.points(met))
    found = [np.stack([np.interp(x, level[k], curves[k, :, i]) for i in range(3)]) for x, k in zip(along, runs[of], strict=True)]
    case = np.concatenate([runs[of], np.repeat(points, curves.shape[1])]).astype(np.int64)
    places = np.concatenate([np.array(found).reshape(-1, 3), curves[points].reshape(-1, 3)])
    order = np.argsort(case, kind="stable")
    return case[order], places[order]
