"""Small pieces put together on pages, and long strips cut into sections. Nothing is ever scaled.

Owns where rectangles go, in plain millimetres: it knows neither what they hold nor what paper they go on. Imports
nothing of ours. Axes: x to the right, y up, from the lower left corner of a page's window. While packing, places are
counted down from the top left corner, because that is where a page is read from.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator, Sequence
from typing import NamedTuple

# Rounding may make a piece that fits exactly seem larger than its place by no more than this.
FIT_TOLERANCE_MM = 1e-9


class Item(NamedTuple):
    """A rectangle to be placed; the key is the caller's."""

    key: int
    width_mm: float
    height_mm: float


class Spot(NamedTuple):
    """Where an item goes: the lower left corner of its box in a page's window; `turned` by a quarter turn."""

    key: int
    page: int
    x_mm: float
    y_mm: float
    turned: bool


class DoesNotFit(ValueError):  # noqa: N818  (reads as the caller's message does)
    """An item is larger than the window both ways."""

    def __init__(self, key: int, width: float, height: float, window: tuple[float, float]) -> None:
        self.key, self.width, self.height, self.window = key, width, height, window
        super().__init__(
            f"{width:.1f} × {height:.1f} mm does not fit a window of {window[0]:.1f} × {window[1]:.1f} mm either way"
        )


class _Place(NamedTuple):
    """A rectangle on a page, from the page's top left corner, y downward; free, or an item's with its gap."""

    x: float
    y: float
    width: float
    height: float


class _Fit(NamedTuple):
    """A way to put an item down; the least fits best."""

    short_side_left: float
    long_side_left: float
    y: float
    x: float
    turned: bool


_Placed = tuple[Item, int, float, float, bool]
_Packer = Callable[[Sequence[Item], _Place, float], list[_Placed]]


def pack(items: Sequence[Item], window: tuple[float, float], gap_mm: float) -> tuple[Spot, ...]:
    """Places for all items on few pages, page by page from the top left.

    Neighbours are `gap_mm` apart; an item may touch the window's edge. Ways that keep the given order come first and
    are left only for one that takes fewer pages. Raises DoesNotFit for an item that is larger than the window.
    """
    for item in items:
        if not any(_fits(*size, *window) for size in _ways(item, 0.0)):
            raise DoesNotFit(item.key, item.width_mm, item.height_mm, window)
    # With every item and the page itself larger by one gap, items that do not overlap are a gap apart.
    page = _Place(0.0, 0.0, window[0] + gap_mm, window[1] + gap_mm)
    best = sorted(_best(items, page, gap_mm), key=lambda p: (p[1], p[3], p[2]))
    return tuple(_spot(*placed, window[1]) for placed in best)


def _best(items: Sequence[Item], page: _Place, gap: float) -> list[_Placed]:
    """The first packing that takes the fewest pages; none is tried after one that no packing can better."""
    needed = sum((item.width_mm + gap) * (item.height_mm + gap) for item in items) / (page.width * page.height)
    best: list[_Placed] | None = None
    for placed in _attempts(items, page, gap):
        best = placed if best is None or _pages(placed) < _pages(best) else best
        if _pages(best) <= max(1, math.ceil(needed - FIT_TOLERANCE_MM)):
            break
    return best or []


def _pages(placed: list[_Placed]) -> int:
    return max((number + 1 for _, number, *_ in placed), default=0)


def _spot(item: Item, page: int, x: float, y: float, turned: bool, window_height: float) -> Spot:
    height = item.width_mm if turned else item.height_mm
    return Spot(item.key, page, x, window_height - y - height, turned)


def _attempts(items: Sequence[Item], page: _Place, gap: float) -> Iterator[list[_Placed]]:
    """Packings in order of preference: as given in rows, then as given in any place, then sorted by size."""
    yield _in_rows(items, page, gap)
    yield _page_after_page(items, page, gap)
    yield _wherever_it_fits(items, page, gap)
    for size in _SIZES:
        ordered = sorted(items, key=size, reverse=True)
        for packer in _PACKERS:
            yield packer(ordered, page, gap)


def _ways(item: Item, gap: float) -> tuple[tuple[float, float], tuple[float, float]]:
    """Width and height as given and turned, each with its gap."""
    width, height = item.width_mm + gap, item.height_mm + gap
    return (width, height), (height, width)


def _fits(width: float, height: float, room_width: float, room_height: float) -> bool:
    return width <= room_width + FIT_TOLERANCE_MM and height <= room_height + FIT_TOLERANCE_MM


# --- rows ------------------------------------------------------------------------------------------------------------


