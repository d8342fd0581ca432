"""From pieces to pages: every piece placed, every page numbered, labelled and furnished.

Owns the order of sheets and what stands on each page. Imports all of layout but its writers.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator, Sequence
from itertools import groupby
from typing import Literal, NamedTuple

from layout.document import Bar, Document, Mark, Page, Placement
from layout.drawing import Drawing
from layout.flow import Block, BlockPlace, flow
from layout.flow import fits as block_fits
from layout.furniture import PageWords, TilePlace, bands
from layout.geometry import Affine, Box
from layout.labels import lettered
from layout.marks import SeamMark, page_marks, place_marks, seam_drawing
from layout.packed import PackedPage, misfit_packed, pack_pieces
from layout.paper import DoesNotFitPaper, Paper, misfit
from layout.piece import Piece
from layout.scale_check import NAME as SCALE_NAME
from layout.scale_check import scale_bars, scale_check
from layout.tile_map import WIDTH_MM as MAP_WIDTH_MM
from layout.tile_map import tile_map
from layout.tiling import INK_MARGIN_MM, Tile, Tiling, ink_box, neighbour_names, tile_piece

# The written sheet that carries the tile map, and the map's name.
MAP_SHEET, MAP_NAME = "setting-out", "tile map"

# A piece and the bounds of its ink.
Boxed = tuple[Piece, Box]


class _Draft(NamedTuple):
    """A page before it is numbered. `stem` begins its label; `tile` is None where nothing is tiled."""

    sheet: str
    stem: str
    title: str
    notice: str
    size_mm: tuple[float, float]
    placements: tuple[Placement, ...]
    stock: Literal["paper", "card"]
    furniture: Drawing = Drawing()
    marks: tuple[Mark, ...] = ()
    bars: tuple[Bar, ...] = ()
    tile: TilePlace | None = None


def compose(title: str, pieces: Sequence[Piece], paper: Paper) -> Document:
    """All pages, sheets in order of first appearance, numbered from 1.

    Raises DoesNotFitPaper, naming every piece at once, before anything is laid out, and ValueError for pieces that
    share a name.
    """
    _check_names(pieces)
    boxed = [(piece, ink_box(piece)) for piece in pieces]
    _check_fit(boxed, paper)
    tilings = {piece.name: tile_piece(piece, box, paper) for piece, box in boxed if piece.handling == "tile"}
    boxed = [(tilings[piece.name].piece if piece.name in tilings else lettered(piece), box) for piece, box in boxed]
    boxed = _with_maps(boxed, tilings, paper)
    drafts = [draft for group in _groups(boxed) for draft in _drafts(group, tilings, paper)]
    labels = _labels(drafts)
    pages = tuple(
        _page(title, draft, label, number, len(drafts), paper)
        for number, (draft, label) in enumerate(zip(drafts, labels, strict=True), 1)
    )
    return Document(title, paper.name, pages, tuple(piece for piece, _ in boxed))


def _check_names(pieces: Sequence[Piece]) -> None:
    twice = [name for name, count in Counter(piece.name for piece in pieces).items() if count > 1]
    if twice:
        raise ValueError(f"pieces share a name: {', '.join(twice)}")


def _check_fit(boxed: Sequence[Boxed], paper: Paper) -> None:
    found = [words for piece, box in boxed if (words := _misfit(piece, box, paper))]
    if found:
        raise DoesNotFitPaper("\n".join(found))


def _misfit(piece: Piece, box: Box, paper: Paper) -> str | None:
    if piece.handling == "tile":
        return None
    if piece.handling == "flow":
        fits = any(block_fits(_block(box), paper.window(size)) for size in paper.page_sizes_mm)
        return None if fits else misfit(piece, box, paper, (box.width, box.height))
    return misfit_packed(piece, box, paper)


def _with_maps(boxed: Sequence[Boxed], tilings: dict[str, Tiling], paper: Paper) -> list[Boxed]:
    """The pieces with a tile map, for each one on several pages, after the last block of the setting-out sheet."""
    tiled = [tiling for tiling in tilings.values() if len(tiling.tiles) > 1]
    blocks = [k for k, (piece, _) in enumerate(boxed) if piece.sheet == MAP_SHEET and piece.handling == "flow"]
    if not tiled or not blocks:
        return list(boxed)
    names = [MAP_NAME] if len(tiled) == 1 else [f"{MAP_NAME}, {tiling.piece.name}" for tiling in tiled]
    room = min(MAP_WIDTH_MM, paper.window(paper.page_sizes_mm[0]).width - 2 * INK_MARGIN_MM)
    maps = [tile_map(tiling, name, MAP_SHEET, room) for tiling, name in zip(tiled, names, strict=True)]
    return [*boxed[: blocks[-1] + 1], *((piece, ink_box(piece)) for piece in maps), *boxed[blocks[-1] + 1 :]]


def _groups(boxed: Sequence[Boxed]) -> list[list[Boxed]]:
    """Pieces that share pages, in order: by sheet, then by stock and how they are laid; each tiled piece by itself."""
    groups: dict[tuple[str, ...], list[Boxed]] = {}
    sheets = list(dict.fromkeys(piece.sheet for piece, _ in boxed))
    for piece, box in sorted(boxed, key=lambda entry: sheets.index(entry[0].sheet)):
        way = {"tile": f"tile {piece.name}", "flow": "flow"}.get(piece.handling, "pack")
        groups.setdefault((piece.sheet, way, piece.stock), []).append((piece, box))
    return list(groups.values())


def _drafts(group: Sequence[Boxed], tilings: dict[str, Tiling], paper: Paper) -> Iterator[_Draft]:
    first = group[0][0]
    match first.handling:
        case "tile":
            alone = sum(tiling.piece.sheet == first.sheet for tiling in tilings.values()) == 1
            yield from _tile_drafts(tilings[first.name], first.sheet if alone else first.name, paper)
        case "flow":
            yield from _flow_drafts(group, paper)
        case _:
            yield from (_packed_draft(page) for page in pack_pieces(group, paper))


def _packed_draft(page: PackedPage) -> _Draft:
    shown = [placement.piece for placement in page.placements]
    title, notice = _joined([piece.title for piece in shown]), _joined([piece.notice for piece in shown])
    sheet, stock = shown[0].sheet, shown[0].stock
    return _Draft(sheet, sheet, title, notice, page.size_mm, page.placements, stock, page.furniture, page.marks)


def _joined(words: Sequence[str]) -> str:
    return " · ".join(dict.fromkeys(word for word in words if word))


def _tile_drafts(tiling: Tiling, stem: str, paper: Paper) -> Iterator[_Draft]:
    marks = place_marks(tiling)
    for tile in tiling.tiles:
        yield _tile_draft(tiling, tile, marks, stem, paper)


def _tile_draft(tiling: Tiling, tile: Tile, marks: Sequence[SeamMark], stem: str, paper: Paper) -> _Draft:
    piece, to_page = tiling.piece, tiling.to_page(tile, paper)
    return _Draft(
        piece.sheet,
        stem,
        piece.title,
        piece.notice,
        tiling.size_mm,
        (Placement(piece, to_page, tiling.window_of_piece(tile)),),
        piece.stock,
        seam_drawing(tiling, marks, tile, to_page),
        page_marks(tiling, marks, tile, to_page),
        _own_bars(piece, to_page, paper),
        _tile_place(tiling, tile),
    )


def _own_bars(piece: Piece, to_page: Affine, paper: Paper) -> tuple[Bar, ...]:
    """The scale check's own bars."""
    if piece.name != SCALE_NAME or piece != scale_check(paper):
        return ()
    return tuple(Bar(to_page.point(a), to_page.point(b), nominal) for a, b, nominal in scale_bars(paper))


