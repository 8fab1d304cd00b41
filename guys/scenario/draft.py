"""The tables of a file one by one, so that a fault in one does not hide those of the others.

Every table of the file is validated on its own.  One that fails because of optional or unknown keys is read once more without
them, which lets the rules between tables be checked in the same run; one that cannot be read at all is None.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import cache
from typing import Annotated, Any, get_args, get_origin

from pydantic import TypeAdapter, ValidationError
from pydantic_core import ErrorDetails

from guys.scenario import combinations, wording
from guys.scenario.anchor_entry import AnchorEntry, LayoutEntry
from guys.scenario.combination_entry import CombinationsEntry
from guys.scenario.document import (
    AllowablesEntry,
    CableEntry,
    CaseEntry,
    GuyLevel,
    RopeEntry,
    ScenarioFile,
)
from guys.scenario.field import FieldWork
from guys.scenario.gust import Gust
from guys.scenario.holding import Holdfast
from guys.scenario.ice import Ice
from guys.scenario.keys import Finding, Key, nearest, without
from guys.scenario.limit import Limit
from guys.scenario.lost import Lost
from guys.scenario.model import Analysis, Material, Setting, Spar
from guys.scenario.parts import Part
from guys.scenario.quantity import FROM_FILE, shown
from guys.scenario.raising import Raising
from guys.scenario.ranges import Ranges
from guys.scenario.resolve import DEFAULT_CASE
from guys.scenario.search import Search
from guys.scenario.site_table import SiteEntry
from guys.scenario.stage import Stage
from guys.scenario.wind_entry import WindEntry

FIELDS = {field.alias or name: name for name, field in ScenarioFile.model_fields.items()}
"""The field of every key at the top of a file."""


@dataclass(frozen=True)
class Draft:
    """What could be read.  `document` is the file as TOML gives it; None stands where a table could not be read."""

    document: dict[str, Any]
    format: int
    title: str
    note: str | None
    site: SiteEntry | None
    spar: tuple[Spar | None, ...]
    anchor: tuple[AnchorEntry | None, ...]
    layout: tuple[LayoutEntry | None, ...]
    guy_level: tuple[GuyLevel | None, ...]
    cable: tuple[CableEntry | None, ...]
    rope: dict[str, RopeEntry | None]
    material: dict[str, Material | None]
    part: dict[str, Part | None]
    holdfast: dict[str, Holdfast | None]
    raising: Raising | None
    setting: Setting | None
    wind: WindEntry | None
    gust: Gust | None
    ice: Ice | None
    case: tuple[CaseEntry | None, ...]
    combinations: CombinationsEntry | None
    allowables: AllowablesEntry | None
    analysis: Analysis | None
    lost: Lost | None
    search: Search | None
    ranges: Ranges | None
    limit: Limit | None
    field: FieldWork | None
    stage: tuple[Stage | None, ...]

    def spars(self) -> dict[str, tuple[int, Spar]]:
        """Readable spars by name, with their index; of two with one name the first."""
        found: dict[str, tuple[int, Spar]] = {}
        for index, spar in enumerate(self.spar):
            if spar is not None:
                found.setdefault(spar.name, (index, spar))
        return found

    def cases(self, cables: Sequence[str] = ("a cable",)) -> list[CaseEntry]:
        """Readable cases and those of combinations, or the default one where the file has none.

        The default case is without wind in a file for raising that has no wind.  `cables`: names for combinations that lose one each.
        """
        written = [case for case in self.case if case is not None] + self.combined(cables)
        if written or self.document.get("case") or "combinations" in self.document:
            return written
        still = "raise" in self.document and "wind" not in self.document
        return [CaseEntry(name=DEFAULT_CASE, wind=0.0 if still else 1.0)]

    def combined(self, cables: Sequence[str] = ("a cable",)) -> list[CaseEntry]:
        """The cases of the combinations."""
        return combinations.lines(self.combinations, "ice" in self.document, cables)


def draft(document: dict[str, Any]) -> tuple[Draft, list[Finding]]:
    """The tables of a document and what is wrong inside them."""
    findings: list[Finding] = []
    parts = {field: _field(document, key, findings) for key, field in FIELDS.items()}
    known = tuple(FIELDS)
    findings += [Finding((name,), "unknown key" + nearest(name, known)) for name in document if name not in known]
    return Draft(document=document, **parts), findings


_SHAPES = {"title": 'title = "..."', "spar": "at least one [[spar]]"}


def _field(document: dict[str, Any], name: str, findings: list[Finding]) -> Any:
    field = ScenarioFile.model_fields[FIELDS[name]]
    kind = get_origin(field.annotation)
    if name not in document:
        if field.is_required():
            findings.append(Finding((name,), f"missing; the file needs {_SHAPES[name]}"))
        return () if kind is list else field.get_default()
    value = document[name]
    if kind is list:
        return _list(value, name, findings)
    if kind is dict:
        return _named(value, name, findings)
    return _read(value, (name,), findings)


def _list(value: Any, name: str, findings: list[Finding]) -> tuple[Any, ...]:
    if not isinstance(value, list):
        findings.append(Finding((name,), f"{'one table' if isinstance(value, dict) else shown(value)} stands here; write [[{name}]]"))
        return ()
    if not value and name in _SHAPES:
        findings.append(Finding((name,), f"the list is empty; the file needs {_SHAPES[name]}"))
    return tuple(_read(entry, (name, index), findings) for index, entry in enumerate(value))


def _named(value: Any, name: str, findings: list[Finding]) -> dict[str, Any]:
    if not isinstance(value, dict):
        findings.append(Finding((name,), f"tables by name belong here; write [{name}.NAME]"))
        return {}
    return {own: _read(entry, (name, own), findings) for own, entry in value.items()}


def _read(value: Any, key: Key, findings: list[Finding]) -> Any:
    annotation, adapter = _adapter(str(key[0]))
    try:
        return adapter.validate_python(value, context=FROM_FILE)
    except ValidationError as error:
        errors = [each for each in error.errors(include_url=False) if not _echoes(each)]
    findings += [Finding(key + wording.key_of(each["loc"]), wording.message(each, annotation)) for each in errors]
    for path in _removable(errors):
        value = without(value, path)
    try:
        return adapter.validate_python(value, context=FROM_FILE)
    except ValidationError:
        return None


def _echoes(error: ErrorDetails) -> bool:
    """A list called too short only because its items are at fault, which is told already."""
    return error["type"] == "too_short" and bool(error["input"])


def _removable(errors: list[ErrorDetails]) -> Iterator[Key]:
    """The keys at fault that a table may be read without: those of tables, not items of lists, whose places must not shift."""
    for error in errors:
        key = wording.key_of(error["loc"])
        if key and isinstance(key[-1], str) and error["type"] != "missing":
            yield key


@cache
def _adapter(name: str) -> tuple[Any, TypeAdapter[Any]]:
    """The type of a top-level key, or of one of its items, and its validator."""
    found = ScenarioFile.model_fields[FIELDS[name]]
    if get_origin(found.annotation) in (list, dict):
        annotation = get_args(found.annotation)[-1]
    else:
        annotation = Annotated[found.annotation, *found.metadata] if found.metadata else found.annotation
    return annotation, TypeAdapter(annotation)
