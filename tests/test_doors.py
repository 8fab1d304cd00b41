"""The solve command from file to files: exit statuses, what is written, and that nothing half-written is ever left."""

from __future__ import annotations

import errno
import json
import os
from dataclasses import replace
from pathlib import Path

import pytest
import scenarios_made as made
from matplotlib.figure import Figure

from guys import cli
from guys.doors import common
from guys.doors import solve as door
from guys.drawing import sheet
from guys.errors import OutputError, ScenarioError
from guys.exchange import files

FILES = ["anchors.csv", "cables.csv", "findings.csv", "result.json", "sheet.pdf", "sheet.png", "sheet.svg"]


def stored(folder: Path, document: made.Document) -> str:
    path = folder / "scenario.toml"
    path.write_text(made.text(document), encoding="utf-8")
    return str(path)


def solve(tmp_path: Path, document: made.Document, as_json: bool = False) -> int:
    return door.solve_command(stored(tmp_path, document), str(tmp_path / "out"), as_json)


@pytest.fixture(scope="module")
def drawn() -> dict[str, bytes]:
    """The figure files of one sheet."""
    return common.pictures("sheet", sheet(made.solved(made.mast()), paper="A4"), "title")


@pytest.fixture
def drawn_once(drawn: dict[str, bytes], monkeypatch: pytest.MonkeyPatch) -> None:
    """For tests of how files are stored: one sheet's stand for every one."""
    monkeypatch.setattr(door, "pictures", lambda *_: drawn)


def left_in(folder: Path) -> list[str]:
    return sorted(p.name for p in folder.iterdir()) if folder.exists() else []


# ---------------------------------------------------------------- exit statuses


