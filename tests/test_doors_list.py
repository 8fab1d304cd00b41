"""`guys list`: every kind prints with its sources, filtered, in either system and as JSON; what is planned is refused by name."""

from __future__ import annotations

import json
import tomllib
from typing import get_args

import pytest
from toml_text import MAST, dumps

from guys import cli, parse_scenario
from guys.catalogue.known import MARKS
from guys.catalogue.listing import KINDS
from guys.scenario.holding import Kind


def run(capsys: pytest.CaptureFixture[str], *arguments: str) -> tuple[int, str]:
    status = cli.run(["list", *arguments])
    return status, capsys.readouterr().out


@pytest.mark.parametrize("kind", KINDS)
def test_each_row_has_as_many_cells_as_columns_and_says_whence(kind: str) -> None:
    found = KINDS[kind]()
    assert found.rows
    assert all(len(row) == len(found.columns) for row in found.rows)
    assert len(found.rows) == len(found.known) == len(found.source)
    assert all(known.split(";")[0] in (*MARKS, "") for known in found.known)
    assert all(found.source)
    assert len({row[0] for row in found.rows}) == len(found.rows), "names are unique"


@pytest.mark.parametrize("kind", KINDS)
@pytest.mark.parametrize("units", ["SI", "US", "both"])
def test_table(kind: str, units: str, capsys: pytest.CaptureFixture[str]) -> None:
    status, text = run(capsys, kind, "--units", units)
    assert status == 0
    assert all(str(row[0]) in text for row in KINDS[kind]().rows)
    assert "from memory" in text
    assert "Sources" in text


@pytest.mark.parametrize("kind", KINDS)
def test_json_in_si(kind: str, capsys: pytest.CaptureFixture[str]) -> None:
    status, text = run(capsys, kind, "--json")
    found = json.loads(text)
    assert (status, found["format"], found["kind"]) == (0, "guys-list/1", kind)
    assert [entry["name"] for entry in found["entries"]] == [row[0] for row in KINDS[kind]().rows]
    assert all({"known", "source"} <= set(entry) for entry in found["entries"])


def test_a_line_by_hand(capsys: pytest.CaptureFixture[str]) -> None:
    """7x7 of 6 mm: W 0.384, C 0.432, K 0.388 by 36 mm2: 0.138 kg/m, 15.55 mm2 at 100 GPa, 24.7 kN of grade 1770 (handbook C2)."""
    _, text = run(capsys, "ropes", "steel-7x7-6mm")
    line = next(line for line in text.splitlines() if "steel-7x7-6mm " in line)
    assert line.split()[-12:-5] == ["6", "0.1382", "24.72", "1400", "1555", "1711", "1.17e-05"]
    assert "read; stiffness from memory" in line
    _, text = run(capsys, "ropes", "strand-1x7-ehs-1/4in", "--units", "US")
    assert " 6650 " in next(line for line in text.splitlines() if "strand-1x7" in line)


def test_words_narrow(capsys: pytest.CaptureFixture[str]) -> None:
    _, text = run(capsys, "ropes", "AIRCRAFT", "stainless")
    names = [line.split()[0] for line in text.splitlines() if line.startswith("  aircraft")]
    assert len(names) == 8
    assert all("stainless" in name for name in names)
    status, text = run(capsys, "parts", "no-such-part")
    assert (status, text) == (0, "Parts in a cable's load path: nothing holds no-such-part\n")


def test_every_kind_of_holdfast_is_listed_with_the_keys_it_needs() -> None:
    found = {row[0]: row for row in KINDS["holdfasts"]().rows}
    assert set(found) == set(get_args(Kind))
    assert found["block"][2] == "mass, friction"
    assert "soil" in str(found["deadman"][2])
    assert "yield" in str(found["rock"][3])


def test_every_profile_listed_is_one_the_reader_takes() -> None:
    for row in KINDS["profiles"]().rows:
        profile = tomllib.loads(f"profile = {row[0]}")["profile"]
        wind = {**MAST["wind"], "profile": profile}
        assert parse_scenario(dumps({**MAST, "wind": wind})).wind is not None
