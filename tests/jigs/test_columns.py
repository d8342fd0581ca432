"""Tables and sentences of 80 columns."""

from __future__ import annotations

from hypothesis import given
from hypothesis import strategies as st

from jigs.columns import WIDTH, sentences, text_table
from jigs.listings import Listing

HEADS = (("", "Part"), ("blank's", "length"), ("", "pieces"))


def test_names_stand_left_and_numbers_right_under_their_heads():
    listing = Listing("Wood", HEADS, (("front left, right", "504.6 mm", "2"), ("seat", "490 mm", "1")))
    assert text_table(listing) == [
        "Wood",
        "                    blank's",
        "Part                 length  pieces",
        "front left, right  504.6 mm       2",
        "seat                 490 mm       1",
    ]


def test_a_name_that_is_too_wide_is_broken_and_its_numbers_stand_on_the_last_line():
    name = "the one by the stove left, right; the one by the door left, right; the one in the middle of them all"
    title, *_, first, second = text_table(Listing("Wood", HEADS, ((name, "504.6 mm", "2"),)))
    assert title == "Wood"
    assert " ".join((first + " " + second).split()) == f"{name} 504.6 mm 2"
    assert second.endswith("504.6 mm       2")
    assert not first.endswith("2")


def test_a_table_without_names_is_numbers_only():
    listing = Listing("Loads", (("front", "left"), ("", "back")), (("340 N", "none can"), ("34.6 kg", "")), names=0)
    assert text_table(listing) == ["Loads", "  front", "   left      back", "  340 N  none can", "34.6 kg"]


words = st.text(st.sampled_from("abc, "), min_size=1, max_size=50).map(lambda text: " ".join(text.split()) or "a")


@given(st.lists(st.tuples(words, st.from_regex(r"[0-9]{1,9} mm", fullmatch=True)), min_size=1, max_size=4))
def test_nothing_is_lost_and_nothing_runs_over(rows):
    lines = text_table(Listing("Wood", HEADS[:2], tuple(rows)))
    assert max(map(len, lines)) <= WIDTH
    said = "".join("".join(lines[3:]).split())
    for name, number in rows:
        assert "".join(name.split()) in said
        assert "".join(number.split()) in said


def test_sentences_are_broken_to_the_width():
    note = "Look at the chair from the front, and again from the side, and once more when it has stood for a week. " * 2
    lines = sentences("Look", [note, "Then sit."])
    assert lines[0] == "Look"
    assert lines[-1] == "Then sit."
    assert max(map(len, lines)) <= WIDTH
    assert " ".join(lines[1:-1]) == note.strip()
    assert sentences("", ["Sit."]) == ["Sit."]
