from __future__ import annotations

import json
import math
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from scipy.spatial.transform import Rotation

from jigs.stretchers import Member, StretcherError, clock_deg, place
from tests.jigs.bars import (
    BOX,
    FORMS,
    H_FORM,
    MEDIAL,
    SIDES,
    X_FORM,
    bar,
    by_name,
    chair,
    leg,
    placed,
    plumb_chair,
    worked_out,
)

lean = st.floats(-4.0, 20.0)


def agree(specs, members):
    """Every number of the stretchers against the second way of working them out."""
    found = worked_out(specs, members)
    for stretcher in place(specs, members):
        other = found[stretcher.name]
        assert stretcher.between_axes_mm == pytest.approx(other["between"], abs=1e-8)
        assert stretcher.shoulder_mm == pytest.approx(other["shoulder"], abs=1e-7)
        assert stretcher.over_tenons_mm == pytest.approx(other["shoulder"] + 2 * stretcher.tenon_mm, abs=1e-7)
        for k, end in enumerate(stretcher.ends):
            assert end.axis_point_mm == pytest.approx(tuple(other["points"][k]), abs=1e-8)
            assert end.height_mm == pytest.approx(other["points"][k][2], abs=1e-8)
            assert end.bore_deg == pytest.approx(other["bores"][k], abs=1e-6)
            clock_agrees(end.clock_deg, other["hosts"][k], other["ways"][k])


def clock_agrees(clock, host, way):
    """Turning the zero by the clock about the host's axis, right-handed (clockwise looking along it), faces `way`."""
    assert 0.0 <= clock < 360.0
    zero, facing = (v - (v @ host.along) * host.along for v in (host.zero, way))
    turned = Rotation.from_rotvec(math.radians(clock) * host.along).apply(zero / np.linalg.norm(zero))
    assert turned == pytest.approx(facing / np.linalg.norm(facing), abs=1e-7)


def faults(specs, members=None, units="mm"):
    with pytest.raises(StretcherError) as error:
        place(specs, chair() if members is None else members, units)
    return str(error.value).splitlines()


def test_between_plumb_legs_a_stretcher_is_the_distance_less_the_legs():
    front, *_ = place([bar("front", "front left", "front right", heights=(120.0, 120.0))], plumb_chair())
    assert front.between_axes_mm == pytest.approx(300.0)
    assert front.shoulder_mm == pytest.approx(270.0)
    assert front.over_tenons_mm == pytest.approx(310.0)
    assert [end.bore_deg for end in front.ends] == pytest.approx([90.0, 90.0])
    assert front.ends[0].axis_point_mm == pytest.approx((-150.0, 50.0, 120.0))
    assert [end.reach_mm for end in front.ends] == pytest.approx([15.0, 15.0])
    assert [end.along_host_mm for end in front.ends] == pytest.approx([300.0, 300.0])


def test_the_clock_runs_clockwise_looking_down_from_the_leg_s_own_end():
    legs = plumb_chair()
    left, right = (place([replace(spec, heights_mm=(100.0, 100.0))], legs)[0] for spec in SIDES)
    front, *_ = place([bar("front", "front left", "front right", heights=(120.0, 120.0))], legs)
    # On the front left leg the clock starts at the front; seen from above the way to the right comes after front, left
    # and back, the way to the back is opposite.
    assert [end.clock_deg for end in front.ends] == pytest.approx([270.0, 90.0])
    assert left.ends[0].clock_deg == pytest.approx(180.0)
    assert right.ends[1].clock_deg == pytest.approx(180.0)


def test_a_medial_stretcher_counts_its_clock_from_straight_up():
    legs = plumb_chair()
    sides = [replace(side, heights_mm=(100.0, 100.0)) for side in SIDES]
    medial = by_name(place([*sides, bar("medial", "left", "right", fractions=(0.25, 0.25))], legs))["medial"]
    # The side stretchers run to the back; looking along them with up at the top, right is at three o'clock.
    assert [end.clock_deg for end in medial.ends] == pytest.approx([90.0, 270.0])
    assert medial.ends[0].axis_point_mm == pytest.approx((-150.0, 50.0 + 0.25 * 220.0, 100.0))
    assert medial.shoulder_mm == pytest.approx(300.0 - 22.0)


