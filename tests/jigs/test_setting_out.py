"""The setting-out sheet: every setting, what to cut, the order of work, cautions, and that it can be read."""

from __future__ import annotations

import re

import numpy as np
import pytest
from scipy.optimize import brentq
from shapely import LineString

from jigs.advice import order_of_work
from jigs.assembly_order import assembly_note
from jigs.blocks import WIDTH_MM
from jigs.bores import bored_mm
from jigs.cards import cards
from jigs.checks import cautions
from jigs.cutting import cut_rows, foot_bevel_deg
from jigs.loads import standing
from jigs.quantities import format_angle
from jigs.setting_out import setting_out_pieces
from jigs.statics import GUIDE
from jigs.strips import strips
from jigs.views import views
from layout.curves import flatten
from layout.drawing import Role
from layout.operations import bounds
from tests.jigs.chair import CHAIR, chair, railed, whole
from tests.jigs.conftest import DEMOS, LEG, clashes, demo, patch, stool, strokes, texts
from tests.jigs.furnished import to_floor

# The lowest window of a page that a block must fit: upright A5 with the default margins keeps 172 mm.
LEAST_PAGE_MM = 172.0


def crowded(units):
    """Names as long as they may be, every caution that there is, lengths with many digits."""
    inch = 25.4 if units == "in" else 1.0
    long = "the weather-side one, nearest to the stove in the canteen"
    legs = [
        {"name": f"{k} {long}"[:54], "at": [at[0] / inch, at[1] / inch], "mirror": True, **lean}
        for k, (at, lean) in enumerate(
            [
                ((2880.4, 40.2), {"splay": 31.5, "rake": 33.5, "mortise": {"bit": 41 / inch, "taper": 6}}),
                ((24.6, 330.8), {"splay": -12.5, "rake": -11.5, "mortise": {"bit": 30 / inch, "depth": 40 / inch}}),
                ((1440.2, 520.7), {"splay": 40.5, "rake": 39.5, "mortise": 25.4 / inch}),
            ]
        )
    ]
    seat = {
        "width": 5900.6 / inch,
        "depth": 600.4 / inch,
        "thickness": 44.6 / inch,
        "height": 780.2 / inch,
        "pitch": 6.5,
    }
    return stool(legs, {"units": units, "name": "Lifeboatmen's long table, upper mess, seaward side, No. 1"}, **seat)


def party():
    """Sixty-four legs, so that the table does not fit one block."""
    legs = [
        {**LEG, "name": f"{row}{column}", "at": [200 * column + 100, 200 * row + 100], "splay": 3, "rake": 3}
        for row in range(4)
        for column in range(8)
    ]
    return stool(legs, width=3400, depth=900)


def assembly_named(name):
    if name.startswith("crowded"):
        return crowded(name.split()[1])
    made = {"party": party, "chair": chair, "railed": railed, "many spindles": many_spindles}
    return made[name]() if name in made else demo(name)


def many_spindles():
    """More spindles than one block of a table holds, on a long settle."""
    text = CHAIR.replace("count = 9", "count = 30").replace("mortise = { bit = 12, depth = 30 }", "mortise = 5")
    return whole(text.replace("diameter = 15\nend_diameter = 10", "diameter = 5"))


EVERY = [*DEMOS, "crowded mm", "crowded in", "party", "chair", "railed", "many spindles"]


@pytest.mark.parametrize("name", EVERY)
def test_every_block_is_no_wider_than_the_column_and_no_taller_than_a_page(name):
    for piece in setting_out_pieces(assembly_named(name)):
        box = bounds(piece.drawing)
        assert box.width <= WIDTH_MM + 1e-9, piece.name
        assert box.height <= LEAST_PAGE_MM, piece.name
        assert (piece.sheet, piece.handling) == ("setting-out", "flow")


@pytest.mark.parametrize("name", EVERY)
def test_no_lettering_lies_over_other_lettering_or_over_the_seat_in_the_views(name):
    for piece in setting_out_pieces(assembly_named(name)):
        assert clashes(piece.drawing) == [], piece.name


# The pieces that are tables, by the beginnings of their names.
TABLES = ("settings", "posts", "spindles", "stretcher", "wood", "sizes", "standing")


@pytest.mark.parametrize("name", EVERY)
def test_no_line_of_the_table_runs_through_its_words(name):
    for piece in setting_out_pieces(assembly_named(name)):
        if piece.name.startswith(TABLES):
            lines = [
                LineString(flatten(stroke.curve, 0.01))
                for role in (Role.SET_OUT, Role.FURNITURE)
                for stroke in strokes(piece.drawing, role)
            ]
            for text in texts(piece.drawing):
                assert not any(line.intersects(patch(text)) for line in lines), text.text


