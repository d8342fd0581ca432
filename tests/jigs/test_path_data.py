"""Path data: commands against another reader, arcs against the ellipse's equation, refusals word by word."""

import math
import subprocess
import sys
from pathlib import Path

import numpy as np
import pytest
import shapely
import svgelements
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from jigs.outlines import OutlineError, signed_area_mm2
from jigs.path_data import elliptical_arc, path_outline
from layout.curves import Arc, Cubic, Line, flatten

modest = settings(max_examples=40, deadline=None)
ROOT = Path(__file__).parents[2]
spot = st.tuples(st.floats(-300, 300), st.floats(-300, 300))

# One closed shape with each command, absolute and relative, in the compact ways that drawing programs write.
EVERY_COMMAND = (
    "M-200 0 H 0 h2e2 V50 v 50.5C210,150 190,200 180,250s-20 60-80,80S20 340,0 340q-50 10 -90-10T-150 300t-20-40"
    "Q -190 240-195 200 l-3-50 L-205 100a40 40 0 01 2-60A 60 30 15 0 0-200 10z"
)


def other_reader(data):
    """Dense points of the path by svgelements."""
    points = []
    for segment in svgelements.Path(data):
        if not isinstance(segment, svgelements.Move):
            points += [(p.x, p.y) for p in (segment.point(t) for t in np.linspace(0, 1, 200))]
    return points


def refused(data, unit_mm=1.0, units="mm"):
    with pytest.raises(OutlineError) as caught:
        path_outline(data, unit_mm, units)
    assert caught.value.field == "seat.path"
    return caught.value


# --- what is drawn


@pytest.mark.parametrize(
    "data",
    [
        EVERY_COMMAND,
        "m -100,0 200 0 0,150 -200,0 z",
        "M 0 0 C 60 0 100 40 100 100 S 60 200 0 200 S -100 160 -100 100 S -60 0 0 0 Z",
        "M0 0 T 100 20 T 50 150z",
        "M0 0 L 100 0 S 150 80 60 150 Z",
        "M100 100A100 100 0 1 1-100 100a100 100 0 1 1 200 0z",
        "M0,0\n\tL 100.5 0\r\n 100.0 ,1e2 0.5e2+150z",
    ],
)
def test_a_path_goes_where_another_reader_goes(data):
    ours = shapely.LineString(flatten(path_outline(data, 1.0, "mm"), 0.001))
    theirs = shapely.LineString(other_reader(data))
    # Theirs has 200 points a segment, whose chords stay within 0.02 mm of a curve of these sizes.
    assert ours.hausdorff_distance(theirs) < 0.02


def test_segments_keep_their_kind_and_nothing_is_flattened():
    kinds = [type(segment) for segment in path_outline(EVERY_COMMAND, 1.0, "mm")]
    assert (kinds.count(Arc), kinds.count(Cubic), kinds.count(Line)) == (2, 7, 7)


def test_quadratics_are_raised_exactly():
    (cubic, _) = path_outline("M0 0Q90 30 60 120z", 1.0, "mm")
    assert cubic == Cubic((0.0, 0.0), (60.0, 20.0), (80.0, 60.0), (60.0, 120.0))


def test_numbers_are_in_the_files_units_and_y_runs_to_the_back():
    curve = path_outline("M-8 0 L 8 0 L 6 14 L -6 14 Z", 25.4, "in")
    assert {segment.start for segment in curve} == {
        (x * 25.4, y * 25.4) for x, y in ((-8, 0), (8, 0), (6, 14), (-6, 14))
    }


def test_sweep_flag_1_is_counter_clockwise_in_plan():
    # The short way from the right to the left over the back of the circle.
    (_, arc) = path_outline("M-100 0H100A100 100 0 0 1 -100 0z", 1.0, "mm")
    assert arc.at(0.5) == pytest.approx((0.0, 100.0))
    assert arc.sweep_deg == pytest.approx(180.0)


@pytest.mark.parametrize("data", ["M0 0 100 0 50 80z", "M0 0 50 80 100 0z"])
def test_an_outline_runs_counter_clockwise_whichever_way_it_was_drawn(data):
    curve = path_outline(data, 1.0, "mm")
    assert signed_area_mm2(curve) == 4000.0
    assert {segment.start for segment in curve} == {(0.0, 0.0), (100.0, 0.0), (50.0, 80.0)}


