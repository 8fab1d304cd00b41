"""What the drawings read from a `Solution`: positions as hung, what governs where, which cables drop in which winds.

Nothing here computes mechanics; a number is picked, compared or put into words.  Where the structure has no still-air equilibrium
(NaN in case 0) positions are those of the drawing and cables are drawn straight.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise
from math import isfinite, nan

import numpy as np
from numpy.typing import NDArray

from guys.checks import plan
from guys.drawing.rounding import ABSENT, bearing
from guys.results import AnchorWorst, Array, Extreme, Flags, Solution, SparLine, Sweep

SETTING = 0
_PARTED = 0.1
"""Anchors this far apart on the paper, in radii of the site, are told apart well."""


@dataclass(frozen=True)
class Governing:
    """The greatest of the listed and the refined value, with its case and wind."""

    value: float
    case: str
    wind_from: float


def greatest(extreme: Extreme) -> Governing:
    """Listed value or refined peak, whichever is larger."""
    if isfinite(extreme.peak) and not extreme.peak < extreme.value:
        return Governing(extreme.peak, extreme.peak_case, extreme.peak_wind_from)
    return Governing(extreme.value, extreme.case, extreme.wind_from)


def wind_cases(solution: Solution) -> tuple[str, ...]:
    """Names of the case lines that hold wind."""
    return tuple(dict.fromkeys(c for c, w in zip(solution.case, solution.wind_from, strict=True) if isfinite(w)))


def wind_words(solution: Solution, case: str, wind_from: float) -> str:
    """ "wind from 15°", with the case's name where several hold wind; a case without wind by its name."""
    if not case:
        return ABSENT
    if not isfinite(wind_from):
        return "still air, as set" if case == "setting" else f"still air, {case}"
    words = f"wind from {bearing(wind_from)}"
    return words if len(wind_cases(solution)) < 2 else f"{words}, {case}"


def stands(solution: Solution) -> bool:
    """Is there a still-air equilibrium to draw."""
    return solution.state[SETTING] != "none"


def hung_spar(solution: Solution, spar: SparLine) -> Array:
    """(station, 3) where the spar stands in still air; as drawn where it does not stand."""
    moved = spar.drawn + spar.displacement[SETTING]
    return np.asarray(moved if stands(solution) and bool(np.isfinite(moved).all()) else spar.drawn)


def at_station(solution: Solution, name: str, at: float) -> Array:
    """(3,) the still-air place of a point of a spar's axis."""
    spar = spar_named(solution, name)
    points = hung_spar(solution, spar)
    return np.array([np.interp(at, spar.station, points[:, i]) for i in range(3)])


def at_drawn_station(solution: Solution, name: str, at: float) -> Array:
    """(3,) the drawn place of a point of a spar's axis."""
    spar = spar_named(solution, name)
    return np.array([np.interp(at, spar.station, spar.drawn[:, i]) for i in range(3)])


def spar_named(solution: Solution, name: str) -> SparLine:
    """The spar of that name."""
    return next(spar for spar in solution.spars if spar.name == name)


def hung_cable(solution: Solution, cable: int) -> Array:
    """(point, 3) the cable as it hangs in still air, from its `to` end to its `from` end; straight where nothing hangs."""
    curve = solution.cables.curve[SETTING, cable]
    if stands(solution) and bool(np.isfinite(curve).all()):
        return np.asarray(curve)
    wanted = solution.scenario.cable[cable]
    top = at_station(solution, wanted.from_.spar, wanted.from_.at)
    to = solution.cables.to_anchor[cable]
    low = _anchor_place(solution, to) if to is not None else at_station(solution, wanted.to.spar, wanted.to.at)  # type: ignore[union-attr]
    return np.stack([low, top])


def _anchor_place(solution: Solution, name: str) -> Array:
    return np.asarray(solution.anchors.position[solution.anchors.name.index(name)])


def dropping(solution: Solution) -> Flags:
    """(cable,) does it drop in any case or wind of the sweep that keeps it."""
    cables = solution.cables
    ever = np.asarray((cables.slack & cables.present).any(axis=0))
    if solution.sweep is not None and solution.sweep.slack.size:
        ever = np.asarray(ever | solution.sweep.slack.any(axis=(0, 1)))
    listed = np.array([bool(w.slack_winds) for w in solution.worst_cables], dtype=bool)
    return np.asarray(ever | listed) if len(listed) == len(ever) else ever


