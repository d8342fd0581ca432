"""Blocks of a written sheet as drawings: tables in ruled rows, and lists of paragraphs.

Owns how they look and where they are parted so that each fits a page; what they say is for their callers. Imports
layout's ground only. A block hangs from y = 0 down, from x = 0 to WIDTH_MM.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from typing import NamedTuple

from layout.drawing import Drawing, Primitive, Role, Text, gather
from layout.lettering import wrap
from layout.shapes import LINE_PITCH, line, paragraph

# Every block is at most so wide.
WIDTH_MM = 180.0
HEAD_MM, BODY_MM = 3.5, 2.5
# Rows of a table in one block at most: with its heads and a note below it stays on the lowest page there is.
ROWS = 24
# From row to row, and from line to line within one.
_ROW_MM, _LINE_MM = 6.0, BODY_MM * LINE_PITCH
_ROWS_MM = ROWS * _ROW_MM
# Lettering keeps off the column to its left by so much.
_GUTTER_MM = 1.5
# Where paragraphs begin, behind their number.
_INDENT_MM = 7.0
# Lines of a list in one block at most.
_LIST_LINES = 22


class Column(NamedTuple):
    """A column: its head in two lines, its width, and whether its cells are words (set left) or numbers (right)."""

    first: str
    second: str
    width_mm: float
    words: bool = False

    @property
    def room_mm(self) -> float:
        """For the lettering of a cell."""
        return self.width_mm - _GUTTER_MM


class _Line(NamedTuple):
    """One line of lettering of a row, and whether the row begins and ends with it."""

    cells: tuple[str, ...]
    first: bool
    last: bool

    @property
    def height_mm(self) -> float:
        """What it takes of the table."""
        return _ROW_MM if self.first else _LINE_MM


def tables(title: str, columns: Sequence[Column], rows: Sequence[Sequence[str]]) -> Iterator[Drawing]:
    """A table in as many blocks as it takes, each with title and heads; a cell wider than its column is broken in
    lines.
    """
    for k, lines in enumerate(_parted([_row_lines(columns, row) for row in rows])):
        yield _table(_continued(title, k), columns, lines)


def _continued(title: str, before: int) -> str:
    return f"{title} (continued)" if before else title


def _row_lines(columns: Sequence[Column], row: Sequence[str]) -> list[_Line]:
    wrapped = [wrap(cell, c.room_mm, BODY_MM, bold=True) for c, cell in zip(columns, row, strict=True)]
    count = max(map(len, wrapped))
    cells = [tuple(lines[k] if k < len(lines) else "" for lines in wrapped) for k in range(count)]
    return [_Line(line, k == 0, k == count - 1) for k, line in enumerate(cells)]


def _parted(rows: Sequence[list[_Line]]) -> Iterator[list[_Line]]:
    """Rows in blocks; one that is higher than a block by itself is parted between its lines."""
    block: list[_Line] = []
    taken = 0.0
    for row in rows:
        height = sum(one.height_mm for one in row)
        if block and height <= _ROWS_MM < taken + height + 1e-9:
            yield block
            block, taken = [], 0.0
        for one in row:
            if block and taken + one.height_mm > _ROWS_MM + 1e-9:
                yield block
                block, taken = [], 0.0
            block.append(one)
            taken += one.height_mm
    if block:
        yield block


def _table(title: str, columns: Sequence[Column], lines: Sequence[_Line]) -> Drawing:
    y = -HEAD_MM - 1.0
    parts: list[Drawing | Primitive] = [Text((0.0, y), title, HEAD_MM, bold=True)]
    for cells in ([c.first for c in columns], [c.second for c in columns]):
        y -= _LINE_MM
        parts += _cells(columns, cells, y, bold=False)
    y -= 1.6
    parts.append(line((0.0, y), (WIDTH_MM, y), Role.SET_OUT))
    for row in lines:
        y -= row.height_mm
        parts += _cells(columns, row.cells, y, bold=True)
        if row.last:
            parts.append(line((0.0, y - 1.8), (WIDTH_MM, y - 1.8), Role.FURNITURE))
    return gather(parts)


def _cells(columns: Sequence[Column], cells: Sequence[str], y: float, bold: bool) -> Iterator[Text]:
    x = 0.0
    for column, words in zip(columns, cells, strict=True):
        if words and column.words:
            yield Text((x, y), words, BODY_MM, bold=bold)
        x += column.width_mm
        if words and not column.words:
            yield Text((x - 1.0, y), words, BODY_MM, align="right", bold=bold)


def listed(title: str, items: Sequence[str], numbered: bool = False) -> Iterator[Drawing]:
    """Paragraphs under a title, numbered or with dashes, in as many blocks as they take; numbers run on."""
    for start, stop in _spans(items):
        yield _list(_continued(title, start), items[start:stop], start + 1 if numbered else None)


def _spans(items: Sequence[str]) -> Iterator[tuple[int, int]]:
    """Where the list is parted: into blocks about as long as each other, none longer than a page holds."""
    heights = [len(wrap(words, WIDTH_MM - _INDENT_MM, BODY_MM)) for words in items]
    enough = sum(heights) / max(1, math.ceil(sum(heights) / _LIST_LINES))
    start, taken = 0, 0
    for k, lines in enumerate(heights):
        if k > start and (taken >= enough or taken + lines > _LIST_LINES):
            yield start, k
            start, taken = k, 0
        taken += lines
    if items:
        yield start, len(items)


def _list(title: str, items: Sequence[str], number: int | None) -> Drawing:
    head, y = paragraph((0.0, 0.0), title, HEAD_MM, WIDTH_MM, bold=True)
    parts: list[Drawing | Primitive] = [head]
    for k, words in enumerate(items):
        mark = "–" if number is None else f"{number + k}."
        parts.append(Text((0.0, y - BODY_MM), mark, BODY_MM, bold=number is not None))
        block, y = paragraph((_INDENT_MM, y), words, BODY_MM, WIDTH_MM - _INDENT_MM)
        parts.append(block)
    return gather(parts)


def plain(items: Sequence[str]) -> Drawing:
    """Paragraphs without a title: how a table is read."""
    y = 0.0
    parts: list[Drawing | Primitive] = []
    for words in items:
        block, y = paragraph((0.0, y), words, BODY_MM, WIDTH_MM)
        parts.append(block)
    return gather(parts)
