"""`guys compare`: every layout of one file or several, ranked.

Exit status by the layout ranked first: 4 where none stands, 3 where none is within all that is judged.
"""

from __future__ import annotations

import math
import sys
from collections.abc import Sequence
from pathlib import Path
from typing import TextIO

from guys import terminal
from guys.checks.alarms import CAUTIONS
from guys.doors.common import pictures, store, told, workers
from guys.doors.size import amount
from guys.drawing import rounding
from guys.drawing.comparison import draw_comparison, said, title
from guys.drawing.rounding import Tongue, Units, tongue
from guys.exchange import comparison
from guys.scenario import layouts, read_scenarios
from guys.studies.compare import Compared, Comparison, compare
from guys.studies.measures import MEASURES, own_need


def compare_command(files: Sequence[str], by: str, side_by_side: int, out: str | None, as_json: bool, units: Units = "SI") -> int:
    """Compare layouts, `side_by_side` of them at a time; files go to the directory `out` where one is given.

    Raises `GuysError` for what is the user's to mend; nothing is written then.
    """
    scenarios = read_scenarios(files)
    count = sum(len(layouts.every(scenario)) for scenario in scenarios)
    with terminal.progress(sys.stderr, "layouts") as tick, workers(min(side_by_side, count)) as executor:
        found = compare(scenarios, by, executor, tick)
    written = [] if out is None else _write(found, Path(out), units)
    if as_json:
        sys.stdout.write(comparison.as_text(found))
    else:
        report(found, units, sys.stdout)
        warnings = [text for scenario in scenarios for text in layouts.warnings(scenario)]
        told((("Warnings", warnings), ("Cautions", CAUTIONS)), sys.stdout)
        terminal.files(written, sys.stdout)
    return status(found)


def _write(found: Comparison, directory: Path, units: Units) -> list[Path]:
    contents = {"compare.json": comparison.as_text(found).encode(), "compare.csv": comparison.as_table(found).encode()}
    return store(directory, contents | pictures("compare", draw_comparison(found, "A3", units), title(found)))


def status(found: Comparison) -> int:
    """The exit status."""
    if any(each.solution.failed for each in found.layouts):
        return 1
    return {"falls": 4, "past": 3}.get(found.layouts[0].verdict, 0)


def report(found: Comparison, units: Units, stream: TextIO) -> None:
    """The ranking with what decides; every measure; what every holdfast must be."""
    speech, measure = tongue(units), MEASURES[found.by]
    stream.write(f"{len(found.layouts)} layout{'s' if len(found.layouts) > 1 else ''}, ranked by {measure.words}\n")
    head = ["rank", "layout", "verdict", measure.words, "of", "case", "wind from", "nearest its allowable", "factor", "required"]
    terminal.table("Layouts", head, [_ranked(each, found.by, speech) for each in found.layouts], stream)
    keys = [key for key in MEASURES if any(not math.isnan(each.values[key].value) for each in found.layouts)]
    rows = [[each.name, *(said(key, each.values[key], speech, rounding.load) for key in keys)] for each in found.layouts]
    terminal.table("Measures", ["layout", *(MEASURES[key].words for key in keys)], rows, stream)
    needs = [row for each in found.layouts for row in _needs(each, speech)]
    terminal.table("What the holdfasts must be", ["layout", "anchor", "pull", "holdfast", "size", "needed", "given"], needs, stream)


def _wind(wind_from: float) -> str:
    return "–" if math.isnan(wind_from) else rounding.bearing(wind_from)


def _ranked(each: Compared, by: str, speech: Tongue) -> list[str]:
    value, f = each.values[by], each.decides
    open_ = f", {each.not_judged} not judged" if each.not_judged and each.verdict != "not judged" else ""
    out = [str(each.rank), each.name, each.verdict + open_]
    out += [said(by, value, speech, rounding.load), value.of, value.case, _wind(value.wind_from)]
    return out + (["–"] * 3 if f is None else [f"{f.thing}, {f.quantity}", rounding.factor(f.factor), f"{f.required:g}"])


def _needs(each: Compared, speech: Tongue) -> list[list[str]]:
    rows = []
    for anchor in each.needs:
        need = own_need(anchor)
        if need is None:
            continue
        given = "–" if math.isnan(need.given) else amount(need.given, need.dimension, speech)
        needed = need.reason if need.holds is None else need.pattern or amount(need.needed, need.dimension, speech)
        held = f"{need.holdfast} ({need.kind})"
        rows.append([each.name, anchor.name, speech.say(rounding.load, anchor.pull), held, need.size, needed, given])
    return rows
