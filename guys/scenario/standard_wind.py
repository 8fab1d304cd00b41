"""What a `[wind]` table becomes: speed converted to what its profile expects, factors chosen, constants looked up, each told in words.

    speed factor      gust curve at the profile's averaging time over that at the one given; probability, season, length of stay
    pressure factor   ASCE 7: Kzt where given, Kd, Ke, G;  EN 1991-1-4: cs cd

Altitude counts once.  ASCE 7 has a ground elevation factor Ke = exp(-0.000119 z_e), z_e in metres, beside the constant 0.613 (a density of
1.226 kg/m3); where the density is given, or follows from altitude and temperature, it stands and Ke is 1.  Kd is applied once, be it in q
(7-16) or in the force (7-22).  The probability factor is c_prob = [(1 - K ln(-ln(1 - p))) / (1 - K ln(-ln 0.98))]^n, p = 1 / years.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from functools import cache
from itertools import pairwise

from guys import constants, tables, units
from guys.scenario.model import Profile, Wind
from guys.scenario.wind_entry import AsceProfile, EnProfile, PowerProfile, ProfileEntry, ReturnPeriod, Season, Stay, Topography, WindEntry

EXPECTED = {AsceProfile: 3.0, EnProfile: 600.0}
"""Averaging time [s] of the speed a standard profile starts from, at REFERENCE_HEIGHT over open terrain."""
REFERENCE_HEIGHT = 10.0
AS_HIGH = 0.1
"""[m] by which a height may differ from that of a standard: 33 ft is meant to be 10 m."""
ASCE_CONSTANT = 0.613
"""q / V^2 [kg/m3] of ASCE 7, half a density of 1.226 kg/m3; read in public transcriptions of (26.10-1)."""
KE_RATE = 0.000119
"""[1/m] of Ke, ASCE 7 Table 26.9-1 note, read in public transcriptions."""
EN_AIR_DENSITY = 1.25
"""[kg/m3] recommended by EN 1991-1-4 4.5, read in a public transcription."""
STEEPEST = 0.5
"""H / Lh above which Figure 26.8-1 takes Lh as 2 H."""
BASE_PROBABILITY = 0.02
BOTH_REDUCED = (
    "wind: {} each take something off for a short stay; the codes warn that such reductions should not all be taken in full "
    "(EN 1991-1-6 3.1, from memory)"
)


@cache
def gust_curve(name: str) -> tuple[tuple[float, float], ...]:
    """(averaging time [s], speed over the hourly mean) of a published curve, ascending."""
    return tuple((float(r["averaging"]), float(r["ratio"])) for r in tables.rows("gust_curves") if r["curve"] == name)


def gust_ratio(name: str, averaging: float) -> float:
    """Speed averaged over that time over the hourly mean, straight in the logarithm of time between the points of the curve."""
    points = gust_curve(name)
    for (t0, r0), (t1, r1) in pairwise(points):
        if t0 <= averaging <= t1:
            return r0 + (r1 - r0) * math.log(averaging / t0) / math.log(t1 / t0)
    raise ValueError(f"{averaging} s is not on the curve")


def beaufort(speed: float, averaging: float) -> int | None:
    """Beaufort number of a speed [m/s] at 10 m over open terrain, by Durst's curve; None for an averaging time that is not on it."""
    curve = gust_curve("durst")
    if not curve[0][0] <= averaging <= curve[-1][0]:
        return None
    mean = speed * gust_ratio("durst", 600.0) / gust_ratio("durst", averaging)
    return max((int(row["number"]) for row in tables.rows("beaufort") if float(row["from"]) <= mean), default=0)


def probability_factor(years: float, shape: float = 0.2, exponent: float = 0.5) -> float:
    """c_prob of EN 1991-1-4 (4.2), on the speed of 50 years."""

    def reduced(p: float) -> float:
        return 1.0 - shape * math.log(-math.log1p(-p))

    return float((reduced(1.0 / years) / reduced(BASE_PROBABILITY)) ** exponent)


def ground_elevation_factor(altitude: float) -> float:
    """Ke of ASCE 7 at an altitude [m]."""
    return math.exp(-KE_RATE * altitude)


def averaging_words(seconds: float) -> str:
    """ "3 s gust", "10 min mean"."""
    amount = f"{seconds:g} s" if seconds < 60.0 else f"{seconds / 60.0:g} min" if seconds < 3600.0 else f"{seconds / 3600.0:g} h"
    return f"{amount} {'gust' if seconds < 60.0 else 'mean'}"


def resolved(entry: WindEntry, directions: tuple[float, ...]) -> Wind:
    """The wind with its profile's constants, its factors and its notes."""
    speed, speed_notes = _product([_converted(entry), _returned(entry.return_period), _seasonal(entry.season), _staying(entry.duration)])
    density, elevation = _air(entry)
    pressure, pressure_notes = _product([*_pressure_factors(entry.profile), elevation])
    profile, profile_note = _profile(entry.profile)
    return Wind(
        speed=entry.speed,
        averaging=entry.averaging,
        height=entry.height,
        profile=profile,
        air_density=density,
        directions=directions,
        coefficients=entry.coefficients,
        speed_factor=speed,
        pressure_factor=pressure,
        notes=(*profile_note, *speed_notes, *pressure_notes, *_left_off(entry.profile)),
        warnings=tuple(_warned(entry)),
    )


