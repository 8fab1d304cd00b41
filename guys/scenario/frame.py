"""Rules on spars: their feet, bases, sections and fittings."""

from __future__ import annotations

import math
from collections.abc import Iterator

from guys import units
from guys.catalogue import tubes
from guys.scenario.draft import Draft
from guys.scenario.keys import Finding, Key, clipped
from guys.scenario.lattice import Lattice
from guys.scenario.model import MOST_OPEN, Fitting, HeelFoot, Section, Spar, Tube

OVERSHOOT = 1e-9
"""An attachment may lie beyond the head by this part of the spar's length: what the conversion of feet and of sums can add."""

SAME_AREA = 0.01
"""Share by which an area may differ from width by height by solidity: both are written rounded."""

_OF_SHAPE = ("mass", "EA", "EI", "EI_x", "EI_y", "GJ", "width", "iced_mass", "iced_width")
_CAPACITIES = ("capacity_axial", "capacity_bending", "capacity_shear", "capacity_torsion")


def findings(draft: Draft) -> Iterator[Finding]:
    """Every fault of the spars."""
    looped = loops(draft)
    yield from looped
    spars = draft.spars()
    for index, spar in enumerate(draft.spar):
        if spar is not None:
            key: Key = ("spar", index)
            yield from _heel(spar, key, spars)
            yield from _base(spar, key)
            for place, section in enumerate(spar.section):
                yield from _section(section, (*key, "section", place), spar.rigid)
            for place, fitting in enumerate(spar.fitting):
                yield from beyond(spar, fitting.at, (*key, "fitting", place, "at"))
                yield from _fitting(fitting, (*key, "fitting", place))
    yield from _standing(draft)


def loops(draft: Draft) -> list[Finding]:
    """Spars that carry themselves, alone or round a loop; one finding for each loop."""
    spars, found, judged = draft.spars(), [], set[str]()
    for name in spars:
        chain: list[str] = []
        here: str | None = name
        while here is not None and here not in chain and here not in judged:
            chain.append(here)
            here = _carrier(spars, here)
        judged.update(chain)
        if here in chain:
            ring = chain[chain.index(here) :]
            text = "a spar cannot carry itself" if len(ring) == 1 else f"spars carry each other in a loop: {_ring(ring)}"
            found.append(Finding(("spar", spars[ring[0]][0], "foot", "spar"), text))
    return found


def _ring(ring: list[str]) -> str:
    return " on ".join(f'"{clipped(name)}"' for name in (*ring, ring[0]))


def _carrier(spars: dict[str, tuple[int, Spar]], name: str) -> str | None:
    foot = spars[name][1].foot
    return foot.spar if isinstance(foot, HeelFoot) and foot.spar in spars else None


def beyond(spar: Spar, at: float, key: Key) -> Iterator[Finding]:
    """An attachment past the head of its spar."""
    if at > spar.length * (1.0 + OVERSHOOT):
        length = units.both(spar.length, "length")
        yield Finding(key, f'{units.both(at, "length")} is beyond spar "{clipped(spar.name)}", which is {length} long')


def _heel(spar: Spar, key: Key, spars: dict[str, tuple[int, Spar]]) -> Iterator[Finding]:
    if isinstance(spar.foot, HeelFoot) and spar.foot.spar in spars:
        yield from beyond(spars[spar.foot.spar][1], spar.foot.at, (*key, "foot", "at"))
        if spar.plate is not None:
            yield Finding((*key, "plate"), "a heel has no plate on the ground; leave plate out")
        if spar.friction is not None:
            yield Finding((*key, "friction"), "a heel does not slide on the ground; leave friction out")


def _base(spar: Spar, key: Key) -> Iterator[Finding]:
    base = ((*key, "base"),)
    if spar.base == "sprung" and spar.base_stiffness is None:
        yield Finding((*key, "base_stiffness"), 'missing; base = "sprung" needs it, such as base_stiffness = "50 kN m/rad"', base)
    if spar.base != "sprung" and spar.base_stiffness is not None:
        yield Finding((*key, "base_stiffness"), f'base = "{spar.base}" has no stiffness; write base = "sprung" or leave it out', base)
    if spar.base != "hinged" and spar.hinge_axis is not None:
        yield Finding((*key, "hinge_axis"), f'base = "{spar.base}" has no axis; write base = "hinged" or leave it out', base)


