"""`guys search`: agreement with brute force, the site's rules as limits, repeatable to the last bit, and what is handed back."""

from __future__ import annotations

import json
import math
from collections.abc import Iterable, Iterator
from concurrent.futures import Executor, Future, ProcessPoolExecutor
from copy import deepcopy
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
from guys.scenario.ring import ring
from guys.site import Obstacle, Site
from guys.site.grid import grid_at_degrees
from guys.studies import standing
from guys.studies.compare import solved
from guys.studies.measures import MEASURES, measured
from guys.studies.search import Found, not_bettered, rigged, search
from guys.studies.trial import FALLS, HOLDS, MISPLACED, PAST, Trial, placed, spans, tried

TABLE = '\n[search]\nleast = "{least}"\ntries = {tries}\ndirections = 2\n{more}'
SPOTS = ", ".join(f'{{ bearing = "{b} deg", radius = "{r} m" }}' for b, r in ((200, 9), (0, 8), (60, 11), (130, 10), (300, 12)))
FLAT = 1e-3
"""Relative: beside its least the pull of a ring changes by less than this over the grid's step of 0.4 m, and the search ends as near."""
RIGID = made.ring_mast(3, 0.0, setting={"plumb": True})
"""Quick to solve; tensions that leave the mast upright wherever its anchors stand: with the same targets everywhere it would lean."""
ELASTIC = made.mast(0.0, setting={"plumb": True})
"""For what depends on how a mast bends and how two levels share its load."""
ALL = '[[search.move]]\nanchors = ["A", "B", "C"]\nradius = ["4 m", "14 m"]\n'
ALONE = '[[search.move]]\nradius = ["4 m", "14 m"]\n'
ONE = '[[search.move]]\nanchors = ["A"]\nbearing = ["-30 deg", "30 deg"]\nradius = ["5 m", "12 m"]\n'


def mast(least: str = "pull", move: str = ALL, tries: int = 36, more: str = "", document: made.Document = RIGID) -> Scenario:
    return parse_scenario(made.text(document) + TABLE.format(least=least, tries=tries, more=more) + move)


@pytest.fixture(scope="module")
def found() -> Found:
    return search(mast(move=ONE, more='against = "rope"\n', tries=50))


@pytest.fixture(scope="module")
def ringed() -> Found:
    return search(mast())


# ---------------------------------------------------------------- the least


def test_the_least_pull_is_that_of_brute_force_on_a_grid(ringed: Found) -> None:
    """Anchors on a ring: what is found is as good as the best of 26 radii 0.4 m apart, and lies beside it."""
    radii = [4.0 + 0.4 * k for k in range(26)]
    grid = tried(ringed.scenario, ("pull",), [(r,) for r in radii])
    best = ringed.best
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
    assert len(found.trials) <= 50
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


# ---------------------------------------------------------------- how many anchors


def test_so_many_ways_are_the_ring_of_that_number_by_brute_force() -> None:
    """Four ways: as good as the best of the rings 1 m apart that `guys ring` puts the mast on, the widest, but for a tenth of a metre."""
    result = search(parse_scenario(made.text(RIGID) + TABLE.format(least="uplift", tries=40, more="ways = 4\n") + ALONE))
    assert result.best is not None
    assert result.scenario.wind is not None
    few = result.scenario.wind.model_copy(update={"directions": (0.0, math.pi)})
    grid = [_uplift(ring(result.scenario.model_copy(update={"wind": few}), 4, 4.0 + k)) for k in range(11)]
    assert min(grid) == grid[-1]
    assert result.best.at[0] > 13.9
    assert min(grid) <= result.best.values[0] <= min(grid) * 14.0 / 13.9
    assert [a.name for a in result.best.anchors] == ["1", "2", "3", "4"]
    assert len(result.start.cable) == 4


def _uplift(scenario: Scenario) -> float:
    return measured(standing.solution(*standing.cases(scenario, circle=False), again=False), (), ("uplift",))["uplift"].value


