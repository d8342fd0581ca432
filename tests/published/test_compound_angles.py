"""Compound angles against worked examples in print. Each tolerance is the precision of the printed value."""

from __future__ import annotations

import math

import pytest
from scipy.spatial.transform import Rotation

from jigs.cards import net
from jigs.frames import SeatFrame
from jigs.legs import Axis, direction_of, follow, lean_of

FOOT_MM = 304.8


def minutes(degrees, of_a_degree):
    return degrees + of_a_degree / 60


def seen_in_two_views(one_deg, other_deg):
    """A leg at the right of the back that leans by the one from the front, by the other from the side."""
    return lean_of(direction_of(one_deg, other_deg, 1, 1), 1, 1)


def leg_run(splay_deg, rake_deg, rise_ft):
    """A leg from a face that stands `rise_ft` above the floor, and how far its foot stands away, both in feet."""
    axis = Axis((0.0, 0.0), direction_of(splay_deg, rake_deg, 1, 1), 1, 1)
    run = follow(axis, SeatFrame(0.0, rise_ft * FOOT_MM + 45.0), 45.0, drilled_from_top=False)
    return run.axis_mm / FOOT_MM, math.hypot(*run.foot_mm) / FOOT_MM


def test_a_rod_through_a_block_seen_in_two_views():
    """Machinery's Handbook, 31st ed. (2020), pp. 121-122, Fig. 4: 47°14′ and 38°10′ give 36°0.9′ and 53°12′.

    The azimuth is 36°0.98′: the example leaves off what is beyond its last place.
    """
    lean = seen_in_two_views(minutes(38, 10), minutes(47, 14))
    assert lean.sightline_deg == pytest.approx(minutes(36, 0.9), abs=0.1 / 60)
    assert lean.resultant_deg == pytest.approx(minutes(53, 12), abs=0.5 / 60)


def test_a_rod_whose_angles_are_given_from_the_horizontal():
    """Machinery's Handbook, 31st ed. (2020), pp. 121-122, Fig. 5: 27° and 36° give 22°38.6′ and 35°2.5′."""
    lean = seen_in_two_views(90.0 - 36.0, 90.0 - 27.0)
    assert lean.bevel_deg == pytest.approx(minutes(22, 38.6), abs=0.05 / 60)
    assert lean.sightline_deg == pytest.approx(minutes(35, 2.5), abs=0.05 / 60)


def test_the_rules_of_the_rod_between_its_angles():
    """Machinery's Handbook, 31st ed. (2020), pp. 121-122: tan R = tan A / tan B, tan C = tan A / sin R."""
    lean = seen_in_two_views(12.0, 9.0)
    tan_a, tan_b = math.tan(math.radians(12.0)), math.tan(math.radians(9.0))
    assert math.tan(math.radians(lean.sightline_deg)) == pytest.approx(tan_a / tan_b, rel=1e-12)
    sine = math.sin(math.radians(lean.sightline_deg))
    assert math.tan(math.radians(lean.resultant_deg)) == pytest.approx(tan_a / sine, rel=1e-12)


def test_an_irregular_hip_rafter_as_a_leg():
    """Carpentry geometry, irregular hip of roofs 8 and 14 in 12 (checked by computation)."""
    splay_deg, rake_deg = (math.degrees(math.atan2(12.0, rise)) for rise in (8.0, 14.0))
    assert (splay_deg, rake_deg) == pytest.approx((56.309932, 40.601295), abs=5e-7)
    lean = seen_in_two_views(splay_deg, rake_deg)
    assert lean.resultant_deg == pytest.approx(59.936507, abs=5e-7)
    assert lean.sightline_deg == pytest.approx(60.255119, abs=5e-7)
    length_ft, run_ft = leg_run(splay_deg, rake_deg, 12.0 + 1.0 / 3.0)
    assert run_ft == pytest.approx(21.30740, abs=5e-6)
    assert length_ft == pytest.approx(24.61943, abs=5e-6)


