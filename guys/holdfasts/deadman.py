"""A deadman: a log or timber buried across the pull, the cable led up to it in a trench.

    T = p (length - trench) height f

    p        holding power by mean depth of the face and slope of the cable, lb per square foot of face in loam: table 9
    trench   one foot of the face that the cable's trench takes away
    f        factor for the ground

The cable goes on through its trench in the line of the pull, so that the middle of the face lies depth / tan a behind the anchor, away from
what pulls, at the end of depth / sin a of cable.  From a tower of height H, whose cable runs to it straight, that is the source's
C = (H + depth) / slope.

Between the depths and slopes of the table p is interpolated linearly (slopes by their angle); outside its depths nothing is said.  The
flattest slope of the table is 1 in 4; a flatter pull is taken at that slope, since every row of the table holds the more the flatter the
pull.  The column for a vertical pull is from memory (FM 5-125): what is steeper than 1 in 1 rests on it and says so.

A log may be five times as long as it is thick, a squared timber nine times as long as its face is high: longer ones bend before the ground
gives.

Source: US Army TM 5-5420-278-10, work package 0035, pages 0035 00-22 and 00-23, table 9 (read in a public transcription).
"""

from __future__ import annotations

import math
from functools import cache

import numpy as np

from guys import tables
from guys.constants import INCH, POUND, STANDARD_GRAVITY
from guys.holdfasts.holding import DOWNWARD, Holding, governed, soil_factor
from guys.rotation import Array
from guys.scenario.held import SLENDEREST

WHAT = "a log or timber buried across the pull"
SOURCE = "TM 5-5420-278-10, table 9 (read in a public transcription)"
FOOT = float(12 * INCH)
PSF = float(POUND) * STANDARD_GRAVITY / FOOT**2
TRENCH = FOOT
STEEPEST_READ = math.radians(45.0)


@cache
def table() -> tuple[Array, Array, Array]:
    """Depths [m] ascending, angles of the pull [rad] ascending, and holding power (depth, angle) [Pa]."""
    rows = tables.rows("deadman")
    slopes = [name for name in rows[0] if name.startswith("1 in ")]
    angles = [math.atan(1 / int(name.removeprefix("1 in "))) for name in slopes] + [math.pi / 2]
    power = np.array([[float(row[name]) for name in (*slopes, "vertical")] for row in rows]) * PSF
    order = np.argsort(angles)
    return np.array([float(row["depth_ft"]) for row in rows]) * FOOT, np.array(angles)[order], power[:, order]


def power(depth: float, angle: Array) -> Array:
    """Holding power of the face [Pa]; NaN where the depth is outside the table or the pull downward."""
    depths, angles, values = table()
    column = np.array([np.interp(depth, depths, values[:, k], left=np.nan, right=np.nan) for k in range(len(angles))])
    return np.where(np.asarray(angle) < 0.0, np.nan, np.interp(angle, angles, column))


def trench(depth: float, angle: float) -> tuple[float, float]:
    """How far behind the anchor, level, the middle of the face lies, and the length of cable in the trench [m]."""
    return depth / math.tan(angle), depth / math.sin(angle)


def holding(
    angle: Array,
    *,
    length: float,
    height: float,
    depth: float,
    soil: str,
    wet: bool = False,
    form: str = "timber",
    low: float = 1.0,
    high: float = 1.0,
) -> Holding:
    """Holding of a deadman; depth: of the middle of its face [m]; height: of the face, of a log its thickness [m]."""
    a = np.asarray(angle, dtype=float)
    depths, angles, _ = table()
    factor, why = soil_factor("deadman", soil, wet)
    pull = power(depth, a) * max(length - TRENCH, 0.0) * height * factor
    notes = [f"{'wet' if wet else 'dry'} {soil}: factor {factor:g} ({why})", "one foot of its length is taken off for the cable's trench"]
    if np.any(a > STEEPEST_READ * (1 + 1e-9)):
        notes.append("pulls steeper than 1 in 1 rest on the column for vertical pulls, from memory")
    if np.any(a < angles[0] * (1 - 1e-9)):
        notes.append("pulls flatter than 1 in 4 are taken as 1 in 4, where the table ends")
    refused = (
        (a < 0.0, DOWNWARD),
        (not depths[0] <= depth <= depths[-1], "its depth is outside the published table"),
        (length > SLENDEREST[form] * height * (1 + 1e-9), f"longer than {SLENDEREST[form]:g} times its face: a {form} bends first"),
    )
    return governed({"the ground before its face": np.where(np.isnan(pull), np.inf, pull)}, a, SOURCE, (low, high), refused, notes=notes)
