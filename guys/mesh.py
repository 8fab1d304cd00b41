"""Where the nodes of a spar go.

An elastic spar has a node at its foot and head, at every section boundary and wherever something is made fast to it; the stretches
between are divided into elements.  Stations nearer to each other than `MERGE` of the spar's length share one node and reach it by a rigid
arm along the axis: a very short element would be so stiff that rounding in its rotations turned into newtons.

A span is the part of a spar between two levels where cables hold it, or between one and the foot or head.  Its elements are all of
about the same length, `ELEMENTS` to a span.  Measured (docs/benchmark.md): guy tensions are then within 0.01 % of a mesh twice as fine
for ordinary masts, and within 0.1 % of a rod's for spars bent by a hundredth of their length.
A short span, such as the tip above the highest guys, gets fewer.  An element of length h turns the rounding of a displacement u into
forces of 12 EI/h^3 u 1e-16: in elements of a two-hundredth of a pylon's length, with its head a third of a metre away, they passed 1e-9 of
the acting forces, and what stands was called a fall.
"""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from guys.constants import NONZERO

Array = NDArray[np.float64]

MERGE = 5e-3
"""Stations nearer than this share of the spar's length share a node."""
ELEMENTS = 8
"""Elements in a span."""
SHORTEST = 1 / 60
"""Shortest element a stretch is cut into, of the spar's length (before a mesh is made finer)."""
SAME = 1e-9
"""Ends of sections nearer than this share of the spar's length are one: lengths of sections are sums."""
SPARE = 1e-6
"""Part of an element by which a stretch may be longer than a whole number of them without getting one more: rounding."""


@dataclass(frozen=True)
class Stations:
    """Nodes of one spar: `station` (node,) [m] from the foot, ascending."""

    station: Array

    def nearest(self, at: float) -> tuple[int, float]:
        """Index of the node that carries a point at `at` [m], and how far beyond the node the point lies [m]."""
        k = int(np.argmin(np.abs(self.station - at)))
        return k, at - float(self.station[k])


def divide(
    length: float, boundaries: Iterable[float], held: Iterable[float], attached: Iterable[float], elements: int, finer: int = 1
) -> Stations:
    """Stations of an elastic spar.

    boundaries : section boundaries [m], always nodes;  held : where cables or heels attach;  attached : other attachments
    elements : elements in a span;  finer : parts every one of them is then divided into
    """
    least = MERGE * length
    fixed = _thinned([0.0, length, *boundaries], SAME * length)
    held = list(held)
    for at in sorted(held) + sorted(attached):
        if min(abs(at - s) for s in fixed) > least:
            fixed.append(at)
    fixed.sort()
    levels = _thinned([0.0, length, *held], least)
    out = [0.0]
    for low, high in pairwise(fixed):
        span = _span(levels, 0.5 * (low + high))
        most = (high - low) / (length * SHORTEST)
        parts = finer * max(1, math.ceil(min((high - low) / span * elements, most) - SPARE))
        out += [low + (high - low) * k / parts for k in range(1, parts + 1)]
    return Stations(np.array(out))


def _thinned(stations: Iterable[float], least: float) -> list[float]:
    out: list[float] = []
    for s in sorted(stations):
        if not out or s - out[-1] > least:
            out.append(s)
    return out


def _span(levels: list[float], at: float) -> float:
    """Length of the span at a station; next to nothing above a level that took the place of the head."""
    upper = next((s for s in levels if s >= at), levels[-1])
    lower = max((s for s in levels if s < at), default=0.0)
    return max(upper - lower, NONZERO)
