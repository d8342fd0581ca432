"""The paper's own furniture round a page's window: the bars that prove the scale, the title, the tile's name and map.

Owns what stands in the foot band and the side band, upright on every page; registration marks are `marks`'.
Imports `geometry`, `drawing`, `shapes`, `lettering`, `document` and `paper`; knows nothing of what the pieces are.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import NamedTuple

from layout.document import Bar
from layout.drawing import Align, Drawing, Fill, Primitive, Role, Text, gather
from layout.geometry import Affine, Box, Point, union
from layout.lettering import FALL, RISE, shortened, text_width_mm
from layout.paper import Paper
from layout.shapes import box_outline, line, polygon_curve

BAR_MM = 100.0
TICK_EVERY_MM = 10.0
_TICK_MM, _END_TICK_MM = 1.2, 2.0
# Lettering heights after ISO 3098; the first that fits is taken.
SMALL_MM = 2.5
_TITLE_HEIGHTS_MM = (3.5, SMALL_MM)
_NAME_HEIGHTS_MM = (7.0, 5.0, 3.5)
_GAP_MM = 3.0
_LEAST_OWNER_MM = 12.0
_MAP_WIDTH_MM, _MAP_HEIGHT_MM, _LEAST_MAP_MM = 20.0, 11.0, 8.0

# Feet of the foot band's lines above its lower edge: each stands clear of the next, accents and tails included.
_BAR_Y_MM, _BAR_WORDS_Y_MM, _TITLE_Y_MM, _NOTICE_Y_MM, _TALL_Y_MM = 0.4, 3.3, 8.1, 14.1, 19.8
_NAME_Y_MM, _MAP_Y_MM = 2.6, 1.0


class TilePlace(NamedTuple):
    """A tile among its neighbours: its name, the others' names by side, and where all kept tiles lie."""

    name: str
    neighbours: tuple[tuple[str, str], ...]
    cells: tuple[Box, ...]
    own_cell: Box


@dataclass(frozen=True)
class PageWords:
    """What a page says of itself: whose it is, what it is, what must not be got wrong, its number."""

    owner: str
    title: str
    notice: str
    number: int
    count: int
    tile: TilePlace | None = None


def bands(size_mm: tuple[float, float], paper: Paper, words: PageWords) -> tuple[Drawing, tuple[Bar, ...]]:
    """The foot and side bands of a page, and their bars of 100 mm across and down, in page coordinates."""
    margin = paper.margin_mm
    foot = Box(margin, margin, size_mm[0] - margin, margin + paper.foot_band_mm)
    across = Bar((foot.x0 + 0.5, foot.y0 + _BAR_Y_MM), (foot.x0 + 0.5 + BAR_MM, foot.y0 + _BAR_Y_MM), BAR_MM)
    x, y = margin + 6.5, paper.window(size_mm).y0 + 1.0
    down = Bar((x, y), (x, y + BAR_MM), BAR_MM)
    parts = [
        scale_bar(across.from_mm, BAR_MM, 0.0),
        scale_bar(down.from_mm, BAR_MM, 90.0),
        Drawing((_bar_words_down(down),)),
        gather(_foot(foot, paper, words)),
    ]
    return gather(parts), (across, down)


def scale_bar(start: Point, length_mm: float, angle_deg: float) -> Drawing:
    """A bar with a tick every 10 mm to its left; only the two ends are long, so that the eye sets the rule on them."""
    place = Affine.turn(angle_deg).then(Affine.move(*start))
    count = round(length_mm / TICK_EVERY_MM)
    ticks = [(k * TICK_EVERY_MM, _TICK_MM if 0 < k < count else _END_TICK_MM) for k in range(count + 1)]
    strokes = [line(place.point((x, 0.0)), place.point((x, tick)), Role.FURNITURE) for x, tick in ticks]
    return Drawing((line(start, place.point((length_mm, 0.0)), Role.FURNITURE), *strokes))


def lettered(at: Point, text: str, height_mm: float, align: Align = "left") -> Text:
    """Furniture's lettering, upright and grey; what a maker must not miss is black."""
    return Text(at, text, height_mm, Role.FURNITURE, align)


def fitted(text: str, width_mm: float, heights_mm: tuple[float, ...], bold: bool = False) -> tuple[str, float]:
    """The text and the first of the heights at which it is no wider than `width_mm`; cut short at the last."""
    for height in heights_mm:
        if text_width_mm(text, height, bold) <= width_mm:
            return text, height
    return shortened(text, width_mm, heights_mm[-1], bold), heights_mm[-1]


