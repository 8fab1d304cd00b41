"""Handbook A18. Sliding and overturning of a block: a solved problem of a soil mechanics collection."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from guys.constants import POUND, STANDARD_GRAVITY
from guys.holdfasts import block
from tests.published.compare import Row, published

FOOT = 0.3048
KIP = 1000 * float(POUND) * STANDARD_GRAVITY


@published("HB A18", "READ")
def test_block_pushed_level() -> Iterator[Row]:
    """A concrete block 3 ft wide, 10 ft high and 1 ft long, 0.150 kcf, pushed by 1.9 kip at a third of its height; friction tan 30.

    Source: solved problem "Lateral-01" of a soil mechanics collection (September 2008), read.
    """
    mass = 3 * 10 * 1 * 0.150 * KIP / STANDARD_GRAVITY
    slides = block.holding(np.zeros(1), mass=mass, friction=math.tan(math.pi / 6))
    tips = block.holding(np.zeros(1), mass=mass, friction=1.0, length=3 * FOOT, eye_height=10 / 3 * FOOT)
    assert (slides.words, tips.words) == (("sliding",), ("tipping along its length",))
    yield Row("factor against sliding", "-", "1.37", slides.best[0] / (1.9 * KIP))
    yield Row("factor against overturning", "-", "1.07", tips.best[0] / (1.9 * KIP))
