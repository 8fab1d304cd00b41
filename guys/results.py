"""What a run found, as arrays: the one object that tables, files and drawings read.

Nothing here computes mechanics.  `guys.studies.standing.solve` fills a `Solution`; the sheet, the result file and the
terminal table take one and never call a solver, so that no figure can hold a number the checks did not see.

Shapes carry a leading ``case`` axis: case 0 is the still-air setting case, the others are the listed cases and wind
directions in file order.  A case without an equilibrium (``state == "none"``) holds NaN in every array.

Units are SI, angles radians, bearings clockwise from grid north; wind bearings say where the wind comes from (NaN where the case
holds no wind).  Tension is positive; a spar's axial force is positive in tension, so thrust is negative.  Forces and moments "on the
ground" and "on the anchor" are what the structure does to the ground.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, fields, replace
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from guys.scenario import Scenario

Array = NDArray[np.float64]
Flags = NDArray[np.bool_]
State = Literal["stable", "neutral", "unstable", "none"]
Verdict = Literal["within", "past", "not judged"]


@dataclass(frozen=True)
class CableForces:
    """End forces of every cable.

    name : (cable,) names; from_spar, to_anchor : (cable,) name of the spar it leaves and of the anchor it runs to (None between two spars)
    tension_anchor, tension_top : (case, cable) [N] at the `to` and the `from` end
    force_on_anchor, force_on_spar : (case, cable, 3) [N] on what holds the `to` end and on the spar at the `from` end
    unstressed_length : (case, cable) [m] at the setting's temperature, the same in every case
    slack, present : (case, cable) dropped by the contract's rule; False where the case takes the cable away
    curve : (case, cable, point, 3) [m] the cable as it hangs, from the `to` end to the `from` end
    strength : (cable,) [N] least breaking load, NaN where not given
    """

    name: tuple[str, ...]
    from_spar: tuple[str, ...]
    to_anchor: tuple[str | None, ...]
    tension_anchor: Array
    tension_top: Array
    force_on_anchor: Array
    force_on_spar: Array
    unstressed_length: Array
    slack: Flags
    present: Flags
    curve: Array
    strength: Array


@dataclass(frozen=True)
class AnchorPulls:
    """name : (anchor,); position : (anchor, 3) [m] as drawn; pull : (case, anchor, 3) [N] on the anchor, up positive."""

    name: tuple[str, ...]
    position: Array
    pull: Array

    @property
    def uplift(self) -> Array:
        """(case, anchor) [N], positive upward."""
        return self.pull[..., 2]

    @property
    def horizontal(self) -> Array:
        """(case, anchor) [N]."""
        return np.hypot(self.pull[..., 0], self.pull[..., 1])

    @property
    def resultant(self) -> Array:
        """(case, anchor) [N]."""
        return np.asarray(np.linalg.norm(self.pull, axis=-1))


@dataclass(frozen=True)
class FootForces:
    """What spars do to what carries their feet: the ground (`carried_by` None) or another spar.

    spar, carried_by : (foot,); force : (case, foot, 3) [N]; moment : (case, foot, 3) [N m] about the foot
    """

    spar: tuple[str, ...]
    carried_by: tuple[str | None, ...]
    force: Array
    moment: Array


@dataclass(frozen=True)
class SparLine:
    """One spar along its length.  Stations repeat where an inner force jumps: first the side toward the foot.

    station : (station,) [m] from the foot
    drawn : (station, 3) [m] drawn position; axes : (3, 3) rows: two stated local axes, then the spar's own axis
    displacement : (case, station, 3) [m] from the drawn position
    axial, torsion : (case, station) [N], [N m]; bending, shear : (case, station, 2) [N m], [N] about, and along, the two local axes
    """

    name: str
    station: Array
    drawn: Array
    axes: Array
    displacement: Array
    axial: Array
    bending: Array
    torsion: Array
    shear: Array


@dataclass(frozen=True)
class Extreme:
    """A greatest value and the listed case it belongs to; `peak` is the refined one over the full circle of winds (at least `value`)."""

    value: float
    case: str
    wind_from: float
    peak: float
    peak_case: str
    peak_wind_from: float


@dataclass(frozen=True)
class CableWorst:
    """factor = strength / greater of listed and refined tension; NaN where no strength is given.

    strength : of the weakest link, whose name is `weakest` ("" where the cable has no ends)
    initial : still-air tension at the `to` end over the rope's breaking load
    """

    name: str
    tension: Extreme
    strength: float
    factor: float
    slack_winds: tuple[tuple[str, float], ...] = ()
    weakest: str = ""
    initial: float = math.nan


@dataclass(frozen=True)
class AnchorWorst:
    """Each of the three with its own governing case."""

    name: str
    resultant: Extreme
    horizontal: Extreme
    uplift: Extreme


@dataclass(frozen=True)
class FootWorst:
    """down: greatest push on the ground [N]; lift: greatest pull up [N] (0: never); sideways [N]; whole: resultant [N], of a hinged foot
    the force on its pin; turning [N m]."""

    spar: str
    carried_by: str | None
    down: Extreme
    lift: Extreme
    sideways: Extreme
    whole: Extreme
    turning: Extreme


@dataclass(frozen=True)
class Worst:
    """The greatest loads of some of the cases."""

    cables: tuple[CableWorst, ...]
    anchors: tuple[AnchorWorst, ...]
    feet: tuple[FootWorst, ...]


@dataclass(frozen=True)
class Finding:
    """One thing checked.  `factor` is capacity / demand (or allowed / found); NaN with verdict "not judged".

    source : of the capacity;  governs : the part, the way of failing or the place that governs, in words, where there are several
    source : of the capacity;  margin [m] : of rules of the site: the distance found (capacity) less the one needed (demand)
    """

    thing: str
    quantity: str
    demand: float
    capacity: float
    unit: str
    required: float
    factor: float
    verdict: Verdict
    case: str
    wind_from: float
    why: str
    default: bool = False
    source: str = ""
    governs: str = ""
    margin: float = math.nan


@dataclass(frozen=True)
class Sweep:
    """Full-circle sweep of every wind case, refined at the peaks.

    case : (line,) names of the case lines that hold wind; bearing : (line, direction) [rad] ascending
    tension : (line, direction, cable) greater end [N]; resultant, horizontal, uplift : (line, direction, anchor) [N]
    slack : (line, direction, cable)
    """

    case: tuple[str, ...]
    bearing: Array
    tension: Array
    resultant: Array
    horizontal: Array
    uplift: Array
    slack: Flags

    def of(self, names: Sequence[str]) -> Sweep:
        """The case lines of those names."""
        rows = [k for k, name in enumerate(self.case) if name in names]
        columns = (getattr(self, f.name)[rows] for f in fields(self) if f.name != "case")
        return Sweep(tuple(self.case[k] for k in rows), *columns)


@dataclass(frozen=True)
class SelfCheck:
    """Two checks made apart from the solver.

    balance : greatest out-of-balance of whole-structure force and moment over all cases, relative to the reference force
    resolve : "agrees" | "inconclusive" | "other stable state"; difference : greatest relative difference of tension found
    resolved_case, resolved_wind_from : the governing case that was solved again
    """

    balance: float
    resolve: Literal["agrees", "inconclusive", "other stable state", "not run"]
    difference: float
    resolved_case: str
    resolved_wind_from: float


@dataclass(frozen=True)
class Solution:
    """Everything a run found.

    case : (case,) names; wind_from : (case,) [rad], NaN without wind; state, note, reason : (case,)
    out_of_balance : (case,) relative to `reference_force` : (case,) [N]; iterations : (case,)
    head_lean : (case, spar) [rad] between the drawn axis and the line foot-head
    unsettled : (case,) whether a case counts as not standing (a free spin of a ball-based spar does not); failed : the solver failed
    somewhere
    worst_cables, worst_anchors, worst_feet : over all cases;  crew : over service cases, None where every case is one, or where no service
    case holds the wind that others do
    """

    scenario: Scenario
    version: str
    case: tuple[str, ...]
    wind_from: Array
    state: tuple[State, ...]
    note: tuple[str | None, ...]
    reason: tuple[str | None, ...]
    out_of_balance: Array
    reference_force: Array
    iterations: NDArray[np.int64]
    head_lean: Array
    cables: CableForces
    anchors: AnchorPulls
    bases: FootForces
    heels: FootForces
    spars: tuple[SparLine, ...]
    worst_cables: tuple[CableWorst, ...]
    worst_anchors: tuple[AnchorWorst, ...]
    worst_feet: tuple[FootWorst, ...]
    findings: tuple[Finding, ...]
    sweep: Sweep | None
    check: SelfCheck
    warnings: tuple[str, ...] = ()
    notes: tuple[str, ...] = ()
    not_checked: tuple[str, ...] = ()
    cautions: tuple[str, ...] = ()
    unsettled: tuple[bool, ...] = ()
    failed: bool = False
    crew: Worst | None = None

    @property
    def loads_are(self) -> Literal["", "service", "FACTORED"]:
        """Of which cases a crew's loads are: "" where all are service cases, "FACTORED" where none of those there are will do."""
        if all(case.service for case in self.scenario.case):
            return ""
        return "FACTORED" if self.crew is None else "service"

    def for_crew(self) -> Solution:
        """As a crew is to see it: greatest loads and sweep of the service cases alone."""
        if self.crew is None:
            return self
        kind = self.scenario.kind_of
        sweep = None if self.sweep is None else self.sweep.of([name for name in self.sweep.case if kind(name) == "service"])
        return replace(self, worst_cables=self.crew.cables, worst_anchors=self.crew.anchors, worst_feet=self.crew.feet, sweep=sweep)

    @property
    def past(self) -> tuple[Finding, ...]:
        """The findings past their allowable."""
        return tuple(f for f in self.findings if f.verdict == "past")
