"""Rules on `[raise]`: that the spar can be tilted up as told, and that what it names is there."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping

from guys import units
from guys.scenario import frame, rigging, tilted
from guys.scenario.draft import Draft
from guys.scenario.keys import Finding, Key, clipped, items, nearest
from guys.scenario.model import AnchorPoint, HeelFoot, Spar
from guys.scenario.raising import Raising

RAISE: Key = ("raise",)


def findings(draft: Draft) -> Iterator[Finding]:
    """Every fault of the raising."""
    raising = draft.raising
    if raising is None:
        return
    yield from _side_guys(draft, raising)
    yield from _gin_pole(raising)
    if raising.wind_speed is not None and "wind" not in draft.document:
        yield Finding((*RAISE, "wind_speed"), "needs [wind] for its averaging time, height, profile and directions; give [wind]")
    yield from _scaled(draft, raising)
    found = draft.spars().get(raising.spar)
    if found is None:
        if len(draft.spars()) == len(draft.spar):
            yield _unknown((*RAISE, "spar"), "spar", raising.spar, draft.spars())
        return
    yield from _spar(found[1], ("spar", found[0]), raising)
    if not isinstance(found[1].foot, HeelFoot):
        yield from _held_sideways(draft, found[1], raising)


def _scaled(draft: Draft, raising: Raising) -> Iterator[Finding]:
    """A speed chosen to raise in is what it is: chances and seasons that lower the reference speed have no say in it."""
    given = [name for name in ("return_period", "season", "duration") if getattr(draft.wind, name, None) is not None]
    if raising.wind_speed is not None and given:
        text = f"wind.{given[0]} would change it too; raise from a file whose [wind] leaves {' and '.join(given)} out"
        yield Finding((*RAISE, "wind_speed"), text)


def _unknown(key: Key, kind: str, name: str, known: Mapping[str, object]) -> Finding:
    return Finding(key, f'no {kind} is named "{clipped(name)}"' + (nearest(name, known) if known else f"; the file has no {kind}"))


def _side_guys(draft: Draft, raising: Raising) -> Iterator[Finding]:
    known = dict(_guys(draft))
    whole = all(entry is not None for entry in (*draft.guy_level, *draft.cable))
    for place, name in enumerate(raising.side_guys):
        key: Key = (*RAISE, "side_guys", place)
        if name in raising.side_guys[:place]:
            yield Finding(key, f'cable "{clipped(name)}" is named twice')
        elif name not in known:
            if whole:
                yield _unknown(key, "cable", name, known)
        elif known[name][0] != raising.spar or known[name][1] is None:
            yield Finding(key, f'cable "{clipped(name)}" does not run from spar "{clipped(raising.spar)}" to an anchor')


def _guys(draft: Draft) -> Iterator[tuple[str, tuple[str, str | None]]]:
    """Cables by name: the spar they leave and the anchor they run to (None: to another spar)."""
    for index, text in items(draft.document, "guy_level"):
        level = draft.guy_level[index]
        if level is not None:
            head = level.name or " ".join(str(text.get("at")).split())
            yield from ((f"{head} {name}", (level.spar, name)) for name in level.to)
    for cable in draft.cable:
        if cable is not None:
            yield cable.name, (cable.from_.spar, cable.to.anchor if isinstance(cable.to, AnchorPoint) else None)


def _held_sideways(draft: Draft, spar: Spar, raising: Raising) -> Iterator[Finding]:
    """A pinned spar falls to the side of its plane unless guys on both sides are fast."""
    if spar.base != "pinned":
        return
    places, known = rigging.placed_anchors(draft), dict(_guys(draft))
    anchors = [known[name][1] for name in raising.side_guys if name in known]
    across = [tilted.in_plane(places[a], spar, raising)[2] for a in anchors if a in places]
    if not (any(side > rigging.SAME_PLACE for side in across) and any(side < -rigging.SAME_PLACE for side in across)):
        text = 'base = "pinned" tilts sideways too; name side guys on both sides of the spar, or write base = "hinged"'
        yield Finding((*RAISE, "side_guys"), text, (("anchor",), ("cable",), ("guy_level",), ("spar",)))


def _gin_pole(raising: Raising) -> Iterator[Finding]:
    pole, key = raising.gin_pole, (*RAISE, "gin_pole")
    if pole.kind == "standing" and pole.foot is None:
        text = 'missing; kind = "standing" has a foot of its own, such as foot = { east = "0 m", north = "0 m", level = "0 m" }'
        yield Finding((*key, "foot"), text, ((*key, "kind"),))
    for name in ("foot", "backstay"):
        if pole.kind == "turning" and getattr(pole, name) is not None:
            text = f'kind = "turning" stands on the spar\'s foot and has no {name} of its own; write kind = "standing" or leave it out'
            yield Finding((*key, name), text, ((*key, "kind"),))


def _spar(spar: Spar, key: Key, raising: Raising) -> Iterator[Finding]:
    if isinstance(spar.foot, HeelFoot):
        yield Finding((*RAISE, "spar"), f'spar "{clipped(spar.name)}" stands on another spar; only one on the ground is raised')
        return
    if spar.base not in ("hinged", "pinned"):
        text = f'base = "{spar.base}" does not let the spar be tilted up; write base = "hinged", or "pinned" with side guys on both sides'
        yield Finding((*key, "base"), text)
    yield from frame.beyond(spar, raising.lift_at, (*RAISE, "lift_at"))
    if raising.holding is not None and raising.holding.at is not None:
        yield from frame.beyond(spar, raising.holding.at, (*RAISE, "holding", "at"))
    yield from _in_plane(spar, key, raising)
    yield from _levers(spar, raising)


def _in_plane(spar: Spar, key: Key, raising: Raising) -> Iterator[Finding]:
    """The spar turns about an axis square to where it lies, and where it is drawn lies in that plane."""
    along = tilted.lying(raising)
    bearing = tilted.degrees(raising.toward)
    if spar.base == "hinged":
        axis = spar.hinge_axis if spar.hinge_axis is not None else spar.toward + math.pi / 2
        if abs(math.cos(axis - raising.toward)) > tilted.SQUARE:
            text = f"{bearing} is not square to the hinge's axis, which runs along {tilted.degrees(axis)}"
            yield Finding((*RAISE, "toward"), text, ((*key, "hinge_axis"), (*key, "toward")))
    drawn = tilted.drawn_axis(spar)
    if abs(drawn[0] * along[1] - drawn[1] * along[0]) > tilted.SQUARE:
        text = f'{bearing} is not in the plane in which spar "{clipped(spar.name)}" leans, toward {tilted.degrees(spar.toward)}'
        yield Finding((*RAISE, "toward"), text, ((*key, "lean"), (*key, "toward")))
    uneven = any(section.EI_x != section.EI_y for section in spar.section)
    if uneven and abs(math.sin(spar.toward - raising.toward)) > tilted.SQUARE:
        text = (
            f"EI_x and EI_y differ and are about axes set out from spar.toward, {tilted.degrees(spar.toward)}; raise it along that bearing"
        )
        yield Finding((*RAISE, "toward"), text)
    last = tilted.last_angle(spar, raising)
    if isinstance(raising.angles, list) and raising.angles[-1] > last + tilted.SQUARE:
        text = f"{tilted.degrees(raising.angles[-1])} is beyond {tilted.degrees(last)}, where the spar is drawn"
        yield Finding((*RAISE, "angles", len(raising.angles) - 1), text)


def _levers(spar: Spar, raising: Raising) -> Iterator[Finding]:
    """The line that lifts has a lever about the hinge, on the right side, from the first stage on."""
    pole, key = raising.gin_pole, (*RAISE, "gin_pole")
    winch = tilted.in_plane(tilted.place(spar, raising.winch), spar, raising)
    first = raising.stages(tilted.last_angle(spar, raising))[0]
    if pole.kind == "turning":
        if winch[0] >= 0.0 or tilted.lever_lost(spar, raising) <= first:
            away = tilted.degrees(raising.toward + math.pi)
            yield Finding(
                (*RAISE, "winch"), f"the line would pull the spar down: the winch belongs on the far side of the foot, about {away}"
            )
        return
    if pole.foot is None:
        return
    foot = tilted.in_plane((pole.foot.east, pole.foot.north, pole.foot.level), spar, raising)
    if foot[1] + pole.length <= 0.0:
        yield Finding((*key, "length"), "its head is not above the hinge, so the line cannot lift; give a longer gin pole")
    elif tilted.lever_lost(spar, raising) <= first:
        yield Finding((*key, "length"), "the line from its head has no lever about the hinge where raising begins; give a longer gin pole")
    if foot[0] < winch[0] < spar.length and abs(winch[2]) < tilted.BESIDE * spar.length:
        yield Finding((*RAISE, "winch"), f"it is under the spar; the line runs over the gin pole's head and down on the far side, "
                      f"{units.both(-foot[0], 'length')} or more behind the hinge" if foot[0] < 0 else "it is under the spar")  # fmt: skip