def anchor_cables(solution: Solution, anchor: str) -> list[int]:
    """Which cables run to an anchor."""
    return [i for i, to in enumerate(solution.cables.to_anchor) if to == anchor]


def governing_pull(solution: Solution, anchor: str, extreme: Extreme) -> Array:
    """(3,) [N] the pull on an anchor in the listed case an extreme belongs to; NaN where that is not among the cases."""
    column = solution.anchors.name.index(anchor)
    for row, (case, wind) in enumerate(zip(solution.case, solution.wind_from, strict=True)):
        same_wind = wind == extreme.wind_from or (not isfinite(wind) and not isfinite(extreme.wind_from))
        if case == extreme.case and same_wind:
            return np.asarray(solution.anchors.pull[row, column])
    return np.full(3, nan)


def pull_angle(solution: Solution, worst: AnchorWorst) -> float:
    """Angle from the ground [rad] of an anchor's greatest pull."""
    east, north, up = governing_pull(solution, worst.name, worst.resultant)
    return float(np.arctan2(up, np.hypot(east, north)))


def pull_direction(solution: Solution, worst: AnchorWorst) -> NDArray[np.float64]:
    """(2,) unit vector east, north of the anchor's horizontal pull in its governing case; along its guys where that is not known."""
    pull = governing_pull(solution, worst.name, worst.horizontal)[:2]
    size = float(np.hypot(*pull))
    if isfinite(size) and size > 0.0:
        return np.asarray(pull / size)
    return _along_guys(solution, worst.name)


def _along_guys(solution: Solution, anchor: str) -> NDArray[np.float64]:
    runs = [hung_cable(solution, i) for i in anchor_cables(solution, anchor)]
    total = sum((run[-1, :2] - run[0, :2] for run in runs), start=np.zeros(2))
    size = float(np.hypot(*total))
    return np.asarray(total / size) if size > 0.0 else np.array([0.0, 1.0])


def base_point(solution: Solution) -> Array:
    """(3,) the foot of the first spar, from which bearings and radii run."""
    return np.asarray(solution.spars[0].drawn[0])


def from_base(solution: Solution, point: Array) -> tuple[float, float, float]:
    """Bearing [rad], level distance and slope distance [m] of a point from the first foot."""
    east, north, up = point - base_point(solution)
    level = float(np.hypot(east, north))
    turn = float(np.arctan2(east, north)) % (2.0 * np.pi) if level > 0.0 else nan
    return turn, level, float(np.hypot(level, up))


def guy_angle(solution: Solution, cable: int) -> float:
    """Angle of a cable's chord from the ground [rad]."""
    run = hung_cable(solution, cable)
    east, north, up = run[-1] - run[0]
    return float(np.arctan2(up, np.hypot(east, north)))


def slack_sectors(solution: Solution, cable: int) -> tuple[str, ...]:
    """In words, each sector of winds and each still-air case in which a cable drops."""
    words = _swept_winds(solution, cable) if solution.sweep is not None else [_listed_winds(solution, cable)]
    for row, (case, wind) in enumerate(zip(solution.case, solution.wind_from, strict=True)):
        if not isfinite(wind) and solution.cables.slack[row, cable] and solution.cables.present[row, cable]:
            words.append("still air, as set" if case == "setting" else f"still air, {case}")
    return tuple(w for w in words if w)


def _swept_winds(solution: Solution, cable: int) -> list[str]:
    """Sectors of each case with wind; named only where they differ between cases."""
    sweep = solution.sweep
    if sweep is None:
        return []
    by_sector: dict[str, list[str]] = {}
    for line, case in enumerate(sweep.case):
        by_sector.setdefault(_sector_words(sweep.slack[line, :, cable], bearings_of(sweep, line)), []).append(case)
    if len(by_sector) == 1:
        return list(by_sector)
    return [f"{words} ({', '.join(cases)})" for words, cases in by_sector.items() if words]


def _listed_winds(solution: Solution, cable: int) -> str:
    slack = solution.cables.slack[:, cable] & solution.cables.present[:, cable] & np.isfinite(solution.wind_from)
    turns = sorted({bearing(float(w)) for w in solution.wind_from[slack]}, key=lambda t: float(t[:-1]))
    return f"wind from {', '.join(turns)}" if turns else ""


