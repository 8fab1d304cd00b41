"""Every starter and every scenario we ship solves as it stands, and one number of each scenario is worked out a second way by hand.

The hand calculations take cables as straight lines along their chords, as drawn: what sag, stretch and the small movement from the drawing
change is below ``STRAIGHT``.
"""

from __future__ import annotations

import math
from pathlib import Path

import numpy as np
import pytest
from shapely import LineString

from guys import Solution, parse_scenario, read_scenario, solve
from guys.scenario import drawn, starters

SCENARIOS = Path(__file__).parent.parent / "scenarios"
STRAIGHT = 0.015
"""Relative: half the cable's weight over its tension, at most 1.3 % here, is the slope that the chord leaves out at an end."""

GRAVITY = 9.80665


@pytest.fixture(scope="module")
def solved() -> dict[str, Solution]:
    return {path.stem: solve(read_scenario(path)) for path in sorted(SCENARIOS.glob("*.toml"))}


def settled(solution: Solution) -> None:
    assert set(solution.state) == {"stable"}
    assert solution.past == ()
    assert solution.check.resolve == "agrees"
    assert not solution.scenario.warnings


@pytest.mark.parametrize("kind", starters.KINDS)
def test_starters_solve_within_their_allowables(kind: str) -> None:
    settled(solve(parse_scenario(starters.text(kind))))


def test_shipped_scenarios_solve_within_their_allowables(solved: dict[str, Solution]) -> None:
    assert len(solved) >= 4
    for solution in solved.values():
        settled(solution)


def tube_mass(diameter: float, wall: float, density: float) -> float:
    """Mass per length of a tube by its mean circumference."""
    return math.pi * (diameter - wall) * wall * density


def tension(solution: Solution, name: str, end: str = "top") -> float:
    values = solution.cables.tension_top if end == "top" else solution.cables.tension_anchor
    return float(values[0, solution.cables.name.index(name)])


def direction(solution: Solution, name: str) -> tuple[np.ndarray, np.ndarray]:
    """The point where a cable leaves its spar and the unit vector along its chord, as drawn."""
    index = [cable.name for cable in solution.scenario.cable].index(name)
    top, bottom = (np.array(point) for point in drawn.scenario_cable_ends(solution.scenario)[index])
    return top, (bottom - top) / np.linalg.norm(bottom - top)


def test_quarry_mast_stands_on_the_sum_of_what_presses_it_down(solved: dict[str, Solution]) -> None:
    """Foot: weights of mast and fittings and the downward part of every guy, whose tensions are the targets made to balance."""
    found = solved["quarry-relay-mast"]
    weight = 12 * tube_mass(0.1143, 0.004, 7850) + 9 * tube_mass(0.0889, 0.0036, 7850) + 22 + 8
    pull = -sum(tension(found, name) * direction(found, name)[1][2] for name in found.cables.name)
    assert -found.bases.force[0, 0, 2] == pytest.approx(weight * GRAVITY + pull, rel=STRAIGHT)


def test_quarry_mast_is_plumb_and_its_guys_balance_level_by_level(solved: dict[str, Solution]) -> None:
    """A plumb, straight mast takes no sideways force from a level of guys but what its bending and the dish's offset ask for: little."""
    found = solved["quarry-relay-mast"]
    assert found.head_lean[0, 0] < math.radians(0.01)
    for level in ("low", "high"):
        sideways = sum(tension(found, f"{level} {a}") * direction(found, f"{level} {a}")[1][:2] for a in "NESW")
        greatest = max(tension(found, f"{level} {a}") for a in "NESW")
        assert np.linalg.norm(sideways) < STRAIGHT * greatest


def test_bench_mast_stands_clear_of_the_parking_by_hand(solved: dict[str, Solution]) -> None:
    """SE stands 12 m out at 125 deg, so 12 cos 125 deg north: that far above the parking's north edge at 8.5 m south."""
    clear = next(f for f in solved["bench-mast"].findings if (f.thing, f.quantity) == ("anchor SE", "clear of parking"))
    assert clear.capacity == pytest.approx(8.5 + 12 * math.cos(math.radians(125)))
    assert clear.margin == pytest.approx(clear.capacity - 1.0)


def test_bench_mast_guys_over_the_haul_road_hang_near_their_chord() -> None:
    """Over the road's far edge, 30 m out, the low guy SE is lowest: the height of its chord there above the ground, less its sag."""
    over = next(each for each in read_scenario(SCENARIOS / "bench-mast.toml").layouts if each.layout == "over the haul road")
    solution = solve(over)
    top, along = direction(solution, "low SE")
    road = next(o for o in over.site.obstacles if o.name == "haul road").shape  # type: ignore[union-attr]
    line = LineString([top[:2], (top + along * 40)[:2]])
    far = max(LineString([top[:2], point]).length for point in road.intersection(line).coords)
    out = math.hypot(*along[:2])
    at = top + along * far / out
    height = at[2] - float(over.site.ground.level(at[0], at[1]))  # type: ignore[union-attr]
    found = next(f for f in solution.findings if (f.thing, f.quantity) == ("cable low SE", "over haul road"))
    assert height - 0.25 < found.capacity < height
    assert found.verdict == "past"


def test_sign_pylon_backstays_hold_the_overturning(solved: dict[str, Solution]) -> None:
    """Moments about the hinge: weights and forestay turn the pylon outward, the two backstays hold it."""
    found = solved["leaning-sign-pylon"]
    foot, inch, pound = 0.3048, 0.0254, 0.45359237
    lean, toward = math.radians(20), math.radians(135)
    out = np.array([math.sin(toward), math.cos(toward), 0.0])
    arm = math.sin(lean) * foot
    steel = 7850
    overturning = GRAVITY * (
        20 * foot * tube_mass(6.625 * inch, 0.280 * inch, steel) * 10 * arm
        + 16 * foot * tube_mass(5.563 * inch, 0.258 * inch, steel) * 28 * arm
        + 210 * pound * (30 * arm + 6 * math.sqrt(2) * inch)
        + 18 * pound * 36 * arm
    )

    def moment(name: str) -> float:
        point, along = direction(found, name)
        return float(point[2] * (along @ out) - (point @ out) * along[2])

    holding = -moment("backstay west") - moment("backstay north")
    by_hand = (overturning + tension(found, "forestay") * moment("forestay")) / holding
    assert tension(found, "backstay west") == pytest.approx(by_hand, rel=STRAIGHT)
    assert tension(found, "backstay north") == pytest.approx(by_hand, rel=STRAIGHT)


def test_stayed_boom_hangs_from_its_topping_stay(solved: dict[str, Solution]) -> None:
    """Moments about the heel, in the boom's plane: load, weights and side stays press it down, the topping stay holds it up."""
    found = solved["stayed-boom"]
    lean, toward = math.radians(55), math.radians(110)
    out, heel = np.array([math.sin(toward), math.cos(toward), 0.0]), np.array([0.0, 0.0, 1.2])
    boom = 11 * tube_mass(0.12, 0.006, 2700)
    down = math.sin(lean) * (2500 * 10.8 + GRAVITY * (boom * 5.5 + 15 * 10))

    def turning(point: np.ndarray, force: np.ndarray) -> float:
        from_heel = point - heel
        return float(from_heel[2] * (force @ out) - (from_heel @ out) * force[2])

    sides = sum(tension(found, name) * turning(*direction(found, name)) for name in ("side stay north", "side stay south"))
    masthead, along = direction(found, "topping stay")
    holding = -turning(masthead, -along)
    assert tension(found, "topping stay", "anchor") == pytest.approx((down + sides) / holding, rel=STRAIGHT)
