"""Each caution, word for word, on a design that is unwise in that way alone."""

from __future__ import annotations

import math
import re
from dataclasses import replace

import pytest
from scipy.spatial.transform import Rotation
from shapely import LineString, Point, Polygon, affinity

from jigs.assembly import assemble
from jigs.bores import Section
from jigs.checks import THIN_EDGE_MM, THIN_FLOOR_MM, THIN_WEB_MM, TRIP_MM, cautions
from jigs.grain import grain_bearing_deg, wood_along_grain_mm
from jigs.problems import Caution, SpecError
from jigs.spec import parse_spec
from layout.curves import flatten
from tests.jigs.conftest import BLAMELESS, DEMOS, LEG, _lines, demo, spec_text, stool


def told(legs, head=None, **seat):
    return [(caution.code, caution.where, caution.text) for caution in cautions(stool(legs, head, **seat))]


def leg(**changes):
    return {**LEG, **changes}


def one(**changes):
    return leg(mirror=False, splay=0, rake=0, **changes)


def test_a_blameless_stool_is_told_nothing():
    assert cautions(stool()) == ()


def test_feet_beyond_the_seat_are_told_for_twins_together():
    assert told([leg(splay=15)]) == [
        (
            "trip",
            "legs[0]",
            # 125 mm out at the underside, 405 mm above the floor: 108.5 mm on, and the foot's own half-width 12.9 mm.
            "front left, front right: the foot stands 46.5 mm outside the seat and can trip a passer-by; "
            "lessen the lean or move the mortise in",
        )
    ]


def test_a_foot_that_just_reaches_the_edge_is_told_and_one_that_stays_inside_is_not():
    def foot_at(x):
        return told([one(at=[x, 150], mortise=20, foot_diameter=60)])

    assert foot_at(170.0 + TRIP_MM - 0.1) == []
    assert [code for code, *_ in foot_at(170.0 + TRIP_MM + 0.1)] == ["trip"]


@pytest.mark.parametrize("pitch", [-10, 0, 8, 20])
def test_how_far_a_foot_stands_out_is_measured_as_seen_from_above(pitch):
    assembly = stool([leg(name="back", at=[125, 230], splay=0, rake=16)], pitch=pitch, depth=300, height=700)
    turn = Rotation.from_euler("x", -pitch, degrees=True)
    seat = Polygon([turn.apply([x, y, 0.0])[:2] for x, y in flatten(assembly.blank.curve, 0.01)])
    found = assembly.legs[0]
    # The foot's cut on the floor is an ellipse along the rake; its far end and the round of it leave the seat last.
    long = found.foot_diameter_mm / 2 / math.cos(math.radians(16.0))
    outside = [
        seat.exterior.distance(spot)
        for t in range(3600)
        for spot in [
            Point(
                found.foot_mm[0] + found.foot_diameter_mm / 2 * math.cos(math.radians(t / 10)),
                found.foot_mm[1] + long * math.sin(math.radians(t / 10)),
            )
        ]
        if not seat.contains(spot)
    ]
    (trip,) = [caution for caution in cautions(assembly) if caution.code == "trip"]
    assert f"the foot stands {max(outside):.1f}".removesuffix(".0") in trip.text


def test_little_wood_between_a_mortise_and_the_edge_is_told_with_how_much():
    assert told([one(at=[180, 150], mortise=20)]) == [
        (
            "thin-edge",
            "legs[0]",
            "front: only 10 mm of wood between the mortise and the seat's edge at the underside, "
            "and 12 mm or more is usual; move the mortise in or lessen the lean",
        ),
        (
            "thin-edge",
            "legs[0]",
            "front: only 10 mm of wood between the mortise and the seat's edge at the top, "
            "and 12 mm or more is usual; move the mortise in or lessen the lean",
        ),
    ]
    assert told([one(at=[200 - 10 - THIN_EDGE_MM - 0.1, 150], mortise=20)]) == []


def test_the_edge_is_looked_at_where_the_bore_comes_through_too():
    # 168 + 45 tan 15 = 180.06 on the top, and half of the bore's ellipse there is 10 / cos 15 = 10.35.
    assert told([one(at=[168, 150], mortise=20, end="front") | {"splay": -15}]) == [
        (
            "thin-edge",
            "legs[0]",
            "front: only 9.6 mm of wood between the mortise and the seat's edge at the top, "
            "and 12 mm or more is usual; move the mortise in or lessen the lean",
        )
    ]


