"""Tensions as read: from lengths to readings and back, errors by hand, what to change, impossible readings, and the command."""

from __future__ import annotations

import json
import math
from dataclasses import replace
from functools import cache
from pathlib import Path

import numpy as np
import pytest
import scenarios_made as made

from guys import cli, parse_scenario, sounding
from guys.constants import ZERO_CELSIUS
from guys.errors import ScenarioError
from guys.exchange import measured as exchange
from guys.exchange.field import form
from guys.rotation import Array
from guys.scenario import Scenario
from guys.scenario.field import FieldWork
from guys.scenario.readings import Reading, Readings
from guys.setting import find
from guys.sounding import WAYS, Way
from guys.structure import build
from guys.studies.field import Field, Still, field, in_still_air
from guys.studies.measured import Measured, _with_lengths, measured

COLD = float(ZERO_CELSIUS) + 2.0
EXACT = FieldWork(time_error=1e-7, sag_error=1e-9, sight_error=1e-9, gauge_error=1e-9, mass_error=0.0, pitch=0.002)
"""Readings so good that they alone tell the lengths."""


STILL = [{"name": "still", "wind": 0.0}]
RIGID = made.ring_mast(3, tension=2000.0, case=STILL)


def plan_of(work: FieldWork, document: made.Document | None = None) -> Field:
    return field(made.scenario(made.mast(case=STILL) if document is None else document).model_copy(update={"field": work}))


@cache
def exact() -> Field:
    return plan_of(EXACT)


def state_at(scenario: Scenario, length: Array, temperature: float) -> Still:
    """In still air with lengths of one's own."""
    return in_still_air(find(build(_with_lengths(scenario, length))), (temperature,))


def taken(plan: Field, still: Still, *ways: Way, cycles: int = 20, factor: Array | float = 1.0) -> Readings:
    """Readings a crew would take."""
    count = {way: cycles if way in sounding.TIMED else 1 for way in WAYS}
    span, pull = still.span(0, plan.scenario), still.tension[0] * factor
    of = [
        Reading(c.name, way, float(sounding.reading(way, span, pull)[k]) * count[way], count[way], float(still.temperature[0]), 2 + k)
        for way in ways
        for k, c in enumerate(plan.scenario.cable)
    ]
    return Readings("readings.csv", tuple(of), True)


@pytest.mark.parametrize(("ways", "off"), [
    (("swing",), (2, 2, 2, -1, -1, -1)), (("pulse", "sight"), (-1, -1, -1, 2, 2, 2)), (("gauge",), (2.0, -1.0, 0.5, -2.0, 1.0, 1.5)),
])  # fmt: skip
def test_lengths_come_back_from_what_they_make_a_crew_read(ways: tuple[Way, ...], off: tuple[float, ...]) -> None:
    """Lengths off by millimetres; readings at another temperature than the setting's.

    Those of a gauge each by its own, with the mast out of plumb.  Times and sights are told on the chords as planned; so there the mast
    stays plumb, but sinks by a hundredth of a millimetre or two.
    """
    plan = exact()
    length = plan.cut.unstressed + 1e-3 * np.array(off)
    still = state_at(plan.scenario, length, COLD)
    found = measured(plan, taken(plan, still, *ways))
    assert found.found == pytest.approx(still.tension[0], rel=1e-3)
    assert found.length == pytest.approx(length, abs=5e-5)
    assert found.change == pytest.approx(plan.cut.unstressed - length, abs=5e-5)
    assert found.turns == pytest.approx(found.change / 0.004)
    at_setting = state_at(plan.scenario, length, float(plan.still.temperature[0]))
    assert found.after.cables.tension_anchor[0] == pytest.approx(at_setting.tension[0], rel=2e-3)


def test_changes_made_give_what_was_wanted() -> None:
    plan = exact()
    length = plan.cut.unstressed + 2e-3
    found = measured(plan, taken(plan, state_at(plan.scenario, length, COLD), "swing"))
    mended = state_at(plan.scenario, length + found.change, COLD)
    assert mended.tension[0] == pytest.approx(found.wanted, rel=2e-3)


def test_balance_takes_out_what_misreading_puts_in() -> None:
    """Three guys of one level, alike, on a plumb pinned mast: one tension balances, so what is found is the mean of what is read, and its
    error that of one reading over the root of three."""
    work = FieldWork(gauge_error=0.02, plumb_error=1e-6)
    plan = plan_of(work, RIGID)
    off = np.array([1.03, 0.99, 1.0])
    found = measured(plan, taken(plan, plan.still, "gauge", factor=off))
    weight = (0.02 * off) ** -2.0
    mean = float(weight @ (plan.tension * off)) / weight.sum()
    assert found.found == pytest.approx(np.full(3, mean), rel=1e-3)
    assert found.found_error == pytest.approx(np.full(3, 2000.0 * weight.sum() ** -0.5), rel=1e-2)


def test_readings_of_one_cable_are_weighed_together() -> None:
    work = FieldWork(gauge_error=0.04, mass_error=0.0, time_error=0.2)
    plan = plan_of(work, RIGID)
    once, twice = (measured(plan, taken(plan, plan.still, *ways)) for ways in (("gauge",), ("gauge", "gauge")))
    assert twice.error == pytest.approx(once.error / math.sqrt(2))
    assert once.error == pytest.approx(0.04 * once.read)
    heavier = measured(plan_of(FieldWork(time_error=1e-9, mass_error=0.03), RIGID), taken(plan, plan.still, "swing"))
    assert heavier.error == pytest.approx(0.03 * heavier.read, rel=1e-4)


