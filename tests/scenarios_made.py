"""Scenarios for tests, made from numbers: nested tables as in the scenario file, in SI with degrees and degrees Celsius.

`text` writes such a document as TOML with a unit on every quantity, metric or US; `turned` and `mirrored` give the same thing on a turned
or mirrored site.  `setting`, `cases` and `solved` take a document as far down the main line as a test needs.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from copy import deepcopy
from dataclasses import dataclass
from functools import cache
from typing import Any

import numpy as np

from guys import parse_scenario, stability, structure
from guys import setting as initial
from guys.equilibrium import Evaluation, Problem, State
from guys.loads import CaseLine, lines_of
from guys.results import Solution
from guys.scenario import Scenario
from guys.studies import standing

Document = dict[str, Any]

US = {
    "m": ("ft", 0.3048), "m2": ("ft2", 0.3048**2), "kg": ("lb", 0.45359237), "N": ("lbf", 4.4482216152605), "deg": ("deg", 1.0),
    "kg/m": ("lb/ft", 0.45359237 / 0.3048), "N/m": ("lbf/ft", 4.4482216152605 / 0.3048), "Pa": ("psi", 4.4482216152605 / 0.0254**2),
    "N m2": ("lbf ft2", 4.4482216152605 * 0.3048**2), "N m/rad": ("lbf ft/rad", 4.4482216152605 * 0.3048), "s": ("s", 1.0),
    "kg/m3": ("lb/ft3", 0.45359237 / 0.3048**3), "m/s": ("ft/s", 0.3048),
    "N m": ("lbf ft", 4.4482216152605 * 0.3048), "1/K": ("1/degF", 1.8),
}  # fmt: skip
"""SI unit: the US one and its factor (exact definitions of 1959; 1 lbf = 0.45359237 kg x 9.80665 m/s2)."""

_POINT = {"at": "m", "arm": "m"}
UNITS: dict[str, dict[str, str]] = {
    "foot": {"east": "m", "north": "m", "level": "m", "at": "m"},
    "spar": {"lean": "deg", "toward": "deg", "hinge_axis": "deg", "base_stiffness": "N m/rad"},
    "section": {
        "length": "m", "mass": "kg/m", "EA": "N", "EI": "N m2", "EI_x": "N m2", "EI_y": "N m2", "GJ": "N m2", "GA": "N", "width": "m",
        "iced_mass": "kg/m", "iced_width": "m", "capacity_axial": "N", "capacity_bending": "N m", "capacity_shear": "N",
        "capacity_torsion": "N m", "depth": "m", "corner": "m", "face": "deg",
    },
    "tube": {"diameter": "m", "wall": "m"},
    "fitting": {
        "at": "m", "mass": "kg", "area": "m2", "face": "deg", "face_tilt": "deg", "iced_mass": "kg", "iced_area": "m2", "width": "m",
        "height": "m", "bar": "m",
    },
    "offset": {"east": "m", "north": "m", "up": "m"},
    "load": {"east": "N", "north": "N", "up": "N"},
    "anchor": {"bearing": "deg", "radius": "m", "east": "m", "north": "m", "level": "m", "give": "N/m"},
    "guy_level": {**_POINT, "tension": "N", "length": "m"},
    "cable": {"tension": "N", "length": "m"},
    "from": _POINT,
    "to": _POINT,
    "rope": {"diameter": "m", "mass": "kg/m", "stiffness": "N", "strength": "N", "expansion": "1/K"},
    "plate": {"length": "m", "width": "m", "bearing": "Pa", "along": "deg"},
    "part": {"strength": "N"},
    "material": {"density": "kg/m3", "modulus": "Pa", "shear_modulus": "Pa", "yield": "Pa", "expansion": "1/K"},
    "setting": {"temperature": "degC"},
    "wind": {"speed": "m/s", "averaging": "s", "height": "m", "air_density": "kg/m3", "directions": "deg"},
    "ice": {"thickness": "m", "density": "kg/m3"},
    "case": {"temperature": "degC"},
    "allowables": {"lean": "deg"},
    "lost": {"lean": "deg"},
    "stage": {"up_to": "m", "wind": "m/s", "temperature": "degC"},
    "ranges": {"level": "m", "temperature": "K"},
}  # fmt: skip
"""Table: unit of each of its keys that is a quantity."""

INLINE = {"foot", "plate", "tube", "offset", "load", "from", "to", "profile"}
NAMED = {"rope", "part", "material"}


def text(document: Document, us: bool = False) -> str:
    """The document as a scenario file, in US units if asked."""
    lines = [f"{key} = {_plain(value)}" for key, value in document.items() if not isinstance(value, dict | list)]
    for key, value in document.items():
        if isinstance(value, list):
            for entry in value:
                lines += _table(f"[[{key}]]", key, entry, us, prefix=key)
        elif isinstance(value, dict) and key in NAMED:
            for name, entry in value.items():
                lines += _table(f'[{key}."{name}"]', key, entry, us)
        elif isinstance(value, dict):
            lines += _table(f"[{key}]", key, value, us)
    return "\n".join(lines) + "\n"


def _table(head: str, kind: str, entry: Document, us: bool, prefix: str = "") -> list[str]:
    subtables = {key: value for key, value in entry.items() if isinstance(value, list) and value and isinstance(value[0], dict)}
    lines = [head, *(f"{key} = {_value(kind, key, value, us)}" for key, value in entry.items() if key not in subtables)]
    for key, value in subtables.items():
        for below in value:
            lines += _table(f"[[{prefix}.{key}]]", key, below, us)
    return lines


def _value(kind: str, key: str, value: Any, us: bool) -> str:
    if isinstance(value, dict):
        return "{ " + ", ".join(f"{k} = {_value(key, k, v, us)}" for k, v in value.items()) + " }"
    if isinstance(value, list | tuple):
        return "[" + ", ".join(_value(kind, key, v, us) for v in value) + "]"
    unit = UNITS.get(kind, {}).get(key)
    if unit is None or isinstance(value, str | bool):
        return _plain(value)
    return f'"{_quantity(float(value), unit, us)}"'


def _quantity(value: float, unit: str, us: bool) -> str:
    if unit == "degC":
        return f"{value * 1.8 + 32!r} degF" if us else f"{value!r} degC"
    name, factor = US[unit] if us else (unit, 1.0)
    return f"{value / factor!r} {name}"


def _plain(value: Any) -> str:
    if isinstance(value, bool):
        return "true" if value else "false"
    return f'"{value}"' if isinstance(value, str) else repr(value)


# ---------------------------------------------------------------- parts


def spar(
    name: str = "mast", length: float = 18.0, *, foot: Document | None = None, section: Sequence[Document] | None = None, **keys: Any
) -> Document:
    """A spar; one tube section of its length unless sections are given."""
    where = {"east": 0.0, "north": 0.0, "level": 0.0} if foot is None else foot
    return {"name": name, "foot": where, "section": [tube(length)] if section is None else list(section), **keys}


def tube(length: float, diameter: float = 0.089, wall: float = 0.0032, material: str = "steel", drag: float = 1.2, **keys: Any) -> Document:
    return {"length": length, "tube": {"diameter": diameter, "wall": wall}, "material": material, "drag": drag, **keys}


def bar(length: float, mass: float = 0.0, EI: float = 1e5, **keys: Any) -> Document:
    """A section given outright, stiff against stretching and twisting in proportion to its bending, and without wind unless given."""
    return {"length": length, "mass": mass, "EA": EI * 1e3, "EI": EI, "GJ": 0.8 * EI, "width": 0.1, "drag": 0.0, **keys}


def weightless(length: float, **keys: Any) -> Document:
    """The section of a rigid spar without mass and wind."""
    return {"length": length, "mass": 0.0, "width": 0.1, "drag": 0.0, **keys}


def vector(east: float, north: float, up: float) -> Document:
    return {"east": east, "north": north, "up": up}


def fitting(name: str = "load", at: float = 18.0, **keys: Any) -> Document:
    return {"name": name, "at": at, **keys}


def anchors(radius: float, *bearings: float, names: Sequence[str] = "ABCDEFGH", **keys: Any) -> list[Document]:
    """Anchors on a circle about the first spar's foot."""
    return [{"name": n, "bearing": b, "radius": radius, **keys} for n, b in zip(names, bearings, strict=False)]


