"""The command line as a user meets it: exit status, what goes where, and how soon help is there."""

from __future__ import annotations

import json
import math
import os
import subprocess
import sys
from pathlib import Path

import pytest
from toml_text import MAST, changed, dumps_tables

from guys import __version__, cli, parse_scenario

REPOSITORY = Path(__file__).parent.parent
HEAVY = ("numpy", "scipy", "matplotlib", "pydantic", "shapely", "pyproj", "rich")


def fresh(*arguments: str) -> subprocess.CompletedProcess[str]:
    """The command in an interpreter of its own."""
    return subprocess.run([sys.executable, "-m", "guys", *arguments], capture_output=True, text=True, check=False, cwd=REPOSITORY)


@pytest.fixture
def good(tmp_path: Path) -> Path:
    file = tmp_path / "good.toml"
    file.write_text(dumps_tables(MAST), encoding="utf-8")
    return file


def test_help_lists_what_there_is_and_nothing_else(capsys: pytest.CaptureFixture[str]) -> None:
    assert cli.run(["--help"]) == 0
    out = capsys.readouterr().out
    listed = [line.split()[0] for line in out[out.index("Commands:") :].splitlines()[1:] if line.strip()]
    assert listed == list(cli.ORDER)
    assert set(listed) == set(cli.commands.commands)


@pytest.mark.parametrize("arguments", [["--help"], ["--version"], ["limit"]])
def test_help_loads_nothing_heavy(arguments: list[str]) -> None:
    program = f"import sys; from guys import cli; cli.run({arguments!r}); print([name for name in {HEAVY!r} if name in sys.modules])"
    done = subprocess.run([sys.executable, "-c", program], capture_output=True, text=True, check=True)
    assert done.stdout.splitlines()[-1] == "[]"


def test_commands_load_what_they_use_when_they_use_it() -> None:
    program = """
import importlib, pkgutil, sys
from guys import doors
for door in pkgutil.iter_modules(doors.__path__):
    importlib.import_module("guys.doors." + door.name)
print([name for name in ("matplotlib", "scipy.optimize", "shapely", "pyproj", "rich") if name in sys.modules])
"""
    done = subprocess.run([sys.executable, "-c", program], capture_output=True, text=True, check=True)
    assert done.stdout == "[]\n"


def test_version(capsys: pytest.CaptureFixture[str]) -> None:
    assert cli.run(["--version"]) == 0
    assert capsys.readouterr().out == f"guys {__version__}\n"


def test_every_command_of_the_format_is_there() -> None:
    wanted = {"new", "validate", "schema", "solve", "plumb", "size", "setout", "compare", "search", "limit", "lost", "raise", "field"}
    ours = {"matters", "reserve", "stages", "ring"}
    assert wanted | {"record", "list"} | ours == set(cli.commands.commands)


@pytest.mark.parametrize(
    "arguments",
    [["nonsense"], ["new", "tower"], ["new"], ["validate"], ["solve", "x.toml"], ["solve", "--out", "x"], ["validate", "a", "b"], ["--no"]],
)
def test_wrong_use_is_exit_2(arguments: list[str], capsys: pytest.CaptureFixture[str]) -> None:
    assert cli.run(arguments) == 2
    told = capsys.readouterr()
    assert told.out == ""
    assert "Usage: guys" in told.err


@pytest.mark.parametrize("kind", ["mast", "boom", "pylon"])
def test_new_prints_a_starter_that_reads(kind: str, capsys: pytest.CaptureFixture[str]) -> None:
    assert cli.run(["new", kind]) == 0
    assert parse_scenario(capsys.readouterr().out).warnings == ()


