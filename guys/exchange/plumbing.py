"""`plumb.json` (format guys-plumb/1) and `plumb.csv`: tensions as asked and for plumb; SI, angles in degrees."""

from __future__ import annotations

import math
from typing import Any

from guys.checks.alarms import CAUTIONS
from guys.exchange.files import heading, json_text
from guys.exchange.result import number
from guys.exchange.tables import as_csv
from guys.studies.plumbing import Plumb

FORMAT = "guys-plumb/1"


def rows(found: Plumb) -> list[dict[str, Any]]:
    """Every cable given by tension."""
    return [
        {
            "cable": name,
            "tension_asked_N": float(found.asked[k]),
            "tension_plumb_N": float(found.plumb[k]),
            "change": float(found.change[k]),
        }
        for k, name in enumerate(found.name)
    ]


def as_dict(found: Plumb) -> dict[str, Any]:
    """The whole result as plain lists and numbers."""
    return {
        **heading(FORMAT, found.scenario),
        "cables": rows(found),
        "spars": [
            {
                "name": name,
                "lean_as_asked_deg": number(math.degrees(found.lean[k])),
                "lean_plumb_deg": number(math.degrees(found.plumb_lean[k])),
            }
            for k, name in enumerate(found.spar)
        ],
        "cautions": list(CAUTIONS),
    }


def as_text(found: Plumb) -> str:
    """The text of `plumb.json`."""
    return json_text(as_dict(found))


def as_table(found: Plumb) -> str:
    """`plumb.csv`."""
    table = rows(found)
    return as_csv(list(table[0]), [list(row.values()) for row in table])
