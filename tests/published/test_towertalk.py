"""Handbook A8 to A10.  Engineering notes of the TowerTalk mailing list: 18 Jul 2000, 8 Feb 2016, 30 Jul 2008."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from guys.constants import INCH, POUND, STANDARD_GRAVITY
from guys.results import Solution
from tests.published.compare import Allowance, Row, published
from tests.published.masts import STILL, STRAIGHT, anchor, anchor_ring, guy, load, rope, solved, spar

LBF, FOOT = float(POUND) * STANDARD_GRAVITY, 12 * float(INCH)
THREE = {"a": 0.0, "b": 120.0, "c": 240.0}


@published("HB A8", "READ")
def test_side_load_and_steepness() -> Iterator[Row]:
    """Side load of 1,000 lb held by one guy at 45 and at 70 degrees above the ground.

    Source: TowerTalk, 18 Jul 2000, read.  A rigid weightless mast on a hinge, one straight guy.  Allowed: half a unit of the last digit.
    """
    for angle, printed in ((45, "1414"), (70, "2924")):
        radius = float(10 / np.tan(np.radians(angle)))
        found = solved(
            spar("10 m", "hinged", more='hinge_axis = "0 deg"') + load("10 m", east="1000 lbf"),
            anchor("stake", f"{-radius!r} m", "0 m"),
            guy("guy", "10 m", "stake", f'length = "{(100 + radius**2) ** 0.5 * (1 - 1e-5)!r} m"'),
            rope("1e9 N", mass="0 kg/m"),
            STRAIGHT,
            STILL,
        )
        yield Row(f"guy at {angle}°", "lbf", printed, found.cables.tension_anchor[0, 0] / LBF)


def _levels(angles: tuple[float, ...], radius: float, tension: float) -> Solution:
    """Weightless rigid mast, three straight guys to each level, at angles [deg] from the mast."""
    heights = [float(radius * FOOT / np.tan(np.radians(a))) for a in angles]
    guys = "".join(guy(f"{n} {k}", f"{h!r} m", n, f'tension = "{tension} lbf"') for k, h in enumerate(heights) for n in THREE)
    line = rope("1e7 N", mass="0 kg/m")
    return solved(spar(f"{max(heights)!r} m"), anchor_ring(THREE, f"{radius * FOOT!r} m"), guys, line, STRAIGHT, STILL)


@published("HB A9", "READ")
def test_thrust_of_three_levels() -> Iterator[Row]:
    """Three levels of three guys, 399 lb in each, 43.5, 52.0 and 68.7 degrees from the mast, anchors at 64 ft: thrust on the mast's foot.

    Source: TowerTalk, 8 Feb 2016, read.  Allowed: half a unit of the last digit.
    """
    found = _levels((43.5, 52.0, 68.7), 64.0, 399.0)
    yield Row("thrust on the foot", "lbf", "2040", -found.bases.force[0, 0, 2] / LBF)


@published("HB A10", "READ")
def test_thrust_of_two_levels() -> Iterator[Row]:
    """Two levels of three guys, 440 lb in each, 30 and 45 degrees from the mast: downward pull of one guy, and of each level.

    Source: TowerTalk, 30 Jul 2008, read. The printed pulls of a level are three times the rounded pull of a guy (3 x 381, 3 x 311), so
    they are held to three halves of a unit. Allowed: half a unit of the last digit otherwise.
    """
    found = _levels((30.0, 45.0), 40.0, 440.0)
    down = -found.cables.force_on_spar[0, :, 2] / LBF
    tripled = Allowance(1.0, "three times a rounded number")
    for angle, rows, one, level in ((30, slice(0, 3), "381", "1143"), (45, slice(3, 6), "311", "933")):
        yield Row(f"guy at {angle}° from the mast", "lbf", one, down[rows][0])
        yield Row(f"level at {angle}° from the mast", "lbf", level, down[rows].sum(), tripled)
    yield Row("both levels, thrust on the foot", "lbf", "2076", -found.bases.force[0, 0, 2] / LBF, tripled)
