"""The command line.  Nothing but click is imported before a command runs, so that help is at hand at once.

Exit status: 0 solved and within the allowables; 1 an internal fault; 2 the input is wrong; 3 something is past its allowable;
4 some case is unstable, none or neutral.
"""

from __future__ import annotations

import io
import os
import sys
from collections.abc import Callable, Sequence
from typing import Any

import click

from guys.errors import GuysError, ScenarioError
from guys.version import __version__

RANKED_BY = (
    *("pull", "uplift", "cable", "tension", "thrust", "sideways", "bending", "lean", "headroom", "margin", "use", "mass", "rope", "pieces"),
)
"""Measures by which layouts are ranked: the keys of `guys.studies.measures.MEASURES`."""

INTERNAL_FAULT, WRONG_INPUT = 1, 2
Command = Callable[..., Any]
TRACEBACK = "GUYS_TRACEBACK"
"""Environment variable: set to anything, an internal fault shows where it happened."""


ORDER = (
    *("new", "validate", "schema", "list"),
    *("solve", "plumb", "size", "setout", "compare", "search", "ring"),
    *("limit", "reserve", "lost", "matters", "stages", "raise"),
    *("field", "record"),
)
"""Commands as help lists them: the file, the structure and its site, what it takes, what goes on paper."""


class Commands(click.Group):
    """Commands in the order of use."""

    def list_commands(self, ctx: click.Context) -> list[str]:
        """Their names."""
        return list(ORDER)


def computing(files: str, out_required: bool = False, many: bool = False) -> Callable[[Command], Command]:
    """What every command that computes takes: the scenario FILE, or `many`, --out DIR for its `files`, --json and --units."""

    def decorate(command: Command) -> Command:
        systems = click.Choice(["SI", "US", "both"])
        units = click.option("--units", type=systems, default="SI", show_default=True, help="Units of what is shown.")
        as_json = click.option("--json", "as_json", is_flag=True, help="Print the result as JSON in place of the table.")
        out = click.option("--out", required=out_required, metavar="DIR", help=f"Directory for {files}.")
        file = click.argument("files", nargs=-1, required=True) if many else click.argument("file")
        return file(out(as_json(units(command))))

    return decorate


in_one_layout = click.option("--layout", metavar="NAME", help="One of the file's layouts; left out: as drawn.")
_CORES = os.cpu_count() or 1
side_by_side = click.option("--workers", type=click.IntRange(1), default=_CORES, metavar="N", help="Processes; left out: one a core.")


@click.group(cls=Commands, context_settings={"help_option_names": ["-h", "--help"]})
@click.version_option(__version__, prog_name="guys", message="%(prog)s %(version)s")
def commands() -> None:
    """Guyed masts, stayed booms and leaning pylons: cable tensions, base reaction, anchor loads, and the sheet a crew works from."""


@commands.command()
@click.argument("kind", type=click.Choice(["mast", "boom", "pylon"]))
def new(kind: str) -> None:
    """Print a commented starter: guys new mast > my.toml"""
    from guys.scenario import starters

    click.echo(starters.text(kind), nl=False)


@commands.command()
@click.argument("file")
def validate(file: str) -> None:
    """Report every fault of a scenario, or echo its main dimensions.

    Faults go to the standard error with file, line and key; dimensions are echoed in both unit systems, unusual values warned about.
    """
    from guys.loads.drag import words
    from guys.scenario import echo, layouts, read_scenario
    from guys.structure import build

    scenario = read_scenario(file)
    for line in (*echo.lines(scenario), *(f"note: {note}" for note in words.notes(build(scenario)))):
        click.echo(line)
    for warning in (*scenario.warnings, *layouts.warnings(scenario)):
        click.echo(f"warning: {warning}", err=True)


@commands.command()
@computing("result.json, anchors.csv, cables.csv and the sheet", out_required=True)
@click.option("--paper", type=click.Choice(["A3", "A4", "letter", "tabloid"]), default="A3", show_default=True, help="Paper of the sheet.")
@click.option("--look", metavar="BEARING", help='Bearing the elevation looks toward, such as "45 deg"; left out: the one that shows most.')
@in_one_layout
@click.option("--pictures", "with_pictures", is_flag=True, help="Draw tensions, spar forces, sway and anchor loads as well.")
def solve(file: str, out: str, as_json: bool, units: str, paper: str, look: str | None, layout: str | None, with_pictures: bool) -> int:
    """Solve a scenario; write the results and the sheet.

    Exit status: 0 within the allowables; 1 an internal fault; 2 the input is wrong; 3 something is past its allowable; 4 some case is
    unstable, neutral or without an equilibrium. With 3 and 4 every file is still written.
    """
    from guys.doors.solve import solve_command
    from guys.units import parse

    try:
        toward = None if look is None else parse(look, "angle")
    except GuysError as error:
        raise click.BadParameter(str(error), param_hint="--look") from error
    return solve_command(file, out, as_json, units, paper, toward, layout, with_pictures)  # type: ignore[arg-type]


