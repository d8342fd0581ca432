"""The seat template: outline, centre line, front, and for each leg what to prick, bore and sight by, on either face.

A face's drawing is in that face's own coordinates as it is seen with the front edge toward you: plan coordinates for
the top, plan coordinates mirrored (X = -x) for the underside. Imports `assembly`, `bores` and layout's ground.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from itertools import groupby

from jigs.assembly import Assembly, Face, other_face
from jigs.bores import bored_mm, mouth_mm, sections
from jigs.cards import foot_mm
from jigs.grain import GRAIN_DEG
from jigs.legs import Leg
from jigs.quantities import format_angle
from jigs.spec import Mortise
from layout.curves import Curve, ellipse_curve, mapped
from layout.drawing import Drawing, Primitive, Role, Stroke, Text, gather
from layout.geometry import Affine, Point, along, bearing_deg
from layout.labels import block
from layout.lettering import text_width_mm
from layout.piece import Label, Piece, Wording
from layout.shapes import arrow, circle, cross, line

# How far the centre line runs out past the seat, and a sightline past its edge, arrow's head included.
CENTRE_RUN_MM, SIGHTLINE_RUN_MM = 8.0, 16.0
# How far a sightline runs back from the mortise's centre, away from the foot: a card stands there.
SIGHTLINE_BACK_MM = 75.0
# A spindle stands among its like, so that a card stands there across its neighbours' lines; the line is only begun.
SPINDLE_BACK_MM = 30.0
# How long the beginnings of the across and fore-and-aft lines are.
TICK_MM = 7.0
# Clear space round the face's name and the proof lengths, so that they are not read as a leg's.
APART_MM = 6.0
# Words keep so far from a mortise's centre, and FRONT's middle from the centre line.
ASIDE_MM, FRONT_ASIDE_MM = 12.0, 23.0
# No more proof lengths than a maker will measure.
MOST_PROOFS = 8
# Fewer centres than these leave a page of the template unproven.
ENOUGH_PROVEN = 6


def face_map(face: Face) -> Affine:
    """From plan coordinates to a face as it is seen: the underside is mirrored."""
    return Affine.mirror_x() if face == "underside" else Affine.identity()


def template(assembly: Assembly, face: Face) -> Piece:
    """The template of one face, front edge toward you."""
    seen = face_map(face)
    outline = mapped(assembly.blank.curve, seen)
    lines = gather(_lines(assembly, face, outline))
    labels = tuple(_labels(assembly, face))
    shown = (leg for leg in assembly.bored if in_full(assembly, leg, face) or sections(leg, face))
    points = tuple((leg.name, seen.point(leg.on_face(face))) for leg in shown)
    title = f"Seat template, {face}"
    notice = f"{face.upper()} · with FRONT toward you, {_sides(face)}"
    return Piece(f"template {face}", "template", title, lines, "tile", notice, points, labels=labels)


def _sides(face: Face) -> str:
    return "legs named left lie to your RIGHT" if face == "underside" else "legs named left lie to your left"


def _lines(assembly: Assembly, face: Face, outline: Curve) -> Iterator[Drawing | Primitive]:
    seen = face_map(face)
    yield Stroke(outline, Role.CUT, closed=True)
    bounds = assembly.blank.bounds
    yield line((0.0, bounds.y1 + CENTRE_RUN_MM), (0.0, bounds.y0 - CENTRE_RUN_MM), Role.CENTRE)
    for leg in assembly.bored:
        yield from _leg_lines(assembly, leg, face, seen)


def _leg_lines(assembly: Assembly, leg: Leg, face: Face, seen: Affine) -> Iterator[Drawing | Primitive]:
    for shown, role in ((face, Role.SET_OUT), (other_face(face), Role.HIDDEN)):
        for s in sections(leg, shown):
            ellipse = ellipse_curve(s.centre, s.along_mm, s.across_mm, s.bearing_deg)
            yield Stroke(mapped(ellipse, seen), role, closed=True)
    centre = seen.point(leg.on_face(face))
    bearing = seen_bearing(leg, face)
    if not in_full(assembly, leg, face):
        if sections(leg, face):
            yield cross(centre, 3.0, Role.SET_OUT, bearing)
            yield circle(centre, 1.5, Role.SET_OUT)
        return
    if sections(leg, other_face(face)):
        yield cross(seen.point(leg.on_face(other_face(face))), 2.0, Role.HIDDEN, bearing)
    reach = leg.mortise.bit / 2 + 4.0
    yield cross(centre, reach, Role.SET_OUT, bearing)
    yield circle(centre, 1.5, Role.SET_OUT)
    if leg.drilled == face and leg.kind != "spindle":
        yield from _ticks(centre, reach)
    if leg.drill.leans:
        yield line(along(centre, bearing, -_back_mm(assembly, leg, face)), centre, Role.SET_OUT)
        yield arrow(centre, along(centre, bearing, _edge_mm(assembly, leg, face) + SIGHTLINE_RUN_MM), 7.0, Role.SET_OUT)


def _ticks(centre: Point, reach_mm: float) -> Iterator[Primitive]:
    """Beginnings of the across and the fore-and-aft line through a centre, for the splay and the rake card."""
    for quarter in range(4):
        start, end = (along(centre, quarter * 90.0, reach_mm + further) for further in (2.0, 2.0 + TICK_MM))
        yield line(start, end, Role.CENTRE)


def in_full(assembly: Assembly, leg: Leg, face: Face) -> bool:
    """Whether a face shows all of a part's setting-out, and not only where it comes through.

    It does on the face that the part is drilled from; on the other as well where all parts are drilled from one face.
    """
    return leg.drilled == face or len(assembly.drilled_faces) == 1


def seen_bearing(leg: Leg, face: Face) -> float:
    """The direction of the foot on the face as it is seen, counter-clockwise from the right."""
    return (180.0 - leg.drill.bearing_deg) % 360.0 if face == "underside" else leg.drill.bearing_deg


def edge_distances_mm(assembly: Assembly, leg: Leg, face: Face) -> tuple[float, float]:
    """From the mortise's centre to the seat's edge along the sightline: away from the foot (negative), toward it.

    0 where that way lies no seat: the line of a blind mortise may pass the other face beside it.
    """
    crossings = assembly.blank.line_crossings(leg.on_face(face), leg.drill.bearing_deg)
    return max((d for d in crossings if d <= 0.0), default=0.0), min((d for d in crossings if d >= 0.0), default=0.0)


def _edge_mm(assembly: Assembly, leg: Leg, face: Face) -> float:
    return edge_distances_mm(assembly, leg, face)[1]


def _back_mm(assembly: Assembly, leg: Leg, face: Face) -> float:
    """How far the sightline runs back: a card's foot and the bit, or to the seat's edge."""
    shank = leg.drill.resultant_deg if leg.leans_with_bit else -leg.drill.resultant_deg
    card = foot_mm(shank) + leg.mortise.bit / 2
    most = max(SIGHTLINE_BACK_MM, card + 4.0) if leg.kind != "spindle" else SPINDLE_BACK_MM
    return min(most, -edge_distances_mm(assembly, leg, face)[0])


def _labels(assembly: Assembly, face: Face) -> Iterator[Label]:
    """What the template says, in the order in which it finds its room."""
    bounds = assembly.blank.bounds
    yield Label((_front(),), (FRONT_ASIDE_MM, bounds.y0 + 12.0))
    for leg in assembly.bored:
        words = _leg_words(assembly, leg, face)
        if words:
            aside = ASIDE_MM if leg.kind != "spindle" else leg.mortise.bit / 2
            yield Label(words, face_map(face).point(leg.on_face(face)), aside, led=True)
    yield Label(_title_words(assembly, face), (0.0, bounds.y0 + 0.62 * bounds.height))
    if len(assembly.bored) > 1:
        yield Label(_proof_words(assembly, face), (0.0, bounds.y0 + 0.4 * bounds.height))
    yield from _grain(assembly, face)


def _front() -> Wording:
    """The word FRONT with its arrow to the front edge."""
    width = text_width_mm("FRONT", 5.0, True) + 10.0
    x = 3.0 - width / 2
    shaft = arrow((x, 5.5), (x, -5.0), 5.0, Role.NOTE)
    return Wording(shaft + Drawing((Text((x + 5.0, -3.0), "FRONT", 5.0, bold=True, over=True),)), width, 11.0)


def _leg_words(assembly: Assembly, leg: Leg, face: Face) -> tuple[Wording, ...]:
    name = (leg.name, 3.5, True)
    if not in_full(assembly, leg, face):
        return _passing_words(leg, face)
    if leg.kind == "spindle":
        return (block((leg.name, 2.5, True), (f"lean {format_angle(leg.drill.resultant_deg)}", 2.5, False)),)
    hole = (bore_words(assembly, leg), 2.5, False)
    if not leg.drill.leans:
        return (block(name, ("square to the face", 2.5, False), hole),)
    lean, bevel = format_angle(leg.drill.resultant_deg), format_angle(leg.drill.bevel_deg)
    sight, complement = sightline_words(leg)
    rest = [(complement, 2.5, False), hole]
    if face == leg.drilled:
        toward = "to" if leg.leans_with_bit else "away from"
        rest.append((f"the bit leans {toward} the arrow", 2.5, False))
    large = [name, (f"lean {lean}", 5.0, True), (f"bevel {bevel}", 3.5, False), (sight, 3.5, False), *rest]
    middling = [name, (f"lean {lean}  bevel {bevel}", 3.5, False), (sight, 2.5, False), *rest]
    small = [name, (f"lean {lean}", 2.5, False), (f"bevel {bevel}", 2.5, False), (sight, 2.5, False), *rest]
    return (block(*large), block(*middling), block(*small))


def _passing_words(leg: Leg, face: Face) -> tuple[Wording, ...]:
    """Beside a hole that is bored from the other face: not to be bored here."""
    name = (leg.name, 2.5, False)
    if sections(leg, face):
        return (block(name, (f"comes through from the {leg.drilled}", 2.5, False)), block(name))
    return (block(name, (f"bored from the {leg.drilled}", 2.5, False)), block(name))


def sightline_words(leg: Leg) -> tuple[str, str]:
    """The sightline from the fore-and-aft line, and its complement from the across line."""
    sightline = leg.drill.sightline_deg
    return (
        f"sightline {format_angle(sightline)} from fore-and-aft",
        f"({format_angle(leg.drill.complement_deg)} from across)",
    )


def bore_words(assembly: Assembly, leg: Leg) -> str:
    """What is bored, and how far."""
    mortise: Mortise = leg.mortise
    words = f"bit Ø {assembly.length(mortise.bit)}"
    if mortise.taper:
        words += f", ream {format_angle(mortise.taper)} to Ø {assembly.length(mouth_mm(leg))}"
    return words + (", through" if mortise.depth is None else f", {assembly.length(bored_mm(leg))} deep")


def _role(assembly: Assembly, face: Face) -> str:
    """What is bored from a face."""
    here = [leg.kind for leg in assembly.bored if leg.drilled == face]
    if not here:
        return "not the face to bore from"
    if len(here) == len(assembly.bored):
        return "bore from this face"
    return f"bore the {' and '.join(f'{kind}s' for kind in dict.fromkeys(here))} from this face"


def _title_words(assembly: Assembly, face: Face) -> tuple[Wording, ...]:
    role = _role(assembly, face)
    left = "left legs are on your right" if face == "underside" else "left legs are on your left"
    name = assembly.furniture.name
    lines = ((f"{face.upper()}", 7.0, True), (name, 3.5, False), (role, 3.5, False), (left, 2.5, False))
    return (
        block(*lines, clear_mm=APART_MM),
        block((face.upper(), 5.0, True), (role, 2.5, False), (left, 2.5, False)),
        block((face.upper(), 5.0, True)),
    )


def proofs(assembly: Assembly, face: Face) -> tuple[tuple[str, str, float], ...]:
    """Lengths between mortises' centres on a face, mm, to measure once the pages are taped.

    The neighbours round the seat first, then the longest others.
    """
    parts = sorted(_proven(assembly, face), key=lambda part: _turn_about_middle(assembly, part))
    if len(parts) == 2:
        pairs = [(parts[0], parts[1])]
    else:
        pairs = list(zip(parts, [*parts[1:], parts[0]], strict=True))
        rest = [(p, q) for i, p in enumerate(parts) for q in parts[i + 2 :] if (p, q) != (parts[0], parts[-1])]
        pairs += sorted(rest, key=lambda pair: -math.dist(pair[0].on_face(face), pair[1].on_face(face)))
    return tuple((p.name, q.name, math.dist(p.on_face(face), q.on_face(face))) for p, q in pairs[:MOST_PROOFS])


def _proven(assembly: Assembly, face: Face) -> list[Leg]:
    """The parts whose centres prove a face's taping: what is bored from it, of rows the ends; where these are few, what
    else has its centre marked there.
    """
    found = [part for part in assembly.bored if part.drilled == face and part.kind != "spindle"]
    for _, row in groupby((part for part in assembly.spindles if part.drilled == face), key=lambda part: part.place):
        first, *_, last = row
        found += [first, last]
    if len(found) < ENOUGH_PROVEN:
        found += [part for part in assembly.bored if part.drilled != face and sections(part, face)]
    return found if len(found) > 1 else list(assembly.legs)


def _turn_about_middle(assembly: Assembly, leg: Leg) -> float:
    x, y = leg.top_mm
    return bearing_deg((x, y - assembly.blank.middle_y_mm))


def _proof_words(assembly: Assembly, face: Face) -> tuple[Wording, ...]:
    found = proofs(assembly, face)
    rows = [(f"{p} – {q}  {assembly.length(mm)}", 2.5, False) for p, q, mm in found]
    head = ("Proof lengths, centre to centre", 2.5, True)
    blocks = [block(head, *rows, clear_mm=APART_MM), block(head, *rows[:4]), block(head, *rows[-2:])]
    return tuple(blocks[:1] if len(rows) <= 2 else blocks)


def _grain(assembly: Assembly, face: Face) -> Iterator[Label]:
    """The grain's arrow, its angle measured from the fore-and-aft line toward the right as seen from above."""
    grain = assembly.furniture.seat.grain
    if grain is None:
        return
    grain_deg = GRAIN_DEG[grain] if isinstance(grain, str) else grain
    bounds = assembly.blank.bounds
    direction = face_map(face).vector(along((0.0, 0.0), 90.0 - grain_deg, 22.0))
    width, height = (max(2 * abs(reach) + 6.0, 14.0) for reach in direction)
    x, y = direction
    both = arrow((0.0, 0.0), (x, y), 4.0, Role.NOTE) + arrow((0.0, 0.0), (-x, -y), 4.0, Role.NOTE)
    word = Drawing((Text((0.0, -1.2), "grain", 2.5, align="centre", over=True),))
    near = (bounds.x0 + 0.25 * bounds.width, bounds.y0 + 0.5 * bounds.height)
    yield Label((Wording(both + word, width, height),), near)
