"""The two tables as a spreadsheet reads them: one head, one row a thing and case, every number with its unit in the head."""

from __future__ import annotations

import csv
import io
import math

import pytest
import scenarios_made as made

from guys.exchange import tables

Row = dict[str, str]


def rows(text: str) -> list[Row]:
    return list(csv.DictReader(io.StringIO(text)))


def test_anchors_have_a_row_for_each_case_with_the_numbers_of_the_solution() -> None:
    s = made.solved(made.losing())
    found = rows(tables.anchors(s))
    assert list(found[0]) == ["anchor", "case", "wind_from_deg", "east_N", "north_N", "up_N", "horizontal_N", "resultant_N", "kind"]
    for a, name in enumerate(s.anchors.name):
        mine = [r for r in found if r["anchor"] == name and not r["case"].startswith("greatest")]
        assert [r["case"] for r in mine] == list(s.case)
        for k, row in enumerate(mine):
            if s.state[k] == "none":
                assert {row[c] for c in ("east_N", "north_N", "up_N", "horizontal_N", "resultant_N")} == {""}
            else:
                assert [float(row[c]) for c in ("east_N", "north_N", "up_N")] == s.anchors.pull[k, a].tolist()
                assert float(row["resultant_N"]) == pytest.approx(math.hypot(*s.anchors.pull[k, a]))
            assert row["wind_from_deg"] == ("" if math.isnan(s.wind_from[k]) else str(round(math.degrees(s.wind_from[k]), 9)))


def test_greatest_loads_of_an_anchor_come_first_with_their_case_and_wind() -> None:
    s = made.solved(made.losing())
    greatest = [r for r in rows(tables.anchors(s)) if r["anchor"] == "A" and r["case"].startswith("greatest")]
    worst = s.worst_anchors[0]
    assert [r["case"].split(":")[0] for r in greatest] == ["greatest resultant", "greatest horizontal", "greatest uplift"]
    assert [float(greatest[0]["resultant_N"]), float(greatest[1]["horizontal_N"]), float(greatest[2]["up_N"])] == [
        worst.resultant.peak, worst.horizontal.peak, worst.uplift.peak,
    ]  # fmt: skip
    assert float(greatest[0]["wind_from_deg"]) == pytest.approx(math.degrees(worst.resultant.peak_wind_from))


def test_cables_have_a_row_for_each_case_they_stand_in() -> None:
    s = made.solved(made.losing())
    found = rows(tables.cables(s))
    for c, name in enumerate(s.cables.name):
        first, *mine = (r for r in found if r["cable"] == name)
        assert first["case"] == f"greatest tension: {s.worst_cables[c].tension.peak_case}"
        assert float(first["greatest_N"]) == s.worst_cables[c].tension.peak
        assert float(first["factor"]) == pytest.approx(23e3 / float(first["greatest_N"]))
        stands = [k for k in range(len(s.case)) if s.cables.present[k, c]]
        assert [r["case"] for r in mine] == [s.case[k] for k in stands]
        for k, row in zip(stands, mine, strict=True):
            if s.state[k] != "none":
                assert float(row["tension_anchor_N"]) == s.cables.tension_anchor[k, c]
                assert float(row["tension_top_N"]) == s.cables.tension_top[k, c]
                assert float(row["greatest_N"]) == max(s.cables.tension_anchor[k, c], s.cables.tension_top[k, c])
                assert row["slack"] == ("yes" if s.cables.slack[k, c] else "no")


def test_names_with_commas_and_quotes_survive() -> None:
    document = made.mast()
    document["anchor"][0]["name"] = "north, by the gate"
    for guy in document["cable"]:
        if guy["to"]["anchor"] == "A":
            guy["to"]["anchor"] = "north, by the gate"
    s = made.solved(document)
    assert {r["anchor"] for r in rows(tables.anchors(s))} == {"north, by the gate", "B", "C"}


def test_a_rope_without_strength_leaves_its_cells_empty() -> None:
    rope = made.rope()
    del rope["strength"]
    for row in rows(tables.cables(made.solved(made.mast(rope={"rope": rope})))):
        assert (row["strength_N"], row["factor"]) == ("", "")


def test_without_cables_and_anchors_there_are_only_heads() -> None:
    s = made.solved(made.document([made.spar(base="fixed")], still=True))
    assert rows(tables.anchors(s)) == rows(tables.cables(s)) == []
    assert tables.anchors(s).count("\n") == tables.cables(s).count("\n") == 1
