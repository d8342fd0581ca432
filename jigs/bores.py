"""Mortises as holes: the true ellipses in which a plain or tapered bore meets a face, and how near two bores come.

Imports `frames`, `legs` and the spec's models; no drawing.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

from jigs.frames import Vector, further, nearest_on_segments
from jigs.legs import Leg
from jigs.spec import Mortise

# A bit that leans further than this from square skates before it bites (practice).
STEEP_DEG = 25.0
# How closely the least wood between two bores is found, and beyond which distance it need not be.
WEB_TOLERANCE_MM, FAR_MM = 0.01, 15.0


@dataclass(frozen=True, slots=True)
class Section:
    """An ellipse on a face, mm, in seat-frame plan coordinates: half-axis `along_mm` in the direction `bearing_deg`."""

    centre: tuple[float, float]
    along_mm: float
    across_mm: float
    bearing_deg: float


def section(leg: Leg, face: str, radius_mm: float, widening: float) -> Section:
    """Where a cone round the leg's axis meets a face.

    `radius_mm` is the cone's radius, square to the axis, where the axis crosses the face; `widening` is how much it
    grows for each mm toward the foot (0: a plain bore). With lean R and k = widening * sin R the edge along the
    sightline lies r / (cos R - k) from the axis toward the foot and r / (cos R + k) the other way, so the ellipse's
    centre is not on the axis; its half-width across is r cos R / sqrt(cos² R - k²).
    """
    lean = math.radians(leg.seat.resultant_deg)
    k = widening * math.sin(lean)
    ahead, behind = radius_mm / (math.cos(lean) - k), radius_mm / (math.cos(lean) + k)
    bearing = math.radians(leg.seat.bearing_deg)
    x, y = leg.on_face(face)
    offset = (ahead - behind) / 2
    return Section(
        centre=(x + offset * math.cos(bearing), y + offset * math.sin(bearing)),
        along_mm=(ahead + behind) / 2,
        across_mm=radius_mm * math.cos(lean) / math.sqrt(math.cos(lean) ** 2 - k**2),
        bearing_deg=leg.seat.bearing_deg,
    )


def taper_widening(mortise: Mortise) -> float:
    """Growth of a tapered mortise's radius for each mm along the axis; 0 for a plain one."""
    return math.tan(math.radians(mortise.taper / 2))


def bored_mm(leg: Leg) -> float:
    """How deep the mortise is along the axis, from the face that the part enters for a blind one, else through."""
    return leg.in_seat_mm if leg.mortise.depth is None else leg.mortise.depth


def mouth_mm(leg: Leg) -> float:
    """Diameter where the tenon enters: as given, else such that the taper ends at the bit's
    size.
    """
    mortise = leg.mortise
    if mortise.mouth is not None:
        return mortise.mouth
    return mortise.bit + 2 * bored_mm(leg) * taper_widening(mortise)


def radius_mm(leg: Leg, from_entry_mm: float) -> float:
    """The hole's radius square to the axis, at a distance along the axis from the face that the part enters."""
    reamed = mouth_mm(leg) / 2 - from_entry_mm * taper_widening(leg.mortise)
    return max(leg.mortise.bit / 2, reamed)


def sections(leg: Leg, face: str) -> tuple[Section, ...]:
    """The hole's edge on a face: one ellipse, none where a blind mortise stops short, two where reamer and bit both
    show.

    Two come only where the taper's cone and the bit's cylinder cross in the face itself; the hole is what either
    covers.
    """
    if face != leg.enters and leg.mortise.depth is not None:
        return ()
    bit = section(leg, face, leg.mortise.bit / 2, 0.0)
    inward = 0.0 if face == leg.enters else leg.in_seat_mm
    widening = taper_widening(leg.mortise)
    reamed_radius = mouth_mm(leg) / 2 - inward * widening
    if widening == 0.0 or reamed_radius <= 0.0:
        return (bit,)
    return _outer(section(leg, face, reamed_radius, widening), bit, leg)


