"""Whole documents: what is where, with what around it, and what is refused."""

import math
from collections import Counter
from itertools import pairwise

import pytest
from shapely.geometry import LineString
from shapely.geometry import box as rectangle
from shapely.ops import unary_union

from layout.document import Document, Page
from layout.drawing import Role, Text
from layout.geometry import Affine, Box
from layout.operations import polylines, primitive_bounds, transform
from layout.pages import compose, summary
from layout.paper import DoesNotFitPaper, Paper, paper_from
from layout.piece import Piece
from layout.scale_check import scale_bars, scale_check
from layout.tiling import column_name
from tests.layout.samples import block, card, overlapping, seat, strip, texts

NAME = "Slipway stool"


def _pieces(paper: Paper, width: float = 400.0, depth: float = 300.0) -> list[Piece]:
    cards = [card(f"card {k}", 70.0 + 9.0 * k, 60.0) for k in range(5)]
    head, tail = [block("what to cut"), scale_check(paper)], [strip(1.3 * width), block("cautions", 30)]
    return [*head, seat(width, depth), *cards, *tail]


PAPERS = {
    "either": paper_from(),
    "a4 thin margin": paper_from("a4", 0.0),
    "small": paper_from("148x210mm"),
    "wide margin": paper_from("letter", 25.0, 20.0),
    "a2": paper_from("a2"),
    "roll": paper_from("900x3000mm", 10.0),
    "wide overlap": paper_from("a4", 6.0, 60.0),
}
DOCUMENTS = {name: (paper, compose(NAME, _pieces(paper), paper)) for name, paper in PAPERS.items()}
BENCH = compose("Long bench", _pieces(paper_from(), 1700.0, 330.0), paper_from())
DOCUMENTS["bench"] = (paper_from(), BENCH)
EVERY = pytest.mark.parametrize(("paper", "document"), DOCUMENTS.values(), ids=DOCUMENTS)


def _pages(document: Document, sheet: str) -> list[Page]:
    return [page for page in document.pages if page.sheet == sheet]


@EVERY
def test_pages_are_numbered_from_one_and_their_labels_differ(paper: Paper, document: Document) -> None:
    assert [page.number for page in document.pages] == list(range(1, len(document.pages) + 1))
    assert len({page.label for page in document.pages}) == len(document.pages)
    assert all(page.size_mm in paper.page_sizes_mm for page in document.pages)


@EVERY
def test_sheets_come_in_order_of_first_appearance(paper: Paper, document: Document) -> None:
    assert list(dict.fromkeys(page.sheet for page in document.pages)) == [
        "setting-out", "scale", "template", "cards", "strips"
    ]  # fmt: skip


@EVERY
def test_every_placement_s_window_lies_inside_its_page_s(paper: Paper, document: Document) -> None:
    for page in document.pages:
        window = paper.window(page.size_mm).grown(1e-9)
        for placement in page.placements:
            box = placement.window.mapped(placement.to_page)
            assert window.holds((box.x0, box.y0))
            assert window.holds((box.x1, box.y1))


@EVERY
def test_no_placement_scales_or_mirrors(paper: Paper, document: Document) -> None:
    for page in document.pages:
        for placement in page.placements:
            m = placement.to_page
            assert (m.a, m.b, m.c, m.d) in {(1.0, 0.0, 0.0, 1.0), (0.0, 1.0, -1.0, 0.0)}


@EVERY
def test_windows_on_one_page_do_not_overlap(paper: Paper, document: Document) -> None:
    for page in document.pages:
        shapes = [rectangle(*p.window.mapped(p.to_page)) for p in page.placements]
        assert unary_union(shapes).area == pytest.approx(sum(shape.area for shape in shapes))


@EVERY
def test_all_ink_of_every_piece_is_shown_on_some_page(paper: Paper, document: Document) -> None:
    windows: dict[str, list[Box]] = {}
    for page in document.pages:
        for placement in page.placements:
            windows.setdefault(placement.piece.name, []).append(placement.window)
    assert set(windows) == {piece.name for piece in document.pieces}
    for piece in document.pieces:
        shown = unary_union([rectangle(*box) for box in windows[piece.name]]).buffer(1e-6)
        for points in polylines(piece.drawing, 0.05):
            assert shown.covers(LineString(points)), piece.name


