"""Make the stored reference numbers: `python tests/reference_numbers/make_with_openseespy.py` (by hand; needs openseespy).

Writes `guyed_mast.json` and `stayed_boom.json` beside itself.  Each holds all inputs, the same structure as a scenario file, what
the outside library gave, the mesh error it was given with, and what of the library was verified first.  Ordinary tests read the files
and never import the library.

How a number is made: the still-air case is solved, its position is kept as the setting position on which wind is worked out, and
every case is solved from there.  Three meshes, each twice as fine as the one before; the numbers stored are extrapolated from the
last two (`fine + (fine - middle) / 3`, the mesh error being of second order), and the error stored is their greatest distance from the
same extrapolation one mesh coarser, which errs sixteen times as much if the order holds.
A second idealisation of the cables, chains of straight bars extrapolated the same way, is solved apart and its distance stored.
"""

from __future__ import annotations

import datetime
import json
import platform
import re
from pathlib import Path
from typing import Any

import numpy as np
import openseespy.opensees as ops
from opensees_model import GRAVITY, Model
from scenario_lines import scenario_lines
from verify_elements import verify

HERE = Path(__file__).parent
PER_METRE = (2, 4, 8)  # beam elements a metre of spar
BARS = (16, 32)  # bars in each cable of the second idealisation
BALANCE = 1e-6  # N, sum of loads and reactions: what openseespy's Newton leaves of forces up to 4e4 N

Inputs = dict[str, Any]

STEEL = {"density": 7850.0, "modulus": 210e9, "shear_modulus": 81e9}
ROPE = {"diameter": 0.006, "mass": 0.15, "stiffness": 1.4e6, "strength": 23e3, "drag": 1.2}


def _guy(name: str, at: float, anchor: str, length: float) -> Inputs:
    return {"name": name, "from": {"spar": "mast", "at": at}, "to": {"anchor": anchor}, "length": length}


GUYED_MAST: Inputs = {
    "title": "Reference mast on uneven ground",
    "spars": [
        {
            "name": "mast", "foot": [0.0, 0.0, 0.0], "lean_deg": 0.0, "toward_deg": 0.0, "base": "pinned", "length": 24.0,
            "tube": {"diameter": 0.1143, "wall": 0.004}, "drag": 1.2,
            "fittings": [{"name": "head", "at": 24.0, "mass": 12.0, "area": 0.5, "drag": 1.3, "load": [0.0, 0.0, 0.0]}],
            "stations": [4.0, 8.0, 12.0, 16.0, 20.0, 23.0, 24.0],
        }
    ],
    "material": STEEL,
    "rope": ROPE,
    "anchors": [
        {"name": "A", "bearing_deg": 10.0, "radius": 14.0, "level": 1.0},
        {"name": "B", "bearing_deg": 100.0, "radius": 15.0, "level": 0.0},
        {"name": "C", "bearing_deg": 195.0, "radius": 13.5, "level": -0.8},
        {"name": "D", "bearing_deg": 280.0, "radius": 16.0, "level": 0.4},
    ],
    "cables": [
        _guy("low A", 8.0, "A", 15.628), _guy("low B", 8.0, "B", 16.971), _guy("low C", 8.0, "C", 16.088),
        _guy("low D", 8.0, "D", 17.686), _guy("middle A", 16.0, "A", 20.487), _guy("middle B", 16.0, "B", 21.894),
        _guy("middle C", 16.0, "C", 21.516), _guy("middle D", 16.0, "D", 22.313), _guy("top A", 23.0, "A", 26.037),
        _guy("top B", 23.0, "B", 27.412), _guy("top C", 23.0, "C", 27.317), _guy("top D", 23.0, "D", 27.649),
    ],
    "wind": {"speed": 32.0, "air_density": 1.171875, "pressure": 600.0, "profile": "uniform", "directions_deg": [10.0, 55.0, 150.0, 260.0]},
    "cases": [{"name": "wind", "dead": 1.0, "wind": 1.0}],
}  # fmt: skip

