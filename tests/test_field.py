"""The crew's pages: lengths by hand, tensions at a temperature solved another way, readings, acceptance, proof loads, files and faults."""

from __future__ import annotations

import csv
import io
import json
import math
from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
import pytest
import scenarios_made as made

from guys import cli
from guys.drawing.field import draw_field
from guys.exchange import field as exchange
from guys.scenario import Scenario, parse_scenario
from guys.scenario.field import FieldWork
from guys.scenario.model import Case
from guys.studies.field import Field, acceptance, field, order, proof_factor
from guys.studies.standing import solve

MICROMETRE = 1e-6
PAGES = ("field-1-lengths", "field-2-tensions", "field-3-readings", "field-4-acceptance")


@pytest.fixture(scope="module")
def plan() -> Scenario:
    return made.scenario(made.mast())


@pytest.fixture(scope="module")
def found(plan: Scenario) -> Field:
    return field(plan)


def without_wind(plan: Scenario) -> Scenario:
    return plan.model_copy(update={"case": (Case(name="still", wind=0.0, temperature=plan.setting.temperature),)})


def with_field(plan: Scenario, **keys: Any) -> Scenario:
    return without_wind(plan).model_copy(update={"field": FieldWork(**keys)})


def test_lengths_add_up_and_are_those_of_statics(found: Field) -> None:
    """Stretch of a taut cable by hand: mean tension over EA along the chord."""
    cut, ropes = found.cut, [found.scenario.rope[c.rope] for c in found.scenario.cable]
    assert cut.chord + cut.sag - cut.stretch == pytest.approx(cut.unstressed, abs=MICROMETRE)
    top = found.solution.cables.tension_top[0]
    by_hand = 0.5 * (found.tension + top) * cut.unstressed / [r.stiffness for r in ropes]
    flat = (found.cut.sag / found.cut.chord).max()
    assert cut.stretch == pytest.approx(by_hand, rel=10 * flat + 1e-4, abs=2e-6)
    weight = np.array([r.mass for r in ropes]) * 9.80665
    level = np.hypot(*found.still.chord[0, :, :2].T)
    parabola = cut.chord * (weight * level / found.tension) ** 2 / 24
    assert cut.sag == pytest.approx(parabola, rel=0.05, abs=MICROMETRE)


def test_rope_to_cut_with_hardware_of_a_rope_of_its_own(plan: Scenario) -> None:
    rope = plan.cable[0].rope
    plan = without_wind(plan)
    work = FieldWork.model_validate({"hardware": 0.4, "turn_back": 0.5, "rope": {rope: {"hardware": 0.6, "pitch": 0.002}}})
    changed = plan.model_copy(update={"field": work})
    cut = field(changed).cut
    own = np.array([c.rope == rope for c in changed.cable])
    assert cut.rope == pytest.approx(cut.unstressed - np.where(own, 0.6, 0.4) + 0.5)
    assert cut.by_turn[own] == pytest.approx(0.004)
    assert np.isnan(cut.by_turn[~own]).all()


def test_tensions_at_a_temperature_are_those_of_a_case_at_that_temperature(plan: Scenario, found: Field) -> None:
    """The same through `guys solve`: a windless case at -20 degC."""
    cold = made.scenario({**made.mast(), "case": [{"name": "frost", "wind": 0.0, "temperature": -20.0}]})
    k = int(np.argmin(found.still.temperature))
    assert found.still.temperature[k] == pytest.approx(253.15)
    assert found.still.tension[k] == pytest.approx(solve(cold).cables.tension_anchor[1], rel=1e-8)
    assert found.still.temperature[0] == plan.setting.temperature
    assert found.still.tension[0] == pytest.approx(solve(plan).cables.tension_anchor[0], rel=1e-9)
    assert (np.diff(found.still.tension[1:], axis=0) < 0).all()


def test_readings_tell_accepted_tensions(found: Field) -> None:
    """Times of a taut string within its sag; twice as many cycles, twice the time and half the error of timing."""
    masses = np.array([found.scenario.rope[c.rope].mass for c in found.scenario.cable])
    string = 20 * 2 * found.cut.chord * np.sqrt(masses / found.tension)
    assert found.readings["swing"][0] == pytest.approx(string, rel=0.01)
    less, more = found.accepted["swing"]
    assert less / more == pytest.approx(math.sqrt(1.1 / 0.9), rel=0.01)
    twice = field(with_field(found.scenario, cycles=40, mass_error=0.0))
    once = field(with_field(found.scenario, cycles=20, mass_error=0.0))
    assert twice.readings["pulse"] == pytest.approx(2 * once.readings["pulse"])
    assert twice.errors["pulse"] == pytest.approx(0.5 * once.errors["pulse"])


