"""Distributed loads on stretches of spar, brought to the nodes.

On an elastic element the position is x(s) = N1 x_i + N2 t_i + N3 x_j + N4 t_j with the cubic (Hermite) shape functions, t the node's own
axis, so a load q(s) gives forces int N1 q, int N3 q and the dyads t (x) int N2 q, t (x) int N4 q (for a uniform load q h/2 and the
moments +-(h^2/12) t x q).  On a rigid spar the position is x_foot + s t: a force int q and a dyad t (x) int s q.

Weight functions are integrated by Gauss points between the places where a load jumps or bends, so any pressure profile is taken as it is.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from guys.rotation import Array
from guys.structure import Pieces

GAUSS, GAUSS_WEIGHTS = np.polynomial.legendre.leggauss(16)
"""Points between two cuts: a profile z^0.3 from z = 0 is then integrated within 1e-4, any other far closer."""


@dataclass(frozen=True)
class Weights:
    """station (piece, gauss) [m] from the foot; force_low, force_high (piece, gauss) [m]; arm_low, arm_high (piece, gauss) [m2]."""

    station: Array
    force_low: Array
    arm_low: Array
    force_high: Array
    arm_high: Array


def weights(pieces: Pieces, cuts: Array) -> Weights:
    """Weights with which a load at the Gauss points of every stretch acts on the nodes of its ends; cuts (piece, any) are the shares of a
    stretch at which the load may jump or bend, those outside 0 to 1 being none."""
    h = (pieces.station[:, 1] - pieces.station[:, 0])[:, None]
    bounds = _bounds(cuts)
    part = np.diff(bounds, axis=1)[..., None]
    f = (bounds[:, :-1, None] + part * (0.5 * (1 + GAUSS))).reshape(len(h), -1)
    dw = (part * (0.5 * GAUSS_WEIGHTS)).reshape(len(h), -1) * h
    station = pieces.station[:, :1] + f * h
    rigid = pieces.rigid[:, None]
    return Weights(
        station,
        np.where(rigid, dw, dw * (1 - 3 * f**2 + 2 * f**3)),
        np.where(rigid, dw * station, dw * h * f * (1 - f) ** 2),
        np.where(rigid, 0.0, dw * (3 * f**2 - 2 * f**3)),
        np.where(rigid, 0.0, -dw * h * f**2 * (1 - f)),
    )


def _bounds(cuts: Array) -> Array:
    """(piece, part + 1) from 0 to 1: every piece is cut into as many parts as the one with most cuts, some of no length."""
    inside = (cuts > 0.0) & (cuts < 1.0)
    most = int(inside.sum(axis=1).max(initial=0))
    kept = np.sort(np.where(inside, cuts, 1.0), axis=1)[:, :most]
    return np.pad(np.pad(kept, ((0, 0), (1, 0))), ((0, 0), (0, 1)), constant_values=1.0)


def shares(w: Weights, intensity: Array) -> Array:
    """What a load of intensity (..., piece, gauss) [N/m] brings to the ends of every piece, along its direction.

    Returns (..., piece, 4): force at the low node [N], lever load there [N m], and both at the high node; a lever load m gives the dyad
    t (x) m.
    """
    return np.stack([np.sum(by * intensity, axis=-1) for by in (w.force_low, w.arm_low, w.force_high, w.arm_high)], axis=-1)


def spread(share: Array, direction: Array) -> Array:
    """Shares (case, piece, 4), or (piece, 4) alike in all cases, along directions (case, piece, 3): (case, piece, 4, 3)."""
    return np.asarray(share[..., None] * direction[:, :, None, :])


def to_nodes(pieces: Pieces, ends: Array, nodes: int) -> tuple[Array, Array]:
    """Forces (case, node, 3) and dyads (case, node, 3, 3) of the loads (case, piece, 4, 3) on pieces."""
    cases = len(ends)
    force = np.zeros((cases, nodes, 3))
    lever = np.zeros((cases, nodes, 3))
    axis = np.zeros((nodes, 3))
    each = np.arange(len(pieces.low))
    for node, first in ((pieces.low, 0), (pieces.high, 2)):
        to = np.zeros((nodes, len(node)))
        to[node, each] = 1.0
        force += to @ ends[:, :, first]
        lever += to @ ends[:, :, first + 1]
        axis[node] = pieces.axis
    return force, axis[:, :, None] * lever[..., None, :]
