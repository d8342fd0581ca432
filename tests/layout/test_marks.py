"""Registration marks and cut lines: the same place of the drawing on both pages, on the seam, wholly on the paper."""

import math
from itertools import combinations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely.geometry import LineString, Polygon
from shapely.geometry import Point as Dot
from shapely.geometry import box as rectangle
from shapely.geometry.base import BaseGeometry
from shapely.ops import unary_union

from layout.curves import Arc, Line
from layout.document import Mark
from layout.drawing import Drawing, Role, Stroke, Text
from layout.geometry import Affine, Box
from layout.marks import (
    APART_MM,
    REACH_MM,
    Joint,
    cuts,
    dashes,
    joints,
    page_marks,
    place_marks,
    seam_drawing,
    spread,
)
from layout.operations import polylines, text_corners, transform
from layout.paper import Paper, paper_from
from layout.piece import Piece
from layout.shapes import box_outline
from layout.tiling import Ink, Tile, Tiling, ink_box, tile_piece
from tests.layout.samples import overlapping, seat, texts

CASES = {
    "stool on either": (seat(400.0, 300.0), paper_from()),
    "bench on a4": (seat(1500.0, 350.0), paper_from("a4")),
    "stool on small paper": (seat(400.0, 300.0), paper_from("148x210mm")),
    "wide overlap": (seat(520.0, 410.0), paper_from("letter", 6.0, 60.0)),
    "narrow overlap": (seat(520.0, 410.0), paper_from("either", 6.0, 10.0)),
    "tall": (seat(300.0, 1300.0), paper_from("a4", 10.0, 20.0)),
}
TILED = [(piece, paper, tile_piece(piece, ink_box(piece), paper)) for piece, paper in CASES.values()]


def _rail(length_mm: float, angle_deg: float) -> Piece:
    """A long narrow board that lies askew: its pages climb like stairs."""
    board = Drawing((box_outline(Box(0.0, 0.0, length_mm, 70.0), Role.CUT),))
    return Piece("rail", "rails", "Rail", transform(board, Affine.turn(angle_deg)), "tile")


def _laid(piece: Piece, tiles: tuple[Tile, ...]) -> Tiling:
    ink = tuple(tuple(points) for points in polylines(piece.drawing, 0.1))
    return Tiling(piece, (210.0, 279.4), Affine.identity(), tiles, ink)


def _pages(tiling: Tiling, paper: Paper) -> list[tuple[Tile, Affine, tuple[Mark, ...]]]:
    marks = place_marks(tiling)
    affines = [(tile, tiling.to_page(tile, paper)) for tile in tiling.tiles]
    return [(tile, to_page, page_marks(tiling, marks, tile, to_page)) for tile, to_page in affines]


@pytest.mark.parametrize(("piece", "paper", "tiling"), TILED, ids=CASES)
def test_each_mark_stands_on_two_pages_at_one_place_of_the_drawing(piece: Piece, paper: Paper, tiling: Tiling) -> None:
    seen: dict[str, list[Mark]] = {}
    for _, to_page, marks in _pages(tiling, paper):
        for mark in marks:
            assert math.dist(to_page.point(mark.drawing_mm), mark.page_mm) <= 1e-9
            seen.setdefault(mark.id, []).append(mark)
    assert len(seen) >= len(tiling.tiles) - 1
    for twins in seen.values():
        first, second = twins
        assert math.dist(first.drawing_mm, second.drawing_mm) <= 1e-9


@pytest.mark.parametrize(("piece", "paper", "tiling"), TILED, ids=CASES)
def test_each_mark_lies_wholly_inside_the_windows_of_its_pages_and_on_no_third(
    piece: Piece, paper: Paper, tiling: Tiling
) -> None:
    for tile, _, marks in _pages(tiling, paper):
        window = paper.window(tiling.size_mm)
        assert all(window.grown(-REACH_MM + 1e-9).holds(mark.page_mm) for mark in marks)
        mine = {mark.id for mark in marks}
        for other in place_marks(tiling):
            if other.id not in mine:
                assert not rectangle(*tile.window).intersects(Dot(other.at).buffer(REACH_MM))


