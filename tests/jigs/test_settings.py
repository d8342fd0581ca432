"""The settings as data, with the keys that other programs read, and as a table of 80 columns."""

from __future__ import annotations

import json
import math
import re

import pytest

from jigs.checks import cautions
from jigs.listings import assembly_notes, finished_sizes, standing_notes, tipping_loads, wood_to_cut
from jigs.quantities import format_angle
from jigs.settings import settings, table
from tests.jigs.conftest import DEMOS, LEG, demo, stool

ANGLES = ["splay_deg", "rake_deg", "resultant_deg", "sightline_deg"]


@pytest.mark.parametrize("name", DEMOS)
def test_the_keys_of_the_data_are_the_ones_that_are_promised(name):
    data = settings(demo(name))
    assert {"name", "drill_from", "legs", "warnings"} <= set(data)
    for leg in data["legs"]:
        assert {"name", *ANGLES, "drill", "mortise", "foot_mm", "axis_mm", "in_seat_mm"} <= set(leg)
        assert {*ANGLES, "bevel_deg", "bearing_deg"} <= set(leg["drill"])
        assert list(leg["mortise"]) == ["top_mm", "underside_mm"]
        assert [len(point) for point in (*leg["mortise"].values(), leg["foot_mm"])] == [2, 2, 2]
    for warning in data["warnings"]:
        assert list(warning) == ["code", "where", "text"]


@pytest.mark.parametrize("name", DEMOS)
def test_the_data_are_the_legs_at_full_precision_and_survive_json(name):
    assembly = demo(name)
    data = json.loads(json.dumps(settings(assembly)))
    assert data["name"] == assembly.furniture.name
    assert data["drill_from"] == assembly.drilled
    assert len(data["legs"]) == len(assembly.legs)
    for found, leg in zip(data["legs"], assembly.legs, strict=True):
        assert found["name"] == leg.name
        assert [found[key] for key in ANGLES] == [getattr(leg.floor, key) for key in ANGLES]
        assert [found["drill"][key] for key in ANGLES] == [getattr(leg.drill, key) for key in ANGLES]
        assert found["drill"]["bevel_deg"] == 90.0 - leg.drill.resultant_deg
        assert found["drill"]["bearing_deg"] == leg.drill.bearing_deg
        assert tuple(found["mortise"]["top_mm"]) == leg.top_mm
        assert tuple(found["mortise"]["underside_mm"]) == leg.underside_mm
        assert tuple(found["foot_mm"]) == leg.foot_mm
        assert (found["axis_mm"], found["in_seat_mm"]) == (leg.axis_mm, leg.in_seat_mm)
    assert data["warnings"] == [{"code": c.code, "where": c.where, "text": c.text} for c in cautions(assembly)]


def test_the_slipway_stools_front_leg_has_known_angles():
    leg = settings(demo("slipway-stool"))["legs"][0]
    assert leg["name"] == "front left"
    assert [round(leg[key], 3) for key in ANGLES] == [12.0, 9.0, 14.846, 53.309]


def long_names(units):
    """Names as long as they may be, lengths with as many digits as they may have."""
    inch = 25.4 if units == "in" else 1.0
    legs = [
        {
            **LEG,
            "name": "the one nearest to the stove, which is never quite warm",
            "at": [round(2871.37 / inch, 5), round(2913.21 / inch, 5)],
            "splay": 41.3,
            "rake": 43.7,
            "mortise": 40 / inch,
        },
        {**LEG, "name": "b", "at": [2000 / inch, 100 / inch], "splay": -40, "rake": -41, "mortise": 40 / inch},
    ]
    sizes = {"width": 5990 / inch, "depth": 3200 / inch, "height": 1490.3 / inch, "thickness": 45 / inch}
    return stool(legs, {"units": units, "name": "Lifeboatmen's long table, upper mess, seaward side, No. 1"}, **sizes)


EVERY = [*DEMOS, "long mm", "long in"]


def assembly_named(name):
    return long_names(name.split()[1]) if name.startswith("long ") else demo(name)


def to_bore_by(assembly):
    """The lines of the table that are about what is bored into the seat."""
    text = table(assembly)
    return text[: text.index("Sightline: ")].splitlines()


