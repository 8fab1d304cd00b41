"""A guyed structure in the general finite-element library openseespy: beams, cables, dead loads, one equilibrium.

Used by hand only, to make the numbers stored beside this file and to time the same mast beside ours; nothing in the program and no
ordinary test imports it (openseespy's licence forbids shipping it).  It shares no code with the program.

Idealisation
    spars    straight prismatic `elasticBeamColumn` elements, `Corotational` transformation: large displacements, no shear flexibility
    cables   one `CatenaryCable` element each (elastic catenary, load vector per unstressed length), or a chain of `CorotTruss` bars
             (`bars` > 0) whose unstressed lengths add up to the cable's; the lower-case `corotTruss` is another, linear element
    loads    dead, lumped at the nodes: half of each beam element's weight and wind to either end
    wind     q * drag * width * |n| n per length, n = u - (u.t) t, u the wind's unit vector, t the member's direction in the still-air
             position: each beam element's own, each cable's chord; a cable's whole wind force is spread evenly over its unstressed length
    supports `pinned` holds the node and its rotation about the vertical; `hinged` on another spar lets it turn about one level axis

The description is a plain dictionary in SI units and degrees, as stored under "inputs" in the JSON files.
x east, y north, z up; bearings clockwise from north; wind bearings say where the wind comes from.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field
from itertools import pairwise
from typing import Any

import numpy as np
import openseespy.opensees as ops
from numpy.typing import NDArray

GRAVITY = 9.80665  # m/s2, standard
CABLE_TOLERANCE = 1e-10  # relative, of CatenaryCable's own iteration: 1e-6 leaves 2e-6 of the tension
CABLE_SUBSTEPS = 100
STEP_TOLERANCE = 1e-10  # m and rad, norm of the last Newton step

Vector = NDArray[np.float64]
Inputs = dict[str, Any]


def level_unit(bearing_deg: float) -> Vector:
    """Level unit vector pointing to a bearing."""
    b = np.radians(bearing_deg)
    return np.array([np.sin(b), np.cos(b), 0.0])


def axis(spar: Inputs) -> Vector:
    """Unit vector from the foot to the head of a spar as drawn."""
    lean = np.radians(spar["lean_deg"])
    return np.asarray(np.sin(lean) * level_unit(spar["toward_deg"]) + np.array([0.0, 0.0, np.cos(lean)]))


def tube_properties(diameter: float, wall: float, material: Inputs) -> dict[str, float]:
    """Mass per length and stiffnesses of a round tube."""
    inner = diameter - 2.0 * wall
    area = np.pi / 4.0 * (diameter**2 - inner**2)
    second = np.pi / 64.0 * (diameter**4 - inner**4)
    return {
        "mass": material["density"] * area,
        "EA": material["modulus"] * area,
        "EI": material["modulus"] * second,
        "GJ": material["shear_modulus"] * 2.0 * second,
    }


def wind_on(direction: Vector, wind: Vector, pressure: float, drag: float, width: float) -> Vector:
    """Force per length on a slender member."""
    n = wind - (wind @ direction) * direction
    return np.asarray(pressure * drag * width * np.linalg.norm(n) * n)


@dataclass
class Model:
    """One structure in openseespy's (single, global) domain.

    per_metre : beam elements per metre of spar; bars : 0 for one catenary element a cable, else the bars of its chain
    system : the library's equation solver; cable_tolerance, cable_substeps : of `CatenaryCable`'s own iteration
    """

    inputs: Inputs
    per_metre: int
    bars: int = 0
    system: str = "UmfPack"
    cable_tolerance: float = CABLE_TOLERANCE
    cable_substeps: int = CABLE_SUBSTEPS
    step_tolerance: float = STEP_TOLERANCE
    spar_nodes: dict[str, list[int]] = field(default_factory=dict)
    spar_elements: dict[str, list[int]] = field(default_factory=dict)
    cable_nodes: dict[str, list[int]] = field(default_factory=dict)
    cable_elements: dict[str, list[int]] = field(default_factory=dict)
    properties: dict[str, dict[str, float]] = field(default_factory=dict)
    cable_load: dict[str, Vector] = field(default_factory=dict)
    point_load: dict[int, Vector] = field(default_factory=dict)
    positions: dict[int, Vector] = field(default_factory=dict)
    pattern: int = 0
    tag: int = 0

    def __post_init__(self) -> None:
        ops.wipe()
        ops.model("basic", "-ndm", 3, "-ndf", 6)
        for spar in self.inputs["spars"]:
            self._add_spar(spar)
        ops.model("basic", "-ndm", 3, "-ndf", 3)
        for cable in self.inputs["cables"]:
            self._add_cable(cable, self._cable_end(cable["to"]), self._cable_end(cable["from"]))
        self.positions = {n: np.array(ops.nodeCoord(n)) for n in ops.getNodeTags()}
        ops.constraints("Transformation")
        ops.numberer("RCM")
        ops.system(self.system)
        ops.test("NormDispIncr", self.step_tolerance, 60, 0)
        ops.algorithm("Newton")
        ops.timeSeries("Constant", 1)

    def _next(self) -> int:
        self.tag += 1
        return self.tag

    def _node(self, position: Vector) -> int:
        tag = self._next()
        ops.node(tag, *(float(x) for x in position))
        return tag

    def _cable_end(self, end: Inputs) -> int:
        """A node without rotations, held by the ground or tied to a spar."""
        if "anchor" in end:
            anchor = next(a for a in self.inputs["anchors"] if a["name"] == end["anchor"])
            tag = self._node(anchor["radius"] * level_unit(anchor["bearing_deg"]) + np.array([0.0, 0.0, anchor["level"]]))
            ops.fix(tag, 1, 1, 1)
            return tag
        spar_node = self.node_at(end["spar"], end["at"])
        tag = self._node(np.array(ops.nodeCoord(spar_node)))
        ops.equalDOF(spar_node, tag, 1, 2, 3)
        return tag

    def node_at(self, spar: str, at: float) -> int:
        """The node of a spar at a distance from its foot (which must fall on the mesh)."""
        index = at * self.per_metre
        if abs(index - round(index)) > 1e-9:
            raise ValueError(f"{spar}: {at} m is not on a mesh of {self.per_metre} elements a metre")
        return self.spar_nodes[spar][round(index)]

    def _add_spar(self, spar: Inputs) -> None:
        name, count = spar["name"], round(spar["length"] * self.per_metre)
        carrier = self.node_at(spar["foot"]["spar"], spar["foot"]["at"]) if isinstance(spar["foot"], dict) else None
        foot = np.array(ops.nodeCoord(carrier)) if carrier else np.array(spar["foot"])
        t = axis(spar)
        nodes = [self._node(foot + t * k / self.per_metre) for k in range(count + 1)]
        if carrier is None:
            ops.fix(nodes[0], 1, 1, 1, 0, 0, 1)
        else:
            ops.equalDOF(carrier, nodes[0], 1, 2, 3, *self._held_rotations(spar["hinge_axis_deg"]))
        p = tube_properties(spar["tube"]["diameter"], spar["tube"]["wall"], self.inputs["material"])
        transformation = self._next()
        ops.geomTransf("Corotational", transformation, *(float(x) for x in np.cross(t, [0.6, 0.8, 0.0])))
        elements = [self._next() for _ in range(count)]
        for k, element in enumerate(elements):
            section = (p["EA"], 1.0, 1.0, p["GJ"], p["EI"], p["EI"])
            ops.element("elasticBeamColumn", element, nodes[k], nodes[k + 1], *section, transformation)
        self.spar_nodes[name], self.spar_elements[name], self.properties[name] = nodes, elements, p

    @staticmethod
    def _held_rotations(hinge_axis_deg: float) -> tuple[int, int]:
        if hinge_axis_deg % 180.0 == 0.0:
            return 4, 6
        if hinge_axis_deg % 180.0 == 90.0:
            return 5, 6
        raise ValueError("hinge axes other than north-south and east-west are not modelled")

    def _add_cable(self, cable: Inputs, start: int, end: int) -> None:
        """`start` at the `to` end (the anchor), `end` at the `from` end."""
        a, b = np.array(ops.nodeCoord(start)), np.array(ops.nodeCoord(end))
        name, stiffness = cable["name"], self.inputs["rope"]["stiffness"]
        pieces = max(self.bars, 1)
        inner = [self._node(a + (b - a) * k / pieces) for k in range(1, pieces)]
        nodes = [start, *inner, end]
        elements = [self._next() for _ in range(pieces)]
        if self.bars:
            self._add_bars(elements, nodes, float(np.linalg.norm(b - a)) / pieces, cable["length"] / pieces, stiffness)
        else:
            weight = self.inputs["rope"]["mass"] * GRAVITY
            iteration = self.cable_tolerance, self.cable_substeps
            ops.element("CatenaryCable", elements[0], start, end, weight, stiffness, 1.0, cable["length"], 0.0, 0.0, 0.0, *iteration, 0)
        self.cable_nodes[name], self.cable_elements[name] = nodes, elements

    def _add_bars(self, elements: list[int], nodes: list[int], drawn: float, unstressed: float, stiffness: float) -> None:
        """Bars drawn with length `drawn` that carry EA (l / unstressed - 1): openseespy strains are relative to `drawn`."""
        elastic, strained = self._next(), self._next()
        ops.uniaxialMaterial("Elastic", elastic, stiffness * drawn / unstressed)
        ops.uniaxialMaterial("InitStrainMaterial", strained, elastic, (drawn - unstressed) / drawn)
        for k, element in enumerate(elements):
            ops.element("CorotTruss", element, nodes[k], nodes[k + 1], 1.0, strained)

    def _spar_loads(self, dead: float, wind: Vector | None) -> Iterator[tuple[int, Vector]]:
        for spar in self.inputs["spars"]:
            nodes, weight = self.spar_nodes[spar["name"]], self.properties[spar["name"]]["mass"] * GRAVITY
            for i, j in pairwise(nodes):
                direction = self.positions[j] - self.positions[i]
                load = np.array([0.0, 0.0, -dead * weight])
                if wind is not None:
                    t = direction / np.linalg.norm(direction)
                    load = load + wind_on(t, wind, self.inputs["wind"]["pressure"], spar["drag"], spar["tube"]["diameter"])
                yield i, load / (2.0 * self.per_metre)
                yield j, load / (2.0 * self.per_metre)
            for fitting in spar["fittings"]:
                force = dead * (np.array(fitting["load"]) + np.array([0.0, 0.0, -fitting["mass"] * GRAVITY]))
                if wind is not None:
                    force = force + self.inputs["wind"]["pressure"] * fitting["drag"] * fitting["area"] * wind
                yield self.node_at(spar["name"], fitting["at"]), force

    def _cable_load(self, cable: Inputs, dead: float, wind: Vector | None) -> Vector:
        """Load vector per unstressed length."""
        rope, nodes = self.inputs["rope"], self.cable_nodes[cable["name"]]
        load = np.array([0.0, 0.0, -dead * rope["mass"] * GRAVITY])
        if wind is None:
            return load
        chord = self.positions[nodes[-1]] - self.positions[nodes[0]]
        length = float(np.linalg.norm(chord))
        per_chord = wind_on(chord / length, wind, self.inputs["wind"]["pressure"], rope["drag"], rope["diameter"])
        return np.asarray(load + per_chord * length / cable["length"])

    def solve(self, dead: float = 1.0, wind_from_deg: float | None = None) -> int:
        """Equilibrium under the loads of a case, started from the state the domain is in; returns the number of Newton steps."""
        self.apply(dead, wind_from_deg)
        return self.find()

    def apply(self, dead: float, wind_from_deg: float | None) -> None:
        """Put the loads of a case in place of those before.

        Wind is worked out on `positions`: the drawn ones until `remember_position` is called.
        """
        wind = None if wind_from_deg is None else -level_unit(wind_from_deg)
        if self.pattern:
            ops.remove("loadPattern", self.pattern)
        self.pattern += 1
        ops.pattern("Plain", self.pattern, 1)
        self.point_load = {}
        for node, force in self._spar_loads(dead, wind):
            self.point_load[node] = self.point_load.get(node, 0.0) + force
        for node, force in self.point_load.items():
            ops.load(node, *(float(x) for x in force), 0.0, 0.0, 0.0)
        for cable in self.inputs["cables"]:
            self.cable_load[cable["name"]] = self._cable_load(cable, dead, wind)
            self._put_on_cable(cable, self.cable_load[cable["name"]])
        ops.integrator("LoadControl", 1.0)
        ops.analysis("Static", "-noWarnings")

    def find(self) -> int:
        """Newton from the state the domain is in to equilibrium with the loads applied; returns the number of steps."""
        if ops.analyze(1) != 0:
            raise RuntimeError("openseespy found no equilibrium")
        ops.reactions()
        return int(ops.testIter())

    def _put_on_cable(self, cable: Inputs, load: Vector) -> None:
        if not self.bars:
            ops.eleLoad("-ele", self.cable_elements[cable["name"]][0], "-type", "-beamUniform", *(float(x) for x in load))
            return
        for node in self.cable_nodes[cable["name"]][1:-1]:
            ops.load(node, *(float(x) for x in load * cable["length"] / self.bars))
        for node in self.cable_nodes[cable["name"]][:: self.bars]:
            ops.load(node, *(float(x) for x in load * cable["length"] / (2 * self.bars)))

    def present(self, node: int) -> Vector:
        """Where a node is now."""
        return np.array(ops.nodeCoord(node)) + np.array(ops.nodeDisp(node)[:3])

    def remember_position(self) -> None:
        """Take the present position as the setting position, on which wind is worked out from now on."""
        self.positions = {n: self.present(n) for n in ops.getNodeTags()}

    def total_load(self) -> Vector:
        """Sum of everything applied."""
        on_cables = sum(self.cable_load[c["name"]] * c["length"] for c in self.inputs["cables"])
        return np.asarray(sum(self.point_load.values()) + on_cables)

    def results(self) -> Inputs:
        """Forces on what holds the structure, cable ends, displacements and section forces, as plain numbers (SI)."""
        spars = self.inputs["spars"]
        return {
            "cables": {c["name"]: self._cable_result(c) for c in self.inputs["cables"]},
            "bases": {s["name"]: self._base_result(s) for s in spars if not isinstance(s["foot"], dict)},
            "heels": {s["name"]: self._heel_result(s) for s in spars if isinstance(s["foot"], dict)},
            "spars": {s["name"]: [self._station_result(s, at) for at in s["stations"]] for s in spars},
        }

    def _cable_result(self, cable: Inputs) -> Inputs:
        """Pulls of the cable on its two ends; a chain's end nodes carry half a bar's load besides the bar's own pull."""
        elements = self.cable_elements[cable["name"]]
        first, last = np.array(ops.eleForce(elements[0])), np.array(ops.eleForce(elements[-1]))
        share = self.cable_load[cable["name"]] * cable["length"] / (2 * self.bars) if self.bars else np.zeros(3)
        at_to, at_from = share - first[:3], share - last[3:6]
        return {
            "tension_to_end": float(np.linalg.norm(at_to)),
            "tension_from_end": float(np.linalg.norm(at_from)),
            "force_on_to_end": at_to.tolist(),
            "force_on_from_end": at_from.tolist(),
        }

    def _base_result(self, spar: Inputs) -> Inputs:
        reaction = -np.array(ops.nodeReaction(self.spar_nodes[spar["name"]][0]))
        return {"force_on_ground": reaction[:3].tolist(), "moment_on_ground": reaction[3:].tolist()}

    def _heel_result(self, spar: Inputs) -> Inputs:
        heel = np.array(ops.eleForce(self.spar_elements[spar["name"]][0]))[:6]
        force = self.point_load[self.spar_nodes[spar["name"]][0]] - heel[:3]
        return {"force_on_carrier": force.tolist(), "moment_on_carrier": (-heel[3:]).tolist()}

    def _station_result(self, spar: Inputs, at: float) -> Inputs:
        """Displacement from the drawn position; thrust (negative) and bending of the section, where it does not jump."""
        nodes, elements = self.spar_nodes[spar["name"]], self.spar_elements[spar["name"]]
        k = nodes.index(self.node_at(spar["name"], at))
        result: Inputs = {"at": at, "displacement": [float(x) for x in ops.nodeDisp(nodes[k])[:3]]}
        if at >= spar["length"] or self._carries_heel(spar, at):
            return result
        below, above = np.array(ops.eleForce(elements[k - 1]))[6:], np.array(ops.eleForce(elements[k]))[:6]
        action = (below - above) / 2.0
        t = self.present(nodes[k + 1]) - self.present(nodes[k - 1])
        t /= np.linalg.norm(t)
        result["bending"] = float(np.linalg.norm(np.cross(action[3:], t)))
        if not self._holds_something(spar, at):
            result["axial"] = float(action[:3] @ t)
        return result

    def _carries_heel(self, spar: Inputs, at: float) -> bool:
        return any(other["foot"] == {"spar": spar["name"], "at": at} for other in self.inputs["spars"])

    def _holds_something(self, spar: Inputs, at: float) -> bool:
        ends = [c[e] for c in self.inputs["cables"] for e in ("from", "to")]
        held = [e["at"] for e in ends if e.get("spar") == spar["name"]] + [f["at"] for f in spar["fittings"]]
        return any(abs(at - h) < 1e-9 for h in held)