def test_each_anchor_moves_in_its_own_sector() -> None:
    move = '[[search.move]]\nradius = ["5 m", "12 m"]\nbearing = ["0 deg", "360 deg"]\n'
    start = rigged(mast(move=move, more="ways = 4\n"))
    numbers = spans(start.search.move)  # type: ignore[union-attr]
    assert [s.what for s in numbers] == ["radius", "bearing"] * 4
    sectors = [(s.least, s.most) for s in numbers if s.what == "bearing"]
    assert sectors == [pytest.approx((math.pi / 2 * k, math.pi / 2 * (k + 1))) for k in range(4)]
    bearings = (10.0, 100.0, 260.0, 300.0)
    at = placed(start, [x for k, b in enumerate(bearings) for x in (6.0 + k, math.radians(b))])
    assert [math.hypot(a.east, a.north) for a in at] == pytest.approx([6.0, 7.0, 8.0, 9.0], abs=0.01)
    assert [math.degrees(math.atan2(a.east, a.north)) % 360 for a in at] == pytest.approx(bearings, abs=0.1)


def test_so_many_places_of_a_list_are_tried_in_every_choice_once() -> None:
    """Three of five: ten layouts (five over three), each of three different places, the best of them found."""
    text = made.text(RIGID) + TABLE.format(least="pull", tries=20, more="ways = 3\n")
    result = search(parse_scenario(text + f"[[search.move]]\nplaces = [{SPOTS}]\n"))
    chosen = [frozenset((a.east, a.north) for a in trial.anchors) for trial in result.trials]
    assert len(chosen) == len(set(chosen)) == math.comb(5, 3)
    assert all(len(each) == 3 for each in chosen)
    assert result.best is not None
    assert result.best.values[0] == min(t.values[0] for t in result.trials if t.outcome == HOLDS)


def test_anchors_take_places_in_their_order_round_the_foot() -> None:
    """Drawn at 10, 130 and 250 deg: whatever is chosen, the order stays clockwise and all turn least together."""
    scenario = mast(move=f"[[search.move]]\nplaces = [{SPOTS}]\n", document=ELASTIC)
    for numbers, bearings in (((0, 0, 0), (0, 60, 130)), ((0, 1, 2), (0, 130, 300)), ((1, 2, 1), (60, 130, 200 + 100))):
        at = placed(scenario, numbers)
        found = [round(math.degrees(math.atan2(a.east, a.north)) % 360) for a in at]
        assert sorted(found) == sorted(bearings)
        turns = [sum(abs((b - d + 180) % 360 - 180) for b, d in zip(each, (10, 130, 250), strict=True)) for each in _orders(sorted(found))]
        assert sum(abs((b - d + 180) % 360 - 180) for b, d in zip(found, (10, 130, 250), strict=True)) == min(turns)


def _orders(bearings: list[int]) -> list[list[int]]:
    """The clockwise orders."""
    return [bearings[k:] + bearings[:k] for k in range(len(bearings))]


def test_what_a_ring_search_hands_back_is_read_as_what_was_solved() -> None:
    """Whole tables in place of the file's own: the same anchors, held as they were, and the same greatest pull to the last digits."""
    document = deepcopy(RIGID)
    document["anchor"][0]["give"] = 3.1e5
    document["cable"][0]["from"]["arm"] = 0.123
    more = 'ways = 4\nagainst = "rope"\n'
    scenario = parse_scenario(made.text(document) + TABLE.format(least="pull", tries=30, more=more) + ALONE)
    result = search(scenario)
    assert result.compared is not None
    assert len(result.front) > 1
    kept = {key: value for key, value in document.items() if key not in ("anchor", "cable")}
    pasted = parse_scenario(made.text(kept) + "\n" + files.as_layouts(result))
    assert pasted.anchor == result.front[0].anchors
    assert [layout.anchor for layout in pasted.layouts] == [trial.anchors for trial in result.front[1:]]
    again = measured(solved(pasted)[0], ())["pull"]
    found = next(each for each in result.compared.layouts if each.name == "found 1")
    assert again.value == pytest.approx(found.values["pull"].value, rel=1e-12)


