"""What a record is made of: sections of text, lists, tables, figures and formulas, before they are set as a page.

A cell is words, a number, or several of them in a row.  A number carries its full digits and the key of `record.json` it stands under, and
its words in the reader's units first and in the others after.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field


@dataclass(frozen=True)
class Number:
    """value in SI with all its digits ("" where there is none);  key : of record.json, "" for what the scenario gives
    first, other : rounded, with the unit, in the reader's system and in the other ("" where it reads the same)"""

    value: str
    key: str
    first: str
    other: str = ""


Piece = str | Number
Cell = Piece | tuple[Piece, ...]


@dataclass(frozen=True)
class Text:
    """A paragraph."""

    words: tuple[Piece, ...]
    strong: bool = False
    kind: str = "text"


@dataclass(frozen=True)
class Items:
    """A list."""

    rows: tuple[Cell, ...]
    kind: str = "items"


@dataclass(frozen=True)
class Table:
    """caption; heads of columns; rows, the first `named` cells of which head their row; note below"""

    caption: str
    heads: tuple[str, ...]
    rows: tuple[tuple[Cell, ...], ...]
    named: int = 1
    note: str = ""
    totals: int = 0
    """Rows at the end that are sums."""
    kind: str = "table"


@dataclass(frozen=True)
class Figure:
    """caption, what it shows in words for who cannot see it, and the drawing."""

    caption: str
    shows: str
    svg: str
    kind: str = "figure"


@dataclass(frozen=True)
class Formulas:
    """Lines of symbols and numbers, each with what it gives."""

    rows: tuple[tuple[str, Cell], ...]
    kind: str = "formulas"


@dataclass(frozen=True)
class Verbatim:
    """Text as it was written."""

    text: str
    label: str
    kind: str = "verbatim"


@dataclass(frozen=True)
class Blanks:
    """Lines to be filled in by hand."""

    rows: tuple[str, ...]
    heads: tuple[str, ...]
    kind: str = "blanks"


Block = Text | Items | Table | Figure | Formulas | Verbatim | Blanks


@dataclass(frozen=True)
class Section:
    """name : of its place on the page, for links."""

    name: str
    title: str
    blocks: tuple[Block, ...] = field(default=())


def text(*words: Piece, strong: bool = False) -> Text:
    """A paragraph of words and numbers."""
    return Text(tuple(words), strong)


def in_parts(caption: str, heads: Sequence[str], rows: Sequence[Sequence[Cell]], named: int, most: int, note: str = "") -> list[Table]:
    """A table, broken into several where it has more than `most` columns beside the named ones."""
    others = len(heads) - named
    starts = range(named, len(heads), most)
    return [
        Table(
            caption if others <= most else f"{caption}, part {n + 1} of {len(starts)}",
            (*heads[:named], *heads[start : start + most]),
            tuple((*row[:named], *row[start : start + most]) for row in rows),
            named,
            note,
        )
        for n, start in enumerate(starts)
    ]
