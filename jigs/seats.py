"""The seat blank: its outline in plan, looked over before anything is drawn on it, and what can be asked of it.

Owns the choice of outline by the seat's shape, the checks that every outline must pass, and `Blank`. Imports
layout's geometry and curves, `outlines`, `shield`, `path_data` and the spec's seats; shapely only when an outline is
looked over.

Plan coordinates in mm: x to the right from the centre line, y from the front edge to the back.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property, lru_cache
from itertools import pairwise
from typing import TYPE_CHECKING

import numpy as np

from jigs.outlines import (
    OutlineError,
    d_outline,
    ellipse_outline,
    point_text,
    polygon_outline,
    precise,
    rectangle_outline,
    signed_area_mm2,
)
from jigs.path_data import path_outline
from jigs.quantities import Units, format_length
from jigs.shield import shield_outline
from jigs.spec import SEAT_SIZE_MM, DSeat, OvalSeat, PathSeat, PolygonSeat, RectangleSeat, RoundSeat, Seat, ShieldSeat
from layout.curves import Curve, Segment, ellipse_curve, flatten, segment_box
from layout.geometry import Affine, Box, Point, union

if TYPE_CHECKING:
    from shapely import LinearRing, Polygon

__all__ = ["Blank", "OutlineError", "outline"]

# Chords stand this near to the outline where it is looked over for crossings and where distances to it are measured.
EDGE_TOLERANCE_MM = 0.01
# The front-most point lies on y = 0 this closely.
FRONT_TOLERANCE_MM = 0.1
MOST_SEGMENTS = 2000
# What takes more chords than this is no seat: curves run wild between far control points.
MOST_CHORDS = 100_000
# Chords round an ellipse of half-length a depart from it by at most 4e-5 of a.
ELLIPSE_CHORDS = 360
# Stretches of the outline shorter than this do not count as lying on one side of a line; a stretch whose middle is
# nearer to the line than the second lies in it.
SHORTEST_STRETCH_MM = 1e-6
ON_LINE_MM = 1e-9


def outline(seat: Seat, units: Units = "mm") -> Curve:
    """The seat's outline: closed, counter-clockwise, true curves, its front-most point on y = 0.

    `units` are those that messages speak in. Raises OutlineError for what cannot be drawn or is no seat.
    """
    curve = _drawn(seat, units)
    field = {"polygon": "seat.points", "path": "seat.path"}.get(seat.shape, "seat")
    _look_over(curve, field, units)
    return curve


def _drawn(seat: Seat, units: Units) -> Curve:
    match seat:
        case RoundSeat():
            return ellipse_outline(seat.diameter, seat.diameter)
        case OvalSeat():
            return ellipse_outline(seat.width, seat.depth)
        case RectangleSeat():
            return rectangle_outline(seat.width, seat.depth, seat.corner_radius, units)
        case DSeat():
            flat_back = seat.flat == "back"
            return d_outline(seat.width, seat.depth, seat.straight, flat_back, seat.corner_radius, units)
        case ShieldSeat():
            sizes = (seat.width, seat.depth, seat.back_width, seat.front_bow)
            return shield_outline(*sizes, seat.corner_radius, units)
        case PolygonSeat():
            return _polygon(seat, units)
        case PathSeat():
            return path_outline(seat.path, seat.unit_mm, units)


def _polygon(seat: PolygonSeat, units: Units) -> Curve:
    """Looked over with sharp corners first: rounding makes sense of nothing that crosses itself."""
    sharp = polygon_outline(seat.points, 0.0, units)
    if seat.corner_radius == 0.0:
        return sharp
    _refuse_crossing(sharp, "seat.points", units)
    return polygon_outline(seat.points, seat.corner_radius, units)


def _look_over(curve: Curve, field: str, units: Units) -> None:
    if len(curve) > MOST_SEGMENTS:
        raise OutlineError(field, f"an outline of {len(curve)} parts", f"has more than {MOST_SEGMENTS}", "simplify it")
    box = union(segment_box(segment) for segment in curve)
    _refuse_size(box, field, units)
    _refuse_crossing(curve, field, units)
    if abs(box.y0) > FRONT_TOLERANCE_MM:
        given = f"the outline's front-most point, y = {precise(box.y0, units)},"
        cure = f"move it {precise(abs(box.y0), units)} to the {'front' if box.y0 > 0 else 'back'}"
        raise OutlineError(field, given, "is not on the front edge, y = 0", cure)


def _refuse_size(box: Box, field: str, units: Units) -> None:
    least, most = SEAT_SIZE_MM
    for size, way in ((box.width, "wide"), (box.height, "deep")):
        if not least - ON_LINE_MM <= size <= most + ON_LINE_MM:
            given = f"an outline {format_length(size, units)} {way}"
            bounds = f"{format_length(least, units)} and {format_length(most, units)}"
            raise OutlineError(field, given, f"is not between {bounds}")


@lru_cache(maxsize=4)
def _ring(curve: Curve) -> list[Point]:
    """The outline as chords, closed to the last bit: an end that overshoots its start by rounding crosses it."""
    points = flatten(curve, EDGE_TOLERANCE_MM)
    return [*points[:-1], points[0]]


def _refuse_crossing(curve: Curve, field: str, units: Units) -> None:
    """Crossings finer than EDGE_TOLERANCE_MM may go unseen, parts that near to each other may count as touching."""
    if sum(segment.pieces(EDGE_TOLERANCE_MM) for segment in curve) > MOST_CHORDS:
        raise OutlineError(field, "the outline", "is too long and winding to look over", "simplify it")
    from shapely import Polygon  # noqa: PLC0415
    from shapely.validation import explain_validity  # noqa: PLC0415

    points = _ring(curve)
    if len(points) < 4:
        raise OutlineError(field, "the outline", "holds no area")
    polygon = Polygon(points)
    if not polygon.is_valid:
        reason, _, place = explain_validity(polygon).partition("[")
        where = tuple(float(value) for value in place.rstrip("]").split()[:2])
        near = f" near {point_text((where[0], where[1]), units)}" if len(where) == 2 else ""
        rule = "crosses or touches itself" if "elf-intersection" in reason else "is not one plain line"
        raise OutlineError(field, "the outline", rule + near, "make it one line round the seat")
    if polygon.area <= 0.0:
        raise OutlineError(field, "the outline", "holds no area")


@dataclass(frozen=True)
class Blank:
    """A seat blank in plan: one closed, counter-clockwise curve that does not cross itself."""

    curve: Curve

    @cached_property
    def polygon(self) -> Polygon:
        """The outline as chords within EDGE_TOLERANCE_MM."""
        import shapely  # noqa: PLC0415

        polygon = shapely.Polygon(_ring(self.curve))
        shapely.prepare(polygon)
        return polygon

    @cached_property
    def edge(self) -> LinearRing:
        """The polygon's edge."""
        return self.polygon.exterior

    @cached_property
    def bounds(self) -> Box:
        """The true bounds."""
        return union(segment_box(segment) for segment in self.curve)

    @property
    def middle_y_mm(self) -> float:
        """Half-way between the front-most and the rearmost point."""
        return self.bounds.centre[1]

    @cached_property
    def area_mm2(self) -> float:
        """The area within the true curve."""
        return signed_area_mm2(self.curve)

    @cached_property
    def convex(self) -> bool:
        """Whether the outline nowhere bends inward, within EDGE_TOLERANCE_MM all round."""
        polygon = self.polygon
        return bool(polygon.convex_hull.area - polygon.area <= EDGE_TOLERANCE_MM * polygon.length)

    def holds(self, point: Point) -> bool:
        """Whether the point is on the blank or its edge, within EDGE_TOLERANCE_MM."""
        from shapely import Point as Spot  # noqa: PLC0415

        return bool(self.polygon.covers(Spot(point)))

    def edge_distance_mm(self, point: Point) -> float:
        """How far the point is from the edge, positive on the blank, negative off it, within EDGE_TOLERANCE_MM."""
        from shapely import Point as Spot  # noqa: PLC0415

        distance = float(self.edge.distance(Spot(point)))
        return distance if self.holds(point) else -distance

    def line_crossings(self, point: Point, bearing_deg: float) -> tuple[float, ...]:
        """Where the line through the point crosses the true outline: distances along the bearing, sorted, signed.

        Touching is not crossing. A straight stretch of the outline that lies in the line gives its two ends.
        """
        turn = Affine.move(-point[0], -point[1]).then(Affine.turn(-bearing_deg))
        stretches = [s for segment in self.curve for s in _stretches(segment.mapped(turn))]
        changes = zip([*stretches[-1:], *stretches[:-1]], stretches, strict=True)
        return tuple(sorted(x for (_, before), (x, side) in changes if before != side))

    def ellipse_margin_mm(self, centre: Point, along_mm: float, across_mm: float, angle_deg: float) -> float:
        """The least distance from an ellipse's edge to the outline; where it leaves the blank, minus how far at most.

        `along_mm` is the half-axis in the direction `angle_deg`, `across_mm` the other. Within EDGE_TOLERANCE_MM and
        the departure of ELLIPSE_CHORDS chords, 4e-5 of the longer half-axis.
        """
        import shapely  # noqa: PLC0415

        (arc,) = ellipse_curve(centre, along_mm, across_mm, angle_deg)
        turns = np.linspace(0.0, 2 * np.pi, ELLIPSE_CHORDS, endpoint=False)[:, None]
        ring = shapely.LinearRing(arc.centre + np.cos(turns) * arc.u + np.sin(turns) * arc.v)
        edge = self.edge
        outside = ring.difference(self.polygon)
        if outside.is_empty:
            return float(edge.distance(ring))
        # Points in between, lest a narrow notch fall between two corners of the ring.
        dense = shapely.segmentize(outside, max(along_mm, across_mm) / 25)
        spots = shapely.points(shapely.get_coordinates(dense))
        return -float(shapely.distance(edge, spots).max())


def _stretches(segment: Segment) -> Iterator[tuple[float, int]]:
    """Where each stretch between crossings of the x axis begins, and its side: 1 above, -1 below, 0 in the axis."""
    cuts = [0.0, *segment.crossings(1, 0.0), 1.0]
    for t0, t1 in pairwise(cuts):
        start, end, middle = segment.at(t0), segment.at(t1), segment.at((t0 + t1) / 2)
        if math.dist(start, middle) + math.dist(middle, end) > SHORTEST_STRETCH_MM:
            yield start[0], 0 if abs(middle[1]) <= ON_LINE_MM else int(math.copysign(1, middle[1]))
