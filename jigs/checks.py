"""What can be built and is merely unwise: cautions with stable codes, for the command line and the setting-out sheet.

Owns the cautions about what is bored into the seat and about the whole piece; those about stretchers are `joinery`'s,
how it stands is `loads`'. Every threshold is a named constant with its source. Imports `assembly`, `bores`, `grain`,
`seats` and layout's geometry and curves; no drawing.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Sequence
from functools import cache
from itertools import combinations
from typing import TYPE_CHECKING, NamedTuple

from jigs.assembly import Assembly, as_bar, other_face
from jigs.bores import STEEP_DEG, Section, bored_mm, least_web_mm, mouth_mm, sections, slice_at, web_mm, wood_above_mm
from jigs.grain import grain_bearing_deg, wood_along_grain_mm
from jigs.legs import Face, Leg
from jigs.names import in_words
from jigs.problems import Caution
from jigs.quantities import MM_PER_INCH, format_angle
from jigs.seats import Blank
from jigs.spec_base import ON_MIDDLE_MM
from layout.curves import mapped
from layout.geometry import Affine

if TYPE_CHECKING:
    from jigs.statics import EdgeLoad, PublishedCase, Stability

# A foot that stands out by no more than this is level with the seat's edge (practice).
TRIP_MM = 0.5
# Less wood than this between a mortise and the seat's edge is weak and may split off (practice).
THIN_EDGE_MM = 12.0
# Where a bore is looked at between its ends, on an outline that bends inward, as shares of its depth.
BETWEEN_SHARES = (0.125, 0.25, 0.375, 0.5, 0.625, 0.75, 0.875)
# Less wood along the grain between a mortise and the seat's edge than so many widths of the mortise is short grain,
# which a wedge may shear out (practice).
SHORT_GRAIN_WIDTHS = 1.0
# Less wood than this between two bores inside the seat is likely to break through (practice).
THIN_WEB_MM = 10.0
# Less wood than this left beyond a blind mortise shows or breaks through when the seat is hollowed (practice).
THIN_FLOOR_MM = 6.0
# A mouth wider than its leg by more than this is not filled: far below what a hand fits, far above rounding.
LOOSE_MM = 0.01
# A piece that a lighter load than this on the seat's edge lifts is tipped by the hand of someone who rises (practice).
TIPPING_LOAD_N = 100.0
# Legs that differ by more cannot be cut alike and levelled by scribing the feet (practice).
UNEQUAL_MM = 1.0
# Seat heights of the size marks 1 to 6, which are made for pupils: EN 1729-1. As the range of low seats (practice).
SIZE_MARKS_MM = (260.0, 310.0, 350.0, 380.0, 430.0, 460.0)


class HeightRange(NamedTuple):
    """Usual heights of a seat, in mm, and whose they are."""

    least_mm: float
    most_mm: float
    source: str


def _inches(least: float, most: float) -> HeightRange:
    return HeightRange(least * float(MM_PER_INCH), most * float(MM_PER_INCH), "common practice")


# By the spec's `use`; a table has no seat.
SEAT_HEIGHTS = {
    "dining": _inches(17.0, 19.0),
    "counter": _inches(24.0, 26.0),
    "bar": _inches(28.0, 32.0),
    "low": HeightRange(SIZE_MARKS_MM[0], SIZE_MARKS_MM[-1], "common practice, after the size marks of EN 1729-1"),
}


class Finding(NamedTuple):
    """What is unwise about one part. Of a row or ring the same is said once, about the part where `left` is least.

    `about` tells apart what has one code and place: a face, the place of a neighbour, or nothing.
    """

    part: Leg
    code: str
    text: str
    left: float = 0.0
    about: str = ""


@cache
def cautions(assembly: Assembly) -> tuple[Caution, ...]:
    """Everything unwise: part by part in the order of the spec, stretchers, the whole piece, and how legs were solved.

    What holds of twins alike is said once, and so is what holds of a row of spindles.
    """
    mouths = tuple(_mouths(assembly))
    found = [*_trips(assembly), *_edges(assembly, mouths), *_short_grain(assembly, mouths), *_floors(assembly)]
    found += [*_loose(assembly), *_steep(assembly), *_crossed(assembly), *_webs(assembly)]
    whole = (*_stands(assembly), *_seat_height(assembly), *_unequal(assembly))
    return (*_merged(found, assembly.bored), *_stretchers(assembly), *whole, *_notes(assembly))


def _merged(findings: Iterable[Finding], parts: Sequence[Leg]) -> Iterator[Caution]:
    alike: dict[tuple[str, ...], list[Finding]] = {}
    for one in findings:
        in_a_row = one.part.kind == "spindle" or one.part.place.startswith("rings")
        same = one.about if in_a_row else one.text
        alike.setdefault((one.code, one.part.place, one.part.kind, same), []).append(one)
    for group in alike.values():
        worst = min(group, key=lambda finding: finding.left)
        named = {finding.part.name for finding in group}
        names = in_words([part.name for part in parts if part.name in named])
        least = f" (the worst: {worst.part.name})" if len({finding.text for finding in group}) > 1 else ""
        yield Caution(worst.code, worst.part.place, f"{names}: {worst.text}{least}")


def _notes(assembly: Assembly) -> Iterator[Caution]:
    """How legs were solved; each note opens with its leg's name, and what holds of twins alike is said once."""
    alike: dict[tuple[str, str, str], list[str]] = {}
    for note in assembly.notes:
        name, _, text = note.text.partition(": ")
        alike.setdefault((note.code, note.where, text), []).append(name)
    for (code, where, text), names in alike.items():
        yield Caution(code, where, f"{', '.join(names)}: {text}")


