"""A line of text as drawn, against its measure."""

from __future__ import annotations

from guys.drawing.lettering import width
from guys.drawing.style import POINT_MM
from guys.drawing.text_line import outline


def test_outline_is_where_the_width_says() -> None:
    right = outline("mast", False).vertices[:, 0].max()
    whole = width("mast", 1.0) / POINT_MM
    assert 0.97 * whole <= right <= whole  # white after the last glyph
