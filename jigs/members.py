"""Every part that is bored into the seat, worked out: legs, rings of legs, posts and rows of spindles.

Owns the way from their tables to `Leg`s, twins left first. What cannot be is collected as problems with their places.
Imports `directions`, `legs`, `bores`, `rows`, the spec's models; no sheets.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator, Mapping
from dataclasses import replace

from jigs.bores import mouth_mm
from jigs.directions import Direction, Place, Seating, leg_direction, post_direction
from jigs.knowns import MOST_LEAN_DEG, CannotSolve
from jigs.legs import Axis, AxisRun, Face, Kind, Leg, follow, follow_up, on_local_face
from jigs.problems import Caution, Problem
from jigs.spec import ON_CENTRE_LINE_MM, Furniture
from jigs.spec_base import ON_MIDDLE_MM
from jigs.spec_legs import LegSpec, Mortise, PostSpec, RingSpec, SpindleSpec
from layout.geometry import Point

# Slopes that differ by less are one: the solver's own rounding is a thousandth of it.
SAME_SLOPES = 1e-10
# A foot's thickness is found when it changes by no more than this; each round brings it a hundred times nearer.
SAME_FOOT_MM, MOST_ROUNDS = 1e-10, 20
_OTHER_SIDE = {"left": "right", "right": "left"}

_Drawn = Callable[[Place, str], Leg]


class Members:
    """The parts of a piece of furniture as they are worked out, with what is wrong and what is to be said of them."""

    def __init__(self, furniture: Furniture, seating: Seating) -> None:
        self.furniture, self.seating = furniture, seating
        self.problems: list[Problem] = []
        self.notes: list[Caution] = []

    def legs(self) -> tuple[Leg, ...]:
        """All legs: those of [[legs]] in their order, then those of [[rings]]."""
        specs = list(enumerate(self.furniture.legs))
        found: dict[int, list[Leg]] = {}
        for waiting in (False, True):
            feet = {leg.name: leg.foot_mm for legs in found.values() for leg in legs}
            for index, spec in specs:
                if (spec.equal_from is not None) == waiting:
                    found[index] = list(self._legs_of(index, spec, feet))
        made = [leg for index, _ in specs for leg in found[index]]
        return (*made, *(leg for index, ring in enumerate(self.furniture.rings) for leg in self._ring(index, ring)))

    def posts(self) -> tuple[Leg, ...]:
        """All posts."""
        return tuple(
            leg for index, spec in enumerate(self.furniture.posts) for leg in self._posts_of(f"posts[{index}]", spec)
        )

    def spindles(self) -> tuple[Leg, ...]:
        """All spindles, each row from left to right."""
        return tuple(
            leg for index, spec in enumerate(self.furniture.spindles) for leg in self._row(f"spindles[{index}]", spec)
        )

    # Legs

    def _legs_of(self, index: int, spec: LegSpec, feet: Mapping[str, Point]) -> Iterator[Leg]:
        place = f"legs[{index}]"
        if not self._knows_neighbours(place, spec, feet):
            return

        drawn: list[Direction] = []

        def draw(where: Place, name: str) -> Leg:
            neighbours = _neighbours(spec, where, feet)
            direction, leg = self._settled(spec, place, name, where, neighbours)
            if drawn and (twin := _as_twin_of(drawn[0], direction)) is not direction:
                direction, leg = twin, self._leg(spec, place, name, where, twin)
            drawn.append(direction)
            self._note(place, direction, name, "picture" if spec.picture is not None else "two-ways")
            return leg

        yield from self._twins(place, spec, draw)

    def _settled(
        self, spec: LegSpec, place: str, name: str, where: Place, neighbours: tuple[Point, Point] | None
    ) -> tuple[Direction, Leg]:
        """A leg and its direction. A foot whose thickness is not said is as thick as the mortise's mouth, which depends
        a little on the lean: the two are brought together.
        """
        foot_mm = spec.foot_diameter
        for _ in range(MOST_ROUNDS):
            direction = leg_direction(spec, where, self.seating, neighbours, foot_mm)
            leg = self._leg(spec, place, name, where, direction)
            if abs(leg.foot_diameter_mm - foot_mm) <= SAME_FOOT_MM:
                break
            foot_mm = leg.foot_diameter_mm
        return direction, leg

    def _knows_neighbours(self, place: str, spec: LegSpec, feet: Mapping[str, Point]) -> bool:
        if spec.equal_from is None:
            return True
        unknown = [name for name in spec.equal_from if name not in feet]
        if unknown:
            cure = f"name two of {', '.join(feet) or 'the legs that stand without it'}"
            rule = "is no leg whose foot is known without this one"
            self.problems.append(Problem(f"{place}.equal_from", unknown[0], rule, cure))
        return not unknown

    def _twins(self, place: str, spec: LegSpec | PostSpec, draw: _Drawn) -> Iterator[Leg]:
        end = self._end(spec)
        if end is None:
            rule = (
                "is not given, and the leg stands in the middle of the seat's depth: its rake could be forward or back"
            )
            self.problems.append(Problem(f"{place}.end", "", rule, 'say end = "front" or end = "back"'))
            return
        across = (-abs(spec.at[0]), abs(spec.at[0])) if spec.mirror else (spec.at[0],)
        for name, x in zip(spec.names, across, strict=True):
            try:
                yield draw(Place((x, spec.at[1]), _side(x), end), name)
            except CannotSolve as error:
                self.problems.append(Problem(place, "", error.rule, error.cure))
                return
            except ValueError as error:
                self.problems.append(Problem(place, name, str(error), "raise the seat or lessen the lean"))
                return

    def _end(self, spec: LegSpec | PostSpec) -> int | None:
        if spec.end is not None:
            return 1 if spec.end == "back" else -1
        middle = self.seating.blank.middle_y_mm
        if abs(spec.at[1] - middle) > ON_MIDDLE_MM:
            return 1 if spec.at[1] > middle else -1
        return 1 if spec.rake == 0.0 else None

    def _note(self, place: str, direction: Direction, name: str, code: str) -> None:
        if direction.note:
            self.notes.append(Caution(code, place, f"{name}: {direction.note}"))

    def _leg(self, spec: LegSpec, place: str, name: str, where: Place, direction: Direction) -> Leg:
        axis = Axis(where.at_mm, direction.vector, where.side, where.end)
        run = follow(axis, self.seating.frame, self.seating.thickness_mm, self.seating.drilled_from_top)
        leg = _member(place, name, where, run, spec.mortise, self._drilled(), "leg")
        leg = _filling(leg, spec.model_fields_set, spec.diameter, spec.foot_diameter, "foot_diameter")
        if not spec.face_fall:
            return leg
        # A twin's face is the mirror image: it falls toward the mirrored bearing.
        mirrored = spec.mirror and where.at_mm[0] * spec.at[0] < 0.0
        toward = 180.0 - spec.face_toward if mirrored else spec.face_toward
        return replace(leg, drill=on_local_face(run.toward_foot, spec.face_fall, toward, where.side, where.end))

    def _drilled(self) -> Face:
        return self.furniture.seat.drill_from

    def _ring(self, index: int, spec: RingSpec) -> Iterator[Leg]:
        from jigs.starts import ring, ring_resultant_deg  # noqa: PLC0415 - few seats have a ring

        place, seat = f"rings[{index}]", self.furniture.seat
        centre = spec.centre or (0.0, self.seating.blank.middle_y_mm)
        try:
            resultant = spec.resultant
            if resultant is None:
                assert spec.feet_circle is not None  # one of the two is given
                if seat.pitch:
                    raise CannotSolve("feet_circle is for a level seat", "give the resultant from square to the seat")
                resultant = ring_resultant_deg(
                    spec.circle,
                    spec.feet_circle,
                    seat.height,
                    seat.thickness,
                    self.seating.drilled_from_top,
                    self.seating.units,
                )
            for leg in ring(spec.count, spec.circle, centre, resultant, spec.first):
                x, y, z = self.seating.frame.turn_to_floor(leg.toward_foot)
                axis = Axis(leg.at_mm, (x / -z, y / -z, -1.0), leg.side, leg.end)
                run = follow(axis, self.seating.frame, seat.thickness, self.seating.drilled_from_top)
                where = Place(leg.at_mm, leg.side, leg.end)
                made = _member(place, f"{spec.name} {leg.name}", where, run, spec.mortise, self._drilled(), "leg")
                yield _filling(made, spec.model_fields_set, spec.diameter, spec.foot_diameter, "foot_diameter")
        except CannotSolve as error:
            self.problems.append(Problem(place, "", error.rule, error.cure))
        except ValueError as error:
            self.problems.append(Problem(place, spec.name, str(error), "raise the seat or lessen the lean"))

    # Above the seat

    def _posts_of(self, place: str, spec: PostSpec) -> Iterator[Leg]:
        def draw(where: Place, name: str) -> Leg:
            direction = post_direction(spec, where, self.seating)
            self._note(place, direction, name, "two-ways")
            axis = Axis(where.at_mm, direction.vector, where.side, where.end)
            run, z = follow_up(axis, self.seating.frame, self.seating.thickness_mm, spec.length)
            post = replace(_member(place, name, where, run, spec.mortise, "top", "post"), foot_z_mm=z)
            return _filling(post, spec.model_fields_set, spec.diameter, spec.end_diameter, "end_diameter")

        yield from self._twins(place, spec, draw)

    def _row(self, place: str, spec: SpindleSpec) -> Iterator[Leg]:
        from jigs.rows import rises, row_places  # noqa: PLC0415 - few seats have spindles

        frame = self.seating.frame
        try:
            deck, crest = (
                row_places(row.width, row.back, row.bow, spec.count, self.seating.units)
                for row in (spec.deck, spec.crest)
            )
        except CannotSolve as error:
            self.problems.append(Problem(place, "", error.rule, error.cure))
            return
        top = frame.to_floor((0.0, spec.deck.back, 0.0))[2] + spec.crest.height
        for number, (at, upper) in enumerate(zip(deck, crest, strict=True), 1):
            foot = frame.to_floor((*at, 0.0))
            rise = top - foot[2]
            reach = (upper[0] - foot[0], upper[1] - foot[1], rise)
            if rise <= 0.0 or not rises(frame.turn_to_seat(reach)):
                rule = f"would lean more than {MOST_LEAN_DEG:g} degrees from square to the seat"
                cure = "raise the crest, or bring it over the deck"
                self.problems.append(Problem(f"{place}.crest", f"{spec.name} {number}", rule, cure))
                return
            direction = (reach[0] / rise, reach[1] / rise, -1.0)
            where = Place(at, _side(at[0]), 1 if at[1] >= self.seating.blank.middle_y_mm else -1)
            length = math.dist(foot, (*upper, top))
            axis = Axis(at, direction, where.side, where.end)
            run, z = follow_up(axis, frame, self.seating.thickness_mm, length)
            made = _member(place, f"{spec.name} {number}", where, run, spec.mortise, "top", "spindle")
            made = replace(made, foot_z_mm=z)
            yield _filling(made, spec.model_fields_set, spec.diameter, spec.end_diameter, "end_diameter")


def _as_twin_of(first: Direction, second: Direction) -> Direction:
    """The second of two twins' directions; where rounding alone keeps it from mirroring the first, the mirror image."""
    x, y, z = first.vector
    image = (-x, y, z)
    return second._replace(vector=image) if math.dist(second.vector, image) <= SAME_SLOPES else second