# Part by part


def _trips(assembly: Assembly) -> Iterator[Finding]:
    """Feet that stand out beyond the seat, seen from above; keeping them inside is (practice)."""
    from_above = Affine(1.0, 0.0, 0.0, math.cos(math.radians(assembly.frame.pitch_deg)), 0.0, 0.0)
    seat = Blank(mapped(assembly.blank.curve, from_above))
    asked = (spec for spec in assembly.furniture.legs if (spec.inside_side, spec.inside_end) != (None, None))
    inside = {name for spec in asked for name in spec.names}
    for leg in assembly.legs:
        radius = leg.foot_diameter_mm / 2
        along = radius / math.cos(math.radians(leg.floor.resultant_deg))
        outside = -seat.ellipse_margin_mm(leg.foot_mm, along, radius, leg.floor.bearing_deg)
        if outside > TRIP_MM:
            text = f"the foot stands {assembly.length(outside)} outside the seat and can trip a passer-by"
            cure = "ask for more inside" if leg.name in inside else "lessen the lean"
            yield Finding(leg, "trip", f"{text}; {cure} or move the mortise in")


class Mouth(NamedTuple):
    """A hole where it shows on a face, and the wood from it to the seat's edge, negative where it breaks out; where
    there is plenty, what there is at least.
    """

    part: Leg
    face: Face
    ellipses: tuple[Section, ...]
    margin_mm: float


def _mouths(assembly: Assembly) -> Iterator[Mouth]:
    for part in assembly.bored:
        for face in (part.drilled, other_face(part.drilled)):
            ellipses = sections(part, face)
            if ellipses:
                yield Mouth(part, face, ellipses, min(_margin_mm(assembly.blank, s) for s in ellipses))


def _margin_mm(blank: Blank, mouth: Section) -> float:
    """The least wood to the seat's edge, or for a mouth with plenty a lower bound, which is quick to find."""
    at_least = blank.edge_distance_mm(mouth.centre) - max(mouth.along_mm, mouth.across_mm)
    if at_least >= max(THIN_EDGE_MM, SHORT_GRAIN_WIDTHS * 2 * mouth.across_mm):
        return at_least
    return blank.ellipse_margin_mm(mouth.centre, mouth.along_mm, mouth.across_mm, mouth.bearing_deg)


def _edges(assembly: Assembly, mouths: Sequence[Mouth]) -> Iterator[Finding]:
    for part, face, _, margin in mouths:
        yield from _edge(assembly, part, f"at the {face}", margin)
    for part in assembly.bored:
        where, margin = _inside(assembly.blank, part)
        if margin < min((mouth.margin_mm for mouth in mouths if mouth.part is part), default=math.inf):
            yield from _edge(assembly, part, where, margin)


def _edge(assembly: Assembly, part: Leg, where: str, margin: float) -> Iterator[Finding]:
    cure = "move the mortise in or lessen the lean"
    if margin < 0.0:
        yield Finding(part, "breaks-edge", f"the bore breaks out of the seat's side {where}; {cure}", margin, where)
    elif margin < THIN_EDGE_MM:
        text = f"only {assembly.length(margin)} of wood between the mortise and the seat's edge {where}"
        text += f", and {assembly.length(THIN_EDGE_MM)} or more is usual; {cure}"
        yield Finding(part, "thin-edge", text, margin, where)