Factor = tuple[float, str]
"""A factor and what is said of it; "" says nothing."""
NONE: Factor = (1.0, "")


def _product(factors: list[Factor]) -> tuple[float, list[str]]:
    return math.prod(f for f, _ in factors), [note for _, note in factors if note]


# ---------------------------------------------------------------- speed


def _converted(entry: WindEntry) -> Factor:
    wanted = EXPECTED.get(type(entry.profile))  # type: ignore[arg-type]
    if wanted is None:
        return NONE
    if entry.averaging == wanted:
        return 1.0, f"wind: a {averaging_words(wanted)} is what the profile starts from; not converted"
    ours, theirs = gust_ratio(entry.gust_curve, entry.averaging), gust_ratio(entry.gust_curve, wanted)
    source = next(r["source"] for r in tables.rows("gust_curves") if r["curve"] == entry.gust_curve)
    default = "" if "gust_curve" in entry.model_fields_set else ", default curve"
    words = f"{averaging_words(entry.averaging)} converted to the {averaging_words(wanted)} of the profile"
    factor = theirs / ours
    speed = units.both(entry.speed * factor, "speed")
    return factor, f"wind: {words}: speed x {theirs:.4g}/{ours:.4g} = {factor:.4g}, {speed} ({source}{default})"


def _returned(entry: ReturnPeriod | None) -> Factor:
    if entry is None:
        return NONE
    factor = probability_factor(entry.years, entry.K, entry.n)
    source = entry.source or "EN 1991-1-4 (4.2), recommended K and n, read in a public transcription"
    return factor, f"wind: return period of {entry.years:g} years: speed x {factor:.4g} (K {entry.K:g}, n {entry.n:g}; {source})"


def _seasonal(entry: Season | None) -> Factor:
    if entry is None:
        return NONE
    if entry.factor is not None:
        return entry.factor, f"wind: season: speed x {entry.factor:g} ({entry.source})"
    row = next(r for r in tables.rows("seasons") if r["start"] == entry.start and int(r["months"]) == entry.months)
    factor = float(row["factor"])
    return factor, f"wind: stands {entry.months} months from {entry.start}: speed x {factor:g} ({row['source']})"


def _staying(entry: Stay | None) -> Factor:
    if entry is None:
        return NONE
    if entry.factor is not None:
        return entry.factor, f"wind: length of stay: speed x {entry.factor:g} ({entry.source})"
    row = next(r for r in tables.rows("stays") if r["stay"] == entry.stay)
    factor = float(row["factor"])
    return factor, f"wind: stands {entry.stay}: speed x {factor:g} ({row['source']})"


def _warned(entry: WindEntry) -> Iterator[str]:
    factors = {
        "return_period": _returned(entry.return_period)[0],
        "season": _seasonal(entry.season)[0],
        "duration": _staying(entry.duration)[0],
    }
    less = [name for name, factor in factors.items() if factor < 1.0]
    if len(less) > 1:
        yield BOTH_REDUCED.format(" and ".join(less))
    if isinstance(entry.profile, AsceProfile) and entry.profile.kd < 1.0:
        yield f"wind: Kd {entry.profile.kd:g} takes something off every direction; ASCE 7 allows it with its own load factors only"


# ---------------------------------------------------------------- air and factors on the pressure


def _air(entry: WindEntry) -> tuple[float, Factor]:
    """Density [kg/m3] and Ke, altitude in one of them only."""
    standard = entry.profile
    if entry.air_density is not None:
        return entry.air_density, NONE
    if isinstance(standard, AsceProfile) and entry.temperature is None:
        if entry.altitude is None:
            return 2 * ASCE_CONSTANT, NONE
        ke = ground_elevation_factor(entry.altitude)
        where = units.both(entry.altitude, "length")
        return 2 * ASCE_CONSTANT, (ke, f"wind: Ke = exp(-0.000119 z) = {ke:.4g} at {where}, in place of another air density (ASCE 7, 26.9)")
    if entry.altitude is not None:
        return constants.air_density(entry.altitude, entry.temperature), NONE
    return (EN_AIR_DENSITY if isinstance(standard, EnProfile) else constants.AIR_DENSITY), NONE


def _pressure_factors(standard: ProfileEntry) -> list[Factor]:
    if isinstance(standard, EnProfile):
        return [_chosen(standard.structural, "structural factor cs cd", "EN 1991-1-4 6")]
    if not isinstance(standard, AsceProfile):
        return []
    place = "in q (26.10-1)" if standard.edition == "7-16" else "in the force, q has none"
    return [
        _chosen(standard.kzt if standard.kzt is not None else 1.0, "topographic factor Kzt", "ASCE 7 26.8"),
        _chosen(standard.kd, "directionality factor Kd", f"ASCE 7 26.6, applied once: the edition has it {place}"),
        _chosen(standard.gust_effect, "gust effect factor G", "ASCE 7 26.11"),
    ]


