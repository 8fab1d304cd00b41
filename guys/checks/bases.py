"""Feet on the ground: sliding by friction, and the pressure under a base plate.

    sliding    friction / (sideways / down)
    bearing    allowable pressure / pressure,  p = N/((L - 2 e_L)(W - 2 e_W))

N the push down; e_L, e_W its eccentricity along length and width of the plate, the foot's moment over N: the ground bears evenly on the
part of the plate whose middle is under the push (effective area, Meyerhof 1953 and EN 1997-1:2004 annex D, from memory).  No tension
between plate and ground; bolts and the weight of the plate are not counted.  A pinned base has no moment about level axes, so p = N/(L W).
The whole plate stays in contact while e_L/L + e_W/W <= 1/6 (the kern); a push off the plate (e >= half a side) finds no ground: p is
infinite.
"""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from guys.checks.items import Demands, Item, group
from guys.recovery import Forces
from guys.rotation import Array
from guys.scenario.model import GroundFoot, Spar
from guys.scenario.plate import Plate
from guys.structure import Structure

CONTACT = ("whole plate in contact", "one edge of the plate lifts", "the push is off the plate", "lifted off the ground")
"""How a plate stands, as `stand` counts it."""
KERN = 1 / 6 + 1e-9


def sliding(structure: Structure, slide: Array) -> Demands:
    """Friction against slide, one item a ground foot; slide : (case, spar) sideways over down, inf where lifted."""
    scenario = structure.scenario
    allowed = scenario.allowables
    feet = [k for k, spar in enumerate(scenario.spar) if isinstance(spar.foot, GroundFoot)]
    items = [
        Item(
            f"base of {scenario.spar[k].name}", "sideways/down", "", "friction over sideways/down", "no friction given for its base",
            default="sliding" in allowed.defaulted, allowable="sliding",
        )
        for k in feet
    ]  # fmt: skip
    friction = np.array([math.nan if (f := scenario.spar[k].friction) is None else f for k in feet])
    return group(items, slide[:, feet], friction, allowed.sliding)


def bearing(structure: Structure, forces: Forces) -> Demands:
    """Allowable against found pressure, one item a base plate, by the greatest push and by the least, which stands farther off."""
    scenario = structure.scenario
    plates = [(k, spar, spar.plate) for k, spar in enumerate(scenario.spar) if spar.plate is not None]
    items, capacity = [], []
    demand = np.zeros((len(forces.pull), len(plates)))
    mode = np.full(demand.shape, -1)
    for n, (k, spar, plate) in enumerate(plates):
        items.append(_item(spar, plate, "bearing" in scenario.allowables.defaulted))
        capacity.append(math.nan if plate.bearing is None else plate.bearing)
        most, least = (stand(plate, spar.toward, up, forces.foot_moment[:, k]) for up in (forces.foot_force[:, k, 2], forces.foot_up[:, k]))
        demand[:, n] = np.fmax(most[0], least[0])
        mode[:, n] = np.where(least[0] > most[0], least[1], most[1])
    return group(items, demand, np.array(capacity), scenario.allowables.bearing, mode)


def _item(spar: Spar, plate: Plate, default: bool) -> Item:
    along = math.degrees(spar.toward if plate.along is None else plate.along) % 360
    why = f"allowable over found pressure on the effective area of its plate, length along {along:.4g} deg"
    lacking = "no bearing given for its plate, and none is presumed"
    return Item(f"base of {spar.name}", "bearing", "Pa", why, lacking, "bearing given", default, modes=CONTACT, allowable="bearing")


def stand(plate: Plate, toward: float, up: Array, moment: Array) -> tuple[Array, NDArray[np.int64]]:
    """Pressure [Pa] under a plate and how it stands (`CONTACT`), case by case.

    up (case,) [N], moment (case, 3) [N m] : of the foot on the ground, z up; toward : bearing of the spar it is under [rad]
    """
    bearing = toward if plate.along is None else plate.along
    along = np.array([math.sin(bearing), math.cos(bearing)])
    across = np.array([along[1], -along[0]])
    push = -up
    bears = push > 0
    safe = np.where(bears, push, 1.0)
    off = np.stack([moment[:, 1], -moment[:, 0]], axis=1) / safe[:, None]
    share = np.abs(np.stack([off @ along / plate.length, off @ across / plate.width], axis=1))
    left = np.maximum(1 - 2 * share, 0.0)
    area = plate.length * plate.width * left[:, 0] * left[:, 1]
    pressure = np.where(area > 0, safe / np.where(area > 0, area, 1.0), np.inf)
    how = np.where(area > 0, np.where(share.sum(axis=1) <= KERN, 0, 1), 2)
    gone = np.isnan(push)
    return np.where(gone, np.nan, np.where(bears, pressure, 0.0)), np.where(gone, -1, np.where(bears, how, 3))
