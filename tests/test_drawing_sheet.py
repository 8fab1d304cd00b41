"""The sheet: nothing drawn touches or clips words, for masts small and tall, few anchors and many, booms and leaning pylons."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
import sheet_samples as samples
from matplotlib.lines import Line2D
from matplotlib.patches import Circle, Polygon
from matplotlib.transforms import Bbox

from guys.drawing.compose import draw_page
from guys.drawing.labels import crossing, overlapping
from guys.drawing.page import Page
from guys.drawing.text_line import TextLine
from guys.results import Solution

PAGE_EDGE = 5.0
"""Least margin [mm on A3] that a desk printer leaves white."""


def boxes(page: Page) -> np.ndarray:
    """(text, 4) what every line of words covers on the page [figure pixels]."""
    found = [text.get_window_extent() for text in page.texts]
    return np.array([[b.x0, b.y0, b.x1, b.y1] for b in found])


def strokes(page: Page) -> np.ndarray:
    """(piece, 4) every stroke on the page as straight pieces [figure pixels]."""
    pieces = []
    for artist in page.figure.get_children():
        if isinstance(artist, TextLine) or not isinstance(artist, Line2D | Polygon | Circle):
            continue
        if not isinstance(artist, Line2D) and not artist.get_linewidth():
            continue
        path = artist.get_transform().transform_path(artist.get_path())
        for points in path.to_polygons(closed_only=False) if not isinstance(artist, Line2D) else [path.vertices]:
            p = np.asarray(points)
            piece = np.hstack([p[:-1], p[1:]])
            pieces.append(piece[np.isfinite(piece).all(axis=1)])
    return np.concatenate(pieces)


def struck(pieces: np.ndarray, words: np.ndarray) -> list[int]:
    """Which words a stroke runs through."""
    low, high = np.minimum(pieces[:, :2], pieces[:, 2:]), np.maximum(pieces[:, :2], pieces[:, 2:])
    near = [((low < box[2:]) & (high > box[:2])).all(axis=1) for box in words]
    return [i for i, box in enumerate(words) if crossing(pieces[near[i]], box[None]).any()]


def assert_clear(page: Page) -> None:
    words = boxes(page)
    both = overlapping(words, words) & ~np.eye(len(words), dtype=bool)
    clash = [(page.texts[i].text, page.texts[j].text) for i, j in np.argwhere(both)]
    assert not clash, clash
    crossed = struck(strokes(page), words)
    assert not crossed, [page.texts[i].text for i in crossed]
    edge = PAGE_EDGE * page.shrink / 25.4 * page.figure.dpi
    inside = Bbox.from_bounds(edge, edge, page.figure.bbox.width - 2 * edge, page.figure.bbox.height - 2 * edge)
    assert words[:, 0].min() >= inside.x0
    assert words[:, 1].min() >= inside.y0
    assert words[:, 2].max() <= inside.x1
    assert words[:, 3].max() <= inside.y1
    assert not page.crowded


@pytest.mark.parametrize("units", ["SI", "US", "both"])
@pytest.mark.parametrize("name", list(samples.ALL))
def test_words_touch_nothing(name: str, units: str) -> None:
    paper = {"SI": "A3", "US": "letter", "both": "A4"}[units]
    assert_clear(draw_page(samples.solution(samples.ALL[name]), paper, None, units))  # type: ignore[arg-type]


def random_mast(seed: int) -> samples.Guyed:
    """A mast of 5 m to 150 m with 3 to 8 anchors, some at one bearing, some with a boom, some leaning."""
    draw = np.random.default_rng(seed)
    height = float(np.exp(draw.uniform(np.log(5.0), np.log(150.0))))
    count = int(draw.integers(3, 9))
    turns = np.sort(draw.uniform(0.0, 360.0, count))
    if seed % 3 == 0:
        turns[1] = turns[0]
    radii = height * draw.uniform(0.35, 1.0, count)
    if seed % 3 == 0:
        radii[1] = radii[0] * 1.6
    anchors = tuple(
        (f"anchor {i}" if seed % 2 else "NESW"[i % 4] + str(i), float(b), float(r), round(float(draw.uniform(-0.1, 0.1) * r), 2))
        for i, (b, r) in enumerate(zip(turns, radii, strict=True))
    )
    levels = tuple(float(height * share) for share in np.linspace(0.95, 0.4, int(draw.integers(1, 6)))[::-1])
    boom = (0.25 * height, 0.6 * height, float(draw.uniform(0.0, 360.0))) if seed % 4 == 1 else None
    lean = float(draw.uniform(5.0, 25.0)) if seed % 5 == 2 else 0.0
    return samples.Guyed(
        f"Mast number {seed}", height, levels, anchors, push=float(40.0 * height**1.5), initial=float(20.0 * height), lean=lean,
        toward=float(draw.uniform(0.0, 360.0)), boom=boom, sections=int(draw.integers(1, 7)), fittings=int(draw.integers(0, 6)),
    )  # fmt: skip


@pytest.mark.parametrize("seed", range(30))
def test_words_touch_nothing_on_random_masts(seed: int) -> None:
    paper = ("A3", "A4", "letter", "tabloid")[seed % 4]
    assert_clear(draw_page(samples.solution(random_mast(seed)), paper, None, "SI"))


@pytest.fixture(scope="module")
def fallen() -> Solution:
    return samples.falling(samples.FOUR, [3, 4, 5])


def all_words(page: Page) -> str:
    return " ".join(text.text for text in page.texts)


def test_fallen_cases_are_said_in_words(fallen: Solution) -> None:
    page = draw_page(fallen, "A3", None, "SI")
    assert_clear(page)
    words = all_words(page)
    assert "NO EQUILIBRIUM (falls) in 3 of 13" in words
    assert "loads are of the cases that stand" in words
    assert "the mast tips toward 210°" in words


def test_nothing_stands() -> None:
    solution = samples.falling(samples.FOUR, range(13))
    nothing = replace(solution.worst_anchors[0].resultant, value=np.nan, case="", peak=np.nan, peak_case="")
    solution = replace(
        solution, sweep=None,
        worst_anchors=tuple(replace(w, resultant=nothing, horizontal=nothing, uplift=nothing) for w in solution.worst_anchors),
    )  # fmt: skip
    page = draw_page(solution, "A3", None, "SI")
    assert_clear(page)
    words = all_words(page)
    assert "AS DRAWN" in words
    assert "there are no loads to show" in words
    assert words.count("no equilibrium, no loads") == 4


def test_every_warning_appears() -> None:
    solution = replace(samples.solution(samples.RELAY), warnings=samples.WARNINGS)
    page = draw_page(solution, "A4", None, "SI")
    assert_clear(page)
    words = all_words(page)
    for warning in samples.WARNINGS:
        assert all(part in words for part in warning.split()[:3])
    assert "8 WARNINGS" in words
    assert words.count("unit slip") == 2


def test_elevation_looks_where_asked() -> None:
    page = draw_page(samples.solution(samples.RELAY), "A3", float(np.deg2rad(37.5)), "SI")
    assert_clear(page)
    assert "Elevation, looking toward 37.5°" in all_words(page)


def test_a_spar_without_anchors() -> None:
    lone = samples.Guyed("Flag pole", 8.0, (), (), fittings=1)
    page = draw_page(samples.solution(lone), "A3", None, "SI")
    assert_clear(page)


def test_a_run_without_wind() -> None:
    solution = samples.solution(samples.FOUR)
    still = np.array([0, 0])
    cables = replace(
        solution.cables,
        **{f: getattr(solution.cables, f)[still] for f in ("tension_anchor", "tension_top", "slack", "present", "curve")},
    )  # fmt: skip
    calm = [replace(w, resultant=replace(w.resultant, case="cold", wind_from=np.nan, peak_case="cold", peak_wind_from=np.nan))
            for w in solution.worst_anchors]  # fmt: skip
    solution = replace(
        solution, scenario=solution.scenario.model_copy(update={"wind": None}), case=("setting", "cold"), wind_from=np.full(2, np.nan),
        state=("stable", "stable"), note=(None, None), reason=(None, None), sweep=None, cables=cables, worst_anchors=tuple(calm),
        anchors=replace(solution.anchors, pull=solution.anchors.pull[still]), head_lean=solution.head_lean[still],
    )  # fmt: skip
    page = draw_page(solution, "A3", None, "SI")
    assert_clear(page)
    words = all_words(page)
    assert "still air, cold" in words
    assert "3 s gust" not in words
