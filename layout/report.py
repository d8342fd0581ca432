"""What lies where on the pages, as plain data at full precision, so that a print can be measured from outside.

Owns the form of `make --report`. Imports `document`; writes no file.
Page coordinates are mm from the page's lower left corner; `to_page` is in PDF's matrix order.
"""

from __future__ import annotations

from typing import Any

from layout.document import Bar, Document, Mark, Page, Placement
from layout.piece import Piece


def report(document: Document, file_name: str) -> dict[str, Any]:
    """The report of a document, ready for JSON; `file_name` is what the file of its pages is called."""
    return {
        "file": file_name,
        "title": document.title,
        "paper": document.paper,
        "pages": [_page(page) for page in document.pages],
        "pieces": [_piece(piece) for piece in document.pieces],
    }


def _page(page: Page) -> dict[str, Any]:
    return {
        "page": page.number,
        "label": page.label,
        "title": page.title,
        "sheet": page.sheet,
        "tile": page.tile,
        "stock": page.stock,
        "size_mm": list(page.size_mm),
        "placements": [_placement(placement) for placement in page.placements],
        "marks": [_mark(mark) for mark in page.marks],
        "bars": [_bar(bar) for bar in page.bars],
    }


def _placement(placement: Placement) -> dict[str, Any]:
    return {
        "piece": placement.piece.name,
        "to_page": list(placement.to_page),
        "window_mm": list(placement.window),
    }


def _mark(mark: Mark) -> dict[str, Any]:
    return {
        "id": mark.id,
        "piece": mark.piece,
        "page_mm": list(mark.page_mm),
        "drawing_mm": list(mark.drawing_mm),
    }


def _bar(bar: Bar) -> dict[str, Any]:
    return {"from_mm": list(bar.from_mm), "to_mm": list(bar.to_mm), "nominal_mm": bar.nominal_mm}


def _piece(piece: Piece) -> dict[str, Any]:
    return {
        "piece": piece.name,
        "sheet": piece.sheet,
        "title": piece.title,
        "stock": piece.stock,
        "points": {name: list(point) for name, point in piece.points},
    }
