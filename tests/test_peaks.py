"""Mean wind and patches put together: by hand, against states solved one by one, and through every study."""

from __future__ import annotations

import json
import math
import time
from functools import cache
from typing import Any

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from toml_text import MAST, Document, changed, dumps_tables

from guys import parse_scenario, solve, stability
from guys.checks import extremes
from guys.checks.items import Item, group
from guys.exchange import result
from guys.loads import lines_of
from guys.results import Solution
from guys.setting import Setting, find
from guys.structure import build
from guys.studies import peaks
from guys.studies.batch import solve_lines
from guys.studies.limit import limits
from guys.studies.lost import lose
from tests.benchmark.masts import lattice_150m_toml

SUMMED = 1e-12
SAME = 1e-8
"""Relative: one case solved in batches of other cases, and on a turned site; and what is left of forces by subtraction."""
GUST = {"method": "patches", "turbulence": 0.2}
TWO_LEVELS = (
    ("guy_level",),
    [{"spar": "mast", "at": at, "rope": "wire", "to": ["N", "SE", "SW"], "tension": "1 kN"} for at in ("5 m", "9 m")],
)


def guyed(*directions: float, **gust: Any) -> Document:
    listed = [f"{d} deg" for d in directions or (20.0,)]
    return changed(MAST, (("gust",), {**GUST, **gust}), (("wind", "directions"), listed), TWO_LEVELS)


def set_up(document: Document) -> Setting:
    return find(build(parse_scenario(dumps_tables(document))))


@cache
def solved() -> Solution:
    return solve(parse_scenario(dumps_tables(guyed(20.0, 200.0))))


# ---------------------------------------------------------------- by hand


OF_THREE = peaks.grouped(lines_of(parse_scenario(dumps_tables(guyed(0.0, 90.0)))), [1, 3])


def test_numbers_by_hand() -> None:
    """Two changes of 3 and 4 are 5; away from zero; a line of one state is what it is."""
    values = np.array([[7.0], [-10.0], [-13.0], [-6.0]])
    assert peaks.peak(values, OF_THREE)[:, 0].tolist() == [7.0, -15.0]
    assert peaks.upward(values[:, 0], OF_THREE).tolist() == [7.0, -5.0]


def test_vectors_by_hand() -> None:
    """Along the mean (6, 8), 10 long, changes of 3 along and 4 across it."""
    values = np.array([[1.0, 2.0], [6.0, 8.0], [6.0 + 1.8, 8.0 + 2.4], [6.0 - 3.2, 8.0 + 2.4]])
    assert peaks.peak(values, OF_THREE) == pytest.approx(np.array([[1.0, 2.0], [9.0, 12.0]]), rel=SUMMED)


def test_what_the_mean_does_not_load_the_patches_do() -> None:
    values = np.array([[0.0, 0.0], [0.0, 0.0], [0.0, -3.0], [0.0, 4.0]])
    assert np.abs(peaks.peak(values, OF_THREE)).tolist() == [[0.0, 0.0], [0.0, 5.0]]
    assert not peaks.peak(np.zeros((4, 2)), OF_THREE).any()


@given(st.lists(st.tuples(st.floats(-5, 5), st.floats(-5, 5)), min_size=3, max_size=3), st.floats(0, math.tau))
def test_no_part_of_a_vector_passes_its_peak(three: list[tuple[float, float]], angle: float) -> None:
    """S_m +- S_P of the part along any direction, the formula of the standard for a number."""
    values = np.array([(0.0, 0.0), *three])
    along = values[1:] @ np.array([math.cos(angle), math.sin(angle)])
    part = abs(along[0]) + math.hypot(*(along[1:] - along[0]))
    assert part <= np.linalg.norm(peaks.peak(values, OF_THREE)[1]) * (1 + SUMMED) + SUMMED