@commands.command()
@computing("plumb.json and plumb.csv")
@in_one_layout
def plumb(file: str, out: str | None, as_json: bool, units: str, layout: str | None) -> int:
    """Find the initial tensions nearest those asked for that leave every spar as drawn.

    Exit status: 0 found; 3 one is more than half off what was asked for; 1 and 2 as ever.
    """
    from guys.doors.plumb import plumb_command

    return plumb_command(file, out, as_json, units, layout)  # type: ignore[arg-type]


@commands.command()
@computing("setout.json, .csv, .geojson, .kml, .dxf and the set-out sheet")
@click.option("--paper", type=click.Choice(["A3", "A4", "letter", "tabloid"]), default="A3", show_default=True, help="Paper of the sheet.")
@click.option("--as-built", "surveyed", metavar="FILE.csv", help="Pegs as surveyed: tell how far each is off, and solve again.")
@in_one_layout
def setout(file: str, out: str | None, as_json: bool, units: str, paper: str, surveyed: str | None, layout: str | None) -> int:
    """Set out the anchors: coordinates, bearings, distances and check distances, as sheet and files.

    With --as-built the exit status is that of the solution with the pegs as found.
    """
    from guys.doors.setout import setout_command

    return setout_command(file, out, as_json, units, paper, surveyed, layout)  # type: ignore[arg-type]


@commands.command(name="list")
@click.argument("kind", type=click.Choice(["ropes", "tubes", "parts", "materials", "holdfasts", "profiles"]))
@click.argument("words", nargs=-1)
@click.option("--json", "as_json", is_flag=True, help="Print the entries as JSON, in SI.")
@click.option("--units", type=click.Choice(["SI", "US", "both"]), default="SI", show_default=True, help="Units of the table.")
def list_(kind: str, words: tuple[str, ...], as_json: bool, units: str) -> int:
    """List what the catalogue holds, with sources; WORDS narrow it: guys list ropes 7x19

    What is from memory is marked so, and warned about when a scenario uses it.
    """
    from guys.doors.list import list_command

    return list_command(kind, words, as_json, units)  # type: ignore[arg-type]


@commands.command()
@computing("lost.json, lost.csv and the figure")
@click.option("--winds", is_flag=True, help="Find the wind still stood after every loss too; takes ten times as long.")
@in_one_layout
def lost(file: str, out: str | None, as_json: bool, units: str, winds: bool, layout: str | None) -> int:
    """Take every cable and every anchor away in turn: what stands, and what falls.

    Exit status: 0 all stands within the allowables; 3 something falls or passes its allowable when a cable or anchor is lost; 4 the
    structure does not stand with everything in place; 1 and 2 as ever.
    """
    from guys.doors.lost import lost_command

    return lost_command(file, out, as_json, units, layout, winds)  # type: ignore[arg-type]


@commands.command("raise")
@computing("raise.json, raise.csv and the figure", out_required=False)
@click.option("--paper", type=click.Choice(["A3", "A4", "letter", "tabloid"]), default="A3", show_default=True, help="Paper of the sheet.")
@click.option("--workers", type=click.IntRange(1), metavar="N", help="Processes; left out: one a core where they are started at no cost.")
def raise_(file: str, out: str | None, as_json: bool, units: str, paper: str, workers: int | None) -> int:
    """Raise a spar: every line, the gin pole and the hinge at every angle.

    The file's [raise] says how. Exit status: 0 within the allowables; 1 an internal fault; 2 the input is wrong; 3 something is past
    its allowable; 4 nothing holds the spar at some angle or in some wind. With 3 and 4 every file is still written.
    """
    from guys.doors.raising import raise_command

    return raise_command(file, workers, out, as_json, units, paper)  # type: ignore[arg-type]


@commands.command()
@computing("size.json and size.csv")
@in_one_layout
def size(file: str, out: str | None, as_json: bool, units: str, layout: str | None) -> int:
    """Size the holdfasts of the file for every anchor: mass, length, pattern, depth, torque, whichever of them is on hand.

    Exit status: 0 every anchor can be held; 3 none of the holdfasts can be made to hold some anchor; 4 some case has no stable
    equilibrium; 1 and 2 as ever.
    """
    from guys.doors.size import size_command

    return size_command(file, out, as_json, units, layout)  # type: ignore[arg-type]


