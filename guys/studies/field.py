"""What a crew cuts, sets, reads and accepts: lengths of rope, tensions by temperature, and what tells a tension without a gauge.

The rope to cut for a cable of unstressed length L0 at the setting temperature, the turnbuckle half out:

    chord + sag (the length of the curve less the chord) - stretch = L0,        cut = L0 - hardware + turn back

Stiffness is that of rope along the whole length, hardware included; what new rope stretches for good is not in it.

Tensions by temperature are solved one by one in still air with the unstressed lengths kept: cables and spars grow or shrink and the
structure finds its place.  So a mast that shortens in frost with its guys gives back part of what they would gain between fixed ends,
E A alpha dT: with spar and guys alike about cos^2 a is left, a the guy angle from the ground.

Readings are those of `guys.sounding` on the chords so found.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from guys import sounding
from guys.limits import Limits
from guys.loads import setting_line
from guys.results import Solution
from guys.rotation import Array
from guys.scenario import Scenario
from guys.scenario.field import FieldWork
from guys.scenario.model import AnchorPoint
from guys.setting import Setting, find
from guys.sounding import TIMED, WAYS, Span, Way
from guys.structure import build
from guys.studies.batch import Batch, Progress, solve_lines
from guys.studies.limit import limits
from guys.studies.standing import solve

SAME = 0.01
"""[K] within which a temperature of the table is that of the setting, which stands in it already."""


@dataclass(frozen=True)
class Cut:
    """Lengths (cable,) [m] at the setting temperature: chord + sag - stretch = unstressed; unstressed - hardware + turn_back = rope.

    take_up, pitch : of the turnbuckle, NaN where not given
    """

    chord: Array
    sag: Array
    stretch: Array
    unstressed: Array
    hardware: Array
    turn_back: Array
    take_up: Array
    pitch: Array

    @property
    def rope(self) -> Array:
        """(cable,) [m] rope to cut."""
        return np.asarray(self.unstressed - self.hardware + self.turn_back)

    @property
    def by_turn(self) -> Array:
        """(cable,) [m] by which a turn of the turnbuckle's body changes the length; NaN without a pitch."""
        return 2 * self.pitch


@dataclass(frozen=True)
class Still:
    """Still air at temperatures [K], the first that of the setting, with the unstressed lengths kept.

    tension (temperature, cable) [N] at the `to` end, NaN where the structure does not stand; slack (temperature, cable);
    chord (temperature, cable, 3) [m]; lean (temperature, spar) [rad]; curve (temperature, cable, point, 3) [m] from the `to` end;
    reason (temperature,) why it does not stand, None where it does
    """

    temperature: Array
    tension: Array
    slack: NDArray[np.bool_]
    chord: Array
    lean: Array
    reason: tuple[str | None, ...]
    curve: Array

    def span(self, k: int, scenario: Scenario) -> Span:
        """The cables at one temperature, as `guys.sounding` knows them."""
        ropes = [scenario.rope[c.rope] for c in scenario.cable]
        chord = np.where(np.isfinite(self.chord[k]), self.chord[k], 1.0)
        return Span(chord, np.array([r.stiffness for r in ropes]), np.array([r.mass for r in ropes]))


@dataclass(frozen=True)
class Field:
    """readings way -> (temperature, cable) [s] of all cycles, [m] or [N], NaN where there is nothing to read, as of a slack cable
    errors way -> (cable,) of the tension as set, of itself;  accepted way -> (2, cable) readings with as little and as much tension as
    is accepted at the setting temperature;  proof (anchor,) [N];  limits : for the wind card, None where [limit] asks for nothing or no
    case has wind
    """

    scenario: Scenario
    solution: Solution
    cut: Cut
    still: Still
    readings: Mapping[Way, Array]
    errors: Mapping[Way, Array]
    accepted: Mapping[Way, Array]
    proof: Array
    limits: Limits | None
    warnings: tuple[str, ...]

    @property
    def in_plane(self) -> Array:
        """(cable,) by how much of itself, at most, a swing in the cable's own plane tells too much tension as set."""
        return sounding.plane_stiffening(self.still.span(0, self.scenario), self.tension) if self.scenario.cable else np.zeros(0)

    @property
    def tension(self) -> Array:
        """(cable,) [N] at the setting temperature."""
        return np.asarray(self.still.tension[0])


