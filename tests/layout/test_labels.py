"""Labels: set near their points, inside the outline, off lines, off one another, off seams and off missing pages."""

from __future__ import annotations

import math

import pytest
from shapely import unary_union
from shapely.geometry import Polygon, box

from layout.curves import ellipse_curve
from layout.drawing import Drawing, Role, Stroke, gather
from layout.geometry import Affine, Box
from layout.labels import EDGE_MM, LEADER_FROM_MM, LEADER_SHORT_MM, LINE_CLEAR_MM, block, lettered, lettered_off
from layout.operations import bounds, polylines, text_corners, transform
from layout.pages import compose
from layout.paper import paper_from
from layout.piece import Label, Piece
from layout.room import CELL_MM
from layout.shapes import LINE_PITCH, line
from layout.tiling import ink_box, tile_piece
from tests.layout.samples import overlapping, texts

RIM = Stroke(ellipse_curve((0.0, 150.0), 200.0, 150.0, 0.0), Role.CUT, closed=True)
CENTRE = line((0.0, -8.0), (0.0, 308.0), Role.CENTRE)
SAID = block(("front left", 3.5, True), ("lean 14.8°", 5.0, True))
BRIEF = block(("14.8°", 2.5, False))


def labelled(*labels: Label, others=(CENTRE,)) -> Piece:
    return Piece("template", "template", "Seat template", gather([RIM, *others]), "tile", labels=labels)


def patches(piece):
    return [Polygon(text_corners(text)) for text in texts(piece.drawing)]


def leaders(piece):
    return [item for item in piece.drawing.items if getattr(item, "role", None) is Role.FURNITURE]


def test_a_block_is_its_lines_centred_one_below_the_other_within_the_room_that_it_asks_for():
    first, second = texts(SAID.drawing)
    assert first.at[1] - second.at[1] == pytest.approx(LINE_PITCH * 5.0 + 0.45 * (3.5 - 5.0))
    assert {text.align for text in (first, second)} == {"centre"}
    found = bounds(SAID.drawing)
    assert -SAID.width_mm / 2 <= found.x0 < found.x1 <= SAID.width_mm / 2
    assert -SAID.height_mm / 2 <= found.y0 < found.y1 <= SAID.height_mm / 2


def test_more_clear_space_asks_for_more_room_and_sets_the_same_words():
    wide = block(("front left", 3.5, True), ("lean 14.8°", 5.0, True), clear_mm=7.0)
    assert wide.drawing == SAID.drawing
    assert (wide.width_mm - SAID.width_mm, wide.height_mm - SAID.height_mm) == pytest.approx((12.0, 6.0))


def test_labels_stand_inside_the_outline_off_its_lines_and_off_one_another():
    labels = [Label((SAID, BRIEF), (x, y), 12.0) for x in (-110, 4, 110) for y in (60, 65, 230)]
    piece = lettered(labelled(*labels))
    assert overlapping(texts(piece.drawing)) == []
    seat = Polygon(polylines(Drawing((RIM,)), 0.05)[0])
    # Room is looked for in cells; a cell's width is what its map may be off by.
    clear = seat.buffer(-(EDGE_MM - CELL_MM))
    for words in patches(piece):
        assert clear.contains(words)
        assert words.distance(Polygon([(0, -8), (0, 308), (1e-6, 308)])) > LINE_CLEAR_MM - CELL_MM
    for words in patches(piece):
        for label in labels:
            near = box(*(Box(*label.near, *label.near).grown(label.aside_mm - CELL_MM)))
            assert not words.intersects(near)
    assert piece.labels == ()


def test_a_label_stands_at_its_point_where_that_is_free():
    piece = lettered(labelled(Label((SAID,), (80.0, 150.0))))
    (first, _) = texts(piece.drawing)
    assert math.dist(bounds(Drawing(tuple(texts(piece.drawing)))).centre, (80.0, 150.0)) < 2 * CELL_MM
    assert first.text == "front left"


def test_where_the_fullest_wording_finds_no_room_the_next_one_is_set():
    bars = [line((-200.0, y), (200.0, y), Role.SET_OUT) for y in range(0, 300, 11)]
    piece = lettered(labelled(Label((SAID, BRIEF), (80.0, 150.0)), others=bars))
    assert [text.text for text in texts(piece.drawing)] == ["14.8°"]


def test_where_there_is_no_room_at_all_the_last_wording_is_set_all_the_same():
    bars = [line((-200.0, y), (200.0, y), Role.SET_OUT) for y in range(0, 300, 3)]
    piece = lettered(labelled(Label((SAID, BRIEF), (80.0, 150.0)), others=bars))
    assert [text.text for text in texts(piece.drawing)] == ["14.8°"]


def test_words_far_from_their_point_are_led_to_it_and_words_beside_it_are_not():
    wall = line((80.0, 100.0), (80.0, 200.0), Role.SET_OUT)
    beside = lettered(labelled(Label((SAID,), (80.0, 150.0), 10.0, led=True), others=[wall]))
    assert leaders(beside) == []
    far = lettered(labelled(Label((SAID,), (80.0, 150.0), 40.0, led=True), others=[wall]))
    (leader,) = leaders(far)
    start, end = leader.curve[0].start, leader.curve[0].end
    assert math.dist(end, (80.0, 150.0)) == pytest.approx(LEADER_SHORT_MM)
    assert math.dist(start, (80.0, 150.0)) > LEADER_FROM_MM
    # It points at the centre.
    assert (start[0] - 80.0) * (end[1] - 150.0) == pytest.approx((start[1] - 150.0) * (end[0] - 80.0), abs=1e-9)
    unled = lettered(labelled(Label((SAID,), (80.0, 150.0), 40.0), others=[wall]))
    assert leaders(unled) == []