@pytest.mark.parametrize(("piece", "paper", "tiling"), TILED, ids=CASES)
def test_marks_lie_on_the_middle_line_of_the_strip_that_two_pages_share(
    piece: Piece, paper: Paper, tiling: Tiling
) -> None:
    for mark in place_marks(tiling):
        first, second = rectangle(*mark.joint.first.window), rectangle(*mark.joint.second.window)
        strip = first.intersection(second)
        width, height = strip.bounds[2] - strip.bounds[0], strip.bounds[3] - strip.bounds[1]
        assert min(width, height) == pytest.approx(paper.overlap_mm, abs=1e-6)
        middle = strip.centroid
        off = mark.at[0] - middle.x if width < height else mark.at[1] - middle.y
        assert off == pytest.approx(0.0, abs=1e-9)


@pytest.mark.parametrize(("piece", "paper", "tiling"), TILED, ids=CASES)
def test_every_shared_side_has_marks_and_they_stand_apart(piece: Piece, paper: Paper, tiling: Tiling) -> None:
    marks = place_marks(tiling)
    for joint in joints(tiling):
        own = [mark.at for mark in marks if mark.joint == joint]
        assert 1 <= len(own) <= 3
        assert all(math.dist(p, q) >= APART_MM for p, q in combinations(own, 2))
    assert len({mark.id for mark in marks}) == len(marks)


def test_a_side_as_long_as_a_page_has_three_marks() -> None:
    _, _, tiling = TILED[0]
    counts = [sum(mark.joint == joint for mark in place_marks(tiling)) for joint in joints(tiling)]
    assert min(counts) >= 2
    assert max(counts) == 3


@pytest.mark.parametrize(("piece", "paper", "tiling"), TILED, ids=CASES)
def test_marks_stand_clear_of_the_drawing_where_the_strip_has_room(piece: Piece, paper: Paper, tiling: Tiling) -> None:
    ink = unary_union([LineString([tiling.laid.point(p) for p in points]) for points in polylines(piece.drawing, 0.05)])
    marks = place_marks(tiling)
    for mark in marks:
        if ink.distance(Dot(mark.at)) <= REACH_MM:
            others = [other.at for other in marks if other.joint == mark.joint and other != mark]
            assert not [place for place in _along_seam(mark.joint) if _is_free(place, others, ink)]


def _along_seam(joint: Joint) -> list[tuple[float, float]]:
    """Places on the seam, well inside the length that no third tile can show."""
    low, high = (joint.strip.y0, joint.strip.y1) if joint.kind == "side" else (joint.strip.x0, joint.strip.x1)
    inside = 72.0
    return [joint.on_seam(low + inside + k) for k in range(max(0, int(high - low - 2 * inside)))]


def _is_free(place: tuple[float, float], others: list[tuple[float, float]], ink: BaseGeometry) -> bool:
    apart = all(math.dist(place, other) >= APART_MM + 3.0 for other in others)
    return apart and bool(ink.distance(Dot(place)) > 14.0)


@pytest.mark.parametrize(("piece", "paper", "tiling"), TILED, ids=CASES)
def test_words_and_marks_of_a_page_keep_clear_of_one_another(piece: Piece, paper: Paper, tiling: Tiling) -> None:
    marks = place_marks(tiling)
    for tile, to_page, own in _pages(tiling, paper):
        drawing = seam_drawing(tiling, marks, tile, to_page)
        assert overlapping(texts(drawing)) == []
        circles = [Dot(mark.page_mm).buffer(3.0) for mark in own]
        for text in texts(drawing):
            assert not any(circle.intersects(Polygon(text_corners(text))) for circle in circles)


@pytest.mark.parametrize(("piece", "paper", "tiling"), TILED, ids=CASES)
def test_each_page_draws_a_circle_and_the_id_for_each_of_its_marks(piece: Piece, paper: Paper, tiling: Tiling) -> None:
    marks = place_marks(tiling)
    for tile, to_page, own in _pages(tiling, paper):
        drawing = seam_drawing(tiling, marks, tile, to_page)
        circles = [item.curve[0].centre for item in drawing.items if _is_circle(item)]
        assert len(circles) == len(own)
        for mark in own:
            assert min(math.dist(mark.page_mm, centre) for centre in circles) <= 1e-9
            beside = [text for text in texts(drawing) if text.text == mark.id]
            assert any(math.dist(text.at, mark.page_mm) < 8.0 for text in beside)


