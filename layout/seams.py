"""What tells page grids apart that have as many pages: how clear the points lie, what the seams cross, even margins.

Owns these measures alone, of many grids at a time; which grid is best is `grid`'s, what lies on a page is `cover`'s.
Imports `cover` only, and numpy. Millimetres; offsets are lower left corners, (n, 2); `kept` is (n, rows, columns)
of pages, rows counted upward.
"""

from __future__ import annotations

import numpy as np

from layout.cover import Axis, Bools, Floats, Frame, Ints, Sheet, counts, hits

# Grids whose shared strips hold about as much ink are told apart by their margins.
CROWD_STEP_MM = 40.0


def _beside(axis: Axis, offset: Floats, at: Floats) -> tuple[Floats, Ints, Ints]:
    """Place from the first cell's lower edge, the cell between seams, and the other column that shows the place."""
    place = at[None, :] - offset[:, None] - axis.overlap / 2
    own = np.clip(np.floor(place / axis.pitch), 0, axis.cells - 1).astype(np.int64)
    into = place - own * axis.pitch
    other = own - (into < axis.overlap / 2) + (into > axis.pitch - axis.overlap / 2)
    return place, own, np.clip(other, 0, axis.cells - 1)


def point_clearance(frame: Frame, kept: Bools, at: Floats, points: Floats, own_only: bool = False) -> Floats:
    """Smallest distance of a point to a side of its cell beyond which a page is kept: (n,), inf where there is none.

    A point whose own cell's page is left out is measured in the cell of the page that shows it; with `own_only`, not.
    """
    across, column, other_column = _beside(frame.x, at[:, 0], points[:, 0])
    up, row, other_row = _beside(frame.y, at[:, 1], points[:, 1])
    n = np.arange(len(at))[:, None]
    held = np.pad(kept, ((0, 0), (1, 1), (1, 1)))
    if not own_only:
        for r, c in ((row, other_column), (other_row, column), (other_row, other_column)):
            move = ~kept[n, row, column] & kept[n, r, c]
            row, column = np.where(move, r, row), np.where(move, c, column)
    away_x, away_y = across - column * frame.x.pitch, up - row * frame.y.pitch
    sides = (
        (away_x, held[n, row + 1, column]),
        (away_x - frame.x.pitch, held[n, row + 1, column + 2]),
        (away_y, held[n, row, column + 1]),
        (away_y - frame.y.pitch, held[n, row + 2, column + 1]),
    )
    reach = np.full(across.shape, np.inf)
    for away, neighbour in sides:
        reach = np.minimum(reach, np.where(neighbour & kept[n, row, column], np.abs(away), np.inf))
    nearest: Floats = reach.min(1, initial=np.inf)
    return nearest


def _seam_cells(axis: Axis, cell: float, offset: Floats) -> tuple[tuple[Ints, Ints], tuple[Ints, Ints]]:
    """Cells that each seam runs through, and those that each window shows: where a page beyond is left out, a seam runs
    on to the window's edge.
    """
    cells = int((axis.high - axis.low) / cell) + 1

    def index(at: Floats) -> Ints:
        return np.clip(np.floor((at - axis.low) / cell).astype(np.int64), 0, cells)

    starts = offset[:, None] + np.arange(axis.cells) * axis.pitch
    seams = starts[:, 1:] + axis.overlap / 2
    on_seam = np.floor((seams - axis.low) / cell).astype(np.int64)
    shown = (index(starts), np.minimum(index(starts + axis.window) + 1, cells))
    return (np.clip(on_seam, 0, cells), np.clip(on_seam + 1, 0, cells)), shown


def _strip_cells(axis: Axis, cell: float, offset: Floats) -> tuple[tuple[Ints, Ints], tuple[Ints, Ints]]:
    """Cells of each strip that two windows share, and those that each window shows."""
    _, (first, last) = _seam_cells(axis, cell, offset)
    return (first[:, 1:], last[:, :-1]), (first, last)


def crossings(sheet: Sheet, frame: Frame, kept: Bools, at: Floats) -> Ints:
    """How many seams between kept pages the outline crosses, to within a cell of the table: (n,)."""
    if not len(sheet.outline):
        return np.zeros(len(at), np.int64)
    seams_x, between_x = _seam_cells(frame.x, sheet.cell, at[:, 0])
    seams_y, between_y = _seam_cells(frame.y, sheet.cell, at[:, 1])
    upright = hits(sheet.outline_table, seams_x, between_y) & kept[:, :, :-1] & kept[:, :, 1:]
    level = hits(sheet.outline_table, between_x, seams_y) & kept[:, :-1] & kept[:, 1:]
    count: Ints = upright.sum((1, 2)) + level.sum((1, 2))
    return count


def crowding(sheet: Sheet, frame: Frame, kept: Bools, at: Floats) -> Ints:
    """How much ink lies in strips that two kept pages share, in steps of CROWD_STEP_MM: (n,).

    Marks, and words to be read, are in each other's way there; a centre line along a seam is cut away.
    """
    strips_x, shown_x = _strip_cells(frame.x, sheet.cell, at[:, 0])
    strips_y, shown_y = _strip_cells(frame.y, sheet.cell, at[:, 1])
    upright = counts(sheet.ink_table, strips_x, shown_y) * (kept[:, :, :-1] & kept[:, :, 1:])
    level = counts(sheet.ink_table, shown_x, strips_y) * (kept[:, :-1] & kept[:, 1:])
    steps: Ints = ((upright.sum((1, 2)) + level.sum((1, 2))) * sheet.cell / CROWD_STEP_MM).astype(np.int64)
    return steps


def unevenness(frame: Frame, kept: Bools, at: Floats) -> Floats:
    """How far the margins on opposite sides of the kept range differ, mm: (n,)."""
    total = np.zeros(len(at))
    for axis, offset, side in ((frame.x, at[:, 0], 1), (frame.y, at[:, 1], 2)):
        used: Bools = np.any(kept, axis=side)
        first, last = used.argmax(1), axis.cells - 1 - used[:, ::-1].argmax(1)
        total += np.abs(axis.low + axis.high - 2 * offset - (first + last) * axis.pitch - axis.window)
    return total
