"""Cables: the elastic catenary under any uniform load, and the weightless tension-only tie.

**Catenary.**  A cable of unstressed length L0 and stiffness EA carries the load vector w per unstressed length (weight, ice and wind
together).  With T the tension vector at mid-length, pointing from end A to end B, and s the unstressed length from there,

    T(s) = T - w s,      T_A = T + w L0/2,      T_B = T - w L0/2
    chord r = x_B - x_A = int (1/EA + 1/|T(s)|) T(s) ds
            = L0 [ T/EA + (2/S) (T_par + (atanh z / z) T_per) ],   S = |T_A| + |T_B|,   z = |w| L0 / S

(par and per to w).  Nothing cancels, so one formula serves taut, sagging and hanging cables alike.  The flexibility

    F = dr/dT = L0 [ I/EA + (2/S) (P_par + (atanh z / z) P_per) - (2/S^2) (T_par + T_per/(1 - z^2)) n^T ],
    n = T_A/|T_A| + T_B/|T_B|,     1 - z^2 = 2 (|T_A| |T_B| + T_A.T_B) / S^2

(where the ends pull against each other, in a loop, that sum is |w L0|^2 |T_per|^2 / (|T_A| |T_B| - T_A.T_B), which cancels nothing)
is symmetric positive definite: F^-1 is the stiffness between the ends, and Newton on T is the minimisation of a convex
complementary energy.  The pull of the cable on A is T_A, on B it is -T_B.  Lengthening at given T moves the ends by
dr/dL0 = half the sum over both ends of (1/EA + 1/|T|) T.

**Straight.**  Weightless: T = EA (c/L0 - 1) along the chord c where that is positive, nothing otherwise.

Sources: Irvine, Cable Structures (1981), section 1.3, for the elastic catenary; the vector form at mid-length is our own
rearrangement and is tested against it and against direct integration.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from guys import columns
from guys.constants import NONZERO
from guys.rotation import dot, outer

Array = NDArray[np.float64]

LARGEST_ROUNDS = 60
"""Newton's rounds for a catenary; ordinary ones take 1 to 5."""
START_ROUNDS = 12
"""Newton's rounds for the cubic of a start: within rounding after six where taut; in long loops it halves the rest, which will do."""
START_ACROSS = 1e-12
"""Least square of the load across the chord that a start takes, of the whole load's: a cable in line with its load starts off zero."""
START_SLACK = 1e-3
"""Least tension a start takes, of the load: the cubic, meant for shallow sag, gives a cable along its load next to none."""
CLOSED = 1e-9
"""Newton ends with a correction of T below this share of the end tensions: the next would be of the order of its square ..."""
ROUNDING = 4e-15
"""... or with a chord met to this share of length plus chord: rounding, which EA turns into more than CLOSED in a stiff cable."""
NEWTON_REACH = 0.8
"""Greatest correction, of |T|: with more, Newton swings about the answer in cables far longer than their chord (measured: c < 0.4 L0)."""
TRUST = 0.3
"""A start is kept only if Newton's first correction is below this share of |T| (measured: beyond it convergence is slower than afresh)."""
NEARLY_CHORD = 1e-3
"""... and the chord it gives is this close, relative to length plus chord."""
WEIGHTLESS = 1e-13
"""A cable with less load than this share of EA is solved with that much: its shape is then straight to rounding, and a slack one hangs."""
LEVEL_FLOOR = 1e-12
"""Least lean of the chord from the load, of its length, and of tension, of the load: a slack cable in line with its load keeps a loop."""
FOLDED = 1e-30
"""Least 1 - z^2: that of a cable hanging double in its own line, where rounding would make it zero."""
SERIES_BELOW = 1e-2
"""z below which the series of atanh z/z is exact to rounding."""
STRAIGHT_BELOW = 1e-12
"""A cable with less load than this share of its tension is drawn straight: the catenary's parameter would be lost in rounding."""
SIX = ((0, 0), (0, 1), (0, 2), (1, 1), (1, 2), (2, 2))
"""Rows and columns of the six entries of a symmetric matrix."""
SLACK_BELOW = 1e-9
"""A straight cable is slack where it is longer than its chord by more than this share; one as long as its chord resists at once."""


@dataclass(frozen=True)
class Hanging:
    """State of cables (..., ) : `tension` T (..., 3) [N] at mid-length, end tension vectors `at_a`, `at_b`, `stiffness` F^-1 (..., 3, 3)
    [N/m].
    """

    tension: Array
    at_a: Array
    at_b: Array
    stiffness: Array


