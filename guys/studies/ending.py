"""How equilibrium is lost at the end of a path: which spar goes where, in which motion, and which cables are slack by then.

Where the tangent has softened on the way, the structure goes along its lowest mode; where it is still stiff (it loses a cable or a side it
leaned on, and jumps), from its last stable state to the first one found beyond, lying down or not.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from guys import recovery, stability
from guys.equilibrium import Index, Problem, State
from guys.path import At, Paths
from guys.reserves import Mode, Outline
from guys.rotation import Array
from guys.studies.batch import CURVE_POINTS, along_lowest_mode, falling_words, slack_words

DRAWN = 0.08
"""Greatest move of a mode as it is drawn, of the structure's height."""
FAULT = "the solver failed here; this is a fault of the program, not a statement about the structure"


@dataclass(frozen=True, eq=False)
class Ending:
    """The end of one path: problem and last stable state there, its least eigenvalue, and the state it jumps to, None where it softened."""

    one: Problem
    last: State
    least: float
    jump: State | None

    @cached_property
    def after(self) -> State:
        """Where it goes if equilibrium is lost there."""
        return self.jump or along_lowest_mode(self.one, self.last)

    @cached_property
    def here(self) -> Outline:
        """The last stable state."""
        return outline(self.one, self.last)


def endings(at: At, paths: Paths, rows: Index, at_start: Array) -> list[Ending]:
    """The ends of some paths, whose least eigenvalues were `at_start` (row,) where they set out."""
    problem, last = at(rows, paths.low[rows]), paths.state.take(np.array([paths.of(int(k))[-1] for k in rows], dtype=np.int64))
    least = stability.least_costs(problem, last)
    jumps = [None if a < stability.SOFT * b else paths.beyond.get(int(k)) for k, a, b in zip(rows, least, at_start, strict=True)]
    one = np.arange(len(rows))[:, None]
    return [Ending(problem.take(k), last.take(k), float(a), jump) for k, a, jump in zip(one, least, jumps, strict=True)]


def falls(end: Ending) -> str:
    """In words how a path ends, and in which patch of gust."""
    slack = recovery.forces(end.one, end.last, end.one.evaluate(end.last)).slack[0]
    patch = end.one.loads.lines[0].patch
    where = "" if patch is None else f"{patch.words}: "
    return f"{where}{falling_words(end.one, end.last, end.after)}{slack_words(end.one, slack)}"


def mode(end: Ending) -> Mode:
    """The motion in which a path loses its equilibrium."""
    spar, bearing = stability.falling_part(end.one, end.last, end.after)
    here, there = end.here, outline(end.one, end.after)
    whole = here.apart(there)
    moves = tuple((b - a) / whole for a, b in zip(here.spars, there.spars, strict=True))
    structure = end.one.structure
    return Mode(structure.scenario.spar[spar].name, bearing, moves, here.toward(there, DRAWN * structure.height / whole))


def outline(one: Problem, state: State) -> Outline:
    """Spars and cables of a problem of one case."""
    found = one.evaluate(state)
    acting = recovery.sections(one, state, found, range(len(one.structure.scenario.spar)))
    spars = tuple(line.drawn + line.displacement[0] for line in recovery.lines(one, state, acting))
    curves: Array = recovery.curves(one, state, found, CURVE_POINTS)[0].copy()
    curves[one.loads.present[0] == 0] = math.nan
    return Outline(spars, curves)
