"""D7.  A cantilever with a push and a load across at its head: AISC Design Guide 25 (Kaehler, White & Kim, 2011), closed form."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from guys.constants import INCH, POUND, STANDARD_GRAVITY
from tests.published.compare import Allowance, Row, published
from tests.published.masts import FINE, KILO_PASCAL, PRESSURE, load, solved, spar

INCHES, LBF = float(INCH), float(POUND) * STANDARD_GRAVITY
LENGTH, MODULUS, SECOND, ACROSS = 196 * INCHES, 29.5e6, 2150.0, 10_000 * LBF
EULER = np.pi**2 * MODULUS * SECOND / (4 * 196**2) * LBF
TABLE = {0: ("0.395719", "1960.000"), 10: ("0.439108", "2138.879"), 30: ("0.563034", "2648.088"), 50: ("0.786011", "3560.983"),
         67: ("1.187933", "5202.311")}  # fmt: skip
"""Push as hundredths of Euler's load: deflection of the head [in], moment at the foot [kip in]."""
SLOPES = Allowance(2e-4, "the closed form takes slopes as small: thrice the square of deflection over length, and the mesh", share=True)


@published("D7", "READ")
def test_push_and_a_load_across() -> Iterator[Row]:
    """Cantilever of 196 in, E = 29 500 ksi, I = 2150 in4, 10 kip across its head, P up to 0.67 of Euler's load.

    Source: the formulas d = (H L^3/3EI) 3 (tan k - k)/k^3 and M = H L tan k/k, k = L sqrt(P/EI), read in a public worked example after the
    guide; the numbers follow from them. A whole scenario: the push is a dead load, the kips across the wind on a sail. Allowed: half a unit
    of the last digit and 2e-4.
    """
    wind = KILO_PASCAL + 'directions = ["270 deg"]\n'
    cases = "".join(f'[[case]]\nname = "{share}"\nwind = 1.0\ndead = {share / 10}\n' for share in TABLE)
    sail = f'[[spar.fitting]]\nname = "sail"\nat = "196 in"\narea = "{ACROSS / PRESSURE!r} m2"\ndrag = 1.0\n'
    stiff = f'EI = "{MODULUS * SECOND / 144!r} lbf ft2"\nGJ = "1e9 lbf ft2"\nEA = "1e11 lbf"'
    section = f'{stiff}\nmass = "0 kg/m"\nwidth = "100 mm"\ndrag = 0.0'
    body = spar("196 in", "fixed", rigid=False, section=section)
    found = solved(body + load("196 in", up=f"{-0.1 * EULER!r} N") + sail, wind + cases, finer=FINE)
    for k, name in enumerate(found.case):
        if name in map(str, TABLE):
            aside, moment = TABLE[int(name)]
            yield Row(f"P/P_cr = 0.{int(name):02d}: deflection", "in", aside, float(found.spars[0].displacement[k, -1, 0]) / INCHES, SLOPES)
            ours = float(np.linalg.norm(found.bases.moment[k, 0])) / (1000 * LBF * INCHES)
            yield Row(f"P/P_cr = 0.{int(name):02d}: moment", "kip in", moment, ours, SLOPES)
