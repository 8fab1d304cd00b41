"""How what is asked of cables in still air answers to their unstressed lengths, layout by layout.

A cable's measure m is

    tension given   |T_A| / target for a catenary;  (chord/L0 - 1) EA / target for a straight cable, slack or not
    tight           |T| at mid-length / (w L0) for a catenary;  1 + (chord/L0 - 1) / TIGHT for a straight cable

and m = 1 is wanted.  The derivatives by ln L0 are exact: a change of L0 changes the net forces by -F^-1 dr/dL0 and half the weight at each
end; the nodes answer by du = -K^-1 dg with the tangent already factored; and the end forces follow.

The tension at the anchor against the unstressed length turns back for very slack cables (least value about a fifth of the cable's
weight): the tauter branch is taken, and a target below the least cannot be met.

Every case here is the setting case of a layout of its own.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from guys import band, cable, stability
from guys.constants import NONZERO
from guys.equilibrium import Evaluation, Problem, State
from guys.rotation import Array, cross, dot
from guys.scenario import Scenario

TIGHT = 1e-3
"""Stretch by which the measure of a straight cable that is to be just tight is scaled."""
FIRST_GRID = np.concatenate([np.linspace(0, 1, 60) ** 4 * 1e-2, np.geomspace(1.1e-2, 1.0, 90)])
"""Where a first length is looked for between the tautest it may be (0) and twice that (1): closest where tension falls fast."""
ZOOMS = 3
"""Times a first length is looked for, each time but the first between neighbours of the last, twenty times finer."""


@dataclass(frozen=True)
class Asked:
    """Which cables are adjusted (index), by tension or tight, and the targets [N] (1 for tight)."""

    index: NDArray[np.int64]
    tight: NDArray[np.bool_]
    target: Array


def asked_of(scenario: Scenario) -> Asked:
    """What a scenario asks of its cables."""
    index = [k for k, c in enumerate(scenario.cable) if c.length is None]
    cables = [scenario.cable[k] for k in index]
    return Asked(
        np.array(index, dtype=np.int64),
        np.array([c.tight for c in cables], bool),
        np.array([1.0 if c.tension is None else c.tension for c in cables]),
    )


def first(problem: Problem, asked: Asked) -> tuple[Array, Array]:
    """Lengths (case, asked) [m] that would give the targets at the drawn geometry, on the tauter branch, and the least measures there are
    where no length gives the target (case, asked), else zero."""
    if len(asked.index) == 0:
        return np.zeros((problem.cases, 0)), np.zeros((problem.cases, 0))
    _, _, chord = problem.chords(problem.drawn())
    cases, many = problem.cases, len(asked.index)
    pulled = _Alone(
        chord[:, asked.index].reshape(-1, 3),
        np.tile(problem.structure.cables.EA[asked.index], cases),
        problem.loads.cable_load[:, asked.index].reshape(-1, 3),
        np.tile(asked.target, cases),
        np.tile(asked.tight, cases),
    )
    length, least = _first_straight(pulled) if is_straight(problem) else _first_hanging(pulled)
    return length.reshape(cases, many), least.reshape(cases, many)


@dataclass(frozen=True)
class _Alone:
    """Cables (n,) between points that do not move: chords (n, 3), EA, weight vectors per length (n, 3), targets, which are tight."""

    chord: Array
    EA: Array
    load: Array
    target: Array
    tight: NDArray[np.bool_]

    def measure(self, length: Array) -> Array:
        """Measures (trial, n) of catenaries for trial lengths (trial, n)."""
        trials = len(length)
        flat, load = length.reshape(-1), np.tile(self.load, (trials, 1))
        hanging = cable.hang(np.tile(self.chord, (trials, 1)), flat, np.tile(self.EA, trials), load * flat[:, None])
        by_tight, by_end = size(hanging.tension) / (size(load) * flat), size(hanging.at_a) / np.tile(self.target, trials)
        return np.where(np.tile(self.tight, trials), by_tight, by_end).reshape(length.shape)


def _first_straight(alone: _Alone) -> tuple[Array, Array]:
    c = size(alone.chord)
    return c / np.where(alone.tight, 1.0, 1 + alone.target / alone.EA), np.zeros_like(c)


def _first_hanging(alone: _Alone) -> tuple[Array, Array]:
    c = size(alone.chord)
    low = c / (1 + (alone.target + size(alone.load) * c) / alone.EA)
    high, grid, each = 2 * low, FIRST_GRID, np.arange(len(c))
    least = np.zeros_like(c)
    for _ in range(ZOOMS):
        between = low + grid[:, None] * (high - low)
        measure = alone.measure(between)
        below = measure < 1
        least = np.where((least == 0.0) & ~below.any(axis=0), measure.min(axis=0), least)
        at = np.argmax(below, axis=0)
        low, high = between[np.maximum(at - 1, 0), each], between[at, each]
        grid = np.linspace(0, 1, 20)
    return 0.5 * (low + high), least


def size(v: Array) -> Array:
    """Lengths of vectors (..., 3)."""
    return np.sqrt(dot(v, v))


def is_straight(problem: Problem) -> bool:
    """Whether cables are taken as straight."""
    return problem.structure.scenario.analysis.cable == "straight"


@dataclass(frozen=True)
class Rates:
    """Newton's blocks at one state of every case, with the nodes eliminated.

    measure (case, asked) m; error (case,) out-of-balance; by ln L0, the nodes answering: rate (case, asked, asked) of m, step (case,
    unknown, asked) of the nodes; from what is still unbalanced: drift (case, asked) of m, settle (case, unknown) of the nodes
    """

    measure: Array
    error: Array
    rate: Array
    step: Array
    drift: Array
    settle: Array
    found: Evaluation


def rates(problem: Problem, state: State, asked: Asked) -> Rates:
    """The blocks; the tangent may be indefinite on the way, so it is solved densely."""
    found = problem.evaluate(state)
    k_full = band.dense(problem.tangent(state, found))
    np.einsum("cuu->cu", k_full)[...] += stability.ZERO * problem.mass
    if problem.structure.unspun:
        c, a = problem.spin_of_tilts(state, found)
        k_full -= c @ np.swapaxes(a, 1, 2)
    pushed, direct = _by_length(problem, state, found, asked)
    both = -np.linalg.solve(k_full, np.concatenate([pushed, found.residual[..., None]], axis=2))
    step, settle = both[..., :-1], both[..., -1]
    rate = _measure_rates(problem, state, found, asked, step, direct)
    drift = _measure_rates(problem, state, found, asked, settle[..., None], None)[..., 0]
    return Rates(measures(problem, state, found, asked), found.error, rate, step, drift, settle, found)


def _by_length(problem: Problem, state: State, found: Evaluation, asked: Asked) -> tuple[Array, Array]:
    """Change of the residual (case, unknown, asked), and of the mid-length tension (case, asked, 3), by ln L0 at fixed nodes."""
    s, k = problem.structure, asked.index
    many = len(k)
    hanging, length, EA = found.hanging, lengths_of(problem)[:, k], s.cables.EA[k]
    arm_a, arm_b, chord = problem.chords(state)
    if is_straight(problem):
        tension = -np.where(size(hanging.tension[:, k]) > 0, EA / length, 0.0)[..., None] * chord[:, k]
    else:
        rate = cable.length_rate(hanging.at_a[:, k].reshape(-1, 3), hanging.at_b[:, k].reshape(-1, 3), np.tile(EA, problem.cases))
        tension = -length[..., None] * (hanging.stiffness[:, k] @ rate.reshape(-1, many, 3, 1))[..., 0]
    half = 0.5 * problem.cable_total[:, k]
    gradient = np.zeros((problem.cases, many, s.nodes, 6))
    rows = np.arange(many)
    for points, arm, force in ((s.cables.a, arm_a, -(tension + half)), (s.cables.b, arm_b, tension - half)):
        gradient[:, rows, points.node[k], :3] += force
        gradient[:, rows, points.node[k], 3:] += cross(arm[:, k], force)
    arms = np.repeat(problem.arms(state), many, axis=0)
    unknowns = band.unknowns_of(problem.pattern, gradient.reshape(-1, s.nodes, 6), arms)
    return np.swapaxes(unknowns.reshape(problem.cases, many, -1), 1, 2), tension


def lengths_of(problem: Problem) -> Array:
    """(case, cable) unstressed lengths [m]."""
    return np.broadcast_to(problem.length, (problem.cases, problem.length.shape[-1]))


def stretch_wanted(problem: Problem, asked: Asked) -> Array:
    """(asked,) stretch of straight cables at their targets, and the scale of what is left for those just tight."""
    return np.where(asked.tight, TIGHT, asked.target / problem.structure.cables.EA[asked.index])


def measures(problem: Problem, state: State, found: Evaluation, asked: Asked) -> Array:
    """(case, asked) m."""
    hanging, k = found.hanging, asked.index
    if is_straight(problem):
        stretch = size(problem.chords(state)[2][:, k]) / lengths_of(problem)[:, k] - 1
        return np.asarray(stretch / stretch_wanted(problem, asked) + asked.tight)
    tight = size(hanging.tension[:, k]) / size(problem.cable_total[:, k])
    return np.asarray(np.where(asked.tight, tight, size(hanging.at_a[:, k]) / asked.target))


def whole_steps(problem: Problem, state: State, step: Array) -> Array:
    """(case, column, node, 6) of node steps (case, unknown, column)."""
    many = step.shape[2]
    rows = np.repeat(np.arange(problem.cases), many)
    whole = problem.take(rows).whole_step(state.take(rows), np.swapaxes(step, 1, 2).reshape(len(rows), -1))
    return whole.reshape(problem.cases, many, *whole.shape[1:])


def _chord_steps(problem: Problem, state: State, step: Array, k: NDArray[np.int64]) -> Array:
    """(case, cable in k, 3, column) change of chords for node steps (case, unknown, column)."""
    whole = whole_steps(problem, state, step)
    arm_a, arm_b, _ = problem.chords(state)
    s = problem.structure

    def moved(node: NDArray[np.int64], arm: Array) -> Array:
        turns = whole[:, :, node[k], 3:]
        return np.asarray(whole[:, :, node[k], :3] + cross(turns, np.broadcast_to(arm[:, None, k], turns.shape)))

    return np.moveaxis(moved(s.cables.b.node, arm_b) - moved(s.cables.a.node, arm_a), 1, -1)


def _measure_rates(problem: Problem, state: State, found: Evaluation, asked: Asked, step: Array, direct: Array | None) -> Array:
    """Change of the measures (case, asked, column) with node steps (case, unknown, column); `direct`: the columns' own lengths change
    too."""
    k, each = asked.index, np.arange(len(asked.index))
    moved = _chord_steps(problem, state, step, k)
    own = np.zeros((len(k), step.shape[2])) if direct is None else np.eye(len(k))
    if is_straight(problem):
        chord = problem.chords(state)[2][:, k]
        stretch = size(chord) / lengths_of(problem)[:, k] / stretch_wanted(problem, asked)
        return np.asarray(stretch[..., None] * (_log_rate(chord, moved) - own))
    by_chord = found.hanging.stiffness[:, k] @ moved
    half = np.zeros_like(by_chord)
    if direct is not None:
        by_chord[:, each, :, each] += np.swapaxes(direct, 0, 1)
        half[:, each, :, each] = 0.5 * np.swapaxes(problem.cable_total[:, k], 0, 1)
    by_end = _log_rate(found.hanging.at_a[:, k], by_chord + half)
    by_tight = _log_rate(found.hanging.tension[:, k], by_chord) - own
    return np.asarray(measures(problem, state, found, asked)[..., None] * np.where(asked.tight[:, None], by_tight, by_end))


def _log_rate(vector: Array, rate: Array) -> Array:
    """d ln |v| from dv: (case, n, 3), (case, n, 3, m) -> (case, n, m)."""
    return np.asarray(np.einsum("cni,cnim->cnm", vector, rate) / np.maximum(dot(vector, vector), NONZERO)[..., None])


def changed(problem: Problem, change: Array, asked: Asked) -> Problem:
    """The problem with ln L0 changed (case, asked)."""
    length = lengths_of(problem).copy()
    length[:, asked.index] *= np.exp(change)
    return replace(problem, length=length)

