"""Two closed forms the trade works by: the wind that loads a guy most, and the guy angle that holds best.

Common practice, no single source; each follows from statics in two lines, given with the test.
"""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache

import numpy as np
from scipy.optimize import minimize_scalar

from guys import cable
from guys.results import Solution
from tests.published.compare import Allowance, Row, published
from tests.published.masts import KILO_PASCAL, STRAIGHT, anchor_ring, guy, rope, solved, spar

BEARINGS = {"n": 0.0, "se": 120.0, "sw": 240.0}
FORCE = 1000.0
BARELY = 1.0
"""[N] tension that makes the guys barely taut: the leeward guy then drops, and the other two carry what statics says, whatever it was."""
HEIGHT, EA = 10.0, 1e6
DEGREE = Allowance(1.0, "peaks are refined to a degree")


@cache
def _star() -> Solution:
    """Weightless rigid mast of 10 m, three weightless guys at 45 degrees, a kilonewton of wind on a sail at its head."""
    sail = '[[spar.fitting]]\nname = "sail"\nat = "10 m"\narea = "1 m2"\ndrag = 1.0\n'
    body = spar("10 m", section='mass = "0 kg/m"\nwidth = "100 mm"\ndrag = 0.0') + sail
    guys = "".join(guy(n, "10 m", n, f'tension = "{BARELY} N"') for n in BEARINGS)
    wind = KILO_PASCAL + 'directions = "every 10 deg"\n'
    return solved(body, anchor_ring(BEARINGS, "10 m"), guys, rope("1e8 N", mass="0 kg/m"), wind, STRAIGHT)


@published("1.155 rule", "EXACT")
def test_worst_wind_is_thirty_degrees_off_a_guy() -> Iterator[Row]:
    """Three weightless, barely taut guys on a rigid light mast: greatest level pull of a guy, and the wind that brings it.

    Source: common practice; with the leeward guy slack the two others share F: for wind at an angle b off guy 1, H1 = F sin(120 - b)/sin
    120, greatest at b = 30: F/cos 30 = 1.155 F. Allowed: half a unit of the last digit, 5e-5 for the lean (F/EA = 1e-5); a degree of
    bearing.
    """
    found = _star()
    little = Allowance(5e-5, "the lean, F/EA = 1e-5", share=True)
    for k, (name, bearing) in enumerate(BEARINGS.items()):
        worst = found.worst_anchors[k].horizontal
        off = abs((np.degrees(worst.peak_wind_from) - bearing + 180) % 360 - 180)
        yield Row(f"greatest level pull on anchor {name} over the wind's force", "-", "1.155", worst.peak / FORCE)
        yield Row(f"the same, 1/cos 30°, anchor {name}", "-", "1.154701", worst.peak / FORCE, little)
        yield Row(f"wind off guy {name} that brings it", "°", "30.0", off, DEGREE)
    straight_on = int(np.flatnonzero(np.abs(np.degrees(found.wind_from) - 0.0) < 1e-6)[0])
    yield Row("level pull with the wind on a guy", "-", "1.000000", found.anchors.horizontal[straight_on, 0] / FORCE, little)


def test_leeward_guy_is_slack_at_the_worst_wind() -> None:
    """At 30 degrees off the north guy only the two windward guys are taut."""
    found = _star()
    k = int(np.flatnonzero(np.abs(np.degrees(found.wind_from) - 30.0) < 1e-6)[0])
    assert found.cables.slack[k].tolist() == [False, False, True]


def _level_stiffness(angle: float) -> float:
    """Level stiffness [N/m] of one straight taut guy of given height at an angle [rad] from the ground."""
    chord = HEIGHT * np.array([[1 / np.tan(angle), 0.0, 1.0]])
    length = np.linalg.norm(chord, axis=1) / (1 + 1e-8)
    return float(cable.pull_straight(chord, length, np.array([EA])).stiffness[0, 0, 0])


@published("35.3° peak", "EXACT")
def test_best_guy_angle() -> Iterator[Row]:
    """Level stiffness of one guy of given height against its radius: greatest at tan^2 a = 1/2.

    Source: common practice; k = (EA/h) sin a cos^2 a, dk/da = 0 at tan^2 a = 1/2, 35.264 degrees, where k = 0.3849 EA/h. Allowed: half a
    unit of the last digit.
    """
    best = minimize_scalar(lambda a: -_level_stiffness(a), bounds=(0.2, 1.2), method="bounded", options={"xatol": 1e-7})
    yield Row("angle of the stiffest guy", "°", "35.3", np.degrees(best.x))
    yield Row("the same, atan √½", "°", "35.264", np.degrees(best.x))
    yield Row("its level stiffness over EA/h", "-", "0.38490", -best.fun * HEIGHT / EA)


def test_best_guy_angle_of_a_mast() -> None:
    """A whole mast leans least when its guys stand at that angle: 35.3 degrees against two degrees either way."""

    def sway(angle: float) -> float:
        radius = float(HEIGHT / np.tan(np.radians(angle)))
        sail = '[[spar.fitting]]\nname = "sail"\nat = "10 m"\narea = "0.01 m2"\ndrag = 1.0\n'
        body = spar("10 m", section='mass = "0 kg/m"\nwidth = "100 mm"\ndrag = 0.0') + sail
        guys = "".join(guy(n, "10 m", n, 'tension = "100 N"') for n in BEARINGS)
        wind = KILO_PASCAL + 'directions = ["0 deg"]\n'
        found = solved(body, anchor_ring(BEARINGS, f"{radius!r} m"), guys, rope(f"{EA} N", mass="0 kg/m"), wind, STRAIGHT)
        return abs(float(found.spars[0].displacement[-1, -1, 1]))

    below, at, above = (sway(a) for a in (33.26, 35.264, 37.26))
    assert at < below
    assert at < above
