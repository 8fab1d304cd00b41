"""`guys reserve`: how much more every case takes before equilibrium is lost, with files, table and figure.

0 every case has a stable equilibrium      4 some case has none, or one that is unstable or neutral
1 an internal fault, or the solver failed  2 the input is wrong
"""

from __future__ import annotations

import sys
from typing import TextIO

from guys import terminal
from guys.doors.common import deliver, pictures
from guys.drawing import rounding
from guys.drawing.reserve import draw_reserves
from guys.drawing.rounding import Units
from guys.exchange import reserve as exchange
from guys.reserves import ALL, WIND, WORDS, Reserves, Standing
from guys.scenario import read_scenario
from guys.studies.reserve import reserves


def reserve_command(file: str, out: str | None, as_json: bool, units: Units = "SI") -> int:
    """The stability reserves of a scenario, written to the directory `out` where one is given.

    Raises `GuysError` for what is the user's to mend; nothing is written then.
    """
    scenario = read_scenario(file)
    with terminal.progress(sys.stderr) as tick:
        found = reserves(scenario, tick)

    def contents() -> dict[str, bytes]:
        texts = {"reserve.json": exchange.as_text(found), "reserve.csv": exchange.as_table(found), "paths.csv": exchange.paths_table(found)}
        drawn = pictures("reserve", draw_reserves(found, "A3", units), scenario.title)
        return {name: text.encode() for name, text in texts.items()} | drawn

    deliver(out, contents, as_json, lambda: exchange.as_text(found), lambda stream: report(found, stream))
    return exit_status(found)


def exit_status(found: Reserves) -> int:
    """Whether every case has a stable equilibrium."""
    if found.failed:
        return 1
    return 0 if all(found.settled) else 4


def report(found: Reserves, stream: TextIO) -> None:
    """Lowest reserve of every case, every direction, factors at which cables drop, and what has to be said."""
    stream.write(f"{found.scenario.title}\n")
    lowest = [
        [s.case, WORDS[r.loads], rounding.reserve(r.factor, r.stands_to, r.failed), rounding.bearing(s.wind_from), s.verdict, r.falls]
        for s, r in found.lowest_first
    ]
    head = ["case", "times", "equilibrium lost at", "wind from", "verdict", "how"]
    terminal.table("Lowest reserve of each case, the least first", head, lowest, stream)
    every = [[s.case, rounding.bearing(s.wind_from), s.verdict, _number(s.stiffness), _at(s, WIND), _at(s, ALL)] for s in found.every]
    head = ["case", "wind from", "verdict", "stiffness", "lost at wind ×", "lost at all loads ×"]
    terminal.table("Every listed case and direction", head, every, stream)
    drops = [
        [case, WORDS[loads], cable, "slack already" if at == 1.0 else rounding.factor(at), rounding.bearing(toward)]
        for case, loads, cable, at, toward in found.first_drops
    ]
    terminal.table("Least factor at which each cable drops", ["case", "times", "cable", "drops at", "wind from"], drops, stream)
    said = [f"{place(s)}: {s.words}" for s in found.every if s.words]
    terminal.listed({"Cases": said, "Notes": found.notes, "Cautions": found.cautions}, stream)


def place(standing: Standing) -> str:
    """A case and its wind."""
    toward = rounding.bearing(standing.wind_from)
    return standing.case if toward == rounding.ABSENT else f"{standing.case}, wind from {toward}"


def _at(standing: Standing, loads: str) -> str:
    found = standing.of(loads)
    return rounding.ABSENT if found is None else rounding.reserve(found.factor, found.stands_to, found.failed)


def _number(value: float) -> str:
    return rounding.factor(value)
