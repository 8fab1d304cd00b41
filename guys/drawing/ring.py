"""Curves of one mast on rings of anchors over their radius, a line for each number of ways; a gap where a ring falls."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from guys import units
from guys.checks.alarms import CAUTIONS
from guys.drawing import style
from guys.drawing.axes import axis, draw_panel
from guys.drawing.leaf import Words, leaf
from guys.drawing.page import Dash, Page, Rect
from guys.drawing.rounding import System, Units, tongue
from guys.drawing.tradeoff import shown, unit_of
from guys.studies.measures import MEASURES
from guys.studies.ring import Rings

if TYPE_CHECKING:
    from matplotlib.figure import Figure

PANELS = ("tension", "uplift", "thrust", "lean", "rope", "footprint")
ACROSS, HIGH, BETWEEN, KEY = 3, 82.0, 8.0, 8.0
DASHES: tuple[Dash, ...] = (style.SOLID, style.DASHED, (0.0, (9.0, 2.0, 1.5, 2.0)), style.DOTTED)
AREA = {"SI": "m2", "US": "ft2"}


def draw_rings(found: Rings, paper: str, system: Units) -> Figure:
    """The page."""
    spoken = tongue(system).systems[0]
    below = [f"{note[0].upper()}{note[1:]}." for note in found.notes]
    needed = 2 * (HIGH + BETWEEN) + KEY
    page, zone = leaf(paper, Words(found.scenario.title, "radius and number of ways", below, CAUTIONS), needed)
    wide = (zone.width - BETWEEN * (ACROSS - 1)) / ACROSS
    for n, key in enumerate(PANELS):
        left, top = zone.left + (n % ACROSS) * (wide + BETWEEN), zone.top - (n // ACROSS) * (HIGH + BETWEEN)
        _panel(page, found, key, Rect(left, top - HIGH, left + wide, top), spoken)
    x, y = zone.left, zone.top - 2 * (HIGH + BETWEEN) - 1.0
    for k, ways in enumerate(found.ways):
        page.line([(x, y + 1.1), (x + 14.0, y + 1.1)], style.INK, style.CABLE, DASHES[k % len(DASHES)])
        x += 16.0 + page.text(x + 16.0, y, f"{ways} ways", style.BODY) + 10.0
    return page.figure


def _panel(page: Page, found: Rings, key: str, zone: Rect, system: System) -> None:
    far = np.array([units.convert(float(r), "m" if system == "SI" else "ft") for r in found.radius])
    if key == "footprint":
        values = np.vectorize(lambda v: units.convert(float(v), AREA[system]))(found.footprint)
        name = f"ground within the anchors [{AREA[system].replace('2', '²')}]"
    else:
        values = np.array([shown(key, row, system) for row in found.values[key]])
        name = f"{MEASURES[key].words} [{unit_of(key, system)}]"
    x = axis(f"radius [{'m' if system == 'SI' else 'ft'}]", far)
    panel = draw_panel(page, zone, name, x, axis(name, values, from_zero=True))
    for k, row in enumerate(values):
        page.line(panel.on_page(far, row), style.INK, style.CABLE, DASHES[k % len(DASHES)], name=f"{key} {found.ways[k]}")
