"""The plate a spar stands on."""

from __future__ import annotations

from guys.scenario import quantity as q
from guys.scenario.table import Model


class Plate(Model):
    """A level, rectangular base plate on the ground, its middle under the foot."""

    length: q.PositiveLength
    """Side along the bearing `along`."""
    width: q.PositiveLength
    """Side square to it."""
    bearing: q.Stress | None = None
    """Allowable pressure of the ground under it; left out: not judged."""
    along: q.Angle | None = None
    """Bearing its length runs along; left out: the spar's `toward`."""
