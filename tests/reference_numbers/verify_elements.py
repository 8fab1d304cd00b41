"""Do openseespy's own elements give the known answers?  Closed forms and published tables, each as (found, known, relative difference).

cable_wind   one elastic catenary under weight and lateral load: direct integration of dp/ds = (t/|t|)(1 + |t|/EA), dt/ds = -q,
             done here with scipy (`solve_ivp`, `fsolve`), which shares nothing with either program
cable_sag    heavy elastic cable, span = unstressed length = 325 m: mid-span sag 6.352 m printed in the Code_Aster validation manual
             V6.05.116, paragraph 2.2 (case SSNL114); closed form of the elastic catenary for more digits
cable_load   two cables and a point load after Michalos and Birnstiel (1962), Jayaraman and Knudson (1981): displacement of the loaded
             node -0.859, -5.626 m (printed values from memory; recomputed from the elastic catenary to the digits used here)
elastica     cantilever under a transverse dead tip force, Mattiasson, IJNME 17 (1981) 145-153, table 1: P L2/EI = 1, 5, 10
bend         45 degree bend, Bathe and Bolourchi, IJNME 14 (1979) 961-986, torsion constant 0.141: tip displacement
             -13.729, -23.814, 53.605 (Ibrahimbegovic 1995).  That is with shear flexibility; the element has none (share 2e-4)
"""

from __future__ import annotations

from typing import Any

import numpy as np
import openseespy.opensees as ops
from numpy.typing import NDArray
from opensees_model import CABLE_SUBSTEPS, CABLE_TOLERANCE
from scipy.integrate import solve_ivp
from scipy.optimize import brentq, fsolve

Vector = NDArray[np.float64]
Check = dict[str, Any]


def verify() -> dict[str, Check]:
    """Every check by name."""
    return {
        "CatenaryCable, weight and lateral wind, end forces [N]": _cable_wind(),
        "CatenaryCable, sag of a heavy cable [m]": _cable_sag(),
        "CatenaryCable, point load between two cables [m]": _cable_load(),
        "elasticBeamColumn Corotational, elastica w/L u/L at P L2/EI = 1, 5, 10": _elastica(),
        "elasticBeamColumn Corotational, 45 degree bend, P = 600, tip displacement": _bend(),
    }


def _compare(found: Vector, known: Vector) -> Check:
    difference = float(np.abs(np.asarray(found) - known).max() / np.abs(known).max())
    return {"found": np.asarray(found).tolist(), "known": np.asarray(known).tolist(), "greatest_difference_relative": difference}


def _start(dofs: int) -> None:
    ops.wipe()
    ops.model("basic", "-ndm", 3, "-ndf", dofs)
    ops.timeSeries("Linear", 1)


def _run(steps: int) -> None:
    ops.constraints("Plain")
    ops.numberer("RCM")
    ops.system("UmfPack")
    ops.test("NormDispIncr", 1e-11, 60, 0)
    ops.algorithm("Newton")
    ops.integrator("LoadControl", 1.0 / steps)
    ops.analysis("Static", "-noWarnings")
    if ops.analyze(steps) != 0:
        raise RuntimeError("openseespy failed on a verification case")


def _cable(tag: int, i: int, j: int, weight: float, stiffness: float, length: float) -> None:
    ops.element(
        "CatenaryCable", tag, i, j, weight, stiffness, 1.0, length, 0.0, 0.0, 0.0, CABLE_TOLERANCE, CABLE_SUBSTEPS, 0
    )  # fmt: skip


def _cable_wind() -> Check:
    chord, stiffness, length, q = np.array([-20.0, 0.0, 30.0]), 3.0e6, 36.05, np.array([0.0, 6.0, -4.0])

    def slope(s: float, state: Vector) -> Vector:
        t = state[3:]
        tension = np.linalg.norm(t)
        return np.concatenate([t / tension * (1.0 + tension / stiffness), -q])

    def miss(start: Vector) -> Vector:
        end = solve_ivp(slope, (0.0, length), [0.0, 0.0, 0.0, *start], rtol=1e-12, atol=1e-12).y[:3, -1]
        return np.asarray(end - chord)

    start = fsolve(miss, 2000.0 * chord / np.linalg.norm(chord), xtol=1e-12)
    _start(3)
    ops.node(1, 0.0, 0.0, 0.0)
    ops.node(2, *chord.tolist())
    ops.node(3, *(2.0 * chord).tolist())
    ops.fix(1, 1, 1, 1)
    ops.fix(2, 1, 1, 1)
    ops.fix(3, 0, 1, 1)
    ops.uniaxialMaterial("Elastic", 1, 1.0)
    ops.element("Truss", 2, 2, 3, 1.0, 1)  # something free to move, so that there is an equation to solve
    _cable(1, 1, 2, 4.0, stiffness, length)
    ops.pattern("Plain", 1, 1)
    ops.eleLoad("-ele", 1, "-type", "-beamUniform", *q.tolist())
    _run(1)
    found = np.array(ops.eleForce(1))
    return _compare(np.concatenate([-found[:3], found[3:]]), np.concatenate([start, start - q * length]))


