"""The table `[combinations]` as it is written."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field

from guys.scenario import quantity as q
from guys.scenario.table import Model

SetName = Literal["service", "us-strength", "us-allowable", "eu-strength", "eu-equilibrium", "eu-accidental"]


class CombinationsEntry(Model):
    """Named sets of load cases, written out beside the `[[case]]` of the file."""

    sets: Annotated[list[SetName], Field(min_length=1)]
    """The sets."""
    iced_wind: q.Factor = 1.0
    """Share of the wind pressure that blows in the iced lines; left out: 1, all of it."""
    temperature: q.Temperature | None = None
    """Temperature of the lines without ice; left out: setting.temperature."""
    iced_temperature: q.Temperature | None = None
    """Temperature of the iced lines; left out: setting.temperature."""


class FactoredEntry(Model):
    """Least factors in factored cases; left out: those of all cases."""

    cable: q.Ratio | None = None
    """Least strength / tension."""
    anchor: q.Ratio | None = None
    """Least holding / pull."""
    sliding: q.Ratio | None = None
    """Least factor against sliding of a base."""
    spar: q.Ratio | None = None
    """Least strength / what acts of a spar's section."""
    bearing: q.Ratio | None = None
    """Least allowable pressure / pressure under a base plate."""