def rows_of(piece):
    """The lettering of a table in rows from the top down, each row from the left."""
    lines = {}
    for text in texts(piece.drawing):
        lines.setdefault(round(text.at[1], 6), []).append((patch(text).bounds[0], text.text))
    return [[words for _, words in sorted(lines[y])] for y in sorted(lines, reverse=True)]


def blocks(assembly, start):
    return [piece for piece in setting_out_pieces(assembly) if piece.name.startswith(start)]


def body_of(assembly, start):
    """The rows of a table below its title and heads, from all its blocks; a name that runs on below is joined."""
    found = []
    for row in (row for piece in blocks(assembly, start) for row in rows_of(piece)[3:]):
        if len(row) == 1 and found:
            found[-1][0] += f" {row[0]}"
        else:
            found.append(row)
    return found


def said_in(assembly, start):
    return " ".join(text.text for piece in blocks(assembly, start) for text in texts(piece.drawing))


@pytest.mark.parametrize("name", [*DEMOS, "party", "chair", "many spindles"])
@pytest.mark.parametrize(("start", "kind"), [("settings", "leg"), ("posts", "post"), ("spindles", "spindle")])
def test_the_tables_give_every_parts_drilling_settings_and_how_it_stands(name, start, kind):
    assembly = assembly_named(name)
    parts = [part for part in assembly.bored if part.kind == kind]
    heads = [rows_of(piece)[0][0] for piece in blocks(assembly, start)]
    assert bool(heads) == bool(parts)
    face = assembly.drilled if kind == "leg" else "top"
    assert all(head.removesuffix(" (continued)").endswith(f"on the {face}") for head in heads)
    assert [" (continued)" in head for head in heads] == [k > 0 for k in range(len(heads))]
    rows = body_of(assembly, start)
    for part, row in zip(parts, rows, strict=True):
        drill, floor = part.drill, part.floor
        assert row == [
            part.name,
            format_angle(drill.resultant_deg),
            *(format_angle(angle) if drill.leans else "–" for angle in (drill.sightline_deg, drill.complement_deg)),
            format_angle(drill.bevel_deg),
            f"{format_angle(drill.splay_deg)}, {format_angle(drill.rake_deg)}",
            f"{format_angle(floor.splay_deg)}, {format_angle(floor.rake_deg)}",
            assembly.length(part.axis_mm),
        ]


def test_long_names_stand_in_the_table_to_their_last_letter():
    assembly = crowded("mm")
    rows = body_of(assembly, "settings")
    words = " ".join(row[0] for row in rows)
    for leg in assembly.legs:
        assert leg.name in words


def test_a_table_longer_than_a_block_goes_on_in_the_next_one():
    assert len(blocks(many_spindles(), "spindles")) == 2
    assert len(blocks(party(), "settings")) == 3


@pytest.mark.parametrize("name", DEMOS)
def test_the_list_of_what_to_cut_counts_cards_and_strips(name):
    assembly = demo(name)
    said = said_in(assembly, "what to cut")
    assert f"{len(cards(assembly))} angle cards" in said
    assert f"{len(strips(assembly))} sightline strip" in said


def full(names):
    """Names as the tables draw them together, each written out again."""
    found = []
    for group in names.split("; "):
        first, *rest = group.split(", ")
        stem = first.rpartition(" ")[0]
        for last in [first, *(f"{stem} {last}" for last in rest)]:
            low, _, high = last.partition(" to ")
            row, _, number = low.rpartition(" ")
            found += [f"{row} {k}" for k in range(int(number), int(high) + 1)] if high else [last]
    return found


@pytest.mark.parametrize("name", [*(name for name in DEMOS if name != "chandlers-table"), "chair"])
def test_the_cut_list_gives_blank_section_board_feet_and_weight_of_every_part(name):
    assembly = assembly_named(name)
    rows = body_of(assembly, "wood")
    cut = cut_rows(assembly)
    for row, want in zip(rows, [*cut, None], strict=True):
        if want is None:
            assert row[:2] == ["all together", str(sum(one.count for one in cut))]
            assert float(row[2]) == pytest.approx(sum(one.board_feet for one in cut), abs=0.005)
            continue
        assert full(row[0]) == want.name.split(", ")
        weight = "–" if want.weight_kg is None else f"{want.weight_kg:.2f} kg"
        if assembly.furniture.units == "in" and want.weight_kg is not None:
            # An international pound is 0.45359237 kg (1959).
            weight = f"{want.weight_kg / 0.45359237:.2f} lb"
        section = " × ".join(map(assembly.length, want.section_mm))
        assert row[1:] == [
            str(want.count),
            assembly.length(want.length_mm),
            section,
            f"{want.board_feet:.2f}",
            weight,
        ]


