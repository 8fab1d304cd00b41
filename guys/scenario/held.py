"""Rules on holdfasts: nothing is presumed of the ground, nothing is read outside a published table, and no unit has slipped."""

from __future__ import annotations

import math
from collections.abc import Iterator
from itertools import combinations
from typing import TYPE_CHECKING

from guys import tables, units
from guys.constants import INCH
from guys.scenario.holding import Block, Deadman, Ground, Holdfast, Picket, Rock, Screw, Tested
from guys.scenario.keys import Finding, Key

if TYPE_CHECKING:
    from guys.scenario.draft import Draft
    from guys.scenario.model import Scenario

FOOT = float(12 * INCH)
SLENDEREST = {"log": 5.0, "timber": 9.0}
"""Greatest length of a deadman over its thickness or the height of its face (see `guys.holdfasts.deadman`)."""
STEEPEST_GROUND = math.radians(45.0)
APART = 3.0
"""Least distance between plates, in diameters of the lower one, at which each acts alone (common practice)."""
NOTHING_PRESUMED = "nothing is presumed of the ground"
SOILS = {
    "unit_weight": ("weight per volume", 5e3, 30e3),
    "cohesion": ("pressure", 1e3, 1e6),
    "torque": ("moment", 10.0, 1e6),
    "bond_stress": ("pressure", 1e4, 2e7),
    "rock_bond_stress": ("pressure", 1e4, 2e7),
    "tensile_stress": ("pressure", 1e3, 2e7),
    "bearing": ("pressure", 5e3, 5e7),
}
"""Key -> dimension, least and greatest value [SI] that ground, grout and shafts have (common practice); outside, a unit slipped."""


def findings(draft: Draft) -> Iterator[Finding]:
    """Every fault of the holdfasts."""
    for name, entry in draft.holdfast.items():
        key: Key = ("holdfast", name)
        if isinstance(entry, Block):
            yield from _block(entry, key)
        elif isinstance(entry, Deadman):
            yield from _deadman(entry, key)
        elif isinstance(entry, Picket):
            yield from _soil(entry, key, "picket")
        elif isinstance(entry, Screw):
            yield from _screw(entry, key)
        elif isinstance(entry, Rock):
            yield from _rock(entry, key)
        elif isinstance(entry, Tested):
            yield from _upward(entry.test_angle, (*key, "test_angle"))


def _slipped(table: object, key: Key) -> Iterator[Finding]:
    for name, (dimension, least, most) in SOILS.items():
        value = getattr(table, name, None)
        if value is not None and not least <= value <= most:
            bounds = f"{units.both(least, dimension)} to {units.both(most, dimension)}"
            yield Finding((*key, name), f"{units.both(value, dimension)} lies outside {bounds}; is the unit right?")


def _upward(angle: float | None, key: Key) -> Iterator[Finding]:
    if angle is not None and not 0.0 < angle <= math.pi / 2 * (1 + 1e-9):
        yield Finding(key, f"{units.show(angle, 'deg')} is not between level and upright; give the angle above the horizontal")


def _block(entry: Block, key: Key) -> Iterator[Finding]:
    yield from _slipped(entry, key)
    if entry.slope > STEEPEST_GROUND:
        yield Finding((*key, "slope"), f"{units.show(entry.slope, 'deg')} is steeper than ground that a block lies on; at most 45 deg")
    elif math.tan(entry.slope) >= entry.friction:
        text = f"a block with friction {entry.friction:g} slides by itself on a slope of {units.show(entry.slope, 'deg')}"
        yield Finding((*key, "slope"), text, ((*key, "friction"),))


def _soil(entry: Deadman | Picket, key: Key, kind: str) -> Iterator[Finding]:
    """Named, and in the published table as wet or dry as it is."""
    known = [row for row in tables.rows("holdfast_soils") if row["kind"] == kind]
    if entry.soil is None:
        names = ", ".join(f'"{name}"' for name in dict.fromkeys(row["soil"] for row in known))
        yield Finding((*key, "soil"), f"missing; {NOTHING_PRESUMED}: give soil as one of {names}, and wet = true where it is")
    elif (entry.soil, "yes" if entry.wet else "no") not in [(row["soil"], row["wet"]) for row in known]:
        yield Finding((*key, "wet"), f'no published factor for wet {entry.soil}; leave wet out, or test it and use kind = "tested"')


