"""Curves in the plane, in millimetres: lines, Béziers and arcs of ellipses, and what is asked of them.

Owns the three kinds of segment and chains of them; they stay true curves until a named tolerance flattens them. Imports
`geometry` only. Parameters run from 0 to 1 along a segment.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from layout.geometry import Affine, Box, Point, box_of, cos_sin

# Parameters closer together than this are one crossing.
_SAME_PARAMETER = 1e-12


@dataclass(frozen=True, slots=True)
class Line:
    """A straight segment."""

    start: Point
    end: Point

    def at(self, t: float) -> Point:
        """The point at parameter t."""
        return _between(self.start, self.end, t)

    def mapped(self, m: Affine) -> Line:
        """The segment under an affine map."""
        return Line(m.point(self.start), m.point(self.end))

    def part(self, t0: float, t1: float) -> Line:
        """The stretch from t0 to t1."""
        return Line(self.at(t0), self.at(t1))

    def reverse(self) -> Line:
        """The same stroke, drawn backwards."""
        return Line(self.end, self.start)

    def extremes(self) -> tuple[float, ...]:
        """Parameters inside 0..1 where the segment turns back in x or in y."""
        return ()

    def crossings(self, axis: int, value: float) -> tuple[float, ...]:
        """Parameters inside 0..1 where coordinate `axis` (0 x, 1 y) equals `value`."""
        run = self.end[axis] - self.start[axis]
        return _inside([(value - self.start[axis]) / run]) if run else ()

    def pieces(self, tolerance_mm: float) -> int:
        """How many chords keep within the tolerance."""
        return 1


@dataclass(frozen=True, slots=True)
class Cubic:
    """A cubic Bézier segment."""

    start: Point
    first: Point
    second: Point
    end: Point

    def at(self, t: float) -> Point:
        """The point at parameter t."""
        if not 0.0 < t < 1.0:
            return self.start if t <= 0.0 else self.end
        # Bernstein's form about the start, so that a segment of one point is that point to the last bit.
        s = 1.0 - t
        b, c, d = 3 * s * s * t, 3 * s * t * t, t * t * t
        (x0, y0), (x1, y1), (x2, y2), (x3, y3) = self.start, self.first, self.second, self.end
        return (
            x0 + b * (x1 - x0) + c * (x2 - x0) + d * (x3 - x0),
            y0 + b * (y1 - y0) + c * (y2 - y0) + d * (y3 - y0),
        )

    def mapped(self, m: Affine) -> Cubic:
        """The segment under an affine map."""
        return Cubic(m.point(self.start), m.point(self.first), m.point(self.second), m.point(self.end))

    def part(self, t0: float, t1: float) -> Cubic:
        """The stretch from t0 to t1 (de Casteljau's blossom)."""
        return Cubic(*(self._blossom(a, b, c) for a, b, c in _arguments(t0, t1)))

    def _blossom(self, a: float, b: float, c: float) -> Point:
        p, q, r = (
            _between(u, v, a) for u, v in ((self.start, self.first), (self.first, self.second), (self.second, self.end))
        )
        return _between(_between(p, q, b), _between(q, r, b), c)

    def reverse(self) -> Cubic:
        """The same stroke, drawn backwards."""
        return Cubic(self.end, self.second, self.first, self.start)

    def extremes(self) -> tuple[float, ...]:
        """Parameters inside 0..1 where the segment turns back in x or in y."""
        found: list[float] = []
        for axis in (0, 1):
            _c0, c1, c2, c3 = self._powers(axis)
            found += _real_roots([3 * c3, 2 * c2, c1])
        return _inside(found)

    def crossings(self, axis: int, value: float) -> tuple[float, ...]:
        """Parameters inside 0..1 where coordinate `axis` (0 x, 1 y) equals `value`."""
        c0, c1, c2, c3 = self._powers(axis)
        return _inside(_real_roots([c3, c2, c1, c0 - value]))

    def _powers(self, axis: int) -> tuple[float, float, float, float]:
        p0, p1, p2, p3 = self.start[axis], self.first[axis], self.second[axis], self.end[axis]
        return (p0, 3 * (p1 - p0), 3 * (p0 - 2 * p1 + p2), p3 - p0 + 3 * (p1 - p2))

    def pieces(self, tolerance_mm: float) -> int:
        """How many chords keep within the tolerance (bound on the second derivative)."""
        bend = max(
            math.hypot(a[0] - 2 * b[0] + c[0], a[1] - 2 * b[1] + c[1])
            for a, b, c in ((self.start, self.first, self.second), (self.first, self.second, self.end))
        )
        return max(1, math.ceil(math.sqrt(0.75 * bend / tolerance_mm)))


@dataclass(frozen=True, slots=True)
class Arc:
    """An arc of an ellipse: centre + u cos(angle) + v sin(angle), from `start_deg` through `sweep_deg`.

    u and v are conjugate half-diameters (for a circle, two radii at right angles), so that any affine map of an arc is
    an arc again, exactly.
    """

    centre: Point
    u: Point
    v: Point
    start_deg: float
    sweep_deg: float

    @property
    def start(self) -> Point:
        """The first point."""
        return self._point(self.start_deg)

    @property
    def end(self) -> Point:
        """The last point."""
        return self._point(self.start_deg + self.sweep_deg)

    @property
    def reach_mm(self) -> float:
        """The longer half-axis of the ellipse, which after an uneven map is longer than both u and v."""
        (a, b), (c, d) = self.u, self.v
        return (math.hypot(a + d, b - c) + math.hypot(a - d, b + c)) / 2

    def _point(self, angle_deg: float) -> Point:
        c, s = cos_sin(angle_deg)
        return (self.centre[0] + self.u[0] * c + self.v[0] * s, self.centre[1] + self.u[1] * c + self.v[1] * s)

    def at(self, t: float) -> Point:
        """The point at parameter t."""
        return self._point(self.start_deg + t * self.sweep_deg)

    def mapped(self, m: Affine) -> Arc:
        """The arc under an affine map."""
        return Arc(m.point(self.centre), m.vector(self.u), m.vector(self.v), self.start_deg, self.sweep_deg)

    def part(self, t0: float, t1: float) -> Arc:
        """The stretch from t0 to t1."""
        start = self.start_deg + t0 * self.sweep_deg
        return Arc(self.centre, self.u, self.v, start, (t1 - t0) * self.sweep_deg)

    def reverse(self) -> Arc:
        """The same stroke, drawn backwards."""
        return Arc(self.centre, self.u, self.v, self.start_deg + self.sweep_deg, -self.sweep_deg)

    def extremes(self) -> tuple[float, ...]:
        """Parameters inside 0..1 where the segment turns back in x or in y."""
        found: list[float] = []
        for axis in (0, 1):
            if self.u[axis] or self.v[axis]:
                top = math.degrees(math.atan2(self.v[axis], self.u[axis]))
                found += self._parameters(top) + self._parameters(top + 180.0)
        return _inside(found)

    def crossings(self, axis: int, value: float) -> tuple[float, ...]:
        """Parameters inside 0..1 where coordinate `axis` (0 x, 1 y) equals `value`."""
        reach = math.hypot(self.u[axis], self.v[axis])
        height = value - self.centre[axis]
        if reach == 0.0 or abs(height) > reach:
            return ()
        top = math.degrees(math.atan2(self.v[axis], self.u[axis]))
        half = math.degrees(math.acos(height / reach))
        return _inside(self._parameters(top + half) + self._parameters(top - half))

    def _parameters(self, angle_deg: float) -> list[float]:
        low = min(self.start_deg, self.start_deg + self.sweep_deg)
        first = angle_deg + 360.0 * math.ceil((low - angle_deg) / 360.0)
        turns = range(int(abs(self.sweep_deg) // 360.0) + 2)
        return [(first + 360.0 * k - self.start_deg) / self.sweep_deg for k in turns] if self.sweep_deg else []

    def pieces(self, tolerance_mm: float) -> int:
        """How many chords keep within the tolerance."""
        reach = self.reach_mm
        if tolerance_mm >= reach:
            return max(1, math.ceil(abs(self.sweep_deg) / 90.0))
        step = 2 * math.degrees(math.acos(1 - tolerance_mm / reach))
        return max(1, math.ceil(abs(self.sweep_deg) / step))


Segment = Line | Cubic | Arc
Curve = tuple[Segment, ...]


def _arguments(t0: float, t1: float) -> tuple[tuple[float, float, float], ...]:
    return ((t0, t0, t0), (t0, t0, t1), (t0, t1, t1), (t1, t1, t1))


def _between(p: Point, q: Point, t: float) -> Point:
    return (p[0] + (q[0] - p[0]) * t, p[1] + (q[1] - p[1]) * t)


def _inside(parameters: Iterable[float]) -> tuple[float, ...]:
    found: list[float] = []
    for t in sorted(parameters):
        if 0.0 < t < 1.0 and not (found and t - found[-1] < _SAME_PARAMETER):
            found.append(t)
    return tuple(found)


def _real_roots(coefficients: Sequence[float]) -> list[float]:
    """Real roots of a polynomial up to the third degree, highest power first."""
    import numpy as np  # noqa: PLC0415  (only Bézier outlines pay for it)

    scale = max(abs(c) for c in coefficients)
    if scale == 0.0:
        return []
    roots = np.roots([0.0 if abs(c) < 1e-14 * scale else c for c in coefficients])
    return [float(r.real) for r in roots if abs(r.imag) < 1e-9]


def segment_box(segment: Segment) -> Box:
    """The true bounds of a segment, not those of its control points."""
    return box_of([segment.start, segment.end, *(segment.at(t) for t in segment.extremes())])


def flatten(curve: Curve, tolerance_mm: float) -> list[Point]:
    """Points whose chords stay within `tolerance_mm` of the curve; a closed curve repeats its first point."""
    points: list[Point] = [curve[0].start] if curve else []
    for segment in curve:
        count = segment.pieces(tolerance_mm)
        points += [segment.at(k / count) for k in range(1, count)]
        points.append(segment.end)
    return points


def mapped(curve: Curve, m: Affine) -> Curve:
    """The curve under an affine map."""
    return tuple(segment.mapped(m) for segment in curve)


def circle_curve(centre: Point, radius_mm: float) -> tuple[Arc]:
    """A full circle, counter-clockwise from the right."""
    return (Arc(centre, (radius_mm, 0.0), (0.0, radius_mm), 0.0, 360.0),)


def ellipse_curve(centre: Point, along_mm: float, across_mm: float, angle_deg: float) -> tuple[Arc]:
    """A full ellipse: half-axis `along_mm` in the direction `angle_deg`, `across_mm` square to it."""
    turn = Affine.turn(angle_deg)
    return (Arc(centre, turn.vector((along_mm, 0.0)), turn.vector((0.0, across_mm)), 0.0, 360.0),)


def arc_as_cubics(arc: Arc, tolerance_mm: float) -> tuple[Cubic, ...]:
    """Bézier segments that stay within `tolerance_mm` of the arc.

    One cubic over an angle θ departs from a circle of radius r by at most about 4/27 · sin⁶(θ/4) / cos²(θ/4) · r
    (the usual midpoint-fitting cubic, control length 4/3 · tan(θ/4)).
    """
    count = max(1, math.ceil(abs(arc.sweep_deg) / 90.0))
    while _cubic_error(abs(arc.sweep_deg) / count) * arc.reach_mm > tolerance_mm:
        count += 1
    return tuple(_arc_cubic(arc.part(k / count, (k + 1) / count)) for k in range(count))


def _cubic_error(sweep_deg: float) -> float:
    quarter = math.radians(sweep_deg) / 4
    return 4 / 27 * math.sin(quarter) ** 6 / math.cos(quarter) ** 2


def _arc_cubic(arc: Arc) -> Cubic:
    k = 4 / 3 * math.tan(math.radians(arc.sweep_deg) / 4)
    start, end = arc.start, arc.end

    def tangent(angle_deg: float) -> Point:
        c, s = cos_sin(angle_deg)
        return (arc.v[0] * c - arc.u[0] * s, arc.v[1] * c - arc.u[1] * s)

    t0, t1 = tangent(arc.start_deg), tangent(arc.start_deg + arc.sweep_deg)
    return Cubic(start, (start[0] + k * t0[0], start[1] + k * t0[1]), (end[0] - k * t1[0], end[1] - k * t1[1]), end)
