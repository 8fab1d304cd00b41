"""Text measured and drawn from the outlines of one typeface, so that a layout made in millimetres holds in every file kind.

A line of text is as wide as the sum of its glyphs' advances (1/1000 em, unhinted, no kerning: pair kerning only narrows it).  PDF and
SVG set the same unhinted glyphs; pixels are filled straight from the outlines, which keeps the picture true to the page at any
resolution and costs a tenth of hinted text.  The typeface is the one that matplotlib ships (DejaVu Sans).
"""

from __future__ import annotations

from functools import lru_cache
from pathlib import Path as FilePath

import matplotlib
import numpy as np
from matplotlib.artist import Artist
from matplotlib.backend_bases import RendererBase
from matplotlib.backends.backend_agg import RendererAgg
from matplotlib.font_manager import FontProperties
from matplotlib.ft2font import FT2Font, LoadFlags
from matplotlib.path import Path
from matplotlib.transforms import Affine2D, Bbox, Transform
from numpy.typing import NDArray

from guys.drawing.style import POINT_MM

EM = 1000.0
ELLIPSIS = "…"


def _file(bold: bool) -> str:
    name = "DejaVuSans-Bold.ttf" if bold else "DejaVuSans.ttf"
    return str(FilePath(matplotlib.get_data_path()) / "fonts" / "ttf" / name)


@lru_cache(maxsize=2)
def _font(bold: bool) -> FT2Font:
    font = FT2Font(_file(bold))
    font.set_size(EM, 72.0)
    return font


@lru_cache(maxsize=2)
def _known(bold: bool) -> frozenset[int]:
    return frozenset(_font(bold).get_charmap())


@lru_cache(maxsize=512)
def _advance(character: str, bold: bool) -> float:
    glyph = _font(bold).load_char(ord(character), flags=LoadFlags.NO_HINTING)
    return float(glyph.linearHoriAdvance) / 65536.0 / EM


@lru_cache(maxsize=512)
def _glyph(character: str, bold: bool) -> tuple[NDArray[np.float64], NDArray[np.uint8]]:
    font = _font(bold)
    font.load_char(ord(character), flags=LoadFlags.NO_HINTING)
    vertices, codes = font.get_path()
    return np.asarray(vertices, dtype=float) / EM, np.asarray(codes, dtype=np.uint8)


def plain(text: str, bold: bool = False) -> str:
    """One line the typeface can set: line ends and tabs as spaces, a glyph it lacks as a question mark."""
    known = _known(bold)
    return "".join(c if ord(c) in known else " " if c.isspace() else "?" for c in text)


def width(text: str, size: float, bold: bool = False) -> float:
    """Width [mm] of one line at `size` points."""
    return sum(_advance(c, bold) for c in text) * size * POINT_MM


def height(size: float) -> float:
    """Height [mm] from the lowest descender to the top of capitals."""
    return 1.0 * size * POINT_MM


def fitted(text: str, room: float, size: float, bold: bool = False) -> str:
    """The text, or as much of it as `room` [mm] holds, ended by an ellipsis."""
    if width(text, size, bold) <= room:
        return text
    while text and width(text + ELLIPSIS, size, bold) > room:
        text = text[:-1].rstrip()
    return text + ELLIPSIS


def shortened(text: str, room: float, size: float, bold: bool = False) -> str:
    """A name cut in its middle where `room` [mm] is short: its beginning and its end tell it apart."""
    if width(text, size, bold) <= room:
        return text
    for kept in range(len(text) - 1, 1, -1):
        short = text[: (kept + 1) // 2].rstrip() + ELLIPSIS + text[-(kept // 2) :].lstrip()
        if width(short, size, bold) <= room:
            return short
    return ELLIPSIS


def _chunks(word: str, room: float, size: float, bold: bool) -> list[str]:
    """A word longer than the line, cut to pieces that fit."""
    pieces, piece = [], ""
    for character in word:
        if piece and width(piece + character, size, bold) > room:
            pieces.append(piece)
            piece = ""
        piece += character
    return [*pieces, piece]


def wrapped(text: str, room: float, size: float, bold: bool = False) -> list[str]:
    """The text broken into lines no wider than `room` [mm]; nothing is left out."""
    lines: list[str] = []
    for word in plain(text, bold).split():
        trial = f"{lines[-1]} {word}" if lines else word
        if lines and width(trial, size, bold) <= room:
            lines[-1] = trial
        else:
            lines.extend(_chunks(word, room, size, bold))
    return lines


def outline(text: str, bold: bool) -> Path:
    """All glyphs of a line as one path, in em, its origin at the start of the baseline."""
    vertices, codes, x = [np.zeros((1, 2))], [np.array([Path.MOVETO], dtype=np.uint8)], 0.0
    for character in text:
        shape, code = _glyph(character, bold)
        if len(shape):
            vertices.append(shape + np.array([x, 0.0]))
            codes.append(code)
        x += _advance(character, bold)
    return Path(np.concatenate(vertices[1:] or vertices), np.concatenate(codes[1:] or codes))


class TextLine(Artist):
    """One line of text at a baseline origin in page millimetres."""

    def __init__(self, x: float, y: float, text: str, size: float, bold: bool, colour: str, page: Transform, shrink: float):
        super().__init__()
        self.x, self.y, self.text, self.size, self.bold, self.colour = x, y, text, size, bold, colour
        self.shrink = shrink
        self.set_transform(page)

    def get_text(self) -> str:
        """The text, as other matplotlib text artists give it."""
        return self.text

    def _placed(self, pixels_per_point: float) -> Affine2D:
        x, y = self.get_transform().transform((self.x, self.y))
        return Affine2D().scale(self.size * self.shrink * pixels_per_point).translate(x, y)

    def get_window_extent(self, renderer: RendererBase | None = None) -> Bbox:
        """What the glyphs cover, control points of their curves included, in pixels of the figure."""
        figure, path = self.get_figure(), outline(self.text, self.bold)
        if figure is None or path.codes is None:
            return Bbox.null()
        points = self._placed(figure.dpi / 72.0).transform(np.asarray(path.vertices)[path.codes != Path.CLOSEPOLY])
        return Bbox([points.min(axis=0), points.max(axis=0)])

    def get_tightbbox(self, renderer: RendererBase | None = None) -> Bbox:
        """The same: nothing is clipped."""
        return self.get_window_extent(renderer)

    def draw(self, renderer: RendererBase) -> None:
        """Fill the outlines in a pixel picture; set text in a PDF or SVG."""
        gc = renderer.new_gc()
        gc.set_foreground(self.colour)
        gc.set_linewidth(0.0)
        gc.set_snap(False)
        if isinstance(renderer, RendererAgg):
            path, rgb = outline(self.text, self.bold), gc.get_rgb()
            renderer.draw_path(gc, path, self._placed(renderer.dpi / 72.0), rgb)  # type: ignore[no-untyped-call]
        else:
            self._set(renderer, gc)
        gc.restore()

    def _set(self, renderer: RendererBase, gc: object) -> None:
        x, y = self.get_transform().transform((self.x, self.y))
        if renderer.flipy():
            y = renderer.get_canvas_width_height()[1] - y
        font = FontProperties(fname=_file(self.bold), size=self.size * self.shrink)
        renderer.draw_text(gc, x, y, self.text, font, 0.0, ismath=False)  # type: ignore[arg-type]
