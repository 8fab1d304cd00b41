"""`[[layout]]`: what moves, what stays, and every fault of it at its key."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import pytest
import scenarios_made as made

from guys import cli, parse_scenario
from guys.errors import ScenarioError
from guys.scenario import Scenario, layouts

WIDE = '\n[[layout]]\nname = "wide"\nanchor = [{ name = "A", bearing = "15 deg", radius = "9 m" }]\n'
ROUNDING = 1e-12
"""[m] of coordinates of tens of metres."""


def mast(*layout: str, anchors: Any = None, extra: str = "") -> Scenario:
    document = made.mast()
    if anchors is not None:
        document["anchor"] = anchors
    return parse_scenario(made.text(document) + extra + "".join(f"\n[[layout]]\n{each}\n" for each in layout))


def place(scenario: Scenario, name: str) -> tuple[float, float, float]:
    anchor = next(a for a in scenario.anchor if a.name == name)
    return anchor.east, anchor.north, anchor.level


def faults(*layout: str, extra: str = "") -> dict[str, str]:
    with pytest.raises(ScenarioError) as caught:
        mast(*layout, extra=extra)
    return {fault.key: fault.message for fault in caught.value.faults}


def test_only_the_anchors_of_a_layout_differ() -> None:
    scenario = mast('name = "wide"\nanchor = [{ name = "A", bearing = "90 deg", radius = "12 m" }]')
    (wide,) = scenario.layouts
    assert (scenario.layout, wide.layout) == ("as drawn", "wide")
    assert place(wide, "A") == pytest.approx((12.0, 0.0, 0.0), abs=ROUNDING)
    assert wide.title == f"{scenario.title} – wide"
    same = {name for name in Scenario.model_fields if getattr(scenario, name) == getattr(wide, name)}
    assert set(Scenario.model_fields) - same == {"anchor", "layout", "layouts", "title"}
    assert [place(wide, n) for n in "BC"] == [place(scenario, n) for n in "BC"]
    assert layouts.every(scenario) == (scenario, wide)


def test_a_new_place_leaves_the_old_level_and_keeps_give() -> None:
    anchors = made.anchors(8.0, 0.0, 120.0, 240.0, level=1.5, give=2e6)
    moved = mast('name = "b"\nanchor = [{ name = "A", east = "1 m", north = "9 m" }]', anchors=anchors).layouts[0]
    assert place(moved, "A") == (1.0, 9.0, 0.0)
    assert moved.anchor[0].give == 2e6
    assert any("level of the first spar's foot" in text for text in layouts.warnings(mast(
        'name = "b"\nanchor = [{ name = "A", east = "1 m", north = "9 m" }]', anchors=anchors)))  # fmt: skip


def test_a_holdfast_alone_keeps_the_place() -> None:
    held = '\n[holdfast.heavy]\nkind = "tested"\npull = "30 kN"\n'
    scenario = mast('name = "b"\nanchor = [{ name = "B", holdfast = "heavy" }]', extra=held)
    (other,) = scenario.layouts
    assert place(other, "B") == place(scenario, "B")
    assert [a.holdfast for a in other.anchor] == [None, "heavy", None]
    assert not [text for text in (*scenario.warnings, *layouts.warnings(scenario)) if "no anchor is held by it" in text]


def test_every_fault_is_told_at_its_key() -> None:
    found = faults(
        'name = "as drawn"\nanchor = [{ name = "A", bearing = "5 deg" }]',
        'name = "x"\nanchor = [{ name = "Q", east = "1 m", north = "2 m" }, { name = "A", east = "0 m", north = "0 m" }]',
        'name = "x"\nanchor = [{ name = "A" }, { name = "B", lat = 51.0, lon = 3.0 }, { name = "B", radius = "1 m", bearing = "3 deg" }]',
        'name = "y"\nanchor = []',
        'name = "z"\nanchor = [{ name = "A", holdfast = "none", bearing = "3 deg", radius = "9 m" }]',
    )
    told = {
        "layout[0].name": "names of the anchors above",
        "layout[0].anchor[0]": "has bearing; give bearing and radius",
        "layout[1].anchor[0].name": 'no anchor is named "Q"',
        "layout[1]": "lies on the axis of spar",
        "layout[2].name": "names another layout",
        "layout[2].anchor[0]": "nothing differs",
        "layout[2].anchor[2].name": "given twice in this layout",
        "layout[4].anchor[0].holdfast": 'no holdfast is named "none"',
    }
    for key, words in told.items():
        assert words.replace("names of", "name of") in found[key], key
    assert "layout[3].anchor" in found


def test_degrees_need_a_site_in_a_layout_too() -> None:
    found = faults('name = "x"\nanchor = [{ name = "B", lat = 51.0, lon = 3.0 }]')
    assert "need [site] with crs and origin" in found["layout[0].anchor[0]"]


def test_on_a_site_degrees_become_metres_and_levels_come_from_the_ground(tmp_path: Path) -> None:
    ground = "east,north,level\n" + "".join(f"{e},{n},{0.1 * e:.3f}\n" for e in range(-30, 31, 15) for n in range(-30, 31, 15))
    (tmp_path / "ground.csv").write_text(ground, encoding="utf-8")
    site = '\n[site]\ncrs = "EPSG:32631"\norigin = { lat = 51.0, lon = 3.0, level = "0 m" }\nground = "ground.csv"\n'
    text = made.text(made.mast()) + site + (
        '\n[[layout]]\nname = "east"\nanchor = [{ name = "A", east = "12 m", north = "3 m" }, { name = "B", lat = 51.0, lon = 3.0002 }]\n'
        '[[layout]]\nname = "far"\nanchor = [{ name = "A", east = "0 m", north = "28 m", level = "7 m" }]\n'
    )  # fmt: skip
    path = tmp_path / "site.toml"
    path.write_text(text, encoding="utf-8")
    east, far = parse_scenario(text, str(path)).layouts
    assert place(east, "A") == pytest.approx((12.0, 3.0, 1.2), abs=1e-9)
    assert place(far, "A") == (0.0, 28.0, 7.0)
    metres = 0.0002 * 111_320 * 0.6293  # a degree of longitude at 51 degrees north, WGS 84, within 0.3 % of a sphere's cosine
    assert place(east, "B")[0] == pytest.approx(metres, rel=4e-3)
    path.write_text(text.replace('"12 m", north = "3 m"', '"90 m", north = "3 m"'), encoding="utf-8")
    with pytest.raises(ScenarioError) as caught:
        parse_scenario(path.read_text(encoding="utf-8"), str(path))
    (fault,) = caught.value.faults
    assert fault.key == "layout[0].anchor[0]"
    assert "outside the surveyed ground" in fault.message


def test_validate_echoes_what_moves(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    path = tmp_path / "mast.toml"
    path.write_text(made.text(made.mast()) + WIDE, encoding="utf-8")
    assert cli.run(["validate", str(path)]) == 0
    told = [line for line in capsys.readouterr().out.splitlines() if line.startswith("layout")]
    assert told == ['layout "wide", anchor "A": bearing 15 deg, radius 9 m (29.53 ft), level 0 m (0 ft)']


@pytest.mark.usefixtures("one_format")
def test_one_layout_is_solved_by_name(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    path = tmp_path / "mast.toml"
    path.write_text(made.text(made.mast()) + WIDE, encoding="utf-8")
    assert cli.run(["size", str(path), "--layout", "wde"]) == 2
    assert 'no layout is named "wde"; did you mean "wide"?' in capsys.readouterr().err
    notes = {}
    for name in ("as drawn", "wide"):
        assert cli.run(["solve", str(path), "--layout", name, "--out", str(tmp_path / name)]) in (0, 3)
        content = json.loads((tmp_path / name / "result.json").read_text(encoding="utf-8"))
        assert {case["layout"] for case in content["cases"]} == {name}
        notes[name] = content["notes"][0]
    assert 'other layouts ("wide")' in notes["as drawn"]
    assert notes["wide"] == 'anchors of the layout "wide", not as drawn'
