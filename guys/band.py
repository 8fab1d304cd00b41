"""Symmetric block matrices over nodes, folded where a spar's foot rides on another spar, and factored as one band.

Every element adds 6 x 6 blocks (translation, rotation) to pairs of nodes.  A node whose translation rides on a carrier by a rigid
arm a (the heel of a boom) has u_s = u_m - [a]x theta_m, so its translation rows and columns fold into the carrier's; what remains is
scattered into a lower band, nodes numbered by reverse Cuthill-McKee so that several spars stayed from each other keep it narrow.

All cases lie end to end in one band, and one call of LAPACK's `pbtrf` factors them; where it stops it has found the case that is not
positive definite, so it is the stability test too.

Sources: Cuthill & McKee (1969), reversed after George (1971), from scipy; LAPACK Users' Guide (1999), band storage.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray
from scipy.linalg import lapack
from scipy.sparse import coo_array
from scipy.sparse.csgraph import reverse_cuthill_mckee

from guys.rotation import Array, dyad_curvature, outer, skew

Index = NDArray[np.int64]
Selection = slice | Index


@dataclass(frozen=True)
class Rides:
    """Nodes that ride on others, outermost first.  node, carrier : (ride,); welded : rotation rides too."""

    node: tuple[int, ...]
    carrier: tuple[int, ...]
    welded: tuple[bool, ...]


@dataclass(frozen=True)
class Frames:
    """Nodes whose rotation is written about axes of their own: node (frame,), axes (frame, 3, 3) rows."""

    node: tuple[int, ...]
    axes: Array


@dataclass(frozen=True)
class Pattern:
    """Where blocks go.

    pair : (pair, 2) row and column node, row >= column; of : {(row, column): index}, those of (n, n) first and in order
    plan : for every part of the contributions, selections of it and of the pairs they add to, no pair twice in one
    free : (unknown, 2) node and direction (0..5) of every unknown, in band order; source : (unknown, width) flat index of each band entry
    in
    the blocks (6, 6, pair + 1), the last pair being zero
    """

    nodes: int
    pair: Index
    of: dict[tuple[int, int], int]
    plan: tuple[tuple[tuple[Selection, Selection], ...], ...]
    rides: Rides
    frames: Frames
    free: Index
    source: Index

    @property
    def unknowns(self) -> int:
        """Number of unknowns of a case."""
        return len(self.free)


def lay_out(rows: Sequence[Index], columns: Sequence[Index], held: NDArray[np.bool_], rides: Rides, frames: Frames) -> Pattern:
    """Pattern for parts of contributions, part p to the node pairs (rows[p][k], columns[p][k]), rows >= columns.

    held : (node, 6) directions without unknown, rotations about the node's frame
    """
    ends = tuple(tuple(zip(r.tolist(), c.tolist(), strict=True)) for r, c in zip(rows, columns, strict=True))
    return replace(_laid_out(ends, held.tobytes(), rides), frames=frames)


@lru_cache(maxsize=8)
def _laid_out(ends: tuple[tuple[tuple[int, int], ...], ...], held: bytes, rides: Rides) -> Pattern:
    """The pattern but for its frames: the same for all layouts of a structure, all angles of a raising, so it is worked out once."""
    taken = np.frombuffer(held, dtype=bool).reshape(-1, 6)
    nodes = len(taken)
    filled = _with_folds({pair for part in ends for pair in part}, nodes, rides)
    pair = np.array([(n, n) for n in range(nodes)] + sorted((r, c) for r, c in filled if r != c), dtype=np.int64)
    of = {(int(r), int(c)): k for k, (r, c) in enumerate(pair)}
    plan = tuple(_rounds(np.array([of[end] for end in part], dtype=np.int64)) for part in ends)
    fixed = taken.copy()
    for node, welded in zip(rides.node, rides.welded, strict=True):
        fixed[node, : 6 if welded else 3] = True
    free = _number(pair, ~fixed)
    return Pattern(nodes, pair, of, plan, rides, Frames((), np.zeros((0, 3, 3))), free, _sources(pair, of, free))


def _rounds(targets: Index) -> tuple[tuple[Selection, Selection], ...]:
    """Selections of the contributions and of their targets, in rounds within which no target stands twice."""
    seen: dict[int, int] = {}
    rounds: dict[int, list[int]] = {}
    for row, target in enumerate(targets.tolist()):
        seen[target] = seen.get(target, -1) + 1
        rounds.setdefault(seen[target], []).append(row)
    return tuple((selection(np.array(r)), selection(targets[r])) for r in rounds.values())


def selection(index: Index) -> Selection:
    """A slice where the index runs on without a gap: numpy then copies nothing."""
    if len(index) and (np.diff(index) == 1).all():
        return slice(int(index[0]), int(index[-1]) + 1)
    return index


def _with_folds(pairs: set[tuple[int, int]], nodes: int, rides: Rides) -> set[tuple[int, int]]:
    pairs = pairs | {(n, n) for n in range(nodes)}
    for s, m in zip(rides.node, rides.carrier, strict=True):
        touching = {a if b == s else b for a, b in pairs if s in (a, b)} | {m}
        pairs |= {(max(m, b), min(m, b)) for b in touching} | {(max(m, s), min(m, s))}
    return pairs


def _number(pair: Index, unknown: NDArray[np.bool_]) -> Index:
    nodes = len(unknown)
    moving = np.asarray(unknown.any(axis=1))
    pair = pair[np.all(moving[pair], axis=1)]
    graph = coo_array((np.ones(len(pair)), (pair[:, 0], pair[:, 1])), shape=(nodes, nodes)).tocsr()
    order = reverse_cuthill_mckee((graph + graph.T).tocsr(), symmetric_mode=True)
    return np.array([(n, k) for n in order for k in range(6) if unknown[n, k]], dtype=np.int64).reshape(-1, 2)


def _sources(pair: Index, of: dict[tuple[int, int], int], free: Index) -> Index:
    number = {(int(n), int(k)): i for i, (n, k) in enumerate(free)}
    by_node: dict[int, list[int]] = {}
    for n, k in number:
        by_node.setdefault(n, []).append(k)
    pairs = len(pair) + 1
    entries: list[tuple[int, int, int]] = []
    for (r, c), p in of.items():
        for a in by_node.get(r, []):
            for b in by_node.get(c, []):
                i, j, at = number[r, a], number[c, b], (a * 6 + b) * pairs + p
                if i >= j:
                    entries.append((j, i - j, at))
                elif r != c:
                    entries.append((i, j - i, at))
    width = 1 + max((offset for _, offset, _ in entries), default=0)
    source = np.full((len(free), width), pairs - 1, dtype=np.int64)
    for column, offset, at in entries:
        source[column, offset] = at
    return source


def column_sources(pattern: Pattern, node: int, direction: int) -> Index:
    """Where a column of the tangent stands in the blocks, flat, one index for every unknown: that of a direction of a node, held or not."""
    pairs = len(pattern.pair) + 1
    out = np.full(pattern.unknowns, pairs - 1, dtype=np.int64)
    for row, (other, turned) in enumerate(pattern.free.tolist()):
        at = pattern.of.get((max(other, node), min(other, node)))
        if at is not None:
            a, b = (turned, direction) if other >= node else (direction, turned)
            out[row] = (a * 6 + b) * pairs + at
    return out


@dataclass(frozen=True)
class Room:
    """Memory for the tangents of so many cases, used again at every step: fresh memory costs as much as filling it.

    elements (3, 6, 6, element, case); blocks (6, 6, pair + 1, case); rows (unknown * width, case); band, factors (case, unknown, width)
    """

    elements: Array
    blocks: Array
    rows: Array
    band: Array
    factors: Array


def room(pattern: Pattern, cases: int, elements: int) -> Room:
    """Room for the tangents of so many cases and elements."""
    n, width = pattern.source.shape
    return Room(
        elements=np.empty((3, 6, 6, elements, cases)),
        blocks=np.empty((6, 6, len(pattern.pair) + 1, cases)),
        rows=np.empty((n * width, cases)),
        band=np.empty((cases, n, width)),
        factors=np.empty((cases, n, width)),
    )


def add_up(pattern: Pattern, parts: Sequence[Array], into: Room) -> Array:
    """Contributions (6, 6, contribution, case), parts as given to `lay_out`, summed by pair: (6, 6, pair + 1, case), the last pair zero."""
    blocks = into.blocks
    blocks.fill(0.0)
    for part, rounds in zip(parts, pattern.plan, strict=True):
        for source, target in rounds:
            blocks[:, :, target] += part[:, :, source]
    return blocks


def fold_gradient(pattern: Pattern, gradient: Array, arms: Array) -> Array:
    """Gradient (case, node, 6) with the riding nodes' forces moved to their carriers; arms (case, ride, 3) turned arms."""
    if not pattern.rides.node:
        return gradient
    out = gradient.copy()
    for k, (s, m) in enumerate(zip(pattern.rides.node, pattern.rides.carrier, strict=True)):
        keep, onto = _ride(arms[:, k], pattern.rides.welded[k])
        out[:, m] += (out[:, s, None] @ onto)[:, 0]
        out[:, s] = out[:, s] * keep
    return out