def cable(
    name: str, at: float, to: str | tuple[str, float], *, spar: str = "mast", rope: str = "rope", arm: float = 0.0, **keys: Any
) -> Document:
    """A cable to an anchor (its name) or to a point of another spar (spar, at); give tension, length or tight."""
    end = {"anchor": to} if isinstance(to, str) else {"spar": to[0], "at": to[1]}
    return {"name": name, "from": {"spar": spar, "at": at, "arm": arm}, "to": end, "rope": rope, **keys}


def rope(**keys: Any) -> Document:
    return {"diameter": 0.006, "mass": 0.15, "stiffness": 1.4e6, "strength": 23e3, "expansion": 11.5e-6, "drag": 1.2, **keys}


def wind(*directions: float, speed: float = 25.0, **keys: Any) -> Document:
    return {"speed": speed, "averaging": 3.0, "height": 10.0, "air_density": 1.25, "directions": list(directions), **keys}


def document(spars: Sequence[Document], anchor: Sequence[Document] = (), cable: Sequence[Document] = (), **tables: Any) -> Document:
    """A whole scenario; straight=True for weightless cables, still=True for one case without wind, other tables as given."""
    straight, still, ropes = tables.pop("straight", False), tables.pop("still", False), tables.pop("rope", {"rope": rope()})
    out: Document = {"title": "made for a test", "spar": list(spars), "anchor": list(anchor), "cable": list(cable), "rope": ropes}
    if straight:
        out["analysis"] = {"cable": "straight"}
    if still:
        out["case"] = [{"name": "still", "wind": 0.0}]
    return deepcopy({**out, **tables})


