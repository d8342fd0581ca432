"""What all tables of the spec share: bounds, the kinds of their values, and a table that knows only its keys.

Owns the bounds. Imports `quantities`, `spec_values`; no geometry.
"""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import BaseModel, BeforeValidator, ConfigDict

from jigs import spec_values as values

SEAT_SIZE_MM = (50.0, 6000.0)
THICKNESS_MM = (5.0, 200.0)
HEIGHT_MM = (100.0, 1500.0)
COORDINATE_MM = (-6000.0, 6000.0)
BIT_MM = (3.0, 100.0)
MORTISE_DEPTH_MM = (3.0, 400.0)
LEG_DIAMETER_MM = (3.0, 200.0)
PITCH_DEG = (-10.0, 20.0)
LEAN_DEG = (-45.0, 45.0)
TAPER_DEG = (0.0, 20.0)
RESULTANT_DEG = (0.0, 60.0)
SIGHTLINE_DEG = (-360.0, 360.0)
BEARING_DEG = (-360.0, 360.0)
PIXELS = (-100_000.0, 100_000.0)
POINTING_PX = (0.0, 1000.0)
ROW_COUNT = (2, 40)
MOST_LEGS = 64
MOST_STRETCHERS = 32
LONGEST_PATH = 20_000
# A mortise nearer to the centre line than this is on it.
ON_CENTRE_LINE_MM = 1e-6
# A mortise or foot this near to the middle of the seat's depth belongs to neither end.
ON_MIDDLE_MM = 1e-6
# Two ways of writing a round seat's diameter agree when they are this close.
SAME_DIAMETER_MM = 0.01

Name = Annotated[str, values.Reads(lambda value, _info: values.name_text(value))]
SeatSize = Annotated[float, values.length(SEAT_SIZE_MM)]
Within = Annotated[float, values.length((0.0, SEAT_SIZE_MM[1]))]
Coordinate = Annotated[float, values.length(COORDINATE_MM)]
Pair = Annotated[tuple[Coordinate, Coordinate], BeforeValidator(values.pair)]
Bit = Annotated[float, values.length(BIT_MM)]
Triple = Annotated[tuple[Coordinate, Coordinate, Coordinate], BeforeValidator(values.triple)]
Diameter = Annotated[float, values.length(LEG_DIAMETER_MM)]
Lean = Annotated[float, values.angle(LEAN_DEG)]
Grain = Literal["fore-and-aft", "across"] | float


class Table(BaseModel):
    """A table of the file: only the keys that it knows, and never changed once read."""

    model_config = ConfigDict(extra="forbid", frozen=True, defer_build=True)
