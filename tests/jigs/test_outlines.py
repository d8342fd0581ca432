"""Outlines of lines and arcs: exact points, closed-form areas, tangents, and refusals."""

import math

import numpy as np
import pytest
import shapely
from hypothesis import given, settings
from hypothesis import strategies as st

from jigs.outlines import (
    OutlineError,
    at_most,
    d_outline,
    ellipse_outline,
    polygon_outline,
    precise,
    raised,
    rectangle_outline,
    signed_area_mm2,
)
from layout.curves import Arc, Cubic, Line, flatten, mapped, segment_box
from layout.geometry import Affine, union

modest = settings(max_examples=20, deadline=None)
sizes = st.floats(50, 1500)


def bounds(curve):
    return union(segment_box(segment) for segment in curve)


def directions(segment):
    """Unit tangents at both ends, from points very near to them."""
    ends = []
    for a, b in ((0.0, 1e-7), (1 - 1e-7, 1.0)):
        run = np.array(segment.at(b)) - segment.at(a)
        ends.append(run / np.hypot(*run))
    return ends


def kinks_deg(curve):
    """The turn at each joint, in degrees; the last is that at the start."""
    return [
        math.degrees(math.acos(min(1.0, float(directions(one)[1] @ directions(after)[0]))))
        for one, after in zip(curve, [*curve[1:], curve[0]], strict=True)
    ]


def gaps_mm(curve):
    return [math.dist(one.end, after.start) for one, after in zip(curve, [*curve[1:], curve[0]], strict=True)]


def polygon_of(curve, tolerance=0.01):
    return shapely.Polygon(flatten(curve, tolerance))


def assert_plain(curve, width, depth):
    """Closed, counter-clockwise, simple, and of the size that was asked."""
    assert max(gaps_mm(curve)) < 2e-6
    polygon = polygon_of(curve)
    assert polygon.is_valid
    assert polygon.exterior.is_ccw
    assert bounds(curve) == pytest.approx((-width / 2, 0.0, width / 2, depth), abs=1e-9)


def assert_symmetric(curve):
    mirror = polygon_of(mapped(curve, Affine.mirror_x()), 0.01)
    assert polygon_of(curve, 0.01).symmetric_difference(mirror).area < 0.02 * sum(map(abs, bounds(curve)))


# --- round and oval


@modest
@given(sizes, sizes)
def test_an_oval_is_the_ellipse_of_its_size(width, depth):
    curve = ellipse_outline(width, depth)
    assert_plain(curve, width, depth)
    assert signed_area_mm2(curve) == pytest.approx(math.pi * width * depth / 4, rel=1e-12)
    for x, y in flatten(curve, 1.0):
        assert (2 * x / width) ** 2 + (2 * y / depth - 1) ** 2 == pytest.approx(1.0, abs=1e-9)


def test_a_round_seat_starts_at_its_front_and_is_one_true_arc():
    curve = ellipse_outline(350.0, 350.0)
    assert curve == (Arc((0.0, 175.0), (175.0, 0.0), (0.0, 175.0), -90.0, 360.0),)
    assert (curve[0].start, curve[0].end) == ((0.0, 0.0), (0.0, 0.0))


# --- rectangle


@modest
@given(sizes, sizes, st.floats(0, 1))
def test_a_rounded_rectangle_has_the_area_of_its_closed_form(width, depth, part):
    radius = part * min(width, depth) / 2
    curve = rectangle_outline(width, depth, radius, "mm")
    assert_plain(curve, width, depth)
    assert_symmetric(curve)
    assert signed_area_mm2(curve) == pytest.approx(width * depth - (4 - math.pi) * radius**2, rel=1e-9)


@modest
@given(sizes, sizes, st.floats(0.1, 0.9))
def test_a_rounded_rectangle_has_no_kinks(width, depth, part):
    curve = rectangle_outline(width, depth, part * min(width, depth) / 2, "mm")
    assert max(kinks_deg(curve)) < 0.01
    assert sum(isinstance(segment, Arc) for segment in curve) == 4


def test_a_sharp_rectangle_has_its_four_corners():
    curve = rectangle_outline(400.0, 300.0, 0.0, "mm")
    assert [segment.start for segment in curve] == [(-200.0, 0.0), (200.0, 0.0), (200.0, 300.0), (-200.0, 300.0)]
    assert all(isinstance(segment, Line) for segment in curve)


