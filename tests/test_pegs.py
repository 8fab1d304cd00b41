"""Setting out: distances by hand, norths, closure; files read back; pegs as surveyed."""

from __future__ import annotations

import json
import math
from collections.abc import Callable
from io import StringIO
from pathlib import Path
from typing import Any
from xml.etree import ElementTree

import numpy as np
import pytest
import scenarios_made as made
from ezdxf.filemanagement import readfile

from guys import cli
from guys.doors.setout import report
from guys.exchange import pegs as exchange
from guys.scenario import Scenario
from guys.site import Site
from guys.site.grid import grid_at_degrees
from guys.site.surveyed import SurveyError, read_pegs
from guys.studies.pegs import Pegs, as_built, pegs

MILLIMETRE = 1e-3
SYSTEMS = {"EPSG:32631": (51.0, 3.2), "EPSG:27700": (52.6, 1.6), "EPSG:2225": (40.1, -121.7)}
"""Metres; a datum of its own; US survey feet."""


def ring(sides: int, radius: float = 20.0) -> Scenario:
    document = made.mast(sides=sides)
    for k, anchor in enumerate(document["anchor"]):
        anchor |= {"bearing": 360.0 * k / sides, "radius": radius}
    return made.scenario(document)


def on_site(scenario: Scenario, crs: str = "EPSG:32631", **site: Any) -> Scenario:
    grid = grid_at_degrees(crs, *SYSTEMS[crs], 150.0)
    return scenario.model_copy(update={"site": Site(grid=grid, **site)})


@pytest.mark.parametrize(("sides", "ratio"), [(3, math.sqrt(3)), (4, math.sqrt(2))])
def test_check_distances_of_regular_rings(sides: int, ratio: float) -> None:
    """1.732 R and 1.414 R: common practice, and plane geometry."""
    p = pegs(ring(sides))
    assert len(p.ring) == sides
    assert [p.between(a, b)[0] for a, b in p.ring] == pytest.approx([20.0 * ratio] * sides)


def test_bearing_level_and_slope_distance_by_hand() -> None:
    document = made.mast()
    document["anchor"][0] = {"name": "A", "east": 3.0, "north": -4.0, "level": -12.0}
    p = pegs(made.scenario(document))
    assert (p.level_distance[0], p.slope_distance[0]) == pytest.approx((5.0, 13.0))
    assert math.degrees(p.bearing[0]) == pytest.approx(180 - math.degrees(math.atan2(3, 4)))


def test_closure_is_of_the_printed_figures() -> None:
    """Four sides, each off by at most half of 10 mm and half of 0.01° over 28 m; and never all right at once here."""
    miss, length = pegs(ring(4)).closure
    assert 0 < miss < 4 * (0.005 + 28.3 * math.radians(0.005))
    assert length == pytest.approx(4 * 20 * math.sqrt(2), abs=0.02)


def test_norths() -> None:
    scenario = on_site(ring(4), declination=math.radians(-2.5))
    row = exchange.rows(pegs(scenario))[1]
    assert scenario.site is not None
    assert scenario.site.grid is not None
    assert row["bearing_grid_deg"] == pytest.approx(90.0)
    assert row["bearing_magnetic_deg"] == pytest.approx(92.5)
    assert row["bearing_true_deg"] == pytest.approx(90.0 + math.degrees(scenario.site.grid.convergence))
    assert row["grid_distance_m"] == pytest.approx(20.0 * scenario.site.grid.combined)


def test_true_bearing_and_ground_distance_are_those_of_the_geodesic() -> None:
    """Another path: Karney's geodesic on the ellipsoid from the exported degrees, raised to the level of the site."""
    from pyproj import Geod

    scenario = on_site(ring(3, 100.0))
    at = scenario.site.grid  # type: ignore[union-attr]
    assert at is not None
    for row in exchange.rows(pegs(scenario)):
        azimuth, _, away = Geod(ellps="WGS84").inv(at.longitude, at.latitude, row["longitude_deg"], row["latitude_deg"])
        assert away * (1 + at.level / 6_371_000.0) == pytest.approx(row["level_distance_m"], abs=MILLIMETRE)
        assert azimuth % 360 == pytest.approx(row["bearing_true_deg"], abs=math.degrees(MILLIMETRE / 100))


# ---------------------------------------------------------------- files read back


def places(scenario: Scenario) -> dict[str, tuple[float, float, float]]:
    return {a.name: (a.east, a.north, a.level) for a in scenario.anchor}


@pytest.mark.parametrize("crs", SYSTEMS)
def test_csv_read_back(tmp_path: Path, crs: str) -> None:
    scenario = on_site(ring(3), crs)
    (tmp_path / "pegs.csv").write_text(exchange.as_table(pegs(scenario)), encoding="utf-8")
    grid = scenario.site.grid  # type: ignore[union-attr]
    back = read_pegs(tmp_path / "pegs.csv", grid, places(scenario))
    for name, place in places(scenario).items():
        assert back[name] == pytest.approx(place, abs=MILLIMETRE)


