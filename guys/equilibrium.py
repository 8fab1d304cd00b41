"""Net force and moment on every node of every case, and their tangent.

The unknown is the pose of the nodes: displacement u and rotation R = I + psi.  All that pushes back has a potential (beams, cables,
joints, springs of giving anchors, dead loads on rigid arms), so the residual is its gradient g and the tangent K its Hessian for the
update u <- u + du, R <- exp(theta) R.  Equilibrium: g = 0 in every free direction; a positive definite K there is a stable one.

A point of a node with the turned arm a = R r passes a force gradient g_p and a stiffness k on as

    g_u = g_p,  g_theta = a x g_p,     K = [[k, -k [a]x], [[a]x k, -[a]x k [a]x + (a g_p^T + g_p a^T)/2 - (a.g_p) I]].

Out-of-balance is the greatest net force over the reference force, or net moment over that times the length of its spar, whichever is
greater; the reference force is the largest of total weight, total wind, greatest tension and 1 N.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from guys import band, beam, cable, columns, joint
from guys.constants import NONZERO
from guys.loads import LoadCases, joined
from guys.rotation import Array, cross, dot, dyad_curvature, dyad_moment, turn, turned
from guys.structure import Points, Structure

Index = NDArray[np.int64]
UPSIDE_DOWN = 1e-15
"""Least 1 + cos of a foot's tilt that is more than rounding: turned over by 180° there is no spin to undo (`Problem.spin_of_tilts`)."""


@dataclass(frozen=True)
class State:
    """u (case, node, 3) [m]; psi (case, node, 3, 3); tension (case, cable, 3) [N] at mid-length (zero: not known); axial (case, element)
    [N] the axial force to build the geometric stiffness with (NaN: that of the present position)."""

    u: Array
    psi: Array
    tension: Array
    axial: Array

    def take(self, rows: Index) -> State:
        """The cases `rows`."""
        return State(self.u[rows], self.psi[rows], self.tension[rows], self.axial[rows])

    @staticmethod
    def join(parts: Sequence[State]) -> State:
        """States one after another."""
        return State(*(np.concatenate([getattr(p, n) for p in parts]) for n in ("u", "psi", "tension", "axial")))

    def put(self, rows: Index, other: State) -> None:
        """Write the cases of `other` at `rows`."""
        self.u[rows], self.psi[rows], self.tension[rows], self.axial[rows] = other.u, other.psi, other.tension, other.axial


@dataclass(frozen=True)
class Evaluation:
    """What acts at one state.

    structural (case, node, 6) : net force and moment on each node of all but springs, joints and what rides on it; gradient : with springs
    and joints; residual (case, unknown); error (case,) out-of-balance; reference (case,) [N]; the rest is kept for the tangent
    """

    bent: beam.Bent
    hanging: cable.Hanging
    arm_a: Array
    arm_b: Array
    dyad: Array
    holding: Array
    structural: Array
    gradient: Array
    residual: Array
    error: Array
    reference: Array


@dataclass(frozen=True)
class Runs:
    """Where cables run as drawn, a row for every case or one for all: apart (row, cable, 3) [m] from the node of end A to that of end B;
    arm_a, arm_b (row, cable, 3) [m] from these nodes to the ends."""

    apart: Array
    arm_a: Array
    arm_b: Array

    @staticmethod
    def of(structure: Structure) -> Runs:
        """Those of one structure."""
        a, b = structure.cables.a, structure.cables.b
        return Runs((structure.position[b.node] - structure.position[a.node])[None], a.arm[None], b.arm[None])

    def take(self, rows: Index) -> Runs:
        """Those of the cases `rows`."""
        return Runs(self.apart[rows], self.arm_a[rows], self.arm_b[rows])


