"""Layouts side by side: small plans at one scale, with the loads of every anchor to one scale of newtons, and their measures below.

Layouts of one file stand in the same place of their frames, so that what moved shows.  In each the bar is the greatest horizontal pull, the
ring the greatest uplift, the figure beside an anchor its greatest pull.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import TYPE_CHECKING

import numpy as np

from guys.checks.alarms import CAUTIONS
from guys.drawing import blocks, plan, style
from guys.drawing.blocks import Line
from guys.drawing.labels import Array, Field, around, place
from guys.drawing.leaf import Words, leaf
from guys.drawing.lettering import fitted, shortened
from guys.drawing.page import Page, Rect
from guys.drawing.reading import base_point, greatest
from guys.drawing.rounding import ABSENT, Say, System, Tongue, Units, at_least, factor, force, length, moment, small_angle, tongue, up_text
from guys.drawing.scales import length_bar, load_bar, ratio_text, ratio_to_fit
from guys.drawing.site import draw_site
from guys.drawing.table import Column, Grid, draw_grid
from guys.studies.compare import Compared, Comparison
from guys.studies.measures import MEASURES, Value

if TYPE_CHECKING:
    from matplotlib.figure import Figure

MOST_ACROSS = 4
FRAME_HEIGHT = 92.0
HEADING, BETWEEN, SCALES = 11.0, 5.0, 12.0
LABELS = (18.0, 9.0)
"""Room [mm] for words beside, and above and below, the anchors of a small plan."""


def said(key: str, value: Value, speech: Tongue, loads: Say) -> str:
    """A measure in words; forces told as `loads` does."""
    if math.isnan(value.value):
        return ABSENT
    if key in ("cable", "use", "pieces"):
        return {"cable": factor(value.value), "use": up_text(value.value, 3), "pieces": f"{value.value:.0f}"}[key]
    how: dict[str, Say] = {"force": loads, "length": length, "moment": moment, "angle": _lean, "mass": _mass}
    return speech.say(how[MEASURES[key].dimension], value.value)


def _lean(value: float, _: System) -> str:
    return small_angle(value)


def _mass(value: float, system: System) -> str:
    return at_least(value, "mass", system)


def draw_comparison(found: Comparison, paper: str, units: Units) -> Figure:
    """The page."""
    speech = tongue(units)
    across = min(MOST_ACROSS, len(found.layouts))
    down = math.ceil(len(found.layouts) / across)
    grid = _grid(found, speech)
    plans = (FRAME_HEIGHT + BETWEEN) * down
    measure = MEASURES[found.by]
    words = Words(title(found), f"layouts ranked by {measure.words}", _below(found), CAUTIONS)
    page, zone = leaf(paper, words, plans + SCALES + grid.height + 4.0)
    wide = (zone.width - BETWEEN * (across - 1)) / across
    frames = [_frame(zone, k, across, wide) for k in range(len(found.layouts))]
    ratio, per_newton = _plans(page, found, frames, speech)
    y = zone.top - plans - 5.0
    page.text(zone.left, y, f"{ratio_text(ratio)} on {page.paper}, all plans, grid north up", style.BODY, colour=style.GREY)
    x = zone.left + 72.0
    for system in speech.systems:
        x = length_bar(page, x, y, page.scaled(ratio), 40.0, system) + 9.0
    if per_newton > 0:
        x = load_bar(page, x, y, per_newton, 24.0, speech) + 9.0
    page.text(x, y, "bar: greatest horizontal · ring: greatest uplift · figure: greatest pull", style.SMALL, colour=style.LOAD)
    draw_grid(page, grid, zone.left, zone.top - plans - SCALES, zone.width)
    return page.figure


def title(found: Comparison) -> str:
    """Of the scenario where there is but one."""
    drawn = [each.solution.scenario.title for each in found.layouts if each.solution.scenario.is_drawn]
    return drawn[0] if len(drawn) == 1 else "Layouts compared"


def _below(found: Comparison) -> list[str]:
    return [
        "First what is within all that is judged, then what is past something, then what falls; loads and margins are those of all cases "
        "and the full circle of winds, bending and lean those of the listed cases. Each layout once more by itself before it is built: "
        "guys solve --layout."
    ]


def _frame(zone: Rect, k: int, across: int, wide: float) -> Rect:
    left = zone.left + (k % across) * (wide + BETWEEN)
    top = zone.top - (k // across) * (FRAME_HEIGHT + BETWEEN)
    return Rect(left, top - FRAME_HEIGHT, left + wide, top)


def _plans(page: Page, found: Comparison, frames: Sequence[Rect], speech: Tongue) -> tuple[float, float]:
    """Every plan; the ratio of all, and the millimetres of a newton."""
    extents = _extents(found)
    span = np.max([high - low for low, high in extents], axis=0)
    room = frames[0].inset(LABELS[0], LABELS[1], LABELS[0], HEADING + LABELS[1])
    ratio = ratio_to_fit((max(float(span[0]), 0.5), max(float(span[1]), 0.5)), (room.width, room.height), page.shrink)
    ons = []
    for frame, extent in zip(frames, extents, strict=True):
        inside = frame.inset(0.6, 0.6, 0.6, HEADING)
        centre = np.array([(inside.left + inside.right) / 2.0, (inside.bottom + inside.top) / 2.0])
        ons.append(plan.PlanFrame(frame, inside, extent.mean(axis=0), centre, page.scaled(ratio)))
    scales = [plan.load_scale(each.solution.for_crew(), on) for each, on in zip(found.layouts, ons, strict=True)]
    per_newton = min((s for s in scales if s > 0), default=0.0)
    for each, on in zip(found.layouts, ons, strict=True):
        _plan(page, each, found.by, on, per_newton, speech)
    return ratio, per_newton


def _extents(found: Comparison) -> list[Array]:
    """(2, 2) for every layout: least and greatest east, north of all layouts of its file."""
    own = [plan.bounds(each.solution) for each in found.layouts]
    paths = [each.solution.scenario.sha256 for each in found.layouts]
    return [
        np.stack([np.min([o[0] for o, p in zip(own, paths, strict=True) if p == path], axis=0),
                  np.max([o[1] for o, p in zip(own, paths, strict=True) if p == path], axis=0)])
        for path in paths
    ]  # fmt: skip


def _plan(page: Page, each: Compared, by: str, on: plan.PlanFrame, per_newton: float, speech: Tongue) -> None:
    zone, solution = on.zone, each.solution.for_crew()
    page.shape([(zone.left, zone.bottom), (zone.right, zone.bottom), (zone.right, zone.top), (zone.left, zone.top)], edge=style.PALE)
    left = page.text(zone.left + 2.0, zone.top - 5.0, f"{each.rank}", style.NAME, bold=True) + 4.0
    page.text(zone.left + left, zone.top - 5.0, fitted(each.name, zone.width - left - 3.0, style.BODY, bold=True), style.BODY, bold=True)
    measure = f"{each.verdict} · {MEASURES[by].words} {said(by, each.values[by], speech, force)}"
    page.text(zone.left + left, zone.top - 9.2, fitted(measure, zone.width - left - 3.0, style.SMALL), style.SMALL, colour=style.GREY)
    field = Field(on.room)
    plan.draw_cables(page, solution, on, field)
    plan.draw_spars(page, solution, on, field)
    for worst in solution.worst_anchors:
        plan.draw_loads(page, solution, worst, on, field, per_newton)
    foot = on.on_page(base_point(solution))
    for worst, at in zip(solution.worst_anchors, on.on_page(solution.anchors.position), strict=True):
        lines = [
            Line(shortened(worst.name, 24.0, style.BODY, bold=True), bold=True),
            Line(speech.say(force, greatest(worst.resultant).value), colour=style.LOAD),
        ]
        clear = max(plan.ring_radius(worst, per_newton), 1.5)
        spot = place(field, around(at, blocks.size(lines), clear, at - foot))
        field.add_place(spot)
        blocks.draw_placed(page, spot, at, lines)
    if solution.scenario.site is not None:
        draw_site(page, solution.scenario.site, field, on.on_page, speech, asks=False)


def _grid(found: Comparison, speech: Tongue) -> Grid:
    """A row a layout: every measure there is, and what decides."""
    keys = [key for key in MEASURES if any(not math.isnan(each.values[key].value) for each in found.layouts)]
    spare = {found.by: 0, "pieces": 3, "rope": 2, "tension": 4, "sideways": 4}
    columns = [Column("rank", "right"), Column("layout"), Column("verdict")]
    columns += [Column(MEASURES[key].words.replace(" ", "\n", 1), "right", spare.get(key, 1)) for key in keys]
    columns += [Column("decides", spare=5)]
    return Grid(tuple(columns), tuple([tuple([(cell,) for cell in _cells(each, keys, speech)]) for each in found.layouts]))


def _cells(each: Compared, keys: Sequence[str], speech: Tongue) -> list[str]:
    f = each.decides
    decides = ABSENT if f is None else f"{f.thing}, {f.quantity}"
    head = [str(each.rank), shortened(each.name, 50.0, style.BODY), each.verdict]
    return [*head, *(said(key, each.values[key], speech, force) for key in keys), decides]