RIGID: Document = {
    "title": "Rigid mast on a pin, held by four straight guys at mid-height",
    "spar": [
        {
            "name": "mast", "foot": {"east": "0 m", "north": "0 m", "level": "0 m"}, "base": "ball", "rigid": True,
            "section": [{"length": "20 m", "mass": "0.001 kg/m", "width": "0.1 m", "drag": 1.0}],
        }
    ],
    "anchor": [{"name": n, "bearing": f"{b} deg", "radius": "12 m"} for n, b in (("N", 0), ("E", 90), ("S", 180), ("W", 270))],
    "guy_level": [{"spar": "mast", "at": "12 m", "rope": "rod", "to": ["N", "E", "S", "W"], "tension": "5 kN"}],
    "rope": {"rod": {"diameter": "6 mm", "mass": "0.1 kg/m", "stiffness": "10000 MN", "strength": "30 kN", "drag": 1.2}},
    "wind": {"speed": "25 m/s", "averaging": "3 s", "height": "10 m", "directions": ["0 deg"]},
    "gust": GUST,
    "analysis": {"cable": "straight"},
}  # fmt: skip
GUSTS = ((0, 12), (12, 20), (0, 6), (6, 20))
"""Patches [m] of the rigid mast."""
LINEAR = 1e-4
"""Relative: stiff guys, so the mast leans by 1e-6; its weight, a thousandth of a kilogram a metre, and the sharing of the pull by the two
guys across the wind, (lean)^2, are far less."""


def test_a_statically_determinate_mast_by_hand() -> None:
    """Moments about the pin: guys at 12 m carry H = M/12, the two in the wind each H/(2 cos 45) of it, up and down from 5 kN.

    q = 382.8 Pa, on 0.1 m 38.28 N/m; mean 1/2.4 of that, a gust 1.4/2.4.  Patches 0-12, 12-20, 0-6, 6-20 m.
    """
    q = 0.5 * 1.225 * 25.0**2 * 0.1
    moments = [q * 1.4 / 2.4 * (b * b - a * a) / 2 for a, b in GUSTS]
    turning = q / 2.4 * 200.0, math.hypot(*moments)
    change = [m / 12.0 / (2 * math.cos(math.radians(45.0))) for m in turning]
    found = solve(parse_scenario(dumps_tables(RIGID)))
    by_name = dict(zip(found.cables.name, found.cables.tension_anchor[1], strict=True))
    assert by_name["12 m N"] == pytest.approx(5000.0 + sum(change), rel=LINEAR)
    assert by_name["12 m S"] == pytest.approx(5000.0 - change[0] + change[1], rel=LINEAR)
    assert by_name["12 m E"] == pytest.approx(5000.0, rel=LINEAR)
    level = q / 2.4 * 20.0 - turning[0] / 12.0
    shears = [q * 1.4 / 2.4 * (b - a) - m / 12.0 for (a, b), m in zip(GUSTS, moments, strict=True)]
    assert np.hypot(*found.bases.force[1, 0, :2]) == pytest.approx(abs(level) + math.hypot(*shears), rel=LINEAR)
    mast = found.spars[0]
    at_guys = np.flatnonzero(np.isclose(mast.station, 12.0))
    overhang = q / 2.4 * 32.0, math.hypot(*(q * 1.4 / 2.4 * m for m in (0.0, 32.0, 0.0, 32.0)))
    assert np.linalg.norm(mast.bending[1, at_guys], axis=-1) == pytest.approx(sum(overhang), rel=LINEAR)


def test_the_limiting_wind_of_the_same_mast_by_hand() -> None:
    """12 kN at a factor of 2: 5 kN + V^2 k = 6 kN, before any guy is slack."""
    per_square = 0.5 * 1.225 * 0.1
    mean, each = per_square / 2.4 * 200.0, [per_square * 1.4 / 2.4 * (b * b - a * a) / 2 for a, b in GUSTS]
    k = (mean + math.hypot(*each)) / 12.0 / (2 * math.cos(math.radians(45.0)))
    weak = changed(RIGID, (("rope", "rod", "strength"), "12 kN"))
    found = limits(parse_scenario(dumps_tables(weak)), apart=math.tau)
    assert found.circle[0].speed == pytest.approx(math.sqrt(1000.0 / k), rel=LINEAR)
    assert found.circle[0].governs == "cable 12 m N: tension"


# ---------------------------------------------------------------- against states solved one by one


