"""Initial tensions: met, refused, led, made plumb or tight; and the sensitivities they are found with."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
import pytest
import scenarios_made as made
from hypothesis import given
from hypothesis import strategies as st

from guys import cable, lengths, solver, stability, structure
from guys import setting as initial
from guys.errors import ScenarioError

MET = 1e-9
"""Relative: ten times what the search asks for."""
OFF_PLUMB = 1e-6
"""[m] a micrometre at the head."""
LEVEL_BALANCE = 1e-3
"""Net pull of a level over the greatest horizontal pull of its guys: what a head a micrometre off leaves in the guys' stiffness."""
BOUNDED = 1e-11
"""Rounding of a least squares with numbers of about one, for each unit of its conditioning."""
DIFFERENCES = 1e-5
"""Relative to the greatest: second differences of a catenary's tension over 1e-6 of its length."""


def uneven(**tables: object) -> made.Document:
    """The mast with one anchor nearer and higher, so that equal tensions do not balance."""
    document = made.mast(0.0, **tables)
    document["anchor"][1] |= {"radius": 9.0, "level": 1.0}
    return document


def lugged() -> made.Document:
    document = made.mast()
    for k, guy in enumerate(document["cable"]):
        guy["from"]["arm"] = 0.08 + 0.01 * k
    return document


def giving() -> made.Document:
    document = made.mast()
    document["anchor"][0]["give"] = 3e5
    return document


def mixed() -> made.Document:
    """One guy of each level by its length, the others by tension."""
    document = uneven()
    for k, length in ((0, 14.2), (3, 20.23)):
        del document["cable"][k]["tension"]
        document["cable"][k]["length"] = length
    return document


GIVEN: dict[str, Callable[[], made.Document]] = {
    "mast": made.mast,
    "straight": lambda: made.mast(straight=True),
    "four sides": lambda: made.mast(sides=4),
    "unbalanced": uneven,
    "unbalanced straight": lambda: uneven(straight=True),
    "lugs": lugged,
    "giving anchor": giving,
    "some by length": mixed,
    "fixed base": lambda: made.mast(base="fixed"),
    "barely hanging": lambda: made.mast(tension=30.0),
    "boom": made.boom,
    "rigid boom": lambda: made.boom(rigid=(True, True)),
    "pylon": made.pylon,
}


@pytest.mark.parametrize("name", GIVEN)
def test_tensions_are_met_at_the_to_ends(name: str) -> None:
    document = GIVEN[name]()
    found = made.setting(document)
    got = np.linalg.norm(found.problem.evaluate(found.state).hanging.at_a[0], axis=-1)
    asked = [guy.get("tension", np.nan) for guy in document["cable"]]
    given = ~np.isnan(asked)
    assert found.judged.code.tolist() == [stability.STABLE]
    assert found.judged.error.max() < solver.ENOUGH
    assert got[given] == pytest.approx(np.array(asked)[given], rel=MET)
    lengths = np.array([guy.get("length", np.nan) for guy in document["cable"]])
    assert found.length[~given] == pytest.approx(lengths[~given], rel=1e-12)


def test_lengths_found_give_the_tensions_back() -> None:
    """The same mast by the lengths found is the same structure."""
    document = uneven()
    found = made.setting(document)
    for guy, length in zip(document["cable"], found.length, strict=True):
        del guy["tension"]
        guy["length"] = float(length)
    again = made.setting(document)
    got = np.linalg.norm(again.problem.evaluate(again.state).hanging.at_a[0], axis=-1)
    assert got == pytest.approx([1000.0] * 3 + [1500.0] * 3, rel=1e-8)
    assert np.abs(again.state.u - found.state.u).max() < 1e-7


def test_targets_that_do_not_balance_pull_the_head_over_and_say_so() -> None:
    s = made.listed(uneven())
    assert np.degrees(s.head_lean[0, 0]) > 0.5
    assert any("leans 1/" in w and "in still air" in w and "plumb" in w for w in s.warnings)
    assert not any("in still air" in w for w in made.listed(made.mast(0.0)).warnings)


def test_targets_that_no_state_meets_are_refused() -> None:
    """Two guys pull west with 8 kN together against one of 1 kN to the east: nothing but lying down would balance them."""
    document = made.stayed(made.spar(rigid=True), 90.0, 250.0, 290.0, tension=1000.0)
    for guy in document["cable"][1:]:
        guy["tension"] = 6000.0
    with pytest.raises(ScenarioError, match="do not balance"):
        made.setting(document)


# ---------------------------------------------------------------- plumb


def level_pulls(document: made.Document) -> tuple[np.ndarray, list[np.ndarray]]:
    """Displacement square to the axis at the guyed nodes, and horizontal pulls of each level on the mast."""
    found = made.setting(document)
    s = found.problem.structure
    pulls = -found.problem.evaluate(found.state).hanging.at_b[0, :, :2]
    nodes = np.unique(s.cables.b.node)
    return found.state.u[0, nodes, :2], [pulls[s.cables.b.node == n] for n in nodes]


