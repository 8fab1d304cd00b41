"""The result file against the keys of its format, and against the arrays it was written from."""

from __future__ import annotations

import hashlib
import json
import math
from dataclasses import replace
from typing import Any

import numpy as np
import pytest
import scenarios_made as made

from guys.exchange import result
from guys.results import Solution

FORMAT_KEYS: dict[str, set[str]] = {
    "top": {"format", "title", "guys_version", "scenario_sha256", "cases", "worst"},
    "case": {"layout", "case", "wind_from_deg", "state", "out_of_balance", "iterations", "cables", "anchors", "bases", "spars"},
    "cables": {"name", "tension_anchor_N", "tension_top_N", "slack", "force_on_anchor_N", "force_on_spar_N", "unstressed_length_m"},
    "anchors": {"name", "pull_N", "uplift_N", "horizontal_N", "resultant_N"},
    "bases": {"spar", "force_on_ground_N", "moment_on_ground_Nm"},
    "heels": {"spar", "force_on_ground_N", "moment_on_ground_Nm", "carried_by"},
    "spars": {"name", "station_m", "displacement_m", "axial_N", "bending_Nm", "torsion_Nm"},
    "worst cables": {"name", "tension_N", "case", "wind_from_deg", "strength_N", "factor", "peak_N", "peak_wind_from_deg"},
    "worst anchors": {"name", "resultant_N", "uplift_N", "horizontal_N", "case", "wind_from_deg", "peak_N", "peak_wind_from_deg"},
}
"""Keys the format promises; others may stand beside them."""


def written(s: Solution) -> dict[str, Any]:
    """The text as a strict reader takes it: NaN and infinities are no JSON."""

    def refuse(constant: str) -> None:
        raise AssertionError(f"{constant} is no JSON")

    out: dict[str, Any] = json.loads(result.as_text(s), parse_constant=refuse)
    return out


DOCUMENTS = {
    "mast": made.losing(),
    "boom": made.boom(),
    "pylon": made.pylon(),
    "column": made.document([made.spar(base="fixed")], still=True),
}


@pytest.mark.parametrize("name", DOCUMENTS)
def test_every_key_of_the_format_is_there(name: str) -> None:
    content = written(made.solved(DOCUMENTS[name]))
    assert content.keys() >= FORMAT_KEYS["top"]
    assert content["worst"].keys() >= {"cables", "anchors", "bases"}
    for case in content["cases"]:
        assert case.keys() >= FORMAT_KEYS["case"]
        for kind in ("cables", "anchors", "bases", "heels", "spars"):
            for entry in case[kind]:
                assert entry.keys() >= FORMAT_KEYS[kind]
    for kind in ("cables", "anchors"):
        for entry in content["worst"][kind]:
            assert entry.keys() >= FORMAT_KEYS[f"worst {kind}"]


def test_head_says_what_was_solved() -> None:
    content = written(made.solved(made.losing()))
    assert content["format"] == "guys-result/1"
    assert content["scenario_sha256"] == hashlib.sha256(made.text(made.losing()).encode()).hexdigest()
    assert content["cases"][0]["case"] == "setting"
    assert [c["wind_from_deg"] for c in content["cases"]] == [None, 30.0, 200.0, None, None]
    assert {c["layout"] for c in content["cases"]} == {"as drawn"}


def test_numbers_are_those_of_the_solution() -> None:
    s = made.solved(made.boom())
    case = written(s)["cases"][1]
    for k, cable in enumerate(case["cables"]):
        assert cable["name"] == s.cables.name[k]
        assert cable["tension_anchor_N"] == s.cables.tension_anchor[1, k]
        assert cable["tension_top_N"] == s.cables.tension_top[1, k]
        assert cable["force_on_spar_N"] == s.cables.force_on_spar[1, k].tolist()
        assert cable["unstressed_length_m"] == s.cables.unstressed_length[1, k]
        assert cable["slack"] is bool(s.cables.slack[1, k])
    for k, anchor in enumerate(case["anchors"]):
        assert anchor["pull_N"] == s.anchors.pull[1, k].tolist()
        assert anchor["resultant_N"] == pytest.approx(math.hypot(*anchor["pull_N"]))
        assert anchor["uplift_N"] == anchor["pull_N"][2]
    assert case["bases"][0]["force_on_ground_N"] == s.bases.force[1, 0].tolist()
    assert case["heels"][0]["carried_by"] == "mast"
    assert case["heels"][0]["moment_on_ground_Nm"] == s.heels.moment[1, 0].tolist()
    for line, spar in zip(s.spars, case["spars"], strict=True):
        assert spar["station_m"] == line.station.tolist()
        assert spar["displacement_m"] == line.displacement[1].tolist()
        assert spar["bending_Nm"] == line.bending[1].tolist()
        assert spar["axial_N"] == line.axial[1].tolist()


