"""What all commands share: files written whole or not at all, and the exit status of a run."""

from __future__ import annotations

from collections.abc import Mapping
from contextlib import ExitStack
from pathlib import Path
from typing import TYPE_CHECKING

from guys.checks.alarms import BALANCE
from guys.drawing.files import figure_bytes
from guys.errors import OutputError
from guys.exchange.files import reason, replaced
from guys.results import Solution
from guys.version import __version__

if TYPE_CHECKING:
    from matplotlib.figure import Figure


def store(directory: Path, contents: Mapping[str, bytes]) -> list[Path]:
    """Write the files `contents` to the directory, made where missing: all are stored before the first takes its name.

    Raises OutputError where the directory or a file cannot be written.
    """
    try:
        directory.mkdir(parents=True, exist_ok=True)
    except OSError as failure:
        raise OutputError(str(directory), reason(failure)) from failure
    with ExitStack() as stack:
        for name, content in contents.items():
            stack.enter_context(replaced(directory / name)).write_bytes(content)
    return [directory / name for name in contents]


def pictures(stem: str, figure: Figure, title: str) -> dict[str, bytes]:
    """A figure as `stem`.pdf, .svg and .png."""
    return {f"{stem}.{kind}": figure_bytes(figure, kind, title, __version__) for kind in ("pdf", "svg", "png")}


def exit_status(solution: Solution) -> int:
    """The contract's exit status of a run."""
    if solution.failed or (solution.check.balance > BALANCE):
        return 1
    if any(solution.unsettled):
        return 4
    return 3 if solution.past else 0
