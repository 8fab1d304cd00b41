"""The slender mast in the outside library openseespy, timed: how long one case of 72 wind directions takes there.

Several ways of modelling are timed and all are shown, with the error of their guy tensions against the library's own extrapolated
answer.  To compare at the same accuracy: the quickest way within 0.1 % beside our coarsest mesh within 0.1 %, and the mesh that comes
nearest to our default one beside that.  Only the search for equilibrium is timed, not the putting on of
loads, and the library is given its quickest equation solver.  Every case starts from the still-air state, as ours does; started from
the neighbouring direction instead it needs one Newton step less, which is shown too.
"""

from __future__ import annotations

import time
from dataclasses import dataclass, replace
from typing import Any

import numpy as np
from numpy.typing import NDArray

from tests.benchmark.masts import slender_18m

ACCURACY = 1e-3
"""Of the greatest tension."""
REFERENCE_MESHES = (8, 16)


@dataclass(frozen=True)
class Way:
    """One way of modelling: beam elements a metre, bars in a cable (0: catenary elements), where each case starts."""

    per_metre: int
    bars: int
    from_still_air: bool
    milliseconds: float = float("nan")
    steps: float = float("nan")
    error: float = float("nan")


WAYS = (
    Way(1, 0, True), Way(1, 0, False), Way(2, 0, True), Way(1, 8, True), Way(1, 16, True), Way(2, 16, True), Way(8, 0, True),
)  # fmt: skip


def timed_ways(repeats: int = 3) -> tuple[str, list[Way]] | None:
    """Version of the library and every way with its figures; None where the library is absent."""
    try:
        import openseespy.opensees as ops
    except ImportError:
        return None
    from tests.reference_numbers.opensees_model import Model

    inputs = slender_18m()
    coarse, fine = (_tensions(Model(inputs, n), inputs) for n in REFERENCE_MESHES)
    best = fine + (fine - coarse) / 3.0
    ways = []
    for way in WAYS:
        runs = [_timed(way, inputs, Model, best) for _ in range(repeats)]
        ways.append(min(runs, key=lambda run: run.milliseconds))
    ops.wipe()
    return str(ops.version()), ways


def fastest(ways: list[Way], accuracy: float) -> Way:
    """The quickest way from still air with at most such an error, or else the most exact one."""
    exact = [w for w in ways if w.error <= accuracy and w.from_still_air]
    return min(exact, key=lambda w: w.milliseconds) if exact else min(ways, key=lambda w: w.error)


def _ends(model: Any) -> list[float]:
    return [c[k] for c in model.results()["cables"].values() for k in ("tension_to_end", "tension_from_end")]


def _tensions(model: Any, inputs: dict[str, Any]) -> NDArray[np.float64]:
    """(direction, cable end) tensions."""
    model.solve()
    model.remember_position()
    found = []
    for bearing in inputs["wind"]["directions_deg"]:
        model.solve(1.0, bearing)
        found.append(_ends(model))
    return np.array(found)


def _timed(way: Way, inputs: dict[str, Any], model_of: Any, best: NDArray[np.float64]) -> Way:
    model = model_of(inputs, way.per_metre, way.bars, system="ProfileSPD", cable_tolerance=1e-8, cable_substeps=4, step_tolerance=1e-8)
    model.solve()
    model.remember_position()
    spent, steps, found = 0.0, 0, []
    for bearing in inputs["wind"]["directions_deg"]:
        if way.from_still_air:
            model.solve()
        model.apply(1.0, bearing)
        began = time.process_time()
        steps += model.find()
        spent += time.process_time() - began
        found.append(_ends(model))
    cases = len(found)
    error = float(np.abs(np.array(found) - best).max() / best.max())
    return replace(way, milliseconds=1e3 * spent / cases, steps=steps / cases, error=error)
