"""The result file `result.json`, format guys-result/1: SI throughout, bearings in degrees.

Key names carry the unit.  A base's or heel's force is that of the structure on the ground, or on the spar that carries it.  A case
without an equilibrium has empty lists and a `reason`.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Any

import numpy as np

from guys.checks.spars import section_thing
from guys.exchange.files import json_text
from guys.results import CableWorst, Extreme, Finding, FootForces, FootWorst, Solution, SparLine, Sweep
from guys.rotation import Array
from guys.scenario import Scenario, patches

FORMAT = "guys-result/1"


def as_dict(solution: Solution) -> dict[str, Any]:
    """The whole result as plain lists and numbers."""
    return {
        "format": FORMAT,
        "title": solution.scenario.title,
        "guys_version": solution.version,
        "scenario_sha256": solution.scenario.sha256,
        "cases": [_case(solution, k) for k in range(len(solution.case))],
        "gust": _gust(solution.scenario),
        "worst": {
            "cables": [_worst_cable(c) for c in solution.worst_cables],
            "anchors": [_worst_anchor(a) for a in solution.worst_anchors],
            "bases": [_worst_base(solution, f) for f in solution.worst_feet if f.carried_by is None],
            "heels": [_worst_foot(f) for f in solution.worst_feet if f.carried_by is not None],
            "spars": [_worst_spar(solution, k) for k in range(len(solution.spars))],
        },
        "service_worst": _service_worst(solution),
        "findings": [finding(f) for f in solution.findings],
        "sweep": None if solution.sweep is None else _sweep(solution, solution.sweep),
        "self_check": {
            "balance": number(solution.check.balance),
            "resolve": solution.check.resolve,
            "resolve_difference": number(solution.check.difference),
            "resolved_case": solution.check.resolved_case,
            "resolved_wind_from_deg": bearing(solution.check.resolved_wind_from),
        },
        "warnings": list(solution.warnings),
        "notes": list(solution.notes),
        "not_checked": list(solution.not_checked),
        "cautions": list(solution.cautions),
    }


def as_text(solution: Solution) -> str:
    """The result file's text."""
    return json_text(as_dict(solution))


def number(value: float) -> float | None:
    """A number JSON can hold; None for what is not there or has no bound."""
    return float(value) if math.isfinite(value) else None


def bearing(radians: float) -> float | None:
    """Degrees in [0, 360), free of the noise of radians; None without wind."""
    return None if math.isnan(radians) else round(math.degrees(radians), 9) % 360.0


def _rows(array: Array) -> Any:
    return np.where(np.abs(array) < 1e-300, 0.0, array).tolist()


def _case(solution: Solution, k: int) -> dict[str, Any]:
    gone = solution.state[k] == "none"
    out: dict[str, Any] = {
        "layout": solution.scenario.layout,
        "case": solution.case[k],
        "wind_from_deg": bearing(float(solution.wind_from[k])),
        "kind": solution.scenario.kind_of(solution.case[k]),
        "state": solution.state[k],
        "out_of_balance": None if gone else number(float(solution.out_of_balance[k])),
        "reference_force_N": number(float(solution.reference_force[k])),
        "iterations": int(solution.iterations[k]),
        "cables": [] if gone else [_cable(solution, k, c) for c in range(len(solution.cables.name)) if solution.cables.present[k, c]],
        "anchors": [] if gone else [_anchor(solution, k, a) for a in range(len(solution.anchors.name))],
        "bases": [] if gone else _feet(solution.bases, k),
        "heels": [] if gone else _feet(solution.heels, k),
        "spars": [] if gone else [_spar(solution, k, n, s) for n, s in enumerate(solution.spars)],
    }
    if solution.reason[k] is not None:
        out["reason"] = solution.reason[k]
    if solution.note[k] is not None:
        out["note"] = solution.note[k]
    without = [name for c, name in enumerate(solution.cables.name) if not solution.cables.present[k, c]]
    if without and not gone:
        out["without"] = without
    return out


def _gust(scenario: Scenario) -> dict[str, Any] | None:
    """The patches of gust of every case with wind, None where gusts are plain."""
    bands = patches.of(scenario)
    if not bands:
        return None
    return {
        "method": scenario.gust.method,
        "k_s": scenario.gust.k_s,
        "turbulence": scenario.gust.turbulence,
        "patches": [{"from_m": number(patch.low), "to_m": number(patch.high)} for patch in bands],
        "note": patches.PEAKS,
    }


def _service_worst(solution: Solution) -> dict[str, Any] | None:
    """Greatest loads of service cases, where others are listed beside them."""
    crew = solution.crew
    if crew is None:
        return None
    return {
        "cables": [_worst_cable(c) for c in crew.cables],
        "anchors": [_worst_anchor(a) for a in crew.anchors],
        "bases": [_worst_foot(f) for f in crew.feet if f.carried_by is None],
        "heels": [_worst_foot(f) for f in crew.feet if f.carried_by is not None],
    }


def _cable(solution: Solution, k: int, c: int) -> dict[str, Any]:
    f = solution.cables
    return {
        "name": f.name[c],
        "tension_anchor_N": float(f.tension_anchor[k, c]),
        "tension_top_N": float(f.tension_top[k, c]),
        "slack": bool(f.slack[k, c]),
        "force_on_anchor_N": _rows(f.force_on_anchor[k, c]),
        "force_on_spar_N": _rows(f.force_on_spar[k, c]),
        "unstressed_length_m": float(f.unstressed_length[k, c]),
    }


def _anchor(solution: Solution, k: int, a: int) -> dict[str, Any]:
    anchors = solution.anchors
    return {
        "name": anchors.name[a],
        "pull_N": _rows(anchors.pull[k, a]),
        "uplift_N": float(anchors.uplift[k, a]),
        "horizontal_N": float(anchors.horizontal[k, a]),
        "resultant_N": float(anchors.resultant[k, a]),
    }


