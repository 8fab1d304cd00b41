"""Everything judged, in every case of a batch.

One table for all of it, so that findings and every study judge the same things in the same way.  A kind of thing has a module of its own,
whose function takes solved cases and gives `Demands`, one item a column.

    chains  cables and what makes them fast        bases  what stands on the ground        spars  what stands        anchors  what holds
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from guys.checks import anchors, bases, chains, spars
from guys.checks.extremes import measures
from guys.checks.items import Demands, Item, beside, group, join
from guys.equilibrium import Evaluation, Problem, State
from guys.recovery import Forces

__all__ = ["Demands", "Item", "beside", "group", "join", "of"]


def of(problem: Problem, state: State, found: Evaluation, forces: Forces) -> Demands:
    """Everything judged, in every case of solved equilibria."""
    m = measures(forces)
    every = beside(
        [
            chains.demands(problem, m.tension),
            bases.sliding(problem, m.slide),
            bases.bearing(problem, forces),
            spars.leans(problem, m.lean),
            spars.sections(problem, state, found),
            anchors.demands(problem, forces),
        ]
    )
    return _in_factored_cases(problem, every)


def _in_factored_cases(problem: Problem, every: Demands) -> Demands:
    """The factors required of factored cases where `allowables.factored` has its own."""
    other = problem.structure.scenario.allowables.factored
    required = every.required.copy()
    factored = np.array([line.kind == "factored" for line in problem.loads.lines])
    for k, item in enumerate(every.items):
        required[factored, k] = other.get(item.allowable, required[factored, k])
    return replace(every, required=required)
