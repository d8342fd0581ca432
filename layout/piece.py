"""A piece: one drawing at true size and how it wants to reach the paper. The form in which makers of drawings hand
them over.

Imports `drawing` and `geometry` only.
"""

from __future__ import annotations

from typing import Literal, NamedTuple

from layout.drawing import Drawing
from layout.geometry import Point

# tile: spread over overlapping pages where one will not hold it; pack: small, laid beside others, turned if that helps;
# strip: packed too, but cut into overlapping lengths along x where it is longer than a page;
# flow: a block of a written sheet, set below the one before it, in order.
Handling = Literal["tile", "pack", "strip", "flow"]


class Wording(NamedTuple):
    """One way to say a label: a drawing about the middle of the room that it takes, across and down."""

    drawing: Drawing
    width_mm: float
    height_mm: float


class Label(NamedTuple):
    """Words or a small sign that belong near a point of a drawing and stand wherever there is room for them.

    `wordings`: the fullest first. No label stands nearer to `near` than `aside_mm`, across and down. `led` asks for a
    line from the words to the point where they do not stand beside it.
    """

    wordings: tuple[Wording, ...]
    near: Point
    aside_mm: float = 0.0
    led: bool = False


class Piece(NamedTuple):
    """One drawing in its own millimetres.

    `sheet` groups the pieces of one kind of page ("template"), `title` is what the page's foot says it is and `notice`
    what a maker must not get wrong there (which face, which way is front). `points` are named places that reports give
    and seams keep away from; for a tiled piece they are the mortises' centres. `stock` is what to print it on.
    `labels` are set on the drawing once its pages are chosen; its first item is then the outline that they stand in.
    """

    name: str
    sheet: str
    title: str
    drawing: Drawing
    handling: Handling
    notice: str = ""
    points: tuple[tuple[str, Point], ...] = ()
    stock: Literal["paper", "card"] = "paper"
    labels: tuple[Label, ...] = ()
