"""Holdfasts as functions: the block against a balance of forces and moments solved by bisection, the rest against sums by hand, and all
of them against what physics says must rise or fall."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from guys import holdfasts, tables
from guys.constants import STANDARD_GRAVITY
from guys.holdfasts import block, deadman, picket, rock, screw, tested
from guys.holdfasts.holding import Holding
from guys.scenario.holding import MODELS

ROUNDING = 1e-9
"""Of sums of a few terms in doubles, relative."""
BISECTED = 1e-7
"""What sixty halvings leave of the pull, with the rounding of the balance at the limit, relative."""
angles = st.floats(math.radians(1), math.radians(89))


def deg(*values: float) -> np.ndarray:
    return np.radians(np.array(values))


def one(found: Holding) -> float:
    return float(found.best[0])


# ---------------------------------------------------------------- block


@given(angles, st.floats(0.2, 1.0), st.floats(100, 5000))
def test_a_block_slides_by_the_rule_of_the_trade(a: float, mu: float, mass: float) -> None:
    """T = mu W / (cos a + mu sin a) on level ground, which never exceeds what lifts it."""
    W = mass * STANDARD_GRAVITY
    found = block.holding(np.array([a]), mass=mass, friction=mu)
    assert one(found) == pytest.approx(mu * W / (math.cos(a) + mu * math.sin(a)), rel=ROUNDING)
    assert found.words == ("sliding",)
    assert one(found) <= W / math.sin(a) * (1 + ROUNDING)


def stands(
    pull: float, a: float, mass: float, mu: float, s: float, side: float, across: float, height: float, eye: float, q: float
) -> bool:
    """Whether the ground can answer: the resultant of weight and pull within friction, inside the base, and pressing no more than q.

    Forces as vectors in axes of the slope, moments about the middle of the base; nothing is solved for.
    """
    down = np.array([math.sin(s), -math.cos(s)]) * mass * STANDARD_GRAVITY
    drawn = pull * np.array([math.cos(a + s), math.sin(a + s)])
    along, normal = down[0] + drawn[0], -(down[1] + drawn[1])
    moment = height / 2 * down[0] + eye * drawn[0]
    if normal < 0 or abs(along) > mu * normal or abs(moment) > normal * side / 2:
        return False
    return normal <= q * across * (side - 2 * abs(moment) / max(normal, 1e-300))


@given(
    angles, st.floats(100, 5000), st.floats(0.3, 1.0), st.floats(0, 0.25), st.floats(0.3, 3), st.floats(0.3, 3), st.floats(0.1, 2),
    st.floats(0, 2), st.floats(20e3, 500e3),
)  # fmt: skip
def test_a_block_holds_until_the_ground_has_no_answer(
    a: float, mass: float, mu: float, s: float, length: float, width: float, height: float, eye: float, q: float
) -> None:
    shape = {"length": length, "width": width, "height": height, "eye_height": eye}
    found = one(block.holding(np.array([a]), mass=mass, friction=mu, slope=s, bearing=q, **shape))
    both = [(length, width), (width, length)]

    def holds(pull: float) -> bool:
        return all(stands(pull, a, mass, mu, s, side, across, height, eye, q) for side, across in both)

    if not holds(0.0):
        assert found == 0.0
        return
    low, high = 0.0, 3 * mass * STANDARD_GRAVITY / math.sin(a)
    for _ in range(60):
        low, high = ((low + high) / 2, high) if holds((low + high) / 2) else (low, (low + high) / 2)
    assert found == pytest.approx(low, rel=BISECTED, abs=1e-6 * mass)


@given(angles, st.floats(0.3, 0.9), st.floats(200, 3000), st.floats(0.4, 2), st.floats(0, 0.2))
def test_what_makes_a_block_hold_more_or_less(a: float, mu: float, mass: float, side: float, slope: float) -> None:
    def at(**more: float) -> float:
        base = {"mass": mass, "friction": mu, "length": side, "width": side, "height": 0.5, "eye_height": 0.4, "slope": slope}
        return one(block.holding(np.array([a]), **{**base, **more}))

    here = at() * (1 - ROUNDING)
    assert at(mass=1.1 * mass) > here
    assert at(friction=1.05 * mu) >= here
    assert at(length=1.1 * side) >= here
    assert at(eye_height=0.5) <= at() * (1 + ROUNDING)
    assert at(slope=slope + 0.01) <= at() * (1 + ROUNDING)


def test_what_a_block_lacks_is_told_and_not_passed() -> None:
    bare = block.holding(deg(40), mass=1000, friction=0.5)
    lacking = [each.split(" (")[0] for each in bare.unjudged]
    assert lacking == ["tipping along its length", "tipping along its width", "pressure on the ground"]
    narrow = block.holding(deg(40), mass=1000, friction=0.9, length=2.0, width=0.4, height=1.0)
    assert narrow.words == ("tipping along its width",)
    assert one(narrow) < one(block.holding(deg(40), mass=1000, friction=0.9))


def test_a_pull_downward_presses_a_block_on_the_ground() -> None:
    """At 20 degrees below level with mu 0.5 the pull may be mu W / (cos a - mu sin a); steeper than atan 1/mu it never slides."""
    W = 1000 * STANDARD_GRAVITY
    found = block.holding(deg(-20, -70), mass=1000, friction=0.5)
    assert found.best[0] == pytest.approx(0.5 * W / (math.cos(math.radians(20)) - 0.5 * math.sin(math.radians(20))), rel=ROUNDING)
    assert found.best[1] == math.inf


# ---------------------------------------------------------------- deadman and pickets


def test_a_deadman_between_two_depths_and_two_slopes_by_hand() -> None:
    """Halfway between 4 and 5 ft on 1 in 1: (1750 + 2800) / 2 lb per square foot; face 1 ft high, 5 ft long less a foot; half in sand."""
    foot, pound = 0.3048, 4.4482216152605
    found = deadman.holding(deg(45), length=5 * foot, height=foot, depth=4.5 * foot, soil="sand")
    assert one(found) == pytest.approx(0.5 * 2275 * 4 * pound, rel=ROUNDING)
    between = deadman.power(4 * foot, np.array([(math.atan(1) + math.atan(1 / 2)) / 2]))
    assert between[0] * foot**2 / pound == pytest.approx((1750 + 2200) / 2, rel=ROUNDING)


@given(st.floats(0.92, 2.12), angles, st.floats(0.5, 2.5))
def test_a_deadman_holds_more_the_deeper_the_longer_and_the_flatter(depth: float, a: float, length: float) -> None:
    def at(depth: float, a: float, length: float) -> float:
        return one(deadman.holding(np.array([a]), length=length, height=0.3, depth=depth, soil="loam"))

    here = at(depth, a, length) * (1 - ROUNDING)
    assert at(depth + 0.01, a, length) >= here
    assert at(depth, a * 0.95, length) >= here
    assert at(depth, a, length + 0.05) >= here


def test_a_deadman_outside_the_table_is_not_judged() -> None:
    usual = {"length": 1.8, "height": 0.3, "depth": 1.2, "soil": "loam"}
    assert deadman.holding(deg(-1), **usual).words == ("the pull is downward",)
    assert "outside the published table" in deadman.holding(deg(45), **{**usual, "depth": 2.2}).words[0]
    assert "a log bends first" in deadman.holding(deg(45), **usual, form="log").words[0]
    assert not np.isnan(deadman.holding(deg(2, 45, 90), **usual).low).any()
    flat = deadman.holding(deg(2, math.degrees(math.atan(1 / 4))), **usual)
    assert flat.best[0] == flat.best[1]
    assert any("flatter than 1 in 4" in note for note in flat.notes)
    assert any("from memory" in note for note in deadman.holding(deg(60), **usual).notes)
    with pytest.raises(KeyError):
        deadman.holding(deg(45), **{**usual, "soil": "hardpan"}, wet=True)


def test_pickets_are_judged_up_to_a_slope_the_user_may_change() -> None:
    usual = {"pattern": "3-2-1", "soil": "loam"}
    assert "steeper than 45°" in picket.holding(deg(50), **usual).words[0]
    steeper = picket.holding(deg(50), **usual, steepest=math.radians(60))
    assert one(steeper) == pytest.approx(4000 * 4.4482216152605, rel=ROUNDING)
    assert one(picket.holding(deg(40), **usual, wet=True)) == pytest.approx(one(steeper) / 2, rel=ROUNDING)


# ---------------------------------------------------------------- screw


def test_a_screw_in_clay_by_hand() -> None:
    """250 mm plate in clay of 40 kPa: 9 c A = 17.67 kN at 2 m (8 diameters), 1.2 x 4 c A = 9.42 kN at 1 m."""
    usual = {"helix": [0.25], "soil": {"cohesion": 40e3}}
    deep, shallow = (screw.holding(deg(50), depth=d, **usual) for d in (2.0, 1.0))
    A = math.pi / 4 * 0.25**2
    assert one(deep) == pytest.approx(9 * 40e3 * A, rel=ROUNDING)
    assert deep.words == ("plate bearing",)
    assert one(shallow) == pytest.approx(4.8 * 40e3 * A, rel=ROUNDING)
    assert shallow.words == ("breakout to the surface",)


def test_a_screw_in_sand_by_hand() -> None:
    """phi 30, 18 kN/m3, a 250 mm plate 1 m down: S = 1 + 0.15 x 4 = 1.6; N = 1 + 2 x 1.6 x 4 x 0.91 tan 30 = 7.725; Nq = 18.40.

    At 3 m bearing governs, and the low value holds breakout at the critical ratio of 4, where N is that same 7.725.
    """
    A, tan = math.pi / 4 * 0.25**2, math.tan(math.radians(30))
    N = 1 + 2 * 1.6 * 4 * 0.91 * tan
    Nq = math.exp(math.pi * tan) * 3
    usual = {"helix": [0.25], "soil": {"friction_angle": math.radians(30), "unit_weight": 18e3}}
    shallow, deep = (screw.holding(deg(50), depth=d, **usual) for d in (1.0, 3.0))
    assert one(shallow) == pytest.approx(18e3 * 1.0 * N * A, rel=ROUNDING)
    assert shallow.low[0] == pytest.approx(shallow.best[0], rel=ROUNDING)
    assert one(deep) == pytest.approx(18e3 * 3.0 * Nq * A, rel=ROUNDING)
    assert deep.words == ("plate bearing",)
    assert deep.low[0] == pytest.approx(18e3 * 3.0 * N * A, rel=ROUNDING)
    wet = screw.holding(deg(50), depth=3.0, wet=True, **usual)
    assert one(wet) / one(deep) == pytest.approx((18e3 - 9806.65) / 18e3, rel=ROUNDING)


@given(st.floats(0.15, 0.4), st.floats(0.6, 4.0), st.floats(math.radians(21), math.radians(44)), angles)
def test_a_screw_holds_more_the_deeper_the_wider_and_the_denser(D: float, depth: float, phi: float, a: float) -> None:
    def low_and_best(D: float, depth: float, phi: float) -> np.ndarray:
        ground = {"friction_angle": phi, "unit_weight": 18e3}
        found = screw.holding(np.array([a]), helix=[D, 0.9 * D], depth=depth, soil=ground)
        return np.array([found.low[0], found.best[0]])

    here = low_and_best(D, depth, phi) * (1 - ROUNDING)
    assert here[0] <= here[1] * (1 + 2 * ROUNDING)
    assert (low_and_best(D, depth * 1.05, phi) >= here).all()
    assert (low_and_best(D, depth, phi + 0.005) >= here).all()


def test_plates_up_the_shaft_are_shallower_by_its_slope() -> None:
    """Three diameters apart along a shaft at 30 degrees: half of that in depth; on a level shaft all plates are as deep."""
    H = screw.plate_depths(np.array([0.3, 0.25, 0.2]), 3.0, None, np.radians([30.0, 0.0]))
    assert H[0] == pytest.approx([3.0, 2.55, 2.175], rel=ROUNDING)
    assert H[1] == pytest.approx([3.0, 3.0, 3.0], rel=ROUNDING)


def test_torque_asks_for_the_shaft_and_round_ones_are_interpolated() -> None:
    """Kt 32.8 /m for a 38 mm square shaft; of a round one halfway from 3.5 in (7 /ft) to 8.625 in (3 /ft), 5 /ft."""
    square = screw.holding(deg(50), helix=[0.25], depth=2.0, torque=4000.0, shaft={"square": 0.038})
    assert one(square) == pytest.approx(4000 * 10 / 0.3048, rel=ROUNDING)
    half = 0.0254 * (3.5 + 8.625) / 2
    assert screw.torque_factor({"round": half})[0] == pytest.approx(5 / 0.3048, rel=ROUNDING)
    assert screw.torque_factor({"round": 0.0254 * 3.0})[0] == pytest.approx(10 / 0.3048, rel=ROUNDING)
    with pytest.raises(KeyError):
        screw.holding(deg(50), helix=[0.25], depth=2.0, torque=4000.0)


def test_a_rod_off_the_pull_is_told_and_then_not_judged() -> None:
    found = screw.holding(deg(50, 62, 85, -5), helix=[0.25], depth=2.0, soil={"cohesion": 40e3}, rod=math.radians(50))
    assert found.words == (
        "plate bearing",
        "plate bearing, pulled off its rod, which bends it",
        "pulled more than 30° off its rod",
        "the pull is downward",
    )
    assert np.isnan(found.low).tolist() == [False, False, True, True]


# ---------------------------------------------------------------- rock and tests


def test_a_bar_in_rock_by_hand() -> None:
    """25 mm, 1 m bonded at 1 MPa: 78.54 kN; yield of 500 MPa on 491 mm2: 245.4 kN; cone of 25 kN/m3 from 0.5 m along a bar at 45°."""
    usual = {"bar": 0.025, "bond_length": 1.0, "bond_stress": 1e6}
    found = rock.holding(deg(45), **usual, yield_=500e6)
    assert one(found) == pytest.approx(math.pi * 0.025 * 1e6, rel=ROUNDING)
    assert {each.split(" (")[0] for each in found.unjudged} == {"bond between grout and rock", "cone of rock"}
    cone = rock.holding(deg(45), **usual, unit_weight=25e3)
    h = 0.5 * math.sin(math.pi / 4)
    assert one(cone) == pytest.approx(25e3 * math.pi / 3 * h**3 / 3 / math.sin(math.pi / 4), rel=ROUNDING)
    assert cone.words == ("cone of rock",)
    off = rock.holding(deg(45), bar=0.012, bond_length=3.0, bond_stress=1e6, yield_=250e6, rod=math.radians(60))
    e = math.radians(15)
    sheared = math.pi / 4 * 0.012**2 * 250e6 / math.sqrt(math.cos(e) ** 2 + 3 * math.sin(e) ** 2)
    assert one(off) == pytest.approx(sheared, rel=ROUNDING)


@given(st.floats(0.01, 0.05), st.floats(0.3, 4.0), angles)
def test_a_bar_holds_more_the_thicker_and_the_longer(bar: float, bond: float, a: float) -> None:
    def at(bar: float, bond: float) -> float:
        more = {"yield_": 500e6, "unit_weight": 25e3, "tensile_stress": 50e3, "hole": 2 * bar, "rock_bond_stress": 0.5e6}
        return one(rock.holding(np.array([a]), bar=bar, bond_length=bond, bond_stress=1e6, **more))

    here = at(bar, bond) * (1 - ROUNDING)
    assert at(1.1 * bar, bond) >= here
    assert at(bar, 1.1 * bond) >= here


def test_a_test_speaks_for_its_own_direction() -> None:
    found = tested.holding(deg(45, 57, 80), pull=22e3, factor=1.1, test_angle=math.radians(45))
    assert found.best[:2] == pytest.approx([20e3, 20e3], rel=ROUNDING)
    assert math.isnan(found.low[2])
    assert len(found.notes) == 2


# ---------------------------------------------------------------- all of them


EVERY = {
    "block": {"mass": 1000.0, "friction": 0.5, "length": 1.0, "width": 1.0, "height": 0.5},
    "deadman": {"length": 1.8, "height": 0.3, "depth": 1.2, "soil": "loam"},
    "picket": {"pattern": "1-1-1", "soil": "loam"},
    "screw": {"helix": [0.25], "depth": 1.5, "soil": {"friction_angle": 0.55, "unit_weight": 18e3}},
    "rock": {"bar": 0.025, "bond_length": 1.0, "bond_stress": 1e6},
    "tested": {"pull": 22e3},
}


@pytest.mark.parametrize("kind", EVERY)
def test_the_spread_is_about_the_best_value(kind: str) -> None:
    table = MODELS[kind].model_validate({"kind": kind, "low": 0.7, "high": 1.2, **EVERY[kind]})
    found = holdfasts.of(table, deg(20, 40))
    assert found.low == pytest.approx(0.7 * found.best, rel=ROUNDING)
    assert found.high == pytest.approx(1.2 * found.best, rel=ROUNDING)


@pytest.mark.parametrize("kind", EVERY)
def test_no_pull_is_not_judged_and_cases_do_not_touch(kind: str) -> None:
    table = MODELS[kind].model_validate({"kind": kind, "source": "site book", **EVERY[kind]})
    many = holdfasts.of(table, deg(20, math.nan, 40))
    assert np.isnan(many.low).tolist() == [False, True, False]
    assert many.low[2] == holdfasts.of(table, deg(40)).low[0]
    assert many.source.startswith("site book; ")


def test_every_kind_is_listed_with_its_keys_and_source() -> None:
    assert [kind.name for kind in holdfasts.kinds()] == list(EVERY)
    for kind in holdfasts.kinds():
        assert {*EVERY[kind.name], "kind", "low", "high", "source"} <= set(kind.keys)
        assert kind.source
        assert kind.what


@pytest.mark.parametrize("name", ["deadman", "holdfast_soils", "pickets", "breakout", "torque_factors", "friction", "presumptive_soils"])
def test_every_row_names_its_source(name: str) -> None:
    assert all(row["source"].strip() for row in tables.rows(name))


def test_names_of_the_reader_are_those_of_the_tables() -> None:
    for kind in ("deadman", "picket"):
        allowed = MODELS[kind].model_json_schema()["properties"]["soil"]["anyOf"][0]["enum"]
        assert set(allowed) == {row["soil"] for row in tables.rows("holdfast_soils") if row["kind"] == kind}
    assert set(MODELS["picket"].model_json_schema()["properties"]["pattern"]["enum"]) == set(picket.combinations())
