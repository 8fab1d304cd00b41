"""What became of every case of a batch, in short: a verdict, what governs, the loads, and why it falls.

Studies that ask the same of many cases read their batches so; a case that branches has the worse of both its states.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from guys import stability
from guys.checks.demands import Demands, Item
from guys.checks.extremes import first_greatest, measures
from guys.recovery import Forces
from guys.rotation import Array
from guys.studies.batch import Batch

WORDS = ("within", "not judged", "past", "falls", "not found")
WITHIN, NOT_JUDGED, PAST, FALLS, NOT_FOUND = range(5)
"""Verdicts, the graver the greater; NOT_FOUND: the solver failed, a fault of the program."""
_ARRAYS = ("verdict", "use", "governs", "mode", "required", "tension", "pull")


@dataclass(frozen=True)
class Cells:
    """What became of some cases (case,), the worse of what is held together.

    verdict : code;  reason : why it falls
    use, governs, mode, required : greatest use of anything judged, its item, which of the item's modes governs there, and the factor
        required (NaN, -1, -1, NaN: nothing)
    tension : (case, cable) greater end [N];  pull : (case, anchor) resultant [N];  items : everything judged
    """

    verdict: NDArray[np.int64]
    use: Array
    governs: NDArray[np.int64]
    mode: NDArray[np.int64]
    required: Array
    tension: Array
    pull: Array
    reason: tuple[str, ...]
    items: tuple[Item, ...]

    def take(self, rows: Sequence[int]) -> Cells:
        """The cases `rows`."""
        k = np.array(rows, dtype=np.int64)
        some = {name: getattr(self, name)[k] for name in _ARRAYS}
        return Cells(**some, reason=tuple(self.reason[r] for r in rows), items=self.items)

    def how(self, row: int) -> str:
        """In words the way of failing, part or place of what governs a case; empty where there is none to tell."""
        item, mode = int(self.governs[row]), int(self.mode[row])
        return self.items[item].modes[mode] if item >= 0 and mode >= 0 else ""


def cells_of(batch: Batch) -> Cells:
    """Verdicts and loads of every line; a line that branches has the worse of both its states."""
    stands = (batch.code == stability.STABLE) | batch.spins
    plain = _read(batch.demands, batch.forces)
    if batch.mirror is not None and batch.mirror_demands is not None:
        beside = _read(batch.mirror_demands, batch.mirror)
        row = {line: k for k, line in enumerate(batch.lines)}
        for k, line in enumerate(batch.mirror_lines):
            _put_worse(plain, row[line], beside, k)
    use, required, governs, mode, tension, pull = plain
    judged = np.where(np.isnan(use), NOT_JUDGED, np.where(use > 1, PAST, WITHIN))
    verdict = np.where(stands, judged, np.where(batch.code == stability.FAILED, NOT_FOUND, FALLS))
    reason = tuple("" if ok else (why or note or "") for ok, why, note in zip(stands, batch.reason, batch.note, strict=True))
    return without_loads(Cells(verdict, use, governs, mode, required, tension, pull, reason, batch.demands.items))


def without_loads(cells: Cells) -> Cells:
    """The cells with nothing but verdict and reason where they do not stand."""
    gone = cells.verdict >= FALLS
    use, required = np.where(gone, np.nan, cells.use), np.where(gone, np.nan, cells.required)
    tension, pull = np.where(gone[:, None], np.nan, cells.tension), np.where(gone[:, None], np.nan, cells.pull)
    governs, mode = np.where(gone, -1, cells.governs), np.where(gone, -1, cells.mode)
    return Cells(cells.verdict, use, governs, mode, required, tension, pull, cells.reason, cells.items)


_Plain = tuple[Array, Array, NDArray[np.int64], NDArray[np.int64], Array, Array]
_OF_ITEM = 4
"""How many of these are of the item that governs: the rest are loads."""


def _read(judged: Demands, forces: Forces) -> _Plain:
    """Greatest use with the factor required, its item and the item's mode, tensions and pulls."""
    known, each = np.where(np.isnan(judged.use), -1.0, judged.use), np.arange(len(judged.use))
    best = known.argmax(axis=1)
    none = known[each, best] < 0
    use, required = (np.where(none, np.nan, a[each, best]) for a in (known, judged.required))
    found = measures(forces)
    governs, mode = (np.where(none, -1, a) for a in (best, judged.mode[each, best]))
    return use, required, governs, mode, found.tension, found.resultant


def _put_worse(mine: _Plain, k: int, other: _Plain, j: int) -> None:
    if other[0][j] > mine[0][k]:
        for a, b in zip(mine[:_OF_ITEM], other[:_OF_ITEM], strict=True):
            a[k] = b[j]
    for a, b in zip(mine[_OF_ITEM:], other[_OF_ITEM:], strict=True):
        a[k] = np.fmax(a[k], b[j])


def joined(a: Cells, b: Cells) -> Cells:
    """Cases one after another."""
    both = {name: np.concatenate([getattr(a, name), getattr(b, name)]) for name in _ARRAYS}
    return Cells(**both, reason=a.reason + b.reason, items=a.items)


def worst_first(cells: Cells) -> int:
    """The line of the gravest verdict, and of these of the greatest use."""
    return max(range(len(cells.use)), key=lambda k: (cells.verdict[k], -math.inf if math.isnan(cells.use[k]) else cells.use[k]))


def worst_use(cells: Cells) -> int | None:
    """The line of the greatest use; None where nothing is judged or nothing stands."""
    return None if np.isnan(cells.use).all() else first_greatest(cells.use)