@commands.command()
@computing("compare.json, compare.csv and the figure", many=True)
@click.option("--by", type=click.Choice(RANKED_BY), default="pull", show_default=True, help="The measure layouts are ranked by.")
@side_by_side
def compare(files: tuple[str, ...], out: str | None, as_json: bool, units: str, by: str, workers: int) -> int:
    """Compare every layout of one file or several: loads, factors, base, lean, margins, holdfasts, rope.

    Exit status by the layout ranked first: 0 within all that is judged; 3 past something; 4 none stands; 1 and 2 as ever.
    """
    from guys.doors.compare import compare_command

    return compare_command(files, by, workers, out, as_json, units)  # type: ignore[arg-type]


@commands.command()
@computing("matters.json, matters.csv and the figure")
@in_one_layout
def matters(file: str, out: str | None, as_json: bool, units: str, layout: str | None) -> int:
    """Vary what is only roughly known: what moves the worst anchor load and the reserve most.

    Exit status: 0 all within the allowables; 3 something falls or passes its allowable at an end of a range; 4 the structure does not
    stand as drawn; 1 and 2 as ever.
    """
    from guys.doors.matters import matters_command

    return matters_command(file, out, as_json, units, layout)  # type: ignore[arg-type]


@commands.command()
@computing("limit.json, limit.csv and the polar figure")
@in_one_layout
def limit(file: str, out: str | None, as_json: bool, units: str, layout: str | None) -> int:
    """Find the wind from every direction at which something passes its allowable or equilibrium is lost.

    Exit status: 0 no limit is below the scenario's own wind; 1 an internal fault; 2 the input is wrong; 3 something passes its allowable
    below the scenario's wind; 4 equilibrium is lost below it. With 3 and 4 every file is still written.
    """
    from guys.doors.limit import limit_command

    return limit_command(file, out, as_json, units, layout)  # type: ignore[arg-type]


@commands.command()
@computing("reserve.json, reserve.csv, paths.csv and the figure")
def reserve(file: str, out: str | None, as_json: bool, units: str) -> int:
    """Find how many times its wind, and all its loads, every case takes before equilibrium is lost, and in which motion.

    Exit status: 0 every case has a stable equilibrium, conditionally or not; 4 some case is unstable, neutral or without an equilibrium;
    1 and 2 as ever. With 4 every file is still written.
    """
    from guys.doors.reserve import reserve_command

    return reserve_command(file, out, as_json, units)  # type: ignore[arg-type]


@commands.command()
@computing("field.json, field.csv, lengths.csv, readings.csv and the pages")
@click.option("--paper", type=click.Choice(["A3", "A4", "letter", "tabloid"]), default="A4", show_default=True, help="Paper of the pages.")
@click.option("--measured", "readings", metavar="FILE.csv", help="Tensions as read: tell what they are, what to change, and solve again.")
@in_one_layout
def field(
    file: str, out: str | None, as_json: bool, units: str, paper: str, readings: str | None, layout: str | None
) -> int:
    """Pages for the crew: rope to cut, tensions by temperature, how to read them without a gauge, what to accept and prove.

    Exit status: 0; 4 the structure does not stand in still air; 1 and 2 as ever. With --measured that of the solution as found, and 3
    where a tension is off by more than is accepted.
    """
    from guys.doors.field import field_command

    return field_command(file, out, as_json, units, paper, layout, readings)  # type: ignore[arg-type]


@commands.command()
@computing("stages.json, stages.csv and the figure")
@in_one_layout
def stages(file: str, out: str | None, as_json: bool, units: str, layout: str | None) -> int:
    """Solve every stage of the building up: what stands, and the wind each may see.

    Exit status: 0 every stage is within the allowables in its wind; 3 something is past its allowable at some stage; 4 some stage falls;
    1 and 2 as ever.
    """
    from guys.doors.stages import stages_command

    return stages_command(file, out, as_json, units, layout)  # type: ignore[arg-type]


@commands.command()
@computing("record.html, record.json and result.json", out_required=True)
@in_one_layout
@click.option("--pdf", "with_pdf", is_flag=True, help='Also record.pdf; needs the extra "pdf".')
def record(file: str, out: str, as_json: bool, units: str, layout: str | None, with_pdf: bool) -> int:
    """Write the calculation record: one page that a checking engineer can follow, repeat and sign.

    Exit status as of solve; with 3 and 4 the record is written and says what it knows and why it stops.
    """
    from guys.doors.record import record_command

    return record_command(file, out, as_json, units, with_pdf, layout)  # type: ignore[arg-type]


