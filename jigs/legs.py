"""Leg axes: how each leg leans in the floor frame and in the seat frame, where it meets both faces and the floor.

Owns the angles of `angles` and of every sheet. Imports `frames`, the spec's models and `layout.geometry`; no drawing.

Signs: splay is the lean away from the centre line seen from the front, rake the lean away from the middle of the seat
seen from the side, both from plumb (floor frame) or from the line square to the face (seat frame). A leg's direction
runs from the mortise to the foot: (side * tan splay, end * tan rake, -1), side +1 right, -1 left, 0 on the centre
line; end +1 back,
-1 front.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Literal, NamedTuple

from jigs.frames import SeatFrame, Vector, dot, further, unit
from jigs.spec_legs import Mortise
from layout.geometry import cos_sin

# Below this tangent of the lean a leg counts as square: it has no direction to lean in (1e-12 is far under rounding).
SQUARE = 1e-12


class Lean(NamedTuple):
    """How an axis leans from the line square to a plane; all in degrees.

    `sightline_deg` runs from the fore-and-aft line toward the leg's own side, -180 to 180; `bearing_deg` is the
    direction of the foot in the plane, counter-clockwise from +x, 0 up to 360. Both are 0 for an axis that does not
    lean.
    """

    splay_deg: float
    rake_deg: float
    resultant_deg: float
    sightline_deg: float
    bearing_deg: float

    @property
    def bevel_deg(self) -> float:
        """What a sliding bevel set against the face reads."""
        return 90.0 - self.resultant_deg

    @property
    def complement_deg(self) -> float:
        """The sightline from the across line: 0 = out to the own side, 90 = out of the own end; -180 up to 180."""
        complement = 90.0 - self.sightline_deg
        return complement - 360.0 if complement > 180.0 else complement

    @property
    def leans(self) -> bool:
        """Whether there is a lean at all."""
        return self.resultant_deg > 0.0


def direction_of(splay_deg: float, rake_deg: float, side: int, end: int) -> Vector:
    """From mortise to foot, not of unit length: its z is -1. Angles within -90 to 90, exclusive."""
    return (side * math.tan(math.radians(splay_deg)), end * math.tan(math.radians(rake_deg)), -1.0)


def lean_of(direction: Vector, side: int, end: int) -> Lean:
    """The angles of a direction that runs down (z < 0) from the plane z = 0. Raises ValueError for one that does not.

    tan² resultant = tan² splay + tan² rake; tan sightline = tan splay / tan rake (Machinery's Handbook, 31st ed., the
    rod through a block seen in two views).
    """
    down = -direction[2]
    if down <= 0.0:
        raise ValueError("does not run down from the seat")
    x, y = direction[0] / down, direction[1] / down
    slope = math.hypot(x, y)
    if slope < SQUARE:
        return Lean(0.0, 0.0, 0.0, 0.0, 0.0)
    outward, endward = (side or 1) * x, end * y
    return Lean(
        splay_deg=_degrees(math.atan(outward)),
        rake_deg=_degrees(math.atan(endward)),
        resultant_deg=_degrees(math.atan(slope)),
        sightline_deg=_degrees(math.atan2(outward + 0.0, endward + 0.0)),
        # Twice, for directions so little below 0 that the first remainder is 360 itself.
        bearing_deg=_degrees(math.atan2(y, x)) % 360.0 % 360.0,
    )


def _degrees(angle: float) -> float:
    return math.degrees(angle) + 0.0  # a lean of -0 reads as 0


Kind = Literal["leg", "post", "spindle"]
Face = Literal["top", "underside"]


@dataclass(frozen=True, slots=True)
class Leg:
    """One leg, post or spindle, twins apart. Points on the faces are in seat-frame plan coordinates; mm.

    A leg runs from the underside down to the floor, a post or spindle from the top face up; what is said here of the
    foot holds of their upper end. `floor` and `seat` are its angles from plumb and from the line square to the seat,
    `drill` those from the line square to the face where the bit enters, which may be dished. `toward_foot` is the unit
    direction out of the seat, in the seat frame. `foot_mm` is the foot in floor-frame plan, `foot_z_mm` its height;
    `axis_mm` runs from the face that the part enters to the foot, `in_seat_mm` from face to face. `drilled` is the face
    that the bit enters, `place` names the part in the spec.
    """

    name: str
    place: str
    side: int
    end: int
    floor: Lean
    seat: Lean
    drill: Lean
    toward_foot: Vector
    top_mm: tuple[float, float]
    underside_mm: tuple[float, float]
    foot_mm: tuple[float, float]
    axis_mm: float
    in_seat_mm: float
    mortise: Mortise
    diameter_mm: float
    foot_diameter_mm: float
    drilled: Face
    kind: Kind = "leg"
    foot_z_mm: float = 0.0

    @property
    def enters(self) -> Face:
        """The face through which the part enters its mortise, where a tapered one is wide."""
        return "underside" if self.kind == "leg" else "top"

    @property
    def leans_with_bit(self) -> bool:
        """Whether the bit's shank leans toward the foot: it does where it enters as the part does."""
        return self.drilled == self.enters

    def on_face(self, face: str) -> tuple[float, float]:
        """The mortise's centre on the "top" or the "underside"."""
        return self.top_mm if face == "top" else self.underside_mm


