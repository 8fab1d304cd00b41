"""A scenario as index arrays: nodes, elements, cables, anchors, joints, and the places loads act on.

Nodes are numbered spar by spar from the foot up (a rigid spar is one node, at its foot), then one for every anchor, then one that
stands for the ground.  Everything made fast to a spar is a point: a node and a rigid arm from it in drawn axes.  The local axes of a
spar are x: level, toward its `toward` bearing plus 90 degrees; y: square to it and to the spar; t: along the spar from the foot
(x, y, t right-handed; for an upright spar with toward = 0 they are east, north, up).

A foot on the ground is held exactly: a pinned one turns freely about both axes square to its drawn axis and not about that (the moment on
the ground is along it), a hinged one about its hinge alone.  Joints between spars hold by stiffness, `HOLD` times the spar's own, as
if a stub of that share of its length were between.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from guys import mesh
from guys.band import Frames, Pattern, Rides, column_sources, lay_out
from guys.beam import Rods
from guys.constants import STANDARD_GRAVITY
from guys.joint import Joints
from guys.rotation import Array
from guys.scenario import Scenario, Spar, parts
from guys.scenario.model import AnchorPoint, Fitting, GroundFoot, HeelFoot, SparPoint
from guys.scenario.shapes import roughness
from guys.sections import Properties, properties

Index = NDArray[np.int64]
HOLD = 1e5
"""Stiffness of a joint that only holds, over EI/L of its spar: it turns by 1e-5 of what the spar's own bending gives."""
HOLD_RIGID = 1e5
"""The same for rigid spars, over (weight of the whole, or a thousandth of the stiffest cable's EA) times the spar's length;
ten times as much, and the rounding of its rotations passes for a force of 1e-9 of that."""

HELD = {
    "pinned": (True, True, True, False, False, True),
    "sprung": (True, True, True, False, False, True),
    "hinged": (True, True, True, False, True, True),
    "ball": (True, True, True, False, False, False),
    "fixed": (True, True, True, True, True, True),
}
"""Directions held at a foot on the ground, rotations about its frame: the spar's axes x, y, t, or hinge axis, across, up."""


@dataclass(frozen=True)
class Points:
    """Points made fast to nodes.  node (point,); arm (point, 3) [m] in drawn axes; growth (point, 3) [m/K] change of the arm with
    temperature.
    """

    node: Index
    arm: Array
    growth: Array


@dataclass(frozen=True)
class Pieces:
    """Stretches of spar that carry distributed loads, from `start` to `end` point (piece,); each of one section.

    spar (piece,) index; station (piece, 2) [m]; low, high : the node that takes each end's share (the same for a rigid spar); rigid
    (piece,)
    section (piece,) index of the section in its spar; mass, iced_mass [kg/m], width, iced_width [m], before any effect of height on ice;
    bar [m] of tubes, else NaN; drag [-], NaN: chosen from the shape; axis (piece, 3) drawn axis; growth (piece, 2) [m/K] by which the ends
    of a piece of a rigid spar move off from the foot with temperature
    """

    spar: Index
    section: Index
    station: Array
    low: Index
    high: Index
    rigid: NDArray[np.bool_]
    mass: Array
    iced_mass: Array
    width: Array
    iced_width: Array
    bar: Array
    drag: Array
    axis: Array
    growth: Array


@dataclass(frozen=True)
class Elements:
    """Beam elements: rods' constants, end nodes, spar index, stations of their ends [m], expansion [1/K]."""

    rods: Rods
    i: Index
    j: Index
    spar: Index
    station: Array
    expansion: Array


@dataclass(frozen=True)
class Cables:
    """Cables from end A (`to`) to end B (`from`): points (cable,), EA [N], diameter [m], mass [kg/m], drag (NaN: chosen from the
    shape), roughness [m] of smooth round ropes (NaN: stranded), strength [N] of the weakest link (NaN: not given), expansion [1/K],
    spar of the `from` end (cable,)."""

    a: Points
    b: Points
    EA: Array
    diameter: Array
    mass: Array
    drag: Array
    roughness: Array
    strength: Array
    expansion: Array
    spar: Index


