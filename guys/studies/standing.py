"""The main job: a scenario in, a `Solution` out.

structure -> setting -> listed cases -> full circle of winds -> worst values -> findings, self-checks, warnings
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace

import numpy as np

from guys import recovery, stability
from guys.checks import alarms, allowables, chains, demands, extremes, plan, resolve
from guys.checks.anchors import assumptions, unchecked
from guys.loads import CaseLine, lines_of
from guys.loads.drag import words
from guys.results import (
    AnchorPulls,
    AnchorWorst,
    CableForces,
    CableWorst,
    Extreme,
    FootForces,
    FootWorst,
    SelfCheck,
    Solution,
    State,
    Sweep,
    Worst,
)
from guys.rotation import Array
from guys.scenario import Scenario, parts
from guys.scenario.model import AnchorPoint, GroundFoot, HeelFoot
from guys.setting import Setting, find
from guys.structure import Structure, build
from guys.studies import directions
from guys.studies.batch import Batch, Progress, join, recover, solve_each, solve_lines, starts
from guys.version import __version__

STATES: tuple[State, ...] = ("stable", "neutral", "unstable", "none", "none")
"""Words for the codes of `guys.stability`."""


def solve(scenario: Scenario, *, finer: int = 1, progress: Progress | None = None) -> Solution:
    """Solve every case and wind direction of a scenario.

    finer : multiplies the number of elements in every span (a mesh check);  progress : called with cases done and in all

    Returns a `Solution`; a structure that falls is a result, not an exception.  Raises `ScenarioError` where no still-air state meets
    the initial tensions asked for.
    """
    return solution(*cases(scenario, finer, progress))


def cases(
    scenario: Scenario, finer: int = 1, progress: Progress | None = None, circle: bool = True
) -> tuple[Setting, Batch, Batch | None]:
    """The setting, the listed cases, and those of the full circle of winds, None where no case has wind or still air does not stand.

    circle : False leaves the full circle out
    """
    setting = find(build(scenario, finer))
    listed = listed_cases(setting, progress)
    return setting, listed, _swept(setting, listed, progress) if circle else None


def listed_cases(setting: Setting, progress: Progress | None = None) -> Batch:
    """The setting case, then every listed case."""
    lines = lines_of(setting.problem.structure.scenario)
    return _listed(setting, lines, solve_lines(setting, lines, True, progress) if setting.stands else None)


def listed_of_each(settings: Sequence[Setting]) -> list[Batch]:
    """The same of layouts side by side (`setting.find_each`)."""
    lines = lines_of(settings[0].problem.structure.scenario) if settings else ()
    solved = iter(solve_each([setting for setting in settings if setting.stands], lines))
    return [_listed(setting, lines, next(solved) if setting.stands else None) for setting in settings]


def _listed(setting: Setting, lines: Sequence[CaseLine], solved: Batch | None) -> Batch:
    """The setting case and the solved ones, none where still air does not stand."""
    first = recover(setting.problem, setting.judged, detail=True)
    return join([first, solved or _none(setting, lines, first.reason[0])])


def _none(setting: Setting, lines: Sequence[CaseLine], reason: str | None) -> Batch:
    """Every case `none`, because the structure does not stand in still air, for the reason given."""
    rows = np.zeros(len(lines), dtype=np.int64)
    many = setting.problem.take(rows)
    many = replace(many, loads=replace(many.loads, lines=tuple(lines)))
    judged = setting.judged
    same = {name: getattr(judged, name)[rows] for name in ("error", "rounds", "lost_at", "branched", "stuck", "drifts")}
    fallen = replace(judged, state=judged.state.take(rows), code=np.full(len(lines), stability.NONE), mirror={}, beyond={}, **same)
    batch = recover(many, fallen, detail=True)
    return replace(batch, reason=(f"the structure does not stand in still air: {reason}",) * len(lines))


def _swept(setting: Setting, listed: Batch, progress: Progress | None) -> Batch | None:
    """The full circle of winds for every case that holds wind."""
    templates = {line.name: line for line in listed.lines if not math.isnan(line.wind_from)}
    if not setting.stands or not templates:
        return None
    return directions.sweep(tuple(templates.values()), listed, lambda lines: solve_lines(setting, lines, True, progress, finely=False))


@dataclass(frozen=True)
class _Worst:
    """Measures of the listed cases and of all, mirror states of branches included in both."""

    listed: extremes.Measures
    listed_lines: tuple[CaseLine, ...]
    swept: extremes.Measures
    swept_lines: tuple[CaseLine, ...]

    def of(self, group: str, item: int) -> Extreme:
        """Greatest value of one item."""
        a, b = getattr(self.listed, group)[:, item], getattr(self.swept, group)[:, item]
        return extremes.extreme(a, self.listed_lines, b, self.swept_lines)

    def of_service(self) -> _Worst:
        """Those of service cases, still air among them."""
        return _Worst(*_service(self.listed, self.listed_lines), *_service(self.swept, self.swept_lines))


def _service(m: extremes.Measures, lines: tuple[CaseLine, ...]) -> tuple[extremes.Measures, tuple[CaseLine, ...]]:
    rows = np.array([k for k, line in enumerate(lines) if line.kind == "service"], dtype=np.int64)
    kept = {group: getattr(m, group)[rows] for group in extremes.GROUPS}
    return extremes.Measures(**kept), tuple(lines[k] for k in rows)


def _worst(listed: Batch, swept: Batch | None) -> _Worst:
    def with_mirrors(batch: Batch) -> tuple[extremes.Measures, tuple[CaseLine, ...]]:
        every = batch.forces if batch.mirror is None else recovery.join([batch.forces, batch.mirror])
        return extremes.measures(every), batch.lines + batch.mirror_lines

    return _Worst(*with_mirrors(listed), *with_mirrors(swept if swept is not None else listed))


def solution(setting: Setting, listed: Batch, swept: Batch | None, again: bool = True) -> Solution:
    """What the cases come to.

    swept : of the full circle of winds, None where it is left out;  again : the governing case is solved again by another method
    """
    structure = setting.problem.structure
    scenario = structure.scenario
    worst = _worst(listed, swept)
    initial = chains.initial(scenario, listed.forces.tension_anchor[0])
    greatest = _greatest(structure, worst, swept, initial)
    cables, feet = greatest.cables, greatest.feet
    hung = _hung(structure, listed if swept is None else join([listed, _fresh(listed, swept)]))
    rules = plan.findings(scenario.site, hung) if setting.stands else ()
    found = allowables.sorted_findings((*allowables.findings(*_everything_judged(listed, swept)), *rules))
    if not ((listed.code == stability.STABLE) | listed.spins).any():
        found = allowables.unjudged(found)
    check = _self_check(setting, listed, cables, again)
    return Solution(
        scenario=scenario,
        version=__version__,
        case=tuple(line.name for line in listed.lines),
        wind_from=np.array([line.wind_from for line in listed.lines]),
        state=tuple(STATES[c] for c in listed.code),
        note=listed.note,
        reason=listed.reason,
        out_of_balance=listed.error,
        reference_force=listed.reference,
        iterations=listed.rounds,
        head_lean=listed.forces.head_lean,
        cables=_cable_forces(structure, listed),
        anchors=AnchorPulls(tuple(a.name for a in scenario.anchor), structure.position[structure.anchor], listed.forces.pull),
        bases=_foot_forces(scenario, listed, ground=True),
        heels=_foot_forces(scenario, listed, ground=False),
        spars=listed.spars,
        worst_cables=cables,
        worst_anchors=greatest.anchors,
        worst_feet=feet,
        findings=found,
        sweep=_sweep(scenario, swept) if swept is not None else None,
        check=check,
        notes=(
            *_layouts(scenario),
            *scenario.notes,
            *chains.notes(scenario),
            *assumptions(scenario, listed.forces.pull),
            *words.notes(structure),
            *sorted({n for n in listed.note if n}),
        ),
        not_checked=(*unchecked(scenario), *alarms.NOT_CHECKED),
        warnings=(
            *alarms.warnings(structure, listed.lines, listed.forces, _verdicts(listed), feet, cables, check, _gaps(swept)),
            *plan.warnings(scenario.site, hung),
        ),
        cautions=alarms.CAUTIONS,
        unsettled=tuple((listed.code != stability.STABLE) & ~listed.spins),
        failed=bool((listed.code == stability.FAILED).any()),
        crew=_greatest(structure, worst.of_service(), swept, initial) if alarms.has_crew_loads_apart(scenario) else None,
    )


def _layouts(scenario: Scenario) -> Iterator[str]:
    """Which layout of several this is."""
    if scenario.layouts:
        others = ", ".join(f'"{other.layout}"' for other in scenario.layouts)
        yield f"anchors as drawn; the file's other layouts ({others}) are not in these results: guys compare solves all"
    elif not scenario.is_drawn:
        yield f'anchors of the layout "{scenario.layout}", not as drawn'


def _greatest(structure: Structure, worst: _Worst, swept: Batch | None, initial: Array) -> Worst:
    """The greatest loads on everything; initial : (cable,) initial tension over the rope's breaking load."""
    scenario = structure.scenario
    anchors = (
        AnchorWorst(a.name, worst.of("resultant", k), worst.of("horizontal", k), worst.of("uplift", k))
        for k, a in enumerate(scenario.anchor)
    )
    return Worst(
        tuple(_cable_worst(structure, worst, swept, k, float(share)) for k, share in enumerate(initial)),
        tuple(anchors),
        tuple(_foot_worst(scenario, worst, k) for k in range(len(scenario.spar))),
    )


