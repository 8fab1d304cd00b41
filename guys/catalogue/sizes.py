"""Sizes at the end of catalogue names: ``6mm``, ``12.5mm``, ``1/4in``, ``1-1/8in``."""

from __future__ import annotations

import re

from guys import units

_SIZE = re.compile(r"(?P<count>\d+(?:\.\d+)?|(?:\d+-)?\d+/\d+)(?P<unit>mm|in)", re.ASCII)


def metres(text: str) -> float | None:
    """The size [m], None where the text is not one."""
    match = _SIZE.fullmatch(text) if len(text) <= units.LONGEST else None
    if match is None:
        return None
    try:
        return units.parse(f"{match['count'].replace('-', ' ')} {match['unit']}", "length")
    except units.UnitError:
        return None


def inches(text: str) -> float:
    """A size of a table, in inches as printed (``1/4``, ``1-1/8``), in metres."""
    return units.parse(f"{text.replace('-', ' ')} in", "length")
