"""The tables of what is bored into the seat: legs, rings of legs, posts, rows of spindles, and their mortises.

Owns their keys and what each must have; what follows from them is for the modules that build them. Lengths come out in
millimetres, angles in degrees. Imports `spec_base`, `spec_values`, `spec_problems`; no geometry.
"""

from __future__ import annotations

from collections.abc import Callable
from typing import Annotated, Literal

from pydantic import Field, StrictBool, ValidationInfo, field_validator

from jigs import spec_values as values
from jigs.quantities import format_length
from jigs.spec_base import (
    BEARING_DEG,
    MORTISE_DEPTH_MM,
    ON_CENTRE_LINE_MM,
    PIXELS,
    POINTING_PX,
    RESULTANT_DEG,
    ROW_COUNT,
    SIGHTLINE_DEG,
    TAPER_DEG,
    Bit,
    Coordinate,
    Diameter,
    Lean,
    Name,
    Pair,
    SeatSize,
    Table,
    Triple,
    Within,
)
from jigs.spec_problems import missing, refusal

# What says how a leg leans besides splay and rake: any two knowns of a leg settle it, or one of these starts does.
KNOWN_KEYS = (
    "resultant",
    "sightline",
    "foot_across",
    "foot_along",
    "inside_side",
    "inside_end",
    "axis",
    "equal_from",
)
START_KEYS = ("picture", "measured", "aim_at")

PixelLength = Annotated[float, values.number(PIXELS)]
Pixel = Annotated[tuple[PixelLength, PixelLength], values.two("a point in pixels", "[x, y], such as [402, 311]")]
PixelLine = Annotated[tuple[Pixel, Pixel], values.two("a pair of points", "[[x, y], [x, y]] in pixels")]
TwoNames = Annotated[tuple[Name, Name], values.two("a pair of names", '["front left", "back left"]')]
Share = Annotated[float, values.number((0.0, 1.0))]
Resultant = Annotated[float, values.angle(RESULTANT_DEG)]


class Mortise(Table):
    """A hole for a leg: `bit` in mm across, opening by `taper` degrees (included angle) to `mouth` mm at its wide end.

    `depth` in mm runs along the axis from the face that the bit enters; None is through.
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


class Sight(Table):
    """What was pointed at in one picture, in pixels: two points each, and a length that is known between two points."""

    level: PixelLine
    leg: PixelLine
    known: PixelLine | None = None
    known_length: SeatSize | None = Field(default=None, validate_default=True)

    @field_validator("known_length")
    @classmethod
    def _with_its_ends(cls, length: float | None, info: ValidationInfo) -> float | None:
        if "known" in info.data and (info.data["known"] is None) != (length is None):
            cure = "give both, or leave both out"
            if length is None:
                raise refusal("known says between which two points, and not how far apart they are", cure, given="")
            raise refusal("is given without known, the two points that are so far apart", cure)
        return length


class Picture(Table):
    """A front and a side picture of a chair; `pointing` is how well a point is pointed at, in pixels."""

    front: Sight | None = None
    side: Sight
    taken_from: Literal["right", "left"] = "right"
    pointing: Annotated[float, values.number(POINTING_PX)] = 2.0


class Measured(Table):
    """A standing chair's leg at two heights: its middle from plumb lines at the centre and at the front edge, mm."""

    heights: Pair
    across: Pair
    along: Pair


class _InMortise(Table):
    """What fills a mortise: the hole may be given as its bit alone, and thicknesses left out are taken from it."""

    @field_validator("mortise", mode="before", check_fields=False)
    @classmethod
    def _bit_alone(cls, value: object) -> object:
        return value if isinstance(value, dict | Mortise) else {"bit": value}

    @field_validator("diameter", "foot_diameter", "end_diameter", mode="wrap", check_fields=False)
    @classmethod
    def _as_the_mortise(cls, value: object, read: Callable[[object], float], info: ValidationInfo) -> float:
        """Left out, a part fills its mortise and its end is as thick; both are bounded by what they are taken from."""
        mortise = info.data.get("mortise")
        if value is not None:
            given = read(value)
            if info.field_name == "diameter" and mortise is not None and given < mortise.bit:
                bit = format_length(mortise.bit, values.units_of(info))
                raise refusal(f"is less than the bit of {bit}, and would not fill the mortise")
            return given
        filled = 0.0 if mortise is None else mortise.mouth or mortise.bit
        return float(info.data.get("diameter", filled))


