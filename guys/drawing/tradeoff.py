"""The trade-off of two measures: every layout tried that holds all rules as a dot, those that none betters joined, found ones numbered."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from guys import units
from guys.checks.alarms import CAUTIONS
from guys.drawing import blocks, style
from guys.drawing.axes import Axis, axis, draw_panel
from guys.drawing.blocks import Line
from guys.drawing.labels import Array, Field, around, place
from guys.drawing.leaf import Words, leaf
from guys.drawing.rounding import System, Units, tongue
from guys.studies.measures import MEASURES
from guys.studies.search import Found, name_of
from guys.studies.trial import HOLDS

if TYPE_CHECKING:
    from matplotlib.figure import Figure

HEIGHT = 150.0


def draw_tradeoff(found: Found, paper: str, system: Units) -> Figure:
    """The page; of a search for two measures that found something."""
    first, second = (MEASURES[key] for key in found.keys)
    below = (
        "Dots: layouts tried that hold all rules, in the search's few directions of wind. Joined: those that no other betters in both; "
        "what is named was solved again in full, and its figures are in the comparison.",
    )
    words = Words(found.scenario.title, f"{first.words} against {second.words}", below, CAUTIONS)
    page, zone = leaf(paper, words, HEIGHT)
    speech = tongue(system).systems[0]
    holding = np.array([t.values for t in found.trials if t.outcome == HOLDS]).reshape(-1, 2)
    front = np.array([t.values for t in found.front]).reshape(-1, 2)
    holding, front = (np.column_stack([shown(k, v[:, n], speech) for n, k in enumerate(found.keys)]) for v in (holding, front))
    x, y = _axis(found.keys[1], holding[:, 1], speech), _axis(found.keys[0], holding[:, 0], speech)
    panel = draw_panel(page, zone, y.name, x, y)
    field = Field(zone)
    for value in holding:
        page.circle(panel.on_page(value[1], value[0]), 0.45, fill=style.PALE, order=1.5)
    points = panel.on_page(front[:, 1], front[:, 0])
    page.line(points, style.INK, style.CABLE)
    if len(points) > 1:
        field.add_line(points)
    for k, at in enumerate(points):
        page.circle(at, 1.1, fill=style.INK, order=3.0, name=name_of(k))
        lines = [Line(name_of(k), bold=True)]
        spot = place(field, around(at, blocks.size(lines), 1.4, (1.0, 1.0)))
        field.add_place(spot)
        blocks.draw_placed(page, spot, at, lines)
    return page.figure


def unit_of(key: str, system: System) -> str:
    """The unit a measure is drawn in."""
    dimension = MEASURES[key].dimension
    own = {"force": ("kN", "lbf"), "moment": ("kN m", "lbf ft"), "angle": ("deg", "deg")}
    return "" if not dimension else own.get(dimension, units.DIMENSIONS.get(dimension, ("", "")))[0 if system == "SI" else 1]


def shown(key: str, values: Array, system: System) -> Array:
    """Values in that unit."""
    unit = unit_of(key, system)
    return values if not unit else np.array([units.convert(float(v), unit) for v in values])


def _axis(key: str, values: Array, system: System) -> Axis:
    unit = unit_of(key, system)
    return axis(MEASURES[key].words + (f" [{unit}]" if unit else ""), values)
