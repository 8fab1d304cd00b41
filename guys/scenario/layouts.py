"""`[[layout]]`: alternatives in which some anchors stand elsewhere, or are held by something else.

An anchor of a layout that gives a place stands there, at the level it gives or, where it gives none, at that of the ground (of the first
spar's foot without a surveyed one), never at the level of the place it left.  `give` and `holdfast` stay where it gives none.  All rules on
places run on every layout as on the file itself.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace
from typing import Any

from guys import units
from guys.scenario import drawn, place, resolve, rigging
from guys.scenario.anchor_entry import AnchorEntry, LayoutEntry, Place
from guys.scenario.draft import Draft
from guys.scenario.keys import Finding, Key, clipped, items, nearest
from guys.scenario.model import AS_DRAWN, Anchor, GroundFoot, Scenario
from guys.site import Site

PLACE = tuple(Place.model_fields)
"""Keys of which any moves the anchor."""


def findings(draft: Draft, site: Site | None) -> Iterator[Finding]:
    """Every fault of the layouts; `draft` with its anchors placed."""
    yield from _names(draft)
    known = set(rigging.findings(draft))
    for k, entry in enumerate(draft.layout):
        if entry is not None:
            moved, misplaced = _moved(draft, entry, site)
            new = [*misplaced, *(f for f in rigging.findings(moved) if f not in known)]
            yield from (_in_layout(finding, draft, k, entry) for finding in new)


def _in_layout(finding: Finding, draft: Draft, k: int, entry: LayoutEntry) -> Finding:
    """A finding on a moved anchor, or on what runs to it, at the key of the layout."""

    def key(own: Key) -> Key:
        base = draft.anchor[int(own[1])] if len(own) > 1 and own[0] == "anchor" else None
        places = [j for j, anchor in enumerate(entry.anchor) if base is not None and anchor.name == base.name]
        return ("layout", k, "anchor", places[0], *own[2:]) if places else ("layout", k)

    return Finding(key(finding.key), finding.message, (("site",), *map(key, finding.after)))


def _names(draft: Draft) -> Iterator[Finding]:
    """Names of layouts, and of the anchors and holdfasts in them."""
    anchors = [a.get("name") for _, a in items(draft.document, "anchor")]
    taken = {AS_DRAWN}
    for k, layout in items(draft.document, "layout"):
        name = layout.get("name")
        if isinstance(name, str) and name in taken:
            why = "is the name of the anchors above" if name == AS_DRAWN else "names another layout"
            yield Finding(("layout", k, "name"), f'"{clipped(name)}" {why}; choose another')
        taken.add(name if isinstance(name, str) else "")
        seen: set[str] = set()
        for j, anchor in items(layout, "anchor"):
            yield from _anchor(draft, anchor, ("layout", k, "anchor", j), [a for a in anchors if isinstance(a, str)], seen)


def _anchor(draft: Draft, anchor: Any, key: Key, anchors: Sequence[str], seen: set[str]) -> Iterator[Finding]:
    name, holdfast = anchor.get("name"), anchor.get("holdfast")
    if isinstance(name, str):
        if name not in anchors:
            yield Finding((*key, "name"), f'no anchor is named "{clipped(name)}"{nearest(name, anchors) if anchors else ""}')
        elif name in seen:
            yield Finding((*key, "name"), f'anchor "{clipped(name)}" is given twice in this layout')
        elif set(anchor) == {"name"}:
            yield Finding(key, "nothing differs; give a place, such as bearing and radius, or leave the anchor out")
        seen.add(name)
    if isinstance(holdfast, str) and holdfast not in draft.holdfast:
        text = f'no holdfast is named "{clipped(holdfast)}"{nearest(holdfast, draft.holdfast)}'
        yield Finding((*key, "holdfast"), text, (("holdfast",),))


def _moved(draft: Draft, entry: LayoutEntry, site: Site | None) -> tuple[Draft, list[Finding]]:
    """The draft with the anchors of one layout, placed, and the faults of doing so."""
    own = {anchor.name: anchor for anchor in entry.anchor}
    anchors = tuple(None if a is None else _changed(a, own.get(a.name)) for a in draft.anchor)
    return place.anchors_placed(replace(draft, anchor=anchors), site)


def _changed(above: AnchorEntry, own: AnchorEntry | None) -> AnchorEntry:
    if own is None:
        return above
    given = {name: value for name in AnchorEntry.model_fields if (value := getattr(own, name)) is not None}
    if any(name in given for name in PLACE):
        above = above.model_copy(update=dict.fromkeys((*PLACE, "level")))
    return above.model_copy(update=given)


def resolved(draft: Draft, site: Site | None, foot: drawn.Point) -> tuple[tuple[str, tuple[Anchor, ...]], ...]:
    """Name and anchors of every layout of a draft without faults."""
    out = []
    for entry in draft.layout:
        if entry is not None:
            moved, _ = _moved(draft, entry, site)
            out.append((entry.name, tuple(resolve.anchor(anchor, foot) for anchor in moved.anchor if anchor is not None)))
    return tuple(out)


def named(scenario: Scenario, name: str, anchors: tuple[Anchor, ...]) -> Scenario:
    """The scenario in a layout, which its title then tells."""
    title = f"{scenario.title} – {name}"
    return scenario.model_copy(update={"anchor": anchors, "layout": name, "title": title, "layouts": ()})


def every(scenario: Scenario) -> tuple[Scenario, ...]:
    """As drawn, then every layout of the file."""
    return (scenario, *scenario.layouts)


def warnings(scenario: Scenario) -> Iterator[str]:
    """What is unusual about layouts and not about the anchors as drawn, and levels that may have been forgotten."""
    above = {anchor.name: anchor for anchor in scenario.anchor}
    for layout in scenario.layouts:
        said = [text for text in layout.warnings if text not in scenario.warnings]
        for anchor in layout.anchor:
            if anchor.name in above:
                said += _level_left_out(above[anchor.name], anchor, layout)
        yield from (f'layout "{layout.layout}": {text}' for text in said)


def _level_left_out(above: Anchor, anchor: Anchor, scenario: Scenario) -> Iterator[str]:
    """Without a surveyed ground a place without a level lies at the first spar's foot, which may not be what was meant."""
    foot = scenario.spar[0].foot
    level = foot.level if isinstance(foot, GroundFoot) else None
    surveyed = scenario.site is not None and scenario.site.ground is not None
    if (anchor.east, anchor.north) != (above.east, above.north) and anchor.level == level != above.level and not surveyed:
        yield (
            f'anchor "{anchor.name}" stands at the level of the first spar\'s foot, {units.both(anchor.level, "length")}; '
            f"where it is drawn it is given {units.both(above.level, 'length')}"
        )
