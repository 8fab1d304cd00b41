"""Handbook A25, A26, B3. Deadmen and tower heights: US Army TM 5-5420-278-10, work package 0035, pages 0035 00-19 to 0035 00-23."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from guys.constants import POUND, STANDARD_GRAVITY
from guys.holdfasts import deadman
from guys.holdfasts.deadman import FOOT, PSF, TRENCH
from guys.holdfasts.holding import soil_factor
from guys.scenario import parse_scenario
from tests.published.compare import Allowance, Row, published

LBF = float(POUND) * STANDARD_GRAVITY
SLOPES = (1, 2, 3, 4)
TABLE_9 = {
    3: (950, 1300, 1450, 1500),
    4: (1750, 2200, 2600, 2700),
    5: (2800, 3600, 4000, 4100),
    6: (3800, 5100, 5800, 6000),
    7: (5100, 7000, 8000, 8400),
}
TABLE_8 = (
    (3, 8.25, "1.13"),
    (14, 6.25, "4.43"),
    (25, 4.25, "7.73"),
    (36, 2.25, "11.04"),
    (47, 0.25, "14.34"),
    (57, 10.25, "17.65"),
)
VERTICAL = {3: 600, 4: 1050, 5: 1700, 6: 2400, 7: 3200}


@published("HB B3", "READ")
def test_deadman_holding_power() -> Iterator[Row]:
    """Holding power of a deadman in loam by mean depth and slope of the cable, and the factors for other grounds.

    Source: TM 5-5420-278-10, p. 0035 00-22, table 9, read in a public transcription; vertical pulls from memory of FM 5-125. The holding
    is worked out for a face of one square foot beside the foot of length that the trench takes away.
    """
    for depth, values in TABLE_9.items():
        for slope, value in zip(SLOPES, values, strict=True):
            found = deadman.holding(np.array([math.atan(1 / slope)]), length=FOOT + TRENCH, height=FOOT, depth=depth * FOOT, soil="loam")
            yield Row(f"{depth} ft deep, 1 in {slope}", "lb/ft2", str(value), found.best[0] / LBF)
        upright = deadman.power(depth * FOOT, np.array([math.pi / 2]))[0] / PSF
        yield Row(f"{depth} ft deep, vertical", "lb/ft2", str(VERTICAL[depth]), upright, mark="MEMORY")
    yield Row("factor, rock or hardpan", "-", "5", soil_factor("deadman", "hardpan", False)[0])
    yield Row("factor, fine-grained of high moisture", "-", "0.5", soil_factor("deadman", "clay", True)[0])
    yield Row("factor, sandy of high moisture", "-", "0.5", soil_factor("deadman", "sand", True)[0])
    for slope, printed in ((2, "26.5"), (3, "18.5"), (4, "14")):
        rounded = Allowance(0.05, "printed to half a degree or a whole one")
        yield Row(f"angle of 1 in {slope}", "deg", printed, math.degrees(math.atan(1 / slope)), rounded)


@published("HB A25", "READ")
def test_deadman_length() -> Iterator[Row]:
    """Length of a deadman for a cable of 46,000 lb, 4 ft deep on 1 in 3 with a face of 1 ft: L = CC / (HP Df) + 1 ft.

    Source: the formula and the limits of length, TM 5-5420-278-10, p. 0035 00-22 and 00-23, read in a public transcription; the example is
    ours. At that length it is too slender: neither a log (5) nor a timber (9) may be so long for its thickness.
    """
    angle = np.array([math.atan(1 / 3)])
    length = 46000 * LBF / (deadman.power(4 * FOOT, angle)[0] * FOOT) + TRENCH
    yield Row("length", "ft", "18.7", length / FOOT, mark="EXACT")
    for form, most in (("log", "5"), ("timber", "9")):
        judged = [
            side
            for side in np.arange(2.0, 12.0, 0.5)
            if not np.isnan(deadman.holding(angle, length=side * FOOT, height=FOOT, depth=4 * FOOT, soil="loam", form=form).low[0])
        ]
        yield Row(f"greatest length over thickness, {form}", "-", most, max(judged))


@published("HB B3 place", "READ")
def test_where_a_deadman_lies() -> Iterator[Row]:
    """Distance of a deadman from a tower, C = (H + DD)/slope: radius of the anchor and what it lies behind it, on level ground.

    Source: TM 5-5420-278-10, p. 0035 00-22, formula and its range, H + DD to 4 (H + DD) for slopes 1 in 1 to 1 in 4, read in a public
    transcription; the example, a tower of 36 ft 2 1/4 in and a deadman 5 ft deep, is ours.
    """
    height, depth = (36 + 2.25 / 12) * FOOT, 5 * FOOT
    for slope in SLOPES:
        behind, along = deadman.trench(depth, math.atan(1 / slope))
        yield Row(f"C, 1 in {slope}", "ft", f"{slope * (height + depth) / FOOT:.4f}", (slope * height + behind) / FOOT, mark="EXACT")
        yield Row(f"trench, 1 in {slope}", "ft", f"{5 * math.hypot(1, slope):.4f}", along / FOOT, mark="EXACT")
    for share, slope in (("1", 1), ("4", 4)):
        behind, _ = deadman.trench(depth, math.atan(1 / slope))
        yield Row(f"C/(H + DD), 1 in {slope}", "-", share, (slope * height + behind) / (height + depth))


@published("HB A26", "READ")
def test_tower_heights() -> Iterator[Row]:
    """Height of a tower: a base of 3 ft 8 1/4 in and so many sections of 10 ft 10 in.

    Source: TM 5-5420-278-10, p. 0035 00-19, table 8, read in a public transcription. Feet are exact; the printed metres gather rounding.
    """
    gathered = Allowance(0.016, "printed metres gather rounding, up to 0.02 m")
    for count, (feet, inches, metres) in enumerate(TABLE_8):
        section = '[[spar.section]]\nlength = "{}"\nmass = "1 kg/m"\n'
        spar = '[[spar]]\nname = "tower"\nrigid = true\nbase = "fixed"\nfoot = { east = "0 m", north = "0 m" }\n'
        sections = section.format("3 ft 8 1/4 in") + count * section.format("10 ft 10 in")
        text = f'title = "tower"\n{spar}{sections}[[case]]\nname = "still"\nwind = 0.0\n'
        height = parse_scenario(text).spar[0].length
        yield Row(f"{count} sections", "ft", f"{feet + inches / 12:.4f}", height / FOOT)
        yield Row(f"{count} sections", "m", metres, height, gathered)