def test_within_the_allowables_is_0_and_every_file_is_there(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert solve(tmp_path, made.mast()) == 0
    assert left_in(tmp_path / "out") == FILES
    head = {name: (tmp_path / "out" / name).read_bytes()[:5] for name in FILES}
    assert head["sheet.pdf"] == b"%PDF-"
    assert head["sheet.png"] == b"\x89PNG\r"
    assert head["sheet.svg"].startswith(b"<?xml")
    content = json.loads((tmp_path / "out" / "result.json").read_text(encoding="utf-8"))
    assert content["cases"][0]["case"] == "setting"
    printed = capsys.readouterr().out
    assert "Greatest load of each anchor" in printed
    assert f"Written to {tmp_path / 'out'}: result.json, anchors.csv" in printed


@pytest.mark.usefixtures("one_format")
def test_json_is_printed_in_place_of_the_table(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    solve(tmp_path, made.mast(), as_json=True)
    printed = capsys.readouterr().out
    assert json.loads(printed) == json.loads((tmp_path / "out" / "result.json").read_text(encoding="utf-8"))


@pytest.mark.usefixtures("one_format")
def test_past_an_allowable_is_3_and_still_writes_every_file(tmp_path: Path) -> None:
    assert solve(tmp_path, made.mast(rope={"rope": made.rope(strength=2900.0)})) == 3
    assert left_in(tmp_path / "out") == FILES


@pytest.mark.usefixtures("one_format")
def test_a_case_that_falls_is_4_and_still_writes_every_file(tmp_path: Path) -> None:
    document = {**made.mast(), "case": [{"name": "lost", "wind": 0.0, "without": ["9 m A", "17 m A"]}]}
    assert solve(tmp_path, document) == 4
    assert left_in(tmp_path / "out") == FILES


def test_exit_status_of_every_verdict() -> None:
    """4 goes before 3, 1 before both; a free spin of a ball base is not held against it, any other free motion is."""
    within, past = made.listed(made.mast()), made.listed(made.mast(rope={"rope": made.rope(strength=2900.0)}))
    assert [common.exit_status(s) for s in (within, past)] == [0, 3]
    assert common.exit_status(made.listed(made.losing())) == 4
    assert common.exit_status(replace(past, unsettled=(False, True))) == 4
    assert common.exit_status(replace(past, unsettled=(False, True), failed=True)) == 1
    assert common.exit_status(replace(within, check=replace(within.check, balance=1.1e-9))) == 1
    assert common.exit_status(replace(within, check=replace(within.check, balance=0.9e-9))) == 0
    assert common.exit_status(made.listed(made.mast(base="ball"))) == 0
    free = made.stayed(made.spar(rigid=True, section=[made.weightless(10.0)]), 0.0, 120.0, 240.0, length=13.0, straight=True)
    assert common.exit_status(made.listed(free)) == 4


@pytest.mark.parametrize("spoil", ["unknown key", "no unit", "unmet tension", "nothing there"])
def test_wrong_input_is_2_in_words_and_writes_nothing(spoil: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    document = made.mast()
    if spoil == "unknown key":
        document["anchor"][0]["radios"] = document["anchor"][0].pop("radius")
    if spoil == "unmet tension":
        document["cable"][0]["tension"] = 1.0
    path = stored(tmp_path, document)
    if spoil == "no unit":
        Path(path).write_text(made.text(document).replace('"11.0 m"', "11.0"), encoding="utf-8")
    if spoil == "nothing there":
        path = str(tmp_path / "absent.toml")
    assert cli.run(["solve", path, "--out", str(tmp_path / "out")]) == 2
    printed = capsys.readouterr()
    assert "nothing was written" in printed.err
    assert printed.out == ""
    assert "Traceback" not in printed.err
    assert not (tmp_path / "out").exists()


def test_an_unmet_tension_names_the_file(tmp_path: Path) -> None:
    document = made.mast()
    document["cable"][0]["tension"] = 1.0
    with pytest.raises(ScenarioError, match="9 m A"):
        solve(tmp_path, document)


# ---------------------------------------------------------------- whole or not at all


class Disk:
    """Writes as usual until so many files are written; then fails as told, half-way through the next one."""

    def __init__(self, monkeypatch: pytest.MonkeyPatch, after: int, failure: BaseException) -> None:
        self.left, self.failure = after, failure
        self.write = Path.write_bytes
        monkeypatch.setattr(Path, "write_bytes", lambda path, data: self.take(path, data))

    def take(self, path: Path, data: bytes) -> int:
        if self.left == 0:
            self.write(path, data[: len(data) // 2])
            raise self.failure
        self.left -= 1
        return self.write(path, data)


FULL = OSError(errno.ENOSPC, os.strerror(errno.ENOSPC))


@pytest.mark.usefixtures("drawn_once")
@pytest.mark.parametrize("after", [0, 1, 5])
@pytest.mark.parametrize(
    ("failure", "seen"), [(FULL, OutputError), (KeyboardInterrupt(), KeyboardInterrupt)], ids=["disk full", "interrupted"]
)
def test_a_failed_run_leaves_what_was_there(
    after: int, failure: BaseException, seen: type[BaseException], tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    out = tmp_path / "out"
    out.mkdir()
    for name in FILES:
        (out / name).write_text(f"old {name}", encoding="utf-8")
    Disk(monkeypatch, after, failure)
    with pytest.raises(seen) as caught:
        door.write(made.solved(made.mast()), out, "SI", "A4", None)
    monkeypatch.undo()
    assert left_in(out) == FILES
    assert {name: (out / name).read_text(encoding="utf-8") for name in FILES} == {name: f"old {name}" for name in FILES}
    if isinstance(caught.value, OutputError):
        assert "the disk is full; what was there before is untouched" in str(caught.value)


def test_a_fault_while_the_sheet_is_drawn_writes_nothing(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def broken(*_: object, **__: object) -> bytes:
        raise RuntimeError("no such luck")

    monkeypatch.setattr(Figure, "savefig", broken)
    with pytest.raises(RuntimeError, match="no such luck"):
        door.write(made.solved(made.mast()), tmp_path / "out", "SI", "A4", None)
    assert left_in(tmp_path / "out") == []


@pytest.mark.usefixtures("drawn_once")
def test_a_directory_that_cannot_be_made_is_named(tmp_path: Path) -> None:
    (tmp_path / "taken").write_text("a file", encoding="utf-8")
    with pytest.raises(OutputError, match="taken"):
        door.write(made.solved(made.mast()), tmp_path / "taken" / "out", "SI", "A4", None)
    with pytest.raises(OutputError, match="taken: cannot be written: a file has that name, where a directory is needed"):
        door.write(made.solved(made.mast()), tmp_path / "taken", "SI", "A4", None)
    assert OutputError("x", "y").exit_status != 0


def test_files_are_the_same_bytes_each_time(tmp_path: Path) -> None:
    for folder in ("one", "two"):
        door.write(made.solved(made.mast()), tmp_path / folder, "both", "letter", 0.5)
    for name in FILES:
        assert (tmp_path / "one" / name).read_bytes() == (tmp_path / "two" / name).read_bytes(), name


@pytest.mark.usefixtures("drawn_once")
def test_replaced_is_the_way_every_file_goes(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    seen: list[str] = []
    real = files.replaced
    monkeypatch.setattr(common, "replaced", lambda path: (seen.append(Path(path).name), real(path))[1])
    door.write(made.solved(made.mast()), tmp_path, "SI", "A4", None)
    assert sorted(seen) == FILES == left_in(tmp_path)
