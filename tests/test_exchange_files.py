"""Files replaced whole or not at all: disk full, interruption, missing directory."""

from __future__ import annotations

import errno
import os
from pathlib import Path

import pytest

from guys.errors import OutputError
from guys.exchange import files
from guys.exchange.files import replaced


def only(directory: Path) -> dict[str, str]:
    return {p.name: p.read_text() for p in directory.iterdir()}


def test_replaces(tmp_path: Path) -> None:
    target = tmp_path / "result.json"
    target.write_text("old")
    with replaced(target) as place:
        assert place.parent == tmp_path
        place.write_text("new")
        assert target.read_text() == "old"
    assert only(tmp_path) == {"result.json": "new"}


def test_mode_is_that_of_an_ordinary_new_file(tmp_path: Path) -> None:
    (tmp_path / "plain").write_text("")
    with replaced(tmp_path / "ours") as place:
        place.write_text("")
    assert (tmp_path / "ours").stat().st_mode == (tmp_path / "plain").stat().st_mode


def _interrupted(place: Path, failure: type[BaseException]) -> None:
    place.write_text("half")
    raise failure


@pytest.mark.parametrize("failure", [KeyboardInterrupt, ValueError, SystemExit])
def test_interruption_leaves_the_old_file(tmp_path: Path, failure: type[BaseException]) -> None:
    target = tmp_path / "sheet.pdf"
    target.write_text("old")
    with pytest.raises(failure), replaced(target) as place:
        _interrupted(place, failure)
    assert only(tmp_path) == {"sheet.pdf": "old"}


def test_disk_full_while_flushing(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def full(_: int) -> None:
        raise OSError(errno.ENOSPC, "No space left on device")

    target = tmp_path / "sheet.pdf"
    target.write_text("old")
    monkeypatch.setattr(os, "fsync", full)
    with pytest.raises(OutputError, match="the disk is full") as caught, replaced(target) as place:
        place.write_text("new")
    assert caught.value.path == str(target)
    assert only(tmp_path) == {"sheet.pdf": "old"}


def test_real_full_device(tmp_path: Path) -> None:
    if not Path("/dev/full").exists():
        pytest.skip("no /dev/full here")
    target = tmp_path / "sheet.pdf"
    with pytest.raises(OutputError, match="the disk is full"), replaced(target), open("/dev/full", "wb", buffering=0) as stream:
        stream.write(b"x")
    assert only(tmp_path) == {}


def test_missing_directory(tmp_path: Path) -> None:
    with pytest.raises(OutputError, match="the directory does not exist"), replaced(tmp_path / "none" / "sheet.pdf"):
        pass


def test_target_is_a_directory(tmp_path: Path) -> None:
    (tmp_path / "sheet.pdf").mkdir()
    with pytest.raises(OutputError, match="a directory has that name"), replaced(tmp_path / "sheet.pdf") as place:
        place.write_text("new")
    assert [p.name for p in tmp_path.iterdir()] == ["sheet.pdf"]


def test_an_unknown_reason_keeps_the_system_s_words() -> None:
    assert files.reason(OSError(errno.EIO, "Input/output error")) == "Input/output error"


def test_of_several_files_none_is_replaced_where_one_is_a_directory(tmp_path: Path) -> None:
    (tmp_path / "one.csv").write_text("old")
    (tmp_path / "two.csv").mkdir()
    with pytest.raises(OutputError, match="a directory has that name"):
        _both_written(tmp_path / "one.csv", tmp_path / "two.csv")
    assert (tmp_path / "one.csv").read_text() == "old"
    assert sorted(p.name for p in tmp_path.iterdir()) == ["one.csv", "two.csv"]


def _both_written(first: Path, second: Path) -> None:
    with replaced(first) as one, replaced(second) as two:
        one.write_text("new")
        two.write_text("new")
