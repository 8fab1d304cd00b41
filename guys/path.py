"""Paths of equilibria against one parameter: wind speed, or a factor on loads; many paths at once, each until its stability is lost.

From a stable state at x0 the parameter grows in steps.  A step is taken where the next state is a stable one (K positive definite: the
spectrum, not the path, since a symmetric path runs straight past a branching) and every foot-head line turned by less than `SAME_WAY`
from the last.  Else the step is halved between what stood and what did not, until the two are within `CLOSE` of each other:

    lost       nothing stable continues: a limit point, or a branching that leads away
    branches   the path turns unstable and, pushed along its lowest mode, comes to a stable state within `SAME_WAY`: that one is followed
    most       x has reached the greatest value asked for
    failed     the solver found no state, although the structure is still as stiff as at the start

What is watched along a path (`Measure`) is a function of the state, continuous, with something happening where it passes zero from below: a
use above one, a cable gone slack.  `crossings` solves for the first passing of each by false position with halved ends (Illinois), every
one at once; nothing is interpolated: the answer is the parameter of a solved state.

Sources: Thompson & Hunt, A General Theory of Elastic Stability (1973); Dowell & Jarratt, BIT 11 (1971), for the Illinois rule.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field
from math import radians

import numpy as np
from numpy.typing import NDArray

from guys import stability
from guys.equilibrium import Index, Problem, State
from guys.rotation import Array

SAME_WAY = radians(5)
"""Turn of a spar within which a stable state continues the path."""
CLOSE = 5e-4
"""Relative distance of the parameter between what stands and what does not at which a path has ended: half of 0.1 %."""
GROWTH = 2.0
"""Of a step after one that was taken."""
FIRST_AFTER = 4
"""First step on from what did not stand from further off, in `CLOSE`; where that left it unknown, as long as the one that reached it."""
ROOT = 5e-5
"""Relative distance of the parameter between which a crossing is found, or ..."""
MET = 5e-5
"""... share to which what is watched has fallen of what it was before the crossing."""
ROUNDS = 60
SHORT_ROUNDS = 12
"""Rounds of the solver for a step that is not yet close: one that takes more is halved sooner than followed out."""

At = Callable[[Index, Array], Problem]
"""The problem of the paths (row,) at their parameters (row,)."""
Measure = Callable[[Problem, State], Array]
"""(row, measure) what is watched, NaN where there is nothing to watch."""
Tick = Callable[[int, int], None]
Taken = tuple[Index, Array, Array, State]
"""States taken at once: their rows, parameters, what is watched, and they themselves."""


@dataclass(frozen=True)
class Stops:
    """How paths are followed: first step, greatest step as a share of x (or the first step, if more), greatest x."""

    first: float
    share: float
    most: float


@dataclass
class Paths:
    """Paths followed.

    row, x, value, state : of every state taken, in the order taken, the start of every path first
    low, high (row,) : greatest parameter that stands, least that does not (inf where none was met)
    branches_at (row,) : parameter of the first branching passed, NaN without;  failed (row,)
    beyond : {row: a state past the end, on the way down}
    """

    row: Index
    x: Array
    value: Array
    state: State
    low: Array
    high: Array
    branches_at: Array
    failed: NDArray[np.bool_]
    beyond: dict[int, State] = field(default_factory=dict)

    def of(self, row: int) -> Index:
        """The states of one path, by rising parameter."""
        own = np.flatnonzero(self.row == row)
        return own[np.argsort(self.x[own], kind="stable")]

    @property
    def lost(self) -> NDArray[np.bool_]:
        """(row,) paths that ended before the greatest parameter."""
        return np.isfinite(self.high)


@dataclass
class _Walk:
    """Where every path stands while it is followed.

    low, high : greatest parameter that stands, least that did not;  ahead : high was not tried from close by;  unknown : nor does it say
    that nothing stands there, the search ran out of rounds or came to a stable state too far;  again : high is tried next
    """

    last: State
    low: Array
    high: Array
    step: Array
    ahead: NDArray[np.bool_]
    unknown: NDArray[np.bool_]
    again: NDArray[np.bool_]
    stuck: NDArray[np.bool_]
    open_: NDArray[np.bool_]
    branches_at: Array
    beyond: dict[int, State] = field(default_factory=dict)


def follow(at: At, start: State, x0: Array, stops: Stops, measure: Measure, tick: Tick | None = None) -> Paths:
    """Follow every path from its state at `x0` (row,); see the module's text."""
    rows = np.arange(len(x0))
    no = np.zeros(len(x0), bool)
    first = np.full(len(x0), stops.first)
    ahead, unknown, again, stuck = np.zeros((4, len(x0)), bool)
    nowhere = np.full(len(x0), np.nan)
    walk = _Walk(start.take(rows), x0.copy(), np.full(len(x0), np.inf), first, ahead, unknown, again, stuck, ~no, nowhere)
    taken = [(rows, x0.copy(), measure(at(rows, x0), start), start.take(rows))]
    while len(open_ := np.flatnonzero(walk.open_)):
        x = _next(walk, open_, stops.most)
        taken += _step(at, walk, open_, x, stops, measure)
        if tick is not None:
            tick(int((~walk.open_).sum()), len(rows))
    row, x, value = (np.concatenate([part[k] for part in taken]) for k in range(3))
    paths = Paths(row, x, value, State.join([part[3] for part in taken]), walk.low, walk.high, walk.branches_at, no.copy(), walk.beyond)
    paths.failed[:] = _still_stiff(at, start, x0, walk)
    return paths


