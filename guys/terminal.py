"""What a run prints: short tables of the worst loads, and the progress of long work.

Tables are drawn by rich on a terminal and are plain aligned text otherwise, so that they can be piped.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator, Mapping, Sequence
from contextlib import contextmanager
from pathlib import Path
from typing import TextIO

from guys.checks.chains import usual_words
from guys.drawing import rounding
from guys.drawing.box import amount
from guys.drawing.rounding import System, Units
from guys.drawing.strip import standing
from guys.results import Extreme, Finding, Solution

Row = Sequence[str]
MEANING = {"none": " (no equilibrium: it falls)", "unstable": " (does not hold)", "neutral": " (free to move)"}
"""What the states of the result file mean, for who reads them first here."""


@contextmanager
def progress(stream: TextIO, what: str = "cases") -> Iterator[Callable[[int, int], None] | None]:
    """A bar while cases, or whatever is counted, are solved, on a terminal only."""
    if not stream.isatty():
        yield None
        return
    from rich.console import Console
    from rich.progress import BarColumn, MofNCompleteColumn, Progress, TextColumn

    columns = (TextColumn("solving"), BarColumn(), MofNCompleteColumn(), TextColumn(what))
    with Progress(*columns, console=Console(file=stream), transient=True) as bar:
        task = bar.add_task("solving", total=None)
        yield lambda done, total: bar.update(task, completed=done, total=total)


def report(solution: Solution, units: Units, stream: TextIO) -> None:
    """The worst load of every anchor and cable, what dropped, the base, what is past its allowable, and every warning."""
    systems: tuple[System, ...] = ("SI", "US") if units == "both" else (units,)
    scenario = solution.scenario
    stream.write(f"{scenario.title}\n{states(solution)}\n")
    solution = solution.for_crew()
    of = {"": "", "service": " in service cases", "FACTORED": ", FACTORED"}[solution.loads_are]

    def load(value: float) -> str:
        return _in_each(rounding.load, value, systems)

    def signed(value: float) -> str:
        return "none" if value < rounding.NO_FORCE else load(value)

    anchors = [
        [a.name, load(a.resultant.peak), load(a.horizontal.peak), signed(a.uplift.peak), *_place(a.resultant)]
        for a in solution.worst_anchors
    ]
    table(f"Greatest load of each anchor{of}", ["anchor", "pull", "horizontal", "uplift", "case", "wind from"], anchors, stream)
    cables = [
        [
            c.name,
            load(c.tension.peak),
            _in_each(rounding.capacity, c.strength, systems),
            rounding.factor(c.factor) if math.isfinite(c.factor) else "not judged",
            *_place(c.tension),
            f"{100 * c.initial:.0f} %" if math.isfinite(c.initial) else rounding.ABSENT,
            "drops" if c.slack_winds or solution.cables.slack[:, k].any() else "taut",
        ]
        for k, c in enumerate(solution.worst_cables)
    ]
    head = ["cable", "tension", "strength", "factor", "case", "wind from", "initial", "slack"]
    table(f"Greatest tension of each cable{of}", head, cables, stream)
    if any(math.isfinite(c.initial) for c in solution.worst_cables):
        stream.write(f"\nInitial: still-air tension over the rope's strength; usual {usual_words()}\n")
    feet = [
        [
            f.spar,
            "ground" if f.carried_by is None else f.carried_by,
            signed(f.down.peak),
            signed(f.lift.peak),
            load(f.sideways.peak),
            load(f.whole.peak),
            _in_each(rounding.moment, f.turning.peak, systems),
        ]
        for f in solution.worst_feet
    ]
    table(f"Feet{of}", ["spar", "on", "down", "up", "sideways", "resultant", "turning"], feet, stream)
    against(solution, systems, stream)
    lists = {
        "Warnings": solution.warnings,
        "Notes": [note for note in solution.notes if not any(note in warning for warning in solution.warnings)],
        "Not checked": solution.not_checked,
        "Cautions": solution.cautions,
    }
    listed(lists, stream)


def listed(lists: Mapping[str, Sequence[str]], stream: TextIO) -> None:
    """Lists under their titles, those with nothing in them left out."""
    for title, lines in lists.items():
        if lines:
            stream.write(f"\n{title}\n" + "".join(f"  - {line}\n" for line in lines))


def _in_each(how: rounding.Say, value: float, systems: Sequence[System]) -> str:
    return " / ".join(how(value, s) for s in systems) if math.isfinite(value) else rounding.ABSENT


def states(solution: Solution) -> str:
    """How the cases ended, in words."""
    count = {state: solution.state.count(state) for state in ("stable", "neutral", "unstable", "none")}
    words = ", ".join(f"{n} {state}{MEANING.get(state, '')}" for state, n in count.items() if n)
    check = solution.check
    again = f"solved again by another method: {check.resolve}"
    return f"{len(solution.state)} cases: {words}; loads and reactions balance to {check.balance:.0e}; {again}"


def _place(extreme: Extreme) -> tuple[str, str]:
    wind = "–" if math.isnan(extreme.peak_wind_from) else rounding.bearing(extreme.peak_wind_from)
    return extreme.peak_case, wind


def against(solution: Solution, systems: tuple[System, ...], stream: TextIO) -> None:
    """What is past, then of what is within every anchor and the nearest of each other quantity."""
    findings = solution.findings
    if not standing(solution):
        stream.write("\nNothing judged: nothing stands\n")
        return
    shown: list[Finding] = [f for f in findings if f.verdict == "past"]
    seen = {f.quantity for f in shown}
    for f in findings:
        if f.verdict == "within" and (f.quantity not in seen or f.quantity == "pull"):
            shown.append(f)
            seen.add(f.quantity)
    spoken = rounding.Tongue(systems)
    rows = [
        [f.thing, f.quantity, amount(f.demand, f.unit, spoken, True, rounding.load), amount(f.capacity, f.unit, spoken, False),
         f"{rounding.factor(f.factor)} {f.verdict}", f"{f.required:g}{' (default)' if f.default else ''}", f.case,
         "–" if math.isnan(f.wind_from) else rounding.bearing(f.wind_from), f.governs]
        for f in shown
    ]  # fmt: skip
    of_which = ", of the cases with an equilibrium" if any(solution.unsettled) else ""
    table(
        f"Against the allowables (all that is past, every anchor, and the nearest within{of_which})",
        ["thing", "quantity", "demand", "capacity", "factor", "required", "case", "wind from", "governs"],
        rows,
        stream,
    )
    unjudged = [f.thing for f in findings if f.verdict == "not judged"]
    if unjudged:
        stream.write(f"Not judged: {', '.join(unjudged)}\n")


def table(title: str, head: Row, rows: Sequence[Row], stream: TextIO) -> None:
    """One table, if it has rows."""
    if not rows:
        return
    if stream.isatty():
        from rich import box
        from rich.console import Console
        from rich.table import Table
        from rich.text import Text

        drawn = Table(title=Text(title), box=box.SIMPLE_HEAD, title_justify="left", title_style="bold")
        for name in head:
            drawn.add_column(Text(name))
        for row in rows:
            drawn.add_row(*(Text(cell) for cell in row))  # names may hold brackets: no markup
        Console(file=stream).print(drawn)
        return
    widths = [max(len(row[k]) for row in (head, *rows)) for k in range(len(head))]
    stream.write(f"\n{title}\n")
    for row in (head, *rows):
        stream.write("  " + "  ".join(cell.ljust(width) for cell, width in zip(row, widths, strict=True)).rstrip() + "\n")


def files(written: Sequence[Path], stream: TextIO) -> None:
    """Where the files are."""
    if not written:
        return
    stream.write(f"\nWritten to {written[0].parent}: {', '.join(path.name for path in written)}\n")
