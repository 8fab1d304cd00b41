"""What a run prints: plain text when piped, tables on a terminal, every warning either way."""

from __future__ import annotations

import io
import re
from pathlib import Path

import pytest
import scenarios_made as made

from guys import terminal
from guys.results import Solution


class Terminal(io.StringIO):
    def isatty(self) -> bool:
        return True


def printed(s: Solution, units: str = "SI", stream: io.StringIO | None = None) -> str:
    out = stream or io.StringIO()
    terminal.report(s, units, out)  # type: ignore[arg-type]
    return out.getvalue()


def section(text: str, title: str) -> list[str]:
    """Lines of a table or list, without its title."""
    rest = text[text.index(f"\n{title}\n") + len(title) + 2 :]
    return rest.split("\n\n")[0].rstrip("\n").split("\n")


def test_plain_report_has_every_table_and_no_drawing() -> None:
    s = made.solved(made.losing())
    text = printed(s)
    assert text.startswith("made for a test\n5 cases: ")
    assert "stable" in text.split("\n")[1]
    assert "1 none (no equilibrium: it falls)" in text.split("\n")[1]
    anchors = section(text, "Greatest load of each anchor")
    assert re.split(r" {2,}", anchors[0].strip()) == ["anchor", "pull", "horizontal", "uplift", "case", "wind from"]
    assert [row.split()[0] for row in anchors[1:]] == ["A", "B", "C"]
    assert len(section(text, "Greatest tension of each cable")) == 7
    assert not re.search("[\x1b│─┃━]", text)


def test_every_warning_note_and_caution_is_printed() -> None:
    s = made.solved(made.losing())
    text = printed(s)
    for line in (*s.warnings, *s.cautions, *s.not_checked):
        assert f"  - {line}\n" in text
    assert s.warnings
    spin = made.solved(made.mast(base="ball"))
    assert "  - mast may spin freely about its own axis\n" in printed(spin)


def test_what_is_past_is_listed_and_the_unjudged_named() -> None:
    rows = section(
        printed(made.solved(made.mast(rope={"rope": made.rope(strength=2900.0)}))),
        "Against the allowables (all that is past, every anchor, and the nearest within)",
    )
    assert sum(" past" in row for row in rows) == 3
    assert "2 (default)" in rows[1]
    assert "Not judged: base of mast, anchor A, anchor B, anchor C\n" in printed(made.solved(made.mast()))


@pytest.mark.parametrize(("units", "unit", "other"), [("SI", "kN", "lbf"), ("US", "lbf", "kN")])
def test_loads_are_in_the_units_asked_for(units: str, unit: str, other: str) -> None:
    row = section(printed(made.solved(made.mast(30.0)), units), "Greatest tension of each cable")[4]
    assert unit in row
    assert other not in row


def test_both_units_stand_side_by_side_and_agree() -> None:
    s = made.solved(made.mast(30.0))
    row = section(printed(s, "both"), "Greatest tension of each cable")[4]
    metric, customary = re.findall(r"([\d.,]+) kN / ([\d,]+) lbf", row)[0]
    assert float(metric) * 1000 == pytest.approx(s.worst_cables[3].tension.peak, rel=0.01)
    assert float(customary.replace(",", "")) * 4.4482216 == pytest.approx(s.worst_cables[3].tension.peak, rel=0.01)


def test_dropped_cables_are_marked() -> None:
    s = made.solved(made.mast(0.0, straight=True, tension=400.0))
    rows = section(printed(s), "Greatest tension of each cable")[1:]
    drops = [row.rstrip().endswith("drops") for row in rows]
    assert drops == [bool(c.slack_winds) for c in s.worst_cables]
    assert any(drops)


def test_a_structure_that_does_not_stand_prints_dashes_not_numbers() -> None:
    document = made.stayed(made.spar(rigid=True), 60.0, 90.0, 120.0, length=19.6, wind=made.wind(0.0, 90.0))
    text = printed(made.solved(document))
    assert "nan" not in text.replace("balance to nan", "")
    assert "–" in section(text, "Greatest load of each anchor")[1]


def test_on_a_terminal_tables_are_drawn() -> None:
    text = printed(made.solved(made.mast()), stream=Terminal())
    assert "─" in text
    assert "Greatest load of each anchor" in text


def test_columns_line_up() -> None:
    out = io.StringIO()
    terminal.table("title", ["a", "long head"], [["some words", "1"], ["x", "22"]], out)
    assert out.getvalue() == "\ntitle\n  a           long head\n  some words  1\n  x           22\n"
    empty = io.StringIO()
    terminal.table("title", ["a"], [], empty)
    assert empty.getvalue() == ""


def test_progress_shows_on_a_terminal_only() -> None:
    with terminal.progress(io.StringIO()) as tick:
        assert tick is None
    screen = Terminal()
    with terminal.progress(screen) as tick:
        assert tick is not None
        tick(3, 10)
    assert "solving" in screen.getvalue()


def test_files_are_named_with_their_directory() -> None:
    out = io.StringIO()
    terminal.files([Path("there/result.json"), Path("there/sheet.pdf")], out)
    assert out.getvalue() == "\nWritten to there: result.json, sheet.pdf\n"


def test_names_with_brackets_are_not_taken_for_markup() -> None:
    """On a terminal tables are drawn by rich, which would read [bold] as a command and fail on [/]."""
    stream = Terminal()
    terminal.table("Loads [/]", ["thing [red]"], [["guy [bold] 1"], ["[/] N"]], stream)
    assert "guy [bold] 1" in stream.getvalue()
    assert "[/] N" in stream.getvalue()
    assert "thing [red]" in stream.getvalue()


def test_loads_are_rounded_up_strengths_down_and_nothing_keeps_its_unit() -> None:
    s = made.solved(made.mast(30.0, rope={"rope": made.rope(strength=20.19e3)}))
    text = printed(s)
    tension = float(section(text, "Greatest tension of each cable")[1].split()[3]) * 1000.0
    assert s.worst_cables[0].tension.peak <= tension <= s.worst_cables[0].tension.peak * 1.01
    assert "20.1 kN" in text
    still = made.solved(made.mast())
    row = section(printed(still), "Feet")[1]
    assert row.split()[-8:-6] == ["none", "0"]
    assert row.split()[-3:] == ["0", "N", "m"]


def test_a_base_that_is_only_lifted_has_no_negative_push() -> None:
    up = made.fitting(at=4.0, load=made.vector(0.0, 0.0, 3000.0))
    s = made.solved(made.document([made.spar(base="fixed", section=[made.tube(4.0)], fitting=[up])], still=True))
    assert section(printed(s), "Feet")[1].split()[:5] == ["mast", "ground", "none", "2.74", "kN"]


def test_checks_beside_falls_say_of_which_cases_they_are() -> None:
    assert "of the cases with an equilibrium)" in printed(made.solved(made.losing()))


def test_nothing_is_called_within_where_nothing_stands() -> None:
    rope = {"rope": made.rope(strength=20e3)}
    text = printed(made.solved(made.stayed(made.spar(rigid=True), 60.0, 90.0, 120.0, length=19.6, wind=made.wind(0.0), rope=rope)))
    assert "\nNothing judged: nothing stands\n" in text
    assert "within" not in text
