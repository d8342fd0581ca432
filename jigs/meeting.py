"""Where two knowns meet: every direction that has both.

Owns the search. Imports `known_curves` and `roots`.
"""

from __future__ import annotations

import math

from jigs.inside import Slopes
from jigs.known_curves import STEEPEST, Beside, Case, Even, Known, Piece, Straight, applies, is_leg, off_by
from jigs.roots import Flat, along, plus, product, real_roots, sampled_roots

# A solved leg has its knowns this closely, in degrees and mm.
REPRODUCED = 1e-9
# Directions whose slopes differ by less are one.
SAME_SLOPE = 1e-7
# Lines nearer to parallel, and curves nearer to each other, say the same.
SAME_CURVE = 1e-12


def solutions(case: Case, one: tuple[str, float], other: tuple[str, float], pair: tuple[Known, Known]) -> list[Slopes]:
    """Every leg that has both knowns, the nearest to plumb first and, of two as near, the one that leans outward.

    Raises Flat where both are the same curve, if only for a stretch, or have no direction in common because they run
    alongside each other.
    """
    found: list[Slopes] = []
    for slopes in sorted(meet(*pair), key=lambda at: math.hypot(*at)):
        fits = is_leg(case, slopes) and all(_has(case, name, given, slopes) for name, given in (one, other))
        if fits and all(math.dist(slopes, before) > SAME_SLOPE for before in found):
            found.append(slopes)
    return _outward_first(case, found) if found else []


def _has(case: Case, name: str, given: float, slopes: Slopes) -> bool:
    if not name:  # the centre line, which a leg on it keeps to exactly
        return True
    return applies(case, name, slopes) and abs(off_by(case, name, given, slopes)) <= REPRODUCED


def _outward_first(case: Case, found: list[Slopes]) -> list[Slopes]:
    """Of those as near to plumb as the first, one with a rake outward leads, then one with a splay outward."""
    stance = case.stance
    nearest = [at for at in found if math.hypot(*at) <= math.hypot(*found[0]) + SAME_SLOPE]

    def outward(at: Slopes) -> tuple[bool, bool, float]:
        splay, rake = (stance.side or 1) * at[0], stance.end * at[1]
        return (rake >= -SAME_SLOPE, splay >= -SAME_SLOPE, rake + splay)

    return sorted(nearest, key=outward, reverse=True) + found[len(nearest) :]


def meet(one: Known, other: Known) -> list[Slopes]:
    """Directions on both curves, among them perhaps some that are no leg or are on the wrong ray. Raises Flat."""
    match one, other:
        case Straight(), Straight():
            return _lines(one, other)
        case Straight(), Even():
            return _line_and_even(one, other)
        case Even(), Straight():
            return _line_and_even(other, one)
        case Even(), Even():
            return _evens(one, other)
        case Beside(), _:
            return _walked(one, other)
        case _, Beside():
            return _walked(other, one)
    raise TypeError(one, other)


def _lines(one: Straight, other: Straight) -> list[Slopes]:
    parallel = one.a * other.b - one.b * other.a
    if abs(parallel) < SAME_CURVE:
        raise Flat
    x = (one.c * other.b - one.b * other.c) / parallel
    y = (one.a * other.c - one.c * other.a) / parallel
    return [(x, y)]


def _line_and_even(line: Straight, even: Even) -> list[Slopes]:
    (x0, y0), (dx, dy) = line.at(0.0), (-line.b, line.a)
    across = product((x0, dx), (x0, dx))
    p = plus(product(along(even.a, y0, dy), across), along(even.b, y0, dy), -1.0)
    return [line.at(s) for s in real_roots(p, -STEEPEST * 1.01, STEEPEST * 1.01)]


def _evens(one: Even, other: Even) -> list[Slopes]:
    p = plus(product(one.a, other.b), product(other.a, one.b), -1.0)
    if all(abs(k) < SAME_CURVE for k in p[1:]):
        raise Flat
    heights = real_roots(p, -STEEPEST * 1.01, STEEPEST * 1.01)
    return [(sign * one.across(y), y) for y in heights for sign in (1.0, -1.0)]


def _walked(beside: Beside, other: Known) -> list[Slopes]:
    """The outline is walked all along, and the other known looked at."""
    return [at for piece in beside.pieces() for at in _on_piece(piece, other)]


def _on_piece(piece: Piece, other: Known) -> list[Slopes]:
    def residual(t: float) -> float:
        return other.residual(piece.at(t))

    return [piece.at(t) for t in sampled_roots(residual, piece.t0, piece.t1, piece.samples, other.touch)]
