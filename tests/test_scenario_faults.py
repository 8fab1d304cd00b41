"""Every fault of a file: its key, its line, what is said, and that one fault hides no other."""

from __future__ import annotations

import re
from pathlib import Path
from typing import Any

import pytest
from toml_text import BOOM, MAST, changed, dumps, dumps_tables

from guys import parse_scenario, read_scenario
from guys.errors import Fault, ScenarioError

Change = tuple[tuple[str | int, ...], Any]
SPAR, SECTION, FITTING, LEVEL, ROPE = ("spar", 0), ("spar", 0, "section", 0), ("spar", 0, "fitting", 0), ("guy_level", 0), ("rope", "wire")
OUTRIGHT = {"length": "12 m", "mass": "9 kg/m", "EA": "180 MN", "EI": "160 kN m2", "GJ": "120 kN m2", "width": "89 mm", "drag": 1.2}


def _without(key: str) -> dict[str, Any]:
    return {name: value for name, value in OUTRIGHT.items() if name != key}


ICED_CASE: tuple[Change, ...] = ((("case",), [{"name": "frost", "ice": 1.0}]), (("ice",), {"thickness": "10 mm"}))
PROFILE = ("wind", "profile")
HILL = {"shape": "hill", "height": "20 m", "half_length": "100 m"}
FITTING_ICED: tuple[Change, ...] = (((*FITTING, "iced_mass"), "20 kg"), ((*FITTING, "iced_area"), "0.5 m2"))


def faults_of(text: str) -> tuple[Fault, ...]:
    with pytest.raises(ScenarioError) as caught:
        parse_scenario(text, "test.toml")
    return caught.value.faults


def told(document: dict[str, Any], *changes: Change) -> list[tuple[str, str]]:
    return [(fault.key, fault.message) for fault in faults_of(dumps_tables(changed(document, *changes)))]


