"""Quantities: every factor against an independent library, every way to write a number, and text that is no quantity."""

from __future__ import annotations

import math
import re
from fractions import Fraction

import pint
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from guys import units

ROUNDING = 4 * 2.0**-53
"""A factor and a product of doubles: a few roundings, relative."""

LIBRARY_DIGITS = 1e-12
"""The other library multiplies its own rounded factors; twelve figures are more than any unit is defined to."""

PINT_NAMES = {"lb": "pound", "lbf": "force_pound", "kgf": "force_kilogram", "t": "metric_ton", "kn": "knot", "deg": "degree",
              "degrees": "degree", "psf": "force_pound/foot**2", "pcf": "pound/foot**3", "in": "inch", "ft": "foot", "yd": "yard",
              "h": "hour", "min": "minute", "degC": "delta_degC", "degF": "delta_degF", "g": "gram", "mph": "mile/hour",
              "kip": "kip", "psi": "psi", "ksi": "1000*psi"}  # fmt: skip


@pytest.fixture(scope="module")
def registry() -> pint.UnitRegistry[float]:
    return pint.UnitRegistry()


def pint_expression(name: str) -> str:
    def part(word: str) -> str:
        base = re.fullmatch(r"([A-Za-z]+)([23]?)", word)
        if base is None:
            return word
        return f"({PINT_NAMES.get(base[1], base[1])})" + (f"**{base[2]}" if base[2] else "")

    return "/".join("*".join(part(word) for word in side.split()) for side in name.split("/"))


@pytest.mark.parametrize("name", [name for name, unit in units.UNITS.items() if unit.dimension != "temperature"])
def test_every_factor_agrees_with_an_independent_library(name: str, registry: pint.UnitRegistry[float]) -> None:
    theirs = registry.parse_expression(pint_expression(name)).to_base_units()
    grams = theirs.dimensionality.get("[mass]", 0)
    assert theirs.magnitude == pytest.approx(float(units.UNITS[name].factor), rel=LIBRARY_DIGITS), (name, theirs, grams)


@pytest.mark.parametrize("text", ["15 degC", "-40 degF", "59 degF", "288.15 K", "0 degC", "110 degF"])
def test_temperatures_agree_with_an_independent_library(text: str, registry: pint.UnitRegistry[float]) -> None:
    number, unit = text.split()
    theirs = registry.Quantity(float(number), {"degC": "degC", "degF": "degF", "K": "kelvin"}[unit]).to("kelvin").magnitude
    assert units.parse(text, "temperature") == pytest.approx(theirs, rel=LIBRARY_DIGITS)


@pytest.mark.parametrize(
    ("text", "dimension", "value"),
    [
        ("18 m", "length", 18.0),
        ("60 ft", "length", 18.288),
        ("12 ft 6 in", "length", 3.81),
        ("-12 ft 6 in", "length", -3.81),
        ("12 ft 6 1/2 in", "length", 3.8227),
        ("3/8 in", "length", 0.009525),
        ("12 1/2 in", "length", 0.3175),
        ("+1.5e3 mm", "length", 1.5),
        (".5 m", "length", 0.5),
        ("5. m", "length", 5.0),
        (" 17m ", "length", 17.0),
        ("1 yd", "length", 0.9144),
        ("1.2 kN", "force", 1200.0),
        ("850 lbf", "force", 850 * 0.45359237 * 9.80665),
        ("1 kip", "force", 4448.2216152605),
        ("1 kgf", "force", 9.80665),
        ("25 m/s", "speed", 25.0),
        ("36 km/h", "speed", 10.0),
        ("55 mph", "speed", 55 * 0.44704),
        ("1 kn", "speed", 1852 / 3600),
        ("0.15 kg/m", "mass per length", 0.15),
        ("350 N/m2", "pressure", 350.0),
        ("1 N/mm2", "pressure", 1e6),
        ("1 psf", "pressure", 47.88025898033584),
        ("1 pcf", "density", 16.018463373960142),
        ("120 degrees", "angle", 2 * math.pi / 3),
        ("120 deg", "angle", 2 * math.pi / 3),
        ("15 degC", "temperature", 288.15),
        ("11.5e-6 1/K", "expansion", 11.5e-6),
        ("6.5e-6 1/degF", "expansion", 11.7e-6),
        ("50 kN m/rad", "moment per angle", 50e3),
        ("3 kN m2", "bending stiffness", 3e3),
        ("2 kN/mm", "force per length", 2e6),
        ("18 kN/m3", "weight per volume", 18e3),
        ("1 lbf ft", "moment", 1.3558179483314004),
        ("2 h", "time", 7200.0),
    ],
)
def test_what_is_written_is_what_is_read(text: str, dimension: str, value: float) -> None:
    assert units.parse(text, dimension) == pytest.approx(value, rel=ROUNDING, abs=0.0)


