"""`guys ring`: the trade-off of the guys' angle against closed forms, and what is refused."""

from __future__ import annotations

import json
import math
from pathlib import Path

import numpy as np
import pytest
import scenarios_made as made

from guys import cli, parse_scenario
from guys.errors import ScenarioError
from guys.exchange import ring as files
from guys.scenario import Scenario
from guys.scenario.ring import ring
from guys.studies.ring import KEYS, rings

HEIGHT = 10.0
SLOPE = 5e-3
"""Relative: tensions at which the guys stay taut stiffen the head by T/L beside EA/L, and the head moves by so much of the guys' length."""


def rigid(speed: float = 12.0) -> Scenario:
    """A weightless rigid mast of 10 m on straight, weightless guys from its head: all by closed form."""
    section = made.weightless(HEIGHT) | {"drag": 1.2, "width": 0.1}
    mast = made.spar(length=HEIGHT, rigid=True, section=[section])
    guys = [made.cable(f"guy {a}", HEIGHT, a, tension=3000.0) for a in "ABC"]
    ring = made.anchors(8.0, 0.0, 120.0, 240.0)
    return parse_scenario(made.text(made.document([mast], ring, guys, straight=True, wind=made.wind(0.0, 90.0, speed=speed))))


def test_the_head_sways_least_at_a_radius_of_root_two_heights() -> None:
    """k = n/2 EA/h sin a cos^2 a is greatest at tan^2 a = 1/2, a = 35.3 deg: radius 1.414 h (closed form; common practice)."""
    found = rings(rigid(), (3, 4), (0.7 * HEIGHT, 2.1 * HEIGHT), 15)
    for w in range(2):
        least = found.radius[np.nanargmin(found.values["lean"][w])]
        assert abs(least - math.sqrt(2) * HEIGHT) <= (found.radius[1] - found.radius[0]) * 1.001


def test_thrust_is_the_uplift_of_all_guys() -> None:
    """Still air: n T sin a on the foot, T sin a on each anchor; rope is n h / sin a; ground is n/2 r^2 sin(2 pi/n)."""
    found = rings(rigid(speed=0.01), (3, 4), (5.0, 15.0), 3)
    for w, n in enumerate((3, 4)):
        for r, radius in enumerate(found.radius):
            length = math.hypot(radius, HEIGHT)
            assert found.values["thrust"][w, r] == pytest.approx(n * 3000 * HEIGHT / length, rel=SLOPE)
            assert found.values["uplift"][w, r] == pytest.approx(3000 * HEIGHT / length, rel=SLOPE)
            assert found.values["rope"][w, r] == pytest.approx(n * length, rel=SLOPE)
    assert found.footprint[1, 0] == pytest.approx(2 * 5.0**2)


def test_a_ring_as_drawn_is_the_drawing() -> None:
    again = ring(rigid(), 3, 8.0)
    for one, other in zip(again.anchor, rigid().anchor, strict=True):
        assert (one.east, one.north, one.level) == pytest.approx((other.east, other.north, other.level))
    assert [c.name for c in again.cable] == ["10 m 1", "10 m 2", "10 m 3"]


def test_what_does_not_fit_is_refused() -> None:
    with pytest.raises(ScenarioError, match="a second spar"):
        rings(made.scenario(made.boom()))
    cut = made.mast(0.0)
    cut["cable"][0] = made.cable("cut", 9.0, "A", length=14.0)
    with pytest.raises(ScenarioError, match="which fits one radius"):
        rings(made.scenario(cut))


@pytest.mark.usefixtures("one_format")
def test_the_command_and_its_files(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (tmp_path / "mast.toml").write_text(made.text(made.mast(0.0)), encoding="utf-8")
    arguments = ["ring", str(tmp_path / "mast.toml"), "--ways", "3,4", "--radius", "6 m", "12 m", "--steps", "3", "--workers", "1"]
    assert cli.run([*arguments, "--out", str(tmp_path / "out")]) == 0
    assert "Rings of anchors" in capsys.readouterr().out
    rows = (tmp_path / "out" / "ring.csv").read_text(encoding="utf-8").splitlines()
    assert rows[0].split(",") == list(files.HEAD)
    assert len(rows) == 1 + 2 * 3
    assert len(files.HEAD) == 4 + len(KEYS)
    assert cli.run(["ring", str(tmp_path / "mast.toml"), "--ways", "2"]) == 2


def test_anchors_of_a_ring_are_held_as_the_first_of_the_layout(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    layout = '[[layout]]\nname = "soft"\nanchor = [{ name = "A", give = "50 kN/m" }]\n'
    (tmp_path / "mast.toml").write_text(made.text(made.ring_mast(3, 0.0)) + layout, encoding="utf-8")
    arguments = ["ring", str(tmp_path / "mast.toml"), "--ways", "4", "--radius", "6 m", "12 m", "--steps", "2", "--workers", "1"]
    assert cli.run([*arguments, "--layout", "soft", "--json"]) == 0
    soft = json.loads(capsys.readouterr().out)
    assert soft["title"].endswith("soft")
    assert cli.run([*arguments, "--json"]) == 0
    drawn = json.loads(capsys.readouterr().out)
    assert soft["rings"][0]["lean_deg"] > 1.05 * drawn["rings"][0]["lean_deg"]
    assert cli.run([*arguments, "--layout", "other"]) == 2
