"""Sightline strips: laid on the face along a sightline, with the mortise's centre, the seat's edges and the way to
the foot.

A strip's own mm: x along the sightline toward the foot, 0 at the mortise's centre; y = 0 on the line.
Imports `assembly`, `template`'s wording and layout's ground.
"""

from __future__ import annotations

from collections.abc import Iterator
from typing import NamedTuple

from jigs.assembly import Assembly
from jigs.cards import names_within
from jigs.legs import Leg
from jigs.quantities import format_angle
from jigs.template import edge_distances_mm, sightline_words
from layout.drawing import Drawing, Primitive, Role, Text, gather
from layout.geometry import Box
from layout.lettering import shortened
from layout.piece import Piece
from layout.shapes import arrow, box_outline, circle, cross, line

# How wide a strip is, and how far it runs past the seat's edges.
WIDTH_MM, RUN_MM = 32.0, 25.0
# Legs whose distances and angles agree within these share a strip (less than a pricked point, less than a card shows).
SAME_MM, SAME_DEG = 0.02, 0.01


class Strip(NamedTuple):
    """One strip: distances along the sightline from the mortise's centre to the seat's edges, and whose it is."""

    legs: tuple[Leg, ...]
    back_mm: float
    ahead_mm: float

    @property
    def leg(self) -> Leg:
        """The first of the legs that share it."""
        return self.legs[0]


def strips(assembly: Assembly) -> tuple[Strip, ...]:
    """One strip for each different sightline; twins share theirs. A leg square to the face needs none."""
    made: list[Strip] = []
    for leg in assembly.bored:
        if not leg.drill.leans:
            continue
        back, ahead = edge_distances_mm(assembly, leg, leg.drilled)
        for k, strip in enumerate(made):
            if _same(strip, leg, back, ahead):
                made[k] = Strip((*strip.legs, leg), strip.back_mm, strip.ahead_mm)
                break
        else:
            made.append(Strip((leg,), back, ahead))
    return tuple(made)


def _same(strip: Strip, leg: Leg, back_mm: float, ahead_mm: float) -> bool:
    a, b = strip.leg.drill, leg.drill
    turns = (a.resultant_deg - b.resultant_deg, a.sightline_deg - b.sightline_deg)
    if strip.leg.drilled != leg.drilled or (strip.leg.kind == "leg") != (leg.kind == "leg"):
        return False
    near = max(abs(strip.back_mm - back_mm), abs(strip.ahead_mm - ahead_mm)) <= SAME_MM
    return near and max(map(abs, turns)) <= SAME_DEG and strip.leg.mortise == leg.mortise


def strip_pieces(assembly: Assembly) -> tuple[Piece, ...]:
    """Every strip of the furniture."""
    return tuple(_piece(assembly, number, strip) for number, strip in enumerate(strips(assembly), 1))


def _piece(assembly: Assembly, number: int, strip: Strip) -> Piece:
    drawing = gather([*_lines(strip), *_words(assembly, strip)])
    points = tuple((leg.name, (0.0, 0.0)) for leg in strip.legs)
    faces = assembly.drilled_faces
    above = bool(assembly.posts or assembly.spindles)
    arrows = "each strip says what its arrow points to" if above else "arrow to the foot"
    notice = f"for the {faces[0].upper()} · {arrows}" if len(faces) == 1 else f"each strip says its face · {arrows}"
    return Piece(f"strip {number}", "strips", "Sightline strips", drawing, "strip", notice, points)


def _lines(strip: Strip) -> Iterator[Drawing | Primitive]:
    half = WIDTH_MM / 2
    start, end = strip.back_mm - RUN_MM, strip.ahead_mm + RUN_MM
    yield box_outline(Box(start, -half, end, half), Role.CUT)
    yield line((start + 2.0, 0.0), (0.0, 0.0), Role.SET_OUT)
    yield arrow((0.0, 0.0), (end - 2.0, 0.0), 8.0, Role.SET_OUT)
    yield cross((0.0, 0.0), 9.0, Role.SET_OUT)
    yield circle((0.0, 0.0), 1.5, Role.SET_OUT)
    for edge in (strip.back_mm, strip.ahead_mm):
        yield line((edge, -half + 4.0), (edge, half - 4.0), Role.SET_OUT)


def _words(assembly: Assembly, strip: Strip) -> Iterator[Text]:
    """Names and angles on the longer side of the centre, clear of line and ticks."""
    lean = strip.leg.drill
    behind = -strip.back_mm >= strip.ahead_mm
    left, right = (strip.back_mm + 4.0, -6.0) if behind else (6.0, strip.ahead_mm - 4.0)
    width = right - left
    sight, complement = sightline_words(strip.leg)

    def fitted(words: str, y: float, height: float, bold: bool = False) -> Text:
        return Text((left, y), shortened(words, width, height, bold), height, bold=bold)

    yield Text((left, 9.0), names_within([leg.name for leg in strip.legs], width, 3.5, bold=True), 3.5, bold=True)
    yield fitted(f"on the {strip.leg.drilled}, centre on the mortise", 3.0, 2.5)
    yield fitted(f"bevel {format_angle(lean.bevel_deg)}  lean {format_angle(lean.resultant_deg)}", -6.5, 3.5, bold=True)
    yield fitted(f"{sight} {complement}", -12.5, 2.5)
    end = "FOOT" if strip.leg.kind == "leg" else "TOP END"
    yield Text((strip.ahead_mm + 1.5, -12.5), end, 3.5, bold=True)
    for edge in (strip.back_mm, strip.ahead_mm):
        yield Text((edge, WIDTH_MM / 2 - 3.2), "edge", 2.0, align="centre")
