"""The spec file: its tables and keys as frozen models, every length in millimetres and every angle in degrees.

Owns the keys, their bounds and what a name may hold. Imports `problems`, `quantities`, `spec_text`, `spec_problems`;
no geometry. Whether the seat's outline and the legs can be built is for the modules that build them.

Plan coordinates: x to the right from the centre line, y from the front edge to the back.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from pathlib import Path
from typing import Annotated, Any, Literal, get_args

from pydantic import (
    BaseModel,
    BeforeValidator,
    ConfigDict,
    Field,
    PlainValidator,
    PrivateAttr,
    StrictBool,
    ValidationError,
    ValidationInfo,
    field_validator,
)

from jigs import spec_values as values
from jigs.problems import Problem, SpecError, shown
from jigs.quantities import MM_PER_INCH, Units, format_length
from jigs.spec_problems import MOST_PROBLEMS, FileOrder, Keys, Loc, missing, place, problems_of, refusal
from jigs.spec_text import document, read_file

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
MOST_LEGS = 64
LONGEST_PATH = 20_000
# A mortise nearer to the centre line than this is on it.
ON_CENTRE_LINE_MM = 1e-6
# Two ways of writing a round seat's diameter agree when they are this close.
SAME_DIAMETER_MM = 0.01

unprintable = values.unprintable

Name = Annotated[str, BeforeValidator(values.name_text)]
SeatSize = Annotated[float, values.length(SEAT_SIZE_MM)]
Within = Annotated[float, values.length((0.0, SEAT_SIZE_MM[1]))]
Coordinate = Annotated[float, values.length(COORDINATE_MM)]
Pair = Annotated[tuple[Coordinate, Coordinate], BeforeValidator(values.pair)]
Bit = Annotated[float, values.length(BIT_MM)]
Diameter = Annotated[float, values.length(LEG_DIAMETER_MM)]
Lean = Annotated[float, values.angle(LEAN_DEG)]
Grain = Literal["fore-and-aft", "across"] | float


class _Table(BaseModel):
    """A table of the file: only the keys that it knows, and never changed once read."""

    model_config = ConfigDict(extra="forbid", frozen=True)


class SeatBase(_Table):
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


Seat = RoundSeat | OvalSeat | RectangleSeat | DSeat | ShieldSeat | PolygonSeat | PathSeat


class Mortise(_Table):
    """A hole for a leg: `bit` in mm across, opening by `taper` degrees (included angle) to `mouth` mm at its wide end.

    `depth` in mm runs along the axis from the drilled face; None is through.
    """

    bit: Bit
    taper: Annotated[float, values.angle(TAPER_DEG)] = 0.0
    mouth: Diameter | None = None
    depth: Annotated[float, values.length(MORTISE_DEPTH_MM)] | None = None

    @field_validator("mouth")
    @classmethod
    def _wider(cls, mouth: float | None, info: ValidationInfo) -> float | None:
        if mouth is None:
            return None
        if info.data.get("taper") == 0.0:
            raise refusal("is given without a taper", "give the taper, or leave the mouth out")
        bit = info.data.get("bit", mouth)
        if mouth < bit:
            raise refusal(f"is less than the bit's diameter, {format_length(bit, values.units_of(info))}")
        return mouth


class LegSpec(_Table):
    """One leg or, with `mirror`, one and its twin. Lengths in mm; `splay` and `rake` in degrees, positive outward.

    `at` is the mortise's centre in plan on the drilled face, `diameter` the leg's at the seat.
    """

    name: Name
    at: Pair
    mirror: StrictBool = False
    splay: Lean = Field(default=None, validate_default=True)
    rake: Lean
    end: Literal["front", "back"] | None = None
    mortise: Mortise
    diameter: Diameter = Field(default=None, validate_default=True)
    foot_diameter: Diameter = Field(default=None, validate_default=True)

    @property
    def names(self) -> tuple[str, ...]:
        """The names of the legs that this table makes: the left twin's first."""
        return _twins(self.name, self.mirror)

    @field_validator("mirror")
    @classmethod
    def _has_a_side(cls, mirror: bool, info: ValidationInfo) -> bool:
        if mirror and "at" in info.data and _on_centre_line(info.data["at"]):
            raise refusal("is for a leg to one side, and this one is on the centre line", "leave mirror out")
        return mirror

    @field_validator("splay", mode="wrap")
    @classmethod
    def _splay(cls, value: object, read: Callable[[object], float], info: ValidationInfo) -> float:
        """Needed, but for a leg on the centre line, which has no side to lean to."""
        central = "at" in info.data and _on_centre_line(info.data["at"])
        if value is None:
            if central or "at" not in info.data:
                return 0.0
            raise missing(("legs", "splay"))
        splay = read(value)
        if central and splay != 0.0:
            rule = "is given for a leg on the centre line, which has no side to lean to"
            raise refusal(rule, "leave splay out, or move the leg to one side")
        return splay

    @field_validator("mortise", mode="before")
    @classmethod
    def _bit_alone(cls, value: object) -> object:
        return value if isinstance(value, dict | Mortise) else {"bit": value}

    @field_validator("diameter", "foot_diameter", mode="wrap")
    @classmethod
    def _as_the_mortise(cls, value: object, read: Callable[[object], float], info: ValidationInfo) -> float:
        """Left out, a leg fills its mortise and its foot is as thick; both are bounded by what they are taken from."""
        if value is not None:
            return read(value)
        mortise = info.data.get("mortise")
        filled = 0.0 if mortise is None else mortise.mouth or mortise.bit
        return float(info.data.get("diameter", filled))