def _chosen(factor: float, name: str, where: str) -> Factor:
    return NONE if factor == 1.0 else (factor, f"wind: {name} {factor:g}, chosen ({where})")


def _left_off(standard: ProfileEntry) -> list[str]:
    """The choices of a standard that are not taken."""
    if isinstance(standard, AsceProfile):
        off = [name for name, factor in (("Kd", standard.kd), ("G", standard.gust_effect)) if factor == 1.0]
    elif isinstance(standard, EnProfile):
        off = [name for name, factor in (("cs cd", standard.structural), ("c_o", standard.orography)) if factor == 1.0]
    else:
        return []
    return [f"wind: off, that is 1: {', '.join(off)}"] if off else []


# ---------------------------------------------------------------- profiles


def _profile(standard: ProfileEntry) -> tuple[Profile, list[str]]:
    if isinstance(standard, AsceProfile):
        return _asce(standard)
    if isinstance(standard, EnProfile):
        return _en(standard)
    if isinstance(standard, PowerProfile):
        return Profile(kind="power", exponent=standard.power, words=f"power law {standard.power:g} with height"), []
    return Profile(), []


def _asce(standard: AsceProfile) -> tuple[Profile, list[str]]:
    """Kz = c (z / zg)^(2 / alpha): 1 / alpha is the exponent of the speed, and sqrt(c) (10 m / zg)^(1 / alpha) its share at 10 m."""
    row = next(r for r in tables.rows("terrain_asce7") if (r["edition"], r["exposure"]) == (standard.edition, standard.asce7))
    c, alpha, gradient, low = (float(row[name]) for name in ("c", "alpha", "zg", "zmin"))
    reference = gradient * c ** (-alpha / 2)
    crest, note = _crest(standard)
    profile = Profile(
        kind="asce7", exponent=1.0 / alpha, reference=reference, low=low, high=gradient, crest=crest, turbulence=float(row["turbulence"]),
        words=f"ASCE {standard.edition}, exposure {standard.asce7}",
    )  # fmt: skip
    default = "" if "edition" in standard.model_fields_set else " (edition by default)"
    kz = f"Kz = {c:g} (z / {gradient:g} m)^(2 / {alpha:g}), the same below {low:g} m"
    return profile, [f"wind: {profile.words}{default}: {kz} ({row['source']})", *note]


def _crest(standard: AsceProfile) -> tuple[tuple[float, float] | None, list[str]]:
    """K1 K2 and gamma / Lh of Kzt = (1 + K1 K2 exp(-gamma z / Lh))^2."""
    ground = standard.topography
    if ground is None:
        return None, []
    row = next(r for r in tables.rows("hills_asce7") if (r["shape"], r["exposure"]) == (ground.shape, standard.asce7))
    slope, half_length = _slope(ground)
    mu = float(row["mu_downwind" if ground.side == "downwind" else "mu_upwind"])
    k1 = float(row["k1_over_slope"]) * slope
    k2 = max(0.0, 1.0 - ground.distance / (mu * half_length))
    words = f"K1 {k1:.3g}, K2 {k2:.3g}, K3 = exp(-{row['gamma']} z / {half_length:.4g} m)"
    note = f"wind: Kzt of the {ground.shape}, {words}, in every wind direction ({row['source']})"
    return (k1 * k2, float(row["gamma"]) / half_length), [note]


def _slope(ground: Topography) -> tuple[float, float]:
    """H / Lh and Lh as Figure 26.8-1 takes them."""
    if ground.height / ground.half_length <= STEEPEST:
        return ground.height / ground.half_length, ground.half_length
    return STEEPEST, 2.0 * ground.height


def _en(standard: EnProfile) -> tuple[Profile, list[str]]:
    """kr = 0.19 (z0 / 0.05 m)^0.07, (4.5), unless the annex prints its own."""
    row = next(r for r in tables.rows("terrain_en1991") if (r["annex"], r["category"]) == (standard.annex, standard.en1991))
    roughness, low = float(row["z0"]), float(row["zmin"])
    terrain = tables.number(row["kr"]) or 0.19 * (roughness / 0.05) ** 0.07
    annex = "" if standard.annex == "recommended" else f", annex {standard.annex}"
    profile = Profile(
        kind="en1991", low=low, roughness=roughness, terrain=terrain, orography=standard.orography,
        words=f"EN 1991-1-4, terrain {standard.en1991}{annex}",
    )  # fmt: skip
    means = f"v_m = {terrain:.4g} ln(z / {roughness:g} m) c_o v_b, peak q = (1 + 7 I_v) q_m, the same below {low:g} m"
    chosen = [] if standard.orography == 1.0 else [f"wind: orography factor c_o {standard.orography:g}, chosen (EN 1991-1-4 4.3.3)"]
    return profile, [f"wind: {profile.words}: {means} ({row['source']})", *chosen]
