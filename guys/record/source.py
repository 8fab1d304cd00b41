"""What the sections of a record are written from."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

from guys.drawing import rounding
from guys.drawing.rounding import Tongue, Units
from guys.exchange import recording
from guys.record.blocks import Number
from guys.record.numbers import Numbers, numbers
from guys.results import Solution
from guys.scenario import Scenario
from guys.studies.recording import Recorded


@dataclass(frozen=True)
class Source:
    """found : what was solved;  wanted : the reader's units"""

    found: Recorded
    wanted: Units

    @property
    def solution(self) -> Solution:
        """The run."""
        return self.found.solution

    @property
    def scenario(self) -> Scenario:
        """What was asked."""
        return self.found.solution.scenario

    @cached_property
    def say(self) -> Numbers:
        """The numbers, by their key in `record.json`."""
        return numbers(recording.as_dict(self.found), self.wanted)

    @property
    def tongue(self) -> Tongue:
        """Both systems, the reader's first, for words that others make."""
        return Tongue(self.say.systems)

    def wind(self, key: str) -> str | Number:
        """The bearing of a wind under a key."""
        return rounding.ABSENT if self.say.at(key) is None else self.say.bearing(key)
