"""Greatest anchor pull against the bearing the wind comes from, north up.

The heavy line is the greatest pull of any anchor at each bearing, over all cases with wind; thin lines are the anchors.  On the rim the
anchor that governs each sector is named, so that no line style has to be told apart.  A bearing with no equilibrium leaves a gap.
"""

from __future__ import annotations

from collections.abc import Sequence
from math import ceil

import numpy as np
from numpy.typing import NDArray

from guys.drawing import blocks, style
from guys.drawing.blocks import Line
from guys.drawing.labels import Array, Field, Wish, place
from guys.drawing.lettering import shortened
from guys.drawing.page import Page, Rect, arc
from guys.drawing.reading import bearings_of, sectors
from guys.drawing.rounding import POUND_FORCE, Tongue
from guys.drawing.scales import round_below
from guys.results import Solution, Sweep

RIM = 8.5
HEAD = 13.5


def has_polar(solution: Solution) -> bool:
    """Is there a sweep with anything in it."""
    sweep = solution.sweep
    return sweep is not None and sweep.resultant.size > 0 and bool(np.nanmax(np.nan_to_num(sweep.resultant)) > 0.0)


def draw_polar(page: Page, solution: Solution, zone: Rect, tongue: Tongue) -> None:
    """The figure in its zone."""
    if solution.sweep is None:
        return
    unit, name = (1e3, "kN") if tongue.systems[0] == "SI" else (POUND_FORCE, "lbf")
    bearings = np.unique(np.asarray(solution.sweep.bearing))
    pull = greatest_over_cases(solution.sweep, solution.sweep.resultant, bearings) / unit
    top = float(np.nanmax(pull))
    if tongue.systems[0] == "SI" and top < 0.1:
        pull, top, name = pull * 1e3, top * 1e3, "N"
    step = round_below(top / 1.5)
    rim = step * ceil(top / step - 1e-9)
    for i, line in enumerate(("Greatest anchor pull", "against the wind's bearing", f"rim {rim:g} {name}, rings {step:g} {name} apart")):
        page.text(zone.left, zone.top - 3.4 - 4.2 * i, line, style.BODY if i == 0 else style.SMALL, bold=i == 0)
    radius = min(zone.width - 2 * RIM, zone.height - HEAD - 2 * RIM) / 2.0
    centre = np.array([(zone.left + zone.right) / 2.0, zone.top - HEAD - RIM - radius])
    field = Field(zone)
    web(page, field, centre, radius, round(rim / step))
    _curves(page, bearings, pull * radius / rim, centre)
    _rim(page, field, (solution.anchors.name, bearings, pull), centre, radius)


def greatest_over_cases(sweep: Sweep, values: Array, bearings: Array) -> Array:
    """(bearing, item) the greatest of values (line, direction, item) over the cases with wind; NaN where none stands.

    Between the bearings of a case its values go in proportion.
    """
    lines = []
    for line in range(len(sweep.case)):
        own = bearings_of(sweep, line)
        around = np.concatenate([own[-1:] - 2.0 * np.pi, own, own[:1] + 2.0 * np.pi])
        ring = np.concatenate([values[line, -1:], values[line], values[line, :1]])
        lines.append(np.column_stack([np.interp(bearings, around, ring[:, i]) for i in range(ring.shape[1])]))
    return np.asarray(np.fmax.reduce(lines, axis=0))


def spoke(turn: float | Array) -> Array:
    """Unit vectors (..., 2) on the page at bearings, north up."""
    return np.stack([np.sin(turn), np.cos(turn)], axis=-1)


def web(page: Page, field: Field, centre: Array, radius: float, rings: int) -> None:
    """Rings, spokes and bearings."""
    for turn in np.arange(0.0, 2.0 * np.pi, np.pi / 6.0):
        page.line([centre, centre + radius * spoke(turn)], style.PALE, 0.35, order=1.0)
    for i in range(1, rings):
        page.line(arc(centre, radius * i / rings, 91), style.PALE, 0.35, order=1.0)
    page.line(arc(centre, radius, 121), style.GREY, style.HAIR, order=1.2)
    field.add_line(arc(centre, radius + 1.4, 61))
    for turn in range(0, 360, 90):
        line = Line(f"{turn}°", style.SMALL, colour=style.GREY)
        half = np.array(blocks.size([line])) / 2.0
        unit = spoke(np.deg2rad(turn))
        at = centre + unit * (radius + 2.6 + float(np.abs(unit) @ half))
        box = np.concatenate([at - half, at + half])
        blocks.draw(page, box, [line])
        field.add_box(box)


def _curves(page: Page, bearings: Array, pull: Array, centre: Array) -> None:
    spokes = np.vstack([spoke(bearings), spoke(bearings[:1])])
    closed = np.vstack([pull, pull[:1]])
    for anchor in range(pull.shape[1]):
        page.line(centre + closed[:, anchor, None] * spokes, style.GREY, style.HAIR, order=2.0)
    page.line(centre + np.fmax.reduce(closed, axis=1)[:, None] * spokes, style.LOAD, 1.8, order=2.5, name="envelope")


def _rim(page: Page, field: Field, swept: tuple[tuple[str, ...], Array, Array], centre: Array, radius: float) -> None:
    names, bearings, pull = swept
    governs = np.where(np.isfinite(pull).any(axis=1), np.argmax(np.nan_to_num(pull, nan=-1.0), axis=1), -1)
    rim_names(page, field, names, governs, bearings, centre, radius)


def rim_names(
    page: Page,
    field: Field,
    names: Sequence[str],
    governs: NDArray[np.int64],
    bearings: Array,
    centre: Array,
    radius: float,
    room: float = 15.0,
) -> None:
    """Ticks between the sectors and the name of what governs each; governs : (bearing,) place in `names`, -1 for none."""
    edge = bearings - ((bearings - np.roll(bearings, 1)) % (2.0 * np.pi)) / 2.0
    runs = [(int(a), *run) for a in np.unique(governs[governs >= 0]) for run in sectors(governs == a, bearings)]
    if len(runs) > 1:
        for _, first, _ in runs:
            tick = centre + np.array([radius, radius + 2.0])[:, None] * spoke(edge[np.argmin(np.abs(bearings - first))])
            page.line(tick, style.INK, style.THIN)
            field.add_line(tick)
    for anchor, first, last in runs:
        span = (last - first) % (2.0 * np.pi)
        if len(runs) == 1 or span > np.deg2rad(4.0):
            _name_on_rim(page, field, names[anchor], centre, radius, first + span / 2.0, room)


def _name_on_rim(page: Page, field: Field, name: str, centre: Array, radius: float, turn: float, room: float = 15.0) -> None:
    lines = [Line(shortened(name, room, style.SMALL, bold=True), style.SMALL, bold=True)]
    half = np.array(blocks.size(lines)) / 2.0
    turns = turn + np.deg2rad([0.0, 5.0, -5.0, 10.0, -10.0, 16.0, -16.0, 22.0, -22.0])
    spokes = np.tile(spoke(turns), (3, 1))
    reach = np.repeat([2.6, 4.0, 6.0], len(turns))
    push = np.abs(spokes) @ half
    middle = centre + spokes * (radius + reach + push)[:, None]
    spot = place(field, Wish(centre, np.hstack([middle - half, middle + half]), np.arange(len(middle), dtype=float), leader_from=1e6))
    if spot.clashes:
        field.boxes.pop()
        return
    blocks.draw(page, spot.box, lines)