ONE_FAULT: list[tuple[str, dict[str, Any], tuple[Change, ...], str, str]] = [
    # quantities
    ("bare number", MAST, (((*LEVEL, "at"), 17),), "guy_level[0].at", '17 has no unit; write "17 m" or "17 ft"'),
    ("bare text", MAST, (((*LEVEL, "at"), "17"),), "guy_level[0].at", '"17" has no unit; write "17 m" or "17 ft"'),
    ("bare angle", MAST, (((*SPAR, "lean"), 0),), "spar[0].lean", '0 has no unit; write "0 deg" or "0 rad"'),
    ("comma", MAST, (((*LEVEL, "at"), "9,5 m"),), "guy_level[0].at", '"9,5 m" has a decimal comma; write "9.5 m"'),
    (
        "dimension",
        MAST,
        (((*LEVEL, "tension"), "3 kg"),),
        "guy_level[0].tension",
        '"3 kg" is a mass where a force belongs; that is written in kgf',
    ),
    ("dimension named", MAST, (((*LEVEL, "at"), "3 kN"),), "guy_level[0].at", '"3 kN" is a force where a length belongs'),
    ("not a number", MAST, (((*LEVEL, "tension"), float("nan")),), "guy_level[0].tension", "nan is not a finite number"),
    ("infinite", MAST, (((*SECTION, "drag"), float("inf")),), "spar[0].section[0].drag", "inf will not do; a finite number belongs here"),
    ("text for ratio", MAST, (((*SECTION, "drag"), "1.2"),), "spar[0].section[0].drag", '"1.2" will not do; a bare number belongs here'),
    ("truth for ratio", MAST, (((*SECTION, "drag"), True),), "spar[0].section[0].drag", "true will not do; a bare number belongs here"),
    ("truth for quantity", MAST, (((*SECTION, "length"), True),), "spar[0].section[0].length", "true is not a length"),
    ("list for quantity", MAST, (((*SECTION, "length"), ["1 m"]),), "spar[0].section[0].length", "a list is not a length"),
    ("zero length", MAST, (((*SECTION, "length"), "0 m"),), "spar[0].section[0].length", '"0 m" is not more than zero'),
    ("negative", MAST, (((*LEVEL, "at"), "-1 m"),), "guy_level[0].at", '"-1 m" is negative'),
    ("absolute zero", MAST, ((("setting", "temperature"), "-300 degC"),), "setting.temperature", "is below absolute zero"),
    ("negative factor", MAST, ((("case",), [{"name": "a", "wind": -1}]),), "case[0].wind", "-1 will not do; it must be at least 0"),
    # keys and shapes
    ("unknown key", MAST, (((*LEVEL, "tenson"), "1 kN"),), "guy_level[0].tenson", 'unknown key; did you mean "tension"?'),
    ("unknown table", MAST, ((("winds",), {"speed": "1 m/s"}),), "winds", 'unknown key; did you mean "wind"?'),
    ("nothing near", MAST, ((("wind", "zzz"), 1),), "wind.zzz", "unknown key; known: speed, averaging, height"),
    ("key missing", MAST, ((("wind", "speed"), ...),), "wind.speed", 'missing; give speed = "..." as a speed, in m/s or mph'),
    ("name missing", MAST, (((*SPAR, "name"), ...),), "spar[0].name", "missing"),
    ("literal", MAST, (((*SPAR, "base"), "hinge"),), "spar[0].base", 'did you mean "hinged"?'),
    ("table for list", MAST, ((("anchor",), {"name": "N"}),), "anchor", "one table stands here; write [[anchor]]"),
    ("empty name", MAST, (((*FITTING, "name"), ""),), "spar[0].fitting[0].name", "text in quotes belongs here"),
    ("name with newline", MAST, (((*FITTING, "name"), "a\nb"),), "spar[0].fitting[0].name", "on one line"),
    ("title missing", MAST, ((("title",), ...),), "title", 'missing; the file needs title = "..."'),
    ("rope not a table", MAST, (((*ROPE,), "6 mm"),), "rope.wire", '"6 mm" will not do; a table belongs here'),
    # names and references
    ("spar twice", BOOM, ((("spar", 1, "name"), "mast"), (("cable",), [])), "spar[1].name", 'another spar is named "mast"'),
    (
        "anchor twice",
        MAST,
        ((("anchor", 3), {"name": "N", "bearing": "9 deg", "radius": "9 m"}),),
        "anchor[3].name",
        'another anchor is named "N"',
    ),
    ("case twice", MAST, ((("case",), [{"name": "a"}, {"name": "a"}]),), "case[1].name", 'another case is named "a"'),
    (
        "fitting twice",
        MAST,
        (((*SPAR, "fitting", 1), {"name": "panel", "at": "1 m", "mass": "1 kg"}),),
        "spar[0].fitting[1].name",
        "another fitting",
    ),
    ("cable twice", BOOM, ((("cable", 0, "name"), "9 m N"),), "cable[0].name", 'another cable is named "9 m N"'),
    ("setting taken", MAST, ((("case",), [{"name": "setting"}]),), "case[0].name", "is the name of the still-air case"),
    ("unknown spar", MAST, (((*LEVEL, "spar"), "mats"),), "guy_level[0].spar", 'no spar is named "mats"; did you mean "mast"?'),
    ("unknown anchor", MAST, (((*LEVEL, "to", 1), "Q"),), "guy_level[0].to[1]", 'no anchor is named "Q"; known: N, SE, SW'),
    ("anchor named twice", MAST, (((*LEVEL, "to", 1), "N"),), "guy_level[0].to[1]", 'anchor "N" is named twice'),
    ("unknown rope", MAST, (((*LEVEL, "rope"), "wires"),), "guy_level[0].rope", 'no rope is named "wires"; did you mean "wire"?'),
    (
        "rope near one of the catalogue",
        MAST,
        (((*LEVEL, "rope"), "strand-ehs-1/4in"),),
        "guy_level[0].rope",
        'no rope is named "strand-ehs-1/4in"; did you mean "strand-1x7-ehs-1/4in"?',
    ),
    (
        "catalogue rope of a diameter not made",
        MAST,
        (((*LEVEL, "rope"), "steel-7x7-600mm"),),
        "guy_level[0].rope",
        "steel-7x7 is made from 1.5mm to 60mm, of grade 1570, 1770, 1960",
    ),
    (
        "fibre rope of a diameter not made",
        MAST,
        (((*LEVEL, "rope"), "polyester-1in4"),),
        "guy_level[0].rope",
        "polyester is made from 4mm to 48mm: such as polyester-12mm",
    ),
    (
        "catalogue rope without expansion in a warm case",
        MAST,
        (((*LEVEL, "rope"), "polyester-12mm"), (("case",), [{"name": "summer", "temperature": "40 degC", "wind": 0.0}])),
        "guy_level[0].rope",
        'no thermal expansion of "polyester-12mm" is known, and case "summer" is not at the setting\'s temperature; give a [rope.NAME]',
    ),
    ("unknown material", MAST, (((*SECTION, "material"), "stel"),), "spar[0].section[0].material", 'did you mean "steel"?'),
    ("unknown carrier", BOOM, ((("spar", 1, "foot", "spar"), "maat"),), "spar[1].foot.spar", 'did you mean "mast"?'),
    (
        "unknown cable",
        MAST,
        ((("case",), [{"name": "a", "without": ["9 m M"]}]),),
        "case[0].without[0]",
        'no cable is named "9 m M"; did you mean "9 m N"?',
    ),
    ("unknown end", BOOM, ((("cable", 0, "to"), {"anchor": "X"}),), "cable[0].to.anchor", 'no anchor is named "X"'),
    # spars
    ("tube without material", MAST, (((*SECTION, "material"), ...),), "spar[0].section[0].material", "missing; a tube needs one"),
    ("tube and outright", MAST, (((*SECTION, "EI"), "1 kN m2"),), "spar[0].section[0].EI", "follows from the tube"),
    ("thick wall", MAST, (((*SECTION, "tube", "wall"), "50 mm"),), "spar[0].section[0].tube.wall", "more than half the diameter"),
    (
        "nothing given",
        MAST,
        (((*SECTION,), {"length": "12 m", "width": "9 cm", "drag": 1}),),
        "spar[0].section[0]",
        "lacks mass, EA, GJ, EI (or EI_x and EI_y)",
    ),
    ("no stiffness", MAST, (((*SECTION,), {**OUTRIGHT, "EA": "1 MN"}), ((*SECTION, "GJ"), ...)), "spar[0].section[0]", "lacks GJ"),
    ("both bendings", MAST, (((*SECTION,), {**OUTRIGHT, "EI_x": "1 kN m2"}),), "spar[0].section[0].EI", "EI stands beside EI_x or EI_y"),
    ("half a bending", MAST, (((*SECTION,), {**OUTRIGHT, "EI_x": "1 kN m2"}), ((*SECTION, "EI"), ...)), "spar[0].section[0]", "lacks EI_y"),
    ("no width in wind", MAST, (((*SECTION,), OUTRIGHT), ((*SECTION, "width"), ...)), "spar[0].section[0].width", 'case "design" has wind'),
    (
        "fitting beyond",
        MAST,
        (((*FITTING, "at"), "12.1 m"),),
        "spar[0].fitting[0].at",
        '12.1 m (39.7 ft) is beyond spar "mast", which is 12 m',
    ),
    ("guys beyond", MAST, (((*LEVEL, "at"), "13 m"),), "guy_level[0].at", 'beyond spar "mast"'),
    ("heel beyond", BOOM, ((("spar", 1, "foot", "at"), "13 m"),), "spar[1].foot.at", 'beyond spar "mast"'),
    ("flat without face", MAST, (((*FITTING, "shape"), "flat"),), "spar[0].fitting[0].face", "needs the bearing of its normal"),
    ("face without flat", MAST, (((*FITTING, "face"), "9 deg"),), "spar[0].fitting[0].face", 'write shape = "flat"'),
    ("drag without area", MAST, (((*FITTING, "area"), ...),), "spar[0].fitting[0].area", "missing; drag is given for it"),
    ("sprung without", MAST, (((*SPAR, "base"), "sprung"),), "spar[0].base_stiffness", 'missing; base = "sprung" needs it'),
    ("stiff but pinned", MAST, (((*SPAR, "base_stiffness"), "5 kN m/rad"),), "spar[0].base_stiffness", 'base = "pinned" has no stiffness'),
    ("axis but pinned", MAST, (((*SPAR, "hinge_axis"), "5 deg"),), "spar[0].hinge_axis", 'base = "pinned" has no axis'),
    ("friction of a heel", BOOM, ((("spar", 1, "friction"), 0.4),), "spar[1].friction", "a heel does not slide"),
    ("carries itself", BOOM, ((("spar", 1, "foot", "spar"), "boom"),), "spar[1].foot.spar", "a spar cannot carry itself"),
    (
        "loop",
        BOOM,
        (((*SPAR, "foot"), {"spar": "boom", "at": "1 m"}),),
        "spar[0].foot.spar",
        'spars carry each other in a loop: "mast" on "boom" on "mast"',
    ),
    ("nothing holds it", MAST, ((("guy_level",), []), (("rope",), {})), "spar[0].base", "nothing holds the structure up"),
    (
        "nothing holds it, hinged",
        MAST,
        ((("guy_level",), []), ((*SPAR, "base"), "hinged")),
        "spar[0].base",
        "nothing holds the structure up",
    ),
    # cables and anchors
    ("no tension", MAST, (((*LEVEL, "tension"), ...),), "guy_level[0]", "has none of them; give one of tension, length, tight = true"),
    ("two tensions", MAST, (((*LEVEL, "length"), "12 m"),), "guy_level[0]", "has tension and length; give one of"),
    ("tight is false", BOOM, ((("cable", 0, "tight"), False),), "cable[0].tight", "false says nothing"),
    ("half a place", MAST, ((("anchor", 0, "radius"), ...),), "anchor[0]", "has bearing; give bearing and radius, or east and north"),
    ("no place", MAST, ((("anchor", 0), {"name": "N"}),), "anchor[0]", "has no place"),
    ("two places", MAST, ((("anchor", 0, "east"), "1 m"),), "anchor[0]", "has bearing and radius and east"),
    (
        "anchor at the foot",
        MAST,
        ((("anchor", 0), {"name": "N", "east": "0 m", "north": "0 m"}),),
        "guy_level[0].to[0]",
        'lies on the axis of spar "mast"',
    ),
    ("one spar twice", BOOM, ((("cable", 0, "to"), {"spar": "mast", "at": "2 m"}),), "cable[0]", 'both ends are on spar "mast"'),
    (
        "no length",
        BOOM,
        (
            (
                ("cable", 0),
                {"name": "c", "from": {"spar": "mast", "at": "1 m"}, "to": {"spar": "boom", "at": "0 m"}, "rope": "wire", "tight": True},
            ),
        ),
        "cable[0]",
        "the cable has no length",
    ),
    ("along the boom", BOOM, ((("cable", 0, "from", "at"), "1 m"),), "cable[0]", 'starts on the axis of spar "boom"'),
    ("arm too long", MAST, (((*LEVEL, "arm"), "8 m"), ((*LEVEL, "to"), ["N"])), "guy_level[0].to[0]", "reach past the other end"),
    (
        "plumb without targets",
        MAST,
        ((("setting",), {"plumb": True}), ((*LEVEL, "tension"), ...), ((*LEVEL, "tight"), True)),
        "setting.plumb",
        "needs cables given by tension",
    ),
    (
        "from an anchor",
        BOOM,
        ((("cable", 0, "from"), {"spar": "mast", "at": "10 m", "anchor": "N"}),),
        "cable[0].from.anchor",
        "unknown key",
    ),
    # wind, ice, temperature
    ("wind missing", MAST, ((("wind",), ...),), "wind", 'missing; case "design" has wind = 1; give [wind], or wind = 0 in every case'),
    (
        "ice missing",
        MAST,
        ((("case",), [{"name": "frost", "ice": 0.5}]), *FITTING_ICED),
        "ice",
        'missing; case "frost" has ice = 0.5; give [ice]',
    ),
    ("section drag", MAST, (((*SECTION,), _without("drag")),), "spar[0].section[0].drag", "give drag, or shape"),
    ("fitting drag", MAST, (((*FITTING, "drag"), ...),), "spar[0].fitting[0].drag", "give drag; it cannot be chosen"),
    (
        "shape of a tube",
        MAST,
        (((*SECTION, "shape"), "round"),),
        "spar[0].section[0].shape",
        "a tube is round; leave shape out",
    ),
    (
        "rectangle without depth",
        MAST,
        (((*SECTION,), {**OUTRIGHT, "width": "0.1 m", "shape": "rectangle"}),),
        "spar[0].section[0].depth",
        'missing; shape = "rectangle" needs it',
    ),
    (
        "corner of no rectangle",
        MAST,
        (((*SECTION,), {**OUTRIGHT, "width": "0.1 m", "shape": "sharp", "corner": "5 mm"}),),
        "spar[0].section[0].corner",
        "only a rectangle has it",
    ),
    (
        "corner too large",
        MAST,
        (((*SECTION,), {**OUTRIGHT, "width": "0.1 m", "depth": "0.2 m", "shape": "rectangle", "corner": "51 mm"}),),
        "spar[0].section[0].corner",
        "more than half the lesser side",
    ),
    (
        "shape of no width",
        MAST,
        (((*SECTION,), {**_without("width"), "shape": "sharp"}),),
        "spar[0].section[0].width",
        "is that of a width",
    ),
    ("surface", MAST, (((*SECTION, "surface"), "velvet"),), "spar[0].section[0].surface", '"velvet" is no surface and no roughness'),
    (
        "surface of no round section",
        MAST,
        (((*SECTION,), {**OUTRIGHT, "width": "0.1 m", "drag": 1.2, "surface": "rust"}),),
        "spar[0].section[0].surface",
        "only round sections",
    ),
    (
        "sign without height",
        MAST,
        (((*FITTING,), {"name": "sign", "at": "9 m", "area": "2 m2", "shape": "flat", "face": "0 deg", "width": "2 m"}),),
        "spar[0].fitting[0].height",
        "the coefficient chosen from the shape needs height",
    ),
    (
        "area of another size",
        MAST,
        (((*FITTING,), {"name": "s", "at": "9 m", "area": "3 m2", "shape": "flat", "face": "0 deg", "width": "2 m", "height": "1 m"}),),
        "spar[0].fitting[0].area",
        "is not width by height by solidity",
    ),
    (
        "bars of a sign",
        MAST,
        (((*FITTING,), {"name": "s", "at": "9 m", "shape": "flat", "face": "0 deg", "width": "2 m", "height": "1 m", "bar": "9 mm"}),),
        "spar[0].fitting[0].bar",
        "only an open frame has bars",
    ),
    ("width of anything", MAST, (((*FITTING, "width"), "2 m"),), "spar[0].fitting[0].width", 'shape = "any" does not use it'),
    ("ice without size", MAST, (*ICED_CASE, *FITTING_ICED, (("ice",), {"drag": 1.3})), "ice", "has neither thickness nor class"),
    ("ice twice", MAST, (*ICED_CASE, *FITTING_ICED, (("ice",), {"thickness": "9 mm", "class": "G2"})), "ice", "has thickness and class"),
    ("extreme ice", MAST, (*ICED_CASE, *FITTING_ICED, (("ice",), {"class": "G6"})), "ice.class", "a study of the site"),
    ("ice class R7", MAST, (*ICED_CASE, *FITTING_ICED, (("ice",), {"class": "R7"})), "ice.class", "is not known to this version"),
    ("ice class G7", MAST, (*ICED_CASE, *FITTING_ICED, (("ice",), {"class": "G7"})), "ice.class", "is not one of"),
    (
        "density of a class",
        MAST,
        (*ICED_CASE, *FITTING_ICED, (("ice",), {"class": "G2", "density": "900 kg/m3"})),
        "ice.density",
        "follows from class G2",
    ),
    (
        "wind reduced without class",
        MAST,
        (*ICED_CASE, *FITTING_ICED, (("ice",), {"thickness": "9 mm", "reduce_wind": True})),
        "ice.reduce_wind",
        "goes with a class",
    ),
    ("vane of glaze", MAST, (*ICED_CASE, *FITTING_ICED, (("ice",), {"class": "G2", "vane": "across"})), "ice.vane", "only rime"),
    (
        "glaze growing as rime",
        MAST,
        (*ICED_CASE, *FITTING_ICED, (("ice",), {"class": "G2", "height_effect": "iso12494"})),
        "ice.height_effect",
        "is for rime",
    ),
    (
        "rime growing as glaze",
        MAST,
        (*ICED_CASE, *FITTING_ICED, (("ice",), {"class": "R2", "height_effect": "asce7"})),
        "ice.height_effect",
        "is for glaze",
    ),
    ("bare without ice", MAST, ((("case",), [{"name": "gust", "bare": ["9 m N"]}]),), "case[0].bare", "the case has no ice"),
    (
        "bare unknown",
        MAST,
        (*FITTING_ICED, (("ice",), {"class": "G2"}), (("case",), [{"name": "frost", "ice": 1.0, "bare": ["no such"]}])),
        "case[0].bare[0]",
        "no cable is named",
    ),
    (
        "name of a sign's case",
        MAST,
        ((("case",), [{"name": "gust, sign force to the left"}]),),
        "case[0].name",
        "ends the names of cases made for signs",
    ),
    ("iced mass", MAST, (*ICED_CASE, FITTING_ICED[1]), "spar[0].fitting[0].iced_mass", 'missing; case "frost" has ice'),
    ("iced area", MAST, (*ICED_CASE, FITTING_ICED[0]), "spar[0].fitting[0].iced_area", 'missing; case "frost" has ice'),
    (
        "iced width",
        MAST,
        (*ICED_CASE, *FITTING_ICED, ((*SECTION,), {**OUTRIGHT, "iced_mass": "12 kg/m"})),
        "spar[0].section[0].iced_width",
        "a section given outright needs it",
    ),
    (
        "lighter with ice",
        MAST,
        (*ICED_CASE, ((*FITTING, "iced_mass"), "2 kg"), FITTING_ICED[1]),
        "spar[0].fitting[0].iced_mass",
        "iced_mass is the whole mass with the ice on it",
    ),
    (
        "expansion",
        MAST,
        ((("case",), [{"name": "cold", "temperature": "0 degC"}]),),
        "rope.wire.expansion",
        "is not at the setting's temperature",
    ),
    ("stiffness", MAST, (((*ROPE, "stiffness"), ...),), "rope.wire", "has no stiffness; give stiffness, or modulus and metal_area"),
    ("two stiffnesses", MAST, (((*ROPE, "modulus"), "100 GPa"),), "rope.wire", "has stiffness and modulus"),
    ("uneven sweep", MAST, ((("wind", "directions"), "every 7 deg"),), "wind.directions", "not a whole number of steps of 7 deg"),
    ("too many", MAST, ((("wind", "directions"), "every 0.01 deg"),), "wind.directions", "36000 directions are too many"),
    ("no sweep", MAST, ((("wind", "directions"), "all round"),), "wind.directions", 'write "every 30 deg" or a list'),
    ("no direction", MAST, ((("wind", "directions"), []),), "wind.directions", "the list is empty"),
    ("direction twice", MAST, ((("wind", "directions"), ["0 deg", "90 deg", "360 deg"]),), "wind.directions[2]", "in the list already"),
    (
        "two densities",
        MAST,
        ((("wind", "air_density"), "1.2 kg/m3"), (("wind", "altitude"), "9 m")),
        "wind.altitude",
        "air_density is given",
    ),
    ("no altitude", MAST, ((("wind", "temperature"), "9 degC"),), "wind.altitude", "missing; temperature is given for the air density"),
    ("in space", MAST, ((("wind", "altitude"), "90 km"),), "wind.altitude", "out of range"),
    # not available
    ("anchors at one place", MAST, ((("anchor", 1, "bearing"), "0 deg"),), "anchor[1]", 'stands where "N" does'),
    ("site", MAST, ((("site",), {"crs": "EPSG:32631"}),), "site.origin", "crs needs the place of the origin"),
    ("part", MAST, ((("part",), {"a": {"strength": "1 kN", "efficiency": 0.8}}),), "part.a", "give one of"),
    ("action level above the limit", MAST, ((("limit",), {"actions": [0.6, 1.2]}),), "limit.actions[1]", "less than 1"),
    ("time to lower without a unit", MAST, ((("limit",), {"lower_in": 20}),), "limit.lower_in", "has no unit"),
    ("plate", MAST, (((*SPAR, "plate"), {"length": "1 m"}),), "spar[0].plate.width", "missing"),
    ("ends", MAST, (((*LEVEL, "ends"), ["clips"]),), "guy_level[0].ends[0]", "no part is named"),
    ("ends of a cable", BOOM, ((("cable", 0, "ends"), ["clips"]),), "cable[0].ends[0]", "no part is named"),
    (
        "lattice without legs",
        MAST,
        (
            ((*SECTION, "tube"), ...),
            ((*SECTION, "lattice"), {"face": "300 mm", "lacing": "10 mm", "panel": "350 mm", "sides": 3}),
        ),
        "spar[0].section[0].lattice.legs",
        "missing",
    ),
    # profiles of standards
    ("exposure", MAST, ((PROFILE, {"asce7": "A"}),), "wind.profile.asce7", '"A" is not one of "B", "C", "D"'),
    ("terrain", MAST, ((PROFILE, {"en1991": 2}),), "wind.profile.en1991", "2 is not one of"),
    ("key of the other", MAST, ((PROFILE, {"asce7": "C", "orography": 1.1}),), "wind.profile.orography", "unknown key"),
    ("no such profile", MAST, ((PROFILE, {"as7": "C"}),), "wind.profile", "a table here is one of"),
    ("two profiles", MAST, ((PROFILE, {"asce7": "C", "power": 0.1}),), "wind.profile", "a table here is one of"),
    ("averaging", MAST, ((PROFILE, {"en1991": "II"}), (("wind", "averaging"), "2 h")), "wind.averaging", "cannot be converted to the 600"),
    ("averaging too short", MAST, ((PROFILE, {"asce7": "C"}), (("wind", "averaging"), "0.5 s")), "wind.averaging", "cannot be converted"),
    ("height", MAST, ((PROFILE, {"asce7": "C"}), (("wind", "height"), "6 m")), "wind.height", "6 m will not do"),
    ("gust curve", MAST, ((("wind", "gust_curve"), "durst"),), "wind.gust_curve", "takes the speed as it is"),
    ("two Kzt", MAST, ((PROFILE, {"asce7": "C", "kzt": 1.2, "topography": HILL}),), "wind.profile.kzt", "give one of the two"),
    ("return period", MAST, ((("wind", "return_period"), {"years": 1.0}),), "wind.return_period.years", "at least 2"),
    ("no source", MAST, ((("wind", "return_period"), {"years": 5, "K": 0.1}),), "wind.return_period.source", "not the recommended"),
    ("half a season", MAST, ((("wind", "season"), {"start": "May"}),), "wind.season", "incomplete; give start"),
    ("season twice", MAST, ((("wind", "season"), {"months": 2, "factor": 0.8, "source": "x"}),), "wind.season.factor", "months is given"),
    ("season from nowhere", MAST, ((("wind", "season"), {"factor": 0.8}),), "wind.season.source", "say where"),
    ("stay", MAST, ((("wind", "duration"), {"stay": "long"}),), "wind.duration.stay", "is not one of"),
    # format
    ("newer format", MAST, ((("format",), 2),), "format", "2 is newer than this version reads; it reads format 1"),
    ("format zero", MAST, ((("format",), 0),), "format", "0 is not a version of the format"),
    ("format text", MAST, ((("format",), "1"),), "format", '"1" is not a version of the format'),
]


