"""How wide a line of lettering is, how it breaks into lines, and which characters can be lettered.

Owns lettering's measures, so that drawings can be laid out without a writer. Imports `faces` only.
"""

from __future__ import annotations

from functools import cache, lru_cache

from layout.faces import FACES, face

# Height of a capital over the em, read off the glyph H of both faces (1493 of 2048 units).
CAPITAL_OF_EM = 1493 / 2048
# How far accents rise above and tails fall below the capitals' band, in capital heights.
RISE, FALL = 0.35, 0.33


def em_mm(height_mm: float) -> float:
    """The em (what font sizes are given in) of lettering whose capitals are `height_mm` tall."""
    return height_mm / CAPITAL_OF_EM


@cache
def _advance(character: str, bold: bool) -> float:
    return face(bold).advance(character)


def covers(character: str) -> bool:
    """Whether both faces hold the character."""
    return all(ord(character) in face(bold).glyphs for bold in FACES)


@lru_cache(maxsize=4096)
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
