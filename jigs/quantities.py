"""Lengths and angles as makers write them, to millimetres and degrees and back to text for paper.

Owns the reading and writing of one quantity. Imports nothing of ours.
Text is short (`LONGEST_QUANTITY`) and matched by patterns without nested repeats, so reading takes linear time.
"""

from __future__ import annotations

import math
import re
import unicodedata
from fractions import Fraction
from functools import cache
from typing import Literal

Units = Literal["mm", "in"]

LONGEST_QUANTITY = 40
LONGEST_LENGTH_MM = 1_000_000
LARGEST_ANGLE_DEG = 100_000
MM_PER_INCH = Fraction(254, 10)
# The international avoirdupois pound, exact since 1 July 1959.
KG_PER_LB = 0.45359237
# A length this close to a 64th of an inch is one: far below what paper holds, far above rounding of doubles.
SIXTY_FOURTH_TOLERANCE_MM = 1e-6

_LENGTH_EXAMPLE = 'write 400, "400 mm" or "15 3/4 in"'
_ANGLE_EXAMPLE = 'write 12.5, "12.5°" or "12° 30\'"'

# A mixed number, a fraction, or a decimal with a point. A hyphen joins only without spaces: "1 - 1/4" is no length.
_NUMBER = r"[0-9]+[ -][0-9]+/[0-9]+|[0-9]+/[0-9]+|[0-9]*\.[0-9]+|[0-9]+"
_LENGTH = rf"""(?P<sign>[+-]?)\ ?(?P<first>{_NUMBER})\ ?(?P<unit>[a-z]+(?:\.(?![0-9]))?|['"])?
    (?:[ -]?(?P<second>{_NUMBER})\ ?(?P<second_unit>[a-z]+\.?|")?)?"""
_ANGLE = rf"""(?P<sign>[+-]?)\ ?(?P<degrees>{_NUMBER})\ ?
    (?:(?:°|degrees?|deg\.?)
    (?:\ ?(?P<minutes>{_NUMBER})\ ?(?:'|minutes?|min\.?)
    (?:\ ?(?P<seconds>{_NUMBER})\ ?(?:"|seconds?|sec\.?))?)?)?"""
_COMMA = r"[+-]?\ ?([0-9]+),([0-9]+)(?![0-9,])"

_MM_PER_UNIT = {
    "mm": Fraction(1), "millimetre": Fraction(1), "millimeter": Fraction(1),
    "cm": Fraction(10), "centimetre": Fraction(10), "centimeter": Fraction(10),
    "m": Fraction(1000), "metre": Fraction(1000), "meter": Fraction(1000),
    "in": MM_PER_INCH, "inch": MM_PER_INCH, "inche": MM_PER_INCH, '"': MM_PER_INCH,
    "ft": 12 * MM_PER_INCH, "foot": 12 * MM_PER_INCH, "feet": 12 * MM_PER_INCH, "'": 12 * MM_PER_INCH,
}  # fmt: skip
_SAME_SIGN = str.maketrans({"′": "'", "’": "'", "″": '"', "”": '"', "“": '"', "−": "-", "⁄": "/", "º": "°"})


class QuantityError(ValueError):
    """Why a value is no length or angle: `rule` reads on from the value, `cure` says what would do."""

    def __init__(self, rule: str, cure: str) -> None:
        super().__init__(f"{rule}; {cure}")
        self.rule = rule
        self.cure = cure


@cache
def _pattern(source: str) -> re.Pattern[str]:
    return re.compile(source, re.VERBOSE)


def _plain(text: str, cure: str) -> str:
    """The text in lower case with one space between words, plain signs, and `1¼` spelt `1 1/4`."""
    if len(text) > LONGEST_QUANTITY:
        raise QuantityError(f"is longer than {LONGEST_QUANTITY} characters", cure)
    spelt = "".join(
        " " + unicodedata.normalize("NFKC", char) if "VULGAR FRACTION" in unicodedata.name(char, "") else char
        for char in text
    )
    return " ".join(spelt.translate(_SAME_SIGN).replace("''", '"').lower().split())


