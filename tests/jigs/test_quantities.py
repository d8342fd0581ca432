"""Lengths and angles: an exact table, what is refused and how, then laws in a shop's bounds."""

from __future__ import annotations

import contextlib
import math
import time

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from jigs.quantities import QuantityError, Units, angle_deg, format_angle, format_length, length_mm

# The millimetres are worked out by hand from 1 in = 25.4 mm exactly (NBS Circular 572, addendum, 1959).
LENGTHS = [
    (400, "mm", 400.0),
    (412.5, "mm", 412.5),
    (16.25, "in", 412.75),
    (-3, "in", -76.2),
    (0, "mm", 0.0),
    ("17.5", "mm", 17.5),
    ("17.5", "in", 444.5),
    (".5", "in", 12.7),
    ("3/4", "in", 19.05),
    ("3/4", "mm", 0.75),
    ("1 1/4 in", "mm", 31.75),
    ("1 1/4in", "mm", 31.75),
    ('1-1/4"', "mm", 31.75),
    ("1-1/4″", "mm", 31.75),
    ("1-1/4''", "mm", 31.75),
    ("1 1/4 Inches", "mm", 31.75),
    ("1¼ in", "mm", 31.75),
    ("1 ¼ in.", "mm", 31.75),
    ("¾ in", "mm", 19.05),
    ("⅞", "in", 22.225),
    ("1 1⁄4 in", "mm", 31.75),
    ("1\u00a01/4\u2009in", "mm", 31.75),
    ("32 mm", "in", 32.0),
    ("32mm", "in", 32.0),
    ("3.2 cm", "in", 32.0),
    ("0.4 m", "in", 400.0),
    ("1/2 metres", "in", 500.0),
    ("2 ft 3 in", "mm", 685.8),
    ("2ft 3in", "mm", 685.8),
    ("2 feet 3 inches", "mm", 685.8),
    ("1 foot", "mm", 304.8),
    ("2'", "mm", 609.6),
    ("1.5 ft", "mm", 457.2),
    ("2' 3 1/2", "mm", 698.5),
    ("2' 3 1/2\"", "mm", 698.5),
    ("2’ 3½”", "mm", 698.5),
    ("2'3-1/2\"", "mm", 698.5),
    ("2 ft.5 in", "mm", 622.3),
    ("-3 1/2 in", "mm", -88.9),
    ("−3 1/2 in", "mm", -88.9),
    ("- 1/2", "in", -12.7),
    ("+5 mm", "in", 5.0),
    ("  5   mm ", "in", 5.0),
]


@pytest.mark.parametrize(("written", "units", "expected_mm"), LENGTHS)
def test_a_length_is_read_exactly(written: object, units: Units, expected_mm: float) -> None:
    assert length_mm(written, units) == expected_mm


LENGTH_EXAMPLE = 'write 400, "400 mm" or "15 3/4 in"'
REFUSED_LENGTHS = [
    ("3,2", "has a comma in the number; write 3.2, with a point for decimals"),
    ("-3,25 cm", "has a comma in the number; write 3.25, with a point for decimals"),
    ("1,200 mm", "has a comma in the number; write 1200 or 1.200, with a point for decimals"),
    (True, f"is not a length; {LENGTH_EXAMPLE}"),
    (None, f"is not a length; {LENGTH_EXAMPLE}"),
    ([1], f"is not a length; {LENGTH_EXAMPLE}"),
    (math.nan, f"is not a length; {LENGTH_EXAMPLE}"),
    (-math.inf, f"is not a length; {LENGTH_EXAMPLE}"),
    ("nan", f"is not a length; {LENGTH_EXAMPLE}"),
    ("", f"is not a length; {LENGTH_EXAMPLE}"),
    ("mm", f"is not a length; {LENGTH_EXAMPLE}"),
    ("1e3", f"has a unit that is not mm, cm, m, in or ft; {LENGTH_EXAMPLE}"),
    ("12.", f"is not a length; {LENGTH_EXAMPLE}"),
    ("--3", f"is not a length; {LENGTH_EXAMPLE}"),
    ("1 - 1/4 in", f"is not a length; {LENGTH_EXAMPLE}"),
    ("١٢ mm", f"is not a length; {LENGTH_EXAMPLE}"),
    ("1.5 1/2 in", f"is not one length; {LENGTH_EXAMPLE}"),
    ("3 45", f"is not one length; {LENGTH_EXAMPLE}"),
    ("1.2.3", f"is not one length; {LENGTH_EXAMPLE}"),
    ("2 m 30 cm", f"is not one length; {LENGTH_EXAMPLE}"),
    ("2 ft 30 mm", f"is not one length; {LENGTH_EXAMPLE}"),
    ("2 ft 12 in", 'does not give whole feet and less than 12 inches; write "2 ft 3 1/2 in"'),
    ("2.5 ft 3 in", 'does not give whole feet and less than 12 inches; write "2 ft 3 1/2 in"'),
    ("5 furlongs", f"has a unit that is not mm, cm, m, in or ft; {LENGTH_EXAMPLE}"),
    ("1/0", f"has a fraction with nothing below the line; {LENGTH_EXAMPLE}"),
    ("1 5/4 in", f"has a fraction that is not less than one after a whole number; {LENGTH_EXAMPLE}"),
    (1e300, f"is far too large for a length; {LENGTH_EXAMPLE}"),
    (10**400, f"is far too large for a length; {LENGTH_EXAMPLE}"),
    ("99999999 m", f"is far too large for a length; {LENGTH_EXAMPLE}"),
    ("1" * 41, f"is longer than 40 characters; {LENGTH_EXAMPLE}"),
]


