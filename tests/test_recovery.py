"""Forces recovered from solved states: sections against closed forms and free bodies, heels, anchors, slack, curves, balance."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
import scenarios_made as made

from guys import recovery
from guys.results import Solution

G = 9.80665
BALANCE = 1e-9
"""Of the reference force: what the solver leaves."""
STIFF = 1e9
"""[N m2] at which the spars below bend by less than 1e-5 of their length."""
BENT = 1e-4
"""Relative: what turning by that little changes in section forces."""


def wind_cantilever(rigid: bool = False) -> Solution:
    """A fixed 8 m column, wind of 390.625 Pa x 1.2 x 0.1 m toward the east along it, 20 kg/m, 50 kg at its head."""
    section = made.bar(8.0, mass=20.0, EI=STIFF, drag=1.2)
    spar = made.spar(base="fixed", section=[section], rigid=rigid, fitting=[made.fitting(at=8.0, mass=50.0)])
    return made.listed(made.document([spar], wind=made.wind(270.0)))


@pytest.mark.parametrize("rigid", [False, True])
def test_sections_of_a_cantilever_in_closed_form(rigid: bool) -> None:
    """V = q (L - z), M = q (L - z)^2/2 about the axis north, N = -(w (L - z) + 50 g): the part beyond acts on the part below."""
    line = wind_cantilever(rigid).spars[0]
    beyond = 8.0 - line.station
    q = 390.625 * 1.2 * 0.1
    assert line.shear[1, :, 0] == pytest.approx(q * beyond, rel=BENT, abs=0.01)
    assert line.bending[1, :, 1] == pytest.approx(q * beyond**2 / 2, rel=BENT, abs=0.01)
    assert line.axial[1] == pytest.approx(-G * (20.0 * beyond + 50.0), rel=BENT)
    assert np.abs(line.shear[1, :, 1]).max() < 1e-6
    assert np.abs(line.bending[1, :, 0]).max() < 1e-6
    assert np.abs(line.torsion[1]).max() < 1e-6


def test_stations_repeat_on_both_sides_of_every_node() -> None:
    line = made.listed(made.mast(30.0)).spars[0]
    assert line.station[0] == 0.0
    assert line.station[-1] == pytest.approx(18.0)
    assert np.array_equal(line.station[1:-1:2], line.station[2::2])
    for at in (9.0, 17.0):
        assert np.sum(np.abs(line.station - at) < 1e-9) == 2
    assert line.drawn[:, 2] == pytest.approx(line.station)


def forces_at(s: Solution, at: float, case: int) -> np.ndarray:
    """Sum of what guys pull on the mast at a height."""
    names = [k for k, n in enumerate(s.cables.name) if n.startswith(f"{at:g} m")]
    return np.asarray(s.cables.force_on_spar[case, names].sum(axis=0))


@pytest.mark.parametrize("at", [9.0, 17.0])
def test_section_force_jumps_at_guy_levels_by_what_the_guys_pull(at: float) -> None:
    """The size of the jump of (shear, axial) is that of the guys' pull on the mast; without lugs the moment does not jump."""
    s = made.listed(made.mast(30.0))
    line = s.spars[0]
    below, above = np.flatnonzero(np.abs(line.station - at) < 1e-9)
    jump = np.concatenate([line.shear[1, above] - line.shear[1, below], [line.axial[1, above] - line.axial[1, below]]])
    pull = forces_at(s, at, 1)
    assert np.linalg.norm(jump) == pytest.approx(np.linalg.norm(pull), rel=1e-9)
    assert -jump[:2] == pytest.approx(pull[:2], abs=0.02 * np.linalg.norm(pull))
    assert line.bending[1, above] == pytest.approx(line.bending[1, below], abs=1e-6)


def test_head_and_pinned_foot_carry_what_is_there() -> None:
    """At the head the panel of 12 kg and its wind, at the foot the base reaction; no bending at either."""
    s = made.listed(made.mast(30.0))
    line = s.spars[0]
    head = np.array([*line.shear[1, -1], line.axial[1, -1]])
    assert np.linalg.norm(head) == pytest.approx(math.hypot(12.0 * G, 390.625 * 1.3 * 0.5), rel=1e-9)
    foot = np.array([*line.shear[1, 0], line.axial[1, 0]])
    assert np.linalg.norm(foot) == pytest.approx(np.linalg.norm(s.bases.force[1, 0]), rel=1e-9)
    assert foot[2] == pytest.approx(s.bases.force[1, 0, 2], rel=1e-3)
    small = 1e-8 * s.reference_force[1] * 18.0
    assert np.abs(line.bending[1, [0, -1]]).max() < small


