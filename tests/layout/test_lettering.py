"""Widths of lettering against the fonts themselves, and the laws of wrapping."""

from itertools import pairwise

import pytest
from fontTools.pens.boundsPen import BoundsPen
from fontTools.ttLib import TTFont
from hypothesis import given, settings
from hypothesis import strategies as st
from PIL import ImageFont

from layout.faces import face_path
from layout.lettering import (
    CAPITAL_OF_EM,
    FALL,
    RISE,
    covers,
    em_mm,
    shortened,
    text_width_mm,
    wrap,
)

modest = settings(max_examples=40, deadline=None)
words = st.text(st.sampled_from("abcWMil.ÅÖжΩ1270° "), max_size=80)
heights = st.sampled_from([2.5, 3.5, 5.0, 7.0, 10.0])
BOTH = pytest.mark.parametrize("bold", [False, True])


def ink(bold, character):
    """Lowest and highest point of a glyph, in ems, drawn from its outline."""
    with TTFont(face_path(bold)) as font:
        glyphs = font.getGlyphSet()
        pen = BoundsPen(glyphs)
        glyphs[font.getBestCmap()[ord(character)]].draw(pen)
        return pen.bounds[1] / font["head"].unitsPerEm, pen.bounds[3] / font["head"].unitsPerEm


@BOTH
@pytest.mark.parametrize("character", list("HEIZ"))
def test_a_capital_is_as_tall_as_the_height_says(bold, character):
    low, high = ink(bold, character)
    assert high * em_mm(10.0) == pytest.approx(10.0, abs=0.01)
    assert low == pytest.approx(0.0, abs=1e-9)


@BOTH
@pytest.mark.parametrize("character", list("gjpqyÅÖÉŽ()|,;жΩ°"))
def test_accents_and_tails_stay_in_the_band(bold, character):
    low, high = ink(bold, character)
    assert high <= (1 + RISE) * CAPITAL_OF_EM
    assert low >= -FALL * CAPITAL_OF_EM


@BOTH
@pytest.mark.parametrize("text", ["Slipway stool", "12.5°", "front left", "Öland Å", "1 1/4″", "жΩ"])
def test_widths_are_those_that_another_reader_of_the_font_finds(bold, text):
    # Pillow at one pixel a font unit, without kerning or hinting, as the tool sets lettering.
    font = ImageFont.truetype(str(face_path(bold)), 2048, layout_engine=ImageFont.Layout.BASIC)
    apart = sum(font.getlength(character) for character in text)
    assert text_width_mm(text, 5.0, bold) == pytest.approx(apart / 2048 * em_mm(5.0), rel=1e-3)


@modest
@given(words, words, heights, st.booleans())
def test_width_adds_up_and_grows_with_height(one, other, height, bold):
    together = text_width_mm(one + other, height, bold)
    assert together == pytest.approx(text_width_mm(one, height, bold) + text_width_mm(other, height, bold))
    assert text_width_mm(one, 2 * height, bold) == pytest.approx(2 * text_width_mm(one, height, bold))


@modest
@given(words, st.floats(15, 120), heights, st.booleans())
def test_wrapped_lines_are_never_too_wide_and_lose_no_letter(text, width, height, bold):
    lines = wrap(text, width, height, bold)
    assert all(text_width_mm(line, height, bold) <= width + 1e-9 for line in lines)
    assert "".join(lines).replace(" ", "") == text.replace(" ", "")
    assert lines


@modest
@given(words, st.floats(40, 200))
def test_wrapping_is_greedy(text, width):
    lines = wrap(text, width, 3.5)
    for line, after in pairwise(lines):
        first = after.split()[0]
        # Either the next word would not have fitted, or it is the rest of a broken one.
        assert text_width_mm(f"{line} {first}", 3.5) > width - 1e-9 or line.split()[-1] + first in text


def test_text_that_fits_stays_on_one_line_and_none_is_one_empty_line():
    assert wrap("  Check  the bars ", 200.0, 3.5) == ["Check the bars"]
    assert wrap("", 50.0, 3.5) == [""]


def test_a_word_wider_than_the_line_is_broken_and_one_letter_is_not():
    lines = wrap("Unterseitenschablone", 20.0, 5.0)
    assert len(lines) > 1
    assert "".join(lines) == "Unterseitenschablone"
    assert wrap("WM", 0.5, 5.0) == ["W", "M"]


@modest
@given(words, st.floats(15, 120), heights)
def test_shortened_text_fits_and_keeps_its_beginning(text, width, height):
    short = shortened(text, width, height)
    assert text_width_mm(short, height) <= width
    assert short == text or (short.endswith("…") and text.startswith(short[:-1]))
    assert (short == text) == (text_width_mm(text, height) <= width)


def test_the_faces_hold_the_alphabets_of_makers_and_not_others():
    assert all(covers(character) for character in "AzÅøßŁğΩжԱა°′″×½…")
    assert not covers("木")
    assert not covers("\N{SLIGHTLY SMILING FACE}")


def test_a_character_that_the_faces_lack_still_has_a_width():
    assert text_width_mm("木", 5.0) > 0