@pytest.mark.parametrize("name", EVERY)
def test_the_table_fits_eighty_columns_and_no_two_cells_run_together(name):
    assembly = assembly_named(name)
    lines = table(assembly).splitlines()
    assert max(map(len, lines)) <= 80
    assert not any(line != line.rstrip() for line in lines)
    lines = to_bore_by(assembly)
    rows = [line for line in lines if line.count("°") >= 5]
    pitched = assembly.furniture.seat.pitch != 0
    assert len(rows) == len(assembly.bored) * (2 if pitched else 1)
    assert not any(re.search(r"°\S", row) for row in rows)
    points = [line for line in lines if re.search(r"\d, -?\d", line) and "°" not in line]
    assert len(points) == len(assembly.bored)
    # Three pairs of coordinates, apart by two spaces or more.
    assert all(len(re.split(r"  +", line[17:].strip())) == 3 for line in points)


@pytest.mark.parametrize("name", DEMOS)
def test_the_table_says_what_the_maker_sets(name):
    assembly = demo(name)
    text = table(assembly)
    lines = text.splitlines()
    assert lines[0] == assembly.furniture.name
    assert all(f"To bore by: from the {face}" in text for face in {part.drilled for part in assembly.bored})
    for leg in assembly.legs:
        first = next(line for line in lines if line.startswith(f"{leg.name} ") and "°" in line)
        angles = (
            leg.drill.splay_deg,
            leg.drill.rake_deg,
            leg.drill.resultant_deg,
            leg.drill.sightline_deg,
            90.0 - leg.drill.sightline_deg,
            leg.drill.bevel_deg,
        )
        cells = first.removeprefix(leg.name).split(maxsplit=6)
        assert cells == [*map(format_angle, angles), assembly.length(leg.axis_mm)]
    assert ("As they stand" in text) == (assembly.furniture.seat.pitch != 0)
    assert "Left and right are" in text


def test_angles_as_the_legs_stand_are_told_beside_those_to_bore_by_on_a_pitched_seat():
    assembly = demo("harbour-chair")
    lines = to_bore_by(assembly)
    rows = [
        line.removeprefix("front left").split()[:3] for line in lines if line.startswith("front left") and "°" in line
    ]
    (leg, *_) = assembly.legs
    assert rows == [
        [format_angle(v) for v in (lean.splay_deg, lean.rake_deg, lean.resultant_deg)]
        for lean in (leg.drill, leg.floor)
    ]


def test_a_leg_that_stands_square_has_dashes_for_its_sightline():
    lines = to_bore_by(stool([{"name": "post", "at": [0, 150], "rake": 0, "mortise": 25}]))
    (row,) = [line for line in lines if line.startswith("post") and "°" in line]
    assert row.split() == ["post", "0.0°", "0.0°", "0.0°", "-", "-", "90.0°", "405", "mm"]


def test_no_number_of_the_data_is_negative_nought_or_not_a_number():
    def numbers(value):
        if isinstance(value, dict | list):
            for item in value.values() if isinstance(value, dict) else value:
                yield from numbers(item)
        elif isinstance(value, float):
            yield value

    for assembly in (demo("caulkers-stool"), stool([{"name": "post", "at": [0, 150], "rake": 0, "mortise": 25}])):
        for number in numbers(settings(assembly)):
            assert math.isfinite(number)
            assert str(number) != "-0.0"


@pytest.mark.parametrize("name", DEMOS)
def test_the_table_tells_of_the_whole_piece_what_the_setting_out_sheet_tells(name):
    assembly = demo(name)
    text = table(assembly)
    said = " ".join(text.split())
    for listing in (wood_to_cut(assembly), finished_sizes(assembly), tipping_loads(assembly)):
        assert listing.title in text
        for row in listing.rows:
            # A name that is broken has its numbers on its last line.
            assert " ".join(" ".join(row).split()) in said
    for note in (*assembly_notes(assembly), *standing_notes(assembly)):
        assert note in said


@pytest.mark.parametrize("name", DEMOS)
def test_the_cut_list_of_the_data_has_every_part_once(name):
    assembly = demo(name)
    rows = settings(assembly)["cut_list"]
    parts = [part.name for part in (*assembly.bored, *assembly.stretchers)]
    assert sorted(name for row in rows for name in row["name"].split(", ")) == sorted([*parts, "seat"])
    for row in rows:
        assert row["count"] == len(row["name"].split(", "))
        # A board foot is 144 cubic inches of 25.4 mm each way.
        wide, thick = row["section_mm"]
        feet = row["count"] * row["length_mm"] * wide * thick / (144 * 25.4**3)
        assert row["board_feet"] == pytest.approx(feet, rel=1e-12)
