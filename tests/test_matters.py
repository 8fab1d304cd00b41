"""`guys matters`: every end of a range against the scenario written out with it, one by moments, and ranges of nothing."""

from __future__ import annotations

import csv
import json
import math
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
import pytest
import scenarios_made as made
from hypothesis import given, settings
from hypothesis import strategies as some
from test_drawing_pictures import assert_apart

from guys import cli
from guys.drawing.matters import draw_matters_page
from guys.drawing.rounding import stability
from guys.exchange import matters as files
from guys.path import CLOSE
from guys.reserves import ALL, WIND
from guys.studies import matters
from guys.studies.margin import MOST
from guys.studies.reserve import reserves

SAME = 1e-8
"""Of a load: every case stops at an out-of-balance of 1e-9 of the reference force."""
NOTHING = {"tension": 0.0, "stiffness": 0.0, "drag": 0.0, "level": 0.0, "temperature": 0.0}


def weigh(document: made.Document, **ranges: Any) -> matters.Matters:
    return matters.weigh(made.scenario({**document, "ranges": {**NOTHING, **ranges}}))


def span(found: matters.Matters, what: str) -> matters.Span:
    return next(s for s in found.spans if s.what == what)


def with_cables(document: made.Document, change: Callable[[made.Document], made.Document]) -> made.Document:
    return {**document, "cable": [change(c) for c in document["cable"]]}


def mast() -> made.Document:
    return made.mast(0.0, 70.0, case=[{"name": "storm", "temperature": 5.0}])


WRITTEN_OUT: dict[str, tuple[str, float, Callable[[made.Document, float], made.Document]]] = {
    "initial tension": ("tension", 0.1, lambda d, side: with_cables(d, lambda c: {**c, "tension": c["tension"] * (1 + side * 0.1)})),
    "rope stiffness": ("stiffness", 0.2, lambda d, side: {**d, "rope": {"rope": made.rope(stiffness=1.4e6 * (1 + side * 0.2))}}),
    "drag": ("drag", 0.15, lambda d, side: {**d, "case": [{**d["case"][0], "wind": 1 + side * 0.15}]}),
    "temperature": ("temperature", 20.0, lambda d, side: {**d, "case": [{**d["case"][0], "temperature": 5.0 + side * 20.0}]}),
}


@pytest.fixture
def unraised(monkeypatch: pytest.MonkeyPatch) -> None:
    """Without the stability reserve, which takes most of the time of so small a study."""
    monkeypatch.setattr(matters, "_weakest", lambda *_: None)


@pytest.mark.usefixtures("unraised")
@pytest.mark.parametrize("what", WRITTEN_OUT)
def test_an_end_of_a_range_is_the_scenario_written_out(what: str) -> None:
    key, size, change = WRITTEN_OUT[what]
    found = span(weigh(mast(), **{key: size}), what)
    for side, end in ((-1.0, found.less), (1.0, found.more)):
        other = weigh(change(mast(), side)).point
        assert end.pull == pytest.approx(other.pull, rel=SAME)
        assert end.reserve == pytest.approx(other.reserve, rel=SAME)
        assert (end.anchor, end.thing) == (other.anchor, other.thing)


@pytest.mark.usefixtures("unraised")
def test_a_sunk_anchor_keeps_every_unstressed_length() -> None:
    """Against a scenario whose cables have the lengths found, and that anchor 30 mm lower."""
    document = mast()
    lengths = made.setting(document).length
    found = span(weigh(document, level=0.03), "level of anchor B")
    sunk = {**document, "anchor": [{**a, **({"level": -0.03} if a["name"] == "B" else {})} for a in document["anchor"]]}
    given_lengths = [
        {k: v for k, v in c.items() if k != "tension"} | {"length": float(x)} for c, x in zip(document["cable"], lengths, strict=True)
    ]
    other = weigh({**sunk, "cable": given_lengths}).point
    assert found.less.pull == pytest.approx(other.pull, rel=SAME)
    assert found.less.reserve == pytest.approx(other.reserve, rel=SAME)