def _step(at: At, walk: _Walk, rows: Index, x: Array, stops: Stops, measure: Measure) -> list[Taken]:
    """Try the next parameter of some paths and give what was taken; those close to their end in more rounds, and pushed if unstable.

    Where a path turns unstable the solver, damped, is slow: it took 40 rounds to stand aside where two guys dropped at once.
    """
    problem, before = at(rows, x), walk.last.take(rows)
    close = x - walk.low[rows] <= 1.001 * CLOSE * x
    found = stability.step_on(problem, before, np.where(close, stability.LAST_ROUNDS, SHORT_ROUNDS), close)
    near = stability.turn_between(problem, found.state, before) < SAME_WAY
    good = (found.code <= stability.NEUTRAL) & near
    walk.beyond |= {int(rows[k]): found.state.take(np.array([k])) for k in np.flatnonzero(~good & ~near)}
    _note(walk, rows, x, good, close, found, near, stops)
    kept = np.flatnonzero(good)
    if len(kept) == 0:
        return []
    state = found.state.take(kept)
    walk.last.put(rows[kept], state)
    return [(rows[kept], x[kept], measure(problem.take(kept), state), state)]


def _next(walk: _Walk, open_: Index, most: float) -> Array:
    """The parameter to try: a step on, halfway to what does not stand, or that once more where it is now close or was left unknown."""
    low, high = walk.low[open_], walk.high[open_]
    between = np.where((low >= (1 - CLOSE) * high) | walk.again[open_], high, 0.5 * (low + high))
    return np.minimum(np.where(np.isfinite(high), between, low + walk.step[open_]), most)


def _note(
    walk: _Walk,
    open_: Index,
    x: Array,
    good: NDArray[np.bool_],
    close: NDArray[np.bool_],
    found: stability.Judged,
    near: NDArray[np.bool_],
    stops: Stops,
) -> None:
    """Write what a round of steps came to.

    What did not stand is tried once more from close by before it counts as the end; what was left unknown, from where a path next stands.
    """
    first = good & found.branched & np.isnan(walk.branches_at[open_])
    walk.branches_at[open_[first]] = x[first]
    stride = x - walk.low[open_]
    bad = open_[~good]
    walk.low[open_[good]] = x[good]
    walk.high[bad], walk.ahead[bad] = x[~good], ~close[~good]
    walk.unknown[bad] = (found.stuck | (found.code <= stability.NEUTRAL))[~good]
    walk.stuck[open_] = ~good & found.stuck & near
    over = good & (x >= walk.high[open_])
    walk.again[open_] = good & ~over & walk.unknown[open_]
    walk.high[open_[over]] = np.inf
    walk.step[open_[over]] = np.where(walk.unknown[open_[over]], stride[over], FIRST_AFTER * CLOSE * x[over])
    onward = open_[good & ~over]
    walk.step[onward] = np.minimum(GROWTH * walk.step[onward], np.maximum(stops.first, stops.share * x[good & ~over]))
    ended = walk.low[open_] >= (1 - CLOSE) * walk.high[open_]
    walk.open_[open_] = (~ended | walk.ahead[open_]) & (walk.low[open_] < stops.most)


