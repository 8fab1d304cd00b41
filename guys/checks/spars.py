"""Spars: what their sections bear along the length, and the lean of their heads in service cases with wind.

The section forces are those of the deformed state, so bending holds what thrust makes of deflection, and a spar that buckles as a whole
has no equilibrium: what is left to judge is the section itself (`guys.checks.stress`).  It is judged at both ends of every element, in
every case, by what its file gives:

    capacities given outright    1 over |N|/N_c + |M|/M_c, or |V|/V_c + |T|/T_c (common practice: linear interaction)
    tube of a material           yield over von Mises stress; not where the wall buckles before it yields
    lattice of a material        legs and diagonals as pinned bars: buckling load over compression, yield over tension

What has neither, such as a tube of a material that breaks without yielding, is not judged.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from functools import cache

import numpy as np
from numpy.typing import NDArray

from guys import tables, units
from guys.catalogue import tubes
from guys.checks import stress
from guys.checks.items import Demands, Item, group
from guys.lattice import DIAGONALS
from guys.loads import CaseLine
from guys.recovery import Acting
from guys.rotation import Array
from guys.scenario import Scenario
from guys.scenario.lattice import Bar, Lattice
from guys.scenario.model import Material, Section, Spar
from guys.structure import Structure

SECOND_ORDER = "second-order effects and overall buckling are in the forces"


@dataclass(frozen=True)
class Along:
    """Section forces, each (case, station): axial, tension positive [N]; bending, shear, torsion without sign [N m], [N], [N m]."""

    axial: Array
    bending: Array
    shear: Array
    torsion: Array


@dataclass(frozen=True)
class Strength:
    """What a section is judged by: `demand` from what acts along it against `capacity`; NaN, for what is `lacking`: not judged."""

    quantity: str
    unit: str
    capacity: float
    demand: Callable[[Along], Array]
    why: str = ""
    lacking: str = ""
    source: str = ""


def leans(structure: Structure, lines: Sequence[CaseLine], lean: Array) -> Demands:
    """Allowed against found angle between the drawn axis and the line foot-head, one item a spar; lean : (case, spar) [rad]."""
    scenario = structure.scenario
    allowed = scenario.allowables
    items = [
        Item(
            f"spar {s.name}", "lean", "rad", "allowed over found, foot to head against the drawn axis", default="lean" in allowed.defaulted,
            if_loaded=True,
        )
        for s in scenario.spar
    ]  # fmt: skip
    return group(items, np.where(_asked(lines)[:, None], lean, np.nan), allowed.lean, 1.0)


def _asked(lines: Sequence[CaseLine]) -> NDArray[np.bool_]:
    return np.array([not math.isnan(line.wind_from) and line.kind == "service" for line in lines])


def judged(scenario: Scenario) -> list[int]:
    """Spars that have a section with a strength."""
    return [
        k
        for k, spar in enumerate(scenario.spar)
        if not all(math.isnan(s.capacity) for section in spar.section for s in strengths_of(section, scenario.material))
    ]


def sections(structure: Structure, cases: int, acting: Acting) -> Demands:
    """Strength against what acts, one item a section of a spar, at its worst station in every case."""
    scenario = structure.scenario
    strengths = [[strengths_of(section, scenario.material) for section in spar.section] for spar in scenario.spar]
    items, capacity, demand, mode = [], [], [], []
    for k, spar in enumerate(scenario.spar):
        station, which = _stations(structure, k)
        for n, strength in ((n, strength) for n, each in enumerate(strengths[k]) for strength in each):
            mine = np.flatnonzero(which == n)
            worst, at = _worst(strength, acting.get(k), mine, cases)
            items.append(_item(spar, n, strength, station[mine], "spar" in scenario.allowables.defaulted))
            demand.append(worst)
            mode.append(at)
            capacity.append(strength.capacity)
    return group(items, np.stack(demand, axis=1), np.array(capacity), scenario.allowables.spar, np.stack(mode, axis=1))


def _stations(structure: Structure, k: int) -> tuple[Array, NDArray[np.int64]]:
    """Stations of spar k, both ends of every piece [m], and the section each belongs to."""
    mine = structure.pieces.spar == k
    station = structure.pieces.station[mine]
    bounds = np.cumsum([section.length for section in structure.scenario.spar[k].section])[:-1]
    which = np.searchsorted(bounds, station.mean(axis=1), side="right")
    return station.reshape(-1), np.repeat(which, 2)


def _worst(
    strength: Strength, acting: tuple[Array, Array] | None, mine: NDArray[np.int64], cases: int
) -> tuple[Array, NDArray[np.int64]]:
    """Greatest demand of every case and the number of its station; NaN and -1 where the section is not judged."""
    if acting is None or math.isnan(strength.capacity):
        return np.full(cases, np.nan), np.full(cases, -1)
    force, moment = (part.reshape(cases, -1, 3)[:, mine] for part in acting)
    along = Along(
        force[..., 2], np.hypot(moment[..., 0], moment[..., 1]), np.hypot(force[..., 0], force[..., 1]), np.abs(moment[..., 2])
    )
    demand = strength.demand(along)
    at = np.argmax(demand, axis=1)
    return demand[np.arange(cases), at], at


def _item(spar: Spar, n: int, strength: Strength, stations: Array, default: bool) -> Item:
    places = tuple(_place(float(at)) for at in stations) if strength.why else ()
    return Item(
        section_thing(spar, n), strength.quantity, strength.unit, strength.why, strength.lacking, strength.source, default, modes=places,
        allowable="spar",
    )


def section_thing(spar: Spar, n: int) -> str:
    """Section `n` of a spar as findings name it; a spar of one section by itself."""
    return f"spar {spar.name}" + (f", section {n + 1}" if len(spar.section) > 1 else "")


@cache
def _place(station: float) -> str:
    return f"{units.both(station, 'length')} from the foot"


def strengths_of(section: Section, materials: Mapping[str, Material]) -> tuple[Strength, ...]:
    """Everything a section is judged by."""
    if section.capacity_axial is not None or section.lattice is None or section.material is None:
        return (_strength_of(section, materials),)
    material = materials[section.material]
    if material.yield_ is None:
        return (_not_judged(_no_yield(section.material)),)
    return _lattice(section.lattice, material, _source_of_yield(section.material, material))


def _lattice(made: Lattice, material: Material, source: str) -> tuple[Strength, ...]:
    """Legs pressed and pulled, and diagonals, which bear their force either way.

    A leg is held both ways by its faces at every panel point, but only at every second one of a zigzag without horizontals.
    """
    f, E, n, b, p = material.yield_ or math.nan, material.modulus, made.sides, made.face, made.panel
    if max(bar.diameter / bar.wall for bar in (made.legs, made.lacing)) > stress.thinnest(f, E):
        return (_not_judged("the wall of its members buckles before it yields"),)
    apart = 2 * p if made.bracing == "zigzag" else p
    pressed, pulled = _bar(made.legs, apart, material), f * tubes.area(made.legs.diameter, made.legs.wall)
    diagonal, many = _bar(made.lacing, math.hypot(b, p), material), DIAGONALS[made.bracing]
    curve = "EN 1993-1-1 6.3.1.2, curve c, from memory; yield: " + source
    held = f"pinned at both ends, {units.both(apart, 'length')} long, worst orientation; {SECOND_ORDER}"
    return (
        Strength(
            "leg compression", "N", pressed, lambda a: stress.leg_forces(n, b, a.axial, a.bending)[0],
            f"buckling load of a leg over its compression; {held}", source=curve,
        ),
        Strength(
            "leg tension", "N", pulled, lambda a: stress.leg_forces(n, b, a.axial, a.bending)[1],
            f"yield of a leg over its tension, worst orientation, joints not judged; {SECOND_ORDER}", source=source,
        ),
        Strength(
            "lacing force", "N", diagonal, lambda a: stress.diagonal_force(n, b, p, a.shear, a.torsion) / many,
            "buckling load of a diagonal, pinned at its ends, over its force from shear and torsion; welds and joints not judged",
            source=curve,
        ),
    )  # fmt: skip


def _bar(bar: Bar, length: float, material: Material) -> float:
    """Buckling load of a bar [N]."""
    area, second = tubes.area(bar.diameter, bar.wall), tubes.second_moment(bar.diameter, bar.wall)
    return stress.strut(area, second, length, material.modulus, material.yield_ or math.nan)


def _no_yield(material: str) -> str:
    return f"{material} has no yield stress; give capacity_axial and capacity_bending of the section"


def _strength_of(section: Section, materials: Mapping[str, Material]) -> Strength:
    """What a section other than a lattice is judged by."""
    if section.capacity_axial is not None and section.capacity_bending is not None:
        return _outright(section.capacity_axial, section.capacity_bending, section)
    if section.tube is None or section.material is None:
        return _not_judged("given outright without capacity_axial and capacity_bending")
    material = materials[section.material]
    if material.yield_ is None:
        return _not_judged(_no_yield(section.material))
    diameter, wall = section.tube.diameter, section.tube.wall
    if too_thin(section, materials):
        limit = stress.thinnest(material.yield_, material.modulus)
        return _not_judged(f"its wall, diameter over thickness {diameter / wall:.3g}, above {limit:.3g}, buckles before it yields")
    return Strength(
        "stress", "Pa", material.yield_,
        lambda a: stress.tube_stress(diameter, wall, a.axial, a.bending, a.shear, a.torsion),
        f"yield over von Mises stress of axial force, bending, shear and torsion; {SECOND_ORDER}",
        source=_source_of_yield(section.material, material),
    )  # fmt: skip


def too_thin(section: Section, materials: Mapping[str, Material]) -> bool:
    """Whether a tube's wall buckles before it yields."""
    material = materials.get(section.material or "")
    if section.tube is None or material is None or material.yield_ is None:
        return False
    return section.tube.diameter / section.tube.wall > stress.thinnest(material.yield_, material.modulus)


def _outright(axial: float, bending: float, section: Section) -> Strength:
    shear, torsion = (math.inf if c is None else c for c in (section.capacity_shear, section.capacity_torsion))
    missing = [name for name, c in (("shear", shear), ("torsion", torsion)) if math.isinf(c)]
    left = f"; {' and '.join(missing)} not judged" if missing else ""
    return Strength(
        "use of its capacities", "", 1.0,
        lambda a: stress.outright_use(a.axial, a.bending, a.shear, a.torsion, (axial, bending, shear, torsion)),
        f"1 over the sum of axial force and bending over their capacities{left}; {SECOND_ORDER}",
        source="capacities given",
    )  # fmt: skip


def _not_judged(lacking: str) -> Strength:
    return Strength("stress", "Pa", math.nan, lambda a: np.full(a.axial.shape, np.nan), lacking=lacking)


def _source_of_yield(name: str, material: Material) -> str:
    """Where the yield stress comes from: the built-in table, unless the file has a material of that name."""
    for row in tables.rows("materials"):
        if row["name"] == name and tables.number(row["yield"]) == material.yield_:
            return row["source"]
    return "yield given"
