"""The only place a unit string is understood.

A quantity is written as a number and a unit: ``18 m``, ``-2.5 deg``, ``11.5e-6 1/K``, ``3/8 in``, ``12 1/2 in``, ``12 ft 6 in``.
Nothing is calculated from the text: there is one table of units, ``UNITS``, and one regular expression, ``QUANTITY``.

    SI value = (number + zero) * factor

with `zero` other than 0 for degC and degF alone.  Number and factor are exact fractions until the last step, so that a value in SI is the
double nearest to what was written.  Factors follow from the definitions in `constants`; `tests/test_units.py` checks each against an
independent library.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from difflib import get_close_matches
from fractions import Fraction

from guys.constants import DEGREE, GRAVITY, INCH, NAUTICAL_MILE, POUND, ZERO_CELSIUS
from guys.errors import GuysError


class UnitError(GuysError):
    """A text that is not a quantity, or one of the wrong dimension.  The message says what would do."""

    exit_status = 2


@dataclass(frozen=True)
class Unit:
    """factor, zero : see the module; dimension : its name in words, a key of ``DIMENSIONS``."""

    factor: Fraction
    dimension: str
    zero: Fraction = Fraction(0)


_LBF = POUND * GRAVITY
_FOOT = 12 * INCH
_FAHRENHEIT = Fraction(5, 9)
_Factors = dict[str, Fraction]

_METRES: _Factors = {"mm": Fraction(1, 1000), "cm": Fraction(1, 100), "m": Fraction(1)}
_FEET: _Factors = {"in": INCH, "ft": _FOOT}
_LENGTH: _Factors = {**_METRES, "km": Fraction(1000), **_FEET, "yd": 3 * _FOOT}
_KILOGRAMS: _Factors = {"g": Fraction(1, 1000), "kg": Fraction(1), "t": Fraction(1000)}
_POUNDS: _Factors = {"lb": POUND}
_NEWTONS: _Factors = {"N": Fraction(1), "kN": Fraction(1000), "MN": Fraction(10**6), "kgf": GRAVITY}
_POUNDS_FORCE: _Factors = {"lbf": _LBF, "kip": 1000 * _LBF}


def _power(units: _Factors, exponent: int) -> _Factors:
    return {f"{name}{exponent}": factor**exponent for name, factor in units.items()}


def _ratios(*pairs: tuple[_Factors, _Factors]) -> _Factors:
    return {f"{a}/{b}": x / y for tops, bottoms in pairs for a, x in tops.items() for b, y in bottoms.items()}


def _products(*pairs: tuple[_Factors, _Factors]) -> _Factors:
    return {f"{a} {b}": x * y for left, right in pairs for a, x in left.items() for b, y in right.items()}


def _by_length(metric: _Factors, customary: _Factors, exponent: int = 1) -> tuple[tuple[_Factors, _Factors], ...]:
    """Each system's units beside the lengths, areas or volumes of that system: kN with m, lbf with ft, never kN with ft."""
    metres, feet = (_METRES, _FEET) if exponent == 1 else (_power(_METRES, exponent), _power(_FEET, exponent))
    return (metric, metres), (customary, feet)


