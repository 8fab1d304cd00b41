"""Batched nonlinear least squares: the pose where net force and moment vanish.

Plain Levenberg-Marquardt on the raw residual stops at false minima here, whatever fixed weights forces and moments are given.
On the residual whitened by the current stiffness, r = L^-1 g with K = L L^T the tangent, the damped Gauss-Newton step is

    (K + mu M) d = -g

one banded Cholesky.  mu rises tenfold until the factor exists and falls fivefold after each step.  There is no line search: a trial
step that turns a nearly inextensible member stretches it in second order, so any merit function would force tiny steps; instead the
geometric stiffness takes the axial force predicted from the step (`State.axial`), steps are capped, and the end of the iteration is
judged (see `guys.stability`).

Every case runs for itself: it leaves the batch when its out-of-balance is below `TARGET` or no longer falls near it, and so gives
the same numbers alone or in company.

Sources: Levenberg (1944), Marquardt (1963) for the damping; Garcea, Trunfio & Casciaro (1998) for Newton with the axial force taken
as an independent (mixed) unknown.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from guys import band
from guys.equilibrium import Index, Problem, State
from guys.rotation import Array

TARGET = 5e-11
"""Out-of-balance at which a case is done."""
ENOUGH = 1e-9
"""Out-of-balance a case must reach to count as converged."""
ROUNDS = 120
LEAST_DAMPING = 1e-9
"""mu never falls below this: a free spin then gets no wild step, and any other direction is slowed by less than 1e-9."""
FIRST_DAMPING = 1e-2
TURN_CAP = 0.35
"""[rad] greatest turn of a node in one step."""
MOVE_CAP = 0.25
"""Greatest move of a node in one step, of the height."""
STALLED = 3
"""Rounds without a fall of the out-of-balance, once below ENOUGH, after which rounding has been reached."""

Stop = Callable[[Problem, State], NDArray[np.bool_]]


@dataclass(frozen=True)
class Outcome:
    """state; error (case,) out-of-balance; rounds (case,); converged (case,); stopped (case,) by the caller's rule."""

    state: State
    error: Array
    rounds: Index
    converged: NDArray[np.bool_]
    stopped: NDArray[np.bool_]


@dataclass
class _Progress:
    """What the loop remembers of each case."""

    error: Array
    rounds: Index
    stopped: NDArray[np.bool_]
    damping: Array
    stalled: Index


def solve(problem: Problem, start: State, stop: Stop | None = None, rounds: int = ROUNDS) -> Outcome:
    """Bring every case to equilibrium from `start`; `stop` tells which cases to give up (a spar that has turned over)."""
    cases = problem.cases
    state = start.take(np.arange(cases))
    seen = _Progress(
        np.full(cases, np.inf), np.zeros(cases, np.int64), np.zeros(cases, bool), np.full(cases, LEAST_DAMPING), np.zeros(cases, np.int64)
    )
    open_, part, here = np.arange(cases), problem, state
    for _ in range(rounds):
        found = part.evaluate(here)
        done = _judge(seen, open_, found.error)
        if stop is not None:
            over = stop(part, here)
            seen.stopped[open_[over]] = True
            done |= over
        if done.any():
            state.put(open_[done], replace(here, tension=found.hanging.tension).take(np.flatnonzero(done)))
        if done.all():
            break
        step, seen.damping[open_] = damped_step(part.tangent(here, found), found.residual, part.mass, seen.damping[open_])
        here = part.advance(here, found, part.limited(here, step, TURN_CAP, MOVE_CAP * part.structure.height))
        seen.rounds[open_[~done]] += 1
        if done.any():
            keep = np.flatnonzero(~done)
            open_, part, here = open_[keep], part.take(keep), here.take(keep)
    else:
        state.put(open_, here)
    return Outcome(state, seen.error, seen.rounds, seen.error < ENOUGH, seen.stopped)


def _judge(seen: _Progress, open_: Index, error: Array) -> NDArray[np.bool_]:
    """Which of the open cases are done; notes their error."""
    better = error < 0.5 * seen.error[open_]
    seen.stalled[open_] = np.where(better | (error >= ENOUGH), 0, seen.stalled[open_] + 1)
    seen.error[open_] = error
    return np.asarray((error < TARGET) | (seen.stalled[open_] >= STALLED))


def damped_step(k_band: Array, residual: Array, mass: Array, damping: Array) -> tuple[Array, Array]:
    """Solve (K + mu M) d = -g with the least mu that makes it positive definite; the step and the mu to begin with next."""
    mu = np.maximum(damping, LEAST_DAMPING)
    factors, definite = _shifted(k_band, mu, mass)
    missing = np.flatnonzero(~definite)
    for _ in range(40):
        if len(missing) == 0:
            break
        mu[missing] = np.where(mu[missing] <= LEAST_DAMPING, FIRST_DAMPING, 10 * mu[missing])
        factors[missing], definite = _shifted(k_band[missing], mu[missing], mass)
        missing = missing[~definite]
    next_mu = np.where(mu > LEAST_DAMPING, mu / 5, mu)
    return band.solve(factors, -residual), np.where(next_mu < FIRST_DAMPING / 20, LEAST_DAMPING, next_mu)


def _shifted(k_band: Array, mu: Array, mass: Array) -> tuple[Array, NDArray[np.bool_]]:
    """Factors of K + mu M."""
    shifted = k_band.copy()
    shifted[..., 0] += mu[:, None] * mass
    return band.factor(shifted)
