"""Where words go: candidates around each point, scored against everything drawn.

A `Field` holds what is drawn in one part of the page: segments (cables, bars, the ground line), discs (rings, anchor dots) and boxes
(words already placed).  A `Wish` is a block of words with the boxes it could take, each with a cost.  `place` takes the cheapest box
that touches nothing; a box away from its point brings a leader, which may cross thin lines at a cost but no words.

Tests used, all on arrays of candidates against arrays of obstacles:
- segment against box: the slab test, the segment's parameter interval inside both slabs is not empty (Kay and Kajiya 1986, from memory);
- disc against box: distance from the centre to the nearest point of the box;
- segment against segment: both ends of each on either side of the other.
"""

from __future__ import annotations

from dataclasses import dataclass, field, replace

import numpy as np
from numpy.typing import ArrayLike, NDArray

from guys.drawing.page import Rect

Array = NDArray[np.float64]

CLEARANCE = 0.7
"""Least gap [mm] between words and anything drawn."""
_CLASH_COST = 1e4
LEADER_FROM = 3.2
"""Words farther than this [mm] from their point are tied to it by a line."""
_AMBIGUOUS_COST = 5.0
_PARALLEL = 1e-12
_GAPS = (1.2, 2.4, 4.5, 8.0, 13.0, 20.0, 30.0)


@dataclass
class Field:
    """What is drawn in `room` so far: segments (n, 4), boxes (n, 4) as left, bottom, right, top, and discs (n, 3)."""

    room: Rect
    segments: list[Array] = field(default_factory=list)
    boxes: list[Array] = field(default_factory=list)
    discs: list[Array] = field(default_factory=list)
    leaders: list[Array] = field(default_factory=list)

    def copied(self) -> Field:
        """The same field, to try places on."""
        return Field(self.room, list(self.segments), list(self.boxes), list(self.discs), list(self.leaders))

    def add_line(self, points: ArrayLike) -> None:
        """A polyline (point, 2); pieces with NaN are left out."""
        p = np.asarray(points, dtype=float)
        pieces = np.hstack([p[:-1], p[1:]])
        self.segments.append(pieces[np.isfinite(pieces).all(axis=1)])

    def add_box(self, box: ArrayLike) -> None:
        """A box of words."""
        self.boxes.append(np.asarray(box, dtype=float).reshape(1, 4))

    def add_place(self, spot: Place) -> None:
        """Words placed, with their leader."""
        self.add_box(spot.box)
        if spot.leader is not None:
            self.leaders.append(spot.leader.reshape(1, 4))

    def add_disc(self, centre: ArrayLike, radius: float) -> None:
        """A ring or a dot."""
        self.discs.append(np.append(np.asarray(centre, dtype=float), radius).reshape(1, 3))


@dataclass(frozen=True)
class Wish:
    """Words that want a place: the point they belong to, the boxes (n, 4) they could take and what each costs (n,).

    clear : radius [mm] drawn about the point; leader_from : distance [mm] from there at which a leader is needed
    rivals : (m, 3) other points with their radii; nearer to one of them than to its own, a box costs more and needs a leader
    """

    point: Array
    boxes: Array
    cost: Array
    clear: float = 0.0
    leader_from: float = LEADER_FROM
    rivals: Array | None = None


@dataclass(frozen=True)
class Place:
    """The box taken; `leader` (2, 2) where the words stand away from their point; `clashes` > 0 where no free box was left."""

    box: Array
    leader: Array | None
    clashes: int
    cost: float = 0.0


def _joined(parts: list[Array], columns: int) -> Array:
    return np.concatenate(parts) if parts else np.empty((0, columns))


def crossing(segments: Array, boxes: Array) -> NDArray[np.bool_]:
    """(segment, box): does the segment touch the box."""
    start, run = segments[:, None, :2], segments[:, None, 2:] - segments[:, None, :2]
    run = np.where(np.abs(run) < _PARALLEL, _PARALLEL, run)
    one, two = (boxes[None, :, :2] - start) / run, (boxes[None, :, 2:] - start) / run
    enter, leave = np.minimum(one, two).max(axis=-1), np.maximum(one, two).min(axis=-1)
    return np.asarray(np.maximum(enter, 0.0) <= np.minimum(leave, 1.0))


