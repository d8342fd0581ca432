"""The choice of the page grid, against a search over a lattice of offsets that shares no code with it."""

from __future__ import annotations

import itertools
import math
import random

import numpy as np
import pytest
from scipy.ndimage import label
from shapely import LineString, MultiLineString, Point, box, unary_union
from shapely.geometry.base import BaseGeometry

from layout.cover import joined
from layout.grid import SEAM_MARGIN_MM, GridChoice, GridRequest, choose_grid

PORTRAIT = (191.0, 251.0)
LANDSCAPE = (251.0, 191.0)
OVERLAP = 15.0


# --- drawings --------------------------------------------------------------------------------------------------------


def ellipse(x, y, a, b, count=96):
    t = np.linspace(0.0, 2 * math.pi, count + 1)
    return np.stack((x + a * np.cos(t), y + b * np.sin(t)), axis=1)


def frame(x0, y0, x1, y1):
    return np.array([(x0, y0), (x1, y0), (x1, y1), (x0, y1), (x0, y0)], float)


def hatched(x0, y0, x1, y1, step=10.0):
    """Level lines so close that every page of a grid has ink of its own."""
    heights = np.linspace(y0, y1, math.ceil((y1 - y0) / step) + 1)
    return [np.array([(x0, y), (x1, y)]) for y in heights]


def request(ink, outline=(), keep_clear=(), overlap=OVERLAP):
    return GridRequest(tuple(ink), tuple(outline), tuple(keep_clear), overlap)


def seat(rng):
    width, depth = rng.uniform(250, 620), rng.uniform(220, 480)
    outline = ellipse(0.0, depth / 2, width / 2, depth / 2)
    x, front, back = rng.uniform(0.2, 0.36) * width, rng.uniform(0.2, 0.3) * depth, rng.uniform(0.7, 0.8) * depth
    points = [(side * x, y) for y in (front, back) for side in (-1, 1)]
    lines = [np.array([(px, py), (1.7 * px, py + 1.2 * (py - depth / 2))]) for px, py in points]
    return request([outline, *lines, *(ellipse(*p, 12.5, 13.0, 24) for p in points)], [outline], points)


def ell_shape(rng):
    w, h = rng.uniform(300, 700), rng.uniform(300, 600)
    a, b = rng.uniform(0.3, 0.6) * w, rng.uniform(0.3, 0.6) * h
    outline = np.array([(0, 0), (w, 0), (w, b), (a, b), (a, h), (0, h), (0, 0)], float)
    points = [(rng.uniform(15, a - 15), rng.uniform(15, h - 15)) for _ in range(3)]
    return request([outline, *(ellipse(*p, 10.0, 10.0, 24) for p in points)], [outline], points)


def diagonal(rng):
    return request([np.array([(0.0, 0.0), (rng.uniform(300, 1100), rng.uniform(300, 900))])])


def scattered(rng):
    starts = [(rng.uniform(0, 800), rng.uniform(0, 600)) for _ in range(rng.randint(4, 12))]
    ink = [np.array([(x, y), (x + rng.uniform(-70, 70), y + rng.uniform(-70, 70))]) for x, y in starts]
    return request(ink, (), starts[:2], overlap=rng.choice([10.0, 20.0]))


def exact_frame(rng):
    counts = (rng.randint(2, 4), rng.randint(1, 3))
    w, h = (n * (size - OVERLAP) + OVERLAP for n, size in zip(counts, PORTRAIT, strict=True))
    x, y = rng.uniform(-90, 90), rng.uniform(-90, 90)
    outline = frame(x, y, x + w, y + h)
    return request([outline], [outline], [(x + rng.uniform(0.1, 0.9) * w, y + 40.0)])


DRAWINGS = (seat, ell_shape, diagonal, scattered, exact_frame)


# --- the other search ------------------------------------------------------------------------------------------------


def samples(wanted, spacing=2.0):
    """Points of the ink, all its corners among them."""
    points = []
    for line in wanted.ink:
        for p, q in itertools.pairwise(line):
            points.append(np.linspace(p, q, max(2, math.ceil(math.dist(p, q) / spacing) + 1)))
    return np.vstack(points)


