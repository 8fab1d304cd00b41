"""How far each range moves the greatest anchor pull, the reserve and the stability reserve: one row a range, what moves most on top.

Through each panel goes an upright line at the value as drawn.  A row runs from the value with less (ring) to that with more (dot), both
written at its ends; one that does not stand says so.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

from guys.checks.alarms import CAUTIONS
from guys.drawing import style
from guys.drawing.leaf import Words, leaf
from guys.drawing.lettering import shortened, width
from guys.drawing.page import Page, Rect
from guys.drawing.rounding import ABSENT, MOST_FACTOR, Units, bearing, factor, load, stability, tongue
from guys.reserves import WORDS
from guys.studies.margin import MOST
from guys.studies.matters import Matters, Reading, Span, told

if TYPE_CHECKING:
    from matplotlib.figure import Figure

ROW, ABOVE, KEY = 7.0, 17.0, 9.0
NAMES, ENDS, GAP = 50.0, 62.0, 8.0
ROOM = 19.0
"""Millimetres: height of a row, of heads above and the key below; width of names, of ends in words, between panels, of a value."""
RING = 1.25
Reach = tuple[float, float]
"""From left to right [mm]."""


@dataclass(frozen=True)
class Panel:
    """One measure: where, its heading, how a reading's value is got and written."""

    zone: Rect
    head: tuple[str, str]
    value: Callable[[Reading], float]
    write: Callable[[float], str]


def draw_matters(found: Matters, paper: str, units: Units) -> Figure:
    """The page as a figure."""
    return draw_matters_page(found, paper, units).figure


def draw_matters_page(found: Matters, paper: str, units: Units) -> Page:
    """The page with what was placed on it."""
    rows = max(len(found.spans), 1)
    page, zone = leaf(paper, Words(found.scenario.title, "what matters most", told(found), CAUTIONS), ABOVE + ROW * rows + KEY)
    speech = tongue(units)
    wide = (zone.width - NAMES - ENDS - 3 * GAP) / 3
    left = zone.left + NAMES + ENDS + GAP
    body = (zone.top - ABOVE - ROW * rows, zone.top)
    point = found.point
    if not found.stands:
        page.text(zone.left, zone.top - ABOVE, f"Nothing was varied: {point.reason}", style.BODY, bold=True)
        return page
    pull = speech.say(load, point.pull)
    measures = (
        (("greatest anchor pull", f"as drawn {pull} {point.anchor}"), lambda r: r.pull, lambda v: speech.say(load, v)),
        (("reserve: least factor over required", f"as drawn {factor(point.reserve)} {point.thing}"), lambda r: r.reserve, factor),
        (_stability_head(point), lambda r: r.stands_to, lambda v: stability(v, MOST)),
    )  # fmt: skip
    panels = [
        Panel(Rect(left + k * (wide + GAP), body[0], left + k * (wide + GAP) + wide, body[1]), *measure)
        for k, measure in enumerate(measures)
    ]
    for panel in panels:
        _panel(page, panel, found)
    for k, span in enumerate(found.spans):
        _name(page, span, zone, zone.top - ABOVE - ROW * (k + 0.5))
    _key(page, zone)
    return page


def _stability_head(point: Reading) -> tuple[str, str]:
    """What the stability reserve is of."""
    m = point.margin
    if m is None:
        return "stability reserve", ""
    wind = "" if math.isnan(m.line.wind_from) else f" {bearing(m.line.wind_from)}"
    return f"stability reserve: lost at, times {WORDS[m.loads]}", f"as drawn {stability(point.stands_to, MOST)} {m.line.name}{wind}"


def _name(page: Page, span: Span, zone: Rect, y: float) -> None:
    page.text(zone.left, y - 1.1, shortened(span.what, NAMES - 3.0, style.BODY, bold=True), style.BODY, bold=True)
    words = " / ".join(span.ends) + ("" if span.given else ", default")
    page.text(zone.left + NAMES, y - 1.1, shortened(words, ENDS - 1.0, style.SMALL), style.SMALL, colour=style.GREY)
    page.line([(zone.left, y - ROW / 2), (zone.right, y - ROW / 2)], style.PALE, 0.35, order=1.0)


