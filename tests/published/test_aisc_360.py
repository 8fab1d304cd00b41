"""D6.  Second-order benchmark problems of AISC 360, Commentary to chapter C: W14x48, 28 ft, axial load with a side load."""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache

import numpy as np

from guys.constants import INCH, POUND, STANDARD_GRAVITY
from guys.results import Solution
from tests.published.compare import Allowance, Row, published
from tests.published.masts import FINE, KILO_PASCAL, PRESSURE, cross_stays, load, solved, spar

INCHES, LBF = float(INCH), float(POUND) * STANDARD_GRAVITY
KIP_INCH = 1000 * LBF * INCHES
FOOT = 12 * INCHES
EI = f'EI = "{29e6 * 484 / 144!r} lbf ft2"\nGJ = "1e8 lbf ft2"\nEA = "1e10 lbf"\nmass = "0 kg/m"'
"""29 000 ksi and 484 in4; the problems leave shortening out."""
HEIGHT = 28 * FOOT
SLOPES = Allowance(3 * (2.56 / 336) ** 2, "the closed form takes slopes as small: thrice the square of deflection over length", share=True)
LAST = "a unit of the last digit, quoted from memory"

SIMPLE = {0: ("235", "0.197", "235.20", "0.1971"), 150: ("269", "0.224", "268.89", "0.2246"), 300: ("313", "0.261", "313.52", "0.2611"),
          450: ("375", "0.311", "375.41", "0.3116")}  # fmt: skip
"""P [kip]: moment [kip in] and deflection [in] in the middle, as remembered and worked out."""
CANTILEVER = {0: ("336", "0.901", "336.00", "0.9009"), 100: ("469", "1.33", "469.07", "1.3307"), 150: ("598", "1.75", "598.65", "1.7510"),
              200: ("848", "2.56", "848.98", "2.5649")}  # fmt: skip
"""P [kip]: moment [kip in] at the foot and deflection [in] of the head."""


def _cases(loads: dict[int, tuple[str, str, str, str]], step: float) -> str:
    wind = KILO_PASCAL + 'directions = ["270 deg"]\n'
    return wind + "".join(f'[[case]]\nname = "{p}"\nwind = 1.0\ndead = {p / step}\n' for p in loads)


@cache
def _cantilever() -> Solution:
    """Fixed spar; the kip across is the wind on a sail, the push a dead load of 50 kip taken 0, 2, 3 and 4 times."""
    sail = f'[[spar.fitting]]\nname = "sail"\nat = "28 ft"\narea = "{1000 * LBF / PRESSURE!r} m2"\ndrag = 1.0\n'
    body = spar("28 ft", "fixed", rigid=False, section=f'{EI}\nwidth = "100 mm"\ndrag = 0.0')
    return solved(body + load("28 ft", up="-50 kip") + sail, _cases(CANTILEVER, 50.0), finer=FINE)


@cache
def _simple() -> Solution:
    """Pinned spar, its head held by level stays; the 0.2 kip/ft is the wind on its width, the push a dead load of 150 kip."""
    width = 200 * LBF / FOOT / PRESSURE
    body = spar("28 ft", rigid=False, section=f'{EI}\nwidth = "{width!r} m"\ndrag = 1.0')
    middle = '[[spar.fitting]]\nname = "middle"\nat = "14 ft"\nmass = "0 kg"\n'
    stays = cross_stays("28 ft", 1e10).replace('level = "28 ft"', f'level = "{HEIGHT!r} m"')
    return solved(body + load("28 ft", up="-150 kip") + middle, stays, _cases(SIMPLE, 150.0), finer=FINE)


def _rows(table: dict[int, tuple[str, str, str, str]], ours: dict[int, tuple[float, float]]) -> Iterator[Row]:
    for p, (moment, aside, exact_moment, exact_aside) in table.items():
        m, d = ours[p]
        unit = 1.0, 10.0 ** -len(aside.partition(".")[2])
        yield Row(f"P = {p} kip: moment", "kip in", moment, m, Allowance(0.5 * unit[0], LAST))
        yield Row(f"P = {p} kip: deflection", "in", aside, d, Allowance(0.5 * unit[1], LAST))
        yield Row(f"P = {p} kip: moment, closed form", "kip in", exact_moment, m, SLOPES, "WORKED OUT")
        yield Row(f"P = {p} kip: deflection, closed form", "in", exact_aside, d, SLOPES, "WORKED OUT")


@published("D6 case 1", "MEMORY")
def test_simple_span() -> Iterator[Row]:
    """Simple span of 28 ft, 0.2 kip/ft across, P = 0, 150, 300 and 450 kip, without shear deformation.

    Source: AISC 360-10, Commentary, figure C-C2.2, from memory; worked out beside it: M = (w/k^2)(sec kL/2 - 1) and by a boundary-value
    solver. A whole scenario. Allowed: a unit of the last remembered digit; half a unit of the last worked-out digit and 1.7e-4: the
    closed form takes slopes as small.
    """
    found = _simple()
    ours = {}
    for k, case in enumerate(found.case):
        if case in map(str, SIMPLE):
            line = found.spars[0]
            middle = int(np.argmin(np.abs(line.station - HEIGHT / 2)))
            ours[int(case)] = (float(np.hypot(*line.bending[k, middle])) / KIP_INCH, float(line.displacement[k, middle, 0]) / INCHES)
    yield from _rows(SIMPLE, ours)


@published("D6 case 2", "MEMORY")
def test_cantilever() -> Iterator[Row]:
    """Cantilever of 28 ft, 1 kip across its head, P = 0, 100, 150 and 200 kip, without shear deformation.

    Source: AISC 360-10, Commentary, figure C-C2.3, from memory; worked out beside it: M = H tan kL/k and by a boundary-value solver. A
    whole scenario. Allowed: a unit of the last remembered digit; half a unit of the last worked-out digit and 1.7e-4: the closed form
    takes slopes as small.
    """
    found = _cantilever()
    ours = {}
    for k, case in enumerate(found.case):
        if case in map(str, CANTILEVER):
            moment = float(np.linalg.norm(found.bases.moment[k, 0])) / KIP_INCH
            ours[int(case)] = (moment, float(found.spars[0].displacement[k, -1, 0]) / INCHES)
    yield from _rows(CANTILEVER, ours)
