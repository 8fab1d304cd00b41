"""How each case goes: the mode over the elevation, and heads and tensions against the factor on its loads; the lowest reserves first.

The elevation looks square to where the structure goes.  Grey: in still air; ink: the last state that stands, true to scale; dashed in the
colour of loads: the motion it goes in, its size chosen.  Rings mark where a cable first drops.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import TYPE_CHECKING

import numpy as np

from guys.drawing import rounding, style
from guys.drawing.graph import Curve, Graph, draw_graph
from guys.drawing.leaf import Words, leaf
from guys.drawing.lettering import fitted
from guys.drawing.page import Dash, Page, Rect
from guys.drawing.reading import View
from guys.drawing.rounding import INCH, POUND_FORCE, Tongue, Units, tongue
from guys.drawing.scales import length_bar, ratio_text, ratio_to_fit
from guys.reserves import WORDS, Outline, Reserve, Reserves, Standing

if TYPE_CHECKING:
    from matplotlib.figure import Figure

ROWS = 6
"""Paths drawn, those with the least factor."""
ROW, HEAD, KEY, GAP = 92.0, 12.0, 8.0, 8.0
PICTURE, NAMES = 116.0, 34.0
"""Millimetres: height of a row, of its words, of the key, between panels; width of the elevation, of names beside a graph."""
LIVELY = 1e3
"""[N] tensions from here are told in thousands."""


def draw_reserves(found: Reserves, paper: str, units: Units) -> Figure:
    """The page as a figure."""
    return draw_reserve_page(found, paper, units).figure


def draw_reserve_page(found: Reserves, paper: str, units: Units) -> Page:
    """The page with what was placed on it."""
    shown, left_out = found.lowest_first[:ROWS], found.lowest_first[ROWS:]
    below = [*_left_out(left_out), *_without_path(found), *found.notes]
    needed = KEY + max(ROW * len(shown), 12.0)
    page, zone = leaf(paper, Words(found.scenario.title, "stability reserve", below, found.cautions), needed)
    if not shown:
        page.text(zone.left, zone.top - 6.0, "No case stands, so none has a reserve.", style.BODY, bold=True)
        return page
    _key(page, zone)
    for k, (standing, reserve) in enumerate(shown):
        top = zone.top - KEY - ROW * k
        _row(page, found, standing, reserve, Rect(zone.left, top - ROW, zone.right, top), tongue(units))
    return page


def row_words(standing: Standing, reserve: Reserve) -> str:
    """Case, wind, which loads, and the factor."""
    wind = "" if math.isnan(standing.wind_from) else f", wind from {rounding.bearing(standing.wind_from)}"
    at = rounding.reserve(reserve.factor, reserve.stands_to, reserve.failed)
    how = f"lost at {at} times" if math.isfinite(reserve.factor) else f"{at} times"
    return f"{standing.case}{wind}: {standing.verdict}; equilibrium {how} {'the wind' if reserve.loads == 'wind' else 'all loads'}"


def _without_path(found: Reserves) -> Iterator[str]:
    """The cases that have no reserve: those of one verdict together, with their winds, and in words how the first of them goes."""
    for case, verdict in dict.fromkeys((s.case, s.verdict) for s in found.every if not s.reserves):
        alike = [s for s in found.every if not s.reserves and (s.case, s.verdict) == (case, verdict)]
        winds = [rounding.bearing(s.wind_from) for s in alike if not math.isnan(s.wind_from)]
        wind = f", wind from {', '.join(winds)}" if winds else ""
        first = f"from {winds[0]}: " if len(winds) > 1 else ""
        yield f"{case}{wind}: {verdict}: {first}{alike[0].words}"


def _left_out(pairs: tuple[tuple[Standing, Reserve], ...]) -> list[str]:
    return [f"not drawn: {'; '.join(row_words(*pair) for pair in pairs)}"] if pairs else []


def _row(page: Page, found: Reserves, standing: Standing, reserve: Reserve, zone: Rect, speech: Tongue) -> None:
    page.line([(zone.left, zone.top), (zone.right, zone.top)], style.PALE, style.HAIR)
    page.text(zone.left, zone.top - 5.0, fitted(row_words(standing, reserve), zone.width, style.BODY, bold=True), style.BODY, bold=True)
    page.text(zone.left, zone.top - 9.4, fitted(reserve.falls or "not lost on the path", zone.width, style.SMALL), style.SMALL)
    body = zone.inset(0.0, 3.0, 0.0, HEAD)
    _picture(page, found.erected, reserve, Rect(body.left, body.bottom, body.left + PICTURE, body.top), speech)
    wide = (body.width - PICTURE - 2 * GAP) / 2
    for k, graph in enumerate((_heads(found, reserve, speech), _tensions(found, reserve, speech))):
        left = body.left + PICTURE + GAP + k * (wide + GAP)
        draw_graph(page, graph, Rect(left, body.bottom, left + wide, body.top), NAMES)


def _graph(found: Reserves, reserve: Reserve, head: str, curves: list[Curve]) -> Graph:
    return Graph(head, f"times {WORDS[reserve.loads]}", 1.0, float(reserve.path.factor[-1]), curves)


def _heads(found: Reserves, reserve: Reserve, speech: Tongue) -> Graph:
    unit, name = (1.0, "m") if speech.systems[0] == "SI" else (12 * INCH, "ft")
    moves = np.linalg.norm(reserve.path.head, axis=-1) / unit
    spars = found.scenario.spar
    curves = [Curve(s.name, np.column_stack([reserve.path.factor, moves[:, k]]), np.zeros((0, 2))) for k, s in enumerate(spars)]
    return _graph(found, reserve, f"head moves from still air [{name}]", curves)


def _tensions(found: Reserves, reserve: Reserve, speech: Tongue) -> Graph:
    great = float(np.nanmax(reserve.path.tension, initial=0.0))
    if speech.systems[0] == "SI":
        unit, name = (1e3, "kN") if great >= LIVELY else (1.0, "N")
    else:
        unit, name = (1e3 * POUND_FORCE, "kip") if great >= LIVELY * POUND_FORCE else (POUND_FORCE, "lbf")
    curves = []
    for k, cable in enumerate(found.scenario.cable):
        points = np.column_stack([reserve.path.factor, reserve.path.tension[:, k] / unit])
        at = reserve.drops[k]
        ring = np.array([[at, np.interp(at, *points.T)]]) if math.isfinite(at) else np.zeros((0, 2))
        curves.append(Curve(cable.name, points, ring))
    return _graph(found, reserve, f"cable tensions [{name}], rings where one first drops", curves)


def _picture(page: Page, erected: Outline | None, reserve: Reserve, zone: Rect, speech: Tongue) -> None:
    """The elevation, looking square to where it goes."""
    mode = reserve.mode
    view = View((mode.bearing if mode is not None else math.pi / 2) - math.pi / 2)
    layers: list[tuple[Outline, str, float, Dash]] = [(reserve.last, style.INK, 1.6, style.SOLID)]
    if erected is not None:
        layers.insert(0, (erected, style.PALE, 1.6, style.SOLID))
    if mode is not None:
        layers.append((mode.gone, style.LOAD, 1.6, style.DASHED))
    points = view.project(np.concatenate([p.reshape(-1, 3) for o, *_ in layers for p in (*o.spars, o.cables)]))
    low, high = np.nanmin(points, axis=0), np.nanmax(points, axis=0)
    span = np.maximum(high - low, 0.5)
    room = zone.inset(2.0, 10.0, 2.0, 7.0)
    ratio = ratio_to_fit((float(span[0]), float(span[1])), (room.width, room.height), page.shrink)
    per_metre = page.scaled(ratio)
    middle = np.array([(room.left + room.right) / 2, room.bottom]) - per_metre * np.array([(low[0] + high[0]) / 2, low[1]])
    looking = rounding.bearing(view.toward % (2 * math.pi))
    head = page.text(zone.left, zone.top - 3.4, f"looking toward {looking}", style.BODY, bold=True)
    page.text(zone.left + head + 2.0, zone.top - 3.4, f"{ratio_text(ratio)} on {page.paper}", style.SMALL, colour=style.GREY)
    for outline, colour, weight, dash in layers:
        for cable in outline.cables:
            page.line(middle + per_metre * view.project(cable), colour, style.HAIR, dash, order=2.0)
        for spar in outline.spars:
            page.line(middle + per_metre * view.project(spar), colour, weight, dash, order=3.0, butt=True)
    length_bar(page, zone.left + 2.0, zone.bottom + 4.0, per_metre, 30.0, speech.systems[0])


def _key(page: Page, zone: Rect) -> None:
    rows: tuple[tuple[str, Dash, str], ...] = (
        (style.PALE, style.SOLID, "in still air"),
        (style.INK, style.SOLID, "the last state that stands"),
        (style.LOAD, style.DASHED, "the motion it goes in (size chosen)"),
    )
    x, y = zone.left, zone.top - 3.0
    for colour, dash, words in rows:
        page.line([(x, y + 1.0), (x + 9.0, y + 1.0)], colour, 1.6, dash, butt=True)
        x += 11.0 + page.text(x + 11.0, y, words, style.SMALL) + 8.0
    page.circle((x + 1.1, y + 1.0), 1.1, style.WHITE, style.LOAD, 1.2)
    page.text(x + 4.0, y, "a cable first drops", style.SMALL)
