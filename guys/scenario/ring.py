"""One mast on a ring: evenly spaced anchors round its foot, every level of its guys made fast to each.

Every level (a guy level, or single cables from one height) keeps the height, lug, rope, initial tension and ends of its first guy.  The
anchor of the first guy keeps its bearing and is the first of the ring; the others follow clockwise, held as it is.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence

from guys.scenario import drawn
from guys.scenario.keys import Finding, Key
from guys.scenario.model import Anchor, AnchorPoint, Cable, Case, Scenario


def names(ways: int) -> list[str]:
    """Names of the anchors of a ring, clockwise."""
    return [str(k + 1) for k in range(ways)]


def unfit(spars: int, cables: Sequence[tuple[Key, bool]]) -> Iterator[Finding]:
    """Why a structure cannot be put on a ring.

    spars : how many it has;  cables : where each stands in the file, and whether it is given by length
    """
    for key, by_length in dict.fromkeys(cables):
        if by_length:
            yield Finding(key, "given by length, which fits one radius; give tension or tight = true")
    if spars > 1:
        yield Finding(("spar", 1), "a second spar: rings are of one mast")
    elif not cables:
        yield Finding(("guy_level",), "missing; rings need guys")


def ring(scenario: Scenario, ways: int, radius: float | None = None) -> Scenario:
    """The mast on one ring of anchors named 1, 2, ... at the level of its foot, for a scenario that is not `unfit`.

    radius : None: that of the first guy's anchor

    Cases that take cables away are left out, and so are stages, a raising and other layouts, which name what is no longer there.
    """
    east, north, level = drawn.foot({spar.name: spar for spar in scenario.spar}, scenario.spar[0].name)
    first = _first(scenario)
    out = math.hypot(first.east - east, first.north - north) if radius is None else radius
    start = math.atan2(first.east - east, first.north - north)
    anchors = []
    for k, name in enumerate(names(ways)):
        turn = start + math.tau * k / ways
        place = {"name": name, "east": east + out * math.sin(turn), "north": north + out * math.cos(turn), "level": level}
        anchors.append(first.model_copy(update=place))
    guys = {cable.name: [_guy(cable, anchor.name) for anchor in anchors] for cable in levels(scenario).values()}
    return scenario.model_copy(
        update={
            "anchor": tuple(anchors),
            "cable": tuple(guy for level in guys.values() for guy in level),
            "case": tuple(_bared(case, guys) for case in scenario.case if not case.without),
            "layouts": (),
            "raising": None,
            "stage": (),
        }
    )


def levels(scenario: Scenario) -> dict[str, Cable]:
    """The first guy of every level, by the level's name."""
    out: dict[str, Cable] = {}
    for cable in scenario.cable:
        out.setdefault(level_of(cable), cable)
    return out


def level_of(cable: Cable) -> str:
    """The name of its level: that of the file, or its height."""
    return cable.level or f"{cable.from_.at:g} m"


def notes(scenario: Scenario) -> Iterator[str]:
    """What becomes of a scenario put on a ring."""
    yield "guys of every level to each anchor, with the rope and the initial tension of its first guy; anchors held as that guy's"
    left = [case.name for case in scenario.case if case.without]
    if left:
        yield f"cases that take cables away are left out: {', '.join(left)}"


def _first(scenario: Scenario) -> Anchor:
    """The anchor of the first guy."""
    end = scenario.cable[0].to
    return next(anchor for anchor in scenario.anchor if isinstance(end, AnchorPoint) and anchor.name == end.anchor)


def _guy(cable: Cable, anchor: str) -> Cable:
    level = level_of(cable)
    return cable.model_copy(update={"name": f"{level} {anchor}", "level": level, "to": AnchorPoint(anchor=anchor)})


def _bared(case: Case, guys: dict[str, list[Cable]]) -> Case:
    """The case, a level without ice where its first guy is."""
    return case.model_copy(update={"bare": tuple(guy.name for name in case.bare for guy in guys.get(name, ()))})
