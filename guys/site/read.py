"""Reads the files a scenario's [site] names and places everything in metres from the site's origin.

Coordinates of a file are in degrees (GeoJSON), in the coordinate system's own numbers, or, without one, in metres from the origin.
What falls nowhere near is a fault that says what it looks like: degrees taken for metres, axes swapped, feet taken for metres.
"""

from __future__ import annotations

import hashlib
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from difflib import get_close_matches
from pathlib import Path
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from guys import units
from guys.site import features, ground
from guys.site.features import Feature, FeatureError, Layer
from guys.site.grid import Grid, GridError
from guys.site.ground import Ground, GroundError
from guys.site.model import KINDS, Obstacle, Site

if TYPE_CHECKING:
    from shapely.geometry.base import BaseGeometry

Array = NDArray[np.float64]
LARGEST = 20_000_000
"""Bytes a site file may have."""
MOST = 1_000
"""Shapes a site file may have: each is looked at beside every anchor and cable, and drawn."""
FAR = 5_000.0
"""[m] from the origin, beyond which nothing of a site can be meant: millimetres of a fence 5 m away taken for metres."""
TINY = 0.05
"""[m] or degrees: a whole file within this is in degrees (5 km), or no site."""
FINE = 4
"""Decimals of a metre that a place may have; one with more is in degrees."""
PLAIN = 180.0
"""Numbers of a grid are greater: those within are degrees, or metres from the origin."""
LENGTHS = ("clearance", "headroom", "height", "distance")
KNOWN = ("name", "kind", *LENGTHS)
AREAS = ("Polygon", "MultiPolygon")


@dataclass(frozen=True)
class SiteFault:
    """Something wrong with a file of the site; key : the key of [site] that names it."""

    key: str
    message: str


@dataclass(frozen=True)
class Asked:
    """What [site] asks for: file names (None: not given), lengths [m], declination [rad]."""

    boundary: str | None = None
    obstacles: str | None = None
    ground: str | None = None
    setback: float = 0.0
    declination: float | None = None
    drawing_unit: float | None = None


def read_site(asked: Asked, grid: Grid | None, folder: Path) -> tuple[Site, list[SiteFault]]:
    """The site and every fault found; file names are relative to `folder`."""
    faults: list[SiteFault] = []
    files: list[tuple[str, str]] = []
    notes: list[str] = []

    def read(key: str, work: Callable[[Path, bytes], Any]) -> Any:
        name = getattr(asked, key)
        if name is None:
            return None
        try:
            path = folder / name
            content = _content(path)
            files.append((name, hashlib.sha256(content).hexdigest()))
            return work(path, content)
        except (FeatureError, GroundError) as error:
            faults.extend(SiteFault(key, f"{name}: {reason}") for reason in error.reasons)
        except (GridError, units.UnitError) as error:
            faults.append(SiteFault(key, f"{name}: {error}"))
        return None

    def shapes(path: Path, content: bytes) -> list[Feature]:
        layer = _layer(path, content, asked.drawing_unit)
        if layer.passed_over:
            notes.append(f"{path.name}: passed over what is no shape: {', '.join(layer.passed_over)}")
        found = _placed(layer, grid)
        notes.extend(f"{path.name}: {text}" for text in _strays(found))
        return found

    boundary = read("boundary", lambda path, content: _boundary(shapes(path, content)))
    obstacles = read("obstacles", lambda path, content: _obstacles(shapes(path, content)))
    surveyed = read("ground", lambda path, content: _ground(path, content, grid))
    site = Site(grid, boundary, tuple(obstacles or ()), surveyed, asked.setback, asked.declination, tuple(files), tuple(notes))
    return site, faults


def _content(path: Path) -> bytes:
    try:
        size = path.stat().st_size
        if size > LARGEST:
            raise FeatureError(f"is {size / 1e6:.0f} MB; more than {LARGEST / 1e6:.0f} MB is no site: cut it down to the surroundings")
        return path.read_bytes()
    except OSError as error:
        raise FeatureError("no such file" if isinstance(error, FileNotFoundError) else f"cannot be read: {error.strerror}") from None


def _text(content: bytes) -> str:
    try:
        return content.decode("utf-8-sig")
    except UnicodeDecodeError:
        raise FeatureError("is not UTF-8 text") from None


def _layer(path: Path, content: bytes, drawing_unit: float | None) -> Layer:
    layer = features.dxf(str(path), drawing_unit) if path.suffix.lower() == ".dxf" else features.geojson(_text(content))
    if not layer.features:
        passed = f", only {', '.join(layer.passed_over)}" if layer.passed_over else ""
        raise FeatureError(f"holds no shapes{passed}; leave the key out where there are none")
    if len(layer.features) > MOST:
        raise FeatureError(f"holds {len(layer.features):,} shapes; more than {MOST:,} are no site: cut it down to the surroundings")
    return layer


