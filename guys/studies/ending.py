"""How equilibrium is lost at the end of a path: which spar goes where, in which motion, and which cables are slack by then.

Where the tangent has softened on the way, the structure goes along its lowest mode; where it is still stiff (it loses a cable or a side it
leaned on, and jumps), from its last stable state to the first one found beyond, lying down or not.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from guys import recovery, stability
from guys.equilibrium import Problem, State
from guys.path import At, Paths
from guys.reserves import Mode, Outline
from guys.rotation import Array
from guys.studies.batch import CURVE_POINTS, along_lowest_mode, falling_words, slack_words

DRAWN = 0.08
"""Greatest move of a mode as it is drawn, of the structure's height."""
FAULT = "the solver failed here; this is a fault of the program, not a statement about the structure"


@dataclass(frozen=True)
class Ending:
    """The end of one path: problem and last stable state there, its least eigenvalue, and where it goes if equilibrium is lost there."""

    one: Problem
    last: State
    least: float
    after: State


def ending(at: At, paths: Paths, k: int, at_start: float) -> Ending:
    """The end of path `k`, whose least eigenvalue was `at_start` where it set out."""
    one, last = at(np.array([k]), paths.low[[k]]), paths.state.take(paths.of(k)[-1:])
    least = stability.least_cost(one, last)
    jump = None if least < stability.SOFT * at_start else paths.beyond.get(k)
    return Ending(one, last, least, jump or along_lowest_mode(one, last))


def falls(end: Ending) -> str:
    """In words how a path ends, and in which patch of gust."""
    slack = recovery.forces(end.one, end.last, end.one.evaluate(end.last)).slack[0]
    patch = end.one.loads.lines[0].patch
    where = "" if patch is None else f"{patch.words}: "
    return f"{where}{falling_words(end.one, end.last, end.after)}{slack_words(end.one, slack)}"


def mode(end: Ending) -> Mode:
    """The motion in which a path loses its equilibrium."""
    spar, bearing = stability.falling_part(end.one, end.last, end.after)
    here, there = outline(end.one, end.last), outline(end.one, end.after)
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
