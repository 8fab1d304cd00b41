"""Values that look like a slip of the pen or of the unit: not wrong, so not refused, but never passed over in silence.

Each bound is common practice, drawn wide: outside it the value is either a slip or so unusual that the user will not mind being asked.
Every warning echoes the value in both unit systems, which is where a slip shows.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass

from guys import lattice, tables, units
from guys.catalogue import ropes as stock
from guys.catalogue import tubes
from guys.constants import ZERO_CELSIUS
from guys.scenario import drawn, held, ice, place, resolve
from guys.scenario.lattice import Lattice
from guys.scenario.model import AnchorPoint, Cable, GroundFoot, HeelFoot, Material, Profile, Scenario, Section, Spar


@dataclass(frozen=True)
class Bounds:
    """least, most : SI; unusual outside.  units : the two the value is echoed in, the dimension's own where None."""

    dimension: str
    least: float
    most: float
    units: tuple[str, str] | None = None

    def warn(self, what: str, value: float | None) -> Iterator[str]:
        """A warning where the value lies outside."""
        if value is not None and not self.least <= value <= self.most:
            side = "less" if value < self.least else "more"
            limit = self.least if value < self.least else self.most
            echo, than = units.both(value, self.dimension, self.units), units.both(limit, self.dimension, self.units)
            yield f"{what}: {echo} is {side} than {than}; is the unit right?"


GREATEST_PRESUMED = max(units.to_si(float(row["bearing_psf"]), "psf") for row in tables.rows("bearing"))
_ZERO = float(ZERO_CELSIUS)
SPAR_LENGTH = Bounds("length", 0.5, 400.0)
SPAR_MASS = Bounds("mass per length", 0.2, 3000.0)
TUBE_DIAMETER = Bounds("length", 0.01, 3.0, ("mm", "in"))
TUBE_WALL = Bounds("length", 0.5e-3, 0.1, ("mm", "in"))
FACE = Bounds("length", 0.1, 3.0, ("mm", "in"))
MEMBER = Bounds("length", 0.004, 0.3, ("mm", "in"))
LACED = math.radians(25.0), math.radians(70.0)
"""Rise of diagonals that is usual, from the level."""
WIDTH = Bounds("length", 0.01, 5.0, ("mm", "in"))
PART_STRENGTH = Bounds("force", 500.0, 20e6)
PLATE = Bounds("length", 0.05, 10.0)
BEARING = Bounds("pressure", 10e3, GREATEST_PRESUMED, ("kPa", "psf"))
"""Greatest: that of crystalline bedrock in the table of presumptive pressures."""
ROPE_DIAMETER = Bounds("length", 0.001, 0.15, ("mm", "in"))
ROPE_DENSITY = Bounds("density", 300.0, 9000.0)
ROPE_MODULUS = Bounds("pressure", 0.2e9, 220e9, ("GPa", "ksi"))
ROPE_STRESS = Bounds("pressure", 30e6, 4e9, ("GPa", "ksi"))
MATERIAL_DENSITY = Bounds("density", 200.0, 9000.0)
MATERIAL_MODULUS = Bounds("pressure", 1e9, 450e9, ("GPa", "ksi"))
MATERIAL_YIELD = Bounds("pressure", 5e6, 3e9, ("MPa", "ksi"))
EXPANSION = Bounds("expansion", 0.0, 1e-4)
WIND_SPEED = Bounds("speed", 3.0, 90.0)
WIND_HEIGHT = Bounds("length", 1.0, 600.0)
AVERAGING = Bounds("time", 0.5, 3600.0)
AIR = Bounds("density", 0.6, 1.7)
ICE_THICKNESS = Bounds("length", 0.5e-3, 0.15, ("mm", "in"))
ICE_DENSITY = Bounds("density", 100.0, 920.0)
TEMPERATURE = Bounds("temperature", _ZERO - 60.0, _ZERO + 60.0)
FITTING_AREA = Bounds("area", 0.0, 150.0)
FITTING_MASS = Bounds("mass", 0.0, 20_000.0)
OFFSET = Bounds("length", 0.0, 10.0)
ARM = Bounds("length", 0.0, 5.0)
EN_HIGHEST = 200.0
"""[m], EN 1991-1-4 4.3.2, read in a public transcription."""
GREATEST_DRAG = 3.0
GREATEST_FACTOR = 3.0
STEEP, SHALLOW = math.radians(75.0), math.radians(10.0)
LENGTH_TO_CHORD = (0.97, 1.10)