def _tile_place(tiling: Tiling, tile: Tile) -> TilePlace | None:
    if tile.name is None:
        return None
    cells = {other: _map_cell(other) for other in tiling.tiles}
    return TilePlace(tile.name, neighbour_names(tiling, tile), tuple(cells.values()), cells[tile])


def _map_cell(tile: Tile) -> Box:
    """A page's cell in the small map, as tall and wide as pages are to one another."""
    width, height = tile.window.width, tile.window.height
    return Box(tile.column * width, -(tile.row + 1) * height, (tile.column + 1) * width, -tile.row * height)


def _flow_drafts(group: Sequence[Boxed], paper: Paper) -> Iterator[_Draft]:
    blocks = [_block(box) for _, box in group]
    sizes = [s for s in paper.page_sizes_mm if all(block_fits(block, paper.window(s)) for block in blocks)]
    if not sizes:
        yield from (draft for entry in group for draft in _flow_drafts([entry], paper))
        return
    window = paper.window(sizes[0])
    for _, on_page in groupby(zip(group, flow(blocks, window), strict=True), key=lambda place: place[1].page):
        shown = tuple(_flow_placement(entry, at, window) for entry, at in on_page)
        first, notice = shown[0].piece, _joined([placement.piece.notice for placement in shown])
        yield _Draft(first.sheet, first.sheet, group[0][0].title, notice, sizes[0], shown, first.stock)


