"""The rigid statics of a raising against moments taken by hand, an independent calculation, work and energy, and free bodies."""

from __future__ import annotations

import json
import math
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from guys import tilting
from guys.constants import STANDARD_GRAVITY as G
from guys.rotation import Array
from guys.tilting import Rig

EXPECTED = json.loads((Path(__file__).parent / "reference_numbers/turning_gin_pole.json").read_text())
ROUNDING = 1e-9
"""Relative: sums of a dozen products in double precision, divided once."""
PRINTED = 1e-8
"""Relative: the reference numbers have nine digits."""


def rig(
    angles: list[float] | Array, pole: float = 5.0, lift: float = 8.0, winch: tuple[float, float] = (-10.0, 0.0), weight: float = 0.0
) -> Rig:
    """In the plane east-up, the spar lying to the east; the holding line to 15 m in the east."""
    a = np.asarray(angles, dtype=float)
    s = np.column_stack([np.cos(a), 0 * a, np.sin(a)])
    p = np.column_stack([-np.sin(a), 0 * a, np.cos(a)])
    return Rig(
        hinge=np.zeros(3), axis=np.array([0.0, -1.0, 0.0]), angle=a, head=pole * p, lift=lift * s, held=lift * s,
        winch=np.array([winch[0], 0.0, winch[1]]), holding=np.array([15.0, 0.0, 0.0]), backstay=None, away=np.array([-1.0, 0.0, 0.0]),
        turning=True, pole_weight=weight, friction=0.0,
    )  # fmt: skip


def weights(r: Rig, along: list[tuple[float, float]], pole: float) -> tuple[Array, Array]:
    """Force and moment (stage, 1, 3) of weights [N] at distances along the spar, and of the gin pole at its middle."""
    s, down = tilting.toward(r.hinge, r.lift), np.array([0.0, 0.0, -1.0])
    force = np.sum([w for _, w in along]) + pole
    moment = sum(np.cross(at * s, w * down) for at, w in along) + np.cross(0.5 * r.head, pole * down)
    return np.broadcast_to(force * down, s.shape)[:, None], np.asarray(moment)[:, None]


MAST = [(6.0, 180.0 * G), (12.0, 20.0 * G)]


def test_moments_about_the_hinge_by_hand() -> None:
    """Lying: 1320 kg m about the hinge; the line from (0, 5) to (-10, 0) passes it at 50/sqrt(125) m."""
    r = rig([0.0], weight=25.0 * G)
    found = tilting.pulls(r, *weights(r, MAST, 25.0 * G))
    tension = 1320.0 * G / (50.0 / math.sqrt(125.0))
    assert found.lifting[0, 0] == pytest.approx(tension, rel=ROUNDING)
    assert found.holding[0, 0] == 0.0
    assert found.on_hinge[0, 0] == pytest.approx(
        [-tension * 10 / math.sqrt(125), 0.0, -225.0 * G - tension * 5 / math.sqrt(125)], rel=ROUNDING
    )


def test_an_independent_calculation() -> None:
    """Source: independent reference calculation, this project (`tests/reference_numbers/turning_gin_pole.json`)."""
    angles = [int(a) for a in EXPECTED["hoist_N"]]
    r = rig(np.radians(angles), weight=25.0 * G)
    found = tilting.pulls(r, *weights(r, MAST, 25.0 * G))
    assert found.lifting[:, 0] == pytest.approx(list(EXPECTED["hoist_N"].values()), rel=PRINTED)
    assert found.on_hinge[:, 0] == pytest.approx(np.array(list(EXPECTED["hinge_force_on_ground_N"].values())), rel=PRINTED, abs=1e-4)


STEPS = 2000
BY_STRIPS = 1e-6
"""Relative: the trapezoidal rule errs by (step)^2/12 times a slope of order one, 5e-8 here."""


@pytest.mark.parametrize("standing", [False, True])
def test_work_of_the_line_is_the_rise_of_the_weights(standing: bool) -> None:
    a = np.linspace(0.0, math.radians(80.0), STEPS)
    r = rig(a, weight=25.0 * G)
    pole = 25.0 * G
    if standing:
        r, pole = replace(r, turning=False, head=np.broadcast_to([-1.0, 0.0, 6.0], r.head.shape)), 0.0
    force, moment = weights(r, MAST, pole if not standing else 0.0)
    tension = tilting.pulls(r, force, moment).lifting[:, 0]
    start, end = r.lifts
    length = np.linalg.norm(end - start, axis=-1)
    work = -np.sum(0.5 * (tension[1:] + tension[:-1]) * np.diff(length))
    rise = 1320.0 * G * math.sin(a[-1]) + (pole * 2.5 * (math.cos(a[-1]) - 1.0) if not standing else 0.0)
    assert work == pytest.approx(rise, rel=BY_STRIPS)