def unknowns_of(pattern: Pattern, gradient: Array, arms: Array) -> Array:
    """A gradient (case, node, 6) folded and reduced to the unknowns (case, unknown)."""
    return pick(pattern, fold_gradient(pattern, gradient, arms))


def pick(pattern: Pattern, whole: Array) -> Array:
    """What stands in (case, node, 6) at the unknowns (case, unknown), rotations about the nodes' frames."""
    if pattern.frames.node:
        whole = whole.copy()
        for node, axes in zip(pattern.frames.node, pattern.frames.axes, strict=True):
            whole[:, node, 3:] = whole[:, node, 3:] @ axes.T
    return np.asarray(whole[:, pattern.free[:, 0], pattern.free[:, 1]])


def nodes_of(pattern: Pattern, step: Array) -> Array:
    """The reverse for steps: (case, unknown) to (case, node, 6), zero where nothing is unknown."""
    out = np.zeros((len(step), pattern.nodes, 6))
    out[:, pattern.free[:, 0], pattern.free[:, 1]] = step
    for node, axes in zip(pattern.frames.node, pattern.frames.axes, strict=True):
        out[:, node, 3:] = out[:, node, 3:] @ axes
    return out


def fold(pattern: Pattern, blocks: Array, gradient: Array, arms: Array) -> Array:
    """Blocks (6, 6, pair + 1, case) after the folds; gradient unfolded (case, node, 6)."""
    if not pattern.rides.node:
        return blocks
    pending = gradient.copy()
    for k, (s, m) in enumerate(zip(pattern.rides.node, pattern.rides.carrier, strict=True)):
        keep, onto = _ride(arms[:, k], pattern.rides.welded[k])
        _fold_one(pattern, blocks, s, m, keep, onto)
        blocks[3:, 3:, pattern.of[m, m]] += dyad_curvature(outer(arms[:, k], pending[:, s, :3])).transpose(1, 2, 0)
        pending[:, m] += (pending[:, s, None] @ onto)[:, 0]
    return blocks


