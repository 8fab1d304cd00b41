"""The table `[raise]`: one spar tilted up about its hinged foot by a line over a gin pole.

File and meaning agree, so the same models serve both.  Places given by bearing and radius count from the foot of the spar raised; angles of
the spar are above the horizontal, 0 while it lies.  Beyond the format's keys: `rope`, `friction`, `holding`, `wind_speed`, the pole's
`backstay`, and capacities; what has none is not judged.
"""

from __future__ import annotations

import math
from itertools import pairwise
from typing import Annotated, Literal

from pydantic import AfterValidator, Field, Tag

from guys.scenario import quantity as q
from guys.scenario.table import GroundFoot, Model

UPRIGHT = math.pi / 2


def _short_step(step: float) -> float:
    if step > UPRIGHT:
        raise q.fault("a step of more than 90 deg passes over the whole raising")
    if step < math.radians(0.25):
        raise q.fault("more than 360 stages are too many")
    return step


def _ascending(angles: list[float]) -> list[float]:
    if any(later <= earlier for earlier, later in pairwise(angles)):
        raise q.fault("the angles do not rise from one to the next")
    if angles[0] < 0.0 or angles[-1] > math.pi:
        raise q.fault("angles of the spar above the horizontal lie between 0 and 180 deg")
    return angles


_Step = Annotated[q.PositiveAngle, *q.every("a set of angles", "5 deg"), AfterValidator(_short_step)]
_Listed = Annotated[list[q.Angle], Field(min_length=1, max_length=361), AfterValidator(_ascending)]
Angles = Annotated[Annotated[_Listed, Tag("<list>")] | Annotated[_Step, Tag("<step>")], q.LIST_OR_STEP]


class Place(Model):
    """A place on the ground, from the foot of the spar raised."""

    bearing: q.Angle
    """Bearing from the foot of the spar raised."""
    radius: q.PositiveLength
    """Level distance from that foot."""
    level: q.Length | None = None
    """Height above the origin's level; left out: that of the foot."""


class Winch(Place):
    """Where the hoist line is pulled from: the winch, or the block on the ground that leads the line to it."""

    capacity: q.PositiveForce | None = None
    """Greatest pull of the line on the winch that it may take; left out: not judged."""


class Backstay(Place):
    """What holds the head of a standing gin pole back, from the spar."""

    capacity: q.PositiveForce | None = None
    """Greatest tension it may take; left out: not judged."""


class Holding(Place):
    """The line that holds the spar back once it goes over by itself."""

    at: q.LengthFromZero | None = None
    """Where it holds the spar, along it from its foot; left out: `lift_at`."""
    rope: q.Name | None = None
    """The rope it is made of; left out: not judged."""


class GinPole(Model):
    """What gives the hoist line its lever while the spar lies low."""

    kind: Literal["turning", "standing"] = "turning"
    """turning: fixed square to the spar at its foot, turns with it; standing: upright at a foot of its own, the line runs over its head."""
    length: q.PositiveLength
    """Length."""
    mass: q.Mass = 0.0
    """Mass, evenly along it."""
    foot: GroundFoot | None = None
    """Foot of a standing one."""
    backstay: Backstay | None = None
    """Stay of the head of a standing one, away from the spar; left out: what it would take is told."""
    capacity: q.PositiveForce | None = None
    """Greatest thrust it may take; left out: not judged."""


class Raising(Model):
    """One spar tilted up about its hinged foot."""

    spar: q.Name
    """The spar raised; its base is hinged or pinned."""
    toward: q.Angle
    """Bearing its head points to while it lies."""
    lift_at: q.PositiveLength
    """Where the lifting line holds the spar, along it from its foot."""
    gin_pole: GinPole
    """The gin pole."""
    winch: Winch
    """The winch."""
    angles: Angles = math.radians(5.0)
    """Angles of the spar above the horizontal: "every 5 deg" (the default) from lying to where it is drawn, or a rising list."""
    side_guys: Annotated[list[q.Name], Field(max_length=1000)] = []
    """Cables already made fast while the spar is raised."""
    rope: q.Name | None = None
    """The rope of hoist and lifting line; left out: neither stretches nor is judged."""
    friction: Annotated[float, Field(strict=True, ge=0.0, lt=1.0, allow_inf_nan=False)] = 0.0
    """Share of its tension that the line loses at the sheave it runs over: at the head of a standing gin pole, at the lead block of a
    turning one."""
    holding: Holding | None = None
    """The holding line; left out: one is assumed, and said to be."""
    wind_speed: q.Speed | None = None
    """Reference speed while raising, in place of wind.speed; the rest as in [wind]."""
    lift_capacity: q.PositiveForce | None = None
    """Greatest pull the lift point may take; left out: not judged."""
    hinge_capacity: q.PositiveForce | None = None
    """Greatest force on the hinge; left out: not judged."""

    @property
    def ropes(self) -> tuple[str, ...]:
        """The ropes its lines are made of."""
        lines = (self.rope, self.holding.rope if self.holding is not None else None)
        return tuple(name for name in lines if name is not None)

    def stages(self, last: float) -> tuple[float, ...]:
        """The angles [rad]; `last`, where the spar is drawn, ends those of a step."""
        if isinstance(self.angles, list):
            return tuple(self.angles)
        count = math.ceil(last / self.angles * (1.0 - 1e-9))
        return (*(step * self.angles for step in range(count)), last)