def test_a_rising_stretcher_leaves_the_foot_s_way_at_more_than_a_right_angle():
    (rising,) = place([bar("left", "front left", "back left", heights=(100.0, 320.0))], plumb_chair())
    assert [end.bore_deg for end in rising.ends] == pytest.approx([135.0, 45.0])
    assert rising.shoulder_mm == pytest.approx(220.0 * math.sqrt(2) - 2 * 15.0 * math.sqrt(2))


@pytest.mark.parametrize("form", FORMS)
def test_every_form_agrees_with_arrays_and_root_finding(form):
    agree(FORMS[form], chair())


@pytest.mark.parametrize("form", FORMS)
def test_legs_that_thicken_toward_the_floor_agree_too(form):
    agree(FORMS[form], chair(diameters=(24.0, 44.0)))


@given(splay=lean, rake=lean, spread=st.floats(90.0, 160.0), top=st.floats(20.0, 45.0), foot=st.floats(20.0, 45.0),
       low=st.floats(0.2, 0.45), high=st.floats(0.2, 0.45), along=st.floats(0.3, 0.7),
       form=st.sampled_from(sorted(FORMS)))  # fmt: skip
@settings(max_examples=120)
def test_any_chair_agrees_with_arrays_and_root_finding(splay, rake, spread, top, foot, low, high, along, form):
    legs = chair(splay=splay, rake=rake, at=(spread, 110.0), diameters=(top, foot))
    specs = [
        replace(spec, heights_mm=(420.0 * low, 420.0 * high))
        if spec.heights_mm
        else replace(spec, fractions=(min(along, low + 0.1) if form == "X" else along, along))
        for spec in FORMS[form]
    ]
    agree(specs, legs)


@given(splay=lean, rake=lean, low=st.floats(60.0, 250.0), high=st.floats(60.0, 250.0))
@settings(max_examples=40)
def test_a_stretcher_named_the_other_way_round_is_the_same_stretcher(splay, rake, low, high):
    legs = chair(splay=splay, rake=rake)
    (one,) = place([bar("left", "front left", "back left", heights=(low, high))], legs)
    (other,) = place([bar("left", "back left", "front left", heights=(high, low))], legs)
    assert other.ends == one.ends[::-1]
    assert other.shoulder_mm == pytest.approx(one.shoulder_mm)


@pytest.mark.parametrize("form", ["H", "box"])
def test_twins_are_mirrored(form):
    stretchers = by_name(placed(form)[0])
    for left, right in zip(stretchers["left"].ends, stretchers["right"].ends, strict=True):
        assert right.bore_deg == pytest.approx(left.bore_deg)
        assert right.clock_deg == pytest.approx(360.0 - left.clock_deg)
    assert stretchers["right"].over_tenons_mm == pytest.approx(stretchers["left"].over_tenons_mm)


def test_stretchers_may_be_given_before_what_they_rest_on():
    legs = chair()
    forward, backward = place(H_FORM, legs), place(H_FORM[::-1], legs)
    assert [stretcher.name for stretcher in backward] == ["medial", "right", "left"]
    assert backward == forward[::-1]


def test_fractions_of_a_leg_run_up_from_the_floor():
    legs = chair()
    (front,) = place([bar("front", "front left", "front right", fractions=(0.25, 0.75))], legs)
    assert [end.height_mm for end in front.ends] == pytest.approx([105.0, 315.0])


def test_fractions_of_a_post_run_up_from_the_seat():
    posts = [
        Member(name, (x, 300.0, 460.0), (1.2 * x, 360.0, 860.0), 30.0, 20.0, (0.0, 1.0, 0.0))
        for name, x in (("left post", -150.0), ("right post", 150.0))
    ]
    (rail,) = place([bar("rail", "left post", "right post", fractions=(0.75, 0.75))], posts)
    assert [end.height_mm for end in rail.ends] == pytest.approx([760.0, 760.0])


