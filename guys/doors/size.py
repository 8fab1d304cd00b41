"""`guys size`: what every holdfast of the file must be at every anchor.

Exit status 4 where some case has no stable equilibrium, 3 where none of the holdfasts can be made to hold some anchor.
"""

from __future__ import annotations

import math
import sys
from collections.abc import Iterator
from typing import TextIO

from guys import terminal
from guys.checks.alarms import CAUTIONS
from guys.doors.common import deliver, in_layout
from guys.drawing import rounding
from guys.drawing.rounding import Tongue, Units, tongue
from guys.exchange import sizing as files
from guys.scenario import Scenario, read_scenario
from guys.studies.sizing import AnchorNeeds, Need, Sizing, size


def size_command(file: str, out: str | None, as_json: bool, units: Units = "SI", layout: str | None = None) -> int:
    """Size every holdfast for every anchor; files go to the directory `out` where one is given.

    Raises `GuysError` for what is the user's to mend; nothing is written then.
    """
    scenario = in_layout(read_scenario(file), layout)
    with terminal.progress(sys.stderr) as tick:
        found = size(scenario, tick)

    def contents() -> dict[str, bytes]:
        return {"size.json": files.as_text(found).encode(), "size.csv": files.as_table(found).encode()}

    deliver(out, contents, as_json, lambda: files.as_text(found), lambda stream: report(found, units, stream))
    return status(found)


def status(found: Sizing) -> int:
    """The exit status."""
    return 1 if found.failed else 4 if not found.stands else 3 if found.short else 0


def report(found: Sizing, units: Units, stream: TextIO) -> None:
    """A table for each anchor, the least change first; then the warnings."""
    said = tongue(units)
    stream.write(f"{found.scenario.title}\nLeast size of every holdfast at a factor of {_required(found.scenario)}, by its low value\n")
    head = ["holdfast", "size", "needed", "given", "holds low", "best", "high", "governs", "case", "wind from"]
    for anchor in found.anchors:
        terminal.table(_title(anchor, said), head, [_row(need, said) for need in anchor.needs if need.holds is not None], stream)
        stream.write("".join(f"  {words}\n" for words in _trenches(anchor, said)))
    nothing = [f"{a.name}, {n.holdfast}, {n.size}: {n.reason}" for a in found.anchors for n in a.needs if n.holds is None]
    for title, lines in (
        ("Nothing will do", nothing),
        ("Warnings", found.warnings),
        ("Notes", found.notes),
        ("Not checked", found.not_checked),
        ("Cautions", CAUTIONS),
    ):
        if lines:
            stream.write(f"\n{title}\n" + "".join(f"  - {line}\n" for line in lines))


def _required(scenario: Scenario) -> str:
    """The factors required of anchors, and in which cases."""
    allowed = scenario.allowables
    factored = allowed.factored.get("anchor")
    return f"{allowed.anchor:g}" + ("" if factored is None else f" ({factored:g} in factored cases)")


def _title(anchor: AnchorNeeds, said: Tongue) -> str:
    if math.isnan(anchor.pull):
        return f"Anchor {anchor.name}: no case has an equilibrium"
    pull = f"pull {said.say(rounding.load, anchor.pull)} at {rounding.angle(anchor.angle)} from the ground"
    count = f"{len(anchor.cables)} cable{'' if len(anchor.cables) == 1 else 's'}"
    return f"Anchor {anchor.name}: {pull}, {count}; proof load {said.say(rounding.load, anchor.proof)}"


def _trenches(anchor: AnchorNeeds, said: Tongue) -> Iterator[str]:
    """Where deadmen lie."""
    for need in anchor.needs:
        if lies := anchor.trench(need):
            behind, along = (said.say(rounding.length, value) for value in lies)
            yield f"{need.holdfast}: its middle {behind} behind the anchor, {along} of cable in the trench, in line with the pull"


def _row(need: Need, said: Tongue) -> list[str]:
    force = [said.say(rounding.capacity, value) for value in (need.low, need.best, need.high)]
    wind = "–" if math.isnan(need.wind_from) else rounding.bearing(need.wind_from)
    given = "–" if math.isnan(need.given) else amount(need.given, need.dimension, said)
    needed = f"{need.pattern} ({need.needed:g} pickets)" if need.pattern else amount(need.needed, need.dimension, said)
    return [f"{need.holdfast} ({need.kind})", need.size, needed, given, *force, need.governs, need.case, wind]


def amount(value: float, dimension: str, said: Tongue) -> str:
    """A size rounded up to three figures."""
    if not dimension:
        return f"{value:g} pickets"
    return said.say(lambda v, system: rounding.at_least(v, dimension, system), value)