@pytest.mark.parametrize(("written", "message"), REFUSED_LENGTHS)
def test_what_is_no_length_is_refused_with_what_would_do(written: object, message: str) -> None:
    with pytest.raises(ValueError) as caught:  # noqa: PT011 - the whole message is compared
        length_mm(written, "mm")
    assert str(caught.value) == message


ANGLES = [
    (12, 12.0),
    (-12.5, -12.5),
    ("12.5", 12.5),
    ("12.5°", 12.5),
    ("12 deg", 12.0),
    ("12 deg.", 12.0),
    ("12 Degrees", 12.0),
    ("1 degree", 1.0),
    ("12 1/2°", 12.5),
    ("12½°", 12.5),
    ("12° 30'", 12.5),
    ("12°30′", 12.5),
    ("12 degrees 30 minutes", 12.5),
    ("12° 30' 36\"", 12.51),
    ("12°30′36″", 12.51),
    ("12 deg 30 min 36 sec", 12.51),
    ("12° 7.5'", 12.125),
    ("-12° 30'", -12.5),
    ("−0° 30'", -0.5),
]


@pytest.mark.parametrize(("written", "expected_deg"), ANGLES)
def test_an_angle_is_read_exactly(written: object, expected_deg: float) -> None:
    assert angle_deg(written) == expected_deg


ANGLE_EXAMPLE = 'write 12.5, "12.5°" or "12° 30\'"'
REFUSED_ANGLES = [
    ("12,5°", "has a comma in the number; write 12.5, with a point for decimals"),
    (False, f"is not an angle; {ANGLE_EXAMPLE}"),
    (math.inf, f"is not an angle; {ANGLE_EXAMPLE}"),
    ("30'", f"is not an angle; {ANGLE_EXAMPLE}"),
    ("12° 30", f"is not an angle; {ANGLE_EXAMPLE}"),
    ("12 mm", f"is not an angle; {ANGLE_EXAMPLE}"),
    ("12° 60'", f"has 60 or more minutes or seconds; {ANGLE_EXAMPLE}"),
    ("12.5° 30'", f"has a part of a degree beside minutes or of a minute beside seconds; {ANGLE_EXAMPLE}"),
    ("12° 30.5' 10\"", f"has a part of a degree beside minutes or of a minute beside seconds; {ANGLE_EXAMPLE}"),
    (1e300, f"is far too large for an angle; {ANGLE_EXAMPLE}"),
    ("9999999", f"is far too large for an angle; {ANGLE_EXAMPLE}"),
    ("°" * 41, f"is longer than 40 characters; {ANGLE_EXAMPLE}"),
]


@pytest.mark.parametrize(("written", "message"), REFUSED_ANGLES)
def test_what_is_no_angle_is_refused_with_what_would_do(written: object, message: str) -> None:
    with pytest.raises(QuantityError) as caught:
        angle_deg(written)
    assert str(caught.value) == message


