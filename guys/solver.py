"""Batched nonlinear least squares: the pose where net force and moment vanish.

Plain Levenberg-Marquardt on the raw residual stops at false minima here, whatever fixed weights forces and moments are given.
On the residual whitened by the current stiffness, r = L^-1 g with K = L L^T the tangent, the damped Gauss-Newton step is

    (K + mu M) d = -g

one banded Cholesky.  mu rises tenfold until the factor exists and falls fivefold after each step.  There is no line search: a trial
step that turns a nearly inextensible member stretches it in second order, so any merit function would force tiny steps; instead the
geometric stiffness takes the axial force predicted from the step (`State.axial`), steps are capped, and the end of the iteration is
judged (see `guys.stability`).

Feet that do not spin have no potential; from round `SPIN_AFTER` on, along a path from the first, the step is that of the exact,
unsymmetric tangent K - sum c a^T (`Problem.spin_of_tilts`), by Woodbury's formula from the same factor.

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
ROUNDS = 1000
"""Rounds unless the caller says fewer: a single still-air state may swing far before it rests, or turns over."""
LEAST_DAMPING = 1e-9
"""mu never falls below this: a free spin then gets no wild step, and any other direction is slowed by less than 1e-9."""
FIRST_DAMPING = 1e-6
"""mu where the least does not do: a mast bowed by its own thrust may turn its bow almost freely, and more damping would hold it there."""
TURN_CAP = 0.35
"""[rad] greatest turn of a node in one step."""
MOVE_CAP = 0.25
"""Greatest move of a node in one step, of the height."""
RAISES = 40
"""Times mu is raised tenfold: it then outweighs any tangent."""
FALLS = 0.9
"""An out-of-balance above this share of the least so far has not fallen."""
LEAST_REACH = 1 / 8
"""Share of the caps to which reversing steps halve them at the most: with less a swinging boom was held where it was."""
SPIN_AFTER = 4
"""Rounds after which the step knows that a pinned foot turns back when it tilts: most cases have ended by then, twisted ones need it.
States of a path are near each other, and from one it knows at once: without, they took twice the rounds, and ends were missed by 1 %."""
NEAR_SINGULAR = 0.1
"""Determinant of Woodbury's small matrix below which its correction is not trusted."""
STALLED = 3
"""Rounds without a fall of the out-of-balance, once below ENOUGH, after which rounding has been reached."""

Stop = Callable[[Problem, State, Index], NDArray[np.bool_]]
"""Which to give up of the cases still open: their problem and state, and their rows among all."""


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
    reach: Array
    last: Array


def solve(
    problem: Problem, start: State, stop: Stop | None = None, rounds: int | Index = ROUNDS, spin_after: int = SPIN_AFTER
) -> Outcome:
    """Bring every case to equilibrium from `start`.

    stop : tells which cases to give up (a spar that has turned over);  rounds : after so many too, one number or (case,)
    spin_after : round from which on feet that do not spin are in the tangent
    """
    cases = problem.cases
    most = np.broadcast_to(rounds, cases)
    state = problem.seated(start.take(np.arange(cases)))
    seen = _Progress(
        np.full(cases, np.inf), np.zeros(cases, np.int64), np.zeros(cases, bool), np.full(cases, LEAST_DAMPING), np.zeros(cases, np.int64),
        np.ones(cases), np.zeros((cases, problem.pattern.unknowns)),
    )  # fmt: skip
    open_, part, here = np.arange(cases), problem, state
    for round_ in range(int(most.max(initial=0))):
        found = part.evaluate(here)
        done = _judge(seen, open_, found.error)
        if stop is not None:
            over = stop(part, here, open_)
            seen.stopped[open_[over]] = True
            done |= over
        if done.any():
            state.put(open_[done], replace(here, tension=found.hanging.tension).take(np.flatnonzero(done)))
        if done.all():
            break
        tangent = part.tangent(here, found)
        step, seen.damping[open_] = damped_step(tangent, found.residual, part.mass, seen.damping[open_], part.room.factors)
        if round_ >= spin_after and part.structure.unspun:
            step = with_spins(part.room.factors, step, *part.spin_of_tilts(here, found))
        here = part.advance(here, found, _capped(part, here, step, seen, open_))
        seen.rounds[open_[~done]] += 1
        spent = ~done & (most[open_] == round_ + 1)
        if spent.any():
            state.put(open_[spent], here.take(np.flatnonzero(spent)))
        if (done | spent).any():
            keep = np.flatnonzero(~(done | spent))
            open_, part, here = open_[keep], part.take(keep), here.take(keep)
        if len(open_) == 0:
            break
    return Outcome(state, seen.error, seen.rounds, seen.error < ENOUGH, seen.stopped)


