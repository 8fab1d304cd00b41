"""Layouts of a search: anchors put where the numbers say, the site's rules on them, then the line in a few directions.

Rules in order, since each costs more than the one before: a place that is on the surveyed ground, clear of the mast and of other anchors;
boundary and obstacles in plan; equilibrium in every case, found from still air at once (`batch.solve_each`); everything judged within its
allowable, cables over roads and lines included.  A layout that breaks one is not solved further.  Layouts tried together are set and
solved side by side; each comes to what it comes to alone.  `grade` orders layouts: one that holds all rules by its measure, any other
behind it by how far it went and how much it breaks.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace

from guys.checks import plan
from guys.results import Finding, Solution
from guys.scenario import Scenario, drawn
from guys.scenario.anchor_entry import Place
from guys.scenario.model import Anchor
from guys.scenario.search import SearchMove
from guys.scenario.searched import clockwise
from guys.setting import Setting, find_each
from guys.structure import build
from guys.studies import sizing, standing
from guys.studies.batch import Batch
from guys.studies.measures import MEASURES, measured

HOLDS, PAST, FALLS, MISPLACED = range(4)
"""How far a layout went, the worse the greater."""
NEAREST = 0.5
"""[m] from the axis of the first spar, and from each other, that anchors keep in a search: less is no layout (common practice)."""
PEGGED = 2
"""Decimals of a metre to which places are rounded, so that what is handed back is what was tried: a crew pegs to a centimetre."""
UNMET = "initial tensions that no still-air state meets"
STEP = 1e15
"""Between grades of layouts that go to different rules: more than any measure in SI."""


@dataclass(frozen=True)
class Span:
    """One number of a search: of which move, what it is, its bounds; whole: it chooses among the places of a list."""

    move: int
    what: str
    least: float
    most: float
    whole: bool


@dataclass(frozen=True)
class Trial:
    """What became of one layout.

    at : its numbers;  anchors : as placed;  outcome : HOLDS, PAST, ...;  amount : how much it breaks what it breaks
    rule : the first it breaks, empty where it holds all;  values : of the measures asked for, NaN where it was not solved
    still_lean : [rad] of the head that leans most in still air, NaN where it was not solved
    """

    at: tuple[float, ...]
    anchors: tuple[Anchor, ...]
    outcome: int
    amount: float
    rule: str
    values: tuple[float, ...]
    still_lean: float = math.nan

    def grade(self, measure: int, limit: float = math.inf) -> float:
        """The less the better: the value of one measure; behind all that hold, those with the other measure past `limit`, then the rest."""
        if self.outcome == HOLDS:
            over = self.values[1 - measure] - limit if math.isfinite(limit) else 0.0
            return self.values[measure] if over <= 0 else STEP + over
        return STEP * (1 + self.outcome) + min(self.amount, STEP / 2)


def spans(moves: Sequence[SearchMove]) -> tuple[Span, ...]:
    """The numbers of a search."""
    out = []
    for n, move in enumerate(moves):
        if move.places is not None:
            many = len(move.anchors or ())
            out += [Span(n, "places", 0, len(move.places) - many, True)] * many
        if move.radius is not None:
            out.append(Span(n, "radius", move.radius[0], move.radius[1], False))
        if move.bearing is not None:
            out.append(Span(n, "bearing", move.bearing[0], move.bearing[0] + clockwise(*move.bearing), False))
        if move.turn is not None:
            out.append(Span(n, "turn", move.turn[0], move.turn[1], False))
    return tuple(out)


def placed(scenario: Scenario, at: Sequence[float]) -> tuple[Anchor, ...]:
    """The anchors where the numbers say, on the surveyed ground (level NaN outside it), or at the level they are drawn at without one."""
    search = scenario.search
    assert search is not None
    foot = drawn.foot({spar.name: spar for spar in scenario.spar}, scenario.spar[0].name)
    moved = {anchor.name: anchor for anchor in scenario.anchor}
    given: dict[int, dict[str, list[float]]] = {}
    for span, value in zip(spans(search.move), at, strict=True):
        given.setdefault(span.move, {}).setdefault(span.what, []).append(value)
    for n, numbers in given.items():
        anchors = [moved[name] for name in search.move[n].anchors or ()]
        for anchor, place in zip(anchors, _placed(search.move[n], numbers, anchors, foot), strict=True):
            moved[anchor.name] = pegged(scenario, anchor, *place)
    return tuple(moved.values())


def pegged(scenario: Scenario, anchor: Anchor, east: float, north: float) -> Anchor:
    """The anchor at a place, as near as a crew pegs it, on the surveyed ground or at the level it is drawn at without one."""
    east, north = round(east, PEGGED), round(north, PEGGED)
    ground = None if scenario.site is None else scenario.site.ground
    level = anchor.level if ground is None else round(float(ground.level(east, north)), PEGGED)
    return anchor.model_copy(update={"east": east, "north": north, "level": level})


def _placed(
    move: SearchMove, numbers: dict[str, list[float]], anchors: Sequence[Anchor], foot: drawn.Point
) -> Iterator[tuple[float, float]]:
    """East and north of each anchor of a move."""
    if move.places is not None:
        places = [_listed(place, foot) for place in move.places]
        yield from _in_order(places_chosen(places, numbers["places"], foot), anchors, foot)
        return
    for anchor in anchors:
        out = anchor.east - foot[0], anchor.north - foot[1]
        radius = numbers.get("radius", [math.hypot(*out)])[0]
        bearing = numbers["bearing"][0] if "bearing" in numbers else math.atan2(*out) + numbers.get("turn", [0.0])[0]
        yield foot[0] + radius * math.sin(bearing), foot[1] + radius * math.cos(bearing)


def _round(place: tuple[float, float], foot: drawn.Point) -> float:
    """Bearing of a place from the foot, in [0, 2 pi)."""
    return math.atan2(place[0] - foot[0], place[1] - foot[1]) % math.tau


def places_chosen(places: Sequence[tuple[float, float]], numbers: Sequence[float], foot: drawn.Point) -> list[tuple[float, float]]:
    """Of places listed as many different ones as there are numbers, clockwise from north.

    The numbers in ascending order, the k-th raised by k, are indices of the places clockwise: every choice comes of one such row, and
    numbers that are near choose places that are.
    """
    clockwise_ones = sorted(places, key=lambda place: _round(place, foot)) if len(numbers) > 1 else places
    return [clockwise_ones[round(number) + k] for k, number in enumerate(sorted(numbers))]


def _in_order(places: Sequence[tuple[float, float]], anchors: Sequence[Anchor], foot: drawn.Point) -> Iterator[tuple[float, float]]:
    """A place for each anchor, so that anchors keep their order round the foot and turn least from where they are drawn."""
    many, drawn_at = len(anchors), [_round((anchor.east, anchor.north), foot) for anchor in anchors]
    order = sorted(range(many), key=drawn_at.__getitem__)

    def turned(first: int) -> float:
        turns = (_round(places[(k + first) % many], foot) - drawn_at[n] for k, n in enumerate(order))
        return math.fsum(abs((turn + math.pi) % math.tau - math.pi) for turn in turns)

    first = min(range(many), key=turned)
    for n in range(many):
        yield places[(order.index(n) + first) % many]


def _listed(place: Place, foot: drawn.Point) -> tuple[float, float]:
    if place.bearing is not None and place.radius is not None:
        return foot[0] + place.radius * math.sin(place.bearing), foot[1] + place.radius * math.cos(place.bearing)
    return place.east or 0.0, place.north or 0.0


def tried(scenario: Scenario, keys: tuple[str, ...], points: Sequence[tuple[float, ...]]) -> list[Trial]:
    """Layouts through the rules, and as far through the line as each holds them; all on the solver's case axis."""
    found: dict[tuple[float, ...], Trial] = {}
    layouts: dict[tuple[float, ...], Scenario] = {}
    for at in points:
        anchors = placed(scenario, at)
        rule, amount = _misplaced(scenario, anchors)
        found[at] = Trial(at, anchors, MISPLACED, amount, rule, (math.nan,) * len(keys))
        if not rule:
            layouts[at] = scenario.model_copy(update={"anchor": anchors, "layouts": ()})
    settings = dict(zip(layouts, find_each([build(layout) for layout in layouts.values()]), strict=True)) if layouts else {}
    met = {at: setting for at, setting in settings.items() if isinstance(setting, Setting)}
    for at in settings.keys() - met.keys():
        found[at] = replace(found[at], outcome=FALLS, amount=1.0, rule=UNMET)
    for (at, setting), listed in zip(met.items(), standing.listed_of_each(list(met.values())), strict=True):
        found[at] = _judged(found[at], layouts[at], keys, setting, listed)
    return [found[at] for at in points]


