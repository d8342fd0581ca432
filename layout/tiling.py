"""A piece spread over overlapping pages: which page, which turn, which tiles, their names and their neighbours.

Owns the tiles of one piece. Imports layout's ground, `paper` and `grid`.
Laid coordinates are the piece's own, turned as it lies on the pages: x to the right, y up, pages upright. Columns count
from the left, rows from the top. Windows are laid boxes, mm.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from itertools import pairwise, product
from typing import NamedTuple

import numpy as np

from layout.drawing import Drawing, Primitive, Role, Stroke, Text
from layout.geometry import Affine, Box, Point, box_of
from layout.grid import GridRequest, choose_grid
from layout.labels import lettered, lettered_off
from layout.operations import bounds, polylines
from layout.paper import Paper
from layout.piece import Piece

# Chords that stand for the drawing while pages are chosen stay this near to it.
INK_TOLERANCE_MM = 0.1
# Lines are up to 0.5 mm wide (ISO 128-2) and chords are off by the tolerance: what counts as ink is grown by this.
INK_MARGIN_MM = 0.5

Cell = tuple[int, int]
Span = tuple[float, float]


def overlap_box(p: Box, q: Box) -> Box:
    """What two boxes that meet have in common."""
    return Box(max(p.x0, q.x0), max(p.y0, q.y0), min(p.x1, q.x1), min(p.y1, q.y1))


class Ink:
    """A drawing's ink as laid segments, to ask where along a line it lies."""

    def __init__(self, drawing: Drawing, ink: Sequence[Sequence[Point]], laid: Affine) -> None:
        """`ink` is the drawing as polylines, item for item, in its own mm; `laid` turns it."""
        turned = [[laid.point(p) for p in points] for points in ink]
        self._runs = [(box_of(points), points) for points in turned]
        lettering = [isinstance(item, Text) for item in drawing.items]
        self._patches = [box for (box, _), is_text in zip(self._runs, lettering, strict=True) if is_text]

    def spans(self, box: Box, axis: int) -> list[Span]:
        """The stretches of coordinate `axis` where ink lies in the box."""
        found: list[Span] = [span_of(overlap_box(patch, box), axis) for patch in self._patches if patch.meets(box)]
        for around, points in self._runs:
            if around.meets(box):
                for p, q in pairwise(points):
                    found += _clipped_span(p, q, box, axis)
        return found


def span_of(box: Box, axis: int) -> Span:
    """The stretch of a coordinate (0 x, 1 y) that a box takes."""
    return (box[axis], box[axis + 2])


def _clipped_span(p: Point, q: Point, box: Box, axis: int) -> list[Span]:
    """The stretch of coordinate `axis` that the segment covers inside the box (Liang and Barsky's clip)."""
    t0, t1 = 0.0, 1.0
    for k in (0, 1):
        run = q[k] - p[k]
        low, high = box[k] - p[k], box[k + 2] - p[k]
        if run == 0.0:
            if low > 0.0 or high < 0.0:
                return []
            continue
        enter, leave = sorted((low / run, high / run))
        t0, t1 = max(t0, enter), min(t1, leave)
        if t0 > t1:
            return []
    run = q[axis] - p[axis]
    ends = sorted((p[axis] + t0 * run, p[axis] + t1 * run))
    return [(ends[0], ends[1])]


class Tile(NamedTuple):
    """One page of a piece; `name` is None where it is the only one."""

    name: str | None
    column: int
    row: int
    window: Box


@dataclass(frozen=True)
class Tiling:
    """How a piece lies on its pages: their size, the turn from its own mm to laid mm, the tiles as they are read.

    `ink` is the drawing as polylines in the piece's own mm, item for item; left out where there is one tile.
    """

    piece: Piece
    size_mm: tuple[float, float]
    laid: Affine
    tiles: tuple[Tile, ...]
    ink: tuple[tuple[Point, ...], ...] = ()

    @cached_property
    def laid_ink(self) -> Ink:
        """Where the ink lies, laid mm."""
        return Ink(self.piece.drawing, self.ink, self.laid)

    @cached_property
    def _by_cell(self) -> dict[Cell, Tile]:
        return {(tile.column, tile.row): tile for tile in self.tiles}

    def at(self, column: int, row: int) -> Tile | None:
        """The tile of a cell, if it was kept."""
        return self._by_cell.get((column, row))

    def beside(self, tile: Tile, columns: int, rows: int) -> Tile | None:
        """The tile so many columns to the right and rows down."""
        return self.at(tile.column + columns, tile.row + rows)

    def to_page(self, tile: Tile, paper: Paper) -> Affine:
        """From the piece's own mm to the page's: the turn, then a shift."""
        window = paper.window(self.size_mm)
        return self.laid.then(Affine.move(window.x0 - tile.window.x0, window.y0 - tile.window.y0))

    def window_of_piece(self, tile: Tile) -> Box:
        """The tile's window in the piece's own mm."""
        return tile.window.mapped(self.laid.inverse())


def ink_box(piece: Piece) -> Box:
    """The bounds of a piece's ink, in its own mm."""
    return bounds(piece.drawing).grown(INK_MARGIN_MM)


def tile_piece(piece: Piece, ink: Box, paper: Paper) -> Tiling:
    """The piece (its ink's bounds are `ink`) on one page where it fits, else over the fewest overlapping ones.

    The tiling's piece has its labels set, off the seams where there is room.
    """
    return _on_one_page(piece, ink, paper) or _on_several(piece, paper)


