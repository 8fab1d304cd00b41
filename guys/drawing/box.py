"""The box: wind, cases, state, what was checked and what was not, what dropped, every warning, the self-check, units and version.

Rows of a label and its words, broken to the width of the box and never cut: a box too long for its room makes the page taller.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from math import degrees, isfinite, tan

import numpy as np

from guys.checks.chains import usual_words
from guys.drawing import style
from guys.drawing.lettering import wrapped
from guys.drawing.page import Page, Rect
from guys.drawing.reading import SETTING, slack_sectors, wind_words
from guys.drawing.rounding import (
    ABSENT,
    INCH,
    Say,
    Tongue,
    bearing,
    capacity,
    density,
    factor,
    length,
    line_mass,
    load,
    moment,
    plain_force,
    pressure_down,
    pressure_up,
    small_angle,
    speed,
    temperature,
    thickness,
)
from guys.drawing.strip import kinds, standing, state_summary
from guys.results import Finding, Solution
from guys.scenario.model import Case
from guys.scenario.standard_wind import averaging_words

SIZE = 8.6
PITCH = SIZE * style.POINT_MM * 1.28
LABEL_WIDE = 23.0
FRAME = 2.4
FROM = "wind from "


@dataclass(frozen=True)
class Entry:
    """One row of the box; an alarming one is set bold."""

    label: str
    text: str
    alarming: bool = False


def entries(solution: Solution, tongue: Tongue) -> list[Entry]:
    """All rows, alarming things first."""
    return [
        *_warnings(solution),
        *_state(solution),
        *_past(solution, tongue),
        *_checked(solution, tongue),
        *_not_judged(solution),
        *_dropped(solution),
        *_whose(solution),
        *_weather(solution, tongue),
        *_cables(solution, tongue),
        *_lean(solution),
        *(Entry("Note", note) for note in solution.notes if not any(note in warning for warning in solution.warnings)),
        *([Entry("Not checked", "; ".join(solution.not_checked))] if solution.not_checked else []),
        *_other_state(solution),
    ]


def _warnings(solution: Solution) -> list[Entry]:
    texts = dict.fromkeys([*solution.warnings, *solution.scenario.warnings])
    return [Entry("Warning", text, alarming=True) for text in texts]


def _state(solution: Solution) -> list[Entry]:
    rows = [Entry("State", f"{state_summary(solution)}, still air among them")]
    for state, word in (("none", "Falls"), ("unstable", "Unstable"), ("neutral", "Neutral")):
        by_case: dict[str, list[int]] = {}
        for i in (i for i, kind in enumerate(kinds(solution)) if kind == state):
            by_case.setdefault(solution.case[i], []).append(i)
        rows += [Entry(word, _which(solution, case, which), alarming=True) for case, which in by_case.items()]
    return rows


def _which(solution: Solution, case: str, which: list[int]) -> str:
    """A case with its winds; why, once, where that is one reason no warning has told already."""
    winds = [bearing(float(solution.wind_from[i])) for i in which if isfinite(solution.wind_from[i])]
    where = f"{case}, wind from {', '.join(winds)}" if winds else f"{case}, still air"
    reasons = list(dict.fromkeys(solution.reason[i] or solution.note[i] or "" for i in which))
    told = any(reason and reason in warning for reason in reasons for warning in solution.warnings)
    if told or not any(reasons):
        return where
    return f"{where}: {reasons[0]}" if len(reasons) == 1 else f"{where}: {reasons[0]}, and otherwise, see result.json"


def amount(value: float, unit: str, tongue: Tongue, demand: bool, force: Say = load) -> str:
    """A demand or capacity in the words of its unit; `force` says a force that acts."""
    if not isfinite(value):
        return ABSENT
    if unit == "N":
        return tongue.say(force if demand else capacity, value)
    if unit == "N m":
        return tongue.say(moment, value)
    if unit == "m":
        return tongue.say(length, value)
    if unit == "Pa":
        return tongue.say(pressure_up if demand else pressure_down, value)
    if unit == "rad":
        return small_angle(value)
    return f"{value:.3g} {unit}".strip() if unit not in ("1", "-") else f"{value:.3g}"


def finding_words(solution: Solution, finding: Finding, tongue: Tongue) -> str:
    """Thing, demand / capacity, factor against the one required, verdict, and with what."""
    if isfinite(finding.margin):
        return _rule_words(solution, finding, tongue)
    both = f"{amount(finding.demand, finding.unit, tongue, True)} / {amount(finding.capacity, finding.unit, tongue, False)}"
    asked = f"{finding.required:g} needed" + (", default" if finding.default else "")
    where = f"; {wind_words(solution, finding.case, finding.wind_from)}" if finding.case else ""
    where += f"; {finding.governs}" if finding.governs else ""
    return f"{finding.thing} {finding.quantity} {both}, factor {factor(finding.factor)} ({asked}): {finding.verdict}{where}"


def _rule_words(solution: Solution, finding: Finding, tongue: Tongue) -> str:
    """A rule of the site: distance found and needed, and what it lacks."""
    found, needed, lacks = (tongue.say(length, v) for v in (finding.capacity, finding.demand, -finding.margin))
    where = f"; {wind_words(solution, finding.case, finding.wind_from)}" if finding.case else ""
    verdict = f"past by {lacks}" if finding.verdict == "past" else finding.verdict
    return f"{finding.thing} {finding.quantity} {found}, {needed} needed: {verdict}{where}"


def worst_of_each(findings: Iterable[Finding]) -> list[Finding]:
    """The finding with the least factor over the one asked for, of each quantity judged."""
    worst: dict[str, Finding] = {}
    for f in findings:
        if f.verdict == "not judged":
            continue
        if f.quantity not in worst or not _reserve(f) >= _reserve(worst[f.quantity]):
            worst[f.quantity] = f
    return list(worst.values())


def _reserve(finding: Finding) -> float:
    """To eight digits: of what is alike but for rounding the first stands."""
    return float(f"{finding.factor / finding.required if finding.required else finding.factor:.8g}")


def _past(solution: Solution, tongue: Tongue) -> list[Entry]:
    """The worst past of each quantity in full, the others by name and factor."""
    rows = []
    for worst in worst_of_each(solution.past):
        rows.append(Entry("Past", finding_words(solution, worst, tongue), alarming=True))
        others = sorted((f for f in solution.past if f.quantity == worst.quantity and f is not worst), key=lambda f: f.factor)
        if others:
            named = ", ".join(f"{f.thing} {factor(f.factor)}" for f in others)
            rows.append(Entry("Past", f"{worst.quantity} also past, factor: {named}", alarming=True))
    return rows


def _checked(solution: Solution, tongue: Tongue) -> list[Entry]:
    if not standing(solution):
        return []
    within = [f for f in worst_of_each(solution.findings) if f.verdict == "within"]
    return [Entry("Hardest", finding_words(solution, f, tongue)) for f in within]


def _not_judged(solution: Solution) -> list[Entry]:
    groups: dict[tuple[str, str], list[str]] = {}
    for f in solution.findings:
        if f.verdict == "not judged":
            groups.setdefault((f.quantity, f.why), []).append(f.thing)
    texts = [f"{quantity} of {', '.join(things)}" + (f" ({why})" if why else "") for (quantity, why), things in groups.items()]
    return [Entry("Not judged", "; ".join(texts))] if texts else []


def _dropped(solution: Solution) -> list[Entry]:
    """Cables that drop, those of the same winds together."""
    groups: dict[str, list[str]] = {}
    for i, name in enumerate(solution.cables.name):
        for words in slack_sectors(solution, i):
            groups.setdefault(words, []).append(name)
    if not groups:
        return [Entry("Dropped", "no cable, in any case or wind")]
    windy = {w.removeprefix(FROM): names for w, names in groups.items() if w.startswith(FROM)}
    still = {w: names for w, names in groups.items() if not w.startswith(FROM)}
    parts = [f"{', '.join(names)} in {words}" for words, names in still.items()]
    if windy:
        parts.append("in wind from: " + "; ".join(f"{', '.join(names)} {words}" for words, names in windy.items()))
    return [Entry("Dropped", "; ".join(parts))]


def _whose(solution: Solution) -> list[Entry]:
    """Which cases the loads of the sheet are of, where there are others."""
    if solution.crew is None:
        return []
    service = ", ".join(c.name for c in solution.scenario.case if c.service)
    text = f"of service cases, unfactored: {service}; factored and allowable-stress cases are judged too, their loads are in result.json"
    return [Entry("Loads", text)]


def _weather(solution: Solution, tongue: Tongue) -> list[Entry]:
    rows, wind, ice = [], solution.scenario.wind, solution.scenario.ice
    if wind is not None:
        swept = "; full circle swept, peaks refined" if solution.sweep is not None else ""
        rows.append(
            Entry(
                "Wind",
                f"{tongue.say(speed, wind.speed)}, {averaging_words(wind.averaging)} at {tongue.say(_height, wind.height)}, "
                f"{wind.profile.words}, air {tongue.say(density, wind.air_density)}; {len(wind.directions)} bearings listed{swept}",
            )
        )
    if wind is not None and solution.scenario.gust.method != "plain":
        rows.append(Entry("Gusts", "patch by patch; loads are each the peak of its own, not of one equilibrium: see the notes"))
    parts = [*_cases(solution.scenario.case, tongue)]
    if ice is not None:
        glaze = f"ice {tongue.say(thickness, ice.thickness)} all round, {tongue.say(density, ice.density)}" if ice.thickness else "rime"
        parts.append(f"{glaze} (class {ice.class_} of ISO 12494)" if ice.class_ else glaze)
    parts.append("factors on weight, wind pressure and weight of ice; initial tension is in every load, never factored")
    return [*rows, Entry("Cases", "; ".join(parts))]


def _cases(cases: Sequence[Case], tongue: Tongue) -> Iterator[str]:
    """Every case; a temperature that all have, and ice that none has, are not told of each."""
    alike = len({case.temperature for case in cases}) == 1
    iced = any(case.ice for case in cases)
    for case in cases:
        factors = [f"dead {case.dead:g}", f"wind {case.wind:g}", *([f"ice {case.ice:g}"] if iced else [])]
        factors += [] if alike else [tongue.say(temperature, case.temperature)]
        factors += [f"without {', '.join(case.without)}"] if case.without else []
        factors += [f"no ice on {', '.join(case.bare)}"] if case.bare else []
        factors += [] if case.service else [case.kind]
        yield f"{case.name}: {', '.join(factors)}"
    if alike:
        yield f"{'all ' if len(cases) > 1 else ''}at {tongue.say(temperature, cases[0].temperature)}"


def _height(metres: float, system: str) -> str:
    return f"{metres:.4g} m" if system == "SI" else f"{metres / (12 * INCH):.3g} ft"


def _cables(solution: Solution, tongue: Tongue) -> list[Entry]:
    asked = solution.scenario
    parts = []
    for name in dict.fromkeys(c.rope for c in asked.cable):
        rope = asked.rope.get(name)
        if rope is not None:
            least = f", least breaking load {tongue.say(capacity, rope.strength)}" if rope.strength else ""
            parts.append(f"{name} {tongue.say(thickness, rope.diameter)}, {tongue.say(line_mass, rope.mass)}{least}")
    model = "hanging as catenaries" if asked.analysis.cable == "catenary" else "straight and weightless"
    rows = [Entry("Cables", f"{'; '.join(parts)}; {model}")] if parts else []
    words = setting_words(solution, tongue)
    warm = tongue.say(temperature, asked.setting.temperature)
    return [*rows, Entry("Set to", f"{words}; at the lower end, still air, {warm}{_shares(solution)}")] if words else rows


def _shares(solution: Solution) -> str:
    """Initial tensions as shares of the ropes' breaking loads, beside the usual band."""
    shares = [100 * c.initial for c in solution.worst_cables if isfinite(c.initial)]
    if not shares:
        return ""
    least, most = (f"{share:.0f}" for share in (min(shares), max(shares)))
    return f"; {least if least == most else f'{least} to {most}'} % of the rope's breaking load, usual {usual_words()}"


