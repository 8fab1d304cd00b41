"""What every table of the scenario file is: a frozen model; tables in modules of their own start from it, and `model` takes them in;
and what several of them hold."""

from __future__ import annotations

from pydantic import BaseModel, ConfigDict

from guys.scenario import quantity as q


class Model(BaseModel):
    """Frozen, no unknown keys; the docstrings below each field become the descriptions of the JSON Schema."""

    model_config = ConfigDict(frozen=True, extra="forbid", populate_by_name=True, use_attribute_docstrings=True)


class GroundFoot(Model):
    """A foot on the ground."""

    east: q.Length
    """Distance east of the origin."""
    north: q.Length
    """Distance north of the origin."""
    level: q.Length = 0.0
    """Height above the origin's level."""
