"""Setting out: where each peg goes, by coordinates and by bearing and tape, and what pegs found elsewhere do.

All counts from the foot of the first spar.  With the scenario's metres true on the ground (see `guys.site.grid`):

    level distance  d = hypot(east, north)        slope distance  hypot(d, rise)        grid distance  K d
    true bearing = grid bearing + convergence     magnetic bearing = grid bearing - declination

Check distances run round the ring of pegs in order of their bearing, as taped on the level: 1.732 R between three pegs alike, 1.414 R
between four.  Closure is what the ring of check distances, at the bearings between pegs, fails to close by once every figure is rounded as
printed; it tells a slip of the pen in the sheet, and how near a taped ring can be expected to close.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from itertools import pairwise

import numpy as np

from guys.results import Solution
from guys.rotation import Array
from guys.scenario import Scenario, drawn
from guys.studies.batch import Progress
from guys.studies.standing import solve

PRINTED = 0.01
"""[m] to which distances are printed."""
PRINTED_TURN = math.radians(0.01)
"""To which bearings of a set-out are printed."""


@dataclass(frozen=True)
class Pegs:
    """name : (peg,);  position : (peg, 3) [m] east, north, level from the origin;  base : (3,) the foot all counts from."""

    scenario: Scenario
    name: tuple[str, ...]
    position: Array
    base: Array

    @property
    def run(self) -> Array:
        """(peg, 3) [m] from the base."""
        return np.asarray(self.position - self.base)

    @property
    def bearing(self) -> Array:
        """(peg,) [rad] grid bearing from the base, in [0, 2 pi)."""
        return np.asarray(np.arctan2(self.run[:, 0], self.run[:, 1]) % (2 * math.pi))

    @property
    def level_distance(self) -> Array:
        """(peg,) [m] on the level, on the ground."""
        return np.hypot(self.run[:, 0], self.run[:, 1])

    @property
    def slope_distance(self) -> Array:
        """(peg,) [m] from the base to the peg as the tape lies, straight."""
        return np.asarray(np.linalg.norm(self.run, axis=1))

    @property
    def ring(self) -> tuple[tuple[int, int], ...]:
        """Neighbours in order of bearing, the last with the first where there are three or more."""
        order = [int(k) for k in np.argsort(self.bearing, kind="stable")]
        pairs = list(pairwise(order))
        return tuple(pairs + ([(order[-1], order[0])] if len(order) > 2 else []))

    def between(self, a: int, b: int) -> tuple[float, float, float]:
        """Level distance, slope distance [m] and grid bearing [rad] from peg a to peg b."""
        run = self.position[b] - self.position[a]
        return float(np.hypot(run[0], run[1])), float(np.linalg.norm(run)), math.atan2(run[0], run[1]) % (2 * math.pi)

    @property
    def closure(self) -> tuple[float, float]:
        """What the printed ring fails to close by, and its length [m]; NaN without a ring."""
        if len(self.name) < 3:
            return math.nan, math.nan
        legs = [self.between(a, b) for a, b in self.ring]
        lengths = [PRINTED * round(leg[0] / PRINTED) for leg in legs]
        turns = [PRINTED_TURN * round(leg[2] / PRINTED_TURN) for leg in legs]
        east = math.fsum(d * math.sin(t) for d, t in zip(lengths, turns, strict=True))
        north = math.fsum(d * math.cos(t) for d, t in zip(lengths, turns, strict=True))
        return math.hypot(east, north), math.fsum(lengths)


def pegs(scenario: Scenario) -> Pegs:
    """The pegs of a scenario."""
    foot = drawn.foot({s.name: s for s in scenario.spar}, scenario.spar[0].name)
    position = np.array([[a.east, a.north, a.level] for a in scenario.anchor]).reshape(-1, 3)
    return Pegs(scenario, tuple(a.name for a in scenario.anchor), position, np.array(foot))


@dataclass(frozen=True)
class AsBuilt:
    """Pegs as surveyed beside those planned, and both solved with the same initial tensions.

    found : (peg, 3) [m] east, north, level;  surveyed : (peg,) names that were surveyed, the others stand as planned
    """

    planned: Pegs
    found: Array
    surveyed: tuple[str, ...]
    before: Solution
    after: Solution

    @property
    def off(self) -> Array:
        """(peg, 3) [m] found less planned."""
        return np.asarray(self.found - self.planned.position)


def as_built(scenario: Scenario, places: Mapping[str, Sequence[float]], progress: Progress | None = None) -> AsBuilt:
    """Solve the scenario as planned and with the pegs where they were found; places : name -> east, north, level [m]."""
    planned = pegs(scenario)
    found = np.array([places.get(n, p) for n, p in zip(planned.name, planned.position, strict=True)], dtype=float).reshape(-1, 3)
    moved = tuple(
        a.model_copy(update={"east": float(p[0]), "north": float(p[1]), "level": float(p[2])})
        for a, p in zip(scenario.anchor, found, strict=True)
    )
    before, after = (solve(s, progress=progress) for s in (scenario, scenario.model_copy(update={"anchor": moved})))
    return AsBuilt(planned, found, tuple(n for n in planned.name if n in places), before, after)