@pytest.mark.parametrize(("document", "changes", "key", "says"), [row[1:] for row in ONE_FAULT], ids=[row[0] for row in ONE_FAULT])
def test_one_mistake_gives_one_fault(document: dict[str, Any], changes: tuple[Change, ...], key: str, says: str) -> None:
    found = told(document, *changes)
    assert [each for each, _ in found] == [key], found
    assert says in found[0][1]


def test_geographic_anchors_need_a_coordinate_system() -> None:
    found = told(MAST, (("anchor", 0), {"name": "N", "lat": 51.0, "lon": 3.0}))
    assert [key for key, _ in found] == ["anchor[0]"]
    assert "need [site] with crs and origin" in found[0][1]


def test_everything_is_reported_at_once_in_the_order_of_the_file() -> None:
    text = dumps_tables(
        changed(
            BOOM,
            (("titel",), "x"),
            (("spar", 0, "lean"), 3),
            (("spar", 0, "section", 0, "material"), "stel"),
            (("spar", 1, "fitting"), [{"name": "lamp", "at": "7 m", "mass": "1 kg"}]),
            (("anchor", 1, "radius"), "8,5 m"),
            (("guy_level", 0, "to", 2), "NW"),
            (("cable", 0, "rope"), "wirre"),
            (("cable", 0, "tight"), True),
            (("rope", "wire", "drag"), "1.2"),
            (("wind", "speed"), "25 kg"),
            (("site",), {"crs": "EPSG:32631"}),
        )
    )
    faults = faults_of(text)
    assert sorted(fault.key for fault in faults) == sorted(
        [
            "titel", "spar[0].lean", "spar[0].section[0].material", "spar[1].fitting[0].at", "anchor[1].radius", "guy_level[0].to[2]",
            "cable[0].rope", "cable[0]", "rope.wire.drag", "wind.speed", "site.origin",
        ]
    )  # fmt: skip
    places = [(fault.line or 0, fault.column or 0) for fault in faults]
    assert places == sorted(places)


