"""A raising: the spar from the side at some of its angles, and every force against the angle.

The side views are true to one scale, the spar as it bends in still air; a line that carries is drawn through, a slack one dashed.  From
the hinge an arrow points along the force on the ground, all to one scale.  Below each stand its forces, in still air and the greatest of
all winds.
The curves run over the angle, in still air drawn through, the greatest in wind dashed; the upright line is where the load changes side.
With both systems of units the page is in SI.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from guys.drawing import style
from guys.drawing.leaf import Words, leaf
from guys.drawing.lettering import width, wrapped
from guys.drawing.page import Dash, Page, Rect
from guys.drawing.rounding import INCH, POUND_FORCE, System, Units, load, moment, tongue
from guys.drawing.scales import length_bar, ratio_text, ratio_to_fit, round_below
from guys.rotation import Array
from guys.scenario import tilted
from guys.studies import hoisting
from guys.studies.raising import Raised

if TYPE_CHECKING:
    from matplotlib.figure import Figure

SHOWN = 5
"""Side views, spread over the angles."""
VIEW_HEAD, UNDER, ROWS = 8.0, 17.0, 6
"""Heading over a side view and room below its ground for the arrow [mm]; rows of forces under it."""
ARROW = 14.0
CURVES = 90.0
AXIS, NAMES, TOP, FOOT = 13.0, 27.0, 12.0, 8.0
"""Height of the curves' field; in it room for figures on the left, names on the right, the heading and the angles [mm]."""
FOOT_POUND = POUND_FORCE * 12 * INCH
WEIGHTS = (2.4, 1.3, 0.8, 0.8)
"""Of the curves of one panel, in order: so they can be followed where they cross."""


@dataclass(frozen=True)
class Curve:
    """One quantity over the angle: its name, (stage,) in still air and the greatest over winds (None: no wind)."""

    name: str
    still: Array
    windy: Array | None


def draw_raising(raised: Raised, paper: str, units: Units) -> Figure:
    """The page."""
    system = tongue(units).systems[0]
    warnings = hoisting.warnings(raised)
    shows = f"{raised.lift.spar.name} raised by a {raised.lift.raising.gin_pole.kind} gin pole"
    words = Words(raised.lift.scenario.title, shows, [f"Not checked: {'; '.join(hoisting.NOT_CHECKED)}"], hoisting.CAUTIONS)
    across = 396.0 / 0.98
    told = [line for text in warnings for line in wrapped(text, across - 10.0, style.BODY, bold=True)]
    tall = _views_height(raised, 396.0)
    page, zone = leaf(paper, words, tall + 4.6 * len(told) + 5.0 + CURVES)
    _views(page, raised, Rect(zone.left, zone.top - tall, zone.right, zone.top), system)
    y = zone.top - tall
    for line in told:
        y -= 4.6
        page.text(zone.left, y, line, style.BODY, bold=True)
    _curves(page, raised, Rect(zone.left, y - 5.0 - CURVES, zone.right, y - 5.0), system)
    return page.figure


# ---------------------------------------------------------------- side views


def _chosen(raised: Raised) -> list[int]:
    """Stages shown, evenly over the angles."""
    count = len(raised.angle)
    return sorted({round(k * (count - 1) / (SHOWN - 1)) for k in range(SHOWN)})


def _extent(raised: Raised) -> tuple[float, float, float, float]:
    """Least and greatest distance and height [m] of all that is drawn, from the hinge."""
    points = np.concatenate([_flat(raised, p) for p in _places(raised)])
    return float(points[:, 0].min()), float(points[:, 0].max()), min(float(points[:, 1].min()), 0.0), float(points[:, 1].max())


def _places(raised: Raised) -> list[Array]:
    rig, spars = raised.lift.rig, [raised.spars[k] for k in _chosen(raised)]
    stay = [] if rig.backstay is None else [rig.backstay[None]]
    return [rig.head, rig.winch[None], rig.holding[None], *stay, *(s.drawn for s in spars)]


