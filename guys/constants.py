"""Physical constants, each with its source, and what stands for zero under a division.

The exact values are definitions: standard gravity (3rd CGPM, 1901), the international yard and pound (agreement of 1959), the
nautical mile (1929).  The standard atmosphere is that of ISO 2533:1975; its values are quoted from memory, and
`tests/published/test_iso_2533.py` checks the densities they give.
"""

from __future__ import annotations

import math
from fractions import Fraction
from typing import Final

STANDARD_GRAVITY: Final = 9.80665
"""[m/s2], exact by definition (3rd CGPM, 1901)."""

INCH: Final = Fraction(254, 10_000)
"""[m], exact (1959)."""

POUND: Final = Fraction(45_359_237, 100_000_000)
"""[kg], exact (1959)."""

GRAVITY: Final = Fraction(980_665, 100_000)
"""Standard gravity as an exact fraction [m/s2], for units of force made from units of mass."""

NAUTICAL_MILE: Final = Fraction(1852)
"""[m], exact (1929)."""

DEGREE: Final = Fraction(math.pi) / 180
"""[rad], from the double nearest to pi."""

ZERO_CELSIUS: Final = Fraction(27_315, 100)
"""[K], exact by definition."""

AIR_DENSITY: Final = 1.225
"""[kg/m3] at sea level and 15 degC, ISO 2533."""

AIR_GAS_CONSTANT: Final = 287.05287
"""Specific gas constant of dry air [J/(kg K)], ISO 2533."""

SEA_LEVEL_PRESSURE: Final = 101_325.0
"""[Pa], ISO 2533."""

SEA_LEVEL_TEMPERATURE: Final = 288.15
"""[K], ISO 2533."""

LAPSE_RATE: Final = 0.0065
"""Fall of temperature with height in the troposphere [K/m], ISO 2533."""

EARTH_RADIUS: Final = 6_356_766.0
"""Nominal radius for geopotential heights [m], ISO 2533."""

ICE_DENSITY: Final = 900.0
"""Glaze [kg/m3], the usual figure for clear ice (common practice, ISO 12494 glaze from memory)."""

NONZERO: Final = 1e-300
"""Divided by in place of zero where the numerator is then zero too: 0/0 comes out as 0."""


def air_density(altitude: float, temperature: float | None = None) -> float:
    """Density of dry air at an altitude, ISO 2533.

    altitude : height above the sea [m], valid from -1000 to 11000 (troposphere)
    temperature : [K] of the air; None: the standard temperature of that altitude

    Returns rho = p / (R T) [kg/m3] with p = p0 (1 - L h / T0) ** (g / (R L)), h = r z / (r + z) the geopotential height of z.
    """
    height = EARTH_RADIUS * altitude / (EARTH_RADIUS + altitude)
    fall = 1.0 - LAPSE_RATE * height / SEA_LEVEL_TEMPERATURE
    pressure = SEA_LEVEL_PRESSURE * fall ** (STANDARD_GRAVITY / (AIR_GAS_CONSTANT * LAPSE_RATE))
    warmth = SEA_LEVEL_TEMPERATURE * fall if temperature is None else temperature
    return float(pressure / (AIR_GAS_CONSTANT * warmth))
