"""Guyed masts, stayed booms and leaning pylons: cable tensions, base reactions and anchor loads."""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

from guys.version import __version__

if TYPE_CHECKING:
    from guys.results import Solution
    from guys.scenario import parse_scenario, read_scenario
    from guys.studies.standing import solve

_HOMES = {
    "read_scenario": "guys.scenario",
    "parse_scenario": "guys.scenario",
    "solve": "guys.studies.standing",
    "Solution": "guys.results",
}

__all__ = ["Solution", "__version__", "parse_scenario", "read_scenario", "solve"]


def __getattr__(name: str) -> Any:
    """Import on first use, so that ``guys --help`` loads nothing heavy."""
    if name not in _HOMES:
        raise AttributeError(f"module 'guys' has no attribute {name!r}")
    return getattr(import_module(_HOMES[name]), name)


def __dir__() -> list[str]:
    return sorted(__all__)
