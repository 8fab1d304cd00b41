"""Readings of tensions taken in the field: a CSV with one row a reading, every quantity with its own unit.

    # scenario 3fa9...                          begins of the scenario's digest, as `guys field` writes it into the form
    cable,by,reading,cycles,temperature
    low N,swing,8.42 s,20,14 degC
    low N,sight,9 1/4 in,,14 degC

`by` says how: pulse and swing are timed over `cycles`, sag and sight are lengths, gauge a force.  Rows without a reading are passed over.
"""

from __future__ import annotations

import csv
import io
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path

from guys import units
from guys.errors import Fault, ScenarioError
from guys.scenario.keys import clipped, nearest
from guys.scenario.model import AS_DRAWN, Scenario

COLUMNS = ("cable", "by", "reading", "cycles", "temperature")
DIGEST = "# scenario "
LAYOUT = "# layout "
"""Begins the line that tells which layout; without it they are of the structure as drawn."""
SHORTEST_DIGEST = 12
DIMENSIONS = {"pulse": "time", "swing": "time", "sag": "length", "sight": "length", "gauge": "force"}
"""What is read, by how it is read."""
TIMED = ("pulse", "swing")
STEADY = 5.0
"""[K] by which the temperature may change while readings are taken: they are taken to belong to one state."""
LARGEST = 1_000_000


@dataclass(frozen=True)
class Reading:
    """value : [s] of all cycles, [m] or [N];  cycles : 1 of what is not timed;  temperature [K];  line : of the file"""

    cable: str
    by: str
    value: float
    cycles: int
    temperature: float
    line: int


@dataclass(frozen=True)
class Readings:
    """of : readings in the order of the file;  signed : whether the file says which scenario it is for"""

    path: str
    of: tuple[Reading, ...]
    signed: bool

    @property
    def temperature(self) -> float:
        """[K] mean of the readings."""
        return sum(r.temperature for r in self.of) / len(self.of)

    def fault(self, message: str, reading: Reading | None = None) -> Fault:
        """A fault of the file, or of one of its readings."""
        return Fault(self.path, None if reading is None else reading.line, None, "" if reading is None else reading.cable, message)


def read_readings(path: str, scenario: Scenario) -> Readings:
    """The readings of a file; raises ScenarioError with every fault found."""
    text = _text(path)
    lines = text.splitlines()
    signed = _signed(path, lines, scenario)
    table = [(number, line) for number, line in enumerate(lines, 1) if line.strip(", \t") and not line.startswith("#")]
    try:
        rows = list(csv.reader(io.StringIO("\n".join(line for _, line in table))))
    except csv.Error as error:
        raise _whole(path, f"is not CSV: {error}") from None
    if not rows or len(rows) != len(table):
        raise _whole(path, "is empty" if not rows else "a quoted cell runs over lines; write each reading on one line")
    place = _places(path, table[0][0], rows[0])
    found, faults = [], []
    for (number, _), row in zip(table[1:], rows[1:], strict=True):
        cells = {name: row[k].strip() if k < len(row) else "" for name, k in place.items()}
        if cells["reading"]:
            reading, wrong = _reading(cells, number, scenario)
            found += [] if reading is None else [reading]
            faults += [Fault(path, number, None, name, message) for name, message in wrong]
    if not found and not faults:
        faults.append(Fault(path, None, None, "", "holds no readings"))
    faults += _unsteady(path, found)
    if faults:
        raise ScenarioError(faults)
    return Readings(path, tuple(found), signed)


def _text(path: str) -> str:
    try:
        content = Path(path).read_bytes()
    except OSError as error:
        raise _whole(path, "no such file" if isinstance(error, FileNotFoundError) else f"cannot be read: {error.strerror}") from None
    if len(content) > LARGEST:
        raise _whole(path, f"larger than {LARGEST / 1e6:g} MB; those are not readings")
    try:
        return content.decode("utf-8-sig")
    except UnicodeDecodeError:
        raise _whole(path, "not text in UTF-8") from None


