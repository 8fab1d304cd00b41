"""Wind on spars, fittings and cables for a factor of one.

Spar of axis t: force per length q drag width |n| n, n = u - (u.t) t, u the unit vector along the wind, with the profile.
Cable: the same with t its chord; the whole is spread evenly over the unstressed length.
Fitting: `any`: q drag area along u.  `flat`: normal to the face, q drag area c(theta), theta between the wind and the normal (either side);
c = 1 up to 45 degrees, then falling evenly to 0 at 90.  A face tilted back by b has the normal (sin B cos b, cos B cos b, sin b).
"""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from guys.loads.dead import fittings_of
from guys.loads.pressure import across, blowing_to, mean_pressure, pressure
from guys.loads.spread import Weights, spread
from guys.rotation import Array, dot
from guys.scenario.model import Fitting, Wind
from guys.structure import Structure

Flags = NDArray[np.bool_]


def on_spars(structure: Structure, wind: Wind, w: Weights, start: Array, end: Array, foot: Array, wind_from: Array, iced: Flags) -> Array:
    """Loads (case, piece, 4, 3) on the pieces, see `guys.loads.spread`.

    start, end : (piece, 3) [m] ends of every stretch in the setting position;  foot : (spar, 3);  wind_from, iced : (case,)
    """
    pieces = structure.pieces
    along = end - start
    axis = along / np.linalg.norm(along, axis=-1, keepdims=True)
    fraction = (w.station - pieces.station[:, :1]) / (pieces.station[:, 1:] - pieces.station[:, :1])
    z = start[:, None, 2] + fraction * along[:, None, 2] - foot[pieces.spar, None, 2]
    q = pressure(wind, z) * pieces.drag[:, None]
    pattern = across(blowing_to(wind_from)[:, None, :], axis)
    width = np.where(iced[:, None], pieces.iced_width, pieces.width)
    return spread(w, q, pattern * width[..., None])


def on_fittings(structure: Structure, wind: Wind, at: Array, foot: Array, wind_from: Array, iced: Flags) -> Array:
    """Forces (case, fitting, 3) [N]; at : (fitting, 3) [m] in the setting position."""
    fittings = fittings_of(structure)
    to = blowing_to(wind_from)
    force = np.zeros((len(wind_from), len(fittings), 3))
    q = pressure(wind, at[:, 2] - foot[structure.fittings.spar, 2])
    for k, f in enumerate(fittings):
        if f.area is not None:
            area = np.where(iced, f.iced_area if f.iced_area is not None else f.area, f.area)
            force[:, k] = (q[k] * (f.drag or 0.0) * area)[:, None] * _pattern(f, to)
    return force


def _pattern(fitting: Fitting, to: Array) -> Array:
    if fitting.shape == "any":
        return to
    bearing, tilt = fitting.face or 0.0, fitting.face_tilt
    normal = np.array([math.sin(bearing) * math.cos(tilt), math.cos(bearing) * math.cos(tilt), math.sin(tilt)])
    facing = to @ normal
    theta = np.arccos(np.clip(np.abs(facing), 0.0, 1.0))
    c = np.clip((math.pi / 2 - theta) / (math.pi / 4), 0.0, 1.0)
    return np.asarray((c * np.sign(facing))[:, None] * normal)


def on_cables(structure: Structure, wind: Wind, a: Array, b: Array, foot: Array, wind_from: Array, iced: Flags) -> Array:
    """Whole wind force on every cable (case, cable, 3) [N]; a, b : (cable, 3) [m] its ends in the setting position."""
    cables = structure.cables
    chord = b - a
    c = np.sqrt(dot(chord, chord))
    base = foot[cables.spar, 2]
    q = mean_pressure(wind, a[:, 2] - base, b[:, 2] - base)
    thickness = structure.scenario.ice.thickness if structure.scenario.ice is not None else 0.0
    width = np.where(iced[:, None], cables.diameter + 2 * thickness, cables.diameter)
    pattern = across(blowing_to(wind_from)[:, None, :], chord / c[:, None])
    return (q * cables.drag * c * width)[..., None] * pattern
