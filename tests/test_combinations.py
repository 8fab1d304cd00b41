"""Named sets of cases: their lines, what they are judged by, and that a crew is shown service loads or told that it is not."""

from __future__ import annotations

import csv
import io
from functools import cache
from typing import Any, get_args

import numpy as np
import pytest
from toml_text import MAST, changed, dumps_tables

from guys import parse_scenario, solve, structure, tables, terminal
from guys.drawing import box, table
from guys.drawing.rounding import tongue
from guys.errors import ScenarioError
from guys.exchange import result
from guys.exchange import tables as exchange_tables
from guys.loads import as_drawn, assemble, lines_of
from guys.results import Solution
from guys.scenario import Scenario
from guys.scenario.combination_entry import SetName
from guys.scenario.model import Case, CaseKind

SUMMED = 1e-12
SAME = 1e-9
"""Relative: two runs of the solver for one case in batches of other cases."""
ICE = {"thickness": "10 mm"}
FITTING_ICED = [((*("spar", 0, "fitting", 0), name), value) for name, value in (("iced_mass", "20 kg"), ("iced_area", "0.5 m2"))]


def scenario(*sets: str, ice: bool = False, case: list[dict[str, Any]] | None = None, **keys: Any) -> Scenario:
    changes: list[tuple[tuple[str | int, ...], Any]] = [(("wind", "directions"), ["0 deg"])]
    if sets:
        changes.append((("combinations",), {"sets": list(sets), **keys}))
    if ice:
        changes += [(("ice",), ICE), *FITTING_ICED]
    if case is not None:
        changes.append((("case",), case))
    return parse_scenario(dumps_tables(changed(MAST, *changes)))


@cache
def solved(*sets: str) -> Solution:
    return solve(scenario(*sets))


def factors(cases: tuple[Case, ...]) -> list[tuple[float, float, float]]:
    return [(case.dead, case.wind, case.ice) for case in cases]


PRINTED: dict[str, list[tuple[float, float, float]]] = {
    "us-strength": [(1.4, 0, 0), (1.2, 1.0, 0), (0.9, 1.0, 0), (1.2, 0, 0.2), (1.2, 1.0, 1.0), (0.9, 1.0, 1.0)],
    "us-allowable": [(1, 0, 0), (1, 0.6, 0), (0.6, 0.6, 0), (1, 0, 0.7), (1, 0.7, 0.7), (0.6, 0.7, 0.7)],
    "eu-strength": [(1.35, 0, 0), (1.35, 1.5, 0), (1, 1.5, 0), (1.35, 0.6 * 1.5, 1.5), (1.35, 1.5, 0.5 * 1.5), (1, 1.5, 0.5 * 1.5)],
    "eu-equilibrium": [(1.1, 1.5, 0), (0.9, 1.5, 0), (0.9, 1.5, 0.5 * 1.5)],
    "service": [(1, 1, 0), (1, 1, 1)],
}
"""Dead, wind, ice: ASCE 7-22 2.3.1, EN 1990 Table A1.2 (A) and (B) with psi_0 0.6 of wind, read in public notes; ASCE 7 2.3.3, 2.4.1 but
for 0.6 W, 2.4.3, and the 0.5 of ice (EN 1993-3-1 Annex C) from memory."""


@pytest.mark.parametrize("name", PRINTED)
@pytest.mark.parametrize("ice", [False, True])
def test_a_set_writes_its_lines(name: str, ice: bool) -> None:
    printed = [line for line in PRINTED[name] if ice or line[2] == 0]
    assert factors(scenario(name, ice=ice).case) == [pytest.approx(line, rel=SUMMED) for line in printed]


@pytest.mark.parametrize("name", ["us-strength", "eu-strength", "eu-equilibrium"])
def test_weights_and_wind_are_multiplied_as_the_lines_say(name: str) -> None:
    """On the structure itself: total weight, ice and wind of every line against those of the service case."""
    whole = scenario("service", name, ice=True)
    built = structure.build(whole)
    found = assemble(built, lines_of(whole), as_drawn(built, np.full(3, 12.0)))
    case = {line.name: k for k, line in enumerate(found.lines)}
    dead, wind, iced_wind = found.weight[case["service"]], found.wind_force[case["service"]], found.wind_force[case["service iced"]]
    ice = found.weight[case["service iced"]] - dead
    for line, (d, w, i) in zip(whole.case[2:], PRINTED[name], strict=True):
        k = case[line.name]
        assert found.weight[k] == pytest.approx(d * dead + i * ice, rel=SUMMED)
        assert found.wind_force[k] == pytest.approx(w * (iced_wind if i else wind), rel=SUMMED)


