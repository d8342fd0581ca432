"""Angle cards, cut out, folded and stood on the printed template in space, beside the bit's shank."""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cache
from itertools import pairwise

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.spatial.transform import Rotation
from shapely import LineString, Polygon
from shapely.ops import unary_union

from jigs.cards import BLADE_MM, SAME_ANGLE_DEG, SPINDLE_ANGLE_DEG, card_pieces, cards, names_within, net
from jigs.quantities import format_angle
from jigs.template import template
from layout.drawing import Role
from tests.jigs.conftest import DEMOS, FACES, clashes, demo, fills, patch, polygon, stool, strokes, texts

PARALLEL_RAD = 1e-9


@dataclass(frozen=True)
class Folded:
    """A card in space, still in its own axes: x right and y up as printed, z toward who reads it."""

    wall: np.ndarray
    buttress: np.ndarray
    tab: np.ndarray
    edge: np.ndarray
    foot: np.ndarray


def folded(shape):
    """The net with both side panels folded back, away from the printed side, by a quarter turn."""
    wall, buttress, tab, edge = (
        np.array([(*p, 0.0) for p in panel]) for panel in (shape.wall, shape.buttress, shape.tab, shape.leaning_edge)
    )
    return Folded(
        wall=wall,
        buttress=turned_back(buttress, shape.wall_buttress_fold),
        tab=turned_back(tab, shape.wall_tab_fold),
        edge=edge,
        foot=edge[0],
    )


def turned_back(panel, fold):
    a, b = (np.array((*p, 0.0)) for p in fold)
    hinge = (b - a) / np.linalg.norm(b - a)
    turns = [Rotation.from_rotvec(sign * math.pi / 2 * hinge).apply(panel - a) + a for sign in (1.0, -1.0)]
    return min(turns, key=lambda points: points[:, 2].sum())


def stood(points, foot, mortise, right, up):
    """Card points in the space of a page: the foot of the leaning edge on the mortise, the fold along `right`."""
    toward_reader = np.cross(right, up)
    return mortise + (points - foot) @ np.array([right, up, toward_reader])


def page_to_seat(points, assembly, face):
    """From a template's page that lies on its face, printed side out, to the seat frame.

    The page of the top only lies there; that of the underside is turned over about the fore-and-aft line.
    """
    if face == "top":
        return points
    return Rotation.from_rotvec([0.0, math.pi, 0.0]).apply(points) - [0.0, 0.0, assembly.thickness_mm]


OUT_OF_THE_PAGE = np.array([0.0, 0.0, 1.0])


def arrow_on_the_page(piece, name):
    """The mortise and the unit direction of the sightline's arrow, read off the drawing of a template."""
    mortise = np.array(dict(piece.points)[name])
    shafts = [stroke.curve[0] for stroke in strokes(piece.drawing, Role.SET_OUT) if len(stroke.curve) == 1]
    tips = np.array([fill.curve[0].start for fill in fills(piece.drawing) if fill.role is Role.SET_OUT])
    for shaft in shafts:
        away = np.subtract(shaft.end, shaft.start)
        if np.allclose(shaft.start, mortise, atol=1e-9) and np.hypot(*away) > 0.0:
            ahead = tips - mortise
            aligned = np.abs(away[0] * ahead[:, 1] - away[1] * ahead[:, 0]) < 1e-6 * np.hypot(*away)
            if any(aligned & (ahead @ away > 0.0)):
                return (*mortise, 0.0), np.array([*(away / np.hypot(*away)), 0.0])
    raise AssertionError(f"no arrow from {name}")


def shank(leg):
    """The unit direction from the drilled face outward along the axis, in the seat frame."""
    along = np.array(leg.toward_foot)
    return along if (along[2] > 0.0) == (leg.drilled == "top") else -along


@cache
def template_of(assembly, face):
    return template(assembly, face)


def between(u, v):
    return math.atan2(np.linalg.norm(np.cross(u, v)), np.dot(u, v))


def card_of(assembly, leg, kind):
    (found,) = [card for card in cards(assembly) if card.kind == kind and leg.name in card.legs]
    return found


def random_stools(count, seed):
    """Pairs of twins with any lean, on seats of any pitch, bored from either face."""
    rng = np.random.default_rng(seed)
    for _ in range(count):
        splay, rake = (float(v) for v in rng.uniform(-35, 35, 2))
        leg = {"name": "a", "at": [130, 500], "mirror": True, "splay": splay, "rake": rake, "mortise": 20}
        leg["end"] = str(rng.choice(["front", "back"]))
        seat = {"width": 1000, "depth": 1000, "height": 900, "pitch": float(rng.uniform(-10, 20))}
        yield stool([leg], drill_from=str(rng.choice(FACES)), **seat)


