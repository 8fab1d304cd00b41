"""Paths against one parameter: Euler, Greenhill, masts on springs, a pylon that tips, and crossings; against closed forms."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
import scenarios_made as made

from guys import path, recovery, stability
from guys.equilibrium import Index, Problem, State
from guys.loads import lines_of
from guys.path import CLOSE, Paths, Stops, crossings, follow
from guys.rotation import Array

MESH = 2e-4
"""Relative: what eight elements leave of a buckling load (a tenth of the fourth power of pi/16), and the shortening."""
END = CLOSE + MESH
"""Relative: within which the end of a path is told."""


def along(document: made.Document, most: float, measure: path.Measure | None = None, first: float = 0.1) -> tuple[path.At, Paths]:
    """The path of a document's still-air loads times a factor, from nothing up."""
    problem = made.setting(document).problem

    def at(rows: Index, x: Array) -> Problem:
        loads = problem.loads.take(np.zeros(len(rows), dtype=np.int64))
        factor = {n: x.reshape(-1, *([1] * (getattr(loads, n).ndim - 1))) * getattr(loads, n) for n in ("force", "dyad", "cable_load")}
        return replace(problem, loads=replace(loads, **factor))

    start = stability.settle(at(np.array([0]), np.array([first])), problem.drawn())
    assert start.code[0] <= stability.NEUTRAL
    return at, follow(at, start.state, np.array([first]), Stops(first, 1.0, most), measure or head)


def column(load: float = 0.0, mass: float = 0.0, length: float = 6.0, EI: float = 1e5) -> made.Document:
    section = made.bar(length, EI=EI, mass=mass)
    del section["EI"]
    section |= {"EI_x": EI, "EI_y": 1.5 * EI, "EA": 1e5 * EI}
    hung = [made.fitting(at=length, load=made.vector(0.0, 0.0, -load))] if load else []
    return made.document([made.spar("column", length, base="fixed", section=[section], fitting=hung)], still=True)


def test_eulers_column_branches_and_stands_aside() -> None:
    """The straight path runs past pi2 EI/4 L2; the column stands bent beyond it and is followed on (its path rises: elastica)."""
    euler = math.pi**2 * 1e5 / (4 * 6.0**2)
    _, found = along(column(load=0.5 * euler), 2.02)
    assert found.branches_at[0] / 2 == pytest.approx(1.0, rel=END)
    assert not found.lost[0]
    assert found.low[0] == 2.02


def test_own_weight_branches_at_greenhills() -> None:
    """q L3/EI = 7.83734743894: 9/4 j2 with J-1/3(j) = 0 (Greenhill 1881)."""
    heavy = 7.83734743894 * 1e5 / 6.0**3 / 9.80665
    _, found = along(column(mass=0.5 * heavy), 2.02)
    assert found.branches_at[0] / 2 == pytest.approx(1.0, rel=END)


def test_a_rigid_mast_on_springs_is_lost_at_their_stiffness() -> None:
    """P = k h2/H for a rigid mast on level stays at h, k = 2 EA/L0 + 2 T/L for two pairs: the stiffness a brace needs (Winter 1958)."""
    high, held, reach, pull, EA = 10.0, 6.0, 400.0, 1000.0, 2e6
    weight = made.fitting(at=high, load=made.vector(0.0, 0.0, -100.0))
    mast = made.spar("mast", rigid=True, section=[made.weightless(high)], fitting=[weight])
    ring = made.anchors(reach, 0.0, 90.0, 180.0, 270.0, level=held)
    stays = [made.cable(f"stay {a['name']}", held, a["name"], tension=pull) for a in ring]
    document = made.document([mast], ring, stays, still=True, straight=True, rope={"rope": made.rope(stiffness=EA)})
    stiff = 2 * EA / reach * (1 + pull / EA) + 2 * pull / reach
    _, found = along(document, 1e4, first=1.0)
    first = found.low[0] if math.isnan(found.branches_at[0]) else found.branches_at[0]
    assert 100.0 * first == pytest.approx(stiff * held**2 / high, rel=END)


def test_a_step_that_took_too_many_rounds_does_not_bound_its_path(monkeypatch: pytest.MonkeyPatch) -> None:
    """With five rounds a step most long ones are given up; the path comes to the same end by shorter ones, not by creeping on from each."""
    document = made.mast(20.0, wind=made.wind(20.0, speed=25.0))
    setting = made.setting(document)
    line = lines_of(setting.problem.structure.scenario)[0]

    def at(rows: Index, x: Array) -> Problem:
        return setting.under([replace(line, wind=float(v)) for v in x])

    def walked() -> Paths:
        start = stability.judge(at(np.array([0]), np.ones(1)), setting.state, setting.loads)
        return follow(at, start.state, np.ones(1), Stops(0.25, 0.25, 100.0), head)

    plain = walked()
    monkeypatch.setattr(path, "SHORT_ROUNDS", 5)
    short = walked()
    assert short.low[0] == pytest.approx(plain.low[0], rel=2 * CLOSE)
    assert len(short.x) < 2 * len(plain.x)


