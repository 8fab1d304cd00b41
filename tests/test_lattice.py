"""Lattice sections: stiffness against a frame library, mass and area against sums by hand, and what a scenario makes of them.

The frame's numbers are in `reference_numbers/lattice.json`, made with the script beside it; its legs run through as beams, its lacing is
pinned.
"""

from __future__ import annotations

import json
import math
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from toml_text import MAST, changed, dumps

from guys import lattice, parse_scenario, solve
from guys.errors import ScenarioError
from guys.icing import coat
from guys.loads.drag.chosen import bars
from guys.loads.drag.words import notes
from guys.loads.iced import ice_at
from guys.scenario import Bar, Ice, Lattice
from guys.sections import coated, faces, properties
from guys.structure import build

REFERENCE = json.loads((Path(__file__).parent / "reference_numbers" / "lattice.json").read_text(encoding="utf-8"))
FORCES_ALONE = 2e-5
"""EA, EI, GJ without horizontals: closed forms of the same model; what is left is fading from the ends and rounding of the frame."""
LEGS_BEND = 0.009
"""GA: legs bend between their joints too; their I_l over p^2 A_l is up to 1e-3, that over lacing's part of the shear several times more."""
HORIZONTALS_HELP = 0.02
"""With horizontals: legs that do not bend freely let them and the diagonals bear a little of the axial load; the beam is the softer one."""
LATTICE = {"face": "300 mm", "legs": "26.9 x 2.6 mm", "lacing": "10 mm", "panel": "350 mm", "sides": 3}
SECTION = ("spar", 0, "section", 0)
E = 210e9
ICE = Ice(thickness=0.01, density=900.0)


def made(**change: object) -> Lattice:
    return Lattice.model_validate({**LATTICE, **change})


def of_reference(row: dict) -> Lattice:
    given = row["lattice"]
    return Lattice(**{**given, "legs": Bar(*given["legs"]), "lacing": Bar(*given["lacing"])})


@pytest.mark.parametrize("row", REFERENCE["rows"], ids=lambda row: f"{row['lattice']['sides']} {row['lattice']['bracing']}")
def test_stiffness_of_a_long_spar_solved_as_a_frame(row: dict) -> None:
    ours, theirs = lattice.stiffness(of_reference(row), REFERENCE["E"]), row["found"]
    axial = HORIZONTALS_HELP if row["lattice"]["bracing"] == "horizontals" else FORCES_ALONE
    assert pytest.approx(theirs["EA"], rel=axial) == ours.EA
    assert pytest.approx(theirs["EI"], rel=axial) == ours.EI
    assert pytest.approx(theirs["EI_of_push"], rel=axial) == ours.EI
    assert pytest.approx(theirs["GA"], rel=LEGS_BEND) == ours.GA
    assert pytest.approx(theirs["GJ"], rel=FORCES_ALONE) == ours.GJ


def test_mass_by_hand() -> None:
    """Three tubes of pi (26.9 - 2.6) 2.6 mm2 and three 10 mm bars of sqrt(300^2 + 350^2) mm every 350 mm."""
    legs = math.pi * 24.3e-3 * 2.6e-3
    bars = math.pi / 4 * 0.01**2 * math.hypot(0.3, 0.35) / 0.35
    assert lattice.mass(made(), 7850.0) == pytest.approx(7850.0 * 3 * (legs + bars), rel=1e-12)
    more = 7850.0 * 3 * math.pi / 4 * 0.01**2 * 0.3 / 0.35
    assert lattice.mass(made(bracing="horizontals"), 7850.0) - lattice.mass(made(), 7850.0) == pytest.approx(more, rel=1e-9)
    twice = 7850.0 * 3 * bars
    assert lattice.mass(made(bracing="cross"), 7850.0) - lattice.mass(made(), 7850.0) == pytest.approx(twice, rel=1e-9)


def test_area_of_a_face_by_hand() -> None:
    """Per panel: two legs of 26.9 mm, and of the diagonal the part between them, 273.1 of 300 mm."""
    face = lattice.face(made())
    panel = 2 * 0.0269 * 0.35 + 0.01 * math.hypot(0.3, 0.35) * 0.2731 / 0.3
    assert face.solid * 0.35 == pytest.approx(panel, rel=1e-12)
    assert face.enclosed == pytest.approx(0.3269, rel=1e-12)
    assert face.solidity == pytest.approx(panel / (0.3269 * 0.35), rel=1e-12)
    assert (face.round, face.flat, face.leg, face.lacing) == (1.0, 0.0, 0.0269, 0.01)


def test_ice_lies_on_every_member() -> None:
    """Each grows a ring: 10 mm on a 26.9 mm leg is pi 36.9 10 mm2, on a 10 mm bar pi 20 10 mm2; iced it is a lattice of thicker bars."""
    ring = math.pi * 0.01 * (0.0369 + 0.02 * math.hypot(0.3, 0.35) / 0.35)
    mass, width = coated(made(), ICE)
    assert float(mass) == pytest.approx(900.0 * 3 * ring, rel=1e-12)
    thick = lattice.face(made(legs="46.9 mm", lacing="30 mm"))
    assert float(width) == pytest.approx(thick.solid, rel=1e-12)
    assert faces(made(), ICE)[1].solidity == pytest.approx(thick.solidity, rel=1e-12)
    assert faces(made(), Ice(thickness=0.2, density=900.0))[1].solidity == 1.0


