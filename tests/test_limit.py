"""The limiting wind: against an independent reference, solved again at the answer, scaled where that must hold, turned and mirrored."""

from __future__ import annotations

import csv
import io
import json
import math
from dataclasses import replace
from functools import cache
from pathlib import Path

import numpy as np
import pytest
import scenarios_made as made

from guys import cli, parse_scenario, stability
from guys.checks.items import Demands, Item
from guys.doors import limit as door
from guys.drawing.limit import draw_limit_page, lowest
from guys.errors import ScenarioError
from guys.exchange import limit as exchange
from guys.limits import LOST, NOTHING, Limit, Limits
from guys.loads import CaseLine
from guys.path import CLOSE
from guys.setting import Setting
from guys.studies import limit as limit_study
from guys.studies.batch import Batch, solve_lines
from guys.studies.limit import limits

ANSWER = 1e-3
"""What the allowable may be missed by where the answer is solved again, and a speed by where the same is asked twice."""
APART = math.radians(120)
"""Bearings of the circle, fewer than by default, for speed."""
INDEPENDENT = 5e-3
"""Of a speed against the independent reference calculation."""


@cache
def found(written: str) -> Limits:
    return limits(parse_scenario(written), apart=APART)


def limits_of(document: made.Document) -> Limits:
    return found(made.text(document))


def mast(*directions: float, speed: float = 25.0, **tables: object) -> made.Document:
    document = made.mast(*directions, **tables)  # type: ignore[arg-type]
    return {**document, "wind": made.wind(*directions, speed=speed)}


def loose() -> made.Document:
    """Guys so strong, and a lean so free, that equilibrium goes first."""
    return mast(20.0, rope={"rope": made.rope(strength=1e7)}, allowables={"lean": 60.0, "spar": 0.01})


def line_of(limit: Limit, speed: float) -> CaseLine:
    return CaseLine(limit.case, limit.wind_from, 1.0, limit.wind_factor, 0.0, 288.15, speed=speed)


def again(document: made.Document, rows: list[Limit], speed: list[float]) -> tuple[Setting, Batch]:
    setting = made.setting(document)
    return setting, solve_lines(setting, [line_of(limit, v) for limit, v in zip(rows, speed, strict=True)], detail=False)


# ---------------------------------------------------------------- against others


def test_a_pylon_tips_where_an_independent_calculation_says() -> None:
    """16.463786 m/s: independent reference calculation, this project (an exact rod by shooting)."""
    study = limits_of(made.tipping())
    (limit,) = (study.circle[k] for k in study.listed)
    assert limit.speed == pytest.approx(16.463786, rel=INDEPENDENT)
    assert (limit.governs, limit.lost) == (LOST, limit.speed)
    assert limit.falls.startswith("pylon falls toward 270°")


def test_it_tips_where_moments_about_the_hinge_vanish() -> None:
    """By hand on the drawn line: weight of panel and tube against wind on both, 0.5 % for the bend, which is not in it."""
    weight = 1200.0 * 15.0 * 0.5 + 7850 * math.pi * (0.1683 - 0.005) * 0.005 * 9.80665 * 15.0 * 7.5 * 0.5
    up = math.cos(math.radians(30.0))
    blown = 1.3 * 6.0 * 15.0 * up + 1.2 * 0.1683 * up**2 * 15.0 * 7.5
    speed = math.sqrt(2 * weight / blown / 1.25)
    assert limits_of(made.tipping()).circle[limits_of(made.tipping()).listed[0]].speed == pytest.approx(speed, rel=INDEPENDENT)


# ---------------------------------------------------------------- against itself


def test_solved_again_at_the_answer_the_allowable_is_met() -> None:
    document = mast(20.0, 70.0)
    study = limits_of(document)
    rows = [limit for limit in (*study.circle, *study.worst) if limit.governs not in (LOST, NOTHING)]
    assert len(rows) > 4
    for share, past in ((1.0, None), (1 - ANSWER, False), (1 + ANSWER, True)):
        _, batch = again(document, rows, [share * limit.speed for limit in rows])
        use = np.nanmax(batch.demands.use, axis=1)
        if past is None:
            assert use == pytest.approx(np.ones(len(rows)), rel=ANSWER)
            items = batch.demands.items
            named = [f"{items[k].thing}: {items[k].quantity}" for k in np.nanargmax(batch.demands.use, axis=1)]
            assert named == [limit.governs for limit in rows]
        else:
            assert (use > 1).tolist() == [past] * len(rows)


def test_equilibrium_is_there_below_and_gone_above() -> None:
    """From the setting, along the load and not the speed: stands a per mille below what was lost, and not one above."""
    document = loose()
    rows = list(limits_of(document).circle)
    assert {limit.governs for limit in rows} == {LOST}
    for share, stands in ((1 - 2 * CLOSE, True), (1 + 4 * CLOSE, False)):
        _, batch = again(document, rows, [share * limit.lost for limit in rows])
        assert (batch.code <= stability.NEUTRAL).tolist() == [stands] * len(rows)


