"""`measured.json` (format guys-measured/1) and `measured.csv`: tensions as read, what to change, loads as found; SI."""

from __future__ import annotations

from typing import Any

from guys.checks.alarms import CAUTIONS
from guys.exchange.field import celsius
from guys.exchange.files import heading, json_text
from guys.exchange.result import number
from guys.exchange.tables import as_csv
from guys.studies.measured import Measured

FORMAT = "guys-measured/1"


def rows(found: Measured) -> list[dict[str, Any]]:
    """Every cable: read, found, wanted, and what to change."""
    return [
        {
            "cable": cable.name,
            "read_N": number(found.read[k]),
            "read_error_N": number(found.error[k]),
            "found_N": number(found.found[k]),
            "found_error_N": number(found.found_error[k]),
            "wanted_N": number(found.wanted[k]),
            "unstressed_length_m": float(found.length[k]),
            "let_out_m": number(found.change[k]),
            "let_out_error_m": number(found.change_error[k]),
            "turns": number(found.turns[k]),
            "off": cable.name in found.off,
        }
        for k, cable in enumerate(found.plan.scenario.cable)
    ]


def anchors(found: Measured) -> list[dict[str, Any]]:
    """The greatest pull on every anchor as planned and as found."""
    both = zip(found.plan.solution.worst_anchors, found.after.worst_anchors, strict=True)
    return [
        {"anchor": a.name, "resultant_planned_N": number(a.resultant.peak), "resultant_found_N": number(b.resultant.peak)} for a, b in both
    ]


def as_dict(found: Measured) -> dict[str, Any]:
    """The whole result as plain lists and numbers."""
    return {
        **heading(FORMAT, found.plan.scenario),
        "temperature_degC": celsius(found.temperature),
        "readings": [
            {"cable": t.reading.cable, "by": t.reading.by, "line": t.reading.line, "tension_N": t.tension, "error_N": t.error}
            for t in found.told
        ],
        "cables": rows(found),
        "anchors": anchors(found),
        "past": [{"thing": f.thing, "quantity": f.quantity, "factor": number(f.factor)} for f in found.after.past],
        "warnings": [*found.warnings, *found.after.warnings],
        "cautions": list(CAUTIONS),
    }  # fmt: skip


def as_text(found: Measured) -> str:
    """The text of `measured.json`."""
    return json_text(as_dict(found))


def as_table(found: Measured) -> str:
    """The text of `measured.csv`: one row a cable."""
    table = rows(found)
    return as_csv(list(table[0]), [list(row.values()) for row in table])
