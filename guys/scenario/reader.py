"""Reads a scenario file: bytes → text → tables → every fault at once, or the `Scenario`."""

from __future__ import annotations

import hashlib
import re
import tomllib
from collections.abc import Iterable, Iterator, Mapping
from contextlib import suppress
from os import PathLike, fspath
from typing import Any, TypeVar

from guys.errors import Fault, ScenarioError
from guys.scenario import (
    combinations,
    drawn,
    field,
    frame,
    held,
    hoisting,
    ice,
    layouts,
    names,
    parts,
    patches,
    place,
    plausible,
    resolve,
    rigging,
    searched,
    staged,
    weather,
)  # fmt: skip
from guys.scenario.draft import Draft, draft
from guys.scenario.keys import Finding, Key, independent, placer, written
from guys.scenario.model import Scenario, Spar
from guys.scenario.quantity import shown
from guys.site import Site

LARGEST = 5_000_000
"""Bytes a scenario file may have."""

FORMAT = 1
_Table = TypeVar("_Table")
_TOO_DEEP = "not readable as TOML: nested too deeply"
_DEEP = re.compile(r"(?:^|[\[{,])[ \t]*(?:[\w\"'-]+[ \t]*\.[ \t]*){32}", re.MULTILINE)
_PLACE = re.compile(r" \(at (?:line (\d+), column (\d+)|end of document)\)$")


def read_scenario(path: str | PathLike[str]) -> Scenario:
    """The scenario of a file.

    path : the TOML file, at most 5 MB, UTF-8

    Raises ScenarioError, which holds every fault found with its line and key.
    """
    name = fspath(path)
    try:
        with open(path, "rb") as file:
            content = file.read(LARGEST + 1)
    except (OSError, ValueError) as error:
        raise _whole(name, _cannot_open(error)) from None
    if len(content) > LARGEST:
        raise _whole(name, f"larger than {LARGEST / 1e6:g} MB; that is not a scenario")
    try:
        text = content.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = content.count(b"\n", 0, error.start) + 1
        raise _whole(name, "not UTF-8 text; save the file as UTF-8", line) from None
    return _scenario(text, content, name)


def read_scenarios(paths: Iterable[str | PathLike[str]]) -> list[Scenario]:
    """The scenarios of several files.  Raises ScenarioError with the faults of all of them."""
    found, faults = [], list[Fault]()
    for path in paths:
        try:
            found.append(read_scenario(path))
        except ScenarioError as error:
            faults += error.faults
    if faults:
        raise ScenarioError(faults)
    return found


def parse_scenario(text: str, path: str | None = None) -> Scenario:
    """The scenario of a text; `path` names it in messages.

    Raises ScenarioError, which holds every fault found with its line and key.
    """
    try:
        content = text.encode("utf-8")
    except UnicodeEncodeError:
        raise _whole(path, "not text that UTF-8 can hold") from None
    if len(content) > LARGEST:
        raise _whole(path, f"larger than {LARGEST / 1e6:g} MB; that is not a scenario")
    return _scenario(text.removeprefix("\ufeff"), content, path)


def _cannot_open(error: Exception) -> str:
    if isinstance(error, FileNotFoundError):
        return "no such file"
    if isinstance(error, IsADirectoryError):
        return "a directory; give the scenario file in it"
    return f"cannot be read: {error.strerror if isinstance(error, OSError) and error.strerror else error}"


def _whole(path: str | None, message: str, line: int | None = None, column: int | None = None) -> ScenarioError:
    return ScenarioError([Fault(path, line, column, "", message)])


def _scenario(text: str, content: bytes, path: str | None) -> Scenario:
    document = _document(text, path)
    _check_format(document, text, path)
    tables, unfit = draft(document)
    tables, site, misplaced = place.placed(tables, path)
    broken = unfit + independent(misplaced, unfit)
    findings = broken + independent(_rules(tables, site), broken)
    if findings:
        raise ScenarioError(_faults(findings, text, path))
    return _with_layouts(_resolved(tables, site, hashlib.sha256(content).hexdigest(), path).model_copy(update={"text": text}), tables)


def _with_layouts(scenario: Scenario, tables: Draft) -> Scenario:
    """The scenario with its other layouts, each with what is to be told of it."""
    foot = drawn.foot({spar.name: spar for spar in scenario.spar}, scenario.spar[0].name)
    others = [layouts.named(scenario, *each) for each in layouts.resolved(tables, scenario.site, foot)]
    scenario = scenario.model_copy(update={"layouts": tuple(_told(other) for other in others)})
    return _told(scenario)


def _told(scenario: Scenario) -> Scenario:
    notes = (*scenario.notes, *patches.notes(scenario))
    return scenario.model_copy(update={"warnings": tuple(plausible.warnings(scenario)), "notes": notes})


def _document(text: str, path: str | None) -> dict[str, Any]:
    deep = _DEEP.search(text)
    if deep is not None:
        raise _whole(path, _TOO_DEEP, text.count("\n", 0, deep.end()) + 1)
    try:
        return tomllib.loads(text)
    except RecursionError:
        raise _whole(path, _TOO_DEEP) from None
    except ValueError as error:
        place = _PLACE.search(str(error))
        line, column = (int(place[1]), int(place[2])) if place and place[1] else (text.rstrip().count("\n") + 1 if place else None, None)
        raise _whole(path, f"not readable as TOML: {_toml_reason(_PLACE.sub('', str(error)))}", line, column) from None


