from __future__ import annotations

import math

import numpy as np
import pytest
import shapely
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from scipy.optimize import linprog

from jigs.statics import (
    FOOT_CORNERS,
    GRAVITY_M_S2,
    PUBLISHED_DOWN_N,
    PUBLISHED_FROM_EDGE_MM,
    PUBLISHED_OUTWARD_N,
    Part,
    area_and_centroid,
    balance,
    bar_part,
    does_not_stand,
    foot_contacts,
    published_case,
    slab_part,
    stability,
    support_edges,
    tipping,
)

Spot = tuple[float, float]

SQUARE = [(-200.0, 0.0), (200.0, 0.0), (200.0, 400.0), (-200.0, 400.0)]
OUTLINE = [(-250.0, -50.0), (250.0, -50.0), (250.0, 450.0), (-250.0, 450.0)]
MIDDLE = (0.0, 200.0)

spots = st.tuples(st.floats(-400.0, 400.0), st.floats(-400.0, 400.0))


def forces_balance(feet: list[Spot], weight: float, centre: Spot) -> tuple[np.ndarray, np.ndarray]:
    """Rows: up and down, moment about y, moment about x. Columns: a push of the floor at each foot, a unit load."""
    feet_rows = np.array([[1.0 for _ in feet], [x for x, _ in feet], [y for _, y in feet]])
    return feet_rows, weight * np.array([1.0, *centre])


def bears(feet: list[Spot], weight: float, centre: Spot, turning: np.ndarray | None = None) -> bool:
    """By linear programming: whether pushes of the floor balance the weight, and what else pushes down and turns."""
    rows, held = forces_balance(feet, weight, centre)
    more = np.zeros(3) if turning is None else turning
    return linprog(np.zeros(len(feet)), A_eq=rows, b_eq=held + more, bounds=(0, None), method="highs").status == 0


def largest_load(feet: list[Spot], weight: float, centre: Spot, point: Spot) -> float:
    """By linear programming: the largest load at the point that pushes of the floor can bear.

    For a rigid body on feet that push and do not pull, that stands by itself.
    """
    rows, held = forces_balance(feet, weight, centre)
    equal = np.column_stack((rows, -np.array([1.0, *point])))
    found = linprog([0.0] * len(feet) + [-1.0], A_eq=equal, b_eq=held, bounds=(0, None), method="highs")
    return math.inf if found.status == 3 else float(found.x[-1])


def test_a_square_stool_tips_where_the_moments_about_its_edge_balance():
    # 30 N at 200 mm inside against a load 50 mm outside.
    assert tipping(SQUARE, 30.0, MIDDLE, (0.0, -50.0)) == pytest.approx(120.0)
    assert tipping(SQUARE, 30.0, MIDDLE, (-300.0, 200.0)) == pytest.approx(60.0)


def test_no_load_between_the_feet_or_on_their_line_tips():
    assert tipping(SQUARE, 30.0, MIDDLE, (0.0, 10.0)) == math.inf
    assert tipping(SQUARE, 30.0, MIDDLE, (100.0, 0.0)) == math.inf


@given(feet=st.lists(spots, min_size=3, max_size=6), mix=st.lists(st.floats(0.05, 1.0), min_size=6, max_size=6),
       weight=st.floats(10.0, 200.0), point=st.tuples(st.floats(-700.0, 700.0), st.floats(-700.0, 700.0)))  # fmt: skip
@settings(max_examples=80)
def test_the_tipping_load_is_the_most_that_pushes_of_the_floor_can_bear(feet, mix, weight, point):
    shares = np.array(mix[: len(feet)]) / sum(mix[: len(feet)])
    x, y = shares @ np.array(feet)
    hull = shapely.MultiPoint(feet).convex_hull
    # Slivers, loads on the very edge and weights on it are left to the tests above and below.
    assume(hull.geom_type == "Polygon" and hull.exterior.distance(shapely.Point(x, y)) >= 1.0)
    assume(hull.exterior.distance(shapely.Point(point)) >= 0.5)
    most = largest_load(feet, weight, (x, y), point)
    load = tipping(feet, weight, (float(x), float(y)), point)
    assert load == pytest.approx(most, rel=1e-6) if math.isfinite(most) else load == math.inf


