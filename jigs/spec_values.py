"""The kinds of value that a spec's keys hold: names that can be printed, lengths and angles within bounds, pairs.

Owns their reading inside the models, and what a name may hold. Imports `problems`, `quantities`, `spec_problems`.
"""

from __future__ import annotations

import unicodedata
from collections.abc import Callable

from pydantic import BeforeValidator, ValidationInfo
from pydantic_core import core_schema

from jigs.problems import shown
from jigs.quantities import MM_PER_INCH, QuantityError, Units, angle_deg, format_length, length_mm
from jigs.spec_problems import refusal

GRAIN_DEG = (-90.0, 90.0)
POINTS = (3, 500)
LONGEST_NAME = 60

# Letters of scripts that run from left to right without joining, and the punctuation and symbols below U+2200.
_PRINTABLE = (
    (0x0020, 0x036F), (0x0370, 0x058F), (0x10A0, 0x10FF), (0x1C80, 0x1CBF), (0x1E00, 0x21FF), (0x2C60, 0x2C7F),
    (0x2D00, 0x2D2F), (0xA720, 0xA7FF),
)  # fmt: skip
_UNPRINTABLE = {
    "Cc": "a control character", "Cs": "a surrogate", "Co": "a private character", "Cn": "an unassigned character",
}  # fmt: skip
_COMBINING = frozenset({"Mn", "Mc", "Me"})


def unprintable(text: str, covers: Callable[[str], bool] | None = None) -> list[tuple[str, str]]:
    """The characters of a text that a sheet cannot print, each once, and what it is called: `U+202E RIGHT-TO-…`.

    The text is taken as it is: a mark that normalising would have joined to its letter counts. `covers` tells whether
    the lettering has a character, and is asked only for those that would do otherwise.
    """
    return [
        (char, f"U+{ord(char):04X} {_called(char)}")
        for char in dict.fromkeys(text)
        if not _prints(char) or not (covers is None or covers(char))
    ]


def _called(char: str) -> str:
    kind = _UNPRINTABLE.get(unicodedata.category(char), "a character whose name is not known here")
    return unicodedata.name(char, kind)


def _prints(char: str) -> bool:
    category = unicodedata.category(char)
    if category[0] == "C" or category in _COMBINING or category in {"Zl", "Zp"}:
        return False
    return any(first <= ord(char) <= last for first, last in _PRINTABLE)


def name_text(value: object) -> str:
    """A name in composed form, its spaces plain and single. The length is looked at first: composing can be slow."""
    if not isinstance(value, str):
        raise refusal("is not text", "put the name in quotes")
    text = _composed(value) if len(value) <= 4 * LONGEST_NAME else value
    if not 1 <= len(text) <= LONGEST_NAME:
        raise refusal(f"is not a name of 1 to {LONGEST_NAME} characters")
    bad = unprintable(text)
    if bad:
        cure = "use Latin, Greek, Cyrillic, Armenian or Georgian letters, digits and common signs"
        raise refusal(f"holds {bad[0][1]}, which cannot be printed", cure)
    return text


def _composed(text: str) -> str:
    plain = "".join(" " if unicodedata.category(char) == "Zs" else char for char in text)
    return unicodedata.normalize("NFC", " ".join(filter(None, plain.split(" "))))


def units_of(info: ValidationInfo) -> Units:
    """The units of bare numbers: those of the file being read, else millimetres."""
    units: Units = (info.context or {}).get("units", "mm")
    return units


