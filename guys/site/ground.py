"""The ground: levels from spot heights or from a grid of heights.

Spot heights are joined into triangles (Delaunay), a grid of heights into two between the centres of every four cells; the level is linear
in each.  Outside the surveyed ground there is no level: `Ground.level` gives NaN there, and who asks must say so, never extrapolate.

A spot-height file is CSV.  Its header says which column is which and in what unit: `east,north,level` in metres, or
`east [ft], north [ft], level [ft]`; `easting`, `northing`, `elevation`, `height`, `x`, `y`, `z` are understood too, other columns passed
over.
A grid of heights is the ASCII form with `ncols`, `nrows`, `xllcorner` or `xllcenter`, `yllcorner` or `yllcenter`, `cellsize` and, where
there are gaps, `NODATA_value`; rows from north to south.
"""

from __future__ import annotations

import csv
import io
import math
import re
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from guys import units

Array = NDArray[np.float64]

MEANINGS = {
    **dict.fromkeys(("east", "easting", "x"), "east"),
    **dict.fromkeys(("north", "northing", "y"), "north"),
    **dict.fromkeys(("level", "elevation", "height", "z"), "level"),
}
COLUMN = re.compile(r"^\s*([A-Za-z]+)\s*(?:[\[(_ ]\s*([A-Za-z]+)\s*[\])]?)?\s*$")
MOST_FAULTS = 10
"""Faulty lines of one file told one by one."""
ON_EDGE = 1e-6
"""[m] a place this near outside an edge is on it."""
FITTING = "a grid has two or more columns and rows, cells of some size, and a corner"
FLAT = 1e-9
"""Spread of spot heights across a line, relative to that along it, below which they make no ground."""


class GroundError(ValueError):
    """A file of heights that cannot be used; `reasons` are the faults found, each with its line."""

    def __init__(self, *reasons: str) -> None:
        self.reasons = reasons
        super().__init__("; ".join(reasons))


@dataclass(frozen=True)
class Ground:
    """Surveyed ground.  points : (point, 3) [m] east, north, level from the origin; triangles : (triangle, 3) rows of points."""

    points: Array
    triangles: NDArray[np.int64]

    def level(self, east: Array | float, north: Array | float) -> Array:
        """Level [m] at places [m] from the origin, of any shape; NaN outside the surveyed ground."""
        places = np.stack(np.broadcast_arrays(np.asarray(east, float), np.asarray(north, float)), axis=-1)
        flat = places.reshape(-1, 2)
        place, level = self._hits(flat)
        first, at = np.unique(place, return_index=True)
        out = np.full(len(flat), math.nan)
        out[first] = level[at]
        return out.reshape(places.shape[:-1])

    @cached_property
    def _boxes(self) -> Any:
        """An index of the boxes round all triangles, a little more for rounding."""
        import shapely

        corners = self.points[self.triangles][:, :, :2]
        low, high = corners.min(axis=1) - ON_EDGE, corners.max(axis=1) + ON_EDGE
        return shapely.STRtree(shapely.box(low[:, 0], low[:, 1], high[:, 0], high[:, 1]))

    def _hits(self, places: Array) -> tuple[NDArray[np.int64], Array]:
        """Which of the places (place, 2) lie in a triangle, ascending and each once for every triangle, and the level [m] there."""
        import shapely

        known = np.flatnonzero(np.isfinite(places).all(axis=1))
        row, triangle = self._boxes.query(shapely.points(places[known]))
        order = np.lexsort((triangle, row))
        place = known[row[order]]
        a, b, c = np.moveaxis(self.points[self.triangles[triangle[order]]], 1, 0)
        u, v, w = (b - a)[:, :2].T, (c - a)[:, :2].T, (places[place] - a[:, :2]).T
        twice = u[0] * v[1] - u[1] * v[0]
        s, t = (w[0] * v[1] - w[1] * v[0]) / twice, (u[0] * w[1] - u[1] * w[0]) / twice
        slack = ON_EDGE / np.sqrt(np.abs(twice))
        inside = np.flatnonzero((s >= -slack) & (t >= -slack) & (s + t <= 1 + slack))
        level = a[:, 2] + s * (b[:, 2] - a[:, 2]) + t * (c[:, 2] - a[:, 2])
        return place[inside], level[inside]


