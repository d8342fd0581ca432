from __future__ import annotations

import math
from dataclasses import replace
from itertools import pairwise

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from jigs.assembly_order import PARALLEL_DEG, SPRING_MM, assembly_note, between_deg, change_on_driving_mm, joint_ways
from jigs.quantities import format_length
from jigs.stretchers import place
from tests.jigs.bars import BOX, H_FORM, SIDES, X_FORM, bar, chair, leg, placed, plumb_chair

LEVEL_BOX = [replace(spec, heights_mm=(z, z)) for spec, z in zip(BOX, (110.0, 110.0, 150.0, 70.0), strict=True)]


def rings(specs, members):
    """The sentences on what closes rings, without those on driving legs into the seat."""
    return [note for note in assembly_note(place(specs, members), members, 40.0) if "short of home" not in note]


def ways_of(legs):
    return tuple(leg.along for leg in legs)


def drawn(stretcher, legs, drive):
    """The distance between the mortises at steps of drawing both legs out, less that at home."""
    points = [np.array(end.axis_point_mm) for end in stretcher.ends]
    ways = [(np.array(m.end) - m.start) / np.linalg.norm(np.array(m.end) - m.start) for m in legs]
    steps = np.linspace(0.0, drive, 2001)[:, None]
    apart = np.linalg.norm((points[1] + steps * ways[1]) - (points[0] + steps * ways[0]), axis=1)
    return apart - apart[0]


@given(splay=st.floats(-15.0, 25.0), rake=st.floats(-10.0, 20.0), drive=st.floats(10.0, 90.0),
       low=st.floats(60.0, 200.0))  # fmt: skip
@settings(max_examples=60)
def test_the_change_on_driving_is_the_widest_of_all_the_steps(splay, rake, drive, low):
    legs = chair(splay=splay, rake=rake)
    specs = [bar("one", "front left", "back right", heights=(low, 130.0)), SIDES[0]]
    for stretcher, pair in zip(place(specs, legs), ((legs[0], legs[3]), (legs[0], legs[2])), strict=True):
        changes = drawn(stretcher, pair, drive)
        widest = changes[np.argmax(np.abs(changes))]
        assert abs(change_on_driving_mm(stretcher, ways_of(pair), drive)) == pytest.approx(abs(widest), abs=1e-4)


def test_the_change_is_exact_for_legs_that_splay_in_one_plane():
    legs = [leg("one", -1, -1, splay=15.0, rake=0.0), leg("two", 1, -1, splay=15.0, rake=0.0)]
    (stretcher,) = place([bar("a", "one", "two", heights=(100.0, 100.0))], legs)
    # Each leg carries its mortise outward by 40 sin 15°.
    outward = 80.0 * math.sin(math.radians(15.0))
    assert change_on_driving_mm(stretcher, ways_of(legs), 40.0) == pytest.approx(outward)


def test_legs_that_come_nearest_on_the_way_are_told_by_how_much():
    # They pass each other while they are drawn out: nearest half-way, as far apart again at the end.
    one = leg("one", -1, -1, at=(5.0, 30.0), splay=-20.0, rake=0.0)
    legs = [one, leg("two", 1, 1, at=(5.0, 30.0), splay=-20.0, rake=0.0)]
    (stretcher,) = place([bar("a", "one", "two", fractions=(0.9, 0.9))], legs)
    at_home = stretcher.ends[1].axis_point_mm[0] - stretcher.ends[0].axis_point_mm[0]
    drive = abs(at_home) / math.sin(math.radians(20.0))
    assert change_on_driving_mm(stretcher, ways_of(legs), drive) == pytest.approx(
        drawn(stretcher, legs, drive).max(), abs=1e-3
    )
    assert change_on_driving_mm(stretcher, ways_of(legs[::-1]), 0.0) == 0.0


@pytest.mark.parametrize(
    ("splay", "words"),
    [
        (0.0, "0 mm nearer together than at home: legs give that much, so fit it first and drive both together."),
        (1.5, "2.1 mm further apart than at home: legs give that much, so fit it first and drive both together."),
        (12.0, "16.6 mm further apart than at home: start its two tenons that much, in all, short of"),
        (-8.0, "11.1 mm nearer together than at home: it holds the legs too far apart: spread them by that"),
        (32.0, "42.4 mm further apart than at home, more than both tenons of 20 mm bridge: fit it when the legs are"),
    ],
)
def test_what_driving_does_to_a_stretcher_is_said_in_numbers(splay, words):
    legs = [leg("one", -1, -1, splay=splay, rake=0.0), leg("two", 1, -1, splay=splay, rake=0.0)]
    stretchers = place([bar("a", "one", "two", heights=(100.0, 100.0))], legs)
    note = assembly_note(stretchers, legs, 40.0)[-1]
    assert note.startswith(f"a: with one and two 40 mm short of home in the seat its mortises are {words}")


