"""`limit.json` and `limit.csv`: the limiting winds; SI, bearings in degrees, a unit in every key and column head."""

from __future__ import annotations

import math
from typing import Any

from guys.exchange.files import heading, json_text
from guys.exchange.result import bearing, number
from guys.exchange.tables import Cell, as_csv
from guys.limits import Limit, Limits

FORMAT = "guys-limit/1"


def as_dict(limits: Limits) -> dict[str, Any]:
    """The whole study as plain lists and numbers."""
    scenario = limits.scenario
    wind = scenario.wind
    assert wind is not None
    cables = [cable.name for cable in scenario.cable]
    return {
        **heading(FORMAT, scenario),
        "wind": {"speed_m_s": wind.speed, "averaging_s": wind.averaging, "height_m": wind.height},
        "looked_up_to_m_s": limits.most,
        "limits": [limit_as_dict(limits.circle[k], cables) for k in limits.listed],
        "worst": [limit_as_dict(limit, cables) for limit in limits.worst],
        "actions": [{"share": share, "speed_m_s": speed} for share, speed in limits.actions],
        "lower_in_s": scenario.limit.lower_in,
        "first_drops": [
            {"case": case, "cable": cable, "drops_m_s": number(speed), "wind_from_deg": bearing(toward)}
            for case, cable, speed, toward in limits.first_drops
        ],
        "circle": [limit_as_dict(limit, cables) for limit in limits.circle],
        "not_judged": list(limits.not_judged),
        "notes": list(limits.notes),
        "cautions": list(limits.cautions),
    }


def as_text(limits: Limits) -> str:
    """The file's text."""
    return json_text(as_dict(limits))


def limit_as_dict(limit: Limit, cables: list[str]) -> dict[str, Any]:
    """One limit as plain numbers."""
    return {
        "case": limit.case,
        "wind_factor": limit.wind_factor,
        "wind_from_deg": bearing(limit.wind_from),
        "speed_m_s": number(limit.speed),
        "governs": limit.governs,
        "why": limit.why,
        "use": number(limit.use),
        "equilibrium_lost_m_s": number(limit.lost),
        "falls": limit.falls or None,
        "branches_at_m_s": number(limit.branches_at),
        "drops": [{"cable": name, "drops_m_s": number(speed)} for name, speed in zip(cables, limit.drops, strict=True)],
    }


def as_table(limits: Limits) -> str:
    """One row a case and bearing of the whole circle; the lowest limit of every case first."""
    head = [
        "case", "wind_factor", "wind_from_deg", "listed", "speed_m_s", "governs", "why", "use", "equilibrium_lost_m_s", "branches_at_m_s",
        "first_cable_to_drop", "drops_m_s",
    ]  # fmt: skip
    listed = set(limits.listed)
    rows = [_row(limit, "lowest", limits) for limit in limits.worst]
    rows += [_row(limit, "yes" if k in listed else "no", limits) for k, limit in enumerate(limits.circle)]
    return as_csv(head, rows)


def _row(limit: Limit, listed: str, limits: Limits) -> list[Cell]:
    first = min(range(len(limit.drops)), key=lambda k: math.inf if math.isnan(limit.drops[k]) else limit.drops[k], default=None)
    drops = first is not None and not math.isnan(limit.drops[first])
    return [
        limit.case, limit.wind_factor, bearing(limit.wind_from), listed, limit.speed, limit.governs, limit.why, limit.use, limit.lost,
        limit.branches_at, limits.scenario.cable[first].name if first is not None and drops else None,
        limit.drops[first] if first is not None and drops else None,
    ]  # fmt: skip
