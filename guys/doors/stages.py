"""`guys stages`: the states on the way up, and the wind each may see.

Exit status 4 where a stage falls in its wind, 3 where something is past its allowable at some stage.
"""

from __future__ import annotations

import sys
from typing import TextIO

from guys import terminal
from guys.doors.common import deliver, exit_status, in_layout, pictures
from guys.drawing import rounding
from guys.drawing.rounding import Units, tongue
from guys.drawing.stages import draw_stages, least_words, may_see_words, stands_words, wind_words
from guys.exchange import stages
from guys.scenario import read_scenario
from guys.studies.cells import FALLS, NOT_FOUND, PAST, WORDS
from guys.studies.stages import Stages, build_up


def stages_command(file: str, out: str | None, as_json: bool, units: Units = "SI", layout: str | None = None) -> int:
    """Solve every stage; files go to the directory `out` where one is given.

    Raises `GuysError` for what is the user's to mend; nothing is written then.
    """
    scenario = in_layout(read_scenario(file), layout)
    with terminal.progress(sys.stderr) as tick:
        found = build_up(scenario, tick)

    def contents() -> dict[str, bytes]:
        drawn = pictures("stages", draw_stages(found, "A3", units), scenario.title)
        return {"stages.json": stages.as_text(found).encode(), "stages.csv": stages.as_table(found).encode()} | drawn

    deliver(out, contents, as_json, lambda: stages.as_text(found), lambda stream: report(found, units, stream))
    return status(found)


def status(found: Stages) -> int:
    """The exit status."""
    if any(b.verdict == NOT_FOUND or (b.solution is not None and exit_status(b.solution) == 1) for b in found.built):
        return 1
    gravest = max(b.verdict for b in found.built)
    return 4 if gravest >= FALLS else 3 if gravest >= PAST else 0


def report(found: Stages, units: Units, stream: TextIO) -> None:
    """One line a stage, then why stages fall, and every warning."""
    speech = tongue(units)
    rows = [
        [
            built.stage.name,
            stands_words(built, speech),
            str(len(built.scenario.cable)),
            wind_words(built, speech),
            WORDS[built.verdict],
            least_words(built),
            *([speech.say(rounding.load, built.tension.tension.peak), built.tension.name] if built.tension else [rounding.ABSENT] * 2),
            may_see_words(built, speech),
        ]
        for built in found.built
    ]
    stream.write(f"{found.scenario.title}\n")
    head = ["stage", "stands", "cables", "wind", "verdict", "least factor", "tension", "of", "may see"]
    terminal.table("What stands on the way up, and the wind it may see", head, rows, stream)
    falls = [f"{built.stage.name}: {built.reason}" for built in found.built if built.reason]
    governs = [f"{b.stage.name}: {b.may_see.why}" for b in found.built if b.may_see is not None and not b.reason]
    warned = [f"{b.stage.name}: {w}" for b in found.built if b.solution is not None and not b.reason for w in b.solution.warnings]
    lists = {"Falls": falls, "What ends the wind it may see": governs, "Warnings": warned, "How": found.how, "Cautions": found.cautions}
    terminal.listed(lists, stream)
