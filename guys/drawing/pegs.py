"""The set-out sheet: pegs and base in plan, ring and rays with their taped lengths, norths, and a table of every figure.

Where pegs were surveyed, the table under it tells how far each was found off, and what its greatest pull becomes.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from guys.checks.alarms import CAUTIONS
from guys.drawing import blocks, style
from guys.drawing.blocks import Line
from guys.drawing.labels import Array, Field, all_over, around, place
from guys.drawing.leaf import Words, leaf
from guys.drawing.lettering import wrapped
from guys.drawing.page import Page, Rect
from guys.drawing.rounding import ABSENT, Tongue, Units, length, level, load, offset, tongue
from guys.drawing.scales import length_bar, ratio_text, ratio_to_fit
from guys.drawing.site import draw_site
from guys.drawing.strip import state_summary, verdict
from guys.drawing.table import Column, Grid, Row, draw_grid
from guys.results import Solution
from guys.studies.pegs import AsBuilt, Pegs

if TYPE_CHECKING:
    from matplotlib.figure import Figure

PLAN = 150.0
"""[mm] height of the plan."""
SIDE = 96.0
"""[mm] width of the words beside it."""
NORTH = 17.0
"""[mm] length of an arrow to the north."""
NAMED = 3
"""Things past their allowable that are named beside the plan."""
FINE = 2
"""Decimals of a bearing: PRINTED_TURN of the study."""


def draw_setout(pegs: Pegs, built: AsBuilt | None, paper: str, units: Units) -> Figure:
    """The page."""
    say = tongue(units)
    grids = [_table(pegs, say)] + ([] if built is None else [_as_built(built, say)])
    needed = PLAN + sum(grid.height + 5.0 for grid in grids)
    page, zone = leaf(paper, Words(pegs.scenario.title, "set-out of anchors", _small_print(pegs), CAUTIONS), needed)
    top = zone.top - PLAN
    _plan(page, pegs, Rect(zone.left, top, zone.right - SIDE, zone.top), say)
    _beside(page, pegs, built, Rect(zone.right - SIDE + 6.0, top, zone.right, zone.top), say)
    for grid in grids:
        top = draw_grid(page, grid, zone.left, top, zone.width) - 4.0
    return page.figure


def _small_print(pegs: Pegs) -> list[str]:
    return [
        "Distances are true ground distances, on the level unless called slope; bearings clockwise, from the base to the peg. "
        f"Full digits in setout.csv · scenario {pegs.scenario.sha256[:12]}"
    ]


# ---------------------------------------------------------------- the plan


def _plan(page: Page, pegs: Pegs, room: Rect, say: Tongue) -> None:
    points = np.vstack([pegs.base[:2], pegs.position[:, :2]])
    low, high = points.min(axis=0), points.max(axis=0)
    inner = room.inset(34.0, 16.0, 34.0, 14.0)
    span = np.maximum(high - low, 1.0)
    ratio = ratio_to_fit((float(span[0]), float(span[1])), (inner.width, inner.height), page.shrink)
    per_metre = page.scaled(ratio)
    centre = np.array([(inner.left + inner.right) / 2, (inner.bottom + inner.top) / 2])

    def on_page(places: Array) -> Array:
        return np.asarray(centre + (np.asarray(places)[..., :2] - (low + high) / 2) * per_metre)

    heading = page.text(room.left, room.top - 2.0, f"plan {ratio_text(ratio)} on {page.paper}", style.SMALL, colour=style.GREY)
    field = Field(room)
    field.add_box((room.left, room.top - 4.0, room.left + heading, room.top + 2.0))
    field.add_box((room.left, room.bottom, room.left + 60.0, room.bottom + 9.0))
    base, at = on_page(pegs.base), on_page(pegs.position)
    for k in range(len(at)):
        page.line([base, at[k]], style.INK, style.CABLE)
        field.add_line([base, at[k]])
        field.add_disc(at[k], 1.4)
    for a, b in pegs.ring:
        page.line([at[a], at[b]], style.GREY, style.HAIR, style.DASHED)
        field.add_line([at[a], at[b]])
    page.shape(base + 1.6 * np.array([[-1, -1], [1, -1], [1, 1], [-1, 1]]), style.WHITE, style.INK, style.THIN, order=5.0)
    field.add_disc(base, 2.4)
    for k, name in enumerate(pegs.name):
        page.circle(at[k], 1.1, fill=style.INK, order=5.0)
        words = [Line(name, style.NAME, bold=True), Line(f"{_turn(pegs.bearing[k])}   {say.say(length, pegs.level_distance[k])}")]
        _label(page, field, words, at[k], at[k] - base)
    for a, b in pegs.ring:
        distance = Line(say.say(length, pegs.between(a, b)[0]), colour=style.GREY)
        _label(page, field, [distance], 0.5 * (at[a] + at[b]), 0.5 * (at[a] + at[b]) - base)
    if pegs.scenario.site is not None:
        draw_site(page, pegs.scenario.site, field, on_page, say)
    length_bar(page, room.left, room.bottom + 6.0, per_metre, 40.0, say.systems[0])


def _label(page: Page, field: Field, words: list[Line], at: Array, outward: Array) -> None:
    wish = around(at, blocks.size(words), 1.6, tuple(outward / max(float(np.hypot(*outward)), 1e-9)))
    blocks.draw_placed(page, place(field, all_over(wish, field.room)), at, words)


def _turn(bearing: float) -> str:
    return ABSENT if not math.isfinite(bearing) else f"{math.degrees(bearing) % 360:.{FINE}f}°"


# ---------------------------------------------------------------- beside the plan


def _beside(page: Page, pegs: Pegs, built: AsBuilt | None, room: Rect, say: Tongue) -> None:
    _norths(page, pegs, np.array([room.left + 20.0, room.top - 24.0]))
    y = room.top - 44.0
    for head, text in [*_facts(pegs, say), *([] if built is None else [("As surveyed", _outcome(built.after))])]:
        page.text(room.left, y, head, style.BODY, bold=True, colour=style.GREY)
        for line in wrapped(text, room.width - 26.0, style.BODY):
            page.text(room.left + 26.0, y, line, style.BODY)
            y -= style.ROW
        y -= 1.0


def _norths(page: Page, pegs: Pegs, foot: Array) -> None:
    """Grid north upward, true and magnetic north beside it where they are known; the turn between them is written, not drawn to scale."""
    site = pegs.scenario.site
    arrows = [("grid north", 0.0)]
    if site is not None and site.grid is not None:
        arrows.append((f"true {_signed(-site.grid.convergence)}", math.copysign(0.22, -site.grid.convergence)))
    if site is not None and site.declination is not None:
        arrows.append((f"magnetic {_signed(site.declination)}", math.copysign(0.44, site.declination)))
    for k, (name, lean) in enumerate(arrows):
        tip = foot + NORTH * np.array([math.sin(lean), math.cos(lean)])
        page.arrow(foot, tip, style.INK if k == 0 else style.GREY, 1.4 if k == 0 else style.THIN)
        page.text(foot[0] + 16.0, foot[1] + 12.0 - 4.4 * k, name, style.BODY, colour=style.INK if k == 0 else style.GREY)


def _signed(turn: float) -> str:
    """A bearing from grid north."""
    return f"{'+' if turn >= 0 else '−'}{abs(math.degrees(turn)):.{FINE}f}° from it"


def _facts(pegs: Pegs, say: Tongue) -> list[tuple[str, str]]:
    site, (miss, ring) = pegs.scenario.site, pegs.closure
    grid = None if site is None else site.grid
    facts = []
    if grid is None:
        facts.append(("System", "local metres from the origin, grid north as drawn"))
    else:
        facts += [
            ("System", f"{grid.crs}, {grid.name}, in units of {grid.unit:.10g} m"),
            (
                "Scale factor",
                f"{grid.combined:.7f}, grid over ground: point {grid.point_scale:.7f}, {say.say(length, grid.level)} above the sea",
            ),
        ]
    east, north, up = (say.say(level if k == 2 else length, float(v)) for k, v in enumerate(pegs.base))
    facts.append(("Base", f"{pegs.scenario.spar[0].name}: {east} east, {north} north, level {up} from the origin"))
    for a, b in pegs.ring:
        on_level, slope, turn = pegs.between(a, b)
        facts.append(
            (f"{pegs.name[a]}–{pegs.name[b]}", f"{say.say(length, on_level)} level, {say.say(length, slope)} slope, {_turn(turn)}")
        )
    if math.isfinite(miss):
        facts.append(("Closure", f"{miss * 1000:.0f} mm in {say.say(length, ring)}, with every figure rounded as printed"))
    return facts


def _outcome(solution: Solution) -> str:
    """What becomes of the structure with the pegs as surveyed."""
    past = [f"{f.thing}, {f.quantity}" for f in solution.past]
    named = past[:NAMED] + ([f"{len(past) - NAMED} more"] if len(past) > NAMED else [])
    return "; ".join([state_summary(solution), verdict(solution) + (": " + ", ".join(named) if named else "")])


# ---------------------------------------------------------------- tables


def _table(pegs: Pegs, say: Tongue) -> Grid:
    site = pegs.scenario.site
    grid = None if site is None else site.grid
    heads = [
        Column("peg"), Column("grid\nbearing", "right"), Column("true\nbearing", "right", 2), Column("magnetic\nbearing", "right"),
        Column("level\ndistance", "right"), Column("slope\ndistance", "right"), Column("level", "right"), Column("east", "right", 3),
        Column("north", "right", 3), Column("grid\neast", "right"), Column("grid\nnorth", "right"), Column("latitude", "right", 1),
        Column("longitude", "right", 1),
    ]  # fmt: skip
    known = [True, True, grid is not None, site is not None and site.declination is not None, *[True] * 5, *[grid is not None] * 4]
    rows = [[cell for cell, keep in zip(_row(pegs, k, say), known, strict=True) if keep] for k in range(len(pegs.name))]
    return Grid(tuple(head for head, keep in zip(heads, known, strict=True) if keep), tuple(rows))


def _row(pegs: Pegs, k: int, say: Tongue) -> Row:
    site = pegs.scenario.site
    grid = None if site is None else site.grid
    declination = math.nan if site is None or site.declination is None else site.declination
    east, north, up = (float(v) for v in pegs.position[k])
    whole = [""] * 4
    if grid is not None:
        grid_east, grid_north = grid.to_grid(east, north)
        latitude, longitude = grid.to_degrees(east, north)
        whole = [f"{float(grid_east):.3f}", f"{float(grid_north):.3f}", f"{float(latitude):.7f}", f"{float(longitude):.7f}"]
    turns = (pegs.bearing[k], pegs.bearing[k] + (grid.convergence if grid else 0.0), pegs.bearing[k] - declination)
    return [
        (pegs.name[k],), *((_turn(float(t)),) for t in turns),
        *(say.each(length, float(v)) for v in (pegs.level_distance[k], pegs.slope_distance[k])),
        say.each(level, up), *(say.each(length, v) for v in (east, north)), *((text,) for text in whole),
    ]  # fmt: skip


def _as_built(built: AsBuilt, say: Tongue) -> Grid:
    heads = (
        Column("as surveyed"), Column("east of\nplan", "right"), Column("north of\nplan", "right"), Column("above\nplan", "right"),
        Column("off in\nplan", "right"), Column("greatest pull\nas planned", "right"), Column("greatest pull\nas found", "right"),
    )  # fmt: skip
    rows = []
    for k, name in enumerate(built.planned.name):
        pulls = [w[k].resultant.peak for w in (built.before.worst_anchors, built.after.worst_anchors)]
        off = [float(v) for v in built.off[k]]
        words = name if name in built.surveyed else f"{name} (as planned)"
        rows.append(
            [(words,), *(say.each(offset, v) for v in off), say.each(length, math.hypot(*off[:2])), *(say.each(load, p) for p in pulls)]
        )
    return Grid(heads, tuple(rows))
