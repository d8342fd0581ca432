from __future__ import annotations

import math
import re
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from scipy.optimize import minimize

from jigs.bores import STEEP_DEG
from jigs.joinery import (
    MEET_TOLERANCE_MM,
    THROUGH_TOLERANCE_MM,
    Slab,
    Tenon,
    cautions,
    longest_blind_tenon_mm,
    tenons,
    wood_between_mm,
)
from jigs.stretchers import Member, place
from tests.jigs.bars import BOX, SIDES, X_FORM, Bar, bar, chair, placed, plumb_chair


def codes(specs, members):
    return [caution.code for caution in cautions(place(specs, members), members)]


def skin(tenon: Tenon, along: int = 40, round_about: int = 90) -> np.ndarray:
    """Points all over the surface of a tenon, its ends included."""
    start, end = np.array(tenon.shoulder), np.array(tenon.tip)
    axis = (end - start) / np.linalg.norm(end - start)
    across = np.cross(axis, np.eye(3)[np.argmin(np.abs(axis))])
    across /= np.linalg.norm(across)
    turn = np.linspace(0.0, 2 * np.pi, round_about, endpoint=False)[:, None]
    ring = tenon.radius_mm * (np.cos(turn) * across + np.sin(turn) * np.cross(axis, across))
    sides = [start + f * (end - start) + ring for f in np.linspace(0.0, 1.0, along)]
    discs = [p + f * ring for p in (start, end) for f in np.linspace(0.0, 1.0, 12)]
    return np.concatenate([*sides, *discs])


def inside(tenon: Tenon, points: np.ndarray) -> np.ndarray:
    start, end = np.array(tenon.shoulder), np.array(tenon.tip)
    length = np.linalg.norm(end - start)
    axis = (end - start) / length
    along = (points - start) @ axis
    away = np.linalg.norm(points - start - along[:, None] * axis, axis=1)
    return (along > 0) & (along < length) & (away < tenon.radius_mm)


def test_a_modest_box_has_nothing_unwise_about_it():
    assert codes(BOX, chair()) == []


def test_across_a_straight_leg_the_tenon_s_rim_comes_out_before_its_middle():
    stretchers, legs = place([replace(SIDES[0], heights_mm=(100.0, 100.0))], plumb_chair()), plumb_chair()
    end = stretchers[0].ends[0]
    # Ø 16 in Ø 30: the rim is through at sqrt(15² - 8²) beyond the leg's axis.
    assert longest_blind_tenon_mm(end, legs[0], 16.0) == pytest.approx(15.0 + math.sqrt(15.0**2 - 8.0**2), abs=1e-9)


@given(splay=st.floats(0.0, 20.0), top=st.floats(22.0, 45.0), foot=st.floats(22.0, 45.0), low=st.floats(80.0, 200.0),
       high=st.floats(80.0, 200.0), thick=st.floats(8.0, 16.0))  # fmt: skip
@settings(max_examples=60)
def test_the_longest_blind_tenon_just_stays_inside(splay, top, foot, low, high, thick):
    legs = chair(splay=splay, diameters=(top, foot))
    stretchers = place([bar("a", "front left", "back left", heights=(low, high), tenon_diameter_mm=thick)], legs)
    end, other = stretchers[0].ends
    longest = longest_blind_tenon_mm(end, legs[0], thick)
    way = (np.array(other.axis_point_mm) - end.axis_point_mm) / stretchers[0].between_axes_mm

    def left(length: float) -> float:
        tip = np.array(end.axis_point_mm) + (end.reach_mm - length) * way
        disc = skin(Tenon(0, "t", tuple(tip + way), tuple(tip), thick / 2), along=2, round_about=720)
        return float(Bar.of(legs[0]).depth(disc[disc @ way < tip @ way + 1e-6]).min())

    assert left(longest - THROUGH_TOLERANCE_MM) > 0.0 > left(longest + THROUGH_TOLERANCE_MM)


