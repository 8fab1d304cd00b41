"""Patches of gust: where they are, that they make up the plain wind, and that what each brings is integrated to its edges."""

from __future__ import annotations

import math
from functools import cache
from typing import Any

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import quad
from toml_text import BOOM, MAST, changed, dumps_tables

from guys import parse_scenario, structure
from guys.errors import ScenarioError
from guys.loads import LoadCases, as_drawn, assemble, gusts, lines_of
from guys.loads.pressure import pressure, turbulence_intensity
from guys.scenario import Scenario, patches
from guys.scenario.patches import MEAN, Patch

SUMMED = 1e-12
CUT = 1e-8
"""Relative: a mean over a cable cut at the edges of patches against one uncut, both by Gauss points."""
INTEGRATED = 1e-9
"""Relative: Gauss points between the places where the pressure jumps or bends, and quad's own."""
TURBULENT = {"method": "patches", "turbulence": 0.2}
PROFILES: dict[str, tuple[Any, dict[str, Any]]] = {
    "uniform": ("uniform", TURBULENT),
    "power": ({"power": 0.14}, TURBULENT),
    "en1991": ({"en1991": "II"}, {"method": "patches"}),
    "asce7": ({"asce7": "C"}, {"method": "patches"}),
}
TWO_LEVELS = (
    ("guy_level",),
    [{"spar": "mast", "at": at, "rope": "wire", "to": ["N", "SE", "SW"], "tension": "1 kN"} for at in ("5 m", "9 m")],
)


@cache
def scenario(profile: str = "en1991", boom: bool = False, **gust: Any) -> Scenario:
    shape, table = PROFILES[profile]
    document = BOOM if boom else MAST
    return parse_scenario(
        dumps_tables(
            changed(
                document, (("wind", "profile"), shape), (("wind", "directions"), ["20 deg"]), (("gust",), {**table, **gust}), TWO_LEVELS
            )
        )
    )


def loads(s: Scenario) -> LoadCases:
    """Plain, mean, then every patch, in one wind."""
    built = structure.build(s)
    line = lines_of(s)[0]
    plain = line.__class__(**{**line.__dict__, "patches": ()})
    return assemble(built, [plain, *line.states()], as_drawn(built, np.full(len(s.cable), 12.0)))


# ---------------------------------------------------------------- where they are


def test_two_levels_and_a_tip_make_six_patches() -> None:
    """Spans 2, tip 1, from mid-span to mid-span 3: worked out from the rule of EN 1993-3-1 B.4.3.2, which is from memory."""
    inf = math.inf
    expected = [(-inf, 5.0), (5.0, 9.0), (9.0, inf), (-inf, 2.5), (2.5, 7.0), (7.0, inf)]
    assert [(p.low, p.high) for p in patches.of(scenario())] == expected


def test_a_short_tip_and_levels_side_by_side_are_no_patches_of_their_own() -> None:
    assert [p.high for p in patches.bands("patches", 12.0, patches.merged([5.0, 11.9, 5.1], 12.0))] == pytest.approx(
        [5.05, math.inf, 2.525, 8.475, math.inf]
    )


def test_a_single_patch_leaves_the_tip_apart() -> None:
    assert [(p.low, p.high) for p in patches.of(scenario(method="single"))] == [(-math.inf, 9.0), (9.0, math.inf)]


@given(
    levels=st.lists(st.floats(0.05, 0.99), min_size=1, max_size=6, unique=True).map(sorted),
    height=st.floats(-0.2, 1.3),
)
def test_every_height_is_in_one_span_and_in_one_band_between_middles(levels: list[float], height: float) -> None:
    bands = patches.bands("patches", 1.0, levels)
    inside = [p.low <= height < p.high for p in bands]
    second = [k for k, p in enumerate(bands) if math.isinf(p.low)][1]
    assert (sum(inside[:second]), sum(inside[second:])) == (1, 1)


# ---------------------------------------------------------------- what they bring


@pytest.mark.parametrize("profile", PROFILES)
@pytest.mark.parametrize("boom", [False, True])
def test_mean_and_all_spans_are_the_plain_wind_and_so_are_all_bands(profile: str, boom: bool) -> None:
    """2 k_s = 7 of the peak pressure: (B.22) and (B.24) of EN 1993-3-1, from memory, against (4.8) of EN 1991-1-4, read."""
    found = loads(scenario(profile, boom))
    for part in (found.force, found.dyad, found.cable_load, found.on_pieces, found.on_fittings):
        plain, mean, each = part[0], part[1], part[2:]
        scale = np.abs(plain).max()
        for family in (each[:3], each[3:]):
            assert mean + (family - mean).sum(axis=0) == pytest.approx(plain, abs=CUT * scale)
        assert part is found.dyad or np.abs(plain - mean).max() > 0.1 * np.abs(plain[..., :2]).max()


def test_a_gust_on_a_hill_is_the_more_by_its_orography() -> None:
    z = np.array([3.0, 8.0])
    level, hill = scenario(), parse_scenario(
        dumps_tables(changed(MAST, (("wind", "profile"), {"en1991": "II", "orography": 1.2}), (("gust",), {"method": "patches"})))
    )  # fmt: skip
    everywhere = Patch(-math.inf, math.inf)
    for s, c in ((level, 1.0), (hill, 1.2)):
        assert s.wind is not None
        i = turbulence_intensity(s.wind.profile, z)
        assert i is not None
        assert gusts.share(s, MEAN, z, z) == pytest.approx(1 / (1 + 7 * i), rel=SUMMED)
        assert gusts.share(s, everywhere, z, z) == pytest.approx((1 + 7 * i * c) / (1 + 7 * i), rel=SUMMED)


