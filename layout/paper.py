"""What is printed on: the sheet's size, the margin that no ink reaches, the overlap of tiles, the window for drawings.

Owns sizes and the rules they obey. Imports `geometry` and `piece` only.
Sizes are mm; a page's window is a box from the page's lower left corner.
"""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from fractions import Fraction

from layout.geometry import Box
from layout.piece import Piece

# 1 in = 25.4 mm exactly (NBS Circular 572, addendum, in force 1 July 1959).
MM_PER_INCH = 25.4
# A series: ISO 216:2007. Letter and tabloid: ANSI A and B of ASME Y14.1. Legal: the CSS Paged Media `size` keyword.
# "either" is what A4 and Letter have in common, so that it prints at true size whichever is in the tray.
SIZES_MM = {
    "either": (210.0, 11 * MM_PER_INCH),
    "a4": (210.0, 297.0),
    "letter": (8.5 * MM_PER_INCH, 11 * MM_PER_INCH),
    "legal": (8.5 * MM_PER_INCH, 14 * MM_PER_INCH),
    "tabloid": (11 * MM_PER_INCH, 17 * MM_PER_INCH),
    "a3": (297.0, 420.0),
    "a2": (420.0, 594.0),
}
DEFAULT_SIZE = "either"

# Printers leave about 4.2 mm unprinted (lasers of the PCL family, 0.166 in); the rest is for paper that feeds askew.
DEFAULT_MARGIN_MM = 6.0
LEAST_MARGIN_MM, MOST_MARGIN_MM = 0.0, 40.0
DEFAULT_OVERLAP_MM = 12.0
# A registration mark is 9 mm across and must lie in the shared strip; beyond 60 mm the overlap only wastes paper.
LEAST_OVERLAP_MM, MOST_OVERLAP_MM = 10.0, 60.0
# Bars of 100 mm must fit both ways; no plotter's roll is longer than this.
LEAST_SIDE_MM, MOST_SIDE_MM = 140.0, 20_000.0

# The side band (left) carries the bar down, the foot band the bar across and what the page says of itself. On narrow
# paper the foot is a line taller, because the tile's neighbours do not fit beside the bar.
SIDE_BAND_MM, FOOT_BAND_MM, TALL_FOOT_BAND_MM = 8.0, 19.0, 24.0
NARROW_MM = 190.0
# The bars and a little air: no page's window may be smaller than this, either way.
LEAST_WINDOW_MM = 103.0
# The scale check must not be cut up: an upright page's window is at least so tall (A5 with 6 mm margins has it).
LEAST_TALL_WINDOW_MM = 172.0
# What must be left of a page between its two shared strips, so that marks stand clear of where four pages meet.
LEAST_BETWEEN_STRIPS_MM = 28.0

_UNITS_MM = {
    "": 1.0, "mm": 1.0, "cm": 10.0, "m": 1000.0,
    "in": MM_PER_INCH, "inch": MM_PER_INCH, "inches": MM_PER_INCH, '"': MM_PER_INCH, "″": MM_PER_INCH,
}  # fmt: skip
_LENGTH = r"(\d+(?:\.\d+)?|\.\d+|\d+/\d+|\d+[ -]\d+/\d+)\s*([a-z\"″]*)"
_BOTH = re.compile(rf"\s*{_LENGTH}\s*[x×*]\s*{_LENGTH}\s*")


class PaperError(ValueError):
    """The paper asked for cannot be used: what was given, the rule, what would do."""


class DoesNotFitPaper(Exception):  # noqa: N818  (named for what is wrong, as its message begins)
    """Pieces that no page of the paper holds, each with its size and the paper that it needs."""


@dataclass(frozen=True)
class Paper:
    """A sheet and how it is used. Made by `paper_from`, which checks it; every page's window has room for the bars."""

    name: str
    width_mm: float
    height_mm: float
    margin_mm: float = DEFAULT_MARGIN_MM
    overlap_mm: float = DEFAULT_OVERLAP_MM

    @property
    def page_sizes_mm(self) -> tuple[tuple[float, float], ...]:
        """Upright and lying; one size where the sheet is square."""
        short, long = sorted((self.width_mm, self.height_mm))
        return ((short, long), (long, short)) if short != long else ((short, long),)

    @property
    def narrow(self) -> bool:
        """Whether an upright page's foot must be a line taller."""
        return min(self.width_mm, self.height_mm) - 2 * self.margin_mm < NARROW_MM

    @property
    def foot_band_mm(self) -> float:
        """The height of the foot band, the same on upright and lying pages."""
        return TALL_FOOT_BAND_MM if self.narrow else FOOT_BAND_MM

    def window(self, size_mm: tuple[float, float]) -> Box:
        """Where drawings may lie on a page of that size: inside the margins, above the foot, right of the side band."""
        margin = self.margin_mm
        left, foot = margin + SIDE_BAND_MM, margin + self.foot_band_mm
        return Box(left, foot, size_mm[0] - margin, size_mm[1] - margin)


def paper_from(
    text: str = DEFAULT_SIZE, margin_mm: float = DEFAULT_MARGIN_MM, overlap_mm: float = DEFAULT_OVERLAP_MM
) -> Paper:
    """The paper of that name or size. Raises PaperError with what was given, the rule and what would do."""
    name, (width, height) = _size(text)
    _check_range("margin", margin_mm, LEAST_MARGIN_MM, MOST_MARGIN_MM)
    _check_range("overlap", overlap_mm, LEAST_OVERLAP_MM, MOST_OVERLAP_MM)
    paper = Paper(name, width, height, float(margin_mm), float(overlap_mm))
    _check_margin(paper)
    _check_overlap(paper)
    return paper