def test_validate_echoes_both_systems(good: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert cli.run(["validate", str(good)]) == 0
    told = capsys.readouterr()
    assert told.err == ""
    by_hand = math.pi * 0.0858 * 0.0032 * 7850 * 12 + 10
    assert f"{by_hand:.2f}" == "91.25"
    for line in (
        "Test mast",
        'spar "mast": 12 m (39.37 ft) long, pinned on the ground, 91.25 kg (201.2 lb) with its fittings',
        'anchor "SE": bearing 120 deg, radius 8 m (26.25 ft), level 0 m (0 ft)',
        'cable "9 m N": chord 12.04 m (39.51 ft), 48.4 deg from the ground, initial tension 1 kN (224.8 lbf)',
        "wind: 25 m/s (55.92 mph), 3 s gust at 10 m (32.81 ft), Beaufort 8, uniform with height, air 1.225 kg/m3 (0.07647 lb/ft3), "
        "12 directions",
        'case "design": dead 1, wind 1, ice 0, 15 degC (59 degF)',
    ):
        assert line in told.out.splitlines()


def test_validate_warns_apart(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "odd.toml"
    file.write_text(dumps_tables(changed(MAST, (("wind", "speed"), "200 m/s"))), encoding="utf-8")
    assert cli.run(["validate", str(file)]) == 0
    told = capsys.readouterr()
    assert told.err.startswith("warning: wind, speed: 200 m/s (447.4 mph)")
    assert "warning" not in told.out


@pytest.mark.parametrize("command", [["validate"], ["solve", "--out"]])
def test_all_faults_go_to_the_standard_error_and_nothing_is_written(
    command: list[str], tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    file, out = tmp_path / "bad.toml", tmp_path / "out"
    file.write_text(dumps_tables(changed(MAST, (("guy_level", 0, "at"), 17), (("rope", "wire", "mass"), ...))), encoding="utf-8")
    assert cli.run([*command, *([str(out)] if "--out" in command else []), str(file)]) == 2
    told = capsys.readouterr()
    assert told.out == ""
    lines = told.err.splitlines()
    assert lines[-1] == "2 faults; nothing was written"
    assert lines[0].startswith(f"{file}:")
    assert 'guy_level[0].at: 17 has no unit; write "17 m" or "17 ft"' in lines[0]
    assert "rope.wire.mass: missing" in lines[1]
    assert not out.exists()


def test_schema_is_json(capsys: pytest.CaptureFixture[str]) -> None:
    assert cli.run(["schema"]) == 0
    assert json.loads(capsys.readouterr().out)["title"] == "guys scenario"


def test_a_bearing_to_look_toward_needs_its_unit(good: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert cli.run(["solve", str(good), "--out", str(tmp_path / "out"), "--look", "45"]) == 2
    assert capsys.readouterr().err.endswith('Error: Invalid value for --look: "45" has no unit; write "45 deg" or "45 rad"\n')


def test_an_internal_fault_is_told_in_words(good: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]) -> None:
    def broken(scenario: object) -> None:
        raise RuntimeError("something gave way")

    monkeypatch.delenv(cli.TRACEBACK, raising=False)
    monkeypatch.setattr("guys.scenario.echo.lines", broken)
    assert cli.run(["validate", str(good)]) == 1
    told = capsys.readouterr().err
    assert told.startswith("guys: internal fault: RuntimeError: something gave way\n")
    assert "Traceback" not in told
    monkeypatch.setenv(cli.TRACEBACK, "1")
    with pytest.raises(RuntimeError, match="something gave way"):
        cli.run(["validate", str(good)])


def test_the_package_runs_as_a_program() -> None:
    done = fresh("validate", "no-such-file.toml")
    assert (done.returncode, done.stdout) == (2, "")
    assert done.stderr.splitlines()[0] == "no-such-file.toml: no such file"


@pytest.mark.skipif(not Path("/dev/full").exists(), reason="no device that is always full here")
def test_a_full_disk_under_what_is_printed_is_told_in_words(good: Path) -> None:
    with Path("/dev/full").open("w") as full:
        done = subprocess.run(
            [sys.executable, "-m", "guys", "validate", str(good)], stdout=full, stderr=subprocess.PIPE, text=True, check=False
        )
    assert done.returncode == 1
    assert done.stderr == "guys: what is printed cannot be written: the disk is full\n"


def test_a_terminal_of_a_poorer_alphabet_gets_question_marks(tmp_path: Path) -> None:
    file = tmp_path / "far.toml"
    file.write_text(dumps_tables(changed(MAST, (("title",), "Mast \u6f22 \u2013 1"))), encoding="utf-8")
    done = subprocess.run(
        [sys.executable, "-m", "guys", "validate", str(file)],
        env={**os.environ, "PYTHONIOENCODING": "latin-1"},
        capture_output=True,
        check=False,
    )
    assert done.returncode == 0
    assert done.stdout.startswith(b"Mast ? ? 1")


def test_a_closed_output_loses_what_is_printed_and_nothing_else(good: Path) -> None:
    done = subprocess.run(["sh", "-c", f"exec {sys.executable} -m guys validate {good} >&-"], capture_output=True, text=True, check=False)
    assert (done.returncode, done.stderr) == (0, "")
