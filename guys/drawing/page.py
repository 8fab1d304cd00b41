"""One sheet of paper as a drawing surface in millimetres, y upward, origin at the lower left corner.

The composition is made for A3.  Smaller paper shrinks everything by one factor `shrink`, so a design millimetre is `shrink` paper
millimetres; true scale is kept by asking `scaled` for the design millimetres of a metre at a ratio on the real paper.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Literal

import numpy as np
from numpy.typing import ArrayLike, NDArray

from guys.drawing import style
from guys.drawing.lettering import plain, width

if TYPE_CHECKING:
    from matplotlib.artist import Artist
    from matplotlib.figure import Figure
    from matplotlib.transforms import Transform

    from guys.drawing.text_line import TextLine

Paper = Literal["A3", "A4", "letter", "tabloid"]
Align = Literal["left", "right", "centre"]
Dash = Literal["solid"] | tuple[float, tuple[float, ...]]

# Paper in mm and the factor from the A3 composition: chosen so that 9 pt never falls under 6 pt.
PAPERS: dict[str, tuple[float, float, float]] = {
    "A3": (420.0, 297.0, 1.0),
    "A4": (297.0, 210.0, 297.0 / 420.0),
    "tabloid": (431.8, 279.4, 0.98),
    "letter": (279.4, 215.9, 0.68),
}


@dataclass(frozen=True)
class Rect:
    """A rectangle on the page [mm]."""

    left: float
    bottom: float
    right: float
    top: float

    @property
    def width(self) -> float:
        """Width [mm]."""
        return self.right - self.left

    @property
    def height(self) -> float:
        """Height [mm]."""
        return self.top - self.bottom

    def inset(self, left: float, bottom: float, right: float, top: float) -> Rect:
        """The rectangle within, so far from each side."""
        return Rect(self.left + left, self.bottom + bottom, self.right - right, self.top - top)


@dataclass
class Page:
    """A figure, its millimetre transform and what was drawn in it."""

    paper: str
    width: float
    height: float
    shrink: float
    figure: Figure
    transform: Transform
    texts: list[TextLine] = field(default_factory=list)
    crowded: list[str] = field(default_factory=list)

    def scaled(self, ratio: float) -> float:
        """Design millimetres of one metre at 1:`ratio` on the real paper."""
        return 1000.0 / ratio / self.shrink

    def add(self, artist: Artist, order: float) -> None:
        """Put an artist on the page."""
        artist.set_zorder(order)
        self.figure.add_artist(artist)

    def line(
        self,
        points: ArrayLike,
        colour: str = style.INK,
        weight: float = style.THIN,
        dash: Dash = "solid",
        order: float = 2.0,
        name: str = "",
        butt: bool = False,
    ) -> None:
        """A polyline through points (point, 2); NaN breaks it."""
        from matplotlib.lines import Line2D

        x, y = np.asarray(points, dtype=float).T
        cap: Literal["butt", "round"] = "butt" if butt or dash != style.SOLID else "round"
        stroke = Line2D(
            x, y, color=colour, linewidth=weight * self.shrink, linestyle=dash, transform=self.transform,
            solid_capstyle=cap, dash_capstyle="butt", solid_joinstyle="round",
        )  # fmt: skip
        if name:
            stroke.set_gid(name)
        self.add(stroke, order)

    def shape(
        self, points: ArrayLike, fill: str | None = None, edge: str | None = None, weight: float = style.THIN, order: float = 2.0
    ) -> None:
        """A closed polygon."""
        from matplotlib.patches import Polygon

        self.add(
            Polygon(
                np.asarray(points, dtype=float), closed=True, facecolor=fill or "none", edgecolor=edge or "none",
                linewidth=weight * self.shrink if edge else 0.0, transform=self.transform,
            ),
            order,
        )  # fmt: skip

    def circle(
        self,
        centre: ArrayLike,
        radius: float,
        fill: str | None = None,
        edge: str | None = None,
        weight: float = style.THIN,
        order: float = 2.0,
        name: str = "",
    ) -> None:
        """A circle or disc."""
        from matplotlib.patches import Circle

        x, y = np.asarray(centre, dtype=float)
        disc = Circle(
            (float(x), float(y)), radius, facecolor=fill or "none", edgecolor=edge or "none",
            linewidth=weight * self.shrink if edge else 0.0, transform=self.transform,
        )  # fmt: skip
        if name:
            disc.set_gid(name)
        self.add(disc, order)

    def text(
        self,
        x: float,
        y: float,
        text: str,
        size: float = style.BODY,
        bold: bool = False,
        colour: str = style.INK,
        align: Align = "left",
    ) -> float:
        """One line with its baseline at y; returns its width [mm]."""
        from guys.drawing.text_line import TextLine

        text = plain(text, bold)
        wide = width(text, size, bold)
        start = x - {"left": 0.0, "right": wide, "centre": wide / 2.0}[align]
        artist = TextLine(start, y, text, size, bold, colour, self.transform, self.shrink)
        self.texts.append(artist)
        self.add(artist, 6.0)
        return wide

    def arrow(self, tail: ArrayLike, head: ArrayLike, colour: str, weight: float = 1.2, size: float = 2.2, order: float = 4.0) -> None:
        """A straight arrow with a filled head of `size` mm."""
        a, b = np.asarray(tail, dtype=float), np.asarray(head, dtype=float)
        along = (b - a) / max(float(np.hypot(*(b - a))), 1e-9)
        across = np.array([-along[1], along[0]])
        neck = b - size * along
        self.line([a, neck], colour, weight, order=order, butt=True)
        self.shape([b, neck + 0.38 * size * across, neck - 0.38 * size * across], fill=colour, order=order)


def new_page(paper: str, taller: float = 0.0) -> Page:
    """An empty page, made `taller` by so many design millimetres where the words need more than the paper has."""
    wide, high, shrink = PAPERS[paper]
    return _empty(paper, wide / shrink, high / shrink + taller, shrink)


def figure_page(wide: float, high: float, paper: str = "A4") -> Page:
    """An empty page of so many millimetres, for a figure set at its full size in a text on that paper."""
    return _empty(paper, wide, high, 1.0)


def _empty(paper: str, wide: float, high: float, shrink: float) -> Page:
    from matplotlib.figure import Figure
    from matplotlib.transforms import Affine2D

    figure = Figure(figsize=(wide * shrink / 25.4, high * shrink / 25.4), facecolor=style.WHITE)
    return Page(paper, wide, high, shrink, figure, Affine2D().scale(shrink / 25.4) + figure.dpi_scale_trans)


def arc(centre: ArrayLike, radius: float, count: int = 181) -> NDArray[np.float64]:
    """Points (count, 2) around a circle, closed."""
    turn = np.linspace(0.0, 2.0 * np.pi, count)
    return np.asarray(centre, dtype=float) + radius * np.column_stack([np.sin(turn), np.cos(turn)])
