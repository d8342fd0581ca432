"""Which pages of a grid have ink, the fewest of them that show all of it, and what links these.

Owns the ink of a drawing as the choice of a grid sees it, a grid's zones and the cover of these by pages; which grid is
best is `grid`'s. Imports `geometry` only, and numpy. Millimetres; axes: x to the right, y up; rows count upward.

Along each axis a grid makes alternate zones: those that one column of windows alone shows, and the strips that two
share. Ink in the first kind forces a page, ink in a strip asks for one of its pages. For many grids at a time this is
judged on samples of the ink in a summed table, which never asks too much; for one grid on the ink itself, cut at the
zones' edges.
"""

from __future__ import annotations

import math
from collections.abc import Iterable
from functools import cached_property
from itertools import product
from typing import NamedTuple

import numpy as np
import numpy.typing as npt

from layout.geometry import Box

# Ink that leaves a window by no more than this counts as shown by it.
COVER_TOLERANCE_MM = 1e-6
# Samples of the ink, and cells of the table that counts them, are no finer than this nor more than so many.
FINEST_CELL_MM = 1.0
MOST_CELLS = 400_000
# Sets of pages tried for the smallest before the next best is taken.
_MOST_COVERS = 3000

Floats = npt.NDArray[np.float64]
Ints = npt.NDArray[np.int64]
Bools = npt.NDArray[np.bool_]
Table = npt.NDArray[np.int32]
Page = tuple[int, int]


class Axis(NamedTuple):
    """One axis of a grid: the ink's extent and the windows' size along it. Offsets run from low - pitch to low."""

    low: float
    high: float
    window: float
    overlap: float

    @property
    def pitch(self) -> float:
        """From one window's edge to the next one's, mm."""
        return self.window - self.overlap

    @property
    def cells(self) -> int:
        """Windows that hold the ink at every offset in range."""
        return max(1, math.ceil((self.high - self.low - self.overlap) / self.pitch - 1e-9) + 1)

    def offsets(self, edges: Floats) -> Floats:
        """The offsets in range that put some window's lower edge at the edges."""
        return self.low - (self.low - edges) % self.pitch


class Frame(NamedTuple):
    """A window size as the search sees it."""

    candidate: int
    x: Axis
    y: Axis

    @property
    def zones(self) -> int:
        """Zones of both axes together."""
        return (2 * self.x.cells - 1) * (2 * self.y.cells - 1)


class Sheet:
    """The ink as segments (x0, y0, x1, y1), and tables that count its samples in any rectangle of cells."""

    def __init__(self, ink: Iterable[Floats], outline: Iterable[Floats]) -> None:
        polylines = [np.asarray(line, np.float64) for line in ink if len(line)]
        if not polylines:
            raise ValueError("there is no ink to lay over pages")
        self.segments = _segments(polylines)
        self.largest = sorted(polylines, key=lambda line: -float(np.ptp(line, axis=0).sum()))[:4]
        self.outline = _segments(np.asarray(line, np.float64) for line in outline if len(line))
        low = np.minimum(self.segments[:, :2].min(0), self.segments[:, 2:].min(0))
        high = np.maximum(self.segments[:, :2].max(0), self.segments[:, 2:].max(0))
        self.low, self.size = low, high - low
        self.box = Box(float(low[0]), float(low[1]), float(high[0]), float(high[1]))
        self.cell = max(FINEST_CELL_MM, math.sqrt(self.box.width * self.box.height / MOST_CELLS), *self.size / 20_000)

    @cached_property
    def ink_table(self) -> Table:
        """Counts of samples of all ink."""
        return self._table(self.segments)

    @cached_property
    def outline_table(self) -> Table:
        """Counts of samples of the outline."""
        return self._table(self.outline)

    def _table(self, segments: Floats) -> Table:
        """Sums of the cells that hold a sample, over all cells below and left; samples lie a cell apart at most."""
        across, up = (self.size / self.cell).astype(int) + 1
        steps = np.ceil(np.hypot(*(segments[:, 2:] - segments[:, :2]).T) / self.cell).astype(int) + 1
        owner = np.repeat(np.arange(len(segments)), steps)
        t = (np.arange(len(owner)) - np.repeat(np.cumsum(steps) - steps, steps)) / np.maximum(steps - 1, 1)[owner]
        start = segments[owner, :2]
        at = ((start + t[:, None] * (segments[owner, 2:] - start) - self.low) / self.cell).astype(int)
        at = np.clip(at, 0, (across - 1, up - 1))
        table = np.zeros((up + 1, across + 1), np.int32)
        table[at[:, 1] + 1, at[:, 0] + 1] = 1
        np.cumsum(table, axis=1, out=table)
        return np.cumsum(table, axis=0, out=table)


