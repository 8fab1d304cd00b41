"""Every case: balance, state, tensions, pulls, bases and heads; then the worst of each, and what dropped."""

from __future__ import annotations

from collections.abc import Callable, Iterator

from guys.drawing import rounding
from guys.drawing.reading import slack_sectors
from guys.drawing.rounding import ABSENT
from guys.drawing.strip import kinds
from guys.record import figures
from guys.record.blocks import Block, Cell, Items, Section, Table, in_parts, text
from guys.record.numbers import factor, millimetres, moment, newtons, tiny, turning
from guys.record.source import Source
from guys.scenario import patches

MOST = 6
"""Columns of numbers side by side on A4."""
AXES = ("east", "north", "up")
NO_STATE = "no equilibrium"
Row = tuple[Cell, ...]


def balance(source: Source) -> Section:
    """Out-of-balance of every case, and the sum of the loads beside the sum of the reactions."""
    solution, say = source.solution, source.say
    check = solution.check
    words = [text(
        "What is put on and what ground and anchors give back must be alike. The greatest difference of forces and moments of the whole "
        "structure, summed apart from the solver, relative to the reference force of the case: ",
        say.number("result.self_check.balance", tiny), ".",
    )]  # fmt: skip
    again = {
        "agrees": "it came to the same answer; greatest difference of a tension, relative to the reference force: ",
        "inconclusive": "that search stalled and says nothing; greatest difference of a tension so far: ",
        "other stable state": "IT CAME TO ANOTHER STABLE STATE; greatest difference of a tension: ",
    }
    if check.resolve == "not run":
        words.append(text("No case was solved again by another method, since none stands."))
    else:
        where = (f"The governing case, {check.resolved_case}, wind from ", source.wind("result.self_check.resolved_wind_from_deg"))
        difference = say.number("result.self_check.resolve_difference", tiny)
        words.append(text(*where, f", was solved again by least squares from beside its answer: {again[check.resolve]}", difference, "."))
    heads = [f"{what}, {axis}" for what in ("loads", "reactions") for axis in AXES]
    rows = [
        (*_case(source, k), *(say.number(f"sums.{k}.{what}_N.{axis}", newtons) for what in ("loads", "reactions") for axis in range(3)))
        for k in range(len(solution.case))
    ]
    note = "reactions: what the structure does to anchors and ground, so alike to the loads"
    if patches.of(source.scenario):
        note += "; with gusts patch by patch numbers are peaks that belong to no one equilibrium, and are not summed here"
    sums = in_parts("Sums of loads and of reactions", (*CASE, *heads), rows, 2, MOST, note)
    return Section("balance", "Balance and self-checks", (*words, *sums))


CASE = ("case", "wind from")


def _case(source: Source, k: int) -> Row:
    return source.solution.case[k], source.wind(f"result.cases.{k}.wind_from_deg")


def every_case(source: Source) -> Section:
    """Tables with a row for every case and direction."""
    blocks: list[Block] = [_states(source), *_tensions(source), *_pulls(source), *_bases(source)]
    return Section("every-case", "Every case", tuple(blocks))


def _states(source: Source) -> Table:
    solution, say = source.solution, source.say
    rows = []
    for k, kind in enumerate(kinds(solution)):
        at = f"result.cases.{k}"
        why = solution.reason[k] or solution.note[k] or ""
        error, size = say.number(f"{at}.out_of_balance", tiny), say.number(f"{at}.reference_force_N", newtons)
        rows.append((*_case(source, k), say.at(f"{at}.kind"), kind, error, size, str(solution.iterations[k]), why))
    heads = (*CASE, "kind", "state", "out of balance", "reference force", "rounds", "note")
    note = "out of balance: the greatest net force of a node, over the reference force"
    return Table("State and out-of-balance of every case", heads, tuple(rows), 2, note)


def _numbers(source: Source, k: int, count: int, keys: Callable[[int], Iterator[Cell]], wide: int) -> Row:
    """Cells of one case; words where it has no equilibrium."""
    if source.solution.state[k] == "none":
        return (NO_STATE,) * (count * wide)
    return tuple(cell for n in range(count) for cell in keys(n))


