"""The solver: damping, caps, giving up, and every case for itself."""

from __future__ import annotations

import math

import numpy as np
import pytest
import scenarios_made as made

from guys import band, solver, stability
from guys.equilibrium import Problem, State
from guys.loads import lines_of

SAME_BITS = 1e-12
"""Relative: linear algebra of one case does not see the others, but numpy may sum in another order."""


def problem(document: made.Document, directions: list[float] | None = None) -> tuple[Problem, State]:
    """The cases of a document, to be solved from its setting state."""
    setting = made.setting(document)
    many = setting.under(lines_of(setting.problem.structure.scenario, directions))
    return many, many.repeat(setting.state)


def test_steps_of_a_positive_definite_tangent_are_newtons(rng: np.random.Generator) -> None:
    k = rng.normal(size=(2, 9, 3))
    k[..., 0] = 10.0
    k[:, 8:, 1:], k[:, 7:, 2] = 0.0, 0.0
    g = rng.normal(size=(2, 9))
    step, damping = solver.damped_step(k, g, np.ones(9), np.full(2, solver.LEAST_DAMPING), np.empty_like(k))
    for c in range(2):
        assert step[c] == pytest.approx(-np.linalg.solve(band.dense(k[c]), g[c]), rel=10 * solver.LEAST_DAMPING)
    assert damping == pytest.approx(solver.LEAST_DAMPING)


def test_an_indefinite_tangent_is_damped_until_it_is_definite(rng: np.random.Generator) -> None:
    """The step solves (K + mu M) d = -g with one mu of the ladder; the next begins a fifth of it."""
    k = np.zeros((1, 3, 1))
    k[0, :, 0] = [5.0, -2.0, 1.0]
    mass, g = np.array([1.0, 4.0, 1.0]), rng.normal(size=(1, 3))
    step, after = solver.damped_step(k, g, mass, np.full(1, solver.LEAST_DAMPING), np.empty_like(k))
    mu = -(g[0, 1] / step[0, 1] + k[0, 1, 0]) / mass[1]
    assert mu == pytest.approx(1.0)
    assert step[0] == pytest.approx(-g[0] / (k[0, :, 0] + mu * mass))
    assert after[0] == pytest.approx(mu / 5)


def test_steps_are_shortened_to_their_caps() -> None:
    many, start = problem(made.mast(0.0))
    step = np.full((1, many.pattern.unknowns), 3.0)
    whole = many.whole_step(start, many.limited(start, step, 0.35, 100.0))
    assert np.abs(whole[..., 3:]).max() == pytest.approx(0.35)
    whole = many.whole_step(start, many.limited(start, step, 100.0, 2.5))
    assert np.abs(whole[..., :3]).max() == pytest.approx(2.5)
    small = np.full((1, many.pattern.unknowns), 1e-3)
    assert np.array_equal(many.limited(start, small, 0.35, 2.5), small)


def test_ordinary_cases_take_a_handful_of_rounds_from_the_unloaded_geometry() -> None:
    """Measured: 4 to 6 for ordinary cases."""
    many, _ = problem(made.mast(0.0, 40.0, 80.0))
    out = solver.solve(many, many.drawn())
    assert out.converged.all()
    assert out.rounds.max() <= 8
    assert out.error.max() < solver.ENOUGH


def test_every_case_is_solved_for_itself() -> None:
    """The same numbers alone, in company, and in company of a case that falls."""
    document = {
        **made.mast(0.0, straight=True),
        "case": [{"name": "storm"}, {"name": "worst", "wind": 1.8, "without": ["9 m A", "17 m A"]}],
    }
    many, start = problem(document, [math.radians(b) for b in range(0, 360, 40)])
    together = solver.solve(many, start, stability.turned_over)
    assert together.stopped.any()
    assert together.converged.sum() > 9
    for case in np.flatnonzero(together.converged)[::3]:
        one = many.take(np.array([case]))
        alone = solver.solve(one, one.repeat(start), stability.turned_over)
        assert alone.rounds[0] == together.rounds[case]
        assert np.abs(alone.state.u[0] - together.state.u[case]).max() < SAME_BITS * 18.0
        here, there = one.evaluate(alone.state).hanging.at_a[0], many.evaluate(together.state).hanging.at_a[case]
        assert np.abs(here - there).max() < SAME_BITS * np.abs(there).max()


def test_a_case_that_turns_over_is_given_up_at_once_also_where_it_starts_over() -> None:
    """Upside down a hanging mast converges, so the rule is asked before convergence counts."""
    document = made.mast(0.0, straight=True)
    many, start = problem({**document, "case": [{"name": "lost", "wind": 3.0, "without": ["9 m A", "17 m A"]}]})
    out = solver.solve(many, start, stability.turned_over)
    assert out.stopped.tolist() == [True]
    assert not stability.turned_over(many, start).any()
    again = solver.solve(many, out.state, stability.turned_over)
    assert again.stopped.tolist() == [True]
    assert again.rounds.tolist() == [0]


def test_rounds_run_out_without_an_answer() -> None:
    many, _ = problem(made.mast(0.0))
    out = solver.solve(many, many.drawn(), rounds=1)
    assert out.converged.tolist() == [False]
    assert out.stopped.tolist() == [False]


def test_nothing_unknown_is_solved_without_a_round() -> None:
    """A rigid fixed mast with guys to anchors that do not give."""
    spar = made.spar(base="fixed", rigid=True, section=[made.weightless(12.0)])
    solved = made.cases(made.stayed(spar, 0.0, 120.0, 240.0, length=14.4))
    assert solved.problem.pattern.unknowns == 0
    assert solved.judged.code.tolist() == [stability.STABLE]
    assert solved.judged.rounds.tolist() == [0]