def test_a_medial_stretcher_is_told_what_the_seat_does_to_it_as_all_legs_are_driven():
    stretchers, legs = placed("H")
    notes = [note for note in assembly_note(stretchers, legs, 40.0) if "short of home" in note]
    assert [note.partition(":")[0] for note in notes] == ["left", "right", "medial"]
    # Where each leg's point is when it is drawn out by 40 mm, and the medial's points at their shares between these.
    named = {leg.name: leg for leg in legs}
    by_name = {stretcher.name: stretcher for stretcher in stretchers}

    def place_of(end, drive):
        if end.host in named:
            return np.array(end.axis_point_mm) + drive * np.array(named[end.host].along)
        host = by_name[end.host]
        first, second = (place_of(one, drive) for one in host.ends)
        at_home = [np.array(one.axis_point_mm) for one in host.ends]
        share = np.linalg.norm(end.axis_point_mm - at_home[0]) / np.linalg.norm(at_home[1] - at_home[0])
        return first + share * (second - first)

    medial = by_name["medial"]
    apart = [math.dist(*(place_of(end, drive) for end in medial.ends)) for drive in (0.0, 40.0)]
    assert change_on_driving_mm(medial, joint_ways(stretchers, named)["medial"], 40.0) == pytest.approx(
        apart[1] - apart[0], abs=1e-9
    )
    change = format_length(abs(apart[1] - apart[0]), "mm")
    assert notes[2].startswith(f"medial: with the legs 40 mm short of home in the seat its mortises are {change} ")


def test_an_h_and_an_x_of_halves_are_fitted_one_after_another():
    alone = "The stretchers and their legs make no closed ring: fit them one after another, in any order. "
    alone += "The seat closes the rings as the legs are driven."
    assert rings(H_FORM, chair()) == [alone]
    assert rings(X_FORM, chair()) == [alone]


def test_the_side_frames_of_a_square_box_are_pushed_together_at_once():
    assert rings(LEVEL_BOX, plumb_chair()) == [
        "First join front left and back left; front right and back right. Then close the ring on front and back: "
        "their axes are 0.0° apart, so they can be pushed together at once."
    ]


def test_the_front_and_back_of_a_mirrored_chair_are_parallel_however_it_splays():
    (note,) = rings(BOX, chair())
    assert "close the ring on front and back: their axes are 0.0° apart" in note


def test_side_stretchers_close_the_ring_where_front_and_back_are_not_parallel():
    tilted = [*LEVEL_BOX[:2], replace(LEVEL_BOX[2], heights_mm=(120.0, 180.0)), LEVEL_BOX[3]]
    (note,) = rings(tilted, plumb_chair())
    assert note.startswith(
        "First join front left and front right; back left and back right. Then close the ring on left and right: their"
    )


def tilted_box(rise, turn):
    """Front and left stretchers out of parallel with their opposites by atan(rise / 300) and atan(turn / 220)."""
    left, right, front, back = LEVEL_BOX
    front = replace(front, heights_mm=(150.0, 150.0 + rise))
    return [replace(left, heights_mm=(110.0, 110.0 + turn)), right, front, back]


def test_axes_a_little_apart_are_sprung_and_told_with_angle_and_length():
    (note,) = rings(tilted_box(15.0, 20.0), plumb_chair())
    assert note.endswith(
        "Then close the ring on front and back: their axes are 2.9° apart, 1 mm aside over a tenon of 20 mm, "
        "so start them together and spring them home."
    )


def test_the_pair_that_is_least_apart_is_chosen():
    (note,) = rings(tilted_box(40.0, 20.0), plumb_chair())
    assert "close the ring on left and right: their axes are 5.2° apart, 1.8 mm aside" in note


def test_within_the_tolerance_axes_count_as_parallel():
    almost = 300.0 * math.tan(math.radians(PARALLEL_DEG * 0.9))
    (note,) = rings(tilted_box(almost, 60.0), plumb_chair())
    assert note.endswith("front and back: their axes are 0.5° apart, so they can be pushed together at once.")


