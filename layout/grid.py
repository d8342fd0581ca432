"""The page grid of a drawing larger than a page: how many windows, where, and which of them are left out.

Owns the choice alone, in plain millimetres: no paper, no marks, no PDF. Imports `geometry`, `cover`,
`seams` and numpy. Axes: x to the right, y up. A grid is windows of one size at a pitch of window less overlap;
neighbours share a strip as wide as the overlap, and the seam between two kept neighbours is that strip's middle line.

How: over a range of offsets `cover` bounds the pages from below, and the range's size bounds the points' clearance from
above, so a search that divides ranges leaves out only what cannot be better. What it takes has been counted on the ink
itself, not on samples, so that every bit of ink lies on a kept page.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import NamedTuple, TypeVar

import numpy as np
import numpy.typing as npt

from layout.cover import (
    COVER_TOLERANCE_MM,
    Axis,
    Bools,
    Floats,
    Frame,
    Ints,
    Sheet,
    cover,
    hits,
    inked,
    joined,
    spans,
    weigh,
)
from layout.geometry import Box, Point
from layout.seams import crossings, crowding, point_clearance, unevenness

# A point to prick should not lie nearer to a seam than this.
SEAM_MARGIN_MM = 12.0
# Short of that margin the search goes on only for a clearance larger by this; the last bit is left to the final sweep.
CLEARANCE_STEP_MM = 0.5
# How much one step of the search may look at: zones of all its grids, grids counted exactly.
_MOST_ZONES = 60_000
_MOST_ROUNDS = 6
_MOST_LOOKS = 250
_MOST_PROBES = 8
_MOST_TRIES = 3

Kind = TypeVar("Kind", np.float64, np.int64)


class GridRequest(NamedTuple):
    """What is to be laid over pages: polylines (n, 2) in mm that stand for all ink, and what seams should avoid."""

    ink: tuple[Floats, ...]
    outline: tuple[Floats, ...]
    keep_clear: tuple[Point, ...]
    overlap_mm: float


class GridChoice(NamedTuple):
    """The window size chosen and (column, row, window) of each page kept; column 0 is leftmost, row 0 the top."""

    candidate: int
    windows: tuple[tuple[int, int, Box], ...]
    clearance_mm: float


class _Grid(NamedTuple):
    """A grid counted exactly; `rank` orders grids, the best lowest."""

    rank: tuple[float, ...]
    frame: Frame
    x: float
    y: float
    kept: Bools
    clearance: float


def choose_grid(request: GridRequest, window_sizes: Sequence[tuple[float, float]]) -> GridChoice:
    """The best grid over all offsets and window sizes (width, height), mm.

    First by fewest pages, linking ones included, then by the points' distance from seams as far as it matters, then by
    fewest seams that the outline crosses, then by the order of the sizes, by little ink in shared strips, by even
    margins. Raises ValueError where there is no ink, no size, or a window not larger than two overlaps.
    """
    if not window_sizes or min(min(size) for size in window_sizes) <= 2 * request.overlap_mm:
        raise ValueError(f"each window must be larger than two overlaps of {request.overlap_mm} mm: {window_sizes}")
    sheet = Sheet(request.ink, request.outline)
    x0, y0, x1, y1 = sheet.box
    for k, (width, height) in enumerate(window_sizes):
        if x1 - x0 <= width + COVER_TOLERANCE_MM and y1 - y0 <= height + COVER_TOLERANCE_MM:
            left, low = (x0 + x1 - width) / 2, (y0 + y1 - height) / 2
            return GridChoice(k, ((0, 0, Box(left, low, left + width, low + height)),), math.inf)
    frames = _frames(sheet.box, request.overlap_mm, window_sizes)
    return _choice(_Search(sheet, frames, request.keep_clear, SEAM_MARGIN_MM + request.overlap_mm / 2).best())


def _frames(ink: Box, gap: float, window_sizes: Sequence[tuple[float, float]]) -> list[Frame]:
    sizes = list(dict.fromkeys(window_sizes))
    return [
        Frame(window_sizes.index((w, h)), Axis(ink.x0, ink.x1, w, gap), Axis(ink.y0, ink.y1, h, gap)) for w, h in sizes
    ]


def _choice(grid: _Grid) -> GridChoice:
    rows, columns = np.nonzero(grid.kept)
    top, first = int(rows.max()), int(columns.min())
    x, y = grid.frame.x, grid.frame.y
    windows = []
    for row, column in sorted(zip(rows.tolist(), columns.tolist(), strict=True), key=lambda p: (-p[0], p[1])):
        left, low = grid.x + column * x.pitch, grid.y + row * y.pitch
        windows.append((column - first, top - row, Box(left, low, left + x.window, low + y.window)))
    return GridChoice(grid.frame.candidate, tuple(windows), grid.clearance)


class _Search:
    """Grids of several window sizes sought together, so that what one reaches spares the others."""

    def __init__(self, sheet: Sheet, frames: list[Frame], points: Sequence[Point], enough: float) -> None:
        self.sheet, self.frames, self.enough = sheet, frames, enough
        self.points: Floats = np.array(points, np.float64).reshape(-1, 2)
        self.marks = {frame: (self._marks(frame.x, 0), self._marks(frame.y, 1)) for frame in frames}
        self.found: _Grid | None = None

    def best(self) -> _Grid:
        """The best grid of all."""
        meshes = [(frame, *self._mesh(frame)) for frame in self.frames]
        meshes.sort(key=lambda mesh: (mesh[2].min(), mesh[0].candidate))
        for frame, boxes, forced in meshes:
            self._probe(frame, _middle(boxes[forced == forced.min()]))
        for frame, boxes, forced in meshes:
            self._narrow(frame, boxes, forced)
        assert self.found is not None  # the first offset looked at gives one
        for frame in (f for f, _, forced in meshes if forced.min() <= self.found.kept.sum()):
            xs, ys = (_regular(axis, self._fine(frame)) for axis in (frame.x, frame.y))
            self._sweep(frame, *(np.append(at, marks) for at, marks in zip((xs, ys), self.marks[frame], strict=True)))
        for step in (self.sheet.cell, self.sheet.cell / 10) if self.found.clearance < self.enough else ():
            near = np.linspace(-step, step, 21)
            self._sweep(self.found.frame, self.found.x + near, self.found.y + near)
        return self.found

    def _fine(self, frame: Frame) -> int:
        return max(12, min(64, int(math.sqrt(_MOST_ZONES / frame.zones))))

    def _mesh(self, frame: Frame) -> tuple[Floats, Ints]:
        """All offsets as boxes (x0, x1, y0, y1), points and lines among them, and the pages that each forces."""
        count = self._fine(frame) // 3
        axes = zip((frame.x, frame.y), self.marks[frame], strict=True)
        xs, ys = (_ranges(np.append(_regular(axis, count), marks)) for axis, marks in axes)
        forced = self._forced(frame, xs, ys)
        row, column = np.divmod(np.arange(forced.size), len(xs))
        return np.hstack((xs[column], ys[row])), forced.ravel()

    def _forced(self, frame: Frame, xs: Floats, ys: Floats) -> Ints:
        """Pages forced by ink over products of ranges: (len(ys), len(xs))."""
        (x0, x1), (y0, y1) = (
            [end[:, ::2].ravel() for end in spans(axis, self.sheet.cell, *ranges.T)]
            for axis, ranges in ((frame.x, xs), (frame.y, ys))
        )
        bands = self.sheet.ink_table[y1] - self.sheet.ink_table[y0]
        hit = bands.take(x1, axis=1) > bands.take(x0, axis=1)
        forced: Ints = hit.reshape(len(ys), frame.y.cells, len(xs), frame.x.cells).sum((1, 3))
        return forced

    def _marks(self, axis: Axis, d: int) -> Floats:
        """Offsets at which something happens: ink begins or ends at a window's edge, is centred, points are clear."""
        ends = [axis.low, axis.high - axis.overlap]
        centred = [(axis.low + axis.high - axis.overlap + k * axis.pitch) / 2 for k in (0, 1)]
        on_seam = np.unique(axis.offsets(self.points[:, d] - axis.overlap / 2))
        between = (on_seam + np.append(on_seam[1:], on_seam[:1] + axis.pitch)) / 2
        clear = np.concatenate((between, on_seam - self.enough, on_seam + self.enough))
        parts = [line[:, d] for line in self.sheet.largest]
        bounds = [edge for at in parts for edge in (at.min(), at.max() - axis.overlap)]
        wall = self.sheet.segments[self.sheet.segments[:, d] == self.sheet.segments[:, d + 2]]
        long = wall[np.argsort(-np.abs(wall[:, 3 - d] - wall[:, 1 - d]), kind="stable")[:4], d]
        marks = [*ends, *centred, *bounds, *long, *(long - axis.overlap), *clear[:24]]
        return axis.offsets(np.array(marks))

    def _narrow(self, frame: Frame, boxes: Floats, forced: Ints) -> None:
        """Divide boxes of offsets while some may hold a better grid, and count the best looking centres exactly."""
        open_ = self._may_beat(forced, np.full(len(boxes), np.inf))
        boxes = boxes[open_][np.argsort(forced[open_], kind="stable")][: self._room(frame)]
        for _ in range(_MOST_ROUNDS):
            if not len(boxes):
                return
            zones = self._zones(frame, boxes)
            lower, _ = weigh(zones)
            size = (boxes[:, 1::2] - boxes[:, ::2]).max(1)
            upper = point_clearance(frame, zones[:, ::2, ::2], _middle(boxes), self.points, own_only=True) + size
            self._probe(frame, _middle(boxes[self._may_beat(lower, upper)]))
            left = np.flatnonzero(self._may_beat(lower, upper) & (size > self.sheet.cell))
            left = left[np.lexsort((-upper[left], lower[left]))]
            boxes = _quarters(boxes[left[: self._room(frame) // 4]])

    def _room(self, frame: Frame) -> int:
        return max(300, _MOST_ZONES // frame.zones)

    def _zones(self, frame: Frame, boxes: Floats) -> Bools:
        x, y = spans(frame.x, self.sheet.cell, *boxes[:, :2].T), spans(frame.y, self.sheet.cell, *boxes[:, 2:].T)
        return hits(self.sheet.ink_table, x, y)

    def _may_beat(self, lower: Ints, upper: Floats) -> Bools:
        if self.found is None:
            return np.ones(len(lower), np.bool_)
        pages, clearance = int(self.found.kept.sum()), self.found.clearance
        clearer = (upper >= min(clearance + CLEARANCE_STEP_MM, SEAM_MARGIN_MM)) & (clearance < SEAM_MARGIN_MM)
        better: Bools = (lower < pages) | ((lower == pages) & clearer)
        return better

    def _probe(self, frame: Frame, at: Floats) -> None:
        """Count exactly what looks best among the offsets (n, 2), as long as it may be better than what is found."""
        at = _thinned(at, _MOST_LOOKS)
        lower, kept = weigh(self._zones(frame, np.repeat(at, 2, axis=1)))
        # A range turned inside out widens the zones by more than samples may be out: pages that surely suffice.
        inside_out = 1.5 * self.sheet.cell * np.array([1, -1, 1, -1])
        ample, _ = weigh(self._zones(frame, np.repeat(at, 2, axis=1) + inside_out))
        clear = np.minimum(point_clearance(frame, kept, at, self.points), self.enough)
        for _ in range(_MOST_TRIES):
            may = np.flatnonzero(self._may_beat(lower, clear))
            if not len(may):
                return
            hopeful, careful = (may[np.lexsort((-clear[may], pages[may]))] for pages in (lower, ample))
            chosen = np.unique(np.append(_thinned(hopeful, _MOST_PROBES // 2), careful[: _MOST_PROBES // 2]))
            before = self.found
            self._count(frame, at[chosen])
            if self.found is before:
                return
            lower[chosen] = np.iinfo(np.int64).max

    def _count(self, frame: Frame, at: Floats) -> None:
        """Take the best of the grids at the offsets (n, 2), counted exactly, if it is better than what is found."""
        kept = np.array([joined(cover(zones)) for zones in inked(frame, self.sheet.segments, at)])
        pages = kept.sum((1, 2))
        least = pages == pages.min()
        at, kept = at[least], kept[least]
        clearance = point_clearance(frame, kept, at, self.points)
        clear = -np.round(np.minimum(clearance, self.enough), 6)
        crossed, crowded, uneven = self._lesser(frame, kept, at)
        k = np.lexsort((at[:, 0], -at[:, 1], uneven, crowded, crossed, clear))[0]
        rank = (pages.min(), clear[k], crossed[k], frame.candidate, crowded[k], uneven[k], -at[k, 1], at[k, 0])
        if self.found is None or rank < self.found.rank:
            x, y = at[k].tolist()
            self.found = _Grid(tuple(map(float, rank)), frame, x, y, kept[k], float(clearance[k]))

    def _lesser(self, frame: Frame, kept: Bools, at: Floats) -> tuple[Ints, Ints, Floats]:
        """What tells apart grids with as many pages, as clear: seams crossed, ink in strips, uneven margins."""
        crossed, crowded = crossings(self.sheet, frame, kept, at), crowding(self.sheet, frame, kept, at)
        return crossed, crowded, np.round(unevenness(frame, kept, at), 6)

    def _sweep(self, frame: Frame, xs: Floats, ys: Floats) -> None:
        """Among a mesh of offsets, take the best by all that tells grids apart, counted exactly until one holds."""
        assert self.found is not None
        pages = int(self.found.kept.sum())
        xs, ys = np.unique(frame.x.offsets(xs)), np.unique(frame.y.offsets(ys))
        forced = self._forced(frame, np.repeat(xs[:, None], 2, 1), np.repeat(ys[:, None], 2, 1))
        row, column = np.nonzero(forced <= pages)
        at = _thinned(np.stack((xs[column], ys[row]), axis=1), self._room(frame))
        lower, kept = weigh(self._zones(frame, np.repeat(at, 2, axis=1)))
        clear = -np.round(np.minimum(point_clearance(frame, kept, at, self.points), self.enough), 6)
        good = (lower <= pages) & (clear <= self.found.rank[1])
        at, kept, clear = at[good], kept[good], clear[good]
        crossed, uneven = crossings(self.sheet, frame, kept, at), np.round(unevenness(frame, kept, at), 6)
        order = np.lexsort((at[:, 0], -at[:, 1], uneven, crossed, clear))[: _MOST_TRIES * _MOST_PROBES]
        before = self.found
        for some in np.array_split(order, range(_MOST_PROBES, len(order), _MOST_PROBES)):
            better = [(pages, clear[k], crossed[k], frame.candidate, uneven[k]) < before.rank[:5] for k in some]
            if self.found is not before or not any(better):
                return
            self._count(frame, at[some[better]])


def _regular(axis: Axis, count: int) -> Floats:
    return np.linspace(axis.low - axis.pitch, axis.low, count + 1)


def _middle(boxes: Floats) -> Floats:
    middle: Floats = (boxes[:, 1::2] + boxes[:, ::2]) / 2
    return middle


def _thinned(rows: npt.NDArray[Kind], most: int) -> npt.NDArray[Kind]:
    """At most so many of the rows, evenly taken."""
    return rows[:: max(1, math.ceil(len(rows) / most))]


def _ranges(marks: Floats) -> Floats:
    """The marks and the gaps between them, as (low, high)."""
    marks = np.unique(np.round(marks, 9))
    return np.vstack((np.repeat(marks[:, None], 2, axis=1), np.stack((marks[:-1], marks[1:]), axis=1)))


def _quarters(boxes: Floats) -> Floats:
    """Each box cut in two along both axes, or along the one in which it has a size."""
    for k in (0, 2):
        flat = boxes[:, k] == boxes[:, k + 1]
        below, above = boxes.copy(), boxes[~flat]
        below[~flat, k + 1] = above[:, k] = (above[:, k] + above[:, k + 1]) / 2
        boxes = np.vstack((below, above))
    return boxes