def _size(text: str) -> tuple[str, tuple[float, float]]:
    name = text.strip().casefold()
    if name in SIZES_MM:
        return name, SIZES_MM[name]
    found = _BOTH.fullmatch(name)
    if not found:
        raise PaperError(_unknown(text))
    width_text, width_unit, height_text, height_unit = found.groups()
    if width_unit and not height_unit:
        raise PaperError(f"paper {text!r}: the second length has no unit; write {name}{width_unit}")
    width = _length(text, width_text, width_unit or height_unit)
    height = _length(text, height_text, height_unit)
    _check_sides(text, width, height)
    return f"{width:g}x{height:g}mm", (width, height)


def _unknown(text: str) -> str:
    return f"paper {text!r} is not known: use {', '.join(SIZES_MM)}, or WIDTHxHEIGHT such as 900x3000mm or 24x36in"


def _length(given: str, number: str, unit: str) -> float:
    if unit not in _UNITS_MM:
        raise PaperError(f"paper {given!r}: the unit {unit!r} is not known; use mm, cm, m or in")
    try:
        value = float(sum(Fraction(part) for part in re.split("[ -]", number)))
    except ZeroDivisionError:
        raise PaperError(_unknown(given)) from None
    return value * _UNITS_MM[unit]


def _check_sides(given: str, width_mm: float, height_mm: float) -> None:
    short, long = sorted((width_mm, height_mm))
    size = f"paper {given!r} is {width_mm:g} × {height_mm:g} mm"
    if short < LEAST_SIDE_MM:
        rule = f"its short side must be at least {LEAST_SIDE_MM:g} mm, so that the 100 mm bars fit both ways"
        raise PaperError(f"{size}: {rule}; use {DEFAULT_SIZE}")
    if long > MOST_SIDE_MM:
        raise PaperError(f"{size}: neither side may be longer than {MOST_SIDE_MM:g} mm; cut the roll shorter")


def _check_range(what: str, given_mm: float, least_mm: float, most_mm: float) -> None:
    if not least_mm <= given_mm <= most_mm:
        nearest = most_mm if given_mm > most_mm else least_mm
        rule = f"is not between {least_mm:g} and {most_mm:g} mm"
        raise PaperError(f"{what} {given_mm:g} mm {rule}; the nearest that would do is {nearest:g} mm")


def _check_margin(paper: Paper) -> None:
    short, long = paper.page_sizes_mm[0]
    least_long = LEAST_TALL_WINDOW_MM + TALL_FOOT_BAND_MM
    most = min((short - TALL_FOOT_BAND_MM - LEAST_WINDOW_MM) // 2, (long - least_long) // 2)
    if _least_window(paper) >= LEAST_WINDOW_MM and paper.window((short, long)).height >= LEAST_TALL_WINDOW_MM:
        return
    if most < LEAST_MARGIN_MM:
        least = least_long + 2 * paper.margin_mm
        rule = f"its long side must be at least {least:g} mm with a margin of {paper.margin_mm:g} mm"
        raise PaperError(f"paper {paper.name} is too short for the scale check: {rule}; use {DEFAULT_SIZE}")
    raise PaperError(
        f"margin {paper.margin_mm:g} mm leaves no room for the 100 mm bars and the scale check on {paper.name} paper; "
        f"at most {most:g} mm would do, or larger paper"
    )


def _check_overlap(paper: Paper) -> None:
    most = (_least_window(paper) - LEAST_BETWEEN_STRIPS_MM) // 2
    if paper.overlap_mm > most:
        given = f"overlap {paper.overlap_mm:g} mm is too much for {paper.name} paper"
        rule = f"{LEAST_BETWEEN_STRIPS_MM:g} mm must be left between two shared strips"
        raise PaperError(f"{given} with a margin of {paper.margin_mm:g} mm: {rule}; at most {most:g} mm would do")


def _least_window(paper: Paper) -> float:
    windows = [paper.window(size) for size in paper.page_sizes_mm]
    return min(side for window in windows for side in (window.width, window.height))


def misfit(piece: Piece, box: Box, paper: Paper, needed_mm: tuple[float, float]) -> str:
    """What is said of a piece that no page of the paper holds: its size, the room there is, the paper that would do.

    `needed_mm` is the width and height that a page's window must have.
    """
    windows = " or ".join(f"{w.width:.0f} × {w.height:.0f}" for w in map(paper.window, paper.page_sizes_mm))
    needs = " × ".join(f"{math.ceil(side)}" for side in _paper_for(needed_mm, paper.margin_mm))
    size = f"{piece.name} ({piece.title}) is {box.width:.1f} × {box.height:.1f} mm"
    return f"{size}; a page of {paper.name} paper has room for {windows} mm; it needs paper of at least {needs} mm"


def _paper_for(window_mm: tuple[float, float], margin_mm: float) -> tuple[float, float]:
    width, height = window_mm[0] + 2 * margin_mm + SIDE_BAND_MM, window_mm[1] + 2 * margin_mm + FOOT_BAND_MM
    if min(width, height) - 2 * margin_mm < NARROW_MM:
        height += TALL_FOOT_BAND_MM - FOOT_BAND_MM
    return max(width, LEAST_SIDE_MM), max(height, LEAST_SIDE_MM)
