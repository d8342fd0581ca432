"""Transform, bounds and clip of drawings, against shapely and by drawing one thing by two routes."""

import math
from itertools import pairwise

import numpy as np
import pytest
import shapely
from hypothesis import given, settings
from hypothesis import strategies as st

from layout.curves import Arc, Cubic, Line, circle_curve, ellipse_curve, flatten
from layout.drawing import Drawing, Fill, Role, Stroke, Text, gather
from layout.geometry import Affine, Box, bearing_deg
from layout.lettering import FALL, RISE, text_width_mm
from layout.operations import (
    FILL_TOLERANCE_MM,
    bounds,
    clip,
    clip_curve,
    polylines,
    primitive_bounds,
    text_corners,
    transform,
)
from layout.shapes import box_outline, circle, line, polygon_curve, polyline

modest = settings(max_examples=40, deadline=None)
mm = st.floats(-200, 200)
spot = st.tuples(mm, mm)
angle = st.floats(-360, 360)
WINDOW = Box(-80.0, -60.0, 70.0, 90.0)


@st.composite
def curves(draw):
    """Chains of lines, Béziers and arcs, each from where the last one ended."""
    at, chain = draw(spot), []
    for kind in draw(st.lists(st.sampled_from(["line", "cubic", "arc"]), min_size=1, max_size=4)):
        if kind == "line":
            segment = Line(at, draw(spot))
        elif kind == "cubic":
            segment = Cubic(at, draw(spot), draw(spot), draw(spot))
        else:
            r, start = draw(st.floats(5, 150)), draw(angle)
            begin = Arc((0.0, 0.0), (r, 0.0), (0.0, r), start, 1.0).start
            segment = Arc((at[0] - begin[0], at[1] - begin[1]), (r, 0.0), (0.0, r), start, draw(st.floats(5, 350)))
        chain.append(segment)
        at = segment.end
    return tuple(chain)


def length(curve, tolerance=0.001):
    return shapely.LineString(flatten(curve, tolerance)).length


def length_inside(curve, box, tolerance=0.001):
    """Chord by chord, since a union of chords would count what is drawn twice once."""
    points = flatten(curve, tolerance)
    chords = shapely.linestrings(list(pairwise(points)))
    return float(shapely.length(shapely.intersection(chords, shapely.box(*box))).sum())


# --- clip


@settings(max_examples=60, deadline=None)
@given(curves())
def test_a_clipped_curve_is_as_long_as_what_lies_in_the_box(curve):
    runs = clip_curve(curve, WINDOW)
    kept = sum(length(run) for run in runs)
    # Both flattenings cut near-grazing stretches a little differently.
    assert kept == pytest.approx(length_inside(curve, WINDOW), abs=0.5, rel=1e-4)


@settings(max_examples=60, deadline=None)
@given(curves())
def test_each_clipped_run_lies_in_the_box_and_hangs_together(curve):
    for run in clip_curve(curve, WINDOW):
        for before, after in pairwise(run):
            assert math.dist(before.end, after.start) < 1e-6
        for segment in run:
            for t in np.linspace(0, 1, 9):
                assert WINDOW.holds(segment.at(t), 1e-4)


@settings(max_examples=40, deadline=None)
@given(curves(), st.integers(-150, 150))
def test_two_halves_of_a_curve_are_together_as_long_as_the_whole(curve, millimetre):
    # A third of a millimetre on, lest a line lie in the seam: both sides keep such a line.
    seam = millimetre + 1 / 3
    left, right = Box(-2000.0, -2000.0, seam, 2000.0), Box(seam, -2000.0, 2000.0, 2000.0)
    halves = sum(length(run) for box in (left, right) for run in clip_curve(curve, box))
    assert halves == pytest.approx(length(curve), abs=0.02)


def test_lines_are_cut_exactly_at_the_edge():
    assert clip_curve((Line((-100.0, 10.0), (100.0, 10.0)),), Box(-40.0, 0.0, 60.0, 20.0)) == [
        (Line((-40.0, 10.0), (60.0, 10.0)),)
    ]