class _Bored(_InMortise):
    """What every table has that makes one bored part, or with `mirror` one and its twin; mm and degrees."""

    name: Name
    at: Pair
    mirror: StrictBool = False
    resultant: Resultant | None = None
    sightline: Annotated[float, values.angle(SIGHTLINE_DEG)] | None = None

    @property
    def names(self) -> tuple[str, ...]:
        """The names of the parts that this table makes: the left twin's first."""
        return twins(self.name, self.mirror)

    @field_validator("mirror")
    @classmethod
    def _has_a_side(cls, mirror: bool, info: ValidationInfo) -> bool:
        if mirror and "at" in info.data and on_centre_line(info.data["at"]):
            raise refusal("is for a leg to one side, and this one is on the centre line", "leave mirror out")
        return mirror

    @field_validator("splay", mode="wrap", check_fields=False)
    @classmethod
    def _splay(cls, value: object, read: Callable[[object], float], info: ValidationInfo) -> float | None:
        """Needed where nothing else says how the part leans, but for one on the centre line, which has no side."""
        central = "at" in info.data and on_centre_line(info.data["at"])
        if value is None:
            if central:
                return 0.0
            if "at" in info.data and not cls._otherwise_known(info):
                raise missing(("legs", "splay"))
            return None
        splay = read(value)
        if central and splay != 0.0:
            rule = "is given for a leg on the centre line, which has no side to lean to"
            raise refusal(rule, "leave splay out, or move the leg to one side")
        return splay

    @field_validator("rake", mode="wrap", check_fields=False)
    @classmethod
    def _rake(cls, value: object, read: Callable[[object], float], info: ValidationInfo) -> float | None:
        if value is None and not cls._otherwise_known(info):
            raise missing(("legs", "rake"))
        return None if value is None else read(value)

    @classmethod
    def _otherwise_known(cls, info: ValidationInfo) -> bool:
        """Whether something besides splay and rake says how the part leans, so that neither need be given."""
        keys = [key for key in (*KNOWN_KEYS, *START_KEYS) if key in cls.model_fields]
        return any(_given(info, key) for key in keys)


class LegSpec(_Bored):
    """One leg or, with `mirror`, one and its twin. Lengths in mm; angles in degrees, positive outward.

    `at` is the mortise's centre in plan on the drilled face, `diameter` the leg's at the seat. How it leans is said by
    any two knowns of `solve`, with `equal_from` two legs from whose feet its own is equally far, or by one of
    `picture`, `measured` and `aim_at` (a point of the floor frame). `face_fall` degrees toward `face_toward` (a bearing
    in plan) is how the face is dished or wedged where the bit enters.
    """

    foot_across: Coordinate | None = None
    foot_along: Coordinate | None = None
    inside_side: Coordinate | None = None
    inside_end: Coordinate | None = None
    axis: SeatSize | None = None
    equal_from: TwoNames | None = None
    picture: Picture | None = None
    measured: Measured | None = None
    aim_at: Triple | None = None
    angles_from: Literal["plumb", "seat"] = "plumb"
    splay: Lean | None = Field(default=None, validate_default=True)
    rake: Lean | None = Field(default=None, validate_default=True)
    end: Literal["front", "back"] | None = None
    face_fall: Annotated[float, values.angle((0.0, 30.0))] = 0.0
    face_toward: Annotated[float, values.angle(BEARING_DEG)] = 0.0
    mortise: Mortise
    diameter: Diameter = Field(default=None, validate_default=True)
    foot_diameter: Diameter = Field(default=None, validate_default=True)

    @field_validator("face_toward")
    @classmethod
    def _falls(cls, toward: float, info: ValidationInfo) -> float:
        if info.data.get("face_fall") == 0.0:
            raise refusal("says where a face falls to that does not fall", "give face_fall, or leave face_toward out")
        return toward


