"""What every table of the scenario file is: a frozen model; tables in modules of their own start from it, and `model` takes them in;
and what several of them hold."""

from __future__ import annotations

import ast
import inspect
import textwrap
from itertools import zip_longest
from typing import cast

from pydantic import BaseModel, ConfigDict

from guys.scenario import quantity as q


class Model(BaseModel):
    """Frozen, no unknown keys; the docstrings below each field become the descriptions of the JSON Schema.

    Validators are built when the first value is validated and docstrings are read when asked for, not when a model is imported: most runs
    need a part of the one and none of the other.
    """

    model_config = ConfigDict(frozen=True, extra="forbid", populate_by_name=True, defer_build=True)


def descriptions(model: type[BaseModel]) -> dict[str, str]:
    """What the docstrings below the fields of a model say, by the key in the file; a field declared again without one has none."""
    found: dict[str, str] = {}
    for base in reversed(model.__mro__):
        if issubclass(base, Model):
            found |= _own_descriptions(base)
    return {field.alias or name: text for name, field in model.model_fields.items() if (text := found.get(name))}


def _own_descriptions(model: type[BaseModel]) -> dict[str, str]:
    body = cast(ast.ClassDef, ast.parse(textwrap.dedent(inspect.getsource(model))).body[0]).body
    found = {}
    for node, below in zip_longest(body, body[1:]):
        if isinstance(node, ast.AnnAssign) and isinstance(node.target, ast.Name):
            text = below.value.value if isinstance(below, ast.Expr) and isinstance(below.value, ast.Constant) else ""
            found[node.target.id] = inspect.cleandoc(text) if isinstance(text, str) else ""
    return found


class GroundFoot(Model):
    """A foot on the ground: east and north, bearing and radius, or latitude and longitude; once read, east, north and level."""

    east: q.Length = 0.0
    """Distance east of the origin."""
    north: q.Length = 0.0
    """Distance north of the origin."""
    bearing: q.Angle | None = None
    """Bearing from the origin; of a gin pole from the foot of the spar raised."""
    radius: q.PositiveLength | None = None
    """Level distance from there."""
    lat: q.Latitude | None = None
    """Latitude, degrees north, WGS 84; a bare number, with lon in place of the others."""
    lon: q.Longitude | None = None
    """Longitude, degrees east, WGS 84; a bare number."""
    level: q.Length = 0.0
    """Height above the origin's level; left out: that of the surveyed ground, or without one the origin's."""
