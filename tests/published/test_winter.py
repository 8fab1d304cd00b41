"""D4.  The stiffness a brace must have: Winter, Trans. ASCE 125 (1960); Timoshenko & Gere, Theory of Elastic Stability (1961)."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from tests.published.compare import Row, published
from tests.published.masts import STILL, TWELVE, critical, cross_stays, load, spar, whole
from tests.published.test_elastic_supports import _renamed
from tests.published.test_euler import EI, HEAD_HELD, LENGTH

MIDDLE = {0: "1.00000", 4: "1.79897", 8: "2.57065", 12: "3.30750", 16: "4.00000"}
"""k L^3/(pi^2 EI) of a brace in the middle: P over Euler's load of the whole column.  At 16, 2 P/(L/2), it is as if held there."""


def braced(pushed: float, stiffness: float, at: tuple[float, ...]) -> str:
    """A pinned column, its head held, under P L^2/EI = pushed, with braces of a stiffness [N/m] at some shares of its height."""
    section = f'mass = "0 kg/m"\nEA = "1e10 N"\nEI = "{EI} N m2"\nGJ = "{EI} N m2"'
    push = load(f"{LENGTH} m", up=f"{-pushed * EI / LENGTH**2!r} N")
    stays = [_renamed(cross_stays(f"{LENGTH} m", HEAD_HELD * EI / LENGTH**3), "head")]
    stays += [_renamed(cross_stays(f"{share * LENGTH!r} m", stiffness), f"brace {k}") for k, share in enumerate(at) if stiffness]
    straight = '[analysis]\ncable = "straight"\n'
    every = "".join(stays).replace(straight, "") + straight
    return whole(spar(f"{LENGTH} m", rigid=False, section=section) + push, every, STILL)


@published("D4", "EXACT")
def test_a_brace_in_the_middle() -> Iterator[Row]:
    """Pinned column with a spring in the middle: P grows with the brace until, at the ideal 2 P/(L/2), it buckles in two halves.

    Source: Winter for the ideal stiffness; below it the roots of 1 + (k L^3/48EI) 3 (tan u - u)/u^3 = 0, P = (2u/L)^2 EI, the deflection of
    a pushed span under a load in its middle. Whole scenarios, the brace four level stays. Allowed: half a unit of the last digit, 6e-5 for
    twelve elements to a span.
    """
    for ratio, printed in MIDDLE.items():
        expected = float(printed) * np.pi**2
        stiffness = float(ratio * np.pi**2 * EI / LENGTH**3)
        ours = critical(lambda p, k=stiffness: braced(p, k, (0.5,)), 0.93 * expected, 1.03 * expected) / np.pi**2
        yield Row(f"k L³/(π² EI) = {ratio}: P over Euler's", "-", printed, ours, TWELVE)


@published("D4 bays", "MEMORY")
def test_ideal_stiffness_of_equal_bays() -> Iterator[Row]:
    """Columns of 2, 3 and 4 equal bays with braces of the ideal stiffness k = 2 (1 + cos pi/n) P/b: P is Euler's load of one bay.

    Source: Winter, and Timoshenko & Gere, from memory: 2, 3, 3.414 P/b; exact columns give the same. Whole scenarios. Allowed: 1.2e-4, of
    which half for twelve elements to a span and half because the braces are stays that share the push a little.
    """
    allowed = TWELVE.__class__(1.2e-4, TWELVE.reason, share=True)
    for bays in (2, 3, 4):
        bay, euler = LENGTH / bays, (bays * np.pi) ** 2
        stiffness = float(2 * (1 + np.cos(np.pi / bays)) * euler * EI / LENGTH**2 / bay)
        at = tuple(k / bays for k in range(1, bays))
        ours = critical(lambda p, k=stiffness, at=at: braced(p, k, at), 0.9 * euler, 1.04 * euler) / euler
        yield Row(f"{bays} bays: P over Euler's of a bay", "-", "1.0000", ours, allowed)


def test_the_values_are_roots_of_their_equation() -> None:
    for ratio, printed in MIDDLE.items():
        u = 0.5 * np.pi * np.sqrt(float(printed))
        if 0 < ratio < 16:
            assert abs(1 + ratio * np.pi**2 / 16 * (np.tan(u) - u) / u**3) < 3e-5 * ratio
