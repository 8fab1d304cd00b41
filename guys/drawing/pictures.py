"""Pictures where people would rather look than read: tensions against the wind, forces along spars, sway, anchor loads in space.

One page.  Of tensions a small rose for each cable, all to one rim; of spars the range of thrust, bending, shear and torsion over all listed
cases, with the greatest written at its place; of heads the path they take as the wind goes round; of anchors the greatest pull of the
listed cases as an arrow, in parallel projection.  No figure is here that is not in `result.json`.
"""

from __future__ import annotations

from math import ceil, cos, isfinite, radians, sin
from typing import TYPE_CHECKING

import numpy as np

from guys.checks.alarms import CAUTIONS
from guys.drawing import blocks, style
from guys.drawing.blocks import Line
from guys.drawing.labels import Array, Field, all_over, around, place
from guys.drawing.leaf import Words, leaf
from guys.drawing.lettering import fitted, shortened
from guys.drawing.page import Dash, Page, Rect, arc
from guys.drawing.polar import greatest_over_cases, spoke
from guys.drawing.reading import hung_cable, hung_spar, stands
from guys.drawing.rounding import POUND_FORCE, Say, Tongue, Units, bearing, force, length, load, moment, tongue
from guys.drawing.scales import round_below
from guys.results import Solution, SparLine

if TYPE_CHECKING:
    from matplotlib.figure import Figure

ROSE = 34.0
"""[mm] a rose with its name."""
DIAGRAM = 92.0
LOWER = 118.0
"""[mm] heights of the rows of spar diagrams, and of sway and anchor loads."""
SEEN_FROM, DOWN = radians(215.0), radians(24.0)
"""Bearing the view in space is taken from, and how steeply it looks down."""
DASHES: tuple[Dash, ...] = (style.SOLID, style.DASHED, style.DOTTED)
COLUMNS = 10
"""Roses in a row."""


def draw_pictures(solution: Solution, paper: str, units: Units) -> Figure:
    """The page as a figure."""
    return pictures_page(solution, paper, units).figure


def pictures_page(solution: Solution, paper: str, units: Units) -> Page:
    """The page."""
    say = tongue(units)
    roses = 0.0 if solution.sweep is None else 8.0 + ROSE * ceil(len(solution.cables.name) / COLUMNS)
    diagrams = DIAGRAM * len(solution.spars) if stands(solution) else 0.0
    words = Words(solution.scenario.title, "pictures of tension, forces, sway and anchor loads", [_small_print(solution)], CAUTIONS)
    page, zone = leaf(paper, words, roses + diagrams + LOWER)
    top = zone.top
    if solution.sweep is not None:
        draw_roses(page, solution, Rect(zone.left, top - roses, zone.right, top), say)
        top -= roses
    for spar in solution.spars if stands(solution) else ():
        draw_forces(page, solution, spar, Rect(zone.left, top - DIAGRAM, zone.right, top), say)
        top -= DIAGRAM
    middle = 0.5 * (zone.left + zone.right)
    draw_sway(page, solution, Rect(zone.left, zone.bottom, middle - 6.0, top), say)
    draw_in_space(page, solution, Rect(middle + 6.0, zone.bottom, zone.right, top), say)
    return page


def _small_print(solution: Solution) -> str:
    return f"Full digits in result.json · guys {solution.version}, scenario {solution.scenario.sha256[:12]}"


def _head(page: Page, zone: Rect, title: str, words: str) -> None:
    wide = page.text(zone.left, zone.top - 4.0, title, style.HEADING, bold=True)
    page.text(zone.left + wide + 3.0, zone.top - 4.0, fitted(words, zone.width - wide - 3.0, style.SMALL), style.SMALL, colour=style.GREY)


# ---------------------------------------------------------------- tension of each cable


