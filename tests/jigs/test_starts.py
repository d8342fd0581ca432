"""Starts of the trade: pictures, a chair to copy, a point to aim at, rings; against cameras and vectors made here."""

import itertools
import math
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from jigs.frames import SeatFrame
from jigs.knowns import CannotSolve
from jigs.legs import direction_of, lean_of
from jigs.outlines import ellipse_outline
from jigs.pictures import Sight, distances_mm, from_picture, mm_per_px
from jigs.quantities import format_length
from jigs.seats import Blank
from jigs.solve import Stance, solve
from jigs.starts import aim, foot_between, from_copy, ring, ring_resultant_deg

sides = st.sampled_from((-1, 1))
leans = st.floats(-30, 30)


def refusal(call, *arguments, **more):
    with pytest.raises(CannotSolve) as told:
        call(*arguments, **more)
    return told.value.rule, told.value.cure


# ---------------------------------------------------------------- pictures


def from_far(points, right, scale=2.0, roll_deg=0.0):
    """Pixels of a camera so far off that it sees plumb views; `right` is what it has to its right hand."""
    turn = math.radians(roll_deg)
    seen = []
    for p in points:
        u, v = scale * sum(a * b for a, b in zip(p, right, strict=True)), -scale * p[2]
        seen.append((900 + u * math.cos(turn) - v * math.sin(turn), 1200 + u * math.sin(turn) + v * math.cos(turn)))
    return seen


FRONT_RIGHT_HAND = (1.0, 0.0, 0.0)
RIGHT_HAND = {"right": (0.0, 1.0, 0.0), "left": (0.0, -1.0, 0.0)}


def leg_points(splay, rake, side, end, top=(100.0, 60.0, 400.0)):
    x, y, _ = direction_of(splay, rake, side, end)
    return [top, (top[0] + 380 * x, top[1] + 380 * y, top[2] - 380.0)]


def sights(points, taken_from="right", roll_deg=0.0):
    floor = [(-250.0, 0.0, 0.0), (250.0, 0.0, 0.0)], [(0.0, -200.0, 0.0), (0.0, 300.0, 0.0)]
    hands = (FRONT_RIGHT_HAND, RIGHT_HAND[taken_from])
    return [
        Sight(tuple(from_far(level, hand, 2.0, roll_deg)), tuple(from_far(points, hand, 2.0, roll_deg)))
        for level, hand in zip(floor, hands, strict=True)
    ]


@given(leans, leans, sides, sides, st.sampled_from(("right", "left")), st.floats(-20, 20))
@settings(max_examples=60)
def test_a_picture_taken_from_far_gives_splay_and_rake(splay, rake, side, end, taken_from, roll_deg):
    front, side_view = sights(leg_points(splay, rake, side, end), taken_from, roll_deg)
    lean = from_picture(front, side_view, side, end, taken_from)
    assert (lean.splay_deg, lean.rake_deg) == pytest.approx((splay, rake), abs=1e-9)


def test_points_may_be_given_in_any_order():
    front, side_view = sights(leg_points(11.0, 8.0, -1, 1))
    turned = [Sight(s.level[::-1], s.leg[::-1]) for s in (front, side_view)]
    once, twice = from_picture(front, side_view, -1, 1), from_picture(*turned, -1, 1)
    assert (twice.splay_deg, twice.rake_deg) == pytest.approx((once.splay_deg, once.rake_deg), abs=1e-12)


def test_an_upright_and_a_slanted_line_by_hand():
    # 400 px down and 80 to the right: atan 0.2. A front picture's right is the chair's right in plan.
    upright = Sight(((100, 900), (700, 900)), ((500, 400), (580, 800)))
    lean = from_picture(upright, upright, 1, 1, "right")
    assert lean.splay_deg == pytest.approx(math.degrees(math.atan(0.2)))
    assert lean.rake_deg == pytest.approx(math.degrees(math.atan(0.2)))
    # Taken from the left the chair's back is to the left, so the same slant is toward the front.
    assert from_picture(upright, upright, 1, 1, "left").rake_deg == pytest.approx(-math.degrees(math.atan(0.2)))
    assert from_picture(upright, upright, -1, -1, "left").splay_deg == pytest.approx(-math.degrees(math.atan(0.2)))


