"""Joints at the foot of a spar: what holds its rotation against whatever carries it (the ground or another spar).

Each joint is a small energy of dot products c = p.q, p turning with the spar (s), q with its carrier (m):

    hinge   W = k (1 - a_s.a_m)                 the hinge axis a stays in line; turning about it is free
    tilt    W = k phi^2 / 2, cos phi = t_s.t_m  a sprung base: moment k phi against the angle between the axes
    spin    W = k tau^2 / 2, tau = (z_m.y_s - y_m.z_s)/2   turning about the spar's own axis is held, tilting is free

With dc/dtheta_s = p x q = -dc/dtheta_m and, for the update R <- exp(theta) R, second derivatives

    ss and mm: (p q^T + q p^T)/2 - c I,      sm: c I - q p^T.

Joints that only hold (hinge, spin) take a stiffness far above the spar's own, as if a stub of 1e-5 of its length were between;
their moments are exact in equilibrium whatever that stiffness.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from guys.rotation import Array, cross, dot, dyad_curvature, outer, turned

Kind = tuple[str, ...]
SMALL_ANGLE = 1e-3
"""[rad] below it the series of phi/sin phi is exact to rounding."""


@dataclass(frozen=True)
class Joints:
    """kind : "hinge" | "tilt" | "spin" for each joint; spar_node, carrier_node : (joint,); stiffness : (joint,) [N m/rad];
    axis : (joint, 3, 3) rows: the vector that must stay in line (hinge axis a or spar axis t), and the two (y, z) square to it."""

    kind: Kind
    spar_node: NDArray[np.int64]
    carrier_node: NDArray[np.int64]
    stiffness: Array
    axis: Array


def resist(joints: Joints, psi: Array) -> tuple[Array, Array]:
    """Gradient (case, joint, 2, 3) and Hessian (case, joint, 2, 2, 3, 3), carrier first, spar second.

    psi : (case, node, 3, 3) R - I of every node.
    """
    turned_m = turned(psi[:, joints.carrier_node, None], joints.axis)
    turned_s = turned(psi[:, joints.spar_node, None], joints.axis)
    cases, n = psi.shape[0], len(joints.kind)
    g = np.zeros((cases, n, 2, 3))
    h = np.zeros((cases, n, 2, 2, 3, 3))
    for j, kind in enumerate(joints.kind):
        k, m, s = joints.stiffness[j], turned_m[:, j], turned_s[:, j]
        if kind == "spin":
            _add_spin(g[:, j], h[:, j], m, s, k)
        else:
            c = dot(s[:, 0], m[:, 0])
            slope, curve = (np.full(cases, -k), np.zeros(cases)) if kind == "hinge" else _tilt(c, cross(s[:, 0], m[:, 0]), k)
            _add_dot(g[:, j], h[:, j], s[:, 0], m[:, 0], slope, curve)
    return g, h


def _tilt(c: Array, across: Array, k: float) -> tuple[Array, Array]:
    """dW/dc and d2W/dc2 of k phi^2/2."""
    sine = np.sqrt(dot(across, across))
    phi = np.arctan2(sine, c)
    small = phi < SMALL_ANGLE
    safe = np.where(small, 1.0, sine)
    slope = np.where(small, 1 + phi * phi / 6, phi / safe)
    curve = np.where(small, 1 / 3 + 2 * phi * phi / 15, (1 - phi * c / safe) / (safe * safe))
    return -k * slope, k * curve


def _add_dot(g: Array, h: Array, p: Array, q: Array, slope: Array, curve: Array) -> None:
    turn_s = cross(p, q)
    a = outer(p, q)
    c = dot(p, q)
    same = slope[:, None, None] * dyad_curvature(a) + curve[:, None, None] * outer(turn_s, turn_s)
    mixed = slope[:, None, None] * (c[:, None, None] * np.eye(3) - np.swapaxes(a, -1, -2)) - curve[:, None, None] * outer(turn_s, turn_s)
    g[:, 1] += slope[:, None] * turn_s
    g[:, 0] -= slope[:, None] * turn_s
    h[:, 0, 0] += same
    h[:, 1, 1] += same
    h[:, 1, 0] += mixed
    h[:, 0, 1] += np.swapaxes(mixed, -1, -2)


def _add_spin(g: Array, h: Array, m: Array, s: Array, k: float) -> None:
    y_m, z_m, y_s, z_s = m[:, 1], m[:, 2], s[:, 1], s[:, 2]
    tau = 0.5 * (dot(z_m, y_s) - dot(y_m, z_s))
    turn_m = 0.5 * (cross(z_m, y_s) - cross(y_m, z_s))
    a = 0.5 * (outer(z_m, y_s) - outer(y_m, z_s))
    same = k * (outer(turn_m, turn_m) + tau[:, None, None] * dyad_curvature(a))
    mixed_ms = k * (tau[:, None, None] * (tau[:, None, None] * np.eye(3) - np.swapaxes(a, -1, -2)) - outer(turn_m, turn_m))
    g[:, 0] += k * tau[:, None] * turn_m
    g[:, 1] -= k * tau[:, None] * turn_m
    h[:, 0, 0] += same
    h[:, 1, 1] += same
    h[:, 0, 1] += mixed_ms
    h[:, 1, 0] += np.swapaxes(mixed_ms, -1, -2)