def test_a_tenon_that_comes_through_is_told_with_what_would_stay_inside():
    long = bar("left", "front left", "back left", heights=(100.0, 100.0), tenon_mm=33.0)
    found = cautions(place([long], plumb_chair()), plumb_chair())
    assert [caution.code for caution in found] == ["tenon-through"] * 2
    assert found[0].where == "stretchers[0]"
    assert found[0].text == (
        "left: its tenon comes out 5.3 mm at the far side of front left; "
        "27.7 mm stays inside, if it is not meant to be wedged through"
    )


def test_tenons_at_one_height_in_a_slim_leg_meet_and_are_told_by_how_much():
    specs = [bar("left", "front left", "back left", heights=(100.0, 100.0)),
             bar("front", "front left", "front right", heights=(100.0, 100.0))]  # fmt: skip
    (found,) = cautions(place(specs, plumb_chair()), plumb_chair())
    assert (found.code, found.where) == ("tenons-meet", "stretchers[1]")
    # Each reaches 5 mm past the leg's axis and is 8 mm thick on each side of its own: drawn out 13 mm, one is clear.
    assert found.text.startswith("front: its tenon meets that of left inside front left by 13 mm; set one higher")


def test_tenons_a_little_further_apart_than_their_thickness_do_not_meet():
    for gap, expected in ((16.5, []), (15.5, ["tenons-meet"])):
        specs = [bar("left", "front left", "back left", heights=(100.0, 100.0)),
                 bar("front", "front left", "front right", heights=(100.0 + gap, 100.0 + gap))]  # fmt: skip
        assert codes(specs, plumb_chair()) == expected


def test_short_tenons_with_square_ends_need_not_meet_at_one_height():
    # 6 mm short of the axis each: rounded ends would meet, square ones do not.
    specs = [bar("left", "front left", "back left", heights=(100.0, 100.0), tenon_mm=6.0),
             bar("front", "front left", "front right", heights=(100.0, 100.0), tenon_mm=6.0)]  # fmt: skip
    assert codes(specs, plumb_chair()) == []


def test_halves_of_a_cross_meet_in_the_stretcher_that_holds_them():
    long, *halves = X_FORM
    # Each is let in 12 mm, 1 mm past the axis of the long one, Ø 22.
    assert codes([long, *(replace(half, tenon_mm=12.0) for half in halves)], chair()) == ["tenons-meet"]
    assert codes([long, *(replace(half, tenon_mm=10.0) for half in halves)], chair()) == []


ends = st.tuples(*[st.floats(-18.0, 18.0)] * 3)


@given(a=ends, b=ends, c=ends, d=ends, r=st.floats(4.0, 12.0), s=st.floats(4.0, 12.0))
@settings(max_examples=40)
def test_wood_between_tenons_agrees_with_a_minimiser(a, b, c, d, r, s):
    assume(min(math.dist(a, b), math.dist(c, d)) >= 3.0)
    one, other = Tenon(0, "one", a, b, r), Tenon(1, "other", c, d, s)
    wood = wood_between_mm(one, other)
    overlap = inside(one, skin(other)).any() or inside(other, skin(one)).any()
    if wood > MEET_TOLERANCE_MM:
        assert not overlap
        assert wood == pytest.approx(least_distance(one, other), abs=MEET_TOLERANCE_MM)
    elif overlap:
        assert wood < 0.0
    if wood < -MEET_TOLERANCE_MM:
        clear_by(one, other, -wood)


