"""Written sheets: blocks set below one another in order, in columns, on as many pages as they take.

Owns the order and the places of blocks. Imports `geometry` only.
Places are mm in a window whose lower left corner is the origin; y up.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import NamedTuple

from layout.geometry import Box

GAP_MM = 6.0


class Block(NamedTuple):
    """A block's size."""

    width_mm: float
    height_mm: float


class BlockPlace(NamedTuple):
    """Where the lower left corner of a block lies; pages count from 0."""

    page: int
    x_mm: float
    y_mm: float


def flow(blocks: Sequence[Block], window: Box, gap_mm: float = GAP_MM) -> tuple[BlockPlace, ...]:
    """The blocks down the columns of the pages, in order; a column is as wide as the widest block.

    Raises ValueError where a block is larger than the window: callers ask `fits` first.
    """
    if not all(fits(block, window) for block in blocks):
        raise ValueError("a block is larger than the window")
    pitch = max((block.width_mm for block in blocks), default=0.0) + gap_mm
    columns = max(1, int((window.width + gap_mm + 1e-9) / pitch))
    places: list[BlockPlace] = []
    column, top = 0, window.height
    for block in blocks:
        if block.height_mm > top + 1e-9:
            column, top = column + 1, window.height
        page, across = divmod(column, columns)
        places.append(BlockPlace(page, across * pitch, top - block.height_mm))
        top -= block.height_mm + gap_mm
    return tuple(places)


def fits(block: Block, window: Box) -> bool:
    """Whether a block lies in a window unturned."""
    return block.width_mm <= window.width and block.height_mm <= window.height