def warnings(scenario: Scenario) -> Iterator[str]:
    """Everything unusual in a scenario, in the order of its tables."""
    for spar in scenario.spar:
        yield from _spar(spar, scenario.material)
    yield from _anchors(scenario)
    yield from _cables(scenario)
    yield from _ropes(scenario)
    yield from _parts(scenario)
    for name, material in scenario.material.items():
        if name not in resolve.built_in_materials() or material != resolve.built_in_materials()[name]:
            yield from _material(f"material {name}", material)
    yield from held.warnings(scenario)
    yield from _weather(scenario)
    yield from _cold_sections(scenario)
    for name in ("cable", "anchor", "sliding", "spar", "bearing"):
        if getattr(scenario.allowables, name) < 1.0:
            yield f"allowables.{name}: {getattr(scenario.allowables, name):g} is less than 1, which lets it fail and calls it within"
    if scenario.site is not None:
        yield from place.warnings([(s.name, s.foot) for s in scenario.spar if isinstance(s.foot, GroundFoot)], scenario.site)


def section_mass(section: Section, materials: dict[str, Material]) -> float | None:
    """Mass per length of a section [kg/m], from its tube or lattice where it has one."""
    material = materials.get(section.material or "")
    if section.tube is not None:
        return None if material is None else tubes.area(section.tube.diameter, section.tube.wall) * material.density
    if section.lattice is not None:
        return None if material is None else lattice.mass(section.lattice, material.density)
    return section.mass


def _spar(spar: Spar, materials: dict[str, Material]) -> Iterator[str]:
    what = f'spar "{spar.name}"'
    yield from SPAR_LENGTH.warn(f"{what}, length", spar.length)
    masses = [section_mass(section, materials) for section in spar.section]
    weight = math.fsum((mass or 0.0) * section.length for mass, section in zip(masses, spar.section, strict=True))
    idealised = spar.rigid and weight == 0.0
    if not idealised:
        total = f", {units.both(weight, 'mass')} over {units.both(spar.length, 'length')}"
        yield from SPAR_MASS.warn(f"{what}{total}, mass per length", weight / spar.length)
    if not isinstance(spar.foot, HeelFoot) and math.cos(spar.lean) < math.cos(STEEP):
        yield f"{what}, lean: {units.show(spar.lean, 'deg')} from the vertical is nearly level, or head down"
    if spar.plate is not None:
        yield from PLATE.warn(f"{what}, plate, length", spar.plate.length)
        yield from PLATE.warn(f"{what}, plate, width", spar.plate.width)
        yield from BEARING.warn(f"{what}, plate, bearing", spar.plate.bearing)
    for number, section in enumerate(spar.section, 1):
        here = f"{what}, section {number}"
        if section.tube is not None:
            yield from TUBE_DIAMETER.warn(f"{here}, diameter", section.tube.diameter)
            yield from TUBE_WALL.warn(f"{here}, wall", section.tube.wall)
        if section.lattice is not None:
            yield from _lattice(f"{here}, lattice", section.lattice)
        yield from WIDTH.warn(f"{here}, width", section.width)
        yield from _drag(here, section.drag)
    for fitting in spar.fitting:
        here = f'fitting "{fitting.name}"'
        yield from FITTING_AREA.warn(f"{here}, area", fitting.area)
        yield from FITTING_MASS.warn(f"{here}, mass", fitting.mass)
        yield from OFFSET.warn(f"{here}, offset", math.hypot(fitting.offset.east, fitting.offset.north, fitting.offset.up))
        yield from _drag(here, fitting.drag)


