"""`guys search`: the best anchors among what is allowed.

Exit status 3 where no layout tried holds every rule, or what was found is past something once solved in all directions; 4 where none
stands.
"""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TextIO

from guys import terminal
from guys.checks.alarms import CAUTIONS
from guys.doors.common import in_layout, pictures, store, told, workers
from guys.doors.compare import report as compared
from guys.doors.compare import status as compared_status
from guys.drawing.comparison import draw_comparison
from guys.drawing.rounding import Units
from guys.drawing.tradeoff import draw_tradeoff
from guys.exchange import search as files
from guys.scenario import read_scenario
from guys.studies.measures import MEASURES
from guys.studies.search import Found, search
from guys.studies.trial import FALLS, HOLDS


def search_command(file: str, side_by_side: int, out: str | None, as_json: bool, units: Units = "SI", layout: str | None = None) -> int:
    """Search with so many processes; files go to the directory `out` where one is given.

    Raises `GuysError` for what is the user's to mend; nothing is written then.  Interrupted, it ends with the best so far.
    """
    scenario = in_layout(read_scenario(file), layout)
    with terminal.progress(sys.stderr, "layouts") as tick, workers(side_by_side) as executor:
        found = search(scenario, executor, tick)
    written = [] if out is None else store(Path(out), _files(found, units))
    if as_json:
        sys.stdout.write(files.as_text(found))
    else:
        report(found, units, sys.stdout)
        terminal.files(written, sys.stdout)
    return status(found)


def status(found: Found) -> int:
    """The exit status."""
    if found.compared is not None:
        return compared_status(found.compared)
    return 4 if found.trials and all(trial.outcome == FALLS for trial in found.trials) else 3


def _files(found: Found, units: Units) -> dict[str, bytes]:
    title = found.scenario.title
    contents = {"search.json": files.as_text(found).encode(), "search.csv": files.as_table(found).encode()}
    if found.compared is not None:
        contents["layouts.toml"] = files.as_layouts(found).encode()
        contents |= pictures("search", draw_comparison(found.compared, "A3", units), title)
    if found.compared is not None and len(found.keys) > 1:
        contents |= pictures("tradeoff", draw_tradeoff(found, "A3", units), title)
    return contents


def report(found: Found, units: Units, stream: TextIO) -> None:
    """What was found, ranked beside the layout as drawn, and as tables to paste; what excluded the rest."""
    holding = sum(trial.outcome == HOLDS for trial in found.trials)
    aims = " against ".join(MEASURES[key].words for key in found.keys)
    stream.write(f"{found.scenario.title}\n{len(found.trials)} layouts tried for the least {aims}; {holding} hold every rule\n")
    if found.interrupted:
        stream.write("Interrupted: what follows is the best so far\n")
    if found.compared is None:
        stream.write("No layout tried holds every rule. What excluded them:\n")
    else:
        compared(found.compared, units, stream)
        stream.write(f"\nTo paste into the scenario\n\n{files.as_layouts(found)}")
    terminal.table("Excluded by", ["rule", "layouts"], [[rule, str(count)] for rule, count in found.excluded], stream)
    told((("Warnings", found.warnings), ("Notes", found.notes), ("Cautions", CAUTIONS)), stream)