@pytest.mark.parametrize("name", [*(name for name in DEMOS if name != "chandlers-table"), "chair"])
def test_the_finished_sizes_of_every_part_are_said_with_the_bevel_of_a_legs_foot(name):
    assembly = assembly_named(name)
    said = {part: row[1:] for row in body_of(assembly, "sizes") for part in full(row[0])}
    assert len(said) == len(assembly.bored)
    for part in assembly.bored:
        lengths = (part.axis_mm, bored_mm(part), part.diameter_mm, part.foot_diameter_mm)
        bevel = format_angle(foot_bevel_deg(part)) if part.kind == "leg" else "–"
        assert said[part.name] == [*map(assembly.length, lengths), bevel]


def test_names_that_hold_commas_are_not_taken_apart_in_the_cut_list():
    said = " ".join(row[0] for row in body_of(railed(), "wood"))
    assert "the one nearest to the stove, at the front left, right" in said
    assert "the one nearest to the stove, at the back left, right" in said


def test_a_piece_without_posts_and_stretchers_has_no_tables_of_them():
    names = [piece.name for piece in setting_out_pieces(stool())]
    assert not [name for name in names if name.startswith(("posts", "spindles", "stretcher", "clock", "assembly"))]


def test_the_tables_of_stretchers_give_the_numbers_of_the_data():
    assembly = chair()
    lengths = " ".join(" ".join(row) for row in body_of(assembly, "stretchers"))
    mortises = iter(body_of(assembly, "stretcher mortises"))
    for stretcher in assembly.stretchers:
        axes, shoulder, over = map(
            assembly.length, (stretcher.between_axes_mm, stretcher.shoulder_mm, stretcher.over_tenons_mm)
        )
        assert f"{axes} {shoulder} {over}" in lengths
        assert f"Ø {assembly.length(stretcher.diameter_mm)}" in lengths
        assert f"Ø {assembly.length(stretcher.tenon_diameter_mm)} ×" in lengths
        assert f"{assembly.length(stretcher.tenon_mm)}" in lengths
        for end in stretcher.data()["ends"]:
            row = next(mortises)
            assert row[:5] == [
                stretcher.name,
                end["in"],
                format_angle(end["bore_deg"]),
                format_angle(end["clock_deg"]),
                assembly.length(end["height_mm"]),
            ]
    assert next(mortises, None) is None


def test_a_mortise_is_measured_along_bare_wood_from_the_seat_or_from_a_shoulder():
    assembly = chair()
    rows = {(row[0], row[1]): row[5] for row in body_of(assembly, "stretcher mortises")}
    for stretcher in assembly.stretchers[:2]:
        for end in stretcher.ends:
            leg = next(leg for leg in assembly.legs if leg.name == end.host)
            underside = np.array([*to_floor(assembly, leg.underside_mm, -assembly.thickness_mm)])
            along = np.linalg.norm(np.array(end.axis_point_mm) - underside)
            assert rows[stretcher.name, end.host] == assembly.length(along)
    medial = assembly.stretchers[2]
    for side, end in zip(assembly.stretchers[:2], medial.ends, strict=True):
        # The first shoulder is where the side stretcher's axis leaves the front leg's cone.
        first, second = (np.array(one.axis_point_mm) for one in side.ends)
        way = (second - first) / np.linalg.norm(second - first)
        leg = next(leg for leg in assembly.legs if leg.name == side.ends[0].host)
        start = to_floor(assembly, leg.underside_mm, -assembly.thickness_mm)
        axis = np.array([*leg.foot_mm, 0.0]) - start
        length = np.linalg.norm(axis)

        def outside(t, start=start, axis=axis / length, length=length, leg=leg, first=first, way=way):
            s = (first + t * way - start) @ axis
            radius = leg.diameter_mm / 2 + (leg.foot_diameter_mm - leg.diameter_mm) / 2 * s / length
            return np.linalg.norm(first + t * way - start - s * axis) - radius

        shoulder = first + brentq(outside, 0.0, 60.0) * way
        along = np.linalg.norm(np.array(end.axis_point_mm) - shoulder)
        assert rows["medial", side.name] == assembly.length(along)


def test_how_clock_and_boring_angle_are_read_is_said_below_the_table():
    said = said_in(chair(), "clock")
    for words in ("clockwise", "down a leg toward its foot", "sightline", "90° is square", "Round a stretcher"):
        assert words in said
    assert "Round a stretcher" not in said_in(railed(), "clock")


@pytest.mark.parametrize("assembly", [chair(), railed()], ids=["chair", "railed"])
def test_the_notes_on_assembly_stand_there_in_full(assembly):
    hosts = [
        leg for leg in assembly.bored if any(leg.name in s.ends[k].host for s in assembly.stretchers for k in (0, 1))
    ]
    drive = max(bored_mm(leg) for leg in hosts)
    notes = assembly_note(assembly.stretchers, assembly.bars, drive, assembly.furniture.units)
    said = said_in(assembly, "assembly")
    assert notes
    for note in notes:
        assert note in said