@pytest.mark.parametrize("pointing_px", [0.5, 2.0, 4.0])
def test_the_uncertainty_is_that_of_many_clumsy_pointings(pointing_px):
    front, side_view = sights(leg_points(12.0, 9.0, 1, -1), roll_deg=4.0)
    told = from_picture(front, side_view, 1, -1, pointing_px=pointing_px)
    rng = np.random.default_rng(7)
    count = 20_000
    for sight, pm in ((front, told.splay_pm_deg), (side_view, told.rake_pm_deg)):
        exact = np.array([*sight.level, *sight.leg], float)
        p = exact + rng.normal(0.0, pointing_px, (count, 4, 2))
        level, leg = p[:, 1] - p[:, 0], p[:, 3] - p[:, 2]
        angle = np.degrees(np.arctan2(leg[:, 1], leg[:, 0]) - np.arctan2(level[:, 1], level[:, 0]))
        # The deviation of a sample of this size is known to half a per cent; first order costs less than that here.
        assert np.std(angle) == pytest.approx(pm, rel=0.03)


def test_an_exact_pointer_leaves_no_uncertainty():
    lean = from_picture(*sights(leg_points(12.0, 9.0, 1, -1)), 1, -1, pointing_px=0.0)
    assert (lean.splay_pm_deg, lean.rake_pm_deg) == (0.0, 0.0)


def seen_from(points, distance, height):
    """Pixels of a pinhole camera in front of the chair, level and square to it."""
    return [(3000 * p[0] / (distance + p[1]), -3000 * (p[2] - height) / (distance + p[1])) for p in points]


def splay_from(distance):
    leg = leg_points(10.0, 12.0, 1, -1, top=(120.0, 70.0, 420.0))
    level = [(-200.0, 0.0, 450.0), (200.0, 0.0, 450.0)]
    sight = Sight(tuple(seen_from(level, distance, 450.0)), tuple(seen_from(leg, distance, 450.0)))
    return from_picture(sight, sights(leg)[1], 1, -1).splay_deg


def test_standing_back_cures_most_of_what_a_near_picture_falsifies():
    near, far = splay_from(1000.0) - 10.0, splay_from(10 * 450.0) - 10.0
    assert near > 1.0
    assert 0.0 < far < 0.5


def test_the_note_says_how_far_to_stand_back():
    lean = from_picture(*sights(leg_points(12.0, 9.0, 1, -1)), 1, -1)
    assert lean.note == (
        f"Pointing 2 px wide of the mark changes splay by {lean.splay_pm_deg:.2f}° "
        f"and rake by {lean.rake_pm_deg:.2f}°. "
        "A picture taken from near by falsifies both, and that is not in these figures: stand back at least 10 times "
        "the chair's height, hold the camera at the seat's height, and square to the chair."
    )


@pytest.mark.parametrize("units", ["mm", "in"])
def test_a_known_length_says_how_far_the_marks_on_the_leg_are_apart(units):
    front, side_view = sights(leg_points(12.0, 9.0, 1, -1))
    # 300 mm of the leg's height, whatever the pixels: the marks are as far apart across as its splay makes them.
    rise = abs(front.leg[1][1] - front.leg[0][1])
    scaled = replace(front, known=((0.0, 0.0), (0.0, rise)), known_mm=300.0)
    lean = from_picture(scaled, side_view, 1, -1, units=units)
    plain = from_picture(front, side_view, 1, -1).note
    across, down = (format_length(mm, units) for mm in (300.0 * math.tan(math.radians(12.0)), 300.0))
    assert lean.note == (
        f"{plain} By its known length, the leg's two marks in the front picture lie {across} apart across "
        f"and {down} in height."
    )


