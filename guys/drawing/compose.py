"""The sheet: one page with plan, elevation, table, polar figure and box, laid out from the words upward.

Words are measured first; the drawings share what is left, and plan and elevation take one scale where neither loses much by it.  Where
words leave too little room for a drawing, first the polar figure goes, then the page grows taller: nothing is cut and nothing shrinks
below its printed size.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from guys.drawing import box, elevation, plan, polar, strip, style, table
from guys.drawing.key import draw_key, lay_key
from guys.drawing.lettering import fitted, width, wrapped
from guys.drawing.page import PAPERS, Page, Rect, new_page
from guys.drawing.reading import View, look_bearing
from guys.drawing.rounding import Tongue, Units, tongue
from guys.drawing.scales import together
from guys.results import Solution

if TYPE_CHECKING:
    from matplotlib.figure import Figure

MARGIN = 12.0
GUTTER = 9.0
LEFT_SHARE = 0.555
STRIP = 8.0
POLAR_WIDE, POLAR_HIGH = 62.0, 66.0
LEAST_PLAN, LEAST_ELEVATION = 124.0, 100.0
SIGNED = "date _____________  pegged out by _____________  checked by _____________"
ESTIMATE = "for this mast and this dressing only"


@dataclass(frozen=True)
class Layout:
    """Where everything goes, and by how much the page had to grow."""

    head: Rect
    strip: Rect
    plan: Rect
    table: Rect
    elevation: Rect
    key: Rect
    polar: Rect | None
    box: Rect
    foot: Rect
    taller: float


def draw_sheet(solution: Solution, paper: str, look_toward: float | None, units: Units) -> Figure:
    """The whole sheet as a figure."""
    return draw_page(solution, paper, look_toward, units).figure


def draw_page(solution: Solution, paper: str, look_toward: float | None, units: Units) -> Page:
    """The whole sheet with what was placed on it."""
    speech = tongue(units)
    solution = solution.for_crew()
    rows = box.entries(solution, speech)
    layout = lay_out(solution, paper, speech, rows)
    page = new_page(paper, layout.taller)
    view = View(look_bearing(solution) if look_toward is None else look_toward)
    ratios = together(
        plan.fitting_ratio(page, solution, layout.plan, speech), elevation.fitting_ratio(page, solution, layout.elevation, view)
    )
    _head(page, solution, layout.head, speech)
    strip.draw_strip(page, solution, layout.strip)
    plan.draw_plan(page, solution, layout.plan, ratios[0], speech)
    table.draw_table(page, solution, layout.table, speech)
    elevation.draw_elevation(page, solution, layout.elevation, ratios[1], view, speech)
    draw_key(page, lay_key(solution, speech, layout.key.width), layout.key)
    if layout.polar is not None:
        polar.draw_polar(page, solution, layout.polar, speech)
    box.draw_box(page, box.laid(rows, layout.box.width), layout.box)
    _foot(page, foot_lines(solution, speech, layout.foot.width), layout.foot)
    return page


def lay_out(solution: Solution, paper: str, speech: Tongue, rows: list[box.Entry]) -> Layout:
    """Heights of all words, then the drawings' share of the page."""
    wide, high, shrink = PAPERS[paper]
    right, top = wide / shrink - MARGIN, high / shrink - MARGIN
    middle = MARGIN + (right - MARGIN) * LEFT_SHARE
    left_wide, right_wide = middle - MARGIN, right - middle - GUTTER
    foot_high = style.ROW * len(foot_lines(solution, speech, right - MARGIN)) + 3.0
    head_high = 11.5 + style.ROW * len(subtitle_lines(solution, right - MARGIN))
    body = top - head_high - STRIP - 3.0 - MARGIN - foot_high
    table_high = table.table_height(solution, speech, left_wide)
    key_high = style.ROW * lay_key(solution, speech, right_wide).rows + 3.5
    with_polar = polar.has_polar(solution)
    box_wide = right_wide - POLAR_WIDE if with_polar else right_wide
    box_high = box.laid(rows, box_wide).height
    if with_polar and body - max(box_high, POLAR_HIGH) - key_high < LEAST_ELEVATION:
        with_polar, box_wide = False, right_wide
        box_high = box.laid(rows, box_wide).height
    low_high = max(box_high, POLAR_HIGH) if with_polar else box_high
    taller = max(0.0, LEAST_PLAN - (body - table_high - 2.0), LEAST_ELEVATION - (body - low_high - key_high))
    top += taller
    head = Rect(MARGIN, top - head_high, right, top)
    strip = Rect(MARGIN, head.bottom - STRIP, right, head.bottom)
    under, floor = strip.bottom - 3.0, MARGIN + foot_high
    start = middle + GUTTER
    low_top = floor + low_high
    return Layout(
        head, strip,
        plan=Rect(MARGIN, floor + table_high + 2.0, middle, under), table=Rect(MARGIN, floor, middle, floor + table_high),
        elevation=Rect(start, low_top + key_high, right, under), key=Rect(start, low_top, right, low_top + key_high),
        polar=Rect(start, floor, start + POLAR_WIDE - 4.0, low_top) if with_polar else None,
        box=Rect(right - box_wide, low_top - box_high, right, low_top), foot=Rect(MARGIN, MARGIN, right, floor), taller=taller,
    )  # fmt: skip


