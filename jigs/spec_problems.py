"""What pydantic finds wrong with a spec, said in our words, in the file's order.

Owns the places (`legs[0].mortise.taper`), the table of sentences and the examples for missing keys.
Imports `problems`, `quantities`; not the models, whose keys it is told.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence

from pydantic_core import ErrorDetails, PydanticCustomError

from jigs.problems import Problem, shown

MOST_PROBLEMS = 50
# Longer keys are not worth comparing with ours.
_LONGEST_KEY = 40

_UNKNOWN_KEY = "unknown key"
_MISSING_KEY = "missing"

Loc = tuple[int | str, ...]
# The keys of each table, by its place without numbers: "", "seat.oval", "legs", "legs.mortise".
Keys = Mapping[str, Sequence[str]]

_MISSING = {
    "name": 'what the sheets call the piece, such as name = "Slipway stool"',
    "seat": 'give a [seat] table with shape = "oval" and its sizes',
    "legs": "give a [[legs]] table for each leg or pair of legs",
    "seat.shape": 'the outline of the seat, such as shape = "oval"',
    "seat.diameter": 'across the round seat, such as diameter = "340 mm"',
    "seat.width": 'from side to side, such as width = "400 mm"',
    "seat.depth": 'from front to back, such as depth = "300 mm"',
    "seat.back_width": 'from side to side at the back, such as back_width = "340 mm"',
    "seat.thickness": 'of the seat blank, such as thickness = "45 mm"',
    "seat.height": 'from the floor to the top face at the front edge, such as height = "450 mm"',
    "seat.points": "the corners in order, such as points = [[-150, 0], [150, 0], [0, 300]]",
    "seat.path": 'the outline as SVG path data, such as path = "M -150 0 L 150 0 L 0 300 Z"',
    "legs.name": 'what the sheets call the leg, such as name = "front"',
    "legs.at": "the mortise's centre on the face that is drilled, such as at = [125, 70]",
    "legs.splay": "the lean seen from the front, such as splay = 12",
    "legs.rake": "the lean seen from the side, such as rake = 9",
    "legs.mortise": 'the bit\'s diameter, such as mortise = "25 mm"',
    "rings.count": "how many legs stand in the ring, such as count = 5",
    "rings.circle": 'the diameter of the circle of mortises, such as circle = "240 mm"',
    "posts.length": 'from the top face to the upper end along the axis, such as length = "480 mm"',
    "spindles.count": "how many spindles stand in the row, such as count = 7",
    "spindles.deck": "the row of mortises, such as deck = { width = 360, back = 380, bow = 30 }",
    "spindles.crest": "the row of upper ends, such as crest = { width = 440, back = 460, bow = 40, height = 480 }",
    "stretchers.between": 'the two parts that it joins, such as between = ["front left", "back left"]',
    "stretchers.diameter": 'the stretcher\'s diameter, such as diameter = "22 mm"',
    "legs.mortise.bit": 'the bit\'s diameter, such as bit = "16 mm"',
}


def refusal(rule: str, cure: str = "", given: str | None = None, kind: str = "refused") -> PydanticCustomError:
    """The error that our own checks raise inside a model; `given` stands in for the value where that says more."""
    return PydanticCustomError(kind, "{rule}", {"rule": rule, "cure": cure, "given": given})


def place(loc: Loc) -> str:
    """`("legs", 0, "splay")` as `legs[0].splay`."""
    return "".join(f"[{part}]" if isinstance(part, int) else f".{part}" for part in loc).removeprefix(".")


def either(words: Sequence[str]) -> str:
    """`a`, `a or b`, `a, b or c`."""
    return " or ".join(filter(None, [", ".join(words[:-1]), words[-1]]))


def nearest(word: str, words: Sequence[str]) -> str | None:
    """The one of `words` that a slip of the finger would turn into `word`."""
    import difflib  # noqa: PLC0415 - only a spec with a slip in it pays for loading it

    close = difflib.get_close_matches(word[:_LONGEST_KEY], words, n=1, cutoff=0.6)
    return close[0] if close else None


def problems_of(
    errors: Sequence[ErrorDetails], document: Mapping[str, object], keys: Keys
) -> list[tuple[Loc, Problem]]:
    """The first `MOST_PROBLEMS` errors in the file's order, each with its place in the document."""
    order = FileOrder(document)
    found = sorted(((_loc(error, document), error) for error in errors), key=lambda pair: order.rank(pair[0]))
    problems = [(loc, _problem(loc, error, keys)) for loc, error in found[:MOST_PROBLEMS]]
    # A key that is only misspelt is not missing as well.
    misspelt = {(loc[:-1], problem.cure) for loc, problem in problems if problem.rule == _UNKNOWN_KEY}
    return [
        (loc, problem)
        for loc, problem in problems
        if problem.rule != _MISSING_KEY or (loc[:-1], _did_you_mean(str(loc[-1]))) not in misspelt
    ]


