"""Parts in a cable's load path, and the chain they make with its rope: the weakest link holds.

    rope        its least breaking load
    by share    a termination, a knot: what it leaves of the rope's strength, `efficiency`
    of its own  a shackle, a turnbuckle, a rod, a lug: its `strength`

Terminations do not add up: each weakens the rope where it is, so every link is held against the rope's full strength.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Annotated

from pydantic import AfterValidator, Field

from guys.catalogue.parts import parts as catalogue
from guys.scenario import quantity as q
from guys.scenario.table import Model


def _share(value: float) -> float:
    if value > 1.0:
        raise q.fault(f"{value:g} is above 1; it is the share of the rope's strength that is left, such as 0.8")
    return value


class Part(Model):
    """A part in a cable's load path.  One of strength, efficiency."""

    strength: q.PositiveForce | None = None
    """Least breaking load of its own."""
    efficiency: Annotated[float, Field(strict=True, gt=0.0, allow_inf_nan=False), AfterValidator(_share)] | None = None
    """Share of the rope's strength that it leaves, at most 1."""


@dataclass(frozen=True)
class Link:
    """One link of a chain: its name, what it holds [N] (None: not known), the share of the rope it leaves, where its value comes from."""

    name: str
    holds: float | None
    share: float | None
    source: str

    @property
    def words(self) -> str:
        """The link with what it leaves of the rope."""
        return self.name if self.share is None else f"{self.name} ({self.share:g} of the rope)"


def used(ends: Sequence[str], own: Mapping[str, Part]) -> dict[str, Part]:
    """The parts named, the file's own before those of the catalogue."""
    stock = catalogue()
    found = {name: stock[name] for name in ends if name not in own and name in stock}
    return {**own, **{name: Part(strength=part.strength, efficiency=part.efficiency) for name, part in found.items()}}


def chain(strength: float | None, ends: Sequence[str], parts: Mapping[str, Part]) -> tuple[Link, ...]:
    """The links of a cable: its rope of that strength [N], and its ends."""
    return (Link("the rope", strength, None, ""), *(_link(name, parts[name], strength) for name in dict.fromkeys(ends)))


def _link(name: str, part: Part, rope: float | None) -> Link:
    source = source_of(name, part)
    if part.efficiency is None:
        return Link(name, part.strength, None, source)
    return Link(name, None if rope is None else part.efficiency * rope, part.efficiency, source)


def source_of(name: str, part: Part) -> str:
    """Where a part's value comes from."""
    stock = catalogue().get(name)
    return stock.source if stock is not None and (stock.strength, stock.efficiency) == (part.strength, part.efficiency) else "given"


def weakest(links: Sequence[Link]) -> Link | None:
    """The link that holds least of those known; of equal ones the first."""
    known = [link for link in links if link.holds is not None]
    return min(known, key=lambda link: link.holds or 0.0) if known else None


def held(strength: float | None, ends: Sequence[str], parts: Mapping[str, Part]) -> float | None:
    """What a whole chain holds [N]; None where a rope has no strength, whatever its parts have."""
    least = None if strength is None else weakest(chain(strength, ends, parts))
    return None if least is None else least.holds
