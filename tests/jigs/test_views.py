"""The three views against points taken all over the legs and the seat in space."""

from __future__ import annotations

import math

import numpy as np
import pytest
from scipy.spatial.transform import Rotation
from shapely import MultiPoint, Polygon, points

from jigs.bores import sections
from jigs.views import HEIGHT_MM, SCALES, WIDTH_MM, views
from layout.curves import Arc, flatten
from layout.drawing import Role
from layout.operations import bounds
from tests.jigs.conftest import DEMOS, demo, polygon, stool, strokes, texts

# A tapering leg seen obliquely stands out beyond the lines between its ends by less than this, true mm.
OBLIQUE_MM = 0.02

# Pieces of which each view shows its legs and nothing else in their kind of line.
LEGS_ALONE = [name for name in DEMOS if not (demo(name).posts or demo(name).spindles or demo(name).stretchers)]


def lone_and_wide(name):
    """Seats from the smallest to the largest, and a pitched one whose legs lean every way."""
    post = [{"name": "post", "at": [0, 22], "rake": 5, "mortise": 6}]
    corner = [{"name": "a", "at": [2800, 100], "mirror": True, "splay": 20, "rake": 20, "mortise": 40}]
    every = [
        {"name": "a", "at": [120, 80], "splay": 20, "rake": -12, "mortise": 20, "diameter": 40, "foot_diameter": 20},
        {"name": "b", "at": [-100, 210], "splay": -8, "rake": 17, "mortise": 20, "diameter": 30, "foot_diameter": 44},
    ]
    return {
        "small": lambda: stool(post, shape="round", diameter=50, width=None, depth=None, height=100, thickness=5),
        "large": lambda: stool(corner, width=6000, depth=6000, height=1500),
        "long": lambda: stool(corner, width=6000, depth=400, height=450),
        "every way": lambda: stool(every, pitch=9, drill_from="top"),
    }[name]()


SEATS = ("small", "large", "long", "every way")


def assembly_named(name):
    return lone_and_wide(name) if name in SEATS else demo(name)


def to_floor(assembly, seat_points):
    turn = Rotation.from_euler("x", -assembly.frame.pitch_deg, degrees=True)
    return turn.apply(seat_points) + np.array([0.0, 0.0, assembly.frame.height_mm])


def seat_points(assembly, view):
    """The edges of the seat's faces in the floor frame; in plan, the top's alone."""
    plan = np.array(flatten(assembly.blank.curve, 0.05))
    heights = (0.0,) if view == "plan" else (0.0, -assembly.thickness_mm)
    faces = [np.column_stack((plan, np.full(len(plan), z))) for z in heights]
    return to_floor(assembly, np.vstack(faces))


def leg_points(assembly, leg):
    """Points all over a leg's surface from well below the seat to the floor, floor frame."""
    start = to_floor(assembly, [*leg.underside_mm, -assembly.thickness_mm])
    foot = np.array([*leg.foot_mm, 0.0])
    axis, length = (foot - start) / np.linalg.norm(foot - start), np.linalg.norm(foot - start)
    one = np.cross(axis, [0.3, 1.0, 0.1])
    one /= np.linalg.norm(one)
    rings = []
    for s in np.linspace(0.2 * length, 1.2 * length, 100):
        radius = (leg.diameter_mm + (leg.foot_diameter_mm - leg.diameter_mm) * s / length) / 2
        turns = np.linspace(0.0, 2 * np.pi, 90)
        ring = np.cos(turns)[:, None] * one + np.sin(turns)[:, None] * np.cross(axis, one)
        rings.append(start + s * axis + radius * ring)
    surface = np.vstack(rings)
    return surface[surface[:, 2] >= 0.0]


# Which floor coordinates a view shows, to the right and up.
ACROSS_UP = {"front": (0, 2), "side": (1, 2), "plan": (0, 1)}


def cut_outlines(drawing):
    """The seat in front, side and plan view, in drawing order."""
    return dict(zip(ACROSS_UP, strokes(drawing, Role.CUT), strict=True))


def offset(assembly, drawing, divisor, view):
    """How far a view's origin stands from that of the drawing, read off the seat's left and lower edge."""
    seen = seat_points(assembly, view)[:, ACROSS_UP[view]] / divisor
    left, low, *_ = polygon(cut_outlines(drawing)[view].curve, 0.05 / divisor).bounds
    return np.array([left, low]) - seen.min(axis=0)


