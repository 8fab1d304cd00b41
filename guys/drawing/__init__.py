"""The plan-and-elevation sheet, from one `Solution` and nothing else.

`sheet` gives the page as a matplotlib figure, `write_sheet` writes it as PDF, SVG and PNG, `show` displays it in a notebook.  Nothing
here solves: a figure cannot hold a number the checks did not see.  matplotlib is imported on first use.
"""

from __future__ import annotations

from dataclasses import dataclass
from os import PathLike
from pathlib import Path
from typing import TYPE_CHECKING, Literal

if TYPE_CHECKING:
    from matplotlib.figure import Figure

    from guys.limits import Limits
    from guys.results import Solution

Paper = Literal["A3", "A4", "letter", "tabloid"]
Units = Literal["SI", "US", "both"]

__all__ = ["Shown", "limit_page", "sheet", "show", "write_sheet"]


def sheet(solution: Solution, *, paper: Paper = "A3", look_toward: float | None = None, units: Units = "SI") -> Figure:
    """The sheet as a figure.

    look_toward : bearing the elevation looks toward [rad]; None: the one that shows most
    """
    from guys.drawing.compose import draw_sheet

    return draw_sheet(solution, paper, look_toward, units)


def limit_page(limits: Limits, *, paper: Paper = "A4", units: Units = "SI") -> Figure:
    """The polar figure of the limiting winds."""
    from guys.drawing.limit import draw_limits

    return draw_limits(limits, paper, units)


def write_sheet(
    solution: Solution,
    directory: str | PathLike[str],
    *,
    paper: Paper = "A3",
    look_toward: float | None = None,
    units: Units = "SI",
) -> tuple[Path, ...]:
    """Write sheet.pdf, sheet.svg and sheet.png, all of them or, where one fails, none.

    Returns the paths.  Raises `guys.errors.OutputError` where a file cannot be written.
    """
    from guys.drawing.files import write_figure

    figure = sheet(solution, paper=paper, look_toward=look_toward, units=units)
    return write_figure(figure, Path(directory), "sheet", solution.scenario.title, solution.version)


@dataclass(frozen=True)
class Shown:
    """A sheet that a notebook displays inline when it is the value of a cell."""

    solution: Solution
    paper: Paper = "A4"
    look_toward: float | None = None
    units: Units = "SI"

    def _repr_svg_(self) -> str:
        from guys.drawing.files import svg_text

        figure = sheet(self.solution, paper=self.paper, look_toward=self.look_toward, units=self.units)
        return svg_text(figure, self.solution.scenario.title, self.solution.version)


def show(solution: Solution, *, paper: Paper = "A4", look_toward: float | None = None, units: Units = "SI") -> Shown:
    """The sheet for a notebook: ``show(solve(scenario))`` as the last line of a cell displays it."""
    return Shown(solution, paper, look_toward, units)
