"""The spec file: what a good one becomes, and what is said about each way of getting one wrong."""

from __future__ import annotations

import os
import unicodedata
from pathlib import Path

import pytest

from jigs.problems import Caution, Problem, SpecError, safe, shown
from jigs.spec import (
    DSeat,
    Furniture,
    OvalSeat,
    PathSeat,
    PolygonSeat,
    RectangleSeat,
    RoundSeat,
    ShieldSeat,
    leg_place,
    parse_spec,
    read_spec,
    unprintable,
)

STOOL = """\
name = "Slipway stool"
units = "mm"

[seat]
shape = "oval"
width = 400
depth = 300
thickness = 45
height = 450

[[legs]]
name = "front"
at = [125, 70]
mirror = true
splay = 12
rake = 9
mortise = 25
"""


def changed(*changes: tuple[str, str], extra: str = "") -> str:
    text = STOOL
    for old, new in changes:
        assert old in text
        text = text.replace(old, new, 1)
    return text + extra


def parsed(*changes: tuple[str, str], extra: str = "") -> Furniture:
    return parse_spec(changed(*changes, extra=extra).encode(), "slipway.toml")


def refused(text: str | bytes) -> list[str]:
    """The messages, one a line, without the name of the file that stands before each."""
    with pytest.raises(SpecError) as caught:
        parse_spec(text if isinstance(text, bytes) else text.encode(), "slipway.toml")
    lines = str(caught.value).split("\n")
    assert all(line.startswith("slipway.toml: ") for line in lines)
    return [line.removeprefix("slipway.toml: ") for line in lines]


def seat_of(lines: str) -> str:
    head, rest = STOOL.split('shape = "oval"\nwidth = 400\ndepth = 300\n')
    return head + lines + rest


def seat(lines: str) -> object:
    return parse_spec(seat_of(lines).encode(), "slipway.toml").seat


# What a good file becomes


def test_the_stool_is_read() -> None:
    stool = parsed()
    assert (stool.name, stool.units, stool.use) == ("Slipway stool", "mm", None)
    assert isinstance(stool.seat, OvalSeat)
    assert (stool.seat.width, stool.seat.depth, stool.seat.thickness, stool.seat.height) == (400, 300, 45, 450)
    assert (stool.seat.pitch, stool.seat.drill_from, stool.seat.grain) == (0, "underside", None)
    (leg,) = stool.legs
    assert (leg.name, leg.at, leg.mirror, leg.splay, leg.rake, leg.end) == ("front", (125, 70), True, 12, 9, None)
    assert (leg.mortise.bit, leg.mortise.taper, leg.mortise.mouth, leg.mortise.depth) == (25, 0, None, None)


def test_bare_numbers_are_in_the_files_units_and_text_may_carry_its_own() -> None:
    stool = parsed(
        ('"mm"', '"in"'),
        ("400", "16"),
        ("300", '"305 mm"'),
        ("45\n", '"1 3/4"\n'),
        ("450", '"1 ft 5 in"'),
        ("[125, 70]", '["-5 1/4 in", 2.5]'),
        ("25\n", '"1 in"\n'),
        ("splay = 12", 'splay = "12° 30\'"'),
    )
    assert isinstance(stool.seat, OvalSeat)
    assert (stool.seat.width, stool.seat.depth, stool.seat.thickness) == (406.4, 305, 44.45)
    assert stool.seat.height == 431.8
    assert stool.legs[0].at == (-133.35, 63.5)
    assert stool.legs[0].mortise.bit == 25.4
    assert stool.legs[0].splay == 12.5
    assert stool.unit_mm == 25.4


def test_a_leg_fills_its_mortise_and_its_foot_is_as_thick_unless_told() -> None:
    def diameters(mortise: str) -> tuple[float, float]:
        leg = parsed(("mortise = 25", mortise)).legs[0]
        return leg.diameter, leg.foot_diameter

    assert diameters("mortise = 25") == (25, 25)
    assert diameters("mortise = { bit = 16, taper = 6, mouth = 22 }") == (22, 22)
    assert diameters("mortise = 25\ndiameter = 32") == (32, 32)
    assert diameters("mortise = 25\ndiameter = 32\nfoot_diameter = 20") == (32, 20)


