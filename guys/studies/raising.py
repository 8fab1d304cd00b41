"""A spar raised, angle by angle: every line, the gin pole, the hinge and the spar, in still air and in wind from all sides.

At each angle the spar as it is then (`guys.studies.part_raised`) goes through the one line of the house: setting, wind cases, recovery.
The winch has let the hoist line be as long as a rigid spar needs to rest at that angle; rigid statics (`guys.tilting`) gives that length,
tells which line carries, and stands beside the answer as its check.  The line that does not carry in still air is as good as straight, so
it takes over in a wind that turns the load round.  In the rigid statics side guys pull on straight lines, half of their weight at the top.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from concurrent.futures import Executor
from dataclasses import dataclass, replace
from functools import partial

import numpy as np
from numpy.typing import NDArray

from guys import stability, tilting
from guys.checks import demands
from guys.checks.demands import Demands
from guys.constants import STANDARD_GRAVITY
from guys.errors import ScenarioError
from guys.loads import CaseLine, as_drawn, assemble, setting_line
from guys.results import SparLine
from guys.rotation import Array, cross, dot, dyad_moment
from guys.scenario import Scenario, tilted
from guys.setting import Setting, find
from guys.structure import Structure, build
from guys.studies import part_raised
from guys.studies.batch import Batch, as_set, recover, solve_lines
from guys.studies.part_raised import Lift, lift_of

Progress = Callable[[int, int], None]
TOUCH = 1e-4
"""Tension, of the weight raised, to which both lines are drawn in where neither carries."""
WELL = 0.05
"""Share of the greatest pull in still air above which the line that lifts is sure to carry, whatever the spar's bending does."""
SAME = math.radians(0.5)
"""Bearings nearer than this are not both solved for."""
STATES = ("held", "neutral", "unstable", "none", "none")
"""Words for the codes of `guys.stability`: held is a stable equilibrium on the lines."""


@dataclass(frozen=True)
class Raised:
    """A raising.  Case 0 is still air, the others are winds; arrays are (stage, case), forces [N], NaN where nothing holds the spar.

    wind_from (case,) [rad]; state, reason: words
    hoist: the line between gin pole and winch; winch: the pull on it beyond a lead block; lift_line: at the lift point; gin_pole: thrust at
    its foot, negative where it is pulled; backstay, level: of a standing pole, and the level force at its head that no line holds; pushes:
    its backstay would have to push; holding: the holding line
    on_hinge, hinge_moment, on_winch (stage, case, 3) on the ground, moment [N m] about the foot
    guys, slack (stage, case, guy) tension at the anchor; guy_change (stage, guy) [m] chord less that with the spar as drawn
    bending, bending_at: the spar's greatest moment [N m] and its station [m]
    rigid: the line that lifts, by rigid statics alone; moment [N m] of the loads about the hinge, raising positive; over [rad]: angle
    at which it changes side in still air; spars: the spar along its length at every stage
    judged: what is judged of the spar's sections, its base, the side guys and their anchors, as ever; cases stage by stage
    """

    lift: Lift
    wind_from: Array
    state: tuple[tuple[str, ...], ...]
    reason: tuple[tuple[str | None, ...], ...]
    hoist: Array
    winch: Array
    lift_line: Array
    gin_pole: Array
    backstay: Array
    level: Array
    pushes: NDArray[np.bool_]
    holding: Array
    on_hinge: Array
    hinge_moment: Array
    on_winch: Array
    guys: Array
    slack: NDArray[np.bool_]
    guy_change: Array
    bending: Array
    bending_at: Array
    rigid: Array
    moment: Array
    over: float
    spars: tuple[SparLine, ...]
    judged: Demands
    failed: bool

    @property
    def angle(self) -> Array:
        """(stage,) [rad] of the spar above the horizontal."""
        return self.lift.angle

    @property
    def stands(self) -> NDArray[np.bool_]:
        """(stage, case) whether the spar is held."""
        return np.array([[s == STATES[stability.STABLE] for s in row] for row in self.state])