_MOMENTS = _products(*_by_length(_NEWTONS, _POUNDS_FORCE))
_FACTORS: dict[str, _Factors] = {
    "length": _LENGTH,
    "area": _power(_LENGTH, 2),
    "volume": _power(_LENGTH, 3),
    "mass": {**_KILOGRAMS, **_POUNDS},
    "force": {**_NEWTONS, **_POUNDS_FORCE},
    "time": {"s": Fraction(1), "min": Fraction(60), "h": Fraction(3600)},
    "angle": {"deg": DEGREE, "degrees": DEGREE, "rad": Fraction(1)},
    "mass per length": _ratios(*_by_length(_KILOGRAMS, _POUNDS)),
    "force per length": _ratios(*_by_length(_NEWTONS, _POUNDS_FORCE)),
    "pressure": {
        "Pa": Fraction(1),
        "kPa": Fraction(1000),
        "MPa": Fraction(10**6),
        "GPa": Fraction(10**9),
        "psi": _LBF / INCH**2,
        "ksi": 1000 * _LBF / INCH**2,
        "psf": _LBF / _FOOT**2,
        **_ratios(*_by_length(_NEWTONS, _POUNDS_FORCE, 2)),
    },
    "density": {**_ratios(*_by_length(_KILOGRAMS, _POUNDS, 3)), "pcf": POUND / _FOOT**3},
    "weight per volume": _ratios(*_by_length(_NEWTONS, _POUNDS_FORCE, 3)),
    "speed": {
        "m/s": Fraction(1),
        "km/h": Fraction(1000, 3600),
        "ft/s": _FOOT,
        "mph": 5280 * _FOOT / 3600,
        "kn": NAUTICAL_MILE / 3600,
    },
    "moment": _MOMENTS,
    "moment per angle": _ratios((_MOMENTS, {"rad": Fraction(1), "deg": DEGREE})),
    "bending stiffness": _products(*_by_length(_NEWTONS, _POUNDS_FORCE, 2)),
    "expansion": {"1/K": Fraction(1), "1/degC": Fraction(1), "1/degF": 1 / _FAHRENHEIT},
}
_SCALES = {
    "K": Unit(Fraction(1), "temperature"),
    "degC": Unit(Fraction(1), "temperature", ZERO_CELSIUS),
    "degF": Unit(_FAHRENHEIT, "temperature", Fraction(45_967, 100)),
}

UNITS: dict[str, Unit] = {
    **{name: Unit(factor, dimension) for dimension, factors in _FACTORS.items() for name, factor in factors.items()},
    **_SCALES,
}
"""Unit as written → factor to SI and dimension."""

DIMENSIONS: dict[str, tuple[str, str]] = {
    "length": ("m", "ft"),
    "area": ("m2", "ft2"),
    "volume": ("m3", "ft3"),
    "mass": ("kg", "lb"),
    "force": ("kN", "lbf"),
    "time": ("s", "min"),
    "angle": ("deg", "rad"),
    "mass per length": ("kg/m", "lb/ft"),
    "force per length": ("kN/m", "lbf/ft"),
    "pressure": ("MPa", "psi"),
    "density": ("kg/m3", "lb/ft3"),
    "weight per volume": ("kN/m3", "lbf/ft3"),
    "speed": ("m/s", "mph"),
    "moment": ("kN m", "lbf ft"),
    "moment per angle": ("kN m/rad", "lbf ft/rad"),
    "bending stiffness": ("kN m2", "lbf ft2"),
    "temperature": ("degC", "degF"),
    "expansion": ("1/K", "1/degF"),
}
"""Dimension → the two units its values are suggested and echoed in."""

_PLAIN = r"(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d{1,3})?"
_FRACTION = r"\d+/\d+"
_COUNT = rf"(?:\d+[ ]+)?{_FRACTION}|{_PLAIN}"
QUANTITY = re.compile(
    rf"\s*(?P<sign>[+-]?)\s*(?:(?P<feet>{_COUNT})\s*ft\s+(?P<inches>{_COUNT})\s*in"
    rf"|(?P<count>{_COUNT})\s*(?P<unit>1/[A-Za-z]+|[A-Za-z][A-Za-z0-9/ ]*?))\s*",
    re.ASCII,
)
LONGEST = 80
"""Characters a quantity may have; the longest sensible one has about 30."""
_COMMA = re.compile(r"\s*[+-]?\d+,\d+\s*[A-Za-z/].*", re.ASCII)
_BARE = re.compile(rf"\s*[+-]?(?:{_COUNT})\s*")


def parse(text: str, dimension: str) -> float:
    """The SI value of a written quantity.  Raises UnitError where the text is not one, or not of this dimension."""
    match = QUANTITY.fullmatch(text) if len(text) <= LONGEST else None
    if match is None:
        raise UnitError(_not_understood(text, dimension))
    sign = -1 if match["sign"] == "-" else 1
    if match["unit"] is None:
        written, found = "ft", (_count(match["feet"], text) * 12 + _count(match["inches"], text)) / 12
    else:
        written, found = " ".join(match["unit"].split()), _count(match["count"], text)
    unit = UNITS.get(written)
    if unit is None:
        raise UnitError(f'"{text}": unknown unit "{written}"{_suggest_unit(written, dimension)}')
    if unit.dimension != dimension:
        raise UnitError(_wrong_dimension(text, unit.dimension, dimension, written))
    try:
        return float((sign * found + unit.zero) * unit.factor)
    except OverflowError:
        raise UnitError(f'"{text}" is out of range') from None


