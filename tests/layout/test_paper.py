"""Sizes, what is refused, and that every paper that is let through has room for what every page carries."""

import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from layout.geometry import Box
from layout.paper import DEFAULT_SIZE, PaperError, misfit, paper_from
from layout.piece import Piece
from tests.layout.samples import card


@pytest.mark.parametrize(
    ("name", "size"),
    [
        ("a4", (210.0, 297.0)),  # ISO 216:2007
        ("a3", (297.0, 420.0)),  # ISO 216:2007
        ("a2", (420.0, 594.0)),  # ISO 216:2007
        ("letter", (215.9, 279.4)),  # 8.5 × 11 in, ASME Y14.1
        ("tabloid", (279.4, 431.8)),  # 11 × 17 in, ASME Y14.1
        ("legal", (215.9, 355.6)),  # 8.5 × 14 in, CSS Paged Media, `size` keywords
        ("either", (210.0, 279.4)),  # what A4 and Letter have in common
    ],
)
def test_named_sizes_are_the_standards_own(name: str, size: tuple[float, float]) -> None:
    paper = paper_from(name)
    assert (paper.width_mm, paper.height_mm) == pytest.approx(size, abs=1e-9)


def test_either_fits_both_a4_and_letter_whichever_is_in_the_tray() -> None:
    either = paper_from()
    for other in (paper_from("a4"), paper_from("letter")):
        assert either.width_mm <= other.width_mm
        assert either.height_mm <= other.height_mm


@pytest.mark.parametrize(
    ("text", "size"),
    [
        ("900x3000mm", (900.0, 3000.0)),
        ("900x3000", (900.0, 3000.0)),
        ("36x120in", (914.4, 3048.0)),  # 1 in = 25.4 mm exactly (NBS Circular 572, addendum)
        ("24 in x 36 in", (609.6, 914.4)),
        ("610mm x 1.2m", (610.0, 1200.0)),
        ("61cm × 1.2 M", (610.0, 1200.0)),
        ('8 1/2" x 11"', (215.9, 279.4)),
        ("  A4 ", (210.0, 297.0)),
        ("LETTER", (215.9, 279.4)),
    ],
)
def test_a_size_may_be_written_in_any_unit_and_case(text: str, size: tuple[float, float]) -> None:
    paper = paper_from(text)
    assert (paper.width_mm, paper.height_mm) == pytest.approx(size, abs=1e-9)


@pytest.mark.parametrize(
    ("text", "margin", "overlap", "said"),
    [
        ("a44", 6, 12, ["'a44'", "not known", "either", "900x3000mm"]),
        ("", 6, 12, ["''", "not known"]),
        ("300xinf", 6, 12, ["not known"]),
        ("-300x400mm", 6, 12, ["not known"]),
        ("1/0x400mm", 6, 12, ["not known"]),
        ("300x400furlong", 6, 12, ["'furlong'", "mm, cm, m or in"]),
        ("24in x 36", 6, 12, ["no unit", "24in x 36in"]),
        ("139x300mm", 6, 12, ["139 × 300", "at least 140 mm", "either"]),
        ("900x20001mm", 6, 12, ["20000 mm", "cut the roll"]),
        ("140x140mm", 6, 12, ["too short", "208 mm"]),
        ("a4", 41, 12, ["margin 41 mm", "between 0 and 40", "40 mm"]),
        ("a4", -1, 12, ["margin -1 mm", "0 mm"]),
        ("a4", float("nan"), 12, ["margin nan"]),
        ("a4", 6, 9.5, ["overlap 9.5 mm", "between 10 and 60", "10 mm"]),
        ("a4", 6, 61, ["overlap 61 mm", "60 mm"]),
        ("148x210mm", 12, 12, ["margin 12 mm", "100 mm bars", "at most 7 mm"]),
        ("148x210mm", 6, 60, ["overlap 60 mm", "at most 42 mm"]),
    ],
)
def test_what_cannot_be_used_is_refused_with_what_would_do(
    text: str, margin: float, overlap: float, said: list[str]
) -> None:
    with pytest.raises(PaperError) as refusal:
        paper_from(text, margin, overlap)
    for words in said:
        assert words in str(refusal.value)


@pytest.mark.parametrize(
    ("text", "margin", "overlap"), [("148x210mm", 7, 12), ("148x210mm", 6, 42), ("140x208mm", 6, 12), ("a4", 40, 10)]
)
def test_what_a_refusal_says_would_do_does(text: str, margin: float, overlap: float) -> None:
    paper_from(text, margin, overlap)


def test_a_refused_paper_is_a_value_error() -> None:
    assert issubclass(PaperError, ValueError)


def test_margin_and_overlap_have_the_shop_defaults() -> None:
    paper = paper_from(DEFAULT_SIZE)
    assert (paper.margin_mm, paper.overlap_mm) == (6.0, 12.0)


@settings(max_examples=200)
@given(
    short=st.floats(100.0, 1000.0),
    long=st.floats(100.0, 3000.0),
    margin=st.floats(0.0, 40.0),
    overlap=st.floats(10.0, 60.0),
)
def test_every_accepted_paper_has_room_for_bars_marks_and_the_scale_check(
    short: float, long: float, margin: float, overlap: float
) -> None:
    try:
        paper = paper_from(f"{short:f}x{long:f}mm", margin, overlap)
    except PaperError:
        assume(False)
        return
    for size in paper.page_sizes_mm:
        window = paper.window(size)
        assert window.x0 == pytest.approx(margin + 8.0)
        assert window.y0 - margin == pytest.approx(24.0 if paper.narrow else 19.0)
        assert (window.x1, window.y1) == pytest.approx((size[0] - margin, size[1] - margin))
        assert min(window.width, window.height) >= 102.0
        assert min(window.width, window.height) >= 2 * overlap + 25.0
    assert paper.page_sizes_mm[0][0] <= paper.page_sizes_mm[0][1]


def test_square_paper_has_one_page_size() -> None:
    assert paper_from("600x600mm").page_sizes_mm == ((600.0, 600.0),)


def test_a_misfit_names_the_piece_its_size_the_room_and_paper_that_holds_it() -> None:
    piece: Piece = card("card 3", 300.0, 280.0)
    words = misfit(piece, Box(0.0, 0.0, 300.0, 280.0), paper_from("a4"), (300.0, 280.0))
    assert words.startswith("card 3 (Angle cards) is 300.0 × 280.0 mm")
    assert "190 × 266" in words
    needed = words.rsplit("at least ", 1)[1].removesuffix(" mm")
    width, height = needed.split(" × ")
    window = paper_from(f"{width}x{height}mm").window((float(width), float(height)))
    assert window.width >= 300.0
    assert window.height >= 280.0