@EVERY
def test_every_page_carries_a_bar_of_100_mm_across_and_one_down(paper: Paper, document: Document) -> None:
    for page in document.pages:
        assert all(math.dist(b.from_mm, b.to_mm) == pytest.approx(b.nominal_mm, abs=1e-9) for b in page.bars)
        across, down = page.bars[:2]
        assert across.nominal_mm == down.nominal_mm == 100.0
        assert across.from_mm[1] == across.to_mm[1]
        assert down.from_mm[0] == down.to_mm[0]


@EVERY
def test_nothing_is_printed_in_the_margin(paper: Paper, document: Document) -> None:
    for page in document.pages:
        inside = Box(0.0, 0.0, *page.size_mm).grown(-paper.margin_mm + 1e-9)
        for item in page.furniture.items:
            box = primitive_bounds(item)
            assert inside.holds((box.x0, box.y0)), item
            assert inside.holds((box.x1, box.y1)), item


@EVERY
def test_furniture_in_the_window_is_marks_and_cut_lines_alone(paper: Paper, document: Document) -> None:
    for page in document.pages:
        if page.marks:
            continue
        window = paper.window(page.size_mm)
        boxes = [primitive_bounds(item) for item in page.furniture.items]
        assert all(box.x1 <= window.x0 or box.y1 <= window.y0 for box in boxes)


@EVERY
def test_no_words_of_a_page_s_furniture_stand_over_others(paper: Paper, document: Document) -> None:
    for page in document.pages:
        assert overlapping(texts(page.furniture)) == [], page.label


@EVERY
def test_a_mark_is_at_one_place_of_the_drawing_on_both_its_pages(paper: Paper, document: Document) -> None:
    seen: dict[tuple[str, str], list[tuple[float, float]]] = {}
    for page in document.pages:
        for mark in page.marks:
            shown = [p for p in page.placements if p.piece.name == mark.piece]
            assert any(
                math.dist(p.to_page.point(mark.drawing_mm), mark.page_mm) <= 1e-9
                and p.window.grown(-4.5 + 1e-9).holds(mark.drawing_mm)
                for p in shown
            )
            seen.setdefault((mark.piece, mark.id), []).append(mark.drawing_mm)
    for places in seen.values():
        assert len(places) == 2
        assert math.dist(*places) <= 1e-9


@EVERY
def test_each_page_says_whose_it_is_what_it_is_and_its_number(paper: Paper, document: Document) -> None:
    for page in document.pages:
        said = [text.text for text in texts(page.furniture)]
        assert any(page.title in words and document.title in words for words in said)
        assert f"page {page.number} of {len(document.pages)}" in said
        notice = page.placements[0].piece.notice
        assert not notice or any(notice in words for words in said)


def test_the_stool_takes_four_pages_named_as_they_are_read() -> None:
    _, document = DOCUMENTS["either"]
    pages = _pages(document, "template")
    assert [page.tile for page in pages] == ["A1", "B1", "A2", "B2"]
    assert [page.label for page in pages] == ["template A1", "template B1", "template A2", "template B2"]


def test_tiles_lie_as_their_names_say_when_the_pages_are_read_upright() -> None:
    for _, document in DOCUMENTS.values():
        pages = [page for page in _pages(document, "template") if page.tile]
        for page in pages:
            for other in pages:
                p, q = page.placements[0], other.placements[0]
                x, y = p.to_page.point(q.to_page.inverse().point((0.0, 0.0)))
                column, row = _cell(page), _cell(other)
                assert _sign(x) == _sign(row[0] - column[0])
                assert _sign(y) == -_sign(row[1] - column[1])


def _cell(page: Page) -> tuple[int, int]:
    assert page.tile
    letters = page.tile.rstrip("0123456789")
    columns = [column_name(k) for k in range(60)]
    return columns.index(letters), int(page.tile[len(letters) :])


def _sign(value: float) -> int:
    return 0 if abs(value) < 1e-6 else (1 if value > 0 else -1)


def test_columns_run_past_z() -> None:
    names = [column_name(k) for k in (0, 25, 26, 27, 51, 52, 701, 702)]
    assert names == ["A", "Z", "AA", "AB", "AZ", "BA", "ZZ", "AAA"]


def test_tiles_name_their_neighbours_on_every_side() -> None:
    _, document = DOCUMENTS["either"]
    said = {page.tile: " · ".join(t.text for t in texts(page.furniture)) for page in _pages(document, "template")}
    assert "left none · right B1" in said["A1"]
    assert "above none · below A2" in said["A1"]
    assert "left A2 · right none" in said["B2"]
    assert "above B1 · below none" in said["B2"]


