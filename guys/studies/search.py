"""The best anchors among what is allowed, by differential evolution over the numbers of `[search]`.

    trial vector  v = x_best + F (x_a - x_b)   crossed with x; kept where its grade is no worse

(R. Storn, K. Price: Differential Evolution, J. of Global Optimization 11 (1997) 341-359; the scheme "best/1/bin" of scipy.)  A generation
is a batch: its layouts are tried `TOGETHER` at a time on the solver's case axis, such lots side by side by any
`concurrent.futures.Executor`, and the next generation depends on their grades alone, so that a seed gives the same layouts, to the last
bit, however many processes try them.  No layout is tried twice.

Trade-off of two measures: the least of each by itself, then the first made least with the second held under limits between those two, one
limit at a time; of all layouts tried that hold every rule, those are kept that no other betters in both.  What is found is solved again
in every listed direction and round the circle.
"""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Callable, Sequence
from concurrent.futures import Executor
from dataclasses import dataclass, field
from functools import partial
from itertools import combinations_with_replacement, groupby, product
from typing import Any

import numpy as np

from guys.checks.alarms import STILL_LEAN
from guys.errors import ScenarioError
from guys.rotation import Array
from guys.scenario import Scenario, layouts, ring
from guys.scenario.reader import fault_at
from guys.studies.batch import Progress
from guys.studies.compare import Comparison, compare
from guys.studies.trial import HOLDS, UNMET, Span, Trial, pegged, spans, tried
from guys.version import __version__

AMONG = 24
"""Layouts of a generation at the most."""
TOGETHER = 12
"""Layouts solved on one case axis, by one process."""
FEWEST = 6
"""Layouts of a generation at the least."""
LIMITS = 4
"""Limits on the second measure between the least of both; fewer where two generations for each would be more than all tries."""
SHARE = 0.4
"""Of all tries, those that look for the least of the first measure, where a trade-off is traced."""
FOUND = 6
"""Layouts of a trade-off that are solved again in full and handed back."""
ALIKE = 1e-4
"""Relative difference of grades in a generation at which it has settled."""


@dataclass(frozen=True)
class Found:
    """What the search found.

    scenario : as read;  start : with the anchors and cables of the search;  keys : of the measures;  numbers : what was moved
    trials : every layout tried, in order
    best : of those that hold every rule the least by the first measure, None where none does
    front : those that no other betters in both measures, by the first;  compared : the found ones in full, None where there is none
    interrupted : stopped before its end;  notes : what was made of the file
    """

    scenario: Scenario
    start: Scenario
    version: str
    keys: tuple[str, ...]
    numbers: tuple[Span, ...]
    trials: tuple[Trial, ...]
    best: Trial | None
    front: tuple[Trial, ...]
    compared: Comparison | None
    interrupted: bool
    notes: tuple[str, ...]

    @property
    def excluded(self) -> list[tuple[str, int]]:
        """Rules broken first, with how many layouts each excluded, the most first."""
        return Counter(trial.rule for trial in self.trials if trial.rule).most_common()

    @property
    def warnings(self) -> tuple[str, ...]:
        """Layouts that initial tensions pull over, which then compare badly for their tensions, not for their places."""
        if self.scenario.setting.plumb:
            return ()
        leaning = [trial.still_lean for trial in self.trials if trial.still_lean > STILL_LEAN]
        unmet = sum(trial.rule == UNMET for trial in self.trials)
        said = [f"{len(leaning)} lean in still air, by up to 1/{1 / max(leaning):.0f}"] if leaning else []
        said += [f"{unmet} have no still-air state at these tensions"] if unmet else []
        if not said:
            return ()
        why = "the initial tensions of the file do not balance there, and good places may be passed over"
        return (f"of {len(self.trials)} layouts tried {' and '.join(said)}: {why}; setting.plumb = true finds tensions that do",)


