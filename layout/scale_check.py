"""The scale check: the page to print first and measure, before any other is trusted.

Owns that one page's drawing, sized by the paper. Imports layout's ground, `paper` and `tiling`'s ink margin.
Its own mm: origin at the lower left, x to the right, y up; the whole drawing lies at or above and right of the origin.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from functools import cache
from typing import NamedTuple

from layout.drawing import Drawing, Primitive, Role, Text, gather
from layout.geometry import Affine, Box, Point, along
from layout.lettering import FALL, RISE, wrap
from layout.paper import MM_PER_INCH, Paper
from layout.piece import Piece
from layout.shapes import box_outline, line
from layout.tiling import INK_MARGIN_MM

NAME, SHEET = "scale check", "scale"
SQUARE_MM = 100.0
# Off by more than this in 100 mm, the print is not to be used: a seat 400 mm wide would be 2 mm out.
MOST_ERROR_MM = 0.5
# The drawing grows no further on large paper.
_MOST_WIDTH_MM, _MOST_HEIGHT_MM = 190.0, 245.0
_LONG_MM, _SHORT_MM = (150.0, 6 * MM_PER_INCH), (100.0, 4 * MM_PER_INCH)
# Below this height the words need the room above the bars.
_LONG_DOWN_FROM_MM = 200.0
_LOW_LEFT: Point = (18.0, 20.0)
_FIELDS_WIDTH_MM = 46.0
_LINE_PITCH = 1.72


class Rule(NamedTuple):
    """A bar: its start, direction and length, the pitch of its ticks, after how many they grow, its words."""

    start: Point
    angle_deg: float
    length_mm: float
    tick_mm: float
    grow: tuple[int, int]
    words: str

    @property
    def end(self) -> Point:
        """The far end."""
        return along(self.start, self.angle_deg, self.length_mm)


@cache
def scale_check(paper: Paper) -> Piece:
    """The page for that paper, drawn to fit an upright page's window unturned."""
    room = _room(paper)
    parts: list[Drawing | Primitive] = [*(_rule_drawing(rule) for rule in _rules(room)), _square()]
    parts += [gather(_words(room))]
    notice = "PRINT THIS PAGE FIRST · measure it before you trust any other"
    return Piece(NAME, SHEET, "Scale check", gather(parts), "tile", notice)


def scale_bars(paper: Paper) -> tuple[tuple[Point, Point, float], ...]:
    """What can be measured, in the piece's own mm: from, to, true length. Bars, square and both diagonals."""
    box, diagonal = _square_box(), SQUARE_MM * math.sqrt(2.0)
    a, b, c, d = box.corners()
    square = ((a, b, SQUARE_MM), (a, d, SQUARE_MM), (a, c, diagonal), (d, b, diagonal))
    return (*((rule.start, rule.end, rule.length_mm) for rule in _rules(_room(paper))), *square)


def _room(paper: Paper) -> Box:
    window = paper.window(paper.page_sizes_mm[0]).grown(-INK_MARGIN_MM - 0.1)
    return Box(0.0, 0.0, min(window.width, _MOST_WIDTH_MM), min(window.height, _MOST_HEIGHT_MM))


def _square_box() -> Box:
    x, y = _LOW_LEFT
    return Box(x, y, x + SQUARE_MM, y + SQUARE_MM)


def _rules(room: Box) -> tuple[Rule, ...]:
    across = _LONG_MM if room.width >= _LONG_MM[1] else _SHORT_MM
    down = _LONG_MM if room.height >= _LONG_DOWN_FROM_MM else _SHORT_MM
    return (
        _mm_rule((0.0, 14.0), 0.0, across[0]),
        _inch_rule((0.0, 5.0), 0.0, across[1]),
        _mm_rule((4.0, _LOW_LEFT[1]), 90.0, down[0]),
        _inch_rule((13.0, _LOW_LEFT[1]), 90.0, down[1]),
    )


def _mm_rule(start: Point, angle_deg: float, length_mm: float) -> Rule:
    way = "down" if angle_deg else "across"
    return Rule(start, angle_deg, length_mm, 1.0, (5, 10), f"{way}: must measure {length_mm:g} mm")


def _inch_rule(start: Point, angle_deg: float, length_mm: float) -> Rule:
    way, inches = "down" if angle_deg else "across", length_mm / MM_PER_INCH
    return Rule(start, angle_deg, length_mm, MM_PER_INCH / 8, (4, 8), f"{way}: must measure {inches:g} in")


def _rule_drawing(rule: Rule) -> Drawing:
    """The bar with ticks on its left hand and its words on its right hand."""
    place = Affine.turn(rule.angle_deg).then(Affine.move(*rule.start))
    count = round(rule.length_mm / rule.tick_mm)
    ticks = [(k * rule.tick_mm, _tick_length(k, rule.grow)) for k in range(count + 1)]
    parts: list[Primitive] = [line(rule.start, rule.end, Role.SET_OUT)]
    parts += [line(place.point((x, 0.0)), place.point((x, tick)), Role.SET_OUT) for x, tick in ticks]
    foot = place.point((rule.length_mm / 2, -3.6))
    return Drawing((*parts, Text(foot, rule.words, 2.5, align="centre", angle_deg=rule.angle_deg)))


