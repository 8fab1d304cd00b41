"""Values that a slip of the unit would give are warned about, echoed in both systems; usual ones are not."""

from __future__ import annotations

from typing import Any

import pytest
from toml_text import BOOM, MAST, changed, dumps

from guys import parse_scenario

SECTION, LEVEL, ROPE = ("spar", 0, "section", 0), ("guy_level", 0), ("rope", "wire")
LIGHT = {"length": "700 m", "mass": "0.007 kg/m", "EA": "9 MN", "EI": "9 kN m2", "GJ": "9 kN m2", "width": "9 cm", "drag": 1.2}

UNUSUAL: list[tuple[str, dict[str, Any], list[tuple[tuple[str | int, ...], Any]], list[str]]] = [
    (
        "tall",
        MAST,
        [((*SECTION,), LIGHT)],
        ['spar "mast", length: 700 m (2297 ft) is more than 400 m', "mass per length: 0.007 kg/m (0.004704 lb/ft) is less than"],
    ),
    ("wind", MAST, [(("wind", "speed"), "200 m/s")], ["wind, speed: 200 m/s (447.4 mph) is more than 90 m/s"]),
    (
        "thick rope",
        MAST,
        [((*ROPE, "diameter"), "8 m")],
        ['rope "wire", diameter: 8000 mm (315 in) is more than 150 mm', "stiffness over", "mass over", "strength over"],
    ),
    (
        "overtight",
        MAST,
        [((*LEVEL, "tension"), "30 kN")],
        ['cable "9 m N", tension: 30 kN (6744 lbf) is 130 % of the strength of rope "wire"', "9 m SE", "9 m SW"],
    ),
    ("hot", MAST, [(("setting", "temperature"), "300 degC")], ["setting, temperature: 300 degC (572 degF) is more than 60 degC"]),
    ("ice", MAST, [(("ice",), {"thickness": "1 m"})], ["ice, thickness: 1000 mm (39.37 in) is more than 150 mm"]),
    ("idle anchor", MAST, [((*LEVEL, "to"), ["N", "SE"])], ['anchor "SW": no cable runs to it']),
    (
        "idle rope",
        MAST,
        [(("rope", "spare"), {"diameter": "6 mm", "mass": "0.15 kg/m", "stiffness": "1.4 MN"})],
        ['rope "spare": no cable is made of it'],
    ),
    (
        "parallel",
        BOOM,
        [(("cable", 1), {**BOOM["cable"][0], "name": "second"})],
        ['cable "second": runs between the same two points as "topping"'],
    ),
    ("length", BOOM, [(("cable", 0, "length"), "7 ft")], ['cable "topping", length: 2.134 m (7 ft) for a chord of']),
    ("steep", MAST, [(("anchor", 0, "radius"), "1 m")], ['cable "9 m N": 83.7 deg from the ground is steep']),
    ("flat", MAST, [(("anchor", 0, "radius"), "80 m")], ['cable "9 m N": 6.42 deg from the ground is flat']),
    (
        "lying",
        MAST,
        [(("spar", 0, "lean"), "85 deg"), (("spar", 0, "toward"), "180 deg")],
        ['spar "mast", lean: 85 deg from the vertical', "is flat", "flat", "flat"],
    ),
    ("factor", MAST, [(("allowables",), {"cable": 0.5})], ["allowables.cable: 0.5 is less than 1"]),
    ("case", MAST, [(("case",), [{"name": "a", "wind": 4}])], ['case "a", wind: a factor of 4 is more than 3']),
    (
        "no expansion",
        MAST,
        [
            (("material",), {"mine": {"density": "7850 kg/m3", "modulus": "210 GPa", "shear_modulus": "81 GPa"}}),
            ((*SECTION, "material"), "mine"),
            ((*ROPE, "expansion"), "12e-6 1/K"),
            (("case",), [{"name": "cold", "temperature": "-9 degC"}]),
        ],
        ['spar "mast", section 1: no expansion is known; its change of length with temperature is left out'],
    ),
]


@pytest.mark.parametrize(("document", "changes", "says"), [row[1:] for row in UNUSUAL], ids=[row[0] for row in UNUSUAL])
def test_unusual_values_are_warned_about(document: dict[str, Any], changes: list[Any], says: list[str]) -> None:
    warnings = parse_scenario(dumps(changed(document, *changes))).warnings
    assert len(warnings) == len(says), warnings
    for part in says:
        assert any(part in warning for warning in warnings), (part, warnings)


def test_usual_values_are_not() -> None:
    assert parse_scenario(dumps(MAST)).warnings == ()