@dataclass
class _Tries:
    """Tries layouts side by side and remembers them."""

    scenario: Scenario
    keys: tuple[str, ...]
    most: int
    executor: Executor | None
    progress: Progress | None
    known: dict[tuple[float, ...], Trial] = field(default_factory=dict)

    def __call__(self, points: Sequence[tuple[float, ...]]) -> list[Trial]:
        fresh = [p for p in dict.fromkeys(points) if p not in self.known]
        together = [fresh[k : k + TOGETHER] for k in range(0, len(fresh), TOGETHER)]
        each = partial(tried, self.scenario, self.keys)
        for trials in map(each, together) if self.executor is None else self.executor.map(each, together):
            self.known |= {trial.at: trial for trial in trials}
            if self.progress is not None:
                self.progress(min(len(self.known), self.most), self.most)
        return [self.known[p] for p in points]


def search(scenario: Scenario, executor: Executor | None = None, progress: Progress | None = None) -> Found:
    """Look for the best layout.

    executor : tries layouts side by side, None: one after another;  progress : called with layouts tried and at the most

    An interruption ends the search with the best so far.  Raises ScenarioError where the file has no [search].
    """
    asked = scenario.search
    if asked is None:
        text = 'missing; say what may move, such as [search] with least = "pull" and [[search.move]]'
        raise ScenarioError([fault_at(scenario, ("search",), text)])
    keys = (asked.least,) if asked.against is None else (asked.least, asked.against)
    start = rigged(scenario)
    tries = _Tries(_in_few_directions(start), keys, asked.tries, executor, progress)
    numbers = spans(asked.move)
    interrupted = False
    try:
        _explore(tries, numbers, asked.tries, asked.seed)
    except KeyboardInterrupt:
        interrupted = True
    trials = tuple(tries.known.values())
    holding = sorted((t for t in trials if t.outcome == HOLDS), key=lambda t: t.values)
    front = not_bettered(holding)
    compared = compare([_with_found(scenario, start, front)], asked.least, executor) if front else None
    notes = () if asked.ways is None else tuple(ring.notes(scenario))
    best = holding[0] if holding else None
    return Found(scenario, start, __version__, keys, numbers, trials, best, front, compared, interrupted, notes)


def _in_few_directions(scenario: Scenario) -> Scenario:
    assert scenario.search is not None
    if scenario.wind is None:
        return scenario
    few = tuple(float(b) for b in np.arange(scenario.search.directions) * math.tau / scenario.search.directions)
    return scenario.model_copy(update={"wind": scenario.wind.model_copy(update={"directions": few}), "layouts": ()})


