"""Packing and sections: laws in bounds that paper has, and cases counted by hand."""

from __future__ import annotations

import itertools
import math
import random

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely import box

from layout.packing import DoesNotFit, Item, pack, sections

WINDOW = (190.0, 259.0)

sizes = st.tuples(st.floats(5.0, 185.0), st.floats(5.0, 185.0))
item_lists = st.lists(sizes, max_size=24).map(lambda all_: [Item(k, w, h) for k, (w, h) in enumerate(all_)])
gaps = st.sampled_from([0.0, 4.0, 7.5])


def boxes(items, spots):
    """The box of each item on its page, by key."""
    size = {item.key: (item.width_mm, item.height_mm) for item in items}
    found = {}
    for spot in spots:
        w, h = size[spot.key][::-1] if spot.turned else size[spot.key]
        found[spot.key] = (spot.page, box(spot.x_mm, spot.y_mm, spot.x_mm + w, spot.y_mm + h))
    return found


def pages(spots):
    return max((spot.page + 1 for spot in spots), default=0)


def shelves(items, window, gap):
    """Pages that rows of falling height take, next fit: the simplest thing a person would do."""
    count, x, y, row = (1 if items else 0), 0.0, 0.0, 0.0
    for item in sorted(items, key=lambda item: -item.height_mm):
        if x + item.width_mm > window[0]:
            x, y, row = 0.0, y + row + gap, 0.0
        if y + item.height_mm > window[1]:
            count, x, y, row = count + 1, 0.0, 0.0, 0.0
        x, row = x + item.width_mm + gap, max(row, item.height_mm)
    return count


@settings(max_examples=60, deadline=None)
@given(item_lists, gaps)
def test_each_item_is_placed_once_inside_the_window_and_a_gap_from_its_neighbours(items, gap):
    spots = pack(items, WINDOW, gap)
    assert sorted(spot.key for spot in spots) == [item.key for item in items]
    placed = boxes(items, spots)
    for _, there in placed.values():
        assert box(0, 0, *WINDOW).buffer(1e-6).covers(there)
    for (page, one), (other_page, other) in itertools.combinations(placed.values(), 2):
        if page == other_page:
            assert one.intersection(other).area < 1e-6
            assert one.distance(other) >= gap - 1e-6


@settings(max_examples=60, deadline=None)
@given(item_lists, gaps)
def test_pages_are_no_fewer_than_the_area_needs_and_no_more_than_rows_take(items, gap):
    count = pages(pack(items, WINDOW, gap))
    assert count >= math.ceil(sum(i.width_mm * i.height_mm for i in items) / (WINDOW[0] * WINDOW[1]) - 1e-9)
    assert count <= shelves(items, WINDOW, gap)


@settings(max_examples=30, deadline=None)
@given(item_lists)
def test_no_page_is_empty_and_spots_run_from_the_top_of_the_first_page(items):
    spots = pack(items, WINDOW, 5.0)
    assert {spot.page for spot in spots} == set(range(pages(spots)))
    tops = [(page, round(-there.bounds[3], 6), there.bounds[0]) for page, there in boxes(items, spots).values()]
    assert tops == sorted(tops)


def test_items_that_fit_in_rows_keep_their_order_from_the_top_left():
    spots = pack([Item(k, 60, 80) for k in (7, 3, 9, 1)], WINDOW, 5.0)
    assert [(s.key, s.page, s.x_mm, s.y_mm, s.turned) for s in spots] == [
        (7, 0, 0.0, 179.0, False),
        (3, 0, 65.0, 179.0, False),
        (9, 0, 130.0, 179.0, False),
        (1, 0, 0.0, 94.0, False),
    ]


def test_the_gap_is_not_kept_from_the_windows_edge():
    spots = pack([Item(0, 90, 259), Item(1, 90, 259)], WINDOW, 10.0)
    assert [(s.page, s.x_mm, s.y_mm) for s in spots] == [(0, 0.0, 0.0), (0, 100.0, 0.0)]


def test_a_gap_too_little_takes_another_page():
    assert pages(pack([Item(0, 90, 259), Item(1, 90, 259)], WINDOW, 10.5)) == 2


