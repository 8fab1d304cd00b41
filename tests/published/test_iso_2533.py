"""Density of the standard atmosphere: ISO 2533:1975, equal to the U.S. Standard Atmosphere (1976) up to 32 km."""

from __future__ import annotations

from collections.abc import Iterator

from guys.constants import air_density
from tests.published.compare import Row, published

TABLE = {0: "1.2250", 500: "1.1673", 1000: "1.1117", 2000: "1.0066", 3000: "0.90925", 5000: "0.73643", 10_000: "0.41351"}
"""Geometric height [m]: density [kg/m3]."""


@published("air", "MEMORY")
def test_density_of_the_standard_atmosphere() -> Iterator[Row]:
    """Density of air at geometric heights up to 10 km.

    Source: ISO 2533:1975, table by geometric height, from memory.  Allowed: half a unit of the last digit.
    """
    for height, printed in TABLE.items():
        yield Row(f"density at {height} m", "kg/m³", printed, air_density(height))
