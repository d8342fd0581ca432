"""The real output of every demo, measured by readers apart from the writer: pypdf for numbers, PDFium for pixels."""

from __future__ import annotations

import math
from collections import defaultdict
from functools import cache
from pathlib import Path
from typing import Any, NamedTuple

import numpy as np
import pytest
from numpy.typing import NDArray
from scipy.ndimage import binary_dilation
from scipy.spatial import cKDTree

from jigs import registry
from jigs.assembly import assemble
from jigs.spec import read_spec
from layout.document import Document, Page, Placement
from layout.drawing import Drawing, Stroke, Text
from layout.geometry import Affine, Box
from layout.operations import bounds
from layout.pages import compose
from layout.paper import paper_from
from layout.pdf import pdf_bytes
from layout.report import report
from layout.scale_check import scale_check
from layout.tiling import overlap_box
from tests import reading

DEMOS = sorted((Path(__file__).parents[2] / "demo_specs").glob("*.toml"))
# What the sheets promise of any point: a tenth of the thinnest line.
POINT_TOLERANCE_MM = 0.002
MARK_TOLERANCE_MM = 0.001
DPI = 600
PIXEL_MM = 25.4 / DPI
ASSEMBLY_DPI = 200

each_demo = pytest.mark.parametrize("demo", DEMOS, ids=lambda path: path.stem)


class Made(NamedTuple):
    document: Document
    data: bytes
    told: dict[str, Any]


@cache
def made(demo: Path, size: str = "either") -> Made:
    """A demo's sheets with the templates of both faces."""
    assembly = assemble(read_spec(demo), demo.name)
    paper = paper_from(size)
    pieces = []
    for sheet in registry.SHEETS:
        pieces += [scale_check(paper)] if sheet == registry.SCALE else []
        pieces += registry.pieces(assembly, sheet, ("underside", "top"))
    document = compose(assembly.furniture.name, pieces, paper)
    return Made(document, pdf_bytes(document), report(document, f"{demo.stem}.pdf"))


def mapped(to_page: list[float], points: NDArray[np.float64]) -> NDArray[np.float64]:
    a, b, c, d, e, f = to_page
    return points @ np.array([[a, b], [c, d]]) + (e, f)


@each_demo
def test_every_point_of_every_piece_lies_in_the_file_where_the_model_has_it(demo: Path) -> None:
    document, data, told = made(demo)
    pieces = {piece.name: piece for piece in document.pieces}
    for seen, page in zip(reading.read_pages(data), told["pages"], strict=True):
        tree = cKDTree([point for path in seen.paths for point in path.points])
        for placement in page["placements"]:
            strokes = [s for s in pieces[placement["piece"]].drawing.items if isinstance(s, Stroke)]
            ends = [p for s in strokes for segment in s.curve for p in (segment.start, segment.end)]
            if not ends:
                continue
            distances, _ = tree.query(mapped(placement["to_page"], np.array(ends)))
            assert distances.max() <= POINT_TOLERANCE_MM, (page["page"], placement["piece"])


@each_demo
def test_a_mortise_centre_of_the_report_is_a_crossing_of_lines_in_the_file(demo: Path) -> None:
    """Each named point is pricked at the middle of the small circle drawn round it."""
    document, data, told = made(demo)
    points = {piece["piece"]: piece["points"] for piece in told["pieces"]}
    found: set[tuple[str, str]] = set()
    for seen, page in zip(reading.read_pages(data), told["pages"], strict=True):
        circles = cKDTree(reading.circles(seen))
        for placement in page["placements"]:
            for name, point in points[placement["piece"]].items():
                if not Box(*placement["window_mm"]).holds(tuple(point)):
                    continue
                where = mapped(placement["to_page"], np.array([point]))
                distance, _ = circles.query(where)
                assert distance[0] <= POINT_TOLERANCE_MM
                found.add((placement["piece"], name))
    assert found == {(piece.name, name) for piece in document.pieces for name, _ in piece.points}


