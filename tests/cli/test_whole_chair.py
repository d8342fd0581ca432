"""A whole chair from its spec to its files, by the command line alone: the data, the points and the cards agree with
vectors worked out here from the spec.
"""

from __future__ import annotations

import io
import json
import math
import tomllib
from functools import cache
from pathlib import Path
from tempfile import TemporaryDirectory

import numpy as np
import pytest
from click.testing import CliRunner
from pypdf import PdfReader
from scipy.spatial.transform import Rotation

from cli.main import main

DEMOS = sorted((Path(__file__).parents[2] / "demo_specs").glob("*.toml"))
CHAIR = next(path for path in DEMOS if path.stem == "mates-chair")
each_demo = pytest.mark.parametrize("spec", DEMOS, ids=lambda path: path.stem)


@cache
def told(spec: Path):
    """What `angles --json` says, and the spec itself."""
    result = CliRunner().invoke(main, ["angles", str(spec), "--json"])
    assert result.exit_code == 0
    return json.loads(result.stdout), tomllib.loads(spec.read_text(encoding="utf-8"))


@cache
def printed(spec: Path):
    """What `make` wrote: each page's words, and the report. Both faces."""
    with TemporaryDirectory() as folder:
        pdf, report = Path(folder) / "x.pdf", Path(folder) / "x.json"
        arguments = ["make", str(spec), "-o", str(pdf), "--face", "both", "--report", str(report), "--quiet"]
        assert CliRunner().invoke(main, arguments).exit_code == 0
        words = [page.extract_text() for page in PdfReader(io.BytesIO(pdf.read_bytes())).pages]
        return words, json.loads(report.read_text(encoding="utf-8"))


def bored(data):
    return [*data["legs"], *data.get("posts", []), *data.get("spindles", [])]


class Hall:
    """The floor with the chair's seat above it: places of the seat's plan in the floor frame, all in mm."""

    def __init__(self, spec):
        seat = spec["seat"]
        self.turn = Rotation.from_euler("x", -seat.get("pitch", 0), degrees=True)
        self.height = seat["height"]

    def place(self, plan, z=0.0):
        return self.turn.apply([*plan, z]) + np.array([0.0, 0.0, self.height])

    def seat(self, place):
        return self.turn.inv().apply(np.asarray(place) - [0.0, 0.0, self.height])


def axis(hall, part, thickness):
    """Two points of a part's axis in the floor frame, from the mortise on both faces, and its far end."""
    top, low = (hall.place(part["mortise"][f"{face}_mm"], z) for face, z in (("top", 0.0), ("underside", -thickness)))
    return top, low, np.array([*part["foot_mm"], part.get("foot_z_mm", 0.0)])


@each_demo
def test_the_keys_are_the_same_for_legs_posts_and_spindles(spec):
    data, _ = told(spec)
    wanted = {"name", "splay_deg", "rake_deg", "resultant_deg", "sightline_deg", "drill", "mortise", "foot_mm"}
    for part in bored(data):
        assert wanted | {"axis_mm", "in_seat_mm", "cut"} <= set(part)
        assert set(part["cut"]) >= {"blank_mm", "foot_bevel_deg"}
    for stretcher in data["stretchers"]:
        assert {"name", "between_axes_mm", "shoulder_mm", "over_tenons_mm", "ends"} <= set(stretcher)
        for end in stretcher["ends"]:
            assert {"in", "bore_deg", "clock_deg", "height_mm", "axis_point_mm"} <= set(end)
    assert all(set(edge) >= {"at", "load_n"} for edge in data["stability"])


def test_each_part_of_the_chair_is_straight_from_its_far_end_through_both_faces():
    data, spec = told(CHAIR)
    hall = Hall(spec)
    for part in bored(data):
        top, low, far = axis(hall, part, spec["seat"]["thickness"])
        along = (low - top) / np.linalg.norm(low - top)
        assert np.linalg.norm(np.cross(far - top, along)) < 1e-9
        assert np.linalg.norm(low - top) == pytest.approx(part["in_seat_mm"], abs=1e-9)
        start = low if part["drilled_from"] == "underside" else top
        assert np.linalg.norm(far - start) == pytest.approx(part["axis_mm"], abs=1e-9)