def start(chord: Array, length: Array, EA: Array, load: Array) -> Array:
    """First tension vectors (3, n): along the chord, from the cubic T^3 - EA (c/L0 - 1) T^2 - EA |w_per L0|^2 / 24 = 0.

    chord (3, n) [m], length (n,) [m], EA (n,) [N], load (3, n) total load w L0 [N].
    """
    c = np.sqrt(columns.dot(chord, chord))
    e = chord / np.maximum(c, NONZERO)
    own2 = columns.dot(load, load)
    across2 = np.maximum(own2 - columns.dot(load, e) ** 2, START_ACROSS * own2)
    taut = EA * (c / length - 1)
    hanging = np.cbrt(EA * across2 / 24)
    x = np.maximum(np.maximum(taut, 0), hanging)
    for _ in range(START_ROUNDS):
        f = x * x * (x - taut) - EA * across2 / 24
        x = x - f / np.maximum(3 * x * x - 2 * taut * x, NONZERO)
    loose = np.clip(1 - c / length, 0, 1)
    return np.asarray(np.maximum(x, START_SLACK * np.sqrt(own2) * (1 - loose)) * e)


@dataclass(frozen=True)
class _Ties:
    """Cables between given ends, components first: chord, load (3, n); unit (3, n) along the load, own (n,) = |load|; length, EA (n,)."""

    chord: Array
    length: Array
    EA: Array
    load: Array
    unit: Array
    own: Array

    def take(self, rows: NDArray[np.int64]) -> _Ties:
        return _Ties(self.chord[:, rows], self.length[rows], self.EA[rows], self.load[:, rows], self.unit[:, rows], self.own[rows])


def hang(chord: Array, length: Array, EA: Array, load: Array, warm: Array | None = None) -> Hanging:
    """Solve r(T) = chord for many cables at once.

    chord : (n, 3) [m] from end A to end B;  length : (n,) [m] unstressed;  EA : (n,) [N]
    load : (n, 3) [N] total load w L0 on the cable;  warm : (n, 3) [N] tensions to start from where they serve
    Valid for any length > 0.  A chord in line with the load is taken to lean from it by `LEVEL_FLOOR`, to whichever side.
    """
    ties = _ties(chord, length, EA, load)
    tension, gap, flexibility, ends = _begin(ties, None if warm is None else warm.T.copy())
    small = ROUNDING * (length + np.sqrt(columns.dot(ties.chord, ties.chord)))
    open_, f, part = np.arange(len(length)), flexibility, ties
    for _ in range(LARGEST_ROUNDS):
        change = -_times(_inverse(f), gap)
        size = np.sqrt(columns.dot(change, change))
        tension[:, open_] += _damped(size, tension[:, open_]) * change
        wide = (size > CLOSED * ends) & (np.sqrt(columns.dot(gap, gap)) > small[open_])
        if not wide.any():
            break
        open_, part = open_[wide], part.take(np.flatnonzero(wide))
        gap, f, ends = _miss(part, tension[:, open_])
        flexibility[:, open_] = f
    middle = tension.T.copy()
    return Hanging(middle, middle + load / 2, middle - load / 2, _full(_inverse(flexibility)))


def _ties(chord: Array, length: Array, EA: Array, load: Array) -> _Ties:
    pulled = load.T.copy()
    own = np.sqrt(columns.dot(pulled, pulled))
    light = own < WEIGHTLESS * EA
    if light.any():
        pulled = np.where(light, WEIGHTLESS * EA * np.array([[0.0], [0.0], [-1.0]]), pulled)
        own = np.where(light, WEIGHTLESS * EA, own)
    unit = pulled / own
    return _Ties(_off_line(chord.T.copy(), unit), length, EA, pulled, unit, own)


def _begin(ties: _Ties, warm: Array | None) -> tuple[Array, Array, Array, Array]:
    """Tensions to start from, the warm ones where they serve, and what `_miss` says of them."""
    if warm is None or not warm.any():
        tension = start(ties.chord, ties.length, ties.EA, ties.load)
        return tension, *_miss(ties, tension)
    size2 = columns.dot(warm, warm)
    known = size2 > 0
    tension = warm if known.all() else np.where(known, warm, ties.load + ties.chord * (ties.own / ties.length))
    gap, flexibility, ends = _miss(ties, tension)
    change = _times(_inverse(flexibility), gap)
    reach = ties.length + np.sqrt(columns.dot(ties.chord, ties.chord))
    serves = known & (columns.dot(gap, gap) < (NEARLY_CHORD * reach) ** 2) & (columns.dot(change, change) < TRUST**2 * size2)
    if not serves.all():
        fresh = np.flatnonzero(~serves)
        some = ties.take(fresh)
        tension[:, fresh] = start(some.chord, some.length, some.EA, some.load)
        gap[:, fresh], flexibility[:, fresh], ends[fresh] = _miss(some, tension[:, fresh])
    return tension, gap, flexibility, ends