def _ride(arm: Array, welded: bool) -> tuple[Array, Array]:
    """delta_s = keep * delta_s' + onto delta_m."""
    onto = np.zeros((len(arm), 6, 6))
    onto[:, (0, 1, 2), (0, 1, 2)] = 1
    onto[:, :3, 3:] = -skew(arm)
    if welded:
        onto[:, (3, 4, 5), (3, 4, 5)] = 1
    keep = np.array([0.0, 0, 0, 0, 0, 0] if welded else [0.0, 0, 0, 1, 1, 1])
    return keep, onto


def _fold_one(pattern: Pattern, blocks: Array, s: int, m: int, keep: Array, onto: Array) -> None:
    def transposed(x: Array) -> Array:
        return np.swapaxes(x, -1, -2)

    def get(a: int, b: int) -> Array:
        at = pattern.of.get((max(a, b), min(a, b)))
        if at is None:
            return np.zeros_like(onto)
        found = blocks[:, :, at].transpose(2, 0, 1)
        return found.copy() if a >= b else transposed(found).copy()

    def put(a: int, b: int, value: Array) -> None:
        at = pattern.of[max(a, b), min(a, b)]
        blocks[:, :, at] = (value if a >= b else transposed(value)).transpose(1, 2, 0)

    ss, sm = get(s, s), get(s, m)
    carried = transposed(onto) @ sm
    put(m, m, get(m, m) + transposed(onto) @ ss @ onto + carried + transposed(carried))
    put(s, m, keep[:, None] * (ss @ onto + sm))
    put(s, s, keep[:, None] * ss * keep)
    neighbours = {a if b == s else b for a, b in pattern.of if s in (a, b)} - {s, m}
    for b in neighbours:
        sb = get(s, b)
        put(m, b, get(m, b) + transposed(onto) @ sb)
        put(s, b, keep[:, None] * sb)