def test_each_leg_of_the_chair_leans_as_its_spec_says_and_its_twin_the_other_way():
    data, spec = told(CHAIR)
    given = {table["name"]: table for table in [*spec["legs"], *spec["posts"]]}
    for part in [*data["legs"], *data["posts"]]:
        name, _, side = part["name"].rpartition(" ")
        table, sign = given[name], -1.0 if side == "left" else 1.0
        x, y = part["mortise"]["underside_mm" if part["drilled_from"] == "underside" else "top_mm"]
        assert (x, y) == pytest.approx((sign * table["at"][0], table["at"][1]), abs=1e-12)
        top, low, far = axis(Hall(spec), part, spec["seat"]["thickness"])
        way = far - (top + low) / 2
        end = 1.0 if name != "front" else -1.0
        assert math.degrees(math.atan2(sign * way[0], abs(way[2]))) == pytest.approx(table["splay"], abs=1e-9)
        assert math.degrees(math.atan2(end * way[1], abs(way[2]))) == pytest.approx(table["rake"], abs=1e-9)


def on_arc(width, back, bow, share):
    """A place of a row: so far (-1 to 1) along the circle through both ends and the middle, which lies `bow` behind."""
    half = width / 2
    radius = (half**2 + bow**2) / (2 * bow)
    turn = share * math.asin(half / radius)
    return np.array([radius * math.sin(turn), back - radius * (1.0 - math.cos(turn))])


def test_the_spindles_step_evenly_along_the_deck_to_their_own_places_on_the_crest():
    data, spec = told(CHAIR)
    (row,), hall = spec["spindles"], Hall(spec)
    deck, crest = row["deck"], row["crest"]
    assert len(data["spindles"]) == row["count"]
    for k, part in enumerate(data["spindles"]):
        share = 2.0 * k / (row["count"] - 1) - 1.0
        foot = on_arc(deck["width"], deck["back"], deck["bow"], share)
        assert part["mortise"]["top_mm"] == pytest.approx(foot, abs=1e-9)
        head = np.array([*on_arc(crest["width"], crest["back"], crest["bow"], share), part["foot_z_mm"]])
        assert part["foot_mm"] == pytest.approx(head[:2], abs=1e-9)
        # The rail's height counts from the seat's top at the back of the deck.
        seat_mm = hall.place([0.0, deck["back"]])[2]
        assert part["foot_z_mm"] == pytest.approx(seat_mm + crest["height"], abs=1e-9)
        # Its own four angles, from square to the seat, from the vector between the two places.
        x, y, z = hall.seat(head) - [*foot, 0.0]
        side = math.copysign(1.0, foot[0]) if abs(foot[0]) > 1e-9 else 1.0
        drill = part["drill"]
        assert drill["splay_deg"] == pytest.approx(math.degrees(math.atan2(side * x, z)), abs=1e-9)
        assert drill["rake_deg"] == pytest.approx(math.degrees(math.atan2(y, z)), abs=1e-9)
        assert drill["resultant_deg"] == pytest.approx(math.degrees(math.atan2(math.hypot(x, y), z)), abs=1e-9)
        assert drill["sightline_deg"] == pytest.approx(math.degrees(math.atan2(side * x, y)), abs=1e-9)


def test_each_stretcher_is_as_long_as_between_its_points_and_bored_at_the_angle_between_the_axes():
    data, spec = told(CHAIR)
    hall, thickness = Hall(spec), spec["seat"]["thickness"]
    lines = {}
    for part in data["legs"]:
        top, _, far = axis(hall, part, thickness)
        lines[part["name"]] = (far, (far - top) / np.linalg.norm(far - top))
    for stretcher in data["stretchers"]:
        ends = [np.array(end["axis_point_mm"]) for end in stretcher["ends"]]
        lines[stretcher["name"]] = (ends[0], (ends[1] - ends[0]) / np.linalg.norm(ends[1] - ends[0]))
    wanted = {table["name"]: table for table in spec["stretchers"]}
    for stretcher in data["stretchers"]:
        table = wanted[stretcher["name"]]
        points = [np.array(end["axis_point_mm"]) for end in stretcher["ends"]]
        assert stretcher["between_axes_mm"] == pytest.approx(math.dist(*points), abs=1e-9)
        assert stretcher["over_tenons_mm"] == pytest.approx(stretcher["shoulder_mm"] + 2 * table["tenon"], abs=1e-9)
        for k, end in enumerate(stretcher["ends"]):
            through, along = lines[end["in"]]
            assert end["in"] == table["between"][k]
            assert np.linalg.norm(np.cross(points[k] - through, along)) < 1e-9
            assert end["height_mm"] == pytest.approx(points[k][2], abs=1e-9)
            if "heights" in table:
                assert end["height_mm"] == pytest.approx(table["heights"][k], abs=1e-9)
            way = (points[1 - k] - points[k]) / stretcher["between_axes_mm"]
            assert end["bore_deg"] == pytest.approx(math.degrees(math.acos(way @ along)), abs=1e-9)