def assert_card_leans_with_the_bit(assembly):
    for leg in assembly.bored:
        face = leg.drilled
        made = card_of(assembly, leg, "resultant")
        card = folded(net(made.lean_deg))
        mortise, right = arrow_on_the_page(template_of(assembly, face), leg.name)
        place = (card.foot, np.array(mortise), right, OUT_OF_THE_PAGE)
        edge, wall, buttress, tab = (
            page_to_seat(stood(points, *place), assembly, face)
            for points in (card.edge, card.wall, card.buttress, card.tab)
        )
        leaning = edge[1] - edge[0]
        assert between(leaning, shank(leg)) < PARALLEL_RAD + math.radians(made.within_deg)
        assert edge[0][:2] == pytest.approx(leg.on_face(face), abs=1e-9)
        plumb = np.array([0.0, 0.0, 1.0])
        sightline = np.array([leg.toward_foot[0], leg.toward_foot[1], 0.0])
        sightline /= np.linalg.norm(sightline)
        across = np.cross(sightline, plumb)
        assert abs(leaning @ across) < 1e-9
        # From the underside the shank leans toward a foot, from the top away from it but toward a post's upper end.
        assert (leaning @ sightline > 0.0) == ((face == "underside") == (leg.kind == "leg"))
        # The wall stands on the sightline behind the mortise, the tab lies on the face, the buttress stands across.
        inner = (wall[:2] - edge[0]) @ sightline
        assert inner.max() == pytest.approx(0.0, abs=1e-9)
        assert np.abs((wall - edge[0]) @ across).max() < 1e-9
        z = 0.0 if face == "top" else -assembly.thickness_mm
        assert tab[:, 2] == pytest.approx(z, abs=1e-9)
        assert np.ptp(buttress @ sightline) < 1e-9
        outward = 1.0 if face == "top" else -1.0
        assert ((wall[:, 2] - z) * outward).min() > -1e-9
        assert ((buttress[:, 2] - z) * outward).min() > -1e-9


@pytest.mark.parametrize("name", DEMOS)
def test_every_demos_card_stood_on_the_template_leans_with_the_bit(name):
    assert_card_leans_with_the_bit(demo(name))


def test_a_card_of_any_leg_stood_on_the_template_leans_with_the_bit():
    for assembly in random_stools(25, 11):
        assert_card_leans_with_the_bit(assembly)


def assert_cards_seen_two_ways_lean_with_the_bit(assembly):
    """Seen square to the across line and to the fore-and-aft line, in the face, the edge covers the shank."""
    for leg in assembly.bored:
        out = np.array([0.0, 0.0, 1.0 if leg.drilled == "top" else -1.0])
        ways = {"splay": np.array([leg.side, 0, 0]), "rake": np.array([0, leg.end, 0])}
        if not leg.side:
            del ways["splay"]
        for kind, own in ways.items():
            made = card_of(assembly, leg, kind)
            card = folded(net(made.lean_deg))
            edge = stood(card.edge, card.foot, np.zeros(3), own, out)
            bit = shank(leg)
            seen = (bit @ own) * own + (bit @ out) * out
            assert between(edge[1] - edge[0], seen) < PARALLEL_RAD + math.radians(made.within_deg)


@pytest.mark.parametrize("name", DEMOS)
def test_every_demos_splay_and_rake_cards_cover_the_bit_seen_from_the_front_and_from_the_side(name):
    assert_cards_seen_two_ways_lean_with_the_bit(demo(name))


def test_splay_and_rake_cards_of_any_leg_cover_the_bit_seen_from_the_front_and_from_the_side():
    for assembly in random_stools(60, 12):
        assert_cards_seen_two_ways_lean_with_the_bit(assembly)


lean = st.floats(-55.0, 55.0)


