"""Posts and spindles against vectors turned by scipy: where they pierce both faces, end above, and lean."""

from __future__ import annotations

import math
from itertools import pairwise

import numpy as np
import pytest

from jigs.bores import sections
from jigs.template import face_map, template
from layout.curves import flatten
from layout.drawing import Role
from layout.geometry import Affine
from tests.jigs.conftest import BLAMELESS, demo, strokes
from tests.jigs.furnished import (
    angles_of,
    face_z,
    four_angles,
    furnished,
    off_line_mm,
    refusals,
    tilt,
    to_floor,
)
from tests.jigs.test_cards import (
    assert_card_leans_with_the_bit,
    assert_cards_seen_two_ways_lean_with_the_bit,
)

NEAR = 1e-9
SEAT = {"width": 500, "depth": 464, "height": 450}
POST = {"name": "post", "at": [190, 330], "mirror": True, "length": 310, "mortise": 18}
ROW = {
    "name": "spindle",
    "count": 5,
    "deck": {"width": 280, "back": 420, "bow": 25},
    "crest": {"width": 390, "back": 520, "bow": 48, "height": 430},
    "mortise": {"bit": 13, "depth": 30},
}


def random_posts(count, seed, **more):
    rng = np.random.default_rng(seed)
    for k in range(count):
        splay, rake = (float(v) for v in rng.uniform(-20, 25, 2))
        seat = {**SEAT, "pitch": float(rng.uniform(-10, 20)), "drill_from": ("underside", "top")[k % 2]}
        end, y = (("front", 150), ("back", 300), ("back", 230), ("front", 230))[k // 2 % 4]
        said = {"splay": splay, "rake": rake, "end": end, "angles_from": ("plumb", "seat")[k // 8 % 2]}
        post = {**POST, **said, "at": [195, y], "length": float(rng.uniform(60, 600)), **more}
        yield post, furnished(BLAMELESS, None, {"posts": [post]}, **seat)


def rising(assembly, post, side):
    """The unit direction of a post out of the seat in the floor frame, by its table."""
    end = 1 if post["end"] == "back" else -1
    way = [side * math.tan(math.radians(post["splay"])), end * math.tan(math.radians(post["rake"])), 1.0]
    way = np.array(way) if post["angles_from"] == "plumb" else tilt(assembly).apply(way)
    return way / np.linalg.norm(way)


def test_a_post_rises_from_the_top_and_ends_where_its_lean_and_length_bring_it():
    for post, assembly in random_posts(64, 1):
        left, right = assembly.posts
        assert (left.name, right.name) == ("post left", "post right")
        for leg, side in ((left, -1), (right, 1)):
            start = to_floor(assembly, (side * post["at"][0], post["at"][1]))
            way = rising(assembly, post, side)
            upper = start + post["length"] * way
            assert (*leg.foot_mm, leg.foot_z_mm) == pytest.approx(tuple(upper), abs=NEAR)
            assert leg.axis_mm == pytest.approx(post["length"], abs=NEAR)
            assert (leg.kind, leg.drilled, leg.enters, leg.leans_with_bit) == ("post", "top", "top", True)
            end = 1 if post["end"] == "back" else -1
            in_seat = tilt(assembly).inv().apply(way)
            assert leg.toward_foot == pytest.approx(tuple(in_seat), abs=1e-12)
            assert angles_of(leg.floor) == pytest.approx(four_angles(way, side, end), abs=NEAR)
            assert angles_of(leg.drill) == pytest.approx(four_angles(in_seat, side, end), abs=NEAR)
            assert leg.seat == leg.drill
            turned = math.degrees(math.atan2(in_seat[1], in_seat[0])) - leg.drill.bearing_deg
            assert (turned + 180.0) % 360.0 - 180.0 == pytest.approx(0.0, abs=1e-6)
            below = np.array([*leg.top_mm, 0.0]) - in_seat * assembly.thickness_mm / in_seat[2]
            assert leg.underside_mm == pytest.approx(tuple(below[:2]), abs=NEAR)
            assert leg.in_seat_mm == pytest.approx(assembly.thickness_mm / in_seat[2], abs=NEAR)
            assert leg.top_mm == (side * post["at"][0], post["at"][1])


def test_posts_that_are_twins_are_mirror_images():
    for _, assembly in random_posts(16, 2):
        left, right = assembly.posts
        for one, other in ((left.foot_mm, right.foot_mm), (left.underside_mm, right.underside_mm)):
            assert one == (-other[0], other[1])
        assert left.drill[:4] == right.drill[:4]
        assert left.foot_z_mm == right.foot_z_mm


@pytest.mark.parametrize("pair", [("splay", "resultant"), ("rake", "sightline"), ("resultant", "sightline")])
@pytest.mark.parametrize("angles_from", ["plumb", "seat"])
def test_a_post_is_solved_from_two_angles_of_it(pair, angles_from):
    for pitch in (-10.0, 0.0, 4.0, 20.0):
        post = {**POST, "splay": 12, "rake": 7, "end": "back", "angles_from": angles_from}
        drawn = furnished(BLAMELESS, None, {"posts": [post]}, **SEAT, pitch=pitch).posts[1]
        given = drawn.drill if angles_from == "seat" else drawn.floor
        known = {name: getattr(given, f"{name}_deg") for name in pair}
        said = {**POST, "end": "back", "angles_from": angles_from, **known}
        left, right = furnished(BLAMELESS, None, {"posts": [said]}, **SEAT, pitch=pitch).posts
        if pair != ("splay", "resultant"):  # which two posts have, this one and another
            assert right.foot_mm == pytest.approx(drawn.foot_mm, abs=1e-8)
        assert left.foot_mm == (-right.foot_mm[0], right.foot_mm[1])
        solved = right.drill if angles_from == "seat" else right.floor
        assert [getattr(solved, f"{name}_deg") for name in pair] == pytest.approx(list(known.values()), abs=NEAR)


def test_a_post_on_the_centre_line_needs_only_a_rake():
    post = {**POST, "at": [0, 400], "mirror": False, "rake": 12}
    for pitch in (0, 6):
        (made,) = furnished(BLAMELESS, None, {"posts": [post]}, **SEAT, pitch=pitch).posts
        assert made.foot_mm[0] == 0.0
        assert made.floor.rake_deg == pytest.approx(12.0, abs=NEAR)
        run = made.foot_mm[1] - to_floor(demo_like(pitch), (0, 400))[1]
        assert run == pytest.approx(310 * math.sin(math.radians(12)), abs=NEAR)


def demo_like(pitch):
    return furnished(BLAMELESS, **SEAT, pitch=pitch)


def axis_of(leg):
    """A point of the axis and its direction, in the seat frame."""
    return np.array([*leg.top_mm, 0.0]), np.array(leg.toward_foot)


def test_a_posts_hole_is_an_ellipse_of_the_bits_cylinder_on_both_faces():
    for post, assembly in random_posts(16, 3):
        for leg in assembly.posts:
            for face in ("top", "underside"):
                (hole,) = sections(leg, face)
                turn = math.radians(hole.bearing_deg)
                along = np.array([math.cos(turn), math.sin(turn)])
                across = np.array([-along[1], along[0]])
                for t in np.linspace(0, 2 * math.pi, 12, endpoint=False):
                    rim = hole.centre + hole.along_mm * math.cos(t) * along + hole.across_mm * math.sin(t) * across
                    off = off_line_mm([*rim, face_z(assembly, face)], *axis_of(leg))
                    assert off == pytest.approx(post["mortise"] / 2, abs=NEAR)


@pytest.mark.parametrize("face", ["top", "underside"])
def test_the_template_draws_a_posts_hole_where_the_bit_comes_through(face):
    for post, assembly in random_posts(6, 4):
        piece = template(assembly, face)
        back = face_map(face)
        closed = [
            (role, np.array([back.point(p) for p in flatten(s.curve, 0.001)]))
            for role in (Role.SET_OUT, Role.HIDDEN)
            for s in strokes(piece.drawing, role)
            if s.closed
        ]
        for leg in assembly.posts:
            for shown, role in ((face, Role.SET_OUT), ({"top": "underside"}.get(face, "top"), Role.HIDDEN)):
                height = face_z(assembly, shown)
                offs = [
                    [off_line_mm([*p, height], *axis_of(leg)) for p in points]
                    for drawn_as, points in closed
                    if drawn_as is role and np.ptp(points, axis=0).max() > 10.0
                ]
                assert any(np.allclose(off, post["mortise"] / 2, atol=0.003) for off in offs), (leg.name, shown)


def test_a_blind_post_is_seen_on_the_top_alone():
    for _, assembly in list(random_posts(6, 5, mortise={"bit": 18, "depth": 25}))[::2]:
        assert assembly.drilled == "underside"
        below = dict(template(assembly, "underside").points)
        for leg in assembly.posts:
            assert sections(leg, "underside") == ()
            assert leg.name not in below
            assert dict(template(assembly, "top").points)[leg.name] == leg.top_mm


def test_a_card_of_any_post_stood_on_the_top_leans_with_the_bit_and_with_the_arrow():
    for _, assembly in random_posts(12, 6):
        assert_card_leans_with_the_bit(assembly)
        assert_cards_seen_two_ways_lean_with_the_bit(assembly)


# ---------------------------------------------------------------- spindles


def random_rows(count, seed):
    rng = np.random.default_rng(seed)
    for k in range(count):
        deck = {"width": float(rng.uniform(200, 380)), "back": 410.0, "bow": float(rng.uniform(-30, 40))}
        crest = {"width": float(rng.uniform(150, 500)), "back": float(rng.uniform(380, 600))}
        crest |= {"bow": float(rng.uniform(-60, 70)), "height": float(rng.uniform(250, 600))}
        row = {**ROW, "count": int(rng.integers(2, 9)), "deck": deck, "crest": crest}
        pitch = float(rng.uniform(-10, 20))
        yield row, furnished(BLAMELESS, None, {"spindles": [row]}, **SEAT, pitch=pitch, drill_from=FACE[k % 2])


FACE = ("underside", "top")


def circle_through(a, b, c):
    """Centre and radius, from the two lines of points as far from a as from b, and from b as from c."""
    a, b, c = map(np.asarray, (a, b, c))
    centre = np.linalg.solve(2 * np.array([b - a, c - b]), [b @ b - a @ a, c @ c - b @ b])
    return centre, float(np.linalg.norm(centre - a))


def assert_evenly_on_the_arc(points, row):
    left, middle, right = (-row["width"] / 2, row["back"] - row["bow"]), (0, row["back"]), None
    right = (row["width"] / 2, row["back"] - row["bow"])
    assert tuple(points[0]) == pytest.approx(left, abs=NEAR)
    assert tuple(points[-1]) == pytest.approx(right, abs=NEAR)
    chords = np.linalg.norm(np.diff(points, axis=0), axis=1)
    assert np.ptp(chords) < NEAR
    assert all(b[0] > a[0] for a, b in pairwise(points))
    if abs(row["bow"]) > 1e-9:
        centre, radius = circle_through(left, middle, right)
        assert [math.dist(p, centre) for p in points] == pytest.approx([radius] * len(points), rel=1e-9)
    else:
        assert [p[1] for p in points] == pytest.approx([row["back"]] * len(points), abs=NEAR)
    if len(points) % 2:
        assert tuple(points[len(points) // 2]) == pytest.approx(middle, abs=NEAR)
    # A positive bow: the middle stands behind the ends.
    for p in points[1:-1]:
        assert (p[1] - left[1]) * row["bow"] > 0.0 or row["bow"] == 0.0


def assert_row(row, assembly):
    spindles = assembly.spindles
    assert [leg.name for leg in spindles] == [f"spindle {k}" for k in range(1, row["count"] + 1)]
    assert_evenly_on_the_arc([leg.top_mm for leg in spindles], row["deck"])
    assert_evenly_on_the_arc([leg.foot_mm for leg in spindles], row["crest"])
    # The crest is level in space and stands plumb over the deck's middle by its height, whatever the seat's pitch.
    top = to_floor(assembly, (0, row["deck"]["back"]))[2] + row["crest"]["height"]
    for leg in spindles:
        assert leg.foot_z_mm == pytest.approx(top, abs=NEAR)
        start, upper = to_floor(assembly, leg.top_mm), np.array([*leg.foot_mm, leg.foot_z_mm])
        way = upper - start
        in_seat = tilt(assembly).inv().apply(way)
        assert off_line_mm(upper, start, tilt(assembly).apply(leg.toward_foot)) < NEAR
        assert leg.axis_mm == pytest.approx(np.linalg.norm(way), abs=NEAR)
        assert angles_of(leg.floor) == pytest.approx(four_angles(way, leg.side, leg.end), abs=NEAR)
        assert angles_of(leg.drill) == pytest.approx(four_angles(in_seat, leg.side, leg.end), abs=NEAR)
        assert leg.side == (0 if abs(leg.top_mm[0]) < 1e-6 else math.copysign(1, leg.top_mm[0]))
        assert (leg.kind, leg.drilled, leg.leans_with_bit) == ("spindle", "top", True)
        below = np.array([*leg.top_mm, 0.0]) - in_seat * assembly.thickness_mm / in_seat[2]
        assert leg.underside_mm == pytest.approx(tuple(below[:2]), abs=NEAR)
    for left, right in zip(spindles, reversed(spindles), strict=True):
        assert left.foot_mm == pytest.approx((-right.foot_mm[0], right.foot_mm[1]), abs=NEAR)
        assert left.drill[:4] == pytest.approx(right.drill[:4], abs=NEAR)


def test_a_row_of_spindles_is_evenly_spaced_and_each_hits_its_own_point_of_the_crest():
    for row, assembly in random_rows(40, 7):
        assert_row(row, assembly)


def test_the_mates_chairs_spindles_hit_their_crest():
    deck = {"width": 300.0, "back": 398.0, "bow": 22.0}
    crest = {"width": 400.0, "back": 500.0, "bow": 45.0, "height": 470.0}
    assembly = demo("mates-chair")
    assert_row({"count": 7, "deck": deck, "crest": crest}, assembly)
    resultants = {round(leg.drill.resultant_deg, 3) for leg in assembly.spindles}
    assert len(resultants) == 4


def test_straight_rows_and_half_circles_can_be_made():
    straight = {**ROW, "deck": {"width": 280, "back": 420}, "crest": {"width": 280, "back": 420, "height": 300}}
    for leg in furnished(BLAMELESS, None, {"spindles": [straight]}, **SEAT).spindles:
        assert leg.drill.resultant_deg == pytest.approx(0.0, abs=1e-9)
        assert leg.foot_mm == pytest.approx(leg.top_mm, abs=1e-9)
    half = {**ROW, "deck": {"width": 280, "back": 400, "bow": 140}}
    assert_evenly_on_the_arc(
        [leg.top_mm for leg in furnished(BLAMELESS, None, {"spindles": [half]}, **SEAT).spindles],
        {"width": 280, "back": 400, "bow": 140},
    )


@pytest.mark.parametrize(
    ("changes", "said"),
    [
        ({"deck": {"width": 280, "back": 420, "bow": 141}}, "spindles[0]: a bow of 141 mm is more than half of the"),
        (
            {"crest": {"width": 390, "back": 2400, "height": 430}},
            "spindles[0].crest: spindle 1 would lean more than 60",
        ),
        ({"crest": {"width": 390, "back": -900, "height": 60}}, "spindles[0].crest: spindle 1 would lean more than 60"),
        ({"deck": {"width": 280, "back": 460}}, "spindles[0].deck: spindle 1's mortise on the top leaves the blank"),
        ({"deck": {"width": 40, "back": 420}}, "spindles[0].deck: spindle 2's bore meets that of spindle 1"),
        ({"mortise": {"bit": 13, "depth": 90}}, "spindles[0].mortise.depth: spindle 1's mortise breaks out"),
    ],
)
def test_rows_that_cannot_be_made_are_told_at_the_key_that_would_mend_them(changes, said):
    lines = refusals(BLAMELESS, None, {"spindles": [{**ROW, **changes}]}, **SEAT, pitch=6)
    assert lines[0].startswith(said)
    assert all(line.startswith("spindles[0]") for line in lines)


def test_a_crest_so_low_on_a_pitched_seat_that_spindles_would_point_down_is_refused():
    row = {**ROW, "deck": {"width": 440, "back": 430, "bow": 200}, "crest": {"width": 440, "back": 430, "height": 50}}
    (line,) = refusals(BLAMELESS, None, {"spindles": [row]}, **SEAT, pitch=20)
    assert line == (
        "spindles[0].crest: spindle 1 would lean more than 60 degrees from square to the seat; "
        "raise the crest, or bring it over the deck"
    )


@pytest.mark.parametrize(
    ("changes", "said"),
    [
        ({"at": [1000, 300]}, "posts[0].at: post left's mortise on the top leaves the blank by"),
        ({"at": [245, 300]}, "posts[0].at: post left's mortise on the top leaves the blank by"),
        ({"mortise": {"bit": 18, "depth": 60}}, "posts[0].mortise.depth: post left's mortise breaks out at the"),
        ({"at": [6, 300]}, "posts[0].at: post right's bore meets that of post left inside the seat"),
        ({"at": [190, 232]}, "posts[0].end: is not given, and the leg stands in the middle of the seat's depth"),
    ],
)
def test_posts_that_cannot_be_made_are_told_at_their_key(changes, said):
    lines = refusals(BLAMELESS, None, {"posts": [{**POST, "splay": 5, "rake": 5, **changes}]}, **SEAT)
    assert lines[0].startswith(said)


def test_a_post_may_not_meet_a_leg_within_the_seat():
    lines = refusals(BLAMELESS, None, {"posts": [{**POST, "at": [128, 228], "splay": 0, "rake": 0}]})
    assert any("inside the seat" in line and line.startswith("posts[0].at: post") for line in lines)


def test_a_part_without_diameters_fills_its_mortise():
    post = {**POST, "splay": 5, "rake": 5, "mortise": {"bit": 16, "taper": 6, "mouth": 20}}
    made = furnished(BLAMELESS, None, {"posts": [post], "spindles": [ROW]}, **SEAT)
    assert {(leg.diameter_mm, leg.foot_diameter_mm) for leg in made.posts} == {(20.0, 20.0)}
    assert {(leg.diameter_mm, leg.foot_diameter_mm) for leg in made.spindles} == {(13.0, 13.0)}
    thick = {**post, "diameter": 30, "end_diameter": 12}
    made = furnished(BLAMELESS, None, {"posts": [thick]}, **SEAT)
    assert {(leg.diameter_mm, leg.foot_diameter_mm) for leg in made.posts} == {(30.0, 12.0)}


def test_the_underside_is_the_mirrored_plan():
    assert face_map("underside") == Affine.mirror_x()
