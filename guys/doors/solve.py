"""`guys solve`: every case of a scenario, with files, table and sheet."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TextIO

from guys import drawing, terminal
from guys.doors.common import exit_status, in_layout, pictures, store
from guys.exchange import result, tables
from guys.results import Solution
from guys.scenario import read_scenario
from guys.studies.standing import solve


def solve_command(
    file: str,
    out: str,
    as_json: bool,
    units: drawing.Units = "SI",
    paper: drawing.Paper = "A3",
    look: float | None = None,
    layout: str | None = None,
    with_pictures: bool = False,
) -> int:
    """Every case of a scenario, written to the directory `out`.

    layout : the name of one of its layouts, None: as drawn;  with_pictures : the page of pictures too

    Raises `GuysError` for what is the user's to mend; nothing is written then.
    """
    scenario = in_layout(read_scenario(file), layout)
    with terminal.progress(sys.stderr) as tick:
        solution = solve(scenario, progress=tick)
    written = write(solution, Path(out), units, paper, look, with_pictures)
    _show(solution, written, as_json, units, sys.stdout)
    return exit_status(solution)


def write(
    solution: Solution, directory: Path, units: drawing.Units, paper: drawing.Paper, look: float | None, with_pictures: bool = False
) -> list[Path]:
    """Every file of a run: all are made before the first is stored."""
    contents = {
        "result.json": result.as_text(solution).encode(),
        "anchors.csv": tables.anchors(solution).encode(),
        "findings.csv": tables.findings(solution).encode(),
        "cables.csv": tables.cables(solution).encode(),
    }
    figure = drawing.sheet(solution, paper=paper, look_toward=look, units=units)
    contents |= pictures("sheet", figure, solution.scenario.title)
    if with_pictures:
        from guys.drawing.pictures import draw_pictures

        contents |= pictures("pictures", draw_pictures(solution, paper, units), solution.scenario.title)
    return store(directory, contents)


def _show(solution: Solution, written: list[Path], as_json: bool, units: drawing.Units, stream: TextIO) -> None:
    if as_json:
        stream.write(result.as_text(solution))
        return
    terminal.report(solution, units, stream)
    terminal.files(written, stream)