def test_the_names_a_file_may_write_are_those_of_the_table() -> None:
    rows = tables.rows("combinations")
    assert set(get_args(SetName)) == {row["set"] for row in rows}
    assert {row["kind"] for row in rows} == set(get_args(CaseKind))
    assert len({row["line"] for row in rows}) == len(rows)
    assert all((row["kind"] == "service") == (row["set"] == "service") for row in rows)


def test_sets_stand_beside_written_cases_and_in_place_of_the_default_one() -> None:
    assert [case.name for case in scenario("service").case] == ["service"]
    assert [case.name for case in scenario("service", case=[{"name": "gale"}]).case] == ["gale", "service"]
    assert [case.name for case in scenario("service", "service").case] == ["service"]
    assert [case.name for case in scenario().case] == ["design"]


def test_iced_lines_have_their_own_wind_and_temperature() -> None:
    found = scenario("service", "us-strength", ice=True, iced_wind=0.4, temperature="15 degC", iced_temperature="15 degC")
    assert [case.wind for case in found.case if case.ice] == [0.4, 0.0, 0.4, 0.4]
    assert [case.wind for case in found.case if not case.ice] == [1.0, 0.0, 1.0, 1.0]
    assert any("0.4 of the wind pressure" in note for note in found.notes)
    warm = changed(MAST, (("rope", "wire", "expansion"), "12e-6 1/K"), (("ice",), ICE), *FITTING_ICED)
    cold = {"sets": ["service"], "temperature": "-20 degC", "iced_temperature": "-5 degC"}
    temperatures = [case.temperature for case in parse_scenario(dumps_tables(changed(warm, (("combinations",), cold)))).case]
    assert temperatures == pytest.approx([253.15, 268.15])


def test_an_accident_loses_each_cable_in_turn() -> None:
    found = scenario("eu-accidental")
    assert [case.without for case in found.case] == [("9 m N",), ("9 m SE",), ("9 m SW",)]
    assert found.case[0].name == "ACC G+0.2W without 9 m N"
    assert factors(found.case) == [(1.0, 0.2, 0.0)] * 3


def test_every_set_says_where_it_comes_from() -> None:
    found = scenario(*get_args(SetName), ice=True)
    for row in tables.rows("combinations"):
        assert any(row["line"] in note and row["source"] in note for note in found.notes)
    assert any("never factored" in note for note in found.notes)
    assert set(solved("service", "us-strength").notes) >= set(scenario("service", "us-strength").notes)


# ---------------------------------------------------------------- faults


@pytest.mark.parametrize(
    ("changes", "key", "says"),
    [
        ([(("combinations",), {"sets": ["service"]}), (("case",), [{"name": "service"}])], "case[0].name", "choose another name"),
        ([(("combinations",), {"sets": ["eu-accidental"]}), (("case",), [{"name": "ACC G+0.2W without 9 m N"}])], "case[0].name", "too"),
        ([(("combinations",), {"sets": ["us-strenth"]})], "combinations.sets[0]", 'did you mean "us-strength"'),
        ([(("combinations",), {"sets": []})], "combinations.sets", "at least one"),
        ([(("combinations",), {"iced_wind": 1.0})], "combinations.sets", "missing"),
        ([(("combinations",), {"sets": ["service"]}), (("wind",), ...)], "wind", 'case "service" has wind = 1'),
        ([(("combinations",), {"sets": ["service"]}), (("ice",), ICE)], "spar[0].fitting[0].iced_mass", 'case "service iced" has ice'),
        ([(("combinations",), {"sets": ["service"], "temperature": "0 degC"})], "rope.wire.expansion", "not at the setting's temperature"),
        (
            [(("combinations",), {"sets": ["service"], "iced_wind": 0.4}), (("ice",), {"class": "G2", "reduce_wind": True}), *FITTING_ICED],
            "combinations.iced_wind",
            "already",
        ),
        ([(("case",), [{"name": "a", "kind": "strength"}])], "case[0].kind", "is not one of"),
        ([(("allowables",), {"factored": {"lean": 1.0}})], "allowables.factored.lean", "unknown key"),
    ],
)
def test_faults(changes: list[tuple[tuple[str | int, ...], Any]], key: str, says: str) -> None:
    with pytest.raises(ScenarioError) as caught:
        parse_scenario(dumps_tables(changed(MAST, *changes)))
    told = {fault.key: fault.message for fault in caught.value.faults}
    assert says in told[key], told


