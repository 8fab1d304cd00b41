"""Demand and capacity of everything judged, what the answer hangs on, the hand check, and what is left to others."""

from __future__ import annotations

import math

from guys.drawing import rounding
from guys.drawing.box import amount
from guys.drawing.rounding import ABSENT, System, Tongue
from guys.record.blocks import Blanks, Block, Cell, Items, Piece, Section, Table, Verbatim, text
from guys.record.every_case import AXES
from guys.record.numbers import factor, metres, newton_metres, newtons, plain, tiny, turning
from guys.record.source import Source
from guys.results import Finding
from guys.scenario import patches

CHANGE = 0.05
"""Per cent below which a change reads as none."""


def findings(source: Source) -> Section:
    """One row for each thing judged, the nearest to its allowable first."""
    rows = tuple(_finding(source, k, f) for k, f in enumerate(source.solution.findings))
    heads = ("thing", "what", "demand", "capacity", "factor", "asked for", "verdict", "in", "how, by what, and source of the capacity")
    note = "factor: capacity over demand, or what is allowed over what is found; the governing case of each over all cases and winds"
    blocks: list[Block] = [Table("Demand and capacity", heads, rows, 2, note)] if rows else [text("There is nothing to judge.")]
    unjudged = any(f.verdict == "not judged" for f in source.solution.findings)
    words = " Not judged: no capacity is known, or nothing stands; it is not within." if unjudged else ""
    return Section("findings", "Demand and capacity", (text(f"Within and past are of the allowable asked for.{words}"), *blocks))


def _finding(source: Source, k: int, f: Finding) -> tuple[Cell, ...]:
    say, at = source.say, f"result.findings.{k}"
    demand = say.number(f"{at}.demand", lambda v, system: amount(v, f.unit, Tongue((system,)), True))
    capacity = say.number(f"{at}.capacity", lambda v, system: amount(v, f.unit, Tongue((system,)), False))
    asked = say.number(f"{at}.factor_required", plain)
    verdict: Cell = f.verdict
    if not math.isnan(f.margin):
        verdict = (f"{f.verdict}, margin ", say.number(f"{at}.margin_m", metres))
    where: Cell = f.case or ABSENT
    if say.at(f"{at}.wind_from_deg") is not None:
        where = (f"{f.case}, ", say.bearing(f"{at}.wind_from_deg"))
    how = "; ".join(part for part in (f.governs, f.why, f.source) if part)
    default = (asked, " default") if f.default else asked
    return (f.thing, f.quantity, demand, capacity, say.number(f"{at}.factor", factor), default, verdict, where, how)


def sensitivity(source: Source) -> Section:
    """What the answer hangs on: initial tensions, the mesh, and the position the loads are worked out on."""
    variants = source.found.variants
    lacking = [f"{v.words}: not solved, {v.lacking}" for v in variants if v.lacking]
    shown = [k for k, v in enumerate(variants) if not v.lacking]
    heads = ("of", "what", *(variants[k].words for k in shown))
    rows: list[tuple[Cell, ...]] = []
    scenario = source.scenario
    groups = (
        ("cables", "tension_N", "tension", [c.name for c in scenario.cable], rounding.load),
        ("anchors", "pull_N", "pull", [a.name for a in scenario.anchor], rounding.load),
        ("spars", "down_N", "push on its foot", [s.name for s in scenario.spar], rounding.load),
        ("spars", "turning_Nm", "moment on its foot", [s.name for s in scenario.spar], turning),
        ("spars", "head_lean_deg", "lean of its head", [s.name for s in scenario.spar], lambda v, _: rounding.small_angle(math.radians(v))),
    )
    for group, key, what, names, how in groups:
        rows += [(name, what, *(_changed(source, f"{group}.{n}.{key}", k, how) for k in shown)) for n, name in enumerate(names)]
    total = str(len(source.solution.case))
    rows.append(("cases that stand", f"of {total}", *(source.say.number(f"variants.{k}.standing", _count) for k in shown)))
    words = (
        "The greatest values over the listed cases, solved again with initial tensions a tenth lower and higher (only those that the "
        "scenario gives), with twice the elements in every span, and with the loads of every case worked out once more on its own "
        "deformed position. Per cent: change from the run. What else matters, drag, stiffness, anchors that move, is solved by "
        "guys matters; a cable or anchor lost, by guys lost."
    )
    blocks: list[Block] = [text(words), Table("Sensitivity: greatest values over the listed cases", heads, tuple(rows), 2)]
    if lacking:
        blocks.append(Items(tuple(lacking)))
    return Section("sensitivity", "Sensitivity", tuple(blocks))


def _count(value: float, _: System) -> str:
    return f"{value:.0f}"


