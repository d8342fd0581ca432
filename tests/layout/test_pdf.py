"""The PDF, read back by other libraries: points, boxes, ink, lettering, and what viewers are told."""

from __future__ import annotations

import dataclasses
import io
import itertools
import math
import os
import random
import re
import shutil
import subprocess
import sys
import time

import numpy as np
import pypdf
import pypdfium2
import pytest
from reportlab.pdfbase.ttfonts import TTFontFace

from layout import curves, pdf, shapes
from layout.curves import Arc, Cubic, Line
from layout.document import Document, Page, Placement
from layout.drawing import Drawing, Fill, Role, Stroke, Text, gather
from layout.faces import face_path
from layout.geometry import Affine, Box
from layout.ink import INKS
from layout.lettering import CAPITAL_OF_EM, text_width_mm
from layout.operations import bounds, transform
from layout.paper import SIZES_MM
from layout.pdf import pdf_bytes
from layout.piece import Piece

A4 = (210.0, 297.0)
WORDS = "Łódź Škoda Ω Ж"
# What the writer promises: any point within this of the model.
POINT_TOLERANCE_MM = 0.002


def piece(drawing: Drawing, name: str = "piece") -> Piece:
    return Piece(name, "template", name, drawing, "tile")


def page(*placements: Placement, size_mm=A4, furniture=None, number: int = 1, sheet="template", label=None) -> Page:
    label = label or f"{sheet} {number}"
    return Page(number, sheet, label, sheet, None, size_mm, placements, furniture or Drawing(), (), (), "paper")


def document(*pages: Page, title: str = "Slipway stool") -> Document:
    pieces = dict.fromkeys(id(p.piece) for page in pages for p in page.placements)
    shown = {id(p.piece): p.piece for page in pages for p in page.placements}
    return Document(title, "a4", pages, tuple(shown[key] for key in pieces))


HERE = Affine.identity()


def shown(drawing: Drawing, to_page: Affine = HERE, window: Box | None = None, size_mm=A4) -> bytes:
    placed = Placement(piece(drawing), to_page, window or bounds(drawing).grown(5.0))
    return pdf_bytes(document(page(placed, size_mm=size_mm)))


def pixels(data: bytes, dpi: float, index: int = 0) -> np.ndarray:
    """A page as PDFium draws it, grey 0 to 255, first row at the top."""
    opened = pypdfium2.PdfDocument(data)
    try:
        return np.asarray(opened[index].render(scale=dpi / 72, grayscale=True).to_numpy()).squeeze().copy()
    finally:
        opened.close()


def a_bit_of_everything() -> Drawing:
    return gather(
        [
            shapes.circle((60.0, 80.0), 41.3, Role.CUT),
            Stroke(curves.ellipse_curve((60.0, 80.0), 30.0, 12.5, 33.0), Role.HIDDEN, closed=True),
            shapes.arrow((20.0, 20.0), (110.0, 61.0), 4.0, Role.SET_OUT),
            shapes.line((60.0, 10.0), (60.0, 150.0), Role.CENTRE),
            shapes.line((5.0, 140.0), (115.0, 140.0), Role.FOLD),
            Stroke((Cubic((10.0, 10.0), (40.0, 90.0), (90.0, -40.0), (115.0, 30.0)),), Role.NOTE),
            Text((60.0, 78.0), WORDS, 7.0, align="centre", angle_deg=25.0, over=True),
            Text((8.0, 120.0), "front left", 5.0, bold=True),
        ]
    )


# True to size


@pytest.mark.parametrize(
    "to_page",
    [
        Affine.move(12.3456, 7.891),
        Affine.turn(90.0).then(Affine.move(250.0, -3.3)),
        Affine.turn(180.0).then(Affine.move(1234.5678, 999.001)),
        Affine.turn(33.3).then(Affine.move(4321.0987, 0.0001)),
    ],
)
@pytest.mark.parametrize("extent_mm", [300.0, 4000.0])
def test_every_point_of_a_placed_piece_is_where_the_model_puts_it(see, to_page, extent_mm):
    dice = random.Random(extent_mm)
    points = [(dice.uniform(-extent_mm, extent_mm), dice.uniform(-extent_mm, extent_mm)) for _ in range(60)]
    curve = (
        *(Line(p, q) for p, q in itertools.pairwise(points[:40])),
        Cubic(points[39], points[40], points[41], points[42]),
    )
    (path,) = see(shown(Drawing((Stroke(curve, Role.CUT),)), to_page))[0].paths

    expected = [to_page.point(p) for p in (*points[:40], points[42])]
    for got, want in zip(path.points, expected, strict=True):
        assert math.dist(got, want) <= POINT_TOLERANCE_MM
    for got, want in zip(path.curves[0], points[39:43], strict=True):
        assert math.dist(got, to_page.point(want)) <= POINT_TOLERANCE_MM