def least_distance(one: Tenon, other: Tenon) -> float:
    """Between two cylinders, over a point of each in its own coordinates, by a minimiser with constraints."""
    frames = []
    for tenon in (one, other):
        start, end = np.array(tenon.shoulder), np.array(tenon.tip)
        axis = (end - start) / np.linalg.norm(end - start)
        across = np.cross(axis, np.eye(3)[np.argmin(np.abs(axis))])
        across /= np.linalg.norm(across)
        basis = [end - start, across * tenon.radius_mm, np.cross(axis, across) * tenon.radius_mm]
        frames.append((start, np.array(basis)))

    def apart(v: np.ndarray) -> float:
        p, q = (start + v[3 * k : 3 * k + 3] @ basis for k, (start, basis) in enumerate(frames))
        return float(np.sum((p - q) ** 2))

    round_ones = [{"type": "ineq", "fun": lambda v, k=k: 1.0 - v[k] ** 2 - v[k + 1] ** 2} for k in (1, 4)]
    bounds = [(0, 1), (-1, 1), (-1, 1)] * 2
    how = {"ftol": 1e-14, "maxiter": 500}
    best = min(
        minimize(apart, start, method="SLSQP", bounds=bounds, constraints=round_ones, options=how).fun
        for start in ([0.5, 0, 0, 0.5, 0, 0], [0.1, 0.3, 0, 0.9, 0, 0.3])
    )
    return math.sqrt(best)


def clear_by(one: Tenon, other: Tenon, move: float) -> None:
    """Moved by a little less in any of many directions they still meet."""
    rng = np.random.default_rng(5)
    for way in rng.normal(size=(25, 3)):
        step = way / np.linalg.norm(way) * max(0.0, move - 2 * MEET_TOLERANCE_MM)
        moved = Tenon(1, "moved", *(tuple(np.array(p) + step) for p in (other.shoulder, other.tip)), other.radius_mm)
        assert wood_between_mm(one, moved) < 0.0


def test_each_joint_has_its_tenon_inside_its_host():
    stretchers, legs = placed("H")
    hosts = {member.name: Bar.of(member) for member in (*legs, *(stretcher.member for stretcher in stretchers))}
    found = list(tenons(stretchers))
    assert [host for host, _ in found] == ["front left", "back left", "front right", "back right", "left", "right"]
    for host, tenon in found:
        depths = hosts[host].depth(np.array([tenon.shoulder, tenon.tip]))
        assert depths[0] == pytest.approx(0.0, abs=1e-9)
        assert depths[1] > 0.0
        assert math.dist(tenon.shoulder, tenon.tip) == pytest.approx(20.0)


def test_a_stretcher_without_tenons_has_none_that_meet():
    blunt = [bar("left", "front left", "back left", heights=(100.0, 100.0), tenon_mm=0.0),
             bar("front", "front left", "front right", heights=(100.0, 100.0), tenon_mm=0.0)]  # fmt: skip
    assert codes(blunt, plumb_chair()) == []


def test_a_stretcher_that_rises_steeply_makes_the_bit_skate():
    for rise, expected in ((math.tan(math.radians(STEEP_DEG - 1)), []), (0.6, ["stretcher-steep"] * 2)):
        spec = bar("left", "front left", "back left", heights=(100.0, 100.0 + 220.0 * rise))
        assert codes([spec], plumb_chair()) == expected
    (first, _) = cautions(place([spec], plumb_chair()), plumb_chair())
    assert first.text.startswith("left: the bit leans 31.0° from square to front left and will skate; start the hole")


def test_diagonals_at_one_height_run_into_each_other():
    specs = [bar("one", "front left", "back right", heights=(120.0, 120.0)),
             bar("two", "front right", "back left", heights=(130.0, 130.0))]  # fmt: skip
    (found,) = cautions(place(specs, plumb_chair()), plumb_chair())
    assert (found.code, found.where) == ("stretchers-cross", "stretchers[1]")
    assert found.text == (
        "two: it runs into one: their axes pass 10 mm apart; 22 mm clears them, or halve them into each other"
    )
    higher = [specs[0], replace(specs[1], heights_mm=(142.5, 142.5))]
    assert codes(higher, plumb_chair()) == []


def test_numbers_are_in_the_maker_s_units():
    long = bar("left", "front left", "back left", heights=(100.0, 100.0), tenon_mm=33.0)
    found = cautions(place([long], plumb_chair()), plumb_chair(), "in")
    assert re.search(r"comes out \S+ in at the far side", found[0].text)


def told(specs, members, **more):
    return {caution.code: caution.text for caution in cautions(place(specs, members), members, **more)}