def joined(points: Array, triangles: NDArray[np.int64] | None = None) -> Ground:
    """Ground of heights (point, 3) [m]; raises GroundError where they make no surface."""
    if triangles is not None:
        return Ground(points, triangles)
    from scipy.spatial import Delaunay

    if len(points) < 3:
        raise GroundError(f"holds {len(points)} usable points; ground needs three or more")
    spread = np.linalg.svd(points[:, :2] - points[:, :2].mean(axis=0), compute_uv=False)
    if spread[1] <= FLAT * spread[0]:
        raise GroundError("its points lie on one line; ground needs three that do not")
    return Ground(points, np.asarray(Delaunay(points[:, :2]).simplices, dtype=np.int64))


@dataclass(frozen=True)
class Heights:
    """What a file says before it is placed.

    points : (point, 3) east, north, level, in metres or, where `plain`, in the file's own unit;  triangles : None: to be found
    """

    points: Array
    plain: bool
    triangles: NDArray[np.int64] | None = None


def spot_heights(text: str) -> Heights:
    """The points of a spot-height file; raises GroundError with every faulty line."""
    rows = table_of(text)
    columns, factor = _header(rows[0])
    reasons: list[str] = []
    found = [p for number, row in enumerate(rows[1:], 2) if (p := _point(row, number, columns, factor, reasons)) is not None]
    reasons += _twice(found)
    if reasons:
        more = [f"and {len(reasons) - MOST_FAULTS} more faulty lines"] if len(reasons) > MOST_FAULTS else []
        raise GroundError(*reasons[:MOST_FAULTS], *more)
    points = np.array([p[1:] for p in found]).reshape(-1, 3)
    return Heights(points, plain=all(f is None for f in factor.values()))


def table_of(text: str) -> list[list[str]]:
    """Rows of a CSV text; raises GroundError where it is none or has no header."""
    try:
        rows = list(csv.reader(io.StringIO(text)))
    except csv.Error as error:
        raise GroundError(f"is not CSV: {error}") from None
    if not rows:
        raise GroundError("is empty")
    if len(rows[0]) == 1 and ";" in rows[0][0]:
        raise GroundError("line 1: columns are parted by commas, not semicolons, and decimals by a point")
    return rows


def _header(cells: list[str]) -> tuple[dict[str, int], dict[str, float | None]]:
    columns: dict[str, int] = {}
    factor: dict[str, float | None] = {}
    for place, cell in enumerate(cells):
        match = COLUMN.match(cell.removeprefix("\ufeff"))
        meaning = MEANINGS.get(match[1].lower()) if match else None
        if match is None or meaning is None:
            continue
        if meaning in columns:
            raise GroundError(f'line 1: two columns for {meaning}: "{cells[columns[meaning]]}" and "{cell}"')
        columns[meaning], factor[meaning] = place, unit_of(match[2], cell)
    lacking = [m for m in ("east", "north", "level") if m not in columns]
    if lacking:
        raise GroundError(
            f'line 1: no column for {" and ".join(lacking)}; the header must say which is which, such as "east [m],north [m],level [m]"'
        )
    return columns, factor


def unit_of(word: str | None, cell: str) -> float | None:
    """Metres in the unit a column's head names, None where it names none; raises GroundError."""
    if word is None:
        return None
    try:
        return units.parse(f"1 {word}", "length")
    except units.UnitError:
        raise GroundError(f'line 1: "{cell}": {word} is not a unit of length; write m or ft') from None