def test_cables_drop_where_it_is_said() -> None:
    document = mast(20.0, 70.0)
    study = limits_of(document)
    rows = [(limit, k) for limit in study.circle for k, at in enumerate(limit.drops) if not math.isnan(at)]
    assert {study.scenario.cable[k].name for _, k in rows} == {"9 m C", "17 m C"}, "the guys to leeward of both winds"
    for share, slack in ((1 - ANSWER, False), (1 + ANSWER, True)):
        _, batch = again(document, [limit for limit, _ in rows], [share * limit.drops[k] for limit, k in rows])
        told = batch.forces.slack[np.arange(len(rows)), [k for _, k in rows]]
        assert told.tolist() == [slack] * len(rows)
    first = {cable: at for _, cable, at, _ in study.first_drops}
    assert first["9 m C"] == min(limit.drops[2] for limit in (*study.circle, *study.worst) if not math.isnan(limit.drops[2]))
    assert math.isnan(first["9 m A"])


def test_the_way_of_failing_is_that_of_the_state_that_governs() -> None:
    """Of a branching whose other state is used more, what governs and its way of failing are told of that one, not of the first."""
    items = (Item("anchor A", "pull", "N", "", modes=("sliding", "lifting")), Item("cable", "tension", "N", ""))

    def state(pull: float, mode: int) -> Demands:
        ones = np.ones((1, 2))
        return Demands(items, np.array([[pull, 0.6]]), ones, ones, np.array([[mode, -1]]))

    _, batch = again(mast(20.0), [limits_of(mast(20.0, 70.0)).circle[0]], [10.0])
    whole = replace(batch, demands=state(0.5, 0), mirror_demands=state(1.5, 1), mirror_lines=batch.lines)
    assert limit_study._governing(whole, 0) == (items[0], "lifting", 1.5)
    tie = replace(whole, mirror_demands=state(0.6 * (1 + 1e-12), 1))
    assert limit_study._governing(tie, 0) == (items[1], "", 0.6), "the first of two alike but for rounding"
    assert limit_study._use(whole).tolist() == [1.5]


def test_a_wind_factor_of_four_halves_the_speed_and_gives_no_action_level() -> None:
    """Pressure goes with the square of the speed for this profile and drag; every speed is solved, so both answers must agree."""
    acting = {"actions": [0.8, 0.5], "lower_in": "20 min"}
    plain = limits_of(made.tipping())
    heavy = limits_of({**made.tipping(), "limit": acting, "case": [{"name": "one", "wind": 4.0}]})
    for name in ("speed", "lost"):
        one, four = ([getattr(study.circle[k], name) for k in study.listed] for study in (plain, heavy))
        assert [2 * speed for speed in four] == pytest.approx(one, rel=2 * CLOSE)
    assert heavy.actions == ()
    assert any("wind factor 4 is kept; no action level" in note for note in heavy.notes)
    leaning = limits_of({**pole(10.0), "limit": acting})
    assert leaning.actions == ((0.5, 0.5 * leaning.worst[0].speed), (0.8, 0.8 * leaning.worst[0].speed))


def test_limits_turn_and_mirror_with_the_site() -> None:
    """Listed bearings; those of the circle stay where they are.  What is lost may be told a step of `CLOSE` apart."""
    one, two = limits_of(made.tipping()), limits_of(made.mirrored(made.turned(made.tipping(), 40.0)))
    (limit,), (other,) = ([study.circle[k] for k in study.listed] for study in (one, two))
    assert round(math.degrees(other.wind_from)) == -(90 + 40) % 360
    assert (other.speed, other.governs) == (pytest.approx(limit.speed, rel=ANSWER), limit.governs)
    assert other.lost == pytest.approx(limit.lost, rel=4 * CLOSE)


def test_the_worst_is_no_better_than_any_bearing_and_is_narrowed_down() -> None:
    study = limits_of(mast(20.0, 70.0))
    least = min(limit.speed for limit in study.circle)
    assert study.worst[0].speed <= least
    document = mast(20.0, 70.0)
    near = [replace(study.worst[0], wind_from=study.worst[0].wind_from + math.radians(turn)) for turn in (-3.0, 3.0)]
    _, batch = again(document, near, [study.worst[0].speed] * 2)
    assert (np.nanmax(batch.demands.use, axis=1) < 1 + ANSWER).all()


# ---------------------------------------------------------------- what may happen


def test_past_already_in_still_air_is_no_wind_at_all() -> None:
    """No cable is 5000 times as strong as the pull of the pylon in still air."""
    study = limits_of({**made.tipping(), "allowables": {"cable": 5000.0, "lean": 85.0}})
    assert {limit.speed for limit in study.circle} == {0.0}
    assert all("is past its allowable in still air" in limit.why for limit in study.circle)
    assert study.circle[study.listed[0]].lost == pytest.approx(16.463786, rel=INDEPENDENT)