# ---------------------------------------------------------------- who is shown what


def test_initial_tension_is_never_factored() -> None:
    """Unstressed lengths and the still-air state are those of a scenario without any factored case."""
    with_sets, plain = solved("service", "us-strength"), solved("service")
    assert with_sets.cables.unstressed_length[0] == pytest.approx(plain.cables.unstressed_length[0], rel=SUMMED)
    assert (with_sets.cables.unstressed_length == with_sets.cables.unstressed_length[0]).all()
    assert with_sets.cables.tension_anchor[0] == pytest.approx(plain.cables.tension_anchor[0], rel=SAME)


def test_crew_loads_are_those_of_the_service_cases_alone() -> None:
    both, service = solved("service", "eu-strength"), solved("service")
    crew = both.for_crew()
    assert both.loads_are == "service"
    for ours, alone in zip(crew.worst_anchors, service.worst_anchors, strict=True):
        assert ours.resultant.case == alone.resultant.case
        assert ours.resultant.peak_case == alone.resultant.peak_case == "service"
        assert ours.resultant.value == pytest.approx(alone.resultant.value, rel=SAME)
    for ours, alone in zip(crew.worst_cables, service.worst_cables, strict=True):
        assert ours.tension.value == pytest.approx(alone.tension.value, rel=SAME)
    assert crew.worst_feet[0].down.value == pytest.approx(service.worst_feet[0].down.value, rel=SAME)
    assert crew.sweep is not None
    assert crew.sweep.case == ("service",)


def test_engineering_worst_holds_all_cases() -> None:
    both = solved("service", "eu-strength")
    assert both.worst_feet[0].down.case == "STR 1.35G+1.5W"
    assert both.worst_feet[0].down.value > both.for_crew().worst_feet[0].down.value
    assert max(a.resultant.value for a in both.worst_anchors) > max(a.resultant.value for a in both.for_crew().worst_anchors)


def test_factored_loads_are_never_passed_off_as_service_ones() -> None:
    alone = solved("us-strength")
    assert alone.loads_are == "FACTORED"
    assert alone.for_crew() is alone
    assert "LOADS TOLD ARE FACTORED" in alone.warnings[0]
    assert not any("FACTORED" in w for w in solved("service", "us-strength").warnings)
    calm = solve(scenario("us-strength", case=[{"name": "calm", "wind": 0.0}]))
    assert calm.loads_are == "FACTORED"
    assert "no service case holds wind" in calm.warnings[0]


def test_files_say_of_what_kind_a_case_is() -> None:
    both = solved("service", "eu-strength")
    for text in (exchange_tables.anchors(both), exchange_tables.cables(both)):
        kinds = {row["case"].split(": ")[-1]: row["kind"] for row in csv.DictReader(io.StringIO(text))}
        assert kinds["setting"] == kinds["service"] == "service"
        assert kinds["STR 1.35G+1.5W"] == "factored"
    found = result.as_dict(both)
    assert {case["case"]: case["kind"] for case in found["cases"]}["STR G+1.5W"] == "factored"
    crew = both.for_crew()
    assert [a["peak_N"] for a in found["service_worst"]["anchors"]] == [a.resultant.peak for a in crew.worst_anchors]
    assert [c["tension_N"] for c in found["service_worst"]["cables"]] == [c.tension.value for c in crew.worst_cables]
    assert [a["peak_N"] for a in found["worst"]["anchors"]] == [a.resultant.peak for a in both.worst_anchors]
    assert result.as_dict(solved("service"))["service_worst"] is None