def test_a_leg_on_the_centre_line_needs_no_front_picture():
    _, side_view = sights(leg_points(0.0, 9.0, 1, 1))
    lean = from_picture(None, side_view, 0, 1)
    assert lean.splay_deg == lean.splay_pm_deg == 0.0
    assert lean.rake_deg == pytest.approx(9.0, abs=1e-9)
    assert "splay" not in lean.note
    assert refusal(from_picture, None, side_view, 1, 1)[0] == "splay needs a front picture"


def test_a_known_length_scales_the_picture():
    points = leg_points(12.0, 9.0, 1, -1)
    level = from_far([(-200.0, 0.0, 450.0), (200.0, 0.0, 450.0)], FRONT_RIGHT_HAND, 1.6, 7.0)
    leg = from_far(points, FRONT_RIGHT_HAND, 1.6, 7.0)
    sight = Sight(tuple(level), tuple(leg), known=tuple(level), known_mm=400.0)
    assert mm_per_px(sight) == pytest.approx(1 / 1.6)
    along, up = distances_mm(sight, leg[1], leg[0])
    assert (along, up) == pytest.approx((-380 * math.tan(math.radians(12)), 380.0), abs=1e-9)
    lean = from_picture(sight, sights(points)[1], 1, -1)
    assert (lean.front_mm_per_px, lean.side_mm_per_px) == (pytest.approx(1 / 1.6), None)


def test_pictures_that_say_nothing_are_refused():
    good = Sight(((100, 900), (700, 900)), ((500, 400), (580, 800)))
    assert refusal(from_picture, Sight(((100, 900), (115, 900)), good.leg), good, 1, 1) == (
        "the front picture's level line is 15 px long, and 20 px are needed",
        "point further apart, or enlarge the picture",
    )
    assert refusal(from_picture, good, Sight(good.level, ((5, 5), (5, 5))), 1, 1, pointing_px=0.0)[0] == (
        "the side picture's leg is 0 px long, and 1 px are needed"
    )
    assert refusal(from_picture, good, Sight(good.level, ((100, 400), (500, 420))), 1, 1)[0] == (
        "in the side picture the leg leans 87.1° from square to the level line"
    )
    assert refusal(from_picture, Sight(((100, 100), (100, 900)), good.leg), good, 1, 1)[0] == (
        "the level line stands upright in the picture"
    )
    assert refusal(from_picture, good, good, 1, 1, pointing_px=-1.0)[0] == "a pointing error of -1 px is none"
    assert refusal(distances_mm, good, (0, 0), (1, 1))[0] == "the picture has no known length to scale it by"
    pointless = Sight(good.level, good.leg, known=((3, 3), (3, 3)), known_mm=40.0)
    assert refusal(mm_per_px, pointless)[0] == "the known length has no length, in the picture or in mm"


# ---------------------------------------------------------------- a chair to copy


@given(leans, leans, sides, sides, st.floats(20, 150), st.floats(200, 420))
@settings(max_examples=60)
def test_a_chair_measured_at_two_heights_is_copied(splay, rake, side, end, low, high):
    direction = np.array(direction_of(splay, rake, side, end))
    at = [np.array((side * 140.0, 60.0, 430.0)) + direction * (430.0 - h) for h in (low, high)]
    across, along = ([side * p[0] for p in at], [p[1] for p in at])
    assert from_copy((low, high), across, along, side, end) == pytest.approx((splay, rake), abs=1e-9)
    assert from_copy((high, low), across[::-1], along[::-1], side, end) == pytest.approx((splay, rake), abs=1e-9)


