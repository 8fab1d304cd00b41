"""Field types of the scenario models: quantities, bare numbers, names.

In a file a quantity is a string with its unit and a bare number is a fault; from Python a float is taken as SI.  Which of the two
applies is told by the validation context ``FROM_FILE``.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Annotated, Any, Final, Literal

from pydantic import (
    BeforeValidator,
    Discriminator,
    Field,
    GetCoreSchemaHandler,
    GetJsonSchemaHandler,
    StringConstraints,
    ValidationInfo,
    WithJsonSchema,
)
from pydantic.json_schema import JsonSchemaValue
from pydantic_core import CoreSchema, PydanticCustomError, core_schema

from guys import units
from guys.scenario.keys import clipped

FROM_FILE: Final = {"from_file": True}
Sign = Literal["any", "positive", "not negative"]


def fault(message: str) -> PydanticCustomError:
    """A validation error whose text is shown to the user as it stands."""
    return PydanticCustomError("guys", "{text}", {"text": message})


@dataclass(frozen=True)
class Quantity:
    """Marks a float field as a quantity of one dimension."""

    dimension: str
    sign: Sign = "any"

    def read(self, value: object, info: ValidationInfo) -> float:
        """The SI value of a string with a unit, or of a float given from Python."""
        if isinstance(value, str):
            try:
                found = units.parse(value, self.dimension)
            except units.UnitError as error:
                raise fault(str(error)) from None
            return self._signed(found, f'"{value}"')
        if isinstance(value, bool) or not isinstance(value, (int, float)):
            raise fault(f"{shown(value)} is not {units.a(self.dimension)}; write a string such as {units.example(self.dimension, '12')}")
        if (info.context or {}).get("from_file"):
            if not _finite(value):
                raise fault(f"{shown(value)} is not a finite number; write one such as {units.example(self.dimension, '12')}")
            raise fault(f"{shown(value)} has no unit; write {units.example(self.dimension, shown(value))}")
        if not _finite(value):
            raise fault(f"{shown(value)} is not a finite number")
        return self._signed(float(value), shown(value))

    def _signed(self, value: float, written: str) -> float:
        if self.dimension == "temperature" and value < 0.0:
            raise fault(f"{written} is below absolute zero")
        if self.sign == "positive" and value <= 0.0:
            raise fault(f"{written} is not more than zero")
        if self.sign == "not negative" and value < 0.0:
            raise fault(f"{written} is negative")
        return value

    def __get_pydantic_core_schema__(self, source: Any, handler: GetCoreSchemaHandler) -> CoreSchema:
        return core_schema.with_info_plain_validator_function(self.read)

    def __get_pydantic_json_schema__(self, schema: CoreSchema, handler: GetJsonSchemaHandler) -> JsonSchemaValue:
        return {
            "type": "string",
            "pattern": units.json_pattern(self.dimension),
            "examples": [f"12 {unit}" for unit in units.DIMENSIONS[self.dimension]],
        }


def _finite(value: float) -> bool:
    try:
        return math.isfinite(value)
    except OverflowError:
        return False


def shown(value: object) -> str:
    """A value of the file as a message shows it, shortened."""
    if isinstance(value, bool):
        return str(value).lower()
    if isinstance(value, str):
        return f'"{clipped(value)}"'
    if isinstance(value, int) and abs(value) >= 10**40:
        return "this number"
    if isinstance(value, dict | list):
        return "a table" if isinstance(value, dict) else "a list"
    return clipped(str(value))


def every(what: str, step: str) -> tuple[BeforeValidator, WithJsonSchema]:
    """What lets a step of an angle be written ``every 30 deg``; `what` it is a step of and an example `step`, for messages."""

    def read(value: Any) -> Any:
        head, _, given = value.strip().partition(" ") if isinstance(value, str) else ("", "", "")
        if head != "every" or not given.strip():
            raise fault(f'{shown(value)} is not {what}; write "every {step}" or a list such as ["0 deg", "45 deg"]')
        return given.strip()

    pattern = rf"^ *every +{units.json_pattern('angle')[1:]}"
    return BeforeValidator(read), WithJsonSchema({"type": "string", "pattern": pattern, "examples": [f"every {step}"]})


LIST_OR_STEP = Discriminator(lambda value: "<list>" if isinstance(value, (list, tuple)) else "<step>")
"""Tells a list of angles from a step, in a union of types tagged so."""

Length = Annotated[float, Quantity("length")]
PositiveLength = Annotated[float, Quantity("length", "positive")]
LengthFromZero = Annotated[float, Quantity("length", "not negative")]
Area = Annotated[float, Quantity("area", "not negative")]
PositiveArea = Annotated[float, Quantity("area", "positive")]
Mass = Annotated[float, Quantity("mass", "not negative")]
LinearMass = Annotated[float, Quantity("mass per length", "not negative")]
Force = Annotated[float, Quantity("force")]
PositiveForce = Annotated[float, Quantity("force", "positive")]
Spring = Annotated[float, Quantity("force per length", "positive")]
TurningSpring = Annotated[float, Quantity("moment per angle", "positive")]
PositiveMoment = Annotated[float, Quantity("moment", "positive")]
BendingStiffness = Annotated[float, Quantity("bending stiffness", "positive")]
Stress = Annotated[float, Quantity("pressure", "positive")]
Density = Annotated[float, Quantity("density", "positive")]
Speed = Annotated[float, Quantity("speed", "positive")]
Duration = Annotated[float, Quantity("time", "positive")]
Angle = Annotated[float, Quantity("angle")]
PositiveAngle = Annotated[float, Quantity("angle", "positive")]
Temperature = Annotated[float, Quantity("temperature")]
Expansion = Annotated[float, Quantity("expansion", "not negative")]
Ratio = Annotated[float, Field(strict=True, gt=0.0, allow_inf_nan=False)]
Share = Annotated[float, Field(strict=True, gt=0.0, le=1.0, allow_inf_nan=False)]
Factor = Annotated[float, Field(strict=True, ge=0.0, allow_inf_nan=False)]
Latitude = Annotated[float, Field(strict=True, ge=-90.0, le=90.0, allow_inf_nan=False)]
Longitude = Annotated[float, Field(strict=True, ge=-180.0, le=180.0, allow_inf_nan=False)]
Flag = Annotated[bool, Field(strict=True)]
_CHARACTER = r"[^\x00-\x1f\x7f]"
_INK = r"[^\s\x00-\x1f\x7f]"
Name = Annotated[str, StringConstraints(strict=True, min_length=1, max_length=80, pattern=rf"^{_INK}(?:{_CHARACTER}*{_INK})?$")]
Line = Annotated[str, StringConstraints(strict=True, min_length=1, max_length=200, pattern=rf"^{_CHARACTER}*{_INK}{_CHARACTER}*$")]
Text = Annotated[str, StringConstraints(strict=True, max_length=20_000)]