@each_demo
def test_a_registration_mark_stands_at_one_place_of_the_drawing_on_all_its_pages(demo: Path) -> None:
    _, data, told = made(demo)
    places: dict[tuple[str, str], list[NDArray[np.float64]]] = defaultdict(list)
    for seen, page in zip(reading.read_pages(data), told["pages"], strict=True):
        circles = reading.circles(seen)
        for mark in page["marks"]:
            nearest = circles[np.hypot(*(circles - mark["page_mm"]).T).argmin()]
            assert math.dist(nearest, mark["page_mm"]) <= POINT_TOLERANCE_MM, "the circle stands where the report says"
            for placement in page["placements"]:
                back = np.linalg.inv(_square(placement["to_page"]))
                drawn = (np.array([*nearest, 1.0]) @ back)[:2]
                if placement["piece"] == mark["piece"] and math.dist(drawn, mark["drawing_mm"]) < 1.0:
                    places[mark["piece"], mark["id"]].append(drawn)
    for key, drawn in places.items():
        assert len(drawn) >= 2, f"mark {key} is on two pages or in two sections"
        assert np.ptp(np.array(drawn), axis=0).max() <= MARK_TOLERANCE_MM, key


def _square(to_page: list[float]) -> NDArray[np.float64]:
    a, b, c, d, e, f = to_page
    return np.array([[a, b, 0.0], [c, d, 0.0], [e, f, 1.0]])


@each_demo
def test_every_bar_and_square_measures_its_number_at_600_dpi(demo: Path) -> None:
    """Rendered by PDFium, the two end ticks of a bar lie as many pixels apart as the bar's length is long."""
    _, data, told = made(demo)
    for index, page in enumerate(told["pages"]):
        upright = [bar for bar in page["bars"] if min(_run(bar)) < 1e-9]
        assert {max(_run(bar)) for bar in upright} >= {100.0}, "each page has bars of 100 mm"
        for bar in upright:
            measured = reading.distance_between_ends_mm(data, index, bar["from_mm"], bar["to_mm"], DPI)
            assert measured == pytest.approx(bar["nominal_mm"], abs=PIXEL_MM), (page["page"], bar)


def _run(bar: dict[str, Any]) -> tuple[float, float]:
    return (abs(bar["to_mm"][0] - bar["from_mm"][0]), abs(bar["to_mm"][1] - bar["from_mm"][1]))


@each_demo
def test_each_page_has_a_bar_across_and_a_bar_down(demo: Path) -> None:
    for page in made(demo).told["pages"]:
        runs = [_run(bar) for bar in page["bars"]]
        assert (100.0, 0.0) in [(round(x, 9), round(y, 9)) for x, y in runs], page["label"]
        assert (0.0, 100.0) in [(round(x, 9), round(y, 9)) for x, y in runs], page["label"]


@each_demo
@pytest.mark.parametrize("face", ["underside", "top"])
def test_tiles_put_back_together_are_the_whole_drawing(demo: Path, face: str) -> None:
    """As pixels: every dark pixel of the one has a dark pixel of the other within two of it.

    One is for anti-aliasing, one for PDFium's rounding of each page to whole pixels; together a thin line's width.
    """
    document, _, _ = made(demo)
    name = f"template {face}"
    tiles = [page for page in document.pages if any(p.piece.name == name for p in page.placements)]
    bare = tuple(page._replace(furniture=Drawing(), marks=(), bars=()) for page in tiles)
    whole_page = _whole(tiles[0].placements[0])
    box = whole_page.placements[0].window
    turn = tiles[0].placements[0].to_page
    pieces = (tiles[0].placements[0].piece,)
    assembled = _assembled(Document("tiles", "x", bare, pieces), box.mapped(_linear(turn)), turn)
    whole = reading.pixels(pdf_bytes(Document("whole", "x", (whole_page,), pieces)), 0, ASSEMBLY_DPI)
    assert assembled.shape == whole.shape
    for one, other in ((assembled, whole), (whole, assembled)):
        stray = (one < 100) & ~_grown(other < 235)
        assert not stray.any(), f"{stray.sum()} stray pixels"


def _linear(m: Affine) -> Affine:
    return Affine(m.a, m.b, m.c, m.d, 0.0, 0.0)


def _whole(placement: Placement) -> Page:
    """One page as large as the drawing, turned as the tiles are."""
    box = bounds(placement.piece.drawing).grown(2.0)
    laid = box.mapped(_linear(placement.to_page))
    to_page = _linear(placement.to_page).then(Affine.move(-laid.x0, -laid.y0))
    size = (laid.width, laid.height)
    shown = Placement(placement.piece, to_page, box)
    return Page(1, "whole", "whole", "whole", None, size, (shown,), Drawing(), (), (), "paper")


