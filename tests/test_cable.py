"""Cables against direct integration of their equilibrium, differences, and the limit of a straight tie."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import settings as limits
from hypothesis import strategies as st
from scipy.integrate import solve_ivp

from guys import cable

INTEGRATED = 1e-9
"""Relative to the length: what Runge-Kutta at a relative tolerance of 1e-12 leaves."""
CLOSED = 2e-13
"""Chord missed, of length plus chord: some roundings of the sums that make it."""
STRETCHED = 1e-7
"""[N] the weight of what 12 N stretch 12 m of EA = 1e9 N by: 1.4e-7 m at most, half of it on either side."""
NARROW = 1e-5
"""Relative: rounding of a vertical tension of newtons in one level of 1e-12 of it."""
MICROMETRE = 1e-6
"""A micrometre in a metre, which nobody measures: the sum over 20,000 chords, and loops hanging in line with their load, are as good."""
DIFFERENCES = 1e-6
"""Relative error of central differences of forces that are themselves known to 1e-11."""
WEIGHT_GONE = 1e-9
"""Relative tension left of a weight that is a millionth of the tension: it enters in its square."""

SAMPLES = {
    "taut": (np.array([-9.0, 6.0, 17.0]), 20.1, 1.4e6, np.array([0.0, 0.0, -30.0])),
    "sagging in wind": (np.array([20.0, 0.0, 30.0]), 36.5, 3e6, np.array([0.0, 220.0, -150.0])),
    "long and slack": (np.array([5.0, 2.0, 8.0]), 28.0, 1e6, np.array([0.0, 0.0, -60.0])),
    "soft and blown upward": (np.array([-4.0, 3.0, 1.0]), 4.0, 2e3, np.array([40.0, -25.0, 60.0])),
    "nearly upright": (np.array([1e-3, 0.0, 12.0]), 12.4, 1e6, np.array([0.0, 0.0, -18.0])),
    "end below start": (np.array([8.0, 0.0, -14.0]), 15.0, 1.4e6, np.array([0.0, 5.0, -22.0])),
    "hanging from two near points": (np.array([0.5, 0.0, 0.0]), 10.0, 1e5, np.array([0.0, 0.0, -30.0])),
}
"""Chord [m], unstressed length [m], EA [N], whole load [N]."""
DIFFERED = [name for name in SAMPLES if name != "nearly upright"]
"""The level pull of the nearly upright one is so small that no step serves for differences."""


def hang(name: str) -> tuple[np.ndarray, float, float, np.ndarray, cable.Hanging]:
    chord, length, EA, load = SAMPLES[name]
    return chord, length, EA, load, cable.hang(chord[None], np.array([length]), np.array([EA]), load[None])


def reached(at_a: np.ndarray, length: float, EA: float, load: np.ndarray, share: float = 1.0) -> np.ndarray:
    """Position at a share of the unstressed length by integrating x' = T (1/EA + 1/|T|), T = T_A + w s (T falls off by the load)."""

    def slope(s: float, _: np.ndarray) -> np.ndarray:
        tension = at_a - load * s / length
        return np.asarray(tension / EA + tension / np.linalg.norm(tension))

    done = solve_ivp(slope, (0.0, share * length), np.zeros(3), method="DOP853", rtol=1e-12, atol=1e-12 * length)
    return np.asarray(done.y[:, -1])


@pytest.mark.parametrize("name", SAMPLES)
def test_hanging_cable_reaches_its_end_when_integrated(name: str) -> None:
    chord, length, EA, load, h = hang(name)
    assert np.abs(reached(h.at_a[0], length, EA, load) - chord).max() < INTEGRATED * length


@pytest.mark.parametrize("name", SAMPLES)
def test_end_forces_carry_the_load(name: str) -> None:
    _, _, _, load, h = hang(name)
    greatest = np.abs(h.at_a).max()
    assert np.abs(h.at_a[0] - h.at_b[0] - load).max() < 1e-14 * greatest
    assert np.abs(0.5 * (h.at_a + h.at_b) - h.tension).max() < 1e-14 * greatest