def subtitle_lines(solution: Solution, room: float) -> list[str]:
    """The user's note and what the sheet holds for."""
    note = " ".join((solution.scenario.note or "").split())
    return wrapped(f"{note} · {ESTIMATE}" if note else ESTIMATE, room - width(SIGNED, style.BODY) - 8.0, style.BODY)


def _head(page: Page, solution: Solution, zone: Rect, speech: Tongue) -> None:
    right = "anchor loads, plan and elevation"
    page.text(zone.right, zone.top - 6.5, right, style.HEADING, align="right")
    room = zone.width - width(right, style.HEADING) - 10.0
    lines = wrapped(solution.scenario.title, room, style.TITLE, bold=True)
    if len(lines) == 1:
        page.text(zone.left, zone.top - 6.5, lines[0], style.TITLE, bold=True)
    else:
        small = style.TITLE * 0.58
        for i, line in enumerate(_at_most(wrapped(solution.scenario.title, room, small, bold=True), 2, room, small)):
            page.text(zone.left, zone.top - 3.2 - 4.9 * i, line, small, bold=True)
    y = zone.top - 12.4
    page.text(zone.right, y, SIGNED, style.BODY, colour=style.GREY, align="right")
    for line in subtitle_lines(solution, zone.width):
        page.text(zone.left, y, line, style.BODY)
        y -= style.ROW


def _at_most(lines: list[str], count: int, room: float, size: float) -> list[str]:
    if len(lines) <= count:
        return lines
    return [*lines[: count - 1], fitted(" ".join(lines[count - 1 :]), room, size, bold=True)]


def foot_lines(solution: Solution, speech: Tongue, room: float) -> list[tuple[str, str]]:
    """The cautions, then the small print; each line with its colour."""
    cautions = " · ".join(caution.rstrip(".") for caution in solution.cautions)
    lines = [(line, style.INK) for line in wrapped(cautions, room, style.SMALL)]
    return lines + [(line, style.GREY) for line in wrapped(box.small_print(solution, speech), room, box.SIZE)]


def _foot(page: Page, lines: list[tuple[str, str]], zone: Rect) -> None:
    page.line([(zone.left, zone.top - 1.2), (zone.right, zone.top - 1.2)], style.INK, style.THIN)
    y = zone.top - 5.2
    for line, colour in lines:
        page.text(zone.left, y, line, style.SMALL if colour == style.INK else box.SIZE, colour=colour)
        y -= style.ROW
