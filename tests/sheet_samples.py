"""Made-up results for the drawings: geometry from a few numbers, forces by hand statics, no solver.

A guy of initial tension T0 on the windward side at angle a between its bearing and the wind carries T0 + F cos(a), one on the leeward
side drops once F |cos(a)| passes T0; cables hang as parabolas of sag w c^2 / 8T.  Good enough to look at, and checkable by hand.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from math import cos, hypot, isfinite, nan, radians, sin

import numpy as np

from guys.results import (
    AnchorPulls,
    AnchorWorst,
    CableForces,
    CableWorst,
    Extreme,
    Finding,
    FootForces,
    FootWorst,
    SelfCheck,
    Solution,
    SparLine,
    Sweep,
)
from guys.scenario import Scenario, model

CAUTIONS = (
    "An estimate to be confirmed by a competent, licensed person under the local code.",
    "Keep out of the fall circle.",
    "Never ease two guys at once.",
    "All guys fast before anyone leaves.",
    "No climbing while a level is slack.",
    "Look up for lines; ask about services before driving anything.",
    "Nothing added to the mast.",
    "Check holdfasts after rain, thaw, wind, and each morning.",
)
NOT_CHECKED = ("ground and holdfasts", "lugs, welds and terminations", "fatigue and vibration", "the raising")
POINTS = 17


@dataclass(frozen=True)
class Guyed:
    """A sample: anchors as (name, bearing deg, radius, level), guy heights, and what else stands there."""

    title: str
    height: float
    levels: tuple[float, ...]
    anchors: tuple[tuple[str, float, float, float], ...]
    push: float = 6000.0
    initial: float = 1200.0
    lean: float = 0.0
    toward: float = 0.0
    boom: tuple[float, float, float] | None = None
    sections: int = 3
    fittings: int = 2
    note: str | None = None
    cases: tuple[str, ...] = ("storm",)


def ring(count: int, radius: float, start: float = 0.0, names: Sequence[str] | None = None) -> tuple[tuple[str, float, float, float], ...]:
    """Anchors evenly around, with some unevenness of ground."""
    names = names or [f"A{i + 1}" for i in range(count)]
    return tuple((names[i], start + 360.0 * i / count, radius, round(0.06 * radius * sin(1.7 * i), 2)) for i in range(count))


def scenario(made: Guyed) -> Scenario:
    """The scenario of a sample."""
    lengths = np.full(made.sections, made.height / made.sections)
    section = tuple(
        model.Section(length=float(n), tube=model.Tube(diameter=0.089, wall=0.0032), material="steel", drag=1.2) for n in lengths
    )
    fitting = tuple(
        model.Fitting(name=f"panel {i + 1}", at=made.height * (0.97 - 0.16 * i), mass=12.0, area=0.35, drag=1.4)
        for i in range(made.fittings)
    )
    spars = [
        model.Spar(
            name="mast",
            foot=model.GroundFoot(east=0.0, north=0.0, level=0.0),
            lean=radians(made.lean),
            toward=radians(made.toward),
            section=section,
            fitting=fitting,
        )
    ]
    if made.boom:
        heel, long, toward = made.boom
        spars.append(
            model.Spar(
                name="boom",
                foot=model.HeelFoot(spar="mast", at=heel),
                lean=radians(65.0),
                toward=radians(toward),
                base="hinged",
                section=(model.Section(length=long, tube=model.Tube(diameter=0.076, wall=0.003), material="steel", drag=1.2),),
                fitting=(model.Fitting(name="hook load", at=long, mass=80.0),),
            )
        )
    anchors = tuple(model.Anchor(name=n, east=r * sin(radians(b)), north=r * cos(radians(b)), level=z) for n, b, r, z in made.anchors)
    cables = [
        model.Cable.model_validate(
            {
                "name": f"{at:.3g} m {a.name}",
                "from": {"spar": "mast", "at": at},
                "to": {"anchor": a.name},
                "rope": "strand-6",
                "tension": made.initial,
                "level": f"{at:.3g} m",
            }
        )
        for at in made.levels
        for a in anchors
    ]
    if made.boom:
        cables.append(
            model.Cable.model_validate(
                {
                    "name": "topping stay",
                    "from": {"spar": "mast", "at": made.height * 0.95},
                    "to": {"spar": "boom", "at": made.boom[1] * 0.95},
                    "rope": "strand-6",
                    "tight": True,
                }
            )
        )
    return Scenario(
        title=made.title,
        note=made.note,
        spar=tuple(spars),
        anchor=anchors,
        cable=tuple(cables),
        rope={"strand-6": model.Rope(diameter=0.006, mass=0.15, stiffness=1.4e6, strength=23e3, drag=1.2)},
        wind=model.Wind(speed=25.0, averaging=3.0, height=10.0, directions=tuple(np.deg2rad(np.arange(0, 360, 30)).tolist())),
        case=tuple(model.Case(name=c, temperature=288.15, ice=float("ice" in c)) for c in made.cases),
        ice=model.Ice(thickness=0.01) if any("ice" in c for c in made.cases) else None,
        allowables=model.Allowables(defaulted=frozenset({"cable", "anchor", "lean", "sliding"})),
        sha256="7f3a9c0d51e2" + 52 * "0",
        path="sample.toml",
    )


def axis(lean: float, toward: float) -> np.ndarray:
    """Unit vector of a leaning line."""
    return np.array([sin(lean) * sin(toward), sin(lean) * cos(toward), cos(lean)])


def spar_line(spar: model.Spar, foot: np.ndarray, cases: int) -> SparLine:
    """A straight spar without displacement."""
    station = np.linspace(0.0, spar.length, 13)
    along = axis(spar.lean, spar.toward)
    drawn = foot + station[:, None] * along
    zero = np.zeros((cases, 13))
    return SparLine(
        spar.name,
        station,
        drawn,
        np.eye(3),
        np.zeros((cases, 13, 3)),
        zero - 8e3,
        np.zeros((cases, 13, 2)),
        zero,
        np.zeros((cases, 13, 2)),
    )


def hanging(low: np.ndarray, top: np.ndarray, tension: float, weight: float = 1.5) -> np.ndarray:
    """A parabola of small sag between two points."""
    t = np.linspace(0.0, 1.0, POINTS)[:, None]
    chord = float(np.linalg.norm(top - low))
    sag = min(weight * chord**2 / (8.0 * tension), 0.12 * chord)
    return np.asarray(low + t * (top - low) - 4.0 * sag * t * (1.0 - t) * np.array([0.0, 0.0, 1.0]))


def solution(made: Guyed) -> Solution:
    """The made-up result of a sample."""
    asked = scenario(made)
    directions = asked.wind.directions if asked.wind else ()
    case = ("setting", *[c for c in made.cases for _ in directions])
    wind = np.array([nan, *[d for _ in made.cases for d in directions]])
    n = len(case)
    spars = [spar_line(asked.spar[0], np.zeros(3), n)]
    if made.boom:
        spars.append(spar_line(asked.spar[1], made.boom[0] * axis(asked.spar[0].lean, asked.spar[0].toward), n))
    place = {a.name: np.array([a.east, a.north, a.level]) for a in asked.anchor}
    ends = [_ends(c, spars, place) for c in asked.cable]
    share = made.push / max(len(made.levels), 1)
    fine = np.deg2rad(np.arange(0.0, 360.0, 5.0))
    tension = np.array([[_tension(e, share, made.initial, w) for e in ends] for w in wind]).reshape(n, len(ends))
    swept = (
        np.array([[_tension(e, share, made.initial, w) for e in ends] for w in fine])
        .reshape(1, len(fine), len(ends))
        .repeat(len(made.cases), axis=0)
    )
    unit = np.array([(top - low) / np.linalg.norm(top - low) for low, top in ends]).reshape(-1, 3)
    to = tuple(getattr(c.to, "anchor", None) for c in asked.cable)
    force = tension[..., None] * unit
    curve = np.stack([np.stack([hanging(*e, made.initial) for e in ends])] * n) if ends else np.empty((n, 0, POINTS, 3))
    cables = CableForces(
        tuple(c.name for c in asked.cable),
        tuple(c.from_.spar for c in asked.cable),
        to,
        tension,
        tension * 1.01,
        force,
        -force,
        np.ones_like(tension),
        tension < 20.0,
        np.ones(tension.shape, dtype=bool),
        curve,
        np.full(len(ends), 23e3),
    )
    name = tuple(place)
    none = np.zeros((n, 0, 3))
    pull = (
        np.stack([sum((force[:, i] for i, t in enumerate(to) if t == a), start=np.zeros((n, 3))) for a in name], axis=1) if name else none
    )
    swept_pull = (
        np.zeros((*swept.shape[:2], 0, 3))
        if not name
        else np.stack(
            [sum((swept[..., i, None] * unit[i] for i, t in enumerate(to) if t == a), start=np.zeros((*swept.shape[:2], 3))) for a in name],
            axis=2,
        )
    )
    anchors = AnchorPulls(name, np.array([place[a] for a in name]).reshape(-1, 3), pull)
    sweep = Sweep(
        tuple(made.cases),
        np.tile(fine, (len(made.cases), 1)),
        swept,
        np.linalg.norm(swept_pull, axis=-1),
        np.hypot(swept_pull[..., 0], swept_pull[..., 1]),
        swept_pull[..., 2],
        swept < 20.0,
    )

    def extreme(listed: np.ndarray, full: np.ndarray) -> Extreme:
        i = int(np.argmax(listed))
        line, turn = np.unravel_index(int(np.argmax(full)), full.shape)
        return Extreme(float(listed[i]), case[i], float(wind[i]), float(full.max()), made.cases[line], float(fine[turn]))

    worst_cables = tuple(
        CableWorst(c.name, e := extreme(tension[:, i], swept[..., i]), 23e3, 23e3 / e.peak) for i, c in enumerate(asked.cable)
    )
    worst_anchors = tuple(
        AnchorWorst(
            a,
            extreme(anchors.resultant[:, i], sweep.resultant[..., i]),
            extreme(anchors.horizontal[:, i], sweep.horizontal[..., i]),
            extreme(anchors.uplift[:, i], sweep.uplift[..., i]),
        )
        for i, a in enumerate(name)
    )
    down = pull[..., 2].sum(axis=1) + 9.0 * 9.81 * made.height
    foot = np.stack([pull[..., 0].sum(axis=1), pull[..., 1].sum(axis=1), -down], axis=-1)[:, None]

    def foot_extreme(values: np.ndarray) -> Extreme:
        i = int(np.argmax(values))
        return Extreme(float(values[i]), case[i], float(wind[i]), float(values[i]), case[i], float(wind[i]))

    def foot_worst(spar: str, by: str | None, share_of: float) -> FootWorst:
        side = np.hypot(foot[:, 0, 0], foot[:, 0, 1]) * share_of
        whole = np.hypot(down * share_of, side)
        none = Extreme(0.0, "setting", nan, 0.0, "setting", nan)
        return FootWorst(spar, by, foot_extreme(down * share_of), none, foot_extreme(side), foot_extreme(whole), none)

    feet = [foot_worst("mast", None, 1.0)] + ([foot_worst("boom", "mast", 0.1)] if made.boom else [])
    heels = (
        FootForces(("boom",), ("mast",), foot * 0.1, foot * 0)
        if made.boom
        else FootForces((), (), np.empty((n, 0, 3)), np.empty((n, 0, 3)))
    )
    findings = (
        tuple(_finding(w) for w in worst_cables)
        + tuple(
            Finding(
                f"anchor {a}",
                "pull",
                w.resultant.peak,
                nan,
                "N",
                1.5,
                nan,
                "not judged",
                w.resultant.case,
                w.resultant.wind_from,
                "no holdfast given: what holds it is not checked",
                True,
            )
            for a, w in zip(name, worst_anchors, strict=True)
        )
        + (Finding("spar mast", "lean", radians(0.31), radians(1.0), "rad", 1.0, 1.0 / 0.31, "within", made.cases[0], 0.0, "", True),)
    )
    return Solution(
        scenario=asked,
        version="0.1.0",
        case=case,
        wind_from=wind,
        state=("stable",) * n,
        note=(None,) * n,
        reason=(None,) * n,
        out_of_balance=np.full(n, 3e-12),
        reference_force=np.full(n, 6e3),
        iterations=np.full(n, 5),
        head_lean=np.full((n, len(spars)), radians(0.3)),
        cables=cables,
        anchors=anchors,
        bases=FootForces(("mast",), (None,), foot, foot * 0),
        heels=heels,
        spars=tuple(spars),
        worst_cables=worst_cables,
        worst_anchors=worst_anchors,
        worst_feet=tuple(feet),
        findings=findings,
        sweep=sweep,
        check=SelfCheck(2e-11, "agrees", 3e-9, made.cases[0], radians(30.0)),
        warnings=(),
        notes=(),
        not_checked=NOT_CHECKED,
        cautions=CAUTIONS,
    )


def _finding(worst: CableWorst) -> Finding:
    verdict = "within" if worst.factor >= 2.0 else "past"
    peak = worst.tension
    return Finding(
        f"cable {worst.name}",
        "tension",
        peak.peak,
        worst.strength,
        "N",
        2.0,
        worst.factor,
        verdict,
        peak.peak_case,
        peak.peak_wind_from,
        "",
        True,
    )


def _ends(cable: model.Cable, spars: list[SparLine], place: dict[str, np.ndarray]) -> tuple[np.ndarray, np.ndarray]:
    def at(spar: str, station: float) -> np.ndarray:
        line = next(s for s in spars if s.name == spar)
        return np.array([np.interp(station, line.station, line.drawn[:, i]) for i in range(3)])

    top = at(cable.from_.spar, cable.from_.at)
    if isinstance(cable.to, model.AnchorPoint):
        return place[cable.to.anchor], top
    return at(cable.to.spar, cable.to.at), top


def _tension(ends: tuple[np.ndarray, np.ndarray], share: float, initial: float, wind: float) -> float:
    low, top = ends
    east, north, up = low - top
    level = hypot(east, north)
    if not isfinite(wind) or level < 1e-6:
        return initial
    along = (east * sin(wind) + north * cos(wind)) / level
    return max(initial + share * along * hypot(1.0, up / level), 15.0)


def falling(made: Guyed, rows: Sequence[int]) -> Solution:
    """The sample with no equilibrium in some cases."""
    done = solution(made)
    state, reason = list(done.state), list(done.reason)
    arrays = {f: getattr(done.cables, f).copy() for f in ("tension_anchor", "tension_top", "curve")}
    pull = done.anchors.pull.copy()
    for row in rows:
        state[row] = "none"
        reason[row] = "the mast tips toward 210°, falls at 0.78 of the load; low N and low E had dropped"
        pull[row] = nan
        for values in arrays.values():
            values[row] = nan
    return replace(
        done,
        state=tuple(state),
        reason=tuple(reason),
        cables=replace(done.cables, **arrays),
        anchors=replace(done.anchors, pull=pull),
        warnings=(*done.warnings, "no equilibrium in some cases"),
    )


SMALL = Guyed(
    "Wind vane mast at the ferry steps", 5.0, (4.2,), ring(3, 3.2, 10.0, ["N", "SE", "SW"]), push=700.0, initial=150.0, sections=1
)
RELAY = Guyed(
    "Relay mast on the quarry bench",
    18.0,
    (9.0, 17.0),
    (("N", 8.0, 11.0, 2.0), ("SE", 124.0, 9.5, 0.0), ("SW", 245.0, 12.5, -2.0)),
    note="18 m tube mast, two guy levels",
    cases=("storm", "service"),
)
FOUR = Guyed(
    "Relay mast with four anchors",
    18.0,
    (9.0, 17.0),
    (("N", 8.0, 11.0, 2.0), ("E", 97.0, 9.5, 0.0), ("S", 183.0, 12.5, -2.0), ("W", 271.0, 10.5, 1.0)),
    note="two guy levels",
)
TALL = Guyed(
    "Tall mast on the moor",
    150.0,
    (25.0, 50.0, 75.0, 100.0, 125.0, 148.0),
    ring(3, 60.0, 20.0),
    push=90e3,
    initial=12e3,
    sections=6,
    fittings=5,
)
TALL6 = replace(
    TALL,
    title="Tall mast, inner and outer anchors",
    anchors=ring(3, 60.0, 20.0) + tuple((f"B{i}", 20.0 + 120.0 * i, 105.0, 1.0) for i in range(3)),
)
EIGHT = Guyed("Mast with eight anchors", 30.0, (14.0, 28.0), ring(8, 20.0, 5.0), push=15e3)
SAME = Guyed(
    "Anchors one behind another",
    24.0,
    (8.0, 16.0, 23.0),
    tuple((f"{n}{j}", b, r, 0.0) for n, b in (("N", 0.0), ("SE", 120.0), ("SW", 240.0)) for j, r in enumerate((6.0, 9.0, 15.0))),
)
BOOM = Guyed("Stayed boom at the slip", 12.0, (11.5,), ring(4, 9.0, 45.0), boom=(3.0, 8.0, 80.0))
PYLON = Guyed(
    "Leaning sign pylon at the east gate",
    14.0,
    (9.0, 13.5),
    (("back left", 60.0, 9.0, 0.0), ("back right", 120.0, 9.0, 0.5), ("fore", 270.0, 6.0, -0.4)),
    lean=20.0,
    toward=270.0,
    fittings=3,
)
LONG = Guyed(
    "A rather long title for a mast that stands on the upper terrace behind the old weighing house by the western boundary wall",
    21.0,
    (10.0, 20.0),
    (
        ("northern block by the gate of the yard", 350.0, 14.0, 0.3),
        ("picket group under the eastern embankment", 100.0, 12.0, -1.0),
        ("screw anchors beside the ditch $x_1$", 220.0, 13.0, 0.8),
    ),
    note="Free text of the user that goes on for some time, names the place, the client and the date, 3 June, and "
    "mentions that the lower level was measured by tape only.",
    cases=("storm with the large panel", "frost and ice", "service"),
)
WARNINGS = tuple(
    f"cable {9 + i} m N: {text}"
    for i, text in enumerate(
        (
            "tension 24.1 kN is above its strength of 23 kN in storm, wind from 30°",
            "still-air lean of the mast is 1/310, over 1/500",
            "base of the mast is pulled upward by 1.2 kN in storm, wind from 200°",
            "the state branches in storm, wind from 90°; both branches are covered",
            "a wind of 95 m/s looks like a unit slip (did you mean mph?)",
            "the heel of the boom is pulled off in storm, wind from 10°",
            "the re-solve ended in another stable state",
            "a mast of 18 m with a mass of 5 kg looks like a unit slip",
        )
    )
)
ALL = {
    "small": SMALL,
    "relay": RELAY,
    "four": FOUR,
    "tall": TALL,
    "tall6": TALL6,
    "eight": EIGHT,
    "same": SAME,
    "boom": BOOM,
    "pylon": PYLON,
    "long": LONG,
}