@given(feet=st.lists(spots, min_size=3, max_size=6), centre=spots)
@settings(max_examples=60)
def test_a_piece_falls_where_no_pushes_of_the_floor_balance_its_weight(feet, centre):
    hull = shapely.MultiPoint(feet).convex_hull
    assume(hull.geom_type == "Polygon" and hull.area >= 100.0)
    assume(hull.exterior.distance(shapely.Point(centre)) >= 0.5)
    falls = not bears(feet, 50.0, centre)
    assert (does_not_stand(feet, centre) is not None) == falls
    assert (tipping(feet, 50.0, centre, (999.0, 0.0)) == 0.0) == falls


def test_too_few_feet_or_a_weight_beyond_them_do_not_stand_and_say_why():
    assert does_not_stand(SQUARE[:2], MIDDLE) == "It does not stand: fewer than three feet touch the floor."
    line = [(0.0, 0.0), (100.0, 100.0), (300.0, 300.0)]
    assert does_not_stand(line, (100.0, 100.0)) == "It does not stand: its feet stand in one line."
    beyond = does_not_stand(SQUARE, (0.0, -12.5))
    assert beyond == "It does not stand: its centre of gravity is 12.5 mm outside the lines that join its feet."
    inches = does_not_stand(SQUARE, (0.0, -25.4), "in")
    assert inches is not None
    assert "1 in outside" in inches
    assert does_not_stand(SQUARE, MIDDLE) is None


def test_a_foot_within_the_others_bears_nothing_at_the_edge():
    assert len(support_edges([*SQUARE, (10.0, 100.0), (0.0, 0.0), (200.0, 0.0)])) == 4


@pytest.mark.parametrize("off", [1e-300, 1e-55, 1e-17, 1e-12])
def test_feet_that_stand_a_hair_out_of_line_hide_no_other(off):
    feet = [(0.0, 0.0), (0.0, 300.0), (off, 100.0), (-400.0, 0.0)]
    assert tipping(feet, 30.0, (-100.0, 75.0), (0.0, -50.0)) == pytest.approx(45.0)
    assert tipping(feet, 30.0, (-100.0, 75.0), (50.0, 100.0)) == pytest.approx(60.0)
    in_line = [(0.0, 0.0), (0.0, 300.0), (off, 100.0), (-off, 250.0)]
    assert does_not_stand(in_line, (0.0, 100.0)) == "It does not stand: its feet stand in one line."


def test_the_edges_look_outward():
    for edge in support_edges(SQUARE[::-1]):
        assert edge.inside_mm(MIDDLE) == pytest.approx(200.0)
        assert math.hypot(*edge.outward) == pytest.approx(1.0)


def test_wider_feet_tip_later():
    wide = [spot for x, y in SQUARE for spot in foot_contacts((x, y), 20.0, 15.0, 30.0)]
    assert tipping(wide, 30.0, MIDDLE, (0.0, -50.0)) > tipping(SQUARE, 30.0, MIDDLE, (0.0, -50.0))


def test_the_points_of_a_foot_lie_on_its_ellipse_and_nearly_fill_it():
    points = foot_contacts((30.0, -20.0), 18.0, 14.0, 40.0)
    turned = shapely.affinity.rotate(shapely.MultiPoint(points), -40.0, origin=(30.0, -20.0))
    for spot in turned.geoms:
        assert ((spot.x - 30.0) / 18.0) ** 2 + ((spot.y + 20.0) / 14.0) ** 2 == pytest.approx(1.0)
    assert len(points) == FOOT_CORNERS
    assert shapely.Polygon(points).area == pytest.approx(math.pi * 18.0 * 14.0, rel=0.01)


def published_loads(point: Spot, height_mm: float, toward: float) -> np.ndarray:
    """The published loads as `forces_balance` counts: the horizontal one, held at the floor, turns by its height."""
    outward = PUBLISHED_OUTWARD_N * height_mm * np.array([0.0, math.cos(toward), math.sin(toward)])
    return PUBLISHED_DOWN_N * np.array([1.0, *point]) + outward


def spare_couple(feet: list[Spot], weight: float, centre: Spot, loads: np.ndarray, toward: float) -> float:
    """By linear programming: the largest couple (N·mm) that can be added toward a direction before a foot lifts."""
    rows, held = forces_balance(feet, weight, centre)
    equal = np.column_stack((rows, -np.array([0.0, math.cos(toward), math.sin(toward)])))
    cost = [0.0] * len(feet) + [-1.0]
    found = linprog(cost, A_eq=equal, b_eq=held + loads, bounds=(0, None), method="highs")
    return float(found.x[-1])


def directions(feet: list[Spot]) -> list[float]:
    """All round, and square to each side."""
    square = [math.atan2(a[0] - b[0], b[1] - a[1]) for a, b in zip(feet, [*feet[1:], feet[0]], strict=True)]
    return [*np.radians(np.arange(0.0, 360.0, 15.0)), *square]