def _judged(trial: Trial, layout: Scenario, keys: tuple[str, ...], setting: Setting, listed: Batch) -> Trial:
    """A layout that was solved."""
    solution = standing.solution(setting, listed, None, again=False)
    trial = replace(trial, still_lean=float(solution.head_lean[0].max()))
    if any(solution.unsettled) or solution.failed:
        share = sum(solution.unsettled) / len(solution.unsettled)
        return replace(trial, outcome=FALLS, amount=share, rule="no stable equilibrium found from still air in some case")
    needs = sizing.sized(layout, listed, None, own=True).anchors if "mass" in keys and layout.holdfast else ()
    values = tuple(measured(solution, needs, keys)[key].value for key in keys)
    rule, amount = _past(solution, keys)
    if not rule and any(math.isnan(value) for value in values):
        unknown = MEASURES[keys[[math.isnan(value) for value in values].index(True)]].words
        rule, amount = f"{unknown} not known", 1.0
    return replace(trial, outcome=PAST if rule else HOLDS, amount=amount, rule=rule, values=values)


def _past(solution: Solution, keys: tuple[str, ...]) -> tuple[str, float]:
    """The worst of what is past, and by how much all of it is together.

    What a holdfast of the given size holds does not count where its size is what is made least.
    """
    past = [f for f in solution.past if not ("mass" in keys and f.thing.startswith("anchor ") and math.isnan(f.margin))]
    if not past:
        return "", 0.0
    return f"{past[0].thing}, {past[0].quantity}", math.fsum(_lack(f) for f in past)


