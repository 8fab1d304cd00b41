"""The stages beside each other, to one scale: what is there in ink, what is still to come behind it in pale, and in words below each what
its wind does and the wind it may see.

Straight lines, as drawn: no stage is shown as it hangs.  All look toward the bearing that shows most of the whole.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from guys.drawing import rounding, style
from guys.drawing.leaf import Words, leaf
from guys.drawing.lettering import wrapped
from guys.drawing.page import Page, Rect
from guys.drawing.reading import View, most_shown
from guys.drawing.rounding import Tongue, Units, tongue
from guys.drawing.scales import length_bar, ratio_text, ratio_to_fit
from guys.rotation import Array
from guys.scenario import Scenario, drawn
from guys.scenario.model import GroundFoot
from guys.scenario.standard_wind import averaging_words
from guys.studies.cells import FALLS, NOT_FOUND, PAST, WORDS
from guys.studies.stages import Built, Stages

if TYPE_CHECKING:
    from matplotlib.figure import Figure

MOST_ACROSS = 5
GAP = 8.0
HIGH, BAR = 92.0, 11.0
"""Millimetres: between panels; height of an elevation at the most; of the scale bar below all."""
FITTING = 0.8

Line = tuple[str, float, bool, str]
"""Text, size, bold, colour."""


def draw_stages(found: Stages, paper: str, units: Units) -> Figure:
    """The page."""
    speech = tongue(units)
    across = min(MOST_ACROSS, max(3, len(found.built)))
    empty, zone = leaf(paper, _said(found, speech), 0.0)
    wide = (zone.width - GAP * (across - 1)) / across
    words = [_words(built, speech, wide) for built in found.built]
    rows = [words[k : k + across] for k in range(0, len(words), across)]
    view, low, high = _seen(found.scenario)
    ratio = ratio_to_fit((high[0] - low[0], high[1] - low[1]), (wide, HIGH), empty.shrink)
    tall = (high[1] - low[1]) * empty.scaled(ratio) + 3.0
    heights = [tall + max(sum(_pitch(line) for line in panel) for panel in row) + GAP for row in rows]
    page, zone = leaf(paper, _said(found, speech), sum(heights) + BAR)
    top = zone.top
    for n, (row, high_row) in enumerate(zip(rows, heights, strict=True)):
        for i, panel in enumerate(row):
            left = zone.left + i * (wide + GAP)
            spot = Rect(left, top - tall, left + wide, top)
            _elevation(page, found.scenario, found.built[n * across + i], spot, _Place(view, low, high, page.scaled(ratio)))
            _write(page, panel, left, top - tall)
        top -= high_row
    right = length_bar(page, zone.left, top - 1.0, page.scaled(ratio), 60.0, speech.systems[0])
    page.text(right + 6.0, top - 1.0, f"{ratio_text(ratio)} on {page.paper}", style.SMALL, colour=style.GREY)
    return page.figure


def _said(found: Stages, speech: Tongue) -> Words:
    wind = found.scenario.wind
    of = () if wind is None else (f"Wind speeds: {averaging_words(wind.averaging)} at {speech.say(rounding.length, wind.height)}.",)
    warned = [f"{b.stage.name}: {w}" for b in found.built if b.solution is not None and b.verdict < FALLS for w in b.solution.warnings]
    return Words(found.scenario.title, "on the way up, and the wind each stage may see", (*of, *found.how, *warned), found.cautions)


class _Place:
    """Where a view lies in its panel: the middle of its foot, and the scale."""

    def __init__(self, view: View, low: Array, high: Array, per_metre: float) -> None:
        self.view, self.low, self.high, self.per_metre = view, low, high, per_metre

    def on(self, spot: Rect, points: Array) -> Array:
        """(..., 3) of the site to (..., 2) in a panel."""
        middle = np.array([(self.low[0] + self.high[0]) / 2, self.low[1]])
        corner = np.array([(spot.left + spot.right) / 2, spot.bottom + 3.0])
        return np.asarray(corner + (self.view.project(points) - middle) * self.per_metre)


def _lines(scenario: Scenario) -> tuple[list[Array], list[Array], list[Array]]:
    """(2, 3) ends of spars and of cables, and (3,) places of fittings, as drawn."""
    spars = {spar.name: spar for spar in scenario.spar}
    chains = [np.array([drawn.axis_point(spars, name, at) for at in (0.0, spar.length)]) for name, spar in spars.items()]
    cables = [np.array(ends) for ends in drawn.scenario_cable_ends(scenario)]
    fittings = [np.array(drawn.axis_point(spars, spar.name, f.at)) for spar in scenario.spar for f in spar.fitting]
    return chains, cables, fittings


def _seen(scenario: Scenario) -> tuple[View, Array, Array]:
    """The view of the whole, and its least and greatest right, up."""
    chains, cables, _ = _lines(scenario)
    anchors = [np.array([a.east, a.north, a.level]) for a in scenario.anchor]
    view = View(most_shown(chains[0][0, :2], [a[:2] for a in anchors], [c[1, :2] - c[0, :2] for c in chains]))
    points = view.project(np.vstack([*chains, *cables]))
    low, high = points.min(axis=0), points.max(axis=0)
    return view, low, np.maximum(high, low + 1.0)


def _elevation(page: Page, whole: Scenario, built: Built, spot: Rect, place: _Place) -> None:
    _ground(page, whole, spot, place)
    chains, cables, fittings = _lines(whole)
    for ends in (*chains, *cables):
        page.line(place.on(spot, ends), style.PALE, style.HAIR, order=1.6)
    chains, cables, fittings = _lines(built.scenario)
    for ends in cables:
        page.line(place.on(spot, ends), style.INK, style.CABLE * 0.85, order=2.2, name="cable")
    for ends in chains:
        page.line(place.on(spot, ends), style.INK, style.SPAR, order=2.4, name="spar")
    for at in fittings:
        page.circle(place.on(spot, at), FITTING, style.WHITE, style.INK, style.THIN, order=3.0)


def _ground(page: Page, whole: Scenario, spot: Rect, place: _Place) -> None:
    """The line through the levels of anchors and feet, earth below it."""
    feet = [[s.foot.east, s.foot.north, s.foot.level] for s in whole.spar if isinstance(s.foot, GroundFoot)]
    points = place.on(spot, np.array([*feet, *([a.east, a.north, a.level] for a in whole.anchor)]))
    points = points[np.argsort(points[:, 0], kind="stable")]
    line = np.vstack([[spot.left, points[0, 1]], points, [spot.right, points[-1, 1]]])
    page.shape(np.vstack([line, [spot.right, spot.bottom], [spot.left, spot.bottom]]), fill=style.GROUND, order=0.5)
    page.line(line, style.INK, style.THIN, order=1.5, name="ground")


def _pitch(line: Line) -> float:
    return line[1] * style.POINT_MM * style.LINE_PITCH


def _write(page: Page, lines: list[Line], left: float, top: float) -> None:
    for line in lines:
        top -= _pitch(line)
        page.text(left, top, line[0], line[1], line[2], line[3])


def _words(built: Built, speech: Tongue, room: float) -> list[Line]:
    """What stands below an elevation."""
    cables = len(built.scenario.cable)
    out: list[Line] = []

    def say(text: str, size: float = style.BODY, bold: bool = False, colour: str = style.INK) -> None:
        out.extend((line, size, bold, colour) for line in wrapped(text, room, size, bold))

    say(built.stage.name, style.HEADING, True)
    say(f"stands: {stands_words(built, speech)}; {cables} cable{'' if cables == 1 else 's'} fast", colour=style.GREY)
    verdict = WORDS[built.verdict]
    say(f"{wind_words(built, speech)}: {verdict}", bold=True, colour=style.LOAD if built.verdict >= PAST else style.INK)
    if built.reason:
        say(built.reason)
    elif built.least is not None:
        say(f"least factor {least_words(built)}")
    if built.may_see is not None and built.verdict < NOT_FOUND:
        say(f"may see {may_see_words(built, speech)}", bold=True, colour=style.WIND)
        if not built.reason:
            say(built.may_see.why)
    return out


def stands_words(built: Built, speech: Tongue) -> str:
    """Every spar that is there, and how much of it."""
    return ", ".join(f"{spar.name} {speech.say(rounding.length, spar.length)}" for spar in built.scenario.spar)


def wind_words(built: Built, speech: Tongue) -> str:
    """The wind it is judged in."""
    return "still air" if built.wind is None or built.still else f"wind {speech.say(rounding.speed, built.wind)}"


def least_words(built: Built) -> str:
    """Least factor against the one required, of what, in which wind."""
    least = built.least
    if least is None:
        return rounding.ABSENT
    of = f"{rounding.factor(least.factor)} of {least.required:g}: {least.quantity} of {least.thing}"
    return of if math.isnan(least.wind_from) else f"{of}, wind from {rounding.bearing(least.wind_from)}"


def may_see_words(built: Built, speech: Tongue) -> str:
    """The wind it may see, with the direction it is lowest from."""
    limit = built.may_see
    if limit is None:
        return rounding.ABSENT
    if limit.failed:
        return "not known"
    if limit.speed == 0.0:
        return "no wind"
    if math.isnan(limit.speed):
        return "no limit found"
    return f"{speech.say(rounding.speed_below, limit.speed)} from {rounding.bearing(limit.wind_from)}"
