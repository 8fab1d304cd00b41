"""Everything `guys` raises on purpose.

    GuysError
    ├── ScenarioError          what the user wrote is wrong; holds every `Fault` found            exit status 2
    └── OutputError            a result could not be written                                      exit status 1

A structure that falls is not an exception: it is a result whose state is "none" or "unstable".  Nor is a case on which the solver
failed: `Solution.failed` tells it, and the commands then end with exit status 1.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import ClassVar


class GuysError(Exception):
    """Root of the tree; `exit_status` is what a command that ends with it returns."""

    exit_status: ClassVar[int] = 1


@dataclass(frozen=True)
class Fault:
    """One thing wrong in a scenario file.

    path : the file, None for text read from elsewhere; line, column : counted from 1, None where nothing in the text can be pointed at
    key : key path such as ``guy_level[0].at``, empty for the file as a whole; message : what was found and what would do
    """

    path: str | None
    line: int | None
    column: int | None
    key: str
    message: str

    def __str__(self) -> str:
        place = ":".join(str(part) for part in (self.path or "scenario", self.line, self.column) if part is not None)
        return ": ".join(part for part in (place, self.key, self.message) if part)


class ScenarioError(GuysError):
    """The scenario is wrong.  `faults` holds all that was found, in the order of the file."""

    exit_status = 2

    def __init__(self, faults: Iterable[Fault]) -> None:
        self.faults = tuple(faults)
        super().__init__("\n".join(str(fault) for fault in self.faults))


class OutputError(GuysError):
    """A file could not be written; `path` names it.  Nothing half-written is left behind."""

    def __init__(self, path: str, reason: str) -> None:
        self.path = path
        self.reason = reason
        super().__init__(f"{path}: cannot be written: {reason}")
