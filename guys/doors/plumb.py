"""`guys plumb`: the initial tensions that leave every spar as drawn."""

from __future__ import annotations

import math
from typing import TextIO

from guys import terminal
from guys.checks.alarms import AS_PLUMBED, CAUTIONS
from guys.doors.common import deliver, in_layout
from guys.drawing import rounding
from guys.drawing.rounding import Units, tongue
from guys.exchange import plumbing as exchange
from guys.scenario import read_scenario
from guys.studies.plumbing import Plumb, plumb


def plumb_command(file: str, out: str | None, as_json: bool, units: Units = "SI", layout: str | None = None) -> int:
    """Find the tensions; exit status 0, 3 where one is more than half off what was asked for.

    Raises `GuysError` for what is the user's to mend; nothing is written then.
    """
    found = plumb(in_layout(read_scenario(file), layout))

    def contents() -> dict[str, bytes]:
        return {"plumb.json": exchange.as_text(found).encode(), "plumb.csv": exchange.as_table(found).encode()}

    deliver(out, contents, as_json, lambda: exchange.as_text(found), lambda stream: report(found, units, stream))
    return 3 if (abs(found.change) > AS_PLUMBED).any() else 0


def report(found: Plumb, units: Units, stream: TextIO) -> None:
    """Tensions to set, and what the asked ones would do."""
    say = tongue(units)
    at = say.say(rounding.temperature, found.scenario.setting.temperature)
    stream.write(f"{found.scenario.title}\n")
    head = ["cable", "asked for", "for plumb", "change"]
    rows = [
        [name, *(say.say(rounding.plain_force, float(v)) for v in (found.asked[k], found.plumb[k])), f"{100 * found.change[k]:+.0f} %"]
        for k, name in enumerate(found.name)
    ]
    terminal.table(f"Initial tensions at the lower end, still air, {at}, everything fast", head, rows, stream)
    turns = [
        ["no such state" if math.isnan(t) else rounding.small_angle(float(t)) for t in both]
        for both in zip(found.lean, found.plumb_lean, strict=True)
    ]
    leans = [[name, *turns[k]] for k, name in enumerate(found.spar)]
    terminal.table("Off the drawn line in still air, foot to head", ["spar", "as asked for", "for plumb"], leans, stream)
    far = [name for k, name in enumerate(found.name) if abs(found.change[k]) > AS_PLUMBED]
    if far:
        stream.write(f"\nwarning: more than half off what was asked for: {', '.join(far)}; ask for tensions that balance\n")
    stream.write("\nSet tensions = these, or write plumb = true in [setting] to solve with them.\n")
    terminal.listed({"Cautions": CAUTIONS}, stream)
