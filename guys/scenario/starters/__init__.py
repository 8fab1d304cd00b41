"""Commented scenarios that solve as they stand, to start one's own from."""

from __future__ import annotations

from importlib.resources import files
from typing import Final

KINDS: Final = ("mast", "boom", "pylon")


def text(kind: str) -> str:
    """The starter of a kind, as a scenario file."""
    return files(__package__).joinpath(f"{kind}.toml").read_text(encoding="utf-8")
