"""Which sheets there are, in the order of the file, and who draws each. A new piece adds its line here.

Imports every maker of pieces; no paper.
"""

from __future__ import annotations

from collections.abc import Callable

from jigs.assembly import Assembly, Face
from jigs.cards import card_pieces
from jigs.setting_out import setting_out_pieces
from jigs.strips import strip_pieces
from jigs.template import template
from layout.piece import Piece

Faces = tuple[Face, ...]


def _templates(assembly: Assembly, faces: Faces) -> tuple[Piece, ...]:
    return tuple(template(assembly, face) for face in faces)


# Sheet's name -> its pieces, given the faces of which a template is wanted. The scale check belongs to the paper and is
# made there; its place in the order is here.
SCALE = "scale"
_MAKERS: dict[str, Callable[[Assembly, Faces], tuple[Piece, ...]]] = {
    "setting-out": lambda assembly, faces: setting_out_pieces(assembly),
    SCALE: lambda assembly, faces: (),
    "template": _templates,
    "cards": lambda assembly, faces: card_pieces(assembly),
    "strips": lambda assembly, faces: strip_pieces(assembly),
}

SHEETS = tuple(_MAKERS)


def pieces(assembly: Assembly, sheet: str, faces: Faces) -> tuple[Piece, ...]:
    """The pieces of one sheet. Raises KeyError for a sheet that is not in SHEETS."""
    return _MAKERS[sheet](assembly, faces)
