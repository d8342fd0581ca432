"""Front, side and plan views of the whole piece at a stated scale, drawn from the same axes as the template.

Imports `assembly`, `blocks`, `frames`, `legs`, `silhouettes` and layout's ground. Views are first set out in true mm of
the floor frame, then scaled.
"""

from __future__ import annotations

import math
from collections.abc import Iterator

from shapely import MultiPoint

from jigs.assembly import Assembly
from jigs.blocks import WIDTH_MM
from jigs.bores import bored_mm, sections
from jigs.frames import Vector, further
from jigs.legs import Leg
from jigs.silhouettes import Bar, View, between, silhouette
from layout.curves import Arc, Curve, flatten
from layout.drawing import Drawing, Primitive, Role, Stroke, Text, gather
from layout.geometry import Affine, Box, Point, bearing_deg
from layout.operations import bounds, transform
from layout.shapes import line, measure, polyline

# Scales, largest first, as the number that a true mm is divided by: those of ISO 5455 and the shop's own between them.
SCALES = (1, 2, 4, 5, 6, 8, 10, 12, 16, 20, 25, 32, 40, 50, 100)
# Room for the three views one above the other, and the gaps between them, on paper.
HEIGHT_MM, GAP_MM = 141.0, 20.0
# Chords of an outline in the views (true mm; a hair at any of the scales).
_VIEW_TOLERANCE_MM = 0.5
# Beside the views stand the dimensions of height: the seat's, and the whole where something rises above it.
_DIMENSION_MM, _SECOND_DIMENSION_MM = 14.0, 8.0


def front_view(p: Vector) -> Point:
    """As seen from the front: x to the right, z up."""
    return (p[0], p[2])


def side_view(p: Vector) -> Point:
    """As seen from the right: the front to the left, z up."""
    return (p[1], p[2])


def plan_view(p: Vector) -> Point:
    """As seen from above, the front edge toward you."""
    return (p[0], p[1])


def axis_ends(assembly: Assembly, leg: Leg) -> tuple[Vector, Vector, Vector]:
    """A leg's axis in the floor frame: where it meets the top face, the underside and the floor."""
    top = assembly.frame.to_floor((*leg.top_mm, 0.0))
    underside = assembly.frame.to_floor((*leg.underside_mm, -assembly.thickness_mm))
    return top, underside, (*leg.foot_mm, 0.0)


def standing_bar(assembly: Assembly, part: Leg) -> Bar:
    """A post or spindle from the top face to its upper end."""
    start = assembly.frame.to_floor((*part.top_mm, 0.0))
    end = (*part.foot_mm, part.foot_z_mm)
    return Bar(start, end, part.diameter_mm / 2, part.foot_diameter_mm / 2)


def stretcher_bars(assembly: Assembly) -> Iterator[Bar]:
    """The stretchers between the surfaces of what they stand in."""
    for stretcher in assembly.stretchers:
        first, second = stretcher.ends
        ends = between(first.axis_point_mm, second.axis_point_mm, first.reach_mm, stretcher.shoulder_mm)
        yield Bar(*ends, stretcher.diameter_mm / 2, stretcher.diameter_mm / 2)


def overall_mm(assembly: Assembly) -> float | None:
    """How high the highest edge of a post's or spindle's upper end stands above the floor; None without any."""
    return max(
        (
            part.foot_z_mm + part.foot_diameter_mm / 2 * math.sin(math.radians(part.floor.resultant_deg))
            for part in (*assembly.posts, *assembly.spindles)
        ),
        default=None,
    )


def views(assembly: Assembly) -> tuple[Drawing, int]:
    """The three views set out on paper, and the scale's divisor. Front upper left, side beside it, plan below the
    front.
    """
    drawn = [gather(part(assembly)) for part in (_front, _side, _plan)]
    boxes = [bounds(drawing) for drawing in drawn]
    divisor = _divisor(boxes, WIDTH_MM - _beside_mm(assembly))
    front, side, plan = (transform(drawing, Affine.scale(1 / divisor)) for drawing in drawn)
    f, s, p = (box.mapped(Affine.scale(1 / divisor)) for box in boxes)
    side = transform(side, Affine.move(f.x1 + GAP_MM - s.x0, 0.0))
    plan = transform(plan, Affine.move(0.0, f.y0 - GAP_MM - p.y1))
    shift = f.x1 + GAP_MM - s.x0
    notes = _dimensions(assembly, divisor, f, shift, s)
    return gather([front, side, plan, notes, *_titles(f, s, p, shift)]), divisor


