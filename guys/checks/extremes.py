"""Greatest values over cases, each with its own case: of the listed cases, and refined over the full circle of winds."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from guys.loads import CaseLine
from guys.recovery import Forces
from guys.results import Extreme
from guys.rotation import Array

TIE = 1e-8
"""Values nearer than this to the greatest, relative, are alike but for rounding and the solver's end: the first of them is named."""
GROUPS = ("tension", "resultant", "horizontal", "uplift", "down", "lift", "sideways", "whole", "turning", "slide", "lean")


@dataclass(frozen=True)
class Measures:
    """(case, item) arrays: tension of the greater end by cable [N]; resultant, horizontal, uplift by anchor [N]; down, lift, sideways,
    whole [N], turning [N m], slide (sideways over down, inf where lifted) by foot; lean by spar [rad].  NaN without an equilibrium."""

    tension: Array
    resultant: Array
    horizontal: Array
    uplift: Array
    down: Array
    lift: Array
    sideways: Array
    whole: Array
    turning: Array
    slide: Array
    lean: Array

    def joined(self) -> Array:
        """(case, everything) side by side."""
        return np.concatenate([getattr(self, g) for g in GROUPS], axis=1)


def measures(forces: Forces) -> Measures:
    """The measures of every case."""
    pull, foot = forces.pull, forces.foot_force
    sideways = np.hypot(foot[..., 0], foot[..., 1])
    least = -forces.foot_up
    return Measures(
        tension=np.maximum(forces.tension_anchor, forces.tension_top),
        resultant=np.linalg.norm(pull, axis=-1),
        horizontal=np.hypot(pull[..., 0], pull[..., 1]),
        uplift=pull[..., 2],
        down=-foot[..., 2],
        lift=np.where(np.isnan(least), np.nan, np.maximum(forces.foot_up, 0.0)),
        sideways=sideways,
        whole=np.linalg.norm(foot, axis=-1),
        turning=np.linalg.norm(forces.foot_moment, axis=-1),
        slide=np.where(np.isnan(least), np.nan, np.where(least > 0, sideways / np.where(least > 0, least, 1.0), np.inf)),
        lean=forces.head_lean,
    )


def extreme(listed: Array, lines: Sequence[CaseLine], swept: Array, swept_lines: Sequence[CaseLine]) -> Extreme:
    """Greatest of `listed` (case,), and of all with `swept`; NaN where no case has an equilibrium."""
    value, line = _greatest(listed, lines)
    peak, peak_line = _greatest(swept, swept_lines) if len(swept) else (math.nan, None)
    if not peak > value + TIE * abs(value):
        peak, peak_line = float(np.fmax(value, peak)), line
    return Extreme(
        value,
        line.name if line else "",
        line.wind_from if line else math.nan,
        peak,
        peak_line.name if peak_line else "",
        peak_line.wind_from if peak_line else math.nan,
    )


def _greatest(values: Array, lines: Sequence[CaseLine]) -> tuple[float, CaseLine | None]:
    if len(values) == 0 or np.isnan(values).all():
        return math.nan, None
    return float(np.nanmax(values)), lines[first_greatest(values)]


def first_greatest(values: Array) -> int:
    """Flat index of the first value that is the greatest, ties decided by order and not by rounding; some value is not NaN."""
    greatest = float(np.nanmax(values))
    return int(np.argmax(values >= (greatest - TIE * abs(greatest) if math.isfinite(greatest) else greatest)))