def test_a_regular_hip_rafter_as_a_leg():
    """NAVEDTRA 14044: 8 in of rise a foot, run 21.21 ft and rise 10 ft give 23.45 ft, 18.76 in a foot of run."""
    plumb_deg = math.degrees(math.atan2(12.0, 8.0))
    length_ft, run_ft = leg_run(plumb_deg, plumb_deg, 10.0)
    assert run_ft == pytest.approx(21.21, abs=0.005)
    assert length_ft == pytest.approx(23.45, abs=0.005)
    common_run_ft = 10.0 * 12.0 / 8.0
    assert length_ft * 12.0 / common_run_ft == pytest.approx(18.76, abs=0.005)


def test_the_unit_run_of_a_regular_hip():
    """NAVEDTRA 14044: 12 in each way make 16.97 in."""
    _, run_ft = leg_run(45.0, 45.0, 1.0)
    assert run_ft * 12.0 == pytest.approx(16.97, abs=0.005)


def test_a_stool_leg_read_off_a_protractor():
    """Common practice, no source: splay 11° and rake 8° make 13.5° on a sightline of 54°, to half a degree."""
    lean = seen_in_two_views(11.0, 8.0)
    assert lean.resultant_deg == pytest.approx(13.5, abs=0.5)
    assert lean.sightline_deg == pytest.approx(54.0, abs=0.5)


def test_two_turns_in_sequence_are_not_the_rule():
    """Computed: 20° and 25° give 30.606°; the product of cosines would give 31.608°."""
    lean = seen_in_two_views(20.0, 25.0)
    assert lean.resultant_deg == pytest.approx(30.606, abs=0.0005)
    wrong = math.degrees(math.acos(math.cos(math.radians(20.0)) * math.cos(math.radians(25.0))))
    assert wrong == pytest.approx(31.608, abs=0.0005)


APPARENT_DIP = [
    # Jukes, Student's Manual of Geology, 1859, p. 216; printed 26°15′ for what is 26°20.5′.
    (35.0, 45.0, minutes(26, 15), 6 / 60),
    # Lahee, Field Geology, appendix (from memory).
    (10.0, 80.0, minutes(9, 51), 0.5 / 60),
    (10.0, 60.0, minutes(8, 41), 0.5 / 60),
    (10.0, 45.0, minutes(7, 6), 0.5 / 60),
    (10.0, 30.0, minutes(5, 2), 0.5 / 60),
    (10.0, 15.0, minutes(2, 37), 0.5 / 60),
    # Carpentry geometry, irregular hip of roofs 8 and 14 in 12 (checked by computation).
    (33.690068, 60.255119, 30.063493, 1e-6),
    (49.398705, 45.194221, 39.616244, 1e-6),
]


@pytest.mark.parametrize(("true_deg", "from_strike_deg", "apparent_deg", "tolerance_deg"), APPARENT_DIP)
def test_what_a_bit_shows_from_another_side_is_the_apparent_dip(true_deg, from_strike_deg, apparent_deg, tolerance_deg):
    """A leg that leans straight back is turned about plumb; the splay that the front then shows is the apparent dip."""
    leaning_back = direction_of(0.0, true_deg, 1, 1)
    turned = Rotation.from_euler("z", -from_strike_deg, degrees=True).apply(leaning_back)
    lean = lean_of(tuple(turned), 1, 1)
    assert lean.sightline_deg == pytest.approx(from_strike_deg, abs=1e-9)
    assert lean.resultant_deg == pytest.approx(true_deg, abs=1e-9)
    assert lean.splay_deg == pytest.approx(apparent_deg, abs=tolerance_deg)


@pytest.mark.parametrize(
    ("lean_deg", "rise_in"),
    [(5, 1 + 1 / 16), (10, 2 + 3 / 32), (15, 3 + 7 / 32), (20, 4 + 3 / 8), (25, 5 + 19 / 32), (30, 6 + 15 / 16)],
)
def test_the_edge_of_a_card_leans_by_the_rise_in_twelve_inches(lean_deg, rise_in):
    """Building Trades Pocketbook, laying out angles: the rise in 12 in, to 1/32 in."""
    (x0, y0), (x1, y1) = net(lean_deg).leaning_edge
    assert 12.0 * (x1 - x0) / (y1 - y0) == pytest.approx(rise_in, abs=1 / 32)