def test_each_fault_names_file_line_and_column_of_its_key() -> None:
    text = 'title = "x"\n\n[[spar]]\nname = "m"\nfoot = { spar = "q", att = "0 m" }\n  [[spar.section]]\n  length = 3\n'
    found = {fault.key: (fault.path, fault.line, fault.column) for fault in faults_of(text)}
    assert found["spar[0].foot.att"] == ("test.toml", 5, 22)
    assert found["spar[0].foot.at"] == ("test.toml", 5, 1)
    assert found["spar[0].section[0].length"] == ("test.toml", 7, 3)
    assert found["wind"] == ("test.toml", 1, 1)


def test_a_missing_key_is_placed_at_the_header_of_its_table() -> None:
    text = dumps_tables(changed(BOOM, (("spar", 1, "name"), ...), (("spar", 1, "section", 0, "drag"), ...)))
    lines = text.splitlines()
    second = [number for number, line in enumerate(lines, 1) if line == "[[spar]]"][1]
    by_key = {fault.key: fault.line for fault in faults_of(text)}
    assert by_key["spar[1].name"] == second


def test_lines_are_right_where_they_end_in_carriage_returns() -> None:
    text = dumps_tables(changed(MAST, (("wind", "speed"), 25)))
    plain, returned = faults_of(text), faults_of(text.replace("\n", "\r\n"))
    assert [(fault.line, fault.column) for fault in plain] == [(fault.line, fault.column) for fault in returned]


