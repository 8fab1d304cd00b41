"""Finite rotations of nodes, and what dead loads on rigid arms do to them.

A node's rotation R is kept as psi = R - I, so that a small rotation keeps all its digits (R itself would round at 1e-16 of one, which
short stiff elements turn into newtons).  A step theta turns the node by R <- exp(theta) R (left, in fixed axes):

    psi <- E + psi + E psi,     E = exp(theta) - I = (sin a / a) [theta]x + ((1 - cos a) / a^2) [theta]x^2,   a = |theta|

A force F on a rigid arm r (drawn axes) has the potential -F.(R r).  Summed over all loads of a node this is -tr(R Q) with the
load dyad Q = sum r F^T, and with A = R Q

    moment on the node     m_k = eps_kij A_ij
    second derivative of tr(A) under R <- exp(theta) R:   (A + A^T)/2 - tr(A) I

Both hold for any pair of vectors p (turning) and q (fixed), A = p q^T, since q.p(theta) = q.p + theta.(p x q) + ....
Source: Rodrigues' formula; expansion of exp to second order.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

SERIES_BELOW = 1e-2
"""[rad^2] below this square of the angle the series (error < 1e-16) replaces the quotients, which lose digits there."""


def cross(a: Array, b: Array) -> Array:
    """a x b over the last axis (..., 3); several times faster than numpy's for many short vectors."""
    out = np.empty(np.broadcast_shapes(a.shape, b.shape))
    ax, ay, az = a[..., 0], a[..., 1], a[..., 2]
    bx, by, bz = b[..., 0], b[..., 1], b[..., 2]
    out[..., 0] = ay * bz - az * by
    out[..., 1] = az * bx - ax * bz
    out[..., 2] = ax * by - ay * bx
    return out


def dot(a: Array, b: Array) -> Array:
    """a . b over the last axis."""
    return a[..., 0] * b[..., 0] + a[..., 1] * b[..., 1] + a[..., 2] * b[..., 2]


def outer(a: Array, b: Array) -> Array:
    """a b^T over the last axis: (..., 3, 3)."""
    return a[..., :, None] * b[..., None, :]


def skew(v: Array) -> Array:
    """[v]x with [v]x w = v x w: (..., 3) -> (..., 3, 3)."""
    s = np.zeros((*v.shape, 3))
    s[..., 0, 1], s[..., 0, 2], s[..., 1, 2] = -v[..., 2], v[..., 1], -v[..., 0]
    s[..., 1, 0], s[..., 2, 0], s[..., 2, 1] = v[..., 2], -v[..., 1], v[..., 0]
    return s


def exp_minus_identity(theta: Array) -> Array:
    """exp([theta]x) - I for rotation vectors (..., 3) [rad]."""
    square = dot(theta, theta)
    a = np.sqrt(square)
    small = square < SERIES_BELOW
    safe = np.where(small, 1.0, a)
    s = np.where(small, 1 - square / 6 * (1 - square / 20 * (1 - square / 42 * (1 - square / 72))), np.sin(safe) / safe)
    half = np.sin(safe / 2) / safe
    c = np.where(small, 0.5 - square / 24 * (1 - square / 30 * (1 - square / 56 * (1 - square / 90))), 2 * half * half)
    x, y, z = theta[..., 0], theta[..., 1], theta[..., 2]
    sx, sy, sz, cx, cy, cz = s * x, s * y, s * z, c * x, c * y, c * z
    out = np.empty((*theta.shape, 3))
    out[..., 0, 0], out[..., 1, 1], out[..., 2, 2] = -(cy * y + cz * z), -(cx * x + cz * z), -(cx * x + cy * y)
    out[..., 0, 1], out[..., 1, 0] = cx * y - sz, cx * y + sz
    out[..., 0, 2], out[..., 2, 0] = cx * z + sy, cx * z - sy
    out[..., 1, 2], out[..., 2, 1] = cy * z - sx, cy * z + sx
    return out


def turn(psi: Array, theta: Array) -> Array:
    """psi = R - I after R <- exp(theta) R."""
    e = exp_minus_identity(theta)
    return psi + e + e @ psi


def turned(psi: Array, vector: Array) -> Array:
    """R v for fixed vectors v (..., 3)."""
    return vector + moved(psi, vector)


def moved(psi: Array, vector: Array) -> Array:
    """(R - I) v."""
    return np.asarray((psi @ vector[..., None])[..., 0])


def dyad_moment(a: Array) -> Array:
    """eps_kij A_ij: the moment sum p x q of a dyad sum p q^T (..., 3, 3) -> (..., 3)."""
    return np.stack([a[..., 1, 2] - a[..., 2, 1], a[..., 2, 0] - a[..., 0, 2], a[..., 0, 1] - a[..., 1, 0]], axis=-1)


def dyad_curvature(a: Array) -> Array:
    """(A + A^T)/2 - tr(A) I: second derivative of tr(A) = sum q.p under a turn of all p."""
    trace = a[..., 0, 0] + a[..., 1, 1] + a[..., 2, 2]
    out: Array = 0.5 * (a + np.swapaxes(a, -1, -2))
    out[..., (0, 1, 2), (0, 1, 2)] -= trace[..., None]
    return out
