"""Section properties against annulus integrals and sums by hand."""

from __future__ import annotations

import math

import pytest
from scipy.integrate import quad

from guys.scenario import Ice, Section, Tube
from guys.scenario.model import Material
from guys.sections import properties

STEEL = {"m": Material(density=7850.0, modulus=210e9, shear_modulus=81e9, **{"yield": 235e6}, expansion=12e-6)}
INTEGRATED = 1e-9
"""Relative error of the adaptive quadrature."""
D, W = 0.089, 0.0032
ICE = Ice(thickness=0.02, density=900.0)


def tube(ice: Ice | None = None, **more: float) -> object:
    return properties(Section(length=6.0, tube=Tube(diameter=D, wall=W), material="m", drag=1.2, **more), STEEL, ice)


def annulus(inner: float, outer: float, power: int) -> float:
    """Integral of 2 pi r^power over the wall."""
    return quad(lambda r: 2 * math.pi * r**power, inner, outer, epsrel=1e-12)[0]


def test_tube_by_integration_over_its_wall() -> None:
    p = tube()
    inner, outer = D / 2 - W, D / 2
    area, polar = annulus(inner, outer, 1), annulus(inner, outer, 3)
    assert p.mass == pytest.approx(7850 * area, rel=INTEGRATED)
    assert pytest.approx(210e9 * area, rel=INTEGRATED) == p.EA
    assert p.EI_x == p.EI_y == pytest.approx(210e9 * polar / 2, rel=INTEGRATED)
    assert pytest.approx(81e9 * polar, rel=INTEGRATED) == p.GJ
    assert math.isinf(p.GA)
    assert (p.width, p.drag, p.expansion) == (D, 1.2, 12e-6)


def test_solid_bar_is_the_tube_whose_wall_is_its_radius() -> None:
    p = properties(Section(length=1.0, tube=Tube(diameter=0.1, wall=0.05), material="m"), STEEL, None)
    assert pytest.approx(210e9 * math.pi * 0.1**2 / 4, rel=1e-12) == p.EA
    assert p.EI_x == pytest.approx(210e9 * math.pi * 0.1**4 / 64, rel=1e-12)


def test_ice_is_the_ring_around() -> None:
    ring = annulus(D / 2, D / 2 + 0.02, 1)
    bare, iced = tube(), tube(ICE)
    assert iced.iced_mass - iced.mass == pytest.approx(900 * ring, rel=INTEGRATED)
    assert iced.iced_width == pytest.approx(D + 0.04, rel=1e-12)
    assert (bare.iced_mass, bare.iced_width) == (bare.mass, bare.width)


def test_properties_given_outright_are_used_as_they_are() -> None:
    given = {"mass": 9.0, "EA": 1e8, "EI_x": 2e5, "EI_y": 3e5, "GJ": 4e4, "GA": 5e6, "width": 0.12, "iced_mass": 14.0, "iced_width": 0.2}
    p = properties(Section(length=1.0, **given), {}, ICE)
    assert {key: getattr(p, key) for key in given} == given
    both = properties(Section(length=1.0, EI=7e5, mass=1.0), {}, None)
    assert both.EI_x == both.EI_y == 7e5


def test_given_property_replaces_that_of_the_tube() -> None:
    p, plain = tube(GA=3e6, mass=11.0), tube()
    assert (p.GA, p.mass) == (3e6, 11.0)
    assert (p.EA, p.EI_x) == (plain.EA, plain.EI_x)


def test_rigid_spars_need_no_stiffness() -> None:
    p = properties(Section(length=1.0, mass=2.0, width=0.1), {}, None)
    assert math.isnan(p.EA)
    assert math.isnan(p.EI_x)
    assert (p.iced_mass, p.iced_width, p.expansion) == (2.0, 0.1, 0.0)
    assert math.isnan(p.drag)
