"""Published tables shipped with the program: small CSV files in ``guys/data`` whose last column is the source of each row."""

from __future__ import annotations

import csv
from functools import cache
from importlib.resources import files
from io import StringIO


@cache
def rows(name: str) -> tuple[dict[str, str], ...]:
    """The rows of ``guys/data/<name>.csv`` as text, in file order."""
    text = files("guys").joinpath("data", f"{name}.csv").read_text(encoding="utf-8")
    return tuple(dict(row) for row in csv.DictReader(StringIO(text)))


def number(text: str) -> float | None:
    """A cell as a float, None where it is empty."""
    return float(text) if text.strip() else None
