"""What each loss does, by the bearing the wind comes from: one row a loss, one square a bearing, the gravest of all cases in it.

    empty: stands within    dot: stands, nothing judged    corner filled: stands, past its allowable    filled: falls

A loss after which the structure falls in still air is one bar across the row: its winds were not solved.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from guys.checks.alarms import CAUTIONS
from guys.checks.extremes import first_greatest
from guys.drawing import style
from guys.drawing.leaf import Words, leaf
from guys.drawing.lettering import fitted, shortened, width
from guys.drawing.page import Page, Rect
from guys.drawing.rounding import ABSENT, Say, Tongue, Units, bearing, factor, force, tongue
from guys.drawing.table import Column, Grid, draw_grid
from guys.studies.cells import FALLS, NOT_JUDGED, PAST, Cells, worst_use
from guys.studies.lost import Lost, judged_by

if TYPE_CHECKING:
    from matplotlib.figure import Figure

SQUARE = 5.3
NAMES, STILL = 62.0, 16.0
ABOVE = 13.0
KEY = 11.0
FAILS = 54.0
"""Millimetres: side of a square at the most, room for the losses' names and for still air, heads above, the key below, for what governs."""


def draw_losses(found: Lost, paper: str, units: Units) -> Figure:
    """The page."""
    rows = len(found.losses)
    needed = ABOVE + SQUARE * rows + KEY
    page, zone = leaf(paper, Words(found.scenario.title, "what is lost, and what stands", judged_by(found), CAUTIONS), needed)
    bearings = sorted({line.wind_from for line in found.lines if not math.isnan(line.wind_from)})
    across = min(SQUARE, (zone.width * 0.56 - NAMES - STILL) / max(len(bearings), 1))
    _heads(page, zone, bearings, across)
    for k in range(rows):
        _row(page, found, k, zone, bearings, across)
    _key(page, Rect(zone.left, zone.bottom - 2.0, zone.right, zone.top - ABOVE - SQUARE * rows))
    left = zone.left + NAMES + STILL + across * len(bearings) + 5.0
    _loads(page, found, Rect(left, zone.bottom, zone.right, zone.top), tongue(units))
    return page.figure


def _heads(page: Page, zone: Rect, bearings: list[float], across: float) -> None:
    """Still air, and every third of the bearings that has room, over the columns."""
    base = zone.top - ABOVE + 1.6
    page.text(zone.left, base, "lost", style.BODY, bold=True, colour=style.GREY)
    page.text(zone.left + NAMES, base, "still air", style.SMALL, colour=style.GREY)
    start, said = zone.left + NAMES + STILL, -1e9
    if bearings:
        page.text(start, base + 5.0, "wind from", style.SMALL, colour=style.WIND)
    for k, turn in enumerate(bearings):
        x, words = start + across * (k + 0.5), bearing(turn)
        if round(math.degrees(turn), 6) % 30 == 0 and x - said > width(words, style.SMALL) + 2.0:
            page.text(x, base, words, style.SMALL, colour=style.WIND, align="centre")
            said = x


def _row(page: Page, found: Lost, k: int, zone: Rect, bearings: list[float], across: float) -> None:
    """The name of one loss and its squares."""
    top = zone.top - ABOVE - SQUARE * k
    words = found.losses[k].words
    page.text(zone.left, top - 3.7, shortened(words, NAMES - 3.0, style.BODY, bold=k == 0), style.BODY, bold=k == 0)
    left = zone.left + NAMES
    if found.still[k]:
        right = left + STILL + across * len(bearings)
        page.shape([(left, top), (right, top), (right, top - SQUARE + 0.6), (left, top - SQUARE + 0.6)], fill=style.INK)
        text = fitted("falls in still air", right - left - 2.0, style.SMALL)
        page.text(left + 1.5, top - 3.5, text, style.SMALL, colour=style.WHITE)
        return
    verdict = found.cells[k].verdict
    calm = [i for i, line in enumerate(found.lines) if math.isnan(line.wind_from)]
    _square(page, left, top, STILL - 2.0, int(verdict[calm].max()))
    for n, turn in enumerate(bearings):
        rows = [i for i, line in enumerate(found.lines) if line.wind_from == turn]
        _square(page, left + STILL + across * n, top, across - 0.6, int(verdict[rows].max()))


def _square(page: Page, left: float, top: float, wide: float, verdict: int) -> None:
    right, bottom = left + wide, top - SQUARE + 0.6
    corners = [(left, top), (right, top), (right, bottom), (left, bottom)]
    if verdict >= FALLS:
        page.shape(corners, fill=style.INK, edge=style.INK, weight=style.HAIR)
        return
    page.shape(corners, edge=style.GREY, weight=style.HAIR)
    if verdict == PAST:
        page.shape([(left, bottom), (left, top), (right, bottom)], fill=style.LOAD)
    if verdict == NOT_JUDGED:
        page.circle(((left + right) / 2, (top + bottom) / 2), 0.5, fill=style.INK)


def _key(page: Page, zone: Rect) -> None:
    x, top = zone.left, zone.top - 3.0
    for verdict, words in (
        (0, "stands, all that is judged within"), (PAST, "stands, something past its allowable"),
        (NOT_JUDGED, "stands, nothing judged"), (FALLS, "falls"),
    ):  # fmt: skip
        _square(page, x, top, SQUARE - 0.6, verdict)
        x += SQUARE + 1.5 + page.text(x + SQUARE + 1.0, top - 3.5, words, style.SMALL) + 6.0


def _loads(page: Page, found: Lost, zone: Rect, speech: Tongue) -> None:
    """Beside every row the least factor, and the greatest tension and pull, of the cases in which it stands."""
    columns = (
        Column("least\nfactor"), Column("of"), Column("wind\nfrom", "right", spare=2), Column("greatest\ntension", "right"),
        Column("of", spare=1), Column("greatest\npull", "right"), Column("of", spare=3),
    )  # fmt: skip
    rows = [load_row(found, k, speech, force) for k in range(len(found.losses))]
    grid = Grid(columns, tuple([tuple([(cell,) for cell in row]) for row in rows]))
    draw_grid(page, grid, zone.left, zone.top - ABOVE + grid.head_height, zone.width)


def load_row(found: Lost, k: int, speech: Tongue, how: Say) -> list[str]:
    """Least factor, of what, in which wind; greatest tension and pull, of what; forces told as `how` does."""
    cells = found.cells[k]
    if found.still[k] or (cells.verdict >= FALLS).all():
        return [ABSENT] * 7
    out = [ABSENT] * 3
    least = worst_use(cells)
    if least is not None:
        out = [
            f"{factor(cells.required[least] / cells.use[least])}{' past' if cells.use[least] > 1 else ''}",
            _fails(cells, least),
            bearing(found.lines[least].wind_from),
        ]
    names = ([c.name for c in found.scenario.cable], [a.name for a in found.scenario.anchor])
    for loads, some in zip((cells.tension, cells.pull), names, strict=True):
        if loads.size == 0 or np.isnan(loads).all():
            out += [ABSENT, ABSENT]
            continue
        column = first_greatest(loads) % loads.shape[1]
        out += [speech.say(how, float(np.nanmax(loads))), shortened(some[column], 26.0, style.BODY)]
    return out


def _fails(cells: Cells, line: int) -> str:
    """What governs a line, and in which of its ways of failing; by what it is judged where it has but one, or there is no room."""
    item = cells.items[int(cells.governs[line])]
    every = [f"{item.thing}, {words}" for words in (cells.how(line), item.quantity) if words]
    return next((words for words in every if width(words, style.BODY) < FAILS), shortened(every[-1], FAILS, style.BODY))