def _capped(part: Problem, here: State, step: Array, seen: _Progress, open_: Index) -> Array:
    """The step within the caps of each case, which halve, down to `LEAST_REACH`, where it would undo a capped one.

    A slack cable pushes nothing back, so a step to where it is taut goes to the cap, and the one back may overshoot into slackness: at
    full caps that would go on for ever.
    """
    same = np.einsum("cu,cu,u->c", step, seen.last[open_], part.mass)
    reach = np.clip(seen.reach[open_] * np.where(same < 0, 0.5, np.where(same > 0, 1.25, 1.0)), LEAST_REACH, 1.0)
    out = part.limited(here, step, TURN_CAP * reach, MOVE_CAP * part.structure.height * reach)
    short = np.abs(out).max(axis=1, initial=0.0) < np.abs(step).max(axis=1, initial=0.0)
    seen.reach[open_], seen.last[open_] = reach, np.where(short[:, None], out, 0.0)
    return out


def _judge(seen: _Progress, open_: Index, error: Array) -> NDArray[np.bool_]:
    """Which of the open cases are done; notes their error."""
    better = error < FALLS * seen.error[open_]
    seen.stalled[open_] = np.where(better | (error >= ENOUGH), 0, seen.stalled[open_] + 1)
    seen.error[open_] = error
    return np.asarray((error < TARGET) | (seen.stalled[open_] >= STALLED))


def damped_step(k_band: Array, residual: Array, mass: Array, damping: Array, room: Array) -> tuple[Array, Array]:
    """Solve (K + mu M) d = -g with the least mu that makes it positive definite; the step and the mu to begin with next.

    room : memory of the band's shape for the factors
    """
    mu = np.maximum(damping, LEAST_DAMPING)
    np.copyto(room, k_band)
    factors, definite = _factor_shifted(room, mu, mass)
    missing = np.flatnonzero(~definite)
    for _ in range(RAISES):
        if len(missing) == 0:
            break
        mu[missing] = np.where(mu[missing] <= LEAST_DAMPING, FIRST_DAMPING, 10 * mu[missing])
        factors[missing], definite = _factor_shifted(k_band[missing], mu[missing], mass)
        missing = missing[~definite]
    next_mu = np.where(mu > LEAST_DAMPING, mu / 5, mu)
    return band.solve(factors, -residual), np.where(next_mu < FIRST_DAMPING / 20, LEAST_DAMPING, next_mu)


def with_spins(factors: Array, step: Array, c: Array, a: Array) -> Array:
    """The step of K - sum c a^T, given that of K and its factors (Woodbury); that of K where the small matrix is near singular."""
    z = band.solve(factors, c)
    small = np.eye(c.shape[2]) - np.swapaxes(a, 1, 2) @ z
    known = np.abs(np.linalg.det(small)) > NEAR_SINGULAR
    small[~known] = np.eye(c.shape[2])
    share = np.linalg.solve(small, np.swapaxes(a, 1, 2) @ step[..., None])
    return np.asarray(np.where(known[:, None], step + (z @ share)[..., 0], step))


def _factor_shifted(k_band: Array, mu: Array, mass: Array) -> tuple[Array, NDArray[np.bool_]]:
    """Factors of K + mu M, written over K."""
    k_band[..., 0] += mu[:, None] * mass
    return band.factor(k_band)
