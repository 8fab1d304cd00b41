"""ASCE 7-16 and 7-22, chapter 26: velocity pressure coefficients, pressures, topography; read in public transcriptions."""

from __future__ import annotations

import math
from collections.abc import Iterator

from guys.constants import POUND, STANDARD_GRAVITY
from guys.scenario.standard_wind import ASCE_CONSTANT, ground_elevation_factor
from tests.published.compare import NOTHING, Allowance, Row, published
from tests.published.winds import q, wind

FEET = {15: "4.6", 20: "6.1", 25: "7.6", 30: "9.1", 40: "12.2", 50: "15.2", 60: "18.0", 70: "21.3", 80: "24.4", 90: "27.4", 100: "30.5"}
FEET |= {120: "36.6", 140: "42.7", 160: "48.8", 180: "54.9", 200: "61.0", 250: "76.2", 300: "91.4", 350: "106.7", 400: "121.9"}
FEET |= {450: "137.2", 500: "152.4"}
KZ = {
    "B": "0.57 0.62 0.66 0.70 0.76 0.81 0.85 0.89 0.93 0.96 0.99 1.04 1.09 1.13 1.17 1.20 1.28 1.35 1.41 1.47 1.52 1.56",
    "C": "0.85 0.90 0.94 0.98 1.04 1.09 1.13 1.17 1.21 1.24 1.26 1.31 1.36 1.39 1.43 1.46 1.53 1.59 1.64 1.69 1.73 1.77",
    "D": "1.03 1.08 1.12 1.16 1.22 1.27 1.31 1.34 1.38 1.40 1.43 1.48 1.52 1.55 1.58 1.61 1.68 1.73 1.78 1.82 1.86 1.89",
}
TRUNCATED = Allowance(0.005, "the printed table often truncates where it should round")
POUND_PER_SQUARE_FOOT = float(POUND) * STANDARD_GRAVITY / 0.3048**2
MILE_PER_HOUR = 0.44704
ROUNDED_CONSTANT = Allowance(1e-3, "0.613 and 0.00256 are each rounded to three digits: they differ by 0.06 %", share=True)


def kz(edition: str, exposure: str, z: float, **keys: str) -> float:
    blows = wind(speed='"40 m/s"', profile=f'{{ asce7 = "{exposure}", edition = "{edition}" }}', **keys)
    return q(blows, z) / (ASCE_CONSTANT * 40.0**2)


@published("ASCE 7a", "MEMORY")
def test_velocity_pressure_coefficients_of_7_16() -> Iterator[Row]:
    """Kz of exposures B, C, D from 15 ft to 500 ft.

    Source: ASCE 7-16 Table 26.10-1; rows from 15 ft to 40 ft read in a public transcription, the rest from memory. Allowed beyond half a
    digit: another half, since the printed table often truncates.
    """
    for exposure, printed in KZ.items():
        for feet, text in zip(FEET, printed.split(), strict=True):
            mark = "READ" if feet <= 40 else "MEMORY"
            yield Row(f"Kz, exposure {exposure}, {feet} ft", "-", text, kz("7-16", exposure, 0.3048 * feet), TRUNCATED, mark)


@published("ASCE 7b", "READ(2nd)")
def test_velocity_pressure_coefficients_of_7_22() -> Iterator[Row]:
    """Kz with the constants of the 2022 edition.

    Source: CIRSOC 102-2025, Tabla 1.13-1, which uses them; read in public transcriptions.
    """
    for exposure, height, printed in (("B", 5, "0.59"), ("B", 10, "0.71"), ("B", 20, "0.85"), ("C", 10, "1.00"), ("D", 10, "1.19")):
        yield Row(f"Kz, exposure {exposure}, {height} m", "-", printed, kz("7-22", exposure, height))


@published("ASCE 7c", "READ")
def test_pressures_of_worked_examples() -> Iterator[Row]:
    """A worked example, and the same speed by both editions.

    Source: a public note on lateral bracing of houses (ASCE 7-16, exposure B, 22.96 ft, 115 mph, Kd 0.85), read; the pressures of exposure
    C at 10 m and 45 m/s with Kd 0.85 worked out by hand. The note rounds Kz before it multiplies.
    """
    note = wind(speed='"115 mph"', profile='{ asce7 = "B", edition = "7-16", kd = 0.85 }')
    yield Row("q at 22.96 ft, 115 mph", "psf", "18.7", q(note, 22.96 * 0.3048) / POUND_PER_SQUARE_FOOT)
    yield Row("Kz at 22.96 ft", "-", "0.649", kz("7-16", "B", 22.96 * 0.3048), Allowance(5e-4, "rounded, or cut off"))
    for edition, printed in (("7-16", "1056.1"), ("7-22", "1053.6")):
        blows = wind(speed='"45 m/s"', profile=f'{{ asce7 = "C", edition = "{edition}", kd = 0.85 }}')
        yield Row(f"q Kd, {edition}", "Pa", printed, q(blows, 10.0), NOTHING, "WORKED OUT")


