"""The main dimensions of a scenario in both unit systems, for the eye that catches a slip of the unit."""

from __future__ import annotations

import math
from collections.abc import Iterator

from guys import units
from guys.scenario import drawn, feet, ice
from guys.scenario.model import Anchor, Cable, Case, GroundFoot, HeelFoot, Rope, Scenario, Spar, Wind
from guys.scenario.plausible import section_mass
from guys.scenario.standard_wind import AS_HIGH, REFERENCE_HEIGHT, averaging_words, beaufort


def lines(scenario: Scenario) -> Iterator[str]:
    """One line for each spar, anchor, cable and rope, for the wind, the ice and each case."""
    yield scenario.title
    for spar in scenario.spar:
        yield f'spar "{spar.name}": {_spar(scenario, spar)}'
    foot = drawn.foot({spar.name: spar for spar in scenario.spar}, scenario.spar[0].name)
    for anchor in scenario.anchor:
        yield f'anchor "{anchor.name}": {_anchor(anchor, foot)}'
    for cable, ends in zip(scenario.cable, drawn.scenario_cable_ends(scenario), strict=True):
        yield f'cable "{cable.name}": {_cable(cable, *ends)}'
    for name, part in scenario.part.items():
        share = part.strength is None
        yield f'part "{name}": ' + (f"{part.efficiency:g} of the rope's strength" if share else units.both(part.strength or 0.0, "force"))
    for name, rope in scenario.rope.items():
        yield f'rope "{name}": {_rope(rope)}'
    if scenario.wind is not None:
        yield f"wind: {_wind(scenario.wind)}"
    if scenario.ice is not None:
        yield f"ice: {ice.words(scenario.ice)}"
    for case in scenario.case:
        yield f'case "{case.name}": {_case(case)}'
    for layout in scenario.layouts:
        for anchor, above in zip(layout.anchor, scenario.anchor, strict=True):
            if anchor != above:
                yield f'layout "{layout.layout}", anchor "{anchor.name}": {_anchor(anchor, foot)}'
    for note in scenario.notes:
        yield f"note: {note}"


def _anchor(anchor: Anchor, foot: drawn.Point) -> str:
    east, north = anchor.east - foot[0], anchor.north - foot[1]
    bearing = math.degrees(math.atan2(east, north)) % 360.0
    radius, level = units.both(math.hypot(east, north), "length"), units.both(anchor.level, "length")
    held = "" if anchor.holdfast is None else f", holdfast {anchor.holdfast}"
    return f"bearing {bearing:.4g} deg, radius {radius}, level {level}{held}"


def _stands(foot: GroundFoot | HeelFoot) -> str:
    if isinstance(foot, HeelFoot):
        return f'on spar "{foot.spar}" at {units.both(foot.at, "length")}'
    if (foot.east, foot.north, foot.level) == (0.0, 0.0, 0.0):
        return "on the ground"
    return f"on the ground {feet.where(foot.east, foot.north)}, level {units.both(foot.level, 'length')}"


def _spar(scenario: Scenario, spar: Spar) -> str:
    masses = [section_mass(section, scenario.material) or 0.0 for section in spar.section]
    mass = math.fsum(each * section.length for each, section in zip(masses, spar.section, strict=True))
    mass += math.fsum(fitting.mass for fitting in spar.fitting)
    stands = _stands(spar.foot)
    lean = f", lean {math.degrees(spar.lean):.4g} deg toward {math.degrees(spar.toward):.4g} deg" if spar.lean else ""
    carried = " with its fittings" if spar.fitting else ""
    return f"{units.both(spar.length, 'length')} long, {spar.base} {stands}{lean}, {units.both(mass, 'mass')}{carried}"


def _cable(cable: Cable, top: drawn.Point, bottom: drawn.Point) -> str:
    chord = math.dist(top, bottom)
    angle = math.degrees(math.asin((top[2] - bottom[2]) / chord))
    if cable.tension is not None:
        given = f"initial tension {units.both(cable.tension, 'force')}"
    elif cable.length is not None:
        given = f"unstressed length {units.both(cable.length, 'length')}"
    else:
        given = "tight"
    return f"chord {units.both(chord, 'length')}, {angle:.3g} deg from the ground, {given}"


def _rope(rope: Rope) -> str:
    strength = "no strength given" if rope.strength is None else f"strength {units.both(rope.strength, 'force')}"
    source = "" if rope.source is None else f"; {rope.source}"
    size = f"{units.both(rope.diameter, 'length', ('mm', 'in'))}, {units.both(rope.mass, 'mass per length')}"
    return f"{size}, stiffness {units.both(rope.stiffness, 'force', ('kN', 'kip'))}, {strength}{source}"


def _wind(wind: Wind) -> str:
    reference = f"{units.both(wind.speed, 'speed')}, {averaging_words(wind.averaging)} at {units.both(wind.height, 'length')}"
    number = beaufort(wind.speed, wind.averaging) if abs(wind.height - REFERENCE_HEIGHT) <= AS_HIGH else None
    reference += "" if number is None else f", Beaufort {number}"
    return f"{reference}, {wind.profile.words}, air {units.both(wind.air_density, 'density')}, {len(wind.directions)} directions"


def _case(case: Case) -> str:
    away = f", without {', '.join(case.without)}" if case.without else ""
    away += f", no ice on {', '.join(case.bare)}" if case.bare else ""
    away += "" if case.service else f", {case.kind}"
    return f"dead {case.dead:g}, wind {case.wind:g}, ice {case.ice:g}, {units.both(case.temperature, 'temperature')}{away}"
