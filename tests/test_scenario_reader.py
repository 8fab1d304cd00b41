"""A faultless file becomes the scenario it describes."""

from __future__ import annotations

import hashlib
import math
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st
from toml_text import BOOM, MAST, changed, dumps, dumps_tables

from guys import parse_scenario, read_scenario
from guys.constants import air_density
from guys.scenario import AnchorPoint, GroundFoot, HeelFoot, Rope, SparPoint, drawn
from guys.scenario.document import AllowablesEntry
from guys.scenario.reader import fault_at

REPOSITORY = Path(__file__).parent.parent
ROUNDING = 1e-15
"""Relative: the last place of a double."""
NANOMETRE = 1e-9


def test_values_are_si_and_defaults_are_filled_in() -> None:
    scenario = parse_scenario(dumps(MAST))
    (mast,) = scenario.spar
    assert mast.foot == GroundFoot(east=0.0, north=0.0, level=0.0)
    assert (mast.length, mast.base, mast.rigid, mast.hinge_axis) == (12.0, "pinned", False, None)
    assert mast.section[0].tube is not None
    assert mast.section[0].tube.diameter == 0.089
    assert scenario.rope["wire"] == Rope(diameter=0.006, mass=0.15, stiffness=1.4e6, strength=23e3, drag=1.2)
    assert scenario.setting.temperature == 288.15
    assert not scenario.setting.plumb
    assert [(case.name, case.dead, case.wind, case.ice, case.temperature) for case in scenario.case] == [("design", 1.0, 1.0, 0.0, 288.15)]
    assert scenario.wind is not None
    assert scenario.wind.air_density == 1.225
    assert scenario.wind.profile.kind == "uniform"
    assert scenario.wind.directions == tuple(math.radians(30 * step) for step in range(12)) or scenario.wind.directions == pytest.approx(
        [math.radians(30 * step) for step in range(12)], rel=ROUNDING
    )
    assert scenario.analysis.cable == "catenary"
    assert scenario.warnings == ()


def test_allowables_left_out_are_marked_as_defaults() -> None:
    scenario = parse_scenario(dumps(changed(MAST, (("allowables", "cable"), 3.0))))
    assert scenario.allowables.cable == 3.0
    assert (scenario.allowables.anchor, scenario.allowables.sliding, scenario.allowables.lean) == (1.5, 1.5, math.radians(1.0))
    assert scenario.allowables.defaulted == set(AllowablesEntry.model_fields) - {"cable", "factored"}


def test_a_guy_level_becomes_cables_named_after_its_height_or_its_name() -> None:
    scenario = parse_scenario(dumps(MAST))
    assert [cable.name for cable in scenario.cable] == ["9 m N", "9 m SE", "9 m SW"]
    first = scenario.cable[0]
    assert (first.from_, first.to) == (SparPoint(spar="mast", at=9.0), AnchorPoint(anchor="N"))
    assert (first.tension, first.length, first.tight, first.level) == (1000.0, None, False, "9 m")
    named = parse_scenario(dumps(changed(MAST, (("guy_level", 0, "name"), "low"))))
    assert [cable.name for cable in named.cable] == ["low N", "low SE", "low SW"]


def test_guy_levels_come_before_single_cables() -> None:
    scenario = parse_scenario(dumps(BOOM))
    assert [cable.name for cable in scenario.cable] == ["9 m N", "9 m SE", "9 m SW", "topping"]
    assert scenario.cable[3].to == SparPoint(spar="boom", at=6.0)
    assert scenario.spar[1].foot == HeelFoot(spar="mast", at=1.0)


def test_anchors_count_from_the_first_foot_and_take_its_level() -> None:
    moved = changed(
        MAST,
        (("spar", 0, "foot"), {"east": "100 m", "north": "20 m", "level": "5 m"}),
        (("anchor", 1), {"name": "SE", "east": "107 m", "north": "16 m", "level": "4 m", "give": "2 kN/mm"}),
    )
    north, east, west = parse_scenario(dumps(moved)).anchor
    assert (north.east, north.north, north.level) == pytest.approx((100.0, 28.0, 5.0), abs=NANOMETRE)
    assert (east.east, east.north, east.level, east.give) == (107.0, 16.0, 4.0, 2e6)
    assert (west.east, west.north) == pytest.approx((100.0 - 8 * math.sin(math.radians(60)), 20.0 - 4.0), abs=NANOMETRE)


