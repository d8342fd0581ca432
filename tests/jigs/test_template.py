"""The seat template, measured on its drawing: which way it is seen, where everything lies, and that it can be read."""

from __future__ import annotations

import math
import re

import numpy as np
import pytest
from scipy.spatial.transform import Rotation
from shapely import Point

from jigs.bores import sections
from jigs.quantities import format_angle
from jigs.template import MOST_PROOFS, SIGHTLINE_RUN_MM, edge_distances_mm, proofs
from jigs.template import template as unlettered
from layout.curves import Arc, flatten
from layout.drawing import Role
from layout.labels import lettered
from layout.operations import bounds
from tests.jigs.conftest import DEMOS, FACES, clashes, demo, fills, patch, polygon, stool, strokes, texts

SKEW_SEAT = {"shape": "polygon", "width": None, "depth": None, "points": [[-260, 0], [180, 0], [230, 320], [-150, 280]]}
SKEW_LEGS = [
    {"name": "near", "at": [120, 60], "splay": 9, "rake": 12, "mortise": {"bit": 16, "taper": 6}},
    {"name": "far", "at": [-110, 230], "splay": 14, "rake": 4, "mortise": {"bit": 16, "taper": 6}},
]


def template(assembly, face):
    """The template with its words, as it comes out where one page holds it."""
    return lettered(unlettered(assembly, face))


def skew(face="underside", **seat):
    """A seat with no symmetry at all, so that nothing mirrored can look right."""
    return stool(SKEW_LEGS, drill_from=face, **{**SKEW_SEAT, **seat})


def assembly_named(name):
    return skew(name.split()[1], pitch=7) if name.startswith("skew") else demo(name)


ALL = [*DEMOS, "skew underside", "skew top"]


def seen_from(face, points):
    """Plan coordinates as a face is seen with its front edge toward the reader."""
    return np.asarray(points) * ([-1.0, 1.0] if face == "underside" else [1.0, 1.0])


@pytest.mark.parametrize("face", FACES)
@pytest.mark.parametrize("name", ALL)
def test_the_outline_is_the_plan_seen_from_above_or_mirrored_from_below(name, face):
    assembly = assembly_named(name)
    (outline,) = strokes(template(assembly, face).drawing, Role.CUT)
    plan = flatten(assembly.blank.curve, 0.05)
    assert np.array(flatten(outline.curve, 0.05)) == pytest.approx(seen_from(face, plan), abs=1e-12)
    assert outline.closed


@pytest.mark.parametrize("face", FACES)
@pytest.mark.parametrize("name", ALL)
def test_the_points_are_the_mortises_centres_on_that_face(name, face):
    assembly = assembly_named(name)
    piece = template(assembly, face)
    one_face = len({part.drilled for part in assembly.bored}) == 1
    # Where parts are bored from both faces, one that stops short of the other face is not shown there.
    shown = [leg for leg in assembly.bored if one_face or leg.drilled == face or leg.mortise.depth is None]
    assert [point for point, _ in piece.points] == [part.name for part in shown]
    for leg in shown:
        wanted = leg.top_mm if face == "top" else (-leg.underside_mm[0], leg.underside_mm[1])
        assert dict(piece.points)[leg.name] == wanted


def ellipses(piece, role):
    """The mortises drawn in that role: full turns of an arc that are not the ring round a centre."""
    return [
        stroke.curve[0]
        for stroke in strokes(piece.drawing, role)
        if isinstance(stroke.curve[0], Arc) and abs(stroke.curve[0].sweep_deg) == 360.0 and stroke.curve[0].reach_mm > 2
    ]


def as_set(arcs, mirrored):
    """Arcs as sorted points on their edge, so that two drawings can be compared whichever way each runs."""
    sign = np.array([-1.0, 1.0]) if mirrored else np.array([1.0, 1.0])
    clouds = [np.array([arc.at(k / 8) for k in range(8)]) * sign for arc in arcs]
    return sorted(tuple(np.round(np.hstack((c.mean(axis=0), np.sort(c[:, 0]))), 6) + 0.0) for c in clouds)


@pytest.mark.parametrize("name", ALL)
def test_the_holes_of_one_template_are_the_dashed_holes_of_the_other_mirrored(name):
    assembly = assembly_named(name)
    top, underside = (template(assembly, face) for face in FACES)
    assert as_set(ellipses(top, Role.SET_OUT), False) == as_set(ellipses(underside, Role.HIDDEN), True)
    assert as_set(ellipses(top, Role.HIDDEN), False) == as_set(ellipses(underside, Role.SET_OUT), True)