@pytest.mark.parametrize("crs", SYSTEMS)
def test_geojson_kml_and_dxf_read_back(tmp_path: Path, crs: str) -> None:
    scenario = on_site(ring(3), crs)
    grid = scenario.site.grid  # type: ignore[union-attr]
    assert grid is not None
    degrees: dict[str, list[dict[str, Any]]] = {"geojson": [], "kml": []}
    for f in json.loads(exchange.geojson(pegs(scenario)))["features"]:
        degrees["geojson"].append({"name": f["properties"]["name"], "at": f["geometry"]["coordinates"]})
    root = ElementTree.fromstring(exchange.kml(pegs(scenario)))
    for mark in root.iter(f"{{{exchange.KML}}}Placemark"):
        name, at = (next(mark.iter(f"{{{exchange.KML}}}{tag}")).text or "" for tag in ("name", "coordinates"))
        degrees["kml"].append({"name": name, "at": [float(x) for x in at.split(",")]})
    (tmp_path / "pegs.dxf").write_text(exchange.dxf(pegs(scenario)), encoding="utf-8")
    drawing = readfile(tmp_path / "pegs.dxf")
    names = [t.dxf.text for t in drawing.modelspace().query("TEXT")]
    points = [p.dxf.location for p in drawing.modelspace().query("POINT")]
    drawn = {n: (*map(float, grid.from_grid(p.x, p.y)), p.z * grid.unit - grid.level) for n, p in zip(names, points, strict=True)}
    for name, place in places(scenario).items():
        assert drawn[name] == pytest.approx(place, abs=MILLIMETRE)
        for found in degrees.values():
            longitude, latitude, level = next(f["at"] for f in found if f["name"] == name)
            east, north = grid.from_degrees(latitude, longitude)
            assert (float(east), float(north), level - grid.level) == pytest.approx(place, abs=MILLIMETRE)
    assert not drawing.audit().has_errors


@pytest.mark.parametrize("write", [exchange.geojson, exchange.kml])
def test_degrees_need_a_coordinate_system(write: Callable[[Pegs], str]) -> None:
    with pytest.raises(ValueError, match="no coordinate system"):
        write(pegs(ring(3)))


# ---------------------------------------------------------------- pegs as surveyed


def surveyed(tmp_path: Path, text: str, scenario: Scenario) -> dict[str, tuple[float, float, float]]:
    (tmp_path / "pegs.csv").write_text(text, encoding="utf-8")
    return read_pegs(tmp_path / "pegs.csv", scenario.site.grid if scenario.site else None, places(scenario))


def test_pegs_by_grid_and_by_degrees_are_one(tmp_path: Path) -> None:
    scenario = on_site(ring(3), "EPSG:2225")
    grid = scenario.site.grid  # type: ignore[union-attr]
    assert grid is not None
    east, north = grid.to_grid(0.3, 19.8)
    latitude, longitude = grid.to_degrees(0.3, 19.8)
    feet = (grid.level + 0.5) / grid.unit
    by_grid = surveyed(tmp_path, f"peg,east,north,level\nA,{east},{north},{feet}\n", scenario)
    by_degrees = surveyed(tmp_path, f"name,lat,lon,level [m]\nA,{latitude},{longitude},{grid.level + 0.5}\n", scenario)
    local = surveyed(tmp_path, "name,east_m,north_m,level_m\nA,0.3,19.8,0.5\n", scenario)
    for found in (by_grid, by_degrees, local):
        assert found["A"] == pytest.approx((0.3, 19.8, 0.5), abs=MILLIMETRE)
    assert surveyed(tmp_path, "name,east,north\nA,0.3,19.8\n", scenario)["A"][2] == 0.0


@pytest.mark.parametrize(
    ("text", "told"),
    [
        ("", "is empty"),
        ("name,east\nA,1\n", "the header must name its columns"),
        ("name,east,north\n", "holds no pegs"),
        ("name,east,north\nQ,1,2\n", 'line 2: no anchor "Q"; those of the scenario are A, B, C'),
        ("name,east,north\nA,0,20\nA,0,20\n", 'line 3: "A" stands twice'),
        ("name,east,north\nA,0,\n", "line 2: the north is missing"),
        ("name,east,north\nA,zero,1\n", 'line 2: "zero" is not a number for the east'),
        ("name,east,north\nA,2000,0\n", "are the columns or the units swapped"),
        ("name,lat,lon\nA,51,3\n", "need [site]"),
        ("name,east [furlong],north\nA,0,1\n", "furlong is not a unit"),
        ('name,east,north\n"' + 200_000 * "a" + '",1,1\n', "is not CSV: field larger"),
    ],
)
def test_faulty_surveys(tmp_path: Path, text: str, told: str) -> None:
    with pytest.raises(SurveyError) as caught:
        surveyed(tmp_path, text, ring(3))
    assert told in str(caught.value)


