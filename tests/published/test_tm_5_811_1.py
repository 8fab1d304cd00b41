"""Handbook A1. Guying a pole: US Army TM 5-811-1 / AFJMAN 32-1080 (issued as UFC 3-550-03FA), figure 6-10, p. 6-18, equations 10-1 to
10-5."""

from __future__ import annotations

from collections.abc import Iterator

from guys.constants import POUND, STANDARD_GRAVITY
from guys.results import Solution
from tests.published.compare import Allowance, Row, published
from tests.published.masts import STILL, STRAIGHT, anchor, guy, load, rope, solved, spar

LBF = float(POUND) * STANDARD_GRAVITY
PULL = 3 * 1480
AS_DRAWN = f'length = "{10 * 2**0.5!r} m"'
"""Unstressed length of the guy as drawn, 14.14 m: it is slack until the pole leans on it."""
REQUIRED = 1.5 / 0.9
"""Overload factor of the load over strength factor of the strand: strength over tension."""


def _pole(strength: str = "11500 lbf") -> Solution:
    """Weightless rigid pole on a hinge across the pull, three conductors at the head, one guy at 45 degrees the other way."""
    return solved(
        spar("10 m", "hinged", more='hinge_axis = "0 deg"') + load("10 m", east=f"{PULL} lbf"),
        anchor("stake", "-10 m", "0 m"),
        guy("guy", "10 m", "stake", AS_DRAWN),
        rope("1e9 N", mass="0 kg/m", more=f'strength = "{strength}"'),
        f"[allowables]\ncable = {REQUIRED}",
        STRAIGHT,
        STILL,
    )


@published("HB A1", "READ")
def test_guy_of_a_dead_end_pole() -> Iterator[Row]:
    """Three conductors of 1480 lb, one guy at 45 degrees at their height, overload 1.5, strength factor 0.9: pull, guy tension, strength
    needed.

    Source: TM 5-811-1, figure 6-10, p. 6-18, read. The printed strength, 10,466, is cut off, not rounded (10,466.67), and comes of 0.707
    for cos 45; so it is held to a pound and what that does. Allowed: half a unit of the last digit printed, the tension being printed to
    ten pounds.
    """
    found = _pole()
    tension = found.cables.tension_anchor[0, 0] / LBF
    rounded = Allowance(2.0, "cos 45 taken as 0.707 and the strength cut off, not rounded")
    yield Row("pull of the conductors", "lbf", "4440", found.anchors.horizontal[0, 0] / LBF)
    yield Row("tension of the guy", "lbf", "6.28e3", tension)
    yield Row("strength needed", "lbf", "10466", REQUIRED * tension, rounded)


def test_strength_is_judged_at_that_value() -> None:
    """A strand 6 lb weaker than the strength needed is past its allowable, one 4 lb stronger is within, as is the 11,500 lb strand they
    choose."""
    verdicts = {text: bool(_pole(text).past) for text in ("10460 lbf", "10470 lbf", "11500 lbf")}
    assert verdicts == {"10460 lbf": True, "10470 lbf": False, "11500 lbf": False}


def test_second_solve_does_not_run_away() -> None:
    """A thousandth of the height beside its answer the guy is slack and nothing pushes back: the second solve says so, the run goes on."""
    assert _pole().check.resolve in ("agrees", "inconclusive")
