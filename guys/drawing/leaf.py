"""A page of a study: title and what it shows above, words and cautions below, as high as what stands between needs."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from guys.drawing import style
from guys.drawing.lettering import fitted, width, wrapped
from guys.drawing.page import PAPERS, Page, Rect, new_page

MARGIN = 12.0
HEAD = 20.0


@dataclass(frozen=True)
class Words:
    """title, shows: what the page shows; below: small print, cautions first in ink."""

    title: str
    shows: str
    below: Sequence[str]
    cautions: Sequence[str]


def leaf(paper: str, words: Words, needed: float) -> tuple[Page, Rect]:
    """An empty page with its words set, and the zone between of `needed` millimetres' height."""
    wide, high, shrink = PAPERS[paper]
    room = wide / shrink - 2 * MARGIN
    foot = _foot_lines(words, room)
    whole = 2 * MARGIN + HEAD + needed + 7.0 + style.ROW * len(foot)
    page = new_page(paper, whole - high / shrink)
    top, right = page.height - MARGIN, page.width - MARGIN
    page.text(right, top - 6.5, words.shows, style.HEADING, align="right")
    space = room - width(words.shows, style.HEADING) - 10.0
    page.text(MARGIN, top - 6.5, fitted(words.title, space, style.TITLE, bold=True), style.TITLE, bold=True)
    page.line([(MARGIN, top - 11.0), (right, top - 11.0)], style.INK, style.THIN)
    zone = Rect(MARGIN, top - HEAD - needed, right, top - 15.0)
    y = zone.bottom - 4.0
    page.line([(MARGIN, y), (right, y)], style.INK, style.THIN)
    for line, colour in foot:
        y -= style.ROW
        page.text(MARGIN, y, line, style.SMALL, colour=colour)
    return page, zone


def _foot_lines(words: Words, room: float) -> list[tuple[str, str]]:
    cautions = " · ".join(caution.rstrip(".") for caution in words.cautions)
    lines = [(line, style.INK) for line in wrapped(cautions, room, style.SMALL)]
    return lines + [(line, style.GREY) for text in words.below for line in wrapped(text, room, style.SMALL)]