def _damped(size: Array, tension: Array) -> Array:
    """Share of the step that keeps it below `NEWTON_REACH` of the tension."""
    return np.minimum(1.0, NEWTON_REACH * np.sqrt(columns.dot(tension, tension)) / np.maximum(size, NONZERO))


def _off_line(chord: Array, unit: Array) -> Array:
    """Chords (3, n) moved off the line of the load by `LEVEL_FLOOR` where they lie in it."""
    aside = chord - columns.dot(chord, unit) * unit
    floor = LEVEL_FLOOR * np.sqrt(columns.dot(chord, chord))
    short = np.sqrt(columns.dot(aside, aside)) < floor
    if not short.any():
        return chord
    axis = np.eye(3)[:, np.argmin(np.abs(unit), axis=0)]
    square = axis - columns.dot(axis, unit) * unit
    return np.where(short, chord + floor * square / np.sqrt(columns.dot(square, square)), chord)


def _miss(ties: _Ties, tension: Array) -> tuple[Array, Array, Array]:
    """r(T) - chord (3, n), F = dr/dT as its six entries (6, n) in the order 00 01 02 11 12 22, and |T_A| + |T_B|."""
    at_a, at_b = tension + ties.load / 2, tension - ties.load / 2
    a, b = np.sqrt(columns.dot(at_a, at_a)), np.sqrt(columns.dot(at_b, at_b))
    s = a + b
    par = columns.dot(tension, ties.unit) * ties.unit
    per = tension - par
    with_each_other = columns.dot(at_a, at_b)
    sure = a * b + np.abs(with_each_other)
    rest = np.where(with_each_other > 0, sure, ties.own**2 * columns.dot(per, per) / sure)
    rest = np.maximum(2 * rest / (s * s), FOLDED)
    phi = _atanh_ratio(ties.own / s, rest)
    gap = ties.length * (tension / ties.EA + (2 / s) * (par + phi * per)) - ties.chord
    n = at_a / a + at_b / b
    q = (ties.length / (s * s)) * (par + per / rest)
    along = (2 * ties.length / s * (1 - phi)) * ties.unit
    even = ties.length * (1 / ties.EA + 2 * phi / s)
    u = ties.unit
    f = np.empty((6, len(s)))
    for row, (i, j) in enumerate(SIX):
        f[row] = along[i] * u[j] - q[i] * n[j] - q[j] * n[i]
        if i == j:
            f[row] += even
    return gap, f, s


def _atanh_ratio(z: Array, rest: Array) -> Array:
    """atanh(z)/z with 1 - z^2 = rest given, so that z near one loses nothing."""
    small = z < SERIES_BELOW
    safe = np.where(small, 0.5, z)
    z2 = z * z
    series = 1 + z2 / 3 * (1 + 3 * z2 / 5 * (1 + 5 * z2 / 7))
    return np.where(small, series, np.log((1 + safe) ** 2 / np.where(small, 0.75, rest)) / (2 * safe))


def _inverse(m: Array) -> Array:
    """Inverse of symmetric positive definite matrices given and returned by their six entries (6, n), by cofactors."""
    a, b, c, d, e, f = m
    out = np.stack([d * f - e * e, c * e - b * f, b * e - c * d, a * f - c * c, b * c - a * e, a * d - b * b])
    return np.asarray(out / (a * out[0] + b * out[1] + c * out[2]))


def _times(m: Array, v: Array) -> Array:
    """Matrices (6, n) times vectors (3, n)."""
    x, y, z = v
    return np.stack([m[0] * x + m[1] * y + m[2] * z, m[1] * x + m[3] * y + m[4] * z, m[2] * x + m[4] * y + m[5] * z])


def _full(m: Array) -> Array:
    """(6, n) as (n, 3, 3)."""
    return np.ascontiguousarray(m[[0, 1, 2, 1, 3, 4, 2, 4, 5]].T).reshape(-1, 3, 3)


def length_rate(at_a: Array, at_b: Array, EA: Array) -> Array:
    """dr/dL0 (n, 3) at given mid tension and given load per length."""
    out: Array = np.zeros_like(at_a)
    for end in (at_a, at_b):
        out += 0.5 * (1 / EA + 1 / np.sqrt(dot(end, end)))[:, None] * end
    return out


