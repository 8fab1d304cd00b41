"""How big the holdfasts must be: for every anchor and every holdfast of the file the least size that holds.

    least x with  min over cases of  low(x, a) / (n T)  >=  1

T, a are pull and angle of the anchor and n the factor required (allowables.anchor, its own in factored cases) in every case and wind
solved for: the listed ones and the full circle, refined at the peaks of pull, horizontal, uplift and of every factor judged.  The low
value of the holdfast counts, along each case's own pull.  One thing is sized at a time, the rest of the table kept: mass of a block,
length of a deadman, pattern of pickets, depth and plates of a screw (all plates scaled alike), the torque to reach where its shaft is
given, bond length of a bar, the pull to show in a test.  Sizes are looked for from small to large, then narrowed by halving, so that a
size is found too where more is not always better (a heavier block presses harder on the ground).

An anchor of several cables is sized for their resultant; it is a single point of failure, and is told so.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np

from guys import holdfasts, stability, units
from guys.checks.anchors import angle, granted, idle, lacking
from guys.constants import NONZERO
from guys.errors import ScenarioError
from guys.holdfasts import deadman
from guys.holdfasts.picket import combinations
from guys.loads import CaseLine
from guys.recovery import join
from guys.rotation import Array
from guys.scenario import Scenario
from guys.scenario.held import FOOT, SLENDEREST, unusual
from guys.scenario.holding import Block, Deadman, Holdfast, Picket, Rock, Screw, Tested
from guys.scenario.model import AnchorPoint
from guys.scenario.reader import fault_at
from guys.studies.batch import Batch, Progress
from guys.studies.standing import cases
from guys.version import __version__

STEPS = 60
"""Sizes tried from least to greatest, evenly by their logarithm."""
FOUND = 1e-10
"""Relative distance to which the least size between two tried is found."""


@dataclass(frozen=True)
class Size:
    """One thing of a holdfast that may be sized: its name, its dimension, the bounds it is looked for in, and how it is put in.

    given : its value in the file, None where it has none
    """

    name: str
    dimension: str
    least: float
    most: float
    given: float | None
    put: Callable[[float], Holdfast]


@dataclass(frozen=True)
class Need:
    """What one holdfast must be at one anchor.

    size, dimension : what is sized;  needed, given : SI, NaN where nothing will do or nothing is given;  pattern : of pickets, else empty
    holds : the holdfast of that size, None where nothing will do, and then the reason
    low, best, high, pull, factor, required, angle, case, wind_from, governs : in the case of the least factor over the one required
    """

    holdfast: str
    kind: str
    size: str
    dimension: str
    needed: float
    given: float
    pattern: str
    holds: Holdfast | None
    reason: str
    low: float = math.nan
    best: float = math.nan
    high: float = math.nan
    pull: float = math.nan
    factor: float = math.nan
    required: float = math.nan
    angle: float = math.nan
    case: str = ""
    wind_from: float = math.nan
    governs: str = ""

    @property
    def more(self) -> float:
        """Needed over given: what needs the least change comes first."""
        if self.holds is None:
            return math.inf
        return self.needed / self.given if self.given > 0 else self.needed


@dataclass(frozen=True)
class AnchorNeeds:
    """cables : that run to the anchor;  proof : its greatest resultant times factor required;  pull, angle, case, wind_from : there

    needs : smallest first
    """

    name: str
    held_by: str | None
    cables: tuple[str, ...]
    pull: float
    angle: float
    proof: float
    case: str
    wind_from: float
    needs: tuple[Need, ...]

    def trench(self, need: Need) -> tuple[float, float] | None:
        """Of a deadman how far behind the anchor it lies, and the cable in its trench [m], in line with `pull`; None of other kinds."""
        return deadman.trench(need.holds.depth, self.angle) if isinstance(need.holds, Deadman) and self.angle > 0.0 else None


@dataclass(frozen=True)
class Sizing:
    """What the study found; stands : whether every case has a stable equilibrium."""

    scenario: Scenario
    version: str
    anchors: tuple[AnchorNeeds, ...]
    stands: bool
    failed: bool
    warnings: tuple[str, ...]
    notes: tuple[str, ...]
    not_checked: tuple[str, ...]

    @property
    def short(self) -> tuple[str, ...]:
        """Anchors for which none of the file's holdfasts can be made to hold."""
        return tuple(a.name for a in self.anchors if not any(need.holds is not None for need in a.needs))


@dataclass(frozen=True)
class Pulls:
    """Pulls of one anchor in every case and wind with an equilibrium: force, angle, factor required, idle (case,), and its lines."""

    force: Array
    angle: Array
    required: Array
    idle: Array
    lines: tuple[CaseLine, ...]


def size(scenario: Scenario, progress: Progress | None = None) -> Sizing:
    """Size every holdfast of the file for every anchor.

    Raises ScenarioError where the file has no holdfast, or no still-air state meets the initial tensions asked for.
    """
    if not scenario.holdfast:
        text = 'missing; nothing to size: give what is at hand, such as a table with kind = "block", mass and friction'
        raise ScenarioError([fault_at(scenario, ("holdfast",), text)])
    _, listed, swept = cases(scenario, progress=progress)
    return sized(scenario, listed, swept)