def on_ellipse(section, points):
    bearing = math.radians(section.bearing_deg)
    u, v = (points - np.array(section.centre)).T
    ahead, aside = u * math.cos(bearing) + v * math.sin(bearing), v * math.cos(bearing) - u * math.sin(bearing)
    return np.abs(np.hypot(ahead / section.along_mm, aside / section.across_mm) - 1.0).max() < 1e-9


@pytest.mark.parametrize("face", FACES)
@pytest.mark.parametrize("name", ALL)
def test_each_mortise_is_drawn_where_its_bore_meets_this_face_and_dashed_where_it_meets_the_other(name, face):
    assembly = assembly_named(name)
    piece = template(assembly, face)
    other = "top" if face == "underside" else "underside"
    for shown, role in ((face, Role.SET_OUT), (other, Role.HIDDEN)):
        wanted = [section for part in assembly.bored for section in sections(part, shown)]
        drawn = [seen_from(face, [arc.at(k / 24) for k in range(24)]) for arc in ellipses(piece, role)]
        assert len(drawn) == len(wanted)
        for section in wanted:
            assert any(on_ellipse(section, points) for points in drawn)


def foot_on_the_face(assembly, leg):
    """The place of the foot, or of a post's upper end, in the seat frame's plan, by rotation."""
    turn = Rotation.from_euler("x", assembly.frame.pitch_deg, degrees=True)
    return turn.apply([*leg.foot_mm, leg.foot_z_mm - assembly.frame.height_mm])[:2]


def set_out_on(assembly, face):
    """The parts whose sightlines a face shows: those drilled from it, or all where there is only one such face."""
    from_here = {part.drilled for part in assembly.bored} in ({"top"}, {"underside"})
    return [part for part in assembly.bored if (from_here or part.drilled == face) and part.drill.leans]


@pytest.mark.parametrize("face", FACES)
@pytest.mark.parametrize("name", ALL)
def test_each_arrow_ends_beyond_the_seats_edge_on_the_line_from_its_mortise_to_its_foot(name, face):
    assembly = assembly_named(name)
    piece = template(assembly, face)
    seat = polygon(assembly.blank.curve)
    tips = [seen_from(face, fill.curve[0].start) for fill in fills(piece.drawing) if fill.role is Role.SET_OUT]
    tails = [seen_from(face, fill.curve[1].start) for fill in fills(piece.drawing) if fill.role is Role.SET_OUT]
    for leg, tip, tail in zip(set_out_on(assembly, face), tips, tails, strict=True):
        mortise = np.array(leg.on_face(face))
        way = foot_on_the_face(assembly, leg) - mortise
        way /= np.linalg.norm(way)
        run = tip - mortise
        assert abs(run[0] * way[1] - run[1] * way[0]) < 1e-9
        assert run @ way > 0.0
        assert (tip - tail) @ way > 0.0
        assert not seat.contains(Point(tip))
        assert seat.contains(Point(tip - (SIGHTLINE_RUN_MM + 0.1) * way))
        assert not seat.contains(Point(tip - (SIGHTLINE_RUN_MM - 0.1) * way))


@pytest.mark.parametrize("face", FACES)
@pytest.mark.parametrize("name", ALL)
def test_a_sightline_runs_back_from_the_mortise_on_the_seat_so_that_a_card_can_stand_there(name, face):
    assembly = assembly_named(name)
    piece = template(assembly, face)
    for leg in [part for part in set_out_on(assembly, face) if part.drilled == face]:
        centre = dict(piece.points)[leg.name]
        backs = [
            stroke.curve[0].start
            for stroke in strokes(piece.drawing, Role.SET_OUT)
            if len(stroke.curve) == 1 and stroke.curve[-1].end == centre
        ]
        (back,) = backs
        way = seen_from(face, foot_on_the_face(assembly, leg)) - centre
        assert (np.array(centre) - back) @ way / np.linalg.norm(way) == pytest.approx(math.dist(centre, back))
        assert math.dist(centre, back) >= (58.0 if leg.kind != "spindle" else 30.0) - 1e-9
        assert assembly.blank.edge_distance_mm(tuple(seen_from(face, back))) > -0.01


