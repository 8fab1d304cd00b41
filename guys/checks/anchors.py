"""Anchors: what holds each, along the pull of each case, over that pull.

    demand    the resultant of all that pulls on the anchor
    capacity  the low value of its holdfast along that pull's direction: of what it may hold the least is judged, the best and the high
              value stand beside it in words

Holding depends on the direction, so the worst case is that of the least factor, which need not be that of the greatest pull.  Where the
holdfast is not judged in a direction (a downward pull on a deadman) and all cables of the anchor are slack, what hangs there is no demand.
An anchor without a holdfast is reported and not judged.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping

import numpy as np
from numpy.typing import NDArray

from guys import holdfasts
from guys.checks.items import Demands, Item, group
from guys.recovery import Forces
from guys.rotation import Array
from guys.scenario import Scenario
from guys.scenario.holding import Holdfast
from guys.scenario.model import AnchorPoint
from guys.structure import Structure

NOTHING = "no holdfast given: what holds it is not checked"
USUAL = math.radians(45.0)
"""A pull at which a holdfast is asked what it lacks and how far its values spread; both are the same for all pulls, or nearly."""


def demands(structure: Structure, forces: Forces) -> Demands:
    """Holding against pull, one item an anchor."""
    scenario = structure.scenario
    pull = np.linalg.norm(forces.pull, axis=-1)
    capacity, mode = np.full(pull.shape, np.nan), np.full(pull.shape, -1)
    hanging, default = idle(scenario, forces), "anchor" in scenario.allowables.defaulted
    items = []
    for k, anchor in enumerate(scenario.anchor):
        thing = f"anchor {anchor.name}"
        if anchor.holdfast is None:
            items.append(Item(thing, "pull", "N", "", NOTHING, default=default, allowable="anchor"))
            continue
        holdfast = scenario.holdfast[anchor.holdfast]
        found = holdfasts.of(holdfast, angle(forces.pull[:, k]))
        capacity[:, k], mode[:, k] = found.low, found.mode
        pull[:, k] = np.where(hanging[:, k] & np.isnan(found.low) & ~np.isnan(pull[:, k]), 0.0, pull[:, k])
        why, lacking = f"{anchor.holdfast} over pull{_range(holdfast)}", f"{anchor.holdfast} is not judged in this direction"
        items.append(Item(thing, "pull", "N", why, lacking, found.source, default, modes=found.modes, allowable="anchor"))
    return group(items, pull, capacity, scenario.allowables.anchor, mode)


def angle(pull: Array) -> Array:
    """Angle of pulls (case, 3) above the horizontal [rad]."""
    return np.asarray(np.arctan2(pull[:, 2], np.hypot(pull[:, 0], pull[:, 1])))


def _range(holdfast: Holdfast) -> str:
    """Where best and high stand above the low value that is judged, where they do."""
    found = holdfasts.of(holdfast, np.array([USUAL]))
    best, high = float(found.best[0] / found.low[0]), float(found.high[0] / found.low[0])
    return f", its low value; best {best:.3g} and high {high:.3g} times that" if best > 1.0 or high > 1.0 else ""


def idle(scenario: Scenario, forces: Forces) -> NDArray[np.bool_]:
    """(case, anchor) where every cable of the anchor is slack or taken away."""
    ends = [c.to.anchor if isinstance(c.to, AnchorPoint) else None for c in scenario.cable]
    pulling = forces.present & ~forces.slack
    columns = [~pulling[:, [k for k, end in enumerate(ends) if end == a.name]].any(axis=1) for a in scenario.anchor]
    return np.array(columns, dtype=bool).reshape(len(scenario.anchor), len(pulling)).T


def unchecked(scenario: Scenario) -> Iterator[str]:
    """What is not looked at of what holds the anchors, in words."""
    bare = [anchor.name for anchor in scenario.anchor if anchor.holdfast is None]
    if bare:
        yield f"what holds {', '.join(bare)}: no holdfast given"
    yield from lacking(used(scenario))


def used(scenario: Scenario) -> dict[str, Holdfast]:
    """The holdfasts that hold an anchor, in the order of the anchors."""
    return {anchor.holdfast: scenario.holdfast[anchor.holdfast] for anchor in scenario.anchor if anchor.holdfast is not None}


def assumptions(scenario: Scenario, pull: Array) -> Iterator[str]:
    """What was taken for granted of the holdfasts under the pulls (case, anchor, 3) found, in words."""
    for name, holdfast in used(scenario).items():
        on_it = [k for k, anchor in enumerate(scenario.anchor) if anchor.holdfast == name]
        yield from granted(name, holdfast, angle(pull[:, on_it].reshape(-1, 3)))


def granted(name: str, holdfast: Holdfast, angles: Array) -> Iterator[str]:
    """What is taken for granted of a holdfast under pulls at those angles (case,) [rad], NaN where there is none, in words."""
    if notes := holdfasts.of(holdfast, angles[~np.isnan(angles)]).notes:
        yield f"holdfast {name}: {'; '.join(notes)}"


def lacking(table: Mapping[str, Holdfast]) -> Iterator[str]:
    """The ways of giving way of holdfasts that are not looked at for want of data, in words."""
    for name, holdfast in table.items():
        if ways := holdfasts.of(holdfast, np.array([USUAL])).unjudged:
            yield f"holdfast {name}: {'; '.join(ways)}"
    rods = [name for name, holdfast in table.items() if holdfast.rod_strength is None and holdfast.kind != "tested"]
    if rods:
        yield f"rod, eye or strap of {', '.join(rods)} (give rod_strength)"