def test_a_case_that_falls_has_empty_lists_and_a_reason() -> None:
    s = made.solved(made.losing())
    for k, case in enumerate(written(s)["cases"]):
        gone = s.state[k] == "none"
        assert case["state"] == s.state[k]
        assert all((case[kind] == []) == gone for kind in ("cables", "anchors", "bases", "spars"))
        assert ("reason" in case) == gone
        if gone:
            assert "falls toward" in case["reason"]
            assert case["out_of_balance"] is None
    assert "none" in s.state


def test_cables_taken_away_are_left_out_and_named() -> None:
    spare = written(made.solved(made.losing()))["cases"][-1]
    assert spare["without"] == ["9 m B"]
    assert "9 m B" not in [c["name"] for c in spare["cables"]]
    assert len(spare["cables"]) == 5


def test_notes_of_free_spins_are_written() -> None:
    case = written(made.solved(made.mast(base="ball")))["cases"][1]
    assert case["state"] == "neutral"
    assert case["note"] == "mast may spin freely about its own axis"


def test_factor_belongs_to_the_listed_tension_and_peak_factor_to_the_peak() -> None:
    for worst in written(made.solved(made.mast(0.0)))["worst"]["cables"]:
        assert worst["factor"] == pytest.approx(worst["strength_N"] / worst["tension_N"], rel=1e-12)
        assert worst["peak_factor"] == pytest.approx(worst["strength_N"] / worst["peak_N"], rel=1e-12)
        assert worst["peak_N"] >= worst["tension_N"]
        assert 0.0 <= worst["peak_wind_from_deg"] < 360.0


def test_both_self_checks_are_written() -> None:
    check = written(made.solved(made.mast(0.0)))["self_check"]
    assert check["balance"] < 1e-9
    assert check["resolve"] == "agrees"
    assert check["resolve_difference"] < 1e-6
    assert check["resolved_case"] == "design"


def test_sweep_findings_and_words_are_written() -> None:
    s = made.solved(made.mast(0.0))
    content = written(s)
    assert content["sweep"][0]["wind_from_deg"] == sorted(content["sweep"][0]["wind_from_deg"])
    assert set(content["sweep"][0]["tension_N"]) == set(s.cables.name)
    assert [f["verdict"] for f in content["findings"]] == [f.verdict for f in s.findings]
    assert content["cautions"] == list(s.cautions)
    assert content["not_checked"] == list(s.not_checked)
    assert content["warnings"] == list(s.warnings)


@pytest.mark.parametrize(
    ("radians", "degrees"),
    [(math.radians(30.0), 30.0), (math.radians(1e-12), 0.0), (2 * math.pi - 1e-14, 0.0), (-math.radians(90.0), 270.0), (math.nan, None)],
)
def test_bearings_are_clean_degrees_in_the_circle(radians: float, degrees: float | None) -> None:
    assert result.bearing(radians) == degrees


def test_numbers_without_bound_or_meaning_are_null() -> None:
    assert [result.number(x) for x in (1.5, math.nan, math.inf)] == [1.5, None, None]


def test_words_in_any_script_stay_readable() -> None:
    s = made.solved(made.mast())
    other = replace(s, scenario=s.scenario.model_copy(update={"title": 'Mât "Ærø" – Größe 北'}))
    assert written(other)["title"] == 'Mât "Ærø" – Größe 北'
    assert "北" in result.as_text(other)


def test_the_same_solution_gives_the_same_bytes() -> None:
    s = made.solved(made.boom())
    assert result.as_text(s) == result.as_text(s)
    assert result.as_text(s).endswith("}\n")
    assert np.isfinite(s.check.balance)
