"""Handbook A29.  A home wind tower's page on its tilt-up: the moment that starts the lift."""

from __future__ import annotations

from collections.abc import Iterator

from guys import parse_scenario
from guys.constants import INCH, POUND, STANDARD_GRAVITY
from guys.studies.raising import solve
from tests.published.compare import Row, published

FOOT_POUND = float(POUND) * STANDARD_GRAVITY * 12 * float(INCH)
TOWER = """
title = "Tilt-up tower"
[[spar]]
name = "tower"
foot = { east = "0 m", north = "0 m" }
base = "hinged"
hinge_axis = "0 deg"
rigid = true
[[spar.section]]
length = "36 ft"
mass = "6 lb/ft"
[[spar.fitting]]
name = "turbine"
at = "36 ft"
mass = "60 lb"
[raise]
spar = "tower"
toward = "90 deg"
lift_at = "30 ft"
gin_pole = { length = "15 ft" }
winch = { bearing = "270 deg", radius = "1000000 ft" }
angles = ["0 deg"]
"""


@published("HB A29", "READ")
def test_moment_that_starts_the_lift() -> Iterator[Row]:
    """Tube of 6 lb/ft and 36 ft (216 lb), 60 lb at its head: 3,888 + 2,160 ft-lb about the hinge; a gin pole of 15 ft square to it.

    Source: home wind-tower page, "Tower: overview and winch", read; the page's figure of the line's pull is cut off in the copy read,
    6,048/15 is ours.  The line is taken level, as the page does: a winch a million feet away.  Allowed: half a unit of the last digit.
    """
    found = solve(parse_scenario(TOWER))
    yield Row("moment about the hinge", "ft lb", "6048", -found.moment[0, 0] / FOOT_POUND)
    yield Row("line over a gin pole of 15 ft", "lbf", "403.2", found.hoist[0, 0] / FOOT_POUND * 12 * float(INCH), mark="EXACT")
