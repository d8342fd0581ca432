"""Places along a deck or a crest: even steps of the dividers between two ends."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from jigs.knowns import CannotSolve
from jigs.rows import MOST_LEAN_DEG, rises, row_places

NEAR = 1e-9


@given(st.floats(10, 2000), st.floats(-500, 1000), st.floats(-0.99, 0.99), st.integers(2, 40))
def test_places_step_evenly_from_end_to_end_of_one_arc(width, back, share, count):
    bow = share * width / 2
    points = np.array(row_places(width, back, bow, count))
    assert points[0] == pytest.approx([-width / 2, back - bow], abs=2 * NEAR)
    assert points[-1] == pytest.approx([width / 2, back - bow], abs=2 * NEAR)
    steps = np.linalg.norm(np.diff(points, axis=0), axis=1)
    assert np.ptp(steps) < 1e-8
    assert (np.diff(points[:, 0]) > 0).all()
    assert points + points[::-1] == pytest.approx(np.column_stack([np.zeros(count), 2 * points[:, 1]]), abs=1e-8)
    # Seen from any place of the arc its ends stand under one angle, and the middle is a place of it.
    middle = seen_under((0.0, back), points)
    for p in points[1:-1] if abs(bow) > 1e-3 else ():
        assert seen_under(p, points) == pytest.approx(middle, abs=1e-6)
    between = points[1:-1, 1] - (back - bow)
    assert (between * np.sign(bow) >= -NEAR).all()
    assert (np.abs(between) <= abs(bow) + NEAR).all()


def seen_under(place, points):
    u, v = (np.subtract(end, place) for end in (points[0], points[-1]))
    return math.atan2(abs(u[0] * v[1] - u[1] * v[0]), u @ v)


def test_a_straight_row_is_divided_evenly():
    assert np.array(row_places(300, 400, 0, 4)) == pytest.approx(
        np.array([(-150, 400), (-50, 400), (50, 400), (150, 400)])
    )


def test_a_positive_bow_brings_the_ends_forward():
    (left, middle, right) = row_places(300, 400, 30, 3)
    assert (left, middle, right) == (pytest.approx((-150, 370)), (0.0, 400.0), pytest.approx((150, 370)))
    assert row_places(300, 400, -30, 3)[0] == pytest.approx((-150, 430))


def test_half_a_circle_is_the_most():
    points = row_places(200, 400, 100, 5)
    assert [math.dist(p, (0, 300)) for p in points] == pytest.approx([100] * 5)
    with pytest.raises(CannotSolve, match=r"a bow of 100.1 mm is more than half of the width, 100 mm"):
        row_places(200, 400, 100.1, 5)


def test_a_crest_may_be_one_point():
    assert set(row_places(0, 400, 0, 3)) == {(0.0, 400), (-0.0, 400)}
    with pytest.raises(CannotSolve):
        row_places(0, 400, 1, 3)


def test_a_spindle_that_lies_down_does_not_rise():
    slope = math.tan(math.radians(MOST_LEAN_DEG))
    assert rises((0.0, 0.0, 1.0))
    assert rises((slope * 0.999, 0.0, 1.0))
    assert not rises((0.0, -slope * 1.001, 1.0))
    assert not rises((0.0, 0.0, 0.0))
    assert not rises((0.0, 0.1, -1.0))
