"""The report: its form, its full precision, and that it says the same as the document."""

from __future__ import annotations

import json
import math

import pytest

from layout import shapes
from layout.document import Bar, Document, Mark, Page, Placement
from layout.drawing import Drawing, Role, gather
from layout.geometry import Affine, Box
from layout.piece import Piece
from layout.report import report

THIRD = 1.0 / 3.0


@pytest.fixture
def document() -> Document:
    drawing = gather([shapes.line((0.0, 0.0), (100.0, 0.0), Role.CUT)])
    points = (("front left", (-125.0, 70.0 + THIRD)), ("front right", (125.0, 70.0)))
    piece = Piece("template underside", "template", "Seat template", drawing, "tile", points=points)
    placed = Placement(piece, Affine.turn(90.0).then(Affine.move(180.0 + THIRD, 20.0)), Box(0.0, -40.0, 190.0, 99.9))
    mark = Mark("1", "template underside", (50.0, THIRD), (THIRD, 51.0))
    bar = Bar((14.0, 12.0), (114.0, 12.0), 100.0)
    tiled = Page(
        3,
        "template",
        "template A1",
        "Seat template",
        "A1",
        (210.0, 297.0),
        (placed,),
        Drawing(),
        (mark,),
        (bar,),
        "card",
    )
    whole = Page(4, "scale", "scale", "Scale check", None, (210.0, 279.4), (), Drawing(), (), (), "paper")
    return Document("Slipway stool", "a4", (tiled, whole), (piece,))


def test_the_report_has_the_form_that_is_promised(document):
    found = report(document, "slipway-stool.pdf")
    assert found["file"] == "slipway-stool.pdf"
    assert found["paper"] == "a4"
    first, second = found["pages"]
    assert {key: first[key] for key in ("page", "sheet", "tile", "size_mm")} == {
        "page": 3, "sheet": "template", "tile": "A1", "size_mm": [210.0, 297.0],
    }  # fmt: skip
    assert first["placements"] == [
        {
            "piece": "template underside",
            "to_page": [0.0, 1.0, -1.0, 0.0, 180.0 + THIRD, 20.0],
            "window_mm": [0.0, -40.0, 190.0, 99.9],
        }
    ]
    assert first["marks"] == [
        {"id": "1", "piece": "template underside", "page_mm": [50.0, THIRD], "drawing_mm": [THIRD, 51.0]}
    ]
    assert first["bars"] == [{"from_mm": [14.0, 12.0], "to_mm": [114.0, 12.0], "nominal_mm": 100.0}]
    assert second["tile"] is None
    assert (first["label"], first["title"], first["stock"]) == ("template A1", "Seat template", "card")
    (piece,) = found["pieces"]
    assert piece["piece"] == "template underside"
    assert piece["points"] == {"front left": [-125.0, 70.0 + THIRD], "front right": [125.0, 70.0]}


def test_the_report_keeps_full_precision_through_json(document):
    found = report(document, "x.pdf")
    assert json.loads(json.dumps(found)) == found
    assert json.loads(json.dumps(found))["pages"][0]["marks"][0]["drawing_mm"][0] == THIRD


def test_a_point_can_be_found_on_the_page_from_the_report_alone(document):
    found = report(document, "x.pdf")
    x, y = found["pieces"][0]["points"]["front right"]
    a, b, c, d, e, f = found["pages"][0]["placements"][0]["to_page"]
    # A quarter turn counter-clockwise takes (125, 70) to (-70, 125), and the shift takes it on.
    assert math.dist((a * x + c * y + e, b * x + d * y + f), (110.0 + THIRD, 145.0)) < 1e-12
