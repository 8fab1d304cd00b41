"""`lost.json` (format guys-lost/1) and `lost.csv`: what every loss does in every case and direction; SI, bearings in degrees."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np

from guys.checks.alarms import CAUTIONS
from guys.checks.extremes import first_greatest
from guys.exchange.files import heading, json_text
from guys.exchange.limit import limit_as_dict
from guys.exchange.result import bearing, number
from guys.exchange.tables import Cell, as_csv
from guys.rotation import Array
from guys.studies.cells import FALLS, WORDS, Cells, worst_first, worst_use
from guys.studies.lost import Lost, judged_by

FORMAT = "guys-lost/1"
JUDGED = ("governs", "quantity", "how", "factor", "factor_required")
"""Keys and columns of what governs."""


def as_dict(found: Lost) -> dict[str, Any]:
    """The whole result as plain lists and numbers."""
    return {
        **heading(FORMAT, found.scenario),
        "sudden": found.scenario.lost.sudden,
        "losses": [_loss(found, k) for k in range(len(found.losses))],
        "judged_by": list(judged_by(found)),
        "cautions": list(CAUTIONS),
    }


def as_text(found: Lost) -> str:
    """The text of `lost.json`."""
    return json_text(as_dict(found))


def _loss(found: Lost, k: int) -> dict[str, Any]:
    loss, cells = found.losses[k], found.cells[k]
    count = {word: int((cells.verdict == code).sum()) for code, word in enumerate(WORDS)}
    worst = worst_use(cells)
    return {
        "lost": loss.kind,
        "name": list(loss.name),
        "cables": list(loss.cables),
        "verdict": WORDS[cells.verdict[worst_first(cells)]],
        "falls_in_still_air": bool(cells.verdict[0] >= FALLS),
        "count": {word: n for word, n in count.items() if n},
        "least_factor": None if worst is None else {**_where(found, worst), **_governing(found, cells, worst)},
        "greatest_tension": _greatest(found, cells.tension, "cable", [c.name for c in found.scenario.cable], "tension_N"),
        "greatest_pull": _greatest(found, cells.pull, "anchor", [a.name for a in found.scenario.anchor], "resultant_N"),
        **_winds(found, k),
        "cells": [_cell(found, k, line) for line in range(len(found.lines))],
    }


def _winds(found: Lost, k: int) -> dict[str, Any]:
    """The limits of a loss, the lowest apart; nothing where they were not asked for."""
    if not found.winds:
        return {}
    cables, least = [c.name for c in found.scenario.cable], found.least_wind(k)
    return {
        "least_limit": None if least is None else limit_as_dict(least, cables),
        "limits": [limit_as_dict(limit, cables) for limit in found.winds[k]],
    }


def _where(found: Lost, line: int) -> dict[str, Any]:
    return {"case": found.lines[line].name, "wind_from_deg": bearing(found.lines[line].wind_from)}


def _governing(found: Lost, cells: Cells, line: int) -> dict[str, Any]:
    item = int(cells.governs[line])
    if item < 0:
        return {}
    required, use = float(cells.required[line]), float(cells.use[line])
    factor = number(required / use if use > 0 else float("inf"))
    thing = cells.items[item]
    how = {"how": cells.how(line)} if cells.how(line) else {}
    return {"governs": thing.thing, "quantity": thing.quantity, **how, "factor": factor, "factor_required": required}


def _greatest(found: Lost, loads: Array, kind: str, names: Sequence[str], key: str) -> dict[str, Any] | None:
    if loads.size == 0 or np.isnan(loads).all():
        return None
    line, item = (int(k) for k in np.unravel_index(first_greatest(loads), loads.shape))
    return {kind: names[item], key: float(loads[line, item]), **_where(found, line)}


def _cell(found: Lost, k: int, line: int) -> dict[str, Any]:
    cells = found.cells[k]
    out = {**_where(found, line), "verdict": WORDS[cells.verdict[line]], "solved": line == 0 or not found.still[k]}
    if cells.reason[line]:
        out["reason"] = cells.reason[line]
    return {**out, **_governing(found, cells, line)}


def as_table(found: Lost) -> str:
    """The text of `lost.csv`: a row a loss, case and direction."""
    head = [
        "lost", "name", "case", "wind_from_deg", "verdict", "solved", *JUDGED, "greatest_tension_N", "cable", "greatest_pull_N", "anchor",
        "speed_m_s", "equilibrium_lost_m_s", "reason",
    ]  # fmt: skip
    names = [c.name for c in found.scenario.cable], [a.name for a in found.scenario.anchor]
    rows = []
    for k, (loss, cells) in enumerate(zip(found.losses, found.cells, strict=True)):
        for line in range(len(found.lines)):
            cell = _cell(found, k, line)
            row: list[Cell] = [loss.kind, " and ".join(loss.name), cell["case"], cell["wind_from_deg"], cell["verdict"]]
            row += ["yes" if cell["solved"] else "no", *(cell.get(key) for key in JUDGED)]
            for loads, some in zip((cells.tension[line], cells.pull[line]), names, strict=True):
                most = None if len(loads) == 0 or np.isnan(loads).all() else first_greatest(loads)
                row += [None, None] if most is None else [float(loads[most]), some[most]]
            limit = found.limit_at(k, line)
            row += [None, None] if limit is None else [number(limit.speed), number(limit.lost)]
            rows.append([*row, cell.get("reason", "")])
    return as_csv(head, rows)
