"""Seats of every shape from the spec to a blank, and what a blank answers, against shapely and closed forms."""

import math

import numpy as np
import pytest
import shapely
from hypothesis import given, settings
from hypothesis import strategies as st

from jigs import seats
from jigs.outlines import signed_area_mm2
from jigs.seats import EDGE_TOLERANCE_MM, Blank, OutlineError, outline
from jigs.spec import DSeat, OvalSeat, PathSeat, PolygonSeat, RectangleSeat, RoundSeat, ShieldSeat
from layout.curves import Line, ellipse_curve, flatten, mapped
from layout.geometry import Affine

KINDS = {"round": RoundSeat, "oval": OvalSeat, "rectangle": RectangleSeat, "d": DSeat, "shield": ShieldSeat,
         "polygon": PolygonSeat, "path": PathSeat}  # fmt: skip
# A kidney: hollow at the front middle, of cubics and an arc.
KIDNEY = (
    "M -150 0 C -110 0 -60 40 0 40 C 60 40 110 0 150 0 C 240 0 240 300 150 320 "
    "A 600 600 0 0 1 -150 320 C -240 300 -240 0 -150 0 Z"
)
NOTCHED = [[-200, 0], [200, 0], [200, 300], [60, 300], [60, 240], [-60, 240], [-60, 300], [-200, 300]]
EXAMPLES = {
    "round": {"diameter": 350},
    "oval": {"width": 400, "depth": 300},
    "rectangle": {"width": 400, "depth": 300, "corner_radius": 40},
    "d": {"width": 420, "depth": 360, "corner_radius": 25},
    "shield": {"width": 430, "depth": 400, "back_width": 300, "corner_radius": 30},
    "polygon": {"points": NOTCHED, "corner_radius": 12},
    "path": {"path": KIDNEY},
}


def seat(shape, units="mm", **keys):
    sizes = {"thickness": 45, "height": 450} if units == "mm" else {"thickness": 1.75, "height": 18}
    return KINDS[shape].model_validate({"shape": shape, **sizes, **keys}, context={"units": units})


BLANKS = {shape: Blank(outline(seat(shape, **keys))) for shape, keys in EXAMPLES.items()}
FINE = {shape: shapely.Polygon(flatten(blank.curve, 0.0005)) for shape, blank in BLANKS.items()}
every_shape = pytest.mark.parametrize("shape", EXAMPLES)
spot = st.tuples(st.floats(-250, 250), st.floats(-50, 450))
bearing = st.floats(-360, 360)
modest = settings(max_examples=30, deadline=None)


def refused(shape, units="mm", **keys):
    with pytest.raises(OutlineError) as caught:
        outline(seat(shape, units, **keys), units)
    return caught.value


# --- the outline of each shape


@every_shape
def test_every_outline_is_closed_plain_and_counter_clockwise_from_the_front_edge(shape):
    curve = BLANKS[shape].curve
    for one, after in zip(curve, [*curve[1:], curve[0]], strict=True):
        assert math.dist(one.end, after.start) < 2e-6
    assert FINE[shape].is_valid
    assert FINE[shape].exterior.is_ccw
    assert BLANKS[shape].bounds.y0 == pytest.approx(0.0, abs=1e-9)


@pytest.mark.parametrize(
    ("shape", "width", "depth"),
    [("round", 350, 350), ("oval", 400, 300), ("rectangle", 400, 300), ("d", 420, 360), ("shield", 430, 400),
     ("polygon", 400, 300)],
)  # fmt: skip
def test_an_outline_is_centred_and_as_large_as_the_spec_says(shape, width, depth):
    assert BLANKS[shape].bounds == pytest.approx((-width / 2, 0, width / 2, depth), abs=1e-9)
    assert BLANKS[shape].middle_y_mm == pytest.approx(depth / 2)


def test_a_d_lies_with_its_flat_edge_where_the_spec_says():
    for flat, y in (("front", 0.0), ("back", 360.0)):
        curve = outline(seat("d", width=420, depth=360, straight=150, flat=flat))
        assert [s for s in curve if isinstance(s, Line) and s.start[1] == s.end[1] == y]