def test_a_bore_that_breaks_out_of_the_side_at_the_far_face_is_told():
    found = told([one(at=[165, 150], mortise=20, end="front") | {"splay": -28}])
    assert (
        "breaks-edge",
        "legs[0]",
        "front: the bore breaks out of the seat's side at the top; move the mortise in or lessen the lean",
    ) in found


def test_a_lean_beyond_twenty_five_degrees_from_square_is_steep_and_up_to_it_is_not():
    def lean(rake):
        return told([leg(mirror=False, at=[0, 140], splay=0, rake=rake)], depth=600, height=300)

    assert lean(24.9) == []
    assert lean(25.1) == [
        (
            "steep",
            "legs[0]",
            "front: the bit leans 25.1° from square to the seat and will skate; "
            "start the hole upright, or bore through a guide block",
        )
    ]


def test_steep_is_measured_from_square_to_a_pitched_seat():
    back = leg(name="back", mirror=False, at=[0, 400], splay=0, rake=18)
    assert told([back], depth=700, height=300, pitch=4) == []
    assert [code for code, *_ in told([back], depth=700, height=300, pitch=8)] == ["steep"]


def test_a_foot_on_the_other_side_of_the_centre_line_is_told():
    assert told([leg(mirror=False, at=[40, 150], end="front", splay=-10, rake=0)]) == [
        (
            "crossed",
            "legs[0]",
            "front: the foot stands on the other side of the centre line from its mortise; look at the sign of splay",
        )
    ]
    assert told([leg(mirror=False, at=[80, 150], end="front", splay=-10, rake=0)]) == []


def test_little_wood_between_two_bores_is_told_at_the_later_leg():
    close = [one(at=[-16, 150]), one(at=[16, 150]) | {"name": "prop"}]
    assert told(close) == [
        (
            "thin-web",
            "legs[1]",
            "prop: only 7 mm of wood between its bore and that of front; move them apart",
        )
    ]
    apart = (25 + THIN_WEB_MM + 0.1) / 2
    assert told([one(at=[-apart, 150]), one(at=[apart, 150]) | {"name": "prop"}]) == []


def test_a_web_that_is_thin_only_where_mouths_widen_is_told():
    bores = {"mortise": {"bit": 16, "taper": 12}, "splay": 1, "rake": 0, "end": "front"}
    found = told([leg(at=[15, 150]) | bores])
    assert [code for code, *_ in found] == ["thin-web"]


def test_little_wood_left_above_a_blind_mortise_is_told():
    def deep(depth):
        return told([one(at=[0, 100], mortise={"bit": 25, "depth": depth})])

    assert deep(45 - THIN_FLOOR_MM) == []
    assert deep(40) == [
        (
            "thin-floor",
            "legs[0]",
            "front: the mortise leaves only 5 mm of wood at the top, and 6 mm or more is usual; bore less deep",
        )
    ]


def test_cautions_speak_in_the_makers_units():
    legs = [{**LEG, "mirror": False, "splay": 0, "rake": 0, "at": [6.25, 6], "mortise": 1}]
    found = told(legs, {"units": "in"}, width=14, depth=12, thickness=2, height=18)
    assert found[0][2] == (
        "front: only 1/4 in of wood between the mortise and the seat's edge at the underside, "
        "and 15/32 in or more is usual; move the mortise in or lessen the lean"
    )


def test_what_differs_between_twins_is_told_of_each():
    skew = [[-210, 0], [190, 0], [190, 300], [-210, 300]]
    found = told(
        [leg(at=[150, 150], end="front", splay=8, rake=0)], shape="polygon", points=skew, width=None, depth=None
    )
    assert [(code, text.split(":")[0]) for code, _, text in found] == [("trip", "front left"), ("trip", "front right")]


def test_a_foot_beyond_the_middle_of_the_depth_is_told():
    assert told([leg(mirror=False, at=[0, 130], end="front", splay=0, rake=-10)]) == [
        (
            "crossed",
            "legs[0]",
            "front: the foot stands beyond the middle of the seat's depth from its mortise; look at the sign of rake",
        )
    ]
    assert told([leg(mirror=False, at=[0, 70], end="front", splay=0, rake=-10)]) == []