def test_a_legs_clock_starts_at_its_sightline_and_runs_clockwise_looking_toward_its_foot():
    data, spec = told(CHAIR)
    hall = Hall(spec)
    parts = {part["name"]: part for part in data["legs"]}
    for stretcher in data["stretchers"]:
        for k, end in enumerate(stretcher["ends"]):
            if end["in"] not in parts:
                continue
            top, _, far = axis(hall, parts[end["in"]], spec["seat"]["thickness"])
            along = (far - top) / np.linalg.norm(far - top)
            # The arrow of the sightline: the way of the foot in the seat's plane, laid square to the leg.
            normal = hall.turn.apply([0.0, 0.0, 1.0])
            zero = along - (along @ normal) * normal
            zero -= (zero @ along) * along
            way = np.subtract(stretcher["ends"][1 - k]["axis_point_mm"], end["axis_point_mm"])
            # Clockwise looking along the axis: a quarter turn on from the arrow lies at along x zero.
            quarter = np.cross(along, zero)
            clock = math.degrees(math.atan2(way @ quarter, way @ zero)) % 360.0
            assert end["clock_deg"] == pytest.approx(clock, abs=1e-7)


def test_left_and_right_stretchers_are_mirrored():
    data, _ = told(CHAIR)
    left, right = data["stretchers"][:2]
    assert left["shoulder_mm"] == pytest.approx(right["shoulder_mm"], abs=1e-9)
    for one, other in zip(left["ends"], right["ends"], strict=True):
        assert one["bore_deg"] == pytest.approx(other["bore_deg"], abs=1e-9)
        assert one["clock_deg"] + other["clock_deg"] == pytest.approx(360.0, abs=1e-9)


@each_demo
def test_every_mortise_lies_on_its_face_of_the_paper_where_the_data_have_it(spec):
    data, _ = told(spec)
    _, report = printed(spec)
    pieces = {piece["piece"]: piece["points"] for piece in report["pieces"] if piece["piece"].startswith("template")}
    assert set(pieces) == {"template underside", "template top"}
    for part in bored(data):
        mortise = part["mortise"]
        face = part["drilled_from"]
        x, y = mortise[f"{face}_mm"]
        seen = (-x, y) if face == "underside" else (x, y)
        assert pieces[f"template {face}"][part["name"]] == pytest.approx(seen, abs=1e-9)


@each_demo
def test_every_part_is_named_on_a_card_and_on_a_strip_where_it_leans(spec):
    data, _ = told(spec)
    words, report = printed(spec)
    for sheet in ("cards", "strips"):
        pages = [page["page"] for page in report["pages"] if page["sheet"] == sheet]
        said = " ".join(" ".join(words[page - 1].split()) for page in pages)
        for part in bored(data):
            if part["drill"]["resultant_deg"] > 0.05:
                assert part["name"] in said, sheet


@each_demo
def test_the_setting_out_sheet_carries_every_part_and_every_warning_of_the_data(spec):
    data, _ = told(spec)
    words, report = printed(spec)
    pages = [page["page"] for page in report["pages"] if page["sheet"] == "setting-out"]
    said = " ".join(" ".join(words[page - 1].split()) for page in pages)
    for part in [*bored(data), *data["stretchers"]]:
        assert part["name"] in said
    for warning in data["warnings"]:
        assert f"[{warning['code']}]" in said
