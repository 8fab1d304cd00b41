"""Blocks folded, numbered and factored as a band, against full matrices and an explicit matrix of constraints."""

from __future__ import annotations

import numpy as np
import pytest

from guys import band
from guys.band import Frames, Pattern, Rides
from guys.rotation import cross, dyad_curvature, exp_minus_identity, outer, skew

ROUNDING = 1e-11
"""Relative to the greatest entry: sums and products of a few dozen terms."""
NODES = 6
ROWS = np.array([0, 1, 2, 3, 4, 5, 1, 2, 4, 5, 5])
COLUMNS = np.array([0, 1, 2, 3, 4, 5, 0, 1, 3, 4, 2])
"""Two spars, 0-1-2 and 3-4; node 5 a third that is tied to both."""


PARTS = (slice(0, 4), slice(4, 11))
"""Contributions come in parts."""


def blocks(rng: np.random.Generator, cases: int) -> np.ndarray:
    out = rng.normal(size=(cases, len(ROWS), 6, 6))
    same = ROWS == COLUMNS
    out[:, same] = out[:, same] + np.swapaxes(out[:, same], -1, -2) + 60 * np.eye(6)
    return out


def full(contributions: np.ndarray) -> np.ndarray:
    """The symmetric matrix (case, 36, 36) of contributions."""
    out = np.zeros((len(contributions), NODES * 6, NODES * 6))
    for k, (r, c) in enumerate(zip(ROWS, COLUMNS, strict=True)):
        rows, columns = slice(6 * r, 6 * r + 6), slice(6 * c, 6 * c + 6)
        out[:, rows, columns] += contributions[:, k]
        if r != c:
            out[:, columns, rows] += np.swapaxes(contributions[:, k], -1, -2)
    return out


def laid_out(rides: Rides, frames: Frames | None = None) -> Pattern:
    held = np.zeros((NODES, 6), dtype=bool)
    held[0, :3] = True
    held[0, 5] = True
    return band.lay_out([ROWS[p] for p in PARTS], [COLUMNS[p] for p in PARTS], held, rides, frames or Frames((), np.zeros((0, 3, 3))))


RIDES = {
    "none": Rides((), (), ()),
    "one heel": Rides((3,), (1,), (False,)),
    "welded heel": Rides((3,), (1,), (True,)),
    "a heel on a heeled spar": Rides((5, 3), (4, 2), (False, False)),
    "a welded heel on a heeled spar": Rides((5, 3), (4, 2), (True, False)),
}


