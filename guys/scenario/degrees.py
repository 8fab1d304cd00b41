"""Places given by latitude and longitude, turned into metres from the site's origin; slips are named, never placed."""

from __future__ import annotations

import math

from guys.site import Grid
from guys.site.grid import GridError
from guys.site.read import FAR

WAYS = (("bearing", "radius"), ("east", "north"), ("lat", "lon"))
"""How a place is given."""
SAID = "bearing and radius, east and north, or lat and lon"
NEEDS_GRID = "lat and lon need [site] with crs and origin; give bearing and radius, or east and north"


def from_degrees(latitude: float, longitude: float, grid: Grid | None) -> tuple[float, float] | str:
    """Metres east and north of the origin, or what is wrong."""
    if grid is None:
        return NEEDS_GRID
    try:
        east, north = (float(x) for x in grid.from_degrees(latitude, longitude))
    except GridError as error:
        return str(error)
    if math.hypot(east, north) > FAR:
        swapped = "; are lat and lon swapped?" if abs(longitude) <= 90 and _near(longitude, latitude, grid) else ""
        return f"lies {math.hypot(east, north) / 1000:,.0f} km from the site's origin{swapped}"
    return east, north


def _near(latitude: float, longitude: float, grid: Grid) -> bool:
    try:
        return math.hypot(*(float(x) for x in grid.from_degrees(latitude, longitude))) <= FAR
    except GridError:
        return False
