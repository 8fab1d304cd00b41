"""Every fault of `[raise]`: its key, what is said, and what the table waives for the rest of the file."""

from __future__ import annotations

from typing import Any

import pytest
from raisings import MAST, STANDING, WIND
from test_scenario_faults import told
from toml_text import changed, dumps_tables

from guys import parse_scenario

GIN, WINCH, SPAR = ("raise", "gin_pole"), ("raise", "winch"), ("spar", 0)
BOOM = {"name": "boom", "foot": {"spar": "mast", "at": "1 m"}, "rigid": True, "section": [{"length": "3 m", "mass": "5 kg/m"}]}
GUY = {"name": "guy", "from": {"spar": "mast", "at": "9 m"}, "to": {"anchor": "N"}, "rope": "wire", "tension": "500 N"}
ROPE = {"diameter": "6 mm", "mass": "0.15 kg/m", "stiffness": "1.4 MN"}
GUYED = (("cable",), [GUY]), (("anchor",), [{"name": "N", "bearing": "0 deg", "radius": "9 m"}]), (("rope",), {"wire": ROPE})

FAULTS: list[tuple[str, tuple[tuple[tuple[str | int, ...], Any], ...], str, str]] = [
    ("spar", ((("raise", "spar"), "mist"),), "raise.spar", 'no spar is named "mist"; did you mean "mast"?'),
    ("rope", ((("raise", "rope"), "wire"),), "raise.rope", 'no rope is named "wire"'),
    ("side guy", (*GUYED, (("raise", "side_guys"), ["gay"])), "raise.side_guys[0]", 'no cable is named "gay"; did you mean "guy"?'),
    ("side guy twice", (*GUYED, (("raise", "side_guys"), ["guy", "guy"])), "raise.side_guys[1]", 'cable "guy" is named twice'),
    ("fixed", (((*SPAR, "base"), "fixed"), ((*SPAR, "hinge_axis"), ...)), "spar[0].base", '"fixed" does not let the spar be tilted up'),
    ("pinned", (((*SPAR, "base"), "pinned"), ((*SPAR, "hinge_axis"), ...)), "raise.side_guys", "name side guys on both sides"),
    ("heel", ((("spar", 1), BOOM), (("raise", "spar"), "boom")), "raise.spar", 'spar "boom" stands on another spar'),
    ("beyond", ((("raise", "lift_at"), "13 m"),), "raise.lift_at", '13 m (42.65 ft) is beyond spar "mast"'),
    ("held beyond", ((("raise", "holding"), {"bearing": "90 deg", "radius": "9 m", "at": "13 m"}),), "raise.holding.at", "beyond spar"),
    ("hinge", ((("raise", "toward"), "80 deg"),), "raise.toward", "80 deg is not square to the hinge's axis, which runs along 0 deg"),
    (
        "lean out of the plane", (((*SPAR, "lean"), "10 deg"), ((*SPAR, "toward"), "0 deg")), "raise.toward",
        'is not in the plane in which spar "mast" leans, toward 0 deg',
    ),
    ("winch", (((*WINCH, "bearing"), "90 deg"),), "raise.winch", "the line would pull the spar down: the winch belongs on the far side"),
    ("winch above", (((*WINCH, "level"), "200 m"), (("raise", "angles"), ["5 deg"])), "raise.winch", "pull the spar down"),
    (
        "winch under the spar", ((GIN, STANDING), ((*WINCH, "bearing"), "90 deg")), "raise.winch",
        "it is under the spar",
    ),
    ("no foot", (((*GIN, "kind"), "standing"),), "raise.gin_pole.foot", 'missing; kind = "standing" has a foot of its own'),
    ("a foot", (((*GIN, "foot"), STANDING["foot"]),), "raise.gin_pole.foot", 'kind = "turning" stands on the spar\'s foot'),
    (
        "below the hinge", ((GIN, {**STANDING, "foot": {"east": "-1 m", "north": "0 m", "level": "-7 m"}}),), "raise.gin_pole.length",
        "its head is not above the hinge",
    ),
    (
        "short", ((GIN, {**STANDING, "length": "1 m", "foot": {"east": "10 m", "north": "0 m"}}), (("raise", "angles"), ["30 deg"])),
        "raise.gin_pole.length", "has no lever about the hinge where raising begins",
    ),
    ("angles in words", ((("raise", "angles"), "in 5 deg"),), "raise.angles", '"in 5 deg" is not a set of angles; write "every 5 deg"'),
    ("angles fall", ((("raise", "angles"), ["9 deg", "5 deg"]),), "raise.angles", "the angles do not rise from one to the next"),
    ("angle too far", ((("raise", "angles"), ["9 deg", "95 deg"]),), "raise.angles[1]", "95 deg is beyond 90 deg, where the spar is drawn"),
    ("step", ((("raise", "angles"), "every 95 deg"),), "raise.angles", "passes over the whole raising"),
    ("friction", ((("raise", "friction"), 1.0),), "raise.friction", "must be less than 1"),
    ("wind speed", ((("raise", "wind_speed"), "8 m/s"),), "raise.wind_speed", "needs [wind] for its averaging time"),
    (
        "wind speed scaled",
        ((("raise", "wind_speed"), "8 m/s"), (("wind",), {**WIND, "return_period": {"years": 10, "source": "permit"}})),
        "raise.wind_speed", "wind.return_period would change it too",
    ),
    (
        "drag in wind", ((("wind",), WIND), ((*SPAR, "section", 0, "drag"), ...), (("case",), [{"name": "still", "wind": 0.0}])),
        "spar[0].section[0].drag", 'case "raise" has wind',
    ),
    ("unknown key", ((("raise", "winsh"), "a"),), "raise.winsh", 'unknown key; did you mean "winch"?'),
    ("uneven", (((*SPAR, "section", 0, "EI_x"), "9 kN m2"), ((*SPAR, "section", 0, "EI_y"), "8 kN m2")), "raise.toward", "and EI_y differ"),
]  # fmt: skip


@pytest.mark.parametrize(("changes", "key", "words"), [f[1:] for f in FAULTS], ids=[f[0] for f in FAULTS])
def test_fault(changes: tuple[tuple[tuple[str | int, ...], Any], ...], key: str, words: str) -> None:
    found = told(MAST, *changes)
    assert [k for k, _ in found] == [key], found
    assert words in found[0][1]


def test_faults_are_told_together() -> None:
    found = told(MAST, (("raise", "spar"), "mist"), (("raise", "rope"), "wire"), ((*GIN, "foot"), STANDING["foot"]))
    assert {k for k, _ in found} == {"raise.spar", "raise.rope", "raise.gin_pole.foot"}


def test_a_file_for_raising_needs_neither_wind_nor_cables() -> None:
    scenario = parse_scenario(dumps_tables(MAST))
    assert [(case.name, case.wind) for case in scenario.case] == [("design", 0.0)]
    windy = told(MAST, (("case",), [{"name": "gale"}]))
    assert [key for key, _ in windy] == ["wind"]


def test_with_wind_the_default_case_is_in_it() -> None:
    assert parse_scenario(dumps_tables(changed(MAST, (("wind",), WIND)))).case[0].wind == 1.0
