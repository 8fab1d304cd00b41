"""`guys record`: the calculation record as a page for the engineer who checks it."""

from __future__ import annotations

import sys
from pathlib import Path

from guys import record, terminal
from guys.doors.common import exit_status, in_layout, store
from guys.drawing.rounding import Units
from guys.exchange import recording as files
from guys.exchange import result
from guys.record.pdf import pdf
from guys.scenario import read_scenario
from guys.studies.recording import record as solve_record


def record_command(file: str, out: str, as_json: bool, units: Units = "SI", with_pdf: bool = False, layout: str | None = None) -> int:
    """Solve a scenario and what its record asks beyond, and write the page, to the directory `out`.

    Raises `GuysError` for what is the user's to mend; nothing is written then.
    """
    scenario = in_layout(read_scenario(file), layout)
    with terminal.progress(sys.stderr) as tick:
        found = solve_record(scenario, tick)
    page = record.html(found, units)
    contents = {
        "record.html": page.encode(),
        "record.json": files.as_text(found).encode(),
        "result.json": result.as_text(found.solution).encode(),
    }
    if with_pdf:
        contents["record.pdf"] = pdf(page)
    written = store(Path(out), contents)
    if as_json:
        sys.stdout.write(files.as_text(found))
    else:
        terminal.report(found.solution, units, sys.stdout)
        terminal.files(written, sys.stdout)
    return exit_status(found.solution)