def test_rime_lies_on_every_member() -> None:
    """ISO 12494: so much mass per length of each bar, whatever its diameter."""
    rime = Ice.model_validate({"class": "R3"})
    mass, _ = coated(made(), rime)
    of_a_bar, _ = coat(np.array(0.02), rime)
    assert float(mass) == pytest.approx(float(of_a_bar) * 3 * (1 + math.hypot(0.3, 0.35) / 0.35), rel=1e-12)


def test_ice_grows_with_height_on_a_lattice_too() -> None:
    """ASCE 7: thickness times (z/10 m)^0.10: on every piece what a lattice has with the thickness there."""
    ice, case = {"thickness": "10 mm", "height_effect": "asce7"}, {"name": "ice", "ice": 1.0}
    structure = build(parse_scenario(with_lattice((("ice",), ice), (("case",), [case]), (("spar", 0, "fitting"), []))))
    z = np.full((len(structure.pieces.spar), 1), 20.0)
    found = ice_at(structure, z, np.zeros(3), np.full(3, 9.0))
    mass, width = coated(structure.scenario.spar[0].section[0].lattice, Ice(thickness=0.01 * 2**0.1, density=900.0))
    assert found.mass == pytest.approx(float(mass), rel=1e-12)
    assert found.width == pytest.approx(float(width), rel=1e-12)


@pytest.mark.parametrize(("rules", "sides"), [("en", 3), ("en", 4), ("asce7", 3), ("asce7", 4)])
def test_force_coefficient_by_solidity(rules: str, sides: int) -> None:
    """Round members, by hand from EN 1993-3-1 B.2.2 and ASCE 7 figure 29.4-3 (both read in transcriptions); squares on the diagonal."""
    scenario = parse_scenario(with_lattice(((*SECTION, "drag"), ...), (("wind", "coefficients"), rules), sides=sides))
    phi = lattice.face(scenario.spar[0].section[0].lattice).solidity
    c1, c2 = (1.9, 1.4) if sides == 3 else (2.25, 1.5)
    if rules == "en":
        normal, turned = c1 * (1 - c2 * phi) + (c1 + 0.875) * phi**2, 1 + 0.8 * phi
    else:
        normal = (3.4 * phi**2 - 4.7 * phi + 3.4 if sides == 3 else 4.0 * phi**2 - 5.9 * phi + 4.0) * (0.51 * phi**2 + 0.57)
        turned = 1 + 0.75 * phi
    assert 0.2 < phi < 0.21
    wanted = normal * (turned if sides == 4 else 1.0)
    structure = build(scenario)
    held = bars(structure)
    assert held.fixed == pytest.approx(wanted, rel=1e-12)
    assert any("lattice of round members" in note and f"{wanted:.3g}" in note for note in notes(structure))


@given(
    st.floats(0.1, 3.0), st.floats(0.1, 0.3), st.floats(0.05, 1.0), st.floats(0.4, 2.5), st.sampled_from([3, 4]),
    st.sampled_from(["zigzag", "horizontals", "cross"]), st.floats(1.5, 3.0),
)  # fmt: skip
def test_all_are_positive_and_scale(b: float, leg: float, lacing: float, rise: float, sides: int, bracing: str, k: float) -> None:
    """A lattice k times as large has k^2 EA and GA, k^4 EI and GJ; more lacing is never softer."""

    def scaled(size: float, thick: float = 1.0) -> lattice.Stiffness:
        d, t = size * b * leg, thick * size * b * leg * lacing
        bars = {"legs": Bar(d, d / 2), "lacing": Bar(t, t / 2)}
        return lattice.stiffness(Lattice(face=size * b, panel=size * b * rise, sides=sides, bracing=bracing, **bars), E)

    one, large, lighter = scaled(1.0), scaled(k), scaled(1.0, 0.9)
    assert min(one.EA, one.EI, one.GA, one.GJ) > 0.0
    for name, power in (("EA", 2), ("GA", 2), ("EI", 4), ("GJ", 4)):
        assert getattr(large, name) == pytest.approx(k**power * getattr(one, name), rel=1e-9)
    assert lighter.GA < one.GA
    assert lighter.GJ < one.GJ


# ---------------------------------------------------------------- in a scenario


def with_lattice(*changes: tuple, **change: object) -> str:
    section = {"length": "12 m", "lattice": {**LATTICE, **change}, "material": "steel", "drag": 1.8}
    return dumps(changed(MAST, (SECTION, section), *changes))


