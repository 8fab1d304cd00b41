"""What is judged, as columns: demand, capacity and the factor required of every item, case by case.

    factor = capacity / demand        use = required / factor        past its allowable: use > 1

Each kind of thing judged has a module beside this one, whose function makes its columns from solved cases; `guys.checks.demands` puts them
side by side.  Capacity may differ from case to case, as that of a block does with the pull's direction.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from guys.rotation import Array

COLUMNS = ("demand", "capacity", "required", "mode")


@dataclass(frozen=True)
class Item:
    """One thing judged.

    thing, quantity, unit : as findings show them;  why : how the factor is formed;  lacking : why it is not judged where it is not
    source : where the capacity comes from;  default : the factor required is not the user's;  if_loaded : no finding where no case loads it
    allowable : the key of `[allowables]` that holds the factor required, where factored cases may have another
    modes : in words, the ways of failing, parts or places that may govern it, as `Demands.mode` counts them
    """

    thing: str
    quantity: str
    unit: str
    why: str
    lacking: str = ""
    source: str = ""
    default: bool = False
    if_loaded: bool = False
    modes: tuple[str, ...] = ()
    allowable: str = ""


@dataclass(frozen=True)
class Demands:
    """demand, capacity, required : (case, item), SI.  demand NaN: no equilibrium, or not asked in that case; capacity NaN: not judged.

    mode : (case, item) which of the item's `modes` governs there, -1 where there is none to tell
    """

    items: tuple[Item, ...]
    demand: Array
    capacity: Array
    required: Array
    mode: NDArray[np.int64]

    @property
    def factor(self) -> Array:
        """(case, item) capacity over demand; inf without demand, NaN where not judged."""
        bare = np.where(self.demand > 0, self.demand, 1.0)
        return np.where(np.isnan(self.demand + self.capacity), np.nan, np.where(self.demand > 0, self.capacity / bare, np.inf))

    @property
    def use(self) -> Array:
        """(case, item) factor required over factor found; NaN where not judged."""
        factor = self.factor
        out = np.where(factor > 0, self.required / np.where(factor > 0, factor, 1.0), np.inf)
        return np.where(np.isnan(factor), np.nan, out)

    def take(self, rows: NDArray[np.int64]) -> Demands:
        """The cases `rows`."""
        return Demands(self.items, self.demand[rows], self.capacity[rows], self.required[rows], self.mode[rows])

    def pick(self, columns: Sequence[int]) -> Demands:
        """The items `columns`."""
        kept = list(columns)
        return Demands(tuple(self.items[k] for k in kept), *(getattr(self, name)[:, kept] for name in COLUMNS))

    def blank(self, rows: NDArray[np.int64]) -> Demands:
        """Without demand in the cases `rows`."""
        demand = self.demand.copy()
        demand[rows] = np.nan
        return Demands(self.items, demand, self.capacity, self.required, self.mode)


def gravity(demand: Array, capacity: Array, use: Array) -> Array:
    """(case,) of one item, by which cases are told apart: the use; where nothing judged is past, what is not judged by its demand."""
    unknown = np.isnan(capacity) & (demand > 0)
    score = np.where(np.isnan(use), -np.inf, use)
    if np.isnan(use).all() or (unknown.any() and score.max() <= 1.0):
        return np.where(unknown, demand, np.nan) if unknown.any() else demand
    return score


def join(parts: Sequence[Demands]) -> Demands:
    """Cases one after another, the same items in all."""
    return Demands(parts[0].items, *(np.concatenate([getattr(p, n) for p in parts]) for n in COLUMNS))


def beside(groups: Sequence[Demands]) -> Demands:
    """Items side by side, the same cases in all."""
    items = tuple(item for group in groups for item in group.items)
    return Demands(items, *(np.concatenate([getattr(g, n) for g in groups], axis=1) for n in COLUMNS))


def group(
    items: Sequence[Item], demand: Array, capacity: Array | float, required: Array | float, mode: NDArray[np.int64] | int = -1
) -> Demands:
    """Columns of one group; capacity, required and mode may be anything that spreads over (case, item)."""
    columns = (np.broadcast_to(value, demand.shape).copy() for value in (capacity, required, mode))
    return Demands(tuple(items), demand, *columns)
