"""The beam element: its energy as written in the module's text, differences of it, and the classical stiffness at rest."""

from __future__ import annotations

import math

import numpy as np
import pytest

from guys import beam
from guys.beam import Rods
from guys.rotation import exp_minus_identity, moved, turn

STEP = 1e-6
"""[m] and [rad] for differences of gradients and energies."""
DIFFERENCES = 2e-7
"""Relative to the greatest component: rounding of energies of large deformations over that step."""
ROUNDING = 1e-12
"""Relative: a few hundred roundings."""
CASES, ELEMENTS = 3, 4


def hessian(rods: Rods, bent: beam.Bent, axial: np.ndarray) -> np.ndarray:
    """(case, element, 12, 12): the blocks as one matrix by (u_i, theta_i, u_j, theta_j)."""
    ii, jj, ji = (np.moveaxis(b, (3, 2), (0, 1)) for b in beam.blocks(rods, bent, axial))
    return np.concatenate([np.concatenate([ii, np.swapaxes(ji, -1, -2)], axis=-1), np.concatenate([ji, jj], axis=-1)], axis=-2)


def triads(rng: np.random.Generator, n: int) -> np.ndarray:
    q = np.linalg.qr(rng.normal(size=(n, 3, 3)))[0]
    return q * np.sign(np.linalg.det(q))[:, None, None]


@pytest.fixture
def rods(rng: np.random.Generator) -> Rods:
    """Elements of every proportion, in any direction, two with shear flexibility."""
    a = triads(rng, ELEMENTS)
    stiff = [rng.uniform(1, 5, ELEMENTS) * scale for scale in (1e4, 1e2, 2e2, 1.5e2)]
    phi = np.array([0.0, 0.0, 0.3, 0.8])
    return Rods(rng.uniform(0.5, 2, ELEMENTS), a[:, 0], a[:, 1], a[:, 2], *stiff, phi, 0.5 * phi)


class Pose:
    """Displacements and rotations of both ends; `moved` steps them along one of the twelve directions."""

    def __init__(self, ui: np.ndarray, pi: np.ndarray, uj: np.ndarray, pj: np.ndarray) -> None:
        self.ui, self.pi, self.uj, self.pj = ui, pi, uj, pj

    @staticmethod
    def random(rng: np.random.Generator, size: float) -> Pose:
        shape = (CASES, ELEMENTS, 3)
        ui, uj, ri, rj = (size * rng.normal(size=shape) for _ in range(4))
        return Pose(ui, exp_minus_identity(3 * ri), uj, exp_minus_identity(3 * rj))

    def moved(self, step: float, direction: int) -> Pose:
        d = np.zeros((CASES, ELEMENTS, 12))
        d[..., direction] = step
        return Pose(self.ui + d[..., 0:3], turn(self.pi, d[..., 3:6]), self.uj + d[..., 6:9], turn(self.pj, d[..., 9:12]))

    def bend(self, rods: Rods, thermal: float = 0.0) -> beam.Bent:
        strain = np.full((ELEMENTS, CASES), thermal)
        turned = (moved(self.pi, rods.y), moved(self.pi, rods.z), moved(self.pj, rods.y), moved(self.pj, rods.z))
        return beam.bend(rods, *(v.T for v in (self.uj - self.ui, *turned)), strain)

    def energy(self, rods: Rods, thermal: float = 0.0) -> np.ndarray:
        """W from its definition alone, the stretch by plain subtraction of lengths."""
        chord = rods.h[:, None] * rods.t + self.uj - self.ui
        length = np.linalg.norm(chord, axis=-1)
        e = chord / length[..., None]
        yi, zi, yj, zj = (v + moved(p, v) for p in (self.pi, self.pj) for v in (rods.y, rods.z))
        b1, b2, a1, a2 = (np.sum(e * v, axis=-1) for v in (yi, yj, zi, zj))
        tau = 0.5 * np.sum(zi * yj - yi * zj, axis=-1)
        bowing = rods.h / 30 * (2 * b1**2 - b1 * b2 + 2 * b2**2 + 2 * a1**2 - a1 * a2 + 2 * a2**2)
        stretch = length - rods.h * (1 + thermal) + bowing

        def bending(EI: np.ndarray, phi: np.ndarray, p: np.ndarray, q: np.ndarray) -> np.ndarray:
            return EI / (2 * rods.h * (1 + phi)) * ((4 + phi) * p * p + 2 * (2 - phi) * p * q + (4 + phi) * q * q)

        return (
            rods.EA / (2 * rods.h) * stretch**2 + bending(rods.EI_z, rods.phi_z, b1, b2) + bending(rods.EI_y, rods.phi_y, a1, a2)
            + rods.GJ / (2 * rods.h) * tau**2
        )  # fmt: skip


