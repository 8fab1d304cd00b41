"""Case lines to solved, judged and recovered batches."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, fields, replace
from functools import lru_cache
from typing import Any

import numpy as np
from numpy.typing import NDArray

from guys import band, recovery, stability
from guys.checks import demands, spars
from guys.checks.demands import Demands
from guys.equilibrium import Problem, State, side_by_side
from guys.loads import CaseLine, LoadCases, joined, setting_line
from guys.results import SparLine
from guys.rotation import Array, turned
from guys.setting import Setting
from guys.studies import peaks
from guys.studies.peaks import Asked

CHUNK = 144
"""Cases in a chunk: large enough for numpy, small enough for the cache (measured best between 72 and 250)."""
SWEPT_STEP = 1 / 32
"""Steps of the load to which the end of a path is found where only standing or falling is asked."""
AT_ONCE = 1.0
"""The same where no path is followed."""
CURVE_POINTS = 41
"""Points of a drawn cable: chords between them leave the curve of a cable that sags a tenth of its length by 1/16,000 of that."""
ALONG = ("displacement", "axial", "bending", "torsion", "shear")
"""What a `SparLine` holds by case."""
PURE = 1e-2
"""Share of the greatest turn in a mode below which a spar counts as not taking part."""
Progress = Callable[[int, int], None]
"""Called with cases done and cases in all."""
Change = Callable[[LoadCases, NDArray[np.int64]], LoadCases]
"""Changes the loads of states, told the line each belongs to."""
Start = tuple[State, LoadCases]
"""States of equilibrium and their loads, from which paths go out."""


@dataclass(frozen=True)
class Batch:
    """Solved case lines.  Of a line with patches of gust everything is the peak over its states (`guys.studies.peaks`).

    code : (case,) of `guys.stability`;  error, reference, rounds, lost_at, balance : (case,);  reason, note : (case,) words
    branched : (case,) stands off its straight branch;  spins : (case,) neutral, but only by the free spin of ball-based spars
    forces, demands : of every case, NaN where there is no equilibrium
    mirror, mirror_demands : of the other state of branched cases, mirror_lines theirs
    spars, curves : with detail only
    """

    lines: tuple[CaseLine, ...]
    code: NDArray[np.int64]
    error: Array
    reference: Array
    rounds: NDArray[np.int64]
    lost_at: Array
    balance: Array
    reason: tuple[str | None, ...]
    note: tuple[str | None, ...]
    branched: NDArray[np.bool_]
    spins: NDArray[np.bool_]
    forces: recovery.Forces
    demands: Demands
    mirror: recovery.Forces | None
    mirror_demands: Demands | None
    mirror_lines: tuple[CaseLine, ...]
    spars: tuple[SparLine, ...]
    curves: Array

    @property
    def stands(self) -> NDArray[np.bool_]:
        """Cases with an equilibrium, be it stable or not."""
        return np.asarray(self.code <= stability.UNSTABLE)

    def judged(self) -> tuple[tuple[CaseLine, ...], Demands]:
        """Lines and demands of every state found, mirror states after the rest."""
        if self.mirror_demands is None:
            return self.lines, self.demands
        return self.lines + self.mirror_lines, demands.join([self.demands, self.mirror_demands])

    def take(self, rows: NDArray[np.int64]) -> Batch:
        """The cases `rows`; mirror states stay, all of them."""
        kept: dict[str, Any] = {
            n: getattr(self, n)[rows] for n in ("code", "error", "reference", "rounds", "lost_at", "balance", "branched", "spins")
        }
        kept |= {n: tuple(getattr(self, n)[k] for k in rows) for n in ("lines", "reason", "note")}
        forces = recovery.Forces(**{f.name: getattr(self.forces, f.name)[rows] for f in fields(recovery.Forces)})
        spars = tuple(replace(s, **{n: getattr(s, n)[rows] for n in ALONG}) for s in self.spars)
        return replace(self, **kept, forces=forces, demands=self.demands.take(rows), spars=spars, curves=self.curves[rows])


def solve_lines(
    setting: Setting,
    lines: Sequence[CaseLine],
    detail: bool,
    progress: Progress | None = None,
    change: Change | None = None,
    start: Start | None = None,
    finely: bool = True,
) -> Batch:
    """Solve every line on a setting that stands; `detail`: with spar lines, curves, and, if `finely`, the load at which a case falls;
    `change`: of the loads; `start`: of each line's path, where that is not the one of `starts`."""
    start = starts(setting, lines) if start is None else start
    parts = []
    step = max(1, CHUNK // max((len(line.states()) for line in lines), default=1))
    for first in range(0, len(lines), step):
        share = _share(setting, lines[first : first + step], start, first)
        if change is not None:
            loads = change(share.problem.loads, first + share.asked.owner)
            share = replace(share, problem=replace(share.problem, loads=loads))
        parts += _solved([share], detail, stability.LEAST_STEP if detail and finely else SWEPT_STEP)
        if progress is not None:
            progress(min(first + step, len(lines)), len(lines))
    return join(parts)


def solve_each(settings: Sequence[Setting], lines: Sequence[CaseLine]) -> list[Batch]:
    """The same few lines on settings that stand of layouts side by side (`setting.find_each`), in even lots of about a chunk.

    With spar lines and curves.  Paths are not followed: a case whose stable state is not found from the setting at once, within the swing
    that `stability.judge` takes without doubt, counts as one that falls.
    """
    shares = [_share(setting, lines, starts(setting, lines)) for setting in settings]
    lots = math.ceil(sum(share.problem.cases for share in shares) / CHUNK)
    rows = np.array_split(np.arange(len(shares)), max(lots, 1))
    return [batch for lot in rows for batch in _solved([shares[k] for k in lot], True, AT_ONCE)]


@dataclass(frozen=True)
class _Share:
    """Lines of one setting: what they ask, the problem of their states, and where the paths of these go out from."""

    asked: Asked
    problem: Problem
    start: Start


def _share(setting: Setting, lines: Sequence[CaseLine], start: Start, first: int = 0) -> _Share:
    """first : place of the first line in `start`"""
    asked, states = peaks.asked(lines)
    rows = first + asked.owner
    return _Share(asked, setting.under(states), (start[0].take(rows), start[1].take(rows)))


def _solved(shares: Sequence[_Share], detail: bool, least_step: float) -> list[Batch]:
    """Every share judged, all at once, and recovered by itself."""
    if not shares:
        return []
    state, loads = State.join([s.start[0] for s in shares]), joined([s.start[1] for s in shares])
    whole = side_by_side([s.problem for s in shares])
    judged = stability.judge(whole, state, loads, least_step)
    rows = np.split(np.arange(whole.cases), np.cumsum([s.problem.cases for s in shares])[:-1])
    return [recover(s.problem, judged.take(own), detail, s.asked) for s, own in zip(shares, rows, strict=True)]


def as_set(setting: Setting, lines: int) -> Start:
    """The setting as the start of so many lines."""
    rows = np.zeros(lines, dtype=np.int64)
    return setting.state.take(rows), setting.loads.take(rows)


def starts(setting: Setting, lines: Sequence[CaseLine]) -> Start:
    """Where the path of every line goes out from: the setting; without cables, still air without them, where that stands.

    So a cable that is away has faded before the wind rises, and its fading is followed once, finely, for all winds.
    """
    sets = tuple(dict.fromkeys(((), *(line.without for line in lines))))
    if len(sets) == 1:
        return as_set(setting, len(lines))
    calm, judged = at_rest(setting, sets)
    row = {s: k if judged.code[k] <= stability.NEUTRAL else 0 for k, s in enumerate(sets)}
    rows = np.array([row[line.without] for line in lines], dtype=np.int64)
    return judged.state.take(rows), calm.loads.take(rows)


@lru_cache(maxsize=8)
def at_rest(setting: Setting, sets: tuple[tuple[str, ...], ...]) -> tuple[Problem, stability.Judged]:
    """Still air, dead load alone, without each set of cables."""
    still = setting_line(setting.problem.structure.scenario)
    calm = setting.under([replace(still, without=s) for s in sets])
    return calm, stability.judge(calm, setting.state, setting.loads)


def recover(problem: Problem, judged: stability.Judged, detail: bool, asked: Asked | None = None) -> Batch:
    """What is asked for, from judged states; asked: the lines they are of, left out: each is of a line of its own."""
    asked = asked or peaks.grouped(problem.loads.lines, [1] * problem.cases)
    found = problem.evaluate(judged.state)
    forces = recovery.forces(problem, judged.state, found)
    gone = np.flatnonzero(judged.code >= stability.NONE)
    scenario = problem.structure.scenario
    acting = recovery.sections(problem, judged.state, found, range(len(scenario.spar)) if detail else spars.judged(scenario))
    along = recovery.lines(problem, judged.state, acting) if detail else ()
    curves = recovery.curves(problem, judged.state, found, CURVE_POINTS) if detail else np.zeros((problem.cases, 0, 0, 3))
    curves[gone] = np.nan
    balance = recovery.whole_balance(problem, judged.state, found, forces)
    balance[gone] = np.nan
    notes = [_note(problem, judged, k) for k in range(problem.cases)]
    reasons = [_reason(problem, judged, forces, k) for k in range(problem.cases)]
    worst = np.array([max(asked.rows(k), key=lambda row: judged.code[row]) for k in range(len(asked.lines))])
    settled, spins = judged.code == stability.STABLE, np.array([spins for _, spins in notes])
    mirror, mirror_demands, mirror_lines = _mirrored(problem, judged, asked)
    judged_forces, judged_demands = _judged(problem, forces, acting, gone, asked)
    return Batch(
        lines=asked.lines,
        code=judged.code[worst],
        error=np.maximum.reduceat(judged.error, asked.start),
        reference=np.maximum.reduceat(found.reference, asked.start),
        rounds=np.add.reduceat(judged.rounds, asked.start),
        lost_at=judged.lost_at[worst],
        balance=np.fmax.reduceat(balance, asked.start),
        reason=tuple(_in_patch(problem, asked, reasons[row], row) for row in worst),
        note=tuple(_first(_in_patch(problem, asked, notes[row][0], row) for row in asked.rows(k)) for k in range(len(worst))),
        branched=np.logical_or.reduceat(judged.branched, asked.start) & (judged.code[worst] <= stability.NEUTRAL),
        spins=np.logical_and.reduceat(settled | spins, asked.start) & np.logical_or.reduceat(spins, asked.start),
        forces=judged_forces,
        demands=judged_demands,
        mirror=mirror,
        mirror_demands=mirror_demands,
        mirror_lines=mirror_lines,
        spars=peaks.spars(asked, [_blank(s, gone) for s in along]),
        curves=curves[asked.start],
    )


def _judged(
    problem: Problem, forces: recovery.Forces, acting: recovery.Acting, gone: NDArray[np.int64], asked: Asked
) -> tuple[recovery.Forces, Demands]:
    """Forces and demands of the lines, NaN where a state of theirs is gone."""
    s = problem.structure
    states = demands.of(s, problem.loads.lines, forces, acting).blank(gone)
    lost = np.unique(asked.owner[gone])
    together = peaks.forces(asked, forces)
    if asked.plain:
        return together.blank(lost), states
    whole = demands.of(s, asked.lines, together, peaks.acting(asked, acting))
    return together.blank(lost), peaks.judged(asked, whole, states).blank(lost)


def _mirrored(
    problem: Problem, judged: stability.Judged, asked: Asked
) -> tuple[recovery.Forces | None, Demands | None, tuple[CaseLine, ...]]:
    """The same of lines that branch, in the other state where there is one."""
    if not judged.mirror:
        return None, None, ()
    part, rows = asked.take(sorted({int(asked.owner[k]) for k in judged.mirror}))
    some = problem.take(rows)
    beside = [judged.mirror.get(int(k)) or judged.state.take(np.array([k])) for k in rows]
    other = State.join(beside)
    again = some.evaluate(other)
    forces = recovery.forces(some, other, again)
    acting = recovery.sections(some, other, again, spars.judged(some.structure.scenario))
    gone = np.flatnonzero(judged.code[rows] >= stability.NONE)
    return *_judged(some, forces, acting, gone, part), part.lines


def _first(words: Iterable[str | None]) -> str | None:
    """The first there are."""
    return next((some for some in words if some), None)


def _in_patch(problem: Problem, asked: Asked, words: str | None, row: int) -> str | None:
    """What is said of a state, with its gust where it is one of several."""
    patch = problem.loads.lines[row].patch
    return words if words is None or asked.plain or patch is None else f"{patch.words}: {words}"


def _blank(spar: SparLine, gone: NDArray[np.int64]) -> SparLine:
    for name in ALONG:
        getattr(spar, name)[gone] = np.nan
    return spar


def join(parts: Sequence[Batch]) -> Batch:
    """Batches one after another."""
    mirrors = [p.mirror for p in parts if p.mirror is not None]
    mirror_demands = [p.mirror_demands for p in parts if p.mirror_demands is not None]

    def spar(k: int) -> SparLine:
        first = parts[0].spars[k]
        each = {n: np.concatenate([getattr(p.spars[k], n) for p in parts]) for n in ALONG}
        return SparLine(first.name, first.station, first.drawn, first.axes, **each)

    def together(name: str) -> NDArray[Any]:
        return np.concatenate([getattr(p, name) for p in parts])

    return Batch(
        lines=tuple(x for p in parts for x in p.lines),
        code=together("code"),
        error=together("error"),
        reference=together("reference"),
        rounds=together("rounds"),
        lost_at=together("lost_at"),
        balance=together("balance"),
        reason=tuple(x for p in parts for x in p.reason),
        note=tuple(x for p in parts for x in p.note),
        branched=together("branched"),
        spins=together("spins"),
        forces=recovery.join([p.forces for p in parts]),
        demands=demands.join([p.demands for p in parts]),
        mirror=recovery.join(mirrors) if mirrors else None,
        mirror_demands=demands.join(mirror_demands) if mirror_demands else None,
        mirror_lines=tuple(x for p in parts for x in p.mirror_lines),
        spars=tuple(spar(k) for k in range(len(parts[0].spars))),
        curves=together("curves"),
    )


def bearing_words(bearing: float) -> str:
    """A bearing as the trade writes it."""
    return f"{round(math.degrees(bearing)) % 360}°"


def _reason(problem: Problem, judged: stability.Judged, forces: recovery.Forces, k: int) -> str | None:
    """What happens to a case that does not stand, in words."""
    code = int(judged.code[k])
    if code <= stability.NEUTRAL:
        return None
    if code == stability.FAILED:
        return "the solver failed on this case; this is a fault of the program, not a statement about the structure"
    if judged.drifts[k]:
        motion = f"the load drives a motion that nothing resists{_ball_words(problem)}"
        return f"no equilibrium is near{_share_words(problem, judged, k)}: {motion}"
    one = problem.take(np.array([k]))
    state = judged.state.take(np.array([k]))
    before, after = state, judged.beyond.get(k) if code == stability.NONE else None
    if after is None and stability.turned_over(one, state)[0]:
        before, after = one.drawn(), state
    how = "is in an equilibrium that does not hold: it goes" if code == stability.UNSTABLE else "falls"
    return f"{falling_words(one, before, after, how)}{_share_words(problem, judged, k)}{slack_words(problem, forces.slack[k])}"


def falling_words(one: Problem, before: State, after: State | None, how: str = "falls") -> str:
    """Which spar falls toward which bearing, from one state to the next; None: along the lowest mode."""
    spar, bearing = stability.falling_part(one, before, after or along_lowest_mode(one, before))
    return f"{one.structure.scenario.spar[spar].name} {how} toward {bearing_words(bearing)}"


def slack_words(problem: Problem, slack: NDArray[np.bool_]) -> str:
    """The cables (cable,) that are slack."""
    dropped = [problem.structure.scenario.cable[c].name for c in np.flatnonzero(slack)]
    return f"; slack by then: {', '.join(dropped)}" if dropped else "; no cable is slack by then"


def _ball_words(problem: Problem) -> str:
    """Spars that spin freely, where there are such."""
    balls = [spar.name for spar in problem.structure.scenario.spar if spar.base == "ball"]
    return f" ({' and '.join(balls)} may spin about its own axis on its ball base)" if balls else ""


def _share_words(problem: Problem, judged: stability.Judged, k: int) -> str:
    """At what share of the load, or of the way to a case that takes cables away or changes more than one load."""
    share = judged.lost_at[k]
    if math.isnan(share):
        return ""
    line = problem.loads.lines[k]
    other = line.dead != 1 or line.ice > 0 or problem.loads.warming[k] != 0
    whole = "the load"
    if line.without and line.wind == 0 and not other:
        whole = f"the way to being without {' and '.join(line.without)}"
    elif line.without or other:
        whole = "the way from still air to this case"
    return f" at {max(math.floor(100 * share) / 100, 0.01):.2f} of {whole}"


def along_lowest_mode(one: Problem, state: State) -> State:
    """A state a little along the lowest mode that is no free motion, in the sense of the moves made so far."""
    found = stability.modes(one, state)
    costs = np.flatnonzero(np.abs(found.value) > stability.ZERO)
    shape = found.shape[costs[:1] if len(costs) else [0]]
    if np.sum(shape[0, :, :2] * state.u[0, :, :2]) < 0:
        shape = -shape
    step = band.pick(one.pattern, 0.01 * one.structure.height * shape)
    return one.advance(state, one.evaluate(state), step)


def _note(problem: Problem, judged: stability.Judged, k: int) -> tuple[str | None, bool]:
    """What is to be said of a case that stands, and whether it is neutral by the free spin of ball-based spars alone."""
    code = int(judged.code[k])
    if code == stability.NEUTRAL:
        return _free_motion(problem.take(np.array([k])), judged.state.take(np.array([k])))
    if judged.branched[k] and code <= stability.NEUTRAL:
        both = "; its mirror image is stable too and counts in the worst loads" if k in judged.mirror else ""
        rest = f"pushed along its lowest mode the structure comes to rest in this stable one nearby{both}"
        return f"the straight equilibrium is unstable; {rest}", False
    return None, False


def _free_motion(one: Problem, state: State) -> tuple[str, bool]:
    """The free motion of a neutral case in words, and whether it is nothing but the spin of ball-based spars."""
    modes = stability.modes(one, state)
    s = one.structure
    spun, other = set(), set()
    for value, shape in zip(modes.value, modes.shape, strict=True):
        if abs(value) > stability.ZERO:
            continue
        greatest = np.abs(shape[:, 3:]).max()
        for k, spar in enumerate(s.scenario.spar):
            mine = np.flatnonzero(s.spar == k)
            axis = turned(state.psi[0, mine], s.axes[k, 2])
            spin = np.sum(shape[mine, 3:] * axis, axis=-1)
            rest = max(np.abs(shape[mine, 3:] - spin[:, None] * axis).max(), np.abs(shape[mine, :3]).max() / s.height)
            if rest > PURE * greatest or (np.abs(spin).max() > PURE * greatest and spar.base != "ball"):
                other.add(spar.name)
            elif np.abs(spin).max() > PURE * greatest:
                spun.add(spar.name)
    if other:
        return f"a motion costs nothing: {', '.join(sorted(other))} may turn or sway freely", False
    return f"{', '.join(sorted(spun))} may spin freely about its own axis", True