def _explore(tries: _Tries, numbers: Sequence[Span], most: int, seed: int) -> None:
    """The least of the first measure; then, with a second one, along the trade-off."""
    whole = _choices(numbers, most)
    if whole is not None:
        tries(whole)
        return
    if len(tries.keys) == 1:
        _least(tries, numbers, lambda t: t.grade(0), most, seed)
        return
    _least(tries, numbers, lambda t: t.grade(0), int(SHARE * most), seed)
    left = most - int(SHARE * most)
    limits = min(LIMITS, max(left // (2 * FEWEST) - 1, 0))
    rest = left // (limits + 1)
    _least(tries, numbers, lambda t: t.grade(1), rest, seed + 1)
    holding = [t for t in tries.known.values() if t.outcome == HOLDS]
    if not holding:
        return
    low, high = min(t.values[1] for t in holding), min(holding, key=lambda t: t.values).values[1]
    for k, limit in enumerate(np.linspace(low, high, limits + 2)[1:-1]):
        _least(tries, numbers, partial(Trial.grade, measure=0, limit=float(limit)), rest, seed + 2 + k)


def _choices(numbers: Sequence[Span], most: int) -> list[tuple[float, ...]] | None:
    """Every layout there is, where all anchors that move choose among listed places; None where not, or where they are too many."""
    if not all(span.whole for span in numbers):
        return None
    moves = [list(each) for _, each in groupby(numbers, key=lambda span: span.move)]
    if math.prod(math.comb(int(move[0].most) + len(move), len(move)) for move in moves) > most:
        return None
    rows = product(*(combinations_with_replacement(range(int(move[0].most) + 1), len(move)) for move in moves))
    return [tuple(float(n) for move in row for n in move) for row in rows]


def _in_one_order(numbers: Sequence[Span], point: Array) -> tuple[float, ...]:
    """A layout's numbers, those that choose places for one move in ascending order: the same choice is then the same layout."""
    rows = groupby(zip(numbers, point.tolist(), strict=True), key=lambda row: (row[0].move, row[0].whole))
    return tuple(float(n) for (_, whole), row in rows for n in (sorted(v for _, v in row) if whole else (v for _, v in row)))


def _least(tries: _Tries, numbers: Sequence[Span], grade: Callable[[Trial], float], most: int, seed: int) -> None:
    """Differential evolution of `most` tries at the most, `FEWEST` at the least."""
    from scipy.optimize import Bounds, differential_evolution

    many = max(FEWEST, min(AMONG, most // 6))

    def graded(x: Array, /) -> Any:  # (layout,) of (number, layout), as `vectorized` has it; scipy's types know a single point alone
        points = [_in_one_order(numbers, column) for column in np.atleast_2d(x.T)]
        return np.array([grade(trial) for trial in tries(points)])

    first = _spread(numbers, many, seed)
    differential_evolution(
        graded, Bounds(*_bounds(numbers)), maxiter=max(most // many - 1, 0), init=first, rng=seed, polish=False, vectorized=True,
        updating="deferred", integrality=np.array([span.whole for span in numbers]), tol=ALIKE, atol=0.0,
    )  # fmt: skip


def _bounds(numbers: Sequence[Span]) -> tuple[Array, Array]:
    return np.array([span.least for span in numbers]), np.array([span.most for span in numbers])


def _spread(numbers: Sequence[Span], many: int, seed: int) -> Array:
    """(layout, number) a first generation that takes each number once at each of so many even steps from bound to bound.

    A Latin hypercube with its edges, since the least often lies at a bound, where evolution alone comes to only by and by.
    """
    low, high = _bounds(numbers)
    steps = np.tile(np.arange(many), (len(numbers), 1))
    return np.asarray(low + np.random.default_rng(seed).permuted(steps, axis=1).T / (many - 1) * (high - low))


def not_bettered(holding: Sequence[Trial]) -> tuple[Trial, ...]:
    """Of layouts in order of their values those that none betters in every measure, thinned out to `FOUND` of them."""
    out: list[Trial] = []
    for trial in holding:
        if not out or (trial.values[-1] < out[-1].values[-1] and len(trial.values) > 1):
            out.append(trial)
    if len(out) <= FOUND:
        return tuple(out)
    return tuple(out[k] for k in dict.fromkeys(round(k) for k in np.linspace(0, len(out) - 1, FOUND)))


def name_of(place: int) -> str:
    """The name a found layout is handed back under."""
    return f"found {place + 1}"


def rigged(scenario: Scenario) -> Scenario:
    """The scenario with as many anchors as its search asks for, pegged on the ring of the first guy's anchor; as drawn where it asks none.

    The first spar's cables are checked to form a ring when the file is read.
    """
    ways = None if scenario.search is None else scenario.search.ways
    if ways is None:
        return scenario
    whole = ring.ring(scenario, ways)
    return whole.model_copy(update={"anchor": tuple(pegged(whole, anchor, anchor.east, anchor.north) for anchor in whole.anchor)})


def _with_found(scenario: Scenario, start: Scenario, front: Sequence[Trial]) -> Scenario:
    """The scenario with the found layouts in place of its own; `start`: with the anchors and cables of the search."""
    found = tuple(layouts.named(start, name_of(k), trial.anchors) for k, trial in enumerate(front))
    return scenario.model_copy(update={"layouts": found})