@dataclass(frozen=True)
class Fittings:
    """What spars carry: points, spar index, station [m], index pairs (spar, fitting) into the scenario, side.

    First the fittings in file order (side 0), then the edges of the signs, where their wind acts: side 1 the left one, -1 the right one,
    for one who looks at the face.
    """

    point: Points
    spar: Index
    station: Array
    of: tuple[tuple[int, int], ...]
    side: Index


@dataclass(frozen=True)
class Structure:
    """The whole structure.  See the module's text; `position` (node, 3) [m] drawn; `spar` (node,) index or -1; `station` (node,) [m];
    `axes` (spar, 3, 3) rows x, y, t; `foot` (spar,) node; `head` point of every spar; `held` (node, 6) in `frames`;
    `ride_arm` (ride, 3) [m] and `ride_growth` [m/K] of riding feet from their carriers' nodes; `unspun` spars whose feet do not spin;
    `give` (anchor,) [N/m], inf: none."""

    scenario: Scenario
    position: Array
    spar: Index
    station: Array
    axes: Array
    length: Array
    foot: Index
    head: Points
    held: NDArray[np.bool_]
    rides: Rides
    ride_arm: Array
    ride_growth: Array
    frames: Frames
    unspun: tuple[int, ...]
    elements: Elements
    pieces: Pieces
    cables: Cables
    fittings: Fittings
    joints: Joints
    anchor: Index
    give: Array
    ground: int
    height: float
    weight: float

    @property
    def nodes(self) -> int:
        """Number of nodes."""
        return len(self.position)

    @cached_property
    def loose(self) -> Index:
        """Cables whose `to` end is not held in every direction: those between spars, and to anchors that give."""
        return np.flatnonzero(~self.held[self.cables.a.node].all(axis=1))

    @cached_property
    def pattern(self) -> Pattern:
        """Where blocks of the tangent go, in parts: elements at their lower nodes, upper nodes, and between; cables at B, loose ones at A,
        and between; joints at their carriers, at their spars, and between."""
        e, joints = self.elements, self.joints
        a, b = self.cables.a.node[self.loose], self.cables.b.node[self.loose]
        m, n = joints.carrier_node, joints.spar_node
        rows = [e.i, e.j, e.j, self.cables.b.node, a, np.maximum(a, b), m, n, np.maximum(m, n)]
        columns = [e.i, e.j, e.i, self.cables.b.node, a, np.minimum(a, b), m, n, np.minimum(m, n)]
        return lay_out(rows, columns, self.held, self.rides, self.frames)

    @cached_property
    def spin_columns(self) -> Index:
        """(unspun, unknown) where the tangent's columns of the held spins stand in its blocks."""
        return np.array([column_sources(self.pattern, int(self.foot[k]), 5) for k in self.unspun], dtype=np.int64)

    @cached_property
    def tilts(self) -> Index:
        """(unspun, 2) the unknowns that tilt the feet that do not spin, about the axes x and y of their spars."""
        number = {(int(n), int(d)): row for row, (n, d) in enumerate(self.pattern.free)}
        return np.array([[number[int(self.foot[k]), d] for d in (3, 4)] for k in self.unspun], dtype=np.int64).reshape(-1, 2)


def axis_of(spar: Spar) -> Array:
    """Rows x, y, t of a spar's drawn local axes."""
    s, c = math.sin(spar.lean), math.cos(spar.lean)
    east, north = math.sin(spar.toward), math.cos(spar.toward)
    t = np.array([s * east, s * north, c])
    x = np.array([north, -east, 0.0])
    return np.array([x, np.cross(t, x), t])


def build(scenario: Scenario, finer: int = 1) -> Structure:
    """The structure of a scenario; `finer` multiplies the number of elements in every span."""
    return _Builder(scenario, finer).structure()


