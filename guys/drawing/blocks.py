"""Blocks of words: a few lines that belong together, measured before they are placed."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from guys.drawing import style
from guys.drawing.labels import Array, Place
from guys.drawing.lettering import plain, width
from guys.drawing.page import Align, Page

_ARROW_ROOM = 4.6
_DESCENT = 0.24
_TOP = 0.78


@dataclass(frozen=True)
class Line:
    """One line of a block; `rest` follows in regular weight; `wind_from` puts a small arrow before it that flies with that wind."""

    text: str
    size: float = style.BODY
    bold: bool = False
    colour: str = style.INK
    wind_from: float | None = None
    rest: str = ""

    @property
    def width(self) -> float:
        """Width [mm], arrow included."""
        room = 0.0 if self.wind_from is None else _ARROW_ROOM
        return width(plain(self.text, self.bold), self.size, self.bold) + width(plain(self.rest), self.size) + room

    @property
    def pitch(self) -> float:
        """Height [mm] the line takes."""
        return self.size * style.POINT_MM * style.LINE_PITCH


def size(lines: Sequence[Line]) -> tuple[float, float]:
    """Width and height [mm] of a block."""
    slack = (style.LINE_PITCH - _TOP - _DESCENT) * style.POINT_MM * (lines[0].size if lines else 0.0)
    return max(line.width for line in lines), sum(line.pitch for line in lines) - slack


def draw(page: Page, box: Array, lines: Sequence[Line], align: Align = "left") -> None:
    """Set a block into its box."""
    left, _, right, top = (float(v) for v in box)
    y = top - _TOP * lines[0].size * style.POINT_MM
    for i, line in enumerate(lines):
        if i:
            y -= lines[i - 1].pitch * (1.0 - _TOP / style.LINE_PITCH) + line.pitch * _TOP / style.LINE_PITCH
        start = {"left": left, "right": right - line.width, "centre": (left + right - line.width) / 2.0}[align]
        if line.wind_from is not None:
            small_wind(page, start + 1.7, y + 0.32 * line.size * style.POINT_MM, line.wind_from)
            start += _ARROW_ROOM
        wide = page.text(start, y, line.text, line.size, line.bold, line.colour)
        if line.rest:
            page.text(start + wide, y, line.rest, line.size, False, line.colour)


def small_wind(page: Page, x: float, y: float, wind_from: float, reach: float = 1.6) -> None:
    """A small arrow that flies with the wind, north up."""
    run = reach * np.array([np.sin(wind_from), np.cos(wind_from)])
    page.arrow([x + run[0], y + run[1]], [x - run[0], y - run[1]], style.WIND, weight=0.9, size=1.4)


def draw_placed(page: Page, at: Place, point: Array, lines: Sequence[Line]) -> None:
    """A placed block with its leader; it is ranged toward its point."""
    middle = (at.box[0] + at.box[2]) / 2.0
    draw(page, at.box, lines, "left" if middle >= point[0] else "right")
    if at.leader is not None:
        page.line(at.leader, style.GREY, style.HAIR, order=3.0, name="leader")
    if at.clashes:
        page.crowded.append(lines[0].text)