def _on_one_page(piece: Piece, ink: Box, paper: Paper) -> Tiling | None:
    for turn_deg, size in product((0.0, 90.0), paper.page_sizes_mm):
        laid, window = Affine.turn(turn_deg), paper.window(size)
        if _fits(ink.mapped(laid), window):
            whole = lettered(piece)
            box = (ink_box(whole) if piece.labels else ink).mapped(laid)
            if _fits(box, window):
                return Tiling(whole, size, laid, (Tile(None, 0, 0, _centred(box, window)),))
    return None


def _fits(box: Box, window: Box) -> bool:
    return box.width <= window.width and box.height <= window.height


def _on_several(piece: Piece, paper: Paper) -> Tiling:
    """Pages for the lines, and words where these pages leave room; or pages for lines and words as they come."""
    tiling = _gridded(piece, paper)
    if not piece.labels:
        return tiling
    strips, gaps = _shared_and_empty(tiling, paper.overlap_mm)
    whole = lettered_off(piece, strips, gaps)
    if whole is None:
        return _gridded(lettered(piece), paper)
    words = Drawing(whole.drawing.items[len(piece.drawing.items) :])
    return replace(tiling, piece=whole, ink=tiling.ink + _inked(words))


def _shared_and_empty(tiling: Tiling, overlap_mm: float) -> tuple[list[Box], list[Box]]:
    """The strips that kept pages share, and the windows of the pages left out among them, in the piece's own mm."""
    kept = {(tile.column, tile.row): tile.window for tile in tiling.tiles}
    start, known = next(iter(kept.items()))
    columns, rows = (range(max(cell[k] for cell in kept) + 1) for k in (0, 1))
    strips, gaps = [], []
    for cell in product(columns, rows):
        if cell not in kept:
            gaps.append(_window_at(cell, start, known, overlap_mm))
            continue
        for beside in ((cell[0] + 1, cell[1]), (cell[0], cell[1] + 1)):
            if beside in kept:
                strips.append(overlap_box(kept[cell], kept[beside]))
    back = tiling.laid.inverse()
    return [box.mapped(back) for box in strips], [box.mapped(back) for box in gaps]


def _inked(drawing: Drawing) -> tuple[tuple[Point, ...], ...]:
    return tuple(tuple(points) for points in polylines(drawing, INK_TOLERANCE_MM))


def _centred(box: Box, window: Box) -> Box:
    x, y = box.centre
    return Box(x - window.width / 2, y - window.height / 2, x + window.width / 2, y + window.height / 2)


def _gridded(piece: Piece, paper: Paper) -> Tiling:
    """The grid is chosen in the piece's own mm, where a turned page is a window turned back."""
    choices = list(product((0.0, 90.0), paper.page_sizes_mm))
    ink = _inked(piece.drawing)
    outline = (points for points, item in zip(ink, piece.drawing.items, strict=True) if is_outline(item))
    request = GridRequest(
        ink=tuple(map(np.array, ink)),
        outline=tuple(map(np.array, outline)),
        keep_clear=tuple(point for _, point in piece.points),
        overlap_mm=paper.overlap_mm - 2 * INK_MARGIN_MM,
    )
    grid = choose_grid(request, [_window_size(paper, size, turn) for turn, size in choices])
    turn_deg, size = choices[grid.candidate]
    laid = Affine.turn(turn_deg)
    kept = {(column, row): box.grown(INK_MARGIN_MM) for column, row, box in grid.windows}
    if turn_deg:
        kept = {(row, -column): box for (column, row), box in kept.items()}
    windows = {cell: box.mapped(laid) for cell, box in kept.items()}
    return Tiling(piece, size, laid, _named(windows), ink)


def _window_size(paper: Paper, size_mm: tuple[float, float], turn_deg: float) -> tuple[float, float]:
    window = paper.window(size_mm).grown(-INK_MARGIN_MM)
    return (window.height, window.width) if turn_deg else (window.width, window.height)


def is_outline(item: Primitive) -> bool:
    """Whether wood or paper is cut along it."""
    return isinstance(item, Stroke) and item.role is Role.CUT


def _named(windows: dict[Cell, Box]) -> tuple[Tile, ...]:
    """Tiles in reading order, the first column A, the top row 1."""
    first = min(column for column, _ in windows)
    top = min(row for _, row in windows)
    cells = sorted(windows, key=lambda cell: (cell[1], cell[0]))
    return tuple(
        Tile(f"{column_name(column - first)}{row - top + 1}", column - first, row - top, windows[column, row])
        for column, row in cells
    )


def column_name(column: int) -> str:
    """A to Z, then AA, AB, ..."""
    letters = ""
    while column >= 0:
        column, letter = divmod(column, 26)
        letters = chr(ord("A") + letter) + letters
        column -= 1
    return letters


def _window_at(cell: Cell, known: Cell, box: Box, overlap_mm: float) -> Box:
    dx = (cell[0] - known[0]) * (box.width - overlap_mm)
    dy = (known[1] - cell[1]) * (box.height - overlap_mm)
    return Box(box.x0 + dx, box.y0 + dy, box.x1 + dx, box.y1 + dy)


def neighbour_names(tiling: Tiling, tile: Tile) -> tuple[tuple[str, str], ...]:
    """Each side with the name of the tile there, or "none"."""
    sides: tuple[tuple[str, Point], ...] = (("left", (-1, 0)), ("right", (1, 0)), ("above", (0, -1)), ("below", (0, 1)))
    found = ((side, tiling.beside(tile, int(dx), int(dy))) for side, (dx, dy) in sides)
    return tuple((side, (other.name or "none") if other else "none") for side, other in found)
