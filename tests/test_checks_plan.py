"""Rules of a site against hand cases: distances in plan and in space, heights over roads, what is near what."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
import scenarios_made as made
from shapely import LineString, Point, box

from guys.results import Finding, Solution
from guys.scenario.model import Scenario
from guys.site import Obstacle, Site
from guys.site.ground import joined
from guys.studies.standing import solve

ROUNDING = 1e-9
"""[m] of coordinates of tens of metres."""
CHORDS = 2e-3
"""[m] straight pieces between 41 points of a cable lie above its curve by less than this here."""


def on_site(scenario: Scenario, site: Site) -> Solution:
    return solve(scenario.model_copy(update={"site": site}))


def guyed(*directions: float) -> made.Document:
    """An 18 m mast, in still air unless wind comes; anchors A north, B, C at 10 m round it, guys at 9 m and 17 m to each."""
    document = made.mast(*directions)
    for anchor, bearing in zip(document["anchor"], (0.0, 120.0, 240.0), strict=True):
        anchor |= {"bearing": bearing, "radius": 10.0}
    return document


def mast() -> Scenario:
    return made.scenario(guyed())


def found(solution: Solution, thing: str, quantity: str) -> Finding:
    return next(f for f in solution.findings if (f.thing, f.quantity) == (thing, quantity))


# ---------------------------------------------------------------- anchors in plan


def test_anchors_inside_the_boundary_by_the_setback() -> None:
    site = Site(boundary=box(-20, -20, 20, 11.5), setback=2.0)
    f = found(on_site(mast(), site), "anchor A", "inside the boundary")
    assert (f.demand, f.capacity) == pytest.approx((2.0, 1.5), abs=ROUNDING)
    assert (f.margin, f.verdict) == (pytest.approx(-0.5, abs=ROUNDING), "past")
    outside = found(on_site(mast(), Site(boundary=box(-20, -20, 20, 9))), "anchor A", "inside the boundary")
    assert (outside.capacity, outside.verdict) == (pytest.approx(-1.0, abs=ROUNDING), "past")
    assert found(on_site(mast(), Site(boundary=box(-20, -20, 20, 10))), "anchor A", "inside the boundary").verdict == "within"


@pytest.mark.parametrize(
    ("shape", "clearance", "distance"),
    [
        (box(-2, 11, 2, 14), 1.5, 1.0),
        (box(-2, 9.5, 2, 14), 1.5, -0.5),
        (box(-2, 9.5, 2, 14), None, -0.5),
        (LineString([(-5, 13), (5, 13)]), 2.0, 3.0),
        (Point(3, 14), 6.0, 5.0),
    ],
)
def test_anchors_clear_of_obstacles(shape: object, clearance: float | None, distance: float) -> None:
    obstacle = Obstacle("cable trench", "service", shape, clearance=clearance)  # type: ignore[arg-type]
    f = found(on_site(mast(), Site(obstacles=(obstacle,))), "anchor A", "clear of cable trench")
    assert f.capacity == pytest.approx(distance, abs=ROUNDING)
    assert f.verdict == ("within" if distance >= (clearance or 0.0) else "past")


# ---------------------------------------------------------------- cables over ground


def test_headroom_is_that_of_the_catenary() -> None:
    """A road from 4 m to 6 m north under the guys to A: lowest at its far edge, on the curve as solved, and near the chord's height."""
    solution = on_site(mast(), Site(obstacles=(Obstacle("lane", "road", box(-1, 4, 1, 6), headroom=3.0),)))
    f = found(solution, "cable 9 m A", "over lane")
    curve = solution.cables.curve[:, solution.cables.name.index("9 m A")]
    exact = min(float(np.interp(6.0, c[::-1, 1], c[::-1, 2])) for c in curve)
    assert f.capacity == pytest.approx(exact, abs=CHORDS)
    assert f.capacity < 9.0 * 4.0 / 10.0
    assert f.verdict == "within"
    assert not [g for g in solution.findings if g.quantity == "over lane" and g.thing.endswith((" B", " C"))]


