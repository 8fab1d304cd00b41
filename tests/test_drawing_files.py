"""The three files of a sheet: equal bytes for equal results, all of them or none, and the notebook's SVG."""

from __future__ import annotations

import errno
import xml.etree.ElementTree as ElementTree
import zlib
from pathlib import Path

import pytest
import sheet_samples as samples

from guys.drawing import files, sheet, show, write_sheet
from guys.errors import OutputError
from guys.results import Solution

KINDS = ("pdf", "svg", "png")


@pytest.fixture(scope="module")
def solution() -> Solution:
    return samples.solution(samples.SMALL)


def test_equal_bytes_from_equal_results(solution: Solution) -> None:
    twins = [sheet(solution), sheet(samples.solution(samples.SMALL))]
    for kind in KINDS:
        one, two = (files.figure_bytes(figure, kind, "title", "0.1.0") for figure in twins)
        assert one == two
        assert files.figure_bytes(twins[0], kind, "title", "0.1.0") == one


def test_writes_three_files(solution: Solution, tmp_path: Path) -> None:
    paths = write_sheet(solution, tmp_path, paper="A4")
    assert sorted(p.name for p in tmp_path.iterdir()) == ["sheet.pdf", "sheet.png", "sheet.svg"]
    assert {p.name for p in paths} == {p.name for p in tmp_path.iterdir()}
    assert (tmp_path / "sheet.pdf").read_bytes().startswith(b"%PDF")
    assert (tmp_path / "sheet.png").read_bytes().startswith(b"\x89PNG")
    root = ElementTree.fromstring((tmp_path / "sheet.svg").read_text())
    assert root.get("width") == f"{297 / 25.4 * 72:.6f}".rstrip("0").rstrip(".") + "pt"  # A4 lying


def test_the_third_file_failing_leaves_all_as_they_were(solution: Solution, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    for kind in KINDS:
        (tmp_path / f"sheet.{kind}").write_text("old")
    true_bytes = files.figure_bytes

    def full_at_png(figure: object, kind: str, title: str, version: str) -> bytes:
        if kind == "png":
            raise OSError(errno.ENOSPC, "No space left on device")
        return true_bytes(figure, kind, title, version)  # type: ignore[arg-type]

    monkeypatch.setattr(files, "figure_bytes", full_at_png)
    with pytest.raises(OutputError, match="the disk is full"):
        write_sheet(solution, tmp_path)
    assert {p.name: p.read_text() for p in tmp_path.iterdir()} == {f"sheet.{kind}": "old" for kind in KINDS}


def test_no_date_and_no_place_in_the_files(solution: Solution, tmp_path: Path) -> None:
    for path in write_sheet(solution, tmp_path):
        content = path.read_bytes()
        assert b"CreationDate" not in content
        assert b"dc:date" not in content
        assert str(tmp_path).encode() not in content


def test_words_of_the_pdf_are_text(solution: Solution, tmp_path: Path) -> None:
    write_sheet(solution, tmp_path)
    content = (tmp_path / "sheet.pdf").read_bytes()
    streams = [zlib.decompress(part.split(b"\nendstream")[0]) for part in _flate_streams(content)]
    page = max(streams, key=len)
    assert page.count(b" Tf") > 100
    assert b"Tj" in page or b"TJ" in page


def _flate_streams(content: bytes) -> list[bytes]:
    parts = content.split(b"stream\n")[1:]
    return [p for p in parts if p[:1] == b"\x78"]


def test_a_notebook_shows_the_sheet(solution: Solution) -> None:
    svg = show(solution)._repr_svg_()
    assert ElementTree.fromstring(svg).tag.endswith("svg")
    assert svg == show(solution)._repr_svg_()
