"""Timing of our own solver: what one case costs in a batch, where the time goes, and how it grows.

The search for equilibrium (`solver.solve`) of all cases of a problem is timed from the still-air state, best of several runs, as processor
time of its one thread, so that other work on the machine counts little; loads, the setting and the verdict are timed apart.  Bare
factorisations are the very bands that the search factored, recorded and factored again by LAPACK alone.  The parts of a search are timed
by wrapping the functions named in `PARTS`, which do not contain each other.
"""

from __future__ import annotations

import importlib
import time
from collections.abc import Callable, Iterator
from contextlib import ExitStack, contextmanager
from dataclasses import dataclass
from typing import Any
from unittest.mock import patch

import numpy as np
from numpy.typing import NDArray

from guys import mesh, setting, solver, stability
from guys.equilibrium import Problem
from guys.loads import lines_of
from guys.scenario import Scenario, parse_scenario
from guys.structure import build

Vector = NDArray[np.float64]

PARTS = {
    "cables: catenaries to their chords": ("guys.equilibrium:Problem.pull",),
    "cables: blocks of the tangent": ("guys.equilibrium:Problem._cable_blocks",),
    "beams: deformations and their derivatives": ("guys.equilibrium:Problem._bend", "guys.beam:gradient"),
    "beams: blocks of the tangent": ("guys.beam:blocks",),
    "blocks summed and laid into the band": ("guys.band:add_up", "guys.band:to_band", "guys.band:fold", "guys.band:fold_gradient"),
    "banded factorisation": ("guys.band:factor",),
    "banded solution": ("guys.band:solve",),
    "nodes moved and turned": ("guys.equilibrium:Problem.advance",),
}


@dataclass(frozen=True)
class Prepared:
    """A structure with its setting found, and the problem of all its cases."""

    found: setting.Setting
    problem: Problem
    setting_seconds: float
    loads_seconds: float


@dataclass(frozen=True)
class Figures:
    """What is reported of one mast; milliseconds are per case."""

    nodes: int
    cables: int
    cases: int
    search_ms: float
    verdict_ms: float
    loads_ms: float
    setting_ms: float
    rounds: float
    out_of_balance: float
    mesh_of_greatest: float
    mesh_each: float
    factorisation_ms: float
    parts: dict[str, float]

    @property
    def ratio(self) -> float:
        """Search over the sum of its bare factorisations."""
        return self.search_ms / self.factorisation_ms


def prepare(scenario: Scenario, finer: int = 1, directions: int | None = None) -> Prepared:
    """Build, set, and load with the file's wind directions, or with evenly spaced ones."""
    began = time.process_time()
    structure = build(scenario, finer)
    found = setting.find(structure)
    between = time.process_time()
    bearings = None if directions is None else [2 * np.pi * k / directions for k in range(directions)]
    problem = found.under(lines_of(scenario, bearings))
    ended = time.process_time()
    return Prepared(found, problem, between - began, ended - between)


def search(mast: Prepared) -> solver.Outcome:
    """What is timed: every case from the still-air state to equilibrium."""
    return solver.solve(mast.problem, mast.problem.repeat(mast.found.state), stability.turned_over)


def least_time(work: Callable[[], object], repeats: int) -> float:
    """Least of several processor times [s] of this one thread, after one run that is not counted."""
    work()
    spent = []
    for _ in range(repeats):
        began = time.process_time()
        work()
        spent.append(time.process_time() - began)
    return min(spent)


def figures(text: str, repeats: int, directions: int | None = None) -> Figures:
    """Everything about one mast."""
    scenario = parse_scenario(text)
    mast, fine = prepare(scenario, 1, directions), prepare(scenario, 2, directions)
    out = search(mast)
    tension, reference = tensions(mast, out), tensions(fine, search(fine))
    cases = mast.problem.cases
    per_case = 1e3 / cases
    return Figures(
        nodes=mast.problem.structure.nodes,
        cables=len(scenario.cable),
        cases=cases,
        search_ms=per_case * least_time(lambda: search(mast), repeats),
        verdict_ms=per_case * least_time(lambda: stability.classify(mast.problem, out.state), repeats),
        loads_ms=per_case * mast.loads_seconds,
        setting_ms=1e3 * mast.setting_seconds,
        rounds=float(out.rounds.mean()),
        out_of_balance=float(out.error.max()),
        mesh_of_greatest=float(np.abs(tension - reference).max() / reference.max()),
        mesh_each=float(np.abs(tension / reference - 1).max()),
        factorisation_ms=per_case * bare_factorisations(mast, repeats),
        parts=parts(mast, repeats),
    )


