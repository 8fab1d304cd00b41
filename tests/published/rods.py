"""Chains of the program's beam elements under tip loads: what the scenario format cannot say (curved axes, end moments, frames).

The elements (`guys.beam`), the rotations (`guys.rotation`) and the assembly (`guys.band`) are the program's; here are only a plain Newton
under given loads, one that steers a displacement, and a search for the load at which the least eigenvalue of the tangent vanishes.
A chain is planar or spatial by what it holds; forces and moments are dead (fixed directions).  One chain is one case.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import brentq, minimize_scalar

from guys import band, beam
from guys.rotation import turn

Array = NDArray[np.float64]
CONVERGED = 1e-9
"""Net force at a node, over the load, at which Newton ends ..."""
ROUNDING = 1e-15
"""... or over EA times the chain's length in elements: what rounding of displacements as large as the chain leaves in stiff elements."""
ROUNDS = 60
TURN_CAP = 0.2
"""[rad] greatest turn of a node in one step of Newton, divided by the cube root of the number of elements: a step of t turns the chord of a
short element by t^3/3 too little, and that must stay below what the element bends."""
IN_PLANE_XY = (False, False, True, True, True, False)
"""Directions (of translation, rotation) held at every node of a chain that stays in the plane z = 0."""


@dataclass(frozen=True)
class Section:
    """EA [N], EI for bending in the plane of the axis and `normal` and EI_across for the other, GJ; GA (inf: no shear flexibility)."""

    EA: float
    EI: float
    EI_across: float
    GJ: float
    GA: float = np.inf


@dataclass(frozen=True)
class Chain:
    """Straight elements between successive nodes, rigidly joined.

    position : (node, 3) drawn;  normal : (3,) y axis of every element before it is made square to the element
    held : (node, 6) directions without unknown;  force, moment : (node, 3) the pattern of the load, for a factor of one
    """

    position: Array
    section: Section
    normal: Array
    held: NDArray[np.bool_]
    force: Array
    moment: Array

    @cached_property
    def rods(self) -> beam.Rods:
        along = np.diff(self.position, axis=0)
        h = np.linalg.norm(along, axis=1)
        t = along / h[:, None]
        y = self.normal - (t @ self.normal)[:, None] * t
        y /= np.linalg.norm(y, axis=1)[:, None]
        s, one = self.section, np.ones(len(h))
        phi_y, phi_z = 12 * s.EI_across / (s.GA * h**2), 12 * s.EI / (s.GA * h**2)
        return beam.Rods(h, t, y, np.cross(t, y), s.EA * one, s.EI_across * one, s.EI * one, s.GJ * one, phi_y, phi_z)

    @cached_property
    def pattern(self) -> band.Pattern:
        n = np.arange(len(self.position) - 1)
        return band.lay_out([n, n + 1, n + 1], [n, n + 1, n], self.held, band.Rides((), (), ()), band.Frames((), np.zeros((0, 3, 3))))

    @property
    def lever(self) -> float:
        """[m] length of the chain, which makes forces of moments."""
        return float(self.rods.h.sum())

    @cached_property
    def load(self) -> Array:
        """(unknown,) the load pattern."""
        return band.pick(self.pattern, np.concatenate([self.force, self.moment], axis=1)[None])[0]

    @cached_property
    def scale(self) -> float:
        """Size of the load pattern [N]."""
        return float(max(np.abs(self.force).max(), np.abs(self.moment).max() / self.lever))


@dataclass(frozen=True)
class State:
    """u (node, 3), psi = R - I (node, 3, 3), load factor, and the axial forces (element,) to build the tangent with (None: its own)."""

    u: Array
    psi: Array
    factor: float = 0.0
    axial: Array | None = None


def drawn(chain: Chain) -> State:
    n = len(chain.position)
    return State(np.zeros((n, 3)), np.zeros((n, 3, 3)))


def bend(chain: Chain, state: State) -> beam.Bent:
    rods, i, j = chain.rods, slice(None, -1), slice(1, None)
    y, z = rods.y[..., None], rods.z[..., None]
    changes = [(state.psi[end] @ axis).T.reshape(3, -1, 1) for end in (i, j) for axis in (y, z)]
    return beam.bend(rods, np.diff(state.u, axis=0).T[:, :, None], *changes, np.zeros((len(rods.h), 1)))


def out_of_balance(chain: Chain, bent: beam.Bent, factor: float) -> Array:
    """(unknown,) net force and moment: what the elements resist less the load."""
    ends = beam.gradient(bent)
    nodes = np.zeros((1, len(chain.position), 6))
    nodes[:, :-1] += ends[..., :6]
    nodes[:, 1:] += ends[..., 6:]
    return band.pick(chain.pattern, nodes)[0] - factor * chain.load


def tangent(chain: Chain, bent: beam.Bent, axial: Array | None = None) -> Array:
    """(unknown, unknown) the tangent, full, since it need not be definite here."""
    parts = beam.blocks(chain.rods, bent, bent.axial if axial is None else axial)
    room = band.room(chain.pattern, 1, len(chain.rods.h))
    return band.dense(band.to_band(chain.pattern, band.add_up(chain.pattern, parts, room), room)[0])


