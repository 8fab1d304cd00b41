"""`[lost]`: how `guys lost` takes cables and anchors away, and what is asked of what is left."""

from __future__ import annotations

from typing import Annotated

from pydantic import Field

from guys.scenario import quantity as q
from guys.scenario.table import Model


class Lost(Model):
    """For `guys lost`: how a cable goes, and the least factors asked for once it is gone."""

    sudden: Annotated[float, Field(strict=True, ge=1.0, allow_inf_nan=False)] = 1.0
    """Times the lost cable's end forces that its going takes away: 1 slowly; 2 at once and undamped."""
    pairs: q.Flag = False
    """true: every two cables, and every two anchors, together as well."""
    cable: q.Ratio | None = None
    """Least strength / tension after a loss; left out: allowables.cable."""
    anchor: q.Ratio | None = None
    """Least holding / pull after a loss; left out: allowables.anchor."""
    sliding: q.Ratio | None = None
    """Least factor against sliding of a base after a loss; left out: allowables.sliding."""
    lean: q.PositiveAngle | None = None
    """Greatest head lean after a loss; left out: allowables.lean."""
