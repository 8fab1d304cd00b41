"""`findings.csv`: one row a thing judged; `anchors.csv` and `cables.csv`: one row a thing and case.

Full digits, SI, a unit in every column head."""

from __future__ import annotations

import csv
import io
import math
from collections.abc import Iterable, Sequence

from guys.exchange.result import bearing
from guys.results import Extreme, Solution

Cell = str | float | bool | None


def as_csv(head: Sequence[str], rows: Iterable[Sequence[Cell]]) -> str:
    """Rows under their heads; nothing where there is nothing."""
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(head)
    for row in rows:
        writer.writerow(["" if cell is None or (isinstance(cell, float) and math.isnan(cell)) else cell for cell in row])
    return out.getvalue()


def _peak(extreme: Extreme) -> list[Cell]:
    return [extreme.peak, extreme.peak_case, bearing(extreme.peak_wind_from)]


def anchors(solution: Solution) -> str:
    """Every anchor in every case, after its greatest loads (`case` = greatest) over the full circle of winds."""
    head = ["anchor", "case", "wind_from_deg", "east_N", "north_N", "up_N", "horizontal_N", "resultant_N", "kind"]
    pulls, kind = solution.anchors, solution.scenario.kind_of
    rows: list[list[Cell]] = []
    for a, worst in enumerate(solution.worst_anchors):
        for name, extreme in (("resultant", worst.resultant), ("horizontal", worst.horizontal), ("uplift", worst.uplift)):
            value, case, wind = _peak(extreme)
            up, level, whole = (value if name == n else None for n in ("uplift", "horizontal", "resultant"))
            rows.append([worst.name, f"greatest {name}: {case}", wind, None, None, up, level, whole, kind(extreme.peak_case)])
        for k, case_name in enumerate(solution.case):
            east, north, up_n = (float(x) for x in pulls.pull[k, a])
            wind = bearing(float(solution.wind_from[k]))
            sizes = [float(pulls.horizontal[k, a]), float(pulls.resultant[k, a])]
            rows.append([worst.name, case_name, wind, east, north, up_n, *sizes, kind(case_name)])
    return as_csv(head, rows)


def findings(solution: Solution) -> str:
    """Everything judged, in its governing case, the nearest to its allowable first."""
    head = [
        "thing", "quantity", "demand", "capacity", "unit", "factor_required", "required_is_default", "factor", "verdict", "case",
        "wind_from_deg", "governs", "source", "why",
    ]  # fmt: skip
    rows: list[list[Cell]] = [
        [f.thing, f.quantity, f.demand, f.capacity, f.unit, f.required, "yes" if f.default else "no", f.factor, f.verdict, f.case,
         bearing(f.wind_from), f.governs, f.source, f.why]
        for f in solution.findings
    ]  # fmt: skip
    return as_csv(head, rows)


def cables(solution: Solution) -> str:
    """Every cable in every case, after its greatest tension over the full circle of winds."""
    head = [
        "cable",
        "case",
        "wind_from_deg",
        "tension_anchor_N",
        "tension_top_N",
        "greatest_N",
        "strength_N",
        "factor",
        "slack",
        "unstressed_length_m",
        "kind",
    ]
    f, kind = solution.cables, solution.scenario.kind_of
    rows: list[list[Cell]] = []
    for c, worst in enumerate(solution.worst_cables):
        value, case, wind = _peak(worst.tension)
        told = [value, worst.strength, worst.factor, None, None, kind(worst.tension.peak_case)]
        rows.append([worst.name, f"greatest tension: {case}", wind, None, None, *told])
        for k, case_name in enumerate(solution.case):
            if not f.present[k, c]:
                continue
            anchor, top = float(f.tension_anchor[k, c]), float(f.tension_top[k, c])
            greatest = max(anchor, top)
            factor = worst.strength / greatest if greatest > 0 else math.nan
            slack = "" if math.isnan(greatest) else ("yes" if f.slack[k, c] else "no")
            wind = bearing(float(solution.wind_from[k]))
            told = [greatest, worst.strength, factor, slack, float(f.unstressed_length[k, c]), kind(case_name)]
            rows.append([worst.name, case_name, wind, anchor, top, *told])
    return as_csv(head, rows)