def _changed(source: Source, key: str, k: int, how: rounding.Say) -> Cell:
    """A value, and by how much it differs from that of the run."""
    say = source.say
    number = say.number(f"variants.{k}.{key}", how)
    first, now = say.at(f"variants.0.{key}"), say.at(f"variants.{k}.{key}")
    if k == 0 or not first or now is None or number.first == say.number(f"variants.0.{key}", how).first == "0 N":
        return number
    per_cent = 100.0 * (now / first - 1.0)
    change = f"{per_cent:+.1f} %".replace("-", "−") if abs(per_cent) >= CHANGE else "±0.0 %"
    return number, f" {change}"


def hand_check(source: Source) -> Section:
    """The whole structure cut free in the governing case, written out so that it closes."""
    body, say = source.found.free_body, source.say
    if body is None:
        return Section("hand-check", "Hand check of the governing case", (text("No case stands, so there is no free body to draw."),))
    mean = ", under its mean wind, since gusts come patch by patch" if patches.of(source.scenario) else ""
    where = (f"Case {body.case}, wind from ", source.wind("free_body.wind_from_deg"), f", the case of the greatest use of a cable{mean}. ")
    how = text(
        *where, "The whole structure is cut free of the ground: every load with the point it acts at on the deformed structure, and what "
        "anchors and ground give back. Forces sum to nothing; so do moments r × F + M about the foot of the first spar at ",
        *(piece for axis in range(3) for piece in (say.number(f"free_body.about_m.{axis}", metres), ", " if axis < 2 else ".")),
    )  # fmt: skip
    names = [*body.what, "net"]
    forces = [
        (what, *(say.number(_row(n, "force_N", axis, body.what), newtons) for axis in range(3)),
         *(say.number(f"free_body.forces.{n}.at_m.{axis}", metres) if n < len(body.what) else ABSENT for axis in range(3)))
        for n, what in enumerate(names)
    ]  # fmt: skip
    moments = [
        (what, *(say.number(_row(n, "moment_Nm", axis, body.what), newton_metres) for axis in range(3)),
         *(say.number(f"free_body.forces.{n}.couple_Nm.{axis}", newton_metres) if n < len(body.what) else ABSENT for axis in range(3)))
        for n, what in enumerate(names)
    ]  # fmt: skip
    heads = ("force", *(f"force {a}" for a in AXES), *(f"acts at {a}" for a in AXES))
    turns = ("force", *(f"moment about {a}" for a in AXES), *(f"of which couple {a}" for a in AXES))
    closes = text(
        "With all digits it closes to ", *_three(source, "free_body.net_force_N"), " N and ", *_three(source, "free_body.net_moment_Nm"),
        " N m, east, north and up; the reference force of the case is ", say.number("free_body.reference_force_N", newtons), ".",
    )  # fmt: skip
    note = "couple: the moment of a fixed base on the structure, or what the bend of a spar leaves its loads short of parallel"
    return Section("hand-check", "Hand check of the governing case", (
        how,
        Table("Free body: forces and where they act", heads, tuple(forces), totals=1),
        Table("Free body: moments about the foot of the first spar", turns, tuple(moments), note=note, totals=1),
        closes,
    ))  # fmt: skip


def _three(source: Source, key: str) -> tuple[Piece, ...]:
    return tuple(piece for axis in range(3) for piece in (source.say.number(f"{key}.{axis}", tiny), ", " if axis < 2 else ""))


def _row(n: int, key: str, axis: int, what: tuple[str, ...]) -> str:
    return f"free_body.forces.{n}.{key}.{axis}" if n < len(what) else f"free_body.net_{key}.{axis}"


def left(source: Source) -> Section:
    """Warnings, what was not checked, and the cautions of the trade."""
    solution = source.solution
    blocks: list[Block] = [text("There are no warnings.")]
    if solution.warnings:
        blocks = [text("Warnings:", strong=True), Items(solution.warnings)]
    blocks += [text("Not checked:", strong=True), Items(solution.not_checked), text("Cautions:", strong=True), Items(solution.cautions)]
    return Section("left", "Warnings, what was not checked, and cautions", tuple(blocks))


def signatures() -> Section:
    """Places for those who answer for it."""
    rows = ("modelled by", "checked by", "licensed engineer", "accepted on site by")
    return Section("signatures", "Names and signatures", (Blanks(rows, ("", "name", "date", "signature")),))


def scenario_text(source: Source) -> Section:
    """The scenario as it was read."""
    scenario = source.scenario
    said = text(f"As read; the SHA-256 of the file's bytes is {scenario.sha256}.")
    shown: Block = Verbatim(scenario.text, "Text of the scenario") if scenario.text else text("It was not read from a text.")
    return Section("scenario", "The scenario", (said, shown))
