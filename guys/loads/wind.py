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

from guys.loads import gusts
from guys.loads.dead import fittings_of
from guys.loads.drag import attached, chosen
from guys.loads.iced import Ice
from guys.loads.pressure import across, blowing_to, mean_pressure, pressure
from guys.loads.spread import Weights, shares, spread
from guys.rotation import Array, dot
from guys.scenario import Scenario
from guys.scenario.model import Fitting, Wind
from guys.scenario.patches import Patch
from guys.structure import Structure

Flags = NDArray[np.bool_]


@dataclass(frozen=True)
class Blown:
    """Cases with wind: wind_from [rad], iced, strength (factor on the pressure, at most 1, at which coefficients are taken) (case,);
    iced_cables (case, cable); aside (case,) where forces on signs stand, see `guys.loads.drag.attached`; patches: the gusts there are, and
    patch (case,) which of them blows; above_mast (spar,) [m] heights of feet above that of the mast."""

    wind_from: Array
    iced: Flags
    strength: Array
    iced_cables: Flags
    aside: Sequence[str]
    patches: tuple[Patch | None, ...]
    patch: NDArray[np.int64]
    above_mast: Array

    def over_peak(self, scenario: Scenario, z: Array, spar: NDArray[np.int64]) -> Array:
        """(patch, ...) of the peak pressure at z (thing, ...) [m] above the feet of the spars (thing,)."""
        height = z + self.above_mast[spar].reshape(-1, *([1] * (z.ndim - 1)))
        return np.stack([gusts.share(scenario, patch, z, height) for patch in self.patches])


def patched(each: Sequence[Patch | None]) -> tuple[tuple[Patch | None, ...], NDArray[np.int64]]:
    """The gusts of cases (case,), each once, and which of them each has."""
    distinct = tuple(dict.fromkeys(each))
    return distinct, np.array([distinct.index(patch) for patch in each], dtype=np.int64)


def on_spars(structure: Structure, wind: Wind, w: Weights, axis: Array, z: Array, ice: Ice, blown: Blown) -> Array:
    """Loads (case, piece, 4, 3) on the pieces, see `guys.loads.spread`; axis (piece, 3), z (piece, gauss) [m] in the setting position."""
    held = chosen.bars(structure)
    strength = blown.strength if held.by_wind.any() else np.ones_like(blown.strength)
    states, state = np.unique(np.stack([blown.iced.astype(float), strength, blown.patch]), axis=1, return_inverse=True)
    iced, patch = states[0] == 1.0, states[2].astype(int)
    q = pressure(wind, z)
    c = chosen.on_bars(held, wind, states[1][:, None, None] * q, iced)
    width = np.where(iced[:, None, None], ice.width, held.width[chosen.BARE][:, None])
    blows = blown.over_peak(structure.scenario, z, structure.pieces.spar)[patch]
    share = shares(w, q * blows * c * width)[state.reshape(-1)]
    return spread(share, chosen.pattern(held, blowing_to(blown.wind_from), axis, blown.iced))


def on_fittings(structure: Structure, wind: Wind, at: Array, foot: Array, blown: Blown) -> Array:
    """Forces (case, point, 3) [N] on the points of the fittings, at : (point, 3) [m] in the setting position."""
    scenario, points = structure.scenario, structure.fittings
    to = blowing_to(blown.wind_from)
    force = np.zeros((len(to), len(points.of), 3))
    level = at[:, 2] - foot[points.spar, 2]
    ground = float(foot[:, 2].min())
    blows = blown.over_peak(scenario, level, points.spar)[blown.patch]
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
        force[:, k] = (q * blows[:, k] * c * area)[:, None] * _pattern(f, to)
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
    blows = np.stack([_mean_in(patch, structure, wind, low, high, blown) for patch in blown.patches])[blown.patch]
    drag = chosen.on_cables(cables, structure.scenario, wind, blown.strength[:, None] * q, blown.iced_cables)
    width = np.where(blown.iced_cables, ice.cable_width, cables.diameter)
    pattern = across(blowing_to(blown.wind_from)[:, None, :], chord / c[:, None])
    return (blows * drag * c * width)[..., None] * pattern


def _mean_in(patch: Patch | None, structure: Structure, wind: Wind, low: Array, high: Array, blown: Blown) -> Array:
    """Mean pressure (cable,) [Pa] over the chord with the gust in one patch."""
    if patch is None:
        return mean_pressure(wind, low, high)
    lift = blown.above_mast[structure.cables.spar]
    jumps = [edge - lift for edge in gusts.edges([patch])]
    return mean_pressure(wind, low, high, lambda z: gusts.share(structure.scenario, patch, z, z + lift[:, None]), jumps)