def test_fractions_of_a_stretcher_run_from_its_first_end():
    legs = plumb_chair()
    turned_round = bar("right", "back right", "front right", fractions=(0.2, 0.2))
    sides = [replace(SIDES[0], heights_mm=(100.0, 100.0)), turned_round]
    medial = by_name(place([*sides, bar("medial", "left", "right", fractions=(0.25, 0.25))], legs))["medial"]
    assert [end.axis_point_mm[1] for end in medial.ends] == pytest.approx([50.0 + 55.0, 270.0 - 55.0])


def test_a_height_fixes_a_point_on_a_stretcher_that_rises():
    legs = plumb_chair()
    sides = [replace(side, heights_mm=(100.0, 200.0)) for side in SIDES]
    medial = by_name(place([*sides, bar("m", "left", "right", heights=(150.0, 120.0))], legs))["m"]
    assert [end.axis_point_mm[1] for end in medial.ends] == pytest.approx([160.0, 50.0 + 0.2 * 220.0])


def test_a_plumb_bar_between_stretchers_counts_its_clock_from_the_back():
    legs = plumb_chair()
    rails = [bar(name, "front left", "front right", heights=(z, z)) for name, z in (("low", 80.0), ("high", 200.0))]
    upright = bar("upright", "low", "high", fractions=(0.5, 0.5))
    last = bar("last", "upright", "back left", fractions=(0.5, 140.0 / 420.0))
    stretchers = by_name(place([*rails, upright, last], legs))
    assert stretchers["upright"].shoulder_mm == pytest.approx(120.0 - 22.0)
    # From the upright, which runs up, the leg lies to the back and left; seen from below that is past the back
    # clockwise.
    assert stretchers["last"].ends[0].clock_deg == pytest.approx(math.degrees(math.atan2(150.0, 220.0)))


def test_the_data_are_those_of_the_settings():
    front = placed("box")[0][2]
    data = json.loads(json.dumps(front.data()))
    assert list(data) == ["name", "between_axes_mm", "shoulder_mm", "over_tenons_mm", "ends"]
    assert list(data["ends"][0]) == ["in", "bore_deg", "clock_deg", "height_mm", "axis_point_mm"]
    assert data["ends"][1]["in"] == "front right"
    assert data["ends"][1]["axis_point_mm"] == list(front.ends[1].axis_point_mm)


def test_a_clock_that_starts_along_the_axis_is_refused():
    plumb = Member("leg", (0.0, 0.0, 400.0), (0.0, 0.0, 0.0), 30.0, 30.0, (0.0, 0.0, -1.0))
    with pytest.raises(ValueError, match="along its own axis"):
        clock_deg(plumb, (1.0, 0.0, 0.0))


@given(turn=st.floats(-720.0, 720.0))
@settings(max_examples=60)
def test_a_clock_never_reads_360(turn):
    plumb = Member("leg", (0.0, 0.0, 400.0), (0.0, 0.0, 0.0), 30.0, 30.0, (1.0, 0.0, 0.0))
    way = (math.cos(math.radians(turn)), -math.sin(math.radians(turn)), 0.0)
    assert 0.0 <= clock_deg(plumb, way) < 360.0
    assert clock_deg(plumb, (1.0, 1e-20, 0.0)) == 0.0


def test_an_unknown_host_is_told_the_nearest():
    assert faults([bar("a", "front lft", "back left", heights=(100.0, 100.0))]) == [
        'stretchers[0].between[0]: "front lft" is no leg or stretcher; did you mean "front left"?'
    ]


def test_a_host_like_none_is_told_all_of_them():
    (told,) = faults([bar("a", "zz", "back left", heights=(100.0, 100.0))])
    assert told.endswith('there are "front left", "front right", "back left", "back right"')