def setting_words(solution: Solution, tongue: Tongue) -> str:
    """Tensions in still air: one for a guy level that has but one, else one for each cable, as they are to be set."""
    groups: dict[str, list[tuple[str, str]]] = {}
    for cable, tension in zip(solution.scenario.cable, solution.cables.tension_anchor[SETTING], strict=True):
        if isfinite(tension):
            groups.setdefault(cable.level or cable.name, []).append((cable.name, tongue.say(plain_force, float(tension))))
    parts = []
    for level, cables in groups.items():
        alike = len({tension for _, tension in cables}) == 1
        parts += [f"{level} {cables[0][1]}"] if alike else [f"{name} {tension}" for name, tension in cables]
    return ", ".join(parts)


def _lean(solution: Solution) -> list[Entry]:
    still = float(np.max(solution.head_lean[SETTING], initial=0.0))
    if not isfinite(still):
        return []
    slope = f" (1/{1.0 / tan(still):.0f})" if still > np.deg2rad(0.005) else ""
    return [Entry("Lean", f"{degrees(still):.2f}°{slope} off the drawn line in still air")]


def _other_state(solution: Solution) -> list[Entry]:
    if solution.check.resolve != "other stable state":
        return []
    return [Entry("Self-check", "the governing case solved again ENDS IN ANOTHER STABLE STATE", alarming=True)]


