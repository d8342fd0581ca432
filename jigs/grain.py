"""How much wood there is along the grain between a mortise and the seat's edge.

Owns the direction of the grain. Imports `seats`, `bores` and `layout.geometry`; no drawing. Plan coordinates of the
seat frame, mm.
"""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from jigs.bores import Section
from jigs.seats import Blank
from jigs.spec import SeatBase
from layout.geometry import Affine, cos_sin

# Directions of the grain by name, in degrees from the fore-and-aft line toward the right as seen from above.
GRAIN_DEG = {"fore-and-aft": 0.0, "across": 90.0}
# Places round a mortise from which the grain is followed: between two of them an ellipse of half-axis a bulges by less
# than 0.001 a.
PLACES_ROUND = 144


def grain_bearing_deg(seat: SeatBase) -> float | None:
    """The grain's direction counter-clockwise from +x in plan, None where the spec does not say; either way along it
    will do.
    """
    if seat.grain is None:
        return None
    return 90.0 - (GRAIN_DEG[seat.grain] if isinstance(seat.grain, str) else seat.grain)


def wood_along_grain_mm(blank: Blank, mortise: Section, bearing_deg: float) -> float:
    """The least distance along the grain, either way, from a mortise's edge to the outline; infinite off the blank.

    The outline is taken as the blank's chords, within their tolerance.
    """
    edge = _turned(np.asarray(blank.edge.coords), bearing_deg)
    starts, ways = _leaving(mortise, bearing_deg)
    (u0, v0), (u1, v1) = edge[:-1].T, edge[1:].T
    across = starts[:, 1:]
    crossed = (v0 > across) != (v1 > across)
    with np.errstate(divide="ignore", invalid="ignore"):
        u = u0 + (across - v0) / (v1 - v0) * (u1 - u0)
    runs = ways[:, None] * (u - starts[:, :1])
    return float(np.where(crossed & (runs >= 0.0), runs, np.inf).min())


def _turned(points: NDArray[np.float64], bearing_deg: float) -> NDArray[np.float64]:
    """Points with the grain as first axis."""
    c, s = cos_sin(bearing_deg)
    turned: NDArray[np.float64] = points @ np.array([[c, -s], [s, c]])
    return turned


def _leaving(mortise: Section, bearing_deg: float) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Points round the ellipse with the grain as first axis, and which way along it each looks out: +1 or -1."""
    centre = Affine.turn(-bearing_deg).point(mortise.centre)
    c, s = cos_sin(mortise.bearing_deg - bearing_deg)
    (au, av), (bu, bv) = (mortise.along_mm * c, mortise.along_mm * s), (-mortise.across_mm * s, mortise.across_mm * c)
    turn = (np.arange(PLACES_ROUND) + 0.5) * (2 * math.pi / PLACES_ROUND)
    cos, sin = np.cos(turn), np.sin(turn)
    # The other end of a point's line along the grain has the same second coordinate: its turn is mirrored about the
    # turn at which that is greatest.
    mirrored = 2 * math.atan2(bv, av) - turn
    u, other = cos * au + sin * bu, np.cos(mirrored) * au + np.sin(mirrored) * bu
    points = np.column_stack((u + centre[0], cos * av + sin * bv + centre[1]))
    return points, np.where(u >= other, 1.0, -1.0)
