"""`guys size`: the least of every holdfast, against closed forms, against a solve with that size, and in words."""

from __future__ import annotations

import json
import math
from pathlib import Path
from typing import Any

import numpy as np
import pytest
import scenarios_made as made

from guys import cli, parse_scenario
from guys.errors import ScenarioError
from guys.exchange import sizing as files
from guys.studies.sizing import Need, Pulls, Sizing, least, reserve, size, sizes

HALVED = 1e-9
"""What forty halvings leave of a size, relative, and the rounding of a few products."""
BLOCK = {"kind": "block", "mass": "900 kg", "friction": 0.5, "low": 0.8}
DEADMAN = {"kind": "deadman", "length": "1.8 m", "height": "0.3 m", "depth": "1.2 m", "soil": "loam"}
PICKET = {"kind": "picket", "pattern": "1", "soil": "loam", "steepest": "80 deg"}
SCREW = {"kind": "screw", "helix": ["250 mm"], "depth": "1.5 m", "soil": {"cohesion": "40 kPa"}}
TURNED = {"kind": "screw", "helix": ["250 mm"], "depth": "1.5 m", "soil": {"torque": "1 kN m"}, "shaft": {"square": "38 mm"}}
BESIDE = {**TURNED, "soil": {"cohesion": "40 kPa"}}
ROCK = {"kind": "rock", "bar": "20 mm", "bond_length": "0.5 m", "bond_stress": "1 MPa"}
TESTED = {"kind": "tested", "pull": "4 kN", "factor": 1.25}
ALL: dict[str, Any] = {"block": BLOCK, "dead": DEADMAN, "picket": PICKET, "screw": SCREW, "turned": TURNED, "rock": ROCK, "tested": TESTED}


def document(holdfasts: dict[str, Any], **tables: Any) -> dict[str, Any]:
    return made.mast(30.0, 200.0, holdfast=holdfasts, **tables)


@pytest.fixture(scope="module")
def sized() -> Sizing:
    return size(made.scenario(document(ALL)))


def need(found: Sizing, holdfast: str, what: str = "", anchor: int = 0) -> Need:
    return next(n for n in found.anchors[anchor].needs if n.holdfast == holdfast and (not what or n.size == what))


def test_sizes_by_closed_form(sized: Sizing) -> None:
    """What holds in proportion to its size needs 1.5 pulls' worth: a test, a torque at 10 / ft, a bond, a block by its sliding rule."""
    pull = sized.anchors[0].pull
    assert sized.anchors[0].proof == 1.5 * pull
    assert need(sized, "tested").needed == pytest.approx(1.5 * pull * 1.25, rel=HALVED)
    assert need(sized, "turned").needed == pytest.approx(1.5 * pull * 0.3048 / 10, rel=HALVED)
    assert need(sized, "rock").needed == pytest.approx(1.5 * pull / (math.pi * 0.02 * 1e6), rel=HALVED)
    block = need(sized, "block")
    rule = block.pull * (math.cos(block.angle) + 0.5 * math.sin(block.angle)) / (0.8 * 0.5 * 9.80665)
    assert block.needed == pytest.approx(1.5 * rule, rel=HALVED)
    A = 9 * 40e3 * math.pi / 4
    plate = need(sized, "screw", "widest plate")
    assert plate.needed == pytest.approx(math.sqrt(1.5 * pull / A), rel=HALVED)
    assert need(sized, "screw", "depth").needed == pytest.approx(1.5 * pull / (1.2 / 0.25 * 40e3 * math.pi / 4 * 0.25**2), rel=HALVED)


def test_what_is_sized_just_holds_when_solved(sized: Sizing) -> None:
    """A block of the mass needed on its anchor is within, one a thousandth lighter is past: the study and the checks ask the same."""
    mass = need(sized, "block").needed
    verdicts = []
    for share in (1 + 1e-6, 1 - 1e-3):
        whole = document({"block": {**BLOCK, "mass": f"{share * mass!r} kg"}})
        whole["anchor"][0]["holdfast"] = "block"
        verdicts.append(next(f for f in made.solved(whole).findings if f.thing == "anchor A").verdict)
    assert verdicts == ["within", "past"]


