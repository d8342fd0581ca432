"""The foot of a leg and the seat's outline above it: how far inside the seat the foot stands.

Owns the foot's true shape on the floor, the outline as seen straight down, and the measure of `inside_side` and
`inside_end`. Imports `frames`, `roots` and layout's geometry and curves; no spec and no shapely.

All in plan in the floor frame, mm: x right from the centre line, y from plumb below the front edge to the back. The
outline is that of the top face, foreshortened fore and aft by the cosine of the pitch.

**The measure.** A leg of radius r cut by the floor leaves an ellipse about the foot's centre: r across the lean,
r / cos(resultant) along it. Its outermost point toward the leg's side is the one with the greatest x on that side;
`inside_side` is how much further out, straight across at that point's y, the outline lies (its outermost crossing on
that side, where it has several). `inside_end` is the same with x and y changed over: the outermost point toward the
leg's end, and fore and aft from there. Negative where the foot stands beyond the outline. Where the point stands past
the outline's end, a straight end counts as drawn on past its corner; past a pointed or round one there is nothing to
measure to. On an outline that curves, another point of the foot may come nearer to it than either of these two.
"""

from __future__ import annotations

import math
from bisect import bisect_right
from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property
from itertools import accumulate, pairwise
from typing import NamedTuple

from jigs.frames import Vector
from jigs.roots import bracketed, real_roots
from layout.curves import Arc, Cubic, Curve, Line, Segment, mapped
from layout.geometry import Affine, Point

Slopes = tuple[float, float]  # X and Y of a direction (X, Y, -1) in the floor frame

# An end of the outline narrower than this is a point.
POINTED_MM = 1e-3
# An outline of more parts takes longer to measure to than anyone waits.
MOST_PARTS = 300
# More parts of an outline than this are looked at less finely each.
MANY_PARTS = 64
# Stretches of outline shorter than this are left out; the nearest one stands for them.
SHORTEST_MM = 1e-9
_SAMPLES = {Line: 24, Arc: 48, Cubic: 24}


class Toward(NamedTuple):
    """A way to measure: along `axis` (0 across, 1 fore and aft), in the direction `sign`."""

    axis: int
    sign: int

    @property
    def other(self) -> int:
        """The axis along which the outline is followed."""
        return 1 - self.axis


@dataclass(frozen=True)
class Foot:
    """What fixes a foot apart from the lean: the mortise's centre in the floor frame, and the foot's radius."""

    mortise: Vector
    radius_mm: float

    def outermost(self, slopes: Slopes, toward: Toward) -> Point:
        """The point of the foot's edge that reaches furthest."""
        (a, sign), b = toward, toward.other
        height, radius = self.mortise[2], self.radius_mm
        stretch = math.sqrt(1.0 + slopes[a] ** 2)
        point = [self.mortise[0] + height * slopes[0], self.mortise[1] + height * slopes[1]]
        point[a] += sign * radius * stretch
        point[b] += sign * radius * slopes[a] * slopes[b] / stretch
        return (point[0], point[1])

    def leaning(self, point: Point, toward: Toward) -> Slopes:
        """The slopes that bring the outermost point there. The mortise is higher than the foot's radius."""
        (a, sign), b = toward, toward.other
        height, radius = self.mortise[2], self.radius_mm
        out = sign * (point[a] - self.mortise[a])
        # height * slope + radius * sqrt(1 + slope²) = out, which grows with the slope.
        root = math.sqrt(out * out + height * height - radius * radius)
        slope = (out * height - radius * root) / (height * height - radius * radius)
        aside = (point[b] - self.mortise[b]) / (height + radius * slope / math.sqrt(1.0 + slope * slope))
        return (sign * slope, aside) if a == 0 else (aside, sign * slope)


class Stretch(NamedTuple):
    """A part of one segment along which coordinate `other` only grows or only falls."""

    point: Callable[[float], Point]
    t0: float
    t1: float
    low: float
    high: float
    rising: bool
    samples: int

    def parameter(self, station: float, other: int) -> float:
        """Where coordinate `other` has this value, the nearer end where it has not."""
        low, high = (self.t0, self.t1) if self.rising else (self.t1, self.t0)
        if station <= self.low or station >= self.high:
            return low if station <= self.low else high
        return bracketed(lambda t: self.point(t)[other] - station, low, high, self.low - station, self.high - station)


