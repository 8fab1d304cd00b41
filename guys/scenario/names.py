"""Rules on names: unique within their kind, and every reference leads somewhere.

They work on the tables as read, so that a fault elsewhere in a table does not hide a wrong name in it.
"""

from __future__ import annotations

from collections.abc import Collection, Iterator, Mapping, Sequence
from typing import Any

from guys.catalogue import ropes as stock
from guys.catalogue.parts import parts as catalogue
from guys.scenario.draft import Draft
from guys.scenario.keys import Finding, Key, clipped, items, nearest
from guys.scenario.model import ASIDE
from guys.scenario.resolve import built_in_materials

SETTING = "setting"
Known = Collection[str] | None
"""Names there are; None where some could not be read, so that nothing can be called unknown."""


def findings(draft: Draft) -> Iterator[Finding]:
    """Every name given twice and every reference that leads nowhere."""
    document = draft.document
    named = dict(cable_names(document))
    spars, anchors = _known(document, "spar"), _known(document, "anchor")
    levels = all(_text(level, "name") or _text(level, "at") for _, level in items(document, "guy_level"))
    cables = dict.fromkeys(named.values()) if levels and _known(document, "cable") is not None else None
    yield from _twice("spar", _names(document, "spar"))
    yield from _twice("anchor", _names(document, "anchor"))
    yield from _twice("case", _names(document, "case"))
    yield from _twice("stage", _names(document, "stage"))
    yield from _twice("fitting", _fitting_names(document))
    yield from _twice("cable", named, "; give the guy level a name")
    yield from _reserved(document)
    yield from _feet(document, spars)
    yield from _ends(document, spars, anchors)
    yield from _ropes(document)
    yield from _materials(document)
    for table, key in (("case", "without"), ("case", "bare"), ("stage", "cables")):
        yield from _chosen(document, table, key, cables)
    yield from _raised(document, spars)
    yield from _holdfasts(document)
    yield from _combined(draft, list(cables or ()))
    yield from _parts(document)


def _text(table: Mapping[str, Any], key: str) -> str | None:
    value = table.get(key)
    return value if isinstance(value, str) else None


def _names(document: Mapping[str, Any], kind: str) -> dict[Key, str]:
    return {(kind, index, "name"): name for index, item in items(document, kind) if (name := _text(item, "name")) is not None}


def _known(document: Mapping[str, Any], kind: str) -> Known:
    """The names of a kind."""
    tables, names = document.get(kind, []), _names(document, kind)
    return dict.fromkeys(names.values()) if isinstance(tables, list) and len(names) == len(tables) else None


def _fitting_names(document: Mapping[str, Any]) -> dict[Key, str]:
    return {("spar", index, *key): name for index, spar in items(document, "spar") for key, name in _names(spar, "fitting").items()}


def cable_names(document: Mapping[str, Any]) -> Iterator[tuple[Key, str]]:
    """Every cable's name, with the key it stands at or comes from."""
    for index, level in items(document, "guy_level"):
        name, at, anchors = _text(level, "name"), _text(level, "at"), level.get("to")
        prefix = name or (" ".join(at.split()) if at else None)
        seen: set[str] = set()
        for place, anchor in enumerate(anchors if isinstance(anchors, list) else ()):
            if prefix and isinstance(anchor, str) and anchor not in seen:
                seen.add(anchor)
                yield ("guy_level", index, "to", place), f"{prefix} {anchor}"
    yield from _names(document, "cable").items()


def _twice(kind: str, names: Mapping[Key, str], remedy: str = "") -> Iterator[Finding]:
    first: set[str] = set()
    for key, name in names.items():
        if name in first:
            hint = remedy if key[0] == "guy_level" else ""
            yield Finding(key, f'another {kind} is named "{clipped(name)}"; names are unique within their kind{hint}')
        first.add(name)


def _combined(draft: Draft, cables: Sequence[str]) -> Iterator[Finding]:
    """Names of the file that a line of a set takes too."""
    taken = {case.name for case in draft.combined(cables)}
    for key, name in _names(draft.document, "case").items():
        if name in taken:
            yield Finding(key, f'a set of combinations writes a case named "{clipped(name)}" too; choose another name')


def _reserved(document: Mapping[str, Any]) -> Iterator[Finding]:
    for key, name in _names(document, "case").items():
        if name == SETTING:
            yield Finding(key, f'"{SETTING}" is the name of the still-air case; choose another')
        if ASIDE in name:
            yield Finding(key, f'"{ASIDE.strip(", ")} ..." ends the names of cases made for signs; choose another')