@published("ASCE 7d", "READ")
def test_the_constants_of_both_unit_systems() -> Iterator[Row]:
    """The same pressure by 0.00256 psf/mph2 and by 0.613 Pa/(m/s)2, there and back.

    Source: (26.10-1), read in public transcriptions. Allowed: 0.1 %, since both constants are rounded.
    """
    for mph in (70, 100, 115, 150):
        blows = wind(speed=f'"{mph} mph"', profile='{ asce7 = "C", edition = "7-16" }')
        kz10 = kz("7-16", "C", 10.0)
        psf = 0.00256 * mph**2 * kz10
        yield Row(f"q at {mph} mph", "psf", f"{psf:.4f}", q(blows, 10.0) / POUND_PER_SQUARE_FOOT, ROUNDED_CONSTANT)
        back = math.sqrt(q(blows, 10.0) / POUND_PER_SQUARE_FOOT / (0.00256 * kz10))
        yield Row("the speed back from the pressure", "mph", f"{mph}.000", back, ROUNDED_CONSTANT)


@published("ASCE 7e", "MEMORY")
def test_ground_elevation_factor() -> Iterator[Row]:
    """Ke in metres against Ke in feet, exp(-0.0000362 z).

    Source: Table 26.9-1 note, both forms read in public transcriptions; the values of the table from memory. 0.000119 per metre is
    0.00003627 per foot: the forms differ by 0.2 % of the exponent.
    """
    for feet, printed in ((1000, "0.96"), (2000, "0.93"), (3000, "0.90"), (4000, "0.87"), (5000, "0.83"), (6000, "0.80")):
        slack = Allowance(0.0025, "the exponent in feet and metres, and a table that rounds by hand")
        yield Row(f"Ke at {feet} ft", "-", printed, ground_elevation_factor(0.3048 * feet), slack)
        yield Row(
            "by the form in feet", "-", f"{math.exp(-3.62e-5 * feet):.6f}", ground_elevation_factor(0.3048 * feet),
            Allowance(0.003 * 3.62e-5 * feet, "0.2 % of the exponent"), "READ",
        )  # fmt: skip


SLOPES = (0.20, 0.25, 0.30, 0.35, 0.40, 0.45, 0.50)
K1 = {
    "ridge": ("0.29", "0.36", "0.43", "0.51", "0.58", "0.65", "0.72"),
    "escarpment": ("0.17", "0.21", "0.26", "0.30", "0.34", "0.38", "0.43"),
    "hill": ("0.21", "0.26", "0.32", "0.37", "0.42", "0.47", "0.53"),
}
CUT = Allowance(0.0051, "products of two-digit slopes that end in 5 are printed rounded either way, or cut off")


@published("ASCE 7f", "READ")
def test_topographic_multipliers() -> Iterator[Row]:
    """K1 at the foot of the crest for exposure C, from Kzt = (1 + K1 K2 K3)^2 of a whole wind.

    Source: Figure 26.8-1, read in a public transcription: K1 for seven slopes, K2 = 1 - x / (mu Lh), K3 = exp(-gamma z / Lh), and above a
    slope of 0.5 Lh = 2 H.
    """
    for shape, printed in K1.items():
        for slope, text in zip(SLOPES, printed, strict=True):
            yield Row(f"K1, {shape}, H/Lh {slope:.2f}", "-", text, _speed_up(shape, f"{200 * slope:.6g} m", "200 m"), CUT)
    steep = _speed_up("ridge", "80 m", "100 m")
    yield Row("ridge of H/Lh 0.8 like one of 0.5", "-", "0.72", steep, CUT)
    for shape, gamma in (("ridge", 3.0), ("escarpment", 2.5), ("hill", 4.0)):
        low = _speed_up(shape, "40 m", "200 m")
        high = _speed_up(shape, "40 m", "200 m", z=40.0)
        yield Row(f"K3, {shape}, z/Lh 0.2", "-", f"{math.exp(-0.2 * gamma):.6f}", high / low)
    for side, k2 in (("upwind", 1 - 150 / 300), ("downwind", 1 - 150 / 800)):
        away = _speed_up("escarpment", "40 m", "200 m", more=f', distance = "150 m", side = "{side}"')
        yield Row(f"K2, escarpment, 150 m {side}", "-", f"{k2:.6f}", away / _speed_up("escarpment", "40 m", "200 m"))
    yield Row("K2, ridge, out of reach", "-", "0.000", _speed_up("ridge", "40 m", "200 m", more=', distance = "301 m"'))


def _speed_up(shape: str, height: str, half_length: str, z: float = 0.0, more: str = "") -> float:
    """K1 K2 K3 from the pressures with and without the hill."""
    ground = f'{{ shape = "{shape}", height = "{height}", half_length = "{half_length}"{more} }}'
    hilly = wind(profile=f'{{ asce7 = "C", edition = "7-22", topography = {ground} }}')
    level = wind(profile='{ asce7 = "C", edition = "7-22" }')
    return math.sqrt(q(hilly, z) / q(level, z)) - 1.0