def test_a_piece_that_fits_one_page_has_no_tile_no_marks_and_lies_in_the_middle() -> None:
    paper = paper_from("a2")
    piece = seat(300.0, 250.0)
    (page,) = compose(NAME, [piece], paper).pages
    assert (page.tile, page.marks, page.label) == (None, (), "template")
    window = paper.window(page.size_mm)
    assert page.placements[0].to_page.point((0.0, 125.0)) == pytest.approx(window.centre)


def test_a_long_piece_is_turned_where_that_saves_pages() -> None:
    paper = paper_from()
    pages = compose(NAME, [seat(240.0, 150.0)], paper).pages
    assert len(pages) == 1
    assert pages[0].size_mm == (279.4, 210.0)
    tall = compose(NAME, [seat(170.0, 720.0)], paper).pages
    wide = compose(NAME, [seat(720.0, 170.0)], paper).pages
    assert len(tall) == len(wide) == 3


def test_a_turned_tiling_keeps_reading_order_and_marks() -> None:
    paper = paper_from()
    for piece in (seat(430.0, 980.0), seat(980.0, 430.0), seat(200.0, 500.0)):
        document = compose(NAME, [piece], paper)
        names = [_cell(page) for page in document.pages]
        assert names == sorted(names, key=lambda cell: (cell[1], cell[0]))
        assert min(column for column, _ in names) == 0
        assert min(row for _, row in names) == 1


def test_islands_of_ink_are_linked_by_pages_that_share_strips() -> None:
    near, far = seat(120.0, 100.0), seat(120.0, 100.0)
    apart = transform(far.drawing, Affine.move(620.0, 700.0))
    piece = Piece("floor map", "map", "Floor map", near.drawing + apart, "tile")
    document = compose(NAME, [piece], paper_from())
    reached = {document.pages[0].number}
    for _ in document.pages:
        ids = {mark.id for page in document.pages if page.number in reached for mark in page.marks}
        reached |= {page.number for page in document.pages if any(mark.id in ids for mark in page.marks)}
    assert reached == {page.number for page in document.pages}


def test_two_tiled_pieces_of_a_sheet_have_labels_of_their_own() -> None:
    faces = [seat(400.0, 300.0, f"template {face}") for face in ("underside", "top")]
    document = compose(NAME, faces, paper_from())
    assert {page.label for page in document.pages} >= {"template underside A1", "template top A1"}


def test_pieces_that_share_a_name_are_refused() -> None:
    with pytest.raises(ValueError, match="share a name: card 1"):
        compose(NAME, [card("card 1"), card("card 1")], paper_from())


def test_card_pages_stand_apart_from_paper_ones_and_say_so() -> None:
    plain = Piece("gauge", "cards", "Angle cards", card("x").drawing, "pack")
    document = compose(NAME, [card("card 1"), plain, card("card 2")], paper_from())
    assert [(page.stock, len(page.placements)) for page in document.pages] == [("card", 2), ("paper", 1)]
    said = [text.text for text in texts(document.pages[0].furniture)]
    assert any("PRINT ON CARD" in words for words in said)


def test_a_long_strip_is_cut_into_lengths_that_overlap_and_name_themselves() -> None:
    document = compose(NAME, [strip(600.0)], paper_from())
    placements = [(page, p) for page in document.pages for p in page.placements]
    spans = sorted((p.window.x0, p.window.x1) for _, p in placements)
    assert len(spans) == 3
    assert all(before[1] - after[0] >= 20.0 - 1e-9 for before, after in pairwise(spans))
    said = [text.text for page in document.pages for text in texts(page.furniture)]
    assert any(words.startswith("strip 1, part 2 of 3") for words in said)
    counts = Counter(mark.id for page in document.pages for mark in page.marks)
    assert counts == {"S1": 2, "S2": 2, "S3": 2, "S4": 2}
    strip_marks = {mark.id: mark.drawing_mm for page in document.pages for mark in page.marks}
    assert all(abs(y) > 4.5 for _, y in strip_marks.values())


def test_a_strip_that_fits_is_left_whole() -> None:
    document = compose(NAME, [strip(180.0)], paper_from())
    (page,) = document.pages
    assert page.marks == ()
    assert page.placements[0].window.width == pytest.approx(181.0)


def test_packing_lies_down_only_where_that_saves_pages() -> None:
    (page,) = compose(NAME, [card("card 1")], paper_from()).pages
    assert page.size_mm == (210.0, 279.4)
    lying = compose(NAME, [card("card 1", 255.0, 100.0)], paper_from()).pages
    assert [page.size_mm for page in lying] == [(279.4, 210.0)]


