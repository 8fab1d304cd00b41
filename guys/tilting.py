"""Statics of a rigid spar tilted up about a hinge: the line that lifts, the gin pole, the line that holds back.

The body (the spar, and a gin pole that turns with it) turns about the level axis e through its foot O; a turn about +e raises it.  With the
force F and the moment M about O of everything that loads it, and a line of tension T that pulls its point P toward Q,

    lever  l = ((P - O) x u).e,   u = (Q - P)/|Q - P|           moments about the hinge   T = -M.e / l
    on the ground at the hinge    F + T u

Hoist and holding line only pull, so one of them carries: the hoist line while M.e < 0 (the spar would lie down), the holding line, whose
lever is negative, once M.e > 0 (it would go over).  A line whose lever is below `NO_LEVER` of its reach cannot hold: its tension is NaN.

turning gin pole (P its head, Q the winch): a strut with a pinned foot at O, held by the lifting line from its head to the lift point.
With s along the spar, p along the pole, W its weight, c along the lifting line from the head, across and along the pole

    T u.s + T_l c.s - (W/2) z.s = 0        N = -T u.p - T_l c.p + W z.p       (thrust at its foot)

standing gin pole (P the lift point, Q the head): the line runs over a sheave there and loses the share f of its tension, so the hoist line
to the winch carries T/(1 - f).  The level force left at the head is the backstay's; the rest is thrust,

    T_b = -H.b / b_level^2, if it pulls        N = -(T_l c + T_h h + T_b b).z + W

with c, h, b unit vectors from the head along the lifting line, hoist line and backstay, H the level part of T_l c + T_h h.  N < 0: the
pole is lifted off, or pulled from its seat.

The still-air moment of loads that do not turn with the body is A cos a + B sin a of the angle a, so the angle at which the load changes
side is known from any two angles:  tan a = -A/B.  Source: moments about a point and the joint in equilibrium; nothing else is used.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from guys.rotation import Array, cross, dot

NO_LEVER = 0.01
"""A line passing the hinge nearer than this share of its reach holds nothing: a spar's own bending moves it as much."""
NO_MOMENT = 1e-9
"""A moment below this share of force times reach is none."""
UP = np.array([0.0, 0.0, 1.0])


@dataclass(frozen=True)
class Rig:
    """Where the tackle is at each stage.

    hinge (3,); axis (3,) e; angle (stage,) [rad] of the spar above the horizontal; head, lift, held (stage, 3) the gin pole's head, the
    lift point and the point the holding line is fast to; winch, holding (3,); backstay (3,) or None; away (3,) level unit vector from the
    lying spar; turning: the gin pole turns with the spar; pole_weight [N]; friction: share lost at the sheave of a standing pole
    """

    hinge: Array
    axis: Array
    angle: Array
    head: Array
    lift: Array
    held: Array
    winch: Array
    holding: Array
    backstay: Array | None
    away: Array
    turning: bool
    pole_weight: float
    friction: float

    @property
    def lifts(self) -> tuple[Array, Array]:
        """P and Q (stage, 3) of the line that lifts the body."""
        return (self.head, np.broadcast_to(self.winch, self.head.shape)) if self.turning else (self.lift, self.head)

    @property
    def holds(self) -> tuple[Array, Array]:
        """P and Q (stage, 3) of the holding line."""
        return self.held, np.broadcast_to(self.holding, self.held.shape)


@dataclass(frozen=True)
class Pulls:
    """Tensions (stage, case) [N]: of the line that lifts the body (0: slack) and of the holding line; NaN: no line can hold.  on_hinge
    (stage, case, 3) [N] on the ground; moment (stage, case) [N m] of the loads about the hinge, raising positive."""

    lifting: Array
    holding: Array
    on_hinge: Array
    moment: Array


@dataclass(frozen=True)
class Pole:
    """Gin pole (stage, case) [N]: thrust at its foot; tension of the line from its head to the lift point, of the hoist line to the winch
    and of its backstay; level (stage, case, 3) the level force at its head that no line holds."""

    thrust: Array
    lift_line: Array
    hoist: Array
    backstay: Array
    level: Array


