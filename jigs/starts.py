"""How a leg starts in the trade: a chair to copy, a point to aim at, a ring of legs. Pictures are `pictures`'.

Owns these ways to a leg's angles. Imports `frames`, `legs`, `knowns`, `quantities`, `layout.geometry`; no spec is read.
Signs and frames as in `legs`: splay and rake positive outward, directions from mortise to foot with z = -1.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from jigs.frames import Vector
from jigs.knowns import MOST_LEAN_DEG, CannotSolve, decimals
from jigs.legs import lean_of
from jigs.quantities import Units, format_length
from layout.geometry import Point, cos_sin

# Plumb heights measured on a chair lie at least this far apart: at 50 mm, 1 mm is already more than a degree
# (practice).
LEAST_APART_MM = 50.0
# A leg on the centre line that is measured to lean sideways by more is no such leg, or was measured wrong (practice).
STRAY_DEG = 1.0
FEWEST_LEGS, MOST_LEGS = 3, 64
# A leg of a ring nearer than this to the ring's own centre lines is on them.
ON_LINE_MM = 1e-6


def from_copy(
    heights_mm: tuple[float, float],
    across_mm: tuple[float, float],
    along_mm: tuple[float, float],
    side: int,
    end: int,
    units: Units = "mm",
) -> tuple[float, float]:
    """Splay and rake in degrees of a leg of a standing chair, measured at two heights above the floor, in any order.

    `across_mm` is how far the leg's middle is from a plumb line at the front's centre, positive to the leg's own side;
    `along_mm` from a plumb line at the front edge, positive to the back. Raises CannotSolve for heights too near
    together and for a leg on the centre line (side 0) that leans sideways.
    """
    if not all(map(math.isfinite, (*heights_mm, *across_mm, *along_mm))):
        raise CannotSolve("a measure of the chair is not a number")
    drop = heights_mm[0] - heights_mm[1]
    if abs(drop) < LEAST_APART_MM:
        rule = f"the two heights are only {format_length(abs(drop), units)} apart"
        least = format_length(LEAST_APART_MM, units)
        raise CannotSolve(rule, f"measure at least {least} apart, the further the better")
    splay = math.degrees(math.atan((across_mm[1] - across_mm[0]) / drop))
    rake = math.degrees(math.atan(end * (along_mm[1] - along_mm[0]) / drop))
    if side == 0 and abs(splay) > STRAY_DEG:
        rule = f"the leg on the centre line is measured to lean {decimals(abs(splay), 1)}° sideways"
        raise CannotSolve(rule, "measure again from a plumb line at the centre, or say where the mortise really is")
    return (splay if side else 0.0, rake)


def aim(point_floor_mm: Vector, mortise_floor_mm: Vector, units: Units = "mm") -> Vector:
    """The direction from a point above the seat through the mortise's centre to the foot; both in the floor frame.

    Raises CannotSolve where the point is not above the mortise, or so low that the leg leans more than MOST_LEAN_DEG.
    """
    rise = point_floor_mm[2] - mortise_floor_mm[2]
    x, y = (mortise_floor_mm[k] - point_floor_mm[k] for k in (0, 1))
    least = math.hypot(x, y) / math.tan(math.radians(MOST_LEAN_DEG))
    # A little more than is needed, so that it does however the length is rounded.
    cure = (
        f"aim at a point {format_length(math.ceil(mortise_floor_mm[2] + least + 0.5), units)} or more above the floor"
    )
    if not rise > 0.0:
        raise CannotSolve(f"the point aimed at is {format_length(-rise, units)} below the mortise, not above it", cure)
    if rise < least:
        raise CannotSolve(f"the point aimed at is so low that the leg would lean more than {MOST_LEAN_DEG:g}°", cure)
    return (x / rise, y / rise, -1.0)


@dataclass(frozen=True)
class RingLeg:
    """One leg of a ring: its mortise on the drilled face, and its angles from the line square to the seat.

    `bearing_deg` is where it stands in the ring, counter-clockwise from +x in plan; it leans that way. `toward_foot` is
    its direction in the seat frame, with z = -1.
    """

    name: str
    at_mm: Point
    side: int
    end: int
    bearing_deg: float
    splay_deg: float
    rake_deg: float
    toward_foot: Vector


def ring(
    count: int,
    circle_diameter_mm: float,
    centre_mm: Point,
    resultant_deg: float,
    first_bearing_deg: float | None = None,
) -> tuple[RingLeg, ...]:
    """Legs evenly round a pitch circle on the drilled face, each leaning straight out from its centre.

    The resultant is measured from the line square to the seat, as it is drilled; negative leans inward. Legs are named
    `1`, `2` and so on counter-clockwise in plan. Left out, the first bearing is that of the right leg of a pair at the
    front, so that the ring is the same to left and right. Raises CannotSolve for fewer legs than three and sizes that
    make no ring.
    """
    if not FEWEST_LEGS <= count <= MOST_LEGS:
        raise CannotSolve(f"a ring of {count} legs cannot be made", f"give {FEWEST_LEGS} to {MOST_LEGS}")
    if not circle_diameter_mm > 0.0 or not math.isfinite(circle_diameter_mm):
        raise CannotSolve(f"a pitch circle of {circle_diameter_mm:g} mm is none", "give its diameter")
    if not abs(resultant_deg) <= MOST_LEAN_DEG:
        raise CannotSolve(
            f"resultant {resultant_deg:g} is not between -{MOST_LEAN_DEG:g} and {MOST_LEAN_DEG:g} degrees"
        )
    tangent = math.tan(math.radians(resultant_deg))
    return tuple(
        _ring_leg(str(k + 1), _bearing(count, k, first_bearing_deg), circle_diameter_mm / 2, centre_mm, tangent)
        for k in range(count)
    )


def _bearing(count: int, k: int, first_deg: float | None) -> float:
    """In one division, so that a leg at the middle of the back stands at 90 to the last bit."""
    turned = 270.0 + 180.0 * (2 * k + 1) / count if first_deg is None else first_deg + 360.0 * k / count
    return turned % 360.0


def _ring_leg(name: str, bearing_deg: float, radius_mm: float, centre: Point, tangent: float) -> RingLeg:
    c, s = cos_sin(bearing_deg)
    at = (centre[0] + radius_mm * c, centre[1] + radius_mm * s)
    end = -1 if radius_mm * s < -ON_LINE_MM else 1
    direction = (tangent * c, tangent * s, -1.0)
    # A ring that stands to one side may have a leg on the centre line that leans off it.
    aside = at[0] if abs(at[0]) > ON_LINE_MM else direction[0]
    side = 0 if abs(aside) <= ON_LINE_MM else (1 if aside > 0.0 else -1)
    lean = lean_of(direction, side, end)
    return RingLeg(name, at, side, end, bearing_deg, lean.splay_deg, lean.rake_deg, direction)


def ring_resultant_deg(
    circle_diameter_mm: float,
    foot_circle_diameter_mm: float,
    height_mm: float,
    thickness_mm: float,
    drilled_from_top: bool,
    units: Units = "mm",
) -> float:
    """The resultant of a ring whose feet stand on a circle of that diameter; for a level seat, height to its top face.

    Negative where the feet stand on the smaller circle. Raises CannotSolve where that leans more than MOST_LEAN_DEG.
    """
    drop = height_mm if drilled_from_top else height_mm - thickness_mm
    run = (foot_circle_diameter_mm - circle_diameter_mm) / 2
    if not drop > 0.0 or not foot_circle_diameter_mm >= 0.0:
        raise CannotSolve(
            "the ring's feet have no circle on the floor", "give a seat above the floor and a circle's diameter"
        )
    resultant = math.degrees(math.atan2(run, drop))
    if abs(resultant) > MOST_LEAN_DEG:
        most = circle_diameter_mm + 2 * drop * math.tan(math.radians(MOST_LEAN_DEG))
        circle = format_length(foot_circle_diameter_mm, units)
        rule = f"feet on a circle of {circle} make legs that lean {decimals(resultant, 1)}°"
        raise CannotSolve(rule, f"give {format_length(math.floor(most - 0.5), units)} or less")
    return resultant


@dataclass(frozen=True)
class FloorLine:
    """A line on the floor, in plan: a x + b y = c with a² + b² = 1, mm."""

    a: float
    b: float
    c: float

    def distance_mm(self, point: Point) -> float:
        """How far the point lies from the line, signed."""
        return self.a * point[0] + self.b * point[1] - self.c


def foot_between(one_foot_mm: Point, other_foot_mm: Point) -> FloorLine:
    """Where a foot stands that is equally far from two others; positive distances are on the other's side.

    As a known of a leg it is `between` of `solve`. Raises CannotSolve for feet on one spot.
    """
    run = (other_foot_mm[0] - one_foot_mm[0], other_foot_mm[1] - one_foot_mm[1])
    apart = math.hypot(*run)
    if not apart > ON_LINE_MM:
        raise CannotSolve("the two neighbours' feet stand on one spot", "name two different legs")
    a, b = run[0] / apart, run[1] / apart
    middle = ((one_foot_mm[0] + other_foot_mm[0]) / 2, (one_foot_mm[1] + other_foot_mm[1]) / 2)
    return FloorLine(a, b, a * middle[0] + b * middle[1])