STRIP = Box(74.0, -20.0, 86.0, 320.0)


def test_off_a_seam_words_stand_wholly_on_one_side_of_the_shared_strip():
    piece = lettered_off(labelled(Label((SAID,), (80.0, 150.0))), [STRIP], [])
    assert piece is not None
    assert [words.intersection(box(*STRIP)).area for words in patches(piece)] == [0.0, 0.0]
    # They straddle it where nobody asks.
    assert any(words.intersects(box(*STRIP)) for words in patches(lettered(labelled(Label((SAID,), (80.0, 150.0))))))


def test_words_that_find_room_nowhere_off_a_seam_stand_on_it_rather_than_nowhere():
    strips = [Box(x, -20.0, x + 12.0, 320.0) for x in range(-200, 200, 30)]
    piece = lettered_off(labelled(Label((SAID,), (80.0, 150.0))), strips, [])
    assert piece is not None
    assert [text.text for text in texts(piece.drawing)] == ["front left", "lean 14.8°"]


def test_words_never_stand_where_no_page_is():
    gap = Box(-200.0, 60.0, 200.0, 320.0)
    piece = lettered_off(labelled(Label((SAID,), (80.0, 150.0))), [], [gap])
    assert piece is not None
    assert max(bounds(Drawing(tuple(texts(piece.drawing)))).y1, 0.0) <= 60.0
    assert lettered_off(labelled(Label((SAID,), (80.0, 150.0))), [], [Box(-200.0, -10.0, 200.0, 320.0)]) is None


def test_labels_need_an_outline_to_stand_in():
    bare = Piece("template", "template", "Seat template", Drawing((CENTRE,)), "tile", labels=(Label((SAID,), (0, 0)),))
    with pytest.raises(ValueError, match="outline"):
        lettered(bare)


def test_a_piece_without_labels_is_left_as_it_is():
    piece = labelled()
    assert lettered(piece) is piece
    assert lettered_off(piece, [STRIP], []) is piece


WORDS = tuple(Label((SAID, BRIEF), (x, y), 12.0, led=True) for x in (-120, -60, 0, 60, 120) for y in (60, 150, 240))


@pytest.mark.parametrize("size", ["either", "a4", "letter", "150x210mm", "a3"])
def test_every_label_of_a_tiled_piece_can_be_read_whole_on_one_page(size):
    paper = paper_from(size)
    piece = labelled(*WORDS)
    tiling = tile_piece(piece, ink_box(piece), paper)
    pages = [tiling.window_of_piece(tile) for tile in tiling.tiles]
    assert len(texts(tiling.piece.drawing)) >= len(WORDS)
    for words in patches(tiling.piece):
        assert sum(box(*page).contains(words) for page in pages) == 1
        assert sum(box(*page).intersects(words) for page in pages) == 1


def test_a_large_seats_words_stand_on_pages_that_are_printed():
    """On so large a blank whole pages inside are empty and left out."""
    rim = Stroke(ellipse_curve((0.0, 500.0), 1500.0, 500.0, 0.0), Role.CUT, closed=True)
    labels = tuple(Label((SAID,), (x, 500.0)) for x in (-900, -600, -300, 0, 300, 600, 900))
    piece = Piece("template", "template", "Counter", Drawing((rim,)), "tile", labels=labels)
    tiling = tile_piece(piece, ink_box(piece), paper_from("a4"))
    pages = [tiling.window_of_piece(tile) for tile in tiling.tiles]
    assert len(texts(tiling.piece.drawing)) == 2 * len(labels)
    for words in patches(tiling.piece):
        assert any(box(*page).contains(words) for page in pages)


def test_words_that_only_fit_off_the_kept_pages_get_pages_of_their_own():
    """Lines so dense by the rim that only the middle, which has no page of its own, has room."""
    rim = Stroke(ellipse_curve((0.0, 0.0), 700.0, 700.0, 0.0), Role.CUT, closed=True)
    rings = [
        Stroke(ellipse_curve((0.0, 0.0), 700.0 - k, 700.0 - k, 0.0), Role.SET_OUT, closed=True)
        for k in range(6, 330, 6)
    ]
    piece = Piece("t", "template", "Ring", gather([rim, *rings]), "tile", labels=(Label((SAID,), (0.0, 0.0)),))
    tiling = tile_piece(piece, ink_box(piece), paper_from("150x210mm"))
    pages = [tiling.window_of_piece(tile) for tile in tiling.tiles]
    printed = unary_union([box(*page) for page in pages])
    first, second = patches(tiling.piece)
    assert printed.contains(first)
    assert printed.contains(second)


def test_the_composed_document_carries_the_piece_with_its_words_and_a_packed_piece_has_its_own():
    small = Piece(
        "tag", "cards", "Tag", transform(Drawing((RIM,)), Affine.scale(0.3)), "pack", labels=(Label((BRIEF,), (0, 45)),)
    )
    document = compose("Stool", [labelled(*WORDS), small], paper_from("a4"))
    by_name = {piece.name: piece for piece in document.pieces}
    assert len(texts(by_name["template"].drawing)) >= len(WORDS)
    assert [text.text for text in texts(by_name["tag"].drawing)] == ["14.8°"]
    shown = {placement.piece.name: placement.piece for page in document.pages for placement in page.placements}
    assert shown["template"] is by_name["template"]