def test_plumb_finds_tensions_that_leave_the_mast_upright() -> None:
    away, levels = level_pulls(uneven(setting={"plumb": True}))
    assert np.abs(away).max() < OFF_PLUMB
    for pulls in levels:
        assert np.abs(pulls.sum(axis=0)).max() < LEVEL_BALANCE * np.linalg.norm(pulls, axis=1).max()


def test_plumb_tensions_are_the_nearest_to_their_targets() -> None:
    """With three guys a level one freedom is left, the size of all three: at the optimum sum (m - 1) dm = 0 along it."""
    document = uneven(setting={"plumb": True})
    found = made.setting(document)
    got = np.linalg.norm(found.problem.evaluate(found.state).hanging.at_a[0], axis=-1)
    for level, target in ((slice(0, 3), 1000.0), (slice(3, 6), 1500.0)):
        measure = got[level] / target
        assert measure.min() < 0.99 < 1.01 < measure.max()
        assert measure @ (measure - 1) == pytest.approx(0.0, abs=0.02)


def test_plumb_leaves_balanced_tensions_alone() -> None:
    found, plain = made.setting(made.mast(setting={"plumb": True})), made.setting(made.mast())
    assert found.length == pytest.approx(plain.length, rel=1e-9)


@pytest.mark.parametrize("rigid", [(False, False), (True, True)])
def test_plumb_boom_and_mast_stand_as_drawn(rigid: tuple[bool, bool]) -> None:
    """Bending spars sag between and beside their cables, which tensions cannot undo: a twentieth of a degree is left of that."""
    s = made.listed(made.boom(rigid=rigid, setting={"plumb": True}))
    assert s.state[0] == "stable"
    assert np.degrees(s.head_lean[0]).max() < (1e-6 if rigid[0] else 0.05)
    targets = np.array([guy["tension"] for guy in made.boom()["cable"]])
    assert (s.cables.tension_anchor[0] / targets).min() > initial.LEAST_SHARE * (1 - 1e-6)


# ---------------------------------------------------------------- tight


def tight(straight: bool) -> made.Document:
    """On a fixed base: on a pinned one guys as loose as that do not hold the mast upright."""
    document = made.mast(straight=straight, base="fixed")
    for guy in document["cable"]:
        del guy["tension"]
        guy["tight"] = True
    return document


def test_tight_catenaries_carry_their_own_weight_at_mid_length() -> None:
    found = made.setting(tight(straight=False))
    middle = np.linalg.norm(found.problem.evaluate(found.state).hanging.tension[0], axis=-1)
    assert middle == pytest.approx(0.15 * 9.80665 * found.length, rel=MET)
    assert not made.listed(tight(straight=False)).cables.slack[0].any()


def test_tight_straight_cables_are_as_long_as_their_chords_under_dead_load() -> None:
    """The mast's own shortening taken in: shorter than the drawn chords by sin(angle) of some tenths of a millimetre."""
    found = made.setting(tight(straight=True))
    _, _, chord = found.problem.chords(found.state)
    assert found.length == pytest.approx(np.linalg.norm(chord[0], axis=-1), rel=MET)
    drawn = np.hypot(11.0, np.repeat([9.0, 17.0], 3))
    assert np.all(found.length < drawn)
    assert np.abs(found.length - drawn).max() < 1e-3


# ---------------------------------------------------------------- very slack


def hung(tension: float) -> made.Document:
    """Three guys on a fixed rigid mast: the geometry does not move."""
    spar = made.spar(base="fixed", rigid=True, section=[made.weightless(10.0)])
    return made.stayed(spar, 0.0, 120.0, 240.0, radius=10.0, tension=tension)


LENGTHS = np.linspace(10 * np.sqrt(2) * 0.999, 30.0, 4000)


def anchor_end(length: np.ndarray) -> np.ndarray:
    """Tension at the anchor of one of those guys against its unstressed length."""
    load = -0.15 * 9.80665 * length[:, None] * np.array([0.0, 0.0, 1.0])
    h = cable.hang(np.tile([10.0, 0.0, 10.0], (len(length), 1)), length, np.full(len(length), 1.4e6), load)
    return np.asarray(np.linalg.norm(h.at_a, axis=1))


def test_of_two_lengths_that_give_a_tension_the_tauter_is_taken() -> None:
    curve = anchor_end(LENGTHS)
    lowest = int(np.argmin(curve))
    target = 1.1 * curve[lowest]
    assert curve[-1] > target
    found = made.setting(hung(float(target)))
    assert found.length[0] < LENGTHS[lowest]
    assert anchor_end(found.length) == pytest.approx(target, rel=MET)


def test_a_tension_below_the_least_is_refused_with_the_least() -> None:
    least = float(anchor_end(LENGTHS).min())
    with pytest.raises(ScenarioError, match=r'"guy A".*cannot be met.*at least') as refused:
        made.setting(hung(0.9 * least))
    assert len(refused.value.faults) == 3
    assert f"{least:.3g}" in str(refused.value)
    assert refused.value.exit_status == 2
    made.setting(hung(1.01 * least))