def test_a_mortise_may_be_a_table() -> None:
    mortise = (
        parsed(("mortise = 25", 'mortise = { bit = 16, taper = "6°", mouth = 22, depth = "3 cm" }')).legs[0].mortise
    )
    assert (mortise.bit, mortise.taper, mortise.mouth, mortise.depth) == (16, 6, 22, 30)


def test_twins_are_named_left_first_whichever_side_is_written() -> None:
    assert parsed().legs[0].names == ("front left", "front right")
    assert parsed(("[125, 70]", "[-125, 70]")).legs[0].names == ("front left", "front right")
    assert parsed(("mirror = true\n", "")).legs[0].names == ("front",)


def test_a_leg_on_the_centre_line_has_no_splay() -> None:
    for splay in ("", "splay = 0"):
        leg = parsed(("[125, 70]\nmirror = true\nsplay = 12", f"[0, 70]\n{splay}")).legs[0]
        assert leg.splay == 0


@pytest.mark.parametrize(
    "size",
    ["diameter = 340", "width = 340", "depth = 340", "width = 340\ndepth = 340", 'diameter = 340\nwidth = "34 cm"'],
)
def test_a_round_seat_may_be_given_by_its_width(size: str) -> None:
    stool = seat(f'shape = "round"\n{size}\n')
    assert isinstance(stool, RoundSeat)
    assert stool.diameter == 340


def test_every_shape_has_its_sizes() -> None:
    size = "width = 400\ndepth = 300\n"
    rectangle = seat(f'shape = "rectangle"\n{size}corner_radius = 150\n')
    assert isinstance(rectangle, RectangleSeat)
    assert rectangle.corner_radius == 150
    d = seat(f'shape = "d"\n{size}straight = 120\nflat = "back"\n')
    assert isinstance(d, DSeat)
    assert (d.straight, d.flat, d.corner_radius) == (120, "back", 0)
    assert isinstance(seat(f'shape = "d"\n{size}'), DSeat)
    shield = seat(f'shape = "shield"\n{size}back_width = 330\nfront_bow = 20\n')
    assert isinstance(shield, ShieldSeat)
    assert (shield.back_width, shield.front_bow, shield.corner_radius) == (330, 20, 0)
    polygon = seat('shape = "polygon"\npoints = [[-150, 0], ["15 cm", 0], [0, 300]]\n')
    assert isinstance(polygon, PolygonSeat)
    assert polygon.points == ((-150, 0), (150, 0), (0, 300))


def test_a_path_keeps_its_text_and_knows_its_unit() -> None:
    path = 'shape = "path"\npath = "M -6 0 L 6 0 L 0 12 Z"\n'
    in_mm = seat(path)
    assert isinstance(in_mm, PathSeat)
    assert (in_mm.path, in_mm.unit_mm) == ("M -6 0 L 6 0 L 0 12 Z", 1)
    text = seat_of(path).replace('"mm"', '"in"').replace("45\n", "2\n").replace("450", "17").replace("125, 70", "1, 3")
    in_inches = parse_spec(text.replace("mortise = 25", "mortise = 1").encode(), "slipway.toml").seat
    assert isinstance(in_inches, PathSeat)
    assert in_inches.unit_mm == 25.4


@pytest.mark.parametrize(
    ("written", "grain"), [('"across"', "across"), ('"fore-and-aft"', "fore-and-aft"), ('"30°"', 30)]
)
def test_the_grain_is_a_word_or_an_angle(written: str, grain: object) -> None:
    assert parsed(("height = 450", f"height = 450\ngrain = {written}")).seat.grain == grain


def test_names_are_composed_and_their_spaces_made_plain() -> None:
    assert parsed(("Slipway stool", "Cafe\\u0301\\u00a0 bar ")).name == "Caf\u00e9 bar"


