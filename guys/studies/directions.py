"""The worst wind direction, found rather than sampled.

Every wind case is swept over the full circle, then each cable's and each anchor's greatest value (and every foot's and head's) is
narrowed down.  Through the best bearing so far and its neighbours goes a parabola; its vertex is solved for, and once the vertex is the
best bearing itself, the bearings `CLOSE` on both sides of it, until the neighbours of the best are as near as that.  The peak reported
is the greatest value solved for, never an interpolation.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import replace

import numpy as np

from guys.checks.extremes import measures
from guys.loads import CaseLine, lines_of, setting_line
from guys.rotation import Array
from guys.scenario import Scenario
from guys.studies.batch import Batch, join

COARSE = math.radians(10)
CLOSE = math.radians(1)
"""A peak is narrowed down until its neighbours are this near, or a little more."""
SAME = math.radians(0.25)
"""Bearings nearer than this are one."""
ROUNDS = 6

Solve = Callable[[Sequence[CaseLine]], Batch]


def sweep(templates: Sequence[CaseLine], listed: Batch, solve: Solve) -> Batch:
    """All directions solved for, listed ones included, for one template line of every case with wind."""
    ring = between([line.wind_from for line in listed.lines if not math.isnan(line.wind_from)])
    parts = [_with_wind(listed), solve(_lines(templates, ring))] if ring else [_with_wind(listed)]
    for _ in range(ROUNDS):
        fresh = _worth_trying(join(parts), templates)
        if not fresh:
            break
        parts.append(solve(_lines(templates, fresh)))
    return join(parts)


def between(known: Sequence[float], apart: float = COARSE) -> list[float]:
    """Bearings every `apart` round the circle but for those known."""
    return [float(b) for b in np.arange(0.0, 2 * math.pi, apart) if not near(b, known)]


def round_lines(scenario: Scenario) -> tuple[CaseLine, ...]:
    """Still air, then every case, the windy ones in the scenario's directions and every COARSE, in order round the circle."""
    own = scenario.wind.directions if scenario.wind is not None else ()
    return (setting_line(scenario), *lines_of(scenario, sorted([*own, *between(own)])))


def _lines(templates: Sequence[CaseLine], bearings: Sequence[float]) -> list[CaseLine]:
    return [replace(t, wind_from=float(b)) for t in templates for b in bearings]


def near(bearing: float, others: Sequence[float]) -> bool:
    """Whether a bearing is one of the others."""
    return any(abs((bearing - o + math.pi) % (2 * math.pi) - math.pi) < SAME for o in others)


def _with_wind(batch: Batch) -> Batch:
    keep = np.array([k for k, line in enumerate(batch.lines) if not math.isnan(line.wind_from)])
    return batch.take(keep)


def _worth_trying(batch: Batch, templates: Sequence[CaseLine]) -> list[float]:
    """Bearings where some measure of some case may be greater than at all those solved for."""
    values: Array = np.concatenate([measures(batch.forces).joined(), batch.demands.use], axis=1)
    names = np.array([line.name for line in batch.lines])
    bearing = np.array([line.wind_from for line in batch.lines])
    known = np.unique(bearing).tolist()
    out: list[float] = []
    for t in templates:
        rows = np.flatnonzero(names == t.name)
        rows = rows[np.argsort(bearing[rows])]
        for column in values[rows].T:
            for b in _around_peak(bearing[rows], column):
                if not near(b, known) and not near(b, out):
                    out.append(b)
    return out


def _around_peak(bearing: Array, value: Array) -> list[float]:
    """Bearings to try for one measure; `bearing` ascending round the circle."""
    value = np.where(np.isfinite(value), value, -np.inf)
    k = int(np.argmax(value))
    if len(value) < 3 or not np.isfinite(value[k]) or np.ptp(value) == 0:
        return []
    here = float(bearing[k])
    left, right = (float((bearing[(k + side) % len(value)] - here + math.pi) % (2 * math.pi) - math.pi) for side in (-1, 1))
    if max(-left, right) < 1.5 * CLOSE:
        return []
    vertex = _vertex(left, right, float(value[k - 1] - value[k]), float(value[(k + 1) % len(value)] - value[k]))
    if abs(vertex) > 0.5 * CLOSE:
        return [(here + vertex) % (2 * math.pi)]
    return [(here + max(left / 2, -CLOSE)) % (2 * math.pi), (here + min(right / 2, CLOSE)) % (2 * math.pi)]


def _vertex(left: float, right: float, fall_left: float, fall_right: float) -> float:
    """Where a parabola through (left, fall_left), (0, 0), (right, fall_right) is greatest; the middle where it has no greatest value."""
    curve = (fall_right / right - fall_left / left) / (right - left)
    if not math.isfinite(curve) or curve >= 0:
        return 0.0
    slope = fall_left / left - curve * left
    return min(max(-slope / (2 * curve), left / 2), right / 2)
