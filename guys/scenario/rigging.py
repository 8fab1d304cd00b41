"""Rules on anchors and cables: where they are, how their tension is given, that each runs between two different places."""

from __future__ import annotations

import math
from collections.abc import Iterator
from itertools import combinations

from guys import units
from guys.scenario import drawn, frame, names
from guys.scenario.anchor_entry import AnchorEntry
from guys.scenario.document import CableEntry, GuyLevel
from guys.scenario.draft import Draft
from guys.scenario.keys import Finding, Key, clipped
from guys.scenario.model import AnchorPoint, HeelFoot, Spar, SparPoint
from guys.scenario.parts import Part

SAME_PLACE = 1e-3
"""Two points nearer than this [m] are one place: a millimetre, below what anyone sets out."""


def findings(draft: Draft) -> Iterator[Finding]:
    """Every fault of the anchors and cables."""
    for index, anchor in enumerate(draft.anchor):
        if anchor is not None:
            yield from _position(anchor, ("anchor", index))
    spars = {name: spar for name, (_, spar) in draft.spars().items()}
    for key, entry in _entries(draft):
        yield from _tension(entry, key)
        for place, point in _points(entry):
            if point.spar in spars:
                yield from frame.beyond(spars[point.spar], point.at, (*key, *place, "at"))
    for name, part in draft.part.items():
        if part is not None:
            yield from _part(part, ("part", name))
    yield from _plumb(draft)
    if not frame.loops(draft):
        yield from _one_place(draft)
        yield from _runs(draft, spars)


def _one_place(draft: Draft) -> Iterator[Finding]:
    """Anchors on top of one another."""
    places = placed_anchors(draft)
    index = {anchor.name: k for k, anchor in enumerate(draft.anchor) if anchor is not None}
    for (one, here), (other, there) in combinations(places.items(), 2):
        if math.dist(here, there) < SAME_PLACE:
            text = f'stands where "{clipped(one)}" does; give one of them another place, or run the cables to one anchor'
            yield Finding(("anchor", index[other]), text)


def placed_anchors(draft: Draft) -> dict[str, drawn.Point]:
    """The anchors whose place is known, by name; the first spar's foot must be."""
    first = draft.spar[0] if draft.spar else None
    spars = {name: spar for name, (_, spar) in draft.spars().items()}
    if first is None or not _rooted(spars, first.name):
        return {}
    foot = drawn.foot(spars, first.name)
    known = [anchor for anchor in draft.anchor if anchor is not None and not [*_position(anchor, ())]]
    return {anchor.name: drawn.anchor_place(anchor, foot) for anchor in known}


def _rooted(spars: dict[str, Spar], name: str) -> bool:
    """Whether the chain of carriers ends on the ground; loops must have been ruled out."""
    spar = spars.get(name)
    if spar is None:
        return False
    return _rooted(spars, spar.foot.spar) if isinstance(spar.foot, HeelFoot) else True


def _entries(draft: Draft) -> Iterator[tuple[Key, GuyLevel | CableEntry]]:
    for index, level in enumerate(draft.guy_level):
        if level is not None:
            yield ("guy_level", index), level
    for index, cable in enumerate(draft.cable):
        if cable is not None:
            yield ("cable", index), cable


def _points(entry: GuyLevel | CableEntry) -> Iterator[tuple[Key, SparPoint]]:
    if isinstance(entry, GuyLevel):
        yield (), SparPoint(spar=entry.spar, at=entry.at, arm=entry.arm)
        return
    yield ("from",), entry.from_
    if isinstance(entry.to, SparPoint):
        yield ("to",), entry.to


def cable_points(draft: Draft) -> dict[str, list[SparPoint]]:
    """The points of spars that cables are made fast to, by the name of the cable."""
    entries = dict(_entries(draft))
    known = [(name, entries[key[:2]]) for key, name in names.cable_names(draft.document) if key[:2] in entries]
    return {name: [point for _, point in _points(entry)] for name, entry in known}


def _position(anchor: AnchorEntry, key: Key) -> Iterator[Finding]:
    given = [name for name in ("bearing", "radius", "east", "north") if getattr(anchor, name) is not None]
    if given not in (["bearing", "radius"], ["east", "north"]):
        got = f"has {' and '.join(given)}" if given else "has no place"
        yield Finding(key, f"{got}; give bearing and radius, or east and north", tuple((*key, name) for name in given))