def test_every_element_is_in_equilibrium() -> None:
    """On a stiff mast, nearly straight: forces of the ends and the load between, moments about the lower end."""
    document = made.mast(30.0)
    document["spar"][0]["section"] = [made.bar(18.0, mass=20.0, EI=STIFF, drag=1.2)]
    line = made.listed(document).spars[0]
    b = math.radians(30.0)
    load = np.array([-390.625 * 0.12 * math.sin(b), -390.625 * 0.12 * math.cos(b), -20.0 * G])
    force = np.concatenate([line.shear[1], line.axial[1][:, None]], axis=1)
    moment = np.concatenate([line.bending[1], line.torsion[1][:, None]], axis=1)
    for low in range(0, len(line.station), 2):
        h = np.array([0.0, 0.0, line.station[low + 1] - line.station[low]])
        scale = np.abs(force).max()
        assert np.abs(force[low + 1] - force[low] + load * h[2]).max() < BENT * scale
        turning = moment[low + 1] - moment[low] + np.cross(h, force[low + 1]) + np.cross(h / 2, load * h[2])
        assert np.abs(turning).max() < BENT * scale * h[2]


FLEXED = 2e-3
"""Relative: what a mast of 3e9 N m2 still bends against guys of 1e5 N/m, 18^3 1e5/(48 x 3e9) = 0.4 % of the share between its levels."""


def test_rigid_spars_have_the_sections_of_very_stiff_ones() -> None:
    """The same stations and forces for a mast that does not bend and one that hardly does: guys, lugs, an offset fitting and wind."""
    document = made.mast(30.0)
    for guy in document["cable"]:
        del guy["tension"]
        guy["from"]["arm"], guy["length"] = 0.15, 14.087 if guy["from"]["at"] == 9.0 else 20.152
    document["spar"][0]["fitting"].append(made.fitting("box", at=5.0, mass=30.0, offset=made.vector(0.4, 0.2, 0.0)))
    document["spar"][0]["section"] = [{**made.bar(18.0, mass=20.0, EI=3e9, drag=1.2), "EA": 1e11}]
    elastic = made.listed(document).spars[0]
    document["spar"][0]["rigid"] = True
    rigid = made.listed(document).spars[0]
    for name in ("shear", "axial", "bending", "torsion"):
        stiff, rig = getattr(elastic, name)[1], getattr(rigid, name)[1]
        scale = np.abs(elastic.axial[1]).max() if name in ("shear", "axial") else np.abs(elastic.bending[1]).max()
        assert rigid.station == pytest.approx(elastic.station)
        assert np.abs(stiff - rig).max() < FLEXED * scale, name


@pytest.mark.parametrize("bearing", [90.0, 270.0])
def test_a_level_lug_on_a_leaning_rigid_spar_acts_at_its_station(bearing: float) -> None:
    """Weightless, stayed at 6 m from a lug 0.3 m off, which on a spar leaning 50 degrees lies 0.23 m further up or down along the axis: the
    sections below 6 m carry the stay's pull, those above nothing."""
    spar = made.spar(base="fixed", rigid=True, lean=50.0, toward=90.0, section=[made.weightless(10.0)])
    s = made.listed(made.stayed(spar, bearing, at=6.0, arm=0.3, radius=14.0, tension=900.0, straight=True))
    line, pull = s.spars[0], s.cables.force_on_spar[0, 0]
    lean = math.radians(50.0)
    along = pull @ np.array([math.sin(lean), 0.0, math.cos(lean)])
    below = np.arange(len(line.station)) < np.searchsorted(line.station, 6.0, side="right") - 1
    assert line.axial[0] == pytest.approx(np.where(below, along, 0.0), abs=1e-9 * 900.0)
    lug = np.array([math.copysign(0.3, pull[0]), 0.0, 0.0])
    assert line.bending[0, below][-1, 0] == pytest.approx(np.cross(lug, pull) @ line.axes[0], rel=1e-9, abs=1e-9 * 270.0)


def test_a_couple_at_the_head_twists_the_whole_column() -> None:
    """60 N north at 0.5 m east of the axis: 30 N m all the way down and on the ground."""
    aside = made.fitting(at=4.0, load=made.vector(0.0, 60.0, 0.0), offset=made.vector(0.5, 0.0, 0.0))
    s = made.listed(made.document([made.spar(base="fixed", section=[made.bar(4.0, EI=STIFF)], fitting=[aside])], still=True))
    assert s.spars[0].torsion[1] == pytest.approx(30.0, rel=BENT)
    assert s.bases.moment[1, 0] == pytest.approx([-240.0, 0.0, 30.0], rel=BENT, abs=1e-3)