def fitted_title(owner: str, title: str, width_mm: float) -> tuple[str, float]:
    """Owner and title on one line; where it is too long, the owner's name is cut before the title is."""
    whole = f"{owner} · {title}" if owner else title
    small = _TITLE_HEIGHTS_MM[-1]
    room = width_mm - text_width_mm(f" · {title}", small, True)
    if owner and text_width_mm(whole, small, True) > width_mm and room > _LEAST_OWNER_MM:
        return f"{shortened(owner, room, small, True)} · {title}", small
    return fitted(whole, width_mm, _TITLE_HEIGHTS_MM, bold=True)


def _bar_words_down(bar: Bar) -> Text:
    middle = (bar.from_mm[1] + bar.to_mm[1]) / 2
    at = (bar.from_mm[0] - _END_TICK_MM - FALL * SMALL_MM, middle)
    return Text(at, "100 mm down · must measure 100 mm", SMALL_MM, Role.FURNITURE, "centre", 90.0)


def _foot(foot: Box, paper: Paper, words: PageWords) -> Iterator[Drawing | Primitive]:
    page = f"page {words.number} of {words.count}"
    yield lettered((foot.x0 + 0.5, foot.y0 + _BAR_WORDS_Y_MM), "100 mm across · must measure 100 mm", SMALL_MM)
    yield lettered((foot.x0 + 0.5 + BAR_MM, foot.y0 + _BAR_WORDS_Y_MM), page, SMALL_MM, "right")
    notice, height = fitted(words.notice, foot.width, _TITLE_HEIGHTS_MM, bold=True)
    yield from _if_any(Text((foot.x0, foot.y0 + _NOTICE_Y_MM), notice, height, Role.NOTE, bold=True))
    right = foot.x1
    if words.tile:
        block, right = _tile_block(foot, paper, words.tile)
        yield block
    title, height = fitted_title(words.owner, words.title, right - foot.x0)
    yield from _if_any(Text((foot.x0, foot.y0 + _TITLE_Y_MM), title, height, Role.NOTE, bold=True))


def _if_any(text: Text) -> Iterator[Text]:
    if text.text:
        yield text


def _tile_block(foot: Box, paper: Paper, tile: TilePlace) -> tuple[Drawing, float]:
    """The tile's name, the map and the neighbours, set from the right edge; and the x where room begins left of it."""
    parts: list[Drawing | Primitive] = []
    room = foot.width - BAR_MM - 1.0 - _LEAST_MAP_MM - _GAP_MM
    name, height = fitted(tile.name, room, _NAME_HEIGHTS_MM, bold=True)
    parts.append(Text((foot.x1, foot.y0 + _NAME_Y_MM), name, height, Role.NOTE, "right", bold=True))
    map_right = foot.x1 - text_width_mm(name, height, True) - _GAP_MM / 2
    map_width = min(_MAP_WIDTH_MM, map_right - foot.x0 - BAR_MM - 2.0)
    box = Box(map_right - map_width, foot.y0 + _MAP_Y_MM, map_right, foot.y0 + _MAP_Y_MM + _MAP_HEIGHT_MM)
    cells, left = _map(tile, box)
    parts.append(cells)
    if paper.narrow:
        parts.append(lettered((foot.x0, foot.y0 + _TALL_Y_MM), " · ".join(_sides(tile)), SMALL_MM))
        return gather(parts), left - _GAP_MM
    sides = _sides(tile)
    rows = (" · ".join(sides[:2]), " · ".join(sides[2:]))
    for row, y in zip(rows, (_TITLE_Y_MM, _BAR_WORDS_Y_MM), strict=True):
        parts.append(lettered((left - _GAP_MM, foot.y0 + y), row, SMALL_MM, "right"))
    return gather(parts), left - 2 * _GAP_MM - max(text_width_mm(row, SMALL_MM) for row in rows)


def _sides(tile: TilePlace) -> list[str]:
    return [f"{side} {name}" for side, name in tile.neighbours]


def _map(tile: TilePlace, box: Box) -> tuple[Drawing, float]:
    """The kept tiles' cells, drawn as large as the box allows and set against its right edge; and their left end."""
    whole = union(tile.cells)
    factor = min(box.width / whole.width, box.height / whole.height)
    left, foot = box.x1 - factor * whole.width, box.y0 + (box.height - factor * whole.height) / 2
    place = Affine.move(-whole.x0, -whole.y0).then(Affine.scale(factor)).then(Affine.move(left, foot))
    filled = Fill(polygon_curve(tile.own_cell.mapped(place).corners()), Role.FURNITURE)
    return gather([filled, *(box_outline(cell.mapped(place), Role.FURNITURE) for cell in tile.cells)]), left


def patch_height_mm(height_mm: float) -> float:
    """What a line of lettering takes up and down, accents and tails included."""
    return (1.0 + RISE + FALL) * height_mm