def _beside_mm(assembly: Assembly) -> float:
    return _DIMENSION_MM + (_SECOND_DIMENSION_MM if overall_mm(assembly) is not None else 0.0)


def _divisor(boxes: list[Box], room_mm: float) -> int:
    front, side, plan = boxes
    for divisor in SCALES:
        wide = (max(front.width, plan.width) + side.width) / divisor + GAP_MM
        high = (max(front.height, side.height) + plan.height) / divisor + GAP_MM
        if wide <= room_mm and high <= HEIGHT_MM:
            return divisor
    return SCALES[-1]


def _titles(front: Box, side: Box, plan: Box, shift: float) -> Iterator[Text]:
    for words, x, y in (
        ("from the front", front.centre[0], front.y0 - 13.0),
        ("from the right, front at the left", side.centre[0] + shift, front.y0 - 13.0),
        ("from above, front toward you", front.centre[0], front.y0 - GAP_MM - plan.height - 6.0),
    ):
        yield Text((x, y), words, 2.5, align="centre")


def _dimensions(assembly: Assembly, divisor: int, front: Box, shift: float, side: Box) -> Drawing:
    """Heights, at the front edge and of the whole, beside the front view; spread of the feet below both elevations."""
    height = assembly.frame.height_mm
    left = front.x0 - 6.0
    drawn = [measure((left, 0.0), (left, height / divisor), assembly.length(height), 2.5, Role.SET_OUT)]
    overall = overall_mm(assembly)
    if overall is not None:
        further_left = left - _SECOND_DIMENSION_MM
        ends = (further_left, 0.0), (further_left, overall / divisor)
        drawn.append(measure(*ends, assembly.length(overall), 2.5, Role.SET_OUT))
    for axis, x0 in ((0, 0.0), (1, shift)):
        feet = [leg.foot_mm[axis] for leg in assembly.legs]
        low, high = min(feet), max(feet)
        if high - low > 25.0 * divisor:
            a, b = (x0 + low / divisor, -6.0), (x0 + high / divisor, -6.0)
            drawn.append(measure(a, b, assembly.length(high - low), 2.5, Role.SET_OUT))
    return gather(drawn)


def _front(assembly: Assembly) -> Iterator[Drawing | Primitive]:
    yield from _elevation(assembly, front_view)


def _side(assembly: Assembly) -> Iterator[Drawing | Primitive]:
    yield from _elevation(assembly, side_view)


def _elevation(assembly: Assembly, view: View) -> Iterator[Drawing | Primitive]:
    seat = _seat_silhouette(assembly, view)
    for leg in assembly.legs:
        yield from _leg_elevation(assembly, leg, view)
    for bar in stretcher_bars(assembly):
        yield _outlined(bar, view, Role.NOTE)
    for part in (*assembly.posts, *assembly.spindles):
        bar = standing_bar(assembly, part)
        yield _outlined(bar, view, Role.NOTE, open_at_start=True)
        yield line(view(bar.start), view(_bottom(assembly, part)), Role.HIDDEN)
    yield polyline(seat, Role.CUT, closed=True)
    xs = [p[0] for p in seat] + [view((*leg.foot_mm, 0.0))[0] for leg in assembly.legs]
    yield line((min(xs) - 30.0, 0.0), (max(xs) + 30.0, 0.0), Role.SET_OUT)


def _outlined(bar: Bar, view: View, role: Role, open_at_start: bool = False) -> Stroke:
    curve, closed = silhouette(bar, view, open_at_start)
    return Stroke(curve, role, closed)


def _bottom(assembly: Assembly, part: Leg) -> Vector:
    """The middle of the bottom of a mortise bored from the top."""
    return assembly.frame.to_floor(further((*part.top_mm, 0.0), part.toward_foot, -bored_mm(part)))


