"""However a leg's lean is said, the leg that stands has what was said; measured on its own points in space."""

from __future__ import annotations

import math
import re
from itertools import combinations

import numpy as np
import pytest
from scipy.spatial.transform import Rotation

from jigs.bores import mouth_mm
from tests.jigs.conftest import FACES
from tests.jigs.furnished import face_z, four_angles, furnished, off_line_mm, refusals, tilt, to_floor

FORWARD, INSIDE = 1e-9, 1e-7
ANGLES = ("splay", "rake", "resultant", "sightline")
KNOWNS = (*ANGLES, "foot_across", "foot_along", "inside_side", "inside_end", "axis")
# What says the same thing twice: how far to the side, how far to the end, how far in all.
ROWS = ({"splay", "foot_across", "inside_side"}, {"rake", "foot_along", "inside_end"}, {"resultant", "axis"})
PAIRS = [pair for pair in combinations(KNOWNS, 2) if not any(set(pair) <= row for row in ROWS)]
WIDTH, DEPTH = 480, 420
OVAL = {"shape": "oval", "width": WIDTH, "depth": DEPTH}
FOOT = 26
LEG = {"name": "front", "at": [115, 125], "mirror": True, "mortise": 22, "foot_diameter": FOOT}


def leg_in_space(assembly, leg):
    """The mortise's centre on the drilled face and the foot, both in the floor frame."""
    face = leg.drilled
    return to_floor(assembly, leg.on_face(face), face_z(assembly, face)), np.array([*leg.foot_mm, 0.0])


def measured(assembly, leg, name, from_seat=False):
    """A known, off the leg's two points in space."""
    start, foot = leg_in_space(assembly, leg)
    way = foot - start
    if name in ANGLES:
        seen = tilt(assembly).inv().apply(way) if from_seat else way
        return four_angles(seen, leg.side, leg.end)[ANGLES.index(name)]
    if name == "foot_across":
        return (leg.side or 1) * foot[0]
    if name == "foot_along":
        return foot[1]
    if name == "axis":
        return np.linalg.norm(foot - underside(assembly, start, way))
    return inside(assembly, leg, foot, way, name)


def underside(assembly, start, way):
    """Where a line leaves the underside."""
    square = tilt(assembly).apply([0, 0, 1])
    on_it = to_floor(assembly, (0, 0), face_z(assembly, "underside"))
    return start + way * (square @ (on_it - start)) / (square @ way)


def inside(assembly, leg, foot, way, name):
    """From the outermost of the points in which the leg's own generators meet the floor, out to the ellipse's edge."""
    one = np.cross(way, [0.3, 0.8, 0.1])
    two = np.cross(way, one)
    ends = []
    for generator in (one, two):
        square = leg.foot_diameter_mm / 2 * generator / np.linalg.norm(generator)
        ends.append(square - way * square[2] / way[2])
    k, sign = (0, leg.side) if name == "inside_side" else (1, leg.end)
    turn = math.atan2(sign * ends[1][k], sign * ends[0][k])
    point = foot + math.cos(turn) * ends[0] + math.sin(turn) * ends[1]
    shorter = math.cos(math.radians(assembly.furniture.seat.pitch))
    half = np.array([WIDTH / 2, DEPTH / 2 * shorter])
    from_middle = (point[:2] - [0.0, half[1]]) / half
    reach = half[k] * math.sqrt(1.0 - from_middle[1 - k] ** 2)
    return reach - sign * (point[k] - [0.0, half[1]][k])