def overlapping(boxes: Array, others: Array) -> NDArray[np.bool_]:
    """(box, other): do they share any area."""
    apart = (boxes[:, None, :2] >= others[None, :, 2:]) | (others[None, :, :2] >= boxes[:, None, 2:])
    return np.asarray(~apart.any(axis=-1))


def touching(boxes: Array, discs: Array) -> NDArray[np.bool_]:
    """(box, disc): is any of the box nearer the centre than the radius."""
    nearest = np.clip(discs[None, :, :2], boxes[:, None, :2], boxes[:, None, 2:])
    return np.asarray(np.linalg.norm(nearest - discs[None, :, :2], axis=-1) < discs[None, :, 2])


def meeting(one: Array, two: Array) -> NDArray[np.bool_]:
    """(segment, segment): do they cross."""

    def side(a: Array, b: Array, p: Array) -> Array:
        return np.asarray((b[..., 0] - a[..., 0]) * (p[..., 1] - a[..., 1]) - (b[..., 1] - a[..., 1]) * (p[..., 0] - a[..., 0]))

    a, b, c, d = one[:, None, :2], one[:, None, 2:], two[None, :, :2], two[None, :, 2:]
    return (side(a, b, c) * side(a, b, d) < 0.0) & (side(c, d, a) * side(c, d, b) < 0.0)


def clashes(field_: Field, boxes: Array) -> NDArray[np.int64]:
    """(box,) how many drawn things each box touches, its clearance included; outside the room counts many."""
    grown = boxes + np.array([-1.0, -1.0, 1.0, 1.0]) * CLEARANCE
    count = crossing(np.concatenate([_joined(field_.segments, 4), _joined(field_.leaders, 4)]), grown).sum(axis=0)
    count = count + overlapping(grown, _joined(field_.boxes, 4)).sum(axis=1) + touching(grown, _joined(field_.discs, 3)).sum(axis=1)
    room = field_.room
    outside = (boxes[:, 0] < room.left) | (boxes[:, 1] < room.bottom) | (boxes[:, 2] > room.right) | (boxes[:, 3] > room.top)
    return np.asarray(count + 50 * outside, dtype=np.int64)


def leaders(point: Array, boxes: Array) -> Array:
    """(box, 4) from the point to the nearest edge point of each box."""
    return np.hstack([np.broadcast_to(point, (len(boxes), 2)), np.clip(point, boxes[:, :2], boxes[:, 2:])])


def ambiguous(wish: Wish) -> NDArray[np.bool_]:
    """(box,) is it about as near to a rival as to its own point."""
    if wish.rivals is None or not len(wish.rivals):
        return np.zeros(len(wish.boxes), dtype=bool)
    points = np.vstack([np.append(wish.point, wish.clear), wish.rivals])
    nearest = np.clip(points[None, :, :2], wish.boxes[:, None, :2], wish.boxes[:, None, 2:])
    away = np.linalg.norm(nearest - points[None, :, :2], axis=-1) - points[:, 2]
    return np.asarray(away[:, 1:].min(axis=1) < away[:, 0] + 2.0)


def _leader_cost(field_: Field, wish: Wish, lines: Array, run: Array, needed: NDArray[np.bool_]) -> Array:
    """Cost of each leader: much for crossing words, some for crossing lines, length itself."""
    shrunk = lines.copy()
    shrunk[:, :2] += (lines[:, 2:] - lines[:, :2]) * (wish.clear / np.maximum(run, 1e-9)).clip(0.0, 1.0)[:, None]
    words = crossing(shrunk, _joined(field_.boxes, 4)).sum(axis=1)
    strokes = meeting(shrunk, _joined(field_.segments, 4)).sum(axis=1) + 3 * meeting(shrunk, _joined(field_.leaders, 4)).sum(axis=1)
    return np.where(needed, _CLASH_COST * words + 6.0 * strokes + 4.0, 0.0) + 1.2 * np.maximum(run - wish.clear, 0.0)


def place(field_: Field, *wishes: Wish) -> Place:
    """The cheapest free box of the first wish that has one, of the last wish the least bad; it and its leader become obstacles."""
    for wish in wishes:
        count = clashes(field_, wish.boxes)
        free = np.flatnonzero(count == 0)
        chosen = free if len(free) else np.flatnonzero(count == count.min())
        narrowed = replace(wish, boxes=wish.boxes[chosen], cost=wish.cost[chosen])
        spot = _cheapest(field_, narrowed, int(count.min()))
        if not spot.clashes:
            break
    field_.add_place(spot)
    return spot


