from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import quad
from scipy.optimize import brentq

from jigs.wood import (
    FOOT_ALLOWANCE_MM,
    SEAT_ALLOWANCE_MM,
    SPECIES,
    TENON_BEYOND_MM,
    TURNING_ALLOWANCE_MM,
    TURNING_WASTE_MM,
    UnknownSpeciesError,
    blank_mm,
    board_feet,
    cut_row,
    density_kg_m3,
    foot_bevel_deg,
    frustum_centroid,
    frustum_mm3,
    seat_row,
    slab_mm3,
    slant_reach_mm,
    species_name,
    turned_row,
    weight_kg,
)

diameters = st.floats(10.0, 80.0)


@pytest.mark.parametrize("name", SPECIES)
def test_density_at_12_per_cent_is_the_dry_mass_and_its_water(name):
    gravity = SPECIES[name].specific_gravity
    # A cubic metre of wet wood holds 1000 * gravity kg of dry wood, and 12 % of that in water.
    dry_kg = 1000.0 * gravity
    assert density_kg_m3(name) == pytest.approx(dry_kg + 0.12 * dry_kg, rel=1e-12)


@pytest.mark.parametrize("spelling", ["White Ash", "white  ash", "white-ash", " WHITE_ASH "])
def test_case_hyphens_and_spaces_do_not_matter(spelling):
    assert species_name(spelling) == "white ash"


def test_a_misspelt_wood_is_told_the_nearest_one():
    with pytest.raises(UnknownSpeciesError) as error:
        density_kg_m3("yelow poplar")
    assert str(error.value) == (
        '"yelow poplar" is not a wood in the table; did you mean "yellow-poplar"? '
        'Or give its density, such as "560 kg/m³"'
    )


def test_a_wood_like_none_is_told_all_of_them():
    with pytest.raises(UnknownSpeciesError, match=r"there are white ash, American beech, .*yellow-poplar"):
        density_kg_m3("zz")


@given(length=st.floats(5.0, 900.0), a=diameters, b=diameters)
@settings(max_examples=50)
def test_a_tapered_bar_has_the_volume_and_the_centroid_of_its_slices(length, a, b):
    def section(s: float) -> float:
        return math.pi / 4 * (a + (b - a) * s / length) ** 2

    volume = quad(section, 0.0, length)[0]
    first_moment = quad(lambda s: s * section(s), 0.0, length)[0]
    assert frustum_mm3(length, a, b) == pytest.approx(volume, rel=1e-9)
    assert frustum_centroid(a, b) * length == pytest.approx(first_moment / volume, rel=1e-9)


def test_a_cone_has_a_third_of_its_cylinder_and_balances_at_a_quarter():
    assert frustum_mm3(300.0, 40.0, 0.0) == pytest.approx(math.pi * 400 * 300 / 3)
    assert frustum_centroid(40.0, 0.0) == pytest.approx(0.25)


def test_a_board_foot_is_twelve_by_twelve_by_one_inch():
    # NBS Circular 572, addendum: 1 in = 25.4 mm.
    assert board_feet(304.8 * 304.8 * 25.4) == pytest.approx(1.0, rel=1e-12)
    assert board_feet(2 * 152.4 * 2438.4 * 25.4) == pytest.approx(8.0, rel=1e-12)
    # A board foot is 2.359737 dm³, so that a cubic metre is 423.776 of them.
    assert board_feet(1e9) == pytest.approx(423.776, abs=5e-4)


def test_a_seat_weighs_its_volume_times_its_density():
    # 0.4 × 0.3 × 0.05 m of a wood of 600 kg/m³.
    assert weight_kg(slab_mm3(400.0 * 300.0, 50.0), 600.0) == pytest.approx(3.6)


@given(diameter=diameters, lean=st.floats(0.0, 44.0), widening=st.floats(-0.05, 0.05))
@settings(max_examples=50)
def test_the_slanted_cut_reaches_as_far_as_the_last_line_along_the_leg_that_it_meets(diameter, lean, widening):
    # The leg runs down -z in its own frame; the cut is a plane through the origin, leaning from square across.
    normal = np.array([math.sin(math.radians(lean)), 0.0, math.cos(math.radians(lean))])

    def reach(turn: float) -> float:
        def off_the_plane(s: float) -> float:
            radius = diameter / 2 + widening * s
            return float(normal @ (radius * math.cos(turn), radius * math.sin(turn), -s))

        return float(brentq(off_the_plane, -100.0, 200.0, xtol=1e-12))

    furthest = max(reach(turn) for turn in np.linspace(0.0, 2 * math.pi, 13))
    assert slant_reach_mm(diameter, lean, widening) == pytest.approx(furthest, abs=1e-9)