@pytest.mark.parametrize("name", [*DEMOS, *SEATS])
def test_the_seat_is_drawn_to_scale_in_each_view(name):
    assembly = assembly_named(name)
    drawing, divisor = views(assembly)
    for view, outline in cut_outlines(drawing).items():
        shape = polygon(outline.curve, 0.05 / divisor)
        seen = seat_points(assembly, view)[:, ACROSS_UP[view]] / divisor + offset(assembly, drawing, divisor, view)
        left, low, right, high = shape.bounds
        assert (right, high) == pytest.approx(seen.max(axis=0), abs=1.0 / divisor)
        if view != "plan":
            # Chords of the views stand within half a millimetre of the true outline.
            assert MultiPoint(seen).convex_hull.symmetric_difference(shape).area < 1.0 * shape.length / divisor
        assert left < right
        assert low < high


@pytest.mark.parametrize("name", [*DEMOS, *SEATS])
def test_front_and_side_stand_on_one_floor_and_the_plan_stands_below_the_front(name):
    assembly = assembly_named(name)
    drawing, divisor = views(assembly)
    origin = {view: offset(assembly, drawing, divisor, view) for view in ACROSS_UP}
    assert origin["front"] == pytest.approx([0.0, 0.0], abs=1.0 / divisor)
    assert origin["side"][1] == pytest.approx(0.0, abs=1.0 / divisor)
    assert origin["plan"][0] == pytest.approx(0.0, abs=1.0 / divisor)
    seats = {view: polygon(outline.curve) for view, outline in cut_outlines(drawing).items()}
    assert seats["side"].bounds[0] > seats["front"].bounds[2]
    assert seats["plan"].bounds[3] < 0.0


@pytest.mark.parametrize("name", [*LEGS_ALONE, *SEATS])
def test_each_legs_silhouette_holds_its_whole_surface_and_hardly_more(name):
    assembly = assembly_named(name)
    drawing, divisor = views(assembly)
    silhouettes = [stroke for stroke in strokes(drawing, Role.NOTE) if len(stroke.curve) == 3]
    count = len(assembly.legs)
    assert len(silhouettes) == 2 * count
    for k, view in enumerate(("front", "side")):
        origin = offset(assembly, drawing, divisor, view)
        for leg, stroke in zip(assembly.legs, silhouettes[k * count : (k + 1) * count], strict=True):
            shape = Polygon([stroke.curve[0].start, *(segment.end for segment in stroke.curve)])
            surface = leg_points(assembly, leg)
            seen = surface[:, ACROSS_UP[view]] / divisor + origin
            # The seat's own chords, by which the views are laid over each other, are good to half a millimetre.
            assert shape.distance(points(seen)).max() < (OBLIQUE_MM + 0.5) / divisor
            hull = MultiPoint(seen).convex_hull
            below = shape.intersection(Polygon.from_bounds(-1e5, -1e5, 1e5, hull.bounds[3]))
            assert below.area <= hull.area * 1.02 + 1.0 / divisor


@pytest.mark.parametrize("name", [*LEGS_ALONE, *SEATS])
def test_every_axis_runs_on_to_its_foot_at_the_true_place(name):
    assembly = assembly_named(name)
    drawing, divisor = views(assembly)
    axes = [s.curve[0] for s in strokes(drawing, Role.HIDDEN) if len(s.curve) == 1 and not isinstance(s.curve[0], Arc)]
    for k, view in enumerate(("front", "side")):
        origin = offset(assembly, drawing, divisor, view)
        for n, leg in enumerate(assembly.legs):
            (x0, y0), (x1, y1) = axes[k * len(assembly.legs) + n].start, axes[k * len(assembly.legs) + n].end
            on_floor = x0 + (x1 - x0) * y0 / (y0 - y1)
            foot = leg.foot_mm[ACROSS_UP[view][0]] / divisor + origin[0]
            assert on_floor == pytest.approx(foot, abs=0.5 / divisor)
            thick = (y0 - y1) * divisor
            assert thick == pytest.approx(
                to_floor(assembly, [*leg.top_mm, 0.0])[2]
                - to_floor(assembly, [*leg.underside_mm, -assembly.thickness_mm])[2],
                abs=1e-6,
            )


@pytest.mark.parametrize("name", [*DEMOS, *SEATS])
def test_the_plan_shows_each_foot_as_its_true_cut_on_the_floor(name):
    assembly = assembly_named(name)
    drawing, divisor = views(assembly)
    origin = offset(assembly, drawing, divisor, "plan")
    feet = [s.curve[0] for s in strokes(drawing, Role.HIDDEN) if isinstance(s.curve[0], Arc)]
    for leg, arc in zip(assembly.legs, feet, strict=True):
        assert np.array(arc.centre) == pytest.approx(np.array(leg.foot_mm) / divisor + origin, abs=0.5 / divisor)
        cut = np.array([arc.at(k / 36) for k in range(36)]) - arc.centre
        start = to_floor(assembly, [*leg.underside_mm, -assembly.thickness_mm])
        axis = np.array([*leg.foot_mm, 0.0]) - start
        axis /= np.linalg.norm(axis)
        across = np.linalg.norm(np.cross(np.column_stack((cut * divisor, np.zeros(36))), axis), axis=1)
        assert across == pytest.approx(leg.foot_diameter_mm / 2, abs=1e-6)


