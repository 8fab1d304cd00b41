"""The table `[wind]` as it is written: reference speed, profile over height, air, directions, and what short stays may take off.

What its numbers become is worked out in `guys.scenario.standard_wind`.
"""

from __future__ import annotations

import math
from typing import Annotated, Any, Literal

from pydantic import AfterValidator, BeforeValidator, Discriminator, Field, Tag

from guys.scenario import quantity as q
from guys.scenario.shapes import Rules
from guys.scenario.table import Model

MOST_DIRECTIONS = 3600


def _whole_step(step: float) -> float:
    turns = math.tau / step
    if abs(turns - round(turns)) > 1e-6:
        raise q.fault(f"a full circle is not a whole number of steps of {math.degrees(step):.6g} deg")
    if not 1 <= round(turns) <= MOST_DIRECTIONS:
        raise q.fault(f"{round(turns)} directions are too many; at most {MOST_DIRECTIONS}")
    return step


Step = Annotated[q.PositiveAngle, *q.every("a set of directions", "30 deg"), AfterValidator(_whole_step)]
Directions = Annotated[
    Annotated[Annotated[list[q.Angle], Field(min_length=1, max_length=MOST_DIRECTIONS)], Tag("<list>")] | Annotated[Step, Tag("<step>")],
    q.LIST_OR_STEP,
]


class PowerProfile(Model):
    """Wind speed rising with height as a power."""

    power: q.Factor
    """Exponent p of V = speed (z / height) ** p."""


class Topography(Model):
    """A ridge, an escarpment or a hill whose crest speeds the wind up, ASCE 7 Figure 26.8-1.  Taken for every wind direction."""

    shape: Literal["ridge", "escarpment", "hill"]
    """ridge: long, both sides fall; escarpment: level behind the crest; hill: round."""
    height: q.PositiveLength
    """Height H of the crest above the land upwind."""
    half_length: q.PositiveLength
    """Distance Lh upwind of the crest where the ground has half its height."""
    distance: q.LengthFromZero = 0.0
    """Distance x of the site from the crest."""
    side: Literal["upwind", "downwind"] = "downwind"
    """Side of the crest the site is on."""


class AsceProfile(Model):
    """Profile of ASCE 7; the speed is a 3 s gust at 10 m over open terrain, and is converted to it."""

    asce7: Literal["B", "C", "D"]
    """Exposure: B built-up or wooded, C open, D along open water."""
    edition: Literal["7-16", "7-22"] = "7-22"
    """Edition; left out: 7-22."""
    kzt: q.Ratio | None = None
    """Topographic factor Kzt on the pressure; left out: 1, or that of `topography`."""
    topography: Topography | None = None
    """What the ground does, in place of kzt."""
    kd: q.Ratio = 1.0
    """Directionality factor Kd on the pressure; left out: 1, off.  Only for cases with the load factors of ASCE 7."""
    gust_effect: q.Ratio = 1.0
    """Gust effect factor G on the pressure; left out: 1, off."""


class EnProfile(Model):
    """Profile of EN 1991-1-4; the speed is a 10 min mean at 10 m over open terrain, and is converted to it."""

    en1991: Literal["0", "I", "II", "III", "IV"]
    """Terrain category."""
    annex: Literal["recommended", "NO"] = "recommended"
    """National annex the terrain's constants are taken from."""
    orography: q.Ratio = 1.0
    """Orography factor c_o on the mean speed; left out: 1, level ground."""
    structural: q.Ratio = 1.0
    """Structural factor cs cd on the pressure; left out: 1, off."""


def _profile_kind(value: Any) -> str:
    if isinstance(value, str):
        return "<uniform>"
    keys = value if isinstance(value, dict) else type(value).model_fields if isinstance(value, Model) else ()
    return "<asce7>" if "asce7" in keys else "<en1991>" if "en1991" in keys else "<power>"


def _known_profile(value: Any) -> Any:
    """One table holds one profile, told by its key."""
    held = [key for key in ("power", "asce7", "en1991") if isinstance(value, dict) and key in value]
    if isinstance(value, dict) and len(held) != 1:
        raise q.fault('a table here is one of { power = 0.14 }, { asce7 = "C" }, { en1991 = "II" }')
    return value


ProfileEntry = Annotated[
    Annotated[PowerProfile, Tag("<power>")]
    | Annotated[AsceProfile, Tag("<asce7>")]
    | Annotated[EnProfile, Tag("<en1991>")]
    | Annotated[Literal["uniform"], Tag("<uniform>")],
    Discriminator(_profile_kind),
    BeforeValidator(_known_profile),
]


class ReturnPeriod(Model):
    """Probability factor of EN 1991-1-4 (4.2) on the speed, which is that of 50 years."""

    years: Annotated[float, Field(strict=True, ge=2.0, le=10_000.0)]
    """Return period of the wind asked for."""
    K: Annotated[float, Field(strict=True, ge=0.0, le=0.5)] = 0.2
    """Shape parameter; left out: 0.2, as recommended."""
    n: Annotated[float, Field(strict=True, gt=0.0, le=1.0)] = 0.5
    """Exponent; left out: 0.5, as recommended."""
    source: q.Line | None = None
    """Where K and n come from; needed where they are not the recommended ones."""


class Season(Model):
    """Seasonal factor on the speed, for a structure that stands in some months only: of the table, or given."""

    start: Literal["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"] | None = None
    """First month it stands."""
    months: Literal[1, 2, 4] | None = None
    """Months it stands, from the first of `start`."""
    factor: q.Ratio | None = None
    """The factor itself, in place of start and months."""
    source: q.Line | None = None
    """Where the factor comes from."""


class Stay(Model):
    """Factor on the speed for the length of the stay: of the table, or given."""

    stay: Literal["under 6 weeks", "6 weeks to 1 year", "1 to 2 years", "2 to 5 years"] | None = None
    """How long it stands."""
    factor: q.Ratio | None = None
    """The factor itself, in place of stay."""
    source: q.Line | None = None
    """Where the factor comes from."""


class WindEntry(Model):
    """The reference wind."""

    speed: q.Speed
    """Reference speed."""
    averaging: q.Duration
    """Time the speed is averaged over."""
    height: q.PositiveLength
    """Height of the reference speed."""
    profile: ProfileEntry = "uniform"
    """uniform, { power = 0.14 }, { asce7 = "C" } or { en1991 = "II" }."""
    gust_curve: Literal["durst", "krayer-marshall"] = "durst"
    """Curve by which a profile of a standard converts the averaging time; left out: durst, open terrain; krayer-marshall: hurricanes."""
    air_density: q.Density | None = None
    """Density of the air; left out: 1.225 kg/m3, 1.226 for asce7, 1.25 for en1991, or that of `altitude` and `temperature`."""
    altitude: q.Length | None = None
    """Altitude of the site, in place of air_density; alone with asce7: its ground elevation factor Ke."""
    temperature: q.Temperature | None = None
    """Temperature of the air, with `altitude`; left out: the standard one of that altitude."""
    return_period: ReturnPeriod | None = None
    """Return period of the wind, where not that of the reference speed; left out: off."""
    season: Season | None = None
    """Season it stands in; left out: off."""
    duration: Stay | None = None
    """Length of the stay; left out: off."""
    directions: Directions = math.pi / 6
    """Bearings the wind comes from: "every 30 deg" (the default), or a list."""
    coefficients: Rules | None = None
    """Whose force coefficients are chosen from shapes: "en" or "asce7"; left out: those that go with the profile, else "en"."""
