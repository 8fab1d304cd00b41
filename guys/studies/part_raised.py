"""The spar at one angle of its raising, as a scenario of its own: lying or part raised on its hinge, on its lines, side guys fast.

Kept of the file's scenario are the spar, turned with its fittings about the hinge from where it is drawn; the side guys, each as the file
gives it (a tension or a tight guy is tended to that at every angle, a length stays as it is); wind, ice, temperature, materials.
Added are the tackle's anchors and lines, weightless, and a gin pole that turns with the spar as a rigid spar on the same hinge.  The
head of a standing pole is a point that does not move.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from guys.constants import STANDARD_GRAVITY
from guys.rotation import Array, exp_minus_identity, turned
from guys.scenario import Anchor, AnchorPoint, Cable, Fitting, HeelFoot, Rope, Scenario, Section, Spar, SparPoint, Vector, tilted
from guys.scenario.plausible import section_mass
from guys.scenario.raising import Holding, Raising
from guys.tilting import UP, Rig, toward

HOIST, LIFTING, HOLDING = "hoist line", "lifting line", "holding line"
TACKLE = (HOIST, LIFTING, HOLDING)
MARK = "[raise] "
"""Keeps names of the tackle apart from names of the file, which cannot clash with it in one scenario by more than chance."""
THREAD = 1e-7
"""Mass [kg/m] and [m] diameter of the tackle's lines: nothing beside what hangs on them, yet a slack one has a shape."""
STRETCH = 1e-4
"""Stretch of a line of no given rope under all the weight raised: a millimetre in ten metres."""
FAR = 1.5
"""Distance of an assumed holding anchor from the hinge, of the spar's length."""


@dataclass(frozen=True)
class Lift:
    """What is raised and how, all angles at once.

    spar, raising : of the file; angle (stage,) [rad]; rig : of the tackle; holding : the holding line, assumed where `assumed`
    guys : the side guys; weight : of spar and gin pole [N]; stiffness, strength : EA [N] and least breaking load [N] (NaN: not known) of
    hoist and lifting line, and of the holding line
    """

    scenario: Scenario
    raising: Raising
    spar: Spar
    angle: Array
    rig: Rig
    holding: Holding
    assumed: bool
    guys: tuple[Cable, ...]
    weight: float
    stiffness: tuple[float, float]
    strength: tuple[float, float]


def lift_of(scenario: Scenario, raising: Raising) -> Lift:
    """The raising a scenario asks for."""
    spar = next(s for s in scenario.spar if s.name == raising.spar)
    angle = np.array(raising.stages(tilted.last_angle(spar, raising)))
    holding, assumed = raising.holding, raising.holding is None
    if holding is None:
        holding = Holding(bearing=raising.toward, radius=FAR * spar.length)
    weight = STANDARD_GRAVITY * (_mass(scenario, spar) + raising.gin_pole.mass)
    ropes = [scenario.rope[name] if name is not None else None for name in (raising.rope, holding.rope)]
    stiff, strong = ([getattr(r, n) if r is not None else None for r in ropes] for n in ("stiffness", "strength"))
    return Lift(
        scenario=scenario,
        raising=raising,
        spar=spar,
        angle=angle,
        rig=_rig(spar, raising, holding, angle),
        holding=holding,
        assumed=assumed,
        guys=tuple(c for name in raising.side_guys for c in scenario.cable if c.name == name),
        weight=weight,
        stiffness=(stiff[0] or weight / STRETCH, stiff[1] or weight / STRETCH),
        strength=(strong[0] or math.nan, strong[1] or math.nan),
    )


def _mass(scenario: Scenario, spar: Spar) -> float:
    own = sum((section_mass(s, scenario.material) or 0.0) * s.length for s in spar.section)
    return max(own + sum(f.mass for f in spar.fitting), 1.0)


def _rig(spar: Spar, raising: Raising, holding: Holding, angle: Array) -> Rig:
    d, foot = np.array(tilted.lying(raising)), np.array(tilted.foot_of(spar))
    along = np.cos(angle)[:, None] * d + np.sin(angle)[:, None] * UP
    pole = raising.gin_pole
    if pole.foot is None:
        head = foot + pole.length * (np.cos(angle)[:, None] * UP - np.sin(angle)[:, None] * d)
    else:
        head = np.broadcast_to(np.array([pole.foot.east, pole.foot.north, pole.foot.level + pole.length]), along.shape)
    held = raising.lift_at if holding.at is None else holding.at
    return Rig(
        hinge=foot,
        axis=np.cross(d, UP),
        angle=angle,
        head=head,
        lift=foot + raising.lift_at * along,
        held=foot + held * along,
        winch=np.array(tilted.place(spar, raising.winch)),
        holding=np.array(tilted.place(spar, holding)),
        backstay=None if pole.backstay is None else np.array(tilted.place(spar, pole.backstay)),
        away=-d,
        turning=pole.foot is None,
        pole_weight=STANDARD_GRAVITY * pole.mass,
        friction=raising.friction,
    )


def names(lift: Lift) -> tuple[str, ...]:
    """The cables of every stage, in order: the tackle's lines and the side guys."""
    tackle = TACKLE if lift.rig.turning else (LIFTING, HOLDING)
    return (*(MARK + name for name in tackle), *(c.name for c in lift.guys))


