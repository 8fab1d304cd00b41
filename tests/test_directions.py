"""The worst wind direction: found within a degree, against a dense sweep and the symmetry of masts."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
import scenarios_made as made

from guys.loads import lines_of
from guys.results import Extreme, Solution
from guys.studies import directions

DENSE = math.radians(0.25)
PEAK_MISSED = 3e-4
"""Relative: a smooth peak is flat to 1 - cos(1 deg) = 1.5e-4 of its variation within a degree of its top; twice that at kinks."""
FOUND = math.radians(1.0)
"""The greatest load is found to one degree or better."""


def dense(document: made.Document) -> tuple[np.ndarray, np.ndarray]:
    """Bearings every quarter degree, and the greater end tension of every cable (bearing, cable), apart from the study's sweep."""
    scenario = made.scenario(document)
    bearings = np.arange(0.0, 2 * math.pi, DENSE)
    solved = made.cases(document, lines_of(scenario, bearings.tolist()))
    ends = [np.linalg.norm(e, axis=-1) for e in (solved.found.hanging.at_a, solved.found.hanging.at_b)]
    assert solved.judged.error.max() < 1e-9
    return bearings, np.maximum(*ends)


def apart(a: float, b: float) -> float:
    return abs((a - b + math.pi) % (2 * math.pi) - math.pi)


def uneven(**tables: object) -> made.Document:
    document = made.mast(0.0, setting={"plumb": True}, **tables)
    document["anchor"][1] |= {"radius": 9.0, "level": 1.0}
    document["anchor"][2]["bearing"] = 262.0
    return document


@pytest.mark.parametrize("document", [uneven(), uneven(straight=True)], ids=["catenary", "straight"])
def test_peaks_are_those_of_a_dense_sweep(document: made.Document) -> None:
    bearings, tension = dense(document)
    s = made.solved(document)
    for k, worst in enumerate(s.worst_cables):
        best = tension[:, k].max()
        assert worst.tension.peak == pytest.approx(best, rel=PEAK_MISSED)
        assert worst.tension.peak <= best * (1 + PEAK_MISSED)
        flat = bearings[tension[:, k] > best * (1 - PEAK_MISSED)]
        assert min(apart(worst.tension.peak_wind_from, b) for b in flat) < FOUND


def test_only_listing_one_direction_still_finds_the_worst() -> None:
    """The listed wind comes from 0; the guys at 10 and 130 degrees are worst near their own bearings."""
    s = made.solved(made.mast(0.0))
    for worst, anchor in zip(s.worst_cables[3:], (10.0, 130.0, 250.0), strict=True):
        assert worst.tension.peak > worst.tension.value
        assert math.degrees(apart(worst.tension.peak_wind_from, math.radians(anchor))) < 61.0


def test_a_mast_of_threefold_symmetry_has_threefold_peaks() -> None:
    """Anchors and cables A, B, C: the same greatest loads, 120 degrees apart."""
    s = made.solved(made.mast(0.0))

    def check(extremes: list[Extreme]) -> None:
        first = extremes[0]
        for turn, e in enumerate(extremes):
            assert e.peak == pytest.approx(first.peak, rel=PEAK_MISSED)
            turned = [apart(e.peak_wind_from, side + math.radians(120.0 * turn)) for side in mirrors(first.peak_wind_from)]
            assert min(turned) < 2 * FOUND

    def mirrors(bearing: float) -> tuple[float, float]:
        return bearing, 2 * math.radians(10.0) - bearing

    check([c.tension for c in s.worst_cables[:3]])
    check([c.tension for c in s.worst_cables[3:]])
    check([a.resultant for a in s.worst_anchors])
    check([a.uplift for a in s.worst_anchors])


def test_wind_between_guys_is_the_worst_for_barely_taut_weightless_guys() -> None:
    """Three guys at one level, side load F: the most loaded guy's horizontal pull is greatest at 30 degrees off it, 2 F/sqrt 3 = 1.155 F.

    Statics of two taut guys 120 degrees apart; a rigid, light mast on straight guys that are just not slack.
    """
    stiff = {"rope": made.rope(stiffness=1e8)}
    head = made.fitting(at=12.0, area=0.5, drag=1.0)
    mast = made.spar(rigid=True, section=[made.weightless(12.0)], fitting=[head])
    s = made.solved(made.stayed(mast, 0.0, 120.0, 240.0, length=14.4222051, straight=True, wind=made.wind(0.0), rope=stiff))
    side = 0.5 * 1.25 * 25.0**2 * 0.5
    within_a_degree = 2e-4
    for anchor, worst in zip((0.0, 120.0, 240.0), s.worst_anchors, strict=True):
        assert worst.horizontal.peak / side == pytest.approx(2 / math.sqrt(3), rel=within_a_degree)
        assert math.degrees(apart(worst.horizontal.peak_wind_from, math.radians(anchor))) == pytest.approx(30.0, abs=1.0)


def sweep_of(s: Solution) -> np.ndarray:
    assert s.sweep is not None
    return s.sweep.bearing


def test_sweep_covers_the_circle_and_every_listed_direction() -> None:
    document = {**made.mast(3.0, 77.0), "case": [{"name": "a"}, {"name": "b", "wind": 1.4}, {"name": "still", "wind": 0.0}]}
    s = made.solved(document)
    assert s.sweep is not None
    assert s.sweep.case == ("a", "b")
    for row in sweep_of(s):
        gaps = np.diff([*row, row[0] + 2 * math.pi])
        assert np.all(np.diff(row) > 0)
        assert gaps.max() <= directions.COARSE + 1e-9
        assert gaps.min() > directions.SAME * 0.99
        for listed in (3.0, 77.0):
            assert np.abs(row - math.radians(listed)).min() < 1e-9


def test_slack_winds_are_the_swept_ones_in_which_a_cable_drops() -> None:
    s = made.solved(made.mast(0.0, straight=True, tension=400.0))
    assert s.sweep is not None
    assert s.sweep.slack.any()
    for k, worst in enumerate(s.worst_cables):
        bearings = s.sweep.bearing[0][s.sweep.slack[0, :, k]]
        assert sorted(b for _, b in worst.slack_winds) == pytest.approx(sorted(bearings))
        assert {name for name, _ in worst.slack_winds} <= {"design"}


def test_without_wind_there_is_no_sweep() -> None:
    assert made.solved(made.mast()).sweep is None


def test_peak_of_a_parabola_is_found_where_it_is() -> None:
    """f = 5 - (b - 0.31)^2 at three bearings: one step to the vertex, then a degree to either side."""
    bearing = np.radians([0.0, 10.0, 20.0, 30.0])
    top = math.radians(17.0)
    tried = directions._around_peak(bearing, 5 - (bearing - top) ** 2)
    assert tried == pytest.approx([top], abs=1e-9)
    close = np.radians([16.0, 17.0, 18.0])
    assert directions._around_peak(close, 5 - (close - top) ** 2) == []


def test_lines_turn_every_template_to_every_bearing() -> None:
    template = lines_of(made.scenario(made.mast(0.0)))[0]
    lines = directions._lines([template, replace(template, name="b")], [0.1, 0.2])
    assert [(x.name, x.wind_from) for x in lines] == [("design", 0.1), ("design", 0.2), ("b", 0.1), ("b", 0.2)]