def _fresh(listed: Batch, swept: Batch) -> Batch:
    """The cases of the full circle that are not listed."""
    known = {(line.name, line.wind_from) for line in listed.lines}
    return swept.take(np.array([k for k, line in enumerate(swept.lines) if (line.name, line.wind_from) not in known], dtype=np.int64))


def _hung(structure: Structure, cases: Batch) -> plan.Hung:
    curves = np.where(cases.forces.present[:, :, None, None], cases.curves, np.nan)
    return plan.Hung(structure.scenario, cases.lines, curves, structure.position[structure.anchor], cases.spars)


def _everything_judged(listed: Batch, swept: Batch | None) -> tuple[demands.Demands, tuple[CaseLine, ...]]:
    """Demands and lines of the listed cases and of all winds solved for."""
    parts = [batch.judged() for batch in (listed, swept) if batch is not None]
    return demands.join([d for _, d in parts]), tuple(line for lines, _ in parts for line in lines)


def _verdicts(listed: Batch) -> alarms.Verdicts:
    return alarms.Verdicts(listed.code > stability.NEUTRAL, listed.reason, listed.branched, listed.note)


def _gaps(swept: Batch | None) -> list[tuple[str, float, str | None]]:
    """Swept directions without a stable equilibrium: case, bearing, reason."""
    if swept is None:
        return []
    bad = np.flatnonzero(swept.code > stability.NEUTRAL)
    return [(swept.lines[k].name, swept.lines[k].wind_from, swept.reason[k]) for k in bad]


