"""Pressure over height: means against closed integrals and quadrature, factors, what is taken once, mean wind and turbulence."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import quad
from toml_text import MAST, changed, dumps_tables

from guys import parse_scenario
from guys.constants import air_density
from guys.loads.pressure import mean_pressure, turbulence_intensity
from guys.scenario.model import Wind
from guys.scenario.standard_wind import ground_elevation_factor, gust_ratio
from tests.published.winds import q, scenario, wind

INTEGRATED = 1e-8
"""Relative: what the Gauss points leave of a mean over a stretch whose ends are hundreds of times apart in height."""
ROUNDING = 1e-12
HILL = '{ shape = "ridge", height = "30 m", half_length = "100 m" }'
PROFILES = {
    "uniform": '"uniform"',
    "power": "{ power = 0.14 }",
    "steep power": "{ power = 0.33 }",
    "asce7 B": '{ asce7 = "B", edition = "7-16" }',
    "asce7 D": '{ asce7 = "D" }',
    "ridge": f'{{ asce7 = "C", topography = {HILL} }}',
    "en1991 0": '{ en1991 = "0" }',
    "en1991 IV": '{ en1991 = "IV", orography = 1.2 }',
}
STRETCHES = [(0.0, 3.0), (0.0, 45.0), (-4.0, 8.0), (17.0, 0.0), (9.0, 12.0), (5.0, 5.0), (2.0, 700.0), (-3.0, -1.0)]


def mean(blows: Wind, low: float, high: float) -> float:
    return float(mean_pressure(blows, np.array([low]), np.array([high]))[0])


@pytest.mark.parametrize("profile", PROFILES.values(), ids=PROFILES)
@pytest.mark.parametrize(("low", "high"), STRETCHES)
def test_mean_over_a_stretch_by_quadrature(profile: str, low: float, high: float) -> None:
    blows = wind(profile=profile)
    edges = [e for e in (0.0, blows.profile.low, blows.profile.high) if min(low, high) < e < max(low, high)]
    if low == high:
        assert mean(blows, low, high) == pytest.approx(q(blows, low), rel=ROUNDING)
        return
    total = quad(lambda z: q(blows, z), low, high, points=edges or None, epsabs=0.0, epsrel=1e-12, limit=400)[0]
    assert mean(blows, low, high) == pytest.approx(total / (high - low), rel=INTEGRATED, abs=1e-12)


@given(st.floats(0.001, 0.5), st.floats(0.0, 60.0), st.floats(0.01, 60.0))
def test_power_profile_in_closed_form(power: float, low: float, rise: float) -> None:
    """The integral of z^2p is z^(2p + 1) / (2p + 1)."""
    blows = wind(profile='{ power = 0.14 }')
    blows = blows.model_copy(update={"profile": blows.profile.model_copy(update={"exponent": power})})
    n, high = 2 * power + 1, low + rise
    exact = q(blows, 10.0) * (high**n - low**n) / (n * 10.0 ** (n - 1) * rise)
    cancelled = 1e-14 * high / rise
    assert mean(blows, low, high) == pytest.approx(exact, rel=INTEGRATED + cancelled)


@given(st.floats(2.0, 100.0), st.floats(0.01, 100.0), st.floats(0.8, 1.6))
def test_logarithmic_profile_in_closed_form(low: float, rise: float, orography: float) -> None:
    """q = a (s^2 + 7 s), s = c ln(z / z0): integrals z (L^2 - 2 L + 2) and z (L - 1) of L = ln(z / z0)."""
    blows = wind(averaging='"10 min"', profile='{ en1991 = "II" }')
    blows = blows.model_copy(update={"profile": blows.profile.model_copy(update={"orography": orography})})

    def integral(z: float) -> float:
        log = math.log(z / 0.05)
        return z * (orography**2 * (log * log - 2 * log + 2) + 7 * orography * (log - 1))

    exact = 0.5 * 1.25 * 25.0**2 * 0.19**2 * (integral(low + rise) - integral(low)) / rise
    cancelled = 1e-14 * (low + rise) / rise * 10
    assert mean(blows, low, low + rise) == pytest.approx(exact, rel=INTEGRATED + cancelled)


def test_heights_below_the_least_one_stand_in_its_pressure() -> None:
    for profile, low in (('{ asce7 = "C" }', 4.6), ('{ en1991 = "III" }', 5.0)):
        blows = wind(profile=profile)
        assert q(blows, -2.0) == q(blows, 0.0) == q(blows, low)
        assert q(blows, low + 0.1) > q(blows, low)
    assert q(wind(profile='{ asce7 = "D" }'), 590.0) == q(wind(profile='{ asce7 = "D" }'), 900.0)


# ---------------------------------------------------------------- conversion and factors


@pytest.mark.parametrize(("averaging", "profile", "wanted"), [("10 min", '{ asce7 = "C" }', 3.0), ("3 s", '{ en1991 = "II" }', 600.0)])
@pytest.mark.parametrize("curve", ["durst", "krayer-marshall"])
def test_speed_is_converted_to_what_the_profile_starts_from(averaging: str, profile: str, wanted: float, curve: str) -> None:
    blows = wind(averaging=f'"{averaging}"', profile=profile, gust_curve=f'"{curve}"')
    factor = gust_ratio(curve, wanted) / gust_ratio(curve, 603.0 - wanted)
    assert blows.speed_factor == pytest.approx(factor, rel=ROUNDING)
    straight = wind(speed=f'"{25 * factor!r} m/s"', averaging=f'"{wanted} s"', profile=profile)
    assert q(blows, 20.0) == pytest.approx(q(straight, 20.0), rel=ROUNDING)
    note = next(n for n in blows.notes if "converted" in n)
    assert f"{factor:.4g}" in note
    assert ("default" in note) is False
    assert "default curve" in next(n for n in wind(averaging=f'"{averaging}"', profile=profile).notes if "converted" in n)


def test_other_profiles_take_the_speed_as_it_is() -> None:
    for profile in ('"uniform"', "{ power = 0.2 }"):
        assert wind(averaging='"2 h"', profile=profile).speed_factor == 1.0


@pytest.mark.parametrize("edition", ["7-16", "7-22"])
def test_directionality_is_applied_once_in_either_edition(edition: str) -> None:
    bare = wind(profile=f'{{ asce7 = "B", edition = "{edition}" }}')
    assert bare.pressure_factor == 1.0
    with_kd = wind(profile=f'{{ asce7 = "B", edition = "{edition}", kd = 0.85 }}')
    assert q(with_kd, 20.0) == pytest.approx(0.85 * q(bare, 20.0), rel=ROUNDING)
    assert any("Kd 0.85" in note for note in with_kd.notes)
    assert any("off, that is 1: Kd, G" in note for note in bare.notes)


def test_chosen_factors_multiply() -> None:
    asce = wind(profile='{ asce7 = "C", kzt = 1.3, gust_effect = 0.85 }')
    assert q(asce, 12.0) == pytest.approx(1.3 * 0.85 * q(wind(profile='{ asce7 = "C" }'), 12.0), rel=ROUNDING)
    en = wind(profile='{ en1991 = "I", structural = 0.9 }')
    assert q(en, 12.0) == pytest.approx(0.9 * q(wind(profile='{ en1991 = "I" }'), 12.0), rel=ROUNDING)


def test_altitude_counts_once() -> None:
    """Ke and the density of a standard atmosphere are two ways to say one thing; whichever is used, the other is not."""
    profile = '{ asce7 = "C" }'
    sea = q(wind(profile=profile), 10.0)
    ke = ground_elevation_factor(1000.0)
    high = wind(profile=profile, altitude='"1000 m"')
    assert (high.air_density, high.pressure_factor) == (1.226, ke)
    assert q(high, 10.0) == pytest.approx(ke * sea, rel=ROUNDING)
    cold = wind(profile=profile, altitude='"1000 m"', temperature='"-20 degC"')
    assert (cold.air_density, cold.pressure_factor) == (air_density(1000.0, 253.15), 1.0)
    given_density = wind(profile=profile, air_density='"1.1 kg/m3"')
    assert (given_density.air_density, given_density.pressure_factor) == (1.1, 1.0)
    assert wind(profile='{ en1991 = "II" }').air_density == 1.25
    assert wind(profile='{ en1991 = "II" }', altitude='"1000 m"').air_density == air_density(1000.0)


@given(st.floats(1.0, 4000.0))
def test_ke_is_less_than_the_standard_atmosphere(altitude: float) -> None:
    assert ground_elevation_factor(altitude) < air_density(altitude) / air_density(0.0)


def test_short_stays_act_on_the_speed_and_are_told() -> None:
    keys = {"season": '{ start = "May", months = 2 }', "duration": '{ stay = "under 6 weeks" }', "return_period": "{ years = 5 }"}
    for key, factor in (("season", 0.71), ("duration", 0.75), ("return_period", 0.8545)):
        one = scenario(profile='{ en1991 = "II" }', averaging='"10 min"', **{key: keys[key]})
        assert one.wind is not None
        assert one.wind.speed_factor == pytest.approx(factor, abs=5e-5)
        assert any(f"speed x {factor:g}" in note for note in one.notes)
        assert not any("each take something off" in w for w in one.warnings)
    both = scenario(profile='{ en1991 = "II" }', averaging='"10 min"', season=keys["season"], return_period=keys["return_period"])
    assert any("return_period and season each take something off" in w for w in both.warnings)
    given_factor = wind(season='{ factor = 0.8, source = "a station near by" }')
    assert given_factor.speed_factor == 0.8
    assert any("a station near by" in note for note in given_factor.notes)


def test_a_longer_stay_in_a_season_meets_no_less_wind() -> None:
    """UK table: the factor of several months is at least that of each month it holds."""
    factor = {
        (month, months): wind(season=f'{{ start = "{month}", months = {months} }}').speed_factor for month in MONTHS for months in (1, 2, 4)
    }
    for k, month in enumerate(MONTHS):
        for months in (2, 4):
            assert factor[month, months] >= max(factor[MONTHS[(k + j) % 12], 1] for j in range(months))


MONTHS = ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"]


def test_an_annex_has_its_own_terrain() -> None:
    ours = wind(profile='{ en1991 = "III", annex = "NO" }')
    assert (ours.profile.terrain, ours.profile.low, ours.profile.roughness) == (0.22, 8.0, 0.3)


def test_an_en_profile_says_how_high_it_goes() -> None:
    assert not any("given up to 200 m" in w for w in scenario(profile='{ en1991 = "II" }').warnings)
    tall = changed(MAST, (("spar", 0, "section", 0, "length"), "201 m"), (("wind", "profile"), {"en1991": "II"}))
    assert any("given up to 200 m" in w for w in parse_scenario(dumps_tables(tall)).warnings)


# ---------------------------------------------------------------- mean wind and turbulence


def test_uniform_and_power_profiles_say_nothing_of_turbulence() -> None:
    for profile in ('"uniform"', "{ power = 0.14 }"):
        blows = wind(profile=profile)
        assert turbulence_intensity(blows.profile, np.array([10.0])) is None
