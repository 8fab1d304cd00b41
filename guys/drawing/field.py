"""The crew's pages: what to cut, what to set at which temperature, how to read it without a gauge, what to accept and prove.

Tables for work outdoors: one page a task, black on white, every number with its unit.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

from guys.checks.alarms import CAUTIONS
from guys.drawing import field_words as words
from guys.drawing import style
from guys.drawing.leaf import Words, leaf
from guys.drawing.lettering import wrapped
from guys.drawing.page import PAPERS, Page
from guys.drawing.rounding import ABSENT, Tongue, Units, fine_length, force, plain_force, seconds, share, small_angle, tongue
from guys.drawing.table import Column, Grid, Row, draw_grid
from guys.sounding import TIMED, Way
from guys.studies.field import Field, acceptance, cycles, proof_factor

if TYPE_CHECKING:
    from matplotlib.figure import Figure

MARGIN, GAP = 12.0, 6.0
ACROSS = 8
"""Temperatures side by side."""
WAYS: tuple[Way, ...] = ("pulse", "swing", "sag", "sight", "gauge")


@dataclass(frozen=True)
class Part:
    """A heading, a table or none, and lines of words below it."""

    head: str
    grid: Grid | None = None
    lines: Sequence[str] = ()


def draw_field(found: Field, paper: str, units: Units) -> dict[str, Figure]:
    """Every page by the stem of its files."""
    speech = tongue(units)
    pages: dict[str, tuple[str, list[Part], list[str]]] = {
        "field-1-lengths": ("what to cut and bring", _lengths(found, speech), words.assumed(found, speech)),
        "field-2-tensions": ("what to set", _tensions(found, speech), []),
        "field-3-readings": ("how to read a tension", _ways(found, speech), words.assumed(found, speech)),
        "field-4-acceptance": ("what to accept, prove and look at", _acceptance(found, speech), words.accepted_words(found)),
    }
    warnings = [f"Warning: {warning}" for warning in found.warnings]
    title = found.scenario.title
    return {stem: draw_parts(title, paper, shows, parts, [*warnings, *below]) for stem, (shows, parts, below) in pages.items()}


def draw_parts(title: str, paper: str, shows: str, parts: Sequence[Part], below: Sequence[str]) -> Figure:
    """A page of parts, one below the other."""
    room = PAPERS[paper][0] / PAPERS[paper][2] - 2 * MARGIN
    laid = [Part(p.head, p.grid, [line for text in p.lines for line in wrapped(text, room, style.BODY)]) for p in parts]
    needed = sum(_height(part) for part in laid)
    page, zone = leaf(paper, Words(title, shows, below, CAUTIONS), needed)
    y = zone.top
    for part in laid:
        y = _draw(page, part, zone.left, y, zone.width)
    return page.figure


def _height(part: Part) -> float:
    return 7.0 + (0.0 if part.grid is None else part.grid.height + 1.0) + style.ROW * len(part.lines) + GAP


def _draw(page: Page, part: Part, left: float, top: float, room: float) -> float:
    y = top - 5.0
    page.text(left, y, part.head, style.HEADING, bold=True)
    y -= 2.0
    if part.grid is not None:
        y = draw_grid(page, part.grid, left, y, room)
    for line in part.lines:
        y -= style.ROW
        page.text(left, y, line, style.BODY)
    return y - GAP


def _lengths(found: Field, say: Tongue) -> list[Part]:
    cut = found.cut
    heads = ("cable", "rope", "chord", "+ sag", "− stretch", "= unstressed", "− hardware", "+ turned back", "= rope to cut")
    known = [k for k, (travel, pitch) in enumerate(((cut.take_up, "turnbuckle"), (cut.by_turn, "one turn"))) if (travel == travel).any()]
    more = [(cut.take_up, "turnbuckle\ntravel"), (cut.by_turn, "one turn\nmoves")]
    columns = tuple(Column(h, "left" if k < 2 else "right") for k, h in enumerate((*heads, *(more[k][1] for k in known))))
    rows: list[Row] = []
    for k, cable in enumerate(found.scenario.cable):
        values = (cut.chord, cut.sag, cut.stretch, cut.unstressed, cut.hardware, cut.turn_back, cut.rope, *(more[i][0] for i in known))
        rows.append([(cable.name,), (cable.rope,), *(say.each(fine_length, float(v[k])) for v in values)])
    at = words.at_temperature(found, 0, say)
    bring = Grid(
        (Column("piece"), Column("how many"), Column("of what")),
        tuple([(a,), (b,), (c,)] for a, b, c in words.pieces(found, say)),
    )
    return [
        Part(f"Rope to cut, at {at}, turnbuckles half out", Grid(columns, tuple(rows)), []),
        Part("Pieces", bring, []),
    ]  # fmt: skip


def _tensions(found: Field, say: Tongue) -> list[Part]:
    parts = []
    count = cycles(found.scenario.field, "swing")
    every = range(1, len(found.still.temperature))
    for k, first in enumerate(every[::ACROSS]):
        group = every[first - 1 : first - 1 + ACROSS]
        shown = (0, *group) if k == 0 else tuple(group)
        heads = [Column("cable"), *(Column(_head(found, t, say), "right") for t in shown)]
        rows: list[Row] = [[(cable.name,), *(_set(found, t, c, say) for t in shown)] for c, cable in enumerate(found.scenario.cable)]
        title = "Tension at the lower end by temperature of the cable" if k == 0 else "Further temperatures: tension"
        parts.append(Part(f"{title}, and the time of {count} swings", Grid(tuple(heads), tuple(rows))))
    return [*parts, Part("Order", None, words.setting_words(found, say))]


def _head(found: Field, t: int, say: Tongue) -> str:
    text = words.at_temperature(found, t, say)
    return f"as set\n{text}" if t == 0 else text


def _set(found: Field, t: int, c: int, say: Tongue) -> tuple[str, ...]:
    if found.still.reason[t] is not None:
        return ("falls",)
    if found.still.slack[t, c]:
        return ("slack",)
    return (*say.each(plain_force, float(found.still.tension[t, c])), seconds(float(found.readings["swing"][t, c]), "SI"))


def _ways(found: Field, say: Tongue) -> list[Part]:
    work = found.scenario.field
    heads = [Column("cable"), Column("tension\nas set", "right")]
    for way in WAYS:
        what = f"{cycles(work, way)} {'returns' if way == 'pulse' else 'swings'}" if way in TIMED else way
        heads += [Column(f"{what}", "right"), Column("accept", "right"), Column("tells it", "right")]
    rows: list[Row] = []
    for c, cable in enumerate(found.scenario.cable):
        cells: list[tuple[str, ...]] = [(cable.name,), say.each(plain_force, float(found.tension[c]))]
        for way in WAYS:
            how = _how(way)
            reads = [float(v) for v in (found.readings[way][0, c], *sorted(found.accepted[way][:, c]))]
            cells += [_once(say, how, reads[0]), _between(say, how, reads[1:]), (_error(found, float(found.errors[way][c])),)]
        rows.append(cells)
    at = words.at_temperature(found, 0, say)
    title = f"At {at}, as set; accepted are tensions {share(work.tension)}; how near each reading tells the tension"
    return [Part(title, Grid(tuple(heads), tuple(rows))), Part("How", None, words.how(found))]


def _error(found: Field, error: float) -> str:
    return f"{share(error)} coarse" if error > found.scenario.field.tension else share(error)


def _how(way: Way) -> Callable[..., str]:
    return seconds if way in TIMED else plain_force if way == "gauge" else fine_length


def _once(say: Tongue, how: Callable[..., str], value: float) -> tuple[str, ...]:
    return tuple(dict.fromkeys(say.each(how, value)))


def _between(say: Tongue, how: Callable[..., str], ends: Sequence[float]) -> tuple[str, ...]:
    both = zip(*(say.each(how, value) for value in ends), strict=True)
    return tuple(dict.fromkeys(ABSENT if ABSENT in pair else f"{pair[0]} – {pair[1]}" for pair in both))


def _acceptance(found: Field, say: Tongue) -> list[Part]:
    rows: list[Row] = [
        [(p.of,), say.each(fine_length, p.at), say.each(fine_length, p.off), (small_angle(p.twist),)] for p in acceptance(found.scenario)
    ]
    heads = (Column("spar"), Column("at", "right"), Column("off its line\nat most", "right"), Column("twisted\nat most", "right"))
    proofs: list[Row] = [
        [(a.name,), (a.holdfast or "not named",), say.each(force, float(p)), ("",)]
        for a, p in zip(found.scenario.anchor, found.proof, strict=True)
    ]
    proof_heads = (Column("anchor"), Column("holdfast"), Column("proof load", "right"), Column("held, date, by whom"))
    loads = {"": "", "service": " in service cases", "FACTORED": ", FACTORED"}[found.solution.loads_are]
    factor = f"{proof_factor(found.scenario):g} times the greatest pull{loads}, along the pull"
    return [
        Part("Plumb and twist", Grid(heads, tuple(rows))),
        Part(f"Proof loads: {factor}", Grid(proof_heads, tuple(proofs))),
        Part("Look at", None, words.INSPECT),
    ]
