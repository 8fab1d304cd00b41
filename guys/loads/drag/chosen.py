"""Which force coefficient a piece of spar, a cable or a fitting takes: the user's own, or one chosen from its shape.

The user's `drag` holds as it is, bare and with ice.  What is chosen follows the shape, and `wind.coefficients` where two standards differ:

    tube, round       by Reynolds number and roughness, 7.9 of EN 1991-1-4, or D sqrt(q) of ASCE 7
    rectangle, ...    `guys.loads.drag.angular`
    lattice           `guys.loads.drag.lattice`, on the solid area of one face; a square as with the wind on its diagonal
    cable             1.2 (EN 1991-1-4 7.9, subcritical: read; for stranded cables at every Reynolds number: from memory), or, with a
                      `surface`, as a round bar
    round with ice    ice.drag, else 1.2 at every Reynolds number: ice is rough, so nothing is gained above the critical one

The Reynolds number belongs to the pressure at the height in the case's own wind; where the case's factor on the wind is above 1, to that of
the reference wind, since such a factor is one of safety.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from guys.loads.drag import angular, lattice, round
from guys.rotation import Array, dot
from guys.scenario import Lattice, Scenario, Section
from guys.scenario.model import Wind
from guys.scenario.shapes import Rules, roughness
from guys.sections import faces
from guys.structure import Cables, Structure

Flags = NDArray[np.bool_]
BARE, ICED = 0, 1
END_ON = 1e-3
"""Sine of the angle between a face's bearing and its spar below which the bearing tells nothing."""


@dataclass(frozen=True)
class Bars:
    """How the wind takes hold of pieces, bare and with ice.

    width, fixed : (2, piece) [m], [-], fixed NaN where the bare coefficient depends on the wind;  roughness : (piece,) [m]
    face : (piece, 3) unit vector square to the first face of a rectangle and to the drawn spar, NaN of all else
    second : (2, piece) coefficient times width of a rectangle's second face, over that of the first; 1 of all else
    """

    width: Array
    fixed: Array
    roughness: Array
    face: Array
    second: Array

    @property
    def by_wind(self) -> Flags:
        """Pieces whose bare coefficient depends on the wind."""
        return np.asarray(np.isnan(self.fixed[BARE]))


def bars(structure: Structure) -> Bars:
    """Of all pieces of a structure."""
    pieces, scenario = structure.pieces, structure.scenario
    width = np.stack([pieces.width, pieces.iced_width])
    fixed = np.stack([pieces.drag, pieces.drag])
    rough, face, second = np.full(len(pieces.spar), np.nan), np.full((len(pieces.spar), 3), np.nan), np.ones_like(width)
    for n in np.flatnonzero(np.isnan(pieces.drag)):
        spar = scenario.spar[pieces.spar[n]]
        section = spar.section[pieces.section[n]]
        if section.tube is not None or section.shape == "round":
            fixed[ICED, n], rough[n] = iced_round(scenario), roughness(section.surface)
        elif section.lattice is not None:
            fixed[:, n] = of_lattice(section.lattice, scenario)
        elif section.shape == "rectangle":
            face[n] = _face(section, structure.axes[pieces.spar[n]])
            fixed[:, n], second[:, n] = _rectangle(section, width[:, n])
        else:
            fixed[:, n] = of_section(section)
    return Bars(width, fixed, rough, face, second)


def _face(section: Section, axes: Array) -> Array:
    """Unit vector square to the first face: of the level bearing what is square to the spar; the second local axis where none is given."""
    bearing = 0.0 if section.face is None else section.face
    level = np.array([np.sin(bearing), np.cos(bearing), 0.0])
    across = level - (level @ axes[2]) * axes[2]
    size = float(np.linalg.norm(across))
    return np.asarray(axes[1] if section.face is None or size < END_ON else across / size)


