"""A5, B1.  Cases that nobody published: worked out for these tests by two independent methods each.

A5 by the closed form of the catenary in a plane turned into that of the load, and by integrating the cable's differential equation.
B1 by scalar catenaries about a rigid mast, and with every guy as a chain of 20, 40 and 80 bars, extrapolated.
"""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache

import numpy as np

from guys import cable, stability
from guys.constants import STANDARD_GRAVITY
from guys.results import Solution
from tests.published.compare import Allowance, Row, published
from tests.published.masts import KILO_PASCAL, STILL, anchor_ring, critical, guy, load, per_length, rope, solved, spar, unbuckled, whole

GUYS = {"1": 90.0, "2": 330.0, "3": 210.0}
"""Bearings [deg] of the guys at 0, 120 and 240 degrees counter-clockwise from x = east."""
HEIGHT, WEIGHT, EA, GUY_WEIGHT = 30.0, 6000.0, 3.0e6, 4.0
NUDGE = 0.0249359
"""Wind factor, 37.4 N, that moves the head by the millimetre over which the stiffness was worked out."""

ONE_GUY = (
    ("36.05", (0, 6, -4), ("-1134.5227", "107.0947", "1630.3875"), ("-1134.5227", "-109.2053", "1774.5875")),
    ("36.05", (3, 6, -4), ("-1038.6094", "106.5052", "1566.7895"), ("-1146.7594", "-109.7948", "1710.9895")),
    ("36.00", (0, 0, -4), ("-2586.2861", "0.0000", "3807.7370"), ("-2586.2861", "0.0000", "3951.7370")),
    ("37.50", (0, 6, -12), ("-186.9757", "93.8830", "92.6977"), ("-186.9757", "-131.1170", "542.6977")),
)
"""Unstressed length [m], load [N/m], pull on the anchor and tension at the head (x, y, z) [N]."""


@published("A5", "WORKED OUT")
def test_one_guy_in_wind() -> Iterator[Row]:
    """One guy from (0, 0, 0) to (-20, 0, 30) m, EA = 3 MN, under weight and side wind: end forces.

    Source: worked out, two methods agreeing to 1e-8 N.  Allowed: half a unit of the last digit.
    """
    for text, q, at_a, at_b in ONE_GUY:
        length = float(text)
        hung = cable.hang(np.array([[-20.0, 0, 30]]), np.array([length]), np.array([EA]), length * np.array([q], dtype=float))
        for what, printed, ours in (("pull on the anchor", at_a, hung.at_a[0]), ("tension at the head", at_b, hung.at_b[0])):
            for axis, p, value in zip("xyz", printed, ours, strict=True):
                yield Row(f"L0 = {text} m, load {q} N/m: {what}, {axis}", "N", p, value)


def _mast(base: str) -> str:
    sail = '[[spar.fitting]]\nname = "sail"\nat = "30 m"\narea = "1.5 m2"\ndrag = 1.0\n'
    return spar("30 m", base, section=f'{per_length(WEIGHT / HEIGHT)}\nwidth = "100 mm"\ndrag = 0.0') + sail


def _rigging(how: str = 'tension = "4 kN"') -> str:
    line = rope(f"{EA} N", mass=f"{GUY_WEIGHT / STANDARD_GRAVITY!r} kg/m")
    return anchor_ring(GUYS, "20 m") + "".join(guy(n, "30 m", n, how) for n in GUYS) + line


@cache
def _solution() -> Solution:
    directions = 'directions = ["90 deg", "180 deg", "270 deg"]\n'
    cases = (("light", 1.0), ("strong", 4.0), ("nudge", NUDGE))
    winds = "".join(f'[[case]]\nname = "{name}"\nwind = {factor}\n' for name, factor in cases)
    return solved(_mast("ball"), _rigging(), KILO_PASCAL + directions, winds)


def _row(case: str, wind_from: float) -> int:
    found = _solution()
    return next(k for k, name in enumerate(found.case) if name == case and abs(np.degrees(found.wind_from[k]) - wind_from) < 1)


LOADED = (
    ("1500 N toward -x", "light", 90, ("-0.040003", "0.000000", "-0.000027"), ("5822.852", "3106.600", "3106.600"),
     ("5942.618", "3226.474", "3226.474"), ("-17.839", "0.000", "16378.638")),
    ("1500 N toward +x", "light", 270, ("0.040912", "0.000000", "-0.000028"), ("2214.264", "4928.916", "4928.916"),
     ("2334.173", "5048.716", "5048.716"), ("18.286", "0.000", "16408.585")),
    ("1500 N toward +y", "light", 180, ("-0.000382", "0.040437", "-0.000027"), ("4017.265", "2450.318", "5585.848"),
     ("4137.102", "2570.217", "5705.623"), ("-0.171", "18.053", "16393.077")),
    ("6000 N toward -x", "strong", 90, ("-0.169463", "0.000000", "-0.000479"), ("11779.008", "899.273", "899.273"),
     ("11898.535", "1019.232", "1019.232"), ("-82.691", "0.000", "17638.631")),
    ("6000 N toward +x", "strong", 270, ("0.310113", "0.000000", "-0.001603"), ("217.909", "11115.562", "11115.562"),
     ("337.891", "11235.111", "11235.111"), ("227.420", "0.000", "24999.194")),
)  # fmt: skip
"""Case, its name and wind here; move of the head (x, y, z) [m]; tensions of the three guys at anchors and head [N]; reaction on the mast
[N]."""
PULLS = (("light", 90, (("-3267.482", "0.000", "4819.665"), ("874.822", "-1521.321", "2563.442"))),
         ("strong", 270, (("-148.486", "0.000", "159.487"), ("3187.953", "-5355.612", "9203.809"))))  # fmt: skip