# What stands above the seat, and between the legs


POST = {"name": "post", "at": [80, 255], "mirror": True, "splay": 8, "rake": 10, "length": 400, "mortise": 19}
ROW = {
    "name": "rod",
    "count": 5,
    "deck": {"width": 100, "back": 250},
    "crest": {"width": 160, "back": 320, "height": 400},
    "mortise": 11,
}


def topped(*tables, **seat):
    """What is told of a stool with more tables: pairs of a table's title and what is in it."""
    text = spec_text(**seat)
    text += "".join(f"\n[[{title}]]\n" + "\n".join(_lines(table)) for title, table in tables)
    assembly = assemble(parse_spec(text.encode(), "chair.toml"), "chair.toml")
    return [(caution.code, caution.where, caution.text) for caution in cautions(assembly)]


def test_posts_and_spindles_with_wood_enough_are_told_nothing():
    assert topped(("posts", POST), ("spindles", ROW)) == []


def test_a_post_near_the_edge_is_told_from_the_face_that_it_enters():
    found = topped(("posts", {**POST, "at": [80, 280], "splay": 0, "rake": 0}))
    assert [(code, where) for code, where, _ in found] == [("thin-edge", "posts[0]")] * 2
    assert found[0][2] == (
        "post left, post right: only 10.5 mm of wood between the mortise and the seat's edge at the top, "
        "and 12 mm or more is usual; move the mortise in or lessen the lean"
    )


def test_a_post_that_leaves_the_blank_before_the_underside_is_told():
    found = topped(("posts", {**POST, "at": [80, 285], "splay": 0, "rake": -20, "end": "back"}))
    assert (
        "breaks-edge",
        "posts[0]",
        "post left, post right: the bore breaks out of the seat's side at the underside; "
        "move the mortise in or lessen the lean",
    ) in found


def test_a_blind_mortise_of_a_post_is_measured_to_the_underside():
    assert topped(("posts", {**POST, "splay": 0, "rake": 0, "mortise": {"bit": 19, "depth": 41}})) == [
        (
            "thin-floor",
            "posts[0]",
            "post left, post right: the mortise leaves only 4 mm of wood at the underside, "
            "and 6 mm or more is usual; bore less deep",
        )
    ]


def test_a_steep_post_is_told():
    assert topped(("posts", {**POST, "rake": 27, "splay": 0})) == [
        (
            "steep",
            "posts[0]",
            "post left, post right: the bit leans 27.0° from square to the seat and will skate; "
            "start the hole upright, or bore through a guide block",
        )
    ]


def test_a_row_of_spindles_is_told_once_of_the_worst():
    row = {**ROW, "deck": {"width": 70, "back": 250}, "crest": {"width": 70, "back": 320, "height": 400}}
    ((code, where, text),) = topped(("spindles", row))
    assert (code, where) == ("thin-web", "spindles[0]")
    # 17.5 mm apart, square to the bores, less a bit of 11 mm.
    assert re.fullmatch(
        r"rod 2, rod 3, rod 4, rod 5: only 6.5 mm of wood between its bore and that of rod \d; move them apart "
        r"\(the worst: rod \d\)",
        text,
    )


def test_a_post_bored_near_a_leg_is_told_at_the_post():
    found = topped(("posts", {**POST, "at": [97, 232], "splay": 0, "rake": 0}))
    assert [(code, where) for code, where, _ in found] == [("thin-web", "posts[0]")] * 2
    assert ["that of back left" in found[0][2], "that of back right" in found[1][2]] == [True, True]


def test_cautions_about_stretchers_are_told_with_the_others():
    bars = [
        {"name": "side", "between": ["front left", "back left"], "height": 150, "diameter": 20, "tenon": 30},
        {"name": "rung", "between": ["front left", "front right"], "height": 150, "diameter": 20, "tenon": 30},
    ]
    found = topped(*(("stretchers", bar) for bar in bars))
    assert {(code, where) for code, where, _ in found} == {
        ("tenon-through", "stretchers[0]"),
        ("tenon-through", "stretchers[1]"),
        ("tenons-meet", "stretchers[1]"),
    }


# Short grain


