"""The shield: its sizes, its symmetry, where it is smooth and where it has corners."""

import math

import numpy as np
import pytest
import shapely
from hypothesis import given, settings
from hypothesis import strategies as st

from jigs.outlines import OutlineError
from jigs.shield import LEAST_BACK, shield_outline
from layout.curves import Arc, Cubic, flatten, mapped, segment_box
from layout.geometry import Affine, union

modest = settings(max_examples=20, deadline=None)
WIDTH, DEPTH, BACK, BOW, RADIUS = 430.0, 400.0, 300.0, 40.0, 30.0


@st.composite
def shields(draw):
    """Width, depth, back width, bow and a modest radius."""
    width = draw(st.floats(150, 1500))
    depth = width * draw(st.floats(0.4, 1.6))
    back = width * draw(st.floats(LEAST_BACK + 0.02, 0.99))
    bow = draw(st.none() | st.floats(0, 1).map(lambda part: part * min(depth / 4, width / 6)))
    return width, depth, back, bow, draw(st.sampled_from([0.0, 0.01, 0.02])) * min(width, depth)


def tangents(segment):
    ends = []
    for a, b in ((0.0, 1e-7), (1 - 1e-7, 1.0)):
        run = np.array(segment.at(b)) - segment.at(a)
        ends.append(run / np.hypot(*run))
    return ends


def kinks(curve):
    """Places and degrees of the turns at joints that are not smooth."""
    found = []
    for one, after in zip(curve, [*curve[1:], curve[0]], strict=True):
        turn = math.degrees(math.acos(min(1.0, float(tangents(one)[1] @ tangents(after)[0]))))
        if turn > 0.05:
            found.append((one.end, turn))
    return found


@modest
@given(shields())
def test_a_shield_fills_its_width_and_depth_exactly(size):
    curve = shield_outline(*size, "mm")
    box = union(segment_box(segment) for segment in curve)
    assert box == pytest.approx((-size[0] / 2, 0.0, size[0] / 2, size[1]), abs=1e-9)
    assert curve[0].start == (0.0, 0.0)
    assert max(math.dist(a.end, b.start) for a, b in zip(curve, [*curve[1:], curve[0]], strict=True)) < 2e-6


@modest
@given(shields())
def test_a_shield_is_plain_counter_clockwise_and_hollow_nowhere(size):
    ring = shapely.Polygon(flatten(shield_outline(*size, "mm"), 0.01))
    assert ring.is_valid
    assert ring.exterior.is_ccw
    # Chords of a convex curve are convex; a hollow would show as area between it and its hull.
    assert ring.convex_hull.area - ring.area < 1e-6 * ring.area


@modest
@given(shields())
def test_the_left_of_a_shield_mirrors_its_right(size):
    curve = shield_outline(*size, "mm")
    ring = shapely.Polygon(flatten(curve, 0.01))
    mirrored = shapely.Polygon(flatten(mapped(curve, Affine.mirror_x()), 0.01))
    assert ring.symmetric_difference(mirrored).area < 1e-6 * ring.area


@modest
@given(shields())
def test_a_shield_has_no_kinks_but_at_two_sharp_front_corners(size):
    width, depth, back, bow, radius = size
    found = kinks(shield_outline(width, depth, back, bow, radius, "mm"))
    assert len(found) == (2 if radius == 0 else 0)
    for (x, y), turn in found:
        assert y < depth / 3
        assert abs(x) > 0.4 * width
        assert 20 < turn < 90


def test_a_shield_is_widest_at_a_third_of_its_depth():
    points = np.array(flatten(shield_outline(WIDTH, DEPTH, BACK, None, RADIUS, "mm"), 0.001))
    assert points[points[:, 0].argmax()][1] == pytest.approx(DEPTH / 3, abs=1.0)


@modest
@given(shields())
def test_a_shield_is_as_wide_at_its_back_corners_as_asked(size):
    width, depth, back, bow, radius = size
    curve = shield_outline(width, depth, back, bow, radius, "mm")
    corners = sorted(s.start for s in curve if abs(abs(s.start[0]) - back / 2) < 1e-9 and s.start[1] > depth / 3)
    assert len(corners) == 2
    assert corners[1][0] - corners[0][0] == pytest.approx(back, abs=1e-9)
    # There the outline has turned half-way between the end of the side and the start of the back.
    k = next(k for k, s in enumerate(curve) if s.start == corners[1])
    before, at, after = tangents(curve[k - 1])[0], tangents(curve[k])[0], tangents(curve[k])[1]
    assert float(before @ at) == pytest.approx(float(at @ after), abs=1e-6)


@pytest.mark.parametrize(("given_bow", "bow"), [(None, DEPTH / 10), (25.0, 25.0), (0.0, 0.0)])
def test_the_front_bows_out_by_the_bow(given_bow, bow):
    found = kinks(shield_outline(WIDTH, DEPTH, BACK, given_bow, 0.0, "mm"))
    assert [place[1] for place, _ in found] == pytest.approx([bow, bow])


@settings(max_examples=8, deadline=None)
@given(st.floats(5, 60))
def test_front_corners_are_rounded_with_true_arcs_of_the_radius(radius):
    curve = shield_outline(WIDTH, DEPTH, BACK, BOW, radius, "mm")
    arcs = [segment for segment in curve if isinstance(segment, Arc)]
    assert len(arcs) == 2
    assert all(isinstance(segment, Arc | Cubic) for segment in curve)
    for arc in arcs:
        assert math.dist(arc.at(0.4), arc.centre) == pytest.approx(radius)
    # Only the corners change, and the arc stays inside the sharp outline.
    sharp = shapely.Polygon(flatten(shield_outline(WIDTH, DEPTH, BACK, BOW, 0.0, "mm"), 0.005))
    rounded = shapely.Polygon(flatten(curve, 0.005))
    assert rounded.difference(sharp).area < 5.0
    assert sharp.difference(rounded).bounds[3] < DEPTH / 3
    assert kinks(curve) == []


def test_a_radius_too_wide_for_the_front_corners_is_refused_and_the_named_one_fits():
    with pytest.raises(OutlineError) as refused:
        shield_outline(WIDTH, DEPTH, BACK, BOW, 250.0, "mm")
    assert refused.value.field == "seat.corner_radius"
    most = float(refused.value.cure.removeprefix("give at most ").removesuffix(" mm"))
    assert kinks(shield_outline(WIDTH, DEPTH, BACK, BOW, most, "mm")) == []
    with pytest.raises(OutlineError):
        shield_outline(WIDTH, DEPTH, BACK, BOW, most + 0.2, "mm")


@pytest.mark.parametrize(
    ("size", "field", "words"),
    [
        ((430.0, 400.0, 430.0, None, 0.0), "seat.back_width", "not less than the seat's width, 430 mm"),
        ((430.0, 400.0, 100.0, None, 0.0), "seat.back_width", "too narrow"),
        ((430.0, 400.0, 300.0, 75.0, 0.0), "seat.front_bow", "give at most 71.6 mm"),
        ((600.0, 300.0, 400.0, 80.0, 0.0), "seat.front_bow", "give at most 75 mm"),
    ],
)
def test_what_makes_no_shield_is_refused(size, field, words):
    with pytest.raises(OutlineError, match=words) as refused:
        shield_outline(*size, "mm")
    assert refused.value.field == field
