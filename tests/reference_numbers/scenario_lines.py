"""The reference structure as a scenario file in the program's own format, line by line."""

from __future__ import annotations

from typing import Any

Inputs = dict[str, Any]


def scenario_lines(inputs: Inputs) -> list[str]:
    """Lines of a scenario file; names are plain, so quoting them is enough."""
    lines = [f'title = "{inputs["title"]}"', "format = 1"]
    for spar in inputs["spars"]:
        lines += _spar(spar)
    for a in inputs["anchors"]:
        place = f'bearing = "{a["bearing_deg"]} deg"; radius = "{a["radius"]} m"; level = "{a["level"]} m"'
        lines += ["[[anchor]]", f'name = "{a["name"]}"', *place.split("; ")]
    for c in inputs["cables"]:
        ends = [f"from = {_end(c['from'])}", f"to = {_end(c['to'])}"]
        lines += ["[[cable]]", f'name = "{c["name"]}"', *ends, 'rope = "reference"', f'length = "{c["length"]} m"']
    return lines + _rope(inputs["rope"]) + _material(inputs["material"]) + _weather(inputs["wind"]) + _cases(inputs["cases"])


def _spar(spar: Inputs) -> list[str]:
    foot = spar["foot"]
    if isinstance(foot, dict):
        place = f'{{ spar = "{foot["spar"]}", at = "{foot["at"]} m" }}'
    else:
        place = f'{{ east = "{foot[0]} m", north = "{foot[1]} m", level = "{foot[2]} m" }}'
    lines = ["[[spar]]", f'name = "{spar["name"]}"', f"foot = {place}", f'base = "{spar["base"]}"']
    lines += [f'lean = "{spar["lean_deg"]} deg"', f'toward = "{spar["toward_deg"]} deg"']
    if "hinge_axis_deg" in spar:
        lines.append(f'hinge_axis = "{spar["hinge_axis_deg"]} deg"')
    tube = f'{{ diameter = "{spar["tube"]["diameter"]} m", wall = "{spar["tube"]["wall"]} m" }}'
    lines += ["[[spar.section]]", f'length = "{spar["length"]} m"', f"tube = {tube}", 'material = "reference"', f"drag = {spar['drag']}"]
    for fitting in spar["fittings"]:
        lines += _fitting(fitting)
    return lines


def _fitting(fitting: Inputs) -> list[str]:
    east, north, up = fitting["load"]
    lines = ["[[spar.fitting]]", f'name = "{fitting["name"]}"', f'at = "{fitting["at"]} m"', f'mass = "{fitting["mass"]} kg"']
    if "area" in fitting:
        lines += [f'area = "{fitting["area"]} m2"', f"drag = {fitting['drag']}"]
    return [*lines, f'load = {{ east = "{east} N", north = "{north} N", up = "{up} N" }}']


def _end(end: Inputs) -> str:
    if "anchor" in end:
        return f'{{ anchor = "{end["anchor"]}" }}'
    return f'{{ spar = "{end["spar"]}", at = "{end["at"]} m" }}'


def _rope(rope: Inputs) -> list[str]:
    sizes = [f'diameter = "{rope["diameter"]} m"', f'mass = "{rope["mass"]} kg/m"', f'stiffness = "{rope["stiffness"]} N"']
    return ["[rope.reference]", *sizes, f'strength = "{rope["strength"]} N"', f"drag = {rope['drag']}"]


def _material(material: Inputs) -> list[str]:
    stiffness = [f'modulus = "{material["modulus"]} Pa"', f'shear_modulus = "{material["shear_modulus"]} Pa"']
    return ["[material.reference]", f'density = "{material["density"]} kg/m3"', *stiffness]


def _weather(wind: Inputs | None) -> list[str]:
    if wind is None:
        return []
    directions = ", ".join(f'"{d} deg"' for d in wind["directions_deg"])
    speed = [f'speed = "{wind["speed"]} m/s"', 'averaging = "3 s"', 'height = "10 m"', f'profile = "{wind["profile"]}"']
    return ["[wind]", *speed, f'air_density = "{wind["air_density"]} kg/m3"', f"directions = [{directions}]"]


def _cases(cases: list[Inputs]) -> list[str]:
    return [line for c in cases for line in ("[[case]]", f'name = "{c["name"]}"', f"dead = {c['dead']}", f"wind = {c['wind']}")]