def iced_round(scenario: Scenario) -> float:
    """Coefficient of round bars with ice on them."""
    given = scenario.ice.drag if scenario.ice is not None else None
    return round.SUBCRITICAL if given is None else given


def of_lattice(made: Lattice, scenario: Scenario) -> Array:
    """Coefficient (2,) on the solid area of one face, bare and with ice, in the worst wind: how its faces stand is not known."""
    rules: Rules = "en" if scenario.wind is None else scenario.wind.rules
    both = faces(made, scenario.ice)
    solidity, rounded = (np.array([getattr(face, name) for face in both]) for name in ("solidity", "round"))
    return lattice.coefficient(rules, made.sides, solidity, rounded) * lattice.diagonal(rules, made.sides, solidity, rounded)


def of_section(section: Section) -> float:
    """The coefficient of a shape on its width, the same in every wind."""
    return {"hexagon": angular.POLYGON, "octagon": angular.POLYGON, "sharp": angular.SHARP}[section.shape or "no shape and no drag"]


def _rectangle(section: Section, width: Array) -> tuple[Array, Array]:
    """Coefficient on the first face, and the hold of the second over that of the first, for its widths bare and with ice."""
    depth = (section.depth or 0.0) + width - width[BARE]
    pairs = list(zip(width.tolist(), depth.tolist(), strict=True))
    first = np.array([angular.rectangle(b, d, section.corner) for b, d in pairs])
    other = np.array([angular.rectangle(d, b, section.corner) for b, d in pairs])
    return first, other * depth / (first * width)


def round_bar(wind: Wind, width: Array, q: Array, k: Array) -> Array:
    """Coefficient of bare round bars of `width` [m] and roughness k [m] in a pressure q [Pa]."""
    if wind.rules == "asce7":
        return round.asce7(width, q, k / width)
    return round.en1991(round.reynolds(width, q, wind.air_density), k / width)


def on_bars(held: Bars, wind: Wind, q: Array, iced: Flags) -> Array:
    """Coefficient (state, piece, gauss) in pressures q of that shape; iced (state,)."""
    c = np.broadcast_to(held.fixed[iced.astype(int)][..., None], q.shape).copy()
    bare, turns = np.flatnonzero(~iced), np.flatnonzero(held.by_wind)
    some = np.ix_(bare, turns)
    c[some] = round_bar(wind, held.width[BARE, turns, None], q[some], held.roughness[turns, None])
    return c


def pattern(held: Bars, to: Array, axis: Array, iced: Flags) -> Array:
    """Direction and share (case, piece, 3) of the force for a wind along `to` (case, 3) on pieces of axis (piece, 3): |n| n on what has
    no faces, n = to - (to.t) t; on a rectangle |n| times the hold of each face along its own normal."""
    n = to[:, None, :] - dot(to[:, None, :], axis)[..., None] * axis
    size = np.linalg.norm(n, axis=-1, keepdims=True)
    edged = np.flatnonzero(~np.isnan(held.face[:, 0]))
    if len(edged):
        t = axis[edged]
        first = held.face[edged] - dot(held.face[edged], t)[:, None] * t
        first /= np.linalg.norm(first, axis=-1, keepdims=True)
        other = np.cross(t, first)
        along, beside = (dot(n[:, edged], e)[..., None] * e for e in (first, other))
        n[:, edged] = along + held.second[iced.astype(int)][:, edged, None] * beside
    return np.asarray(size * n)


def on_cables(cables: Cables, scenario: Scenario, wind: Wind, q: Array, iced: Flags) -> Array:
    """Coefficient (case, cable) in pressures q and with ice as told, both of that shape."""
    smooth = ~np.isnan(cables.roughness)
    bare = np.full(q.shape, round.SUBCRITICAL)
    bare[:, smooth] = round_bar(wind, cables.diameter[smooth], q[:, smooth], cables.roughness[smooth])
    chosen = np.where(iced, iced_round(scenario), bare)
    return np.where(np.isnan(cables.drag), chosen, cables.drag)