def _panel(page: Page, panel: Panel, found: Matters) -> None:
    zone, point = panel.zone, panel.value(found.point)
    for k, line in enumerate(panel.head):
        page.text(zone.left, zone.top - 4.0 - 4.4 * k, shortened(line, zone.width, style.BODY, bold=k == 0), style.BODY, bold=k == 0)
    ends = [panel.value(e) for s in found.spans if not s.lacking for e in (s.less, s.more)]
    known = [v for v in (point, *ends) if math.isfinite(v)]
    if not math.isfinite(point) or point > MOST_FACTOR * max(1.0, min(known)):
        words = "not judged" if math.isnan(point) else "hardly loaded: not drawn"
        page.text(zone.left, zone.top - ABOVE - 4.0, words, style.BODY, colour=style.GREY)
        return
    low, high = min(known), max(known)
    scale = (zone.width - 2 * ROOM) / (high - low) if high - low > 1e-9 * abs(high) else 0.0

    def across(value: float) -> float:
        return zone.left + ROOM + scale * (value - low) if scale else (zone.left + zone.right) / 2

    x = across(point)
    page.line([(x, zone.top - ABOVE + 2.0), (x, zone.bottom)], style.INK, style.THIN)
    for k, span in enumerate(found.spans):
        _row(page, panel, span, found.point, across, zone.top - ABOVE - ROW * (k + 0.5))


def _row(page: Page, panel: Panel, span: Span, point: Reading, across: Callable[[float], float], y: float) -> None:
    zone = panel.zone
    if span.lacking:
        words = shortened(f"not solved: {span.lacking}", zone.width, style.SMALL)
        _clear(page, zone.left, y, words, colour=style.GREY)
        return
    readings = ((span.less, False), (span.more, True))
    reached = [(panel.value(r), r, more) for r, more in readings if math.isfinite(panel.value(r)) and r.falls <= point.falls]
    if len(reached) == 2:
        page.line([(across(reached[0][0]), y), (across(reached[1][0]), y)], style.LOAD, 1.6, order=2.5, butt=True)
    for value, _, more in reached:
        page.circle((across(value), y), RING, fill=style.LOAD if more else style.WHITE, edge=style.LOAD, weight=1.2, order=3.0)
    taken = _values(page, panel, reached, across, y)
    for reading, more in readings:
        if reading.falls > point.falls:
            taken.append(_falls(page, zone, f"{span.ends[more]}: ", f"falls in {reading.falls}", more, taken, y))


def _falls(page: Page, zone: Rect, end: str, falls: str, more: bool, taken: Sequence[Reach], y: float) -> Reach:
    """In how many cases an end falls, beside what is taken of the row already: on its own side or the other, in short where room is."""
    for words in (end + falls, falls):
        wide = width(words, style.SMALL, True)
        sides = [(zone.left, zone.left + wide), (zone.right - wide, zone.right)]
        for left, right in reversed(sides) if more else sides:
            if all(right + 1.0 < a or b + 1.0 < left for a, b in taken):
                _clear(page, left, y, words, bold=True)
                return left, right
    return zone.left, zone.left


def _values(
    page: Page, panel: Panel, reached: Sequence[tuple[float, Reading, bool]], across: Callable[[float], float], y: float
) -> list[Reach]:
    """The value of each end outside the row, on the side it lies; what that takes of the row, with the rings."""
    taken = [(across(value) - RING, across(value) + RING) for value, _, _ in reached]
    for k, (value, _, _) in enumerate(sorted(reached, key=lambda r: r[0])):
        words = panel.write(value) if math.isfinite(value) else ABSENT
        last = k == len(reached) - 1
        x = across(value) + (RING + 1.5 if last else -RING - 1.5)
        start = x if last else x - width(words, style.SMALL)
        _clear(page, start, y, words)
        taken.append((start, start + width(words, style.SMALL)))
    return [(min(a for a, _ in taken), max(b for _, b in taken))] if taken else []


def _clear(page: Page, start: float, y: float, words: str, colour: str = style.INK, bold: bool = False) -> None:
    """Words on white, so that the upright line does not run through them."""
    left, right = start - 0.5, start + width(words, style.SMALL, bold) + 0.5
    page.shape([(left, y - 1.6), (right, y - 1.6), (right, y + 2.0), (left, y + 2.0)], fill=style.WHITE, order=2.2)
    page.text(start, y - 1.1, words, style.SMALL, bold, colour=colour)


def _key(page: Page, zone: Rect) -> None:
    x, y = zone.left, zone.bottom + 2.0
    for fill, words in ((style.WHITE, "less, lower, colder"), (style.LOAD, "more, higher, warmer")):
        page.circle((x + RING, y), RING, fill=fill, edge=style.LOAD, weight=1.2)
        x += 2 * RING + 1.5 + page.text(x + 2 * RING + 1.5, y - 1.1, words, style.SMALL) + 6.0
    page.text(x, y - 1.1, "upright line: as drawn", style.SMALL)
