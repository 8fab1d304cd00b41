"""Levels from spot heights and from grids of heights, and every way such a file can be wrong."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.interpolate import LinearNDInterpolator

from guys.site import ground
from guys.site.ground import GroundError

ROUNDING = 1e-9
"""[m] levels are sums of a few products."""
SQUARE = "east,north,level\n-10,-10,0\n10,-10,2\n10,10,4\n-10,10,2\n0,0,2\n"


def surface(text: str) -> ground.Ground:
    heights = ground.spot_heights(text)
    return ground.joined(heights.points, heights.triangles)


@settings(max_examples=50, deadline=None)
@given(st.floats(-9.9, 9.9), st.floats(-9.9, 9.9))
def test_a_plane_is_met_everywhere(east: float, north: float) -> None:
    assert surface(SQUARE).level(east, north) == pytest.approx(0.1 * east + 0.1 * north + 2, abs=ROUNDING)


def test_corners_and_edges_belong_to_the_ground() -> None:
    levels = surface(SQUARE).level(np.array([-10.0, 10.0, 0.0]), np.array([-10.0, 0.0, 10.0]))
    assert levels == pytest.approx([0.0, 3.0, 3.0], abs=1e-6)


def test_outside_there_is_no_level() -> None:
    assert np.isnan(surface(SQUARE).level(10.01, 0.0))


def test_many_heights_at_many_places(rng: np.random.Generator) -> None:
    """3,000 heights of two planes that meet at east = 0, against scipy's interpolation on the same triangles; NaN where there is none."""
    points = rng.uniform(-100.0, 100.0, (3000, 3))
    points[:, 2] = np.where(points[:, 0] < 0, 0.1, 0.4) * points[:, 0] + 5.0
    places = rng.uniform(-120.0, 120.0, (400, 2))
    places[7] = np.nan
    expected = LinearNDInterpolator(points[:, :2], points[:, 2])(places)
    levels = ground.joined(points).level(places[:, 0].reshape(20, 20), places[:, 1].reshape(20, 20))
    assert levels.reshape(-1) == pytest.approx(expected, abs=ROUNDING, nan_ok=True)
    assert 0 < np.isnan(levels).sum() < 200


def test_units_and_order_of_columns_come_from_the_header() -> None:
    feet = "id,level [ft],northing (ft),easting_ft\na,10,100,0\nb,10,0,0\nc,20,0,100\n"
    heights = ground.spot_heights(feet)
    assert heights.points[0] == pytest.approx([0.0, 30.48, 3.048])
    assert not heights.plain
    assert ground.spot_heights(SQUARE).plain


@pytest.mark.parametrize(
    ("text", "told"),
    [
        ("", "is empty"),
        ("a,b,c\n1,2,3\n", "no column for east and north and level"),
        ("east,easting,north,level\n", "two columns for east"),
        ("east [furlong],north,level\n", "furlong is not a unit"),
        ("east,north,level\n0,0,1\n1,0\n2,x,3\n", "line 3: the point has no level"),
        ("east,north,level\n0,0,1\n1,0\n2,x,3\n", 'line 4: "x" is not a number for the north'),
        ("east,north,level\n0,0,1\n0,0,2\n", "line 3: the same place as line 2"),
        ("east,north,level\n0,0,1\n1,1,nan\n", 'line 3: "nan" is not a number for the level'),
        ('east,north,level\n"' + 200_000 * "a" + '",1,1\n', "is not CSV: field larger"),
        ("east;north;level\n0,5;1,5;0,2\n", "parted by commas"),
    ],
)
def test_faulty_lines_are_named(text: str, told: str) -> None:
    with pytest.raises(GroundError, match=told.replace("[", r"\[").replace("(", r"\(")):
        ground.spot_heights(text)


@pytest.mark.parametrize(("rows", "told"), [("0,0,1\n1,1,2\n", "holds 2"), ("0,0,1\n1,1,2\n2,2,5\n", "on one line")])
def test_too_few_points_make_no_ground(rows: str, told: str) -> None:
    heights = ground.spot_heights("east,north,level\n" + rows)
    with pytest.raises(GroundError, match=told):
        ground.joined(heights.points)


GRID = "ncols 3\nnrows 2\nxllcorner -15\nyllcorner -10\ncellsize 10\nNODATA_value -9999\n1 2 3\n4 5 6\n"


def test_a_grid_of_heights_runs_from_north_to_south() -> None:
    heights = ground.grid_of_heights(GRID)
    made = ground.joined(heights.points, heights.triangles)
    assert made.level([-10.0, 10.0, -10.0, 0.0], [5.0, 5.0, -5.0, 0.0]) == pytest.approx([1.0, 3.0, 4.0, 3.5])
    centred = ground.grid_of_heights(GRID.replace("xllcorner -15", "xllcenter -10").replace("yllcorner -10", "yllcenter -5"))
    assert centred.points == pytest.approx(heights.points)


def test_gaps_of_a_grid_are_not_bridged() -> None:
    heights = ground.grid_of_heights(GRID.replace("\n1 2 3", "\n1 2 -9999"))
    made = ground.joined(heights.points, heights.triangles)
    assert np.isnan(made.level(5.0, 0.0))
    assert made.level(-5.0, 0.0) == pytest.approx(3.0)


@pytest.mark.parametrize(
    ("change", "told"),
    [
        (("ncols 3\n", ""), "lacks ncols"),
        (("xllcorner -15\n", ""), "xllcorner or xllcenter"),
        (("6\n", "6 7\n"), "holds 7 heights"),
        (("4 5 6", "4 five 6"), "not a number"),
        (("cellsize 10", "cellsize ten"), "not a number"),
        (("cellsize 10", "cellsize 0"), "says cellsize 0"),
        (("ncols 3", "ncols nan"), "says ncols nan"),
        (("ncols 3", "ncols 2.5"), "says ncols 2.5"),
        (("nrows 2", "nrows inf"), "says nrows inf"),
        (("xllcorner -15", "xllcorner nan"), "says xllcorner nan"),
        (("1 2 3\n4 5 6", "1 -9999 3\n4 5 6"), "no four neighbouring"),
    ],
)
def test_faulty_grids_are_refused(change: tuple[str, str], told: str) -> None:
    with pytest.raises(GroundError, match=told):
        ground.grid_of_heights(GRID.replace(*change))
