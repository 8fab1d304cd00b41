"""`compare.json` (format guys-compare/1) and `compare.csv`: ranked, every measure and what decides it; SI, bearings in degrees."""

from __future__ import annotations

import math
from typing import Any

from guys.checks.alarms import CAUTIONS
from guys.exchange.files import json_text
from guys.exchange.result import bearing, number
from guys.exchange.sizing import anchor_needs
from guys.exchange.tables import Cell, as_csv
from guys.results import AnchorWorst, Finding
from guys.studies.compare import Compared, Comparison
from guys.studies.measures import MEASURES, Measure, Value

FORMAT = "guys-compare/1"
HEAD = ("rank", "layout", "file", "verdict", "past", "not_judged", "decides", "factor", "factor_required", "case", "wind_from_deg")


def as_dict(found: Comparison) -> dict[str, Any]:
    """The whole result as plain lists and numbers."""
    return {
        "format": FORMAT,
        "guys_version": found.version,
        "by": found.by,
        "layouts": [layout_entry(each) for each in found.layouts],
        "cautions": list(CAUTIONS),
    }


def as_text(found: Comparison) -> str:
    """The text of `compare.json`."""
    return json_text(as_dict(found))


def layout_entry(each: Compared) -> dict[str, Any]:
    """One layout with all its measures."""
    solution, first = each.solution, each.decides
    return {
        "rank": each.rank,
        "layout": each.name,
        "title": solution.scenario.title,
        "scenario_sha256": solution.scenario.sha256,
        "verdict": each.verdict,
        "past": len(solution.past),
        "not_judged": each.not_judged,
        "loads_are": solution.loads_are or "service",
        "decides": None if first is None else _finding(first),
        "measures": {measure.column: _value(measure, each.values[key]) for key, measure in MEASURES.items()},
        "anchors": [_anchor(each, k, worst) for k, worst in enumerate(solution.for_crew().worst_anchors)],
        "sizes": [anchor_needs(anchor) for anchor in each.needs],
        "warnings": list(solution.warnings),
    }


def _finding(f: Finding) -> dict[str, Any]:
    return {
        "thing": f.thing,
        "quantity": f.quantity,
        "factor": number(f.factor),
        "factor_required": f.required,
        "margin_m": number(f.margin),
        "case": f.case,
        "wind_from_deg": bearing(f.wind_from),
    }


def in_file(measure: Measure, value: float) -> float | None:
    """A measure in the unit its column names."""
    return number(math.degrees(value) if measure.dimension == "angle" else value)


def _value(measure: Measure, value: Value) -> dict[str, Any]:
    return {
        "value": in_file(measure, value.value),
        "of": value.of,
        "case": value.case,
        "wind_from_deg": bearing(value.wind_from),
    }


def _anchor(each: Compared, k: int, worst: AnchorWorst) -> dict[str, Any]:
    east, north, level = (float(x) for x in each.solution.anchors.position[k])
    return {
        "name": worst.name,
        "east_m": east,
        "north_m": north,
        "level_m": level,
        "resultant_N": number(worst.resultant.peak),
        "horizontal_N": number(worst.horizontal.peak),
        "uplift_N": number(worst.uplift.peak),
    }


def as_table(found: Comparison) -> str:
    """The text of `compare.csv`: one row a layout; every measure with what it is of and where."""
    ends = ("", "_of", "_case", "_wind_from_deg")
    head = (*HEAD, *(f"{measure.column}{end}" for measure in MEASURES.values() for end in ends))
    return as_csv(head, [_row(each) for each in found.layouts])


def _row(each: Compared) -> list[Cell]:
    f = each.decides
    cells: list[Cell] = [each.rank, each.name, each.solution.scenario.path, each.verdict, len(each.solution.past), each.not_judged]
    cells += [None] * 5 if f is None else [f"{f.thing}, {f.quantity}", number(f.factor), f.required, f.case, bearing(f.wind_from)]
    for key, measure in MEASURES.items():
        value = each.values[key]
        cells += [in_file(measure, value.value), value.of, value.case, bearing(value.wind_from)]
    return cells