class RingSpec(_InMortise):
    """`count` legs evenly round a pitch circle, each leaning straight out by `resultant` from square to the seat.

    `circle` is the circle's diameter; in place of the resultant the diameter of the feet's circle may be given. `first`
    is the bearing of the first leg; left out, a pair stands at the front.
    """

    name: Name
    count: Annotated[int, values.count((3, 64))]
    circle: SeatSize
    centre: Pair | None = None
    feet_circle: SeatSize | None = None
    resultant: Lean | None = Field(default=None, validate_default=True)
    first: Annotated[float, values.angle(BEARING_DEG)] | None = None
    mortise: Mortise
    diameter: Diameter = Field(default=None, validate_default=True)
    foot_diameter: Diameter = Field(default=None, validate_default=True)

    @field_validator("resultant", mode="wrap")
    @classmethod
    def _one_of_two(cls, value: object, read: Callable[[object], float], info: ValidationInfo) -> float | None:
        if (value is None) != _given(info, "feet_circle"):
            raise refusal("one of resultant and feet_circle is needed, not both", given="")
        return None if value is None else read(value)


class PostSpec(_Bored):
    """One post above the seat or, with `mirror`, one and its twin; bored from the top, leaning out as it rises.

    Splay and rake are positive outward and backward (forward for one at the front); `length` is along the axis from the
    top face to the upper end, `end_diameter` the post's there.
    """

    angles_from: Literal["plumb", "seat"] = "plumb"
    splay: Lean | None = Field(default=None, validate_default=True)
    rake: Lean | None = Field(default=None, validate_default=True)
    end: Literal["front", "back"] | None = None
    length: SeatSize
    mortise: Mortise
    diameter: Diameter = Field(default=None, validate_default=True)
    end_diameter: Diameter = Field(default=None, validate_default=True)


class Row(Table):
    """Places along a line or arc in plan, mm: `width` from first to last, the middle `back` from the front edge.

    The ends lie `bow` in front of the middle; 0 is straight.
    """

    width: Within
    back: Coordinate
    bow: Coordinate = 0.0


class Crest(Row):
    """The row of upper ends, plumb `height` above the top face at the deck's middle; in floor-frame plan."""

    height: SeatSize


class SpindleSpec(_InMortise):
    """`count` spindles evenly along `deck` on the top face, each aimed at its own point of `crest`; left to right."""

    name: Name
    count: Annotated[int, values.count(ROW_COUNT)]
    deck: Row
    crest: Crest
    mortise: Mortise
    diameter: Diameter = Field(default=None, validate_default=True)
    end_diameter: Diameter = Field(default=None, validate_default=True)


class StretcherTable(Table):
    """A stretcher between two legs, or between stretchers; how high by `height`, `heights` or `fractions`.

    `tenon` is each tenon's length beyond the shoulder.
    """

    name: Name
    between: TwoNames
    height: SeatSize | None = None
    heights: Annotated[tuple[SeatSize, SeatSize], values.PAIR] | None = None
    fractions: Annotated[tuple[Share, Share], values.two("a pair of numbers", "[0.5, 0.5]")] | None = Field(
        default=None, validate_default=True
    )
    diameter: Diameter
    tenon: Within = 20.0
    tenon_diameter: Diameter | None = None

    @field_validator("fractions")
    @classmethod
    def _one_way(cls, fractions: tuple[float, float] | None, info: ValidationInfo) -> tuple[float, float] | None:
        given = [name for name in ("height", "heights") if _given(info, name)]
        if len(given) + (fractions is not None) != 1:
            raise refusal("one of height, heights and fractions is needed, and only one", given="")
        return fractions


class WoodTable(Table):
    """The wood by species, for weights and the cut list; None where it is not said."""

    seat: Name | None = None
    legs: Name | None = None

    @field_validator("seat", "legs")
    @classmethod
    def _known_species(cls, name: str | None) -> str | None:
        from jigs.wood import UnknownSpeciesError, species_name  # noqa: PLC0415 - only a file that names its wood

        try:
            return None if name is None else species_name(name)
        except UnknownSpeciesError as error:
            raise refusal(error.rule, error.cure) from None


def on_centre_line(at: tuple[float, float]) -> bool:
    """Whether a place in plan is on the centre line."""
    return abs(at[0]) <= ON_CENTRE_LINE_MM


def twins(name: str, mirror: bool) -> tuple[str, ...]:
    """The names of what a table makes."""
    return (f"{name} left", f"{name} right") if mirror else (name,)


def _given(info: ValidationInfo, key: str) -> bool:
    """Whether an earlier key of the table is given, even if wrongly: what is wrong with it is said where it stands."""
    return key not in info.data or info.data[key] is not None
