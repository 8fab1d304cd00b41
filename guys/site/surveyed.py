"""Pegs as surveyed: a CSV of names and places, in the coordinate system, in metres from the origin, or by latitude and longitude.

    name,east,north,level        or        name,lat,lon,level

East, north and level may carry a unit in the header, as in a file of spot heights.  Places in a coordinate system carry levels above the
sea.  A level may be left out, cell or column: the planned one stands.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from pathlib import Path

from guys.site.grid import Grid, GridError
from guys.site.ground import COLUMN, MEANINGS, GroundError, table_of, unit_of

FAR = 100.0
"""[m] from where it was planned, beyond which a peg is a slip, not a peg."""
RISE = 30.0
"""[m] above or below where it was planned, likewise."""
LEVELS = "levels count from the origin beside metres from it, from the sea beside coordinates of a system"
OFF = 1.0
"""[m] from where it was planned, beyond which another reading of the file is tried."""
NEARER = 10.0
"""So many times nearer another reading brings all pegs that is taken for the right one."""
UNITS = (
    ("metres", 1.0, "write east [m]"),
    ("feet", 0.3048, "write east [ft]"),
    ("US survey feet", 1200 / 3937, "leave the unit out: plain numbers are in the unit of the coordinate system"),
)
"""Name, metres and what to do in the header."""
Place = tuple[float, float, float]


class SurveyError(ValueError):
    """A file of pegs that cannot be used; `reasons` are the faults found."""

    def __init__(self, *reasons: str) -> None:
        self.reasons = reasons
        super().__init__("; ".join(reasons))


def read_pegs(path: Path, grid: Grid | None, planned: Mapping[str, Place]) -> dict[str, Place]:
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
    found, reasons = _pegs(rows, columns, factor, grid, planned)
    if reasons:
        raise SurveyError(*reasons)
    if not found:
        raise SurveyError("holds no pegs")
    slip = _slip(rows, columns, factor, grid, planned, _most_off(found, planned))
    reasons = [slip] if slip else list(_astray(found, planned))
    if reasons:
        raise SurveyError(*reasons)
    return found


def _pegs(
    rows: Sequence[list[str]], columns: Mapping[str, int], factor: Mapping[str, float], grid: Grid | None, planned: Mapping[str, Place]
) -> tuple[dict[str, Place], list[str]]:
    """Every peg of the table, and what is wrong with it."""
    found: dict[str, Place] = {}
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
    return found, reasons


def _most_off(found: Mapping[str, Place], planned: Mapping[str, Place]) -> float:
    """[m] in plan, of the peg that is off most."""
    return max(math.dist(place[:2], planned[name][:2]) for name, place in found.items())


def _slip(
    rows: Sequence[list[str]],
    columns: Mapping[str, int],
    factor: Mapping[str, float],
    grid: Grid | None,
    planned: Mapping[str, Place],
    off: float,
) -> str:
    """How pegs that are far off would all be where they were planned: columns or units taken for others; empty where no way."""
    if off <= OFF:
        return ""
    swap = {"east": "north", "north": "east", "lat": "lon", "lon": "lat"}
    swapped = {swap.get(meaning, meaning): k for meaning, k in columns.items()}
    read_as = [("with the columns swapped", swapped, dict(factor), "swap them")]
    read_as += [(f"in {unit}", dict(columns), {**factor, "east": metres, "north": metres}, cure) for unit, metres, cure in UNITS]
    for words, as_columns, as_factor, cure in read_as:
        found, reasons = _pegs(rows, as_columns, as_factor, grid, planned)
        if not reasons and (left := _most_off(found, planned)) < off / NEARER:
            read = f"pegs lie up to {off:,.1f} m from where they were planned, read {words} within {max(left, 0.01):.2f} m"
            return f"{read}; in the header, {cure}"
    return ""


def _astray(found: Mapping[str, Place], planned: Mapping[str, Place]) -> Iterator[str]:
    """Pegs that are too far off to be pegs."""
    for name, place in found.items():
        off, rise = math.dist(place[:2], planned[name][:2]), place[2] - planned[name][2]
        if off > FAR:
            yield f'"{name}" lies {off:,.0f} m from where it was planned; are the columns or the units swapped?'
        elif abs(rise) > RISE:
            yield f'"{name}" lies {abs(rise):,.0f} m {"above" if rise > 0 else "below"} where it was planned; {LEVELS}'


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
    planned: Mapping[str, Place],
) -> tuple[str, Place]:
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
