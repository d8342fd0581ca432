"""What can be wrong with a spec, and how it is said: problems, cautions, and text that is safe to show.

Owns the wording's form and the escaping of a stranger's text. Imports nothing of ours.
"""

from __future__ import annotations

import unicodedata
from datetime import date, time
from typing import NamedTuple

LONGEST_GIVEN = 60
_LONGEST_WHERE = 100
_LONGEST_SENTENCE = 500
_LARGEST_WHOLE_NUMBER_BITS = 128
_ITEMS_SHOWN = 4
_LEVELS_SHOWN = 2
# Categories that move the cursor, draw nothing, or draw over their neighbour.
_UNSEEN = frozenset({"Cc", "Cf", "Cs", "Co", "Cn", "Zl", "Zp", "Mn", "Me", "Mc"})
# Letters that turn the direction of the line, which would put the parts of a message out of order.
_TURNING = frozenset({"R", "AL", "AN"})


def _escaped(char: str) -> str:
    """One character, or its code in TOML's own escape when a terminal would not simply draw it."""
    if " " <= char <= "~":
        return char
    if unicodedata.category(char) in _UNSEEN or unicodedata.bidirectional(char) in _TURNING:
        return f"\\u{ord(char):04x}" if ord(char) < 0x10000 else f"\\U{ord(char):08x}"
    return char


def safe(text: str, longest: int = _LONGEST_SENTENCE) -> str:
    """The text with whatever could garble a terminal escaped, cut with an ellipsis to `longest` characters."""
    parts: list[str] = []
    room = longest
    for char in text[: longest + 1]:
        part = _escaped(char)
        parts.append(part)
        room -= len(part)
        if room < 0:
            break
    if room >= 0:
        return "".join(parts)
    while room < 1:
        room += len(parts.pop())
    return "".join(parts) + "…"


def _whole_number(value: int) -> str:
    """The number, or how long it is: printing one of thousands of digits is slow, and Python refuses it."""
    if value.bit_length() <= _LARGEST_WHOLE_NUMBER_BITS:
        return str(value)
    return f"a whole number of about {int(value.bit_length() * 0.30103) + 1} digits"


def _listed(value: list[object] | tuple[object, ...], levels: int) -> str:
    if levels == 0:
        return "[…]"
    parts = [_shown(item, levels - 1) for item in value[:_ITEMS_SHOWN]]
    return "[" + ", ".join(parts + ["…"] * (len(value) > _ITEMS_SHOWN)) + "]"


def _shown(value: object, levels: int) -> str:
    match value:
        case bool():
            return "true" if value else "false"
        case int():
            return _whole_number(value)
        case float():
            return f"{value:.12g}"
        case str():
            return '"' + safe(value, LONGEST_GIVEN - 2) + '"'
        case list() | tuple():
            return _listed(value, levels)
        case dict():
            return "a table"
        case date() | time():
            return value.isoformat()
    return f"a {type(value).__name__}"


def shown(value: object) -> str:
    """A value of a TOML file as a message quotes it: text in double quotes, cut to a sane length."""
    return safe(_shown(value, _LEVELS_SHOWN), LONGEST_GIVEN)


class Problem(NamedTuple):
    """One thing that makes a spec impossible: its place, what was given, the rule, and what would do.

    `where` is a path in the file such as `legs[1].splay`, or empty for the whole file; `rule` reads on from `given`.
    """

    where: str
    given: str
    rule: str
    cure: str = ""

    def text(self) -> str:
        """One line: `legs[1].splay: 95 is not between -45 and 45 degrees`, then `; ` and the cure, if there is one."""
        place = safe(self.where, _LONGEST_WHERE) + ": " if self.where else ""
        given = safe(self.given, LONGEST_GIVEN) + " " if self.given else ""
        return place + given + safe(self.rule) + ("; " + safe(self.cure) if self.cure else "")


class SpecError(Exception):
    """A spec that cannot be built, with all that is wrong with it."""

    def __init__(self, source: str, problems: tuple[Problem, ...]) -> None:
        super().__init__(source, problems)
        self.source = source
        self.problems = problems

    def __str__(self) -> str:
        return "\n".join(f"{safe(self.source)}: {problem.text()}" for problem in self.problems)


class Caution(NamedTuple):
    """Something merely unwise: drawn all the same, and said on the sheet and the command line.

    `code` is one fixed word for other programs, `where` a path in the file, `text` a sentence for the maker.
    """

    code: str
    where: str
    text: str