@pytest.mark.parametrize("name", [*LEGS_ALONE, "every way"])
def test_the_plan_shows_the_holes_of_the_top_foreshortened_with_the_seat(name):
    assembly = assembly_named(name)
    drawing, divisor = views(assembly)
    origin = offset(assembly, drawing, divisor, "plan")
    drawn = [s.curve[0] for s in strokes(drawing, Role.SET_OUT) if isinstance(s.curve[0], Arc)]
    holes = [section for leg in assembly.legs for section in sections(leg, "top")]
    assert len(drawn) == len(holes)
    for arc, section in zip(drawn, holes, strict=True):
        centre = to_floor(assembly, [*section.centre, 0.0])[:2]
        assert np.array(arc.centre) == pytest.approx(centre / divisor + origin, abs=0.5 / divisor)


@pytest.mark.parametrize("name", [*DEMOS, *SEATS])
def test_the_scale_is_a_stated_one_and_the_views_fit_the_block(name):
    drawing, divisor = views(assembly_named(name))
    box = bounds(drawing)
    assert divisor in SCALES
    assert box.width <= WIDTH_MM
    # Titles stand below and above what the scale is chosen for.
    assert box.height <= HEIGHT_MM + 20.0
    larger = [scale for scale in SCALES if scale < divisor]
    if larger:
        grow = divisor / larger[-1]
        assert grow * (box.width - 40.0) > WIDTH_MM - 40.0 or grow * (box.height - 40.0) > HEIGHT_MM - 40.0


@pytest.mark.parametrize("name", DEMOS)
def test_height_and_spread_of_feet_are_written_as_the_maker_measures_them(name):
    assembly = demo(name)
    drawing, divisor = views(assembly)
    said = [text.text for text in texts(drawing)]
    assert assembly.length(assembly.furniture.seat.height) in said
    for axis in (0, 1):
        feet = [leg.foot_mm[axis] for leg in assembly.legs]
        spread = max(feet) - min(feet)
        assert (assembly.length(spread) in said) == (spread > 25.0 * divisor)


def test_a_leg_that_stands_plumb_is_a_circle_in_plan_and_upright_in_both_views():
    drawing, divisor = views(stool([{"name": "post", "at": [0, 150], "rake": 0, "mortise": 30}]))
    (foot,) = [s.curve[0] for s in strokes(drawing, Role.HIDDEN) if isinstance(s.curve[0], Arc)]
    assert math.hypot(*foot.u) == pytest.approx(15.0 / divisor)
    assert math.hypot(*foot.v) == pytest.approx(15.0 / divisor)
    for stroke in strokes(drawing, Role.NOTE):
        if len(stroke.curve) == 3:
            (x0, _), (x1, _) = stroke.curve[0].start, stroke.curve[0].end
            assert x0 == pytest.approx(x1, abs=1e-9)


def test_posts_spindles_and_stretchers_stand_in_every_view_where_their_axes_are():
    assembly = demo("mates-chair")
    drawing, divisor = views(assembly)
    shapes = [
        MultiPoint(flatten(stroke.curve, 0.05)).convex_hull for stroke in drawing.items if hasattr(stroke, "curve")
    ]
    shares = np.linspace(0.1, 0.9, 9)[:, None]
    axes = {}
    for part in (*assembly.posts, *assembly.spindles):
        start = to_floor(assembly, [*part.top_mm, 0.0])
        axes[part.name] = start + shares * (np.array([*part.foot_mm, part.foot_z_mm]) - start)
    for stretcher in assembly.stretchers:
        start, end = (np.array(joint.axis_point_mm) for joint in stretcher.ends)
        axes[stretcher.name] = start + np.linspace(0.2, 0.8, 7)[:, None] * (end - start)
    for view in ACROSS_UP:
        origin = offset(assembly, drawing, divisor, view)
        for name, points_on_axis in axes.items():
            seen = points(points_on_axis[:, ACROSS_UP[view]] / divisor + origin)
            narrow = [shape for shape in shapes if shape.area < 600.0]
            assert any(shape.buffer(0.5 / divisor).covers(seen).all() for shape in narrow), (view, name)