def _block(box: Box) -> Block:
    return Block(box.width, box.height)


def _flow_placement(entry: Boxed, at: BlockPlace, window: Box) -> Placement:
    piece, box = entry
    return Placement(piece, Affine.move(window.x0 + at.x_mm - box.x0, window.y0 + at.y_mm - box.y0), box)


def _labels(drafts: Sequence[_Draft]) -> list[str]:
    """Names of pages, no two alike: "template B2", "cards 1"; the sheet's name alone for a sheet of one whole page."""
    of_stem = Counter(draft.stem for draft in drafts)
    counted: Counter[str] = Counter()
    labels = []
    for draft in drafts:
        whole = of_stem[draft.stem] == 1 and draft.placements[0].piece.handling == "tile"
        counted[draft.stem] += draft.tile is None
        last = draft.tile.name if draft.tile else str(counted[draft.stem])
        labels.append(draft.stem if whole else f"{draft.stem} {last}")
    return labels


def _page(owner: str, draft: _Draft, label: str, number: int, count: int, paper: Paper) -> Page:
    title = draft.title if draft.stock == "paper" else f"{draft.title} · PRINT ON CARD"
    furniture, bars = bands(draft.size_mm, paper, PageWords(owner, title, draft.notice, number, count, draft.tile))
    return Page(
        number,
        draft.sheet,
        label,
        draft.title,
        draft.tile.name if draft.tile else None,
        draft.size_mm,
        draft.placements,
        furniture + draft.furniture,
        draft.marks,
        (*bars, *draft.bars),
        draft.stock,
    )


def summary(document: Document) -> list[str]:
    """Which pages are which sheet, with their tiles and what to print them on: one line for each run of pages."""
    runs = [list(run) for _, run in groupby(document.pages, key=lambda page: (page.sheet, page.title, page.stock))]
    names = [_page_numbers(run) for run in runs]
    width = max((len(name) for name in names), default=0)
    return [f"{name:<{width}}  {_run_words(run)}  {run[0].stock}" for name, run in zip(names, runs, strict=True)]


def _page_numbers(run: Sequence[Page]) -> str:
    first, last = run[0].number, run[-1].number
    return f"page {first}" if first == last else f"pages {first}–{last}"


def _run_words(run: Sequence[Page]) -> str:
    tiles = " ".join(page.tile for page in run if page.tile)
    return f"{run[0].title} ({tiles})" if tiles else run[0].title