def _unknown(key: Key, kind: str, name: object, known: Known, remedy: str = "") -> Iterator[Finding]:
    if isinstance(name, str) and known is not None and name not in known:
        hint = nearest(name, known) if known else f"; the file has no {kind}"
        yield Finding(key, f'no {kind} is named "{clipped(name)}"{hint if "did you mean" in hint or not remedy else remedy}')


def _feet(document: Mapping[str, Any], spars: Known) -> Iterator[Finding]:
    for index, spar in items(document, "spar"):
        foot = spar.get("foot")
        if isinstance(foot, dict):
            yield from _unknown(("spar", index, "foot", "spar"), "spar", foot.get("spar"), spars)


def _ends(document: Mapping[str, Any], spars: Known, anchors: Known) -> Iterator[Finding]:
    for index, level in items(document, "guy_level"):
        yield from _unknown(("guy_level", index, "spar"), "spar", level.get("spar"), spars)
        to = level.get("to")
        seen: set[str] = set()
        for place, name in enumerate(to if isinstance(to, list) else ()):
            key = ("guy_level", index, "to", place)
            yield from _unknown(key, "anchor", name, anchors)
            if isinstance(name, str) and name in seen:
                yield Finding(key, f'anchor "{clipped(name)}" is named twice')
            seen.add(name if isinstance(name, str) else "")
    for index, cable in items(document, "cable"):
        for end in ("from", "to"):
            table = cable.get(end)
            if isinstance(table, dict):
                yield from _unknown(("cable", index, end, "spar"), "spar", table.get("spar"), spars)
                if end == "to":
                    yield from _unknown(("cable", index, end, "anchor"), "anchor", table.get("anchor"), anchors)


def _ropes(document: Mapping[str, Any]) -> Iterator[Finding]:
    ropes = document.get("rope")
    own = ropes if isinstance(ropes, dict) else None if ropes else {}
    for kind in ("guy_level", "cable"):
        for index, item in items(document, kind):
            name = item.get("rope")
            if isinstance(name, str) and own is not None and name not in own and stock.find(name) is None:
                yield Finding((kind, index, "rope"), f'no rope is named "{clipped(name)}"{_near_rope(name, own)}')


def _near_rope(name: str, own: Collection[str]) -> str:
    """The file's rope meant where one is near, else what the catalogue has to say."""
    near = nearest(name, own) if own else ""
    if "did you mean" in near:
        return near
    made = stock.hint(name)
    if made is not None:
        return f"; {made}"
    near = nearest(name, [rope.name for rope in stock.listed()])
    return f"{near or '; give [rope.NAME], or a name of the catalogue'} (guys list ropes)"


def _materials(document: Mapping[str, Any]) -> Iterator[Finding]:
    own = document.get("material")
    known = {**built_in_materials(), **(own or {})} if isinstance(own, dict) or own is None else None
    for index, spar in items(document, "spar"):
        for place, section in items(spar, "section"):
            yield from _unknown(("spar", index, "section", place, "material"), "material", section.get("material"), known)


def _parts(document: Mapping[str, Any]) -> Iterator[Finding]:
    own = document.get("part")
    if own is not None and not isinstance(own, dict):
        return
    known = {**(own or {}), **catalogue()}
    for kind in ("guy_level", "cable"):
        for index, item in items(document, kind):
            ends = item.get("ends")
            for place, name in enumerate(ends if isinstance(ends, list) else ()):
                remedy = "; give [part.NAME], or a name of the catalogue (guys list parts)"
                yield from _unknown((kind, index, "ends", place), "part", name, known, remedy)


def _holdfasts(document: Mapping[str, Any]) -> Iterator[Finding]:
    tables = document.get("holdfast")
    known = tables if isinstance(tables, dict) else None if tables else {}
    for index, anchor in items(document, "anchor"):
        yield from _unknown(("anchor", index, "holdfast"), "holdfast", anchor.get("holdfast"), known, "; give [holdfast.NAME]")


def _chosen(document: Mapping[str, Any], table: str, kind: str, cables: Known) -> Iterator[Finding]:
    """Cables picked out by a list of a table."""
    for index, entry in items(document, table):
        named, seen = entry.get(kind), set[str]()
        for place, name in enumerate(named if isinstance(named, list) else ()):
            key = (table, index, kind, place)
            yield from _unknown(key, "cable", name, cables)
            if isinstance(name, str) and name in seen:
                yield Finding(key, f'cable "{clipped(name)}" is named twice')
            seen.add(name if isinstance(name, str) else "")


def _raised(document: Mapping[str, Any], spars: Known) -> Iterator[Finding]:
    for index, stage in items(document, "stage"):
        up_to = stage.get("up_to")
        for name in up_to if isinstance(up_to, dict) else ():
            yield from _unknown(("stage", index, "up_to", name), "spar", name, spars)