def columns_that_show(at, offset, size, overlap):
    pitch = size - overlap
    own = np.floor((at - offset) / pitch).astype(int)
    return own, np.where(at - offset - own * pitch <= overlap, own - 1, own)


def smallest_cover(needs):
    forced = {page for need in needs if len(need) == 1 for page in need}
    rest = [need for need in needs if not need & forced]
    for count in range(len(rest) + 1):
        for extra in itertools.combinations(sorted(set().union(*rest)), count):
            if all(need & set(extra) for need in rest):
                return forced | set(extra)
    raise AssertionError


def lattice(wanted, sizes, steps):
    """(size, offset, pages kept) of the grids at evenly spaced offsets, pages needed by samples of the ink only."""
    points = samples(wanted)
    for w, h in sizes:
        for x in np.linspace(0.0, w - wanted.overlap_mm, steps, endpoint=False) + points[:, 0].min():
            for y in np.linspace(0.0, h - wanted.overlap_mm, steps, endpoint=False) + points[:, 1].min():
                columns = columns_that_show(points[:, 0], x, w, wanted.overlap_mm)
                rows = columns_that_show(points[:, 1], y, h, wanted.overlap_mm)
                shown = set(zip(*(of.tolist() for of in (*columns, *rows)), strict=True))
                needs = {frozenset(itertools.product({a, b}, {c, d})) for a, b, c, d in shown}
                yield (w, h), (x, y), smallest_cover(needs)


def page(size, offset, overlap, i, j):
    x, y = offset[0] + i * (size[0] - overlap), offset[1] + j * (size[1] - overlap)
    return box(x, y, x + size[0], y + size[1])


def ink_of(wanted) -> BaseGeometry:
    return MultiLineString([LineString(line) for line in wanted.ink])


def uncovered_mm(wanted, pages) -> float:
    return ink_of(wanted).difference(unary_union(list(pages)).buffer(1e-6)).length


def seams(pages, overlap):
    """Middle lines of the strips of pages (column, row) -> box, the length of a cell."""
    for (i, j), here in pages.items():
        x0, y0, x1, y1 = here.bounds
        half = overlap / 2
        if (i + 1, j) in pages:
            yield LineString([(x1 - half, y0 + half), (x1 - half, y1 - half)])
        if (i, j + 1) in pages:
            yield LineString([(x0 + half, y1 - half), (x1 - half, y1 - half)])


def clearance(pages, points, overlap):
    lines = list(seams(pages, overlap))
    return min((line.distance(Point(p)) for line in lines for p in points), default=math.inf)


def linked(pages):
    """Cells (column, row) with those that link them where they do not hang together by whole sides."""
    first, low = (min(page[k] for page in pages) for k in (0, 1))
    kept = np.zeros([max(page[k] for page in pages) - least + 1 for k, least in ((1, low), (0, first))], bool)
    for i, j in pages:
        kept[j - low, i - first] = True
    return {(int(i) + first, int(j) + low) for j, i in np.argwhere(joined(kept))}


def hang_together(pages):
    columns, rows = np.array(sorted(pages)).T
    kept = np.zeros((np.ptp(rows) + 1, np.ptp(columns) + 1), bool)
    kept[rows - rows.min(), columns - columns.min()] = True
    return label(kept)[1] == 1


def as_pages(choice: GridChoice):
    """Rows counted upward, as `seams` has them."""
    return {(column, -row): box(*window) for column, row, window in choice.windows}


def cases(per_kind):
    return [pytest.param(kind, seed, id=f"{kind.__name__} {seed}") for kind in DRAWINGS for seed in range(per_kind)]