def small_print(solution: Solution, tongue: Tongue) -> str:
    """Self-check, units, program and a line to sign, for the foot of the sheet."""
    balance = f"{solution.check.balance:.0e}" if isfinite(solution.check.balance) else ABSENT
    return " · ".join((
        f"Self-check: sum of loads and reactions {balance} of the reference force, {_again(solution)}",
        _units(tongue),
        f"guys {solution.version}, scenario {solution.scenario.sha256[:12]}",
    ))  # fmt: skip


def _again(solution: Solution) -> str:
    check = solution.check
    where = wind_words(solution, check.resolved_case, check.resolved_wind_from)
    return {
        "agrees": f"{where} solved again by least squares agrees to {check.difference:.0e}",
        "inconclusive": f"{where} solved again by least squares: inconclusive",
        "other stable state": f"{where} solved again by least squares: ends in another stable state",
        "not run": "governing case not solved again",
    }[check.resolve]


def _units(tongue: Tongue) -> str:
    names = " and ".join(tongue.systems)
    force_names = " and ".join("kN" if s == "SI" else "lbf" for s in tongue.systems)
    masses = " and ".join("kg" if s == "SI" else "lb" for s in tongue.systems)
    return f"{names} units: {force_names} force, {masses} mass; loads rounded up, full digits in result.json"