def _is_circle(item: object) -> bool:
    return isinstance(item, Stroke) and isinstance(item.curve[0], Arc)


def test_a_page_says_where_to_cut_and_what_lies_over_it() -> None:
    _, paper, tiling = TILED[0]
    said = {
        tile.name: {text.text for text in texts(seam_drawing(tiling, place_marks(tiling), tile, to_page))}
        for tile, to_page, _ in _pages(tiling, paper)
    }
    assert {"B1 lies over this", "A2 lies over this"} <= said["A1"]
    assert {"cut here, lay over A1", "B2 lies over this"} <= said["B1"]
    assert {"cut here, lay over A1", "B2 lies over this"} <= said["A2"]
    assert {"cut here, lay over A2", "cut here, lay over B1"} <= said["B2"]
    assert not any("cut here" in words for words in said["A1"])


def test_the_cut_line_runs_along_the_seam_and_stops_short_of_the_marks() -> None:
    strokes = list(dashes((20.0, 25.0), (20.0, 225.0), 1, [60.0, 150.0]))
    ends = [(s.curve[0].start, s.curve[0].end) for s in strokes if isinstance(s, Stroke)]
    assert all(p[0] == q[0] == 20.0 and 25.0 <= p[1] < q[1] <= 225.0 for p, q in ends)
    for mark in (60.0, 150.0):
        assert all(q[1] <= mark - REACH_MM or p[1] >= mark + REACH_MM for p, q in ends)
    assert sum(q[1] - p[1] for p, q in ends) > 90.0


LAID = {
    **CASES,
    "bench in three rows": (seat(1700.0, 330.0), paper_from()),
    "round table": (seat(1100.0, 1100.0), paper_from()),
    "round on a3": (seat(1250.0, 1180.0), paper_from("a3", 12.0, 30.0)),
    "large oval": (seat(1900.0, 900.0), paper_from("letter", 6.0, 25.0)),
    "leaning rail": (_rail(900.0, 33.0), paper_from()),
    "leaning rail, wide overlap": (_rail(1400.0, 61.0), paper_from("a4", 15.0, 50.0)),
    "rail that leans left": (_rail(1400.0, 118.0), paper_from("a4", 15.0, 50.0)),
    "flat rail that leans left": (_rail(1100.0, 160.0), paper_from("letter", 20.0, 30.0)),
    "rail on small paper": (_rail(800.0, 47.0), paper_from("148x210mm", 6.0, 40.0)),
}


@pytest.mark.parametrize(("piece", "paper"), LAID.values(), ids=LAID)
def test_cut_and_laid_in_order_the_pages_hide_no_ink(piece: Piece, paper: Paper) -> None:
    tiling = tile_piece(piece, ink_box(piece), paper)
    seen: list[BaseGeometry] = []
    for tile, to_page, _ in _pages(tiling, paper):
        sheet = _cut_sheet(tiling, tile, to_page, paper)
        seen = [shown.difference(sheet) for shown in seen]
        seen.append(sheet.intersection(rectangle(*tile.window)))
    shown = unary_union(seen).buffer(1e-6)
    for points in polylines(piece.drawing, 0.05):
        line = LineString([tiling.laid.point(p) for p in points])
        assert line.difference(shown).length < 1e-3


def _cut_sheet(tiling: Tiling, tile: Tile, to_page: Affine, paper: Paper) -> BaseGeometry:
    """The sheet of paper in laid mm, cut along the dashed lines that are drawn on it."""
    drawing = seam_drawing(tiling, place_marks(tiling), tile, to_page)
    lines = [item.curve[0] for item in drawing.items if isinstance(item, Stroke) and not item.closed]
    dashed = [s for s in lines if isinstance(s, Line) and math.dist(s.start, s.end) < 5.0 + 1e-6]
    middle = paper.window(tiling.size_mm).centre
    x0, y0, (x1, y1) = 0.0, 0.0, tiling.size_mm
    for dash in dashed:
        if dash.start[0] == dash.end[0]:
            x0, x1 = (dash.start[0], x1) if dash.start[0] < middle[0] else (x0, dash.start[0])
        else:
            y0, y1 = (dash.start[1], y1) if dash.start[1] < middle[1] else (y0, dash.start[1])
    to_laid = to_page.inverse().then(tiling.laid)
    return rectangle(*Box(x0, y0, x1, y1).mapped(to_laid))


