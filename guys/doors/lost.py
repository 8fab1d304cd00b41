"""`guys lost`: every cable and every anchor taken away in turn.

Exit status 4 where the structure does not stand with everything in place, 3 where something falls or passes its allowable once a cable or
anchor is lost.
"""

from __future__ import annotations

import math
import sys
from typing import TextIO

from guys import terminal
from guys.checks.alarms import CAUTIONS
from guys.doors.common import deliver, in_layout, pictures
from guys.drawing import rounding
from guys.drawing.losses import draw_losses, load_row
from guys.drawing.rounding import Tongue, Units, tongue
from guys.exchange import losses
from guys.scenario import read_scenario
from guys.studies.cells import FALLS, NOT_FOUND, PAST, WORDS
from guys.studies.lost import Lost, judged_by, lose


def lost_command(file: str, out: str | None, as_json: bool, units: Units = "SI", layout: str | None = None, winds: bool = False) -> int:
    """Take everything away in turn, `winds`: with the wind still stood; files go to the directory `out` where one is given.

    Raises `GuysError` for what is the user's to mend; nothing is written then.
    """
    scenario = in_layout(read_scenario(file), layout)
    with terminal.progress(sys.stderr) as tick:
        found = lose(scenario, tick, winds)

    def contents() -> dict[str, bytes]:
        drawn = pictures("lost", draw_losses(found, "A3", units), scenario.title)
        return {"lost.json": losses.as_text(found).encode(), "lost.csv": losses.as_table(found).encode()} | drawn

    deliver(out, contents, as_json, lambda: losses.as_text(found), lambda stream: report(found, units, stream))
    return status(found)


def status(found: Lost) -> int:
    """The exit status."""
    verdict = found.verdict
    if (verdict == NOT_FOUND).any():
        return 1
    return 4 if (verdict[0] >= FALLS).any() else 3 if (verdict >= PAST).any() else 0


def _winds(found: Lost, speech: Tongue, stream: TextIO) -> None:
    """The lowest wind after every loss at which something passes its allowable, and at which equilibrium is lost."""
    head = ["lost", "limit", "wind from", "governed by", "equilibrium lost", "wind from"]
    rows = []
    for k, loss in enumerate(found.losses):
        least, falls = found.least_wind(k), found.least_lost(k)
        first = ["no wind", "", "falls in still air"] if found.still[k] else [rounding.ABSENT, "", ""]
        if least is not None:
            speed = rounding.ABSENT if math.isnan(least.speed) else speech.say(rounding.speed_below, least.speed)
            first = [speed, rounding.bearing(least.wind_from), least.why]
        second = [rounding.ABSENT, ""]
        if falls is not None:
            second = [speech.say(rounding.speed_below, falls.lost), rounding.bearing(falls.wind_from)]
        rows.append([loss.words, *first, *second])
    terminal.table("The wind still stood, from the worst direction", head, rows, stream)


def report(found: Lost, units: Units, stream: TextIO) -> None:
    """One line a loss: in how many cases and winds it falls, and the worst of those in which it stands."""
    stream.write(f"{found.scenario.title}\n{len(found.losses) - 1} losses, {len(found.lines)} cases and winds each\n")
    head = ["lost", "still air", "falls", "past", "least factor", "of", "wind from", "tension", "of", "pull", "of"]
    rows = []
    for k, loss in enumerate(found.losses):
        verdict = found.cells[k].verdict
        counts = ["all" if found.still[k] else str(int((verdict >= FALLS).sum())), str(int((verdict == PAST).sum()))]
        rows.append([loss.words, WORDS[verdict[0]], *counts, *load_row(found, k, tongue(units), rounding.load)])
    terminal.table("What is lost, and what stands", head, rows, stream)
    if found.winds:
        _winds(found, tongue(units), stream)
    falls = [f"{loss.words}: {cells.reason[0]}" for loss, cells in zip(found.losses, found.cells, strict=True) if cells.reason[0]]
    terminal.listed({"Falls in still air when lost": falls, "How": judged_by(found), "Cautions": CAUTIONS}, stream)
