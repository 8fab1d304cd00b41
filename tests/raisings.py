"""A spar to raise, as a nested table: 12 m of 15 kg/m with 20 kg at its head, hinged, lying to the east; and what turns it about."""

from __future__ import annotations

from functools import cache
from typing import Any

from scenarios_made import Document
from toml_text import changed, dumps_tables

from guys import parse_scenario
from guys.studies.raising import Raised, solve

MAST: Document = {
    "format": 1,
    "title": "12 m mast raised with a turning gin pole",
    "spar": [
        {
            "name": "mast",
            "foot": {"east": "0 m", "north": "0 m", "level": "0 m"},
            "base": "hinged",
            "hinge_axis": "0 deg",
            "rigid": True,
            "section": [{"length": "12 m", "mass": "15 kg/m", "width": "100 mm", "drag": 1.2}],
            "fitting": [{"name": "head", "at": "12 m", "mass": "20 kg"}],
        }
    ],
    "raise": {
        "spar": "mast",
        "toward": "90 deg",
        "lift_at": "8 m",
        "gin_pole": {"length": "5 m", "mass": "25 kg", "kind": "turning"},
        "winch": {"bearing": "270 deg", "radius": "10 m", "level": "0 m"},
    },
}
STANDING = {"length": "6 m", "mass": "25 kg", "kind": "standing", "foot": {"east": "-1 m", "north": "0 m"}}
WIND = {"speed": "12 m/s", "averaging": "3 s", "height": "10 m", "directions": ["90 deg", "270 deg"]}
ELASTIC = {"length": "12 m", "mass": "15 kg/m", "EA": "300 MN", "EI": "700 kN m2", "GJ": "500 kN m2", "width": "100 mm", "drag": 1.2}


def raised(*changes: tuple[tuple[str | int, ...], Any], document: Document = MAST) -> Raised:
    """The raising of the changed document (kept: it is frozen)."""
    return _raised(dumps_tables(changed(document, *changes)))


@cache
def _raised(written: str) -> Raised:
    return solve(parse_scenario(written))


def turned(document: Document, degrees: float, mirrored: bool = False) -> Document:
    """The same raising on a site turned, or first mirrored east for west; everything stands at bearings from the first foot."""
    sign = -1.0 if mirrored else 1.0

    def walk(node: Any, key: str = "") -> Any:
        if isinstance(node, dict):
            return {name: walk(value, name) for name, value in node.items()}
        if isinstance(node, list):
            return [walk(item, key) for item in node]
        if key in ("bearing", "toward", "hinge_axis", "directions"):
            return f"{sign * float(node.removesuffix(' deg')) + degrees!r} deg"
        return node

    return walk(document)  # type: ignore[no-any-return]