# The corners of what lies 60 mm inside OUTLINE.
INNER = [(x, y) for x in (-190.0, 190.0) for y in (10.0, 390.0)]
STEADY = [
    (SQUARE, MIDDLE),
    ([(-230.0, -40.0), (230.0, -40.0), (205.0, 430.0), (-205.0, 430.0)], (0.0, 210.0)),
    ([(-420.0, -80.0), (420.0, -80.0), (0.0, 900.0)], (0.0, 150.0)),
]
UNSTEADY = [
    ([(-230.0, -40.0), (230.0, -40.0), (160.0, 430.0), (-160.0, 430.0)], (0.0, 210.0)),
    ([(-180.0, 0.0), (180.0, 0.0), (0.0, 420.0)], (0.0, 150.0)),
]


@pytest.mark.parametrize(("feet", "centre"), STEADY)
def test_the_published_margin_is_the_least_couple_that_pushes_of_the_floor_can_still_bear(feet, centre):
    spare = [
        spare_couple(feet, 45.0, centre, published_loads(p, 450.0, toward), toward)
        for p in INNER
        for toward in directions(feet)
    ]
    case = published_case(OUTLINE, feet, 45.0, centre, 450.0)
    assert case.margin_nm == pytest.approx(min(spare) / 1000, rel=1e-6, abs=1e-9)


@pytest.mark.parametrize(("feet", "centre"), STEADY + UNSTEADY)
def test_the_published_case_stays_down_where_pushes_of_the_floor_can_bear_it_in_every_direction(feet, centre):
    borne = [bears(feet, 45.0, centre, published_loads(p, 450.0, toward)) for p in INNER for toward in directions(feet)]
    assert published_case(OUTLINE, feet, 45.0, centre, 450.0).stays_down == all(borne)
    assert all(borne) == ((feet, centre) in STEADY)


def test_the_published_load_stands_60_mm_inside_the_edge():
    # By hand: 600 N 10 mm inside the front feet's line, 45 N 200 mm inside, 20 N at 450 mm against them.
    case = published_case(OUTLINE, SQUARE, 45.0, MIDDLE, 450.0)
    assert case.margin_nm == pytest.approx((600.0 * 10.0 + 45.0 * 200.0 - 20.0 * 450.0) / 1000)
    from_edge = shapely.Polygon(OUTLINE).exterior.distance(shapely.Point(case.point_mm))
    assert from_edge == pytest.approx(PUBLISHED_FROM_EDGE_MM)


def test_a_stool_with_its_feet_far_in_fails_the_published_case():
    narrow = [(x * 0.7, 60.0 + y * 0.7) for x, y in SQUARE]
    case = published_case(OUTLINE, narrow, 45.0, MIDDLE, 450.0)
    assert not case.stays_down
    assert case.margin_nm == pytest.approx((-600.0 * 50.0 + 45.0 * 140.0 - 9000.0) / 1000)


def test_a_seat_too_narrow_for_the_published_place_is_loaded_in_its_middle():
    slim = [(-300.0, 0.0), (300.0, 0.0), (300.0, 100.0), (-300.0, 100.0)]
    feet = [(-250.0, -100.0), (250.0, -100.0), (250.0, 200.0), (-250.0, 200.0)]
    case = published_case(slim, feet, 40.0, (0.0, 50.0), 400.0)
    assert shapely.Polygon(slim).exterior.distance(shapely.Point(case.point_mm)) == pytest.approx(50.0, abs=1.0)


def test_the_published_case_needs_feet_round_something():
    with pytest.raises(ValueError, match="no area"):
        published_case(OUTLINE, SQUARE[:2], 45.0, MIDDLE, 450.0)


def test_every_side_and_corner_of_the_seat_is_named_with_its_point():
    data = stability(OUTLINE, SQUARE, 30.0, MIDDLE, 450.0).data()
    assert {row["at"]: tuple(row["point_mm"]) for row in data} == {
        "front": (0.0, -50.0),
        "front right": (250.0, -50.0),
        "right": (250.0, 200.0),
        "back right": (250.0, 450.0),
        "back": (0.0, 450.0),
        "back left": (-250.0, 450.0),
        "left": (-250.0, 200.0),
        "front left": (-250.0, -50.0),
    }
    assert [row["load_n"] for row in data] == pytest.approx([120.0] * 8)