def test_the_corners_of_a_rounded_rectangle_are_arcs_about_the_right_centres():
    arcs = [s for s in rectangle_outline(400.0, 300.0, 30.0, "mm") if isinstance(s, Arc)]
    assert np.allclose([arc.centre for arc in arcs], [(-170, 30), (170, 30), (170, 270), (-170, 270)])
    assert all(math.dist(arc.at(t), arc.centre) == pytest.approx(30.0) for arc in arcs for t in (0.0, 0.3, 1.0))


def test_a_radius_of_half_the_depth_gives_a_stadium():
    curve = rectangle_outline(400.0, 300.0, 150.0, "mm")
    assert signed_area_mm2(curve) == pytest.approx(100 * 300 + math.pi * 150**2)
    assert max(kinks_deg(curve)) < 0.01


def test_a_radius_over_half_of_the_shorter_side_is_refused_with_the_most_that_fits():
    with pytest.raises(OutlineError) as refused:
        rectangle_outline(400.0, 300.0, 151.0, "mm")
    error = refused.value
    assert (error.field, error.given, error.cure) == ("seat.corner_radius", "151 mm", "give at most 150 mm")


# --- D


@st.composite
def d_sizes(draw):
    width, depth = draw(sizes), draw(sizes)
    straight = draw(st.floats(0.05, 0.95)) * depth
    return width, depth, straight, draw(st.floats(0, 1)) * min(width / 2, straight)


@modest
@given(d_sizes())
def test_a_d_is_a_rectangle_less_its_corners_and_half_an_ellipse(size):
    width, depth, straight, radius = size
    curve = d_outline(width, depth, straight, False, radius, "mm")
    assert_plain(curve, width, depth)
    assert_symmetric(curve)
    half_ellipse = math.pi / 2 * width / 2 * (depth - straight)
    area = width * straight + half_ellipse - 2 * (1 - math.pi / 4) * radius**2
    assert signed_area_mm2(curve) == pytest.approx(area, rel=1e-9)


@modest
@given(d_sizes())
def test_a_d_flat_at_the_back_is_the_other_one_turned_over(size):
    width, depth, straight, radius = size
    front = d_outline(width, depth, straight, False, radius, "mm")
    back = d_outline(width, depth, straight, True, radius, "mm")
    assert_plain(back, width, depth)
    flipped = polygon_of(mapped(front, Affine(1.0, 0.0, 0.0, -1.0, 0.0, depth)))
    assert polygon_of(back).symmetric_difference(flipped).area < 0.02 * (width + depth)


def test_the_straight_edge_of_a_d_is_at_the_front_or_at_the_back():
    front = d_outline(400.0, 350.0, None, False, 0.0, "mm")
    back = d_outline(400.0, 350.0, None, True, 0.0, "mm")
    assert Line((-200.0, 0.0), (200.0, 0.0)) in front
    assert Line((200.0, 350.0), (-200.0, 350.0)) in back


def test_a_d_left_to_itself_ends_in_a_half_circle_where_the_depth_allows():
    (arc,) = (s for s in d_outline(400.0, 350.0, None, False, 0.0, "mm") if isinstance(s, Arc))
    assert (arc.centre, arc.u, arc.v) == ((0.0, 150.0), (200.0, 0.0), (0.0, 200.0))
    shallow = d_outline(400.0, 150.0, None, False, 0.0, "mm")
    assert shallow == (Line((-200.0, 0.0), (200.0, 0.0)), Arc((0.0, 0.0), (200.0, 0.0), (0.0, 150.0), 0.0, 180.0))


@modest
@given(sizes, st.floats(0.2, 0.8), st.booleans())
def test_a_rounded_d_has_no_kinks(width, part, flat_back):
    curve = d_outline(width, width, part * width, flat_back, part * 0.4 * width, "mm")
    assert max(kinks_deg(curve)) < 0.01


def test_straight_sides_that_leave_no_curve_are_refused():
    with pytest.raises(OutlineError, match=r"seat\.straight: 300 mm leaves nothing of the seat's depth, 300 mm"):
        d_outline(400.0, 300.0, 300.0, False, 0.0, "mm")