@pytest.mark.parametrize(
    "name", ["Hocker № 3, „Süd“ (½)", "Скамья", "Σκαμνί", "Աթոռակ", "სკამი", "A–B × 2 → 3", "x" * 60]
)
def test_names_of_the_scripts_that_are_printed_are_kept(name: str) -> None:
    assert parsed(("Slipway stool", name)).name == name


def test_a_byte_order_mark_and_other_line_ends_are_borne() -> None:
    assert parse_spec(b"\xef\xbb\xbf" + STOOL.replace("\n", "\r\n").encode(), "slipway.toml") == parsed()


def test_what_is_read_cannot_be_changed() -> None:
    with pytest.raises(ValueError, match="frozen"):
        parsed().seat.height = 1


# What is said about a bad value

SHAPES = '"round", "oval", "rectangle", "d", "shield", "polygon" or "path"'
LENGTH = 'write 400, "400 mm" or "15 3/4 in"'
LEG_KEYS = (
    "name, at, mirror, resultant, sightline, foot_across, foot_along, inside_side, inside_end, axis, equal_from, "
    "picture, measured, aim_at, angles_from, splay, rake, end, face_fall, face_toward, mortise, diameter, foot_diameter"
)

ONE_CHANGE = [
    ("splay = 12", "splay = 95", "legs[0].splay: 95 is not between -45 and 45 degrees"),
    ("splay = 12", 'splay = "95°"', 'legs[0].splay: "95°" is not between -45 and 45 degrees'),
    ("rake = 9", "rake = nan", 'legs[0].rake: nan is not an angle; write 12.5, "12.5°" or "12° 30\'"'),
    ("splay = 12", "spaly = 12", "legs[0].spaly: unknown key; did you mean 'splay'?"),
    ("splay = 12", "splay = 12\nxyz = 1", f"legs[0].xyz: unknown key; the keys here are {LEG_KEYS}"),
    ("splay = 12\n", "", "legs[0].splay: missing; the lean seen from the front, such as splay = 12"),
    ("rake = 9\n", "", "legs[0].rake: missing; the lean seen from the side, such as rake = 9"),
    ("width = 400\n", "", 'seat.width: missing; from side to side, such as width = "400 mm"'),
    ("mortise = 25", "", 'legs[0].mortise: missing; the bit\'s diameter, such as mortise = "25 mm"'),
    ("mortise = 25", "mortise = {}", 'legs[0].mortise.bit: missing; the bit\'s diameter, such as bit = "16 mm"'),
    ("mortise = 25", "mortise = true", f"legs[0].mortise: true is not a length; {LENGTH}"),
    ("mortise = 25", "mortise = 101", "legs[0].mortise: 101 is not between 3 and 100 mm"),
    (
        "mortise = 25",
        "mortise = { bit = 16, taper = 30 }",
        "legs[0].mortise.taper: 30 is not between 0 and 20 degrees",
    ),
    (
        "mortise = 25",
        "mortise = { bit = 16, mouth = 20 }",
        "legs[0].mortise.mouth: 20 is given without a taper; give the taper, or leave the mouth out",
    ),
    (
        "mortise = 25",
        "mortise = { bit = 16, taper = 6, mouth = 12 }",
        "legs[0].mortise.mouth: 12 is less than the bit's diameter, 16 mm",
    ),
    ("mortise = 25", "mortise = { bit = 16, mouht = 20 }", "legs[0].mortise.mouht: unknown key; did you mean 'mouth'?"),
    ("width = 400", "width = 7000", "seat.width: 7000 is not between 50 and 6000 mm"),
    ("width = 400", "width = 1e300", f"seat.width: 1e+300 is far too large for a length; {LENGTH}"),
    (
        "width = 400",
        'width = "400,5"',
        'seat.width: "400,5" has a comma in the number; write 400.5, with a point for decimals',
    ),
    ("width = 400", "width = 1979-05-27", f"seat.width: 1979-05-27 is not a length; {LENGTH}"),
    ("width = 400", "wdith = 400", "seat.wdith: unknown key; did you mean 'width'?"),
    ("width = 400", "width = 400\nat = 3", "seat.at: unknown key; 'at' belongs in [[legs]]"),
    (
        "width = 400",
        "width = 400\ncorner_radius = 3",
        "seat.corner_radius: unknown key; the keys here are "
        "shape, thickness, height, pitch, drill_from, grain, width, depth",
    ),
    ('units = "mm"', 'units = "mm"\nheight = 450', "height: unknown key; 'height' belongs in [seat]"),
    (
        "rake = 9",
        "rake = 9\ntaper = 6",
        "legs[0].taper: unknown key; 'taper' belongs in the mortise, as in mortise = { bit = 16, taper = 6 }",
    ),
    ('shape = "oval"\n', "", 'seat.shape: missing; the outline of the seat, such as shape = "oval"'),
    ('"oval"', '"ovel"', f'seat.shape: "ovel" is not {SHAPES}; did you mean "oval"?'),
    ('"oval"', "[1]", f"seat.shape: [1] is not {SHAPES}"),
    ('units = "mm"', 'units = "cm"', 'units: "cm" is not "mm" or "in"'),
    ("height = 450", 'height = 450\ndrill_from = "bottom"', 'seat.drill_from: "bottom" is not "underside" or "top"'),
    (
        "height = 450",
        'height = 450\ngrain = "long"',
        'seat.grain: "long" is not "fore-and-aft" or "across" or an angle from the fore-and-aft line',
    ),
    ("mirror = true", "mirror = 1", "legs[0].mirror: 1 is not true or false"),
    ("mirror = true", 'end = "bakc"', 'legs[0].end: "bakc" is not "front" or "back"; did you mean "back"?'),
    ("[125, 70]", "[125]", "legs[0].at: [125] is not a pair of lengths; write [x, y], such as [125, 70]"),
    ("[125, 70]", '[125, "x"]', f'legs[0].at[1]: "x" is not a length; {LENGTH}'),
    ("[125, 70]", "[125, 7000]", "legs[0].at[1]: 7000 is not between -6000 and 6000 mm"),
    (
        "[125, 70]\nmirror = true\nsplay = 12",
        "[0, 70]\nmirror = true",
        "legs[0].mirror: true is for a leg to one side, and this one is on the centre line; leave mirror out",
    ),
    (
        "[125, 70]\nmirror = true",
        "[0, 70]",
        "legs[0].splay: 12 is given for a leg on the centre line, which has no side to lean to; "
        "leave splay out, or move the leg to one side",
    ),
    ('"Slipway stool"', "1", "name: 1 is not text; put the name in quotes"),
    ('"Slipway stool"', '""', 'name: "" is not a name of 1 to 60 characters'),
    ('"Slipway stool"', '" \\u00a0"', 'name: " \u00a0" is not a name of 1 to 60 characters'),
    ("[[legs]]", "[legs]", "legs: a table is not a list of tables; write [[legs]], in double brackets, above each leg"),
]


