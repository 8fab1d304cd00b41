"""Pulse, swing, sag and sight against a chain of masses, statics of the whole cable, and taut-string formulas; and back to the tension."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.linalg import eigh, eigh_tridiagonal
from scipy.optimize import root

from guys import sounding
from guys.constants import STANDARD_GRAVITY
from guys.sounding import WAYS, Span, Way

LINKS = 300
CHAIN = 2 * (math.pi / LINKS) ** 2 / 12
"""A chain of n masses swings slower than the cable by (pi/n)^2 / 24 of its frequency; twice that of its square, and as much again."""


def span(level: float = 12.0, rise: float = 18.0, EA: float = 5e6, mass: float = 0.31) -> Span:
    return Span(np.array([[0.6 * level, 0.8 * level, rise]]), np.array([EA]), np.array([mass]))


def one(array: np.ndarray) -> float:
    return float(array[0])


class Chain:
    """LINKS elastic links between the ends of a span, masses at their joints: its rest is found and its springs are written down here,
    without anything of `guys.cable`."""

    def __init__(self, s: Span, length: float, tension: float) -> None:
        self.ds, self.EA, self.mass = length / LINKS, one(s.EA), one(s.mass)
        chord = s.chord[0]
        weight = np.array([0.0, 0.0, self.mass * STANDARD_GRAVITY * self.ds])

        def links(first: np.ndarray) -> np.ndarray:
            """Tension vectors, the first half a link's weight above the end's own."""
            return first + np.arange(LINKS)[:, None] * weight

        def run(first: np.ndarray) -> np.ndarray:
            pull = links(first)
            size = np.linalg.norm(pull, axis=1, keepdims=True)
            return self.ds * (1 + size / self.EA) * pull / size

        found = root(lambda first: run(first).sum(axis=0) - chord, tension * chord / np.linalg.norm(chord), tol=1e-12)
        self.pull, self.run = links(found.x), run(found.x)
        self.end = found.x - weight / 2
        self.place = np.vstack([np.zeros(3), np.cumsum(self.run, axis=0)])

    def sideways(self) -> float:
        """Least angular frequency square to the plane it hangs in."""
        k = np.linalg.norm(self.pull, axis=1) / np.linalg.norm(self.run, axis=1) / (self.mass * self.ds)
        return math.sqrt(eigh_tridiagonal(k[:-1] + k[1:], -k[1:-1], select="i", select_range=(0, 0))[0][0])

    def in_plane(self) -> float:
        """Least angular frequency in that plane."""
        n = LINKS - 1
        k = np.zeros((3 * (n + 2), 3 * (n + 2)))
        for i, (pull, run) in enumerate(zip(self.pull, self.run, strict=True)):
            e, stretched, size = run / np.linalg.norm(run), np.linalg.norm(run), np.linalg.norm(pull)
            link = self.EA / self.ds * np.outer(e, e) + size / stretched * (np.eye(3) - np.outer(e, e))
            for a, b, sign in ((i, i, 1), (i + 1, i + 1, 1), (i, i + 1, -1), (i + 1, i, -1)):
                k[3 * a : 3 * a + 3, 3 * b : 3 * b + 3] += sign * link
        axis = np.array([self.place[-1, 0], self.place[-1, 1], 0.0])
        axis /= np.linalg.norm(axis)
        across = np.kron(np.eye(n), np.column_stack([axis, [0.0, 0.0, 1.0]]))
        inner = across.T @ k[3:-3, 3:-3] @ across
        return math.sqrt(eigh(inner, eigvals_only=True, subset_by_index=[0, 0])[0] / (self.mass * self.ds))


@pytest.mark.parametrize(("tension", "level", "rise", "EA", "mass"), [
    (3200.0, 12.0, 18.0, 5e6, 0.31), (400.0, 30.0, 2.0, 1e6, 0.5), (900.0, 5.0, 40.0, 2e5, 0.8), (250.0, 40.0, -12.0, 3e6, 0.4)
])  # fmt: skip
def test_a_chain_of_masses_has_the_same_end_tension_sag_sight_and_swing(
    tension: float, level: float, rise: float, EA: float, mass: float
) -> None:
    s, pull = span(level, rise, EA, mass), np.array([tension])
    hung = sounding.hung(s, pull)
    chain = Chain(s, one(hung.length), tension)
    assert np.linalg.norm(chain.end) == pytest.approx(tension, rel=CHAIN)
    period = one(sounding.reading("swing", s, pull))
    assert period == pytest.approx(2 * math.pi / chain.sideways(), rel=CHAIN)
    along = chain.place[:, :2] @ (s.chord[0, :2] / level)
    drop = rise / 2 - np.interp(level / 2, along, chain.place[:, 2])
    on_arc = (math.pi / LINKS) ** 2
    assert one(sounding.reading("sag", s, pull)) == pytest.approx(drop, rel=on_arc)
    lever = along[:-1] + np.diff(along) / 2
    centre = level - lever.mean()
    weight = mass * STANDARD_GRAVITY * one(hung.length)
    below = one(sounding.reading("sight", s, pull))
    about_the_top = weight * centre * math.hypot(level, rise - below) / (level * below)
    assert about_the_top == pytest.approx(tension, rel=CHAIN)


def test_a_pulse_comes_back_after_the_links_have_passed_it_on_one_by_one() -> None:
    s, pull = span(30.0, 2.0, 1e6, 0.5), np.array([300.0])
    chain = Chain(s, one(sounding.hung(s, pull).length), 300.0)
    size = np.linalg.norm(chain.pull, axis=1)
    there = (chain.ds * np.sqrt(chain.mass * (1 + size / chain.EA) / size)).sum()
    assert one(sounding.reading("pulse", s, pull)) == pytest.approx(2 * there, rel=CHAIN)


@pytest.mark.parametrize("tension", [3000.0, 2000.0, 1600.0])
def test_swung_in_its_own_plane_a_cable_tells_too_much(tension: float) -> None:
    """Irvine's small-sag correction against the chain; the next term of its series is below a fifth of it here."""
    s, pull = span(25.0, 5.0, 4e6, 0.3), np.array([tension])
    chain = Chain(s, one(sounding.hung(s, pull).length), tension)
    more = (chain.in_plane() / chain.sideways()) ** 2 - 1
    assert more == pytest.approx(one(sounding.plane_stiffening(s, pull)), rel=0.2)
    assert more > 0.05


