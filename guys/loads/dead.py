"""Weights and fixed loads, and the weight of ice, each for a factor of one."""

from __future__ import annotations

import numpy as np

from guys.constants import STANDARD_GRAVITY
from guys.loads.spread import Weights, spread
from guys.rotation import Array, outer
from guys.scenario.model import Fitting
from guys.sections import ice_on_round
from guys.structure import Structure

DOWN = np.array([0.0, 0.0, -1.0])


def fittings_of(structure: Structure) -> list[Fitting]:
    """The fittings in the order of `structure.fittings`."""
    return [structure.scenario.spar[k].fitting[n] for k, n in structure.fittings.of]


def on_points(structure: Structure, force: Array) -> tuple[Array, Array]:
    """Node forces and dyads of forces (case, fitting, 3) [N] at the fittings."""
    point = structure.fittings.point
    cases, nodes = len(force), structure.nodes
    f, q = np.zeros((cases, nodes, 3)), np.zeros((cases, nodes, 3, 3))
    for k, node in enumerate(point.node):
        f[:, node] += force[:, k]
        q[:, node] += outer(point.arm[k], force[:, k])
    return f, q


def _weight(structure: Structure, w: Weights, mass_per_length: Array, point_forces: Array) -> tuple[Array, Array]:
    pieces = structure.pieces
    down = np.broadcast_to(DOWN, (1, len(mass_per_length), 3))
    f, q = spread(pieces, w, STANDARD_GRAVITY * mass_per_length[:, None] * np.ones_like(w.station), down, structure.nodes)
    fp, qp = on_points(structure, point_forces[None])
    return (f + fp)[0], (q + qp)[0]


def dead(structure: Structure, w: Weights) -> tuple[Array, Array]:
    """Node forces (node, 3) and dyads (node, 3, 3) of spars and fittings, fixed loads included."""
    forces = [
        np.array([f.load.east, f.load.north, f.load.up]) + STANDARD_GRAVITY * f.mass * DOWN for f in fittings_of(structure)
    ]
    return _weight(structure, w, structure.pieces.mass, np.array(forces).reshape(-1, 3))


def ice(structure: Structure, w: Weights) -> tuple[Array, Array]:
    """The same for the weight of ice."""
    gained = [(f.iced_mass if f.iced_mass is not None else f.mass) - f.mass for f in fittings_of(structure)]
    forces = STANDARD_GRAVITY * np.array(gained).reshape(-1, 1) * DOWN
    return _weight(structure, w, structure.pieces.iced_mass - structure.pieces.mass, forces)


def cable_weight(structure: Structure) -> tuple[Array, Array]:
    """Weight of every cable and of its ice per unstressed length (cable,) [N/m]."""
    scenario = structure.scenario
    ice_mass = np.array([ice_on_round(d, scenario.ice) for d in structure.cables.diameter])
    return STANDARD_GRAVITY * structure.cables.mass, STANDARD_GRAVITY * ice_mass
