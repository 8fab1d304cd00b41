"""Loads against sums by hand: weights, wind with its profiles, ice, and how cases put them together."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
import scenarios_made as made
from scipy.integrate import quad

from guys import structure
from guys.loads import CaseLine, LoadCases, Placed, as_drawn, assemble, lines_of, setting_line
from guys.rotation import dyad_moment, exp_minus_identity

G = 9.80665
SUMMED = 1e-12
"""Relative: rounding of sums of some tens of terms."""
PROFILE = 1e-4
"""Relative: what sixteen Gauss points leave of a power profile that starts at the ground with an upright tangent."""
SPEED, DENSITY = 25.0, 1.25
Q = 0.5 * DENSITY * SPEED**2
"""[Pa] of the winds below, 390.625."""
LINE = CaseLine("one", math.nan, 0.0, 0.0, 0.0, 288.15)
BLOWN = replace(LINE, wind=1.0)


def loads(document: made.Document, *lines: CaseLine, placed: Placed | None = None) -> tuple[structure.Structure, LoadCases]:
    s = structure.build(made.scenario(document))
    return s, assemble(s, lines, as_drawn(s, np.full(len(s.cables.EA), 20.0)) if placed is None else placed)


def from_bearing(degrees: float, **keys: float) -> CaseLine:
    return replace(BLOWN, wind_from=math.radians(degrees), **keys)


def force(found: LoadCases) -> np.ndarray:
    return found.force.sum(axis=1)


def moment(s: structure.Structure, found: LoadCases) -> np.ndarray:
    """About the origin, in the drawn position."""
    return np.cross(s.position, found.force).sum(axis=1) + dyad_moment(found.dyad).sum(axis=1)


def standing(rigid: bool = False, length: float = 18.0, profile: object = "uniform", **keys: object) -> made.Document:
    """A fixed tube of 89 mm, drag 1.2, that carries only itself."""
    spar = made.spar(base="fixed", rigid=rigid, section=[made.tube(length)], **keys)
    return made.document([spar], wind=made.wind(0.0, speed=SPEED, profile=profile))


# ---------------------------------------------------------------- dead


@pytest.mark.parametrize("rigid", [False, True])
def test_dead_load_is_weight_at_half_height(rigid: bool) -> None:
    lean = math.radians(20.0)
    s, found = loads(standing(rigid, lean=20.0, toward=90.0), replace(LINE, dead=1.0))
    weight = math.pi * (0.089 - 0.0032) * 0.0032 * 7850 * 18.0 * G
    assert force(found)[0] == pytest.approx([0.0, 0.0, -weight], rel=SUMMED, abs=1e-9)
    assert moment(s, found)[0] == pytest.approx([0.0, weight * 9.0 * math.sin(lean), 0.0], rel=SUMMED, abs=1e-9)
    assert found.weight[0] == pytest.approx(weight, rel=SUMMED)


def test_consistent_loads_of_one_element() -> None:
    """A uniform load q on a length h: q h/2 at each end and the moments t x q h2/12 and -t x q h2/12 (clamped beam)."""
    s, found = loads(standing(), from_bearing(270.0))
    low, lever_low, high, lever_high = found.on_pieces[0, 0]
    h = s.elements.rods.h[0]
    q = Q * 1.2 * 0.089
    assert low == pytest.approx([q * h / 2, 0.0, 0.0], rel=SUMMED, abs=1e-12)
    assert high == pytest.approx(low, rel=SUMMED, abs=1e-12)
    assert lever_low == pytest.approx([q * h * h / 12, 0.0, 0.0], rel=SUMMED, abs=1e-12)
    assert lever_high == pytest.approx(-lever_low, rel=SUMMED, abs=1e-12)


def test_fittings_weigh_at_their_offset_and_fixed_loads_join_the_dead_load() -> None:
    hung = made.fitting(at=10.0, mass=50.0, offset=made.vector(0.3, -0.2, 0.1), load=made.vector(70.0, 0.0, -400.0))
    spar = made.spar(base="fixed", section=[made.weightless(18.0)], rigid=True, fitting=[hung])
    s, found = loads(made.document([spar], still=True), replace(LINE, dead=2.0))
    f = 2.0 * np.array([70.0, 0.0, -400.0 - 50.0 * G])
    assert force(found)[0] == pytest.approx(f, rel=SUMMED)
    assert moment(s, found)[0] == pytest.approx(np.cross([0.3, -0.2, 10.1], f), rel=SUMMED)


def test_cables_weigh_along_their_unstressed_length() -> None:
    s, found = loads(made.mast(), replace(LINE, dead=1.5))
    assert found.cable_load[0] == pytest.approx(np.tile([0.0, 0.0, -1.5 * 0.15 * G], (6, 1)), rel=SUMMED)
    rest = 1.5 * (s.weight - 0.15 * G * 6 * 18.0)  # in `weight` each cable is as if as long as the mast
    assert found.weight[0] == pytest.approx(rest + 6 * 20.0 * 1.5 * 0.15 * G, rel=SUMMED)


def test_straight_cables_carry_no_load_of_their_own() -> None:
    _, found = loads(made.mast(0.0, straight=True), from_bearing(0.0, dead=1.0))
    assert np.abs(found.cable_load).max() == 0.0


# ---------------------------------------------------------------- wind on spars


@pytest.mark.parametrize("rigid", [False, True])
@pytest.mark.parametrize(("bearing", "to"), [(0.0, (0, -1)), (90.0, (-1, 0)), (225.0, (math.sqrt(0.5), math.sqrt(0.5)))])
def test_whole_wind_on_an_upright_tube(rigid: bool, bearing: float, to: tuple[float, float]) -> None:
    """q C D L, away from where the wind comes from, at half height."""
    s, found = loads(standing(rigid), from_bearing(bearing))
    whole = Q * 1.2 * 0.089 * 18.0
    expected = whole * np.array([*to, 0.0])
    assert force(found)[0] == pytest.approx(expected, rel=SUMMED, abs=1e-9)
    assert moment(s, found)[0] == pytest.approx(np.cross([0.0, 0.0, 9.0], expected), rel=SUMMED, abs=1e-9)
    assert found.wind_force[0] == pytest.approx(whole, rel=SUMMED)


@pytest.mark.parametrize("rigid", [False, True])
@pytest.mark.parametrize("power", [0.14, 0.25])
def test_power_profile_in_closed_form(rigid: bool, power: float) -> None:
    """q = q0 (z/10)^2p: force q0 L (L/10)^2p / (2p + 1), at the height L (2p + 1)/(2p + 2)."""
    s, found = loads(standing(rigid, profile={"power": power}), from_bearing(180.0))
    whole = Q * 1.2 * 0.089 * 18.0 * 1.8 ** (2 * power) / (2 * power + 1)
    assert force(found)[0, 1] == pytest.approx(whole, rel=PROFILE)
    assert -moment(s, found)[0, 0] == pytest.approx(whole * 18.0 * (2 * power + 1) / (2 * power + 2), rel=PROFILE)


@pytest.mark.parametrize("lean", [0.0, 25.0, 60.0, 85.0])
def test_inclined_tube_takes_the_square_of_the_wind_across_it(lean: float) -> None:
    """Wind in the plane of the lean: q C D cos2(lean), square to the tube; wind from the side: the whole."""
    a = math.radians(lean)
    _, found = loads(standing(lean=lean, toward=90.0), from_bearing(270.0), from_bearing(90.0), from_bearing(180.0))
    whole = Q * 1.2 * 0.089 * 18.0
    square = np.array([math.cos(a), 0.0, -math.sin(a)])
    assert force(found)[0] == pytest.approx(whole * math.cos(a) ** 2 * square, rel=SUMMED, abs=1e-9)
    assert force(found)[1] == pytest.approx(-whole * math.cos(a) ** 2 * square, rel=SUMMED, abs=1e-9)
    assert force(found)[2] == pytest.approx([0.0, whole, 0.0], rel=SUMMED, abs=1e-9)


def test_oblique_wind_on_a_leaning_tube() -> None:
    """|n| n with n = u - (u.t) t, written out for a lean of 40 degrees to the north and wind from 120."""
    a, b = math.radians(40.0), math.radians(120.0)
    t, u = np.array([0.0, math.sin(a), math.cos(a)]), -np.array([math.sin(b), math.cos(b), 0.0])
    n = u - (u @ t) * t
    _, found = loads(standing(lean=40.0), from_bearing(120.0))
    assert force(found)[0] == pytest.approx(Q * 1.2 * 0.089 * 18.0 * math.sqrt(n @ n) * n, rel=SUMMED, abs=1e-9)


def test_heights_count_from_the_foot_and_wind_from_the_wind_height() -> None:
    """On a hill of 200 m the same profile blows, since z is above the foot; in another place the same force."""
    low = loads(standing(profile={"power": 0.2}), from_bearing(0.0))[1]
    on_hill = {**standing(profile={"power": 0.2})}
    on_hill["spar"][0]["foot"] = {"east": 40.0, "north": -7.0, "level": 200.0}
    assert force(loads(on_hill, from_bearing(0.0))[1]) == pytest.approx(force(low), rel=SUMMED, abs=1e-9)


def test_wind_acts_on_the_setting_position() -> None:
    """A rigid mast drawn upright that stands 30 degrees over in the setting takes the wind of a leaning one."""
    s = structure.build(made.scenario(standing(rigid=True)))
    psi = np.zeros((s.nodes, 3, 3))
    psi[s.foot[0]] = exp_minus_identity(np.array([0.0, math.radians(30.0), 0.0]))
    placed = Placed(np.zeros((s.nodes, 3)), psi, np.zeros(0))
    over = force(assemble(s, [from_bearing(270.0)], placed))
    leaning = force(loads(standing(rigid=True, lean=30.0, toward=90.0), from_bearing(270.0))[1])
    assert over == pytest.approx(leaning, rel=SUMMED, abs=1e-9)


def test_wind_at_a_heels_height_counts_from_the_heel() -> None:
    """A boom heeled at 6 m: its pressure is that at the height above its own heel."""
    boom = made.spar("boom", foot={"spar": "mast", "at": 6.0}, section=[made.tube(5.0)], base="fixed", toward=90.0, lean=30.0)
    mast = made.spar(base="fixed", rigid=True, section=[made.weightless(12.0)])
    document = made.document([mast, boom], wind=made.wind(0.0, speed=SPEED, profile={"power": 0.2}))
    _, found = loads(document, from_bearing(0.0))
    top = 5.0 * math.cos(math.radians(30.0))
    mean = Q * (top / 10.0) ** 0.4 / 1.4
    assert force(found)[0, 1] == pytest.approx(-mean * 1.2 * 0.089 * 5.0, rel=PROFILE)


# ---------------------------------------------------------------- wind on fittings


def carrying(profile: object = "uniform", **keys: object) -> made.Document:
    """A fixed weightless spar that carries one fitting at 12 m."""
    hung = made.fitting(at=12.0, **keys)
    spar = made.spar(base="fixed", rigid=True, section=[made.weightless(12.0)], fitting=[hung])
    return made.document([spar], wind=made.wind(0.0, speed=SPEED, profile=profile))


@pytest.mark.parametrize("bearing", [0.0, 77.0, 200.0])
def test_any_shape_is_blown_along_the_wind(bearing: float) -> None:
    b = math.radians(bearing)
    _, found = loads(carrying(area=0.5, drag=1.3), from_bearing(bearing))
    assert force(found)[0] == pytest.approx(-Q * 1.3 * 0.5 * np.array([math.sin(b), math.cos(b), 0.0]), rel=SUMMED, abs=1e-9)


def test_a_fitting_stands_in_the_pressure_of_its_own_height() -> None:
    _, found = loads(carrying(area=0.5, drag=1.3, profile={"power": 0.14}), from_bearing(180.0))
    assert force(found)[0, 1] == pytest.approx(Q * 1.2**0.28 * 1.3 * 0.5, rel=SUMMED)


@pytest.mark.parametrize(
    ("off", "share"),
    [
        (0.0, 1.0),
        (44.0, 1.0),
        (45.0, 1.0),
        (60.0, 2 / 3),
        (67.5, 0.5),
        (89.0, 1 / 45),
        (90.0, 0.0),
        (120.0, -2 / 3),
        (135.0, -1.0),
        (180.0, -1.0),
    ],
)
def test_flat_face_takes_c_of_theta_along_its_normal(off: float, share: float) -> None:
    """c = 1 to 45 degrees, then falling evenly to 0 at 90; the wind from behind pushes the other way."""
    normal = np.array([math.sin(math.radians(50.0)), math.cos(math.radians(50.0)), 0.0])
    for side in (off, -off):
        _, found = loads(carrying(area=0.8, drag=1.4, shape="flat", face=50.0), from_bearing((50.0 + side) % 360))
        assert force(found)[0] == pytest.approx(-share * Q * 1.4 * 0.8 * normal, rel=1e-9, abs=1e-9)


@pytest.mark.parametrize("tilt", [0.0, 20.0, 40.0])
def test_a_face_that_leans_back_is_pressed_down_from_the_front_and_lifted_from_behind(tilt: float) -> None:
    a = math.radians(tilt)
    normal = np.array([0.0, math.cos(a), math.sin(a)])
    _, found = loads(carrying(area=0.8, drag=1.4, shape="flat", face=0.0, face_tilt=tilt), from_bearing(0.0), from_bearing(180.0))
    assert force(found)[0] == pytest.approx(-Q * 1.4 * 0.8 * normal, rel=SUMMED, abs=1e-9)
    assert force(found)[1] == pytest.approx(Q * 1.4 * 0.8 * normal, rel=SUMMED, abs=1e-9)


# ---------------------------------------------------------------- wind on cables


def one_guy(level: float = 0.0, profile: object = "uniform", **tables: object) -> made.Document:
    """A guy from 12 m up to an anchor 9 m east."""
    guy = made.cable("guy", 12.0, "A", length=15.0)
    spar = made.spar(base="fixed", rigid=True, section=[made.weightless(12.0)])
    wind = made.wind(0.0, speed=SPEED, profile=profile)
    return made.document([spar], made.anchors(9.0, 90.0, level=level), [guy], wind=wind, **tables)


@pytest.mark.parametrize("bearing", [90.0, 0.0, 130.0])
def test_wind_on_a_cable_is_that_on_its_chord_spread_over_its_unstressed_length(bearing: float) -> None:
    b = math.radians(bearing)
    t = np.array([-9.0, 0.0, 12.0]) / 15.0
    u = -np.array([math.sin(b), math.cos(b), 0.0])
    n = u - (u @ t) * t
    expected = Q * 1.2 * 0.006 * 15.0 * math.sqrt(n @ n) * n
    _, found = loads(one_guy(), from_bearing(bearing))
    assert 20.0 * found.cable_load[0, 0] == pytest.approx(expected, rel=SUMMED, abs=1e-12)
    assert found.wind_force[0] == pytest.approx(np.linalg.norm(expected), rel=SUMMED)


@pytest.mark.parametrize("level", [0.0, 3.0, -4.0, 12.0])
def test_power_profile_on_a_cable_is_integrated_along_its_chord(level: float) -> None:
    """Nothing below the foot: an anchor 4 m down takes wind on the upper part only.  A level cable stands in one pressure."""
    c = math.hypot(9.0, 12.0 - level)
    heights = lambda s: level + (12.0 - level) * s  # noqa: E731
    mean = quad(lambda s: Q * (max(heights(s), 0.0) / 10.0) ** 0.28, 0.0, 1.0, epsabs=1e-10, limit=200)[0]
    _, found = loads(one_guy(level, profile={"power": 0.14}), from_bearing(0.0))
    assert -20.0 * found.cable_load[0, 0, 1] == pytest.approx(mean * 1.2 * 0.006 * c, rel=1e-6)


# ---------------------------------------------------------------- ice and cases


def iced() -> made.Document:
    """The mast with every kind of iced thing: tube, cable, fitting with iced mass and area."""
    document = made.mast(0.0, ice={"thickness": 0.01, "density": 900.0})
    document["case"] = [{"name": "iced", "ice": 1.0, "wind": 0.5}]
    document["spar"][0]["fitting"][0] |= {"iced_mass": 20.0, "iced_area": 0.7}
    return document


def test_ice_adds_its_ring_and_the_iced_masses() -> None:
    """pi (D + t) t rho per length, on tube and cables; the fitting gains 8 kg."""
    _, found = loads(iced(), replace(LINE, ice=1.0))
    ring = math.pi * (0.089 + 0.01) * 0.01 * 900.0
    assert force(found)[0] == pytest.approx([0.0, 0.0, -G * (ring * 18.0 + 8.0)], rel=SUMMED, abs=1e-9)
    assert found.cable_load[0, 0] == pytest.approx([0.0, 0.0, -G * math.pi * 0.016 * 0.01 * 900.0], rel=SUMMED)


@pytest.mark.parametrize(("ice", "width", "area", "rope"), [(0.0, 0.089, 0.5, 0.006), (1e-9, 0.109, 0.7, 0.026), (1.0, 0.109, 0.7, 0.026)])
def test_iced_widths_apply_wherever_there_is_ice(ice: float, width: float, area: float, rope: float) -> None:
    s, found = loads(iced(), from_bearing(180.0, ice=ice))
    assert force(found)[0, 1] == pytest.approx(Q * (1.2 * width * 18.0 + 1.3 * area), rel=SUMMED)
    bare = loads(made.mast(0.0), from_bearing(180.0))[1]
    weight = np.array([0.0, 0.0, G * ice * math.pi * 0.016 * 0.01 * 900.0])
    assert found.cable_load[0] + weight == pytest.approx(bare.cable_load[0] * rope / 0.006, rel=1e-9, abs=1e-12)
    assert len(s.cables.EA) == 6


def test_cases_superpose_their_factors() -> None:
    """Any case is dead x weights + wind x (iced) wind + ice x ice, exactly."""
    parts = [
        replace(LINE, dead=1.0),
        replace(LINE, ice=1.0),
        from_bearing(70.0, ice=1e-30),
        from_bearing(70.0, dead=1.2, wind=0.6, ice=0.9),
    ]
    _, found = loads(iced(), *parts)
    for name in ("force", "dyad", "on_pieces", "on_fittings", "cable_load"):
        d, i, w, whole = getattr(found, name)
        assert np.abs(whole - (1.2 * d + 0.9 * i + 0.6 * w)).max() < SUMMED * np.abs(whole).max()


def test_lines_are_cases_times_directions_and_still_ones_come_once() -> None:
    document = made.mast(0.0, 90.0, setting={"temperature": 10.0})
    document["case"] = [
        {"name": "a", "wind": 1.4, "dead": 0.9},
        {"name": "b", "wind": 0.0, "temperature": -20.0},
        {"name": "c", "without": ["9 m A"]},
    ]
    scenario = made.scenario(document)
    lines = lines_of(scenario)
    assert [(line.name, line.wind, line.dead) for line in lines] == [("a", 1.4, 0.9)] * 2 + [("b", 0.0, 1.0)] + [("c", 1.0, 1.0)] * 2
    assert [round(math.degrees(line.wind_from)) for line in lines if not math.isnan(line.wind_from)] == [0, 90, 0, 90]
    assert math.isnan(lines[2].wind_from)
    assert [line.temperature for line in lines] == pytest.approx([283.15] * 2 + [253.15] + [283.15] * 2)
    assert lines[3].without == ("9 m A",)
    assert len(lines_of(scenario, [0.1, 0.2, 0.3])) == 7
    still = setting_line(scenario)
    assert (still.name, still.dead, still.wind, still.ice, still.without) == ("setting", 1.0, 0.0, 0.0, ())


def test_a_cable_taken_away_takes_its_weight_and_wind_with_it() -> None:
    _, found = loads(made.mast(0.0), replace(LINE, dead=1.0), replace(LINE, dead=1.0, without=("9 m A", "17 m C")))
    assert found.present.tolist() == [[1.0] * 6, [0.0, 1.0, 1.0, 1.0, 1.0, 0.0]]
    assert found.weight[0] - found.weight[1] == pytest.approx(2 * 20.0 * 0.15 * G, rel=1e-9)


def test_between_goes_evenly_from_one_case_to_another() -> None:
    _, found = loads(made.mast(0.0), replace(LINE, dead=1.0), from_bearing(0.0, dead=1.5, temperature=268.15, without=("9 m A",)))
    start, end = found.take(np.array([0])), found.take(np.array([1, 1]))
    some = end.between(start, np.array([0.25, 1.0]))
    assert some.force[1] == pytest.approx(found.force[1])
    assert some.force[0] == pytest.approx(0.75 * found.force[0] + 0.25 * found.force[1])
    assert some.warming.tolist() == [-5.0, -20.0]
    assert some.present[:, 0].tolist() == [0.75, 0.0]
