"""Coordinates on the ellipsoid and in the grid: Geocentric Datum of Australia Technical Manual, worked example of two stations."""

from __future__ import annotations

import math
from collections.abc import Iterator

from pyproj import Geod

from guys.site.grid import Grid, grid_at_degrees
from tests.published.compare import Allowance, Row, published

SECOND = 1 / 3600
STATIONS = {
    "Flinders Peak": ((-37 - 57 / 60 - 3.72030 * SECOND, 144 + 25 / 60 + 29.52440 * SECOND), "273741.297", "5796489.777"),
    "Buninyon": ((-37 - 39 / 60 - 10.15610 * SECOND, 143 + 55 / 60 + 35.38390 * SECOND), "228854.052", "5828259.038"),
}
"""Latitude and longitude [deg]; printed easting and northing [m]."""
ANGLE_DIGIT = Allowance(0.005 / 3600, "printed to 0.01 seconds")
POSITION_DIGIT = Allowance(0.0005, "printed positions are rounded to 0.00001 seconds, 0.3 mm")


def placed(name: str) -> Grid:
    (latitude, longitude), _, _ = STATIONS[name]
    return grid_at_degrees("EPSG:28355", latitude, longitude, 0.0)


@published("geodesy", "MEMORY")
def test_easting_northing_scale_and_convergence() -> Iterator[Row]:
    """Two stations in zone 55 of the Map Grid of Australia 1994.

    Source: Intergovernmental Committee on Surveying and Mapping, GDA Technical Manual, Redfearn's formulae, test data; from memory.
    """
    for name, (_, east, north) in STATIONS.items():
        grid = placed(name)
        yield Row(f"easting of {name}", "m", east, grid.east, POSITION_DIGIT)
        yield Row(f"northing of {name}", "m", north, grid.north, POSITION_DIGIT)
    first = placed("Flinders Peak")
    yield Row("point scale factor at Flinders Peak", "-", "1.00023056", first.point_scale)
    # The manual counts grid convergence from grid north to true north.
    convergence = -(1 + 35 / 60 + 3.65 * SECOND)
    yield Row("grid convergence at Flinders Peak", "degrees", f"{abs(convergence):.6f}", abs(math.degrees(first.convergence)), ANGLE_DIGIT)


@published("geodesy", "MEMORY")
def test_geodesic_between_the_stations() -> Iterator[Row]:
    """Distance along the ellipsoid, Flinders Peak to Buninyon, GRS 80.

    Source: the same, Vincenty's formulae, test data; from memory.  It checks the library that `guys setout` takes its geodesics from.
    """
    (a, b), (c, d) = STATIONS["Flinders Peak"][0], STATIONS["Buninyon"][0]
    _, _, away = Geod(ellps="GRS80").inv(b, a, d, c)
    yield Row("geodesic distance", "m", "54972.271", away, POSITION_DIGIT)
