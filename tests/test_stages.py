"""`guys stages`: what is there at a stage, the same as a file written for it, statics of a bare column, rules and files."""

from __future__ import annotations

import json
import math
from functools import partial
from pathlib import Path

import numpy as np
import pytest
import scenarios_made as made
from hypothesis import given
from hypothesis import strategies as some

from guys import cli
from guys.errors import ScenarioError
from guys.exchange import stages as exchange
from guys.scenario import part_built
from guys.scenario.stage import Stage
from guys.studies import cells, stages
from guys.studies.limit import limits
from guys.studies.standing import solve

STILL_ALIKE = 1e-9
"""Two files of one structure differ by the rounding of the search, well below its 1e-9 of the reference force."""


APART = math.radians(120.0)
"""Bearings of the circle of winds a stage may see, fewer than by default, for speed; those listed are among them."""


@pytest.fixture(autouse=True)
def few_bearings(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(stages, "limits", partial(limits, apart=APART))


def build_up(document: made.Document) -> stages.Stages:
    return stages.build_up(made.scenario(document))


def two_sections(*directions: float, **tables: object) -> made.Document:
    """The 18 m mast in two sections, the upper one more slender."""
    document = made.mast(*directions, **tables)
    document["spar"][0]["section"] = [made.tube(8.0), made.tube(10.0, diameter=0.07)]
    return document


# ---------------------------------------------------------------- what is there


@given(height=some.floats(0.01, 18.0), fast=some.sets(some.sampled_from(["9 m A", "9 m B", "17 m C"])), chosen=some.booleans())
def test_what_is_there_ends_at_the_height(height: float, fast: set[str], chosen: bool) -> None:
    whole = made.scenario(two_sections(0.0))
    there = part_built.part_built(whole, Stage(name="s", up_to=height, cables=sorted(fast) if chosen else None))
    assert there.spar[0].length == pytest.approx(height, rel=1e-12)
    assert all(a.tube == b.tube for a, b in zip(there.spar[0].section, whole.spar[0].section, strict=False))
    expected = [c for c in whole.cable if c.from_.at <= height and (not chosen or c.name in fast)]
    assert there.cable == tuple(expected)
    assert {a.name for a in there.anchor} == {c.to.anchor for c in expected}
    assert [f.name for f in there.spar[0].fitting] == (["panel"] if height == 18.0 else [])


def test_what_stands_on_a_part_that_is_not_there_is_not_there_either() -> None:
    whole = made.scenario(made.boom())
    low = part_built.part_built(whole, Stage(name="s", up_to=1.4))
    assert [spar.name for spar in low.spar] == ["mast"]
    assert low.cable == ()
    bare = part_built.part_built(whole, Stage(name="s", up_to={"boom": 0.0}))
    assert [spar.name for spar in bare.spar] == ["mast"]
    assert [c.name for c in bare.cable] == ["guy S", "guy N", "guy E"]
    short = part_built.part_built(whole, Stage(name="s", up_to={"boom": 5.0}))
    assert [spar.length for spar in short.spar] == [12.0, 5.0]
    assert "topping stay" not in [c.name for c in short.cable]


# ---------------------------------------------------------------- numbers


def test_a_stage_is_the_file_written_for_it() -> None:
    """Cut in the middle of the upper section, without the panel and the upper guys, in a wind and at a temperature of its own."""
    stage = {"name": "lower", "up_to": 12.0, "wind": 18.0, "temperature": 2.0}
    found = build_up(two_sections(0.0, 40.0, stage=[stage])).built[0]
    written = two_sections(0.0, 40.0, case=[{"name": "wind", "temperature": 2.0}])
    written["spar"][0] |= {"section": [made.tube(8.0), made.tube(4.0, diameter=0.07)], "fitting": []}
    written["cable"] = [c for c in written["cable"] if c["name"].startswith("9 m")]
    written["wind"]["speed"] = 18.0
    alone = made.scenario(written)
    solution, limit = solve(alone), limits(alone, apart=APART).worst[0]
    assert found.solution is not None
    assert np.allclose(found.solution.cables.tension_anchor, solution.cables.tension_anchor, rtol=STILL_ALIKE, atol=0)
    assert found.verdict == (cells.PAST if solution.past else cells.WITHIN)
    assert found.least is not None
    assert found.least.factor == pytest.approx(min(f.factor for f in solution.findings if f.thing == found.least.thing), rel=STILL_ALIKE)
    assert found.may_see is not None
    assert (found.may_see.governs, found.may_see.wind_from) == (limit.governs, limit.wind_from)
    assert found.may_see.speed == pytest.approx(limit.speed, rel=1e-4)  # to which a limit is found


def test_a_bare_column_on_a_fixed_base_by_hand() -> None:
    """Without guys: M = q c D L²/2 at the foot, more by the weight W times 2/5 of the head's displacement q c D L⁴/8EI; it may see the wind
    at which N/A + M/Z reaches the yield stress over 1.67 (statics, and the cantilever's deflection curve)."""
    document = made.mast(0.0, base="fixed", allowables={"lean": 30.0}, stage=[{"name": "bare", "up_to": 6.0, "cables": [], "wind": 20.0}])
    found = build_up(document).built[0]
    bore, area = 0.089 - 2 * 0.0032, math.pi * 0.0858 * 0.0032
    modulus = math.pi * (0.089**4 - bore**4) / (32 * 0.089)
    load = 0.5 * 1.25 * 1.2 * 0.089
    material = found.scenario.material["steel"]
    assert material.yield_ is not None
    weight = material.density * 9.80665 * area * 6.0
    more = 1 + 0.4 * weight * 6.0**2 / (4 * material.modulus * modulus * 0.089 / 2)
    bends = 1e-3  # what is left: the weight's moment bends it again, (1 %)²
    assert found.solution is not None
    moment = found.solution.bases.moment[1, 0]
    assert np.hypot(*moment[:2]) == pytest.approx(more * load * 20.0**2 * 6.0**2 / 2, rel=bends)
    assert found.may_see is not None
    expected = math.sqrt((material.yield_ / 1.67 - weight / area) * modulus / (more * load * 6.0**2 / 2))
    assert "stress" in found.may_see.why
    leans = 0.005  # at that wind the head is over by 3 degrees, so that it meets less of it
    assert found.may_see.speed == pytest.approx(expected, rel=leans)


def test_more_cables_fast_is_another_stage_and_none_falls_on_a_pin() -> None:
    """A pinned mast without guys has nothing that holds it; on two of three no tensions of theirs balance (statics)."""
    rows = [{"name": "none", "cables": []}, {"name": "two", "cables": ["guy A", "guy B"]}, {"name": "all"}]
    found = build_up(made.ring_mast(3, stage=rows))
    assert [built.verdict >= cells.FALLS for built in found.built] == [True, True, False]
    assert [built.still for built in found.built] == [True, True, False]
    assert [None if built.may_see is None else built.may_see.speed > 0 for built in found.built] == [False, None, True]
    assert "do not balance" in found.built[1].reason


def test_a_stage_that_cannot_be_set_falls_and_says_why() -> None:
    document = made.mast(0.0, stage=[{"name": "first"}])
    document["cable"][0]["tension"] = 1.0
    found = build_up(document).built[0]
    assert (found.verdict, found.solution, found.may_see) == (cells.FALLS, None, None)
    assert "cannot be set" in found.reason
    assert "own weight gives at least" in found.reason


def test_without_wind_a_stage_is_judged_in_still_air() -> None:
    found = build_up(made.mast(stage=[{"name": "first", "up_to": 12.0}]))
    assert (found.built[0].wind, found.built[0].may_see) == (None, None)
    assert found.built[0].verdict == cells.WITHIN


# ---------------------------------------------------------------- rules, files, statuses


def test_every_fault_of_the_stages_with_its_key() -> None:
    rows = [
        {"name": "a", "up_to": 19.0},
        {"name": "a", "up_to": {"mats": "3 m"}, "cables": ["9 m A", "9 m Q", "9 m A"]},
        {"name": "b", "up_to": 9.0, "cables": ["17 m A"], "wind": 9.0},
        {"name": "c", "up_to": 0.0},
    ]
    with pytest.raises(ScenarioError) as caught:
        made.scenario(made.mast(stage=rows))
    told = {fault.key: fault.message for fault in caught.value.faults}
    assert "beyond spar" in told["stage[0].up_to"]
    assert "another stage" in told["stage[1].name"]
    assert 'did you mean "mast"' in told["stage[1].up_to.mats"]
    assert 'no cable is named "9 m Q"' in told["stage[1].cables[1]"]
    assert "named twice" in told["stage[1].cables[2]"]
    assert "made fast at 17 m" in told["stage[2].cables[0]"]
    assert "no [wind]" in told["stage[2].wind"]
    assert "nothing stands" in told["stage[3].up_to"]
    assert all(fault.line for fault in caught.value.faults)
    assert len(told) == 8


def test_a_file_without_stages_is_told_what_to_write(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "a.toml"
    file.write_text(made.text(made.mast(0.0)))
    assert cli.run(["stages", str(file)]) == 2
    assert "give [[stage]] with name" in capsys.readouterr().err


@pytest.mark.usefixtures("one_format")
def test_files_table_and_exit_status(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "a.toml"
    rows = [{"name": "no guys", "cables": [], "wind": 5.0}, {"name": "up", "wind": 5.0}]
    file.write_text(made.text(made.ring_mast(3, 0.0, stage=rows)))
    assert cli.run(["stages", str(file), "--out", str(tmp_path / "out")]) == 4
    printed = capsys.readouterr().out
    assert "no wind" in printed
    assert "no guys: mast" in printed
    assert {p.name for p in (tmp_path / "out").iterdir()} == {f"stages.{kind}" for kind in ("json", "csv", "pdf", "svg", "png")}
    told = json.loads((tmp_path / "out" / "stages.json").read_text())
    assert told["stages"][0]["verdict"] == "falls"
    assert told["stages"][1]["spars"] == [{"name": "mast", "stands_m": 10.0}]
    assert told["stages"][1]["may_see"]["speed_m_s"] > 5.0


def test_the_table_says_what_the_json_says() -> None:
    found = build_up(made.ring_mast(4, stage=[{"name": "up", "wind": 8.0}]))
    told, (head, row) = exchange.as_dict(found)["stages"][0], [line.split(",") for line in exchange.as_table(found).splitlines()]
    written = dict(zip(head, row, strict=True))
    assert float(written["may_see_m_s"]) == told["may_see"]["speed_m_s"]
    assert float(written["greatest_pull_N"]) == told["greatest_pull"]["resultant_N"]
    assert (written["stage"], written["verdict"], written["cables"]) == ("up", told["verdict"], "4")