@pytest.mark.parametrize(
    ("straight", "radius", "cure"),
    [(40.0, 41.0, "give at most 40 mm"), (250.0, 201.0, "give at most 200 mm"), (0.0, 5.0, "leave corner_radius out")],
)
def test_a_radius_that_the_straight_sides_cannot_take_is_refused(straight, radius, cure):
    with pytest.raises(OutlineError) as refused:
        d_outline(400.0, 300.0, straight, False, radius, "mm")
    assert (refused.value.field, refused.value.cure) == ("seat.corner_radius", cure)


# --- polygon

SEAT = [(-200.0, 0.0), (200.0, 0.0), (150.0, 350.0), (-150.0, 350.0)]
# A notch in the back, two of whose corners are hollow.
NOTCHED = [(-200.0, 0.0), (200.0, 0.0), (200.0, 300.0), (60.0, 300.0), (60.0, 240.0), (-60.0, 240.0), (-60.0, 300.0),
           (-200.0, 300.0)]  # fmt: skip


@pytest.mark.parametrize("points", [SEAT, SEAT[::-1], [*SEAT, SEAT[0]]])
def test_a_polygon_runs_through_its_points_whichever_way_they_are_given(points):
    curve = polygon_outline(points, 0.0, "mm")
    assert {segment.start for segment in curve} == set(SEAT)
    assert len(curve) == 4
    assert signed_area_mm2(curve) == pytest.approx((400 + 300) / 2 * 350)


@modest
@given(st.floats(1, 29))
def test_rounding_takes_and_gives_what_each_corner_holds(radius):
    curve = polygon_outline(NOTCHED, radius, "mm")
    # Six corners stick out and lose (1 - pi/4) r^2, the two hollow ones gain as much.
    area = shapely.Polygon(NOTCHED).area - 4 * (1 - math.pi / 4) * radius**2
    assert signed_area_mm2(curve) == pytest.approx(area, rel=1e-12)
    assert max(kinks_deg(curve)) < 0.01
    assert max(gaps_mm(curve)) < 1e-9
    assert sum(isinstance(segment, Arc) for segment in curve) == 8


@modest
@given(st.floats(5, 100), st.floats(0.1, 1))
def test_rounding_agrees_with_opening_the_polygon_by_a_disc(radius, part):
    # What a disc of the radius can reach inside a convex polygon is the polygon with its corners rounded.
    most = polygon_most_radius(SEAT)
    radius = min(radius, part * most)
    opened = shapely.Polygon(SEAT).buffer(-radius, join_style="mitre").buffer(radius, quad_segs=256)
    rounded = polygon_of(polygon_outline(SEAT, radius, "mm"), 0.001)
    assert rounded.symmetric_difference(opened).area < 0.7


def polygon_most_radius(points):
    """The most that fits, from half angles by the law of cosines."""
    count = len(points)
    halves = []
    for k in range(count):
        a, b, c = (np.array(points[(k + step) % count]) for step in (-1, 0, 1))
        inner = math.acos(float((a - b) @ (c - b) / np.linalg.norm(a - b) / np.linalg.norm(c - b)))
        halves.append(1 / math.tan(inner / 2))
    sides = [math.dist(points[k], points[(k + 1) % count]) for k in range(count)]
    return min(side / (halves[k] + halves[(k + 1) % count]) for k, side in enumerate(sides))


@pytest.mark.parametrize("points", [SEAT, SEAT[::-1], NOTCHED, NOTCHED[::-1]])
def test_the_largest_radius_that_fits_is_taken_and_more_is_refused_with_it(points):
    most = polygon_most_radius(points)
    assert max(kinks_deg(polygon_outline(points, most, "mm"))) < 0.01
    with pytest.raises(OutlineError) as refused:
        polygon_outline(points, most + 0.01, "mm")
    assert refused.value.field == "seat.corner_radius"
    named = float(refused.value.cure.removeprefix("give at most ").removesuffix(" mm"))
    assert most - 0.1 <= named <= most + 1e-6


@pytest.mark.parametrize("points", [NOTCHED, NOTCHED[::-1]])
def test_the_side_that_a_radius_does_not_fit_is_named_by_its_own_points(points):
    with pytest.raises(OutlineError) as refused:
        polygon_outline(points, 50.0, "mm")
    first, second = (int(part.split("]")[0]) for part in refused.value.rule.split("points[")[1:])
    assert math.dist(points[first], points[second]) == 60.0
    assert "60 mm long" in refused.value.rule