def _lattice(what: str, made: Lattice) -> Iterator[str]:
    yield from FACE.warn(f"{what}, face", made.face)
    for name, bar in (("legs", made.legs), ("lacing", made.lacing)):
        yield from MEMBER.warn(f"{what}, {name}, diameter", bar.diameter)
        if bar.wall < bar.diameter / 2:
            yield from TUBE_WALL.warn(f"{what}, {name}, wall", bar.wall)
    angle = math.atan2(made.panel, made.face)
    if not LACED[0] <= angle <= LACED[1]:
        usual = f"{units.show(LACED[0], 'deg')} to {units.show(LACED[1], 'deg')} is usual"
        yield f"{what}, panel: diagonals rise at {units.show(angle, 'deg', 3)} from the level; {usual}"


def _drag(what: str, drag: float | None) -> Iterator[str]:
    if drag is not None and drag > GREATEST_DRAG:
        yield f"{what}, drag: {drag:g} is more than {GREATEST_DRAG:g}"


def _anchors(scenario: Scenario) -> Iterator[str]:
    used = {cable.to.anchor for cable in scenario.cable if isinstance(cable.to, AnchorPoint)}
    for anchor in scenario.anchor:
        if anchor.name not in used:
            yield f'anchor "{anchor.name}": no cable runs to it'


def _cables(scenario: Scenario) -> Iterator[str]:
    seen: dict[tuple[object, ...], str] = {}
    for cable, (top, bottom) in zip(scenario.cable, drawn.scenario_cable_ends(scenario), strict=True):
        what = f'cable "{cable.name}"'
        chord = math.dist(top, bottom)
        same = (cable.from_, cable.to)
        if same in seen:
            yield f'{what}: runs between the same two points as "{seen[same]}"'
        seen.setdefault(same, cable.name)
        yield from ARM.warn(f"{what}, arm", cable.from_.arm)
        yield from _pull(what, cable, scenario)
        if cable.length is not None and not LENGTH_TO_CHORD[0] <= cable.length / chord <= LENGTH_TO_CHORD[1]:
            yield f"{what}, length: {units.both(cable.length, 'length')} for a chord of {units.both(chord, 'length')}"
        if isinstance(cable.to, AnchorPoint):
            angle = math.asin((top[2] - bottom[2]) / chord)
            if angle < 0:
                yield f"{what}: its anchor lies {units.both(bottom[2] - top[2], 'length')} above where it is made fast to the spar"
            elif not SHALLOW <= angle <= STEEP:
                yield f"{what}: {units.show(angle, 'deg', 3)} from the ground is {'steep' if angle > STEEP else 'flat'} for a guy or stay"


def _pull(what: str, cable: Cable, scenario: Scenario) -> Iterator[str]:
    strength = scenario.rope[cable.rope].strength
    if cable.tension is not None and strength is not None and cable.tension > 0.4 * strength:
        share = f'{100 * cable.tension / strength:.0f} % of the strength of rope "{cable.rope}"'
        yield f"{what}, tension: {units.both(cable.tension, 'force')} is {share}"


def _parts(scenario: Scenario) -> Iterator[str]:
    named = {end for cable in scenario.cable for end in cable.ends}
    for name, part in scenario.part.items():
        if name not in named:
            yield f'part "{name}": no cable has it in its ends'
        yield from PART_STRENGTH.warn(f'part "{name}", strength', part.strength)


