"""SVG path data as an outline: M L H V C S Q T A Z, absolute and relative, one closed subpath.

Owns the reading, stricter than the library's, and the conversion of elliptical arcs. Imports layout's geometry and
curves, `outlines`; fontTools only when a path is read. The numbers are plan coordinates, so y runs to the back and an
arc's sweep flag 1 is counter-clockwise in plan. Nothing is flattened: quadratics are raised to cubics and arcs stay
arcs.
"""

from __future__ import annotations

import math
import re
from collections.abc import Iterator

from jigs.outlines import OutlineError, drawn, precise, raised, reversed_curve, signed_area_mm2
from jigs.quantities import Units
from layout.curves import Arc, Cubic, Curve, Line, Segment
from layout.geometry import Point, cos_sin

# An end this near to the start closes the outline.
CLOSING_GAP_MM = 0.01
# No seat needs a number, be it a coordinate or the radius of an arc, beyond this.
LARGEST_NUMBER_MM = 100_000.0

_FIELD = "seat.path"
_COUNTS = {"M": 2, "L": 2, "H": 1, "V": 1, "C": 6, "S": 4, "Q": 4, "T": 2, "A": 7, "Z": 0}
_COMMAND = re.compile("([MmZzLlHhVvCcSsQqTtAa])")
_SEPARATOR = r"([ \t\r\n\f]*,?[ \t\r\n\f]*)"
_NUMBER = re.compile(r"([+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?)" + _SEPARATOR)
_FLAG = re.compile("([01])" + _SEPARATOR)
_SPACE = " \t\r\n\f"
_FLAG_PLACES = (3, 4)
_EXCERPT = 24


def path_outline(data: str, unit_mm: float, units: Units) -> Curve:
    """The outline, in mm, that path data in units of `unit_mm` gives. Raises OutlineError for anything else."""
    from fontTools.svgLib.path import parse_path  # noqa: PLC0415  (only paths pay for it)

    pen = _Pen(unit_mm, units)
    parse_path(" ".join(_plain_commands(data, LARGEST_NUMBER_MM / unit_mm)), pen)
    curve = drawn(pen.segments)
    if not curve:
        raise OutlineError(_FIELD, _excerpt(data, 0), "draws nothing", "give lines or curves after M, and end with Z")
    return reversed_curve(curve) if signed_area_mm2(curve) < 0.0 else curve


def _excerpt(data: str, at: int) -> str:
    """The data from a place on, quoted, as much as a message holds."""
    rest = " ".join(data[at : at + 4 * _EXCERPT].split())
    return f'"{rest}"' if len(rest) <= _EXCERPT else f'"{rest[:_EXCERPT]}…"'


def _plain_commands(data: str, largest: float) -> Iterator[str]:
    """The commands, each with its numbers as Python writes them: the library passes over what it cannot read."""
    before, *rest = _COMMAND.split(data)
    if before.strip(_SPACE) or not rest or rest[0] not in "Mm":
        cure = 'begin with M and the starting point, such as "M -200 30 L 200 30"'
        raise OutlineError(_FIELD, _excerpt(data, 0), "is not SVG path data", cure)
    at = len(before)
    for command, arguments in zip(rest[::2], rest[1::2], strict=True):
        numbers = list(_numbers(command, data, at + 1, at + 1 + len(arguments), largest))
        count = _COUNTS[command.upper()]
        if (count == 0) != (not numbers) or (count and len(numbers) % count):
            takes = f"it takes {count} at a time" if count else "it takes none"
            raise OutlineError(_FIELD, _excerpt(data, at), f"gives {command} {len(numbers)} numbers, and {takes}")
        yield " ".join([command, *numbers])
        at += 1 + len(arguments)


def _numbers(command: str, data: str, at: int, end: int, largest: float) -> Iterator[str]:
    """The numbers between two places of the data. Raises OutlineError for whatever else stands there."""
    while at < end and data[at] in _SPACE:
        at += 1
    places = 0
    while at < end:
        flag = command in "Aa" and places % _COUNTS["A"] in _FLAG_PLACES
        found = (_FLAG if flag else _NUMBER).match(data, at, end)
        if found is None:
            rule = "is not a flag, 0 or 1" if flag else "is not a number or a command of a path"
            raise OutlineError(_FIELD, _excerpt(data, at), rule)
        if abs(float(found[1])) > largest:
            raise OutlineError(_FIELD, _excerpt(data, at), f"has a number larger than {largest:g}")
        yield found[1] if flag else repr(float(found[1]))
        places += 1
        if found.end() == end and "," in found[2]:
            raise OutlineError(_FIELD, _excerpt(data, at), "has a comma with no number after it")
        at = found.end()