def _cable_sag() -> Check:
    span, area, modulus, density, g = 325.0, 2.2783e-4, 5.70e10, 2844.230, 9.81
    w, ea = density * area * g, modulus * area
    half = span / 2.0
    pull = brentq(lambda h: h * half / ea + h / w * np.arcsinh(w * half / h) - half, 1e3, 1e6, xtol=1e-10)
    known = w * half**2 / (2.0 * ea) + (np.hypot(pull, w * half) - pull) / w
    _start(3)
    ops.node(1, 0.0, 0.0, 0.0)
    ops.node(2, half, 0.0, -6.0)
    ops.node(3, span, 0.0, 0.0)
    ops.fix(1, 1, 1, 1)
    ops.fix(3, 1, 1, 1)
    _cable(1, 1, 2, w, ea, half)
    _cable(2, 2, 3, w, ea, half)
    ops.timeSeries("Constant", 2)
    ops.pattern("Plain", 1, 2)
    for cable in (1, 2):
        ops.eleLoad("-ele", cable, "-type", "-beamUniform", 0.0, 0.0, -w)
    _run(1)
    return _compare(np.array([6.0 - ops.nodeDisp(2)[2]]), np.array([known]))


def _cable_load() -> Check:
    w, ea, load = 3.16, 0.85 * 19.0e6, 8000.0  # lb and ft throughout, as in the source
    start = np.array([400.0, 0.0, -96.0495])
    _start(3)
    ops.node(1, 0.0, 0.0, 0.0)
    ops.node(2, *start.tolist())
    ops.node(3, 1000.0, 0.0, 0.0)
    ops.fix(1, 1, 1, 1)
    ops.fix(3, 1, 1, 1)
    _cable(1, 1, 2, w, ea, 412.8837)
    _cable(2, 2, 3, w, ea, 613.0422)
    ops.timeSeries("Constant", 2)
    ops.pattern("Plain", 1, 2)
    for cable in (1, 2):
        ops.eleLoad("-ele", cable, "-type", "-beamUniform", 0.0, 0.0, -w)
    ops.pattern("Plain", 2, 1)
    ops.load(2, 0.0, 0.0, -load)
    _run(10)
    displacement = np.array(ops.nodeDisp(2))[[0, 2]] * 0.3048
    return _compare(displacement, np.array([-0.859365, -5.625616]))


def _cantilever(nodes: Vector, section: tuple[float, ...], force: tuple[float, ...], steps: int) -> Vector:
    """Tip displacement of a chain of beam elements clamped at its first node."""
    _start(6)
    for k, position in enumerate(nodes):
        ops.node(k, *position.tolist())
    ops.fix(0, 1, 1, 1, 1, 1, 1)
    ops.geomTransf("Corotational", 1, 0.0, 0.0, 1.0)
    for k in range(len(nodes) - 1):
        ops.element("elasticBeamColumn", k + 1, k, k + 1, *section, 1)
    ops.pattern("Plain", 1, 1)
    ops.load(len(nodes) - 1, *force, 0.0, 0.0, 0.0)
    _run(steps)
    return np.array(ops.nodeDisp(len(nodes) - 1)[:3])


def _finer(coarse: Vector, fine: Vector) -> Vector:
    """Richardson's extrapolation of a second-order mesh error from a mesh and its double."""
    return np.asarray(fine + (fine - coarse) / 3.0)


def _elastica() -> Check:
    known = {1.0: (0.3017207738, 0.05643323628), 5.0: (0.7137915236, 0.3876283607), 10.0: (0.8106090249, 0.5549955978)}
    found = []
    for load in known:
        tips = [
            _cantilever(
                np.linspace([0.0, 0.0, 0.0], [1.0, 0.0, 0.0], n + 1), (1e6, 1.0, 1.0, 1.0, 1.0, 1.0), (0.0, load, 0.0), 20
            )
            for n in (32, 64)
        ]  # fmt: skip
        tip = _finer(*tips)
        found += [tip[1], -tip[0]]
    return _compare(np.array(found), np.array([x for pair in known.values() for x in pair]))


def _bend() -> Check:
    tips = []
    for n in (32, 64):
        angle = np.linspace(0.0, np.pi / 4.0, n + 1)
        arc = 100.0 * np.stack([np.sin(angle), 1.0 - np.cos(angle), np.zeros(n + 1)], axis=1)
        tips.append(_cantilever(arc, (1.0, 1e7, 5e6, 0.141, 1.0 / 12.0, 1.0 / 12.0), (0.0, 0.0, 600.0), 20))
    tip = _finer(*tips)
    return _compare(tip[[1, 0, 2]], np.array([-13.729, -23.814, 53.605]))
