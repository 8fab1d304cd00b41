"""Wind on spars, fittings and cables for a factor of one.

Spar of axis t: force per length q drag width |n| n, n = u - (u.t) t, u the unit vector along the wind, with the profile.
Cable: the same with t its chord; the whole is spread evenly over the unstressed length.
Fitting: `any` and `round`: q drag area along u.  `flat`: normal to the face, q drag area c(theta), theta between the wind and the normal
(either side); c = 1 up to 45 degrees, then falling evenly to 0 at 90.  A face tilted back by b has the normal (sin B cos b, cos B cos b,
sin b).  The force on a sign whose coefficient is chosen acts at its edges, shared by where the case puts it.

`drag` is the user's, or chosen from the shape by `guys.loads.drag`.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from guys.loads.dead import fittings_of
from guys.loads.drag import attached, chosen
from guys.loads.iced import Ice
from guys.loads.pressure import across, blowing_to, mean_pressure, pressure
from guys.loads.spread import Weights, shares, spread
from guys.rotation import Array, dot
from guys.scenario.model import Fitting, Wind
from guys.structure import Structure

Flags = NDArray[np.bool_]


@dataclass(frozen=True)
class Blown:
    """Cases with wind: wind_from [rad], iced, strength (factor on the pressure, at most 1, at which coefficients are taken) (case,);
    iced_cables (case, cable); aside (case,) where forces on signs stand, see `guys.loads.drag.attached`."""

    wind_from: Array
    iced: Flags
    strength: Array
    iced_cables: Flags
    aside: Sequence[str]


def on_spars(structure: Structure, wind: Wind, w: Weights, axis: Array, z: Array, ice: Ice, blown: Blown) -> Array:
    """Loads (case, piece, 4, 3) on the pieces, see `guys.loads.spread`; axis (piece, 3), z (piece, gauss) [m] in the setting position."""
    held = chosen.bars(structure)
    strength = blown.strength if held.by_wind.any() else np.ones_like(blown.strength)
    states, state = np.unique(np.stack([blown.iced.astype(float), strength]), axis=1, return_inverse=True)
    iced = states[0] == 1.0
    q = pressure(wind, z)
    c = chosen.on_bars(held, wind, states[1][:, None, None] * q, iced)
    width = np.where(iced[:, None, None], ice.width, held.width[chosen.BARE][:, None])
    share = shares(w, q * c * width)[state.reshape(-1)]
    return spread(share, chosen.pattern(held, blowing_to(blown.wind_from), axis, blown.iced))


def on_fittings(structure: Structure, wind: Wind, at: Array, foot: Array, blown: Blown) -> Array:
    """Forces (case, point, 3) [N] on the points of the fittings, at : (point, 3) [m] in the setting position."""
    scenario, points = structure.scenario, structure.fittings
    to = blowing_to(blown.wind_from)
    force = np.zeros((len(to), len(points.of), 3))
    level = at[:, 2] - foot[points.spar, 2]
    ground = float(foot[:, 2].min())
    for k, f in enumerate(fittings_of(structure)):
        if f.area is None or (f.sign and points.side[k] == 0):
            continue
        area = np.where(blown.iced, f.iced_area if f.iced_area is not None else f.area, f.area)
        height = f.height if f.sign and wind.rules == "asce7" and f.height is not None else 0.0
        q = float(pressure(wind, np.array([level[k] + 0.5 * height]))[0])
        if f.sign:
            c = _at_edge(f, wind, float(at[k, 2]) - ground, int(points.side[k]), blown.aside)
        else:
            c = attached.coefficient(f, scenario, wind, q * blown.strength, blown.iced)
        force[:, k] = (q * c * area)[:, None] * _pattern(f, to)
    return force


def _at_edge(sign: Fitting, wind: Wind, middle: float, side: int, aside: Sequence[str]) -> Array:
    """What one edge of a sign takes of its force, as a coefficient on its area (case,)."""
    taken = {}
    for where in set(aside):
        push = attached.push(sign, wind.rules, middle + 0.5 * (sign.height or 0.0), where)
        taken[where] = push.coefficient * (0.5 + side * push.offset)
    return np.array([taken[where] for where in aside])


def _pattern(fitting: Fitting, to: Array) -> Array:
    if fitting.shape != "flat":
        return to
    bearing, tilt = fitting.face or 0.0, fitting.face_tilt
    normal = np.array([math.sin(bearing) * math.cos(tilt), math.cos(bearing) * math.cos(tilt), math.sin(tilt)])
    facing = to @ normal
    theta = np.arccos(np.clip(np.abs(facing), 0.0, 1.0))
    c = np.clip((math.pi / 2 - theta) / (math.pi / 4), 0.0, 1.0)
    return np.asarray((c * np.sign(facing))[:, None] * normal)


def on_cables(structure: Structure, wind: Wind, chord: Array, low: Array, high: Array, ice: Ice, blown: Blown) -> Array:
    """Whole wind force on every cable (case, cable, 3) [N]; chord (cable, 3) [m], between heights low and high (cable,) [m]."""
    cables = structure.cables
    c = np.sqrt(dot(chord, chord))
    q = mean_pressure(wind, low, high)
    drag = chosen.on_cables(cables, structure.scenario, wind, blown.strength[:, None] * q, blown.iced_cables)
    width = np.where(blown.iced_cables, ice.cable_width, cables.diameter)
    pattern = across(blowing_to(blown.wind_from)[:, None, :], chord / c[:, None])
    return (q * drag * c * width)[..., None] * pattern