def test_a_batch_is_what_its_states_give() -> None:
    setting = set_up(guyed(20.0, 200.0))
    lines = lines_of(setting.problem.structure.scenario)
    found = solve_lines(setting, lines, True)
    assert len(found.lines) == 2
    for k, line in enumerate(lines):
        one = solve_lines(setting, line.states(), True)
        assert len(one.lines) == 7
        f, g = one.forces, found.forces

        def together(values: Any) -> Any:
            change = values[1:] - values[0]
            return values[0], np.sqrt((change**2).sum(axis=0))

        mean, change = together(f.tension_top)
        assert g.tension_top[k] == pytest.approx(mean + change, rel=SAME)
        assert np.linalg.norm(g.on_spar[k], axis=-1) == pytest.approx(mean + change, rel=SAME)
        mean, change = together(f.pull[..., 2])
        assert g.pull[k, :, 2] == pytest.approx(mean + change, rel=SAME)
        mean, change = together(f.foot_force[..., 2])
        assert (g.foot_force[k, :, 2], g.foot_up[k]) == (pytest.approx(mean - change, rel=SAME), pytest.approx(mean + change, rel=SAME))
        mean, change = together(one.spars[0].axial)
        assert found.spars[0].axial[k] == pytest.approx(mean + np.sign(mean) * change, rel=SAME, abs=1e-6)
        bending = one.spars[0].bending
        spread = np.sqrt(((bending[1:] - bending[0]) ** 2).sum(axis=(0, 2)))
        assert np.linalg.norm(found.spars[0].bending[k], axis=-1) == pytest.approx(
            np.linalg.norm(bending[0], axis=-1) + spread, rel=SAME, abs=1e-6
        )
        assert found.curves[k] == pytest.approx(one.curves[0], rel=SAME, abs=1e-9)
        use, states = found.demands.use[k], one.demands.use
        assert (np.isnan(use) == np.isnan(states[0])).all()
        assert (np.nan_to_num(use) >= np.nan_to_num(np.nanmax(np.nan_to_num(states), axis=0)) * (1 - SAME)).all()


def test_a_single_patch_on_everything_is_the_plain_gust() -> None:
    """Guys at the head, so no tip: the one patch is the peak, and what grows with the wind is as in the plain gust."""
    head = changed(MAST, (("gust",), {**GUST, "method": "single"}), (("guy_level", 0, "at"), "12 m"), (("wind", "directions"), ["0 deg"]))
    setting, plain = set_up(head), set_up(changed(head, (("gust",), {"method": "plain"})))
    a, b = (solve_lines(each, lines_of(each.problem.structure.scenario), False).forces for each in (setting, plain))
    assert a.tension_top[0, 0] == pytest.approx(b.tension_top[0, 0], rel=SAME)
    assert a.pull[0, 0] == pytest.approx(b.pull[0, 0], rel=SAME, abs=1e-6)
    assert a.tension_top[0, 1] > b.tension_top[0, 1]


def test_a_holdfast_that_holds_less_in_a_state_is_judged_in_that_state() -> None:
    """A demand of 5 against 10 at the peak, and of 4 against 5 in the first patch: the latter governs."""
    item = [Item("anchor N", "pull", "N", "")]
    top = group(item, np.array([[1.0], [5.0]]), 10.0, 1.5)
    states = group(item, np.array([[1.0], [3.0], [4.0], [2.0]]), np.array([[10.0], [10.0], [5.0], [9.0]]), 1.5)
    found = peaks.judged(OF_THREE, top, states)
    assert (found.demand[:, 0].tolist(), found.capacity[:, 0].tolist()) == ([1.0, 4.0], [10.0, 5.0])


# ---------------------------------------------------------------- invariance, and through the studies


@pytest.mark.parametrize(("turn", "mirror"), [(37.0, False), (0.0, True)])
def test_a_turned_or_mirrored_site_has_the_same_peaks(turn: float, mirror: bool) -> None:
    def moved(bearing: float) -> float:
        return (-bearing if mirror else bearing) + turn

    there = guyed(20.0)
    for anchor, bearing in zip(there["anchor"], (0.0, 120.0, 240.0), strict=True):
        anchor["bearing"] = f"{moved(bearing)} deg"
    there["wind"]["directions"] = [f"{moved(20.0)} deg"]
    a, b = (solve_lines(each, lines_of(each.problem.structure.scenario), False) for each in (set_up(guyed(20.0)), set_up(there)))
    for name in extremes.GROUPS:
        assert getattr(extremes.measures(b.forces), name) == pytest.approx(
            getattr(extremes.measures(a.forces), name), rel=1e-7, abs=1e-6
        )
    assert b.demands.use == pytest.approx(a.demands.use, rel=1e-6, nan_ok=True)