@pytest.mark.parametrize(("old", "new", "message"), ONE_CHANGE)
def test_one_slip_gives_one_message(old: str, new: str, message: str) -> None:
    assert refused(changed((old, new))) == [message]


SEATS = [
    (
        'shape = "round"\nwidth = 400\ndepth = 300',
        "seat.depth: 300 differs from width = 400 mm, and a round seat has one size; "
        'give the diameter alone, or set shape = "oval"',
    ),
    (
        'shape = "round"\nwidth = 400\ndiameter = 300',
        "seat.diameter: 300 differs from width = 400 mm, and a round seat has one size; "
        'give the diameter alone, or set shape = "oval"',
    ),
    ('shape = "round"', 'seat.diameter: missing; across the round seat, such as diameter = "340 mm"'),
    ('shape = "round"\nwidth = 4', "seat.width: 4 is not between 50 and 6000 mm"),
    (
        'shape = "rectangle"\nwidth = 400\ndepth = 300\ncorner_radius = 151',
        "seat.corner_radius: 151 is more than half of the seat's shorter side, 150 mm",
    ),
    (
        'shape = "d"\nwidth = 400\ndepth = 300\nstraight = 300',
        "seat.straight: 300 is not less than the seat's depth, 300 mm",
    ),
    (
        'shape = "shield"\nwidth = 400\ndepth = 300\nback_width = 300\nfront_bow = "31 cm"',
        'seat.front_bow: "31 cm" is not less than the seat\'s depth, 300 mm',
    ),
    (
        'shape = "polygon"\npoints = [[0, 0], [1, 1]]',
        "seat.points: 2 points are not the 3 to 500 that a polygon may have",
    ),
    (
        'shape = "polygon"\npoints = [[0, 0], [100, 1], [1]]',
        "seat.points[2]: [1] is not a pair of lengths; write [x, y], such as [125, 70]",
    ),
    ('shape = "polygon"\npoints = 5', "seat.points: 5 is not a list"),
    ('shape = "path"\npath = 5', "seat.path: 5 is not text"),
    ('shape = "path"\npath = " "', 'seat.path: " " is not path data of 1 to 20000 characters'),
    (
        'shape = "path"\npath = "M 0 0"\noval = 3',
        "seat.oval: unknown key; the keys here are shape, thickness, height, pitch, drill_from, grain, path",
    ),
]


