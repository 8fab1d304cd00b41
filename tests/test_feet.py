"""Feet of spars by latitude and longitude, bearing and radius: against the ellipsoid itself, and every slip named."""

from __future__ import annotations

import copy
import math
from pathlib import Path
from typing import Any

import pytest
import raisings
from pyproj import Geod
from scipy.integrate import quad
from toml_text import MAST, changed, dumps, dumps_tables

from guys.errors import ScenarioError
from guys.scenario import GroundFoot, Scenario, parse_scenario, read_scenario

MILLIMETRE = 1e-3
CRS = "EPSG:32631"
RADIUS, FLATTENING = 6_378_137.0, 1 / 298.257223563
"""WGS 84, by definition."""
CENTRAL, ON_IT, FALSE_EAST = 3.0, 0.9996, 500_000.0
"""Zone 31 of the universal transverse Mercator grid, by definition: meridian [deg E], scale on it, false easting [m]."""
SPOTS = "east,north,level\n-40,-40,-3\n40,-40,-3\n40,40,3\n-40,40,3\n"


def arc(latitude: float) -> float:
    """[m] along the meridian from the equator: the ellipsoid's radius of curvature integrated."""
    e2 = FLATTENING * (2 - FLATTENING)
    return float(quad(lambda a: RADIUS * (1 - e2) / (1 - e2 * math.sin(a) ** 2) ** 1.5, 0.0, math.radians(latitude), epsrel=1e-13)[0])


def read(folder: Path, foot: dict[str, Any], site: dict[str, Any] | None = None, **change: Any) -> Scenario:
    document = copy.deepcopy(MAST) | ({} if site is None else {"site": site}) | change
    document["spar"][0]["foot"] = foot
    (folder / "g.csv").write_text(SPOTS, encoding="utf-8")
    (folder / "mast.toml").write_text(dumps(document), encoding="utf-8")
    return read_scenario(folder / "mast.toml")


def foot_of(scenario: Scenario) -> tuple[float, float, float]:
    foot = scenario.spar[0].foot
    assert isinstance(foot, GroundFoot)
    assert (foot.lat, foot.lon, foot.bearing, foot.radius) == (None,) * 4
    return foot.east, foot.north, foot.level


def test_a_foot_on_the_central_meridian_lies_at_the_meridian_arc(tmp_path: Path) -> None:
    """Origin in the grid at 45 N by the scaled arc; a foot 100 m up the meridian is 100 m north of it in true metres."""
    origin = {"east": f"{FALSE_EAST} m", "north": f"{ON_IT * arc(45.0)!r} m"}
    north = 45.0009
    at = foot_of(read(tmp_path, {"lat": north, "lon": CENTRAL}, {"crs": CRS, "origin": origin}))
    assert at == pytest.approx((0.0, arc(north) - arc(45.0), 0.0), abs=MILLIMETRE)


def test_without_an_origin_the_first_foot_is_it(tmp_path: Path) -> None:
    """Anchors a geodesic distance away, off the meridian and at another azimuth than grid north, are that far from the foot."""
    lat, lon, away = 51.2, 4.4, (12.0, 15.5, 9.25)
    anchors = []
    for anchor, azimuth, distance in zip(MAST["anchor"], (0.0, 120.0, 240.0), away, strict=False):
        there = Geod(ellps="WGS84").fwd(lon, lat, azimuth, distance)
        anchors.append({"name": anchor["name"], "lat": there[1], "lon": there[0]})
    scenario = read(tmp_path, {"lat": lat, "lon": lon}, {"crs": CRS}, anchor=anchors)
    assert foot_of(scenario) == (0.0, 0.0, 0.0)
    assert scenario.site is not None
    assert scenario.site.grid is not None
    assert (scenario.site.grid.latitude, scenario.site.grid.longitude) == pytest.approx((lat, lon), abs=1e-9)
    assert [math.hypot(a.east, a.north) for a in scenario.anchor] == pytest.approx(away, abs=MILLIMETRE)