def _neighbours(spec: LegSpec, where: Place, feet: Mapping[str, Point]) -> tuple[Point, Point] | None:
    """The feet that a leg's own is to be equally far from; for the twin of the leg that the table places, their
    twins'.
    """
    if spec.equal_from is None:
        return None
    mirrored = spec.mirror and where.at_mm[0] * spec.at[0] < 0.0
    one, other = (_twin_name(name, feet) if mirrored else name for name in spec.equal_from)
    return feet[one], feet[other]


def _twin_name(name: str, names: Mapping[str, Point]) -> str:
    """The same part on the other side; a part without a twin is its own."""
    stem, _, side = name.rpartition(" ")
    twin = f"{stem} {_OTHER_SIDE.get(side, side)}"
    return twin if twin in names else name


def _side(x: float) -> int:
    return 0 if abs(x) <= ON_CENTRE_LINE_MM else (1 if x > 0 else -1)


def _member(place: str, name: str, where: Place, run: AxisRun, mortise: Mortise, drilled: Face, kind: Kind) -> Leg:
    return Leg(
        name=name,
        place=place,
        side=where.side,
        end=where.end,
        floor=run.floor,
        seat=run.drill,
        drill=run.drill,
        toward_foot=run.toward_foot,
        top_mm=run.top_mm,
        underside_mm=run.underside_mm,
        foot_mm=run.foot_mm,
        axis_mm=run.axis_mm,
        in_seat_mm=run.in_seat_mm,
        mortise=mortise,
        diameter_mm=mortise.bit,
        foot_diameter_mm=mortise.bit,
        drilled=drilled,
        kind=kind,
    )


def _filling(leg: Leg, given: set[str], diameter_mm: float, end_mm: float, end_key: str) -> Leg:
    """A part whose diameters are not given fills its mortise where that is widest, and is as thick at its end."""
    diameter = diameter_mm if "diameter" in given else mouth_mm(leg)
    return replace(leg, diameter_mm=diameter, foot_diameter_mm=end_mm if end_key in given else diameter)
