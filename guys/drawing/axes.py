"""A panel with axes on a page: round ticks, pale rules, names with units; curves and points are drawn through its mapping."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from guys.drawing import style
from guys.drawing.labels import Array
from guys.drawing.page import Page, Rect
from guys.drawing.scales import round_below

LEFT, BELOW, ABOVE = 14.0, 10.0, 6.0
"""Millimetres: room for figures beside and below the axes, and for the panel's name above."""
TICKS = 5
Label = Callable[[float], str]


@dataclass(frozen=True)
class Axis:
    """name : with its unit;  least, most : of what is shown, widened to round ticks;  step : between ticks"""

    name: str
    least: float
    most: float
    step: float

    @property
    def ticks(self) -> Array:
        """Where the ticks are."""
        return np.arange(round(self.least / self.step), round(self.most / self.step) + 1, dtype=float) * self.step


def axis(name: str, values: Array, from_zero: bool = False) -> Axis:
    """An axis that shows all values, NaN left out."""
    shown = np.asarray(values, dtype=float)
    shown = shown[np.isfinite(shown)]
    low, high = (float(shown.min()), float(shown.max())) if len(shown) else (0.0, 1.0)
    low = min(low, 0.0) if from_zero else low
    span = high - low if high - low > 1e-9 * max(abs(high), 1e-9) else max(abs(high), 1.0) * 0.1
    step = round_below(span / TICKS * 2.0)
    return Axis(name, math.floor(low / step + 1e-9) * step, math.ceil(high / step - 1e-9) * step, step)


@dataclass(frozen=True)
class Panel:
    """Two axes in a rectangle of the page."""

    inside: Rect
    x: Axis
    y: Axis

    def on_page(self, x: Array | float, y: Array | float) -> Array:
        """(..., 2) [mm]"""
        across = self.inside.left + (np.asarray(x) - self.x.least) / max(self.x.most - self.x.least, 1e-12) * self.inside.width
        up = self.inside.bottom + (np.asarray(y) - self.y.least) / max(self.y.most - self.y.least, 1e-12) * self.inside.height
        return np.stack(np.broadcast_arrays(across, up), axis=-1)


def draw_panel(page: Page, zone: Rect, name: str, x: Axis, y: Axis) -> Panel:
    """The empty panel: its name and that of the upright axis above, ticks, pale rules, the level axis' name below."""
    inside = zone.inset(LEFT, BELOW, 2.0, ABOVE)
    panel = Panel(inside, x, y)
    page.text(zone.left, zone.top - 3.6, name, style.BODY, bold=True)
    for value in y.ticks:
        a, b = panel.on_page(np.array([x.least, x.most]), float(value))
        page.line([a, b], style.PALE, style.HAIR, order=1.0)
        page.text(inside.left - 1.5, float(a[1]) - 1.1, _plain(float(value), y.step), style.SMALL, align="right", colour=style.GREY)
    for value in x.ticks:
        at = panel.on_page(float(value), y.least)
        page.line([at, at + np.array([0.0, 1.2])], style.INK, style.THIN)
        page.text(float(at[0]), inside.bottom - 4.2, _plain(float(value), x.step), style.SMALL, align="centre", colour=style.GREY)
    page.line([(inside.left, inside.bottom), (inside.right, inside.bottom)], style.INK, style.THIN)
    page.text(inside.right, inside.bottom - 8.6, x.name, style.SMALL, align="right", colour=style.GREY)
    return panel


def _plain(value: float, step: float) -> str:
    decimals = max(0, -math.floor(math.log10(step) + 1e-9))
    text = f"{value:.{decimals}f}"
    return text.replace("-", "−") if float(text) else text.lstrip("-")
