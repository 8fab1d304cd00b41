"""The site on the plan: boundary and setback, obstacles with their names and what they ask, under everything else.

Areas are pale, with an outline; an overhead line and a service are lines, told apart by their dashes and by name.  Lines break where words
stand, and what lies outside the plan's room is cut off at its edge.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from typing import TYPE_CHECKING

import numpy as np

from guys.drawing import blocks, style
from guys.drawing.blocks import Line
from guys.drawing.labels import Array, Field, all_over, around, hidden, place
from guys.drawing.lettering import shortened
from guys.drawing.page import Dash, Page, Rect
from guys.drawing.rounding import Tongue, length
from guys.site import Obstacle, Site

if TYPE_CHECKING:
    from shapely.geometry.base import BaseGeometry

BOUNDARY: Dash = (0.0, (9.0, 2.0, 1.5, 2.0))
OVERHEAD: Dash = (0.0, (12.0, 2.5))
SERVICE: Dash = (0.0, (2.0, 2.0))
STEP = 0.4
"""[mm] pieces in which a line may break."""
OnPage = Callable[[Array], Array]


def draw_site(page: Page, site: Site, field: Field, on_page: OnPage, tongue: Tongue, asks: bool = True) -> None:
    """Names where there is room, with what each asks, or without; then areas and lines round all words."""
    for obstacle in site.obstacles:
        shown = [points for points, _ in pieces(obstacle.shape, field.room, on_page)]
        name = Line(shortened(obstacle.name, 44.0, style.BODY), colour=style.GREY)
        _label(page, field, [name, *(_asks(obstacle, tongue) if asks else [])], shown, [points.mean(axis=0) for points in shown[:1]])
    if site.boundary is not None:
        setback = f", setback {tongue.say(length, site.setback)}" if asks and site.setback > 0 else ""
        shown = [points for points, _ in pieces(site.boundary.boundary, field.room, on_page)]
        _label(page, field, [Line(f"boundary{setback}", colour=style.GREY)], shown, [])
    for obstacle in site.obstacles:
        _obstacle(page, obstacle, field, on_page)
    if site.boundary is not None:
        _edge(page, site.boundary, field, on_page, 1.3, BOUNDARY, "boundary")
        if site.setback > 0:
            _edge(page, site.boundary.buffer(-site.setback), field, on_page, style.HAIR, style.DOTTED, "setback")


def _obstacle(page: Page, obstacle: Obstacle, field: Field, on_page: OnPage) -> None:
    dash: Dash = {"line": OVERHEAD, "service": SERVICE}.get(obstacle.kind, style.SOLID)
    for points, closed in pieces(obstacle.shape, field.room, on_page):
        if closed:
            page.shape(points, style.GROUND, order=0.4)
        if len(points) == 1:
            page.circle(points[0], 1.0, edge=style.GREY, order=0.6, name=obstacle.kind)
        else:
            _line(page, points, field, style.HAIR if closed else style.THIN, dash, obstacle.kind)


def _edge(page: Page, area: BaseGeometry, field: Field, on_page: OnPage, weight: float, dash: Dash, name: str) -> None:
    for points, _ in pieces(area.boundary, field.room, on_page):
        _line(page, points, field, weight, dash, name)


def _line(page: Page, points: Array, field: Field, weight: float, dash: Dash, name: str) -> None:
    along = np.concatenate([[0.0], np.cumsum(np.linalg.norm(np.diff(points, axis=0), axis=1))])
    fine = np.union1d(along, np.arange(0.0, along[-1], STEP))
    line = np.column_stack([np.interp(fine, along, points[:, i]) for i in (0, 1)])
    page.line(np.where(hidden(line, field)[:, None], np.nan, line), style.GREY, weight, dash, order=0.7, name=name)


def pieces(shape: BaseGeometry, room: Rect, on_page: OnPage) -> Iterator[tuple[Array, bool]]:
    """The parts of a shape within the room, on the page [mm]: points (point, 2), and whether they close round an area."""
    import shapely

    drawn = shapely.transform(shape, on_page)
    seen = shapely.intersection(drawn, shapely.box(room.left, room.bottom, room.right, room.top))
    for part in shapely.get_parts(seen):
        if not part.is_empty:
            area = part.geom_type == "Polygon"
            yield np.asarray(shapely.get_coordinates(part.exterior if area else part)), area


def _asks(obstacle: Obstacle, tongue: Tongue) -> list[Line]:
    asked = (("headroom", obstacle.headroom), ("height", obstacle.height), ("keep off", obstacle.distance), ("clear", obstacle.clearance))
    words = [f"{name} {tongue.say(length, value)}" for name, value in asked if value is not None]
    return [Line(", ".join(words), colour=style.GREY)] if words else []


def _label(page: Page, field: Field, lines: list[Line], shown: list[Array], first: list[Array]) -> None:
    """Words at one of the places `first`, or else along what shows; left out where there is room nowhere."""
    if not shown:
        return
    points = max(shown, key=lambda p: float(np.ptp(p, axis=0).sum()))
    along = np.linspace(0, len(points) - 1, 9)[[4, 2, 6, 1, 7]]
    spots = np.column_stack([np.interp(along, np.arange(len(points)), points[:, i]) for i in (0, 1)])
    for at in (*first, *spots):
        trial = field.copied()
        spot = place(trial, all_over(around(at, blocks.size(lines), 0.5), field.room))
        if not spot.clashes:
            field.add_place(spot)
            blocks.draw_placed(page, spot, at, lines)
            return