def test_places_by_latitude_and_longitude_are_those_by_east_and_north() -> None:
    """Listed in degrees by the grid of the site, they are pegged to the same centimetre."""
    grid = grid_at_degrees("EPSG:32631", 51.0, 3.2, 0.0)
    metres = [(4.0, 7.5), (-3.0, 9.25), (1.0, 8.0)]
    degrees = [tuple(float(x) for x in grid.to_degrees(*at)) for at in metres]
    site = '[site]\ncrs = "EPSG:32631"\norigin = { lat = 51.0, lon = 3.2 }\n'
    listed = ", ".join(f"{{ lat = {lat!r}, lon = {lon!r} }}" for lat, lon in degrees)
    text = made.text(RIGID) + TABLE.format(least="pull", tries=20, more="")
    move = f'[[search.move]]\nanchors = ["A"]\nplaces = [{listed}]\n'
    scenario = parse_scenario(text + move + site)
    at = [placed(scenario, (k,))[0] for k in range(3)]
    assert [(a.east, a.north) for a in at] == metres
    with pytest.raises(ScenarioError) as caught:
        parse_scenario(text + move)
    assert [fault.key for fault in caught.value.faults] == [f"search.move[0].places[{k}]" for k in range(3)]
    assert all("lat and lon need [site]" in fault.message for fault in caught.value.faults)


@pytest.mark.parametrize(("key", "words"), [("length", "fits one radius"), ("spar", "a second spar")])
def test_what_forms_no_ring_is_refused_when_read(key: str, words: str) -> None:
    document = made.boom() if key == "spar" else made.mast(0.0)
    if key == "length":
        document["cable"][0] = made.cable("cut", 9.0, "A", length=14.0)
    with pytest.raises(ScenarioError, match=words) as caught:
        parse_scenario(made.text(document) + TABLE.format(least="pull", tries=20, more="ways = 4\n") + ALONE)
    assert [fault.key for fault in caught.value.faults] == ["search.ways"]


# ---------------------------------------------------------------- tensions that do not balance


def test_tensions_that_pull_the_mast_over_are_warned_of() -> None:
    """Without plumb = true as many layouts are said to lean as `guys solve` warns of by itself; with it none."""
    spots = ", ".join(f'{{ bearing = "0 deg", radius = "{r} m" }}' for r in (6, 8, 12))
    move = f'[search]\ntries = 20\n[[search.move]]\nanchors = ["A"]\nplaces = [{spots}]\n'
    text = made.text(RIGID | {"setting": {}})
    result = search(parse_scenario(text + move))
    solved_alone = [standing.solve(result.scenario.model_copy(update={"anchor": t.anchors})) for t in result.trials]
    leaning = [s for s in solved_alone if any("leans 1/" in w for w in s.warnings)]
    assert len(leaning) == 2
    (warning,) = result.warnings
    assert warning.startswith(f"of 3 layouts tried 2 lean in still air, by up to 1/{1 / max(s.head_lean[0, 0] for s in leaning):.0f}")
    assert "setting.plumb = true" in warning
    assert files.as_dict(result)["warnings"] == [warning]
    assert files.as_layouts(result).startswith(f"# {warning}\n")
    assert [t.still_lean for t in result.trials] == pytest.approx([s.head_lean[0, 0] for s in solved_alone], abs=1e-12)
    assert search(parse_scenario(made.text(RIGID) + move)).warnings == ()


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
    text = made.text(RIGID) + TABLE.format(least="pull", tries=20, more="") + ALL + '\n[site]\nboundary = "fence.geojson"\n'
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
    """Stops as a user would, after so many lots of tries."""

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


