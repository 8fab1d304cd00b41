"""The JSON Schema for editors: right for what the reader accepts, wrong for the commonest mistakes."""

from __future__ import annotations

import tomllib
from pathlib import Path
from typing import Any

import jsonschema
import pytest
from toml_text import BOOM, MAST, changed

from guys.scenario import schema, starters
from guys.scenario.document import ScenarioFile

REPOSITORY = Path(__file__).parent.parent


@pytest.fixture(scope="module")
def validator() -> jsonschema.Draft202012Validator:
    found = schema.scenario_schema()
    jsonschema.Draft202012Validator.check_schema(found)
    return jsonschema.Draft202012Validator(found)


FILES = [*sorted((REPOSITORY / "scenarios").glob("*.toml")), *sorted((REPOSITORY / "guys/scenario/starters").glob("*.toml"))]


@pytest.mark.parametrize("file", FILES, ids=lambda path: path.stem)
def test_shipped_files_fit(file: Path, validator: jsonschema.Draft202012Validator) -> None:
    assert not [error.message for error in validator.iter_errors(tomllib.loads(file.read_text(encoding="utf-8")))]


@pytest.mark.parametrize("document", [MAST, BOOM])
def test_good_documents_fit(document: dict[str, Any], validator: jsonschema.Draft202012Validator) -> None:
    validator.validate(document)


@pytest.mark.parametrize(
    "change",
    [
        (("guy_level", 0, "at"), 17),
        (("guy_level", 0, "at"), "17"),
        (("guy_level", 0, "at"), "9,5 m"),
        (("guy_level", 0, "at"), "9 kg"),
        (("guy_level", 0, "tenson"), "1 kN"),
        (("wind", "directions"), "30 deg"),
        (("wind", "speed"), ...),
        (("spar", 0, "base"), "hinge"),
        (("title",), ...),
        (("format",), 2),
    ],
)
def test_common_mistakes_do_not(change: tuple[Any, Any], validator: jsonschema.Draft202012Validator) -> None:
    assert not validator.is_valid(changed(MAST, change))


def test_every_key_is_described() -> None:
    found = schema.scenario_schema()
    tables = [found, *found["$defs"].values()]
    described = {f"#/$defs/{name}" for name, table in found["$defs"].items() if "description" in table}
    keys = [(key, each) for table in tables for key, each in table["properties"].items()]
    assert not [key for key, each in keys if "description" not in each and each.get("$ref") not in described]
    assert set(found["properties"]) == {field.alias or name for name, field in ScenarioFile.model_fields.items()}


def test_nothing_says_null() -> None:
    assert "null" not in str(schema.scenario_schema())


def test_starters_are_the_files_shipped() -> None:
    assert {path.stem for path in (REPOSITORY / "guys/scenario/starters").glob("*.toml")} == set(starters.KINDS)
