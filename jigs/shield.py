"""The outline of a shield seat, as saddled seats have it: a bowed front, wide a third back, sides sweeping in.

Owns its proportions. Imports layout's geometry and curves, `outlines`; no spec and no shapely.
Plan coordinates in mm: x to the right from the centre line, y from the front edge to the back. The right half is worked
out from the front's middle to the back's and mirrored. Its curves meet without a kink but at the two front corners.
"""

from __future__ import annotations

import math
from collections.abc import Callable

from jigs.outlines import OutlineError, at_most, drawn, raised, refuse_radius, reversed_curve
from jigs.quantities import Units, format_length
from layout.curves import Arc, Cubic, Curve, mapped
from layout.geometry import Affine, Point, bearing_deg

# The seat is widest at this part of its depth.
WIDEST = 1 / 3
# The bow of the front edge where none is given, as a part of the depth; and the most of depth and width that it may be,
# so that the front corners stay corners.
BOW, MOST_BOW_OF_DEPTH, MOST_BOW_OF_WIDTH = 1 / 10, 1 / 4, 1 / 6
# The front corners lie in from the widest place by the lesser of these parts of the width and of the flank's length.
INSET_OF_WIDTH, INSET_OF_FLANK = 0.05, 0.25
# The sides leave the widest place straight back and would meet their end's direction this far along, before the corner.
SIDE_STRAIGHT = 0.35
# The back's bow as a part of the depth at most, and the slope at its ends at most.
BACK_BOW, BACK_SLOPE = 0.06, math.tan(math.radians(14))
# How far before and after the corner between side and back their rounding starts, as a part of the depth and the width.
BACK_CORNER_OF_DEPTH, BACK_CORNER_OF_WIDTH = 0.16, 0.2
# Handles of that rounding over the same length: as in a quarter circle.
HANDLE = 4 / 3 * (math.sqrt(2) - 1)
# The narrowest back as a part of the width: what is narrower is a heart, not a shield.
LEAST_BACK = 0.3
# A front corner's arc meets both curves this closely.
ARC_FIT_MM = 1e-9
NEWTON_STEPS = 30


def shield_outline(
    width_mm: float, depth_mm: float, back_width_mm: float, bow_mm: float | None, radius_mm: float, units: Units
) -> Curve:
    """The shield that fills `width_mm` by `depth_mm`, front corners rounded to the radius.

    At the back corners, where the outline has turned half-way from side to back, it is `back_width_mm` wide. Raises
    OutlineError for a back as wide as the seat or far too narrow, a bow too deep, or a radius that does not fit.
    """
    bow = _bow(width_mm, depth_mm, bow_mm, units)
    _refuse_back_width(width_mm, back_width_mm, units)
    front, flank = _front_and_flank(width_mm / 2, depth_mm, bow)
    side = _side_and_back(width_mm / 2, depth_mm, back_width_mm / 2)
    right = (*_rounded(front, flank, radius_mm, units), *side)
    left = reversed_curve(mapped(right, Affine.mirror_x()))
    return drawn((*right, *left))


def _bow(width: float, depth: float, bow: float | None, units: Units) -> float:
    most = min(MOST_BOW_OF_DEPTH * depth, MOST_BOW_OF_WIDTH * width)
    if bow is None:
        return min(BOW * depth, most)
    if bow > most + ARC_FIT_MM:
        rule = "is more than a quarter of the seat's depth or a sixth of its width"
        cure = f"give at most {at_most(most, units)}"
        raise OutlineError("seat.front_bow", format_length(bow, units), rule, cure)
    return bow


def _refuse_back_width(width: float, back_width: float, units: Units) -> None:
    given = format_length(back_width, units)
    if back_width >= width:
        rule = f"is not less than the seat's width, {format_length(width, units)}, and a shield narrows to the back"
        raise OutlineError("seat.back_width", given, rule, 'give less, or set shape = "rectangle" or "d"')
    if back_width < LEAST_BACK * width:
        least = format_length(math.ceil(LEAST_BACK * width), units)
        raise OutlineError("seat.back_width", given, "is too narrow for this width", f"give {least} or more")


def _front_and_flank(half: float, depth: float, bow: float) -> tuple[Cubic, Cubic]:
    """From the middle of the front to its corner, and on to the widest place."""
    widest = depth * WIDEST
    inset = min(INSET_OF_WIDTH * 2 * half, INSET_OF_FLANK * (widest - bow))
    corner = (half - inset, bow)
    front = raised((0.0, 0.0), (corner[0] / 2, 0.0), corner)
    return front, raised(corner, (half, (bow + widest) / 2), (half, widest))