# --- fewest pages ----------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(("kind", "seed"), cases(5))
def test_no_grid_of_a_lattice_has_fewer_pages_nor_keeps_points_clear_where_the_choice_does_not(kind, seed):
    wanted = kind(random.Random(seed))
    sizes = [PORTRAIT, LANDSCAPE] if seed % 2 else [PORTRAIT]
    choice = choose_grid(wanted, sizes)
    for size, offset, kept in lattice(wanted, sizes, 24):
        if len(kept) > len(choice.windows):
            continue
        inked = {(i, j): page(size, offset, wanted.overlap_mm, i, j) for i, j in kept}
        if uncovered_mm(wanted, inked.values()) > 1e-6:
            continue  # ink between samples needs more
        pages = {(i, j): page(size, offset, wanted.overlap_mm, i, j) for i, j in linked(kept)}
        assert len(pages) >= len(choice.windows)
        if len(pages) > len(choice.windows):
            continue
        if clearance(pages, wanted.keep_clear, wanted.overlap_mm) >= SEAM_MARGIN_MM:
            assert choice.clearance_mm >= SEAM_MARGIN_MM


@pytest.mark.parametrize(("kind", "seed"), cases(8))
def test_all_ink_lies_on_pages_that_are_kept(kind, seed):
    wanted = kind(random.Random(100 + seed))
    assert uncovered_mm(wanted, as_pages(choose_grid(wanted, [PORTRAIT, LANDSCAPE])).values()) < 1e-6


@pytest.mark.parametrize(("kind", "seed"), cases(4))
def test_no_page_could_be_left_out(kind, seed):
    wanted = kind(random.Random(200 + seed))
    pages = as_pages(choose_grid(wanted, [PORTRAIT]))
    for left_out in pages:
        left = {at: p for at, p in pages.items() if at != left_out}
        assert uncovered_mm(wanted, left.values()) > 1e-6 or not hang_together(left)


@pytest.mark.parametrize("columns", [1, 2, 3, 5])
@pytest.mark.parametrize("rows", [2, 3])
@pytest.mark.parametrize("origin", [0.0, -133.7, 1234.56789])
def test_a_drawing_that_fits_its_pages_exactly_needs_no_more(columns, rows, origin):
    width = columns * (PORTRAIT[0] - OVERLAP) + OVERLAP
    height = rows * (PORTRAIT[1] - OVERLAP) + OVERLAP
    ink = hatched(origin, origin / 3, origin + width, origin / 3 + height)
    assert len(choose_grid(request(ink), [PORTRAIT]).windows) == columns * rows


def test_a_hair_too_wide_needs_another_column():
    width = 2 * (PORTRAIT[0] - OVERLAP) + OVERLAP + 0.001
    assert len(choose_grid(request(hatched(0, 0, width, 240)), [PORTRAIT]).windows) == 3


def test_a_drawing_of_the_windows_size_takes_one_page_with_even_margins_and_no_seam():
    choice = choose_grid(request([frame(10, 20, 191, 261)], keep_clear=[(50, 50)]), [(100.0, 100.0), PORTRAIT])
    assert choice == GridChoice(1, ((0, 0, (5.0, 15.0, 196.0, 266.0)),), math.inf)


def test_a_diagonal_line_leaves_the_blank_corners_out_and_row_nought_is_on_top():
    choice = choose_grid(request([np.array([(0.0, 0.0), (520.0, 700.0)])]), [PORTRAIT])
    cells = [(column, row) for column, row, _ in choice.windows]
    assert cells == sorted(cells, key=lambda cell: (cell[1], cell[0]))
    # Five pages hang together from corner to corner; the two other corners are left out.
    assert len(cells) == 5
    assert not {(0, 0), (2, 2)} & set(cells)
    tops = [window.y1 for _, _, window in choice.windows]
    assert tops == sorted(tops, reverse=True)


@pytest.mark.parametrize(("end", "count"), [((837.706, 634.484), 7), ((300.0, 700.0), 4), ((516.103, 533.938), 5)])
def test_a_diagonal_line_takes_the_few_pages_that_only_a_narrow_range_of_offsets_gives(end, count):
    wanted = request([np.array([(0.0, 0.0), end])])
    kept = [len(linked(pages)) for _, _, pages in lattice(wanted, [PORTRAIT], 40)]
    assert min(kept) == count
    assert kept.count(count) < len(kept) / 6
    assert len(choose_grid(wanted, [PORTRAIT]).windows) == count


