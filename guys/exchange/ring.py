"""`ring.json` (format guys-ring/1) and `ring.csv`: loads of one mast over radius and number of ways; SI."""

from __future__ import annotations

from typing import Any

from guys.checks.alarms import CAUTIONS
from guys.exchange.comparison import in_file
from guys.exchange.files import heading, json_text
from guys.exchange.tables import as_csv
from guys.studies.measures import MEASURES
from guys.studies.ring import KEYS, Rings

FORMAT = "guys-ring/1"
HEAD = ("ways", "radius_m", "stands", "footprint_m2", *(MEASURES[key].column for key in KEYS))


def as_dict(found: Rings) -> dict[str, Any]:
    """The whole result as plain lists and numbers."""
    return {
        **heading(FORMAT, found.scenario),
        "height_m": found.height,
        "rings": [_ring(found, w, r) for w in range(len(found.ways)) for r in range(len(found.radius))],
        "notes": list(found.notes),
        "cautions": list(CAUTIONS),
    }


def as_text(found: Rings) -> str:
    """The text of `ring.json`."""
    return json_text(as_dict(found))


def _ring(found: Rings, w: int, r: int) -> dict[str, Any]:
    values = {MEASURES[key].column: in_file(MEASURES[key], float(found.values[key][w, r])) for key in KEYS}
    stands, ground = bool(found.stands[w, r]), float(found.footprint[w, r])
    return {"ways": found.ways[w], "radius_m": float(found.radius[r]), "stands": stands, "footprint_m2": ground, **values}


def as_table(found: Rings) -> str:
    """The text of `ring.csv`: a row a ring."""
    return as_csv(HEAD, [list(_ring(found, w, r).values()) for w in range(len(found.ways)) for r in range(len(found.radius))])
