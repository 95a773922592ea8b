"""Distances and the room a crack has, by plane geometry."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.surroundings import Obstacle, ObstacleKind, Surroundings

BOX = Obstacle(ObstacleKind.CUTOUT, "door 1L", 100, 200, 30, 80)


def place(half: float = 10.0, *obstacles: Obstacle, bay=(-300.0, 300.0)):
    return Surroundings(0.0, 0.0, half, bay, "FR 1 to FR 2", obstacles, "test")


def test_distance_to_a_corner_is_by_pythagoras():
    assert place(10, BOX).nearest(ObstacleKind.CUTOUT) == (
        pytest.approx(math.hypot(90, 30)),
        "door 1L",
    )
    assert place(10, BOX).nearest(ObstacleKind.JOINT) is None


def test_inside_an_obstacle_the_distance_is_nought():
    inside = Obstacle(ObstacleKind.REPAIR, "R-0001", -5, 5, -5, 5)
    assert place(1, inside).nearest(ObstacleKind.REPAIR)[0] == 0


def test_room_to_the_frames():
    assert place(10).frame_room() == 290
    assert place(310).frame_room() == -10
    assert place(10, bay=None).frame_room() is None


@given(st.floats(31, 95))
def test_at_the_largest_size_the_tip_is_just_clear(clearance):
    room, what = place(1, BOX).largest_half_length(clearance)
    grown = place(room, BOX).nearest(ObstacleKind.CUTOUT)[0]
    assert grown == pytest.approx(clearance, abs=1e-9)
    assert what == "cut-out door 1L"


def test_an_obstacle_far_enough_to_the_side_does_not_matter():
    room, what = place(1, BOX).largest_half_length(29.0)
    assert (room, what) == (300, "a frame of FR 1 to FR 2")
    assert place(1, bay=None).largest_half_length(9.0) == (
        math.inf,
        "nothing recorded",
    )
