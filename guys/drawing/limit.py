"""The limiting wind against the bearing it comes from, north up: sectors stepped to the limit, what governs each named on the rim.

Each sector reaches to the lowest limit of all cases at its bearing; a dashed line is the wind at which equilibrium is lost, where it is
within the rim; the circle in the colour of wind is the scenario's own wind, named in words.  Beside it stand the numbers.
"""

from __future__ import annotations

from math import ceil, isnan
from typing import TYPE_CHECKING

import numpy as np

from guys.drawing import rounding, style
from guys.drawing.labels import Array, Field
from guys.drawing.lettering import wrapped
from guys.drawing.page import Dash, Page, Rect, arc, new_page
from guys.drawing.polar import rim_names, spoke, web
from guys.drawing.rounding import MILE_PER_HOUR, Tongue, Units, tongue
from guys.drawing.scales import round_below
from guys.limits import Limit, Limits
from guys.scenario.standard_wind import averaging_words

if TYPE_CHECKING:
    from matplotlib.figure import Figure

MARGIN = 12.0
RIM = 26.0
NAME_ROOM = 40.0
COLUMN = 138.0
TITLE_HIGH = 8.5
BEYOND = 1.15
"""The rim stands this much above the greatest limit or the scenario's wind."""


def draw_limits(limits: Limits, paper: str, units: Units) -> Figure:
    """The page as a figure."""
    return draw_limit_page(limits, paper, units).figure


def draw_limit_page(limits: Limits, paper: str, units: Units) -> Page:
    """The page with what was placed on it; taller where the words need it."""
    speech = tongue(units)
    rows = _words(limits, speech, COLUMN)
    empty = new_page(paper)
    titles = wrapped(limits.scenario.title, empty.width - 2 * MARGIN, style.TITLE, bold=True)
    head = 13.5 + TITLE_HIGH * len(titles)
    needed = sum(high for _, _, _, high in rows) + head + 2 * MARGIN
    page = new_page(paper, max(0.0, needed - empty.height))
    whole = Rect(MARGIN, MARGIN, page.width - MARGIN, page.height - MARGIN)
    for i, line in enumerate(titles):
        page.text(whole.left, whole.top - 6.5 - TITLE_HIGH * i, line, style.TITLE, bold=True)
    under = whole.top - head
    page.text(whole.left, under + 8.5, "limiting wind against the bearing it comes from", style.HEADING)
    page.line([(whole.left, under + 5.0), (whole.right, under + 5.0)], style.INK, style.THIN)
    _polar(page, limits, Rect(whole.left, whole.bottom, whole.right - COLUMN - 8.0, under), speech)
    y = under
    for text, size, bold, high in rows:
        y -= high
        page.text(whole.right - COLUMN, y, text, size, bold)
    return page


def lowest(limits: Limits) -> tuple[Array, list[Limit], Array]:
    """Bearings of the circle ascending, at each the lowest limit of all cases, and the least wind that loses equilibrium (inf: none)."""
    bearings = np.array(sorted({limit.wind_from for limit in limits.circle}))
    at = [[limit for limit in limits.circle if limit.wind_from == b] for b in bearings]
    least = [min(group, key=lambda limit: limit.known) for group in at]
    lost = np.array([min((limit.lost for limit in group if not isnan(limit.lost)), default=np.inf) for group in at])
    return bearings, least, lost


def _polar(page: Page, limits: Limits, zone: Rect, speech: Tongue) -> None:
    unit, name = (1.0, "m/s") if speech.systems[0] == "SI" else (MILE_PER_HOUR, "mph")
    wind = limits.scenario.wind
    assert wind is not None
    bearings, least, lost = lowest(limits)
    speed = np.array([limit.known for limit in least]) / unit
    top = BEYOND * max([wind.speed / unit, *speed[np.isfinite(speed)]])
    step = round_below(top / 3.0)
    rim = step * ceil(top / step - 1e-9)
    radius = min(zone.width, zone.height) / 2.0 - RIM
    centre = np.array([(zone.left + zone.right) / 2.0, (zone.bottom + zone.top) / 2.0])
    field = Field(zone)
    _sectors(page, centre, bearings, np.minimum(speed, rim) * radius / rim)
    web(page, field, centre, radius, round(rim / step))
    _lost(page, centre, bearings, np.where(lost / unit <= rim, lost / unit, np.nan) * radius / rim)
    page.line(arc(centre, radius * wind.speed / unit / rim), style.WIND, style.RING, order=3.5, name="own wind")
    page.text(centre[0], centre[1] - radius * wind.speed / unit / rim - 4.0, "own wind", style.SMALL, colour=style.WIND, align="centre")
    names = list(dict.fromkeys(limit.governs for limit in least))
    governs = np.array([names.index(limit.governs) for limit in least])
    rim_names(page, field, names, governs, bearings, centre, radius, NAME_ROOM)
    page.text(zone.left, zone.bottom, f"rim {rim:g} {name}, rings {step:g} {name} apart", style.SMALL, colour=style.GREY)
    _key(page, zone)


