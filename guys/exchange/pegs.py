"""Pegs to set out as CSV, GeoJSON, KML and DXF; read back, each gives the same pegs within a millimetre.

GeoJSON (RFC 7946) and KML (OGC 07-147r2) are in degrees, WGS 84, longitude first, and need a coordinate system; ten decimals of a degree
are 0.01 mm.  DXF is in the coordinate system's own numbers and unit, or in metres from the origin, with `$INSUNITS` set.
"""

from __future__ import annotations

import io
import json
import math
from collections.abc import Sequence
from typing import Any
from xml.etree import ElementTree

import numpy as np

from guys.checks.alarms import CAUTIONS
from guys.exchange.files import json_text
from guys.exchange.result import number
from guys.exchange.tables import Cell, as_csv
from guys.site import Grid
from guys.site.features import INSUNITS
from guys.studies.pegs import AsBuilt, Pegs

FORMAT = "guys-setout/1"
DEGREES = 10
"""Decimals of a degree: 0.01 mm."""
KML = "http://www.opengis.net/kml/2.2"
TEXT_HEIGHT = 0.4
"""[m] of names in a drawing."""


def _grid(pegs: Pegs) -> Grid | None:
    return None if pegs.scenario.site is None else pegs.scenario.site.grid


def _declination(pegs: Pegs) -> float:
    site = pegs.scenario.site
    return math.nan if site is None or site.declination is None else site.declination


def rows(pegs: Pegs) -> list[dict[str, Any]]:
    """Every figure of every peg; None for what the site does not tell."""
    grid = _grid(pegs)
    east, north, level = pegs.position.T
    grid_east, grid_north = grid.to_grid(east, north) if grid else (np.full_like(east, np.nan),) * 2
    latitude, longitude = grid.to_degrees(east, north) if grid else (np.full_like(east, np.nan),) * 2
    true = pegs.bearing + (grid.convergence if grid else math.nan)
    magnetic = pegs.bearing - _declination(pegs)
    return [
        {
            "name": name,
            "east_m": float(east[k]),
            "north_m": float(north[k]),
            "level_m": float(level[k]),
            "grid_east": number(grid_east[k]),
            "grid_north": number(grid_north[k]),
            "level_above_sea_m": number(level[k] + grid.level) if grid else None,
            "latitude_deg": number(latitude[k]),
            "longitude_deg": number(longitude[k]),
            "bearing_grid_deg": float(np.degrees(pegs.bearing[k])),
            "bearing_true_deg": number(math.degrees(true[k]) % 360),
            "bearing_magnetic_deg": number(math.degrees(magnetic[k]) % 360),
            "level_distance_m": float(pegs.level_distance[k]),
            "slope_distance_m": float(pegs.slope_distance[k]),
            "grid_distance_m": number(pegs.level_distance[k] * grid.combined) if grid else None,
        }
        for k, name in enumerate(pegs.name)
    ]


def check_distances(pegs: Pegs) -> list[dict[str, Any]]:
    """The ring of pegs and the lines from the base, as taped."""
    out = []
    for a, b in pegs.ring:
        level, slope, turn = pegs.between(a, b)
        ends = {"from": pegs.name[a], "to": pegs.name[b]}
        out.append({**ends, "level_distance_m": level, "slope_distance_m": slope, "bearing_grid_deg": math.degrees(turn)})
    return out


def as_dict(pegs: Pegs, built: AsBuilt | None = None) -> dict[str, Any]:
    """Everything as plain lists and numbers."""
    grid, (miss, round_) = _grid(pegs), pegs.closure
    out: dict[str, Any] = {
        "format": FORMAT,
        "title": pegs.scenario.title,
        "scenario_sha256": pegs.scenario.sha256,
        "coordinate_system": None if grid is None else {
            "crs": grid.crs, "name": grid.name, "unit_m": grid.unit, "point_scale": grid.point_scale, "scale_factor": grid.combined,
            "convergence_deg": math.degrees(grid.convergence), "origin_level_m": grid.level,
        },
        "declination_deg": number(math.degrees(_declination(pegs))),
        "pegs": rows(pegs),
        "check_distances": check_distances(pegs),
        "closure_m": number(miss),
        "ring_m": number(round_),
        "cautions": list(CAUTIONS),
    }  # fmt: skip
    if built is None:
        return out
    past = [{"thing": f.thing, "quantity": f.quantity, "factor": number(f.factor)} for f in built.after.past]
    return {**out, "as_built": as_built_rows(built), "as_built_past": past, "as_built_warnings": list(built.after.warnings)}


def as_text(pegs: Pegs, built: AsBuilt | None = None) -> str:
    """The text of `setout.json`."""
    return json_text(as_dict(pegs, built))


def as_table(pegs: Pegs) -> str:
    """`setout.csv`."""
    table = rows(pegs)
    head = list(table[0]) if table else ["name"]
    return as_csv(head, [list(row.values()) for row in table])


