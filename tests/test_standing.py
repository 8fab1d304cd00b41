"""The main job: what a `Solution` holds, in which order and shape, and what it says of cases that do not stand."""

from __future__ import annotations

import math
from dataclasses import fields

import numpy as np
import pytest
import scenarios_made as made

from guys import __version__, solve
from guys.results import Extreme, Solution

BALANCE = 1e-9
"""Out-of-balance promised for every stable case, of the reference force."""


def test_the_setting_comes_first_and_then_the_cases_with_their_winds() -> None:
    s = made.solved(made.losing())
    assert s.case == ("setting", "whole", "whole", "lost", "spare")
    assert np.isnan(s.wind_from[[0, 3, 4]]).all()
    assert np.degrees(s.wind_from[1:3]) == pytest.approx([30.0, 200.0])
    assert (s.version, s.scenario.title) == (__version__, "made for a test")


@pytest.mark.parametrize("document", [made.losing(), made.boom(), made.mast()], ids=["mast", "boom", "still"])
def test_arrays_have_the_shapes_the_docstrings_say(document: made.Document) -> None:
    s = made.solved(document)
    cases, cables, anchors = len(s.case), len(s.cables.name), len(s.anchors.name)
    for name in ("tension_anchor", "tension_top", "unstressed_length", "slack", "present"):
        assert getattr(s.cables, name).shape == (cases, cables)
    assert s.cables.force_on_anchor.shape == s.cables.force_on_spar.shape == (cases, cables, 3)
    assert s.cables.curve.shape[:2] == (cases, cables)
    assert s.anchors.pull.shape == (cases, anchors, 3)
    assert s.bases.force.shape == s.bases.moment.shape == (cases, len(s.bases.spar), 3)
    assert s.heels.force.shape == (cases, len(s.heels.spar), 3)
    assert len(s.bases.spar) + len(s.heels.spar) == len(s.scenario.spar)
    assert s.head_lean.shape == (cases, len(s.spars))
    for line in s.spars:
        stations = len(line.station)
        assert line.displacement.shape == (cases, stations, 3)
        assert line.axial.shape == line.torsion.shape == (cases, stations)
        assert line.bending.shape == line.shear.shape == (cases, stations, 2)
    each = (s.state, s.note, s.reason, s.unsettled, s.out_of_balance, s.reference_force, s.iterations)
    assert {len(x) for x in each} == {cases}


def test_a_case_without_an_equilibrium_holds_nothing_but_its_reason() -> None:
    s = made.solved(made.losing())
    gone = [k for k, state in enumerate(s.state) if state == "none"]
    assert gone == [3]
    for k in range(len(s.case)):
        held = [s.cables.tension_anchor[k], s.anchors.pull[k], s.bases.force[k], s.spars[0].displacement[k], s.spars[0].bending[k]]
        assert all(np.isnan(x).all() == (k in gone) for x in held)
        assert (s.reason[k] is not None) == (k in gone)
        assert s.unsettled[k] == (k in gone)


def test_every_stable_case_balances() -> None:
    for document in (made.losing(), made.boom(), made.mast(30.0, base="ball")):
        s = made.solved(document)
        standing = [k for k, state in enumerate(s.state) if state in ("stable", "neutral")]
        assert s.out_of_balance[standing].max() < BALANCE
        assert s.check.balance < BALANCE


@pytest.mark.parametrize("document", [made.mast(30.0), made.boom()], ids=["mast", "boom"])
def test_head_lean_is_the_angle_between_the_drawn_axis_and_the_line_foot_to_head(document: made.Document) -> None:
    s = made.solved(document)
    for k, line in enumerate(s.spars):
        now = line.drawn + line.displacement[1]
        along = (now[-1] - now[0]) / np.linalg.norm(now[-1] - now[0])
        assert s.head_lean[1, k] == pytest.approx(math.acos(along @ line.axes[2]), rel=1e-6)
        assert s.head_lean[1, k] > 1e-4


def extremes(s: Solution) -> list[tuple[Extreme, np.ndarray]]:
    """Greatest values with the listed ones they are of."""
    tension = np.maximum(s.cables.tension_anchor, s.cables.tension_top)
    out = [(c.tension, tension[:, k]) for k, c in enumerate(s.worst_cables)]
    for k, a in enumerate(s.worst_anchors):
        out += [(a.resultant, s.anchors.resultant[:, k]), (a.horizontal, s.anchors.horizontal[:, k]), (a.uplift, s.anchors.uplift[:, k])]
    for k, f in enumerate(s.worst_feet):
        feet = s.bases.force[:, k]
        out += [(f.down, -feet[:, 2]), (f.sideways, np.hypot(feet[:, 0], feet[:, 1]))]
    return out


def test_worst_values_are_the_greatest_of_the_listed_cases_each_with_its_own() -> None:
    s = made.solved(made.losing())
    for extreme, listed in extremes(s):
        k = int(np.nanargmax(listed))
        assert extreme.value == pytest.approx(listed[k], rel=1e-12)
        assert extreme.case == s.case[k]
        assert extreme.wind_from == s.wind_from[k] or (math.isnan(extreme.wind_from) and math.isnan(s.wind_from[k]))
        assert extreme.peak >= extreme.value


def test_governing_case_is_solved_again() -> None:
    s = made.solved(made.losing())
    tension = np.nanmax(np.maximum(s.cables.tension_anchor, s.cables.tension_top), axis=1, initial=0.0)
    k = int(np.argmax(tension))
    assert s.check.resolve == "agrees"
    assert s.check.resolved_case == s.case[k]
    assert s.check.resolved_wind_from == s.wind_from[k]
    assert made.solved(made.mast()).check.resolve == "agrees"