def bezier(control, t: float) -> tuple[float, float]:
    """De Casteljau by hand."""
    points = list(control)
    while len(points) > 1:
        pairs = itertools.pairwise(points)
        points = [((1 - t) * p[0] + t * q[0], (1 - t) * p[1] + t * q[1]) for p, q in pairs]
    return points[0]


@pytest.mark.parametrize("radius_mm", [2.5, 150.0, 3000.0])
def test_arcs_in_the_file_keep_to_the_circle(see, radius_mm):
    arc = Arc((10.0, 20.0), (radius_mm, 0.0), (0.0, radius_mm), 17.0, 211.0)
    (path,) = see(shown(Drawing((Stroke((arc,), Role.CUT),))))[0].paths
    on_file = [bezier(curve, k / 50) for curve in path.curves for k in range(51)]

    assert max(abs(math.dist(p, arc.centre) - radius_mm) for p in on_file) <= POINT_TOLERANCE_MM
    swept = sum(
        math.remainder(math.atan2(q[1] - 20, q[0] - 10) - math.atan2(p[1] - 20, p[0] - 10), math.tau)
        for p, q in itertools.pairwise(on_file)
    )
    assert math.degrees(swept) == pytest.approx(211.0, abs=0.01)


def test_a_bar_measures_100_mm_at_600_dpi_in_pdfium():
    ticks = [shapes.line((20.0 + x, 100.0), (20.0 + x, 120.0), Role.SET_OUT) for x in (0.0, 100.0)]
    ticks += [shapes.line((150.0, 30.0 + y), (170.0, 30.0 + y), Role.SET_OUT) for y in (0.0, 100.0)]
    drawn = pixels(shown(gather(ticks)), 600)

    def middles(dark: np.ndarray) -> list[float]:
        """The middle of each run of dark pixels."""
        runs = np.split(np.flatnonzero(dark), np.flatnonzero(np.diff(np.flatnonzero(dark)) > 1) + 1)
        return [float(run.mean()) for run in runs]

    row, column = drawn[round((297 - 110) / 25.4 * 600)], drawn[:, round(160 / 25.4 * 600)]
    across, down = middles(row < 128), middles(column < 128)
    assert across[1] - across[0] == pytest.approx(100 / 25.4 * 600, abs=1.0)
    assert down[1] - down[0] == pytest.approx(100 / 25.4 * 600, abs=1.0)


@pytest.mark.parametrize("size_mm", [*SIZES_MM.values(), (279.4, 210.0), (900.0, 3000.0)])
def test_page_boxes_are_the_papers_size(size_mm):
    blank = page(size_mm=size_mm)
    read = pypdf.PdfReader(io.BytesIO(pdf_bytes(document(blank)))).pages[0]
    for box in (read.mediabox, read.cropbox, read.trimbox):
        assert [float(side) / 72 * 25.4 for side in box] == pytest.approx([0, 0, *size_mm], abs=0.0001)
    assert read.get("/UserUnit", 1) == 1
    assert read.get("/Rotate", 0) == 0
    assert read.get("/TrimBox") is not None


@pytest.mark.parametrize(
    "to_page", [Affine.scale(0.97), Affine.mirror_x(), Affine(1.0, 0.0, 0.2, 1.0, 0.0, 0.0), Affine.scale(1.0000001)]
)
def test_a_placement_that_would_not_keep_the_size_is_refused(to_page):
    with pytest.raises(ValueError, match="scaled, stretched or mirrored"):
        shown(a_bit_of_everything(), to_page)


# Windows and forms