def convert(value: float, unit: str) -> float:
    """An SI value in the unit named."""
    known = UNITS[unit]
    return value / float(known.factor) - float(known.zero)


def to_si(number: float, unit: str) -> float:
    """A number of the unit named, in SI: `convert` the other way."""
    known = UNITS[unit]
    return (number + float(known.zero)) * float(known.factor)


def show(value: float, unit: str, digits: int = 4) -> str:
    """An SI value written in the unit named, such as ``18 m``."""
    return f"{_rounded(convert(value, unit), digits)} {unit}"


def _rounded(value: float, digits: int) -> str:
    """So many figures, written out rather than with an exponent where that stays readable."""
    text = f"{value:.{digits}g}"
    return f"{float(text):.0f}" if "e" in text and 1.0 <= abs(value) < 1e9 else text


def both(value: float, dimension: str, units: tuple[str, str] | None = None) -> str:
    """An SI value written in both unit systems, such as ``18 m (59.06 ft)``."""
    first, second = units or DIMENSIONS[dimension]
    return f"{show(value, first)} ({show(value, second)})"


def example(dimension: str, number: str) -> str:
    """How a number of this dimension would be written: ``"17 m" or "17 ft"``."""
    first, second = DIMENSIONS[dimension]
    return f'"{number} {first}" or "{number} {second}"'


def json_pattern(dimension: str) -> str:
    """A regular expression for editors (ECMA dialect): a number, then one of the units of the dimension."""
    names = "|".join(sorted(known_units(dimension), key=len, reverse=True))
    count = r"(\d+ +)?\d+/\d+|(\d+(\.\d*)?|\.\d+)([eE][+-]?\d{1,3})?"
    feet = rf"|({count}) *ft +({count}) *in" if dimension == "length" else ""
    return rf"^ *[+-]? *(({count}) *({names}){feet}) *$"


def known_units(dimension: str) -> tuple[str, ...]:
    """Every unit of a dimension, in the order of the table."""
    return tuple(name for name, unit in UNITS.items() if unit.dimension == dimension)


def a(noun: str) -> str:
    """The noun with its article."""
    return f"{'an' if noun[0] in 'aeiou' else 'a'} {noun}"


def _count(text: str, whole: str) -> Fraction:
    total = Fraction(0)
    for part in text.split():
        try:
            total += Fraction(part)
        except ZeroDivisionError:
            raise UnitError(f'"{whole}" divides by zero') from None
    return total


def _not_understood(text: str, dimension: str) -> str:
    short = text if len(text) <= LONGEST else text[: LONGEST - 3] + "..."
    if len(text) <= LONGEST and _COMMA.fullmatch(text):
        return f'"{short}" has a decimal comma; write "{text.strip().replace(",", ".", 1)}"'
    if len(text) <= LONGEST and _BARE.fullmatch(text):
        return f'"{short}" has no unit; write {example(dimension, text.strip())}'
    return f'"{short}" is not {a(dimension)}; write a number and a unit, such as {example(dimension, "12")}'


def _suggest_unit(written: str, dimension: str) -> str:
    of_dimension = known_units(dimension)
    same = [name for name in of_dimension if name.lower() == written.lower()]
    near = same or get_close_matches(written, of_dimension, 1, 0.6)
    if near:
        return f'; did you mean "{near[0]}"?'
    return f"; {a(dimension)} is written in {' or '.join(DIMENSIONS[dimension])}"


def _wrong_dimension(text: str, got: str, wanted: str, written: str) -> str:
    force = {"lb": "lbf", "kg": "kgf", "t": "kN"}.get(written) if wanted == "force" else None
    mass = {"lbf": "lb", "kgf": "kg"}.get(written) if wanted == "mass" else None
    units = [force or mass] if force or mass else list(DIMENSIONS[wanted])
    return f'"{text}" is {a(got)} where {a(wanted)} belongs; that is written in {" or ".join(map(str, units))}'
