"""The table [site], and what it does to the rest of a file: anchors by latitude and longitude, levels from the ground.

Once the site is read everything is in metres from its origin, and the other rules need not know of it.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import replace
from pathlib import Path

from guys import units
from guys.scenario import drawn
from guys.scenario.anchor_entry import AnchorEntry
from guys.scenario.draft import Draft
from guys.scenario.keys import Finding, Key, clipped
from guys.scenario.model import GroundFoot
from guys.scenario.site_table import DegreesOrigin, SiteEntry
from guys.site import Grid, Site, read_site
from guys.site.grid import GridError, grid_at, grid_at_degrees, unit
from guys.site.read import FAR, Asked

FOLLOWED = 0.15
"""[m] a foot this near the surveyed ground stands on it."""
NEEDS_GRID = "lat and lon need [site] with crs and origin; give bearing and radius, or east and north"


def placed(draft: Draft, path: str | None) -> tuple[Draft, Site | None, list[Finding]]:
    """The draft with its anchors in metres from the origin, the site, and every fault of the two."""
    entry = draft.site
    if entry is None:
        draft, lost = anchors_placed(draft, None)
        return draft, None, lost
    findings = list(_needs(entry))
    grid, more = _grid(entry) if not findings else (None, [])
    findings += more
    if findings:
        return _without_degrees(draft), None, findings
    site, faults = read_site(_asked(entry), grid, Path(path).parent if path else Path())
    findings = [Finding(("site", fault.key), fault.message) for fault in faults]
    if findings:
        draft, lost = _in_metres(draft, grid)
        return draft, None, findings + lost
    findings += _outside(draft, site)
    draft, lost = anchors_placed(draft, site)
    return draft, site, findings + lost


def anchors_placed(draft: Draft, site: Site | None) -> tuple[Draft, list[Finding]]:
    """The draft with its anchors in metres from the origin and on the ground, and every fault of doing so."""
    draft, lost = _in_metres(draft, None if site is None else site.grid)
    draft, more = (draft, []) if site is None else _on_the_ground(draft, site)
    return draft, lost + more


def _asked(entry: SiteEntry) -> Asked:
    drawing_unit = None if entry.drawing_unit is None else units.parse(f"1 {entry.drawing_unit}", "length")
    return Asked(entry.boundary, entry.obstacles, entry.ground, entry.setback, entry.declination, drawing_unit)


def _needs(entry: SiteEntry) -> Iterator[Finding]:
    if entry.crs is not None and entry.origin is None:
        yield Finding(
            ("site", "origin"), 'missing; crs needs the place of the origin, such as origin = { lat = 51.0, lon = 3.0, level = "32 m" }'
        )
    if entry.crs is None and entry.origin is not None:
        yield Finding(("site", "crs"), 'missing; origin needs it, such as crs = "EPSG:32631"; leave both out for local metres')
    if entry.setback and entry.boundary is None:
        yield Finding(("site", "setback"), "needs a boundary; give boundary, or leave setback out")


def _grid(entry: SiteEntry) -> tuple[Grid | None, list[Finding]]:
    if entry.crs is None or entry.origin is None:
        return None, []
    try:
        metres = unit(entry.crs)
    except GridError as error:
        return None, [Finding(("site", "crs"), str(error))]
    try:
        if isinstance(entry.origin, DegreesOrigin):
            return grid_at_degrees(entry.crs, entry.origin.lat, entry.origin.lon, entry.origin.level), []
        return grid_at(entry.crs, entry.origin.east / metres, entry.origin.north / metres, entry.origin.level), []
    except GridError as error:
        return None, [Finding(("site", "origin"), str(error))]


def _without_degrees(draft: Draft) -> Draft:
    """Anchors given by latitude and longitude left out, so that the other rules still run."""
    return replace(draft, anchor=tuple(None if a is None or a.lat is not None or a.lon is not None else a for a in draft.anchor))


def _in_metres(draft: Draft, grid: Grid | None) -> tuple[Draft, list[Finding]]:
    """Latitudes and longitudes turned into metres; each fault once."""
    out: list[AnchorEntry | None] = []
    findings: list[Finding] = []
    for n, a in enumerate(draft.anchor):
        if a is None or (a.lat is None and a.lon is None):
            out.append(a)
            continue
        key: Key = ("anchor", n)
        found, text = _from_degrees(a, grid)
        out.append(found)
        findings += [] if text is None else [Finding(key, text)]
    return replace(draft, anchor=tuple(out)), findings


def _from_degrees(entry: AnchorEntry, grid: Grid | None) -> tuple[AnchorEntry | None, str | None]:
    others = [name for name in ("bearing", "radius", "east", "north") if getattr(entry, name) is not None]
    if entry.lat is None or entry.lon is None or others:
        given = [*others, *(name for name in ("lat", "lon") if getattr(entry, name) is not None)]
        return None, f"has {' and '.join(given)}; give bearing and radius, east and north, or lat and lon"
    if grid is None:
        return None, NEEDS_GRID
    try:
        east, north = (float(x) for x in grid.from_degrees(entry.lat, entry.lon))
    except GridError as error:
        return None, str(error)
    if math.hypot(east, north) > FAR:
        swapped = "; are lat and lon swapped?" if abs(entry.lon) <= 90 and _near_swapped(entry, grid) else ""
        return None, f"lies {math.hypot(east, north) / 1000:,.0f} km from the site's origin{swapped}"
    return entry.model_copy(update={"east": east, "north": north, "lat": None, "lon": None}), None


def _near_swapped(entry: AnchorEntry, grid: Grid) -> bool:
    try:
        return math.hypot(*(float(x) for x in grid.from_degrees(entry.lon or 0.0, entry.lat or 0.0))) <= FAR
    except GridError:
        return False


def _first_foot(draft: Draft) -> GroundFoot | None:
    spar = draft.spar[0] if draft.spar else None
    return spar.foot if spar is not None and isinstance(spar.foot, GroundFoot) else None


def _on_the_ground(draft: Draft, site: Site) -> tuple[Draft, list[Finding]]:
    """Levels left out taken from the ground."""
    foot = _first_foot(draft)
    if site.ground is None or foot is None:
        return draft, []
    out: list[AnchorEntry | None] = []
    findings: list[Finding] = []
    for n, a in enumerate(draft.anchor):
        known = (
            a is not None
            and a.level is None
            and ((a.bearing is not None and a.radius is not None) or (a.east is not None and a.north is not None))
        )
        if a is None or not known:
            out.append(a)
            continue
        east, north, _ = drawn.anchor_place(a, (foot.east, foot.north, foot.level))
        level = float(site.ground.level(east, north))
        if math.isnan(level):
            findings.append(
                Finding(("anchor", n), f"{_where(east, north)}, is outside the surveyed ground; give its level, or survey farther")
            )
        out.append(a if math.isnan(level) else a.model_copy(update={"level": level}))
    return replace(draft, anchor=tuple(out)), findings


def _where(east: float, north: float) -> str:
    return f"{units.both(east, 'length')} east, {units.both(north, 'length')} north of the origin"


def _outside(draft: Draft, site: Site) -> Iterator[Finding]:
    """Feet outside the boundary."""
    from shapely import Point

    for n, spar in enumerate(draft.spar):
        if site.boundary is not None and spar is not None and isinstance(spar.foot, GroundFoot):
            away = site.boundary.distance(Point(spar.foot.east, spar.foot.north))
            if away > 0:
                text = f'spar "{clipped(spar.name)}" stands {units.both(away, "length")} outside the boundary'
                yield Finding(("spar", n, "foot"), text)


def warnings(feet: Sequence[tuple[str, GroundFoot]], site: Site) -> Iterator[str]:
    """Feet that do not stand on the surveyed ground, and what reading the site's files left to say."""
    for name, foot in feet if site.ground is not None else ():
        level = float(site.ground.level(foot.east, foot.north)) if site.ground is not None else math.nan
        if math.isnan(level):
            yield f"spar {name}: its foot is outside the surveyed ground"
        elif abs(level - foot.level) > FOLLOWED:
            found, given = units.both(level, "length"), units.both(foot.level, "length")
            yield f"spar {name}: the surveyed ground lies at {found} where its foot stands at {given}"
    if site.grid is not None and site.grid.accuracy > 0.5:
        within = f"within {site.grid.accuracy:g} m only, as PROJ states for this change of datum"
        yield f"{site.grid.crs}: places by latitude and longitude are {within}"
    yield from site.notes
