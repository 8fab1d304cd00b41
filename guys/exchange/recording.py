"""The file `record.json`, format guys-record/1: the result of the run, and what else the record tells, SI throughout.

`result` is what `result.json` holds.  Every number of the record page stands here under the key that the page names beside it.
"""

from __future__ import annotations

import math
from dataclasses import asdict
from typing import Any

import numpy as np

from guys.checks.free_body import FreeBody
from guys.exchange import result
from guys.exchange.files import json_text
from guys.exchange.result import bearing, number
from guys.loads.worked import Worked
from guys.rotation import Array
from guys.studies.recording import Recorded, Variant

FORMAT = "guys-record/1"


def as_dict(found: Recorded) -> dict[str, Any]:
    """Everything of the record as plain lists and numbers."""
    solution = found.solution
    return {
        "format": FORMAT,
        "result": result.as_dict(solution),
        "variants": [_variant(found, v) for v in found.variants],
        "sums": [
            {"case": solution.case[k], "loads_N": _row(found.loads[k]), "reactions_N": _row(found.reactions[k])}
            for k in range(len(solution.case))
        ],
        "worked": None if found.worked is None else _worked(found.worked),
        "free_body": None if found.free_body is None else _free_body(found.free_body),
    }


def as_text(found: Recorded) -> str:
    """The file's text."""
    return json_text(as_dict(found))


def _row(values: Array) -> list[float | None]:
    return [number(float(v)) for v in values]


def _variant(found: Recorded, v: Variant) -> dict[str, Any]:
    scenario = found.solution.scenario
    return {
        "key": v.key,
        "words": v.words,
        "lacking": v.lacking,
        "standing": v.standing,
        "cables": [{"name": c.name, "tension_N": number(float(t))} for c, t in zip(scenario.cable, v.tension, strict=True)],
        "anchors": [{"name": a.name, "pull_N": number(float(p))} for a, p in zip(scenario.anchor, v.pull, strict=True)],
        "spars": [
            {
                "name": spar.name,
                "down_N": number(float(v.down[k])),
                "turning_Nm": number(float(v.turning[k])),
                "head_lean_deg": number(math.degrees(v.lean[k])),
            }
            for k, spar in enumerate(scenario.spar)
        ],
    }


UNITS = {
    "station": "_m", "z": "_m", "width": "_m", "low": "_m", "high": "_m", "chord": "_m", "q": "_Pa", "mass": "_kg_per_m",
    "weight": "_N_per_m",
}  # fmt: skip


def _worked(w: Worked) -> dict[str, Any]:
    """Keys carry the unit; the wind is per metre on the spar, in all on the cable."""
    out: dict[str, Any] = {"case": w.line.name, "wind_from_deg": bearing(w.line.wind_from), "factor": w.factor}
    for name, part, wind in (("spar", w.spar, "wind_N_per_m"), ("cable", w.cable, "wind_N")):
        told = {} if part is None else asdict(part)
        out[name] = {wind if key == "wind" else f"{key}{UNITS.get(key, '')}": value for key, value in told.items()} or None
    return out


def _free_body(body: FreeBody) -> dict[str, Any]:
    return {
        "case": body.case,
        "wind_from_deg": bearing(body.wind_from),
        "about_m": _row(body.about),
        "reference_force_N": body.reference,
        "forces": [
            {
                "what": what,
                "load": body.given[k],
                "force_N": _row(body.force[k]),
                "at_m": _row(body.at[k]),
                "couple_Nm": _row(np.where(np.abs(body.couple[k]) < 1e-300, 0.0, body.couple[k])),
                "moment_Nm": _row(body.moment[k]),
            }
            for k, what in enumerate(body.what)
        ],
        "net_force_N": _row(body.net_force),
        "net_moment_Nm": _row(body.net_moment),
    }
