"""The whole piece of furniture with its axes worked out: spec in, legs with angles and points out, or all that is
wrong.

Owns the way from a spec to legs and the refusal of what cannot be built; what is merely unwise is `checks`'.
Imports the spec's models, `seats`, `members`, `bores`, `stretchers`; no drawing of sheets.
"""

from __future__ import annotations

import math
import re
from collections.abc import Iterator
from dataclasses import dataclass
from itertools import combinations
from typing import TYPE_CHECKING

from jigs.bores import bored_mm, least_web_mm, sections, slice_at, web_mm, wood_above_mm
from jigs.directions import Seating
from jigs.frames import SeatFrame
from jigs.legs import Face, Leg
from jigs.members import Members
from jigs.problems import Caution, Problem, SpecError
from jigs.quantities import format_length
from jigs.seats import Blank, OutlineError, outline
from jigs.spec import Furniture, leg_place
from jigs.spec_legs import StretcherTable

if TYPE_CHECKING:
    from jigs.stretchers import Member as Bar
    from jigs.stretchers import Stretcher, StretcherSpec

__all__ = ["Assembly", "Face", "assemble", "other_face"]


# So many pairs of bores that meet are told one by one: a crowded row has hundreds.
MOST_PAIRS = 6


@dataclass(frozen=True, eq=False)
class Assembly:
    """A piece of furniture, its blank and its parts in the order of the spec, twins left first.

    `bars` are the legs and posts as stretchers meet them, `notes` what a maker is to be told of how legs were solved.
    Two assemblies are the same only where they are one, so that what is worked out of one can be kept.
    """

    furniture: Furniture
    blank: Blank
    frame: SeatFrame
    legs: tuple[Leg, ...]
    posts: tuple[Leg, ...] = ()
    spindles: tuple[Leg, ...] = ()
    stretchers: tuple[Stretcher, ...] = ()
    bars: tuple[Bar, ...] = ()
    notes: tuple[Caution, ...] = ()

    @property
    def bored(self) -> tuple[Leg, ...]:
        """Everything that is bored into the seat: legs, posts, spindles."""
        return (*self.legs, *self.posts, *self.spindles)

    @property
    def drilled_faces(self) -> tuple[Face, ...]:
        """The faces that bits enter, that of the legs first."""
        return tuple(dict.fromkeys((self.drilled, *(leg.drilled for leg in self.bored))))

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
    """The furniture with its parts worked out. Raises SpecError with every problem of the geometry at once."""
    frame = SeatFrame(furniture.seat.pitch, furniture.seat.height)
    try:
        blank = Blank(outline(furniture.seat, furniture.units))
    except OutlineError as error:
        raise SpecError(source, (Problem(error.field, error.given, error.rule, error.cure),)) from None
    from_top = furniture.seat.drill_from == "top"
    members = Members(furniture, Seating(frame, furniture.seat.thickness, from_top, blank, furniture.units))
    legs, posts, spindles = members.legs(), members.posts(), members.spindles()
    problems = members.problems
    stretchers, bars = _stretchers(furniture, frame, (*legs, *posts), problems)
    assembly = Assembly(furniture, blank, frame, legs, posts, spindles, stretchers, bars, tuple(members.notes))
    problems += [
        *_off_the_blank(assembly),
        *_blind_from_top(furniture),
        *_too_deep(assembly),
        *_bores_that_meet(assembly),
    ]
    if problems:
        raise SpecError(source, tuple(problems))
    return assembly


def _stretchers(
    furniture: Furniture, frame: SeatFrame, hosts: tuple[Leg, ...], problems: list[Problem]
) -> tuple[tuple[Stretcher, ...], tuple[Bar, ...]]:
    """The stretchers on their legs; not tried where a leg has a problem, which would only be said twice."""
    if not furniture.stretchers or problems:
        return (), ()
    from jigs.stretchers import StretcherError, place  # noqa: PLC0415 - few pieces have stretchers

    bars = tuple(as_bar(leg, frame, furniture.seat.thickness) for leg in hosts)
    try:
        return place([_asked(table) for table in furniture.stretchers], bars, furniture.units), bars
    except StretcherError as error:
        problems += [_as_written(fault.problem(), furniture.stretchers[fault.index]) for fault in error.faults]
        return (), bars


def _as_written(problem: Problem, table: StretcherTable) -> Problem:
    """The problem at the key that the file has: one height says both."""
    if table.height is None:
        return problem
    return problem._replace(where=re.sub(r"\.heights\[\d\]$", ".height", problem.where))


