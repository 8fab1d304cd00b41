"""The question, the structure as it is modelled, drawn and in tables."""

from __future__ import annotations

import math

from guys.checks.chains import links_of
from guys.drawing import rounding
from guys.drawing.install import install_words
from guys.drawing.key import lettered_sections, numbered_fittings
from guys.drawing.rounding import ABSENT
from guys.drawing.strip import state_summary
from guys.record import figures
from guys.record.blocks import Block, Cell, Number, Section, Table, text
from guys.record.numbers import (
    bending,
    factor,
    give_words,
    mass_per_metre,
    metres,
    millimetres,
    newtons,
    plain,
    stiffness,
)
from guys.record.source import Source
from guys.scenario import AnchorPoint, Fitting, HeelFoot, SparPoint
from guys.scenario import Section as Stretch
from guys.scenario.parts import Link
from guys.sections import properties


def question(source: Source) -> Section:
    """What was asked, and the answer in brief."""
    scenario, solution = source.scenario, source.solution
    spars = " and ".join(f"{s.name} ({s.base})" for s in scenario.spar)
    asked = (
        f"{scenario.title}: {spars}, held by {_count(len(scenario.cable), 'cable')} to {_count(len(scenario.anchor), 'anchor')}. "
        f"What does it put into every cable, anchor and base in still air and in {_count(len(scenario.case), 'load case')}"
        f"{_winds(source)}, does it stand, and is it within the allowables of the scenario?"
    )
    blocks: list[Block] = [text(asked)]
    if scenario.note:
        blocks.append(text(f"Note of the scenario: {' '.join(scenario.note.split())}"))
    blocks.append(text(f"It is {state_summary(solution)}, still air among them.", strong=True))
    blocks.append(text(*_verdict(source), strong=True))
    if any(solution.unsettled):
        stops = "Cases without a stable equilibrium have no loads; what is told below is of the others, and each case says why it stops."
        blocks.append(text(stops, strong=True))
    return Section("question", "The question, and the answer in brief", tuple(blocks))


def _count(number: int, noun: str) -> str:
    return f"{number} {noun}{'' if number == 1 else 's'}"


def _winds(source: Source) -> str:
    wind = source.scenario.wind
    return "" if wind is None else f", wind from {_count(len(wind.directions), 'listed bearing')} and from the full circle between them"


def _verdict(source: Source) -> tuple[str | Number, ...]:
    """The finding nearest to, or farthest past, its allowable; findings stand in that order."""
    findings = source.solution.findings
    judged = [k for k, f in enumerate(findings) if f.verdict != "not judged"]
    lacking = len(findings) - len(judged)
    unjudged = f" {lacking} of {_count(len(findings), 'thing')} to judge could not be judged." if lacking else ""
    if not judged:
        return (f"Nothing is judged.{unjudged}",)
    first = findings[judged[0]]
    past = len(source.solution.past)
    count = f"{past} of {len(judged)} judged are past" if past else f"All {len(judged)} judged are within"
    words = f"{count} the allowable; the one that governs is {first.quantity} of {first.thing}, {first.verdict}, with a factor of "
    needed = f" where {first.required:g} is asked for{', by default' if first.default else ''}.{unjudged}"
    return words, source.say.number(f"result.findings.{judged[0]}.factor", factor), needed


def structure(source: Source) -> Section:
    """Figures and tables of what was modelled."""
    tables: tuple[Table, ...] = (
        _spars(source), *_sections(source), _fittings(source), _anchors(source), _cables(source), _ropes(source), _links(source),
        _holdfasts(source),
    )  # fmt: skip
    blocks: list[Block] = [*figures.drawn(source)]
    return Section("structure", "The structure as modelled", (*blocks, *(t for t in tables if t.rows)))


def _bearing(source: Source, radians: float) -> Number:
    return source.say.given(radians, lambda value, _: rounding.bearing(value))