def test_what_lies_wholly_inside_stays_the_same_and_closed():
    whole = Drawing((circle((0.0, 0.0), 20.0, Role.CUT), box_outline(Box(-5.0, -5.0, 5.0, 5.0), Role.HIDDEN)))
    assert clip(whole, Box(-30.0, -30.0, 30.0, 30.0)) == whole


def test_what_lies_outside_is_left_out():
    outside = Drawing((circle((500.0, 0.0), 20.0, Role.CUT), Text((500.0, 0.0), "far", 3.5)))
    assert clip(outside, Box(-30.0, -30.0, 30.0, 30.0)) == Drawing()


def test_a_box_inside_a_circle_holds_nothing_of_its_line():
    assert clip(Drawing((circle((0.0, 0.0), 100.0, Role.CUT),)), Box(-10.0, -10.0, 10.0, 10.0)) == Drawing()


def test_a_circle_cut_by_a_corner_becomes_one_open_arc():
    (kept,) = clip(Drawing((circle((0.0, 0.0), 50.0, Role.CUT),)), Box(0.0, 0.0, 100.0, 100.0)).items
    assert isinstance(kept, Stroke)
    assert not kept.closed
    assert length(kept.curve, 1e-4) == pytest.approx(25 * math.pi, abs=0.01)
    assert (kept.curve[0].start, kept.curve[-1].end) == (pytest.approx((50, 0)), pytest.approx((0, 50)))


def test_a_closed_curve_that_starts_inside_the_box_is_not_parted_at_its_start():
    # The square starts at its lower left corner, which is the only one inside.
    square = polyline([(0.0, 0.0), (50.0, 0.0), (50.0, 50.0), (0.0, 50.0)], Role.CUT, closed=True)
    kept = clip(Drawing((square,)), Box(-10.0, -10.0, 20.0, 20.0)).items
    assert kept == (Stroke((Line((0.0, 20.0), (0.0, 0.0)), Line((0.0, 0.0), (20.0, 0.0))), Role.CUT),)


def test_an_open_curve_that_ends_where_it_starts_stays_in_two_runs():
    chain = Stroke(polygon_curve([(0.0, 0.0), (50.0, 0.0), (50.0, 50.0), (0.0, 50.0)]), Role.CUT)
    assert len(clip(Drawing((chain,)), Box(-10.0, -10.0, 20.0, 20.0)).items) == 2


def test_a_closed_curve_that_starts_outside_keeps_its_runs_in_order():
    square = polyline([(0.0, 0.0), (50.0, 0.0), (50.0, 50.0), (0.0, 50.0)], Role.CUT, closed=True)
    kept = clip(Drawing((square,)), Box(20.0, -10.0, 30.0, 60.0)).items
    assert [item.curve for item in kept] == [
        (Line((20.0, 0.0), (30.0, 0.0)),),
        (Line((30.0, 50.0), (20.0, 50.0)),),
    ]


def test_a_line_in_the_seam_is_kept_on_both_sides():
    edge = line((10.0, 0.0), (10.0, 50.0), Role.CUT)
    for box in (Box(0.0, 0.0, 10.0, 50.0), Box(10.0, 0.0, 20.0, 50.0)):
        assert clip(Drawing((edge,)), box) == Drawing((edge,))


def test_a_line_on_the_edge_of_the_box_is_kept():
    edge = line((0.0, 10.0), (50.0, 10.0), Role.FOLD)
    assert clip(Drawing((edge,)), Box(0.0, 0.0, 50.0, 10.0)) == Drawing((edge,))