def test_little_wood_along_the_grain_is_told_where_the_grain_runs_to_the_near_edge():
    near = [one(at=[170, 150], mortise=30)]
    # 200 - 170 - 15 = 15 mm to the right, and 135 mm to the front and the back.
    text = "front: short grain: only 15 mm of wood along the grain to the seat's edge on the {}, "
    text += "less than the mortise's width of 30 mm; move the mortise in or turn the grain"
    assert told(near, grain="across") == [
        ("short-grain", "legs[0]", text.format("underside")),
        ("short-grain", "legs[0]", text.format("top")),
    ]
    assert told(near, grain="fore-and-aft") == []
    assert told(near) == []


def test_as_much_wood_along_the_grain_as_the_mortise_is_wide_is_enough():
    assert told([one(at=[154.9, 150], mortise=30)], grain="across") == []
    assert [code for code, *_ in told([one(at=[155.1, 150], mortise=30)], grain="across")] == ["short-grain"] * 2


@pytest.mark.parametrize("grain_deg", [0.0, 20.0, 45.0, 90.0, -35.0])
def test_wood_along_the_grain_is_what_lines_along_it_run_through(grain_deg):
    blank = demo("slipway-stool").blank
    mortise = Section((120.0, 90.0), 16.0, 13.0, 37.0)
    circle = affinity.scale(Point(0, 0).buffer(1.0, 180), 16.0, 13.0, origin=(0, 0))
    ellipse = affinity.translate(affinity.rotate(circle, 37.0, origin=(0, 0)), *mortise.centre)
    wood = Polygon(flatten(blank.curve, 0.01)).difference(ellipse)
    # Grain turns from the fore-and-aft line toward the right as seen from above.
    x, y = math.sin(math.radians(grain_deg)), math.cos(math.radians(grain_deg))
    runs = []
    for off in [k / 10 for k in range(-170, 171)]:
        at = (mortise.centre[0] + off * y, mortise.centre[1] - off * x)
        line = LineString([(at[0] - 900 * x, at[1] - 900 * y), (at[0] + 900 * x, at[1] + 900 * y)])
        if line.intersection(ellipse).length > 0.0:
            runs += [part.length for part in line.intersection(wood).geoms]
    seat = stool(grain=grain_deg).furniture.seat
    assert wood_along_grain_mm(blank, mortise, grain_bearing_deg(seat)) == pytest.approx(min(runs), abs=0.05)


# The whole piece

INNER = [leg(at=[60, 190], splay=0, rake=0), leg(name="back", at=[60, 310], splay=0, rake=0)]


def inner(head=None, legs=INNER, **seat):
    """By code, what is told of a large seat whose legs stand far inside."""
    return {code: (where, text) for code, where, text in told(legs, head, **{"width": 500, "depth": 500, **seat})}


def test_a_seat_that_a_light_load_tips_is_told_with_each_load():
    found = inner()
    assert list(found) == ["tips", "tips-published"]
    # 6.02 kg of wood hold it by 72.5 mm against loads 177.5 mm out at the sides: 24 N; at the corners 59 N × (84.9 +
    # 12.5) against loads 256.2 mm out: 22 N.
    where, text = found["tips"]
    assert where == "seat"
    assert text == (
        "so light a load set down on the seat's edge tips it: 24 N (2.5 kg) at the front, 22 N (2.3 kg) at the front "
        "right, 24 N (2.5 kg) at the right, 22 N (2.3 kg) at the back right, 24 N (2.5 kg) at the back, 22 N (2.3 kg) "
        "at the back left, 24 N (2.5 kg) at the left, 22 N (2.3 kg) at the front left; spread the feet or bring the "
        "edge in (weighed at 500 kg/m³, no wood given; a static sum as a guide and no test)"
    )


def test_loads_are_in_pounds_for_a_maker_in_inches():
    legs = [{**LEG, "at": [2.5, y], "name": name, "splay": 0, "rake": 0, "mortise": 1} for name, y in BY_INCHES]
    _, text = inner({"units": "in"}, legs, width=20, depth=20, thickness=1.75, height=18)["tips"]
    newtons, pounds = (float(re.search(pattern, text)[1]) for pattern in (r"(\d+) N \(", r"\(([\d.]+) lb\)"))
    assert pounds == pytest.approx(newtons / 4.448, abs=0.2)


BY_INCHES = (("front", 7.5), ("back", 12.5))


