"""Words under the ground line of the elevation: anchors with their guy angles, bases with what they bear.

They stand in tiers below their points, tied to them by plumb leaders.  Taken from the outermost inward, each lying outward of its leader,
any number of anchors finds room: no leader still to come can meet words already placed.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import replace

import numpy as np

from guys.drawing import blocks, style
from guys.drawing.blocks import Line
from guys.drawing.labels import Array, Field, Place, Wish, all_over, place
from guys.drawing.lettering import shortened
from guys.drawing.page import Align, Page, Rect
from guys.drawing.reading import (
    View,
    anchor_cables,
    base_point,
    greatest,
    guy_angle,
    spar_named,
)
from guys.drawing.rounding import NO_FORCE, Tongue, angle, force
from guys.results import FootWorst, Solution

OnPage = Callable[[Array], Array]
TIER = 5.0
FEW = 3
"""Of more anchors on one side, each is given room for a tier of its own."""
ASTRAY = 25.0
"""Cost of words that do not stand under their point."""
LONGEST_NAME = 60.0
"""Room [mm] for the name of a spar over what its base bears."""


BESIDE = 0.8
"""Words begin so far [mm] beside their leader, so that the leader of another anchor as far out passes."""


def below_room(solution: Solution, zone: Rect, view: View) -> float:
    """Height [mm] kept under the lowest ground for the words of anchors and bases."""
    across = view.project(solution.anchors.position - base_point(solution))[:, 0]
    wide = np.array([anchor_line(solution, name).width + 3.0 for name in solution.anchors.name])
    sides = [side for side in (across < 0.0, across >= 0.0) if side.any()]
    many = [int(side.sum()) for side in sides]
    rows = [n if n > FEW else 1 + min(n - 1, int(wide[side].sum() // (zone.width / 2.0))) for n, side in zip(many, sides, strict=True)]
    return 19.0 + TIER * max(rows, default=0)


def below(point: Array, size: tuple[float, float], room: Rect, least: float, sides: Sequence[float]) -> Wish:
    """Boxes in tiers under a point of the ground, the shallowest cheapest; a plumb leader rises to it.

    sides : how the box lies to the leader: -1 ends at it, 0 has it in the middle, 1 begins at it; earlier ones are cheaper
    """
    wide, high = size
    drop = np.arange(least, max(point[1] - room.bottom - high, least) + 1e-6, TIER / 3.0)
    boxes, cost = [], []
    for rank, side in enumerate(sides):
        left = np.full(len(drop), point[0] + {-1.0: -BESIDE - wide, 0.0: -wide / 2.0, 1.0: BESIDE}[side])
        boxes.append(np.column_stack([left, point[1] - drop - high, left + wide, point[1] - drop]))
        cost.append(drop + 0.7 * TIER * rank)
    return Wish(point, np.concatenate(boxes), np.concatenate(cost), clear=0.9, leader_from=2.2)


def words_under_ground(page: Page, solution: Solution, on_page: OnPage, field: Field, tongue: Tongue) -> None:
    """Words of anchors and bases under the ground line, placed in the order that costs least in all."""
    names = _anchor_wishes(solution, on_page, field)
    bases = _base_wishes(page, solution, on_page, field, tongue)
    orders = [[*names, *bases], [*bases, *names], [*reversed(names), *bases]]
    trials = [_trial(field.copied(), order) for order in orders]
    best = min(range(len(orders)), key=lambda i: sum(spot.cost for spot in trials[i]))
    for (wish, lines), spot in zip(orders[best], trials[best], strict=True):
        field.add_place(spot)
        blocks.draw(page, spot.box, lines, _ranged(spot.box, wish.point))
        if spot.leader is not None:
            page.line(spot.leader, style.GREY, style.HAIR, order=3.0, name="leader")
        if spot.clashes:
            page.crowded.append(f"{lines[0].text} at {wish.point}")


def _ranged(box: Array, point: Array) -> Align:
    """Toward the point, where the words lie to one side of it."""
    return "left" if box[0] > point[0] else "right" if box[2] < point[0] else "centre"


Wished = tuple[Wish, Sequence[Line]]


def _trial(field: Field, order: Sequence[Wished]) -> list[Place]:
    """Places one after another; where a point has none below it, anywhere under its level."""
    spots = []
    for wish, _ in order:
        deep = replace(field.room, top=min(field.room.top, float(wish.point[1])))
        anywhere = all_over(wish, deep, step=2.5)
        spots.append(place(field, wish, replace(anywhere, cost=anywhere.cost + ASTRAY)))
    return spots


def _anchor_wishes(solution: Solution, on_page: OnPage, field: Field) -> list[Wished]:
    """From the outermost inward, each ending at or beginning at its leader so that it stays clear of those still to come."""
    at, foot = on_page(solution.anchors.position), on_page(base_point(solution))[0]
    wishes: list[Wished] = []
    for i in np.argsort(-np.abs(at[:, 0] - foot), kind="stable"):
        line = anchor_line(solution, solution.anchors.name[i])
        side = 1.0 if at[i, 0] >= foot else -1.0
        inner = (at[:, 0] - at[i, 0]) * side
        crowded = bool(((inner < 0.0) & (inner > -line.width / 2.0 - 2.0)).any()) or abs(at[i, 0] - foot) < line.width / 2.0 + 2.0
        sides = [side] if crowded else [0.0, side]
        wishes.append((below(at[i], blocks.size([line]), field.room, 2.0, sides), [line]))
    return wishes


def anchor_line(solution: Solution, anchor: str) -> Line:
    """Name and the angles of its guys from the ground, low to steep, equal ones once; of many the range."""
    angles = sorted(guy_angle(solution, i) for i in anchor_cables(solution, anchor))
    texts = list(dict.fromkeys(angle(a) for a in angles))
    row = " ".join(texts) if len(texts) < 4 else f"{texts[0]} to {texts[-1]}"
    return Line(shortened(anchor, 20.0, style.SMALL, bold=True), style.SMALL, bold=True, rest=f"  {row}" if row else "")


def _base_wishes(page: Page, solution: Solution, on_page: OnPage, field: Field, tongue: Tongue) -> list[Wished]:
    """Arrows of the bases drawn; what is to be written under them."""
    wishes: list[Wished] = []
    for worst in solution.worst_feet:
        if worst.carried_by is None:
            foot = on_page(spar_named(solution, worst.spar).drawn[0])
            page.arrow(foot - [0.0, 8.0], foot - [0.0, 0.6], style.LOAD, 1.8, 2.6)
            field.add_line([foot - [0.0, 8.0], foot])
            lines = base_lines(worst, tongue)
            wishes.append((below(foot, blocks.size(lines), field.room, 9.0, [0.0, -1.0, 1.0]), lines))
    return wishes


def base_lines(worst: FootWorst, tongue: Tongue) -> list[Line]:
    """The greatest push on the ground, the greatest sideways force, and the greatest pull where it is lifted."""
    parts = [(word, greatest(e).value) for word, e in (("down", worst.down), ("sideways", worst.sideways), ("LIFTED BY", worst.lift))]
    said = ", ".join(f"{word} {tongue.say(force, value)}" for word, value in parts if word == "sideways" or not value < NO_FORCE)
    name = shortened(worst.spar, LONGEST_NAME, style.BODY, bold=True)
    return [Line(f"{name} base", style.BODY, bold=True, colour=style.LOAD), Line(said, colour=style.LOAD)]