class _Builder:
    """Collects nodes and points while the arrays are made; nothing of it outlives `build`."""

    def __init__(self, scenario: Scenario, finer: int) -> None:
        self.scenario = scenario
        self.number = {spar.name: k for k, spar in enumerate(scenario.spar)}
        self.axes = np.array([axis_of(spar) for spar in scenario.spar])
        self.feet = self._feet()
        self.sections = [[properties(s, scenario.material, scenario.ice) for s in spar.section] for spar in scenario.spar]
        self.cuts = [self._stations(k, finer) for k in range(len(scenario.spar))]
        self.stations = [mesh.Stations(np.zeros(1)) if spar.rigid else cut for spar, cut in zip(scenario.spar, self.cuts, strict=True)]
        self.first = np.concatenate([[0], np.cumsum([len(s.station) for s in self.stations])]).astype(np.int64)
        self.anchor = {a.name: int(self.first[-1]) + k for k, a in enumerate(scenario.anchor)}
        self.ground = int(self.first[-1]) + len(scenario.anchor)

    def _feet(self) -> Array:
        """(spar, 3) drawn feet, carriers before what they carry."""
        feet = np.full((len(self.scenario.spar), 3), np.nan)
        while np.isnan(feet).any():
            for k, spar in enumerate(self.scenario.spar):
                if isinstance(spar.foot, GroundFoot):
                    feet[k] = spar.foot.east, spar.foot.north, spar.foot.level
                else:
                    m = self.number[spar.foot.spar]
                    feet[k] = feet[m] + spar.foot.at * self.axes[m, 2]
        return feet

    def _stations(self, k: int, finer: int) -> mesh.Stations:
        spar = self.scenario.spar[k]
        boundaries = np.cumsum([s.length for s in spar.section])[:-1]
        ends = [end for c in self.scenario.cable for end in (c.from_, c.to) if isinstance(end, SparPoint) and end.spar == spar.name]
        heels = [s.foot.at for s in self.scenario.spar if isinstance(s.foot, HeelFoot) and s.foot.spar == spar.name]
        held, attached = [e.at for e in ends] + heels, [f.at for f in spar.fitting]
        return mesh.divide(spar.length, boundaries.tolist(), held, attached, mesh.ELEMENTS, finer)

    def point(self, k: int, at: float, offset: Array | None = None) -> tuple[int, Array, Array]:
        """Node, arm and growth of a point at `at` along spar k, `offset` from its axis."""
        local, beyond = self.stations[k].nearest(at)
        along = beyond * self.axes[k, 2]
        arm = along if offset is None else along + offset
        return int(self.first[k]) + local, arm, self._growth(k, at - beyond, at) * self.axes[k, 2]

    def _growth(self, k: int, start: float, end: float) -> float:
        """By how much spar k grows between two stations [m/K], negative where `end` is below `start`."""
        bounds = self._bounds(k)
        expansion = np.array([p.expansion for p in self.sections[k]])
        low, high = (np.clip(at, bounds[:-1], bounds[1:]) for at in (start, end))
        return float((high - low) @ expansion)

    def drawn(self, end: SparPoint | AnchorPoint) -> Array:
        """Drawn position of a cable's end on the axis of its spar, or of its anchor."""
        if isinstance(end, AnchorPoint):
            a = next(a for a in self.scenario.anchor if a.name == end.anchor)
            return np.array([a.east, a.north, a.level])
        k = self.number[end.spar]
        return np.asarray(self.feet[k] + end.at * self.axes[k, 2])

    def end(self, end: SparPoint | AnchorPoint, other: SparPoint | AnchorPoint) -> tuple[int, Array, Array]:
        if isinstance(end, AnchorPoint):
            return self.anchor[end.anchor], np.zeros(3), np.zeros(3)
        level = self.drawn(other) - self.drawn(end)
        level[2] = 0.0
        reach = float(np.hypot(level[0], level[1]))
        lug = level * (end.arm / reach) if reach > 0 else np.zeros(3)
        return self.point(self.number[end.spar], end.at, lug)

    def structure(self) -> Structure:
        scenario = self.scenario
        pieces = self._pieces()
        cables = self._cables()
        weight = self._weight(pieces, cables)
        position, spar, station = self._nodes()
        held, rides, arms, growth, joints = self._supports(weight, cables)
        frames, unspun = self._frames()
        top = max([float(np.abs(self.axes[k, 2]).max() * s.length) for k, s in enumerate(scenario.spar)])
        return Structure(
            scenario=scenario,
            position=position,
            spar=spar,
            station=station,
            axes=self.axes,
            length=np.array([s.length for s in scenario.spar]),
            foot=self.first[:-1].copy(),
            head=_points([self.point(k, s.length) for k, s in enumerate(scenario.spar)]),
            held=held,
            rides=rides,
            ride_arm=arms,
            ride_growth=growth,
            frames=frames,
            unspun=unspun,
            elements=self._elements(),
            pieces=pieces,
            cables=cables,
            fittings=self._fittings(),
            joints=joints,
            anchor=np.array(list(self.anchor.values()), dtype=np.int64),
            give=np.array([math.inf if a.give is None else a.give for a in scenario.anchor]),
            ground=self.ground,
            height=top,
            weight=weight,
        )

    def _nodes(self) -> tuple[Array, Index, Array]:
        position = [self.feet[k] + np.outer(s.station, self.axes[k, 2]) for k, s in enumerate(self.stations)]
        anchors = np.array([[a.east, a.north, a.level] for a in self.scenario.anchor]).reshape(-1, 3)
        spar = np.concatenate([np.full(len(s.station), k) for k, s in enumerate(self.stations)] + [np.full(len(anchors) + 1, -1)])
        station = np.concatenate([s.station for s in self.stations] + [np.zeros(len(anchors) + 1)])
        return np.concatenate([*position, anchors, np.zeros((1, 3))]), spar.astype(np.int64), station

    def _bounds(self, k: int) -> Array:
        return np.concatenate([[0.0], np.cumsum([s.length for s in self.scenario.spar[k].section])])

    def _section_at(self, k: int, at: float) -> int:
        bounds = self._bounds(k)
        return min(int(np.searchsorted(bounds, at, side="right")) - 1, len(bounds) - 2)

    def _elements(self) -> Elements:
        rows: list[tuple[int, int, int, float, float, Properties]] = []
        for k, spar in enumerate(self.scenario.spar):
            if not spar.rigid:
                s = self.stations[k].station
                for n in range(len(s) - 1):
                    here = int(self.first[k]) + n
                    made_of = self.sections[k][self._section_at(k, 0.5 * float(s[n] + s[n + 1]))]
                    rows.append((here, here + 1, k, float(s[n]), float(s[n + 1]), made_of))
        spar_of = np.array([r[2] for r in rows], dtype=np.int64)
        ends = np.array([[r[3], r[4]] for r in rows]).reshape(-1, 2)
        axes = self.axes[spar_of].reshape(-1, 3, 3)

        def each(name: str) -> Array:
            return np.array([getattr(r[5], name) for r in rows])

        h = ends[:, 1] - ends[:, 0]
        ei_x, ei_y, ga = each("EI_x"), each("EI_y"), each("GA")
        rods = Rods(
            h, axes[:, 2], axes[:, 0], axes[:, 1], each("EA"), ei_x, ei_y, each("GJ"), 12 * ei_x / (ga * h * h), 12 * ei_y / (ga * h * h)
        )
        i, j = (np.array([r[n] for r in rows], dtype=np.int64) for n in (0, 1))
        return Elements(rods, i, j, spar_of, ends, each("expansion"))

    def _pieces(self) -> Pieces:
        rows: list[tuple[int, float, float, int, int, bool, int]] = []
        for k, spar in enumerate(self.scenario.spar):
            cuts = self.cuts[k].station
            for n in range(len(cuts) - 1):
                low, high = (0, 0) if spar.rigid else (n, n + 1)
                start, end = float(cuts[n]), float(cuts[n + 1])
                base = int(self.first[k])
                rows.append((k, start, end, base + low, base + high, spar.rigid, self._section_at(k, 0.5 * (start + end))))
        spar_of = np.array([r[0] for r in rows], dtype=np.int64)

        def each(name: str) -> Array:
            return np.array([getattr(self.sections[r[0]][r[6]], name) for r in rows])

        return Pieces(
            spar=spar_of,
            section=np.array([r[6] for r in rows], dtype=np.int64),
            station=np.array([[r[1], r[2]] for r in rows]),
            low=np.array([r[3] for r in rows], dtype=np.int64),
            high=np.array([r[4] for r in rows], dtype=np.int64),
            rigid=np.array([r[5] for r in rows]),
            mass=each("mass"),
            iced_mass=each("iced_mass"),
            width=each("width"),
            iced_width=each("iced_width"),
            bar=each("bar"),
            drag=each("drag"),
            axis=self.axes[spar_of, 2],
            growth=np.array([[self._growth(r[0], 0.0, at) if r[5] else 0.0 for at in r[1:3]] for r in rows]),
        )

    def _cables(self) -> Cables:
        scenario = self.scenario
        ropes = [scenario.rope[c.rope] for c in scenario.cable]
        return Cables(
            a=_points([self.end(c.to, c.from_) for c in scenario.cable]),
            b=_points([self.end(c.from_, c.to) for c in scenario.cable]),
            EA=np.array([r.stiffness for r in ropes]),
            diameter=np.array([r.diameter for r in ropes]),
            mass=np.array([r.mass for r in ropes]),
            drag=np.array([r.drag if r.drag is not None else math.nan for r in ropes]),
            roughness=np.array([math.nan if r.surface is None else roughness(r.surface) for r in ropes]),
            strength=np.array([parts.held(scenario.rope[c.rope].strength, c.ends, scenario.part) for c in scenario.cable], dtype=float),
            expansion=np.array([r.expansion if r.expansion is not None else 0.0 for r in ropes]),
            spar=np.array([self.number[c.from_.spar] for c in scenario.cable], dtype=np.int64),
        )

    def _fittings(self) -> Fittings:
        every = [(k, n, fitting) for k, spar in enumerate(self.scenario.spar) for n, fitting in enumerate(spar.fitting)]
        rows = [(*row, 0) for row in every] + [(*row, side) for row in every if row[2].sign for side in (1, -1)]
        points = [self.point(k, f.at, _centre(f) + side * _left_edge(f)) for k, _, f, side in rows]
        spar, side = (np.array([row[column] for row in rows], dtype=np.int64) for column in (0, 3))
        return Fittings(_points(points), spar, np.array([f.at for _, _, f, _ in rows]), tuple((k, n) for k, n, _, _ in rows), side)

    def _weight(self, pieces: Pieces, cables: Cables) -> float:
        """Dead weight and fixed loads of the whole [N], for scales; a cable's as if as long as its spar, wherever its anchor stands."""
        spans = pieces.station[:, 1] - pieces.station[:, 0]
        fittings = [f for spar in self.scenario.spar for f in spar.fitting]
        lengths = np.array([self.scenario.spar[k].length for k in cables.spar])
        kilos = float(pieces.mass @ spans) + sum(f.mass for f in fittings) + float(cables.mass @ lengths)
        return STANDARD_GRAVITY * kilos + sum(math.hypot(f.load.east, f.load.north, f.load.up) for f in fittings)

    def _supports(self, weight: float, cables: Cables) -> tuple[NDArray[np.bool_], Rides, Array, Array, Joints]:
        held = np.zeros((self.ground + 1, 6), dtype=bool)
        held[self.ground] = True
        held[int(self.first[-1]) :, 3:] = True
        for k, a in enumerate(self.scenario.anchor):
            held[int(self.first[-1]) + k, :3] = a.give is None
        rides: list[tuple[int, int, bool, Array, Array]] = []
        joints: list[tuple[str, int, int, float, Array]] = []
        for k in self._outermost_first():
            spar, foot = self.scenario.spar[k], int(self.first[k])
            carrier = self.ground
            if isinstance(spar.foot, HeelFoot):
                carrier, arm, growth = self.point(self.number[spar.foot.spar], spar.foot.at)
                rides.append((foot, carrier, spar.base == "fixed", arm, growth))
            else:
                held[foot] = HELD[spar.base]
            joints += [(kind, foot, carrier, stiffness, axis) for kind, stiffness, axis in self._holds(k, weight, cables)]
        order = Rides(tuple(r[0] for r in rides), tuple(r[1] for r in rides), tuple(r[2] for r in rides))
        arms, growths = (np.array([r[n] for r in rides]).reshape(-1, 3) for n in (3, 4))
        return held, order, arms, growths, _joints(joints)

    def _holds(self, k: int, weight: float, cables: Cables) -> list[tuple[str, float, Array]]:
        """Kind, stiffness and axes of the joints at the foot of spar k."""
        spar = self.scenario.spar[k]
        x, y, t = self.axes[k]
        if spar.rigid:
            hold = HOLD_RIGID * spar.length * max(weight, 1e-3 * float(cables.EA.max(initial=0.0)), 1.0)
        else:
            hold = HOLD * max(max(p.EI_x, p.EI_y) for p in self.sections[k]) / spar.length
        tilt = [("tilt", spar.base_stiffness or 0.0, np.array([t, x, y]))] if spar.base == "sprung" else []
        if isinstance(spar.foot, GroundFoot):
            return tilt
        if spar.base == "hinged":
            return [("hinge", hold, np.array([self._hinge(k)[0], np.zeros(3), np.zeros(3)]))]
        return [*tilt, ("spin", hold, np.array([t, x, y]))] if spar.base in ("pinned", "sprung") else []

    def _hinge(self, k: int) -> Array:
        """Rows: the hinge axis of spar k, and two axes square to it."""
        spar = self.scenario.spar[k]
        bearing = spar.hinge_axis if spar.hinge_axis is not None else spar.toward + math.pi / 2
        a = np.array([math.sin(bearing), math.cos(bearing), 0.0])
        return np.array([a, np.cross([0.0, 0.0, 1.0], a), [0.0, 0.0, 1.0]])

    def _frames(self) -> tuple[Frames, tuple[int, ...]]:
        """Axes in which the rotations of ground feet are held, and the spars whose feet may tilt but not spin."""
        ground = [k for k, spar in enumerate(self.scenario.spar) if isinstance(spar.foot, GroundFoot)]
        framed = [k for k in ground if self.scenario.spar[k].base in ("pinned", "sprung", "hinged")]
        axes = [self._hinge(k) if self.scenario.spar[k].base == "hinged" else self.axes[k] for k in framed]
        unspun = tuple(k for k in framed if self.scenario.spar[k].base != "hinged")
        return Frames(tuple(int(self.first[k]) for k in framed), np.array(axes).reshape(-1, 3, 3)), unspun

    def _outermost_first(self) -> list[int]:
        depth = [0] * len(self.scenario.spar)
        for k in range(len(depth)):
            here = k
            while isinstance(foot := self.scenario.spar[here].foot, HeelFoot):
                depth[k] += 1
                here = self.number[foot.spar]
        return sorted(range(len(depth)), key=lambda k: -depth[k])


def _centre(fitting: Fitting) -> Array:
    return np.array([fitting.offset.east, fitting.offset.north, fitting.offset.up])


def _left_edge(fitting: Fitting) -> Array:
    """From the middle of a flat face to the edge on the left of one who looks at it."""
    bearing, half = fitting.face or 0.0, 0.5 * (fitting.width or 0.0)
    return half * np.array([math.cos(bearing), -math.sin(bearing), 0.0])


def _points(rows: list[tuple[int, Array, Array]]) -> Points:
    return Points(
        np.array([r[0] for r in rows], dtype=np.int64),
        np.array([r[1] for r in rows]).reshape(-1, 3),
        np.array([r[2] for r in rows]).reshape(-1, 3),
    )


def _joints(rows: list[tuple[str, int, int, float, Array]]) -> Joints:
    return Joints(
        tuple(r[0] for r in rows),
        np.array([r[1] for r in rows], dtype=np.int64),
        np.array([r[2] for r in rows], dtype=np.int64),
        np.array([r[3] for r in rows]),
        np.array([r[4] for r in rows]).reshape(-1, 3, 3),
    )
