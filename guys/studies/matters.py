"""What matters most: how the worst anchor load and the reserve move with what is only roughly known.

    initial tension    all given tensions times 1 -+ r, and the setting found again
    rope stiffness     EA of all ropes times 1 -+ r, and the setting found again: the tensions are those asked for
    drag               all drag coefficients times 1 -+ r, those chosen from the shape too, at the Reynolds numbers they were chosen for
    level of an anchor the unstressed lengths found, with one anchor after another lower or higher
    temperature        every case colder and warmer; still air stays at the setting's temperature

Each is solved, one at a time, none is extrapolated.  Read off are the greatest resultant on any anchor and the reserve, the least factor of
anything judged over the factor required (1: at its allowable), over all cases, the windy ones in the listed directions and every 10
degrees.  Drag and temperature leave the structure as it is and go in one batch with the point itself.  A range of 0 gives the point.

And the stability reserve: of the listed cases and directions, the one whose equilibrium is lost at the least factor on its wind (on all its
loads where no case has wind) is followed to that loss again with every end (`guys.studies.margin`).
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import dataclass, field, replace

import numpy as np

from guys.checks.extremes import first_greatest
from guys.errors import ScenarioError
from guys.loads import CaseLine, lines_of
from guys.reserves import WORDS
from guys.scenario import Scenario
from guys.scenario.model import AnchorPoint
from guys.setting import Setting, find
from guys.structure import build
from guys.studies.batch import Progress, recover, solve_lines
from guys.studies.cells import FALLS, NOT_FOUND, Cells, cells_of
from guys.studies.directions import round_lines
from guys.studies.margin import MOST, Asked, Margin, least, margins
from guys.version import __version__

MINUS, PLUS = -1.0, 1.0
Change = Callable[[float], Scenario]


@dataclass(frozen=True)
class Reading:
    """What one set of cases came to.

    pull : greatest on any anchor [N], of `anchor`;  reserve : least factor over the one required, of `thing`;  each with its line
    falls : lines without a stable equilibrium, with the first `reason`;  fault : the solver failed on some
    margin : the stability reserve, of one line under every end;  asked : that line, and the setting here
    NaN and None: there is none
    """

    pull: float
    anchor: str
    pull_line: CaseLine | None
    reserve: float
    thing: str
    reserve_line: CaseLine | None
    falls: int
    reason: str
    fault: bool
    asked: Asked | None = field(default=None, compare=False, repr=False)
    margin: Margin | None = None

    @property
    def stands_to(self) -> float:
        """The greatest factor of the stability reserve; NaN where there is none, or it is not known."""
        return math.nan if self.margin is None or self.margin.failed else self.margin.stands_to


@dataclass(frozen=True)
class Span:
    """One range: what it is of, its two ends in words and as read; given: by the user;  lacking: why it was not solved."""

    what: str
    ends: tuple[str, str]
    given: bool
    less: Reading
    more: Reading
    lacking: str = ""

    def moves(self, point: Reading) -> float:
        """Greatest share by which an end moves pull or a reserve; infinite where it makes something fall that stands."""
        if self.lacking:
            return -1.0
        if max(self.less.falls, self.more.falls) > point.falls:
            return math.inf
        pairs = [(getattr(e, of), getattr(point, of)) for of in ("pull", "reserve", "stands_to") for e in (self.less, self.more)]
        return max((abs(a / b - 1) for a, b in pairs if math.isfinite(a) and math.isfinite(b) and b != 0), default=0.0)


@dataclass(frozen=True)
class Matters:
    """point : as the scenario has it;  spans : those that move it most first;  stands : in still air."""

    scenario: Scenario
    version: str
    point: Reading
    spans: tuple[Span, ...]
    stands: bool


def weigh(scenario: Scenario, progress: Progress | None = None) -> Matters:
    """Vary everything of `[ranges]` in turn.

    A structure that falls is a result, not an exception.  Raises `ScenarioError` where no still-air state meets the initial tensions.
    """
    setting = find(build(scenario))
    if not setting.stands:
        point = _read(setting, cells_of(recover(setting.problem, setting.judged, detail=False)), setting.loads.lines)
        return Matters(scenario, __version__, point, (), False)
    margin = _weakest(setting, progress)
    point, batched = _in_one_batch(setting, margin, progress)
    varied = [*batched, *_set_again(scenario, point, progress), *_levels(setting, point, progress)]
    spans = _with_margins(varied, point, progress)
    return Matters(scenario, __version__, point, tuple(sorted(spans, key=lambda s: -s.moves(point))), True)


def _weakest(setting: Setting, progress: Progress | None) -> Margin | None:
    """The listed case and direction whose equilibrium is lost first; of all its loads only where none has wind."""
    lines = lines_of(setting.problem.structure.scenario)
    windy = [line for line in lines if line.wind > 0]
    return least(margins([Asked(setting, line) for line in windy or lines], progress))


def _with_margins(spans: Sequence[Span], point: Reading, progress: Progress | None) -> list[Span]:
    """The spans with the stability reserve at either end, all followed together."""
    ends = [r for s in spans for r in (s.less, s.more) if r is not point and r.asked is not None]
    found = margins([r.asked for r in ends if r.asked is not None], progress)
    known = {id(r): replace(r, margin=m) for r, m in zip(ends, found, strict=True)}
    return [replace(s, less=known.get(id(s.less), s.less), more=known.get(id(s.more), s.more)) for s in spans]


def _in_one_batch(setting: Setting, margin: Margin | None, progress: Progress | None) -> tuple[Reading, list[Span]]:
    """The point, and what changes loads alone."""
    scenario = setting.problem.structure.scenario
    ranges, lines = scenario.ranges, round_lines(scenario)
    raised = () if margin is None else (margin.line,)
    blown, warmed = [], []
    for side in (MINUS, PLUS):
        blown.append([replace(x, drag=1 + side * ranges.drag) for x in (*lines, *raised)])
        warm = (replace(x, temperature=x.temperature + side * ranges.temperature) for x in (*lines[1:], *raised))
        warmed.append([lines[0], *warm])
    no_wind = "" if any(not math.isnan(x.wind_from) for x in lines) else "no case has wind"
    stiff = [name for name, rope in scenario.rope.items() if rope.expansion is None and any(c.rope == name for c in scenario.cable)]
    no_growth = f"no expansion given for rope {', '.join(stiff)}" if stiff else ""
    kelvin = [f"{ranges.temperature:g} K {w}" for w in ("colder", "warmer")]
    wanted = [
        ("drag", _percent(ranges.drag), "drag", blown, no_wind),
        ("temperature", (kelvin[0], kelvin[1]), "temperature", warmed, no_growth),
    ]
    some = [w for w in wanted if not w[4] and getattr(ranges, w[2]) > 0]
    n, groups = len(lines), [[*lines, *raised], *(g for w in some for g in w[3])]
    cells = cells_of(solve_lines(setting, [x for group in groups for x in group[:n]], False, progress))
    read = [_read(setting, cells.take(range(k * n, k * n + n)), lines, group[n:]) for k, group in enumerate(groups)]
    ends = {w[0]: (read[1 + 2 * k], read[2 + 2 * k]) for k, w in enumerate(some)}
    point = replace(read[0], margin=margin)
    return point, [Span(w[0], w[1], w[2] in ranges.model_fields_set, *ends.get(w[0], (point, point)), w[4]) for w in wanted]


def _percent(share: float) -> tuple[str, str]:
    return f"−{100 * share:g} %", f"+{100 * share:g} %"


def _set_again(scenario: Scenario, point: Reading, progress: Progress | None) -> list[Span]:
    """What changes the setting: tensions and stiffness."""
    ranges = scenario.ranges

    def tensions(side: float) -> Scenario:
        return with_tensions(scenario, 1 + side * ranges.tension)

    def stiffness(side: float) -> Scenario:
        factor = 1 + side * ranges.stiffness
        ropes = {name: r.model_copy(update={"stiffness": factor * r.stiffness}) for name, r in scenario.rope.items()}
        return scenario.model_copy(update={"rope": ropes})

    none = "" if any(c.tension is not None for c in scenario.cable) else "no cable is given by tension"
    bare = "" if scenario.cable else "there is no cable"
    return [
        _span("initial tension", _percent(ranges.tension), "tension", tensions, (ranges.tension, none), scenario, point, progress),
        _span("rope stiffness", _percent(ranges.stiffness), "stiffness", stiffness, (ranges.stiffness, bare), scenario, point, progress),
    ]


def with_tensions(scenario: Scenario, factor: float) -> Scenario:
    """The scenario with every initial tension that is given times a factor."""
    cables = [c if c.tension is None else c.model_copy(update={"tension": factor * c.tension}) for c in scenario.cable]
    return scenario.model_copy(update={"cable": tuple(cables)})


def _span(
    what: str, ends: tuple[str, str], key: str, change: Change, size: tuple[float, str], scenario: Scenario, point: Reading,
    progress: Progress | None,
) -> Span:  # fmt: skip
    """One range, solved at both ends of a `size`, not solved where that is 0 or where words say why not."""
    given = key in scenario.ranges.model_fields_set
    if size[0] == 0 or size[1]:
        return Span(what, ends, given, point, point, size[1])
    try:
        less, more = (_solved(change(side), point, progress) for side in (MINUS, PLUS))
    except ScenarioError as error:
        return Span(what, ends, given, point, point, error.faults[0].message)
    return Span(what, ends, given, less, more)


def _levels(setting: Setting, point: Reading, progress: Progress | None) -> list[Span]:
    """Every anchor that holds a cable lower and higher, all unstressed lengths as found."""
    scenario = setting.problem.structure.scenario
    held = {c.to.anchor for c in scenario.cable if isinstance(c.to, AnchorPoint)}
    cut = [
        c.model_copy(update={"length": float(length), "tension": None, "tight": False})
        for c, length in zip(scenario.cable, setting.length, strict=True)
    ]
    size = scenario.ranges.level
    ends = (f"{1000 * size:g} mm lower", f"{1000 * size:g} mm higher")

    def moved(name: str) -> Change:
        def change(side: float) -> Scenario:
            anchors = [a.model_copy(update={"level": a.level + side * size}) if a.name == name else a for a in scenario.anchor]
            return scenario.model_copy(update={"anchor": tuple(anchors), "cable": tuple(cut)})

        return change

    return [
        _span(f"level of anchor {a.name}", ends, "level", moved(a.name), (size, ""), scenario, point, progress)
        for a in scenario.anchor
        if a.name in held
    ]


def _solved(scenario: Scenario, point: Reading, progress: Progress | None) -> Reading:
    """A changed scenario, set and solved anew; the line of the stability reserve is the point's."""
    setting = find(build(scenario))
    if not setting.stands:
        return _read(setting, cells_of(recover(setting.problem, setting.judged, detail=False)), setting.loads.lines)
    lines, raised = round_lines(scenario), [] if point.asked is None else [point.asked.line]
    return _read(setting, cells_of(solve_lines(setting, lines, False, progress)), lines, raised)


