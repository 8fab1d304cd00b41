"""The page of a raising: what it says is what was found, in bounds, and drawn for either gin pole, with wind and without."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from raisings import MAST, STANDING, raised

from guys import read_scenario
from guys.drawing import rounding
from guys.drawing.raising import draw_raising
from guys.studies.raising import Raised, solve

SHIPPED = Path(__file__).parent.parent / "scenarios/tilt-up-mast.toml"


@pytest.fixture(scope="module")
def shipped() -> Raised:
    return solve(read_scenario(SHIPPED))


def texts(found: Raised, paper: str = "A3", units: rounding.Units = "SI") -> list[str]:
    """All words on the page, none of which leaves it."""
    figure = draw_raising(found, paper, units)
    wide, high = figure.get_size_inches() * figure.dpi
    words = [artist for artist in figure.get_children() if hasattr(artist, "get_text")]
    for artist in words:
        box = artist.get_window_extent()
        assert min(box.x0, box.y0, wide - box.x1, high - box.y1) >= 0, artist.get_text()
    return [artist.get_text() for artist in words]


def test_forces_of_the_lying_and_the_standing_mast_stand_on_the_page(shipped: Raised) -> None:
    words = texts(shipped)
    for stage in (0, -1):
        for value in (shipped.gin_pole, shipped.holding, np.linalg.norm(shipped.on_hinge, axis=-1)):
            if value[stage, 0] > 1.0:
                assert rounding.load(float(value[stage, 0]), "SI") in words
    assert {"0°", "45°", "90°", "winch", "hoist line", "most in wind"} <= set(words)


@pytest.mark.parametrize("units", ["SI", "US", "both"])
@pytest.mark.parametrize("pole", [MAST["raise"]["gin_pole"], {**STANDING, "backstay": {"bearing": "270 deg", "radius": "9 m"}}])
def test_still_air_alone_and_either_gin_pole(pole: dict[str, object], units: rounding.Units) -> None:
    words = texts(raised((("raise", "gin_pole"), pole), (("raise", "angles"), "every 30 deg")), "A4", units)
    assert "most in wind" not in words
    assert ("lbf" in "".join(words)) >= (units == "US")


def test_one_angle_is_enough() -> None:
    assert "40°" in texts(raised((("raise", "angles"), ["40 deg"])))