def test_a_window_shows_its_part_of_the_piece_and_nothing_else():
    window = Box(30.0, 40.0, 80.0, 100.0)
    to_page = Affine.turn(90.0).then(Affine.move(160.0, 50.0))
    drawn = pixels(shown(a_bit_of_everything(), to_page, window), 150) < 200
    whole = pixels(shown(a_bit_of_everything(), to_page), 150) < 200

    on_page = window.mapped(to_page)
    rows, columns = np.nonzero(drawn)
    x, y = (columns + 0.5) / 150 * 25.4, 297 - (rows + 0.5) / 150 * 25.4
    slack = 0.2
    assert x.min() >= on_page.x0 - slack
    assert x.max() <= on_page.x1 + slack
    assert y.min() >= on_page.y0 - slack
    assert y.max() <= on_page.y1 + slack
    inside = np.zeros_like(drawn)
    top, bottom = (round((297 - side) / 25.4 * 150) for side in (on_page.y1 - 0.5, on_page.y0 + 0.5))
    left, right = (round(side / 25.4 * 150) for side in (on_page.x0 + 0.5, on_page.x1 - 0.5))
    inside[top:bottom, left:right] = True
    assert (drawn[inside] == whole[inside]).all()
    assert whole[~inside].any()


@pytest.mark.parametrize("angle_deg", [0.0, 90.0, 180.0, 270.0, 31.0])
def test_a_piece_shown_through_a_form_looks_like_its_drawing_drawn_straight(angle_deg):
    to_page = Affine.turn(angle_deg).then(Affine.move(105.0, 148.0))
    drawing = transform(a_bit_of_everything(), Affine.move(-60.0, -75.0))
    by_form = pixels(shown(drawing, to_page), 150).astype(int)
    flat = pdf_bytes(document(page(furniture=transform(drawing, to_page))))
    straight = pixels(flat, 150).astype(int)

    assert (straight < 128).sum() > 2000
    # Antialiasing may differ by a shade; no pixel turns from black to white.
    assert np.abs(by_form - straight).max() <= 80
    assert (np.abs(by_form - straight) > 8).mean() < 0.001


def test_a_piece_on_many_pages_is_in_the_file_once(see):
    big = piece(a_bit_of_everything())
    tiles = [Placement(big, Affine.move(-x, 0.0), Box(x, 0.0, x + 20.0, 150.0)) for x in (0.0, 20.0, 40.0, 60.0)]
    data = pdf_bytes(document(*(page(tile, number=k) for k, tile in enumerate(tiles, 1))))
    reader = pypdf.PdfReader(io.BytesIO(data))
    forms = {page["/Resources"]["/XObject"].raw_get(name).idnum
             for page in reader.pages for name in page["/Resources"]["/XObject"]}  # fmt: skip
    assert len(forms) == 1
    assert [seen.forms for seen in see(data)] == [["/Piece1"]] * 4


def test_two_equal_pieces_under_different_names_are_both_shown(see):
    twins = [Placement(piece(a_bit_of_everything(), n), Affine.identity(), Box(0, 0, 9, 9)) for n in ("left", "right")]
    assert see(pdf_bytes(document(page(*twins))))[0].forms == ["/Piece1", "/Piece2"]


def test_the_ink_of_furniture_lies_over_the_pieces(see):
    mark = gather([shapes.circle((50.0, 50.0), 4.0, Role.FURNITURE)])
    placed = Placement(piece(a_bit_of_everything()), Affine.identity(), Box(0, 0, 200, 200))
    paths = see(pdf_bytes(document(page(placed, furniture=mark))))[0].paths
    assert [bool(path.form) for path in paths] == [True] * (len(paths) - 1) + [False]


# Ink


def test_each_role_has_its_line_type_after_iso_128_2(see):
    lines = [shapes.line((10.0, 10.0 * k), (100.0, 10.0 * k), role) for k, role in enumerate(Role)]
    paths = dict(zip(Role, see(shown(gather(lines)))[0].paths, strict=True))
    for role, path in paths.items():
        assert path.width_mm == pytest.approx(INKS[role].width_mm, abs=1e-4)
        assert path.dashes_mm == pytest.approx(INKS[role].dashes_mm, abs=1e-4)
        assert path.grey == INKS[role].grey

    # ISO 128-2:2020, from memory, 02 dashed 12, 3; 04 long-dashed dotted 24, 3, 0.5, 3; 05 has two dots.
    kinds = {role: [round(n / path.dashes_mm[1] * 3, 2) for n in path.dashes_mm] if path.dashes_mm else []
             for role, path in paths.items()}  # fmt: skip
    assert kinds[Role.CUT] == kinds[Role.SET_OUT] == kinds[Role.NOTE] == kinds[Role.FURNITURE] == []
    assert kinds[Role.HIDDEN] == [12, 3]
    assert kinds[Role.CENTRE] == [24, 3, 0.5, 3]
    assert kinds[Role.FOLD] == [24, 3, 0.5, 3, 0.5, 3]
    assert paths[Role.CUT].width_mm == pytest.approx(2 * paths[Role.SET_OUT].width_mm, abs=1e-4)