@dataclass(frozen=True)
class Edge:
    """The outline as met when going straight out in one direction; `curve` runs counter-clockwise."""

    curve: Curve
    toward: Toward

    @cached_property
    def stretches(self) -> tuple[Stretch, ...]:
        """Those parts of the outline that face the direction."""
        facing = self.toward.sign if self.toward.axis == 0 else -self.toward.sign
        found = [s for segment in self.curve for s in _stretches(segment, self.toward.other, facing)]
        return tuple(sorted(found, key=lambda s: s.low))

    def reach_mm(self, station: float) -> float:
        """The outermost coordinate of the outline at this place of the other axis; past its end, that of its end."""
        a, b = self.toward.axis, self.toward.other
        holding = self._holding(station)
        if not holding:
            holding = [min(self.stretches, key=lambda s: max(s.low - station, station - s.high))]
        return self.toward.sign * max(self.toward.sign * s.point(s.parameter(station, b))[a] for s in holding)

    def _holding(self, station: float) -> list[Stretch]:
        """The stretches that reach over this place: among those that begin before it, back to where none does."""
        found = []
        for k in range(bisect_right(self._lows, station) - 1, -1, -1):
            if self._highest_so_far[k] < station:
                break
            if self.stretches[k].high >= station:
                found.append(self.stretches[k])
        return found

    @cached_property
    def _lows(self) -> list[float]:
        return [s.low for s in self.stretches]

    @cached_property
    def _highest_so_far(self) -> list[float]:
        return list(accumulate((s.high for s in self.stretches), max))

    def measures(self, station: float) -> bool:
        """Whether there is outline to measure to: the place is not past a pointed or round end."""
        if self.stretches[0].low <= station <= self._high:
            return True
        return not self.pointed[0 if station < self.stretches[0].low else 1]

    @cached_property
    def _high(self) -> float:
        return max(s.high for s in self.stretches)

    @cached_property
    def pointed(self) -> tuple[bool, bool]:
        """Whether the outline ends in a point at the low and at the high end of the other axis."""
        opposite = Edge(self.curve, Toward(self.toward.axis, -self.toward.sign))
        ends = (self.stretches[0].low, self._high)
        low, high = (abs(self.reach_mm(end) - opposite.reach_mm(end)) <= POINTED_MM for end in ends)
        return (low, high)

    def inside_mm(self, foot: Foot, slopes: Slopes) -> float:
        """How far inside the outline the foot's outermost point stands in this direction."""
        point = foot.outermost(slopes, self.toward)
        return self.toward.sign * (self.reach_mm(point[self.toward.other]) - point[self.toward.axis])

    def counts(self, foot: Foot, slopes: Slopes) -> bool:
        """Whether the foot's outermost point has outline beside it."""
        return self.measures(foot.outermost(slopes, self.toward)[self.toward.other])

    def within(self, low: float, high: float) -> list[Stretch]:
        """The stretches between two places of the other axis, straight ends drawn on as far."""
        b = self.toward.other
        parts = _thinned([part for s in self.stretches if (part := _clipped(s, low, high, b))])
        ends = ((self.stretches[0].low, low), (self._high, high))
        for pointed, (end, far) in zip(self.pointed, ends, strict=True):
            if not pointed and (far - end) * (1 if far == high else -1) > 0.0:
                parts += [self._drawn_on(end, far)]
        return parts

    def _drawn_on(self, end: float, far: float) -> Stretch:
        reach = self.reach_mm(end)
        points = [(reach, end), (reach, far)] if self.toward.axis == 0 else [(end, reach), (far, reach)]
        return Stretch(Line(*points).at, 0.0, 1.0, min(end, far), max(end, far), far > end, _SAMPLES[Line])


def edge(curve: Curve, pitch_deg: float, toward: Toward) -> Edge:
    """The edge of a seat's outline, given in the seat's own plan."""
    return Edge(mapped(curve, Affine(1.0, 0.0, 0.0, math.cos(math.radians(pitch_deg)), 0.0, 0.0)), toward)


def _thinned(parts: list[Stretch]) -> list[Stretch]:
    """Fewer samples of each of very many stretches, so that an outline of a thousand parts takes no longer."""
    if len(parts) <= MANY_PARTS:
        return parts
    return [s._replace(samples=max(3, s.samples * MANY_PARTS // len(parts))) for s in parts]


def _clipped(s: Stretch, low: float, high: float, other: int) -> Stretch | None:
    if s.high <= low or s.low >= high:
        return None
    if low <= s.low and s.high <= high:
        return s
    ends = sorted(s.parameter(min(s.high, max(s.low, station)), other) for station in (low, high))
    return Stretch(s.point, ends[0], ends[1], max(s.low, low), min(s.high, high), s.rising, s.samples)


def _stretches(segment: Segment, other: int, facing: int) -> list[Stretch]:
    point = _point(segment)
    found = []
    for t0, t1 in pairwise([0.0, *_turns(segment, other), 1.0]):
        start, end = point(t0)[other], point(t1)[other]
        if facing * (end - start) > SHORTEST_MM:
            samples = max(8, round(_SAMPLES[type(segment)] * (t1 - t0)))
            found.append(Stretch(point, t0, t1, min(start, end), max(start, end), end > start, samples))
    return found


def _turns(segment: Segment, other: int) -> list[float]:
    """Where the segment turns back in the coordinate."""
    match segment:
        case Line():
            return []
        case Arc():
            return list(segment.extremes())
        case Cubic():
            _, c1, c2, c3 = _powers(segment, other)
            return [t for t in real_roots((c1, 2 * c2, 3 * c3), 0.0, 1.0) if 0.0 < t < 1.0]


def _point(segment: Segment) -> Callable[[float], Point]:
    """The segment's points, worked out fast."""
    match segment:
        case Line():
            return segment.at
        case Arc(centre, u, v, start_deg, sweep_deg):
            start, sweep = math.radians(start_deg), math.radians(sweep_deg)

            def on_arc(t: float) -> Point:
                c, s = math.cos(start + t * sweep), math.sin(start + t * sweep)
                return (centre[0] + u[0] * c + v[0] * s, centre[1] + u[1] * c + v[1] * s)

            return on_arc
        case Cubic():
            (x0, x1, x2, x3), (y0, y1, y2, y3) = _powers(segment, 0), _powers(segment, 1)
            return lambda t: (((x3 * t + x2) * t + x1) * t + x0, ((y3 * t + y2) * t + y1) * t + y0)


def _powers(cubic: Cubic, axis: int) -> tuple[float, float, float, float]:
    p0, p1, p2, p3 = cubic.start[axis], cubic.first[axis], cubic.second[axis], cubic.end[axis]
    return (p0, 3 * (p1 - p0), 3 * (p0 - 2 * p1 + p2), p3 - p0 + 3 * (p1 - p2))