def test_bearing_and_radius_count_from_the_origin(tmp_path: Path) -> None:
    scenario = read(tmp_path, {"bearing": "30 deg", "radius": "10 m", "level": "1 m"})
    assert foot_of(scenario) == pytest.approx((5.0, 10.0 * math.sqrt(0.75), 1.0))
    plain = read(tmp_path, {"east": "0 m", "north": "0 m"})
    moved = [(a.east - b.east, a.north - b.north) for a, b in zip(scenario.anchor, plain.anchor, strict=True)]
    assert moved == [pytest.approx((5.0, 10.0 * math.sqrt(0.75)))] * len(moved)


def test_a_level_left_out_is_that_of_the_ground(tmp_path: Path) -> None:
    """The spots lie on one plane, 3 m up over 40 m north."""
    ground = {"ground": "g.csv"}
    assert foot_of(read(tmp_path, {"east": "5 m", "north": "20 m"}, ground))[2] == pytest.approx(1.5)
    assert foot_of(read(tmp_path, {"east": "5 m", "north": "20 m", "level": "0 m"}, ground))[2] == 0.0


def test_the_foot_of_a_gin_pole_counts_from_the_spar_raised() -> None:
    spar = (("spar", 0, "foot"), {"east": "3 m", "north": "4 m"})
    pole = {**raisings.STANDING, "foot": {"bearing": "270 deg", "radius": "1 m"}}
    scenario = parse_scenario(dumps_tables(changed(raisings.MAST, spar, (("raise", "gin_pole"), pole))))
    assert scenario.raising is not None
    foot = scenario.raising.gin_pole.foot
    assert foot is not None
    assert (foot.east, foot.north, foot.level) == pytest.approx((2.0, 4.0, 0.0))


@pytest.mark.parametrize(
    ("foot", "site", "key", "told"),
    [
        ({"lat": 51.0, "lon": 3.0}, None, "spar[0].foot", "lat and lon need [site]"),
        ({"lat": 51.0, "lon": 3.0}, {"ground": "g.csv"}, "spar[0].foot", "lat and lon need [site]"),
        ({"lat": 3.0, "lon": 51.0}, {"crs": CRS}, "spar[0].foot", "are lat and lon swapped?"),
        ({"lat": 51.0, "lon": 13.0}, {"crs": CRS}, "spar[0].foot", "far outside the area EPSG:32631 is for"),
        ({"lat": 3.0, "lon": 51.0}, {"crs": CRS, "origin": {"lat": 51.0, "lon": 3.0}}, "spar[0].foot", "are lat and lon swapped?"),
        ({"lat": 51.2, "lon": 3.0}, {"crs": CRS, "origin": {"lat": 51.0, "lon": 3.0}}, "spar[0].foot", "km from the site's origin"),
        ({"lat": 5649824.0, "lon": 3.0}, {"crs": CRS}, "spar[0].foot.lat", "90"),
        ({"lat": 51.0}, {"crs": CRS, "origin": {"lat": 51.0, "lon": 3.0}}, "spar[0].foot.lon", "missing beside lat"),
        ({"east": "1 m"}, None, "spar[0].foot.north", "missing beside east"),
        ({"level": "1 m"}, None, "spar[0].foot", "has no place"),
        ({"east": "1 m", "north": "2 m", "radius": "3 m"}, None, "spar[0].foot", "has radius and east and north"),
        ({"east": "0 m", "north": "0 m"}, {"crs": CRS}, "site.origin", "or the first spar's foot by lat and lon"),
        ({"east": "55 m", "north": "0 m"}, {"ground": "g.csv"}, "spar[0].foot", "outside the surveyed ground"),
    ],
)  # fmt: skip
def test_slips_are_named(tmp_path: Path, foot: dict[str, Any], site: dict[str, Any] | None, key: str, told: str) -> None:
    with pytest.raises(ScenarioError) as caught:
        read(tmp_path, foot, site)
    found = {fault.key: fault.message for fault in caught.value.faults}
    assert key in found, found
    assert told in found[key]
    assert len([k for k in found if k.startswith(("spar", "site"))]) == 1