@settings(max_examples=40, deadline=None)
@given(spot, st.floats(5, 150), st.floats(5, 150), angle)
def test_a_clipped_solid_shape_has_the_area_that_lies_in_the_box(centre, a, b, tilt):
    curve = ellipse_curve(centre, a, b, tilt)
    expected = shapely.Polygon(flatten(curve, 0.001)).intersection(shapely.box(*WINDOW)).area
    kept = clip(Drawing((Fill(curve, Role.NOTE),)), WINDOW).items
    area = sum(shapely.Polygon(flatten(item.curve, 0.001)).area for item in kept)
    # A rim of the tolerance round the whole ellipse may be lost.
    assert area == pytest.approx(expected, abs=FILL_TOLERANCE_MM * 2 * math.pi * max(a, b) + 1e-6)
    for item in kept:
        assert WINDOW.holds(primitive_bounds(item).corners()[0], 1e-9)
        assert WINDOW.holds(primitive_bounds(item).corners()[2], 1e-9)


def test_a_solid_shape_round_the_box_fills_it():
    (kept,) = clip(Drawing((Fill(circle_curve((0.0, 0.0), 500.0), Role.NOTE),)), WINDOW).items
    assert shapely.Polygon(flatten(kept.curve, 0.01)).symmetric_difference(shapely.box(*WINDOW)).area < 1e-6


def test_lettering_that_shows_at_all_is_kept_whole():
    text = Text((-5.0, 0.0), "half in", 5.0)
    assert clip(Drawing((text,)), Box(0.0, 0.0, 3.0, 3.0)) == Drawing((text,))
    assert clip(Drawing((text,)), Box(100.0, 0.0, 103.0, 3.0)) == Drawing()


# --- bounds


def test_the_bounds_of_a_drawing_hold_curves_and_lettering():
    drawing = Drawing((circle((0.0, 0.0), 10.0, Role.CUT), Text((50.0, 0.0), "H", 10.0)))
    box = bounds(drawing)
    assert box[0] == -10.0
    assert box[1:] == pytest.approx((-10.0, 50.0 + text_width_mm("H", 10.0), 13.5))


def test_an_empty_drawing_has_no_bounds():
    with pytest.raises(ValueError, match="values to unpack"):
        bounds(Drawing())


@settings(max_examples=40, deadline=None)
@given(curves(), angle, spot)
def test_bounds_move_with_the_drawing(curve, turn, shift):
    m = Affine.turn(turn).then(Affine.move(*shift))
    image = transform(Drawing((Stroke(curve, Role.CUT),)), m)
    points = np.array(flatten(image.items[0].curve, 0.001))
    assert bounds(image) == pytest.approx((*points.min(axis=0), *points.max(axis=0)), abs=0.002)


def test_polylines_give_curves_as_points_and_lettering_as_its_patch():
    text = Text((0.0, 0.0), "ab", 5.0)
    flat = polylines(Drawing((line((0.0, 0.0), (3.0, 4.0), Role.CUT), text)), 0.1)
    assert flat == [[(0.0, 0.0), (3.0, 4.0)], [*text_corners(text), text_corners(text)[0]]]


# --- lettering


@pytest.mark.parametrize(("align", "left"), [("left", 0.0), ("centre", -0.5), ("right", -1.0)])
def test_the_patch_of_lettering_hangs_on_its_foot(align, left):
    width = text_width_mm("Slipway", 5.0)
    corners = text_corners(Text((30.0, 40.0), "Slipway", 5.0, align=align))
    x0, y0, x1, y1 = 30 + left * width, 40 - FALL * 5, 30 + (left + 1) * width, 40 + (1 + RISE) * 5
    assert np.allclose(corners, [(x0, y0), (x1, y0), (x1, y1), (x0, y1)])


@modest
@given(spot, angle, st.floats(0, 3))
def test_the_patch_of_turned_lettering_is_the_turned_patch(at, turn, pad):
    flat = text_corners(Text((0.0, 0.0), "Bay 7", 3.5, align="centre"), pad)
    c, s = math.cos(math.radians(turn)), math.sin(math.radians(turn))
    expected = [(at[0] + c * x - s * y, at[1] + s * x + c * y) for x, y in flat]
    assert np.allclose(text_corners(Text(at, "Bay 7", 3.5, align="centre", angle_deg=turn), pad), expected, atol=1e-9)
    assert flat[1][0] - flat[0][0] == pytest.approx(text_width_mm("Bay 7", 3.5) + 2 * pad)