def test_the_published_loads_are_told_where_they_tip_a_seat_and_not_of_a_table():
    where, text = inner()["tips-published"]
    assert where == "seat"
    told_of = re.fullmatch(
        r"the loads of EN 1022, 600 N down 60 mm inside the seat's edge with 20 N outward, tip it to the "
        r"(?:front|back) (?:left|right) by ([\d.]+) N m; spread the feet \(a static sum as a guide and no test\)",
        text,
    )
    # At a corner 600 N stand 190 √2 mm from the middle, 171.3 mm outside the feet's 97.4; 59.1 N hold it by 97.4 mm.
    # The sides of a foot's polygon look up to 5.6 degrees past the corner: half a percent.
    assert float(told_of[1]) == pytest.approx(0.6 * 171.35 + 20 * 0.45 - 0.05907 * 97.35, rel=0.005)
    assert list(inner({"use": "table"})) == ["tips"]


def test_feet_that_do_not_enclose_the_centre_of_gravity_are_told_and_nothing_more_of_loads():
    # The middle of the seat is 150 mm back, and the hindmost foot reaches to 112.5 mm; the legs' own weight pulls the
    # centre 8 mm to the front.
    (found,) = told([leg(at=[150, 40], splay=0, rake=0), one(at=[0, 100]) | {"name": "prop"}])
    assert found[:2] == ("does-not-stand", "legs")
    inside = re.fullmatch(
        r"it does not stand: its centre of gravity is ([\d.]+) mm outside the lines that join its feet; "
        r"spread the feet or move the mortises out",
        found[2],
    )
    slab, post = 400 * 300 * 45, math.pi * 12.5**2 * 405
    centre = (slab * 150 + post * (2 * 40 + 100)) / (slab + 3 * post)
    # The sides of the foot's polygon look up to 5.6 degrees past it: half a percent of the 41 mm to its middle.
    assert float(inside[1]) == pytest.approx(centre - 112.5, abs=0.25)


def test_one_or_two_legs_are_a_part_of_something_and_not_told_that_they_fall():
    assert told([leg()]) == []


def test_a_seat_height_outside_what_is_usual_for_its_use_is_told():
    def at(height, use):
        return told(BLAMELESS, {"use": use}, height=height)

    # 17 to 19 in are 431.8 to 482.6 mm (common practice, no source); EN 1729-1: size mark 5 is 430 mm.
    assert at(420, "dining") == [
        (
            "seat-height",
            "seat.height",
            "the seat is 420 mm high at its front edge; 431.8 mm to 482.6 mm is usual for a dining seat (common "
            "practice; EN 1729-1's nearest is 430 mm, size mark 5); raise it by 11.8 mm, or mean it",
        )
    ]
    assert at(431.8, "dining") == at(460, "low") == []
    assert [code for code, *_ in at(483, "dining")] == [code for code, *_ in at(600, "counter")] == ["seat-height"]
    assert at(470, "low")[0][2] == (
        "the seat is 470 mm high at its front edge; 260 mm to 460 mm is usual for a low seat (common practice, "
        "after the size marks of "
        "EN 1729-1); lower it by 10 mm, or mean it"
    )


def test_a_table_has_no_seat_height():
    assert told(BLAMELESS, {"use": "table"}, height=470) == []


def test_legs_that_differ_in_length_are_told_with_the_shortest_and_the_longest():
    # 405 mm under the seat, times the root of 1 + tan² 6° + tan² 5°, and of 1 + tan² 6° + tan² 9°.
    found = told([LEG, leg(name="back", at=[125, 215], rake=9)])
    assert found == [
        (
            "unequal-legs",
            "legs",
            "the legs differ by 3.5 mm in length, from underside to floor: shortest front left, front right (408.8 "
            "mm), longest back left, back right (412.3 mm); cut each to its own length, or the seat leaves its pitch",
        )
    ]


def test_legs_of_a_pitched_seat_are_told_to_differ():
    assert "unequal-legs" in [code for code, *_ in told(BLAMELESS, pitch=3)]


def test_what_is_said_of_how_legs_were_solved_is_told_of_twins_together():
    notes = tuple(Caution("two-ways", "legs[0]", f"front {side}: two leans would do") for side in ("left", "right"))
    assert cautions(replace(stool(), notes=notes)) == (
        Caution("two-ways", "legs[0]", "front left, front right: two leans would do"),
    )