def draw_roses(page: Page, solution: Solution, zone: Rect, say: Tongue) -> None:
    """A rose for each cable: greatest tension over the cases with wind against the bearing it comes from; one rim for all."""
    sweep = solution.sweep
    if sweep is None:
        return
    bearings = np.unique(np.asarray(sweep.bearing))
    tension = greatest_over_cases(sweep, sweep.tension, bearings)
    top = float(np.nanmax(tension)) if np.isfinite(tension).any() else 0.0
    if top <= 0.0:
        return
    unit = 1.0 if say.systems[0] == "SI" else POUND_FORCE
    step = round_below(top / unit / 1.5) * unit
    rim = step * ceil(top / step - 1e-9)
    _head(page, zone, "Tension against the wind", f"greatest end tension by the bearing it comes from, north up; rim {say.say(force, rim)}")
    across = zone.width / COLUMNS
    radius = min(across - 6.0, ROSE - 12.0) / 2.0
    for k, name in enumerate(solution.cables.name):
        left, row = zone.left + across * (k % COLUMNS), k // COLUMNS
        centre = np.array([left + radius + 2.0, zone.top - 9.0 - ROSE * row - radius])
        page.circle(centre, radius, edge=style.GREY, weight=style.HAIR, order=1.0)
        for turn in range(0, 360, 90):
            page.line([centre, centre + radius * spoke(np.deg2rad(turn))], style.PALE, 0.35, order=1.0)
        curve = centre + (np.append(tension[:, k], tension[:1, k]) * radius / rim)[:, None] * spoke(np.append(bearings, bearings[:1]))
        page.line(curve, style.LOAD, style.CABLE, order=2.5, name=name)
        peak = float(np.nanmax(tension[:, k])) if np.isfinite(tension[:, k]).any() else float("nan")
        page.text(left, centre[1] - radius - 4.0, shortened(name, across - 3.0, style.SMALL, bold=True), style.SMALL, bold=True)
        page.text(left, centre[1] - radius - 8.0, say.say(load, peak), style.SMALL)


# ---------------------------------------------------------------- forces along a spar


def draw_forces(page: Page, solution: Solution, spar: SparLine, zone: Rect, say: Tongue) -> None:
    """Thrust, bending, shear and torsion along one spar: the range over all listed cases, and the greatest of each."""
    _head(
        page,
        zone,
        f"Forces along {spar.name}",
        "foot at the bottom; the range over all listed cases, the greatest of each written at its place",
    )
    kinds: tuple[tuple[str, Array, Say], ...] = (
        ("thrust", -spar.axial, force),
        ("bending", np.linalg.norm(spar.bending, axis=-1), moment),
        ("shear", np.linalg.norm(spar.shear, axis=-1), force),
        ("torsion", np.abs(spar.torsion), moment),
    )
    across = zone.width / len(kinds)
    for k, (name, values, how) in enumerate(kinds):
        room = Rect(zone.left + across * k + 22.0, zone.bottom + 8.0, zone.left + across * (k + 1) - 26.0, zone.top - 14.0)
        _diagram(page, solution, spar, name, values, how, room, say)


def _diagram(page: Page, solution: Solution, spar: SparLine, name: str, values: Array, how: Say, room: Rect, say: Tongue) -> None:
    """One kind of force (case, station), least to greatest over the cases."""
    good = values[np.isfinite(values).all(axis=1)]
    page.text(room.left, room.top + 3.0, name, style.BODY, bold=True)
    if not len(good):
        page.text(room.left, room.top - 4.0, "no case stands", style.SMALL, colour=style.GREY)
        return
    low, high = good.min(axis=0), good.max(axis=0)
    top = float(max(high.max(), -low.min(), 0.0))
    up = room.bottom + room.height * spar.station / spar.station[-1]
    base = room.left + room.width * (0.0 if low.min() >= 0 else float(-low.min() / max(high.max() - low.min(), 1e-300)))
    scale = (room.right - base) / max(float(high.max()), 1e-300) if high.max() > 0 else room.width / max(top, 1e-300)
    if top > 0.0:
        page.shape(
            np.column_stack([np.concatenate([base + scale * high, (base + scale * low)[::-1]]), np.concatenate([up, up[::-1]])]),
            style.GROUND,
            order=1.0,
        )
        for edge in (low, high):
            page.line(np.column_stack([base + scale * edge, up]), style.LOAD, style.THIN, order=2.0, name=name)
    page.line([(base, room.bottom), (base, room.top)], style.INK, style.SPAR / 2, order=3.0)
    at = int(np.argmax(high))
    case, station = np.unravel_index(int(np.nanargmax(np.where(np.isfinite(values), values, -np.inf))), values.shape)
    words = [Line(say.say(how, float(high[at])), bold=True), Line(_where(solution, int(case)), style.SMALL, colour=style.GREY)]
    words.append(Line(f"{say.say(length, float(spar.station[station]))} up", style.SMALL, colour=style.GREY))
    wide, tall = blocks.size(words)
    y = min(max(float(up[at]) - tall / 2.0, room.bottom), room.top - tall)
    blocks.draw(page, np.array([room.right + 2.0, y, room.right + 2.0 + wide, y + tall]), words)


