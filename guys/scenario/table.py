"""What every table of the scenario file is: a frozen model; tables in modules of their own start from it, and `model` takes them in."""

from __future__ import annotations

from pydantic import BaseModel, ConfigDict


class Model(BaseModel):
    """Frozen, no unknown keys; the docstrings below each field become the descriptions of the JSON Schema."""

    model_config = ConfigDict(frozen=True, extra="forbid", populate_by_name=True, use_attribute_docstrings=True)