def test_a_solution_judges_and_tells_the_peaks() -> None:
    s = solved()
    assert set(s.state) == {"stable"}
    greatest = np.nanmax(np.maximum(s.cables.tension_anchor, s.cables.tension_top), axis=0)
    assert [c.tension.value for c in s.worst_cables] == pytest.approx(greatest.tolist())
    finding = next(f for f in s.findings if f.thing == f"cable {s.worst_cables[0].name}")
    assert finding.demand == pytest.approx(s.worst_cables[0].tension.peak)
    told = json.loads(result.as_text(s))
    assert told["gust"]["patches"][0] == {"from_m": None, "to_m": 5.0}
    assert len(told["gust"]["patches"]) == 6
    assert "not of one equilibrium" in told["gust"]["note"]
    assert any("gusts: 6 patches" in note for note in s.notes)


def test_spans_bend_more_by_patches_than_by_the_plain_gust() -> None:
    """What the method is for: between the guys, a slender mast's bending grows although every patch is a part of the plain gust."""
    plain = solve(parse_scenario(dumps_tables(changed(guyed(20.0), (("gust",), {"method": "plain"})))))
    ours = solved()
    station = ours.spars[0].station
    between = (station > 5.5) & (station < 8.5)
    bent = [np.linalg.norm(s.spars[0].bending[1, between], axis=-1).max() for s in (ours, plain)]
    assert bent[0] > bent[1]


def test_lost_cables_are_judged_under_patches_too() -> None:
    plain, ours = (
        lose(parse_scenario(dumps_tables(changed(document, (("lost",), {"sudden": 1.5})))))
        for document in (MAST, changed(MAST, (("gust",), GUST)))
    )
    assert ours.losses == plain.losses
    assert ours.verdict.shape == plain.verdict.shape
    assert np.nanmax(ours.cells[0].use) != np.nanmax(plain.cells[0].use)


def test_a_gust_in_which_it_falls_is_named() -> None:
    """Guys of string: it stands in still air, and not in a wind that no guy can take."""
    soft = changed(guyed(20.0), (("rope", "wire", "stiffness"), "4 kN"), (("wind", "speed"), "60 m/s"))
    setting = set_up(soft)
    found = solve_lines(setting, lines_of(setting.problem.structure.scenario), False)
    assert found.code[0] == stability.NONE
    assert "wind: " in (found.reason[0] or "") or "gust from " in (found.reason[0] or "")
    assert np.isnan(found.forces.tension_top).all()
    assert np.isnan(found.demands.demand).all()


GOAL = 5.0
"""[s] of one processor, for 36 winds of a mast of six levels; 504 states take 0.8 s on the machine of the benchmark."""


def test_thirty_six_winds_of_a_mast_of_six_levels() -> None:
    text = lattice_150m_toml().replace("every 5 deg", "every 10 deg") + "[gust]\nmethod = \"patches\"\nturbulence = 0.15\n"
    setting = find(build(parse_scenario(text)))
    lines = lines_of(setting.problem.structure.scenario)
    start = time.process_time()
    found = solve_lines(setting, lines, False)
    assert time.process_time() - start < GOAL
    assert (len(found.lines), sum(len(line.states()) for line in lines)) == (36, 504)
    assert (found.code == stability.STABLE).all()


def test_lines_without_wind_are_solved_once() -> None:
    document = changed(guyed(20.0), (("case",), [{"name": "calm", "wind": 0.0}, {"name": "storm"}]))
    setting = set_up(document)
    lines = lines_of(setting.problem.structure.scenario)
    assert [len(line.states()) for line in lines] == [1, 7]
    calm, alone = solve_lines(setting, lines, False), solve_lines(setting, lines[:1], False)
    assert calm.forces.tension_top[0] == pytest.approx(alone.forces.tension_top[0], rel=SAME)