# ---------------------------------------------------------------- wholes


def mast(*directions: float, base: str = "pinned", tension: float = 1500.0, sides: int = 3, **tables: Any) -> Document:
    """The 18 m tube mast: guys at 9 m and 17 m to three anchors 11 m off, a fitting at its head, wind from the bearings given."""
    ring = anchors(11.0, *(360.0 / sides * k + 10.0 for k in range(sides)))
    levels = [(f"{h:g} m {a['name']}", h, a["name"], t) for h, t in ((9.0, tension / 1.5), (17.0, tension)) for a in ring]
    guys = [cable(name, at, to, tension=t) for name, at, to, t in levels]
    head = fitting("panel", mass=12.0, area=0.5, drag=1.3)
    tables = {"wind": wind(*directions), **tables} if directions else {"still": True, **tables}
    return document([spar(base=base, fitting=[head])], ring, guys, **tables)


def losing() -> Document:
    """The mast in two winds with all its guys, and in still air without two of them, when it falls, and without one."""
    away = (("lost", ["9 m A", "17 m A"]), ("spare", ["9 m B"]))
    return mast(30.0, 200.0, case=[{"name": "whole"}, *({"name": name, "wind": 0.0, "without": cables} for name, cables in away)])


def ring_mast(sides: int, *directions: float, level: float = 0.0, tension: float = 500.0, **tables: Any) -> Document:
    """A rigid mast of 10 m, 20 kg/m, pinned, with guys from its head at 0, 360/sides, ... to anchors 8 m off at `level`."""
    section = weightless(10.0) | {"mass": 20.0, "drag": 1.2}
    mast = spar(length=10.0, rigid=True, section=[section])
    ring = anchors(8.0, *(360.0 / sides * k for k in range(sides)), level=level)
    guys = [cable(f"guy {a['name']}", 10.0, a["name"], tension=tension) for a in ring]
    return document([mast], ring, guys, straight=True, **{"wind": wind(*(directions or (0.0,))), **tables})