def test_heights_near_together_are_refused():
    rule, cure = refusal(from_copy, (100.0, 130.0), (1.0, 2.0), (1.0, 2.0), 1, 1)
    assert (rule, cure) == (
        "the two heights are only 30 mm apart",
        "measure at least 50 mm apart, the further the better",
    )


def test_a_leg_on_the_centre_line_does_not_lean_sideways():
    assert from_copy((100.0, 400.0), (1.0, 0.0), (330.0, 290.0), 0, 1) == pytest.approx(
        (0.0, math.degrees(math.atan(40 / 300)))
    )
    rule, _ = refusal(from_copy, (100.0, 400.0), (31.5, 0.0), (330.0, 290.0), 0, 1)
    assert rule == "the leg on the centre line is measured to lean 6° sideways"
    assert (
        refusal(from_copy, (100.0, math.nan), (31.5, 0.0), (330.0, 290.0), 1, 1)[0]
        == "a measure of the chair is not a number"
    )


# ---------------------------------------------------------------- aiming at a point


@given(st.floats(-200, 200), st.floats(-100, 300), st.floats(600, 3000))
@settings(max_examples=40)
def test_legs_aimed_at_one_point_run_through_it(x, y, z):
    for mortise in ((-130.0, 80.0, 420.0), (-130.0, 250.0, 410.0)):
        if math.hypot(x - mortise[0], y - mortise[1]) > 1.7 * (z - mortise[2]):
            continue
        direction = np.array(aim((x, y, z), mortise))
        assert direction[2] == -1.0
        assert mortise + direction * (mortise[2] - z) == pytest.approx((x, y, z), abs=1e-9)


def test_a_point_straight_above_makes_a_plumb_leg():
    assert aim((10.0, 20.0, 2000.0), (10.0, 20.0, 430.0)) == (0.0, 0.0, -1.0)


def test_a_point_that_is_not_above_is_refused():
    assert refusal(aim, (0.0, 0.0, 400.0), (0.0, 100.0, 430.0)) == (
        "the point aimed at is 30 mm below the mortise, not above it",
        "aim at a point 489 mm or more above the floor",
    )
    assert refusal(aim, (0.0, 0.0, 470.0), (0.0, 100.0, 430.0))[0] == (
        "the point aimed at is so low that the leg would lean more than 60°"
    )


# ---------------------------------------------------------------- rings


@pytest.mark.parametrize("count", [3, 4, 5, 6, 7, 8, 12])
def test_a_ring_is_even_leans_straight_out_and_is_the_same_to_left_and_right(count):
    legs = ring(count, 240.0, (0.0, 170.0), 14.0)
    spots = np.array([leg.at_mm for leg in legs])
    assert np.hypot(*(spots - (0.0, 170.0)).T) == pytest.approx(np.full(count, 120.0))
    steps = [math.dist(p, q) for p, q in itertools.pairwise([*spots, spots[0]])]
    assert steps == pytest.approx([2 * 120.0 * math.sin(math.pi / count)] * count)
    for leg in legs:
        out = (np.array(leg.at_mm) - (0.0, 170.0)) / 120.0
        assert leg.toward_foot == pytest.approx((*(math.tan(math.radians(14)) * out), -1.0), abs=1e-12)
        assert direction_of(leg.splay_deg, leg.rake_deg, leg.side or 1, leg.end) == pytest.approx(
            leg.toward_foot, abs=1e-12
        )
        assert leg.splay_deg >= 0.0
        assert leg.rake_deg >= -1e-9
        assert any(math.dist((-leg.at_mm[0], leg.at_mm[1]), other.at_mm) < 1e-9 for other in legs)
    front = sorted(spots.tolist(), key=lambda p: p[1])[:2]
    assert front[0][1] == pytest.approx(front[1][1], abs=1e-9)
    assert front[0][0] == pytest.approx(-front[1][0], abs=1e-9)
    assert [leg.name for leg in legs] == [str(k + 1) for k in range(count)]