# ---------------------------------------------------------------- heels


def boom_loads(s: Solution) -> tuple[np.ndarray, np.ndarray]:
    """Force, and moment about the heel as it stands, of everything on the boom but the heel: loads at drawn shares of its line, cables."""
    line = s.spars[1]
    at = line.drawn + line.displacement[1]
    heel, head = at[0], at[-1]
    mass = math.pi * (0.089 - 0.0032) * 0.0032 * 7850
    force, moment = np.array([0.0, 150.0, -1500.0]), np.cross(head - heel, [0.0, 150.0, -1500.0])
    stations = [*line.station[::2].tolist(), 8.0]
    nodes = np.concatenate([at[::2], at[-1:]])
    for k in range(len(stations) - 1):
        weight = np.array([0.0, 0.0, -mass * G * (stations[k + 1] - stations[k])])
        force, moment = force + weight, moment + np.cross(0.5 * (nodes[k] + nodes[k + 1]) - heel, weight)
    for k, name in enumerate(s.cables.name):
        if name == "topping stay":
            pull = -s.cables.force_on_anchor[1, k]
            force, moment = force - pull, moment - np.cross(head - heel, pull)
        elif name.startswith("side"):
            force, moment = force + s.cables.force_on_spar[1, k], moment + np.cross(head - heel, s.cables.force_on_spar[1, k])
    return force, moment


SAGGED = 1e-4
"""Of the weight times the boom's length: the weights of elements taken at the middle of their chords, which bow a little."""


@pytest.mark.parametrize("base", ["hinged", "pinned", "fixed"])
@pytest.mark.parametrize("rigid", [(True, True), (False, False)])
def test_heel_forces_are_what_the_boom_needs(base: str, rigid: tuple[bool, bool]) -> None:
    """Free body of the boom: the heel passes on the sum of its loads and pulls, and their moment about the heel."""
    s = made.listed(made.boom(base, rigid=rigid))
    force, moment = boom_loads(s)
    reference = s.reference_force[1]
    assert s.heels.spar == ("boom",)
    assert s.heels.carried_by == ("mast",)
    assert np.abs(s.heels.force[1, 0] - force).max() < 10 * BALANCE * reference
    assert np.abs(s.heels.moment[1, 0] - moment).max() < SAGGED * 530.0 * 8.0
    axis = s.spars[1].axes[0]
    if base == "hinged":
        assert abs(s.heels.moment[1, 0] @ axis) < 0.02 * np.abs(moment).max() + 1e-6 * reference


@pytest.mark.parametrize("base", ["hinged", "fixed"])
def test_the_base_of_the_mast_carries_mast_boom_and_all(base: str) -> None:
    """Downward: both spars, the load and the cables, less the anchors' pulls."""
    s = made.listed(made.boom(base))
    tubes = math.pi * 7850 * ((0.089 - 0.0032) * 0.0032 * 8.0 + (0.14 - 0.005) * 0.005 * 12.0)
    weight = G * (tubes + 0.15 * s.cables.unstressed_length[1].sum()) + 1500.0
    total = s.anchors.pull[1].sum(axis=0) + s.bases.force[1, 0]
    assert s.bases.spar == ("mast",)
    assert total == pytest.approx([0.0, 150.0, -weight], abs=20 * BALANCE * s.reference_force[1])


# ---------------------------------------------------------------- cables and anchors


def test_anchor_pulls_are_the_sums_of_their_cables() -> None:
    s = made.listed(made.mast(30.0))
    for a, name in enumerate(s.anchors.name):
        mine = [k for k, to in enumerate(s.cables.to_anchor) if to == name]
        assert s.anchors.pull[1, a] == pytest.approx(s.cables.force_on_anchor[1, mine].sum(axis=0), rel=1e-12)
        assert s.anchors.uplift[1, a] == s.anchors.pull[1, a, 2]
        assert s.anchors.horizontal[1, a] == pytest.approx(math.hypot(*s.anchors.pull[1, a, :2]))
        assert s.anchors.resultant[1, a] == pytest.approx(math.hypot(*s.anchors.pull[1, a]))


