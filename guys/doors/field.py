"""`guys field`: what a crew cuts, sets, reads and accepts."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TextIO

from guys import terminal
from guys.checks.alarms import CAUTIONS
from guys.doors.common import in_layout, pictures, store
from guys.drawing import field_words as words
from guys.drawing import rounding
from guys.drawing.field import draw_field
from guys.drawing.rounding import Units, tongue
from guys.exchange import field as exchange
from guys.scenario import read_scenario
from guys.sounding import TIMED, Way
from guys.studies.field import Field, acceptance, cycles, field, proof_factor


def field_command(
    file: str, out: str | None, as_json: bool, units: Units = "SI", paper: str = "A4", layout: str | None = None
) -> int:
    """The crew's pages; files go to the directory `out` where one is given.

    Raises `GuysError` for what is the user's to mend; nothing is written then.
    """
    scenario = in_layout(read_scenario(file), layout)
    with terminal.progress(sys.stderr) as tick:
        found = field(scenario, tick)
    written = [] if out is None else store(Path(out), _files(found, paper, units))
    if as_json:
        sys.stdout.write(exchange.as_text(found))
    else:
        report(found, units, sys.stdout)
        terminal.files(written, sys.stdout)
    return 1 if found.solution.failed else 4 if found.still.reason[0] is not None else 0


def _files(found: Field, paper: str, units: Units) -> dict[str, bytes]:
    contents = {
        "field.json": exchange.as_text(found),
        "field.csv": exchange.as_table(found),
        "lengths.csv": exchange.lengths_table(found),
        "readings.csv": exchange.form(found),
    }
    drawn = [pictures(stem, figure, found.scenario.title) for stem, figure in draw_field(found, paper, units).items()]
    return {name: text.encode() for name, text in contents.items()} | {name: b for each in drawn for name, b in each.items()}


def report(found: Field, units: Units, stream: TextIO) -> None:
    """Rope to cut, tensions by temperature, readings as set, what is accepted, proof loads."""
    say = tongue(units)
    stream.write(f"{found.scenario.title}\n")
    names = [cable.name for cable in found.scenario.cable]
    cut = found.cut
    lengths = [
        [name, *(say.say(rounding.fine_length, float(v[k])) for v in (cut.chord, cut.sag, cut.stretch, cut.unstressed, cut.rope))]
        for k, name in enumerate(names)
    ]
    terminal.table("Rope to cut, turnbuckles half out", ["cable", "chord", "sag", "stretch", "unstressed", "rope to cut"], lengths, stream)
    heads = [words.at_temperature(found, t, say) for t in range(len(found.still.temperature))]
    tensions = [[name, *(_tension(found, t, k, units) for t in range(len(heads)))] for k, name in enumerate(names)]
    terminal.table("Tension to set by temperature, as set first", ["cable", *heads], tensions, stream)
    ways: tuple[Way, ...] = ("pulse", "swing", "sag", "sight")
    reads = [[name, *(_read(found, way, k, units) for way in ways)] for k, name in enumerate(names)]
    count = cycles(found.scenario.field, "pulse")
    title = f"Readings at {heads[0]}, and how near they tell the tension"
    terminal.table(title, ["cable", f"{count} returns", f"{count} swings", "sag", "sight"], reads, stream)
    plumb = [
        [f"{p.of} at {say.say(rounding.fine_length, p.at)}", say.say(rounding.fine_length, p.off), rounding.small_angle(p.twist)]
        for p in acceptance(found.scenario)
    ]
    terminal.table("Off its line and twisted at most", ["at", "off", "twist"], plumb, stream)
    proof = [[a.name, say.say(rounding.force, float(p))] for a, p in zip(found.scenario.anchor, found.proof, strict=True)]
    terminal.table(f"Proof loads, {proof_factor(found.scenario):g} times the greatest pull", ["anchor", "proof load"], proof, stream)
    lists = {
        "Order of tensioning": words.setting_words(found, say),
        "Warnings": found.warnings,
        "Notes": [*words.assumed(found, say), *words.accepted_words(found)],
        "Cautions": CAUTIONS,
    }
    terminal.listed(lists, stream)


def _tension(found: Field, t: int, k: int, units: Units) -> str:
    if found.still.reason[t] is not None:
        return "falls"
    return "slack" if found.still.slack[t, k] else tongue(units).say(rounding.plain_force, float(found.still.tension[t, k]))


def _read(found: Field, way: Way, k: int, units: Units) -> str:
    how = rounding.seconds if way in TIMED else rounding.fine_length
    read, error = float(found.readings[way][0, k]), float(found.errors[way][k])
    return f"{tongue(units).say(how, read)} {rounding.share(error)}" if read == read else rounding.ABSENT
