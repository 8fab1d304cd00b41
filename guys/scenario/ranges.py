"""`[ranges]`: how far what is only roughly known may be off, for `guys matters`."""

from __future__ import annotations

from typing import Annotated, Any

from pydantic import BeforeValidator, Field, WithJsonSchema

from guys.scenario import quantity as q
from guys.scenario.table import Model


def _kelvin(value: Any) -> Any:
    if isinstance(value, str) and not value.rstrip().endswith("K"):
        raise q.fault(f'{q.shown(value)} is no difference of temperature; write it in K, such as "20 K" (1 K = 1 degC = 1.8 degF)')
    return value


Share = Annotated[float, Field(strict=True, ge=0.0, lt=1.0, allow_inf_nan=False)]
Difference = Annotated[
    float,
    q.Quantity("temperature", "not negative"),
    BeforeValidator(_kelvin),
    WithJsonSchema({"type": "string", "pattern": r"^ *(\d+(\.\d*)?|\.\d+) *K *$", "examples": ["20 K"]}),
]


class Ranges(Model):
    """For `guys matters`: each is taken off and put on; 0 leaves it as it is."""

    tension: Share = 0.1
    """Share of all initial tensions; left out: 0.1."""
    stiffness: Share = 0.1
    """Share of the stiffness of all ropes; left out: 0.1."""
    drag: Share = 0.15
    """Share of all drag coefficients; left out: 0.15."""
    level: q.LengthFromZero = 0.01
    """By which one anchor at a time sinks or heaves after the cables were set; left out: 10 mm."""
    temperature: Difference = 20.0
    """By which every case is colder or warmer; left out: 20 K."""
