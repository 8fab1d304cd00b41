"""The worst wind direction, found rather than sampled.

Every wind case is swept over the full circle, then each cable's and each anchor's greatest value (and every foot's) is narrowed down:
around its best bearing so far, two bearings a third of the spacing away are added, round by round, until the spacing is below
`FINE`.  The peak reported is the greatest value solved for, never an interpolation.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import replace

import numpy as np

from guys.checks.extremes import measures
from guys.loads import CaseLine
from guys.rotation import Array
from guys.studies.batch import Batch, join

COARSE = math.radians(10)
FINE = math.radians(0.5)
SAME = math.radians(0.02)
"""Bearings nearer than this are one."""

Solve = Callable[[Sequence[CaseLine]], Batch]


def sweep(templates: Sequence[CaseLine], listed: Batch, solve: Solve) -> Batch:
    """All directions solved for, listed ones included, for one template line of every case with wind."""
    known = [line.wind_from for line in listed.lines if not math.isnan(line.wind_from)]
    spacing = COARSE
    ring = [b for b in np.arange(0.0, 2 * math.pi, spacing) if not _near(b, known)]
    parts = [_with_wind(listed), solve(_lines(templates, ring))] if ring else [_with_wind(listed)]
    while spacing > FINE:
        so_far = join(parts)
        spacing /= 3
        bearings = [line.wind_from for line in so_far.lines]
        fresh: list[float] = []
        for best in _best_bearings(so_far, templates):
            for side in (-spacing, spacing):
                b = (best + side) % (2 * math.pi)
                if not _near(b, bearings) and not _near(b, fresh):
                    fresh.append(b)
        if fresh:
            parts.append(solve(_lines(templates, fresh)))
    return join(parts)


def _lines(templates: Sequence[CaseLine], bearings: Sequence[float]) -> list[CaseLine]:
    return [replace(t, wind_from=float(b)) for t in templates for b in bearings]


def _near(bearing: float, others: Sequence[float]) -> bool:
    return any(abs((bearing - o + math.pi) % (2 * math.pi) - math.pi) < SAME for o in others)


def _with_wind(batch: Batch) -> Batch:
    keep = np.array([k for k, line in enumerate(batch.lines) if not math.isnan(line.wind_from)])
    return batch.take(keep)


def _best_bearings(batch: Batch, templates: Sequence[CaseLine]) -> list[float]:
    """Bearings of the greatest value of every measure, case by case."""
    values: Array = measures(batch.forces).joined()
    names = np.array([line.name for line in batch.lines])
    bearing = np.array([line.wind_from for line in batch.lines])
    out: list[float] = []
    for t in templates:
        rows = np.flatnonzero(names == t.name)
        mine = np.where(np.isfinite(values[rows]), values[rows], -np.inf)
        useful = np.isfinite(mine).any(axis=0) & (np.ptp(np.where(np.isfinite(mine), mine, 0.0), axis=0) > 0)
        for k in rows[np.argmax(mine[:, useful], axis=0)]:
            if not _near(float(bearing[k]), out):
                out.append(float(bearing[k]))
    return out
