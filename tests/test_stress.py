"""Stress and strength of sections: against sums by hand, integrals over the section, and equilibrium of bars solved apart."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from guys.checks import stress

D, W = 0.089, 0.0032
R, INNER = D / 2, D / 2 - W
AREA = math.pi * (D - W) * W
SECOND = math.pi / 64 * (D**4 - (D - 2 * W) ** 4)
NONE = np.zeros(1)


def tube(axial: float = 0.0, bending: float = 0.0, shear: float = 0.0, torsion: float = 0.0, diameter: float = D, wall: float = W) -> float:
    return float(stress.tube_stress(diameter, wall, *(np.array([x]) for x in (axial, bending, shear, torsion)))[0])


def test_tube_by_hand() -> None:
    """Tube 88.9 x 3.2 of EN 10219-2: A = 8.62 cm2, W_el = 17.8 cm3 (section tables, from memory): 10 kN and 1 kN m give 11.6 + 56.2 MPa."""
    assert tube(axial=-10e3, diameter=0.0889) == pytest.approx(10e3 / 8.62e-4, rel=0.001)
    assert tube(bending=1e3, diameter=0.0889) == pytest.approx(1e3 / 17.8e-6, rel=0.003)
    both = tube(axial=-10e3, bending=1e3, diameter=0.0889)
    assert both == pytest.approx(tube(axial=10e3, diameter=0.0889) + tube(bending=1e3, diameter=0.0889), rel=1e-12)
    assert tube(torsion=1e3) == pytest.approx(math.sqrt(3) * 1e3 * R / (2 * SECOND), rel=1e-12)


@pytest.mark.parametrize("wall", [0.0005, W, 0.02, D / 2])
def test_shear_at_the_neutral_axis_is_v_q_over_i_t(wall: float) -> None:
    """First moment of the half section by numeric integration; the solid bar's 4/3 V/A is its limit."""
    inner = R - wall
    y = np.linspace(0.0, R, 200_001)
    width = 2 * (np.sqrt(np.maximum(R**2 - y**2, 0)) - np.sqrt(np.maximum(inner**2 - y**2, 0)))
    first = float(np.trapezoid(y * width, y))
    second = math.pi / 4 * (R**4 - inner**4)
    assert tube(shear=1e3, wall=wall) == pytest.approx(math.sqrt(3) * 1e3 * first / (second * 2 * wall), rel=1e-5)


@given(st.floats(-1e5, 1e5), st.floats(0, 5e3), st.floats(0, 2e4), st.floats(0, 5e3), st.floats(0, math.pi))
def test_never_less_than_the_greatest_round_the_section(axial: float, bending: float, shear: float, torsion: float, across: float) -> None:
    """Stress at every point of the outer edge, shear flow of a thin tube, shear `across` from the plane of bending; equal without shear."""
    thin = 0.0001
    area, second = math.pi * (D - thin) * thin, math.pi / 64 * (D**4 - (D - 2 * thin) ** 4)
    turn = np.linspace(0, 2 * math.pi, 721)
    normal = axial / area + bending * R / second * np.cos(turn)
    exact = np.sqrt(normal**2 + 3 * (torsion * R / (2 * second) + 2 * shear / area * np.sin(turn - across)) ** 2).max()
    ours = tube(axial, bending, shear, torsion, wall=thin)
    assert ours >= exact * (1 - 2 * thin / D)
    if shear == 0:
        assert ours == pytest.approx(exact, rel=1e-9)


@given(st.lists(st.floats(0, 1e4), min_size=4, max_size=4), st.integers(0, 3), st.floats(1, 1e4))
def test_use_rises_with_every_load(loads: list[float], which: int, more: float) -> None:
    above = [x + (more if k == which else 0.0) for k, x in enumerate(loads)]
    assert tube(*above) > tube(*loads)
    capacities = (1e5, 1e4, 1e4, 1e4)
    less, greater = (float(stress.outright_use(*(np.array([x]) for x in some), capacities)[0]) for some in (loads, above))
    assert greater >= less


def test_outright_capacities_by_hand() -> None:
    use = stress.outright_use(*(np.array([x]) for x in (-30e3, 2e3, 1e3, 500.0)), (100e3, 5e3, 10e3, math.inf))
    assert use == pytest.approx([0.3 + 0.4])
    assert stress.outright_use(NONE, NONE, np.array([9e3]), NONE, (1e5, 1e4, 1e4, math.inf)) == pytest.approx([0.9])


# ---------------------------------------------------------------- lattice


