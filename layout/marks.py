"""How tiled pages find one another: registration marks in the shared strips, the lines to cut along, and their words.

Owns where marks stand and how they and the cut lines are drawn. Imports layout's ground, `document`, `furniture` and
`tiling`.
Pages are laid in reading order, each over the ones to its left and above it: its left and top edges are cut along the
seam, the middle line of the shared strip. The marks' centres lie on it, so that half circles on the cut edge close on
the halves of the page below. Places are laid coordinates (see `tiling`) until a page is drawn.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Sequence
from typing import Literal, NamedTuple

from layout.document import Mark
from layout.drawing import Align, Drawing, Primitive, Role, Text, gather
from layout.furniture import SMALL_MM, patch_height_mm
from layout.geometry import Affine, Box, Point, box_of
from layout.lettering import FALL, text_width_mm
from layout.operations import text_corners
from layout.shapes import circle, cross, line
from layout.tiling import Span, Tile, Tiling, overlap_box, span_of

RADIUS_MM, REACH_MM = 3.0, 4.5
# Two marks on a strip stand at least this far apart; more fix the angle no better than far ones do.
APART_MM = 25.0
# Free length of a strip above which it takes two marks, and three.
_TWO_MM, _THREE_MM = 45.0, 140.0
# A mark's centre keeps so far from the ends of the free length, so that it and its id clear the next page's strip.
_END_MM = 8.0
# What a mark and its id take along the seam, and half of what they take across it.
_BEFORE_MM, _AFTER_MM, _ACROSS_MM = 5.5, 8.5, 6.0
_STEP_MM = 3.0
_DASH_MM, _DASH_GAP_MM, _DASH_CLEAR_MM = 5.0, 3.0, 1.0

Kind = Literal["side", "stack", "corner"]


class Joint(NamedTuple):
    """Two tiles that share a strip, the earlier first: side by side, one above the other, or corner to corner."""

    first: Tile
    second: Tile
    kind: Kind
    strip: Box

    @property
    def axis(self) -> int:
        """The coordinate that runs along the seam: 1 (y) for tiles side by side."""
        return 1 if self.kind == "side" else 0

    def on_seam(self, along_mm: float) -> Point:
        """The seam's point at that coordinate along it."""
        x, y = self.strip.centre
        return (x, along_mm) if self.axis else (along_mm, y)


class SeamMark(NamedTuple):
    """One mark: its id and its place, laid mm."""

    id: str
    joint: Joint
    at: Point


def joints(tiling: Tiling) -> tuple[Joint, ...]:
    """Every pair of kept tiles that share a strip; corner to corner only where no third tile links them."""
    return tuple(joint for tile in tiling.tiles for joint in _joints_of(tiling, tile))


def _joints_of(tiling: Tiling, tile: Tile) -> Iterator[Joint]:
    right, below = tiling.beside(tile, 1, 0), tiling.beside(tile, 0, 1)
    if right:
        yield Joint(tile, right, "side", overlap_box(tile.window, right.window))
    if below:
        yield Joint(tile, below, "stack", overlap_box(tile.window, below.window))
    for step, link in ((1, right), (-1, tiling.beside(tile, -1, 0))):
        other = tiling.beside(tile, step, 1)
        if other and not link and not below:
            yield Joint(tile, other, "corner", overlap_box(tile.window, other.window))


def place_marks(tiling: Tiling) -> tuple[SeamMark, ...]:
    """The marks of every shared strip, away from ink where the strip has room, numbered along the piece."""
    found = [(joint, at) for joint in joints(tiling) for at in _places(tiling, joint)]
    return tuple(SeamMark(str(k), joint, at) for k, (joint, at) in enumerate(found, 1))


def _places(tiling: Tiling, joint: Joint) -> list[Point]:
    if joint.kind == "corner":
        return [joint.strip.centre]
    low, high = _free_length(tiling, joint)
    low, high = low + _END_MM, high - _END_MM
    middle = joint.strip.centre
    corridor = box_of([(joint.on_seam(low)), (joint.on_seam(high))]).grown(_ACROSS_MM)
    taken = tiling.laid_ink.spans(corridor, joint.axis)
    wanted = _wanted(low, high)
    found = spread(wanted, (low, high), taken, APART_MM)
    return [joint.on_seam(along) for along in found] or [middle]


def _free_length(tiling: Tiling, joint: Joint) -> Span:
    """The stretch of the strip that no third tile shows."""
    low, high = span_of(joint.strip, joint.axis)
    others = (tile.window for tile in tiling.tiles if tile not in (joint.first, joint.second))
    for window in others:
        if window.meets(joint.strip):
            start, end = span_of(window, joint.axis)
            low, high = (end, high) if start <= low else (low, start)
    return low, high