def stayed(one: Document, *bearings: float, at: float | None = None, radius: float = 8.0, arm: float = 0.0, **tables: Any) -> Document:
    """One spar on guys from its head (or from `at`) to anchors A, B, ... at the bearings; tension=, length= or tight= of all guys."""
    length = sum(s["length"] for s in one["section"])
    given = {key: tables.pop(key) for key in ("tension", "length", "tight") if key in tables} or {"tension": 500.0}
    ring = anchors(radius, *bearings)
    guys = [cable(f"guy {a['name']}", length if at is None else at, a["name"], spar=one["name"], arm=arm, **given) for a in ring]
    return document([one], ring, guys, **({} if "wind" in tables else {"still": True}) | tables)


def boom(base: str = "hinged", rigid: Sequence[bool] = (False, False), **tables: Any) -> Document:
    """A boom heeled on a guyed mast, held up by a topping stay and sideways by two stays, with a load at its head.

    The tensions nearly balance by moments about heel and foot (found with plumb = true on rigid spars), so that nothing is pulled far over.
    """
    carried = fitting("load", at=8.0, load=vector(0.0, 150.0, -1500.0))
    spars = [
        spar("mast", section=[tube(12.0, 0.14, 0.005)], rigid=rigid[0]),
        spar(
            "boom",
            foot={"spar": "mast", "at": 1.5},
            section=[tube(8.0)],
            lean=55.0,
            toward=90.0,
            base=base,
            rigid=rigid[1],
            fitting=[carried],
        ),
    ]
    ring = [*anchors(9.0, 210.0, 330.0, 90.0, names=["S", "N", "E"]), *anchors(8.0, 25.0, 155.0, names=["NE", "SE"])]
    guys = [cable(f"guy {a}", 11.5, a, tension=t) for a, t in (("S", 2433.0), ("N", 2433.0), ("E", 546.0))]
    stays = [
        cable("topping stay", 12.0, ("boom", 8.0), tension=1760.0),
        *(cable(f"side {a}", 8.0, a, spar="boom", tension=t) for a, t in (("NE", 296.0), ("SE", 502.0))),
    ]
    tables = tables if "wind" in tables else {"still": True, **tables}
    return document(spars, ring, guys + stays, **tables)


def pylon(load: float = 0.0, length: float = 10.0, lean: float = 15.0, **tables: Any) -> Document:
    """A rigid, weightless pylon on a hinge, leaning east, held by two backstays to the west, with a weight and a pull west at its head."""
    head = fitting("head", at=length, mass=200.0, load=vector(-load, 0.0, 0.0))
    leaning = spar("pylon", rigid=True, base="hinged", lean=lean, toward=90.0, section=[weightless(length)], fitting=[head])
    stays = [cable(f"backstay {a}", length, a, spar="pylon", tension=600.0) for a in "AB"]
    return document([leaning], anchors(7.0, 240.0, 300.0), stays, **{"still": True, "straight": True, **tables})


def tipping() -> Document:
    """A leaning hinged pylon with a flat panel, two weightless backstays of given length; it tips over them in a wind from the front."""
    panel = fitting("panel", 15.0, mass=0.0, area=6.0, drag=1.3, shape="flat", face=90.0, load=vector(0.0, 0.0, -1200.0))
    section = tube(15.0, 0.1683, 0.005, "ref")
    leaning = spar("pylon", lean=30.0, toward=90.0, base="hinged", section=[section], fitting=[panel])
    ring = [{"name": n, "east": -8.0, "north": north, "level": 0.0} for n, north in (("BN", 4.0), ("BS", -4.0))]
    stays = [cable(f"backstay {n}", 15.0, n, spar="pylon", length=20.605226) for n in ("BN", "BS")]
    return document(
        [leaning], ring, stays, straight=True, rope={"rope": rope(diameter=0.01, mass=0.4, stiffness=4e6, strength=5e5)},
        material={"ref": {"density": 7850.0, "modulus": 210e9, "shear_modulus": 81e9, "yield": 50e9}},
        wind=wind(90.0, speed=160.0**0.5), allowables={"cable": 1.0, "sliding": 1.0, "lean": 85.0},
    )  # fmt: skip