def _in_rows(items: Sequence[Item], page: _Place, gap: float) -> list[_Placed]:
    """Left to right in rows, as words are set; an item is turned only where it fits no other way."""
    placed: list[_Placed] = []
    number, x, y, row = 0, 0.0, 0.0, 0.0
    for item in items:
        turned = not _fits(*_ways(item, gap)[0], page.width, page.height)
        width, height = _ways(item, gap)[turned]
        if not _fits(width, height, page.width - x, page.height - y):
            x, y, row = 0.0, y + row, 0.0
        if not _fits(width, height, page.width, page.height - y):
            number, y = number + 1, 0.0
        placed.append((item, number, x, y, turned))
        x, row = x + width, max(row, height)
    return placed


# --- maximal rectangles, best short side fit -------------------------------------------------------------------------


def _page_after_page(items: Sequence[Item], page: _Place, gap: float) -> list[_Placed]:
    """Each item goes on the last page or a new one, so that the given order holds from page to page."""
    return _by_free_places(items, page, gap, only_last=True)


def _wherever_it_fits(items: Sequence[Item], page: _Place, gap: float) -> list[_Placed]:
    """Each item goes on the first page that has room for it."""
    return _by_free_places(items, page, gap, only_last=False)


def _by_free_places(items: Sequence[Item], page: _Place, gap: float, only_last: bool) -> list[_Placed]:
    placed: list[_Placed] = []
    pages: list[list[_Place]] = []
    for item in items:
        open_pages = range(len(pages) - 1, len(pages)) if only_last and pages else range(len(pages))
        fits = ((number, _best_fit(item, pages[number], gap)) for number in open_pages)
        number, fit = next(((n, f) for n, f in fits if f is not None), (len(pages), None))
        if fit is None:
            pages.append([page])
            fit = _best_fit(item, [page], gap)
            assert fit is not None  # `pack` has refused what fits no page
        width, height = _ways(item, gap)[fit.turned]
        pages[number] = _without(pages[number], _Place(fit.x, fit.y, width, height))
        placed.append((item, number, fit.x, fit.y, fit.turned))
    return placed


def _best_fit(item: Item, free: Iterable[_Place], gap: float) -> _Fit | None:
    fits = []
    for room in free:
        for turned, (width, height) in enumerate(_ways(item, gap)):
            if _fits(width, height, room.width, room.height):
                left = sorted((room.width - width, room.height - height))
                fits.append(_Fit(left[0], left[1], room.y, room.x, bool(turned)))
    return min(fits, default=None)


def _without(free: list[_Place], taken: _Place) -> list[_Place]:
    """The largest free rectangles that remain when a place is taken."""
    rest = [part for room in free for part in _rest(room, taken)]
    rest = list(dict.fromkeys(rest))
    return [part for part in rest if not any(other != part and _holds(other, part) for other in rest)]


def _rest(room: _Place, taken: _Place) -> list[_Place]:
    left, right = taken.x - room.x, room.x + room.width - taken.x - taken.width
    above, below = taken.y - room.y, room.y + room.height - taken.y - taken.height
    if left >= room.width or right >= room.width or above >= room.height or below >= room.height:
        return [room]
    parts = (
        _Place(room.x, room.y, left, room.height),
        _Place(taken.x + taken.width, room.y, right, room.height),
        _Place(room.x, room.y, room.width, above),
        _Place(room.x, taken.y + taken.height, room.width, below),
    )
    return [part for part in parts if part.width > 0.0 and part.height > 0.0]


def _holds(outer: _Place, inner: _Place) -> bool:
    return (
        outer.x <= inner.x
        and outer.y <= inner.y
        and outer.x + outer.width >= inner.x + inner.width
        and outer.y + outer.height >= inner.y + inner.height
    )


_PACKERS: tuple[_Packer, ...] = (_in_rows, _page_after_page, _wherever_it_fits)
_SIZES: tuple[Callable[[Item], tuple[float, float]], ...] = (
    lambda item: (item.height_mm, item.width_mm),
    lambda item: (item.width_mm * item.height_mm, item.width_mm + item.height_mm),
    lambda item: (max(item.width_mm, item.height_mm), min(item.width_mm, item.height_mm)),
    lambda item: (min(item.width_mm, item.height_mm), max(item.width_mm, item.height_mm)),
    lambda item: (item.width_mm + item.height_mm, item.width_mm),
)


# --- strips ----------------------------------------------------------------------------------------------------------


def sections(length_mm: float, longest_mm: float, overlap_mm: float) -> tuple[tuple[float, float], ...]:
    """A strip from 0 to `length_mm` cut into the fewest equal sections (start, end) that overlap by `overlap_mm`.

    Raises ValueError where no section may be longer than the overlap.
    """
    if longest_mm <= overlap_mm:
        raise ValueError(f"sections of {longest_mm:.1f} mm cannot overlap by {overlap_mm:.1f} mm")
    if length_mm <= longest_mm + FIT_TOLERANCE_MM:
        return ((0.0, length_mm),)
    count = math.ceil((length_mm - overlap_mm) / (longest_mm - overlap_mm) - FIT_TOLERANCE_MM)
    step = (length_mm - overlap_mm) / count
    return tuple((k * step, k * step + step + overlap_mm if k < count - 1 else length_mm) for k in range(count))
