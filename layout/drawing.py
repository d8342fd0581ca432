"""What a drawing is: frozen primitives in millimetres, each with a role, compared with ==.

Owns the primitives; composite shapes are `shapes`, changes are `operations`, ink is the writers'. Imports `geometry`
and `curves` only.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from enum import Enum
from typing import Literal

from layout.curves import Curve
from layout.geometry import Point


class Role(Enum):
    """What a mark on the paper is for; a writer turns it into a line type after ISO 128-2."""

    CUT = "cut"
    FOLD = "fold"
    CENTRE = "centre"
    HIDDEN = "hidden"
    SET_OUT = "set-out"
    NOTE = "note"
    FURNITURE = "furniture"


Align = Literal["left", "centre", "right"]


@dataclass(frozen=True, slots=True)
class Stroke:
    """A line along a curve. A closed one ends where it starts."""

    curve: Curve
    role: Role
    closed: bool = False


@dataclass(frozen=True, slots=True)
class Fill:
    """A solid shape, such as an arrow's head; the curve is closed by its first point."""

    curve: Curve
    role: Role


@dataclass(frozen=True, slots=True)
class Text:
    """One line of lettering.

    `at` is the foot of the lettering at its left end, middle or right end; `height_mm` is the height of a capital
    letter (ISO 3098); `angle_deg` is the reading direction. With `over` the lettering stands on a blank patch, so that
    a line set out below it never runs through a number.
    """

    at: Point
    text: str
    height_mm: float
    role: Role = Role.NOTE
    align: Align = "left"
    angle_deg: float = 0.0
    bold: bool = False
    over: bool = False


Primitive = Stroke | Fill | Text


@dataclass(frozen=True, slots=True)
class Drawing:
    """Primitives in drawing order: later ones lie over earlier ones."""

    items: tuple[Primitive, ...] = ()

    def __add__(self, other: Drawing) -> Drawing:
        return Drawing(self.items + other.items)


def gather(parts: Iterable[Drawing | Primitive]) -> Drawing:
    """One drawing of many, in order."""
    items: list[Primitive] = []
    for part in parts:
        if isinstance(part, Drawing):
            items.extend(part.items)
        else:
            items.append(part)
    return Drawing(tuple(items))
