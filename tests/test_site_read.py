"""A site through the reader: places by degrees, grid and drawing agree; every slip of the trade is caught and named."""

from __future__ import annotations

import copy
import json
from pathlib import Path
from typing import Any

import ezdxf
import numpy as np
import pytest
from toml_text import MAST, dumps

from guys.errors import ScenarioError
from guys.scenario import Scenario, read_scenario
from guys.site.grid import grid_at_degrees

MILLIMETRE = 1e-3
CRS, LAT, LON = "EPSG:32631", 51.0, 3.2
GRID = grid_at_degrees(CRS, LAT, LON, 212.0)
SQUARE = [(-30.0, -30.0), (30.0, -30.0), (30.0, 30.0), (-30.0, 30.0), (-30.0, -30.0)]
ROAD = {"name": "haul road", "kind": "road", "headroom": "5.5 m"}


def degrees(points: list[tuple[float, float]]) -> list[list[float]]:
    latitude, longitude = GRID.to_degrees(*np.array(points).T)
    return [[float(x), float(y)] for x, y in zip(longitude, latitude, strict=True)]


def feature(geometry: str, coordinates: Any, **properties: Any) -> dict[str, Any]:
    return {"type": "Feature", "properties": properties, "geometry": {"type": geometry, "coordinates": coordinates}}


def collection(*features: dict[str, Any], **more: Any) -> dict[str, Any]:
    return {"type": "FeatureCollection", "features": list(features), **more}


BOUNDARY = collection(feature("Polygon", [degrees(SQUARE)]))
OBSTACLES = collection(feature("LineString", degrees([(-30, -15), (30, -15)]), **ROAD))
SPOTS = "east,north,level\n-40,-40,-3\n40,-40,-3\n40,40,3\n-40,40,3\n"


def read(folder: Path, site: dict[str, Any], files: dict[str, Any], **change: Any) -> Scenario:
    document = {**copy.deepcopy(MAST), "site": site, **change}
    for name, content in files.items():
        (folder / name).write_text(content if isinstance(content, str) else json.dumps(content), encoding="utf-8")
    (folder / "mast.toml").write_text(dumps(document), encoding="utf-8")
    return read_scenario(folder / "mast.toml")


def faults(folder: Path, site: dict[str, Any], files: dict[str, Any], **change: Any) -> str:
    with pytest.raises(ScenarioError) as caught:
        read(folder, site, files, **change)
    return "\n".join(str(f) for f in caught.value.faults)


PLACED = {"crs": CRS, "origin": {"lat": LAT, "lon": LON, "level": "212 m"}}
WHOLE = {**PLACED, "boundary": "b.json", "obstacles": "o.json", "ground": "g.csv", "setback": "1 m", "declination": "-2.5 deg"}


def test_a_whole_site_is_read_in_metres_from_its_origin(tmp_path: Path) -> None:
    scenario = read(tmp_path, WHOLE, {"b.json": BOUNDARY, "o.json": OBSTACLES, "g.csv": SPOTS})
    site = scenario.site
    assert site is not None
    assert site.boundary is not None
    assert site.boundary.bounds == pytest.approx((-30, -30, 30, 30), abs=MILLIMETRE)
    (road,) = site.obstacles
    assert (road.name, road.kind, road.headroom, road.clearance) == ("haul road", "road", 5.5, None)
    assert [name for name, _ in site.files] == ["b.json", "o.json", "g.csv"]
    north = next(a for a in scenario.anchor if a.name == "N")
    assert north.level == pytest.approx(8.0 * 3 / 40)


def test_anchors_by_latitude_and_longitude(tmp_path: Path) -> None:
    (lon, lat), *_ = degrees([(3.0, 7.5)])
    anchors = [{"name": "N", "lat": lat, "lon": lon}, *MAST["anchor"][1:]]
    anchor = read(tmp_path, PLACED, {}, anchor=anchors).anchor[0]
    assert (anchor.east, anchor.north) == pytest.approx((3.0, 7.5), abs=MILLIMETRE)
    swapped = [{"name": "N", "lat": lon, "lon": lat}, *MAST["anchor"][1:]]
    assert "are lat and lon swapped?" in faults(tmp_path, PLACED, {}, anchor=swapped)
    assert "lat and lon need [site]" in faults(tmp_path, {"setback": "0 m"}, {}, anchor=anchors)
    both = [{"name": "N", "lat": lat, "lon": lon, "bearing": "3 deg"}, *MAST["anchor"][1:]]
    assert "has bearing and lat and lon" in faults(tmp_path, PLACED, {}, anchor=both)


