"""What the reserve study found: the object that its table, files and figure read.

Factors multiply loads of a case, in its own wind and direction: `WIND` the wind alone, `ALL` dead, wind and ice together; what the cables
were set to stays.  Bearings [rad] say where the wind comes from.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import inf, isnan, nan

import numpy as np
from numpy.typing import NDArray

from guys.rotation import Array
from guys.scenario import Scenario

WIND, ALL = "wind", "all"
WORDS = {WIND: "wind alone", ALL: "all loads"}
"""What a factor is on."""
STABLE, CONDITIONALLY, NEUTRAL, UNSTABLE, NONE, UNKNOWN = "stable", "conditionally stable", "neutral", "unstable", "none", "not known"
MEANING = {
    STABLE: "stable, and equilibrium is not lost up to the greatest factor looked at",
    CONDITIONALLY: "stable under its own loads, and lost at a finite factor on them",
    NEUTRAL: "a motion costs nothing",
    UNSTABLE: "in an equilibrium that does not hold",
    NONE: "no equilibrium: it falls",
    UNKNOWN: "the solver failed; a fault of the program, not a statement about the structure",
}
"""Verdicts, the gravest last, and what they mean."""


@dataclass(frozen=True)
class Outline:
    """Lines on the site [m]: of every spar (station, 3), of every cable (cable, point, 3), NaN where it is taken away."""

    spars: tuple[Array, ...]
    cables: Array

    def toward(self, other: Outline, share: float) -> Outline:
        """So far on the straight way to another."""
        spars = tuple(a + share * (b - a) for a, b in zip(self.spars, other.spars, strict=True))
        return Outline(spars, self.cables + share * (other.cables - self.cables))

    def apart(self, other: Outline) -> float:
        """Greatest distance of spars [m]."""
        return max(float(np.linalg.norm(b - a, axis=-1).max()) for a, b in zip(self.spars, other.spars, strict=True))


@dataclass(frozen=True)
class Mode:
    """The motion in which equilibrium is lost: the last stable state, and where it goes from there.

    spar, bearing : which turns most, and where its head goes [rad];  moves : (station, 3) of every spar, the greatest one
    gone : the last state moved along it, as far as it is drawn
    """

    spar: str
    bearing: float
    moves: tuple[Array, ...]
    gone: Outline


@dataclass(frozen=True)
class Path:
    """States solved under rising factors.

    factor (point,); head (point, spar, 3) [m] moves of the heads from still air; tension (point, cable) [N] the greater of both ends;
    slack (point, cable)
    """

    factor: Array
    head: Array
    tension: Array
    slack: NDArray[np.bool_]


@dataclass(frozen=True)
class Reserve:
    """How much more of its loads a case takes.

    stands_to : greatest factor at which a stable equilibrium was found;  lost : whether it is lost at the next (0.1 %)
    falls : how, in words;  mode : None where not lost;  stiffness : least eigenvalue there over that in still air
    branches_at : factor at which the path turns off its straight branch and goes on, NaN where it does not
    drops : (cable,) factor at which each first drops, 1 where slack already, NaN where it does not
    last : outline of the last state found
    """

    loads: str
    stands_to: float
    lost: bool
    failed: bool
    falls: str
    mode: Mode | None
    stiffness: float
    branches_at: float
    drops: tuple[float, ...]
    path: Path
    last: Outline

    @property
    def factor(self) -> float:
        """At which equilibrium is lost; NaN where it is not, or not known."""
        return self.stands_to if self.lost and not self.failed else nan


@dataclass(frozen=True)
class Standing:
    """One case in one direction: its verdict, words to it, least eigenvalue over that in still air, and reserves (none if it falls)."""

    case: str
    wind_from: float
    verdict: str
    words: str
    stiffness: float
    reserves: tuple[Reserve, ...]

    def of(self, loads: str) -> Reserve | None:
        """The reserve of a kind of loads."""
        return next((r for r in self.reserves if r.loads == loads), None)


@dataclass(frozen=True)
class Reserves:
    """every : listed cases and directions;  settled : of each, whether it is stable, or free to spin about its own axis only

    erected : outline in still air, None where it does not stand;  most : greatest factor looked at
    """

    scenario: Scenario
    version: str
    every: tuple[Standing, ...]
    settled: tuple[bool, ...]
    erected: Outline | None
    most: float
    cautions: tuple[str, ...]

    def lowest(self, case: str, loads: str) -> tuple[Standing, Reserve] | None:
        """The direction of a case with the least factor, the first where none is lost; None where there is no such path."""
        pairs = [(s, r) for s in self.every if s.case == case and (r := s.of(loads)) is not None]
        return min(pairs, key=lambda pair: inf if isnan(pair[1].factor) else pair[1].factor, default=None)

    @property
    def cases(self) -> tuple[str, ...]:
        """Names of the cases in their order."""
        return tuple(dict.fromkeys(s.case for s in self.every))

    @property
    def lowest_first(self) -> tuple[tuple[Standing, Reserve], ...]:
        """The lowest direction of every case, wind alone and all loads, the least factor first."""
        pairs = [pair for case in self.cases for loads in WORDS if (pair := self.lowest(case, loads)) is not None]
        return tuple(sorted(pairs, key=lambda pair: inf if isnan(pair[1].factor) else pair[1].factor))

    @property
    def first_drops(self) -> tuple[tuple[str, str, str, float, float], ...]:
        """Least factor at which each cable drops: case, loads, cable, factor, bearing; those that never do are left out."""
        out = []
        for case in self.cases:
            for loads in WORDS:
                rows = [(s, r) for s in self.every if s.case == case and (r := s.of(loads)) is not None]
                for k, cable in enumerate(self.scenario.cable):
                    falls = [(r.drops[k], s.wind_from) for s, r in rows if not isnan(r.drops[k])]
                    if falls:
                        out.append((case, loads, cable.name, *min(falls)))
        return tuple(out)

    @property
    def failed(self) -> bool:
        """Whether the solver failed anywhere."""
        return any(s.verdict == UNKNOWN for s in self.every)

    @property
    def notes(self) -> tuple[str, ...]:
        """What has to be said of the numbers."""
        kinds = [f"{verdict}: {MEANING[verdict]}" for verdict in dict.fromkeys(s.verdict for s in self.every)]
        return (
            *kinds,
            "on the way everything is elastic and unbroken: nothing yields, slips or parts; a factor is no allowable, "
            "and other things may go first (guys solve and guys limit judge those)",
            f"wind alone: the case's wind times the factor, the rest kept; all loads: dead, wind and ice; up to {self.most:g} times",
            "stiffness: least eigenvalue of the tangent over that in still air, 1 as erected, toward 0 where equilibrium is lost",
            *self.scenario.notes,
        )
