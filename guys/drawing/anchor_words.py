"""The words at each anchor of the plan, and where they go.

In full: name, greatest horizontal and uplift, bearing, radius and level, the wind that governs.  Where the plan is too full for that, less
of them; the table has the rest.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import replace
from math import isfinite

import numpy as np

from guys.drawing import blocks, style
from guys.drawing.blocks import Line
from guys.drawing.labels import Array, Field, Place, Wish, all_over, around, place
from guys.drawing.page import Page, Rect
from guys.drawing.reading import (
    base_point,
    from_base,
    greatest,
    wind_words,
)
from guys.drawing.rounding import NO_FORCE, Tongue, bearing, force, length, level
from guys.results import AnchorWorst, Solution

MOST_ROOM = (52.0, 28.0)
"""Most room [mm] kept at the sides and at top and bottom for words."""


def label_room(solution: Solution, tongue: Tongue) -> tuple[float, float]:
    """Room [mm] kept at the sides and at top and bottom for the words of the outermost anchors."""
    sizes = [blocks.size(anchor_words(solution, worst, tongue)) for worst in solution.worst_anchors]
    wide, tall = (np.array(sizes).max(axis=0) if sizes else np.zeros(2)) + 3.0
    return float(min(wide, MOST_ROOM[0])), float(min(tall, MOST_ROOM[1]))


def label_anchors(page: Page, solution: Solution, field: Field, on_page: Callable[[Array], Array], rings: Array, tongue: Tongue) -> None:
    """Words at every anchor: in full, or, where not all find room, less of them (the table has the rest)."""
    at, foot = on_page(solution.anchors.position), on_page(base_point(solution))
    full = [anchor_words(solution, worst_of(solution, name), tongue) for name in solution.anchors.name]
    short = [_short_words(solution, worst_of(solution, name), tongue) for name in solution.anchors.name]
    names = [_broken(name) for name in solution.anchors.name]
    for words in (full, short, names):
        spots = _best_places(field, at, rings, words, (field.room, foot))
        if not any(spot.clashes for spot in spots):
            break
    for spot, point, lines in zip(spots, at, words, strict=True):
        field.add_place(spot)
        blocks.draw_placed(page, spot, point, lines)


def _best_places(field: Field, at: Array, rings: Array, words: list[list[Line]], around_what: tuple[Rect, Array]) -> list[Place]:
    """Places in the order (crowded, outer, inner, western or southern ones first) that costs least in all."""
    room, foot = around_what
    wishes = []
    for i, point in enumerate(at):
        wish = around(point, blocks.size(words[i]), rings[i], point - foot)
        wishes.append(replace(wish, rivals=np.delete(np.column_stack([at, rings]), i, axis=0)))
    gaps = np.linalg.norm(at[:, None] - at[None], axis=-1) + 1e6 * np.eye(len(at))
    away = np.linalg.norm(at - foot, axis=1)
    orders = [np.argsort(key, kind="stable") for key in (gaps.min(axis=1, initial=1e6), -away, away, at[:, 0], at[:, 1])]
    return min((_placed(field.copied(), wishes, order, room) for order in orders), key=lambda spots: sum(p.cost for p in spots))


def _placed(field: Field, wishes: list[Wish], order: Iterable[np.int64], room: Rect) -> list[Place]:
    spots = {int(i): place(field, wishes[i], all_over(wishes[i], room)) for i in order}
    return [spots[i] for i in range(len(wishes))]


def worst_of(solution: Solution, anchor: str) -> AnchorWorst:
    """The greatest loads of one anchor."""
    return next(w for w in solution.worst_anchors if w.name == anchor)


def anchor_words(solution: Solution, worst: AnchorWorst, tongue: Tongue) -> list[Line]:
    """Name, greatest horizontal and uplift, bearing and radius and level, and the wind that governs the resultant."""
    turn, radius, _ = from_base(solution, point := solution.anchors.position[solution.anchors.name.index(worst.name)])
    out, up, pull = greatest(worst.horizontal).value, greatest(worst.uplift).value, greatest(worst.resultant)
    above = point[2] - base_point(solution)[2]
    rise = uplift_words(up, tongue)
    if not isfinite(pull.value):
        return [*_broken(worst.name), *_site_lines(turn, radius, above, tongue), Line("no equilibrium, no loads", bold=True)]
    loads = [f"out {tongue.say(force, out)}", f"up {rise}"]
    lines = [Line(part, bold=False, colour=style.INK) for part in (loads if len(tongue.systems) > 1 else ["   ".join(loads)])]
    lines += _site_lines(turn, radius, above, tongue)
    wind = pull.wind_from if isfinite(pull.wind_from) else None
    return [*_broken(worst.name), *lines, Line(wind_words(solution, pull.case, pull.wind_from), colour=style.WIND, wind_from=wind)]


def _short_words(solution: Solution, worst: AnchorWorst, tongue: Tongue) -> list[Line]:
    """Name and loads in the first of the units, no more."""
    out, up = greatest(worst.horizontal).value, greatest(worst.uplift).value
    first = Tongue(tongue.systems[:1])
    return [*_broken(worst.name), Line(f"out {first.say(force, out)}   up {uplift_words(up, first)}")]


def _site_lines(turn: float, radius: float, above: float, tongue: Tongue) -> list[Line]:
    """Bearing, radius and level from the base."""
    first = f"{bearing(turn)}   "
    return [
        Line(f"{first if i == 0 else ''}{length(radius, system)}   level {level(above, system)}") for i, system in enumerate(tongue.systems)
    ]


def uplift_words(up: float, tongue: Tongue) -> str:
    """An uplift, or "none" where the anchor is never lifted."""
    return "none" if isfinite(up) and up < NO_FORCE else tongue.say(force, up)


def _broken(name: str, longest: int = 26) -> list[Line]:
    """A name over as many lines as it needs."""
    rows = [""]
    for word in name.split():
        rows = [*rows[:-1], f"{rows[-1]} {word}".strip()] if len(rows[-1]) + len(word) < longest else [*rows, word]
    return [Line(row, style.NAME if len(name) < longest else style.BODY, bold=True) for row in rows if row]