def _edges(bearings: Array) -> tuple[Array, Array]:
    """First and last bearing of every sector: halfway to its neighbours."""
    back = (bearings - np.roll(bearings, 1)) % (2 * np.pi) / 2
    on = (np.roll(bearings, -1) - bearings) % (2 * np.pi) / 2
    return bearings - back, bearings + on


def _sectors(page: Page, centre: Array, bearings: Array, reach: Array) -> None:
    outline = []
    for first, last, r in zip(*_edges(bearings), reach, strict=True):
        curve = centre + r * spoke(np.linspace(first, last, 13))
        page.shape(np.vstack([centre[None], curve]), style.GROUND, order=0.5)
        outline.append(curve)
    page.line(np.vstack([*outline, outline[0][:1]]), style.LOAD, 1.8, order=3.0, name="limit")


def _lost(page: Page, centre: Array, bearings: Array, reach: Array) -> None:
    curves = [centre + r * spoke(np.linspace(first, last, 13)) for first, last, r in zip(*_edges(bearings), reach, strict=True)]
    page.line(np.vstack([*curves, curves[0][:1]]), style.INK, style.CABLE, style.DASHED, order=2.8, name="lost")


def _key(page: Page, zone: Rect) -> None:
    rows: tuple[tuple[str, float, Dash, str], ...] = (
        (style.LOAD, 1.8, style.SOLID, "limit: the first thing passes its allowable, or equilibrium is lost"),
        (style.INK, style.CABLE, style.DASHED, "equilibrium lost; beyond the rim, or not known, where it is not drawn"),
        (style.WIND, style.RING, style.SOLID, "the scenario's own wind"),
    )
    for i, (colour, weight, dash, words) in enumerate(rows):
        y = zone.bottom + 5.2 * (len(rows) - i)
        page.line([(zone.left, y + 1.0), (zone.left + 9.0, y + 1.0)], colour, weight, dash)
        page.text(zone.left + 11.0, y, words, style.SMALL)


def _how(limit: Limit) -> str:
    """How equilibrium is lost, where that is not told already."""
    return f"; {limit.falls}" if limit.falls and limit.falls not in limit.why else ""


Row = tuple[str, float, bool, float]
"""A line of words: text, size, bold, height [mm] it takes."""


def _words(limits: Limits, speech: Tongue, room: float) -> list[Row]:
    """The column beside the figure."""
    scenario, wind = limits.scenario, limits.scenario.wind
    assert wind is not None

    def speed(value: float) -> str:
        return f"over {speech.say(rounding.speed_below, limits.most)}" if isnan(value) else speech.say(rounding.speed_below, value)

    out: list[Row] = []

    def say(text: str, size: float = style.BODY, bold: bool = False, gap: float = 0.0) -> None:
        for i, line in enumerate(wrapped(text, room, size, bold)):
            out.append((line, size, bold, size * style.POINT_MM * style.LINE_PITCH + (gap if i == 0 else 0.0)))

    for limit in limits.worst:
        factor = "" if limit.wind_factor == 1.0 else f" (wind factor {limit.wind_factor:g} kept)"
        say(f"{limit.case}{factor}: {speed(limit.speed)}", style.HEADING, True, 2.5)
        if not isnan(limit.speed):
            say(f"from {rounding.bearing(limit.wind_from)}, the worst direction: {limit.why}")
        say(f"equilibrium lost there: {'not known' if limit.failed else speed(limit.lost)}{_how(limit)}")
    say(f"{averaging_words(wind.averaging)} at {speech.say(rounding.length, wind.height)}; own wind {speed(wind.speed)}", gap=2.5)
    if limits.actions:
        lower = scenario.limit.lower_in
        say(f"Action levels{f', {lower / 60:g} min to lower' if lower is not None else ''}", style.HEADING, True, 4.0)
        for share, value in limits.actions:
            say(f"{share:g} of the limit: {speed(value)}")
    say("Least wind at which each cable drops", style.HEADING, True, 4.0)
    for case, cable, at, toward in limits.first_drops:
        where = "does not drop" if isnan(at) else f"{speed(at)} from {rounding.bearing(toward)}"
        say(f"{cable}{f', {case}' if len(limits.worst) > 1 else ''}: {where}")
    say("Notes", style.HEADING, True, 4.0)
    for note in (*limits.notes, *([f"not judged: {', '.join(limits.not_judged)}"] if limits.not_judged else [])):
        say(note)
    say("Cautions", style.HEADING, True, 4.0)
    for caution in limits.cautions:
        say(caution)
    say(f"guys {limits.version}", gap=2.0)
    return out