def test_dashed_lines_show_gaps_and_continuous_ones_do_not():
    lines = [shapes.line((10.0, 20.0), (110.0, 20.0), Role.HIDDEN), shapes.line((10.0, 40.0), (110.0, 40.0), Role.CUT)]
    drawn = pixels(shown(gather(lines)), 300)
    columns = slice(round(12 / 25.4 * 300), round(108 / 25.4 * 300))
    dashed, whole = (drawn[round((297 - y) / 25.4 * 300), columns] < 128 for y in (20, 40))
    assert whole.all()
    assert 0.1 < (~dashed).mean() < 0.4


def test_closed_strokes_are_closed_and_open_ones_are_not(see):
    corner = [(10.0, 10.0), (60.0, 10.0), (60.0, 50.0)]
    drawing = gather([shapes.polyline(corner, Role.CUT, closed=True), shapes.polyline(corner, Role.CUT)])
    assert [path.paint for path in see(shown(drawing))[0].paths] == ["s", "S"]


def test_fills_are_solid():
    drawing = gather([Fill(curves.circle_curve((50.0, 50.0), 10.0), Role.SET_OUT)])
    dark = (pixels(shown(drawing), 100) < 128).sum() / (100 / 25.4) ** 2
    assert dark == pytest.approx(math.pi * 100, rel=0.01)


def test_lettering_over_a_line_stands_on_a_blank_patch():
    bar = shapes.line((10.0, 51.5), (110.0, 51.5), Role.CUT)
    plain = Text((60.0, 50.0), "· ·", 3.5, align="centre")
    lone = pixels(shown(gather([bar, plain])), 200) < 128
    patched = pixels(shown(gather([bar, dataclasses.replace(plain, over=True)])), 200) < 128
    row = round((297 - 51.5) / 25.4 * 200)
    assert lone[row, round(10.5 / 25.4 * 200) : round(109.5 / 25.4 * 200)].all()
    gap = (~patched[row, round(10.5 / 25.4 * 200) : round(109.5 / 25.4 * 200)]).sum() / 200 * 25.4
    assert gap == pytest.approx(text_width_mm("· ·", 3.5) + 0.8, abs=1.5)


# Lettering


def test_the_text_can_be_read_back_in_every_script():
    words = [WORDS, "125 × 70 mm ≈ 4 15/16 in · 12.5°", "front left", "Ćma – „Ąę” ½ → −0.5"]
    places = [(k, words[k], bold) for k in range(len(words)) for bold in (False, True)]
    lines = [Text((10.0 + 90.0 * bold, 20.0 + 15 * k), line, 3.5, bold=bold) for k, line, bold in places]
    data = shown(gather(lines))
    pdfium = pypdfium2.PdfDocument(data)
    text_page = pdfium[0].get_textpage()
    for read in (pypdf.PdfReader(io.BytesIO(data)).pages[0].extract_text(), text_page.get_text_bounded()):
        for line in words:
            assert read.count(line) == 2
    text_page.close()
    pdfium.close()


def test_many_letters_do_not_crowd_each_other_out(see):
    letters = "".join(map(chr, [*range(0x41, 0x5B), *range(0xC0, 0x17F), *range(0x391, 0x3A1), *range(0x410, 0x450)]))
    data = shown(gather([Text((10.0, 20.0), letters, 2.5)]), window=Box(0, 0, 2000, 200))
    assert letters in pypdf.PdfReader(io.BytesIO(data)).pages[0].extract_text()
    assert see(data)[0].texts[0].start == pytest.approx((10.0, 20.0), abs=0.002)