@pytest.mark.parametrize(("lines", "message"), SEATS)
def test_a_seat_that_contradicts_itself_is_refused(lines: str, message: str) -> None:
    assert refused(seat_of(lines + "\n")) == [message]


def test_all_problems_come_together_in_the_files_order() -> None:
    text = changed(
        ("width = 400", "width = 4"),
        ("height = 450", "hieght = 450"),
        ("[125, 70]", "[125, 70, 4]"),
        ("mortise = 25", "mortise = { bit = 1, taper = 6 }"),
        extra='[[legs]]\nname = "front left"\nat = [-100, 200]\nsplay = 3\nrake = 200\nmortise = 25\n',
    )
    assert refused(text) == [
        "seat.width: 4 is not between 50 and 6000 mm",
        "seat.hieght: unknown key; did you mean 'height'?",
        "legs[0].at: [125, 70, 4] is not a pair of lengths; write [x, y], such as [125, 70]",
        "legs[0].mortise.bit: 1 is not between 3 and 100 mm",
        'legs[1].name: "front left" is already the name of a twin of legs[0]; give each leg a name of its own',
        "legs[1].rake: 200 is not between -45 and 45 degrees",
    ]


def test_an_empty_file_is_told_all_that_it_lacks() -> None:
    assert refused("# nothing yet\n") == [
        'name: missing; what the sheets call the piece, such as name = "Slipway stool"',
        'seat: missing; give a [seat] table with shape = "oval" and its sizes',
        "legs: missing; give a [[legs]] table for each leg or pair of legs",
    ]


def test_tables_that_are_no_tables_are_told_so() -> None:
    assert refused('name = "a"\nseat = 5\nlegs = [1, "a"]\n') == [
        "seat: 5 is not a table",
        "legs[0]: 1 is not a table",
        'legs[1]: "a" is not a table',
    ]


def test_bounds_are_shown_in_the_files_own_units_and_would_do_as_shown() -> None:
    text = changed(
        ('"mm"', '"in"'),
        ("width = 400", "width = 3000"),
        ("depth = 300", 'depth = "9 m"'),
        ("45\n", "2\n"),
        ("450", "17"),
        ("25\n", "1\n"),
        ("[125, 70]", "[5, 3]"),
    )
    assert refused(text) == [
        "seat.width: 3000 in is not between 1 31/32 and 236 7/32 in",
        'seat.depth: "9 m" is not between 1 31/32 and 236 7/32 in',
    ]
    least = text.replace("3000", '"1 31/32"').replace('"9 m"', '"236 7/32"')
    assert parse_spec(least.encode(), "slipway.toml").units == "in"