def _segments(lines: Iterable[Floats]) -> Floats:
    """Rows of both ends of each segment; a polyline of one point is a segment of no length."""
    parts = [np.hstack((line[:-1], line[1:]) if len(line) > 1 else (line, line)) for line in lines]
    return np.vstack(parts) if parts else np.zeros((0, 4))


def spans(axis: Axis, cell: float, low: Floats, high: Floats) -> tuple[Ints, Ints]:
    """Cells wholly inside each zone of an axis for every offset from `low` to `high`: two ends, (n, 2 cells - 1).

    Even zones are shown by one column alone. An odd one, for either neighbour to show, is widened by both of theirs:
    that asks for no more than they do, and keeps the bound sharp over a range. Nothing lies beyond the outer columns.
    """
    k = np.arange(axis.cells) * axis.pitch
    start, stop = high[:, None] + k + axis.overlap, low[:, None] + k + axis.pitch
    start[:, 0], stop[:, -1] = -np.inf, np.inf
    starts, stops = np.empty((len(low), 2 * axis.cells - 1)), np.empty((len(low), 2 * axis.cells - 1))
    starts[:, ::2], starts[:, 1::2], stops[:, ::2], stops[:, 1::2] = start, start[:, :-1], stop, stop[:, 1:]
    cells = int((axis.high - axis.low) / cell) + 1
    first = np.clip(np.ceil((starts - axis.low + COVER_TOLERANCE_MM) / cell), 0, cells).astype(np.int64)
    last = np.clip(np.floor((stops - axis.low - COVER_TOLERANCE_MM) / cell), 0, cells).astype(np.int64)
    return first, np.maximum(first, last)


def hits(table: Table, x: tuple[Ints, Ints], y: tuple[Ints, Ints]) -> Bools:
    """Whether a sample lies in each product of spans: (n, rows, columns)."""
    hit: Bools = counts(table, x, y) > 0
    return hit


def counts(table: Table, x: tuple[Ints, Ints], y: tuple[Ints, Ints]) -> Ints:
    """How many cells with a sample each product of spans holds: (n, rows, columns)."""
    flat, stride = table.ravel(), table.shape[1]
    x0, x1 = (a[:, None, :] for a in x)
    y0, y1 = (a[:, :, None] * stride for a in y)
    inside: Ints = flat.take(y1 + x1) - flat.take(y1 + x0) - flat.take(y0 + x1) + flat.take(y0 + x0)
    return inside


def _shown(kept: Bools) -> Bools:
    """Which zones the kept pages show: (n, rows, columns) of pages to (n, 2 rows - 1, 2 columns - 1) of zones."""
    n, rows, columns = kept.shape
    shown = np.empty((n, 2 * rows - 1, 2 * columns - 1), np.bool_)
    shown[:, ::2, ::2] = kept
    shown[:, ::2, 1::2] = kept[:, :, :-1] | kept[:, :, 1:]
    shown[:, 1::2] = shown[:, :-2:2] | shown[:, 2::2]
    return shown


