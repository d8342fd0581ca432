"""Whatever a stranger's file holds, reading it ends soon, in furniture or in a SpecError that a terminal can show."""

from __future__ import annotations

import time
import unicodedata

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from jigs.problems import SpecError
from jigs.spec import Furniture, parse_spec

LONGEST_SECONDS = 2.0

LINES = (
    'name = "Slipway stool"',
    'units = "mm"',
    'use = "bar"',
    "[seat]",
    'shape = "oval"',
    "width = 400",
    "depth = 300",
    "thickness = 45",
    "height = 450",
    "pitch = 2",
    'drill_from = "underside"',
    'grain = "across"',
    "[[legs]]",
    'name = "front"',
    "at = [125, 70]",
    "mirror = true",
    "splay = 12",
    "rake = 9",
    "mortise = { bit = 16, taper = 6, mouth = 22 }",
    "[[legs]]",
    'name = "back"',
    "at = [0, 250]",
    "rake = 9",
    'end = "back"',
    "mortise = 25",
)
KEYS = (
    "name",
    "units",
    "use",
    "seat",
    "shape",
    "width",
    "depth",
    "diameter",
    "points",
    "path",
    "straight",
    "back_width",
    "corner_radius",
    "thickness",
    "height",
    "grain",
    "legs",
    "at",
    "mirror",
    "splay",
    "rake",
    "end",
    "mortise",
    "foot_diameter",
    "bit",
    "legs.name",
    "seat.width",
    "a.b.c",
    "''",
    '"\\u202e"',
    "oval",
)
VALUES = (
    "nan",
    "-inf",
    "inf",
    "1e300",
    "-1e300",
    "1e-300",
    "0",
    "-0.0",
    "true",
    "0x" + "f" * 300,
    "1" * 5000,
    "1979-05-27",
    "07:32:00",
    "1979-05-27T07:32:00Z",
    '""',
    '"\\u202eabc"',
    '"\\u0000"',
    '"e\\u0301\\u0316"',
    '"💺"',
    '"שלום"',
    '"1 1/4 in"',
    '"1/0"',
    '"3,2"',
    '"' + "9" * 3000 + '"',
    "'" + "a\u0301" * 2000 + "'",
    "[]",
    "{}",
    "[[]]",
    "[1, 2]",
    "[nan, 1]",
    "[true, {}]",
    "[[0, 0], [300, 0], [0, 300]]",
    "[[1, 2], 3]",
    "[" * 8 + "]" * 8,
    "[" * 3000,
    "{ a = { b = [1] } }",
    "[{}, {}]",
    '["in", "in"]',
    '"round"',
    '"d"',
    '"shield"',
    '"polygon"',
    '"path"',
    '"in"',
    "1_000",
    "0.1",
    "'''\n'''",
    '"""',
    "\x00",
    "\ufeff",
    "{ bit = 1e9, taper = nan, mouth = {}, depth = [] }",
)


def read(data: bytes) -> Furniture | SpecError:
    started = time.perf_counter()
    try:
        result: Furniture | SpecError = parse_spec(data, "slipway.toml")
    except SpecError as error:
        result = error
    assert time.perf_counter() - started < LONGEST_SECONDS
    return result


def check(data: bytes) -> None:
    result = read(data)
    if isinstance(result, Furniture):
        assert result.seat.height >= 100
        return
    lines = str(result).split("\n")
    assert len(lines) == len(result.problems) <= 51
    for line in lines:
        assert line.startswith("slipway.toml: ")
        assert len(line) < 1500
        assert all(unicodedata.category(char) not in {"Cc", "Cf", "Cs", "Cn", "Zl", "Zp", "Mn"} for char in line)
        assert "pydantic" not in line
        assert "Input should" not in line
        assert "is not what belongs here" not in line


@settings(max_examples=100)
@given(st.binary(max_size=400))
def test_any_bytes(data: bytes) -> None:
    check(data)


@settings(max_examples=100)
@given(st.text(alphabet="abn=[]{}.,\"'\\#\n \t\r0123456789-_:eTZ\u202e\u0301😀", max_size=200))
def test_any_text_of_tomls_own_signs(text: str) -> None:
    check(text.encode())


