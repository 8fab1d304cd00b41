"""A8.  The two-link taut wire pulled aside in the middle: a closed form of every statics text."""

from __future__ import annotations

from collections.abc import Iterator

from tests.published.compare import Allowance, Row, published
from tests.published.masts import STILL, STRAIGHT, anchor, guy, load, rope, solved, spar

HALF, EA, INITIAL = 5.0, 1e6, 1e3
TABLE = ((10, "0.024698670", "1012.212612"), (100, "0.163175052", "1532.912615"), (1000, "0.467664624", "5369.043475"))
"""P [N], d [m], T [N]."""
TALL = 400.0
"""[m] height of the rigid mast whose head the wire holds: its head leaves the wire's plane by d^2/2H only."""


@published("A8", "EXACT")
def test_wire_pulled_aside() -> Iterator[Row]:
    """Wire of two links of 5 m, EA = 1 MN, 1 kN of tension, pulled aside by P in the middle: deflection d and tension T.

    Source: P = 2 T d/sqrt(a^2 + d^2), T = EA (sqrt(a^2 + d^2)/L0 - 1), L0 = a/(1 + T0/EA). A scenario: two level straight cables hold the
    head of a weightless rigid mast 400 m tall, which is free to follow but for the arc it moves on. Allowed: half a unit of the last
    digit and that arc, whose rise of d^2/2H adds to the square of the deflection by (d/2H)^2, 3.4e-7 of it at the most.
    """
    arc = Allowance(1e-6, "the head moves on an arc of 400 m", share=True)
    unstressed = f'length = "{HALF / (1 + INITIAL / EA)!r} m"'
    for pull, aside, tension in TABLE:
        found = solved(
            spar(f"{TALL} m") + load(f"{TALL} m", north=f"{pull} N"),
            anchor("e", f"{HALF} m", "0 m", f"{TALL} m") + anchor("w", f"{-HALF} m", "0 m", f"{TALL} m"),
            guy("e", f"{TALL} m", "e", unstressed) + guy("w", f"{TALL} m", "w", unstressed),
            rope(f"{EA} N", mass="0 kg/m"),
            STRAIGHT,
            STILL,
        )
        yield Row(f"P = {pull} N: deflection", "m", aside, found.spars[0].displacement[0, -1, 1], arc)
        yield Row(f"P = {pull} N: tension", "N", tension, found.cables.tension_anchor[0, 0], arc)