class FileOrder:
    """Ranks places by where they stand in the document; what is missing comes after what its table has."""

    def __init__(self, document: Mapping[str, object]) -> None:
        self._document = document
        self._ranks: dict[int, dict[str, int]] = {}

    def rank(self, loc: Loc) -> tuple[int, ...]:
        """A key to sort by."""
        ranks: list[int] = []
        value: object = self._document
        for part in loc:
            if isinstance(value, dict):
                known = self._ranks.get(id(value)) or self._ranked(value)
                ranks.append(known.get(str(part), len(known)))
                value = value.get(part)
            else:
                ranks.append(part if isinstance(part, int) else 0)
                value = value[part] if isinstance(value, list) and isinstance(part, int) and part < len(value) else None
        return tuple(ranks)

    def _ranked(self, table: dict[str, object]) -> dict[str, int]:
        self._ranks[id(table)] = {key: index for index, key in enumerate(table)}
        return self._ranks[id(table)]


def _loc(error: ErrorDetails, document: Mapping[str, object]) -> Loc:
    """The error's place in the file: without the name of the shape's model, and without a `bit` that is not there."""
    loc = error["loc"]
    if loc[:1] == ("seat",):
        shape_is_wrong = error["type"].startswith("union_tag")
        return ("seat", "shape") if shape_is_wrong else ("seat", *loc[2:])
    if loc[2:] == ("mortise", "bit") and not isinstance(_reach(document, loc[:3]), dict):
        return loc[:3]
    return loc


def _reach(value: object, loc: Loc) -> object:
    for part in loc:
        value = value[part]  # type: ignore[index]
    return value


def _table(error: ErrorDetails) -> str:
    """The table that an error's key is in, as `Keys` names it."""
    return ".".join(str(part) for part in error["loc"][:-1] if isinstance(part, str))


def _problem(loc: Loc, error: ErrorDetails, keys: Keys) -> Problem:
    kind = error["type"]
    context = error.get("ctx", {})
    if "rule" in context:
        given = shown(error["input"]) if context["given"] is None else context["given"]
        return Problem(place(loc), given, context["rule"], context["cure"])
    say = _SENTENCES.get(kind)
    return say(loc, error, keys) if say else Problem(place(loc), shown(error["input"]), "is not what belongs here")


def _missing(loc: Loc, _error: ErrorDetails, _keys: Keys) -> Problem:
    return Problem(place(loc), "", _MISSING_KEY, _example(loc))


def _example(loc: Loc) -> str:
    """What a missing key is for; rings, posts and spindles say of a key that legs have too what legs say."""
    where = _without_numbers(loc)
    return _MISSING.get(where) or _MISSING.get("legs." + where.partition(".")[2], "")


def missing(where: Loc) -> PydanticCustomError:
    """The error for a key that only some cases need."""
    return refusal(_MISSING_KEY, _example(where), given="")


def _without_numbers(loc: Loc) -> str:
    return ".".join(part for part in loc if isinstance(part, str))


def _unknown(loc: Loc, error: ErrorDetails, keys: Keys) -> Problem:
    key, table = str(loc[-1]), _table(error)
    return Problem(place(loc), "", _UNKNOWN_KEY, _meant(key, table, keys))


def _meant(key: str, table: str, keys: Keys) -> str:
    """What to do about an unknown key: move it to the table that has it, mend its spelling, or choose another."""
    here, top = keys[table], table.partition(".")[0]
    homes = sorted((name for name in keys if key in keys[name]), key=lambda name: name.partition(".")[0] != top)
    if homes and not (top == "seat" and homes[0].startswith("seat")):
        return f"'{key}' belongs in {_called(homes[0])}"
    close = None if homes else nearest(key, here)
    return _did_you_mean(close) if close else f"the keys here are {', '.join(here)}"


def _did_you_mean(key: str) -> str:
    return f"did you mean '{key}'?"


def _called(table: str) -> str:
    first, _, inner = table.partition(".")
    if first in ("", "seat", "wood"):
        return f"[{first}]" if first else "the top of the file, before any [table]"
    if inner == "mortise":
        return "the mortise, as in mortise = { bit = 16, taper = 6 }"
    return f"the {inner.rpartition('.')[2]} of [[{first}]]" if inner else f"[[{first}]]"


def _choice(loc: Loc, error: ErrorDetails, _keys: Keys) -> Problem:
    """A word that is none of those allowed; pydantic lists them quoted, as `'mm' or 'in'`."""
    listed = str(error["ctx"].get("expected") or error["ctx"].get("expected_tags"))
    words = [word.strip().strip("'") for word in listed.replace(" or ", ", ").split(",")]
    given = error["input"]
    if loc == ("seat", "shape"):
        given = error["input"]["shape"]
    close = nearest(given, words) if isinstance(given, str) else None
    rule = "is not " + either([f'"{word}"' for word in words])
    return Problem(place(loc), shown(given), rule, f'did you mean "{close}"?' if close else "")


def _not(what: str) -> Callable[[Loc, ErrorDetails, Keys], Problem]:
    return lambda loc, error, _keys: Problem(place(loc), shown(error["input"]), f"is not {what}")


_SENTENCES: dict[str, Callable[[Loc, ErrorDetails, Keys], Problem]] = {
    "missing": _missing,
    "union_tag_not_found": _missing,
    "extra_forbidden": _unknown,
    "literal_error": _choice,
    "union_tag_invalid": _choice,
    "bool_type": _not("true or false"),
    "string_type": _not("text"),
    "tuple_type": _not("a list"),
    "model_type": _not("a table"),
    "model_attributes_type": _not("a table"),
}
