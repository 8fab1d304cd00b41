"""Verdicts: stable, neutral, unstable, none, and what is said of each; against eigenvalues, moments by hand and Euler's load."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
import scenarios_made as made
from scipy.linalg import eigh
from scipy.optimize import brentq

from guys import band, parse_scenario, solver, stability
from guys.equilibrium import Problem, State
from guys.loads import lines_of
from guys.setting import find
from guys.structure import build
from guys.studies.batch import at_rest
from tests.benchmark.masts import lattice_45m_toml

SAME = 1e-6
"""Relative: eigenvalues of the scaled band and of the full pencil."""
FOUND_WITHIN = 2 * stability.LEAST_STEP
"""Share of the load within which the end of a path is found: the last step that stood and the first that did not."""


# ---------------------------------------------------------------- classification


@pytest.mark.parametrize(
    "document", [made.mast(40.0), made.boom(), made.pylon(), made.mast(base="ball")], ids=["mast", "boom", "pylon", "ball"]
)
def test_modes_are_those_of_the_full_pencil(document: made.Document) -> None:
    """K x = lam M x with the full matrices; stable means every lam above ZERO, neutral the least one zero within it."""
    solved = made.cases(document)
    k = band.dense(stability.tangent(solved.problem, solved.state)[0])
    value = eigh(k, np.diag(solved.problem.mass), eigvals_only=True)
    found = stability.modes(solved.problem, solved.state, 3)
    count = len(found.value)
    assert found.value == pytest.approx(value[:count], rel=SAME, abs=0.1 * stability.ZERO)
    expected = stability.STABLE if value[0] > stability.ZERO else stability.NEUTRAL
    assert stability.classify(solved.problem, solved.state).tolist() == [expected]
    assert np.abs(np.concatenate([found.shape[..., :3], found.shape[..., 3:] * solved.structure.height], axis=-1)).max() == pytest.approx(
        1.0
    )


def column(load: float, EI: float = 1e5, rounder: float = 1.0) -> made.Document:
    """A fixed column of 6 m, weightless, with a weight on its head; a little stiffer about its second axis."""
    section = made.bar(6.0, EI=EI)
    del section["EI"]
    section |= {"EI_x": EI, "EI_y": EI * rounder}
    hung = made.fitting(at=6.0, load=made.vector(0.0, 0.0, -load))
    return made.document([made.spar("column", base="fixed", section=[section], fitting=[hung])], still=True)


EULER = math.pi**2 * 1e5 / (4 * 6.0**2)
"""[N] of a column fixed at its foot and free at its head."""


@pytest.mark.parametrize(("share", "stands"), [(0.5, True), (0.998, True), (1.002, False)])
def test_a_column_is_unstable_from_eulers_load_on(share: float, stands: bool) -> None:
    """pi2 EI/4 L2 within 0.2 %: the straight column in the tangent alone, before it is pushed."""
    setting = made.setting(column(1.0, rounder=1.5))
    problem = setting.problem
    force = problem.loads.force * share * EULER
    heavy = Problem(problem.structure, replace(problem.loads, force=force, dyad=problem.loads.dyad * share * EULER), problem.length)
    code = stability.classify(heavy, _shortened(heavy))[0]
    assert (code == stability.STABLE) == stands


def _shortened(problem: Problem) -> State:
    """The straight column under its load: solved without leaving the axis, which symmetry keeps it on."""
    out = solver.solve(problem, problem.drawn())
    assert out.converged.all()
    assert np.abs(out.state.u[..., :2]).max() == 0.0
    return out.state


def test_a_column_beyond_eulers_load_bends_aside_and_one_far_beyond_falls() -> None:
    """At 1.01 of it the bent column stands close by, both ways; at twice none does, and the straight one is called what it is."""
    shares = (("below", 0.99), ("above", 1.01), ("far", 2.0))
    case = [{"name": name, "wind": 0.0, "dead": share / 0.9} for name, share in shares]
    s = made.listed({**column(0.9 * EULER, rounder=1.5), "case": case})
    assert s.state == ("stable", "stable", "stable", "unstable")
    assert s.note[1] is None
    assert s.note[2] is not None
    assert s.note[2].startswith("the straight equilibrium is unstable")
    assert "mirror" in s.note[2]
    head = s.spars[0].displacement[2, -1]
    assert abs(head[1]) > 0.1 > abs(head[0]) * 1e3
    assert s.reason[3] is not None
    assert s.reason[3].startswith("column is in an equilibrium that does not hold: it goes toward")
    assert s.unsettled == (False, False, False, True)


def test_a_snap_from_a_stiff_state_is_a_fall_and_no_fault_of_the_solver() -> None:
    """The lattice mast of 45 m in a wind straight on its lost low guy: its least eigenvalue stays what it is in still air until it snaps.

    The same whether the end of the path is found within a 64th or a 1024th of the load, and never the solver's fault.
    """
    scenario = parse_scenario(lattice_45m_toml())
    assert scenario.wind is not None
    setting = find(build(scenario.model_copy(update={"wind": scenario.wind.model_copy(update={"speed": 40.0})})))
    lost = ("15.0 m ring N",)
    line = replace(next(x for x in lines_of(scenario, [0.0]) if x.wind > 0), without=lost)
    calm, still = at_rest(setting, (lost,))
    row = np.array([len(still.code) - 1])
    start, loads = still.state.take(row), calm.loads.take(row)
    for least in (1 / 64, 1 / 1024):
        judged = stability.judge(setting.under([line]), start, loads, least)
        assert (judged.code.tolist(), judged.stuck.tolist()) == ([stability.NONE], [False])
        assert judged.lost_at[0] == pytest.approx(0.168, abs=1.5 * least)
        assert 0 in judged.beyond


# ---------------------------------------------------------------- free spin


def test_ball_base_spins_freely_and_is_only_noted() -> None:
    s = made.listed(made.mast(40.0, base="ball"))
    assert set(s.state) == {"neutral"}
    assert set(s.note) == {"mast may spin freely about its own axis"}
    assert not any(s.unsettled)
    pinned = made.listed(made.mast(40.0))
    assert s.cables.tension_anchor[1] == pytest.approx(pinned.cables.tension_anchor[1], rel=1e-6)


def test_a_spar_that_may_sway_freely_is_neutral_and_counts() -> None:
    """A weightless rigid mast on slack straight guys: nothing holds it anywhere near upright."""
    document = made.stayed(made.spar(rigid=True, section=[made.weightless(10.0)]), 0.0, 120.0, 240.0, length=13.0, straight=True)
    s = made.listed(document)
    assert s.state[0] == "neutral"
    assert s.note[0] == "a motion costs nothing: mast may turn or sway freely"
    assert all(s.unsettled)


# ---------------------------------------------------------------- falls


@pytest.mark.parametrize(("lost", "toward"), [("A", 190), ("B", 310), ("C", 70)])
def test_a_mast_on_three_guys_falls_when_one_is_lost(lost: str, toward: int) -> None:
    """In still air, away from the lost guy: the two others pull it over.  Anchors at 10, 130 and 250 degrees."""
    document = {**made.mast(), "case": [{"name": "lost", "wind": 0.0, "without": [f"9 m {lost}", f"17 m {lost}"]}]}
    s = made.listed(document)
    assert s.state == ("stable", "none")
    assert s.reason[1] is not None
    assert f"mast falls toward {toward}°" in s.reason[1]
    assert any(f"lost: mast falls toward {toward}°" in w for w in s.warnings)


def test_a_spar_that_hangs_where_the_search_left_it_does_not_stand() -> None:
    """A jib pinned to a boom without a stay swings down to hang below: turned over, so it falls, in the setting already."""
    document = made.boom()
    jib = made.spar("jib", foot={"spar": "boom", "at": 5.0}, section=[made.tube(3.0, 0.05, 0.003)], lean=80.0, toward=60.0)
    s = made.listed({**document, "spar": [*document["spar"], jib]})
    assert set(s.state) == {"none"}
    assert "jib falls" in str(s.reason[0])
    assert str(s.reason[1]).startswith("the structure does not stand in still air: ")
    assert len(s.warnings) == 1


def test_a_solver_that_does_not_get_there_is_not_a_structure_that_falls() -> None:
    """A mast of 18 m as stiff as a tower ten metres across: rounding is above what counts as converged, and that is what is said."""
    document = made.mast(30.0)
    document["spar"][0]["section"] = [{**made.bar(18.0, mass=20.0, EI=1e12, drag=1.2), "EA": 1e11}]
    solved = made.cases(document)
    assert solved.judged.code.tolist() == [stability.FAILED]
    assert solved.judged.stuck.tolist() == [True]
    s = made.listed(document)
    assert s.failed
    assert s.reason[1] == "the solver failed on this case; this is a fault of the program, not a statement about the structure"


def windy_pylon(area: float) -> made.Document:
    """The pylon leaning 15 degrees east on two backstays, blown at from the east by a uniform wind on a weightless panel at its head."""
    document = made.pylon(wind=made.wind(90.0, speed=20.0))
    document["spar"][0]["fitting"].append(made.fitting("panel", at=10.0, area=area, drag=1.0))
    for stay in document["cable"]:
        del stay["tension"]
        stay["length"] = 14.09
    del document["case"]
    return document


def tipping_force(document: made.Document) -> float:
    """[N] F cos a = W sin a at the angle a where the backstays have just gone slack."""
    anchor = 7.0 * np.array([math.sin(math.radians(240.0)), math.cos(math.radians(240.0)), 0.0])

    def stretch(a: float) -> float:
        return float(np.linalg.norm(10.0 * np.array([math.sin(a), 0.0, math.cos(a)]) - anchor)) - 14.09

    return 200.0 * 9.80665 * math.tan(brentq(stretch, 0.0, 0.6))


@pytest.mark.parametrize("times", [1.3, 2.5])
def test_a_leaning_pylon_tips_where_moments_about_its_hinge_say(times: float) -> None:
    """Wind `times` the tipping force: it falls at 1/times of the load, toward the west, its stays slack by then."""
    force = tipping_force(windy_pylon(1.0))
    area = times * force / (0.5 * 1.25 * 20.0**2)
    solved = made.cases(windy_pylon(area))
    assert solved.judged.code.tolist() == [stability.NONE]
    assert solved.judged.lost_at[0] <= 1 / times <= solved.judged.lost_at[0] + FOUND_WITHIN
    s = made.listed(windy_pylon(area))
    share = math.floor(100 * solved.judged.lost_at[0]) / 100
    assert s.reason[1] is not None
    assert f"pylon falls toward 270° at {share:.2f} of the load" in s.reason[1]


def test_a_leaning_pylon_stands_just_below_its_tipping_wind() -> None:
    force = tipping_force(windy_pylon(1.0))
    s = made.listed(windy_pylon(0.99 * force / (0.5 * 1.25 * 20.0**2)))
    assert s.state[1] == "stable"
    assert s.cables.tension_anchor[1].max() < 0.02 * s.cables.tension_anchor[0].max()


# ---------------------------------------------------------------- branches


def in_line(**tables: object) -> made.Document:
    """A heavy rigid mast on three straight, barely taut guys, the wind in line with one of them."""
    head = made.fitting(at=12.0, mass=60.0, area=0.8, drag=1.2)
    mast = made.spar(rigid=True, section=[made.weightless(12.0)], fitting=[head])
    return made.stayed(mast, 0.0, 120.0, 240.0, length=14.422205, straight=True, wind=made.wind(0.0), **tables)


def test_a_mast_on_one_taut_guy_in_line_with_the_wind_stands_on_a_neighbour() -> None:
    """Alone the windward guy does not hold it sideways (its weight tips it); pushed aside it comes to rest on the next guy, either way."""
    s = made.listed(in_line())
    assert s.state == ("stable", "stable")
    assert s.note[1] is not None
    assert s.note[1].startswith("the straight equilibrium is unstable")
    tension = s.cables.tension_anchor[1]
    assert tension[0] > 100.0
    assert sorted(tension[1:] > 0) == [False, True]
    assert abs(s.spars[0].displacement[1, -1, 0]) > 1e-3
    assert any("branches in design, wind from 0°" in w for w in s.warnings)


def test_both_mirror_states_count_in_the_worst_loads() -> None:
    s = made.listed(in_line())
    listed = [c.tension.value for c in s.worst_cables]
    assert listed[1] == pytest.approx(listed[2], rel=1e-6)
    assert listed[1] == pytest.approx(s.cables.tension_anchor[1, 1:].max(), rel=1e-6)


def test_guys_too_loose_to_hold_a_mast_upright_let_it_lean_until_they_do() -> None:
    """Tight by the catenary's rule is not taut enough for this head: the setting branches and says so."""
    document = made.mast()
    for guy in document["cable"]:
        del guy["tension"]
        guy["tight"] = True
    s = made.listed(document)
    assert s.state[0] == "stable"
    assert str(s.note[0]).startswith("the straight equilibrium is unstable")
    assert np.degrees(s.head_lean[0, 0]) > 0.01
    assert any("branches in setting" in w for w in s.warnings)


