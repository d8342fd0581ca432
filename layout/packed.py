"""Small pieces laid beside one another on shared pages, and long strips cut into overlapping lengths among them.

Owns which part of a piece stands where on such a page. Imports layout's ground, `document`, `marks`, `packing`, `paper`
and `tiling`'s tolerance.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from itertools import pairwise
from typing import NamedTuple

from layout.document import Mark, Placement
from layout.drawing import Drawing, Role, Text, gather
from layout.geometry import Affine, Box, Point
from layout.lettering import shortened
from layout.marks import REACH_MM, dashes, mark_drawing, spread
from layout.operations import polylines, transform
from layout.packing import Item, Spot, pack, sections
from layout.paper import Paper, misfit
from layout.piece import Piece
from layout.shapes import line
from layout.tiling import INK_TOLERANCE_MM, Ink

GAP_MM = 4.0
# Lengths of a strip share at least this much, and a part is tall enough to hold a mark.
LEAST_STRIP_OVERLAP_MM, LEAST_PART_MM = 20.0, 2 * REACH_MM + 1.0
# A part is never shorter than this, or it is all overlap.
LEAST_LENGTH_MM = 60.0
# Marks across a strip: this far apart at least; so far from its edges that the mark and the id above it lie inside.
_APART_MM, _BELOW_MM, _ABOVE_MM = 12.0, REACH_MM + 1.0, 8.0
_LABEL_MM, _LABEL_HEIGHT_MM = 2.5, 5.0


class Part(NamedTuple):
    """A piece, or one length of a strip: what it shows, its marks in the piece's mm, the line below that names it."""

    piece: Piece
    window: Box
    marks: tuple[tuple[str, Point], ...] = ()
    label: str = ""
    seams: Drawing = Drawing()

    @property
    def size_mm(self) -> tuple[float, float]:
        """Width and height with the label."""
        return self.window.width, self.window.height + (_LABEL_HEIGHT_MM if self.label else 0.0)


# One piece's parts; none where a page does not hold them.
Parts = tuple[Part, ...]


class PackedPage(NamedTuple):
    """One page of parts, in page coordinates."""

    size_mm: tuple[float, float]
    placements: tuple[Placement, ...]
    marks: tuple[Mark, ...]
    furniture: Drawing


def misfit_packed(piece: Piece, box: Box, paper: Paper) -> str | None:
    """What is said of a piece (its ink's bounds are `box`) that no page of the paper holds; None where one does."""
    if any(_parts(piece, box, paper, paper.window(size)) for size in paper.page_sizes_mm):
        return None
    needed = min(box.width, LEAST_LENGTH_MM) if piece.handling == "strip" else box.width
    return misfit(piece, box, paper, (needed, box.height + (_LABEL_HEIGHT_MM if needed < box.width else 0.0)))


def pack_pieces(pieces: Sequence[tuple[Piece, Box]], paper: Paper) -> tuple[PackedPage, ...]:
    """The pieces, each with its ink's bounds, on the fewest pages: upright ones unless lying ones save a page.

    Ask `misfit_packed` first.
    """
    whole: list[tuple[PackedPage, ...]] = []
    ways = []
    for size in paper.page_sizes_mm:
        ways.append([_parts(*piece, paper, paper.window(size)) for piece in pieces])
        if all(ways[-1]):
            whole.append(_pages(ways[-1], size, paper))
            if len(whole[-1]) == 1:
                break
    return min(whole, key=len) if whole else _mixed(ways[0], ways[1], paper)


def _mixed(upright: Sequence[Parts], lying: Sequence[Parts], paper: Paper) -> tuple[PackedPage, ...]:
    """Some pieces fit upright pages only and some lying ones only."""
    rest = [parts for parts, fits in zip(lying, upright, strict=True) if not fits]
    sizes = paper.page_sizes_mm
    return (*_pages(upright, sizes[0], paper), *_pages(rest, sizes[1], paper))


def _parts(piece: Piece, box: Box, paper: Paper, window: Box) -> Parts:
    """The piece whole, or a strip in as many lengths as it takes; none where the window does not hold them."""
    whole = Part(piece, box)
    if _fits(whole, window):
        return (whole,)
    longest = _longest(box.height + _LABEL_HEIGHT_MM, window)
    return _lengths(piece, box, paper, longest) if piece.handling == "strip" and longest >= LEAST_LENGTH_MM else ()


def _fits(part: Part, window: Box) -> bool:
    (width, height), (room, rise) = part.size_mm, (window.width, window.height)
    return (width <= room and height <= rise) or (height <= room and width <= rise)


def _longest(across_mm: float, window: Box) -> float:
    """How long a part so wide may be, either way round; 0 where it fits neither."""
    ways = ((window.width, window.height), (window.height, window.width))
    return max((along for along, across in ways if across_mm <= across), default=0.0)