def test_a_straight_leg_needs_its_radius_times_the_tangent_of_its_lean():
    assert slant_reach_mm(32.0, 45.0) == pytest.approx(16.0)
    assert slant_reach_mm(32.0, 0.0) == 0.0


def test_a_cut_that_never_leaves_the_leg_is_refused():
    with pytest.raises(ValueError, match="never leaves"):
        slant_reach_mm(30.0, 89.0, 0.05)


def test_the_foot_is_cut_at_the_angle_between_the_leg_and_plumb():
    splay, rake = 12.0, 9.0
    leg = np.array([math.tan(math.radians(splay)), -math.tan(math.radians(rake)), -1.0])
    to_plumb = math.degrees(math.acos(-leg[2] / np.linalg.norm(leg)))
    # The settings of a leg call this angle its resultant in the floor frame.
    resultant = math.degrees(math.atan(math.hypot(math.tan(math.radians(splay)), math.tan(math.radians(rake)))))
    assert foot_bevel_deg(resultant) == pytest.approx(to_plumb, abs=1e-12)


def test_a_blank_is_the_leg_and_what_is_cut_from_it():
    through = blank_mm(430.0, 46.0, 4.0, top_reach_mm=3.0)
    assert through == pytest.approx(483.0 + TENON_BEYOND_MM + FOOT_ALLOWANCE_MM + TURNING_WASTE_MM)
    blind = blank_mm(430.0, 30.0, 4.0, tenon_beyond_mm=0.0, foot_allowance_mm=10.0, waste_mm=0.0)
    assert blind == pytest.approx(474.0)


def test_the_seat_s_board_has_its_grain_along_the_longer_way():
    row = seat_row("seat", 300.0, 400.0, 45.0, 90_000.0, 672.0)
    long, short = 400.0 + SEAT_ALLOWANCE_MM, 300.0 + SEAT_ALLOWANCE_MM
    assert (row.count, row.length_mm, row.section_mm) == (1, long, (short, 45.0))
    assert row.board_feet == pytest.approx(410 / 25.4 * 310 / 25.4 * 45 / 25.4 / 144)
    assert row.weight_kg == pytest.approx(0.09 * 0.045 * 672.0)


def test_legs_are_turned_from_squares_and_weigh_what_is_left_of_them():
    leg = frustum_mm3(480.0, 40.0, 26.0)
    row = turned_row("front leg", 2, 530.0, 40.0, leg, 700.0)
    side = 40.0 + TURNING_ALLOWANCE_MM
    assert row.section_mm == (side, side)
    assert row.volume_mm3 == pytest.approx(2 * 530.0 * side * side)
    assert row.board_feet == pytest.approx(row.volume_mm3 / 25.4**3 / 144)
    assert row.weight_kg == pytest.approx(2 * leg * 700.0 / 1e9)
    assert row.weight_kg < weight_kg(row.volume_mm3, 700.0)


def test_stuff_of_a_wood_that_is_not_said_has_no_weight():
    assert cut_row("rail", 1, 400.0, (60.0, 25.0), 1e5, None).weight_kg is None


@pytest.mark.parametrize(
    ("given", "kg_m3", "name"),
    [("560 kg/m3", 560.0, "560 kg/m³"), (" 612.5kg/m³ ", 612.5, "612.5 kg/m³"), ("35 lb/ft3", 560.646, "35 lb/ft³")],
)
def test_a_wood_that_is_in_no_table_is_given_by_its_density(given, kg_m3, name):
    # 1 lb/ft³ is 16.0185 kg/m³: NIST SP 811, Appendix B (from memory).
    assert density_kg_m3(given) == pytest.approx(kg_m3, abs=5e-4)
    assert species_name(given) == name
    assert density_kg_m3(species_name(given)) == density_kg_m3(given)


@pytest.mark.parametrize("given", ["8 kg/m3", "9000 kg/m3", "0 lb/ft3", "100 lb/ft3"])
def test_a_density_that_no_wood_has_is_refused(given):
    with pytest.raises(UnknownSpeciesError, match=r"wood weighs 80 to 1400 kg/m³"):
        density_kg_m3(given)


@pytest.mark.parametrize("given", ["560", "560 kg", "560 lb/m3", "560 kg/ft3", "1e3 kg/m3", "-560 kg/m3"])
def test_what_is_no_density_is_no_wood(given):
    with pytest.raises(UnknownSpeciesError, match="give its density"):
        density_kg_m3(given)