def difference(f: object, pose: Pose, direction: int) -> np.ndarray:
    return (f(pose.moved(STEP, direction)) - f(pose.moved(-STEP, direction))) / (2 * STEP)  # type: ignore[operator]


@pytest.mark.parametrize("thermal", [0.0, 1e-3])
def test_gradient_is_the_difference_of_the_energy(rods: Rods, rng: np.random.Generator, thermal: float) -> None:
    pose = Pose.random(rng, 0.1)
    gradient = beam.gradient(pose.bend(rods, thermal))
    for k in range(12):
        numeric = difference(lambda p: p.energy(rods, thermal), pose, k)
        assert np.abs(numeric - gradient[..., k]).max() < DIFFERENCES * np.abs(gradient).max()


def test_hessian_is_the_symmetric_part_of_the_difference_of_the_gradient(rods: Rods, rng: np.random.Generator) -> None:
    """The second derivative of W along exp(s theta) R is symmetric; differences of the gradient have a skew part from the path."""
    pose = Pose.random(rng, 0.1)
    bent = pose.bend(rods)
    columns = [difference(lambda p: beam.gradient(p.bend(rods)), pose, k) for k in range(12)]
    numeric = np.stack(columns, axis=-1)
    numeric = 0.5 * (numeric + np.swapaxes(numeric, -1, -2))
    exact = hessian(rods, bent, bent.axial)
    assert np.abs(numeric - exact).max() < DIFFERENCES * np.abs(exact).max()


def test_axial_force_is_predicted_to_first_order(rods: Rods, rng: np.random.Generator) -> None:
    pose = Pose.random(rng, 0.1)
    bent = pose.bend(rods)
    for k in range(12):
        step = np.zeros((CASES, ELEMENTS, 12))
        step[..., k] = 1.0
        rate = beam.predicted_axial(rods, bent, step) - bent.axial
        numeric = difference(lambda p: p.bend(rods).axial, pose, k)
        assert np.abs(numeric - rate).max() < DIFFERENCES * np.abs(rods.EA / rods.h).max()


def test_a_given_axial_force_changes_the_geometric_part_only_by_what_it_multiplies(rods: Rods, rng: np.random.Generator) -> None:
    """d2W is linear in the axial force for given deformations, and the present one gives the true Hessian."""
    pose = Pose.random(rng, 0.1)
    bent = pose.bend(rods)
    none, one, two = (hessian(rods, bent, bent.axial + extra) for extra in (0.0, 100.0, 200.0))
    assert np.abs((two - none) - 2 * (one - none)).max() < ROUNDING * np.abs(none).max()
    assert np.abs(one - none).max() > 1.0


def test_rigid_motion_costs_nothing(rods: Rods, rng: np.random.Generator) -> None:
    """The same rotation of both ends, the far end carried round with it: no force beyond rounding of EA."""
    psi = np.broadcast_to(exp_minus_identity(np.array([0.4, -1.1, 0.7])), (CASES, ELEMENTS, 3, 3))
    shift = rng.normal(size=(CASES, ELEMENTS, 3))
    pose = Pose(shift, psi, shift + moved(psi, rods.h[:, None] * rods.t), psi)
    assert np.abs(beam.gradient(pose.bend(rods))).max() < ROUNDING * rods.EA.max()