@dataclass(frozen=True)
class Problem:
    """A structure under load cases with given unstressed lengths [m] at the setting temperature.

    length : (cable,), or (case, cable) where cases differ in it
    moved : where the cables of every case run, where that is not as the structure has them: see `side_by_side`
    """

    structure: Structure
    loads: LoadCases
    length: Array
    moved: Runs | None = None

    @property
    def cases(self) -> int:
        """Number of cases."""
        return len(self.loads.lines)

    @property
    def pattern(self) -> band.Pattern:
        """Where the tangent's blocks go."""
        return self.structure.pattern

    @cached_property
    def runs(self) -> Runs:
        """Where cables run."""
        return Runs.of(self.structure) if self.moved is None else self.moved

    @cached_property
    def natural(self) -> Array:
        """(case, cable) unstressed lengths at the cases' temperatures [m]."""
        return np.asarray(self.length * (1 + self.structure.cables.expansion * self.loads.warming[:, None]))

    @cached_property
    def ride_growth(self) -> Array:
        """(case, ride, 3) growth of riding nodes' arms at the cases' temperatures [m]."""
        return np.asarray(self.loads.warming[:, None, None] * self.structure.ride_growth)

    @cached_property
    def mass(self) -> Array:
        """(unknown,) scale of the tangent's diagonal: the weight over the height for translations, times (height/4)^2 for rotations.
        A least eigenvalue is called zero relative to it."""
        s = self.structure
        k = max(s.weight, 1.0) / s.height
        return np.where(self.pattern.free[:, 1] < 3, k, k * (s.height / 4) ** 2)

    @cached_property
    def lever(self) -> Array:
        """(unknown,) [m] what a net moment is divided by: 1 for forces, the length of the node's spar for moments."""
        s = self.structure
        spar = s.spar[self.pattern.free[:, 0]]
        return np.where(self.pattern.free[:, 1] < 3, 1.0, s.length[spar])

    def take(self, rows: Index) -> Problem:
        """The cases `rows`."""
        length = self.length if self.length.ndim == 1 else self.length[rows]
        return Problem(self.structure, self.loads.take(rows), length, None if self.moved is None else self.moved.take(rows))

    def drawn(self) -> State:
        """The unloaded geometry, for every case."""
        s, c = self.structure, self.cases
        return State(
            np.zeros((c, s.nodes, 3)),
            np.zeros((c, s.nodes, 3, 3)),
            np.zeros((c, len(s.cables.EA), 3)),
            np.full((c, len(s.elements.i)), np.nan),
        )

    def repeat(self, state: State) -> State:
        """One case's state for every case."""
        c = self.cases
        return State(*(np.repeat(x[:1], c, axis=0) for x in (state.u, state.psi, state.tension, state.axial)))

    def arms(self, state: State) -> Array:
        """(case, ride, 3) turned arms of riding nodes."""
        carriers = np.array(self.structure.rides.carrier, dtype=np.int64)
        return turned(state.psi[:, carriers], self.structure.ride_arm + self.ride_growth)

    def reach(self, points: Points, state: State, arm: Array | None = None) -> tuple[Array, Array]:
        """Turned arms (case, point, 3) and displacement from the drawn node position (case, point, 3) of points; `arm` in place of
        theirs."""
        arm = (points.arm if arm is None else arm) + self.loads.warming[:, None, None] * points.growth
        a = turned(state.psi[:, points.node], arm)
        return a, state.u[:, points.node] + a

    def chords(self, state: State) -> tuple[Array, Array, Array]:
        """Turned arms at ends A and B, and chord vectors B - A (case, cable, 3)."""
        cables, runs = self.structure.cables, self.runs
        arm_a, at_a = self.reach(cables.a, state, runs.arm_a)
        arm_b, at_b = self.reach(cables.b, state, runs.arm_b)
        return arm_a, arm_b, runs.apart + (at_b - at_a)

    def pull(self, chord: Array, warm: Array) -> cable.Hanging:
        """Cables of all cases at given chords (case, cable, 3)."""
        c, k = chord.shape[:2]
        flat = chord.reshape(-1, 3)
        length = self.natural.reshape(-1)
        stiffness = np.broadcast_to(self.structure.cables.EA, (c, k)).reshape(-1)
        if self.structure.scenario.analysis.cable == "straight":
            out = cable.pull_straight(flat, length, stiffness)
        else:
            out = cable.hang(flat, length, stiffness, self.cable_total.reshape(-1, 3), warm.reshape(-1, 3))
        shape = (c, k, 3)
        return cable.Hanging(
            out.tension.reshape(shape), out.at_a.reshape(shape), out.at_b.reshape(shape), out.stiffness.reshape(c, k, 3, 3)
        )

    @cached_property
    def cable_total(self) -> Array:
        """(case, cable, 3) [N] whole load of every cable."""
        return self.loads.cable_load * self.length[..., None]

    def evaluate(self, state: State) -> Evaluation:
        """Net forces and moments of every case."""
        bent = self._bend(state)
        arm_a, arm_b, chord = self.chords(state)
        hanging = self.pull(chord, state.tension)
        dyad = self.loads.dyad + state.psi @ self.loads.dyad
        structural = self._structural(bent, hanging, arm_a, arm_b, dyad)
        gradient, holding = self._supported(state, structural)
        residual = band.unknowns_of(self.pattern, gradient, self.arms(state))
        reference = self._reference(hanging)
        error = np.max(np.abs(residual) / self.lever, axis=1, initial=0.0) / reference
        return Evaluation(bent, hanging, arm_a, arm_b, dyad, holding, structural, gradient, residual, error, reference)

    def _structural(self, bent: beam.Bent, hanging: cable.Hanging, arm_a: Array, arm_b: Array, dyad: Array) -> Array:
        """Net force and moment on every node (case, node, 6) of beams, cables and loads."""
        present = self.loads.present[..., None]
        ends = beam.gradient(bent)
        rows = [ends[..., :6], ends[..., 6:]]
        for arm, force in ((arm_a, -hanging.at_a * present), (arm_b, hanging.at_b * present)):
            rows.append(np.concatenate([force, cross(arm, force)], axis=-1))
        out = self._to_nodes @ np.concatenate(rows, axis=1)
        out[..., :3] -= self.loads.force
        out[..., 3:] -= dyad_moment(dyad)
        return np.asarray(out)

    def _supported(self, state: State, structural: Array) -> tuple[Array, Array]:
        """The same with the springs of giving anchors and the joints, and the joints' Hessians."""
        s = self.structure
        out = structural.copy()
        out[:, s.anchor, :3] += self._springs[:, None] * state.u[:, s.anchor]
        held, holding = joint.resist(s.joints, state.psi)
        for k, (carrier, spar) in enumerate(zip(s.joints.carrier_node, s.joints.spar_node, strict=True)):
            out[:, carrier, 3:] += held[:, k, 0]
            out[:, spar, 3:] += held[:, k, 1]
        return out, holding

    @cached_property
    def room(self) -> band.Room:
        """Memory for the tangents of these cases; one search at a time may use it."""
        return band.room(self.pattern, self.cases, len(self.structure.elements.i))

    @cached_property
    def _to_nodes(self) -> Array:
        """(node, row) of ones: which node each end of an element, then of a cable, belongs to."""
        s = self.structure
        nodes = np.concatenate([s.elements.i, s.elements.j, s.cables.a.node, s.cables.b.node])
        out = np.zeros((s.nodes, len(nodes)))
        out[nodes, np.arange(len(nodes))] = 1.0
        return out

    @cached_property
    def _springs(self) -> Array:
        """(anchor,) [N/m], 0 where an anchor does not give (its node is held)."""
        return np.where(np.isfinite(self.structure.give), self.structure.give, 0.0)

    def _reference(self, hanging: cable.Hanging) -> Array:
        greatest = np.maximum(np.linalg.norm(hanging.at_a, axis=-1), np.linalg.norm(hanging.at_b, axis=-1)) * self.loads.present
        tension = np.max(greatest, axis=1, initial=0.0)
        return np.asarray(np.maximum.reduce([self.loads.weight, self.loads.wind_force, tension, np.ones(self.cases)]))

    def _bend(self, state: State) -> beam.Bent:
        s, e = self.structure, self.structure.elements
        u, psi = columns.first(state.u), columns.first(state.psi)
        y, z = (np.sum(psi * axis[None, :, :, None], axis=1) for axis in self._triads)
        i, j = self._ends
        thermal = e.expansion[:, None] * self.loads.warming
        return beam.bend(s.elements.rods, u[:, j] - u[:, i], y[:, i], z[:, i], y[:, j], z[:, j], thermal)

    @cached_property
    def _triads(self) -> tuple[Array, Array]:
        """(3, node) the drawn axes every node turns with as its elements' y and z."""
        axes = self.structure.axes[np.maximum(self.structure.spar, 0)]
        return axes[:, 0].T, axes[:, 1].T

    @cached_property
    def _ends(self) -> tuple[band.Selection, band.Selection]:
        """Nodes at both ends of the elements."""
        return band.selection(self.structure.elements.i), band.selection(self.structure.elements.j)

    def tangent(self, state: State, found: Evaluation) -> Array:
        """The tangent at an evaluated state as a lower band (case, unknown, width), with the axial forces `state.axial` asks for.

        It holds until the next tangent of this problem, which is written over it.
        """
        s = self.structure
        axial = np.where(np.isnan(state.axial), found.bent.axial, state.axial)
        beams = beam.blocks(s.elements.rods, found.bent, axial, self.room.elements)
        blocks = band.add_up(self.pattern, [*beams, *self._cable_blocks(found), *_joint_blocks(found.holding, s.joints)], self.room)
        blocks[3:, 3:, : s.nodes] -= columns.first(dyad_curvature(found.dyad))
        if self._springs.any():
            for k in range(3):
                blocks[k, k, s.anchor] += self._springs[:, None]
        return band.to_band(self.pattern, band.fold(self.pattern, blocks, found.gradient, self.arms(state)), self.room)

    def _cable_blocks(self, found: Evaluation) -> tuple[Array, Array, Array]:
        """(6, 6, cable, case) at B; and, where A is not held, at A and between them with the higher node's rows."""
        s, present = self.structure, self.loads.present
        hanging, arm_a, arm_b = found.hanging, found.arm_a, found.arm_b
        k = columns.first(hanging.stiffness) * present.T
        loose = s.loose
        at_b = _passed_on(k, columns.first(arm_b), columns.first(hanging.at_b) * present.T)
        k, arm_a, arm_b = k[:, :, loose], columns.first(arm_a[:, loose]), columns.first(arm_b[:, loose])
        at_a = _passed_on(k, arm_a, -columns.first(hanging.at_a[:, loose]) * present[:, loose].T)
        turned_b = columns.flipped(columns.cross(arm_b, k))
        between = -columns.block(k, columns.cross(arm_a, k), turned_b, columns.cross(arm_a, turned_b))
        a, b = s.cables.a.node[loose], s.cables.b.node[loose]
        between[:, :, a < b] = columns.flipped(between[:, :, a < b])
        between[:, :, a == b] += columns.flipped(between[:, :, a == b])
        return at_b, at_a, between

    def whole_step(self, state: State, step: Array) -> Array:
        """(case, node, 6) of a step (case, unknown), riding nodes moved with their carriers."""
        out = band.nodes_of(self.pattern, step)
        arms = self.arms(state)
        rides = self.structure.rides
        for k in reversed(range(len(rides.node))):
            node, carrier = rides.node[k], rides.carrier[k]
            out[:, node, :3] = out[:, carrier, :3] + cross(out[:, carrier, 3:], arms[:, k])
            if rides.welded[k]:
                out[:, node, 3:] = out[:, carrier, 3:]
        return out

    def limited(self, state: State, step: Array, turning: float | Array, moving: float | Array) -> Array:
        """The step (case, unknown), shortened where it would turn a node more than `turning` [rad] or move one more than `moving` [m]."""
        whole = self.whole_step(state, step)
        turns = np.max(np.abs(whole[..., 3:]), axis=(1, 2), initial=0.0)
        moves = np.max(np.abs(whole[..., :3]), axis=(1, 2), initial=0.0)
        share = np.minimum(1.0, np.minimum(turning / np.maximum(turns, NONZERO), moving / np.maximum(moves, NONZERO)))
        return np.asarray(share[:, None] * step)

    def advance(self, state: State, found: Evaluation, step: Array) -> State:
        """The state after a step (case, unknown), its axial forces predicted from the step."""
        s = self.structure
        whole = self.whole_step(state, step)
        u, psi = state.u + whole[..., :3], turn(state.psi, whole[..., 3:])
        self._unspin(psi)
        self._seat(u, psi)
        both = np.concatenate([whole[:, s.elements.i], whole[:, s.elements.j]], axis=-1)
        axial = beam.predicted_axial(s.elements.rods, found.bent, both)
        return State(u, psi, found.hanging.tension, axial)

    def seated(self, state: State) -> State:
        """The state with riding feet where their carriers hold them at the cases' temperatures: one found at another may be off."""
        u, psi = state.u.copy(), state.psi.copy()
        self._seat(u, psi)
        return replace(state, u=u, psi=psi)

    def _seat(self, u: Array, psi: Array) -> None:
        s, rides = self.structure, self.structure.rides
        for k in reversed(range(len(rides.node))):
            node, carrier = rides.node[k], rides.carrier[k]
            if rides.welded[k]:
                psi[:, node] = psi[:, carrier]
            u[:, node] = u[:, carrier] + psi[:, carrier] @ s.ride_arm[k] + turned(psi[:, carrier], self.ride_growth[:, k])

    def spin_of_tilts(self, state: State, found: Evaluation) -> tuple[Array, Array]:
        """What the last tangent leaves out at feet that do not spin: net forces change by (K - sum c a^T) d.

        c, a : (case, unknown, 3 a foot)

        Tilting such a foot also turns it back about its drawn axis t (`_unspin`), by a.d with a = (x'.t, y'.t)/(x'.x + y'.y) for the turned
        axes x', y': c is the tangent's column of the held spin.  And the moment m the foot passes on about t does not follow the tilt, so
        that turning about x changes the moment about y by m/2 and the other way round: K is the symmetric part.
        """
        s = self.structure
        flat = self.room.blocks.reshape(36 * self.room.blocks.shape[2], self.cases)
        whole = band.fold_gradient(self.pattern, found.gradient, self.arms(state))
        c = np.zeros((self.cases, self.pattern.unknowns, 3 * len(s.unspun)))
        a = np.zeros(c.shape)
        for row, k in enumerate(s.unspun):
            x, y, t = s.axes[k]
            tilts, first = s.tilts[row], 3 * row
            turned_x, turned_y = turned(state.psi[:, s.foot[k]], x), turned(state.psi[:, s.foot[k]], y)
            c[:, :, first] = flat[s.spin_columns[row]].T
            upright = np.maximum(turned_x @ x + turned_y @ y, UPSIDE_DOWN)
            a[:, tilts, first] = -np.stack([turned_x @ t, turned_y @ t], axis=-1) / upright[:, None]
            half = 0.5 * (whole[:, s.foot[k], 3:] @ t)
            c[:, tilts[0], first + 1] = c[:, tilts[1], first + 2] = 1.0
            a[:, tilts[1], first + 1], a[:, tilts[0], first + 2] = -half, half
        return c, a

    def _unspin(self, psi: Array) -> None:
        """Turn feet that do not spin back about their drawn axis, so that their rotation vector is square to it.

        Tilting first about one axis and then about another leaves a spin of second order, which would depend on the path of the solver.
        """
        for k in self.structure.unspun:
            node, (x, y, t) = self.structure.foot[k], self.structure.axes[k]
            turned_x, turned_y = turned(psi[:, node], x), turned(psi[:, node], y)
            spin = np.arctan2(turned_x @ y - turned_y @ x, turned_x @ x + turned_y @ y)
            psi[:, node] = turn(psi[:, node], -spin[:, None] * t)

    def heading(self, state: State) -> Array:
        """(case, spar, 3) unit vectors from foot to head."""
        s = self.structure
        _, reached = self.reach(s.head, state)
        line = s.position[s.head.node] - s.position[s.foot] + reached - state.u[:, s.foot]
        return np.asarray(line / np.sqrt(dot(line, line))[..., None])


