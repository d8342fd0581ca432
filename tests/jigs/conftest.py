"""Assemblies for the tests: the demo specs, and stools written out as a spec file with whatever a test changes."""

from __future__ import annotations

import json
from collections.abc import Mapping, Sequence
from functools import cache
from pathlib import Path
from typing import Any

from jigs.assembly import Assembly, assemble
from jigs.spec import parse_spec, read_spec
from layout.curves import Curve, flatten
from layout.drawing import Drawing, Fill, Role, Stroke, Text
from layout.operations import text_corners

ROOT = Path(__file__).resolve().parents[2]
DEMOS = tuple(sorted(path.stem for path in (ROOT / "demo_specs").glob("*.toml")))
FACES = ("top", "underside")

SEAT: dict[str, Any] = {"shape": "rectangle", "width": 400, "depth": 300, "thickness": 45, "height": 450}
LEG: dict[str, Any] = {"name": "front", "at": [125, 70], "mirror": True, "splay": 6, "rake": 5, "mortise": 25}
# A stool with nothing unwise about it: feet inside the seat, wood enough everywhere.
BLAMELESS = (LEG, {**LEG, "name": "back", "at": [125, 230]})


@cache
def demo(name: str) -> Assembly:
    """One of the demo specs, worked out."""
    path = ROOT / "demo_specs" / f"{name}.toml"
    return assemble(read_spec(path), path.name)


def spec_text(legs: Sequence[Mapping[str, Any]] = BLAMELESS, head: Mapping[str, Any] | None = None, **seat: Any) -> str:
    """A spec file: SEAT with some keys changed, and the legs. A key set to None is left out."""
    seat_table = {**SEAT, **seat}
    top = {"name": "Bollard stool", **(head or {})}
    tables = [("", top), ("[seat]", seat_table), *(("[[legs]]", leg) for leg in legs)]
    return "\n".join(line for title, table in tables for line in (title, *_lines(table)))


def _lines(table: Mapping[str, Any]) -> list[str]:
    return [f"{key} = {_value(value)}" for key, value in table.items() if value is not None]


def _value(value: Any) -> str:
    if isinstance(value, Mapping):
        return "{ " + ", ".join(_lines(value)) + " }"
    if isinstance(value, list | tuple):
        return "[" + ", ".join(map(_value, value)) + "]"
    return json.dumps(value, ensure_ascii=False)


def stool(
    legs: Sequence[Mapping[str, Any]] = BLAMELESS, head: Mapping[str, Any] | None = None, **seat: Any
) -> Assembly:
    """The stool of `spec_text`, worked out."""
    return assemble(parse_spec(spec_text(legs, head, **seat).encode(), "stool.toml"), "stool.toml")


def texts(drawing: Drawing) -> list[Text]:
    """The lettering of a drawing."""
    return [item for item in drawing.items if isinstance(item, Text)]


def strokes(drawing: Drawing, role: Role) -> list[Stroke]:
    """The lines of one role."""
    return [item for item in drawing.items if isinstance(item, Stroke) and item.role is role]


def fills(drawing: Drawing) -> list[Fill]:
    """The solid shapes."""
    return [item for item in drawing.items if isinstance(item, Fill)]


def polygon(curve: Curve, tolerance_mm: float = 0.01) -> Any:
    """A closed curve as a polygon of shapely."""
    from shapely import Polygon

    return Polygon(flatten(curve, tolerance_mm))


def patch(text: Text) -> Any:
    """The patch of paper that a line of lettering takes."""
    from shapely import Polygon

    return Polygon(text_corners(text))


def clashes(drawing: Drawing, least_mm2: float = 1e-6) -> list[str]:
    """Lettering that lies over other lettering or over a line to be cut, said in words with its place."""
    from shapely import LineString

    lettering = texts(drawing)
    patches = [patch(text) for text in lettering]
    cuts = [LineString(flatten(stroke.curve, 0.01)) for stroke in strokes(drawing, Role.CUT)]
    found = [
        f"{lettering[i].text!r} at {lettering[i].at} over {lettering[j].text!r} at {lettering[j].at}"
        for i in range(len(patches))
        for j in range(i)
        if patches[i].intersection(patches[j]).area > least_mm2
    ]
    cut = [
        text.text for text, area in zip(lettering, patches, strict=True) if any(line.intersects(area) for line in cuts)
    ]
    return found + [f"{words!r} is cut through" for words in cut]
