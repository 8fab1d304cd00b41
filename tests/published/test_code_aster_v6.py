"""A3, A6.  Validation manual V6 of Code_Aster (statics of slender structures): a heavy cable, and diagonals that only pull."""

from __future__ import annotations

from collections.abc import Iterator

from guys.constants import STANDARD_GRAVITY
from guys.results import Solution
from tests.published.compare import Allowance, Row, published
from tests.published.masts import STILL, STRAIGHT, anchor, guy, load, rope, solved, spar

GRAVITY = 9.81
"""[m/s2] of the manual; the rope's mass is raised so that the program's own gives the same weight."""
AREA, MODULUS, DENSITY, EXPANSION = 2.2783e-4, 5.70e10, 2844.230, 2.3e-5
ROUNDING = Allowance(1e-10, "rounding", share=True)
WARMER = 39.26
TRUSS_EA = 1e9
FEATHER = 1e-3
"""[N] hung from node 2, so that the unloaded bars of the square keep their place where the manual has pins; node 3 is pulled by as much
more."""


def _hanging(heavier: float) -> Solution:
    """The level cable, cold and warm, its mass multiplied."""
    kilos = heavier * AREA * DENSITY * GRAVITY / STANDARD_GRAVITY
    return solved(
        spar("10 m", "fixed"),
        anchor("far", "325 m", "0 m", "10 m"),
        guy("cable", "10 m", "far", 'length = "325 m"'),
        rope(f"{AREA * MODULUS!r} N", diameter="20 mm", mass=f"{kilos!r} kg/m", more=f'expansion = "{EXPANSION} 1/K"'),
        '[setting]\ntemperature = "0 degC"',
        STILL,
        f'[[case]]\nname = "warm"\nwind = 0.0\ntemperature = "{WARMER} degC"',
    )


@published("A3", "READ")
def test_heavy_cable() -> Iterator[Row]:
    """Level span of 325 m, natural length 325 m, then warmed by 39.26 K: sag and tensions.

    Source: Code_Aster validation manual V6.02.114 (SSNL114), sections 1 and 2, with the sag at T = 0 from V6.05.116, section 2.2 ("to
    within 1e-3"), both read. The warm values and the tensions are not printed there: worked out by scalar catenary equations and by
    chains of 64 to 256 bars, with the weight per length kept as the cable lengthens; the program keeps its mass, so the warm cable is
    given 1 + a dT times the mass. A scenario: a rigid fixed mast and one cable to an anchor at the height of its head. Allowed: half a
    unit of the last digit.
    """
    found, warmed = _hanging(1.0), _hanging(1 + EXPANSION * WARMER)
    for what, solution, case, numbers in (
        ("at T = 0", found, 0, ("-6.35216146971", "13206.23915", "13246.57805")),
        ("39.26 K warmer", warmed, -1, ("-8.19545175433", "10241.73101", "10293.78743")),
    ):
        curve = solution.cables.curve[case, 0]
        sag = curve[len(curve) // 2, 2] - 10.0
        ours = (sag, abs(solution.cables.force_on_anchor[case, 0, 0]), solution.cables.tension_anchor[case, 0])
        if solution is found:
            yield Row(f"sag in the middle, {what}", "m", "-6.352", sag)
        for name, unit, printed, value in zip(("sag in the middle", "level pull", "end tension"), "mNN", numbers, ours, strict=True):
            yield Row(f"{name}, {what}", unit, printed, value, ROUNDING, "WORKED OUT")


@published("A6", "READ")
def test_diagonals_that_only_pull() -> Iterator[Row]:
    """Square of four bars with two tension-only diagonals, 1000 N along one side at node 3: one diagonal works, the other drops out.

    Source: Code_Aster validation manual V6.02.105, modelling A, read. Known misprint: the translated table prints the force of the cable
    as -1414.2; a cable can only be in tension. A scenario: bars 4-3 and 1-2 are level spars hinged at the supports 4 and 1, bar 2-3 and
    the diagonals are cables; a thousandth of a newton hangs from node 2 by bar 2-3, and node 3 is pulled by as much more. Allowed: half a
    unit of the last digit, and what the stretch of the working diagonal by T/EA = 1.4e-6 turns it.
    """

    def hinged(name: str, level: str) -> str:
        foot = f'foot = {{ east = "0 m", north = "0 m", level = "{level}" }}\nlean = "90 deg"\ntoward = "90 deg"\nhinge_axis = "0 deg"'
        return spar("1 m", "hinged", name=name, rigid=False, section=section, more=foot)

    def between(name: str, start: tuple[str, str], end: tuple[str, str], length: float) -> str:
        ends = f'from = {{ spar = "{start[0]}", at = "{start[1]}" }}\nto = {{ spar = "{end[0]}", at = "{end[1]}" }}'
        return f'[[cable]]\nname = "{name}"\n{ends}\nrope = "line"\nlength = "{length!r} m"\n'

    section = f'mass = "0 kg/m"\nEA = "{TRUSS_EA} N"\nEI = "1e6 N m2"\nGJ = "1e6 N m2"'
    found = solved(
        hinged("bar 4-3", "1 m") + load("1 m", up=f"{1000 + FEATHER} N"),
        hinged("bar 1-2", "0 m") + load("1 m", name="feather", up=f"-{FEATHER} N"),
        between("diagonal 1-3", ("bar 4-3", "1 m"), ("bar 1-2", "0 m"), 2**0.5),
        between("diagonal 4-2", ("bar 4-3", "0 m"), ("bar 1-2", "1 m"), 2**0.5),
        between("side 2-3", ("bar 4-3", "1 m"), ("bar 1-2", "1 m"), 1.0),
        rope(f"{TRUSS_EA} N", mass="0 kg/m"),
        STRAIGHT,
        STILL,
    )
    assert found.state[0] == "stable"
    turned = Allowance(2e-6, "the diagonal stretches and turns by T/EA", share=True)
    diagonal, other, side = found.cables.tension_anchor[0]
    bar = {line.name: line.axial[0, 0] for line in found.spars}
    yield Row("axial force of bar 3-4", "N", "-1000.0", bar["bar 4-3"], turned)
    yield Row("tension of diagonal 1-3", "N", "1414.2", diagonal, turned)
    yield Row("tension of diagonal 4-2, dropped", "N", "0.00", other)
    yield Row("axial force of bar 1-2", "N", "0.00", bar["bar 1-2"])
    yield Row("force of bar 2-3, less what hangs there", "N", "0.00", side - FEATHER)
    assert found.cables.slack[0].tolist() == [False, True, False]