def _tension(entry: GuyLevel | CableEntry, key: Key) -> Iterator[Finding]:
    given = [name for name in ("tension", "length", "tight") if getattr(entry, name) is not None]
    if entry.tight is False:
        yield Finding((*key, "tight"), "false says nothing; leave it out and give tension or length")
    elif len(given) != 1:
        got = f"has {' and '.join(given)}" if given else "has none of them"
        yield Finding(key, f"{got}; give one of tension, length, tight = true")


def _part(part: Part, key: Key) -> Iterator[Finding]:
    given = [name for name in ("strength", "efficiency") if getattr(part, name) is not None]
    if len(given) != 1:
        got = "has strength and efficiency" if given else "has neither"
        causes = tuple((*key, name) for name in ("strength", "efficiency"))
        yield Finding(key, f"{got}; give one of strength (its own) and efficiency (the share of the rope's that it leaves)", causes)


def _plumb(draft: Draft) -> Iterator[Finding]:
    entries = [entry for _, entry in _entries(draft)]
    read = len(entries) == len(draft.guy_level) + len(draft.cable)
    if draft.setting is not None and draft.setting.plumb and read and all(entry.tension is None for entry in entries):
        causes = tuple((*key, "tension") for key, _ in _entries(draft))
        yield Finding(("setting", "plumb"), "true needs cables given by tension: those are what is adjusted", causes)


def _runs(draft: Draft, spars: dict[str, Spar]) -> Iterator[Finding]:
    anchors = placed_anchors(draft)
    for key, entry in _entries(draft):
        start = next(point for _, point in _points(entry))
        if not _rooted(spars, start.spar):
            continue
        if isinstance(entry, GuyLevel):
            for place, name in enumerate(entry.to):
                yield from _run(spars, anchors, start, AnchorPoint(anchor=name), (*key, "to", place), key)
        else:
            yield from _run(spars, anchors, start, entry.to, key, key)


def _run(
    spars: dict[str, Spar], anchors: dict[str, drawn.Point], start: SparPoint, end: SparPoint | AnchorPoint, key: Key, table: Key
) -> Iterator[Finding]:
    """One cable, from a point of a spar to an anchor or to a point of another spar."""
    top = drawn.axis_point(spars, start.spar, start.at)
    after = tuple((*table, name) for name in ("arm", "from", "to"))
    if isinstance(end, AnchorPoint):
        if end.anchor not in anchors:
            return
        bottom, arms = anchors[end.anchor], start.arm
        what = f'anchor "{clipped(end.anchor)}"'
    elif end.spar == start.spar:
        yield Finding(key, f'both ends are on spar "{clipped(start.spar)}"; a cable runs to an anchor or to another spar', after)
        return
    elif not _rooted(spars, end.spar):
        return
    else:
        bottom, arms = drawn.axis_point(spars, end.spar, end.at), start.arm + end.arm
        what = f'the point on spar "{clipped(end.spar)}"'
    yield from _between(spars, top, bottom, arms, start, end, key, what, after)


def _between(
    spars: dict[str, Spar],
    top: drawn.Point,
    bottom: drawn.Point,
    arms: float,
    start: SparPoint,
    end: SparPoint | AnchorPoint,
    key: Key,
    what: str,
    after: tuple[Key, ...],
) -> Iterator[Finding]:
    level = math.hypot(bottom[0] - top[0], bottom[1] - top[1])
    if math.dist(top, bottom) < SAME_PLACE:
        yield Finding(key, f"the cable has no length: {what} is where it starts", after)
    elif drawn.off_axis(spars, start.spar, bottom) < SAME_PLACE:
        yield Finding(key, f'{what} lies on the axis of spar "{clipped(start.spar)}"; the cable would lie along the spar', after)
    elif isinstance(end, SparPoint) and drawn.off_axis(spars, end.spar, top) < SAME_PLACE:
        yield Finding(key, f'the cable starts on the axis of spar "{clipped(end.spar)}" and would lie along it', after)
    elif arms > 0.0 and level < arms + SAME_PLACE:
        reach = f"arms of {units.both(arms, 'length')} together reach past the other end, {units.both(level, 'length')} away in plan"
        yield Finding(key, reach if level >= SAME_PLACE else "straight up and down, so its arm has no direction; leave arm out", after)
