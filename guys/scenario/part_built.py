"""What of a structure is there at a stage: spars cut at a height, without what they carry above it.

A spar whose heel is not there yet is not there either, nor is a cable one of whose ends is not.  Anchors that hold no cable stay out, so
that nothing is said of them.  Initial tensions are those of the file: at every stage the crew sets them anew, in still air.
"""

from __future__ import annotations

from collections.abc import Mapping

from guys.scenario import frame
from guys.scenario.model import AnchorPoint, Cable, Case, HeelFoot, Scenario, Section, Spar, SparPoint
from guys.scenario.stage import Stage

STILL, WINDY = "still air", "wind"
"""Name of the one case of a stage."""


def part_built(scenario: Scenario, stage: Stage) -> Scenario:
    """The scenario of what is there at a stage, with one case: the stage's wind and temperature, every weight once, no ice."""
    there = standing({s.name: s for s in scenario.spar}, stage.heights(scenario.spar[0].name))
    spars = tuple(_cut(spar, there[spar.name]) for spar in scenario.spar if spar.name in there)
    fast = tuple(c for c in scenario.cable if _ends_there(c, there) and (stage.cables is None or c.name in stage.cables))
    held = {c.to.anchor for c in fast if isinstance(c.to, AnchorPoint)}
    wind = scenario.wind
    if wind is not None and stage.wind is not None:
        wind = wind.model_copy(update={"speed": stage.wind})
    temperature = scenario.setting.temperature if stage.temperature is None else stage.temperature
    case = Case(name=STILL if wind is None else WINDY, wind=0.0 if wind is None else 1.0, temperature=temperature)
    plumb = scenario.setting.plumb and any(c.tension is not None for c in fast)
    changed = {
        "spar": spars, "cable": fast, "anchor": tuple(a for a in scenario.anchor if a.name in held), "wind": wind, "case": (case,),
        "setting": scenario.setting.model_copy(update={"plumb": plumb}), "stage": (), "layouts": (),
    }  # fmt: skip
    return scenario.model_copy(update=changed)


def standing(spars: Mapping[str, Spar], up_to: Mapping[str, float]) -> dict[str, float]:
    """Length that stands of every spar that is there; heels must lead to spars of the file, and form no loop."""
    out: dict[str, float] = {}

    def built(name: str) -> float:
        spar = spars[name]
        height = min(up_to.get(name, spar.length), spar.length)
        if isinstance(spar.foot, HeelFoot) and not reaches(built(spar.foot.spar), spar.foot.at):
            height = 0.0
        return height

    for name in spars:
        if (height := built(name)) > 0:
            out[name] = height
    return out


def reaches(height: float, at: float) -> bool:
    """Whether a point of a spar is there: a spar that is not has no points, not even its foot."""
    return height > 0 and at <= height * (1 + frame.OVERSHOOT)


def _ends_there(cable: Cable, there: Mapping[str, float]) -> bool:
    return all(reaches(there.get(end.spar, 0.0), end.at) for end in (cable.from_, cable.to) if isinstance(end, SparPoint))


def _cut(spar: Spar, height: float) -> Spar:
    """The spar up to a length, with the fittings that are on it."""
    sections: list[Section] = []
    left = height
    for section in spar.section:
        if left <= frame.OVERSHOOT * height:
            break
        whole = section.length <= left * (1 + frame.OVERSHOOT)
        sections.append(section if whole else section.model_copy(update={"length": left}))
        left -= section.length
    fittings = tuple(f for f in spar.fitting if reaches(height, f.at))
    return spar.model_copy(update={"section": tuple(sections), "fitting": fittings})