def test_every_unit_of_the_format_is_known() -> None:
    wanted = """mm|cm|m|km|in|ft|yd|m2|ft2|m3|N|kN|MN|lbf|kip|kgf|g|kg|t|lb|kg/m|lb/ft|N/m|kN/m|lbf/ft|N/mm|kN/mm
    |Pa|kPa|MPa|GPa|N/mm2|psi|ksi|psf|kg/m3|lb/ft3|pcf|kN/m3|m/s|km/h|mph|kn|ft/s|N m|kN m|lbf ft|kN m/rad
    |N m2|kN m2|lbf ft2|deg|degrees|rad|degC|degF|K|s|min|h|1/K|1/degC|1/degF"""
    assert {name.strip() for name in wanted.split("|")} <= set(units.UNITS)


def test_no_unit_mixes_the_two_systems() -> None:
    metric, customary = {"N", "kN", "MN", "kgf", "kg", "g", "t", "m", "mm", "cm"}, {"lbf", "kip", "lb", "ft", "in"}
    for name in units.UNITS:
        words = {re.sub(r"[23]$", "", word) for word in re.split(r"[ /]", name)}
        assert not (words & metric and words & customary), name


@pytest.mark.parametrize(
    ("text", "dimension", "says"),
    [
        ("17", "length", '"17" has no unit; write "17 m" or "17 ft"'),
        ("17,5 m", "length", 'decimal comma; write "17.5 m"'),
        ("3 kg", "length", "is a mass where a length belongs; that is written in m or ft"),
        ("850 lb", "force", "is a mass where a force belongs; that is written in lbf"),
        ("850 lbf", "mass", "is a force where a mass belongs; that is written in lb"),
        ("18 kN/m3", "density", "is a weight per volume where a density belongs"),
        ("5 KN", "force", 'unknown unit "KN"; did you mean "kN"?'),
        ("5 meters", "length", "a length is written in m or ft"),
        ("5 kN*m", "moment", "is not a moment"),
        ("5'6\"", "length", "is not a length"),
        ("nan m", "length", "is not a length"),
        ("inf m", "length", "is not a length"),
        ("1/0 in", "length", "divides by zero"),
        ("1e999 m", "length", "is out of range"),
        ("1e308 km", "length", "is out of range"),
        ("m**9**9**9", "length", "is not a length"),
        ("9" * 5000 + " m", "length", "is not a length"),
        ("٣ m", "length", "is not a length"),
        ("", "length", "is not a length"),
        ("12 ft 6", "length", "unknown unit"),
        ("1 1/2/3 in", "length", "is not a length"),
    ],
)
def test_what_is_no_quantity_is_refused_with_what_would_do(text: str, dimension: str, says: str) -> None:
    with pytest.raises(units.UnitError, match=re.escape(says)):
        units.parse(text, dimension)


names = st.sampled_from(sorted(units.UNITS))
numbers = st.floats(-1e9, 1e9).filter(lambda x: x == 0.0 or abs(x) > 1e-9)


@given(numbers, names)
def test_a_number_comes_back_from_its_text(number: float, name: str) -> None:
    unit = units.UNITS[name]
    value = units.parse(f"{number!r} {name}", unit.dimension)
    assert value == float((Fraction(number) + unit.zero) * unit.factor) or value == pytest.approx(
        float((Fraction(repr(number)) + unit.zero) * unit.factor), rel=ROUNDING
    )
    scale = abs(number) + float(unit.zero)
    assert units.convert(value, name) == pytest.approx(number, rel=ROUNDING, abs=scale * ROUNDING)
    assert units.to_si(number, name) == pytest.approx(value, rel=ROUNDING, abs=scale * ROUNDING)


@given(st.integers(0, 500), st.integers(0, 11), st.integers(0, 63))
def test_feet_inches_and_fractions_add_up(feet: int, inches: int, part: int) -> None:
    value = units.parse(f"{feet} ft {inches} {part}/64 in", "length")
    assert value == float((Fraction(12 * feet + inches) + Fraction(part, 64)) * Fraction(254, 10000))


@settings(max_examples=400)
@given(
    st.one_of(st.text(max_size=100), st.from_regex(r"[-+ 0-9./,eE]{0,12} ?[a-zA-Z0-9/ ]{0,8}", fullmatch=True)),
    st.sampled_from(sorted(units.DIMENSIONS)),
)
def test_no_text_raises_anything_but_a_unit_error(text: str, dimension: str) -> None:
    try:
        value = units.parse(text, dimension)
    except units.UnitError as error:
        outcome = str(error)
    else:
        outcome = "read" if math.isfinite(value) else ""
    assert outcome


@settings(max_examples=300)
@given(st.from_regex(r"[-+]?([0-9]{1,3} )?[0-9]{1,3}(/[1-9]|\.[0-9])?(e-?[0-9])?", fullmatch=True), names)
def test_the_pattern_for_editors_accepts_what_the_reader_accepts(number: str, name: str) -> None:
    text, dimension = f"{number} {name}", units.UNITS[name].dimension
    try:
        units.parse(text, dimension)
    except units.UnitError:
        assert re.search(units.json_pattern(dimension), text) is None
    else:
        assert re.search(units.json_pattern(dimension), text) is not None


def test_values_are_echoed_in_both_systems() -> None:
    assert units.both(18.0, "length") == "18 m (59.06 ft)"
    assert units.both(288.15, "temperature") == "15 degC (59 degF)"
    assert units.show(1.768e10, "MPa") == "17680 MPa"