def field(scenario: Scenario, progress: Progress | None = None) -> Field:
    """Everything for a crew.

    Raises ScenarioError as `guys.studies.standing.solve` does; where the structure does not stand in still air, tensions are NaN.
    """
    setting = find(build(scenario))
    own = scenario.setting.temperature
    others = (t for t in scenario.field.temperatures if abs(t - own) > SAME)
    still = in_still_air(setting, (own, *others), progress)
    solution = solve(scenario, progress=progress)
    cut = _cut(scenario, setting, still)
    taut = np.where(still.slack, np.nan, still.tension)
    rows = range(len(still.temperature))
    least, most = (1 + side * scenario.field.tension for side in (-1, 1))
    readings = {way: np.array([_read(scenario, still, way, k, taut[k]) for k in rows]) for way in WAYS}
    accepted = {way: np.array([_read(scenario, still, way, 0, share * taut[0]) for share in (least, most)]) for way in WAYS}
    errors = {way: _errors(scenario, still, way, taut[0]) for way in WAYS}
    proof = np.array([a.resultant.peak for a in solution.for_crew().worst_anchors]) * proof_factor(scenario)
    found = Field(scenario, solution, cut, still, readings, errors, accepted, proof, _limits(scenario, progress), ())
    return replace(found, warnings=tuple(_warnings(found)))


def _limits(scenario: Scenario, progress: Progress | None) -> Limits | None:
    """The limit study, where [limit] says what to act on."""
    asked = bool(scenario.limit.model_fields_set) and scenario.wind is not None and any(case.wind > 0 for case in scenario.case)
    return limits(scenario, progress=progress) if asked else None


def proof_factor(scenario: Scenario) -> float:
    """Proof load over greatest pull."""
    return scenario.allowables.anchor if scenario.field.proof is None else scenario.field.proof


def in_still_air(setting: Setting, temperatures: tuple[float, ...], progress: Progress | None = None) -> Still:
    """The setting at each temperature."""
    scenario = setting.problem.structure.scenario
    line = setting_line(scenario)
    lines = [replace(line, name=f"still air {k}", temperature=t) for k, t in enumerate(temperatures)]
    return _still(solve_lines(setting, lines, True, progress), np.array(temperatures))


def _still(batch: Batch, temperature: Array) -> Still:
    stands = (batch.code <= 0) | batch.spins
    f = batch.forces
    reason = tuple(None if good else why or "nothing resists a motion" for good, why in zip(stands, batch.reason, strict=True))
    tension = np.where(stands[:, None], f.tension_anchor, np.nan)
    chord = batch.curves[:, :, -1] - batch.curves[:, :, 0]
    return Still(temperature, tension, f.slack, chord, f.head_lean, reason, batch.curves)


def _cut(scenario: Scenario, setting: Setting, still: Still) -> Cut:
    work, ropes = scenario.field, [cable.rope for cable in scenario.cable]
    rigged = [work.rigged(rope) for rope in ropes]
    chord = np.linalg.norm(still.chord[0], axis=1)
    along = np.linalg.norm(np.diff(still.curve[0], axis=1), axis=2).sum(axis=1)

    def of(name: str) -> Array:
        return np.array([math.nan if (value := getattr(each, name)) is None else value for each in rigged], dtype=float)

    return Cut(
        chord, along - chord, along - setting.length, setting.length.copy(), of("hardware"), of("turn_back"), of("take_up"), of("pitch")
    )


def _read(scenario: Scenario, still: Still, way: Way, k: int, pull: Array) -> Array:
    """(cable,) what is read at the temperature k with tensions `pull`."""
    if not scenario.cable:
        return np.zeros(0)
    return cycles(scenario.field, way) * sounding.reading(way, still.span(k, scenario), pull)


def _errors(scenario: Scenario, still: Still, way: Way, pull: Array) -> Array:
    if not scenario.cable:
        return np.zeros(0)
    return share_of_error(scenario.field, way, still.span(0, scenario), pull, cycles(scenario.field, way))


def cycles(work: FieldWork, way: Way) -> int:
    """Returns or swings timed together; 1 for what is not timed."""
    return work.cycles if way in TIMED else 1