def _on_centre_line(at: tuple[float, float]) -> bool:
    return abs(at[0]) <= ON_CENTRE_LINE_MM


def _twins(name: str, mirror: bool) -> tuple[str, ...]:
    return (f"{name} left", f"{name} right") if mirror else (name,)


def _legs(value: object) -> object:
    if isinstance(value, dict):
        raise refusal("is not a list of tables", "write [[legs]], in double brackets, above each leg")
    if isinstance(value, list) and not 1 <= len(value) <= MOST_LEGS:
        raise refusal(f"are not the 1 to {MOST_LEGS} that a file may hold", given=f"{len(value)} tables")
    return value


class Furniture(_Table):
    """A whole spec. `units` are those that the file was written in; the models are in mm all the same."""

    name: Name
    units: Units = "mm"
    use: Literal["dining", "counter", "bar", "low", "table"] | None = None
    seat: Annotated[Seat, Field(discriminator="shape")]
    legs: Annotated[tuple[LegSpec, ...], BeforeValidator(_legs)]

    @property
    def unit_mm(self) -> float:
        """Millimetres in one of the file's units."""
        return float(MM_PER_INCH) if self.units == "in" else 1.0


def _keys() -> Keys:
    seats = {f"seat.{get_args(seat.model_fields['shape'].annotation)[0]}": seat for seat in get_args(Seat)}
    tables = {"": Furniture, **seats, "legs": LegSpec, "legs.mortise": Mortise}
    return {table: ["shape", *keys] if table in seats else keys for table, keys in _fields(tables).items()}


def _fields(tables: Mapping[str, type[BaseModel]]) -> dict[str, list[str]]:
    return {table: [key for key in model.model_fields if key != "shape"] for table, model in tables.items()}


def leg_place(index: int) -> str:
    """Where the spec's leg with this index stands in the file: `legs[0]`."""
    return place(("legs", index))


def read_spec(path: Path) -> Furniture:
    """The furniture that a file describes. Raises SpecError, and nothing else, for any file."""
    return parse_spec(read_file(path), str(path))


def parse_spec(data: bytes, source: str) -> Furniture:
    """The furniture that a file's bytes describe; `source` names the file in messages. Raises only SpecError."""
    tree = document(data, source)
    units = tree.get("units", "mm")
    known_units = units in ("mm", "in")
    names = _names_taken(tree)
    try:
        furniture = Furniture.model_validate(tree, context={"units": units if known_units else "mm"})
    except ValidationError as error:
        # Without units no length is too long or too short.
        errors = [e for e in error.errors(include_url=False) if known_units or e["type"] != "length_bounds"]
        found = [*problems_of(errors, tree, _keys()), *names]
        raise SpecError(source, _first(found, tree, len(errors) + len(names))) from None
    if names:
        raise SpecError(source, _first(names, tree, len(names)))
    return furniture


def _first(found: list[tuple[Loc, Problem]], tree: dict[str, object], count: int) -> tuple[Problem, ...]:
    """The first problems in the file's order, and how many more there are."""
    order = FileOrder(tree)
    problems = [problem for _, problem in sorted(found, key=lambda pair: order.rank(pair[0]))][:MOST_PROBLEMS]
    more = [Problem("", "", f"and {count - MOST_PROBLEMS} more")] if count > MOST_PROBLEMS else []
    return (*problems, *more)


def _names_taken(tree: dict[str, object]) -> list[tuple[Loc, Problem]]:
    """Legs whose names an earlier leg has; looked for in the file itself, so that other problems do not hide them."""
    legs = tree.get("legs")
    owners: dict[str, tuple[int, str]] = {}
    found: list[tuple[Loc, Problem]] = []
    for index, leg in enumerate(legs[:MOST_LEGS] if isinstance(legs, list) else []):
        names = _names_in(leg)
        for name in names:
            owner, owned_as = owners.setdefault(name, (index, "a twin of " if len(names) > 1 else ""))
            if owner != index:
                loc = ("legs", index, "name")
                rule = f"is already the name of {owned_as}{leg_place(owner)}"
                found.append((loc, Problem(place(loc), shown(name), rule, "give each leg a name of its own")))
                break
    return found


def _names_in(leg: object) -> tuple[str, ...]:
    if not isinstance(leg, dict):
        return ()
    try:
        return _twins(values.name_text(leg.get("name")), leg.get("mirror") is True)
    except ValueError:
        return ()
