"""Named sets of load cases: the lines of `guys/data/combinations.csv`, written out for a scenario.

A line multiplies dead load, wind pressure and weight of ice, never the initial tension.  Its kind says what it is for:

    service     loads once: what a crew installs, and the wind at which it lowers
    allowable   loads of a design by allowable stress: judged against the allowables like service cases
    factored    loads of a design by strength, or of an accident: judged against `allowables.factored`

Iced lines come where the scenario has ice; a set of lost cables has a line for each cable.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from typing import TYPE_CHECKING, Any

from guys import tables
from guys.scenario.combination_entry import CombinationsEntry
from guys.scenario.document import CaseEntry
from guys.scenario.keys import Finding

if TYPE_CHECKING:
    from guys.scenario.draft import Draft


def rows(name: str, iced: bool) -> list[dict[str, str]]:
    """The lines of a set as the table has them."""
    return [row for row in tables.rows("combinations") if row["set"] == name and (iced or row["iced"] == "0")]


def lines(entry: CombinationsEntry | None, iced: bool, cables: Sequence[str]) -> list[CaseEntry]:
    """The cases of all sets, in the order asked for."""
    if entry is None:
        return []
    return [case for name in dict.fromkeys(entry.sets) for row in rows(name, iced) for case in _cases(entry, row, cables)]


def _cases(entry: CombinationsEntry, row: dict[str, str], cables: Iterable[str]) -> Iterator[CaseEntry]:
    iced = row["iced"] == "1"
    given: dict[str, Any] = {
        "dead": float(row["dead"]),
        "wind": float(row["wind"]) * (entry.iced_wind if iced else 1.0),
        "ice": float(row["ice"]),
        "temperature": entry.iced_temperature if iced else entry.temperature,
        "kind": row["kind"],
    }
    if row["each_cable_lost"] == "0":
        yield CaseEntry.model_construct(name=row["line"], without=[], **given)
        return
    for cable in cables:
        yield CaseEntry.model_construct(name=f"{row['line']} without {cable}", without=[cable], **given)


def findings(draft: Draft) -> Iterator[Finding]:
    """A wind with ice reduced twice."""
    entry, ice = draft.combinations, draft.ice
    if entry is not None and entry.iced_wind < 1.0 and ice is not None and ice.reduce_wind:
        yield Finding(("combinations", "iced_wind"), "ice.reduce_wind reduces the wind of cases with ice already; leave one of the two out")


def notes(entry: CombinationsEntry | None, iced: bool) -> Iterator[str]:
    """Each set with its lines, and where they come from."""
    for name in dict.fromkeys(entry.sets if entry else ()):
        by_source: dict[str, list[str]] = {}
        for row in rows(name, iced):
            by_source.setdefault(row["source"], []).append(row["line"])
        for source, named in by_source.items():
            yield f"combinations: {name}: {', '.join(named)} ({source})"
    if entry is not None:
        if iced and entry.iced_wind != 1.0:
            yield f"combinations: {entry.iced_wind:g} of the wind pressure in their iced lines, chosen"
        yield "combinations: initial tension is in every line and never factored"