def test_a_file_in_the_grid_itself(tmp_path: Path) -> None:
    east, north = GRID.to_grid(*np.array(SQUARE).T)
    named = {"crs": {"type": "name", "properties": {"name": CRS}}}
    there = collection(feature("Polygon", [np.column_stack([east, north]).tolist()]), **named)
    site = read(tmp_path, {**PLACED, "boundary": "b.json"}, {"b.json": there}).site
    assert site is not None
    assert site.boundary is not None
    assert site.boundary.bounds == pytest.approx((-30, -30, 30, 30), abs=MILLIMETRE)
    assert "no degrees" in faults(tmp_path, {**PLACED, "boundary": "b.json"}, {"b.json": {**there, "crs": None}})
    other = {**there, "crs": {"type": "name", "properties": {"name": "EPSG:32632"}}}
    assert "is in EPSG:32632" in faults(tmp_path, {**PLACED, "boundary": "b.json"}, {"b.json": other})
    assert "look like degrees" in faults(tmp_path, {**PLACED, "boundary": "b.json"}, {"b.json": {**BOUNDARY, **named}})


def test_local_metres_need_no_system(tmp_path: Path) -> None:
    local = collection(feature("Polygon", [SQUARE]))
    site = read(tmp_path, {"boundary": "b.json"}, {"b.json": local}).site
    assert site is not None
    assert site.grid is None
    assert "degrees taken for metres" in faults(tmp_path, {"boundary": "b.json"}, {"b.json": BOUNDARY})


@pytest.mark.parametrize(
    ("content", "told"),
    [
        (collection(), "holds no shapes"),
        ({"type": "nothing"}, "feature 1 is not a shape"),
        ("[1, 2", "is not JSON"),
        ("[1, 2]", "is not GeoJSON"),
        (collection(feature("Point", [LON, LAT])), "is no polygon"),
        (collection(feature("Polygon", [[[y, x] for x, y in degrees(SQUARE)]])), "the axes are swapped"),
        (collection(feature("Polygon", [[[x + 20, y] for x, y in degrees(SQUARE)]])), "km from the site's origin"),
        (collection(feature("Polygon", [degrees([SQUARE[k] for k in (0, 2, 1, 3, 0)])])), "self-intersection 0.00 m east"),
        (collection(feature("Polygon", [degrees([(5.0 + x, y + 31.0) for x, y in SQUARE])])), "stands 1 m (3.281 ft) outside the boundary"),
        (collection({"type": "Feature", "geometry": None, "properties": {"name": "x"}}), 'feature 1 ("x") has no shape'),
    ],
)  # fmt: skip
def test_faulty_boundaries(tmp_path: Path, content: Any, told: str) -> None:
    assert told in faults(tmp_path, {**PLACED, "boundary": "b.json"}, {"b.json": content})


@pytest.mark.parametrize(
    ("coordinates", "told"),
    [("[NaN, 10]", "no place's"), ("[1e300, 10]", "no place's"), ("[30]", "make no Point"), ('["a", 1]', "make no Point")],
)
def test_coordinates_that_are_none(tmp_path: Path, coordinates: str, told: str) -> None:
    shape = json.dumps(feature("Point", "here", kind="mast")).replace('"here"', coordinates)
    assert told in faults(tmp_path, {"obstacles": "o.json"}, {"o.json": shape})


def test_a_lone_point_may_be_in_metres(tmp_path: Path) -> None:
    """A file that spans nothing is not therefore in degrees, unless its numbers are finer than anybody sets out."""
    tap = {"kind": "service", "name": "tap", "clearance": "1 m"}
    site = read(tmp_path, {"obstacles": "o.json"}, {"o.json": collection(feature("Point", [5.25, -3.125], **tap))}).site
    assert site is not None
    assert site.obstacles[0].shape.bounds == (5.25, -3.125, 5.25, -3.125)
    there = collection(feature("Point", degrees([(5.25, -3.125)])[0], **tap))
    assert "degrees taken for metres" in faults(tmp_path, {"obstacles": "o.json"}, {"o.json": there})


