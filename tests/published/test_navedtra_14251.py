"""Handbook B1. Picket holdfasts: NAVEDTRA 14251 (Steelworker, volume 2), chapter 6, figures 6-44 to 6-46."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from guys.constants import POUND, STANDARD_GRAVITY
from guys.holdfasts import picket
from guys.holdfasts.holding import soil_factor
from tests.published.compare import Mark, Row, published

LBF = float(POUND) * STANDARD_GRAVITY
PRINTED: tuple[tuple[str, str, Mark], ...] = (
    ("1", "700", "READ"),
    ("1-1", "1400", "MEMORY"),
    ("1-1-1", "1800", "READ"),
    ("2-1", "2000", "MEMORY"),
    ("3-2-1", "4000", "READ"),
)


@published("HB B1", "READ")
def test_picket_holdfasts() -> Iterator[Row]:
    """Holding of picket combinations in loam, and factors for other grounds.

    Source: NAVEDTRA 14251, chapter 6, read in a public transcription; 1-1, 2-1 and the factors of wet gravel and of river sand from memory
    of FM 5-125, chapter 4; half in saturated ground from an answer in a trade magazine of June 2009, read.
    """
    for pattern, pounds, mark in PRINTED:
        found = picket.holding(np.radians([15.0]), pattern=pattern, soil="loam")
        yield Row(f"{pattern} combination", "lbf", pounds, found.best[0] / LBF, mark=mark)
    yield Row("factor, clay and gravel, wet", "-", "0.9", soil_factor("picket", "gravel", True)[0], mark="MEMORY")
    yield Row("factor, river clay and sand", "-", "0.5", soil_factor("picket", "sand", True)[0], mark="MEMORY")
    yield Row("factor, saturated", "-", "0.5", soil_factor("picket", "loam", True)[0])