def sized(scenario: Scenario, listed: Batch, swept: Batch | None, own: bool = False) -> Sizing:
    """The sizes that solved cases ask for; none where the file has no holdfast.

    own : of an anchor that names its holdfast, of that alone
    """
    batches = [batch for batch in (listed, swept) if batch is not None]
    anchors = tuple(_anchor(scenario, k, _pulls(scenario, k, batches), own) for k in range(len(scenario.anchor)))
    settled = [bool(((b.code == stability.STABLE) | b.spins).all()) for b in batches]
    failed = any(bool((b.code == stability.FAILED).any()) for b in batches)
    told = tuple(_warnings(scenario, anchors, all(settled)))
    angles = np.concatenate([angle(batch.forces.pull.reshape(-1, 3)) for batch in batches])
    said = tuple(words for name, holdfast in scenario.holdfast.items() for words in granted(name, holdfast, angles))
    lacks = tuple(lacking(scenario.holdfast))
    return Sizing(scenario, __version__, anchors, all(settled), failed, told, said, lacks)


def _pulls(scenario: Scenario, k: int, batches: Sequence[Batch]) -> Pulls:
    every = [f for b in batches for f in (b.forces, b.mirror) if f is not None]
    lines = [lines for b in batches for lines in (b.lines, b.mirror_lines if b.mirror is not None else ())]
    forces = join(every)
    pull = forces.pull[:, k]
    rows = np.flatnonzero(~np.isnan(pull).any(axis=1))
    flat = [line for some in lines for line in some]
    strength = np.linalg.norm(pull[rows], axis=1)
    required = np.array([scenario.allowables.required("anchor", line.kind) for line in flat])
    return Pulls(strength, angle(pull[rows]), required[rows], idle(scenario, forces)[rows, k], tuple(flat[r] for r in rows))


def _anchor(scenario: Scenario, k: int, pulls: Pulls, own: bool) -> AnchorNeeds:
    anchor = scenario.anchor[k]
    cables = tuple(c.name for c in scenario.cable if isinstance(c.to, AnchorPoint) and c.to.anchor == anchor.name)
    if len(pulls.force) == 0:
        return AnchorNeeds(anchor.name, anchor.holdfast, cables, math.nan, math.nan, math.nan, "", math.nan, ())
    tried = [anchor.holdfast] if own and anchor.holdfast is not None else scenario.holdfast
    needs = [need for name in tried for need in _needs(name, scenario.holdfast[name], pulls)]
    worst = int(np.argmax(pulls.required * pulls.force))
    line, force, required = pulls.lines[worst], float(pulls.force[worst]), float(pulls.required[worst])
    return AnchorNeeds(
        anchor.name, anchor.holdfast, cables, force, float(pulls.angle[worst]), required * force, line.name, line.wind_from,
        tuple(sorted(needs, key=lambda need: need.more)),
    )  # fmt: skip


def _needs(name: str, holdfast: Holdfast, pulls: Pulls) -> Iterator[Need]:
    if isinstance(holdfast, Picket):
        yield _pattern(name, holdfast, pulls)
        return
    for each in sizes(holdfast):
        found = least(each, pulls)
        given = math.nan if each.given is None else each.given
        head = (name, holdfast.kind, each.name, each.dimension)
        if found is None:
            yield Need(*head, math.nan, given, "", None, _why_not(each, pulls))
        else:
            yield Need(*head, found, given, "", each.put(found), "", **_governing(each.put(found), pulls))


def _pattern(name: str, holdfast: Picket, pulls: Pulls) -> Need:
    """The combination of the fewest pickets that holds; the first of the strongest where none does."""
    count = {pattern: number for pattern, (number, _, _) in combinations().items()}
    given = float(count[holdfast.pattern])
    for pattern in sorted(count, key=lambda p: (count[p], combinations()[p][1])):
        tried = holdfast.model_copy(update={"pattern": pattern})
        if reserve(tried, pulls) >= 1.0:
            return Need(name, "picket", "pattern", "", float(count[pattern]), given, pattern, tried, "", **_governing(tried, pulls))
    reason = _refusal(holdfast, pulls) or "no published combination holds it"
    return Need(name, "picket", "pattern", "", math.nan, given, "", None, reason)


def sizes(holdfast: Holdfast) -> Iterator[Size]:
    """What of a holdfast may be sized."""

    def keyed(key: str, dimension: str, least: float, most: float, name: str = "") -> Size:
        put = lambda x: holdfast.model_copy(update={key: x})  # noqa: E731
        return Size(name or key.replace("_", " "), dimension, least, most, getattr(holdfast, key), put)

    if isinstance(holdfast, Block):
        yield keyed("mass", "mass", 1.0, 1e6)
    elif isinstance(holdfast, Deadman):
        yield keyed("length", "length", 1.01 * FOOT, SLENDEREST[holdfast.form] * holdfast.height)
    elif isinstance(holdfast, Rock):
        yield keyed("bond_length", "length", 0.05, 20.0)
    elif isinstance(holdfast, Tested):
        yield keyed("pull", "force", 1.0, 1e8, "pull to show")
    elif isinstance(holdfast, Screw):
        yield from _screw_sizes(holdfast, keyed)