@pytest.mark.parametrize(
    ("head", "told"),
    [
        ("name,north,east,level", "read with the columns swapped within 0.01 m; in the header, swap them"),
        ("name,east [ft],north [ft],level [m]", "read in metres within 0.01 m; in the header, write east [m]"),
    ],
)
def test_columns_and_units_taken_for_others(tmp_path: Path, head: str, told: str) -> None:
    scenario = made.scenario(made.mast())
    pegs_found = "".join(f"{name},{east},{north},{level}\n" for name, (east, north, level) in places(scenario).items())
    with pytest.raises(SurveyError) as caught:
        surveyed(tmp_path, f"{head}\n{pegs_found}", scenario)
    assert told in str(caught.value)


def test_feet_and_survey_feet_are_told_apart(tmp_path: Path) -> None:
    """They differ by two millionths: 4 m at a false easting of 2,000 km."""
    scenario = on_site(ring(3), "EPSG:2225")
    grid = scenario.site.grid  # type: ignore[union-attr]
    assert grid is not None
    rows = "".join("{},{},{}\n".format(name, *grid.to_grid(at[0], at[1] + 0.1)) for name, at in places(scenario).items())
    with pytest.raises(SurveyError, match=r"read in US survey feet within 0\.10 m; in the header, leave the unit out"):
        surveyed(tmp_path, f"name,east [ft],north [ft]\n{rows}", scenario)
    assert surveyed(tmp_path, f"name,east,north\n{rows}", scenario)["A"][1] == pytest.approx(places(scenario)["A"][1] + 0.1, abs=MILLIMETRE)


def test_a_peg_really_metres_off_is_taken_as_found(tmp_path: Path) -> None:
    scenario = made.scenario(made.mast())
    east, north, level = places(scenario)["A"]
    assert surveyed(tmp_path, f"name,east,north,level\nA,{east + 3},{north},{level}\n", scenario)["A"] == (east + 3, north, level)
    with pytest.raises(SurveyError, match="lies 212 m above where it was planned; levels count from the origin"):
        surveyed(tmp_path, f"name,east,north,level\nA,{east},{north},{level + 212}\n", scenario)


def test_pegs_as_planned_change_nothing() -> None:
    scenario = ring(3)
    same = as_built(scenario, places(scenario))
    assert np.abs(same.off).max() == 0.0
    assert [w.resultant.peak for w in same.before.worst_anchors] == [w.resultant.peak for w in same.after.worst_anchors]


def test_a_peg_nearer_the_mast_bears_what_the_scenario_says_it_does() -> None:
    """The pegs found, written into a scenario of their own, give the same pulls."""
    document = made.mast()
    moved = made.mast()
    moved["anchor"][0] |= {"radius": 9.5}
    scenario, other = made.scenario(document), made.scenario(moved)
    built = as_built(scenario, {"A": places(other)["A"]})
    assert built.surveyed == ("A",)
    assert [w.resultant.peak for w in built.after.worst_anchors] == pytest.approx(
        [w.resultant.peak for w in made.solved(moved).worst_anchors]
    )
    assert built.after.worst_anchors[0].uplift.peak > 1.01 * built.before.worst_anchors[0].uplift.peak  # a steeper guy
    told = StringIO()
    report(built.planned, built, "SI", told)
    _, _, found = told.getvalue().partition("As found: ")
    assert f"{len(built.after.state)} cases: " in found
    assert all(f.quantity in found for f in built.after.past)
    assert "Against the allowables" in found


# ---------------------------------------------------------------- the command


@pytest.mark.usefixtures("one_format")
def test_the_command_writes_every_file(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (tmp_path / "mast.toml").write_text(made.text(made.mast()), encoding="utf-8")
    assert cli.run(["setout", str(tmp_path / "mast.toml"), "--out", str(tmp_path / "out"), "--paper", "A4"]) == 0
    told = capsys.readouterr().out
    assert "Check distances between pegs" in told
    assert "no setout.geojson and setout.kml" in told
    kinds = {p.name for p in (tmp_path / "out").iterdir()}
    assert kinds == {f"setout.{kind}" for kind in ("json", "csv", "dxf", "pdf", "svg", "png")}
    (tmp_path / "pegs.csv").write_text("name,east,north\nA,0.5,3.0\n", encoding="utf-8")
    arguments = ["setout", str(tmp_path / "mast.toml"), "--json", "--as-built", str(tmp_path / "pegs.csv")]
    assert cli.run(arguments) == 3
    content = json.loads(capsys.readouterr().out)
    assert [row["surveyed"] for row in content["as_built"]] == [True, False, False]
    assert content["as_built_past"]
    (tmp_path / "pegs.csv").write_text("name,east,north\nX,1,1\n", encoding="utf-8")
    assert cli.run(arguments) == 2


def test_a_site_gives_the_report_its_norths_and_scale(capsys: pytest.CaptureFixture[str]) -> None:
    import sys

    report(pegs(on_site(ring(4), declination=0.1)), None, "US", sys.stdout)
    told = capsys.readouterr().out
    assert "scale factor 0.999" in told
    assert "65 ft 7 in" in told
