"""What all commands share: files written whole or not at all, and the exit status of a run."""

from __future__ import annotations

import multiprocessing
import os
import signal
import sys
import warnings
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from concurrent.futures import Executor, ProcessPoolExecutor
from contextlib import ExitStack, contextmanager
from functools import partial
from pathlib import Path
from typing import TYPE_CHECKING, TextIO

from guys import terminal
from guys.checks.alarms import BALANCE
from guys.drawing.files import figure_bytes
from guys.errors import OutputError, ScenarioError
from guys.exchange.files import reason, replaced
from guys.results import Solution
from guys.scenario import Scenario, layouts
from guys.scenario.keys import clipped, nearest
from guys.scenario.model import AS_DRAWN
from guys.scenario.reader import fault_at
from guys.version import __version__

if TYPE_CHECKING:
    from matplotlib.figure import Figure


SHORT = 4
"""Most processes for work of a second or two: to start more costs what they save."""


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


@contextmanager
def workers(count: int | None) -> Iterator[Executor | None]:
    """So many processes side by side; None for one, which is this one.  An interruption stops them all.

    count : None for short work: one a core where processes are forked, and so there at once; where each would first load everything, one
    """
    if count is None:
        count = min(os.cpu_count() or 1, SHORT) if multiprocessing.get_start_method() == "fork" else 1
    if count <= 1:
        yield None
        return
    executor = ProcessPoolExecutor(count, initializer=signal.signal, initargs=(signal.SIGINT, signal.SIG_IGN))
    with warnings.catch_warnings():
        warnings.simplefilter("ignore", DeprecationWarning)  # of forking beside threads: numpy's alone are there, which are made for it
        executor.submit(int)
    try:
        yield executor
    finally:
        executor.shutdown(cancel_futures=True)


def pictures(stem: str, figure: Figure, title: str, executor: Executor | None = None) -> dict[str, bytes]:
    """A figure as `stem`.pdf, .svg and .png, one after another or side by side."""
    kinds, saved = ("pdf", "svg", "png"), partial(figure_bytes, figure, title=title, version=__version__)
    contents = map(saved, kinds) if executor is None else executor.map(saved, kinds)
    return {f"{stem}.{kind}": content for kind, content in zip(kinds, contents, strict=True)}


def told(groups: Iterable[tuple[str, Sequence[str]]], stream: TextIO) -> None:
    """Lists under their headings, empty ones left out."""
    for heading, lines in groups:
        if lines:
            stream.write(f"\n{heading}\n" + "".join(f"  - {line}\n" for line in lines))


def in_layout(scenario: Scenario, name: str | None) -> Scenario:
    """The scenario in one of its layouts; None: as drawn.  Raises ScenarioError where it has none of that name."""
    every = {each.layout: each for each in layouts.every(scenario)}
    if name is None or name in every:
        return every[name or AS_DRAWN]
    text = f'no layout is named "{clipped(name)}"{nearest(name, every)}'
    raise ScenarioError([fault_at(scenario, ("layout",), text)])


def deliver(
    out: str | None,
    contents: Callable[[], Mapping[str, bytes]],
    as_json: bool,
    text: Callable[[], str],
    report: Callable[[TextIO], None],
) -> None:
    """Store the files in the directory `out` where one is given, then print: the JSON text, or a report and where the files are."""
    written = [] if out is None else store(Path(out), contents())
    if as_json:
        sys.stdout.write(text())
        return
    report(sys.stdout)
    terminal.files(written, sys.stdout)


def exit_status(solution: Solution) -> int:
    """The contract's exit status of a run."""
    if solution.failed or (solution.check.balance > BALANCE):
        return 1
    if any(solution.unsettled):
        return 4
    return 3 if solution.past else 0