@pytest.mark.parametrize("name", SAMPLES)
def test_curve_passes_through_the_integrated_points(name: str) -> None:
    chord, length, EA, load, h = hang(name)
    s = cable.shape(h.tension, load[None], np.array([length]), np.array([EA]))
    points = cable.curve(s, 5)[0]
    assert np.abs(points[0]).max() < CLOSED * length
    assert np.abs(points[-1] - chord).max() < INTEGRATED * length
    for k, share in ((1, 0.25), (2, 0.5), (3, 0.75)):
        assert np.abs(points[k] - reached(h.at_a[0], length, EA, load, share)).max() < INTEGRATED * length


@pytest.mark.parametrize("name", SAMPLES)
def test_load_at_the_centroid_balances_the_moments_of_the_ends(name: str) -> None:
    """About end A: chord x T_B + centroid x W = 0; and the centroid is the mean of the curve."""
    chord, length, EA, load, h = hang(name)
    s = cable.shape(h.tension, load[None], np.array([length]), np.array([EA]))
    centroid = cable.centroid(s)[0]
    moment = np.cross(chord, h.at_b[0]) + np.cross(centroid, load)
    assert np.abs(moment).max() < 1e-9 * length * np.abs(h.at_a).max()
    mean = np.trapezoid(cable.curve(s, 20001)[0], dx=1 / 20000, axis=0)
    assert np.abs(centroid - mean).max() < MICROMETRE * length


@pytest.mark.parametrize("name", SAMPLES)
def test_stiffness_is_the_difference_of_the_end_forces(name: str) -> None:
    """dT/dchord by solving anew; the flexibility is its inverse, symmetric and positive definite."""
    chord, length, EA, load, h = hang(name)
    scale = np.linalg.norm(chord) * 1e-5
    columns = []
    for k in range(3):
        d = np.zeros(3)
        d[k] = scale
        up, down = (cable.hang((chord + sign * d)[None], np.array([length]), np.array([EA]), load[None]) for sign in (1, -1))
        columns.append((up.at_b[0] - down.at_b[0]) / (2 * scale))
    numeric = np.stack(columns, axis=1)
    k = h.stiffness[0]
    assert np.abs(k - k.T).max() < 1e-12 * np.abs(k).max()
    assert np.linalg.eigvalsh(k).min() > 0
    if name in DIFFERED:
        assert np.abs(numeric - k).max() < 1e-4 * np.abs(k).max()


@pytest.mark.parametrize("name", DIFFERED)
def test_flexibility_is_the_difference_of_the_chord(name: str) -> None:
    """F = dr/dT with r(T) taken from the closed form's own residual: differences over 1e-6 of the tension."""
    _, length, EA, load, h = hang(name)
    step = 1e-6 * np.linalg.norm(h.tension)
    flexibility = np.linalg.inv(h.stiffness[0])
    for k in range(3):
        d = np.zeros(3)
        d[k] = step
        ends = [reached(h.at_a[0] + sign * d, length, EA, load) for sign in (1, -1)]
        numeric = (ends[0] - ends[1]) / (2 * step)
        noise = INTEGRATED * length / step
        assert np.abs(numeric - flexibility[:, k]).max() < 1e-4 * np.abs(flexibility).max() + noise


@pytest.mark.parametrize("name", SAMPLES)
def test_length_rate_is_the_difference_of_the_chord_by_length(name: str) -> None:
    """At the same mid tension and load per length: r by integration with a little more and a little less cable."""
    _, length, EA, load, h = hang(name)
    step = 1e-4 * length
    rate = cable.length_rate(h.at_a, h.at_b, np.array([EA]))[0]
    ends = []
    for more in (step, -step):
        whole = load * (length + more) / length
        ends.append(reached(h.tension[0] + whole / 2, length + more, EA, whole))
    numeric = (ends[0] - ends[1]) / (2 * step)
    assert np.abs(numeric - rate).max() < 1e-5 * max(1.0, np.abs(rate).max())