def _assembled(tiles: Document, laid: Box, turn: Affine) -> NDArray[Any]:
    """The tiles' pixels laid side by side by their windows alone, as sheets of paper would be."""
    scale = ASSEMBLY_DPI / 25.4
    canvas = np.full((math.ceil(laid.height * scale), math.ceil(laid.width * scale)), 255, dtype=np.uint8)
    data = pdf_bytes(tiles)
    for index, page in enumerate(tiles.pages):
        placement = page.placements[0]
        image = reading.pixels(data, index, ASSEMBLY_DPI)
        shift_x = placement.to_page.e + laid.x0
        shift_y = placement.to_page.f + laid.y0
        for_x = round(shift_x * scale)
        for_y = round((page.size_mm[1] - (shift_y + laid.height)) * scale)
        _lay(canvas, image, for_x, for_y)
    return canvas


def _lay(canvas: NDArray[Any], image: NDArray[Any], x: int, y: int) -> None:
    """Darkens the canvas with the image, whose pixel (x, y) falls on the canvas's first."""
    rows, columns = canvas.shape
    y0, x0 = max(0, y), max(0, x)
    part = image[y0 : y + rows, x0 : x + columns]
    target = canvas[y0 - y : y0 - y + part.shape[0], x0 - x : x0 - x + part.shape[1]]
    np.minimum(target, part, out=target)


def _grown(dark: NDArray[np.bool_]) -> NDArray[np.bool_]:
    return binary_dilation(dark, np.ones((3, 3)), iterations=2)


@each_demo
def test_no_mortise_centre_lies_within_12_mm_of_a_seam(demo: Path) -> None:
    """On the default paper every demo has grids that allow it."""
    _, _, told = made(demo)
    points = {piece["piece"]: piece["points"] for piece in told["pieces"]}
    windows: dict[str, list[Box]] = defaultdict(list)
    for page in told["pages"]:
        if page["tile"]:
            windows[page["placements"][0]["piece"]].append(Box(*page["placements"][0]["window_mm"]))
    for name, boxes in windows.items():
        for point in points[name].values():
            assert any(
                box.grown(-(12.0 + 6.0) + 1e-9).holds(tuple(point)) or _outer(box, boxes, point) for box in boxes
            )


def _outer(box: Box, boxes: list[Box], point: list[float]) -> bool:
    """Whether the point is well inside the box but for sides on which there is no other page."""
    x, y = point
    sides = {
        (x - box.x0): any(b.x0 < box.x0 - 1 and b.y0 <= y <= b.y1 for b in boxes),
        (box.x1 - x): any(b.x1 > box.x1 + 1 and b.y0 <= y <= b.y1 for b in boxes),
        (y - box.y0): any(b.y0 < box.y0 - 1 and b.x0 <= x <= b.x1 for b in boxes),
        (box.y1 - y): any(b.y1 > box.y1 + 1 and b.x0 <= x <= b.x1 for b in boxes),
    }
    return box.holds((x, y)) and all(distance >= 18.0 - 1e-9 or not joined for distance, joined in sides.items())


def test_the_oval_stool_is_a_small_file() -> None:
    assembly = assemble(read_spec(DEMOS[0].with_stem("slipway-stool")), "slipway-stool.toml")
    paper = paper_from("either")
    pieces = [scale_check(paper)]
    for sheet in registry.SHEETS:
        pieces += registry.pieces(assembly, sheet, (assembly.drilled,))
    assert len(pdf_bytes(compose(assembly.furniture.name, pieces, paper))) <= 150_000


@each_demo
def test_more_tiles_hardly_make_a_larger_file(demo: Path) -> None:
    """A piece is drawn once and shown through each page's window, so a page adds its furniture alone."""
    few, many = made(demo, "900x1400mm"), made(demo, "letter")
    more = len(many.document.pages) - len(few.document.pages)
    assert more > 4
    assert (len(many.data) - len(few.data)) / more < 4_000


@each_demo
@pytest.mark.parametrize("size", ["either", "a4", "letter"])
def test_every_word_of_a_template_can_be_read_whole_on_one_page(demo: Path, size: str) -> None:
    document = made(demo, size).document
    shown = defaultdict(list)
    for page in document.pages:
        for placement in page.placements:
            if placement.piece.handling == "tile":
                shown[placement.piece.name].append(placement.window)
    for piece in document.pieces:
        for item in piece.drawing.items if piece.name in shown else ():
            if isinstance(item, Text):
                box = bounds(Drawing((item,)))
                assert any(overlap_box(box, window) == box for window in shown[piece.name]), (piece.name, item.text)
