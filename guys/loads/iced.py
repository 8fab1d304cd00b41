"""Ice on pieces of spar and on cables: mass per length and width, at their heights."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from guys.icing import coat
from guys.loads.spread import GAUSS, GAUSS_WEIGHTS
from guys.rotation import Array
from guys.sections import coated
from guys.structure import Structure


@dataclass(frozen=True)
class Ice:
    """mass, width (piece, gauss) [kg/m], [m];  cable_mass [kg/m], cable_width [m] (cable,): means over the chord."""

    mass: Array
    width: Array
    cable_mass: Array
    cable_width: Array


def ice_at(structure: Structure, z: Array, low: Array, high: Array) -> Ice:
    """Ice on pieces at heights z (piece, gauss) [m] and on cables between heights low and high (cable,) [m]."""
    pieces, ice = structure.pieces, structure.scenario.ice
    mass = np.broadcast_to((pieces.iced_mass - pieces.mass)[:, None], z.shape).copy()
    width = np.broadcast_to(pieces.iced_width[:, None], z.shape).copy()
    if ice is not None and ice.height_effect != "none":
        grows = np.flatnonzero(~np.isnan(pieces.bar))
        mass[grows], width[grows] = coat(np.broadcast_to(pieces.bar[grows, None], z[grows].shape), ice, z[grows])
        for n, (spar, place) in enumerate(zip(pieces.spar, pieces.section, strict=True)):
            lattice = structure.scenario.spar[spar].section[place].lattice
            if lattice is not None:
                mass[n], width[n] = coated(lattice, ice, z[n])
    heights = low[:, None] + 0.5 * (1 + GAUSS) * (high - low)[:, None]
    around = coat(np.broadcast_to(structure.cables.diameter[:, None], heights.shape), ice, heights)
    cable_mass, cable_width = (each @ (0.5 * GAUSS_WEIGHTS) for each in around)
    return Ice(mass, width, cable_mass, cable_width)