@settings(max_examples=5, deadline=None)
@given(some.floats(0.01, 0.9))
def test_drag_by_moments(share: float) -> None:
    """A rigid mast leaning east on a hinge, held by one stay: T d = weight moment + (1 +- r) wind moment (statics)."""
    length, lean = 10.0, math.radians(20.0)
    section = made.weightless(length) | {"mass": 20.0, "drag": 1.2}
    leaning = made.spar(length=length, rigid=True, section=[section], base="hinged", lean=20.0, toward=90.0)
    head = np.array([length * math.sin(lean), length * math.cos(lean)])
    toward = np.array([-8.0, 0.0]) - head
    lever = abs(head[0] * toward[1] - head[1] * toward[0]) / np.linalg.norm(toward)
    stay = made.cable("west", length, "west", length=float(np.linalg.norm(toward)))
    tables = {"wind": made.wind(270.0, speed=20.0), "rope": {"rope": made.rope(stiffness=1e9)}}
    document = made.document([leaning], made.anchors(8.0, 270.0, names=["west"]), [stay], straight=True, **tables)
    weight = 20.0 * 9.80665 * length * (length / 2) * math.sin(lean)
    blown = 0.5 * 1.25 * 20.0**2 * 1.2 * 0.1 * math.cos(lean) ** 2 * length**2 / 2
    found = span(weigh(document, drag=share), "drag")
    stretch = 1e-5  # of the stay, at most 3 kN over 1 GN; the head moves by a few times that
    for side, end in ((-1.0, found.less), (1.0, found.more)):
        assert end.pull == pytest.approx((weight + (1 + side * share) * blown) / lever, rel=stretch)


def test_the_stability_reserve_is_that_of_the_reserve_study() -> None:
    """Its factor on the wind in the direction that is lost first, and at an end of a range that of the scenario written out."""
    document = made.mast(20.0, 70.0)
    found = weigh(document, tension=0.1)

    def factors(other: made.Document) -> list[float]:
        return [s.of(WIND).stands_to for s in reserves(made.scenario(other)).every]  # type: ignore[union-attr]

    assert found.point.margin is not None
    assert found.point.margin.lost
    drawn = factors(document)
    assert found.point.stands_to == pytest.approx(min(drawn), rel=2 * CLOSE)
    more = factors(WRITTEN_OUT["initial tension"][2](document, 1.0))
    assert span(found, "initial tension").more.stands_to == pytest.approx(more[int(np.argmin(drawn))], rel=2 * CLOSE)
    assert more[int(np.argmin(drawn))] != pytest.approx(min(drawn), rel=CLOSE), "the range moves it"


def test_drag_is_a_factor_on_the_wind() -> None:
    """For a wind raised by a factor x the forces are those of drag times x: lost at x0/(1 +- r)."""
    found = weigh(made.mast(20.0), drag=0.15)
    for end, share in ((span(found, "drag").less, 0.85), (span(found, "drag").more, 1.15)):
        assert end.stands_to * share == pytest.approx(found.point.stands_to, rel=2 * CLOSE)


def test_a_softer_brace_is_lost_in_proportion() -> None:
    """A rigid mast on level stays without wind: all loads, lost at P = k h2/H (Winter); k goes with EA but for the stays' tension."""
    high, held, reach, pull, EA = 10.0, 6.0, 400.0, 1000.0, 2e6
    head = made.fitting(at=high, load=made.vector(0.0, 0.0, -9000.0))
    pole = made.spar("mast", rigid=True, section=[made.weightless(high)], fitting=[head])
    ring = made.anchors(reach, 0.0, 90.0, 180.0, 270.0, level=held)
    stays = [made.cable(f"stay {a['name']}", held, a["name"], tension=pull) for a in ring]
    document = made.document([pole], ring, stays, still=True, straight=True, rope={"rope": made.rope(stiffness=EA)})
    found = weigh({**document, "case": [{"name": "calm", "wind": 0.0}]}, stiffness=0.2)
    for end, share in ((found.point, 1.0), (span(found, "rope stiffness").less, 0.8), (span(found, "rope stiffness").more, 1.2)):
        ideal = (2 * share * EA / reach * (1 + pull / (share * EA)) + 2 * pull / reach) * held**2 / high
        assert end.margin is not None
        assert end.margin.loads == ALL
        assert 9000.0 * end.stands_to == pytest.approx(ideal, rel=2 * CLOSE)


