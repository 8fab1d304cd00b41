"""A holding, and what all kinds share: the way that governs, the spread about the best value, pulls off the line of a rod.

    angle   of the pull above the horizontal [rad], (case,); negative: the pull is downward
    ways    name of a way of giving way -> pull at which it comes, (case,) [N], inf where it cannot
    best    the least of the ways;  low, high = spread about it

A rod bends where it does not lie in the line of the pull (TM 5-684 / NAVFAC MO-200, chapter 4: the rod must lie in line with the guy).
Off by `TOLD` it is said beside what governs; off by more than `MOST_OFF` nothing here speaks for it and it is not judged.  Both are common
practice.  A catenary that is just not slack by the rule of the results pulls at most 30 degrees flatter than its chord.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import ArrayLike, NDArray

from guys.rotation import Array

TOLD = math.radians(10.0)
MOST_OFF = math.radians(30.0)
DOWNWARD = "the pull is downward"
BREAKS = "breaking of its rod, eye or strap"


@dataclass(frozen=True)
class Holding:
    """low, best, high : (case,) [N] along the pull, NaN where not judged

    modes : in words, what may govern and why it may not be judged;  mode : (case,) which of them holds
    source : where the numbers come from;  notes : what was taken for granted;  unjudged : ways of giving way that lack data
    """

    low: Array
    best: Array
    high: Array
    modes: tuple[str, ...]
    mode: NDArray[np.int64]
    source: str
    notes: tuple[str, ...] = ()
    unjudged: tuple[str, ...] = ()

    @property
    def words(self) -> tuple[str, ...]:
        """What holds in each case."""
        return tuple(self.modes[k] for k in self.mode)

    def by_rod(self, strength: float) -> Holding:
        """With a rod, eye or strap of that breaking load [N] between cables and holdfast, which holds no more; steel is not spread."""
        breaks = np.nan_to_num(self.low, nan=-np.inf) > strength
        low, best, high = (np.minimum(value, strength) for value in (self.low, self.best, self.high))
        mode = np.where(breaks, len(self.modes), self.mode)
        return replace(self, low=low, best=best, high=high, modes=(*self.modes, BREAKS), mode=mode)

    def citing(self, source: str) -> Holding:
        """With the user's own source before ours."""
        return replace(self, source=f"{source}; {self.source}")


def governed(
    ways: Mapping[str, ArrayLike],
    angle: ArrayLike,
    source: str,
    spread: tuple[ArrayLike, ArrayLike],
    refused: Iterable[tuple[ArrayLike, str]] = (),
    rod: float | None = None,
    notes: Iterable[str] = (),
    unjudged: Iterable[str] = (),
) -> Holding:
    """The holding of the way that comes first.

    spread : low and high as shares of the best;  refused : cases that are not judged, the first reason that applies is told
    rod : angle of the rod above the horizontal [rad], None where it lies in the pull's line
    """
    a = np.atleast_1d(np.asarray(angle, dtype=float))
    every = np.stack([np.broadcast_to(np.asarray(way, dtype=float), a.shape) for way in ways.values()])
    off = np.zeros_like(a) if rod is None else np.abs(a - rod)
    first = np.argmin(every, axis=0)
    best = np.take_along_axis(every, first[None], axis=0)[0]
    mode = first + np.where(off > TOLD, len(ways), 0)
    bent = [] if rod is None else [f"{way}, pulled off its rod, which bends it" for way in ways]
    reasons = [*refused, (off > MOST_OFF, f"pulled more than {math.degrees(MOST_OFF):.0f}° off its rod"), (np.isnan(a), "no pull")]
    for k, (where, _) in enumerate(reasons):
        cases = np.broadcast_to(np.asarray(where, dtype=bool), a.shape) & ~np.isnan(best)
        mode, best = np.where(cases, len(ways) + len(bent) + k, mode), np.where(cases, np.nan, best)
    low, high = (best * np.asarray(share) for share in spread)
    more = () if rod is None else ("its rod lies in the upright plane of the pull",)
    modes = (*ways, *bent, *(reason for _, reason in reasons))
    return Holding(low, best, high, modes, mode, source, (*notes, *more), tuple(unjudged))


def at_most(load: ArrayLike, per_pull: ArrayLike) -> Array:
    """The pull at which pull x per_pull reaches the load: none needed where the load is already past, inf where the pull helps."""
    rate = np.asarray(per_pull, dtype=float)
    spare = np.maximum(np.asarray(load, dtype=float), 0.0)
    return np.where(rate > 0.0, spare / np.where(rate > 0.0, rate, 1.0), np.inf)


def soil_factor(kind: str, soil: str, wet: bool) -> tuple[float, str]:
    """Factor of the published table for a ground, with its source.  Raises KeyError for a ground the table does not hold."""
    from guys import tables

    for row in tables.rows("holdfast_soils"):
        if (row["kind"], row["soil"], row["wet"]) == (kind, soil, "yes" if wet else "no"):
            return float(row["factor"]), row["source"]
    raise KeyError(f"{kind}: {'wet' if wet else 'dry'} {soil}")
