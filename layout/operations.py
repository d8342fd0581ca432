"""What is done to drawings: transform, bounds, clip, flatten. Each returns new data and changes nothing.

Imports `geometry`, `curves`, `drawing` and `lettering` only.
"""

from __future__ import annotations

import itertools
import math

from layout.curves import Curve, Line, Segment, flatten, mapped, segment_box
from layout.drawing import Drawing, Fill, Primitive, Stroke, Text
from layout.geometry import Affine, Box, Point, bearing_deg, union
from layout.lettering import FALL, RISE, text_width_mm

# Chords of a solid shape's edge stay this near to it when it is clipped.
FILL_TOLERANCE_MM = 0.005
# Ends of a curve this near to each other meet.
SAME_POINT_MM = 1e-6


def transform(drawing: Drawing, m: Affine) -> Drawing:
    """The drawing under a map that keeps shapes (turns, shifts, even scales, reflections).

    Lettering moves with its place and reading direction and is never mirrored. Raises ValueError for a map that would
    stretch it.
    """
    return Drawing(tuple(_transformed(item, m) for item in drawing.items))


def _transformed(item: Primitive, m: Affine) -> Primitive:
    match item:
        case Stroke(curve, role, closed):
            return Stroke(mapped(curve, m), role, closed)
        case Fill(curve, role):
            return Fill(mapped(curve, m), role)
        case Text():
            return _transformed_text(item, m)


def _transformed_text(text: Text, m: Affine) -> Text:
    factor = math.sqrt(abs(m.determinant))
    if not math.isclose(math.hypot(m.a, m.b), factor, rel_tol=1e-9) or abs(m.a * m.c + m.b * m.d) > 1e-9 * factor**2:
        raise ValueError("lettering can be turned, moved and scaled evenly, not stretched")
    reading = Affine.turn(text.angle_deg).vector((1.0, 0.0))
    angle = bearing_deg(m.vector(reading))
    return Text(
        m.point(text.at), text.text, text.height_mm * factor, text.role, text.align, angle, text.bold, text.over
    )


def text_corners(text: Text, pad_mm: float = 0.0) -> tuple[Point, ...]:
    """The four corners of the patch that a line of lettering takes, accents and tails included."""
    width = text_width_mm(text.text, text.height_mm, text.bold)
    left = {"left": 0.0, "centre": -width / 2, "right": -width}[text.align]
    patch = Box(left, -FALL * text.height_mm, left + width, (1 + RISE) * text.height_mm).grown(pad_mm)
    place = Affine.turn(text.angle_deg).then(Affine.move(*text.at))
    return tuple(place.point(p) for p in patch.corners())


def primitive_bounds(item: Primitive) -> Box:
    """The true bounds of one primitive, ink width left out."""
    if isinstance(item, Text):
        xs, ys = zip(*text_corners(item), strict=True)
        return Box(min(xs), min(ys), max(xs), max(ys))
    return union(segment_box(segment) for segment in item.curve)


def bounds(drawing: Drawing) -> Box:
    """The true bounds of a drawing, ink width left out. Raises ValueError for an empty one."""
    return union(primitive_bounds(item) for item in drawing.items)


def polylines(drawing: Drawing, tolerance_mm: float) -> list[list[Point]]:
    """Every primitive as points: curves within `tolerance_mm`, lettering as the patch that it takes."""
    return [
        [*text_corners(item), text_corners(item)[0]] if isinstance(item, Text) else flatten(item.curve, tolerance_mm)
        for item in drawing.items
    ]


def clip(drawing: Drawing, box: Box) -> Drawing:
    """What lies in the box: strokes cut exactly, solid shapes within FILL_TOLERANCE_MM, lettering whole where it
    shows.
    """
    kept: list[Primitive] = []
    for item in drawing.items:
        if primitive_bounds(item).meets(box):
            kept.extend(_clipped(item, box))
    return Drawing(tuple(kept))


def _clipped(item: Primitive, box: Box) -> list[Primitive]:
    match item:
        case Text():
            return [item]
        case Fill(curve, role):
            points = _clip_polygon(flatten(curve, FILL_TOLERANCE_MM), box)
            edges = tuple(Line(p, q) for p, q in zip(points, [*points[1:], *points[:1]], strict=True))
            return [Fill(edges, role)] if len(points) > 2 else []
        case Stroke(curve, role, closed):
            runs = clip_curve(curve, box)
            whole = len(runs) == 1 and runs[0] == curve
            if closed and not whole:
                runs = _joined_at_start(runs, curve)
            return [Stroke(run, role, closed and whole) for run in runs]


def _joined_at_start(runs: list[Curve], curve: Curve) -> list[Curve]:
    """The runs of a closed curve, the last one joined to the first where both meet at the curve's start."""
    if len(runs) < 2 or math.dist(runs[0][0].start, curve[0].start) > SAME_POINT_MM:
        return runs
    meets = math.dist(runs[-1][-1].end, runs[0][0].start) <= SAME_POINT_MM
    return [runs[-1] + runs[0], *runs[1:-1]] if meets else runs


def clip_curve(curve: Curve, box: Box) -> list[Curve]:
    """The stretches of a curve that lie in the box, in order."""
    runs: list[list[Segment]] = []
    open_run = False
    for segment in curve:
        cuts = [0.0, *_box_crossings(segment, box), 1.0]
        for t0, t1 in itertools.pairwise(cuts):
            inside = box.holds(segment.at((t0 + t1) / 2), 1e-9)
            if inside:
                stretch = segment if (t0, t1) == (0.0, 1.0) else segment.part(t0, t1)
                if open_run:
                    runs[-1].append(stretch)
                else:
                    runs.append([stretch])
            open_run = inside
    return [tuple(run) for run in runs]


def _box_crossings(segment: Segment, box: Box) -> list[float]:
    edges = ((0, box.x0), (0, box.x1), (1, box.y0), (1, box.y1))
    return sorted({t for axis, value in edges for t in segment.crossings(axis, value)})


def _clip_polygon(points: list[Point], box: Box) -> list[Point]:
    """Sutherland and Hodgman's clip of a polygon by the box's four edges."""
    for axis, value, sign in ((0, box.x0, 1), (0, box.x1, -1), (1, box.y0, 1), (1, box.y1, -1)):
        kept: list[Point] = []
        for p, q in zip(points, [*points[1:], *points[:1]], strict=True):
            p_in, q_in = ((r[axis] - value) * sign >= 0 for r in (p, q))
            if p_in:
                kept.append(p)
            if p_in != q_in:
                t = (value - p[axis]) / (q[axis] - p[axis])
                kept.append((p[0] + t * (q[0] - p[0]), p[1] + t * (q[1] - p[1])))
        points = kept
    return points
