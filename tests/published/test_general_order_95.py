"""Handbook A15. Weight, ice and wind per length of wires: California PUC, General Order 95, Appendix B, tables 18, 21 and 22.

Light loading: wind of 8 psf on the bare wire. Heavy loading: 1/2 in of ice at 57 lb/ft3 all round, and 6 psf on the iced wire (Rule
43.1). v is the weight, h the wind, r both together, all in lb/ft. Here every wire is a cable of one scenario, level from a mast to an
anchor due north of it, so that a wind from the east blows square on all of them; its loads per length are read from `guys.loads`, before
anything is solved.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from functools import cache

import numpy as np
from numpy.typing import NDArray

from guys import parse_scenario
from guys.catalogue import ropes
from guys.constants import INCH, POUND, STANDARD_GRAVITY
from guys.loads import as_drawn, assemble, lines_of
from guys.structure import build
from tests.published.compare import Allowance, Row, published
from tests.published.masts import anchor, guy, rope, spar, whole

LB_PER_FOOT = float(POUND) * STANDARD_GRAVITY / (12 * float(INCH))
"""[N/m]"""
AIR = 1.25
EIGHT_PSF = 8 * float(POUND) * STANDARD_GRAVITY / (12 * float(INCH)) ** 2
"""[Pa]"""
SPAN = 30.0
PSI = float(POUND) * STANDARD_GRAVITY / float(INCH) ** 2
"""[Pa]"""
WIRE = Allowance(0.005, "wire diameters are printed to 0.01 mm, half of which is 0.25 % of 2 mm and twice that of its area", share=True)

Wire = tuple[str, str, tuple[str, str, str, str, str]]
GALVANIZED: dict[str, Wire] = {
    "BWG 4": (".238", ".1530", (".1587", ".220", ".6119", ".6190", ".870")),
    "BWG 6": (".203", ".1120", (".1353", ".176", ".5491", ".6015", ".814")),
    "BWG 8": (".165", ".0740", (".1100", ".133", ".4875", ".5825", ".760")),
    "BWG 9": (".148", ".0600", (".09867", ".116", ".4629", ".5740", ".737")),
    "BWG 10": (".134", ".0490", (".08934", ".102", ".4432", ".5670", ".720")),
    "BWG 11": (".120", ".0390", (".08000", ".089", ".4245", ".5600", ".703")),
    "BWG 12": (".109", ".0320", (".07267", ".079", ".4107", ".5545", ".690")),
    "BWG 14": (".083", ".0190", (".05533", ".058", ".3815", ".5415", ".662")),
}
COPPER_COVERED: dict[str, Wire] = {
    "7 No.6": (".486", ".5150", (".3240", ".608", "1.1281", ".7430", "1.351")),
    "7 No.7": (".433", ".4084", (".2887", ".500", ".9885", ".7165", "1.221")),
    "7 No.8": (".385", ".3239", (".2567", ".413", ".8742", ".6925", "1.115")),
    "7 No.10": (".306", ".2037", (".2040", ".288", ".7049", ".6530", ".961")),
    "3 No.6": (".349", ".2203", (".2327", ".320", ".7482", ".6745", "1.007")),
    "3 No.8": (".277", ".1385", (".1847", ".231", ".6216", ".6385", ".891")),
    "3 No.9": (".247", ".1099", (".1647", ".198", ".5744", ".6235", ".848")),
    "3 No.10": (".220", ".08713", (".1467", ".171", ".5348", ".6100", ".811")),
    "1 No.6": (".1620", ".07285", (".1080", ".130", ".4844", ".5810", ".756")),
    "1 No.8": (".1285", ".04581", (".08567", ".097", ".4366", ".5642", ".713")),
}
COPPER: dict[str, Wire] = {
    "0000 7-wire": (".527", ".6533", (".3514", ".742", "1.2919", ".7635", "1.500")),
    "0 7-wire": (".368", ".3258", (".2453", ".408", ".8655", ".6840", "1.103")),
    "2 7-wire": (".292", ".2049", (".1947", ".283", ".6974", ".6460", ".950")),
}
"""Name: diameter [in], weight [lb/ft], and h light, r light, v heavy, h heavy, r heavy [lb/ft] as printed."""
QUANTITIES = ("light: wind", "light: both", "heavy: weight", "heavy: wind", "heavy: both")
COMPUTED_BY_HAND = Allowance(3e-5, "worked by hand to four decimals")
COPPER_BY_HAND = Allowance(6e-4, "diameters of the stranded copper rounded to 0.001 in before printing")


def _text(wires: dict[str, Wire]) -> str:
    cables = ""
    for k, (name, (diameter, weight, _)) in enumerate(wires.items()):
        height = f"{k + 1} m"
        cables += anchor(name, "0 m", f"{SPAN} m", height) + guy(name, height, name, f'length = "{SPAN} m"', f'"{name}"')
        cables = cables.replace(f'rope = ""{name}""', f'rope = "{name}"')
        cables += rope("1 MN", name=f'"{name}"', diameter=f"0{diameter} in", mass=f"0{weight} lb/ft", drag=1.0)
    speed = math.sqrt(2 * EIGHT_PSF / AIR)
    section = 'mass = "0 kg/m"\nwidth = "100 mm"\niced_mass = "0 kg/m"\niced_width = "100 mm"\ndrag = 0.0'
    wind = f'[wind]\nspeed = "{speed!r} m/s"\naveraging = "3 s"\nheight = "10 m"\nprofile = "uniform"\nair_density = "{AIR} kg/m3"\n'
    ice = '[ice]\nthickness = "0.5 in"\ndensity = "57 lb/ft3"\n'
    cases = '[[case]]\nname = "light"\n[[case]]\nname = "heavy"\nwind = 0.75\nice = 1.0\n'
    return whole(spar(f"{len(wires)} m", "fixed", section=section), cables, wind + 'directions = ["90 deg"]', ice, cases)


@cache
def _loads() -> dict[str, NDArray[np.float64]]:
    """Load vectors (light or heavy, 3) of every wire [lb/ft]."""
    wires = GALVANIZED | COPPER_COVERED | COPPER
    scenario = parse_scenario(_text(wires))
    structure = build(scenario)
    drawn = as_drawn(structure, np.full(len(wires), SPAN))
    loads = assemble(structure, lines_of(scenario), drawn).cable_load / LB_PER_FOOT
    return {name: loads[:, k] for k, name in enumerate(wires)}


def _rows(wires: dict[str, Wire], by_hand: Allowance) -> Iterator[Row]:
    for name, (_, _, printed) in wires.items():
        light, heavy = _loads()[name]
        ours = (-light[0], np.linalg.norm(light), -heavy[2], -heavy[0], np.linalg.norm(heavy))
        for what, text, value in zip(QUANTITIES, printed, ours, strict=True):
            yield Row(f"{name}, {what}", "lb/ft", text if text[0] != "." else f"0{text}", float(value), by_hand)


@published("HB A15a", "READ")
def test_galvanized_steel_wire() -> Iterator[Row]:
    """Table 21, galvanized steel wire, eight gauges: 40 numbers.

    Source: General Order 95, Appendix B, table 21, read. Allowed: half a unit of the last digit and 3e-5 lb/ft, since it was worked by
    hand to four decimals. BWG 9, light: .0600 and .09867 make .11548, printed .116.
    """
    yield from _rows(GALVANIZED, COMPUTED_BY_HAND)


@published("HB A15b", "READ")
def test_copper_covered_steel_strand() -> Iterator[Row]:
    """Table 22, copper-covered steel strand, ten sizes: 50 numbers.

    Source: General Order 95, Appendix B, table 22, read. Known misprint elsewhere in it: the strength of 1 No.10, "1,330", should be
    1,130. Allowed: half a unit of the last digit and 3e-5 lb/ft.
    """
    yield from _rows(COPPER_COVERED, COMPUTED_BY_HAND)


@published("HB A15c", "READ")
def test_copper_strand() -> Iterator[Row]:
    """Table 18, copper strand, three sizes: 15 numbers.

    Source: General Order 95, Appendix B, table 18, read. Two rows left out have printed slips: 350,000 CM (h .4523, should be .4527) and
    000 (r 1.334, should be 1.336). Allowed: half a unit of the last digit and 6e-4 lb/ft, since diameters of strand were rounded for
    print.
    """
    yield from _rows(COPPER, COPPER_BY_HAND)


@published("HB C5", "READ")
def test_stranded_steel_stretches_and_warms() -> Iterator[Row]:
    """Modulus and expansion of stranded steel wire, as the catalogue's strand of three wires and of seven has them.

    Source: General Order 95, Appendix C, (a)5 and (a)6. A modulus is on the metal area, worked out here from the wires of ASTM A475.
    """
    for name, wires, wire in (("strand-1x3-ehs-1/4in", 3, 3.05e-3), ("strand-1x7-ehs-1/4in", 7, 2.03e-3)):
        strand = ropes.find(name)
        assert strand is not None
        area = wires * math.pi / 4 * wire**2
        yield Row(f"modulus of {name}", "psi", "21000000", strand.stiffness.low / area / PSI, WIRE)
        yield Row(f"expansion of {name}", "1/°F", "6.5e-6", strand.expansion / 1.8 if strand.expansion is not None else math.nan)
