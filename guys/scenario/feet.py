"""Feet on the ground as they are written: of spars by east and north, bearing and radius from the origin, or latitude and longitude.

Once placed, a foot is east, north and level in metres, and no other rule need know how it was given.  The foot of a standing gin pole is
written likewise, its bearing and radius as all of [raise] from the foot of the spar raised.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import replace

from guys import units
from guys.scenario.degrees import SAID, WAYS, from_degrees
from guys.scenario.draft import Draft
from guys.scenario.keys import Finding, Key
from guys.scenario.model import HeelFoot, Spar
from guys.scenario.raising import Raising
from guys.scenario.table import GroundFoot
from guys.site import Grid, Ground

GIN_POLE: Key = ("raise", "gin_pole", "foot")
SURVEY = "is outside the surveyed ground; give its level, or survey farther"


def by_degrees(draft: Draft) -> GroundFoot | None:
    """The foot of the first spar where it is given by latitude and longitude: the origin, where the site gives none."""
    spar = draft.spar[0] if draft.spar else None
    foot = None if spar is None or isinstance(spar.foot, HeelFoot) else spar.foot
    return foot if foot is not None and foot.lat is not None and foot.lon is not None else None


def in_metres(draft: Draft, grid: Grid | None, ground: Ground | None) -> tuple[Draft, list[Finding]]:
    """The draft with its feet in metres from the origin and on the ground, and every fault of doing so; spars with one are left out."""
    spars, findings = list[Spar | None](), list[Finding]()
    for n, spar in enumerate(draft.spar):
        if spar is None or isinstance(spar.foot, HeelFoot):
            spars.append(spar)
            continue
        foot = _placed(spar.foot, (0.0, 0.0), grid, ground, ("spar", n, "foot"))
        spars.append(spar.model_copy(update={"foot": foot}) if isinstance(foot, GroundFoot) else None)
        findings += [] if isinstance(foot, GroundFoot) else [foot]
    draft = replace(draft, spar=tuple(spars))
    if draft.raising is None or draft.raising.gin_pole.foot is None:
        return draft, findings
    raising, fault = _standing(draft, draft.raising, draft.raising.gin_pole.foot, grid, ground)
    return replace(draft, raising=raising), [*findings, *fault]


def _standing(
    draft: Draft, raising: Raising, written: GroundFoot, grid: Grid | None, ground: Ground | None
) -> tuple[Raising | None, list[Finding]]:
    """The raising with the foot of its standing gin pole placed."""
    raised = draft.spars().get(raising.spar)
    origin = raised[1].foot if raised is not None else None
    if written.bearing is not None and not isinstance(origin, GroundFoot):
        return None, []  # the spar raised is at fault already
    start = (origin.east, origin.north) if isinstance(origin, GroundFoot) else (0.0, 0.0)
    foot = _placed(written, start, grid, ground, GIN_POLE)
    if isinstance(foot, Finding):
        return None, [foot]
    return raising.model_copy(update={"gin_pole": raising.gin_pole.model_copy(update={"foot": foot})}), []


def _placed(foot: GroundFoot, start: tuple[float, float], grid: Grid | None, ground: Ground | None, key: Key) -> GroundFoot | Finding:
    """A foot in metres, or what is wrong; `start`: where bearing and radius count from."""
    fault = next(_unplaced(foot, key), None)
    if fault is not None:
        return fault
    place = _place(foot, start, grid)
    if isinstance(place, str):
        return Finding(key, place)
    level = foot.level
    if ground is not None and "level" not in foot.model_fields_set:
        level = float(ground.level(*place))
        if math.isnan(level):
            return Finding(key, f"{where(*place)}, {SURVEY}")
    return GroundFoot(east=place[0], north=place[1], level=level)


def _unplaced(foot: GroundFoot, key: Key) -> Iterator[Finding]:
    """Why a foot has no one place."""
    given = [name for way in WAYS for name in way if name in foot.model_fields_set]
    lacking = [name for way in WAYS for name in way if set(way) - set(given) == {name}]
    if tuple(given) in WAYS:
        return
    if len(given) == 1:
        yield Finding((*key, lacking[0]), f"missing beside {given[0]}; a foot is given by {SAID}")
    else:
        yield Finding(key, f"has {' and '.join(given) or 'no place'}; give {SAID}")


def _place(foot: GroundFoot, start: tuple[float, float], grid: Grid | None) -> tuple[float, float] | str:
    if foot.lat is not None and foot.lon is not None:
        return from_degrees(foot.lat, foot.lon, grid)
    if foot.bearing is not None and foot.radius is not None:
        return start[0] + foot.radius * math.sin(foot.bearing), start[1] + foot.radius * math.cos(foot.bearing)
    return foot.east, foot.north


def where(east: float, north: float) -> str:
    """A place in words."""
    return f"{units.both(east, 'length')} east, {units.both(north, 'length')} north of the origin"