def slice_at(leg: Leg, from_entry_mm: float) -> Section:
    """The hole cut square across at a distance along its axis from the face that the part enters, seen square to the
    seat.
    """
    share = from_entry_mm / leg.in_seat_mm
    start, through = leg.on_face(leg.enters), leg.on_face("underside" if leg.enters == "top" else "top")
    centre = (start[0] + share * (through[0] - start[0]), start[1] + share * (through[1] - start[1]))
    radius = radius_mm(leg, from_entry_mm)
    return Section(centre, radius * math.cos(math.radians(leg.seat.resultant_deg)), radius, leg.seat.bearing_deg)


def _outer(reamed: Section, bit: Section, leg: Leg) -> tuple[Section, ...]:
    bearing = math.radians(bit.bearing_deg)
    shift = (reamed.centre[0] - bit.centre[0]) * math.cos(bearing) + (reamed.centre[1] - bit.centre[1]) * math.sin(
        bearing
    )
    ahead = shift + reamed.along_mm - bit.along_mm
    behind = reamed.along_mm - shift - bit.along_mm
    across = reamed.across_mm - bit.across_mm
    if min(ahead, behind, across) >= 0.0:
        return (reamed,)
    return (bit,) if max(ahead, behind, across) <= 0.0 else (reamed, bit)


def wood_above_mm(leg: Leg, thickness_mm: float) -> float | None:
    """What a blind mortise leaves below the top face at its highest corner; None for a through one."""
    if leg.mortise.depth is None:
        return None
    lean = math.radians(leg.seat.resultant_deg)
    return thickness_mm - leg.mortise.depth * math.cos(lean) - radius_mm(leg, leg.mortise.depth) * math.sin(lean)


def least_web_mm(one: Leg, other: Leg, thickness_mm: float) -> float:
    """What wood there is at least between two bores, at little cost: as if each were everywhere at its widest."""
    *_, distance = nearest_on_segments(*_axis(one, thickness_mm), *_axis(other, thickness_mm))
    return distance - _widest_mm(one) - _widest_mm(other)


@lru_cache(maxsize=256)
def web_mm(one: Leg, other: Leg, thickness_mm: float) -> float:
    """The least wood between two bores inside the seat, within WEB_TOLERANCE_MM; negative, how deep, where they meet.

    For bores further apart than FAR_MM it is what there is at least.
    """
    at_least = least_web_mm(one, other, thickness_mm)
    if at_least > FAR_MM:
        return at_least
    mine, others = _bodies(one, thickness_mm), _bodies(other, thickness_mm)
    return min(_gap_mm(a, b) for a in mine for b in others)


def _axis(leg: Leg, thickness_mm: float) -> tuple[Vector, Vector]:
    """A bore's axis, from the face that the part enters to where it ends."""
    start = (*leg.on_face(leg.enters), _height_mm(leg.enters, thickness_mm))
    return start, further(start, leg.toward_foot, -bored_mm(leg))


def _height_mm(face: str, thickness_mm: float) -> float:
    """Of a face in the seat frame."""
    return 0.0 if face == "top" else -thickness_mm


def _widest_mm(leg: Leg) -> float:
    """No part of the bore is further from its axis than this: the mouth's far edge on the face."""
    lean = math.radians(leg.seat.resultant_deg)
    return max(mouth_mm(leg), leg.mortise.bit) / 2 / (math.cos(lean) - taper_widening(leg.mortise) * math.sin(lean))


# A convex body, the hull of two ellipses in space: for each its centre and two half-axes. Shape (2, 3, 3).
Body = NDArray[np.float64]


def _bodies(leg: Leg, thickness_mm: float) -> list[Body]:
    """The bit's cylinder and the reamer's cone inside the seat; the hole is what either covers."""
    widening = taper_widening(leg.mortise)
    bodies = [_body(leg, thickness_mm, leg.mortise.bit / 2, 0.0)]
    return [*bodies, _body(leg, thickness_mm, mouth_mm(leg) / 2, widening)] if widening else bodies


