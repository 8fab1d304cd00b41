"""The page docs/validation.md shows every benchmark and every number printed in its source."""

from __future__ import annotations

import pytest

from tests.published.table import PAGE, benchmarks


@pytest.mark.parametrize("id", ["A1", "A3", "A5", "A6", "A7", "A8", "B1", "C1", "C2", "C3", "C4", "C5", "C7", "D1", "D2", "D5", "D6", "D8"])
def test_every_benchmark_asked_for_is_there(id: str) -> None:
    assert any(b.id.split()[0] == id for b in benchmarks())


def test_page_has_every_benchmark() -> None:
    page = PAGE.read_text(encoding="utf-8")
    assert [b.id for b in benchmarks() if f"\n## {b.id}: " not in page] == []


def test_over_a_hundred_loads_per_length() -> None:
    assert sum(len(list(b.rows())) for b in benchmarks() if b.id.startswith("HB A15")) > 100
