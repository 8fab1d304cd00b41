"""What the commands do: read, solve, write every file or none, print, and return the exit status.

    0 solved and within the allowables     1 an internal fault     2 the input is wrong
    3 something is past its allowable      4 some case is unstable, none or neutral (a free spin of a ball-based spar is only noted)

3 and 4 still write every file; 4 goes before 3, and 1 before both.
"""

from __future__ import annotations

import sys
from contextlib import ExitStack
from pathlib import Path
from typing import TextIO

from guys import drawing, terminal
from guys.checks.alarms import BALANCE
from guys.drawing.files import figure_bytes
from guys.errors import OutputError
from guys.exchange import result, tables
from guys.exchange.files import reason, replaced
from guys.results import Solution
from guys.scenario import read_scenario
from guys.studies.standing import solve


def solve_command(
    file: str, out: str, as_json: bool, units: drawing.Units = "SI", paper: drawing.Paper = "A3", look: float | None = None
) -> int:
    """`guys solve`: every case of a scenario, written to the directory `out`.

    Raises `GuysError` for what is the user's to mend; nothing is written then.
    """
    scenario = read_scenario(file)
    with terminal.progress(sys.stderr) as tick:
        solution = solve(scenario, progress=tick)
    written = write(solution, Path(out), units, paper, look)
    _show(solution, written, as_json, units, sys.stdout)
    return exit_status(solution)


def write(solution: Solution, directory: Path, units: drawing.Units, paper: drawing.Paper, look: float | None) -> list[Path]:
    """Every file of a run: all are made and stored before the first takes its name."""
    _make(directory)
    contents = {
        "result.json": result.as_text(solution).encode(),
        "anchors.csv": tables.anchors(solution).encode(),
        "cables.csv": tables.cables(solution).encode(),
    }
    figure = drawing.sheet(solution, paper=paper, look_toward=look, units=units)
    for kind in ("pdf", "svg", "png"):
        contents[f"sheet.{kind}"] = figure_bytes(figure, kind, solution.scenario.title, solution.version)
    with ExitStack() as stack:
        for name, content in contents.items():
            stack.enter_context(replaced(directory / name)).write_bytes(content)
    return [directory / name for name in contents]


def _make(directory: Path) -> None:
    try:
        directory.mkdir(parents=True, exist_ok=True)
    except OSError as failure:
        raise OutputError(str(directory), reason(failure)) from failure


def _show(solution: Solution, written: list[Path], as_json: bool, units: drawing.Units, stream: TextIO) -> None:
    if as_json:
        stream.write(result.as_text(solution))
        return
    terminal.report(solution, units, stream)
    terminal.files(written, stream)


def exit_status(solution: Solution) -> int:
    """The contract's exit status of a run."""
    if solution.failed or (solution.check.balance > BALANCE):
        return 1
    if any(solution.unsettled):
        return 4
    return 3 if solution.past else 0
