"""Which force coefficients were chosen, from what and from where: a note for every rule that is used."""

from __future__ import annotations

from collections.abc import Iterable, Iterator

import numpy as np

from guys.loads.drag import angular, attached, chosen, round
from guys.loads.pressure import mean_pressure, pressure
from guys.rotation import Array
from guys.scenario import Fitting, Section
from guys.scenario.model import Wind
from guys.scenario.shapes import surface_words
from guys.structure import Structure

READ = "read"
ROUND = {
    "en": f"round, EN 1991-1-4 7.9 ({READ}) by Reynolds number",
    "asce7": f"round, ASCE 7 figure 29.4-1 for h/D of 25 and more ({READ}) by D sqrt(q)",
}
RECTANGLE = f"rectangle, EN 1991-1-4 7.6 ({READ}); between the normals of the faces each takes its share (rule of this program)"
LATTICE = {
    "en": f"lattice of round members on one face's solid area, EN 1993-3-1 B.2.2 ({READ}), subcritical, worst direction",
    "asce7": f"lattice of round members on one face's solid area, ASCE 7 figure 29.4-3 ({READ}), worst direction",
}
OTHERS = {
    "hexagon": f"hexagon, ASCE 7 figure 29.4-1 for h/D of 25 and more ({READ})",
    "octagon": f"octagon, ASCE 7 figure 29.4-1 for h/D of 25 and more ({READ})",
    "sharp": f"sharp-edged, EN 1991-1-4 7.7 ({READ})",
}
STRANDED = f"stranded, EN 1991-1-4 7.9 (subcritical: {READ}; at every Reynolds number for strand: from memory)"
SIGN = {
    "en": f"sign, EN 1991-1-4 7.4.3 ({READ}), force also run at 0.25 of the width to either side of its middle",
    "asce7": f"sign, ASCE 7 figure 29.3-1 ({READ}), q at its top, force also run at 0.2 of the width to either side of its middle",
}
FRAME = f"open frame on its solid area, ASCE 7 figure 29.4-2 ({READ})"
LEAST_GAP = 0.25
"""Gap below a sign over its height from which the panel of EN 1991-1-4 7.4.3 stands free (from memory)."""


def notes(structure: Structure) -> tuple[str, ...]:
    """The choices of a scenario with wind, in the order of its tables."""
    scenario = structure.scenario
    if scenario.wind is None or all(case.wind == 0 for case in scenario.case):
        return ()
    iced = any(case.ice > 0 for case in scenario.case)
    return (
        *_sections(structure, scenario.wind),
        *_ropes(structure, scenario.wind),
        *_fittings(structure, scenario.wind),
        *(_ice(structure) if iced else ()),
    )


def _say(what: str, values: Iterable[float], rule: str) -> str:
    low, high = min(values), max(values)
    amount = f"{low:.3g}" if high - low < 0.005 else f"{low:.3g} to {high:.3g} in the reference wind"
    return f"force coefficient of {what}: {amount}; {rule}"


def _sections(structure: Structure, wind: Wind) -> Iterator[str]:
    held, pieces = chosen.bars(structure), structure.pieces
    z = pieces.station * pieces.axis[:, 2:]
    c = chosen.on_bars(held, wind, pressure(wind, z)[None], np.array([False]))[0]
    groups: dict[tuple[str, str], tuple[list[str], list[float]]] = {}
    for n in np.flatnonzero(np.isnan(pieces.drag)):
        spar = structure.scenario.spar[pieces.spar[n]]
        names, values = groups.setdefault((spar.name, _section(spar.section[pieces.section[n]], wind)), ([], []))
        names.append(str(pieces.section[n] + 1))
        values += c[n].tolist()
    for (name, rule), (places, values) in groups.items():
        yield _say(f"{name}, section {', '.join(dict.fromkeys(places))}", values, rule)


def _section(section: Section, wind: Wind) -> str:
    if section.lattice is not None:
        return LATTICE[wind.rules]
    if section.tube is not None or section.shape == "round":
        return f"{ROUND[wind.rules]}, {surface_words(section.surface)}"
    return RECTANGLE if section.shape == "rectangle" else OTHERS[section.shape or "sharp"]


def _ropes(structure: Structure, wind: Wind) -> Iterator[str]:
    scenario = structure.scenario
    if scenario.analysis.cable != "catenary":
        return
    used = dict.fromkeys(cable.rope for cable in scenario.cable)
    stranded = [n for n in used if scenario.rope[n].drag is None and scenario.rope[n].surface is None]
    if stranded:
        yield _say(f"rope {', '.join(stranded)}", [round.SUBCRITICAL], STRANDED)
    for name in used:
        rope = scenario.rope[name]
        if rope.drag is None and rope.surface is not None:
            q = _mean_on_cables(structure, wind)[None]
            c = chosen.on_cables(structure.cables, scenario, wind, q, np.zeros(q.shape, dtype=bool))[0]
            these = [float(c[k]) for k, cable in enumerate(scenario.cable) if cable.rope == name]
            yield _say(f"rope {name}", these, f"{ROUND[wind.rules]}, {surface_words(rope.surface)}")


def _mean_on_cables(structure: Structure, wind: Wind) -> Array:
    base = structure.position[structure.foot][structure.cables.spar, 2]
    low, high = ((structure.position[p.node] + p.arm)[:, 2] - base for p in (structure.cables.a, structure.cables.b))
    return mean_pressure(wind, low, high)


def _fittings(structure: Structure, wind: Wind) -> Iterator[str]:
    points = structure.fittings
    at = (structure.position[points.point.node] + points.point.arm)[:, 2]
    ground = float(structure.position[structure.foot][:, 2].min())
    for k in np.flatnonzero(points.side == 0):
        spar, n = points.of[k]
        f = structure.scenario.spar[spar].fitting[n]
        if f.drag is None and f.area is not None:
            q = pressure(wind, at[k : k + 1] - structure.position[structure.foot[spar], 2])
            yield from _fitting(structure, f, wind, q, float(at[k]) - ground)


def _fitting(structure: Structure, f: Fitting, wind: Wind, q: Array, middle: float) -> Iterator[str]:
    if f.sign:
        half = 0.5 * (f.height or 0.0)
        yield _say(f.name, [attached.push(f, wind.rules, middle + half, "").coefficient], SIGN[wind.rules])
        if wind.rules == "en" and middle - half < LEAST_GAP * 2 * half and (f.width or 0.0) > 2 * half:
            yield f"{f.name}: its lower edge is less than a quarter of its height above the ground; the coefficient of a panel may not hold"
    elif f.shape == "round":
        c = attached.coefficient(f, structure.scenario, wind, q, np.array([False]))
        yield _say(f.name, c.tolist(), f"{ROUND[wind.rules]}, {surface_words(f.surface)}, with end effect (EN 1991-1-4 7.13, digitised)")
    elif f.open_frame:
        yield _say(f.name, angular.open_frame(f.solidity or 1.0, f.bar, q).tolist(), FRAME)


def _ice(structure: Structure) -> Iterator[str]:
    ice, pieces = structure.scenario.ice, structure.pieces
    round_ones = np.isnan(pieces.drag).any() or np.isnan(structure.cables.drag).any()
    if ice is not None and round_ones:
        rule = "ice.drag" if ice.drag is not None else f"EN 1991-1-4 7.9, subcritical ({READ}), at every Reynolds number since ice is rough"
        yield _say("round bars and cables with ice", [chosen.iced_round(structure.scenario)], rule)