STRAIGHT = 2e-3
"""Weight over tension of the cable below, 22 m of 3 N/m against 30 kN: what the taut-string formulas leave out is of that order."""


def test_taut_strings() -> None:
    """T = 4 m c^2 / t^2, d = w c^2 / 8 T and four times that: closed forms of a string without sag."""
    s, pull = span(EA=1e9), np.array([30e3])
    c2, w = float((s.chord**2).sum()), one(s.mass) * STANDARD_GRAVITY
    for way in ("pulse", "swing"):
        assert 4 * one(s.mass) * c2 / one(sounding.reading(way, s, pull)) ** 2 == pytest.approx(30e3, rel=4 * STRAIGHT)
    assert one(sounding.reading("sag", s, pull)) == pytest.approx(w * c2 / (8 * 30e3), rel=4 * STRAIGHT)
    assert one(sounding.reading("sight", s, pull)) == pytest.approx(w * c2 / (2 * 30e3), rel=4 * STRAIGHT)
    for way, expected in (("pulse", -0.5), ("swing", -0.5), ("sag", -1.0), ("sight", -1.0), ("gauge", 1.0)):
        assert one(sounding.slope(way, s, pull)) == pytest.approx(expected, abs=4 * STRAIGHT)


@settings(max_examples=30, deadline=None)
@given(
    way=st.sampled_from(WAYS), level=st.floats(3.0, 80.0), rise=st.floats(-20.0, 90.0), EA=st.floats(1e5, 5e7), mass=st.floats(0.02, 3.0),
    times=st.floats(1.5, 60.0),
)  # fmt: skip
def test_tension_to_reading_and_back(way: Way, level: float, rise: float, EA: float, mass: float, times: float) -> None:
    """Tensions from one and a half times the cable's weight, where it hangs deep, up."""
    s = span(level, rise, EA, mass)
    pull = np.array([times * mass * STANDARD_GRAVITY * float(np.linalg.norm(s.chord))])
    pull = np.minimum(pull, EA / 50)
    read = sounding.reading(way, s, pull)
    if np.isnan(read[0]):
        return
    assert one(sounding.tension(way, s, read)) == pytest.approx(one(pull), rel=1e-7)


def test_errors_are_what_a_reading_off_by_the_error_would_tell() -> None:
    """A reading moved by its error, and a rope heavier by its error: the tension told moves by the share given, to second order."""
    s, pull, small = span(), np.array([3200.0]), 1e-3
    for way in WAYS:
        read = sounding.reading(way, s, pull)
        told = sounding.tension(way, s, read * (1 + small))
        share = one(sounding.share_of_error(way, s, pull, read * small, 0.0))
        assert abs(one(told) / 3200.0 - 1) == pytest.approx(share, rel=10 * small)
        heavier = Span(s.chord, s.EA, s.mass * (1 + small))
        by_mass = abs(one(sounding.tension(way, heavier, read)) / 3200.0 - 1)
        assert by_mass == pytest.approx(one(sounding.share_of_error(way, s, pull, 0 * read, small)), rel=0.02, abs=1e-9)


def test_what_tells_nothing() -> None:
    upright, s, pull = span(level=0.1), span(), np.array([3000.0])
    assert np.isnan(sounding.reading("sag", upright, pull))
    assert np.isnan(sounding.reading("sight", upright, pull))
    assert np.isfinite(sounding.reading("swing", upright, pull))
    weightless = Span(s.chord, s.EA, np.zeros(1))
    assert np.isnan(sounding.reading("swing", weightless, pull))
    assert one(sounding.reading("gauge", weightless, pull)) == pytest.approx(3000.0)


def test_a_tension_below_what_the_weight_gives_is_not_told() -> None:
    s = span(30.0, 0.0)
    weight = one(s.mass) * STANDARD_GRAVITY * 30.0
    assert np.isnan(sounding.tension("gauge", s, np.array([0.2 * weight])))
    assert np.isnan(sounding.tension("swing", s, np.array([60.0])))