def to_band(pattern: Pattern, blocks: Array, into: Room) -> Array:
    """Lower band (case, unknown, width): entry [c, j, d] is K[j + d, j].  It holds until the room is used again."""
    for node, axes in zip(pattern.frames.node, pattern.frames.axes, strict=True):
        for (row, column), at in pattern.of.items():
            if row == node:
                blocks[3:, :, at] = np.tensordot(axes, blocks[3:, :, at], axes=1)
            if column == node:
                blocks[:, 3:, at] = np.tensordot(blocks[:, 3:, at], axes, axes=(1, 1)).swapaxes(1, 2)
    cases = blocks.shape[3]
    np.take(blocks.reshape(36 * blocks.shape[2], cases), pattern.source.reshape(-1), axis=0, out=into.rows, mode="clip")
    into.band.reshape(cases, into.rows.shape[0])[:] = into.rows.T
    return into.band


def factor(band: Array) -> tuple[Array, NDArray[np.bool_]]:
    """Cholesky factors (case, unknown, width) and which cases are positive definite; the factor of any other is the identity.

    The band is overwritten by the factors.
    """
    cases, n, width = band.shape
    definite = np.ones(cases, dtype=bool)
    factors = np.ascontiguousarray(band)
    first = 0
    while first < cases and n:
        rest = factors[first:].reshape(-1, width)
        out, stopped = lapack.dpbtrf(rest.T, lower=1, overwrite_ab=1)
        if not np.shares_memory(out, factors):
            factors[first:] = out.T.reshape(-1, n, width)
        if stopped <= 0:
            break
        fell = first + (stopped - 1) // n
        definite[fell] = False
        factors[fell] = 0
        factors[fell, :, 0] = 1
        first = fell + 1
    return factors, definite


def solve(factors: Array, right: Array) -> Array:
    """K x = b for every case: b and x are (case, unknown) or (case, unknown, column)."""
    cases, n, width = factors.shape
    if n == 0:
        return right.copy()
    flat = right.reshape(cases * n, -1)
    x, _ = lapack.dpbtrs(factors.reshape(-1, width).T, flat, lower=1)
    return np.asarray(x).reshape(right.shape)


def dense(band: Array) -> Array:
    """Bands (..., unknown, width) as full symmetric matrices (..., unknown, unknown)."""
    n, width = band.shape[-2:]
    out = np.zeros((*band.shape[:-2], n, n))
    for d in range(min(width, n)):
        k = np.arange(n - d)
        out[..., k + d, k] = out[..., k, k + d] = band[..., : n - d, d]
    return out
