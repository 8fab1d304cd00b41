"""Density of the standard atmosphere: ISO 2533:1975, equal to the U.S. Standard Atmosphere (1976) up to 32 km."""

from __future__ import annotations

from collections.abc import Iterator

from guys.constants import air_density
from tests.published.compare import Allowance, Row, published

TABLE = {0: "1.2250", 500: "1.1673", 1000: "1.1117", 2000: "1.0066", 3000: "0.90925", 5000: "0.73643", 10_000: "0.41351"}
"""Geometric height [m]: density [kg/m3]."""


@published("air", "MEMORY")
def test_density_of_the_standard_atmosphere() -> Iterator[Row]:
    """Density of air at geometric heights up to 10 km.

    Source: ISO 2533:1975, table by geometric height, from memory.  Allowed: half a unit of the last digit.
    """
    for height, printed in TABLE.items():
        yield Row(f"density at {height} m", "kg/m³", printed, air_density(height))


LIBRARY = {0: "1.2250", 500: "1.1673", 1000: "1.1117", 1500: "1.0581", 2000: "1.0066", 3000: "0.9093"}
"""Geometric height [m]: density [kg/m3] by the library ambiance 1.3.1."""
NATURE = {0: "1.29225", 15: "1.22498", -20: "1.39434"}
"""[degC]: density at 101,325 Pa [kg/m3] by the library fluids 1.3.1; rounding of R."""


@published("air b", "READ")
def test_density_by_two_libraries() -> Iterator[Row]:
    """The standard atmosphere, and dry air at sea level in three temperatures, by general-purpose libraries.

    Source: ambiance 1.3.1 (ICAO Doc 7488, 1993) and fluids 1.3.1, run once; their numbers are kept here.  The real gas of the second
    differs from the ideal one by some 3e-5.
    """
    for height, printed in LIBRARY.items():
        yield Row(f"density at {height} m", "kg/m³", printed, air_density(height))
    for celsius, printed in NATURE.items():
        real = Allowance(6e-5, "air is not an ideal gas", share=True)
        yield Row(f"density at {celsius} °C, sea level", "kg/m³", printed, air_density(0.0, 273.15 + celsius), real)