def test_a_stretcher_to_itself_or_twice_to_one_leg_is_refused():
    specs = [
        bar("a", "a", "back left", fractions=(0.5, 0.5)),
        bar("b", "back left", "back left", heights=(100.0, 150.0)),
    ]
    assert faults(specs) == [
        'stretchers[0].between[0]: "a" is this stretcher itself; name what it is tenoned into',
        'stretchers[1].between: "back left" stands at both ends; name two different parts',
    ]


def test_stretchers_that_rest_on_each_other_are_refused_and_those_on_them_are_not_told_as_well():
    specs = [
        bar("a", "front left", "b", fractions=(0.5, 0.5)),
        bar("b", "front right", "a", fractions=(0.5, 0.5)),
        bar("c", "back left", "a", fractions=(0.5, 0.5)),
        SIDES[0],
    ]
    rule = "rest in the end on this stretcher itself; begin with a stretcher between two legs"
    assert faults(specs) == [
        f'stretchers[0].between: "front left" and "b" {rule}',
        f'stretchers[1].between: "front right" and "a" {rule}',
    ]


def test_a_name_that_is_taken_is_refused():
    medial = replace(SIDES[1], name="back left", between=("left", "front right"))
    specs = [SIDES[0], replace(SIDES[1], name="left"), medial]
    assert [told.split(";")[0] for told in faults(specs)[:2]] == [
        'stretchers[1].name: "left" is the name of another part',
        'stretchers[2].name: "back left" is the name of another part',
    ]


def test_a_place_is_given_by_heights_or_by_fractions_and_not_by_both():
    neither = bar("a", "front left", "back left")
    both = bar("b", "front left", "back left", heights=(100.0, 100.0), fractions=(0.5, 0.5))
    told = faults([neither, both])
    needed = "and one of heights and fractions is needed; say heights = [first, second] above the floor"
    assert told[0].startswith(f"stretchers[0].fractions: not given {needed}")
    assert told[1].startswith(f"stretchers[1].fractions: given beside heights {needed}")


def test_a_height_does_not_fix_a_point_on_a_level_stretcher():
    level = [replace(side, heights_mm=(120.0, 120.0)) for side in SIDES]
    told = faults([*level, bar("medial", "left", "right", heights=(120.0, 120.0))], plumb_chair())
    cure = "say fractions = [0.5, 0.5] for the middle of both"
    assert told == [
        f"stretchers[2].heights[{k}]: 120 mm does not fix a point on {host}, which is level; {cure}"
        for k, host in enumerate(("left", "right"))
    ]


def test_a_height_above_the_underside_or_below_the_floor_is_refused_in_the_maker_s_units():
    spec = bar("a", "front left", "back left", heights=(450.0, -10.0))
    assert faults([spec]) == [
        "stretchers[0].heights[0]: 450 mm is not between 0 mm and 420 mm, where front left can be bored",
        "stretchers[0].heights[1]: -10 mm is not between 0 mm and 420 mm, where back left can be bored",
    ]
    (told,) = faults([replace(spec, heights_mm=(457.2, 101.6))], units="in")
    assert told.startswith("stretchers[0].heights[0]: 18 in is not between 0 in and 16 17/32 in")


def test_a_fraction_inside_the_leg_is_no_place_on_a_stretcher():
    sides = [replace(side, heights_mm=(120.0, 120.0)) for side in SIDES]
    specs = [*sides, bar("medial", "left", "right", fractions=(0.05, 1.2))]
    # The side's axis points are 220 mm apart, the legs' surfaces 15 mm from them.
    assert faults(specs, plumb_chair()) == [
        "stretchers[2].fractions[0]: 0.05 is not between 0.0682 and 0.932, where left can be bored",
        "stretchers[2].fractions[1]: 1.2 is not between 0.0682 and 0.932, where right can be bored",
    ]


def test_a_fraction_of_a_leg_is_told_between_nothing_and_one():
    (told,) = faults([bar("a", "front left", "back left", fractions=(1.5, 0.5))])
    assert told == "stretchers[0].fractions[0]: 1.5 is not between 0 and 1, where front left can be bored"


