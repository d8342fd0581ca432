"""What a piece weighs and how it stands: from an assembly to the parts, feet and outline that `statics` sums.

Owns the choice of densities and which parts are weighed. Imports `assembly`, `wood`, layout's geometry
and curves; `statics` only where it is used. No drawing. Floor frame in plan, mm.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from functools import cache
from typing import TYPE_CHECKING, NamedTuple

from jigs.assembly import Assembly
from jigs.frames import Vector, further, minus, unit
from jigs.legs import Leg
from jigs.quantities import format_weight
from jigs.wood import density_kg_m3, species_name
from layout.curves import flatten, mapped
from layout.geometry import Affine, Point

if TYPE_CHECKING:
    from jigs.statics import Part, PublishedCase, Stability
    from jigs.stretchers import Stretcher

# Where no wood is said: a light one for furniture, so that the sums err toward tipping (practice).
DEFAULT_DENSITY_KG_M3 = 500.0
# Chords stand this near to the seat's outline where loads are set on it: it falls short of the true edge by no more.
OUTLINE_TOLERANCE_MM = 0.25
# A piece needs so many feet to stand by itself.
LEAST_FEET = 3


class Wood(NamedTuple):
    """What a part is weighed as; `name` is None where the spec does not say and the default density stands in."""

    name: str | None
    density_kg_m3: float


def woods(assembly: Assembly) -> tuple[Wood, Wood]:
    """The wood of the seat, and of everything turned. Raises UnknownSpeciesError for a wood that is in no table."""
    table = assembly.furniture.wood
    return _wood(table.seat), _wood(table.legs)


def _wood(species: str | None) -> Wood:
    if species is None:
        return Wood(None, DEFAULT_DENSITY_KG_M3)
    return Wood(species_name(species), density_kg_m3(species))


def weighed_as(assembly: Assembly) -> str:
    """Which woods the weights are of: `weighed with the seat as white ash and the rest at 500 kg/m³, no wood given`."""
    seat, rest = (
        f"as {wood.name}" if wood.name else f"at {wood.density_kg_m3:g} kg/m³, no wood given"
        for wood in woods(assembly)
    )
    return f"weighed {seat}" if seat == rest else f"weighed with the seat {seat} and the rest {rest}"


def hung(assembly: Assembly, load_n: float) -> str:
    """A load as the weight that presses so, in the maker's units."""
    from jigs.statics import GRAVITY_M_S2  # noqa: PLC0415 - not every run weighs

    return format_weight(load_n / GRAVITY_M_S2, assembly.furniture.units, 1)


def published_words(case: PublishedCase) -> tuple[str, str]:
    """Which way the published loads are worst, and what they are."""
    from jigs import statics  # noqa: PLC0415 - as above

    x, y = case.toward
    at, _ = max(statics.PLACES, key=lambda place: place[1][0] * x + place[1][1] * y)
    down = f"{statics.PUBLISHED_DOWN_N:.0f} N down {statics.PUBLISHED_FROM_EDGE_MM:.0f} mm inside the seat's edge"
    return at, f"{down} with {statics.PUBLISHED_OUTWARD_N:.0f} N outward"


def weight_parts(assembly: Assembly) -> tuple[Part, ...]:
    """What weighs: the seat as a full slab, then legs, posts and spindles outside it, and stretchers between shoulders.

    Tenons count as what they are set in; a crest rail, which no spec describes, is left out.
    """
    from jigs.statics import area_and_centroid, bar_part, slab_part  # noqa: PLC0415 - not every run weighs

    seat, rest = woods(assembly)
    _, (x, y) = area_and_centroid(flatten(assembly.blank.curve, OUTLINE_TOLERANCE_MM)[:-1])
    centre = assembly.frame.to_floor((x, y, -assembly.thickness_mm / 2))
    slab = slab_part(assembly.blank.area_mm2, assembly.thickness_mm, seat.density_kg_m3, (centre[0], centre[1]))
    bars = [*_turned(assembly), *map(_between_shoulders, assembly.stretchers)]
    return (slab, *(bar_part(*bar, rest.density_kg_m3) for bar in bars))


# A round bar: its two ends and the diameter at each.
_Bar = tuple[Vector, Vector, float, float]


def _turned(assembly: Assembly) -> Iterator[_Bar]:
    for leg in assembly.bored:
        z = 0.0 if leg.enters == "top" else -assembly.thickness_mm
        start = assembly.frame.to_floor((*leg.on_face(leg.enters), z))
        yield start, (*leg.foot_mm, leg.foot_z_mm), leg.diameter_mm, leg.foot_diameter_mm


def _between_shoulders(stretcher: Stretcher) -> _Bar:
    first, second = stretcher.ends
    way = unit(minus(second.axis_point_mm, first.axis_point_mm))
    start = further(first.axis_point_mm, way, first.reach_mm)
    return start, further(start, way, stretcher.shoulder_mm), stretcher.diameter_mm, stretcher.diameter_mm


def seat_outline(assembly: Assembly) -> list[Point]:
    """The top face's edge as seen from above, as a polygon in floor-frame plan."""
    from_above = Affine(1.0, 0.0, 0.0, math.cos(math.radians(assembly.frame.pitch_deg)), 0.0, 0.0)
    return flatten(mapped(assembly.blank.curve, from_above), OUTLINE_TOLERANCE_MM)[:-1]


def foot_edges(assembly: Assembly) -> list[Point]:
    """Where the feet touch the floor: points round each foot's slanted cut, or its middles where they are too few.

    One foot's own area is nothing to stand on.
    """
    from jigs.statics import foot_contacts  # noqa: PLC0415 - as above

    if len(assembly.legs) < LEAST_FEET:
        return [leg.foot_mm for leg in assembly.legs]
    return [
        spot for leg in assembly.legs for spot in foot_contacts(leg.foot_mm, *_foot_axes_mm(leg), leg.floor.bearing_deg)
    ]


def _foot_axes_mm(leg: Leg) -> tuple[float, float]:
    """Half-axes of the foot's cut on the floor, along the lean and across it."""
    radius = leg.foot_diameter_mm / 2
    return radius / math.cos(math.radians(leg.floor.resultant_deg)), radius


@cache
def standing(assembly: Assembly) -> Stability:
    """The tipping loads and the published case, of the piece by itself on a level floor; a guide and no test.

    The published case's outward load is set at the seat's highest edge.
    """
    from jigs.statics import balance, stability  # noqa: PLC0415 - as above

    weight_n, centre = balance(weight_parts(assembly))
    bounds = assembly.blank.bounds
    height = max(assembly.frame.to_floor((0.0, y, 0.0))[2] for y in (bounds.y0, bounds.y1))
    units = assembly.furniture.units
    return stability(seat_outline(assembly), foot_edges(assembly), weight_n, centre, height, units)