assignment = st.builds(lambda key, value: f"{key} = {value}", st.sampled_from(KEYS), st.sampled_from(VALUES))
swapped_value = st.tuples(st.integers(0, len(LINES) - 1), st.sampled_from(VALUES))


@settings(max_examples=200)
@given(
    values=st.lists(swapped_value, max_size=3),
    added=st.lists(st.tuples(st.integers(0, len(LINES)), assignment), max_size=2),
    dropped=st.sets(st.integers(0, len(LINES) - 1), max_size=2),
)
def test_a_good_file_with_a_few_lines_wrong(
    values: list[tuple[int, str]], added: list[tuple[int, str]], dropped: set[int]
) -> None:
    lines = list(LINES)
    for index, value in values:
        if "=" in lines[index]:
            lines[index] = lines[index].split("=")[0] + "= " + value
    kept = ["" if index in dropped else line for index, line in enumerate(lines)]
    for index, line in sorted(added, reverse=True):
        kept.insert(index, line)
    check("\n".join(kept).encode())


@settings(max_examples=100)
@given(st.data())
def test_a_good_file_with_bytes_wrong(data: st.DataObject) -> None:
    spec = bytearray("\n".join(LINES).encode())
    for _ in range(data.draw(st.integers(1, 4))):
        spec[data.draw(st.integers(0, len(spec) - 1))] = data.draw(st.integers(0, 255))
    check(bytes(spec))


@settings(max_examples=100)
@given(
    st.sampled_from(KEYS), st.sampled_from(VALUES), st.sampled_from(["oval", "round", "d", "shield", "polygon", "path"])
)
def test_every_shape_with_one_odd_key(key: str, value: str, shape: str) -> None:
    text = "\n".join(LINES).replace('"oval"', f'"{shape}"')
    check(text.replace("pitch = 2", f"{key} = {value}").encode())


def test_the_file_that_is_spoilt_is_good_before() -> None:
    assert isinstance(read("\n".join(LINES).encode()), Furniture)


LARGE = {
    "digits of a fraction": "name = " + "1" * 200_000 + ".5",
    "hexadecimal digits": "name = 0x" + "f" * 250_000,
    "marks over one letter": 'name = "a' + "\u0301\u0316" * 60_000 + '"',
    "a dotted key": ".".join("a" * 120_000) + " = 1",
    "a spaced dotted key": " . ".join("a" * 60_000) + " = 1",
    "many lines under a deep table": "[" + ".".join("a" * 60_000) + "]\n" + "x=1\n" * 30_000,
    "legs": "[[legs]]\n" * 28_000,
    "keys of one leg": "[[legs]]\n" + "\n".join(f"k{n}=1" for n in range(25_000)),
    "legs that are numbers": "legs = [" + "1," * 120_000 + "]",
    "points": '[seat]\nshape = "polygon"\npoints = [' + "[1]," * 60_000 + "]",
    "escaped quotes": 'a = "' + '\\"' * 120_000,
    "escaped quotes in three": 'a = """' + '\\"' * 120_000,
    "single quotes": "'" * 250_000,
    "double quotes": '"' * 250_000,
    "double quotes a line": '"\n' * 120_000,
    "brackets": "[" * 250_000,
    "braces": "a = " + "{a=" * 80_000,
    "near misses": "\n".join(f"nmae{n:030d} = 1" for n in range(6_000)),
    "one key": "k" * 250_000 + " = 1",
    "path data": '[seat]\nshape = "path"\npath = "' + "M" * 200_000 + '"',
    "returns": "\r" * 250_000,
    "parts of a second": "a = 1979-05-27T00:00:00." + "1" * 250_000,
}


@pytest.mark.parametrize("text", LARGE.values(), ids=LARGE.keys())
def test_a_file_as_large_as_may_be_is_refused_in_time(text: str) -> None:
    data = text.encode()
    assert len(data) <= 256 * 1024
    assert isinstance(read(data), SpecError)