@pytest.mark.parametrize("seed", range(40))
def test_linking_pages_are_added_where_pages_do_not_hang_together_and_nowhere_else(seed):
    rng = np.random.default_rng(seed)
    kept = rng.random(rng.integers(1, 8, 2)) < 0.4
    kept[tuple(rng.integers(0, kept.shape))] = True
    with_links = joined(kept)
    assert (with_links >= kept).all()
    assert label(with_links)[1] == 1
    if label(kept)[1] == 1:
        assert (with_links == kept).all()


def test_a_gap_is_linked_along_the_row_then_along_the_column():
    assert joined(np.array([[1, 0, 0], [0, 0, 0], [0, 0, 1]], bool)).tolist() == [[1, 1, 1], [0, 0, 1], [0, 0, 1]]


def test_of_grids_with_as_much_ink_on_as_many_pages_the_one_that_hangs_together_is_taken():
    """A rim on two rows of five pages; lower down, its front edge lies in a third row of three that are cut off."""
    window = (258.4, 178.0)
    rim = frame(-600.0, 0.0, 600.0, 317.5)
    choice = choose_grid(request([rim], [rim], overlap=11.0), [window])
    assert len(choice.windows) == 10
    assert hang_together({(column, row) for column, row, _ in choice.windows})


def test_ink_that_lies_in_a_strip_alone_forces_no_page():
    # A full column of pages, and a rung whose end lies in the strip that it would share with another column.
    ink = [frame(0, 0, 180, 600), np.array([(170.0, 100.0), (190.9, 100.0)])]
    assert {column for column, _, _ in choose_grid(request(ink), [PORTRAIT]).windows} == {0}


def test_windows_have_the_given_size_at_one_pitch():
    choice = choose_grid(seat(random.Random(3)), [PORTRAIT, LANDSCAPE])
    (width, height), (_, _, first) = (PORTRAIT, LANDSCAPE)[choice.candidate], choice.windows[0]
    top, left = choice.windows[0][1], choice.windows[0][0]
    for column, row, window in choice.windows:
        assert (window.width, window.height) == pytest.approx((width, height))
        assert window.x0 - first.x0 == pytest.approx((column - left) * (width - OVERLAP))
        assert first.y0 - window.y0 == pytest.approx((row - top) * (height - OVERLAP))


def test_columns_and_rows_count_from_nought():
    choice = choose_grid(diagonal(random.Random(1)), [PORTRAIT])
    assert min(column for column, _, _ in choice.windows) == min(row for _, row, _ in choice.windows) == 0


# --- seams -----------------------------------------------------------------------------------------------------------


def test_the_clearance_is_the_distance_to_the_nearest_seam():
    points = [(90.0, 60.0), (310.0, 95.0), (150.0, 333.0), (222.0, 470.0)]
    wanted = request(hatched(0, 0, 430, 610), keep_clear=points)
    choice = choose_grid(wanted, [PORTRAIT])
    assert choice.clearance_mm == pytest.approx(clearance(as_pages(choice), points, OVERLAP), abs=1e-6)


def test_points_are_kept_from_seams_as_far_as_matters_where_they_can_be():
    points = [(-140.0, 60.0), (140.0, 60.0), (-110.0, 240.0), (110.0, 240.0)]
    choice = choose_grid(request(hatched(-200, 0, 200, 300), keep_clear=points), [PORTRAIT])
    assert choice.clearance_mm >= SEAM_MARGIN_MM + OVERLAP / 2


def test_points_close_together_are_as_clear_as_they_can_be():
    # Residues of the points are every 22 mm of a pitch of 176 mm: the best that a seam can do is the middle, 11 mm.
    points = [(22.0 * k, 100.0) for k in range(1, 19)]
    choice = choose_grid(request(hatched(0, 0, 400, 240), keep_clear=points), [PORTRAIT])
    assert choice.clearance_mm == pytest.approx(11.0, abs=1e-3)


