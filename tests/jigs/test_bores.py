"""Mortises against points taken on cylinders and cones in space."""

from __future__ import annotations

import math

import numpy as np
import pytest
from scipy.optimize import minimize
from scipy.spatial.transform import Rotation

from jigs.bores import (
    FAR_MM,
    WEB_TOLERANCE_MM,
    bored_mm,
    mouth_mm,
    radius_mm,
    sections,
    taper_widening,
    web_mm,
    wood_above_mm,
)
from tests.jigs.conftest import FACES, demo, stool

ROUND = np.linspace(0.0, 2 * np.pi, 72, endpoint=False)


def legs_of(*tables, **seat):
    """The legs of a seat so wide that nothing comes near its edge."""
    spare = {"splay": 0, "rake": 0, "end": "front", "mortise": 25}
    named = [{"name": str(k), "at": [40, 500], **spare, **table} for k, table in enumerate(tables)]
    assembly = stool(named, **{"width": 1000, "depth": 1000, "height": 800, **seat})
    return assembly.legs


def surface(leg, mouth_radius, half_angle_deg):
    """Generatrices of a cone (or cylinder) round the axis in the seat frame: points and directions.

    The cone is built standing on the z axis with its mouth toward -z at the origin, then turned so that -z lies along
    the leg and moved to where the axis crosses the underside.
    """
    narrowing = math.sin(math.radians(half_angle_deg)), math.cos(math.radians(half_angle_deg))
    ring = np.column_stack((np.cos(ROUND), np.sin(ROUND), np.zeros_like(ROUND)))
    upward = np.column_stack((-narrowing[0] * ring[:, :2], np.full_like(ROUND, narrowing[1])))
    turn = upright_to(leg)
    return turn.apply(mouth_radius * ring), turn.apply(upward)


def upright_to(leg):
    """The turn that takes the line square to the seat to the leg's axis."""
    down = np.array([0.0, 0.0, -1.0])
    axis = np.cross(down, leg.toward_foot)
    length = np.linalg.norm(axis)
    angle = np.arctan2(length, np.dot(down, leg.toward_foot))
    return Rotation.from_rotvec(axis / length * angle if length else np.zeros(3))


def on_plane(leg, points, directions, z_mm):
    """Where generatrices that pass the underside's centre meet the plane at that height above the underside."""
    s = (z_mm - points[:, 2]) / directions[:, 2]
    return (points + s[:, None] * directions)[:, :2] + leg.underside_mm


def ellipse_value(section, points):
    """1 on the ellipse, less inside."""
    bearing = math.radians(section.bearing_deg)
    u, v = points[:, 0] - section.centre[0], points[:, 1] - section.centre[1]
    ahead, aside = u * math.cos(bearing) + v * math.sin(bearing), v * math.cos(bearing) - u * math.sin(bearing)
    return np.hypot(ahead / section.along_mm, aside / section.across_mm)


def random_leans(count, seed):
    rng = np.random.default_rng(seed)
    for _ in range(count):
        splay, rake = rng.uniform(-45, 45, 2)
        seat = {"pitch": float(rng.uniform(-10, 20)), "thickness": float(rng.uniform(20, 80))}
        yield rng, {"splay": float(splay), "rake": float(rake)}, {**seat, "drill_from": str(rng.choice(FACES))}


def test_a_plain_bore_meets_both_faces_in_the_ellipse_of_its_cylinder():
    for rng, lean, seat in random_leans(60, 1):
        (leg,) = legs_of({**lean, "mortise": float(rng.uniform(8, 60))}, **seat)
        cylinder = surface(leg, leg.mortise.bit / 2, 0.0)
        for face, height in (("underside", 0.0), ("top", seat["thickness"])):
            (section,) = sections(leg, face)
            assert ellipse_value(section, on_plane(leg, *cylinder, height)) == pytest.approx(1.0, abs=1e-9)
            assert section.centre == pytest.approx(leg.on_face(face), abs=1e-9)
            assert section.across_mm == pytest.approx(leg.mortise.bit / 2, abs=1e-12)


def test_a_tapered_mortise_meets_both_faces_in_the_ellipse_of_its_cone_which_is_off_the_axis():
    for rng, lean, seat in random_leans(60, 2):
        taper = float(rng.uniform(1, 15))
        # A mouth so wide that the cone covers the bit all the way up.
        mortise = {"bit": 8, "taper": taper, "mouth": float(rng.uniform(90, 110))}
        (leg,) = legs_of({**lean, "mortise": mortise}, **seat)
        cone = surface(leg, mortise["mouth"] / 2, taper / 2)
        for face, height in (("underside", 0.0), ("top", seat["thickness"])):
            (section,) = sections(leg, face)
            assert ellipse_value(section, on_plane(leg, *cone, height)) == pytest.approx(1.0, abs=1e-9)
            assert math.dist(section.centre, leg.on_face(face)) > 1e-3