@pytest.mark.parametrize("face", FACES)
@pytest.mark.parametrize("name", DEMOS)
def test_proof_lengths_are_the_distances_between_the_points_of_the_drawing(name, face):
    assembly = demo(name)
    piece = template(assembly, face)
    points = dict(piece.points)
    found = proofs(assembly, face)
    assert len({frozenset(pair) for *pair, _ in found}) == len(found) <= MOST_PROOFS
    here = [part.name for part in assembly.bored if part.drilled == face and part.kind != "spindle"]
    row = [part.name for part in assembly.spindles if part.drilled == face]
    measured = [*here, *row[:1], *row[-1:]]
    if len(measured) < 6:
        # The front of a top face has nothing bored into it but the legs that come through there.
        measured += [part.name for part in assembly.bored if part.drilled != face and part.mortise.depth is None]
    measured = measured if len(measured) > 1 else [leg.name for leg in assembly.legs]
    assert {name for *pair, _ in found for name in pair} == set(measured)
    assert len(found) == min(MOST_PROOFS, len(measured) * (len(measured) - 1) // 2)
    for one, other, mm in found:
        assert mm == pytest.approx(math.dist(points[one], points[other]), abs=1e-9)
    printed = [re.fullmatch(r"(.+) – (.+)  (.+)", text.text) for text in texts(piece.drawing)]
    rows = {match.groups() for match in printed if match}
    assert rows == {(one, other, assembly.length(mm)) for one, other, mm in found}


def test_a_round_of_many_legs_has_its_neighbours_and_the_longest_others_as_proofs():
    legs = [
        {
            "name": str(k),
            "at": [
                round(300 * math.cos(k * math.pi / 4 + 0.2), 3),
                round(400 + 300 * math.sin(k * math.pi / 4 + 0.2), 3),
            ],
            "splay": 5,
            "rake": 5,
            "mortise": 20,
        }
        for k in (0, 5, 2, 7, 4, 1, 6, 3)
    ]
    table = stool(legs, width=800, depth=800)
    assert {frozenset(pair) for *pair, _ in proofs(table, "underside")} == {
        frozenset((str(k), str((k + 1) % 8))) for k in range(8)
    }


def test_two_legs_have_one_proof_length_and_one_leg_none():
    pair = stool([{"name": "a", "at": [100, 100], "mirror": True, "splay": 5, "rake": 5, "mortise": 20}])
    assert [round(mm, 9) for *_, mm in proofs(pair, "underside")] == [200.0]
    one = stool([{"name": "a", "at": [100, 100], "splay": 5, "rake": 5, "mortise": 20}])
    assert not any("Proof" in text.text for text in texts(template(one, "underside").drawing))


@pytest.mark.parametrize("face", FACES)
@pytest.mark.parametrize("name", DEMOS)
def test_no_lettering_lies_over_other_lettering_or_over_the_line_to_be_cut_or_off_the_seat(name, face):
    piece = template(demo(name), face)
    (outline,) = strokes(piece.drawing, Role.CUT)
    seat = polygon(outline.curve)
    assert clashes(piece.drawing) == []
    assert [text.text for text in texts(piece.drawing) if not seat.contains(patch(text))] == []


@pytest.mark.parametrize("face", FACES)
@pytest.mark.parametrize("name", DEMOS)
def test_the_template_says_which_face_it_is_which_way_is_front_and_where_left_is(name, face):
    assembly = demo(name)
    piece = template(assembly, face)
    said = [text.text for text in texts(piece.drawing)]
    assert {face.upper(), "FRONT"} <= set(said)
    assert f"left legs are on your {'right' if face == 'underside' else 'left'}" in said
    kinds = {part.kind for part in assembly.bored if part.drilled == face}
    (role,) = [words for words in said if "bore" in words and "face" in words]
    assert (role == "not the face to bore from") == (not kinds)
    assert role.startswith("bore") == bool(kinds)
    if len({part.drilled for part in assembly.bored}) > 1:
        assert all(f"{kind}s" in role for kind in kinds)
    assert piece.notice.startswith(face.upper())
    # True however the pages are turned, which the paper decides.
    assert "with FRONT toward you" in piece.notice
    assert f"legs named left lie to your {'RIGHT' if face == 'underside' else 'left'}" in piece.notice
    lefts = [x for leg, (x, _) in piece.points if leg.endswith("left")]
    assert all(x > 0 for x in lefts) if face == "underside" else all(x < 0 for x in lefts)


@pytest.mark.parametrize("name", DEMOS)
def test_front_is_written_by_the_front_edge_with_an_arrow_to_it(name):
    for face in FACES:
        piece = template(demo(name), face)
        (word,) = [text for text in texts(piece.drawing) if text.text == "FRONT"]
        assert word.at[1] < 0.25 * demo(name).blank.bounds.height
        heads = [fill for fill in fills(piece.drawing) if fill.role is Role.NOTE]
        front = min(heads, key=lambda head: math.dist(head.curve[0].start, word.at))
        tip, one, other = (segment.start for segment in front.curve)
        assert tip[1] < min(one[1], other[1])
        assert tip[0] == pytest.approx((one[0] + other[0]) / 2)


@pytest.mark.parametrize("name", DEMOS)
def test_each_leg_has_its_settings_written_beside_it_and_the_sightline_from_both_lines(name):
    assembly = demo(name)
    said = [text.text for text in texts(template(assembly, assembly.drilled).drawing)]
    legs = [part for part in assembly.bored if part.drilled == assembly.drilled and part.kind != "spindle"]
    for leg in legs:
        assert leg.name in said
        assert f"lean {format_angle(leg.drill.resultant_deg)}" in " ".join(said)
        assert f"bevel {format_angle(leg.drill.bevel_deg)}" in " ".join(said)
        assert f"sightline {format_angle(leg.drill.sightline_deg)} from fore-and-aft" in said
        assert f"({format_angle(90.0 - leg.drill.sightline_deg)} from across)" in said
    way = "the bit leans to the arrow" if assembly.drilled == "underside" else "the bit leans away from the arrow"
    assert said.count(way) == len(legs)


@pytest.mark.parametrize("face", FACES)
@pytest.mark.parametrize(("grain", "angle"), [("fore-and-aft", 0.0), ("across", 90.0), (30, 30.0), (-40, -40.0)])
def test_the_grains_arrow_lies_the_same_way_in_the_wood_on_either_face(face, grain, angle):
    piece = template(stool(grain=grain, width=600, depth=500), face)
    ends = [
        seen_from(face, fill.curve[0].start)
        for fill in fills(piece.drawing)
        if fill.role is Role.NOTE and fill.curve[0].start[1] > 20.0
    ]
    (p, q) = ends
    # From the fore-and-aft line toward the right, as seen from above.
    found = math.degrees(math.atan2(*(p - q)))
    assert (found - angle + 90.0) % 180.0 == pytest.approx(90.0, abs=1e-9)


def test_a_leg_that_stands_square_has_no_sightline_to_run_out():
    legs = [{"name": "post", "at": [0, 150], "rake": 0, "mortise": 25}]
    piece = template(stool(legs), "underside")
    assert [fill for fill in fills(piece.drawing) if fill.role is Role.SET_OUT] == []
    assert "square to the face" in [text.text for text in texts(piece.drawing)]


@pytest.mark.parametrize("face", FACES)
def test_a_blind_mortise_whose_line_would_leave_the_seat_is_drawn_on_either_template(face):
    legs = [
        {"name": "a", "at": [175, 150], "end": "front", "splay": -40, "rake": 0, "mortise": {"bit": 12, "depth": 10}}
    ]
    assembly = stool(legs)
    assert assembly.blank.edge_distance_mm(assembly.legs[0].top_mm) < 0.0
    piece = template(assembly, face)
    assert dict(piece.points)["a"] == pytest.approx(seen_from(face, assembly.legs[0].on_face(face)))


def test_the_smallest_seat_is_drawn_though_its_words_find_no_room():
    tiny = stool(
        [{"name": "post", "at": [0, 22], "rake": 5, "mortise": 6}], shape="round", diameter=50, width=None, depth=None
    )
    for face in FACES:
        box = bounds(template(tiny, face).drawing)
        assert box.x0 <= -25.0
        assert box.x1 >= 25.0


@pytest.mark.parametrize("name", ALL)
def test_the_edge_lies_before_and_behind_each_mortise(name):
    assembly = assembly_named(name)
    for leg in assembly.bored:
        for face in FACES:
            back, ahead = edge_distances_mm(assembly, leg, face)
            assert back < 0.0 < ahead


def test_a_hole_that_is_bored_from_the_other_face_says_so_on_this_one():
    assembly = demo("mates-chair")
    top, underside = ([text.text for text in texts(template(assembly, face).drawing)] for face in ("top", "underside"))
    assert top.count("comes through from the underside") == len(assembly.legs)
    assert top.count("comes through from the top") == 0
    assert underside.count("bored from the top") == len(assembly.posts) + len(assembly.spindles)
    assert {part.name for part in assembly.bored} <= set(top) & set(underside)
