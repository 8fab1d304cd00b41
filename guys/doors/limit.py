"""`guys limit`: the limiting wind of every direction, with files, table and polar figure.

0 no limit is below the scenario's own wind      3 something passes its allowable below it      4 equilibrium is lost below it
1 an internal fault, or the solver failed        2 the input is wrong
"""

from __future__ import annotations

import math
import sys
from typing import TextIO

from guys import drawing, terminal
from guys.doors.common import deliver, in_layout, pictures
from guys.drawing import rounding
from guys.exchange import limit as exchange
from guys.limits import Limit, Limits
from guys.scenario import read_scenario
from guys.scenario.standard_wind import averaging_words
from guys.studies.limit import limits


def limit_command(file: str, out: str | None, as_json: bool, units: drawing.Units = "SI", layout: str | None = None) -> int:
    """The limiting winds of a scenario, written to the directory `out` where one is given.

    Raises `GuysError` for what is the user's to mend; nothing is written then.
    """
    scenario = in_layout(read_scenario(file), layout)
    with terminal.progress(sys.stderr) as tick:
        found = limits(scenario, progress=tick)
    deliver(out, lambda: contents(found, units), as_json, lambda: exchange.as_text(found), lambda stream: report(found, units, stream))
    return exit_status(found)


def contents(found: Limits, units: drawing.Units) -> dict[str, bytes]:
    """Every file of a run."""
    texts = {"limit.json": exchange.as_text(found).encode(), "limit.csv": exchange.as_table(found).encode()}
    return texts | pictures("limit", drawing.limit_page(found, units=units), found.scenario.title)


def exit_status(found: Limits) -> int:
    """Whether the scenario's own wind is past the limit, and how."""
    assert found.scenario.wind is not None
    if found.failed:
        return 1
    every = (*found.circle, *found.worst)
    if any(limit.lost < found.scenario.wind.speed for limit in every):
        return 4
    return 3 if any(limit.speed < found.scenario.wind.speed for limit in every) else 0


def report(found: Limits, units: drawing.Units, stream: TextIO) -> None:
    """Lowest limit of every case, action levels, every listed direction, winds at which cables drop, and what has to be said."""
    wind = found.scenario.wind
    assert wind is not None
    say = rounding.tongue(units)

    def speed(value: float) -> str:
        return say.say(rounding.speed_below, value) if math.isfinite(value) else f"over {say.say(rounding.speed_below, found.most)}"

    def row(limit: Limit) -> list[str]:
        lost = speed(limit.lost) if not limit.failed else "not known"
        return [case_words(limit), rounding.bearing(limit.wind_from), speed(limit.speed), limit.why, lost]

    stream.write(f"{found.scenario.title}\nWind speeds as the scenario gives them: {averaging_words(wind.averaging)} ")
    stream.write(f"at {say.say(rounding.length, wind.height)}; its own wind is {say.say(rounding.speed_below, wind.speed)}\n")
    head = ["case", "wind from", "limit", "governed by", "equilibrium lost"]
    terminal.table("Lowest limit of each case, from the worst direction", head, [row(limit) for limit in found.worst], stream)
    levels = [[f"{share:g}", speed(value)] for share, value in found.actions]
    lower = found.scenario.limit.lower_in
    title = "Action levels" + (f", with {lower / 60:g} min to lower" if lower is not None else "")
    terminal.table(title, ["share of the limit", "wind"], levels, stream)
    terminal.table("Limit of every listed direction", head, [row(found.circle[k]) for k in found.listed], stream)
    drops = [
        [case, cable, speed(at) if math.isfinite(at) else "does not drop", rounding.bearing(toward)]
        for case, cable, at, toward in found.first_drops
    ]
    terminal.table("Least wind at which each cable drops", ["case", "cable", "wind", "wind from"], drops, stream)
    said = [*found.notes, *([f"not judged: {', '.join(found.not_judged)}"] if found.not_judged else [])]
    for title, lines in (("Notes", said), ("Cautions", found.cautions)):
        stream.write(f"\n{title}\n" + "".join(f"  - {line}\n" for line in lines))


def case_words(limit: Limit) -> str:
    """The case, with its wind factor where that is not 1."""
    return limit.case if limit.wind_factor == 1.0 else f"{limit.case} (wind × {limit.wind_factor:g})"