def _flat(raised: Raised, points: Array) -> Array:
    """(point, 2) distance along and height above the hinge, in the plane of raising, the lying spar to the right."""
    d = np.array(tilted.lying(raised.lift.raising))
    apart = points - raised.lift.rig.hinge
    return np.column_stack([apart @ d, apart[:, 2]])


def _ratio(raised: Raised, room: float, shrink: float) -> float:
    left, right, *_ = _extent(raised)
    return ratio_to_fit((right - left, 1e-3), (room / len(_chosen(raised)) - 6.0, 1e9), shrink)


def _views_height(raised: Raised, room: float) -> float:
    _, _, low, high = _extent(raised)
    per_metre = 1000.0 / _ratio(raised, room, 1.0)
    return VIEW_HEAD + (high - low) * per_metre + UNDER + style.ROW * (ROWS + 1) + 10.0


def _views(page: Page, raised: Raised, zone: Rect, system: System) -> None:
    chosen = _chosen(raised)
    left, _, low, high = _extent(raised)
    ratio = _ratio(raised, zone.width, page.shrink)
    per_metre = page.scaled(ratio)
    wide = zone.width / len(chosen)
    ground = zone.top - VIEW_HEAD - high * per_metre
    greatest = float(np.nanmax(np.linalg.norm(raised.on_hinge[:, 0], axis=-1), initial=1e-9))
    for n, k in enumerate(chosen):
        x = zone.left + n * wide
        origin = np.array([x - left * per_metre + 2.0, ground])
        if n == 0:
            for name, place in (("winch", raised.lift.rig.winch), ("holding", raised.lift.rig.holding)):
                spot = np.maximum(origin + per_metre * _flat(raised, place[None])[0], zone.left + 4.5)
                page.text(float(spot[0]), float(spot[1]) - 5.0, name, style.SMALL, colour=style.GREY, align="centre")
        page.text(x, zone.top - 4.0, f"{math.degrees(raised.angle[k]):.4g}°", style.HEADING, bold=True)
        _view(page, raised, k, origin, per_metre, x, x + wide - 5.0)
        force = _flat(raised, raised.lift.rig.hinge + raised.on_hinge[k, :1])[0] * ARROW / greatest
        if np.isfinite(force).all() and np.hypot(*force) > 1.0:
            page.arrow(origin, origin + force, style.LOAD)
        _forces(page, raised, k, Rect(x, zone.bottom, x + wide - 5.0, ground + low * per_metre - UNDER), system)
    y = zone.bottom + 6.0
    end = length_bar(page, zone.left, y, per_metre, 40.0, system)
    words = f"side views {ratio_text(ratio)}, square to the plane of raising; slack lines dashed; arrow: force of the hinge on the ground"
    page.text(end + 6.0, y - 3.6, words, style.SMALL, colour=style.GREY)


def _view(page: Page, raised: Raised, k: int, origin: Array, per_metre: float, left: float, right: float) -> None:
    """One side view; `origin` is the hinge on the page."""
    rig, none = raised.lift.rig, hoisting.SHOWN * hoisting.largest(raised)

    def at(point: Array) -> Array:
        return np.asarray(origin + per_metre * _flat(raised, np.atleast_2d(point)))

    page.line([(left, origin[1]), (right, origin[1])], style.GREY, style.HAIR, order=1.0)

    def line(start: Array, end: Array, tension: float) -> None:
        carries = tension > none
        page.line(np.concatenate([at(start), at(end)]), style.LOAD, style.CABLE, style.SOLID if carries else style.DASHED, order=3.0)

    line(rig.head[k], rig.winch, float(raised.hoist[k, 0]))
    line(rig.head[k], rig.lift[k], float(raised.lift_line[k, 0]))
    line(rig.held[k], rig.holding, float(raised.holding[k, 0]))
    if rig.backstay is not None:
        line(rig.head[k], rig.backstay, float(raised.backstay[k, 0]))
    foot = rig.hinge
    if raised.lift.raising.gin_pole.foot is not None:
        foot = rig.head[k] - np.array([0.0, 0.0, raised.lift.raising.gin_pole.length])
    page.line(np.concatenate([at(foot), at(rig.head[k])]), style.INK, 1.6, order=3.5)
    spar = raised.spars[k]
    bent = spar.drawn + np.nan_to_num(spar.displacement[0])
    page.line(at(bent), style.INK, style.SPAR, order=4.0)
    for place in (rig.winch, rig.holding):
        page.circle(at(place)[0], 0.9, fill=style.WHITE, edge=style.INK, weight=style.THIN, order=4.5)
    page.circle(origin, 1.1, fill=style.WHITE, edge=style.INK, weight=style.THIN, order=5.0)