def covered(leg, points, z_mm):
    """Which points of a plane at that height above the underside the hole holds, and how far each is from its edge."""
    relative = np.column_stack((points - leg.underside_mm, np.full(len(points), z_mm)))
    inward = -np.array(leg.toward_foot)
    along = relative @ inward
    radius = mouth_mm(leg) / 2 - along * math.tan(math.radians(leg.mortise.taper / 2))
    room = np.maximum(radius, leg.mortise.bit / 2) - np.linalg.norm(np.cross(relative, inward), axis=1)
    return room >= 0.0, np.abs(room)


def test_what_the_ellipses_cover_on_a_face_is_what_bit_and_reamer_take_away():
    found = set()
    for rng, lean, seat in random_leans(80, 3):
        mortise = {"bit": 16, "taper": float(rng.uniform(2, 12))}
        if rng.random() < 0.5:
            mortise["mouth"] = float(rng.uniform(17, 34))
        (leg,) = legs_of({**lean, "mortise": mortise}, **seat)
        for face, height in (("underside", 0.0), ("top", seat["thickness"])):
            shown = sections(leg, face)
            found.add((face, len(shown)))
            spread = rng.uniform(-60, 60, (400, 2)) * [1, 1] + leg.on_face(face)
            held, clear = covered(leg, spread, height)
            inside = np.any([ellipse_value(s, spread) <= 1.0 for s in shown], axis=0)
            assert np.array_equal(held[clear > 1e-6], inside[clear > 1e-6])
    assert found >= {("top", 1), ("top", 2), ("underside", 1)}


def test_a_mouth_that_is_not_given_is_where_the_taper_ends_at_the_bits_size_on_the_top():
    (leg,) = legs_of({"splay": 12, "rake": 9, "mortise": {"bit": 16, "taper": 6}})
    assert (mouth_mm(leg) - 16.0) / leg.in_seat_mm == pytest.approx(2 * math.tan(math.radians(3.0)), abs=1e-12)
    assert radius_mm(leg, leg.in_seat_mm) == pytest.approx(8.0, abs=1e-12)
    assert radius_mm(leg, 0.0) == mouth_mm(leg) / 2
    bit, reamed = sorted(sections(leg, "top"), key=lambda section: math.dist(section.centre, leg.top_mm))
    assert bit.centre == leg.top_mm
    assert (bit.across_mm, bit.along_mm) == pytest.approx((8.0, 8.0 / math.cos(math.radians(leg.drill.resultant_deg))))
    assert reamed.centre != leg.top_mm


def test_a_mouth_that_is_given_is_kept_and_above_the_taper_the_hole_is_the_bits():
    (leg,) = legs_of({"splay": 12, "rake": 9, "mortise": {"bit": 16, "taper": 6, "mouth": 18}})
    assert mouth_mm(leg) == 18.0
    ends_at = 1.0 / math.tan(math.radians(3.0))
    assert radius_mm(leg, ends_at - 1.0) > 8.0
    assert radius_mm(leg, ends_at + 1.0) == 8.0


def test_a_plain_mortise_widens_nowhere():
    (leg,) = legs_of({"splay": 12, "rake": 9, "mortise": 25})
    assert taper_widening(leg.mortise) == 0.0
    assert mouth_mm(leg) == 25.0
    assert {radius_mm(leg, s) for s in (0.0, 20.0, 40.0)} == {12.5}


def test_a_blind_mortise_shows_on_the_underside_alone_and_is_as_deep_along_the_axis_as_it_says():
    (leg,) = legs_of({"splay": 10, "rake": 5, "mortise": {"bit": 28, "depth": 24}})
    assert sections(leg, "top") == ()
    assert len(sections(leg, "underside")) == 1
    assert bored_mm(leg) == 24.0
    (through,) = legs_of({"splay": 10, "rake": 5, "mortise": 28})
    assert bored_mm(through) == through.in_seat_mm
    assert wood_above_mm(through, 45.0) is None


@pytest.mark.parametrize("mortise", [{"bit": 28, "depth": 24}, {"bit": 12, "depth": 24, "taper": 8, "mouth": 40}])
def test_the_wood_above_a_blind_mortise_is_left_at_the_highest_point_of_its_flat_end(mortise):
    (leg,) = legs_of({"splay": 20, "rake": 15, "mortise": mortise})
    end_radius = max(mortise["bit"] / 2, mouth_mm(leg) / 2 - 24.0 * math.tan(math.radians(leg.mortise.taper / 2)))
    ring = upright_to(leg).apply(
        np.column_stack((end_radius * np.cos(ROUND), end_radius * np.sin(ROUND), np.full_like(ROUND, 24.0)))
    )
    # 72 points round the end miss its highest one by a thousandth of the radius at most.
    assert 45.0 - ring[:, 2].max() == pytest.approx(wood_above_mm(leg, 45.0), abs=0.001 * end_radius)