STAYED_BOOM: Inputs = {
    "title": "Reference boom stayed from a mast",
    "spars": [
        {
            "name": "mast", "foot": [0.0, 0.0, 0.0], "lean_deg": 0.0, "toward_deg": 0.0, "base": "pinned", "length": 12.0,
            "tube": {"diameter": 0.1397, "wall": 0.005}, "drag": 1.2, "fittings": [],
            "stations": [1.0, 6.0, 11.5, 12.0],
        },
        {
            "name": "boom", "foot": {"spar": "mast", "at": 1.0}, "lean_deg": 35.0, "toward_deg": 90.0, "base": "hinged",
            "hinge_axis_deg": 180.0, "length": 9.0, "tube": {"diameter": 0.0889, "wall": 0.0032}, "drag": 1.2,
            "fittings": [{"name": "load", "at": 9.0, "mass": 0.0, "load": [0.0, 300.0, -3000.0]}],
            "stations": [3.0, 4.5, 6.0, 9.0],
        },
    ],
    "material": STEEL,
    "rope": ROPE,
    "anchors": [
        {"name": "NE", "bearing_deg": 30.0, "radius": 9.0, "level": 0.3},
        {"name": "SE", "bearing_deg": 140.0, "radius": 10.0, "level": -0.5},
        {"name": "SW", "bearing_deg": 225.0, "radius": 10.0, "level": 0.0},
        {"name": "NW", "bearing_deg": 310.0, "radius": 11.0, "level": 0.6},
        {"name": "E", "bearing_deg": 85.0, "radius": 9.0, "level": -0.4},
    ],
    "cables": [
        {"name": "topping stay", "from": {"spar": "mast", "at": 11.5}, "to": {"spar": "boom", "at": 9.0}, "length": 6.025},
        {"name": "side stay NE", "from": {"spar": "boom", "at": 9.0}, "to": {"anchor": "NE"}, "length": 11.237},
        {"name": "side stay SE", "from": {"spar": "boom", "at": 9.0}, "to": {"anchor": "SE"}, "length": 11.782},
        _guy("guy SW", 11.5, "SW", 15.208), _guy("guy NW", 11.5, "NW", 15.455), _guy("guy E", 11.5, "E", 14.904),
    ],
    "wind": None,
    "cases": [{"name": "heavy", "dead": 1.5, "wind": 0.0}],
}  # fmt: skip


CONVENTIONS = {
    "tension_to_end, tension_from_end": "size of the cable's pull at its `to` end (anchor) and its `from` end (mast)",
    "force_on_to_end, force_on_from_end": "pull of the cable on what holds that end",
    "force_on_ground, force_on_carrier": "what the foot does to the ground, the heel to the spar that carries it; moments likewise",
    "displacement": "from the drawn position",
    "axial": "section force along the spar's present direction, thrust negative; left out where something is attached and it jumps",
    "bending": "size of the bending moment vector, both axes together; left out at a heel, where it jumps",
    "beams": "no shear flexibility; tube area and second moment exact; spin of the base and its moment about the vertical held",
    "loads": "dead; wind worked out on the still-air (setting) position: spars by their own direction there, cables by their chord,"
    " the whole force on a chord spread evenly over the unstressed length; pressure uniform from the lowest point up",
    "hinged heel": "turns about the level axis; the two other rotations are those of the carrier",
}


CHAIN_NOTE = (
    "openseespy holds and ties rotations by their increments, so what `no spin` of a base means depends in second order on the path of"
    " the iteration; it matters only where the base takes a moment about the vertical (the boom: 1e-5 of the greatest tension)"
)


def case_list(inputs: Inputs) -> list[tuple[str, float, float | None]]:
    """(name, dead, wind bearing or None): the still-air setting first, then each case and direction."""
    cases: list[tuple[str, float, float | None]] = [("setting", 1.0, None)]
    for case in inputs["cases"]:
        directions = inputs["wind"]["directions_deg"] if case["wind"] else [None]
        cases += [(case["name"], case["dead"], direction) for direction in directions]
    return cases


def solve_all(inputs: Inputs, per_metre: int, bars: int = 0) -> list[Inputs]:
    """Results of every case of one mesh."""
    model = Model(inputs, per_metre, bars)
    found = []
    for name, dead, wind_from in case_list(inputs):
        model.solve(dead, wind_from)
        if name == "setting":
            model.remember_position()
        found.append(model.results())
        _check_balance(model, found[-1])
    return found


