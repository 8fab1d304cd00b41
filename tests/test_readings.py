"""Readings from a file: units of their own, the digest, and every fault at once."""

from __future__ import annotations

from pathlib import Path

import pytest
import scenarios_made as made

from guys.errors import ScenarioError
from guys.scenario import readings as table
from guys.scenario.readings import read_readings
from guys.sounding import TIMED, WAYS

PLAN = made.scenario(made.mast())
HEAD = "cable,by,reading,cycles,temperature\n"
NAME = PLAN.cable[0].name


def read(tmp_path: Path, text: str) -> table.Readings:
    file = tmp_path / "readings.csv"
    file.write_text(text, encoding="utf-8")
    return read_readings(str(file), PLAN)


def faults(tmp_path: Path, text: str) -> str:
    with pytest.raises(ScenarioError) as raised:
        read(tmp_path, text)
    return str(raised.value)


def test_the_ways_are_those_that_tell_a_tension() -> None:
    assert tuple(table.DIMENSIONS) == WAYS
    assert table.TIMED == TIMED


def test_every_reading_has_its_own_unit(tmp_path: Path) -> None:
    """Inches of 25.4 mm, pounds-force of 4.4482 N, degrees Fahrenheit: exact definitions."""
    rows = f"{NAME},Swing,8.4 s,20,50 degF\n{NAME},sight,9 1/4 in,,10 degC\n\n{NAME},gauge,700 lbf,,10 degC\n{NAME},pulse,,20,\n"
    found = read(tmp_path, f"# scenario {PLAN.sha256[:16]},,,,\n{HEAD}{rows}")
    swing, sight, gauge = found.of
    assert found.signed
    assert (swing.value, swing.cycles, swing.line) == (8.4, 20, 3)
    assert sight.value == pytest.approx(9.25 * 0.0254)
    assert (gauge.value, gauge.line) == (pytest.approx(700 * 4.4482216152605), 6)
    assert found.temperature == pytest.approx(283.15)
    assert not read(tmp_path, HEAD + f"{NAME},gauge,1 kN,,10 degC\n").signed


def test_all_faults_at_once(tmp_path: Path) -> None:
    bad = [
        "nobody,swing,8 s,20,10 degC", f"{NAME},swong,8 s,20,10 degC", f"{NAME},swing,8,20,10 degC", f"{NAME},swing,80 mm,20,10 degC",
        f"{NAME},pulse,8 s,,10 degC", f"{NAME},pulse,8 s,2.5,10 degC", f"{NAME},sag,-4 mm,,10 degC", f"{NAME},sag,4 mm,,", "x",
        f"{NAME},gauge,1 kN,,10",
    ]  # fmt: skip
    told = faults(tmp_path, HEAD + "\n".join(bad) + "\n")
    for line, words in (
        (2, "no cable of the scenario"), (3, 'did you mean "swing"'), (4, "8"), (5, "length"), (6, "count of cycles"), (7, "2.5"),
        (8, "not more than zero"), (9, "temperature: missing"), (11, "temperature"),
    ):  # fmt: skip
        assert any(f":{line}: " in each and words in each for each in told.splitlines()), (line, words, told)


@pytest.mark.parametrize(("text", "words"), [
    ("", "is empty"), ("cable,by\n", "missing: reading, cycles, temperature"), (HEAD, "holds no readings"),
    (f"# scenario {'0' * 64}\n{HEAD}{NAME},gauge,1 kN,,10 degC\n", "another scenario"),
    (f"# scenario abc\n{HEAD}{NAME},gauge,1 kN,,10 degC\n", "another scenario"),
    (f"{HEAD}{NAME},gauge,1 kN,,10 degC\n{NAME},gauge,1 kN,,18 degC\n", "changed by 8 K"),
    (f'{HEAD}"{NAME},gauge,1 kN,,10 degC\n', "holds no readings"),
    (f'{HEAD}{NAME},gauge,"1\nkN",,10 degC\n', "runs over lines"),
])  # fmt: skip
def test_files_that_will_not_do(tmp_path: Path, text: str, words: str) -> None:
    assert words in faults(tmp_path, text)


def test_files_that_cannot_be_read(tmp_path: Path) -> None:
    for path, words in ((tmp_path / "none.csv", "no such file"), (tmp_path, "cannot be read")):
        with pytest.raises(ScenarioError, match=words):
            read_readings(str(path), PLAN)
    (tmp_path / "odd.csv").write_bytes(b"\xff\xfe\x00")
    with pytest.raises(ScenarioError, match="UTF-8"):
        read_readings(str(tmp_path / "odd.csv"), PLAN)


def test_readings_of_another_layout(tmp_path: Path) -> None:
    row = f"{HEAD}{NAME},gauge,1 kN,,10 degC\n"
    signed = f"# scenario {PLAN.sha256}\n"
    assert 'of the layout "by the fence"' in faults(tmp_path, f"{signed}# layout by the fence\n{row}")
    moved = PLAN.model_copy(update={"layout": "by the fence"})
    file = tmp_path / "moved.csv"
    file.write_text(f"{signed}# layout by the fence,,,,\n{row}", encoding="utf-8")
    assert read_readings(str(file), moved).signed
    file.write_text(f"{signed}{row}", encoding="utf-8")
    with pytest.raises(ScenarioError, match="not of"):
        read_readings(str(file), moved)
