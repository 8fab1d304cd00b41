"""Force coefficients of ASCE 7, chapter 29: solid signs, open frames, round bodies and trussed towers, in public transcriptions."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from guys.loads.drag import angular, lattice, round, signs
from tests.published.compare import Row, published

S_OVER_H = (1.0, 0.9, 0.7, 0.5, 0.3, 0.2, 0.16)
B_OVER_S = (0.05, 0.1, 0.2, 0.5, 1.0, 2.0, 4.0, 5.0, 10.0, 20.0, 30.0, 45.0)


def surface(s_over_h: float, b_over_s: float) -> float:
    """The commentary's fit to the figure of solid signs, C29.3."""
    x, y = math.log(b_over_s), s_over_h
    return (1.563 + 0.008542 * x - 0.06148 * y + 0.009011 * x**2 - 0.2603 * y**2 - 0.08393 * x * y) / 0.85


def rounded(value: float) -> str:
    """To the figure's step of 0.05."""
    return f"{0.05 * math.floor(value / 0.05 + 0.5):.2f}"


@published("ASCE 7 F29.3-1", "READ")
def test_solid_signs() -> Iterator[Row]:
    """84 cells of the figure, and one value between them.

    Source: the commentary's fit C29.3, read, rounded to the figure's step of 0.05; three transcriptions of the table agree with it in all
    cells (a fourth prints 1.55 at s/h = 0.7, B/s = 4, where the fit gives 1.577). Sign of 3 m by 2 m, top at 6 m: linear between cells,
    worked by hand. Allowed: half a unit of the last digit.
    """
    for s_over_h in S_OVER_H:
        for b_over_s in B_OVER_S:
            ours = signs.asce7(b_over_s, 1.0, 1.0 / s_over_h)
            yield Row(f"C_f, s/h {s_over_h:g}, B/s {b_over_s:g}", "-", rounded(surface(s_over_h, b_over_s)), ours)
    yield Row("C_f, 3 m by 2 m, top at 6 m", "-", "1.7875", signs.asce7(3.0, 2.0, 6.0), mark="WORKED OUT")


@published("ASCE 7 F29.4-1", "READ")
def test_round_bodies() -> Iterator[Row]:
    """Slender round bodies below and above D sqrt(q) = 5.3 m Pa^1/2, by roughness.

    Source: figure 29.4-1, h/D = 25, in two public transcriptions. Allowed: half a unit of the last digit.
    """
    for rough, small, large in ((0.0, "1.2", "0.7"), (0.02, "1.2", "0.9"), (0.08, "1.2", "1.2")):
        for q, printed in ((27.9, small), (28.2, large)):
            yield Row(f"C_f, D'/D {rough:g}, D sqrt(q) {math.sqrt(q):.2f}", "-", printed, float(round.asce7(*np.array([1.0, q, rough]))))


@published("ASCE 7 F29.4-2", "READ")
def test_open_frames() -> Iterator[Row]:
    """Frames of one plane on their solid area.

    Source: figure 29.4-2 in two public transcriptions. Allowed: half a unit of the last digit.
    """
    for solidity, flat, small, large in ((0.05, "2.0", "1.2", "0.8"), (0.2, "1.8", "1.3", "0.9"), (0.5, "1.6", "1.5", "1.1")):
        for what, bar, printed in (("flat", None, flat), ("round, small", 0.05, small), ("round, large", 0.5, large)):
            yield Row(f"C_f, {what}, solidity {solidity:g}", "-", printed, float(angular.open_frame(solidity, bar, np.array(400.0))))


@published("ASCE 7 F29.4-3", "WORKED OUT")
def test_trussed_towers() -> Iterator[Row]:
    """Square and triangular towers of flat and round members; the same towers by EN 1993-3-1, B.2.2.

    Source: the formulas of figure 29.4-3, and of B.2.2, each read in public transcriptions, worked by hand to three decimals. Allowed: half
    a unit of the last digit.
    """
    table = {
        0.1: ("3.450", "3.406", "2.964", "2.909", "1.984", "1.944", "1.705", "1.662"),
        0.3: ("2.590", "2.534", "2.296", "2.240", "1.595", "1.519", "1.414", "1.352"),
        0.5: ("2.050", "1.980", "1.900", "1.839", "1.430", "1.344", "1.325", "1.264"),
    }
    for e, printed in table.items():
        kinds = [(sides, share) for share in (0.0, 1.0) for sides in (4, 3)]
        for k, (sides, share) in enumerate(kinds):
            for n, rules in enumerate(("asce7", "en")):
                ours = float(lattice.coefficient(rules, sides, np.array(e), np.array(share)))  # type: ignore[arg-type]
                what = f"{rules}, {sides} sides, {'round' if share else 'flat'}, solidity {e:g}"
                yield Row(what, "-", printed[2 * k + n], ours)
