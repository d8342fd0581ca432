"""Places evenly along a straight or arc line in plan: the deck of a row of spindles, and its crest.

Owns the spacing, and how flat a spindle may lie. Imports `frames`, `knowns`, `quantities` and `layout.geometry`.
"""

from __future__ import annotations

import math

from jigs.frames import Vector
from jigs.knowns import MOST_LEAN_DEG, CannotSolve
from jigs.quantities import Units, format_length
from layout.geometry import Point

# An arc that bows by less is a straight line.
STRAIGHT_MM = 1e-9


def row_places(width_mm: float, back_mm: float, bow_mm: float, count: int, units: Units = "mm") -> tuple[Point, ...]:
    """`count` places from left to right, as far from each other along the line as each from the next.

    The ends are `width_mm` apart, to either side of the centre line; the middle lies `back_mm` from the front edge and
    `bow_mm` behind the ends (negative: in front of them). Equal chords of the arc, so that one setting of the dividers
    steps off the row. Raises CannotSolve for an arc of more than half a circle.
    """
    half = width_mm / 2
    if abs(bow_mm) > half:
        bow, most = format_length(abs(bow_mm), units), format_length(half, units)
        raise CannotSolve(f"a bow of {bow} is more than half of the width, {most}", "give a flatter arc")
    shares = [2 * k / (count - 1) - 1 for k in range(count)]
    if abs(bow_mm) < STRAIGHT_MM:
        return tuple((half * share, back_mm) for share in shares)
    radius = (half**2 + bow_mm**2) / (2 * abs(bow_mm))
    turn = 2 * math.atan(abs(bow_mm) / half)
    sign = math.copysign(1.0, bow_mm)
    return tuple(
        (radius * math.sin(turn * share), back_mm - sign * 2 * radius * math.sin(turn * share / 2) ** 2)
        for share in shares
    )


def rises(run: Vector) -> bool:
    """Whether a spindle with this run, from deck to crest in the seat's frame, leaves the seat and leans no more."""
    return run[2] > 0.0 and math.hypot(run[0], run[1]) <= math.tan(math.radians(MOST_LEAN_DEG)) * run[2]