def test_numbers_of_the_site_in_place_of_the_systems(tmp_path: Path) -> None:
    local = collection(feature("Polygon", [SQUARE]))
    assert "metres from the origin?" in faults(tmp_path, {**PLACED, "boundary": "b.json"}, {"b.json": local})
    local["crs"] = {"type": "name", "properties": {"name": CRS}}
    assert "look like metres from the origin" in faults(tmp_path, {**PLACED, "boundary": "b.json"}, {"b.json": local})
    assert "degrees taken for metres" in faults(
        tmp_path, {"ground": "g.csv"}, {"g.csv": "east,north,level\n3.2,51,1\n3.2001,51,1\n3.2,51.0001,2\n"}
    )


def test_shapes_far_from_the_rest_are_told(tmp_path: Path) -> None:
    mixed = collection(feature("Point", [30.0, 10.0], kind="mast"), feature("Point", [30_000.0, 10_000.0], kind="mast"))
    warned = read(tmp_path, {"obstacles": "o.json"}, {"o.json": mixed}).warnings
    assert any("1 of 2 shapes lie beyond 5 km from the origin, such as feature 2, 32 km away" in w for w in warned)


def test_a_file_too_large_or_missing(tmp_path: Path) -> None:
    assert "no such file" in faults(tmp_path, {"boundary": "b.json"}, {})
    with open(tmp_path / "b.json", "wb") as file:
        file.truncate(200_000_000)
    assert "is 200 MB" in faults(tmp_path, {"boundary": "b.json"}, {})


def test_more_shapes_than_a_site_has(tmp_path: Path) -> None:
    many = collection(*[feature("Point", [30.0 + k, 10.0], kind="mast") for k in range(1_001)])
    assert "holds 1,001 shapes; more than 1,000 are no site" in faults(tmp_path, {"obstacles": "o.json"}, {"o.json": many})


@pytest.mark.parametrize(
    ("properties", "told"),
    [
        ({"name": "x"}, "has no kind"),
        ({"kind": "street"}, '"street" is not a kind'),
        ({"kind": "road", "headroom": 5.5}, 'headroom: 5.5 has no unit; write a string such as "5.5 m"'),
        ({"kind": "road", "headroom": "5.5 kg"}, "headroom"),
        ({"kind": "road", "clearance": "-1 m"}, "is negative"),
        ({"kind": "road", "clearence": "1 m"}, '"clearence" looks like clearance'),
        ({"kind": "line", "height": "9 m"}, "a line needs height and distance"),
    ],
)
def test_faulty_obstacles(tmp_path: Path, properties: dict[str, Any], told: str) -> None:
    content = collection(feature("LineString", degrees([(-30, -15), (30, -15)]), **properties))
    assert told in faults(tmp_path, {**PLACED, "obstacles": "o.json"}, {"o.json": content})


def test_a_table_with_too_little(tmp_path: Path) -> None:
    told = faults(tmp_path, {"crs": CRS}, {})
    assert "site.origin: missing" in told
    assert "site.crs: missing" in faults(tmp_path, {"origin": PLACED["origin"]}, {})
    assert "needs a boundary" in faults(tmp_path, {"setback": "1 m"}, {})
    assert "not a projected system" in faults(tmp_path, {**PLACED, "crs": "EPSG:4326"}, {})


def test_ground_in_the_grid_carries_levels_above_the_sea(tmp_path: Path) -> None:
    east, north = GRID.to_grid(np.array([-40.0, 40.0, 0.0]), np.array([-40.0, -40.0, 40.0]))
    rows = "".join(f"{e:.4f},{n:.4f},{z}\n" for e, n, z in zip(east, north, (215.0, 215.0, 215.0), strict=True))
    scenario = read(tmp_path, {**PLACED, "ground": "g.csv"}, {"g.csv": "east,north,level\n" + rows})
    assert [a.level for a in scenario.anchor] == pytest.approx([3.0, 3.0, 3.0])
    assert any("the surveyed ground lies at 3 m" in w for w in scenario.warnings)
    swapped = "".join(f"{n:.4f},{e:.4f},215\n" for e, n in zip(east, north, strict=True))
    assert "the axes are swapped" in faults(tmp_path, {**PLACED, "ground": "g.csv"}, {"g.csv": "east,north,level\n" + swapped})


def test_levels_above_the_sea_without_a_system_are_warned_of(tmp_path: Path) -> None:
    high = "east,north,level\n-40,-40,212\n40,-40,212\n40,40,212\n-40,40,212\n"
    warned = read(tmp_path, {"ground": "g.csv"}, {"g.csv": high}).warnings
    assert any("the surveyed ground lies at 212 m" in w and "levels count from the origin, not from the sea" in w for w in warned)
    above = [w for w in warned if "above where it is made fast to the spar" in w]
    assert len(above) == len(MAST["guy_level"]) * len(MAST["anchor"])
    assert not any("is flat for" in w for w in warned)


