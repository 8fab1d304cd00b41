"""Rules on stages: heights within the spars, cables whose ends are there, a wind to be a speed of.

Unknown names are told by `guys.scenario.names`.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping

from guys import units
from guys.scenario import frame, rigging
from guys.scenario.draft import Draft
from guys.scenario.keys import Finding, Key, clipped
from guys.scenario.model import HeelFoot, Spar
from guys.scenario.part_built import reaches, standing
from guys.scenario.stage import Stage


def findings(draft: Draft) -> Iterator[Finding]:
    """Every fault of the stages."""
    spars = {name: spar for name, (_, spar) in draft.spars().items()}
    for index, stage in enumerate(draft.stage):
        if stage is None:
            continue
        key: Key = ("stage", index)
        if stage.wind is not None and "wind" not in draft.document:
            yield Finding((*key, "wind"), "the file has no [wind], whose averaging time, height and profile this speed is of")
        if draft.spar and draft.spar[0] is not None:
            up_to = stage.heights(draft.spar[0].name)
            for name in [name for name in up_to if name in spars]:
                own: Key = (*key, "up_to", name) if isinstance(stage.up_to, Mapping) else (*key, "up_to")
                yield from frame.beyond(spars[name], up_to[name], own)
            if _all_known(draft, spars):
                yield from _there(draft, stage, standing(spars, up_to), key)


def _all_known(draft: Draft, spars: Mapping[str, Spar]) -> bool:
    """Whether every spar could be read and stands on the ground or on one that could."""
    led = all(spar.foot.spar in spars for spar in spars.values() if isinstance(spar.foot, HeelFoot))
    return led and len(spars) == len(draft.spar) and not frame.loops(draft)


def _there(draft: Draft, stage: Stage, there: Mapping[str, float], key: Key) -> Iterator[Finding]:
    after = ((*key, "up_to"),)
    if not there:
        yield Finding((*key, "up_to"), "nothing stands; give some spar a length")
        return
    points = rigging.cable_points(draft)
    for place, name in enumerate(stage.cables or ()):
        for point in points.get(name, ()):
            stands = there.get(point.spar, 0.0)
            if not reaches(stands, point.at):
                much = f"{units.both(stands, 'length')} of it stand" if stands > 0 else "which is not there"
                what = f'"{clipped(name)}" is made fast at {units.both(point.at, "length")} of spar "{clipped(point.spar)}"; {much}'
                yield Finding((*key, "cables", place), what, after)
