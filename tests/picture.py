"""The picture of the sheet in the README: `python -m tests.picture` draws it anew as docs/sheet.png."""

from __future__ import annotations

from io import BytesIO
from pathlib import Path

from guys import read_scenario, solve

REPOSITORY = Path(__file__).parent.parent
PICTURE = REPOSITORY / "docs" / "sheet.png"
DOTS = 110
"""To the inch of an A3 page: the smallest words are then legible, in a third of the bytes of the sheet's own picture."""
TONES = 200
"""Of the palette: the sheet has seven colours, the rest smooths the edges of letters; with fewer the colours dull."""


def picture() -> bytes:
    """The sheet of the quarry mast as a PNG with a palette."""
    from PIL import Image

    from guys.drawing import sheet

    drawn, packed = BytesIO(), BytesIO()
    sheet(solve(read_scenario(REPOSITORY / "scenarios" / "quarry-relay-mast.toml"))).savefig(drawn, format="png", dpi=DOTS)
    Image.open(drawn).convert("RGB").quantize(TONES, dither=Image.Dither.NONE).save(packed, "PNG", optimize=True)
    return packed.getvalue()


if __name__ == "__main__":
    PICTURE.write_bytes(picture())
