"""Shapes and their properties from GeoJSON and DXF, still in the file's coordinates.

GeoJSON (RFC 7946) is longitude first, in degrees.  A file that holds a grid's own numbers says so by the older member `crs`.  In DXF every
layer is of one kind: closed curves are polygons, open ones lines, points points; blocks are taken apart, and what is no shape (text,
dimensions) is counted in `passed_over`; `$INSUNITS` tells the unit.  A layer carries its properties in its name, such as
`road - headroom 5.5 m - name haul road`.
"""

from __future__ import annotations

import json
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np

if TYPE_CHECKING:
    from shapely.geometry.base import BaseGeometry

NEARNESS = 1e-3
"""[m] curves of a drawing are followed within this."""
ANYWHERE = 1e9
"""Coordinates on Earth are less, in metres, feet or millimetres of a site."""
INSUNITS = {1: 0.0254, 2: 0.3048, 4: 0.001, 5: 0.01, 6: 1.0, 7: 1000.0, 10: 0.9144, 14: 0.1, 21: 1200 / 3937}
"""Metres in the drawing unit of each $INSUNITS code (DXF reference): inch, foot, mm, cm, m, km, yard, dm, US survey foot."""


class FeatureError(ValueError):
    """A file of shapes that cannot be used; `reasons` are the faults found, each with its feature."""

    def __init__(self, *reasons: str) -> None:
        self.reasons = reasons
        super().__init__("; ".join(reasons))


@dataclass(frozen=True)
class Feature:
    """One shape; place : how a message names it;  properties : as the file gives them."""

    shape: BaseGeometry
    properties: dict[str, Any]
    place: str


@dataclass(frozen=True)
class Layer:
    """All shapes of a file.

    crs : the coordinate system it names;  unit : metres in its unit where it tells;  degrees : it should be in degrees
    passed_over : kinds of drawn things that are no shapes
    """

    features: tuple[Feature, ...]
    crs: str | None
    unit: float | None
    degrees: bool
    passed_over: tuple[str, ...] = ()


def geojson(text: str) -> Layer:
    """The features of a GeoJSON text; raises FeatureError."""
    try:
        content = json.loads(text)
    except (ValueError, RecursionError) as error:
        raise FeatureError(f"is not JSON: {error}") from None
    if not isinstance(content, dict) or "type" not in content:
        raise FeatureError("is not GeoJSON; its top level must be a FeatureCollection, a Feature or a shape")
    crs = _named_crs(content)
    reasons: list[str] = []
    features = tuple(f for n, item in enumerate(_items(content)) if (f := _feature(item, n, reasons)) is not None)
    if reasons:
        raise FeatureError(*reasons)
    return Layer(features, crs, None, degrees=crs is None)


def _named_crs(content: dict[str, Any]) -> str | None:
    crs = content.get("crs")
    if crs is None:
        return None
    name = crs.get("properties", {}).get("name") if isinstance(crs, dict) and isinstance(crs.get("properties"), dict) else None
    if not isinstance(name, str):
        raise FeatureError('its member "crs" names no coordinate system; write { "type": "name", "properties": { "name": "EPSG:32631" } }')
    return None if name.upper().endswith(("CRS84", "EPSG::4326", "EPSG:4326")) else name


def _items(content: dict[str, Any]) -> list[Any]:
    if content["type"] == "FeatureCollection":
        features = content.get("features")
        if not isinstance(features, list):
            raise FeatureError('its "features" is not a list')
        return features
    return [content] if content["type"] == "Feature" else [{"type": "Feature", "geometry": content, "properties": {}}]


def _feature(item: Any, number: int, reasons: list[str]) -> Feature | None:
    from shapely import get_coordinates
    from shapely.geometry import shape

    properties = item.get("properties") if isinstance(item, dict) else None
    properties = properties if isinstance(properties, dict) else {}
    place = f"feature {number + 1}" + (f' ("{properties["name"]}")' if isinstance(properties.get("name"), str) else "")
    geometry = item.get("geometry") if isinstance(item, dict) else None
    if not isinstance(geometry, dict):
        reasons.append(f"{place} has no shape")
        return None
    try:
        found = shape(geometry)
        flat = found if not found.has_z else _flat(found)
    except Exception:
        reasons.append(f"{place} is not a shape: its coordinates make no {geometry.get('type')}")
        return None
    if not (np.abs(get_coordinates(flat)) < ANYWHERE).all():
        reasons.append(f"{place} has a coordinate that is no place's")
        return None
    if flat.is_empty:
        reasons.append(f"{place} is empty")
        return None
    return Feature(flat, properties, place)


