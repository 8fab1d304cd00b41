"""The wind card: the wind at which something passes its allowable, the winds to act on below it, and who decides.

Rows go from the first action to the limit; what is to be done and who decides is left for the crew to fill in.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from guys.drawing.field import Part, draw_parts
from guys.drawing.rounding import Tongue, Units, bearing, length, speed_below, tongue
from guys.drawing.table import Column, Grid, Row
from guys.limits import Limits
from guys.scenario.standard_wind import averaging_words

if TYPE_CHECKING:
    from matplotlib.figure import Figure

DOWN = "The structure is down, or everybody is out of the fall circle, before the wind reaches the limit: gusts come before a mean rises."
WHERE = "Read the wind where nothing shelters it, at that height and over that time, or correct it; a hand at eye level reads less."


def draw_card(found: Limits, paper: str, units: Units) -> Figure:
    """The card as a page."""
    say = tongue(units)
    heads = (Column("act at"), Column("wind", "right"), Column("do"), Column("who decides"), Column("who is told"))
    blank = "____________________"
    rows: list[Row] = [
        [(name,), tuple(say.each(speed_below, speed)), (blank,), (blank,), (blank,)] for name, speed in rows_of(found)
    ]
    parts = [Part(f"Wind: {measured_as(found, say)}", Grid(heads, tuple(rows)), words(found, say))]
    drops = _drops(found, say)
    if drops:
        slack = (Column("cable"), Column("wind", "right"), Column("from"), Column("case"))
        parts.append(Part("Cables that go slack below the limit", Grid(slack, tuple(drops))))
    return draw_parts(found.scenario.title, paper, "wind card", parts, found.notes)


def measured_as(found: Limits, say: Tongue) -> str:
    """How the wind of the card is to be read: averaging time and height."""
    wind = found.scenario.wind
    assert wind is not None
    return f"{averaging_words(wind.averaging)} at {say.say(length, wind.height)}"


def rows_of(found: Limits) -> list[tuple[str, float]]:
    """What to act at, and the wind [m/s]: action levels, then the limit."""
    least = found.acting
    levels = [(f"{share:g} of the limit", speed) for share, speed in found.actions]
    return levels if least is None or math.isnan(least.speed) else [*levels, ("the limit", least.speed)]


def words(found: Limits, say: Tongue) -> list[str]:
    """What the limit is, and how long lowering takes."""
    least, lower = found.acting, found.scenario.limit.lower_in
    if least is None:
        return ["No limit: no service case has a wind factor of 1."]
    if math.isnan(least.speed):
        return [f"No limit was found up to {say.say(speed_below, found.most)}: {least.why}."]
    out = [f"The limit, from {bearing(least.wind_from)}: {least.why} (case {least.case}). It is the lowest of all directions."]
    if lower is not None:
        out.append(f"Lowering takes {lower / 60:g} min: begin while the wind expected within that time is below the limit.")
    if found.not_judged:
        out.append(f"The limit says nothing of what is not judged: {', '.join(found.not_judged)}.")
    return [*out, DOWN, WHERE]


def _drops(found: Limits, say: Tongue) -> list[Row]:
    """Cables that drop below the limit, each with its lowest wind."""
    least = found.acting
    below = math.inf if least is None else least.known
    known = sorted((at, cable, case, toward) for case, cable, at, toward in found.first_drops if at < below)
    first = {cable: (at, case, toward) for at, cable, case, toward in reversed(known)}
    return [
        [(cable,), say.each(speed_below, at), (bearing(toward),), (case,)]
        for cable, (at, case, toward) in sorted(first.items(), key=lambda item: item[1][0])
    ]
