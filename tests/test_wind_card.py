"""The wind card: action levels by hand, what is left out, and that it is the limit study's."""

from __future__ import annotations

import math
from typing import Any

import pytest
import scenarios_made as made

from guys.drawing.rounding import tongue
from guys.drawing.wind_card import draw_card, measured_as, rows_of, words
from guys.exchange.field import wind_card
from guys.limits import Limit, Limits
from guys.scenario import Scenario
from guys.scenario.limit import Limit as Asked
from guys.studies import field as study

SAY = tongue("SI")
NO = math.nan


def plan(**asked: Any) -> Scenario:
    return made.scenario(made.mast(0.0)).model_copy(update={"limit": Asked(**asked)})


def limits(scenario: Scenario, *speeds: float, drops: float = NO, factor: float = 1.0) -> Limits:
    """Limits of the scenario's case at bearings a right angle apart."""
    cables = len(scenario.cable)
    circle = tuple(
        Limit(scenario.case[0].name, factor, k * math.pi / 2, speed, "cable", "tension reaches its allowable", 1.0, NO, "", NO,
              (drops + k, *[NO] * (cables - 1)))
        for k, speed in enumerate(speeds)
    )  # fmt: skip
    worst = min(circle, key=lambda limit: limit.known)
    return Limits(scenario, "0", circle, (0,), (worst,), 150.0, ("anchor A",), ())


def test_action_levels_are_shares_of_the_lowest_limit() -> None:
    found = limits(plan(actions=[0.8, 0.6], lower_in=1200.0), 40.0, 30.0)
    assert rows_of(found) == [("0.6 of the limit", 18.0), ("0.8 of the limit", 24.0), ("the limit", 30.0)]
    said = " ".join(words(found, SAY))
    assert "20 min" in said
    assert "from 90°" in said
    assert "not judged: anchor A" in said
    told = wind_card(found)
    assert told["limit_m_s"] == 30.0
    assert told["wind_from_deg"] == 90.0
    assert told["lower_in_s"] == 1200.0
    assert measured_as(found, SAY).endswith("at 10.00 m")


def test_no_limit_and_no_service_wind() -> None:
    none = limits(plan(actions=[0.6]), NO)
    assert not rows_of(none)
    assert "No limit was found up to 150 m/s" in words(none, SAY)[0]
    other = limits(plan(actions=[0.6]), 30.0, factor=0.5)
    assert not rows_of(other)
    assert wind_card(other)["limit_m_s"] is None
    assert "No limit: no service case" in words(other, SAY)[0]


@pytest.mark.parametrize("found", [
    limits(plan(actions=[0.6]), 30.0, 40.0, drops=20.0), limits(plan(actions=[0.6]), 30.0, drops=35.0), limits(plan(), NO),
    limits(plan(), 0.0),
])  # fmt: skip
def test_cards_are_drawn_with_cables_slack_below_the_limit_alone(found: Limits) -> None:
    from guys.drawing import wind_card as card

    drops = card._drops(found, SAY)
    assert len(drops) == (found.worst[0].drops[0] < found.worst[0].known)
    assert draw_card(found, "A4", "both").axes == []


def test_the_card_is_of_the_limit_study_and_only_where_limit_asks(monkeypatch: pytest.MonkeyPatch) -> None:
    asked = plan(actions=[0.5])
    made_up = limits(asked, 10.0)
    monkeypatch.setattr(study, "limits", lambda scenario, progress: made_up)
    found = study.field(asked)
    assert found.limits is made_up
    assert any("below the scenario's own wind" in w for w in found.warnings)
    assert study.field(plan()).limits is None
