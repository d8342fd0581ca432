"""Blanks, foot cuts and the cut list, against points taken on the parts in space."""

from __future__ import annotations

import math

import numpy as np
import pytest
from scipy.integrate import quad

from jigs.assembly import assemble
from jigs.bores import radius_mm
from jigs.cutting import blank_mm, cut_rows, foot_bevel_deg, stretcher_blank_mm, tenon_mm3
from jigs.loads import weight_parts
from jigs.spec import parse_spec
from jigs.wood import FOOT_ALLOWANCE_MM, TENON_BEYOND_MM, TURNING_WASTE_MM
from tests.jigs.conftest import LEG, _lines, demo, spec_text, stool

TURNED = {**LEG, "splay": 12, "rake": 9, "diameter": 40, "foot_diameter": 26}
POST = {"name": "post", "at": [110, 255], "mirror": True, "splay": 8, "rake": 10, "length": 400, "mortise": 19}
BAR = {"name": "rung", "between": ["front left", "front right"], "height": 150, "diameter": 22, "tenon": 20}


def chair(wood=None, **post):
    text = spec_text([TURNED, {**TURNED, "name": "back", "at": [125, 190], "end": "back"}])
    text += "".join(
        f"\n[[{title}]]\n" + "\n".join(_lines(table)) for title, table in (("posts", POST | post), ("stretchers", BAR))
    )
    if wood:
        text += "\n[wood]\n" + "\n".join(_lines(wood))
    return assemble(parse_spec(text.encode(), "chair.toml"), "chair.toml")


def lowest_along(start, way, thick, thin, length, floor_z):
    """How far along a tapering leg its surface still stands above the floor: the last place, by lines on its cone."""
    aside = np.cross(way, [0.3, 0.9, 0.1])
    aside /= np.linalg.norm(aside)
    other = np.cross(way, aside)
    furthest = 0.0
    for turn in np.linspace(0.0, 2 * np.pi, 720):
        out = np.cos(turn) * aside + np.sin(turn) * other
        # Height over the floor falls evenly along each line of the cone.
        heights = [
            (start + s * way + (thick + s / length * (thin - thick)) / 2 * out)[2] - floor_z for s in (0.0, length)
        ]
        furthest = max(furthest, length * heights[0] / (heights[0] - heights[1]))
    return furthest


def test_a_legs_blank_holds_its_tenon_its_slanted_cuts_and_the_waste():
    assembly = stool([TURNED])
    leg = assembly.legs[0]
    start = np.array([*leg.underside_mm, 405.0])
    way = np.array([leg.foot_mm[0], leg.foot_mm[1], 0.0]) - start
    length = float(np.linalg.norm(way))
    foot_end = lowest_along(start, way / length, 40.0, 26.0, length, 0.0)
    # A tenon of Ø 25 stands out above the top by the slant of the face on one side.
    lean = math.acos(-way[2] / length)
    tenon = 45 / math.cos(lean) + 12.5 * math.tan(lean) + TENON_BEYOND_MM
    assert blank_mm(assembly, leg) == pytest.approx(foot_end + tenon + FOOT_ALLOWANCE_MM + TURNING_WASTE_MM, abs=1e-3)


def test_a_leg_in_a_blind_mortise_ends_at_its_bottom():
    through, blind = (
        stool([{**LEG, "mirror": False, "splay": 0, "rake": 0, "mortise": mortise}])
        for mortise in (25, {"bit": 25, "depth": 30})
    )
    # Plumb and 405 mm under the seat.
    assert blank_mm(through, through.legs[0]) == pytest.approx(405 + 45 + 6 + 20 + 20)
    assert blank_mm(blind, blind.legs[0]) == pytest.approx(405 + 30 + 20 + 20)


def test_a_post_ends_square_and_has_no_foot():
    assembly = chair(splay=0, rake=0)
    assert blank_mm(assembly, assembly.posts[0]) == pytest.approx(400 + 45 + 6 + 20)
    assert foot_bevel_deg(assembly.posts[0]) == 0.0


@pytest.mark.parametrize("pitch", [0, 7])
def test_the_foot_is_cut_at_the_angle_between_its_axis_and_plumb(pitch):
    leg = stool([TURNED], pitch=pitch).legs[0]
    tangent = math.hypot(math.tan(math.radians(12)), math.tan(math.radians(9)))
    assert foot_bevel_deg(leg) == pytest.approx(math.degrees(math.atan(tangent)))


@pytest.mark.parametrize(
    "mortise",
    [25, {"bit": 16, "taper": 6}, {"bit": 16, "taper": 6, "mouth": 18}, {"bit": 20, "depth": 30}],
)
def test_a_tenons_volume_is_that_of_its_discs(mortise):
    leg = stool([{**LEG, "mortise": mortise}]).legs[0]
    deep = 30.0 if isinstance(mortise, dict) and "depth" in mortise else leg.in_seat_mm
    found, _ = quad(lambda s: math.pi * radius_mm(leg, s) ** 2, 0.0, deep, points=[deep / 4, deep / 2], limit=200)
    assert tenon_mm3(leg) == pytest.approx(found, rel=1e-6)


def test_the_cut_list_has_a_row_for_what_is_alike():
    rows = {row.name: row for row in cut_rows(chair())}
    assert list(rows) == ["seat", "front left, front right, back left, back right", "post left, post right", "rung"]
    assert [row.count for row in rows.values()] == [1, 4, 2, 1]
    assert all(row.weight_kg is None for row in rows.values())
    seat = rows["seat"]
    assert (seat.length_mm, *seat.section_mm) == pytest.approx((410.0, 310.0, 45.0))
    # A board foot is 144 cubic inches.
    assert seat.board_feet == pytest.approx(410 * 310 * 45 / 25.4**3 / 144)
    legs = rows["front left, front right, back left, back right"]
    assert legs.section_mm == (46.0, 46.0)
    assert legs.board_feet == pytest.approx(4 * legs.length_mm * 46 * 46 / 25.4**3 / 144)


def test_the_weights_of_the_cut_list_are_those_of_the_piece_but_for_what_is_bored_out_of_legs():
    wood = {"seat": "white ash", "legs": "white ash"}
    assembly = chair(wood)
    listed = sum(row.weight_kg for row in cut_rows(assembly))
    weighed = sum(part.mass_kg for part in weight_parts(assembly))
    # Seat and tenons are one solid of one wood; a stretcher's tenons of Ø 22 × 20 are counted in the legs too.
    twice = 2 * math.pi * 11.0**2 * 20.0 * 672e-9
    assert listed == pytest.approx(weighed + twice, rel=1e-9)


def test_a_stretchers_blank_is_as_long_as_it_is_over_its_tenons_with_waste():
    assembly = chair()
    (rung,) = assembly.stretchers
    assert stretcher_blank_mm(rung) == pytest.approx(rung.shoulder_mm + 2 * 20 + TURNING_WASTE_MM)
    assert cut_rows(assembly)[-1].length_mm == stretcher_blank_mm(rung)


def test_legs_that_differ_are_cut_apart():
    names = [row.name for row in cut_rows(demo("slipway-stool"))]
    assert names == ["seat", "front left, front right", "back left, back right"]