def test_an_anchor_off_the_survey_is_a_fault_not_a_guess(tmp_path: Path) -> None:
    small = "east,north,level\n-5,-5,0\n5,-5,0\n0,9,0\n"
    told = faults(tmp_path, {"ground": "g.csv"}, {"g.csv": small})
    assert "anchor[1]" in told
    assert "outside the surveyed ground" in told


def drawn(path: Path, unit: int, scale: float, layer: str) -> None:
    drawing = ezdxf.new()
    drawing.header["$INSUNITS"] = unit
    space = drawing.modelspace()
    space.add_lwpolyline([(scale * x, scale * y) for x, y in SQUARE[:4]], close=True, dxfattribs={"layer": layer})
    space.add_text("not a shape", dxfattribs={"layer": layer})
    drawing.saveas(path)


@pytest.mark.parametrize(("unit", "scale"), [(6, 1.0), (2, 1 / 0.3048), (4, 1000.0)])
def test_drawings_in_their_own_unit(tmp_path: Path, unit: int, scale: float) -> None:
    drawn(tmp_path / "b.dxf", unit, scale, "boundary")
    scenario = read(tmp_path, {"boundary": "b.dxf"}, {})
    assert scenario.site is not None
    assert scenario.site.boundary is not None
    assert scenario.site.boundary.bounds == pytest.approx((-30, -30, 30, 30), abs=MILLIMETRE)
    assert any("passed over what is no shape: text" in w for w in scenario.warnings)


def test_a_drawing_without_a_unit_waits_for_the_user(tmp_path: Path) -> None:
    drawn(tmp_path / "b.dxf", 0, 1 / 0.3048, "boundary")
    assert "states no unit" in faults(tmp_path, {"boundary": "b.dxf"}, {})
    scenario = read(tmp_path, {"boundary": "b.dxf", "drawing_unit": "ft"}, {})
    assert scenario.site is not None
    assert scenario.site.boundary is not None
    assert scenario.site.boundary.bounds == pytest.approx((-30, -30, 30, 30), abs=MILLIMETRE)


def test_layers_of_a_drawing_are_obstacles(tmp_path: Path) -> None:
    drawn(tmp_path / "o.dxf", 6, 1.0, "building - height 4 m - name store")
    site = read(tmp_path, {"obstacles": "o.dxf"}, {}).site
    assert site is not None
    assert [(o.name, o.kind, o.height) for o in site.obstacles] == [("store", "building", 4.0)]


def test_millimetres_taken_for_metres(tmp_path: Path) -> None:
    drawn(tmp_path / "b.dxf", 6, 1000.0, "boundary")
    assert "millimetres taken for metres" in faults(tmp_path, {"boundary": "b.dxf"}, {})


def test_blocks_of_a_drawing_are_taken_apart(tmp_path: Path) -> None:
    """On layer 0 of a block is on the layer of its insert (DXF reference); moved and turned by it."""
    drawing = ezdxf.new()
    drawing.header["$INSUNITS"] = 6
    store = drawing.blocks.new("store")
    store.add_lwpolyline([(0, 0), (4, 0), (4, 2), (0, 2)], close=True)
    drawing.modelspace().add_blockref("store", (20, 5), dxfattribs={"layer": "building - height 4 m - name store", "rotation": 90})
    drawing.saveas(tmp_path / "o.dxf")
    site = read(tmp_path, {"obstacles": "o.dxf"}, {}).site
    assert site is not None
    assert [(o.name, o.height) for o in site.obstacles] == [("store", 4.0)]
    assert site.obstacles[0].shape.bounds == pytest.approx((18.0, 5.0, 20.0, 9.0))


def test_a_drawing_cut_short_is_a_fault_of_the_file(tmp_path: Path) -> None:
    drawn(tmp_path / "b.dxf", 6, 1.0, "boundary")
    whole = (tmp_path / "b.dxf").read_text(encoding="utf-8")
    for kept in (0.1, 0.5, 0.9):
        (tmp_path / "b.dxf").write_text(whole[: int(kept * len(whole))], encoding="utf-8")
        assert "is not readable as DXF" in faults(tmp_path, {"boundary": "b.dxf"}, {})
