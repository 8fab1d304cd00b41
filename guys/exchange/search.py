"""`search.json` (format guys-search/1), `search.csv` with every layout tried, and `layouts.toml`: what was found, to paste."""

from __future__ import annotations

import json
import math
from typing import Any

from guys.checks.alarms import CAUTIONS
from guys.exchange.comparison import in_file, layout_entry
from guys.exchange.files import heading, json_text
from guys.exchange.result import number
from guys.exchange.tables import Cell, as_csv
from guys.scenario import drawn
from guys.scenario.model import Anchor
from guys.studies.measures import MEASURES
from guys.studies.search import Found, name_of
from guys.studies.trial import FALLS, HOLDS, MISPLACED, PAST, Trial

FORMAT = "guys-search/1"
OUTCOMES = {HOLDS: "holds", PAST: "past", FALLS: "falls", MISPLACED: "misplaced"}
HEAD = ("try", "outcome", "rule", "lacking")


def as_dict(found: Found) -> dict[str, Any]:
    """The whole result as plain lists and numbers; what was tried without success stands in `search.csv`."""
    asked = found.scenario.search
    assert asked is not None
    return {
        **heading(FORMAT, found.scenario),
        "least": asked.least,
        "against": asked.against,
        "seed": asked.seed,
        "directions": asked.directions,
        "tried": len(found.trials),
        "holding": sum(trial.outcome == HOLDS for trial in found.trials),
        "interrupted": found.interrupted,
        "excluded": [{"rule": rule, "count": count} for rule, count in found.excluded],
        "found": [_found(found, k, trial) for k, trial in enumerate(found.front)],
        "layouts": [] if found.compared is None else [layout_entry(each) for each in found.compared.layouts],
        "cautions": list(CAUTIONS),
    }


def as_text(found: Found) -> str:
    """The text of `search.json`."""
    return json_text(as_dict(found))


def _found(found: Found, k: int, trial: Trial) -> dict[str, Any]:
    """A found layout as the search saw it, in its few directions of wind."""
    return {
        "layout": name_of(k),
        "in_search": {
            MEASURES[key].column: in_file(MEASURES[key], value) for key, value in zip(found.keys, trial.values, strict=True)
        },
    }  # fmt: skip


def as_table(found: Found) -> str:
    """The text of `search.csv`: one row a layout tried, in the order tried."""
    names = moved(found)
    places = [f"{name}_{way}_m" for name in names for way in ("east", "north", "level")]
    head = (*HEAD, *(MEASURES[key].column for key in found.keys), *places)
    return as_csv(head, [_row(found, n, trial, names) for n, trial in enumerate(found.trials)])


def moved(found: Found) -> list[str]:
    """Names of the anchors that move, in order of the file."""
    asked = found.scenario.search
    assert asked is not None
    some = {name for move in asked.move for name in move.anchors}
    return [anchor.name for anchor in found.scenario.anchor if anchor.name in some]


def _row(found: Found, n: int, trial: Trial, names: list[str]) -> list[Cell]:
    cells: list[Cell] = [n + 1, OUTCOMES[trial.outcome], trial.rule, number(trial.amount) if trial.rule else None]
    cells += [in_file(MEASURES[key], value) for key, value in zip(found.keys, trial.values, strict=True)]
    at = {anchor.name: anchor for anchor in trial.anchors}
    return [*cells, *(x for name in names for x in (at[name].east, at[name].north, number(at[name].level)))]


def as_layouts(found: Found) -> str:
    """The text of `layouts.toml`: a [[layout]] for every one found."""
    foot = drawn.foot({spar.name: spar for spar in found.scenario.spar}, found.scenario.spar[0].name)
    blocks = []
    for k, trial in enumerate(found.front):
        at = {anchor.name: anchor for anchor in trial.anchors}
        rows = [_line(at[name], foot) for name in moved(found)]
        blocks.append(f'[[layout]]\nname = "{name_of(k)}"\nanchor = [\n' + "\n".join(rows) + "\n]\n")
    return "\n".join(blocks)


def _line(anchor: Anchor, foot: drawn.Point) -> str:
    east, north = anchor.east - foot[0], anchor.north - foot[1]
    place = f'east = "{anchor.east:.2f} m", north = "{anchor.north:.2f} m", level = "{anchor.level:.2f} m"'
    said = f"bearing {math.degrees(math.atan2(east, north)) % 360:.1f} deg, radius {math.hypot(east, north):.2f} m"
    return f"  {{ name = {json.dumps(anchor.name, ensure_ascii=False)}, {place} }},  # {said}"