def test_a_stretcher_that_runs_through_a_leg_or_a_rod_is_told_once_for_all_of_them():
    legs = plumb_chair()
    middle = Member("mid", (0.0, 50.0, 420.0), (0.0, 50.0, 0.0), 30.0, 20.0, (0.0, -1.0, 0.0))
    rods = [Member(f"rod {k}", (60.0 + 5 * k, 55.0, 300.0), (60.0 + 5 * k, 55.0, 0.0), 8.0, 8.0, (0.0, 1.0, 0.0))
            for k in range(3)]  # fmt: skip
    front = bar("front", "front left", "front right", heights=(210.0, 210.0))
    found = told([front], [*legs, middle], others=rods)
    # Half-way down Ø 30 to Ø 20 is Ø 25: 11 mm of the stretcher and 12.5 mm of the leg.
    assert found == {
        "stretcher-blocked": "front: it runs through mid, rod 0, rod 1, rod 2: its axis passes 0 mm from that of mid, "
        "and 23.5 mm clears it; move one of them"
    }
    assert told([replace(front, heights_mm=(210.0, 210.0))], legs) == {}
    aside = [replace(middle, start=(0.0, 50.0 - 23.4, 420.0), end=(0.0, 50.0 - 23.4, 0.0))]
    assert set(told([front], [*legs, *aside])) == {"stretcher-blocked"}
    clear = [replace(middle, start=(0.0, 50.0 - 23.6, 420.0), end=(0.0, 50.0 - 23.6, 0.0))]
    assert told([front], [*legs, *clear]) == {}


@pytest.mark.parametrize(("height", "below"), [(11.1, None), (10.0, "1 mm"), (0.0, "11 mm")])
def test_a_stretcher_that_reaches_below_the_floor_is_told(height, below):
    found = told([bar("front", "front left", "front right", heights=(height, height))], plumb_chair())
    text = f"front: it reaches {below} below the floor; set it higher"
    assert found == ({} if below is None else {"stretcher-low": text})


@pytest.mark.parametrize("pitch", [0.0, 6.0])
def test_a_stretcher_that_comes_into_the_seat_is_told_from_below_and_from_above(pitch):
    c, s = math.cos(math.radians(pitch)), math.sin(math.radians(pitch))
    legs = plumb_chair()
    posts = [Member(f"post {k}", (x, 100.0, 440.0), (x, 100.0, 800.0), 25.0, 20.0, (0.0, 1.0, 0.0))
             for k, x in enumerate((-120.0, 120.0))]  # fmt: skip
    # The underside passes through the front legs' upper ends, the top face 40 mm square above it.
    at_legs = np.array([0.0, 50.0, 420.0])
    normal = (0.0, s, c)
    seat = Slab(tuple(at_legs + 40.0 * np.array(normal)), normal, 40.0)
    top_at_posts = (at_legs + 40.0 * np.array(normal))[2] - (100.0 - (at_legs + 40.0 * np.array(normal))[1]) * s / c
    for clear, deep in ((11.5, None), (8.0, 3.0)):
        below = bar("front", "front left", "front right", heights=(420.0 - clear / c,) * 2)
        above = bar("rail", "post 0", "post 1", heights=(top_at_posts + clear / c,) * 2)
        found = [told([one], [*legs, *posts], seat=seat) for one in (below, above)]
        if deep is None:
            assert found == [{}, {}]
        else:
            assert found == [
                {"stretcher-in-seat": f"front: it comes {deep:g} mm into the seat; set it lower"},
                {"stretcher-in-seat": f"rail: it comes {deep:g} mm into the seat; set it higher"},
            ]


def test_a_shoulder_wider_than_its_host_is_told():
    legs = plumb_chair()
    wide = bar("front", "front left", "back left", heights=(110.0, 110.0), diameter_mm=30.2)
    found = [c.text for c in cautions(place([wide], legs), legs) if c.code == "shoulder-wide"]
    assert found == [
        f"front: its shoulder of 30.2 mm is wider than {leg} there, 30 mm; "
        "make the stretcher thinner or its host thicker"
        for leg in ("front left", "back left")
    ]
