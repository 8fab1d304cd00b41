"""The elevation: looking square to one bearing, cables drawn as they hang in still air, spars with their sections, levels and fittings.

True to scale across and up; what comes toward the viewer is foreshortened, so the guy angles written at the anchors are worked out in
space, from the ground at the anchor to the cable's chord.  The ground line runs through the levels of anchors and feet.  Sections are
brackets along their spar, lettered; fittings are numbered flags; both are keyed to one list.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np

from guys.drawing import blocks, style
from guys.drawing.blocks import Line
from guys.drawing.key import lettered_sections, numbered_fittings
from guys.drawing.labels import Array, Field, all_over, around, column, place
from guys.drawing.lettering import fitted, shortened, width
from guys.drawing.page import Page, Rect
from guys.drawing.reading import (
    View,
    at_drawn_station,
    at_station,
    base_point,
    dropping,
    hung_cable,
    hung_spar,
    stands,
)
from guys.drawing.rounding import Tongue, bearing, level
from guys.drawing.scales import length_bar, ratio_text, ratio_to_fit
from guys.drawing.under_ground import anchor_line, below_room, words_under_ground
from guys.results import Solution
from guys.scenario import model

SIDE_ROOM, TOP_ROOM = 17.0, 15.0
BRACKET_OFF = 2.4
FLAG = 2.1
MANY_CABLES = 9
"""With more, sections of an upright spar are bracketed in the margin, level with it."""


@dataclass(frozen=True)
class ElevationFrame:
    """Where the view lies on the page: `middle` (2,) right, up [m] at `centre` (2,) [mm]."""

    zone: Rect
    view: View
    middle: Array
    centre: Array
    per_metre: float

    def on_page(self, points: Array) -> Array:
        """(..., 3) site to (..., 2) page [mm]."""
        return np.asarray(self.centre + (self.view.project(np.asarray(points)) - self.middle) * self.per_metre)


def bounds(solution: Solution, view: View) -> Array:
    """(2, 2) least and greatest right, up of all that the elevation shows."""
    parts = [solution.anchors.position, *(hung_spar(solution, s) for s in solution.spars)]
    parts += [hung_cable(solution, i) for i in range(len(solution.cables.name))]
    points = view.project(np.concatenate(parts))
    return np.stack([points.min(axis=0), points.max(axis=0)])


def fitting_ratio(page: Page, solution: Solution, zone: Rect, view: View) -> float:
    """Smallest round ratio at which the elevation fits its zone with room for words."""
    low, high = bounds(solution, view)
    side = side_room(solution)
    room = zone.inset(side, below_room(solution, zone, view), side, TOP_ROOM)
    span = np.maximum(high - low, 0.5)
    return ratio_to_fit((float(span[0]), float(span[1])), (room.width, room.height), page.shrink)


def side_room(solution: Solution) -> float:
    """Width [mm] kept beside the outermost anchors for their words."""
    widest = max((anchor_line(solution, name).width for name in solution.anchors.name), default=0.0)
    return max(SIDE_ROOM, widest)


def draw_elevation(page: Page, solution: Solution, zone: Rect, ratio: float, view: View, tongue: Tongue) -> None:
    """Everything of the elevation."""
    low, high = bounds(solution, view)
    per_metre = page.scaled(ratio)
    under = below_room(solution, zone, view)
    base_line = zone.bottom + under
    up = max(0.0, (zone.height - TOP_ROOM - under - (high[1] - low[1]) * per_metre) * 0.35)
    centre = np.array([(zone.left + zone.right) / 2.0, base_line + up])
    on = ElevationFrame(zone, view, np.array([(low[0] + high[0]) / 2.0, low[1]]), centre, per_metre)
    field = Field(zone.inset(0.0, 0.0, 0.0, TOP_ROOM - 4.0))
    _heading(page, solution, on, ratio, tongue)
    _ground(page, solution, on, field)
    _cables(page, solution, on, field)
    _spars(page, solution, on, field)
    _scale_bar(page, on, field, tongue)
    letters = _sections(page, solution, on, field)
    words_under_ground(page, solution, on.on_page, field, tongue)
    symbols = _fittings(page, solution, on, field)
    _levels(page, solution, on, field, tongue)
    _letters(page, on, field, letters)
    _flags(page, on, field, symbols)


def _heading(page: Page, solution: Solution, on: ElevationFrame, ratio: float, tongue: Tongue) -> None:
    x, y = on.zone.left, on.zone.top - 4.6
    wide = page.text(x, y, f"Elevation, looking toward {bearing(on.view.toward)}", style.HEADING, bold=True)
    page.text(x + wide + 3.0, y, f"{ratio_text(ratio)} on {page.paper}", style.BODY, colour=style.GREY)
    page.text(x, y - 4.6, how_drawn(solution, on.zone.width), style.SMALL)


def how_drawn(solution: Solution, room: float) -> str:
    """What the elevation shows, in one line; the name of the first spar gives way."""
    how = "cables as they hang in still air · levels as drawn, from the foot of "
    if not stands(solution):
        how = "AS DRAWN: it does NOT STAND in still air · levels from the foot of "
    after = " · guy angles from the ground"
    name = shortened(solution.spars[0].name, room - width(how + after, style.SMALL), style.SMALL)
    return fitted(f"{how}{name}{after}", room, style.SMALL)


def _ground(page: Page, solution: Solution, on: ElevationFrame, field: Field) -> None:
    feet = [s.drawn[0] for s in solution.spars if s.name not in solution.heels.spar]
    points = on.on_page(np.array([*solution.anchors.position, *feet]))
    points = points[np.argsort(points[:, 0], kind="stable")]
    left, right, bottom = on.zone.left, on.zone.right, on.zone.bottom
    line = np.vstack([[left, points[0, 1]], points, [right, points[-1, 1]]])
    page.shape(np.vstack([line, [right, bottom], [left, bottom]]), fill=style.GROUND, order=0.5)
    page.line(line, style.INK, style.THIN, order=1.5, name="ground")
    field.add_line(line)


def _cables(page: Page, solution: Solution, on: ElevationFrame, field: Field) -> None:
    drops = dropping(solution)
    for i in range(len(solution.cables.name)):
        points = on.on_page(hung_cable(solution, i))
        page.line(points, style.INK, style.CABLE * 0.85, style.DASHED if drops[i] else style.SOLID, name=f"cable {i}")
        field.add_line(np.vstack([points[:-1:4], points[-1]]))


def _spars(page: Page, solution: Solution, on: ElevationFrame, field: Field) -> None:
    for spar in solution.spars:
        points = on.on_page(hung_spar(solution, spar))
        page.line(points, style.INK, style.SPAR, order=3.5, butt=True)
        field.add_line(points[[0, len(points) // 2, -1]])
    for place_ in on.on_page(solution.anchors.position):
        page.circle(place_, 0.9, style.INK, order=4.0)


def _scale_bar(page: Page, on: ElevationFrame, field: Field, tongue: Tongue) -> None:
    x, y = on.zone.left + 2.0, on.zone.bottom + 5.0
    for system in tongue.systems:
        end = length_bar(page, x, y, on.per_metre, 30.0, system)
        field.add_box([x - 1.0, y - 4.4, end, y + 2.0])
        x = end + 5.0


def _levels(page: Page, solution: Solution, on: ElevationFrame, field: Field, tongue: Tongue) -> None:
    """Levels beside the spar where all of them find room there, else all in a column at the left."""
    tags = _level_tags(solution, on, tongue)
    near = [replace(around(at, blocks.size(lines), 0.6, (-1.0, 0.35), farthest=4.5), leader_from=1.4) for at, lines in tags]
    trial = field.copied()
    beside = not any(place(trial, wish).clashes for wish in near)
    for wish, (at, lines) in zip(near, tags, strict=True):
        edge = on.zone.left + 1.0 + wish.boxes[0, 2] - wish.boxes[0, 0]
        wishes = [wish] if beside else [column(wish, edge, field.room), all_over(wish, field.room)]
        blocks.draw_placed(page, place(field, *wishes), at, lines)


def _level_tags(solution: Solution, on: ElevationFrame, tongue: Tongue) -> list[tuple[Array, list[Line]]]:
    """Where cables are made fast to spars, each place once, with its level as drawn (in still air thrust and lean take
    millimetres off it)."""
    ground = base_point(solution)[2]
    tags: dict[tuple[str, int], tuple[Array, list[Line]]] = {}
    for cable in solution.scenario.cable:
        for end in (cable.from_, cable.to):
            if isinstance(end, model.SparPoint):
                where = at_station(solution, end.spar, end.at)
                drawn = at_drawn_station(solution, end.spar, end.at)
                lines = [Line(level(drawn[2] - ground, s), style.SMALL) for s in tongue.systems]
                tags.setdefault((end.spar, round(end.at * 100.0)), (on.on_page(where), lines))
    return list(tags.values())


def _sections(page: Page, solution: Solution, on: ElevationFrame, field: Field) -> list[tuple[str, Array, Array]]:
    """Brackets drawn; returns letter, its point and the way out from the spar."""
    start: dict[str, float] = {}
    letters = []
    upright_in_margin = len(solution.cables.name) > MANY_CABLES
    for letter, spar, _, section in lettered_sections(solution):
        low = start.get(spar.name, 0.0)
        start[spar.name] = low + section.length
        ends = on.on_page(np.array([at_station(solution, spar.name, at) for at in (low, low + section.length)]))
        if upright_in_margin and abs(ends[1, 0] - ends[0, 0]) < 2.0:
            ends[:, 0] = on.zone.right - 8.0
        letters += _bracket(page, field, ends, letter)
    return letters


def _bracket(page: Page, field: Field, ends: Array, letter: str) -> list[tuple[str, Array, Array]]:
    run = ends[1] - ends[0]
    size = float(np.hypot(*run))
    if size < 3.0:
        return []
    along = run / size
    across = np.array([along[1], -along[0]])
    a, b = ends[0] + 0.4 * along, ends[1] - 0.4 * along
    off = BRACKET_OFF * across
    points = np.array([a + 0.45 * off, a + off, b + off, b + 0.45 * off])
    page.line(points, style.GREY, style.HAIR, order=1.8, name="bracket")
    field.add_line(points)
    return [(letter, (a + b) / 2.0 + off, across)]


def _letters(page: Page, on: ElevationFrame, field: Field, letters: list[tuple[str, Array, Array]]) -> None:
    for letter, at, across in letters:
        lines = [Line(letter, style.SMALL, bold=True, colour=style.GREY)]
        near = replace(around(at, blocks.size(lines), 0.1, across, farthest=8.0), leader_from=3.0)
        blocks.draw_placed(page, place(field, near, column(near, on.zone.right - 10.0, field.room)), at, lines)


def _fittings(page: Page, solution: Solution, on: ElevationFrame, field: Field) -> list[tuple[str, Array]]:
    """Symbols drawn; returns number and place on the page."""
    symbols = []
    for number, spar, fitting in numbered_fittings(solution):
        axis = at_station(solution, spar.name, fitting.at)
        shift = np.array([fitting.offset.east, fitting.offset.north, fitting.offset.up])
        centre, at = on.on_page(axis), on.on_page(axis + shift)
        page.line([centre, at], style.INK, style.THIN, order=3.6)
        _symbol(page, at, fitting.shape == "flat")
        field.add_disc(at, 1.1)
        symbols.append((number, at))
    return symbols


def _flags(page: Page, on: ElevationFrame, field: Field, symbols: list[tuple[str, Array]]) -> None:
    for number, at in symbols:
        near = replace(around(at, (2 * FLAG, 2 * FLAG), 1.0, (1.0, 0.25), farthest=8.0), leader_from=0.5)
        spot = place(field, near, column(near, on.zone.right - 17.0, field.room), all_over(near, field.room))
        middle = (spot.box[:2] + spot.box[2:]) / 2.0
        if spot.leader is not None:
            page.line(spot.leader, style.INK, style.HAIR, order=3.0, name="leader")
        page.circle(middle, FLAG, style.WHITE, style.INK, 0.8, order=5.0)
        page.text(middle[0], middle[1] - 1.05, number, style.SMALL - 0.5, align="centre")
        if spot.clashes:
            page.crowded.append(f"flag {number}")


def _symbol(page: Page, at: Array, flat: bool) -> None:
    if flat:
        page.shape(at + np.array([[-0.8, -1.4], [0.8, -1.4], [0.8, 1.4], [-0.8, 1.4]]), style.INK, order=4.0)
    else:
        page.circle(at, 0.9, style.WHITE, style.INK, 1.0, order=4.0)