def _where(solution: Solution, case: int) -> str:
    wind = float(solution.wind_from[case])
    name = shortened(solution.case[case], 20.0, style.SMALL)
    return name if not isfinite(wind) else f"{name}, {bearing(wind)}"


# ---------------------------------------------------------------- sway


def draw_sway(page: Page, solution: Solution, zone: Rect, say: Tongue) -> None:
    """Where each head goes in plan as the wind goes round, one path a case, from where it is in still air."""
    room = Rect(zone.left, zone.bottom + 4.0, zone.right, zone.top - 10.0)
    paths = _paths(solution)
    reach = max((float(np.nanmax(np.hypot(*(p - p0).T))) for _, _, p, p0 in paths), default=0.0)
    if not stands(solution) or reach <= 0.0:
        _head(page, zone, "Sway of heads", "no case with wind stands")
        return
    radius = min(room.width - 60.0, room.height) / 2.0 - 4.0
    ring = round_below(reach / 1.2)
    per_metre = radius / (ring * ceil(reach / ring - 1e-9))
    _head(
        page,
        zone,
        "Sway of heads",
        f"from still air, in plan; rings {_small(ring, say)} apart; dot: wind from the north",
    )
    centre = np.array([room.left + radius + 4.0, room.bottom + radius])
    for k in range(1, round(radius / per_metre / ring) + 1):
        page.line(arc(centre, ring * k * per_metre, 91), style.PALE, 0.35, order=1.0)
    field = Field(room)
    names = list(dict.fromkeys(case for _, case, _, _ in paths))
    drawn = [centre + (np.vstack([path, path[:1]]) - still) * per_metre for _, _, path, still in paths]
    for (_, case, _, _), line in zip(paths, drawn, strict=True):
        page.line(line, style.INK, style.THIN, DASHES[names.index(case) % len(DASHES)], order=2.0, name=case)
        page.circle(line[0], 0.7, fill=style.WIND, order=3.0)
        field.add_line(line)
    for (spar, case, path, still), line in zip(paths, drawn, strict=True):
        move = float(np.nanmax(np.hypot(*(path - still).T)))
        words = [Line(f"{spar}: {shortened(case, 34.0, style.SMALL)}", style.SMALL), Line(_small(move, say), style.SMALL)]
        far = line[int(np.nanargmax(np.hypot(*(line - centre).T)))]
        spot = place(field, all_over(around(far, blocks.size(words), 1.0, tuple(far - centre)), room))
        blocks.draw_placed(page, spot, far, words)


def _small(metres: float, say: Tongue) -> str:
    """A move in millimetres or inches."""
    return " / ".join(f"{metres * 1e3:.3g} mm" if s == "SI" else f"{metres / 0.0254:.3g} in" for s in say.systems)


