"""Names of parts where several are told together, or where there is little room.

Owns that wording. Imports nothing of ours.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence

# More names than this are drawn together.
_MOST_IN_FULL = 4


def in_words(names: Sequence[str]) -> str:
    """Names in a row for a sentence: in full where they are few, else drawn together."""
    return ", ".join(names) if len(names) <= _MOST_IN_FULL else stems(names)


def stems(names: Sequence[str]) -> str:
    """Names in a row, those that differ in their last word alone together: `front left, right; spindle 1 to 7`."""
    ends: dict[tuple[str, bool], list[str]] = {}
    for name in names:
        stem, _, last = name.rpartition(" ")
        ends.setdefault((stem or name, bool(stem)), []).append(last)
    return "; ".join(f"{stem} {', '.join(_runs(lasts))}" if more else stem for (stem, more), lasts in ends.items())


def _runs(lasts: Sequence[str]) -> Iterator[str]:
    """Words as they are, but three or more whole numbers that follow each other as the first and the last."""
    run: list[str] = []
    for last in (*lasts, ""):
        if run and last.isdecimal() and run[-1].isdecimal() and int(last) == int(run[-1]) + 1:
            run.append(last)
            continue
        yield from [f"{run[0]} to {run[-1]}"] if len(run) > 2 else run
        run = [last]


def short_name(name: str, fits: Callable[[str], bool]) -> str:
    """The name, cut with an ellipsis where it does not fit; a twin keeps its side, by which alone it is told apart."""
    side = next((side for side in (" left", " right") if name.endswith(side)), "")
    shown, kept = name, name.removesuffix(side)
    while kept and not fits(shown):
        kept = kept[:-1]
        shown = kept.rstrip() + "…" + side
    return shown