# ---------------------------------------------------------------- the same on another site


def turned(original: Document, angle: float) -> Document:
    """The same, site and wind turned clockwise by an angle [deg]."""
    c, s = math.cos(math.radians(angle)), math.sin(math.radians(angle))
    return _moved(original, lambda bearing: (bearing + angle) % 360.0, lambda east, north: (c * east + s * north, c * north - s * east))


def mirrored(original: Document) -> Document:
    """The same in a mirror that swaps east and west."""
    return _moved(original, lambda bearing: -bearing % 360.0, lambda east, north: (-east, north))


def _moved(original: Document, bearing: Callable[[float], float], vector: Callable[[float, float], tuple[float, float]]) -> Document:
    def walk(value: Any) -> Any:
        if isinstance(value, list):
            return [walk(v) for v in value]
        if not isinstance(value, dict):
            return value
        out = {k: walk(v) for k, v in value.items()}
        if {"length", "width"} <= set(out):  # a plate, whose bearing is a pressure
            return {**out, **({"along": bearing(out["along"])} if "along" in out else {})}
        for key in ("bearing", "toward", "hinge_axis", "face"):
            if key in out:
                out[key] = bearing(out[key])
        if "directions" in out:
            out["directions"] = [bearing(d) for d in out["directions"]]
        if "east" in out:
            out["east"], out["north"] = vector(out["east"], out["north"])
        return out

    return {k: walk(v) for k, v in original.items()}


# ---------------------------------------------------------------- down the main line


def scenario(made: Document) -> Scenario:
    return parse_scenario(text(made))


@cache
def _setting(written: str, finer: int) -> initial.Setting:
    return initial.find(structure.build(parse_scenario(written), finer))


def setting(made: Document, finer: int = 1) -> initial.Setting:
    """The setting of a document (kept: it is frozen)."""
    return _setting(text(made), finer)


@dataclass(frozen=True)
class Cases:
    """Judged cases of a document: everything a test may want to look into."""

    problem: Problem
    judged: stability.Judged
    found: Evaluation

    @property
    def state(self) -> State:
        return self.judged.state

    @property
    def structure(self) -> structure.Structure:
        return self.problem.structure

    def tension(self) -> np.ndarray:
        """(case, cable) [N] at the `to` ends."""
        return np.linalg.norm(self.found.hanging.at_a, axis=-1) * self.problem.loads.present


def cases(made: Document, lines: Sequence[CaseLine] | None = None, finer: int = 1) -> Cases:
    """The listed cases of a document (or the lines given), solved and judged from its setting."""
    found = setting(made, finer)
    some = lines_of(found.problem.structure.scenario) if lines is None else lines
    problem = found.under(some)
    judged = stability.judge(problem, found.state, found.loads)
    return Cases(problem, judged, problem.evaluate(judged.state))


@cache
def _solved(written: str, finer: int, circle: bool) -> Solution:
    return standing.solution(*standing.cases(parse_scenario(written), finer, circle=circle), again=circle)


def solved(made: Document, finer: int = 1, us: bool = False) -> Solution:
    """The whole result of a document (kept: it is frozen)."""
    return _solved(text(made, us), finer, True)


def listed(made: Document) -> Solution:
    """The result of its listed cases alone, without the full circle of winds and the second solution (kept)."""
    return _solved(text(made), 1, False)
