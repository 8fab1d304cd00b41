"""The page of tensions as read: what each is, what to let out or take in at each turnbuckle, and the loads as found."""

from __future__ import annotations

from typing import TYPE_CHECKING

from guys.drawing.field import Part, draw_parts
from guys.drawing.field_words import assumed
from guys.drawing.rounding import ABSENT, Tongue, Units, factor, fine_length, force, plain_force, temperature, tongue
from guys.drawing.table import Column, Grid, Row
from guys.studies.measured import Measured

if TYPE_CHECKING:
    from matplotlib.figure import Figure

EIGHTH = 8
"""Turns are told to an eighth."""
ALL_AT_ONCE = (
    "The changes go together: with all of them made the tensions are those wanted, at any temperature. In small steps, opposite cables "
    "together; then read again. A change smaller than its error is no more than the readings can tell."
)


def draw_measured(found: Measured, paper: str, units: Units) -> Figure:
    """The page."""
    say = tongue(units)
    heads = (
        Column("cable"), Column("read", "right"), Column("wanted", "right"), Column("balances", "right"), Column("change"),
        Column("its error", "right"), Column("turns", "right"), Column(""),
    )  # fmt: skip
    rows: list[Row] = [[tuple(cell) for cell in _row(found, k, say)] for k in range(len(found.read))]
    pulls: list[Row] = [
        [(a.name,), say.each(force, a.resultant.peak), say.each(force, b.resultant.peak)]
        for a, b in zip(found.plan.solution.worst_anchors, found.after.worst_anchors, strict=True)
    ]
    loads = Grid((Column("anchor"), Column("greatest pull\nas planned", "right"), Column("as found", "right")), tuple(pulls))
    parts = [
        Part(f"Tensions at the lower end, read at {say.say(temperature, found.temperature)}", Grid(heads, tuple(rows)), [ALL_AT_ONCE]),
        Part("Loads as found", loads, past_words(found)),
    ]
    below = [*(f"Warning: {w}" for w in (*found.warnings, *found.after.warnings)), *assumed(found.plan, say)]
    return draw_parts(found.plan.scenario.title, paper, "tensions as read", parts, below)


def _row(found: Measured, k: int, say: Tongue) -> list[tuple[str, ...]]:
    name = found.plan.scenario.cable[k].name
    if found.read[k] != found.read[k]:
        return [(name,), ("not read",), *[(ABSENT,)] * 5, ("",)]
    error = say.each(force, float(found.error[k]))
    read = tuple(f"{a} ± {b}" for a, b in zip(say.each(plain_force, float(found.read[k])), error, strict=True))
    return [
        (name,), read, say.each(plain_force, float(found.wanted[k])), say.each(plain_force, float(found.found[k])),
        change_words(found, k, say), tuple(f"± {w}" for w in say.each(fine_length, float(found.change_error[k]))),
        (turns_words(found, k),), (found.verdict(k),),
    ]  # fmt: skip


def change_words(found: Measured, k: int, say: Tongue) -> tuple[str, ...]:
    """What to do at a turnbuckle."""
    do = "let out" if found.change[k] > 0 else "take in"
    return tuple(f"{do} {words}" for words in say.each(fine_length, abs(float(found.change[k]))))


def turns_words(found: Measured, k: int) -> str:
    """Turns of a turnbuckle's body, to an eighth."""
    turns = abs(float(found.turns[k]))
    return ABSENT if turns != turns else f"{round(turns * EIGHTH) / EIGHTH:g}"


def past_words(found: Measured) -> list[str]:
    """What is past its allowable as found."""
    past = [f"Past as found: {f.thing}, {f.quantity}, factor {factor(f.factor)} of {f.required:g}" for f in found.after.past]
    return past or ["Nothing judged is past its allowable as found."]