def _number(text: str, cure: str) -> Fraction:
    """The value of text that matched `_NUMBER`."""
    whole, _, part = text.replace("-", " ").rpartition(" ")
    if part.endswith("/0") or ("/" in part and int(part.partition("/")[2]) == 0):
        raise QuantityError("has a fraction with nothing below the line", cure)
    value = Fraction(part)
    if whole and value >= 1:
        raise QuantityError("has a fraction that is not less than one after a whole number", cure)
    return value + int(whole or 0)


def _real(value: object, noun: str, largest: int, cure: str) -> Fraction | None:
    """The exact value of a plain number, or None when it is text; refuses all that is neither."""
    if isinstance(value, str):
        return None
    if isinstance(value, bool) or not isinstance(value, int | float):
        raise QuantityError(f"is not {noun}", cure)
    if isinstance(value, float) and not math.isfinite(value):
        raise QuantityError(f"is not {noun}", cure)
    if abs(value) > largest:
        raise QuantityError(f"is far too large for {noun}", cure)
    # Through its shortest decimal, so that 0.1 and "0.1" are the same length.
    return Fraction(value) if isinstance(value, int) else Fraction(repr(float(value)))


def _within(value: Fraction, noun: str, largest: int, cure: str) -> float:
    if abs(value) > largest:
        raise QuantityError(f"is far too large for {noun}", cure)
    return float(value)


def _refuse_comma(text: str, unit: str = "") -> None:
    """Say which number was meant where a decimal comma stands."""
    found = _pattern(_COMMA).match(text)
    if found:
        point = f"{found[1]}.{found[2]}"
        meant = f"{found[1]}{found[2]} or {point}" if len(found[2]) == 3 else point
        raise QuantityError("has a comma in the number", f"write {meant}{unit}, with a point for decimals")


def _unit_mm(word: str) -> Fraction:
    """Millimetres in a unit written as `in`, `in.`, `inches`, `"` and the like."""
    name = word.removesuffix(".")
    size = _MM_PER_UNIT.get(name) or _MM_PER_UNIT.get(name.removesuffix("s") if len(name) > 3 else name)
    if size is None:
        raise QuantityError("has a unit that is not mm, cm, m, in or ft", _LENGTH_EXAMPLE)
    return size


def _feet_and_inches(found: re.Match[str]) -> Fraction:
    """The part in inches that follows feet: `2 ft 3 in`, `2' 3 1/2`."""
    inches = _number(found["second"], _LENGTH_EXAMPLE)
    feet_unit, inch_unit = found["unit"], found["second_unit"]
    if not feet_unit or _unit_mm(feet_unit) != 12 * MM_PER_INCH or (inch_unit and _unit_mm(inch_unit) != MM_PER_INCH):
        raise QuantityError("is not one length", _LENGTH_EXAMPLE)
    if inches >= 12 or not found["first"].isdigit():
        raise QuantityError("does not give whole feet and less than 12 inches", 'write "2 ft 3 1/2 in"')
    return inches * MM_PER_INCH


def length_mm(value: object, units: Units) -> float:
    """A length in millimetres, from a number in `units` or from text that may carry its own unit.

    Reads `1 1/4 in`, `1-1/4"`, `1¼ in`, `3/4`, `32 mm`, `3.2 cm`, `0.4 m`, `2 ft 3 in`, `2' 3 1/2`; a sign goes first.
    Raises QuantityError, a ValueError, for anything else and beyond `LONGEST_LENGTH_MM`.
    """
    bare_mm = Fraction(1) if units == "mm" else MM_PER_INCH
    number = _real(value, "a length", LONGEST_LENGTH_MM, _LENGTH_EXAMPLE)
    if number is not None:
        return _within(number * bare_mm, "a length", LONGEST_LENGTH_MM, _LENGTH_EXAMPLE)
    text = _plain(str(value), _LENGTH_EXAMPLE)
    _refuse_comma(text)
    found = _pattern(_LENGTH).fullmatch(text)
    if found is None:
        raise QuantityError("is not a length", _LENGTH_EXAMPLE)
    size = _number(found["first"], _LENGTH_EXAMPLE) * (_unit_mm(found["unit"]) if found["unit"] else bare_mm)
    if found["second"]:
        size += _feet_and_inches(found)
    return _within(-size if found["sign"] == "-" else size, "a length", LONGEST_LENGTH_MM, _LENGTH_EXAMPLE)