def solve(scenario: Scenario, executor: Executor | None = None, progress: Progress | None = None) -> Raised:
    """Raise the spar of a scenario that has `[raise]`.

    executor : solves angles side by side, None: one after another;  progress : called with angles done and in all

    Raises `ScenarioError` where a side guy's tension cannot be met.
    """
    assert scenario.raising is not None
    lift = lift_of(scenario, scenario.raising)
    lines = _case_lines(lift)
    built = [_built(lift, k, lines) for k in range(len(lift.angle))]
    rigid = tilting.pulls(lift.rig, np.array([b.force for b in built]), np.array([b.moment for b in built]))
    every, batches = map if executor is None else executor.map, list[Batch]()
    for batch in every(partial(_solved, lift, rigid, lines), range(len(built)), [b.structure for b in built]):
        batches.append(batch)
        if progress is not None:
            progress(len(batches), len(built))
    return _gathered(lift, lines, rigid, batches)


def _case_lines(lift: Lift) -> list[CaseLine]:
    """Still air, and wind from the file's directions and along and across the plane of raising."""
    scenario = lift.scenario
    still = replace(setting_line(scenario), name="still air")
    if scenario.wind is None:
        return [still]
    bearings = list(scenario.wind.directions)
    for quarter in range(4):
        bearing = (lift.raising.toward + quarter * math.pi / 2) % math.tau
        if all(abs(math.remainder(bearing - b, math.tau)) > SAME for b in bearings):
            bearings.append(bearing)
    return [still, *(replace(still, name="wind", wind_from=b, wind=1.0) for b in sorted(bearings))]


@dataclass(frozen=True)
class _Built:
    """A stage's structure, and what loads the body that turns about the hinge: force and moment about it (case, 3)."""

    structure: Structure
    force: Array
    moment: Array


def _built(lift: Lift, k: int, lines: list[CaseLine]) -> _Built:
    structure = build(part_raised.stage(lift, k))
    loads = assemble(structure, lines, as_drawn(structure, np.ones(len(structure.cables.EA))))
    body = np.flatnonzero(structure.spar >= 0)
    reach = structure.position[body] - lift.rig.hinge
    force = loads.force[:, body]
    moment = (cross(reach, force) + dyad_moment(loads.dyad[:, body])).sum(axis=1)
    pull, turn = _guys(lift, k)
    return _Built(structure, force.sum(axis=1) + pull, moment + turn)


def _guys(lift: Lift, k: int) -> tuple[Array, Array]:
    """Force and moment about the hinge of the side guys, on straight lines with half their weight at the top."""
    tops, ends = part_raised.guy_runs(lift)
    ropes = [lift.scenario.rope[c.rope] for c in lift.guys]
    chord = np.linalg.norm(ends - tops[k], axis=-1)
    pull = [
        c.tension if c.tension is not None else 0.0 if c.length is None else max(r.stiffness * (float(d) / c.length - 1.0), 0.0)
        for c, r, d in zip(lift.guys, ropes, chord, strict=True)
    ]
    hangs = lift.scenario.analysis.cable == "catenary"
    weight = np.array([hangs * 0.5 * STANDARD_GRAVITY * r.mass for r in ropes]) * chord
    force = np.array(pull)[:, None] * tilting.toward(tops[k], ends) - weight[:, None] * tilting.UP
    return force.sum(axis=0), cross(tops[k] - lift.rig.hinge, force).sum(axis=0)


def _solved(lift: Lift, rigid: tilting.Pulls, lines: list[CaseLine], k: int, structure: Structure) -> Batch:
    """The stage in every case; the setting is its still air."""
    setting = _setting(lift, rigid, k, structure)
    if not setting.stands:
        return recover(setting.problem, setting.judged, detail=True)
    return solve_lines(setting, _without_slack(lift, k, rigid, lines), True, start=as_set(setting, len(lines)))


