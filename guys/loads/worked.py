"""The loads of one case at one height of one spar, and on one cable, step by step: what a hand repeats.

    spar    force per length = factor q(z) C b h,   h = |n|^2, n what is square to the axis in the unit vector along the wind
    cable   force = factor q_m C d c h,             q_m the mean pressure between its ends, c its chord

On a rectangle h is the hold of both faces together.  The pieces are those that `guys.loads.cases` puts together, taken at a point.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from guys.constants import STANDARD_GRAVITY
from guys.loads.cases import CaseLine, Placed, on_axis, where
from guys.loads.drag import chosen
from guys.loads.iced import ice_at
from guys.loads.pressure import across, blowing_to, mean_pressure, pressure
from guys.rotation import Array
from guys.structure import Structure


@dataclass(frozen=True)
class SparLoad:
    """spar by name; section from 1; station [m] from its foot; z [m] above it; q [Pa]; coefficient; width [m]; hold: share h of the
    wind that is across; wind, weight [N/m] per length, factors of the case in it; mass [kg/m] with ice times its factor"""

    spar: str
    section: int
    station: float
    z: float
    q: float
    coefficient: float
    width: float
    hold: float
    wind: float
    mass: float
    weight: float


@dataclass(frozen=True)
class CableLoad:
    """cable by name; low, high [m] heights of its ends; q [Pa] the mean pressure; coefficient; width, chord [m]; hold; wind [N] in all"""

    cable: str
    low: float
    high: float
    q: float
    coefficient: float
    width: float
    chord: float
    hold: float
    wind: float


@dataclass(frozen=True)
class Worked:
    """line : the case;  factor : on the wind's pressure, what ice takes off included;  cable None: no cable holds wind"""

    line: CaseLine
    factor: float
    spar: SparLoad
    cable: CableLoad | None


def worked(structure: Structure, placed: Placed, line: CaseLine, spar: int, station: float, cable: int | None) -> Worked:
    """One case with wind, at a station [m] of a spar and on a cable, on the structure as placed."""
    scenario = structure.scenario
    reduced = scenario.ice.wind_factor if scenario.ice is not None and line.ice > 0 else 1.0
    factor = line.wind * line.drag * reduced
    of_cable = None if cable is None or scenario.analysis.cable != "catenary" else _cable(structure, placed, line, cable, factor)
    return Worked(line, factor, _spar(structure, placed, line, spar, station, factor), of_cable)


def _spar(structure: Structure, placed: Placed, line: CaseLine, spar: int, station: float, factor: float) -> SparLoad:
    scenario, pieces = structure.scenario, structure.pieces
    wind = scenario.wind
    assert wind is not None
    start, end = (on_axis(structure, placed, k) for k in (0, 1))
    n = int(np.flatnonzero((pieces.spar == spar) & (pieces.station[:, 0] <= station))[-1])
    low, high = pieces.station[n]
    foot = structure.position[structure.foot[spar]] + placed.u[structure.foot[spar]]
    z = float((start[n] + (station - low) / (high - low) * (end[n] - start[n]))[2] - foot[2])
    axis = (end - start) / np.linalg.norm(end - start, axis=-1, keepdims=True)
    iced = np.array([line.ice > 0])
    none = np.zeros(len(structure.cables.EA))
    ice = ice_at(structure, np.full((len(pieces.spar), 1), z), none, none)
    held = chosen.bars(structure)
    q = float(pressure(wind, np.array(z)))
    coefficient = float(chosen.on_bars(held, wind, np.full((1, len(pieces.spar), 1), min(factor, 1.0) * q), iced)[0, n, 0])
    width = float(ice.width[n, 0]) if iced[0] else float(held.width[chosen.BARE, n])
    hold = float(np.linalg.norm(chosen.pattern(held, blowing_to(np.array([line.wind_from])), axis, iced)[0, n]))
    mass = line.dead * float(pieces.mass[n]) + line.ice * float(ice.mass[n, 0])
    return SparLoad(
        scenario.spar[spar].name, int(pieces.section[n]) + 1, station, z, q, coefficient, width, hold,
        factor * q * coefficient * width * hold, mass, STANDARD_GRAVITY * mass,
    )  # fmt: skip


def _cable(structure: Structure, placed: Placed, line: CaseLine, k: int, factor: float) -> CableLoad:
    scenario, cables = structure.scenario, structure.cables
    wind = scenario.wind
    assert wind is not None
    a, b = where(structure, placed, cables.a), where(structure, placed, cables.b)
    foot = structure.position[structure.foot] + placed.u[structure.foot]
    low, high = a[:, 2] - foot[cables.spar, 2], b[:, 2] - foot[cables.spar, 2]
    chord = float(np.linalg.norm((b - a)[k]))
    q = mean_pressure(wind, low, high)
    iced = np.full((1, len(q)), line.ice > 0 and scenario.cable[k].name not in line.bare)
    coefficient = float(chosen.on_cables(cables, scenario, wind, min(factor, 1.0) * q[None], iced)[0, k])
    ice = ice_at(structure, np.zeros((len(structure.pieces.spar), 1)), low, high)
    width = float(ice.cable_width[k]) if iced[0, k] else float(cables.diameter[k])
    hold = float(np.linalg.norm(_across(line, (b - a)[k] / chord)))
    return CableLoad(
        scenario.cable[k].name, float(low[k]), float(high[k]), float(q[k]), coefficient, width, chord, hold,
        factor * float(q[k]) * coefficient * width * chord * hold,
    )  # fmt: skip


def _across(line: CaseLine, axis: Array) -> Array:
    return across(blowing_to(np.array(line.wind_from)), axis)
