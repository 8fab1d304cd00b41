"""Ice classes of ISO 12494: masses of glaze from its thicknesses (from memory), masses and vanes of rime (read)."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from guys.icing import coat
from guys.scenario import Ice
from guys.scenario.ice import resolved
from tests.published.compare import Allowance, Row, published

GLAZE = {
    "G1": ("0.57", "1.13", "3.11", "8.77"),
    "G2": ("1.70", "2.83", "6.79", "18.10"),
    "G3": ("3.39", "5.09", "11.03", "27.99"),
    "G4": ("5.65", "7.92", "15.83", "38.45"),
    "G5": ("8.48", "11.31", "21.21", "49.48"),
}
RIME = {
    "R1": ("0.5", (54, 22), (34, 35)),
    "R2": ("0.9", (78, 28), (54, 40)),
    "R3": ("1.6", (109, 36), (82, 47)),
    "R4": ("2.8", (150, 46), (120, 56)),
    "R5": ("5.0", (207, 60), (174, 70)),
}
"""Mass [kg/m], and length and width of the vane [mm] on bars of 10 and 30 mm."""
MILLIMETRES = Allowance(0.02, "vanes are printed in whole millimetres", share=True)


def of(name: str, vane: str = "windward") -> Ice:
    given = {"class": name, "vane": vane} if name.startswith("R") else {"class": name}
    return resolved(Ice(**given))


@published("ISO 12494 glaze", "MEMORY")
def test_glaze() -> Iterator[Row]:
    """Masses of glaze G1 to G5 on bars of 10, 30, 100 and 300 mm.

    Source: thicknesses of the classes and 900 kg/m3 from memory; masses worked by hand from them. Allowed: half a unit of the last digit.
    """
    for name, printed in GLAZE.items():
        for millimetres, text in zip((10, 30, 100, 300), printed, strict=True):
            yield Row(f"{name} on {millimetres} mm", "kg/m", text, float(coat(np.array(millimetres / 1000), of(name))[0]))


@published("ISO 12494 rime", "READ")
def test_rime() -> Iterator[Row]:
    """Masses and vanes of rime R1 to R5 on bars of 10 and 30 mm, and the mass their areas hold at 500 kg/m3.

    Source: table 5, in a public transcription. Area of a vane: pi/4 D (L + W/2) - pi/8 W^2. Allowed: half a unit of the last digit; for
    the areas also 2 %, since the sizes are printed in whole millimetres.
    """
    for name, (mass, *vanes) in RIME.items():
        for millimetres, (length, width) in zip((10, 30), vanes, strict=True):
            bar = np.array(millimetres / 1000)
            found, across = coat(bar, of(name)), coat(bar, of(name, "across"))
            L, D, W = float(across[1] - bar), float(found[1]), float(bar)
            yield Row(f"{name} on {millimetres} mm, mass", "kg/m", mass, float(found[0]))
            yield Row(f"{name} on {millimetres} mm, length", "mm", str(length), 1000 * L)
            yield Row(f"{name} on {millimetres} mm, width", "mm", str(width), 1000 * D)
            held = 500 * (math.pi / 4 * D * (L + W / 2) - math.pi / 8 * W**2)
            yield Row(f"{name} on {millimetres} mm, mass of the area", "kg/m", mass, held, MILLIMETRES)
