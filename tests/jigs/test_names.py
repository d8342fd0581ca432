"""Names told together, and names cut short."""

from __future__ import annotations

import pytest

from jigs.names import short_name, stems


@pytest.mark.parametrize(
    ("names", "said"),
    [
        (["post"], "post"),
        (["front left", "front right", "back left"], "front left, right; back left"),
        (["spindle 1", "spindle 2"], "spindle 1, 2"),
        (["spindle 1", "spindle 2", "spindle 3", "spindle 7"], "spindle 1 to 3, 7"),
        (["a", "a 1"], "a; a 1"),
        (["arm post left", "stay"], "arm post left; stay"),
    ],
)
def test_names_that_differ_in_their_last_word_are_drawn_together(names, said):
    assert stems(names) == said


@pytest.mark.parametrize(
    ("name", "most", "short"),
    [
        ("front left", 12, "front left"),
        ("the one by the stove left", 14, "the one… left"),
        ("the one by the stove right", 14, "the on… right"),
        ("the one by the stove", 9, "the one…"),
    ],
)
def test_a_name_that_is_cut_keeps_its_side(name, most, short):
    assert short_name(name, lambda words: len(words) < most) == short
