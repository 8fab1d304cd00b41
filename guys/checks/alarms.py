"""What must not pass in silence, in words: the warnings of every output.

Fixed with every result are the cautions of the trade (common practice) and the list of what this version does not check.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from guys import constants
from guys.checks.spars import too_thin
from guys.loads import CaseLine
from guys.recovery import Forces
from guys.results import CableWorst, Extreme, FootWorst, SelfCheck
from guys.scenario import Scenario
from guys.structure import Structure

STILL_LEAN = 1 / 500
"""Still-air lean of a head above which the setting is called out of plumb."""
BALANCE = 1e-9
"""Greatest imbalance of the whole structure, relative to the reference force."""
SHOWN = 1e-6
"""Share of the reference force below which a pull on a base is rounding."""
POUND_FORCE = float(constants.POUND * constants.GRAVITY)
AS_ASKED = 0.01
"""Share by which a still-air tension may miss the initial tension asked for before it is told; no gauge of the trade reads nearer."""
AS_PLUMBED = 0.5
"""Share by which a plumb setting may move a tension off its target before it is told: the crew then sets something else than was meant."""
SAID = 6
"""Cases told one by one before the rest is only named."""
MOST_WINDS = 12
"""Bearings named before the rest is counted."""

CAUTIONS = (
    "An estimate, to be confirmed by a competent, licensed person under the local code.",
    "Keep out of the fall circle. Never ease two guys at once. All guys fast before anyone leaves.",
    "No climbing while a level is slack. Look up for lines; ask about services before driving anything.",
    "Nothing added to the mast. Check holdfasts after rain, thaw and wind, and each morning.",
)
NOT_CHECKED = (
    "lugs, terminations and turnbuckles that are not among a cable's ends",
    "the ground under bases without a plate, bolts of bases; joints and welds of spars, horizontals of lattices; spars bent as made",
    "raising (guys raise), fatigue, vibration, loss of a cable unless listed as a case (guys lost takes each away)",
)


@dataclass(frozen=True)
class Verdicts:
    """What became of the listed cases: falls (case,) with its reason, branched (case,) with its note."""

    falls: NDArray[np.bool_]
    reason: Sequence[str | None]
    branched: NDArray[np.bool_]
    note: Sequence[str | None]


def warnings(
    structure: Structure,
    lines: Sequence[CaseLine],
    forces: Forces,
    verdicts: Verdicts,
    feet: Sequence[FootWorst],
    cables: Sequence[CableWorst],
    check: SelfCheck,
    gaps: Sequence[tuple[str, float, str | None]],
) -> tuple[str, ...]:
    """Everything alarming about a run, the gravest first; `gaps`: swept directions without a stable equilibrium, with the reason."""
    out = [
        *_no_service(structure.scenario),
        *_only_raised(structure),
        *_not_standing(lines, verdicts),
        *_between_directions(lines, gaps),
        *_checks(check),
        *_lifted(structure, lines, forces, feet),
        *_broken(cables),
        *_not_as_asked(structure, forces),
        *_leaning(structure, lines, forces),
        *_branching(lines, verdicts),
        *_thin_walls(structure),
        *structure.scenario.warnings,
    ]
    return tuple(dict.fromkeys(out))


def has_crew_loads_apart(scenario: Scenario) -> bool:
    """Not every case is a service case, and those that are hold wind if any does."""
    return not all(case.service for case in scenario.case) and not _no_service(scenario)


def _no_service(scenario: Scenario) -> list[str]:
    """Crew loads come from service cases; where none is like the others, it is told before all else."""
    windy = [case for case in scenario.case if case.wind > 0.0]
    if any(case.service for case in windy or scenario.case):
        return []
    lacks = "no service case holds wind" if windy else "no case is a service case"
    return [f'{lacks}: LOADS TOLD ARE FACTORED, not what a crew meets; add "service" to combinations.sets, or a [[case]] of kind service']


def _only_raised(structure: Structure) -> list[str]:
    """A spar that nothing but the lines of its raising would hold."""
    scenario = structure.scenario
    spar = next((s for s in scenario.spar if scenario.raising is not None and s.name == scenario.raising.spar), None)
    if spar is None or any(spar.name in (c.from_.spar, getattr(c.to, "spar", None)) for c in scenario.cable):
        return []
    return [f"no cable holds {spar.name}; the lines of [raise] do not count here: guys raise solves the raising"]


def place(line_name: str, wind_from: float) -> str:
    """A case and its wind in words."""
    return line_name if math.isnan(wind_from) else f"{line_name}, wind from {_bearing(wind_from)}"


def _bearing(radians: float) -> str:
    """To half a degree, as on the sheet."""
    halves = round(2 * math.degrees(radians)) % 720
    return f"{halves / 2:g}°"


def _winds(winds: Sequence[float]) -> str:
    """Bearings in the order of the compass, each once, the first of many."""
    words = list(dict.fromkeys(_bearing(w) for w in sorted(winds)))
    return ", ".join(words[:MOST_WINDS]) + (f" and {len(words) - MOST_WINDS} more" if len(words) > MOST_WINDS else "")


def _not_standing(lines: Sequence[CaseLine], verdicts: Verdicts) -> list[str]:
    bad = np.flatnonzero(verdicts.falls)
    if verdicts.falls[0]:
        bad = bad[:1]
    out = [f"{place(lines[k].name, lines[k].wind_from)}: {verdicts.reason[k]}" for k in bad[:SAID]]
    rest = [lines[k] for k in bad[SAID:]]
    return out + [f"{where}: no stable equilibrium either" for where in _gathered([(line.name, line.wind_from) for line in rest])]


def _gathered(cases: Sequence[tuple[str, float]]) -> list[str]:
    """Cases with all their winds in one."""
    winds: dict[str, list[float]] = {}
    for name, wind_from in cases:
        winds.setdefault(name, []).extend([] if math.isnan(wind_from) else [wind_from])
    return [f"{name}, wind from {_winds(some)}" if some else name for name, some in winds.items()]


def _between_directions(lines: Sequence[CaseLine], gaps: Sequence[tuple[str, float, str | None]]) -> list[str]:
    listed = {(line.name, line.wind_from) for line in lines}
    fresh: dict[str, list[tuple[float, str | None]]] = {}
    for name, wind_from, reason in gaps:
        if (name, wind_from) not in listed:
            fresh.setdefault(name, []).append((wind_from, reason))
    out = []
    for name, unsorted in fresh.items():
        found = sorted(unsorted, key=lambda pair: pair[0])
        head = f"{name}: no stable equilibrium between the listed directions either, in wind from {_winds([w for w, _ in found])}"
        first, reason = found[0]
        out.append(f"{head}; from {_bearing(first)}: {reason}")
    return out


def _checks(check: SelfCheck) -> list[str]:
    out = []
    if not math.isnan(check.balance) and check.balance > BALANCE:
        out.append(
            f"loads and reactions of the whole structure differ by {check.balance:.1e} of the reference force: a fault of the program"
        )
    if check.resolve == "other stable state":
        out.append(
            f"{place(check.resolved_case, check.resolved_wind_from)}: solved again by another method the structure came to another stable "
            f"state, tensions differing by {check.difference:.2g} of the reference force"
        )
    return out


def _lifted(structure: Structure, lines: Sequence[CaseLine], forces: Forces, feet: Sequence[FootWorst]) -> list[str]:
    out = []
    for k, foot in enumerate(feet):
        if foot.carried_by is None:
            if foot.lift.peak > SHOWN * max(structure.weight, 1.0):
                out.append(
                    f"base of {foot.spar} is pulled upward by {_newtons(foot.lift.peak)} in {_where(foot.lift)}: it must be held down"
                )
        else:
            pull = forces.foot_force[:, k] @ structure.axes[k, 2]
            if np.nanmax(pull, initial=0.0) > SHOWN * max(structure.weight, 1.0):
                c = int(np.nanargmax(pull))
                where = place(lines[c].name, lines[c].wind_from)
                out.append(f"heel of {foot.spar} is pulled off {foot.carried_by} by {_newtons(float(pull[c]))} in {where}: it must be held")
    return out


def _where(extreme: Extreme) -> str:
    return place(extreme.peak_case, extreme.peak_wind_from)


def _newtons(force: float) -> str:
    """In both unit systems, as near as three figures tell it."""
    si = f"{force / 1000:.3g} kN" if force >= 1000 else f"{force:.3g} N"
    return f"{si} ({force / POUND_FORCE:.3g} lbf)" if force < 999.5 * POUND_FORCE else f"{si} ({force / POUND_FORCE:.0f} lbf)"


def _broken(cables: Sequence[CableWorst]) -> list[str]:
    return [
        f'cable "{c.name}": tension {_newtons(c.tension.peak)} is above its strength {_newtons(c.strength)} in {_where(c.tension)}'
        for c in cables
        if not math.isnan(c.factor) and c.factor < 1
    ]


def _not_as_asked(structure: Structure, forces: Forces) -> list[str]:
    """Initial tensions that the setting does not have: where it has branched off the one they were found for, or is far off for plumb."""
    plumb = structure.scenario.setting.plumb
    allowed = AS_PLUMBED if plumb else AS_ASKED
    why = "to stand as drawn the structure needs tensions far from" if plumb else "in still air the structure does not hold"
    out = []
    for k, cable in enumerate(structure.scenario.cable):
        got = float(forces.tension_anchor[0, k])
        if cable.tension is not None and abs(got - cable.tension) > allowed * cable.tension:
            out.append(f"{cable.name} {_newtons(got)} for {_newtons(cable.tension)}")
    more = f" and {len(out) - SAID} more" if len(out) > SAID else ""
    return [f"{why} the initial tensions asked for: {'; '.join(out[:SAID])}{more}"] if out else []


def _leaning(structure: Structure, lines: Sequence[CaseLine], forces: Forces) -> list[str]:
    out = []
    for k, spar in enumerate(structure.scenario.spar):
        lean = float(forces.head_lean[0, k])
        if not math.isnan(lean) and lean > STILL_LEAN:
            head = lean * structure.length[k]
            out.append(
                f"{spar.name} leans 1/{1 / lean:.0f} from its drawn line in still air (head {head:.2f} m, {head / 0.3048:.2f} ft off): "
                "the initial tensions or lengths pull it over; setting.plumb = true finds tensions that do not"
            )
    return out


def _thin_walls(structure: Structure) -> list[str]:
    scenario = structure.scenario
    thin = [
        f"{spar.name}, section {n + 1} ({section.tube.diameter / section.tube.wall:.3g} times its wall)"
        for spar in scenario.spar
        for n, section in enumerate(spar.section)
        if section.tube is not None and too_thin(section, scenario.material)
    ]
    return [f"tubes so thin that the wall buckles before it yields, which is not judged: {'; '.join(thin)}"] if thin else []


def _branching(lines: Sequence[CaseLine], verdicts: Verdicts) -> list[str]:
    branched = np.flatnonzero(verdicts.branched)
    if len(branched) == 0:
        return []
    some = "; ".join(place(lines[k].name, lines[k].wind_from) for k in branched[:SAID]) + (" ..." if len(branched) > SAID else "")
    return [f"the structure branches in {some}: {verdicts.note[branched[0]]}"]
