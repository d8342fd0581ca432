"""A document as a PDF, true to size: every piece once, as a form, shown on each page through that page's window.

Owns everything that PDF needs and is the only importer of reportlab. It goes below that library's canvas, which rounds
turns too coarsely for a long piece, names a font that is not embedded, and dates the file. Imports the document, the
drawing's ground, ink and lettering. Lengths stand in the file in points. The same document gives the same bytes.
"""

from __future__ import annotations

import struct
from collections.abc import Iterable, Iterator, Sequence
from functools import cache
from itertools import groupby
from typing import Any

from reportlab.pdfbase import pdfdoc, ttfonts

from layout.curves import Arc, Cubic, Curve, Line, arc_as_cubics
from layout.document import Document, Page, Placement
from layout.drawing import Drawing, Fill, Role, Stroke, Text
from layout.faces import FACES, face, face_path
from layout.geometry import Affine, Box, Point, along, union
from layout.ink import INKS, WHITE
from layout.lettering import em_mm, text_width_mm
from layout.operations import text_corners

POINTS_PER_MM = 72 / 25.4
# 0.00005 pt is 0.00002 mm; a turn's sines are kept so that they hold that over several metres.
COORDINATE_DECIMALS, TURN_DECIMALS = 4, 10
# Arcs are drawn as Bézier curves that stay this near to them.
ARC_TOLERANCE_MM = 0.0005
# The blank patch under lettering reaches this far beyond it.
PATCH_PAD_MM = 0.4
# A placement that stretches by more than this is a mistake, not rounding: 0.000001 mm a metre.
RIGID_TOLERANCE = 1e-9

_POINT = f"%.{COORDINATE_DECIMALS}f %.{COORDINATE_DECIMALS}f"
_MOVE, _LINE, _CURVE = f"{_POINT} m", f"{_POINT} l", f"{_POINT} {_POINT} {_POINT} c"
_RECTANGLE = f"{_POINT} {_POINT} re"
_MATRIX = " ".join([f"%.{TURN_DECIMALS}f"] * 4) + f" {_POINT}"
_ROUND_JOINS = "1 j"

# Codes below the space mean something else to some viewers.
_FIRST_CODE, _PER_FONT = 32, 224


def pdf_bytes(document: Document, producer: str = "splaysheet") -> bytes:
    """The file. Raises ValueError for a placement that would scale, stretch or mirror its piece."""
    pdf = pdfdoc.PDFDocument(compression=1, invariant=1, pdfVersion=(1, 7), lang="en")
    pdf.info = _Info(document.title, producer)
    pdf.Catalog.ViewerPreferences = pdfdoc.PDFDictionary(_preferences())
    letters = _Letters(pdf)
    forms = _add_forms(pdf, letters, document.pages)
    for page in document.pages:
        _add_page(pdf, letters, page, forms)
    letters.add_fonts()
    _add_labels(pdf, document.pages)
    _add_bookmarks(pdf, document.pages)
    return bytes(pdf.GetPDFData(None))


class _Info(pdfdoc.PDFInfo):  # type: ignore[misc]
    """What the file says of itself: no dates, so that it is the same whenever it is made."""

    def __init__(self, title: str, producer: str) -> None:
        super().__init__()
        self.title, self.producer = title, producer

    def format(self, document: Any) -> Any:
        entries = {"Title": pdfdoc.PDFString(self.title), "Producer": pdfdoc.PDFString(self.producer)}
        return pdfdoc.PDFDictionary(entries).format(document)


def _preferences() -> dict[str, Any]:
    """Asks the viewer not to scale, and to print on one side: what is cut out has no back. Enforce is of PDF 2.0."""
    return {
        "PrintScaling": "/None",
        "Enforce": pdfdoc.PDFArray(["/PrintScaling"]),
        "Duplex": "/Simplex",
        "DisplayDocTitle": "true",
    }


# Streams


def _stream(pdf: Any, entries: dict[str, Any], operators: Iterable[str]) -> Any:
    content = "\n".join(operators).encode("ascii") + b"\n"
    pdf.updateSignature(content)
    return pdfdoc.PDFStream(pdfdoc.PDFDictionary(entries), content, [pdfdoc.PDFZCompress])


def _resources(forms: Iterable[str] = ()) -> Any:
    entries = {"Font": pdfdoc.PDFObjectReference(pdfdoc.BasicFonts)}
    names = {name: pdfdoc.PDFObjectReference(name) for name in forms}
    return pdfdoc.PDFDictionary(entries | ({"XObject": pdfdoc.PDFDictionary(names)} if names else {}))


