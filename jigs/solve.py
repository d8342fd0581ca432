"""A leg's direction from whatever two things the maker knows of it.

Owns the choice among solutions, what is said of it, and what to do with more knowns than two. Imports `known_curves`,
`meeting`, `refusals`, `knowns`, `seats`; the spec is not read here.

A direction in the floor frame is (X, Y, -1), from mortise to foot: two numbers, settled by two knowns (one for a leg on
the centre line, whose X is 0):

- `splay`, `rake`, `resultant`, `sightline`, degrees, as `legs.lean_of` gives them: from plumb or, with `from_seat`,
  from the line square to the seat. A sightline is a ray, any angle; it runs from the leg's own end toward its own side.
- `foot_across`, mm, the foot's centre from the centre line, positive to the leg's own side; `foot_along`, mm, from
  plumb below the front edge, positive to the back.
- `inside_side`, `inside_end`, mm: as `inside` measures them.
- `axis`, mm, from the underside to the floor along the axis.

Solutions are legs that run down in both frames and lean no more than MOST_LEAN_DEG. Of several the one nearest to plumb
is taken; of two as near, the one that leans outward.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass
from itertools import combinations

from jigs.frames import Vector
from jigs.inside import MOST_PARTS, Slopes
from jigs.known_curves import CENTRED, Case, Known, Stance, curve, off_by
from jigs.knowns import ANGLES, EQUAL_FEET, KNOWNS, MOST_LEAN_DEG, SIDEWAYS, CannotSolve, decimals, listed, named
from jigs.meeting import SAME_SLOPE, solutions
from jigs.quantities import Units
from jigs.refusals import AGREE, disagree, never_meet, sideways, too_few
from jigs.roots import Flat
from jigs.seats import Blank
from layout.geometry import Point

__all__ = ["KNOWNS", "CannotSolve", "Solution", "Stance", "solve"]

# Stands for the centre line in a pair of knowns.
_ON_LINE = ("", 0.0)


@dataclass(frozen=True)
class Solution:
    """A direction (X, Y, -1) in the floor frame, how many others do as well, and a sentence for the maker on those."""

    direction: Vector
    others: int
    note: str


@dataclass(frozen=True)
class _Pair:
    names: tuple[tuple[str, float], tuple[str, float]]
    curves: tuple[Known, Known]

    def solutions(self, case: Case) -> list[Slopes]:
        return solutions(case, *self.names, self.curves)

    def refusal(self, case: Case) -> CannotSolve:
        return never_meet(case, *self.names, self.curves)

    @property
    def kept(self) -> tuple[str, ...]:
        return tuple(name for name, _ in self.names if name)


def solve(
    stance: Stance,
    knowns: Mapping[str, float],
    from_seat: bool,
    blank: Blank,
    between: tuple[Point, Point] | None = None,
    units: Units = "mm",
) -> Solution:
    """The leg that has the knowns.

    `between` are two feet in the floor's plan that the foot is to stand equally far from: one known, that counts as one
    of the two. `units` are those that messages speak in. Raises CannotSolve for knowns that are too few, disagree, say
    the same, or have no leg.
    """
    case = Case(stance, from_seat, blank, between, units)
    given = _readable(case, {EQUAL_FEET: 0.0, **knowns} if between else dict(knowns))
    upright = _upright(case, given)
    if upright is not None:
        return upright
    pairs = _pairs(case, given)
    if not pairs:
        raise too_few(case, given)
    found = _of_pair(case, pairs[0]) if len(pairs) == 1 else _of_many(case, pairs, given)
    x, y = found[0]
    direction = (x if stance.side else 0.0, y, -1.0)
    return Solution(direction, len(found) - 1, _note(case, found))


def _upright(case: Case, given: Mapping[str, float]) -> Solution | None:
    """The one leg of resultant 0, where all else that is known agrees with it; it has no sightline to be known."""
    if given.get("resultant") != 0.0 or "sightline" in given:
        return None
    x, y, z = case.stance.frame.turn_to_floor((0.0, 0.0, -1.0)) if case.from_seat else (0.0, 0.0, -1.0)
    slopes = (x / -z, y / -z)
    others = [name for name in given if name != "resultant"]
    agree = all(abs(off_by(case, name, given[name], slopes)) <= AGREE for name in others)
    needed = 0 if case.stance.side == 0 else 1
    return Solution((slopes[0], slopes[1], -1.0), 0, "") if agree and len(others) >= needed else None


def _readable(case: Case, knowns: dict[str, float]) -> dict[str, float]:
    """The knowns less what is true of every leg on the centre line. Raises CannotSolve for values that no leg has."""
    stance = case.stance
    if stance.below_underside_mm(0.0) <= 0.0:
        raise CannotSolve("the seat's underside stands on the floor or below it there", "raise the seat")
    for name, given in knowns.items():
        _refuse_value(case, name, given)
    if stance.side:
        return knowns
    said = [
        name for name in knowns if name in SIDEWAYS and not (knowns[name] == 0.0 and name in ("splay", "foot_across"))
    ]
    if said:
        raise sideways(said)
    return {name: given for name, given in knowns.items() if name not in SIDEWAYS}


def _refuse_value(case: Case, name: str, given: float) -> None:
    if name not in (*KNOWNS, EQUAL_FEET):
        raise CannotSolve(f"{name} is nothing that a leg is known by", f"give two of {listed(KNOWNS)}")
    if not math.isfinite(given):
        raise CannotSolve(f"{name} is not a number", "leave it out")
    least = 0.0 if name == "resultant" else -MOST_LEAN_DEG
    if name in ANGLES and name != "sightline" and not least <= given <= MOST_LEAN_DEG:
        rule = f"{named(name, given, case.units)} is not between {least:g} and {MOST_LEAN_DEG:g} degrees"
        raise CannotSolve(rule, "a resultant is never negative" if -MOST_LEAN_DEG <= given < least else "")
    if name.startswith("inside_") and len(case.blank.curve) > MOST_PARTS:
        rule = f"{name} is measured to an outline of {MOST_PARTS} lines and curves at most"
        raise CannotSolve(f"{rule}, and this one has {len(case.blank.curve)}", "simplify it, or give splay and rake")
    if name.startswith("inside_") and case.foot.radius_mm >= case.foot.mortise[2]:
        raise CannotSolve(f"{name} needs a foot that is narrower than the leg is long", "give splay and rake")


def _pairs(case: Case, given: Mapping[str, float]) -> list[_Pair]:
    known = {name: curve(case, name, value) for name, value in given.items()}
    if case.stance.side == 0:
        return [_Pair((_ON_LINE, (name, given[name])), (CENTRED, known[name])) for name in given]
    return [_Pair(((a, given[a]), (b, given[b])), (known[a], known[b])) for a, b in combinations(given, 2)]


def _of_pair(case: Case, pair: _Pair) -> list[Slopes]:
    try:
        found = pair.solutions(case)
    except Flat:
        found = []
    if not found:
        raise pair.refusal(case)
    return found


def _of_many(case: Case, pairs: list[_Pair], given: Mapping[str, float]) -> list[Slopes]:
    """Solutions of the first pair that the other knowns agree with. Raises CannotSolve with the pair that fits best."""
    best: tuple[float, _Pair, dict[str, float]] | None = None
    for pair in pairs:
        fitting = []
        for slopes in _any_of_pair(case, pair):
            misses = {name: off_by(case, name, given[name], slopes) for name in given if name not in pair.kept}
            if max(map(abs, misses.values())) <= AGREE:
                fitting.append(slopes)
            worst = max(_at_foot_mm(case, name, miss) for name, miss in misses.items())
            if best is None or worst < best[0]:
                best = (worst, pair, misses)
        if fitting:
            return fitting
    if best is None:
        raise pairs[0].refusal(case)
    raise disagree(case, best[1].kept, {name: miss for name, miss in best[2].items() if abs(miss) > AGREE}, given)


def _any_of_pair(case: Case, pair: _Pair) -> list[Slopes]:
    try:
        return pair.solutions(case)
    except Flat:
        return []


def _at_foot_mm(case: Case, name: str, miss: float) -> float:
    """How far the foot is off for that miss, about."""
    return abs(math.radians(miss)) * case.stance.mortise[2] if name in ANGLES else abs(miss)


def _note(case: Case, found: list[Slopes]) -> str:
    if len(found) == 1:
        return ""
    taken, *others = (_leaning(case, slopes) for slopes in found)
    tie = math.hypot(*found[1]) - math.hypot(*found[0]) <= SAME_SLOPE
    have = f"{'Two' if len(found) == 2 else len(found)} leans have this"
    why = f"of two that are as near to plumb, {_outward(case, found)}" if tie else "the one nearest to plumb"
    rest = "the other is" if len(others) == 1 else "the others are"
    return f"{have}. Taken is {why}: {taken}; {rest} {listed(others)}."


def _outward(case: Case, found: list[Slopes]) -> str:
    """Which of two that lean as much is taken: see `meeting`."""
    taken, other = case.lean(found[0]), case.lean(found[1])
    for angle, word in (("rake_deg", "rakes"), ("splay_deg", "splays")):
        if getattr(taken, angle) > 0.0 >= getattr(other, angle):
            return f"the one that {word} outward"
    return "the one that leans further outward"


def _leaning(case: Case, slopes: Slopes) -> str:
    lean = case.lean(slopes)
    rake = f"rake {decimals(lean.rake_deg)}°"
    return f"splay {decimals(lean.splay_deg)}°, {rake}" if case.stance.side else rake
