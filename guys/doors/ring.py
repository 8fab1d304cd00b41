"""`guys ring`: one mast on rings of evenly spaced anchors, over radius and number of ways."""

from __future__ import annotations

import sys
from collections.abc import Sequence
from pathlib import Path
from typing import TextIO

from guys import terminal
from guys.checks.alarms import CAUTIONS
from guys.doors.common import in_layout, pictures, store, told, workers
from guys.drawing import rounding
from guys.drawing.comparison import said
from guys.drawing.ring import draw_rings
from guys.drawing.rounding import Units, tongue
from guys.exchange import ring as files
from guys.scenario import read_scenario
from guys.studies.measures import MEASURES, Value
from guys.studies.ring import KEYS, Rings, rings


def ring_command(
    file: str,
    ways: Sequence[int],
    radius: tuple[float, float] | None,
    steps: int,
    side_by_side: int,
    out: str | None,
    as_json: bool,
    units: Units = "SI",
    layout: str | None = None,
) -> int:
    """Solve every ring; files go to the directory `out` where one is given.

    Raises `GuysError` for what is the user's to mend; nothing is written then.
    """
    scenario = in_layout(read_scenario(file), layout)
    with terminal.progress(sys.stderr, "rings") as tick, workers(side_by_side) as executor:
        found = rings(scenario, ways, radius, steps, executor, tick)
    contents = {"ring.json": files.as_text(found).encode(), "ring.csv": files.as_table(found).encode()}
    written = [] if out is None else store(Path(out), contents | pictures("ring", draw_rings(found, "A3", units), scenario.title))
    if as_json:
        sys.stdout.write(files.as_text(found))
    else:
        report(found, units, sys.stdout)
        terminal.files(written, sys.stdout)
    return 0 if found.stands.any() else 4


def report(found: Rings, units: Units, stream: TextIO) -> None:
    """A row a ring."""
    speech = tongue(units)
    stream.write(f"{found.scenario.title}\n")
    rows = []
    for w, ways in enumerate(found.ways):
        for r, radius in enumerate(found.radius):
            values = [said(key, Value(float(found.values[key][w, r])), speech, rounding.load) for key in KEYS]
            rows.append([str(ways), speech.say(rounding.length, float(radius)), "yes" if found.stands[w, r] else "falls", *values])
    terminal.table("Rings of anchors", ["ways", "radius", "stands", *(MEASURES[key].words for key in KEYS)], rows, stream)
    told((("Notes", found.notes), ("Cautions", CAUTIONS)), stream)