def test_the_least_change_comes_first(sized: Sizing) -> None:
    for anchor in sized.anchors:
        ratios = [each.more for each in anchor.needs]
        assert ratios == sorted(ratios)
        assert all(each.factor == pytest.approx(1.5, rel=1e-6) for each in anchor.needs if each.holds is not None and not each.pattern)
        assert all(each.low <= each.best <= each.high for each in anchor.needs if each.holds is not None)


def test_pickets_are_the_fewest_that_hold(sized: Sizing) -> None:
    """Combinations hold 3.1, 6.2, 8.0, 8.9 and 17.8 kN in loam."""
    pull, pickets = 1.5 * sized.anchors[0].pull, need(sized, "picket")
    holding = {"1": 3114, "1-1": 6227, "2-1": 8896, "1-1-1": 8007, "3-2-1": 17793}
    count = {"1": 1, "1-1": 2, "2-1": 3, "1-1-1": 3, "3-2-1": 6}
    fewest = min(count[pattern] for pattern, held in holding.items() if held >= pull)
    assert pickets.needed == fewest == count[pickets.pattern]


def test_nothing_will_do_is_said_with_the_reason() -> None:
    weak = {"dead": {**DEADMAN, "height": "0.1 m", "length": "0.8 m", "low": 0.05}, "flat": {**PICKET, "steepest": "5 deg"}}
    found = size(made.scenario(document(weak, allowables={"anchor": 3.0})))
    assert found.short == ("A", "B", "C")
    assert "no length up to 0.9 m (2.953 ft) will do: the ground before its face" in need(found, "dead").reason
    assert "steeper than 5°" in need(found, "flat").reason


def test_a_heavier_block_may_press_too_hard_and_is_sized_all_the_same() -> None:
    """Sizes are looked for from below: the least mass that slides not, though a much heavier one would press more than the ground bears."""
    block = {**BLOCK, "length": "1.2 m", "width": "1.2 m", "eye_height": "0.1 m", "bearing": "30 kPa"}
    table = made.scenario(document({"block": block})).holdfast["block"]
    [mass] = sizes(table)
    pulls = Pulls(np.array([3000.0]), np.radians([45.0]), np.array([1.5]), np.array([False]), ())
    found = least(mass, pulls)
    assert found is not None
    assert reserve(mass.put(found), pulls) == pytest.approx(1.0, rel=1e-6)
    assert reserve(mass.put(20 * found), pulls) == 0.0


def test_shared_anchors_and_the_default_factor_are_told(sized: Sizing) -> None:
    assert sized.warnings[0].startswith("anchor A holds 2 cables (9 m A, 17 m A), sized for their resultant: a single point of failure")
    assert "default of allowables.anchor" in sized.warnings[-1]
    assert any("cone of rock" in words for words in sized.not_checked)


def test_factored_cases_ask_for_their_own_factor() -> None:
    """The same pulls in a factored case ask for the factor of factored cases, as the findings do; the proof load goes with it."""
    found = {}
    for kind in ("service", "factored"):
        allowed = {"anchor": 1.5, "factored": {"anchor": 3.0}}
        table = document({"tested": TESTED}, case=[{"name": "storm", "kind": kind}], allowables=allowed)
        found[kind] = size(made.scenario(table)).anchors[0]
    for kind, factor in (("service", 1.5), ("factored", 3.0)):
        assert found[kind].proof == pytest.approx(factor * found[kind].pull)
        [tested] = found[kind].needs
        assert tested.required == factor
        assert tested.needed == pytest.approx(factor * found[kind].pull * 1.25, rel=HALVED)


def test_nothing_will_do_behind_a_weak_rod() -> None:
    found = size(made.scenario(document({"block": {**BLOCK, "rod_strength": "1 kN"}})))
    assert need(found, "block").holds is None
    assert need(found, "block").reason.endswith("will do: breaking of its rod, eye or strap")
    assert found.short == ("A", "B", "C")