@pytest.mark.parametrize("weight", [1e-2, 1e-4, 1e-6])
def test_catenary_becomes_a_straight_tie_as_the_weight_goes(weight: float) -> None:
    """T -> EA (c/L0 - 1); the rest is (w L0)^2 / (24 T^2) of it, by the cubic of a shallow cable."""
    chord, length, EA = np.array([[3.0, -4.0, 12.0]]), np.array([12.98]), np.array([1e6])
    straight = cable.pull_straight(chord, length, EA)
    tension = np.linalg.norm(straight.tension)
    load = weight * tension * np.array([[0.0, 0.0, -1.0]])
    h = cable.hang(chord, length, EA, load)
    expected = weight**2
    assert np.abs(h.tension - straight.tension).max() < (expected + 1e-11) * tension * EA[0] / tension
    assert np.abs(h.stiffness - straight.stiffness).max() < (expected * EA[0] / tension + 1e-9) * np.abs(straight.stiffness).max()


def test_sagging_correction_is_that_of_the_shallow_cable() -> None:
    """T^3 - EA (c/L0 - 1) T^2 - EA (w_per L0)^2/24 = 0 (Irvine, Cable Structures, 1981, section 2.3): good to (wL/T)^2 / 10."""
    chord, length, EA = np.array([[20.0, 0.0, 0.0]]), np.array([20.01]), np.array([1e6])
    load = np.array([[0.0, 0.0, -40.0]])
    h = cable.hang(chord, length, EA, load)
    roots = np.roots([1.0, -EA[0] * (20.0 / 20.01 - 1), 0.0, -EA[0] * 40.0**2 / 24])
    shallow = max(r.real for r in roots if abs(r.imag) < 1e-9)
    assert h.tension[0, 0] == pytest.approx(shallow, rel=(40.0 / shallow) ** 2 / 10 + 1e-3)


def test_warm_start_gives_the_same_answer(rng: np.random.Generator) -> None:
    chord, length, EA, load = (np.array([SAMPLES[n][k] for n in SAMPLES]) for k in range(4))
    cold = cable.hang(chord, length, EA, load)
    for off in (1e-6, 0.1, 5.0):
        warm = cold.tension * (1 + off * rng.normal(size=cold.tension.shape))
        again = cable.hang(chord, length, EA, load, warm)
        gap = np.linalg.norm(again.tension - cold.tension, axis=1) / np.linalg.norm(cold.tension, axis=1)
        assert gap.max() < 1e-9


def test_a_cable_in_line_with_its_load_hangs_down_as_a_loop() -> None:
    """12 m of cable between points 10 m above each other: the lower end carries 1 m of weight downward, the upper the other 11 m."""
    h = cable.hang(np.array([[0.0, 0.0, 10.0]]), np.array([12.0]), np.array([1e9]), np.array([[0.0, 0.0, -12.0]]))
    assert h.at_a[0] == pytest.approx(np.array([0.0, 0.0, -1.0]), abs=STRETCHED)
    assert h.at_b[0] == pytest.approx(np.array([0.0, 0.0, 11.0]), abs=STRETCHED)


@pytest.mark.parametrize("aside", [1e-2, 1e-4, 1e-6, 1e-8, 1e-10])
def test_a_loop_opens_by_the_catenary_however_narrow_it_is(aside: float) -> None:
    """That cable, inextensible, its ends `aside` apart: with H level and V up at the ends, aside = H/w (asinh V_A/H + asinh V_B/H)

    The sum of |T_A||T_B| and T_A.T_B, taken as it is written, lost this below a hundred-thousandth of the chord.
    """
    w, EA = 1.0, 1e12
    h = cable.hang(np.array([[aside, 0.0, 10.0]]), np.array([12.0]), np.array([EA]), np.array([[0.0, 0.0, -12.0 * w]]))
    level, low, high = h.tension[0, 0], -h.at_a[0, 2], h.at_b[0, 2]
    opened = level / w * (np.arcsinh(low / level) + np.arcsinh(high / level))
    assert opened == pytest.approx(aside, rel=NARROW, abs=0.0)