def _whole(path: str, message: str, line: int | None = None) -> ScenarioError:
    return ScenarioError([Fault(path, line, None, "", message)])


def _signed(path: str, lines: Sequence[str], scenario: Scenario) -> bool:
    """Whether the file names its scenario; it must be this one."""
    for number, line in enumerate(lines, 1):
        if line.startswith(DIGEST):
            digest = line.removeprefix(DIGEST).strip(" ,;\t").lower()
            if len(digest) < SHORTEST_DIGEST or not scenario.sha256.startswith(digest):
                reason = (
                    f'"{clipped(digest)}" is the digest of another scenario, or of this one before it was changed; this one is '
                    f"{scenario.sha256}. Where the cables are the same, write that one, or leave the line out"
                )
                raise _whole(path, reason, number)
            _same_layout(path, lines, scenario)
            return True
    return False


def _same_layout(path: str, lines: Sequence[str], scenario: Scenario) -> None:
    named = {line.removeprefix(LAYOUT).strip(" ,;\t"): number for number, line in enumerate(lines, 1) if line.startswith(LAYOUT)}
    for name, number in named.items() or {AS_DRAWN: None}.items():
        if name != scenario.layout:
            raise _whole(path, f'the readings are of the layout "{clipped(name)}", not of "{clipped(scenario.layout)}"', number)


def _places(path: str, line: int, head: Sequence[str]) -> Mapping[str, int]:
    names = [cell.strip().lower() for cell in head]
    missing = [name for name in COLUMNS if name not in names]
    if missing:
        raise _whole(path, f"the header must name the columns {','.join(COLUMNS)}; missing: {', '.join(missing)}", line)
    return {name: names.index(name) for name in COLUMNS}


def _reading(cells: Mapping[str, str], line: int, scenario: Scenario) -> tuple[Reading | None, list[tuple[str, str]]]:
    """The reading of a row, or what is wrong with it: column and reason."""
    wrong: list[tuple[str, str]] = []
    names = [cable.name for cable in scenario.cable]
    if cells["cable"] not in names:
        wrong.append(("cable", f'"{clipped(cells["cable"])}" is no cable of the scenario{nearest(cells["cable"], names)}'))
    by, cycles, value = cells["by"].lower(), 1, 0.0
    if by not in DIMENSIONS:
        wrong.append(("by", f'"{clipped(cells["by"])}" is no way of reading{nearest(by, DIMENSIONS)}'))
    else:
        value = _quantity(cells["reading"], DIMENSIONS[by], "reading", wrong)
        if by in TIMED:
            cycles = _count(cells["cycles"], wrong)
    temperature = _quantity(cells["temperature"], "temperature", "temperature", wrong)
    return (None, wrong) if wrong else (Reading(cells["cable"], by, value, cycles, temperature, line), [])


def _quantity(cell: str, dimension: str, column: str, wrong: list[tuple[str, str]]) -> float:
    try:
        value = units.parse(cell, dimension)
    except units.UnitError as error:
        wrong.append((column, f"missing; write one such as {units.example(dimension, '12')}" if not cell else str(error)))
        return 0.0
    if value <= 0.0:
        wrong.append((column, f'"{clipped(cell)}" is {"below absolute zero" if dimension == "temperature" else "not more than zero"}'))
    return value


def _count(cell: str, wrong: list[tuple[str, str]]) -> int:
    if not cell.isascii() or not cell.isdigit() or not 1 <= int(cell[:5]) <= 1000:
        wrong.append(("cycles", f'"{clipped(cell)}" is no count of cycles; write a whole number from 1 to 1000'))
        return 1
    return int(cell)


def _unsteady(path: str, found: Sequence[Reading]) -> list[Fault]:
    temperatures = [reading.temperature for reading in found]
    if not found or max(temperatures) - min(temperatures) <= STEADY:
        return []
    text = f"the temperature changed by {max(temperatures) - min(temperatures):.0f} K between readings; read all within {STEADY:g} K"
    return [Fault(path, None, None, "temperature", text)]
