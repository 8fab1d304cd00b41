"""D5.  Columns with elastic supports: Timoshenko & Gere, Theory of Elastic Stability (1961), from memory, and closed forms."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from tests.published.compare import Allowance, Row, published
from tests.published.masts import STILL, TWELVE, critical, cross_stays, load, spar, whole
from tests.published.test_euler import EI, LENGTH, column

TOP_SPRING = {1: "3.2734906", 3: "4.8560457", 10: "9.9563427", 30: "17.5580272", 100: "19.7034546"}
"""s = k L^3/EI of the spring at the head of a cantilever: P L^2/EI."""


@published("D5", "MEMORY")
def test_cantilever_with_a_spring_at_its_head() -> Iterator[Row]:
    """Fixed spar whose head is held by level stays of s EI/L^3: tan u = u - u^3/s, P = u^2 EI/L^2.

    Source: Timoshenko & Gere, the equation from memory, its roots confirmed by Ritz with 24 Legendre terms to eight digits. The spring is
    four straight level stays. Allowed: half a unit of the last digit, 6e-5 for twelve elements.
    """
    for s, printed in TOP_SPRING.items():
        stays = cross_stays(f"{LENGTH} m", s * EI / LENGTH**3)
        expected = float(printed)
        ours = critical(lambda p, stays=stays: column("fixed", p, stays), 0.9 * expected, 1.1 * expected)
        yield Row(f"s = {s}: P L²/EI", "-", printed, ours, TWELVE)


@published("D5 pinned", "EXACT")
def test_pinned_column_with_a_spring_at_its_head() -> Iterator[Row]:
    """Pinned spar with a spring k at its head: P = k L as long as that is below Euler's load.

    Source: moments about the foot of the straight column.  Allowed: half a unit of the last digit and 1e-6, the shortening of the spar.
    """
    for s in (1.0, 5.0, 9.0):
        stays = cross_stays(f"{LENGTH} m", s * EI / LENGTH**3)
        ours = critical(lambda p, stays=stays: column("pinned", p, stays), 0.8 * s, 1.15 * s)
        yield Row(f"k L³/EI = {s:g}: P L²/EI", "-", f"{s:.6f}", ours, Allowance(1e-6, "shortening of the spar", share=True))


@published("D5 rigid", "EXACT")
def test_rigid_mast_with_springs() -> Iterator[Row]:
    """Rigid pinned mast of 30 m with springs of 20 and 8 kN/m at 12 and 26 m, dead load at its head: P = sum k h^2/H.

    Source: moments about the foot.  Allowed: half a unit of the last digit, 1e-9 of rounding.
    """
    springs = ((12.0, 20e3), (26.0, 8e3))
    height = 30.0
    exact = sum(k * h**2 for h, k in springs) / height
    stays = "".join(_renamed(cross_stays(f"{h} m", k), f"at {h:g}") for h, k in springs).replace('[analysis]\ncable = "straight"\n', "", 1)

    def loaded(p: float) -> str:
        return whole(spar(f"{height} m") + load(f"{height} m", up=f"{-p!r} N"), stays, STILL)

    ours = critical(loaded, 0.5 * exact, 1.5 * exact)
    yield Row("load at which it falls", "N", f"{exact:.4f}", ours, Allowance(1e-9, "rounding", share=True))


def _renamed(stays: str, level: str) -> str:
    """Stays whose anchors, cables and rope carry the name of their level."""
    for name in "nesw":
        stays = stays.replace(f'"{name}"', f'"{name} {level}"')
    return stays.replace('"stay"', f'"stay {level}"').replace("[rope.stay]", f'[rope."stay {level}"]')


def test_limits_of_the_spring() -> None:
    """The table lies between the cantilever without a spring and with its head held."""
    values = [float(v) for v in TOP_SPRING.values()]
    assert np.pi**2 / 4 < min(values)
    assert max(values) < 20.1907286