def stage(lift: Lift, k: int) -> Scenario:
    """The scenario of stage k, every line of the tackle just tight."""
    scenario = lift.scenario
    wind = scenario.wind
    if wind is not None and lift.raising.wind_speed is not None:
        wind = wind.model_copy(update={"speed": lift.raising.wind_speed})
    kept = {c.to.anchor for c in lift.guys if isinstance(c.to, AnchorPoint)}
    return scenario.model_copy(
        update={
            "spar": (_raised(lift, k), *([_turning_pole(lift, k)] if lift.rig.turning else [])),
            "anchor": (*(a for a in scenario.anchor if a.name in kept), *_anchors(lift)),
            "cable": (*_lines(lift), *lift.guys),
            "rope": {**scenario.rope, MARK + HOIST: _thread(lift.stiffness[0]), MARK + HOLDING: _thread(lift.stiffness[1])},
            "setting": scenario.setting.model_copy(update={"plumb": False}),
            "wind": wind,
            "case": (),
            "warnings": (),
            "layouts": (),
        }
    )


def _thread(stiffness: float) -> Rope:
    return Rope(diameter=THREAD, mass=THREAD, stiffness=stiffness, expansion=0.0, drag=0.0)


def _raised(lift: Lift, k: int) -> Spar:
    """The spar at the angle, its fittings turned with it."""
    back = float(lift.angle[k]) - tilted.last_angle(lift.spar, lift.raising)
    turn = exp_minus_identity(back * lift.rig.axis)
    return lift.spar.model_copy(
        update={
            "lean": math.pi / 2 - float(lift.angle[k]),
            "toward": lift.raising.toward,
            "fitting": tuple(_turned_fitting(f, turn) for f in lift.spar.fitting),
        }
    )


def _turned_fitting(fitting: Fitting, turn: Array) -> Fitting:
    offset = turned(turn, np.array([fitting.offset.east, fitting.offset.north, fitting.offset.up]))
    changes: dict[str, object] = {"offset": Vector(**dict(zip(("east", "north", "up"), offset.tolist(), strict=True)))}
    if fitting.face is not None:
        level = math.cos(fitting.face_tilt)
        drawn = np.array([level * math.sin(fitting.face), level * math.cos(fitting.face), math.sin(fitting.face_tilt)])
        normal = turned(turn, drawn)
        changes |= {"face": math.atan2(normal[0], normal[1]), "face_tilt": math.asin(float(np.clip(normal[2], -1.0, 1.0)))}
    return fitting.model_copy(update=changes)


def _turning_pole(lift: Lift, k: int) -> Spar:
    pole, bearing = lift.raising.gin_pole, lift.raising.toward
    return Spar(
        name=MARK + "gin pole",
        foot=HeelFoot(spar=lift.spar.name, at=0.0),
        lean=float(lift.angle[k]),
        toward=bearing + math.pi,
        base="hinged",
        hinge_axis=bearing + math.pi / 2,
        rigid=True,
        section=(Section(length=pole.length, mass=pole.mass / pole.length, width=THREAD, drag=0.0, iced_mass=pole.mass / pole.length,
                         iced_width=THREAD),),
    )  # fmt: skip


def _anchors(lift: Lift) -> list[Anchor]:
    rig = lift.rig
    places = {HOLDING: rig.holding, HOIST: rig.winch} if rig.turning else {HOLDING: rig.holding, LIFTING: rig.head[0]}
    return [Anchor(name=MARK + name, east=float(p[0]), north=float(p[1]), level=float(p[2])) for name, p in places.items()]


def _lines(lift: Lift) -> list[Cable]:
    spar, pole = lift.spar.name, MARK + "gin pole"
    at_lift = SparPoint(spar=spar, at=lift.raising.lift_at)
    at_held = SparPoint(spar=spar, at=lift.raising.lift_at if lift.holding.at is None else lift.holding.at)
    head = SparPoint(spar=pole, at=lift.raising.gin_pole.length)

    def line(name: str, start: SparPoint, end: SparPoint | AnchorPoint, rope: str) -> Cable:
        return Cable(name=MARK + name, from_=start, to=end, rope=MARK + rope, tight=True, key=("raise",))

    holding = line(HOLDING, at_held, AnchorPoint(anchor=MARK + HOLDING), HOLDING)
    if not lift.rig.turning:
        return [line(LIFTING, at_lift, AnchorPoint(anchor=MARK + LIFTING), HOIST), holding]
    return [line(HOIST, head, AnchorPoint(anchor=MARK + HOIST), HOIST), line(LIFTING, at_lift, head, HOIST), holding]


def guy_runs(lift: Lift) -> tuple[Array, Array]:
    """Points of the side guys on the axis of the spar (stage, guy, 3), and their anchors (guy, 3)."""
    anchors = {a.name: (a.east, a.north, a.level) for a in lift.scenario.anchor}
    ends = np.array([anchors[c.to.anchor] for c in lift.guys if isinstance(c.to, AnchorPoint)]).reshape(-1, 3)
    along = toward(lift.rig.hinge, lift.rig.lift)[:, None]
    return lift.rig.hinge + np.array([c.from_.at for c in lift.guys]).reshape(1, -1, 1) * along, ends