def _toml_reason(reason: str) -> str:
    if reason.startswith("Cannot overwrite a value"):
        return "this key is given twice"
    if reason.startswith("Cannot declare"):
        return "this table is given twice; write [[...]] with two brackets where there may be several"
    if "integer string conversion" in reason:
        return "a whole number has too many digits"
    if reason.startswith("Invalid value"):
        return "invalid value; text and quantities stand in quotes"
    return reason[:1].lower() + reason[1:]


def _check_format(document: dict[str, Any], text: str, path: str | None) -> None:
    """A newer format is refused before anything else is judged."""
    found = document.get("format", FORMAT)
    if isinstance(found, bool) or not isinstance(found, int) or found < 1:
        message = f"{shown(found)} is not a version of the format; write format = {FORMAT}"
    elif found > FORMAT:
        message = f"{shown(found)} is newer than this version reads; it reads format {FORMAT}"
    else:
        return
    raise ScenarioError(_faults([Finding(("format",), message)], text, path))


def _rules(tables: Draft, site: Site | None) -> Iterator[Finding]:
    yield from names.findings(tables)
    yield from frame.findings(tables)
    yield from rigging.findings(tables)
    yield from weather.findings(tables)
    yield from combinations.findings(tables)
    yield from held.findings(tables)
    yield from ice.findings(tables)
    yield from field.findings(tables)
    yield from patches.findings(tables)
    yield from layouts.findings(tables, site)
    yield from staged.findings(tables)
    yield from hoisting.findings(tables)
    yield from searched.findings(tables, None if site is None else site.grid)


def _faults(findings: Iterable[Finding], text: str, path: str | None) -> list[Fault]:
    place = placer(text)
    faults = [Fault(path, *place(finding.key), written(finding.key), finding.message) for finding in dict.fromkeys(findings)]
    return sorted(faults, key=lambda fault: (fault.line or 0, fault.column or 0))


def fault_at(scenario: Scenario, key: Key, message: str) -> Fault:
    """A fault found after reading, with the line of its key where the file is still what was read."""
    line, column = None, None
    if scenario.path is not None:
        with suppress(OSError, ValueError), open(scenario.path, "rb") as file:
            content = file.read(LARGEST)
            if hashlib.sha256(content).hexdigest() == scenario.sha256:
                line, column = placer(content.decode("utf-8-sig"))(key)
    return Fault(scenario.path, line, column, written(key), message)


def _present(entries: Iterable[Any]) -> list[Any]:
    """The entries, none of which is missing once a file has no faults."""
    return [entry for entry in entries if entry is not None]


def _there(table: _Table | None) -> _Table:
    """A table, which is not missing once a file has no faults."""
    assert table is not None
    return table


def _given(tables: Mapping[str, _Table | None]) -> dict[str, _Table]:
    """Tables by name, none of which is missing once a file has no faults."""
    return {name: entry for name, entry in tables.items() if entry is not None}


def _resolved(tables: Draft, site: Site | None, digest: str, path: str | None) -> Scenario:
    spars: dict[str, Spar] = {entry.name: resolve.spar(entry) for entry in _present(tables.spar)}
    foot = drawn.foot(spars, next(iter(spars)))
    anchors = tuple(resolve.anchor(entry, foot) for entry in _present(tables.anchor))
    grid = None if site is None else site.grid
    heights = [level["at"] for level in tables.document.get("guy_level", [])]
    levels = zip(_present(tables.guy_level), heights, strict=True)
    guys = [guy for index, (entry, at) in enumerate(levels) for guy in resolve.guys_of(index, entry, at)]
    wind = None if tables.wind is None else resolve.wind(tables.wind)
    cables = (*guys, *(resolve.cable(index, entry) for index, entry in enumerate(_present(tables.cable))))
    ropes = {name: resolve.rope(entry) for name, entry in tables.rope.items() if entry is not None}
    used = [*(cable.rope for cable in cables), *(tables.raising.ropes if tables.raising is not None else ())]
    setting, allowables, analysis = tables.setting, tables.allowables, tables.analysis
    assert setting is not None
    assert allowables is not None
    assert analysis is not None
    return Scenario(
        format=tables.format,
        title=tables.title,
        note=tables.note,
        site=site,
        spar=tuple(spars.values()),
        anchor=anchors,
        cable=cables,
        rope={**ropes, **resolve.stock_ropes(used, ropes)},
        material={**resolve.built_in_materials(), **{name: entry for name, entry in tables.material.items() if entry is not None}},
        part=parts.used([end for each in cables for end in each.ends], _given(tables.part)),
        holdfast={name: entry for name, entry in tables.holdfast.items() if entry is not None},
        raising=tables.raising,
        setting=setting,
        wind=wind,
        gust=_there(tables.gust),
        ice=None if tables.ice is None else ice.resolved(tables.ice),
        case=resolve.cases(tables.cases([cable.name for cable in cables]), setting),
        allowables=resolve.allowables(allowables),
        analysis=analysis,
        lost=_there(tables.lost),
        search=None if tables.search is None else searched.resolved(tables.search, [each.name for each in anchors], grid),
        ranges=_there(tables.ranges),
        limit=_there(tables.limit),
        field=_there(tables.field),
        stage=tuple(_present(tables.stage)),
        sha256=digest,
        path=path,
        notes=(*(() if wind is None else wind.notes), *combinations.notes(tables.combinations, tables.ice is not None)),
    )
