"""Load cases: case lines times wind directions, superposed from unit loads.

`dead` multiplies weights and fixed loads, `wind` the pressure, `ice` the weight of ice; iced widths apply wherever ice > 0.  The still-air
setting case is dead load alone.  Wind and heights are taken on the setting position, given as `Placed`.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from guys.loads import dead, wind
from guys.loads.spread import Weights, weights
from guys.rotation import Array, turned
from guys.scenario import Scenario
from guys.structure import Points, Structure


@dataclass(frozen=True)
class CaseLine:
    """One case in one wind direction; wind_from [rad], NaN without wind; temperature [K]; without: cables taken away."""

    name: str
    wind_from: float
    dead: float
    wind: float
    ice: float
    temperature: float
    without: tuple[str, ...] = ()


@dataclass(frozen=True)
class Placed:
    """A position of the structure, for loads: u (node, 3) [m], psi (node, 3, 3) = R - I, unstressed length (cable,) [m]."""

    u: Array
    psi: Array
    length: Array


@dataclass(frozen=True)
class LoadCases:
    """force (case, node, 3) [N]; dyad (case, node, 3, 3) [N m]; cable_load (case, cable, 3) [N/m] per unstressed length at the setting
    temperature; warming (case,) [K] above the setting; present (case, cable), 1 or 0, or a share while a cable fades from a path;
    wind_force (case,) [N] the greatest of the summed wind, for the reference force; lines: what each case is."""

    force: Array
    dyad: Array
    cable_load: Array
    warming: Array
    present: Array
    weight: Array
    wind_force: Array
    lines: tuple[CaseLine, ...]

    def take(self, rows: NDArray[np.int64]) -> LoadCases:
        """The cases `rows`, in that order."""
        return LoadCases(
            self.force[rows], self.dyad[rows], self.cable_load[rows], self.warming[rows], self.present[rows],
            self.weight[rows], self.wind_force[rows], tuple(self.lines[r] for r in rows),
        )  # fmt: skip

    def between(self, start: LoadCases, share: Array) -> LoadCases:
        """From the one case of `start` toward each case here: all departures together, at the shares (case,) of the way."""

        def mix(a: Array, b: Array) -> Array:
            s = share.reshape(-1, *([1] * (b.ndim - 1)))
            return np.asarray((1 - s) * a + s * b)

        return LoadCases(
            mix(start.force, self.force), mix(start.dyad, self.dyad), mix(start.cable_load, self.cable_load), mix(start.warming, self.warming),
            mix(start.present, self.present), mix(start.weight, self.weight), mix(start.wind_force, self.wind_force), self.lines,
        )  # fmt: skip


def setting_line(scenario: Scenario) -> CaseLine:
    """Still air, dead load and initial tensions alone."""
    return CaseLine("setting", math.nan, 1.0, 0.0, 0.0, scenario.setting.temperature)


def lines_of(scenario: Scenario, directions: Sequence[float] | None = None) -> tuple[CaseLine, ...]:
    """The scenario's cases, each with wind once for every direction ([rad]; default: the file's)."""
    out = []
    for case in scenario.case:
        bearings: Sequence[float] = [math.nan]
        if case.wind > 0 and scenario.wind is not None:
            bearings = scenario.wind.directions if directions is None else directions
        out += [CaseLine(case.name, b, case.dead, case.wind, case.ice, case.temperature, case.without) for b in bearings]
    return tuple(out)


def assemble(structure: Structure, lines: Sequence[CaseLine], placed: Placed) -> LoadCases:
    """Loads of every line on the structure as placed."""
    scenario = structure.scenario
    w = weights(structure.pieces)
    factor = np.array([[c.dead, c.wind, c.ice] for c in lines])
    f_dead, q_dead = dead.dead(structure, w)
    f_ice, q_ice = dead.ice(structure, w)
    f_wind, q_wind, c_wind = _wind(structure, lines, placed, w)
    d, v, i = (factor[:, k] for k in range(3))
    force = d[:, None, None] * f_dead + i[:, None, None] * f_ice + v[:, None, None] * f_wind
    dyad = d[:, None, None, None] * q_dead + i[:, None, None, None] * q_ice + v[:, None, None, None] * q_wind
    w_cable, w_ice = dead.cable_weight(structure)
    hangs = scenario.analysis.cable == "catenary"
    down = (d[:, None] * w_cable + i[:, None] * w_ice)[..., None] * dead.DOWN
    cable = (down + v[:, None, None] * c_wind / placed.length[:, None]) * hangs
    names = [c.name for c in scenario.cable]
    present = np.array([[name not in c.without for name in names] for c in lines], dtype=float).reshape(len(lines), -1)
    on_cables = np.linalg.norm(cable, axis=-1) * placed.length * present
    return LoadCases(
        force=force,
        dyad=dyad,
        cable_load=cable,
        warming=np.array([c.temperature - scenario.setting.temperature for c in lines]),
        present=present,
        weight=np.linalg.norm((d[:, None, None] * f_dead + i[:, None, None] * f_ice).sum(axis=1), axis=-1) + on_cables.sum(axis=1),
        wind_force=v * np.linalg.norm(f_wind.sum(axis=1), axis=-1),
        lines=tuple(lines),
    )


def _wind(structure: Structure, lines: Sequence[CaseLine], placed: Placed, w: Weights) -> tuple[Array, Array, Array]:
    cases, nodes, cables = len(lines), structure.nodes, len(structure.cables.EA)
    force, dyad, cable = np.zeros((cases, nodes, 3)), np.zeros((cases, nodes, 3, 3)), np.zeros((cases, cables, 3))
    blown = np.array([k for k, c in enumerate(lines) if c.wind != 0], dtype=np.int64)
    blows = structure.scenario.wind
    if len(blown) == 0 or blows is None:
        return force, dyad, cable
    bearing = np.array([lines[k].wind_from for k in blown])
    iced = np.array([lines[k].ice > 0 for k in blown])
    foot = structure.position[structure.foot] + placed.u[structure.foot]
    start, end = (_on_axis(structure, placed, k) for k in (0, 1))
    f, q = wind.on_spars(structure, blows, w, start, end, foot, bearing, iced)
    fp, qp = wind.on_fittings(structure, blows, where(structure, placed, structure.fittings.point), foot, bearing, iced)
    force[blown], dyad[blown] = f + fp, q + qp
    a, b = where(structure, placed, structure.cables.a), where(structure, placed, structure.cables.b)
    cable[blown] = wind.on_cables(structure, blows, a, b, foot, bearing, iced)
    return force, dyad, cable


def where(structure: Structure, placed: Placed, points: Points) -> Array:
    """(point, 3) [m] points of the placed structure."""
    return structure.position[points.node] + placed.u[points.node] + turned(placed.psi[points.node], points.arm)


def _on_axis(structure: Structure, placed: Placed, end: int) -> Array:
    """Start (0) or end (1) of every piece of spar: a node of an elastic spar, a point on the arm of a rigid one."""
    pieces = structure.pieces
    node = pieces.low if end == 0 else pieces.high
    arm = np.where(pieces.rigid[:, None], pieces.station[:, end, None] * pieces.axis, 0.0)
    return structure.position[node] + placed.u[node] + turned(placed.psi[node], arm)


def as_drawn(structure: Structure, length: Array) -> Placed:
    """The drawn position."""
    return Placed(np.zeros((structure.nodes, 3)), np.zeros((structure.nodes, 3, 3)), length)