def test_names_that_are_not_bare_words_are_quoted_in_key_paths() -> None:
    document = changed(MAST, (("rope", "my wire"), {"diameter": 6, "mass": "1 kg/m", "stiffness": "1 MN"}))
    assert [key for key, _ in told(document)] == ['rope."my wire".diameter']


@pytest.mark.parametrize(
    ("content", "line", "says"),
    [
        (b"a = 1\na = 2\n", 2, "this key is given twice"),
        (b"[wind]\n[wind]\n", 2, "this table is given twice"),
        (b'title = "x"\nat = 17 m\n', 2, "not readable as TOML"),
        (b"at = m\n", 1, "text and quantities stand in quotes"),
        (b'title = "\xff"\n', 1, "not UTF-8 text"),
        (b"\n\na = " + b"[" * 5000, None, "nested too deeply"),
        (b"a." * 5000 + b"a = 1", 1, "nested too deeply"),
        (b"a = " + b"9" * 5000, None, "too many digits"),
        (b'a = "', 1, "not readable as TOML"),
        (b"#" * 5_000_001, None, "larger than 5 MB"),
    ],
)
def test_what_is_no_toml_is_told_in_one_line(tmp_path: Path, content: bytes, line: int | None, says: str) -> None:
    file = tmp_path / "scenario.toml"
    file.write_bytes(content)
    with pytest.raises(ScenarioError) as caught:
        read_scenario(file)
    (fault,) = caught.value.faults
    assert (fault.path, fault.line) == (str(file), line)
    assert says in fault.message
    assert "\n" not in str(fault)