def _section(section: Section, key: Key, rigid: bool) -> Iterator[Finding]:
    if section.tube is not None and section.lattice is not None:
        yield Finding((*key, "lattice"), "a tube is given too; a section has one or the other")
    elif section.tube is not None:
        yield from _tube(section, section.tube, key)
    elif section.lattice is not None:
        yield from _lattice(section, section.lattice, key)
    else:
        yield from _outright(section, key, rigid)
    yield from _shape(section, key)
    if section.EI is not None and (section.EI_x is not None or section.EI_y is not None):
        yield Finding((*key, "EI"), "EI stands beside EI_x or EI_y; give EI alone, or EI_x and EI_y")
    yield from _capacities(section, key)
    if section.iced_mass is not None and section.mass is not None and section.iced_mass < section.mass:
        yield Finding((*key, "iced_mass"), "less than mass; iced_mass is the whole mass with the ice on it")
    if section.iced_width is not None and section.width is not None and section.iced_width < section.width:
        yield Finding((*key, "iced_width"), "less than width; iced_width is the whole width with the ice on it")


def _capacities(section: Section, key: Key) -> Iterator[Finding]:
    """Axial force and bending act together, so their capacities are given together; shear and torsion come with them."""
    given = [name for name in _CAPACITIES if getattr(section, name) is not None]
    for name in _CAPACITIES[:2]:
        if given and name not in given:
            yield Finding((*key, name), f"missing; it is needed with {' and '.join(given)}", tuple((*key, n) for n in given))


def _tube(section: Section, tube: Tube, key: Key) -> Iterator[Finding]:
    if tube.wall > tube.diameter / 2 * (1.0 + OVERSHOOT):
        yield Finding((*key, "tube", "wall"), "more than half the diameter; a solid bar has a wall of half its diameter")
    yield from _made(section, key, "tube", _OF_SHAPE)


def _lattice(section: Section, lattice: Lattice, key: Key) -> Iterator[Finding]:
    legs, lacing = lattice.legs, lattice.lacing
    face = units.both(lattice.face, "length", ("mm", "in"))
    if legs.diameter >= lattice.face:
        yield Finding((*key, "lattice", "face"), f"{face} from leg to leg, axis to axis, leaves no room between the legs")
    if tubes.area(lacing.diameter, lacing.wall) > tubes.area(legs.diameter, legs.wall):
        yield Finding((*key, "lattice", "lacing"), "has more metal than a leg; are legs and lacing swapped?")
    yield from _made(section, key, "lattice", (*_OF_SHAPE, "GA"))


def _made(section: Section, key: Key, shape: str, follows: tuple[str, ...]) -> Iterator[Finding]:
    """What a section made of a shape and a material needs and must not say."""
    if section.material is None:
        yield Finding((*key, "material"), f'missing; a {shape} needs one, such as material = "steel"')
    for name in follows:
        if getattr(section, name) is not None:
            yield Finding((*key, name), f"follows from the {shape}; leave it out, or give the section outright without {shape}")


def _shape(section: Section, key: Key) -> Iterator[Finding]:
    """What only some shapes have."""
    given, shape = section.model_fields_set, ((*key, "shape"), (*key, "tube"))
    if section.tube is not None and section.shape is not None:
        yield Finding((*key, "shape"), "a tube is round; leave shape out", ((*key, "tube"),))
    elif section.lattice is not None and section.shape is not None:
        yield Finding((*key, "shape"), "a lattice has a coefficient of its own; leave shape out", ((*key, "lattice"),))
    elif section.shape is not None and section.width is None:
        yield Finding((*key, "width"), f'missing; shape = "{section.shape}" is that of a width', shape)
    if section.shape == "rectangle" and section.depth is None:
        yield Finding((*key, "depth"), 'missing; shape = "rectangle" needs it, such as depth = "60 mm"', shape)
    for name in sorted({"depth", "corner", "face"} & given) if section.shape != "rectangle" else ():
        yield Finding((*key, name), 'only a rectangle has it; write shape = "rectangle" or leave it out', shape)
    if section.surface is not None and section.tube is None and section.shape != "round":
        yield Finding((*key, "surface"), "only round sections have a coefficient that depends on it; leave it out", shape)
    sides = [side for side in (section.width, section.depth) if side is not None]
    if section.corner > 0.5 * min(sides, default=math.inf) * (1.0 + OVERSHOOT):
        yield Finding((*key, "corner"), "more than half the lesser side", ((*key, "width"), (*key, "depth")))


