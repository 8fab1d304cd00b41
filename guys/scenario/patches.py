"""`[gust]`: whether the peak pressure stands on everything at once, or gusts come patch by patch on top of the mean wind.

A gust on the whole of a guyed mast misses moments of its spans, since a load on one span bends the next the other way.  So every wind is
taken apart into a mean on all and patches of gust, each run together with the mean (`guys.loads.gusts`):

    spans     foot to first level, level to level
    tip       last level to head
    levels    middle of one span to the middle of the next; the first from the foot, the last to the head
    single    foot to last level, and the tip: masts up to 50 m

Lowest and highest patches go on below foot and above head, so that spans and tip together are everything, and levels together too.  The
patches are from memory of EN 1993-3-1 B.4.3; how their responses are put together was read (`guys.studies.peaks`).
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from itertools import pairwise

from guys import units
from guys.scenario.draft import Draft
from guys.scenario.gust import Gust
from guys.scenario.keys import Finding
from guys.scenario.model import AnchorPoint, GroundFoot, Scenario, Spar
from guys.scenario.wind_entry import AsceProfile, EnProfile, WindEntry

SINGLE_UP_TO = 50.0
"""Greatest height [m] of a mast for which a single patch may do (from memory)."""
GUST = 3.0
"""Longest averaging time [s] of a speed that is a gust."""
PEAKS = (
    "every number of a case with wind is its mean and the root of the sum of squares of what each patch changes in it; such peaks are not "
    "of one equilibrium and do not add up"
)
ONE_LEVEL = 0.02
"""Attachments nearer than this share of the mast are one level; a shorter tip belongs to the span below it."""


@dataclass(frozen=True)
class Patch:
    """A band of heights [m] above the mast's foot that a gust fills; the whole wind is the mean elsewhere."""

    low: float
    high: float

    @property
    def words(self) -> str:
        """ "gust from 15 m (49.2 ft) to the head"."""
        if self == MEAN:
            return "mean wind"
        low, high = ("" if math.isinf(each) else units.both(each, "length") for each in (self.low, self.high))
        return f"gust from {low or 'the foot'} to {high or 'the head'}"


MEAN = Patch(math.inf, math.inf)
"""No gust anywhere."""


def bands(method: str, height: float, levels: Sequence[float]) -> tuple[Patch, ...]:
    """The patches of a mast of that height [m] with guys at these levels [m], ascending."""
    tip = height - levels[-1] > ONE_LEVEL * height
    if method == "single":
        return _between([-math.inf, *([levels[-1]] if tip else []), math.inf])
    held = [0.0, *levels]
    middles = [0.5 * (a + b) for a, b in pairwise(held)]
    spans = [-math.inf, *levels] if tip else [-math.inf, *levels[:-1]]
    return (*_between([*spans, math.inf]), *_between([-math.inf, *middles, math.inf]))


def _between(edges: Sequence[float]) -> tuple[Patch, ...]:
    return tuple(Patch(a, b) for a, b in pairwise(edges))


def merged(at: Iterable[float], length: float) -> list[float]:
    """Levels, of attachments at these heights; those that are one have their mean."""
    groups: list[list[float]] = []
    for each in sorted(at):
        if groups and each - groups[-1][0] <= ONE_LEVEL * length:
            groups[-1].append(each)
        else:
            groups.append([each])
    return [math.fsum(group) / len(group) for group in groups]


def of(scenario: Scenario) -> tuple[Patch, ...]:
    """The patches of every case with wind; none where gusts are plain."""
    if scenario.gust.method == "plain":
        return ()
    spar = scenario.spar[mast(scenario)]
    up = math.cos(spar.lean)
    at = [cable.from_.at for cable in scenario.cable if cable.from_.spar == spar.name and isinstance(cable.to, AnchorPoint)]
    return bands(scenario.gust.method, spar.length * up, [up * each for each in merged(at, spar.length)])


def mast(scenario: Scenario) -> int:
    """The spar that stands on the ground, by its index; of several the first."""
    return next(k for k, spar in enumerate(scenario.spar) if isinstance(spar.foot, GroundFoot))


