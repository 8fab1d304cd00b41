"""`[search]`: what `guys search` may move, and what it makes least."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field

from guys.scenario import quantity as q
from guys.scenario.anchor_entry import Place
from guys.scenario.table import Model

Measured = Literal["pull", "uplift", "tension", "thrust", "sideways", "bending", "lean", "use", "mass", "rope"]
"""Keys of `guys.studies.measures.MEASURES` that a search can make least."""
Whole = Annotated[int, Field(strict=True)]
FEWEST, MOST = 3, 12
"""Anchors of a ring."""


class SearchMove(Model):
    """Anchors that move, and where they may stand."""

    anchors: Annotated[list[q.Name], Field(min_length=1)] | None = None
    """Anchors by name; left out: all of them.  Several move together: one radius for all, turned by one angle."""
    radius: Annotated[list[q.PositiveLength], Field(min_length=2, max_length=2)] | None = None
    """Least and greatest distance from the first spar's foot; left out: as drawn."""
    bearing: Annotated[list[q.Angle], Field(min_length=2, max_length=2)] | None = None
    """Bearings, clockwise from the first to the second; of several anchors each has an equal part of it, and its own radius.  Left out:
    as drawn."""
    turn: Annotated[list[q.Angle], Field(min_length=2, max_length=2)] | None = None
    """Least and greatest angle all of them turn by from where they are drawn; left out: none."""
    places: Annotated[list[Place], Field(min_length=2)] | None = None
    """In place of the rest: the places it may stand; several anchors take as many different ones, in their order round the foot."""


class Search(Model):
    """For `guys search`."""

    least: Measured = "pull"
    """The measure made least: pull, uplift, tension, thrust, sideways, bending, lean, use, mass or rope."""
    against: Measured | None = None
    """A second one of them: the trade-off between the two is traced."""
    ways: Annotated[Whole, Field(ge=FEWEST, le=MOST)] | None = None
    """So many anchors round the first spar, named 1, 2, ... clockwise, in place of those drawn, every guy level made fast to each.  Left
    out: the anchors drawn."""
    move: Annotated[list[SearchMove], Field(min_length=1)]
    """Anchors that move, and where they may stand."""
    tries: Annotated[Whole, Field(ge=20, le=100_000)] = 600
    """Layouts tried at the most."""
    seed: Annotated[Whole, Field(ge=0, le=2**31)] = 1
    """The same seed finds the same layouts."""
    directions: Annotated[Whole, Field(ge=1, le=72)] = 12
    """Directions of wind in every try, evenly round the circle; what is found is solved in all directions again."""