def _read(setting: Setting, cells: Cells, lines: Sequence[CaseLine], raised: Sequence[CaseLine] = ()) -> Reading:
    """The greatest pull and the least reserve of the lines that stand; `raised`: the line of the stability reserve, if there is one."""
    scenario = setting.problem.structure.scenario
    fallen = np.flatnonzero(cells.verdict >= FALLS)
    pull, anchor, pull_line = math.nan, "", None
    if cells.pull.size and not np.isnan(cells.pull).all():
        row, k = divmod(first_greatest(cells.pull), cells.pull.shape[1])
        pull, anchor, pull_line = float(cells.pull[row, k]), scenario.anchor[k].name, lines[row]
    reserve, thing, reserve_line = math.nan, "", None
    if not np.isnan(cells.use).all():
        row = first_greatest(cells.use)
        reserve = 1 / float(cells.use[row]) if cells.use[row] > 0 else math.inf
        thing, reserve_line = cells.items[int(cells.governs[row])].thing, lines[row]
    reason = cells.reason[int(fallen[0])] if len(fallen) else ""
    fault = bool((cells.verdict == NOT_FOUND).any())
    asked = next((Asked(setting, line) for line in raised), None)
    return Reading(pull, anchor, pull_line, reserve, thing, reserve_line, len(fallen), reason, fault, asked)


