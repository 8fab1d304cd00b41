"""`guys list`: what the catalogue holds, with units, sources and what is from memory."""

from __future__ import annotations

import json
import sys
from typing import TextIO

from guys import terminal
from guys.catalogue.listing import KINDS, Column, Listing, shown
from guys.drawing.rounding import Units


def list_command(kind: str, words: tuple[str, ...], as_json: bool, units: Units) -> int:
    """Print one kind, those entries alone that hold every word."""
    found = KINDS[kind]().holding(words)
    if as_json:
        _as_json(kind, found, sys.stdout)
    else:
        _as_table(found, words, units, sys.stdout)
    return 0


def _as_json(kind: str, found: Listing, stream: TextIO) -> None:
    """SI throughout; the unit stands in the key."""
    entries = [
        {column.key: cell for column, cell in zip(found.columns, row, strict=True)} | {"known": known, "source": source}
        for row, known, source in zip(found.rows, found.known, found.source, strict=True)
    ]
    text = {"format": "guys-list/1", "kind": kind, "note": found.note.replace("\n", " "), "entries": entries}
    stream.write(json.dumps(text, indent=2, ensure_ascii=False) + "\n")


def _as_table(found: Listing, words: tuple[str, ...], units: Units, stream: TextIO) -> None:
    if not found.rows:
        stream.write(f"{found.title}: nothing holds {' and '.join(words)}\n")
        return
    sources = list(dict.fromkeys(found.source))
    columns = [(column, k, unit) for k, column in enumerate(found.columns) for unit in _units(column, units)]
    columns = [each for each in columns if any(row[each[1]] is not None for row in found.rows)]
    head = [column.head if unit is None else f"{column.head} {unit}" for column, _, unit in columns]
    rows = [
        [*(shown(row[k], unit) for _, k, unit in columns), known, f"{sources.index(source) + 1}"]
        for row, known, source in zip(found.rows, found.known, found.source, strict=True)
    ]
    terminal.table(found.title, [*head, "known", "source"], rows, stream)
    stream.write(f"\n{found.note}\n\nSources\n" + "".join(f"  {n + 1:2d} {source}\n" for n, source in enumerate(sources)))


def _units(column: Column, wanted: Units) -> tuple[str | None, ...]:
    if column.units is None:
        return (None,)
    return column.units if wanted == "both" else (column.units[wanted == "US"],)