def test_the_angle_at_which_the_load_changes_side() -> None:
    """1320 kg m cos a = 62.5 kg m sin a."""
    r = rig(np.radians([10.0, 50.0]), weight=25.0 * G)
    _, moment = weights(r, MAST, 25.0 * G)
    assert tilting.changes_side(r.angle, moment[:, 0] @ r.axis) == pytest.approx(math.atan2(1320.0, 62.5), rel=ROUNDING)
    assert math.isnan(tilting.changes_side(r.angle[:1], np.zeros(1)))


def test_beyond_it_the_holding_line_carries() -> None:
    """Upright: 62.5 kg m on the far side, held 8 m up by a line falling 8 in 15."""
    r = rig([math.pi / 2], weight=25.0 * G)
    found = tilting.pulls(r, *weights(r, MAST, 25.0 * G))
    assert found.lifting[0, 0] == 0.0
    assert found.holding[0, 0] == pytest.approx(62.5 * G / 8.0 * 17.0 / 15.0, rel=ROUNDING)


def test_a_line_through_the_hinge_holds_nothing() -> None:
    """Upright, the pole lies toward the winch: a load that would lie the spar down has nothing against it."""
    r = rig([math.pi / 2])
    force, moment = np.zeros((1, 1, 3)), -1e3 * r.axis.reshape(1, 1, 3)
    assert math.isnan(tilting.pulls(r, force, moment).lifting[0, 0])
    assert tilting.pulls(r, force, 0.0 * moment).lifting[0, 0] == 0.0


lengths = st.floats(2.0, 8.0)


@given(st.floats(0.0, 80.0), lengths, st.floats(3.0, 11.0), st.floats(5.0, 15.0), st.floats(-3.0, 1.0), st.floats(0.0, 600.0))
def test_spar_and_gin_pole_are_each_in_balance(degrees: float, pole: float, lift: float, away: float, level: float, weight: float) -> None:
    """The spar alone about the hinge, under its weight and the lifting line; the pole alone about its foot, and along its axis."""
    r = rig([math.radians(degrees)], pole, lift, (-away, level), weight)
    if tilting.lever(r, r.lifts)[0] <= 0:
        return
    force, moment = weights(r, MAST, weight)
    hoist = tilting.pulls(r, force, moment).lifting
    if not hoist[0, 0] > 0:
        return
    found = tilting.turning_pole(r, hoist)
    scale = (hoist[0, 0] + 5e3) * 20.0
    c = tilting.toward(r.head[0], r.lift[0])
    spar = -1320.0 * G * math.cos(math.radians(degrees)) + np.cross(r.lift[0], -found.lift_line[0, 0] * c) @ r.axis
    assert abs(spar) < ROUNDING * scale
    at_head = hoist[0, 0] * tilting.toward(r.head[0], r.winch) + found.lift_line[0, 0] * c
    about = np.cross(r.head[0], at_head) + np.cross(0.5 * r.head[0], np.array([0.0, 0.0, -weight]))
    assert abs(about @ r.axis) < ROUNDING * scale
    p = r.head[0] / pole
    assert found.thrust[0, 0] + (at_head + np.array([0.0, 0.0, -weight])) @ p == pytest.approx(0.0, abs=ROUNDING * scale)


def test_a_standing_pole_by_hand() -> None:
    """Head at (0, 6), lift point at (8, 0), winch at (-8, 0), 5 % lost at the sheave: the line is ten in six and eight on either side."""
    r = replace(rig([0.0], lift=8.0, winch=(-8.0, 0.0), weight=100.0), turning=False, head=np.array([[0.0, 0.0, 6.0]]), friction=0.05)
    line = np.array([[1000.0]])
    found = tilting.standing_pole(r, line)
    assert found.hoist[0, 0] == pytest.approx(1000.0 / 0.95, rel=ROUNDING)
    assert found.thrust[0, 0] == pytest.approx(100.0 + 0.6 * (1000.0 + 1000.0 / 0.95), rel=ROUNDING)
    assert found.level[0, 0] == pytest.approx([0.8 * (1000.0 - 1000.0 / 0.95), 0.0, 0.0], rel=ROUNDING)
    assert tilting.pushes(r, found)[0, 0], "drawn toward the winch: a stay on that side would have to push"


def test_a_backstay_takes_the_level_force_and_adds_to_the_thrust() -> None:
    """Winch straight below the head; the stay comes down at 45 degrees behind it."""
    r = replace(
        rig([0.0], lift=8.0, winch=(0.0, 0.0)), turning=False, head=np.array([[0.0, 0.0, 6.0]]), backstay=np.array([-6.0, 0.0, 0.0])
    )
    found = tilting.standing_pole(r, np.array([[1000.0]]))
    assert found.backstay[0, 0] == pytest.approx(800.0 * math.sqrt(2.0), rel=ROUNDING)
    assert found.thrust[0, 0] == pytest.approx(600.0 + 1000.0 + 800.0, rel=ROUNDING)
    assert np.abs(found.level).max() < ROUNDING * 1000.0
    assert not tilting.pushes(r, found)[0, 0]