def test_what_is_told_of_bad_readings() -> None:
    plan = plan_of(FieldWork(gauge_error=0.01), RIGID)
    first = np.where(np.arange(len(plan.tension)) == 0, 1.3, 1.0)
    found = measured(plan, replace(taken(plan, plan.still, "gauge", factor=first), signed=False))
    assert any("balances the others" in w and plan.scenario.cable[0].name in w for w in found.warnings)
    assert any("do not say which scenario" in w for w in found.warnings)
    assert found.off == (plan.scenario.cable[0].name,)
    once, again = (taken(plan, plan.still, "gauge", factor=share) for share in (1.0, 1.2))
    apart = replace(once, of=once.of + again.of)
    assert any("further apart than their errors" in w for w in measured(plan, apart).warnings)


def test_readings_that_will_not_do() -> None:
    plan = exact()
    good = taken(plan, plan.still, "swing")
    first = good.of[0]
    for bad, words in (
        (replace(first, value=1e4), "no tension of this cable"), (replace(first, value=0.1), "breaking load"),
        (replace(first, by="gauge", value=0.01, cycles=1), "no tension of this cable"),
    ):  # fmt: skip
        with pytest.raises(ScenarioError, match=words):
            measured(plan, replace(good, of=(bad, *good.of[1:])))
    with pytest.raises(ScenarioError, match=f"no reading of {good.of[1].cable}"):
        measured(plan, replace(good, of=(first, *good.of[2:])))


@pytest.fixture(scope="module")
def filled() -> tuple[str, str]:
    """A scenario and its form, filled in with the returns as set."""
    text = f'{made.text(made.mast(0.0, case=STILL))}\n[field]\npitch = "2 mm"\ntake_up = "300 mm"\n'
    plan = field(parse_scenario(text))
    head, columns, *rows = form(plan).splitlines()
    as_set = dict(zip((c.name for c in plan.scenario.cable), plan.readings["pulse"][0], strict=True))
    full = [f"{n},{by},{as_set[n]:.4f} s,{cycles},15 degC" for n, by, _, cycles, _ in (row.split(",") for row in rows)]
    return text, "\n".join([head, columns, *full])


@pytest.fixture
def files(filled: tuple[str, str], tmp_path: Path) -> tuple[Path, Path]:
    """The same in files."""
    paths = tmp_path / "mast.toml", tmp_path / "filled.csv"
    for path, text in zip(paths, filled, strict=True):
        path.write_text(text, encoding="utf-8")
    return paths


@pytest.mark.usefixtures("one_format")
def test_the_form_filled_in_as_set_asks_for_no_change(files: tuple[Path, Path], capsys: pytest.CaptureFixture[str]) -> None:
    scenario, form = files
    out = scenario.parent / "found"
    capsys.readouterr()
    assert cli.run(["field", str(scenario), "--measured", str(form), "--out", str(out), "--units", "both"]) == 0
    assert "change within its error" in capsys.readouterr().out
    assert {"measured.json", "measured.csv", "field-5-as-read.pdf", "field.json"} <= {p.name for p in out.iterdir()}
    told = json.loads((out / "measured.json").read_text(encoding="utf-8"))
    for row in told["cables"]:
        assert row["read_N"] == pytest.approx(row["wanted_N"], rel=1e-3)
        assert abs(row["let_out_m"]) < 1e-4
        assert abs(row["turns"]) < 0.1
    for row in told["anchors"]:
        assert row["resultant_found_N"] == pytest.approx(row["resultant_planned_N"], rel=1e-3)
    assert cli.run(["field", str(scenario), "--measured", str(form), "--json"]) == 0
    assert json.loads(capsys.readouterr().out) == told


def test_a_tension_off_by_more_than_is_accepted_ends_with_three(files: tuple[Path, Path], capsys: pytest.CaptureFixture[str]) -> None:
    scenario, form = files
    changed = form.read_text(encoding="utf-8").replace(",20,15 degC", ",26,15 degC")
    form.write_text(changed, encoding="utf-8")
    assert cli.run(["field", str(scenario), "--measured", str(form)]) == 3
    assert "past what is accepted" in capsys.readouterr().out


def test_a_file_for_another_scenario_is_refused(files: tuple[Path, Path], capsys: pytest.CaptureFixture[str]) -> None:
    scenario, form = files
    scenario.write_text(scenario.read_text(encoding="utf-8") + "# changed\n", encoding="utf-8")
    assert cli.run(["field", str(scenario), "--measured", str(form)]) == 2
    assert "another scenario" in capsys.readouterr().err


def test_files_say_the_same() -> None:
    plan = exact()
    found: Measured = measured(plan, taken(plan, plan.still, "swing"))
    told = exchange.as_dict(found)
    assert [r["read_N"] for r in told["cables"]] == found.read.tolist()
    assert len(exchange.as_table(found).splitlines()) == 1 + len(plan.scenario.cable)
