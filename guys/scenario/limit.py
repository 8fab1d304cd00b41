"""What `guys limit` is asked besides the limiting wind itself."""

from __future__ import annotations

from typing import Annotated

from pydantic import AfterValidator, Field

from guys.scenario import quantity as q
from guys.scenario.table import Model


def _below_one(share: float) -> float:
    if share >= 1.0:
        raise q.fault(f"{share:g} is no action level: it is a share of the limiting wind, less than 1; write 0.6")
    return share


Share = Annotated[q.Ratio, AfterValidator(_below_one)]


class Limit(Model):
    """Action levels below the limiting wind, for `guys limit`."""

    actions: Annotated[list[Share], Field(max_length=12)] = []
    """Action levels as shares of the limiting wind, each between 0 and 1; left out: none."""
    lower_in: q.Duration | None = None
    """Time it takes to lower the structure, printed beside the action levels."""
