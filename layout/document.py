"""What a finished set of pages is: pieces placed on pages, with marks, bars and the paper's own furniture. Data only.

Page coordinates are mm from the page's lower left corner. Imports `drawing`, `geometry` and `piece` only.
"""

from __future__ import annotations

from typing import Literal, NamedTuple

from layout.drawing import Drawing
from layout.geometry import Affine, Box, Point
from layout.piece import Piece


class Placement(NamedTuple):
    """A part of a piece on a page: `to_page` maps the piece's mm to the page's, `window` is the part that shows."""

    piece: Piece
    to_page: Affine
    window: Box


class Mark(NamedTuple):
    """A registration mark, which stands at the same place of the drawing on every page that shows it."""

    id: str
    piece: str
    page_mm: Point
    drawing_mm: Point


class Bar(NamedTuple):
    """A length that proves the print's scale, between two points on the page."""

    from_mm: Point
    to_mm: Point
    nominal_mm: float


class Page(NamedTuple):
    """One page. `label` is its name among the pages ("template B2"); `tile` is None where nothing is tiled."""

    number: int
    sheet: str
    label: str
    title: str
    tile: str | None
    size_mm: tuple[float, float]
    placements: tuple[Placement, ...]
    furniture: Drawing
    marks: tuple[Mark, ...]
    bars: tuple[Bar, ...]
    stock: Literal["paper", "card"]


class Document(NamedTuple):
    """All pages of one file, in order."""

    title: str
    paper: str
    pages: tuple[Page, ...]
    pieces: tuple[Piece, ...]
