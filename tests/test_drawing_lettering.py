"""Text measured from outlines, against the measure of matplotlib's own text layout."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st
from matplotlib.font_manager import FontProperties
from matplotlib.textpath import TextPath

from guys.drawing import lettering as t
from guys.drawing.style import POINT_MM

KERNING = 0.02
"""Share by which pair kerning, which the library applies and we leave out, narrows a line of ordinary words."""


@pytest.mark.parametrize("bold", [False, True])
@pytest.mark.parametrize("text", ["out 7.8 kN   up 7.7 kN", "Relay mast on the quarry bench", "245° 12.50 m", "+55 ft 9 in"])
def test_width_agrees_with_the_library(text: str, bold: bool) -> None:
    font = FontProperties(family="DejaVu Sans", weight="bold" if bold else "normal")
    ink = TextPath((0, 0), text, size=100.0, prop=font).get_extents().width * POINT_MM
    ours = t.width(text, 100.0, bold)
    bearings = 0.12 * 100.0 * POINT_MM  # white before the first and after the last glyph
    assert ink * (1.0 - KERNING) <= ours <= ink * (1.0 + KERNING) + bearings


@given(st.text(st.characters(codec="utf-8", exclude_categories=["Cs"]), max_size=60), st.floats(5.0, 60.0))
def test_wrapping_loses_nothing_and_fits(text: str, room: float) -> None:
    lines = t.wrapped(text, room, 9.0)
    assert "".join("".join(lines).split()) == "".join(t.plain(text).split())
    assert all(t.width(line, 9.0) <= room or len(line) == 1 for line in lines)


def test_a_glyph_that_is_missing_is_marked() -> None:
    assert t.plain("mast 桅") == "mast ?"
    assert t.plain("two\nlines\tone") == "two lines one"


def test_cutting() -> None:
    assert t.fitted("northern block", 100.0, 9.0) == "northern block"
    assert t.fitted("northern block", 15.0, 9.0).endswith("…")
    short = t.shortened("picket group under the eastern embankment", 25.0, 9.0)
    assert short.startswith("pic")
    assert short.endswith("nt")
    assert t.width(short, 9.0) <= 25.0
