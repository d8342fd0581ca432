"""The default paper through a common open print path: the `pdftopdf` filter of cups-filters with default options."""

from __future__ import annotations

import os
import shutil
import subprocess
from pathlib import Path

import pypdf
import pytest

from cli.main import main as program
from tests import reading

FILTER = Path("/usr/lib/cups/filter/pdftopdf")
# Paper in points: ISO 216:2007 for A4 and ASME Y14.1 for Letter, as printers' descriptions round them.
PRINTERS = {"A4": (595, 842), "Letter": (612, 792)}
# A bar of 100 mm, measured with a steel rule, is right to a tenth of a millimetre.
BAR_TOLERANCE_MM = 0.1
DEMOS = Path(__file__).parents[2] / "demo_specs"

DESCRIPTION = """*PPD-Adobe: "4.3"
*FormatVersion: "4.3"
*FileVersion: "1.0"
*LanguageVersion: English
*LanguageEncoding: ISOLatin1
*PCFileName: "SHOP.PPD"
*Product: "(Shop printer)"
*PSVersion: "(3010.000) 0"
*Manufacturer: "Shop"
*ModelName: "Shop printer"
*ShortNickName: "Shop printer"
*NickName: "Shop printer"
*LanguageLevel: "3"
*ColorDevice: False
*DefaultColorSpace: Gray
*FileSystem: False
*TTRasterizer: Type42
*cupsVersion: 1.4
*cupsFilter: "application/vnd.cups-pdf 0 -"
*OpenUI *PageSize/Media Size: PickOne
*OrderDependency: 10 AnySetup *PageSize
*DefaultPageSize: {name}
*PageSize {name}/{name}: "<</PageSize[{w} {h}]>>setpagedevice"
*CloseUI: *PageSize
*OpenUI *PageRegion/Media Size: PickOne
*OrderDependency: 10 AnySetup *PageRegion
*DefaultPageRegion: {name}
*PageRegion {name}/{name}: "<</PageSize[{w} {h}]>>setpagedevice"
*CloseUI: *PageRegion
*DefaultImageableArea: {name}
*ImageableArea {name}/{name}: "12 12 {right} {top}"
*DefaultPaperDimension: {name}
*PaperDimension {name}/{name}: "{w} {h}"
"""


def filtered(pdf: Path, printer: str, folder: Path) -> list[reading.SeenPage]:
    """The file as the print path hands it to that printer."""
    w, h = PRINTERS[printer]
    description = folder / f"{printer}.ppd"
    description.write_text(DESCRIPTION.format(name=printer, w=w, h=h, right=w - 12, top=h - 12), encoding="ascii")
    done = subprocess.run(
        [FILTER, "1", "maker", "sheets", "1", "", pdf],
        env={**os.environ, "PPD": str(description)},
        capture_output=True,
        check=True,
        timeout=60,
    )
    return reading.read_pages(done.stdout)


def bar_lengths_mm(page: reading.SeenPage, across: bool) -> list[float]:
    """Lengths of a page's own level (or upright) lines near to 100 mm: furniture is drawn in grey, pieces in black."""
    found = []
    for path in page.paths:
        if len(path.points) == 2 and not path.curves and path.grey > 0:
            (x0, y0), (x1, y1) = path.points
            along, aside = (abs(x1 - x0), abs(y1 - y0)) if across else (abs(y1 - y0), abs(x1 - x0))
            if aside < 0.01:
                found.append(along)
    return [length for length in found if 85 < length < 115]


@pytest.mark.skipif(not FILTER.exists() or not shutil.which("qpdf"), reason="the filter of cups-filters is not here")
@pytest.mark.parametrize("printer", sorted(PRINTERS))
@pytest.mark.parametrize("demo", sorted(DEMOS.glob("*.toml")), ids=lambda path: path.stem)
def test_the_default_paper_comes_out_at_full_size_on_both_papers(demo: Path, printer: str, tmp_path: Path) -> None:
    pdf = tmp_path / "out.pdf"
    program(["make", str(demo), "-o", str(pdf), "--quiet"], standalone_mode=False)
    pages = filtered(pdf, printer, tmp_path)
    assert len(pages) == len(pypdf.PdfReader(pdf).pages)
    for number, page in enumerate(pages, 1):
        for across in (True, False):
            lengths = bar_lengths_mm(page, across)
            assert lengths, f"page {number} has its bar {'across' if across else 'down'}"
            assert min(lengths, key=lambda length: abs(length - 100)) == pytest.approx(100, abs=BAR_TOLERANCE_MM)
