"""Curve segments against textbook formulas, dense sampling and closed forms."""

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from layout.curves import Arc, Cubic, Line, arc_as_cubics, flatten, mapped, segment_box
from layout.geometry import Affine, Box
from tests.layout.planes import angle, maps, modest, spot

radius = st.floats(1, 3000)
sweep = st.floats(-360, 360).filter(lambda a: abs(a) > 0.1)


@st.composite
def arcs(draw):
    """Arcs of circles and of tilted ellipses."""
    u, v = draw(radius), draw(radius)
    turn = Affine.turn(draw(angle))
    return Arc(draw(spot), turn.vector((u, 0.0)), turn.vector((0.0, v)), draw(angle), draw(sweep))


lines = st.builds(Line, spot, spot)
cubics = st.builds(Cubic, spot, spot, spot, spot)
segments = st.one_of(lines, cubics, arcs())


def at_by_formula(segment, t):
    """The point at t by textbook formulas, with none of the module's own."""
    match segment:
        case Line(p, q):
            return (1 - t) * np.array(p) + t * np.array(q)
        case Cubic(a, b, c, d):
            weights = ((1 - t) ** 3, 3 * t * (1 - t) ** 2, 3 * t**2 * (1 - t), t**3)
            return sum(w * np.array(p) for w, p in zip(weights, (a, b, c, d), strict=True))
        case Arc(centre, u, v, start, turn):
            theta = math.radians(start + t * turn)
            return np.array(centre) + math.cos(theta) * np.array(u) + math.sin(theta) * np.array(v)


def samples(segment, count=2001):
    return np.array([segment.at(t) for t in np.linspace(0, 1, count)])


def distances_to_chain(points, chain):
    """The distance of each point from a chain of straight lines, by brute force."""
    a, b = np.array(chain[:-1]), np.array(chain[1:])
    run = b - a
    length2 = np.maximum((run**2).sum(axis=1), 1e-300)
    best = np.full(len(points), np.inf)
    for start, d, n in zip(a, run, length2, strict=True):
        t = np.clip(((points - start) @ d) / n, 0, 1)
        best = np.minimum(best, np.hypot(*(points - start - t[:, None] * d).T))
    return best


@modest
@given(segments, st.floats(0, 1))
def test_a_segment_passes_where_the_textbook_says(segment, t):
    assert segment.at(t) == pytest.approx(tuple(at_by_formula(segment, t)), abs=1e-8)


@modest
@given(segments)
def test_a_segment_starts_and_ends_at_its_ends(segment):
    assert segment.at(0.0) == pytest.approx(segment.start, abs=1e-9)
    assert segment.at(1.0) == pytest.approx(segment.end, abs=1e-9)


@modest
@given(segments, maps(), st.floats(0, 1))
def test_mapping_a_segment_maps_each_of_its_points(segment, m, t):
    assert segment.mapped(m).at(t) == pytest.approx(m.point(segment.at(t)), abs=1e-6)
    assert mapped((segment,), m) == (segment.mapped(m),)


@modest
@given(segments, st.floats(0, 1), st.floats(0, 1), st.floats(0, 1))
def test_a_part_runs_over_the_same_points(segment, t0, t1, t):
    assert segment.part(t0, t1).at(t) == pytest.approx(segment.at(t0 + t * (t1 - t0)), abs=1e-8)


@modest
@given(segments, st.floats(0, 1))
def test_a_reversed_segment_runs_back(segment, t):
    assert segment.reverse().at(t) == pytest.approx(segment.at(1 - t), abs=1e-8)
    assert segment.reverse().reverse().at(t) == pytest.approx(segment.at(t), abs=1e-8)


@settings(max_examples=40, deadline=None)
@given(segments)
def test_bounds_are_those_of_dense_samples(segment):
    box = segment_box(segment)
    dense = samples(segment)
    sampled = Box(*dense.min(axis=0), *dense.max(axis=0))
    # Samples are 1/2000 apart: by Taylor the true extreme lies beyond them by no more than M/8 of that squared, with M
    # the greatest second derivative (some 6 * 12000 mm for these cubics, 3000 * (2 pi)**2 for these arcs).
    slack = 120_000 / 8 / 2000**2
    for k, sign in enumerate((-1, -1, 1, 1)):
        assert -1e-7 <= sign * (box[k] - sampled[k]) <= slack


def test_the_bounds_of_an_arc_are_not_those_of_its_ends_or_its_circle():
    arc = Arc((0.0, 0.0), (10.0, 0.0), (0.0, 10.0), 45.0, 90.0)
    half = 10 * math.sqrt(0.5)
    assert segment_box(arc) == pytest.approx((-half, half, half, 10.0))


def test_the_bounds_of_a_cubic_are_not_those_of_its_control_points():
    # Symmetric arch: its top is 3/4 of the height of the control points.
    assert segment_box(Cubic((0.0, 0.0), (0.0, 40.0), (100.0, 40.0), (100.0, 0.0))) == pytest.approx((0, 0, 100, 30))


