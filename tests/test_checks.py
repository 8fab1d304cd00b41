"""Greatest values, findings, warnings and the second solve: each shown right on cases where the answer is plain, and shown to fail."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
import scenarios_made as made

from guys.checks import alarms, extremes, resolve
from guys.loads import CaseLine
from guys.recovery import Forces
from guys.results import Finding, SelfCheck, Solution

G = 9.80665


def finding(s: Solution, thing: str, quantity: str) -> Finding:
    return next(f for f in s.findings if (f.thing, f.quantity) == (thing, quantity))


# ---------------------------------------------------------------- greatest values


def line(name: str, bearing: float = math.nan) -> CaseLine:
    return CaseLine(name, bearing, 1.0, 1.0, 0.0, 288.15)


def test_extreme_takes_listed_value_and_peak_with_their_own_cases() -> None:
    listed, swept = [line("a"), line("b", 1.0)], [line("b", 1.0), line("b", 1.2)]
    e = extremes.extreme(np.array([3.0, 5.0]), listed, np.array([5.0, 5.5]), swept)
    assert (e.value, e.case, e.wind_from) == (5.0, "b", 1.0)
    assert (e.peak, e.peak_case, e.peak_wind_from) == (5.5, "b", 1.2)


def test_extreme_peak_is_never_below_the_listed_value() -> None:
    """The greatest may be in still air, which no sweep of winds covers."""
    e = extremes.extreme(np.array([7.0, 5.0]), [line("a"), line("b", 1.0)], np.array([5.0]), [line("b", 1.0)])
    assert (e.peak, e.peak_case) == (7.0, "a")
    assert math.isnan(e.peak_wind_from)


def test_extreme_passes_over_cases_without_an_equilibrium() -> None:
    e = extremes.extreme(np.array([np.nan, 2.0]), [line("a"), line("b", 1.0)], np.array([np.nan]), [line("b", 2.0)])
    assert (e.value, e.peak, e.case) == (2.0, 2.0, "b")
    none = extremes.extreme(np.array([np.nan]), [line("a")], np.zeros(0), [])
    assert math.isnan(none.value)
    assert none.case == ""


def forces(foot: tuple[float, float, float]) -> Forces:
    zero = np.zeros((1, 1))
    vector = np.zeros((1, 1, 3))
    flags = np.zeros((1, 1), dtype=bool)
    return Forces(
        np.array([[3.0]]), np.array([[4.0]]), vector, vector, zero, flags, ~flags, np.array([[[3.0, 4.0, 12.0]]]), np.array([[foot]]),
        np.array([[foot[2]]]), np.array([[[0.0, 6.0, 8.0]]]), np.array([[[2 * math.sin(0.05), 0.0, 0.0]]]),
    )  # fmt: skip


def test_measures_by_hand() -> None:
    m = extremes.measures(forces((3.0, 4.0, -50.0)))
    got = {g: float(getattr(m, g)[0, 0]) for g in extremes.GROUPS}
    expected = {"tension": 4.0, "resultant": 13.0, "horizontal": 5.0, "uplift": 12.0, "down": 50.0, "lift": 0.0, "sideways": 5.0}
    assert got == pytest.approx({**expected, "whole": math.sqrt(2525.0), "turning": 10.0, "slide": 0.1, "lean": 0.1})


def test_a_lifted_base_slides_without_bound() -> None:
    m = extremes.measures(forces((3.0, 4.0, 20.0)))
    assert float(m.lift[0, 0]) == 20.0
    assert math.isinf(float(m.slide[0, 0]))


# ---------------------------------------------------------------- findings


def test_cable_factor_is_strength_over_the_greatest_tension_of_all_directions() -> None:
    s = made.solved(made.mast(30.0))
    for k, worst in enumerate(s.worst_cables):
        f = finding(s, f"cable {worst.name}", "tension")
        assert worst.tension.value == pytest.approx(np.maximum(s.cables.tension_anchor, s.cables.tension_top)[:, k].max())
        assert f.demand == worst.tension.peak >= worst.tension.value
        assert f.factor == worst.factor == pytest.approx(23e3 / worst.tension.peak)
        assert (f.verdict, f.required, f.default) == ("within", 2.0, True)


def test_what_is_past_its_allowable_comes_first() -> None:
    greatest = made.solved(made.mast(30.0)).worst_cables[3].tension.peak
    just = {"rope": {"rope": made.rope(strength=1.999 * greatest)}}
    s = made.solved(made.mast(30.0, **just))
    assert s.findings[0].verdict == "past"
    assert finding(s, f"cable {s.cables.name[3]}", "tension").verdict == "past"
    assert {f.thing for f in s.past} <= {f"cable {n}" for n in s.cables.name}
    order = ["past", "within", "not judged"]
    assert sorted(s.findings, key=lambda f: order.index(f.verdict)) == list(s.findings)
    assert not made.solved(made.mast(30.0, rope={"rope": made.rope(strength=2.001 * max(c.tension.peak for c in s.worst_cables))})).past


def test_allowables_given_are_used_and_not_called_defaults() -> None:
    s = made.solved(made.mast(30.0, allowables={"cable": 3.0, "lean": 0.01}))
    cable, lean = finding(s, "cable 9 m A", "tension"), finding(s, "spar mast", "lean")
    assert (cable.required, cable.default) == (3.0, False)
    assert (lean.capacity, lean.default) == (pytest.approx(math.radians(0.01)), False)
    assert lean.verdict == "past"
    assert lean.demand == pytest.approx(np.nanmax(s.head_lean[1:]), rel=0.3)
    assert lean.demand >= np.nanmax(s.head_lean[1:])


def test_what_lacks_a_strength_or_a_holdfast_is_not_judged() -> None:
    rope = made.rope()
    del rope["strength"]
    s = made.solved(made.mast(30.0, rope={"rope": rope}))
    cable, anchor = finding(s, "cable 9 m A", "tension"), finding(s, "anchor A", "pull")
    assert (cable.verdict, anchor.verdict) == ("not judged", "not judged")
    assert math.isnan(cable.factor)
    assert anchor.demand == s.worst_anchors[0].resultant.peak
    assert cable.why == "its rope has no strength"


def test_lean_is_judged_only_in_cases_with_wind() -> None:
    """The allowable is that of heads in service, in cases with wind; in still air a lean is warned about instead."""
    document = made.mast()
    document["anchor"][1] |= {"radius": 9.0, "level": 1.0}
    s = made.solved(document)
    assert not [f for f in s.findings if f.quantity == "lean"]
    assert warned(s, "in still air")


def test_sliding_is_friction_over_sideways_by_down() -> None:
    """A block on a fixed rigid column: wind F at the base, weight W: factor 0.4 W/F."""
    hung = made.fitting(at=3.0, mass=100.0, area=1.0, drag=1.0)
    column = made.spar(base="fixed", rigid=True, friction=0.4, section=[made.weightless(3.0)], fitting=[hung])
    s = made.solved(made.document([column], wind=made.wind(0.0)))
    f = finding(s, "base of mast", "sideways/down")
    assert f.demand == pytest.approx(0.5 * 1.25 * 25.0**2 / (100.0 * G))
    assert f.factor == pytest.approx(0.4 * 100.0 * G / (0.5 * 1.25 * 25.0**2))
    assert (f.verdict, f.required) == ("past", 1.5)
    assert finding(made.solved(made.mast(30.0)), "base of mast", "sideways/down").verdict == "not judged"


# ---------------------------------------------------------------- warnings


def warned(s: Solution, *words: str) -> list[str]:
    return [w for w in s.warnings if all(word in w for word in words)]


def test_nothing_alarming_warns_of_nothing() -> None:
    assert made.solved(made.mast(30.0)).warnings == ()


def test_a_base_pulled_upward_is_warned_about() -> None:
    """A load of 3 kN upward on a fixed column that weighs less, and on a guyed mast whose guys pull down more: only the first lifts."""
    up = made.fitting(at=4.0, load=made.vector(0.0, 0.0, 3000.0))
    s = made.solved(made.document([made.spar(base="fixed", section=[made.tube(4.0)], fitting=[up])], still=True))
    lift = 3000.0 - math.pi * (0.089 - 0.0032) * 0.0032 * 7850 * 4.0 * G
    assert s.worst_feet[0].lift.peak == pytest.approx(lift, rel=1e-9)
    assert warned(s, "base of mast is pulled upward by 2.73 kN", "it must be held down")
    document = made.mast()
    document["spar"][0]["fitting"].append(made.fitting("balloon", load=made.vector(0.0, 0.0, 3000.0)))
    assert not warned(made.solved(document), "pulled upward")


def test_a_heel_pulled_off_its_mast_is_warned_about() -> None:
    document = made.boom()
    assert not warned(made.solved(document), "pulled off")
    document["spar"][1]["fitting"][0]["load"] = made.vector(9000.0, 0.0, 8000.0)
    document["spar"][1]["base"] = "fixed"
    for stay in document["cable"][3:]:
        del stay["tension"]
        stay["length"] = 12.5
    assert warned(made.solved(document), "heel of boom is pulled off mast by", "it must be held")


def test_a_cable_above_its_strength_is_warned_about() -> None:
    s = made.solved(made.mast(30.0, rope={"rope": made.rope(strength=1600.0)}))
    above = {c.name for c in s.worst_cables if c.tension.peak > 1600.0}
    assert above
    assert len(warned(s, "is above its strength 1.6 kN")) == len(above)


def test_initial_tensions_that_the_setting_does_not_hold_are_told() -> None:
    """Tensions whose thrust buckles the mast: it comes to rest bowed, its guys nowhere near what was asked for."""
    document = made.mast()
    document["spar"][0]["section"] = [made.tube(18.0, 0.06, 0.002)]
    for guy in document["cable"]:
        guy["tension"] = 2500.0
    s = made.solved(document)
    assert s.state[0] == "stable"
    assert abs(s.cables.tension_anchor[0] - 2500.0).max() > 25.0
    assert len(warned(s, "does not hold the initial tensions asked for", "for 2.5 kN (562 lbf)")) == 1
    assert not warned(made.solved(made.mast(30.0)), "asked for")


def test_a_plumb_setting_far_from_its_targets_is_told() -> None:
    """One guy asked for five times what its neighbours are cannot stay so on a mast that stands as drawn."""
    document = {**made.mast(), "setting": {"plumb": True}}
    document["cable"][0]["tension"] = 5000.0
    s = made.solved(document)
    got = s.cables.tension_anchor[0, 0]
    assert got < 2500.0
    assert len(warned(s, "to stand as drawn", "for 5 kN (1124 lbf)")) == 1
    assert not warned(made.solved({**made.mast(), "setting": {"plumb": True}}), "to stand as drawn")


def test_falls_between_the_listed_directions_are_warned_about() -> None:
    """A leaning pylon without a forestay, listed only in winds that press it onto its backstays: from the east it would tip."""
    document = made.pylon(wind=made.wind(270.0, speed=30.0))
    del document["case"]
    document["spar"][0]["fitting"].append(made.fitting("panel", at=10.0, area=2.0, drag=1.3))
    s = made.solved(document)
    assert s.state == ("stable", "stable")
    gap = warned(s, "design: no stable equilibrium between the listed directions either, in wind from")
    assert len(gap) == 1
    assert "pylon falls toward" in gap[0]
    tipping = [round(math.degrees(b)) for b in s.sweep.bearing[0][np.isnan(s.sweep.resultant[0, :, 0])]] if s.sweep else []
    assert 90 in tipping
    assert 270 not in tipping


def test_gaps_are_told_case_by_case_in_the_order_of_the_compass() -> None:
    lines = [CaseLine(name, math.radians(b), 1.0, 1.0, 0.0, 288.15) for name in ("storm", "iced") for b in (0.0, 90.0)]
    gaps = [("storm", math.radians(b), f"falls at {b}") for b in (80.0, 10.0, 92.5, 90.0)] + [("iced", math.radians(40.0), "tips")]
    assert alarms._between_directions(lines, gaps) == [
        "storm: no stable equilibrium between the listed directions either, in wind from 10°, 80°, 92.5°; from 10°: falls at 10.0",
        "iced: no stable equilibrium between the listed directions either, in wind from 40°; from 40°: tips",
    ]


def test_the_first_falls_are_told_and_the_others_named() -> None:
    s = made.solved(made.mast(*(30.0 * k for k in range(12)), case=[{"name": "lost", "without": ["9 m A", "17 m A"]}]))
    falls = [f"{round(math.degrees(w))}°" for w, state in zip(s.wind_from, s.state, strict=True) if state == "none"]
    assert len(falls) > alarms.SAID
    assert len(warned(s, "lost, wind from", "of the way")) == alarms.SAID
    assert warned(s, f"lost, wind from {', '.join(falls[alarms.SAID :])}: no stable equilibrium either")


def test_of_ties_the_first_is_named() -> None:
    """Mirror winds come to the same but for rounding and the end of the iteration; a greater one is greater all the same."""
    rising = 1.0 + np.arange(4) * 1e-10
    assert [extremes.first_greatest(v) for v in (rising, -rising, rising[::-1], 1e9 * rising)] == [0, 0, 0, 0]
    assert extremes.first_greatest(np.array([math.nan, 1.0, 1.0 + 1e-6])) == 2
    assert extremes.first_greatest(np.array([math.nan, 1.0, math.inf, math.inf])) == 2
    table = np.array([[math.nan, 2.0], [2.0 + 1e-9, 1.0]])
    assert np.unravel_index(extremes.first_greatest(table), table.shape) == (0, 1)


def test_failed_self_checks_are_warned_about() -> None:
    bad = SelfCheck(2e-9, "other stable state", 0.2, "storm", math.radians(40))
    words = alarms._checks(bad)
    assert "differ by 2.0e-09 of the reference force: a fault of the program" in words[0]
    assert words[1].startswith("storm, wind from 40°: solved again by another method")
    assert alarms._checks(replace(bad, balance=0.9e-9, resolve="inconclusive")) == []


# ---------------------------------------------------------------- solved again


@pytest.mark.parametrize(
    "document",
    [made.mast(30.0), made.mast(30.0, straight=True), made.mast(30.0, base="ball"), made.boom(), made.pylon()],
    ids=["mast", "straight", "ball", "boom", "pylon"],
)
def test_another_minimiser_comes_to_the_same_answer(document: made.Document) -> None:
    solved = made.cases(document)
    again = resolve.resolve(solved.problem, solved.state)
    assert again.verdict == "agrees"
    assert again.error < resolve.SOLVED
    assert again.difference < resolve.AGREES


def test_a_false_answer_is_not_agreed_with() -> None:
    """A state a millimetre off where the upper guys are: the re-solve returns to the true one and says so."""
    solved = made.cases(made.mast(30.0))
    problem, state = solved.problem, solved.state
    held = solved.structure.cables.b.node[3]
    step = np.zeros((1, problem.pattern.unknowns))
    step[0, [j for j, (n, k) in enumerate(problem.pattern.free) if n == held and k == 0]] = 1e-3
    again = resolve.resolve(problem, problem.advance(state, problem.evaluate(state), step))
    assert again.verdict == "other stable state"
    assert again.difference > resolve.AGREES


def test_a_second_solve_that_stalls_is_inconclusive(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(resolve, "EVALUATIONS", 2)
    solved = made.cases(made.mast(30.0))
    assert resolve.resolve(solved.problem, solved.state).verdict == "inconclusive"
