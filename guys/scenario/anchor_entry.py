"""Anchors as they are written: `[[anchor]]`, and `[[layout]]`, whose anchors differ from those above."""

from __future__ import annotations

from typing import Annotated

from pydantic import Field

from guys.scenario import quantity as q
from guys.scenario.table import Model


class Place(Model):
    """Where an anchor stands or may stand: bearing and radius from the first spar's foot, east and north, or latitude and longitude."""

    bearing: q.Angle | None = None
    """Bearing from the first spar's foot."""
    radius: q.PositiveLength | None = None
    """Level distance from the first spar's foot."""
    east: q.Length | None = None
    """Distance east of the origin."""
    north: q.Length | None = None
    """Distance north of the origin."""
    lat: q.Latitude | None = None
    """Latitude, degrees north, WGS 84; a bare number, with lon in place of the others."""
    lon: q.Longitude | None = None
    """Longitude, degrees east, WGS 84; a bare number."""


class AnchorEntry(Place):
    """A point on the ground that cables run to."""

    name: q.Name
    """Name, unique among anchors."""
    level: q.Length | None = None
    """Height above the origin's level; left out: that of the ground there, or of the first spar's foot."""
    give: q.Spring | None = None
    """The anchor moves by the sum of its pulls divided by this."""
    holdfast: q.Name | None = None
    """A [holdfast.NAME] of the file: what holds it; left out: not judged."""


class LayoutEntry(Model):
    """An alternative: anchors that differ from the ones above; the rest stay as they are."""

    name: q.Name
    """Name, unique among layouts; "as drawn" is taken."""
    anchor: Annotated[list[AnchorEntry], Field(min_length=1)]
    """Anchors of the file by name: a new place, with its level, and what else differs."""