def _forces(page: Page, raised: Raised, k: int, zone: Rect, system: System) -> None:
    """The forces of one stage: in still air, and the greatest of all winds."""
    y = zone.top - style.ROW
    still, windy = zone.left + 0.62 * zone.width, zone.right
    page.text(still, y, "still air", style.SMALL, colour=style.GREY, align="right")
    has_wind = len(raised.wind_from) > 1
    if has_wind:
        page.text(windy, y, "most in wind", style.SMALL, colour=style.WIND, align="right")
    none = hoisting.SHOWN * hoisting.largest(raised)
    for name, value in _quantities(raised).items():
        y -= style.ROW
        page.text(zone.left, y, name, style.SMALL)
        page.text(still, y, _say(float(value[k, 0]), none, system), style.SMALL, align="right")
        if has_wind:
            page.text(windy, y, _say(float(_most(value)[k]), none, system), style.SMALL, colour=style.WIND, align="right")
    y -= style.ROW
    page.text(zone.left, y, "bending", style.SMALL)
    page.text(still, y, moment(float(raised.bending[k, 0]), system), style.SMALL, align="right")
    if has_wind:
        page.text(windy, y, moment(float(_most(raised.bending)[k]), system), style.SMALL, colour=style.WIND, align="right")


def _say(force: float, none: float, system: System) -> str:
    return load(0.0 if abs(force) < none else force, system)


def _quantities(raised: Raised) -> dict[str, Array]:
    return {
        "hoist line": raised.hoist,
        "lift point": raised.lift_line,
        "gin pole": raised.gin_pole,
        "holding line": raised.holding,
        "hinge": np.linalg.norm(raised.on_hinge, axis=-1),
    }


def _most(value: Array) -> Array:
    """The greatest over the winds (stage,), NaN where one holds nothing."""
    return np.asarray(value[:, 1:].max(axis=1)) if value.shape[1] > 1 else value[:, 0]


# ---------------------------------------------------------------- curves


def _curves(page: Page, raised: Raised, zone: Rect, system: System) -> None:
    """Lines, what is pushed, and bending, side by side over the angle."""
    metric = system == "SI"
    force, force_name = (1e3, "kN") if metric else (POUND_FORCE, "lbf")
    turning, turning_name = (1e3, "kN m") if metric else (FOOT_POUND, "lbf ft")
    have = _quantities(raised)

    def curve(name: str, value: Array, unit: float) -> Curve:
        return Curve(name, value[:, 0] / unit, _most(value) / unit if value.shape[1] > 1 else None)

    lines = [curve(name, have[name], force) for name in ("hoist line", "lift point", "holding line")]
    if raised.lift.guys:
        lines.append(curve("side guys", raised.guys.max(axis=2), force))
    pushed = [curve("gin pole", have["gin pole"], force), curve("hinge", have["hinge"], force)]
    if raised.lift.raising.gin_pole.backstay is not None:
        pushed.append(curve("backstay", raised.backstay, force))
    panels = [
        (f"Lines [{force_name}]", lines),
        (f"Gin pole and hinge [{force_name}]", pushed),
        (f"Bending of the spar [{turning_name}]", [curve("greatest", raised.bending, turning)]),
    ]
    wide = zone.width / len(panels)
    for n, (title, curves) in enumerate(panels):
        _panel(page, raised, Rect(zone.left + n * wide, zone.bottom, zone.left + (n + 1) * wide - 4.0, zone.top), title, curves)