def _inside(blank: Blank, part: Leg) -> tuple[str, float]:
    """The least wood to the side at a blind bore's end, and along any bore where the outline bends inward."""
    found = [("at the bore's end", _margin_mm(blank, slice_at(part, bored_mm(part))))] if part.mortise.depth else []
    if not blank.convex:
        between = min(_margin_mm(blank, slice_at(part, share * bored_mm(part))) for share in BETWEEN_SHARES)
        found.append(("between the bore's ends", between))
    return min(found, key=lambda one: one[1], default=("", math.inf))


def _short_grain(assembly: Assembly, mouths: Sequence[Mouth]) -> Iterator[Finding]:
    bearing = grain_bearing_deg(assembly.furniture.seat)
    if bearing is None:
        return
    for part, face, ellipses, margin in mouths:
        width = 2 * max(s.across_mm for s in ellipses)
        enough = SHORT_GRAIN_WIDTHS * width
        # Along the grain there is no less wood than the shortest way.
        if not 0.0 <= margin < enough:
            continue
        along = min(wood_along_grain_mm(assembly.blank, s, bearing) for s in ellipses)
        if along < enough:
            text = (
                f"short grain: only {assembly.length(along)} of wood along the grain to the seat's edge on the {face}"
            )
            least = f"less than the mortise's width of {assembly.length(width)}"
            yield Finding(part, "short-grain", f"{text}, {least}; move the mortise in or turn the grain", along, face)


def _floors(assembly: Assembly) -> Iterator[Finding]:
    for part in assembly.bored:
        above = wood_above_mm(part, assembly.thickness_mm)
        if above is not None and above < THIN_FLOOR_MM:
            text = f"the mortise leaves only {assembly.length(above)} of wood at the {other_face(part.enters)}"
            usual = f"{assembly.length(THIN_FLOOR_MM)} or more is usual"
            yield Finding(part, "thin-floor", f"{text}, and {usual}; bore less deep", above)


def _loose(assembly: Assembly) -> Iterator[Finding]:
    """Mouths wider than what is to fill them."""
    for part in assembly.bored:
        mouth = mouth_mm(part)
        if mouth > part.diameter_mm + LOOSE_MM:
            wide, thick = assembly.length(mouth), assembly.length(part.diameter_mm)
            text = f"the mortise is {wide} wide at its mouth, and the {part.kind} {thick}"
            yield Finding(part, "loose", f"{text}; ream less wide or leave the {part.kind} thicker")


def _steep(assembly: Assembly) -> Iterator[Finding]:
    for part in assembly.bored:
        lean = part.drill.resultant_deg
        if lean > STEEP_DEG:
            text = f"the bit leans {format_angle(lean)} from square to the seat and will skate"
            yield Finding(part, "steep", f"{text}; start the hole upright, or bore through a guide block", -lean)


def _crossed(assembly: Assembly) -> Iterator[Finding]:
    """Feet on the other side of the centre line from their mortises, or beyond the middle of the seat's depth."""
    middle = assembly.frame.to_floor((0.0, assembly.blank.middle_y_mm, 0.0))[1]
    for leg in assembly.legs:
        if leg.side and leg.foot_mm[0] * leg.side <= 0.0:
            text = "the foot stands on the other side of the centre line from its mortise; look at the sign of splay"
            yield Finding(leg, "crossed", text)
        face_z = 0.0 if leg.drilled == "top" else -assembly.thickness_mm
        mortise = assembly.frame.to_floor((*leg.on_face(leg.drilled), face_z))[1]
        if (mortise - middle) * leg.end > ON_MIDDLE_MM and (middle - leg.foot_mm[1]) * leg.end > ON_MIDDLE_MM:
            text = "the foot stands beyond the middle of the seat's depth from its mortise; look at the sign of rake"
            yield Finding(leg, "crossed", text)


def _webs(assembly: Assembly) -> Iterator[Finding]:
    for one, other in combinations(assembly.bored, 2):
        if least_web_mm(one, other, assembly.thickness_mm) >= THIN_WEB_MM:
            continue
        web = web_mm(one, other, assembly.thickness_mm)
        if web < THIN_WEB_MM:
            text = f"only {assembly.length(web)} of wood between its bore and that of {one.name}; move them apart"
            yield Finding(other, "thin-web", text, web, one.place)