def test_an_edge_that_would_hide_the_page_below_it_is_cut_too() -> None:
    paper = paper_from()
    kept = {(0, 0): "A1", (1, 0): "B1", (2, 0): "C1", (1, 1): "B2"}
    corners = {(c, r): (178.0 * c, -236.4 * r) for c, r in kept}
    windows = {cell: Box(x, y, x + 190.0, y + 248.4) for cell, (x, y) in corners.items()}
    tiles = tuple(Tile(name, c, r, windows[c, r]) for (c, r), name in kept.items())
    tiling = _laid(seat(500.0, 300.0), tiles)
    drawing = seam_drawing(tiling, place_marks(tiling), tiles[3], tiling.to_page(tiles[3], paper))
    said = [text.text for text in texts(drawing)]
    assert said.count("cut here") == 2  # the left edge lies over A1's lower strip, the right edge over C1's
    assert "cut here, lay over B1" in said
    assert cuts(tiling, tiles[3]) == {"left": None, "top": tiles[1], "right": None}
    assert cuts(tiling, tiles[0]) == {}


def test_pages_that_touch_only_at_a_corner_share_a_mark_there() -> None:
    a, b = Box(0.0, 0.0, 190.0, 248.0), Box(178.0, -236.0, 368.0, 12.0)
    tiling = _laid(seat(300.0, 300.0), (Tile("A1", 0, 0, a), Tile("B2", 1, 1, b)))
    (mark,) = place_marks(tiling)
    assert mark.at == (184.0, 6.0)
    assert all(box.grown(-REACH_MM).holds(mark.at) for box in (a, b))


def test_ink_is_found_where_segments_and_lettering_cross_a_strip() -> None:
    piece = seat(400.0, 300.0)
    ink = Ink(piece.drawing, polylines(piece.drawing, 0.1), Affine.identity())
    strip = Box(100.0, -20.0, 112.0, 320.0)
    spans = ink.spans(strip, 1)
    whole = rectangle(*strip)
    for item, points in zip(piece.drawing.items, polylines(piece.drawing, 0.1), strict=True):
        shape = Polygon(points) if isinstance(item, Text) else LineString(points)
        cut = shape.intersection(whole)
        if not cut.is_empty:
            for part in getattr(cut, "geoms", [cut]):
                low, high = part.bounds[1], part.bounds[3]
                assert any(start <= high + 1e-6 and end >= low - 1e-6 for start, end in spans)
    assert all(-20.0 <= start <= end <= 320.0 for start, end in spans)


@settings(max_examples=100)
@given(
    low=st.floats(0.0, 50.0),
    length=st.floats(12.0, 300.0),
    taken=st.lists(st.tuples(st.floats(0.0, 350.0), st.floats(0.0, 30.0)), max_size=6),
)
def test_places_keep_their_limits_and_distances(low: float, length: float, taken: list[tuple[float, float]]) -> None:
    high = low + length
    spans = [(start, start + width) for start, width in taken]
    wanted = [low, high, (low + high) / 2] if length > 60.0 else [(low + high) / 2]
    found = spread(wanted, (low, high), spans, APART_MM)
    assert 1 <= len(found) <= len(wanted)
    assert all(low - 1e-9 <= place <= high + 1e-9 for place in found)
    assert all(q - p >= APART_MM for p, q in combinations(found, 2))


def test_a_wanted_place_that_is_taken_moves_to_the_nearest_free_one() -> None:
    (place,) = spread([50.0], (0.0, 100.0), [(45.0, 55.0)], APART_MM)
    # A mark and its id take 5.5 mm before its centre and 8.5 mm after it; places are tried 3 mm apart.
    assert not 45.0 - 8.5 < place < 55.0 + 5.5
    assert abs(place - 50.0) < 8.5 + 5.0 + 3.0