@given(lean)
def test_a_folded_card_stands_square_and_closed(lean_deg):
    shape = net(lean_deg)
    card = folded(shape)
    square = [np.cross(panel[1] - panel[0], panel[2] - panel[0]) for panel in (card.wall, card.buttress, card.tab)]
    for k, one in enumerate(square):
        assert between(one, square[k - 1]) == pytest.approx(math.pi / 2, abs=1e-12)
    folds = ((card.buttress, shape.wall_buttress_fold), (card.tab, shape.wall_tab_fold))
    for panel, fold in folds:
        for corner in fold:
            assert min(np.linalg.norm(panel - (*corner, 0.0), axis=1)) < 1e-12
            assert min(np.linalg.norm(card.wall - (*corner, 0.0), axis=1)) < 1e-12
    # Both panels go back from the printed side, and the buttress stands on the face that the tab lies on.
    assert max(card.buttress[:, 2].max(), card.tab[:, 2].max()) < 1e-12
    assert np.abs(card.tab[:, 1]).max() < 1e-12
    on_the_face = [point for point in card.buttress if abs(point[1]) < 1e-12]
    assert np.ptp([point[2] for point in on_the_face]) == pytest.approx(np.ptp(card.buttress[:, 2]), abs=1e-12)


@given(lean)
def test_nothing_of_a_flat_net_lies_over_another_part(lean_deg):
    shape = net(lean_deg)
    panels = [Polygon(panel) for panel in (shape.wall, shape.buttress, shape.tab)]
    assert all(panel.is_valid and panel.area > 100.0 for panel in panels)
    assert unary_union(panels).area == pytest.approx(sum(panel.area for panel in panels), rel=1e-12)


@given(lean)
def test_the_leaning_edge_is_as_long_as_the_card_is_high_and_leaves_room_for_words(lean_deg):
    shape = net(lean_deg)
    (x0, y0), (x1, y1) = shape.leaning_edge
    assert y0 == 0.0
    assert y1 >= 80.0
    assert math.degrees(math.atan2(x1 - x0, y1 - y0)) == pytest.approx(lean_deg, abs=1e-12)
    left = max(x for x, _ in shape.wall_buttress_fold)
    assert min(x0, x1) - left >= 40.0


def standing(assembly):
    return [piece for piece in card_pieces(assembly) if piece.name.startswith("card")]


@pytest.mark.parametrize("name", DEMOS)
def test_what_is_cut_and_folded_on_the_sheet_is_the_net(name):
    assembly = demo(name)
    for card, piece in zip(cards(assembly), standing(assembly), strict=True):
        shape = net(card.lean_deg)
        (cut,) = strokes(piece.drawing, Role.CUT)
        whole = unary_union([Polygon(panel) for panel in (shape.wall, shape.buttress, shape.tab)])
        assert cut.closed
        assert polygon(cut.curve).symmetric_difference(whole).area < 1e-9
        drawn = {(stroke.curve[0].start, stroke.curve[-1].end) for stroke in strokes(piece.drawing, Role.FOLD)}
        assert drawn == {shape.wall_tab_fold, shape.wall_buttress_fold}
        # The arrow to the foot points to the right as printed, the way of the fold from buttress to leaning edge.
        (head,) = fills(piece.drawing)
        tip, *back = [segment.start for segment in head.curve]
        assert all(tip[0] > x for x, _ in back)


@pytest.mark.parametrize("name", DEMOS)
def test_every_leg_has_one_card_of_each_kind_and_each_angle_only_one_card(name):
    assembly = demo(name)
    made = cards(assembly)
    for kind in ("resultant", "splay", "rake"):
        of_kind = [card for card in made if card.kind == kind]
        # A part on the centre line has no side to splay to.
        parts = [part.name for part in assembly.bored if part.side or kind != "splay"]
        assert sorted(leg for card in of_kind for leg in card.legs) == sorted(parts)
        legs = {leg.name for leg in assembly.legs}
        leans = sorted(card.lean_deg for card in of_kind if legs & set(card.legs))
        assert all(b - a > SAME_ANGLE_DEG for a, b in pairwise(leans))


def test_the_sign_of_a_card_is_the_bits_which_leans_with_the_arrow_from_below_and_against_it_from_the_top():
    legs = [{"name": "a", "at": [100, 80], "mirror": True, "splay": 8, "rake": -5, "mortise": 20}]
    for face, sign in (("underside", 1.0), ("top", -1.0)):
        found = {card.kind: card.lean_deg for card in cards(stool(legs, drill_from=face))}
        assert found["splay"] == pytest.approx(sign * 8.0, abs=1e-12)
        assert found["rake"] == pytest.approx(sign * -5.0, abs=1e-12)
        assert found["resultant"] * sign > 8.0


@pytest.mark.parametrize("name", DEMOS)
def test_a_card_says_its_angle_its_legs_its_line_and_its_face(name):
    assembly = demo(name)
    for card, piece in zip(cards(assembly), standing(assembly), strict=True):
        said = " ".join(text.text for text in texts(piece.drawing))
        assert format_angle(abs(card.lean_deg)) in said or format_angle(abs(card.lean_deg), 2) in said
        assert card.legs[0] in said
        assert all(leg in said for leg in card.legs) or "…" in said
        assert card.line in said
        (face,) = {part.drilled for part in assembly.bored if part.name in card.legs}
        assert f"on the {face}" in said
        assert card.toward in said
        assert face.upper() in piece.notice or "each card says on which face" in piece.notice
        assert (piece.stock, piece.handling) == ("card", "pack")


