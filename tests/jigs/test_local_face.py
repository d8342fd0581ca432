"""A seat dished or wedged where the bit enters: angles against the tilted face, turned there by scipy."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.spatial.transform import Rotation

from jigs.legs import lean_of, on_local_face
from tests.jigs.conftest import FACES, LEG
from tests.jigs.furnished import angles_of, four_angles, furnished, refusals

SEAT = {"width": 500, "depth": 460}


def tilted(fall_deg, toward_deg):
    """Turns the level face into one that falls toward a bearing, the shortest way: about the level line across it."""
    toward = np.array([math.cos(math.radians(toward_deg)), math.sin(math.radians(toward_deg)), 0.0])
    return Rotation.from_rotvec(math.radians(fall_deg) * np.cross([0, 0, 1], toward))


def assert_lean(lean, toward_foot, fall_deg, toward_deg, side, end):
    turn = tilted(fall_deg, toward_deg)
    normal = turn.apply([0, 0, 1])
    # The face falls that way: a step along it, a step down.
    step = turn.apply([math.cos(math.radians(toward_deg)), math.sin(math.radians(toward_deg)), 0.0])
    assert step[2] == pytest.approx(-math.sin(math.radians(fall_deg)), abs=1e-12)
    foot = np.array(toward_foot)
    expected = four_angles(turn.inv().apply(foot), side, end)
    assert angles_of(lean)[:3] == pytest.approx(expected[:3], abs=1e-7)
    if expected[2] > 1e-4:
        assert (lean.sightline_deg - expected[3] + 180.0) % 360.0 - 180.0 == pytest.approx(0.0, abs=1e-6)
    out = normal * np.sign(foot @ normal)
    # The lean's line in the tilted face, as seen square to the seat.
    line = foot - (foot @ normal) * normal
    assert lean.bevel_deg == pytest.approx(math.degrees(math.atan2(foot @ out, np.linalg.norm(line))), abs=1e-6)
    seen = math.degrees(math.atan2(line[1], line[0]))
    if np.hypot(*line[:2]) > 1e-6:
        assert (seen - lean.bearing_deg + 180.0) % 360.0 - 180.0 == pytest.approx(0.0, abs=1e-5)


@given(
    st.floats(-30, 30),
    st.floats(-30, 30),
    st.floats(0, 30),
    st.floats(-360, 360),
    st.sampled_from([-1, 0, 1]),
    st.sampled_from([-1, 1]),
    st.sampled_from([-1.0, 1.0]),
)
def test_angles_are_those_from_square_to_the_tilted_face(splay, rake, fall, toward, side, end, up):
    way = np.array([side * math.tan(math.radians(splay)), end * math.tan(math.radians(rake)), up])
    way /= np.linalg.norm(way)
    assert_lean(on_local_face(tuple(way), fall, toward, side, end), way, fall, toward, side, end)


@given(st.floats(-40, 40), st.floats(-40, 40), st.floats(-360, 360))
def test_a_face_without_a_fall_changes_nothing(splay, rake, toward):
    way = np.array([math.tan(math.radians(splay)), -math.tan(math.radians(rake)), -1.0])
    way /= np.linalg.norm(way)
    level, same = lean_of(tuple(way), 1, -1), on_local_face(tuple(way), 0.0, toward, 1, -1)
    assert angles_of(same)[:3] == pytest.approx(angles_of(level)[:3], abs=1e-12)
    if level.resultant_deg > 1e-6:
        for one, other in ((level.bearing_deg, same.bearing_deg), (level.sightline_deg, same.sightline_deg)):
            assert (one - other + 180.0) % 360.0 - 180.0 == pytest.approx(0.0, abs=1e-6)


def test_a_face_that_falls_toward_the_foot_by_the_leans_own_angle_makes_it_square_on_the_top():
    """The axis leans out as it goes down; a face whose normal is the axis falls back toward the middle."""
    way = (math.sin(math.radians(12)), 0.0, -math.cos(math.radians(12)))
    assert on_local_face(way, 12.0, 180.0, 1, -1).resultant_deg == pytest.approx(0.0, abs=1e-12)
    assert on_local_face(way, 12.0, 0.0, 1, -1).resultant_deg == pytest.approx(24.0, abs=1e-12)
    rise = (math.sin(math.radians(12)), 0.0, math.cos(math.radians(12)))
    assert on_local_face(rise, 12.0, 0.0, 1, -1).resultant_deg == pytest.approx(0.0, abs=1e-12)


def test_an_axis_that_never_leaves_the_tilted_face_is_an_error():
    flat = (math.cos(math.radians(20)), 0.0, -math.sin(math.radians(20)))
    with pytest.raises(ValueError, match="does not run down"):
        on_local_face(flat, 30.0, 0.0, 1, -1)
    rising = (math.cos(math.radians(20)), 0.0, math.sin(math.radians(20)))
    with pytest.raises(ValueError, match="does not run down"):
        on_local_face(rising, 30.0, 180.0, 1, -1)


@pytest.mark.parametrize("face", FACES)
@pytest.mark.parametrize("at_x", [125, -125])
def test_a_legs_dished_face_changes_what_is_drilled_and_nothing_that_stands(face, at_x):
    rng = np.random.default_rng(5)
    for _ in range(12):
        fall, toward, pitch = float(rng.uniform(1, 20)), float(rng.uniform(-180, 180)), float(rng.uniform(-10, 20))
        splay, rake = (float(v) for v in rng.uniform(2, 15, 2))
        leg = {**LEG, "at": [at_x, 90], "splay": splay, "rake": rake}
        seat = {**SEAT, "pitch": pitch, "drill_from": face}
        plain = furnished([leg], **seat)
        dished = furnished([{**leg, "face_fall": fall, "face_toward": toward}], **seat)
        for before, after in zip(plain.legs, dished.legs, strict=True):
            assert after.seat == before.drill
            assert (after.foot_mm, after.floor, after.toward_foot) == (before.foot_mm, before.floor, before.toward_foot)
            assert (after.top_mm, after.underside_mm) == (before.top_mm, before.underside_mm)
            own = (after.top_mm[0] > 0) == (at_x > 0)
            bearing = toward if own else math.degrees(
                math.atan2(math.sin(math.radians(toward)), -math.cos(math.radians(toward)))
            )  # fmt: skip
            assert_lean(after.drill, after.toward_foot, fall, bearing, after.side, after.end)
        left, right = dished.legs
        assert angles_of(left.drill) == pytest.approx(angles_of(right.drill), abs=1e-9)
        assert (left.drill.bearing_deg + right.drill.bearing_deg - 180.0) % 360.0 == pytest.approx(0.0, abs=1e-7) or (
            left.drill.bearing_deg + right.drill.bearing_deg - 180.0
        ) % 360.0 == pytest.approx(360.0, abs=1e-7)


def test_a_fall_of_nought_leaves_the_leg_as_it_was():
    plain, same = (furnished([{**LEG, **more}], **SEAT) for more in ({}, {"face_fall": 0}))
    assert [leg.drill for leg in plain.legs] == [leg.drill for leg in same.legs]


def test_a_face_that_falls_too_far_is_told():
    assert refusals([{**LEG, "face_fall": 31}]) == ["legs[0].face_fall: 31 is not between 0 and 30 degrees"]
    assert refusals([{**LEG, "face_fall": -1}]) == ["legs[0].face_fall: -1 is not between 0 and 30 degrees"]


def test_a_way_to_fall_without_a_fall_is_refused():
    (line,) = refusals([{**LEG, "face_toward": 70}], **SEAT)
    assert line == (
        "legs[0].face_toward: 70 says where a face falls to that does not fall; "
        "give face_fall, or leave face_toward out"
    )
