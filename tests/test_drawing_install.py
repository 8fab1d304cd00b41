"""The sheet says what to install at each anchor, and whether it holds."""

from __future__ import annotations

import math
from typing import Any

import pytest
import scenarios_made as made
from test_holdfasts import EVERY

from guys.drawing.install import install_words
from guys.drawing.rounding import tongue
from guys.drawing.table import PAD, _widths, fitted_grid, grids, holdfast_grid
from guys.scenario.holding import MODELS

SAID = {
    "block": "block of 1000 kg, 1.00 m by 1.00 m by 0.50 m",
    "deadman": "timber, 1.80 m long, 0.30 m high, its middle 1.20 m deep",
    "picket": "1-1-1 pickets",
    "screw": "screw, plate of 250 mm, lowest 1.50 m deep, in line with the pull",
    "rock": "bar of 25 mm, 1.00 m bonded, in line with the pull",
    "tested": "as tested with 22.0 kN",
}


@pytest.mark.parametrize("kind", SAID)
def test_every_kind_in_words(kind: str) -> None:
    holdfast = MODELS[kind].model_validate({"kind": kind, **EVERY[kind]})
    assert install_words(holdfast, tongue("SI")) == SAID[kind]


def test_a_deadman_lies_behind_its_anchor_in_line_with_the_pull() -> None:
    """1.2 m deep under a pull at 45 degrees: 1.2 m behind; a level pull has no place for it."""
    deadman = MODELS["deadman"].model_validate({"kind": "deadman", **EVERY["deadman"]})
    assert install_words(deadman, tongue("SI"), math.pi / 4) == SAID["deadman"] + ", 1.20 m behind the anchor"
    assert install_words(deadman, tongue("SI"), 0.0) == install_words(deadman, tongue("SI"), math.nan) == SAID["deadman"]


def test_both_unit_systems_and_a_heavy_block() -> None:
    holdfast = MODELS["block"].model_validate({"kind": "block", "mass": 12000.0, "friction": 0.5})
    assert install_words(holdfast, tongue("both")) == "block of 12000 kg (26500 lb)"


def test_the_table_has_a_row_for_every_anchor_where_a_holdfast_is_given() -> None:
    document = made.mast(30.0, 200.0, holdfast={"h": {"kind": "block", "mass": "300 kg", "friction": 0.5}})
    assert len(grids(made.solved(made.mast(30.0, 200.0)), tongue("SI"))) == 2
    document["anchor"][0]["holdfast"] = "h"
    solution = made.solved(document)
    assert len(grids(solution, tongue("SI"))) == 3
    first, second, _ = holdfast_grid(solution, tongue("SI")).rows
    finding = next(f for f in solution.findings if f.thing == "anchor A")
    assert first[1] == ("block of 300 kg", "h")
    assert first[2] == ("sliding",)
    assert first[4][0].endswith(finding.verdict)
    assert second[1:] == [("no holdfast given",), ("–",), ("–",), ("not judged",)]


LONG = "a-holdfast-with-a-rather-long-name-that-goes-on"
ROOM = 215.0
"""Width [mm] of the left part of an A3 sheet, whose layout every paper has."""


@pytest.mark.parametrize(
    "holdfast",
    [
        {"kind": "deadman", "length": "1.8 m", "height": "0.3 m", "depth": "1.5 m", "soil": "loam"},
        {"kind": "rock", "bar": "25 mm", "bond_length": "1 m", "bond_stress": "1 MPa", "rod": "40 deg"},
        {
            "kind": "screw", "helix": ["250 mm", "300 mm", "350 mm"], "depth": "3.4 m", "soil": {"torque": "3 kN m"},
            "shaft": {"square": "38 mm"}, "rod": "40 deg",
        },
    ],
)  # fmt: skip
def test_long_words_take_more_lines_and_no_column_meets_another(holdfast: dict[str, Any]) -> None:
    document = made.mast(30.0, 200.0, holdfast={LONG: holdfast})
    for anchor in document["anchor"]:
        anchor["holdfast"] = LONG
    grid, size = fitted_grid(holdfast_grid(made.solved(document), tongue("both")), ROOM)
    assert len(grid.columns) == 5
    assert sum(_widths(grid, size)) + PAD * (len(grid.columns) - 1) <= ROOM
    assert LONG in " ".join(grid.rows[0][1])
