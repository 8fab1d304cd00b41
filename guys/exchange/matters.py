"""`matters.json` (format guys-matters/1) and `matters.csv`: what each range does to the worst pull and the reserve; SI."""

from __future__ import annotations

from typing import Any

from guys.checks.alarms import CAUTIONS
from guys.exchange.files import heading, json_text
from guys.exchange.result import bearing, number
from guys.exchange.tables import Cell, as_csv
from guys.loads import CaseLine
from guys.studies.margin import Margin
from guys.studies.matters import Matters, Reading, Span, told

FORMAT = "guys-matters/1"
STABILITY = ("lost_at_factor", "stands_to", "lost")
"""Columns of the stability reserve."""


def as_dict(found: Matters) -> dict[str, Any]:
    """The whole result as plain lists and numbers."""
    return {
        **heading(FORMAT, found.scenario),
        "point": _reading(found.point),
        "ranges": [_span(s) for s in found.spans],
        "judged_by": list(told(found)),
        "cautions": list(CAUTIONS),
    }


def as_text(found: Matters) -> str:
    """The text of `matters.json`."""
    return json_text(as_dict(found))


def _place(line: CaseLine | None) -> dict[str, Any]:
    return {} if line is None else {"case": line.name, "wind_from_deg": bearing(line.wind_from)}


def _reading(r: Reading) -> dict[str, Any]:
    return {
        "greatest_pull": {"anchor": r.anchor, "resultant_N": number(r.pull), **_place(r.pull_line)},
        "reserve": {"governs": r.thing, "factor_over_required": number(r.reserve), **_place(r.reserve_line)},
        "stability": _stability(r.margin),
        "falls": r.falls,
        **({"reason": r.reason} if r.reason else {}),
    }


def _stability(m: Margin | None) -> dict[str, Any] | None:
    """The stability reserve; no factor where equilibrium is not lost up to `stands_to`, or the solver failed."""
    if m is None:
        return None
    lost = None if m.failed else m.lost
    return {"loads": m.loads, "factor": m.stands_to if lost else None, "stands_to": m.stands_to, "lost": lost, **_place(m.line)}


def _span(s: Span) -> dict[str, Any]:
    out = {"of": s.what, "from": s.ends[0], "to": s.ends[1], "default": not s.given}
    return {**out, "not_solved": s.lacking} if s.lacking else {**out, "less": _reading(s.less), "more": _reading(s.more)}


def as_table(found: Matters) -> str:
    """The text of `matters.csv`: the point, then both ends of every range."""
    head = ["of", "end", "default", "greatest_pull_N", "anchor", "factor_over_required", "governs", *STABILITY, "falls", "not_solved"]

    def lost_at(r: Reading) -> list[Cell]:
        told = _stability(r.margin) or {}
        lost = told.get("lost")
        return [told.get("factor"), told.get("stands_to"), None if lost is None else "yes" if lost else "no"]

    def row(of: str, end: str, default: str, r: Reading) -> list[Cell]:
        return [of, end, default, r.pull, r.anchor, number(r.reserve), r.thing, *lost_at(r), r.falls, None]

    rows = [row("as drawn", "", "", found.point)]
    for s in found.spans:
        default = "no" if s.given else "yes"
        if s.lacking:
            rows.append([s.what, "", default, *[None] * (len(head) - 4), s.lacking])
        else:
            rows += [row(s.what, end, default, r) for end, r in zip(s.ends, (s.less, s.more), strict=True)]
    return as_csv(head, rows)