def _tensions(source: Source) -> list[Table]:
    solution, say = source.solution, source.say
    f = solution.cables

    def cells(k: int) -> Callable[[int], Iterator[Cell]]:
        shown = [c for c in range(len(f.name)) if f.present[k, c]]

        def of(c: int) -> Iterator[Cell]:
            if not f.present[k, c]:
                yield "taken away"
                return
            end = "tension_top_N" if f.tension_top[k, c] > f.tension_anchor[k, c] else "tension_anchor_N"
            tension = say.number(f"result.cases.{k}.cables.{shown.index(c)}.{end}", rounding.load)
            yield (tension, " slack") if f.slack[k, c] else tension

        return of

    rows = [(*_case(source, k), *_numbers(source, k, len(f.name), cells(k), 1)) for k in range(len(solution.case))]
    return in_parts("Tension of every cable, at its greater end", (*CASE, *f.name), rows, 2, MOST) if f.name else []


def _pulls(source: Source) -> list[Table]:
    solution, say = source.solution, source.say
    names = solution.anchors.name
    parts = (("pull", "resultant_N"), ("level", "horizontal_N"), ("up", "uplift_N"))
    heads = [f"{name}, {word}" for name in names for word, _ in parts]

    def cells(k: int) -> Callable[[int], Iterator[Cell]]:
        return lambda a: (say.number(f"result.cases.{k}.anchors.{a}.{key}", rounding.load) for _, key in parts)

    rows = [(*_case(source, k), *_numbers(source, k, len(names), cells(k), 3)) for k in range(len(solution.case))]
    note = "on the anchor: resultant, its horizontal part, and its part upward"
    return in_parts("Pull on every anchor", (*CASE, *heads), rows, 2, MOST, note) if names else []


def _bases(source: Source) -> list[Table]:
    solution, say = source.solution, source.say
    out = []
    for group, feet, on in (("bases", solution.bases, "the ground"), ("heels", solution.heels, "the spar that carries it")):
        heads = [f"{spar}, {what}" for spar in feet.spar for what in (*AXES, *(f"turning {axis}" for axis in AXES))]

        def cells(k: int, group: str = group) -> Callable[[int], Iterator[Cell]]:
            def of(n: int) -> Iterator[Cell]:
                at = f"result.cases.{k}.{group}.{n}"
                yield from (say.number(f"{at}.force_on_ground_N.{axis}", rounding.plain_force) for axis in range(3))
                yield from (say.number(f"{at}.moment_on_ground_Nm.{axis}", moment) for axis in range(3))

            return of

        rows = [(*_case(source, k), *_numbers(source, k, len(feet.spar), cells(k), 6)) for k in range(len(solution.case))]
        if feet.spar:
            out += in_parts(f"Force and moment of every {group[:-1]} on {on}", (*CASE, *heads), rows, 2, MOST)
    return out


def worst(source: Source) -> Section:
    """The greatest of each over the listed cases, and refined over the full circle."""
    solution = source.solution
    blocks: list[Block] = []
    if solution.loads_are == "service":
        blocks.append(text("Of all cases, factored ones among them. What a crew meets comes from service cases alone: "
                           "service_worst in record.json, and the sheet."))  # fmt: skip
    blocks += [t for t in (_worst_cables(source), _worst_anchors(source), _worst_feet(source)) if t.rows]
    return Section("worst", "The worst of every case", (*blocks, *figures.around(source)))


REFINED = "listed: over the cases and directions listed; refined: over the full circle of winds too"


def _pair(source: Source, at: str, key: str, peak: str, say_it: rounding.Say) -> Iterator[Cell]:
    """Listed value with its case and wind, then the refined one."""
    say = source.say
    for value, case, wind in ((key, "case", "wind_from_deg"), (peak, "peak_case", "peak_wind_from_deg")):
        yield say.number(f"{at}.{value}", say_it)
        yield _where(source, at, case, wind)


def _where(source: Source, at: str, case: str = "case", wind: str = "wind_from_deg") -> Cell:
    """A case and the bearing of its wind."""
    where = source.say.at(f"{at}.{case}") or ABSENT
    return where if source.say.at(f"{at}.{wind}") is None else (f"{where}, ", source.say.bearing(f"{at}.{wind}"))


PAIR = ("listed", "in", "refined", "in")


def _worst_cables(source: Source) -> Table:
    say = source.say
    rows = []
    for k, cable in enumerate(source.solution.worst_cables):
        at = f"result.worst.cables.{k}"
        pair = _pair(source, at, "tension_N", "peak_N", rounding.load)
        rows.append((cable.name, *pair, say.number(f"{at}.strength_N", rounding.capacity), say.number(f"{at}.peak_factor", factor)))
    return Table("Greatest tension of every cable", ("cable", *PAIR, "strength", "factor"), tuple(rows), note=REFINED)


