"""Small algebra on arrays with the components first, (3, ...) and (3, 3, ...), so that every operation is one long loop over the rest.

The element kernels run (component, element, case); `guys.rotation` has the same algebra with the components last, (..., 3).
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


def first(v: Array) -> Array:
    """(case, element, 3) to (3, element, case); (case, element, 3, 3) to (3, 3, element, case)."""
    return np.ascontiguousarray(v.transpose(*range(2, v.ndim), 1, 0))


def dot(a: Array, b: Array) -> Array:
    """a . b."""
    return np.asarray(a[0] * b[0] + a[1] * b[1] + a[2] * b[2])


def cross(a: Array, b: Array) -> Array:
    """a x b; b may be (3, 3, ...), a then crosses each of its columns."""
    return np.stack([a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]])


def outer(a: Array, b: Array) -> Array:
    """a b^T."""
    return a[:, None] * b[None]


def flipped(m: Array) -> Array:
    """The transposed matrices."""
    return m.swapaxes(0, 1)


def add_diagonal(m: Array, amount: Array) -> None:
    """m += amount I."""
    for k in range(3):
        m[k, k] += amount


def add_skew(m: Array, v: Array) -> None:
    """m += [v]x."""
    for a, b, c in ((0, 1, 2), (1, 2, 0), (2, 0, 1)):
        m[a, b] -= v[c]
        m[b, a] += v[c]


def block(uu: Array, tu: Array, ut: Array, tt: Array, into: Array | None = None) -> Array:
    """(6, 6, ...) from its translation (u) and rotation (t) quarters, in fresh memory or `into` some."""
    out = np.empty((6, 6, *uu.shape[2:])) if into is None else into
    out[:3, :3], out[3:, :3], out[:3, 3:], out[3:, 3:] = uu, tu, ut, tt
    return out