def _cable_worst(structure: Structure, worst: _Worst, swept: Batch | None, k: int, initial: float) -> CableWorst:
    tension = worst.of("tension", k)
    strength = float(structure.cables.strength[k])
    factor = math.inf if tension.peak == 0 and not math.isnan(strength) else strength / tension.peak if tension.peak != 0 else math.nan
    slack: tuple[tuple[str, float], ...] = ()
    if swept is not None:
        slack = tuple((swept.lines[c].name, swept.lines[c].wind_from) for c in np.flatnonzero(swept.forces.slack[:, k]))
    cable = structure.scenario.cable[k]
    least = parts.weakest(chains.links_of(structure.scenario, cable)) if cable.ends and not math.isnan(strength) else None
    return CableWorst(cable.name, tension, strength, factor, slack, least.words if least is not None else "", initial)


def _foot_worst(scenario: Scenario, worst: _Worst, k: int) -> FootWorst:
    spar = scenario.spar[k]
    carried_by = spar.foot.spar if isinstance(spar.foot, HeelFoot) else None
    down, lift, sideways, whole, turning = (worst.of(group, k) for group in ("down", "lift", "sideways", "whole", "turning"))
    return FootWorst(spar.name, carried_by, down, lift, sideways, whole, turning)


def _cable_forces(structure: Structure, listed: Batch) -> CableForces:
    scenario, f = structure.scenario, listed.forces
    return CableForces(
        name=tuple(c.name for c in scenario.cable),
        from_spar=tuple(c.from_.spar for c in scenario.cable),
        to_anchor=tuple(c.to.anchor if isinstance(c.to, AnchorPoint) else None for c in scenario.cable),
        tension_anchor=f.tension_anchor,
        tension_top=f.tension_top,
        force_on_anchor=f.on_anchor,
        force_on_spar=f.on_spar,
        unstressed_length=f.length,
        slack=f.slack,
        present=f.present,
        curve=listed.curves,
        strength=structure.cables.strength,
    )


