"""The sheets and their order."""

from __future__ import annotations

import pytest

from jigs.registry import SCALE, SHEETS, pieces
from layout.drawing import Drawing
from tests.jigs.conftest import DEMOS, demo


def test_the_sheets_stand_in_the_order_in_which_a_maker_needs_them():
    assert SHEETS == ("setting-out", "scale", "template", "cards", "strips")


@pytest.mark.parametrize("name", DEMOS)
def test_every_sheet_has_its_pieces_each_with_a_name_of_its_own(name):
    assembly = demo(name)
    made = {sheet: pieces(assembly, sheet, (assembly.drilled,)) for sheet in SHEETS}
    assert made.pop(SCALE) == ()
    names = [piece.name for found in made.values() for piece in found]
    assert len(names) == len(set(names))
    for sheet, found in made.items():
        assert found
        for piece in found:
            assert piece.sheet == sheet
            assert piece.drawing != Drawing()
            assert piece.title
            assert piece.notice
    handled = {sheet: {piece.handling for piece in found} for sheet, found in made.items()}
    assert handled == {"setting-out": {"flow"}, "template": {"tile"}, "cards": {"pack"}, "strips": {"strip"}}


def test_a_template_is_made_of_each_face_that_is_asked_for():
    assembly = demo("slipway-stool")
    for faces in (("top",), ("underside",), ("underside", "top"), ()):
        assert [piece.name for piece in pieces(assembly, "template", faces)] == [f"template {face}" for face in faces]


@pytest.mark.parametrize("name", DEMOS)
def test_the_same_spec_draws_the_same_pieces(name):
    assembly = demo(name)
    for sheet in SHEETS:
        assert pieces(assembly, sheet, ("top", "underside")) == pieces(assembly, sheet, ("top", "underside"))


def test_a_sheet_that_is_not_there_is_a_key_error():
    with pytest.raises(KeyError):
        pieces(demo("slipway-stool"), "floor map", ("top",))
