"""Numbers as a crew reads them, in SI, US units or both.

Loads are rounded up, to two figures on the sheet and three on the terminal (full digits stay in the result file), capacities and factors
down, distances to 0.01 m or 1 in, bearings to half a degree.  What is nothing but rounding of the solver reads 0, with its unit.  kg and
lb are mass, kN and lbf are force.

The factors are those of `guys.constants`; a mile is 5280 ft, exactly 1609.344 m.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import ceil, degrees, floor, inf, isfinite, log10
from typing import Literal

from guys import constants, units

System = Literal["SI", "US"]
Units = Literal["SI", "US", "both"]

INCH = float(constants.INCH)
POUND = float(constants.POUND)
POUND_FORCE = POUND * constants.STANDARD_GRAVITY
ZERO_CELSIUS = float(constants.ZERO_CELSIUS)
MILE_PER_HOUR = 1609.344 / 3600.0
ABSENT = "–"
# Binary fractions of values that were exact in the input (5.2 kN) must not be rounded up a whole step.
_ROUNDING_NOISE = 1e-9
NO_FORCE = 1e-3
"""A force [N] below this, a tenth of a gram's weight, reads 0."""
NO_MOMENT = 1e-2
"""A moment [N m] below this, a newton at a centimetre, reads 0: less than any lug or base is made to."""
MOST_FACTOR = 1000.0
"""Factors above this say only that they are."""


Scale = tuple[float, float, str]
SCALES: dict[tuple[System, bool], tuple[Scale, ...]] = {
    ("SI", True): ((1.0, 100.0, "N"), (1e3, 1e3, "kN"), (1e6, inf, "MN")),
    ("SI", False): ((1.0, 100.0, "N"), (1e3, 1e3, "kN"), (1e6, inf, "MN")),
    ("US", True): ((POUND_FORCE, 1e4, "lbf"), (1e3 * POUND_FORCE, inf, "kip")),
    ("US", False): ((POUND_FORCE, 1e6, "lbf"), (1e3 * POUND_FORCE, inf, "kip")),
}
"""Units of force, each up to its number below which it is used; kip for loads of two figures (True) only once lbf grows long."""


MEGAPASCAL = 1e6
PRESSURES: dict[System, tuple[tuple[float, str], tuple[float, str]]] = {
    "SI": ((1e3, "kPa"), (MEGAPASCAL, "MPa")),
    "US": ((POUND_FORCE / (12 * INCH) ** 2, "psf"), (1e3 * POUND_FORCE / INCH**2, "ksi")),
}
"""Units of pressure, below and from a megapascal: of the ground, and of metal."""


def round_up(value: float, figures: int = 2) -> float:
    """`value` rounded toward plus infinity to so many significant figures."""
    return _stepped(value, figures, ceil, -_ROUNDING_NOISE)


def round_down(value: float, figures: int = 3) -> float:
    """`value` rounded toward minus infinity to so many significant figures."""
    return _stepped(value, figures, floor, _ROUNDING_NOISE)


def round_near(value: float, figures: int = 3) -> float:
    """`value` rounded to so many significant figures."""
    return _stepped(value, figures, round, 0.0)


def _stepped(value: float, figures: int, whole: Callable[[float], int], noise: float) -> float:
    if value == 0.0 or not isfinite(value):
        return value
    place = floor(log10(abs(value))) - figures + 1
    steps = whole(value * 10.0**-place + noise * 10**figures)
    return float(round(steps * 10.0**place, -place))


def written(rounded: float, figures: int) -> str:
    """A rounded value with exactly the digits it has."""
    if not isfinite(rounded):
        return ABSENT
    if rounded == 0.0:
        return "0"
    place = floor(log10(abs(rounded)) + 1e-12) - figures + 1
    return f"{rounded:.{max(0, -place)}f}".replace("-", "−")


def up_text(value: float, figures: int = 2) -> str:
    """`round_up` written out."""
    return written(round_up(value, figures), figures)


def force(newtons: float, system: System) -> str:
    """A force rounded up to two figures, in N, kN, MN or lbf, kip."""
    return _force(newtons, system, round_up, 2)


def load(newtons: float, system: System) -> str:
    """A force rounded up to three figures, for the terminal."""
    return _force(newtons, system, round_up, 3)


def capacity(newtons: float, system: System) -> str:
    """A strength rounded down to three figures."""
    return _force(newtons, system, round_down, 3)


