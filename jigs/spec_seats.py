"""The seat's table: a model for each shape, lengths in millimetres and angles in degrees.

Owns the shapes' keys. Imports `spec_base`, `spec_values`, `spec_problems`; no geometry.
Plan coordinates: x to the right from the centre line, y from the front edge to the back.
"""

from __future__ import annotations

from collections.abc import Callable
from typing import Annotated, Any, Literal

from pydantic import BeforeValidator, ConfigDict, Field, PlainValidator, PrivateAttr, ValidationInfo, field_validator

from jigs import spec_values as values
from jigs.quantities import MM_PER_INCH, format_length
from jigs.spec_base import (
    HEIGHT_MM,
    LONGEST_PATH,
    PITCH_DEG,
    SAME_DIAMETER_MM,
    THICKNESS_MM,
    Grain,
    Pair,
    SeatSize,
    Table,
    Within,
)
from jigs.spec_problems import missing, refusal


class SeatBase(Table):
    """What every seat has, in mm and degrees; `height` is from the floor to the top face at the front edge."""

    thickness: Annotated[float, values.length(THICKNESS_MM)]
    height: Annotated[float, values.length(HEIGHT_MM)]
    pitch: Annotated[float, values.angle(PITCH_DEG)] = 0.0
    drill_from: Literal["underside", "top"] = "underside"
    grain: Annotated[Grain | None, PlainValidator(values.grain)] = None


class RoundSeat(SeatBase):
    """A circle of `diameter` mm, which a file may also give as `width`, `depth` or both."""

    shape: Literal["round"]
    width: SeatSize | None = None
    depth: SeatSize | None = None
    diameter: SeatSize = Field(default=None, validate_default=True)

    @field_validator("diameter", mode="wrap")
    @classmethod
    def _given_or_across(cls, value: object, read: Callable[[object], float], info: ValidationInfo) -> float:
        if value is not None:
            return read(value)
        sizes = [info.data.get(key, 0.0) for key in ("width", "depth")]
        if sizes == [None, None]:
            raise missing(("seat", "diameter"))
        return float(next(size for size in sizes if size is not None))

    @field_validator("depth", "diameter")
    @classmethod
    def _agrees(cls, size: float | None, info: ValidationInfo) -> float | None:
        for key in ("width", "depth"):
            other = info.data.get(key)
            if size is not None and other is not None and abs(size - other) > SAME_DIAMETER_MM:
                across = format_length(other, values.units_of(info))
                rule = f"differs from {key} = {across}, and a round seat has one size"
                raise refusal(rule, 'give the diameter alone, or set shape = "oval"')
        return size


class OvalSeat(SeatBase):
    """An ellipse, `width` by `depth` mm."""

    shape: Literal["oval"]
    width: SeatSize
    depth: SeatSize


class RectangleSeat(SeatBase):
    """A rectangle, `width` by `depth` mm, its corners rounded to `corner_radius` mm."""

    shape: Literal["rectangle"]
    width: SeatSize
    depth: SeatSize
    corner_radius: Within = 0.0

    @field_validator("corner_radius")
    @classmethod
    def _fits(cls, radius: float, info: ValidationInfo) -> float:
        sides = [info.data[key] for key in ("width", "depth") if key in info.data]
        if sides and radius > min(sides) / 2:
            most = format_length(min(sides) / 2, values.units_of(info))
            raise refusal(f"is more than half of the seat's shorter side, {most}")
        return radius


class _DeepSeat(SeatBase):
    """A seat with sizes in mm that must stay short of its depth."""

    width: SeatSize
    depth: SeatSize

    @field_validator("straight", "front_bow", check_fields=False)
    @classmethod
    def _short_of_depth(cls, size: float | None, info: ValidationInfo) -> float | None:
        depth = info.data.get("depth")
        if size is not None and depth is not None and size >= depth:
            raise refusal(f"is not less than the seat's depth, {format_length(depth, values.units_of(info))}")
        return size


class DSeat(_DeepSeat):
    """One flat edge, two sides straight for `straight` mm, and a curve; the `flat` edge is at the front or the back."""

    shape: Literal["d"]
    straight: Within | None = None
    flat: Literal["front", "back"] = "front"
    corner_radius: Within = 0.0


class ShieldSeat(_DeepSeat):
    """`width` at the front, `back_width` at the back, the front edge bowed forward by `front_bow`; mm."""

    shape: Literal["shield"]
    back_width: SeatSize
    front_bow: Within | None = None
    corner_radius: Within = 0.0


class PolygonSeat(SeatBase):
    """Corners in mm in plan, in order, rounded to `corner_radius` mm."""

    shape: Literal["polygon"]
    points: Annotated[tuple[Pair, ...], BeforeValidator(values.points)]
    corner_radius: Within = 0.0


class PathSeat(SeatBase):
    """An outline as SVG path data in the file's units, in plan: y runs to the back, not down as in SVG."""

    shape: Literal["path"]
    path: str
    _unit_mm: float = PrivateAttr(default=1.0)

    @field_validator("path")
    @classmethod
    def _sane(cls, path: str) -> str:
        if not path.strip() or len(path) > LONGEST_PATH:
            raise refusal(f"is not path data of 1 to {LONGEST_PATH} characters")
        return path

    def model_post_init(self, context: Any) -> None:
        """Keep the file's units, which the numbers of the path are in."""
        self._unit_mm = float(MM_PER_INCH) if (context or {}).get("units") == "in" else 1.0

    @property
    def unit_mm(self) -> float:
        """Millimetres in one unit of the path's numbers."""
        return self._unit_mm


class AnySeat(SeatBase):
    """What can be said of a seat whose shape is not known: all but its outline."""

    model_config = ConfigDict(extra="ignore", frozen=True, defer_build=True)


Seat = RoundSeat | OvalSeat | RectangleSeat | DSeat | ShieldSeat | PolygonSeat | PathSeat