def test_a_shield_takes_its_bow_and_back_width_from_the_spec():
    curve = outline(seat("shield", width=430, depth=400, back_width=310, front_bow=20))
    points = [segment.start for segment in curve]
    assert any(p == pytest.approx((-155.0, p[1])) and p[1] > 300 for p in points)
    assert min(abs(p[1] - 20.0) for p in points) < 1e-9


def test_an_outline_in_inches_is_the_same_in_millimetres():
    inches = outline(seat("oval", "in", width=16, depth="11 3/4"), "in")
    assert Blank(inches).bounds == pytest.approx((-203.2, 0, 203.2, 298.45))
    path = outline(seat("path", "in", path="M-8 0 8 0 6 14-6 14z"), "in")
    assert Blank(path).bounds == pytest.approx((-203.2, 0, 203.2, 355.6))


# --- what no outline may be


@pytest.mark.parametrize("radius", [0, 5])
def test_a_polygon_that_crosses_itself_is_refused_with_the_place(radius):
    error = refused("polygon", points=[[0, 0], [100, 100], [100, 0], [0, 100]], corner_radius=radius)
    assert (error.field, error.given) == ("seat.points", "the outline")
    assert error.rule == "crosses or touches itself near [50 mm, 50 mm]"


def test_a_path_that_crosses_itself_is_refused():
    error = refused("path", path="M -100 0 C 400 300 -400 300 100 0 Z")
    assert error.field == "seat.path"
    assert error.rule.startswith("crosses or touches itself near [0 mm, ")


def test_an_outline_with_no_area_is_refused():
    assert refused("path", path="M0 0L100 100z").field == "seat.path"
    assert refused("path", path="M0 0L100 100 200 0 100 100z").field == "seat.path"


@pytest.mark.parametrize(
    ("path", "words"),
    [
        ("M0 0H49V200H0z", "an outline 49 mm wide is not between 50 mm and 6000 mm"),
        ("M0 0H200V49H0z", "an outline 49 mm deep is not between"),
        ("M-3001 0H3001V200H-3001z", "an outline 6002 mm wide is not between"),
        ("M0 0H200V6001H0z", "an outline 6001 mm deep is not between"),
    ],
)
def test_an_outline_too_small_or_too_large_is_refused(path, words):
    assert words in str(refused("path", path=path))


def test_outlines_of_the_smallest_and_largest_size_are_taken():
    assert Blank(outline(seat("path", path="M0 0H50V50H0z"))).bounds.width == 50
    assert Blank(outline(seat("path", path="M-3000 0H3000V6000H-3000z"))).bounds.height == 6000


@pytest.mark.parametrize(
    ("y", "move"), [(12.5, "move it 12.5 mm to the front"), (-30, "move it 30 mm to the back"), (0.11, "move it 0.11")]
)
@pytest.mark.parametrize("shape", ["path", "polygon"])
def test_an_outline_that_does_not_begin_at_the_front_edge_is_refused_with_the_move(shape, y, move):
    points = [[-100, y], [100, y], [100, y + 200], [-100, y + 200]]
    data = {"points": points} if shape == "polygon" else {"path": "M" + " ".join(f"{a} {b}" for a, b in points) + "z"}
    error = refused(shape, **data)
    assert error.field == {"path": "seat.path", "polygon": "seat.points"}[shape]
    assert error.rule == "is not on the front edge, y = 0"
    assert move in error.cure


def test_a_tenth_of_a_millimetre_at_the_front_edge_is_let_pass_and_not_moved():
    curve = outline(seat("path", path="M0 0.09H200V100H0z"))
    assert Blank(curve).bounds.y0 == 0.09


def test_a_tip_at_the_front_that_rounding_takes_off_the_edge_is_refused():
    error = refused("polygon", points=[[0, 0], [150, 200], [-150, 200]], corner_radius=30)
    tip = 30 * (1 / math.sin(math.atan2(150, 200)) - 1)
    assert f"{tip:.4g} mm to the front" in error.cure


def test_messages_speak_in_the_makers_units():
    error = refused("d", "in", width=16, depth=12, straight=2, corner_radius=3)
    assert error.given == "3 in"
    assert error.cure == "give at most 2 in"


def test_an_outline_of_too_many_parts_is_refused():
    steps = "".join(f"l1 {'1' if k % 2 else '-1'}" for k in range(2001))
    error = refused("path", path=f"M-1000 2{steps}V200H-1000z")
    assert (error.field, error.rule) == ("seat.path", "has more than 2000")