def _lack(finding: Finding) -> float:
    """How far one thing is past, without a unit: of rules of the site in metres, of factors in shares of what is required."""
    if not math.isnan(finding.margin):
        return -finding.margin
    return 1.0 - finding.factor / finding.required


def _misplaced(scenario: Scenario, anchors: Sequence[Anchor]) -> tuple[str, float]:
    """The first rule on places that is broken, and by how many metres all of them are."""
    foot = drawn.foot({spar.name: spar for spar in scenario.spar}, scenario.spar[0].name)
    broken: list[tuple[str, float]] = []
    for n, anchor in enumerate(anchors):
        if math.isnan(anchor.level):
            broken.append((f"anchor {anchor.name}, outside the surveyed ground", 1e3))
        for name, east, north in [("the first spar", foot[0], foot[1]), *((f"anchor {a.name}", a.east, a.north) for a in anchors[:n])]:
            apart = math.hypot(anchor.east - east, anchor.north - north)
            if apart < NEAREST:
                broken.append((f"anchor {anchor.name}, apart from {name}", NEAREST - apart))
    if scenario.site is not None:
        places = [(anchor.name, anchor.east, anchor.north) for anchor in anchors]
        broken += [(f"{f.thing}, {f.quantity}", -f.margin) for f in plan.placing(scenario.site, places) if f.verdict == "past"]
    return (broken[0][0], math.fsum(amount for _, amount in broken)) if broken else ("", 0.0)