@pytest.mark.parametrize(("align", "share"), [("left", 0.0), ("centre", 0.5), ("right", 1.0)])
@pytest.mark.parametrize("angle_deg", [0.0, 90.0, 200.0])
def test_lettering_starts_where_its_alignment_says(see, align, share, angle_deg):
    (text,) = see(shown(gather([Text((50.0, 60.0), "front left", 7.0, align=align, angle_deg=angle_deg)])))[0].texts
    back = share * text_width_mm("front left", 7.0)
    turn = math.radians(angle_deg)
    assert text.start == pytest.approx((50 - back * math.cos(turn), 60 - back * math.sin(turn)), abs=0.002)
    assert text.along == pytest.approx((math.cos(turn), math.sin(turn)), abs=1e-6)
    assert text.em_mm == pytest.approx(7.0 / CAPITAL_OF_EM, abs=1e-4)


def test_capitals_are_as_tall_as_asked():
    rows = np.nonzero((pixels(shown(gather([Text((20.0, 50.0), "HEH", 10.0)])), 600) < 128).any(axis=1))[0]
    assert (rows[-1] - rows[0] + 1) / 600 * 25.4 == pytest.approx(10.0, abs=0.1)


def test_lettering_is_as_wide_as_drawings_take_it_to_be():
    ink = np.nonzero((pixels(shown(gather([Text((20.0, 50.0), "HilfeH", 10.0)])), 600) < 128).any(axis=0))[0]
    width = text_width_mm("HilfeH", 10.0)
    # The bearings at both ends of the letter H: 201 of 2048 units of the em, less in the condensed face.
    assert width - 4.0 < (ink[-1] - ink[0]) / 600 * 25.4 < width


def test_every_font_is_embedded_as_a_subset():
    drawing = gather([Text((10.0, 10.0), WORDS, 5.0), Text((10.0, 30.0), WORDS, 5.0, bold=True)])
    data = shown(drawing)
    fonts = pypdf.PdfReader(io.BytesIO(data)).pages[0]["/Resources"]["/Font"]
    names = [font.get_object()["/BaseFont"] for font in fonts.values()]
    assert all(re.fullmatch(r"/[A-Z]{6}\+DejaVuSansCondensed(-Bold)?", name) for name in names)
    assert len(names) == 2
    assert all("/FontFile2" in font.get_object()["/FontDescriptor"] for font in fonts.values())
    assert len(data) < 60_000


def test_a_lone_space_is_lettering_too(see):
    data = shown(gather([Text((10.0, 10.0), " ", 5.0)]))
    fonts = pypdf.PdfReader(io.BytesIO(data)).pages[0]["/Resources"]["/Font"]
    assert [text.font for text in see(data)[0].texts] == list(fonts)


@pytest.mark.parametrize("bold", [False, True])
def test_the_face_read_at_one_stroke_is_the_one_that_reportlab_reads_by_itself(bold):
    own, slow = pdf._face(bold), TTFontFace(str(face_path(bold)))
    assert [bearing for _, bearing in own.hmetrics] == [bearing for _, bearing in slow.hmetrics]
    # It scales the advance that the last glyphs share, which leaves a fraction, before it keeps it.
    pairs = zip(own.hmetrics, slow.hmetrics, strict=True)
    assert all(ours[0] == its[0] for ours, its in pairs if isinstance(its[0], int))
    assert own.glyphPos == slow.glyphPos
    assert own.defaultWidth == slow.defaultWidth
    # It files the space under the no-break space too, which the face has itself.
    codes = set(slow.charToGlyph) - {0xA0}
    assert codes <= set(own.charToGlyph)
    assert {code: own.charToGlyph[code] for code in codes} == {code: slow.charToGlyph[code] for code in codes}
    assert {code: own.charWidths[code] for code in codes} == {code: slow.charWidths[code] for code in codes}


def test_lettering_without_words_is_nothing(see):
    assert (
        see(shown(gather([shapes.line((0, 0), (9, 9), Role.CUT), Text((5.0, 5.0), "", 5.0, over=True)])))[0].texts == []
    )


# The file


def several_pages() -> Document:
    placed = Placement(piece(a_bit_of_everything()), Affine.move(20.0, 20.0), Box(0.0, 0.0, 100.0, 100.0))
    pages = [
        page(placed, number=1, sheet="scale", label="scale"),
        page(placed, number=2, sheet="template", label="template A1"),
        page(placed, number=3, sheet="template", label="template B1"),
    ]
    return document(*pages, title="Łódź stool (spring)")


