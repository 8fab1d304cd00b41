"""`[field]`: what a crew rigs, tensions, reads and accepts with, for `guys field`."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import TYPE_CHECKING, Annotated, Any

from pydantic import Field

from guys import constants
from guys.scenario import quantity as q
from guys.scenario.keys import Finding, nearest
from guys.scenario.ranges import Difference
from guys.scenario.table import Model

if TYPE_CHECKING:
    from guys.scenario.draft import Draft

FREEZING = float(constants.ZERO_CELSIUS)
MOST_ROWS = 40
Share = Annotated[float, Field(strict=True, ge=0.0, lt=1.0, allow_inf_nan=False)]


class Rigged(Model):
    """What goes into the line of the cables of one rope besides the rope; what is left out is that of [field]."""

    hardware: q.LengthFromZero | None = None
    """Length of all that is not rope, pin to pin, the turnbuckle half out."""
    turn_back: q.LengthFromZero | None = None
    """Rope that both terminations use up."""
    take_up: q.PositiveLength | None = None
    """Whole travel of the turnbuckle."""
    pitch: q.PositiveLength | None = None
    """Pitch of its thread; a turn of the body moves both screws."""


class FieldWork(Model):
    """For `guys field`: lengths of what is in the line, temperatures of the table, errors of readings, what is accepted."""

    hardware: q.LengthFromZero = 0.0
    """Length of all that is not rope in a cable, pin to pin, the turnbuckle half out; left out: 0."""
    turn_back: q.LengthFromZero = 0.0
    """Rope that both terminations of a cable use up; left out: 0."""
    take_up: q.PositiveLength | None = None
    """Whole travel of a turnbuckle; left out: not told."""
    pitch: q.PositiveLength | None = None
    """Pitch of a turnbuckle's thread; a turn of the body moves both screws, twice the pitch; left out: turns are not told."""
    rope: dict[q.Name, Rigged] = {}
    """The same for the cables of one rope, by its name."""
    coldest: q.Temperature = FREEZING - 20.0
    """First temperature of the table; left out: -20 degC."""
    hottest: q.Temperature = FREEZING + 40.0
    """Last temperature of the table; left out: 40 degC."""
    step: Difference = 10.0
    """Step of the table; left out: 10 K."""
    cycles: Annotated[int, Field(strict=True, ge=1, le=1000)] = 20
    """Returns of a pulse, or swings, timed together; left out: 20."""
    time_error: q.Duration = 0.2
    """Error of a time stopped by hand; left out: 0.2 s, from memory."""
    sag_error: q.PositiveLength = 0.01
    """Error of a sag; left out: 10 mm, from memory."""
    sight_error: q.PositiveLength = 0.02
    """Error of a tangent sighted on the mast; left out: 20 mm, from memory."""
    plumb_error: q.PositiveLength = 0.01
    """How near spars are known to stand as set when tensions are read; left out: 10 mm, from memory."""
    gauge_error: Share = 0.05
    """Error of a gauge, of its reading; left out: 0.05, from memory."""
    mass_error: Share = 0.02
    """Error of the rope's mass per length, of itself; left out: 0.02, from memory."""
    tension: Share = 0.1
    """Share by which a tension may be off; left out: 0.1."""
    plumb: q.Ratio = 0.0025
    """Share of the height by which the spar may be off its line; left out: 0.0025, one in 400."""
    twist: q.PositiveAngle = math.radians(0.5)
    """Twist between two heights 10 ft apart; left out: 0.5 deg."""
    twist_whole: q.PositiveAngle = math.radians(5.0)
    """Twist over the whole height; left out: 5 deg."""
    proof: q.Ratio | None = None
    """Proof load of an anchor over its greatest pull; left out: allowables.anchor."""

    def rigged(self, rope: str) -> Rigged:
        """What is in the line of the cables of a rope."""
        common = Rigged(hardware=self.hardware, turn_back=self.turn_back, take_up=self.take_up, pitch=self.pitch)
        own = self.rope.get(rope)
        return common if own is None else common.model_copy(update=own.model_dump(exclude_none=True))

    @property
    def temperatures(self) -> tuple[float, ...]:
        """[K] those of the table, coldest first."""
        return tuple(self.coldest + k * self.step for k in range(self._steps + 1))

    @property
    def _steps(self) -> int:
        return math.floor((self.hottest - self.coldest) / self.step * (1 + 1e-12))

    def defaulted(self, name: str) -> bool:
        """Whether a key was left out."""
        return name not in self.model_fields_set


def findings(draft: Draft) -> Iterator[Finding]:
    """What does not go together in [field]."""
    field = draft.field
    if field is None:
        return
    after: Any = (("field", "coldest"), ("field", "hottest"), ("field", "step"))
    if field.hottest <= field.coldest:
        yield Finding(("field", "hottest"), "is not above coldest", after)
    elif field.step == 0.0 or (field.hottest - field.coldest) / field.step > MOST_ROWS:
        yield Finding(("field", "step"), f"gives more than {MOST_ROWS} temperatures; write a greater one, such as 10 K", after)
    used = [entry.rope for entry in (*draft.guy_level, *draft.cable) if entry is not None]
    whole = len(used) == len(draft.guy_level) + len(draft.cable)
    for name in field.rope:
        if whole and name not in used:
            yield Finding(("field", "rope", name), "no cable is made of a rope of that name" + nearest(name, used))
