"""Reads a scenario file: text → tables → faults, or the `Scenario`."""

from __future__ import annotations

import hashlib
import tomllib
from os import PathLike, fspath
from typing import Any

from pydantic import ValidationError

from guys.errors import Fault, ScenarioError
from guys.scenario import drawn, quantity, resolve
from guys.scenario.document import ScenarioFile
from guys.scenario.model import Scenario


def read_scenario(path: str | PathLike[str]) -> Scenario:
    """The scenario of a file.  Raises ScenarioError with every fault found."""
    with open(path, "rb") as file:
        content = file.read()
    return _scenario(content.decode("utf-8"), content, fspath(path))


def parse_scenario(text: str, path: str | None = None) -> Scenario:
    """The scenario of a text; `path` names it in messages.  Raises ScenarioError with every fault found."""
    return _scenario(text, text.encode("utf-8"), path)


def _scenario(text: str, content: bytes, path: str | None) -> Scenario:
    document = tomllib.loads(text)
    try:
        tables = ScenarioFile.model_validate(document, context=quantity.FROM_FILE)
    except ValidationError as error:
        raise ScenarioError(
            Fault(path, None, None, ".".join(str(part) for part in item["loc"]), item["msg"]) for item in error.errors()
        ) from None
    return _resolved(tables, document, hashlib.sha256(content).hexdigest(), path)


def _resolved(tables: ScenarioFile, document: dict[str, Any], digest: str, path: str | None) -> Scenario:
    spars = {entry.name: entry for entry in map(resolve.spar, tables.spar)}
    foot = drawn.foot(spars, tables.spar[0].name)
    levels = zip(tables.guy_level, document.get("guy_level", []), strict=True)
    guys = [guy for entry, raw in levels for guy in resolve.guys_of(entry, raw["at"])]
    return Scenario(
        format=tables.format,
        title=tables.title,
        note=tables.note,
        spar=tuple(spars.values()),
        anchor=tuple(resolve.anchor(entry, foot) for entry in tables.anchor),
        cable=(*guys, *map(resolve.cable, tables.cable)),
        rope={name: resolve.rope(entry) for name, entry in tables.rope.items()},
        material={**resolve.built_in_materials(), **tables.material},
        setting=tables.setting,
        wind=None if tables.wind is None else resolve.wind(tables.wind),
        ice=tables.ice,
        case=resolve.cases(tables.case, tables.setting),
        allowables=resolve.allowables(tables.allowables),
        analysis=tables.analysis,
        sha256=digest,
        path=path,
    )
