"""What a piece weighs and how it stands, against sums made here by other means."""

from __future__ import annotations

import math

import numpy as np
import pytest
from scipy.optimize import linprog
from scipy.spatial.transform import Rotation
from shapely import Point, Polygon, affinity

from jigs.assembly import assemble
from jigs.loads import DEFAULT_DENSITY_KG_M3, standing, weighed_as, weight_parts, woods
from jigs.spec import parse_spec
from layout.curves import flatten
from tests.jigs.conftest import LEG, _lines, demo, spec_text, stool

GRAVITY = 9.80665
RUNGS = (
    {"name": "left", "between": ["front left", "back left"], "heights": [150, 170], "diameter": 18, "tenon": 10},
    {"name": "right", "between": ["front right", "back right"], "heights": [150, 170], "diameter": 18, "tenon": 10},
)
ROD = {
    "name": "rod",
    "count": 3,
    "deck": {"width": 100, "back": 270},
    "crest": {"width": 140, "back": 330, "height": 300},
    "mortise": 11,
}


def chair(wood=None, **seat):
    """A stool with stretchers and spindles."""
    text = spec_text(**seat)
    tables = [*(("stretchers", bar) for bar in RUNGS), ("spindles", ROD)]
    text += "".join(f"\n[[{title}]]\n" + "\n".join(_lines(table)) for title, table in tables)
    if wood:
        text += "\n[wood]\n" + "\n".join(_lines(wood))
    return assemble(parse_spec(text.encode(), "chair.toml"), "chair.toml")


def in_many_pieces(assembly, seat_density, leg_density):
    """Mass and centre in plan from slices: the seat in squares, each bar in discs."""
    p = assembly.frame.pitch_deg
    turn, up = Rotation.from_euler("x", -p, degrees=True), np.array([0.0, 0.0, assembly.frame.height_mm])
    outline = Polygon(flatten(assembly.blank.curve, 0.01))
    middle = turn.apply([outline.centroid.x, outline.centroid.y, -assembly.thickness_mm / 2]) + up
    pieces = [(outline.area * assembly.thickness_mm * seat_density, middle)]
    bars = []
    for part in assembly.bored:
        face = part.underside_mm if part.kind == "leg" else part.top_mm
        z = -assembly.thickness_mm if part.kind == "leg" else 0.0
        start = turn.apply([*face, z]) + up
        bars.append(
            (start, start + part.axis_mm * turn.apply(part.toward_foot), part.diameter_mm, part.foot_diameter_mm)
        )
    for bar in assembly.stretchers:
        first, second = (np.array(end.axis_point_mm) for end in bar.ends)
        way = (second - first) / np.linalg.norm(second - first)
        ends = first + bar.ends[0].reach_mm * way, second - bar.ends[1].reach_mm * way
        bars.append((*ends, bar.diameter_mm, bar.diameter_mm))
    for start, end, thick, thin in bars:
        for share in (np.arange(2000) + 0.5) / 2000:
            area = math.pi / 4 * (thick + share * (thin - thick)) ** 2
            pieces.append((area * np.linalg.norm(end - start) / 2000 * leg_density, start + share * (end - start)))
    mass = sum(m for m, _ in pieces)
    return mass * 1e-9, sum(m * at for m, at in pieces)[:2] / mass


@pytest.mark.parametrize("pitch", [0, 6])
def test_the_weight_and_its_centre_are_those_of_the_piece_in_slices(pitch):
    # GTR-190 (2010) / GTR-282 (2021), Table 5-3: American elm .50, white ash .60; 1120 kg/m³ times that.
    assembly = chair({"seat": "American elm", "legs": "white ash"}, pitch=pitch)
    parts = weight_parts(assembly)
    assert len(parts) == 1 + 4 + 3 + 2
    mass, centre = in_many_pieces(assembly, 560.0, 672.0)
    found = sum(part.mass_kg for part in parts)
    assert found == pytest.approx(mass, rel=1e-5)
    at = [sum(part.mass_kg * part.centre_mm[k] for part in parts) / found for k in (0, 1)]
    assert at == pytest.approx(list(centre), abs=0.01)