def _deadman(entry: Deadman, key: Key) -> Iterator[Finding]:
    yield from _soil(entry, key, "deadman")
    depths = [float(row["depth_ft"]) * FOOT for row in tables.rows("deadman")]
    if not depths[0] * (1 - 1e-9) <= entry.depth <= depths[-1] * (1 + 1e-9):
        bounds = f"{units.both(depths[0], 'length')} to {units.both(depths[-1], 'length')}"
        yield Finding((*key, "depth"), f"{units.both(entry.depth, 'length')} lies outside the published table, {bounds}")
    if entry.length <= FOOT:
        yield Finding((*key, "length"), f"{units.both(entry.length, 'length')} is no more than the foot that the cable's trench takes off")
    elif entry.length > SLENDEREST[entry.form] * entry.height * (1 + 1e-9):
        most = f"{SLENDEREST[entry.form]:g} times its face of {units.both(entry.height, 'length')}"
        text = f"{units.both(entry.length, 'length')} is more than {most}, the most for a {entry.form}: it bends before the ground gives"
        yield Finding((*key, "length"), text, ((*key, "height"), (*key, "form")))


def _screw(entry: Screw, key: Key) -> Iterator[Finding]:
    yield from _upward(entry.rod, (*key, "rod"))
    yield from _slipped(entry, key)
    if entry.soil is not None:
        yield from _slipped(entry.soil, (*key, "soil"))
    yield from _ground(entry, key)
    given = [name for name in ("square", "round") if entry.shaft is not None and getattr(entry.shaft, name) is not None]
    torque = entry.torque if entry.soil is None else entry.soil.torque
    if entry.shaft is None and torque is not None:
        yield Finding((*key, "shaft"), 'missing; torque needs the shaft: give shaft = { square = "38 mm" } or { round = "73 mm" }')
    elif entry.shaft is not None and len(given) != 1:
        yield Finding((*key, "shaft"), 'give one of square and round, such as { square = "38 mm" }')
    elif given == ["round"] and entry.shaft is not None:
        yield from _round_shaft(entry.shaft.round or 0.0, torque, (*key, "shaft", "round"))
    yield from _plates(entry, key)


def _round_shaft(size: float, torque: float | None, key: Key) -> Iterator[Finding]:
    most = max(float(row["diameter_in"]) for row in tables.rows("torque_factors") if row["diameter_in"]) * float(INCH)
    if torque is not None and size > most * (1 + 1e-9):
        yield Finding(
            key, f"{units.both(size, 'length')} is more than the published torque correlation reaches, {units.both(most, 'length')}"
        )


def _ground(entry: Screw, key: Key) -> Iterator[Finding]:
    """One of the three data."""
    soil = entry.soil or Ground()
    given = [name for name in ("friction_angle", "unit_weight", "cohesion", "torque") if getattr(soil, name) is not None]
    given += ["torque"] if entry.torque is not None else []
    if given not in (["friction_angle", "unit_weight"], ["cohesion"], ["torque"]):
        got = f"has {' and '.join(given)}" if given else f"missing; {NOTHING_PRESUMED}"
        text = f"{got}: give {{ friction_angle, unit_weight }} of sand, {{ cohesion }} of clay, or the torque it was turned in with"
        yield Finding((*key, "soil"), text, ((*key, "torque"),))
    angles = [math.radians(float(row["friction_angle_deg"])) for row in tables.rows("breakout")]
    if soil.friction_angle is not None and not angles[0] * (1 - 1e-9) <= soil.friction_angle <= angles[-1] * (1 + 1e-9):
        bounds = f"{units.show(angles[0], 'deg')} to {units.show(angles[-1], 'deg')}"
        yield Finding(
            (*key, "soil", "friction_angle"), f"{units.show(soil.friction_angle, 'deg')} lies outside the published table, {bounds}"
        )
    if soil.unit_weight is not None and entry.wet and soil.unit_weight <= 9806.65:
        yield Finding((*key, "soil", "unit_weight"), "no more than water; with wet = true give the whole weight of ground and water")


def _plates(entry: Screw, key: Key) -> Iterator[Finding]:
    widest = max(entry.helix)
    if entry.spacing is not None and len(entry.helix) > 1 and entry.spacing < APART * max(entry.helix[:-1]) * (1 - 1e-9):
        close = f"{units.both(entry.spacing, 'length')} is less than {APART:g} diameters"
        text = f"{close}: the plates do not act one by one; judge it by a test"
        yield Finding((*key, "spacing"), text, ((*key, "helix"),))
    gaps = [APART * d for d in entry.helix[:-1]] if entry.spacing is None else [entry.spacing] * (len(entry.helix) - 1)
    if entry.depth < widest:
        text = (
            f"{units.both(entry.depth, 'length')} is less than its plate's {units.both(widest, 'length')} across; is the unit right?"
        )
        yield Finding((*key, "depth"), text, ((*key, "helix"),))
    elif math.fsum(gaps) * (1.0 if entry.rod is None else math.sin(entry.rod)) > entry.depth:
        text = f"its uppermost plate, {units.both(math.fsum(gaps), 'length')} above the lowest, would stand out of the ground"
        yield Finding((*key, "depth"), text, ((*key, "helix"), (*key, "spacing")))