def share_of_error(work: FieldWork, way: Way, span: Span, pull: Array, count: float | Array) -> Array:
    """(cable,) error of tensions told by a way, of themselves, `count` cycles timed together."""
    by: dict[Way, float | Array] = {
        "pulse": work.time_error / count, "swing": work.time_error / count, "sag": work.sag_error, "sight": work.sight_error,
        "gauge": work.gauge_error * pull,
    }  # fmt: skip
    return np.abs(sounding.share_of_error(way, span, pull, np.asarray(by[way]), work.mass_error))


def _warnings(found: Field) -> list[str]:
    """What a crew must not overlook."""
    out = []
    wind, least = found.scenario.wind, None if found.limits is None else found.limits.acting
    if wind is not None and least is not None and least.speed < wind.speed:
        out.append(f"the limit, {least.speed:.3g} m/s, is below the scenario's own wind, {wind.speed:.3g} m/s: {least.why}")
    for temperature, reason in zip(found.still.temperature[1:], found.still.reason[1:], strict=True):
        if reason is not None:
            out.append(f"at {temperature - 273.15:.0f} °C in still air: {reason}")
    names = [cable.name for cable in found.scenario.cable]
    for k, name in enumerate(names):
        half = 0.5 * found.cut.take_up[k]
        if half < found.cut.stretch[k]:
            out.append(
                f'"{name}": half the turnbuckle\'s travel, {1000 * half:.0f} mm, is less than the stretch of the rope, '
                f"{1000 * found.cut.stretch[k]:.0f} mm: pull it in with a winch first"
            )
        if found.cut.rope[k] <= 0:
            out.append(f'"{name}": hardware is longer than the cable; no rope is left to cut')
    loose = [name for k, name in enumerate(names) if found.still.slack[0, k]]
    if loose:
        out.append(f"slack as set, nothing to read: {', '.join(loose)}")
    return out


@dataclass(frozen=True)
class Level:
    """Cables that leave one spar at one height [m], in the order of tensioning."""

    spar: str
    at: float
    cables: tuple[str, ...]


def order(scenario: Scenario) -> tuple[Level, ...]:
    """Levels from the lowest up, each with its cables, those on opposite sides next to each other (common practice)."""
    levels: dict[tuple[str, float], list[int]] = {}
    for k, cable in enumerate(scenario.cable):
        levels.setdefault((cable.from_.spar, cable.from_.at), []).append(k)
    places = {a.name: (a.east, a.north) for a in scenario.anchor}
    rank = {spar.name: k for k, spar in enumerate(scenario.spar)}
    out = []
    for spar, at in sorted(levels, key=lambda level: (rank[level[0]], level[1])):
        some = levels[spar, at]
        foot = next(s for s in scenario.spar if s.name == spar).foot
        x, y = getattr(foot, "east", 0.0), getattr(foot, "north", 0.0)

        def bearing(k: int, x: float = x, y: float = y) -> float:
            to = scenario.cable[k].to
            east, north = places[to.anchor] if isinstance(to, AnchorPoint) else (x, y + 1)
            return math.atan2(east - x, north - y) % (2 * math.pi)

        around = sorted(some, key=bearing)
        half = len(around) // 2
        pairs = [k for i in range(half) for k in (around[i], around[i + half])] if len(around) % 2 == 0 else around
        out.append(Level(spar, at, tuple(scenario.cable[k].name for k in pairs)))
    return tuple(out)


@dataclass(frozen=True)
class Plumb:
    """At one height [m] of a spar: how far it may be off its line [m], and how far twisted [rad]; `of` the spar's name."""

    of: str
    at: float
    off: float
    twist: float


TWIST_OVER = 10 * 0.3048
"""[m] height that `twist` is over."""


def acceptance(scenario: Scenario) -> tuple[Plumb, ...]:
    """At every height where cables are made fast, and at every head."""
    work, out = scenario.field, []
    for spar in scenario.spar:
        heights = {c.from_.at for c in scenario.cable if c.from_.spar == spar.name} | {spar.length}
        for at in sorted(h for h in heights if h > 0):
            out.append(Plumb(spar.name, at, work.plumb * at, min(work.twist * at / TWIST_OVER, work.twist_whole)))
    return tuple(out)
