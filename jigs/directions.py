"""Which way each leg leans, from whatever its table says: two angles, any two knowns, a picture, a chair, a point.

Owns the reading of a leg's table into one direction, and what a maker is told of it. Imports `solve`, `starts`,
`pictures`, `legs`, the spec's models; no sheets.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import TYPE_CHECKING, NamedTuple

from jigs.frames import SeatFrame, Vector
from jigs.knowns import MOST_LEAN_DEG, CannotSolve
from jigs.legs import direction_of, lean_of
from jigs.quantities import Units
from jigs.seats import Blank
from jigs.spec_base import ON_CENTRE_LINE_MM
from jigs.spec_legs import START_KEYS, LegSpec, Picture, PostSpec
from layout.geometry import Point

if TYPE_CHECKING:
    from jigs.known_curves import Stance

# Knowns that a table may give, by the keys that name them.
_ANGLES = ("splay", "rake", "resultant", "sightline")
# A post's mirror image below the seat hangs over no floor: it is known by its angles alone.
_NO_FLOOR_MM = 1e5
_LENGTHS = ("foot_across", "foot_along", "inside_side", "inside_end", "axis")


class Place(NamedTuple):
    """Where one part stands: its mortise's centre on the drilled face, its side and end as for `legs`."""

    at_mm: Point
    side: int
    end: int


@dataclass(frozen=True)
class Seating:
    """The seat as a leg meets it."""

    frame: SeatFrame
    thickness_mm: float
    drilled_from_top: bool
    blank: Blank
    units: Units


class Direction(NamedTuple):
    """A direction (x, y, -1) in the floor frame, and a sentence for the maker where there is something to say."""

    vector: Vector
    note: str = ""


def leg_direction(
    spec: LegSpec,
    place: Place,
    seating: Seating,
    neighbours: tuple[Point, Point] | None = None,
    foot_mm: float | None = None,
) -> Direction:
    """The direction of one leg from mortise to foot; `neighbours` are the feet that `equal_from` names, `foot_mm` the
    foot's diameter where it is not the table's.

    Raises CannotSolve, with what would do, for too little, too much, or what no leg has.
    """
    starts = [key for key in START_KEYS if getattr(spec, key) is not None]
    knowns = _knowns(spec, place.side)
    if starts:
        _alone(starts, knowns, spec)
        return _leaning_no_more(_started(spec, place, seating), place, seating)
    if set(knowns) == {"splay", "rake"} and spec.angles_from == "plumb" and neighbours is None:
        return Direction(direction_of(knowns["splay"], knowns["rake"], place.side, place.end))
    foot = spec.foot_diameter if foot_mm is None else foot_mm
    return _solved(knowns, place, seating, spec.angles_from == "seat", foot, neighbours)


def post_direction(spec: PostSpec, place: Place, seating: Seating) -> Direction:
    """The direction of one post as that of its mirror image below the seat: (x, y, -1) for a post along (x, y, +1)."""
    mirrored = Seating(
        SeatFrame(-seating.frame.pitch_deg, _NO_FLOOR_MM),
        seating.thickness_mm,
        True,
        seating.blank,
        seating.units,
    )
    knowns = {key: value for key in _ANGLES if (value := getattr(spec, key)) is not None}
    if place.side == 0:
        knowns.pop("splay", None)
    _enough_of_a_post(knowns, place)
    if set(knowns) == {"splay", "rake"} and spec.angles_from == "plumb":
        return Direction(direction_of(knowns["splay"], knowns["rake"], place.side, place.end))
    return _solved(knowns, place, mirrored, spec.angles_from == "seat", spec.end_diameter, None)


def _enough_of_a_post(knowns: Mapping[str, float], place: Place) -> None:
    """Raises CannotSolve for too little, in terms of what a post is known by."""
    if place.side == 0:
        if "sightline" in knowns:
            rule = "a post on the centre line leans to neither side, so sightline says nothing of it"
            raise CannotSolve(rule, "leave it out and give one of rake or resultant")
        if not knowns:
            raise CannotSolve("nothing says how far the post on the centre line leans", "give one of rake or resultant")
    elif len(knowns) < 2:
        said = f"{next(iter(knowns))} alone does not say" if knowns else "nothing says"
        raise CannotSolve(f"{said} how the post leans", f"give two of {', '.join(_ANGLES)}")


