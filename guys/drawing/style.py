"""The look of everything drawn: ink on white, one colour for loads, one for wind, greys for the site.

No colour carries a meaning alone: loads are bars and rings, winds are named with their bearing, a dropped cable is dashed, and
"within" and "past" are written out.  The two colours differ in lightness as well as hue (relative luminance of rust 0.13, of teal
0.13 against ink 0.02 and white 1), so they print as the same readable dark grey and never as white.

Sizes are in points and millimetres on an A3 page; a smaller paper shrinks the whole composition, and 9 pt on A3 is 6.4 pt on A4.
"""

from __future__ import annotations

from typing import Final

INK = "#1b1d20"
LOAD = "#a4471b"
WIND = "#0f6b6b"
GREY = "#6b6e70"
PALE = "#b9bbb8"
GROUND = "#efece4"
WHITE = "#ffffff"

TITLE = 19.0
HEADING = 12.0
NAME = 12.5
BODY = 9.0
SMALL = 9.0
POINT_MM = 25.4 / 72.0
LINE_PITCH = 1.30
ROW = 4.2
"""Height [mm] of a line of small print."""

HAIR = 0.5
THIN = 0.8
CABLE = 1.1
SPAR = 2.6
BAR = 3.4
RING = 1.5

DASHED = (0.0, (4.2, 2.4))
DOTTED = (0.0, (0.8, 2.6))
SOLID: Final = "solid"

# Outlines of glyphs in the SVG, so that it looks alike where the typeface is missing; fixed names inside the files.
DRAWING_RULES: dict[str, str | int | bool] = {
    "svg.hashsalt": "guys",
    "svg.fonttype": "path",
    "pdf.fonttype": 3,
    "pdf.compression": 6,
    "path.simplify": False,
}
