"""Where things stand as drawn: spar axes, feet, points of cables.

    axis = (sin lean sin toward, sin lean cos toward, cos lean)

A point `at` lies on the axis at that distance from the foot.  A lug (`arm`) moves it level toward the other end of the cable, that is along
the level part of the line from axis point to axis point (or anchor).
"""

from __future__ import annotations

import math
from collections.abc import Mapping

from guys.scenario.anchor_entry import AnchorEntry
from guys.scenario.model import Anchor, AnchorPoint, HeelFoot, Scenario, Spar, SparPoint

Point = tuple[float, float, float]


def axis(spar: Spar) -> Point:
    """Unit vector from the foot toward the head."""
    level = math.sin(spar.lean)
    return level * math.sin(spar.toward), level * math.cos(spar.toward), math.cos(spar.lean)


def along(start: Point, direction: Point, distance: float) -> Point:
    """The point at a distance from `start`."""
    return (start[0] + distance * direction[0], start[1] + distance * direction[1], start[2] + distance * direction[2])


def foot(spars: Mapping[str, Spar], name: str) -> Point:
    """The foot of a spar, through the spars that carry it.  The heels must not form a loop."""
    spar = spars[name]
    if isinstance(spar.foot, HeelFoot):
        return axis_point(spars, spar.foot.spar, spar.foot.at)
    return spar.foot.east, spar.foot.north, spar.foot.level


def axis_point(spars: Mapping[str, Spar], name: str, at: float) -> Point:
    """The point of a spar's axis at a distance from its foot."""
    return along(foot(spars, name), axis(spars[name]), at)


def off_axis(spars: Mapping[str, Spar], name: str, point: Point) -> float:
    """Distance of a point from the line of a spar's axis."""
    start, direction = foot(spars, name), axis(spars[name])
    distance = sum((point[i] - start[i]) * direction[i] for i in range(3))
    return math.dist(point, along(start, direction, distance))


def anchor_place(entry: AnchorEntry, foot: Point) -> Point:
    """An anchor's place; bearing and radius count from `foot`, that of the first spar, and so does a level left out."""
    level = foot[2] if entry.level is None else entry.level
    if entry.bearing is not None and entry.radius is not None:
        return foot[0] + entry.radius * math.sin(entry.bearing), foot[1] + entry.radius * math.cos(entry.bearing), level
    return entry.east or 0.0, entry.north or 0.0, level


def cable_ends(
    spars: Mapping[str, Spar], anchors: Mapping[str, Anchor], start: SparPoint, end: SparPoint | AnchorPoint
) -> tuple[Point, Point]:
    """Both ends of a cable with their lugs: first the `from` end, then the `to` end."""
    top = axis_point(spars, start.spar, start.at)
    if isinstance(end, AnchorPoint):
        anchor = anchors[end.anchor]
        bottom: Point = (anchor.east, anchor.north, anchor.level)
        return _with_arm(top, bottom, start.arm), bottom
    bottom = axis_point(spars, end.spar, end.at)
    return _with_arm(top, bottom, start.arm), _with_arm(bottom, top, end.arm)


def scenario_cable_ends(scenario: Scenario) -> tuple[tuple[Point, Point], ...]:
    """`cable_ends` of every cable of a scenario, in its order."""
    spars = {spar.name: spar for spar in scenario.spar}
    anchors = {anchor.name: anchor for anchor in scenario.anchor}
    return tuple(cable_ends(spars, anchors, cable.from_, cable.to) for cable in scenario.cable)


def _with_arm(here: Point, there: Point, arm: float) -> Point:
    east, north = there[0] - here[0], there[1] - here[1]
    level = math.hypot(east, north)
    if arm == 0.0 or level == 0.0:
        return here
    return here[0] + arm * east / level, here[1] + arm * north / level, here[2]