def test_a_tenon_thicker_than_its_stretcher_or_its_host_is_refused():
    thick = bar("a", "front left", "back left", heights=(100.0, 100.0), tenon_diameter_mm=24.0)
    assert faults([thick]) == [
        "stretchers[0].tenon_diameter: 24 mm is thicker than the stretcher, 22 mm; make it thinner"
    ]
    stout = replace(thick, diameter_mm=32.0, tenon_diameter_mm=31.0)
    told = faults([stout], plumb_chair())
    assert told == [
        f"stretchers[0].tenon_diameter: 31 mm is as thick as {host} there, 30 mm; "
        "make the tenon thinner or its host thicker"
        for host in ("front left", "back left")
    ]


def test_legs_that_overlap_leave_no_room():
    legs = [leg(n, side, -1, at=(10.0, 0.0), splay=0.0, rake=0.0) for n, side in (("one", -1), ("two", 1))]
    (told,) = faults([bar("a", "one", "two", fractions=(0.5, 0.5))], legs)
    rule = "leave no room between them: their surfaces overlap by 11.5 mm; move the joints apart"
    assert told == f'stretchers[0].between: "one" and "two" {rule}'


def test_two_ends_at_one_point_are_refused():
    legs = [leg("one", 1, -1), replace(leg("one", 1, -1), name="two")]
    assert faults([bar("a", "one", "two", heights=(100.0, 100.0))], legs) == [
        "stretchers[0].between: its two ends are at one point; move one of them"
    ]


def test_a_stretcher_that_never_leaves_the_side_of_its_leg_is_refused():
    # Level from 1 mm below the underside, a stretcher leaves a leg that splays 20° within the seat.
    legs = [leg("one", -1, -1, splay=20.0), leg("two", 1, -1, splay=0.0)]
    (told,) = faults([bar("a", "one", "two", heights=(419.0, 419.0))], legs)
    rule = "is met so steeply or so near its end that the stretcher never leaves its side"
    assert told == f'stretchers[0].between[0]: "one" {rule}; move the joint, or set it squarer'
    shrinking = [
        Member("cone", (0.0, 0.0, 400.0), (0.0, 0.0, 0.0), 10.0, 150.0, (0.0, 1.0, 0.0)),
        Member("post", (12.0, 0.0, 400.0), (12.0, 0.0, 0.0), 8.0, 8.0, (0.0, 1.0, 0.0)),
    ]
    told = faults([bar("a", "cone", "post", heights=(350.0, 10.0), tenon_diameter_mm=6.0)], shrinking)
    assert any('between[0]: "cone" is met so steeply' in line for line in told)


def test_all_that_is_wrong_is_told_at_once_in_the_order_of_the_file():
    specs = [
        bar("a", "front left", "nowhere", heights=(100.0, 100.0)),
        bar("b", "front left", "back left", heights=(500.0, 100.0)),
        bar("c", "b", "front right", fractions=(0.5, 0.5)),
        bar("d", "front left", "back left", heights=(100.0, 100.0), tenon_diameter_mm=30.0),
    ]
    told = faults(specs)
    assert [line.partition(":")[0] for line in told] == [
        "stretchers[0].between[1]",
        "stretchers[1].heights[0]",
        "stretchers[3].tenon_diameter",
    ]


def test_no_stretchers_are_none():
    assert place([], chair()) == ()


@given(shift=st.floats(-0.3, 0.3))
@settings(max_examples=30)
def test_a_stretcher_moved_along_parallel_legs_keeps_its_length(shift):
    assume(abs(shift) > 1e-3)
    legs = [leg(name, 1, -1, at=(at, 0.0), diameters=(30.0, 30.0)) for name, at in (("one", -100.0), ("two", 150.0))]
    lengths = [place([bar("a", "one", "two", fractions=(f, f))], legs)[0].shoulder_mm for f in (0.5, 0.5 + shift)]
    assert lengths[0] == pytest.approx(lengths[1])


def test_the_forms_are_what_they_are_called():
    assert MEDIAL.between == ("left", "right")
    assert len(BOX) == 4
    assert X_FORM[1].between[1] == "long"
