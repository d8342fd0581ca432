"""Names told together, and names cut short."""

from __future__ import annotations

import pytest

from jigs.names import in_words, short_name, stems


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


def test_few_names_are_told_in_full_and_many_are_drawn_together():
    names = [f"spindle {k}" for k in range(1, 6)]
    assert in_words(names[:4]) == "spindle 1, spindle 2, spindle 3, spindle 4"
    assert in_words(names) == "spindle 1 to 5"
