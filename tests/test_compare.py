"""`guys compare`: equal layouts are equal, symmetry changes nothing, every measure against what the line gives by itself."""

from __future__ import annotations

import csv
import io
import json
import math
from concurrent.futures import ProcessPoolExecutor, ThreadPoolExecutor
from dataclasses import replace
from pathlib import Path

import pytest
import scenarios_made as made

from guys import cli, parse_scenario
from guys.drawing.comparison import draw_comparison
from guys.exchange import comparison
from guys.scenario import Scenario
from guys.studies.compare import Comparison, compare, ranked
from guys.studies.measures import MEASURES, Value
from guys.studies.standing import solve

ALIKE = 1e-8
"""Relative: values nearer count as equal, and the first of them is told."""
ROUNDING = 1e-7
"""Relative: a turned site is the same problem in other numbers, solved to 1e-10 of the reference force."""
BLOCK = '\n[holdfast.block]\nkind = "block"\nmass = "4000 kg"\nfriction = 0.5\n'


def layout(name: str, *anchors: tuple[str, float, float]) -> str:
    rows = ", ".join(f'{{ name = "{a}", bearing = "{turn} deg", radius = "{radius} m" }}' for a, turn, radius in anchors)
    return f'\n[[layout]]\nname = "{name}"\nanchor = [{rows}]\n'


def text() -> str:
    """A mast on three pairs of guys: the anchors at 8 m, the same again, all turned by a third of a circle, wide, and steep."""
    document = made.mast(0.0, 120.0, 240.0, tension=1500.0)
    document["anchor"] = [
        {"name": name, "bearing": turn, "radius": 8.0, "holdfast": "block"} for name, turn in zip("ABC", (0.0, 120.0, 240.0), strict=True)
    ]
    return (
        made.text(document) + BLOCK
        + layout("again", ("A", 0.0, 8.0))
        + layout("turned", ("A", 120.0, 8.0), ("B", 240.0, 8.0), ("C", 0.0, 8.0))
        + layout("wide", *((n, t, 11.0) for n, t in zip("ABC", (0.0, 120.0, 240.0), strict=True)))
        + layout("steep", *((n, t, 5.0) for n, t in zip("ABC", (0.0, 120.0, 240.0), strict=True)))
    )  # fmt: skip


@pytest.fixture(scope="module")
def scenario() -> Scenario:
    return parse_scenario(text())


@pytest.fixture(scope="module")
def found(scenario: Scenario) -> Comparison:
    return compare([scenario], by="uplift")


def values(found: Comparison, name: str) -> dict[str, Value]:
    return next(each for each in found.layouts if each.name == name).values


def test_the_same_layout_twice_gives_equal_rows(found: Comparison) -> None:
    drawn, again = (next(each for each in found.layouts if each.name == name) for name in ("as drawn", "again"))
    assert repr(drawn.values) == repr(again.values)
    assert repr(drawn.needs) == repr(again.needs)
    assert drawn.rank == again.rank


def test_turning_by_a_symmetry_changes_nothing(found: Comparison) -> None:
    drawn, turned = values(found, "as drawn"), values(found, "turned")
    for key in MEASURES:
        assert turned[key].value == pytest.approx(drawn[key].value, rel=ROUNDING, nan_ok=True), key


def test_the_trade_off_of_the_angle(found: Comparison) -> None:
    """Steeper guys pull their anchors up more and press the mast down more; flatter ones take more rope (common practice)."""
    steep, drawn, wide = (values(found, name) for name in ("steep", "as drawn", "wide"))
    for key, sign in (("uplift", 1), ("thrust", 1), ("tension", 1), ("rope", -1)):
        assert sign * steep[key].value > sign * drawn[key].value > sign * wide[key].value, key
    assert [each.name for each in found.layouts] == ["wide", "as drawn", "again", "turned", "steep"]
    assert [each.rank for each in found.layouts] == [1, 2, 2, 2, 5]


def test_measures_are_those_of_the_layout_solved_by_itself(scenario: Scenario, found: Comparison) -> None:
    wide = next(each for each in scenario.layouts if each.layout == "wide")
    alone, told = solve(wide), values(found, "wide")
    assert told["pull"].value == pytest.approx(max(a.resultant.peak for a in alone.worst_anchors), rel=ALIKE)
    assert told["cable"].value == pytest.approx(min(c.factor for c in alone.worst_cables), rel=ALIKE)
    assert told["thrust"].value == pytest.approx(max(f.down.peak for f in alone.worst_feet), rel=ALIKE)
    assert told["bending"].value == pytest.approx(max(float((s.bending**2).sum(axis=-1).max()) ** 0.5 for s in alone.spars), rel=ALIKE)
    assert told["lean"].value == pytest.approx(alone.head_lean.max(), rel=ALIKE)
    assert told["rope"].value == pytest.approx(alone.cables.unstressed_length[0].sum())
    assert told["pieces"].value == 9
    first = alone.findings[0]
    assert told["use"].value == pytest.approx(first.required / first.factor)


