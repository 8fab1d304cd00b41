"""Anchors judged: holding along the pull of every case, by the low value, in the case of the least factor."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import Any

import numpy as np
import pytest
import scenarios_made as made

from guys import recovery
from guys.checks import allowables
from guys.checks.anchors import demands, unchecked
from guys.results import Finding, Solution

ROUNDING = 1e-9
"""Of a few products in doubles, relative."""


def held(holdfast: dict[str, Any], **tables: Any) -> Solution:
    document = made.mast(30.0, 200.0, holdfast={"h": holdfast}, **tables)
    document["anchor"][0]["holdfast"] = "h"
    return made.solved(document)


def finding(solution: Solution, anchor: str = "A") -> Finding:
    return next(f for f in solution.findings if f.thing == f"anchor {anchor}")


def test_a_block_is_judged_by_its_low_value_along_the_pull() -> None:
    """Capacity times (cos a + mu sin a) over mu W is `low`, a being the angle of the pull that governs: one of the cases solved for."""
    s = held({"kind": "block", "mass": "900 kg", "friction": 0.5, "low": 0.8, "high": 1.1})
    f = finding(s)
    assert f.factor == pytest.approx(f.capacity / f.demand, rel=ROUNDING)
    assert f.governs == "sliding"
    assert "best 1.25 and high 1.38 times that" in f.why
    pull = s.anchors.pull[:, 0]
    a = np.arctan2(pull[:, 2], np.hypot(pull[:, 0], pull[:, 1]))
    listed = 0.8 * 0.5 * 900 * 9.80665 / (np.cos(a) + 0.5 * np.sin(a)) / np.linalg.norm(pull, axis=1)
    assert f.factor <= listed.min() * (1 + ROUNDING)
    assert f.factor == pytest.approx(listed.min(), rel=0.05), "the refined peak is not far from the listed winds"
    assert finding(s, "B").verdict == "not judged"


def test_the_least_factor_governs_and_not_the_greatest_pull() -> None:
    """A test at 80 degrees speaks for none of the pulls but a steep one: a direction it does not speak for keeps it from being judged."""
    f = finding(held({"kind": "tested", "pull": "100 kN", "test_angle": "80 deg"}))
    assert f.verdict == "not judged"
    assert f.governs == "pulled more than 30° off the direction of the test"
    assert math.isnan(f.factor)


def test_past_stays_past_where_other_cases_are_not_judged() -> None:
    """Pickets much too weak, taken up to an angle that only some pulls keep: past in those."""
    angles = held({"kind": "block", "mass": "900 kg", "friction": 0.5}).anchors.pull[:, 0]
    steepness = np.degrees(np.arctan2(angles[:, 2], np.hypot(angles[:, 0], angles[:, 1])))
    middle = float(np.mean([steepness.min(), steepness.max()]))
    weak = finding(held({"kind": "picket", "pattern": "1", "soil": "loam", "steepest": f"{middle!r} deg", "low": 0.01}))
    strong = finding(
        held({"kind": "picket", "pattern": "3-2-1", "soil": "loam", "steepest": f"{middle!r} deg"}, allowables={"anchor": 0.1})
    )
    assert weak.verdict == "past"
    assert strong.verdict == "not judged"
    assert "which draws a picket" in strong.governs


def test_what_hangs_slack_where_a_holdfast_is_not_judged_is_no_load() -> None:
    """In the first case the anchor is pulled downward: by slack cables alone that is no load, by a taut one it is not judged."""
    deadman = {"kind": "deadman", "length": "1.8 m", "height": "0.3 m", "depth": "1.2 m", "soil": "loam"}
    document = made.mast(30.0, 200.0, holdfast={"h": deadman})
    document["anchor"][0]["holdfast"] = "h"
    cases = made.cases(document)
    forces = recovery.forces(cases.problem, cases.state, cases.found)
    pull = forces.pull.copy()
    pull[0, 0] = [0.0, 20.0, -10.0]
    verdicts = []
    for slack in (True, False):
        some = replace(forces, pull=pull, slack=np.full_like(forces.slack, slack))
        found = allowables.findings(demands(cases.problem.structure, some), cases.problem.loads.lines)
        verdicts.append(next(f for f in found if f.thing == "anchor A").verdict)
    assert verdicts == ["within", "not judged"]


def test_what_is_not_looked_at_is_listed() -> None:
    s = held({"kind": "block", "mass": "900 kg", "friction": 0.5})
    told = list(unchecked(s.scenario))
    assert told[0] == "what holds B, C: no holdfast given"
    assert told[1].startswith("holdfast h: tipping along its length (give length, eye_height); ")
    assert set(told) <= set(s.not_checked)


def test_what_was_taken_for_granted_is_told() -> None:
    """A memory mark reaches every output: the column of the table for steep pulls rests on one."""
    s = held({"kind": "deadman", "length": "1.8 m", "height": "0.3 m", "depth": "1.2 m", "soil": "loam"})
    (told,) = [note for note in s.notes if note.startswith("holdfast h: ")]
    assert "dry loam: factor 1" in told
    assert "from memory" in told


def test_an_allowable_of_one_is_met_at_the_pull_itself() -> None:
    """A holdfast tested to just what is pulled has a factor of one; a newton less is past."""
    first = finding(held({"kind": "tested", "pull": "50 kN"}))
    at, below = (
        finding(held({"kind": "tested", "pull": f"{first.demand + more!r} N"}, allowables={"anchor": 1.0})).verdict for more in (1e-6, -1.0)
    )
    assert (at, below) == ("within", "past")


def test_a_weak_rod_governs_whatever_the_ground_holds() -> None:
    """Breaking loads are not spread: low, best and high of a holdfast never pass that of its rod."""
    heavy = {"kind": "block", "mass": "90 t", "friction": 0.5, "low": 0.5, "high": 2.0}
    f = finding(held({**heavy, "rod_strength": "40 kN"}))
    assert (f.capacity, f.governs) == (40e3, "breaking of its rod, eye or strap")
    assert f.factor == pytest.approx(40e3 / f.demand)
    strong, without = finding(held({**heavy, "rod_strength": "9 MN"})), finding(held(heavy))
    assert strong == without
    assert strong.governs == "sliding"
    between = finding(held({**heavy, "rod_strength": f"{1.5 * without.capacity!r} N"}))
    assert (between.capacity, between.governs) == (without.capacity, "sliding"), "the low value is judged, whatever the best would break"


def test_what_a_rod_is_made_of_is_asked_for_but_of_a_test() -> None:
    """A pull test has pulled the rod too."""
    told = held({"kind": "block", "mass": "900 kg", "friction": 0.5}).not_checked
    assert "rod, eye or strap of h (give rod_strength)" in told
    for known in ({"kind": "tested", "pull": "50 kN"}, {"kind": "block", "mass": "900 kg", "friction": 0.5, "rod_strength": "50 kN"}):
        assert not any("rod_strength" in words for words in held(known).not_checked)
