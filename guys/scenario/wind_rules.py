"""Rules on `[wind]` that look at several of its keys: what its profile expects, what may stand beside what."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping

from guys.scenario import resolve, standard_wind
from guys.scenario.draft import Draft
from guys.scenario.keys import Finding
from guys.scenario.wind_entry import AsceProfile, WindEntry

SAME_BEARING = 1e-9
"""Bearings nearer than this [rad] are one direction."""
TROPOSPHERE = (-1000.0, 11_000.0)
"""Altitudes [m] for which the standard atmosphere is worked out."""


def findings(draft: Draft) -> Iterator[Finding]:
    """Everything in `[wind]` that does not go together."""
    if draft.wind is None:
        return
    yield from _air(draft.wind)
    yield from _expected(draft.wind)
    yield from _given_or_looked_up(draft.wind)
    yield from _directions(draft.wind)


def _air(wind: WindEntry) -> Iterator[Finding]:
    if wind.air_density is not None:
        for name in ("altitude", "temperature"):
            if getattr(wind, name) is not None:
                yield Finding(("wind", name), f"air_density is given; leave {name} out, or give altitude and temperature alone")
    elif wind.temperature is not None and wind.altitude is None:
        yield Finding(("wind", "altitude"), "missing; temperature is given for the air density and needs it", (("wind", "air_density"),))
    if wind.altitude is not None and not TROPOSPHERE[0] <= wind.altitude <= TROPOSPHERE[1]:
        yield Finding(("wind", "altitude"), "out of range: the standard atmosphere is known here from -1 km to 11 km")
    if wind.temperature is not None and wind.temperature < 100.0:
        yield Finding(("wind", "temperature"), "too cold for air")


def _expected(wind: WindEntry) -> Iterator[Finding]:
    """What a profile of a standard starts from: a speed at 10 m that a gust curve can convert."""
    wanted = standard_wind.EXPECTED.get(type(wind.profile))  # type: ignore[arg-type]
    after = (("wind", "profile"),)
    if wanted is None:
        if "gust_curve" in wind.model_fields_set:
            yield Finding(("wind", "gust_curve"), "this profile takes the speed as it is; gust_curve goes with asce7 and en1991", after)
        return
    if abs(wind.height - standard_wind.REFERENCE_HEIGHT) > standard_wind.AS_HIGH:
        yield Finding(("wind", "height"), f"{wind.height:g} m will not do; this profile starts from the speed at 10 m (33 ft)", after)
    curve = standard_wind.gust_curve(wind.gust_curve)
    first, last = curve[0][0], curve[-1][0]
    if not first <= wind.averaging <= last:
        to = f"the {wanted:g} s of this profile"
        text = f"{wind.averaging:g} s cannot be converted to {to}; the gust curve goes from {first:g} s to {last:g} s"
        yield Finding(("wind", "averaging"), text, after)


def _given_or_looked_up(wind: WindEntry) -> Iterator[Finding]:
    profile, period, season, stay = wind.profile, wind.return_period, wind.season, wind.duration
    if isinstance(profile, AsceProfile) and profile.kzt is not None and profile.topography is not None:
        yield Finding(("wind", "profile", "kzt"), "topography is given too; give one of the two")
    if period is not None and period.source is None and (period.K, period.n) != (0.2, 0.5):
        yield Finding(("wind", "return_period", "source"), "missing; K and n are not the recommended 0.2 and 0.5; say where they come from")
    if season is not None:
        looked_up = {"start": season.start, "months": season.months}
        yield from _one_way("season", looked_up, season.factor, season.source, 'start = "May" and months = 2')
    if stay is not None:
        yield from _one_way("duration", {"stay": stay.stay}, stay.factor, stay.source, 'stay = "under 6 weeks"')


def _one_way(table: str, looked_up: Mapping[str, object], factor: float | None, source: str | None, example: str) -> Iterator[Finding]:
    """A factor is either given with its source, or looked up by all of its keys."""
    given = [name for name, value in looked_up.items() if value is not None]
    if factor is not None and given:
        yield Finding(("wind", table, "factor"), f"{given[0]} is given too; give {example}, or factor and source")
    elif factor is None and len(given) < len(looked_up):
        yield Finding(("wind", table), f"incomplete; give {example}, or factor and source")
    if factor is not None and source is None:
        yield Finding(("wind", table, "source"), "missing; say where the factor comes from")
    if factor is None and source is not None:
        yield Finding(("wind", table, "source"), "the table has its own source; it goes with factor")


def _directions(wind: WindEntry) -> Iterator[Finding]:
    bearings = resolve.directions(wind.directions) if isinstance(wind.directions, list) else ()
    order = sorted(range(len(bearings)), key=bearings.__getitem__)
    for before, place in zip(order[-1:] + order[:-1], order, strict=True):
        if before != place and abs(math.remainder(bearings[place] - bearings[before], math.tau)) < SAME_BEARING:
            yield Finding(("wind", "directions", max(before, place)), "this direction is in the list already")