def _still_stiff(at: At, start: State, x0: Array, walk: _Walk) -> NDArray[np.bool_]:
    """(row,) paths that ended where the solver ran out of rounds although the structure had not softened."""
    failed = np.zeros(len(x0), bool)
    ended = np.flatnonzero(walk.stuck & np.isfinite(walk.high))
    if len(ended):
        here = stability.least_costs(at(ended, walk.low[ended]), walk.last.take(ended))
        failed[ended] = here > stability.SOFT * stability.least_costs(at(ended, x0[ended]), start.take(ended))
    return failed


def crossings(at: At, paths: Paths, measure: Measure) -> Array:
    """(row, measure) parameter at which what is watched first passes zero; NaN where it does not on the path.

    A measure already past zero at the start of its path crosses there.
    """
    rows, columns = len(paths.low), paths.value.shape[1]
    found = np.full((rows, columns), np.nan)
    left, right, where = [], [], []
    for row in range(rows):
        own = paths.of(row)
        over = paths.value[own] > 0
        for column in np.flatnonzero(over.any(axis=0)):
            first = int(np.argmax(over[:, column]))
            if first == 0:
                found[row, column] = paths.x[own[0]]
                continue
            left.append(own[first - 1])
            right.append(own[first])
            where.append((row, column))
    if where:
        row, column = np.array(where).T
        found[row, column] = _between(at, paths, measure, np.array(left), np.array(right), column)
    return found


def _between(at: At, paths: Paths, measure: Measure, left: Index, right: Index, column: Index) -> Array:
    """Parameter at which each `column` passes zero between two neighbouring states of its path."""
    row, state = paths.row[left], paths.state.take(left)
    a, b = paths.x[left].copy(), paths.x[right].copy()
    fa, fb = paths.value[left, column], paths.value[right, column]
    fa = np.where(np.isnan(fa), -1.0, fa)
    met = MET * np.abs(fa)
    side = np.zeros(len(row))
    answer = b.copy()
    open_ = np.arange(len(row))
    for _ in range(ROUNDS):
        ao, bo, fo, go = a[open_], b[open_], fa[open_], fb[open_]
        x = np.where(np.isfinite(go), ao - fo * (bo - ao) / np.where(np.isfinite(go), go - fo, 1.0), 0.5 * (ao + bo))
        x = np.clip(x, ao + 0.01 * (bo - ao), bo - 0.01 * (bo - ao))
        problem = at(row[open_], x)
        found = stability.step_on(problem, state.take(open_))
        value = measure(problem, found.state)[np.arange(len(open_)), column[open_]]
        value = np.where(found.code <= stability.NEUTRAL, value, np.inf)
        under = ~(value > 0)
        fine = np.flatnonzero(under & np.isfinite(value))
        state.put(open_[fine], found.state.take(fine))
        a[open_], b[open_] = np.where(under, x, ao), np.where(under, bo, x)
        last = side[open_]
        fa[open_] = np.where(under, value, np.where(last < 0, 0.5 * fo, fo))
        fb[open_] = np.where(under, np.where(last > 0, 0.5 * go, go), value)
        side[open_] = np.where(under, 1.0, -1.0)
        answer[open_] = x
        open_ = open_[~((np.abs(value) < met[open_]) | (b[open_] - a[open_] < ROOT * b[open_]))]
        if len(open_) == 0:
            break
    return answer
