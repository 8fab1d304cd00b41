"""A published number beside ours: what a test of `tests/published` returns, and what `docs/validation.md` is written from.

A number is given as it is printed, so that half a unit of its last digit is known.  What it may differ by beyond that is a named
allowance with its reason.  Every source carries how its numbers came here:

    READ        read in the document named
    READ(2nd)   read in a later document that quotes it
    MEMORY      quoted from memory, not opened
    WORKED OUT  not published: worked out for these tests by two independent methods, neither a beam or cable finite element
    EXACT       a closed form, worked out here from its formula
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from functools import wraps
from typing import Literal

import pytest

Mark = Literal["READ", "READ(2nd)", "MEMORY", "WORKED OUT", "EXACT"]


@dataclass(frozen=True)
class Allowance:
    """What a number may differ by beyond half a unit of its last printed digit: `size` in its unit, or as a share of it."""

    size: float
    reason: str
    share: bool = False

    def of(self, value: float) -> float:
        return self.size * abs(value) if self.share else self.size


NOTHING = Allowance(0.0, "")


@dataclass(frozen=True)
class Row:
    """One number: what it is, its unit, as printed, ours, and what it may differ by."""

    quantity: str
    unit: str
    printed: str
    ours: float
    allowance: Allowance = NOTHING
    mark: Mark | None = None

    @property
    def theirs(self) -> float:
        return float(self.printed.replace(",", "").replace(" ", ""))

    @property
    def allowed(self) -> float:
        return half_unit(self.printed) + self.allowance.of(self.theirs)

    @property
    def agrees(self) -> bool:
        return abs(self.ours - self.theirs) <= self.allowed

    def __str__(self) -> str:
        return f"{self.quantity}: printed {self.printed} {self.unit}, ours {self.ours:.10g}, allowed {self.allowed:.2g}"


SECOND_ORDER = Allowance(0.10, "meshes are finite")
FOURTH_ORDER = Allowance(0.25, "meshes are finite, and the change from the second to the third is small")


def second_order(what: str, measured: float) -> Row:
    """Row for an order of convergence of two: an element's bending is told by the sines of its turns against the chord, which are right
    to the second order in the turn of one element."""
    return Row(f"order of convergence, {what}", "-", "2.00", measured, SECOND_ORDER, "EXACT")


def fourth_order(what: str, measured: float) -> Row:
    """Row for an order of four: a straight rod bent by little has the cubic element's own error."""
    return Row(f"order of convergence, {what}", "-", "4.00", measured, FOURTH_ORDER, "EXACT")


def half_unit(printed: str) -> float:
    """Half a unit in the last printed digit, and the rounding of doubles."""
    text = printed.replace(",", "").replace(" ", "").lower()
    digits, _, power = text.partition("e")
    decimals = len(digits.partition(".")[2])
    return float(0.5 * 10.0 ** (int(power or 0) - decimals) * (1 + 1e-9))


@dataclass(frozen=True)
class Benchmark:
    """Rows of one source; `text` is the test's docstring."""

    id: str
    mark: Mark
    text: str
    rows: Callable[[], Iterator[Row]]


BENCHMARKS: list[Benchmark] = []


def published(id: str, mark: Mark) -> Callable[[Callable[[], Iterator[Row]]], Callable[[], None]]:
    """Make a test of a function that yields rows, and note it for the table."""

    def made(function: Callable[[], Iterator[Row]]) -> Callable[[], None]:
        BENCHMARKS.append(Benchmark(id, mark, function.__doc__ or "", function))

        @wraps(function)
        def test() -> None:
            rows = list(function())
            wrong = [str(row) for row in rows if not row.agrees]
            assert rows
            assert not wrong, "\n".join(wrong)

        return pytest.mark.published(test)

    return made