def _ropes(scenario: Scenario) -> Iterator[str]:
    used = {cable.rope for cable in scenario.cable} | set(scenario.raising.ropes if scenario.raising is not None else ())
    for name, rope in scenario.rope.items():
        what = f'rope "{name}"'
        area = math.pi / 4 * rope.diameter**2
        if rope.source is not None:
            yield from _stock(what, name)
            continue
        if name not in used:
            yield f"{what}: no cable is made of it"
        yield from ROPE_DIAMETER.warn(f"{what}, diameter", rope.diameter)
        if rope.mass > 0.0:
            yield from ROPE_DENSITY.warn(f"{what}, mass over the full circle", rope.mass / area)
        yield from ROPE_MODULUS.warn(f"{what}, stiffness over the full circle", rope.stiffness / area)
        yield from ROPE_STRESS.warn(f"{what}, strength over the full circle", None if rope.strength is None else rope.strength / area)
        yield from EXPANSION.warn(f"{what}, expansion", rope.expansion)
        yield from _drag(what, rope.drag)


def _stock(what: str, name: str) -> Iterator[str]:
    """What of a catalogue rope may not pass in silence, in one."""
    found = stock.find(name)
    cautions = [] if found is None else [*stock.cautions(found)]
    if cautions:
        yield f"{what} of the catalogue: {'; '.join(cautions)}"


def _material(what: str, material: Material) -> Iterator[str]:
    yield from MATERIAL_DENSITY.warn(f"{what}, density", material.density)
    yield from MATERIAL_MODULUS.warn(f"{what}, modulus", material.modulus)
    yield from MATERIAL_YIELD.warn(f"{what}, yield", material.yield_)
    yield from EXPANSION.warn(f"{what}, expansion", material.expansion)
    if not 0.02 * material.modulus <= material.shear_modulus <= 0.5 * material.modulus:
        yield f"{what}, shear_modulus: {units.both(material.shear_modulus, 'pressure')} is out of proportion to the modulus"


def _weather(scenario: Scenario) -> Iterator[str]:
    if scenario.wind is not None:
        yield from WIND_SPEED.warn("wind, speed", scenario.wind.speed)
        yield from AVERAGING.warn("wind, averaging", scenario.wind.averaging)
        yield from WIND_HEIGHT.warn("wind, height", scenario.wind.height)
        yield from AIR.warn("wind, air_density", scenario.wind.air_density)
        yield from scenario.wind.warnings
        yield from _profile(scenario, scenario.wind.profile)
    if scenario.ice is not None:
        yield from ICE_THICKNESS.warn("ice, thickness", scenario.ice.thickness)
        yield from ICE_DENSITY.warn("ice, density", scenario.ice.density)
        yield from ice.cautions(scenario.ice)
    yield from TEMPERATURE.warn("setting, temperature", scenario.setting.temperature)
    for case in scenario.case:
        what = f'case "{case.name}"'
        if case.temperature != scenario.setting.temperature:
            yield from TEMPERATURE.warn(f"{what}, temperature", case.temperature)
        for name in ("dead", "wind", "ice"):
            if getattr(case, name) > GREATEST_FACTOR:
                yield f"{what}, {name}: a factor of {getattr(case, name):g} is more than {GREATEST_FACTOR:g}"
        if case.dead == 0.0:
            yield f"{what}, dead: 0 takes all weights away"


def _profile(scenario: Scenario, profile: Profile) -> Iterator[str]:
    if profile.kind == "power" and profile.exponent > 0.5:
        yield f"wind, power: {profile.exponent:g} is more than 0.5"
    for spar in scenario.spar:
        if profile.kind == "en1991" and spar.length > EN_HIGHEST:
            yield f'spar "{spar.name}": {units.both(spar.length, "length")} long; the profile of EN 1991-1-4 is given up to 200 m'


def _cold_sections(scenario: Scenario) -> Iterator[str]:
    """Sections whose change of length with temperature is not known although a case asks for it."""
    if all(case.temperature == scenario.setting.temperature for case in scenario.case):
        return
    for spar in scenario.spar:
        places = [
            str(place + 1)
            for place, section in enumerate(spar.section)
            if section.material is None or scenario.material[section.material].expansion is None
        ]
        if places:
            text = "no expansion is known; its change of length with temperature is left out"
            yield f'spar "{spar.name}", section {", ".join(places)}: {text}'
