"""Rules on `[search]`, and its moves spelled out: which anchors each moves, through which bearings, to which places."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence

from guys.scenario import ring
from guys.scenario.anchor_entry import Place
from guys.scenario.degrees import SAID, WAYS, from_degrees
from guys.scenario.draft import Draft
from guys.scenario.keys import Finding, Key, clipped, nearest, written
from guys.scenario.search import Search, SearchMove
from guys.site import Grid


def findings(draft: Draft, grid: Grid | None) -> Iterator[Finding]:
    """Every fault of the search; `grid`: of the site."""
    search = draft.search
    if search is None:
        return
    if search.against == search.least:
        yield Finding(("search", "against"), "the same as least; give another measure, or leave it out", (("search", "least"),))
    yield from _no_blocks(draft, search)
    if search.ways is not None:
        yield from _unfit(draft)
    anchors = _names(search, [anchor.name for anchor in draft.anchor if anchor is not None])
    first: dict[str, int] = {}
    for n, move in enumerate(search.move):
        yield from _move(move, ("search", "move", n), len(move.anchors or anchors))
        yield from _moved(move, n, anchors, first)
        for k, place in enumerate(move.places or ()):
            yield from _place(place, ("search", "move", n, "places", k), grid)


def _no_blocks(draft: Draft, search: Search) -> Iterator[Finding]:
    """The mass of blocks, where the file has none to be sized."""
    if any(holdfast is None or holdfast.kind == "block" for holdfast in draft.holdfast.values()):
        return
    for key in ("least", "against"):
        if getattr(search, key) == "mass":
            text = 'no holdfast is a block, whose mass could be sized; give a [holdfast.NAME] of kind = "block", or another measure'
            yield Finding(("search", key), text, (("holdfast",),))


def _names(search: Search, drawn: Sequence[str]) -> list[str]:
    """Names of the anchors there are in the search."""
    return list(drawn) if search.ways is None else ring.names(search.ways)


def _unfit(draft: Draft) -> Iterator[Finding]:
    """Cables that do not form a ring, told at `ways`."""
    levels = [(("guy_level", k), entry.length is not None) for k, entry in enumerate(draft.guy_level) if entry is not None]
    single = [(("cable", k), entry.length is not None) for k, entry in enumerate(draft.cable) if entry is not None]
    if len(levels) + len(single) == len(draft.guy_level) + len(draft.cable):
        for found in ring.unfit(len(draft.spar), [*levels, *single]):
            yield Finding(("search", "ways"), f"{written(found.key)}: {found.message}", (found.key,))


def _moved(move: SearchMove, n: int, anchors: Sequence[str], first: dict[str, int]) -> Iterator[Finding]:
    """Names of anchors that are not there, or that another move has already; `first`: the move of each so far."""
    for k, name in enumerate(anchors if move.anchors is None else move.anchors):
        key: Key = ("search", "move", n) if move.anchors is None else ("search", "move", n, "anchors", k)
        if name not in anchors:
            yield Finding(key, f'no anchor is named "{clipped(name)}"{nearest(name, anchors)}', (("anchor",), ("search", "ways")))
        elif name in first:
            left = "; anchors left out are all of them" if move.anchors is None else ""
            yield Finding(key, f'anchor "{clipped(name)}" moves already{left}')
        first.setdefault(name, n)


def _move(move: SearchMove, key: Key, many: int) -> Iterator[Finding]:
    """Faults of where `many` anchors may stand."""
    given = [name for name in ("radius", "bearing", "turn", "places") if getattr(move, name) is not None]
    if not given:
        yield Finding(key, "nothing says where it may stand; give radius, bearing, turn or places")
    if "places" in given and len(given) > 1:
        yield Finding((*key, "places"), f"beside {' and '.join(given[:-1])}; give the one or the other")
    if "bearing" in given and "turn" in given:
        yield Finding((*key, "turn"), "beside bearing; give the one or the other")
    if move.places is not None and len(move.places) <= many > 1:
        yield Finding((*key, "places"), f"{len(move.places)} for {many} anchors leave no choice; list more places")
    for name, bounds in (("radius", move.radius), ("turn", move.turn)):
        if bounds is not None and not bounds[0] < bounds[1]:
            yield Finding((*key, name), "the first is not less than the second; give the least, then the greatest")
    if move.bearing is not None and math.isclose(*move.bearing):
        yield Finding((*key, "bearing"), "both are the same; give the first and the last bearing, clockwise")


def _place(place: Place, key: Key, grid: Grid | None) -> Iterator[Finding]:
    given = [name for way in WAYS for name in way if getattr(place, name) is not None]
    if tuple(given) not in WAYS:
        yield Finding(key, f"give {SAID}")
    elif place.lat is not None and place.lon is not None:
        found = from_degrees(place.lat, place.lon, grid)
        if isinstance(found, str):
            yield Finding(key, found, (("site",),))


def resolved(search: Search, drawn: Sequence[str], grid: Grid | None) -> Search:
    """The search with the anchors of every move named, ranges of bearing shared out among several, and places in metres.

    drawn : names of the anchors;  grid : of the site
    """
    names = _names(search, drawn)
    moves = [each for move in search.move for each in _each(move, move.anchors or names)]
    return search.model_copy(update={"move": [_in_metres(move, grid) for move in moves]})


def _each(move: SearchMove, anchors: Sequence[str]) -> Iterator[SearchMove]:
    if move.bearing is None:
        yield move.model_copy(update={"anchors": list(anchors)})
        return
    first, part = move.bearing[0], clockwise(*move.bearing) / len(anchors)
    for k, name in enumerate(anchors):
        yield move.model_copy(update={"anchors": [name], "bearing": [first + k * part, first + (k + 1) * part]})


def _in_metres(move: SearchMove, grid: Grid | None) -> SearchMove:
    """The move with places by latitude and longitude turned into east and north."""
    if move.places is None:
        return move
    found = [None if p.lat is None or p.lon is None else from_degrees(p.lat, p.lon, grid) for p in move.places]
    pairs = zip(move.places, found, strict=True)
    return move.model_copy(update={"places": [Place(east=at[0], north=at[1]) if isinstance(at, tuple) else p for p, at in pairs]})


def clockwise(first: float, last: float) -> float:
    """The angle clockwise from one bearing to another; of bearings a whole circle apart, the circle."""
    angle = (last - first) % math.tau
    return math.tau if math.isclose(angle, 0.0, abs_tol=1e-9) else angle
