"""A holdfast of whatever kind that was pulled: it holds what the test showed, along the test's own direction.

    T = pull / factor

The test must be at the angle of the pull: with `angle` given, pulls more than 30 degrees off it are not judged, and those more than 10
off are told; without it the user says that the test was at each pull's own angle.  `factor` is the user's, for what the test does not show
(wetter ground, a longer pull); 1 unless given.

Source: the user's test.
"""

from __future__ import annotations

import math

import numpy as np

from guys.holdfasts.holding import MOST_OFF, TOLD, Holding, governed
from guys.rotation import Array

WHAT = "anything that was pulled and held"
SOURCE = "the user's pull test"


def holding(
    angle: Array, *, pull: float, test_angle: float | None = None, factor: float = 1.0, low: float = 1.0, high: float = 1.0
) -> Holding:
    """Holding shown by a test; pull [N], test_angle above the horizontal [rad]."""
    a = np.asarray(angle, dtype=float)
    holds = {"pull test": np.full(a.shape, pull / factor)}
    if test_angle is None:
        return governed(holds, a, SOURCE, (low, high), notes=("tested at the pull's own angle, as the file says",))
    off = np.abs(a - test_angle)
    far = ((off > MOST_OFF, f"pulled more than {math.degrees(MOST_OFF):.0f}° off the direction of the test"),)
    notes = [f"tested at {math.degrees(test_angle):g}° from the ground"]
    if np.any((off > TOLD) & (off <= MOST_OFF)):
        notes.append(f"some pulls are more than {math.degrees(TOLD):.0f}° off the direction of the test")
    return governed(holds, a, SOURCE, (low, high), far, notes=notes)