def test_the_peak_factor_multiplies_what_a_gust_adds() -> None:
    z, band = np.array([3.0, 8.0]), Patch(-math.inf, 5.0)
    more, usual = (gusts.share(scenario(k_s=k), band, z, z) - gusts.share(scenario(), MEAN, z, z) for k in (7.0, 3.5))
    assert more == pytest.approx(2 * usual, rel=SUMMED)
    assert usual[1] == 0


@pytest.mark.parametrize("profile", PROFILES)
def test_loads_of_a_patch_are_integrated_to_its_edges(profile: str) -> None:
    """The level force on the bare tube, and its moment about the foot, by adaptive integration between the same edges."""
    s = scenario(profile)
    blows, built = s.wind, structure.build(s)
    assert blows is not None
    found = loads(s)
    per_metre = 1.2 * 0.089
    for k, patch in enumerate([MEAN, *patches.of(s)]):

        def blown(z: float, arm: int, patch: Patch = patch) -> float:
            at = np.array([z])
            return float(pressure(blows, at)[0] * gusts.share(s, patch, at, at)[0]) * per_metre * z**arm  # type: ignore[arg-type]

        edges = [z for z in (2.0, 2.5, 4.572, 5.0, 7.0, 9.0) if z < 12.0]
        force, moment = (quad(blown, 0.0, 12.0, (arm,), points=edges, epsabs=0, epsrel=1e-12, limit=200)[0] for arm in (0, 1))
        ends = found.on_pieces[1 + k]
        got = np.hypot(*ends[:, ::2].sum(axis=(0, 1))[:2])
        start, end = built.pieces.station.T
        level = np.linalg.norm(ends[..., :2], axis=-1)
        turning = (start * level[:, 0] + level[:, 1] + end * level[:, 2] - level[:, 3]).sum()
        tolerance = 1e-4 if profile == "power" else INTEGRATED
        assert (got, turning) == (pytest.approx(force, rel=tolerance), pytest.approx(moment, rel=tolerance))


def test_a_cable_takes_the_gust_on_its_part_within_the_patch() -> None:
    """Uniform wind: straight shares of the chord's height."""
    found, s = loads(scenario("uniform")), scenario("uniform")
    mean = 1 / (1 + 7 * 0.2)
    for k, patch in enumerate(patches.of(s)):
        for c, cable in enumerate(s.cable):
            top = cable.from_.at
            within = (min(patch.high, top) - max(patch.low, 0.0)) / top
            share = mean + (1 - mean) * max(0.0, within)
            assert found.cable_load[2 + k, c, :2] == pytest.approx(share * found.cable_load[0, c, :2], rel=1e-9)


def test_what_a_boom_carries_is_in_the_patch_of_its_height_above_the_masts_foot() -> None:
    """The boom's heel is 1 m up and it rises 3 m: all within the span from the foot to 5 m, none in the one above."""
    s = scenario("uniform", boom=True)
    found, built = loads(s), structure.build(s)
    boom = found.on_pieces[:, built.pieces.spar == 1, ::2, :2]
    assert boom[2] == pytest.approx(boom[0], rel=1e-9)
    assert boom[3] == pytest.approx(boom[1], rel=1e-9)


# ---------------------------------------------------------------- faults


SINGLE_54 = (("spar", 0, "section", 0, "length"), "54 m")
TWO_MASTS = (("spar", 1), {**MAST["spar"][0], "name": "other", "foot": {"east": "30 m", "north": "0 m"}, "fitting": []})


@pytest.mark.parametrize(
    ("changes", "key", "says"),
    [
        ([(("gust",), {"method": "patches"})], "gust.turbulence", "missing; this profile has none"),
        ([(("gust",), {"method": "spans"})], "gust.method", "is not one of"),
        ([(("gust",), {"method": "patches", "turbulence": 1.2})], "gust.turbulence", "1"),
        ([(("gust",), {"k_s": 3.0})], "gust.k_s", 'goes with method = "patches"'),
        ([(("gust",), TURBULENT), (("wind", "profile"), {"en1991": "I"})], "gust.turbulence", "the profile has its own"),
        ([(("gust",), TURBULENT), (("wind", "averaging"), "10 min")], "wind.averaging", "600 s is no gust"),
        (
            [(("gust",), {"method": "patches"}), (("wind", "profile"), {"asce7": "C", "gust_effect": 0.85})],
            "wind.profile.gust_effect", "the patches take its place",
        ),
        (
            [(("gust",), {"method": "patches"}), (("wind", "profile"), {"en1991": "I", "structural": 0.9})],
            "wind.profile.structural", "the patches take its place",
        ),
        ([(("gust",), TURBULENT), (("wind",), ...), (("case",), [{"name": "calm", "wind": 0.0}])], "gust.method", "there is no [wind]"),
        ([(("gust",), TURBULENT), TWO_MASTS], "gust.method", "here stand mast, other"),
        ([(("gust",), TURBULENT), (("guy_level",), []), (("spar", 0, "base"), "fixed")], "gust.method", "no cable holds"),
        ([(("gust",), {**TURBULENT, "method": "single"}), SINGLE_54], "gust.method", "masts up to 50 m"),
    ],
)  # fmt: skip
def test_faults(changes: list[tuple[tuple[str | int, ...], Any]], key: str, says: str) -> None:
    with pytest.raises(ScenarioError) as caught:
        parse_scenario(dumps_tables(changed(MAST, *changes)))
    told = {fault.key: fault.message for fault in caught.value.faults}
    assert says in told.get(key, ""), told


def test_what_was_read_and_what_is_from_memory_is_said() -> None:
    first, second = (note for note in scenario().notes if note.startswith("gusts: "))
    assert "6 patches" in first
    assert "from memory" in first
    assert "read in a public transcription" in second
    assert "not of one equilibrium" in second
