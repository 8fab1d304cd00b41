"""`stages.json` (format guys-stages/1) and `stages.csv`: what every stage does, and the wind it may see; SI, bearings in degrees."""

from __future__ import annotations

from typing import Any

from guys.exchange.files import heading, json_text
from guys.exchange.result import bearing, number
from guys.exchange.tables import Cell, as_csv
from guys.studies.cells import WORDS
from guys.studies.stages import Built, Stages

FORMAT = "guys-stages/1"


def as_dict(found: Stages) -> dict[str, Any]:
    """The whole result as plain lists and numbers."""
    return {
        **heading(FORMAT, found.scenario),
        "stages": [_stage(built) for built in found.built],
        "judged_by": list(found.how),
        "cautions": list(found.cautions),
    }


def as_text(found: Stages) -> str:
    """The text of `stages.json`."""
    return json_text(as_dict(found))


def _stage(built: Built) -> dict[str, Any]:
    there, solution = built.scenario, built.solution
    return {
        "name": built.stage.name,
        "spars": [{"name": spar.name, "stands_m": spar.length} for spar in there.spar],
        "fittings": [fitting.name for spar in there.spar for fitting in spar.fitting],
        "cables": [cable.name for cable in there.cable],
        "wind_m_s": built.wind,
        "temperature_K": there.case[0].temperature,
        "verdict": WORDS[built.verdict],
        "falls_in_still_air": built.still,
        "reason": built.reason or None,
        "least_factor": _least(built),
        "greatest_tension": _tension(built),
        "greatest_pull": _pull(built),
        "may_see": _may_see(built),
        "warnings": list(solution.warnings if solution is not None else there.warnings),
    }


def _least(built: Built) -> dict[str, Any] | None:
    found = built.least
    if found is None:
        return None
    return {
        "governs": found.thing,
        "quantity": found.quantity,
        "factor": number(found.factor),
        "factor_required": found.required,
        "wind_from_deg": bearing(found.wind_from),
    }


def _tension(built: Built) -> dict[str, Any] | None:
    worst = built.tension
    if worst is None:
        return None
    return {"cable": worst.name, "tension_N": worst.tension.peak, "wind_from_deg": bearing(worst.tension.peak_wind_from)}


def _pull(built: Built) -> dict[str, Any] | None:
    worst = built.pull
    if worst is None:
        return None
    return {"anchor": worst.name, "resultant_N": worst.resultant.peak, "wind_from_deg": bearing(worst.resultant.peak_wind_from)}


def _may_see(built: Built) -> dict[str, Any] | None:
    limit = built.may_see
    if limit is None:
        return None
    return {
        "speed_m_s": number(limit.speed),
        "wind_from_deg": bearing(limit.wind_from),
        "governs": limit.governs,
        "why": limit.why,
        "equilibrium_lost_m_s": number(limit.lost),
    }


def as_table(found: Stages) -> str:
    """The text of `stages.csv`: a row a stage."""
    head = [
        "stage", "cables", "wind_m_s", "verdict", "governs", "factor", "factor_required", "wind_from_deg", "greatest_tension_N", "cable",
        "greatest_pull_N", "anchor", "may_see_m_s", "may_see_from_deg", "may_see_governs", "equilibrium_lost_m_s", "reason",
    ]  # fmt: skip
    return as_csv(head, [_row(_stage(built)) for built in found.built])


def _row(stage: dict[str, Any]) -> list[Cell]:
    least, tension, pull, may_see = (stage[key] or {} for key in ("least_factor", "greatest_tension", "greatest_pull", "may_see"))
    return [
        stage["name"], len(stage["cables"]), stage["wind_m_s"], stage["verdict"], least.get("governs"), least.get("factor"),
        least.get("factor_required"), least.get("wind_from_deg"), tension.get("tension_N"), tension.get("cable"), pull.get("resultant_N"),
        pull.get("anchor"), may_see.get("speed_m_s"), may_see.get("wind_from_deg"), may_see.get("governs"),
        may_see.get("equilibrium_lost_m_s"), stage["reason"],
    ]  # fmt: skip