def _tick_length(k: int, grow: tuple[int, int]) -> float:
    return 3.5 if k % grow[1] == 0 else 2.5 if k % grow[0] == 0 else 1.5


def _square() -> Drawing:
    """The square and its diagonals, with the numbers that they must measure."""
    box = _square_box()
    a, b, c, d = box.corners()
    number = f"{SQUARE_MM * math.sqrt(2.0):.1f} mm"
    quarter, far = SQUARE_MM / 4, SQUARE_MM * 3 / 4
    lines = [box_outline(box, Role.SET_OUT), line(a, c, Role.SET_OUT), line(d, b, Role.SET_OUT)]
    words = [
        Text((a[0] + quarter + 1.2, a[1] + quarter - 1.2), number, 3.5, align="centre", angle_deg=45.0, over=True),
        Text((a[0] + far - 1.2, a[1] + quarter - 1.2), number, 3.5, align="centre", angle_deg=-45.0, over=True),
        Text((box.centre[0], a[1] + 2.5), f"{SQUARE_MM:g} mm", 3.5, align="centre"),
        Text((a[0] + 6.0, box.centre[1]), f"{SQUARE_MM:g} mm", 3.5, align="centre", angle_deg=90.0),
    ]
    return Drawing((*lines, *words))


_HEADING = "Scale check: print this page first"
_STEPS = (
    "Print at 100 % or “actual size”. Never “fit”, “shrink” or “scale to paper”.",
    "Measure with the steel rule that you will use at the seat, and write it down.",
    f"If across or down is off by more than {MOST_ERROR_MM:g} mm in 100, STOP. Look in the print settings for "
    "scaling, fit to page, borderless or a wrong paper size; print this page again.",
    "Both diagonals must be 141.4 mm. If they differ, this printer skews.",
    "Damp paper grows, 0.1–0.2 % along its grain, 0.2–0.4 % across: measure on the day of marking.",
)
_FIELDS = ("across", "down", "diagonal", "other diagonal")


def _words(room: Box) -> Iterator[Drawing]:
    square = _square_box()
    top = _LOW_LEFT[1] + _rules(room)[3].length_mm
    left = 0.0 if top <= square.y1 + 2.0 else _LOW_LEFT[0] + 2.0
    yield _instructions(Box(left, square.y1 + 3.0, room.x1, room.y1))
    if room.width - square.x1 >= _FIELDS_WIDTH_MM + 6.0:
        yield gather(_field((square.x1 + 6.0, square.y1 - 22.0 * (k + 1)), name) for k, name in enumerate(_FIELDS))
    else:
        yield _fields_inside(square)


def _instructions(zone: Box) -> Drawing:
    """What to do, at the largest lettering at which it stays in the zone."""
    large, low = _steps(zone, 3.5)
    return large if low >= zone.y0 else _steps(zone, 2.5)[0]


def _steps(zone: Box, height_mm: float) -> tuple[Drawing, float]:
    pitch, gap, indent = _LINE_PITCH * height_mm, 0.25 * height_mm, 2.0 * height_mm
    y = zone.y1 - (1.0 + RISE) * height_mm
    drawn = [Text((zone.x0, y), _HEADING, height_mm, bold=True)]
    for number, step in enumerate(_STEPS, 1):
        y -= gap
        drawn.append(Text((zone.x0, y - pitch), f"{number}.", height_mm, bold=True))
        for words in wrap(step, zone.width - indent, height_mm):
            y -= pitch
            drawn.append(Text((zone.x0 + indent, y), words, height_mm))
    return Drawing(tuple(drawn)), y - FALL * height_mm


def _field(at: Point, name: str) -> Drawing:
    """A line to write what was measured on, its name above it."""
    end = at[0] + _FIELDS_WIDTH_MM - 10.0
    words = (Text((at[0], at[1] + 11.0), name, 3.5), Text((end + 2.0, at[1]), "mm", 3.5))
    return Drawing((*words, line(at, (end, at[1]), Role.NOTE)))


def _fields_inside(square: Box) -> Drawing:
    """The same in the square's upper and lower quarters, where there is no room beside it."""
    middle = square.centre[0]
    parts: list[Primitive] = []
    for k, name in enumerate(_FIELDS):
        y = (square.y1 - 9.0 - 9.0 * k) if k < 2 else (square.y0 + 19.0 - 8.5 * (k - 2))
        parts += [Text((middle - 5.0, y), name, 2.5, align="right"), Text((middle + 14.0, y), "mm", 2.5)]
        parts.append(line((middle - 4.0, y), (middle + 13.0, y), Role.NOTE))
    return Drawing(tuple(parts))
