"""Numbers as a crew reads them."""

from __future__ import annotations

from math import inf, nan, radians

import pytest
from hypothesis import given
from hypothesis import strategies as st

from guys.drawing import rounding as r

STEP_NOISE = 1e-9
"""Share of a step that counts as rounding noise of binary fractions, as the module states."""


@pytest.mark.parametrize(
    ("value", "raised"),
    [(5.201, 5.3), (5.2, 5.2), (0.0951, 0.096), (9.95, 10.0), (11240.0, 12000.0), (100.0, 100.0), (99.1, 100.0), (-4.42, -4.4), (0.0, 0.0)],
)
def test_two_figures_upward(value: float, raised: float) -> None:
    assert r.round_up(value) == pytest.approx(raised, rel=1e-12)


@given(st.floats(1e-6, 1e9))
def test_never_below_and_less_than_one_step_above(value: float) -> None:
    raised = r.round_up(value)
    assert raised >= value * (1.0 - 10 * STEP_NOISE)
    assert raised <= value * 1.1 * (1.0 + STEP_NOISE)  # a step of the second figure is at most a tenth of the number
    assert len(f"{raised:.12e}".split("e")[0].replace(".", "").rstrip("0")) <= 2


@given(st.integers(1, 99), st.integers(-3, 6))
def test_numbers_of_two_figures_stay(digits: int, place: int) -> None:
    assert r.round_up(digits * 10.0**place) == pytest.approx(digits * 10.0**place, rel=1e-12)


@pytest.mark.parametrize(
    ("newtons", "si", "us"),
    [
        (5201.0, "5.3 kN", "1200 lbf"),  # 5201 / 4.4482216152605 = 1169.2
        (740.0, "0.74 kN", "170 lbf"),
        (52.0, "52 N", "12 lbf"),
        (51_000.0, "51 kN", "12 kip"),  # 11465 lbf
        (2.34e6, "2.4 MN", "530 kip"),
        (0.0, "0 N", "0 lbf"),
        (9.5e-13, "0 N", "0 lbf"),  # what a solver leaves of nothing
        (nan, "–", "–"),
        (-4420.0, "−4.4 kN", "−990 lbf"),
    ],
)
def test_force(newtons: float, si: str, us: str) -> None:
    assert r.force(newtons, "SI") == si
    assert r.force(newtons, "US") == us


def test_lengths_and_levels() -> None:
    assert r.length(11.0, "SI") == "11.00 m"
    assert r.length(5.4864, "US") == "18 ft 0 in"  # 18 x 0.3048
    assert r.length(0.2, "US") == "8 in"
    assert r.level(-2.0, "SI") == "−2.00 m"
    assert r.level(0.0, "SI") == "+0.00 m"
    assert r.level(-0.001, "SI") == "+0.00 m"
    assert r.level(-0.3048, "US") == "−1 ft 0 in"


def test_bearings_to_half_a_degree() -> None:
    assert r.bearing(radians(97.2)) == "97°"
    assert r.bearing(radians(97.3)) == "97.5°"
    assert r.bearing(radians(359.9)) == "0°"
    assert r.bearing(nan) == "–"


def test_capacities_keep_three_figures_and_are_rounded_down() -> None:
    assert r.capacity(23.09e3, "SI") == "23.0 kN"
    assert r.capacity(23e3, "SI") == "23.0 kN"
    assert r.capacity(59e3, "US") == "13200 lbf"  # 59000 / 4.4482216152605 = 13263.7
    assert r.load(10.001e3, "SI") == "10.1 kN"
    assert r.load(3.371e3, "SI") == "3.38 kN"


def test_a_moment_keeps_its_unit_at_nothing() -> None:
    assert r.moment(0.0, "SI") == r.moment(1.4e-6, "SI") == "0 N m"
    assert r.moment(0.0, "US") == "0 lbf ft"
    assert r.moment(99.5, "SI") == "0.10 kN m"
    assert r.moment(0.45, "SI") == "0.45 N m"


def test_a_tension_set_to_a_rounding_below_a_kilonewton() -> None:
    assert r.plain_force(999.9999, "SI") == r.plain_force(1000.0, "SI") == "1.00 kN"
    assert r.plain_force(99.99, "SI") == "0.100 kN"


def test_plain_tensions_keep_three_figures() -> None:
    assert r.plain_force(23e3, "SI") == "23.0 kN"
    assert r.plain_force(23e3, "US") == "5170 lbf"
    assert r.plain_force(152e3, "SI") == "152 kN"


def test_a_factor_never_reads_better_than_it_is() -> None:
    assert r.factor(1.999) == "1.99"
    assert r.factor(2.0) == "2.00"
    assert r.factor(inf) == r.factor(8.2e14) == "over 1000"


def test_speeds_temperatures_masses() -> None:
    assert r.speed(24.5872, "US") == "55 mph"  # 55 x 0.44704
    assert r.temperature(288.15, "SI") == "15 °C"
    assert r.temperature(288.15, "US") == "59 °F"
    assert r.temperature(253.15, "SI") == "−20 °C"
    assert r.mass(12.0, "US") == "26.5 lb"
    assert r.moment(450.0, "SI") == "0.45 kN m"


def test_both_systems() -> None:
    both = r.tongue("both")
    assert both.say(r.force, 5201.0) == "5.3 kN (1200 lbf)"
    assert both.say(r.force, 0.0) == "0 N (0 lbf)"
    assert both.each(r.length, 11.0) == ("11.00 m", "36 ft 1 in")
