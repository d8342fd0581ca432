"""Tables and sentences as plain text in so many columns, for a terminal.

Owns how they are set; what they say is `listings`'. Imports `listings` only.
"""

from __future__ import annotations

import textwrap
from collections.abc import Iterator, Sequence

from jigs.listings import Listing

WIDTH = 80
# Columns stand so far apart, or where that is more than there is room for, the second.
_GAPS = (2, 1)
# Names get what the numbers leave, but no less than this.
_LEAST_NAME = 10


def text_table(listing: Listing) -> list[str]:
    """The table with its title; names wider than their column are broken in lines, numbers stand on the last one."""
    cells = [*zip(*listing.heads, strict=True), *listing.rows]
    gap, wide = _widths(listing.names, [max(len(row[k]) for row in cells) for k in range(len(listing.heads))])
    return [listing.title, *(line for row in cells for line in _row(row, listing.names, wide, " " * gap))]


def _widths(names: int, wanted: Sequence[int]) -> tuple[int, list[int]]:
    """The gap between columns and the width of each, of which the first `names` are names."""
    gap = next((g for g in _GAPS if _free(names, wanted, g) >= _LEAST_NAME * names), _GAPS[-1])
    most = max(_free(names, wanted, gap) // names, _LEAST_NAME) if names else 0
    return gap, [*(min(width, most) for width in wanted[:names]), *wanted[names:]]


def _free(names: int, wanted: Sequence[int], gap: int) -> int:
    return WIDTH - sum(wanted[names:]) - gap * (len(wanted) - 1)


def _row(row: Sequence[str], names: int, wide: Sequence[int], gap: str) -> Iterator[str]:
    parts = [textwrap.wrap(cell, width) or [""] for cell, width in zip(row[:names], wide, strict=False)]
    count = max(map(len, parts), default=1)
    for k in range(count):
        cells = [(part[k] if k < len(part) else "").ljust(width) for part, width in zip(parts, wide, strict=False)]
        if k == count - 1:
            cells += [cell.rjust(width) for cell, width in zip(row[names:], wide[names:], strict=True)]
        yield gap.join(cells).rstrip()


def sentences(title: str, notes: Sequence[str]) -> list[str]:
    """Notes under a title, broken to the width; without a title where that is empty."""
    lines = [title] if title else []
    for note in notes:
        lines += textwrap.wrap(note, WIDTH)
    return lines
