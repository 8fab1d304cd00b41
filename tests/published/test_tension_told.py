"""Handbook A11 to A14 and C6.  Tensions told by times, sags by tensions, and tensions by temperature.

Engineering notes of the TowerTalk mailing list (15 Jun 2000, 30 Jul 2008, Aug 2011), a solved homework problem (13 Jul 2012) and a
tight-wire sag chart.
"""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from guys import sounding
from guys.constants import INCH, POUND, STANDARD_GRAVITY
from guys.scenario import parse_scenario
from guys.setting import find
from guys.sounding import Span
from guys.structure import build
from guys.studies.field import in_still_air
from guys.units import to_si
from tests.published.compare import Allowance, Row, published
from tests.published.masts import STILL, STRAIGHT, anchor_ring, guy, rope, spar, whole

FOOT, LB = 12 * float(INCH), float(POUND)
LBF = LB * STANDARD_GRAVITY


def _span(level: float, rise: float, mass: float, EA: float = 5e6) -> Span:
    return Span(np.array([[level, 0.0, rise]]), np.array([EA]), np.array([mass]))


@published("HB A11", "READ")
def test_tension_from_the_time_of_a_pulse() -> Iterator[Row]:
    """A guy of 100 ft and 56.6 lb in 250 ft; a pulse comes back after 0.75 s.

    Source: TowerTalk, Aug 2011, read; it divides by 8, "more exactly 8.03806" (g/4 in ft/s2 is 8.0435), and prints "500 lb".  Allowed: half
    a unit of the last digit, and what the cable's own weight, 23 lb, adds where the tension is told at the lower end of a steep cable or
    at the middle of a level one: at most half of it.
    """
    own = Allowance(0.5 * 22.64, "half the cable's weight")
    mass = 56.6 * LB / (250 * FOOT)
    for level, rise in ((100.0, 0.0), (70.0, 71.41), (20.0, 97.98)):
        told = sounding.tension("pulse", _span(level * FOOT, rise * FOOT, mass), np.array([0.75]))
        yield Row(f"tension, rise {rise:g} ft in 100", "lbf", "500", float(told[0]) / LBF, own)


@published("HB A12", "READ")
def test_frequency_of_a_taut_cable() -> Iterator[Row]:
    """A steel cable of 2.6 m, 11 mm thick, 7,800 kg/m3, under 860 N: fundamental frequency.

    Source: solved homework problem, 13 Jul 2012, read.  Allowed: half a unit of the last digit.
    """
    mass = 7800 * np.pi * 0.011**2 / 4
    period = sounding.reading("swing", _span(2.6, 0.0, mass, 1e8), np.array([860.0]))
    yield Row("frequency", "Hz", "6.55", 1 / float(period[0]))


@published("HB A13", "READ")
def test_sag_of_a_wire() -> Iterator[Row]:
    """A wire of 0.0007 lb/ft under 30 lb sags between level ends 10 ft and 100 ft apart.

    Source: tight-wire sag chart, read.  Allowed: half a unit of the last digit.
    """
    for far, printed in ((10, "0.0003"), (100, "0.03")):
        sag = sounding.reading("sag", _span(far * FOOT, 0.0, 0.0007 * LB / FOOT, 1e5), np.array([30 * LBF]))
        yield Row(f"sag in {far} ft", "ft", printed, float(sag[0]) / FOOT)


@published("HB A14", "READ")
def test_sag_of_a_level_span_as_long_as_a_sloping_guy() -> Iterator[Row]:
    """A guy of 127.5 ft, 73 lb in 1,000 ft, under 400 lb: sag of a level span of that length (from a nomograph, one digit).

    Source: TowerTalk, 15 Jun 2000, read.  Allowed: half a unit of the last digit.
    """
    sag = sounding.reading("sag", _span(127.5 * FOOT, 0.0, 0.073 * LB / FOOT), np.array([400 * LBF]))
    yield Row("level sag", "ft", "0.4", float(sag[0]) / FOOT)


TABLE = {
    "3/16": (0.02113, (590, 520, 460, 400, 340, 280, 220)),
    "1/4": (0.03519, (980, 870, 770, 670, 560, 460, 360)),
    "5/16": (0.05946, (1650, 1470, 1300, 1120, 950, 780, 610)),
}
"""Size: metal area [in2] and tensions [lb] at 0, 20, ... 120 degF."""
E_ALPHA, ALPHA = 145.6, 6.5e-6
"""[psi/degF] and [1/degF]."""
THREE = {"a": 0.0, "b": 120.0, "c": 240.0}


@published("HB C6", "READ")
def test_tensions_by_temperature_between_fixed_ends() -> Iterator[Row]:
    """Initial tension of strand at 0 to 120 degF, 10 % of its strength at 60 degF, three sizes.

    Source: TowerTalk, 30 Jul 2008, read; publisher of the table not stated.  One E alpha, 145.6 psi/degF, reproduces all three: strand
    between fixed ends.  It is so taken here (22.4 Msi, 6.5e-6 1/degF), with straight, weightless guys on a mast that neither stretches nor
    grows.  A mast that grows as the guys do leaves (H/L)^2 of each difference, H the anchor radius and L the guy's length (TowerTalk,
    29 Oct 2012, read), which the table does not have: here half of it at 45 degrees.  Allowed: half of the 10 lb it is rounded to, and
    as much again for the tension at 60 degF, rounded likewise, that the others start from.
    """
    rounded = Allowance(10.0, "rounded to 10 lb, and so is the tension at 60 °F that all start from")
    for size, (area, printed) in TABLE.items():
        rigid, grown = (_tensions(area, printed[3], growth) for growth in (0.0, 6.5e-6))
        for k, value in enumerate(printed):
            yield Row(f"{size} in at {20 * k} °F", "lbf", str(value), rigid[k], rounded)
        left = (grown[0] - grown[6]) / (rigid[0] - rigid[6])
        yield Row(f"{size} in: left of it with a mast that grows, 45°", "-", "0.50", float(left))


def _tensions(area: float, at_sixty: float, growth: float) -> list[float]:
    """[lbf] at 0, 20, ... 120 degF; `growth` [1/degF] of the mast."""
    post = f'[material.post]\ndensity = "1000 kg/m3"\nmodulus = "210 GPa"\nshear_modulus = "81 GPa"\nexpansion = "{growth!r} 1/degF"\n'
    strand = rope(f"{E_ALPHA / ALPHA * area!r} lbf", mass="0 kg/m", more=f'expansion = "{ALPHA!r} 1/degF"')
    guys = "".join(guy(n, "100 ft", n, f'tension = "{at_sixty} lbf"') for n in THREE)
    mast = spar("100 ft", section='tube = { diameter = "100 mm", wall = "5 mm" }\nmaterial = "post"\ndrag = 0.0')
    at = '[setting]\ntemperature = "60 degF"\n'
    text = whole(mast, anchor_ring(THREE, "100 ft"), guys, strand, post, STRAIGHT, at, STILL)
    still = in_still_air(find(build(parse_scenario(text))), tuple(to_si(20.0 * k, "degF") for k in range(7)))
    return [float(t) / LBF for t in still.tension[:, 0]]