def test_a_hinge_lies_square_to_the_lean_where_not_given() -> None:
    hinged = changed(MAST, (("spar", 0, "base"), "hinged"), (("spar", 0, "toward"), "30 deg"))
    assert parse_scenario(dumps(hinged)).spar[0].hinge_axis == pytest.approx(math.radians(120.0), rel=ROUNDING)
    given_axis = changed(hinged, (("spar", 0, "hinge_axis"), "10 deg"))
    assert parse_scenario(dumps(given_axis)).spar[0].hinge_axis == pytest.approx(math.radians(10.0), rel=ROUNDING)


def test_stiffness_from_modulus_and_metal_area() -> None:
    rope = changed(
        MAST, (("rope", "wire", "stiffness"), ...), (("rope", "wire", "modulus"), "100 GPa"), (("rope", "wire", "metal_area"), "14 mm2")
    )
    assert parse_scenario(dumps(rope)).rope["wire"].stiffness == pytest.approx(1.4e6, rel=ROUNDING)


def test_air_density_from_altitude_and_temperature() -> None:
    """ISO 2533 at 0, 1000, 3000 m: 1.2250, 1.1117, 0.9093 kg/m3 (two independent libraries agree); 1.2923 at 0 m and 0 degC."""
    printed = 0.5e-4
    for altitude, density in ((0.0, 1.2250), (1000.0, 1.1117), (3000.0, 0.9093)):
        assert air_density(altitude) == pytest.approx(density, abs=printed)
    assert air_density(0.0, 273.15) == pytest.approx(1.2923, abs=printed)
    wind = changed(MAST, (("wind", "altitude"), "1 km"), (("wind", "temperature"), "0 degC"))
    found = parse_scenario(dumps(wind)).wind
    assert found is not None
    assert found.air_density == pytest.approx(air_density(1000.0, 273.15), rel=ROUNDING)


@pytest.mark.parametrize(
    ("written", "degrees"),
    [("every 90 deg", [0, 90, 180, 270]), (["-10 deg", "360 deg", "45 degrees"], [350, 0, 45]), ("every 360 deg", [0])],
)
def test_directions(written: object, degrees: list[float]) -> None:
    wind = parse_scenario(dumps(changed(MAST, (("wind", "directions"), written)))).wind
    assert wind is not None
    assert wind.directions == pytest.approx([math.radians(each) for each in degrees], rel=ROUNDING)
    assert all(0.0 <= each < math.tau for each in wind.directions)


def test_power_profile_and_cases() -> None:
    scenario = parse_scenario(
        dumps(
            changed(
                MAST,
                (("wind", "profile"), {"power": 0.14}),
                (("rope", "wire", "expansion"), "12e-6 1/K"),
                (("case",), [{"name": "storm"}, {"name": "lost", "wind": 0.5, "temperature": "-5 degC", "without": ["9 m N"]}]),
            )
        )
    )
    assert scenario.wind is not None
    assert (scenario.wind.profile.kind, scenario.wind.profile.exponent) == ("power", 0.14)
    assert scenario.case[1].without == ("9 m N",)
    assert [case.temperature for case in scenario.case] == [288.15, 268.15]


def test_built_in_materials_stand_beside_those_of_the_file() -> None:
    own = {"density": "7850 kg/m3", "modulus": "210 GPa", "shear_modulus": "81 GPa", "yield": "355 MPa"}
    scenario = parse_scenario(dumps(changed(MAST, (("material",), {"mine": own}), (("spar", 0, "section", 0, "material"), "mine"))))
    assert {"steel", "aluminium", "timber", "gfrp", "mine"} == set(scenario.material)
    assert scenario.material["mine"].yield_ == 355e6
    assert scenario.material["steel"].modulus == 210e9


def test_points_of_cables_with_lugs() -> None:
    """By hand: a mast upright at the origin, a guy from 9 m with a lug of 60 mm to an anchor 8 m north."""
    scenario = parse_scenario(dumps(changed(MAST, (("guy_level", 0, "arm"), "60 mm"))))
    top, bottom = drawn.scenario_cable_ends(scenario)[0]
    assert top == pytest.approx((0.0, 0.06, 9.0), abs=NANOMETRE)
    assert bottom == pytest.approx((0.0, 8.0, 0.0), abs=NANOMETRE)