def _side_and_back(half: float, depth: float, half_back: float) -> Curve:
    """From the widest place along the side, round the back corner, to the middle of the back."""
    widest = depth * WIDEST
    lean = math.atan2(half - half_back, (1 - SIDE_STRAIGHT) * (depth - widest))
    slope = math.atan(min(BACK_SLOPE, 2 * BACK_BOW * depth / half_back))
    inward, across = (-math.sin(lean), math.cos(lean)), (-math.cos(slope), math.sin(slope))
    reach = _back_corner_reach(half, depth, half_back, lean, slope)
    corner = (half_back + _outside(reach, lean, slope), 0.0)
    back_end = (corner[0] + reach * across[0], depth - (corner[0] + reach * across[0]) * math.tan(slope) / 2)
    corner = (corner[0], back_end[1] - reach * across[1])
    side_end = (corner[0] - reach * inward[0], corner[1] - reach * inward[1])
    turn = (half, corner[1] - (half - corner[0]) / math.tan(lean))
    grip = reach * HANDLE
    rounding = Cubic(
        side_end,
        (side_end[0] + grip * inward[0], side_end[1] + grip * inward[1]),
        (back_end[0] - grip * across[0], back_end[1] - grip * across[1]),
        back_end,
    )
    back = raised(back_end, (back_end[0] / 2, depth), (0.0, depth))
    return (raised((half, widest), turn, side_end), rounding.part(0.0, 0.5), rounding.part(0.5, 1.0), back)


def _outside(reach: float, lean: float, slope: float) -> float:
    """How far the corner between side and back stands outside the middle of its rounding, across the seat."""
    return reach * (4 - 3 * HANDLE) / 8 * (math.cos(slope) - math.sin(lean))


def _back_corner_reach(half: float, depth: float, half_back: float, lean: float, slope: float) -> float:
    """How far the rounding reaches along side and back: less where the side is short or hardly leans."""
    reach = min(BACK_CORNER_OF_DEPTH * depth, BACK_CORNER_OF_WIDTH * 2 * half_back)
    outside = _outside(1.0, lean, slope)
    if outside > 0.0:
        reach = min(reach, (half - half_back) / 2 / outside)
    return min(reach, (half - half_back) / math.sin(lean) / 2)


def _rounded(front: Cubic, flank: Cubic, radius: float, units: Units) -> Curve:
    if radius == 0.0:
        return (front, flank)
    found = _rounding(front, flank, radius)
    if found is None:
        rule = "does not fit the front corners, between the middle of the front and the widest place"
        raise refuse_radius(radius, _widest_radius(front, flank, radius), rule, units)
    return found


def _widest_radius(front: Cubic, flank: Cubic, too_wide: float) -> float:
    fits, over = 0.0, too_wide
    for _ in range(40):
        middle = (fits + over) / 2
        fits, over = (middle, over) if _rounding(front, flank, middle) else (fits, middle)
    return fits


def _rounding(front: Cubic, flank: Cubic, radius: float) -> Curve | None:
    """Both curves cut back, with the arc between that touches them; None where it does not fit."""
    found = _touching(front, flank, radius)
    if found is None:
        return None
    t, s = found
    centre, start = _moved_in(front, t, radius)
    _, end = _moved_in(flank, s, radius)
    start_deg, end_deg = (bearing_deg((p[0] - centre[0], p[1] - centre[1])) for p in (start, end))
    arc = Arc(centre, (radius, 0.0), (0.0, radius), start_deg, (end_deg - start_deg) % 360.0)
    return (front.part(0.0, t), arc, flank.part(s, 1.0))


def _touching(front: Cubic, flank: Cubic, radius: float) -> Point | None:
    """Parameters on both curves where an arc of the radius touches them; None where it would be past their ends.

    The arc's centre is where the curves, moved inward by the radius, cross: Newton's method, from where it would be if
    both were straight.
    """

    def miss(t: float, s: float) -> Point:
        (x0, y0), (x1, y1) = _moved_in(front, t, radius)[0], _moved_in(flank, s, radius)[0]
        return (x1 - x0, y1 - y0)

    along_front, along_flank = _direction(front, 1.0), _direction(flank, 0.0)
    turn = math.atan2(along_flank[1], along_flank[0]) - math.atan2(along_front[1], along_front[0])
    back = radius * math.tan(turn / 2)
    t, s = 1.0 - back / math.hypot(*along_front), back / math.hypot(*along_flank)
    for _ in range(NEWTON_STEPS):
        if not (-1.0 < t < 1.0 and 0.0 < s < 2.0):
            return None
        gap = miss(t, s)
        if math.hypot(*gap) < ARC_FIT_MM:
            return (t, s) if t >= 0.0 and s <= 1.0 else None
        dt, ds = _newton_step(miss, t, s)
        t, s = t - dt, s - ds
    return None


def _newton_step(miss: Callable[[float, float], Point], t: float, s: float) -> Point:
    step = 1e-6
    (x, y), (xt, yt), (xs, ys) = miss(t, s), miss(t + step, s), miss(t, s + step)
    a, b, c, d = (xt - x) / step, (xs - x) / step, (yt - y) / step, (ys - y) / step
    k = a * d - b * c
    return ((d * x - b * y) / k, (a * y - c * x) / k) if k else (math.inf, math.inf)


def _direction(curve: Cubic, t: float) -> Point:
    """The derivative at t, which may lie past the ends."""
    ahead = curve.part(t, t + 1.0)
    return (3 * (ahead.first[0] - ahead.start[0]), 3 * (ahead.first[1] - ahead.start[1]))


def _moved_in(curve: Cubic, t: float, by_mm: float) -> tuple[Point, Point]:
    """The point at t moved to the left of the curve, and the point itself."""
    x, y = curve.part(0.0, t).end
    dx, dy = _direction(curve, t)
    length = math.hypot(dx, dy)
    return (x - dy / length * by_mm, y + dx / length * by_mm), (x, y)