# ---------------------------------------------------------------- placing


def _placed(layer: Layer, grid: Grid | None) -> list[Feature]:
    """The features in metres from the origin."""
    from shapely import get_coordinates, transform

    everything = np.concatenate([get_coordinates(f.shape) for f in layer.features])
    place = _placing(layer, grid, everything)
    out = [Feature(transform(f.shape, place), f.properties, f.place) for f in layer.features]
    bad = [reason for f in out if (reason := _invalid(f, place)) is not None]
    if bad:
        raise FeatureError(*bad)
    return out


def _placing(layer: Layer, grid: Grid | None, everything: Array) -> Callable[[Array], Array]:
    if grid is not None and layer.degrees:
        return _from_degrees(grid, everything)
    if layer.crs is not None and (grid is None or not _same(layer.crs, grid.crs)):
        ours = "the scenario gives none" if grid is None else f"the scenario's is {grid.crs}"
        raise FeatureError(f"is in {layer.crs}; {ours}: give the file in that system, or in degrees without the member crs")
    if grid is None:
        if layer.unit is None and _like_degrees(everything):
            raise FeatureError(f"spans {_span(everything)}: degrees taken for metres? GeoJSON is in degrees; give crs and origin in [site]")
        metres = layer.unit or 1.0
        return _near(lambda points: metres * points, everything, "metres from the origin")
    if layer.crs is not None and np.abs(everything).max() <= PLAIN:
        like = (
            "degrees; leave its member crs out" if _like_degrees(everything) else "metres from the origin; give coordinates of that system"
        )
        raise FeatureError(f"names {layer.crs}, but its numbers ({_first(everything)}) look like {like}")
    factor = layer.unit / grid.unit if layer.unit is not None else 1.0
    return _near(lambda points: np.column_stack(grid.from_grid(*(factor * points).T)), everything, f"coordinates of {grid.crs}")


def _strays(placed: Sequence[Feature]) -> Iterator[str]:
    """Features that lie nowhere near while others do: perhaps not in the coordinates of the rest."""
    from shapely import Point, distance

    away = [(float(distance(f.shape, Point(0.0, 0.0))), f.place) for f in placed]
    far = [(at, name) for at, name in away if at > FAR]
    if far:
        at, name = far[0]
        yield f"{len(far)} of {len(placed)} shapes lie beyond {FAR / 1000:g} km from the origin, such as {name}, {_far(at)} away"


def _like_degrees(everything: Array) -> bool:
    """Whether a whole file is so small that it must be in degrees; a lone point of a site in metres is given to a tenth of a millimetre."""
    span = float(np.ptp(everything, axis=0).max())
    return 0 < span < TINY or (span == 0 and bool((everything != everything.round(FINE)).any()))


def _from_degrees(grid: Grid, everything: Array) -> Callable[[Array], Array]:
    if np.abs(everything[:, 0]).max() > 180 or np.abs(everything[:, 1]).max() > 180:
        cure = 'give longitude and latitude, or name the grid in its member "crs"'
        raise FeatureError(f"its numbers ({_first(everything)}) are no degrees but metres or feet of a grid; {cure}")
    return _near(lambda points: np.column_stack(grid.from_degrees(points[:, 1], points[:, 0])), everything, "longitude, latitude")


def _near(place: Callable[[Array], Array], everything: Array, meant: str) -> Callable[[Array], Array]:
    """The placing, once the whole lies near the origin; else a fault that says what would lie near."""
    away = _distance(place, everything)
    if away <= FAR:
        return place
    if _distance(place, everything[:, ::-1]) <= FAR:
        raise FeatureError(
            f"read as {meant} it lies {_far(away)} from the site's origin, with the two swapped it lies near: the axes are swapped"
        )
    taken, factor = min((("feet", 0.3048), ("millimetres", 1e-3)), key=lambda unit: _distance(place, unit[1] * everything))
    if _distance(place, factor * everything) <= FAR:
        raise FeatureError(
            f"read as {meant} it lies {_far(away)} from the site's origin, read as {taken} it lies near: {taken} taken for metres?"
        )
    plain = "; metres from the origin? with crs a file is in degrees or in that system" if np.abs(everything).max() <= PLAIN else ""
    raise FeatureError(f"read as {meant} ({_first(everything)}) it lies {_far(away)} from the site's origin{plain}")


def _distance(place: Callable[[Array], Array], points: Array) -> float:
    """Distance [m] of the nearest point from the origin; far where it cannot be placed at all."""
    try:
        placed = place(points)
    except GridError:
        return float("inf")
    away = np.hypot(*placed.T)
    return float(np.min(away)) if np.isfinite(away).all() else float("inf")