def test_a_side_without_a_page_beyond_it_is_no_seam():
    # The lower right page is left out, and the point lies at the edge towards it.
    ink = [frame(0, 0, 185, 480), np.array([(0.0, 480.0), (360.0, 480.0)])]
    choice = choose_grid(request(ink, keep_clear=[(180.0, 60.0)]), [PORTRAIT])
    assert {(column, row) for column, row, _ in choice.windows} == {(0, 0), (1, 0), (0, 1)}
    assert choice.clearance_mm >= SEAM_MARGIN_MM + OVERLAP / 2


def test_a_point_on_the_outer_half_strip_is_measured_on_the_page_that_shows_it():
    # One column of two pages; the point lies where the next column, which is left out, would begin. The seam between
    # the two can lie no higher than 243.5 mm.
    choice = choose_grid(request(hatched(0, 0, 190, 480), keep_clear=[(188.0, 232.0)]), [PORTRAIT])
    assert len(choice.windows) == 2
    assert choice.clearance_mm == pytest.approx(11.5)


def test_seams_go_round_the_outline_where_no_page_is_lost():
    # Three columns leave the first seam free to lie from 140.5 to 183.5 mm; even margins would put it at 162.
    outline = frame(150, 60, 178, 190)
    choice = choose_grid(request([*hatched(0, 0, 500, 240), outline], [outline]), [PORTRAIT])
    lines = list(seams(as_pages(choice), OVERLAP))
    assert len(lines) == 2
    assert not any(line.intersects(LineString(outline)) for line in lines)


def test_without_anything_to_avoid_the_margins_are_even():
    choice = choose_grid(request([frame(0, 0, 300, 400)]), [PORTRAIT])
    boxes = [window for _, _, window in choice.windows]
    left, right = min(b.x0 for b in boxes), max(b.x1 for b in boxes)
    below, above = min(b.y0 for b in boxes), max(b.y1 for b in boxes)
    assert (-left, -below) == pytest.approx((right - 300, above - 400), abs=1e-6)


def test_no_seam_runs_along_a_line_where_another_place_costs_no_page():
    # Even margins would put the seam of two columns on the drawing's centre line, x = 150.
    centre_line = np.array([(150.0, 0.0), (150.0, 180.0)])
    choice = choose_grid(request([frame(0, 0, 300, 180), centre_line]), [PORTRAIT])
    assert len(choice.windows) == 2
    left, right = (window for _, _, window in choice.windows)
    assert not right.x0 <= 150.0 <= left.x1


# --- window sizes ----------------------------------------------------------------------------------------------------


def test_the_size_that_takes_fewer_pages_is_chosen():
    ink = hatched(0, 0, 480, 180)
    assert choose_grid(request(ink), [PORTRAIT, LANDSCAPE]).candidate == 1
    assert choose_grid(request(ink), [LANDSCAPE, PORTRAIT]).candidate == 0


def test_the_earliest_size_is_chosen_among_equals():
    ink = hatched(0, 0, 340, 340)
    assert choose_grid(request(ink), [PORTRAIT, LANDSCAPE, PORTRAIT]).candidate == 0
    assert choose_grid(request(ink), [LANDSCAPE, PORTRAIT, LANDSCAPE]).candidate == 0


@pytest.mark.parametrize("kind", DRAWINGS)
def test_the_same_drawing_gives_the_same_grid(kind):
    first, second = (choose_grid(kind(random.Random(7)), [PORTRAIT, LANDSCAPE]) for _ in range(2))
    assert first == second


def test_windows_may_touch_without_an_overlap():
    choice = choose_grid(request(hatched(0, 0, 382, 240), overlap=0.0), [PORTRAIT])
    assert [window[0] for _, _, window in choice.windows] == pytest.approx([0.0, 191.0])


def test_a_window_that_two_overlaps_fill_is_refused():
    with pytest.raises(ValueError, match=r"larger than two overlaps of 15\.0 mm"):
        choose_grid(request([frame(0, 0, 100, 100)]), [PORTRAIT, (30.0, 200.0)])


def test_a_drawing_without_ink_is_refused():
    with pytest.raises(ValueError, match="no ink"):
        choose_grid(request([]), [PORTRAIT])
