"""The tables [holdfast.NAME]: what is read, what is refused with what would do, what is warned about."""

from __future__ import annotations

import math
from typing import Any

import pytest
from toml_text import MAST, changed, dumps, dumps_tables

from guys.errors import ScenarioError
from guys.scenario import parse_scenario

BLOCK = {"kind": "block", "mass": "2000 kg", "friction": 0.5}
DEADMAN = {"kind": "deadman", "length": "1.8 m", "height": "0.3 m", "depth": "1.2 m", "soil": "loam"}
PICKET = {"kind": "picket", "pattern": "3-2-1", "soil": "loam"}
SCREW = {"kind": "screw", "helix": ["250 mm"], "depth": "1.5 m", "soil": {"friction_angle": "32 deg", "unit_weight": "18 kN/m3"}}
ROCK = {"kind": "rock", "bar": "25 mm", "bond_length": "1.0 m", "bond_stress": "1.0 MPa"}
TESTED = {"kind": "tested", "pull": "22 kN"}
Table = dict[str, Any]


def held(table: Table, **more: Any) -> Table:
    """The mast with one holdfast `h`, which holds its first anchor; `...` takes a key away."""
    whole = {key: value for key, value in {**table, **more}.items() if value is not ...}
    return changed(MAST, (("holdfast",), {"h": whole}), (("anchor", 0, "holdfast"), "h"))


def faults(document: Table) -> list[tuple[str, str]]:
    with pytest.raises(ScenarioError) as caught:
        parse_scenario(dumps(document))
    return [(fault.key, fault.message) for fault in caught.value.faults]


@pytest.mark.parametrize("table", [BLOCK, DEADMAN, PICKET, SCREW, ROCK, TESTED], ids=lambda t: t["kind"])
def test_every_kind_is_read_however_it_is_written(table: Table) -> None:
    for write in (dumps, dumps_tables):
        found = parse_scenario(write(held(table)))
        assert found.anchor[0].holdfast == "h"
        assert found.holdfast["h"].kind == table["kind"]


def test_values_are_in_si() -> None:
    screw = parse_scenario(dumps(held(SCREW))).holdfast["h"].model_dump(exclude_none=True)
    assert screw["soil"] == {"friction_angle": pytest.approx(math.radians(32)), "unit_weight": pytest.approx(18e3)}
    assert screw["helix"] == [0.25]
    block = parse_scenario(dumps(held(BLOCK, slope="5 deg", bearing="150 kPa", low=0.7, high=1.2))).holdfast["h"]
    assert (block.low, block.high, block.model_dump()["bearing"]) == (0.7, 1.2, 150e3)


REFUSED: list[tuple[str, Table, Table, str, str]] = [
    ("no kind", {}, {}, "holdfast.h", 'write kind as one of "block", "deadman"'),
    ("unknown kind", BLOCK, {"kind": "blok"}, "holdfast.h", 'write kind as one of "block", "deadman"'),
    ("lighter than nothing", BLOCK, {"mass": "-5 kg"}, "holdfast.h.mass", "is not more than zero"),
    ("weight for mass", BLOCK, {"mass": "20 kN"}, "holdfast.h.mass", "force where a mass belongs"),
    ("friction above 1", BLOCK, {"friction": 1.4}, "holdfast.h.friction", "at most 1"),
    ("slides by itself", BLOCK, {"slope": "30 deg"}, "holdfast.h.slope", "slides by itself"),
    ("a wall", BLOCK, {"slope": "50 deg"}, "holdfast.h.slope", "at most 45 deg"),
    ("spread upside down", BLOCK, {"low": 1.2}, "holdfast.h.low", "at most 1"),
    ("too deep", DEADMAN, {"depth": "2.5 m"}, "holdfast.h.depth", "outside the published table, 0.9144 m (3 ft) to 2.134 m (7 ft)"),
    ("too shallow", DEADMAN, {"depth": "0.8 m"}, "holdfast.h.depth", "outside the published table"),
    ("only trench", DEADMAN, {"length": "0.3 m"}, "holdfast.h.length", "the foot that the cable's trench takes off"),
    ("too slender", DEADMAN, {"length": "2.8 m"}, "holdfast.h.length", "more than 9 times its face"),
    ("a log too slender", DEADMAN, {"form": "log"}, "holdfast.h.length", "more than 5 times its face"),
    ("no soil", DEADMAN, {"soil": ...}, "holdfast.h.soil", 'give soil as one of "loam", "clay", "sand", "hardpan"'),
    ("wet hardpan", DEADMAN, {"soil": "hardpan", "wet": True}, "holdfast.h.wet", "no published factor for wet hardpan"),
    ("pickets in no soil", PICKET, {"soil": ...}, "holdfast.h.soil", 'give soil as one of "loam", "gravel", "sand"'),
    ("unknown pattern", PICKET, {"pattern": "4-3"}, "holdfast.h.pattern", '"4-3" is not one of "1", "1-1"'),
    ("screw in rock", SCREW, {"soil": "rock"}, "holdfast.h.soil", 'a screw does not go into rock; use kind = "rock"'),
    ("screw in loam", SCREW, {"soil": "loam"}, "holdfast.h.soil", "a name says too little of the ground"),
    ("screw in nothing", SCREW, {"soil": ...}, "holdfast.h.soil", "missing; nothing is presumed of the ground"),
    ("half a soil", SCREW, {"soil": {"friction_angle": "32 deg"}}, "holdfast.h.soil", "has friction_angle: give { friction_angle,"),
    ("two soils", SCREW, {"torque": "2 kN m", "shaft": {"square": "38 mm"}}, "holdfast.h.soil", "has friction_angle and unit_weight and"),
    ("cohesion slipped", SCREW, {"soil": {"cohesion": "50 MPa"}}, "holdfast.h.soil.cohesion", "is the unit right?"),
    (
        "unit weight slipped",
        SCREW,
        {"soil": {"friction_angle": "32 deg", "unit_weight": "18 N/m3"}},
        "holdfast.h.soil.unit_weight",
        "is the unit right?",
    ),
    (
        "angle in radians",
        SCREW,
        {"soil": {"friction_angle": "0.5 deg", "unit_weight": "18 kN/m3"}},
        "holdfast.h.soil.friction_angle",
        "outside the published table, 20 deg to 45 deg",
    ),
    ("torque without shaft", SCREW, {"soil": {"torque": "2 kN m"}}, "holdfast.h.shaft", "missing; torque needs the shaft"),
    ("square and round", SCREW, {"shaft": {"square": "38 mm", "round": "50 mm"}}, "holdfast.h.shaft", "give one of square and round"),
    ("plates too close", SCREW, {"helix": ["250 mm", "200 mm"], "spacing": "0.5 m"}, "holdfast.h.spacing", "less than 3 diameters"),
    ("plate out of the ground", SCREW, {"helix": ["250 mm"] * 4}, "holdfast.h.depth", "would stand out of the ground"),
    ("hardly in", SCREW, {"depth": "150 mm"}, "holdfast.h.depth", "less than its plate's"),
    ("rod downward", SCREW, {"rod": "-50 deg"}, "holdfast.h.rod", "give the angle above the horizontal"),
    ("bond slipped", ROCK, {"bond_stress": "1 Pa"}, "holdfast.h.bond_stress", "is the unit right?"),
    ("hole without bond", ROCK, {"hole": "50 mm"}, "holdfast.h.rock_bond_stress", "go together"),
    ("hole too small", ROCK, {"hole": "20 mm", "rock_bond_stress": "0.5 MPa"}, "holdfast.h.hole", "does not take a bar"),
    ("flat cone", ROCK, {"cone": "85 deg"}, "holdfast.h.cone", "opens no cone"),
    ("tested upward of upright", TESTED, {"test_angle": "120 deg"}, "holdfast.h.test_angle", "between level and upright"),
    ("nothing shown", TESTED, {"pull": "0 kN"}, "holdfast.h.pull", "not more than zero"),
    ("unknown key", TESTED, {"pul": "3 kN"}, "holdfast.h.pul", 'did you mean "pull"?'),
]  # fmt: skip