def test_a_free_spin_does_not_hinder_the_second_solve() -> None:
    assert made.solved(made.mast(30.0, base="ball")).check.resolve == "agrees"


def test_progress_is_told_to_the_end() -> None:
    told: list[tuple[int, int]] = []
    solve(made.scenario(made.mast(30.0, 60.0)), progress=lambda done, total: told.append((done, total)))
    assert told[0] == (2, 2)
    assert told[-1][0] == told[-1][1]
    assert all(done <= total for done, total in told)


def test_finer_meshes_come_from_the_same_scenario() -> None:
    coarse, fine = made.solved(made.mast(30.0)), made.solved(made.mast(30.0), finer=2)
    assert len(fine.spars[0].station) == 2 * len(coarse.spars[0].station)
    assert fine.cables.tension_anchor == pytest.approx(coarse.cables.tension_anchor, rel=1e-3)


def test_a_structure_that_does_not_stand_in_still_air_has_no_cases() -> None:
    """Three guys all to the east side pull the mast over before any wind."""
    document = made.stayed(made.spar(rigid=True), 60.0, 90.0, 120.0, length=19.6, wind=made.wind(0.0, 90.0))
    s = made.solved(document)
    assert set(s.state) == {"none"}
    assert "mast falls toward 90°" in str(s.reason[0])
    assert {s.reason[1], s.reason[2]} == {f"the structure does not stand in still air: {s.reason[0]}"}
    assert s.sweep is None
    assert s.check.resolve == "not run"
    assert all(math.isnan(c.tension.peak) for c in s.worst_cables)
    assert len(s.warnings) == 1
    for held in (s.spars[0].displacement, s.spars[0].axial, s.cables.curve, s.cables.tension_top, s.bases.force, s.head_lean):
        assert np.isnan(held).all()


def test_what_has_no_load_is_not_judged() -> None:
    """Nothing stands: a cable has no tension, a base no push; neither is within its allowable."""
    rope = {"rope": made.rope(strength=20e3)}
    document = made.stayed(made.spar(rigid=True, friction=0.4), 60.0, 90.0, 120.0, length=19.6, wind=made.wind(0.0), rope=rope)
    s = made.solved(document)
    assert set(s.state) == {"none"}
    assert all(math.isnan(c.factor) for c in s.worst_cables)
    assert s.findings
    assert {f.verdict for f in s.findings} == {"not judged"}
    assert {f.why for f in s.findings if f.quantity != "pull"} == {"no case has an equilibrium, so there is no load to judge"}


def test_an_equilibrium_that_does_not_hold_is_not_judged() -> None:
    """A mast too slender for its guys' pull, in still air: found, unstable, and nothing of it within or past."""
    document = made.mast(30.0, rope={"rope": made.rope(strength=1600.0)})
    document["spar"][0]["section"] = [made.tube(18.0, 0.025, 0.002)]
    for guy in document["cable"]:
        guy["tension"] = 3000.0
    s = made.solved(document)
    assert s.state == ("unstable", "none")
    assert {f.verdict for f in s.findings} == {"not judged"}
    assert {f.why for f in s.findings if f.quantity == "tension"} == {"no case stands"}


def test_of_values_alike_but_for_rounding_the_first_in_the_file_is_named() -> None:
    """A mast of threefold symmetry in three winds of the same symmetry: every guy is as near its strength as the others."""
    s = made.solved(made.mast(10.0, 130.0, 250.0, rope={"rope": made.rope(strength=20e3)}))
    tensions = [f.thing for f in s.findings if f.quantity == "tension"]
    levels = [t.split()[1] for t in tensions]
    assert tensions == sorted(tensions, key=lambda t: (levels.index(t.split()[1]), t))
    assert s.worst_feet[0].down.wind_from == pytest.approx(math.radians(10.0))


def test_a_column_without_cables_and_anchors_is_solved_too() -> None:
    s = made.solved(made.document([made.spar(base="fixed", section=[made.tube(6.0)])], wind=made.wind(0.0)))
    assert s.state == ("stable", "stable")
    assert s.cables.name == s.anchors.name == ()
    assert s.check.resolve == "agrees"
    assert s.worst_feet[0].sideways.peak == pytest.approx(390.625 * 1.2 * 0.089 * 6.0, rel=1e-9)


def test_results_are_plain_frozen_data() -> None:
    s = made.solved(made.mast())
    with pytest.raises(AttributeError):
        s.case = ()  # type: ignore[misc]
    assert {f.name for f in fields(s)} >= {"cables", "anchors", "bases", "heels", "spars", "findings", "warnings", "sweep", "check"}


def test_every_free_spin_is_named_however_many_there_are() -> None:
    """Six ball-based masts side by side: six motions cost nothing, each a spin, and none of them hides another."""
    names = "ABCDEF"
    spars, ring, guys = [], [], []
    for k, n in enumerate(names):
        east = 30.0 * k
        spars.append(made.spar(n, 9.0, foot={"east": east, "north": 0.0, "level": 0.0}, base="ball"))
        for side, (x, y) in enumerate(((0.0, 8.0), (7.0, -4.0), (-7.0, -4.0))):
            ring.append({"name": f"{n}{side}", "east": east + x, "north": y})
            guys.append(made.cable(f"guy {n}{side}", 8.5, f"{n}{side}", spar=n, tension=900.0))
    s = made.solved(made.document(spars, ring, guys, still=True))
    assert s.state == ("neutral", "neutral")
    assert s.note[0] == f"{', '.join(names)} may spin freely about its own axis"
    assert s.unsettled == (False, False)