def _stretchers(assembly: Assembly) -> tuple[Caution, ...]:
    if not assembly.stretchers:
        return ()
    from jigs.joinery import Slab  # noqa: PLC0415 - few pieces have stretchers
    from jigs.joinery import cautions as of_stretchers  # noqa: PLC0415

    frame = assembly.frame
    spindles = tuple(as_bar(spindle, frame, assembly.thickness_mm) for spindle in assembly.spindles)
    seat = Slab(frame.to_floor((0.0, 0.0, 0.0)), frame.turn_to_floor((0.0, 0.0, 1.0)), assembly.thickness_mm)
    return of_stretchers(assembly.stretchers, assembly.bars, assembly.furniture.units, spindles, seat)


# The whole piece


def _stands(assembly: Assembly) -> Iterator[Caution]:
    """Nothing of fewer than three legs, which are a part of something."""
    from jigs.loads import LEAST_FEET, standing, weighed_as  # noqa: PLC0415 - not every run looks for cautions

    if len(assembly.legs) < LEAST_FEET:
        return
    stability = standing(assembly)
    if stability.falls is not None:
        text = stability.falls[0].lower() + stability.falls[1:].rstrip(".")
        yield Caution("does-not-stand", "legs", f"{text}; spread the feet or move the mortises out")
        return
    yield from _tips(assembly, stability, weighed_as(assembly))
    case = stability.published
    if case is not None and not case.stays_down and assembly.furniture.use != "table":
        yield _tips_as_published(case)


def _tips(assembly: Assembly, stability: Stability, weighed: str) -> Iterator[Caution]:
    light = [load for load in stability.loads if load.load_n is not None and load.load_n < TIPPING_LOAD_N]
    if light:
        loads = ", ".join(_load(assembly, load) for load in light)
        text = f"so light a load set down on the seat's edge tips it: {loads}; spread the feet or bring the edge in"
        yield Caution("tips", "seat", f"{text} ({weighed}; a static sum as a guide and no test)")


def _load(assembly: Assembly, load: EdgeLoad) -> str:
    from jigs.loads import hung  # noqa: PLC0415 - as above

    newtons = load.load_n or 0.0
    return f"{math.floor(newtons)} N ({hung(assembly, newtons)}) at the {load.at}"


def _tips_as_published(case: PublishedCase) -> Caution:
    """For seats: the loads are those of a sitter."""
    from jigs.loads import published_words  # noqa: PLC0415 - as above

    at, loads = published_words(case)
    text = f"the loads of EN 1022, {loads}, tip it to the {at} by {-case.margin_nm:.1f} N m"
    return Caution("tips-published", "seat", f"{text}; spread the feet (a static sum as a guide and no test)")


def _seat_height(assembly: Assembly) -> Iterator[Caution]:
    usual = SEAT_HEIGHTS.get(assembly.furniture.use or "")
    height = assembly.furniture.seat.height
    if usual is None or usual.least_mm <= height <= usual.most_mm:
        return
    out, change = max((usual.least_mm - height, "raise"), (height - usual.most_mm, "lower"))
    text = f"the seat is {assembly.length(height)} high at its front edge"
    span = f"{assembly.length(usual.least_mm)} to {assembly.length(usual.most_mm)}"
    whose = f"is usual for a {assembly.furniture.use} seat ({usual.source}{_size_mark(assembly)})"
    cure = f"{change} it by {assembly.length(out)}, or mean it"
    yield Caution("seat-height", "seat.height", f"{text}; {span} {whose}; {cure}")


def _size_mark(assembly: Assembly) -> str:
    """For a dining chair the nearest height of EN 1729-1, as a second opinion."""
    if assembly.furniture.use != "dining":
        return ""
    height = assembly.furniture.seat.height
    mark, nearest = min(enumerate(SIZE_MARKS_MM, 1), key=lambda pair: abs(pair[1] - height))
    return f"; EN 1729-1's nearest is {assembly.length(nearest)}, size mark {mark}"


def _unequal(assembly: Assembly) -> Iterator[Caution]:
    """Legs that must not be cut alike, whatever makes them differ: pitch, or leans that are not the same."""
    lengths = [leg.axis_mm for leg in assembly.legs]
    if not lengths or max(lengths) - min(lengths) <= UNEQUAL_MM:
        return
    short, long = (
        f"{', '.join(leg.name for leg in assembly.legs if abs(leg.axis_mm - end) <= UNEQUAL_MM / 2)} "
        f"({assembly.length(end)})"
        for end in (min(lengths), max(lengths))
    )
    by = assembly.length(max(lengths) - min(lengths))
    text = f"the legs differ by {by} in length, from underside to floor: shortest {short}, longest {long}"
    yield Caution("unequal-legs", "legs", f"{text}; cut each to its own length, or the seat leaves its pitch")