def _bounds(low_mm: float, high_mm: float, units: Units) -> str:
    """`50 and 6000 mm`, or in inches rounded inward to a 32nd, so that what is shown will do."""
    if units == "mm":
        return f"{low_mm:g} and {high_mm:g} mm"
    step_mm = float(MM_PER_INCH) / 32
    low, high = -(-low_mm // step_mm) * step_mm, high_mm // step_mm * step_mm
    return f"{format_length(low, units).removesuffix(' in')} and {format_length(high, units)}"


class Reads:
    """A value read wholly by one of our functions, of the value and of pydantic's account of where it stands.

    It says so to pydantic in its own terms, which spares it from working out each function's signature at every start.
    """

    def __init__(self, read: Callable[[object, ValidationInfo], object]) -> None:
        self._read = read

    def __get_pydantic_core_schema__(self, source: object, handler: object) -> core_schema.CoreSchema:
        """The schema that calls the function and nothing else."""
        return core_schema.with_info_plain_validator_function(self._read)


def length(bounds_mm: tuple[float, float]) -> Reads:
    """Reads a length in the file's units, within bounds in mm."""
    low, high = bounds_mm

    def read(value: object, info: ValidationInfo) -> float:
        units = units_of(info)
        try:
            size = length_mm(value, units)
        except QuantityError as error:
            raise refusal(error.rule, error.cure) from None
        if not low <= size <= high:
            given = shown(value) + (" in" if units == "in" and not isinstance(value, str) else "")
            raise refusal(f"is not between {_bounds(low, high, units)}", given=given, kind="length_bounds")
        return size

    return Reads(read)


def _read_angle(value: object, bounds_deg: tuple[float, float]) -> float:
    try:
        angle = angle_deg(value)
    except QuantityError as error:
        raise refusal(error.rule, error.cure) from None
    if not bounds_deg[0] <= angle <= bounds_deg[1]:
        raise refusal(f"is not between {bounds_deg[0]:g} and {bounds_deg[1]:g} degrees")
    return angle


def angle(bounds_deg: tuple[float, float]) -> Reads:
    """Reads an angle within bounds in degrees."""
    return Reads(lambda value, _info: _read_angle(value, bounds_deg))


def pair(value: object) -> object:
    """The value, if it is a list of two; what is in it is read after."""
    if isinstance(value, list | tuple) and len(value) == 2:
        return value
    raise refusal("is not a pair of lengths", "write [x, y], such as [125, 70]")


PAIR = BeforeValidator(pair)


def two(what: str, example: str) -> BeforeValidator:
    """Reads a list of two, which are called so and written like this."""

    def read(value: object) -> object:
        if isinstance(value, list | tuple) and len(value) == 2:
            return value
        raise refusal(f"is not {what}", f"write {example}")

    return BeforeValidator(read)


def triple(value: object) -> object:
    """The value, if it is a list of three; what is in it is read after."""
    if isinstance(value, list | tuple) and len(value) == 3:
        return value
    raise refusal("is not three lengths", "write [x, y, z], such as [0, 180, 1200]")


def number(bounds: tuple[float, float]) -> Reads:
    """Reads a plain number within bounds."""
    low, high = bounds

    def read(value: object, _info: ValidationInfo) -> float:
        if isinstance(value, bool) or not isinstance(value, int | float) or not low <= value <= high:
            raise refusal(f"is not a number between {low:g} and {high:g}")
        return float(value)

    return Reads(read)


def count(bounds: tuple[int, int]) -> Reads:
    """Reads a whole number within bounds."""
    low, high = bounds

    def read(value: object, _info: ValidationInfo) -> int:
        if isinstance(value, bool) or not isinstance(value, int) or not low <= value <= high:
            raise refusal(f"is not a whole number from {low} to {high}")
        return value

    return Reads(read)


def points(value: object) -> object:
    """The value, unless it is a list of too few or too many."""
    if isinstance(value, list | tuple) and not POINTS[0] <= len(value) <= POINTS[1]:
        raise refusal(f"are not the {POINTS[0]} to {POINTS[1]} that a polygon may have", given=f"{len(value)} points")
    return value


def grain(value: object) -> str | float:
    """A word, or degrees from the fore-and-aft line."""
    if value in ("fore-and-aft", "across"):
        return str(value)
    if isinstance(value, str) and value[:1].isalpha():
        raise refusal('is not "fore-and-aft" or "across" or an angle from the fore-and-aft line')
    return _read_angle(value, GRAIN_DEG)