@dataclass(frozen=True)
class Laid:
    """Rows broken into lines for a width."""

    rows: tuple[tuple[Entry, tuple[str, ...]], ...]
    height: float


def laid(rows: Iterable[Entry], room: float) -> Laid:
    """Break rows to the width of the box; height of all, frame included."""
    inner = room - LABEL_WIDE - 2.0 * FRAME
    broken = tuple((row, tuple(wrapped(row.text, inner, SIZE, row.alarming))) for row in rows)
    return Laid(broken, sum(len(lines) for _, lines in broken) * PITCH + 2.0 * FRAME + 1.0)


def draw_box(page: Page, words: Laid, zone: Rect) -> None:
    """The frame and its rows, from the top."""
    corners = [(zone.left, zone.bottom), (zone.right, zone.bottom), (zone.right, zone.top), (zone.left, zone.top)]
    page.shape(corners, edge=style.INK, weight=style.THIN)
    y = zone.top - FRAME - 0.78 * SIZE * style.POINT_MM
    last = ""
    for row, lines in words.rows:
        if row.label != last:
            page.text(zone.left + FRAME, y, row.label, SIZE, bold=True, colour=style.INK if row.alarming else style.GREY)
        last = row.label if not row.alarming else ""
        for line in lines:
            page.text(zone.left + FRAME + LABEL_WIDE, y, line, SIZE, bold=row.alarming)
            y -= PITCH
