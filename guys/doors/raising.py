"""`guys raise`: a spar tilted up, angle by angle, with table, files and figures."""

from __future__ import annotations

import math
import sys
from collections.abc import Callable
from typing import TextIO

import numpy as np

from guys import terminal
from guys.doors.common import deliver, pictures, workers
from guys.drawing import Paper, Units, rounding
from guys.drawing.raising import draw_raising
from guys.drawing.rounding import System
from guys.errors import Fault, ScenarioError
from guys.exchange import raising as exchange
from guys.results import Finding
from guys.rotation import Array
from guys.scenario import Scenario, read_scenario
from guys.studies import hoisting
from guys.studies.raising import Raised, solve


def raise_command(file: str, side_by_side: int | None, out: str | None, as_json: bool, units: Units = "SI", paper: Paper = "A3") -> int:
    """Every stage of a raising, so many `side_by_side`, written to the directory `out` where one is given.

    Raises `GuysError` for what is the user's to mend; nothing is written then.
    """
    scenario = read_scenario(file)
    _refuse(scenario)
    with terminal.progress(sys.stderr, "angles") as tick, workers(side_by_side) as executor:
        raised = solve(scenario, executor, tick)
    findings = hoisting.findings(raised)
    deliver(
        out,
        lambda: contents(raised, findings, units, paper, side_by_side),
        as_json,
        lambda: exchange.as_text(raised, findings),
        lambda stream: report(raised, findings, units, stream),
    )
    return exit_status(raised, findings)


def _refuse(scenario: Scenario) -> None:
    if scenario.raising is None:
        text = "missing; give [raise]: spar, toward, lift_at, gin_pole and winch say how the spar is tilted up"
        raise ScenarioError([Fault(scenario.path, None, None, "raise", text)])


def exit_status(raised: Raised, findings: tuple[Finding, ...]) -> int:
    """1 a fault of the solver, 4 something is not held, 3 something is past its allowable, else 0."""
    if raised.failed:
        return 1
    if not raised.stands.all():
        return 4
    return 3 if any(f.verdict == "past" for f in findings) else 0


def contents(raised: Raised, findings: tuple[Finding, ...], units: Units, paper: Paper, side_by_side: int | None) -> dict[str, bytes]:
    """Every file of a raising."""
    tables = {"raise.json": exchange.as_text(raised, findings).encode(), "raise.csv": exchange.table(raised).encode()}
    figure = draw_raising(raised, paper, units)
    with workers(side_by_side) as executor:  # forked now, with the figure and all that draws it
        return tables | pictures("raise", figure, raised.lift.scenario.title, executor)


def report(raised: Raised, findings: tuple[Finding, ...], units: Units, stream: TextIO) -> None:
    """Every stage in still air and in the worst wind, what is judged, and every warning."""
    systems: tuple[System, ...] = ("SI", "US") if units == "both" else (units,)
    lift = raised.lift
    stages = f"{len(raised.angle)} angle" + "s" * (len(raised.angle) != 1)
    winds = f" and {len(raised.wind_from) - 1} winds" if len(raised.wind_from) > 1 else ""
    stream.write(
        f"{lift.scenario.title}\n{lift.spar.name} raised by a {lift.raising.gin_pole.kind} gin pole: {stages} in still air{winds}\n"
    )
    _stages(raised, "In still air", lambda value: value[:, 0], systems, stream)
    if winds:
        _stages(raised, f"Greatest, in still air and wind of {_wind(raised, systems)}", _most, systems, stream)
    rows = [
        [f.thing, f.quantity, _judged(f), f"{f.required:g}{' (default)' if f.default else ''}", f.case or "–",
         "–" if math.isnan(f.wind_from) else rounding.bearing(f.wind_from)]
        for f in findings if f.verdict != "not judged"
    ]  # fmt: skip
    terminal.table("Against the allowables", ["thing", "quantity", "factor", "required", "at", "wind from"], rows, stream)
    unjudged = [f.thing for f in findings if f.verdict == "not judged"]
    if unjudged:
        stream.write(f"\nNot judged: {', '.join(unjudged)}\n")
    for title, lines in (("Warnings", hoisting.warnings(raised)), ("Not checked", hoisting.NOT_CHECKED), ("Cautions", hoisting.CAUTIONS)):
        if lines:
            stream.write(f"\n{title}\n" + "".join(f"  - {line}\n" for line in lines))


def _judged(finding: Finding) -> str:
    return f"{rounding.factor(finding.factor)} {finding.verdict}"


def _most(value: Array) -> Array:
    """The greatest over the cases, NaN where nothing is held."""
    known = np.where(np.isnan(value), -np.inf, value).max(axis=1)
    return np.where(np.isinf(known), np.nan, known)


def _wind(raised: Raised, systems: tuple[System, ...]) -> str:
    wind = raised.lift.scenario.wind
    speed = raised.lift.raising.wind_speed or (wind.speed if wind is not None else math.nan)
    return " / ".join(rounding.speed(speed, s) for s in systems)


def _stages(raised: Raised, title: str, of: Callable[[Array], Array], systems: tuple[System, ...], stream: TextIO) -> None:
    hinge = np.linalg.norm(raised.on_hinge, axis=-1)
    columns = {
        "hoist line": raised.hoist,
        "lift point": raised.lift_line,
        "gin pole": raised.gin_pole,
        "holding line": raised.holding,
        "hinge": hinge,
    }
    if raised.lift.guys:
        columns["side guys"] = raised.guys.max(axis=2)
    values = [of(v) for v in columns.values()]
    moment = of(raised.bending)
    none = hoisting.SHOWN * hoisting.largest(raised)

    def force(value: float) -> str:
        return " / ".join(rounding.load(0.0 if abs(value) < none else value, s) for s in systems)

    rows = [
        [
            hoisting.angle_words(angle),
            *(force(float(v[k])) for v in values),
            " / ".join(rounding.moment(float(moment[k]), s) for s in systems),
        ]
        for k, angle in enumerate(raised.angle)
    ]
    terminal.table(title, ["angle", *columns, "bending"], rows, stream)
