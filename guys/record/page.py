"""The record as one HTML page: numbered, with its contents, its style and a content policy that lets nothing in from outside.

The policy allows the page's own stylesheet, by its digest, and nothing else: no script, no image, no font, no form.
"""

from __future__ import annotations

import base64
import hashlib
from collections.abc import Iterator
from dataclasses import dataclass
from importlib.resources import files

from guys.drawing.rounding import Units
from guys.record import assumptions, every_case, judged, question
from guys.record.blocks import Block, Section
from guys.record.source import Source
from guys.studies.recording import Recorded

NUMBERED = {"table": "Table", "figure": "Figure"}


@dataclass(frozen=True)
class Numbered:
    """A block and its number: "Table 3", "" where it has none; its place on the page for links."""

    block: Block
    number: str
    place: str


@dataclass(frozen=True)
class Chapter:
    """A section and its number."""

    number: int
    section: Section
    blocks: tuple[Numbered, ...]


def sections(source: Source) -> tuple[Section, ...]:
    """All of the record in its order."""
    return (
        question.question(source),
        question.structure(source),
        assumptions.assumptions(source),
        assumptions.loads(source),
        assumptions.cases(source),
        assumptions.method(source),
        every_case.balance(source),
        every_case.every_case(source),
        every_case.worst(source),
        judged.findings(source),
        every_case.dropped(source),
        every_case.deflections(source),
        every_case.stability(source),
        judged.sensitivity(source),
        judged.hand_check(source),
        judged.left(source),
        judged.signatures(),
        judged.scenario_text(source),
    )


def html(found: Recorded, units: Units = "SI") -> str:
    """The page.  The same record gives the same text."""
    from jinja2 import Environment, StrictUndefined

    source = Source(found, units)
    chapters = tuple(_numbered(sections(source)))
    parts = files("guys.record")
    style = (parts / "page.css").read_text(encoding="utf-8").strip()
    environment = Environment(autoescape=True, undefined=StrictUndefined, trim_blocks=True, lstrip_blocks=True)
    template = environment.from_string((parts / "page.html").read_text(encoding="utf-8"))
    return template.render(
        title=source.scenario.title,
        solution=source.solution,
        chapters=chapters,
        listed={kind: [n for c in chapters for n in c.blocks if n.block.kind == kind] for kind in NUMBERED},
        style=style,
        digest=base64.b64encode(hashlib.sha256(style.encode()).digest()).decode(),
    )


def _numbered(every: tuple[Section, ...]) -> Iterator[Chapter]:
    count = dict.fromkeys(NUMBERED, 0)
    for n, section in enumerate(every):
        blocks = []
        for block in section.blocks:
            number = ""
            if block.kind in NUMBERED:
                count[block.kind] += 1
                number = f"{NUMBERED[block.kind]} {count[block.kind]}"
            blocks.append(Numbered(block, number, number.lower().replace(" ", "-")))
        yield Chapter(n + 1, section, tuple(blocks))