def _screw_sizes(holdfast: Screw, keyed: Callable[..., Size]) -> Iterator[Size]:
    widest = max(holdfast.helix)
    if holdfast.torque is not None:
        yield keyed("torque", "moment", 1.0, 1e6, "torque to reach")
        return
    soil = holdfast.soil
    if soil is not None and soil.torque is not None:

        def turned(x: float) -> Holdfast:
            return holdfast.model_copy(update={"soil": soil.model_copy(update={"torque": x})})

        yield Size("torque to reach", "moment", 1.0, 1e6, soil.torque, turned)
        return

    def wider(x: float) -> Holdfast:
        return holdfast.model_copy(update={"helix": [x / widest * d for d in holdfast.helix]})

    yield keyed("depth", "length", widest, 30.0)
    def by_torque(x: float) -> Holdfast:
        return holdfast.model_copy(update={"soil": None, "torque": x})

    yield Size("widest plate", "length", 0.05, holdfast.depth, widest, wider)
    if holdfast.shaft is not None:
        yield Size("torque to reach", "moment", 1.0, 1e6, None, by_torque)


def reserve(holdfast: Holdfast, pulls: Pulls) -> float:
    """Least factor over the one required of all cases; NaN where one that loads it is not judged."""
    low, needed = holdfasts.of(holdfast, pulls.angle).low, pulls.required * pulls.force
    loaded = (needed > 0) & ~(np.isnan(low) & pulls.idle)
    return float(np.min(low[loaded] / needed[loaded], initial=math.inf)) if loaded.any() else math.inf


def least(size: Size, pulls: Pulls) -> float | None:
    """The least size that holds, None where none within the bounds does."""

    def spare(logarithm: float) -> float:
        kept = reserve(size.put(math.exp(logarithm)), pulls)
        return -1.0 if math.isnan(kept) else min(kept, 2.0) - 1.0

    before = None
    for x in (float(s) for s in np.linspace(math.log(size.least), math.log(max(size.most, size.least)), STEPS)):
        if spare(x) >= 0.0:
            return math.exp(x if before is None else _narrowed(before, x, spare))
        before = x
    return None


def _narrowed(short: float, enough: float, spare: Callable[[float], float]) -> float:
    """The root between, or just above it where it falls short by rounding or `spare` jumps there."""
    from scipy.optimize import brentq

    root = float(brentq(spare, short, enough, xtol=FOUND))
    return next((x for x in (root, root + 2 * FOUND) if spare(x) >= 0.0), enough)


def _governing(holdfast: Holdfast, pulls: Pulls) -> dict[str, Any]:
    """What stands at the case of the least factor."""
    found = holdfasts.of(holdfast, pulls.angle)
    factor = np.where(np.isnan(found.low) | (pulls.force == 0), np.inf, found.low / np.where(pulls.force > 0, pulls.force, 1.0))
    k = int(np.argmin(factor / pulls.required))
    values = {name: float(getattr(found, name)[k]) for name in ("low", "best", "high")}
    line = pulls.lines[k]
    return values | {
        "pull": float(pulls.force[k]),
        "factor": float(factor[k]),
        "required": float(pulls.required[k]),
        "angle": float(pulls.angle[k]),
        "case": line.name,
        "wind_from": line.wind_from,
        "governs": found.modes[int(found.mode[k])],
    }


def _why_not(size: Size, pulls: Pulls) -> str:
    largest = size.put(size.most)
    found = holdfasts.of(largest, pulls.angle)
    first = found.modes[int(found.mode[np.argmin(found.low / np.maximum(pulls.required * pulls.force, NONZERO))])]
    return _refusal(largest, pulls) or f"no {size.name} up to {units.both(size.most, size.dimension)} will do: {first}"


def _refusal(holdfast: Holdfast, pulls: Pulls) -> str:
    """Why it is not judged in some case that loads it, empty where it is in all."""
    found = holdfasts.of(holdfast, pulls.angle)
    rows = np.flatnonzero(np.isnan(found.low) & (pulls.force > 0) & ~pulls.idle.astype(bool))
    return found.modes[int(found.mode[rows[np.argmax(pulls.force[rows])]])] if len(rows) else ""


def _warnings(scenario: Scenario, anchors: Sequence[AnchorNeeds], stands: bool) -> Iterator[str]:
    if not stands:
        yield "some case or wind has no stable equilibrium: what it would ask of the anchors is not in these sizes"
    for anchor in anchors:
        if len(anchor.cables) > 1:
            named = f"{len(anchor.cables)} cables ({', '.join(anchor.cables)})"
            yield f"anchor {anchor.name} holds {named}, sized for their resultant: a single point of failure, all go with it"
    yield from unusual(scenario)
    if "anchor" in scenario.allowables.defaulted:
        yield f"the factor of {scenario.allowables.anchor:g} asked for is the default of allowables.anchor, not yours"
