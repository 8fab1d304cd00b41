"""Joints: gradient and Hessian against differences of the energies written in the module's text."""

from __future__ import annotations

import math

import numpy as np
import pytest

from guys import joint
from guys.joint import Joints
from guys.rotation import exp_minus_identity, turn

STEP = 1e-5
DIFFERENCES = 1e-7
"""Relative to stiffness times one radian: truncation STEP^2 and rounding 1e-16/STEP^2 of differences."""
STIFFNESS = 3.0


def one(kind: str) -> Joints:
    return Joints((kind,), np.array([1]), np.array([0]), np.array([STIFFNESS]), np.eye(3)[None])


def energy(kind: str, psi: np.ndarray) -> float:
    m, s = (p + np.eye(3) for p in psi[0])
    first, y, z = np.eye(3)
    if kind == "hinge":
        return STIFFNESS * (1 - (s @ first) @ (m @ first))
    if kind == "tilt":
        return 0.5 * STIFFNESS * math.acos((s @ first) @ (m @ first)) ** 2
    return 0.5 * STIFFNESS * (0.5 * ((m @ z) @ (s @ y) - (m @ y) @ (s @ z))) ** 2


def stepped(psi: np.ndarray, k: int, size: float) -> np.ndarray:
    """k: 0-2 the carrier's rotation, 3-5 the spar's."""
    theta = np.zeros((1, 2, 3))
    theta[0, k // 3, k % 3] = size
    return turn(psi, theta)


def pose(spread: float) -> np.ndarray:
    return exp_minus_identity(spread * np.array([[[0.3, -0.5, 0.4], [0.1, 0.6, -0.2]]]))


@pytest.mark.parametrize("kind", ["hinge", "tilt", "spin"])
@pytest.mark.parametrize("spread", [1.0, 1.5, 0.05])
def test_gradient_and_hessian_are_differences(kind: str, spread: float) -> None:
    psi, j = pose(spread), one(kind)
    g, h = joint.resist(j, psi)
    flat = np.block([[h[0, 0, 0, 0], h[0, 0, 0, 1]], [h[0, 0, 1, 0], h[0, 0, 1, 1]]])
    numeric = np.empty((6, 6))
    for k in range(6):
        up, down = stepped(psi, k, STEP), stepped(psi, k, -STEP)
        assert (energy(kind, up) - energy(kind, down)) / (2 * STEP) == pytest.approx(g[0, 0].reshape(6)[k], abs=STIFFNESS * DIFFERENCES)
        numeric[:, k] = (joint.resist(j, up)[0] - joint.resist(j, down)[0]).reshape(6) / (2 * STEP)
    assert np.abs(0.5 * (numeric + numeric.T) - flat).max() < STIFFNESS * DIFFERENCES


@pytest.mark.parametrize("angle", [1e-9, 1e-4, 9.9e-4, 1.01e-3, 0.2, 1.5])
def test_a_sprung_base_resists_with_stiffness_times_angle(angle: float) -> None:
    """Both sides of the change from series to quotients, at 1e-3."""
    psi = np.zeros((1, 2, 3, 3))
    psi[0, 1] = exp_minus_identity(np.array([0.0, angle, 0.0]))
    g, h = joint.resist(one("tilt"), psi)
    assert g[0, 0, 1] == pytest.approx(np.array([0.0, STIFFNESS * angle, 0.0]), rel=1e-12, abs=1e-20)
    assert h[0, 0, 1, 1, 1, 1] == pytest.approx(STIFFNESS, rel=1e-8)


def test_turning_about_a_hinge_costs_nothing_and_any_other_turn_does() -> None:
    psi = np.zeros((1, 2, 3, 3))
    psi[0, 1] = exp_minus_identity(np.array([0.7, 0.0, 0.0]))
    assert np.abs(joint.resist(one("hinge"), psi)[0]).max() < 1e-15
    psi[0, 1] = exp_minus_identity(np.array([0.0, 0.1, 0.0]))
    assert joint.resist(one("hinge"), psi)[0][0, 0, 1, 1] == pytest.approx(STIFFNESS * math.sin(0.1), rel=1e-12)


def test_what_the_joint_does_to_the_spar_it_does_in_reverse_to_the_carrier() -> None:
    for kind in ("hinge", "tilt", "spin"):
        g, _ = joint.resist(one(kind), pose(1.2))
        assert np.abs(g[0, 0].sum(axis=0)).max() < 1e-14