LONG_NAMES = [
    {"name": "abaft the harbour master's window, on the weather side", "at": [125, 70], "mirror": True},
    {"name": "ΠΡΎΜΝΗ and Ångström's second-best stretcherless position", "at": [125, 230], "mirror": True},
]


def crowded(face):
    """Legs with names as long as they may be, leaning far."""
    lean = {"splay": 25, "rake": 24, "mortise": 20}
    return stool([{**leg, **lean} for leg in LONG_NAMES], drill_from=face, thickness=20)


EVERY = [*DEMOS, "crowded underside", "crowded top"]


def named(name):
    return crowded(name.split()[1]) if name.startswith("crowded") else demo(name)


@pytest.mark.parametrize("name", EVERY)
def test_lettering_on_cards_lies_on_its_panel_and_on_nothing_else(name):
    for piece in card_pieces(named(name)):
        assert clashes(piece.drawing) == []
        (cut,) = strokes(piece.drawing, Role.CUT)
        sheet = polygon(cut.curve)
        lines = [
            LineString([stroke.curve[0].start, stroke.curve[-1].end])
            for role in (Role.FOLD, Role.SET_OUT)
            for stroke in strokes(piece.drawing, role)
        ]
        for text in texts(piece.drawing):
            assert sheet.contains(patch(text)), (piece.name, text)
            assert not any(line.intersects(patch(text)) for line in lines), (piece.name, text)


@pytest.mark.parametrize("name", DEMOS)
def test_a_bevels_card_has_two_lines_at_the_bevel_to_each_other(name):
    assembly = demo(name)
    found = []
    for piece in card_pieces(assembly):
        if piece.name.startswith("bevel"):
            stock, blade = (stroke.curve[0] for stroke in strokes(piece.drawing, Role.SET_OUT))
            assert stock.start == blade.start
            u, v = (np.subtract(line.end, line.start) for line in (stock, blade))
            assert np.hypot(*v) == pytest.approx(BLADE_MM)
            found.append(math.degrees(math.atan2(u[0] * v[1] - u[1] * v[0], u @ v)))
            said = " ".join(text.text for text in texts(piece.drawing))
            # To a tenth, or finer where two cards would read the same.
            said_to = [k for k in (1, 2) if f"bevel {format_angle(found[-1], k)}" in said]
            assert said_to
            assert f"lean {format_angle(90.0 - found[-1], said_to[0])}" in said
    for part in assembly.bored:
        near = SAME_ANGLE_DEG if part.kind != "spindle" else SPINDLE_ANGLE_DEG
        assert min(abs(angle - part.drill.bevel_deg) for angle in found) <= near / 2 + 1e-9
    assert len(found) == len({round(angle, 6) for angle in found})


def test_legs_that_stand_square_share_one_square_card_without_an_arrow():
    legs = [{"name": "front", "at": [120, 60], "mirror": True, "splay": 0, "rake": 0, "mortise": 25}]
    legs += [{"name": "back", "at": [0, 240], "rake": 12, "mortise": 25}]
    assembly = stool(legs)
    made = cards(assembly)
    assert [(card.kind, card.legs) for card in made] == [
        ("resultant", ("back",)),
        ("rake", ("back",)),
        ("resultant", ("front left", "front right")),
    ]
    (square,) = [piece for piece in card_pieces(assembly) if piece.name == "card 3 resultant"]
    said = [text.text for text in texts(square.drawing)]
    assert "square to the face" in said
    assert not {"FOOT", "OWN SIDE", "OWN END"} & set(said)
    assert fills(square.drawing) == []
    assert net(made[2].lean_deg).leaning_edge[0][0] == net(made[2].lean_deg).leaning_edge[1][0]


def test_every_spindle_that_shares_a_card_is_named_on_it_however_many_there_are():
    names = [f"stick {k}" for k in range(1, 12)]
    assert names_within(names, 110.0, 2.5) == "stick 1 to 11"
    assert names_within(names[:2], 110.0, 2.5) == "stick 1, stick 2"
    odd = [f"{k} times the one by the stove {'left' if k % 2 else 'right'}" for k in range(1, 12)]
    assert names_within(odd, 110.0, 2.5).endswith("…")
