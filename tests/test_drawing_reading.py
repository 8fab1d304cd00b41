"""What the drawings read from a result."""

from __future__ import annotations

from dataclasses import replace
from math import nan, radians, sqrt

import numpy as np
import pytest
import sheet_samples as samples

from guys.drawing import reading
from guys.results import Extreme


@pytest.mark.parametrize(
    ("flags", "runs"),
    [
        ([0, 0, 0, 0], []),
        ([1, 1, 1, 1], [(0.0, 0.0)]),
        ([0, 1, 1, 0], [(1.0, 2.0)]),
        ([1, 0, 0, 1], [(3.0, 0.0)]),
        ([1, 0, 1, 0], [(0.0, 0.0), (2.0, 2.0)]),
    ],
)
def test_sectors_run_around_the_circle(flags: list[int], runs: list[tuple[float, float]]) -> None:
    assert reading.sectors(np.array(flags, dtype=bool), np.arange(4.0)) == runs


def test_the_refined_peak_is_taken_where_it_is_greater() -> None:
    assert reading.greatest(Extreme(1.0, "a", 0.1, 2.0, "b", 0.2)) == reading.Governing(2.0, "b", 0.2)
    assert reading.greatest(Extreme(1.0, "a", 0.1, nan, "", nan)) == reading.Governing(1.0, "a", 0.1)
    assert reading.greatest(Extreme(3.0, "a", 0.1, 2.0, "b", 0.2)).value == 3.0


def test_check_distances_of_even_rings() -> None:
    """1.732 R for three anchors and 1.414 R for four (common practice in setting out)."""
    for count, share in ((3, sqrt(3.0)), (4, sqrt(2.0))):
        solution = samples.solution(samples.Guyed("ring", 10.0, (9.0,), samples.ring(count, 8.0)))
        distances = [away for _, away in reading.check_distances(solution)]
        assert distances == pytest.approx([8.0 * share] * count, rel=1e-12)


def test_bearing_radius_and_slope_distance() -> None:
    solution = samples.solution(samples.FOUR)
    turn, level, slope = reading.from_base(solution, solution.anchors.position[2])
    assert (turn, level, slope) == pytest.approx((radians(183.0), 12.5, sqrt(12.5**2 + 2.0**2)), rel=1e-12)


def test_the_case_is_named_where_several_hold_wind() -> None:
    one, two = samples.solution(samples.FOUR), samples.solution(samples.RELAY)
    assert reading.wind_words(one, "storm", radians(15.0)) == "wind from 15°"
    assert reading.wind_words(two, "storm", radians(15.0)) == "wind from 15°, storm"
    assert reading.wind_words(one, "setting", nan) == "still air, as set"


def test_slack_sectors_in_words() -> None:
    solution = samples.solution(samples.FOUR)
    assert solution.sweep is not None
    slack = np.zeros_like(solution.sweep.slack)
    slack[0, [70, 71, 0, 1], 0] = True  # 350° to 5°, every 5°
    listed = np.zeros_like(solution.cables.slack)
    listed[0, 1] = True
    cables = replace(solution.cables, slack=listed)
    changed = replace(solution, sweep=replace(solution.sweep, slack=slack), cables=cables)
    assert reading.slack_sectors(changed, 0) == ("wind from 350° to 5°",)
    assert reading.slack_sectors(changed, 1) == ("still air, as set",)
    assert reading.slack_sectors(changed, 2) == ()


def test_fall_circle_reaches_the_head() -> None:
    (circle,) = reading.fall_circles(samples.solution(samples.BOOM))
    name, foot, reach = circle
    assert name == "mast"
    assert foot.tolist() == [0.0, 0.0]
    assert reach == pytest.approx(12.0)


def test_without_a_setting_the_drawing_is_drawn() -> None:
    solution = samples.falling(samples.FOUR, range(13))
    chord = reading.hung_cable(solution, 0)
    assert chord.shape == (2, 3)
    assert chord[0] == pytest.approx(solution.anchors.position[0])
    assert chord[1] == pytest.approx([0.0, 0.0, 9.0])