def _point(
    row: list[str], number: int, columns: dict[str, int], factor: dict[str, float | None], reasons: list[str]
) -> tuple[int, float, float, float] | None:
    if not any(cell.strip() for cell in row):
        return None
    out = []
    for meaning in ("east", "north", "level"):
        cell = row[columns[meaning]].strip() if columns[meaning] < len(row) else ""
        try:
            value = float(cell)
        except ValueError:
            value = math.nan
        if not math.isfinite(value):
            reasons.append(f"line {number}: " + (f'"{cell}" is not a number for the {meaning}' if cell else f"the point has no {meaning}"))
            return None
        out.append(value * (factor[meaning] or 1.0))
    return number, out[0], out[1], out[2]


def _twice(found: list[tuple[int, float, float, float]]) -> Iterator[str]:
    seen: dict[tuple[float, float], tuple[int, float]] = {}
    for number, east, north, level in found:
        before = seen.setdefault((east, north), (number, level))
        if before[1] != level:
            yield f"line {number}: the same place as line {before[0]} with another level"


def grid_of_heights(text: str) -> Heights:
    """The cell centres of an ASCII grid of heights, gaps left out; raises GroundError."""
    words = text.split()
    head: dict[str, float] = {}
    while len(words) > 2 * len(head) + 1 and words[2 * len(head)].replace("_", "").isalpha():
        key = words[2 * len(head)].lower()
        try:
            head[key] = float(words[2 * len(head) + 1])
        except ValueError:
            raise GroundError(f"its header says {key} {words[2 * len(head) + 1]}, which is not a number") from None
    lacking = [k for k in ("ncols", "nrows", "cellsize") if k not in head]
    corner = [next((k for k in (f"{a}llcorner", f"{a}llcenter") if k in head), None) for a in "xy"]
    if lacking or None in corner:
        raise GroundError(f"its header lacks {' and '.join(lacking or ['xllcorner or xllcenter, yllcorner or yllcenter'])}")
    unfit = [k for k, value in head.items() if not (k == "nodata_value" or _fits(k, value))]
    if unfit:
        raise GroundError(f"its header says {unfit[0]} {head[unfit[0]]:g}; {FITTING}")
    columns, rows, size = int(head["ncols"]), int(head["nrows"]), head["cellsize"]
    try:
        values = np.array(words[2 * len(head) :], dtype=float)
    except ValueError as error:
        raise GroundError(f"a height is not a number: {error}") from None
    if len(values) != columns * rows:
        raise GroundError(f"holds {len(values)} heights; its header says {columns} x {rows}")
    x0, y0 = (head[str(k)] + (0.5 * size if str(k).endswith("corner") else 0.0) for k in corner)
    east, north = np.meshgrid(x0 + size * np.arange(columns), y0 + size * np.arange(rows)[::-1])
    known = np.isfinite(values) & (values != head.get("nodata_value", math.nan))
    triangles = _between_cells(known.reshape(rows, columns))
    if not len(triangles):
        raise GroundError("holds no four neighbouring heights; ground needs them")
    return Heights(np.column_stack([east.ravel(), north.ravel(), values]), True, triangles)


def _fits(key: str, value: float) -> bool:
    """Whether a number of the header can be what it says."""
    if key in ("ncols", "nrows"):
        return value >= 2 and value % 1 == 0
    return math.isfinite(value) and (key != "cellsize" or value > 0)


def _between_cells(known: NDArray[np.bool_]) -> NDArray[np.int64]:
    """Two triangles between the centres of every four cells whose heights are known."""
    number = np.arange(known.size).reshape(known.shape)
    whole = known[:-1, :-1] & known[1:, :-1] & known[:-1, 1:] & known[1:, 1:]
    a, b, c, d = (n[whole] for n in (number[:-1, :-1], number[1:, :-1], number[:-1, 1:], number[1:, 1:]))
    return np.concatenate([np.column_stack([a, b, d]), np.column_stack([a, d, c])])