def test_unknown_units_do_not_make_every_length_wrong() -> None:
    text = changed(('"mm"', '"cm"'), ("width = 400", "width = 40"), ("splay = 12", "splay = 95"))
    assert refused(text) == [
        'units: "cm" is not "mm" or "in"',
        "legs[0].splay: 95 is not between -45 and 45 degrees",
    ]


def leg(name: str, x: int) -> str:
    return f'[[legs]]\nname = "{name}"\nat = [{x}, 200]\nsplay = 3\nrake = 2\nmortise = 25\n'


def test_legs_must_have_names_of_their_own_after_mirroring_and_composing() -> None:
    assert refused(changed(extra=leg("Caf\u00e9", 50) + leg("Cafe\u0301", 70) + leg("front  right", 90))) == [
        'legs[2].name: "Caf\u00e9" is already the name of legs[1]; give each leg a name of its own',
        'legs[3].name: "front right" is already the name of a twin of legs[0]; give each leg a name of its own',
    ]


def test_a_file_holds_no_more_than_64_legs() -> None:
    legs = "".join(leg(f"leg {n}", n + 1) for n in range(63))
    assert len(parsed(extra=legs).legs) == 64
    assert refused(changed(extra=legs + leg("last", 90))) == [
        "legs: 65 tables are not the 1 to 64 that a file may hold"
    ]
    assert refused('name = "a"\nlegs = []\n')[0] == "legs: 0 tables are not the 1 to 64 that a file may hold"


def test_a_flood_of_problems_is_cut_and_counted() -> None:
    lines = refused(changed(extra="".join(f"zz{n} = 1\n" for n in range(60))))
    assert len(lines) == 51
    assert lines[49] == f"legs[0].zz49: unknown key; the keys here are {LEG_KEYS}"
    assert lines[50] == "and 10 more"


def test_the_place_of_a_leg_is_as_in_the_file() -> None:
    assert leg_place(3) == "legs[3]"


# Names that would garble the paper


@pytest.mark.parametrize(
    ("escape", "called"),
    [
        ("\\u202e", "U+202E RIGHT-TO-LEFT OVERRIDE"),
        ("\\u200d", "U+200D ZERO WIDTH JOINER"),
        ("\\u2028", "U+2028 LINE SEPARATOR"),
        ("\\u00ad", "U+00AD SOFT HYPHEN"),
        ("\\u0007", "U+0007 a control character"),
        ("\\t", "U+0009 a control character"),
        ("\\ue000", "U+E000 a private character"),
        ("\\u0378", "U+0378 an unassigned character"),
        ("\\u05d0", "U+05D0 HEBREW LETTER ALEF"),
        ("\\u0628", "U+0628 ARABIC LETTER BEH"),
        ("q\\u0301", "U+0301 COMBINING ACUTE ACCENT"),
        ("\\u6905", "U+6905 CJK UNIFIED IDEOGRAPH-6905"),
        ("\\U0001f4ba", "U+1F4BA SEAT"),
        ("\\u2264", "U+2264 LESS-THAN OR EQUAL TO"),
    ],
)
def test_a_name_that_cannot_be_printed_is_refused_by_the_characters_name(escape: str, called: str) -> None:
    (line,) = refused(changed(("Slipway", f"a{escape}b")))
    assert line.startswith('name: "a')
    assert f" holds {called}, which cannot be printed; use Latin, Greek, Cyrillic, Armenian or Georgian" in line
    assert all(unicodedata.category(char)[0] not in "CM" for char in line)


def test_unprintable_characters_are_listed_once_and_the_lettering_is_asked_about_the_rest() -> None:
    assert unprintable("Slipway – ½") == []
    assert unprintable("a\u202eb\u202e\x00") == [
        ("\u202e", "U+202E RIGHT-TO-LEFT OVERRIDE"),
        ("\x00", "U+0000 a control character"),
    ]
    assert unprintable("\ud800") == [("\ud800", "U+D800 a surrogate")]
    assert unprintable("a№", covers=str.isascii) == [("№", "U+2116 NUMERO SIGN")]
    assert unprintable("a\u202e", covers=lambda char: True) == [("\u202e", "U+202E RIGHT-TO-LEFT OVERRIDE")]