def _rock(entry: Rock, key: Key) -> Iterator[Finding]:
    yield from _upward(entry.rod, (*key, "rod"))
    yield from _slipped(entry, key)
    if (entry.hole is None) != (entry.rock_bond_stress is None):
        missing = "hole" if entry.hole is None else "rock_bond_stress"
        yield Finding((*key, missing), "missing; hole and rock_bond_stress go together")
    elif entry.hole is not None and entry.hole <= entry.bar:
        yield Finding((*key, "hole"), f"{units.both(entry.hole, 'length')} does not take a bar of {units.both(entry.bar, 'length')}")
    if entry.cone >= math.radians(80.0):
        yield Finding((*key, "cone"), f"{units.show(entry.cone, 'deg')} opens no cone; half its opening is 30 to 45 deg")


OPENING = math.radians(30.0)
"""How far the ground that a holdfast moves spreads, from the vertical: the frustum of earth of General Order 95, rule 48.5 (read)."""
PICKET_REACH = 0.5
"""Half the least distance between pickets of different holdfasts [m]: 1 m, Disaster Rescue (Australian Emergency Manual) 8.3 (read)."""
SHALLOW = 3.0
"""Depth of a screw's plate over its diameter below which published tests are few (common practice)."""
DENSITY = (500.0, 8000.0)
PUBLISHED_PICKETS = {"spacing": (3 * FOOT, 6 * FOOT), "driven": (3 * FOOT, 4 * FOOT)}


def warnings(scenario: Scenario) -> Iterator[str]:
    """What is unusual about the holdfasts, those that hold nothing among them."""
    used = {anchor.holdfast for layout in (scenario, *scenario.layouts) for anchor in layout.anchor}
    for name in scenario.holdfast:
        if name not in used and scenario.is_drawn:
            yield f'holdfast "{name}": no anchor is held by it'
    yield from unusual(scenario)


def unusual(scenario: Scenario) -> Iterator[str]:
    """What is unusual about the holdfasts, whether they hold an anchor or not."""
    for name, holdfast in scenario.holdfast.items():
        yield from _unusual(f'holdfast "{name}"', holdfast)
    yield from _crowded(scenario)


def _unusual(what: str, holdfast: Holdfast) -> Iterator[str]:
    if isinstance(holdfast, Block) and holdfast.length and holdfast.width and holdfast.height:
        density = holdfast.mass / (holdfast.length * holdfast.width * holdfast.height)
        if not DENSITY[0] <= density <= DENSITY[1]:
            yield f"{what}: its mass over its size is {units.both(density, 'density')}; is a unit wrong?"
    if isinstance(holdfast, Picket):
        for key, (least, most) in PUBLISHED_PICKETS.items():
            value = getattr(holdfast, key)
            if value is not None and not least * (1 - 1e-9) <= value <= most * (1 + 1e-9):
                bounds = f"{units.both(least, 'length')} to {units.both(most, 'length')}"
                yield f"{what}, {key}: {units.both(value, 'length')}; the published figures are for {bounds}"
    if isinstance(holdfast, Screw):
        if holdfast.depth < SHALLOW * max(holdfast.helix):
            yield f"{what}: its plate is less than {SHALLOW:g} diameters deep"
        if holdfast.wet and holdfast.torque is not None:
            yield f"{what}: the torque says what the ground was like when it was turned in; wet changes nothing"


def reach(holdfast: Holdfast) -> float:
    """Radius of the ground at the surface that gives way with a holdfast [m]; 0 where it lies on the ground or is not known."""
    if isinstance(holdfast, Deadman):
        return holdfast.length / 2 + holdfast.depth * math.tan(OPENING)
    if isinstance(holdfast, Screw):
        return max(holdfast.helix) / 2 + holdfast.depth * math.tan(OPENING)
    if isinstance(holdfast, Rock):
        return (holdfast.free_length + holdfast.bond_length / 2) * math.tan(holdfast.cone)
    return PICKET_REACH if isinstance(holdfast, Picket) else 0.0


def _crowded(scenario: Scenario) -> Iterator[str]:
    """Holdfasts so near each other that they share ground: together they hold less than each alone."""
    held = [(anchor, reach(scenario.holdfast[anchor.holdfast])) for anchor in scenario.anchor if anchor.holdfast is not None]
    for (one, r), (other, s) in combinations(held, 2):
        apart = math.hypot(one.east - other.east, one.north - other.north)
        if r > 0.0 and s > 0.0 and apart < r + s:
            near = f"{units.both(apart, 'length')} apart, share ground within {units.both(r + s, 'length')}"
            yield f'anchors "{one.name}" and "{other.name}": their holdfasts, {near}: together they hold less than each alone'