def test_three_legs_stand_two_in_front_and_one_behind_on_the_centre_line():
    right, back, left = ring(3, 200.0, (0.0, 150.0), 12.0)
    assert (right.side, right.end, left.side, left.end) == (1, -1, -1, -1)
    assert back.at_mm[0] == 0.0
    assert (back.side, back.end) == (0, 1)
    assert (back.splay_deg, back.rake_deg) == pytest.approx((0.0, 12.0))
    assert back.bearing_deg == 90.0


def test_the_first_bearing_can_be_chosen():
    assert [leg.bearing_deg for leg in ring(4, 200.0, (0.0, 150.0), 12.0, first_bearing_deg=0.0)] == [
        0.0,
        90.0,
        180.0,
        270.0,
    ]


def test_feet_on_a_circle_give_the_resultant():
    resultant = ring_resultant_deg(240.0, 420.0, 460.0, 40.0, False)
    legs = ring(5, 240.0, (0.0, 170.0), resultant)
    for leg in legs:
        foot = np.array(leg.at_mm) + (460.0 - 40.0) * np.array(leg.toward_foot[:2])
        assert math.dist(foot, (0.0, 170.0)) == pytest.approx(210.0, abs=1e-9)
    assert ring_resultant_deg(240.0, 420.0, 460.0, 40.0, True) < resultant
    assert ring_resultant_deg(240.0, 200.0, 460.0, 40.0, True) < 0.0


def test_rings_that_cannot_be_are_refused():
    assert refusal(ring, 2, 240.0, (0.0, 170.0), 12.0) == ("a ring of 2 legs cannot be made", "give 3 to 64")
    assert refusal(ring, 3, 0.0, (0.0, 170.0), 12.0)[0] == "a pitch circle of 0 mm is none"
    assert refusal(ring, 3, 240.0, (0.0, 170.0), 75.0)[0] == "resultant 75 is not between -60 and 60 degrees"
    assert refusal(ring_resultant_deg, 240.0, 4000.0, 460.0, 40.0, True) == (
        "feet on a circle of 4000 mm make legs that lean 76.3°",
        "give 1832 mm or less",
    )
    assert (
        refusal(ring_resultant_deg, 240.0, 400.0, 30.0, 40.0, False)[0] == "the ring's feet have no circle on the floor"
    )


# ---------------------------------------------------------------- equal feet


@given(st.floats(-300, 300), st.floats(-300, 300), st.floats(-500, 500))
@settings(max_examples=40)
def test_between_two_feet_every_spot_of_the_line_is_equally_far(x, y, along):
    one, other = (-160.0, 5.0), (x, y)
    assume(math.dist(one, other) >= 1.0)
    line = foot_between(one, other)
    spot = (line.a * line.c - line.b * along, line.b * line.c + line.a * along)
    assert math.dist(spot, one) == pytest.approx(math.dist(spot, other), abs=1e-7)
    assert line.distance_mm(other) == pytest.approx(math.dist(one, other) / 2, abs=1e-9)


def test_two_feet_on_one_spot_have_nothing_between():
    assert refusal(foot_between, (1.0, 2.0), (1.0, 2.0))[0] == "the two neighbours' feet stand on one spot"


def test_the_fourth_leg_of_a_stool_stands_on_the_line_between_its_neighbours():
    stance = Stance((60.0, 250.0), SeatFrame(0.0, 450.0), 45.0, False, 1, 1, 30.0)
    feet = ((200.0, 90.0), (-150.0, 330.0))
    solution = solve(stance, {"resultant": 12.0}, False, Blank(ellipse_outline(340, 340)), between=feet)
    x, y, _ = solution.direction
    assert foot_between(*feet).distance_mm((60.0 + 405.0 * x, 250.0 + 405.0 * y)) == pytest.approx(0.0, abs=1e-9)
    assert lean_of(solution.direction, 1, 1).resultant_deg == pytest.approx(12.0, abs=1e-9)
