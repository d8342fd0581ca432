"""How wide a line of lettering is, and which characters the faces hold.

Owns the two faces and their metrics, so that drawings can be laid out without a writer. Imports nothing of ours.
The faces are DejaVu Sans Condensed and its bold (free licence beside them), which hold the Latin, Greek, Cyrillic,
Armenian and Georgian letters.
"""

from __future__ import annotations

from functools import cache
from pathlib import Path
from typing import Any

from fontTools.ttLib import TTFont

FACES = {False: "DejaVuSansCondensed", True: "DejaVuSansCondensed-Bold"}

# Height of a capital over the em, read off the glyph H of both faces (1493 of 2048 units).
CAPITAL_OF_EM = 1493 / 2048
# How far accents rise above and tails fall below the capitals' band, in capital heights.
RISE, FALL = 0.35, 0.33


def face_path(bold: bool) -> Path:
    """The font file of a face."""
    return Path(__file__).parent / "fonts" / f"{FACES[bold]}.ttf"


def em_mm(height_mm: float) -> float:
    """The em (what font sizes are given in) of lettering whose capitals are `height_mm` tall."""
    return height_mm / CAPITAL_OF_EM


@cache
def _metrics(bold: bool) -> tuple[dict[int, str], dict[str, Any], int]:
    with TTFont(face_path(bold), lazy=True) as font:
        return font.getBestCmap(), font["hmtx"].metrics, font["head"].unitsPerEm


@cache
def _advance(character: str, bold: bool) -> float:
    glyphs, widths, units = _metrics(bold)
    return float(widths[glyphs.get(ord(character), ".notdef")][0]) / units


def covers(character: str) -> bool:
    """Whether both faces hold the character."""
    return all(ord(character) in _metrics(bold)[0] for bold in FACES)


def text_width_mm(text: str, height_mm: float, bold: bool = False) -> float:
    """The advance width of a line of lettering."""
    return em_mm(height_mm) * sum(_advance(character, bold) for character in text)


def wrap(text: str, width_mm: float, height_mm: float, bold: bool = False) -> list[str]:
    """The text in lines no wider than `width_mm`; a word that is wider by itself is broken."""
    lines: list[str] = []
    space, taken = text_width_mm(" ", height_mm, bold), 0.0
    for word in text.split():
        for part in _broken(word, width_mm, height_mm, bold):
            width = text_width_mm(part, height_mm, bold)
            if lines and taken + space + width <= width_mm:
                lines[-1] += f" {part}"
                taken += space + width
            else:
                lines.append(part)
                taken = width
    return lines or [""]


def _broken(word: str, width_mm: float, height_mm: float, bold: bool) -> list[str]:
    if text_width_mm(word, height_mm, bold) <= width_mm:
        return [word]
    parts, part = [], ""
    for character in word:
        if part and text_width_mm(part + character, height_mm, bold) > width_mm:
            parts.append(part)
            part = ""
        part += character
    return [*parts, part]


def shortened(text: str, width_mm: float, height_mm: float, bold: bool = False) -> str:
    """The text, cut with an ellipsis where it is wider than `width_mm`."""
    if text_width_mm(text, height_mm, bold) <= width_mm:
        return text
    while text and text_width_mm(text + "…", height_mm, bold) > width_mm:
        text = text[:-1]
    return text.rstrip() + "…"