def test_an_interruption_keeps_the_best_so_far(ringed: Found) -> None:
    whole, cut = ringed, search(ringed.scenario, Stopping(2))
    assert cut.interrupted
    assert 0 < len(cut.trials) < len(whole.trials)
    assert cut.trials == whole.trials[: len(cut.trials)]
    assert cut.best == min((t for t in cut.trials if t.outcome == HOLDS), key=lambda t: t.values)
    assert cut.compared is not None


def test_layouts_come_to_the_same_in_company_and_alone() -> None:
    """On one case axis, to the last bit; among them one that no still-air state meets and one on the foot of the mast."""
    scenario = mast(move=ONE, document=ELASTIC)
    points = [(r, b) for b in (-0.4, 0.0, 0.4) for r in (5.0, 12.0)]
    places = [(0.1, 0.2), *points, (6.0, 0.3)]
    together = tried(scenario, ("pull", "rope"), places)
    assert together == [tried(scenario, ("pull", "rope"), [at])[0] for at in places]
    assert [trial.outcome for trial in together] == [MISPLACED, *[HOLDS] * (len(places) - 1)]


def test_layouts_whose_tensions_do_not_balance_are_told_apart_in_company() -> None:
    """Without `plumb` tensions near those of slack cables are met or not, each by itself."""
    document = made.mast(0.0)
    for guy in document["cable"]:
        guy["tension"] = 60.0 if guy["to"]["anchor"] == "A" else 20.0
    move = '[[search.move]]\nanchors = ["A"]\nradius = ["4 m", "60 m"]\n'
    scenario = parse_scenario(made.text(document) + TABLE.format(least="pull", tries=36, more="") + move)
    places = [(4.0,), (10.0,), (59.0,)]
    together = tried(scenario, ("pull",), places)
    assert together == [tried(scenario, ("pull",), [at])[0] for at in places]
    assert together[0].outcome != FALLS == together[-1].outcome


# ---------------------------------------------------------------- what is handed back


def test_found_layouts_pasted_into_the_file_are_what_was_solved(found: Found) -> None:
    pasted = parse_scenario(made.text(RIGID) + "\n" + files.as_layouts(found))
    assert len(pasted.layouts) == len(found.front)
    for layout, trial in zip(pasted.layouts, found.front, strict=True):
        assert layout.anchor == trial.anchors
    assert found.compared is not None
    best = next(each for each in found.compared.layouts if each.name == "found 1")
    assert found.best is not None
    assert best.values["pull"].value >= found.best.values[0] * (1 - 1e-9)


@pytest.mark.usefixtures("one_format")
def test_the_command_writes_its_files(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    text = made.text(RIGID) + TABLE.format(least="pull", tries=24, more='against = "rope"\n') + ONE
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
        (ONE + '[[search.move]]\nradius = ["4 m", "9 m"]\n', "", "search.move[1]", "all of them"),
        ('[[search.move]]\nplaces = [{ east = "1 m", north = "1 m" }, { east = "2 m", north = "1 m" }]\n', "",
         "search.move[0].places", "leave no choice"),
        (ONE, "ways = 4\n", "search.move[0].anchors[0]", "known: 1, 2, 3, 4"),
        (ALONE, "ways = 2\n", "search.ways", "3"),
        (ONE + ONE, "", "search.move[1].anchors[0]", "moves already"),
        (ONE, 'against = "pull"\n', "search.against", "the same as least"),
        (ONE, 'against = "pieces"\n', "search.against", ""),
        (ONE, 'against = "mass"\n', "search.against", "no holdfast is a block"),
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
        search(parse_scenario(made.text(RIGID)))


def test_what_a_search_makes_least_are_measures_of_which_less_is_better() -> None:
    from typing import get_args

    from guys.scenario.search import Measured

    assert all(MEASURES[key].less for key in get_args(Measured))