def on_local_face(toward_foot: Vector, fall_deg: float, fall_bearing_deg: float, side: int, end: int) -> Lean:
    """The angles from the line square to a face that is dished or wedged: it falls `fall_deg` toward a bearing in plan.

    `toward_foot` runs out of the seat, down or up, in the seat frame. Splay, rake and sightline are measured in the
    tilted face, from the seat's own lines turned into it the shortest way; the bearing is that of the lean as seen
    square to the seat, which is how a template shows it. Raises ValueError for an axis that does not leave that face.
    """
    c, s = cos_sin(fall_bearing_deg)
    fall = math.radians(fall_deg)
    x, y, z = toward_foot
    along, across = x * c + y * s, y * c - x * s
    tilted, out = along * math.cos(fall) - z * math.sin(fall), along * math.sin(fall) + z * math.cos(fall)
    lean = lean_of((tilted * c - across * s, tilted * s + across * c, -out if z > 0.0 else out), side, end)
    if not lean.leans:
        return lean
    shown = tilted * math.cos(fall)
    bearing = _degrees(math.atan2(shown * s + across * c, shown * c - across * s)) % 360.0 % 360.0
    return lean._replace(bearing_deg=bearing)


class Axis(NamedTuple):
    """What fixes a leg's axis: the mortise's centre on the drilled face and the direction to the foot in the floor
    frame.
    """

    at_mm: tuple[float, float]
    direction: Vector
    side: int
    end: int


class AxisRun(NamedTuple):
    """An axis followed through the seat to the floor, in the terms of `Leg`."""

    floor: Lean
    drill: Lean
    toward_foot: Vector
    top_mm: tuple[float, float]
    underside_mm: tuple[float, float]
    foot_mm: tuple[float, float]
    axis_mm: float
    in_seat_mm: float


def follow(axis: Axis, frame: SeatFrame, thickness_mm: float, drilled_from_top: bool) -> AxisRun:
    """Where the axis meets the faces and the floor, and its angles in both frames.

    `toward_foot` is the unit direction in the seat frame. Raises ValueError where the leg does not run down from the
    seat or the underside stands at or below the floor there.
    """
    in_seat = frame.turn_to_seat(axis.direction)
    drill = lean_of(in_seat, axis.side, axis.end)
    floor = lean_of(axis.direction, axis.side, axis.end)
    shift = (in_seat[0] / -in_seat[2] * thickness_mm, in_seat[1] / -in_seat[2] * thickness_mm)
    x, y = axis.at_mm
    top = (x, y) if drilled_from_top else (x - shift[0], y - shift[1])
    underside = (x + shift[0], y + shift[1]) if drilled_from_top else (x, y)
    leaves = frame.to_floor((*underside, -thickness_mm))
    if leaves[2] <= 0.0:
        raise ValueError("stands where the seat's underside is on the floor or below it")
    lengths = leaves[2] / -axis.direction[2]
    foot = further(leaves, axis.direction, lengths)
    return AxisRun(
        floor=floor,
        drill=drill,
        toward_foot=unit(in_seat),
        top_mm=top,
        underside_mm=underside,
        foot_mm=(foot[0], foot[1]),
        axis_mm=lengths * math.sqrt(dot(axis.direction, axis.direction)),
        in_seat_mm=math.hypot(thickness_mm, *shift),
    )


def follow_up(axis: Axis, frame: SeatFrame, thickness_mm: float, length_mm: float) -> tuple[AxisRun, float]:
    """The same for a post bored from the top, whose axis leans and rises to its upper end; and that end's height.

    `axis.direction` is given as a leg's, with z = -1, for the post's mirror image below the seat's plane: the post
    itself runs (x, y, +1) in the floor frame. `length_mm` is along the axis from the top face. Raises ValueError for
    one that does not rise from the seat.
    """
    x, y, z = axis.direction
    rising = (x, y, -z)
    in_seat = frame.turn_to_seat(rising)
    drill = lean_of((in_seat[0], in_seat[1], -in_seat[2]), axis.side, axis.end)
    shift = (in_seat[0] / in_seat[2] * thickness_mm, in_seat[1] / in_seat[2] * thickness_mm)
    top = axis.at_mm
    upper = further(frame.to_floor((*top, 0.0)), unit(rising), length_mm)
    run = AxisRun(
        floor=lean_of(axis.direction, axis.side, axis.end),
        drill=drill,
        toward_foot=unit(in_seat),
        top_mm=top,
        underside_mm=(top[0] - shift[0], top[1] - shift[1]),
        foot_mm=(upper[0], upper[1]),
        axis_mm=length_mm,
        in_seat_mm=math.hypot(thickness_mm, *shift),
    )
    return run, upper[2]