def largest_load(feet, weight, centre, point):
    """By linear programming: the largest load at the point that pushes of the floor can bear."""
    rows = np.array([[1.0] * len(feet), [x for x, _ in feet], [y for _, y in feet]])
    equal = np.column_stack((rows, -np.array([1.0, *point])))
    held = weight * np.array([1.0, *centre])
    found = linprog([0.0] * len(feet) + [-1.0], A_eq=equal, b_eq=held, bounds=(0, None), method="highs")
    return None if found.status == 3 else float(found.x[-1])


@pytest.mark.parametrize("pitch", [0, 6])
def test_tipping_loads_are_those_that_pushes_of_the_floor_at_the_feet_can_bear(pitch):
    assembly = chair({"seat": "American elm", "legs": "white ash"}, pitch=pitch)
    mass, centre = in_many_pieces(assembly, 560.0, 672.0)
    feet = []
    for leg in assembly.legs:
        lean = math.radians(leg.floor.resultant_deg)
        foot = affinity.scale(Point(0, 0).buffer(leg.foot_diameter_mm / 2, 90), 1 / math.cos(lean), 1.0, origin=(0, 0))
        foot = affinity.translate(affinity.rotate(foot, leg.floor.bearing_deg, origin=(0, 0)), *leg.foot_mm)
        feet += list(foot.exterior.coords)
    loads = {load.at: load for load in standing(assembly).loads}
    deep = 300 * math.cos(math.radians(pitch))
    places = {"front": (0, 0), "front right": (200, 0), "right": (200, deep / 2), "back right": (200, deep)}
    places |= {"back": (0, deep), "left": (-200, deep / 2)}
    for at, point in places.items():
        assert loads[at].point_mm == pytest.approx(point, abs=0.1)
        expected = largest_load(feet, mass * GRAVITY, centre, point)
        if expected is None:
            assert loads[at].load_n is None
        else:
            # A foot's edge stands in for itself by 32 corners, which fall short of it by 0.5 % of 13 mm.
            assert loads[at].load_n == pytest.approx(expected, rel=0.01)


@pytest.mark.parametrize("pitch", [0, -4])
def test_the_published_case_is_the_worst_over_all_directions_at_the_seats_highest_edge(pitch):
    legs = [{**LEG, "splay": 0, "rake": 0}, {**LEG, "name": "back", "at": [125, 230], "splay": 0, "rake": 0}]
    assembly = stool(legs, pitch=pitch)
    weight, centre = sum(p.mass_kg for p in weight_parts(assembly)) * GRAVITY, in_many_pieces(assembly, 500, 500)[1]
    # With the back higher the highest edge is there.
    height = 0.45 + 0.3 * math.sin(math.radians(abs(pitch)))
    deep = 300 * math.cos(math.radians(pitch))
    worst = math.inf
    # Feet of Ø 25 reach 12.5 mm beyond their middles in every direction; 600 N stand 60 mm inside each corner.
    for turn in np.linspace(0.0, 2 * np.pi, 2000):
        n = np.array([math.cos(turn), math.sin(turn)])
        reach = max(np.dot(leg.foot_mm, n) for leg in assembly.legs) + 12.5
        for corner in ((x, y) for x in (-140, 140) for y in (60, deep - 60)):
            worst = min(worst, (weight * (reach - centre @ n) + 600 * (reach - np.dot(corner, n))) / 1000 - 20 * height)
    # The polygon that stands in for a foot falls short of it by up to 0.06 mm: 0.04 N m.
    assert standing(assembly).published.margin_nm == pytest.approx(worst, abs=0.06)


def test_two_legs_do_not_stand_on_the_width_of_their_feet():
    stability = standing(stool([LEG]))
    assert stability.falls == "It does not stand: fewer than three feet touch the floor."
    assert {load.load_n for load in stability.loads} == {0.0}


def test_what_stands_is_worked_out_once():
    assembly = demo("slipway-stool")
    assert standing(assembly) is standing(assembly)


def test_where_no_wood_is_said_the_default_stands_in_and_is_named():
    assert [wood.density_kg_m3 for wood in woods(stool())] == [DEFAULT_DENSITY_KG_M3] * 2
    assert weighed_as(stool()) == "weighed at 500 kg/m³, no wood given"
    assert weighed_as(chair({"seat": "white ash"})) == (
        "weighed with the seat as white ash and the rest at 500 kg/m³, no wood given"
    )
    assert weighed_as(chair({"seat": "white-ash", "legs": "White ash"})) == "weighed as white ash"
