"""The tile map: a small picture of how a piece's pages lie together, and the order of laying them in words.

Owns that one block of a written sheet. Imports layout's ground, `marks` and `tiling`.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace

from layout.drawing import Drawing, Primitive, Role, Stroke, Text, gather
from layout.geometry import Affine, Box, union
from layout.lettering import text_width_mm
from layout.marks import cuts
from layout.operations import transform
from layout.piece import Piece
from layout.shapes import box_outline, paragraph
from layout.tiling import Tile, Tiling, is_outline

WIDTH_MM, HEIGHT_MM = 180.0, 80.0
_HEADING_MM, _GAP_MM = 8.0, 6.0
_NAME_HEIGHTS_MM = (7.0, 5.0, 3.5, 2.5)
# More pages than this are told by rule, not one by one.
_MOST_STEPS = 6


def tile_map(tiling: Tiling, name: str, sheet: str, width_mm: float = WIDTH_MM) -> Piece:
    """The block: the tiles' cells with their names, the outline within, what to do. Origin at the lower left."""
    whole = union(tile.window for tile in tiling.tiles)
    factor = min(width_mm / 2 / whole.width, (HEIGHT_MM - _HEADING_MM) / whole.height)
    place = Affine.move(-whole.x0, -whole.y0).then(Affine.scale(factor))
    picture = gather(_picture(tiling, place))
    left = factor * whole.width + _GAP_MM
    top = max(factor * whole.height, _words_height(tiling, width_mm - left))
    raised = transform(picture, Affine.move(0.0, top - factor * whole.height))
    heading = Text((0.0, top + 3.5), f"Tile map: {tiling.piece.title}", 3.5, bold=True)
    words, _ = _words(tiling, left, top, width_mm - left)
    return Piece(name, sheet, "Tile map", gather([heading, raised, words]), "flow")


def _picture(tiling: Tiling, place: Affine) -> Iterator[Drawing | Primitive]:
    outline = Drawing(tuple(item for item in tiling.piece.drawing.items if is_outline(item)))
    for item in transform(outline, tiling.laid.then(place)).items:
        if isinstance(item, Stroke):
            yield replace(item, role=Role.SET_OUT)
    for tile in tiling.tiles:
        cell = cell_box(tiling, tile).mapped(place)
        yield box_outline(cell, Role.NOTE)
        yield _name(tile.name or "", cell)


def _name(name: str, cell: Box) -> Text:
    fit = (h for h in _NAME_HEIGHTS_MM if text_width_mm(name, h, True) < 0.6 * cell.width and 2 * h < cell.height)
    height = next(fit, _NAME_HEIGHTS_MM[-1])
    return Text((cell.centre[0], cell.centre[1] - height / 2), name, height, align="centre", bold=True, over=True)


def cell_box(tiling: Tiling, tile: Tile) -> Box:
    """What is seen of a tile once the pages are laid: its window, cut at the seams it shares with others."""
    box = tile.window
    left, right = tiling.beside(tile, -1, 0), tiling.beside(tile, 1, 0)
    above, below = tiling.beside(tile, 0, -1), tiling.beside(tile, 0, 1)
    return Box(
        (box.x0 + left.window.x1) / 2 if left else box.x0,
        (box.y0 + below.window.y1) / 2 if below else box.y0,
        (box.x1 + right.window.x0) / 2 if right else box.x1,
        (box.y1 + above.window.y0) / 2 if above else box.y1,
    )


def _words(tiling: Tiling, left: float, top: float, width_mm: float) -> tuple[Drawing, float]:
    drawn, y = Drawing(), top
    for step in laying_order(tiling):
        block, low = paragraph((left, y), step, 2.5, width_mm)
        drawn, y = drawn + block, low - 0.8
    return drawn, y


def _words_height(tiling: Tiling, width_mm: float) -> float:
    return -_words(tiling, 0.0, 0.0, width_mm)[1]


def laying_order(tiling: Tiling) -> tuple[str, ...]:
    """What to do with the pages, one sentence each."""
    first, *rest = tiling.tiles
    last = "Check that the numbers of the marks agree, tape, then check the lengths printed on the drawing with a rule."
    if len(tiling.tiles) > _MOST_STEPS:
        return (
            f"Lay {first.name} down. Go along the top row from left to right, then along each row below it.",
            "Cut each page along every dashed line on it, right across the page, and lay it over the pages already "
            "there, so that the circles close.",
            last,
        )
    return (f"Lay {first.name} down.", *(_step(tiling, tile) for tile in rest), last)


def _step(tiling: Tiling, tile: Tile) -> str:
    sides = cuts(tiling, tile)
    under = _listed([str(other.name) for other in sides.values() if other])
    lines = _listed(list(sides)) + (" lines" if len(sides) > 1 else " line")
    cut = f"Cut {tile.name} along its dashed {lines}, right across the page" if sides else f"Take {tile.name}"
    lay = f"lay it over {under} so that the circles close" if under else "lay it down: the next pages join it"
    return f"{cut}; {lay}."


def _listed(words: Sequence[str]) -> str:
    *most, last = words or [""]
    return f"{', '.join(most)} and {last}" if most else last
