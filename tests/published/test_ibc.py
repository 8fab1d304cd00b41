"""Handbook D2. Presumptive values of ground: IBC 2012, table 1806.2, which the program lists and never takes by itself."""

from __future__ import annotations

from collections.abc import Iterator

from guys import tables, units
from tests.published.compare import Row, published

FOOT = 0.3048
TABLE = ((12000, 1200, 0.70, None), (4000, 400, 0.35, None), (3000, 200, 0.35, None), (2000, 150, 0.25, None), (1500, 100, None, 130))


@published("HB D2", "READ")
def test_units_of_presumptive_values() -> Iterator[Row]:
    """The footnotes of the table: a pound per square foot, and per foot of depth.

    Source: IBC 2012, table 1806.2, read in a public transcription.
    """
    psf = units.parse("1 psf", "pressure")
    yield Row("1 psf", "kPa", "0.0479", psf / 1000)
    yield Row("1 psf/ft", "kPa/m", "0.157", psf / FOOT / 1000)


def test_table_shipped_holds_the_published_values() -> None:
    names = ("bearing_psf", "lateral_psf_per_ft", "friction", "cohesion_psf")
    assert tuple(tuple(tables.number(row[name]) for name in names) for row in tables.rows("presumptive_soils")) == TABLE