@pytest.mark.parametrize("name", DEMOS)
def test_a_code_is_one_word_for_other_programs(name):
    for caution in cautions(demo(name)):
        assert re.fullmatch(r"[a-z]+(-[a-z]+)*", caution.code)


def test_the_chandlers_table_is_blameless():
    assert cautions(demo("chandlers-table")) == ()


def of_code(found, code):
    return [text for this, _, text in found if this == code]


@pytest.mark.parametrize(("at", "splay"), [(168, 25), (163, 25), (165, 20)])
def test_the_wood_at_the_end_of_a_blind_bore_is_measured_to_the_seats_side(at, splay):
    """A post leans inward as it rises, so that its bore runs out to the side below."""
    post = {**POST, "at": [at, 150], "end": "back", "splay": -splay, "rake": 0, "mortise": {"bit": 22, "depth": 38}}
    found = topped(("posts", post), shape="rectangle", width=400, depth=300)
    (text,) = [words for words in of_code(found, "thin-edge") if "bore's end" in words]
    # The end of the axis, and the flat end's edge beyond it, square to the axis.
    lean = math.radians(splay)
    wood = 200 - at - 38 * math.sin(lean) - 11 * math.cos(lean)
    assert 5.0 < wood < THIN_EDGE_MM
    assert text.startswith(
        f"post left, post right: only {round(wood, 1):g} mm of wood between the mortise and the seat's edge"
    )


def test_a_blind_bore_that_leaves_through_the_side_is_told_of_a_post_and_refused_of_a_leg():
    mortise = {"bit": 22, "depth": 40}
    post = {**POST, "at": [178, 150], "end": "back", "splay": -25, "rake": 0, "mortise": mortise}
    found = topped(("posts", post), shape="rectangle", width=400, depth=300)
    assert of_code(found, "breaks-edge") == [
        "post left, post right: the bore breaks out of the seat's side at the bore's end; "
        "move the mortise in or lessen the lean"
    ]
    legs = [leg(at=[185, 150], end="back", splay=-40, rake=0, mortise={"bit": 20, "depth": 40})]
    with pytest.raises(SpecError, match="front left's bore comes out through the seat's side before it reaches its"):
        stool(legs, shape="rectangle", width=400, depth=300, corner_radius=None)


def test_a_bore_that_passes_under_a_notch_is_told_where_neither_face_shows_it():
    """Straight across below the tip of a notch in the front edge: clear of it on both faces, not between them."""
    notched = [[-200, 0], [-6, 0], [0, 40], [6, 0], [200, 0], [200, 300], [-200, 300]]
    bored = leg(mirror=False, at=[13, 52], end="front", splay=30, rake=0, mortise=16)
    seat = {"shape": "polygon", "points": notched, "width": None, "depth": None, "thickness": 45}
    found = told([bored], **seat)
    (text,) = [words for words in of_code(found, "thin-edge") if "between the bore's ends" in words]
    # The bit's radius of 8 mm, 12 mm behind the tip.
    assert text.startswith("front: only 4 mm of wood")


def test_a_mouth_that_is_wider_than_its_leg_is_told():
    def reamed(mouth):
        return told([one(at=[0, 150], end="back", mortise={"bit": 16, "taper": 10, "mouth": mouth}, diameter=30)])

    assert of_code(reamed(30), "loose") == []
    assert of_code(reamed(31), "loose") == [
        "front: the mortise is 31 mm wide at its mouth, and the leg 30 mm; ream less wide or leave the leg thicker"
    ]
    # A leg whose thickness is not said fills its mouth.
    assert of_code(told([one(at=[0, 150], end="back", mortise={"bit": 16, "taper": 10})]), "loose") == []


def test_a_ring_whose_bores_come_near_each_other_is_told_in_one_line():
    ring = {"name": "r", "count": 24, "circle": 150, "resultant": 5, "mortise": 12}
    text = spec_text([], shape="round", diameter=400, width=None, depth=None)
    text = text.replace("[[legs]]", "") + "\n[[rings]]\n" + "\n".join(_lines(ring))
    found = cautions(assemble(parse_spec(text.encode(), "ring.toml"), "ring.toml"))
    webs = [caution.text for caution in found if caution.code == "thin-web"]
    assert len(webs) == 1
    assert webs[0].startswith("r 2 to 24: only ")
