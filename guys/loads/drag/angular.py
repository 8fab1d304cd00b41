"""Force coefficients of bodies with edges.

Rectangles (EN 1991-1-4:2005 7.6, read in a public transcription): c_f0 against d/b, linear between the points, b across the wind and d
along it; times psi_r against the corner radius r/b.  Wind at an angle meets both faces: each takes its own coefficient times its share of
the wind, so that a square takes 2.1 b from every side; ASCE 7 figure 29.4-1 gives 1.5 on the diagonal sqrt(2) b, 2.12 b.  The rule between
the axes is ours.

Hexagons and octagons: 1.4 on the width (ASCE 7 figure 29.4-1, h/D = 25, read).  Angles, channels and I-sections: 2.0 on the width
(EN 1991-1-4 7.7, read).

Open frames of one plane (ASCE 7 figure 29.4-2, read): c on the solid area by the share of it in the outline, in steps, for flat-sided
members and for round ones with D sqrt(q) up to and above 5.3 m Pa^1/2.
"""

from __future__ import annotations

import numpy as np

from guys import tables
from guys.loads.drag.round import ASCE_LARGE, curve
from guys.rotation import Array

POLYGON = 1.4
SHARP = 2.0


def rectangle(across: float, along: float, corner: float) -> float:
    """c on the width `across` of a rectangle, `along` deep in the wind, of corner radius `corner` [m]."""
    bluff = np.interp(along / across, *curve("rectangle"))
    return float(bluff * np.interp(corner / across, *curve("corner")))


def open_frame(solidity: float, bar: float | None, q: Array) -> Array:
    """c on the solid area of a frame; bar [m]: diameter of its round members, None: flat-sided."""
    row = [row for row in tables.rows("open_frames") if float(row["solidity_from"]) <= solidity][-1]
    if bar is None:
        return np.full_like(q, float(row["flat"]))
    return np.where(bar * np.sqrt(q) > ASCE_LARGE, float(row["large_round"]), float(row["small_round"]))