def _cheapest(field_: Field, wish: Wish, touched: int) -> Place:
    lines = leaders(wish.point, wish.boxes)
    run = np.hypot(*(lines[:, 2:] - lines[:, :2]).T)
    unclear = ambiguous(wish)
    needed = (run > wish.clear + wish.leader_from) | (unclear & (run > wish.clear + 0.8))
    total = wish.cost + _leader_cost(field_, wish, lines, run, needed) + _AMBIGUOUS_COST * unclear
    best = int(np.argmin(total))
    leader = _leader(lines[best], wish.clear) if needed[best] else None
    clash = touched + int(total[best] >= _CLASH_COST)
    return Place(wish.boxes[best], leader, clash, float(total[best]) + _CLASH_COST * touched)


def _leader(line: Array, clear: float) -> Array:
    """(2, 2) a leader from just outside what is drawn about the point."""
    run = float(np.hypot(*(line[2:] - line[:2])))
    start = line[:2] + (line[2:] - line[:2]) * min((clear + 0.3) / run, 1.0)
    return np.array([start, line[2:]])


def around(point: ArrayLike, size: tuple[float, float], clear: float, outward: ArrayLike = (1.0, 0.0), farthest: float = 30.0) -> Wish:
    """Boxes of `size` in rings about a point; those on the `outward` side cost least."""
    p, half = np.asarray(point, dtype=float), np.array(size) / 2.0
    turn = np.deg2rad(np.arange(0.0, 360.0, 11.25))
    unit = np.column_stack([np.cos(turn), np.sin(turn)])
    direction = np.asarray(outward, dtype=float)
    direction = direction / max(float(np.hypot(*direction)), 1e-9)
    gaps = np.array([g for g in _GAPS if g <= farthest])
    reach = np.clip(unit * 1.5, -1.0, 1.0) * half
    middle = (p + unit * (clear + gaps[:, None, None]) + reach).reshape(-1, 2)
    cost = (2.5 * (1.0 - unit @ direction) + 0.3 * gaps[:, None]).ravel()
    return Wish(p, np.hstack([middle - half, middle + half]), cost, clear)


def all_over(wish: Wish, room: Rect, step: float = 5.0) -> Wish:
    """The same words anywhere in the room: the last resort, nearer boxes cheaper through their leader."""
    wide, high = wish.boxes[0, 2:] - wish.boxes[0, :2]
    x = np.arange(room.left, room.right - wide + 1e-9, step)
    y = np.arange(room.bottom, room.top - high + 1e-9, step)
    low = np.stack(np.meshgrid(x, y), axis=-1).reshape(-1, 2)
    if not len(low):
        return wish
    return replace(wish, boxes=np.hstack([low, low + np.array([wide, high])]), cost=np.zeros(len(low)))


def column(wish: Wish, x: float, room: Rect) -> Wish:
    """The same words in a column at `x` (their near edge toward the point), as level with it as may be."""
    wide, high = wish.boxes[0, 2:] - wish.boxes[0, :2]
    shift = np.arange(-0.5, 0.5, 1.0 / 120.0) * room.height
    low = np.column_stack([np.full(len(shift), x if x > wish.point[0] else x - wide), wish.point[1] - high / 2.0 + shift])
    return replace(wish, boxes=np.hstack([low, low + np.array([wide, high])]), cost=0.8 * np.abs(shift))


def hidden(line: Array, field: Field, gap: float = 0.8) -> NDArray[np.bool_]:
    """(point,) under words or outside the plan."""
    room = field.room
    out = (line[:, 0] < room.left) | (line[:, 0] > room.right) | (line[:, 1] < room.bottom) | (line[:, 1] > room.top)
    boxes = np.concatenate(field.boxes) + np.array([-gap, -gap, gap, gap])
    inside = (line[:, None, :] > boxes[None, :, :2]).all(axis=-1) & (line[:, None, :] < boxes[None, :, 2:]).all(axis=-1)
    return np.asarray(out | inside.any(axis=1))
