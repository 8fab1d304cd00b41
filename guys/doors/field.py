"""`guys field`: what a crew cuts, sets, reads and accepts."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TextIO

from guys import terminal
from guys.checks.alarms import CAUTIONS
from guys.doors.common import exit_status, in_layout, pictures, store
from guys.drawing import field_words as words
from guys.drawing import rounding
from guys.drawing.field import draw_field
from guys.drawing.measured import ALL_AT_ONCE, change_words, draw_measured, past_words, turns_words
from guys.drawing.rounding import Units, tongue
from guys.drawing.wind_card import draw_card, measured_as, rows_of
from guys.drawing.wind_card import words as card_words
from guys.exchange import field as exchange
from guys.exchange import measured as told
from guys.scenario import read_scenario
from guys.scenario.readings import read_readings
from guys.sounding import TIMED, Way
from guys.studies.field import Field, acceptance, cycles, field, proof_factor
from guys.studies.measured import Measured, measured


def field_command(
    file: str,
    out: str | None,
    as_json: bool,
    units: Units = "SI",
    paper: str = "A4",
    layout: str | None = None,
    readings: str | None = None,
) -> int:
    """The crew's pages; files go to the directory `out` where one is given; `readings`: a file of tensions as read, to be told of.

    Raises `GuysError` for what is the user's to mend; nothing is written then.
    """
    scenario = in_layout(read_scenario(file), layout)
    taken = None if readings is None else read_readings(readings, scenario)
    with terminal.progress(sys.stderr) as tick:
        plan = field(scenario, tick)
        found = None if taken is None else measured(plan, taken, tick)
    written = [] if out is None else store(Path(out), _files(plan, found, paper, units))
    if as_json:
        sys.stdout.write(exchange.as_text(plan) if found is None else told.as_text(found))
    else:
        report(plan, units, sys.stdout) if found is None else report_measured(found, units, sys.stdout)
        terminal.files(written, sys.stdout)
    return status(plan, found)


def status(plan: Field, found: Measured | None) -> int:
    """The exit status: with readings that of the solution as found, and at least 3 where a tension is off by more than is accepted."""
    if found is not None:
        return exit_status(found.after) or (3 if found.off else 0)
    failed = plan.solution.failed or (plan.limits is not None and plan.limits.failed)
    return 1 if failed else 4 if plan.still.reason[0] is not None else 0


def _files(plan: Field, found: Measured | None, paper: str, units: Units) -> dict[str, bytes]:
    contents = {
        "field.json": exchange.as_text(plan),
        "field.csv": exchange.as_table(plan),
        "lengths.csv": exchange.lengths_table(plan),
        "readings.csv": exchange.form(plan),
    }
    figures = draw_field(plan, paper, units)
    if plan.limits is not None:
        figures["field-6-wind-card"] = draw_card(plan.limits, paper, units)
    if found is not None:
        contents |= {"measured.json": told.as_text(found), "measured.csv": told.as_table(found)}
        figures["field-5-as-read"] = draw_measured(found, paper, units)
    drawn = [pictures(stem, figure, plan.scenario.title) for stem, figure in figures.items()]
    return {name: text.encode() for name, text in contents.items()} | {name: b for each in drawn for name, b in each.items()}


def report_measured(found: Measured, units: Units, stream: TextIO) -> None:
    """What every tension is, what to change, and the loads as found."""
    say = tongue(units)
    stream.write(f"{found.plan.scenario.title}\n")
    rows = []
    for k, cable in enumerate(found.plan.scenario.cable):
        if found.read[k] != found.read[k]:
            rows.append([cable.name, "not read", *["–"] * 5, ""])
            continue
        read, wanted, fits = (say.say(rounding.plain_force, float(v[k])) for v in (found.read, found.wanted, found.found))
        error, near = say.say(rounding.force, float(found.error[k])), say.say(rounding.fine_length, float(found.change_error[k]))
        change = ", ".join(change_words(found, k, say))
        rows.append([cable.name, f"{read} ± {error}", wanted, fits, change, f"± {near}", turns_words(found, k), found.verdict(k)])
    title = f"Tensions read at {say.say(rounding.temperature, found.temperature)}"
    terminal.table(title, ["cable", "read", "wanted", "balances", "change", "its error", "turns", ""], rows, stream)
    pulls = [
        [a.name, say.say(rounding.load, a.resultant.peak), say.say(rounding.load, b.resultant.peak)]
        for a, b in zip(found.plan.solution.worst_anchors, found.after.worst_anchors, strict=True)
    ]
    terminal.table("Greatest pull of each anchor", ["anchor", "as planned", "as found"], pulls, stream)
    lists = {
        "As found": past_words(found),
        "Warnings": [*found.warnings, *found.after.warnings],
        "Notes": [ALL_AT_ONCE, *words.assumed(found.plan, say)],
        "Cautions": CAUTIONS,
    }
    terminal.listed(lists, stream)


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
    card = [] if found.limits is None else card_words(found.limits, say)
    if found.limits is not None:
        winds = [[name, say.say(rounding.speed_below, speed)] for name, speed in rows_of(found.limits)]
        terminal.table(f"Wind to act on, {measured_as(found.limits, say)}", ["act at", "wind"], winds, stream)
    lists = {
        "Wind card": card,
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