def test_z_draws_the_closing_line_and_an_end_on_the_start_needs_none():
    assert len(path_outline("M0 0 100 0 50 80z", 1.0, "mm")) == 3
    assert len(path_outline("M0 0 100 0 50 80 0 0z", 1.0, "mm")) == 3
    assert len(path_outline("M0 0 100 0 50 80 0 0", 1.0, "mm")) == 3


def test_an_end_within_a_hundredth_of_a_millimetre_closes_the_outline():
    curve = path_outline("M0 0 100 0 50 80 0 0.009", 1.0, "mm")
    assert curve[-1].end == (0.0, 0.0)


def test_numbers_may_end_in_a_point_and_begin_with_noughts():
    assert path_outline("M0 0 0100. 0 50 +80.z", 1.0, "mm") == path_outline("M0 0 100 0 50 80z", 1.0, "mm")


def test_a_gap_is_told():
    error = refused("M0 0 100 0 50 80 0 0.02")
    assert error.given == "an outline that ends 0.02 mm from its start"
    assert error.rule == "is not closed"
    assert refused("M0 0 10 0 5 8 1 0", 25.4, "in").given == "an outline that ends 1 in from its start"


# --- arcs


@st.composite
def arc_arguments(draw):
    start, end = draw(spot), draw(spot)
    assume(math.dist(start, end) > 1.0)
    radii = draw(st.tuples(st.floats(5, 900), st.floats(5, 900)))
    return start, radii, draw(st.floats(-400, 400)), draw(st.booleans()), draw(st.booleans()), end


def in_own_axes(point, centre, rotation_deg):
    """The point in the ellipse's axes, by a complex product."""
    turned = complex(point[0] - centre[0], point[1] - centre[1]) * np.exp(-1j * math.radians(rotation_deg))
    return turned.real, turned.imag


@modest
@given(arc_arguments())
def test_an_arc_is_the_one_that_its_flags_choose(arguments):
    start, (rx, ry), rotation, large, sweep, end = arguments
    arc = elliptical_arc(*arguments)
    assert arc.start == pytest.approx(start, abs=1e-6)
    assert arc.end == pytest.approx(end, abs=1e-6)
    assert (arc.sweep_deg > 0) == sweep
    ratio = [math.hypot(*arc.u) / rx, math.hypot(*arc.v) / ry]
    assert ratio[0] == pytest.approx(ratio[1])
    for t in np.linspace(0, 1, 7):
        x, y = in_own_axes(arc.at(t), arc.centre, rotation)
        assert math.hypot(x / rx, y / ry) == pytest.approx(ratio[0])
    if ratio[0] > 1 + 1e-9:
        # Radii that cannot reach are enlarged just enough: half an ellipse about the middle of the chord.
        assert abs(arc.sweep_deg) == pytest.approx(180.0, abs=1e-3)
    elif abs(abs(arc.sweep_deg) - 180) > 1e-3:
        assert ratio[0] == pytest.approx(1.0)
        assert (abs(arc.sweep_deg) > 180) == large


@modest
@given(arc_arguments())
def test_an_arc_passes_where_another_reader_of_svg_passes(arguments):
    start, (rx, ry), rotation, large, sweep, end = arguments
    numbers = f"M{start[0]!r} {start[1]!r}A{rx!r} {ry!r} {rotation!r} {large:d} {sweep:d} {end[0]!r} {end[1]!r}"
    theirs = svgelements.Path(numbers)[1]
    arc = elliptical_arc(*arguments)
    # Close to half a turn the centre hangs on the last digits of the radii.
    assume(abs(abs(arc.sweep_deg) - 180) > 0.1 or math.hypot(*arc.u) > rx * 1.001)
    for t in (0.25, 0.5, 0.75):
        assert arc.at(t) == pytest.approx(tuple(theirs.point(t)), abs=1e-3)


def test_an_arc_of_no_radius_is_a_line_and_one_to_where_it_starts_is_nothing():
    assert elliptical_arc((0.0, 0.0), (0.0, 50.0), 0.0, False, True, (100.0, 0.0)) == Line((0.0, 0.0), (100.0, 0.0))
    curve = path_outline("M0 0A0 50 0 0 1 100 0A 20 20 0 1 1 100 0L 50 80z", 1.0, "mm")
    assert [type(segment) for segment in curve] == [Line, Line, Line]