def _panel(page: Page, raised: Raised, zone: Rect, title: str, curves: Sequence[Curve]) -> None:
    page.text(zone.left, zone.top - 4.0, title, style.HEADING, bold=True)
    field = zone.inset(AXIS, FOOT, NAMES, TOP)
    every = np.concatenate([v for c in curves for v in (c.still, c.windy) if v is not None])
    low, high = min(float(np.nanmin(every, initial=0.0)), 0.0), max(float(np.nanmax(every, initial=0.0)), 1e-9)
    step = round_below((high - low) / 2.5)
    low, high = step * math.floor(low / step + 1e-9), step * math.ceil(high / step - 1e-9)
    first, last = float(raised.angle[0]), float(raised.angle[-1])
    span = max(last - first, 1e-9)

    def x(angle: Array) -> Array:
        return np.asarray(field.left + field.width * (angle - first) / span)

    def y(value: Array) -> Array:
        return np.asarray(field.bottom + field.height * (value - low) / (high - low))

    for k in range(round((high - low) / step) + 1):
        at = float(y(np.array(low + k * step)))
        zero = abs(low + k * step) < 1e-9 * step
        page.line([(field.left, at), (field.right, at)], style.GREY if zero else style.PALE, style.THIN if zero else style.HAIR, order=1.0)
        page.text(field.left - 2.0, at - 1.1, f"{low + k * step:.4g}".replace("-", "−"), style.SMALL, colour=style.GREY, align="right")
    _angles(page, field, first, span)
    _sides(page, raised, field, first, span)
    for curve, weight in zip(curves, WEIGHTS, strict=False):
        page.line(np.column_stack([x(raised.angle), y(curve.still)]), style.INK, weight, order=3.0)
        if curve.windy is not None:
            page.line(np.column_stack([x(raised.angle), y(curve.windy)]), style.WIND, 0.5 * weight + 0.4, style.DASHED, order=3.2)
    _names(page, field, [(c.name, float(y(np.array(_end(c.still))))) for c in curves])


def _end(values: Array) -> float:
    known = values[np.isfinite(values)]
    return float(known[-1]) if len(known) else 0.0


def _angles(page: Page, field: Rect, first: float, span: float) -> None:
    step = 15.0 if math.degrees(span) > 30.0 else 5.0
    angle = math.ceil(math.degrees(first) / step - 1e-9) * step
    while angle <= math.degrees(first + span) + 1e-6:
        at = field.left + field.width * (math.radians(angle) - first) / span
        page.line([(at, field.bottom), (at, field.bottom - 1.5)], style.GREY, style.HAIR)
        page.text(at, field.bottom - 5.4, f"{angle:g}°", style.SMALL, colour=style.GREY, align="centre")
        angle += step


def _sides(page: Page, raised: Raised, field: Rect, first: float, span: float) -> None:
    """Where the load changes side, in still air and first in some wind."""
    marks: list[tuple[float, str, Dash]] = [
        (raised.over, style.INK, style.SOLID),
        (hoisting.over_in_wind(raised), style.WIND, style.DOTTED),
    ]
    inside = [(a, c, d) for a, c, d in marks if not math.isnan(a) and first < a < first + span]
    for angle, colour, dash in inside:
        at = field.left + field.width * (angle - first) / span
        page.line([(at, field.bottom), (at, field.top + 1.0)], colour, style.THIN, dash, order=1.5)
    if inside:
        words = "changes side " + ", ".join(f"{math.degrees(a):.3g}°" + (" in wind" if c == style.WIND else "") for a, c, _ in inside)
        page.text(field.right + NAMES - 2.0, field.top + 2.2, words, style.SMALL, colour=style.GREY, align="right")


def _names(page: Page, field: Rect, wanted: list[tuple[str, float]]) -> None:
    """Names beside the curves' ends, moved apart where they would touch."""
    order = sorted(wanted, key=lambda pair: pair[1])
    places: list[float] = []
    for _, at in order:
        places.append(max(at, places[-1] + style.ROW) if places else at)
    over = max(places[-1] - field.top, 0.0)
    for (name, at), place in zip(order, [p - over for p in places], strict=True):
        page.line([(field.right + 0.5, at), (field.right + 3.5, place)], style.GREY, style.HAIR)
        page.text(field.right + 4.2, place - 1.1, name, style.SMALL)
        assert width(name, style.SMALL) < NAMES
