"""Drawings and papers that several tests of pages share, and how lettering is measured with shapely."""

from __future__ import annotations

from collections.abc import Iterable
from itertools import combinations

from shapely.geometry import Polygon

from layout.curves import ellipse_curve
from layout.drawing import Drawing, Role, Stroke, Text, gather
from layout.geometry import Box
from layout.operations import text_corners
from layout.piece import Piece
from layout.shapes import box_outline, cross, line, paragraph

NOTICE = "UNDERSIDE · front edge toward you · legs named left lie to your RIGHT"


def seat(width_mm: float, depth_mm: float, name: str = "template underside") -> Piece:
    """An oval blank with a centre line, four centres to prick and its lettering; front edge at y = 0."""
    rim = Stroke(ellipse_curve((0.0, depth_mm / 2), width_mm / 2, depth_mm / 2, 0.0), Role.CUT, closed=True)
    front = (("front left", -0.3, 0.25), ("front right", 0.3, 0.25))
    back = (("back left", -0.28, 0.8), ("back right", 0.28, 0.8))
    points = tuple((leg, (x * width_mm, y * depth_mm)) for leg, x, y in front + back)
    centre = line((0.0, -8.0), (0.0, depth_mm + 8.0), Role.CENTRE)
    parts = [rim, centre, *(cross(p, 8.0, Role.SET_OUT) for _, p in points)]
    parts.append(Text((0.0, depth_mm * 0.6), "UNDERSIDE", 7.0, align="centre", bold=True, over=True))
    return Piece(name, "template", "Seat template, underside", gather(parts), "tile", NOTICE, points)


def strip(length_mm: float, width_mm: float = 32.0, name: str = "strip 1") -> Piece:
    """A strip with a line along its middle, x from 0."""
    half = width_mm / 2
    frame = box_outline(Box(0.0, -half, length_mm, half), Role.CUT)
    middle = line((0.0, 0.0), (length_mm, 0.0), Role.SET_OUT)
    return Piece(name, "strips", "Sightline strips", gather([frame, middle]), "strip", "arrow to the foot")


def card(name: str, width_mm: float = 90.0, height_mm: float = 60.0) -> Piece:
    """A card with its cut frame, its origin at its middle."""
    frame = box_outline(Box(-width_mm / 2, -height_mm / 2, width_mm / 2, height_mm / 2), Role.CUT)
    return Piece(name, "cards", "Angle cards", Drawing((frame,)), "pack", "for boring from the UNDERSIDE", stock="card")


def block(name: str, sentences: int = 20) -> Piece:
    """A block of words of a written sheet."""
    words = "Read this before the first hole is bored. " * sentences
    return Piece(name, "setting-out", "Setting-out sheet", paragraph((3.0, 7.0), words, 3.5, 110.0)[0], "flow")


def texts(drawing: Drawing) -> list[Text]:
    """The lettering of a drawing."""
    return [item for item in drawing.items if isinstance(item, Text)]


def overlapping(lettering: Iterable[Text]) -> list[tuple[str, str]]:
    """The pairs of lines of lettering whose patches share more than a hair of area."""
    patches = [(text.text, Polygon(text_corners(text))) for text in lettering]
    return [(a, b) for (a, p), (b, q) in combinations(patches, 2) if p.intersection(q).area > 1e-3]