def plain_force(newtons: float, system: System) -> str:
    """A force as near as three figures tell it: a tension to set."""
    return _force(newtons, system, round_near, 3)


def _force(newtons: float, system: System, rounded: Callable[[float, int], float], figures: int) -> str:
    if not isfinite(newtons):
        return ABSENT
    if abs(newtons) < NO_FORCE:
        return "0 N" if system == "SI" else "0 lbf"
    unit, name = next((unit, name) for unit, below, name in SCALES[system, figures < 3] if _shown(newtons, unit, rounded, figures) < below)
    return f"{written(rounded(newtons / unit, figures), figures)} {name}"


def _shown(newtons: float, unit: float, rounded: Callable[[float, int], float], figures: int) -> float:
    """The size [unit] that would be written, so that 99.5 N, rounded up, is told in kN."""
    return abs(rounded(newtons / unit, figures)) * (1.0 + _ROUNDING_NOISE)


def moment(newton_metres: float, system: System) -> str:
    """A moment rounded up to two figures."""
    if not isfinite(newton_metres):
        return ABSENT
    if abs(newton_metres) < NO_MOMENT:
        return "0 N m" if system == "SI" else "0 lbf ft"
    if system == "US":
        return f"{up_text(newton_metres / (POUND_FORCE * 12 * INCH))} lbf ft"
    return f"{up_text(newton_metres)} N m" if abs(round_up(newton_metres)) < 100.0 else f"{up_text(newton_metres / 1e3)} kN m"


def pressure_up(pascals: float, system: System) -> str:
    """A stress or pressure that acts, rounded up to three figures."""
    return _pressure(pascals, system, round_up)


def pressure_down(pascals: float, system: System) -> str:
    """A stress or pressure that can be borne, rounded down to three figures."""
    return _pressure(pascals, system, round_down)


def _pressure(pascals: float, system: System, rounded: Callable[[float, int], float]) -> str:
    if not isfinite(pascals):
        return ABSENT
    scale, unit = PRESSURES[system][abs(pascals) >= MEGAPASCAL]
    return f"{written(rounded(pascals / scale, 3), 3)} {unit}"


def length(metres: float, system: System) -> str:
    """A distance to 0.01 m or to 1 in."""
    if not isfinite(metres):
        return ABSENT
    if system == "SI":
        return f"{_unsigned_zero(metres, 2)} m"
    inches = round(abs(metres) / INCH)
    sign = "−" if metres < 0 and inches else ""
    return f"{sign}{inches // 12} ft {inches % 12} in" if inches >= 12 else f"{sign}{inches} in"


def fine_length(metres: float, system: System) -> str:
    """A length to 1 mm or to 1/10 in: of rope to cut, of a sag to read."""
    if not isfinite(metres):
        return ABSENT
    if system == "SI":
        return f"{_unsigned_zero(metres, 3)} m" if abs(metres) >= 1.0 else f"{_unsigned_zero(1e3 * metres, 0)} mm"
    tenths = round(abs(metres) / INCH * 10)
    sign, feet = "−" if metres < 0 and tenths else "", tenths // 120
    return f"{sign}{feet} ft {(tenths - 120 * feet) / 10:.1f} in" if feet else f"{sign}{tenths / 10:.1f} in"


def seconds(value: float, system: System) -> str:
    """A time stopped by hand, to a hundredth; the same in both systems."""
    return f"{value:.2f} s" if isfinite(value) else ABSENT


def share(value: float) -> str:
    """An error of itself, rounded up to a whole percent."""
    return f"±{ceil(100 * value - 1e-9)} %" if isfinite(value) else ABSENT


def level(metres: float, system: System) -> str:
    """A level with its sign."""
    text = length(metres, system)
    return text if text.startswith(("−", ABSENT)) else f"+{text}"


def offset(metres: float, system: System) -> str:
    """A difference of place with its sign, to 1 mm or 1/10 in."""
    text = fine_length(metres, system)
    return text if text.startswith(("−", ABSENT)) else f"+{text}"


def thickness(metres: float, system: System) -> str:
    """A diameter, wall or ice thickness."""
    return f"{metres * 1e3:.4g} mm" if system == "SI" else f"{metres / INCH:.3g} in"


def area(square_metres: float, system: System) -> str:
    """An area."""
    return f"{square_metres:.3g} m²" if system == "SI" else f"{square_metres / (12 * INCH) ** 2:.3g} ft²"