def tensions(mast: Prepared, out: solver.Outcome) -> Vector:
    """(case, cable, end) [N]."""
    hanging = mast.problem.evaluate(out.state).hanging
    return np.stack([np.linalg.norm(hanging.at_a, axis=-1), np.linalg.norm(hanging.at_b, axis=-1)], axis=-1)


def bare_factorisations(mast: Prepared, repeats: int) -> float:
    """Seconds to factor once more every band that one search factors."""
    from guys import band

    bands: list[Vector] = []
    bare = band.factor

    def recording(k_band: Vector) -> Any:
        bands.append(k_band.copy())
        return bare(k_band)

    with patch.object(band, "factor", recording):
        search(mast)
    total = 0.0
    for k_band in bands:
        fresh = iter([k_band.copy() for _ in range(repeats + 1)])  # the factors overwrite the band
        total += least_time(lambda fresh=fresh: bare(next(fresh)), repeats)  # type: ignore[misc]
    return total


def parts(mast: Prepared, repeats: int) -> dict[str, float]:
    """Share of the time of a search spent in each of `PARTS`, and in the rest."""
    spent = dict.fromkeys(PARTS, 0.0)
    with ExitStack() as wrapped:
        for part, names in PARTS.items():
            for name in names:
                wrapped.enter_context(_timed(name, part, spent))
        began = time.process_time()
        for _ in range(repeats):
            search(mast)
        whole = time.process_time() - began
    shares = {part: seconds / whole for part, seconds in spent.items()}
    return shares | {"the rest": 1.0 - sum(shares.values())}


@contextmanager
def _timed(name: str, part: str, spent: dict[str, float]) -> Iterator[None]:
    """Wrap the function `module:name` so that its time is added to `spent[part]`."""
    module, _, path = name.partition(":")
    *owners, last = path.split(".")
    owner: Any = importlib.import_module(module)
    for step in owners:
        owner = getattr(owner, step)
    bare = getattr(owner, last)

    def timed(*arguments: Any, **named: Any) -> Any:
        began = time.process_time()
        try:
            return bare(*arguments, **named)
        finally:
            spent[part] += time.process_time() - began

    with patch.object(owner, last, timed):
        yield


def coarse(text: str, elements: int, repeats: int) -> tuple[float, float]:
    """Milliseconds per case, and greatest tension error over the greatest tension, with so many elements in a span."""
    scenario = parse_scenario(text)
    fine = prepare(scenario, 4)
    reference = tensions(fine, search(fine))
    with patch.object(mesh, "ELEMENTS", elements):
        mast = prepare(scenario)
    error = np.abs(tensions(mast, search(mast)) - reference).max() / reference.max()
    return 1e3 * least_time(lambda: search(mast), repeats) / mast.problem.cases, float(error)


def growth_with_cases(text: str, counts: tuple[int, ...], repeats: int) -> list[tuple[int, float]]:
    """(cases, milliseconds of the whole batch)."""
    scenario = parse_scenario(text)
    out = []
    for count in counts:
        mast = prepare(scenario, 1, count)
        out.append((count, 1e3 * least_time(lambda mast=mast: search(mast), repeats)))  # type: ignore[misc]
    return out


def growth_with_nodes(text: str, finer: tuple[int, ...], repeats: int) -> list[tuple[int, float, float]]:
    """(nodes, milliseconds per case, rounds) for meshes `finer` times as fine."""
    scenario = parse_scenario(text)
    out = []
    for factor in finer:
        mast = prepare(scenario, factor)
        rounds = float(search(mast).rounds.mean())
        seconds = least_time(lambda mast=mast: search(mast), repeats)  # type: ignore[misc]
        out.append((mast.problem.structure.nodes, 1e3 * seconds / mast.problem.cases, rounds))
    return out
