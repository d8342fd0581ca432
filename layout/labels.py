"""Words on a drawing, set where there is room for them: near what they speak of, off its lines, off one another, and
off the seams once these are known.

Owns where labels stand. Imports layout's ground only.
"""

from __future__ import annotations

import math
from collections.abc import Sequence

from layout.curves import flatten
from layout.drawing import Drawing, Role, Stroke, Text
from layout.geometry import Affine, Box, Point, along, bearing_deg
from layout.lettering import text_width_mm
from layout.operations import polylines, transform
from layout.piece import Label, Piece, Wording
from layout.room import Room
from layout.shapes import LINE_PITCH, line

# Words keep so far from the outline and from other lines.
EDGE_MM, LINE_CLEAR_MM = 3.0, 2.0
# Words further than this from their point are led to it, up to so far from the point.
LEADER_FROM_MM, LEADER_SHORT_MM = 26.0, 15.0
# Clear space beside a block of words; half of it above and below.
CLEAR_MM = 1.0
# Chords of the drawing's curves where room is looked for.
_ROOM_TOLERANCE_MM = 0.5


def block(*lines: tuple[str, float, bool], clear_mm: float = CLEAR_MM) -> Wording:
    """Lines of words (text, capital height in mm, bold), centred one below the other, with clear space round them."""
    width = max(text_width_mm(words, height, bold) for words, height, bold in lines) + 2 * clear_mm
    tall = sum(height * LINE_PITCH for _, height, _ in lines) + clear_mm
    drawn, y = [], (tall - clear_mm) / 2
    for words, height, bold in lines:
        y -= height * LINE_PITCH
        drawn.append(Text((0.0, y + 0.45 * height), words, height, align="centre", bold=bold, over=True))
    return Wording(Drawing(tuple(drawn)), width, tall)


def lettered(piece: Piece) -> Piece:
    """The piece with its labels set: each where it is nearest to its point, or least crowded where there is no room."""
    if not piece.labels:
        return piece
    room = _room(piece)
    return _with(piece, [_placed(label, room) or _squeezed(label, room) for label in piece.labels])


def lettered_off(piece: Piece, strips: Sequence[Box], gaps: Sequence[Box]) -> Piece | None:
    """The piece with its labels set off the strips that pages share, where they find room there; never on a gap, where
    no page is. Boxes in the piece's own mm. None where a label finds no free room off the gaps.
    """
    if not piece.labels:
        return piece
    rooms = (_room(piece, (*gaps, *strips)), _room(piece, gaps))
    found = []
    for label in piece.labels:
        drawn = _placed(label, *rooms)
        if drawn is None:
            return None
        found.append(drawn)
    return _with(piece, found)


def _with(piece: Piece, words: Sequence[Drawing]) -> Piece:
    items = (item for drawing in words for item in drawing.items)
    return piece._replace(drawing=Drawing((*piece.drawing.items, *items)), labels=())


def _room(piece: Piece, taken: Sequence[Box] = ()) -> Room:
    outline, *others = piece.drawing.items
    if not (isinstance(outline, Stroke) and outline.role is Role.CUT and outline.closed):
        raise ValueError(f"{piece.name}: a drawing with labels begins with the closed outline that they stand in")
    room = Room(flatten(outline.curve, _ROOM_TOLERANCE_MM), EDGE_MM)
    for points in polylines(Drawing(tuple(others)), _ROOM_TOLERANCE_MM):
        room.take(points, LINE_CLEAR_MM)
    for label in piece.labels:
        x, y = label.near
        if label.aside_mm:
            room.take_box(Box(x, y, x, y).grown(label.aside_mm))
    for box in taken:
        room.take_box(box)
    return room


def _placed(label: Label, *rooms: Room) -> Drawing | None:
    """The label in the first room where one of its wordings finds a free patch, the fullest first."""
    for room in rooms:
        for wording in label.wordings:
            place = room.find(wording.width_mm, wording.height_mm, label.near)
            if place:
                for other in rooms:
                    other.take_box(place)
                return _set(label, wording, place)
    return None


def _squeezed(label: Label, room: Room) -> Drawing:
    wording = label.wordings[-1]
    return _set(label, wording, room.squeeze(wording.width_mm, wording.height_mm, label.near))


def _set(label: Label, wording: Wording, place: Box) -> Drawing:
    words = transform(wording.drawing, Affine.move(*place.centre))
    return words + _leader(place, label.near) if label.led else words


def _leader(box: Box, point: Point) -> Drawing:
    """A line from words to their point, where they are not plainly beside it."""
    near = (min(max(point[0], box.x0), box.x1), min(max(point[1], box.y0), box.y1))
    if math.dist(near, point) <= LEADER_FROM_MM:
        return Drawing()
    end = along(point, bearing_deg((near[0] - point[0], near[1] - point[1])), LEADER_SHORT_MM)
    return Drawing((line(near, end, Role.FURNITURE),))
