"""`guys search`: agreement with brute force, the site's rules as limits, repeatable to the last bit, and what is handed back."""

from __future__ import annotations

import json
import math
from collections.abc import Iterable, Iterator
from concurrent.futures import Executor, Future, ProcessPoolExecutor
from dataclasses import replace
from pathlib import Path
from typing import Any

import pytest
import scenarios_made as made
from shapely import box

from guys import cli, parse_scenario
from guys.errors import ScenarioError
from guys.exchange import search as files
from guys.scenario import Scenario
from guys.site import Obstacle, Site
from guys.studies.measures import MEASURES
from guys.studies.search import Found, not_bettered, search
from guys.studies.trial import HOLDS, MISPLACED, PAST, Trial, placed, spans, tried

TABLE = '\n[search]\nleast = "{least}"\ntries = {tries}\ndirections = 2\n{more}'
FLAT = 1e-3
"""Relative: beside its least the pull of a ring changes by less than this over the grid's step of 0.4 m, and the search ends as near."""
DRAWN = made.mast(0.0, setting={"plumb": True})
"""Tensions that leave the mast upright wherever its anchors stand: with the same targets everywhere it would lean."""
ALL = '[[search.move]]\nanchors = ["A", "B", "C"]\nradius = ["4 m", "14 m"]\n'
ONE = '[[search.move]]\nanchors = ["A"]\nbearing = ["-30 deg", "30 deg"]\nradius = ["5 m", "12 m"]\n'


def mast(least: str = "pull", move: str = ALL, tries: int = 36, more: str = "") -> Scenario:
    return parse_scenario(made.text(DRAWN) + TABLE.format(least=least, tries=tries, more=more) + move)


@pytest.fixture(scope="module")
def found() -> Found:
    return search(mast(move=ONE, more='against = "rope"\n', tries=50))


# ---------------------------------------------------------------- the least


def test_the_least_pull_is_that_of_brute_force_on_a_grid() -> None:
    """Anchors on a ring: what is found is as good as the best of 26 radii 0.4 m apart, and lies beside it."""
    scenario = mast()
    radii = [4.0 + 0.4 * k for k in range(26)]
    grid = [tried(scenario, ("pull",), (r,)) for r in radii]
    best = search(scenario).best
    assert best is not None
    least = min((t for t in grid if t.outcome == HOLDS), key=lambda t: t.values)
    assert best.values[0] <= least.values[0] * (1 + FLAT)
    assert abs(best.at[0] - least.at[0]) <= 0.4


def test_listed_places_are_all_tried() -> None:
    places = ", ".join(f'{{ bearing = "{b} deg", radius = "{r} m" }}' for b in (-10, 0, 10) for r in (6, 9))
    scenario = mast(move=f'[[search.move]]\nanchors = ["A"]\nplaces = [{places}]\n')
    result = search(scenario)
    assert len(result.trials) == 6
    assert result.best is not None
    assert result.best.values[0] == min(t.values[0] for t in result.trials if t.outcome == HOLDS)


def test_the_trade_off_holds_nothing_that_another_betters(found: Found) -> None:
    holding = [t for t in found.trials if t.outcome == HOLDS]
    assert len(found.front) >= 2
    for one in found.front:
        assert not [t for t in holding if t.values[0] < one.values[0] and t.values[1] < one.values[1]]
    firsts, seconds = ([t.values[n] for t in found.front] for n in (0, 1))
    assert firsts == sorted(firsts)
    assert seconds == sorted(seconds, reverse=True)


def test_grades_put_rules_before_measures() -> None:
    trial = Trial((0.0,), (), HOLDS, 0.0, "", (5.0, 100.0))
    past = replace(trial, outcome=PAST, amount=0.1, rule="x")
    order = [trial, replace(trial, values=(7.0, 80.0)), past, replace(past, amount=0.5), replace(past, outcome=MISPLACED)]
    grades = [t.grade(0) for t in order]
    assert grades == sorted(set(grades))
    assert trial.grade(0, limit=90.0) > replace(trial, values=(7.0, 80.0)).grade(0, limit=90.0)
    assert not_bettered([trial, replace(trial, values=(6.0, 120.0)), order[1]]) == (trial, order[1])


# ---------------------------------------------------------------- rules


def test_the_sites_rules_are_limits() -> None:
    """The best ring lies outside a fence that is nearer: what is found stands at the fence, inside it by the setback."""
    free = search(mast("uplift")).best
    fence = Site(boundary=box(-9, -9, 9, 9), setback=1.0)
    inside = search(mast("uplift").model_copy(update={"site": fence})).best
    assert free is not None
    assert inside is not None
    assert free.at[0] > 13.0
    reach = max(max(abs(a.east), abs(a.north)) for a in inside.anchors)
    assert 7.5 < reach <= 8.0