def _feet(feet: FootForces, k: int) -> list[dict[str, Any]]:
    out = []
    for n, spar in enumerate(feet.spar):
        entry: dict[str, Any] = {"spar": spar}
        if feet.carried_by[n] is not None:
            entry["carried_by"] = feet.carried_by[n]
        entry["force_on_ground_N"] = _rows(feet.force[k, n])
        entry["moment_on_ground_Nm"] = _rows(feet.moment[k, n])
        out.append(entry)
    return out


def _spar(solution: Solution, k: int, n: int, spar: SparLine) -> dict[str, Any]:
    return {
        "name": spar.name,
        "station_m": _rows(spar.station),
        "displacement_m": _rows(spar.displacement[k]),
        "axial_N": _rows(spar.axial[k]),
        "bending_Nm": _rows(spar.bending[k]),
        "torsion_Nm": _rows(spar.torsion[k]),
        "shear_N": _rows(spar.shear[k]),
        "local_axes": _rows(spar.axes),
        "head_lean_deg": math.degrees(float(solution.head_lean[k, n])),
    }


def _extreme(key: str, extreme: Extreme) -> dict[str, Any]:
    """The listed value under `key`, with its case, and the refined peak."""
    return {
        key: number(extreme.value),
        "case": extreme.case,
        "wind_from_deg": bearing(extreme.wind_from),
        "peak_N": number(extreme.peak),
        "peak_case": extreme.peak_case,
        "peak_wind_from_deg": bearing(extreme.peak_wind_from),
    }


def _worst_cable(c: CableWorst) -> dict[str, Any]:
    """`factor` belongs to the listed tension; `peak_factor`, which is checked, to the refined one."""
    out = {"name": c.name, **_extreme("tension_N", c.tension), "strength_N": number(c.strength), "weakest": c.weakest}
    out["initial_over_rope_strength"] = number(c.initial)
    listed = c.strength / c.tension.value if c.tension.value > 0 else math.nan
    return {**out, "factor": number(listed), "peak_factor": number(c.factor)}


def _worst_anchor(a: Any) -> dict[str, Any]:
    return {
        "name": a.name,
        **_extreme("resultant_N", a.resultant),
        "uplift_N": number(a.uplift.value),
        "horizontal_N": number(a.horizontal.value),
        "uplift": _extreme("uplift_N", a.uplift),
        "horizontal": _extreme("horizontal_N", a.horizontal),
    }


def _worst_foot(f: FootWorst) -> dict[str, Any]:
    out: dict[str, Any] = {"spar": f.spar}
    if f.carried_by is not None:
        out["carried_by"] = f.carried_by
    out |= {"down": _extreme("down_N", f.down), "lift": _extreme("lift_N", f.lift), "sideways": _extreme("sideways_N", f.sideways)}
    out["resultant"] = _extreme("resultant_N", f.whole)
    turning = _extreme("turning_Nm", f.turning)
    turning["peak_Nm"] = turning.pop("peak_N")
    return {**out, "turning": turning}


def _worst_base(solution: Solution, f: FootWorst) -> dict[str, Any]:
    return {**_worst_foot(f), "bearing": next(iter(_findings_of(solution, f"base of {f.spar}", "bearing")), None)}


def _worst_spar(solution: Solution, k: int) -> dict[str, Any]:
    """The head's greatest displacement from where it is drawn, of the listed cases, and what its sections and its lean come to."""
    spar = solution.spars[k]
    moved = np.linalg.norm(spar.displacement[:, -1], axis=-1)
    worst = None if np.isnan(moved).all() else int(np.nanargmax(moved))
    return {
        "spar": spar.name,
        "head_displacement_m": None if worst is None else float(moved[worst]),
        "case": "" if worst is None else solution.case[worst],
        "wind_from_deg": None if worst is None else bearing(float(solution.wind_from[worst])),
        "lean": next(iter(_findings_of(solution, f"spar {spar.name}", "lean")), None),
        "sections": [finding(f) for f in solution.findings if f.thing in _section_things(solution, k) and f.quantity != "lean"],
    }


def _section_things(solution: Solution, k: int) -> set[str]:
    spar = solution.scenario.spar[k]
    return {section_thing(spar, n) for n in range(len(spar.section))}


def _findings_of(solution: Solution, thing: str, quantity: str) -> list[dict[str, Any]]:
    return [finding(f) for f in solution.findings if (f.thing, f.quantity) == (thing, quantity)]


def finding(f: Finding) -> dict[str, Any]:
    """One thing judged."""
    return {
        "thing": f.thing,
        "quantity": f.quantity,
        "demand": number(f.demand),
        "capacity": number(f.capacity),
        "unit": f.unit,
        "factor_required": f.required,
        "factor": number(f.factor),
        "verdict": f.verdict,
        "case": f.case,
        "wind_from_deg": bearing(f.wind_from),
        "why": f.why,
        "allowable_is_default": f.default,
        "source": f.source,
        "governs": f.governs,
        "margin_m": number(f.margin),
    }


def _sweep(solution: Solution, sweep: Sweep) -> list[dict[str, Any]]:
    def by(names: Sequence[str], values: Array) -> dict[str, list[float | None]]:
        return {name: [number(v) for v in values[:, n]] for n, name in enumerate(names)}

    return [
        {
            "case": case,
            "wind_from_deg": [bearing(float(b)) for b in sweep.bearing[k]],
            "tension_N": by(solution.cables.name, sweep.tension[k]),
            "anchor_resultant_N": by(solution.anchors.name, sweep.resultant[k]),
        }
        for k, case in enumerate(sweep.case)
    ]