def test_heels_stand_on_their_carriers() -> None:
    scenario = parse_scenario(dumps(BOOM))
    spars = {spar.name: spar for spar in scenario.spar}
    assert drawn.foot(spars, "boom") == pytest.approx((0.0, 0.0, 1.0), abs=NANOMETRE)
    head = drawn.axis_point(spars, "boom", 6.0)
    assert head == pytest.approx((6.0 * math.sin(math.radians(60)), 0.0, 1.0 + 3.0), abs=NANOMETRE)


def test_the_digest_is_of_the_bytes(tmp_path: Path) -> None:
    file = tmp_path / "mast.toml"
    content = dumps_tables(MAST).replace("\n", "\r\n").encode("utf-8-sig")
    file.write_bytes(content)
    scenario = read_scenario(file)
    assert scenario.sha256 == hashlib.sha256(content).hexdigest()
    assert scenario.path == str(file)


def test_both_ways_to_lay_out_a_file_say_the_same() -> None:
    inline, tables = parse_scenario(dumps(BOOM)), parse_scenario(dumps_tables(BOOM))
    bare = {"sha256": "", "text": ""}
    assert inline.model_copy(update=bare) == tables.model_copy(update=bare)


@given(st.floats(0.5, 300.0), st.floats(0.05, 0.95), st.floats(0.0, 360.0), st.floats(1.0, 300.0))
def test_feet_and_metres_describe_the_same_structure(length: float, share: float, bearing: float, radius: float) -> None:
    def described(unit: str, scale: float) -> str:
        return dumps(
            changed(
                MAST,
                (("spar", 0, "section", 0, "length"), f"{length / scale!r} {unit}"),
                (("spar", 0, "fitting"), ...),
                (("guy_level", 0, "name"), "low"),
                (("guy_level", 0, "at"), f"{share * length / scale!r} {unit}"),
                (("anchor", 0, "bearing"), f"{bearing!r} deg"),
                (("anchor", 0, "radius"), f"{radius / scale!r} {unit}"),
            )
        )

    metric, customary = parse_scenario(described("m", 1.0)), parse_scenario(described("ft", 0.3048))
    assert metric.spar[0].length == pytest.approx(customary.spar[0].length, rel=4 * ROUNDING)
    ends = zip(drawn.scenario_cable_ends(metric), drawn.scenario_cable_ends(customary), strict=True)
    assert all(math.dist(a, b) < NANOMETRE for pair in ends for a, b in zip(*pair, strict=True))


@pytest.mark.parametrize("file", sorted((REPOSITORY / "scenarios").glob("*.toml")), ids=lambda path: path.stem)
def test_shipped_scenarios_read_without_a_warning(file: Path) -> None:
    assert read_scenario(file).warnings == ()


@pytest.mark.parametrize("kind", ["mast", "boom", "pylon"])
def test_starters_read_without_a_warning(kind: str) -> None:
    from guys.scenario import starters

    assert parse_scenario(starters.text(kind)).warnings == ()


def test_scenarios_are_frozen_and_can_be_sent_to_another_process() -> None:
    import pickle

    from pydantic import ValidationError

    scenario = parse_scenario(dumps(BOOM))
    assert pickle.loads(pickle.dumps(scenario)) == scenario
    with pytest.raises(ValidationError):
        scenario.title = "other"  # type: ignore[misc]


def test_a_fault_found_after_reading_stands_at_the_line_of_its_key(tmp_path: Path) -> None:
    """And without a line once the file is no longer what was read, or where there is no file."""
    file = tmp_path / "mast.toml"
    text = dumps_tables(MAST)
    file.write_text(text, encoding="utf-8")
    scenario = read_scenario(file)
    guy = scenario.cable[-1]
    fault = fault_at(scenario, (*guy.key, "tension"), "too little")
    line = text.splitlines()[(fault.line or 0) - 1]
    assert line.startswith("tension")
    assert str(fault).startswith(f"{file}:{fault.line}:1: {guy.key[0]}[{guy.key[1]}].tension: too little")
    file.write_text("# changed since\n" + text, encoding="utf-8")
    assert fault_at(scenario, (*guy.key, "tension"), "").line is None
    assert fault_at(parse_scenario(text), (*guy.key, "tension"), "").line is None