def test_a_triangle_of_stretchers_cannot_be_pushed_together():
    legs = [leg(name, 1, 1, at=at, splay=0.0, rake=0.0)
            for name, at in (("one", (-150.0, 0.0)), ("two", (150.0, 0.0)), ("three", (0.0, 260.0)))]  # fmt: skip
    ring = [bar("a", "one", "two", heights=(100.0, 100.0)), bar("b", "two", "three", heights=(120.0, 120.0)),
            bar("c", "three", "one", heights=(140.0, 140.0))]  # fmt: skip
    (note,) = rings(ring, legs)
    apart = "their axes are 60.0° apart, 17.3 mm aside over a tenon of 20 mm"
    assert note.startswith(f"The ring that b and c close cannot be pushed together: {apart}")
    assert note.endswith("more than wood gives; leave one out, or tenon it into the middle of another.")


def test_a_bench_of_three_frames_is_closed_along_its_length():
    rows = ("left", "middle", "right")
    names = [(f"{row} {end}", x, y) for x, row in enumerate(rows, -1) for y, end in ((-1, "front"), (1, "back"))]
    legs = [leg(name, 1, 1, at=(400.0 * x, 110.0 * y), splay=0.0, rake=0.0) for name, x, y in names]
    across = [bar(f"{row} rail", f"{row} front", f"{row} back", heights=(110.0, 110.0)) for row in rows]
    along = [bar(f"{end} {k}", f"{a} {end}", f"{b} {end}", heights=(150.0, 150.0))
             for end in ("front", "back") for k, (a, b) in enumerate(pairwise(rows))]  # fmt: skip
    (note,) = rings([*across, *along], legs)
    assert note.startswith(
        "First join left front and left back; middle front and middle back; right front and right back. "
        "Then close the ring on front 0, front 1, back 0 and back 1: their axes are 0.0° apart"
    )


def test_a_ring_within_a_ring_is_told_first():
    # A ladder between the left legs, and two such sides joined by front and back.
    ladder = [bar(f"{side} {z}", f"front {side}", f"back {side}", heights=(z, z))
              for side in ("left", "right") for z in (80.0, 180.0)]  # fmt: skip
    across = [replace(spec, heights_mm=(130.0, 130.0)) for spec in LEVEL_BOX[2:]]
    notes = rings([*ladder, *across], plumb_chair())
    assert len(notes) == 3
    assert all("pushed together at once" in note for note in notes)
    assert "front and back: their" in notes[-1]
    assert {note.partition("on ")[2].partition(":")[0] for note in notes[:2]} == {
        "left 80.0 and left 180.0", "right 80.0 and right 180.0"}  # fmt: skip


def test_two_stretchers_between_the_same_two_legs_are_a_ring():
    pair = [bar("low", "front left", "front right", heights=(80.0, 80.0)),
            bar("high", "front left", "front right", heights=(180.0, 180.0))]  # fmt: skip
    assert rings(pair, plumb_chair()) == [
        "Close the ring on low and high: their axes are 0.0° apart, so they can be pushed together at once."
    ]


def test_no_stretchers_need_no_words():
    assert assembly_note((), chair(), 40.0) == []


def test_the_order_does_not_depend_on_the_order_in_the_file():
    legs = chair()
    assert rings(BOX, legs)[0].partition("on ")[0] == rings(BOX[::-1], legs)[0].partition("on ")[0]


@given(a=st.tuples(*[st.floats(-1.0, 1.0)] * 3), b=st.tuples(*[st.floats(-1.0, 1.0)] * 3))
@settings(max_examples=50)
def test_the_angle_between_lines_is_the_lesser_of_the_two(a, b):
    u, v = np.array(a), np.array(b)
    assume(min(np.linalg.norm(u), np.linalg.norm(v)) >= 0.1)
    cosine = min(1.0, abs(u @ v) / np.linalg.norm(u) / np.linalg.norm(v))
    assert between_deg(a, b) == pytest.approx(math.degrees(math.acos(cosine)), abs=1e-5)


def test_a_bench_of_many_legs_is_worked_out_soon():
    count = 40
    turns = 2 * math.pi * np.arange(count) / count
    legs = [leg(str(k), 1, 1, at=(400.0 * math.cos(t), 400.0 * math.sin(t)), splay=0.0, rake=0.0)
            for k, t in enumerate(turns)]  # fmt: skip
    ring = [bar(f"rail {k}", str(k), str((k + 1) % count), heights=(100.0 + 30 * (k % 2),) * 2, tenon_mm=8.0)
            for k in range(count)]  # fmt: skip
    notes = assembly_note(place(ring, legs), legs, 40.0)
    assert len(notes) >= count
    assert SPRING_MM > 0.0