def _seat_silhouette(assembly: Assembly, view: View) -> list[Point]:
    """The seat seen square from outside: the hull of both faces' outlines (edge-on, hollows do not show)."""
    plan = flatten(assembly.blank.curve, _VIEW_TOLERANCE_MM)
    seen = [view(assembly.frame.to_floor((x, y, z))) for x, y in plan for z in (0.0, -assembly.thickness_mm)]
    hull = MultiPoint(seen).convex_hull
    return [(float(x), float(y)) for x, y in hull.exterior.coords[:-1]]


def _leg_elevation(assembly: Assembly, leg: Leg, view: View) -> Iterator[Primitive]:
    """A leg's silhouette from underside to floor, cut level there, and its axis through the seat, hidden."""
    top, underside, foot = (view(p) for p in axis_ends(assembly, leg))
    across = _across(underside, foot)
    sides = []
    for sign in (1.0, -1.0):
        a = _offset(underside, across, sign * leg.diameter_mm / 2)
        b = _offset(foot, across, sign * leg.foot_diameter_mm / 2)
        sides.append((a, _to_floor(a, b)))
    yield polyline([sides[0][0], sides[0][1], sides[1][1], sides[1][0]], Role.NOTE)
    yield line(top, underside, Role.HIDDEN)


def _across(p: Point, q: Point) -> Point:
    length = math.dist(p, q)
    return ((p[1] - q[1]) / length, (q[0] - p[0]) / length)


def _offset(p: Point, direction: Point, by: float) -> Point:
    return (p[0] + direction[0] * by, p[1] + direction[1] * by)


def _to_floor(a: Point, b: Point) -> Point:
    """Where the side line from a through b meets the floor."""
    t = a[1] / (a[1] - b[1])
    return (a[0] + t * (b[0] - a[0]), 0.0)


def _plan(assembly: Assembly) -> Iterator[Drawing | Primitive]:
    for leg in assembly.legs:
        yield from _leg_plan(assembly, leg)
    for bar in stretcher_bars(assembly):
        above = all(assembly.frame.to_seat(end)[2] > 0.0 for end in bar[:2])
        yield _outlined(bar, plan_view, Role.NOTE if above else Role.HIDDEN)
    pitch = math.cos(math.radians(assembly.frame.pitch_deg))
    yield Stroke(_foreshortened(assembly.blank.curve, pitch), Role.CUT, closed=True)
    box = assembly.blank.bounds
    yield line((0.0, box.y1 * pitch + 30.0), (0.0, box.y0 - 30.0), Role.CENTRE)
    for leg in assembly.bored:
        for s in sections(leg, "top"):
            turn = Affine.turn(s.bearing_deg)
            arc = Arc(s.centre, turn.vector((s.along_mm, 0.0)), turn.vector((0.0, s.across_mm)), 0.0, 360.0)
            yield Stroke(_foreshortened((arc,), pitch), Role.SET_OUT, closed=True)
    for part in (*assembly.posts, *assembly.spindles):
        yield _outlined(standing_bar(assembly, part), plan_view, Role.NOTE, open_at_start=True)


def _foreshortened(curve: Curve, factor: float) -> Curve:
    return tuple(segment.mapped(Affine(1.0, 0.0, 0.0, factor, 0.0, 0.0)) for segment in curve)


def _leg_plan(assembly: Assembly, leg: Leg) -> Iterator[Primitive]:
    """A leg below the seat, hidden, and its foot's true cut on the floor."""
    _, underside, foot = axis_ends(assembly, leg)
    a, b = plan_view(underside), plan_view(foot)
    if math.dist(a, b) > 1.0:
        across = _across(a, b)
        for sign in (1.0, -1.0):
            start = _offset(a, across, sign * leg.diameter_mm / 2)
            yield line(start, _offset(b, across, sign * leg.foot_diameter_mm / 2), Role.HIDDEN)
        yield line(a, b, Role.CENTRE)
    lean = math.radians(leg.floor.resultant_deg)
    turn = Affine.turn(bearing_deg((foot[0] - underside[0], foot[1] - underside[1])) if leg.floor.leans else 0.0)
    radius = leg.foot_diameter_mm / 2
    long, wide = turn.vector((radius / math.cos(lean), 0.0)), turn.vector((0.0, radius))
    yield Stroke((Arc(b, long, wide, 0.0, 360.0),), Role.HIDDEN, closed=True)
