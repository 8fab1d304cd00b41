"""Handbook A4, A6. Three unequal guys meeting at a head: problems 2.99 and 2.113 of a statics text, in posted solution sheets.

The text was identified from memory as Beer & Johnston, Vector Mechanics for Engineers: Statics; the edition was not shown. A balloon or
plate held by three cables is an inverted mast head: here a weightless rigid mast on a ball, its head where the cables meet.
"""

from __future__ import annotations

from collections.abc import Iterator

from guys.constants import INCH, POUND, STANDARD_GRAVITY
from tests.published.compare import Row, published
from tests.published.masts import STILL, STRAIGHT, anchor, guy, rope, solved, spar

LBF = float(POUND) * STANDARD_GRAVITY
INCHES = float(INCH)
Vector = tuple[float, float, float]


def _head(height: float, cables: dict[str, tuple[Vector, float]], known: str, tension: float) -> tuple[dict[str, float], float]:
    """Tensions of cables along vectors (east, up, north) [m] from the head, and the thrust of the mast, when one tension is known.

    With `plumb` the program finds the tensions nearest to targets that leave the mast upright: three cables leave one proportion, which
    the known tension fixes.
    """
    rows = ""
    for name, ((east, up, north), target) in cables.items():
        rows += anchor(name, f"{east!r} m", f"{north!r} m", f"{height + up!r} m")
        rows += guy(name, f"{height!r} m", name, f'tension = "{target!r} N"')
    found = solved(spar(f"{height!r} m"), rows, rope("1 MN", mass="0 kg/m"), "[setting]\nplumb = true", STRAIGHT, STILL)
    tensions = dict(zip(found.cables.name, found.cables.tension_anchor[0].tolist(), strict=True))
    share = tension / tensions[known]
    return {name: share * t for name, t in tensions.items()}, -share * float(found.bases.force[0, 0, 2])


@published("HB A4", "READ")
def test_problem_2_99() -> Iterator[Row]:
    """Cables (-4.20, -5.60, 0), (2.40, -5.60, 4.20) and (0, -5.60, -3.30) m, 259 N in the first: the other two, and the upward force at
    their meeting.

    Source: Problem 2.99, posted solution sheet, read; the force, 1,031.29 N, worked out (not visible there). Known misprint: the sheet
    says "cable AD is 259 N" once, the lines it works use AB. Allowed: half a unit of the last digit.
    """
    cables = {"AB": ((-4.2, -5.6, 0.0), 300.0), "AC": ((2.4, -5.6, 4.2), 300.0), "AD": ((0.0, -5.6, -3.3), 300.0)}
    tension, thrust = _head(5.6, cables, "AB", 259.0)
    yield Row("tension of AC", "N", "479.15", tension["AC"])
    yield Row("tension of AD", "N", "535.66", tension["AD"])
    yield Row("force where they meet", "N", "1031.29", thrust, mark="WORKED OUT")


@published("HB A6", "READ")
def test_problem_2_113() -> Iterator[Row]:
    """Cables (-32, -48, 36), (45, -48, 36) and (25, -48, -36) in, 15 lb in the second: the other two, and the weight of the plate they
    carry.

    Source: Problem 2.113, posted solution sheet and its abstract, read; the last digit of 143.0 is cut off in the copy. Allowed: half a
    unit of the last digit read.
    """
    inches: dict[str, tuple[Vector, float]] = {
        "AB": ((-32.0, -48.0, 36.0), 400.0),
        "AC": ((45.0, -48.0, 36.0), 60.0),
        "AD": ((25.0, -48.0, -36.0), 400.0),
    }
    cables = {n: ((a * INCHES, b * INCHES, c * INCHES), target) for n, ((a, b, c), target) in inches.items()}
    tension, thrust = _head(48 * INCHES, cables, "AC", 15 * LBF)
    yield Row("tension of AB", "lbf", "136.0", tension["AB"] / LBF)
    yield Row("tension of AD", "lbf", "143", tension["AD"] / LBF)
    yield Row("weight of the plate", "lbf", "211", thrust / LBF)
    yield Row("weight of the plate", "lbf", "211.200", thrust / LBF, mark="WORKED OUT")
