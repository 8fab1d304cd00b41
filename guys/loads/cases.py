"""Load cases: case lines times wind directions, superposed from unit loads.

`dead` multiplies weights and fixed loads, `wind` the pressure, `ice` the weight of ice; iced widths apply wherever ice > 0.  The still-air
setting case is dead load alone.  Wind and heights are taken on the setting position, given as `Placed`.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import dataclass, fields, replace

import numpy as np
from numpy.typing import NDArray

from guys.constants import STANDARD_GRAVITY
from guys.loads import dead, gusts, pressure, wind
from guys.loads.drag import attached
from guys.loads.iced import Ice, ice_at
from guys.loads.spread import Weights, to_nodes, weights
from guys.rotation import Array, outer, turned
from guys.scenario import Scenario
from guys.scenario import patches as bands
from guys.scenario.model import ASIDE, CaseKind, Wind
from guys.scenario.patches import MEAN, Patch
from guys.structure import Pieces, Points, Structure


@dataclass(frozen=True)
class CaseLine:
    """One case in one wind direction; wind_from [rad], NaN without wind; temperature [K]; without: cables taken away; bare:
    cables without ice; kind: of the case; aside: where the forces on signs stand, see `guys.loads.drag.attached`;
    drag: factor on every drag coefficient; speed [m/s] of the wind, None: the scenario's; patches: its gusts, each solved for in a line
    of its own that has it as its `patch` (`states`); neither: the peak pressure on everything at once."""

    name: str
    wind_from: float
    dead: float
    wind: float
    ice: float
    temperature: float
    without: tuple[str, ...] = ()
    bare: tuple[str, ...] = ()
    aside: str = ""
    kind: CaseKind = "service"
    drag: float = 1.0
    speed: float | None = None
    patches: tuple[Patch, ...] = ()
    patch: Patch | None = None

    def states(self) -> tuple[CaseLine, ...]:
        """What is solved for it: itself, or the mean wind and then every patch with the mean wind."""
        if not self.patches:
            return (self,)
        return tuple(replace(self, patches=(), patch=patch) for patch in (MEAN, *self.patches))


@dataclass(frozen=True)
class Placed:
    """A position of the structure, for loads: u (node, 3) [m], psi (node, 3, 3) = R - I, unstressed length (cable,) [m]."""

    u: Array
    psi: Array
    length: Array


@dataclass(frozen=True)
class LoadCases:
    """Loads with a leading case axis.

    force (case, node, 3) [N], dyad (case, node, 3, 3) [N m]: on the nodes; on_pieces (case, piece, 4, 3), on_fittings (case, fitting, 3):
    the
    same before they reached the nodes; cable_load (case, cable, 3) [N/m] per unstressed length at the setting temperature;
    at_ends (case, cable, 2, 3) [N] on what holds the `to` and the `from` end of a cable, as when one parts (`guys.loads.parting`);
    warming (case,) [K] above the setting; present (case, cable), 1 or 0, or a share while a cable fades along a path;
    weight, wind_force (case,) [N] sizes of the total dead and ice load, and of the total wind; lines: what each case is.
    """

    force: Array
    dyad: Array
    on_pieces: Array
    on_fittings: Array
    cable_load: Array
    at_ends: Array
    warming: Array
    present: Array
    weight: Array
    wind_force: Array
    lines: tuple[CaseLine, ...]

    def _each(self, change: Callable[[str], Array], lines: tuple[CaseLine, ...]) -> LoadCases:
        return LoadCases(**{f.name: change(f.name) for f in fields(self) if f.name != "lines"}, lines=lines)

    def take(self, rows: NDArray[np.int64]) -> LoadCases:
        """The cases `rows`, in that order."""
        return self._each(lambda name: getattr(self, name)[rows], tuple(self.lines[r] for r in rows))

    def between(self, start: LoadCases, share: Array) -> LoadCases:
        """From the case of `start`, or its case each, toward each case here: all departures together, at the shares (case,) of the way."""

        def mix(name: str) -> Array:
            a, b = getattr(start, name), getattr(self, name)
            s = share.reshape(-1, *([1] * (b.ndim - 1)))
            return np.asarray((1 - s) * a + s * b)

        return self._each(mix, self.lines)


def joined(parts: Sequence[LoadCases]) -> LoadCases:
    """Cases one after another."""
    arrays = {f.name: np.concatenate([getattr(p, f.name) for p in parts]) for f in fields(LoadCases) if f.name != "lines"}
    return LoadCases(**arrays, lines=tuple(line for p in parts for line in p.lines))


def setting_line(scenario: Scenario) -> CaseLine:
    """Still air, dead load and initial tensions alone."""
    return CaseLine("setting", math.nan, 1.0, 0.0, 0.0, scenario.setting.temperature)


def lines_of(scenario: Scenario, directions: Sequence[float] | None = None) -> tuple[CaseLine, ...]:
    """The scenario's cases, each with wind once for every direction ([rad]; default: the file's), and where there are signs also with
    the forces on these moved to either side, under a name of its own."""
    out = []
    for case in scenario.case:
        bearings: Sequence[float] = [math.nan]
        asides: tuple[str, ...] = ("",)
        patches: tuple[Patch, ...] = ()
        if case.wind > 0 and scenario.wind is not None:
            bearings = scenario.wind.directions if directions is None else directions
            asides = attached.asides(scenario)
            patches = bands.of(scenario)
        line = CaseLine(case.name, math.nan, case.dead, case.wind, case.ice, case.temperature, case.without, case.bare)
        names = [f"{case.name}{ASIDE}{aside}" if aside else case.name for aside in asides]
        line = replace(line, kind=case.kind, patches=patches)
        out += [replace(line, name=n, wind_from=b, aside=a) for n, a in zip(names, asides, strict=True) for b in bearings]
    return tuple(out)


def assemble(structure: Structure, lines: Sequence[CaseLine], placed: Placed) -> LoadCases:
    """Loads of every line on the structure as placed."""
    scenario = structure.scenario
    there = _there(structure, placed, lines)
    w = there.weights
    ice = ice_at(structure, there.z, there.low, there.high)
    names = [c.name for c in scenario.cable]
    present, bare = (_named([getattr(c, which) for c in lines], names) for which in ("without", "bare"))
    present = 1.0 - present
    reduced = scenario.ice.wind_factor if scenario.ice is not None else 1.0
    d, v, i = np.array([[c.dead, c.wind * c.drag * (reduced if c.ice > 0 else 1.0), c.ice] for c in lines]).T
    both = dead.superposed(np.stack([d, i], axis=1), [dead.dead(structure, w), dead.ice(structure, w, ice.mass)])
    still = both.total()
    blown, on_cables = _wind(structure, lines, there, ice, v, (i[:, None] > 0) & (bare == 0.0))
    both.add(v, blown)
    warming = np.array([c.temperature - scenario.setting.temperature for c in lines])
    _move_off(structure.pieces, both.on_pieces, warming)
    cable_weights = STANDARD_GRAVITY * (d[:, None] * structure.cables.mass + i[:, None] * (1.0 - bare) * ice.cable_mass)
    down = cable_weights[..., None] * dead.DOWN
    hangs = scenario.analysis.cable == "catenary"
    force, dyad = to_nodes(structure.pieces, both.on_pieces, structure.nodes)
    add_points(structure.fittings.point, both.on_fittings, warming, force, dyad)
    cable_weight = hangs * (np.abs(down[..., 2]) * placed.length * present).sum(axis=1)
    cable_wind = hangs * (on_cables * present[..., None]).sum(axis=1)
    return LoadCases(
        force=force,
        dyad=dyad,
        on_pieces=both.on_pieces,
        on_fittings=both.on_fittings,
        cable_load=(down + v[:, None, None] * on_cables / placed.length[:, None]) * hangs,
        at_ends=np.zeros((*present.shape, 2, 3)),
        warming=warming,
        present=present,
        weight=np.linalg.norm(still, axis=-1) + cable_weight,
        wind_force=v * np.linalg.norm(blown.total() + cable_wind, axis=-1),
        lines=tuple(lines),
    )


def _move_off(pieces: Pieces, on_pieces: Array, warming: Array) -> None:
    """Change the levers of loads on rigid spars, which are about their feet, as the spars grow; elastic ones carry their nodes off."""
    start, end = pieces.station.T
    rate = (pieces.growth[:, 1] - pieces.growth[:, 0]) / (end - start)
    from_foot = (pieces.growth[:, 0] - rate * start)[:, None] * on_pieces[:, :, 0] + rate[:, None] * on_pieces[:, :, 1]
    on_pieces[:, :, 1] += warming[:, None, None] * from_foot


def add_points(points: Points, on_points: Array, warming: Array, force: Array, dyad: Array) -> None:
    """Put forces (case, point, 3) at points on their nodes, arms growing with temperature."""
    for k, node in enumerate(points.node):
        force[:, node] += on_points[:, k]
        dyad[:, node] += outer(points.arm[k] + warming[:, None] * points.growth[k], on_points[:, k])


def _named(listed: Sequence[Sequence[str]], names: Sequence[str]) -> Array:
    """(case, cable) 1 where a cable is in the list of a case."""
    out = np.zeros((len(listed), len(names)))
    for row, some in enumerate(listed):
        if some:
            out[row] = [name in some for name in names]
    return out


@dataclass(frozen=True)
class _There:
    """The placed structure: axis (piece, 3), z (piece, gauss) [m] above the spar's foot; chord (cable, 3), low, high (cable,) [m] heights
    of the ends of cables above the foot of the spar of their `from` end; fittings (point, 3), foot (spar, 3) [m]."""

    weights: Weights
    axis: Array
    z: Array
    chord: Array
    low: Array
    high: Array
    fittings: Array
    foot: Array


def _there(structure: Structure, placed: Placed, lines: Sequence[CaseLine]) -> _There:
    pieces, cables = structure.pieces, structure.cables
    foot = structure.position[structure.foot] + placed.u[structure.foot]
    start, end = (on_axis(structure, placed, k) for k in (0, 1))
    along = end - start
    w = weights(pieces, _cuts(structure, lines, start[:, 2], along[:, 2], foot[:, 2]))
    fraction = (w.station - pieces.station[:, :1]) / (pieces.station[:, 1:] - pieces.station[:, :1])
    z = start[:, None, 2] + fraction * along[:, None, 2] - foot[pieces.spar, None, 2]
    a, b = where(structure, placed, cables.a), where(structure, placed, cables.b)
    base = foot[cables.spar, 2]
    axis = along / np.linalg.norm(along, axis=-1, keepdims=True)
    return _There(w, axis, z, b - a, a[:, 2] - base, b[:, 2] - base, where(structure, placed, structure.fittings.point), foot)


def _cuts(structure: Structure, lines: Sequence[CaseLine], start: Array, rise: Array, foot: Array) -> Array:
    """Shares (piece, cut) of pieces that start at a level and rise so much [m] at which the pressure jumps or bends."""
    blows = structure.scenario.wind
    if blows is None or all(line.wind == 0 for line in lines):
        return np.zeros((len(start), 0))
    bent = [foot[structure.pieces.spar] + z for z in pressure.bends(blows.profile)]
    jumps = [np.full(len(start), foot[bands.mast(structure.scenario)] + height) for height in gusts.edges([line.patch for line in lines])]
    steep = np.where(np.abs(rise) > pressure.LEVEL, rise, np.inf)
    return np.asarray((np.stack([*bent, *jumps], axis=1) - start[:, None]) / steep[:, None])


def _wind(
    structure: Structure, lines: Sequence[CaseLine], there: _There, ice: Ice, factor: Array, iced_cables: wind.Flags
) -> tuple[dead.Loads, Array]:
    """Loads on spars and fittings, and whole wind forces on cables (case, cable, 3), for a factor of one; zero where there is none."""
    cases, pieces, fittings, cables = len(lines), len(structure.pieces.spar), len(structure.fittings.of), len(structure.cables.EA)
    on_pieces, on_fittings, on_cables = np.zeros((cases, pieces, 4, 3)), np.zeros((cases, fittings, 3)), np.zeros((cases, cables, 3))
    for blows, rows in _winds(structure.scenario.wind, lines):
        some = [lines[k] for k in rows]
        patches, patch = wind.patched([c.patch for c in some])
        now = wind.Blown(
            wind_from=np.array([c.wind_from for c in some]),
            iced=np.array([c.ice > 0 for c in some]),
            strength=np.minimum(factor[rows], 1.0),
            iced_cables=iced_cables[rows],
            aside=[c.aside for c in some],
            patches=patches,
            patch=patch,
            above_mast=there.foot[:, 2] - there.foot[bands.mast(structure.scenario), 2],
        )
        on_pieces[rows] = wind.on_spars(structure, blows, there.weights, there.axis, there.z, ice, now)
        on_fittings[rows] = wind.on_fittings(structure, blows, there.fittings, there.foot, now)
        on_cables[rows] = wind.on_cables(structure, blows, there.chord, there.low, there.high, ice, now)
    return dead.Loads(on_pieces, on_fittings), on_cables


def _winds(blows: Wind | None, lines: Sequence[CaseLine]) -> list[tuple[Wind, NDArray[np.int64]]]:
    """The wind at every speed that lines ask for, and the lines that do."""
    if blows is None:
        return []
    by_speed: dict[float, list[int]] = {}
    for k, line in enumerate(lines):
        if line.wind != 0:
            by_speed.setdefault(blows.speed if line.speed is None else line.speed, []).append(k)
    return [(blows.model_copy(update={"speed": speed}), np.array(rows)) for speed, rows in by_speed.items()]


def where(structure: Structure, placed: Placed, points: Points) -> Array:
    """(point, 3) [m] points of the placed structure."""
    return structure.position[points.node] + placed.u[points.node] + turned(placed.psi[points.node], points.arm)


def on_axis(structure: Structure, placed: Placed, end: int) -> Array:
    """Start (0) or end (1) of every piece of spar: a node of an elastic spar, a point on the arm of a rigid one."""
    pieces = structure.pieces
    node = pieces.low if end == 0 else pieces.high
    arm = np.where(pieces.rigid[:, None], pieces.station[:, end, None] * pieces.axis, 0.0)
    return structure.position[node] + placed.u[node] + turned(placed.psi[node], arm)


def as_drawn(structure: Structure, length: Array) -> Placed:
    """The drawn position."""
    return Placed(np.zeros((structure.nodes, 3)), np.zeros((structure.nodes, 3, 3)), length)