def test_end_forces_are_in_equilibrium(rods: Rods, rng: np.random.Generator) -> None:
    """The energy knows no place or direction in space, so forces and moments on the element vanish in sum."""
    pose = Pose.random(rng, 0.1)
    g = beam.gradient(pose.bend(rods))
    chord = rods.h[:, None] * rods.t + pose.uj - pose.ui
    assert np.abs(g[..., 0:3] + g[..., 6:9]).max() < ROUNDING * np.abs(g).max()
    assert np.abs(g[..., 3:6] + g[..., 9:12] + np.cross(chord, g[..., 6:9])).max() < ROUNDING * np.abs(g).max()


def stiffness_at_rest(phi: float) -> np.ndarray:
    """Hessian of one element along z, x to the east: rows u_i, theta_i, u_j, theta_j."""
    one = np.ones(1)
    x, y, z = np.eye(3)
    rods = Rods(2.0 * one, z[None], x[None], y[None], 7e5 * one, 3e3 * one, 5e3 * one, 2e3 * one, phi * one, phi * one)
    still = np.zeros((3, 1, 1))
    bent = beam.bend(rods, still, still, still, still, still, np.zeros((1, 1)))
    return np.asarray(hessian(rods, bent, bent.axial)[0, 0])


@pytest.mark.parametrize("phi", [0.0, 0.6])
def test_stiffness_at_rest_is_the_classical_one(phi: float) -> None:
    """12 EI/h3, 6 EI/h2, (4 + P) EI/h, (2 - P) EI/h over 1 + P (Timoshenko beam with P = 12 EI/(GA h2)), EA/h and GJ/h."""
    k = stiffness_at_rest(phi)
    h, EI, EI_y = 2.0, 5e3 / (1 + phi), 3e3 / (1 + phi)
    ux, tx, ty, tz = 0, 3, 4, 5
    expected = {
        (ux, ux): 12 * EI / h**3, (ux, ux + 6): -12 * EI / h**3, (1, 1): 12 * EI_y / h**3, (2, 2): 7e5 / h, (2, 8): -7e5 / h,
        (ux, ty): 6 * EI / h**2, (ty, ty): (4 + phi) * EI / h, (ty, ty + 6): (2 - phi) * EI / h,
        (1, tx): -6 * EI_y / h**2, (tx, tx): (4 + phi) * EI_y / h, (tx, tx + 6): (2 - phi) * EI_y / h,
        (tz, tz): 2e3 / h, (tz, tz + 6): -2e3 / h,
    }  # fmt: skip
    for (row, column), value in expected.items():
        assert k[row, column] == pytest.approx(value, rel=ROUNDING), (row, column)
    assert np.abs(k - k.T).max() == 0.0


def test_stretch_by_heat_and_by_pull_is_hookes(rods: Rods) -> None:
    still = np.zeros((3, ELEMENTS, 1))
    pulled = beam.bend(rods, (0.01 * rods.h[:, None] * rods.t).T[:, :, None], still, still, still, still, np.full((ELEMENTS, 1), 0.002))
    assert pulled.axial[0] == pytest.approx(rods.EA * (0.01 - 0.002), rel=ROUNDING)


@pytest.mark.parametrize("angle", [0.01, math.radians(10), math.radians(45), math.radians(80), math.radians(120)])
def test_twist_resists_with_the_sine_of_its_double(angle: float) -> None:
    """The moment about the axis of an element one end of which is turned by `angle`: GJ/(2h) sin 2 angle, as the module says."""
    h, gj = 2.0, 2e3
    one, (x, y, z) = np.ones(1), np.eye(3)
    rods = Rods(h * one, z[None], x[None], y[None], 7e5 * one, 3e3 * one, 5e3 * one, gj * one, 0 * one, 0 * one)
    still = np.zeros((3, 1, 1))
    turn_z = exp_minus_identity(np.array([0.0, 0.0, angle]))
    bent = beam.bend(rods, still, still, still, (turn_z @ x)[:, None, None], (turn_z @ y)[:, None, None], np.zeros((1, 1)))
    moment = beam.gradient(bent)[0, 0, [5, 11]]
    assert moment == pytest.approx(gj / (2 * h) * math.sin(2 * angle) * np.array([-1.0, 1.0]), abs=ROUNDING * gj / h)
