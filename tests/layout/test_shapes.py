"""Composite shapes, measured on what they draw."""

import math

import numpy as np
import pytest
import shapely
from hypothesis import given, settings
from hypothesis import strategies as st

from layout.curves import Line, circle_curve, ellipse_curve, flatten
from layout.drawing import Drawing, Fill, Role, Stroke, Text
from layout.geometry import Box, bearing_deg
from layout.lettering import text_width_mm
from layout.operations import bounds, text_corners
from layout.shapes import (
    LINE_PITCH,
    arrow,
    arrow_head,
    box_outline,
    chain,
    circle,
    cross,
    line,
    measure,
    paragraph,
    polygon_curve,
    polyline,
    upright,
)

modest = settings(max_examples=40, deadline=None)
spot = st.tuples(st.floats(-500, 500), st.floats(-500, 500))
angle = st.floats(-360, 360)


def toward(angle_deg):
    return np.array([math.cos(math.radians(angle_deg)), math.sin(math.radians(angle_deg))])


def test_lines_go_from_point_to_point():
    points = [(0.0, 0.0), (10.0, 0.0), (10.0, 5.0)]
    assert line(points[0], points[1], Role.FOLD) == Stroke((Line((0.0, 0.0), (10.0, 0.0)),), Role.FOLD)
    assert chain(points) == (Line(points[0], points[1]), Line(points[1], points[2]))
    assert polygon_curve(points) == (*chain(points), Line(points[2], points[0]))
    assert polyline(points, Role.CUT) == Stroke(chain(points), Role.CUT)
    assert polyline(points, Role.CUT, closed=True) == Stroke(polygon_curve(points), Role.CUT, closed=True)


def test_a_box_is_drawn_round_its_corners():
    stroke = box_outline(Box(1.0, 2.0, 4.0, 8.0), Role.FURNITURE)
    assert stroke.closed
    assert bounds(Drawing((stroke,))) == Box(1.0, 2.0, 4.0, 8.0)
    assert shapely.Polygon(flatten(stroke.curve, 0.1)).area == 18.0


@modest
@given(spot, st.floats(0.5, 500))
def test_a_circle_is_a_radius_from_its_centre_and_runs_counter_clockwise(centre, r):
    stroke = circle(centre, r, Role.CUT)
    points = np.array(flatten(stroke.curve, r / 100))
    assert np.hypot(*(points - centre).T) == pytest.approx(r)
    assert stroke.closed
    assert points[0] == pytest.approx(points[-1])
    assert points[0] == pytest.approx((centre[0] + r, centre[1]))
    assert shapely.LinearRing(points).is_ccw


@modest
@given(spot, st.floats(1, 300), st.floats(1, 300), angle)
def test_an_ellipse_has_its_half_axes_along_and_across_its_angle(centre, a, b, tilt):
    (arc,) = ellipse_curve(centre, a, b, tilt)
    ends = [np.array(arc.at(t)) - centre for t in (0.0, 0.25, 0.5, 0.75)]
    expected = [a * toward(tilt), b * toward(tilt + 90), -a * toward(tilt), -b * toward(tilt + 90)]
    assert np.allclose(ends, expected, atol=1e-9)
    # Every point has the same sum of distances from the two foci.
    focus = math.sqrt(abs(a * a - b * b)) * toward(tilt if a >= b else tilt + 90)
    for t in np.linspace(0, 1, 13):
        p = np.array(arc.at(t)) - centre
        assert np.hypot(*(p - focus)) + np.hypot(*(p + focus)) == pytest.approx(2 * max(a, b))


@modest
@given(spot, st.floats(1, 50), angle)
def test_a_cross_has_two_square_lines_through_its_centre(centre, reach, tilt):
    first, second = (stroke.curve[0] for stroke in cross(centre, reach, Role.SET_OUT, tilt).items)
    for drawn, direction in ((first, toward(tilt)), (second, toward(tilt + 90))):
        assert np.allclose(drawn.start, np.array(centre) - reach * direction, atol=1e-9)
        assert np.allclose(drawn.end, np.array(centre) + reach * direction, atol=1e-9)


