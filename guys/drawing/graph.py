"""A curve or several against one quantity, in a frame with round steps; each named at its end, beside the frame."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np

from guys.drawing import style
from guys.drawing.labels import Array
from guys.drawing.lettering import shortened
from guys.drawing.page import Page, Rect
from guys.drawing.scales import round_below

PITCH = 4.3
"""Millimetres between names, one under the other."""
NAMED_FROM = 4.0
FOOT = 6.0
SIDE = 13.0
HEAD = 6.0
"""Millimetres: from the frame to the names; below, left of and above the frame for figures and heading."""


@dataclass(frozen=True)
class Curve:
    """points (point, 2) across, up; rings (ring, 2) marked on it."""

    name: str
    points: Array
    rings: Array


@dataclass(frozen=True)
class Graph:
    """Curves in a frame from `first` to `last` across and from zero up; `across`, `up`: what they are, with units."""

    head: str
    across: str
    first: float
    last: float
    curves: Sequence[Curve]


def draw_graph(page: Page, graph: Graph, zone: Rect, names: float) -> None:
    """The graph in its zone, `names` millimetres of it kept on the right for names."""
    frame = zone.inset(SIDE, FOOT + 4.0, names, HEAD)
    page.text(zone.left, zone.top - 3.4, shortened(graph.head, zone.width - 2.0, style.BODY, bold=True), style.BODY, bold=True)
    top = max((float(np.nanmax(c.points[:, 1], initial=0.0)) for c in graph.curves), default=0.0) * 1.06 or 1.0
    wide = max(graph.last - graph.first, 1e-9)

    def at(points: Array) -> Array:
        x, y = np.asarray(points, dtype=float).reshape(-1, 2).T
        return np.column_stack([frame.left + (x - graph.first) / wide * frame.width, frame.bottom + y / top * frame.height])

    _steps(page, graph, frame, top, at)
    for curve in graph.curves:
        page.line(at(curve.points), style.INK, style.CABLE, order=3.0, name=f"curve {curve.name}")
        for ring in at(curve.rings):
            page.circle(ring, 1.1, style.WHITE, style.LOAD, 1.2, order=3.5)
    _names(page, graph, frame, at, names)


def _steps(page: Page, graph: Graph, frame: Rect, top: float, at: Callable[[Array], Array]) -> None:
    """Frame, hairlines at round values up and across, their figures."""
    step = round_below(top / 2.5)
    for value in np.arange(0.0, top, step):
        y = float(at(np.array([graph.first, value]))[0, 1])
        page.line([(frame.left, y), (frame.right, y)], style.PALE, style.HAIR, order=1.0)
        page.text(frame.left - 1.5, y - 1.1, f"{value:g}", style.SMALL, colour=style.GREY, align="right")
    step = round_below(max(graph.last - graph.first, 1e-9) / 2.5)
    for value in np.arange(np.ceil(graph.first / step - 1e-9) * step, graph.last + 1e-9 * step, step):
        x = float(at(np.array([value, 0.0]))[0, 0])
        page.line([(x, frame.bottom), (x, frame.top)], style.PALE, style.HAIR, order=1.0)
        page.text(x, frame.bottom - 4.2, f"{value:g}", style.SMALL, colour=style.GREY, align="centre")
    page.line([(frame.left, frame.top), (frame.left, frame.bottom), (frame.right, frame.bottom)], style.INK, style.THIN)
    page.text(frame.right, frame.bottom - 8.4, graph.across, style.SMALL, colour=style.GREY, align="right")


def _names(page: Page, graph: Graph, frame: Rect, at: Callable[[Array], Array], room: float) -> None:
    """Names from the top down in the order of the curves' ends, pushed apart; the lowest are counted where there is no room for all."""
    ends = [(at(c.points[np.isfinite(c.points[:, 1])][-1])[0], c.name) for c in graph.curves if np.isfinite(c.points[:, 1]).any()]
    ends.sort(key=lambda end: -end[0][1])
    most = max(int(frame.height / PITCH), 1)
    if len(ends) > most:
        rest = len(ends) - most + 1
        ends = [*ends[: most - 1], (ends[most - 1][0], f"and {rest} more")]
    y = np.array([float(end[1]) for end, _ in ends])
    for k in range(1, len(y)):
        y[k] = min(y[k], y[k - 1] - PITCH)
    for k in range(len(y) - 1, -1, -1):
        y[k] = max(y[k], frame.bottom + PITCH * (len(y) - 1 - k) - 1.0)
    for (end, name), level in zip(ends, y, strict=True):
        page.line([end, (frame.right + NAMED_FROM - 0.8, level)], style.GREY, style.HAIR, order=2.0)
        page.text(frame.right + NAMED_FROM, level - 1.1, shortened(name, room - NAMED_FROM - 1.0, style.SMALL), style.SMALL)