def stances(seed, count):
    rng = np.random.default_rng(seed)
    for k in range(count):
        seat = {"pitch": float(rng.uniform(-10, 20)), "drill_from": FACES[k % 2]}
        yield rng, {**OVAL, **seat}, ("plumb", "seat")[k // 2 % 2]


def assert_twins(assembly):
    """Left and right legs, if there are two, are mirror images to the last bit."""
    if len(assembly.legs) != 2:
        return
    left, right = assembly.legs
    assert (left.name, right.name) == ("front left", "front right")
    for one, other in (
        (left.top_mm, right.top_mm),
        (left.underside_mm, right.underside_mm),
        (left.foot_mm, right.foot_mm),
    ):
        assert one == (-other[0], other[1])
    assert left.floor[:4] == right.floor[:4]
    assert left.drill[:4] == right.drill[:4]
    assert (left.axis_mm, left.in_seat_mm) == (right.axis_mm, right.in_seat_mm)
    assert left.drill.bearing_deg == pytest.approx((180.0 - right.drill.bearing_deg) % 360.0, abs=1e-12)


@pytest.mark.parametrize("pair", PAIRS, ids="-".join)
def test_any_two_knowns_of_a_leg_are_true_of_the_leg_that_they_make(pair):
    for rng, seat, angles_from in stances(sum(map(len, pair)), 8):
        leg = {**LEG, "angles_from": angles_from}
        splay, rake = (float(v) for v in rng.uniform(2, 9, 2))
        drawn = furnished([{**leg, "splay": splay, "rake": rake, "angles_from": "plumb"}], **seat)
        from_seat = angles_from == "seat"
        said = {name: float(measured(drawn, drawn.legs[1], name, from_seat)) for name in pair}
        solved = furnished([{**leg, **said}], **seat)
        assert_twins(solved)
        for part in solved.legs:
            for name in pair:
                near = INSIDE if name.startswith("inside") else FORWARD
                assert measured(solved, part, name, from_seat) == pytest.approx(said[name], abs=near), (name, seat)


@pytest.mark.parametrize("known", ["rake", "resultant", "foot_along", "inside_end", "axis"])
def test_one_known_makes_a_leg_on_the_centre_line(known):
    for rng, seat, angles_from in stances(len(known), 8):
        leg = {**LEG, "name": "back", "at": [0, 320], "mirror": False, "angles_from": angles_from}
        drawn = furnished([{**leg, "rake": float(rng.uniform(2, 12)), "angles_from": "plumb"}], **seat)
        said = float(measured(drawn, drawn.legs[0], known, angles_from == "seat"))
        solved = furnished([{**leg, known: said}], **seat)
        (part,) = solved.legs
        assert part.foot_mm[0] == 0.0
        near = INSIDE if known.startswith("inside") else FORWARD
        assert measured(solved, part, known, angles_from == "seat") == pytest.approx(said, abs=near)


def test_splay_and_rake_from_the_seat_are_what_is_drilled():
    for rng, seat, _ in stances(3, 12):
        splay, rake = (float(v) for v in rng.uniform(-8, 14, 2))
        made = furnished([{**LEG, "splay": splay, "rake": rake, "angles_from": "seat"}], **seat)
        assert_twins(made)
        for leg in made.legs:
            assert (leg.drill.splay_deg, leg.drill.rake_deg) == pytest.approx((splay, rake), abs=FORWARD)
            assert measured(made, leg, "rake", True) == pytest.approx(rake, abs=FORWARD)


def test_splay_and_rake_from_plumb_are_what_stands():
    for rng, seat, _ in stances(4, 12):
        splay, rake = (float(v) for v in rng.uniform(-8, 14, 2))
        made = furnished([{**LEG, "splay": splay, "rake": rake}], **seat)
        assert_twins(made)
        for leg in made.legs:
            assert [measured(made, leg, name) for name in ("splay", "rake")] == pytest.approx([splay, rake], abs=1e-9)


# ---------------------------------------------------------------- pictures


def picture_of(start, foot, view, askew_deg, px_per_mm=2.3):
    """Two points on the leg and two on a level line, as a camera far off sees them: pixels run right and down.

    `view` names the plan's axis that runs to the right in the picture, with its sign.
    """
    axis, sign = view
    turn = Rotation.from_euler("z", askew_deg, degrees=True)

    def seen(point):
        flat = turn.apply([sign * point[axis] * px_per_mm, -point[2] * px_per_mm, 0.0])
        return [float(flat[0]) + 4000.0, float(flat[1]) + 3000.0]

    high, low = start + 0.1 * (foot - start), start + 0.9 * (foot - start)
    level = [np.array([-300.0, -300.0, 40.0]), np.array([300.0, 300.0, 40.0])]
    return {"level": [seen(point) for point in level], "leg": [seen(high), seen(low)]}


@pytest.mark.parametrize("taken_from", ["right", "left"])
@pytest.mark.parametrize(("x", "mirror"), [(115, True), (-115, True), (115, False), (-115, False)])
def test_pictures_of_a_leg_give_back_that_leg(x, mirror, taken_from):
    """Whichever side the pictured leg stands on; a twin is its mirror image."""
    for rng, seat, _ in stances(7, 6):
        splay, rake = (float(v) for v in rng.uniform(-6, 14, 2))
        end = ("front", "back")[int(rng.integers(2))]
        leg = {**LEG, "at": [x, 125 if end == "front" else 300], "mirror": mirror}
        drawn = furnished([{**leg, "splay": splay, "rake": rake}], **seat)
        pictured = next(part for part in drawn.legs if (part.top_mm[0] > 0) == (x > 0))
        start, foot = leg_in_space(drawn, pictured)
        views = {
            "front": picture_of(start, foot, (0, 1.0), 4.0),
            "side": picture_of(start, foot, (1, 1.0 if taken_from == "right" else -1.0), -3.0),
        }
        solved = furnished([{**leg, "picture": {**views, "taken_from": taken_from}}], **seat)
        for part, given in zip(solved.legs, drawn.legs, strict=True):
            assert part.foot_mm == pytest.approx(given.foot_mm, abs=1e-8)
            assert [measured(solved, part, k) for k in ("splay", "rake")] == pytest.approx([splay, rake], abs=1e-9)
        assert_twins(solved)
        assert [(note.code, note.where) for note in solved.notes] == [("picture", "legs[0]")] * len(solved.legs)
        assert all(
            "stand back" in note.text and part.name in note.text
            for note, part in zip(solved.notes, solved.legs, strict=True)
        )


def test_a_leg_on_the_centre_line_needs_its_side_picture_only():
    drawn = furnished([{**LEG, "name": "back", "at": [0, 320], "mirror": False, "rake": 11}], **OVAL)
    view = picture_of(*leg_in_space(drawn, drawn.legs[0]), (1, 1.0), 2.0)
    leg = {**LEG, "name": "back", "at": [0, 320], "mirror": False}
    (part,) = furnished([{**leg, "picture": {"side": view}}], **OVAL).legs
    assert part.floor.rake_deg == pytest.approx(11.0, abs=FORWARD)
    assert part.foot_mm[0] == 0.0
    assert refusals([{**LEG, "picture": {"side": view}}], **OVAL) == [
        "legs[0]: splay needs a front picture; point at the leg in one"
    ]


# ---------------------------------------------------------------- a chair to copy, a point to aim at


def test_a_leg_measured_at_two_heights_is_copied():
    for rng, seat, _ in stances(9, 10):
        splay, rake = (float(v) for v in rng.uniform(-6, 14, 2))
        drawn = furnished([{**LEG, "splay": splay, "rake": rake}], **seat)
        start, foot = leg_in_space(drawn, drawn.legs[1])
        heights = [20.0, 310.0]
        points = [foot + (start - foot) * h / start[2] for h in heights]
        chair = {"heights": heights, "across": [float(p[0]) for p in points], "along": [float(p[1]) for p in points]}
        solved = furnished([{**LEG, "measured": chair}], **seat)
        assert_twins(solved)
        for part in solved.legs:
            assert [measured(solved, part, k) for k in ("splay", "rake")] == pytest.approx([splay, rake], abs=1e-9)


@pytest.mark.parametrize("x", [115, -115])
def test_a_leg_aims_at_its_point_and_its_twin_at_the_twin_of_that(x):
    for rng, seat, _ in stances(11, 10):
        point = [float(rng.uniform(-60, 60)), float(rng.uniform(100, 300)), float(rng.uniform(900, 2500))]
        solved = furnished([{**LEG, "at": [x, 125], "aim_at": point}], **seat)
        assert_twins(solved)
        for part in solved.legs:
            start, foot = leg_in_space(solved, part)
            own = (part.top_mm[0] > 0) == (x > 0)
            target = np.array([point[0] if own else -point[0], *point[1:]])
            assert off_line_mm(target, start, foot - start) < FORWARD


def test_a_leg_without_a_twin_on_the_left_aims_at_the_point_as_it_is_given():
    point = [40.0, 210.0, 1500.0]
    made = furnished([{**LEG, "at": [-115, 125], "mirror": False, "aim_at": point}], **OVAL)
    start, foot = leg_in_space(made, made.legs[0])
    assert off_line_mm(point, start, foot - start) < FORWARD


# ---------------------------------------------------------------- neighbours and rings


@pytest.mark.parametrize("known", ["splay", "rake", "resultant", "foot_along", "axis"])
def test_a_foot_stands_equally_far_from_the_two_that_are_named_wherever_they_stand_in_the_file(known):
    # Three feet, two named; the third between them and to the back. The leg that waits for them comes first.
    for rng, seat, angles_from in stances(13, 6):
        front = {**LEG, "name": "a", "mirror": False, "splay": 9, "rake": 7}
        other = {**LEG, "name": "b", "mirror": False, "at": [-120, 150], "splay": 5, "rake": 2, "end": "front"}
        third = {**LEG, "name": "c", "mirror": False, "at": [30, 330], "equal_from": ["a", "b"]}
        drawn = furnished([{**third, "rake": float(rng.uniform(4, 12))}, front, other], **seat)
        value = float(measured(drawn, drawn.legs[0], known, angles_from == "seat"))
        solved = furnished([{**third, known: value, "angles_from": angles_from}, front, other], **seat)
        assert [leg.name for leg in solved.legs] == ["c", "a", "b"]
        feet = {leg.name: leg.foot_mm for leg in solved.legs}
        assert math.dist(feet["c"], feet["a"]) == pytest.approx(math.dist(feet["c"], feet["b"]), abs=FORWARD)
        assert measured(solved, solved.legs[0], known, angles_from == "seat") == pytest.approx(value, abs=FORWARD)


def test_a_neighbour_that_is_no_leg_is_told_with_the_legs_that_are():
    front = {**LEG, "splay": 9, "rake": 7}
    back = {"name": "back", "at": [0, 330], "mortise": 22, "rake": 9, "equal_from": ["front left", "frnt right"]}
    assert refusals([front, back], **OVAL) == [
        "legs[1].equal_from: frnt right is no leg whose foot is known without this one; "
        "name two of front left, front right"
    ]
    both = [{**back, "name": name, "at": at, "equal_from": pair} for name, at, pair in (
        ("a", [100, 300], ["b", "b"]), ("b", [-100, 300], ["a", "a"]))]  # fmt: skip
    assert all("is no leg whose foot is known without this one" in line for line in refusals(both, **OVAL))


RING = {"name": "leg", "circle": 240, "mortise": 22, "foot_diameter": FOOT}


@pytest.mark.parametrize("face", FACES)
@pytest.mark.parametrize("count", [3, 4, 5, 7])
@pytest.mark.parametrize("first", [None, 20.0, -45.0])
def test_a_rings_legs_stand_evenly_and_lean_straight_out(count, first, face):
    for pitch in (-10.0, 0.0, 13.0):
        ring = {**RING, "count": count, "first": first, "resultant": 13.5}
        made = furnished((), None, {"rings": [ring]}, shape="round", diameter=400, width=None, depth=None,
                         pitch=pitch, drill_from=face)  # fmt: skip
        assert [leg.name for leg in made.legs] == [f"leg {k}" for k in range(1, count + 1)]
        centre = np.array([0.0, 200.0])
        spokes = [np.array(leg.on_face(face)) - centre for leg in made.legs]
        turn = Rotation.from_euler("z", 360.0 / count, degrees=True)
        for k, (leg, spoke) in enumerate(zip(made.legs, spokes, strict=True)):
            assert np.linalg.norm(spoke) == pytest.approx(120.0, abs=FORWARD)
            following = spokes[(k + 1) % count]
            assert turn.apply([*spoke, 0.0])[:2] == pytest.approx(following, abs=FORWARD)
            start, foot = leg_in_space(made, leg)
            way = tilt(made).inv().apply(foot - start)
            way /= np.linalg.norm(way)
            expected = np.array([*(spoke / 120.0 * math.sin(math.radians(13.5))), -math.cos(math.radians(13.5))])
            assert way == pytest.approx(expected, abs=1e-12)
        if first is None:
            assert sorted(np.round([-s[0] for s in spokes], 9)) == sorted(np.round([s[0] for s in spokes], 9))
            low = min(s[1] for s in spokes)
            assert sum(abs(s[1] - low) < 1e-9 for s in spokes) == 2
        else:
            bearing = math.degrees(math.atan2(spokes[0][1], spokes[0][0]))
            assert (bearing - first + 180.0) % 360.0 - 180.0 == pytest.approx(0.0, abs=FORWARD)


@pytest.mark.parametrize("face", FACES)
@pytest.mark.parametrize("feet", [330.0, 240.0, 150.0])
def test_a_rings_feet_stand_on_the_circle_that_is_given(feet, face):
    ring = {**RING, "count": 5, "feet_circle": feet, "centre": [10, 190]}
    seat = {"shape": "round", "diameter": 400, "width": None, "depth": None, "drill_from": face}
    made = furnished((), None, {"rings": [ring]}, **seat)
    for leg in made.legs:
        assert math.dist(leg.foot_mm, (10, 190)) == pytest.approx(feet / 2, abs=FORWARD)
    assert refusals((), None, {"rings": [ring]}, **seat, pitch=3) == [
        "rings[0]: feet_circle is for a level seat; give the resultant from square to the seat"
    ]


# ---------------------------------------------------------------- what is refused, and what would do


@pytest.mark.parametrize(
    ("given", "said"),
    [
        ({"splay": 9, "foot_across": 150}, ("disagree", "keep one of them, and add one of rake")),
        ({"splay": 9, "rake": 8, "resultant": 20}, ("do not agree", "keep splay and rake")),
        ({"splay": 20, "resultant": 12}, ("splay", "12")),
        ({"resultant": 12}, ("resultant", "add one of splay, rake, sightline")),
        ({"axis": 120, "splay": 4}, ("axis", "")),
        ({"aim_at": [0, 200, 300], "splay": 4}, ("aim_at and splay both say how the leg leans", "keep aim_at alone")),
        ({"aim_at": [0, 200, 1200], "measured": {"heights": [0, 300], "across": [1, 2], "along": [1, 2]}},
         ("measured and aim_at both say how the leg leans", "keep measured alone, or leave it out")),
        ({"aim_at": [0, 200, 300]}, ("below the mortise, not above it", "or more above the floor")),
        ({"measured": {"heights": [100, 110], "across": [1, 2], "along": [1, 2]}},
         ("the two heights are only 10 mm apart", "measure at least 50 mm apart")),
    ],
)  # fmt: skip
def test_what_makes_no_leg_is_told_at_its_table_with_what_would_do(given, said):
    (line,) = refusals([{**LEG, **given}], **OVAL)
    assert line.startswith("legs[0]: ")
    rule, _, cure = line.partition("; ")
    assert said[0] in rule
    assert said[1] in cure


def test_legs_that_cannot_be_solved_are_told_together():
    bad = [{**LEG, "resultant": 12}, {**LEG, "name": "back", "at": [115, 320], "axis": 100, "rake": 5}]
    lines = refusals(bad, **OVAL)
    assert [line.partition(":")[0] for line in lines] == ["legs[0]", "legs[1]"]


def test_of_two_legs_that_have_what_was_said_the_other_is_told():
    made = furnished([{**LEG, "resultant": 14, "splay": 9}], **OVAL, pitch=4)
    assert [(note.code, note.where) for note in made.notes] == [("two-ways", "legs[0]")] * 2
    assert all("nearest to plumb" in note.text or "rakes outward" in note.text for note in made.notes)


# ---------------------------------------------------------------- what a table leaves to be found


@pytest.mark.parametrize(("side", "end"), [(10, 10), (0, 0), (25, 4)])
def test_a_foot_as_thick_as_a_reamed_mouth_stands_as_far_inside_as_was_asked(side, end):
    """The mouth's width follows from the lean, and the foot's from the mouth."""
    leg = {"name": "front", "at": [115, 125], "mirror": True, "mortise": {"bit": 16, "taper": 6}}
    made = furnished([{**leg, "inside_side": side, "inside_end": end}], **OVAL, pitch=4)
    for part in made.legs:
        assert part.foot_diameter_mm == pytest.approx(mouth_mm(part), abs=1e-9)
        assert part.foot_diameter_mm > 20.0
        found = [measured(made, part, name) for name in ("inside_side", "inside_end")]
        assert found == pytest.approx([side, end], abs=INSIDE)


def test_a_measured_chair_that_leans_more_than_any_is_refused():
    leg = {**LEG, "mortise": {"bit": 16, "taper": 12}}
    steep = {"heights": [100, 160], "across": [150, 150], "along": [0, 600]}
    (line,) = refusals([{**leg, "measured": steep}])
    assert re.fullmatch(r"legs\[0\]: the leg would lean 8\d\.\d°, and 60° is the most; look at the figures again", line)


def test_twins_between_twins_are_mirrored():
    front = {**LEG, "name": "front", "at": [150, 60], "splay": 6, "rake": 5}
    back = {**LEG, "name": "back", "at": [90, 300], "splay": 4, "rake": 14}
    middle = {**LEG, "name": "middle", "at": [140, 190], "end": "back", "splay": 9}
    middle["equal_from"] = ["front left", "back left"]
    for at in ([140, 190], [-140, 190]):
        made = furnished([front, back, {**middle, "at": at}], width=500, depth=420)
        left, right = (next(part for part in made.legs if part.name == f"middle {side}") for side in ("left", "right"))
        assert (left.foot_mm[0], left.foot_mm[1]) == pytest.approx((-right.foot_mm[0], right.foot_mm[1]), abs=1e-9)
        # The table's neighbours are those of the leg that it places; its twin has their twins.
        placed, names = (right, ("front left", "back left")) if at[0] > 0 else (left, ("front left", "back left"))
        feet = {part.name: part.foot_mm for part in made.legs}
        apart = [math.dist(placed.foot_mm, feet[name]) for name in names]
        assert apart[0] == pytest.approx(apart[1], abs=1e-8)


def test_a_leg_on_the_centre_line_does_not_aim_off_it():
    back = {**LEG, "name": "back", "at": [0, 300], "mirror": False}
    (line,) = refusals([{**back, "aim_at": [100, 100, 1300]}])
    assert line == (
        "legs[0]: the point aimed at is off the centre line, and the leg on it would lean sideways; "
        "aim at a point with x = 0, or move the mortise"
    )


def test_a_ring_beside_the_centre_line_has_legs_that_lean_off_it():
    ring = {"name": "r", "count": 6, "circle": 240, "centre": [60, 180], "first": 0, "resultant": 10, "mortise": 20}
    front = {**LEG, "splay": 2, "rake": 2, "at": [200, 40]}
    made = furnished([front], width=500, depth=420, shape="rectangle", tables={"rings": [ring]})
    on_line = [part for part in made.legs if abs(part.underside_mm[0]) < 1e-6]
    assert len(on_line) == 2
    for part in on_line:
        assert part.side == -1
        assert part.foot_mm[0] < -20.0
        assert part.drill.splay_deg > 1.0


def test_posts_that_two_leans_would_do_for_are_told_as_legs_are():
    post = {"name": "post", "at": [150, 300], "mirror": True, "splay": 5, "resultant": 12, "length": 300, "mortise": 19}
    made = furnished([{**LEG, "splay": 6, "rake": 5}], width=500, depth=420, tables={"posts": [post]})
    assert [(note.code, note.where) for note in made.notes] == [("two-ways", "posts[0]")] * 2


@pytest.mark.parametrize("pitch", [-10, -3, 0, 3, 4.5, 7, 10, 20])
def test_a_resultant_of_nought_is_square_to_what_it_is_measured_from(pitch):
    back = {**LEG, "name": "back", "at": [0, 280], "mirror": False, "resultant": 0, "angles_from": "seat"}
    (part,) = furnished([back], width=500, depth=420, pitch=pitch).legs
    assert part.drill.resultant_deg == pytest.approx(0.0, abs=FORWARD)
    plumb = {**back, "angles_from": "plumb"}
    (part,) = furnished([plumb], width=500, depth=420, pitch=pitch).legs
    assert part.floor.resultant_deg == pytest.approx(0.0, abs=FORWARD)


@pytest.mark.parametrize(
    ("more", "line"),
    [
        (
            {"equal_from": ["back left", "back right"]},
            "aim_at and equal_from both say how the leg leans; keep aim_at alone, or leave it out",
        ),
        ({"angles_from": "seat"}, "angles_from says nothing of a leg that is given by its aim_at; leave it out"),
    ],
)
def test_what_stands_beside_a_start_and_says_nothing_is_refused(more, line):
    back = {**LEG, "name": "back", "at": [120, 300], "splay": 5, "rake": 5}
    found = refusals([{**LEG, "aim_at": [0, 180, 1300], **more}, back], **OVAL)
    assert found == [f"legs[0]: {line}"]


def test_an_outline_of_very_many_parts_is_no_outline_to_stand_inside_of():
    points = [[200 * math.cos(k / 200 * math.pi), 200 + 200 * math.sin(k / 200 * math.pi)] for k in range(400)]
    leg = {**LEG, "at": [90, 120], "inside_side": 10, "inside_end": 10}
    (line,) = refusals([leg], shape="polygon", points=points, width=None, depth=None)
    assert line == (
        "legs[0]: inside_side is measured to an outline of 300 lines and curves at most, and this one has 400; "
        "simplify it, or give splay and rake"
    )


@pytest.mark.parametrize(
    ("more", "line"),
    [
        ({"at": [150, 300], "resultant": 5}, "resultant alone does not say how the post leans; give two of splay, "),
        (
            {"at": [0, 300], "sightline": 20, "rake": 5},
            "a post on the centre line leans to neither side, so sightline ",
        ),
    ],
)
def test_a_post_is_told_of_what_a_post_is_known_by(more, line):
    post = {"name": "post", "length": 300, "mortise": 19, **more}
    found = refusals([{**LEG, "splay": 6, "rake": 5}], width=500, depth=420, tables={"posts": [post]})
    assert [words.startswith(f"posts[0]: {line}") for words in found] == [True]
    assert not any(word in found[0] for word in ("foot_along", "inside_end", "axis"))


def test_a_post_far_back_on_a_low_pitched_seat_is_none_of_the_floors_business():
    post = {"name": "post", "at": [60, 800], "mirror": True, "length": 300, "mortise": 19, "angles_from": "seat"}
    leg = {**LEG, "at": [115, 60], "splay": 6, "rake": 5}
    made = furnished([leg], height=120, thickness=20, pitch=-10, width=400, depth=850,
                     tables={"posts": [{**post, "splay": 5, "rake": 8}]})  # fmt: skip
    assert [part.drill.rake_deg for part in made.posts] == pytest.approx([8.0, 8.0], abs=FORWARD)