def _spars(source: Source) -> Table:
    say = source.say
    rows = []
    for spar in source.scenario.spar:
        foot: Cell
        if isinstance(spar.foot, HeelFoot):
            foot = (f"on {spar.foot.spar} at ", say.given(spar.foot.at, metres))
        else:
            foot = ("ground, level ", say.given(spar.foot.level, metres))
        base: Cell = f"{spar.base}, rigid" if spar.rigid else spar.base
        if spar.plate is not None:
            base = (f"{base}, plate ", say.given(spar.plate.length, millimetres), " × ", say.given(spar.plate.width, millimetres))
        leans: Cell = ABSENT if not spar.lean else (f"{math.degrees(spar.lean):g}° toward ", _bearing(source, spar.toward))
        rows.append((spar.name, foot, base, say.given(spar.length, metres), leans))
    return Table("Spars", ("spar", "foot", "base", "length", "leans"), tuple(rows))


def _sections(source: Source) -> list[Table]:
    """Dimensions, then what follows from them; alike sections of one spar in one row."""
    say, scenario = source.say, source.scenario
    made, stiff, seen = [], [], set()
    for letter, spar, n, section in lettered_sections(source.solution):
        if letter in seen:
            continue
        seen.add(letter)
        count = sum(repr(other) == repr(section) for other in spar.section)
        p = properties(section, dict(scenario.material), scenario.ice)
        of = f"{spar.name}, from section {n + 1}" if len(spar.section) > 1 else spar.name
        drag = say.given(section.drag, plain) if section.drag is not None else "chosen, see notes" if p.width else ABSENT
        made.append((letter, of, str(count), say.given(section.length, metres), _what(source, section), drag))
        values = [(p.mass, mass_per_metre), (p.EA, stiffness), (p.EI_x, bending), (p.EI_y, bending), (p.GJ, bending)]
        values.append((p.width, millimetres))
        stiff.append((letter, *(say.given(v, how) if math.isfinite(v) else "not needed: rigid" for v, how in values)))
    return [
        Table("Sections, as given", ("letter", "of", "times", "length", "made as", "force coefficient"), tuple(made)),
        Table(
            "Sections, as modelled", ("letter", "mass", "EA", "EI about x", "EI about y", "GJ", "width the wind meets"), tuple(stiff),
            note="x is level, square to the bearing a spar leans toward; y square to it and to the spar; bare of ice",
        ),
    ]  # fmt: skip


def _what(source: Source, section: Stretch) -> Cell:
    say = source.say
    if section.tube is not None:
        tube = section.tube
        return ("tube ", say.given(tube.diameter, millimetres), " × ", say.given(tube.wall, millimetres), f", {section.material or ''}")
    if section.lattice is not None:
        made = section.lattice
        face = say.given(made.face, millimetres)
        return (f"lattice of {made.sides} legs, faces ", face, f", {made.bracing}, {section.material or ''}")
    return f"properties given outright{f', {section.shape}' if section.shape else ''}"


def _fittings(source: Source) -> Table:
    rows = tuple(_fitting(source, n, spar.name, f) for n, spar, f in numbered_fittings(source.solution))
    heads = ("no.", "fitting", "on", "at", "mass", "area", "shape", "force coefficient", "mass with ice", "fixed load")
    return Table("Fittings", heads, rows, named=2)


def _fitting(source: Source, number: str, spar: str, f: Fitting) -> tuple[Cell, ...]:
    say = source.say
    area = ABSENT if f.area is None else say.given(f.area, rounding.area)
    drag = ABSENT if f.area is None else "chosen, see notes" if f.drag is None else say.given(f.drag, plain)
    iced = ABSENT if f.iced_mass is None else say.given(f.iced_mass, rounding.mass)
    load = (f.load.east, f.load.north, f.load.up)
    fixed: Cell = ABSENT
    if any(load):
        words = zip(("east ", ", north ", ", up "), load, strict=True)
        fixed = tuple(piece for word, value in words for piece in (word, say.given(value, newtons)))
    face = "" if f.face is None else f", face {rounding.bearing(f.face)}"
    return (number, f.name, spar, say.given(f.at, metres), say.given(f.mass, rounding.mass), area, f"{f.shape}{face}", drag, iced, fixed)


