"""Ice on bars and on structures: limits and continuity of the vanes, and what reaches weights and widths by hand."""

from __future__ import annotations

import math

import numpy as np
import pytest
import scenarios_made as made
from hypothesis import given
from hypothesis import strategies as st

from guys import structure
from guys.icing import coat, vane
from guys.loads import as_drawn, assemble, lines_of
from guys.scenario import Ice
from guys.scenario.ice import classes, resolved

G = 9.80665
Q = 0.5 * 1.25 * 25.0**2
READ_CLASSES = ("R1", "R2", "R3", "R4", "R5")
OF_TABLE = 0.02
"""Share by which the areas of the table's vanes differ from the class masses at 500 kg/m3: sizes are printed in whole millimetres."""


def area(length: np.ndarray, width: np.ndarray, bar: float) -> np.ndarray:
    """Of a vane on a bar, of the form the table's sizes follow."""
    return math.pi / 4 * width * (length + bar / 2) - math.pi / 8 * bar**2


@pytest.mark.parametrize("bar", [0.01, 0.02, 0.03, 0.05, 0.1, 0.3])
def test_vanes_hold_the_mass_of_their_class(bar: float) -> None:
    """Between the bars read and between classes by interpolation, beyond 30 mm by making."""
    mass = np.linspace(0.5, 5.0, 40)
    length, width = vane(np.full(40, bar), mass, 500.0)
    off = np.abs(500.0 * area(length, width, bar) / mass - 1).max()
    assert off < (3 * OF_TABLE if bar <= 0.03 else 1e-9)
    assert (np.diff(length) > 0).all()
    assert (np.diff(width) > 0).all()


@pytest.mark.parametrize("name", READ_CLASSES)
def test_a_vane_on_a_bar_of_30_mm_is_the_same_read_and_derived(name: str) -> None:
    mass = np.array(float(classes()[name]["mass"]))
    read, derived = vane(np.array(0.03), mass, 500.0), vane(np.array(0.03 + 1e-9), mass, 500.0)
    assert read[1] == pytest.approx(derived[1], abs=1e-8)
    assert read[0] == pytest.approx(derived[0], rel=3 * OF_TABLE)


@given(st.floats(0.002, 0.3), st.floats(0.5, 20.0))
def test_a_vane_is_never_narrower_than_its_bar(bar: float, mass: float) -> None:
    length, width = vane(np.array(bar), np.array(mass), 500.0)
    assert width > bar
    assert length >= 0.0


def test_rime_square_to_the_wind_meets_bar_and_vane() -> None:
    ice = resolved(Ice(**{"class": "R3", "vane": "across"}))
    assert coat(np.array(0.01), ice)[1] == pytest.approx(0.109 + 0.010)
    along = resolved(Ice(**{"class": "R3"}))
    assert coat(np.array(0.01), along) == (pytest.approx(1.6), pytest.approx(0.036))


def test_effects_of_height() -> None:
    """exp(0.01 x 50) on the mass of rime; (z/10)^0.1 on glaze, at most 1.4: from memory, as the program says."""
    z = np.array([0.0, 10.0, 50.0, 500.0])
    rime = resolved(Ice(**{"class": "R2", "height_effect": "iso12494"}))
    assert coat(np.full(4, 0.02), rime, z)[0] == pytest.approx(0.9 * np.exp(0.01 * z))
    glaze = Ice(thickness=0.02, height_effect="asce7")
    t = 0.02 * np.array([(0.001 / 10) ** 0.1, 1.0, 5.0**0.1, 1.4])
    assert coat(np.full(4, 0.02), glaze, z)[1] == pytest.approx(0.02 + 2 * t)