def _paths(solution: Solution) -> list[tuple[str, str, Array, Array]]:
    """Spar, case, its head in plan by listed bearing (bearing, 2), and the head in still air (2,)."""
    out = []
    for spar in solution.spars:
        still = spar.displacement[0, -1, :2]
        for case in dict.fromkeys(solution.case):
            rows = [k for k, name in enumerate(solution.case) if name == case and isfinite(solution.wind_from[k])]
            rows.sort(key=lambda k: float(solution.wind_from[k]))
            path = spar.displacement[rows, -1, :2]
            if len(rows) > 1 and np.isfinite(path).all() and np.isfinite(still).all():
                out.append((spar.name, case, path, still))
    return out


# ---------------------------------------------------------------- anchor loads in space


def draw_in_space(page: Page, solution: Solution, zone: Rect, say: Tongue) -> None:
    """Spars and cables as they hang in still air, and the greatest pull of the listed cases on every anchor as an arrow."""
    words = f"greatest pull of the listed cases on each anchor; seen from {bearing(SEEN_FROM)}, {DOWN / radians(1.0):.0f}° down"
    _head(page, zone, "Anchor loads in space", words)
    room = Rect(zone.left, zone.bottom + 4.0, zone.right, zone.top - 12.0)
    lines = [(hung_spar(solution, s), style.SPAR) for s in solution.spars]
    lines += [(hung_cable(solution, k), style.HAIR) for k in range(len(solution.cables.name))]
    flat = [(project(points), weight) for points, weight in lines]
    everything = np.concatenate([p for p, _ in flat])
    low, high = everything.min(axis=0), everything.max(axis=0)
    pulls = _greatest_pulls(solution)
    inner = room.inset(30.0, 8.0, 30.0, 8.0)
    per_metre = min(inner.width / max(high[0] - low[0], 1e-9), inner.height / max(high[1] - low[1], 1e-9))
    centre = np.array([(inner.left + inner.right) / 2.0, (inner.bottom + inner.top) / 2.0])

    def on_page(points: Array) -> Array:
        return np.asarray(centre + (project(points) - (low + high) / 2.0) * per_metre)

    field = Field(room)
    for points, weight in lines:
        page.line(on_page(points), style.INK, weight, order=2.0)
        field.add_line(on_page(points))
    largest = max((float(np.linalg.norm(p)) for p in pulls if np.isfinite(p).all()), default=0.0)
    if largest <= 0.0:
        return
    per_newton = 0.32 * min(room.width, room.height) / largest / per_metre
    for name, at, pull in zip(solution.anchors.name, solution.anchors.position, pulls, strict=True):
        foot = on_page(at)
        page.circle(foot, 0.9, fill=style.INK, order=4.0)
        if np.isfinite(pull).all() and np.linalg.norm(pull) > 1e-6 * largest:
            tip = on_page(at + pull * per_newton)
            page.arrow(foot, tip, style.LOAD, 1.8, 2.8)
            field.add_line([foot, tip])
        words_at = [Line(name, bold=True), Line(say.say(load, float(np.linalg.norm(pull))), style.SMALL, colour=style.LOAD)]
        spot = place(field, all_over(around(foot, blocks.size(words_at), 1.2, (foot[0] - centre[0], -6.0)), room))
        blocks.draw_placed(page, spot, foot, words_at)


def project(points: Array) -> Array:
    """(..., 3) to (..., 2): parallel projection, to the right and upward in the view."""
    right = np.array([-cos(SEEN_FROM), sin(SEEN_FROM), 0.0])
    toward = np.array([-sin(SEEN_FROM), -cos(SEEN_FROM), 0.0])
    upward = sin(DOWN) * toward + np.array([0.0, 0.0, cos(DOWN)])
    return np.stack([points @ right, points @ upward], axis=-1)


def _greatest_pulls(solution: Solution) -> list[Array]:
    """(3,) of every anchor, in the listed case of its greatest pull; NaN where none stands."""
    size = solution.anchors.resultant
    return [
        solution.anchors.pull[int(np.nanargmax(size[:, k])), k] if np.isfinite(size[:, k]).any() else np.full(3, np.nan)
        for k in range(len(solution.anchors.name))
    ]
