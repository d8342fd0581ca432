"""From a spec to legs, and every refusal of what cannot be built, word for word."""

from __future__ import annotations

import pytest

from jigs.assembly import assemble, other_face
from jigs.problems import SpecError
from jigs.spec import parse_spec
from tests.jigs.conftest import BLAMELESS, DEMOS, LEG, demo, spec_text, stool


def refused(legs=BLAMELESS, head=None, **seat):
    """What is said of a spec that cannot be built, one line a problem."""
    furniture = parse_spec(spec_text(legs, head, **seat).encode(), "stool.toml")
    with pytest.raises(SpecError) as caught:
        assemble(furniture, "stool.toml")
    assert caught.value.source == "stool.toml"
    return [problem.text() for problem in caught.value.problems]


def leg(**changes):
    return {**LEG, **changes}


def one(**changes):
    return [leg(mirror=False, **changes)]


def test_a_mortise_off_the_blank_is_refused_with_how_far_it_leaves_it():
    lines = refused(one(at=[195, 70], splay=0, rake=0))
    assert lines == [
        "legs[0].at: front's mortise on the underside leaves the blank by 7.5 mm; "
        "move it further in, or make the seat larger"
    ]


def test_a_mortise_whose_centre_is_off_the_blank_is_refused_too():
    lines = refused(one(at=[230, 70], splay=0, rake=0), drill_from="top")
    assert lines == [
        "legs[0].at: front's mortise on the top leaves the blank by 42.5 mm; "
        "move it further in, or make the seat larger"
    ]


def test_a_tapered_mouth_that_leaves_the_blank_is_refused_though_the_bit_would_not():
    narrow = one(at=[185, 70], splay=0, rake=0, mortise={"bit": 16})
    assert stool(narrow).legs
    lines = refused([{**narrow[0], "mortise": {"bit": 16, "taper": 10, "mouth": 36}}])
    assert lines[0].startswith("legs[0].at: front's mortise on the underside leaves the blank by 3 mm; ")


def test_a_bore_that_comes_out_through_the_seats_side_is_refused():
    lines = refused(one(at=[170, 150], splay=-45, rake=0, end="front", mortise=12))
    assert lines == [
        "legs[0].at: front's bore comes out through the seat's side before it reaches the top; "
        "move the mortise further in or lessen the lean"
    ]


def test_bores_that_meet_inside_the_seat_are_refused_with_both_names_and_how_deep():
    lines = refused([leg(at=[10, 70], splay=0, rake=0)])
    assert lines == [
        "legs[0].at: front right's bore meets that of front left inside the seat by 5 mm; "
        "move them apart or use a smaller bit"
    ]


def test_bores_that_stand_apart_below_and_meet_at_the_top_are_refused():
    apart = [leg(at=[21, 150], splay=3, rake=0, end="front")]
    assert stool(apart).legs
    (line,) = refused([leg(at=[21, 150], splay=14, rake=0, end="front")])
    assert line.startswith("legs[0].at: front right's bore meets that of front left inside the seat by ")


def test_bores_of_two_tables_that_meet_are_reported_at_the_later_one():
    (line,) = refused([*one(splay=0, rake=0), {**one(splay=0, rake=0, at=[130, 80])[0], "name": "prop"}])
    assert line.startswith("legs[1].at: prop's bore meets that of front inside the seat by 13.8 mm; ")


def test_a_foot_above_the_floor_is_refused_with_how_far_the_underside_is_below_it():
    lines = refused(one(splay=0, rake=0), height=100, thickness=120)
    assert lines == [
        "legs[0]: front stands where the seat's underside is on the floor or below it; "
        "raise the seat or lessen the lean"
    ]


def test_an_underside_that_reaches_the_floor_at_the_back_of_a_pitched_seat_is_refused_there_alone():
    legs = [leg(), leg(name="back", at=[125, 560])]
    lines = refused(legs, pitch=10, height=140, depth=600)
    # 560 mm back the face is 97.2 mm lower, and 45 mm of seat hang 44.3 mm below that.
    assert lines == [
        "legs[1]: back left stands where the seat's underside is on the floor or below it; "
        "raise the seat or lessen the lean"
    ]


def test_a_leg_in_the_middle_of_the_depth_must_say_which_end_its_rake_is_for():
    lines = refused(one(at=[125, 150]))
    assert lines == [
        "legs[0].end: is not given, and the leg stands in the middle of the seat's depth: its rake could be forward "
        'or back; say end = "front" or end = "back"'
    ]
    assert stool(one(at=[125, 150], end="back")).legs[0].end == 1
    assert stool(one(at=[125, 150], rake=0)).legs[0].foot_mm[1] == 150.0


