"""The site's rules, each with a signed margin: found less needed, in metres.

    anchor    inside the boundary by the setback; clear of every obstacle by its clearance; clear of other anchors' cables
    cable     above every road, path or crowd that asks headroom, along its true curve in every case; clear of each other
    line      every cable and spar clear of an overhead line by its distance, in space: as it stands, in its swing over all cases,
              and in the fall, when a spar may come anywhere within its length of its foot

The ground under a cable or line is the surveyed one, or where there is none level ground at the first spar's foot.  A line hangs at its
`height` above the ground all along (its own sag and swing are not known here: give the lowest height).  A cable's curve is followed by
straight pieces; the lowest point over an area is found on those pieces, not between samples.

`APART` and `BESIDE` are common practice, not rules of the site: cables nearer rub.  That a cable may foul a fitting is only warned
of, since of a fitting only its area is known.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from guys.checks.allowables import judge
from guys.checks.distances import apart, over
from guys.loads import CaseLine
from guys.results import Finding, SparLine
from guys.rotation import Array
from guys.scenario import Scenario
from guys.scenario.model import AnchorPoint, Fitting, GroundFoot, HeelFoot, SparPoint
from guys.site import Obstacle, Site

if TYPE_CHECKING:
    from shapely.geometry.base import BaseGeometry

APART = 0.05
"""[m] between cables that share no end."""
BESIDE = 0.3
"""[m] between an anchor and the cable of another."""
OVER = "over "
"""How the quantity of a headroom begins."""


@dataclass(frozen=True)
class Hung:
    """Where everything is in the cases listed and in those of the full circle of winds.

    lines : (case,);  curves : (case, cable, point, 3) [m] from the `to` end, NaN where a case takes the cable away
    anchors : (anchor, 3) [m];  spars : as solved, in detail
    """

    scenario: Scenario
    lines: tuple[CaseLine, ...]
    curves: Array
    anchors: Array
    spars: tuple[SparLine, ...]

    @property
    def carried_by(self) -> dict[str, str]:
        """Spars that stand on others, and on which."""
        return {s.name: s.foot.spar for s in self.scenario.spar if isinstance(s.foot, HeelFoot)}

    def spar(self, k: int) -> Array:
        """(case, station, 3) the axis of spar `k`."""
        return np.asarray(self.spars[k].drawn + self.spars[k].displacement)


def _known(chains: Array) -> NDArray[np.int64]:
    """Cases in which chains (case, point, 3) are known: there is an equilibrium, and the cable is in place."""
    return np.flatnonzero(~np.isnan(chains).any(axis=(1, 2)))


def findings(site: Site | None, hung: Hung) -> tuple[Finding, ...]:
    """A finding for every rule that the site or the trade makes."""
    out = [*_crossings(hung), *_anchors_beside_cables(hung)]
    if site is not None:
        places = [(a.name, float(at[0]), float(at[1])) for a, at in zip(hung.scenario.anchor, hung.anchors, strict=True)]
        out += [*placing(site, places), *_headrooms(site, hung), *_overhead(site, hung)]
    return tuple(out)


def _finding(thing: str, quantity: str, needed: float, found: float, why: str, line: CaseLine | None = None) -> Finding:
    """Factor: found over needed, without bound where nothing is needed and nothing lacks."""
    factor = found / needed if needed > 0 else math.copysign(math.inf, found if found else 1.0)
    name, wind = ("", math.nan) if line is None else (line.name, line.wind_from)
    return Finding(thing, quantity, needed, found, "m", 1.0, factor, judge(factor, 1.0), name, wind, why, margin=found - needed)


def _not_judged(thing: str, quantity: str, needed: float, why: str) -> Finding:
    return Finding(thing, quantity, needed, math.nan, "m", 1.0, math.nan, "not judged", "", math.nan, why)


# ---------------------------------------------------------------- anchors in plan


def _inside(shape: BaseGeometry, east: float, north: float) -> float:
    """Distance of a place inside the edge of an area, negative outside; of a line or point, the distance from it, negative."""
    from shapely import Point

    point = Point(east, north)
    away = float(shape.distance(point))
    return float(shape.boundary.distance(point)) if away == 0.0 and shape.area > 0 else -away


def placing(site: Site, anchors: Sequence[tuple[str, float, float]]) -> Iterator[Finding]:
    """The rules on where anchors stand, given by name, east and north: boundary and obstacles."""
    yield from _boundary(site, anchors)
    yield from _clearances(site, anchors)


def _boundary(site: Site, anchors: Sequence[tuple[str, float, float]]) -> Iterator[Finding]:
    if site.boundary is None:
        return
    for name, east, north in anchors:
        yield _finding(f"anchor {name}", "inside the boundary", site.setback, _inside(site.boundary, east, north), "setback")


def _clearances(site: Site, anchors: Sequence[tuple[str, float, float]]) -> Iterator[Finding]:
    """Anchors stand in no obstacle but under a line, and clear of it where it says so."""
    for obstacle in site.obstacles:
        if obstacle.kind == "line" and obstacle.clearance is None:
            continue
        for name, east, north in anchors:
            clear = -_inside(obstacle.shape, east, north)
            yield _finding(
                f"anchor {name}", f"clear of {obstacle.name}", obstacle.clearance or 0.0, clear, f"clearance of a {obstacle.kind}"
            )


# ---------------------------------------------------------------- cables over ground


def _ground(site: Site, hung: Hung, east: Array, north: Array) -> Array:
    """Level of the ground; NaN outside what is surveyed."""
    if site.ground is not None:
        return site.ground.level(east, north)
    feet = [s.foot.level for s in hung.scenario.spar if isinstance(s.foot, GroundFoot)]
    return np.full(np.shape(east), feet[0])


def _headrooms(site: Site, hung: Hung) -> Iterator[Finding]:
    why = "lowest over it, all cases and winds, above " + (
        "the surveyed ground" if site.ground is not None else "level ground at the first spar's foot"
    )
    for obstacle in site.obstacles:
        for n, cable in enumerate(hung.scenario.cable):
            thing, quantity = f"cable {cable.name}", f"{OVER}{obstacle.name}"
            low = _lowest(site, hung, obstacle, n)
            if low is None:
                continue
            needed = obstacle.headroom if obstacle.headroom is not None else obstacle.height if obstacle.kind == "building" else None
            if math.isnan(low[0]):
                yield _not_judged(thing, quantity, needed or 0.0, "it lies over ground that is not surveyed")
            elif needed is not None:
                yield _finding(thing, quantity, needed, low[0], why, low[1])
            elif obstacle.kind in ("road", "path", "crowd", "building"):
                lacking = "height" if obstacle.kind == "building" else "headroom"
                yield _not_judged(thing, quantity, low[0], f"the {obstacle.kind} gives no {lacking}")


def headrooms(found: Iterable[Finding]) -> list[Finding]:
    """Of some findings those on the headroom of cables."""
    return [f for f in found if f.quantity.startswith(OVER)]


def _lowest(site: Site, hung: Hung, obstacle: Obstacle, cable: int) -> tuple[float, CaseLine] | None:
    """Least height of a cable above the ground over an obstacle, and the case; None where it passes beside it."""
    import shapely

    curves, rows = hung.curves[:, cable], _known(hung.curves[:, cable])
    low, high = (f(curves[..., :2], axis=(0, 1)) for f in (np.nanmin, np.nanmax))
    if not shapely.intersects(shapely.box(*low, *high), obstacle.shape):
        return None
    case, places = over(curves[rows], obstacle.shape)
    if len(places) == 0:
        return None
    height = places[:, 2] - _ground(site, hung, places[:, 0], places[:, 1])
    k = int(np.argmin(height))  # of what is not known, the first
    return float(height[k]), hung.lines[rows[case[k]]]


# ---------------------------------------------------------------- overhead lines


def _overhead(site: Site, hung: Hung) -> Iterator[Finding]:
    for obstacle in site.obstacles:
        if obstacle.kind != "line" or obstacle.height is None or obstacle.distance is None:
            continue
        wire = _wire(site, hung, obstacle)
        if np.isnan(wire).any():
            yield _not_judged("all", f"from {obstacle.name}", obstacle.distance, "the line runs over ground that is not surveyed")
            continue
        for n, cable in enumerate(hung.scenario.cable):
            near, line = _nearest(hung.lines, hung.curves[:, n], wire)
            yield _finding(
                f"cable {cable.name}", f"from {obstacle.name}", obstacle.distance, near, "in space, standing and in its swing", line
            )
        for n, spar in enumerate(hung.spars):
            near, line = _nearest(hung.lines, hung.spar(n), wire)
            yield _finding(
                f"spar {spar.name}", f"from {obstacle.name}", obstacle.distance, near, "in space, standing and in its swing", line
            )
        for name, foot, reach in fall_circles(hung.spars, hung.carried_by):
            left = float(apart(np.stack([foot, foot]), wire)) - reach
            why = f"in the fall it may come anywhere within {reach:.1f} m of its foot; cables it drags may come farther"
            yield _finding(f"spar {name}", f"from {obstacle.name} in the fall", obstacle.distance, left, why)


def _wire(site: Site, hung: Hung, obstacle: Obstacle) -> Array:
    """(point, 3) the overhead line."""
    import shapely

    plan = shapely.get_coordinates(obstacle.shape)
    return np.column_stack([plan, _ground(site, hung, plan[:, 0], plan[:, 1]) + (obstacle.height or 0.0)])


def _nearest(lines: Sequence[CaseLine], chains: Array, others: Array) -> tuple[float, CaseLine | None]:
    """Least distance of chains (case, point, 3) from others (case, point, 3), or from one (point, 3), and its case."""
    rows = _known(chains)
    if len(rows) == 0:
        return math.inf, None
    found = apart(chains[rows], others[rows] if others.ndim == chains.ndim else others)
    k = int(np.nanargmin(found))
    return float(found[k]), lines[rows[k]]


# ---------------------------------------------------------------- things in each other's way


def _crossings(hung: Hung) -> Iterator[Finding]:
    """Cables that come near each other away from a shared end; only what is too near is told."""
    cables = hung.scenario.cable
    for i in range(len(cables)):
        for j in range(i + 1, len(cables)):
            if _meet(hung, i, j):
                continue
            near, line = _nearest_pair(hung, i, j)
            if near < APART:
                yield _finding(f"cable {cables[i].name}", f"from cable {cables[j].name}", APART, near, "they rub (common practice)", line)


def _meet(hung: Hung, i: int, j: int) -> bool:
    """Whether two cables share an end as drawn, or leave one point of a spar."""
    a, b = hung.scenario.cable[i], hung.scenario.cable[j]
    same_anchor = isinstance(a.to, AnchorPoint) and isinstance(b.to, AnchorPoint) and a.to.anchor == b.to.anchor
    ends_a, ends_b = hung.curves[0, i][[0, -1]], hung.curves[0, j][[0, -1]]
    return same_anchor or bool((np.linalg.norm(ends_a[:, None] - ends_b[None], axis=-1) < 2 * APART + a.from_.arm + b.from_.arm).any())


def _nearest_pair(hung: Hung, i: int, j: int) -> tuple[float, CaseLine | None]:
    """Least distance of two cables over the cases; of cables that cannot come near, a bound that tells so.

    That is the distance in the first case less what they move, or that of their points less half a piece of each.
    """
    first = hung.curves[0, [i, j]]
    moves = float(np.nansum(np.nanmax(np.linalg.norm(hung.curves[:, [i, j]] - first, axis=-1), axis=(0, 2), initial=0.0)))
    still = float(apart(*first))
    if still - moves > APART:
        return still - moves, None
    one, other = hung.curves[:, i], hung.curves[:, j]
    squared = sum((one[:, :, None, axis] - other[:, None, :, axis]) ** 2 for axis in range(3))
    points = np.sqrt(np.min(squared, axis=(1, 2))) - 0.5 * (_piece(hung, i) + _piece(hung, j))
    near = np.flatnonzero(points < APART)
    return _nearest([hung.lines[k] for k in near], hung.curves[near, i], hung.curves[near, j])


def _near_fitting(hung: Hung, spar: SparLine, fitting: Fitting) -> Iterator[str]:
    """Cables that pass within the radius of a disc of the fitting's area round its centre, those made fast beside it left out."""
    radius = math.sqrt((fitting.area or 0.0) / math.pi)
    offset = np.array([fitting.offset.east, fitting.offset.north, fitting.offset.up])
    drawn = spar.drawn[:, None] + np.moveaxis(spar.displacement, 0, 1)
    places = np.array([[np.interp(fitting.at, spar.station, drawn[:, k, i]) for i in range(3)] for k in range(len(hung.lines))]) + offset
    away = np.linalg.norm(hung.curves - places[:, None, None], axis=-1)
    for n, cable in enumerate(hung.scenario.cable):
        ends = [p for p in (cable.from_, cable.to) if isinstance(p, SparPoint)]
        beside = any(p.spar == spar.name and abs(p.at - fitting.at) < 2 * (radius + APART) for p in ends)
        if beside or np.isnan(away[:, n]).all() or np.nanmin(away[:, n]) > radius + _piece(hung, n):
            continue
        near, line = _nearest(hung.lines, hung.curves[:, n], np.stack([places, places], axis=1))
        if near < radius and line is not None:
            disc = f"whose area is a disc of {radius:.2f} m"
            yield f"cable {cable.name} passes {near:.2f} m from the middle of {fitting.name}, {disc}, in {line.name}"