def solids(leg):
    """The bit's cylinder and the reamer's cone: radius at the underside, narrowing for each mm inward."""
    cylinder, cone = (leg.mortise.bit / 2, 0.0), (mouth_mm(leg) / 2, math.tan(math.radians(leg.mortise.taper / 2)))
    return (cylinder, cone) if leg.mortise.taper else (cylinder,)


def inside(leg, solid, thickness, first):
    """What must not be negative for the point v[first : first + 3] to lie in the solid and in the seat."""
    radius, narrowing = solid
    inward, start = -np.array(leg.toward_foot), np.array([*leg.underside_mm, -thickness])

    def rules(v):
        point = v[first : first + 3]
        along = (point - start) @ inward
        room = radius - along * narrowing
        aside = point - start - along * inward
        deep = leg.in_seat_mm * 9 if leg.mortise.depth is None else leg.mortise.depth
        return [room**2 - aside @ aside, room, -point[2], point[2] + thickness, deep - along]

    return {"type": "ineq", "fun": rules}


def least_distance(one, other, thickness):
    """The least distance of a point in one bore from a point in the other, by scipy's constrained search."""
    start = np.concatenate([(*leg.underside_mm, -thickness) - 8.0 * np.array(leg.toward_foot) for leg in (one, other)])
    found = [
        minimize(
            lambda v: np.sum((v[:3] - v[3:]) ** 2),
            start,
            constraints=[inside(one, a, thickness, 0), inside(other, b, thickness, 3)],
            method="SLSQP",
            options={"maxiter": 400, "ftol": 1e-12},
        )
        for a in solids(one)
        for b in solids(other)
    ]
    return math.sqrt(max(0.0, min(result.fun for result in found)))


MORTISES = (25, {"bit": 16, "taper": 9}, {"bit": 20, "taper": 12, "mouth": 24}, {"bit": 20, "depth": 25})


@pytest.mark.parametrize("first", MORTISES)
@pytest.mark.parametrize("second", MORTISES)
def test_the_web_between_two_bores_is_the_least_distance_of_their_points(first, second, monkeypatch):
    monkeypatch.setattr("jigs.bores.FAR_MM", math.inf)
    rng = np.random.default_rng([MORTISES.index(first), MORTISES.index(second)])
    for _ in range(2):
        one, other = legs_of(
            *(
                {
                    "at": [x, float(rng.uniform(480, 520))],
                    "splay": float(rng.uniform(-30, 30)),
                    "rake": float(rng.uniform(-30, 30)),
                    "mortise": mortise,
                }
                for x, mortise in ((-37, first), (37, second))
            )
        )
        assert web_mm(one, other, 45.0) == pytest.approx(least_distance(one, other, 45.0), abs=WEB_TOLERANCE_MM)


def test_twins_that_lean_outward_come_nearest_where_their_edges_stretch_on_the_top():
    one, other = legs_of({"splay": 35, "rake": 0, "mirror": True, "at": [50, 500]})
    reach = 12.5 / math.cos(math.radians(35.0))
    apart = 2 * (50.0 - 45.0 * math.tan(math.radians(35.0)))
    assert web_mm(one, other, 45.0) == pytest.approx(apart - 2 * reach, abs=WEB_TOLERANCE_MM)


def test_upright_bores_that_overlap_have_a_negative_web():
    one, other = legs_of({"at": [30, 500]}, {"at": [52, 530]})
    gap = math.hypot(22.0, 30.0) - 25.0
    assert web_mm(one, other, 45.0) == pytest.approx(gap, abs=WEB_TOLERANCE_MM)
    near, nearer = (legs_of({"at": [x, 500]})[0] for x in (30, 50))
    assert web_mm(near, nearer, 45.0) == pytest.approx(-5.0, abs=WEB_TOLERANCE_MM)


def test_the_web_is_the_same_from_either_bore():
    one, other = legs_of(
        {"at": [-18, 500], "splay": 8, "rake": 20, "mortise": {"bit": 16, "taper": 8}},
        {"at": [18, 510], "splay": 3, "rake": -12, "mortise": 25},
    )
    assert web_mm(one, other, 45.0) == pytest.approx(web_mm(other, one, 45.0), abs=WEB_TOLERANCE_MM)


def test_far_bores_have_at_least_the_web_that_is_said():
    one, _, other, _ = demo("slipway-stool").legs
    assert FAR_MM < web_mm(one, other, 45.0) <= least_distance(one, other, 45.0)