def test_curves_that_run_wild_are_refused_in_good_time():
    wild = "".join("c90000 90000-90000 90000 1 0" for _ in range(400))
    assert refused("path", path=f"M-200 0{wild}V300H-200z").field == "seat.path"


def test_what_the_winding_limit_stops_would_take_long(monkeypatch):
    monkeypatch.setattr(seats, "MOST_CHORDS", 100)
    assert refused("oval", width=400, depth=300).rule == "is too long and winding to look over"


def test_an_arc_that_closes_the_outline_a_rounding_error_late_does_not_cross_itself():
    for k in range(1, 60):
        r = 90 + k / 3
        circle = f"M0 0A{r} {r} {k} 0 1 0 {2 * r}A{r} {r} {k} 0 1 0 0z"
        assert Blank(outline(seat("path", path=circle))).polygon.is_valid


# --- the blank


@every_shape
def test_the_area_is_that_of_a_fine_flattening(shape):
    assert BLANKS[shape].area_mm2 == pytest.approx(FINE[shape].area, abs=2.0)
    assert BLANKS[shape].polygon.area == pytest.approx(FINE[shape].area, abs=20.0)


def test_areas_have_their_closed_forms():
    assert BLANKS["round"].area_mm2 == pytest.approx(math.pi * 175**2)
    assert BLANKS["oval"].area_mm2 == pytest.approx(math.pi * 200 * 150)
    assert BLANKS["rectangle"].area_mm2 == pytest.approx(400 * 300 - (4 - math.pi) * 40**2)
    assert BLANKS["polygon"].area_mm2 == pytest.approx(400 * 300 - 120 * 60 - (4 - math.pi) * 12**2)


@every_shape
def test_the_bounds_are_those_of_a_fine_flattening(shape):
    assert BLANKS[shape].bounds == pytest.approx(FINE[shape].bounds, abs=0.001)


@modest
@given(st.sampled_from(list(EXAMPLES)), spot)
def test_distances_to_the_edge_agree_with_a_finer_flattening(shape, point):
    blank, fine = BLANKS[shape], FINE[shape]
    distance = fine.exterior.distance(shapely.Point(point))
    signed = distance if fine.covers(shapely.Point(point)) else -distance
    assert blank.edge_distance_mm(point) == pytest.approx(signed, abs=EDGE_TOLERANCE_MM + 0.001)
    if distance > EDGE_TOLERANCE_MM + 0.001:
        assert blank.holds(point) == (signed > 0)


@modest
@given(spot)
def test_the_distance_to_a_round_seats_edge_is_its_closed_form(point):
    expected = 175.0 - math.dist(point, (0.0, 175.0))
    assert BLANKS["round"].edge_distance_mm(point) == pytest.approx(expected, abs=EDGE_TOLERANCE_MM)


def test_a_sharp_rectangle_holds_its_edge_and_nothing_beyond():
    blank = Blank(outline(seat("rectangle", width=400, depth=300)))
    assert blank.holds((200.0, 100.0))
    assert not blank.holds((200.0001, 100.0))
    assert blank.edge_distance_mm((190.0, 100.0)) == pytest.approx(10.0)
    assert blank.edge_distance_mm((203.0, -4.0)) == pytest.approx(-5.0)


# --- where lines cross the outline


def crossings_by_shapely(polygon, point, bearing_deg):
    """Distances along the line of the ends of what lies inside."""
    direction = np.array([math.cos(math.radians(bearing_deg)), math.sin(math.radians(bearing_deg))])
    line = shapely.LineString([np.array(point) - 2000 * direction, np.array(point) + 2000 * direction])
    inside = line.intersection(polygon)
    parts = [part for part in getattr(inside, "geoms", [inside]) if part.length > 0.05]
    return sorted(float((np.array(p) - point) @ direction) for part in parts for p in part.coords)


@modest
@given(st.sampled_from(list(EXAMPLES)), spot, bearing)
def test_crossings_lie_on_the_true_curve_and_come_in_pairs(shape, point, angle):
    found = BLANKS[shape].line_crossings(point, angle)
    assert list(found) == sorted(found)
    assert len(found) % 2 == 0
    for distance in found:
        c, s = math.cos(math.radians(angle)), math.sin(math.radians(angle))
        where = shapely.Point(point[0] + distance * c, point[1] + distance * s)
        assert FINE[shape].exterior.distance(where) < 0.0006


