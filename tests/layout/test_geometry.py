"""Points, affine maps and boxes, against numpy and closed forms."""

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from layout.geometry import Affine, Box, along, bearing_deg, box_of, cos_sin, union
from tests.layout.planes import angle, maps, modest, spot


def matrix(m):
    return np.array([[m.a, m.c, m.e], [m.b, m.d, m.f], [0, 0, 1]])


# --- maps


@modest
@given(maps(), maps(), spot)
def test_one_map_then_another_is_their_matrix_product(first, second, p):
    product = matrix(second) @ matrix(first)
    assert np.allclose(matrix(first.then(second)), product, atol=1e-9)
    assert first.then(second).point(p) == pytest.approx(tuple((product @ [*p, 1])[:2]), abs=1e-7)


@modest
@given(maps(), spot)
def test_the_inverse_undoes_a_map_on_both_sides(m, p):
    for both in (m.then(m.inverse()), m.inverse().then(m)):
        assert both.point(p) == pytest.approx(p, abs=1e-6)
    assert m.inverse().determinant == pytest.approx(1 / m.determinant, rel=1e-9)


def test_a_map_that_flattens_the_plane_has_no_inverse():
    with pytest.raises(ZeroDivisionError):
        Affine(1, 1, 1, 1, 0, 0).inverse()


@modest
@given(maps(), maps())
def test_the_determinant_is_numpys_and_multiplies(first, second):
    assert first.determinant == pytest.approx(float(np.linalg.det(matrix(first))), rel=1e-9)
    assert first.then(second).determinant == pytest.approx(first.determinant * second.determinant, rel=1e-8)


@modest
@given(maps(), spot, spot)
def test_a_direction_maps_like_the_difference_of_two_points(m, p, q):
    (px, py), (qx, qy) = m.point(p), m.point(q)
    assert m.vector((q[0] - p[0], q[1] - p[1])) == pytest.approx((qx - px, qy - py), abs=1e-7)


@modest
@given(maps(), maps(), maps())
def test_the_order_of_brackets_does_not_matter(a, b, c):
    assert a.then(b).then(c) == pytest.approx(a.then(b.then(c)), rel=1e-7, abs=1e-6)


def test_the_identity_moves_nothing_and_maps_keep_pdfs_order_of_numbers():
    assert Affine.identity().point((3.5, -2.0)) == (3.5, -2.0)
    assert Affine(1, 2, 3, 4, 5, 6).point((10, 100)) == (1 * 10 + 3 * 100 + 5, 2 * 10 + 4 * 100 + 6)


@pytest.mark.parametrize(
    ("quarters", "image"), [(0, (3.7, 1.3)), (1, (-1.3, 3.7)), (2, (-3.7, -1.3)), (3, (1.3, -3.7)), (4, (3.7, 1.3))]
)
@pytest.mark.parametrize("rounds", [-2, 0, 1])
def test_quarter_turns_are_exact_and_counter_clockwise(quarters, image, rounds):
    assert Affine.turn(90.0 * quarters + 360.0 * rounds).point((3.7, 1.3)) == image


@modest
@given(angle, spot)
def test_a_turn_keeps_lengths_and_adds_to_the_bearing(turn, p):
    moved = Affine.turn(turn).point(p)
    assert math.hypot(*moved) == pytest.approx(math.hypot(*p), abs=1e-9)
    if math.hypot(*p) > 1:
        difference = (bearing_deg(moved) - bearing_deg(p) - turn + 180) % 360 - 180
        assert difference == pytest.approx(0, abs=1e-9)


def test_mirroring_turns_right_into_left_and_nothing_else():
    assert Affine.mirror_x().point((125.0, 70.0)) == (-125.0, 70.0)
    assert Affine.mirror_x().determinant < 0 < Affine.turn(33.0).determinant


def test_a_scale_is_even():
    assert Affine.scale(0.25).point((8.0, -4.0)) == (2.0, -1.0)


# --- boxes


def test_a_box_knows_its_size_middle_and_corners():
    box = Box(-10.0, 5.0, 30.0, 25.0)
    assert (box.width, box.height, box.centre) == (40.0, 20.0, (10.0, 15.0))
    assert box.corners() == ((-10.0, 5.0), (30.0, 5.0), (30.0, 25.0), (-10.0, 25.0))
    assert box.grown(2.0) == Box(-12.0, 3.0, 32.0, 27.0)


def test_a_box_holds_its_edge_and_what_is_within_the_slack():
    box = Box(0.0, 0.0, 10.0, 20.0)
    assert box.holds((10.0, 20.0))
    assert not box.holds((10.001, 5.0))
    assert box.holds((10.001, 5.0), 0.01)
    assert not box.holds((5.0, -0.02), 0.01)


def test_boxes_meet_where_they_touch_and_not_where_they_are_apart():
    box = Box(0.0, 0.0, 10.0, 10.0)
    assert box.meets(Box(10.0, 10.0, 20.0, 20.0))
    assert box.meets(Box(4.0, 4.0, 5.0, 5.0))
    assert not box.meets(Box(10.1, 0.0, 20.0, 10.0))
    assert not box.meets(Box(0.0, -5.0, 10.0, -0.1))


@modest
@given(st.lists(spot, min_size=1, max_size=20))
def test_the_box_of_points_is_the_smallest(points):
    low, high = np.array(points).min(axis=0), np.array(points).max(axis=0)
    assert box_of(points) == pytest.approx((*low, *high))
    assert union([box_of([p]) for p in points]) == box_of(points)


def test_no_points_have_no_box():
    with pytest.raises(ValueError, match="values to unpack"):
        box_of([])


def test_a_box_under_a_quarter_turn_is_exact():
    assert Box(1.0, 2.0, 4.0, 8.0).mapped(Affine.turn(90.0)) == Box(-8.0, 1.0, -2.0, 4.0)


# --- directions


def test_bearings_run_counter_clockwise_from_the_right():
    assert [bearing_deg(v) for v in ((1, 0), (0, 1), (-1, 0), (0, -1), (1, 1))] == [0, 90, 180, 270, 45]
    assert bearing_deg((0.0, 0.0)) == 0.0


@pytest.mark.parametrize("dy", [-1e-300, -1e-20, -1e-16, -0.0])
def test_a_bearing_is_never_360(dy):
    assert 0.0 <= bearing_deg((1.0, dy)) < 360.0


@modest
@given(angle)
def test_cosine_and_sine_are_those_of_the_angle(a):
    assert cos_sin(a) == pytest.approx((math.cos(math.radians(a)), math.sin(math.radians(a))), abs=1e-12)


@modest
@given(spot, angle, st.floats(1, 3000))
def test_walking_along_a_bearing_goes_the_distance(start, a, distance):
    end = along(start, a, distance)
    assert math.dist(start, end) == pytest.approx(distance, abs=1e-8)
    walked = bearing_deg((end[0] - start[0], end[1] - start[1]))
    assert math.cos(math.radians(walked - a)) == pytest.approx(1, abs=1e-12)
