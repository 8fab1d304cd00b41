"""Text measured from the outlines of one typeface, so that a layout made in millimetres holds in every file kind.

A line of text is as wide as the sum of its glyphs' advances (1/1000 em, unhinted, no kerning: pair kerning only narrows it).  The
typeface is the one that matplotlib ships (DejaVu Sans); `guys.drawing.text_line` draws it.
"""

from __future__ import annotations

from functools import lru_cache
from pathlib import Path
from typing import TYPE_CHECKING

from guys.drawing.style import POINT_MM

if TYPE_CHECKING:
    from matplotlib.ft2font import FT2Font

EM = 1000.0
ELLIPSIS = "…"


def typeface(bold: bool) -> str:
    """The file of the typeface."""
    import matplotlib

    name = "DejaVuSans-Bold.ttf" if bold else "DejaVuSans.ttf"
    return str(Path(matplotlib.get_data_path()) / "fonts" / "ttf" / name)


@lru_cache(maxsize=2)
def font_of(bold: bool) -> FT2Font:
    """The typeface, one unit an em's thousandth."""
    from matplotlib.ft2font import FT2Font

    font = FT2Font(typeface(bold))
    font.set_size(EM, 72.0)
    return font


@lru_cache(maxsize=2)
def _known(bold: bool) -> frozenset[int]:
    return frozenset(font_of(bold).get_charmap())


@lru_cache(maxsize=512)
def advance(character: str, bold: bool) -> float:
    """Width [em] of a character."""
    from matplotlib.ft2font import LoadFlags

    glyph = font_of(bold).load_char(ord(character), flags=LoadFlags.NO_HINTING)
    return float(glyph.linearHoriAdvance) / 65536.0 / EM


def plain(text: str, bold: bool = False) -> str:
    """One line the typeface can set: line ends and tabs as spaces, a glyph it lacks as a question mark."""
    known = _known(bold)
    return "".join(c if ord(c) in known else " " if c.isspace() else "?" for c in text)


def width(text: str, size: float, bold: bool = False) -> float:
    """Width [mm] of one line at `size` points."""
    return sum(advance(c, bold) for c in text) * size * POINT_MM


def height(size: float) -> float:
    """Height [mm] from the lowest descender to the top of capitals."""
    return 1.0 * size * POINT_MM


def fitted(text: str, room: float, size: float, bold: bool = False) -> str:
    """The text, or as much of it as `room` [mm] holds, ended by an ellipsis."""
    if width(text, size, bold) <= room:
        return text
    while text and width(text + ELLIPSIS, size, bold) > room:
        text = text[:-1].rstrip()
    return text + ELLIPSIS


def shortened(text: str, room: float, size: float, bold: bool = False) -> str:
    """A name cut in its middle where `room` [mm] is short: its beginning and its end tell it apart."""
    if width(text, size, bold) <= room:
        return text
    for kept in range(len(text) - 1, 1, -1):
        short = text[: (kept + 1) // 2].rstrip() + ELLIPSIS + text[-(kept // 2) :].lstrip()
        if width(short, size, bold) <= room:
            return short
    return ELLIPSIS


def _chunks(word: str, room: float, size: float, bold: bool) -> list[str]:
    """A word longer than the line, cut to pieces that fit."""
    pieces, piece = [], ""
    for character in word:
        if piece and width(piece + character, size, bold) > room:
            pieces.append(piece)
            piece = ""
        piece += character
    return [*pieces, piece]


def wrapped(text: str, room: float, size: float, bold: bool = False) -> list[str]:
    """The text broken into lines no wider than `room` [mm]; nothing is left out."""
    lines: list[str] = []
    for word in plain(text, bold).split():
        trial = f"{lines[-1]} {word}" if lines else word
        if lines and width(trial, size, bold) <= room:
            lines[-1] = trial
        else:
            lines.extend(_chunks(word, room, size, bold))
    return lines
