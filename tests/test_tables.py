"""Shipped tables: every row has its source, and the numbers hang together."""

from __future__ import annotations

from pathlib import Path

import pytest

from guys import tables
from guys.scenario.resolve import built_in_materials

DATA = Path(tables.__file__).parent / "data"


@pytest.mark.parametrize("name", sorted(path.stem for path in DATA.glob("*.csv")))
def test_every_row_names_its_source(name: str) -> None:
    assert all(row["source"].strip() for row in tables.rows(name))


def test_steel_is_isotropic() -> None:
    """G = E / (2 (1 + nu)) with nu = 0.3, EN 1993-1-1 3.2.6 (from memory): 80.8 GPa, which the standard rounds to 81."""
    rounding = 0.5e9
    steel = built_in_materials()["steel"]
    assert steel.modulus / (2 * 1.3) == pytest.approx(steel.shear_modulus, abs=rounding)


def test_aluminium_is_isotropic() -> None:
    """As above, EN 1999-1-1 3.2.5 (from memory): 26.9 GPa, rounded to 27."""
    rounding = 0.5e9
    aluminium = built_in_materials()["aluminium"]
    assert aluminium.modulus / (2 * 1.3) == pytest.approx(aluminium.shear_modulus, abs=rounding)


def test_what_breaks_without_yielding_has_no_yield() -> None:
    materials = built_in_materials()
    assert {name for name, each in materials.items() if each.yield_ is None} == {"timber", "gfrp"}


def test_an_empty_cell_is_no_number() -> None:
    assert tables.number(" ") is None
    assert tables.number("12e-6") == 12e-6