def pull_straight(chord: Array, length: Array, EA: Array) -> Hanging:
    """Weightless tension-only cables: zero tension and stiffness where the unstressed length exceeds the chord.

    Arguments as for `hang`.
    """
    c = np.sqrt(dot(chord, chord))
    e = chord / c[:, None]
    taut = length <= c * (1 + SLACK_BELOW)
    size = EA * np.maximum(c / length - 1, 0.0)
    ee = outer(e, e)
    k = (np.where(taut, EA / length, 0.0))[:, None, None] * ee + (size / c)[:, None, None] * (np.eye(3) - ee)
    tension = size[:, None] * e
    return Hanging(tension, tension, tension, k)


@dataclass(frozen=True)
class Shape:
    """Cables as they hang, in closed form.

    tension, total (n, 3) [N] at mid-length, and the whole load; length (n,) [m]; EA (n,) [N]; unit (n, 3) along the load; load (n,) [N/m]
    level (n, 3) [N] T_per, across (n,) [N] p = |T_per|; straight (n,) where the load is nothing against the tension
    """

    tension: Array
    total: Array
    length: Array
    EA: Array
    unit: Array
    load: Array
    across: Array
    level: Array
    straight: NDArray[np.bool_]


def shape(tension: Array, total: Array, length: Array, EA: Array) -> Shape:
    """Shape of cables (n, ...) from the tension at mid-length and the whole load, both [N]; lengths [m] and stiffness [N]."""
    size, pull = np.sqrt(dot(total, total)), np.sqrt(dot(tension, tension))
    straight = size <= STRAIGHT_BELOW * pull
    unit = np.where(straight[:, None], np.array([0.0, 0, -1]), total / np.maximum(size, NONZERO)[:, None])
    level = tension - dot(tension, unit)[:, None] * unit
    across = np.maximum(np.sqrt(dot(level, level)), LEVEL_FLOOR * np.maximum(size, NONZERO))
    return Shape(tension, total, length, EA, unit, np.where(straight, 1.0, size / length), across, level, straight)


def _angle(s: Shape, fraction: Array) -> tuple[Array, Array]:
    """u = asinh(T_par / p) and |T| at unstressed fractions -1/2 ... 1/2: (n, point)."""
    along = dot(s.tension, s.unit)[:, None] - (s.load * s.length)[:, None] * fraction
    return np.arcsinh(along / s.across[:, None]), np.hypot(along, s.across[:, None])


def curve(s: Shape, points: int) -> Array:
    """Positions relative to end A along the cables, (n, points, 3), evenly spaced in unstressed length, end A first.

    In u the catenary is r' = T (1/EA + 1/|T|), |T| = p cosh u: its integrals are |T|/w along the load and p u/w across it.
    """
    f = np.linspace(-0.5, 0.5, points)[None, :]
    per = s.length / s.EA
    elastic = per[:, None, None] * ((f + 0.5)[..., None] * s.tension[:, None] - 0.5 * (f**2 - 0.25)[..., None] * s.total[:, None])
    u, size = _angle(s, f)
    fall = ((size[:, :1] - size) / s.load[:, None])[..., None] * s.unit[:, None]
    away = ((u[:, :1] - u) / s.load[:, None])[..., None] * s.level[:, None]
    pull = np.maximum(np.sqrt(dot(s.tension, s.tension)), NONZERO)
    direct = ((f + 0.5) * s.length[:, None])[..., None] * (s.tension / pull[:, None])[:, None]
    return np.asarray(elastic + np.where(s.straight[:, None, None], direct, fall + away))


def centroid(s: Shape) -> Array:
    """Mean position relative to end A over the unstressed length (n, 3): where the whole load acts."""
    ends = np.array([[-0.5, 0.5]])
    u, size = _angle(s, ends)
    p, w, length = s.across, s.load, s.length
    # integrals over s of |T| and of u, by ds = -(p/w) cosh u du
    of_size = -(p * p / (2 * w)) * ((u[:, 1] + np.sinh(u[:, 1]) * np.cosh(u[:, 1])) - (u[:, 0] + np.sinh(u[:, 0]) * np.cosh(u[:, 0])))
    of_u = -(p / w) * ((u[:, 1] * np.sinh(u[:, 1]) - np.cosh(u[:, 1])) - (u[:, 0] * np.sinh(u[:, 0]) - np.cosh(u[:, 0])))
    fall = ((size[:, 0] - of_size / length) / w)[:, None] * s.unit
    away = ((u[:, 0] - of_u / length) / w)[:, None] * s.level
    elastic = (length / s.EA)[:, None] * (0.5 * s.tension + s.total / 12)
    pull = np.maximum(np.sqrt(dot(s.tension, s.tension)), NONZERO)
    direct = 0.5 * length[:, None] * s.tension / pull[:, None]
    return np.asarray(elastic + np.where(s.straight[:, None], direct, fall + away))
