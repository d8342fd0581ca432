"""Outlines of seats made of lines and true arcs: round, oval, rectangle, D and polygon; and how one is refused.

Owns these shapes and `OutlineError`. The shield is `shield`'s, path data `path_data`'s, the choice `seats`'.
Imports layout's geometry and curves, `quantities`; no spec and no shapely.

Plan coordinates in mm: x to the right from the centre line, y from the front edge to the back. Every outline is closed
and runs counter-clockwise.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from itertools import pairwise

from jigs.quantities import MM_PER_INCH, Units, format_length
from layout.curves import Arc, Cubic, Curve, Line, Segment, mapped
from layout.geometry import Affine, Point, bearing_deg

# Points nearer than this are one point; what is shorter is not drawn.
SAME_POINT_MM = 1e-6
# A corner that turns by less is no corner, one that turns back on itself by as little is a spike.
STRAIGHT_DEG = 1e-4


class OutlineError(ValueError):
    """An outline that cannot be drawn: `field` of the spec, what was `given`, the `rule` that reads on, a `cure`."""

    def __init__(self, field: str, given: str, rule: str, cure: str = "") -> None:
        super().__init__(f"{field}: {given} {rule}" + (f"; {cure}" if cure else ""))
        self.field = field
        self.given = given
        self.rule = rule
        self.cure = cure


def at_most(size_mm: float, units: Units) -> str:
    """A length as the maker writes it, rounded down so that it can be taken at its word."""
    step = 0.1 if units == "mm" else float(MM_PER_INCH) / 32
    return format_length(max(0.0, math.floor(size_mm / step + 1e-9) * step), units)


def precise(size_mm: float, units: Units) -> str:
    """A length to a few hundredths of a millimetre, in decimals, where the nearest fraction of an inch would not do."""
    value = size_mm / (1.0 if units == "mm" else float(MM_PER_INCH))
    return f"{value:.4g} {units}"


def refuse_radius(radius_mm: float, most_mm: float, rule: str, units: Units) -> OutlineError:
    """The refusal of a corner radius that does not fit, with the largest that does."""
    cure = f"give at most {at_most(most_mm, units)}" if most_mm > 0.0 else "leave corner_radius out"
    return OutlineError("seat.corner_radius", format_length(radius_mm, units), rule, cure)


def reversed_curve(curve: Curve) -> Curve:
    """The same outline, run the other way."""
    return tuple(segment.reverse() for segment in reversed(curve))


def ellipse_outline(width_mm: float, depth_mm: float) -> Curve:
    """A true ellipse (or circle) that starts and ends at its front-most point, the origin."""
    across, back = width_mm / 2, depth_mm / 2
    return (Arc((0.0, back), (across, 0.0), (0.0, back), -90.0, 360.0),)


def rectangle_outline(width_mm: float, depth_mm: float, radius_mm: float, units: Units) -> Curve:
    """A rectangle with its corners rounded. Raises OutlineError for a radius over half of the shorter side."""
    half, most = width_mm / 2, min(width_mm, depth_mm) / 2
    if radius_mm > most:
        raise refuse_radius(radius_mm, most, "is more than half of the seat's shorter side", units)
    return rounded_polygon([(-half, 0.0), (half, 0.0), (half, depth_mm), (-half, depth_mm)], radius_mm)


def d_outline(
    width_mm: float, depth_mm: float, straight_mm: float | None, flat_back: bool, radius_mm: float, units: Units
) -> Curve:
    """A straight edge at the front (or back), straight sides, and half an ellipse over them.

    Sides are `straight_mm` long; left out, the curve is a half circle where the depth allows. The corners at the
    straight edge are rounded. Raises OutlineError where the sides leave no curve or the radius does not fit.
    """
    half = width_mm / 2
    straight = max(0.0, depth_mm - half) if straight_mm is None else straight_mm
    if straight >= depth_mm:
        rule = f"leaves nothing of the seat's depth, {format_length(depth_mm, units)}, for the curve"
        raise OutlineError("seat.straight", format_length(straight, units), rule)
    if radius_mm > min(half, straight):
        rule = f"is more than the straight sides, {format_length(straight, units)}, or half of the width can take"
        raise refuse_radius(radius_mm, min(half, straight), rule, units)
    front = _flat_front(half, depth_mm, straight, radius_mm)
    return reversed_curve(mapped(front, Affine(1.0, 0.0, 0.0, -1.0, 0.0, depth_mm))) if flat_back else front


def _flat_front(half: float, depth: float, straight: float, radius: float) -> Curve:
    inner = half - radius
    curve: tuple[Segment, ...] = (
        Line((-inner, 0.0), (inner, 0.0)),
        Arc((inner, radius), (radius, 0.0), (0.0, radius), -90.0, 90.0),
        Line((half, radius), (half, straight)),
        Arc((0.0, straight), (half, 0.0), (0.0, depth - straight), 0.0, 180.0),
        Line((-half, straight), (-half, radius)),
        Arc((-inner, radius), (radius, 0.0), (0.0, radius), 180.0, 90.0),
    )
    return drawn(curve)


def drawn(curve: Iterable[Segment]) -> Curve:
    """The segments without those that have no length."""
    return tuple(segment for segment in curve if not _pointlike(segment))


def _pointlike(segment: Segment) -> bool:
    start = segment.start
    points = [segment.at(t) for t in (0.25, 0.5, 0.75)] + [segment.end]
    return all(math.dist(start, p) <= SAME_POINT_MM for p in points)


def polygon_outline(points: Sequence[Point], radius_mm: float, units: Units) -> Curve:
    """The polygon through the points, given in either direction, its corners rounded where the radius fits.

    A last point that repeats the first is left out. Raises OutlineError for points that coincide, for spikes, and for a
    radius that does not fit; whether sides cross is for the caller to look at.
    """
    corners = list(points)
    if len(corners) > 1 and math.dist(corners[0], corners[-1]) <= SAME_POINT_MM:
        corners.pop()
    if len(corners) < 3:
        raise OutlineError("seat.points", f"{len(corners)} different points", "make no outline", "give 3 or more")
    for index, (p, q) in enumerate(pairwise(corners)):
        if math.dist(p, q) <= SAME_POINT_MM:
            place = f"seat.points[{index + 1}]"
            raise OutlineError(place, point_text(q, units), "is the same as the point before it", "leave one out")
    _refuse_spikes(corners, units)
    _refuse_wide_radius(corners, radius_mm, units)
    if signed_area_mm2(rounded_polygon(corners, 0.0)) < 0.0:
        corners.reverse()
    return rounded_polygon(corners, radius_mm)


def point_text(point: Point, units: Units) -> str:
    """A point as the maker writes it."""
    return f"[{', '.join(format_length(value, units) for value in point)}]"


def _refuse_spikes(corners: Sequence[Point], units: Units) -> None:
    for index, turn in enumerate(_turns(corners)):
        if abs(turn) > 180.0 - STRAIGHT_DEG:
            rule = "is the tip of a spike with no width: the next side runs back over the last"
            raise OutlineError(f"seat.points[{index}]", point_text(corners[index], units), rule, "leave the point out")


def rounded_polygon(corners: Sequence[Point], radius_mm: float) -> Curve:
    """Lines from corner to corner with tangent arcs of the radius between, which must fit; it starts at the first.

    A radius that is no more than a point leaves the corners sharp.
    """
    radius_mm = radius_mm if radius_mm > SAME_POINT_MM else 0.0
    around = zip([corners[-1], *corners[:-1]], corners, _turns(corners), strict=True)
    arcs = [_corner_arc(before, corner, turn, radius_mm) for before, corner, turn in around]
    leave = [arc.end if arc else corner for arc, corner in zip(arcs, corners, strict=True)]
    arrive = [arc.start if arc else corner for arc, corner in zip(arcs, corners, strict=True)]
    sides = [Line(p, q) for p, q in zip(leave, [*arrive[1:], arrive[0]], strict=True)]
    return drawn(segment for pair in zip(arcs, sides, strict=True) for segment in pair if segment)


def _turns(corners: Sequence[Point]) -> list[float]:
    """How far the outline turns at each corner, degrees, positive to the left, from -180 to 180."""
    before = [corners[-1], *corners[:-1]]
    after = [*corners[1:], corners[0]]
    return [_turn(*triple) for triple in zip(before, corners, after, strict=True)]


def _turn(before: Point, corner: Point, after: Point) -> float:
    ax, ay = corner[0] - before[0], corner[1] - before[1]
    bx, by = after[0] - corner[0], after[1] - corner[1]
    return math.degrees(math.atan2(ax * by - ay * bx, ax * bx + ay * by))


def _cut_back(turn_deg: float) -> float:
    """How far before and after a corner its rounding begins, for a radius of 1."""
    return math.tan(math.radians(abs(turn_deg)) / 2)


def _refuse_wide_radius(corners: Sequence[Point], radius: float, units: Units) -> None:
    """Both arcs of a side must leave room for each other on it."""
    cut_backs = [_cut_back(turn) for turn in _turns(corners)]
    tightest: tuple[float, int] = (math.inf, 0)
    for index, corner in enumerate(corners):
        after = (index + 1) % len(corners)
        taken = cut_backs[index] + cut_backs[after]
        if taken:
            tightest = min(tightest, (math.dist(corner, corners[after]) / taken, index))
    most, index = tightest
    if radius > most + SAME_POINT_MM:
        after = (index + 1) % len(corners)
        length = format_length(math.dist(corners[index], corners[after]), units)
        rule = f"does not fit the side between points[{index}] and points[{after}], {length} long"
        raise refuse_radius(radius, most, rule, units)


def _corner_arc(before: Point, corner: Point, turn: float, radius: float) -> Arc | None:
    """The arc that rounds a corner, or None where there is nothing to round."""
    if radius == 0.0 or abs(turn) < STRAIGHT_DEG:
        return None
    cut_back = radius * _cut_back(turn)
    length = math.dist(before, corner)
    ux, uy = (corner[0] - before[0]) / length, (corner[1] - before[1]) / length
    side = math.copysign(radius, turn)
    centre = (corner[0] - ux * cut_back - uy * side, corner[1] - uy * cut_back + ux * side)
    start = bearing_deg((uy * side, -ux * side))
    return Arc(centre, (radius, 0.0), (0.0, radius), start, turn)


def raised(start: Point, control: Point, end: Point) -> Cubic:
    """The quadratic Bézier as a cubic, exactly."""

    def two_thirds(p: Point) -> Point:
        return (p[0] + (control[0] - p[0]) * 2 / 3, p[1] + (control[1] - p[1]) * 2 / 3)

    return Cubic(start, two_thirds(start), two_thirds(end), end)


def signed_area_mm2(curve: Curve) -> float:
    """The area within a closed curve by Green's theorem, exact; negative where it runs clockwise."""
    return sum(_swept(segment) for segment in curve)


def _swept(segment: Segment) -> float:
    """Half the integral of x dy - y dx along the segment."""
    match segment:
        case Line(p, q):
            return _cross(p, q) / 2
        case Cubic(a, b, c, d):
            weighted = 6 * _cross(a, b) + 3 * _cross(a, c) + _cross(a, d)
            return (weighted + 3 * _cross(b, c) + 3 * _cross(b, d) + 6 * _cross(c, d)) / 20
        case Arc(centre, u, v, _, sweep_deg):
            chord = (segment.end[0] - segment.start[0], segment.end[1] - segment.start[1])
            return (_cross(u, v) * math.radians(sweep_deg) + _cross(centre, chord)) / 2


def _cross(p: Point, q: Point) -> float:
    return p[0] * q[1] - p[1] * q[0]