def test_what_is_unusual_about_a_holdfast_is_told_when_it_is_sized() -> None:
    """Neighbours that share ground, too; that a holdfast of the truck holds no anchor yet is no news here."""
    whole = document({"dead": DEADMAN, "screw": {**SCREW, "depth": "0.5 m"}})
    whole["anchor"].append({**whole["anchor"][0], "name": "beside", "bearing": "3 deg"})
    for anchor in whole["anchor"]:
        anchor["holdfast"] = "dead"
    told = size(made.scenario(whole)).warnings
    assert any("their holdfasts" in words and "share ground" in words for words in told)
    assert any("less than 3 diameters deep" in words for words in told)
    assert not any("no anchor is held by it" in words for words in told)


def test_a_screw_with_a_shaft_is_told_the_torque_to_reach_beside_its_depth() -> None:
    found = size(made.scenario(document({"screw": {**SCREW, "shaft": {"square": "38 mm"}}})))
    torque = need(found, "screw", "torque to reach")
    assert torque.needed == pytest.approx(1.5 * found.anchors[0].pull * 0.3048 / 10, rel=HALVED)
    assert math.isnan(torque.given)
    assert {n.size for n in found.anchors[0].needs} == {"depth", "widest plate", "torque to reach"}


def test_a_deadman_is_told_where_it_lies(sized: Sizing) -> None:
    """Its trench, the way behind the anchor and its depth make a triangle in the line of the greatest pull."""
    lies = sized.anchors[0].trench(need(sized, "dead"))
    assert lies is not None
    behind, along = lies
    assert math.hypot(behind, 1.2) == pytest.approx(along)
    assert 1.2 / behind == pytest.approx(math.tan(sized.anchors[0].angle))
    told = next(n for n in files.as_dict(sized)["anchors"][0]["needs"] if n["holdfast"] == "dead")
    assert (told["behind_anchor_m"], told["trench_m"]) == lies
    assert sized.anchors[0].trench(need(sized, "block")) is None


def test_torque_beside_soil_is_sized_too() -> None:
    table = {key: value for key, value in BESIDE.items() if key != "soil"} | {"torque": "1 kN m"}
    found = size(made.scenario(document({"turned": table})))
    assert need(found, "turned").needed == pytest.approx(1.5 * found.anchors[0].pull * 0.3048 / 10, rel=HALVED)


def test_files_hold_what_was_found(sized: Sizing) -> None:
    told = json.loads(files.as_text(sized))
    assert told["format"] == "guys-size/1"
    first = told["anchors"][0]
    assert first["needs"][0]["needed"] == sized.anchors[0].needs[0].needed
    assert first["proof_load_N"] == 1.5 * first["resultant_N"]
    lines = files.as_table(sized).splitlines()
    assert lines[0].split(",") == list(files.HEAD)
    assert len(lines) == 1 + sum(len(anchor.needs) for anchor in sized.anchors)


def test_without_holdfasts_there_is_nothing_to_size() -> None:
    with pytest.raises(ScenarioError, match="nothing to size"):
        size(parse_scenario(made.text(made.mast(30.0))))


def test_the_command_prints_a_table_or_json(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "mast.toml"
    file.write_text(made.text(document({"block": BLOCK, "picket": PICKET})), encoding="utf-8")
    assert cli.run(["size", str(file), "--units", "both", "--out", str(tmp_path / "out")]) == 0
    printed = capsys.readouterr().out
    assert "Anchor A: pull " in printed
    assert "proof load" in printed
    assert "single point of failure" in printed
    assert {path.name for path in (tmp_path / "out").iterdir()} == {"size.json", "size.csv"}
    assert cli.run(["size", str(file), "--json"]) == 0
    assert json.loads(capsys.readouterr().out)["format"] == "guys-size/1"


def test_a_mast_that_falls_in_a_case_ends_with_four(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "losing.toml"
    file.write_text(made.text({**made.losing(), "holdfast": {"block": BLOCK}}), encoding="utf-8")
    assert cli.run(["size", str(file)]) == 4
    assert "no stable equilibrium" in capsys.readouterr().out
