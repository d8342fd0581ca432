"""The scale check fits its page on every paper, and every length on it is what its words say."""

import math
import re

import pytest
from shapely.geometry import LineString, Polygon

from layout.drawing import Role, Stroke
from layout.operations import bounds, text_corners
from layout.paper import SIZES_MM, Paper, paper_from
from layout.scale_check import scale_bars, scale_check
from layout.tiling import ink_box
from tests.layout.samples import overlapping, texts

PAPERS = [paper_from(name) for name in SIZES_MM]
PAPERS += [paper_from("148x210mm"), paper_from("140x208mm"), paper_from("141x210mm", 7.0), paper_from("a4", 38.0)]
PAPERS += [paper_from("160x215mm", 9.0), paper_from("900x3000mm"), paper_from("215x216mm")]
NAMES = [f"{paper.name}-{paper.margin_mm:g}" for paper in PAPERS]


@pytest.mark.parametrize("paper", PAPERS, ids=NAMES)
def test_it_fits_an_upright_page_unturned(paper: Paper) -> None:
    box, window = ink_box(scale_check(paper)), paper.window(paper.page_sizes_mm[0])
    assert box.width <= window.width
    assert box.height <= window.height


@pytest.mark.parametrize("paper", PAPERS, ids=NAMES)
def test_no_words_stand_over_other_words(paper: Paper) -> None:
    assert overlapping(texts(scale_check(paper).drawing)) == []


@pytest.mark.parametrize("paper", PAPERS, ids=NAMES)
def test_words_keep_clear_of_the_bars_and_the_square(paper: Paper) -> None:
    piece = scale_check(paper)
    lines = [item for item in piece.drawing.items if isinstance(item, Stroke) and item.role is Role.SET_OUT]
    for text in texts(piece.drawing):
        patch = Polygon(text_corners(text)).buffer(-0.3)
        crossed = [s for s in lines for g in s.curve if LineString([g.start, g.end]).intersects(patch)]
        assert not crossed or text.over, text.text


@pytest.mark.parametrize("paper", PAPERS, ids=NAMES)
def test_every_bar_is_as_long_as_its_record_says_and_as_its_words_say(paper: Paper) -> None:
    bars = scale_bars(paper)
    assert all(math.dist(a, b) == pytest.approx(nominal, abs=1e-9) for a, b, nominal in bars)
    said = [text.text for text in texts(scale_check(paper).drawing)]
    for way, axis in (("across", 0), ("down", 1)):
        promised = [re.match(rf"{way}: must measure (\d+) (mm|in)", words) for words in said]
        lengths = {int(m[1]) * (25.4 if m[2] == "in" else 1.0) for m in promised if m}
        drawn = {round(b[axis] - a[axis], 6) for a, b, _ in bars[:4] if a[1 - axis] == b[1 - axis]}
        assert len(lengths) == 2
        assert {round(length, 6) for length in lengths} == drawn


def test_letter_and_a4_carry_bars_of_150_mm_and_6_in() -> None:
    for name in ("either", "a4", "letter"):
        assert [nominal for _, _, nominal in scale_bars(paper_from(name))[:2]] == pytest.approx([150.0, 152.4])


def test_the_square_s_diagonals_are_recorded_and_named() -> None:
    paper = paper_from()
    assert [nominal for _, _, nominal in scale_bars(paper)[6:]] == pytest.approx([141.421356, 141.421356])
    assert sum(text.text == "141.4 mm" for text in texts(scale_check(paper).drawing)) == 2


def test_bars_have_a_stroke_from_end_to_end() -> None:
    paper = paper_from()
    segments = {
        frozenset((segment.start, segment.end))
        for item in scale_check(paper).drawing.items
        if isinstance(item, Stroke)
        for segment in item.curve
    }
    assert all(frozenset((a, b)) in segments for a, b, _ in scale_bars(paper))


def test_there_is_a_place_to_write_down_each_measurement() -> None:
    for paper in (paper_from(), paper_from("140x208mm")):
        said = [text.text for text in texts(scale_check(paper).drawing)]
        assert {"across", "down", "diagonal", "other diagonal"} <= set(said)
        assert said.count("mm") == 4


def test_it_says_what_to_do_and_what_to_look_for() -> None:
    said = " ".join(text.text for text in texts(scale_check(paper_from()).drawing))
    for words in ("100 %", "actual size", "steel rule", "0.5 mm", "STOP", "skews", "0.1–0.2 %", "0.2–0.4 %"):
        assert words in said


def test_the_drawing_starts_at_its_own_origin() -> None:
    box = bounds(scale_check(paper_from()).drawing)
    assert box.x0 >= 0.0
    assert box.y0 >= 0.0