def test_blocks_are_heavy_enough_for_the_pull(found: Comparison) -> None:
    """A block on the ground: (m g - up) friction / horizontal = 1.5 in the worst case, the low value being 0.7 or so of that."""
    for each in found.layouts:
        heaviest = sum(need.needed for anchor in each.needs for need in anchor.needs)
        assert each.values["mass"].value == pytest.approx(heaviest)
        least = sum(a.uplift.peak + 1.5 * a.horizontal.value / 0.5 for a in each.solution.worst_anchors) / 9.80665
        assert each.values["mass"].value > 0.9 * least


def test_any_executor_gives_the_same_bytes() -> None:
    scenario = parse_scenario(made.text(made.ring_mast(3)) + layout("wide", ("A", 0.0, 11.0)) + layout("steep", ("A", 0.0, 5.0)))
    found = compare([scenario], by="uplift")
    with ProcessPoolExecutor(2) as processes, ThreadPoolExecutor(2) as threads:
        for executor in (processes, threads):
            other = compare([scenario], by="uplift", executor=executor)
            assert comparison.as_text(other) == comparison.as_text(found)
            assert comparison.as_table(other) == comparison.as_table(found)


def test_progress_counts_layouts(scenario: Scenario) -> None:
    seen: list[tuple[int, int]] = []
    compare([scenario.model_copy(update={"layouts": scenario.layouts[:1]})], progress=lambda done, all_: seen.append((done, all_)))
    assert seen == [(1, 2), (2, 2)]


def test_what_falls_comes_last_whatever_its_measure(found: Comparison) -> None:
    best, *rest = found.layouts
    fallen = replace(best, solution=replace(best.solution, unsettled=(True,) * len(best.solution.case)))
    order = ranked([fallen, *rest], "uplift")
    assert [each.verdict for each in order] == ["within"] * 4 + ["falls"]
    assert order[-1].name == "wide"


@pytest.mark.parametrize("key", list(MEASURES))
def test_every_measure_ranks(found: Comparison, key: str) -> None:
    order = ranked(found.layouts, key)
    numbers = [float(f"{each.values[key].value:.8g}") for each in order if not math.isnan(each.values[key].value)]
    assert {each.verdict for each in order} == {"within"}
    assert numbers == sorted(numbers, reverse=not MEASURES[key].less)


def test_the_command_lists_the_same_measures() -> None:
    assert tuple(MEASURES) == cli.RANKED_BY


def test_files_hold_every_layout(found: Comparison) -> None:
    rows = list(csv.DictReader(io.StringIO(comparison.as_table(found))))
    content = json.loads(comparison.as_text(found))
    assert [row["layout"] for row in rows] == [each["layout"] for each in content["layouts"]] == [each.name for each in found.layouts]
    for row, told, each in zip(rows, content["layouts"], found.layouts, strict=True):
        assert float(row["pull_N"]) == told["measures"]["pull_N"]["value"] == each.values["pull"].value
        assert float(row["lean_deg"]) == pytest.approx(math.degrees(each.values["lean"].value))
        assert len(told["anchors"]) == 3


def test_all_plans_stand_in_one_figure_at_one_scale(found: Comparison) -> None:
    figure = draw_comparison(found, "A3", "both")
    bars = [a for a in figure.findobj() if str(a.get_gid()).startswith("bar ")]
    rings = [a for a in figure.findobj() if str(a.get_gid()).startswith("ring ")]
    assert (len(bars), len(rings)) == (15, 15)
    uplifts = [worst.uplift.peak for each in found.layouts for worst in each.solution.worst_anchors]
    scales = [ring.get_radius() / uplift for ring, uplift in zip(rings, uplifts, strict=True)]
    assert max(scales) == pytest.approx(min(scales), rel=ROUNDING)


@pytest.mark.usefixtures("one_format")
def test_the_command_over_two_files(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    for name in ("a", "b"):
        (tmp_path / f"{name}.toml").write_text(made.text(made.mast(0.0)), encoding="utf-8")
    files = [str(tmp_path / f"{name}.toml") for name in ("a", "b")]
    assert cli.run(["compare", *files, "--out", str(tmp_path / "out"), "--by", "thrust", "--workers", "1"]) == 0
    told = capsys.readouterr().out
    assert "2 layouts, ranked by thrust on base" in told
    assert all(f"{name}.toml: as drawn" in told for name in "ab")
    assert sorted(p.name for p in (tmp_path / "out").iterdir()) == [f"compare.{kind}" for kind in ("csv", "json", "pdf", "png", "svg")]
    (tmp_path / "a.toml").write_text("title = 5", encoding="utf-8")
    (tmp_path / "b.toml").write_text("title = 6", encoding="utf-8")
    assert cli.run(["compare", *files]) == 2
    told = capsys.readouterr().err
    assert all(f"{name}.toml" in told for name in "ab")
