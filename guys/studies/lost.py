"""Every cable and every anchor taken away in turn, every case and direction: stands or falls, and what is left of the factors.

An anchor lost takes all its cables with it; with `lost.pairs` every two cables and every two anchors go together as well.  Unstressed
lengths are those of the whole structure as set.  Still air comes first: dead load alone, without what is lost.  What falls then is said to
fall in every case and wind, and these are not solved: a wind that would hold it up drops.  All else is solved, in batches:

    1. every case and direction with all cables   2. still air without each   3. every case and direction without each that stands, along
    paths that go out from 2   4. with `lost.sudden` > 1 the same again at the far point of the swing (`guys.loads.parting`); loads and
    verdicts are the worse of both

A loss that leaves the same cables as another (an anchor with one cable) is solved once.  Directions are the scenario's own and every 10
degrees round the circle; peaks between them are not narrowed down.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from itertools import combinations
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from guys.equilibrium import State
from guys.errors import Fault, ScenarioError
from guys.limits import Limit
from guys.loads import CaseLine, LoadCases
from guys.loads.parting import parted
from guys.scenario import Scenario
from guys.scenario.model import AnchorPoint
from guys.setting import Setting, find
from guys.structure import build
from guys.studies.batch import Batch, Change, Progress, Start, at_rest, recover, solve_lines
from guys.studies.cells import FALLS, Cells, cells_of, joined, without_loads
from guys.studies.directions import round_lines
from guys.studies.limit import most_of, solved
from guys.version import __version__

Kind = Literal["nothing", "cable", "anchor", "two cables", "two anchors"]
ITS_STILL_AIR = "falls in still air already; this wind was not solved"


@dataclass(frozen=True)
class Loss:
    """What is lost: nothing, one or two cables or anchors by name; cables : all that go with it."""

    kind: Kind
    name: tuple[str, ...]
    cables: tuple[str, ...]

    @property
    def words(self) -> str:
        """Its name in tables."""
        return "nothing" if self.kind == "nothing" else f"{self.kind} {' and '.join(self.name)}"


@dataclass(frozen=True)
class Lost:
    """What the study found.

    losses : the first is nothing;  lines : the first is still air;  cells : (loss,) of the lines each;
    still : (loss,) falls in still air, so that its other lines were not solved
    winds : (loss,) the limit of every line with wind, in their order; nothing where not asked for, or where it falls in still air
    """

    scenario: Scenario
    version: str
    losses: tuple[Loss, ...]
    lines: tuple[CaseLine, ...]
    cells: tuple[Cells, ...]
    still: tuple[bool, ...]
    winds: tuple[tuple[Limit, ...], ...] = ()

    def limit_at(self, k: int, line: int) -> Limit | None:
        """The limit of one loss in the case and from the bearing of a line; None where there is none."""
        at = self.lines[line].name, self.lines[line].wind_from
        return next((limit for limit in self.winds[k] if (limit.case, limit.wind_from) == at), None) if self.winds else None

    def least_wind(self, k: int) -> Limit | None:
        """The lowest limit of one loss; None where none was looked for."""
        return min(self.winds[k], key=lambda limit: limit.known, default=None) if self.winds else None

    def least_lost(self, k: int) -> Limit | None:
        """That of the wind at which equilibrium is lost first; None where it is lost in none looked at."""
        known = [limit for limit in self.winds[k] if not math.isnan(limit.lost)] if self.winds else []
        return min(known, key=lambda limit: limit.lost, default=None)

    @property
    def verdict(self) -> NDArray[np.int64]:
        """(loss, line) codes."""
        return np.array([c.verdict for c in self.cells])


def lose(scenario: Scenario, progress: Progress | None = None, winds: bool = False) -> Lost:
    """Take everything away in turn; `winds`: and find how much wind is still stood, from every direction, as `guys limit` does.

    A structure that falls is a result, not an exception.  Raises `ScenarioError` where there is no cable, or no still-air state
    meets the initial tensions.
    """
    if not scenario.cable:
        fault = Fault(scenario.path, None, None, "cable", "the file has none, so nothing can be lost; give [[cable]] or [[guy_level]]")
        raise ScenarioError([fault])
    scenario = after_a_loss(scenario)
    setting = find(build(scenario))
    losses, lines = losses_of(scenario), round_lines(scenario)
    if not setting.stands:
        return _nothing_stands(setting, losses, lines)
    whole = solve_lines(setting, lines, False, progress)
    sets = list(dict.fromkeys(loss.cables for loss in losses[1:]))
    calm, judged = at_rest(setting, tuple(sets))
    study = _Study(setting, whole, judged.state, calm.loads, progress)
    first = study.swung(sets, list(range(len(sets))), slice(0, 1), cells_of(recover(calm, judged, detail=False)))
    standing = [k for k, s in enumerate(sets) if first[s].verdict[0] < FALLS]
    rest = study.solved(sets, standing)
    found = {s: joined(first[s], rest[s]) if s in rest else _fallen(first[s], len(lines)) for s in sets}
    cells = (cells_of(whole), *(found[loss.cables] for loss in losses[1:]))
    still = tuple(len(loss.cables) > 0 and loss.cables not in rest for loss in losses)
    blown = _winds(setting, whole.lines, losses, still, progress) if winds else ()
    return Lost(scenario, __version__, losses, lines, cells, still, blown)


def _winds(
    setting: Setting, lines: Sequence[CaseLine], losses: Sequence[Loss], still: Sequence[bool], progress: Progress | None
) -> tuple[tuple[Limit, ...], ...]:
    """The limits of every loss that stands in still air, each set of cables once, all together."""
    wind = setting.problem.structure.scenario.wind
    blowing = [line for line in lines if line.wind > 0 and not math.isnan(line.wind_from)]
    sets = list(dict.fromkeys(loss.cables for loss, falls in zip(losses, still, strict=True) if not falls))
    if wind is None or not blowing or not sets:
        return ((),) * len(losses)
    wanted = [_away(line, cables) for cables in sets for line in blowing]
    each = solved(setting, wanted, most_of(wind), progress)
    of = {cables: tuple(each[k * len(blowing) : (k + 1) * len(blowing)]) for k, cables in enumerate(sets)}
    return tuple(() if falls else of[loss.cables] for loss, falls in zip(losses, still, strict=True))


def _away(line: CaseLine, cables: tuple[str, ...]) -> CaseLine:
    return replace(line, without=tuple(dict.fromkeys((*line.without, *cables))))


def after_a_loss(scenario: Scenario) -> Scenario:
    """The scenario with the allowables of `[lost]` where it gives its own."""
    allowed = scenario.allowables
    own = {key: value for key in ("cable", "anchor", "sliding", "lean") if (value := getattr(scenario.lost, key)) is not None}
    factored = {name: factor for name, factor in allowed.factored.items() if name not in own}
    after = allowed.model_copy(update={**own, "factored": factored, "defaulted": allowed.defaulted - own.keys()})
    return scenario.model_copy(update={"allowables": after})


def losses_of(scenario: Scenario) -> tuple[Loss, ...]:
    """Nothing, every cable, every anchor that holds one, and every two of each where asked for."""
    cables = {c.name: (c.name,) for c in scenario.cable}
    anchors = {a.name: _held_by(scenario, a.name) for a in scenario.anchor}
    anchors = {name: held for name, held in anchors.items() if held}
    out = [Loss("nothing", (), ())]
    out += [Loss("cable", (name,), some) for name, some in cables.items()]
    out += [Loss("anchor", (name,), some) for name, some in anchors.items()]
    if scenario.lost.pairs:
        out += [Loss("two cables", pair, pair) for pair in combinations(cables, 2)]
        out += [Loss("two anchors", (a, b), _in_order(scenario, {*anchors[a], *anchors[b]})) for a, b in combinations(anchors, 2)]
    return tuple(out)


def _held_by(scenario: Scenario, anchor: str) -> tuple[str, ...]:
    return tuple(c.name for c in scenario.cable if isinstance(c.to, AnchorPoint) and c.to.anchor == anchor)


def _in_order(scenario: Scenario, names: set[str]) -> tuple[str, ...]:
    return tuple(c.name for c in scenario.cable if c.name in names)


@dataclass(frozen=True)
class _Study:
    """What the batches share: all cases with everything in place, and the still-air states and loads of every set taken away.

    Paths of cases without a set go out from still air without it: on the way only the load grows, and it is the same start for all winds.
    """

    setting: Setting
    whole: Batch
    state: State
    loads: LoadCases
    progress: Progress | None

    def solved(self, sets: Sequence[tuple[str, ...]], some: Sequence[int]) -> dict[tuple[str, ...], Cells]:
        """The cells of some sets taken away in every line but still air, all in one batch."""
        if not some or len(self.whole.lines) == 1:
            return {sets[k]: _none_of(self.whole) for k in some}
        wanted, start = self._without(sets, some, slice(1, None))
        cells = cells_of(solve_lines(self.setting, wanted, False, self.progress, start=start))
        return self.swung(sets, some, slice(1, None), cells)

    def swung(
        self, sets: Sequence[tuple[str, ...]], some: Sequence[int], lines: slice, rest: Cells
    ) -> dict[tuple[str, ...], Cells]:
        """The cells at rest of some sets in some lines, or the worse of rest and the far point of the swing where that is asked for."""
        n, sudden = len(self.whole.lines[lines]), self.setting.problem.structure.scenario.lost.sudden
        if sudden > 1:
            wanted, start = self._without(sets, some, lines)
            rows = np.tile(np.arange(len(self.whole.lines))[lines], len(some))
            swing = swing_of(self.setting, self.whole, rows, sudden)
            rest = _worse(rest, cells_of(solve_lines(self.setting, wanted, False, self.progress, swing, start)))
        return {sets[s]: rest.take(range(k * n, (k + 1) * n)) for k, s in enumerate(some)}

    def _without(self, sets: Sequence[tuple[str, ...]], some: Sequence[int], lines: slice) -> tuple[list[CaseLine], Start]:
        """Lines without each of some sets, and where their paths go out from."""
        wanted = [_away(x, sets[k]) for k in some for x in self.whole.lines[lines]]
        rows = np.repeat(np.array(some, dtype=np.int64), len(self.whole.lines[lines]))
        return wanted, (self.state.take(rows), self.loads.take(rows))


def _none_of(whole: Batch) -> Cells:
    return cells_of(whole).take([])


def swing_of(setting: Setting, whole: Batch, rows: NDArray[np.int64], sudden: float) -> Change:
    """What the cables that go leave over of the forces they exert in the same case with all of them; nothing where that does not stand."""
    structure, forces = setting.problem.structure, whole.forces
    at_to, at_from = (np.nan_to_num(getattr(forces, name)[rows]) for name in ("on_anchor", "on_spar"))
    return lambda loads, some: parted(structure, loads, at_to[some], at_from[some], sudden)


def _worse(a: Cells, b: Cells) -> Cells:
    """Line by line the graver verdict, the greater use and the greater loads; none of these where it falls in either."""
    swings = (b.use > a.use) | np.isnan(a.use)
    governs, mode, required = (np.where(swings, getattr(b, n), getattr(a, n)) for n in ("governs", "mode", "required"))
    reason = tuple(x or (f"as it swings: {y}" if y else "") for x, y in zip(a.reason, b.reason, strict=True))
    use, tension, pull = (np.fmax(getattr(a, n), getattr(b, n)) for n in ("use", "tension", "pull"))
    return without_loads(Cells(np.maximum(a.verdict, b.verdict), use, governs, mode, required, tension, pull, reason, a.items))


def _fallen(still: Cells, lines: int) -> Cells:
    """One that falls in still air: so in every other line too, which are not solved."""
    every = still.take([0] * lines)
    return replace(every, reason=(still.reason[0], *[ITS_STILL_AIR] * (lines - 1)))


def _nothing_stands(setting: Setting, losses: tuple[Loss, ...], lines: tuple[CaseLine, ...]) -> Lost:
    """Where the structure falls in still air with all its cables, so it does without some."""
    alone = recover(setting.problem, setting.judged, detail=False)
    cells = _fallen(cells_of(alone), len(lines))
    scenario = setting.problem.structure.scenario
    many = len(losses)
    return Lost(scenario, __version__, losses, lines, (cells,) * many, (True,) * many)


def judged_by(found: Lost) -> tuple[str, ...]:
    """What was tested, and how, in words."""
    sudden = found.scenario.lost.sudden
    swing = "Taken away slowly: the swing of a cable that parts at once is not in these loads; lost.sudden puts it in."
    if sudden > 1:
        swing = (
            f"The far point of the swing has the lost cable's end forces taken away {sudden:g} times (lost.sudden, the user's): an "
            "equivalent static load; 2 bounds one linear step without damping. Loads and verdicts are the worse of swing and rest."
        )
    return (
        "Taken from the whole structure as set, unstressed lengths kept. Still air (dead load alone) comes first: what falls in it is said "
        "to fall in every case and wind, and those were not solved. Loads and factors are of what stands.",
        "Wind from the listed directions and every 10°; peaks between them are not narrowed down.",
        swing,
    )