def test_cables_carry_their_own_weight_and_wind_between_their_ends() -> None:
    """Pull on the anchor plus pull on the spar is the cable's load: its weight in still air."""
    s = made.listed(made.mast(30.0))
    both = s.cables.force_on_anchor[0] + s.cables.force_on_spar[0]
    weight = 0.15 * G * s.cables.unstressed_length[0]
    assert both[:, 2] == pytest.approx(-weight, rel=1e-9)
    assert np.abs(both[:, :2]).max() < 1e-9 * s.reference_force[0]
    assert np.all(s.cables.tension_top[0] > s.cables.tension_anchor[0])


@pytest.mark.parametrize("straight", [False, True])
def test_curves_run_from_the_to_end_to_the_from_end_as_displaced(straight: bool) -> None:
    s = made.listed(made.mast(30.0, straight=straight))
    line = s.spars[0]
    for k, name in enumerate(s.cables.name):
        at = 9.0 if name.startswith("9") else 17.0
        row = int(np.argmin(np.abs(line.station - at)))
        assert s.cables.curve[1, k, 0] == pytest.approx(s.anchors.position[k % 3], abs=1e-9)
        assert s.cables.curve[1, k, -1] == pytest.approx(line.drawn[row] + line.displacement[1, row], abs=1e-7)
    middle, chord = s.cables.curve[0, 3, 20], 0.5 * (s.cables.curve[0, 3, 0] + s.cables.curve[0, 3, -1])
    across = 0.15 * G * 20.25 * 11.0 / 20.25
    sag = across * 20.25 / (8 * 1515.0)
    assert np.linalg.norm(middle - chord) == pytest.approx(0.0 if straight else sag, rel=0.02, abs=1e-9)


def test_a_hanging_cable_is_slack_below_its_own_weight_at_mid_length() -> None:
    """The tight length is that at which the two are equal; a thousandth longer drops it, a thousandth shorter does not."""
    spar = made.spar(base="fixed", rigid=True, section=[made.weightless(10.0)])
    tight = made.setting(made.stayed(spar, 0.0, 120.0, 240.0, tight=True)).length[0]
    for share, slack in ((0.999, False), (1.0 - 1e-9, False), (1.001, True)):
        s = made.listed(made.stayed(spar, 0.0, 120.0, 240.0, length=float(tight * share)))
        weight = 0.15 * G * s.cables.unstressed_length[0, 0]
        middle = np.linalg.norm(0.5 * (s.cables.force_on_anchor[0, 0] - s.cables.force_on_spar[0, 0]))
        assert (middle < weight) == slack
        assert s.cables.slack[0].tolist() == [slack] * 3


def test_a_straight_cable_is_slack_when_longer_than_its_chord() -> None:
    chord = math.hypot(8.0, 10.0)
    spar = made.spar(base="fixed", rigid=True, section=[made.weightless(10.0)])
    for length, slack in ((chord * (1 + 1e-6), True), (chord * (1 - 1e-6), False)):
        s = made.listed(made.stayed(spar, 0.0, 120.0, 240.0, length=length, straight=True))
        assert s.cables.slack[0].tolist() == [slack] * 3
        assert (s.cables.tension_anchor[0] > 0).tolist() == [not slack] * 3


# ---------------------------------------------------------------- the whole balance


def balance(document: made.Document, change: str = "", amount: float = 0.0) -> float:
    """The imbalance found when the forces on anchors or on the ground are falsified by an amount [N] or [N m]."""
    solved = made.cases(document)
    forces = recovery.forces(solved.problem, solved.state, solved.found)
    if change:
        wrong = getattr(forces, change).copy()
        wrong[0, 0, 1] += amount
        forces = replace(forces, **{change: wrong})
    return float(recovery.whole_balance(solved.problem, solved.state, solved.found, forces)[0])


DOCUMENTS = {
    "mast": made.mast(30.0),
    "straight": made.mast(30.0, straight=True),
    "boom": made.boom(),
    "rigid": made.boom("fixed", rigid=(True, True)),
}


@pytest.mark.parametrize("name", DOCUMENTS)
def test_whole_structures_balance(name: str) -> None:
    assert balance(DOCUMENTS[name]) < BALANCE


@pytest.mark.parametrize("name", DOCUMENTS)
@pytest.mark.parametrize(("change", "amount"), [("pull", 1e-3), ("foot_force", 1e-3), ("foot_moment", 1e-1)])
def test_a_false_reaction_is_seen(name: str, change: str, amount: float) -> None:
    """A thousandth of a newton on an anchor or the base, a tenth of a newton metre on the base: far above the balance allowed."""
    assert balance(DOCUMENTS[name], change, amount) > 100 * BALANCE