@limits(max_examples=60)
@given(
    st.tuples(*[st.floats(-30, 30)] * 3).filter(lambda v: np.linalg.norm(v) > 0.5),
    st.floats(0.9, 3.0),
    st.floats(4, 9),
    st.tuples(*[st.floats(-1, 1)] * 3).filter(lambda v: np.linalg.norm(v) > 0.05),
    st.floats(-2, 2),
)
def test_any_cable_finds_its_chord(chord: tuple[float, ...], ratio: float, stiffness: float, load: tuple[float, ...], size: float) -> None:
    """From taut to three times its chord, EA from 1e4 to 1e9 N, load per length from 0.01 to 100 N/m in any direction."""
    r = np.array([chord])
    c = np.linalg.norm(r)
    length, EA = np.array([ratio * c]), np.array([10.0**stiffness])
    w = np.array([load]) * 10.0**size * length[0]
    h = cable.hang(r, length, EA, w)
    s = cable.shape(h.tension, w, length, EA)
    assert np.abs(cable.curve(s, 3)[0, -1] - r[0]).max() < MICROMETRE * (length[0] + c)


@pytest.mark.parametrize("off", [0.1, 1e-3, 1e-5, 1e-6, 1e-7, 1e-8, 1e-9, 1e-12, 0.0])
@pytest.mark.parametrize("ratio", [1.001, 1.1, 1.5])
def test_slack_cables_beside_and_below_each_other_are_found_under_their_weight(off: float, ratio: float) -> None:
    """The load vertical, as in still air, and the chord as near upright as may be, either end up."""
    chord = np.array([[off, 0.0, 1.0], [off, 0.0, -1.0]])
    length, EA = np.full(2, ratio * np.hypot(off, 1.0)), np.full(2, 1e6)
    w = np.array([0.0, 0.0, -3.4]) * length[:, None]
    s = cable.shape(cable.hang(chord, length, EA, w).tension, w, length, EA)
    assert np.abs(cable.curve(s, 3)[:, -1] - chord).max() < MICROMETRE * 2.5


# ---------------------------------------------------------------- straight


def test_straight_cable_pulls_in_proportion_to_its_stretch() -> None:
    chord, EA = np.array([[3.0, 0.0, 4.0]] * 3), np.full(3, 1e6)
    h = cable.pull_straight(chord, np.array([4.99, 5.0, 5.2]), EA)
    assert h.tension[0] == pytest.approx(1e6 * (5 / 4.99 - 1) * np.array([0.6, 0.0, 0.8]), rel=1e-12)
    assert np.abs(h.tension[1:]).max() == 0.0
    assert h.stiffness[1] == pytest.approx(1e6 / 5.0 * np.outer([0.6, 0.0, 0.8], [0.6, 0.0, 0.8]), rel=1e-12, abs=1e-9)
    assert np.abs(h.stiffness[2]).max() == 0.0


def test_straight_cable_is_slack_by_the_contracts_rule() -> None:
    """Unstressed length above chord (1 + 1e-9) is slack and resists nothing; one as long as its chord, within that, resists at once."""
    chord, EA = np.array([[0.0, 0.0, 5.0]] * 2), np.full(2, 1e6)
    h = cable.pull_straight(chord, 5.0 * (1 + np.array([2e-9, 5e-10])), EA)
    assert np.abs(h.tension).max() == 0.0
    assert h.stiffness[:, 2, 2] == pytest.approx([0.0, 1e6 / 5.0], rel=1e-8)


def test_straight_stiffness_is_the_difference_of_the_pull() -> None:
    chord, length, EA = np.array([[3.0, 1.0, 4.0]]), np.array([5.0]), np.array([1e6])
    k = cable.pull_straight(chord, length, EA).stiffness[0]
    for axis in range(3):
        d = np.zeros((1, 3))
        d[0, axis] = 1e-6
        up, down = (cable.pull_straight(chord + sign * d, length, EA).tension[0] for sign in (1, -1))
        assert (up - down) / 2e-6 == pytest.approx(k[:, axis], abs=DIFFERENCES * np.abs(k).max())