def test_a_point_on_a_straight_side_is_no_corner():
    curve = polygon_outline([(-200.0, 0.0), (0.0, 0.0), (200.0, 0.0), (200.0, 300.0), (-200.0, 300.0)], 20.0, "mm")
    assert sum(isinstance(segment, Arc) for segment in curve) == 4
    assert max(kinks_deg(curve)) < 0.01


@pytest.mark.parametrize(
    ("points", "field", "words"),
    [
        ([(0.0, 0.0), (100.0, 0.0)], "seat.points", "make no outline"),
        ([(0.0, 0.0), (100.0, 0.0), (0.0, 0.0)], "seat.points", "make no outline"),
        ([(0.0, 0.0), (100.0, 0.0), (100.0, 0.0), (0.0, 90.0)], "seat.points[2]", "same as the point before"),
        ([(0.0, 0.0), (200.0, 0.0), (100.0, 0.0), (100.0, 90.0)], "seat.points[1]", "spike"),
    ],
)
def test_points_that_make_no_outline_are_refused(points, field, words):
    with pytest.raises(OutlineError, match=words) as refused:
        polygon_outline(points, 0.0, "mm")
    assert refused.value.field == field


# --- what the others are built of


@modest
@given(st.lists(st.tuples(st.floats(-500, 500), st.floats(-500, 500)), min_size=4, max_size=4))
def test_the_area_under_a_cubic_is_that_of_dense_samples(points):
    cubic = Cubic(*points)
    closed = (cubic, Line(cubic.end, cubic.start))
    t = np.linspace(0, 1, 4001)[:, None]
    a, b, c, d = map(np.array, points)
    x, y = ((1 - t) ** 3 * a + 3 * t * (1 - t) ** 2 * b + 3 * t**2 * (1 - t) * c + t**3 * d).T
    shoelace = float(x @ np.roll(y, -1) - y @ np.roll(x, -1)) / 2
    assert signed_area_mm2(closed) == pytest.approx(shoelace, abs=0.2)


@modest
@given(st.floats(-360, 360).filter(lambda a: abs(a) > 1), st.floats(0, 360), st.floats(5, 400), st.floats(5, 400))
def test_the_area_cut_off_by_a_chord_is_that_of_dense_samples(sweep, start, a, b):
    turn = Affine.turn(31.0)
    arc = Arc((70.0, -20.0), turn.vector((a, 0.0)), turn.vector((0.0, b)), start, sweep)
    points = np.array([arc.at(k / 4000) for k in range(4001)])
    x, y = points.T
    shoelace = float(x @ np.roll(y, -1) - y @ np.roll(x, -1)) / 2
    assert signed_area_mm2((arc, Line(arc.end, arc.start))) == pytest.approx(shoelace, abs=0.5)


@modest
@given(st.lists(st.tuples(st.floats(-500, 500), st.floats(-500, 500)), min_size=3, max_size=3), st.floats(0, 1))
def test_a_raised_quadratic_passes_the_same_points(points, t):
    a, b, c = map(np.array, points)
    assert raised(*points).at(t) == pytest.approx(tuple((1 - t) ** 2 * a + 2 * t * (1 - t) * b + t * t * c), abs=1e-9)


@modest
@given(st.floats(0.2, 900), st.sampled_from([("mm", 1.0), ("in", 25.4)]))
def test_at_most_never_names_more_than_fits(size, units):
    unit, mm_per_unit = units
    words = at_most(size, unit).removesuffix(f" {unit}").split()
    named = sum(float(n) / float(d or 1) for n, _, d in (word.partition("/") for word in words)) * mm_per_unit
    assert size - 0.8 < named <= size + 1e-6


def test_precise_lengths_do_not_round_small_gaps_to_nothing():
    assert precise(0.15, "mm") == "0.15 mm"
    assert precise(0.15, "in") == "0.005906 in"


def test_the_error_reads_as_a_sentence_with_its_place():
    error = OutlineError("seat.path", '"x"', "is not SVG path data", "begin with M")
    assert str(error) == 'seat.path: "x" is not SVG path data; begin with M'
    assert str(OutlineError("seat", "it", "is bad")) == "seat: it is bad"
    assert isinstance(error, ValueError)