def toward(start: Array, end: Array) -> Array:
    """Unit vectors from points to points (..., 3); zero where they coincide."""
    chord = end - start
    size = np.sqrt(dot(chord, chord))[..., None]
    return np.asarray(chord / np.where(size > 0, size, 1.0))


def lever(rig: Rig, ends: tuple[Array, Array]) -> Array:
    """(stage,) [m] lever of a line about the hinge, positive where it raises; 0 where it is less than `NO_LEVER` of its reach."""
    reach = ends[0] - rig.hinge
    arm = dot(cross(reach, toward(*ends)), rig.axis)
    return np.where(np.abs(arm) < NO_LEVER * np.sqrt(dot(reach, reach)), 0.0, arm)


def pulls(rig: Rig, force: Array, moment: Array) -> Pulls:
    """The tensions that hold the body under loads (stage, case, 3) [N], [N m] about the hinge."""
    about = dot(moment, rig.axis)
    reach = rig.head - rig.hinge if rig.turning else rig.lift - rig.hinge
    small = NO_MOMENT * np.sqrt(dot(force, force)) * np.sqrt(dot(reach, reach))[:, None]
    up, back = lever(rig, rig.lifts)[:, None], lever(rig, rig.holds)[:, None]
    lifting = _pull(-about, up, small)
    holding = _pull(about, -back, small)
    u, v = toward(*rig.lifts)[:, None], toward(*rig.holds)[:, None]
    return Pulls(lifting, holding, force + lifting[..., None] * u + holding[..., None] * v, about)


def _pull(needed: Array, arm: Array, small: Array) -> Array:
    able = arm > 0
    return np.where(needed <= small, 0.0, np.where(able, needed / np.where(able, arm, 1.0), np.nan))


def turning_pole(rig: Rig, hoist: Array) -> Pole:
    """The gin pole that turns with the spar, from the tension of the hoist line (stage, case)."""
    p, s = toward(rig.hinge, rig.head)[:, None], toward(rig.hinge, rig.lift)[:, None]
    u, c = toward(*rig.lifts)[:, None], toward(rig.head, rig.lift)[:, None]
    lift_line = (0.5 * rig.pole_weight * dot(UP, s) - hoist * dot(u, s)) / dot(c, s)
    thrust = rig.pole_weight * dot(UP, p) - hoist * dot(u, p) - lift_line * dot(c, p)
    none = np.zeros_like(hoist)
    return Pole(thrust, lift_line, hoist, none, np.zeros((*hoist.shape, 3)))


def standing_pole(rig: Rig, lift_line: Array) -> Pole:
    """The gin pole on a foot of its own, from the tension of the lifting line (stage, case)."""
    hoist = lift_line / (1.0 - rig.friction)
    head = lift_line[..., None] * toward(rig.head, rig.lift)[:, None] + hoist[..., None] * toward(rig.head, rig.winch)[:, None]
    backstay = np.zeros_like(hoist)
    if rig.backstay is not None:
        b = toward(rig.head, rig.backstay)[:, None]
        level = b * (1.0 - UP)
        backstay = np.maximum(-dot(head, level) / dot(level, level), 0.0)
        head = head + backstay[..., None] * b
    return Pole(rig.pole_weight - head[..., 2], lift_line, hoist, backstay, head * (1.0 - UP))


def pushes(rig: Rig, pole: Pole) -> NDArray[np.bool_]:
    """(stage, case) whether a backstay would have to push: the level force left at the head of a standing pole points where the stay is."""
    direction = rig.away if rig.backstay is None else toward(rig.head, rig.backstay)[:, None] * (1.0 - UP)
    size = pole.lift_line + pole.hoist
    return np.asarray(dot(pole.level, direction) > NO_MOMENT * np.where(np.isnan(size), 0.0, size))


def changes_side(angle: Array, moment: Array) -> float:
    """Angle [rad] at which the moment (stage,) of dead loads about the hinge is zero as it grows; NaN with fewer than two angles."""
    if len(angle) < 2:
        return math.nan
    (a, b), *_ = np.linalg.lstsq(np.column_stack([np.cos(angle), np.sin(angle)]), moment, rcond=None)
    return float(math.atan2(-a, b) % math.tau)
