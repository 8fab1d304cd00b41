"""`[search]`: what `guys search` may move, what it makes least, and what must hold."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import TYPE_CHECKING, Annotated, Literal

from pydantic import Field

from guys.scenario import quantity as q
from guys.scenario.keys import Finding, Key, clipped, nearest
from guys.scenario.table import Model

if TYPE_CHECKING:
    from guys.scenario.draft import Draft

Measured = Literal["pull", "uplift", "tension", "thrust", "sideways", "bending", "lean", "use", "mass", "rope"]
"""Keys of `guys.studies.measures.MEASURES` that a search can make least."""
Whole = Annotated[int, Field(strict=True)]


class SearchPlace(Model):
    """A place an anchor may stand: bearing and radius from the first spar's foot, or east and north."""

    bearing: q.Angle | None = None
    """Bearing from the first spar's foot."""
    radius: q.PositiveLength | None = None
    """Level distance from the first spar's foot."""
    east: q.Length | None = None
    """Distance east of the origin."""
    north: q.Length | None = None
    """Distance north of the origin."""


class SearchMove(Model):
    """Anchors that move, and where they may stand."""

    anchors: Annotated[list[q.Name], Field(min_length=1)]
    """Anchors by name; several move together: one radius for all, turned by one angle."""
    radius: Annotated[list[q.PositiveLength], Field(min_length=2, max_length=2)] | None = None
    """Least and greatest distance from the first spar's foot; left out: as drawn."""
    bearing: Annotated[list[q.Angle], Field(min_length=2, max_length=2)] | None = None
    """Bearings of one anchor, clockwise from the first to the second; left out: as drawn."""
    turn: Annotated[list[q.Angle], Field(min_length=2, max_length=2)] | None = None
    """Least and greatest angle all of them turn by from where they are drawn; left out: none."""
    places: Annotated[list[SearchPlace], Field(min_length=2)] | None = None
    """In place of the rest, for one anchor: the places it may stand."""


class Search(Model):
    """For `guys search`."""

    least: Measured = "pull"
    """The measure made least: pull, uplift, tension, thrust, sideways, bending, lean, use, mass or rope."""
    against: Measured | None = None
    """A second one of them: the trade-off between the two is traced."""
    move: Annotated[list[SearchMove], Field(min_length=1)]
    """Anchors that move, and where they may stand."""
    tries: Annotated[Whole, Field(ge=20, le=100_000)] = 600
    """Layouts tried at the most."""
    seed: Annotated[Whole, Field(ge=0, le=2**31)] = 1
    """The same seed finds the same layouts."""
    directions: Annotated[Whole, Field(ge=1, le=72)] = 12
    """Directions of wind in every try, evenly round the circle; what is found is solved in all directions again."""


def findings(draft: Draft) -> Iterator[Finding]:
    """Every fault of the search."""
    search = draft.search
    if search is None:
        return
    anchors = [anchor.name for anchor in draft.anchor if anchor is not None]
    if search.against == search.least:
        yield Finding(("search", "against"), "the same as least; give another measure, or leave it out", (("search", "least"),))
    moved: set[str] = set()
    for n, move in enumerate(search.move):
        key: Key = ("search", "move", n)
        yield from _move(move, key)
        for k, name in enumerate(move.anchors):
            if name not in anchors:
                yield Finding((*key, "anchors", k), f'no anchor is named "{clipped(name)}"{nearest(name, anchors)}', (("anchor",),))
            elif name in moved:
                yield Finding((*key, "anchors", k), f'anchor "{clipped(name)}" moves already')
            moved.add(name)


def _move(move: SearchMove, key: Key) -> Iterator[Finding]:
    given = [name for name in ("radius", "bearing", "turn", "places") if getattr(move, name) is not None]
    if not given:
        yield Finding(key, "nothing says where it may stand; give radius, bearing, turn or places")
    if "places" in given and len(given) > 1:
        yield Finding((*key, "places"), f"beside {' and '.join(given[:-1])}; give the one or the other")
    if "bearing" in given and "turn" in given:
        yield Finding((*key, "turn"), "beside bearing; give the one or the other")
    for name in ("bearing", "places"):
        if name in given and len(move.anchors) > 1:
            yield Finding((*key, name), f"is for one anchor, and {len(move.anchors)} move together; use turn, or a move for each")
    for name, bounds in (("radius", move.radius), ("turn", move.turn)):
        if bounds is not None and not bounds[0] < bounds[1]:
            yield Finding((*key, name), "the first is not less than the second; give the least, then the greatest")
    if move.bearing is not None and math.isclose(*move.bearing):
        yield Finding((*key, "bearing"), "both are the same; give the first and the last bearing, clockwise")
    for k, place in enumerate(move.places or ()):
        where = [name for name in ("bearing", "radius", "east", "north") if getattr(place, name) is not None]
        if where not in (["bearing", "radius"], ["east", "north"]):
            yield Finding((*key, "places", k), "give bearing and radius, or east and north")
