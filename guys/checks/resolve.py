"""The governing case solved again by another minimiser, as a check on the solver.

`scipy.optimize.least_squares` (MINPACK's Levenberg-Marquardt) minimises the same residual, whitened by the frozen factor at the answer,
r = L^-1 g with K = L L^T, in the unknowns y with d = L^-T y.  Started cold and unwhitened it stalls on right answers; started at the
answer it proves nothing; so it starts with every node a thousandth of the height away.  Three ends are told apart: it agrees; it stalls
(inconclusive); it comes to another equilibrium, which is alarming where that one is stable too.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import numpy as np
from scipy.linalg import solve_triangular

from guys import band, stability
from guys.equilibrium import Problem, State
from guys.rotation import Array

AWAY = 1e-3
"""Start, of the height, away from the answer."""
AGREES = 1e-6
"""Greatest difference of any end tension, relative to the reference force, that still is the same answer."""
SOLVED = 1e-8
"""Out-of-balance at which the re-solve counts as solved."""
HELD = 1e-2
"""Of the scale of the tangent, added to the frozen factor: a free spin then does not run away, and ordinary motions hardly feel it."""
EVALUATIONS = 120

Verdict = Literal["agrees", "inconclusive", "other stable state"]


@dataclass(frozen=True)
class Resolved:
    """verdict; greatest difference of tension over the reference force; out-of-balance reached."""

    verdict: Verdict
    difference: float
    error: float


class _RanAway(Exception):
    """The second solve left for infinity: beside the answer nothing pushes back (a guy slack there)."""


def resolve(problem: Problem, answer: State) -> Resolved:
    """Solve one case again from beside its answer; problem and answer hold that one case."""
    from scipy.optimize import least_squares

    at_answer = problem.evaluate(answer)
    lower: Array = np.linalg.cholesky(band.dense(stability.tangent(problem, answer)[0]) + HELD * np.diag(problem.mass)).astype(float)
    start = _beside(problem, lower)

    def step(y: Array) -> Array:
        return np.asarray(solve_triangular(lower, y, lower=True, trans="T"))

    def state_at(y: Array) -> State:
        moved = problem.advance(answer, at_answer, step(y)[None])
        return State(moved.u, moved.psi, answer.tension, np.full_like(answer.axial, np.nan))

    def residual(y: Array) -> Array:
        net = problem.evaluate(state_at(y)).residual[0]
        if not np.isfinite(net).all():
            raise _RanAway
        return np.asarray(solve_triangular(lower, net, lower=True))

    def jacobian(y: Array) -> Array:
        here = state_at(y)
        half = solve_triangular(lower, band.dense(problem.tangent(here, problem.evaluate(here))[0]), lower=True)
        return np.asarray(solve_triangular(lower, half.T, lower=True).T)

    try:
        with np.errstate(over="ignore", invalid="ignore", divide="ignore"):
            out = least_squares(
                residual, start, jac=jacobian, method="lm", x_scale=1.0, ftol=1e-15, xtol=1e-12, gtol=1e-15, max_nfev=EVALUATIONS
            )
    except _RanAway:
        return Resolved("inconclusive", np.nan, np.inf)
    return _compare(problem, answer, state_at(out.x))


def _beside(problem: Problem, lower: Array) -> Array:
    """y of a start AWAY from the answer: spars swayed and bowed together, in a direction no symmetry holds."""
    s = problem.structure
    free = problem.pattern.free
    share = s.station[free[:, 0]] / np.maximum(s.length[s.spar[free[:, 0]]], 1e-12)
    direction = np.array([0.6, 0.7, 0.0, -0.7, 0.6, 0.3])[free[:, 1]]
    size = np.where(free[:, 1] < 3, s.height, 1.0)
    shape = np.where(free[:, 1] < 3, share * (1 + 0.5 * np.sin(3 * share)), 1 + 1.5 * np.cos(3 * share)) * direction * size
    return np.asarray(lower.T @ (AWAY * shape))


def _compare(problem: Problem, answer: State, again: State) -> Resolved:
    first, second = problem.evaluate(answer), problem.evaluate(again)
    gap = np.linalg.norm(first.hanging.tension - second.hanging.tension, axis=-1) * problem.loads.present
    moved = np.abs(answer.u - again.u).max() / problem.structure.height
    difference = float(gap.max(initial=0.0) / first.reference[0])
    error = float(second.error[0])
    if error > SOLVED:
        return Resolved("inconclusive", difference, error)
    if difference < AGREES and moved < AGREES:
        return Resolved("agrees", difference, error)
    stable = stability.classify(problem, again)[0] <= stability.NEUTRAL
    return Resolved("other stable state" if stable else "inconclusive", difference, error)