def _foot_forces(scenario: Scenario, listed: Batch, ground: bool) -> FootForces:
    rows = [k for k, s in enumerate(scenario.spar) if isinstance(s.foot, GroundFoot) == ground]
    carried = tuple(s.foot.spar if isinstance(s.foot, HeelFoot) else None for s in scenario.spar)
    names = tuple(scenario.spar[k].name for k in rows)
    return FootForces(names, tuple(carried[k] for k in rows), listed.forces.foot_force[:, rows], listed.forces.foot_moment[:, rows])


def _sweep(scenario: Scenario, swept: Batch) -> Sweep:
    """The swept lines as (case line, bearing) tables; every case has the same bearings."""
    names = tuple(dict.fromkeys(line.name for line in swept.lines))
    rows = [sorted((k for k, line in enumerate(swept.lines) if line.name == n), key=lambda k: swept.lines[k].wind_from) for n in names]
    order = np.array(rows)
    m = extremes.measures(swept.forces)
    bearing = np.array([[swept.lines[k].wind_from for k in row] for row in rows])
    return Sweep(names, bearing, m.tension[order], m.resultant[order], m.horizontal[order], m.uplift[order], swept.forces.slack[order])


def _self_check(setting: Setting, listed: Batch, cables: tuple[CableWorst, ...], again: bool) -> SelfCheck:
    balance = float(np.nanmax(listed.balance)) if not np.isnan(listed.balance).all() else math.nan
    k = _governing(listed, cables) if again else None
    if k is None:
        return SelfCheck(balance, "not run", math.nan, "", math.nan)
    line = listed.lines[k]
    if k == 0:
        problem, judged = setting.problem, setting.judged
    else:
        problem = setting.under(line.states()[:1])
        judged = stability.judge(problem, *starts(setting, [line]))
    other = resolve.resolve(problem, judged.state)
    return SelfCheck(balance, other.verdict, other.difference, line.name, line.wind_from)


def _governing(listed: Batch, cables: tuple[CableWorst, ...]) -> int | None:
    """The standing case with the greatest use of a cable (greatest tension where no strength is given); without cables, the last one."""
    tension = extremes.measures(listed.forces).tension
    strength = np.array([c.strength for c in cables])
    use = tension / np.where(np.isnan(strength), 1.0, strength) if len(cables) else np.zeros((len(listed.lines), 1))
    score = np.where((listed.code == stability.STABLE)[:, None] | listed.spins[:, None], use, np.nan)
    if np.isnan(score).all():
        return None
    return int(np.nanargmax(np.nanmax(np.where(np.isnan(score), -1.0, score), axis=1)))