@modest
@given(angle, angle, spot)
def test_turned_lettering_reads_in_the_turned_direction(reading, turn, shift):
    text = Text((10.0, 20.0), "front left", 5.0, Role.NOTE, "centre", reading, bold=True, over=True)
    m = Affine.turn(turn).then(Affine.move(*shift))
    (image,) = transform(Drawing((text,)), m).items
    assert math.cos(math.radians(image.angle_deg - reading - turn)) == pytest.approx(1.0, abs=1e-12)
    assert image.at == pytest.approx(m.point(text.at))
    assert (image.text, image.align, image.role) == ("front left", "centre", Role.NOTE)
    assert image.bold
    assert image.over
    assert image.height_mm == pytest.approx(5.0)


@modest
@given(angle, st.sampled_from([Affine.mirror_x(), Affine.turn(90.0).then(Affine.mirror_x())]))
def test_under_a_reflection_lettering_moves_but_is_not_mirrored(reading, mirror):
    text = Text((125.0, 70.0), "front right", 5.0, angle_deg=reading)
    (image,) = transform(Drawing((text,)), mirror).items
    assert image.at == mirror.point((125.0, 70.0))
    c, s = math.cos(math.radians(reading)), math.sin(math.radians(reading))
    expected = bearing_deg(mirror.vector((c, s)))
    assert math.cos(math.radians(image.angle_deg - expected)) == pytest.approx(1.0, abs=1e-12)
    # The patch keeps its handedness: counter-clockwise corners, foot to the left end first.
    assert shapely.LinearRing(text_corners(image)).is_ccw
    assert image.height_mm == pytest.approx(5.0)


def test_scaled_lettering_grows_with_the_view():
    (image,) = transform(Drawing((Text((10.0, 0.0), "1:5", 5.0),)), Affine.scale(0.5)).items
    assert (image.at, image.height_mm) == ((5.0, 0.0), 2.5)


@pytest.mark.parametrize(
    "stretch", [Affine(2.0, 0, 0, 1.0, 0, 0), Affine(1.0, 0, 0.3, 1.0, 0, 0), Affine(1.0, 0, 0, -1.01, 0, 0)]
)
def test_lettering_refuses_to_be_stretched_or_slanted_and_lines_do_not(stretch):
    with pytest.raises(ValueError, match="not stretched"):
        transform(Drawing((Text((0.0, 0.0), "no", 5.0),)), stretch)
    drawn = transform(Drawing((line((0.0, 0.0), (1.0, 1.0), Role.CUT),)), stretch)
    assert drawn.items[0].curve[0].end == stretch.point((1.0, 1.0))


def test_transforming_keeps_order_roles_and_closedness_and_leaves_the_first_drawing_alone():
    before = gather([circle((0.0, 0.0), 5.0, Role.CUT), Fill(circle_curve((1.0, 0.0), 2.0), Role.NOTE), Drawing()])
    after = transform(before, Affine.move(10.0, 0.0))
    assert [type(item) for item in after.items] == [Stroke, Fill]
    assert after.items[0] == circle((10.0, 0.0), 5.0, Role.CUT)
    assert after.items[1] == Fill(circle_curve((11.0, 0.0), 2.0), Role.NOTE)
    assert before.items[0] == circle((0.0, 0.0), 5.0, Role.CUT)


def test_drawings_add_in_order():
    one, other = Drawing((line((0.0, 0.0), (1.0, 0.0), Role.CUT),)), Drawing((Text((0.0, 0.0), "a", 3.5),))
    assert (one + other).items == one.items + other.items
    assert gather([one, other.items[0]]) == one + other