def bearings_of(sweep: Sweep, line: int) -> Array:
    """(direction,) bearings a case with wind was swept at."""
    return np.asarray(np.atleast_2d(sweep.bearing)[line % len(np.atleast_2d(sweep.bearing))])


def _sector_words(slack: Flags, bearings: Array) -> str:
    runs = sectors(slack, bearings)
    if not runs:
        return ""
    if bool(slack.all()):
        return "wind from every bearing"
    return "wind from " + " and ".join(bearing(a) if a == b else f"{bearing(a)} to {bearing(b)}" for a, b in runs)


def sectors(flags: Flags, bearings: Array) -> list[tuple[float, float]]:
    """Runs of True around the circle as first and last bearing; [(0, 0)] where all are True."""
    if not flags.any():
        return []
    if flags.all():
        return [(0.0, 0.0)]
    starts = np.flatnonzero(flags & ~np.roll(flags, 1))
    ends = np.flatnonzero(flags & ~np.roll(flags, -1))
    if ends[0] < starts[0]:
        ends = np.roll(ends, -1)
    return [(float(bearings[a]), float(bearings[b])) for a, b in zip(starts, ends, strict=True)]


def _run(solution: Solution, spar: SparLine) -> Array:
    points = hung_spar(solution, spar)
    return np.asarray(points[-1, :2] - points[0, :2])


def look_bearing(solution: Solution) -> float:
    """Bearing [rad] the elevation looks toward to show most."""
    return most_shown(base_point(solution)[:2], solution.anchors.position[:, :2], [_run(solution, spar) for spar in solution.spars])


def most_shown(foot: Array, anchors: Sequence[Array] | Array, runs: Sequence[Array]) -> float:
    """Bearing [rad] to look toward that shows most: anchors and spars spread out, none hidden behind another; all in plan, (2,) each.

    Of bearings every 5°, the one with the least sum over pairs of anchors (the base among them) of exp(-gap / 0.1), gap their distance
    on the paper in widths of the site: it parts what would coincide.  Spars that lean or reach out add their length on the paper.
    """
    ends = [place - foot for place in anchors]
    size = max([float(np.hypot(*p)) for p in [*ends, *runs]] + [1e-9])
    points = np.array([np.zeros(2), *ends])
    turns = np.deg2rad(np.arange(-90.0, 90.0, 5.0))
    shown = np.column_stack([np.cos(turns), -np.sin(turns)])
    across = shown @ points.T
    hidden = np.exp(-np.abs(across[:, :, None] - across[:, None, :]) / (_PARTED * size))
    hidden[:, 0, :] *= 2.0
    lean = np.abs(shown @ np.array(runs).T).sum(axis=1) / size
    score = len(points) * lean - hidden.sum(axis=(1, 2))
    best = int(np.argmax(np.round(score, 9) - 1e-6 * np.abs(turns)))
    return float(turns[best]) % (2.0 * np.pi)


@dataclass(frozen=True)
class View:
    """Looking level toward a bearing: right of it is to the right, up is up."""

    toward: float

    def project(self, points: Array) -> Array:
        """(..., 3) on the site to (..., 2): distance to the right, level [m]."""
        right = points[..., 0] * np.cos(self.toward) - points[..., 1] * np.sin(self.toward)
        return np.stack([right, points[..., 2]], axis=-1)


def check_distances(solution: Solution) -> list[tuple[str, float]]:
    """Level distances between anchors next to each other around the base, as names joined by a dash."""
    turns = [(from_base(solution, p)[0], i) for i, p in enumerate(solution.anchors.position)]
    order = [i for _, i in sorted(turns)]
    pairs = list(pairwise(order)) + ([(order[-1], order[0])] if len(order) > 2 else [])
    name, at = solution.anchors.name, solution.anchors.position[:, :2]
    return [(f"{name[i]}–{name[j]}", float(np.hypot(*(at[i] - at[j])))) for i, j in pairs]


def fall_circles(solution: Solution) -> list[tuple[str, Array, float]]:
    """For every spar on the ground its name, foot (2,) and the farthest any point of it, or of spars it carries, is from that foot."""
    carried = {spar: by for spar, by in zip(solution.heels.spar, solution.heels.carried_by, strict=True) if by is not None}
    return [(name, foot[:2], reach) for name, foot, reach in plan.fall_circles(solution.spars, carried)]