def _wanted(low: float, high: float) -> list[float]:
    if high - low < _TWO_MM:
        return [(low + high) / 2]
    return [low, high] if high - low < _THREE_MM else [low, high, (low + high) / 2]


def spread(wanted: Sequence[float], limits: Span, taken: Sequence[Span], apart_mm: float) -> list[float]:
    """For each wanted place the nearest one whose mark lies on no taken stretch, at least `apart_mm` from the others.

    Where every place is taken, the one that lies on least.
    """
    low, high = limits
    count = int((high - low) / _STEP_MM)
    candidates = [*(low + k * _STEP_MM for k in range(count + 1)), high, *wanted]
    covered = {c: sum(1 for start, end in taken if start < c + _AFTER_MM and end > c - _BEFORE_MM) for c in candidates}
    found: list[float] = []
    for target in wanted:
        apart = [c for c in candidates if all(abs(c - other) >= apart_mm for other in found)]
        if apart:
            found.append(min(apart, key=lambda c: (covered[c], abs(c - target))))
    return sorted(found)


def mark_drawing(at: Point, mark_id: str, kind: Kind, own: Point) -> Drawing:
    """A circle and a cross with the id beside it, on the side of the page that stays: `own` points there."""
    shape = gather([circle(at, RADIUS_MM, Role.FURNITURE), cross(at, REACH_MM, Role.FURNITURE)])
    beside = {"side": (own[0], 3.9), "stack": (3.5, own[1]), "corner": (2.8 * own[0], 2.2 * own[1])}
    across, up = beside[kind]
    foot = up if up > 0 else up - SMALL_MM
    align: Align = "left" if across > 0 else "right"
    words = Text((at[0] + across, at[1] + foot), mark_id, SMALL_MM, Role.FURNITURE, align)
    return Drawing((*shape.items, words))


def page_marks(tiling: Tiling, marks: Sequence[SeamMark], tile: Tile, to_page: Affine) -> tuple[Mark, ...]:
    """The marks of a page; their drawing_mm are the piece's own."""
    back = tiling.laid.inverse()
    places = ((mark.id, back.point(mark.at)) for mark in marks if tile in (mark.joint.first, mark.joint.second))
    return tuple(Mark(mark_id, tiling.piece.name, to_page.point(at), at) for mark_id, at in places)


def seam_drawing(tiling: Tiling, marks: Sequence[SeamMark], tile: Tile, to_page: Affine) -> Drawing:
    """The marks, cut lines and covered lines of a page, in page coordinates."""
    shift = tiling.laid.inverse().then(to_page)
    own = [mark for mark in marks if tile in (mark.joint.first, mark.joint.second)]
    drawn = [mark_drawing(shift.point(m.at), m.id, m.joint.kind, _inward(m, tile)) for m in own]
    taken = [mark_box(shift.point(m.at)) for m in own]
    for words, edge in _edges(tiling, tile):
        centres = [shift.point(m.at) for m in own]
        drawn.append(edge.lines(shift, centres))
        label = _label(words, edge, shift, taken, tiling.laid_ink.spans(edge.words_box(), edge.axis))
        drawn.append(label)
        taken += [box_of(text_corners(t)) for t in label.items if isinstance(t, Text)]
    return gather(drawn)


def mark_box(at: Point) -> Box:
    """What a mark and its id take, whichever side the id stands on."""
    return Box(at[0], at[1], at[0], at[1]).grown(_AFTER_MM - 1.0)


def _inward(mark: SeamMark, tile: Tile) -> Point:
    """Which way from the mark the middle of the tile lies, by signs."""
    x, y = tile.window.centre
    return (1.0 if x > mark.at[0] else -1.0, 1.0 if y > mark.at[1] else -1.0)


class _Edge(NamedTuple):
    """A line across a page, on a seam or on the window's edge, laid mm, and which side of it its words stand on."""

    start: Point
    end: Point
    dashed: bool
    words_side: float

    @property
    def axis(self) -> int:
        return 1 if self.start[0] == self.end[0] else 0

    def words_box(self) -> Box:
        """Where the words may stand, laid mm: beside the line, on their side."""
        deep = self.words_side * (patch_height_mm(SMALL_MM) + 1.0)
        x, y = self.end
        return box_of([self.start, (x + deep, y) if self.axis else (x, y + deep)])

    def lines(self, shift: Affine, marks: Iterable[Point]) -> Drawing:
        """The line in page coordinates; a dashed one leaves out the dashes that would run into a mark."""
        start, end = shift.point(self.start), shift.point(self.end)
        if not self.dashed:
            return Drawing((line(start, end, Role.FURNITURE),))
        near = [m[self.axis] for m in marks if abs(m[1 - self.axis] - start[1 - self.axis]) < REACH_MM]
        return Drawing(tuple(dashes(start, end, self.axis, near)))


