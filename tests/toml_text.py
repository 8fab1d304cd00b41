"""Plain dictionaries as TOML text, and a small faultless scenario to spoil: help for the tests of the reader."""

from __future__ import annotations

import copy
from typing import Any

Document = dict[str, Any]

MAST: Document = {
    "format": 1,
    "title": "Test mast",
    "spar": [
        {
            "name": "mast",
            "foot": {"east": "0 m", "north": "0 m", "level": "0 m"},
            "section": [{"length": "12 m", "tube": {"diameter": "89 mm", "wall": "3.2 mm"}, "material": "steel", "drag": 1.2}],
            "fitting": [{"name": "panel", "at": "11 m", "mass": "10 kg", "area": "0.4 m2", "drag": 1.4}],
        }
    ],
    "anchor": [{"name": name, "bearing": f"{bearing} deg", "radius": "8 m"} for name, bearing in (("N", 0), ("SE", 120), ("SW", 240))],
    "guy_level": [{"spar": "mast", "at": "9 m", "rope": "wire", "to": ["N", "SE", "SW"], "tension": "1 kN"}],
    "rope": {"wire": {"diameter": "6 mm", "mass": "0.15 kg/m", "stiffness": "1.4 MN", "strength": "23 kN", "drag": 1.2}},
    "wind": {"speed": "25 m/s", "averaging": "3 s", "height": "10 m"},
}

BOOM: Document = {
    **MAST,
    "spar": [
        MAST["spar"][0],
        {
            "name": "boom",
            "foot": {"spar": "mast", "at": "1 m"},
            "lean": "60 deg",
            "toward": "90 deg",
            "section": [{"length": "6 m", "tube": {"diameter": "60 mm", "wall": "3 mm"}, "material": "steel", "drag": 1.2}],
        },
    ],
    "cable": [
        {"name": "topping", "from": {"spar": "mast", "at": "10 m"}, "to": {"spar": "boom", "at": "6 m"}, "rope": "wire", "length": "8 m"}
    ],
}


def changed(document: Document, *changes: tuple[tuple[str | int, ...], Any]) -> Document:
    """A copy with values set at key paths; `...` takes a key away, and a path may go one step beyond what is there."""
    found = copy.deepcopy(document)
    for path, value in changes:
        place: Any = found
        for part in path[:-1]:
            place = place.setdefault(part, {}) if isinstance(place, dict) else place[part]
        if value is ...:
            del place[path[-1]]
        elif isinstance(place, list) and path[-1] == len(place):
            place.append(value)
        else:
            place[path[-1]] = value
    return found


def dumps(document: Document) -> str:
    """The document as TOML: one line for each top-level value, tables and lists written inline."""
    return "".join(f"{_key(key)} = {_value(value)}\n" for key, value in document.items())


def dumps_tables(document: Document) -> str:
    """The document as TOML the way people write it: arrays of tables under headers, one key to a line."""
    text = "".join(f"{_key(key)} = {_value(value)}\n" for key, value in document.items() if not isinstance(value, (dict, list)))
    for key, value in document.items():
        if isinstance(value, list):
            text += "".join(_table(f"[[{key}]]", item, key) for item in value)
        elif isinstance(value, dict) and all(isinstance(item, dict) for item in value.values()):
            text += "".join(_table(f"[{key}.{_key(name)}]", item, key) for name, item in value.items())
        elif isinstance(value, dict):
            text += _table(f"[{key}]", value, key)
    return text


def _table(header: str, table: Document, path: str) -> str:
    nested = {key: value for key, value in table.items() if isinstance(value, list) and value and isinstance(value[0], dict)}
    text = f"\n{header}\n" + "".join(f"{_key(key)} = {_value(value)}\n" for key, value in table.items() if key not in nested)
    return text + "".join(_table(f"[[{path}.{key}]]", item, f"{path}.{key}") for key, value in nested.items() for item in value)


def _key(key: str) -> str:
    return key if key and all(c.isascii() and (c.isalnum() or c in "-_") for c in key) else _text(key)


def _text(text: str) -> str:
    return '"' + "".join(c if c not in '"\\' and c.isprintable() else f"\\U{ord(c):08x}" for c in text) + '"'


def _value(value: Any) -> str:
    if isinstance(value, bool):
        return str(value).lower()
    if isinstance(value, str):
        return _text(value)
    if isinstance(value, dict):
        return "{ " + ", ".join(f"{_key(key)} = {_value(item)}" for key, item in value.items()) + " }"
    if isinstance(value, list):
        return "[" + ", ".join(map(_value, value)) + "]"
    return repr(value)