def _sixtieths(found: re.Match[str]) -> Fraction:
    """The part of an angle in minutes and seconds, in degrees."""
    if found["minutes"] is None:
        return Fraction(0)
    minutes = _number(found["minutes"], _ANGLE_EXAMPLE)
    seconds = _number(found["seconds"] or "0", _ANGLE_EXAMPLE)
    if minutes >= 60 or seconds >= 60:
        raise QuantityError("has 60 or more minutes or seconds", _ANGLE_EXAMPLE)
    if not found["degrees"].isdigit() or (found["seconds"] and not found["minutes"].isdigit()):
        raise QuantityError("has a part of a degree beside minutes or of a minute beside seconds", _ANGLE_EXAMPLE)
    return minutes / 60 + seconds / 3600


def angle_deg(value: object) -> float:
    """An angle in degrees, from a number or from text in degrees or degrees, minutes and seconds.

    Reads `12.5`, `12.5°`, `12 1/2 deg`, `12 degrees 30 minutes`, `12° 30'`, `12°30′15″`; a sign goes for the whole.
    Raises QuantityError, a ValueError, for anything else and beyond `LARGEST_ANGLE_DEG`.
    """
    number = _real(value, "an angle", LARGEST_ANGLE_DEG, _ANGLE_EXAMPLE)
    if number is not None:
        return float(number)
    text = _plain(str(value), _ANGLE_EXAMPLE)
    _refuse_comma(text)
    found = _pattern(_ANGLE).fullmatch(text)
    if found is None:
        raise QuantityError("is not an angle", _ANGLE_EXAMPLE)
    size = _number(found["degrees"], _ANGLE_EXAMPLE) + _sixtieths(found)
    return _within(-size if found["sign"] == "-" else size, "an angle", LARGEST_ANGLE_DEG, _ANGLE_EXAMPLE)


def _decimals(value: float, places: int) -> str:
    """The value to so many places; what rounds to nothing has no sign."""
    if not math.isfinite(value):
        raise ValueError(f"{value} cannot be written as a quantity")
    text = f"{value:.{places}f}"
    return text.lstrip("-") if not text.strip("-0.") else text


def _inches(length_mm: float) -> str:
    """To the nearest 32nd, or to a 64th that it meets within `SIXTY_FOURTH_TOLERANCE_MM`."""
    unit_mm = float(MM_PER_INCH) / 64
    count = round(length_mm / unit_mm)
    if abs(count * unit_mm - length_mm) > SIXTY_FOURTH_TOLERANCE_MM:
        count = 2 * round(length_mm / (2 * unit_mm))
    whole, rest = divmod(abs(count), 64)
    part = str(Fraction(rest, 64)) if rest else ""
    return ("-" if count < 0 else "") + " ".join(filter(None, [str(whole) if whole or not rest else "", part]))


def format_length(mm: float, units: Units) -> str:
    """A length in millimetres as a sheet prints it: `412.5 mm` to 0.1 mm, or `16 1/4 in` to a 32nd or an exact 64th."""
    text = _decimals(mm, 1)
    return f"{text.removesuffix('.0')} mm" if units == "mm" else f"{_inches(mm)} in"


def format_angle(deg: float, decimals: int = 1) -> str:
    """An angle in degrees as a sheet prints it, `13.5°`; never `-0.0°`."""
    return f"{_decimals(deg, decimals)}°"


def format_weight(kg: float, units: Units, decimals: int = 2) -> str:
    """A weight in the maker's units: kilograms beside millimetres, pounds beside inches."""
    return f"{kg:.{decimals}f} kg" if units == "mm" else f"{kg / KG_PER_LB:.{decimals}f} lb"
