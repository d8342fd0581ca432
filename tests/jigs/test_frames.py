"""The two frames against rotations by scipy, and the nearest points of two segments against a search."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st
from scipy.optimize import minimize
from scipy.spatial.transform import Rotation

from jigs.frames import SeatFrame, further, minus, nearest_on_segments, unit

coordinate = st.floats(-3000.0, 3000.0)
point = st.tuples(coordinate, coordinate, coordinate)
frame = st.builds(SeatFrame, st.floats(-10.0, 20.0), st.floats(100.0, 1500.0))


@given(frame, point)
def test_the_seat_frame_is_the_floor_frame_turned_about_x_by_minus_the_pitch_and_lifted(seat, p):
    turn = Rotation.from_euler("x", -seat.pitch_deg, degrees=True)
    assert seat.to_floor(p) == pytest.approx(turn.apply(p) + np.array([0.0, 0.0, seat.height_mm]), abs=1e-9)
    assert seat.turn_to_floor(p) == pytest.approx(turn.apply(p), abs=1e-9)
    assert seat.turn_to_seat(p) == pytest.approx(turn.inv().apply(p), abs=1e-9)


@given(frame, point)
def test_the_way_to_the_floor_and_back_changes_nothing(seat, p):
    assert seat.to_seat(seat.to_floor(p)) == pytest.approx(p, abs=1e-9)
    assert seat.turn_to_seat(seat.turn_to_floor(p)) == pytest.approx(p, abs=1e-9)


def test_a_positive_pitch_puts_the_back_lower_and_keeps_the_front_edge_at_its_height():
    seat = SeatFrame(5.0, 450.0)
    assert seat.to_floor((17.0, 0.0, 0.0)) == (17.0, 0.0, 450.0)
    x, y, z = seat.to_floor((0.0, 400.0, 0.0))
    assert (x, y, z) == pytest.approx((0.0, 398.4779, 415.1377), abs=1e-4)


def test_a_level_seat_is_only_lifted():
    assert SeatFrame(0.0, 450.0).to_floor((1.0, 2.0, 3.0)) == (1.0, 2.0, 453.0)


def test_the_null_vector_has_no_direction():
    with pytest.raises(ZeroDivisionError):
        unit((0.0, 0.0, 0.0))


small = st.floats(-100.0, 100.0).map(lambda value: round(value, 3))
corner = st.tuples(small, small, small)


def distance_at(s: float, t: float, p0, p1, q0, q1) -> float:
    return float(np.linalg.norm(np.subtract(further(p0, minus(p1, p0), s), further(q0, minus(q1, q0), t))))


@given(corner, corner, corner, corner)
def test_no_other_points_of_two_segments_are_nearer(p0, p1, q0, q1):
    assume(min(np.linalg.norm(minus(p1, p0)), np.linalg.norm(minus(q1, q0))) >= 1.0)
    s, t, distance = nearest_on_segments(p0, p1, q0, q1)
    assert 0.0 <= s <= 1.0
    assert 0.0 <= t <= 1.0
    assert distance_at(s, t, p0, p1, q0, q1) == pytest.approx(distance, abs=1e-9)
    found = minimize(
        lambda v: distance_at(v[0], v[1], p0, p1, q0, q1) ** 2,
        x0=(0.5, 0.5),
        bounds=((0.0, 1.0), (0.0, 1.0)),
        method="L-BFGS-B",
    )
    assert distance <= np.sqrt(found.fun) + 1e-6


@pytest.mark.parametrize(
    ("q0", "q1", "distance"),
    [
        ((0.0, 30.0, 0.0), (100.0, 30.0, 0.0), 30.0),
        ((140.0, 30.0, 0.0), (240.0, 30.0, 0.0), 50.0),
        ((-40.0, 30.0, 0.0), (-140.0, 30.0, 0.0), 50.0),
        ((50.0, -20.0, 7.0), (50.0, 20.0, 7.0), 7.0),
        ((103.0, 4.0, 0.0), (103.0, 90.0, 0.0), 5.0),
    ],
)
def test_parallel_crossing_and_end_to_end_segments_have_their_plain_distance(q0, q1, distance):
    assert nearest_on_segments((0.0, 0.0, 0.0), (100.0, 0.0, 0.0), q0, q1)[2] == pytest.approx(distance, abs=1e-12)