# Places and bearings off the round numbers, where no line lies in a side or touches a corner: there shapely is inexact.
odd_spot = st.tuples(
    st.integers(-1700, 1700).map(lambda k: k / 7 + 0.013), st.integers(-350, 3100).map(lambda k: k / 7 + 0.017)
)
odd_bearing = st.integers(-1800, 1800).map(lambda k: k / 5 + 0.037)


@modest
@given(st.sampled_from(list(EXAMPLES)), odd_spot, odd_bearing)
def test_crossings_are_those_of_a_fine_flattening(shape, point, angle):
    expected = crossings_by_shapely(FINE[shape], point, angle)
    found = BLANKS[shape].line_crossings(point, angle)
    # Stretches inside shorter than 0.05 mm may be seen by one and not by the other.
    stretches = [pair for pair in zip(found[::2], found[1::2], strict=True) if pair[1] - pair[0] > 0.1]
    theirs = [pair for pair in zip(expected[::2], expected[1::2], strict=True) if pair[1] - pair[0] > 0.1]
    assert len(stretches) == len(theirs)
    for ours, other in zip(stretches, theirs, strict=True):
        # A line that grazes the edge multiplies the flattening's error.
        assert ours == pytest.approx(other, abs=0.5)


@modest
@given(bearing, st.floats(-170, 170))
def test_crossings_of_a_circle_are_exact(angle, offset):
    # A line past the centre at the offset cuts a chord of 2 sqrt(r^2 - offset^2).
    foot = Affine.turn(angle).then(Affine.move(0.0, 175.0)).point((0.0, offset))
    half = math.sqrt(175.0**2 - offset**2)
    assert BLANKS["round"].line_crossings(foot, angle) == pytest.approx((-half, half), abs=1e-9)


@modest
@given(st.floats(0.02, 0.98), st.floats(0.02, 0.98))
def test_distances_are_signed_along_the_bearing(a, b):
    x, y = -200 + 400 * a, 300 * b
    blank = Blank(outline(seat("oval", width=400, depth=300)))
    inside = (2 * x / 400) ** 2 + (2 * y / 300 - 1) ** 2 < 1
    right, left = blank.line_crossings((x, y), 0.0), blank.line_crossings((x, y), 180.0)
    reach = 200 * math.sqrt(1 - (2 * y / 300 - 1) ** 2)
    assert right == pytest.approx((-reach - x, reach - x), abs=1e-9)
    assert left == pytest.approx((x - reach, x + reach), abs=1e-9)
    assert inside == (right[0] < 0 < right[1])


@pytest.mark.parametrize("angle", [0.0, 45.0, 90.0, 135.0, 225.0, -90.0])
def test_crossings_on_the_joints_of_the_outline_are_counted_once(angle):
    blank = Blank(outline(seat("rectangle", width=400, depth=400)))
    reach = 200.0 * (math.sqrt(2) if angle % 90 else 1)
    assert blank.line_crossings((0.0, 200.0), angle) == pytest.approx((-reach, reach), abs=1e-9)


def test_crossings_on_the_joint_of_an_arc_and_its_side_are_counted_once():
    blank = BLANKS["rectangle"]
    for y in (40.0, 260.0):
        assert blank.line_crossings((10.0, y), 0.0) == pytest.approx((-210.0, 190.0), abs=1e-9)
        assert blank.line_crossings((10.0, y), 180.0) == pytest.approx((-190.0, 210.0), abs=1e-9)


def test_the_centre_line_crosses_each_symmetric_seat_at_its_front_and_back():
    for shape in ("round", "oval", "rectangle", "d", "shield"):
        blank = BLANKS[shape]
        assert blank.line_crossings((0.0, 100.0), 90.0) == pytest.approx((-100.0, blank.bounds.y1 - 100.0), abs=1e-9)


def test_a_line_across_a_hollow_crosses_four_times():
    assert BLANKS["polygon"].line_crossings((0.0, 270.0), 0.0) == pytest.approx((-200, -60, 60, 200))
    assert len(BLANKS["path"].line_crossings((0.0, 20.0), 0.0)) == 4


