"""Six whole structures against an independent reference calculation, this project.

The expected values in `tests/independent/expected.json` come from another method than the program's: an exact spatial rod (no elements),
solved by shooting, with closed-form elastic catenaries; a general finite-element library agreed with it within 0.003 % on tensions and
0.02 % on displacements.  The scenarios beside them are what was calculated, g = 9.80665 m/s2.
"""

from __future__ import annotations

import json
import math
from functools import cache
from pathlib import Path
from typing import Any

import numpy as np
import pytest

from guys import Solution, read_scenario, solve
from guys.doors import common

FOLDER = Path(__file__).parent / "independent"
EXPECTED: dict[str, Any] = json.loads((FOLDER / "expected.json").read_text(encoding="utf-8"))["scenarios"]
NAMES = sorted(EXPECTED)

FORCE = 1e-4
"""Of the greatest tension of the case: six elements a span leave 1e-5, a program that is right must come within 1e-3."""
BASE = 1e-4
"""Of the greatest base force of the case; as for tensions."""
MOMENT = 5e-3
"""Of the greatest moment on the ground, or of a metre times a hundredth of the base force where that is all but nothing."""
MOVE = 5e-4
"""Of the greatest displacement of the case."""
MICROMETRES = 2e-5
"""[m] differences below it are of no account whatever the scale."""
LENGTH = 1e-6
"""Relative: unstressed lengths given, or found from tensions."""


@cache
def solved(name: str) -> Solution:
    return solve(read_scenario(FOLDER / f"{name}.toml"))


CASES = [(name, k) for name in NAMES for k in range(len(EXPECTED[name]["cases"]))]


def both(name: str, k: int) -> tuple[dict[str, Any], Solution, int]:
    """The expected case, our solution and the row of the case in it."""
    theirs, ours = EXPECTED[name]["cases"][k], solved(name)
    wind = theirs["wind_from_deg"]
    same = [
        c == theirs["case"] and (bool(np.isnan(w)) if wind is None else abs(w - wind) < 1e-6)
        for c, w in zip(ours.case, np.degrees(ours.wind_from), strict=True)
    ]
    return theirs, ours, same.index(True)


def greatest(case: dict[str, Any]) -> float:
    return max(max(c["tension_anchor_N"], c["tension_top_N"]) for c in case["cables"].values())


@pytest.mark.parametrize("name", NAMES)
def test_exit_status_and_states(name: str) -> None:
    assert common.exit_status(solved(name)) in EXPECTED[name]["exit"]
    for k in range(len(EXPECTED[name]["cases"])):
        theirs, ours, row = both(name, k)
        assert ours.state[row] in theirs["state"]
        assert ours.out_of_balance[row] < 1e-9


@pytest.mark.parametrize(("name", "k"), CASES)
def test_cables_and_anchors(name: str, k: int) -> None:
    theirs, ours, row = both(name, k)
    scale = greatest(theirs)
    for c, cable in enumerate(ours.cables.name):
        want = theirs["cables"][cable]
        ends = [ours.cables.tension_anchor[row, c], ours.cables.tension_top[row, c]]
        assert ends == pytest.approx([want["tension_anchor_N"], want["tension_top_N"]], abs=FORCE * scale), cable
        for key, got in (("force_on_anchor_N", ours.cables.force_on_anchor), ("force_on_spar_N", ours.cables.force_on_spar)):
            if key in want:
                assert np.abs(got[row, c] - want[key]).max() < FORCE * scale, (cable, key)
        assert ours.cables.unstressed_length[row, c] == pytest.approx(want["unstressed_length_m"], rel=LENGTH)
        if want.get("slack") is not None:
            assert bool(ours.cables.slack[row, c]) == want["slack"], cable
    for a, anchor in enumerate(ours.anchors.name):
        want = theirs["anchors"][anchor]
        assert np.abs(ours.anchors.pull[row, a] - want["pull_N"]).max() < FORCE * scale
        got = [ours.anchors.uplift[row, a], ours.anchors.horizontal[row, a], ours.anchors.resultant[row, a]]
        assert got == pytest.approx([want["uplift_N"], want["horizontal_N"], want["resultant_N"]], abs=FORCE * scale)


@pytest.mark.parametrize(("name", "k"), CASES)
def test_bases(name: str, k: int) -> None:
    theirs, ours, row = both(name, k)
    force = max(math.hypot(*b["force_on_ground_N"]) for b in theirs["bases"].values())
    moment = max((math.hypot(*b["moment_on_ground_Nm"]) for b in theirs["bases"].values() if "moment_on_ground_Nm" in b), default=0.0)
    for f, spar in enumerate(ours.bases.spar):
        want = theirs["bases"][spar]
        assert np.abs(ours.bases.force[row, f] - want["force_on_ground_N"]).max() < BASE * force
        if "moment_on_ground_Nm" in want:
            assert np.abs(ours.bases.moment[row, f] - want["moment_on_ground_Nm"]).max() < MOMENT * max(moment, 0.01 * force)


def between(station: np.ndarray, value: np.ndarray, at: float) -> np.ndarray:
    """The cubic through the four nearest stations (Lagrange)."""
    known, first = np.unique(station, return_index=True)
    near = np.argsort(np.abs(known - at))[:4]
    s, v = known[near], value[first[near]]
    share = [np.prod([(at - b) / (a - b) for b in s if b != a]) for a in s]
    return np.asarray(share @ v)


@pytest.mark.parametrize(("name", "k"), CASES)
def test_displacements(name: str, k: int) -> None:
    theirs, ours, row = both(name, k)
    largest = max(abs(x) for s in theirs["spars"].values() for u in s["displacement_m"].values() for x in u)
    for line in ours.spars:
        for station, want in theirs["spars"].get(line.name, {"displacement_m": {}})["displacement_m"].items():
            got = between(line.station, line.displacement[row], float(station))
            assert np.abs(got - want).max() < max(MOVE * largest, MICROMETRES)


def test_every_expected_number_is_compared_with_something() -> None:
    """The files hold what the tests above read: cables, anchors, bases and spars of every case."""
    for name, k in CASES:
        theirs, ours, _ = both(name, k)
        assert set(theirs["cables"]) == set(ours.cables.name)
        assert set(theirs["anchors"]) == set(ours.anchors.name)
        assert set(theirs["bases"]) == set(ours.bases.spar)
        assert set(theirs["spars"]) <= {line.name for line in ours.spars}
        assert theirs["spars"]
