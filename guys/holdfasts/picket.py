"""Pickets: stakes driven in line with the pull, the head of each lashed to the foot of the next.

    T = published holding of the combination x factor for the ground

The figures are for wooden pickets at least 3 in thick and 5 ft long, driven 3 to 4 ft and raked 15 degrees away from the pull, 3 to 6 ft
apart, in undisturbed loam.  The source names no angle of pull.  A picket raked by 15 degrees is square to a pull at 15 degrees; the
steeper the pull, the more it is drawn rather than pushed.  So the figures are taken up to `steepest`, 45 degrees unless the user says
otherwise (common practice); steeper pulls are not judged.

Source: NAVEDTRA 14251 (Steelworker, volume 2), chapter 6, figures 6-44 to 6-46; the combinations 1-1 and 2-1 and the factors for other
grounds from memory of FM 5-125, chapter 4.  `guys/data/pickets.csv` and `holdfast_soils.csv` say which is which.
"""

from __future__ import annotations

import math
from functools import cache

import numpy as np

from guys import tables
from guys.constants import POUND, STANDARD_GRAVITY
from guys.holdfasts.holding import DOWNWARD, Holding, governed, soil_factor
from guys.rotation import Array

WHAT = "stakes driven one behind another and lashed head to foot"
SOURCE = "NAVEDTRA 14251, chapter 6"
STEEPEST = math.radians(45.0)


@cache
def combinations() -> dict[str, tuple[int, float, str]]:
    """Pattern -> number of pickets, holding in loam [N], source; the weakest first."""
    pound_force = float(POUND) * STANDARD_GRAVITY
    rows = tables.rows("pickets")
    found = {row["pattern"]: (int(row["pickets"]), float(row["holding_lbf"]) * pound_force, row["source"]) for row in rows}
    return dict(sorted(found.items(), key=lambda item: item[1][1]))


def holding(
    angle: Array,
    *,
    pattern: str,
    soil: str,
    wet: bool = False,
    spacing: float | None = None,
    driven: float | None = None,
    steepest: float = STEEPEST,
    low: float = 1.0,
    high: float = 1.0,
) -> Holding:
    """Holding of a combination; spacing and driven are checked by the reader and change nothing here."""
    a = np.asarray(angle, dtype=float)
    _, pull, source = combinations()[pattern]
    factor, why = soil_factor("picket", soil, wet)
    notes = [
        f"{'wet' if wet else 'dry'} {soil}: factor {factor:g} ({why})",
        "wooden pickets of 3 in by 5 ft, driven 3 to 4 ft, raked 15° away from the pull, 3 to 6 ft apart, undisturbed ground",
        f"the source names no angle of pull; taken up to {math.degrees(steepest):g}° from the ground",
    ]
    refused = (
        (a < 0.0, DOWNWARD),
        (a > steepest * (1 + 1e-9), f"steeper than {math.degrees(steepest):g}°, which draws a picket"),
    )
    return governed({f"{pattern} combination": np.full(a.shape, pull * factor)}, a, source, (low, high), refused, notes=notes)