def test_a_seat_within_its_feet_tips_nowhere():
    inner = [(x / 2, 100.0 + y / 2) for x, y in SQUARE]
    found = stability(inner, SQUARE, 30.0, MIDDLE, 450.0)
    assert [row["load_n"] for row in found.data()] == [None] * 8
    assert found.falls is None


def test_a_three_legged_stool_is_weakest_between_its_legs():
    turns = np.radians([-90.0, 30.0, 150.0])
    feet = [(150.0 * math.cos(t), 150.0 * math.sin(t)) for t in turns]
    ring = [(170.0 * math.cos(t), 170.0 * math.sin(t)) for t in np.radians(np.arange(0.0, 360.0, 1.0))]
    found = stability(ring, feet, 40.0, (0.0, 0.0), 450.0)
    weakest = min(found.loads, key=lambda load: load.load_n or math.inf)
    assert weakest.at == "back"
    # The feet's triangle reaches 75 mm from the middle there: 40 N × 75 = F × (170 - 75).
    assert weakest.load_n == pytest.approx(40.0 * 75.0 / 95.0)
    # Over a leg the sides slope away, and the load has the least hold on either of them.
    front = next(load for load in found.loads if load.at == "front")
    assert front.load_n == pytest.approx(40.0 * 75.0 / (170.0 * math.cos(math.radians(60.0)) - 75.0))


def test_of_two_points_as_far_out_the_weaker_is_told():
    horned = [(-200.0, 0.0), (-100.0, 0.0), (0.0, 150.0), (150.0, 0.0), (200.0, 100.0), (0.0, 300.0)]
    front = stability(horned, SQUARE, 30.0, MIDDLE, 450.0).loads[0]
    assert front.point_mm == (-150.0, 0.0)
    spiked = [(-190.0, -40.0), (0.0, 150.0), (150.0, -40.0), (200.0, 100.0), (0.0, 300.0)]
    skew = [(-150.0, 20.0), (200.0, -20.0), (200.0, 400.0), (-200.0, 400.0)]
    front = stability(spiked, skew, 30.0, MIDDLE, 450.0).loads[0]
    assert front.point_mm == (-190.0, -40.0)


def test_a_piece_that_falls_says_so_and_bears_nothing():
    found = stability(OUTLINE, SQUARE[:2], 30.0, MIDDLE, 450.0)
    assert found.falls == "It does not stand: fewer than three feet touch the floor."
    assert [load.load_n for load in found.loads] == [0.0] * 8
    assert found.published is None


@given(corners=st.lists(spots, min_size=3, max_size=7))
@settings(max_examples=50)
def test_area_and_centroid_are_those_of_the_polygon(corners):
    hull = shapely.MultiPoint(corners).convex_hull
    assume(hull.geom_type == "Polygon" and hull.area >= 50.0)
    ring = list(hull.exterior.coords)[:-1]
    for outline in (ring, ring[::-1]):
        area, centroid = area_and_centroid(outline)
        assert area == pytest.approx(hull.area)
        assert centroid == pytest.approx((hull.centroid.x, hull.centroid.y), abs=1e-6)


def test_the_parts_weigh_and_balance_together():
    seat = slab_part(160_000.0, 40.0, 600.0, (0.0, 200.0))
    assert seat.mass_kg == pytest.approx(3.84)
    leg = bar_part((100.0, 50.0, 400.0), (160.0, 20.0, 0.0), 40.0, 40.0, 700.0)
    assert leg.centre_mm == pytest.approx((130.0, 35.0))
    weight, centre = balance([Part(3.0, (0.0, 0.0)), Part(1.0, (100.0, 40.0))])
    assert weight == pytest.approx(4.0 * GRAVITY_M_S2)
    assert centre == pytest.approx((25.0, 10.0))
    with pytest.raises(ValueError, match="no weight"):
        balance([])


def test_a_tapered_leg_balances_nearer_its_thick_end():
    start, end = np.array([100.0, 50.0, 400.0]), np.array([180.0, -10.0, 0.0])
    leg = bar_part(tuple(start), tuple(end), 40.0, 24.0, 700.0)
    f = (np.arange(20_000) + 0.5) / 20_000
    slices = np.pi / 4 * (40.0 - 16.0 * f) ** 2 * np.linalg.norm(end - start) / 20_000
    middle = start + (slices @ f / slices.sum()) * (end - start)
    assert leg.mass_kg == pytest.approx(slices.sum() * 700.0 / 1e9, rel=1e-6)
    assert leg.centre_mm == pytest.approx(tuple(middle[:2]), rel=1e-6)
