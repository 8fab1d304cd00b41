"""The JSON Schema of a scenario file, from the models that read it, for editors that complete and check while one types."""

from __future__ import annotations

from typing import Any

from pydantic.json_schema import GenerateJsonSchema

from guys.scenario.document import ScenarioFile
from guys.scenario.table import descriptions

DIALECT = "https://json-schema.org/draft/2020-12/schema"


class _Generator(GenerateJsonSchema):
    """Describes keys by the docstrings of the models; leaves out SI defaults of quantities, which a file writes with a unit."""

    def model_schema(self, schema: Any) -> dict[str, Any]:
        found = super().model_schema(schema)
        for key, text in descriptions(schema["cls"]).items():
            found["properties"][key]["description"] = text
        return found

    def default_schema(self, schema: Any) -> dict[str, Any]:
        found = dict(super().default_schema(schema))
        if not isinstance(found.get("default"), (bool, str)):
            found.pop("default", None)
        return found


def scenario_schema() -> dict[str, Any]:
    """The schema as a dictionary; quantities are strings whose pattern holds the units of their dimension."""
    schema = ScenarioFile.model_json_schema(by_alias=True, schema_generator=_Generator)
    return {"$schema": DIALECT, "title": "guys scenario", **_plain(schema)}


def _plain(node: Any) -> Any:
    """Without titles that only repeat the key, and without null, which TOML does not have."""
    if isinstance(node, list):
        return [_plain(item) for item in node]
    if not isinstance(node, dict):
        return node
    found = {key: _plain(value) for key, value in node.items() if not (key == "title" and isinstance(value, str))}
    choices = [choice for choice in found.get("anyOf", ()) if choice != {"type": "null"}]
    if len(choices) == 1:
        return {**choices[0], **{key: value for key, value in found.items() if key != "anyOf"}}
    return found