def side_by_side(problems: Sequence[Problem]) -> Problem:
    """The cases of several problems in one, whose structures differ only in where anchors stand."""
    if len(problems) == 1:
        return problems[0]

    def each(of: Callable[[Problem], Array]) -> Array:
        """(case, cable, ...) from rows of one problem for all its cases, or a row for each."""
        return np.concatenate([np.broadcast_to(of(p), (p.cases, *of(p).shape[1:])) for p in problems])

    runs = Runs(each(lambda p: p.runs.apart), each(lambda p: p.runs.arm_a), each(lambda p: p.runs.arm_b))
    length = each(lambda p: p.length.reshape(-1, p.length.shape[-1]))
    return Problem(problems[0].structure, joined([p.loads for p in problems]), length, runs)


def _passed_on(k: Array, arm: Array, force: Array) -> Array:
    """What a point's stiffness (3, 3, ...) and force gradient (3, ...) are at its node, through a turned arm (3, ...): (6, 6, ...)."""
    tu = columns.cross(arm, k)
    half = columns.outer(0.5 * arm, force)
    tt = columns.cross(arm, columns.flipped(tu)) + half + columns.flipped(half)
    columns.add_diagonal(tt, -columns.dot(arm, force))
    return columns.block(k, tu, columns.flipped(tu), tt)


def _joint_blocks(holding: Array, joints: joint.Joints) -> tuple[Array, Array, Array]:
    """Hessians (case, joint, 2, 2, 3, 3) of joints as blocks (6, 6, joint, case): at the carrier, at the spar, between them."""
    h = holding.transpose(2, 3, 4, 5, 1, 0)
    carrier_first = joints.carrier_node >= joints.spar_node
    between = np.where(carrier_first[:, None], h[0, 1], h[1, 0])
    out = np.zeros((3, 6, 6, *h.shape[4:]))
    out[:, 3:, 3:] = h[0, 0], h[1, 1], between
    return out[0], out[1], out[2]
