"""The table [site], and what it does to the rest of a file: feet and anchors by latitude and longitude, levels from the ground.

Once the site is read everything is in metres from its origin, and the other rules need not know of it.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import replace
from pathlib import Path

from guys import units
from guys.scenario import drawn, feet
from guys.scenario.anchor_entry import AnchorEntry
from guys.scenario.degrees import SAID, from_degrees
from guys.scenario.draft import Draft
from guys.scenario.keys import Finding, Key, clipped
from guys.scenario.model import GroundFoot
from guys.scenario.site_table import GridOrigin, SiteEntry
from guys.site import Grid, Site, read_site
from guys.site.grid import GridError, grid_at, grid_at_degrees, unit
from guys.site.read import Asked

FOLLOWED = 0.15
"""[m] a foot this near the surveyed ground stands on it."""
MIXED = 20.0
"""[m] a foot this far off it: levels above the sea among levels from the origin, rather than a roof or a pit."""


def placed(draft: Draft, path: str | None) -> tuple[Draft, Site | None, list[Finding]]:
    """The draft with its feet and anchors in metres from the origin, the site, and every fault of them."""
    entry = draft.site
    if entry is None:
        return _placed(draft, None, None)
    first = feet.by_degrees(draft)
    findings = list(_needs(entry, first))
    grid, more = _grid(entry, first) if not findings else (None, [])
    findings += more
    if findings:
        draft, lost = feet.in_metres(_without_degrees(draft), None, None)
        return draft, None, findings + lost
    site, faults = read_site(_asked(entry), grid, Path(path).parent if path else Path())
    findings = [Finding(("site", fault.key), fault.message) for fault in faults]
    if findings:
        draft, lost = feet.in_metres(draft, grid, None)
        draft, more = _in_metres(draft, grid)
        return draft, None, findings + lost + more
    return _placed(draft, site, grid)


def _placed(draft: Draft, site: Site | None, grid: Grid | None) -> tuple[Draft, Site | None, list[Finding]]:
    draft, lost = feet.in_metres(draft, grid, None if site is None else site.ground)
    outside = [] if site is None else list(_outside(draft, site))
    draft, more = anchors_placed(draft, site)
    return draft, site, lost + outside + more


def anchors_placed(draft: Draft, site: Site | None) -> tuple[Draft, list[Finding]]:
    """The draft with its anchors in metres from the origin and on the ground, and every fault of doing so."""
    draft, lost = _in_metres(draft, None if site is None else site.grid)
    draft, more = (draft, []) if site is None else _on_the_ground(draft, site)
    return draft, lost + more


def _asked(entry: SiteEntry) -> Asked:
    drawing_unit = None if entry.drawing_unit is None else units.parse(f"1 {entry.drawing_unit}", "length")
    return Asked(entry.boundary, entry.obstacles, entry.ground, entry.setback, entry.declination, drawing_unit)


def _needs(entry: SiteEntry, first: GroundFoot | None) -> Iterator[Finding]:
    if entry.crs is not None and entry.origin is None and first is None:
        text = 'missing; crs needs the place of the origin, such as origin = { lat = 51.0, lon = 3.0, level = "32 m" }'
        yield Finding(("site", "origin"), f"{text}, or the first spar's foot by lat and lon", (("spar", 0, "foot"),))
    if entry.crs is None and entry.origin is not None:
        yield Finding(("site", "crs"), 'missing; origin needs it, such as crs = "EPSG:32631"; leave both out for local metres')
    if entry.setback and entry.boundary is None:
        yield Finding(("site", "setback"), "needs a boundary; give boundary, or leave setback out")


def _grid(entry: SiteEntry, first: GroundFoot | None) -> tuple[Grid | None, list[Finding]]:
    """The grid through the origin, or where there is none through the first spar's foot, at the level of the sea."""
    if entry.crs is None:
        return None, []
    try:
        metres = unit(entry.crs)
    except GridError as error:
        return None, [Finding(("site", "crs"), str(error))]
    try:
        if isinstance(entry.origin, GridOrigin):
            return grid_at(entry.crs, entry.origin.east / metres, entry.origin.north / metres, entry.origin.level), []
        if entry.origin is not None:
            return grid_at_degrees(entry.crs, entry.origin.lat, entry.origin.lon, entry.origin.level), []
        return (None if first is None else grid_at_degrees(entry.crs, first.lat or 0.0, first.lon or 0.0, 0.0)), []
    except GridError as error:
        return None, [Finding(("site", "origin") if entry.origin is not None else ("spar", 0, "foot"), str(error))]


def _without_degrees(draft: Draft) -> Draft:
    """What is given by latitude and longitude left out, so that the other rules still run."""
    spars = tuple(None if s is None or getattr(s.foot, "lat", None) is not None else s for s in draft.spar)
    anchors = tuple(None if a is None or a.lat is not None or a.lon is not None else a for a in draft.anchor)
    pole = None if draft.raising is None else draft.raising.gin_pole.foot
    return replace(draft, spar=spars, anchor=anchors, raising=None if pole is not None and pole.lat is not None else draft.raising)


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
        return None, f"has {' and '.join(given)}; give {SAID}"
    place = from_degrees(entry.lat, entry.lon, grid)
    if isinstance(place, str):
        return None, place
    return entry.model_copy(update={"east": place[0], "north": place[1], "lat": None, "lon": None}), None


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
            findings.append(Finding(("anchor", n), f"{feet.where(east, north)}, {feet.SURVEY}"))
        out.append(a if math.isnan(level) else a.model_copy(update={"level": level}))
    return replace(draft, anchor=tuple(out)), findings


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
            mixed = "; levels count from the origin, not from the sea" if abs(level - foot.level) > MIXED else ""
            yield f"spar {name}: the surveyed ground lies at {found} where its foot stands at {given}{mixed}"
    if site.grid is not None and site.grid.accuracy > 0.5:
        within = f"within {site.grid.accuracy:g} m only, as PROJ states for this change of datum"
        yield f"{site.grid.crs}: places by latitude and longitude are {within}"
    yield from site.notes