def iced(ice: made.Document, **case: object) -> tuple[np.ndarray, np.ndarray, structure.Structure]:
    """Weights and winds per length [N/m] of the cables of the 18 m mast with ice, and the structure."""
    document = made.mast(40.0, ice=ice, case=[{"name": "frost", "dead": 0.0, "ice": 1.0, **case}])
    document["spar"][0]["fitting"][0] |= {"iced_mass": 20.0, "iced_area": 0.6}
    s = structure.build(made.scenario(document))
    found = assemble(s, lines_of(s.scenario), as_drawn(s, np.full(6, 15.0)))
    return -found.cable_load[0, :, 2], np.hypot(found.cable_load[0, :, 0], found.cable_load[0, :, 1]), s


def test_cables_named_bare_carry_neither_the_weight_nor_the_width_of_ice() -> None:
    ice = {"thickness": 0.02, "density": 900.0}
    weight, wind, _ = iced(ice, wind=0.0)
    assert weight == pytest.approx([G * 900 * math.pi * 0.026 * 0.02] * 6, rel=1e-12)
    bare, _, _ = iced(ice, wind=0.0, bare=["9 m B", "17 m A"])
    assert bare == pytest.approx(weight * [1, 0, 1, 0, 1, 1], rel=1e-12)
    _, wind, _ = iced(ice)
    _, lighter, _ = iced(ice, bare=["9 m B", "17 m A"])
    ratio = np.ones(6)
    ratio[[1, 3]] = 0.006 / 0.046
    assert lighter == pytest.approx(wind * ratio, rel=1e-12)


def test_a_class_of_glaze_is_its_thickness() -> None:
    for one, other in zip(iced({"class": "G2"})[:2], iced({"thickness": 0.02, "density": 900.0})[:2], strict=True):
        assert one.tolist() == other.tolist()


def test_the_wind_that_goes_with_a_class_is_a_choice() -> None:
    (_, full, s), (_, reduced, told) = iced({"class": "G3"}), iced({"class": "G3", "reduce_wind": True})
    assert reduced == pytest.approx(0.5 * full, rel=1e-12)
    assert any("thickness of class G3 is from memory" in warning for warning in s.scenario.warnings)
    assert any("multiplied by 0.5, from memory" in warning for warning in told.scenario.warnings)


def test_rime_grows_up_the_mast_and_its_cables() -> None:
    """The mast's ice: integral of m exp(0.01 z) over 18 m; a cable's: the mean over its chord."""
    even, grown = iced({"class": "R1"}, wind=0.0), iced({"class": "R1", "height_effect": "iso12494"}, wind=0.0)
    for top, rows in ((9.0, slice(0, 3)), (17.0, slice(3, 6))):
        mean = (math.exp(0.01 * top) - 1) / (0.01 * top)
        assert grown[0][rows] == pytest.approx(even[0][rows] * mean, rel=1e-9)
    document = made.document(
        [made.spar(base="fixed")], wind=made.wind(0.0), ice={"class": "R1", "height_effect": "iso12494"},
        case=[{"name": "frost", "dead": 0.0, "ice": 1.0, "wind": 0.0}],
    )  # fmt: skip
    s = structure.build(made.scenario(document))
    found = assemble(s, lines_of(s.scenario), as_drawn(s, np.zeros(0)))
    assert -found.force.sum(axis=1)[0, 2] == pytest.approx(G * 0.5 * (math.exp(0.18) - 1) / 0.01, rel=1e-9)


def test_wind_on_an_iced_tube_follows_its_width_up_the_mast() -> None:
    document = made.document(
        [made.spar(base="fixed")], wind=made.wind(0.0), ice={"thickness": 0.02, "density": 900.0, "height_effect": "asce7"},
        case=[{"name": "frost", "dead": 0.0, "ice": 1.0}],
    )  # fmt: skip
    s = structure.build(made.scenario(document))
    found = assemble(s, lines_of(s.scenario), as_drawn(s, np.zeros(0)))
    width = 0.089 * 18.0 + 2 * 0.02 * 10.0 * (1.8**1.1) / 1.1
    assert np.hypot(*found.force.sum(axis=1)[0, :2]) == pytest.approx(1.2 * Q * width, rel=1e-4)
