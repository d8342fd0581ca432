"""Angles and points of legs against vectors in space that know nothing of the tangent rules."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.spatial.transform import Rotation

from jigs.frames import SeatFrame
from jigs.legs import Axis, direction_of, follow, follow_up, lean_of, on_local_face
from tests.jigs.conftest import DEMOS, FACES, demo, stool

CASES = 4000
TOLERANCE = 1e-9


def lines_of_sight(splay_deg, rake_deg, side, end):
    """Unit directions from mortise to foot in the floor frame.

    Seen from the front the leg lies in a plane that holds the y axis and a plumb line swung by the splay; seen from the
    side, in one that holds the x axis and a plumb line swung by the rake. It is where the two planes cross.
    """
    count = len(splay_deg)
    plumb, x, y = (np.tile(v, (count, 1)) for v in ([0.0, 0.0, -1.0], [1.0, 0.0, 0.0], [0.0, 1.0, 0.0]))
    swung_out = Rotation.from_rotvec(y * np.radians(-side * splay_deg)[:, None]).apply(plumb)
    swung_endward = Rotation.from_rotvec(x * np.radians(end * rake_deg)[:, None]).apply(plumb)
    line = np.cross(np.cross(y, swung_out), np.cross(x, swung_endward))
    line *= -np.sign(line[:, 2])[:, None]
    return line / np.linalg.norm(line, axis=1, keepdims=True)


def angles(direction, basis, side, end):
    """Splay, rake, resultant, sightline, bearing of directions against planes given by bases (columns x, y, normal)."""
    along_x, along_y, up = (np.einsum("ij,ij->i", direction, basis[:, :, k]) for k in range(3))
    outward, endward = np.where(side == 0, 1, side) * along_x, end * along_y
    square = np.linalg.norm(np.cross(direction, basis[:, :, 2]), axis=1)
    return {
        "splay_deg": np.degrees(np.arctan2(outward, -up)),
        "rake_deg": np.degrees(np.arctan2(endward, -up)),
        "resultant_deg": np.degrees(np.arctan2(square, -up)),
        "sightline_deg": np.degrees(np.arctan2(outward, endward)),
        "bearing_deg": np.degrees(np.arctan2(along_y, along_x)) % 360.0,
    }


def meets_plane(start, direction, origin, first, second):
    """Where lines meet planes: how far along the line, and the two coordinates in the plane."""
    matrix = np.stack((direction, -first, -second), axis=2)
    return np.linalg.solve(matrix, (origin - start)[:, :, None])[:, :, 0].T


def worked_out(splay, rake, side, end, pitch, height, thickness, at, from_top):
    """Everything about each leg by rotations and the crossing of lines with planes."""
    count = len(splay)
    turn = Rotation.from_rotvec(np.outer(np.radians(-pitch), [1.0, 0.0, 0.0])).as_matrix()
    level = np.tile(np.eye(3), (count, 1, 1))
    direction = lines_of_sight(splay, rake, side, end)
    origin = np.column_stack((np.zeros(count), np.zeros(count), height))
    below = origin - thickness[:, None] * turn[:, :, 2]
    drilled = np.where(from_top[:, None], origin, below)
    start = drilled + at[:, :1] * turn[:, :, 0] + at[:, 1:] * turn[:, :, 1]
    to_top, *top = meets_plane(start, direction, origin, turn[:, :, 0], turn[:, :, 1])
    to_underside, *underside = meets_plane(start, direction, below, turn[:, :, 0], turn[:, :, 1])
    to_floor, *foot = meets_plane(start, direction, np.zeros((count, 3)), level[:, :, 0], level[:, :, 1])
    return {
        "floor": angles(direction, level, side, end),
        "drill": angles(direction, turn, side, end),
        "toward_foot": np.einsum("ikj,ik->ij", turn, direction),
        "top_mm": np.array(top).T,
        "underside_mm": np.array(underside).T,
        "foot_mm": np.array(foot).T,
        "axis_mm": to_floor - to_underside,
        "in_seat_mm": to_underside - to_top,
    }


def assert_agree(runs, expected):
    """Every angle within TOLERANCE degrees (full turns apart), every length within TOLERANCE mm."""
    for frame in ("floor", "drill"):
        for field, wanted in expected[frame].items():
            found = np.array([getattr(getattr(run, frame), field) for run in runs])
            off = (found - wanted + 180.0) % 360.0 - 180.0
            assert np.abs(off).max() < TOLERANCE, (frame, field, int(np.abs(off).argmax()))
    for field in ("toward_foot", "top_mm", "underside_mm", "foot_mm", "axis_mm", "in_seat_mm"):
        off = np.abs(np.array([getattr(run, field) for run in runs]) - expected[field])
        assert off.max() < TOLERANCE, (field, int(off.argmax()))


def test_angles_and_points_of_four_thousand_legs_agree_with_lines_and_planes_in_space():
    rng = np.random.default_rng(20)
    splay, rake = rng.uniform(-45.0, 45.0, (2, CASES))
    side, end = rng.choice([-1, 0, 1], CASES), rng.choice([-1, 1], CASES)
    splay[side == 0] = 0.0
    pitch, thickness = rng.uniform(-10.0, 20.0, CASES), rng.uniform(5.0, 100.0, CASES)
    height = rng.uniform(700.0, 1500.0, CASES)
    at = np.column_stack((side * rng.uniform(1.0, 3000.0, CASES), rng.uniform(0.0, 1200.0, CASES)))
    from_top = rng.choice([True, False], CASES)
    runs = [
        follow(
            Axis(tuple(at[k]), direction_of(splay[k], rake[k], int(side[k]), int(end[k])), int(side[k]), int(end[k])),
            SeatFrame(pitch[k], height[k]),
            thickness[k],
            bool(from_top[k]),
        )
        for k in range(CASES)
    ]
    assert_agree(runs, worked_out(splay, rake, side, end, pitch, height, thickness, at, from_top))


def wide_bench(rng, face):
    """A bench with forty legs at random leans, and what its spec says of each, twins apart."""
    seat = {"width": 5000, "depth": 1900, "thickness": float(rng.uniform(20, 60)), "height": 1400, "drill_from": face}
    seat["pitch"] = float(rng.uniform(-10, 20))
    tables, rows = [], []
    for column in range(5):
        for row in range(4):
            splay, rake = (float(v) for v in rng.uniform(-45, 45, 2))
            at = [float(rng.uniform(380, 420) + 430 * column), float(rng.uniform(280, 320) + 430 * row)]
            end = str(rng.choice(["front", "back"]))
            legs = {"name": f"{column}{row}", "at": at, "mirror": True, "splay": splay, "rake": rake, "end": end}
            tables.append({**legs, "mortise": 20})
            rows += [(splay, rake, side, 1 if end == "back" else -1, (side * at[0], at[1])) for side in (-1, 1)]
    return stool(tables, shape="rectangle", **seat), rows


@pytest.mark.parametrize("face", FACES)
def test_every_leg_of_a_spec_agrees_with_lines_and_planes_in_space(face):
    rng = np.random.default_rng(5)
    for _ in range(6):
        bench, rows = wide_bench(rng, face)
        splay, rake, side, end, at = (np.array(column) for column in zip(*rows, strict=True))
        seat = bench.furniture.seat
        pitch, height, thickness = (np.full(len(rows), v) for v in (seat.pitch, seat.height, seat.thickness))
        expected = worked_out(splay, rake, side, end, pitch, height, thickness, at, np.full(len(rows), face == "top"))
        assert [(leg.side, leg.end) for leg in bench.legs] == list(zip(side, end, strict=True))
        assert_agree(bench.legs, expected)


def test_posts_that_rise_agree_with_lines_and_planes_in_space():
    rng = np.random.default_rng(21)
    splay, rake = rng.uniform(-45.0, 45.0, (2, 1000))
    side, end = rng.choice([-1, 1], 1000), rng.choice([-1, 1], 1000)
    pitch, thickness, height = rng.uniform(-10, 20, 1000), rng.uniform(5, 100, 1000), rng.uniform(300, 900, 1000)
    at = np.column_stack((side * rng.uniform(1, 600, 1000), rng.uniform(0, 600, 1000)))
    length = rng.uniform(100, 700, 1000)
    runs, heights = zip(
        *(
            follow_up(
                Axis(
                    tuple(at[k]), direction_of(splay[k], rake[k], int(side[k]), int(end[k])), int(side[k]), int(end[k])
                ),
                SeatFrame(pitch[k], height[k]),
                thickness[k],
                length[k],
            )
            for k in range(1000)
        ),
        strict=True,
    )
    rising = lines_of_sight(splay, rake, side, end) * [1.0, 1.0, -1.0]
    turn = Rotation.from_rotvec(np.outer(np.radians(-pitch), [1.0, 0.0, 0.0])).as_matrix()
    origin = np.column_stack((np.zeros(1000), np.zeros(1000), height))
    start = origin + at[:, :1] * turn[:, :, 0] + at[:, 1:] * turn[:, :, 1]
    below = origin - thickness[:, None] * turn[:, :, 2]
    to_underside, *underside = meets_plane(start, rising, below, turn[:, :, 0], turn[:, :, 1])
    upper = start + length[:, None] * rising
    downward = [1.0, 1.0, -1.0]
    expected = {
        "floor": angles(rising, np.tile(np.eye(3), (1000, 1, 1)) * downward, side, end),
        "drill": angles(rising, turn * downward, side, end),
        "toward_foot": np.einsum("ikj,ik->ij", turn, rising),
        "top_mm": at,
        "underside_mm": np.array(underside).T,
        "foot_mm": upper[:, :2],
        "axis_mm": length,
        "in_seat_mm": -to_underside,
    }
    assert_agree(runs, expected)
    assert np.array(heights) == pytest.approx(upper[:, 2], abs=TOLERANCE)


def test_angles_at_a_dished_face_agree_with_the_seats_own_lines_turned_into_it():
    rng = np.random.default_rng(22)
    splay, rake = rng.uniform(-35.0, 35.0, (2, 1000))
    side, end, up = (rng.choice([-1, 1], 1000) for _ in range(3))
    fall, toward = rng.uniform(0.0, 20.0, 1000), rng.uniform(0.0, 360.0, 1000)
    out = lines_of_sight(splay, rake, side, end) * np.column_stack((np.ones(1000), np.ones(1000), -up))
    found = [on_local_face(tuple(out[k]), fall[k], toward[k], int(side[k]), int(end[k])) for k in range(1000)]
    # The face falls when its line of steepest fall is tipped down about the level line across it.
    level = np.column_stack((-np.sin(np.radians(toward)), np.cos(np.radians(toward)), np.zeros(1000)))
    tipped = Rotation.from_rotvec(level * np.radians(fall)[:, None]).as_matrix()
    wanted = angles(out, tipped * np.stack((np.ones(1000), np.ones(1000), -up), axis=1)[:, None, :], side, end)
    for field in ("splay_deg", "rake_deg", "resultant_deg", "sightline_deg"):
        off = np.array([getattr(lean, field) for lean in found]) - wanted[field]
        assert np.abs((off + 180.0) % 360.0 - 180.0).max() < TOLERANCE
    # The bearing is that of the lean, in the face, as seen square to the seat.
    normal = tipped[:, :, 2]
    in_face = out - np.einsum("ij,ij->i", out, normal)[:, None] * normal
    off = np.array([lean.bearing_deg for lean in found]) - np.degrees(np.arctan2(in_face[:, 1], in_face[:, 0]))
    assert np.abs((off + 180.0) % 360.0 - 180.0).max() < TOLERANCE


@pytest.mark.parametrize("name", DEMOS)
def test_the_mortise_stands_where_the_spec_puts_it_on_the_drilled_face(name):
    assembly = demo(name)
    for leg in assembly.legs:
        spec = assembly.furniture.legs[int(leg.place.removeprefix("legs[").removesuffix("]"))]
        x, y = leg.on_face(assembly.drilled)
        assert (abs(x), y) == (abs(spec.at[0]), spec.at[1])


@pytest.mark.parametrize("name", DEMOS)
def test_twins_lean_alike_and_stand_as_mirror_images_the_left_one_first(name):
    legs = {leg.name: leg for leg in demo(name).legs}
    lefts = [leg for leg in legs.values() if leg.name.endswith(" left")]
    for left in lefts:
        right = legs[left.name.removesuffix("left") + "right"]
        assert list(legs).index(left.name) + 1 == list(legs).index(right.name)
        assert (left.side, right.side) == (-1, 1)
        for point in ("top_mm", "underside_mm", "foot_mm"):
            (x, y), mirrored = getattr(left, point), getattr(right, point)
            assert (-x, y) == pytest.approx(mirrored, abs=1e-9)
        for one, other in ((left.floor, right.floor), (left.drill, right.drill)):
            assert (one.splay_deg, one.rake_deg) == pytest.approx((other.splay_deg, other.rake_deg), abs=1e-9)
            assert one.resultant_deg == pytest.approx(other.resultant_deg, abs=1e-9)
            assert one.sightline_deg == pytest.approx(other.sightline_deg, abs=1e-9)
            assert one.bearing_deg == pytest.approx((180.0 - other.bearing_deg) % 360.0, abs=1e-9)


lean = st.floats(-45.0, 45.0)
side = st.sampled_from((-1, 0, 1))
end = st.sampled_from((-1, 1))


@given(lean, lean, side, end)
def test_splay_and_rake_are_read_off_as_they_were_given(splay_deg, rake_deg, at_side, at_end):
    splay_deg = splay_deg if at_side else 0.0
    found = lean_of(direction_of(splay_deg, rake_deg, at_side, at_end), at_side, at_end)
    assert found.splay_deg == pytest.approx(splay_deg, abs=1e-9)
    assert found.rake_deg == pytest.approx(rake_deg, abs=1e-9)
    assert found.bevel_deg + found.resultant_deg == 90.0
    assert max(abs(splay_deg), abs(rake_deg)) - 1e-9 <= found.resultant_deg <= 54.7356104
    assert -180.0 <= found.sightline_deg <= 180.0
    assert 0.0 <= found.bearing_deg < 360.0


@given(lean, lean, st.sampled_from((-1, 1)), end)
def test_the_complement_is_the_same_line_measured_from_the_across_line(splay_deg, rake_deg, at_side, at_end):
    x, y, _ = direction_of(splay_deg, rake_deg, at_side, at_end)
    found = lean_of((x, y, -1.0), at_side, at_end)
    if math.hypot(x, y) > 1e-6:
        off = found.complement_deg - math.degrees(math.atan2(at_end * y, at_side * x))
        assert (off + 180.0) % 360.0 - 180.0 == pytest.approx(0.0, abs=1e-9)
        assert -180.0 <= found.complement_deg <= 180.0


@given(lean, lean, side, end)
def test_on_a_level_seat_the_bit_leans_as_the_leg_stands(splay_deg, rake_deg, at_side, at_end):
    axis = Axis((40.0, 60.0), direction_of(splay_deg, rake_deg, at_side, at_end), at_side, at_end)
    run = follow(axis, SeatFrame(0.0, 450.0), 45.0, drilled_from_top=True)
    assert run.drill == run.floor


@pytest.mark.parametrize(
    ("rake_deg", "pitch_deg", "at_end", "drill_rake_deg"),
    [(10.0, 4.0, -1, 6.0), (10.0, 4.0, 1, 14.0), (10.0, -4.0, -1, 14.0), (-10.0, 4.0, 1, -6.0)],
)
def test_a_leg_that_leans_only_fore_and_aft_is_bored_at_its_rake_and_the_pitch(
    rake_deg, pitch_deg, at_end, drill_rake_deg
):
    """A seat that falls to the back turns with a back leg's lean and against a front leg's."""
    axis = Axis((0.0, 100.0), direction_of(0.0, rake_deg, 0, at_end), 0, at_end)
    run = follow(axis, SeatFrame(pitch_deg, 450.0), 45.0, drilled_from_top=False)
    assert run.drill.rake_deg == pytest.approx(drill_rake_deg, abs=1e-12)
    assert run.drill.splay_deg == 0.0
    assert run.floor.rake_deg == pytest.approx(rake_deg, abs=1e-12)


@pytest.mark.parametrize("at_side", [-1, 0, 1])
@pytest.mark.parametrize("at_end", [-1, 1])
def test_a_leg_that_does_not_lean_has_no_sightline_and_no_bearing(at_side, at_end):
    found = lean_of(direction_of(0.0, 0.0, at_side, at_end), at_side, at_end)
    assert not found.leans
    assert [str(v) for v in (found.splay_deg, found.rake_deg, found.resultant_deg)] == ["0.0"] * 3
    assert (found.sightline_deg, found.bearing_deg, found.bevel_deg) == (0.0, 0.0, 90.0)


@pytest.mark.parametrize(
    ("splay_deg", "rake_deg", "at_side", "at_end", "sightline_deg", "bearing_deg"),
    [
        (0.0, 10.0, 1, -1, 0.0, 270.0),
        (0.0, 10.0, -1, 1, 0.0, 90.0),
        (10.0, 0.0, 1, -1, 90.0, 0.0),
        (10.0, 0.0, -1, -1, 90.0, 180.0),
        (10.0, 10.0, 1, -1, 45.0, 315.0),
        (10.0, 10.0, -1, -1, 45.0, 225.0),
        (10.0, 10.0, 1, 1, 45.0, 45.0),
        (10.0, 10.0, -1, 1, 45.0, 135.0),
        (10.0, -10.0, 1, -1, 135.0, 45.0),
        (-10.0, 10.0, 1, -1, -45.0, 225.0),
        (0.0, -10.0, -1, -1, 180.0, 90.0),
        (0.0, 10.0, 0, 1, 0.0, 90.0),
        (0.0, -10.0, 0, 1, 180.0, 270.0),
    ],
)
def test_sightline_runs_from_the_own_end_to_the_own_side_and_bearing_counter_clockwise_from_the_right(
    splay_deg, rake_deg, at_side, at_end, sightline_deg, bearing_deg
):
    found = lean_of(direction_of(splay_deg, rake_deg, at_side, at_end), at_side, at_end)
    assert found.sightline_deg == pytest.approx(sightline_deg, abs=1e-12)
    assert found.bearing_deg == pytest.approx(bearing_deg, abs=1e-12)


def test_a_bearing_a_hair_below_a_full_turn_is_none_at_all():
    found = lean_of((0.2, -1e-18, -1.0), 1, 1)
    assert found.bearing_deg == 0.0


def test_a_direction_that_does_not_run_down_is_refused():
    for z in (0.0, 1.0):
        with pytest.raises(ValueError, match="does not run down from the seat"):
            lean_of((0.1, 0.1, z), 1, 1)


def test_a_seat_whose_underside_is_on_or_below_the_floor_is_refused():
    axis = Axis((40.0, 60.0), direction_of(5.0, 5.0, 1, -1), 1, -1)
    for thickness in (150.0, 170.0):
        with pytest.raises(ValueError, match="underside is on the floor or below it"):
            follow(axis, SeatFrame(0.0, 150.0), thickness, drilled_from_top=False)


def test_an_error_of_one_degree_moves_the_foot_of_a_stool_by_eight_millimetres():
    def foot(splay_deg):
        axis = Axis((125.0, 70.0), direction_of(splay_deg, 9.0, 1, -1), 1, -1)
        return follow(axis, SeatFrame(0.0, 450.0), 45.0, drilled_from_top=False).foot_mm

    assert 7.0 < math.dist(foot(12.0), foot(13.0)) < 8.0
