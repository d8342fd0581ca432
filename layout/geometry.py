"""Plane geometry in millimetres: points, affine maps, boxes and directions.

Owns the numbers only; lines that bend are `curves`', what is drawn `drawing`'s. Imports nothing of ours.
Axes: x to the right, y up. Angles are degrees, counter-clockwise from +x.
"""

from __future__ import annotations

import math
from collections.abc import Iterable
from typing import NamedTuple

Point = tuple[float, float]


class Affine(NamedTuple):
    """The map (x, y) -> (a x + c y + e, b x + d y + f), its numbers in PDF's matrix order."""

    a: float
    b: float
    c: float
    d: float
    e: float
    f: float

    @staticmethod
    def identity() -> Affine:
        """The map that moves nothing."""
        return Affine(1.0, 0.0, 0.0, 1.0, 0.0, 0.0)

    @staticmethod
    def move(dx_mm: float, dy_mm: float) -> Affine:
        """The shift by (dx, dy)."""
        return Affine(1.0, 0.0, 0.0, 1.0, dx_mm, dy_mm)

    @staticmethod
    def turn(angle_deg: float) -> Affine:
        """The turn about the origin, counter-clockwise; quarter turns are exact."""
        c, s = cos_sin(angle_deg)
        return Affine(c, s, -s, c, 0.0, 0.0)

    @staticmethod
    def scale(factor: float) -> Affine:
        """The even enlargement about the origin, for views drawn at a stated scale."""
        return Affine(factor, 0.0, 0.0, factor, 0.0, 0.0)

    @staticmethod
    def mirror_x() -> Affine:
        """The reflection X = -x: a face seen from its other side."""
        return Affine(-1.0, 0.0, 0.0, 1.0, 0.0, 0.0)

    def then(self, after: Affine) -> Affine:
        """This map first, `after` second."""
        e, f = after.point((self.e, self.f))
        a, b = after.vector((self.a, self.b))
        c, d = after.vector((self.c, self.d))
        return Affine(a, b, c, d, e, f)

    def point(self, p: Point) -> Point:
        """Where the map takes a point."""
        return (self.a * p[0] + self.c * p[1] + self.e, self.b * p[0] + self.d * p[1] + self.f)

    def vector(self, v: Point) -> Point:
        """Where the map takes a direction."""
        return (self.a * v[0] + self.c * v[1], self.b * v[0] + self.d * v[1])

    def inverse(self) -> Affine:
        """The map back. Raises ZeroDivisionError for a map that flattens the plane."""
        k = self.a * self.d - self.b * self.c
        a, b, c, d = self.d / k, -self.b / k, -self.c / k, self.a / k
        return Affine(a, b, c, d, -(a * self.e + c * self.f), -(b * self.e + d * self.f))

    @property
    def determinant(self) -> float:
        """Negative where the map mirrors."""
        return self.a * self.d - self.b * self.c


class Box(NamedTuple):
    """An upright rectangle, mm."""

    x0: float
    y0: float
    x1: float
    y1: float

    @property
    def width(self) -> float:
        """Across, mm."""
        return self.x1 - self.x0

    @property
    def height(self) -> float:
        """Up, mm."""
        return self.y1 - self.y0

    @property
    def centre(self) -> Point:
        """The middle."""
        return ((self.x0 + self.x1) / 2, (self.y0 + self.y1) / 2)

    def grown(self, by_mm: float) -> Box:
        """The box with `by_mm` more on every side."""
        return Box(self.x0 - by_mm, self.y0 - by_mm, self.x1 + by_mm, self.y1 + by_mm)

    def holds(self, p: Point, slack_mm: float = 0.0) -> bool:
        """Whether the point lies in the box or within `slack_mm` of it."""
        return self.x0 - slack_mm <= p[0] <= self.x1 + slack_mm and self.y0 - slack_mm <= p[1] <= self.y1 + slack_mm

    def meets(self, other: Box) -> bool:
        """Whether the two share a point."""
        return self.x0 <= other.x1 and other.x0 <= self.x1 and self.y0 <= other.y1 and other.y0 <= self.y1

    def corners(self) -> tuple[Point, Point, Point, Point]:
        """Counter-clockwise from the lower left."""
        return ((self.x0, self.y0), (self.x1, self.y0), (self.x1, self.y1), (self.x0, self.y1))

    def mapped(self, m: Affine) -> Box:
        """The upright box round the mapped corners (exact for quarter turns)."""
        return box_of(m.point(p) for p in self.corners())


def box_of(points: Iterable[Point]) -> Box:
    """The smallest box that holds the points. Raises ValueError where there are none."""
    xs, ys = zip(*points, strict=True)
    return Box(min(xs), min(ys), max(xs), max(ys))


def union(boxes: Iterable[Box]) -> Box:
    """The smallest box that holds the boxes. Raises ValueError where there are none."""
    return box_of(p for box in boxes for p in ((box.x0, box.y0), (box.x1, box.y1)))


def cos_sin(angle_deg: float) -> tuple[float, float]:
    """Cosine and sine of an angle in degrees, exact at the quarter turns."""
    quarter, rest = divmod(angle_deg, 90.0)
    if rest == 0.0:
        return ((1.0, 0.0), (0.0, 1.0), (-1.0, 0.0), (0.0, -1.0))[int(quarter) % 4]
    angle = math.radians(angle_deg)
    return (math.cos(angle), math.sin(angle))


def bearing_deg(v: Point) -> float:
    """Direction of a vector, from 0 up to but not 360, counter-clockwise from +x; 0 for the null vector."""
    # The second remainder is for directions so little below 0 that the first comes out as 360 itself.
    return math.degrees(math.atan2(v[1], v[0])) % 360.0 % 360.0 if v != (0.0, 0.0) else 0.0


def along(start: Point, angle_deg: float, distance_mm: float) -> Point:
    """The point `distance_mm` from `start` in the direction `angle_deg`."""
    c, s = cos_sin(angle_deg)
    return (start[0] + c * distance_mm, start[1] + s * distance_mm)