def _asked(table: StretcherTable) -> StretcherSpec:
    from jigs.stretchers import StretcherSpec  # noqa: PLC0415 - as above

    heights = table.heights if table.height is None else (table.height, table.height)
    return StretcherSpec(
        name=table.name,
        between=table.between,
        heights_mm=heights,
        fractions=table.fractions,
        diameter_mm=table.diameter,
        tenon_mm=table.tenon,
        tenon_diameter_mm=table.tenon_diameter or table.diameter,
    )


def as_bar(leg: Leg, frame: SeatFrame, thickness_mm: float) -> Bar:
    """A leg or post as a bar that stretchers are tenoned into, its clock positions read from its sightline."""
    from jigs.stretchers import Member as Bar  # noqa: PLC0415 - as above

    start = frame.to_floor((*leg.on_face(leg.enters), 0.0 if leg.enters == "top" else -thickness_mm))
    bearing = math.radians(leg.drill.bearing_deg)
    zero = (math.cos(bearing), math.sin(bearing), 0.0) if leg.drill.leans else (0.0, float(leg.end), 0.0)
    return Bar(
        leg.name,
        start,
        (*leg.foot_mm, leg.foot_z_mm),
        leg.diameter_mm,
        leg.foot_diameter_mm,
        frame.turn_to_floor(zero),
    )


def _off_the_blank(assembly: Assembly) -> Iterator[Problem]:
    """Entries that are not wholly on the blank, and legs' through bores whose axis leaves it through the side."""
    for leg in assembly.bored:
        margins = [
            assembly.blank.ellipse_margin_mm(s.centre, s.along_mm, s.across_mm, s.bearing_deg)
            for s in sections(leg, leg.drilled)
        ]
        entry = min(margins, default=0.0)
        if entry < 0.0:
            given = f"{leg.name}'s mortise on the {leg.drilled}"
            rule = f"leaves the blank by {assembly.length(-entry)}"
            yield Problem(_placed_by(leg), given, rule, "move it further in, or make the seat larger")
            continue
        # A post that does so can still be bored and wedged in; `checks` tells of it.
        if leg.kind == "leg" and not assembly.blank.holds(slice_at(leg, bored_mm(leg)).centre):
            blind = leg.mortise.depth is not None
            end = "its full depth" if blind else f"the {other_face(leg.enters)}"
            rule = f"comes out through the seat's side before it reaches {end}"
            yield Problem(_placed_by(leg), f"{leg.name}'s bore", rule, "move the mortise further in or lessen the lean")


def _placed_by(leg: Leg) -> str:
    """The key that says where a part stands in the seat."""
    key = "deck" if leg.kind == "spindle" else "circle" if leg.place.startswith("rings") else "at"
    return f"{leg.place}.{key}"


def _blind_from_top(furniture: Furniture) -> Iterator[Problem]:
    for index, spec in enumerate(furniture.legs):
        if spec.mortise.depth is not None and furniture.seat.drill_from == "top":
            given = f"{format_length(spec.mortise.depth, furniture.units)} from the top"
            rule = "cannot be: a leg enters from below, so a mortise to a depth is bored from the underside"
            cure = 'set drill_from = "underside", or leave depth out to bore through'
            yield Problem(f"{leg_place(index)}.mortise.depth", given, rule, cure)


def _too_deep(assembly: Assembly) -> Iterator[Problem]:
    """Blind mortises that come out: the paper would say a depth that the seat does not have."""
    for leg in assembly.bored:
        left = wood_above_mm(leg, assembly.thickness_mm)
        if left is not None and left <= 0.0:
            most = (leg.mortise.depth or 0.0) + left / math.cos(math.radians(leg.seat.resultant_deg))
            rule = f"breaks out at the {other_face(leg.enters)} by {assembly.length(-left)}"
            cure = f"bore less than {assembly.length(most)} deep, or leave depth out to bore through"
            yield Problem(f"{leg.place}.mortise.depth", f"{leg.name}'s mortise", rule, cure)


def _bores_that_meet(assembly: Assembly) -> Iterator[Problem]:
    cure = "move them apart or use a smaller bit"
    found = []
    for one, other in combinations(assembly.bored, 2):
        if least_web_mm(one, other, assembly.thickness_mm) >= 0.0:
            continue
        web = web_mm(one, other, assembly.thickness_mm)
        if web < 0.0:
            rule = f"meets that of {one.name} inside the seat by {assembly.length(-web)}"
            found.append(Problem(_placed_by(other), f"{other.name}'s bore", rule, cure))
    yield from found[:MOST_PAIRS]
    if len(found) > MOST_PAIRS:
        given = f"{len(found) - MOST_PAIRS} more pairs of bores"
        yield Problem(found[MOST_PAIRS].where, given, "meet inside the seat", cure)
