"""The page of pictures: what is drawn is what was found, and no words lie on one another."""

from __future__ import annotations

import math
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest
import scenarios_made as made
from matplotlib.lines import Line2D
from test_drawing_sheet import boxes

from guys import cli
from guys.drawing.labels import overlapping
from guys.drawing.page import Page
from guys.drawing.pictures import draw_pictures, pictures_page, project
from guys.drawing.rounding import load
from guys.results import Solution


def windy() -> Solution:
    return made.solved(made.mast(*range(0, 360, 30)))


def assert_apart(page: Page) -> None:
    words = boxes(page)
    both = overlapping(words, words) & ~np.eye(len(words), dtype=bool)
    assert not [(page.texts[i].text, page.texts[j].text) for i, j in np.argwhere(both)]


@pytest.mark.parametrize(("paper", "units"), [("A3", "SI"), ("A4", "US"), ("letter", "both")])
def test_words_stand_apart(paper: str, units: str) -> None:
    assert_apart(pictures_page(windy(), paper, units))  # type: ignore[arg-type]


def test_a_rose_has_the_greatest_tension_of_its_cable() -> None:
    solution = windy()
    told = {text.text for text in pictures_page(solution, "A3", "SI").texts}
    sweep = solution.sweep
    assert sweep is not None
    for k, name in enumerate(solution.cables.name):
        assert name in told
        assert load(float(np.nanmax(sweep.tension[:, :, k])), "SI") in told


def test_a_rose_is_drawn_to_the_rim() -> None:
    """Distances from the middle are tensions, all to one scale."""
    solution = windy()
    page = pictures_page(solution, "A3", "SI")
    sweep = solution.sweep
    assert sweep is not None
    scales = []
    for k, name in enumerate(solution.cables.name):
        curve = next(line for line in page.figure.get_children() if isinstance(line, Line2D) and line.get_gid() == name)
        x, y = np.asarray(curve.get_xdata(orig=True)), np.asarray(curve.get_ydata(orig=True))
        east = int(np.argmin(np.abs(sweep.bearing[0] - math.pi / 2)))
        west = int(np.argmin(np.abs(sweep.bearing[0] - 3 * math.pi / 2)))
        wide = float(x[east] - x[west])
        scales.append(wide / float(sweep.tension[0, east, k] + sweep.tension[0, west, k]))
        assert y[east] == pytest.approx(y[west])
    assert scales == pytest.approx([scales[0]] * len(scales))


def test_projection_keeps_lengths_across_and_foreshortens_the_rest() -> None:
    flat = project(np.eye(3))
    assert flat.T @ flat == pytest.approx(np.eye(2))
    assert flat[2, 0] == 0.0


def test_a_structure_without_wind_or_that_falls_still_gets_its_page() -> None:
    assert_apart(pictures_page(made.solved(made.mast()), "A3", "SI"))
    falling = made.solved(made.losing())
    assert_apart(pictures_page(falling, "A3", "SI"))
    nothing = replace(falling, state=("none",) * len(falling.state))
    assert draw_pictures(nothing, "A3", "SI").get_size_inches()[0] > 0


@pytest.mark.usefixtures("one_format")
def test_the_option_of_solve(tmp_path: Path) -> None:
    (tmp_path / "mast.toml").write_text(made.text(made.mast()), encoding="utf-8")
    assert cli.run(["solve", str(tmp_path / "mast.toml"), "--out", str(tmp_path / "out"), "--pictures"]) in (0, 3)
    assert {f"pictures.{kind}" for kind in ("pdf", "svg", "png")} <= {p.name for p in (tmp_path / "out").iterdir()}