def _add_forms(pdf: Any, letters: _Letters, pages: Iterable[Page]) -> dict[int, str]:
    """Each piece once, in points of its own mm, as large as what is shown of it; names by the piece's identity."""
    windows: dict[int, list[Placement]] = {}
    for placement in (placement for page in pages for placement in page.placements):
        windows.setdefault(id(placement.piece), []).append(placement)
    forms = {}
    for number, (key, placements) in enumerate(windows.items(), 1):
        box = union(placement.window for placement in placements)
        entries = {"Type": "/XObject", "Subtype": "/Form", "BBox": _box(box), "Resources": _resources()}
        forms[key] = f"Piece{number}"
        pdf.Reference(_stream(pdf, entries, _operators(placements[0].piece.drawing, letters)), forms[key])
    return forms


def _box(box: Box) -> Any:
    return pdfdoc.PDFArray([f"{side * POINTS_PER_MM:.{COORDINATE_DECIMALS}f}" for side in box])


# Pages


def _add_page(pdf: Any, letters: _Letters, page: Page, forms: dict[int, str]) -> None:
    sheet = pdfdoc.PDFPage()
    sheet.MediaBox = sheet.CropBox = sheet.TrimBox = _box(Box(0.0, 0.0, *page.size_mm))
    names = dict.fromkeys(forms[id(placement.piece)] for placement in page.placements)
    sheet.Resources = _resources(names)
    sheet.Contents = _stream(pdf, {}, _page_operators(letters, page, forms))
    pdf.addPage(sheet)


def _page_operators(letters: _Letters, page: Page, forms: dict[int, str]) -> Iterator[str]:
    for placement in page.placements:
        yield from _shown(placement, forms[id(placement.piece)])
    yield from _operators(page.furniture, letters)


def _shown(placement: Placement, form: str) -> Iterator[str]:
    """The form through its window, which is cut in the piece's own mm and so true whichever way the piece is turned."""
    _check_rigid(placement)
    window = placement.window
    yield "q"
    yield f"{_matrix(placement.to_page)} cm"
    yield _RECTANGLE % (*_points(window.x0, window.y0), *_points(window.width, window.height))
    yield f"W n /{form} Do"
    yield "Q"


def _check_rigid(placement: Placement) -> None:
    a, b, c, d, *_ = placement.to_page
    if max(abs(a - d), abs(b + c), abs(a * d - b * c - 1.0)) > RIGID_TOLERANCE:
        raise ValueError(f"{placement.piece.name} would be scaled, stretched or mirrored by {placement.to_page}")


def _add_labels(pdf: Any, pages: Sequence[Page]) -> None:
    """Each page's own label in place of its number in a viewer."""
    labels = pdf.Catalog.PageLabels = pdfdoc.PDFPageLabels()
    for index, page in enumerate(pages):
        labels.addPageLabel(index, pdfdoc.PDFPageLabel(prefix=page.label))


def _add_bookmarks(pdf: Any, pages: Sequence[Page]) -> None:
    """One for each sheet, and under it one for each of its pages."""
    outline, tree = pdf.outline, []
    for sheet, group in groupby(enumerate(pages, 1), key=lambda entry: entry[1].sheet):
        entries = list(group)
        below = [_bookmark(outline, f"page {number}", page.label, number) for number, page in entries]
        tree.append((_bookmark(outline, f"sheet {entries[0][0]}", sheet.capitalize(), entries[0][0]), below))
    if tree:
        outline.setDestinations(tree)


def _bookmark(outline: Any, name: str, title: str, number: int) -> dict[str, Any]:
    outline.destinationnamestotitles[name] = title
    return {name: pdfdoc.PDFArray([pdfdoc.PDFObjectReference(f"Page{number}"), "/Fit"])}


# Drawings


def _points(x_mm: float, y_mm: float) -> Point:
    return (x_mm * POINTS_PER_MM, y_mm * POINTS_PER_MM)


def _matrix(m: Affine) -> str:
    return _MATRIX % (m.a, m.b, m.c, m.d, *_points(m.e, m.f))


def _operators(drawing: Drawing, letters: _Letters) -> Iterator[str]:
    """A drawing in PDF's operators, in its order."""
    pen: Role | None = None
    yield _ROUND_JOINS
    for item in drawing.items:
        match item:
            case Stroke(curve, role, closed):
                if role is not pen:
                    pen = role
                    yield _pen(role)
                yield from _path(curve)
                yield "s" if closed else "S"
            case Fill(curve, role):
                yield f"{INKS[role].grey:g} g"
                yield from _path(curve)
                yield "f"
            case Text():
                yield from _lettering(item, letters)


def _pen(role: Role) -> str:
    ink = INKS[role]
    dashes = " ".join(f"{length * POINTS_PER_MM:.4f}" for length in ink.dashes_mm)
    return f"{ink.grey:g} G {ink.width_mm * POINTS_PER_MM:.4f} w [{dashes}] 0 d"


def _path(curve: Curve) -> Iterator[str]:
    yield _MOVE % _points(*curve[0].start)
    for segment in curve:
        match segment:
            case Line():
                yield _LINE % _points(*segment.end)
            case Cubic():
                yield _cubic(segment)
            case Arc():
                yield from map(_cubic, arc_as_cubics(segment, ARC_TOLERANCE_MM))