def advance(chain: Chain, state: State, bent: beam.Bent, step: Array, factor: float) -> State:
    """After a step (unknown,) and to a load factor; the tangent's axial forces are those predicted from the step."""
    whole = band.nodes_of(chain.pattern, step[None])[0]
    both = np.concatenate([whole[:-1], whole[1:]], axis=1)[None]
    axial = beam.predicted_axial(chain.rods, bent, both)
    return State(state.u + whole[:, :3], turn(state.psi, whole[:, 3:]), factor, axial)


def _capped(chain: Chain, step: Array) -> float:
    turns = np.abs(step[chain.pattern.free[:, 1] >= 3]).max(initial=0.0)
    return float(min(1.0, TURN_CAP / np.cbrt(len(chain.rods.h)) / max(turns, 1e-300)))


def _balanced(chain: Chain, g: Array, factor: float) -> bool:
    lever = np.where(chain.pattern.free[:, 1] < 3, 1.0, chain.lever)
    least = chain.section.EI / chain.lever**2
    floor = ROUNDING * chain.section.EA * chain.lever / chain.rods.h.min()
    return bool(np.abs(g / lever).max() < CONVERGED * max(abs(factor) * chain.scale, least) + floor)


def at_load(chain: Chain, state: State, factor: float) -> State:
    """Newton to the equilibrium under a load factor."""
    for _ in range(ROUNDS):
        bent = bend(chain, state)
        g = out_of_balance(chain, bent, factor)
        if _balanced(chain, g, factor):
            return State(state.u, state.psi, factor)
        step = -np.linalg.solve(tangent(chain, bent, state.axial), g)
        state = advance(chain, state, bent, _capped(chain, step) * step, factor)
    raise AssertionError(f"Newton did not converge at a load factor of {factor:g}")


def at_place(chain: Chain, state: State, node: int, direction: int, place: float) -> State:
    """Newton to the equilibrium in which a node has moved by `place` in a direction; the load factor is what that takes."""
    unknown = int(np.flatnonzero((chain.pattern.free == (node, direction)).all(axis=1))[0])
    for _ in range(ROUNDS):
        bent = bend(chain, state)
        g = out_of_balance(chain, bent, state.factor)
        miss = place - state.u[node, direction]
        if _balanced(chain, g, state.factor) and abs(miss) < CONVERGED * chain.lever:
            return State(state.u, state.psi, state.factor)
        by_rest, by_load = np.linalg.solve(tangent(chain, bent, state.axial), np.column_stack([-g, chain.load])).T
        gain = (miss - by_rest[unknown]) / by_load[unknown]
        step = by_rest + gain * by_load
        share = _capped(chain, step)
        state = advance(chain, state, bent, share * step, state.factor + share * gain)
    raise AssertionError(f"Newton did not converge at a displacement of {place:g}")


def along(chain: Chain, factors: Iterable[float]) -> Iterator[State]:
    """Equilibria under rising loads, each from the last."""
    state = drawn(chain)
    for factor in factors:
        state = at_load(chain, state, factor)
        yield state


def greatest_load(chain: Chain, node: int, direction: int, places: Iterable[float]) -> tuple[float, float]:
    """First greatest load factor on the path of a displacement through `places`, and the displacement there."""
    states = [drawn(chain)]
    for place in places:
        states.append(at_place(chain, states[-1], node, direction, place))
        if states[-1].factor < states[-2].factor:
            break
    before, near, after = (float(s.u[node, direction]) for s in states[-3:])
    found = minimize_scalar(lambda v: -at_place(chain, states[-2], node, direction, v).factor, bracket=(before, near, after), tol=1e-6)
    return -float(found.fun), float(found.x)


def critical_load(chain: Chain, low: float, high: float) -> float:
    """Load factor between two at which the least eigenvalue of the tangent vanishes on the path from the drawing."""
    *_, start = along(chain, np.linspace(0, low, 5)[1:])

    def least(factor: float) -> float:
        state = at_load(chain, start, factor)
        scale = np.where(chain.pattern.free[:, 1] < 3, 1.0, 1 / chain.lever)
        return float(np.linalg.eigvalsh(scale[:, None] * tangent(chain, bend(chain, state)) * scale)[0])

    return float(brentq(least, low, high, xtol=1e-9 * high, rtol=1e-9))


@dataclass(frozen=True)
class Refined:
    """A quantity on meshes of n, 2n and 4n elements: values (3,), the order at which they settle, and the limit by extrapolation."""

    values: Array
    order: float
    limit: float


def refined(values: Sequence[float]) -> Refined:
    """From values on three meshes, each twice as fine as the last.

    The order is log2 of the ratio of successive changes, so it needs no exact value.  The error is a series in the square of the mesh
    length, and extrapolation (Richardson) takes its first two terms away.
    """
    a, b, c = (float(v) for v in values)
    order = float(np.log2(abs((b - a) / (c - b))))
    first, second = (4 * b - a) / 3, (4 * c - b) / 3
    return Refined(np.array([a, b, c]), order, (16 * second - first) / 15)


def straight(length: float, elements: int, section: Section, held: NDArray[np.bool_] | None = None) -> Chain:
    """A chain along x, its normal y, clamped at x = 0 unless told otherwise; no load yet."""
    n = elements + 1
    position = np.zeros((n, 3))
    position[:, 0] = np.linspace(0, length, n)
    clamped = np.zeros((n, 6), bool)
    clamped[0] = True
    return Chain(position, section, np.array([0.0, 1, 0]), clamped if held is None else held, np.zeros((n, 3)), np.zeros((n, 3)))
