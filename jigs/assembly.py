"""The whole piece of furniture with its axes worked out: spec in, legs with angles and points out, or all that is
wrong.

Owns the way from a spec to legs and the refusal of what cannot be built; what is merely unwise is `checks`'.
Imports the spec's models, `seats`, `legs`, `bores`, `frames`; no drawing of sheets.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from itertools import combinations
from typing import Literal

from jigs.bores import mouth_mm, sections, web_mm
from jigs.frames import SeatFrame
from jigs.legs import Axis, Leg, direction_of, follow
from jigs.problems import Problem, SpecError
from jigs.quantities import format_length
from jigs.seats import Blank, OutlineError, outline
from jigs.spec import ON_CENTRE_LINE_MM, Furniture, LegSpec, leg_place

Face = Literal["top", "underside"]

# A mortise this near to the middle of the seat's depth belongs to neither end.
ON_MIDDLE_MM = 1e-6


@dataclass(frozen=True, eq=False)
class Assembly:
    """A piece of furniture, its blank and its legs in the order of the spec, twins left first.

    Two are the same only where they are one, so that what is worked out of one can be kept.
    """

    furniture: Furniture
    blank: Blank
    frame: SeatFrame
    legs: tuple[Leg, ...]

    @property
    def drilled(self) -> Face:
        """The face that the bit enters."""
        return self.furniture.seat.drill_from

    @property
    def thickness_mm(self) -> float:
        """Of the seat."""
        return self.furniture.seat.thickness

    def length(self, mm: float) -> str:
        """A length as this maker writes it, in the spec's units."""
        return format_length(mm, self.furniture.units)


def other_face(face: Face) -> Face:
    """The face opposite."""
    return "underside" if face == "top" else "top"


def assemble(furniture: Furniture, source: str) -> Assembly:
    """The furniture with its legs worked out. Raises SpecError with every problem of the geometry at once."""
    frame = SeatFrame(furniture.seat.pitch, furniture.seat.height)
    try:
        blank = Blank(outline(furniture.seat, furniture.units))
    except OutlineError as error:
        raise SpecError(source, (Problem(error.field, error.given, error.rule, error.cure),)) from None
    problems: list[Problem] = []
    legs = [leg for leg in _legs(furniture, blank, frame, problems) if leg is not None]
    assembly = Assembly(furniture, blank, frame, tuple(legs))
    problems += [*_off_the_blank(assembly), *_blind_from_top(furniture), *_bores_that_meet(assembly)]
    if problems:
        raise SpecError(source, tuple(problems))
    return assembly


def _legs(furniture: Furniture, blank: Blank, frame: SeatFrame, problems: list[Problem]) -> Iterator[Leg | None]:
    for index, spec in enumerate(furniture.legs):
        end = _end(spec, blank.middle_y_mm)
        if end is None:
            problems.append(_no_end(index))
            continue
        places = (-abs(spec.at[0]), abs(spec.at[0])) if spec.mirror else (spec.at[0],)
        for name, x in zip(spec.names, places, strict=True):
            try:
                yield _leg(furniture, frame, index, spec, name, x, end)
            except ValueError as error:
                problems.append(Problem(leg_place(index), name, str(error), "raise the seat or lessen the lean"))
                break


def _end(spec: LegSpec, middle_y_mm: float) -> int | None:
    if spec.end is not None:
        return 1 if spec.end == "back" else -1
    if abs(spec.at[1] - middle_y_mm) > ON_MIDDLE_MM:
        return 1 if spec.at[1] > middle_y_mm else -1
    return 1 if spec.rake == 0.0 else None


def _no_end(index: int) -> Problem:
    rule = "is not given, and the leg stands in the middle of the seat's depth: its rake could be forward or back"
    return Problem(f"{leg_place(index)}.end", "", rule, 'say end = "front" or end = "back"')


def _leg(furniture: Furniture, frame: SeatFrame, index: int, spec: LegSpec, name: str, x: float, end: int) -> Leg:
    side = 0 if abs(x) <= ON_CENTRE_LINE_MM else (1 if x > 0 else -1)
    axis = Axis((x, spec.at[1]), direction_of(spec.splay, spec.rake, side, end), side, end)
    run = follow(axis, frame, furniture.seat.thickness, furniture.seat.drill_from == "top")
    leg = Leg(
        name=name,
        place=leg_place(index),
        side=side,
        end=end,
        floor=run.floor,
        drill=run.drill,
        toward_foot=run.toward_foot,
        top_mm=run.top_mm,
        underside_mm=run.underside_mm,
        foot_mm=run.foot_mm,
        axis_mm=run.axis_mm,
        in_seat_mm=run.in_seat_mm,
        mortise=spec.mortise,
        diameter_mm=spec.diameter,
        foot_diameter_mm=spec.foot_diameter,
    )
    return _filling(leg, spec.model_fields_set)


def _filling(leg: Leg, given: set[str]) -> Leg:
    """A leg whose diameters are not given fills its mortise where that is widest."""
    widest = mouth_mm(leg)
    diameter = leg.diameter_mm if "diameter" in given else widest
    foot = leg.foot_diameter_mm if "foot_diameter" in given else diameter
    return replace(leg, diameter_mm=diameter, foot_diameter_mm=foot)


def _off_the_blank(assembly: Assembly) -> Iterator[Problem]:
    """Entries that are not wholly on the blank, and through bores whose axis leaves it through the side."""
    for leg in assembly.legs:
        margins = [
            assembly.blank.ellipse_margin_mm(s.centre, s.along_mm, s.across_mm, s.bearing_deg)
            for s in sections(leg, assembly.drilled)
        ]
        entry = min(margins, default=0.0)
        if entry < 0.0:
            given = f"{leg.name}'s mortise on the {assembly.drilled}"
            rule = f"leaves the blank by {assembly.length(-entry)}"
            yield Problem(f"{leg.place}.at", given, rule, "move it further in, or make the seat larger")
            continue
        exit_face = other_face(assembly.drilled)
        if sections(leg, exit_face) and not assembly.blank.holds(leg.on_face(exit_face)):
            rule = f"comes out through the seat's side before it reaches the {exit_face}"
            yield Problem(
                f"{leg.place}.at", f"{leg.name}'s bore", rule, "move the mortise further in or lessen the lean"
            )


def _blind_from_top(furniture: Furniture) -> Iterator[Problem]:
    for index, spec in enumerate(furniture.legs):
        if spec.mortise.depth is not None and furniture.seat.drill_from == "top":
            given = f"{format_length(spec.mortise.depth, furniture.units)} from the top"
            rule = "cannot be: a leg enters from below, so a mortise to a depth is bored from the underside"
            cure = 'set drill_from = "underside", or leave depth out to bore through'
            yield Problem(f"{leg_place(index)}.mortise.depth", given, rule, cure)


def _bores_that_meet(assembly: Assembly) -> Iterator[Problem]:
    for one, other in combinations(assembly.legs, 2):
        web = web_mm(one, other, assembly.thickness_mm)
        if web < 0.0:
            rule = f"meets that of {one.name} inside the seat by {assembly.length(-web)}"
            yield Problem(f"{other.place}.at", f"{other.name}'s bore", rule, "move them apart or use a smaller bit")