def _outright(section: Section, key: Key, rigid: bool) -> Iterator[Finding]:
    lacking = [] if section.mass is not None else ["mass"]
    if not rigid:
        lacking += [name for name in ("EA", "GJ") if getattr(section, name) is None]
        if section.EI is None:
            lacking += [name for name in ("EI_x", "EI_y") if getattr(section, name) is None]
    if {"EI_x", "EI_y"} <= set(lacking):
        lacking = ["EI (or EI_x and EI_y)" if name == "EI_x" else name for name in lacking if name != "EI_y"]
    if lacking:
        after = tuple((*key, name) for name in ("mass", "EA", "EI", "EI_x", "EI_y", "GJ", "tube", "lattice"))
        given = any(getattr(section, name) is not None for name in _OF_SHAPE)
        text = f"lacks {', '.join(lacking)}" if given else f"give tube or lattice and material, or outright: {', '.join(lacking)}"
        yield Finding(key, text, after)


def _fitting(fitting: Fitting, key: Key) -> Iterator[Finding]:
    given = fitting.model_fields_set
    shape = ((*key, "shape"),)
    if fitting.shape == "flat":
        if fitting.face is None:
            yield Finding((*key, "face"), 'missing; shape = "flat" needs the bearing of its normal, such as face = "90 deg"', shape)
        if fitting.area is None and (fitting.width is None or fitting.height is None):
            yield Finding((*key, "area"), 'missing; shape = "flat" needs it, such as area = "6 m2", or width and height', shape)
    else:
        for name in sorted({"face", "face_tilt"} & given):
            yield Finding((*key, name), f'shape = "{fitting.shape}" has no face; write shape = "flat" or leave it out', shape)
    yield from _size(fitting, key)
    if fitting.drag is not None and fitting.area is None and (fitting.width is None or fitting.height is None):
        yield Finding((*key, "area"), "missing; drag is given for it")
    if fitting.iced_mass is not None and fitting.iced_mass < fitting.mass:
        yield Finding((*key, "iced_mass"), "less than mass; iced_mass is the whole mass with the ice on it", ((*key, "mass"),))
    if fitting.iced_area is not None and fitting.iced_area < (fitting.area or 0.0):
        yield Finding((*key, "iced_area"), "less than area; iced_area is the whole area with the ice on it", ((*key, "area"),))


def _size(fitting: Fitting, key: Key) -> Iterator[Finding]:
    """Width and height, and what goes with them."""
    given, shape = fitting.model_fields_set, ((*key, "shape"),)
    has = {"flat": {"width", "height", "solidity", "bar"}, "round": {"width", "height", "surface"}, "any": set()}[fitting.shape]
    for name in sorted({"width", "height", "solidity", "bar", "surface"} & given - has):
        yield Finding((*key, name), f'shape = "{fitting.shape}" does not use it; leave it out, or give the shape that does', shape)
    if fitting.bar is not None and not fitting.open_frame:
        text = f"only an open frame has bars; give solidity up to {MOST_OPEN:g}, or leave bar out"
        yield Finding((*key, "bar"), text, ((*key, "solidity"),))
    if fitting.area is not None and fitting.width is not None and fitting.height is not None:
        made = fitting.width * fitting.height * (fitting.solidity or 1.0)
        if abs(fitting.area - made) > SAME_AREA * made:
            told = f"{units.both(fitting.area, 'area')} is not width by height by solidity, {units.both(made, 'area')}; leave area out"
            yield Finding((*key, "area"), told, tuple((*key, name) for name in ("width", "height", "solidity")))


def _standing(draft: Draft) -> Iterator[Finding]:
    spars = [spar for spar in draft.spar if spar is not None]
    ground = [spar for spar in spars if not isinstance(spar.foot, HeelFoot)]
    held = any(draft.document.get(kind) for kind in ("cable", "guy_level", "raise"))
    if not held and spars and len(spars) == len(draft.spar) and all(spar.base not in ("fixed", "sprung") for spar in ground):
        causes = tuple(("spar", index, "base") for index in range(len(spars)))
        yield Finding(("spar", 0, "base"), "no cable, and no base that is fixed or sprung: nothing holds the structure up", causes)
    if spars and len(spars) == len(draft.spar) and not ground and not loops(draft):
        known = set(draft.spars())
        if all(isinstance(spar.foot, HeelFoot) and spar.foot.spar in known for spar in spars):
            yield Finding(("spar", 0, "foot"), "no spar stands on the ground")
