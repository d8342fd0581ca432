"""Sightline strips against the outline as many short chords."""

from __future__ import annotations

import math

import numpy as np
import pytest
from shapely import LineString, Point

from jigs.quantities import format_angle
from jigs.strips import RUN_MM, WIDTH_MM, strip_pieces, strips
from layout.curves import Arc
from layout.drawing import Role
from layout.operations import bounds
from tests.jigs.conftest import DEMOS, clashes, demo, fills, patch, polygon, stool, strokes, texts

# The chords stand this near to the outline; a sightline crosses it at an angle, which may stretch the error.
CHORD_MM, TICK_MM = 1e-5, 1e-3

SHAPES = {
    "round": {"shape": "round", "diameter": 340, "width": None, "depth": None},
    "oval": {"shape": "oval", "width": 420, "depth": 330},
    "d": {"shape": "d", "width": 400, "depth": 340},
    "shield": {"shape": "shield", "width": 440, "depth": 400, "back_width": 320},
    "skew": {
        "shape": "polygon",
        "width": None,
        "depth": None,
        "points": [[-210, 0], [190, 0], [230, 320], [-190, 280]],
    },
}


def assembly_named(name):
    if name not in SHAPES:
        return demo(name)
    legs = [
        {"name": "front", "at": [85, 90], "mirror": True, "splay": 11, "rake": 14, "mortise": 20},
        {"name": "back", "at": [70, 220], "mirror": True, "splay": 7, "rake": 16, "mortise": 20},
    ]
    return stool(legs, drill_from="top", pitch=3, **SHAPES[name])


def edges(assembly, leg):
    """Distances along the sightline, toward the foot positive, at which a long line crosses the seat's edge."""
    seat = polygon(assembly.blank.curve, CHORD_MM)
    centre = np.array(leg.on_face(leg.drilled))
    way = np.array(leg.toward_foot[:2]) / np.hypot(*leg.toward_foot[:2])
    crossings = seat.exterior.intersection(LineString([centre - 9000 * way, centre + 9000 * way]))
    found = sorted(float((np.array(point.coords[0]) - centre) @ way) for point in crossings.geoms)
    return max(d for d in found if d < 0), min(d for d in found if d > 0)


def legs_and_strips(assembly):
    for strip, piece in zip(strips(assembly), strip_pieces(assembly), strict=True):
        for leg in strip.legs:
            yield leg, strip, piece


@pytest.mark.parametrize("name", [*DEMOS, *SHAPES])
def test_the_ticks_are_where_the_sightline_crosses_the_seats_edge(name):
    assembly = assembly_named(name)
    for leg, strip, piece in legs_and_strips(assembly):
        back, ahead = edges(assembly, leg)
        assert (strip.back_mm, strip.ahead_mm) == pytest.approx((back, ahead), abs=TICK_MM)
        uprights = [
            stroke.curve[0].start[0]
            for stroke in strokes(piece.drawing, Role.SET_OUT)
            if not isinstance(stroke.curve[0], Arc)
            and stroke.curve[0].start[0] == stroke.curve[-1].end[0]
            and abs(stroke.curve[0].start[0]) > 1e-9
        ]
        assert sorted(uprights) == pytest.approx([back, ahead], abs=TICK_MM)


@pytest.mark.parametrize("name", [*DEMOS, *SHAPES])
def test_a_strip_passes_both_edges_and_its_arrow_runs_to_the_foot_from_the_mortises_centre(name):
    for _, strip, piece in legs_and_strips(assembly_named(name)):
        (cut,) = strokes(piece.drawing, Role.CUT)
        box = bounds(piece.drawing)
        assert polygon(cut.curve).bounds == pytest.approx((box.x0, box.y0, box.x1, box.y1))
        assert (box.x0, box.x1) == pytest.approx((strip.back_mm - RUN_MM, strip.ahead_mm + RUN_MM))
        assert (box.y0, box.y1) == (-WIDTH_MM / 2, WIDTH_MM / 2)
        rings = [s.curve[0] for s in strokes(piece.drawing, Role.SET_OUT) if isinstance(s.curve[0], Arc)]
        assert [ring.centre for ring in rings] == [(0.0, 0.0)]
        assert piece.points == tuple((leg.name, (0.0, 0.0)) for leg in strip.legs)
        (head,) = fills(piece.drawing)
        tip, *back = (segment.start for segment in head.curve)
        assert tip[1] == 0.0
        assert tip[0] > strip.ahead_mm
        assert all(x < tip[0] for x, _ in back)
        # The line itself runs through the whole strip along y = 0, pointing at both ends past the edges.
        along = LineString([(box.x0, 0.0), (box.x1, 0.0)])
        on_line = [s for s in strokes(piece.drawing, Role.SET_OUT) if along.covers(Point(s.curve[0].start))]
        starts = [s.curve[0].start[0] for s in on_line]
        assert min(starts) < strip.back_mm


