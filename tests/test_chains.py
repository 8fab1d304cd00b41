"""What cables hold: the weakest of rope and ends by hand, the rule of clips, initial tension, and what is not judged."""

from __future__ import annotations

import math

import pytest
import scenarios_made as made
from hypothesis import given
from hypothesis import strategies as st

from guys.catalogue.parts import parts as catalogue
from guys.checks import chains
from guys.constants import INCH
from guys.errors import ScenarioError
from guys.results import Finding, Solution
from guys.scenario import parse_scenario
from guys.scenario.parts import Part, chain, held, weakest

PARTS = {"clips": {"efficiency": 0.8}, "buckle": {"strength": 16e3}}


def mast(*ends: str, rope: made.Document | None = None, **tables: object) -> made.Document:
    document = made.mast(part=PARTS, rope={"rope": made.rope() if rope is None else rope}, **tables)
    for cable in document["cable"]:
        cable["ends"] = list(ends)
    return document


def finding(s: Solution, thing: str) -> Finding:
    return next(f for f in s.findings if f.thing == thing)


@pytest.mark.parametrize(
    ("ends", "holds", "governs"),
    [
        ((), 23e3, ""),
        (("clips",), 18.4e3, "clips (0.8 of the rope)"),
        (("clips", "buckle"), 16e3, "buckle"),
        (("buckle", "clips"), 16e3, "buckle"),
    ],
)
def test_the_weakest_link_governs(ends: tuple[str, ...], holds: float, governs: str) -> None:
    s = made.solved(mast(*ends))
    f = finding(s, "cable 17 m A")
    assert f.capacity == pytest.approx(holds)
    assert (f.governs, f.verdict) == (governs, "within")
    worst = s.worst_cables[3]
    assert (worst.strength, worst.weakest) == (f.capacity, governs)
    assert worst.factor == f.factor == pytest.approx(holds / f.demand)
    assert f.demand == pytest.approx(finding(made.solved(mast()), "cable 17 m A").demand)


def test_a_part_stronger_than_the_rope_leaves_the_rope() -> None:
    document = mast("buckle")
    document["part"] = {"buckle": {"strength": 40e3}}
    assert finding(made.solved(document), "cable 17 m A").governs == "the rope"


def test_parts_of_the_catalogue_bring_their_source() -> None:
    f = finding(made.solved(mast("swaged-ferrule")), "cable 17 m A")
    assert f.capacity == pytest.approx(0.9 * 23e3)
    assert "from memory" in f.source
    assert finding(made.solved(mast("clips")), "cable 17 m A").source == "given"


def test_a_rope_without_strength_is_never_within_whatever_its_parts_hold() -> None:
    rope = made.rope()
    del rope["strength"]
    s = made.solved(mast("clips", "buckle", rope=rope))
    whole, part = finding(s, "cable 17 m A"), finding(s, "cable 17 m A, buckle")
    assert (whole.verdict, part.verdict, part.capacity) == ("not judged", "within", 16e3)
    assert "so clips cannot be judged; buckle is judged by itself" in whole.why
    assert math.isnan(s.worst_cables[3].factor)
    assert math.isnan(s.worst_cables[3].initial)


@given(st.floats(1e3, 1e6), st.lists(st.floats(0.01, 1.0), min_size=1, max_size=4), st.floats(1e2, 1e6))
def test_no_part_makes_a_chain_stronger(rope: float, shares: list[float], own: float) -> None:
    parts = {str(k): Part(efficiency=share) for k, share in enumerate(shares)} | {"own": Part(strength=own)}
    ends = list(parts)
    assert held(rope, ends, parts) == pytest.approx(min(rope, rope * min(shares), own))
    for n in range(len(ends)):
        assert (held(rope, ends[: n + 1], parts) or 0.0) <= (held(rope, ends[:n], parts) or 0.0)
    least = weakest(chain(rope, ends, parts))
    assert least is not None
    assert least.holds == held(rope, ends, parts)
    assert held(None, ends, parts) is None


@pytest.mark.parametrize(
    ("inches", "number", "spacing"), [(0.25, 2, 2.5), (0.5, 3, 4.0), (0.625, 3, 4.75), (0.75, 4, 5.5), (1.0, 4, 7.0), (2 / 3, 3, 5.0)]
)
def test_clips_by_the_published_rule(inches: float, number: int, spacing: float) -> None:
    """TM 5-5420-278-10, p. 0035 00-16 (read): 3 D + 1, rounded up; 6 D + 1 in."""
    assert chains.clips(inches * float(INCH)) == (number, pytest.approx(spacing * float(INCH)))


def test_clips_are_counted_in_the_notes_once_for_a_rope() -> None:
    s = made.solved(mast("thimble-clips"))
    assert [note for note in s.notes if "clips" in note] == [
        "rope rope: 2 clips at each end, 61 mm (2.4 in) apart; 3 D + 1 clips, 6 D + 1 in apart (TM 5-5420-278-10)"
    ]
    assert not [note for note in made.solved(mast("swaged-ferrule")).notes if "clips" in note]


def test_initial_tension_is_a_share_of_the_rope_not_of_the_weakest_link() -> None:
    """1.5 kN and 1 kN of 23 kN, met in the setting."""
    s = made.solved(mast("clips"))
    assert [c.initial for c in s.worst_cables] == pytest.approx([1000 / 23e3] * 3 + [1500 / 23e3] * 3, rel=1e-6)


def test_catalogue_has_what_the_rule_of_clips_looks_for() -> None:
    assert [name for name in catalogue() if chains.CLIPS in name] == ["thimble-clips"]


# ---------------------------------------------------------------- faults


@pytest.mark.parametrize(
    ("part", "message"),
    [
        ({"efficiency": 1.2}, "1.2 is above 1"),
        ({"efficiency": 0.8, "strength": 1e3}, "has strength and efficiency; give one"),
        ({}, "has neither; give one"),
        ({"efficiency": 0.0}, "0"),
        ({"strength": -5.0}, "is not more than zero"),
    ],
)
def test_faults_of_a_part(part: made.Document, message: str) -> None:
    document = mast("own")
    document["part"] = {"own": part}
    with pytest.raises(ScenarioError) as caught:
        parse_scenario(made.text(document))
    assert [f.key.startswith("part.own") for f in caught.value.faults] == [True]
    assert message in caught.value.faults[0].message


def test_unknown_ends_name_the_nearest() -> None:
    with pytest.raises(ScenarioError) as caught:
        parse_scenario(made.text(mast("thimble-clip")))
    assert {f.message for f in caught.value.faults} == {'no part is named "thimble-clip"; did you mean "thimble-clips"?'}
    assert caught.value.faults[0].key == "cable[0].ends[0]"


def test_a_part_nothing_uses_is_warned_about() -> None:
    warnings = made.scenario(mast("clips")).warnings
    assert [w for w in warnings if "no cable has it in its ends" in w] == ['part "buckle": no cable has it in its ends']