def _piece(hung: Hung, cable: int) -> float:
    """Greatest length of a straight piece of a cable's curve."""
    return float(np.nanmax(np.linalg.norm(np.diff(hung.curves[:, cable], axis=1), axis=-1), initial=0.0))


def _anchors_beside_cables(hung: Hung) -> Iterator[Finding]:
    pieces = [_piece(hung, n) for n in range(len(hung.scenario.cable))]
    for at, anchor in zip(hung.anchors, hung.scenario.anchor, strict=True):
        points = np.nanmin(np.linalg.norm(hung.curves - at, axis=-1), axis=(0, 2), initial=math.inf)
        for n, cable in enumerate(hung.scenario.cable):
            own = isinstance(cable.to, AnchorPoint) and cable.to.anchor == anchor.name
            if own or not points[n] - pieces[n] < BESIDE:
                continue
            near, line = _nearest(hung.lines, hung.curves[:, n], np.stack([at, at]))
            if near < BESIDE:
                yield _finding(
                    f"anchor {anchor.name}", f"from cable {cable.name}", BESIDE, near, "another anchor's cable (common practice)", line
                )


# ---------------------------------------------------------------- what is told, not judged


def warnings(site: Site | None, hung: Hung) -> Iterator[str]:
    """What stands in a fall circle, and cables that may foul a fitting, in words."""
    for spar_line, spar in zip(hung.spars, hung.scenario.spar, strict=True):
        for fitting in spar.fitting:
            if fitting.area:
                yield from _near_fitting(hung, spar_line, fitting)
    yield from _in_the_fall(site, hung)


