"""`python -m tests.published.table`: writes every published number beside ours as the page docs/validation.md.

The rows are those the tests assert, with the same allowances; the words above each table are the test's own.
"""

from __future__ import annotations

import os
import re
from collections.abc import Iterator
from importlib import import_module
from pathlib import Path

os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")

from tests.published.compare import BENCHMARKS, Benchmark, Row

HERE = Path(__file__).parent
PAGE = HERE.parents[1] / "docs" / "validation.md"
COMMAND = "python -m tests.published.table"
HEAD = f"""# Validation: ours beside theirs

Every number here is asserted by a test of `tests/published/`, with the allowance of the last column: half a unit of the last printed digit
and, where more is allowed, what the text above the table names. Written by `{COMMAND}`.

How a number came here: READ, in the document named; READ(2nd), in a later document that quotes it; MEMORY, quoted from memory, the document
not opened; WORKED OUT, not published, by two independent methods neither of which is a beam or cable finite element; EXACT, a closed form.
A cables, B masts, C large displacements, D stability and beam-columns, HB examples of handbooks.
One worked sheet for each kind of holdfast, run by the tests: [holdfasts](holdfasts.md).
"""


def pages() -> Iterator[str]:
    """The page, piece by piece."""
    yield HEAD
    every = [(b, list(b.rows())) for b in benchmarks()]
    yield f"{sum(len(rows) for _, rows in every)} numbers from {len({b.rows.__module__ for b, _ in every})} groups of sources.\n"
    for benchmark, rows in every:
        yield _section(benchmark, rows)


def benchmarks() -> list[Benchmark]:
    """Every benchmark, in the order of the page."""
    for file in sorted(HERE.glob("test_*.py")):
        import_module(f"tests.published.{file.stem}")
    return sorted(BENCHMARKS, key=lambda b: [int(x) if x.isdigit() else x for x in re.split(r"(\d+)", _place(b.id))])


def _place(id: str) -> str:
    """Benchmarks first, then the handbooks, then the rules of the trade."""
    return f"2{id}" if id.startswith("HB ") else f"1{id}" if re.match(r"[A-D]\d", id) else f"3{id}"


def _section(benchmark: Benchmark, rows: list[Row]) -> str:
    title, _, text = benchmark.text.partition("\n\n")
    lines = [f"## {benchmark.id}: {' '.join(title.split())}", "", " ".join(text.split()), ""]
    lines += ["| quantity | unit | mark | theirs | ours | difference | allowed |", "|---|---|---|---:|---:|---:|---:|"]
    return "\n".join([*lines, *(_line(benchmark, row) for row in rows), ""])


def _line(benchmark: Benchmark, row: Row) -> str:
    digits = len(row.printed.partition(".")[2].partition("e")[0]) + 2
    ours = f"{row.ours + 0.0:.{digits}f}"
    cells = (row.quantity, row.unit, row.mark or benchmark.mark, row.printed, ours, f"{row.ours - row.theirs:+.1e}", f"{row.allowed:.1e}")
    return "| " + " | ".join(cells) + " |"


def main() -> None:
    PAGE.write_text("\n".join(pages()), encoding="utf-8")


if __name__ == "__main__":
    main()