def constraint(pattern: Pattern, arms: np.ndarray) -> np.ndarray:
    """(36, unknown): every node's motion from the unknowns, carriers first."""
    whole = np.zeros((NODES * 6, pattern.unknowns))
    frames = dict(zip(pattern.frames.node, pattern.frames.axes, strict=True))
    for j, (node, k) in enumerate(pattern.free):
        unit = np.eye(3)[k % 3]
        direction = frames[int(node)].T @ unit if k >= 3 and int(node) in frames else unit
        whole[6 * node + 3 * (k // 3) : 6 * node + 3 * (k // 3) + 3, j] = direction
    for k in reversed(range(len(pattern.rides.node))):
        s, m = 6 * pattern.rides.node[k], 6 * pattern.rides.carrier[k]
        whole[s : s + 3] = whole[m : m + 3] - skew(arms[k]) @ whole[m + 3 : m + 6]
        if pattern.rides.welded[k]:
            whole[s + 3 : s + 6] = whole[m + 3 : m + 6]
    return whole


def frame() -> Frames:
    return Frames((0,), (exp_minus_identity(np.array([0.3, -0.2, 0.5])) + np.eye(3))[None])


def folded(pattern: Pattern, contributions: np.ndarray, gradient: np.ndarray, arms: np.ndarray) -> np.ndarray:
    """The band (case, unknown, width) of contributions (case, contribution, 6, 6)."""
    parts = [contributions[:, p].transpose(2, 3, 1, 0) for p in PARTS]
    room = band.room(pattern, len(contributions), 0)
    return band.to_band(pattern, band.fold(pattern, band.add_up(pattern, parts, room), gradient, arms), room)


@pytest.mark.parametrize("name", RIDES)
def test_folded_band_is_the_constrained_full_matrix(name: str, rng: np.random.Generator) -> None:
    rides, cases = RIDES[name], 3
    pattern = laid_out(rides, frame())
    contributions = blocks(rng, cases)
    arms = rng.normal(size=(cases, len(rides.node), 3))
    gradient = np.zeros((cases, NODES, 6))
    got = folded(pattern, contributions, gradient, arms)
    for c, whole in enumerate(full(contributions)):
        t = constraint(pattern, arms[c])
        expected = t.T @ whole @ t
        assert np.abs(band.dense(got[c]) - expected).max() < ROUNDING * np.abs(whole).max()


@pytest.mark.parametrize("name", RIDES)
def test_folded_gradient_is_what_the_constraints_leave(name: str, rng: np.random.Generator) -> None:
    rides = RIDES[name]
    pattern = laid_out(rides, frame())
    gradient, arms = rng.normal(size=(1, NODES, 6)), rng.normal(size=(1, len(rides.node), 3))
    expected = constraint(pattern, arms[0]).T @ gradient[0].reshape(-1)
    assert np.abs(band.unknowns_of(pattern, gradient, arms)[0] - expected).max() < ROUNDING


def test_force_on_a_riding_node_curves_the_energy_of_its_carrier(rng: np.random.Generator) -> None:
    """A heel's force F on the arm a: second derivative of F.(R a), the force of what rides on the heel included."""
    rides = RIDES["a heel on a heeled spar"]
    pattern = laid_out(rides)
    gradient, arms = rng.normal(size=(1, NODES, 6)), rng.normal(size=(1, 2, 3))
    got = band.dense(folded(pattern, np.zeros((1, len(ROWS), 6, 6)), gradient, arms)[0])
    on_heel = gradient[0, 3, :3]
    expected = {4: dyad_curvature(outer(arms[0, 0], gradient[0, 5, :3])), 2: dyad_curvature(outer(arms[0, 1], on_heel))}
    for node, curvature in expected.items():
        rows = [j for j, (n, k) in enumerate(pattern.free) if n == node and k >= 3]
        order = [int(pattern.free[j, 1]) - 3 for j in rows]
        assert np.abs(got[np.ix_(rows, rows)] - curvature[np.ix_(order, order)]).max() < ROUNDING
        got[np.ix_(rows, rows)] = 0.0
    assert np.abs(got).max() == 0.0


def test_unknowns_and_nodes_are_each_others_transpose(rng: np.random.Generator) -> None:
    pattern = laid_out(RIDES["none"], frame())
    step, whole = rng.normal(size=(2, pattern.unknowns)), rng.normal(size=(2, NODES, 6))
    work = np.sum(band.nodes_of(pattern, step) * whole)
    assert work == pytest.approx(np.sum(step * band.pick(pattern, whole)), rel=ROUNDING)


def test_numbering_keeps_chains_narrow() -> None:
    """A chain of 40 nodes in random order: neighbours stay neighbours, so the half-width is that of two nodes."""
    order = np.random.default_rng(3).permutation(40)
    a, b = order[:-1], order[1:]
    rows, columns = np.concatenate([np.arange(40), np.maximum(a, b)]), np.concatenate([np.arange(40), np.minimum(a, b)])
    pattern = band.lay_out([rows], [columns], np.zeros((40, 6), dtype=bool), Rides((), (), ()), Frames((), np.zeros((0, 3, 3))))
    assert pattern.source.shape == (240, 12)


# ---------------------------------------------------------------- factorisation


def banded(rng: np.random.Generator, cases: int, n: int = 15, width: int = 4) -> np.ndarray:
    out = rng.normal(size=(cases, n, width))
    out[..., 0] = 10.0
    for d in range(1, width):
        out[:, n - d :, d] = 0.0
    return out


def test_factor_solves_like_the_full_matrix(rng: np.random.Generator) -> None:
    k, b = banded(rng, 3), rng.normal(size=(3, 15, 2))
    factors, definite = band.factor(k.copy())
    assert definite.all()
    x = band.solve(factors, b)
    for c in range(3):
        assert np.abs(x[c] - np.linalg.solve(band.dense(k[c]), b[c])).max() < ROUNDING


@pytest.mark.parametrize("bad", [[0], [2], [4], [0, 1], [1, 3], [0, 1, 2, 3, 4]])
def test_factor_finds_the_indefinite_cases_among_the_others(bad: list[int], rng: np.random.Generator) -> None:
    k = banded(rng, 5)
    for row, case in enumerate(bad):
        k[case, (7 * row) % 15, 0] = -1.0
    alone = [np.linalg.eigvalsh(band.dense(one)).min() > 0 for one in k]
    factors, definite = band.factor(k.copy())
    assert definite.tolist() == alone
    b = rng.normal(size=(5, 15))
    x = band.solve(factors, b)
    for case in np.flatnonzero(definite):
        assert np.abs(x[case] - np.linalg.solve(band.dense(k[case]), b[case])).max() < ROUNDING


def test_a_case_is_factored_to_the_same_bits_alone_and_in_company(rng: np.random.Generator) -> None:
    k = banded(rng, 6)
    k[1, 3, 0] = -2.0
    together = band.factor(k.copy())[0]
    for case in (0, 2, 5):
        assert np.array_equal(band.factor(k[case : case + 1].copy())[0][0], together[case])


def test_nothing_unknown_is_solved_at_once() -> None:
    empty = np.zeros((2, 0, 1))
    factors, definite = band.factor(empty)
    assert definite.all()
    assert band.solve(factors, np.zeros((2, 0))).shape == (2, 0)


def test_ride_moves_by_the_cross_product(rng: np.random.Generator) -> None:
    """The constraint used above is u_s = u_m + theta x a, the rule of the program."""
    theta, arm = rng.normal(size=3), rng.normal(size=3)
    assert np.abs(-skew(arm) @ theta - cross(theta, arm)).max() < ROUNDING