def test_viewers_are_told_not_to_scale_and_what_the_pages_are():
    reader = pypdf.PdfReader(io.BytesIO(pdf_bytes(several_pages(), "splaysheet 9.9")), strict=True)
    catalog = reader.trailer["/Root"]
    assert catalog["/ViewerPreferences"]["/PrintScaling"] == "/None"
    assert catalog["/ViewerPreferences"]["/Enforce"] == ["/PrintScaling"]
    assert catalog["/Lang"] == "en"
    assert reader.metadata == {"/Title": "Łódź stool (spring)", "/Producer": "splaysheet 9.9"}
    assert reader.page_labels == ["scale", "template A1", "template B1"]


def test_bookmarks_lead_to_each_sheet_and_page():
    reader = pypdf.PdfReader(io.BytesIO(pdf_bytes(several_pages())))
    scale, scale_pages, template, template_pages = reader.outline
    found = [(entry.title, reader.get_destination_page_number(entry)) for entry in (scale, template)]
    assert found == [("Scale", 0), ("Template", 1)]
    found = [(entry.title, reader.get_destination_page_number(entry)) for entry in (*scale_pages, *template_pages)]
    assert found == [("scale", 0), ("template A1", 1), ("template B1", 2)]


def test_the_same_document_gives_the_same_bytes():
    first = pdf_bytes(several_pages())
    assert pdf_bytes(document(page(furniture=gather([Text((9.0, 9.0), "Other", 5.0)])))) != first
    assert pdf_bytes(several_pages()) == first


def test_the_files_identity_follows_its_content():
    def identity(x: float):
        return pypdf.PdfReader(io.BytesIO(shown(gather([shapes.line((0, 0), (x, 9), Role.CUT)])))).trailer["/ID"][0]

    assert identity(9.0) == identity(9.0)
    assert identity(9.0) != identity(9.1)


MAKE_ONE = """
import hashlib, time
from layout.document import Document, Page
from layout.drawing import Drawing, Text
from layout.pdf import pdf_bytes
lettered = Drawing((Text((9.0, 9.0), "Łódź 12°", 5.0),))
page = Page(1, "scale", "scale", "Scale", None, (210.0, 297.0), (), lettered, (), (), "paper")
print(hashlib.sha256(pdf_bytes(Document("Stool", "a4", (page,), ()))).hexdigest())
"""


def test_the_bytes_depend_on_neither_the_time_zone_nor_the_hash_seed(root):
    found = set()
    for zone, seed in (("UTC", "0"), ("Asia/Tokyo", "1"), ("America/St_Johns", "2")):
        environment = os.environ | {"TZ": zone, "PYTHONHASHSEED": seed}
        run = subprocess.run(
            [sys.executable, "-c", MAKE_ONE], cwd=root, env=environment, capture_output=True, text=True
        )
        assert run.returncode == 0, run.stderr
        found.add(run.stdout)
    assert len(found) == 1


def test_nothing_in_the_file_tells_of_the_machine_or_the_day(root):
    data = pdf_bytes(several_pages())
    for word in (b"CreationDate", b"ModDate", str(root).encode(), time.strftime("%Y%m%d").encode()):
        assert word not in data


CHECKERS = {
    "qpdf": ["qpdf", "--check", "in.pdf"],
    "mutool": ["mutool", "draw", "-o", "out%d.png", "in.pdf"],
    "pdftoppm": ["pdftoppm", "-r", "40", "in.pdf", "out"],
}


@pytest.mark.parametrize("tool", CHECKERS)
def test_other_programs_find_no_fault(tool, tmp_path):
    if not shutil.which(tool):
        pytest.skip(f"{tool} is not installed")
    (tmp_path / "in.pdf").write_bytes(pdf_bytes(several_pages()))
    run = subprocess.run(CHECKERS[tool], cwd=tmp_path, capture_output=True, text=True)
    assert run.returncode == 0, run.stdout + run.stderr
    assert not re.search("error|warning: (?!ICC support)", run.stderr, re.IGNORECASE)


def test_a_blank_page_and_no_pages_at_all_are_files_too():
    assert len(pypdf.PdfReader(io.BytesIO(pdf_bytes(document(page())))).pages) == 1
    assert len(pypdf.PdfReader(io.BytesIO(pdf_bytes(document()))).pages) == 0