# ---------------------------------------------------------------- angles and words


def test_angles_between_states_and_falls_are_told_by_foot_head_lines() -> None:
    solved = made.cases(made.pylon())
    problem, state = solved.problem, solved.state
    step = np.full((1, 1), 0.2)
    other = problem.advance(state, problem.evaluate(state), step)
    back = problem.advance(state, problem.evaluate(state), -step)
    assert stability.turn_between(problem, state, other)[0] == pytest.approx(0.2, rel=1e-9)
    bearings = sorted(round(math.degrees(stability.falling_part(problem, state, s)[1])) for s in (other, back))
    assert bearings == [90, 270]
    assert not stability.turned_over(problem, other)[0]
    for _ in range(5):
        other = problem.advance(other, problem.evaluate(other), step)
    assert stability.turned_over(problem, other)[0]


def test_a_path_reaches_states_far_from_the_setting() -> None:
    """Wind from the west on soft backstays turns the pylon by more than ten degrees; moments about the hinge by hand, where it stands."""
    document = windy_pylon(4.0)
    document["wind"]["directions"] = [270.0]
    document["rope"]["rope"]["stiffness"] = 4.5e4
    s = made.listed(document)
    assert s.state == ("stable", "stable")
    assert math.degrees(s.head_lean[1, 0] - s.head_lean[0, 0]) > 10.0
    head = s.spars[0].drawn[-1] + s.spars[0].displacement[1, -1]
    pull = -s.cables.force_on_spar[1].sum(axis=0)
    loads = np.array([0.5 * 1.25 * 20.0**2 * 4.0, 0.0, -200.0 * 9.80665])
    assert np.cross(head, loads)[1] == pytest.approx(np.cross(head, pull)[1], rel=1e-8)