def test_what_is_not_lost_is_above_the_greatest_factor_looked_at() -> None:
    stump = made.document([made.spar("stump", 2.0, base="fixed", section=[made.tube(2.0)])], wind=made.wind(0.0, speed=1.0))
    found = weigh(stump, drag=0.2)
    told = files.as_dict(found)["point"]["stability"]
    assert told == {"loads": WIND, "factor": None, "stands_to": MOST, "lost": False, "case": "design", "wind_from_deg": 0.0}
    assert stability(found.point.stands_to, MOST) == "above 20"
    assert files.as_table(found).splitlines()[1].split(",")[7:10] == ["", "20.0", "no"]


@pytest.mark.usefixtures("unraised")
def test_ranges_of_nothing_give_the_point_itself() -> None:
    found = weigh(mast())
    assert found.spans
    assert all(s.less == found.point and s.more == found.point for s in found.spans)
    assert all(s.moves(found.point) == 0 for s in found.spans)


@pytest.mark.usefixtures("unraised")
def test_what_moves_most_comes_first() -> None:
    found = matters.weigh(made.scenario(mast()))
    moves = [s.moves(found.point) for s in found.spans]
    assert moves == sorted(moves, reverse=True)
    assert moves[0] > 0.01
    assert len(found.spans) == 4 + 3


def test_what_cannot_be_varied_says_why() -> None:
    stay = made.stayed(made.spar(base="fixed"), 0.0, 120.0, 240.0, length=19.8, rope={"rope": made.rope(expansion=0.0)})
    del stay["rope"]["rope"]["expansion"]
    found = matters.weigh(made.scenario(stay))
    lacking = {s.what: s.lacking for s in found.spans if s.lacking}
    assert lacking == {
        "initial tension": "no cable is given by tension",
        "drag": "no case has wind",
        "temperature": "no expansion given for rope rope",
    }


@pytest.mark.usefixtures("unraised")
def test_a_range_in_which_it_falls_says_so_and_comes_first() -> None:
    """Without a low guy the slender mast stands in 33 m/s, and falls in 40 m/s, which has 1.47 times the pressure."""
    case = [{"name": "without", "without": ["9 m C"]}]
    found = weigh(made.mast(190.0, wind=made.wind(190.0, speed=33.0), case=case), drag=0.6)
    first = found.spans[0]
    assert first.what == "drag"
    assert (found.point.falls, first.less.falls) == (0, 0)
    assert first.more.falls > 0
    assert "falls toward" in first.more.reason
    crowded = replace(first, less=replace(first.less, pull=2 * found.point.pull))
    for spans in (found.spans, (crowded, *found.spans[1:])):
        page = draw_matters_page(replace(found, spans=spans), "A3", "SI")
        assert f"{first.ends[1]}: falls in {first.more.falls}" in {text.text for text in page.texts}
        assert_apart(page)


@pytest.mark.parametrize(("key", "words"), [("tension = 1.0", "less than 1"), ('temperature = "20 degC"', 'such as "20 K"')])
def test_wrong_ranges_are_refused(key: str, words: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "a.toml"
    file.write_text(made.text(mast()) + f"[ranges]\n{key}\n")
    assert cli.run(["matters", str(file)]) == 2
    assert words in capsys.readouterr().err


@pytest.mark.usefixtures("one_format")
def test_files_and_exit_status(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "a.toml"
    file.write_text(made.text(made.mast(20.0, ranges={**NOTHING, "drag": 0.15, "tension": 0.1})))
    status = cli.run(["matters", str(file), "--out", str(tmp_path / "out")])
    printed = capsys.readouterr().out
    told = json.loads((tmp_path / "out/matters.json").read_text(encoding="utf-8"))
    reserves_ = [r[end]["reserve"]["factor_over_required"] for r in told["ranges"] for end in ("less", "more")]
    assert status == (3 if min(reserves_) < 1 else 0)
    assert "level of anchor A" in printed
    assert {p.name for p in (tmp_path / "out").iterdir()} == {f"matters.{kind}" for kind in ("json", "csv", "pdf", "svg", "png")}
    rows = list(csv.DictReader((tmp_path / "out/matters.csv").read_text(encoding="utf-8").splitlines()))
    assert len(rows) == 1 + 2 * 7
    assert float(rows[0]["greatest_pull_N"]) == told["point"]["greatest_pull"]["resultant_N"]
    assert float(rows[0]["lost_at_factor"]) == told["point"]["stability"]["factor"]