def _cubic(cubic: Cubic) -> str:
    return _CURVE % (*_points(*cubic.first), *_points(*cubic.second), *_points(*cubic.end))


# Lettering


def _lettering(text: Text, letters: _Letters) -> Iterator[str]:
    if not text.text:
        return
    if text.over:
        yield f"{WHITE:g} g"
        yield from _polygon(text_corners(text, PATCH_PAD_MM))
    yield f"{INKS[text.role].grey:g} g"
    yield f"BT {_matrix(_place(text))} Tm"
    size = em_mm(text.height_mm) * POINTS_PER_MM
    for font, codes in letters.codes(text.text, text.bold):
        yield f"/{font} {size:.{COORDINATE_DECIMALS}f} Tf <{codes.hex()}> Tj"
    yield "ET"


def _polygon(corners: Sequence[Point]) -> Iterator[str]:
    yield _MOVE % _points(*corners[0])
    for corner in corners[1:]:
        yield _LINE % _points(*corner)
    yield "f"


def _place(text: Text) -> Affine:
    """Where the left end of the lettering's foot lies, and which way it reads."""
    width = text_width_mm(text.text, text.height_mm, text.bold)
    back = {"left": 0.0, "centre": width / 2, "right": width}[text.align]
    return Affine.turn(text.angle_deg).then(Affine.move(*along(text.at, text.angle_deg, -back)))


# Fonts


class _Letters:
    """The characters that a document uses, in the order of their first use, and the embedded fonts that hold them.

    A font has codes of one byte for up to `_PER_FONT` characters, the first font's first one the space; then comes the
    next font.
    """

    def __init__(self, pdf: Any) -> None:
        self._pdf = pdf
        self._used: dict[bool, dict[str, int]] = {}

    def codes(self, text: str, bold: bool) -> Iterator[tuple[str, bytes]]:
        """The text in stretches of one font each: the font's name and the codes."""
        used = self._used.setdefault(bold, {" ": 0})
        places = [used.setdefault(character, len(used)) for character in text]
        for font, stretch in groupby(places, key=lambda place: place // _PER_FONT):
            yield _font_name(bold, font), bytes(_FIRST_CODE + place % _PER_FONT for place in stretch)

    def add_fonts(self) -> None:
        """Put into the file what has been used."""
        for bold, used in self._used.items():
            characters = [ord(character) for character in used]
            for start in range(0, len(characters), _PER_FONT):
                self._add_font(bold, start // _PER_FONT, characters[start : start + _PER_FONT])

    def _add_font(self, bold: bool, number: int, characters: list[int]) -> None:
        # reportlab's way with a subset: a list of characters, each at the place of its code; 0 is none.
        subset, face = [0] * _FIRST_CODE + characters, _face(bold)
        name = f"SPLA{chr(65 + number // 26)}{chr(65 + number % 26)}+{FACES[bold]}"
        font = pdfdoc.PDFTrueTypeFont()
        font.BaseFont, font.Name = name, _font_name(bold, number)
        font.FirstChar, font.LastChar = 0, len(subset) - 1
        font.Widths = pdfdoc.PDFArray([face.getCharWidth(code) for code in subset])
        to_unicode = pdfdoc.PDFStream(content=ttfonts.makeToUnicodeCMap(name, subset), filters=[pdfdoc.PDFZCompress])
        font.ToUnicode = self._pdf.Reference(to_unicode)
        font.FontDescriptor = face.addSubsetObjects(self._pdf, name, subset)
        self._pdf.idToObject[pdfdoc.BasicFonts].dict[font.Name] = self._pdf.Reference(font)


def _font_name(bold: bool, number: int) -> str:
    return f"{'Bold' if bold else 'Plain'}{number}"


class _Face(ttfonts.TTFontFace):  # type: ignore[misc]
    """reportlab's face, its long tables read at one stroke: number by number, as it does, takes ten times as long."""

    def __init__(self, bold: bool) -> None:
        self._read = face(bold)
        super().__init__(str(face_path(bold)))

    def extractInfo(self, charInfo: int = 1) -> None:  # noqa: N802, N803 - reportlab's names
        super().extractInfo(charInfo=0)
        scale = 1000 / self.unitsPerEm
        self.hmetrics, self.charToGlyph = self._read.advances, self._read.glyphs
        self.glyphPos = _places(self.get_table("loca"), self.numGlyphs, long=self.get_table("head")[51] == 1)
        self.charWidths = {code: self.hmetrics[glyph][0] * scale for code, glyph in self.charToGlyph.items()}
        self.defaultWidth = self.hmetrics[0][0] * scale


def _places(loca: bytes, glyphs: int, long: bool) -> list[int]:
    """Where each glyph's outline starts, and where the last one ends."""
    if long:
        return list(struct.unpack_from(f">{glyphs + 1}L", loca))
    return [2 * half for half in struct.unpack_from(f">{glyphs + 1}H", loca)]


@cache
def _face(bold: bool) -> _Face:
    return _Face(bold)
