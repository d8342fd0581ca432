"""The floor frame and the seat frame, and the way between them.

Owns vectors in space and nothing of legs. Imports nothing of ours.

Floor frame: z = 0 is the floor, the origin lies plumb below the front edge at the centre line, x right, y to the back,
z up. Seat frame: origin at the front edge on the top face at the centre line, x as above, y along the face, z square to
it. With pitch p (positive: the back is lower) the seat frame is the floor frame turned about x by -p and lifted by the
height.
"""

from __future__ import annotations

import math
from typing import NamedTuple

Vector = tuple[float, float, float]


class SeatFrame(NamedTuple):
    """Where the seat stands: pitch in degrees (any angle short of 90), height in mm at the front edge."""

    pitch_deg: float
    height_mm: float

    def to_floor(self, p: Vector) -> Vector:
        """A point of the seat frame in the floor frame."""
        x, y, z = self.turn_to_floor(p)
        return (x, y, z + self.height_mm)

    def to_seat(self, p: Vector) -> Vector:
        """A point of the floor frame in the seat frame."""
        return self.turn_to_seat((p[0], p[1], p[2] - self.height_mm))

    def turn_to_floor(self, v: Vector) -> Vector:
        """A direction of the seat frame in the floor frame."""
        c, s = _cos_sin(self.pitch_deg)
        return (v[0], v[1] * c + v[2] * s, v[2] * c - v[1] * s)

    def turn_to_seat(self, v: Vector) -> Vector:
        """A direction of the floor frame in the seat frame."""
        c, s = _cos_sin(self.pitch_deg)
        return (v[0], v[1] * c - v[2] * s, v[2] * c + v[1] * s)


def _cos_sin(angle_deg: float) -> tuple[float, float]:
    angle = math.radians(angle_deg)
    return (math.cos(angle), math.sin(angle))


def dot(u: Vector, v: Vector) -> float:
    """The scalar product."""
    return u[0] * v[0] + u[1] * v[1] + u[2] * v[2]


def minus(u: Vector, v: Vector) -> Vector:
    """The difference u - v."""
    return (u[0] - v[0], u[1] - v[1], u[2] - v[2])


def further(start: Vector, direction: Vector, distance: float) -> Vector:
    """The point `distance` lengths of `direction` from `start`."""
    return (
        start[0] + direction[0] * distance,
        start[1] + direction[1] * distance,
        start[2] + direction[2] * distance,
    )


def unit(v: Vector) -> Vector:
    """The direction of a vector, of length 1. Raises ZeroDivisionError for the null vector."""
    length = math.sqrt(dot(v, v))
    return (v[0] / length, v[1] / length, v[2] / length)


def nearest_on_segments(p0: Vector, p1: Vector, q0: Vector, q1: Vector) -> tuple[float, float, float]:
    """Parameters 0..1 on p0-p1 and q0-q1 of their nearest points, and the distance between those in mm.

    Ericson, *Real-Time Collision Detection*, 5.1.9 (from memory).
    """
    u, v, w = minus(p1, p0), minus(q1, q0), minus(p0, q0)
    a, e, b, c, f = dot(u, u), dot(v, v), dot(u, v), dot(u, w), dot(v, w)
    denominator = a * e - b * b
    s = _clamp((b * f - c * e) / denominator) if denominator > 1e-12 * a * e else 0.0
    t = (b * s + f) / e
    if not 0.0 <= t <= 1.0:
        t = _clamp(t)
        s = _clamp((b * t - c) / a)
    gap = minus(further(p0, u, s), further(q0, v, t))
    return s, t, math.sqrt(dot(gap, gap))


def _clamp(value: float) -> float:
    return min(1.0, max(0.0, value))