def _far(away: float) -> str:
    return "beyond the grid's reach" if not np.isfinite(away) else f"{away / 1000:,.0f} km"


def _span(points: Array) -> str:
    east, north = np.ptp(points, axis=0)
    return f"{east:.3g} by {north:.3g}"


def _first(points: Array) -> str:
    return f"{points[0, 0]:.10g}, {points[0, 1]:.10g}"


def _same(a: str, b: str) -> bool:
    from pyproj import CRS
    from pyproj.exceptions import CRSError

    try:
        return bool(CRS.from_user_input(a) == CRS.from_user_input(b))
    except CRSError:
        return False


def _invalid(feature: Feature, place: Callable[[Array], Array]) -> str | None:
    from shapely import is_valid, is_valid_reason

    if is_valid(feature.shape):
        return None
    what, _, where = is_valid_reason(feature.shape).partition("[")
    east, north = (float(x) for x in where.rstrip("]").split()[:2]) if where else (float("nan"), float("nan"))
    at = f"{east:.2f} m east, {north:.2f} m north of the origin"
    return f"{feature.place}: {what.strip().lower()} {at}; draw its outline without crossing itself"


# ---------------------------------------------------------------- meaning


def _boundary(found: Sequence[Feature]) -> BaseGeometry:
    from shapely import union_all

    lines = [
        f"{f.place} is no polygon; draw the boundary as one closed outline, the ground anchors must lie in"
        for f in found
        if f.shape.geom_type not in AREAS
    ]
    if lines:
        raise FeatureError(*lines)
    return union_all([f.shape for f in found])


def _obstacles(found: Sequence[Feature]) -> list[Obstacle]:
    reasons: list[str] = []
    out = [_obstacle(f, n, reasons) for n, f in enumerate(found)]
    if reasons:
        raise FeatureError(*reasons)
    return out


def _obstacle(feature: Feature, number: int, reasons: list[str]) -> Obstacle:
    told = {key: value for key, value in feature.properties.items() if value is not None}
    reasons += [f"{feature.place}: {text}" for text in _unfit(told)]
    kind = str(told.get("kind", ""))
    name = str(told.get("name") or f"{kind} {number + 1}")
    lengths = {key: _length(told[key], f"{feature.place}: {key}", reasons) for key in LENGTHS if key in told}
    if kind == "line" and ("height" not in lengths or "distance" not in lengths):
        reasons.append(f'{feature.place}: a line needs height and distance, such as "height": "9 m", "distance": "6 m"')
    return Obstacle(name, kind, feature.shape, **lengths)  # type: ignore[arg-type]


def _unfit(told: dict[str, Any]) -> Iterator[str]:
    kind = told.get("kind")
    if kind is None:
        yield f"has no kind; write one of {', '.join(KINDS)}"
    elif kind not in KINDS:
        yield f'"{kind}" is not a kind; write one of {", ".join(KINDS)}'
    for key in told:
        close = get_close_matches(key.lower(), KNOWN, 1, 0.75)
        if key not in KNOWN and close:
            yield f'"{key}" looks like {close[0]}, which would not be heeded as it stands'


def _length(value: Any, what: str, reasons: list[str]) -> float | None:
    if not isinstance(value, str):
        reasons.append(f'{what}: {value} has no unit; write a string such as "{value} m"')
        return None
    try:
        found = units.parse(value, "length")
    except units.UnitError as error:
        reasons.append(f"{what}: {error}")
        return None
    if found < 0:
        reasons.append(f"{what}: {value} is negative")
    return found


def _ground(path: Path, content: bytes, grid: Grid | None) -> Ground:
    text = _text(content)
    heights = ground.grid_of_heights(text) if path.suffix.lower() == ".asc" else ground.spot_heights(text)
    plan, level = heights.points[:, :2], heights.points[:, 2]
    if len(plan) > 1 and _like_degrees(plan):
        raise GroundError(
            f"spans {_span(plan)}: degrees taken for metres? give east and north from the origin, or in the coordinate system"
        )

    def as_local(points: Array) -> Array:
        return points

    def as_grid(points: Array) -> Array:
        assert grid is not None
        return np.column_stack(grid.from_grid(*(points if heights.plain else points / grid.unit).T))

    if grid is not None and _distance(as_grid, plan) < _distance(as_local, plan):
        metres = grid.unit if heights.plain else 1.0
        placed, level = _near(as_grid, plan, f"east and north of {grid.crs}")(plan), level * metres - grid.level
    else:
        meant = "east and north from the origin" + ("" if grid is None else f" or of {grid.crs}")
        placed = _near(as_local if grid is None or _distance(as_local, plan) <= FAR else as_grid, plan, meant)(plan)
    return ground.joined(np.column_stack([placed, level]), heights.triangles)
