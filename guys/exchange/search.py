"""`search.json` (format guys-search/1), `search.csv` with every layout tried, and `layouts.toml`: what was found, to paste.

A search for so many ways hands back whole tables: the anchors of the first found layout, the guy levels made fast to them, and a layout
for every other one found.
"""

from __future__ import annotations

import json
import math
from typing import Any

from guys.checks.alarms import CAUTIONS
from guys.exchange.comparison import in_file, layout_entry
from guys.exchange.files import heading, json_text
from guys.exchange.result import number
from guys.exchange.tables import Cell, as_csv
from guys.scenario import drawn, ring
from guys.scenario.model import Anchor, Cable
from guys.studies.measures import MEASURES
from guys.studies.search import Found, name_of
from guys.studies.trial import FALLS, HOLDS, MISPLACED, PAST, Trial

FORMAT = "guys-search/1"
OUTCOMES = {HOLDS: "holds", PAST: "past", FALLS: "falls", MISPLACED: "misplaced"}
HEAD = ("try", "outcome", "rule", "lacking", "still_lean_deg")


def as_dict(found: Found) -> dict[str, Any]:
    """The whole result as plain lists and numbers; what was tried without success stands in `search.csv`."""
    asked = found.scenario.search
    assert asked is not None
    return {
        **heading(FORMAT, found.scenario),
        "least": asked.least,
        "against": asked.against,
        "ways": asked.ways,
        "seed": asked.seed,
        "directions": asked.directions,
        "tried": len(found.trials),
        "holding": sum(trial.outcome == HOLDS for trial in found.trials),
        "interrupted": found.interrupted,
        "excluded": [{"rule": rule, "count": count} for rule, count in found.excluded],
        "found": [_found(found, k, trial) for k, trial in enumerate(found.front)],
        "warnings": list(found.warnings),
        "notes": list(found.notes),
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
    some = {name for move in asked.move for name in move.anchors or ()}
    return [anchor.name for anchor in found.start.anchor if anchor.name in some]


def _row(found: Found, n: int, trial: Trial, names: list[str]) -> list[Cell]:
    cells: list[Cell] = [n + 1, OUTCOMES[trial.outcome], trial.rule, number(trial.amount) if trial.rule else None]
    cells += [number(math.degrees(trial.still_lean))]
    cells += [in_file(MEASURES[key], value) for key, value in zip(found.keys, trial.values, strict=True)]
    at = {anchor.name: anchor for anchor in trial.anchors}
    return [*cells, *(x for name in names for x in (at[name].east, at[name].north, number(at[name].level)))]


def as_layouts(found: Found) -> str:
    """The text of `layouts.toml`: a [[layout]] for every one found; with so many ways asked for, the first as whole tables."""
    asked = found.scenario.search
    assert asked is not None
    told = [f"# {warning}\n" for warning in found.warnings]
    if asked.ways is None or not found.front:
        return "\n".join([*told, *(_layout(found, k) for k in range(len(found.front)))])
    head = "".join([*told, f"# {name_of(0)}: in place of the file's tables anchor, guy_level, cable and layout\n"])
    anchors = [f"[[anchor]]  # {_seen(found, anchor)}\n{_lines(_anchor(anchor))}\n" for anchor in found.front[0].anchors]
    guys = [f"[[guy_level]]\n{_lines(_guys(found, name, cable))}\n" for name, cable in ring.levels(found.start).items()]
    return "\n".join([head, *anchors, *guys, *(_layout(found, k) for k in range(1, len(found.front)))])


def _layout(found: Found, k: int) -> str:
    at = {anchor.name: anchor for anchor in found.front[k].anchors}
    rows = [f"  {{ {', '.join(_place(at[name]))} }},  # {_seen(found, at[name])}" for name in moved(found)]
    return f'[[layout]]\nname = "{name_of(k)}"\nanchor = [\n' + "\n".join(rows) + "\n]\n"


def _lines(keys: list[str]) -> str:
    return "\n".join(keys)


def _place(anchor: Anchor) -> list[str]:
    """Keys of an anchor's name and place."""
    places = (f'{way} = "{_exact(getattr(anchor, way), 2)} m"' for way in ("east", "north", "level"))
    return [f"name = {_text(anchor.name)}", *places]


def _anchor(anchor: Anchor) -> list[str]:
    """Keys of a whole anchor."""
    give = [] if anchor.give is None else [f'give = "{_exact(anchor.give)} N/m"']
    held = [] if anchor.holdfast is None else [f"holdfast = {_text(anchor.holdfast)}"]
    return [*_place(anchor), *give, *held]


def _guys(found: Found, name: str, cable: Cable) -> list[str]:
    """Keys of a level of guys, one to each anchor."""
    arm = [f'arm = "{_exact(cable.from_.arm)} m"'] if cable.from_.arm else []
    tension = "tight = true" if cable.tension is None else f'tension = "{_exact(cable.tension)} N"'
    ends = [f"ends = [{', '.join(map(_text, cable.ends))}]"] if cable.ends else []
    to = ", ".join(_text(anchor.name) for anchor in found.start.anchor)
    point = [f"name = {_text(name)}", f"spar = {_text(cable.from_.spar)}", f'at = "{_exact(cable.from_.at)} m"']
    return [*point, *arm, f"rope = {_text(cable.rope)}", f"to = [{to}]", tension, *ends]


def _text(name: str) -> str:
    return json.dumps(name, ensure_ascii=False)


def _exact(value: float, decimals: int = 0) -> str:
    """A number that is read back as it is, with so many decimals where these tell it."""
    short = f"{value:.{decimals}f}"
    return short if float(short) == value else repr(float(value))


def _seen(found: Found, anchor: Anchor) -> str:
    """Where an anchor stands as seen from the first spar."""
    foot = drawn.foot({spar.name: spar for spar in found.start.spar}, found.start.spar[0].name)
    east, north = anchor.east - foot[0], anchor.north - foot[1]
    return f"bearing {math.degrees(math.atan2(east, north)) % 360:.1f} deg, radius {math.hypot(east, north):.2f} m"