def _worst_anchors(source: Source) -> Table:
    rows = []
    for k, anchor in enumerate(source.solution.worst_anchors):
        at = f"result.worst.anchors.{k}"
        rows.append((anchor.name, "pull", *_pair(source, at, "resultant_N", "peak_N", rounding.load)))
        for word, key in (("level", "horizontal"), ("up", "uplift")):
            rows.append((anchor.name, word, *_pair(source, f"{at}.{key}", f"{key}_N", "peak_N", rounding.load)))
    return Table("Greatest pull on every anchor", ("anchor", "of", *PAIR), tuple(rows), 2, REFINED)


def _worst_feet(source: Source) -> Table:
    rows = []
    for group, held in (("bases", False), ("heels", True)):
        feet = [f for f in source.solution.worst_feet if (f.carried_by is not None) == held]
        for n, foot in enumerate(feet):
            on = f"{foot.spar} on {foot.carried_by or 'the ground'}"
            for word in ("down", "lift", "sideways", "resultant", "turning"):
                key, peak, how = ("turning_Nm", "peak_Nm", turning) if word == "turning" else (f"{word}_N", "peak_N", rounding.load)
                rows.append((on, word, *_pair(source, f"result.worst.{group}.{n}.{word}", key, peak, how)))
    return Table("Greatest force and moment of every foot", ("foot", "of", *PAIR), tuple(rows), 2, REFINED)


def dropped(source: Source) -> Section:
    """Which cables drop, in which winds."""
    solution = source.solution
    rows = [f"{name}: {'; '.join(words)}" for k, name in enumerate(solution.cables.name) if (words := slack_sectors(solution, k))]
    if not solution.cables.name:
        said: Block = text("There is no cable.")
    else:
        said = Items(tuple(rows)) if rows else text("No cable drops, in any case or wind that has an equilibrium.")
    return Section("dropped", "Cables that drop", (said,))


def deflections(source: Source) -> Section:
    """Where every head goes, and how far every spar leans off its drawn line."""
    solution, say = source.solution, source.say
    names = [spar.name for spar in solution.spars]
    heads = [f"{name}, {what}" for name in names for what in (*AXES, "lean")]

    def cells(k: int) -> Callable[[int], Iterator[Cell]]:
        def of(n: int) -> Iterator[Cell]:
            at = f"result.cases.{k}.spars.{n}"
            last = len(solution.spars[n].station) - 1
            yield from (say.number(f"{at}.displacement_m.{last}.{axis}", millimetres) for axis in range(3))
            yield say.degrees(f"{at}.head_lean_deg")

        return of

    rows = [(*_case(source, k), *_numbers(source, k, len(names), cells(k), 4)) for k in range(len(solution.case))]
    note = "displacement of the head from its drawn place; lean: angle between the drawn line and the line from foot to head"
    every = in_parts("Displacement of every head", (*CASE, *heads), rows, 2, 4, note)
    return Section("deflections", "Deflections", (_farthest(source), *every))


def _farthest(source: Source) -> Table:
    """The greatest displacement of every head over the listed cases."""
    rows = []
    for k, spar in enumerate(source.solution.spars):
        at = f"result.worst.spars.{k}"
        rows.append((spar.name, source.say.number(f"{at}.head_displacement_m", millimetres), _where(source, at)))
    return Table("Greatest displacement of every head, over the listed cases", ("head of", "from its drawn place", "in"), tuple(rows))


def stability(source: Source) -> Section:
    """How many cases are of which kind, and what is said of those that are not plainly stable."""
    solution = source.solution
    ended = kinds(solution)
    counts = tuple((kind, str(ended.count(kind))) for kind in dict.fromkeys(ended))
    said = [
        f"{solution.case[k]}, wind {rounding.bearing(float(solution.wind_from[k]))}: {words}"
        for k in range(len(ended))
        if (words := solution.reason[k] or solution.note[k])
    ]
    blocks: list[Block] = [Table("Equilibria found", ("state", "cases and winds"), counts)]
    if said:
        blocks.append(Items(tuple(said)))
    blocks.append(text("Stable: every small motion costs work. Neutral: some motion costs none. Unstable: it moves away by itself. No "
                       "equilibrium: followed from still air, the path of the load ends, and the structure falls."))  # fmt: skip
    return Section("stability", "Stability", tuple(blocks))
