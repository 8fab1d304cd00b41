"""Force coefficients of EN 1991-1-4:2005: worked examples of a cylindrical and a rectangular bridge pier, and points of its figures.

The examples are those of JRC "Bridge Design to Eurocodes: Worked examples" (2012), 3.3.1, read as quoted in a public transcription.
"""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from guys.loads.drag import angular, round
from tests.published.compare import Allowance, Row, published

DIGITISED = Allowance(0.0004, "the curve of figure 7.36 was digitised to three figures")
Q_40 = 1504.652
"""[Pa] at 40 m, printed 1504.65."""


@published("EN 1991-1-4 7.9", "READ(2nd)")
def test_cylinder_pier() -> Iterator[Row]:
    """Pier of 4 m diameter and 40 m height, k = 0.2 mm, q_p = 1504.65 Pa: coefficient, end effect and force.

    Source: JRC, Bridge Design to Eurocodes: Worked examples (2012), 3.3.1, as quoted. Allowed: half a unit of the last digit, and of the
    end effect what is left of a digitised curve.
    """
    re = round.reynolds(np.array(4.0), np.array(Q_40), 1.25)
    c = float(round.en1991(re, np.array(0.2e-3 / 4.0)))
    psi = round.end_effect(round.slenderness(40.0, 4.0, True))
    yield Row("Reynolds number", "1e7", "1.308", float(re) / 1e7)
    yield Row("c_f0", "-", "0.78928", c)
    yield Row("psi_lambda", "-", "0.68774", psi, DIGITISED)
    yield Row("force", "kN", "130.68", c * psi * Q_40 * 160.0 / 1000, Allowance(0.0006, "the digitised end effect", share=True))


@published("EN 1991-1-4 7.6", "READ(2nd)")
def test_rectangles() -> Iterator[Row]:
    """Pier of d/b = 2, and the points of figure 7.23 and of the corner factor.

    Source: the same example, c_f0 = 1.65; figures 7.23 and 7.24 in a public transcription. Allowed: half a unit of the last digit.
    """
    for ratio, printed in ((0.2, "2.0"), (0.6, "2.35"), (0.7, "2.4"), (1, "2.1"), (2, "1.65"), (5, "1.0"), (10, "0.9"), (20, "0.9")):
        yield Row(f"c_f0, d/b = {ratio:g}", "-", printed, angular.rectangle(1.0, ratio, 0.0))
    yield Row("psi_r, r/b = 0.2", "-", "0.5", angular.rectangle(1.0, 1.0, 0.2) / 2.1)


@published("EN 1991-1-4 7.9.2", "READ")
def test_slender_bars_are_subcritical() -> Iterator[Row]:
    """Bars of 6 to 200 mm, k = 0.2 mm, in 30 m/s: 1.2 below Re = 1.8e5, then the falling curve.

    Source: figure 7.28 by its formulas, in two public transcriptions. Allowed: half a unit of the last digit.
    """
    for millimetres, printed in ((6, "1.20"), (20, "1.20"), (50, "1.20"), (100, "1.047"), (200, "0.772")):
        b = np.array(millimetres / 1000)
        re = round.reynolds(b, np.array(0.5 * 1.25 * 30.0**2), 1.25)
        yield Row(f"c of {millimetres} mm", "-", printed, float(round.en1991(re, 0.2e-3 / b)))


@published("EN 1991-1-4 7.13", "READ")
def test_end_effect() -> Iterator[Row]:
    """Points of figure 7.36 for a solid body; its last, at 200, is from memory.

    Source: digitised values in a public transcription. Allowed: half a unit of the last digit.
    """
    for slender, printed in ((1, "0.60"), (10, "0.698"), (70, "0.918")):
        yield Row(f"psi, lambda = {slender}", "-", printed, round.end_effect(slender))
    yield Row("psi, lambda = 200", "-", "1.0", round.end_effect(200), mark="MEMORY")
    yield Row("psi, half way to 10 in the logarithm", "-", "0.649", round.end_effect(math.sqrt(10)), mark="EXACT")
