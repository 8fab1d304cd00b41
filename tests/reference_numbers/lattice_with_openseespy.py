"""Stiffness of long lattice spars from a frame solved by OpenSeesPy, kept in lattice.json with version and date.

Every spar stands on fixed feet; its legs run through as beams, its lacing is of bars pinned at both ends; a triangle or square of very
stiff bars closes the head. It is pulled, bent, pushed and twisted there at four lengths, 12, 24, 36 and 48 panels. What the feet and the
head do is the same at each, so that EA, EI, GA and GJ are what is left of

    pull  u = P (L/EA + c)                          twist  phi = T (L/GJ + c)
    push  v = P (L^3/3EI + c1 L^2 + L/GA + c2)      moment  rotation = M (L/EI + c)

Not run by the tests: python -m tests.reference_numbers.lattice_with_openseespy writes the file again.
"""

from __future__ import annotations

import json
import math
from datetime import UTC, datetime
from importlib.metadata import version
from pathlib import Path

import numpy as np
import openseespy.opensees as ops

E, G = 210e9, 81e9
PANELS = (12, 24, 36, 48)
STIFF = 1e4
"""Bars of the head over the legs."""
LATTICES = [
    {"face": 0.3, "legs": [0.0269, 0.0026], "lacing": [0.01, 0.005], "panel": 0.35, "sides": 3, "bracing": "zigzag"},
    {"face": 0.3, "legs": [0.0269, 0.0026], "lacing": [0.01, 0.005], "panel": 0.35, "sides": 4, "bracing": "zigzag"},
    {"face": 0.45, "legs": [0.0337, 0.0032], "lacing": [0.012, 0.006], "panel": 0.30, "sides": 3, "bracing": "horizontals"},
    {"face": 0.45, "legs": [0.0337, 0.0032], "lacing": [0.012, 0.006], "panel": 0.30, "sides": 4, "bracing": "horizontals"},
    {"face": 0.6, "legs": [0.0483, 0.0032], "lacing": [0.0213, 0.0026], "panel": 0.6, "sides": 3, "bracing": "cross"},
    {"face": 0.6, "legs": [0.0483, 0.0032], "lacing": [0.0213, 0.0026], "panel": 0.6, "sides": 4, "bracing": "cross"},
]


def ring(bar: list[float]) -> tuple[float, float]:
    """Area and second moment of a bar."""
    d, inner = bar[0], bar[0] - 2 * bar[1]
    return math.pi / 4 * (d**2 - inner**2), math.pi / 64 * (d**4 - inner**4)


def diagonals(lattice: dict, level: int) -> list[tuple[tuple[int, int], tuple[int, int]]]:
    """Joints (leg, level) that the diagonals of one panel run between."""
    n = lattice["sides"]
    found = []
    for k in range(n):
        left, right = k, (k + 1) % n
        up, down = ((left, level), (right, level + 1)), ((right, level), (left, level + 1))
        if lattice["bracing"] == "cross":
            found += [up, down]
        elif n == 3:
            found.append(up if level % 2 == 0 else down)
        else:
            found.append(up if (level + k) % 2 == 0 else down)
    return found


def frame(lattice: dict, panels: int) -> np.ndarray:
    """The spar as drawn; returns the place of the legs in plan (leg, 2)."""
    n, b, p = lattice["sides"], lattice["face"], lattice["panel"]
    radius = b / (2 * math.sin(math.pi / n))
    plan = radius * np.array([[math.cos(2 * math.pi * k / n), math.sin(2 * math.pi * k / n)] for k in range(n)])
    area, second = ring(lattice["legs"])
    thin, _ = ring(lattice["lacing"])
    ops.wipe()
    ops.model("basic", "-ndm", 3, "-ndf", 6)

    def tag(leg: int, level: int) -> int:
        return level * n + leg + 1

    for level in range(panels + 1):
        for k in range(n):
            ops.node(tag(k, level), *map(float, plan[k]), level * p)
            if level == 0:
                ops.fix(tag(k, level), 1, 1, 1, 1, 1, 1)
    ops.uniaxialMaterial("Elastic", 1, E)
    ops.geomTransf("Linear", 1, 1.0, 0.0, 0.0)
    number = 0

    def bar(one: tuple[int, int], other: tuple[int, int], size: float) -> None:
        nonlocal number
        number += 1
        ops.element("Truss", number, tag(*one), tag(*other), size, 1)

    for level in range(panels):
        for k in range(n):
            number += 1
            ops.element("elasticBeamColumn", number, tag(k, level), tag(k, level + 1), area, E, G, 2 * second, second, second, 1)
        for one, other in diagonals(lattice, level):
            bar(one, other, thin)
        if lattice["bracing"] == "horizontals" and level:
            for k in range(n):
                bar((k, level), ((k + 1) % n, level), thin)
    for k in range(n):
        bar((k, panels), ((k + 1) % n, panels), STIFF * area)
        if n == 4 and k < 2:
            bar((k, panels), (k + 2, panels), STIFF * area)
    return plan


def head(lattice: dict, panels: int, kind: str) -> float:
    """Work of a unit pull, moment, push or twist at the head: displacement or rotation along it."""
    plan = frame(lattice, panels)
    n = len(plan)
    radius = float(np.hypot(*plan[0]))
    unit = np.zeros((n, 6))
    if kind == "pull":
        unit[:, 2] = 1 / n
    elif kind == "push":
        unit[:, 0] = 1 / n
    elif kind == "moment":
        unit[:, 2] = plan[:, 0] / (n * radius**2 / 2)
    else:
        unit[:, 0], unit[:, 1] = -plan[:, 1] / (n * radius**2), plan[:, 0] / (n * radius**2)
    ops.timeSeries("Linear", 1)
    ops.pattern("Plain", 1, 1)
    for k in range(n):
        ops.load(panels * n + k + 1, *map(float, unit[k]))
    ops.system("UmfPack")
    ops.numberer("RCM")
    ops.constraints("Plain")
    ops.integrator("LoadControl", 1.0)
    ops.algorithm("Linear")
    ops.analysis("Static")
    assert ops.analyze(1) == 0
    moved = np.array([[ops.nodeDisp(panels * n + k + 1, d + 1) for d in range(6)] for k in range(n)])
    return float((moved * unit).sum())


def stiffness(lattice: dict) -> dict[str, float]:
    """EA, EI, GA, GJ from four lengths."""
    length = np.array(PANELS) * lattice["panel"]
    found = {kind: np.array([head(lattice, panels, kind) for panels in PANELS]) for kind in ("pull", "moment", "push", "twist")}
    linear = np.stack([length, np.ones_like(length)], axis=1)
    scale = length.max()
    cubic = np.stack([(length / scale) ** 3, (length / scale) ** 2, length / scale, np.ones_like(length)], axis=1)
    push = np.linalg.solve(cubic, found["push"])
    slope = {kind: np.linalg.lstsq(linear, found[kind], rcond=None)[0][0] for kind in ("pull", "moment", "twist")}
    return {
        "EA": 1 / slope["pull"],
        "EI": 1 / slope["moment"],
        "EI_of_push": scale**3 / (3 * push[0]),
        "GA": scale / push[2],
        "GJ": 1 / slope["twist"],
    }


if __name__ == "__main__":
    made = {"library": f"openseespy {version('openseespy')}", "date": datetime.now(UTC).date().isoformat(), "E": E, "G": G}
    rows = [{"lattice": lattice, "found": stiffness(lattice)} for lattice in LATTICES]
    text = json.dumps(made | {"rows": rows}, indent=1)
    Path(__file__).with_name("lattice.json").write_text(text + "\n", encoding="utf-8")