def test_pieces_that_fit_upright_only_and_lying_only_share_a_sheet() -> None:
    upright, lying = card("card 1", 188.0, 240.0), card("card 2", 255.0, 100.0)
    pages = compose(NAME, [lying, upright], paper_from()).pages
    assert sorted(page.size_mm for page in pages) == [(210.0, 279.4), (279.4, 210.0)]


def test_what_no_page_holds_is_refused_all_at_once_with_the_paper_that_would_do() -> None:
    big = [card("card 1", 300.0, 250.0), card("card 2"), strip(900.0, 270.0), block("words")]
    with pytest.raises(DoesNotFitPaper) as refusal:
        compose(NAME, big, paper_from())
    lines = str(refusal.value).splitlines()
    assert [line.split(" (")[0] for line in lines] == ["card 1", "strip 1"]
    assert "301.0 × 251.0 mm" in lines[0]
    for line, pieces in zip(lines, (big[:1], big[2:3]), strict=True):
        size = line.rsplit("at least ", 1)[1].removesuffix(" mm").replace(" × ", "x")
        compose(NAME, pieces, paper_from(size))


def test_a_block_wider_than_an_upright_page_lies_down() -> None:
    wide = Piece("views", "setting-out", "Setting-out sheet", card("x", 240.0, 90.0).drawing, "flow")
    document = compose(NAME, [block("words"), wide], paper_from())
    assert {page.size_mm for page in document.pages} == {(279.4, 210.0)}


def test_the_scale_check_s_own_bars_are_recorded_on_its_page() -> None:
    paper = paper_from()
    document = compose(NAME, [seat(400.0, 300.0), scale_check(paper)], paper)
    page = document.pages[-1]
    assert page.label == "scale"
    assert len(page.bars) == 2 + len(scale_bars(paper))
    to_page = page.placements[0].to_page
    for bar, (start, end, nominal) in zip(page.bars[2:], scale_bars(paper), strict=True):
        assert (bar.from_mm, bar.to_mm, bar.nominal_mm) == (to_page.point(start), to_page.point(end), nominal)


def test_the_setting_out_sheet_ends_with_the_map_of_the_tiles() -> None:
    _, document = DOCUMENTS["either"]
    shown = [p.piece for page in _pages(document, "setting-out") for p in page.placements]
    assert [piece.name for piece in shown] == ["what to cut", "cautions", "tile map"]
    drawing = shown[-1].drawing
    said = " ".join(item.text for item in drawing.items if isinstance(item, Text))
    for words in ("A1", "B2", "Lay A1 down.", "lay it over A1", "dashed left and top lines", "circles close"):
        assert words in said
    assert any(not isinstance(item, Text) and item.role is Role.SET_OUT for item in drawing.items)
    box = shown[-1].drawing
    assert max(primitive_bounds(item).x1 for item in box.items) <= 180.0
    assert overlapping(texts(drawing)) == []


def test_the_map_tells_many_pages_by_rule() -> None:
    pieces = [piece for piece in BENCH.pieces if piece.name == "tile map"]
    said = " ".join(text.text for text in texts(pieces[0].drawing))
    assert "along the top row" in said
    assert "lay it over the pages already there" in said.replace("  ", " ")


def test_there_is_no_map_where_nothing_is_tiled() -> None:
    document = compose(NAME, [block("words"), seat(100.0, 100.0)], paper_from())
    assert all(piece.name != "tile map" for piece in document.pieces)


def test_two_tiled_pieces_have_a_map_each() -> None:
    pieces = [block("words"), seat(400.0, 300.0, "template underside"), seat(500.0, 300.0, "template top")]
    document = compose(NAME, pieces, paper_from())
    maps = [piece.name for piece in document.pieces if piece.handling == "flow"][1:]
    assert maps == ["tile map, template underside", "tile map, template top"]


def test_the_summary_says_which_pages_are_which_and_what_to_print_them_on() -> None:
    paper = paper_from()
    document = compose(NAME, [scale_check(paper), seat(400.0, 300.0), card("card 1")], paper)
    assert summary(document) == [
        "page 1     Scale check  paper",
        "pages 2–5  Seat template, underside (A1 B1 A2 B2)  paper",
        "page 6     Angle cards  card",
    ]


def test_the_same_pieces_give_the_same_pages() -> None:
    paper = paper_from()
    assert compose(NAME, _pieces(paper), paper) == compose(NAME, _pieces(paper), paper)


def test_no_pieces_give_no_pages() -> None:
    assert compose(NAME, [], paper_from()).pages == ()
