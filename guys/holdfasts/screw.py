"""A screw anchor: one or more plates on a shaft turned into the ground.  Whichever of three data the user has:

    clay     c  undrained cohesion      plate bearing   Q = 9 c A
                                        breakout        Q = 1.2 (H/D) c A, not more than that
    sand     phi, gamma                 plate bearing   Q = gamma H Nq A,  Nq = exp(pi tan phi) tan^2(45 + phi/2)
                                        breakout        Q = gamma H A (1 + 2 S (H/D) Ku tan phi),  S = 1 + m H/D
    torque   M  reached at the end      correlation     Q = Kt M,  Kt by the shaft

    H  depth of a plate, D its diameter, A its area net of the shaft.  Each plate gives the lesser of bearing (deep) and breakout to the
    surface (shallow); they meet at H/D = 7.5 in clay, at about as much in sand.  Plates three diameters apart or more act one by one.

Wet sand, water up to the surface, weighs less by the water's weight.  Clay is judged by the cohesion given, wet or not.  The `low` value
in sand, where the user gives none, holds the ratio H/D of the breakout at the critical one of Meyerhof and Adams: they find no more
than that however deep the plate, while bearing of single plates is the usual rule for screws; tests lie between and above.

Sources: plate bearing of 9 c and gamma D Nq, individual plates (read in an excavation design text); breakout in sand Meyerhof and Adams
1968 (read in a book's worked example; m, Ku and critical ratio by angle from memory: `guys/data/breakout.csv`); breakout in clay Meyerhof
1973 (from memory); Nq Reissner 1924 as in EN 1997-1 annex D; Kt Hoyt and Clemence 1989 (read in an industry manual that quotes it).
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np
from numpy.typing import ArrayLike

from guys import tables
from guys.constants import INCH, NONZERO, STANDARD_GRAVITY
from guys.holdfasts.holding import DOWNWARD, Holding, governed
from guys.rotation import Array
from guys.scenario.held import APART

WHAT = "plates on a shaft turned into the ground"
SOURCE = "plate bearing 9 c, gamma D Nq; breakout Meyerhof and Adams 1968; torque Hoyt and Clemence 1989"
WATER = 1000.0 * STANDARD_GRAVITY
"""Weight of water [N/m3]."""
DEEP_CLAY = 9.0
BREAKOUT_CLAY = 1.2
"""Breakout factor of a round plate in clay per H/D, Meyerhof 1973, from memory."""
_FOOT = float(12 * INCH)
SLIM = 3.5 * float(INCH)
"""Round shafts thinner than this have the Kt of square ones."""


def holding(
    angle: Array,
    *,
    helix: Sequence[float],
    depth: float,
    soil: Mapping[str, float] | None = None,
    torque: float | None = None,
    spacing: float | None = None,
    shaft: Mapping[str, float] | None = None,
    wet: bool = False,
    rod: float | None = None,
    low: float | None = None,
    high: float = 1.0,
) -> Holding:
    """Holding of a screw anchor.

    helix : diameters [m], the lowest plate first;  depth : of the lowest plate below the ground [m];  spacing : along the shaft [m]
    soil : friction_angle [rad] and unit_weight [N/m3], or cohesion [Pa], or torque [N m]
    torque : in place of soil [N m];  shaft : { square: } or { round: } [m]
    rod : angle of the shaft above the horizontal [rad]; None: in line with the pull
    """
    a = np.asarray(angle, dtype=float)
    size = np.asarray(helix, dtype=float)
    ground = {"torque": torque} if soil is None and torque is not None else dict(soil or {})
    H = plate_depths(size, depth, spacing, np.clip(a if rod is None else np.full_like(a, rod), 0.0, np.pi / 2))
    A = np.pi / 4 * (size**2 - _hole(shaft))
    notes = [] if len(size) == 1 else [f"plates {APART:g} diameters apart or more: each acts alone"]
    spread: ArrayLike = 1.0
    if "torque" in ground:
        factor, source = torque_factor(shaft or {})
        ways = {"torque correlation": np.full(a.shape, factor * ground["torque"])}
        notes.append(f"Kt = {factor:.3g}/m ({source})")
    elif "cohesion" in ground:
        ways, source = clay(H, size, A, ground["cohesion"]), "9 c per plate; breakout in clay Meyerhof 1973 (from memory)"
        notes.append("clay judged by its undrained cohesion; the weight of the ground above is left out")
    else:
        weight = ground["unit_weight"] - (WATER if wet else 0.0)
        ways, source = sand(H, size, A, ground["friction_angle"], weight), "gamma D Nq per plate; breakout in sand Meyerhof and Adams 1968"
        lesser = sand(H, size, A, ground["friction_angle"], weight, critical=True)
        least, most = (np.min(list(some.values()), axis=0) for some in (lesser, ways))
        spread = least / np.maximum(most, NONZERO)
        if low is None:
            notes.append("the low value holds breakout at the critical depth of Meyerhof and Adams (from memory)")
    return governed(ways, a, source, (spread if low is None else low, high), ((a < 0.0, DOWNWARD),), rod, notes)


def plate_depths(size: Array, depth: float, spacing: float | None, incline: Array) -> Array:
    """(case, plate) depth of each plate below the ground [m], the lowest first."""
    gaps = APART * size[:-1] if spacing is None else np.full(len(size) - 1, spacing)
    along = np.concatenate([[0.0], np.cumsum(gaps)])
    return np.asarray(np.maximum(depth - np.sin(incline)[..., None] * along, 0.0))


def clay(H: Array, D: Array, A: Array, cohesion: float) -> dict[str, Array]:
    """Pull at plate bearing and at breakout, summed over plates (case,) [N]."""
    bearing = np.broadcast_to(DEEP_CLAY * cohesion * A, H.shape)
    breakout = np.minimum(BREAKOUT_CLAY * H / D * cohesion * A, bearing)
    return {"plate bearing": bearing.sum(axis=-1), "breakout to the surface": breakout.sum(axis=-1)}


def sand(H: Array, D: Array, A: Array, phi: float, weight: float, critical: bool = False) -> dict[str, Array]:
    """The same in sand; `critical`: H/D of the breakout held at the critical ratio."""
    m, Ku, most = breakout_terms(phi)
    ratio = np.minimum(H / D, most) if critical else H / D
    bearing = weight * H * bearing_factor(phi) * A
    breakout = np.minimum(weight * H * breakout_factor(ratio, m, Ku * np.tan(phi)) * A, bearing)
    return {"plate bearing": bearing.sum(axis=-1), "breakout to the surface": breakout.sum(axis=-1)}


def bearing_factor(phi: float) -> float:
    """Nq of a deep plate."""
    return float(np.exp(np.pi * np.tan(phi)) * np.tan(np.pi / 4 + phi / 2) ** 2)


def breakout_factor(ratio: ArrayLike, m: float, lateral: float) -> Array:
    """1 + 2 S (H/D) Ku tan phi with S = 1 + m H/D;  lateral = Ku tan phi."""
    x = np.asarray(ratio, dtype=float)
    return np.asarray(1.0 + 2.0 * (1.0 + m * x) * x * lateral)


def breakout_terms(phi: float) -> tuple[float, float, float]:
    """m, Ku and the critical ratio H/D by angle of friction [rad]."""
    rows = tables.rows("breakout")
    angles = np.radians([float(row["friction_angle_deg"]) for row in rows])
    m, Ku, most = (float(np.interp(phi, angles, [float(row[name]) for row in rows])) for name in ("m", "Ku", "critical_ratio"))
    return m, Ku, most


def torque_factor(shaft: Mapping[str, float]) -> tuple[float, str]:
    """Kt [1/m] and its source; round shafts between the published sizes by linear interpolation.  Raises KeyError without a shaft."""
    rows = tables.rows("torque_factors")
    if "square" in shaft:
        return float(rows[0]["Kt_per_ft"]) / _FOOT, rows[0]["source"]
    size, round_rows = shaft["round"], [row for row in rows if row["shaft"] == "round"]
    if size < SLIM:
        return float(rows[0]["Kt_per_ft"]) / _FOOT, rows[0]["source"]
    sizes = [float(row["diameter_in"]) * float(INCH) for row in round_rows]
    values = [float(row["Kt_per_ft"]) / _FOOT for row in round_rows]
    source = round_rows[0]["source"] if size <= sizes[0] else round_rows[-1]["source"]
    return float(np.interp(size, sizes, values)), source


def _hole(shaft: Mapping[str, float] | None) -> float:
    """Square of the diameter of the circle that takes up as much of a plate as the shaft [m2]."""
    if not shaft:
        return 0.0
    return 4 / np.pi * shaft["square"] ** 2 if "square" in shaft else shaft["round"] ** 2