def _knowns(spec: LegSpec, side: int) -> dict[str, float]:
    found = {key: value for key in (*_ANGLES, *_LENGTHS) if (value := getattr(spec, key)) is not None}
    if side == 0 and found.get("splay") == 0.0:
        # A leg on the centre line has its splay of 0 from its place; with a rake that is two.
        return found if "rake" in found and len(found) == 2 else {k: v for k, v in found.items() if k != "splay"}
    return found


def _alone(starts: list[str], knowns: Mapping[str, float], spec: LegSpec) -> None:
    others = [*starts[1:], *(key for key in knowns if not (key == "splay" and knowns[key] == 0.0))]
    others += ["equal_from"] if spec.equal_from is not None else []
    if not others and spec.angles_from == "seat":
        raise CannotSolve(f"angles_from says nothing of a leg that is given by its {starts[0]}", "leave it out")
    if others:
        given = " and ".join([starts[0], others[0]])
        raise CannotSolve(f"{given} both say how the leg leans", f"keep {starts[0]} alone, or leave it out")


def _started(spec: LegSpec, place: Place, seating: Seating) -> Direction:
    from jigs.starts import aim, from_copy  # noqa: PLC0415 - most chairs start from angles

    if spec.picture is not None:
        return _from_picture(spec.picture, place, spec.at[0], seating.units)
    if spec.measured is not None:
        m = spec.measured
        splay, rake = from_copy(m.heights, m.across, m.along, place.side, place.end, seating.units)
        return Direction(direction_of(splay, rake, place.side, place.end))
    assert spec.aim_at is not None  # one of the three starts is given
    x, y, z = spec.aim_at
    if place.side == 0 and abs(x) > ON_CENTRE_LINE_MM:
        rule = "the point aimed at is off the centre line, and the leg on it would lean sideways"
        raise CannotSolve(rule, "aim at a point with x = 0, or move the mortise")
    # A twin aims at the twin of the point.
    point = (-x if spec.mirror and place.at_mm[0] * spec.at[0] < 0.0 else x, y, z)
    return Direction(aim(point, _stance(place, seating, spec.foot_diameter).mortise, seating.units))


def _leaning_no_more(direction: Direction, place: Place, seating: Seating) -> Direction:
    """The direction, as long as it leans no more than a leg that is solved for, from plumb and from square to the
    seat.
    """
    for vector in (direction.vector, seating.frame.turn_to_seat(direction.vector)):
        lean = lean_of(vector, place.side, place.end).resultant_deg if vector[2] < 0.0 else 90.0
        if lean > MOST_LEAN_DEG:
            rule = f"the leg would lean {lean:.1f}°, and {MOST_LEAN_DEG:g}° is the most"
            raise CannotSolve(rule, "look at the figures again")
    return direction


def _from_picture(picture: Picture, place: Place, pictured_x_mm: float, units: Units) -> Direction:
    from jigs.pictures import Sight, from_picture  # noqa: PLC0415 - most chairs start from angles

    def sight(table: object) -> Sight | None:
        if table is None:
            return None
        data = table.model_dump()  # type: ignore[attr-defined]
        return Sight(data["level"], data["leg"], data["known"], data["known_length"])

    side_view = sight(picture.side)
    assert side_view is not None  # the table must have one
    # The front picture shows the leg that stands where the table says; its twin is the mirror image.
    pictured = abs(place.side) if pictured_x_mm > 0.0 else -abs(place.side)
    front, taken_from, pointing = sight(picture.front), picture.taken_from, picture.pointing
    lean = from_picture(front, side_view, pictured, place.end, taken_from, pointing, units)
    return Direction(direction_of(lean.splay_deg, lean.rake_deg, place.side, place.end), lean.note)


def _solved(
    knowns: Mapping[str, float],
    place: Place,
    seating: Seating,
    from_seat: bool,
    foot_mm: float,
    neighbours: tuple[Point, Point] | None,
) -> Direction:
    from jigs.solve import solve  # noqa: PLC0415 - most chairs give splay and rake, which need no solving

    stance = _stance(place, seating, foot_mm)
    found = solve(stance, knowns, from_seat, seating.blank, neighbours, seating.units)
    return Direction(found.direction, found.note)


def _stance(place: Place, seating: Seating, foot_mm: float) -> Stance:
    from jigs.known_curves import Stance  # noqa: PLC0415 - as above

    return Stance(
        place.at_mm,
        seating.frame,
        seating.thickness_mm,
        seating.drilled_from_top,
        place.side,
        place.end,
        foot_mm,
    )
