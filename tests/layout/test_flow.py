"""Blocks of a written sheet: in order, down the columns, never over one another."""

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely.geometry import box as rectangle

from layout.flow import GAP_MM, Block, fits, flow
from layout.geometry import Box

WINDOW = Box(14.0, 25.0, 204.0, 273.0)


def test_blocks_hang_from_the_top_one_gap_apart() -> None:
    first, second = flow([Block(180.0, 40.0), Block(100.0, 30.0)], WINDOW)
    assert (first.page, first.x_mm, first.y_mm) == (0, 0.0, 208.0)
    assert (second.page, second.x_mm, second.y_mm) == (0, 0.0, 208.0 - GAP_MM - 30.0)


def test_a_full_page_breaks_before_the_block_that_does_not_fit() -> None:
    places = flow([Block(180.0, 150.0), Block(180.0, 100.0), Block(180.0, 50.0)], WINDOW)
    assert [place.page for place in places] == [0, 1, 1]


def test_wide_paper_takes_several_columns_before_a_second_page() -> None:
    places = flow([Block(180.0, 150.0)] * 3, Box(0.0, 0.0, 372.0, 200.0))
    assert [(place.page, place.x_mm) for place in places] == [(0, 0.0), (0, 186.0), (1, 0.0)]


def test_a_block_as_large_as_the_window_fits() -> None:
    assert flow([Block(190.0, 248.0)], WINDOW)[0].y_mm == 0.0


def test_a_block_larger_than_the_window_is_refused() -> None:
    assert not fits(Block(190.1, 10.0), WINDOW)
    with pytest.raises(ValueError, match="larger than the window"):
        flow([Block(190.1, 10.0)], WINDOW)


@settings(max_examples=100)
@given(st.lists(st.tuples(st.floats(5.0, 190.0), st.floats(5.0, 248.0)), max_size=25))
def test_blocks_lie_inside_the_window_apart_and_in_order(sizes: list[tuple[float, float]]) -> None:
    blocks = [Block(*size) for size in sizes]
    places = flow(blocks, WINDOW)
    drawn = [
        (p.page, rectangle(p.x_mm, p.y_mm, p.x_mm + b.width_mm, p.y_mm + b.height_mm))
        for p, b in zip(places, blocks, strict=True)
    ]
    inside = rectangle(0.0, 0.0, WINDOW.width, WINDOW.height).buffer(1e-6)
    assert all(inside.contains(shape) for _, shape in drawn)
    for k, (page, shape) in enumerate(drawn):
        assert all(q != page or shape.distance(other) > GAP_MM - 1e-6 for q, other in drawn[:k])
    reading = [(p.page, p.x_mm, -p.y_mm - b.height_mm) for p, b in zip(places, blocks, strict=True)]
    assert reading == sorted(reading)
