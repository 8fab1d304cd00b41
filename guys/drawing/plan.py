"""The plan: true to scale, grid north up, and at each anchor a bar the way it pulls for the horizontal pull and a ring for the uplift.

Bar length and ring radius are drawn to one printed scale of newtons per millimetre, the greatest over all cases and winds of each, so
that anchors can be compared by eye; the digits stand beside them, rounded up.  A guy is solid where it stays taut in every case and
wind, dashed where it drops in one.  Guys above one another run as one line, dashed if any of them drops; guys of different anchors
that coincide are drawn side by side.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from math import isfinite

import numpy as np

from guys.drawing import blocks, style
from guys.drawing.anchor_words import label_anchors, label_room, worst_of
from guys.drawing.blocks import Line
from guys.drawing.labels import Array, Field, Wish, all_over, around, clashes, hidden, place
from guys.drawing.lettering import shortened
from guys.drawing.page import Page, Rect, arc
from guys.drawing.reading import (
    base_point,
    dropping,
    fall_circles,
    greatest,
    hung_cable,
    hung_spar,
    pull_direction,
    wind_words,
)
from guys.drawing.rounding import Tongue, force, length
from guys.drawing.scales import length_bar, load_bar, ratio_text, ratio_to_fit
from guys.drawing.site import draw_site
from guys.results import AnchorWorst, Solution

HEAD, STRIP = 12.0, 9.5
LONGEST_BAR, LARGEST_RING, LEAST_RING = 24.0, 9.0, 4.0
DOT = 0.9
WIND_ARROW = 15.0
APART = 3.0
"""Room [mm] about words that belong to no anchor."""


@dataclass(frozen=True)
class PlanFrame:
    """Where the site lies on the page: `middle` (2,) east, north [m] at `centre` (2,) [mm], `per_metre` [mm/m]."""

    zone: Rect
    room: Rect
    middle: Array
    centre: Array
    per_metre: float

    def on_page(self, points: Array) -> Array:
        """(..., 2 or 3) site to (..., 2) page [mm]."""
        return np.asarray(self.centre + (np.asarray(points)[..., :2] - self.middle) * self.per_metre)


def bounds(solution: Solution) -> Array:
    """(2, 2) least and greatest east, north of all that the plan shows; fall circles where no anchors give it a size."""
    spars = [hung_spar(solution, s)[:, :2] for s in solution.spars]
    points = np.concatenate([solution.anchors.position[:, :2], *spars])
    if not len(solution.anchors.name):
        points = np.concatenate([points, *(foot + reach * np.array([[-1, -1], [1, 1]]) for _, foot, reach in fall_circles(solution))])
    return np.stack([points.min(axis=0), points.max(axis=0)])


def fitting_ratio(page: Page, solution: Solution, zone: Rect, tongue: Tongue) -> float:
    """Smallest round ratio at which the plan fits its zone with room for words."""
    low, high = bounds(solution)
    wide, tall = label_room(solution, tongue)
    room = zone.inset(wide, STRIP + tall, wide, HEAD + tall)
    span = np.maximum(high - low, 0.5)
    return ratio_to_fit((float(span[0]), float(span[1])), (room.width, room.height), page.shrink)


def frame(page: Page, solution: Solution, zone: Rect, ratio: float) -> PlanFrame:
    """The site centred in its zone."""
    room = zone.inset(0.0, STRIP, 0.0, HEAD)
    centre = np.array([(room.left + room.right) / 2.0, (room.bottom + room.top) / 2.0])
    return PlanFrame(zone, room, bounds(solution).mean(axis=0), centre, page.scaled(ratio))


def draw_plan(page: Page, solution: Solution, zone: Rect, ratio: float, tongue: Tongue) -> None:
    """Everything of the plan."""
    on = frame(page, solution, zone, ratio)
    field = Field(on.room)
    per_newton = load_scale(solution, on)
    largest = _largest(solution)
    site = solution.scenario.site
    _heading(page, solution, on, ratio)
    _north(page, on, field)
    _foot_strip(page, on, per_newton, largest * per_newton, tongue)
    draw_cables(page, solution, on, field)
    draw_spars(page, solution, on, field)
    for worst in solution.worst_anchors:
        draw_loads(page, solution, worst, on, field, per_newton)
    rings = np.array([ring_radius(worst_of(solution, name), per_newton) for name in solution.anchors.name])
    label_anchors(page, solution, field, on.on_page, rings, tongue)
    _label_spars(page, solution, on, field)
    _governing_wind(page, solution, on, field, tongue)
    if site is not None:
        draw_site(page, site, field, on.on_page, tongue)
    _fall_circles(page, solution, on, field, tongue)


def _largest(solution: Solution) -> float:
    loads = [greatest(e).value for w in solution.worst_anchors for e in (w.horizontal, w.uplift)]
    return max((v for v in loads if isfinite(v)), default=0.0)


def load_scale(solution: Solution, on: PlanFrame) -> float:
    """Millimetres of bar and ring per newton: the largest at which no bar passes its guy and no ring meets its neighbour (but rings
    of anchors almost in one place do, rather than shrink to dots); 0 without loads.
    """
    at = on.on_page(solution.anchors.position)
    foot = on.on_page(base_point(solution))
    limits = [np.inf]
    for worst in solution.worst_anchors:
        i = solution.anchors.name.index(worst.name)
        away = np.linalg.norm(np.vstack([np.delete(at, i, axis=0), foot]) - at[i], axis=1)
        out, up = greatest(worst.horizontal).value, greatest(worst.uplift).value
        near = float(away[away > 0.1].min(initial=40.0))
        if isfinite(out) and out > 0.0:
            limits.append(min(LONGEST_BAR, 0.62 * float(away[-1]) if away[-1] > 0.1 else LONGEST_BAR) / out)
        if isfinite(up) and up > 0.0:
            limits.append(min(LARGEST_RING, max(0.42 * near, LEAST_RING)) / up)
    smallest = min(limits)
    return smallest if isfinite(smallest) else 0.0


def _heading(page: Page, solution: Solution, on: PlanFrame, ratio: float) -> None:
    x, y = on.zone.left, on.zone.top - 4.6
    wide = page.text(x, y, "Plan", style.HEADING, bold=True)
    page.text(x + wide + 3.0, y, f"{ratio_text(ratio)} on {page.paper}", style.BODY, colour=style.GREY)
    words = "bar the way it pulls: greatest horizontal · ring: greatest uplift · one scale"
    page.text(on.zone.right, y + 0.2, words, style.SMALL, colour=style.LOAD, align="right")
    kinds = "guy solid: taut in every case and wind · dashed: drops in some of them"
    page.text(on.zone.right, y - 4.0, kinds, style.SMALL, align="right")


def _north(page: Page, on: PlanFrame, field: Field) -> None:
    x, top = on.zone.left + 7.0, on.zone.top - 11.0
    page.text(x, top - 2.6, "grid north", style.SMALL, align="centre")
    page.arrow([x, top - 17.0], [x, top - 4.4], style.INK, 1.2, 3.0)
    field.add_box([x - 9.0, top - 18.0, x + 9.0, top])


def _foot_strip(page: Page, on: PlanFrame, per_newton: float, largest: float, tongue: Tongue) -> None:
    x, y = on.zone.left + 1.0, on.zone.bottom + 4.4
    for system in tongue.systems:
        x = length_bar(page, x, y, on.per_metre, 46.0, system) + 9.0
    if per_newton > 0.0:
        load_bar(page, x, y, per_newton, min(1.1 * largest, 26.0), tongue)


def draw_cables(page: Page, solution: Solution, on: PlanFrame, field: Field) -> None:
    """Guys as lines, dashed where they drop."""
    for points, drops in _lanes(_plan_lines(solution, on)):
        page.line(points, style.INK, style.CABLE, style.DASHED if drops else style.SOLID, name="guy dashed" if drops else "guy solid")
        field.add_line(points)


def _plan_lines(solution: Solution, on: PlanFrame) -> list[tuple[Array, bool]]:
    """Cables on the page, those of one anchor and direction as the longest of them; dashed if any drops."""
    drops = dropping(solution)
    lines: dict[tuple[object, ...], tuple[Array, bool]] = {}
    for i, to in enumerate(solution.cables.to_anchor):
        ends = on.on_page(hung_cable(solution, i)[[0, -1]])
        run = ends[1] - ends[0]
        turn = round(float(np.degrees(np.arctan2(run[1], run[0]))) / 0.75)
        key = (to, turn) if to is not None else (i,)
        old = lines.get(key)
        keep = old[0] if old is not None and np.hypot(*(old[0][1] - old[0][0])) >= np.hypot(*run) else ends
        lines[key] = (keep, bool(drops[i]) or (old is not None and old[1]))
    return list(lines.values())


def _lanes(lines: list[tuple[Array, bool]], gap: float = 1.1) -> list[tuple[Array, bool]]:
    """Lines that would lie on one another moved aside, turn by turn to either side."""
    moved: list[tuple[Array, bool]] = []
    for i, (ends, drops) in enumerate(lines):
        run = ends[1] - ends[0]
        size = float(np.hypot(*run))
        if size < 1e-6:
            continue
        across = np.array([-run[1], run[0]]) / size
        before = sum(_on_one_line(ends, other, gap) for other, _ in lines[:i])
        step = ((before + 1) // 2) * (1.0 if before % 2 else -1.0)
        moved.append((ends + step * gap * across, drops))
    return moved


def _on_one_line(one: Array, two: Array, gap: float) -> bool:
    run, other = one[1] - one[0], two[1] - two[0]
    a, b = float(np.hypot(*run)), float(np.hypot(*other))
    if min(a, b) < 1e-6:
        return False
    turned = abs(run[0] * other[1] - run[1] * other[0]) / (a * b)
    same_way = float(run @ other) > 0.0
    offset = abs((two[0] - one[0])[0] * run[1] - (two[0] - one[0])[1] * run[0]) / a
    return bool(same_way and turned < 0.03 and offset < gap)


def draw_spars(page: Page, solution: Solution, on: PlanFrame, field: Field) -> None:
    """Feet as squares, what leans or reaches out as a thick line to its head."""
    for spar in solution.spars:
        points = on.on_page(hung_spar(solution, spar))
        foot, head = points[0], points[-1]
        if np.hypot(*(head - foot)) > 1.5:
            page.line([foot, head], style.INK, style.SPAR, order=3.5)
            page.circle(head, 0.9, style.WHITE, style.INK, 0.9, order=3.6)
            field.add_line([foot, head])
        if spar.name not in solution.heels.spar:
            square = np.array([[-1, -1], [1, -1], [1, 1], [-1, 1]]) * 1.5
            page.shape(foot + square, style.WHITE, style.INK, 1.3, order=4.0)
            field.add_box([*(foot - 1.6), *(foot + 1.6)])


def draw_loads(page: Page, solution: Solution, worst: AnchorWorst, on: PlanFrame, field: Field, per_newton: float) -> None:
    """Bar and ring of one anchor."""
    at = on.on_page(solution.anchors.position[solution.anchors.name.index(worst.name)])
    out, up = greatest(worst.horizontal).value, greatest(worst.uplift).value
    if isfinite(out) and out > 0.0 and per_newton > 0.0:
        end = at + out * per_newton * pull_direction(solution, worst)
        page.line([at, end], style.LOAD, style.BAR, order=3.0, butt=True, name=f"bar {worst.name}")
        field.add_line([at, end])
    if isfinite(up) and up > 0.0 and per_newton > 0.0:
        page.circle(at, up * per_newton, edge=style.LOAD, weight=style.RING, order=3.0, name=f"ring {worst.name}")
    page.circle(at, DOT, style.INK, order=4.5)
    field.add_disc(at, ring_radius(worst, per_newton))


def ring_radius(worst: AnchorWorst, per_newton: float) -> float:
    """Radius [mm] kept free around an anchor: its ring, or its dot where it is never lifted."""
    up = greatest(worst.uplift).value
    return max(up * per_newton + 0.3 if isfinite(up) else 0.0, DOT + 0.3)


def _label_spars(page: Page, solution: Solution, on: PlanFrame, field: Field) -> None:
    for spar in solution.spars:
        points = on.on_page(hung_spar(solution, spar))
        leans = float(np.hypot(*(points[-1] - points[0]))) > 12.0
        at = points[len(points) * 2 // 3] if leans else points[0]
        lines = [Line(shortened(spar.name, 40.0, style.BODY), colour=style.INK)]
        wish = around(at, blocks.size(lines), 1.0 if leans else 1.8, (0.6, -0.8))
        blocks.draw_placed(page, place(field, wish, all_over(wish, on.room)), at, lines)


def _governing_wind(page: Page, solution: Solution, on: PlanFrame, field: Field, tongue: Tongue) -> None:
    """The wind of the greatest pull of all, as a large arrow upwind of the site where there is room (it is in the words anyway)."""
    pulls = [(greatest(w.resultant), w.name) for w in solution.worst_anchors]
    winds = [(g, name) for g, name in pulls if isfinite(g.value) and isfinite(g.wind_from)]
    if not winds or max(p[0].value for p in pulls if isfinite(p[0].value)) > max(w[0].value for w in winds):
        return
    top, name = max(winds, key=lambda w: float(f"{w[0].value:.8g}"))  # of pulls alike but for rounding the first
    short = shortened(name, 34.0, style.BODY)
    words = Line(wind_words(solution, top.case, top.wind_from), colour=style.WIND, bold=True)
    lines = [words, Line(f"governs {short}: pull {tongue.say(force, top.value)}", colour=style.WIND)]
    wide, high = blocks.size(lines)
    unit = np.array([np.sin(top.wind_from), np.cos(top.wind_from)])
    reach = np.linalg.norm(on.on_page(solution.anchors.position) - on.centre, axis=1).max(initial=10.0)
    wish = _anywhere(on.room, (wide + WIND_ARROW, max(high, 13.0)), on.centre + unit * (reach + 14.0))
    if clashes(field, wish.boxes).min() > 0:
        return
    box = place(field, wish).box
    middle = np.array([box[0] + 6.5, (box[1] + box[3]) / 2.0])
    page.arrow(middle + 6.0 * unit, middle - 6.0 * unit, style.WIND, 2.0, 3.4)
    blocks.draw(page, np.array([box[0] + WIND_ARROW, middle[1] - high / 2.0, box[2], middle[1] + high / 2.0]), lines)


def _anywhere(room: Rect, size: tuple[float, float], wanted: Array) -> Wish:
    """Boxes all over the room, cheapest near the wanted middle; no leader."""
    boxes = np.array([[wanted[0], wanted[1], wanted[0] + size[0], wanted[1] + size[1]]])
    wish = all_over(Wish(wanted, boxes, np.zeros(1), leader_from=1e6), room, step=2.5)
    return replace(wish, cost=np.linalg.norm((wish.boxes[:, :2] + wish.boxes[:, 2:]) / 2.0 - wanted, axis=1))


def _fall_circles(page: Page, solution: Solution, on: PlanFrame, field: Field, tongue: Tongue) -> None:
    """Dotted, broken where words or the edge of the plan would be crossed; named where some of it shows."""
    for name, foot, reach in fall_circles(solution):
        centre = on.on_page(foot)
        line = arc(centre, reach * on.per_metre, 721)
        covered = hidden(line, field)
        shown = np.where(covered[:, None], np.nan, line)
        what = f"fall circle of {shortened(name, 40.0, style.BODY)} {tongue.say(length, reach)}"
        words = [Line(what, colour=style.GREY)]
        if covered.all():
            _beyond(page, field, [Line(f"{what}: beyond this plan", colour=style.GREY)])
        elif (~covered).sum() > 60:
            wide, high = blocks.size(words)
            spots = line[~covered][::6]
            half = np.array([wide, high]) / 2.0
            cost = np.linalg.norm(spots - [on.centre[0], on.room.bottom], axis=1) * 0.05
            spot = place(field, Wish(centre, np.hstack([spots - half, spots + half]), cost, leader_from=1e6))
            if not spot.clashes:
                blocks.draw(page, spot.box, words)
            shown = np.where(hidden(line, field)[:, None], np.nan, line)
        page.line(shown, style.GREY, 0.9, style.DOTTED, order=1.0, name="fall circle")


def _beyond(page: Page, field: Field, words: list[Line]) -> None:
    """Words of a circle too large for the plan, at its foot, or wherever there is room."""
    wide, high = np.array(blocks.size(words)) + APART
    spot = place(field, _anywhere(field.room, (wide, high), np.array([field.room.left + wide / 2.0, field.room.bottom + high / 2.0])))
    blocks.draw(page, spot.box + np.array([0.0, APART / 2.0, -APART, -APART / 2.0]), words)
    if spot.clashes:
        page.crowded.append(words[0].text)
