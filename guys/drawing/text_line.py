"""A line of text drawn from the outlines of the typeface it was measured by.

PDF and SVG set the unhinted glyphs; pixels are filled straight from the outlines, which keeps the picture true to the page at any
resolution and costs a tenth of hinted text.
"""

from __future__ import annotations

from functools import lru_cache

import numpy as np
from matplotlib.artist import Artist
from matplotlib.backend_bases import RendererBase
from matplotlib.backends.backend_agg import RendererAgg
from matplotlib.font_manager import FontProperties
from matplotlib.ft2font import LoadFlags
from matplotlib.path import Path
from matplotlib.transforms import Affine2D, Bbox, Transform
from numpy.typing import NDArray

from guys.drawing.lettering import EM, advance, font_of, typeface


@lru_cache(maxsize=512)
def _glyph(character: str, bold: bool) -> tuple[NDArray[np.float64], NDArray[np.uint8]]:
    font = font_of(bold)
    font.load_char(ord(character), flags=LoadFlags.NO_HINTING)
    vertices, codes = font.get_path()
    return np.asarray(vertices, dtype=float) / EM, np.asarray(codes, dtype=np.uint8)


def outline(text: str, bold: bool) -> Path:
    """All glyphs of a line as one path, in em, its origin at the start of the baseline."""
    vertices, codes, x = [np.zeros((1, 2))], [np.array([Path.MOVETO], dtype=np.uint8)], 0.0
    for character in text:
        shape, code = _glyph(character, bold)
        if len(shape):
            vertices.append(shape + np.array([x, 0.0]))
            codes.append(code)
        x += advance(character, bold)
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
        font = FontProperties(fname=typeface(self.bold), size=self.size * self.shrink)
        renderer.draw_text(gc, x, y, self.text, font, 0.0, ismath=False)  # type: ignore[arg-type]
