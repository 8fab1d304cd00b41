"""`raise.json` and `raise.csv`: every stage of a raising, full digits, SI, angles and bearings in degrees."""

from __future__ import annotations

import math
from typing import Any

import numpy as np

from guys.checks.extremes import first_greatest
from guys.exchange.files import heading, json_text
from guys.exchange.result import bearing, finding, number
from guys.exchange.tables import Cell, as_csv
from guys.results import Finding
from guys.rotation import Array
from guys.studies import hoisting
from guys.studies.raising import Raised

FORMAT = "guys-raise/1"
MEASURES = {"hoist_N": "hoist", "winch_N": "winch", "lift_line_N": "lift_line", "gin_pole_N": "gin_pole", "holding_N": "holding"}
STANDING = {"backstay_N": "backstay", "gin_pole_head_level_N": "level"}


def as_dict(raised: Raised, findings: tuple[Finding, ...]) -> dict[str, Any]:
    """The whole raising as plain lists and numbers."""
    lift = raised.lift
    return {
        **heading(FORMAT, lift.scenario),
        "spar": lift.spar.name,
        "toward_deg": bearing(lift.raising.toward),
        "gin_pole_kind": lift.raising.gin_pole.kind,
        "holding_assumed": lift.assumed,
        "over_centre_deg": _degrees(raised.over),
        "over_centre_in_wind_deg": _degrees(hoisting.over_in_wind(raised)),
        "gin_pole_lifted_off_deg": _degrees(hoisting.lifted_off(raised)),
        "stages": [_stage(raised, k) for k in range(len(raised.angle))],
        "greatest": {key: _greatest(raised, key, value) for key, value in measures(raised).items()},
        "findings": [finding(f) for f in findings],
        "warnings": list(hoisting.warnings(raised)),
        "not_checked": list(hoisting.NOT_CHECKED),
        "cautions": list(hoisting.CAUTIONS),
    }


def as_text(raised: Raised, findings: tuple[Finding, ...]) -> str:
    """The text of `raise.json`."""
    return json_text(as_dict(raised, findings))


def measures(raised: Raised) -> dict[str, Array]:
    """The forces and moments (stage, case) by their key."""
    kept = MEASURES if raised.lift.rig.turning else {**MEASURES, **STANDING}
    hinge = np.linalg.norm(raised.on_hinge, axis=-1)
    return {**{key: getattr(raised, name) for key, name in kept.items()}, "hinge_N": hinge, "bending_Nm": raised.bending}


def _degrees(angle: float) -> float | None:
    return None if math.isnan(angle) else math.degrees(angle)


def _stage(raised: Raised, k: int) -> dict[str, Any]:
    still = _case(raised, k, 0)
    return {
        "angle_deg": round(math.degrees(raised.angle[k]), 9),
        **still,
        "rigid_line_N": number(raised.rigid[k, 0]),
        "load_moment_Nm": number(raised.moment[k, 0]),
        "side_guys": [
            {"name": guy.name, "tension_N": number(raised.guys[k, 0, g]), "slack": bool(raised.slack[k, 0, g]),
             "chord_change_m": float(raised.guy_change[k, g])}
            for g, guy in enumerate(raised.lift.guys)
        ],
        "winds": [{"wind_from_deg": bearing(raised.wind_from[c]), **_case(raised, k, c)} for c in range(1, len(raised.wind_from))],
    }  # fmt: skip


def _case(raised: Raised, k: int, c: int) -> dict[str, Any]:
    values = {key: number(value[k, c]) for key, value in measures(raised).items() if key != "hinge_N"}
    reason = raised.reason[k][c]
    return {
        **values,
        "hinge_on_ground_N": _vector(raised.on_hinge[k, c]),
        "hinge_moment_on_ground_Nm": _vector(raised.hinge_moment[k, c]),
        "winch_line_on_ground_N": _vector(raised.on_winch[k, c]),
        "bending_at_m": number(raised.bending_at[k, c]),
        "side_guys_N": [number(v) for v in raised.guys[k, c]],
        "state": raised.state[k][c],
        **({"reason": reason} if reason else {}),
    }


def _vector(value: Array) -> list[float | None]:
    return [number(v) for v in value]


def _greatest(raised: Raised, key: str, value: Array) -> dict[str, Any]:
    """The greatest of a measure over stages and winds, the first of mirror winds, and in still air."""
    if np.isnan(value).all():
        return {"value": None, "angle_deg": None, "wind_from_deg": None, "still_air": None}
    stage, case = np.unravel_index(first_greatest(value), value.shape)
    still = value[:, 0]
    return {
        "value": number(value[stage, case]),
        "angle_deg": math.degrees(raised.angle[stage]),
        "wind_from_deg": bearing(raised.wind_from[case]),
        "still_air": None if np.isnan(still).all() else number(float(np.nanmax(still))),
    }


def table(raised: Raised) -> str:
    """`raise.csv`: one row an angle and wind, still air first (`wind_from_deg` empty)."""
    every = {key: value for key, value in measures(raised).items() if key != "hinge_N"}
    guys = [f"side_guy_{k + 1}_N" for k in range(len(raised.lift.guys))]
    head = [
        "angle_deg",
        "wind_from_deg",
        "state",
        *every,
        "hinge_east_N",
        "hinge_north_N",
        "hinge_up_N",
        "bending_at_m",
        "rigid_line_N",
        *guys,
    ]
    rows: list[list[Cell]] = []
    for k, angle in enumerate(raised.angle):
        for c, wind in enumerate(raised.wind_from):
            values = [float(v[k, c]) for v in every.values()] + [float(v) for v in raised.on_hinge[k, c]]
            rest = [float(raised.bending_at[k, c]), float(raised.rigid[k, c]), *(float(v) for v in raised.guys[k, c])]
            rows.append([round(math.degrees(angle), 9), bearing(wind), raised.state[k][c], *values, *rest])
    return as_csv(head, rows)
