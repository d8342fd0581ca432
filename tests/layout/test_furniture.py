"""The bands of a page: bars of 100 mm, nothing in the margin or the window, no words over other words."""

import math

import pytest

from layout.drawing import Drawing, Fill, Text
from layout.furniture import PageWords, TilePlace, bands, fitted, fitted_title
from layout.geometry import Box
from layout.lettering import text_width_mm
from layout.operations import bounds, primitive_bounds
from layout.paper import Paper, paper_from
from tests.layout.samples import NOTICE, overlapping, texts

PAPERS = [
    paper_from("either"),
    paper_from("a4", 0.0),
    paper_from("letter", 15.0),
    paper_from("a4", 40.0, 10.0),
    paper_from("148x210mm"),
    paper_from("140x208mm"),
    paper_from("900x3000mm", 10.0),
]
SIZES = [(paper, size) for paper in PAPERS for size in paper.page_sizes_mm]
NAMED = [f"{paper.name}-{paper.margin_mm:g}-{size[0]:g}" for paper, size in SIZES]


def _tile(name: str, columns: int, rows: int) -> TilePlace:
    corners = [(190.0 * column, -240.0 * row) for row in range(rows) for column in range(columns)]
    cells = tuple(Box(x, y - 240.0, x + 190.0, y) for x, y in corners)
    sides = (("left", "A10"), ("right", "C10"), ("above", "B9"), ("below", "none"))
    return TilePlace(name, sides, cells, cells[0])


WORDS = {
    "plain": PageWords("Slipway stool", "Angle cards", "", 1, 1),
    "tile": PageWords("Slipway stool", "Seat template, underside", NOTICE, 3, 12, _tile("B2", 3, 2)),
    "long": PageWords("Bench for the long wall " * 5, "Seat template, top", NOTICE * 3, 103, 120, _tile("AA9", 27, 12)),
    "tall": PageWords("Ål Žď Ĝj", "Ñý gq", "Ää Gg", 9, 10, _tile("A10", 1, 14)),
}


@pytest.mark.parametrize("words", WORDS.values(), ids=WORDS)
@pytest.mark.parametrize(("paper", "size"), SIZES, ids=NAMED)
def test_the_bands_stay_between_the_margin_and_the_window(
    paper: Paper, size: tuple[float, float], words: PageWords
) -> None:
    drawing, _ = bands(size, paper, words)
    window, inside = paper.window(size), Box(0.0, 0.0, *size).grown(-paper.margin_mm)
    for item in drawing.items:
        box = primitive_bounds(item)
        assert inside.holds((box.x0, box.y0), 1e-9)
        assert inside.holds((box.x1, box.y1), 1e-9)
        assert box.x1 <= window.x0 or box.y1 <= window.y0


@pytest.mark.parametrize("words", WORDS.values(), ids=WORDS)
@pytest.mark.parametrize(("paper", "size"), SIZES, ids=NAMED)
def test_no_words_stand_over_other_words_or_over_the_map(
    paper: Paper, size: tuple[float, float], words: PageWords
) -> None:
    drawing, _ = bands(size, paper, words)
    lettering = texts(drawing)
    assert overlapping(lettering) == []
    for cell in (item for item in drawing.items if isinstance(item, Fill)):
        assert not any(bounds(Drawing((text,))).meets(primitive_bounds(cell)) for text in lettering)


@pytest.mark.parametrize(("paper", "size"), SIZES, ids=NAMED)
def test_the_bars_measure_100_mm_across_and_down(paper: Paper, size: tuple[float, float]) -> None:
    _, (across, down) = bands(size, paper, WORDS["tile"])
    assert across.nominal_mm == down.nominal_mm == 100.0
    assert math.dist(across.from_mm, across.to_mm) == pytest.approx(100.0, abs=1e-9)
    assert math.dist(down.from_mm, down.to_mm) == pytest.approx(100.0, abs=1e-9)
    assert across.from_mm[1] == across.to_mm[1]
    assert down.from_mm[0] == down.to_mm[0]


def test_a_bar_is_drawn_where_its_record_says_with_a_tick_at_each_end() -> None:
    paper = paper_from()
    drawing, bars = bands(paper.page_sizes_mm[0], paper, WORDS["plain"])
    strokes = [item for item in drawing.items if not isinstance(item, Text)]
    for bar in bars:
        ends = [{segment.start, segment.end} for stroke in strokes for segment in stroke.curve]
        assert {bar.from_mm, bar.to_mm} in ends
        for end in (bar.from_mm, bar.to_mm):
            assert sum(end in pair for pair in ends) == 2


def test_a_tile_page_says_its_name_large_its_neighbours_and_its_number() -> None:
    paper = paper_from()
    drawing, _ = bands(paper.page_sizes_mm[0], paper, WORDS["tile"])
    said = {text.text: text for text in texts(drawing)}
    assert said["B2"].height_mm >= 7.0
    assert "page 3 of 12" in said
    assert any("left A10 · right C10" in words for words in said)
    assert any("above B9 · below none" in words for words in said)
    assert said[NOTICE].bold
    assert said["Slipway stool · Seat template, underside"].height_mm == 3.5


def test_the_map_fills_the_page_s_own_cell_alone() -> None:
    paper = paper_from()
    place = TilePlace("B1", (), (Box(0, -1, 1, 0), Box(1, -1, 2, 0), Box(0, -2, 1, -1)), Box(1, -1, 2, 0))
    drawing, _ = bands(paper.page_sizes_mm[0], paper, PageWords("", "", "", 1, 3, place))
    filled = [primitive_bounds(item) for item in drawing.items if isinstance(item, Fill)]
    cells = [primitive_bounds(item) for item in drawing.items if getattr(item, "closed", False)]
    assert len(filled) == 1
    assert len(cells) == 3
    assert filled[0].x1 == pytest.approx(max(cell.x1 for cell in cells))
    assert filled[0].y0 > min(cell.y0 for cell in cells) + 1.0


def test_lettering_is_made_smaller_before_it_is_cut_short() -> None:
    words = "front edge toward you"
    wide, narrow = text_width_mm(words, 3.5), text_width_mm(words, 2.5)
    assert fitted(words, wide, (3.5, 2.5)) == (words, 3.5)
    assert fitted(words, wide - 0.1, (3.5, 2.5)) == (words, 2.5)
    cut, height = fitted(words, narrow - 0.1, (3.5, 2.5))
    assert height == 2.5
    assert cut.endswith("…")
    assert text_width_mm(cut, 2.5) <= narrow


def test_a_long_owner_is_cut_before_the_title_is() -> None:
    words, height = fitted_title("The bench that runs along the long wall", "Seat template, top", 70.0)
    assert words.endswith("… · Seat template, top")
    assert text_width_mm(words, height, bold=True) <= 70.0
