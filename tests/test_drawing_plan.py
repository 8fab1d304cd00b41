"""The plan is true: positions to scale, bars and rings to one scale of loads, dashes where a guy drops."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
import sheet_samples as samples
from matplotlib.lines import Line2D
from matplotlib.patches import Circle

from guys.drawing import anchor_words, plan
from guys.drawing.page import Page, Rect, new_page
from guys.drawing.rounding import tongue
from guys.results import Solution

ZONE = Rect(12.0, 80.0, 228.0, 260.0)
DRAWN = 1e-9
"""Share by which a drawn length may differ from its number: rounding of doubles."""
SI = tongue("SI")


def drawn(solution: Solution, ratio: float = 250.0) -> Page:
    page = new_page("A3")
    plan.draw_plan(page, solution, ZONE, ratio, SI)
    return page


def named(page: Page, name: str) -> list[Line2D | Circle]:
    return [a for a in page.figure.get_children() if (a.get_gid() or "").startswith(name)]


@pytest.mark.parametrize("paper", ["A3", "A4", "letter", "tabloid"])
def test_anchor_distances_are_true_on_every_paper(paper: str) -> None:
    solution = samples.solution(samples.FOUR)
    page = new_page(paper)
    ratio = plan.fitting_ratio(page, solution, ZONE, SI)
    at = plan.frame(page, solution, ZONE, ratio).on_page(solution.anchors.position)
    paper_mm = np.linalg.norm(at[0] - at[1]) * page.shrink
    metres = np.linalg.norm((solution.anchors.position[0] - solution.anchors.position[1])[:2])
    assert paper_mm * ratio / 1000.0 == pytest.approx(metres, rel=DRAWN)


def test_bars_and_rings_are_to_one_scale() -> None:
    solution = samples.solution(samples.RELAY)
    page = drawn(solution)
    scales = []
    for worst in solution.worst_anchors:
        (bar,) = named(page, f"bar {worst.name}")
        (ring,) = named(page, f"ring {worst.name}")
        x, y = bar.get_data()  # type: ignore[union-attr]
        scales += [np.hypot(x[1] - x[0], y[1] - y[0]) / worst.horizontal.peak, ring.radius / worst.uplift.peak]  # type: ignore[union-attr]
    assert max(scales) == pytest.approx(min(scales), rel=DRAWN)


def test_a_bar_points_the_way_the_anchor_is_pulled() -> None:
    solution = samples.solution(samples.RELAY)
    page = drawn(solution)
    for i, worst in enumerate(solution.worst_anchors):
        x, y = named(page, f"bar {worst.name}")[0].get_data()  # type: ignore[union-attr]
        inward = -solution.anchors.position[i, :2]
        along = np.array([x[1] - x[0], y[1] - y[0]])
        assert along @ inward == pytest.approx(np.linalg.norm(along) * np.linalg.norm(inward), rel=1e-6)  # guys run to the mast's axis


def test_solid_where_always_taut_dashed_where_one_drops() -> None:
    dropping = samples.solution(samples.RELAY)
    assert len(named(drawn(dropping), "guy dashed")) == 3
    taut = replace(
        dropping,
        cables=replace(dropping.cables, slack=np.zeros_like(dropping.cables.slack)),
        sweep=replace(dropping.sweep, slack=np.zeros_like(dropping.sweep.slack)),  # type: ignore[type-var]
    )
    page = drawn(taut)
    assert len(named(page, "guy solid")) == 3
    assert not named(page, "guy dashed")
    one = taut.sweep.slack.copy()  # type: ignore[union-attr]
    one[0, 7, 4] = True
    page = drawn(replace(taut, sweep=replace(taut.sweep, slack=one)))  # type: ignore[type-var]
    assert len(named(page, "guy dashed")) == 1
    assert len(named(page, "guy solid")) == 2


def test_guys_of_anchors_at_one_bearing_are_drawn_apart() -> None:
    page = drawn(samples.solution(samples.SAME))
    assert len(named(page, "guy")) == 9


def test_words_of_an_anchor() -> None:
    solution = samples.solution(samples.FOUR)
    words = [line.text for line in anchor_words.anchor_words(solution, solution.worst_anchors[1], SI)]
    assert words == ["E", "out 7.5 kN   up 11 kN", "97°   9.50 m   level +0.00 m", "wind from 95°"]


def test_an_anchor_never_lifted_says_so() -> None:
    assert anchor_words.uplift_words(-300.0, SI) == "none"
    assert anchor_words.uplift_words(0.0, SI) == "none"


def test_no_ring_reaches_its_neighbour_and_no_bar_passes_its_guy() -> None:
    for made in samples.ALL.values():
        solution = samples.solution(made)
        page = drawn(solution, plan.fitting_ratio(new_page("A3"), solution, ZONE, SI))
        rings = [a for a in named(page, "ring") if isinstance(a, Circle)]
        centres = np.array([r.center for r in rings])
        radii = np.array([r.radius for r in rings])
        away = np.linalg.norm(centres[:, None] - centres[None], axis=-1) + 1e6 * np.eye(len(rings))
        assert (away > radii[:, None] + radii[None] - 1e-9).all()


def words(page: Page) -> list[str]:
    return [a.get_text() for a in page.figure.get_children() if hasattr(a, "get_text")]


def test_a_fall_circle_larger_than_the_plan_is_told_in_words() -> None:
    solution = samples.solution(samples.Guyed("tall on a small plot", 20.0, (18.0,), samples.ring(3, 3.0)))
    page = drawn(solution, 50.0)
    assert "fall circle of mast 20.00 m: beyond this plan" in words(page)
    assert not page.crowded
    assert "fall circle of mast 20.00 m" in words(drawn(solution, 300.0))


def test_without_anchors_the_fall_circle_gives_the_plan_its_size() -> None:
    solution = samples.solution(samples.FOUR)
    bare = replace(solution, anchors=replace(solution.anchors, name=(), position=np.zeros((0, 3))), worst_anchors=())
    reach = plan.fall_circles(solution)[0][2]
    assert np.ptp(plan.bounds(bare), axis=0) == pytest.approx([2.0 * reach] * 2, rel=DRAWN)