@pytest.mark.parametrize(
    ("text", "diameter", "wall"),
    [
        ("26.9 x 2.6 mm", 0.0269, 0.0026),
        ("26.9 mm x 2.6 mm", 0.0269, 0.0026),
        ("26.9mm×2.6mm", 0.0269, 0.0026),
        ("1 1/4 x 0.120 in", 0.03175, 0.003048),
        ("2 cm", 0.02, 0.01),
        ("3/8 in", 0.009525, 0.0047625),
    ],
)
def test_a_bar_is_a_tube_or_solid(text: str, diameter: float, wall: float) -> None:
    legs = parse_scenario(with_lattice(legs=text, lacing="6 mm")).spar[0].section[0].lattice.legs
    assert (legs.diameter, legs.wall) == pytest.approx((diameter, wall), rel=1e-12)


def test_a_section_is_what_its_lattice_gives() -> None:
    scenario = parse_scenario(with_lattice())
    section, steel = scenario.spar[0].section[0], scenario.material["steel"]
    ice = Ice(thickness=0.01, density=900.0)
    bare, iced = properties(section, scenario.material, None), properties(section, scenario.material, ice)
    stiff = lattice.stiffness(section.lattice, steel.modulus)
    assert (bare.EA, bare.EI_x, bare.EI_y, bare.GA, bare.GJ) == (stiff.EA, stiff.EI, stiff.EI, stiff.GA, stiff.GJ)
    assert (bare.mass, bare.width) == (lattice.mass(section.lattice, steel.density), lattice.face(section.lattice).solid)
    mass, width = coated(section.lattice, ice)
    assert iced.iced_mass - iced.mass == pytest.approx(float(mass), rel=1e-12)
    assert iced.iced_width == float(width)
    assert (bare.iced_mass, bare.iced_width) == (bare.mass, bare.width)
    assert bare.expansion == steel.expansion


def test_a_lattice_mast_is_the_one_given_outright() -> None:
    """The same mast with the numbers of the lattice written out stands alike in every case."""
    of_lattice = parse_scenario(with_lattice())
    p = properties(of_lattice.spar[0].section[0], of_lattice.material, None)
    stiffness = {name: f"{value!r} N" for name, value in (("EA", p.EA), ("GA", p.GA))}
    stiffness |= {name: f"{value!r} N m2" for name, value in (("EI", p.EI_x), ("GJ", p.GJ))}
    outright = {"length": "12 m", "mass": f"{p.mass!r} kg/m", "width": f"{p.width!r} m", "drag": 1.8, **stiffness}
    one, other = solve(of_lattice), solve(parse_scenario(dumps(changed(MAST, (SECTION, outright)))))
    assert one.state == other.state
    assert one.cables.tension_top == pytest.approx(other.cables.tension_top, rel=1e-9)


@pytest.mark.parametrize(
    ("change", "key", "says"),
    [
        ({"legs": "26.9 x 20 mm"}, "lattice.legs", "the wall is not between zero and half the diameter"),
        ({"legs": "26.9"}, "lattice.legs", '"26.9" has no unit'),
        ({"legs": 26.9}, "lattice.legs", '26.9 is not a bar; write "26.9 x 2.6 mm" for a tube'),
        ({"lacing": "10 mm x"}, "lattice.lacing", "is not a length"),
        ({"lacing": "-10 mm"}, "lattice.lacing", "the wall is not between"),
        ({"lacing": "40 mm"}, "lattice.lacing", "has more metal than a leg; are legs and lacing swapped?"),
        ({"face": "20 mm"}, "lattice.face", "leaves no room between the legs"),
        ({"sides": 5}, "lattice.sides", "3"),
        ({"bracing": "zigzg"}, "lattice.bracing", "zigzag"),
    ],
)
def test_what_is_wrong_in_a_lattice_is_told_with_its_key(change: dict, key: str, says: str) -> None:
    with pytest.raises(ScenarioError) as caught:
        parse_scenario(with_lattice(**change))
    assert any(fault.key.endswith(key) and says in fault.message for fault in caught.value.faults), caught.value.faults


@pytest.mark.parametrize(
    ("changes", "key", "says"),
    [
        ({"material": ...}, "material", "a lattice needs one"),
        ({"GA": "1 MN"}, "GA", "follows from the lattice"),
        ({"mass": "9 kg/m"}, "mass", "follows from the lattice"),
        ({"tube": {"diameter": "89 mm", "wall": "3 mm"}}, "lattice", "a section has one or the other"),
        ({"shape": "round"}, "shape", "a lattice has a coefficient of its own"),
    ],
)
def test_what_stands_beside_a_lattice(changes: dict, key: str, says: str) -> None:
    with pytest.raises(ScenarioError) as caught:
        parse_scenario(with_lattice(*(((*SECTION, name), value) for name, value in changes.items())))
    assert any(fault.key == f"spar[0].section[0].{key}" and says in fault.message for fault in caught.value.faults), caught.value.faults


def test_unusual_lattices_are_warned_about() -> None:
    scenario = parse_scenario(with_lattice(panel="60 mm"))
    assert any("diagonals rise at 11.3 deg from the level" in warning for warning in scenario.warnings)
    assert not [warning for warning in parse_scenario(with_lattice()).warnings if "lattice" in warning]
