"""Everything judged, in every case of a batch.

One table for all of it, so that findings and every study judge the same things in the same way.  A kind of thing has a module of its own,
whose function takes solved cases and gives `Demands`, one item a column.

    chains  cables and what makes them fast        bases  what stands on the ground        spars  what stands        anchors  what holds
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

import numpy as np

from guys.checks import anchors, bases, chains, spars
from guys.checks.extremes import measures
from guys.checks.items import Demands, Item, beside, group, join
from guys.loads import CaseLine
from guys.recovery import Acting, Forces
from guys.structure import Structure

__all__ = ["Demands", "Item", "beside", "group", "join", "of"]


def of(structure: Structure, lines: Sequence[CaseLine], forces: Forces, acting: Acting) -> Demands:
    """Everything judged in every case: by forces at ends, and those that act along the spars that have a strength (`spars.judged`)."""
    m = measures(forces)
    every = beside(
        [
            chains.demands(structure, m.tension),
            bases.sliding(structure, m.slide),
            bases.bearing(structure, forces),
            spars.leans(structure, lines, m.lean),
            spars.sections(structure, len(lines), acting),
            anchors.demands(structure, forces),
        ]
    )
    return _in_factored_cases(structure, lines, every)


def _in_factored_cases(structure: Structure, lines: Sequence[CaseLine], every: Demands) -> Demands:
    """The factors required of factored cases where `allowables.factored` has its own."""
    other = structure.scenario.allowables.factored
    required = every.required.copy()
    factored = np.array([line.kind == "factored" for line in lines])
    for k, item in enumerate(every.items):
        required[factored, k] = other.get(item.allowable, required[factored, k])
    return replace(every, required=required)
