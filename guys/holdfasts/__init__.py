"""What holds an anchor: from dimensions, ground and the pull's direction to a low, a best and a high holding.

One module a kind, one function `holding` each, on plain numbers and arrays; `of` takes a table of the scenario.  Every kind says which
way of giving way governs, where its numbers come from, and which ways of giving way it could not look at for want of data: those are told,
never taken as passed.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from guys.holdfasts import block, deadman, picket, rock, screw, tested
from guys.holdfasts.holding import Holding
from guys.rotation import Array
from guys.scenario.holding import MODELS, Holdfast


@dataclass(frozen=True)
class Kind:
    """A kind of holdfast: its name, the keys of its table, the source of its numbers, and what it is."""

    name: str
    keys: tuple[str, ...]
    source: str
    what: str


_MODULES = {"block": block, "deadman": deadman, "picket": picket, "screw": screw, "rock": rock, "tested": tested}


def kinds() -> tuple[Kind, ...]:
    """Every kind, in the order of the scenario format."""
    return tuple(
        Kind(name, tuple(field.alias or key for key, field in model.model_fields.items()), _MODULES[name].SOURCE, _MODULES[name].WHAT)
        for name, model in MODELS.items()
    )


def of(holdfast: Holdfast, angle: Array) -> Holding:
    """The holding of a scenario's holdfast along pulls at angles above the horizontal (case,) [rad]."""
    function: Callable[..., Holding] = _MODULES[holdfast.kind].holding
    given = holdfast.model_dump(exclude={"kind", "rod_strength", "source"}, exclude_none=True)
    found = function(angle, **given)
    if holdfast.rod_strength is not None:
        found = found.by_rod(holdfast.rod_strength)
    return found if holdfast.source is None else found.citing(holdfast.source)
