"""`size.json` (format guys-size/1) and `size.csv`: what every holdfast must be at every anchor; SI, bearings in degrees."""

from __future__ import annotations

import math
from typing import Any

from guys.checks.alarms import CAUTIONS
from guys.exchange.files import heading, json_text
from guys.exchange.result import bearing, number
from guys.exchange.tables import Cell, as_csv
from guys.studies.sizing import AnchorNeeds, Need, Sizing

FORMAT = "guys-size/1"
UNITS = {"mass": "kg", "length": "m", "moment": "N m", "force": "N", "": "pickets"}
"""Unit of what is sized, by its dimension."""
HEAD = (
    *("anchor", "holdfast", "kind", "size", "unit", "needed", "given", "pattern", "low_N", "best_N", "high_N", "pull_N", "angle_deg"),
    *("factor", "factor_required", "case", "wind_from_deg", "governs", "reason", "cables"),
)


def as_dict(found: Sizing) -> dict[str, Any]:
    """The whole result as plain lists and numbers."""
    return {
        **heading(FORMAT, found.scenario),
        "factor_required": found.scenario.allowables.anchor,
        "allowable_is_default": "anchor" in found.scenario.allowables.defaulted,
        "anchors": [anchor_needs(anchor) for anchor in found.anchors],
        "warnings": list(found.warnings),
        "notes": list(found.notes),
        "not_checked": list(found.not_checked),
        "cautions": list(CAUTIONS),
    }


def as_text(found: Sizing) -> str:
    """The text of `size.json`."""
    return json_text(as_dict(found))


def anchor_needs(anchor: AnchorNeeds) -> dict[str, Any]:
    """What the holdfasts must be at one anchor."""
    return {
        "name": anchor.name,
        "holdfast": anchor.held_by,
        "cables": list(anchor.cables),
        "resultant_N": number(anchor.pull),
        "angle_deg": degrees(anchor.angle),
        "proof_load_N": number(anchor.proof),
        "case": anchor.case,
        "wind_from_deg": bearing(anchor.wind_from),
        "needs": [_need(anchor, need) for need in anchor.needs],
    }


def _need(anchor: AnchorNeeds, need: Need) -> dict[str, Any]:
    out: dict[str, Any] = {
        "holdfast": need.holdfast,
        "kind": need.kind,
        "size": need.size,
        "unit": UNITS[need.dimension],
        "needed": number(need.needed),
        "given": number(need.given),
    }
    if need.pattern:
        out["pattern"] = need.pattern
    if need.holds is None:
        return {**out, "reason": need.reason}
    if lies := anchor.trench(need):
        out["behind_anchor_m"], out["trench_m"] = lies
    return out | {
        "low_N": number(need.low),
        "best_N": number(need.best),
        "high_N": number(need.high),
        "pull_N": number(need.pull),
        "angle_deg": degrees(need.angle),
        "factor": number(need.factor),
        "factor_required": number(need.required),
        "case": need.case,
        "wind_from_deg": bearing(need.wind_from),
        "governs": need.governs,
    }


def degrees(radians: float) -> float | None:
    """An angle in degrees, None where there is none."""
    return None if math.isnan(radians) else math.degrees(radians)


def as_table(found: Sizing) -> str:
    """The text of `size.csv`."""
    every = [(anchor, need) for anchor in found.anchors for need in anchor.needs]
    return as_csv(HEAD, [_row(anchor, need) for anchor, need in every])


def _row(anchor: AnchorNeeds, need: Need) -> list[Cell]:
    what: list[Cell] = [anchor.name, need.holdfast, need.kind, need.size, UNITS[need.dimension], need.needed, need.given, need.pattern]
    holds: list[Cell] = [need.low, need.best, need.high, need.pull, degrees(need.angle), need.factor, need.required]
    return [*what, *holds, need.case, bearing(need.wind_from), need.governs, need.reason, "; ".join(anchor.cables)]
