"""A lattice of round legs and lacing, as a section of a spar is given one.

A bar is written "26.9 x 2.6 mm" (tube: diameter, wall) or "10 mm" (solid bar); each of the two sizes may have a unit of its own.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Annotated, Any, Literal

from pydantic import GetCoreSchemaHandler, GetJsonSchemaHandler
from pydantic.json_schema import JsonSchemaValue
from pydantic_core import CoreSchema, core_schema

from guys import units
from guys.scenario import quantity as q
from guys.scenario.table import Model

Bracing = Literal["zigzag", "horizontals", "cross"]
_UNIT = re.compile(r"[A-Za-z]+\s*$")
_WRITE = 'write "26.9 x 2.6 mm" for a tube, "10 mm" for a solid bar'


@dataclass(frozen=True)
class Bar:
    """A round bar: outside diameter and wall [m], the wall half the diameter where it is solid."""

    diameter: float
    wall: float


@dataclass(frozen=True)
class _BarText:
    """Marks a field as a bar written in one string."""

    def read(self, value: object) -> Bar:
        """The bar of a string, or a `Bar` given from Python."""
        if isinstance(value, Bar):
            return value
        if not isinstance(value, str):
            raise q.fault(f"{q.shown(value)} is not a bar; {_WRITE}")
        first, crossed, second = value.replace("×", "x").partition("x")
        unit = _UNIT.search(second)
        if crossed and unit and not _UNIT.search(first):
            first = f"{first.strip()} {unit[0].strip()}"
        try:
            diameter = units.parse(first, "length")
            wall = units.parse(second, "length") if crossed else diameter / 2
        except units.UnitError as error:
            raise q.fault(f"{error}; {_WRITE}") from None
        if not 0.0 < wall <= diameter / 2:
            raise q.fault(f"{q.shown(value)}: the wall is not between zero and half the diameter; {_WRITE}")
        return Bar(diameter, wall)

    def __get_pydantic_core_schema__(self, source: Any, handler: GetCoreSchemaHandler) -> CoreSchema:
        return core_schema.no_info_plain_validator_function(self.read)

    def __get_pydantic_json_schema__(self, schema: CoreSchema, handler: GetJsonSchemaHandler) -> JsonSchemaValue:
        return {"type": "string", "pattern": r"^[^x×]+([x×][^x×]+)?$", "examples": ["26.9 x 2.6 mm", "10 mm"]}


BarField = Annotated[Bar, _BarText()]


class Lattice(Model):
    """A lattice of three or four legs with lacing in every face; with `material` it gives mass, stiffness and width."""

    face: q.PositiveLength
    """Width of a face: distance between the axes of two legs."""
    legs: BarField
    """The legs: "26.9 x 2.6 mm" is a tube, "20 mm" a solid bar."""
    lacing: BarField
    """Diagonals, and horizontals where there are: a tube or a solid bar."""
    panel: q.PositiveLength
    """Rise of one diagonal along the spar."""
    sides: Literal[3, 4]
    """3 or 4 legs and faces."""
    bracing: Bracing = "zigzag"
    """zigzag: one diagonal a panel, in turn left and right; horizontals: the same with a horizontal at each panel point; cross: two
    crossed diagonals a panel, no horizontals."""
