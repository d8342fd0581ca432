"""Spec files with any tables, and the frames by scipy: what the tests of whole chairs share."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

import numpy as np
import pytest
from scipy.spatial.transform import Rotation

from jigs.assembly import Assembly, assemble
from jigs.problems import SpecError
from jigs.spec import parse_spec
from tests.jigs.conftest import _lines, spec_text

Tables = Sequence[Mapping[str, Any]]


def furnished_text(legs: Tables, head: Mapping[str, Any] | None = None, tables: Any = None, **seat: Any) -> str:
    """A spec file: `spec_text`, and further tables such as {"posts": [{...}]}; a mapping is one plain table."""
    lines = [spec_text(legs, head, **seat)]
    for name, parts in (tables or {}).items():
        single = isinstance(parts, Mapping)
        for part in [parts] if single else parts:
            lines += [f"[{name}]" if single else f"[[{name}]]", *_lines(part)]
    return "\n".join(lines)


def furnished(legs: Tables, head: Mapping[str, Any] | None = None, tables: Any = None, **seat: Any) -> Assembly:
    """The furniture of `furnished_text`, worked out."""
    return assemble(parse_spec(furnished_text(legs, head, tables, **seat).encode(), "chair.toml"), "chair.toml")


def refusals(legs: Tables, head: Mapping[str, Any] | None = None, tables: Any = None, **seat: Any) -> list[str]:
    """What is said of furniture that cannot be, a line each, without the file's name."""
    with pytest.raises(SpecError) as caught:
        furnished(legs, head, tables, **seat)
    return [line.removeprefix("chair.toml: ") for line in str(caught.value).split("\n")]


def tilt(assembly: Assembly) -> Rotation:
    """Turns directions of the seat frame into the floor frame: about x by minus the pitch, so that the back drops."""
    return Rotation.from_euler("x", -assembly.furniture.seat.pitch, degrees=True)


def to_floor(assembly: Assembly, plan, z: float = 0.0) -> np.ndarray:
    """A point of the seat frame in the floor frame."""
    return tilt(assembly).apply([*plan, z]) + np.array([0.0, 0.0, assembly.furniture.seat.height])


def face_z(assembly: Assembly, face: str) -> float:
    """The height of a face in the seat frame."""
    return 0.0 if face == "top" else -assembly.furniture.seat.thickness


def four_angles(direction, side: int, end: int) -> tuple[float, float, float, float]:
    """Splay, rake, resultant and sightline in degrees of a direction out of the seat, from the frame's z axis."""
    x, y, z = direction
    down = abs(z)
    splay, rake = np.arctan2((side or 1) * x, down), np.arctan2(end * y, down)
    resultant = np.arctan2(np.linalg.norm(np.cross(direction, [0, 0, np.sign(z)])), down)
    return tuple(float(v) for v in np.degrees([splay, rake, resultant, np.arctan2((side or 1) * x, end * y)]))


def angles_of(lean) -> tuple[float, float, float, float]:
    """The same four as the program has them."""
    return (lean.splay_deg, lean.rake_deg, lean.resultant_deg, lean.sightline_deg)


def off_line_mm(point, through, along) -> float:
    """How far a point is from a line."""
    along = np.asarray(along) / np.linalg.norm(along)
    return float(np.linalg.norm(np.cross(np.asarray(point) - through, along)))