def fall_circles(spars: Sequence[SparLine], carried_by: Mapping[str, str]) -> list[tuple[str, Array, float]]:
    """For every spar on the ground its name, foot (3,) and the farthest any point of it, or of spars it carries, is from that foot."""

    def root(name: str) -> str:
        return root(carried_by[name]) if name in carried_by else name

    circles = []
    for spar in spars:
        if spar.name not in carried_by:
            family = [other.drawn for other in spars if root(other.name) == spar.name]
            reach = max(float(np.linalg.norm(points - spar.drawn[0], axis=1).max()) for points in family)
            circles.append((spar.name, spar.drawn[0], reach))
    return circles


def _in_the_fall(site: Site | None, hung: Hung) -> Iterator[str]:
    """What stands in the fall circle of each spar, in words."""
    if site is None or not site.obstacles:
        return
    from shapely import Point

    for name, foot, reach in fall_circles(hung.spars, hung.carried_by):
        near = sorted((float(o.shape.distance(Point(foot[0], foot[1]))), o.name, o.kind) for o in site.obstacles)
        told = ", ".join(f"{other} ({kind}, {away:.1f} m from its foot)" for away, other, kind in near if away < reach)
        if told:
            yield f"within the fall circle of {name}, {reach:.1f} m: {told}"