@published("B1", "WORKED OUT")
def test_rigid_mast_on_three_guys() -> Iterator[Row]:
    """Rigid mast of 30 m on a ball, three guys of 4 N/m at 20 m radius, 4 kN at the anchors: still air, and five loads at its head.

    Source: worked out, two methods agreeing to 1e-4 N. A whole scenario: the load is the wind on a sail at the head. Guy 1 is on the +x
    side. Allowed: half a unit of the last digit (a micrometre, a thousandth of a newton).
    """
    found = _solution()
    assert set(found.state) == {"neutral"}, "a ball base lets the mast spin about its own axis, and nothing else is free"
    assert all(note is not None and note.endswith("may spin freely about its own axis") for note in found.note)
    yield Row("still air: unstressed length", "m", "36.007367", found.cables.unstressed_length[0, 0])
    yield Row("still air: tension at the head", "N", "4119.8378", found.cables.tension_top[0, 0])
    yield Row("still air: base reaction", "N", "16350.0504", -found.bases.force[0, 0, 2])
    for what, case, wind_from, move, at_anchor, at_top, reaction in LOADED:
        k = _row(case, wind_from)
        for axis, printed, ours in zip("xyz", move, found.spars[0].displacement[k, -1], strict=True):
            yield Row(f"{what}: move of the head, {axis}", "m", printed, ours)
        for name, low, high, ours_low, ours_high in zip(
            GUYS, at_anchor, at_top, found.cables.tension_anchor[k], found.cables.tension_top[k], strict=True
        ):
            yield Row(f"{what}: guy {name} at its anchor", "N", low, ours_low)
            yield Row(f"{what}: guy {name} at the head", "N", high, ours_high)
        for axis, printed, ours in zip("xyz", reaction, -found.bases.force[k, 0], strict=True):
            yield Row(f"{what}: base reaction on the mast, {axis}", "N", printed, ours)


@published("B1 pulls", "WORKED OUT")
def test_pulls_on_the_anchors() -> Iterator[Row]:
    """Pulls on the anchors of B1 in its first and last case, guys 1 and 2; guy 3 mirrors guy 2.

    Source and allowance as for B1.
    """
    found = _solution()
    for case, wind_from, pulls in PULLS:
        k = _row(case, wind_from)
        for name, printed, ours in zip("12", pulls, found.anchors.pull[k], strict=False):
            for axis, p, value in zip("xyz", printed, ours, strict=True):
                yield Row(f"{case}, wind from {wind_from}: pull on anchor {name}, {axis}", "N", p, value)


@published("B1 stiffness", "WORKED OUT")
def test_star_stiffness() -> Iterator[Row]:
    """Level stiffness of the three guys at the head of B1 for small moves, the mast's weight and thrust taken out.

    Source: worked out, 37 848.828 N/m over a move of a millimetre either way (37 848.980 for a vanishing one: the program found that the
    worked-out value was a difference); the formula of taut weightless guys, (n/2) [EA/L cos^2 a + T/L (2 - cos^2 a)], gives 38 688.156,
    and with Ernst's modulus 37 791.422. Taken here from the moves x under a force F either way, a millimetre: (F H/x + V + G/2)/H with V
    the guys' vertical pull and G the weight. Allowed: half a unit of the last digit and 2e-7 for the sinking of the tilted head; against
    the formulas, what they leave out: 2.2 % sag, 0.16 % the parabola.
    """
    found = _solution()
    force = NUDGE * 1500.0
    ahead, back = (found.spars[0].displacement[_row("nudge", w), -1, 0] for w in (270, 90))
    thrust = -found.bases.force[0, 0, 2] - WEIGHT + WEIGHT / 2
    stiffness = 2 * force / (ahead - back) + thrust / HEIGHT
    yield Row("stiffness of the star", "N/m", "37848.828", stiffness, Allowance(2e-7, "the head sinks as it tilts", share=True))
    yield Row("weightless taut formula", "N/m", "38688.156", stiffness, Allowance(0.022, "no sag in the formula", share=True))
    yield Row("the same with Ernst's modulus", "N/m", "37791.422", stiffness, Allowance(0.0016, "a parabola for the catenary", share=True))


@published("B1 stability", "WORKED OUT")
def test_stability_load() -> Iterator[Row]:
    """Extra dead load at the head of B1 at which the upright mast ceases to be stable: P + V + G/2 = k H.

    Source: worked out, 1 122 119.3 N by a numeric tilt; by the formula 1 122 114.8 N with the stiffness over a millimetre, which is 0.152
    N/m less than for a vanishing move and so 4.6 N less in P. The guys keep the unstressed lengths of the still-air setting. Allowed:
    half a unit of the last digit, and for the formula those 4.6 N; for the numeric tilt as much again as its rounding.
    """
    length = float(_solution().cables.unstressed_length[0, 0])

    def loaded(p: float) -> str:
        return whole(_mast("pinned") + load("30 m", up=f"{-p!r} N"), _rigging(f'length = "{length!r} m"'), STILL)

    ours = critical(loaded, 1.0e6, 1.3e6)
    yield Row("load at which the tilt stiffness vanishes (formula)", "N", "1122114.8", ours, Allowance(4.6, "stiffness over a millimetre"))
    yield Row("the same, numeric tilt", "N", "1122119.3", ours, Allowance(0.05, "finite tilt of the numeric value"))
    for p, code in ((0.999 * ours, stability.STABLE), (1.001 * ours, stability.UNSTABLE)):
        assert stability.classify(*unbuckled(loaded(p)))[0] == code