@modest
@given(spot, angle, st.floats(1, 10))
def test_an_arrow_head_has_its_tip_on_the_point_and_its_length(tip, direction, size):
    head = arrow_head(tip, direction, size, Role.NOTE)
    corners = np.array(flatten(head.curve, 0.01))[:3] - tip
    assert np.allclose(corners[0], 0)
    # Both other corners lie the length behind the tip, to the same distance left and right.
    assert corners[1:] @ toward(direction) == pytest.approx(-size)
    wing = math.tan(math.radians(15)) * size
    assert corners[1:] @ toward(direction + 90) == pytest.approx([wing, -wing])


@modest
@given(spot, spot.filter(lambda p: math.hypot(*p) > 20))
def test_an_arrow_points_from_start_to_end(start, run):
    end = (start[0] + run[0], start[1] + run[1])
    stroke, head = arrow(start, end, 4.0, Role.SET_OUT).items
    assert isinstance(head, Fill)
    assert head.curve[0].start == end
    (shaft,) = stroke.curve
    assert shaft.start == start
    assert math.dist(shaft.end, end) == pytest.approx(2.0)
    shaft_run = (shaft.end[0] - start[0], shaft.end[1] - start[1])
    difference = (bearing_deg(shaft_run) - bearing_deg(run) + 180) % 360 - 180
    assert difference == pytest.approx(0, abs=1e-6)


@modest
@given(spot, spot.filter(lambda p: math.hypot(*p) > 30), st.floats(-40, 40))
def test_a_dimension_line_is_as_long_as_what_it_measures_and_beside_it(start, run, offset):
    end = (start[0] + run[0], start[1] + run[1])
    drawn = measure(start, end, "x", 3.5, Role.NOTE, offset)
    stroke, tail, head, text = drawn.items
    (dimension,) = stroke.curve
    left = np.array([-run[1], run[0]]) / math.hypot(*run)
    assert np.allclose(dimension.start, np.array(start) + offset * left, atol=1e-9)
    assert np.allclose(dimension.end, np.array(end) + offset * left, atol=1e-9)
    assert tail.curve[0].start == dimension.start
    assert head.curve[0].start == dimension.end
    # The middle of the capitals is on the middle of the line.
    middle = np.array(text.at) + toward(text.angle_deg + 90) * 3.5 / 2
    assert np.allclose(middle, (np.array(dimension.start) + dimension.end) / 2, atol=1e-9)
    assert text.over


@modest
@given(angle)
def test_lettering_along_a_line_is_never_upside_down(direction):
    reading = upright(direction)
    assert -90 < reading <= 90
    assert math.sin(math.radians(reading - direction)) == pytest.approx(0, abs=1e-9)


@pytest.mark.parametrize(
    ("direction", "reading"), [(0, 0), (90, 90), (-90, 90), (180, 0), (270, 90), (135, -45), (-135, 45), (91, -89)]
)
def test_lettering_up_the_page_reads_from_the_right(direction, reading):
    assert upright(direction) == reading


@modest
@given(st.text(st.sampled_from("abc de fgh "), max_size=120), st.floats(30, 150), st.sampled_from([2.5, 3.5, 5.0]))
def test_a_paragraph_stays_in_its_column_and_says_where_it_ends(text, width, height):
    drawn, below = paragraph((20.0, 250.0), text, height, width)
    assert all(isinstance(item, Text) for item in drawn.items)
    lines = [item.text for item in drawn.items]
    assert "".join(lines).replace(" ", "") == text.replace(" ", "")
    if all(text_width_mm(word, height) <= width for word in text.split()):
        assert " ".join(lines).split() == text.split()
    feet = [item.at[1] for item in drawn.items]
    assert feet[0] == pytest.approx(250.0 - height)
    assert np.diff(feet) == pytest.approx(-LINE_PITCH * height)
    assert below == pytest.approx(250.0 - len(feet) * LINE_PITCH * height)
    for item in drawn.items:
        assert item.at[0] == 20.0
        assert text_width_mm(item.text, height) <= width + 1e-9
        assert min(y for _, y in text_corners(item)) >= below - 1e-9


def test_a_paragraph_keeps_its_weight_and_role():
    drawn, _ = paragraph((0.0, 0.0), "Clamp the work", 3.5, 100.0, bold=True, role=Role.FURNITURE)
    assert drawn.items == (Text((0.0, -3.5), "Clamp the work", 3.5, Role.FURNITURE, bold=True),)


def test_a_full_circle_is_one_segment():
    assert len(circle_curve((0.0, 0.0), 5.0)) == 1
