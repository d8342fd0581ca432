"""What a maker may know of a leg: the names, what each of them settles, how a value is said, and how one is refused.

Owns the words of the knowns. Imports `quantities`; no geometry and no spec, so that the spec can name them.
"""

from __future__ import annotations

import math
from collections.abc import Iterable

from jigs.quantities import MM_PER_INCH, Units

KNOWNS = (
    "splay",
    "rake",
    "resultant",
    "sightline",
    "foot_across",
    "foot_along",
    "inside_side",
    "inside_end",
    "axis",
)
# A leg leans no more than this from plumb or from square to the seat: further, nothing that is bored holds (practice).
MOST_LEAN_DEG = 60.0
# The foot's place between those of two neighbours; it comes with the two feet and not with a number.
EQUAL_FEET = "equal_from"
ANGLES = frozenset({"splay", "rake", "resultant", "sightline"})

# What each known settles. Two of one row settle nothing more than one.
SETTLES = {
    "splay": "how far the leg leans to its side",
    "foot_across": "how far the leg leans to its side",
    "inside_side": "how far the leg leans to its side",
    "rake": "how far the leg leans to its end",
    "foot_along": "how far the leg leans to its end",
    "inside_end": "how far the leg leans to its end",
    "resultant": "how far the leg leans in all, not which way",
    "axis": "how far the leg leans in all, not which way",
    "sightline": "which way the leg leans, not how far",
    EQUAL_FEET: "the foot's place between its neighbours",
}
# What says nothing of a leg on the centre line.
SIDEWAYS = frozenset({"splay", "sightline", "foot_across", "inside_side"})


class CannotSolve(ValueError):  # noqa: N818  (named for what it says of the leg)
    """Knowns that give no leg: the `rule` is a clause that stands by itself, the `cure` says what would do."""

    def __init__(self, rule: str, cure: str = "") -> None:
        super().__init__(f"{rule}; {cure}" if cure else rule)
        self.rule = rule
        self.cure = cure


def said(name: str, value: float, units: Units, places: int = 3) -> str:
    """A known's value as the maker writes it, `12.5°` or `8.25 in`."""
    angle = name in ANGLES
    size = value if angle or units == "mm" else value / float(MM_PER_INCH)
    return decimals(size, places) + ("°" if angle else f" {units}")


def rounded(name: str, value: float, units: Units, steps: int) -> float:
    """The value at a thousandth of what the maker writes, so many steps from it: 1 is the next up, -1 the next down.

    A value that is a whole number of thousandths but for rounding counts as the first step itself.
    """
    unit = (1.0 if name in ANGLES or units == "mm" else float(MM_PER_INCH)) / 1000
    sign = 1 if steps > 0 else -1
    return sign * (math.ceil(sign * value / unit - 1e-6) + abs(steps) - 1) * unit


def decimals(value: float, places: int = 3) -> str:
    """So many decimals at most, none that say nothing."""
    text = f"{value:.{places}f}".rstrip("0").rstrip(".")
    return "0" if text == "-0" else text


def places_for(difference: float) -> int:
    """How many decimals show a difference: three, or more for one that three would not."""
    return 3 if abs(difference) >= 0.002 else min(12, 1 - math.floor(math.log10(abs(difference) or 1e-12)))


def named(name: str, value: float, units: Units) -> str:
    """A known and its value, as a message quotes the pair."""
    return f"{name} {said(name, value, units)}" if name != EQUAL_FEET else EQUAL_FEET


def listed(words: Iterable[str], last: str = "and") -> str:
    """`a, b and c`."""
    *head, tail = words
    return f"{', '.join(head)} {last} {tail}" if head else tail


def partners(name: str) -> tuple[str, ...]:
    """The knowns that settle, together with this one, where a leg goes."""
    return tuple(other for other in KNOWNS if SETTLES[other] != SETTLES[name])
