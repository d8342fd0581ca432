"""Round bars as they are seen: the exact outline of a tapered bar with square ends, in a view square to a plane.

Imports `frames` and layout's ground; nothing of chairs. Points in space in the floor frame; everything in mm.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from typing import NamedTuple

from jigs.frames import Vector, further, minus, unit
from layout.curves import Arc, Curve, Line
from layout.geometry import Point

View = Callable[[Vector], Point]

# Ends that lie nearer to each other than this in a view are seen one behind the other.
END_ON_MM = 1e-6


class Bar(NamedTuple):
    """A round bar that tapers evenly from `start` to `end`, its ends square to its axis."""

    start: Vector
    end: Vector
    start_radius_mm: float
    end_radius_mm: float


class _Seen(NamedTuple):
    """Two discs in a view, `apart_mm` from each other in the unit direction `along`; each is an ellipse of half-axes
    r across that direction and r * `slant` along it.
    """

    a: Point
    b: Point
    along: Point
    apart_mm: float
    slant: float

    def arc(self, centre: Point, radius_mm: float, from_deg: float, sweep_deg: float) -> Arc:
        """Part of a disc's edge; 0 is straight on from a to b, positive to the left of that."""
        u = (self.along[0] * radius_mm * self.slant, self.along[1] * radius_mm * self.slant)
        return Arc(centre, u, (-self.along[1] * radius_mm, self.along[0] * radius_mm), from_deg, sweep_deg)


def silhouette(bar: Bar, view: View, open_at_start: bool = False) -> tuple[Curve, bool]:
    """The outline of a bar in a view, and whether it is closed.

    Along the axis both ends shrink alike; stretched back they are two circles, and lines that touch both touch them
    where the cosine of the turn from the axis is (r start - r end) / their distance. `open_at_start` leaves out the
    start's edge, for a bar that stands in something; a bar seen end on is closed all the same.
    """
    seen = _seen(bar, view)
    difference = (bar.start_radius_mm - bar.end_radius_mm) * seen.slant
    if seen.apart_mm <= max(abs(difference), END_ON_MM):
        radius, centre = max((bar.start_radius_mm, seen.a), (bar.end_radius_mm, seen.b))
        return (seen.arc(centre, radius, 0.0, 360.0),), True
    turn = math.degrees(math.acos(difference / seen.apart_mm))
    at_end = seen.arc(seen.b, bar.end_radius_mm, -turn, 2 * turn)
    at_start = seen.arc(seen.a, bar.start_radius_mm, turn, 360.0 - 2 * turn)
    right, left = Line(at_start.end, at_end.start), Line(at_end.end, at_start.start)
    return ((right, at_end, left), False) if open_at_start else ((right, at_end, left, at_start), True)


def _seen(bar: Bar, view: View) -> _Seen:
    a, b = view(bar.start), view(bar.end)
    apart = math.dist(a, b)
    if apart <= END_ON_MM:
        return _Seen(a, b, (1.0, 0.0), 0.0, 1.0)
    length = math.dist(bar.start, bar.end)
    # A view drops one coordinate, so what it leaves of the axis is the sine of the angle from the line of sight.
    slant = math.sqrt(max(0.0, 1.0 - (apart / length) ** 2))
    return _Seen(a, b, ((b[0] - a[0]) / apart, (b[1] - a[1]) / apart), apart, slant)


def between(start: Vector, end: Vector, from_start_mm: float, length_mm: float) -> tuple[Vector, Vector]:
    """A stretch of the line from start to end."""
    way = unit(minus(end, start))
    return further(start, way, from_start_mm), further(start, way, from_start_mm + length_mm)
