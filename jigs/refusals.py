"""Why knowns give no leg, by how much they miss, and the nearest values that would do.

Owns the words for knowns that cannot be had together. Imports `known_curves`, `knowns`, `meeting`, `roots`. Nothing
here runs for a leg that can be solved.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from itertools import pairwise

from jigs.inside import MANY_PARTS, Slopes
from jigs.known_curves import CENTRED, STEEPEST, Case, Known, Piece, applies, curve, is_leg, off_by
from jigs.knowns import (
    EQUAL_FEET,
    MOST_LEAN_DEG,
    SETTLES,
    CannotSolve,
    listed,
    named,
    partners,
    places_for,
    rounded,
    said,
)
from jigs.meeting import solutions
from jigs.roots import Flat, lowest

# Knowns that miss each other by less, in degrees or mm, agree.
AGREE = 1e-6
# How finely a curve is looked over for the nearest value on it.
_FINER = 8
_GRID, _FINE = 60, 2000
_HALVINGS = 60
_ON_CENTRE_LINE = listed(("rake", "resultant", "foot_along", "inside_end", "axis"), "or")


@dataclass(frozen=True)
class Near:
    """What values of a known come about, less the one given: the nearest to it, and whether there is but one."""

    miss: float
    only: bool


def too_few(case: Case, knowns: Mapping[str, float]) -> CannotSolve:
    """The refusal of a leg with a known too few."""
    if case.stance.side == 0:
        who = f"{EQUAL_FEET} does not say" if knowns else "nothing says"
        return CannotSolve(f"{who} how far the leg on the centre line leans", f"give one of {_ON_CENTRE_LINE}")
    if not knowns:
        return CannotSolve(
            "nothing says how the leg leans", "give two, such as splay and rake, or inside_side and inside_end"
        )
    (name,) = knowns
    return CannotSolve(f"{name} alone says {SETTLES[name]}", f"add one of {listed(partners(name), 'or')}")


def sideways(names: Sequence[str]) -> CannotSolve:
    """The refusal of what has no meaning for a leg on the centre line."""
    many = len(names) > 1
    rule = (
        f"a leg on the centre line leans to neither side, so {listed(names)} {'say' if many else 'says'} nothing of it"
    )
    return CannotSolve(rule, f"leave {'them' if many else 'it'} out and give one of {_ON_CENTRE_LINE}")


def never_meet(case: Case, one: tuple[str, float], other: tuple[str, float], pair: tuple[Known, Known]) -> CannotSolve:
    """The refusal of two knowns that no leg has together, or that many legs have."""
    near = _nearest(case, one, other, pair[0])
    if not one[0]:
        return _none_centred(case, other, near)
    back = _nearest(case, other, one, pair[1])
    if near is None:
        return _unmeasured(case, one, other, pair[0])
    if back is None:
        return _unmeasured(case, other, one, pair[1])
    if near.only or abs(near.miss) <= AGREE:
        return _say_the_same(case, one, other, near)
    said_one = named(*one, case.units)
    rule = (
        f"no leg has both {said_one} and {named(*other, case.units)}: with {said_one} {_falls_short(case, other, near)}"
    )
    cures = [_cure(case, other, near, (one, pair[0])), _cure(case, one, back, (other, pair[1]))]
    best = " or ".join(cure for cure in cures if cure)
    return CannotSolve(rule, f"the nearest that would do is {best}" if best else "leave one of them out")


def _unmeasured(case: Case, kept: tuple[str, float], wanted: tuple[str, float], known: Known) -> CannotSolve:
    """Why the wanted known means nothing wherever the other is kept."""
    if _nearest(case, kept, kept, known) is None:
        return out_of_reach(case, kept)
    name, rule = wanted[0], f"with {named(*kept, case.units)} "
    if name == "sightline":
        return CannotSolve(rule + "the leg stands plumb and has no sightline", "leave sightline out")
    way, instead = ("side", "foot_across") if name == "inside_side" else ("end", "foot_along")
    rule += f"the foot has no seat at its {way} to be inside of, so {name} means nothing"
    return CannotSolve(rule, f"give {instead} in place of {name}")


def _none_centred(case: Case, known: tuple[str, float], near: Near | None) -> CannotSolve:
    if near is None:
        return out_of_reach(case, known)
    if known[0] == EQUAL_FEET:
        return too_few(case, dict([known]))
    rule = f"no leg on the centre line has {named(*known, case.units)}: {_falls_short(case, known, near)}"
    return CannotSolve(rule, f"the nearest that would do is {_cure(case, known, near, (('', 0.0), CENTRED))}")


def _falls_short(case: Case, known: tuple[str, float], near: Near) -> str:
    name, given = known
    places = places_for(near.miss)
    comes, off = said(name, given + near.miss, case.units, places), said(name, abs(near.miss), case.units, places)
    return f"the nearest {name} is {comes}, {off} {'more' if near.miss > 0.0 else 'less'}"


def _cure(case: Case, known: tuple[str, float], near: Near, kept: tuple[tuple[str, float], Known]) -> str:
    """The nearest round value that a leg has with the other known kept, or nothing."""
    name, given = known
    for steps in (1, 2, 10):
        value = rounded(name, given + near.miss, case.units, steps if near.miss > 0.0 else -steps)
        if name != EQUAL_FEET and _has_leg(case, kept, (name, value)):
            return f"{name} {said(name, value, case.units)}"
    return ""


def _has_leg(case: Case, kept: tuple[tuple[str, float], Known], known: tuple[str, float]) -> bool:
    try:
        return bool(solutions(case, kept[0], known, (kept[1], curve(case, *known))))
    except Flat:
        return False


def _say_the_same(case: Case, one: tuple[str, float], other: tuple[str, float], near: Near) -> CannotSolve:
    said_a, said_b = (named(*known, case.units) for known in (one, other))
    more = [name for name in partners(one[0]) if name in partners(other[0])]
    cure = f"keep one of them, and add one of {listed(more, 'or')}"
    name, given = other
    if abs(near.miss) <= AGREE:
        return CannotSolve(f"{said_a} and {said_b} say the same of this leg, {SETTLES[name]}", cure)
    places = places_for(near.miss)
    off, comes = (said(name, size, case.units, places) for size in (abs(near.miss), given + near.miss))
    return CannotSolve(f"{said_a} and {said_b} disagree by {off}: with {said_a} {name} is always {comes}", cure)


def out_of_reach(case: Case, known: tuple[str, float]) -> CannotSolve:
    """The refusal of one known that no leg has, whatever else is given."""
    name, given = known
    rule = f"{named(name, given, case.units)} is out of reach"
    misses = [off_by(case, name, given, at) for at in _everywhere(case) if applies(case, name, at)]
    if not misses:
        return CannotSolve(rule + ": there is no seat beside the foot to measure to", f"leave {name} out")
    bounds = (rounded(name, given + min(misses), case.units, 1), rounded(name, given + max(misses), case.units, -1))
    least, most = (said(name, bound, case.units) for bound in bounds)
    return CannotSolve(rule, f"legs that lean no more than {MOST_LEAN_DEG:g}° have {least} to {most}")


def disagree(case: Case, kept: Sequence[str], others: Mapping[str, float], knowns: Mapping[str, float]) -> CannotSolve:
    """The refusal of more knowns than agree: which to keep, and how much more than given the others then come to."""
    misses = listed([_missed(case, name, more, knowns[name]) for name, more in others.items()])
    rule = f"{listed(knowns)} do not agree: with {listed(kept)} {misses}"
    return CannotSolve(rule, f"keep {listed(kept)}, and leave {listed(others)} out")


def _missed(case: Case, name: str, more: float, given: float) -> str:
    places = places_for(more)
    off = said(name, abs(more), case.units, places)
    if name == EQUAL_FEET:
        return f"one neighbour's foot is {off} nearer than the other's"
    comes, wanted = (said(name, size, case.units, places) for size in (given + more, given))
    return f"{name} comes to {comes} and not {wanted}, {off} {'more' if more > 0.0 else 'less'}"


def _nearest(case: Case, along: tuple[str, float], wanted: tuple[str, float], known: Known) -> Near | None:
    """What becomes of the wanted known along the curve of another; None where no leg has that other."""
    pieces = known.pieces()
    finer = _FINER if len(pieces) <= MANY_PARTS else 1
    misses = [miss for piece in pieces for miss in _misses(case, along, wanted, piece, finer)]
    return Near(min(misses, key=abs), max(misses) - min(misses) <= AGREE) if misses else None


def _misses(case: Case, along: tuple[str, float], wanted: tuple[str, float], piece: Piece, finer: int) -> list[float]:
    """How far off the wanted known is at samples of the piece, at the limits of the legs there, where it is nearest."""

    def counts(t: float) -> bool:
        return _counts(case, along, wanted, piece.at(t))

    def miss(t: float) -> float:
        return off_by(case, *wanted, piece.at(t))

    count = piece.samples * finer
    times = [piece.t0 + (piece.t1 - piece.t0) * k / count for k in range(count + 1)]
    marks = [(t, counts(t)) for t in times]
    legs = [t for t, good in marks if good]
    legs += [_limit(counts, *((p, q) if good else (q, p))) for (p, good), (q, last) in pairwise(marks) if good != last]
    if not legs:
        return []
    legs.sort()
    best = min(range(len(legs)), key=lambda k: abs(miss(legs[k])))
    low, high = legs[max(0, best - 1)], legs[min(len(legs) - 1, best + 1)]
    valley = lowest(lambda t: abs(miss(t)) if counts(t) else math.inf, low, high)[0]
    return [miss(t) for t in (*legs, valley) if counts(t)]


def _limit(counts: Callable[[float], bool], good: float, bad: float) -> float:
    """The last place that counts on the way from a good one to a bad one."""
    for _ in range(_HALVINGS):
        middle = (good + bad) / 2
        good, bad = (middle, bad) if counts(middle) else (good, middle)
    return good


def _counts(case: Case, along: tuple[str, float], wanted: tuple[str, float], slopes: Slopes) -> bool:
    """Whether the direction is a leg that has the first known and for which the second can be measured."""
    if not is_leg(case, slopes) or not applies(case, wanted[0], slopes):
        return False
    return not along[0] or (applies(case, along[0], slopes) and abs(off_by(case, *along, slopes)) <= AGREE)


def _everywhere(case: Case) -> Iterator[Slopes]:
    """Legs of every direction, and finely those without splay, where an axis is shortest."""
    if case.stance.side:
        for k in range(_GRID * _GRID):
            angle, slope = 2 * math.pi * (k % _GRID) / _GRID, STEEPEST * (k // _GRID + 1) / _GRID
            yield from _if_leg(case, (slope * math.cos(angle), slope * math.sin(angle)))
    for k in range(-_FINE, _FINE + 1):
        yield from _if_leg(case, (0.0, STEEPEST * k / _FINE))


def _if_leg(case: Case, slopes: Slopes) -> Iterator[Slopes]:
    if is_leg(case, slopes):
        yield slopes
