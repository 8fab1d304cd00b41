"""The elevation is true: cables as they hang, spars and ground to scale, angles worked out in space."""

from __future__ import annotations

from dataclasses import replace
from math import atan2, degrees, hypot

import numpy as np
import pytest
import sheet_samples as samples

from guys.drawing import compose, elevation, key, style, under_ground
from guys.drawing.lettering import width
from guys.drawing.page import Page, Rect, new_page
from guys.drawing.reading import View, look_bearing
from guys.drawing.rounding import tongue
from guys.results import Solution

ZONE = Rect(240.0, 120.0, 408.0, 260.0)
DRAWN = 1e-9
"""Share by which a drawn length may differ from its number: rounding of doubles."""


def drawn(solution: Solution, toward: float, ratio: float = 250.0) -> Page:
    page = new_page("A3")
    elevation.draw_elevation(page, solution, ZONE, ratio, View(toward), tongue("SI"))
    return page


def data(page: Page, name: str) -> np.ndarray:
    (line,) = [a for a in page.figure.get_children() if a.get_gid() == name]
    return np.column_stack(line.get_data())  # type: ignore[attr-defined]


def test_cables_are_drawn_as_they_hang() -> None:
    solution = samples.solution(samples.RELAY)
    toward = np.deg2rad(25.0)
    page = drawn(solution, toward)
    for cable in range(len(solution.cables.name)):
        curve = solution.cables.curve[0, cable]
        right = curve[:, 0] * np.cos(toward) - curve[:, 1] * np.sin(toward)
        points = data(page, f"cable {cable}") * 250.0 / 1000.0
        assert points[:, 0] - points[0, 0] == pytest.approx(right - right[0], rel=DRAWN, abs=1e-9)
        assert points[:, 1] - points[0, 1] == pytest.approx(curve[:, 2] - curve[0, 2], rel=DRAWN, abs=1e-9)


def test_ground_runs_through_every_anchor_and_the_foot() -> None:
    solution = samples.solution(samples.FOUR)
    ground = data(drawn(solution, 0.0), "ground") * 0.25
    levels = ground[1:-1, 1] - ground[1:-1, 1].min()
    expected = np.append(solution.anchors.position[:, 2], 0.0) - solution.anchors.position[:, 2].min()
    assert sorted(levels) == pytest.approx(sorted(expected), abs=1e-9)


def test_looking_north_east_is_to_the_right() -> None:
    assert View(0.0).project(np.array([3.0, 4.0, 5.0])).tolist() == [3.0, 5.0]
    assert View(np.pi / 2.0).project(np.array([3.0, 4.0, 5.0])) == pytest.approx([-4.0, 5.0])


def test_guy_angles_are_those_in_space() -> None:
    solution = samples.solution(samples.FOUR)
    line = under_ground.anchor_line(solution, "S")  # 12.5 m out, 2 m below the foot; guys at 9 m and 17 m
    low, high = degrees(atan2(11.0, 12.5)), degrees(atan2(19.0, 12.5))
    assert line.rest == f"  {low:.0f}° {high:.0f}°"


def test_the_chosen_bearing_hides_no_anchor() -> None:
    """Four anchors square to one another: looking along one pair would put them in front of the mast."""
    solution = samples.solution(samples.Guyed("square", 20.0, (18.0,), samples.ring(4, 12.0)))
    across = View(look_bearing(solution)).project(solution.anchors.position)[:, 0]
    gaps = np.diff(np.sort(np.append(across, 0.0)))
    assert gaps.min() > 0.2 * 12.0


def test_a_leaning_spar_is_seen_from_the_side() -> None:
    solution = samples.solution(samples.PYLON)
    spar = solution.spars[0].drawn
    seen = View(look_bearing(solution)).project(spar[-1] - spar[0])[0]
    assert abs(seen) > 0.85 * hypot(*(spar[-1] - spar[0])[:2])


def test_alike_sections_share_a_letter() -> None:
    letters = [row[0] for row in key.lettered_sections(samples.solution(samples.BOOM))]
    assert letters == ["A", "A", "A", "B"]


def test_fittings_are_numbered_from_the_foot_up() -> None:
    rows = key.numbered_fittings(samples.solution(samples.PYLON))
    assert [n for n, _, _ in rows] == ["1", "2", "3"]
    assert [f.at for _, _, f in rows] == sorted(f.at for _, _, f in rows)


def test_levels_are_those_of_the_drawing_also_where_thrust_shortens_the_mast() -> None:
    solution = samples.solution(samples.FOUR)
    spar = solution.spars[0]
    short = spar.displacement - np.array([0.0, 0.0, 0.02]) * (spar.station / spar.station[-1])[:, None]
    page = drawn(replace(solution, spars=(replace(spar, displacement=short), *solution.spars[1:])), 0.0)
    said = [a.get_text() for a in page.figure.get_children() if hasattr(a, "get_text")]
    assert "+9.00 m" in said
    assert "+17.00 m" in said


def test_words_of_many_anchors_stand_in_tiers_under_their_points() -> None:
    """Twelve anchors: every leader falls plumb, or nearly, to its words; nothing overlaps."""
    solution = samples.solution(samples.Guyed("twelve", 30.0, (14.0, 28.0), samples.ring(12, 13.0, 5.0)))
    page = compose.draw_page(solution, "A3", np.deg2rad(345.0), "SI")
    assert not page.crowded
    zone = [a for a in page.figure.get_children() if a.get_gid() == "leader"]
    runs = [np.ptp(np.column_stack(line.get_data()), axis=0) for line in zone]  # type: ignore[attr-defined]
    long = [run for run in runs if run[1] > 6.0 and run[0] < 5.0]
    assert len(long) >= 8


@pytest.mark.parametrize("name", ["mast", "west mast", "a mast with a very long name, put up in the spring of last year"])
@pytest.mark.parametrize("made", [samples.solution(samples.FOUR), samples.falling(samples.FOUR, range(4))], ids=["stands", "falls"])
def test_a_long_name_does_not_cut_what_the_heading_says(name: str, made: Solution) -> None:
    named = replace(made, spars=(replace(made.spars[0], name=name), *made.spars[1:]))
    said = elevation.how_drawn(named, ZONE.width)
    assert said.endswith(" · guy angles from the ground")
    assert width(said, style.SMALL) <= ZONE.width
    assert ("NOT STAND" in said) == (made.state[0] == "none")