def test_sheet_and_terminal_say_whose_loads_they_show() -> None:
    for sets, said, head in ((("service", "eu-strength"), " in service cases", "pull"), (("us-strength",), ", FACTORED", "FACTORED\npull")):
        out = io.StringIO()
        terminal.report(solved(*sets), "SI", out)
        assert f"Greatest load of each anchor{said}" in out.getvalue()
        crew = solved(*sets).for_crew()
        assert head in [column.head for column in table.anchor_grid(crew, tongue("SI")).columns]
        assert (said == " in service cases") == any(row.label == "Loads" for row in box.entries(crew, tongue("SI")))


def test_sign_forces_moved_aside_keep_the_kind_of_their_case() -> None:
    sign = {"name": "sign", "at": "10 m", "mass": "9 kg", "area": "2 m2", "shape": "flat", "face": "0 deg", "width": "2 m", "height": "1 m"}
    document = changed(MAST, (("spar", 0, "fitting", 1), sign), (("wind", "directions"), ["0 deg"]))
    whole = parse_scenario(dumps_tables(changed(document, (("combinations",), {"sets": ["service", "us-strength"]}))))
    lines = lines_of(whole)
    assert any(line.aside for line in lines)
    assert all(whole.kind_of(line.name) == line.kind == ("service" if line.name.startswith("service") else "factored") for line in lines)


def test_written_cases_are_service_unless_they_say_otherwise() -> None:
    assert [case.service for case in scenario(case=[{"name": "a"}, {"name": "b", "kind": "factored"}]).case] == [True, False]
    assert solved().loads_are == ""
    assert solved().for_crew() is solved()


# ---------------------------------------------------------------- what they are judged by


def judged(allowables: dict[str, Any], *sets: str) -> dict[str, tuple[float, str]]:
    """Required factor and case of the tension of every cable."""
    document = changed(MAST, (("wind", "directions"), ["0 deg"]), (("combinations",), {"sets": list(sets)}), (("allowables",), allowables))
    return {f.thing: (f.required, f.case) for f in solve(parse_scenario(dumps_tables(document))).findings if f.quantity == "tension"}


def test_every_factor_of_factored_cases_is_of_something_judged() -> None:
    """Each key of `allowables.factored` reaches what it names; a base plate among them."""
    keys = {"cable": 1.1, "anchor": 1.2, "sliding": 1.3, "spar": 1.4, "bearing": 1.5}
    table = {"wind": {**MAST["wind"], "directions": ["0 deg"]}, "combinations": {"sets": ["eu-strength"]}, "allowables": {"factored": keys}}
    document = MAST | table | {"holdfast": {"h": {"kind": "tested", "pull": "1 MN"}}}
    document["anchor"] = [{**anchor, "holdfast": "h"} for anchor in MAST["anchor"]]
    plate = {"length": "0.5 m", "width": "0.5 m", "bearing": "1 MPa"}
    document["spar"] = [{**MAST["spar"][0], "plate": plate, "friction": 0.5}]
    found = solve(parse_scenario(dumps_tables(document))).findings
    assert {f.required for f in found if f.quantity != "lean" and f.verdict != "not judged"} == set(keys.values())


def test_factored_cases_are_judged_by_their_own_factor_where_given() -> None:
    assert {required for required, _ in judged({}, "eu-strength").values()} == {2.0}
    assert {required for required, _ in judged({"factored": {"cable": 1.5}}, "eu-strength").values()} == {1.5}
    assert {required for required, _ in judged({"cable": 2.5}, "eu-strength").values()} == {2.5}
    for sets in (("service",), ("us-allowable",)):
        assert {required for required, _ in judged({"factored": {"cable": 1.5}}, *sets).values()} == {2.0}


def test_of_several_kinds_the_one_nearest_to_its_own_allowable_governs() -> None:
    """A factored case pulls harder, but with a low factor required the service case is nearer to what is asked of it."""
    assert {case for _, case in judged({}, "service", "eu-strength").values()} <= {"STR 1.35G+1.5W", "STR G+1.5W"}
    assert {case for _, case in judged({"factored": {"cable": 0.5}}, "service", "eu-strength").values()} == {"service"}


def test_lean_is_asked_in_service_only() -> None:
    assert not [f for f in solved("us-strength").findings if f.quantity == "lean"]
    assert {f.case for f in solved("service", "eu-strength").findings if f.quantity == "lean"} == {"service"}
