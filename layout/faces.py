"""The two faces that ship with the program: which glyph a character has, and how wide glyphs are.

Owns the reading of the font files' long tables at one stroke each (OpenType: cmap format 12, hmtx). Libraries for
fonts decode the names of all six thousand glyphs on the way, which takes longer than drawing a chair. Imports nothing
of ours.
The faces are DejaVu Sans Condensed and its bold (free licence beside them), which hold the Latin, Greek, Cyrillic,
Armenian and Georgian letters.
"""

from __future__ import annotations

import struct
from functools import cache
from pathlib import Path
from typing import NamedTuple

FACES = {False: "DejaVuSansCondensed", True: "DejaVuSansCondensed-Bold"}


class Face(NamedTuple):
    """A face's glyph of each character, (advance, bearing) of each glyph, and units to the em."""

    glyphs: dict[int, int]
    advances: list[tuple[int, int]]
    units_per_em: int

    def advance(self, character: str) -> float:
        """The advance width of a character over the em; that of the face's blank box where it has none."""
        return self.advances[self.glyphs.get(ord(character), 0)][0] / self.units_per_em


def face_path(bold: bool) -> Path:
    """The font file of a face."""
    return Path(__file__).parent / "fonts" / f"{FACES[bold]}.ttf"


@cache
def face(bold: bool) -> Face:
    """The plain or the bold face."""
    tables = _tables(face_path(bold).read_bytes())
    (full,) = struct.unpack_from(">H", tables["hhea"], 34)
    (glyphs,) = struct.unpack_from(">H", tables["maxp"], 4)
    (units,) = struct.unpack_from(">H", tables["head"], 18)
    return Face(_characters(tables["cmap"]), _advances(tables["hmtx"], glyphs, full), units)


def _tables(font: bytes) -> dict[str, bytes]:
    (count,) = struct.unpack_from(">H", font, 4)
    entries = struct.iter_unpack(">4sLLL", font[12 : 12 + 16 * count])
    return {tag.decode("ascii"): font[start : start + length] for tag, _, start, length in entries}


def _advances(hmtx: bytes, glyphs: int, full: int) -> list[tuple[int, int]]:
    """Advance and bearing of each glyph; those after the first `full` have the last one's advance."""
    pairs = list(struct.iter_unpack(">HH", hmtx[: 4 * full]))
    bearings = struct.unpack_from(f">{glyphs - full}H", hmtx, 4 * full)
    return [*((advance, bearing) for advance, bearing in pairs), *((pairs[-1][0], bearing) for bearing in bearings)]


def _characters(cmap: bytes) -> dict[int, int]:
    """The glyph of each character, from the table of all Unicode (platform 3, encoding 10, format 12)."""
    tables = struct.iter_unpack(">HHL", cmap[4 : 4 + 8 * int.from_bytes(cmap[2:4], "big")])
    start = next(offset for platform, encoding, offset in tables if (platform, encoding) == (3, 10))
    (count,) = struct.unpack_from(">L", cmap, start + 12)
    runs = struct.iter_unpack(">LLL", cmap[start + 16 : start + 16 + 12 * count])
    return {first + k: glyph + k for first, last, glyph in runs for k in range(last - first + 1)}