def test_headroom_closed_form() -> None:
    """w of the cable along its chord: the curve hangs w x (L - x) / (2 H) below the chord, H the level part of its tension."""
    solution = on_site(mast(), Site(obstacles=(Obstacle("lane", "road", box(-1, 4.9, 1, 5.0), headroom=3.0),)))
    k = solution.cables.name.index("9 m A")
    pull = np.abs(solution.cables.force_on_anchor[0, k])
    head = solution.cables.curve[0, k, -1]
    chord = head[2] * (10.0 - 5.0) / (10.0 - head[1])
    weight = 0.15 * 9.80665 * math.hypot(10.0 - head[1], head[2]) / (10.0 - head[1])
    sag = weight * 5.0 * (5.0 - head[1]) / (2 * np.hypot(pull[0], pull[1]))
    f = found(solution, "cable 9 m A", "over lane")
    assert sag > 5 * CHORDS
    assert f.capacity == pytest.approx(chord - sag, abs=CHORDS)


def test_the_lowest_curve_is_that_of_the_worst_wind_round_the_circle() -> None:
    """Wind listed from the south alone.  From the north it presses on a guy that rises to the south and bows it down, over the road, and
    leans the mast toward a line in the south: both are found, as low as when that very wind is listed."""
    site = Site(
        obstacles=(
            Obstacle("lane", "road", box(-1, 4, 1, 6), headroom=3.0),
            Obstacle("supply", "line", LineString([(-50, -30), (50, -30)]), height=12.0, distance=15.0),
        )
    )
    listed = on_site(made.scenario(guyed(180.0)), site)
    f = found(listed, "cable 9 m A", "over lane")
    assert abs(math.remainder(f.wind_from, math.tau)) < math.radians(60)
    again = on_site(made.scenario(guyed(math.degrees(f.wind_from))), site)
    curve = again.cables.curve[1:, again.cables.name.index("9 m A")]
    assert f.capacity == pytest.approx(min(float(np.interp(6.0, c[::-1, 1], c[::-1, 2])) for c in curve), abs=CHORDS)
    assert f.capacity < min(float(np.interp(6.0, c[::-1, 1], c[::-1, 2])) for c in listed.cables.curve[:, 0]) - 5 * CHORDS
    near = found(listed, "spar mast", "from supply")
    assert abs(math.remainder(near.wind_from, math.tau)) < math.radians(60)
    assert near.capacity < 30.0 - CHORDS


def test_headroom_is_above_the_surveyed_ground() -> None:
    points = np.array([[-20, -20, 1.0], [20, -20, 1.0], [20, 20, 1.0], [-20, 20, 1.0]])
    lane = Obstacle("lane", "road", box(-1, 4, 1, 6), headroom=3.0)
    flat = found(on_site(mast(), Site(obstacles=(lane,))), "cable 9 m A", "over lane")
    raised = found(on_site(mast(), Site(obstacles=(lane,), ground=joined(points))), "cable 9 m A", "over lane")
    assert flat.capacity - raised.capacity == pytest.approx(1.0, abs=ROUNDING)
    small = Site(obstacles=(lane,), ground=joined(points * [0.1, 0.1, 1.0]))
    assert found(on_site(mast(), small), "cable 9 m A", "over lane").verdict == "not judged"


def test_what_asks_no_headroom_is_not_judged_but_told() -> None:
    solution = on_site(
        mast(), Site(obstacles=(Obstacle("lane", "road", box(-1, 4, 1, 6)), Obstacle("trench", "service", box(-1, 4, 1, 6))))
    )
    f = found(solution, "cable 9 m A", "over lane")
    assert (f.verdict, f.why) == ("not judged", "the road gives no headroom")
    assert not [g for g in solution.findings if g.quantity == "over trench"]


# ---------------------------------------------------------------- overhead lines, the fall


def test_distance_to_an_overhead_line_standing_and_in_the_fall() -> None:
    """A line 30 m east of the foot, 10 m up: 30 m from the mast, sqrt(30² + 10²) less the mast's 18 m in its fall."""
    line = Obstacle("supply", "line", LineString([(30, -50), (30, 50)]), height=10.0, distance=15.0)
    solution = on_site(mast(), Site(obstacles=(line,)))
    assert found(solution, "spar mast", "from supply").capacity == pytest.approx(30.0, abs=1e-6)
    fall = found(solution, "spar mast", "from supply in the fall")
    assert fall.capacity == pytest.approx(math.hypot(30, 10) - 18.0, abs=ROUNDING)
    assert fall.verdict == "past"


