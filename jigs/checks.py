"""What can be built and is merely unwise: cautions with stable codes, for the command line and the setting-out sheet.

Every threshold is a named constant with its source. Imports `assembly`, `bores`, `seats` and `layout.geometry`; no
drawing.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from functools import cache
from itertools import combinations

from jigs.assembly import Assembly, other_face
from jigs.bores import sections, web_mm, wood_above_mm
from jigs.problems import Caution
from jigs.quantities import format_angle
from jigs.seats import Blank
from layout.geometry import Affine, mapped

# Less wood than this between a mortise and the seat's edge is short grain that a wedge may split off (practice).
THIN_EDGE_MM = 12.0
# Less wood than this between two bores inside the seat is likely to break through (practice).
THIN_WEB_MM = 10.0
# Less wood than this left above a blind mortise shows or breaks through when the seat is hollowed (practice).
THIN_FLOOR_MM = 6.0
# A bit that leans further than this from square skates before it bites (practice).
STEEP_DEG = 25.0

# The name of a leg, and what is unwise about it.
Finding = tuple[str, Caution]


@cache
def cautions(assembly: Assembly) -> tuple[Caution, ...]:
    """Everything unwise about the design, in the order of the legs; what holds of twins alike is said once."""
    found = [*_trips(assembly), *_edges(assembly), *_steep(assembly), *_crossed(assembly), *_webs(assembly)]
    alike: dict[Caution, list[str]] = {}
    for name, caution in found:
        alike.setdefault(caution, []).append(name)
    return tuple(Caution(c.code, c.where, f"{', '.join(names)}: {c.text}") for c, names in alike.items())


def _trips(assembly: Assembly) -> Iterator[Finding]:
    """Feet that stand out beyond the seat, seen from above; keeping them inside is (practice)."""
    from_above = Affine(1.0, 0.0, 0.0, math.cos(math.radians(assembly.frame.pitch_deg)), 0.0, 0.0)
    seat = Blank(mapped(assembly.blank.curve, from_above))
    for leg in assembly.legs:
        radius = leg.foot_diameter_mm / 2
        along = radius / math.cos(math.radians(leg.floor.resultant_deg))
        outside = -seat.ellipse_margin_mm(leg.foot_mm, along, radius, leg.floor.bearing_deg)
        if outside > 0.0:
            text = f"the foot stands {assembly.length(outside)} outside the seat and can trip a passer-by"
            yield leg.name, Caution("trip", leg.place, f"{text}; lessen the lean or move the mortise in")


def _edges(assembly: Assembly) -> Iterator[Finding]:
    for leg in assembly.legs:
        for face in (assembly.drilled, other_face(assembly.drilled)):
            margins = [
                assembly.blank.ellipse_margin_mm(s.centre, s.along_mm, s.across_mm, s.bearing_deg)
                for s in sections(leg, face)
            ]
            if margins and min(margins) < 0.0:
                text = f"the bore breaks out of the seat's side at the {face}"
                yield leg.name, Caution("breaks-edge", leg.place, f"{text}; move the mortise in or lessen the lean")
            elif margins and min(margins) < THIN_EDGE_MM:
                left = assembly.length(min(margins))
                text = f"only {left} of wood between the mortise and the seat's edge on the {face}"
                yield (
                    leg.name,
                    Caution("thin-edge", leg.place, f"{text}; {assembly.length(THIN_EDGE_MM)} or more is usual"),
                )
        above = wood_above_mm(leg, assembly.thickness_mm)
        if above is not None and above < THIN_FLOOR_MM:
            state = f"leaves {assembly.length(above)} of wood" if above > 0.0 else "breaks out"
            yield leg.name, Caution("thin-floor", leg.place, f"the mortise {state} at the top; bore less deep")


def _steep(assembly: Assembly) -> Iterator[Finding]:
    for leg in assembly.legs:
        if leg.drill.resultant_deg > STEEP_DEG:
            lean = format_angle(leg.drill.resultant_deg)
            text = f"the bit leans {lean} from square to the seat and will skate"
            yield (
                leg.name,
                Caution("steep", leg.place, f"{text}; start the hole upright, or bore through a guide block"),
            )


def _crossed(assembly: Assembly) -> Iterator[Finding]:
    for leg in assembly.legs:
        if leg.side and leg.foot_mm[0] * leg.side <= 0.0:
            text = "the foot stands on the other side of the centre line from its mortise"
            yield leg.name, Caution("crossed", leg.place, f"{text}; look at the sign of splay")


def _webs(assembly: Assembly) -> Iterator[Finding]:
    for one, other in combinations(assembly.legs, 2):
        web = web_mm(one, other, assembly.thickness_mm)
        if web < THIN_WEB_MM:
            text = f"only {assembly.length(web)} of wood between its bore and that of {one.name}; move them apart"
            yield other.name, Caution("thin-web", other.place, text)