def as_built_rows(built: AsBuilt) -> list[dict[str, Any]]:
    """Where every peg was found, and its greatest pull before and after."""
    out = []
    for k, name in enumerate(built.planned.name):
        before, after = built.before.worst_anchors[k], built.after.worst_anchors[k]
        out.append(
            {
                "name": name,
                "surveyed": name in built.surveyed,
                "east_off_m": float(built.off[k, 0]),
                "north_off_m": float(built.off[k, 1]),
                "level_off_m": float(built.off[k, 2]),
                "plan_off_m": float(np.hypot(*built.off[k, :2])),
                "resultant_planned_N": number(before.resultant.peak),
                "resultant_as_built_N": number(after.resultant.peak),
                "uplift_planned_N": number(before.uplift.peak),
                "uplift_as_built_N": number(after.uplift.peak),
            }
        )
    return out


def as_built_table(built: AsBuilt) -> str:
    """`as-built.csv`."""
    table = as_built_rows(built)
    cells: list[Sequence[Cell]] = [list(row.values()) for row in table]
    return as_csv(list(table[0]), cells)


def geojson(pegs: Pegs) -> str:
    """`setout.geojson`: a point a peg, and the base."""
    grid = _needed(pegs, "GeoJSON")
    features = []
    for name, place in _points(pegs):
        latitude, longitude = grid.to_degrees(place[0], place[1])
        at = [round(float(longitude), DEGREES), round(float(latitude), DEGREES), round(float(place[2]) + grid.level, 4)]
        kind = "anchor" if name in pegs.name else "base"
        features.append({"type": "Feature", "properties": {"name": name, "kind": kind}, "geometry": {"type": "Point", "coordinates": at}})
    return json.dumps({"type": "FeatureCollection", "features": features}, ensure_ascii=False, indent=1) + "\n"


def kml(pegs: Pegs) -> str:
    """`setout.kml`: a placemark a peg, and the base."""
    grid = _needed(pegs, "KML")
    ElementTree.register_namespace("", KML)
    root = ElementTree.Element(f"{{{KML}}}kml")
    document = ElementTree.SubElement(root, f"{{{KML}}}Document")
    ElementTree.SubElement(document, f"{{{KML}}}name").text = pegs.scenario.title
    for name, place in _points(pegs):
        latitude, longitude = grid.to_degrees(place[0], place[1])
        mark = ElementTree.SubElement(document, f"{{{KML}}}Placemark")
        ElementTree.SubElement(mark, f"{{{KML}}}name").text = name
        point = ElementTree.SubElement(mark, f"{{{KML}}}Point")
        at = f"{float(longitude):.{DEGREES}f},{float(latitude):.{DEGREES}f},{float(place[2]) + grid.level:.4f}"
        ElementTree.SubElement(point, f"{{{KML}}}coordinates").text = at
    ElementTree.indent(root)
    return '<?xml version="1.0" encoding="UTF-8"?>\n' + ElementTree.tostring(root, encoding="unicode") + "\n"


def _needed(pegs: Pegs, what: str) -> Grid:
    grid = _grid(pegs)
    if grid is None:
        raise ValueError(f"{what} is in degrees; the scenario has no coordinate system")
    return grid


def _points(pegs: Pegs) -> list[tuple[str, Any]]:
    return [("base " + pegs.scenario.spar[0].name, pegs.base), *zip(pegs.name, pegs.position, strict=True)]


def dxf(pegs: Pegs) -> str:
    """`setout.dxf`: pegs, their names, and lines from the base, in the coordinate system's numbers or in metres from the origin.

    Raises ModuleNotFoundError where the extra `dxf` is not installed.
    """
    from ezdxf.filemanagement import new

    grid = _grid(pegs)
    unit = 1.0 if grid is None else grid.unit
    drawing = new("R2010")
    drawing.header["$INSUNITS"] = next(code for code, metres in INSUNITS.items() if abs(metres - unit) < 1e-9)
    for layer in ("anchors", "base", "lines"):
        drawing.layers.add(layer)
    space = drawing.modelspace()
    places = []
    for name, place in _points(pegs):
        east, north = (place[0], place[1]) if grid is None else grid.to_grid(place[0], place[1])
        at = (float(east), float(north), float((place[2] + (grid.level if grid else 0.0)) / unit))
        layer = "anchors" if name in pegs.name else "base"
        space.add_point(at, dxfattribs={"layer": layer})
        space.add_text(name, height=TEXT_HEIGHT / unit, dxfattribs={"layer": layer}).set_placement(at)
        places.append(at)
    for at in places[1:]:
        space.add_line(places[0], at, dxfattribs={"layer": "lines"})
    into = io.StringIO()
    drawing.write(into)
    return into.getvalue()