def _flat(shape: BaseGeometry) -> BaseGeometry:
    from shapely import force_2d

    return force_2d(shape)


def dxf(path: str, unit: float | None) -> Layer:
    """The shapes of a DXF file; `unit` [m]: what the user says where the file tells none.  Raises FeatureError."""
    try:
        from ezdxf.filemanagement import readfile
        from ezdxf.lldxf.const import DXFError
    except ModuleNotFoundError:
        raise FeatureError('is DXF, which needs one package more: pip install "guys[dxf]"') from None
    try:
        drawing = readfile(path)
    except (OSError, DXFError) as error:
        raise FeatureError(f"is not readable as DXF: {error}") from None
    except Exception as error:  # whatever else a broken drawing makes the library stumble on
        raise FeatureError(f"is not readable as DXF: {type(error).__name__}; is it cut short? save it anew") from None
    code = int(drawing.header.get("$INSUNITS", 0))
    own = INSUNITS.get(code)
    if own is None and unit is None:
        said = "no unit" if code == 0 else f"a unit not known here ($INSUNITS {code})"
        raise FeatureError(f'states {said}; say it in the scenario, such as drawing_unit = "m" in [site]')
    if own is not None and unit is not None and abs(own - unit) > 1e-9:
        raise FeatureError(f"states its unit itself ($INSUNITS {code}, {own:g} m), another than drawing_unit; leave drawing_unit out")
    metres = own if own is not None else unit
    features, passed_over = _entities(drawing.modelspace(), NEARNESS / (metres or 1.0))
    return Layer(features, None, metres, degrees=False, passed_over=passed_over)


def _entities(space: Any, nearness: float) -> tuple[tuple[Feature, ...], tuple[str, ...]]:
    features: list[Feature] = []
    passed_over: set[str] = set()
    for number, entity in enumerate(_drawn(space)):
        shape, kind = _shape(entity, nearness), entity.dxftype().lower()
        if shape is None:
            passed_over.add(kind)
            continue
        layer = str(entity.dxf.layer)
        features.append(Feature(shape, _layer_properties(layer), f'{kind} {number + 1} on layer "{layer}"'))
    return tuple(features), tuple(sorted(passed_over))


def _drawn(space: Iterable[Any], on: str | None = None) -> Iterator[Any]:
    """Everything drawn, blocks taken apart; what a block holds on layer 0 is on the layer the block is inserted on (DXF reference)."""
    for entity in space:
        if on is not None and entity.dxf.layer == "0":
            entity.dxf.layer = on
        if entity.dxftype() == "INSERT":
            yield from _drawn((part for one in entity.multi_insert() for part in one.virtual_entities()), str(entity.dxf.layer))
        else:
            yield entity


def _layer_properties(layer: str) -> dict[str, str]:
    kind, *rest = (part.strip() for part in layer.split(" - "))
    pairs = (part.partition(" ") for part in rest)
    return {"kind": kind.lower(), **{key.lower(): value.strip() for key, _, value in pairs}}


def _shape(entity: Any, nearness: float) -> BaseGeometry | None:
    """The entity in plan, curves within `nearness` [drawing unit]; None for what is no shape, such as text."""
    from ezdxf.path import make_path
    from shapely import LineString, Point, Polygon

    if entity.dxftype() == "POINT":
        return Point(entity.dxf.location.x, entity.dxf.location.y)
    try:
        path = make_path(entity)
    except TypeError:
        return None
    points = [(v.x, v.y) for v in path.flattening(nearness)]
    if path.is_closed and len(points) > 3:
        return Polygon(points)
    return LineString(points) if len(points) >= 2 else None