@pytest.mark.parametrize("name", [*DEMOS, *SHAPES])
def test_every_leg_that_leans_has_one_strip_and_twins_on_a_seat_alike_both_sides_share_it(name):
    made = strips(assembly_named(name))
    names = [leg.name for strip in made for leg in strip.legs]
    assert sorted(names) == sorted(part.name for part in assembly_named(name).bored)
    owners = {leg.name: strip for strip in made for leg in strip.legs}
    for leg in names:
        if leg.endswith(" left"):
            twin = owners[leg.removesuffix("left") + "right"]
            assert (owners[leg] is twin) == (name != "skew")


def test_legs_of_unlike_lean_or_bit_do_not_share_a_strip():
    legs = [
        {"name": name, "at": [x, 70], "splay": 6, "rake": rake, "mortise": bit}
        for name, x, rake, bit in (("a", -125, 5, 25), ("b", 125, 5.05, 25), ("c", 90, 5, 25), ("d", -90, 5, 20))
    ]
    assert [[leg.name for leg in strip.legs] for strip in strips(stool(legs))] == [["a"], ["b"], ["c"], ["d"]]


def test_a_leg_that_stands_square_needs_no_strip():
    legs = [{"name": "post", "at": [0, 150], "rake": 0, "mortise": 25}]
    assert strips(stool(legs)) == ()
    assert strip_pieces(stool(legs)) == ()


@pytest.mark.parametrize("name", DEMOS)
def test_a_strip_says_whose_it_is_on_which_face_and_its_angles(name):
    assembly = demo(name)
    for leg, strip, piece in legs_and_strips(assembly):
        said = " ".join(text.text for text in texts(piece.drawing))
        assert strip.legs[0].name in said
        assert leg.name in said or "…" in said
        assert f"on the {leg.drilled}" in said
        assert f"bevel {format_angle(leg.drill.bevel_deg)}" in said
        assert f"lean {format_angle(leg.drill.resultant_deg)}" in said
        assert ("FOOT" if leg.kind == "leg" else "TOP") in said
        assert leg.drilled.upper() in piece.notice or "each strip says its face" in piece.notice


@pytest.mark.parametrize("name", DEMOS)
def test_a_strip_gives_the_sightline_from_both_lines(name):
    for leg, _, piece in legs_and_strips(demo(name)):
        said = " ".join(text.text for text in texts(piece.drawing))
        assert f"sightline {format_angle(leg.drill.sightline_deg)} from fore-and-aft" in said
        assert f"{format_angle(90.0 - leg.drill.sightline_deg)} from across" in said


def near_the_rim(long_names):
    """Legs so near to the edge on a small seat that there is hardly room for a word."""
    name = "the one that stands nearest to the stove in the canteen" if long_names else "a"
    legs = [{"name": name, "at": [30, 40], "mirror": True, "splay": 14, "rake": 10, "mortise": 12}]
    return stool(legs, shape="round", diameter=120, width=None, depth=None, thickness=20)


@pytest.mark.parametrize("name", [*DEMOS, *SHAPES, "small", "small with long names"])
def test_lettering_on_strips_lies_on_nothing_else(name):
    assembly = near_the_rim("long" in name) if name.startswith("small") else assembly_named(name)
    for piece in strip_pieces(assembly):
        assert clashes(piece.drawing) == []
        (cut,) = strokes(piece.drawing, Role.CUT)
        sheet = polygon(cut.curve)
        lines = [
            LineString([s.curve[0].start, s.curve[-1].end])
            for s in strokes(piece.drawing, Role.SET_OUT)
            if not math.isclose(math.dist(s.curve[0].start, s.curve[-1].end), 0.0, abs_tol=1e-9)
        ]
        for text in texts(piece.drawing):
            assert sheet.contains(patch(text)), text
            assert not any(line.intersects(patch(text)) for line in lines), text