def mass(kilograms: float, system: System) -> str:
    """A mass."""
    return units.show(kilograms, "kg") if system == "SI" else units.show(kilograms, "lb", 3)


def line_mass(kilograms_per_metre: float, system: System) -> str:
    """A mass per length."""
    if system == "SI":
        return f"{kilograms_per_metre:.3g} kg/m"
    return f"{kilograms_per_metre / POUND * 12 * INCH:.3g} lb/ft"


def density(kilograms_per_cubic_metre: float, system: System) -> str:
    """A mass per volume."""
    if system == "SI":
        return f"{kilograms_per_cubic_metre:.4g} kg/m³"
    return f"{kilograms_per_cubic_metre / POUND * (12 * INCH) ** 3:.3g} lb/ft³"


def at_least(value: float, dimension: str, system: System) -> str:
    """A size of some dimension, rounded up to three figures: what is needed at least."""
    unit = units.DIMENSIONS[dimension][0 if system == "SI" else 1]
    return f"{up_text(units.convert(value, unit), 3)} {unit}"


def speed(metres_per_second: float, system: System) -> str:
    """A wind speed."""
    return f"{metres_per_second:.3g} m/s" if system == "SI" else f"{metres_per_second / MILE_PER_HOUR:.3g} mph"


def speed_below(metres_per_second: float, system: System) -> str:
    """A wind speed not to be exceeded, rounded down to three figures."""
    if not isfinite(metres_per_second):
        return ABSENT
    unit, name = (1.0, "m/s") if system == "SI" else (MILE_PER_HOUR, "mph")
    return f"{written(round_down(metres_per_second / unit), 3)} {name}"


def temperature(kelvin: float, system: System) -> str:
    """A temperature."""
    celsius = kelvin - ZERO_CELSIUS
    return f"{_unsigned_zero(celsius, 0)} °C" if system == "SI" else f"{_unsigned_zero(celsius * 1.8 + 32.0, 0)} °F"


def bearing(radians: float) -> str:
    """A bearing to half a degree, in [0, 360)."""
    if not isfinite(radians):
        return ABSENT
    halves = round(2.0 * degrees(radians)) % 720
    return f"{halves // 2}°" if halves % 2 == 0 else f"{halves / 2:.1f}°"


def angle(radians: float) -> str:
    """An angle to a whole degree."""
    return f"{_unsigned_zero(degrees(radians), 0)}°" if isfinite(radians) else ABSENT


def small_angle(radians: float) -> str:
    """An angle to a hundredth of a degree."""
    return f"{degrees(radians):.2f}°" if isfinite(radians) else ABSENT


def factor(value: float) -> str:
    """A factor, rounded down so that it never reads better than it is."""
    if value > MOST_FACTOR:
        return f"over {MOST_FACTOR:.0f}"
    return f"{floor(value * 100.0 + 1e-9) / 100.0:.2f}" if isfinite(value) else ABSENT


def stability(stands_to: float, most: float) -> str:
    """The factor at which equilibrium is lost, to three figures rounded down; above the greatest looked at where it is not."""
    if not isfinite(stands_to):
        return ABSENT
    return f"above {most:g}" if stands_to >= most else written(round_down(stands_to), 3)


def reserve(lost_at: float, stands_to: float, failed: bool) -> str:
    """A factor at which equilibrium is lost, to three figures rounded down, or how far it was looked."""
    if isfinite(lost_at):
        return written(round_down(lost_at), 3)
    reached = written(round_down(stands_to), 3)
    return f"not known beyond {reached}" if failed else f"not lost up to {reached}"


def _unsigned_zero(value: float, decimals: int) -> str:
    text = f"{value:.{decimals}f}"
    return text.lstrip("-") if float(text) == 0.0 else text.replace("-", "−")


Say = Callable[[float, System], str]


@dataclass(frozen=True)
class Tongue:
    """The unit systems one sheet speaks."""

    systems: tuple[System, ...]

    def say(self, how: Say, value: float) -> str:
        """The value in the first system, in brackets in the second."""
        first, *rest = dict.fromkeys(how(value, system) for system in self.systems)
        return f"{first} ({', '.join(rest)})" if rest else first

    def each(self, how: Say, value: float) -> tuple[str, ...]:
        """The value in every system apart."""
        return tuple(how(value, system) for system in self.systems)


def tongue(units: Units) -> Tongue:
    """The systems behind a choice of units."""
    return Tongue(("SI", "US") if units == "both" else (units,))
