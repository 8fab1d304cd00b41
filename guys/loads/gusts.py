"""Gusts patch by patch: the share of the peak pressure q that blows where, mean wind with a gust in one band of heights.

    mean        q / (1 + 7 I_v)                                  EN 1993-3-1 (B.22), from memory
    in a patch  q / (1 + 7 I_v) (1 + 2 k_s I_v c_o)              (B.24), from memory; k_s = 3.5

With c_o = 1 the pressure in a patch is the peak itself, since 2 k_s = 7: mean and all patches that make up the whole are the plain gust.
I_v is taken at the height the pressure is taken at, above the foot of what carries the thing; the edges of patches are heights above the
foot of the mast.  A cable takes the gust on its part within the patch.  Force coefficients are those of the peak, on all of it.
"""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from guys.loads.pressure import PEAK, turbulence_intensity
from guys.rotation import Array
from guys.scenario import Scenario
from guys.scenario.patches import Patch


def share(scenario: Scenario, patch: Patch | None, z: Array, height: Array) -> Array:
    """Pressure over its peak at z [m] above the foot of what carries the thing, `height` [m] above that of the mast; patch None: 1."""
    if patch is None or scenario.wind is None:
        return np.ones(np.broadcast_shapes(z.shape, height.shape))
    profile, gust = scenario.wind.profile, scenario.gust
    intensity = gust.turbulence if gust.turbulence is not None else turbulence_intensity(profile, z)
    assert intensity is not None
    inside = (height >= patch.low) & (height < patch.high)
    return np.asarray((1.0 + inside * (2.0 * gust.k_s * profile.orography) * intensity) / (1.0 + PEAK * intensity))


def edges(patches: Sequence[Patch | None]) -> list[float]:
    """Heights [m] above the foot of the mast at which some patch begins or ends."""
    return sorted({float(e) for p in patches if p is not None for e in (p.low, p.high) if np.isfinite(e)})
