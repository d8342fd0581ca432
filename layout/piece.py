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


class Piece(NamedTuple):
    """One drawing in its own millimetres.

    `sheet` groups the pieces of one kind of page ("template"), `title` is what the page's foot says it is and `notice`
    what a maker must not get wrong there (which face, which way is front). `points` are named places that reports give
    and seams keep away from; for a tiled piece they are the mortises' centres. `stock` is what to print it on.
    """

    name: str
    sheet: str
    title: str
    drawing: Drawing
    handling: Handling
    notice: str = ""
    points: tuple[tuple[str, Point], ...] = ()
    stock: Literal["paper", "card"] = "paper"
