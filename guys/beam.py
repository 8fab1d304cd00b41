"""Corotational beam element: energy, gradient and Hessian in closed form.

An element of natural length h runs from node i to node j; e is the unit vector between its end points, (t, y, z) the triad each
node carries with it.  Six generalised deformations, all bilinear in e and the end triads (so gradient and Hessian are short):

    lam = l - h                   stretch of the chord
    b1 = e.y_i, b2 = e.y_j        slopes of the chord against the end triads in the plane (t, y)
    a1 = e.z_i, a2 = e.z_j        the same in the plane (t, z)
    tau = (z_i.y_j - y_i.z_j)/2   twist

    u_e = lam + h/30 (2 b1^2 - b1 b2 + 2 b2^2 + 2 a1^2 - a1 a2 + 2 a2^2)             stretch with the bowing of the axis
    W = EA/(2h) u_e^2 + EI_z/(2h(1+P)) [(4+P) b1^2 + 2(2-P) b1 b2 + (4+P) b2^2] + (the same in a, EI_y) + GJ/(2h) tau^2

P = 12 EI/(GA h^2) is the shear flexibility (0 for tubes).  N = EA u_e/h is the axial force.  With p = (lam, b1, b2, a1, a2, tau)

    gradient  = J^T W_p,      Hessian = J^T W_pp J + sum_k W_pk (second derivative of p_k),      J = dp/d(d, theta_i, theta_j)

d = u_j - u_i; rotations vary as R <- exp(theta) R and the symmetric part is taken, which is the true Hessian for that update.
The stretch comes from displacements alone, l - h = (2 d0.d + d.d)/(l + h) - thermal, and the slopes from e - e0 and R - I, so nothing
cancels: the residual keeps 1e-11 of the acting forces.

The Hessian may be built with an axial force predicted from the last step instead of the present one: a trial step that turns a
member also stretches it in second order, and that spurious tension would spoil the geometric stiffness.

Symbols: l chord length, P = I - e e^T, v_i = W_b1 y_i + W_a1 z_i.  Twists past 180 degrees between neighbouring nodes are outside the
element's range.  Sources: Crisfield, Non-linear Finite Element Analysis of Solids and Structures, vol. 2 (1997), ch. 17, for
corotational beams; the bowing term is that of the cubic shape functions (Hermite), MacNeal's local deformation form; the shear
factors are the usual Timoshenko ones.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from guys.rotation import cross, dot, outer, skew

Array = NDArray[np.float64]
D, TI, TJ = slice(0, 3), slice(3, 6), slice(6, 9)


@dataclass(frozen=True)
class Rods:
    """Constants of the elements, each (element, ...): drawn length h [m], unit axes t, y, z (element, 3), EA [N], EI_y, EI_z, GJ [N m2],
    shear flexibilities phi_y (with EI_y) and phi_z [-]."""

    h: Array
    t: Array
    y: Array
    z: Array
    EA: Array
    EI_y: Array
    EI_z: Array
    GJ: Array
    phi_y: Array
    phi_z: Array


@dataclass(frozen=True)
class Bent:
    """Deformed elements: what gradient and Hessian share.  Arrays (case, element, ...); `slope` is p without the stretch,
    `force` is W_p, `jacobian` (…, 6, 9), `stretch_row` (…, 9) the gradient of u_e."""

    l: Array
    e: Array
    y_i: Array
    z_i: Array
    y_j: Array
    z_j: Array
    slope: Array
    axial: Array
    force: Array
    jacobian: Array
    stretch_row: Array
    bow: Array


def bend(rods: Rods, d: Array, dy_i: Array, dz_i: Array, dy_j: Array, dz_j: Array, thermal: Array) -> Bent:
    """Deformations and generalised forces.

    d : (case, element, 3) [m] relative displacement u_j - u_i
    dy_i ... dz_j : (case, element, 3) change of the end triads' y and z, (R - I) y0 and so on
    thermal : (case, element) free thermal strain
    """
    h, t0 = rods.h, rods.t
    growth = 2 * h * dot(t0, d) + dot(d, d)
    l = np.sqrt(h * h + growth)
    stretched = growth / (l + h)
    de = (d - t0 * stretched[..., None]) / l[..., None]
    e = t0 + de
    y_i, z_i, y_j, z_j = rods.y + dy_i, rods.z + dz_i, rods.y + dy_j, rods.z + dz_j
    b1, b2 = dot(de, rods.y) + dot(e, dy_i), dot(de, rods.y) + dot(e, dy_j)
    a1, a2 = dot(de, rods.z) + dot(e, dz_i), dot(de, rods.z) + dot(e, dz_j)
    tau = 0.5 * (dot(rods.z, dy_j) + dot(dz_i, y_j) - dot(rods.y, dz_j) - dot(dy_i, z_j))
    bow = (h / 30)[..., None] * np.stack([4 * b1 - b2, 4 * b2 - b1, 4 * a1 - a2, 4 * a2 - a1], axis=-1)
    bowing = 0.5 * (bow[..., 0] * b1 + bow[..., 1] * b2 + bow[..., 2] * a1 + bow[..., 3] * a2)
    axial = rods.EA / h * (stretched - thermal * h + bowing)
    k_b, q_b, k_a, q_a = _bending_stiffness(rods)
    force = np.empty((*l.shape, 6))
    force[..., 0] = axial
    force[..., 1] = k_b * b1 + q_b * b2
    force[..., 2] = q_b * b1 + k_b * b2
    force[..., 3] = k_a * a1 + q_a * a2
    force[..., 4] = q_a * a1 + k_a * a2
    force[..., 1:5] += axial[..., None] * bow
    force[..., 5] = rods.GJ / h * tau
    slope = np.stack([b1, b2, a1, a2, tau], axis=-1)
    jacobian = _jacobian(l, e, slope, y_i, z_i, y_j, z_j)
    stretch_row = jacobian[..., 0, :] + (bow[..., None, :] @ jacobian[..., 1:5, :])[..., 0, :]
    return Bent(l, e, y_i, z_i, y_j, z_j, slope, axial, force, jacobian, stretch_row, bow)


def _bending_stiffness(rods: Rods) -> tuple[Array, Array, Array, Array]:
    """Direct and cross terms of both bending energies [N m]."""
    b = rods.EI_z / (rods.h * (1 + rods.phi_z))
    a = rods.EI_y / (rods.h * (1 + rods.phi_y))
    return b * (4 + rods.phi_z), b * (2 - rods.phi_z), a * (4 + rods.phi_y), a * (2 - rods.phi_y)


def _jacobian(l: Array, e: Array, slope: Array, y_i: Array, z_i: Array, y_j: Array, z_j: Array) -> Array:
    """dp/d(d, theta_i, theta_j): (case, element, 6, 9)."""
    j = np.zeros((*l.shape, 6, 9))
    j[..., 0, D] = e
    for row, (axis, end) in enumerate(((y_i, TI), (y_j, TJ), (z_i, TI), (z_j, TJ))):
        j[..., row + 1, D] = (axis - slope[..., row, None] * e) / l[..., None]
        j[..., row + 1, end] = cross(axis, e)
    twist = 0.5 * (cross(z_i, y_j) - cross(y_i, z_j))
    j[..., 5, TI] = twist
    j[..., 5, TJ] = -twist
    return j


def gradient(bent: Bent) -> Array:
    """(case, element, 12): derivative of the energy by (u_i, theta_i, u_j, theta_j)."""
    g = (bent.force[..., None, :] @ bent.jacobian)[..., 0, :]
    return np.concatenate([-g[..., D], g[..., TI], g[..., D], g[..., TJ]], axis=-1)


def hessian(rods: Rods, bent: Bent, axial: Array) -> Array:
    """(case, element, 12, 12): second derivative of the energy, its geometric part with the axial force given [N]."""
    h, l, e = rods.h, bent.l, bent.e
    force = bent.force.copy()
    force[..., 0] = axial
    force[..., 1:5] += (axial - bent.axial)[..., None] * bent.bow
    k = np.swapaxes(bent.jacobian, -1, -2) @ (_material(rods, axial, l.shape) @ bent.jacobian)
    k += (rods.EA / h)[..., None, None] * outer(bent.stretch_row, bent.stretch_row)
    v_i = force[..., 1, None] * bent.y_i + force[..., 3, None] * bent.z_i
    v_j = force[..., 2, None] * bent.y_j + force[..., 4, None] * bent.z_j
    across = np.eye(3) - outer(e, e)
    _add_chord(k, axial, v_i + v_j, e, l, across)
    _add_ends(k, v_i, v_j, e, l, across)
    _add_twist(k, force[..., 5], bent)
    return _spread(k)


def _material(rods: Rods, axial: Array, shape: tuple[int, ...]) -> Array:
    """W_pp without the rank-one stretch term: (case, element, 6, 6)."""
    w = np.zeros((*shape, 6, 6))
    k_b, q_b, k_a, q_a = _bending_stiffness(rods)
    bow = axial * rods.h / 30
    for first, k, q in ((1, k_b, q_b), (3, k_a, q_a)):
        w[..., first, first] = w[..., first + 1, first + 1] = k + 4 * bow
        w[..., first, first + 1] = w[..., first + 1, first] = q - bow
    w[..., 5, 5] = rods.GJ / rods.h
    return w


def _add_chord(k: Array, axial: Array, v: Array, e: Array, l: Array, across: Array) -> None:
    ev = outer(e, v)
    along = dot(e, v)[..., None, None]
    l2 = l[..., None, None]
    k[..., D, D] += axial[..., None, None] / l2 * across
    k[..., D, D] -= (ev + np.swapaxes(ev, -1, -2) + along * (3 * across - 2 * np.eye(3))) / (l2 * l2)


def _add_ends(k: Array, v_i: Array, v_j: Array, e: Array, l: Array, across: Array) -> None:
    for v, end in ((v_i, TI), (v_j, TJ)):
        ve = outer(v, e)
        k[..., end, end] += 0.5 * (ve + np.swapaxes(ve, -1, -2)) - dot(v, e)[..., None, None] * np.eye(3)
        cross_term = skew(v) @ across / l[..., None, None]
        k[..., end, D] += cross_term
        k[..., D, end] += np.swapaxes(cross_term, -1, -2)


def _add_twist(k: Array, torque: Array, bent: Bent) -> None:
    torque = torque[..., None, None]
    tau = bent.slope[..., 4, None, None] * np.eye(3)
    a = outer(bent.z_i, bent.y_j) - outer(bent.y_i, bent.z_j)
    same = torque * (0.25 * (a + np.swapaxes(a, -1, -2)) - tau)
    other = torque * (tau - 0.5 * np.swapaxes(a, -1, -2))
    k[..., TI, TI] += same
    k[..., TJ, TJ] += same
    k[..., TI, TJ] += other
    k[..., TJ, TI] += np.swapaxes(other, -1, -2)


def _spread(k: Array) -> Array:
    """From (d, theta_i, theta_j) to (u_i, theta_i, u_j, theta_j)."""
    out = np.empty((*k.shape[:-2], 12, 12))
    ui, ri, uj, rj = slice(0, 3), slice(3, 6), slice(6, 9), slice(9, 12)
    out[..., ui, ui] = out[..., uj, uj] = k[..., D, D]
    out[..., ui, uj] = out[..., uj, ui] = -k[..., D, D]
    for end, rows in ((ri, TI), (rj, TJ)):
        out[..., end, ui] = -k[..., rows, D]
        out[..., end, uj] = k[..., rows, D]
        out[..., ui, end] = -k[..., D, rows]
        out[..., uj, end] = k[..., D, rows]
    out[..., ri, ri], out[..., rj, rj] = k[..., TI, TI], k[..., TJ, TJ]
    out[..., ri, rj], out[..., rj, ri] = k[..., TI, TJ], k[..., TJ, TI]
    return out


def predicted_axial(rods: Rods, bent: Bent, step: Array) -> Array:
    """Axial force [N] after a step (case, element, 12), to first order."""
    nine = np.concatenate([step[..., 6:9] - step[..., 0:3], step[..., 3:6], step[..., 9:12]], axis=-1)
    change: Array = np.einsum("...k,...k->...", bent.stretch_row, nine)
    return bent.axial + rods.EA / rods.h * change
