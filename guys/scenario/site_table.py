"""The table [site] as it is written."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Discriminator, Tag

from guys.scenario import quantity as q
from guys.scenario.table import Model


class DegreesOrigin(Model):
    """The origin by latitude and longitude."""

    lat: q.Latitude
    """Latitude, degrees north, WGS 84; a bare number."""
    lon: q.Longitude
    """Longitude, degrees east, WGS 84; a bare number."""
    level: q.Length = 0.0
    """Level above the sea."""


class GridOrigin(Model):
    """The origin in the coordinate system."""

    east: q.Length
    """Easting."""
    north: q.Length
    """Northing."""
    level: q.Length = 0.0
    """Level above the sea."""


Origin = Annotated[
    Annotated[DegreesOrigin, Tag("<degrees>")] | Annotated[GridOrigin, Tag("<grid>")],
    Discriminator(lambda value: "<degrees>" if "lat" in value or "lon" in value else "<grid>"),
]


class SiteEntry(Model):
    """The site: coordinate system, boundary, obstacles, ground."""

    crs: q.Line | None = None
    """Projected coordinate system, such as "EPSG:32631"; left out: local metres."""
    origin: Origin | None = None
    """Where the origin of east, north and level lies, with crs; left out: at the first spar's foot, given by lat and lon."""
    boundary: q.Line | None = None
    """File with the polygons that anchors must lie inside (GeoJSON or DXF)."""
    obstacles: q.Line | None = None
    """File with obstacles (GeoJSON or DXF)."""
    ground: q.Line | None = None
    """File with spot heights (CSV: east, north, level) or a grid of heights (.asc)."""
    setback: q.LengthFromZero = 0.0
    """Every anchor at least this far inside the boundary."""
    declination: q.Angle | None = None
    """Magnetic bearing = grid bearing - declination."""
    drawing_unit: Literal["m", "mm", "cm", "ft", "in"] | None = None
    """Unit of a DXF file that states none."""
