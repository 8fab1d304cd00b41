"""`field.json` (format guys-field/1), `field.csv`, `lengths.csv` and the form for readings, `readings.csv`; SI."""

from __future__ import annotations

import math
from typing import Any

from guys.checks.alarms import CAUTIONS
from guys.constants import ZERO_CELSIUS
from guys.exchange.files import heading, json_text
from guys.exchange.result import bearing, number
from guys.exchange.tables import Cell, as_csv
from guys.limits import Limits
from guys.scenario.model import AS_DRAWN
from guys.scenario.readings import COLUMNS, DIGEST, LAYOUT
from guys.sounding import TIMED, WAYS
from guys.studies.field import Field, acceptance, cycles, order, proof_factor

FORMAT = "guys-field/1"
UNITS = {"pulse": "s", "swing": "s", "sag": "m", "sight": "m", "gauge": "N"}


def celsius(kelvin: float) -> float:
    """Rounded to what doubles tell of it."""
    return round(kelvin - float(ZERO_CELSIUS), 9)


def lengths(found: Field) -> list[dict[str, Any]]:
    """Every length of every cable."""
    cut = found.cut
    return [
        {
            "name": cable.name,
            "rope": cable.rope,
            "chord_m": float(cut.chord[k]),
            "sag_m": float(cut.sag[k]),
            "stretch_m": float(cut.stretch[k]),
            "unstressed_length_m": float(cut.unstressed[k]),
            "hardware_m": float(cut.hardware[k]),
            "turn_back_m": float(cut.turn_back[k]),
            "rope_to_cut_m": float(cut.rope[k]),
            "take_up_m": number(cut.take_up[k]),
            "by_turn_m": number(cut.by_turn[k]),
        }
        for k, cable in enumerate(found.scenario.cable)
    ]


def settings(found: Field) -> list[dict[str, Any]]:
    """Every cable at every temperature, that of the setting first: tension and what tells it."""
    out = []
    for c, cable in enumerate(found.scenario.cable):
        for t, temperature in enumerate(found.still.temperature):
            row = {
                "cable": cable.name,
                "temperature_degC": celsius(float(temperature)),
                "tension_N": number(found.still.tension[t, c]),
                "slack": bool(found.still.slack[t, c]),
                "cycles": found.scenario.field.cycles,
            }
            row |= {f"{way}_{UNITS[way]}": number(found.readings[way][t, c]) for way in WAYS if way != "gauge"}
            out.append(row)
    return out


def as_dict(found: Field) -> dict[str, Any]:
    """The whole result as plain lists and numbers."""
    scenario = found.scenario
    names = [cable.name for cable in scenario.cable]
    return {
        **heading(FORMAT, scenario),
        "layout": scenario.layout,
        "setting_temperature_degC": celsius(scenario.setting.temperature),
        "lengths": lengths(found),
        "order": [{"spar": level.spar, "at_m": level.at, "cables": list(level.cables)} for level in order(scenario)],
        "settings": settings(found),
        "errors": [
            {"cable": name, **{f"by_{way}": number(found.errors[way][k]) for way in WAYS}} for k, name in enumerate(names)
        ],
        "acceptance": [
            {"spar": p.of, "at_m": p.at, "off_m": p.off, "twist_deg": math.degrees(p.twist)} for p in acceptance(scenario)
        ],
        "proof_factor": proof_factor(scenario),
        "proof_loads": [{"anchor": a.name, "proof_load_N": number(p)} for a, p in zip(scenario.anchor, found.proof, strict=True)],
        "wind_card": None if found.limits is None else wind_card(found.limits),
        "warnings": list(found.warnings),
        "cautions": list(CAUTIONS),
    }  # fmt: skip


def wind_card(found: Limits) -> dict[str, Any]:
    """The lowest limit and the winds to act on."""
    least, wind = found.acting, found.scenario.wind
    assert wind is not None
    return {
        "limit_m_s": None if least is None else number(least.speed),
        "why": None if least is None else least.why,
        "case": None if least is None else least.case,
        "wind_from_deg": None if least is None else bearing(least.wind_from),
        "actions": [{"share": share, "speed_m_s": speed} for share, speed in found.actions],
        "lower_in_s": found.scenario.limit.lower_in,
        "averaging_s": wind.averaging,
        "height_m": wind.height,
    }


def as_text(found: Field) -> str:
    """The text of `field.json`."""
    return json_text(as_dict(found))


def _table(rows: list[dict[str, Any]], head: list[str]) -> str:
    return as_csv(list(rows[0]) if rows else head, [list(row.values()) for row in rows])


def as_table(found: Field) -> str:
    """The text of `field.csv`: one row a cable and temperature."""
    return _table(settings(found), ["cable"])


def lengths_table(found: Field) -> str:
    """The text of `lengths.csv`: one row a cable."""
    return _table(lengths(found), ["name"])


def form(found: Field) -> str:
    """An empty form for readings, to be filled in and given back with --measured."""
    work = found.scenario.field
    rows: list[list[Cell]] = [[cable.name, TIMED[0], None, cycles(work, TIMED[0]), None] for cable in found.scenario.cable]
    layout = "" if found.scenario.layout == AS_DRAWN else f"{LAYOUT}{found.scenario.layout}\n"
    return f"{DIGEST}{found.scenario.sha256}\n{layout}{as_csv(COLUMNS, rows)}"
