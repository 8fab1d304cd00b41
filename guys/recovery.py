"""From solved states to the forces people ask for: cable ends, anchors, feet, and section forces along every spar.

What a spar does to what carries its foot is its unbalanced force and moment there, joints left out; what rides on it is added
first, outermost first.  Section forces of an elastic spar are the element's end forces less what its own distributed load brought to that
end, so they are exact at both ends of every element; those of a rigid spar are summed from its head down.
A section force acts on the part toward the foot: tension, and the moment of the part beyond.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, fields

import numpy as np
from numpy.typing import NDArray

from guys import beam, cable
from guys.equilibrium import Evaluation, Problem, State
from guys.results import SparLine
from guys.rotation import Array, cross, turned
from guys.scenario.model import SparPoint

SLACK_HANGING = 1e-6
"""A catenary is slack where the tension at mid-length is below its own load by more than this share of that load."""

AT_CUT = 1e-9
"""What hangs at a cut of a rigid spar, to this share of its length, counts above it."""


Acting = Mapping[int, tuple[Array, Array]]
"""By spar: section forces and moments (case, piece, 2 ends, 3) about the turned local axes x, y, t."""


@dataclass(frozen=True)
class Forces:
    """End forces of every case (see `guys.results` for shapes): at cables' ends, on anchors, on what carries every spar's foot; foot_up
    (case, spar) [N] the greatest upward part of the latter; head_off (case, spar, 3) how far the line foot-head, of length 1, has turned
    off the drawn axis."""

    tension_anchor: Array
    tension_top: Array
    on_anchor: Array
    on_spar: Array
    length: Array
    slack: NDArray[np.bool_]
    present: NDArray[np.bool_]
    pull: Array
    foot_force: Array
    foot_up: Array
    foot_moment: Array
    head_off: Array

    @property
    def head_lean(self) -> Array:
        """(case, spar) [rad] between the drawn axis and the line foot-head."""
        return np.asarray(2 * np.arcsin(np.minimum(1.0, 0.5 * np.linalg.norm(self.head_off, axis=-1))))

    def blank(self, rows: NDArray[np.int64]) -> Forces:
        """NaN (False) in the cases `rows`."""
        out = {f.name: getattr(self, f.name).copy() for f in fields(self)}
        for value in out.values():
            value[rows] = False if value.dtype == bool else np.nan
        return Forces(**out)


def join(parts: list[Forces]) -> Forces:
    """Cases of several batches one after another."""
    return Forces(**{f.name: np.concatenate([getattr(p, f.name) for p in parts]) for f in fields(Forces)})


def forces(problem: Problem, state: State, found: Evaluation) -> Forces:
    """End forces of every case of an equilibrium.

    Raises ValueError for layouts side by side, since anchors stand where the structure has them: each is recovered by itself.
    """
    if problem.moved is not None:
        raise ValueError("layouts side by side are recovered one by one")
    s = problem.structure
    present = problem.loads.present > 0
    at_a, at_b = found.hanging.at_a * present[..., None], found.hanging.at_b * present[..., None]
    force, moment = _feet(problem, state, found)
    drawn = s.axes[:, 2]
    return Forces(
        tension_anchor=np.linalg.norm(at_a, axis=-1),
        tension_top=np.linalg.norm(at_b, axis=-1),
        on_anchor=at_a,
        on_spar=-at_b,
        length=np.broadcast_to(problem.length, present.shape).copy(),
        slack=(looseness(problem, state, found) > 0) & present,
        present=present,
        pull=-found.structural[:, s.anchor, :3],
        foot_force=force,
        foot_up=force[..., 2].copy(),
        foot_moment=moment,
        head_off=problem.heading(state) - drawn,
    )


def looseness(problem: Problem, state: State, found: Evaluation) -> Array:
    """(case, cable) above zero where a cable is slack; continuous in the state, so that the wind at which it drops can be found.

    A catenary by what its tension at mid-length lacks, of its own load; a weightless cable by its length over the chord.
    """
    _, _, chord = problem.chords(state)
    longer = problem.natural / np.linalg.norm(chord, axis=-1) - (1 + cable.SLACK_BELOW)
    own = np.linalg.norm(problem.cable_total, axis=-1)
    lacking = (1 - SLACK_HANGING) - np.linalg.norm(found.hanging.tension, axis=-1) / np.where(own > 0, own, 1.0)
    return np.asarray(np.where(own > 0, lacking, longer))


def _feet(problem: Problem, state: State, found: Evaluation) -> tuple[Array, Array]:
    """Forces and moments (case, spar, 3) on what carries each foot."""
    s = problem.structure
    g = found.structural.copy()
    at_foot = {}
    arms = problem.arms(state)
    for k, (node, carrier) in enumerate(zip(s.rides.node, s.rides.carrier, strict=True)):
        at_foot[node] = g[:, node].copy()
        g[:, carrier, :3] += g[:, node, :3]
        g[:, carrier, 3:] += g[:, node, 3:] + cross(arms[:, k], g[:, node, :3])
    rows = np.stack([at_foot.get(int(n), g[:, n]) for n in s.foot], axis=1)
    return -rows[..., :3], -rows[..., 3:]


def curves(problem: Problem, state: State, found: Evaluation, points: int) -> Array:
    """Cables as they hang (case, cable, points, 3), from the `to` end."""
    start, hung = _hanging(problem, state, found)
    if hung is None:
        _, _, chord = problem.chords(state)
        return np.asarray(start[:, :, None] + np.linspace(0, 1, points)[:, None] * chord[:, :, None])
    return np.asarray(start[:, :, None] + cable.curve(hung, points).reshape(*start.shape[:2], points, 3))


def _hanging(problem: Problem, state: State, found: Evaluation) -> tuple[Array, cable.Shape | None]:
    """Where the `to` ends are (case, cable, 3) [m], and the shapes from there, flattened (None for straight cables)."""
    s = problem.structure
    _, from_node = problem.reach(s.cables.a, state)
    start = s.position[s.cables.a.node] + from_node
    if s.scenario.analysis.cable == "straight":
        return start, None
    shape = start.shape[:2]
    stiffness = np.broadcast_to(s.cables.EA, shape).reshape(-1)
    return start, cable.shape(
        found.hanging.tension.reshape(-1, 3), problem.cable_total.reshape(-1, 3), problem.natural.reshape(-1), stiffness
    )


def lines(problem: Problem, state: State, acting: Acting) -> tuple[SparLine, ...]:
    """Every spar along its length, by the section forces of all of them."""
    s = problem.structure
    out = []
    for k, spar in enumerate(s.scenario.spar):
        parts = acting[k]
        station, drawn, displacement = _places(problem, state, k)
        force, moment = (p.reshape(p.shape[0], -1, 3) for p in parts)
        out.append(
            SparLine(spar.name, station, drawn, s.axes[k], displacement, force[..., 2], moment[..., :2], moment[..., 2], force[..., :2])
        )
    return tuple(out)


def sections(problem: Problem, state: State, found: Evaluation, spars: Sequence[int]) -> Acting:
    """Section forces and moments (case, piece, 2 ends, 3) about the turned local axes x, y, t, of each of the spars."""
    s = problem.structure
    elastic = [k for k in spars if not s.scenario.spar[k].rigid]
    force, moment = _elastic_sections(problem, state, found) if elastic else (np.empty(0), np.empty(0))
    return {
        k: (force[:, mine], moment[:, mine]) if k in elastic else _rigid_sections(problem, state, found, k)
        for k, mine in ((k, s.elements.spar == k) for k in spars)
    }


def _places(problem: Problem, state: State, k: int) -> tuple[Array, Array, Array]:
    """Stations of spar k (both ends of every piece), their drawn positions and displacements."""
    s = problem.structure
    mine = np.flatnonzero(s.pieces.spar == k)
    station = s.pieces.station[mine].reshape(-1)
    node = np.stack([s.pieces.low[mine], s.pieces.high[mine]], axis=1).reshape(-1)
    t, foot = s.axes[k, 2], s.position[s.foot[k]]
    displacement = state.u[:, node]
    if s.scenario.spar[k].rigid:
        arm = _warm_stations(problem, mine).reshape(problem.cases, -1, 1) * t
        displacement = displacement + turned(state.psi[:, node], arm) - station[:, None] * t
    return station, foot + station[:, None] * t, displacement


def _warm_stations(problem: Problem, rows: NDArray[np.int64]) -> Array:
    """(case, row, 2) distances of the ends of a rigid spar's pieces from its foot, at the cases' temperatures [m]."""
    pieces = problem.structure.pieces
    return np.asarray(pieces.station[rows] + problem.loads.warming[:, None, None] * pieces.growth[rows])


def _elastic_sections(problem: Problem, state: State, found: Evaluation) -> tuple[Array, Array]:
    """Section forces and moments (case, element, 2 ends, 3) about the turned local axes x, y, t."""
    s, e = problem.structure, problem.structure.elements
    ends = beam.gradient(found.bent)
    own = problem.loads.on_pieces[:, ~s.pieces.rigid]
    axes = s.axes[e.spar]
    force, moment = [], []
    for sign, node, first, cols in ((-1.0, e.i, 0, slice(0, 6)), (1.0, e.j, 2, slice(6, 12))):
        axis = turned(state.psi[:, node, None], axes)
        pushed = ends[..., cols][..., :3] - own[:, :, first]
        turned_by = ends[..., cols][..., 3:] - cross(axis[..., 2, :], own[:, :, first + 1])
        force.append(sign * (axis @ pushed[..., None])[..., 0])
        moment.append(sign * (axis @ turned_by[..., None])[..., 0])
    return np.stack(force, axis=2), np.stack(moment, axis=2)


@dataclass(frozen=True)
class _Hung:
    """What is made fast to a rigid spar: station [m], its distance from the foot as warm as it is (case, 1) [m], force (case, 3) [N] on the
    spar, moment (case, 3) [N m] about the axis there."""

    station: float
    along: Array
    force: Array
    moment: Array


def _rigid_sections(problem: Problem, state: State, found: Evaluation, k: int) -> tuple[Array, Array]:
    """The same for rigid spar k: (case, piece, 2 ends, 3), summed from the head down."""
    s = problem.structure
    mine = np.flatnonzero(s.pieces.spar == k)
    axes = turned(state.psi[:, s.foot[k], None], s.axes[k])
    t = axes[:, 2]
    hung, at = _hung_on(problem, state, found, k), _warm_stations(problem, mine)[..., None]
    force, moment = np.zeros((problem.cases, 3)), np.zeros((problem.cases, 3))
    out_f, out_m = np.zeros((problem.cases, len(mine), 2, 3)), np.zeros((problem.cases, len(mine), 2, 3))
    above = np.inf
    for row in reversed(range(len(mine))):
        high, warm = s.pieces.station[mine[row], 1], at[:, row]
        least = high - AT_CUT * s.length[k]
        for h in hung:
            if least <= h.station < above:
                moment = moment + h.moment + cross((h.along - warm[:, 1]) * t, h.force)
                force = force + h.force
        above = least
        out_f[:, row, 1], out_m[:, row, 1] = force, moment
        q, lever = problem.loads.on_pieces[:, mine[row], 0], problem.loads.on_pieces[:, mine[row], 1]
        moment = moment + cross((warm[:, 1] - warm[:, 0]) * t, force) + cross(t, lever - warm[:, 0] * q)
        force = force + q
        out_f[:, row, 0], out_m[:, row, 0] = force, moment
    return np.einsum("cab,cpeb->cpea", axes, out_f), np.einsum("cab,cpeb->cpea", axes, out_m)


def _hung_on(problem: Problem, state: State, found: Evaluation, k: int) -> list[_Hung]:
    s, node = problem.structure, int(problem.structure.foot[k])
    t0, psi = s.axes[k, 2], state.psi[:, node]
    out = []

    def add(at: float, arm: Array, growth: Array, force: Array, moment: Array) -> None:
        along = at + problem.loads.warming[:, None] * (growth @ t0)
        out.append(_Hung(at, along, force, moment + cross(turned(psi, arm - at * t0), force)))

    present = problem.loads.present[..., None]
    none = np.zeros((problem.cases, 3))
    for n, cable_run in enumerate(s.scenario.cable):
        for end, points, pull in ((cable_run.to, s.cables.a, found.hanging.at_a), (cable_run.from_, s.cables.b, -found.hanging.at_b)):
            if isinstance(end, SparPoint) and points.node[n] == node:
                add(end.at, points.arm[n], points.growth[n], (pull * present)[:, n], none)
    point = s.fittings.point
    for f in np.flatnonzero(point.node == node):
        add(float(s.fittings.station[f]), point.arm[f], point.growth[f], problem.loads.on_fittings[:, f], none)
    force, moment = _feet(problem, state, found)
    for ride, carrier in enumerate(s.rides.carrier):
        if carrier == node:
            rider = int(np.flatnonzero(s.foot == s.rides.node[ride])[0])
            add(float(s.ride_arm[ride] @ t0), s.ride_arm[ride], s.ride_growth[ride], force[:, rider], moment[:, rider])
    return out


def whole_balance(problem: Problem, state: State, found: Evaluation, given: Forces) -> Array:
    """Greatest imbalance of the whole structure (case,), relative to the reference force (and it times the height for moments).

    Sums what acts from outside, worked out apart from the solver's assembly: loads where they act on the deformed structure, cable
    loads at the centroid of the hanging curve, less the forces on anchors and on the ground.
    """
    s = problem.structure
    at = s.position + state.u
    force, moment = problem.loads.force.sum(axis=1), np.cross(at, problem.loads.force).sum(axis=1)
    moment += _turning_of_levers(problem, state)
    carried, where = cable_loads(problem, state, found)
    force += carried.sum(axis=1)
    moment += np.cross(where, carried).sum(axis=1)
    force -= given.pull.sum(axis=1)
    moment -= np.cross(at[:, s.anchor], given.pull).sum(axis=1)
    for k, foot in enumerate(s.foot):
        if int(foot) not in s.rides.node:
            force -= given.foot_force[:, k]
            moment -= given.foot_moment[:, k] + np.cross(at[:, foot], given.foot_force[:, k])
    off = np.maximum(np.abs(force).max(axis=1), np.abs(moment).max(axis=1) / max(s.height, float(np.abs(at).max())))
    return np.asarray(off / found.reference)


def _turning_of_levers(problem: Problem, state: State) -> Array:
    """Moments of lever loads and of loads on arms, t x lever on pieces, arm x force on fittings and cable ends."""
    s = problem.structure
    total = np.zeros((problem.cases, 3))
    for node, first in ((s.pieces.low, 1), (s.pieces.high, 3)):
        total += np.cross(turned(state.psi[:, node], s.pieces.axis), problem.loads.on_pieces[:, :, first]).sum(axis=1)
    on_points = [(s.fittings.point, problem.loads.on_fittings)]
    on_points += [(points, problem.loads.at_ends[:, :, end]) for end, points in enumerate((s.cables.a, s.cables.b))]
    for points, force in on_points:
        total += np.cross(problem.reach(points, state)[0], force).sum(axis=1)
    return total


def cable_loads(problem: Problem, state: State, found: Evaluation) -> tuple[Array, Array]:
    """Whole load of every cable in place (case, cable, 3) [N] and where it acts (case, cable, 3) [m]."""
    load = problem.cable_total * problem.loads.present[..., None]
    start, hung = _hanging(problem, state, found)
    return load, start if hung is None else start + cable.centroid(hung).reshape(start.shape)
