"""`guys setout`: where each peg goes, and what pegs found elsewhere do."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TextIO

from guys import terminal
from guys.doors.common import exit_status, in_layout, pictures, store
from guys.drawing import rounding
from guys.drawing.pegs import draw_setout
from guys.drawing.rounding import Units, tongue
from guys.errors import Fault, ScenarioError
from guys.exchange import pegs as exchange
from guys.scenario import read_scenario
from guys.scenario.model import Scenario
from guys.site.surveyed import SurveyError, read_pegs
from guys.studies.pegs import AsBuilt, Pegs, as_built, pegs

WITHOUT_DXF = 'no setout.dxf: that needs one package more, pip install "guys[dxf]"'
WITHOUT_GRID = "no setout.geojson and setout.kml: those are in degrees, and [site] gives no crs"


def setout_command(
    file: str,
    out: str | None,
    as_json: bool,
    units: Units = "SI",
    paper: str = "A3",
    surveyed: str | None = None,
    layout: str | None = None,
) -> int:
    """Set out every anchor; `surveyed`: a file of pegs as found, with which the scenario is solved again.

    Exit status 0; with `surveyed` that of the solution with the pegs as found.  Raises `GuysError` for what is the user's to mend.
    """
    scenario = in_layout(read_scenario(file), layout)
    planned = pegs(scenario)
    if not planned.name:
        raise ScenarioError([Fault(file, None, None, "anchor", "no anchor to set out")])
    built = None
    if surveyed is not None:
        places = _places(surveyed, scenario, planned)
        with terminal.progress(sys.stderr) as tick:
            built = as_built(scenario, places, tick)
    contents, missing = _files(planned, built, paper, units)
    written = [] if out is None else store(Path(out), contents)
    if as_json:
        sys.stdout.write(exchange.as_text(planned, built))
    else:
        report(planned, built, units, sys.stdout)
        for words in missing if out is not None else ():
            sys.stdout.write(f"{words}\n")
        terminal.files(written, sys.stdout)
    return 0 if built is None else exit_status(built.after)


def _places(surveyed: str, scenario: Scenario, planned: Pegs) -> dict[str, tuple[float, float, float]]:
    at = {n: (float(p[0]), float(p[1]), float(p[2])) for n, p in zip(planned.name, planned.position, strict=True)}
    try:
        return read_pegs(Path(surveyed), None if scenario.site is None else scenario.site.grid, at)
    except SurveyError as error:
        raise ScenarioError([Fault(surveyed, None, None, "", reason) for reason in error.reasons]) from None


def _files(planned: Pegs, built: AsBuilt | None, paper: str, units: Units) -> tuple[dict[str, bytes], list[str]]:
    """Every file of a set-out, and what is missing, with why."""
    contents, missing = {"setout.json": exchange.as_text(planned, built).encode(), "setout.csv": exchange.as_table(planned).encode()}, []
    if planned.scenario.site is not None and planned.scenario.site.grid is not None:
        contents |= {"setout.geojson": exchange.geojson(planned).encode(), "setout.kml": exchange.kml(planned).encode()}
    else:
        missing.append(WITHOUT_GRID)
    try:
        contents["setout.dxf"] = exchange.dxf(planned).encode()
    except ModuleNotFoundError:
        missing.append(WITHOUT_DXF)
    if built is not None:
        contents["as-built.csv"] = exchange.as_built_table(built).encode()
    return contents | pictures("setout", draw_setout(planned, built, paper, units), planned.scenario.title), missing


def report(planned: Pegs, built: AsBuilt | None, units: Units, stream: TextIO) -> None:
    """Bearings and distances of every peg, check distances, and pegs as found."""
    say = tongue(units)
    site = planned.scenario.site
    stream.write(f"{planned.scenario.title}\n")
    if site is not None and site.grid is not None:
        stream.write(f"{site.grid.crs}, {site.grid.name}; scale factor {site.grid.combined:.7f}, grid over ground\n")
    rows = []
    for row in exchange.rows(planned):
        turns = [row[f"bearing_{north}_deg"] for north in ("grid", "true", "magnetic")]
        distances = [say.say(rounding.length, row[f"{how}_distance_m"]) for how in ("level", "slope")]
        rows.append([row["name"], *("–" if t is None else f"{t:.2f}°" for t in turns), *distances, say.say(rounding.level, row["level_m"])])
    spar = planned.scenario.spar[0].name
    head = ["peg", "grid bearing", "true", "magnetic", "level distance", "slope distance", "level"]
    terminal.table(f"From the foot of {spar}, true ground distances", head, rows, stream)
    ring = [
        [f"{row['from']} to {row['to']}", *(say.say(rounding.length, row[f"{how}_distance_m"]) for how in ("level", "slope"))]
        for row in exchange.check_distances(planned)
    ]
    terminal.table("Check distances between pegs", ["pegs", "level", "slope"], ring, stream)
    if built is not None:
        found = [
            [row["name"], *(say.say(rounding.offset, row[k]) for k in ("east_off_m", "north_off_m", "level_off_m")),
             *(say.say(rounding.load, row[f"resultant_{how}_N"] or float("nan")) for how in ("planned", "as_built"))]
            for row in exchange.as_built_rows(built)
        ]  # fmt: skip
        terminal.table("Pegs as surveyed", ["peg", "east", "north", "level", "pull as planned", "pull as found"], found, stream)
        stream.write(f"\nAs found: {terminal.states(built.after)}\n")
        terminal.against(built.after, say.systems, stream)
        for warning in built.after.warnings:
            stream.write(f"warning: {warning}\n")