@pytest.mark.parametrize("name", [*DEMOS, "chair", "railed"])
def test_how_it_stands_gives_the_load_at_every_edge_and_corner_as_a_guide(name):
    assembly = assembly_named(name)
    said = said_in(assembly, "how it stands")
    if len(assembly.legs) < 3:
        assert not said
        return
    assert GUIDE in said
    stability = standing(assembly)
    loads = body_of(assembly, "standing")[0]
    assert loads == ["none can" if load.load_n is None else f"{load.load_n:.0f} N" for load in stability.loads]
    heads = " ".join(" ".join(row) for row in rows_of(blocks(assembly, "standing")[0])[1:3]).split()
    assert heads.count("front") == heads.count("back") == heads.count("left") == heads.count("right") == 3
    if assembly.furniture.use == "table":
        assert "600 N" not in said
    else:
        case = stability.published
        assert f"{abs(case.margin_nm):.1f} N m" in said
        assert ("it stays down" in said) == case.stays_down
        assert ("it tips" in said) != case.stays_down


def test_the_loads_stand_below_their_own_places():
    assembly = chair()
    (piece,) = blocks(assembly, "standing")
    lettering = [(patch(text).bounds[2], text.text) for text in texts(piece.drawing)]
    for load in standing(assembly).loads:
        want = "none can" if load.load_n is None else f"{load.load_n:.0f} N"
        ends = {round(x, 3) for x, words in lettering if words == want}
        assert ends & {round(x, 3) for x, words in lettering if words == load.at.split()[-1]}


def test_a_piece_that_falls_says_so_and_gives_no_loads():
    leg = {"name": "a", "at": [30, 20], "mirror": True, "splay": 0, "rake": 0, "mortise": 25}
    assembly = stool([leg, {**leg, "name": "b", "at": [30, 80], "rake": 0}])
    assert standing(assembly).falls
    assert standing(assembly).falls in said_in(assembly, "how it stands")
    assert not blocks(assembly, "standing")


@pytest.mark.parametrize("name", [*DEMOS, "crowded mm"])
def test_every_caution_of_the_design_is_on_the_sheet_with_its_code(name):
    assembly = assembly_named(name)
    said = " ".join(text.text for piece in blocks(assembly, "warnings") for text in texts(piece.drawing))
    for caution in cautions(assembly):
        assert f"{caution.text} [{caution.code}]" in said
    assert bool(said) == bool(cautions(assembly))


def test_the_crowded_design_does_have_many_cautions():
    assert {"trip", "steep", "crossed", "thin-floor"} <= {c.code for c in cautions(crowded("mm"))}


@pytest.mark.parametrize("name", [*DEMOS, "chair", "railed"])
def test_the_order_of_work_is_numbered_through(name):
    assembly = assembly_named(name)
    found = [text.text for piece in blocks(assembly, "order of work") for text in texts(piece.drawing)]
    numbers = [int(words[:-1]) for words in found if re.fullmatch(r"\d+\.", words)]
    assert numbers == list(range(1, len(order_of_work(assembly)) + 1))
    said = " ".join(found)
    for step in order_of_work(assembly):
        assert step in re.sub(r" \d+\. ", " ", said)


def test_safety_comes_with_the_reserve_of_the_tools_manual_and_the_local_rules():
    (piece,) = blocks(demo("slipway-stool"), "cautions")
    said = " ".join(text.text for text in texts(piece.drawing))
    # Eye protection: 29 CFR 1910.133(a). No gloves or loose clothing at a drill press: OSHA 3157 (1999).
    for words in ("eye protection", "Clamp", "gloves", "loose clothing", "manual", "rules"):
        assert words in said


@pytest.mark.parametrize("name", DEMOS)
def test_the_head_gives_the_name_the_seat_and_the_scale_of_the_views(name):
    assembly = demo(name)
    (piece,) = blocks(assembly, "views")
    found = [text.text for text in texts(piece.drawing)]
    said = " ".join(found)
    assert found[0] == assembly.furniture.name
    _, divisor = views(assembly)
    assert ("full size" if divisor == 1 else f"1:{divisor}") in said
    assert f"bored from the {assembly.drilled}" in said
    seat = assembly.furniture.seat
    assert f"{assembly.length(seat.thickness)} thick" in said
    if seat.pitch:
        assert f"pitch {format_angle(abs(seat.pitch))}, back lower" in said


def test_a_seat_that_falls_to_the_front_says_so():
    (piece,) = blocks(stool(pitch=-5), "views")
    assert "pitch 5.0°, front lower" in " ".join(text.text for text in texts(piece.drawing))
