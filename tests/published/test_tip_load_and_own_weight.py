"""D3.  Columns under their own weight and a load at the head: the problem of Timoshenko & Gere, Theory of Elastic Stability (1961)."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from tests.published.compare import Row, published
from tests.published.masts import STILL, TWELVE, critical, cross_stays, load, per_length, spar, whole
from tests.published.test_euler import EI, HEAD_HELD, LENGTH

FREE = {0.25: "2.2832", 0.75: "1.9098", 2.0: "0.9469", 4.0: "-0.6878", 10.0: "-6.3766"}
"""Fixed at the foot, head free; n = qL over pi^2 EI/4L^2: P L^2/EI."""
HELD = {0.25: "8.6254", 1.0: "4.7680", 3.0: "-6.3955"}
"""Pinned, head held sideways; n = qL over pi^2 EI/L^2."""


def _column(base: str, pushed: float, weight: float, head: str) -> str:
    section = f'{per_length(weight)}\nEA = "1e10 N"\nEI = "{EI} N m2"\nGJ = "{EI} N m2"'
    push = load(f"{LENGTH} m", up=f"{-pushed * EI / LENGTH**2!r} N")
    return whole(spar(f"{LENGTH} m", base, rigid=False, section=section) + push, head, STILL)


@published("D3", "WORKED OUT")
def test_load_at_the_head_of_a_heavy_column() -> Iterator[Row]:
    """Spar of weight q L under P at its head, fixed and free, or pinned with its head held by stays: P L^2/EI; below zero P pulls.

    Source: the table of Timoshenko & Gere was not opened, and remembered values of it differ where n is large; these by Ritz (24 Legendre
    terms) for these tests. Whole scenarios. Allowed: half a unit of the last digit, 6e-5 of P and of q L for twelve elements to a span.
    """
    stays = cross_stays(f"{LENGTH} m", HEAD_HELD * EI / LENGTH**3)
    for base, head, table, unit in (("fixed", "", FREE, np.pi**2 / 4), ("pinned", stays, HELD, np.pi**2)):
        for n, printed in table.items():
            weight = n * unit * EI / LENGTH**3
            expected = float(printed)
            span = 0.05 * unit * (1 + n)
            ours = critical(lambda p, w=weight, b=base, h=head: _column(b, p, w, h), expected - span, expected + span)
            allowed = TWELVE if expected > 0.5 else TWELVE.__class__(6e-5 * unit * n, TWELVE.reason)
            yield Row(f"{base}-{'held' if head else 'free'}, n = {n:g}: P L²/EI", "-", printed, ours, allowed)
