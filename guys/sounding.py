"""What tells the tension of a hanging cable without a gauge: how long a pulse or a swing takes, how far it sags, where it points.

A cable of unstressed length L0 hangs between fixed ends in still air under its own weight w = m g per unstressed length.  With T(s) its
tension, lambda = 1 + T/EA its stretch, c the chord, l its level part:

    pulse   a blow runs along it at sqrt(T / (m lambda)) per unstressed length; there and back it takes  t = 2 int sqrt(m lambda / T) ds
    swing   sideways, square to the plane it hangs in, it moves by  m y'' = d/ds (T/lambda dy/ds)  exactly, whatever its sag; the
            period of the slowest swing is found by Ritz with the sines of a taut string
    sag     drop below the chord's middle, upright
    sight   the tangent at the `to` end passes so far below the `from` end, upright.  Moments about the `from` end: the pull at the
            other end times its lever is the weight times its own, so  T_A = W C sqrt(l^2 + (h - I)^2) / (l I),  C that of the weight
    gauge   the tension itself

For a taut cable both times are 2 c sqrt(m/T), so that n of them give T = 4 m c^2 n^2 / t^2 = w c^2 n^2 / ((g/4) t^2); the sag is
w c^2 / (8 T) and the sight four times that.  In its own plane a sagging cable swings faster, for it must stretch: by 1 + 8 L2 / pi^4 in the
square of the frequency for small L2 = (w l)^2 EA / T^3, up to 4, where another shape is slower; so it is to be swung sideways.  Clamps,
bending stiffness and what hangs on the cable are not in it.

Tension is that at the `to` end.  Sources: Irvine, Cable Structures (1981), chapter 3, for L2 (from memory); the rest is derived here and
tested against the eigenvalues of a chain of masses, and against readings printed by the trade.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from typing import Literal, get_args

import numpy as np
from numpy.typing import NDArray

from guys import cable
from guys.constants import NONZERO, STANDARD_GRAVITY
from guys.rotation import dot

Array = NDArray[np.float64]
Way = Literal["pulse", "swing", "sag", "sight", "gauge"]
WAYS: tuple[Way, ...] = get_args(Way)
TIMED: tuple[Way, ...] = ("pulse", "swing")

POINTS, WEIGHTS = np.polynomial.legendre.leggauss(24)
SINES = 10
"""Sines of a swing: the tension changes along a cable by its weight, so few suffice (measured: two more change 1e-12 of the period)."""
ROUNDS = 60
MET = 1e-10
"""Relative difference of a tension or a reading that counts as met."""
REACH = 0.7
"""Greatest change of a logarithm in one round."""
SHORTER = 0.1
"""Greatest change of a length in one round, of itself; by so much it is shortened where the tension no longer falls with it ..."""
FLAT = 1e-6
"""... that is where the logarithms change by less than this against each other."""
LEAST = 0.3
"""Tension a search starts from at least, of the weight: below it no cable hangs on the tauter branch (a level one from 0.8 up)."""
STEEP = 0.05
"""Level part of the chord, of its length, below which neither sag nor sight is told: the cable hangs beside the spar."""
SLOPE = 1e-4
"""Relative step of tension for the slope of a reading."""


@dataclass(frozen=True)
class Span:
    """Cables between fixed ends.

    chord (cable, 3) [m] from the `to` end;  EA (cable,) [N];  mass (cable,) [kg/m] per unstressed length
    """

    chord: Array
    EA: Array
    mass: Array

    @property
    def level(self) -> Array:
        """(cable,) [m] level part of the chord."""
        return np.hypot(self.chord[:, 0], self.chord[:, 1])


@dataclass(frozen=True)
class Hung:
    """Cables of a span at one tension each; NaN where the cable cannot hang at that tension.

    length (cable,) [m] unstressed;  middle, weight (cable, 3) [N] tension at mid-length and whole weight
    """

    span: Span
    length: Array
    middle: Array
    weight: Array


def hung(span: Span, tension: Array) -> Hung:
    """Cables hung so that the `to` end pulls with `tension` (cable,) [N], on the tauter branch."""
    c, w = np.sqrt(dot(span.chord, span.chord)), span.mass * STANDARD_GRAVITY
    tension = np.where(tension > 0, tension, np.nan)
    known = np.isfinite(tension)
    aim = np.where(known, tension, np.maximum(w * c, 1.0))
    length = c * (1 + (w * span.level / np.maximum(aim, LEAST * w * c)) ** 2 / 24) / (1 + aim / span.EA)
    for _ in range(ROUNDS):
        weight = _weight(w, length)
        found = cable.hang(span.chord, length, span.EA, weight)
        pull = np.sqrt(dot(found.at_a, found.at_a))
        longer = cable.length_rate(found.at_a, found.at_b, span.EA)
        by_length = weight / length[:, None] / 2 - (found.stiffness @ longer[..., None])[..., 0]
        slope = dot(found.at_a, by_length) / pull
        off = np.log(aim / pull)
        met = np.abs(off) < MET
        if met.all():
            break
        taut = slope < -FLAT * pull / length
        step = np.clip(off, -REACH, REACH) * pull / np.where(taut, slope, -np.inf)
        length = length + np.where(met, 0.0, np.where(taut, np.clip(step, -SHORTER * length, SHORTER * length), -SHORTER * length))
    good = known & (np.abs(off) < 1e-9) & (slope < 0)
    middle = np.where(good[:, None], found.tension, np.nan)
    return Hung(span, np.where(good, length, np.nan), middle, weight)


def _weight(w: Array, length: Array) -> Array:
    return np.asarray((w * length)[:, None] * np.array([0.0, 0.0, -1.0]))


def _along(h: Hung, part: Array) -> tuple[Array, Array]:
    """Tension vectors (cable, point, 3) and their sizes at parts (cable or 1, point) of the unstressed length, 0 at the `to` end."""
    vector = h.middle[:, None] - (part[..., None] - 0.5) * h.weight[:, None]
    return vector, np.sqrt(dot(vector, vector))


def _pulse(h: Hung) -> Array:
    part = 0.5 * (POINTS[None] + 1)
    _, size = _along(h, part)
    stretch = 1 + size / h.span.EA[:, None]
    slowness = np.sqrt(h.span.mass[:, None] * stretch / size)
    return np.asarray(h.length * (slowness * WEIGHTS).sum(axis=1))


def _swing(h: Hung) -> Array:
    part = 0.5 * (POINTS[None] + 1)
    _, size = _along(h, part)
    n = math.pi * np.arange(1, SINES + 1)
    slopes = n[:, None] * np.cos(n[:, None] * part)
    stiffness = np.einsum("cp,jp,kp->cjk", size / (1 + size / h.span.EA[:, None]) * WEIGHTS / 2, slopes, slopes) / h.length[:, None, None]
    known = np.isfinite(h.length)
    least = np.full(len(h.length), np.nan)
    least[known] = np.linalg.eigvalsh(stiffness[known])[:, 0]
    return np.asarray(2 * math.pi * np.sqrt(0.5 * h.span.mass * h.length / least))


def _sag(h: Hung) -> Array:
    half = 0.5 * h.span.level
    part = np.full(len(half), 0.5)
    unit = h.span.chord[:, :2] / np.maximum(h.span.level, NONZERO)[:, None]
    for _ in range(8):
        there = _place(h, part)
        vector, size = _along(h, part[:, None])
        rate = h.length * (1 / h.span.EA + 1 / size[:, 0]) * (vector[:, 0, :2] * unit).sum(axis=1)
        part = np.clip(part + (half - (there[:, :2] * unit).sum(axis=1)) / rate, 0.0, 1.0)
    return np.where(_beside(h.span), np.nan, 0.5 * h.span.chord[:, 2] - _place(h, part)[:, 2])


def _place(h: Hung, part: Array) -> Array:
    """(cable, 3) [m] from the `to` end at parts (cable,) of the unstressed length."""
    vector, size = _along(h, part[:, None] * 0.5 * (POINTS[None] + 1))
    run = ((1 / h.span.EA[:, None] + 1 / size) * WEIGHTS)[..., None] * vector
    return np.asarray((h.length * part / 2)[:, None] * run.sum(axis=1))


def _sight(h: Hung) -> Array:
    at_a = h.middle + h.weight / 2
    flat = np.hypot(at_a[:, 0], at_a[:, 1])
    return np.where(_beside(h.span), np.nan, h.span.chord[:, 2] - h.span.level * at_a[:, 2] / np.maximum(flat, NONZERO))


def _gauge(h: Hung) -> Array:
    at_a = h.middle + h.weight / 2
    return np.sqrt(dot(at_a, at_a))


def _beside(span: Span) -> NDArray[np.bool_]:
    return np.asarray(span.level < STEEP * np.sqrt(dot(span.chord, span.chord)))


_READ: dict[Way, Callable[[Hung], Array]] = {"pulse": _pulse, "swing": _swing, "sag": _sag, "sight": _sight, "gauge": _gauge}


def reading(way: Way, span: Span, tension: Array) -> Array:
    """(cable,) [s] of one return or one swing, [m] or [N]: what is read at `tension` (cable,) [N]; NaN where there is nothing to read."""
    weightless = (span.mass <= 0) & (way != "gauge")
    safe = Span(span.chord, span.EA, np.where(span.mass > 0, span.mass, 1.0))
    return np.where(weightless, np.nan, _READ[way](hung(safe, tension)))


def slope(way: Way, span: Span, tension: Array) -> Array:
    """(cable,) change of the logarithm of a reading with that of the tension: -1/2 of times, -1 of sag and sight where taut."""
    less, more = (np.log(reading(way, span, tension * (1 + side * SLOPE))) for side in (-1, 1))
    return np.asarray((more - less) / (math.log1p(SLOPE) - math.log1p(-SLOPE)))


def tension(way: Way, span: Span, read: Array) -> Array:
    """(cable,) [N] at the `to` end from readings (cable,), a time for one return or swing; NaN where no tension gives that reading."""
    if way == "gauge":
        return np.where(np.isfinite(_gauge(hung(span, read))), read, np.nan)
    c2, w = dot(span.chord, span.chord), span.mass * STANDARD_GRAVITY
    taut = {"pulse": 4 * span.mass * c2 / read**2, "swing": 4 * span.mass * c2 / read**2, "sag": w * c2 / (8 * read)}
    log = np.log(taut.get(way, w * c2 / (2 * read)))
    for _ in range(ROUNDS):
        now = np.exp(log)
        off = np.log(reading(way, span, now) / read)
        if np.all((np.abs(off) < 10 * MET) | np.isnan(off)):
            break
        log = log - np.clip(off / slope(way, span, now), -REACH, REACH)
    return np.where(np.abs(off) < 1e-9, np.exp(log), np.nan)


def share_of_error(way: Way, span: Span, pull: Array, read_error: Array, mass_error: float) -> Array:
    """(cable,) error of a tension, of itself: that of the reading (absolute, of one return or swing) and of the mass, root of squares.

    Tension goes with the mass of the rope wherever weight or inertia tells it.
    """
    read = reading(way, span, pull)
    by_reading = read_error / read / slope(way, span, pull)
    return np.hypot(by_reading, 0.0 if way == "gauge" else mass_error)


def plane_stiffening(span: Span, pull: Array) -> Array:
    """(cable,) by how much of itself, at most, a swing in the cable's own plane tells too much tension."""
    squared = (span.mass * STANDARD_GRAVITY * span.level) ** 2 * span.EA / pull**3
    return np.asarray(np.minimum(8 * squared / math.pi**4, 3.0))
