"""The coordinate grid of a site: there and back, scale and convergence a second way, and what is refused."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from guys.site.grid import Grid, GridError, grid_at, grid_at_degrees

MILLIMETRE = 1e-3
SYSTEMS = {
    "EPSG:32631": (51.0, 3.2), "EPSG:2225": (40.1, -121.7), "EPSG:27700": (52.6, 1.6), "EPSG:2154": (46.4, 3.3), "EPSG:3395": (0.5, 8.0),
    "EPSG:2277": (30.3, -97.7), "EPSG:3034": (50.0, 8.0),
}  # fmt: skip
"""Metres; US survey feet; a datum of its own; Lambert; a Mercator; feet again; a scale far from one."""


@pytest.mark.parametrize("crs", SYSTEMS)
@settings(max_examples=15, deadline=None)
@given(east=st.floats(-3000, 3000), north=st.floats(-3000, 3000))
def test_there_and_back_within_a_tenth_of_a_millimetre(crs: str, east: float, north: float) -> None:
    grid = grid_at_degrees(crs, *SYSTEMS[crs], 120.0)
    for back in (grid.from_grid(*grid.to_grid(east, north)), grid.from_degrees(*grid.to_degrees(east, north))):
        assert np.hypot(back[0] - east, back[1] - north) < 0.1 * MILLIMETRE


@pytest.mark.parametrize("crs", ["EPSG:32631", "EPSG:2225", "EPSG:3034"])
def test_metres_are_those_of_the_ground(crs: str) -> None:
    """100 m east of the origin is 100 m along the ellipsoid raised to the level: the geodesic, another path than the projection."""
    from pyproj import Geod

    level = 500.0
    grid = grid_at_degrees(crs, *SYSTEMS[crs], level)
    latitude, longitude = grid.to_degrees(np.array([0.0, 100.0, 0.0]), np.array([0.0, 0.0, 100.0]))
    geodesic = Geod(ellps="WGS84")
    raised = 1 + level / 6_371_000.0
    for k in (1, 2):
        _, _, away = geodesic.inv(longitude[0], latitude[0], longitude[k], latitude[k])
        assert away * raised == pytest.approx(100.0, abs=MILLIMETRE)


def test_convergence_is_the_bearing_of_grid_north() -> None:
    from pyproj import Geod

    grid = grid_at_degrees("EPSG:32631", 51.0, 4.5, 0.0)
    latitude, longitude = grid.to_degrees(np.array([0.0, 0.0]), np.array([0.0, 10.0]))
    azimuth, _, _ = Geod(ellps="WGS84").inv(longitude[0], latitude[0], longitude[1], latitude[1])
    assert math.degrees(grid.convergence) == pytest.approx(azimuth, abs=1e-4)
    assert azimuth > 1.0


def test_origin_in_the_grid_and_in_degrees_are_one() -> None:
    one = grid_at_degrees("EPSG:2225", 40.1, -121.7, 30.0)
    two = grid_at("EPSG:2225", one.east, one.north, 30.0)
    assert (two.latitude, two.longitude) == pytest.approx((one.latitude, one.longitude), abs=1e-9)
    assert one.unit == pytest.approx(1200 / 3937)
    assert one.scale == pytest.approx(one.combined * 3937 / 1200)


@pytest.mark.parametrize(
    ("crs", "told"), [("EPSG:4326", "not a projected system"), ("Nowhere", "not a coordinate system"), ("EPSG:5070", "bearings on it")]
)
def test_systems_that_make_no_plan_are_refused(crs: str, told: str) -> None:
    with pytest.raises(GridError, match=told):
        grid_at_degrees(crs, 40.0, -96.5, 0.0)


@pytest.mark.parametrize(
    ("crs", "place", "told"),
    [
        ("EPSG:2053", (-29.0, 29.0), "counts to the west and south"),  # South Africa's Lo29
        ("EPSG:5513", (50.0, 15.0), "counts to the south and west"),  # Krovak
        ("EPSG:3857", (51.0, 3.2), "stretches its north axis"),  # a sphere's projection of the ellipsoid: axes 0.27 % apart
    ],
)
def test_systems_that_turn_or_stretch_the_plan_are_refused(crs: str, place: tuple[float, float], told: str) -> None:
    with pytest.raises(GridError, match=told):
        grid_at_degrees(crs, *place, 0.0)


def test_a_compound_system_is_taken_in_plan() -> None:
    assert isinstance(grid_at_degrees("EPSG:7405", 52.6, 1.6, 0.0), Grid)
