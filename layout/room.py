"""Where lettering finds room: a coarse map of what a drawing has taken, and the free patch nearest to where a label
belongs.

Owns the search only; nothing on a drawing depends on the cell's size but where its words stand.
Imports `geometry` only.
"""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from layout.geometry import Box, Point

# Cells of the map; a seat is some hundred of them across.
CELL_MM = 2.0
# A map never has more cells than this along a side; a large drawing has coarser ones.
MOST_CELLS = 700
# A taken cell costs as much as being this far from the wanted place, where no patch is free.
_TAKEN_COST_MM = 50.0


class Room:
    """A map of free and taken cells inside an outline."""

    def __init__(self, outline: Sequence[Point], edge_mm: float = 0.0) -> None:
        """Room inside the closed `outline` (points), keeping `edge_mm` from it."""
        xs, ys = np.asarray(outline).T
        extent = max(float(np.ptp(xs)), float(np.ptp(ys)))
        self._cell = max(CELL_MM, extent / MOST_CELLS)
        self._origin = (float(xs.min()), float(ys.min()))
        columns = math.ceil(float(np.ptp(xs)) / self._cell)
        rows = math.ceil(float(np.ptp(ys)) / self._cell)
        self._taken = ~_inside(xs, ys, self._origin, self._cell, (rows, columns))
        self.take(outline, edge_mm)

    def take(self, points: Sequence[Point], pad_mm: float) -> None:
        """The cells within about `pad_mm` of the lines from point to point are taken."""
        xs, ys = np.asarray(points, dtype=float).T
        run = np.concatenate(([0.0], np.hypot(np.diff(xs), np.diff(ys)).cumsum()))
        steps = np.linspace(0.0, run[-1], max(2, math.ceil(run[-1] / self._cell * 2) + 1))
        j = ((np.interp(steps, run, xs) - self._origin[0]) // self._cell).astype(int)
        i = ((np.interp(steps, run, ys) - self._origin[1]) // self._cell).astype(int)
        reach = math.ceil(pad_mm / self._cell)
        offsets = np.arange(-reach, reach + 1)
        i, j = (i[:, None, None] + offsets[None, :, None], j[:, None, None] + offsets[None, None, :])
        i, j = np.broadcast_arrays(i, j)
        keep = (i >= 0) & (i < self._taken.shape[0]) & (j >= 0) & (j < self._taken.shape[1])
        self._taken[i[keep], j[keep]] = True

    def take_box(self, box: Box) -> None:
        """The cells of a box are taken."""
        (x, y), cell = self._origin, self._cell
        i0, j0 = max(0, math.floor((box.y0 - y) / cell)), max(0, math.floor((box.x0 - x) / cell))
        self._taken[i0 : max(0, math.ceil((box.y1 - y) / cell)), j0 : max(0, math.ceil((box.x1 - x) / cell))] = True

    def find(self, width_mm: float, height_mm: float, wanted: Point, centred: bool = False) -> Box | None:
        """The free patch of that size whose middle is nearest to `wanted`, and takes it.

        `centred` asks for a middle on the vertical line through `wanted`. None where no patch is free.
        """
        found = self._search(width_mm, height_mm, wanted, centred, crowded=False)
        if found:
            self.take_box(found)
        return found

    def squeeze(self, width_mm: float, height_mm: float, wanted: Point) -> Box:
        """Like `find`, but the least crowded patch where none is free; round `wanted` where the map is smaller."""
        found = self._search(width_mm, height_mm, wanted, centred=False, crowded=True)
        if found is None:
            x, y = wanted
            found = Box(x - width_mm / 2, y - height_mm / 2, x + width_mm / 2, y + height_mm / 2)
        self.take_box(found)
        return found

    def _search(self, width_mm: float, height_mm: float, wanted: Point, centred: bool, crowded: bool) -> Box | None:
        rows, columns = math.ceil(height_mm / self._cell), math.ceil(width_mm / self._cell)
        if rows >= self._taken.shape[0] or columns >= self._taken.shape[1]:
            return None
        total = np.pad(self._taken, ((1, 0), (1, 0))).astype(np.int32).cumsum(0).cumsum(1)
        full = total[rows:, columns:] - total[:-rows, columns:] - total[rows:, :-columns] + total[:-rows, :-columns]
        x = self._origin[0] + (np.arange(full.shape[1]) + columns / 2) * self._cell
        y = self._origin[1] + (np.arange(full.shape[0]) + rows / 2) * self._cell
        cost = np.hypot((x - wanted[0])[None, :], (y - wanted[1])[:, None])
        if centred:
            cost = cost + np.where(np.abs(x - wanted[0]) <= self._cell / 2, 0.0, np.inf)[None, :]
        cost = cost + full * _TAKEN_COST_MM if crowded else np.where(full == 0, cost, np.inf)
        i, j = np.unravel_index(int(np.argmin(cost)), cost.shape)
        if not np.isfinite(cost[i, j]):
            return None
        cx, cy = (wanted[0] if centred else float(x[j])), float(y[i])
        return Box(cx - width_mm / 2, cy - height_mm / 2, cx + width_mm / 2, cy + height_mm / 2)


def _inside(
    xs: NDArray[np.float64], ys: NDArray[np.float64], origin: Point, cell: float, shape: tuple[int, int]
) -> NDArray[np.bool_]:
    """Cells whose middle lies inside the outline, by the even-odd rule, a row at a time."""
    inside = np.zeros(shape, dtype=bool)
    middles = origin[0] + (np.arange(shape[1]) + 0.5) * cell
    x0, y0, x1, y1 = xs[:-1], ys[:-1], xs[1:], ys[1:]
    for row in range(shape[0]):
        y = origin[1] + (row + 0.5) * cell
        cut = (y0 <= y) != (y1 <= y)
        crossings = x0[cut] + (y - y0[cut]) / (y1[cut] - y0[cut]) * (x1[cut] - x0[cut])
        inside[row] = (middles[:, None] > crossings[None, :]).sum(axis=1) % 2 == 1
    return inside