def test_what_does_not_stand_in_still_air_takes_no_wind() -> None:
    case = [{"name": "lost", "without": ["backstay BN", "backstay BS"]}, {"name": "whole"}]
    study = limits_of({**made.tipping(), "case": case})
    lost = [limit for limit in study.circle if limit.case == "lost"]
    assert {(limit.speed, limit.lost, limit.governs) for limit in lost} == {(0.0, 0.0, LOST)}
    assert all("before any wind: pylon falls" in limit.why for limit in lost)
    assert all(limit.known > 10.0 for limit in study.circle if limit.case == "whole")


def test_nothing_is_lost_and_nothing_judged() -> None:
    """A stiff fixed stump without cables and a lean of 60 degrees allowed: no limit up to the greatest speed looked at."""
    stump = made.spar("stump", 2.0, base="fixed", section=[made.tube(2.0)])
    study = limits_of(made.document([stump], wind=made.wind(0.0), allowables={"lean": 60.0, "spar": 0.01}))
    assert {limit.governs for limit in study.circle} == {NOTHING}
    assert all(math.isnan(limit.speed) and math.isnan(limit.lost) for limit in study.circle)
    assert study.actions == ()
    assert f"not lost up to {study.most:g} m/s" in study.worst[0].why


def test_no_wind_is_a_fault_of_the_file() -> None:
    with pytest.raises(ScenarioError, match="no case has wind"):
        limits_of(made.mast())


# ---------------------------------------------------------------- ways out


def pole(speed: float) -> made.Document:
    """A fixed tube that leans a degree in some 40 m/s and never falls."""
    document = made.document([made.spar("pole", 6.0, base="fixed", section=[made.tube(6.0)])], wind=made.wind(20.0, speed=speed))
    return {**document, "allowables": {"spar": 0.1}, "limit": {"actions": [0.6], "lower_in": "20 min"}}


@pytest.mark.parametrize(
    ("document", "status"),
    [(pole(10.0), 0), (pole(70.0), 3), ({**made.tipping(), "wind": made.wind(90.0, speed=20.0)}, 4)],
    ids=["within", "past", "falls"],
)
def test_exit_status_tells_whether_the_scenarios_wind_is_past_the_limit(
    document: made.Document, status: int, tmp_path: Path, capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    """On fewer bearings than by default, for speed; `test_files_and_table` has them all."""
    monkeypatch.setattr(door, "limits", lambda scenario, progress: limits(scenario, apart=APART, progress=progress))
    file = tmp_path / "mast.toml"
    file.write_text(made.text(document), encoding="utf-8")
    assert cli.run(["limit", str(file), "--json"]) == status
    told = json.loads(capsys.readouterr().out)
    least = min((limit["speed_m_s"] for limit in told["circle"] if limit["speed_m_s"] is not None), default=math.inf)
    assert (least < told["wind"]["speed_m_s"]) is (status > 0)
    assert told["limits"][0]["wind_from_deg"] == pytest.approx(document["wind"]["directions"][0])
    assert told["lower_in_s"] == (1200.0 if "limit" in document else None)


@pytest.mark.usefixtures("one_format")
def test_files_and_table(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "pole.toml"
    file.write_text(made.text(pole(10.0)), encoding="utf-8")
    assert cli.run(["limit", str(file), "--out", str(tmp_path / "out"), "--units", "both"]) == 0
    assert sorted(path.name for path in (tmp_path / "out").iterdir()) == [f"limit.{kind}" for kind in ("csv", "json", "pdf", "png", "svg")]
    printed = capsys.readouterr().out
    for words in ("3 s gust at 10.00 m", "Action levels, with 20 min to lower", "m/s (", "lean of spar pole reaches its allowable"):
        assert words in printed
    rows = list(csv.DictReader(io.StringIO((tmp_path / "out" / "limit.csv").read_text(encoding="utf-8"))))
    assert [row["listed"] for row in rows].count("lowest") == 1
    assert sum(row["listed"] == "yes" for row in rows) == 1
    assert len(rows) == 1 + 36, "every 10 degrees, the listed one among them"
    told = json.loads((tmp_path / "out" / "limit.json").read_text(encoding="utf-8"))
    study = limits_of(pole(10.0))
    assert told["limits"][0]["speed_m_s"] == pytest.approx(study.circle[study.listed[0]].speed, rel=ANSWER)


@pytest.mark.parametrize("units", ["SI", "US"])
def test_the_figure_names_what_governs_and_keeps_words_apart(units: str) -> None:
    study = limits_of(mast(20.0, 70.0))
    page = draw_limit_page(study, "A4", units)  # type: ignore[arg-type]
    words = " ".join(text.text for text in page.texts)
    _, least, _ = lowest(study)
    for governs in {limit.governs for limit in least}:
        assert governs.split(":")[0][:6] in words
    assert not page.crowded
    assert "own wind" in words
    boxes = [text for text in page.texts if text.x + 1.0 > page.width]
    assert not boxes


def test_the_result_says_the_same_as_the_study() -> None:
    study = limits_of(made.tipping())
    told = exchange.as_dict(study)
    assert told["format"] == "guys-limit/1"
    assert told["limits"][0]["equilibrium_lost_m_s"] == study.circle[study.listed[0]].lost
    assert told["limits"][0]["use"] is None
    assert exchange.as_text(study) == exchange.as_text(study)