def test_negative_radii_count_without_their_sign():
    assert path_outline("M-100 0H100A-100 -100 0 0 1 -100 0z", 1.0, "mm") == path_outline(
        "M-100 0H100A100 100 0 0 1 -100 0z", 1.0, "mm"
    )


# --- what is refused


@pytest.mark.parametrize(
    ("data", "given_words", "rule"),
    [
        ("", '""', "is not SVG path data"),
        ("   ", '""', "is not SVG path data"),
        ("square", '"square"', "is not SVG path data"),
        ("L 10 10 z", '"L 10 10 z"', "is not SVG path data"),
        ("5 M 0 0 L 10 10 z", '"5 M 0 0 L 10 10 z"', "is not SVG path data"),
        ("M 0 0", '"M 0 0"', "draws nothing"),
        ("M 0 0 z", '"M 0 0 z"', "draws nothing"),
        ("M 0 0 L nan 10 z", '"nan 10 z"', "is not a number or a command of a path"),
        ("M 0 0 L 10 inf z", '"inf z"', "is not a number or a command of a path"),
        ("M 0 0 L 10 ; 20 z", '"; 20 z"', "is not a number or a command of a path"),
        ("M 0 0 L 10,,20 z", '",20 z"', "is not a number or a command of a path"),
        ("M , 0 0 L 10 20 z", '", 0 0 L 10 20 z"', "is not a number or a command of a path"),
        ("M 0 0 L 10 20, z", '"20, z"', "has a comma with no number after it"),
        ("M 0 0 L 10 --20 z", '"--20 z"', "is not a number or a command of a path"),
        ("M 0 0 L 10 1e z", '"e z"', "is not a number or a command of a path"),
        ("M 0 0 L 10 z", '"L 10 z"', "gives L 1 numbers, and it takes 2 at a time"),
        ("M 0 0 L z", '"L z"', "gives L 0 numbers, and it takes 2 at a time"),
        ("M 0 0 C 1 2 3 4 5 z", '"C 1 2 3 4 5 z"', "gives C 5 numbers, and it takes 6 at a time"),
        ("M 0 0 L 10 10 0 10 z 5", '"z 5"', "gives z 1 numbers, and it takes none"),
        ("M 0 0 A 50 50 0 2 1 9 9 z", '"2 1 9 9 z"', "is not a flag, 0 or 1"),
        ("M 0 0 A 50 50 0 1 1 9 z", '"A 50 50 0 1 1 9 z"', "gives A 6 numbers, and it takes 7 at a time"),
        ("M 0 0 L 100001 10 z", '"100001 10 z"', "has a number larger than 100000"),
        ("M 0 0 L 1e999 10 z", '"1e999 10 z"', "has a number larger than 100000"),
    ],
)
def test_malformed_data_is_refused_at_its_place(data, given_words, rule):
    error = refused(data)
    assert (error.given, error.rule) == (given_words, rule)


@pytest.mark.parametrize(
    "data",
    [
        "M0 0 100 0 50 80z M 40 20 60 20 50 40z",
        "M0 0 100 0 50 80z m 40 20 20 0 0 20z",
        "M0 0 100 0 50 80z L 10 10",
        "M0 0 100 0 50 80 0 0 M 40 20 60 20 50 40z",
    ],
)
def test_a_second_outline_is_refused(data):
    assert refused(data).rule == "is a second outline or hole, and a seat has one outline"


def test_an_excerpt_is_short():
    assert refused("M 0 0 L " + "xyz " * 500).given == '"xyz xyz xyz xyz xyz xyz …"'


@modest
@given(st.text(st.sampled_from("MmLlHhCcSsQqTtAaZz0123456789.,-+eE \n"), max_size=60))
def test_any_text_is_drawn_or_refused(data):
    try:
        curve = path_outline("M" + data, 1.0, "mm")
    except OutlineError:
        return
    assert all(math.isfinite(value) for segment in curve for value in (*segment.start, *segment.end))
    assert math.dist(curve[-1].end, curve[0].start) < 1e-3


def test_reading_other_seats_does_not_load_the_path_library():
    code = "import jigs.seats, sys; print([m for m in sys.modules if m.startswith(('shapely', 'fontTools.svgLib'))])"
    run = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True, cwd=ROOT)
    assert run.stdout.strip() == "[]"
