"""C6.  The shallow toggle of two bars, clamped at both ends, that snaps through: Williams, Q. J. Mech. Appl. Math. 17 (1964)."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from functools import cache

import numpy as np

from tests.published import rods
from tests.published.compare import Allowance, Row, published

HALF, RISE, EA, EI = 12.943, 0.386, 1.885e6, 9.27e3
MESHES = (4, 8, 16)
FLAT = (0.05, 0.1, 0.15, 0.2, 0.25, 0.3)
SINKING = {0.1: "25.201", 0.2: "33.492", 0.3: "32.834", 0.5: "36.073", 0.7: "88.155"}
"""Sinking of the crown [in] and the load there [lb], by shooting."""


@cache
def _half(elements: int) -> rods.Chain:
    """One bar, its crown guided: neither turning nor moving sideways; half the load."""
    length = float(np.hypot(HALF, RISE))
    chain = rods.straight(length, elements, rods.Section(EA, EI, EI, EI))
    position = np.outer(np.linspace(0, 1, elements + 1), [HALF, RISE, 0.0])
    held = np.tile(np.array(rods.IN_PLANE_XY), (elements + 1, 1))
    held[0] = True
    held[-1, [0, 5]] = True
    force = chain.force.copy()
    force[-1, 1] = -0.5
    return replace(chain, position=position, held=held, force=force)


def _load_at(elements: int, places: tuple[float, ...]) -> list[float]:
    chain = _half(elements)
    state, loads = rods.drawn(chain), []
    for place in places:
        state = rods.at_place(chain, state, elements, 1, -place)
        loads.append(state.factor)
    return loads


@published("C6", "MEMORY")
def test_snapping_through() -> Iterator[Row]:
    """Toggle of two bars of half span 12.943 in and rise 0.386 in, clamped, load at the crown: the load at which it snaps, and its path.

    Source: 34 lb, Williams (1964), after Wood & Zienkiewicz (1977), from memory; papers differ in rise and modulus. Worked out beside it by
    shooting, inextensible slopes not assumed: 33.861 lb at 0.23205 in, and the path. Ours is extrapolated from 4, 8 and 16 elements a bar.
    Allowed: half a unit of the last digit; 2e-4 of the load, since the length of the bars is printed to five figures and the arch of a
    rise of 0.386 in is 0.03 of its span.
    """
    left = Allowance(2e-4, "what the mesh and the printed dimensions leave", share=True)
    found = [rods.greatest_load(_half(m), m, 1, [-v for v in FLAT]) for m in MESHES]
    limit = rods.refined([load for load, _ in found]).limit
    yield Row("load at which it snaps", "lb", "34", limit)
    yield Row("load at which it snaps, by shooting", "lb", "33.861", limit, left, "WORKED OUT")
    yield Row("sinking of the crown then", "in", "0.23205", -found[-1][1], Allowance(2e-4, "the load is flat there"), "WORKED OUT")
    steps = tuple(np.round(np.arange(0.1, 0.75, 0.1), 1).tolist())
    loads = np.array([_load_at(m, steps) for m in MESHES])
    for place, printed in SINKING.items():
        ours = rods.refined(loads[:, steps.index(place)].tolist()).limit
        yield Row(f"load at a sinking of {place:g} in", "lb", printed, ours, left, "WORKED OUT")