@modest
@given(st.floats(1, 500), st.floats(1, 500), st.floats(0, 180))
def test_the_bounds_of_a_tilted_ellipse_are_the_closed_form(a, b, tilt):
    turn = Affine.turn(tilt)
    box = segment_box(Arc((5.0, -7.0), turn.vector((a, 0.0)), turn.vector((0.0, b)), 0.0, 360.0))
    c, s = math.cos(math.radians(tilt)), math.sin(math.radians(tilt))
    assert box.width / 2 == pytest.approx(math.hypot(a * c, b * s), rel=1e-9)
    assert box.height / 2 == pytest.approx(math.hypot(a * s, b * c), rel=1e-9)
    assert box.centre == pytest.approx((5.0, -7.0), abs=1e-9)


@settings(max_examples=60, deadline=None)
@given(segments, st.sampled_from([0, 1]), st.floats(0.02, 0.98))
def test_crossings_are_all_places_where_the_segment_changes_side(segment, axis, part):
    box = segment_box(segment)
    value = box[axis] + part * (box[axis + 2] - box[axis])
    found = segment.crossings(axis, value)
    assert list(found) == sorted(found)
    for t in found:
        assert segment.at(t)[axis] == pytest.approx(value, abs=1e-4)
    steps = np.linspace(0, 1, 501)
    sides = np.sign([segment.at(t)[axis] - value for t in steps])
    for t0, t1, before, after in zip(steps, steps[1:], sides, sides[1:], strict=False):
        if before * after < 0:
            assert any(t0 - 1e-9 <= t <= t1 + 1e-9 for t in found)


def test_a_line_past_a_segment_or_along_it_does_not_cross_it():
    assert Line((0.0, 0.0), (10.0, 0.0)).crossings(1, 0.0) == ()
    assert Line((0.0, 0.0), (10.0, 5.0)).crossings(1, 5.1) == ()
    assert Arc((0.0, 0.0), (3.0, 0.0), (0.0, 3.0), 0.0, 360.0).crossings(0, 3.5) == ()
    assert Cubic((0.0, 0.0), (1.0, 0.0), (2.0, 0.0), (3.0, 0.0)).crossings(1, 0.0) == ()


def test_a_full_circle_is_crossed_twice_at_the_right_heights():
    circle = Arc((0.0, 0.0), (5.0, 0.0), (0.0, 5.0), 0.0, 360.0)
    heights = sorted(circle.at(t)[1] for t in circle.crossings(0, 3.0))
    assert heights == pytest.approx([-4.0, 4.0])


@settings(max_examples=40, deadline=None)
@given(segments, maps(), st.sampled_from([0.05, 0.5, 5.0]))
def test_chords_stay_within_the_tolerance_even_of_a_sheared_ellipse(segment, m, tolerance):
    image = segment.mapped(m)
    chain = flatten((image,), tolerance)
    dense = np.array([image.at(t) for t in np.linspace(0, 1, 400)])
    assert distances_to_chain(dense, chain).max() <= tolerance * (1 + 1e-6)


def test_a_flattened_closed_curve_repeats_its_first_point_and_no_other():
    square = [(0.0, 0.0), (10.0, 0.0), (10.0, 10.0), (0.0, 10.0)]
    curve = tuple(Line(p, q) for p, q in zip(square, [*square[1:], square[0]], strict=True))
    assert flatten(curve, 0.05) == [*square, square[0]]
    assert flatten((), 0.05) == []


@settings(max_examples=40, deadline=None)
@given(st.floats(1, 500), st.floats(0.2, 1.0), angle, sweep, st.sampled_from([0.002, 0.01, 0.1]))
def test_beziers_stay_within_the_tolerance_of_a_circle_and_of_its_uneven_maps(r, squeeze, start, turn, tolerance):
    arc = Arc((0.0, 0.0), (r, 0.0), (0.0, r), start, turn)
    pieces = arc_as_cubics(arc, tolerance)
    assert pieces[0].start == pytest.approx(arc.start, abs=1e-8)
    assert pieces[-1].end == pytest.approx(arc.end, abs=1e-8)
    for cubic in pieces:
        assert np.abs(np.hypot(*samples(cubic, 60).T) - r).max() <= tolerance
    sheared = arc.mapped(Affine.turn(37.0).then(Affine(1.0, 0.0, 0.0, squeeze, 0.0, 0.0)))
    # Chords of 4000 samples stay within r/8 (2 pi/4000)^2 < 0.0002 mm of the ellipse.
    dense = samples(sheared, 4001)
    for cubic in arc_as_cubics(sheared, tolerance):
        assert distances_to_chain(samples(cubic, 30), dense).max() <= tolerance + 0.0002


def test_a_quarter_circle_as_one_cubic_departs_as_published():
    # The usual cubic with control length 4/3 (sqrt 2 - 1) departs by 2.7253e-4 of the radius (from memory).
    (cubic,) = arc_as_cubics(Arc((0.0, 0.0), (1.0, 0.0), (0.0, 1.0), 0.0, 90.0), 0.01)
    assert (np.hypot(*samples(cubic).T) - 1).max() == pytest.approx(2.7253e-4, abs=2e-8)
    assert cubic.first == pytest.approx((1.0, 4 / 3 * (math.sqrt(2) - 1)))


@modest
@given(arcs(), st.floats(0, 1))
def test_the_reach_of_an_arc_is_the_longest_half_axis(arc, t):
    u, v = np.array(arc.u), np.array(arc.v)
    assert arc.reach_mm == pytest.approx(np.linalg.norm(np.column_stack([u, v]), 2), rel=1e-9)
    assert math.dist(arc.at(t), arc.centre) <= arc.reach_mm * (1 + 1e-9)
