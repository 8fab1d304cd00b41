"""`guys matters`: what the worst anchor load and the reserve depend on most.

Exit status 4 where the structure does not stand as drawn in some case, 3 where something falls or is past its allowable there or at the end
of a range.
"""

from __future__ import annotations

import sys
from typing import TextIO

from guys import terminal
from guys.checks.alarms import CAUTIONS
from guys.doors.common import deliver, in_layout, pictures
from guys.drawing import rounding
from guys.drawing.matters import draw_matters
from guys.drawing.rounding import Units, tongue
from guys.exchange import matters
from guys.scenario import read_scenario
from guys.studies.margin import MOST
from guys.studies.matters import Matters, Reading, told, weigh


def matters_command(file: str, out: str | None, as_json: bool, units: Units = "SI", layout: str | None = None) -> int:
    """Vary everything in turn; files go to the directory `out` where one is given.

    Raises `GuysError` for what is the user's to mend; nothing is written then.
    """
    scenario = in_layout(read_scenario(file), layout)
    with terminal.progress(sys.stderr) as tick:
        found = weigh(scenario, tick)

    def contents() -> dict[str, bytes]:
        drawn = pictures("matters", draw_matters(found, "A3", units), scenario.title)
        return {"matters.json": matters.as_text(found).encode(), "matters.csv": matters.as_table(found).encode()} | drawn

    deliver(out, contents, as_json, lambda: matters.as_text(found), lambda stream: report(found, units, stream))
    return status(found)


def status(found: Matters) -> int:
    """The exit status."""
    ends = [r for s in found.spans for r in (s.less, s.more)]
    if any(r.fault for r in (found.point, *ends)):
        return 1
    if found.point.falls:
        return 4
    return 3 if any(r.falls or r.reserve < 1 for r in (found.point, *ends)) else 0


def report(found: Matters, units: Units, stream: TextIO) -> None:
    """One line a range, those that matter most first."""
    speech = tongue(units)

    def said(r: Reading) -> list[str]:
        pull = speech.say(rounding.load, r.pull)
        judged = f"falls in {r.falls}" if r.falls else f"{rounding.factor(r.reserve)} {r.thing}"
        return [f"{pull} {r.anchor}", judged, rounding.stability(r.stands_to, MOST)]

    rows = [["as drawn", "", *said(found.point), "", "", ""]]
    for s in found.spans:
        ends = [*said(s.less), *said(s.more)]
        both = " / ".join(s.ends) + ("" if s.given else ", default")
        rows.append([s.what, both, *(["not solved: " + s.lacking, *[""] * 5] if s.lacking else ends)])
    stream.write(f"{found.scenario.title}\n")
    head = ["range", "from / to", *(f"{of}, {end}" for end in ("less", "more") for of in ("pull", "reserve", "lost at"))]
    title = "What matters most: greatest anchor pull, least factor over the one required, times the loads at which equilibrium is lost"
    terminal.table(title, head, rows, stream)
    falls = [f"{name}: {r.reason}" for name, r in _all(found) if r.reason]
    terminal.listed({"Falls": falls, "How": told(found), "Cautions": CAUTIONS}, stream)


def _all(found: Matters) -> list[tuple[str, Reading]]:
    """The point and every end that is not the point, named."""
    ends = [(f"{s.what} {end}", r) for s in found.spans for end, r in zip(s.ends, (s.less, s.more), strict=True) if r is not found.point]
    return [("as drawn", found.point), *ends]