PRINTED_LENGTHS = [
    (412.5, "mm", "412.5 mm"),
    (400, "mm", "400 mm"),
    (400.04, "mm", "400 mm"),
    (1000, "mm", "1000 mm"),
    (-12.34, "mm", "-12.3 mm"),
    (-0.04, "mm", "0 mm"),
    (412.75, "in", "16 1/4 in"),
    (25.4, "in", "1 in"),
    (0.0, "in", "0 in"),
    (-0.001, "in", "0 in"),
    (19.05, "in", "3/4 in"),
    (25.4 / 64, "in", "1/64 in"),
    (25.4 * (1 + 63 / 64), "in", "1 63/64 in"),
    (25.4 / 64 + 0.01, "in", "1/32 in"),
    (25.4 * 31.99, "in", "32 in"),
    (-88.9, "in", "-3 1/2 in"),
]


@pytest.mark.parametrize(("size_mm", "units", "text"), PRINTED_LENGTHS)
def test_a_length_is_printed_as_the_maker_writes_it(size_mm: float, units: Units, text: str) -> None:
    assert format_length(size_mm, units) == text


@pytest.mark.parametrize(
    ("angle", "decimals", "text"),
    [(13.46, 1, "13.5°"), (90, 1, "90.0°"), (-0.04, 1, "0.0°"), (-0.0, 1, "0.0°"), (-0.06, 1, "-0.1°"), (5, 0, "5°"),
     (14.8461, 3, "14.846°"), (-0.4, 0, "0°")],
)  # fmt: skip
def test_an_angle_is_printed_without_a_signed_nought(angle: float, decimals: int, text: str) -> None:
    assert format_angle(angle, decimals) == text


@pytest.mark.parametrize("value", [math.nan, math.inf])
def test_what_is_not_finite_is_never_printed(value: float) -> None:
    with pytest.raises(ValueError, match="cannot be written"):
        format_angle(value)
    with pytest.raises(ValueError, match="cannot be written"):
        format_length(value, "mm")


shop_mm = st.floats(min_value=-6000, max_value=6000)


@settings(max_examples=50)
@given(shop_mm)
def test_printed_inches_are_within_half_a_32nd_and_read_back_as_printed(size_mm: float) -> None:
    text = format_length(size_mm, "in")
    read = length_mm(text, "mm")
    assert abs(read - size_mm) <= 25.4 / 64 + 1e-9
    assert length_mm(text.removesuffix(" in"), "in") == read
    assert format_length(read, "in") == text


@settings(max_examples=50)
@given(shop_mm)
def test_printed_millimetres_are_within_a_twentieth(size_mm: float) -> None:
    assert abs(length_mm(format_length(size_mm, "mm"), "in") - size_mm) <= 0.05 + 1e-9


@settings(max_examples=50)
@given(st.floats(min_value=-200, max_value=200))
def test_a_number_and_the_same_number_in_text_are_one_length(number: float) -> None:
    text = f"{number:.6f}"
    assert length_mm(text, "in") == length_mm(float(text), "in")


@settings(max_examples=50)
@given(st.integers(0, 44), st.integers(0, 59), st.integers(0, 59))
def test_minutes_and_seconds_are_sixtieths(degrees: int, minutes: int, seconds: int) -> None:
    angle = angle_deg(f"-{degrees}° {minutes}' {seconds}\"")
    assert round(angle * 3600) == -(degrees * 3600 + minutes * 60 + seconds)


@settings(max_examples=200)
@given(st.text(alphabet="0123456789 -+/.,'\"°inmcft½", max_size=45) | st.text(max_size=45))
def test_any_text_is_a_finite_quantity_or_refused(text: str) -> None:
    with contextlib.suppress(QuantityError):
        assert math.isfinite(length_mm(text, "mm"))
    with contextlib.suppress(QuantityError):
        assert math.isfinite(length_mm(text, "in"))
    with contextlib.suppress(QuantityError):
        assert math.isfinite(angle_deg(text))


@pytest.mark.parametrize("part", ["1", "1 ", "1-", "1/", "1.", " ", "'", "½", "1 1/1", "in"])
def test_long_text_is_refused_at_once(part: str) -> None:
    started = time.perf_counter()
    for text in (part * 40, (part * 40)[:40], part * 100_000):
        with pytest.raises(QuantityError):
            angle_deg(text)
        with pytest.raises(QuantityError):
            length_mm(text, "mm")
    assert time.perf_counter() - started < 2.0