@commands.command()
@computing("search.json, search.csv, layouts.toml and the figures")
@in_one_layout
@side_by_side
def search(file: str, out: str | None, as_json: bool, units: str, layout: str | None, workers: int) -> int:
    """Search for the best places of anchors within what the file's [search] and [site] allow.

    Exit status: 0 found; 3 no layout tried holds every rule, or what was found is past something in other winds; 4 none stands; 1 and 2
    as ever. Interrupted, it ends with the best so far.
    """
    from guys.doors.search import search_command

    return search_command(file, workers, out, as_json, units, layout)  # type: ignore[arg-type]


def _ways(_: click.Context, __: click.Parameter, value: str) -> tuple[int, ...]:
    from guys.scenario.search import FEWEST, MOST

    numbers = [part.strip() for part in value.split(",")]
    if not all(n.isdigit() and FEWEST <= int(n) <= MOST for n in numbers):
        raise click.BadParameter(f"{value}: give numbers from {FEWEST} to {MOST}, such as 3,4")
    return tuple(dict.fromkeys(int(n) for n in numbers))


@commands.command()
@computing("ring.json, ring.csv and the curves")
@in_one_layout
@click.option("--ways", default="3,4", show_default=True, callback=_ways, metavar="N,N", help="Numbers of anchors, evenly spaced.")
@click.option("--radius", nargs=2, metavar="FROM TO", help='Least and greatest radius, such as "6 m" "18 m".')
@click.option("--steps", type=click.IntRange(2, 60), default=9, show_default=True, help="Radii from the one to the other.")
@side_by_side
def ring(
    file: str,
    out: str | None,
    as_json: bool,
    units: str,
    layout: str | None,
    ways: tuple[int, ...],
    radius: tuple[str, str] | None,
    steps: int,
    workers: int,
) -> int:
    """Chart one mast on rings of anchors over radius and number of ways: tension, uplift, thrust, lean, rope, ground.

    Exit status: 0; 4 no ring stands; 1 and 2 as ever.
    """
    from guys.doors.ring import ring_command
    from guys.units import parse

    try:
        far = None if radius is None else (parse(radius[0], "length"), parse(radius[1], "length"))
    except GuysError as error:
        raise click.BadParameter(str(error), param_hint="--radius") from error
    if far is not None and not 0 < far[0] < far[1]:
        raise click.BadParameter("the first is not less than the second, or not more than zero", param_hint="--radius")
    return ring_command(file, ways, far, steps, workers, out, as_json, units, layout)  # type: ignore[arg-type]


@commands.command()
def schema() -> None:
    """Print the JSON Schema of a scenario, for editors."""
    import json

    from guys.scenario.schema import scenario_schema

    click.echo(json.dumps(scenario_schema(), indent=2))


def run(arguments: Sequence[str] | None = None) -> int:
    """Run a command and return its exit status; every fault is told in words, none as a traceback."""
    try:
        status = commands.main(arguments, prog_name="guys", standalone_mode=False)
        sys.stdout.flush()
    except click.ClickException as error:
        error.show()
        return error.exit_code
    except click.Abort:
        click.echo("interrupted; nothing half-written is left", err=True)
        return INTERNAL_FAULT
    except GuysError as error:
        _tell(error)
        return error.exit_status
    except OSError as error:
        from guys.exchange.files import reason

        click.echo(f"guys: what is printed cannot be written: {reason(error).split(';')[0]}", err=True)
        return INTERNAL_FAULT
    except Exception as error:
        if TRACEBACK in os.environ:
            raise
        click.echo(f"guys: internal fault: {type(error).__name__}: {error}", err=True)
        click.echo(f"This is a fault of the program, not of the structure. Set {TRACEBACK}=1 to see where it happened.", err=True)
        return INTERNAL_FAULT
    return status if isinstance(status, int) else 0


def _tell(error: GuysError) -> None:
    if not isinstance(error, ScenarioError):
        click.echo(f"guys: {error}", err=True)
        return
    for fault in error.faults:
        click.echo(str(fault), err=True)
    count = len(error.faults)
    click.echo(f"{count} fault{'s' if count > 1 else ''}; nothing was written", err=True)


def main() -> None:
    """The `guys` command."""
    _readied_streams()
    sys.exit(run())


def _readied_streams() -> None:
    """A closed stream swallows what is printed; one of a poorer alphabet (a degree sign in ASCII) gets a question mark."""
    for name in ("stdout", "stderr"):
        stream = getattr(sys, name)
        if stream is None:
            setattr(sys, name, io.StringIO())
        elif isinstance(stream, io.TextIOWrapper):
            stream.reconfigure(errors="replace")
