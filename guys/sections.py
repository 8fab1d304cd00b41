"""What a section of a spar is made of: mass, stiffness and width per length, bare and iced.

Round tube of diameter D and wall w: A = pi (D - w) w, I = pi/64 (D^4 - (D - 2w)^4), J = 2 I; no shear flexibility is taken
(a tube's is below 1e-3 of its bending at ten diameters).  A lattice is worked out in `guys.lattice`.  Ice on either is that of
`guys.icing`, of a lattice on every member, before any effect of height.  Properties given outright are used as they are; their iced mass
and width are the section's with the ice on.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from guys import lattice
from guys.catalogue import tubes
from guys.icing import coat
from guys.rotation import Array
from guys.scenario import Ice, Lattice, Section
from guys.scenario.model import Material


@dataclass(frozen=True)
class Properties:
    """mass [kg/m], EA [N], EI_x, EI_y, GJ [N m2], GA [N] (inf: none), width [m], iced_mass [kg/m], iced_width [m], expansion [1/K],
    drag [-] (NaN: chosen from the shape), bar [m]: diameter of a tube, whose ice may change with height (NaN: none).
    """

    mass: float
    EA: float
    EI_x: float
    EI_y: float
    GJ: float
    GA: float
    width: float
    iced_mass: float
    iced_width: float
    expansion: float
    drag: float
    bar: float


def properties(section: Section, materials: dict[str, Material], ice: Ice | None) -> Properties:
    """Properties of one section; NaN stands for a stiffness not given (rigid spars need none)."""
    material = materials[section.material] if section.material is not None else None
    expansion = (material.expansion if material is not None else None) or 0.0
    drag = section.drag if section.drag is not None else math.nan
    given = _outright(section)
    made = None if material is None else _made(section, material, ice)
    if made is not None:
        given = {key: value if value is not None else made[key] for key, value in given.items()}
    number = {key: math.nan if value is None else value for key, value in given.items()}
    if given["GA"] is None:
        number["GA"] = math.inf
    for bare, iced in (("mass", "iced_mass"), ("width", "iced_width")):
        if given[iced] is None:
            number[iced] = number[bare] if given[bare] is not None else 0.0
        if given[bare] is None:
            number[bare] = 0.0
    return Properties(**number, expansion=expansion, drag=drag, bar=math.nan if section.tube is None else section.tube.diameter)


def _outright(section: Section) -> dict[str, float | None]:
    return {
        "mass": section.mass,
        "EA": section.EA,
        "EI_x": section.EI_x if section.EI_x is not None else section.EI,
        "EI_y": section.EI_y if section.EI_y is not None else section.EI,
        "GJ": section.GJ,
        "GA": section.GA,
        "width": section.width,
        "iced_mass": section.iced_mass,
        "iced_width": section.iced_width,
    }


def _made(section: Section, material: Material, ice: Ice | None) -> dict[str, float | None] | None:
    """What follows from the section's shape; None where it has none."""
    if section.tube is not None:
        return _tube(section.tube.diameter, section.tube.wall, material, ice)
    return None if section.lattice is None else _lattice(section.lattice, material, ice)


def _lattice(made: Lattice, material: Material, ice: Ice | None) -> dict[str, float | None]:
    stiff, mass = lattice.stiffness(made, material.modulus), lattice.mass(made, material.density)
    ice_mass, iced_width = coated(made, ice)
    return {
        "mass": mass,
        "EA": stiff.EA,
        "EI_x": stiff.EI,
        "EI_y": stiff.EI,
        "GJ": stiff.GJ,
        "GA": stiff.GA,
        "width": lattice.face(made).solid,
        "iced_mass": mass + float(ice_mass),
        "iced_width": float(iced_width),
    }


def coated(made: Lattice, ice: Ice | None, z: Array | None = None) -> tuple[Array, Array]:
    """Mass of ice per length [kg/m] on every member of a lattice at heights z [m], and width with it [m]; z None: before any effect of
    height."""
    bars = [np.full(() if z is None else z.shape, bar.diameter) for bar in (made.legs, made.lacing)]
    (on_legs, legs), (on_lacing, lacing) = (coat(bar, ice, z) for bar in bars)
    return np.asarray(lattice.along(made, on_legs, on_lacing)), lattice.solid(made, legs, lacing)


def faces(made: Lattice, ice: Ice | None) -> tuple[lattice.Face, lattice.Face]:
    """A face of a lattice bare and with ice, before any effect of height."""
    legs, lacing = (float(coat(np.array(bar.diameter), ice)[1]) for bar in (made.legs, made.lacing))
    return lattice.face(made), lattice.face(made, legs, lacing)


def _tube(diameter: float, wall: float, material: Material, ice: Ice | None) -> dict[str, float | None]:
    area, second = tubes.area(diameter, wall), tubes.second_moment(diameter, wall)
    ice_mass, iced_width = coat(np.array(diameter), ice)
    return {
        "mass": material.density * area,
        "EA": material.modulus * area,
        "EI_x": material.modulus * second,
        "EI_y": material.modulus * second,
        "GJ": material.shear_modulus * 2 * second,
        "GA": None,
        "width": diameter,
        "iced_mass": material.density * area + float(ice_mass),
        "iced_width": float(iced_width),
    }