def test_a_line_that_misses_or_only_touches_does_not_cross():
    assert BLANKS["round"].line_crossings((0.0, -0.001), 0.0) == ()
    assert BLANKS["round"].line_crossings((0.0, 0.0), 0.0) == ()
    corner = Blank(outline(seat("rectangle", width=400, depth=400)))
    assert corner.line_crossings((200.0, 0.0), 45.0) == ()


def test_a_side_that_lies_in_the_line_gives_its_two_ends():
    blank = Blank(outline(seat("polygon", points=NOTCHED)))
    assert blank.line_crossings((0.0, 0.0), 0.0) == pytest.approx((-200.0, 200.0))
    assert blank.line_crossings((60.0, 0.0), 90.0) == pytest.approx((0.0, 240.0, 300.0), abs=1e-9)


# --- an ellipse on the blank

mortise = st.tuples(spot, st.floats(5, 40), st.floats(5, 40), bearing)


@modest
@given(st.sampled_from(list(EXAMPLES)), mortise)
def test_the_margin_of_an_ellipse_is_that_of_its_dense_edge(shape, ellipse):
    centre, along, across, angle = ellipse
    ring = np.array(flatten(ellipse_curve(centre, along, across, angle), 0.0005))
    spots = shapely.points(ring)
    distance = shapely.distance(FINE[shape].exterior, spots)
    signed = np.where(shapely.covers(FINE[shape], spots), distance, -distance)
    margin = BLANKS[shape].ellipse_margin_mm(centre, along, across, angle)
    assert margin == pytest.approx(float(signed.min()), abs=EDGE_TOLERANCE_MM + 4e-5 * 40 + 0.3)


@modest
@given(st.floats(0, 360), st.floats(0, 250), st.floats(5, 40))
def test_the_margin_of_a_circle_on_a_round_seat_is_its_closed_form(angle, out, r):
    centre = Affine.turn(angle).then(Affine.move(0.0, 175.0)).point((out, 0.0))
    expected = 175.0 - out - r
    assert BLANKS["round"].ellipse_margin_mm(centre, r, r, 17.0) == pytest.approx(expected, abs=0.012)


def test_the_margin_knows_which_way_the_ellipse_lies():
    blank = Blank(outline(seat("rectangle", width=400, depth=300)))
    assert blank.ellipse_margin_mm((170.0, 150.0), 20.0, 12.0, 0.0) == pytest.approx(10.0, abs=0.001)
    assert blank.ellipse_margin_mm((170.0, 150.0), 20.0, 12.0, 90.0) == pytest.approx(18.0, abs=0.001)
    assert blank.ellipse_margin_mm((195.0, 150.0), 20.0, 12.0, 0.0) == pytest.approx(-15.0, abs=0.001)


def test_a_notch_narrower_than_the_steps_round_the_ellipse_is_seen():
    # A saw kerf of 0.02 mm reaches 5 mm into the circle between two corners of its ring.
    kerf = [[-200, 0], [99.9, 0], [99.91, 80], [99.92, 0], [200, 0], [200, 300], [-200, 300]]
    blank = Blank(outline(seat("polygon", points=kerf)))
    assert blank.ellipse_margin_mm((99.91, 60.0), 30.0, 30.0, 0.25) < 0.0
    assert blank.ellipse_margin_mm((-100.0, 60.0), 30.0, 30.0, 0.25) == pytest.approx(30.0, abs=0.01)


def test_an_ellipse_off_the_blank_is_off_by_its_far_side():
    blank = Blank(outline(seat("rectangle", width=400, depth=300)))
    assert blank.ellipse_margin_mm((260.0, 150.0), 20.0, 20.0, 0.0) == pytest.approx(-80.0, abs=0.001)


def test_a_mirrored_seat_has_the_mirrored_answers():
    blank = BLANKS["path"]
    mirrored = Blank(tuple(s.reverse() for s in reversed(mapped(blank.curve, Affine.mirror_x()))))
    assert signed_area_mm2(mirrored.curve) == pytest.approx(blank.area_mm2)
    here, there = blank.line_crossings((60.0, 100.0), 30.0), mirrored.line_crossings((-60.0, 100.0), 150.0)
    assert here == pytest.approx(there, abs=1e-9)
