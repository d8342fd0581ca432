"""How each role is inked: line widths, dashes and greys, for every writer alike.

Owns the line types; knows no file format. Imports `drawing` only.
Line types after ISO 128-2:2020: 01 continuous, 02 dashed, 04 long-dashed dotted, 05 long-dashed double-dotted, with its
lengths of dash and gap in units d: 24 d a long dash, 12 d a dash, 3 d a gap, 0.5 d a dot. Widths are of its series.
"""

from __future__ import annotations

from typing import NamedTuple

from layout.drawing import Role

WIDE_MM, NARROW_MM, FAINT_MM = 0.5, 0.25, 0.18
# The standard's d is the line's own width. Dots of half of 0.25 mm are lost on paper, so d is the next width up.
PATTERN_UNIT_MM = 0.35

BLACK, WHITE = 0.0, 1.0
# A laser printer at 600 dpi still lays a closed halftone at this level on a line of 0.18 mm.
GREY = 0.45

_DASH, _LONG_DASH, _GAP, _DOT = (k * PATTERN_UNIT_MM for k in (12, 24, 3, 0.5))
_DASHED = (_DASH, _GAP)
_LONG_DASHED_DOTTED = (_LONG_DASH, _GAP, _DOT, _GAP)
_LONG_DASHED_DOUBLE_DOTTED = (_LONG_DASH, _GAP, _DOT, _GAP, _DOT, _GAP)


class Ink(NamedTuple):
    """A line type: its width, its grey (0 black, 1 white), and dash, gap, dash, gap ... in mm; none is continuous."""

    width_mm: float
    grey: float = BLACK
    dashes_mm: tuple[float, ...] = ()


INKS = {
    Role.CUT: Ink(WIDE_MM),
    Role.SET_OUT: Ink(NARROW_MM),
    Role.NOTE: Ink(NARROW_MM),
    Role.CENTRE: Ink(NARROW_MM, dashes_mm=_LONG_DASHED_DOTTED),
    Role.HIDDEN: Ink(NARROW_MM, dashes_mm=_DASHED),
    Role.FOLD: Ink(NARROW_MM, dashes_mm=_LONG_DASHED_DOUBLE_DOTTED),
    Role.FURNITURE: Ink(FAINT_MM, GREY),
}
