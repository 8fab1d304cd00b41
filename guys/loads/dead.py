"""Weights and fixed loads, and the weight of ice, each for a factor of one."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from guys.constants import STANDARD_GRAVITY
from guys.loads.spread import Weights, shares, spread
from guys.rotation import Array
from guys.scenario.model import Fitting
from guys.structure import Structure

DOWN = np.array([0.0, 0.0, -1.0])


def fittings_of(structure: Structure) -> list[Fitting]:
    """The fittings in the order of `structure.fittings`."""
    return [structure.scenario.spar[k].fitting[n] for k, n in structure.fittings.of]


@dataclass(frozen=True)
class Loads:
    """Loads on spars before they reach the nodes: on_pieces (case, piece, 4, 3), see `spread`; on_fittings (case, fitting, 3) [N]."""

    on_pieces: Array
    on_fittings: Array

    def add(self, factor: Array, other: Loads) -> None:
        """Add other loads of the same cases, scaled case by case, factor (case,), to these."""
        for to, more in ((self.on_pieces, other.on_pieces), (self.on_fittings, other.on_fittings)):
            to += factor.reshape(-1, *([1] * (more.ndim - 1))) * more

    def total(self) -> Array:
        """Sum of the forces (case, 3) [N]."""
        return np.asarray(self.on_pieces[:, :, ::2].sum(axis=(1, 2)) + self.on_fittings.sum(axis=1))


def superposed(factors: Array, parts: Sequence[Loads]) -> Loads:
    """Loads of one case each put together for every case; factors (case, part)."""

    def mixed(arrays: list[Array]) -> Array:
        one = np.stack([a[0].reshape(-1) for a in arrays])
        return np.asarray((factors @ one).reshape(len(factors), *arrays[0].shape[1:]))

    return Loads(mixed([p.on_pieces for p in parts]), mixed([p.on_fittings for p in parts]))


def _weight(structure: Structure, w: Weights, mass_per_length: Array, point_forces: Array) -> Loads:
    """Weights of (piece, gauss) [kg/m], and forces on fittings, each once though a sign has points at its edges too."""
    down = np.broadcast_to(DOWN, (1, len(mass_per_length), 3))
    own = np.where(structure.fittings.side[:, None] == 0, point_forces, 0.0)
    return Loads(spread(shares(w, STANDARD_GRAVITY * mass_per_length), down), own[None])


def dead(structure: Structure, w: Weights) -> Loads:
    """Weights of spars and fittings and the fixed loads, one case."""
    forces = [np.array([f.load.east, f.load.north, f.load.up]) + STANDARD_GRAVITY * f.mass * DOWN for f in fittings_of(structure)]
    return _weight(structure, w, structure.pieces.mass[:, None] * np.ones_like(w.station), np.array(forces).reshape(-1, 3))


def ice(structure: Structure, w: Weights, mass: Array) -> Loads:
    """The weight of ice on spars, mass (piece, gauss) [kg/m], and on fittings, one case."""
    gained = [(f.iced_mass if f.iced_mass is not None else f.mass) - f.mass for f in fittings_of(structure)]
    forces = STANDARD_GRAVITY * np.array(gained).reshape(-1, 1) * DOWN
    return _weight(structure, w, mass, forces)
