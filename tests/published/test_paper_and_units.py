"""Sizes of paper and units against the standards that fix them."""

from __future__ import annotations

import io

import pypdf
import pytest

from jigs.quantities import format_length, length_mm
from jigs.registry import pieces
from layout.pages import compose
from layout.paper import paper_from
from layout.pdf import pdf_bytes
from tests.jigs.conftest import demo

# ISO 216:2007.
ISO_216 = {"a4": (210, 297), "a3": (297, 420), "a2": (420, 594)}
# ASME Y14.1 (ANSI A and B); legal from CSS Paged Media, the `size` keywords.
INCHES = {"letter": (8.5, 11), "tabloid": (11, 17), "legal": (8.5, 14)}
# NBS Circular 572, addendum, in force 1 July 1959: 1 in = 25.4 mm exactly.
INCH_MM = 25.4
# ISO 32000-1:2008 8.3.2.3 (subclause from memory): a unit of user space is 1/72 in.
USER_SPACE_MM = INCH_MM / 72


@pytest.mark.parametrize(("name", "size"), ISO_216.items())
def test_metric_paper_has_the_size_of_iso_216(name, size):
    paper = paper_from(name)
    assert (paper.width_mm, paper.height_mm) == size


@pytest.mark.parametrize(("name", "size"), INCHES.items())
def test_paper_in_inches_has_the_size_of_its_standard(name, size):
    paper = paper_from(name)
    assert (paper.width_mm, paper.height_mm) == pytest.approx([side * INCH_MM for side in size], abs=1e-9)


def test_the_default_paper_is_what_a4_and_letter_have_in_common():
    paper = paper_from()
    assert paper.width_mm == min(ISO_216["a4"][0], INCHES["letter"][0] * INCH_MM)
    assert paper.height_mm == pytest.approx(min(ISO_216["a4"][1], INCHES["letter"][1] * INCH_MM), abs=1e-9)


def test_an_inch_is_read_and_written_as_25_4_mm():
    assert length_mm("1 in", "mm") == INCH_MM
    assert length_mm(1, "in") == INCH_MM
    assert length_mm("1 ft", "mm") == 304.8
    assert format_length(INCH_MM, "in") == "1 in"
    assert format_length(INCH_MM, "mm") == "25.4 mm"


@pytest.mark.parametrize("name", ["a4", "letter"])
def test_a_pdf_page_has_the_papers_size_and_asks_the_viewer_not_to_scale(name):
    assembly = demo("slipway-stool")
    document = compose("Slipway stool", pieces(assembly, "strips", (assembly.drilled,)), paper_from(name))
    read = pypdf.PdfReader(io.BytesIO(pdf_bytes(document)))
    sizes = {name: sorted(ISO_216[name] if name in ISO_216 else [side * INCH_MM for side in INCHES[name]])}
    for page in read.pages:
        sides = sorted(float(side) * USER_SPACE_MM for side in (page.mediabox.width, page.mediabox.height))
        assert sides == pytest.approx(sizes[name], abs=1e-3)
    # ISO 32000-1:2008 Table 150; /Enforce from ISO 32000-2 Table 147.
    preferences = read.trailer["/Root"]["/ViewerPreferences"]
    assert preferences["/PrintScaling"] == "/None"
    assert list(preferences["/Enforce"]) == ["/PrintScaling"]