def _setting(lift: Lift, rigid: tilting.Pulls, k: int, structure: Structure) -> Setting:
    """The stage in still air.

    A spar that does not stand has no position to make the other line tight in: that line is then as long as for a rigid spar.
    """
    carrying = _carrying(lift, k, rigid)
    chords = _chords(lift, k)
    lengths = {c: chords[c] / (1.0 + tension / lift.stiffness[c == len(chords) - 1]) for c, tension in carrying.items()}
    try:
        return _drawn_in(lift, find(_strung(structure, lengths)), [c for c in range(len(chords)) if c not in carrying])
    except ScenarioError:
        return find(_strung(structure, {**dict(enumerate(chords)), **lengths}))


def _drawn_in(lift: Lift, setting: Setting, slack: list[int]) -> Setting:
    """The setting with the lines that carry nothing longer than the straight way by what the weight raised would stretch them.

    So they do not pull against the line that carries while its stretch goes, and take over when it has gone.  Tight in the sense of a
    catenary, a pull at mid-length of its own weight, would be 4 % longer however light the line: the spar would swing far first.
    """
    if not setting.stands:
        return setting
    length = setting.length.copy()
    straight = np.linalg.norm(setting.problem.chords(setting.state)[2][0, slack], axis=-1)
    stiffness = np.array([lift.stiffness[part_raised.names(lift)[c].endswith(part_raised.HOLDING)] for c in slack])
    length[slack] = (1.0 + lift.weight / stiffness) * straight
    return replace(setting, length=length, problem=replace(setting.problem, length=length))


def _strung(structure: Structure, lengths: dict[int, float]) -> Structure:
    """The structure with unstressed lengths of some cables, by their index."""
    cables = list(structure.scenario.cable)
    for c, length in lengths.items():
        cables[c] = cables[c].model_copy(update={"tight": False, "length": length})
    return replace(structure, scenario=structure.scenario.model_copy(update={"cable": tuple(cables)}))


def _without_slack(lift: Lift, k: int, rigid: tilting.Pulls, lines: list[CaseLine]) -> list[CaseLine]:
    """The cases of stage k, in wind without the holding line where the load is well on the side of the hoist line: it is slack then."""
    pull = np.nan_to_num(rigid.lifting)
    slack = (pull[k] > WELL * pull[:, 0].max()) & (rigid.holding[k, 0] == 0)
    away = (part_raised.names(lift)[2 if lift.rig.turning else 1],)
    return [replace(line, without=away) if c and slack[c] else line for c, line in enumerate(lines)]


def _carrying(lift: Lift, k: int, rigid: tilting.Pulls) -> dict[int, float]:
    """Cables of the tackle that carry in still air, with their tensions by rigid statics.

    A spar balanced on its foot hangs in neither line: both are then drawn in until they touch, the one against the other.
    """
    lifting, holding = float(np.nan_to_num(rigid.lifting[k, 0])), float(np.nan_to_num(rigid.holding[k, 0]))
    touch = TOUCH * lift.weight
    first, last = 0, 2 if lift.rig.turning else 1
    if lifting + holding < touch:
        up, back = float(tilting.lever(lift.rig, lift.rig.lifts)[k]), -float(tilting.lever(lift.rig, lift.rig.holds)[k])
        both = touch if up > 0 and back > 0 else 0.0
        carrying = {first: lifting + both, last: holding + both * up / (back if back > 0 else 1.0)}
    else:
        carrying = {last: holding} if holding > 0 else {first: lifting}
    if lift.rig.turning:
        hoist = np.broadcast_to(carrying.get(first, 0.0), (len(lift.angle), 1))
        carrying[1] = max(float(tilting.turning_pole(lift.rig, hoist).lift_line[k, 0]), 0.0)
    return carrying


def _chords(lift: Lift, k: int) -> list[float]:
    rig = lift.rig
    first = [math.dist(rig.head[k], rig.winch)] if rig.turning else []
    return [*first, math.dist(rig.lift[k], rig.head[k]), math.dist(rig.held[k], rig.holding)]


