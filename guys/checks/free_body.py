"""The whole structure cut free of the ground in one case: every force that acts on it, and their sums.

    sum F = 0        sum r x F + sum M = 0, about the foot of the first spar

Forces are those of the answer, taken where they act on the deformed structure: weights, ice and wind of sections and fittings, loads of
cables at the centroid of the hanging curve, and what the ground and the anchors give back.  Loads on a section are brought together:
parallel forces f_i n at r_i, with their lever loads m_i along axes t_i, are one force at (sum f_i r_i + sum m_i t_i) / sum f_i; what a
bend of the spar leaves them short of parallel is a couple.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from guys import recovery
from guys.equilibrium import Problem, State
from guys.loads.dead import fittings_of
from guys.recovery import Forces
from guys.rotation import Array, turned
from guys.structure import Points

NOTHING = 1e-9
"""Share of the greatest force below which a row is left out: rounding."""


@dataclass(frozen=True)
class FreeBody:
    """case, wind_from [rad]; what (row,) in words; given (row,): a load, else a reaction of ground or anchor
    force (row, 3) [N]; at (row, 3) [m] from the origin; couple (row, 3) [N m] of a base, or left by bends; about (3,) [m]; reference [N]
    """

    case: str
    wind_from: float
    what: tuple[str, ...]
    given: tuple[bool, ...]
    force: Array
    at: Array
    couple: Array
    about: Array
    reference: float

    @property
    def moment(self) -> Array:
        """(row, 3) [N m] about the point, couples included."""
        return np.asarray(np.cross(self.at - self.about, self.force) + self.couple)

    @property
    def net_force(self) -> Array:
        """(3,) [N]."""
        return np.asarray(self.force.sum(axis=0))

    @property
    def net_moment(self) -> Array:
        """(3,) [N m]."""
        return np.asarray(self.moment.sum(axis=0))


@dataclass(frozen=True)
class _Force:
    what: str
    given: bool
    force: Array
    at: Array
    couple: Array


def cut_free(problem: Problem, still: Problem, state: State) -> FreeBody:
    """The one case of `problem` in its equilibrium `state`; `still`: the same case without its wind."""
    found = problem.evaluate(state)
    forces = recovery.forces(problem, state, found)
    s, line = problem.structure, problem.loads.lines[0]
    rows = [*_on_spars(problem, still, state), *_on_fittings(problem, still, state), *_on_cables(problem, still, state)]
    rows += _reactions(problem, state, forces)
    size = max((float(np.linalg.norm(r.force)) for r in rows), default=0.0)
    kept = [r for r in rows if not r.given or np.linalg.norm(r.force) > NOTHING * size]
    force, at, couple = (np.array([getattr(r, name) for r in kept]).reshape(-1, 3) for name in ("force", "at", "couple"))
    about = s.position[s.foot[0]] + state.u[0, s.foot[0]]
    words, given = tuple(r.what for r in kept), tuple(r.given for r in kept)
    return FreeBody(line.name, line.wind_from, words, given, force, at, couple, about, float(found.reference[0]))


def _load(what: str, force: Array, at: Array) -> _Force:
    return _Force(what, True, force, at, np.zeros(3))


def _parts(full: Array, still: Array) -> tuple[tuple[str, Array], ...]:
    """Loads of one case split into what falls and what blows."""
    return ("weight", still[0]), ("wind", full[0] - still[0])


def _weight_words(problem: Problem) -> str:
    return "weight with ice" if problem.loads.lines[0].ice > 0 else "weight"


def _on_spars(problem: Problem, still: Problem, state: State) -> Iterator[_Force]:
    s, pieces = problem.structure, problem.structure.pieces
    ends = [(s.position[n] + state.u[0, n], turned(state.psi[0, n], pieces.axis)) for n in (pieces.low, pieces.high)]
    for kind, share in _parts(problem.loads.on_pieces, still.loads.on_pieces):
        for k, spar in enumerate(s.scenario.spar):
            for n in range(len(spar.section)):
                mine = (pieces.spar == k) & (pieces.section == n)
                total = share[mine][:, ::2].sum(axis=(0, 1))
                size = float(np.linalg.norm(total))
                if size == 0.0:
                    continue
                parts = [(share[mine, 2 * e], share[mine, 2 * e + 1], places[mine], axes[mine]) for e, (places, axes) in enumerate(ends)]
                along = total / size
                at = np.sum([(f @ along) @ place + (m @ along) @ axis for f, m, place, axis in parts], axis=0) / size
                moment = np.sum([np.cross(place, f) + np.cross(axis, m) for f, m, place, axis in parts], axis=(0, 1))
                words = f"{spar.name}, section {n + 1}" if len(spar.section) > 1 else spar.name
                what = f"{_weight_words(problem) if kind == 'weight' else kind} of {words}"
                yield _Force(what, True, total, at, moment - np.cross(at, total))


def _on_fittings(problem: Problem, still: Problem, state: State) -> Iterator[_Force]:
    """A sign whose force stands at its edges has a row for each."""
    s = problem.structure
    at = _places(problem, s.fittings.point, state)
    for kind, share in _parts(problem.loads.on_fittings, still.loads.on_fittings):
        words = f"{_weight_words(problem)} and fixed load" if kind == "weight" else kind
        for k, fitting in enumerate(fittings_of(s)):
            edge = {0: "", 1: ", left edge", -1: ", right edge"}[int(s.fittings.side[k])]
            yield _load(f"{words} of {fitting.name}{edge}", share[k], at[k])


def _places(problem: Problem, points: Points, state: State) -> Array:
    return np.asarray(problem.structure.position[points.node] + problem.reach(points, state)[1][0])


def _on_cables(problem: Problem, still: Problem, state: State) -> Iterator[_Force]:
    whole, where = recovery.cable_loads(problem, state, problem.evaluate(state))
    weight = still.cable_total * still.loads.present[..., None]
    for kind, share in _parts(whole, weight):
        for k, cable in enumerate(problem.structure.scenario.cable):
            yield _load(f"{_weight_words(problem) if kind == 'weight' else kind} of cable {cable.name}", share[k], where[0, k])


def _reactions(problem: Problem, state: State, forces: Forces) -> Iterator[_Force]:
    s = problem.structure
    at = s.position + state.u[0]
    for k, anchor in enumerate(s.scenario.anchor):
        yield _Force(f"anchor {anchor.name}", False, -forces.pull[0, k], at[s.anchor[k]], np.zeros(3))
    for k, spar in enumerate(s.scenario.spar):
        if int(s.foot[k]) not in s.rides.node:
            yield _Force(f"base of {spar.name}", False, -forces.foot_force[0, k], at[s.foot[k]], -forces.foot_moment[0, k])


def sums(problem: Problem, forces: Forces) -> tuple[Array, Array]:
    """Sum of the loads and of what the structure does to anchors and ground (case, 3) [N], which are alike in equilibrium."""
    s = problem.structure
    carried = problem.cable_total * problem.loads.present[..., None]
    loads = problem.loads.force.sum(axis=1) + carried.sum(axis=1)
    grounded = [k for k, foot in enumerate(s.foot) if int(foot) not in s.rides.node]
    return loads, forces.pull.sum(axis=1) + forces.foot_force[:, grounded].sum(axis=1)