def _check_balance(model: Model, result: Inputs) -> None:
    """All loads must arrive on the ground: bases and anchors, summed apart from the library's own assembly."""
    arrived = [b["force_on_ground"] for b in result["bases"].values()]
    arrived += [result["cables"][c["name"]]["force_on_to_end"] for c in model.inputs["cables"] if "anchor" in c["to"]]
    miss = float(np.abs(np.sum(arrived, axis=0) - model.total_load()).max())
    if miss > BALANCE:
        raise RuntimeError(f"loads and reactions differ by {miss} N")


def _leaves(tree: Any, key: str = "") -> list[tuple[str, float]]:
    """(name of the quantity, number) of every number in a nested result, in order."""
    if isinstance(tree, dict):
        return [leaf for k, v in tree.items() for leaf in _leaves(v, k)]
    if isinstance(tree, list):
        return [leaf for v in tree for leaf in _leaves(v, key)]
    return [(key, float(tree))]


def _map(function: Any, *trees: Any) -> Any:
    """The function applied to corresponding numbers of equal nested results."""
    if isinstance(trees[0], dict):
        return {k: _map(function, *(t[k] for t in trees)) for k in trees[0]}
    if isinstance(trees[0], list):
        return [_map(function, *items) for items in zip(*trees, strict=True)]
    return function(*trees)


def finer(coarse: Any, fine: Any) -> Any:
    """Richardson's extrapolation from a mesh and its double, second order."""
    return _map(lambda c, f: f + (f - c) / 3.0, coarse, fine)


def distance(one: Any, other: Any) -> dict[str, float]:
    """Greatest absolute difference of each quantity; tensions also relative to the greatest tension."""
    gaps: dict[str, float] = {}
    for (key, a), (_, b) in zip(_leaves(one), _leaves(other), strict=True):
        gaps[key] = max(gaps.get(key, 0.0), abs(a - b))
    greatest = max(value for key, value in _leaves(one) if key.startswith("tension"))
    gaps["tension_relative"] = max(gaps["tension_to_end"], gaps["tension_from_end"]) / greatest
    del gaps["at"]
    return {key: float(f"{gap:.1e}") for key, gap in gaps.items()}


def reference(inputs: Inputs, verified: Inputs) -> Inputs:
    """The whole content of one file."""
    meshes = [solve_all(inputs, per_metre) for per_metre in PER_METRE]
    coarse, best = finer(*meshes[:2]), finer(*meshes[1:])
    chains = finer(*(solve_all(inputs, PER_METRE[1], bars) for bars in BARS))
    heads = [{"case": name, "dead": dead, "wind_from_deg": wind} for name, dead, wind in case_list(inputs)]
    return {
        "made_with": {
            "library": "openseespy",
            "version": ops.version(),
            "python": platform.python_version(),
            "date": datetime.date.today().isoformat(),
            "script": Path(__file__).name,
        },
        "units": "SI (m, N, kg, Pa); x east, y north, z up; bearings in degrees clockwise from north, of wind: where it comes from",
        "conventions": CONVENTIONS,
        "inputs": {"gravity": GRAVITY, **inputs},
        "scenario_toml": scenario_lines(inputs),
        "mesh": {
            "beam_elements_per_metre": PER_METRE,
            "greatest_distance_finest_to_extrapolated": distance(meshes[2], best),
            "greatest_distance_middle_to_extrapolated": distance(meshes[1], best),
            "error_estimate": distance(coarse, best),
        },
        "cables_as_bar_chains": {"bars": BARS, "distance": distance(chains, meshes[1]), "note": CHAIN_NOTE},
        "verified_first": verified,
        "cases": [head | _map(lambda x: float(f"{x:.10g}"), result) for head, result in zip(heads, best, strict=True)],
    }


def _text(content: Inputs) -> str:
    """JSON with each vector on one line."""
    loose = json.dumps(content, indent=1)
    return re.sub(r"\[\s+([-\d.,\se+]*?)\s+\]", lambda m: "[" + " ".join(m[1].split()) + "]", loose) + "\n"


def main() -> None:
    """Write both files."""
    verified = verify()
    for name, inputs in (("guyed_mast", GUYED_MAST), ("stayed_boom", STAYED_BOOM)):
        content = reference(inputs, verified)
        (HERE / f"{name}.json").write_text(_text(content), encoding="utf-8")
        print(name, content["mesh"], content["cables_as_bar_chains"], sep="\n")


if __name__ == "__main__":
    main()