def test_a_blind_mortise_from_the_top_is_refused_and_nothing_falls_over_on_the_way():
    lines = refused(one(mortise={"bit": 25, "depth": 30}), drill_from="top")
    assert lines == [
        "legs[0].mortise.depth: 30 mm from the top cannot be: a leg enters from below, so a mortise to a depth is "
        'bored from the underside; set drill_from = "underside", or leave depth out to bore through'
    ]


def test_lengths_in_refusals_are_in_the_makers_units():
    legs = [{**LEG, "at": [7, 3], "splay": 0, "rake": 0, "mirror": False, "mortise": 1}]
    lines = refused(legs, {"units": "in"}, width=14, depth=12, thickness=2, height=18)
    assert lines[0].startswith("legs[0].at: front's mortise on the underside leaves the blank by 1/2 in; ")


def test_every_problem_is_told_at_once():
    legs = [
        leg(at=[198, 70]),
        leg(name="middle", at=[125, 150]),
        leg(name="inner", at=[5, 230], splay=0, rake=0),
    ]
    places = [line.split(":")[0] for line in refused(legs)]
    assert places == ["legs[1].end", "legs[0].at", "legs[0].at", "legs[2].at"]


def test_an_outline_that_cannot_be_drawn_is_refused_at_the_seat():
    crossed = [[0, 0], [300, 300], [300, 0], [0, 300]]
    (line,) = refused(one(), shape="polygon", points=crossed, width=None, depth=None)
    assert line.startswith("seat.points: the outline crosses or touches itself near [150 mm, 150 mm]; make it one line")


def test_twins_are_two_legs_left_first_and_a_leg_alone_keeps_its_name_and_side():
    legs = stool([leg(at=[-125, 70]), {**LEG, "name": "odd", "at": [-60, 240], "mirror": False}]).legs
    assert [found.name for found in legs] == ["front left", "front right", "odd"]
    assert [found.side for found in legs] == [-1, 1, -1]
    assert [found.end for found in legs] == [-1, -1, 1]
    assert [found.place for found in legs] == ["legs[0]", "legs[0]", "legs[1]"]


def test_a_leg_belongs_to_the_end_that_it_stands_nearer_to_unless_it_says_otherwise():
    for y, end, given in ((149, -1, None), (151, 1, None), (70, 1, "back"), (230, -1, "front")):
        (found,) = stool(one(at=[100, y], end=given)).legs
        assert found.end == end
        # A positive rake carries the foot away from the middle of the seat.
        assert (found.foot_mm[1] - y) * end > 0.0


def test_a_leg_on_the_centre_line_has_no_side():
    (found,) = stool(one(at=[0, 230], splay=None)).legs
    assert (found.side, found.drill.splay_deg, found.foot_mm[0]) == (0, 0.0, 0.0)


def test_a_leg_fills_its_mortise_where_no_diameter_is_given():
    reamed = {"bit": 16, "taper": 6, "mouth": 26}
    (plain,), (tapered,), (own,), (turned,) = (
        stool(one(**changes)).legs
        for changes in (
            {"mortise": 25},
            {"mortise": reamed},
            {"mortise": reamed, "diameter": 34},
            {"mortise": reamed, "diameter": 34, "foot_diameter": 28},
        )
    )
    assert (plain.diameter_mm, plain.foot_diameter_mm) == (25.0, 25.0)
    assert (tapered.diameter_mm, tapered.foot_diameter_mm) == (26.0, 26.0)
    assert (own.diameter_mm, own.foot_diameter_mm) == (34.0, 34.0)
    assert (turned.diameter_mm, turned.foot_diameter_mm) == (34.0, 28.0)


def test_a_reamed_mortise_without_a_mouth_is_filled_at_the_mouth_that_comes_of_it():
    (found,) = stool(one(splay=0, rake=0, mortise={"bit": 16, "taper": 6})).legs
    # 45 mm of seat at 6 degrees included open by 45 * 2 * tan 3 degrees = 4.717 mm.
    assert found.diameter_mm == pytest.approx(20.717, abs=5e-4)


@pytest.mark.parametrize("name", DEMOS)
def test_every_demo_can_be_built(name):
    assembly = demo(name)
    assert len(assembly.legs) == sum(len(table.names) for table in assembly.furniture.legs)
    assert assembly.drilled == assembly.furniture.seat.drill_from
    assert assembly.thickness_mm == assembly.furniture.seat.thickness


def test_the_faces_are_each_others_other():
    assert (other_face("top"), other_face("underside")) == ("underside", "top")


def test_a_blind_mortise_that_breaks_out_is_refused_with_the_depth_that_would_do():
    deep = {**LEG, "mirror": False, "splay": 0, "rake": 0, "mortise": {"bit": 25, "depth": 50}}
    assert refused([deep]) == [
        "legs[0].mortise.depth: front's mortise breaks out at the top by 5 mm; "
        "bore less than 45 mm deep, or leave depth out to bore through"
    ]
