"""`reserve.json` (format guys-reserve/1), `reserve.csv` and `paths.csv`: verdicts, factors and paths; SI, bearings in degrees."""

from __future__ import annotations

import math
from typing import Any

from guys.exchange.files import heading, json_text
from guys.exchange.result import bearing, number
from guys.exchange.tables import Cell, as_csv
from guys.reserves import Mode, Path, Reserve, Reserves, Standing

FORMAT = "guys-reserve/1"


def as_dict(found: Reserves) -> dict[str, Any]:
    """The whole study as plain lists and numbers."""
    return {
        **heading(FORMAT, found.scenario),
        "looked_up_to": found.most,
        "cases": [_standing(found, standing) for standing in found.every],
        "lowest": [
            {"case": s.case, "loads": r.loads, "factor": number(r.factor), "wind_from_deg": bearing(s.wind_from)}
            for s, r in found.lowest_first
        ],
        "first_drops": [
            {"case": case, "loads": loads, "cable": cable, "factor": at, "wind_from_deg": bearing(toward)}
            for case, loads, cable, at, toward in found.first_drops
        ],
        "notes": list(found.notes),
        "cautions": list(found.cautions),
    }


def as_text(found: Reserves) -> str:
    """The text of `reserve.json`."""
    return json_text(as_dict(found))


def _standing(found: Reserves, standing: Standing) -> dict[str, Any]:
    return {
        "case": standing.case,
        "wind_from_deg": bearing(standing.wind_from),
        "verdict": standing.verdict,
        "why": standing.words or None,
        "stiffness": number(standing.stiffness),
        "reserves": [_reserve(found, reserve) for reserve in standing.reserves],
    }


def _reserve(found: Reserves, reserve: Reserve) -> dict[str, Any]:
    cables = [cable.name for cable in found.scenario.cable]
    return {
        "loads": reserve.loads,
        "factor": number(reserve.factor),
        "stands_to": reserve.stands_to,
        "lost": None if reserve.failed else reserve.lost,
        "falls": reserve.falls or None,
        "stiffness_at_loss": number(reserve.stiffness) if reserve.lost else None,
        "branches_at": number(reserve.branches_at),
        "drops": [{"cable": name, "factor": number(at)} for name, at in zip(cables, reserve.drops, strict=True)],
        "mode": None if reserve.mode is None else _mode(found, reserve.mode),
        "path": _path(found, reserve.path),
    }


def _mode(found: Reserves, mode: Mode) -> dict[str, Any]:
    moves = [{"spar": spar.name, "moves": m.tolist()} for spar, m in zip(found.scenario.spar, mode.moves, strict=True)]
    return {"spar": mode.spar, "toward_deg": bearing(mode.bearing), "spars": moves}


def _path(found: Reserves, path: Path) -> dict[str, Any]:
    return {
        "factor": path.factor.tolist(),
        "heads": [{"spar": spar.name, "moves_m": path.head[:, k].tolist()} for k, spar in enumerate(found.scenario.spar)],
        "cables": [
            {"cable": cable.name, "tension_N": [number(x) for x in path.tension[:, k]], "slack": path.slack[:, k].tolist()}
            for k, cable in enumerate(found.scenario.cable)
        ],
    }


def as_table(found: Reserves) -> str:
    """`reserve.csv`: one row a case, direction and kind of loads; cases that do not stand have one row without factors."""
    head = [
        "case", "wind_from_deg", "verdict", "stiffness", "loads", "factor", "stands_to", "falls", "branches_at", "first_cable_to_drop",
        "drops_at",
    ]  # fmt: skip
    rows: list[list[Cell]] = []
    for s in found.every:
        about: list[Cell] = [s.case, bearing(s.wind_from), s.verdict, s.stiffness]
        if not s.reserves:
            rows.append([*about, None, None, None, s.words, None, None, None])
        rows += [[*about, r.loads, r.factor, r.stands_to, r.falls, r.branches_at, *_first(found, r)] for r in s.reserves]
    return as_csv(head, rows)


def _first(found: Reserves, reserve: Reserve) -> list[Cell]:
    falls = [(at, cable.name) for at, cable in zip(reserve.drops, found.scenario.cable, strict=True) if not math.isnan(at)]
    at, name = min(falls, default=(math.nan, ""))
    return [name, at]


def paths_table(found: Reserves) -> str:
    """`paths.csv`: one row a solved state and spar (moves of its head from still air) or cable (tension, the greater of both ends)."""
    head = ["case", "wind_from_deg", "loads", "factor", "spar", "east_m", "north_m", "up_m", "cable", "tension_N", "slack"]
    rows: list[list[Cell]] = []
    for s in found.every:
        for r in s.reserves:
            for k, x in enumerate(r.path.factor):
                about: list[Cell] = [s.case, bearing(s.wind_from), r.loads, float(x)]
                for spar, move in zip(found.scenario.spar, r.path.head[k].tolist(), strict=True):
                    rows.append([*about, spar.name, *move, None, None, None])
                for c, cable in enumerate(found.scenario.cable):
                    rows.append([*about, None, None, None, None, cable.name, float(r.path.tension[k, c]), bool(r.path.slack[k, c])])
    return as_csv(head, rows)
