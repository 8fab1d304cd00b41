"""`[[stage]]`: one state on the way up, for `guys stages`: how high the spars stand, which cables are made fast, in what wind."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Annotated

from pydantic import Discriminator, Tag

from guys.scenario import quantity as q
from guys.scenario.table import Model

UpTo = Annotated[
    Annotated[dict[q.Name, q.LengthFromZero], Tag("<spars>")] | Annotated[q.LengthFromZero, Tag("<first>")],
    Discriminator(lambda value: "<spars>" if isinstance(value, Mapping) else "<first>"),
]


class Stage(Model):
    """One state on the way up; what stands above `up_to` is not there yet."""

    name: q.Name
    """Name, unique among stages."""
    up_to: UpTo | None = None
    """Length of the first spar that stands, from its foot, or a table of spars by name; spars not named stand whole, "0 m": not there."""
    cables: list[q.Name] | None = None
    """Cables made fast; left out: all whose ends are there."""
    wind: q.Speed | None = None
    """Wind speed, of the averaging time and height of [wind]; left out: its speed."""
    temperature: q.Temperature | None = None
    """Temperature in the wind; left out: setting.temperature."""

    def heights(self, first: str) -> dict[str, float]:
        """`up_to` by spar; `first` is the name of the first one."""
        if self.up_to is None:
            return {}
        return dict(self.up_to) if isinstance(self.up_to, Mapping) else {first: self.up_to}
