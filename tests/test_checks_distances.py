"""Distances between chains of straight pieces against many points on them, and places over an area by hand."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely import box

from guys.checks.distances import apart, over

ROUNDING = 1e-9
"""[m] of coordinates of tens of metres."""


def brute(a: np.ndarray, b: np.ndarray, parts: int = 60) -> float:
    """Least distance over many points of both chains."""

    def spread(c: np.ndarray) -> np.ndarray:
        s = np.linspace(0, len(c) - 1, (len(c) - 1) * parts + 1)
        return np.column_stack([np.interp(s, np.arange(len(c)), c[:, i]) for i in range(3)])

    return float(np.linalg.norm(spread(a)[:, None] - spread(b)[None], axis=-1).min())


@settings(max_examples=60, deadline=None)
@given(st.lists(st.tuples(*[st.floats(-5, 5)] * 3), min_size=5, max_size=5))
def test_distance_of_chains_against_many_points(points: list[tuple[float, float, float]]) -> None:
    a, b = np.array(points[:3]), np.array(points[3:])
    near, sampled = apart(a, b), brute(a, b)
    coarse = max(np.linalg.norm(np.diff(c, axis=0), axis=1).max() for c in (a, b)) / 60
    assert sampled - coarse - ROUNDING <= near <= sampled + ROUNDING


def test_distance_by_hand() -> None:
    across = apart(np.array([[0, 0, 0], [2, 0, 0.0]]), np.array([[1, -1, 3], [1, 1, 3.0]]))
    assert across == pytest.approx(3.0, abs=ROUNDING)
    point = np.array([[0, 0, 0], [0, 0, 0.0]])
    assert apart(point, np.array([[3, 4, 0], [9, 4, 0.0]])) == pytest.approx(5.0, abs=ROUNDING)


def test_places_over_an_area_hold_its_edges_and_the_curve_between() -> None:
    curve = np.array([[0, 0, 4], [1, 0, 1], [2, 0, 4.0]])
    upright = np.array([[1, 0, 1], [1, 0, 1.5], [1, 0, 2.0]])
    case, places = over(np.stack([curve, curve + np.array([0, 5, 0]), upright]), box(0.5, -1, 1.5, 1))
    assert places[case == 0, 2].min() == pytest.approx(1.0)
    assert places[case == 0, 2].max() == pytest.approx(2.5)
    assert case.tolist() == [0, 0, 0, 2, 2, 2]


@settings(max_examples=30, deadline=None)
@given(st.lists(st.tuples(*[st.floats(-5, 5)] * 3), min_size=12, max_size=12))
def test_case_by_case_as_alone(points: list[tuple[float, float, float]]) -> None:
    a, b = np.array(points).reshape(2, 2, 3, 3)
    assert apart(a, b).tolist() == [float(apart(x, y)) for x, y in zip(a, b, strict=True)]
    assert apart(a, b[0]).tolist() == [float(apart(x, b[0])) for x in a]