def told(found: Matters) -> tuple[str, ...]:
    """What was solved, in words, and which ranges the user did not give."""
    ranges = found.scenario.ranges
    taken = [f"ranges.{name}" for name in type(ranges).model_fields if name not in ranges.model_fields_set]
    return (
        "Each range is solved at both ends, one at a time; several at once may add up. Drag scales all wind; stiffness and tension are set "
        "anew, the levels of anchors move after the cables were set.",
        "Wind from the listed directions and every 10°; peaks between them are not narrowed down.",
        *_stability(found.point.margin),
        *([f"Not given, and assumed from memory: {', '.join(taken)}."] if taken else []),
    )


def _stability(margin: Margin | None) -> tuple[str, ...]:
    """Which case is followed to the loss of its equilibrium."""
    if margin is None:
        return ()
    what, line = WORDS[margin.loads], margin.line
    wind = "" if math.isnan(line.wind_from) else f", wind from {math.degrees(line.wind_from):g}°"
    first = "the first of the listed cases and directions to be lost" if margin.lost else "no listed case is lost sooner"
    return (
        f"Stability: {what} of case {line.name}{wind}, times the factor at which equilibrium is lost (within 0.1 %): {first}, and followed "
        f"to its loss at every end anew, up to {MOST:g} times.",
    )
