"""Finite rotations against scipy's, and what dead loads on arms do, against differences of their potential."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.spatial.transform import Rotation

from guys import rotation

ROUNDING = 1e-15
"""Relative to one: a few roundings of numbers of size one."""
STEP = 1e-4
"""[rad] for differences: truncation 1e-8, rounding 1e-16/1e-8."""
DIFFERENCES = 1e-6
"""Relative error left by second differences with that step."""

ANGLES = [0.0, 1e-12, 1e-6, 0.0999, 0.1, 0.1001, 0.5, 2.0, 3.1, 6.0]
"""[rad] on both sides of the change from series to quotients, at 0.1, and past half a turn."""


def axes(rng: np.random.Generator, n: int) -> np.ndarray:
    v = rng.normal(size=(n, 3))
    return v / np.linalg.norm(v, axis=1)[:, None]


@pytest.mark.parametrize("angle", ANGLES)
def test_exp_is_the_rotation_of_scipy(angle: float, rng: np.random.Generator) -> None:
    theta = angle * axes(rng, 50)
    got = rotation.exp_minus_identity(theta) + np.eye(3)
    assert np.abs(got - Rotation.from_rotvec(theta).as_matrix()).max() < 4 * ROUNDING


@pytest.mark.parametrize("angle", [1e-12, 1e-9, 1e-5])
def test_small_rotations_keep_all_their_digits(angle: float, rng: np.random.Generator) -> None:
    theta = angle * axes(rng, 50)
    k = rotation.skew(theta)
    third_order = angle**3
    assert np.abs(rotation.exp_minus_identity(theta) - k - 0.5 * k @ k).max() < 4 * ROUNDING * angle + third_order


def test_turn_multiplies_from_the_left(rng: np.random.Generator) -> None:
    first, then = 1.2 * axes(rng, 20), 2.1 * axes(rng, 20)
    psi = rotation.turn(rotation.exp_minus_identity(first), then)
    expected = (Rotation.from_rotvec(then) * Rotation.from_rotvec(first)).as_matrix()
    assert np.abs(psi + np.eye(3) - expected).max() < 4 * ROUNDING


def test_turned_and_moved_apply_the_rotation(rng: np.random.Generator) -> None:
    theta, v = axes(rng, 20), axes(rng, 20)
    psi = rotation.exp_minus_identity(theta)
    assert np.abs(rotation.turned(psi, v) - Rotation.from_rotvec(theta).apply(v)).max() < 4 * ROUNDING
    assert np.abs(rotation.moved(psi, v) + v - rotation.turned(psi, v)).max() < 4 * ROUNDING


def test_vector_products_are_those_of_numpy(rng: np.random.Generator) -> None:
    a, b = rng.normal(size=(4, 7, 3)), rng.normal(size=(7, 3))
    assert np.abs(rotation.cross(a, b) - np.cross(a, b)).max() < 10 * ROUNDING
    assert np.abs(rotation.dot(a, b) - np.sum(a * b, axis=-1)).max() < 10 * ROUNDING
    assert np.abs(rotation.outer(a, a) - np.einsum("...i,...j->...ij", a, a)).max() < 10 * ROUNDING
    assert np.abs((rotation.skew(a) @ np.broadcast_to(b, a.shape)[..., None])[..., 0] - np.cross(a, b)).max() < 10 * ROUNDING


def test_moment_and_curvature_of_a_load_dyad_are_derivatives_of_its_potential(rng: np.random.Generator) -> None:
    """V(theta) = sum F.(exp(theta) r) for three loads on arms: slope = sum r x F, second difference = theta^T H theta."""
    arms, forces, direction = axes(rng, 3), axes(rng, 3), axes(rng, 1)[0]

    def potential(size: float) -> float:
        psi = rotation.exp_minus_identity(size * direction)
        return float(np.sum(forces * rotation.turned(psi, arms)))

    a = np.einsum("ni,nj->ij", arms, forces)
    moment = rotation.dyad_moment(a)
    assert np.abs(moment - np.cross(arms, forces).sum(axis=0)).max() < 10 * ROUNDING
    slope = (potential(STEP) - potential(-STEP)) / (2 * STEP)
    assert slope == pytest.approx(moment @ direction, abs=DIFFERENCES)
    curvature = (potential(STEP) - 2 * potential(0) + potential(-STEP)) / STEP**2
    assert curvature == pytest.approx(direction @ rotation.dyad_curvature(a) @ direction, abs=DIFFERENCES)
