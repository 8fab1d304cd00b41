"""Ropes of the catalogue: every one can be found by its name, says whence it is, and is a rope; in a scenario the file's own beats it."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st
from toml_text import MAST, dumps

from guys import parse_scenario
from guys.catalogue import fibre, ropes, sizes, strand, wire_rope
from guys.catalogue.known import FROM_MEMORY, MARKS, of_memory
from guys.catalogue.rope import StockRope, elastic
from guys.scenario import echo

EVERY = ropes.listed()
STEEL = 7850.0
"""[kg/m3]"""
LAY_AND_ZINC = (1.0075, 1.022)
"""Mass of strand over that of its wires laid straight and bare (1.008 to 1.021 on every row read)."""
LAY_AND_CORE = (1.08, 1.25)
"""The same of stranded rope: lay of wires and strands, zinc, grease, and a fibre core where there is one."""
READ_STRESS, RECALLED_STRESS = (1.268e9, 1.370e9), (1.19e9, 1.37e9)
"""[Pa] on the metal area of extra high strength strand: 1,269 to 1,369 MPa of those read; wires of 7/16 in and up are from memory."""
GRADES = ("common", "sm", "hs", "ehs")


def metal_area(rope: StockRope, kind: str) -> float:
    moduli = elastic()[kind].moduli
    assert moduli is not None
    return rope.stiffness.low / moduli[0]


def test_names_are_all_different_and_lead_to_what_is_listed() -> None:
    assert len({rope.name for rope in EVERY}) == len(EVERY)
    for rope in EVERY:
        assert ropes.find(rope.name) == rope


@pytest.mark.parametrize("rope", EVERY, ids=lambda rope: rope.name)
def test_each_is_a_rope_and_says_whence_it_is(rope: StockRope) -> None:
    circle = math.pi / 4 * rope.diameter**2
    assert 0.001 < rope.diameter < 0.07
    assert 500.0 < rope.mass / circle < 7850.0
    assert 80e6 < rope.strength / circle <= rope.strength_high / circle < 2.2e9
    assert 0.15e9 < rope.stiffness.low / circle <= rope.stiffness.used / circle <= rope.stiffness.high / circle < 205e9
    assert rope.expansion is None or 1e-5 < rope.expansion < 2e-5
    assert rope.known.split(";")[0] in MARKS
    assert rope.source
    assert of_memory(rope.known) is None or FROM_MEMORY in rope.source


def test_whatever_is_from_memory_is_told_when_used() -> None:
    for rope in EVERY:
        told = list(ropes.cautions(rope))
        assert any(FROM_MEMORY in line for line in told) == (FROM_MEMORY in rope.known)
        assert any("the low end is judged" in line for line in told) == (rope.strength_high > rope.strength)


def test_strand_weighs_as_its_wires_with_lay_and_zinc() -> None:
    for rope in strand.listed():
        ratio = rope.mass / (STEEL * metal_area(rope, "strand"))
        assert LAY_AND_ZINC[0] < ratio < LAY_AND_ZINC[1], rope.name


def test_strand_of_each_grade_is_stronger_than_the_one_below_and_the_next_size_than_the_last() -> None:
    strength = {rope.name: rope.strength for rope in strand.listed()}
    for name in strength:
        _, wires, grade, size = name.split("-", 3)
        if grade in GRADES[1:]:
            assert strength[name] > strength[f"strand-{wires}-{GRADES[GRADES.index(grade) - 1]}-{size}"]
    for wires in ("1x3", "1x7"):
        for grade in GRADES:
            row = [(rope.diameter, rope.strength) for rope in strand.listed() if rope.name.startswith(f"strand-{wires}-{grade}-")]
            assert row == sorted(row)
            assert len({s for _, s in row}) == len(row)


def test_extra_high_strength_strand_breaks_at_the_stress_of_its_wire() -> None:
    for rope in strand.listed():
        if "-ehs-" in rope.name:
            least, most = READ_STRESS if of_memory(rope.known) is None else RECALLED_STRESS
            assert least < rope.strength / metal_area(rope, "strand") < most, rope.name


def test_strand_is_as_thick_as_the_circle_around_its_wires() -> None:
    """GO 95 table 22: outside diameter 3 d of seven wires, 2.155 d of three."""
    assert strand.AROUND[3] == pytest.approx(2.155, abs=0.0005)
    for rope in strand.listed():
        nominal = sizes.inches(rope.name.rsplit("-", 1)[1].removesuffix("in"))
        assert nominal <= rope.diameter < 1.05 * nominal


@pytest.mark.parametrize("each", wire_rope.constructions().values(), ids=lambda each: each.name)
def test_wire_rope_by_hand(each: wire_rope.Construction) -> None:
    """Of 10 mm and grade 1770: mass W kg/m, metal area 100 C mm2, breaking force 0.177 K MN."""
    rope = ropes.find(f"steel-{each.name}-10mm")
    assert rope is not None
    assert rope.mass == pytest.approx(each.mass, rel=1e-12)
    assert rope.strength == pytest.approx(177e3 * each.strength, rel=1e-12)
    modulus = {"steel": 100e9, "fibre": 80e9}[each.core]
    assert rope.stiffness.used == pytest.approx(modulus * each.area * 1e-4, rel=1e-12)
    assert LAY_AND_CORE[0] < each.mass / 100.0 / (STEEL * 1e-6 * each.area) < LAY_AND_CORE[1]
    spinning_loss = each.strength / each.area
    assert 0.74 < spinning_loss < 0.91, "breaking force over the sum of the wires' strengths"


@given(st.sampled_from(sorted(wire_rope.constructions())), st.integers(10, 60), st.sampled_from([1570, 1770, 1960]))
def test_wire_rope_of_any_diameter_and_grade(construction: str, size: int, grade: int) -> None:
    rope, ten = ropes.find(f"steel-{construction}-{grade}-{size}mm"), ropes.find(f"steel-{construction}-10mm")
    assert rope is not None
    assert ten is not None
    square = (size / 10.0) ** 2
    assert rope.mass == pytest.approx(square * ten.mass, rel=1e-12)
    assert rope.strength == pytest.approx(square * ten.strength * grade / 1770.0, rel=1e-12)
    assert rope.stiffness.used == pytest.approx(square * ten.stiffness.used, rel=1e-12)


NEARLY = r"(steel|strand|aircraft|polyester)-[0-9x]{0,5}(-[a-z0-9]{0,6}){0,2}-[0-9/]{0,4}(mm|in)"


@given(st.text(max_size=40) | st.from_regex(NEARLY, fullmatch=True))
def test_any_name_is_a_rope_or_none(name: str) -> None:
    found = ropes.find(name)
    assert found is None or found.name == name
    ropes.hint(name)


def test_sizes() -> None:
    assert sizes.metres("6mm") == pytest.approx(0.006)
    assert sizes.metres("1-1/8in") == pytest.approx(1.125 * 0.0254)
    assert [sizes.metres(text) for text in ("6", "mm", "1/0in", "-6mm", "6 mm", "1//8in", "6cm", "")] == [None] * 8


def test_stretch_factor_rope_is_stiffer_than_the_standard_says() -> None:
    """The two sources differ: 7x7 by its maker's stretch factor (new, prestretched) is half as stiff again as by EN 1993-1-11's modulus.

    Told in the user guide; the factor's EA is 82 GPa over the full circle (11.90 Msi, handbook C3), the modulus' 55 GPa.
    """
    factor, modulus = elastic()["7x7"].of(0.00635, 0.0).used, ropes.find("steel-7x7-1/4in")
    assert modulus is not None
    assert factor / (math.pi / 4 * 0.00635**2) == pytest.approx(11.90 * 6.894757e9, rel=5e-4)
    assert 1.4 < factor / modulus.stiffness.used < 1.6


# ---------------------------------------------------------------- in a scenario


def mast(made_of: str, **own: object) -> str:
    level = {**MAST["guy_level"][0], "rope": made_of}
    return dumps({**MAST, "guy_level": [level], "rope": {}, **own})


def test_a_catalogue_rope_in_a_scenario() -> None:
    scenario = parse_scenario(mast("steel-7x7-6mm"))
    rope, stock = scenario.rope["steel-7x7-6mm"], ropes.find("steel-7x7-6mm")
    assert stock is not None
    assert (rope.diameter, rope.mass, rope.stiffness) == (stock.diameter, stock.mass, stock.stiffness.used)
    assert (rope.strength, rope.expansion, rope.drag) == (stock.strength, stock.expansion, None)
    assert rope.source is not None
    assert stock.source in rope.source
    assert any("steel-7x7-6mm" in warning and "stiffness from memory" in warning for warning in scenario.warnings)
    assert any("EN 12385" in line for line in echo.lines(scenario))


def test_a_rope_that_was_read_brings_no_warning() -> None:
    scenario = parse_scenario(mast("strand-1x7-ehs-1/4in"))
    assert not [warning for warning in scenario.warnings if "strand" in warning]


def test_the_low_strength_of_a_fibre_rope_is_judged() -> None:
    scenario = parse_scenario(mast("polyester-12mm"))
    found = fibre.find("polyester-12mm")
    assert found is not None
    assert scenario.rope["polyester-12mm"].strength == found.strength < found.strength_high
    assert any("the low end is judged" in warning for warning in scenario.warnings)
    assert any("is used" in warning for warning in scenario.warnings)


def test_the_files_own_rope_beats_the_catalogue() -> None:
    own = {"diameter": "7 mm", "mass": "0.2 kg/m", "stiffness": "2 MN", "strength": "30 kN", "drag": 1.1}
    scenario = parse_scenario(mast("steel-7x7-6mm", rope={"steel-7x7-6mm": own}))
    rope = scenario.rope["steel-7x7-6mm"]
    assert (rope.diameter, rope.strength, rope.source) == (0.007, 30e3, None)
    assert not [warning for warning in scenario.warnings if "catalogue" in warning]