def notes(scenario: Scenario) -> Iterator[str]:
    """The patches, and what of the method was read."""
    asked = of(scenario)
    if not asked:
        return
    gust = scenario.gust
    intensity = "I_v of the profile" if gust.turbulence is None else f"I_v {gust.turbulence:g}, given"
    levels = sum(1 for patch in asked if math.isinf(patch.low)) > 1
    how = "one patch and the tip" if not levels else "spans and tip, and from mid-span to mid-span"
    yield (
        f"gusts: {len(asked)} patches, {how}, each with the mean wind q/(1 + 7 I_v) on all; in a patch 2 k_s I_v of the mean on top, "
        f"k_s {gust.k_s:g}, {intensity} (EN 1993-3-1 B.4.3, from memory)"
    )
    yield f"gusts: {PEAKS} (EN 1993-3-1 B.4.3.2.5, read in a public transcription); drawn cables are those of the mean wind"


def findings(draft: Draft) -> Iterator[Finding]:
    """What the patches need, and what does not go with them."""
    gust, wind = draft.gust, draft.wind
    if gust is None:
        return
    if gust.method == "plain":
        for name in sorted(gust.model_fields_set - {"method"}):
            yield Finding(("gust", name), 'goes with method = "patches" or "single"; a plain gust has none', (("gust", "method"),))
        return
    if wind is None:
        if "wind" not in draft.document:
            yield Finding(("gust", "method"), f'"{gust.method}" takes the wind apart, and there is no [wind]')
    else:
        yield from _wind(gust, wind)
    yield from _structure(gust, draft)


def _wind(gust: Gust, wind: WindEntry) -> Iterator[Finding]:
    profile = wind.profile
    if isinstance(profile, AsceProfile | EnProfile):
        if gust.turbulence is not None:
            yield Finding(("gust", "turbulence"), "the profile has its own; leave it out")
        name, factor = ("gust_effect", profile.gust_effect) if isinstance(profile, AsceProfile) else ("structural", profile.structural)
        if factor != 1.0:
            text = f"{factor:g} is for a gust on everything at once; the patches take its place, leave it out"
            yield Finding(("wind", "profile", name), text, (("gust", "method"),))
        return
    if gust.turbulence is None:
        yield Finding(("gust", "turbulence"), "missing; this profile has none; give the intensity, such as turbulence = 0.2")
    if wind.averaging > GUST:
        text = f"{wind.averaging:g} s is no gust; patches of this profile start from the speed of a gust, averaged over 3 s or less"
        yield Finding(("wind", "averaging"), text, (("gust", "method"),))


def _structure(gust: Gust, draft: Draft) -> Iterator[Finding]:
    """One mast, held by guys."""
    standing = [spar for _, spar in draft.spars().values() if isinstance(spar.foot, GroundFoot)]
    if len(standing) > 1:
        names = ", ".join(spar.name for spar in standing)
        yield Finding(("gust", "method"), f'patches are for one mast on the ground, here stand {names}; write method = "plain"')
    elif standing:
        yield from _mast(gust, standing[0], draft)


def _mast(gust: Gust, spar: Spar, draft: Draft) -> Iterator[Finding]:
    guyed = any(level is not None and level.spar == spar.name for level in draft.guy_level)
    single = any(c is not None and c.from_.spar == spar.name and isinstance(c.to, AnchorPoint) for c in draft.cable)
    after = (("guy_level",), ("cable",), ("spar",))
    if not guyed and not single:
        yield Finding(("gust", "method"), f'no cable holds "{spar.name}" to an anchor: there are no spans; write method = "plain"', after)
    height = spar.length * math.cos(spar.lean)
    if gust.method == "single" and height > SINGLE_UP_TO:
        text = f'"single" is for masts up to {SINGLE_UP_TO:g} m (164 ft), this one has {units.both(height, "length")}; write "patches"'
        yield Finding(("gust", "method"), text)
