"""Force coefficients of flat signs, and by how much the force stands off the middle.

EN 1991-1-4:2005 7.4.3 (read in a public transcription): 1.80 on the panel, the force up to 0.25 b to either side of its middle.  It holds
for panels with a gap below of at least a quarter of their height, or no wider than high (from memory).

ASCE 7 figure 29.3-1 (read in three public transcriptions): C_f by s/h and B/s, linear between; s high, B wide, h to the top, with q at h.
Case A: in the middle.  Case B: 0.2 B toward the windward edge.  Case C, where B/s is 2 and more: strips from the windward edge, each
with its own C_f, times 1.8 - s/h where s/h is above 0.8.  Openings of less than 30 %: times 1 - (1 - solidity)^1.5, on the gross area.

Which edge is to windward follows from a slight turn of the wind, so both sides are run.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache

import numpy as np

from guys import tables
from guys.rotation import Array

EN_PANEL = 1.80
EN_SIDE = 0.25
ASCE_SIDE = 0.2
STRIPS_FROM = 2.0
"""B/s from which case C applies."""


@dataclass(frozen=True)
class Push:
    """The resultant on a sign: coefficient on its area, and offset from its middle as a share of its width."""

    coefficient: float
    offset: float


@cache
def _table(name: str, first: str) -> tuple[Array, Array, Array]:
    """First column, numbers of the heading, and the cells (row, column); NaN where empty."""
    rows = tables.rows(name)
    heads = [head for head in rows[0] if head not in (first, "source")]
    cells = [[float(row[head] or "nan") for head in heads] for row in rows]
    return np.array([float(row[first]) for row in rows]), np.array([float(head) for head in heads]), np.array(cells)


def asce7(width: float, height: float, top: float) -> float:
    """C_f of cases A and B for a sign `width` by `height`, its upper edge `top` above the ground [m]."""
    s_over_h, b_over_s, cells = _table("solid_signs", "s_over_h")
    across = [float(np.interp(width / height, b_over_s, row)) for row in cells]
    return float(np.interp(min(height / top, 1.0), s_over_h, across))


def asce7_strips(width: float, height: float, top: float) -> Push:
    """Case C: the strips' resultant."""
    edges, b_over_s, cells = _table("sign_strips", "from_edge")
    ratio = width / height
    start = np.minimum(edges, ratio)
    end = np.minimum(np.append(edges[1:], np.inf), ratio)
    values = np.array([_known(ratio, b_over_s, row) for row in cells])
    force = values * (end - start)
    reduced = 1.8 - height / top if height / top > 0.8 else 1.0
    offset = 0.5 - float(force @ (0.5 * (start + end)) / force.sum()) / ratio
    return Push(float(force.sum() / ratio) * reduced, offset)


def _known(at: float, x: Array, y: Array) -> float:
    """Linear between the cells of a row that are not empty, the nearest beyond them."""
    there = ~np.isnan(y)
    return float(np.interp(at, x[there], y[there]))


def perforated(solidity: float) -> float:
    """Factor on the gross area for openings of less than 30 %."""
    return 1.0 - float((1.0 - solidity) ** 1.5)