def _pages(row: int, column: int) -> list[Page]:
    """The pages that show a zone."""
    return [(r, c) for r in {row // 2, (row + 1) // 2} for c in {column // 2, (column + 1) // 2}]


def weigh(zones: Bools) -> tuple[Ints, Bools]:
    """Of many grids: how many pages each needs at least, and a likely set of them.

    At least means: those that ink forces, and one for each of the strips left that have no page in common.
    """
    kept = zones[:, ::2, ::2].copy()
    taken, lower = kept.copy(), kept.sum((1, 2))
    unmet = zones & ~_shown(kept)
    for row, column in sorted(np.argwhere(unmet.any(0)).tolist(), key=lambda z: (z[0] % 2 + z[1] % 2, z)):
        rows, columns = np.transpose(_pages(row, column))
        alone = unmet[:, row, column] & ~taken[:, rows, columns].any(1)
        lower += alone
        taken[:, rows, columns] |= alone[:, None]
        kept[:, row // 2, column // 2] |= unmet[:, row, column] & ~kept[:, rows, columns].any(1)
    return lower, kept


def _places(axis: Axis, offset: Floats, at: Floats) -> Ints:
    """The zone of each coordinate; what touches a strip is in it."""
    k = np.clip(np.floor((at - offset) / axis.pitch), 0, axis.cells - 1)
    into = at - offset - k * axis.pitch
    shared_below = (into <= axis.overlap + COVER_TOLERANCE_MM) & (k > 0)
    shared_above = (into >= axis.pitch - COVER_TOLERANCE_MM) & (k < axis.cells - 1)
    return (2 * k - shared_below + (shared_above & ~shared_below)).astype(np.int64)


def _cuts(axis: Axis, offset: Floats, start: Floats, run: Floats) -> Floats:
    """Where along each segment (0 to 1) it crosses the edges of zones, (segments, edges); 0 or 1 where it does not."""
    edges = offset + np.arange(1, axis.cells) * axis.pitch
    edges = np.hstack((edges, edges + axis.overlap))
    return np.clip((edges - start) / np.where(run == 0.0, 1.0, run), 0.0, 1.0)


def inked(frame: Frame, segments: Floats, at: Floats) -> Bools:
    """The zones of grids at offsets (n, 2) in which ink lies, from segments cut at every edge that they cross."""
    zones = np.zeros((len(at), 2 * frame.y.cells - 1, 2 * frame.x.cells - 1), np.bool_)
    columns = _places(frame.x, at[:, 0, None, None], segments[:, ::2])
    rows = _places(frame.y, at[:, 1, None, None], segments[:, 1::2])
    zones[np.arange(len(at))[:, None, None], rows, columns] = True
    grid, owner = np.nonzero((columns[:, :, 0] != columns[:, :, 1]) | (rows[:, :, 0] != rows[:, :, 1]))
    x, y = at[grid, :1], at[grid, 1:]
    start, run = segments[owner, :2], segments[owner, 2:] - segments[owner, :2]
    cuts = (_cuts(frame.x, x, start[:, :1], run[:, :1]), _cuts(frame.y, y, start[:, 1:], run[:, 1:]))
    t = np.sort(np.hstack((np.zeros_like(x), *cuts, np.ones_like(x))), axis=1)
    t = (t[:, 1:] + t[:, :-1]) / 2
    column, row = _places(frame.x, x, start[:, :1] + t * run[:, :1]), _places(frame.y, y, start[:, 1:] + t * run[:, 1:])
    zones[grid[:, None], row, column] = True
    return zones


def cover(zones: Bools) -> Bools:
    """The fewest pages that show all zones with ink; among those, what the order of search finds first."""
    kept = zones[::2, ::2].copy()
    needs = [frozenset(_pages(*zone)) for zone in np.argwhere(zones & ~_shown(kept[None])[0]).tolist()]
    for page in _fewest(sorted(needs, key=lambda need: (len(need), sorted(need)))):
        kept[page] = True
    return kept


def _fewest(needs: list[frozenset[Page]]) -> list[Page]:
    """The smallest set of pages that meets every need, sought with one page more until it is found."""
    budget = [_MOST_COVERS]

    def apart(left: list[frozenset[Page]]) -> int:
        taken: set[Page] = set()
        count = 0
        for need in left:
            if taken.isdisjoint(need):
                taken |= need
                count += 1
        return count

    def meet(left: list[frozenset[Page]], pages: int) -> list[Page] | None:
        if not left:
            return []
        budget[0] -= 1
        if apart(left) > pages and budget[0] > 0:
            return None
        for page in sorted(left[0], key=lambda p: (-sum(p in need for need in left), p)):
            found = meet([need for need in left if page not in need], pages - 1)
            if found is not None:
                return [page, *found]
        return None

    pages = apart(needs)
    while (found := meet(needs, pages)) is None:
        pages += 1
    return found


def joined(kept: Bools) -> Bools:
    """The kept pages (rows, columns), with linking ones added where some share no strip with the others.

    Such pages could not be laid truly: what links them is found along a row, then along a column, the nearest first.
    """
    linked = kept.copy()
    while True:
        island, rest = _island({(r, c) for r, c in np.argwhere(linked).tolist()})
        if not rest:
            return linked
        start, end = min(product(sorted(island), sorted(rest)), key=lambda pair: _steps(*pair))
        rows, columns = sorted((start[0], end[0])), sorted((start[1], end[1]))
        linked[start[0], columns[0] : columns[1] + 1] = True
        linked[rows[0] : rows[1] + 1, end[1]] = True


def _island(pages: set[Page]) -> tuple[set[Page], set[Page]]:
    """The pages that hang together with the first by whole sides, and the rest: a corner would not fix the angle."""
    rest = set(pages)
    found: set[Page] = set()
    ahead = {min(rest)}
    while ahead:
        row, column = ahead.pop()
        rest.discard((row, column))
        found.add((row, column))
        ahead |= rest & {(row + 1, column), (row - 1, column), (row, column + 1), (row, column - 1)}
    return found, rest


def _steps(p: Page, q: Page) -> int:
    return abs(p[0] - q[0]) + abs(p[1] - q[1])