class _Pen:
    """Takes the library's calls and keeps segments in mm; the names of its methods are the library's."""

    def __init__(self, unit_mm: float, units: Units) -> None:
        self.segments: list[Segment] = []
        self._unit_mm = unit_mm
        self._units = units
        self._start: Point | None = None
        self._at: Point = (0.0, 0.0)

    def _mm(self, p: Point) -> Point:
        return (p[0] * self._unit_mm, p[1] * self._unit_mm)

    def _add(self, segment: Segment, end: Point) -> None:
        self.segments.append(segment)
        self._at = end

    def moveTo(self, p: Point) -> None:  # noqa: N802
        if self._start is not None:
            rule = "is a second outline or hole, and a seat has one outline"
            raise OutlineError(_FIELD, "what follows the first closed line or M", rule, "leave it out")
        self._start = self._at = self._mm(p)

    def lineTo(self, p: Point) -> None:  # noqa: N802
        end = self._mm(p)
        self._add(Line(self._at, end), end)

    def curveTo(self, first: Point, second: Point, p: Point) -> None:  # noqa: N802
        end = self._mm(p)
        self._add(Cubic(self._at, self._mm(first), self._mm(second), end), end)

    def qCurveTo(self, control: Point, p: Point) -> None:  # noqa: N802
        end = self._mm(p)
        self._add(raised(self._at, self._mm(control), end), end)

    def arcTo(  # noqa: N802
        self, rx: float, ry: float, rotation_deg: float, large: bool, sweep: bool, p: Point
    ) -> None:
        end = self._mm(p)
        radii = (rx * self._unit_mm, ry * self._unit_mm)
        if self._at != end:
            self._add(elliptical_arc(self._at, radii, rotation_deg, large, sweep, end), end)

    def closePath(self) -> None:  # noqa: N802
        """The library has drawn the closing line."""

    def endPath(self) -> None:  # noqa: N802
        start = self._start or self._at
        gap = math.dist(self._at, start)
        if gap > CLOSING_GAP_MM:
            given = f"an outline that ends {precise(gap, self._units)} from its start"
            raise OutlineError(_FIELD, given, "is not closed", "end it with Z, or where it starts")
        self.lineTo((start[0] / self._unit_mm, start[1] / self._unit_mm))


def elliptical_arc(start: Point, radii: Point, rotation_deg: float, large: bool, sweep: bool, end: Point) -> Arc | Line:
    """The arc of an ellipse through two different points: from the end points to the centre as in SVG 1.1, F.6.5.

    Radii too small to reach are enlarged evenly, a radius of 0 gives a line (F.6.2, F.6.6). `sweep` turns toward
    positive angles.
    """
    if 0.0 in radii:
        return Line(start, end)
    c, s = cos_sin(rotation_deg)
    dx, dy = (start[0] - end[0]) / 2, (start[1] - end[1]) / 2
    # The half chord in the ellipse's own axes, its radii 1.
    px, py = (c * dx + s * dy) / radii[0], (c * dy - s * dx) / radii[1]
    reach = math.hypot(px, py)
    grown = max(1.0, reach)
    rx, ry = radii[0] * grown, radii[1] * grown
    px, py, reach = px / grown, py / grown, reach / grown
    lift = math.sqrt(max(0.0, 1.0 - reach**2)) / reach * (-1.0 if large == sweep else 1.0)
    ox, oy = lift * py, -lift * px
    middle = ((start[0] + end[0]) / 2, (start[1] + end[1]) / 2)
    centre = (middle[0] + c * rx * ox - s * ry * oy, middle[1] + s * rx * ox + c * ry * oy)
    first = math.degrees(math.atan2(py - oy, px - ox))
    last = math.degrees(math.atan2(-py - oy, -px - ox))
    turn = (last - first) % 360.0
    return Arc(centre, (c * rx, s * rx), (-s * ry, c * ry), first, turn if sweep else turn - 360.0)
