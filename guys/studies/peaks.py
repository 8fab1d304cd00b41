"""Mean wind and patches of gust put together: the peak of every number.

    S_P = sqrt(sum_i |S_i - S_m|^2)          S_TM = S_m +- S_P          EN 1993-3-1 B.4.3.2.5(1), read in a public transcription

S_m is a number under the mean wind, S_i under the mean wind and patch i; both are solved, since the structure is not linear.  S is a
tension, a thrust, an uplift, or a vector of what acts in a plane: the level part of a force, the bending about two axes, the shear along
them.  Of a vector |S_m| + S_P is taken, along S_m: no component in any direction passes S_m +- S_P of its own, and where all that changes
lies along the mean, as in a mast bent in the plane of the wind, it is that.

Signs are the adverse ones: away from zero, but for a pull on an anchor and on a base, whose upward part is looked for.  Where the least
matters, as of the push on a base against sliding and lifting, S_m - S_P is kept beside (`Forces.foot_up`).  Such numbers belong to no one
equilibrium and do not add up.  A cable is called slack where it is so in any of the states; a case stands where all of them do.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, fields, replace

import numpy as np
from numpy.typing import NDArray

from guys.checks.items import Demands, gravity, join
from guys.loads import CaseLine
from guys.recovery import Acting, Forces
from guys.results import SparLine
from guys.rotation import Array


@dataclass(frozen=True)
class Asked:
    """Lines as asked for and the states solved for them: `start` (line,) row of each line's first state, the mean wind; those of a line
    follow one another.  owner (row,) line of each state."""

    lines: tuple[CaseLine, ...]
    start: NDArray[np.int64]
    owner: NDArray[np.int64]

    @property
    def plain(self) -> bool:
        """Every line is its own one state."""
        return len(self.start) == len(self.owner)

    def rows(self, line: int) -> range:
        """States of a line."""
        return range(*np.append(self.start, len(self.owner))[line : line + 2].tolist())

    def take(self, lines: Sequence[int]) -> tuple[Asked, NDArray[np.int64]]:
        """Some of the lines, and the rows of their states."""
        rows = [np.array(self.rows(k), dtype=np.int64) for k in lines]
        return grouped([self.lines[k] for k in lines], [len(r) for r in rows]), np.concatenate(rows)


def asked(lines: Sequence[CaseLine]) -> tuple[Asked, list[CaseLine]]:
    """Lines, and all that is solved for them, one after another."""
    states = [line.states() for line in lines]
    return grouped(lines, [len(s) for s in states]), [state for some in states for state in some]


def grouped(lines: Sequence[CaseLine], counts: Sequence[int]) -> Asked:
    """Lines with so many states each."""
    start = np.cumsum([0, *counts[:-1]], dtype=np.int64)
    return Asked(tuple(lines), start, np.repeat(np.arange(len(lines)), counts))


def peak(values: Array, of: Asked) -> Array:
    """(line, ..., component) of (row, ..., component): vectors along those of the mean wind, |S_m| + S_P long."""
    mean = values[of.start]
    size = np.linalg.norm(mean, axis=-1, keepdims=True)
    along = np.where(size > 0, mean, np.add.reduceat(values, of.start, axis=0))
    length = np.linalg.norm(along, axis=-1, keepdims=True)
    along = np.where(length > 0, along / np.where(length > 0, length, 1.0), np.eye(values.shape[-1])[0])
    return np.asarray(mean + _change(values, of)[..., None] * along)


def _change(values: Array, of: Asked) -> Array:
    """S_P (line, ...) of vectors (row, ..., component)."""
    change = values - values[of.start][of.owner]
    return np.asarray(np.sqrt(np.add.reduceat(np.sum(change**2, axis=-1), of.start, axis=0)))


def upward(values: Array, of: Asked) -> Array:
    """(line, ...) S_m + S_P of (row, ...), upward positive."""
    return np.asarray(values[of.start] + _change(values[..., None], of))


def _number(values: Array, of: Asked) -> Array:
    return peak(values[..., None], of)[..., 0]


def _split(values: Array, of: Asked) -> Array:
    """Vectors (row, ..., 3): the plane of the first two components, and the third, each for itself."""
    return np.concatenate([peak(values[..., :2], of), peak(values[..., 2:], of)], axis=-1)


def forces(of: Asked, found: Forces) -> Forces:
    """Peaks (line, ...) of the forces of all states."""
    if of.plain:
        return found
    pull, up = _split(found.pull, of), upward(found.pull[..., 2], of)
    pull[..., 2] = np.where(up > 0, up, pull[..., 2])
    anchor, top = _number(found.tension_anchor, of), _number(found.tension_top, of)
    return Forces(
        tension_anchor=anchor,
        tension_top=top,
        on_anchor=_as_long(found.on_anchor, anchor, of),
        on_spar=_as_long(found.on_spar, top, of),
        length=found.length[of.start],
        slack=np.logical_or.reduceat(found.slack, of.start, axis=0),
        present=found.present[of.start],
        pull=pull,
        foot_force=_split(found.foot_force, of),
        foot_up=upward(found.foot_up, of),
        foot_moment=_split(found.foot_moment, of),
        head_off=peak(found.head_off, of),
    )


def _as_long(values: Array, length: Array, of: Asked) -> Array:
    """Vectors along the peaks of vectors, so long."""
    along = peak(values, of)
    size = np.linalg.norm(along, axis=-1)
    return np.asarray(along * (length / np.where(size > 0, size, 1.0))[..., None])


def acting(of: Asked, found: Acting) -> Acting:
    """Peaks of section forces: shear and bending in their planes, thrust and torsion for themselves."""
    return found if of.plain else {k: (_split(force, of), _split(moment, of)) for k, (force, moment) in found.items()}


def spars(of: Asked, found: Sequence[SparLine]) -> tuple[SparLine, ...]:
    """Peaks along spars; displacements level and upright."""
    if of.plain:
        return tuple(found)
    return tuple(
        replace(
            s,
            displacement=_split(s.displacement, of),
            axial=_number(s.axial, of),
            bending=peak(s.bending, of),
            torsion=_number(s.torsion, of),
            shear=peak(s.shear, of),
        )
        for s in found
    )


def judged(of: Asked, peaks: Demands, states: Demands) -> Demands:
    """What is judged of every line: its peaks or one of its states, whichever is graver, since a capacity may differ with the state."""
    if of.plain:
        return states
    every, first = join([peaks, states]), len(of.lines)
    use, each = every.use, range(len(every.items))
    chosen = np.empty((first, len(every.items)), dtype=np.int64)
    for k in range(first):
        rows = np.array([k, *(first + row for row in of.rows(k))])
        for n in each:
            score = gravity(every.demand[rows, n], every.capacity[rows, n], use[rows, n])
            chosen[k, n] = rows[0 if np.isnan(score).all() else int(np.nanargmax(score))]
    return Demands(every.items, *(np.take_along_axis(getattr(every, f.name), chosen, axis=0) for f in fields(Demands)[1:]))