def test_what_stands_in_the_fall_circle_is_warned_of() -> None:
    near, far = (
        Obstacle("store", "building", box(12, -1, 14, 1), height=3.0),
        Obstacle("barn", "building", box(18.5, -1, 20, 1), height=3.0),
    )
    solution = on_site(mast(), Site(obstacles=(near, far)))
    (warning,) = [w for w in solution.warnings if "fall circle" in w]
    assert "store (building, 12.0 m from its foot)" in warning
    assert "barn" not in warning


# ---------------------------------------------------------------- in each other's way


def test_guys_to_their_own_anchors_cross_nothing() -> None:
    assert not [f for f in made.solved(made.mast()).findings if not math.isnan(f.margin)]


def test_cables_that_cross_are_told() -> None:
    """Guys of two masts 6 m apart whose anchors lie on the other's far side meet half way at one height."""
    spars = [made.spar(name=n, foot={"east": x, "north": 0.0, "level": 0.0}) for n, x in (("left", 0.0), ("right", 6.0))]
    places = {"l": (16.0, 0.0), "r": (-10.0, 0.0), "ln": (-5.0, 8.0), "ls": (-5.0, -8.0), "rn": (11.0, 8.0), "rs": (11.0, -8.0)}
    anchors = [{"name": name, "east": east, "north": north} for name, (east, north) in places.items()]
    ends = (("left", ("l", "ln", "ls")), ("right", ("r", "rn", "rs")))
    cables = [made.cable(f"{s} {a}", 9.0, a, spar=s, tension=1000.0) for s, own in ends for a in own]
    document = made.document(spars, anchors, cables, still=True)
    crossing = [f for f in made.solved(document).findings if f.quantity.startswith("from cable")]
    assert [(f.thing, f.quantity, f.verdict) for f in crossing] == [("cable left l", "from cable right r", "past")]


def test_a_cable_through_a_fitting_is_told() -> None:
    document = guyed()
    document["spar"][0]["fitting"] = [made.fitting(at=8.0, area=3.0, drag=1.0, offset=made.vector(0.0, 5.0, 0.0))]
    told = [w for w in made.solved(document).warnings if "from the middle of load" in w]
    chord = abs(10 * (17 - 8.0) / 17 - 5.0) * 17 / math.hypot(10, 17)  # level miss of the straight guy, across its slope
    (only,) = told
    assert only.startswith("cable 17 m A passes 0.")
    assert float(only.split()[5]) == pytest.approx(chord, abs=0.05)


def test_an_anchor_in_the_way_of_a_cable_is_told() -> None:
    document = guyed()
    document["anchor"].append({"name": "near", "bearing": 0.0, "radius": 9.9})
    told = [f for f in made.solved(document).findings if f.thing == "anchor near" and f.quantity.startswith("from cable")]
    assert {f.quantity for f in told} == {"from cable 9 m A", "from cable 17 m A"}


def test_turning_the_site_changes_no_margin() -> None:
    """Mast, boundary and line turned together by 90°."""
    from shapely.affinity import rotate

    line = Obstacle("supply", "line", LineString([(30, -50), (30, 50)]), height=10.0, distance=15.0)
    lane = Obstacle("lane", "road", box(-1, 4, 1, 6), headroom=3.0)
    site = Site(boundary=box(-20, -15, 20, 12), obstacles=(line, lane))
    turned = replace(
        site,
        boundary=rotate(site.boundary, -90, origin=(0, 0)),
        obstacles=tuple(replace(o, shape=rotate(o.shape, -90, origin=(0, 0))) for o in site.obstacles),
    )
    one = on_site(mast(), site)
    two = on_site(made.scenario(made.turned(guyed(), 90.0)), turned)
    margins = [{(f.thing, f.quantity): f.margin for f in s.findings if not math.isnan(f.margin)} for s in (one, two)]
    assert len(margins[0]) > 10
    assert margins[0] == pytest.approx(margins[1], abs=1e-6)