def test_every_character_there_is_can_be_asked_about() -> None:
    every = "".join(map(chr, range(0x110000)))
    refused_ones = dict(unprintable(every))
    assert all(called.startswith(f"U+{ord(char):04X} ") for char, called in refused_ones.items())
    kept = [char for char in every if char not in refused_ones]
    assert all(unicodedata.category(char)[0] in "LNPSZ" for char in kept)
    assert not {unicodedata.bidirectional(char) for char in kept} & {"R", "AL", "AN", "NSM", "LRO", "RLO", "BN"}


# Text that is no TOML

SYNTAX = [
    (
        "x = 1 1/4 in",
        "line 1, column 7: the line goes on after its value; text, fractions and units go in quotes, "
        'such as "1 1/4 in"',
    ),
    ("\nx = oak\n", 'line 2, column 5: there is no TOML value here; text goes in quotes, such as "1 1/4 in"'),
    ('x = "oak\n', "line 1, column 9: a text is not closed on its line"),
    ('x = "oak', "end of the file: a text is not closed"),
    ("x = 'oak\n", "end of the file: a text is not closed"),
    ("x = 'o\nak'\n", "line 1, column 7: TOML does not allow this character here"),
    ("x = [1\ny = 2", "line 2, column 1: a list is not closed, or lacks a comma"),
    ("x = { a = 1\n}", "line 1, column 12: a table in braces is not closed on its line, or lacks a comma"),
    ("x = 1\nx = 2\n", "line 2, column 6: this key or table is given twice"),
    (
        "[seat]\n[seat]\n",
        "line 2, column 6: this table is given twice; write [[legs]], in double brackets, above each leg",
    ),
    ("[seat\n", "line 1, column 6: the name of the table is not closed with its brackets"),
    ("seat\n", "line 1, column 5: a key is not followed by ="),
    ("= 3\n", "line 1, column 1: a line starts with a key, a [table] or a #"),
    (
        'x = "C:\\wood"\n',
        "line 1, column 10: a backslash in double quotes starts an escape; write two, or use single quotes",
    ),
    ('x = "\\ud800"\n', "line 1, column 12: TOML cannot be read here: Escaped character is not a Unicode scalar value"),
    ("x = 1979-02-30\n", "line 1, column 5: TOML cannot be read here: Invalid date or datetime"),
    ("x = " + "1" * 10_000, "a whole number has thousands of digits"),
    ("\nx = " + "[" * 5000, "line 2: tables and lists are nested too deep; a spec needs three levels"),
    ("x = " + "{a=" * 5000, "line 1: tables and lists are nested too deep; a spec needs three levels"),
    (".".join("a" * 5000) + " = 1", "line 1: tables and lists are nested too deep; a spec needs three levels"),
    (" . ".join(["'a'"] * 5000) + " = 1", "line 1: tables and lists are nested too deep; a spec needs three levels"),
]


@pytest.mark.parametrize(("text", "message"), SYNTAX)
def test_text_that_is_no_toml_is_placed_by_line_and_column(text: str, message: str) -> None:
    assert refused(text) == [message]


@pytest.mark.parametrize(
    "text",
    [
        "# [[[[[[[[[[[[[[ a.b.c.d.e.f.g.h.i.j.k.l.m.n",
        "x = '[[[[[[[[[[[[[[['",
        'x = "\\"[[[[[[[[[[[[[["',
        'x = """\n[[[[[[[[[[[[[["" [\\""""',
        "x = '''\n[[[[[[[[[[[[' '' [['''",
    ],
)
def test_brackets_and_dots_in_text_and_comments_are_not_nesting(text: str) -> None:
    assert any("missing" in line for line in refused(text))
    assert not any("nested" in line for line in refused(text))


