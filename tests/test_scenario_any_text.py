"""Whatever stands in a file, it is read or refused with faults: never another exception."""

from __future__ import annotations

from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from toml_text import BOOM, MAST, Document, changed, dumps

from guys import parse_scenario
from guys.errors import ScenarioError
from guys.scenario import Scenario

LONGEST_LINE = 700
"""Characters; a fault is one line that a terminal can bear, whatever stands in the file."""

QUANTITIES = [
    "1 m",
    "0 m",
    "-3 ft",
    "12 ft 6 in",
    "1 kN",
    "5 deg",
    "2 kg",
    "3 m/s",
    "7 kN m2",
    "10 degC",
    "1e300 m",
    "every 30 deg",
    "uniform",
]
WORDS = ["mast", "boom", "N", "wire", "steel", "name", "at", "spar", "setting", "topping", "", "\x00", "é", "'\"\\", "a.b", "<heel>"]
scalars = st.one_of(
    st.sampled_from(QUANTITIES),
    st.sampled_from(WORDS),
    st.text(max_size=8),
    st.booleans(),
    st.integers(-(2**70), 2**70),
    st.floats(),
)
keys = st.one_of(
    st.sampled_from(WORDS),
    st.sampled_from(["from", "to", "foot", "section", "tube", "lattice", "lat", "profile", "asce7", "length"]),
    st.text(max_size=4),
)
values = st.recursive(scalars, lambda inner: st.one_of(st.lists(inner, max_size=3), st.dictionaries(keys, inner, max_size=3)), max_leaves=6)


def paths(node: Any, above: tuple[str | int, ...] = ()) -> list[tuple[str | int, ...]]:
    """Every key path of a document."""
    inside = node.items() if isinstance(node, dict) else enumerate(node) if isinstance(node, list) else ()
    return [found for key, value in inside for found in ((*above, key), *paths(value, (*above, key)))]


def read(text: str) -> Scenario | None:
    """The scenario, or None where it was refused in good order."""
    try:
        return parse_scenario(text)
    except ScenarioError as error:
        faults = error.faults
    assert faults
    for fault in faults:
        assert fault.message
        assert "\n" not in str(fault)
        assert len(str(fault)) < LONGEST_LINE
        assert fault.line is None or 1 <= fault.line <= text.count("\n") + 1
    return None


@settings(max_examples=300)
@given(st.text(max_size=300))
def test_any_text(text: str) -> None:
    read(text)


@settings(max_examples=300)
@given(st.dictionaries(st.one_of(st.sampled_from(sorted(MAST)), keys), values, max_size=6))
def test_any_document(document: Document) -> None:
    read(dumps(document))


@settings(max_examples=600)
@given(st.data(), st.sampled_from([MAST, BOOM]), st.integers(1, 3))
def test_a_good_file_with_anything_put_in_its_place(data: st.DataObject, document: Document, count: int) -> None:
    for _ in range(count):
        place = data.draw(st.sampled_from(paths(document)))
        parent = place[:-1]
        new = data.draw(st.one_of(values, st.sampled_from([document[key] for key in document])))
        spot = data.draw(st.one_of(st.just(place[-1]), keys)) if isinstance(place[-1], str) else place[-1]
        document = changed(document, ((*parent, spot), new))
    read(dumps(document))


@settings(max_examples=100)
@given(st.data(), st.sampled_from([MAST, BOOM]))
def test_taking_anything_away(data: st.DataObject, document: Document) -> None:
    read(dumps(changed(document, (data.draw(st.sampled_from(paths(document))), ...))))


def test_text_that_utf8_cannot_hold() -> None:
    with pytest.raises(ScenarioError, match="not text that UTF-8 can hold"):
        parse_scenario('title = "\ud800"')