@pytest.mark.parametrize(("table", "more", "key", "says"), [row[1:] for row in REFUSED], ids=[row[0] for row in REFUSED])
def test_one_mistake_gives_one_fault(table: Table, more: Table, key: str, says: str) -> None:
    found = faults(held(table, **more))
    assert [each for each, _ in found] == [key], found
    assert says in found[0][1]


def test_an_anchor_held_by_nothing_known() -> None:
    found = faults(changed(held(BLOCK), (("anchor", 1, "holdfast"), "hh")))
    assert found == [("anchor[1].holdfast", 'no holdfast is named "hh"; did you mean "h"?')]


def warned(document: Table) -> tuple[str, ...]:
    return parse_scenario(dumps(document)).warnings


def test_a_faultless_holdfast_earns_no_warning() -> None:
    assert warned(held(DEADMAN)) == warned(MAST)


@pytest.mark.parametrize(
    ("table", "more", "says"),
    [
        (BLOCK, {"length": "1.2 m", "width": "1.2 m", "height": "60 mm"}, "its mass over its size is"),
        (PICKET, {"spacing": "5 m"}, "the published figures are for 0.9144 m (3 ft) to 1.829 m (6 ft)"),
        (PICKET, {"driven": "0.3 m"}, "the published figures are for 0.9144 m (3 ft) to 1.219 m (4 ft)"),
        (SCREW, {"depth": "0.6 m"}, "less than 3 diameters deep"),
        (SCREW, {"soil": ..., "torque": "2 kN m", "shaft": {"square": "38 mm"}, "wet": True}, "wet changes nothing"),
    ],
)
def test_what_is_unusual_is_warned_about(table: Table, more: Table, says: str) -> None:
    assert [each for each in warned(held(table, **more)) if says in each]


def test_a_holdfast_on_no_anchor_is_warned_about() -> None:
    assert 'holdfast "h": no anchor is held by it' in warned(changed(MAST, (("holdfast",), {"h": BLOCK})))


def test_holdfasts_that_share_ground_are_warned_about() -> None:
    """Two deadmen 1.8 m long and 1.2 m deep reach 1.59 m each; anchors 2 m apart share ground, 8 m apart they do not."""
    near = changed(
        held(DEADMAN),
        (("anchor", 1), {"name": "SE", "bearing": "14.4 deg", "radius": "8 m", "holdfast": "h"}),
    )
    assert [each for each in warned(near) if 'anchors "N" and "SE"' in each and "share ground" in each]
    far = changed(held(DEADMAN), (("anchor", 1, "holdfast"), "h"))
    assert not [each for each in warned(far) if "share ground" in each]