def _body(leg: Leg, thickness_mm: float, mouth_radius_mm: float, widening: float) -> Body:
    start, end = _axis(leg, thickness_mm)
    end_radius = mouth_radius_mm - bored_mm(leg) * widening
    near, far = leg.enters, "underside" if leg.enters == "top" else "top"
    mouth = _ring(section(leg, near, mouth_radius_mm, widening), _height_mm(near, thickness_mm))
    if end_radius <= 0.0:
        return np.array([mouth, [further(start, leg.toward_foot, -mouth_radius_mm / widening), (0, 0, 0), (0, 0, 0)]])
    if leg.mortise.depth is None:
        return np.array([mouth, _ring(section(leg, far, end_radius, widening), _height_mm(far, thickness_mm))])
    across = np.cross(leg.toward_foot, (1.0, 0.0, 0.0))
    across *= end_radius / np.linalg.norm(across)
    return np.array([mouth, [end, across, np.cross(leg.toward_foot, across)]])


def _ring(s: Section, z_mm: float) -> list[Vector]:
    c, d = math.cos(math.radians(s.bearing_deg)), math.sin(math.radians(s.bearing_deg))
    return [(*s.centre, z_mm), (s.along_mm * c, s.along_mm * d, 0.0), (-s.across_mm * d, s.across_mm * c, 0.0)]


def _gap_mm(one: Body, other: Body) -> float:
    """Between two convex bodies, or minus how far one must move to clear the other.

    It is the widest slot between parallel planes that parts them. Over directions, drawn as the points of a plane
    tangent to a coarse best one, the width has one hill: a search across within a search along finds its top.
    """
    best = _ALL_ROUND[np.argmax(_slots_mm(one, other, _ALL_ROUND))]
    aside = np.cross(best, np.eye(3)[np.argmin(np.abs(best))])
    aside /= np.linalg.norm(aside)
    up = np.cross(best, aside)
    middle, reach, top = 0.0, 1.0, -math.inf
    for _ in range(_ROUNDS):
        along = middle + reach * _STEPS
        tops = _tops_mm(one, other, best + along[:, None] * aside, up)
        middle, reach, top = float(along[np.argmax(tops)]), reach * _CLOSER, max(top, float(tops.max()))
    return top


def _tops_mm(one: Body, other: Body, starts: NDArray[np.float64], up: NDArray[np.float64]) -> NDArray[np.float64]:
    """The widest slot on each of the lines of directions that run `up` through the starts."""
    middles, reach, tops = np.zeros(len(starts)), 1.0, np.full(len(starts), -np.inf)
    for _ in range(_ROUNDS):
        across = middles[:, None] + reach * _STEPS
        directions = starts[:, None] + across[:, :, None] * up
        directions /= np.linalg.norm(directions, axis=2, keepdims=True)
        widths = _slots_mm(one, other, directions.reshape(-1, 3)).reshape(across.shape)
        middles, reach = across[np.arange(len(starts)), widths.argmax(axis=1)], reach * _CLOSER
        tops = np.maximum(tops, widths.max(axis=1))
    return tops


def _slots_mm(one: Body, other: Body, directions: NDArray[np.float64]) -> NDArray[np.float64]:
    return -_support_mm(one, directions) - _support_mm(other, -directions)


def _support_mm(body: Body, directions: NDArray[np.float64]) -> NDArray[np.float64]:
    """How far a body reaches in each direction, from the origin."""
    centre, first, second = np.moveaxis(directions @ body.transpose(0, 2, 1), 2, 0)
    reach: NDArray[np.float64] = (centre + np.hypot(first, second)).max(axis=0)
    return reach


def _all_round(count: int) -> NDArray[np.float64]:
    """Directions spread evenly over the sphere, on a spiral that turns by the golden angle."""
    z = 1.0 - (2.0 * np.arange(count) + 1.0) / count
    turn = np.pi * (3.0 - math.sqrt(5.0)) * np.arange(count)
    r = np.sqrt(1.0 - z**2)
    return np.column_stack((r * np.cos(turn), r * np.sin(turn), z))


_ALL_ROUND = _all_round(600)
# Each round of a search looks at so many places, then as closely again between the neighbours of the best.
_STEPS = np.linspace(-1.0, 1.0, 13)
_CLOSER = 1.0 / 5.0
_ROUNDS = 6
