"""Pegs as surveyed: a CSV of names and places, in the coordinate system, in metres from the origin, or by latitude and longitude.

    name,east,north,level        or        name,lat,lon,level

East, north and level may carry a unit in the header, as in a file of spot heights.  Places in a coordinate system carry levels above the
sea.  A level may be left out, cell or column: the planned one stands.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from pathlib import Path

from guys.site.grid import Grid, GridError
from guys.site.ground import COLUMN, MEANINGS, GroundError, table_of, unit_of

FAR = 100.0
"""[m] from where it was planned, beyond which a peg is a slip, not a peg."""


class SurveyError(ValueError):
    """A file of pegs that cannot be used; `reasons` are the faults found."""

    def __init__(self, *reasons: str) -> None:
        self.reasons = reasons
        super().__init__("; ".join(reasons))


def read_pegs(path: Path, grid: Grid | None, planned: Mapping[str, tuple[float, float, float]]) -> dict[str, tuple[float, float, float]]:
    """Places (east, north, level) [m] from the origin by name; raises SurveyError with every fault found."""
    try:
        text = path.read_text(encoding="utf-8-sig")
    except (OSError, UnicodeDecodeError) as error:
        raise SurveyError("no such file" if isinstance(error, FileNotFoundError) else f"cannot be read: {error}") from None
    try:
        rows = table_of(text)
        columns, factor = _header(rows[0])
    except GroundError as error:
        raise SurveyError(*error.reasons) from None
    found: dict[str, tuple[float, float, float]] = {}
    reasons: list[str] = []
    for number, row in enumerate(rows[1:], 2):
        if any(cell.strip() for cell in row):
            try:
                name, place = _peg(row, columns, factor, grid, planned)
                if name in found:
                    raise SurveyError(f'"{name}" stands twice')
                found[name] = place
            except (SurveyError, GridError) as error:
                reasons.append(f"line {number}: {error}")
    if reasons:
        raise SurveyError(*reasons)
    if not found:
        raise SurveyError("holds no pegs")
    return found


def _header(cells: list[str]) -> tuple[dict[str, int], dict[str, float]]:
    columns: dict[str, int] = {}
    factor: dict[str, float] = {}
    for place, cell in enumerate(cells):
        match = COLUMN.match(cell)
        word = match[1].lower() if match else ""
        meaning = {"name": "name", "anchor": "name", "peg": "name", "lat": "lat", "latitude": "lat", "lon": "lon", "longitude": "lon"}.get(
            word, MEANINGS.get(word)
        )
        if match is None or meaning is None:
            continue
        columns[meaning] = place
        own = unit_of(match[2], cell) if meaning in ("east", "north", "level") else None
        if own is not None:
            factor[meaning] = own
    if "name" not in columns or not ({"east", "north"} <= set(columns) or {"lat", "lon"} <= set(columns)):
        raise SurveyError("line 1: the header must name its columns: name,east,north,level or name,lat,lon,level")
    return columns, factor


def _peg(
    row: list[str],
    columns: Mapping[str, int],
    factor: Mapping[str, float],
    grid: Grid | None,
    planned: Mapping[str, tuple[float, float, float]],
) -> tuple[str, tuple[float, float, float]]:
    cells = {meaning: row[place].strip() if place < len(row) else "" for meaning, place in columns.items()}
    name = cells["name"]
    if name not in planned:
        raise SurveyError(f'no anchor "{name}"; those of the scenario are {", ".join(planned)}')
    level = _number(cells["level"], "level") if cells.get("level") else None
    if not {"east", "north"} <= set(columns):
        if grid is None:
            raise SurveyError("latitude and longitude need [site] with crs and origin")
        east, north = grid.from_degrees(_number(cells["lat"], "latitude"), _number(cells["lon"], "longitude"))
        places = [(float(east), float(north))]
        heights = [None if level is None else level * factor.get("level", 1.0) - grid.level]
    else:
        x, y = (_number(cells[m], m) for m in ("east", "north"))
        scaled = level if level is None else level * factor.get("level", 1.0)
        places, heights = [(x * factor.get("east", 1.0), y * factor.get("north", 1.0))], [scaled]
        if grid is not None:
            unit = {m: factor.get(m, grid.unit) / grid.unit for m in ("east", "north")}
            east, north = grid.from_grid(x * unit["east"], y * unit["north"])
            places.append((float(east), float(north)))
            heights.append(None if level is None else level * factor.get("level", grid.unit) - grid.level)
    here = planned[name]
    off = [math.hypot(e - here[0], n - here[1]) for e, n in places]
    k = off.index(min(off))
    if off[k] > FAR:
        raise SurveyError(f'"{name}" lies {off[k]:,.0f} m from where it was planned; are the columns or the units swapped?')
    found = heights[k]
    return name, (*places[k], here[2] if found is None else found)


def _number(cell: str, what: str) -> float:
    try:
        value = float(cell)
    except ValueError:
        value = math.nan
    if not math.isfinite(value):
        raise SurveyError(f'"{cell}" is not a number for the {what}' if cell else f"the {what} is missing")
    return value
