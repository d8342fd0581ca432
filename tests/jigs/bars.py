"""Legs and stretchers for the tests, and a second way to work them out, by arrays and root finding."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Any

import numpy as np
from scipy.optimize import brentq

from jigs.stretchers import Member, Stretcher, StretcherSpec, place

Array = np.ndarray


def leg(
    name: str,
    side: int,
    end: int,
    splay: float = 11.0,
    rake: float = 8.0,
    at: tuple[float, float] = (150.0, 110.0),
    height: float = 420.0,
    diameters: tuple[float, float] = (38.0, 25.0),
) -> Member:
    """A leg from the underside at `height` to the floor; `at` is how far from the middle of the seat it enters."""
    top = np.array([side * at[0], 160.0 + end * at[1], height])
    way = np.array([side * math.tan(math.radians(splay)), end * math.tan(math.radians(rake)), -1.0])
    lean = (float(way[0]), float(way[1]), 0.0) if np.hypot(*way[:2]) > 1e-12 else (0.0, float(end), 0.0)
    foot = top + height * way
    return Member(name, tuple(map(float, top)), tuple(map(float, foot)), *diameters, lean)


def chair(**changes: Any) -> list[Member]:
    """Four legs that splay and rake; the back ones rake more."""
    back = {"rake": 14.0, "at": (130.0, 110.0)} | changes
    return [
        leg("front left", -1, -1, **changes),
        leg("front right", 1, -1, **changes),
        leg("back left", -1, 1, **back),
        leg("back right", 1, 1, **back),
    ]


def plumb_chair() -> list[Member]:
    """Four legs of Ø 30 that stand square, 300 × 220 mm apart."""
    return chair(splay=0.0, rake=0.0, at=(150.0, 110.0), diameters=(30.0, 30.0))


def bar(name: str, first: str, second: str, **given: Any) -> StretcherSpec:
    """A stretcher Ø 22 with tenons Ø 16 × 20, at `heights` or at `fractions`."""
    sizes = {"diameter_mm": 22.0, "tenon_mm": 20.0, "tenon_diameter_mm": 16.0} | {
        key: value for key, value in given.items() if key.endswith("_mm")
    }
    return StretcherSpec(name, (first, second), given.get("heights"), given.get("fractions"), **sizes)


SIDES = [
    bar("left", "front left", "back left", heights=(110.0, 140.0)),
    bar("right", "front right", "back right", heights=(110.0, 140.0)),
]
MEDIAL = bar("medial", "left", "right", fractions=(0.4, 0.4))
H_FORM = [*SIDES, MEDIAL]
BOX = [
    *SIDES,
    bar("front", "front left", "front right", heights=(180.0, 180.0)),
    bar("back", "back left", "back right", heights=(90.0, 90.0)),
]
X_FORM = [
    bar("long", "front left", "back right", heights=(120.0, 120.0)),
    bar("half left", "back left", "long", fractions=(0.3, 0.5)),
    bar("half right", "front right", "long", fractions=(0.3, 0.5)),
]
FORMS = {"H": H_FORM, "box": BOX, "X": X_FORM}


def by_name(stretchers: tuple[Stretcher, ...]) -> dict[str, Stretcher]:
    return {stretcher.name: stretcher for stretcher in stretchers}


@dataclass
class Bar:
    """A member as arrays."""

    start: Array
    end: Array
    diameters: tuple[float, float]
    zero: Array

    @staticmethod
    def of(member: Member) -> Bar:
        diameters = (member.start_diameter_mm, member.end_diameter_mm)
        return Bar(np.array(member.start), np.array(member.end), diameters, np.array(member.zero))

    @property
    def along(self) -> Array:
        return (self.end - self.start) / np.linalg.norm(self.end - self.start)

    def depth(self, points: Array) -> Array:
        """How far under the surface each point lies, square to the axis; negative outside."""
        along = (points - self.start) @ self.along
        radius = (self.diameters[0] + along / np.linalg.norm(self.end - self.start) * np.diff(self.diameters)[0]) / 2
        return radius - np.linalg.norm(points - self.start - along[:, None] * self.along, axis=1)


def worked_out(specs: list[StretcherSpec], members: list[Member]) -> dict[str, dict[str, Any]]:
    """Every stretcher of specs in working order, found with arrays, brentq and arc cosines."""
    bars = {member.name: Bar.of(member) for member in members}
    found = {}
    for spec in specs:
        hosts = [bars[name] for name in spec.between]
        points = [_point(spec, k, host, spec.between[k] in {m.name for m in members}) for k, host in enumerate(hosts)]
        way = (points[1] - points[0]) / np.linalg.norm(points[1] - points[0])
        pierced = [_pierced(hosts[0], points[0], way), _pierced(hosts[1], points[1], -way)]
        found[spec.name] = {
            "between": float(np.linalg.norm(points[1] - points[0])),
            "shoulder": float(np.linalg.norm(pierced[1] - pierced[0])),
            "points": points,
            "bores": [_angle(host.along, w) for host, w in zip(hosts, (way, -way), strict=True)],
            "ways": [way, -way],
            "hosts": hosts,
        }
        bars[spec.name] = Bar(points[0], points[1], (spec.diameter_mm,) * 2, np.array([0.0, 0.0, 1.0]))
    return found


def _point(spec: StretcherSpec, k: int, host: Bar, upright: bool) -> Array:
    if spec.heights_mm is not None:
        share = brentq(lambda f: host.start[2] + f * (host.end[2] - host.start[2]) - spec.heights_mm[k], -0.5, 1.5)
        return host.start + share * (host.end - host.start)
    assert spec.fractions is not None
    low, high = (host.end, host.start) if upright else (host.start, host.end)
    return low + spec.fractions[k] * (high - low)


def _pierced(host: Bar, point: Array, way: Array) -> Array:
    return point + brentq(lambda t: host.depth((point + t * way)[None])[0], 0.0, 200.0, xtol=1e-11) * way


def _angle(u: Array, v: Array) -> float:
    return math.degrees(math.acos(float(u @ v) / float(np.linalg.norm(u) * np.linalg.norm(v))))


def placed(form: str = "box", members: list[Member] | None = None) -> tuple[tuple[Stretcher, ...], list[Member]]:
    """A form on a chair, and the chair."""
    legs = chair() if members is None else members
    return place(FORMS[form], legs), legs
