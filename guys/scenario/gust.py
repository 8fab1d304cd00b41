"""The table `[gust]` as it is written; what becomes of it is in `guys.scenario.patches`."""

from __future__ import annotations

from typing import Literal

from guys.scenario import quantity as q
from guys.scenario.table import Model


class Gust(Model):
    """How the gusts of the wind come."""

    method: Literal["plain", "patches", "single"] = "plain"
    """plain: the peak on everything at once; patches: mean wind on all and gusts span by span; single: one patch, masts up to 50 m."""
    k_s: q.Ratio = 3.5
    """Peak factor of the patches; left out: 3.5 (from memory of EN 1993-3-1), which makes mean and all patches the peak."""
    turbulence: q.Share | None = None
    """Intensity of turbulence at every height; for profiles without one: uniform and power."""