def test_order_goes_up_and_across() -> None:
    plan = made.scenario(made.mast(sides=4))
    levels = order(plan)
    assert [level.at for level in levels] == sorted(level.at for level in levels)
    assert sorted(name for level in levels for name in level.cables) == sorted(c.name for c in plan.cable)
    places = {a.name: (a.east, a.north) for a in plan.anchor}
    to = {c.name: places[c.to.anchor] for c in plan.cable}  # type: ignore[union-attr]
    for level in levels:
        a, b = (to[name] for name in level.cables[:2])
        assert a[0] * b[0] + a[1] * b[1] < 0


def test_acceptance_and_proof_by_hand(plan: Scenario, found: Field) -> None:
    """0.25 % of the height; half a degree in 10 ft, at most 5 degrees; proof by the factor required, or the user's."""
    for place in acceptance(plan):
        assert place.off == pytest.approx(0.0025 * place.at)
        assert math.degrees(place.twist) == pytest.approx(min(0.5 * place.at / 3.048, 5.0))
    pulls = np.array([a.resultant.peak for a in found.solution.worst_anchors])
    assert found.proof == pytest.approx(plan.allowables.anchor * pulls)
    assert proof_factor(with_field(plan, proof=2.0)) == 2.0


def test_warnings(plan: Scenario) -> None:
    short = field(with_field(plan, take_up=1e-3, hardware=500.0))
    assert any("half the turnbuckle's travel" in w for w in short.warnings)
    assert any("no rope is left" in w for w in short.warnings)
    assert not field(with_field(plan, take_up=10.0)).warnings


def test_files_say_the_same(found: Field) -> None:
    told = json.loads(exchange.as_text(found))
    rows = list(csv.DictReader(io.StringIO(exchange.as_table(found))))
    assert len(rows) == len(found.scenario.cable) * len(found.still.temperature) == len(told["settings"])
    assert [float(r["tension_N"]) for r in rows] == [s["tension_N"] for s in told["settings"]]
    assert [float(r["rope_to_cut_m"]) for r in csv.DictReader(io.StringIO(exchange.lengths_table(found)))] == found.cut.rope.tolist()
    first, *rest = exchange.form(found).splitlines()
    assert first == f"# scenario {found.scenario.sha256}"
    assert [line.split(",")[0] for line in rest] == ["cable", *(c.name for c in found.scenario.cable)]


def test_pages_in_both_systems(found: Field) -> None:
    for units in ("SI", "US", "both"):
        assert tuple(draw_field(found, "A4", units)) == PAGES  # type: ignore[arg-type]
    slack = replace(found, still=replace(found.still, slack=np.ones_like(found.still.slack)))
    assert tuple(draw_field(slack, "letter", "US")) == PAGES


@pytest.mark.usefixtures("one_format")
def test_the_command_writes_every_file(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "mast.toml"
    file.write_text(made.text(made.mast()), encoding="utf-8")
    assert cli.run(["field", str(file), "--out", str(tmp_path / "out"), "--units", "both"]) == 0
    drawn = {f"{stem}.{kind}" for stem in PAGES for kind in ("pdf", "svg", "png")}
    assert {p.name for p in (tmp_path / "out").iterdir()} == {"field.json", "field.csv", "lengths.csv", "readings.csv"} | drawn
    assert "Rope to cut" in capsys.readouterr().out
    assert cli.run(["field", str(file), "--json"]) == 0
    assert json.loads(capsys.readouterr().out)["format"] == "guys-field/1"


def test_without_cables() -> None:
    pole = made.scenario({"title": "pole", "spar": [made.spar(base="fixed")], "case": [{"name": "still", "wind": 0.0}]})
    found = field(pole)
    assert not exchange.as_dict(found)["lengths"]
    assert tuple(draw_field(found, "A4", "SI")) == PAGES


@pytest.mark.parametrize(("lines", "fault"), [
    ('coldest = "30 degC"\nhottest = "10 degC"', "field.hottest: is not above coldest"),
    ('step = "0.1 K"', "field.step: gives more than 40"),
    ('step = "10 degC"', "no difference of temperature"),
    ('rope.strnd = { pitch = "2 mm" }', "no cable is made of a rope of that name"),
    ("cycles = 0", "field.cycles"),
    ('time_error = "2 mm"', "field.time_error"),
])  # fmt: skip
def test_faults(lines: str, fault: str) -> None:
    from guys.errors import ScenarioError

    with pytest.raises(ScenarioError) as raised:
        parse_scenario(f"{made.text(made.mast())}\n[field]\n{lines}\n")
    assert fault in str(raised.value) or any(fault in str(f) for f in raised.value.faults)