def test_no_layout_says_which_rule_excludes_what(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    pit = Obstacle("old pit", "keep-out", box(-30, -30, 30, 30), clearance=1.0)
    result = search(mast(tries=20).model_copy(update={"site": Site(obstacles=(pit,))}))
    assert result.best is None
    assert result.compared is None
    assert result.excluded == [("anchor A, clear of old pit", len(result.trials))]
    text = made.text(DRAWN) + TABLE.format(least="pull", tries=20, more="") + ALL + '\n[site]\nboundary = "fence.geojson"\n'
    ring = [[-2, -2], [2, -2], [2, 2], [-2, 2], [-2, -2]]
    fence = {"type": "Feature", "properties": {}, "geometry": {"type": "Polygon", "coordinates": [ring]}}
    (tmp_path / "fence.geojson").write_text(json.dumps({"type": "FeatureCollection", "features": [fence]}), encoding="utf-8")
    (tmp_path / "mast.toml").write_text(text, encoding="utf-8")
    assert cli.run(["search", str(tmp_path / "mast.toml"), "--workers", "1"]) == 3
    told = capsys.readouterr().out
    assert "No layout tried holds every rule" in told
    assert "anchor A, inside the boundary" in told


def test_places_are_pegged_to_a_centimetre_on_the_ground_they_stand_on() -> None:
    scenario = mast(move=ONE)
    at = placed(scenario, (7.12345, math.radians(10.0)))[0]
    assert (at.east, at.north, at.level) == (1.24, 7.02, 0.0)
    assert [s.what for s in spans(scenario.search.move)] == ["radius", "bearing"]  # type: ignore[union-attr]
    turned = mast(move='[[search.move]]\nanchors = ["A", "B"]\nturn = ["-5 deg", "20 deg"]\n')
    a, b, _ = placed(turned, (math.radians(20.0),))
    drawn = [math.atan2(x.east, x.north) for x in turned.anchor]
    for anchor, was in zip((a, b), drawn, strict=False):
        assert math.atan2(anchor.east, anchor.north) - was == pytest.approx(math.radians(20.0), abs=1e-3)


# ---------------------------------------------------------------- repeatable


def test_a_seed_gives_the_same_bytes_however_many_processes_try(found: Found) -> None:
    with ProcessPoolExecutor(2) as processes:
        again = search(found.scenario, processes)
    assert files.as_text(again) == files.as_text(found)
    assert files.as_table(again) == files.as_table(found)
    assert files.as_layouts(again) == files.as_layouts(found)


class Stopping(Executor):
    """Stops as a user would, after so many tries."""

    def __init__(self, after: int) -> None:
        self.left = after

    def submit(self, *args: Any, **kwargs: Any) -> Future[Any]:
        raise NotImplementedError

    def map(self, fn: Any, *iterables: Iterable[Any], **_: Any) -> Iterator[Any]:
        for item in iterables[0]:
            if self.left == 0:
                self.left = -1
                raise KeyboardInterrupt
            self.left -= 1
            yield fn(item)


def test_an_interruption_keeps_the_best_so_far() -> None:
    whole, cut = search(mast()), search(mast(), Stopping(20))
    assert cut.interrupted
    assert cut.trials == whole.trials[:20]
    assert cut.best == min((t for t in cut.trials if t.outcome == HOLDS), key=lambda t: t.values)
    assert cut.compared is not None


# ---------------------------------------------------------------- what is handed back


def test_found_layouts_pasted_into_the_file_are_what_was_solved(found: Found) -> None:
    pasted = parse_scenario(made.text(DRAWN) + "\n" + files.as_layouts(found))
    assert len(pasted.layouts) == len(found.front)
    for layout, trial in zip(pasted.layouts, found.front, strict=True):
        assert layout.anchor == trial.anchors
    assert found.compared is not None
    best = next(each for each in found.compared.layouts if each.name == "found 1")
    assert found.best is not None
    assert best.values["pull"].value >= found.best.values[0] * (1 - 1e-9)


def test_the_command_writes_its_files(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    text = made.text(DRAWN) + TABLE.format(least="pull", tries=24, more='against = "rope"\n') + ONE
    (tmp_path / "mast.toml").write_text(text, encoding="utf-8")
    assert cli.run(["search", str(tmp_path / "mast.toml"), "--out", str(tmp_path / "out"), "--workers", "1"]) in (0, 3)
    figures = [f"{stem}.{kind}" for stem in ("search", "tradeoff") for kind in ("pdf", "png", "svg")]
    assert sorted(p.name for p in (tmp_path / "out").iterdir()) == sorted(["layouts.toml", "search.csv", "search.json", *figures])
    assert "[[layout]]" in capsys.readouterr().out


# ---------------------------------------------------------------- faults


@pytest.mark.parametrize(
    ("move", "more", "key", "words"),
    [
        ('[[search.move]]\nanchors = ["Q"]\nradius = ["4 m", "9 m"]\n', "", "search.move[0].anchors[0]", "no anchor is named"),
        ('[[search.move]]\nanchors = ["A"]\n', "", "search.move[0]", "nothing says where"),
        ('[[search.move]]\nanchors = ["A"]\nradius = ["9 m", "4 m"]\n', "", "search.move[0].radius", "not less than"),
        ('[[search.move]]\nanchors = ["A", "B"]\nbearing = ["9 deg", "14 deg"]\n', "", "search.move[0].bearing", "for one anchor"),
        (ONE + ONE, "", "search.move[1].anchors[0]", "moves already"),
        (ONE, 'against = "pull"\n', "search.against", "the same as least"),
        (ONE, 'against = "pieces"\n', "search.against", ""),
        ('[[search.move]]\nanchors = ["A"]\nplaces = [{ east = "1 m" }, { bearing = "1 deg", radius = "5 m" }]\n', "",
         "search.move[0].places[0]", "give bearing and radius"),
    ],
)  # fmt: skip
def test_faults_are_told_at_their_key(move: str, more: str, key: str, words: str) -> None:
    with pytest.raises(ScenarioError) as caught:
        mast(move=move, more=more)
    assert [(f.key, words in f.message) for f in caught.value.faults] == [(key, True)]


def test_without_a_table_there_is_nothing_to_search() -> None:
    with pytest.raises(ScenarioError, match="say what may move"):
        search(parse_scenario(made.text(DRAWN)))


def test_what_a_search_makes_least_are_measures_of_which_less_is_better() -> None:
    from typing import get_args

    from guys.scenario.search import Measured

    assert all(MEASURES[key].less for key in get_args(Measured))