def test_a_file_that_is_not_utf_8_is_placed_by_line() -> None:
    assert refused(b"name = 'a'\nx = '\xff'") == ["line 2: the file is not UTF-8 text; save it as UTF-8"]


# Files that are no files


def refusal_of(path: Path) -> str:
    with pytest.raises(SpecError) as caught:
        read_spec(path)
    return str(caught.value)


def test_a_file_is_read_from_disk(tmp_path: Path) -> None:
    path = tmp_path / "slipway.toml"
    path.write_text(STOOL, encoding="utf-8")
    assert read_spec(path) == parsed()


def test_messages_start_with_the_file_as_it_was_named(tmp_path: Path) -> None:
    path = tmp_path / "slipway.toml"
    path.write_text("x = 1\n", encoding="utf-8")
    assert refusal_of(path).startswith(f"{path}: x: unknown key")


def test_what_is_no_file_is_refused(tmp_path: Path) -> None:
    assert refusal_of(tmp_path / "no.toml") == f"{tmp_path}/no.toml: the file does not exist"
    assert refusal_of(tmp_path) == f"{tmp_path}: the file is a directory"
    assert refusal_of(Path("a\0b")) == "a\\u0000b: the file is not the name of a file"
    assert "cannot be read: " in refusal_of(Path("x" * 5000))


@pytest.mark.skipif(not hasattr(os, "mkfifo"), reason="no named pipes here")
def test_a_pipe_or_a_device_is_refused_without_waiting(tmp_path: Path) -> None:
    pipe = tmp_path / "pipe"
    os.mkfifo(pipe)
    assert refusal_of(pipe).endswith("pipe: the file is not a regular file")
    assert refusal_of(Path("/dev/zero")) == "/dev/zero: the file is not a regular file"


def test_a_file_larger_than_any_spec_is_refused(tmp_path: Path) -> None:
    path = tmp_path / "large.toml"
    path.write_bytes(b"#" * (256 * 1024))
    assert "missing" in refusal_of(path)
    path.write_bytes(b"#" * (256 * 1024 + 1))
    assert refusal_of(path).endswith("large.toml: the file is larger than 256 KiB")


# How a problem is said


def test_a_problem_is_one_line_of_place_value_rule_and_cure() -> None:
    assert Problem("seat.width", "4", "is not enough").text() == "seat.width: 4 is not enough"
    assert Problem("", "the file", "is a directory").text() == "the file is a directory"
    assert Problem("legs[0].spaly", "", "unknown key", "did you mean 'splay'?").text() == (
        "legs[0].spaly: unknown key; did you mean 'splay'?"
    )


def test_an_error_gives_one_line_a_problem() -> None:
    error = SpecError("a\n\u202eb.toml", (Problem("x", "1", "is bad"), Problem("y", "2\n", "is\x1b[2J worse")))
    assert str(error) == "a\\u000a\\u202eb.toml: x: 1 is bad\na\\u000a\\u202eb.toml: y: 2\\u000a is\\u001b[2J worse"


def test_shown_values_are_short_and_plain() -> None:
    assert shown("x" * 500) == '"' + "x" * 57 + '…"'
    assert shown("\x1b[31m\u05d0\U0001f4ba") == '"\\u001b[31m\\u05d0\U0001f4ba"'
    assert shown(2**500) == "a whole number of about 151 digits"
    assert shown([1, [2, [3]], True, "a", 5]) == '[1, [2, […]], true, "a", …]'
    assert len(shown(["x" * 500] * 500)) <= 60
    assert shown({"a": 1}) == "a table"


def test_cut_text_keeps_its_escapes_whole() -> None:
    for longest in range(1, 30):
        cut = safe("ab\u202e" * 20, longest)
        assert len(cut) <= longest
        assert cut.endswith("…")
        assert ("ab\\u202e" * 20).startswith(cut[:-1])
        assert cut[:-1].count("\\") == cut[:-1].count("202e")


def test_a_caution_is_data() -> None:
    assert Caution("trip", "legs[0]", "the foot stands out") == Caution("trip", "legs[0]", "the foot stands out")
