"""The table: what every base and every anchor must bear, bases first.

Loads are the greatest of each over all cases and winds, rounded up to two figures; the wind named is the one of the greatest pull.
A last grid says what to install at each anchor where a holdfast is given.
"demand / capacity" is the hardest-worked guy of the anchor with its strength.  A column that does not fit goes, the least needed first;
long names take more lines.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import isfinite

from guys.drawing import style
from guys.drawing.anchor_words import uplift_words
from guys.drawing.install import install_words
from guys.drawing.lettering import fitted, plain, width, wrapped
from guys.drawing.page import Align, Page, Rect
from guys.drawing.reading import (
    Governing,
    anchor_cables,
    base_point,
    check_distances,
    from_base,
    greatest,
    pull_angle,
    wind_words,
)
from guys.drawing.rounding import ABSENT, NO_FORCE, Tongue, angle, bearing, capacity, factor, force, length, level, load, moment
from guys.drawing.strip import standing
from guys.results import AnchorWorst, CableWorst, FootWorst, Solution
from guys.scenario.model import Anchor

ROW, HEAD_ROW = 4.2, 5.0
PAD = 2.2
LONGEST_NAME = 32.0
LONGEST_WORDS, LONGEST_WAY = 95.0, 42.0
"""Greatest width [mm] of a line that says what to install, and of one that says how it gives way."""
SMALLEST = 0.9


@dataclass(frozen=True)
class Column:
    """A head, how cells are ranged, how readily the column is given up (0: never), and that only the last line of a cell is an aside."""

    head: str
    align: Align = "left"
    spare: int = 0
    flowing: bool = False


Cell = tuple[str, ...]
Row = Sequence[Cell]


@dataclass(frozen=True)
class Grid:
    """Columns and rows of cells; a cell of several lines makes its row taller; cells that begin with `PAST` are set bold."""

    columns: tuple[Column, ...]
    rows: tuple[Row, ...]

    @property
    def head_height(self) -> float:
        """Height [mm] of the heads."""
        return HEAD_ROW + 3.8 * max(c.head.count("\n") for c in self.columns)

    @property
    def height(self) -> float:
        """Height [mm] of head and rows."""
        return self.head_height + sum(_row_height(row) for row in self.rows) + 1.0


def _row_height(row: Row) -> float:
    return ROW * max(len(cell) for cell in row) + 1.1


def _widths(grid: Grid, size: float) -> list[float]:
    wide = []
    for i, column in enumerate(grid.columns):
        texts = [line for row in grid.rows for line in row[i]]
        body = max((width(plain(t), size, _bold(i, t)) for t in texts), default=0.0)
        wide.append(max(body, *(width(line, size, True) for line in column.head.split("\n"))))
    return wide


def _bold(column: int, text: str) -> bool:
    return column == 0 or text.endswith(" past")


def fitted_grid(grid: Grid, room: float) -> tuple[Grid, float]:
    """The grid and a text size at which it fits the room, columns given up where a smaller size is not enough."""
    for spare in range(max((c.spare for c in grid.columns), default=0), -1, -1):
        for size in (style.BODY, style.BODY * 0.95, style.BODY * SMALLEST):
            if sum(_widths(grid, size)) + PAD * (len(grid.columns) - 1) <= room:
                return grid, size
        keep = [i for i, c in enumerate(grid.columns) if not spare or c.spare != spare]
        grid = Grid(tuple(grid.columns[i] for i in keep), tuple([row[i] for i in keep] for row in grid.rows))
    return grid, style.BODY * SMALLEST


def draw_grid(page: Page, grid: Grid, left: float, top: float, room: float) -> float:
    """Set a grid across `room`; returns the y below it."""
    grid, size = fitted_grid(grid, room)
    wide = _widths(grid, size)
    gap = min((room - sum(wide)) / max(len(wide) - 1, 1), 12.0)
    starts = [left + sum(wide[:i]) + gap * i for i in range(len(wide))]
    y = top - grid.head_height
    for column, x, w in zip(grid.columns, starts, wide, strict=True):
        for i, line in enumerate(reversed(column.head.split("\n"))):
            page.text(x + (w if column.align == "right" else 0.0), y + 1.4 + 3.8 * i, line, size, True, style.GREY, column.align)
    page.line([(left, y), (left + room, y)], style.INK, style.THIN)
    for row in grid.rows:
        _draw_row(page, grid, row, (starts, wide), y, size)
        y -= _row_height(row)
        page.line([(left, y), (left + room, y)], style.PALE, style.HAIR)
    return y - 1.0


def _draw_row(page: Page, grid: Grid, row: Row, across: tuple[list[float], list[float]], top: float, size: float) -> None:
    for i, (column, x, w, cell) in enumerate(zip(grid.columns, *across, row, strict=True)):
        for k, line in enumerate(cell):
            bold = _bold(i, line)
            text = fitted(plain(line, bold), w + 0.1, size, bold)
            aside = k > 0 and i > 0 and (not column.flowing or k == len(cell) - 1)
            ink = style.GREY if aside else style.INK
            page.text(x + (w if column.align == "right" else 0.0), top - 3.4 - ROW * k, text, size, bold, ink, column.align)


def base_grid(solution: Solution, tongue: Tongue) -> Grid:
    """One row for each foot: what it does to the ground, or to the spar that carries it."""
    heads = ("base", _headed("down", solution), "wind from", "sideways", "wind from", "turning", "lift")
    columns = tuple(Column(h, spare=2 if i in (2, 4) else 0) for i, h in enumerate(heads))
    return Grid(columns, tuple(_base_row(solution, worst, tongue) for worst in solution.worst_feet))


def _base_row(solution: Solution, worst: FootWorst, tongue: Tongue) -> Row:
    down, side, turning, lift = (greatest(e) for e in (worst.down, worst.sideways, worst.turning, worst.lift))
    downs, lifts = (("none",) if e.value < NO_FORCE else tongue.each(force, e.value) for e in (down, lift))
    return [
        (worst.spar if worst.carried_by is None else f"{worst.spar} on {worst.carried_by}",),
        downs,
        (when(solution, down) if down.value >= NO_FORCE else ABSENT,),
        tongue.each(force, side.value),
        (when(solution, side),),
        tuple(dict.fromkeys(tongue.each(moment, turning.value))),
        lifts,
    ]


def _headed(head: str, solution: Solution) -> str:
    """The head of loads that are not what a crew meets says so."""
    return f"FACTORED\n{head}" if solution.loads_are == "FACTORED" else head


def when(solution: Solution, governing: Governing) -> str:
    """The wind that governs, under a head that says "wind from"."""
    return wind_words(solution, governing.case, governing.wind_from).removeprefix("wind from ")


def anchor_grid(solution: Solution, tongue: Tongue) -> Grid:
    """One row for each anchor."""
    columns = (
        Column("anchor"), Column("bearing", "right"), Column("radius", "right"), Column("level", "right"),
        Column("slope\ndistance", "right", 2), Column(_headed("pull", solution), "right"), Column("angle", "right"), Column("out", "right"),
        Column("up", "right"), Column("wind\nfrom"), Column("hardest\nguy", spare=1), Column("demand /\ncapacity", "right"),
        Column("factor"),
    )  # fmt: skip
    return Grid(columns, tuple(_anchor_row(solution, worst, tongue) for worst in solution.worst_anchors))


def _anchor_row(solution: Solution, worst: AnchorWorst, tongue: Tongue) -> Row:
    point = solution.anchors.position[solution.anchors.name.index(worst.name)]
    turn, radius, slope = from_base(solution, point)
    pull, up = greatest(worst.resultant), greatest(worst.uplift).value
    return [
        tuple(wrapped(worst.name, LONGEST_NAME, style.BODY, bold=True)), (bearing(turn),),
        tongue.each(length, radius), tongue.each(level, point[2] - base_point(solution)[2]),
        tongue.each(length, slope), tongue.each(force, pull.value), (angle(pull_angle(solution, worst)),),
        tongue.each(force, greatest(worst.horizontal).value),
        tongue.each(force, up) if up >= NO_FORCE else (uplift_words(up, tongue),),
        (when(solution, pull),), *_hardest(solution, worst.name, tongue),
    ]  # fmt: skip


def hardest_cable(solution: Solution, anchor: str) -> CableWorst | None:
    """The guy of an anchor with the least factor; without strengths the one with the greatest tension."""
    cables = [solution.worst_cables[i] for i in anchor_cables(solution, anchor)]
    judged = [c for c in cables if isfinite(c.factor)]
    if judged:
        return min(judged, key=lambda c: c.factor)
    return max(cables, key=lambda c: c.tension.value, default=None)


def _hardest(solution: Solution, anchor: str, tongue: Tongue) -> tuple[Cell, Cell, Cell]:
    cable = hardest_cable(solution, anchor)
    if cable is None:
        return ("–",), ("–",), ("–",)
    demand = greatest(cable.tension).value
    if not (isfinite(cable.factor) and isfinite(demand) and standing(solution)):
        return (cable.name,), tongue.each(force, demand), ("not judged",)
    past = cable.factor < solution.scenario.allowables.required("cable", solution.scenario.kind_of(cable.tension.peak_case))
    stacked = tuple(_over(a, b) for a, b in zip(tongue.each(load, demand), tongue.each(capacity, cable.strength), strict=True))
    return (cable.name,), stacked, (f"{factor(cable.factor)} {'past' if past else 'within'}",)


def _over(demand: str, capacity: str) -> str:
    """ "6.29 / 23.0 kN": the unit once where it is the same."""
    number, _, unit = demand.partition(" ")
    return f"{number} / {capacity}" if capacity.endswith(f" {unit}") else f"{demand} / {capacity}"


def holdfast_grid(solution: Solution, tongue: Tongue) -> Grid:
    """What to install at each anchor, and whether it holds: its low value over the pull of the case that governs."""
    what = (Column("anchor"), Column("install", flowing=True), Column("gives way by", spare=1))
    columns = (*what, Column("pull /\nholding", "right"), Column("factor"))
    return Grid(columns, tuple(_holdfast_row(solution, anchor, tongue) for anchor in solution.scenario.anchor))


def _holdfast_row(solution: Solution, anchor: Anchor, tongue: Tongue) -> Row:
    name = tuple(wrapped(anchor.name, LONGEST_NAME, style.BODY, bold=True))
    found = next((f for f in solution.findings if f.thing == f"anchor {anchor.name}" and f.quantity == "pull"), None)
    if anchor.holdfast is None or found is None:
        return [name, ("no holdfast given",), ("–",), ("–",), ("not judged",)]
    worst = next(w for w in solution.worst_anchors if w.name == anchor.name)
    said = install_words(solution.scenario.holdfast[anchor.holdfast], tongue, pull_angle(solution, worst))
    words = tuple(line for text in (said, anchor.holdfast) for line in wrapped(text, LONGEST_WORDS, style.BODY))
    governs = tuple(wrapped(found.governs or "–", LONGEST_WAY, style.BODY))
    if found.verdict == "not judged" or not standing(solution):
        return [name, words, governs, ("–",), ("not judged",)]
    stacked = tuple(_over(a, b) for a, b in zip(tongue.each(force, found.demand), tongue.each(capacity, found.capacity), strict=True))
    return [name, words, governs, stacked, (f"{factor(found.factor)} {found.verdict}",)]


def check_lines(solution: Solution, tongue: Tongue, room: float) -> list[str]:
    """Check distances between neighbouring anchors, as lines."""
    pairs = [f"{names} {tongue.say(length, away)}" for names, away in check_distances(solution)]
    return wrapped("Check distances, level: " + " · ".join(pairs), room, style.SMALL) if pairs else []


def grids(solution: Solution, tongue: Tongue) -> list[Grid]:
    """The grid of feet, and those of anchors and of what to install where there are any."""
    out = [base_grid(solution, tongue)]
    if solution.worst_anchors:
        out.append(anchor_grid(solution, tongue))
    if any(anchor.holdfast is not None for anchor in solution.scenario.anchor):
        out.append(holdfast_grid(solution, tongue))
    return out


def table_height(solution: Solution, tongue: Tongue, room: float) -> float:
    """Height [mm] of the grids and the check distances."""
    lines = len(check_lines(solution, tongue, room))
    return sum(grid.height for grid in grids(solution, tongue)) + 3.0 + 4.2 * lines


def draw_table(page: Page, solution: Solution, zone: Rect, tongue: Tongue) -> None:
    """The grids from the top of the zone down."""
    y = zone.top + 1.0
    for grid in grids(solution, tongue):
        y = draw_grid(page, grid, zone.left, y - 1.0, zone.width)
    y -= 3.0
    for line in check_lines(solution, tongue, zone.width):
        page.text(zone.left, y, line, style.SMALL)
        y -= 4.2
