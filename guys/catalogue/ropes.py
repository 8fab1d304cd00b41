"""Every rope of the catalogue by its name, and what must be told of one that is used."""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache

from guys import units
from guys.catalogue import aircraft, fibre, strand, wire_rope
from guys.catalogue.known import of_memory
from guys.catalogue.rope import StockRope

KINDS = (wire_rope, strand, aircraft, fibre)


def find(name: str) -> StockRope | None:
    """The rope of that name, None where the catalogue has none."""
    return next((rope for kind in KINDS if (rope := kind.find(name)) is not None), None)


@cache
def listed() -> tuple[StockRope, ...]:
    """Every rope that is listed; wire and fibre ropes are also made in other diameters."""
    return tuple(rope for kind in KINDS for rope in kind.listed())


def hint(name: str) -> str | None:
    """What a name may be that is nearly one of a rope of any diameter."""
    return wire_rope.hint(name) or fibre.hint(name)


def cautions(rope: StockRope) -> Iterator[str]:
    """What may not pass in silence when a rope is used: what is from memory, what is a range."""
    memory = of_memory(rope.known)
    if memory is not None:
        yield f"{memory}: confirm with the maker's figures, or give a [rope.NAME] of your own"
    if rope.strength_high > rope.strength:
        most = units.both(rope.strength_high, "force")
        yield f"strength {units.both(rope.strength, 'force')} to {most}, the low end is judged; knots and sharp bends take more off"
    if rope.stiffness.high > rope.stiffness.low and (memory is not None or rope.strength_high > rope.strength):
        low, used, high = (units.show(value, "kN", 3) for value in (rope.stiffness.low, rope.stiffness.used, rope.stiffness.high))
        yield f"stiffness {low} to {high}, {used} is used"