def dashes(start: Point, end: Point, axis: int, marks: Sequence[float]) -> Iterator[Primitive]:
    """Short strokes along an upright or level line, clear of the marks at those places along it."""
    low = start[axis]
    for mark in [*sorted(marks), math.inf]:
        stop = min(mark - REACH_MM - _DASH_CLEAR_MM, end[axis])
        while low < stop - _DASH_CLEAR_MM:
            tip = min(low + _DASH_MM, stop)
            ends = ((start[0], low), (start[0], tip)) if axis else ((low, start[1]), (tip, start[1]))
            yield line(*ends, Role.FURNITURE)
            low = tip + _DASH_GAP_MM
        low = mark + REACH_MM + _DASH_CLEAR_MM


def cuts(tiling: Tiling, tile: Tile) -> dict[str, Tile | None]:
    """The sides of a page that carry a dashed line, each with the tile under its seam.

    None where the page's edge alone is cut off, lest its margin hide part of a page that it reaches by a corner.
    """
    left, right = tiling.beside(tile, -1, 0), tiling.beside(tile, 1, 0)
    above = tiling.beside(tile, 0, -1)
    above_left, above_right = tiling.beside(tile, -1, -1), tiling.beside(tile, 1, -1)
    found: dict[str, Tile | None] = {}
    if left or above_left:
        found["left"] = left
    if above or above_left or above_right:
        found["top"] = above
    # A page cut along the seam above it ends below the corner; one that keeps its top reaches past its right neighbour.
    if above_right and not (right and above):
        found["right"] = None
    return found


def _edges(tiling: Tiling, tile: Tile) -> Iterator[tuple[str, _Edge]]:
    """The lines of a page and their words: where to cut, and the seams that the next page covers."""
    box, right, below = tile.window, tiling.beside(tile, 1, 0), tiling.beside(tile, 0, 1)
    for side, under in cuts(tiling, tile).items():
        words = f"cut here, lay over {under.name}" if under else "cut here"
        yield words, _cut_edge(side, box, overlap_box(box, under.window) if under else None)
    if right:
        yield f"{right.name} lies over this", _upright(overlap_box(box, right.window).centre[0], box, False, 1.0)
    if below:
        yield f"{below.name} lies over this", _level(overlap_box(box, below.window).centre[1], box, False, -1.0)


def _cut_edge(side: str, box: Box, strip: Box | None) -> _Edge:
    """Along the middle of the strip, the words on the part that is cut away; or along the window's edge, within it."""
    if side == "top":
        return _level(strip.centre[1], box, True, 1.0) if strip else _level(box.y1, box, True, -1.0)
    if side == "left" and strip:
        return _upright(strip.centre[0], box, True, -1.0)
    return _upright(box.x0, box, True, 1.0) if side == "left" else _upright(box.x1, box, True, -1.0)


def _upright(x: float, box: Box, dashed: bool, words_side: float) -> _Edge:
    return _Edge((x, box.y0), (x, box.y1), dashed, words_side)


def _level(y: float, box: Box, dashed: bool, words_side: float) -> _Edge:
    return _Edge((box.x0, y), (box.x1, y), dashed, words_side)


def _label(words: str, edge: _Edge, shift: Affine, taken: Sequence[Box], ink: Sequence[Span]) -> Drawing:
    """The words along a line, near its middle, clear of marks and other words and if possible of ink.

    None where marks and other words leave no room: the page's foot names the neighbours too. `ink` is laid mm.
    """
    start, half = shift.point(edge.start), text_width_mm(words, SMALL_MM) / 2 + 1.0
    off = start[edge.axis] - edge.start[edge.axis]
    low, high = start[edge.axis] + half, off + edge.end[edge.axis] - half
    middle = (low + high) / 2

    def cost(along: float) -> tuple[int, float]:
        return sum(p + off < along + half and q + off > along - half for p, q in ink), abs(along - middle)

    count = max(0, int((high - low) / _STEP_MM))
    for along in sorted((low + k * _STEP_MM for k in range(count + 1)), key=cost):
        text = _words_at(words, edge, start, along)
        patch = box_of(text_corners(text))
        if not any(patch.meets(box) for box in taken):
            return Drawing((text,))
    return Drawing()


def _words_at(words: str, edge: _Edge, start: Point, along: float) -> Text:
    """Lettering parallel to the line: upright along a level one, read from the right along an upright one."""
    above = FALL * SMALL_MM + 0.4
    beyond = patch_height_mm(SMALL_MM) - FALL * SMALL_MM + 0.4
    if edge.axis == 0:
        foot = start[1] + above if edge.words_side > 0 else start[1] - beyond
        return Text((along, foot), words, SMALL_MM, Role.FURNITURE, "centre")
    foot = start[0] - above if edge.words_side < 0 else start[0] + beyond
    return Text((foot, along), words, SMALL_MM, Role.FURNITURE, "centre", 90.0)