def _anchors(source: Source) -> Table:
    say = source.say
    foot = source.solution.spars[0].drawn[0]
    rows = []
    for a in source.scenario.anchor:
        east, north = a.east - foot[0], a.north - foot[1]
        turn = math.atan2(east, north) % math.tau
        give: Cell = "does not move" if a.give is None else say.given(a.give, give_words)
        rows.append((
            a.name, *(say.given(v, metres) for v in (a.east, a.north, a.level)), _bearing(source, turn),
            say.given(math.hypot(east, north), metres), give, a.holdfast or "none given",
        ))  # fmt: skip
    heads = ("anchor", "east", "north", "level", "bearing", "radius", "give", "holdfast")
    return Table("Anchors", heads, tuple(rows), note="from the site's origin; bearing and radius from the foot of the first spar")


def _cables(source: Source) -> Table:
    say = source.say
    rows = []
    for k, c in enumerate(source.scenario.cable):
        goes = c.to.anchor if isinstance(c.to, AnchorPoint) else _point(source, c.to)
        if c.tension is not None:
            given: Cell = ("tension ", say.given(c.tension, rounding.plain_force))
        else:
            given = ("length ", say.given(c.length, metres)) if c.length is not None else "just tight"
        still: tuple[Cell, ...] = (ABSENT, ABSENT)
        if source.solution.state[0] != "none":
            at = f"result.cases.0.cables.{k}"
            still = (say.number(f"{at}.unstressed_length_m", metres), say.number(f"{at}.tension_anchor_N", rounding.plain_force))
        rows.append((c.name, _point(source, c.from_), goes, c.rope, given, *still))
    heads = ("cable", "from", "to", "rope", "set by", "unstressed length", "still-air tension")
    note = "tensions at the end that the cable runs to, in still air at the setting temperature"
    plumb = "; those given are targets, the nearest to them that leave the spars as drawn are set" if source.scenario.setting.plumb else ""
    return Table("Cables", heads, tuple(rows), note=note + plumb)


def _point(source: Source, end: SparPoint) -> tuple[str | Number, ...]:
    arm = () if not end.arm else (", lug ", source.say.given(end.arm, millimetres))
    return (f"{end.spar} at ", source.say.given(end.at, metres), *arm)


def _ropes(source: Source) -> Table:
    say = source.say
    used = dict.fromkeys(c.rope for c in source.scenario.cable)
    rows = []
    for name in used:
        r = source.scenario.rope[name]
        strength = "none given" if r.strength is None else say.given(r.strength, rounding.capacity)
        growth = "none given" if r.expansion is None else say.given(r.expansion, lambda v, _: f"{v * 1e6:.4g} × 10⁻⁶ /K")
        drag = "chosen, see notes" if r.drag is None else say.given(r.drag, plain)
        size = (say.given(r.diameter, millimetres), say.given(r.mass, mass_per_metre), say.given(r.stiffness, stiffness))
        rows.append((name, *size, strength, growth, drag))
    heads = ("rope", "diameter", "mass", "EA", "least breaking load", "expansion", "force coefficient")
    return Table("Ropes", heads, tuple(rows))


def _links(source: Source) -> Table:
    """What every cable with parts hangs on, link by link; chains that are alike in one row each."""
    scenario = source.scenario
    chains: dict[tuple[Link, ...], list[str]] = {}
    for cable in scenario.cable:
        if cable.ends:
            chains.setdefault(links_of(scenario, cable), []).append(cable.name)
    rows = []
    for links, names in chains.items():
        for link in links:
            holds = "not known" if link.holds is None else source.say.given(link.holds, rounding.capacity)
            rows.append((", ".join(names), link.words, holds, link.source or "given in the scenario"))
    return Table("Links of cables", ("cables", "link", "holds", "source"), tuple(rows), named=2)


def _holdfasts(source: Source) -> Table:
    rows: list[tuple[Cell, ...]] = []
    for name, holdfast in source.scenario.holdfast.items():
        at = ", ".join(a.name for a in source.scenario.anchor if a.holdfast == name) or "no anchor"
        rows.append((name, holdfast.kind, install_words(holdfast, source.tongue), at, holdfast.source or "none given"))
    return Table("Holdfasts", ("holdfast", "kind", "what to install", "at", "source"), tuple(rows))