def _lengths(piece: Piece, box: Box, paper: Paper, longest_mm: float) -> Parts:
    extra = max(0.0, LEAST_PART_MM - box.height) / 2
    box = Box(box.x0, box.y0 - extra, box.x1, box.y1 + extra)
    overlap = max(paper.overlap_mm, LEAST_STRIP_OVERLAP_MM)
    ends = [(box.x0 + start, box.x0 + end) for start, end in sections(box.width, longest_mm, overlap)]
    seams = [(before[1] + after[0]) / 2 for before, after in pairwise(ends)]
    joined = _strip_marks(piece, box, seams)
    return tuple(_strip_part(piece, box, ends, k, seams, joined) for k in range(len(ends)))


def _strip_marks(piece: Piece, box: Box, seams: Sequence[float]) -> list[list[tuple[str, Point]]]:
    """For each seam its marks, one or two across the strip, away from its ink."""
    ink = Ink(piece.drawing, polylines(piece.drawing, INK_TOLERANCE_MM), Affine.identity())
    low, high = box.y0 + _BELOW_MM, box.y1 - _ABOVE_MM
    middle = (box.y0 + box.y1) / 2
    wanted = [low, high] if high - low >= _APART_MM else [middle]
    marks: list[list[tuple[str, Point]]] = []
    count = 0
    for x in seams:
        taken = ink.spans(Box(x - REACH_MM, box.y0 + 1.0, x + REACH_MM, box.y1 - 1.0), 1)
        places = spread(wanted, (min(low, middle), max(high, middle)), taken, _APART_MM)
        marks.append([(f"S{count + k}", (x, y)) for k, y in enumerate(places, 1)])
        count += len(places)
    return marks


def _strip_part(
    piece: Piece,
    box: Box,
    ends: Sequence[tuple[float, float]],
    k: int,
    seams: Sequence[float],
    joined: Sequence[Sequence[tuple[str, Point]]],
) -> Part:
    start, end = ends[k]
    before, after = (joined[k - 1] if k else ()), (joined[k] if k < len(seams) else ())
    drawn = [mark_drawing(at, mark_id, "side", (1.0, 1.0)) for mark_id, at in before]
    drawn += [mark_drawing(at, mark_id, "side", (-1.0, 1.0)) for mark_id, at in after]
    if before:
        x = seams[k - 1]
        drawn.append(Drawing(tuple(dashes((x, box.y0), (x, box.y1), 1, [at[1] for _, at in before]))))
    if after:
        drawn.append(Drawing((line((seams[k], box.y0), (seams[k], box.y1), Role.FURNITURE),)))
    lay = f": cut at the dashed line, lay over part {k}" if k else ""
    label = f"{piece.name}, part {k + 1} of {len(ends)}{lay}"
    return Part(piece, Box(start, box.y0, end, box.y1), (*before, *after), label, gather(drawn))


def _pages(parts_of: Sequence[Parts], size_mm: tuple[float, float], paper: Paper) -> tuple[PackedPage, ...]:
    parts, window = [part for parts in parts_of for part in parts], paper.window(size_mm)
    items = [Item(k, *part.size_mm) for k, part in enumerate(parts)]
    spots = pack(items, (window.width, window.height), GAP_MM)
    count = max((spot.page for spot in spots), default=-1) + 1
    found = [[(parts[spot.key], spot) for spot in spots if spot.page == k] for k in range(count)]
    return tuple(_page(group, size_mm, window) for group in found)


def _page(group: Sequence[tuple[Part, Spot]], size_mm: tuple[float, float], window: Box) -> PackedPage:
    placed = [(part, _to_page(part, spot, window)) for part, spot in group]
    return PackedPage(
        size_mm,
        tuple(Placement(part.piece, to_page, part.window) for part, to_page in placed),
        tuple(mark for part, to_page in placed for mark in _marks(part, to_page)),
        gather(drawing for part, to_page in placed for drawing in _furniture(part, to_page)),
    )


def _marks(part: Part, to_page: Affine) -> Iterator[Mark]:
    return (Mark(mark_id, part.piece.name, to_page.point(at), at) for mark_id, at in part.marks)


def _to_page(part: Part, spot: Spot, window: Box) -> Affine:
    """From the piece's mm: its part's lower left corner to the origin, a quarter turn if turned, then to the spot."""
    _, height = part.size_mm
    to_item = Affine.move(-part.window.x0, height - part.window.height - part.window.y0)
    turned = Affine.turn(90.0).then(Affine.move(height, 0.0)) if spot.turned else Affine.identity()
    return to_item.then(turned).then(Affine.move(window.x0 + spot.x_mm, window.y0 + spot.y_mm))


def _furniture(part: Part, to_page: Affine) -> Iterator[Drawing]:
    if part.label:
        words = shortened(part.label, part.window.width - 1.0, _LABEL_MM)
        at = (part.window.x0 + 0.5, part.window.y0 - _LABEL_HEIGHT_MM + 1.3)
        yield transform(part.seams + Drawing((Text(at, words, _LABEL_MM, Role.FURNITURE),)), to_page)
