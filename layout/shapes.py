"""Composite shapes over the few primitives: circles, crosses, arrows, dimension lines, blocks of text.

Imports `geometry`, `curves`, `drawing` and `lettering` only.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Sequence

from layout.curves import Curve, Line, circle_curve
from layout.drawing import Drawing, Fill, Role, Stroke, Text
from layout.geometry import Box, Point, along, bearing_deg
from layout.lettering import wrap

# Line pitch over capital height: ISO 3098-1 asks for at least 1.4 without accents, 1.9 with; ours carries accents.
LINE_PITCH = 1.9


def line(start: Point, end: Point, role: Role) -> Stroke:
    """A straight line."""
    return Stroke((Line(start, end),), role)


def polyline(points: Sequence[Point], role: Role, closed: bool = False) -> Stroke:
    """Straight lines from point to point."""
    return Stroke(polygon_curve(points) if closed else chain(points), role, closed)


def chain(points: Sequence[Point]) -> Curve:
    """The open curve through the points."""
    return tuple(Line(p, q) for p, q in itertools.pairwise(points))


def polygon_curve(points: Sequence[Point]) -> Curve:
    """The closed curve through the points."""
    return chain([*points, points[0]])


def box_outline(box: Box, role: Role) -> Stroke:
    """A rectangle."""
    return polyline(box.corners(), role, closed=True)


def circle(centre: Point, radius_mm: float, role: Role) -> Stroke:
    """A circle."""
    return Stroke(circle_curve(centre, radius_mm), role, closed=True)


def cross(centre: Point, reach_mm: float, role: Role, angle_deg: float = 0.0) -> Drawing:
    """Two lines that cross square at the centre; the first lies in the direction `angle_deg`."""
    ends = [along(centre, angle_deg + quarter * 90.0, reach_mm) for quarter in range(4)]
    return Drawing((line(ends[2], ends[0], role), line(ends[3], ends[1], role)))


def arrow_head(tip: Point, angle_deg: float, length_mm: float, role: Role) -> Fill:
    """A solid head that points in the direction `angle_deg`, its tip on the point (15° each side)."""
    back = length_mm / math.cos(math.radians(15))
    corners = (tip, along(tip, angle_deg + 165.0, back), along(tip, angle_deg + 195.0, back))
    return Fill(polygon_curve(corners), role)


def arrow(start: Point, end: Point, head_mm: float, role: Role) -> Drawing:
    """A line that ends in a head at `end`."""
    angle = bearing_deg((end[0] - start[0], end[1] - start[1]))
    neck = along(end, angle, -head_mm / 2)
    return Drawing((line(start, neck, role), arrow_head(end, angle, head_mm, role)))


def measure(start: Point, end: Point, label: str, height_mm: float, role: Role, offset_mm: float = 0.0) -> Drawing:
    """A dimension line from `start` to `end`, heads at both ends, its label over the middle and never upside down.

    `offset_mm` moves the line to the left of the direction start -> end.
    """
    angle = bearing_deg((end[0] - start[0], end[1] - start[1]))
    a, b = (along(p, angle + 90.0, offset_mm) for p in (start, end))
    reading = upright(angle)
    middle = ((a[0] + b[0]) / 2, (a[1] + b[1]) / 2)
    foot = along(middle, reading - 90.0, height_mm / 2)
    return Drawing(
        (
            line(a, b, role),
            arrow_head(a, angle + 180.0, 2.5, role),
            arrow_head(b, angle, 2.5, role),
            Text(foot, label, height_mm, Role.NOTE, "centre", reading, over=True),
        )
    )


def upright(angle_deg: float) -> float:
    """The reading direction along a line of that angle that is not upside down: above -90 up to 90."""
    turned = (angle_deg + 90.0) % 180.0 - 90.0
    return 90.0 if math.isclose(turned, -90.0, abs_tol=1e-9) else turned


def paragraph(
    top_left: Point, text: str, height_mm: float, width_mm: float, bold: bool = False, role: Role = Role.NOTE
) -> tuple[Drawing, float]:
    """Lettering broken into lines no wider than `width_mm`, hung from `top_left`; and the y of its lower edge."""
    x, y = top_left
    pitch = LINE_PITCH * height_mm
    lines = wrap(text, width_mm, height_mm, bold)
    drawn = (Text((x, y - height_mm - k * pitch), words, height_mm, role, bold=bold) for k, words in enumerate(lines))
    return Drawing(tuple(drawn)), y - len(lines) * pitch
