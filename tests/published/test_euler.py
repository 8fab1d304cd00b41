"""D1.  Euler's column (1744, 1759): critical load times L^2/EI for six ways to hold the ends; standard in every text on stability."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from functools import cache

import numpy as np

from guys import parse_scenario, solve
from tests.published import rods
from tests.published.compare import Allowance, Row, fourth_order, published
from tests.published.masts import STILL, TWELVE, critical, cross_stays, load, spar, whole

MESHES = (4, 8, 16)
SQUARE = np.pi**2
ENDS = {
    "pinned-pinned": ("9.8696044", (0, 1), (1,)),
    "fixed-free": ("2.4674011", (0, 1, 5), ()),
    "fixed-pinned": ("20.1907286", (0, 1, 5), (1,)),
    "fixed-fixed": ("39.4784176", (0, 1, 5), (1, 5)),
    "fixed-guided": ("9.8696044", (0, 1, 5), (5,)),
    "pinned-guided": ("2.4674011", (0, 1), (5,)),
}
"""P L^2/EI; directions held at the foot and at the head (0 along, 1 across, 5 the turn)."""
STIFF = 1e8
"""EA L^2/EI: shortening changes the load by P/EA, 4e-7 of it at most."""
LENGTH, EI = 20.0, 1e5
HEAD_HELD = 1e6
"""Stiffness of the stays that stand for a held head, times EI/L^3."""


@cache
def _chain(ends: str, elements: int) -> float:
    printed, foot, head = ENDS[ends]
    rod = rods.straight(1.0, elements, rods.Section(STIFF, 1.0, 1.0, 1.0))
    held = np.tile(np.array(rods.IN_PLANE_XY), (elements + 1, 1))
    held[0, list(foot)], held[-1, list(head)] = True, True
    force = rod.force.copy()
    force[-1, 0] = -1.0
    expected = float(printed)
    return rods.critical_load(replace(rod, held=held, force=force), 0.7 * expected, 1.2 * expected)


@published("D1", "EXACT")
def test_critical_loads() -> Iterator[Row]:
    """Straight rods of the program's beam elements, six ways to hold their ends.

    Source: Euler; pi^2, pi^2/4, the root of tan u = u squared, 4 pi^2. Ours is extrapolated from 4, 8 and 16 elements. Allowed: half a
    unit of the last digit, 2e-6 for the shortening and for what the mesh leaves (0.07 % on 4 elements at the most); a quarter of the
    order.
    """
    left = Allowance(2e-6, "shortening, and what two extrapolations leave of the mesh error", share=True)
    for ends, (printed, _, _) in ENDS.items():
        values = [_chain(ends, m) for m in MESHES]
        limit = (16 * values[2] - values[1]) / 15
        yield Row(f"P L²/EI, {ends}", "-", printed, limit, left)
        yield fourth_order(ends, rods.refined(values).order)


def column(base: str, pushed: float, head: str) -> str:
    """Scenario of a column under P L^2/EI = pushed."""
    section = f'mass = "0 kg/m"\nEA = "1e10 N"\nEI = "{EI} N m2"\nGJ = "{EI} N m2"'
    push = load(f"{LENGTH} m", up=f"{-pushed * EI / LENGTH**2!r} N")
    return whole(spar(f"{LENGTH} m", base, rigid=False, section=section) + push, head, STILL)


@published("D1 scenario", "EXACT")
def test_columns_as_scenarios() -> Iterator[Row]:
    """The three that a scenario can say: a spar fixed or pinned at its foot, its head free or held by four level stays.

    Source: Euler.  Allowed: half a unit of the last digit, 6e-5 for twelve elements to a span and stays of a million EI/L^3.
    """
    stays = cross_stays(f"{LENGTH} m", HEAD_HELD * EI / LENGTH**3)
    for base, head, printed in (("fixed", "", "2.4674011"), ("pinned", stays, "9.8696044"), ("fixed", stays, "20.1907286")):
        expected = float(printed)
        ours = critical(lambda p, base=base, head=head: column(base, p, head), 0.9 * expected, 1.1 * expected)
        yield Row(f"P L²/EI, {base}-{'held' if head else 'free'}", "-", printed, ours, TWELVE)


def test_verdict_on_either_side() -> None:
    """A fixed-free column a per cent below its critical load stands; a per cent above, its straight state is said to be unstable."""
    for share, straight in ((0.99, True), (1.01, False)):
        found = solve(parse_scenario(column("fixed", share * SQUARE / 4, "")))
        assert ((found.state[0], found.note[0]) == ("stable", None)) is straight