# ---------------------------------------------------------------- sensitivities


def slack() -> made.Document:
    """Guys so loose, on a fixed base, that their own weight tells as much as their stretch."""
    return made.mast(base="fixed", tension=15.0)


def heavy() -> made.Document:
    """Soft guys of 5 kg/m: the weight that comes with a longer cable moves the mast."""
    document = made.mast(rope={"rope": made.rope(mass=5.0, stiffness=3e4)})
    document["anchor"][0]["give"] = 3e3
    return document


@pytest.mark.parametrize(
    "document",
    [uneven(), uneven(straight=True), tight(False), tight(True), lugged(), giving(), made.boom("pinned"), slack(), heavy()],
    ids=["catenaries", "straight", "tight", "tight straight", "lugs", "giving", "boom", "slack", "heavy"],
)
def test_rates_are_the_differences_of_solved_settings(document: made.Document) -> None:
    """dm / d ln L0 with the nodes answering: lengths changed by 1e-6 and the structure solved again.

    Straight cables that are just tight have a kink there, so their lengths are first made a little shorter.
    """
    found = made.setting(document)
    asked = lengths.asked_of(found.problem.structure.scenario)
    if "tight" in document["cable"][0]:
        shorter = lengths.changed(found.problem, np.full((1, len(asked.index)), -1e-3), asked)
        start = solver.solve(shorter, found.state)
        problem, state = shorter, start.state
    else:
        problem, state = found.problem, found.state
    rates = lengths.rates(problem, state, asked)

    def measured(k: int, change: float) -> np.ndarray:
        step = np.zeros((1, len(asked.index)))
        step[0, k] = change
        other = lengths.changed(problem, step, asked)
        out = solver.solve(other, state)
        return lengths.measures(other, out.state, other.evaluate(out.state), asked)[0]

    for k in range(len(asked.index)):
        numeric = (measured(k, 1e-6) - measured(k, -1e-6)) / 2e-6
        assert np.abs(numeric - rates.rate[0, :, k]).max() < 10 * DIFFERENCES * np.abs(rates.rate).max()


def test_setting_is_found_once_and_holds_for_every_case() -> None:
    """Initial tension is never factored: dead = 1.5 and frost change tensions, not the lengths at the setting temperature."""
    document = {**made.mast(), "case": [{"name": "heavy", "dead": 1.5, "wind": 0.0}, {"name": "frost", "wind": 0.0, "temperature": -15.0}]}
    s = made.listed(document)
    found = made.setting(made.mast())
    assert s.cables.unstressed_length[0] == pytest.approx(found.length, rel=1e-12)
    assert s.cables.unstressed_length[1] == pytest.approx(found.length, rel=1e-12)
    assert s.cables.unstressed_length[2] == pytest.approx(found.length, rel=1e-12)
    assert s.cables.tension_anchor[0] == pytest.approx([1000.0] * 3 + [1500.0] * 3, rel=MET)
    assert np.all(s.cables.tension_anchor[2] > s.cables.tension_anchor[0])


def test_first_lengths_start_on_the_drawn_geometry() -> None:
    """A fixed rigid mast needs no search: the first lengths are the answer to the last digits of the bracket."""
    s = structure.build(made.scenario(hung(200.0)))
    found = initial.find(s)
    assert anchor_end(found.length) == pytest.approx(200.0, rel=MET)


def test_a_mast_that_the_search_turns_upside_down_falls_and_does_not_crash() -> None:
    """A pinned mast pulled over by its one guy: at just 180° no spin about the drawn axis undoes one of the tilt."""
    section = made.weightless(10.0) | {"mass": 20.0}
    document = made.stayed(made.spar(length=10.0, rigid=True, section=[section]), 0.0, tension=300.0, straight=True)
    assert not made.setting(document).stands


@given(st.integers(0, 2**32 - 1))
def test_bounded_least_squares_keeps_the_conditions_of_a_least(seed: int) -> None:
    """Karush, Kuhn and Tucker: bounds kept, no push from one that does not bind, none pulls, and what is left over is their push alone."""
    rng = np.random.default_rng(seed)
    a, wanted, g = rng.normal(size=(6, 4)), rng.normal(size=6), rng.normal(size=(4, 4))
    least = g @ rng.normal(size=4) - rng.uniform(0.0, 0.5, 4)
    x = initial._bounded(a, wanted, g, least)
    spare = g @ x - least
    push = np.linalg.solve(g.T, a.T @ (a @ x - wanted))
    size = np.linalg.cond(g) * np.linalg.cond(a) ** 2 * BOUNDED
    assert spare.min() > -size
    assert push.min() > -size
    assert np.abs(spare * push).max() < size * (1.0 + np.abs(push).max() + np.abs(spare).max())
