"""Where things stand while a spar is tilted up: the plane of raising, and the angle at which the line loses its lever.

In the plane: distance d from the hinge along the bearing the lying head points to, height h above the hinge; across it the offset.
The spar at the angle a has the axis (cos a, sin a), a gin pole square to it the axis (-sin a, cos a).  A line has no lever about the
hinge where it runs through it:

    turning   head, winch and hinge in line: pole at 90 deg + a, winch at the angle w of (d, h):  a = w - 90 deg
    standing  lift point, head and hinge in line: spar at the angle of the head's own (d, h)
"""

from __future__ import annotations

import math

from guys.scenario.drawn import Point, axis
from guys.scenario.model import GroundFoot, Spar
from guys.scenario.raising import Place, Raising

SQUARE = 2e-3
"""Cosine of an angle that counts as square: within 0.1 degrees."""
BESIDE = 0.02
"""Offset, of the spar's length, below which a thing on the ground is under the spar."""


def degrees(angle: float) -> str:
    """An angle or bearing in words."""
    return f"{math.degrees(angle) % 360.0:.4g} deg"


def foot_of(spar: Spar) -> Point:
    """The foot of a spar on the ground."""
    assert isinstance(spar.foot, GroundFoot)
    return spar.foot.east, spar.foot.north, spar.foot.level


def lying(raising: Raising) -> Point:
    """Unit vector the lying head points to."""
    return math.sin(raising.toward), math.cos(raising.toward), 0.0


def drawn_axis(spar: Spar) -> Point:
    """Unit vector from foot to head as drawn."""
    return axis(spar)


def last_angle(spar: Spar, raising: Raising) -> float:
    """Angle above the horizontal at which the spar stands as drawn [rad]."""
    d, t = lying(raising), axis(spar)
    return math.atan2(t[2], t[0] * d[0] + t[1] * d[1])


def place(spar: Spar, given: Place) -> Point:
    """A place given by bearing and radius from the foot."""
    foot = foot_of(spar)
    level = foot[2] if given.level is None else given.level
    return foot[0] + given.radius * math.sin(given.bearing), foot[1] + given.radius * math.cos(given.bearing), level


def in_plane(point: Point, spar: Spar, raising: Raising) -> Point:
    """A point as distance along, height above and offset across the plane of raising, from the hinge."""
    foot, d = foot_of(spar), lying(raising)
    east, north = point[0] - foot[0], point[1] - foot[1]
    return east * d[0] + north * d[1], point[2] - foot[2], east * d[1] - north * d[0]


def lever_lost(spar: Spar, raising: Raising) -> float:
    """Angle of the spar from which the line that lifts has no lever [rad]."""
    if raising.gin_pole.foot is None:
        d, h, _ = in_plane(place(spar, raising.winch), spar, raising)
        return math.atan2(h, d) % math.tau - math.pi / 2
    foot = raising.gin_pole.foot
    d, h, _ = in_plane((foot.east, foot.north, foot.level + raising.gin_pole.length), spar, raising)
    return math.atan2(h, d) % math.tau
