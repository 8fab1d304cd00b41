"""Plumb tensions: statics of the horizontal balance, the answer that `setting.plumb` gives, and what cannot be adjusted."""

from __future__ import annotations

import json
import math
from pathlib import Path

import numpy as np
import pytest
import scenarios_made as made

from guys import cli
from guys.errors import ScenarioError
from guys.studies.plumbing import plumb

UPRIGHT = math.radians(0.001)
"""A third of a millimetre over 18 m: below what anyone sees."""


def uneven() -> made.Document:
    """A mast with one anchor nearer and higher than the others."""
    document = made.mast()
    document["anchor"][1] |= {"radius": 8.0, "level": 1.5}
    return document


def test_alike_guys_need_no_change() -> None:
    found = plumb(made.scenario(made.mast()))
    assert np.abs(found.change).max() < 1e-4  # the mast shortens by less than that of its length
    assert found.lean[0] < UPRIGHT


def test_uneven_anchors_pull_the_mast_over_and_plumb_tensions_do_not() -> None:
    found = plumb(made.scenario(uneven()))
    assert found.lean[0] > math.radians(0.2)
    assert found.plumb_lean[0] < UPRIGHT
    steep = [k for k, name in enumerate(found.name) if name.endswith("B")]
    assert all(found.change[k] > found.change[j] for k in steep for j in range(len(found.name)) if j not in steep)


def test_horizontal_pulls_of_a_level_balance() -> None:
    """One level on a rigid mast: the pulls of its guys along the chords, as weightless cables, add up to nothing sideways."""
    document = made.stayed(made.spar(length=10.0, rigid=True, section=[made.weightless(10.0)]), 0.0, 120.0, 240.0, straight=True)
    document["anchor"][1] |= {"radius": 6.0}
    scenario = made.scenario(document)
    found = plumb(scenario)
    level = np.array([[a.east, a.north] for a in scenario.anchor])
    pull = found.plumb[:, None] * level / np.hypot(np.hypot(*level.T), 10.0)[:, None]
    assert np.abs(pull.sum(axis=0)).max() < 1e-6 * found.plumb.max()


def test_it_is_the_setting_of_plumb() -> None:
    document = uneven()
    document["setting"] = {"temperature": 15.0, "plumb": True}
    solved = made.solved(document)
    assert plumb(made.scenario(uneven())).plumb == pytest.approx(solved.cables.tension_anchor[0])


def test_cables_by_length_leave_nothing_to_adjust() -> None:
    document = made.stayed(made.spar(), 0.0, 120.0, 240.0, length=20.2)
    with pytest.raises(ScenarioError, match="nothing to adjust"):
        plumb(made.scenario(document))


def test_the_command(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (tmp_path / "mast.toml").write_text(made.text(uneven()), encoding="utf-8")
    assert cli.run(["plumb", str(tmp_path / "mast.toml"), "--out", str(tmp_path / "out")]) in (0, 3)
    told = capsys.readouterr().out
    assert "for plumb" in told
    content = json.loads((tmp_path / "out/plumb.json").read_text(encoding="utf-8"))
    assert [row["cable"] for row in content["cables"]] == [c["name"] for c in uneven()["cable"]]
    assert (tmp_path / "out/plumb.csv").read_text(encoding="utf-8").startswith("cable,tension_asked_N,tension_plumb_N,change\n")