def test_both_leeward_guys_drop_at_once_and_the_path_stands_aside() -> None:
    """Wind straight on one of three guys: when the other two drop, one alone can hold the rigid mast sideways: many rounds.

    The wind at which they drop is where moments about the foot vanish, the leeward chords as long as the unstressed guys.
    """
    arm, head, radius, pull, EA, weight = 9.0, 12.0, 9.0, 8e3, 2e5, 2000 * 9.80665
    top = made.fitting(at=head, mass=2000.0, area=2.0, drag=1.2)
    mast = made.spar(length=head, rigid=True, section=[made.weightless(head)], fitting=[top])
    rope = {"rope": made.rope(stiffness=EA, drag=0.0)}
    blown = made.wind(0.0, profile="uniform")
    setting = made.setting(
        made.stayed(mast, 0.0, 120.0, 240.0, at=arm, radius=radius, tension=pull, rope=rope, wind=blown, straight=True)
    )
    line = lines_of(setting.problem.structure.scenario)[0]

    def at(rows: Index, x: Array) -> Problem:
        return setting.under([replace(line, speed=float(v)) for v in x])

    def loose(problem: Problem, state: State) -> Array:
        return recovery.looseness(problem, state, problem.evaluate(state))

    found = follow(at, setting.state, np.zeros(1), Stops(10.0, 0.2, 150.0), loose)
    unstressed = math.hypot(arm, radius) / (1 + pull / EA)
    sine = (arm**2 + radius**2 - unstressed**2) / (arm * radius)
    cosine, chord = math.sqrt(1 - sine**2), math.sqrt(arm**2 + radius**2 + 2 * arm * radius * sine)
    held = EA * (chord / unstressed - 1) * arm * radius * cosine / chord - weight * head * sine
    drops = math.sqrt(held / (0.5 * 1.25 * 1.2 * 2.0 * head * cosine))
    assert np.nanmin(crossings(at, found, loose)) == pytest.approx(drops, rel=1e-4)
    assert not found.failed[0]
    assert found.low[0] > 1.01 * drops


def head(problem: Problem, state: State) -> Array:
    """Move of the last node east, less a centimetre."""
    return moved(problem, state) - 0.01


def moved(problem: Problem, state: State) -> Array:
    return np.asarray(state.u[:, problem.structure.head.node, 0])


def test_crossings_are_solved_states() -> None:
    """Where a side load has moved a head by a centimetre: solved again there, the head is there; and P L3/3EI, for so small a move."""
    push = made.fitting(at=6.0, load=made.vector(5.0, 0.0, 0.0))
    document = made.document([made.spar("column", 6.0, base="fixed", section=[made.bar(6.0)], fitting=[push])], still=True)
    at, found = along(document, 20.0, head)
    answer = crossings(at, found, head)
    again = stability.settle(at(np.array([0]), answer[0]), made.setting(document).problem.drawn())
    assert moved(at(np.array([0]), answer[0]), again.state)[0, 0] == pytest.approx(0.01, rel=path.ROOT + path.MET)
    assert 5.0 * answer[0, 0] == pytest.approx(0.01 * 3 * 1e5 / 6.0**3, rel=1e-4)


def test_nothing_crosses_where_nothing_is_reached_and_at_the_start_where_it_is_past() -> None:
    push = made.fitting(at=6.0, load=made.vector(5.0, 0.0, 0.0))
    document = made.document([made.spar("column", 6.0, base="fixed", section=[made.bar(6.0)], fitting=[push])], still=True)

    def both(problem: Problem, state: State) -> Array:
        return np.hstack([moved(problem, state) - 0.01, moved(problem, state) + 1.0])

    at, found = along(document, 1.0, both)
    nowhere, at_once = crossings(at, found, both)[0]
    assert math.isnan(nowhere)
    assert at_once == found.x[0]


def test_paths_together_are_the_paths_alone() -> None:
    """Each row by itself or in company: the same end, to rounding."""
    euler = math.pi**2 * 1e5 / (4 * 6.0**2)
    problem = made.setting(column(load=0.5 * euler)).problem
    factor = np.array([1.0, 0.7])

    def at(rows: Index, x: Array) -> Problem:
        loads = problem.loads.take(np.zeros(len(rows), dtype=np.int64))
        scale = (x * factor[rows]).reshape(-1, 1, 1)
        return replace(problem, loads=replace(loads, force=scale * loads.force, dyad=scale[..., None] * loads.dyad))

    def walk(rows: Index) -> Array:
        start = stability.settle(at(rows, np.full(len(rows), 0.1)), problem.repeat(problem.drawn()).take(np.zeros(len(rows), int)))
        mine = follow(lambda r, x: at(rows[r], x), start.state, np.full(len(rows), 0.1), Stops(0.1, 1.0, 3.0), head)
        return mine.branches_at

    both = walk(np.array([0, 1]))
    assert both[0] == pytest.approx(walk(np.array([0]))[0], rel=1e-12)
    assert both[1] * 0.7 == pytest.approx(both[0], rel=2 * CLOSE)