@pytest.mark.parametrize("legs", [3, 4])
def test_legs_hold_thrust_and_bending_in_the_worst_orientation(legs: int) -> None:
    """Leg forces of least squares that balance N and M exactly, in every orientation: the greatest found is ours."""
    face, axial, bending = 0.4, -12e3, 3e3
    radius = face / (2 * math.sin(math.pi / legs))
    least, most = 0.0, 0.0
    for turn in np.linspace(0, 2 * math.pi, 721):
        at = turn + 2 * math.pi * np.arange(legs) / legs
        balance = np.array([np.ones(legs), radius * np.cos(at), radius * np.sin(at)])
        force = np.linalg.pinv(balance) @ [axial, bending, 0.0]
        assert balance @ force == pytest.approx([axial, bending, 0.0], abs=1e-6)
        least, most = min(least, force.min()), max(most, force.max())
    compression, tension = stress.leg_forces(legs, face, np.array([axial]), np.array([bending]))
    assert compression == pytest.approx([-least], rel=1e-4)
    assert tension == pytest.approx([most], rel=1e-4)


def test_triangle_by_hand() -> None:
    """Face 300 mm: one leg stands 260 mm off the face of the other two, so it takes M/0.26."""
    compression, _ = stress.leg_forces(3, 0.3, NONE, np.array([1e3]))
    assert compression == pytest.approx([1e3 / (0.3 * math.sin(math.radians(60)))])


@pytest.mark.parametrize("legs", [3, 4])
def test_faces_hold_shear_and_torsion(legs: int) -> None:
    """Forces along the faces that balance V and T, in every orientation: the greatest, put along the diagonal, is ours."""
    face, panel, shear, torsion = 0.4, 0.5, 2e3, 150.0
    off = face / (2 * math.tan(math.pi / legs))
    most = 0.0
    for turn in np.linspace(0, 2 * math.pi, 721):
        at = turn + 2 * math.pi * np.arange(legs) / legs
        balance = np.array([-np.sin(at), np.cos(at), np.full(legs, off)])
        force = np.linalg.pinv(balance) @ [shear, 0.0, torsion]
        assert balance @ force == pytest.approx([shear, 0.0, torsion], abs=1e-6)
        most = max(most, np.abs(force).max())
    ours = stress.diagonal_force(legs, face, panel, np.array([shear]), np.array([torsion]))
    assert ours == pytest.approx([most * math.hypot(face, panel) / face], rel=1e-4)


# ---------------------------------------------------------------- buckling

LAST_DIGIT = 0.0006
"""Reductions are printed to four digits in design tables of EN 1993-1-1, curve c; quoted from memory to three."""


@pytest.mark.parametrize(("slender", "reduction"), [(0.2, 1.0), (0.5, 0.843), (1.0, 0.540), (1.5, 0.315), (2.0, 0.196), (3.0, 0.095)])
def test_strut_by_curve_c(slender: float, reduction: float) -> None:
    """Table of buckling reductions, curve c, EN 1993-1-1 6.3.1.2 (from memory)."""
    modulus, yield_stress, area, second = 210e9, 235e6, 3e-4, 4e-8
    length = slender * math.pi * math.sqrt(modulus * second / (area * yield_stress))
    assert stress.strut(area, second, length, modulus, yield_stress) / (area * yield_stress) == pytest.approx(reduction, abs=LAST_DIGIT)


@given(st.floats(0.05, 5.0))
def test_strut_is_below_yield_and_euler_and_falls_with_length(length: float) -> None:
    modulus, yield_stress, area, second = 210e9, 235e6, 3e-4, 4e-8
    one, longer = (stress.strut(area, second, x, modulus, yield_stress) for x in (length, 1.01 * length))
    assert longer <= one <= min(area * yield_stress, math.pi**2 * modulus * second / length**2) * (1 + 1e-12)


def test_strut_is_near_the_american_curve() -> None:
    """AISC 360-16 E3 (from memory): 0.658^(f/F_e) f, or 0.877 F_e; one curve for all sections, up to 30 % above c."""
    modulus, yield_stress, area, second = 210e9, 235e6, 3e-4, 4e-8
    for length in np.linspace(0.4, 3.0, 14):
        euler = math.pi**2 * modulus * second / (area * length**2)
        theirs = 0.658 ** (yield_stress / euler) * yield_stress if yield_stress / euler <= 2.25 else 0.877 * euler
        assert 1.0 <= theirs * area / stress.strut(area, second, float(length), modulus, yield_stress) <= 1.3


def test_thinnest_wall() -> None:
    """Class 3 of EN 1993-1-1: 90 for S235, 90 x 235/355 = 59.6 for S355; aluminium at 235 MPa a third of steel's, as its modulus."""
    assert stress.thinnest(235e6, 210e9) == pytest.approx(90.0)
    assert stress.thinnest(355e6, 210e9) == pytest.approx(59.58, abs=0.01)
    assert stress.thinnest(235e6, 70e9) == pytest.approx(30.0)