def test_an_item_longer_than_the_window_is_wide_is_turned():
    (spot,) = pack([Item(4, 250, 30)], WINDOW, 5.0)
    assert (spot.turned, spot.x_mm, spot.y_mm) == (True, 0.0, 9.0)


def test_turning_and_another_order_are_used_where_they_save_a_page():
    # A pinwheel round a hole: rows take two pages, and so do items that all stand the same way.
    items = [Item(0, 120, 60), Item(1, 60, 120), Item(2, 120, 60), Item(3, 60, 120)]
    assert pages(pack(items, (180.0, 180.0), 0.0)) == 1


def test_an_item_goes_back_to_an_earlier_page_where_that_saves_one():
    items = [Item(0, 190, 200), Item(1, 190, 200), Item(2, 190, 50), Item(3, 190, 50)]
    assert [(s.key, s.page) for s in pack(items, WINDOW, 5.0)] == [(0, 0), (2, 0), (1, 1), (3, 1)]


def test_items_are_sorted_by_size_where_that_saves_a_page():
    items = [Item(0, 190, 50), Item(1, 190, 50), Item(2, 190, 200), Item(3, 190, 200)]
    assert pages(pack(items, WINDOW, 5.0)) == 2


def test_a_window_is_filled_exactly():
    items = [Item(k, 95, 86.333) for k in range(6)]
    assert pages(pack(items, WINDOW, 0.0)) == 1


@pytest.mark.parametrize(("width", "height"), [(191.0, 191.0), (260.0, 10.0), (10.0, 259.01)])
def test_what_fits_neither_way_is_refused_with_its_size_and_the_windows(width, height):
    with pytest.raises(DoesNotFit) as caught:
        pack([Item(0, 10, 10), Item(8, width, height)], WINDOW, 5.0)
    error = caught.value
    assert (error.key, error.width, error.height, error.window) == (8, width, height, WINDOW)
    assert f"{width:.1f} × {height:.1f} mm" in str(error)
    assert "190.0 × 259.0 mm" in str(error)
    assert isinstance(error, ValueError)


def test_nothing_takes_no_page():
    assert pack([], WINDOW, 5.0) == ()


def test_the_same_items_are_packed_the_same_way():
    rng = random.Random(5)
    items = [Item(k, rng.uniform(20, 150), rng.uniform(20, 120)) for k in range(30)]
    assert pack(items, WINDOW, 6.0) == pack(list(items), WINDOW, 6.0)


@settings(max_examples=100)
@given(st.floats(1.0, 5000.0), st.floats(60.0, 400.0), st.floats(0.0, 50.0))
def test_sections_are_equal_overlap_and_reach_from_end_to_end(length, longest, overlap):
    parts = sections(length, longest, overlap)
    assert parts[0][0] == 0.0
    assert parts[-1][1] == pytest.approx(length)
    assert all(end - start == pytest.approx(parts[0][1], abs=1e-6) for start, end in parts)
    assert all(end - start <= longest + 1e-6 for start, end in parts)
    assert all(before[1] - after[0] == pytest.approx(overlap, abs=1e-6) for before, after in itertools.pairwise(parts))


@settings(max_examples=100)
@given(st.floats(1.0, 5000.0), st.floats(60.0, 400.0), st.floats(0.0, 50.0))
def test_one_section_fewer_would_not_reach(length, longest, overlap):
    fewer = len(sections(length, longest, overlap)) - 1
    assert fewer * longest - max(0, fewer - 1) * overlap < length


def test_a_strip_that_fits_is_not_cut():
    assert sections(250.0, 250.0, 20.0) == ((0.0, 250.0),)


def test_a_strip_that_sections_fill_exactly_takes_no_more():
    assert sections(480.0, 250.0, 20.0) == ((0.0, 250.0), (230.0, 480.0))


def test_sections_no_longer_than_their_overlap_are_refused():
    with pytest.raises(ValueError, match=r"sections of 20\.0 mm cannot overlap by 20\.0 mm"):
        sections(100.0, 20.0, 20.0)
