"""How much more of its loads one line takes before its equilibrium is lost, the structure set in several ways.

The factor is on the wind of the line or, where it has none, on all its loads, as in `guys.studies.reserve`, and found in the same way: each
path is followed from the state at factor 1 until nothing stable continues (`guys.path`).  Settings of structures whose cables are the same
are followed side by side.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from itertools import groupby

import numpy as np

from guys import stability
from guys.equilibrium import Index, Problem, State, side_by_side
from guys.loads import CaseLine
from guys.loads.cases import joined
from guys.path import Tick, follow
from guys.reserves import ALL, WIND
from guys.rotation import Array
from guys.setting import Setting
from guys.studies import peaks
from guys.studies.batch import starts
from guys.studies.reserve import RAISED, STOPS

MOST = 20.0
"""Greatest factor looked at: a wind four and a half times as fast.  What stands that is not near its loss, whatever is varied; and far
beyond its loads a path costs the most."""


@dataclass(frozen=True)
class Margin:
    """What one line takes: the loads raised, the greatest factor that stands, up to `MOST`, and whether equilibrium is lost beyond it.

    failed : the solver found no state although the structure is still stiff: a fault of the program, the factor is not known
    """

    line: CaseLine
    loads: str
    stands_to: float
    lost: bool
    failed: bool


@dataclass(frozen=True)
class Asked:
    """A line, and the setting under it."""

    setting: Setting
    line: CaseLine


def raised(line: CaseLine) -> str:
    """Which loads of a line are raised."""
    return WIND if line.wind > 0 else ALL


def least(found: Sequence[Margin | None]) -> Margin | None:
    """That of the line that takes least; of those that take all that was looked at, the first."""
    known = [m for m in found if m is not None and not m.failed]
    return min(known, key=lambda m: m.stands_to, default=None)


def margins(asked: Sequence[Asked], progress: Tick | None = None) -> list[Margin | None]:
    """The margin of each; None of a line that does not stand as it is."""
    out: list[Margin | None] = [None] * len(asked)
    groups: dict[bytes, list[int]] = {}
    for k, one in enumerate(asked):
        groups.setdefault(one.setting.problem.structure.cables.EA.tobytes(), []).append(k)
    for rows in groups.values():
        for k, found in zip(rows, _Together([asked[k] for k in rows]).margins(progress), strict=True):
            out[k] = found
    return out


class _Together:
    """Lines on settings that may stand side by side; what is of lines is (line,), what is of paths (state,)."""

    def __init__(self, asked: Sequence[Asked]) -> None:
        self.asked = asked
        self.of, self.states = peaks.asked([one.line for one in asked])

    def at(self, rows: Index, factor: Array) -> Problem:
        """The problem of some states at their factors."""
        parts = []
        for _, some in groupby(range(len(rows)), key=lambda k: id(self._setting(int(rows[k])))):
            own = list(some)
            lines = [RAISED[raised(s)](s, float(factor[k])) for k in own for s in [self.states[rows[k]]]]
            parts.append(self._setting(int(rows[own[0]])).under(lines))
        return side_by_side(parts)

    def _setting(self, row: int) -> Setting:
        return self.asked[int(self.of.owner[row])].setting

    def margins(self, progress: Tick | None) -> list[Margin | None]:
        """The margin of each line: of its states, that of the one that is lost first."""
        problem = self.at(np.arange(len(self.states)), np.ones(len(self.states)))
        begun = [starts(one.setting, [one.line] * len(self.of.rows(k))) for k, one in enumerate(self.asked)]
        judged = stability.judge(problem, State.join([s for s, _ in begun]), joined([loads for _, loads in begun]))
        stands = judged.code <= stability.NEUTRAL
        rows = np.flatnonzero([stands[self.of.rows(int(k))].all() for k in self.of.owner])
        out: list[Margin | None] = [None] * len(self.asked)
        if len(rows) == 0:
            return out

        def part(some: Index, factor: Array) -> Problem:
            return self.at(rows[some], factor)

        paths = follow(part, judged.state.take(rows), np.ones(len(rows)), replace(STOPS, most=MOST), _nothing, progress)
        place = {int(row): k for k, row in enumerate(rows)}
        for k, one in enumerate(self.asked):
            mine = [place[row] for row in self.of.rows(k) if row in place]
            if mine:
                first = min(mine, key=lambda j: paths.low[j])
                failed, lost = bool(paths.failed[first]), bool(paths.lost[first])
                out[k] = Margin(one.line, raised(one.line), float(paths.low[first]), lost, failed)
        return out


def _nothing(problem: Problem, state: State) -> Array:
    """Nothing is watched on the way."""
    return np.zeros((problem.cases, 0))
