"""Where words go: the geometric tests against closed cases, and placing."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from shapely import LineString, Point, box

from guys.drawing.labels import CLEARANCE, Field, all_over, around, clashes, crossing, leaders, overlapping, place, touching
from guys.drawing.page import Rect

ROOM = Rect(0.0, 0.0, 100.0, 80.0)
EDGE = 1e-6
"""Nearness [mm] at which touching or not is a matter of rounding."""
coordinate = st.floats(0.0, 10.0)


@given(st.tuples(*[coordinate] * 4), st.tuples(coordinate, coordinate, st.floats(0.1, 5.0), st.floats(0.1, 5.0)))
def test_segment_and_box_agree_with_shapely(line: tuple[float, ...], corner: tuple[float, ...]) -> None:
    x, y, wide, high = corner
    ours = bool(crossing(np.array([line]), np.array([[x, y, x + wide, y + high]]))[0, 0])
    shape = LineString([line[:2], line[2:]])
    outer, inner = box(x - EDGE, y - EDGE, x + wide + EDGE, y + high + EDGE), box(x + EDGE, y + EDGE, x + wide - EDGE, y + high - EDGE)
    assert ours or not shape.intersects(inner)
    assert not ours or shape.intersects(outer)


@given(st.tuples(coordinate, coordinate, st.floats(0.1, 5.0)), st.tuples(coordinate, coordinate, st.floats(0.1, 5.0), st.floats(0.1, 5.0)))
def test_disc_and_box_agree_with_shapely(disc: tuple[float, ...], corner: tuple[float, ...]) -> None:
    x, y, wide, high = corner
    away = box(x, y, x + wide, y + high).distance(Point(disc[:2]))
    ours = bool(touching(np.array([[x, y, x + wide, y + high]]), np.array([disc]))[0, 0])
    assert ours == (away < disc[2]) or abs(away - disc[2]) < EDGE


def test_boxes_that_share_an_edge_do_not_overlap() -> None:
    boxes = np.array([[0.0, 0.0, 1.0, 1.0], [1.0, 0.0, 2.0, 1.0], [0.5, 0.5, 1.5, 1.5]])
    assert overlapping(boxes, boxes).tolist() == [[True, False, True], [False, True, True], [True, True, True]]


def test_words_stand_outward_where_nothing_is_in_the_way() -> None:
    spot = place(Field(ROOM), around((50.0, 40.0), (20.0, 8.0), 2.0, (1.0, 0.0)))
    assert spot.box[0] > 52.0
    assert spot.leader is None
    assert spot.clashes == 0


def test_words_keep_clear_of_everything() -> None:
    field = Field(ROOM)
    field.add_line([[50.0, 40.0], [100.0, 40.0]])
    field.add_disc([50.0, 40.0], 5.0)
    field.add_box([20.0, 30.0, 44.0, 50.0])
    spot = place(field, around((50.0, 40.0), (20.0, 8.0), 5.0, (1.0, 0.0)))
    alone = Field(ROOM, field.segments, field.boxes[:-1], field.discs)
    assert clashes(alone, spot.box[None])[0] == 0


def test_words_far_from_their_point_bring_a_leader() -> None:
    field = Field(ROOM)
    field.add_box([10.0, 10.0, 90.0, 39.0])
    field.add_box([10.0, 41.0, 90.0, 70.0])
    wish = around((50.0, 40.0), (20.0, 8.0), 0.5, (1.0, 0.0))
    spot = place(field, wish, all_over(wish, ROOM))
    assert spot.leader is not None or spot.clashes


def test_no_room_at_all_is_reported() -> None:
    field = Field(ROOM)
    field.add_box([0.0, 0.0, 100.0, 80.0])
    wish = around((50.0, 40.0), (20.0, 8.0), 0.5)
    assert place(field, wish, all_over(wish, ROOM)).clashes > 0


@pytest.mark.parametrize("gap", [CLEARANCE * 0.9, CLEARANCE * 1.1])
def test_clearance(gap: float) -> None:
    field = Field(ROOM)
    field.add_line([[0.0, 10.0], [100.0, 10.0]])
    near = np.array([[20.0, 10.0 + gap, 40.0, 20.0]])
    assert bool(clashes(field, near)[0]) == (gap < CLEARANCE)


def test_leader_ends_at_the_nearest_edge() -> None:
    line = leaders(np.array([0.0, 0.0]), np.array([[3.0, -1.0, 5.0, 1.0], [2.0, 3.0, 4.0, 5.0]]))
    assert line.tolist() == [[0.0, 0.0, 3.0, 0.0], [0.0, 0.0, 2.0, 3.0]]