def test_a_file_of_five_megabytes_is_read(tmp_path: Path) -> None:
    file = tmp_path / "scenario.toml"
    text = dumps_tables(MAST)
    file.write_text(text + "#" * (5_000_000 - len(text)))
    assert read_scenario(file).title == "Test mast"


def test_missing_files_and_directories_are_told_apart(tmp_path: Path) -> None:
    for path, says in ((tmp_path / "no.toml", "no such file"), (tmp_path, "a directory"), (Path("a\0b"), "cannot be read")):
        with pytest.raises(ScenarioError, match=says):
            read_scenario(path)


def test_an_empty_file_says_what_it_needs() -> None:
    assert {fault.key for fault in faults_of("")} == {"title", "spar", "wind"}


def test_a_very_faulty_file_does_not_take_long() -> None:
    """Time grows with the size of the file, not with its square: five hundred faults and two thousand, within eight times as long."""
    from time import process_time

    def seconds(count: int) -> float:
        text = dumps(changed(MAST, (("anchor",), [{"name": f"a{n}", "bearing": n, "radius": "1 m"} for n in range(count)])))
        start = process_time()
        assert len(faults_of(text)) >= count
        return process_time() - start

    small, large = (min(seconds(count) for _ in range(3)) for count in (500, 2000))
    assert large < 8.0 * small


def test_faults_are_data_too() -> None:
    (fault,) = faults_of(dumps_tables(changed(MAST, (("wind", "speed"), 25))))
    assert re.fullmatch(r'test\.toml:\d+:1: wind\.speed: 25 has no unit; write "25 m/s" or "25 mph"', str(fault))
