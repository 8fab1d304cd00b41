"""D2, D8. Greenhill: a column under its own weight (Proc. Cambridge Philos. Soc., 1881) and a shaft under torque (Proc. Inst. Mech. Eng.,
1883)."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from functools import cache

import numpy as np

from guys import parse_scenario, solve
from tests.published import rods
from tests.published.compare import Allowance, Row, fourth_order, published, second_order
from tests.published.masts import FINE, STILL, TWELVE, critical, cross_stays, per_length, spar, whole

LENGTH, EI = 20.0, 1e5
SHAFT = {"length": 240.0, "EI": 71_240 * 0.0833, "GJ over EI": 10.0}
MESHES = (8, 16, 32)


def _column(base: str, weight: float, head: str) -> str:
    """Spar whose weight times L^3/EI per length is `weight`."""
    section = f'{per_length(weight * EI / LENGTH**3)}\nEA = "1e10 N"\nEI = "{EI} N m2"\nGJ = "{EI} N m2"'
    return whole(spar(f"{LENGTH} m", base, rigid=False, section=section), head, STILL)


@cache
def _weight(base: str, held: bool, expected: float, finer: int) -> float:
    head = cross_stays(f"{LENGTH} m", 1e6 * EI / LENGTH**3) if held else ""
    return critical(lambda q: _column(base, q, head), 0.9 * expected, 1.1 * expected, finer)


@published("D2", "READ")
def test_own_weight() -> Iterator[Row]:
    """Spar under its own weight q per length: q L^3/EI at which the upright one loses stability.

    Source: l = (7.8373 EI/q)^(1/3) for fixed-free, read in an encyclopedia's article "Self-buckling" after Greenhill (1881); closed form
    9/4 j^2 with J_-1/3(j) = 0, 7.83734743894. The others worked out by Ritz. Whole scenarios; a held head is four level stays of a
    million EI/L^3. Allowed: half a unit of the last digit, 6e-5 for twelve elements to a span.
    """
    yield Row("fixed-free: q L³/EI", "-", "7.8373", _weight("fixed", False, 7.84, FINE), TWELVE)
    yield Row("pinned-held: q L³/EI", "-", "18.568725", _weight("pinned", True, 18.57, FINE), TWELVE, "WORKED OUT")
    yield Row("fixed-held: q L³/EI", "-", "52.500663", _weight("fixed", True, 52.5, FINE), TWELVE, "WORKED OUT")


@published("D2 mesh", "EXACT")
def test_own_weight_converges() -> Iterator[Row]:
    """The fixed-free spar on three meshes, each twice as fine as the last: order of convergence and limit.

    Source: the closed form.  Allowed: a quarter of the order; 3e-7 of the limit, mostly shortening (q L/EA).
    """
    values = [_weight("fixed", False, 7.84, finer) for finer in (1, 2, 4)]
    yield fourth_order("fixed-free", rods.refined(values).order)
    yield Row("limit of q L³/EI", "-", "7.83734743894", (16 * values[2] - values[1]) / 15, Allowance(3e-7, "shortening", share=True))


def test_verdict_on_either_side() -> None:
    """A per cent below the critical weight the spar stands; a per cent above, its straight state is said to be unstable."""
    for share, straight in ((0.99, True), (1.01, False)):
        found = solve(parse_scenario(_column("fixed", share * 7.83734743894, "")))
        assert ((found.state[0], found.note[0]) == ("stable", None)) is straight


@cache
def _torque(elements: int) -> float:
    EI = SHAFT["EI"]
    rod = rods.straight(SHAFT["length"], elements, rods.Section(1e8, EI, EI, SHAFT["GJ over EI"] * EI))
    held, moment = rod.held.copy(), rod.moment.copy()
    held[-1] = (False, True, True, False, True, True)
    moment[-1, 0] = 1.0
    return rods.critical_load(replace(rod, held=held, moment=moment), 190.0, 250.0)


@published("D8", "READ")
def test_torque() -> Iterator[Row]:
    """Shaft clamped at both ends, the far one free to slide and to turn about the axis, under torque: T = 2 z EI/L, tan z = z.

    Source: Greenhill (1883) and Ziegler, Principles of Structural Stability (1977), read in a finite-element program's gallery of
    examples: z = 4.493409 (Ziegler prints 4.494). GJ does not matter; ten EI here, so that the shaft is twisted by 0.9 rad when it
    buckles. Ours is extrapolated from 8, 16 and 32 elements. Allowed: half a unit of the last digit and 1e-5, what the mesh leaves (4 %
    on 8 elements); 0.1 of the order.
    """
    torque = rods.refined([_torque(m) for m in MESHES])
    left = Allowance(1e-5, "what two extrapolations leave of the mesh error", share=True)
    yield Row("critical torque", "N mm", "222.2100", torque.limit, left)
    yield Row("z = T L/(2 EI)", "-", "4.493409", torque.limit * SHAFT["length"] / (2 * SHAFT["EI"]), left)
    yield second_order("critical torque", torque.order)
    assert abs(np.tan(4.493409457909064) - 4.493409457909064) < 1e-12