def _gathered(lift: Lift, lines: list[CaseLine], rigid: tilting.Pulls, batches: list[Batch]) -> Raised:
    cases = len(lines)

    def every(of: Callable[[Batch], Array]) -> Array:
        """(stage, case, ...) with the winds of a stage that does not stand in still air as NaN."""
        out = []
        for b in batches:
            value = np.where((b.code <= stability.NEUTRAL).reshape(-1, *[1] * (of(b).ndim - 1)), of(b), np.nan)
            missing = np.full((cases - len(value), *value.shape[1:]), np.nan)
            out.append(np.concatenate([value, missing]))
        return np.array(out)

    rig = lift.rig
    tension = every(lambda b: b.forces.tension_anchor)
    count = 3 if rig.turning else 2
    pole = tilting.standing_pole(rig, tension[:, :, 0])
    if rig.turning:
        along = tilting.toward(rig.hinge, rig.head)[:, None]
        thrust = -dot(every(lambda b: b.forces.foot_force[:, 1]), along)
        pole = tilting.Pole(thrust, tension[:, :, 1], tension[:, :, 0], np.zeros_like(thrust), np.zeros((*thrust.shape, 3)))
    moment, at = every(lambda b: _greatest_bending(b.spars[0])[0]), every(lambda b: _greatest_bending(b.spars[0])[1])
    return Raised(
        lift=lift,
        wind_from=np.array([line.wind_from for line in lines]),
        state=tuple((*(STATES[c] for c in b.code), *[STATES[stability.NONE]] * (cases - len(b.code))) for b in batches),
        reason=tuple((*b.reason, *[b.reason[0]] * (cases - len(b.code))) for b in batches),
        hoist=pole.hoist,
        winch=pole.hoist / (1.0 - rig.friction) if rig.turning else pole.hoist,
        lift_line=pole.lift_line,
        gin_pole=pole.thrust,
        backstay=pole.backstay,
        level=np.linalg.norm(pole.level, axis=-1),
        pushes=np.zeros(moment.shape, bool) if rig.turning else tilting.pushes(rig, pole),
        holding=tension[:, :, count - 1],
        on_hinge=every(lambda b: b.forces.foot_force[:, 0]),
        hinge_moment=every(lambda b: b.forces.foot_moment[:, 0]),
        on_winch=pole.hoist[..., None] * tilting.toward(rig.winch, rig.head)[:, None],
        guys=tension[:, :, count:],
        slack=np.nan_to_num(every(lambda b: b.forces.slack[:, count:].astype(float))) > 0,
        guy_change=_guy_change(lift),
        bending=moment,
        bending_at=at,
        rigid=rigid.lifting,
        moment=rigid.moment,
        over=tilting.changes_side(lift.angle, rigid.moment[:, 0]),
        spars=tuple(b.spars[0] for b in batches),
        judged=_judged(batches, cases),
        failed=any((b.code == stability.FAILED).any() for b in batches),
    )


def _judged(batches: list[Batch], cases: int) -> Demands:
    """The demands of every stage, (stage times case, item), without those of the tackle and of a lean that is no fault while raising."""
    parts = []
    for b in batches:
        kept = [k for k, i in enumerate(b.demands.items) if part_raised.MARK not in i.thing and i.quantity != "lean"]
        rows = np.minimum(np.arange(cases), len(b.code) - 1)
        parts.append(b.demands.pick(kept).take(rows).blank(np.arange(len(b.code), cases)))
    return demands.join(parts)


def _greatest_bending(spar: SparLine) -> tuple[Array, Array]:
    """The greatest bending moment (case,) and the station it is at."""
    size = np.linalg.norm(spar.bending, axis=-1)
    known = np.where(np.isnan(size), -1.0, size)
    at = np.argmax(known, axis=1)
    return np.take_along_axis(size, at[:, None], axis=1)[:, 0], spar.station[at]


def _guy_change(lift: Lift) -> Array:
    """(stage, guy) [m] by which the chord of each side guy is longer than with the spar as drawn."""
    tops, ends = part_raised.guy_runs(lift)
    upright = np.array(tilted.drawn_axis(lift.spar))
    drawn = lift.rig.hinge + np.array([c.from_.at for c in lift.guys]).reshape(-1, 1) * upright
    return np.asarray(np.linalg.norm(ends - tops, axis=-1) - np.linalg.norm(ends - drawn, axis=-1))
